/* The figures of AGA8 DETAIL, made from tables/aga8_*.tsv at build time.  */
#ifndef EOS_AGA8_TABLE_H
#define EOS_AGA8_TABLE_H

#include "eos/cover.h"
#include "eos/helmholtz.h"

enum { AGA8_COUNT = 21, AGA8_PAIRS = AGA8_COUNT * (AGA8_COUNT - 1) / 2, AGA8_TERMS = 58,
       AGA8_VIRIAL_TERMS = 18 };

/* Molar mass (kg/mol) and the characterization parameters: energy E (K), size K ((dm3/mol)^(1/3)),
   orientation G, quadrupole Q, high temperature F, dipole S, association W.                     */
struct aga8_component { char key[COVER_KEY]; double molar_mass, E, K, G, Q, F, S, W; };

/* Of a pair i < j; pairs are sorted by i, then by j.  */
struct aga8_pair { double E, U, K, G; };

/* A slot of -1: the term is not part of the second virial coefficient, or of the rest.  */
struct aga8_term { double a, u; short g, q, f, s, w, virial_slot, slot; };

struct aga8_table {
  struct helmholtz_form form;
  struct cover cover;
  const struct aga8_component *components; /* AGA8_COUNT */
  const struct aga8_pair *pairs;           /* AGA8_PAIRS */
  const struct aga8_term *terms;           /* AGA8_TERMS */
};

extern const struct aga8_table aga8_table;

/* The pair i < j.  */
static inline const struct aga8_pair *
aga8_pair_of (int i, int j)
{
  return &aga8_table.pairs[i * (2 * AGA8_COUNT - i - 1) / 2 + j - i - 1];
}

#endif
