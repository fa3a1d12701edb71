#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "language/check/hold.h"
#include "language/check/search.h"
#include "language/check/sheet.h"
#include "language/evaluate/flow.h"
#include "language/kept.h"
#include "property/enhancement.h"
#include "language/evaluate/wording.h"
#include "result/check_verdict.h"
#include "result/result.h"
#include "support/arena.h"
#include "units/workings.h"

/* An actual volume of dry air: what offers of blowers forget.  */
static void
note_inlet (struct check *check, struct result *result)
{
  bool flow;
  const struct value *v = &check->value;
  if (!check->target.unit) {
    return;
  }
  struct measure m = measure_of_unit (check->target.unit);
  if (flow_basis_of (&m, &flow) == FLOW_ACTUAL && flow && v->kind == VALUE_STREAM
      && check->target.state && enhancement_is_for (v->stream.gas)
      && !(composition_fraction (v->stream.gas, check->session->water) > 0)) {
    result_remark (result, MESSAGE_NOTE_CHECK_INLET, NULL, NULL);
  }
}

static bool
verdict (struct check *check, const struct readings *readings, struct check_verdict *v,
         struct fault *fault)
{
  size_t count;
  struct candidate *candidates = candidates_of (check, readings, &count);
  count = search_singles (check, candidates, count);
  *v = (struct check_verdict) {
    .stated = check->stated, .value = check->number, .computed = check->figure,
    .difference = check->number - check->figure, .limit = check->limit,
    .deviation = check_deviation (check, check->figure, check->target.unit),
    .by_digits = check->by_digits, .unit = check->target.unit_text };
  if (!search_readings (check, candidates, count, v, fault)) {
    return false;
  }
  bool open = check->open[SIDE_COMPUTED] || check->open[SIDE_STATED];
  v->outcome = check_fits (check, check->figure) && !open ? CHECK_HOLDS
               : v->readings ? CHECK_READINGS : CHECK_UNEXPLAINED;
  if (v->outcome == CHECK_UNEXPLAINED) {
    v->needs = search_needs (check);
  }
  return true;
}

/* Everything a sheet's figures took for granted, with the most it moves any of them.  */
static void
tell_sheet (struct session *session, struct definition *d, const struct check_verdict *v,
            struct result *result)
{
  struct evaluation ev;
  struct fault unheard;
  struct figures figures = { NULL, 0, 0 };
  fault_init (&unheard, result->arena);
  evaluation_init (&ev, session, result, &unheard);
  ev.describe = false;
  if (!sheet_figures (&ev, d->statement, &figures)) {
    figures.count = 0;                     /* said without effects */
  }
  ev.assumptions = d->assumptions;
  ev.assumption_count = d->assumption_count;
  retold_taken (&ev, &(struct retold) { sheet_figures, d->statement }, &figures);
  definition_tell (session, d, false, result);
  if (v->open_at) {
    result_remark (result, MESSAGE_TAKEN_OPEN_VOLUME, "the volume", v->open_at);
  }
  if (v->tied > 1) {
    result_remark (result, MESSAGE_NOTE_CHECK_TIE,
                   arena_format (result->arena, "%zu", v->tied), NULL);
  }
  result_remark (result, MESSAGE_CAUTION_CUSTODY, NULL, NULL);
}

/* What a note shows of a sheet: every figure with what is computed for it, and the readings.  */
static void
keep_sheet (struct session *session, const struct statement *s, const struct evaluation *ev,
            const struct result *result, const struct check_verdict *v)
{
  const struct value nothing = value_number (UNSTATED);
  const char *how = v->readings ? "" : ", as written";
  for (const struct check_reading *r = v->readings; r; r = r->next) {
    how = arena_format (result->arena, "%s; %s", how, r->reading);
  }
  kept_add (session, &(struct asked) { ev, s, &nothing, NULL, 0 }, result);
  kept_add_row (session, result, &(struct answer) {
      .what = "figures that agree", .named = true, .value = (double) v->agreeing, .unit = "",
      .uncertainty = UNSTATED, .coverage = 1,
      .basis = arena_format (result->arena, "of %zu%s", v->figure_count, how) });
  for (const struct check_figure *f = v->figures; f; f = f->next) {
    const char *name = f->name ? f->name : f->stated;
    const struct answer stated = {
      .what = name, .named = true, .value = f->value, .unit = f->unit, .uncertainty = UNSTATED,
      .coverage = 1, .basis = arena_format (result->arena, "stated; computed %s %s, %s",
                                            figure_text (result->arena, f->computed), f->unit,
                                            f->holds ? "agrees" : "stands alone") };
    const struct step_symbol symbols[] = { CONSTANT ("s", f->value, f->unit, STEP_TYPED),
                                           SYMBOL ("c", f->computed, f->unit) };
    kept_add_row (session, result, &stated);
    kept_extend (session, result, &(struct step) {
        .name = arena_format (result->arena, "%s, stated less computed", name),
        .formula = "d = s - c", .value = f->value - f->computed, .unit = f->unit,
        .source = STEP_DEFINITION, .symbols = symbols, .symbol_count = 2 });
  }
}

