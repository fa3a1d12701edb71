/* The tables of calorific values as they are read (private to calorific*.c).  SI units.  */
#ifndef PROPERTY_CALORIFIC_PRIVATE_H
#define PROPERTY_CALORIFIC_PRIVATE_H

#include "property/calorific.h"

struct arena; struct map;

/* Temperatures of combustion of the standard, in this order; those of metering are the first.  */
enum { AT_0_DEGC, AT_15_DEGC, AT_60_DEGF, AT_20_DEGC, AT_25_DEGC, COMBUSTIONS,
       METERINGS = AT_25_DEGC };

enum { ATOM_C, ATOM_H, ATOM_N, ATOM_O, ATOM_S, ATOM_HE, ATOM_NE, ATOM_AR, ATOMS };

/* A component in one edition.  NAN where the edition has no such column.  */
struct calorific_row {
  double molar_mass;                     /* kg/mol; NAN outside the standard: the species has it */
  double H[COMBUSTIONS], u_H;            /* gross, J/mol */
  double s[METERINGS], u_s;              /* summation factor; NAN outside the standard */
  enum calorific_origin origin;
  const char *source;                    /* of the calorific value */
};

struct calorific_component {
  double atoms[ATOMS];                   /* in a molecule */
  bool known[CALORIFIC_EDITIONS];
  struct calorific_row in[CALORIFIC_EDITIONS];
};

struct calorific_constants {
  double R, u_R;                         /* J/(mol K) */
  double air_molar_mass, u_air_molar_mass;                           /* kg/mol */
  double air_Z[METERINGS], u_air_Z[METERINGS];                       /* at 101.325 kPa */
  double L[COMBUSTIONS], u_L[COMBUSTIONS];                           /* of water, J/mol */
  double u_atom[ATOMS];                  /* of the atomic weights, kg/mol */
};

struct calorific_tables {
  struct arena *arena;
  struct map *components;                /* by key */
  struct calorific_constants edition[CALORIFIC_EDITIONS];
};

extern const double calorific_temperature[COMBUSTIONS];              /* K */
extern const char *const calorific_atom[ATOMS];                      /* "C" */

/* By how much a figure with the standard uncertainty DOUBT.u is moved; 0 where it has none.  */
double calorific_move (const struct calorific_moves *, const struct calorific_doubt *doubt);

/* Null where nothing is known of it.  */
const struct calorific_component *calorific_find (const struct calorific_tables *,
                                                  const struct species *);

/* The thermochemistry outside the standard: adds what the formation table has and the standard has
   not.  DIRECTORY as for calorific_tables_create.                                               */
bool calorific_read_formation (struct calorific_tables *, const char *directory,
                               struct fault *) MUST_CHECK;
/* The component of that key, made if need be.  */
struct calorific_component *calorific_component_of (struct calorific_tables *, const char *key);

/* The steps from the sums to the figure WANTED of a question.  */
void calorific_record (const struct calorific_tables *, const struct composition *,
                       const struct calorific_question *, const struct calorific *);

/* Summation factor of a component outside the standard at T, root of -B p0/(RT), with the sign of
   -B, B by corresponding states; *U is its standard uncertainty.  False without critical
   constants.                                                                                    */
bool calorific_summation (const struct species *, double T, double *s, double *u);

#endif
