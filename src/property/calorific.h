/* Calorific values, density, relative density and Wobbe index of a gas by ISO 6976.

   Editions 2016 and 1995.  Molar values at the standard's temperatures of combustion; volumes at
   a metering temperature and pressure, of the ideal gas or with the standard's own compression
   factor Z = 1 - p/p0 (sum x_i s_i)^2.  Gross: the water formed is condensed, and so is water
   vapour that is in the gas; net: all water stays vapour.

   A component that the standard lacks has a calorific value from enthalpies of formation at
   25 degC (formation.tsv), brought to the temperature of combustion with the heat capacities of
   the ideal gases (cp_ideal.tsv) and of liquid water, and a summation factor from the second virial
   coefficient of corresponding states.  Which these were is told.  SI units.                    */
#ifndef PROPERTY_CALORIFIC_H
#define PROPERTY_CALORIFIC_H

#include <stdbool.h>
#include "support/check.h"

struct calorific_tables; struct composition; struct fault; struct species; struct workings;

enum calorific_edition { CALORIFIC_2016, CALORIFIC_1995, CALORIFIC_EDITIONS };

/* Reads the tables (with DIRECTORY's rows in front of the built-in ones): to be called when they
   are needed first.  Owned.  Null with FAULT (kind table-row, file) if a user's row cannot be
   used.                                                                                        */
struct calorific_tables *calorific_tables_create (const char *directory,
                                                  struct fault *) MUST_CHECK;
void calorific_tables_destroy (struct calorific_tables *);           /* null is allowed */

/* A figure of the tables that is uncertain itself.  */
enum calorific_doubt_kind {
  CALORIFIC_DOUBT_HEAT,       /* gross molar calorific value of a component, J/mol */
  CALORIFIC_DOUBT_SUMMATION,  /* summation factor of a component */
  CALORIFIC_DOUBT_ATOM,       /* an atomic weight, kg/mol: the same in every component */
  CALORIFIC_DOUBT_R,          /* J/(mol K) */
  CALORIFIC_DOUBT_AIR,        /* molar mass of dry air, kg/mol */
  CALORIFIC_DOUBT_AIR_Z,      /* compression factor of dry air */
  CALORIFIC_DOUBT_WATER       /* heat of vaporisation, J/mol */
};
struct calorific_doubt {
  enum calorific_doubt_kind kind;
  const char *of;             /* key of the component, symbol of the element; else null */
  double u;                   /* standard uncertainty */
  const void *what;           /* tells it apart from all others, as long as the tables last */
};
/* Asked for every such figure that is used: by how many standard uncertainties it is moved.  */
struct calorific_moves {
  double (*by) (void *with, const struct calorific_doubt *);               /* null: none is */
  void *with;
};

struct calorific_question {
  enum calorific_edition edition;
  double T_combustion;        /* K: 0, 15, 20, 25 degC, and 60 degF (2016), within 0.01 K */
  double T_metering, p;       /* K, Pa.  Real or by_standard: 0, 15, 20 degC and 60 degF (2016),
                                 and 90 to 110 kPa; else any */
  bool real;                  /* volumes, densities and Wobbe with Z; else of the ideal gas */
  bool by_standard;           /* the standard's R and molar masses; else R of the SI and ours */
  const double *u;            /* standard uncertainties of the fractions, in their order; null: 0 */
  const double *correlation;  /* of the fractions with each other, row by row; null: none */
  struct calorific_moves moves;
  struct workings *workings;  /* where the steps to the figure WANTED go; null: nowhere */
  int wanted;                 /* enum calorific_figure */
};

/* Units J/mol, J/kg, J/m3, kg/m3, 1, J/m3, 1, kg/mol, m3/mol.  */
enum calorific_figure {
  CALORIFIC_GROSS_MOLAR, CALORIFIC_NET_MOLAR, CALORIFIC_GROSS_MASS, CALORIFIC_NET_MASS,
  CALORIFIC_GROSS_VOLUME, CALORIFIC_NET_VOLUME, CALORIFIC_WOBBE, CALORIFIC_NET_WOBBE,
  CALORIFIC_DENSITY, CALORIFIC_RELATIVE_DENSITY, CALORIFIC_Z, CALORIFIC_MOLAR_MASS,
  CALORIFIC_MOLAR_VOLUME, CALORIFIC_FIGURES
};

/* Where the calorific value of a component is from.  */
enum calorific_origin {
  CALORIFIC_STANDARD,         /* the table of the edition */
  CALORIFIC_OTHER_EDITION,    /* the table of 2016: the one of 1995 is not known here */
  CALORIFIC_FORMATION,        /* enthalpies of formation */
  CALORIFIC_FORMATION_25,     /* the same, as at 25 degC: its heat capacity is not known */
  CALORIFIC_NO_FUEL,          /* not in the standard, but needs no oxygen: zero */
  CALORIFIC_TRACE,            /* nothing known; at most 50 umol/mol, so zero */
  CALORIFIC_ORIGINS
};

/* The sums over the composition that every figure follows from: J/mol, atoms of hydrogen, kg/mol,
   and that of the summation factors.                                                            */
struct calorific {
  double G, W, M, S;
  double value[CALORIFIC_FIGURES];
  double u[CALORIFIC_FIGURES];           /* standard uncertainties; NAN for 1995, which has none */
  unsigned origins;                      /* 1 << origin, for all that the gas holds */
};

/* Kinds: range (a temperature, the pressure, or Z not above 0.9: ask for ideal volumes where only
   molar or mass values are wanted), calorific-unknown (fact: the first component without data above
   50 umol/mol), model-lacks (real, and a component outside the standard without critical
   constants), not-finite.                                                                       */
bool calorific_compute (const struct calorific_tables *, const struct composition *,
                        const struct calorific_question *, struct calorific *,
                        struct fault *) MUST_CHECK;

/* Of an enum calorific_figure: is water taken as vapour, is it a Wobbe index?  */
bool calorific_is_net (int figure);
bool calorific_is_wobbe (int figure);
/* Where the value of SPECIES is from; CALORIFIC_TRACE where there is none.  */
enum calorific_origin calorific_origin (const struct calorific_tables *, enum calorific_edition,
                                        const struct species *);
/* Molar mass of dry air (kg/mol) over which a relative density is taken.  */
double calorific_air_molar_mass (const struct calorific_tables *, enum calorific_edition,
                                 const struct calorific_moves *);
/* By how much the molar mass of a gas moves with the atomic weights, kg/mol.  */
double calorific_weights_move (const struct calorific_tables *, enum calorific_edition,
                               const struct composition *, const struct calorific_moves *);
const char *calorific_edition_name (enum calorific_edition);         /* "ISO 6976:2016" */

#endif
