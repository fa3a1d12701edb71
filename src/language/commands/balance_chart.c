/* A solved balance as a process chart.  */
#include "config.h"
#include "language/commands/note_chart.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gas/reference.h"
#include "language/balance/plant.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/wording.h"
#include "result/balance_verdict.h"
#include "result/chart.h"
#include "support/arena.h"

/* Parts below that are left out of a label.  */
static const double part_least = 1e-9;

/* The largest fraction that is known, but for one; N: there is none.  */
static size_t
largest_part (size_t n, const double fraction[], size_t but)
{
  size_t best = n;
  for (size_t c = 0; c < n; c++)
    if (c != but && fraction[c] > part_least
        && (best == n || fraction[c] > fraction[best])) {
      best = c;
    }
  return best;
}

const char *
chart_parts (struct arena *arena, size_t n, const char *const keys[], const double fraction[])
{
  size_t first = largest_part (n, fraction, n), second;
  if (first == n) {
    return NULL;
  }
  const char *one = arena_format (arena, "%s %s", keys[first],
                                  rough_text (arena, 100 * fraction[first]));
  second = largest_part (n, fraction, first);
  return second == n ? arena_format (arena, "%s mol%%", one)
                     : arena_format (arena, "%s, %s %s mol%%", one, keys[second],
                                     rough_text (arena, 100 * fraction[second]));
}

const char *
chart_figure (struct arena *arena, double value)
{
  return figure_text (arena, strtod (arena_format (arena, "%.4e", value), NULL));
}

/* "1520 +/- 12": to the second digit of the uncertainty.  */
static const char *
uncertain_text (struct arena *arena, double value, double u)
{
  const int places = (int) (1 - floor (log10 (u)));
  const double step = pow (10, places);
  return places > 0 ? arena_format (arena, "%.*f ± %.*f", places, value, places, u)
                    : arena_format (arena, "%.0f ± %.0f", round (value * step) / step,
                                    round (u * step) / step);
}

/* A stream in the units asked for; in the first one of those that `solve` takes by itself.  */
static const char *
flow_text (struct arena *arena, const struct balance_verdict *v, size_t s, bool asked)
{
  const struct verdict_stream *stream = &v->streams[s];
  const char *text = NULL;
  for (size_t u = 0; u < (asked ? v->unit_count : 1); u++) {
    if (isnan (stream->shown[u])) {
      continue;
    }
    const char *figure = stream->shown_u[u] > 0
                           ? uncertain_text (arena, stream->shown[u], stream->shown_u[u])
                           : chart_figure (arena, stream->shown[u]);
    text = arena_format (arena, "%s%s%s %s", text ? text : "", text ? ", " : "", figure,
                         v->units[u]);
  }
  return text;
}

static const char *
kind_of (const struct plant_boundary *boundary)
{
  switch ((int) boundary->line->kind) {
  case STATEMENT_SEPARATE: return "separates";
  case STATEMENT_SPLIT: return "splits";
  case STATEMENT_REACT: return "reacts";
  default: return "mixes";
  }
}

/* What a unit leaves open: the conditions of its volumes, words behind it.  */
static const char *
unit_basis (const struct evaluation *ev, const struct unit *unit, const char *text, unsigned words,
            bool state)
{
  const struct measure measure = measure_of_unit (unit);
  const char *said = arena_format (ev->arena, "%s%s", text, words & WORD_DRY ? " dry" : "");
  bool per_time;
  enum flow_basis basis = flow_basis_of (&measure, &per_time);
  if (basis != FLOW_REFERENCE) {
    return basis == FLOW_ACTUAL && !state
             ? arena_format (ev->arena, "%s (each at its own state)", said) : said;
  }
  return arena_format (ev->arena, "%s (%s %s, at %s)", said,
                       (words & WORD_REAL) || ev->settings->real_volumes ? "real" : "ideal-gas",
                       reference_family_name (measure.family),
                       ev->settings->family[measure.family].text);
}

