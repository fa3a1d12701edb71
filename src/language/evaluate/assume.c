#include "config.h"
#include "language/evaluate/evaluation.h"

#include <string.h>
#include "language/session_private.h"
#include "support/arena.h"

void
evaluation_init (struct evaluation *ev, struct session *session, struct result *result,
                 struct fault *fault)
{
  *ev = (struct evaluation) { .session = session, .arena = fault->arena,
                              .settings = session_settings (session), .fault = fault,
                              .result = result, .describe = true };
}

void
evaluation_again (struct evaluation *ev, const struct evaluation *first, struct fault *fault)
{
  evaluation_init (ev, first->session, NULL, fault);
  ev->arena = first->arena;
  ev->describe = false;
}

void
evaluation_touch (struct evaluation *ev, unsigned bits)
{
  ev->touched |= bits;
}

/* Room for one more of COUNT things of SIZE bytes.  */
static void *
room_for_one (struct arena *arena, void *things, size_t count, size_t *room, size_t size)
{
  if (count < *room) {
    return things;
  }
  *room = *room ? 2 * *room : 8;
  void *more = arena_alloc (arena, *room, size);
  if (count > 0) {
    memcpy (more, things, count * size);
  }
  return more;
}

static bool
same_text (const char *a, const char *b)
{
  return a == b || (a && b && strcmp (a, b) == 0);
}

void
evaluation_assume (struct evaluation *ev, const struct assumption *new)
{
  if (!ev->describe) {
    return;
  }
  for (size_t i = 0; i < ev->assumption_count; i++) {
    const struct assumption *old = &ev->assumptions[i];
    if (old->kind == new->kind && same_text (old->fact[0], new->fact[0])
        && same_text (old->fact[1], new->fact[1])) {
      return;
    }
  }
  ev->assumptions = room_for_one (ev->arena, ev->assumptions, ev->assumption_count,
                                  &ev->assumption_room, sizeof *ev->assumptions);
  ev->assumptions[ev->assumption_count++] = *new;
}

void
evaluation_source (struct evaluation *ev, const struct spread *source)
{
  for (size_t i = 0; i < ev->source_count; i++)
    if (ev->sources[i] == source) {
      return;
    }
  ev->sources = room_for_one (ev->arena, ev->sources, ev->source_count, &ev->source_room,
                              sizeof *ev->sources);
  ev->sources[ev->source_count++] = source;
}

void
evaluation_use (struct evaluation *ev, struct definition *definition)
{
  for (size_t i = 0; i < ev->used_count; i++)
    if (ev->used[i] == definition) {
      return;
    }
  ev->used = room_for_one (ev->arena, ev->used, ev->used_count, &ev->used_room,
                           sizeof *ev->used);
  ev->used[ev->used_count++] = definition;
}

/* The standard uncertainty in the figure's own unit: an expanded one over its k, limits over the
   square root of 3 (JCGM 100:2008, 4.3.7), a relative one times the figure.                     */
static double
standard_uncertainty (const struct spread *spread, const struct unit *unit, double value)
{
  double u = spread->value;
  if (spread->relative) {
    u *= 0.01 * (value < 0 ? -value : value);
  } else if (spread->unit && unit && spread->unit != unit) {
    u = unit_difference_to_si (spread->unit, u) / unit->factor;
  }
  if (spread->kind == SPREAD_EXPANDED) {
    u /= spread->k;
  } else if (spread->kind == SPREAD_LIMITS) {
    u /= 1.7320508075688772;
  }
  return u;
}

double
evaluation_moved (struct evaluation *ev, const struct spread *spread, const struct unit *unit,
                  double value)
{
  if (!spread) {
    return value;
  }
  evaluation_source (ev, spread);
  return spread == ev->moved ? value + ev->moved_by * standard_uncertainty (spread, unit, value)
                             : value;
}
