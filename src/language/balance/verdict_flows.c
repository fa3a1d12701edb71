/* The flows of the streams in the units asked for, with their uncertainties.  */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "language/session_private.h"
#include "support/arena.h"

/* Without being asked: the unit typed first, and kg/h beside amounts, kmol/h beside masses.  */
static bool
usual_is_mass (const struct plant *plant)
{
  bool per_time;
  struct measure measure;
  if (!plant->unit || plant->whole) {
    return false;
  }
  measure = measure_of_unit (plant->unit);
  return flow_basis_of (&measure, &per_time) == FLOW_MASS;
}

/* The standard uncertainty of a flow of which a mole (a kilogram, where flows are by mass) of
   component c counts WEIGHT[c].                                                                 */
static double
weighted_uncertainty (const struct verdict_maker *m, size_t s, const double weight[])
{
  const struct plant *plant = m->plant;
  size_t n = plant->network.components;
  struct term *terms = ARENA_ARRAY (m->arena, n, struct term);
  double of = 0;
  if (!m->solution->covariance) {
    return UNSTATED;
  }
  for (size_t c = 0; c < n; c++) {
    size_t column = plant_column (plant, s, c);
    terms[c] = (struct term) { column, weight[c] };
    of += weight[c] * m->solution->value[column];
  }
  struct form flow = { n, terms };
  double u = solution_uncertainty (m->solution, &plant->network, &flow, NULL);
  return u > 1e-12 * fabs (of) ? u : UNSTATED;          /* less is rounding */
}

static double
mass_uncertainty (const struct verdict_maker *m, size_t s)
{
  return weighted_uncertainty (m, s, m->plant->network.molar_mass);
}

static void
usual_units (struct verdict_maker *m, struct verdict_stream *streams)
{
  const struct plant *plant = m->plant;
  const char **units = ARENA_ARRAY (m->arena, 2, const char *);
  const bool mass = usual_is_mass (plant);
  units[0] = mass ? plant->unit_text : m->unit;
  units[1] = mass ? "kmol/h" : "kg/h";
  m->verdict->units = units;
  m->verdict->unit_count = plant->whole ? 1 : 2;
  for (size_t s = 0; s < plant->stream_count; s++) {
    struct verdict_stream *one = &streams[s];
    double *shown = ARENA_ARRAY (m->arena, 2, double), *u = ARENA_ARRAY (m->arena, 2, double);
    double total = plant->by_mass && plant_is_fixed (plant, s) ? plant_total (plant, s)
                                                               : one->molar_flow;
    double mass_u = plant->whole || isnan (one->mass_flow) ? UNSTATED : mass_uncertainty (m, s);
    shown[0] = mass ? one->mass_flow / plant->unit->factor : total * m->per;
    shown[1] = mass ? total * 3.6 : one->mass_flow * 3600;
    u[0] = mass ? mass_u / plant->unit->factor : one->uncertainty * m->per;
    u[1] = mass ? one->uncertainty * 3.6 : mass_u * 3600;
    one->shown = shown;
    one->shown_u = u;
  }
}

/* TARGET alone, added to FIGURES.  */
static bool
told_in (struct evaluation *ev, const struct plant *plant, const struct value *value,
         const struct target *target, struct figures *figures)
{
  struct subject subject = { plant->name, target->at };
  struct target alone = *target;
  alone.next = NULL;
  return convert_value (ev, value, &alone, &subject, figures);
}

static bool
told_flow (struct verdict_maker *m, struct evaluation *quiet, const struct value *value,
           const struct target *target, double *out)
{
  struct figures figures = { .at = NULL };
  if (!told_in (quiet, m->plant, value, target, &figures)) {
    fault_set_at (m->ev->fault, quiet->fault->kind, target->at, quiet->fault->fact[0],
                  quiet->fault->fact[1]);
    return false;
  }
  *out = figures.count == 1 ? figures.at[0].value : UNSTATED;
  return true;
}

/* VALUE with a little more of component C: what that adds to the flow told, by a mole.  */
static bool
weight_of (struct verdict_maker *m, struct evaluation *quiet, size_t s, size_t c,
           const struct value *value, const struct target *target, double flow, double *weight)
{
  const struct plant *plant = m->plant;
  size_t n = plant->network.components, count = 0;
  double step = 1e-4 * value->stream.moles, more;
  struct part *parts = ARENA_ARRAY (m->arena, n, struct part);
  struct value moved = *value;
  for (size_t k = 0; k < n; k++) {
    double x = plant->solution->value[plant_column (plant, s, k)] + (k == c ? step : 0);
    if (x > 1e-12 * value->stream.moles) {
      parts[count++] = (struct part) { plant->component[k], x };
    }
  }
  moved.stream.moles += step;
  moved.stream.gas = composition_make (m->arena, count, parts, m->ev->fault);
  if (!moved.stream.gas || !told_flow (m, quiet, &moved, target, &more)) {
    return false;
  }
  *weight = (more - flow) / step;
  return true;
}