const char *
chart_units (const struct evaluation *ev, const struct target *targets)
{
  const char *text = "flows in ";
  for (const struct target *t = targets; t; t = t->next) {
    text = arena_format (ev->arena, "%s%s%s", text, t == targets ? "" : ", ",
                         unit_basis (ev, t->unit, t->unit_text, t->words, t->state != NULL));
  }
  return text;
}

static const char *
basis_text (const struct evaluation *ev, const struct plant *plant,
            const struct balance_verdict *v, const struct target *targets)
{
  bool spread = false;
  for (size_t s = 0; s < v->stream_count; s++) {
    spread = spread || (v->unit_count > 0 && v->streams[s].shown_u[0] > 0);
  }
  const char *flows = targets ? chart_units (ev, targets)
                      : plant->unit && strcmp (v->units[0], plant->unit_text) == 0
                        ? arena_format (ev->arena, "flows in %s",
                                        unit_basis (ev, plant->unit, plant->unit_text, 0, false))
                        : arena_format (ev->arena, "flows in %s", v->units[0]);
  return arena_format (ev->arena, "%s%s; lines as wide as the flows by %s%s", flows,
                       plant->whole ? "" : ", parts in mol%", plant->by_mass ? "mass" : "amount",
                       spread ? "; ± one standard uncertainty" : "");
}

static const char *
closure_text (struct arena *arena, const struct balance_verdict *v)
{
  const char *text = v->phrase;
  if (v->clash) {
    return arena_format (arena, "%s: the knowns contradict each other; none of the flows is drawn "
                         "as known", text);
  }
  if (v->missing > 0) {
    return arena_format (arena, "%s: streams drawn pale are not known", text);
  }
  for (const struct verdict_row *row = v->facts; row; row = row->next)
    if (strcmp (row->cell[0], "mass in and out") == 0
        || strcmp (row->cell[0], "largest mismatch") == 0) {
      text = arena_format (arena, "%s; %s %s", text, row->cell[0], row->cell[1]);
    }
  if (v->tested) {
    text = arena_format (arena, "%s; global test %s, limit %s: %s", text,
                         rough_text (arena, v->chi2), rough_text (arena, v->critical),
                         v->passed ? "they agree" : "THEY DO NOT AGREE");
  }
  for (size_t i = 0; i < v->negative.count; i++) {
    text = arena_format (arena, "%s%s %s", text, i ? "," : "; impossible, flows below zero:",
                         v->negative.at[i]);
  }
  return text;
}

static int
box_of (size_t boundary)
{
  return boundary == NO_BOUNDARY ? CHART_OUTSIDE : (int) boundary;
}

const struct chart *
balance_chart (const struct evaluation *ev, const struct plant *plant,
               const struct balance_verdict *v, const struct target *targets)
{
  struct arena *arena = ev->arena;
  struct chart_box *boxes = ARENA_ARRAY (arena, plant->boundary_count, struct chart_box);
  struct chart_arrow *arrows = ARENA_ARRAY (arena, plant->stream_count, struct chart_arrow);
  struct chart *chart = ARENA_NEW (arena, struct chart);
  size_t count = 0;
  for (size_t b = 0; b < plant->boundary_count; b++) {
    boxes[b] = (struct chart_box) { plant->boundary[b].name, kind_of (&plant->boundary[b]) };
  }
  for (size_t s = 0; s < plant->stream_count; s++) {
    const struct plant_stream *stream = &plant->stream[s];
    const struct verdict_stream *said = &v->streams[s];
    if (stream->from == NO_BOUNDARY && stream->to == NO_BOUNDARY) {
      continue;
    }
    arrows[count++] = (struct chart_arrow) {
      .name = stream->name, .flow = flow_text (arena, v, s, targets != NULL),
      .parts = chart_parts (arena, v->component_count, v->components, said->fractions),
      .amount = v->mass ? said->mass_flow : said->molar_flow,
      .from = box_of (stream->from), .to = box_of (stream->to) };
  }
  *chart = (struct chart) { .title = arena_format (arena, "Balance %s", plant->name),
                            .basis = basis_text (ev, plant, v, targets),
                            .closure = closure_text (arena, v), .boxes = boxes,
                            .box_count = plant->boundary_count, .arrows = arrows,
                            .arrow_count = count };
  return chart;
}
