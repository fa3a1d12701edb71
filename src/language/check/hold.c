#include "config.h"
#include "language/check/hold.h"

#include <math.h>
#include <string.h>
#include "language/evaluate/flow.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/number.h"

/* ---- The claim ---- */

/* A figure without ± is good to what its digits say (number_rounding), and to 0.5 % at most however
   few they are: one of a digit or two would else have readings that fit by chance.  Balances have
   no such limit: of figures that check each other none is to be taken for better than it is typed,
   or they would clash without a mistake.                                                        */
static double
rounding (const struct node *claim)
{
  static const double most = 0.005;
  double half = number_rounding (claim->figure ? claim->figure : "", claim->number);
  double cap = most * fabs (claim->number);
  return cap > 0 ? fmin (half, cap) : half;
}

/* The standard uncertainty behind ±, in the claim's unit; 0 where there is none.  */
static bool
claim_spread (struct check *check, const struct node *claim, struct fault *fault, double *u)
{
  struct evaluation ev;
  struct value value;
  struct shift up = { claim->spread, 1 };
  *u = 0;
  if (!claim->spread) {
    return true;
  }
  evaluation_init (&ev, check->session, NULL, fault);
  ev.describe = false;
  ev.shifts = &up;
  ev.shift_count = 1;
  if (!evaluate (&ev, claim, NULL, &value)) {
    return false;
  }
  double moved = claim->unit ? unit_from_si (claim->unit, value.si) : value.si;
  ev.shift_count = 0;
  if (!evaluate (&ev, claim, NULL, &value)) {
    return false;
  }
  *u = moved - (claim->unit ? unit_from_si (claim->unit, value.si) : value.si);
  return true;
}

bool
claim_limit (struct check *check, const struct node *claim, struct fault *fault, double *limit)
{
  double u;
  if (!claim_spread (check, claim, fault, &u)) {
    return false;
  }
  *limit = claim->spread ? 2 * u : rounding (claim);
  return true;
}

/* ---- What the figure is told in ---- */

static bool
make_target (struct check *check, const struct statement *s, const struct node *claim,
             struct fault *fault)
{
  const struct target *said = s->targets;
  const struct node *quantity = claim->kind == NODE_AT ? claim->a : claim;
  if (said && quantity->unit && !unit_same_measure (said->unit, quantity->unit)) {
    return fault_set_at (fault, MESSAGE_UNIT_MISMATCH, quantity->unit_at,
                         arena_format (check->arena, "the figure is stated in %s, and asked for "
                                       "in %s", quantity->unit_text, said->unit_text), NULL);
  }
  if (said) {
    check->target = *said;
    check->actual = said->unit->actual;
  }
  check->target.unit = quantity->unit;
  check->target.unit_text = quantity->unit ? quantity->unit_text : "";
  check->target.at = quantity->unit ? quantity->unit_at : quantity->at;
  check->target.words |= quantity->words;
  if (claim->kind == NODE_AT) {
    check->target.state = claim->b;
  }
  check->question = (struct statement) {
    .kind = STATEMENT_ASK, .source = s->source, .at = s->at, .value = s->value,
    .targets = quantity->unit ? &check->target : NULL };
  check->claim = quantity;
  check->number = quantity->number;
  return true;
}

/* ---- What is left open ---- */

/* Under the conditions of the Sm3 as set, if nothing else is said.  */
static void
fill (struct check *check, int side)
{
  struct settings *s = &check->base[side].settings;
  s->family[FAMILY_NONE] = s->family[FAMILY_STANDARD];
  check->base[side].overridden |= touch_family (FAMILY_NONE);
}

static void
leave_own (struct check *check)
{
  check->base[SIDE_STATED].settings.family[FAMILY_NONE].at.T = UNSTATED;
}

/* A volume that says nothing of its state, of something that has one.  */
static bool
is_bare_volume (const struct check *check)
{
  const struct unit *u = check->target.unit;
  if (!u) {
    return false;                       /* of a plain number: relative density, Z */
  }
  struct measure m = measure_of_unit (u);
  bool flow, part = check->value.kind == VALUE_PART || check->value.kind == VALUE_TRACE;
  return u->family_power == 0 && !u->actual && !check->actual && !check->target.state
         && ((flow_basis_of (&m, &flow) == FLOW_ACTUAL && check->value.kind == VALUE_STREAM)
             || (part && u->dimension.length == -3));
}

/* One look at a side: what it touched, and why it failed.  */
static bool
look (struct check *check, int side, struct fault *fault)
{
  struct evaluation ev;
  struct figures figures = { NULL, 0, 0 };
  struct subject subject = { "", check->question.value->at };
  fault_init (fault, check->arena);
  evaluation_init (&ev, check->session, NULL, fault);
  ev.describe = false;
  ev.settings = &check->base[side].settings;
  ev.overridden = check->base[side].overridden;
  bool done = side == SIDE_COMPUTED
                ? evaluate (&ev, check->question.value, NULL, &check->value)
                : convert_value (&ev, &check->value, check->question.targets, &subject, &figures);
  check->touched[side] = ev.touched;
  if (side == SIDE_COMPUTED) {
    check->used = ev.used;
    check->used_count = ev.used_count;
  } else if (done && figures.count == 1) {
    check->figure = figures.at[0].value;
  } else if (done) {
    done = fault_set_at (fault, MESSAGE_KIND_WRONG, check->question.value->at,
                         "a stated figure is held against one figure, and this has several",
                         NULL);
  }
  return done;
}

