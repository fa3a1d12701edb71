#include "config.h"
#include "language/evaluate/value.h"

#include <math.h>

struct measure
measure_of_unit (const struct unit *unit)
{
  return (struct measure) { unit->dimension, unit->sort, unit->ratio, unit->family,
                            unit->family_power };
}

bool
measure_equal (struct measure a, struct measure b)
{
  return dimension_equal (a.dimension, b.dimension) && a.ratio == b.ratio
         && a.family_power == b.family_power
         && (a.family_power == 0 || a.family == b.family);
}

struct value
value_number (double number)
{
  return (struct value) { .kind = VALUE_QUANTITY, .si = number, .T = UNSTATED, .p = UNSTATED,
                          .oxygen = UNSTATED };
}
