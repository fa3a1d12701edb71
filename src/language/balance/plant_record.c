/* How a balance came out, for `workings`: the count, the facts, what flows into and out of each
   boundary, and the flows found.                                                                */
#include "config.h"
#include "language/balance/plant_record.h"

#include <math.h>
#include "language/balance/verdict_private.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
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
    if (!isfinite (figure) || plant->network.fact[i].kind == FACT_COMPOSITION
        || plant->network.fact[i].absence) {
      continue;
    }
    kept_extend (session, result, &(struct step) {
        .name = "known:", .of = fact->words ? fact->words : fact->text, .formula = "",
        .value = figure, .unit = fact->unit && *fact->unit ? fact->unit : "1",
        .source = STEP_TYPED });
  }
}

/* ---- What a note shows of it ---- */

struct row_list { struct arena *arena; struct answer *first, **last; size_t count; };

static struct answer *
row_add (struct row_list *rows, const char *what, const char *basis)
{
  struct answer *a = ARENA_NEW (rows->arena, struct answer);
  *a = (struct answer) { .what = what, .named = true, .value = UNSTATED, .unit = "",
                         .uncertainty = UNSTATED, .coverage = 1, .basis = basis };
  *rows->last = a;
  rows->last = &a->next;
  rows->count++;
  return a;
}

/* "stated 1520 +/- 15; moved to 1503.21 +/- 11; -1.12 u", in the words of the heading.  */
static const char *
cells_text (struct arena *arena, const struct balance_verdict *v, const struct verdict_row *row)
{
  const char *text = "";
  for (size_t i = 1; i < 4; i++)
    if (row->cell[i] && *row->cell[i]) {
      const char *heading = v->heading[i] ? v->heading[i] : "";
      text = arena_format (arena, "%s%s%s%s%s", text, *text ? "; " : "", heading,
                           *heading ? (v->clash ? ": " : " ") : "", row->cell[i]);
    }
  return text;
}

/* "CH4 94.79, CO2 2.574 mol%"; without figures: the verdict alone.  */
static const char *
parts_text (struct arena *arena, const struct balance_verdict *v, const struct verdict_stream *s)
{
  const char *text = "";
  for (size_t c = 0; c < v->component_count && s->fractions; c++)
    if (!isnan (s->fractions[c])) {
      text = arena_format (arena, "%s%s%s %s", text, *text ? ", " : "", v->components[c],
                           figure_text (arena, 100 * s->fractions[c]));
    }
  return *text ? arena_format (arena, "%s mol%%", text) : v->phrase;
}

/* The verdict, what it rests on, and the flows.  */
static const struct answer *
rows_of (struct arena *arena, const struct balance_verdict *v, size_t *count)
{
  struct row_list rows = { .arena = arena };
  const char *what = v->name;
  rows.last = &rows.first;
  row_add (&rows, v->name, *v->head ? arena_format (arena, "%s: %s", v->phrase, v->head)
                                    : v->phrase);
  row_add (&rows, "count", v->counts);
  for (const struct verdict_row *row = v->facts; row; row = row->next) {
    what = *row->cell[0] ? row->cell[0] : what;
    row_add (&rows, what, row->cell[1]);
  }
  for (const struct verdict_row *row = v->rows; row; row = row->next) {
    row_add (&rows, row->cell[0], cells_text (arena, v, row));
  }
  for (size_t i = 0; v->unit_count > 0 && i < v->stream_count && !v->clash; i++) {
    const struct verdict_stream *s = &v->streams[i];
    struct answer *a = row_add (&rows, s->name, parts_text (arena, v, s));
    a->value = s->shown[0];
    a->unit = v->units[0];
    a->uncertainty = s->shown_u[0];
  }
  *count = rows.count;
  return rows.first;
}

/* What the lines of a clash say, each times its share in the combination that must be nothing and
   is the gap.                                                                                   */
static void
record_clash (struct session *session, const struct result *result, const struct plant *plant,
              const struct balance_verdict *v)
{
  const struct conflict *conflict = plant->solution->conflict;
  const size_t n = conflict ? conflict->term_count : 0;
  struct arena *arena = result->arena;
  double *says = ARENA_ARRAY (arena, n, double), *factor = ARENA_ARRAY (arena, n, double), sum = 0;
  const char **terms = ARENA_ARRAY (arena, n, const char *);
  for (size_t i = 0; i < n; i++) {
    const struct conflict_term *t = &conflict->terms[i];
    const struct plant_fact *fact = &plant->fact[t->fact];
    const bool part = plant->network.fact[t->fact].kind == FACT_COMPOSITION
                      && t->component < plant->network.components;
    terms[i] = part ? arena_format (arena, "%s, its %s", fact->text,
                                    component_text (plant, t->component)) : fact->text;
    says[i] = t->says;
    factor[i] = t->factor;
    sum += t->says * t->factor;
  }
  if (n > 0) {
    kept_extend (session, result, &(struct step) {
        .name = v->gap_around ? "gap around" : "gap of",
        .of = v->gap_around ? arena_format (arena, "%s, %s", v->gap_around, v->gap_component)
                            : v->name,
        .formula = "g = sum(k_i b_i)", .value = sum, .unit = flow_unit (plant),
        .solved = "balances and lines combined so that every unknown falls out",
        .source = "k_i: share of a line; b_i: the flow it states, 0 where it ties flows together",
        .terms = terms, .term_count = (unsigned) n,
        STEP_SYMBOLS (SYMBOL ("g", sum, flow_unit (plant))),
        STEP_COLUMNS ({ "k_i", factor, "1", NULL, NULL },
                      { "b_i", says, flow_unit (plant), NULL, NULL }) });
  }
}

void
plant_record (struct evaluation *ev, const struct statement *s, const struct plant *plant,
              const struct result *result)
{
  const struct balance_verdict *v = result->balance;
  struct session *session = ev->session;
  struct value none = value_number (UNSTATED);
  size_t count;
  const struct answer *rows = rows_of (result->arena, v, &count);
  const double variables = (double) v->variables, equations = (double) v->independent;
  kept_add (session, &(struct asked) { ev, s, &none, rows, count }, result);
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
  record_clash (session, result, plant, v);
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
