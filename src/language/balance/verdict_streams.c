/* The solution stream by stream: for machines, and as a table of what is fixed.  */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <float.h>
#include <math.h>
#include "gas/species.h"
#include "language/session_private.h"
#include "result/result.h"
#include "support/arena.h"

/* The total of a stream, or (C below the components) one of its parts, as a form.  */
static struct form
form_of (const struct verdict_maker *m, size_t s, size_t only)
{
  const struct plant *plant = m->plant;
  size_t n = plant->network.components, count = 0;
  struct term *terms = ARENA_ARRAY (m->arena, n, struct term);
  for (size_t c = 0; c < n; c++)
    if (only >= n || only == c) {
      terms[count++] = (struct term) { plant_column (plant, s, c), 1 };
    }
  return (struct form) { count, terms };
}

static bool
is_uncertain (const struct verdict_maker *m)
{
  return m->solution->covariance != NULL;
}

static double
uncertainty_of (const struct verdict_maker *m, size_t s, size_t c)
{
  const struct plant *plant = m->plant;
  size_t n = plant->network.components;
  if (!is_uncertain (m)) {
    return UNSTATED;
  }
  struct form total = form_of (m, s, n), part = form_of (m, s, c);
  double u = c >= n ? solution_uncertainty (m->solution, &plant->network, &total, NULL)
                    : solution_uncertainty (m->solution, &plant->network, &part, &total);
  double of = c >= n ? plant_total (plant, s) : 1;
  return u > 1e-12 * fabs (of) ? u : UNSTATED;          /* less is rounding */
}

static void
fill_stream (struct verdict_maker *m, size_t s, struct verdict_stream *out)
{
  const struct plant *plant = m->plant;
  const struct solution *solution = m->solution;
  size_t n = plant->network.components;
  double *x = ARENA_ARRAY (m->arena, n, double), *u = ARENA_ARRAY (m->arena, n, double);
  const struct loose *loose = solution->loose;
  bool total = solution->fixed_total[s] && solution->status != BALANCE_CONTRADICTORY
               && !(loose && loose->total[s]);
  out->name = plant->stream[s].name;
  out->molar_flow = total && !plant->by_mass ? plant_total (plant, s) : UNSTATED;
  out->mass_flow = plant_is_fixed (plant, s) ? plant_mass (plant, s) : UNSTATED;
  out->uncertainty = total ? uncertainty_of (m, s, n) : UNSTATED;
  for (size_t c = 0; c < n; c++) {
    bool fixed = solution->fixed_fraction[s * n + c]
                 && solution->status != BALANCE_CONTRADICTORY
                 && !(loose && loose->fraction[s * n + c]);
    x[c] = fixed && !plant->whole ? solution->fraction[s * n + c] : UNSTATED;
    x[c] = fabs (x[c]) < DBL_EPSILON ? 0 : x[c];         /* what subtraction leaves of nothing */
    u[c] = isnan (x[c]) ? UNSTATED : uncertainty_of (m, s, c);
  }
  out->fractions = x;
  out->fractions_u = u;
}

/* ---- The table ---- */

static bool
is_shown (const struct verdict_maker *m, const struct verdict_stream *stream)
{
  bool any = !isnan (stream->shown[0]);
  for (size_t c = 0; c < m->verdict->component_count; c++) {
    any = any || !isnan (stream->fractions[c]);
  }
  return any;
}

static struct cell
number_cell (double value, double spread)
{
  struct cell cell = { .value = value, .spread = spread, .is_number = true };
  if (isnan (value)) {
    cell = (struct cell) { .text = "" };
  }
  return cell;
}

