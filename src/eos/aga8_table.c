#include "config.h"
#include "eos/aga8_table.h"

#include "aga8_rows.h"

_Static_assert (sizeof aga8_components / sizeof aga8_components[0] == AGA8_COUNT, "components");
_Static_assert (sizeof aga8_pairs / sizeof aga8_pairs[0] == AGA8_PAIRS, "pairs");
_Static_assert (sizeof aga8_terms / sizeof aga8_terms[0] == AGA8_TERMS, "terms");
_Static_assert (sizeof aga8_exponents / sizeof aga8_exponents[0] <= HELMHOLTZ_GROUPS, "phi");
_Static_assert (sizeof aga8_slots / sizeof aga8_slots[0] <= HELMHOLTZ_SLOTS, "slots");

/* tau is U/T here; critical temperatures are some 1.26 U, so that loops are where tau > 0.79.  The
   bound leaves room for mixtures.                                                               */
const struct aga8_table aga8_table = {
  .form = {
    .exponents = aga8_exponents,
    .slots = aga8_slots,
    .slot_count = sizeof aga8_slots / sizeof aga8_slots[0],
    .loop_tau = 0.65,
  },
  .cover = {
    .keys = aga8_components[0].key,
    .stride = sizeof aga8_components[0],
    .count = AGA8_COUNT,
  },
  .components = aga8_components,
  .pairs = aga8_pairs,
  .terms = aga8_terms,
};
