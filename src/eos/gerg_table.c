#include "config.h"
#include "eos/gerg_table.h"

#include "gerg_rows.h"

_Static_assert (sizeof gerg_components / sizeof gerg_components[0] == GERG_COUNT, "components");
_Static_assert (sizeof gerg_ideals / sizeof gerg_ideals[0] == GERG_COUNT, "ideal-gas parts");
_Static_assert (sizeof gerg_pairs / sizeof gerg_pairs[0] == GERG_PAIRS, "pairs");
_Static_assert (sizeof gerg_exponents / sizeof gerg_exponents[0] <= HELMHOLTZ_GROUPS, "phi");
_Static_assert (sizeof gerg_slots / sizeof gerg_slots[0] <= HELMHOLTZ_SLOTS, "slots");

/* A pure fluid has a loop where tau > 1.  The bound leaves room for mixtures, whose critical
   temperature by the equation is not quite T_r.                                                 */
const struct gerg_table gerg_table = {
  .form = {
    .exponents = gerg_exponents,
    .slots = gerg_slots,
    .slot_count = sizeof gerg_slots / sizeof gerg_slots[0],
    .loop_tau = 0.8,
  },
  .cover = {
    .keys = gerg_components[0].key,
    .stride = sizeof gerg_components[0],
    .count = GERG_COUNT,
  },
  .components = gerg_components,
  .pairs = gerg_pairs,
  .ideals = gerg_ideals,
  .terms = gerg_terms,
  .pure_first = gerg_pure_first,
  .departure_first = gerg_departure_first,
};