/* Works a side out; a volume without its state is filled in.  */
static bool
work_out (struct check *check, int side)
{
  struct fault fault;
  if (look (check, side, &fault)) {
    return true;
  }
  if (fault.kind != MESSAGE_STATE_MISSING) {
    return false;
  }
  fill (check, side);
  bool done = look (check, side, &fault);
  check->open[side] = (check->touched[side] & touch_family (FAMILY_NONE)) != 0;
  return done;
}

/* Is the claim so near the figure at its own state that this must be meant?  No barometer, humidity
   or temperature left out makes a factor of two; another state does.                            */
static bool
is_near (double own, double claim)
{
  static const double most = 2;
  return own * claim > 0 && fabs (claim) <= most * fabs (own) && fabs (own) <= most * fabs (claim);
}

/* A bare volume of something that has a state: at that, as any question has it, or at the usual
   conditions where the claim is far from the one and nearer to the other.                       */
static void
choose_state (struct check *check)
{
  struct fault fault;
  double own = check->figure, claim = check->number;
  if (check->open[SIDE_STATED] || !is_bare_volume (check)) {
    return;
  }
  fill (check, SIDE_STATED);
  bool filled = look (check, SIDE_STATED, &fault);
  check->open[SIDE_STATED] = filled;
  if (!filled || is_near (own, claim) || fabs (own - claim) <= fabs (check->figure - claim)) {
    leave_own (check);
    check->open[SIDE_STATED] = filled && look (check, SIDE_STATED, &fault);
    check->figure = own;
  }
}

/* ---- All of it ---- */

static void
tell_open (struct check *check, struct result *result)
{
  const struct settings *s = &check->base[SIDE_STATED].settings;
  if (check->open[SIDE_COMPUTED]) {
    result_remark (result, MESSAGE_TAKEN_OPEN_VOLUME, "the volume",
                   check->base[SIDE_COMPUTED].settings.family[FAMILY_STANDARD].text);
  }
  if (check->open[SIDE_STATED]) {
    result_remark (result, MESSAGE_TAKEN_OPEN_VOLUME, check->stated,
                   isnan (s->family[FAMILY_NONE].at.T) ? "the state of what it is of"
                                                       : s->family[FAMILY_STANDARD].text);
  }
}

/* The computed figure with all there is to say of it.  */
static bool
answer (struct check *check, struct result *result, struct fault *fault, double *u)
{
  struct evaluation ev;
  struct settings both = check->base[SIDE_COMPUTED].settings;
  if (check->base[SIDE_STATED].overridden) {
    both.family[FAMILY_NONE] = check->base[SIDE_STATED].settings.family[FAMILY_NONE];
  }
  evaluation_init (&ev, check->session, result, fault);
  ev.settings = &both;
  ev.overridden = check->base[SIDE_COMPUTED].overridden | check->base[SIDE_STATED].overridden;
  if (!question_answer (&ev, &check->question)) {
    return false;
  }
  const struct answer *a = result->answers;
  *u = a && !isnan (a->uncertainty) ? a->uncertainty : 0;
  return true;
}

bool
check_hold (struct check *check, struct session *session, const struct statement *s,
            const struct node *claim, struct result *result, struct fault *fault)
{
  double limit, u_computed = 0;
  struct result aside;
  *check = (struct check) { .session = session, .arena = fault->arena };
  check->work = arena_create ();
  check->scratch = arena_create ();
  check->stated = node_text (check->arena, s, claim);
  for (int i = 0; i < SIDES; i++) {
    check->base[i].settings = *session_settings (session);
  }
  if (!make_target (check, s, claim, fault)
      || !claim_limit (check, check->claim, fault, &limit)) {
    return false;
  }
  bool done = work_out (check, SIDE_COMPUTED) && work_out (check, SIDE_STATED);
  if (done) {
    choose_state (check);
  }
  result_init (&aside, check->arena, s->source);
  if (!answer (check, result ? result : &aside, fault, &u_computed)) {
    return false;
  }
  if (!done) {
    return fault_set_at (fault, MESSAGE_KIND_WRONG, check->question.value->at,
                         "a stated figure is held against one figure, and this has several",
                         NULL);
  }
  if (result) {
    tell_open (check, result);
  }
  check->by_digits = !check->claim->spread;
  check->limit = hypot (limit, 2 * u_computed);
  return true;
}

void
check_release (struct check *check)
{
  arena_destroy (check->work);
  arena_destroy (check->scratch);
}
