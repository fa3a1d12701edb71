/* The solution stream by stream: for machines, and as a table of what is fixed.  */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <float.h>
#include <math.h>
#include <string.h>
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
  bool total = solution->fixed_total[s] && solution->status != BALANCE_CONTRADICTORY;
  out->name = plant->stream[s].name;
  out->molar_flow = total && !plant->by_mass ? plant_total (plant, s) : UNSTATED;
  out->mass_flow = plant_is_fixed (plant, s) ? plant_mass (plant, s) : UNSTATED;
  out->uncertainty = total ? uncertainty_of (m, s, n) : UNSTATED;
  out->stated_u = UNSTATED;
  for (size_t c = 0; c < n; c++) {
    bool fixed = solution->fixed_fraction[s * n + c]
                 && solution->status != BALANCE_CONTRADICTORY;
    x[c] = fixed && !plant->whole ? solution->fraction[s * n + c] : UNSTATED;
    x[c] = fabs (x[c]) < DBL_EPSILON ? 0 : x[c];         /* what subtraction leaves of nothing */
    u[c] = isnan (x[c]) ? UNSTATED : uncertainty_of (m, s, c);
  }
  out->fractions = x;
  out->fractions_u = u;
}

/* ---- Flows in the units asked for ---- */

/* Without being asked: the unit typed first, and kg/h beside amounts, kmol/h beside masses.  */
static void
usual_units (struct verdict_maker *m, struct verdict_stream *streams)
{
  const struct plant *plant = m->plant;
  const char **units = ARENA_ARRAY (m->arena, 2, const char *);
  bool per_time = false, mass = false;
  if (plant->unit && !plant->whole) {
    struct measure measure = measure_of_unit (plant->unit);
    mass = flow_basis_of (&measure, &per_time) == FLOW_MASS;
  }
  units[0] = mass ? plant->unit_text : m->unit;
  units[1] = mass ? "kmol/h" : "kg/h";
  m->verdict->units = units;
  m->verdict->unit_count = plant->whole ? 1 : 2;
  for (size_t s = 0; s < plant->stream_count; s++) {
    struct verdict_stream *one = &streams[s];
    double *shown = ARENA_ARRAY (m->arena, 2, double);
    double total = plant->by_mass && m->solution->fixed_total[s]
                   && m->solution->status != BALANCE_CONTRADICTORY ? plant_total (plant, s)
                                                                  : one->molar_flow;
    shown[0] = mass ? one->mass_flow / plant->unit->factor : total * m->per;
    shown[1] = mass ? total * 3.6 : one->mass_flow * 3600;
    one->shown = shown;
    one->shown_u = mass ? one->uncertainty * one->mass_flow / one->molar_flow / plant->unit->factor
                        : one->uncertainty * m->per;
  }
}

static bool
asked_flow (struct verdict_maker *m, size_t s, const struct target *target, double *out)
{
  struct value value;
  struct figures figures = { NULL, 0, 0 };
  struct fault fault;
  struct evaluation quiet;
  fault_init (&fault, m->arena);
  evaluation_again (&quiet, m->ev, &fault);
  *out = UNSTATED;
  if (!plant_stream_value (&quiet, m->plant, m->plant->stream[s].name, &value)) {
    return true;                        /* not fixed: a blank */
  }
  struct subject subject = { m->plant->stream[s].name, target->at };
  struct target alone = *target;
  alone.next = NULL;
  if (!convert_value (&quiet, &value, &alone, &subject, &figures)) {
    fault_set_at (m->ev->fault, fault.kind, target->at, fault.fact[0], fault.fact[1]);
    return false;
  }
  *out = figures.count == 1 ? figures.at[0].value : UNSTATED;
  return true;
}

static bool
asked_units (struct verdict_maker *m, const struct target *targets, struct verdict_stream *streams)
{
  size_t count = 0, k = 0;
  for (const struct target *t = targets; t; t = t->next) {
    struct measure measure = measure_of_unit (t->unit);
    bool per_time;
    if (flow_basis_of (&measure, &per_time) == FLOW_NONE || !per_time) {
      return fault_set_at (m->ev->fault, MESSAGE_UNIT_MISMATCH, t->at,
                           "the streams of a balance are told as flows", "solve NAME in kg/h");
    }
    count++;
  }
  const char **units = ARENA_ARRAY (m->arena, count, const char *);
  for (size_t s = 0; s < m->plant->stream_count; s++) {
    streams[s].shown = ARENA_ARRAY (m->arena, count, double);
    streams[s].shown_u = UNSTATED;
  }
  for (const struct target *t = targets; t; t = t->next, k++) {
    units[k] = t->unit_text;
    for (size_t s = 0; s < m->plant->stream_count; s++) {
      double *shown = ARENA_ARRAY (m->arena, count, double);
      memcpy (shown, streams[s].shown, count * sizeof *shown);
      if (!asked_flow (m, s, t, &shown[k])) {
        return false;
      }
      streams[s].shown = shown;
      if (k == 0 && streams[s].molar_flow > 0) {
        streams[s].shown_u = streams[s].uncertainty * shown[0] / streams[s].molar_flow;
      }
    }
  }
  m->verdict->units = units;
  m->verdict->unit_count = count;
  return true;
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
number_cell (double value)
{
  struct cell cell = { .value = value, .is_number = true };
  if (isnan (value)) {
    cell = (struct cell) { .text = "" };
  }
  return cell;
}

static void
stream_table (struct verdict_maker *m)
{
  const struct balance_verdict *v = m->verdict;
  bool spread = false;
  size_t shown = 0;
  for (size_t s = 0; s < v->stream_count; s++) {
    spread = spread || v->streams[s].shown_u > 0;
    shown += is_shown (m, &v->streams[s]) ? 1 : 0;
  }
  size_t columns = v->unit_count + (spread ? 1 : 0) + v->component_count, k = 0;
  const char **headings = ARENA_ARRAY (m->arena, columns, const char *);
  for (size_t u = 0; u < v->unit_count; u++) {
    headings[k++] = v->units[u];
    if (u == 0 && spread) {
      headings[k++] = "+/-";
    }
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
  for (size_t s = 0; s < v->stream_count; s++) {
    const struct verdict_stream *stream = &v->streams[s];
    if (!is_shown (m, stream)) {
      continue;
    }
    struct cell *cells = card_add_row (m->ev->result, card, stream->name);
    k = 0;
    for (size_t u = 0; u < v->unit_count; u++) {
      cells[k++] = number_cell (stream->shown[u]);
      if (u == 0 && spread) {
        cells[k++].text = stream->shown_u > 0 ? arena_format (m->arena, "%.2g", stream->shown_u)
                                              : "";
      }
    }
    for (size_t c = 0; c < v->component_count; c++) {
      cells[k++] = number_cell (100 * stream->fractions[c]);
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
      streams[s].mass_flow = m->solution->fixed_total[s]
                             && m->solution->status != BALANCE_CONTRADICTORY
                               ? plant_total (plant, s) : UNSTATED;
    }
  }
  if (targets ? !asked_units (m, targets, streams) : false) {
    return false;
  }
  if (!targets) {
    usual_units (m, streams);
  }
  if (m->ev->result && m->solution->status != BALANCE_CONTRADICTORY) {
    stream_table (m);
  }
  return true;
}
