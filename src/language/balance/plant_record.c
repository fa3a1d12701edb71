/* How a balance came out, for `workings`: the count, the facts, what flows into and out of each
   boundary, and the flows found.                                                                */
#include "config.h"
#include "language/balance/plant_record.h"

#include <math.h>
#include "language/evaluate/record.h"
#include "language/kept.h"
#include "result/balance_verdict.h"
#include "result/result.h"
#include "support/arena.h"

static const char SOLVED[] = "solution of the balance";

static const char *
flow_unit (const struct plant *plant)
{
  return plant->by_mass ? "kg/s" : "mol/s";
}

void
record_made_stream (struct evaluation *ev, const struct plant *plant, const char *name,
                    double moles)
{
  if (ev->workings) {
    RECORD (ev, .name = "amount of", .of = name, .formula = "", .value = moles, .unit = "mol/s",
            .source = arena_format (ev->arena, "solution of balance %s", plant->name));
  }
}

/* The streams on one side of a boundary and what they come to.  */
static void
record_side (struct session *session, const struct result *result, const struct plant *plant,
             const char *name, const size_t streams[], size_t n)
{
  double *flows = ARENA_ARRAY (result->arena, n, double), sum = 0;
  const char **terms = ARENA_ARRAY (result->arena, n, const char *);
  for (size_t i = 0; i < n; i++) {
    flows[i] = plant_total (plant, streams[i]);
    terms[i] = plant->stream[streams[i]].name;
    sum += flows[i];
  }
  kept_extend (session, result, &(struct step) {
      .name = name, .formula = "n = sum(n_i)", .value = sum, .unit = flow_unit (plant),
      .source = "what goes in comes out", .terms = terms, .term_count = (unsigned) n,
      STEP_COLUMNS ({ "n_i", flows, flow_unit (plant), NULL, NULL }) });
}

static bool
all_fixed (const struct plant *plant, const size_t streams[], size_t n)
{
  for (size_t i = 0; i < n; i++)
    if (!plant_is_fixed (plant, streams[i])) {
      return false;
    }
  return true;
}

/* A reaction changes the amounts: there only the parts balance.  */
static void
record_boundaries (struct session *session, const struct result *result,
                   const struct plant *plant)
{
  for (size_t i = 0; i < plant->boundary_count; i++) {
    const struct boundary *b = &plant->network.boundary[i];
    const char *name = plant->boundary[i].name;
    if (b->reaction_count > 0 || !all_fixed (plant, b->inlets, b->inlet_count)
        || !all_fixed (plant, b->outlets, b->outlet_count)) {
      continue;
    }
    record_side (session, result, plant, arena_format (result->arena, "into %s", name), b->inlets,
                 b->inlet_count);
    record_side (session, result, plant, arena_format (result->arena, "out of %s", name),
                 b->outlets, b->outlet_count);
  }
}

static void
record_facts (struct session *session, const struct result *result, const struct plant *plant)
{
  for (size_t i = 0; i < plant->fact_count && i < plant->network.facts; i++) {
    const struct plant_fact *fact = &plant->fact[i];
    double figure = plant->network.fact[i].value * fact->per;
    if (!isfinite (figure) || plant->network.fact[i].kind == FACT_COMPOSITION) {
      continue;
    }
    kept_extend (session, result, &(struct step) {
        .name = "known:", .of = fact->words ? fact->words : fact->text, .formula = "",
        .value = figure, .unit = fact->unit && *fact->unit ? fact->unit : "1",
        .source = STEP_TYPED });
  }
}

/* The flows of a verdict as rows.  */
static struct answer *
flows_of (struct arena *arena, const struct balance_verdict *v, size_t *count)
{
  struct answer *first = NULL, **last = &first;
  *count = 0;
  for (size_t i = 0; v->unit_count > 0 && i < v->stream_count; i++) {
    const struct verdict_stream *s = &v->streams[i];
    struct answer *a = *last = ARENA_NEW (arena, struct answer);
    *a = (struct answer) { .what = s->name, .named = true, .value = s->shown[0],
                           .unit = v->units[0], .uncertainty = s->shown_u, .coverage = 1,
                           .basis = v->phrase };
    last = &a->next;
    ++*count;
  }
  return first;
}

void
plant_record (struct evaluation *ev, const struct statement *s, const struct plant *plant,
              const struct result *result)
{
  const struct balance_verdict *v = result->balance;
  struct session *session = ev->session;
  struct value none = value_number (UNSTATED);
  size_t count;
  const struct answer *flows = flows_of (result->arena, v, &count);
  const double variables = (double) v->variables, equations = (double) v->independent;
  kept_add (session, &(struct asked) { ev, s, &none, flows, count }, result);
  record_facts (session, result, plant);
  kept_extend (session, result, &(struct step) {
      .name = "degrees of freedom of", .of = v->name, .formula = "f = v - e",
      .value = variables - equations, .unit = "1",
      .source = "rank of the balances, relations and knowns",
      STEP_SYMBOLS (SYMBOL ("v", variables, "variables"),
                    SYMBOL ("e", equations, "independent equations")) });
  if (!plant->solution) {
    return;
  }
  if (v->tested) {
    kept_extend (session, result, &(struct step) {
        .name = "global test of", .of = v->name, .formula = "", .value = v->chi2, .unit = "1",
        .source = "weighted squares of the adjustments, chi-squared" });
  }
  for (size_t i = 0; i < plant->stream_count; i++)
    if (plant_is_fixed (plant, i)) {
      kept_extend (session, result, &(struct step) {
          .name = "flow of", .of = plant->stream[i].name, .formula = "",
          .value = plant_total (plant, i), .unit = flow_unit (plant), .source = SOLVED });
    }
  record_boundaries (session, result, plant);
}
