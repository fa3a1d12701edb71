/* The figures of GERG-2008, made from tables/gerg_*.tsv at build time.  */
#ifndef EOS_GERG_TABLE_H
#define EOS_GERG_TABLE_H

#include "eos/cover.h"
#include "eos/helmholtz.h"

enum { GERG_COUNT = 21, GERG_PAIRS = GERG_COUNT * (GERG_COUNT - 1) / 2 };

/* Molar mass (kg/mol), T_c (K) and rho_c (mol/m3).  */
struct gerg_component { char key[COVER_KEY]; double molar_mass, T_c, rho_c; };

/* The pair of components i < j, sorted by i, then by j.  departure -1: none.  */
struct gerg_pair { short i, j; double beta_v, gamma_v, beta_T, gamma_T, F; short departure; };

/* n[0] is n3 of the table, n[1] is n4, ...; theta[0] is theta4.  n2 and theta in K.  */
struct gerg_ideal { double n1, n2, n[5], theta[4]; };

struct gerg_term { short slot; double n; };

struct gerg_table {
  struct helmholtz_form form;
  struct cover cover;
  const struct gerg_component *components; /* GERG_COUNT */
  const struct gerg_pair *pairs;           /* GERG_PAIRS */
  const struct gerg_ideal *ideals;
  const struct gerg_term *terms;
  /* Component i has the terms pure_first[i] up to before pure_first[i + 1]; functions too.  */
  const short *pure_first, *departure_first;
};

extern const struct gerg_table gerg_table;

/* The place of the pair i < j.  */
static inline int
gerg_pair_at (int i, int j)
{
  return i * (2 * GERG_COUNT - i - 1) / 2 + j - i - 1;
}

#endif