static void
stream_table (struct verdict_maker *m)
{
  const struct balance_verdict *v = m->verdict;
  size_t shown = 0, columns = v->unit_count + v->component_count, k = 0;
  for (size_t s = 0; s < v->stream_count; s++) {
    shown += is_shown (m, &v->streams[s]) ? 1 : 0;
  }
  const char **headings = ARENA_ARRAY (m->arena, columns, const char *);
  for (size_t u = 0; u < v->unit_count; u++) {
    headings[k++] = v->units[u];
  }
  for (size_t c = 0; c < v->component_count; c++) {
    headings[k++] = arena_format (m->arena, "%s mol%%", v->components[c]);
  }
  if (shown == 0) {
    return;
  }
  struct card *card = result_card (m->ev->result, m->plant->name,
                                   arena_format (m->arena, "balance, %zu stream%s", v->stream_count,
                                                 v->stream_count == 1 ? "" : "s"), columns,
                                   headings);
  card->together = 1;
  for (size_t u = 0; v->unit_basis && u < v->unit_count; u++) {
    if (v->unit_basis[u]) {
      card_add_line (m->ev->result, card, v->unit_basis[u]);
    }
  }
  for (size_t s = 0; s < v->stream_count; s++) {
    const struct verdict_stream *stream = &v->streams[s];
    if (!is_shown (m, stream)) {
      continue;
    }
    struct cell *cells = card_add_row (m->ev->result, card, stream->name);
    k = 0;
    for (size_t u = 0; u < v->unit_count; u++) {
      cells[k++] = number_cell (stream->shown[u], stream->shown_u[u]);
    }
    for (size_t c = 0; c < v->component_count; c++) {
      cells[k++] = number_cell (100 * stream->fractions[c], 100 * stream->fractions_u[c]);
    }
  }
}

bool
verdict_streams (struct verdict_maker *m, const struct target *targets)
{
  const struct plant *plant = m->plant;
  struct balance_verdict *v = m->verdict;
  struct verdict_stream *streams = ARENA_ARRAY (m->arena, plant->stream_count,
                                                struct verdict_stream);
  const char **components = ARENA_ARRAY (m->arena, plant->component_count, const char *);
  for (size_t c = 0; c < plant->component_count; c++) {
    components[c] = plant->component[c]->key;
  }
  for (size_t s = 0; s < plant->stream_count; s++) {
    fill_stream (m, s, &streams[s]);
  }
  v->mass = plant->by_mass;
  v->components = components;
  v->component_count = plant->whole ? 0 : plant->component_count;
  v->streams = streams;
  v->stream_count = plant->stream_count;
  if (plant->by_mass) {
    for (size_t s = 0; s < plant->stream_count; s++) {
      streams[s].mass_flow = plant_is_fixed (plant, s) ? plant_total (plant, s) : UNSTATED;
    }
  }
  if (!verdict_flows (m, targets, streams)) {
    return false;
  }
  if (m->ev->result && m->solution->status != BALANCE_CONTRADICTORY) {
    stream_table (m);
  }
  return true;
}

/* ---- Reactions ---- */

static bool
hangs_on_digits (const struct verdict_maker *m, size_t boundary, size_t reaction)
{
  const struct loose *loose = m->solution->loose;
  for (size_t i = 0; loose && i < loose->count; i++) {
    const struct quantity *q = &loose->ends[i].quantity;
    if (q->kind == QUANTITY_EXTENT && q->stream == boundary && q->component == reaction) {
      return true;
    }
  }
  return false;
}

/* "78 kmol/h"; null: it is open, or as good as that.  */
static const char *
extent_text (const struct verdict_maker *m, size_t boundary, size_t reaction)
{
  const size_t column = network_extent (&m->plant->network, boundary) + reaction;
  const double per = 3.6;                /* mol/s in kmol/h: an extent has no other unit */
  if (!m->solution->fixed[column] || hangs_on_digits (m, boundary, reaction)) {
    return NULL;
  }
  struct term term = { column, 1 };
  struct form form = { .terms = &term, .count = 1 };
  const double u = per * solution_uncertainty (m->solution, &m->plant->network, &form, NULL);
  const char *value = figure_text (m->arena, per * m->solution->value[column]);
  return u > 0 ? arena_format (m->arena, "%s +/- %.2g kmol/h", value, u)
         : arena_format (m->arena, "%s kmol/h", value);
}

void
verdict_extents (struct verdict_maker *m)
{
  const struct plant *plant = m->plant;
  struct text_list list = { .at = NULL };
  for (size_t b = 0; b < plant->boundary_count && m->solution->status != BALANCE_CONTRADICTORY;
       b++) {
    const size_t count = plant->network.boundary[b].reaction_count;
    for (size_t k = 0; k < count; k++) {
      const char *text = extent_text (m, b, k), *name = plant->boundary[b].name;
      if (text) {
        text_list_add (m->arena, &list, count == 1 ? arena_format (m->arena, "%s: %s", name, text)
                       : arena_format (m->arena, "reaction %zu of %s: %s", k + 1, name, text));
      }
    }
  }
  verdict_facts (m, "extent of", &list);
}
