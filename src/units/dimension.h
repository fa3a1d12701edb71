/* Dimensions: the exponents of length, mass, time, temperature and amount of substance.  */
#ifndef UNITS_DIMENSION_H
#define UNITS_DIMENSION_H

#include <stdbool.h>
#include "support/check.h"

struct arena;

struct dimension { signed char length, mass, time, temperature, amount; };

/* Asked many times for every figure.  */
static inline bool
dimension_equal (struct dimension a, struct dimension b)
{
  return a.length == b.length && a.mass == b.mass && a.time == b.time
         && a.temperature == b.temperature && a.amount == b.amount;
}
struct dimension dimension_times (struct dimension, struct dimension);
struct dimension dimension_over (struct dimension, struct dimension);
struct dimension dimension_power (struct dimension, int);
bool dimension_is_none (struct dimension);
/* The SI unit of a dimension: "Pa", "mol/s", "kg/(m s)"; "1" for a plain number.  */
const char *dimension_text (struct arena *, struct dimension);
/* "mass per time", "pressure", ... in the trade's words; null where there is no word for it.  */
const char *dimension_name (struct dimension);
/* The dimension of a quantity by its name, for the rows of tables/units.tsv.  False: no such
   quantity.                                                                                   */
bool dimension_find (const char *name, struct dimension *) MUST_CHECK;

extern const struct dimension DIMENSION_NONE, DIMENSION_LENGTH, DIMENSION_MASS, DIMENSION_TIME,
  DIMENSION_TEMPERATURE, DIMENSION_AMOUNT, DIMENSION_VOLUME, DIMENSION_PRESSURE,
  DIMENSION_ENERGY, DIMENSION_POWER, DIMENSION_MASS_FLOW, DIMENSION_MOLAR_FLOW,
  DIMENSION_VOLUME_FLOW, DIMENSION_DENSITY, DIMENSION_MOLAR_DENSITY, DIMENSION_MOLAR_MASS;

#endif
