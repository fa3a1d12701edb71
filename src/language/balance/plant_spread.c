/* What the uncertain figures of a line do to the facts it states: each is moved up and down by
   one standard uncertainty and the line read again (JCGM 100:2008, 5.1.3 note 2).  So the T and P
   of a meter, and figures behind a name, count by what they do to its flow.                     */
#include "config.h"
#include "language/balance/plant_private.h"

#include <math.h>
#include "gas/composition.h"
#include "support/arena.h"

/* The line once more with WHAT moved; null: it cannot be read so.  */
static const struct raw_fact *
read_moved (struct reader_state *r, plant_line_reader *read, const void *line, const void *what,
            double by)
{
  struct evaluation again;
  struct fault fault;
  struct settings *settings = ARENA_NEW (r->ev->arena, struct settings);
  struct shift *shift = ARENA_NEW (r->ev->arena, struct shift);
  struct reader_state aside = *r;
  *settings = *r->ev->settings;
  settings->ignore_total = true;
  *shift = (struct shift) { what, by };
  fault_init (&fault, r->ev->arena);
  evaluation_again (&again, r->ev, &fault);
  again.settings = settings;
  again.overridden = r->ev->overridden;
  again.shifts = shift;
  again.shift_count = 1;
  aside.ev = &again;
  aside.raw = NULL;
  aside.raw_count = aside.raw_room = 0;
  return read (&aside, line) ? aside.raw : NULL;
}

/* What a part was moved by from x to X, where all others gave way in proportion: a list that was
   closed again, X = (x + u)/(1 + u).                                                            */
static double
before_closing (double x, double moved)
{
  return moved < 1 ? (moved - x) / (1 - moved) : 0;
}

/* The part that moved most.  Of two that moved as far, as both of two parts do, it is the one that
   rose with its figure.                                                                         */
static size_t
part_moved_most (const struct raw_fact *up, const struct raw_fact *down)
{
  size_t most = 0;
  double by = 0;
  for (size_t i = 0; i < up->gas->count; i++) {
    double dx = up->gas->fraction[i] - down->gas->fraction[i];
    if (fabs (dx) > fabs (by) * (1 + 1e-9) || (dx > 0 && dx > fabs (by) * (1 - 1e-9))) {
      most = i;
      by = dx;
    }
  }
  return most;
}

/* Of a part that moved alone before the list was closed again, what it itself moved by.  Any other
   way of moving counts as it is.                                                                */
static void
add_parts (struct raw_fact *raw, const struct raw_fact *up, const struct raw_fact *down)
{
  size_t n = raw->gas->count;
  if (!up->gas || !down->gas || up->gas->count != n || down->gas->count != n) {
    return;
  }
  bool alone = true;
  size_t most = part_moved_most (up, down);
  double d = 0.5 * (up->gas->fraction[most] - down->gas->fraction[most]);
  double left = 1 - raw->gas->fraction[most];
  for (size_t i = 0; i < n; i++) {
    double dx = 0.5 * (up->gas->fraction[i] - down->gas->fraction[i]);
    double share = -d * raw->gas->fraction[i] / (left > 1e-12 ? left : 1);
    alone = alone && (i == most || fabs (dx - share) < 1e-3 * fabs (d));
  }
  for (size_t i = 0; i < n; i++) {
    double dx = 0.5 * (up->gas->fraction[i] - down->gas->fraction[i]);
    double x = raw->gas->fraction[i];
    if (alone) {
      dx = i != most ? 0 : 0.5 * (before_closing (x, up->gas->fraction[i])
                                  - before_closing (x, down->gas->fraction[i]));
    }
    if (fabs (dx) > 0) {
      raw->gas_u[i] = hypot (isnan (raw->gas_u[i]) ? 0 : raw->gas_u[i], dx);
    }
  }
}

static void
add_source (struct raw_fact *raw, const struct raw_fact *up, const struct raw_fact *down)
{
  if (raw->kind == FACT_COMPOSITION) {
    add_parts (raw, up, down);
    return;
  }
  double half = 0.5 * (up->value - down->value);
  if (fabs (half) > 1e-14 * fabs (raw->value)) {
    raw->u = hypot (isnan (raw->u) ? 0 : raw->u, half);
  }
}

/* Half the last digit typed, as the fact counts it.  */
static void
round_fact (struct raw_fact *raw)
{
  const struct node *figure = raw->digits;
  if (figure && !raw->about.basis && fabs (figure->number) > 0) {
    raw->rounding = fabs (raw->value) * digits_rounding (figure) / fabs (figure->number);
  }
}

bool
plant_read_spread (struct reader_state *r, plant_line_reader *read, const void *line,
                   const struct plant *base)
{
  struct evaluation *ev = r->ev, sub = *ev;
  size_t first = r->raw_count;
  sub.describe = true;
  sub.sources = NULL;
  sub.source_count = sub.source_room = 0;
  sub.sources_seen = (struct seen) { 0 };
  r->ev = &sub;
  bool done = read (r, line);
  r->ev = ev;
  ev->touched |= sub.touched;
  ev->worked = sub.worked;
  if (ev->describe) {
    ev->assumptions = sub.assumptions;
    ev->assumption_count = sub.assumption_count;
    ev->assumption_room = sub.assumption_room;
  }
  ev->used = sub.used;
  ev->used_count = sub.used_count;
  ev->used_room = sub.used_room;
  for (size_t i = first; done && i < r->raw_count; i++) {
    round_fact (&r->raw[i]);
  }
  for (size_t k = 0; done && k < sub.source_count; k++) {
    evaluation_source (ev, &sub.sources[k]);
    if (base) {
      continue;
    }
    const struct raw_fact *up = read_moved (r, read, line, sub.sources[k].what, 1);
    const struct raw_fact *down = read_moved (r, read, line, sub.sources[k].what, -1);
    for (size_t i = first; up && down && i < r->raw_count; i++) {
      add_source (&r->raw[i], &up[i - first], &down[i - first]);
    }
  }
  return done;
}
