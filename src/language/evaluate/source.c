#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include "support/arena.h"

void
evaluation_source (struct evaluation *ev, const struct source *source)
{
  if (!ev->describe) {
    return;
  }
  if (!seen_add (ev->arena, &ev->sources_seen, &source->what, sizeof source->what)) {
    return;
  }
  ev->sources = room_for_one (ev->arena, ev->sources, ev->source_count, &ev->source_room,
                              sizeof *ev->sources);
  ev->sources[ev->source_count++] = *source;
}

double
evaluation_shift (const struct evaluation *ev, const void *what)
{
  for (size_t i = 0; i < ev->shift_count; i++)
    if (ev->shifts[i].what == what) {
      return ev->shifts[i].by;
    }
  return 0;
}

/* ---- Figures that were typed ---- */

static double
one_of (const struct spread *spread)
{
  return spread->kind == SPREAD_EXPANDED ? 1 / spread->k
         : spread->kind == SPREAD_LIMITS ? 1 / sqrt (3.0) : 1;
}

/* The standard uncertainty in the figure's own unit: an expanded one over its k, limits over the
   square root of 3 (JCGM 100:2008, 4.3.7), a relative one times the figure.                     */
static double
standard_uncertainty (const struct node *node, double value)
{
  const struct spread *spread = node->spread;
  double u = spread->value * one_of (spread);
  if (spread->relative) {
    return 0.01 * u * fabs (value);
  }
  if (spread->unit && node->unit && spread->unit != node->unit) {
    return unit_difference_to_si (spread->unit, u) / node->unit->factor;
  }
  return u;
}

/* The unit of an uncertainty; that of a temperature on a scale is a difference.  */
static const char *
difference_unit (struct arena *arena, const struct unit *unit)
{
  return !unit ? "" : unit->sort == UNIT_POINT && fabs (unit->offset) > 0
                        ? arena_format (arena, "%s(diff)", unit->spelling) : unit->spelling;
}

/* "(k=2)", "(limits)".  */
static const char *
kind_text (struct arena *arena, const struct spread *spread)
{
  return spread->kind == SPREAD_EXPANDED ? arena_format (arena, " (k=%.9g)", spread->k)
         : spread->kind == SPREAD_LIMITS ? " (limits)" : "";
}

/* The figure as typed, a part with its name and the basis of its list.  */
static const char *
typed_text (const struct evaluation *ev, const struct node *node, const struct unit *unit)
{
  const struct spread *spread = node->spread;
  struct arena *arena = ev->arena;
  const char *of = unit ? unit->spelling : "", *blank = *of ? " " : "";
  const char *own = spread->relative ? "%" : spread->unit ? spread->unit->spelling : NULL;
  const char *text = own
    ? arena_format (arena, "%s%s%s ± %s %s", node->figure, blank, of, spread->figure, own)
    : arena_format (arena, "%s ± %s%s%s", node->figure, spread->figure, blank, of);
  const char *part = ev->part ? ev->part->text : "";
  return arena_format (arena, "%s%s%s%s", part, *part ? " " : "", text, kind_text (arena, spread));
}

static void
typed_source (struct evaluation *ev, const struct node *node, double value, const char *of)
{
  const struct spread *spread = node->spread;
  const struct unit *unit = node->unit ? node->unit
                            : !ev->part ? NULL : ev->part->unit ? ev->part->unit : ev->basis;
  bool foreign = spread->unit && !spread->relative;
  evaluation_source (ev, &(struct source) {
      .what = spread, .of = of, .limits = spread->kind == SPREAD_LIMITS,
      .text = typed_text (ev, node, unit),
      .u = foreign ? spread->value * one_of (spread) : standard_uncertainty (node, value),
      .unit = difference_unit (ev->arena, foreign ? spread->unit : unit) });
}

double
evaluation_moved (struct evaluation *ev, const struct node *node, double value)
{
  if (!node->spread) {
    return value;
  }
  if (ev->describe) {
    typed_source (ev, node, value, ev->subject);
  }
  double by = evaluation_shift (ev, node->spread);
  return fabs (by) > 0 ? value + by * standard_uncertainty (node, value) : value;
}

double
evaluation_barometer (struct evaluation *ev)
{
  const struct node *node = ev->settings->site_pressure_spread;
  if (!node) {
    return ev->settings->site_pressure;
  }
  if (ev->describe) {
    typed_source (ev, node, node->number, "site pressure");
  }
  return ev->settings->site_pressure
         + evaluation_shift (ev, node->spread) * node->unit->factor
           * standard_uncertainty (node, node->number);
}
