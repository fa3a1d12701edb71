/* Lower flammable limits that the user states.  */
#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include "property/flammability.h"
#include "support/arena.h"

size_t
limits_set (const struct settings *settings, struct evaluation *ev, struct arena *arena,
            struct flammable_limits **limits)
{
  size_t n = 0, i = 0;
  for (const struct stated_limit *one = settings->limits; one; one = one->next) {
    n++;
  }
  *limits = ARENA_ARRAY (arena, n, struct flammable_limits);
  for (const struct stated_limit *one = settings->limits; one; one = one->next, i++) {
    const struct node *figure = one->figure;
    double number = ev ? evaluation_moved (ev, figure, figure->number) : figure->number;
    (*limits)[i] = (struct flammable_limits) { one->species, unit_to_si (figure->unit, number),
                                               UNSTATED };
  }
  return n;
}
