/* Species: the table of components, their names, constants and where each figure is from.

   A species table is read once and outlives all that borrows from it.  Plain chemical formulas
   that are not in the table get a species of their own on first use (molar mass only), and so do
   gases known only by a molar mass.  SI units; NAN where the table has no figure.               */
#ifndef GAS_SPECIES_H
#define GAS_SPECIES_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct fault; struct text; struct species_table;

enum species_origin { SPECIES_TABLE, SPECIES_USERS, SPECIES_FORMULA, SPECIES_STATED };

struct species {
  const char *key, *name, *synonyms, *cas, *formula;    /* formula in Hill order */
  double molar_mass;                                    /* kg/mol, from the formula */
  double critical_temperature, critical_pressure, critical_molar_volume;   /* K, Pa, m3/mol */
  double acentric_factor;
  double boiling_point;                                 /* K at 101.325 kPa */
  bool sublimes;                                        /* boiling_point is a sublimation point */
  double exposure_limit;                                /* 8 h average, mol/mol; NAN: none known */
  const char *exposure_source;                          /* "2009/161/EU" */
  const char *flags;                                    /* "toxic|flammable", never null */
  double lower_flammable, upper_flammable;              /* mol/mol in air; NAN: not flammable */
  const char *flammable_source;
  const char *source;                                   /* of the constants */
  const char *note;
  enum species_origin origin;
  double stated_gross, stated_net;                      /* J/mol, of SPECIES_STATED; 0: unstated */
};

/* What is known of a gas without a composition: kg/mol, and J/mol or 0.  */
struct stated_figures { double molar_mass, gross, net; };

/* Reads species, elements, ambiguous names, exposure and flammability tables.  Owned.  */
struct species_table *species_table_create (const char *directory, struct fault *) MUST_CHECK;
void species_table_destroy (struct species_table *);
size_t species_table_size (const struct species_table *);                /* table rows only */
const struct species *species_table_at (const struct species_table *, size_t i);

enum species_match { SPECIES_NONE, SPECIES_KEY, SPECIES_SYNONYM, SPECIES_PLAIN_FORMULA,
                     SPECIES_AMBIGUOUS };

/* What the N bytes at NAME stand for.  Keys are matched letter by letter and come first; in names,
   synonyms and ambiguous names capitals, blanks and hyphens do not count, but synonyms of two or
   three capitals (MM, IPA) are matched like keys.  Subscript digits are read as digits.  *FOUND is
   set for KEY, SYNONYM and PLAIN_FORMULA; *CANDIDATES (borrowed, parted by commas) for AMBIGUOUS.
   A plain formula (C7H14O2, S) needs known elements only; one that is a key but for its capitals
   (co2, Co) is taken for a misspelling: NONE.                                                  */
enum species_match species_find (struct species_table *, const char *name, size_t n,
                                 const struct species **found, const char **candidates);

/* The longest run of words, beginning at TEXT and parted by single blanks, that is a name of
   several words ("carbon dioxide", "dry air"); its bytes, 0 if none.  "dry air" counts.        */
size_t species_longest_name (const struct species_table *, const char *text, size_t n);

/* A gas of which only these figures are known.  Made once for a name and figures.  */
const struct species *species_stated (struct species_table *, const char *name,
                                      const struct stated_figures *) MUST_CHECK;

/* The key nearest to a misspelt name, or null.  */
const char *species_nearest (const struct species_table *, const char *name, size_t n);

/* Calls VISIT for every key, name and synonym (completion).  */
void species_each_name (const struct species_table *, void (*visit) (const char *, void *),
                        void *with);

/* Atoms of ELEMENT ("N") in a formula; 0 if none.  */
double species_atoms (const struct species *, const char *element);

#endif