/* Streams are told as questions tell them; what is not fixed stays a blank.  */
static bool
asked_flow (struct verdict_maker *m, size_t s, const struct target *target, double *flow,
            double *u)
{
  const struct plant *plant = m->plant;
  size_t n = plant->network.components;
  struct value value;
  struct fault fault;
  struct evaluation quiet;
  fault_init (&fault, m->arena);
  evaluation_again (&quiet, m->ev, &fault);
  *flow = *u = UNSTATED;
  if (!plant_stream_value (&quiet, plant, plant->stream[s].name, &value)) {
    return true;
  }
  if (!told_flow (m, &quiet, &value, target, flow)) {
    return false;
  }
  if (!m->solution->covariance || isnan (*flow)) {
    return true;
  }
  double *weight = ARENA_ARRAY (m->arena, n, double);
  for (size_t c = 0; c < n; c++) {
    weight[c] = *flow / plant_total (plant, s);         /* of a whole flow */
    if (!plant->whole
        && !weight_of (m, &quiet, s, c, &value, target, *flow, &weight[c])) {
      return false;
    }
  }
  *u = weighted_uncertainty (m, s, weight);
  return true;
}

/* The first stream that can be told; null: none can.  */
static const char *
first_value (struct evaluation *ev, const struct plant *plant, struct value *value)
{
  for (size_t s = 0; s < plant->stream_count; s++) {
    struct evaluation quiet;
    struct fault unheard;
    fault_init (&unheard, ev->arena);
    evaluation_again (&quiet, ev, &unheard);
    if (plant_stream_value (&quiet, plant, plant->stream[s].name, value)) {
      return plant->stream[s].name;
    }
  }
  return NULL;
}

bool
plant_flows_told (struct evaluation *ev, const struct plant *plant, const struct target *targets,
                  struct figures *figures)
{
  struct value value;
  if (!targets || !first_value (ev, plant, &value)) {
    return true;
  }
  for (const struct target *t = targets; t; t = t->next) {
    if (!told_in (ev, plant, &value, t, figures)) {
      return false;
    }
  }
  return true;
}

/* "MW gross", or what the target is to be called.  */
static const char *
heading_of (struct arena *arena, const struct target *t)
{
  static const struct { unsigned bit; const char *word; } words[] = {
    { WORD_DRY, "dry" }, { WORD_WET, "wet" }, { WORD_REAL, "real" }, { WORD_IDEAL, "ideal" },
    { WORD_GROSS, "gross" }, { WORD_NET, "net" }
  };
  const char *text = t->unit_text;
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++) {
    if (t->words & words[i].bit) {
      text = arena_format (arena, "%s %s", text, words[i].word);
    }
  }
  return t->as ? arena_format (arena, "%s, %s", t->as, text) : text;
}

/* What the flows stand on; a compression factor is that of the first stream.  */
static bool
tell_basis (struct verdict_maker *m, const struct target *targets, const char *const units[])
{
  struct figures figures = { .at = NULL };
  struct value value;
  const char *first = first_value (m->ev, m->plant, &value);
  const char **basis = ARENA_ARRAY (m->arena, m->verdict->unit_count, const char *);
  if (!plant_flows_told (m->ev, m->plant, targets, &figures)) {
    return false;
  }
  for (size_t i = 0; i < figures.count && i < m->verdict->unit_count; i++) {
    const struct figure *f = &figures.at[i];
    const bool any = f->basis && *f->basis;
    const bool own = any && strstr (f->basis, ", Z ");
    basis[i] = any ? arena_format (m->arena, "%s%s%s: %s", units[i], own ? " of " : "",
                                   own ? first : "", f->basis) : NULL;
  }
  m->verdict->unit_basis = basis;
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
  for (const struct target *t = targets; t; t = t->next) {
    units[k++] = heading_of (m->arena, t);
  }
  for (size_t s = 0; s < m->plant->stream_count; s++) {
    double *shown = ARENA_ARRAY (m->arena, count, double);
    double *u = ARENA_ARRAY (m->arena, count, double);
    k = 0;
    for (const struct target *t = targets; t; t = t->next, k++) {
      if (!asked_flow (m, s, t, &shown[k], &u[k])) {
        return false;
      }
    }
    streams[s].shown = shown;
    streams[s].shown_u = u;
  }
  m->verdict->units = units;
  m->verdict->unit_count = count;
  return tell_basis (m, targets, units);
}

bool
verdict_flows (struct verdict_maker *m, const struct target *targets,
               struct verdict_stream streams[])
{
  if (targets) {
    return asked_units (m, targets, streams);
  }
  usual_units (m, streams);
  return true;
}
