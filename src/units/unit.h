/* Units as the trade writes them, read from the table of units and from expressions.

   A unit turns a figure into SI: si = figure * factor + offset.  Beside its factor it carries
   what the bare factor cannot tell: whether a temperature is a point or a difference, whether a
   pressure is gauge, absolute or vacuum, what a fraction is a fraction of, and whether a volume
   is counted at reference conditions (Nm3, scf) or declared actual (acf).

   A volume at reference conditions is kept as a volume with its family and the power it stands
   in (+1: Nm3/h, -1: mg/Nm3); what the family's conditions are is a setting, known higher up.   */
#ifndef UNITS_UNIT_H
#define UNITS_UNIT_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "units/dimension.h"

struct arena; struct fault; struct unit_table;

enum unit_sort {
  UNIT_SCALE,                     /* plain factor; a bare pressure (bar, psi) too */
  UNIT_POINT,                     /* a temperature on a scale: degC degF K degR */
  UNIT_DIFFERENCE,                /* K(diff) degC(diff) degF(diff) */
  UNIT_ABSOLUTE,                  /* bar(a), psia */
  UNIT_GAUGE,                     /* bar(g), psig: above the site's barometer */
  UNIT_VACUUM,                    /* mbar(vac): below the site's barometer */
  UNIT_HUMIDITY,                  /* %RH */
  UNIT_OXYGEN                     /* %O2: reference oxygen, dry */
};

/* What a dimensionless unit is a share of.  */
enum ratio { RATIO_NONE,          /* not a share */
             RATIO_PLAIN,         /* %: of what is not said */
             RATIO_MOLE,          /* mol%, ppm, ppb, mol/mol, umol/mol */
             RATIO_MASS,          /* mass%, ppmw, kg/kg */
             RATIO_VOLUME,        /* vol%, m3/m3, L/m3 */
             RATIO_ENERGY };      /* MJ/MJ */

enum reference_family { FAMILY_NONE, FAMILY_NORMAL, FAMILY_STANDARD, FAMILY_SCF, FAMILY_SCCM,
                        FAMILY_COUNT };

struct unit {
  const char *spelling;           /* ASCII twin, as typed otherwise: "Nm3/h", "kJ/(mol*K)" */
  double factor, offset;
  struct dimension dimension;
  enum unit_sort sort;
  enum ratio ratio;
  enum reference_family family;
  int family_power;               /* +1, -1, 0 */
  bool actual;                    /* acf, acfm: an actual volume by its name */
};

/* Reads tables/units.tsv, with DIRECTORY's on top (null: none).  The table keeps every unit it
   was once asked for, so that a unit's address tells it apart and asking again is one look-up.
   Owned by the caller.  Null with FAULT if a row is bad.                                      */
struct unit_table *unit_table_create (const char *directory, struct fault *) MUST_CHECK;
void unit_table_destroy (struct unit_table *);

/* The unit spelled by the N bytes at TEXT (no blanks in it; UTF-8 twins are understood).
   Borrowed from the table.  Null with FAULT otherwise; kinds: unit-unknown (hint: what may have
   been meant), unit-open (two meanings: cfm, ton, gal, MBtu), unit-form (a/b*c; %vol).  Their
   facts: the text (unit-open: the word in it), what to do, and, where a spelling that reads is
   offered, that spelling (and a second one as likely).  A null FAULT asks only: no hint is
   looked for.                                                                                 */
const struct unit *unit_find (struct unit_table *, const char *text, size_t n,
                              struct fault *) MUST_CHECK;

/* One row of tables/units.tsv, for `show UNIT`, `list units` and completion.  */
struct unit_row { const char *spelling, *quantity, *name, *factor, *source; bool users; };
size_t unit_table_rows (const struct unit_table *);
struct unit_row unit_table_row (const struct unit_table *, size_t i);
/* The row of a spelling or an alias, perhaps with a prefix (its factor is that of the bare one).
   False: it is an expression, or no unit.                                                      */
bool unit_row_find (const struct unit_table *, const char *spelling, struct unit_row *) MUST_CHECK;

/* "Nm3", "Sm3", "scf", "sccm": what the settings call the family.  */
const char *reference_family_name (enum reference_family);

double unit_to_si (const struct unit *, double figure);
double unit_from_si (const struct unit *, double si);

/* Do both measure the same thing, so that figures convert by factor and offset alone?  Compares
   dimension, ratio, family and family power; not gauge with absolute, not points with
   differences.                                                                                */
bool unit_same_measure (const struct unit *, const struct unit *);

/* The unit for a difference of figures in UNIT: its factor without its offset.  */
double unit_difference_to_si (const struct unit *, double figure);

#endif