static bool
check_sheet (struct session *session, const struct statement *s, struct result *result,
             struct fault *fault)
{
  struct definition *d = name_find (session, s->name, strlen (s->name));
  struct node name = { .kind = NODE_NAME, .text = s->name, .at = s->name_at };
  struct check_verdict *v = ARENA_NEW (result->arena, struct check_verdict);
  struct evaluation ev;
  evaluation_init (&ev, session, NULL, fault);
  if (!d) {
    return name_unknown (&ev, &name);
  }
  if (d->kind != NAME_SHEET) {
    fault_set_at (fault, MESSAGE_KIND_WRONG, s->name_at,
                  arena_format (result->arena, "'%s' is no sheet", s->name), NULL);
    fault_hint (fault, "check %s in ... against ...", s->name);
    return false;
  }
  if ((!d->fresh && !definition_refresh (session, d, fault))
      || !sheet_check (session, d, session->readings, v, fault)) {
    fault->at = s->name_at;
    return false;
  }
  tell_sheet (session, d, v, result);
  result->check = v;
  keep_sheet (session, s, &ev, result, v);
  return true;
}

/* What a note shows of a check: the stated figure, and the readings that would explain it.  */
static void
keep_rows (struct session *session, const struct result *result, const struct check_verdict *v)
{
  struct answer row = { .what = "stated", .named = true, .value = v->value, .unit = v->unit,
                        .uncertainty = UNSTATED, .coverage = 1,
                        .basis = v->outcome == CHECK_HOLDS ? "agrees with what is computed"
                                 : v->outcome == CHECK_READINGS ? "agrees under a reading below"
                                                                : "no reading explains it" };
  kept_add_row (session, result, &row);
  for (const struct check_reading *r = v->readings; r; r = r->next) {
    row.what = "read otherwise";
    row.value = r->value;
    row.unit = r->unit;
    row.basis = r->reading;
    kept_add_row (session, result, &row);
  }
}

/* How the stated figure is held against the computed one.  */
static void
record_verdict (struct session *session, const struct result *result, const struct check_verdict *v)
{
  const struct step_symbol figures[] = { CONSTANT ("s", v->value, v->unit, STEP_TYPED),
                                         SYMBOL ("c", v->computed, v->unit) };
  kept_extend (session, result, &(struct step) {
      .name = "stated less computed", .formula = "d = s - c", .value = v->difference,
      .unit = v->unit, .source = STEP_DEFINITION, .symbols = figures, .symbol_count = 2 });
  if (isfinite (v->deviation)) {
    kept_extend (session, result, &(struct step) {
        .name = "deviation", .formula = "e = s/c - 1", .value = v->deviation, .unit = "1",
        .source = STEP_DEFINITION, .symbols = figures, .symbol_count = 2 });
  }
  kept_extend (session, result, &(struct step) {
      .name = "difference up to which they agree", .formula = "", .value = v->limit,
      .unit = v->unit, .source = v->by_digits ? "half the last digit typed, 0.5 % at most"
                                              : "two standard uncertainties" });
}

bool
command_check (struct session *session, const struct statement *s, struct result *result,
               struct fault *fault)
{
  struct check check;
  struct check_verdict *v = ARENA_NEW (result->arena, struct check_verdict);
  const struct readings *readings = session_readings (session, fault);
  if (!readings) {
    fault_place (fault, s->at);
    return false;
  }
  if (!s->claim) {
    return check_sheet (session, s, result, fault);
  }
  bool done = check_hold (&check, session, s, s->claim, result, fault)
              && verdict (&check, readings, v, fault);
  if (done) {
    if (v->tied > 1 && v->outcome == CHECK_READINGS) {
      result_remark (result, MESSAGE_NOTE_CHECK_TIE,
                     arena_format (result->arena, "%zu", v->tied), NULL);
    }
    note_inlet (&check, result);
    result_remark (result, MESSAGE_CAUTION_CUSTODY, NULL, NULL);
    result->check = v;
    record_verdict (session, result, v);
    keep_rows (session, result, v);
  }
  check_release (&check);
  return done;
}
