#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include "gas/composition.h"
#include "language/check/hold.h"
#include "language/check/search.h"
#include "language/evaluate/flow.h"
#include "property/enhancement.h"
#include "result/check_verdict.h"
#include "result/result.h"
#include "support/arena.h"

static const struct readings *
readings_of (struct session *session, struct fault *fault)
{
  if (!session->readings) {
    session->readings = readings_create (session->vocabulary.units, session->references,
                                         session->options.tables, fault);
  }
  return session->readings;
}

/* An actual volume of dry air: what offers of blowers forget.  */
static void
note_inlet (struct check *check, struct result *result)
{
  struct measure m = measure_of_unit (check->target.unit);
  bool flow;
  const struct value *v = &check->value;
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

bool
command_check (struct session *session, const struct statement *s, struct result *result,
               struct fault *fault)
{
  struct check check;
  struct check_verdict *v = ARENA_NEW (result->arena, struct check_verdict);
  const struct readings *readings = readings_of (session, fault);
  if (!readings) {
    fault_place (fault, s->at);
    return false;
  }
  bool done = check_hold (&check, session, s, s->claim, result, fault)
              && verdict (&check, readings, v, fault);
  if (done) {
    if (v->tied > 1) {
      result_remark (result, MESSAGE_NOTE_CHECK_TIE,
                     arena_format (result->arena, "%zu", v->tied), NULL);
    }
    note_inlet (&check, result);
    result_remark (result, MESSAGE_CAUTION_CUSTODY, NULL, NULL);
    result->check = v;
  }
  check_release (&check);
  return done;
}
