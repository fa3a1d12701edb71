#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/evaluate_treat.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"

/* ---- Gases and their totals ---- */

/* A figure that may differ from WHOLE only in a digit that is not usually told.  */
static const char *
total_digits (struct evaluation *ev, double value, double whole)
{
  bool hidden = value != whole && fabs (value / whole - 1) < 1e-5;
  return hidden ? arena_format (ev->arena, "%.9g", value) : figure_text (ev->arena, value);
}

const char *
gas_total_text (struct evaluation *ev, const struct analysis *analysis, double total)
{
  return arena_format (ev->arena, "%s %s", total_digits (ev, 100 * total, 100),
                       analysis->whole == WHOLE_MASS ? "mass%" : "mol%");
}

const struct gas_value *
gas_of_composition (struct evaluation *ev, const struct composition *composition,
                    const char *name)
{
  if (!composition) {
    return NULL;
  }
  struct gas_value *gas = ARENA_NEW (ev->arena, struct gas_value);
  *gas = (struct gas_value) { .name = name, .closed = composition, .scaled = 1 };
  return gas;
}

const struct analysis *
gas_analysis (struct evaluation *ev, const struct gas_value *gas)
{
  return gas->analysis ? gas->analysis : analysis_of_composition (ev->arena, gas->closed);
}

struct gas_value *
gas_of_analysis (struct evaluation *ev, const struct analysis *analysis,
                 const struct gas_value *named)
{
  struct gas_value *gas = ARENA_NEW (ev->arena, struct gas_value);
  struct fault open;
  double tolerance = ev->settings->ignore_total ? HUGE_VAL : ev->settings->total_tolerance;
  *gas = *named;
  gas->analysis = analysis;
  gas->scaled = 1;
  fault_init (&open, ev->arena);
  gas->closed = analysis_close (ev->arena, analysis, tolerance, &gas->scaled, &open);
  evaluation_touch (ev, TOUCH_TOLERANCE);
  if (!gas->closed && open.kind != MESSAGE_GAS_OPEN) {
    fault_set (ev->fault, open.kind, open.fact[0], open.fact[1]);
    return NULL;
  }
  if (gas->closed && fabs (gas->scaled - 1) > SCALING_WORTH_A_NOTE && ev->result) {
    note (ev, MESSAGE_NOTE_SCALED, named->name ? named->name : "the list",
          total_digits (ev, gas->scaled, 1),
          gas_total_text (ev, analysis, analysis_total (analysis)));
  }
  if (gas->closed) {
    record_closed (ev, analysis, gas->closed, gas->scaled, named->name);
  }
  return gas;
}

const char *
gas_usual_balance (const struct analysis *a)
{
  size_t largest = 0;
  for (size_t i = 0; i < a->count; i++) {
    if (strcmp (a->parts[i].species->key, "N2") == 0) {
      return "N2";
    }
    largest = a->parts[i].amount > a->parts[largest].amount ? i : largest;
  }
  return a->parts[largest].species->key;
}

const struct composition *
gas_composition (struct evaluation *ev, const struct gas_value *gas, struct place at)
{
  if (gas->closed) {
    return gas->closed;
  }
  /* What is being defined has no such gas yet: the list stands in its statement.  */
  const bool named = gas->name && !(ev->subject && strcmp (gas->name, ev->subject) == 0);
  const char *name = named ? gas->name : "the list", *shown = named ? gas->name : "(...)";
  fault_set_at (ev->fault, MESSAGE_GAS_OPEN, at, name,
                gas_total_text (ev, gas->analysis, analysis_total (gas->analysis)));
  if (gas->analysis->count > 0) {
    fault_hint (ev->fault, "%s normalised, %s normalised into %s", shown, shown,
                gas_usual_balance (gas->analysis));
  }
  return NULL;
}

/* ---- Changes ---- */

/* A dry gas that takes water up: a state that wets one leaves that unsaid, the word for it not.  */
static void
note_first_water (struct evaluation *ev, const struct composition *before,
                  const struct composition *after)
{
  const struct species *water = ev->session->water;
  if (!(composition_fraction (before, water) > 0)) {
    note_water (ev, 0, composition_fraction (after, water));
  }
}

static bool
wet_gas (struct evaluation *ev, const struct change_of *c, const struct state *state,
         struct value *out)
{
  const struct composition *gas = gas_composition (ev, c->gas, c->node->a->at), *before = gas;
  if (!gas || !state_wets (ev, state, NULL, &gas, c->node->at)) {
    return false;
  }
  note_first_water (ev, before, gas);
  struct gas_value *wet = ARENA_NEW (ev->arena, struct gas_value);
  *wet = (struct gas_value) { .name = c->gas->name, .closed = gas, .scaled = 1,
                              .list = c->gas->list,
                              .raw = c->gas->raw ? c->gas->raw : gas_analysis (ev, c->gas) };
  out->gas = wet;
  return true;
}

/* The state that `dried`, `wetted to` and `saturated at` bring about.  */
static bool
moisture_of (struct evaluation *ev, const struct node *node, struct state *state)
{
  *state = state_empty (node->at);
  if (node->kind == NODE_DRIED) {
    state->moisture = MOISTURE_DRY;
    return true;
  }
  if (node->kind == NODE_WETTED) {
    state->moisture = MOISTURE_FRACTION;
    return evaluate_water (ev, node->b, &state->moist);
  }
  if (!evaluate_state (ev, node->b, state)) {
    return false;
  }
  if (state->moisture != MOISTURE_NONE) {
    return fault_set_at (ev->fault, MESSAGE_STATE_TWICE, state->at, "moistures", NULL);
  }
  state->moisture = MOISTURE_SATURATED;
  return true;
}

/* Drying and wetting a stream keeps its dry flow and its state.  */
static bool
change_stream (struct evaluation *ev, const struct node *node, struct value *v)
{
  struct state state;
  if (node->kind == NODE_NORMALISED || node->kind == NODE_WITHOUT) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->a->at,
                         "a stream is made of a gas that is closed already", NULL);
  }
  if (!moisture_of (ev, node, &state)) {
    return false;
  }
  const struct composition *gas = v->stream.gas;
  double dry = stream_dry_moles (&v->stream, ev->session->water);
  if (!state_wets (ev, &state, &v->stream, &gas, node->at)) {
    return false;
  }
  note_first_water (ev, v->stream.gas, gas);
  double y = composition_fraction (gas, ev->session->water);
  v->stream.moles = dry / (1 - y);
  v->stream.gas = gas;
  record_rewetted (ev, dry, y, &v->stream);
  return true;
}

static bool
change_analysis (struct evaluation *ev, const struct change_of *c, struct value *out)
{
  const struct analysis *before = gas_analysis (ev, c->gas), *after;
  struct treatment did;
  if (!before) {
    return false;
  }
  if (c->node->kind == NODE_NORMALISED) {
    after = gas_normalised (ev, c, before);
  } else if (c->node->kind == NODE_WITHOUT) {
    after = gas_without (ev, c, before);
  } else {
    after = analysis_dried (ev->arena, before, ev->session->water, &did, ev->fault);
    if (after) {
      record_treatment (ev, &(struct treated) { .name = "dried:", .of = c->name, .before = before,
                                                .after = after, .did = &did });
    }
    if (after && ev->result && did.removed > 0) {
      note (ev, MESSAGE_NOTE_REMOVED, c->name, "H2O", gas_total_text (ev, before, did.removed));
    }
  }
  if (!after) {
    fault_place (ev->fault, c->node->at);
    return false;
  }
  struct gas_value named = { .name = c->gas->name, .basis = c->gas->basis, .list = c->gas->list,
                             .raw = c->gas->raw ? c->gas->raw : before };
  out->gas = gas_of_analysis (ev, after, &named);
  return out->gas != NULL;
}

bool
evaluate_change (struct evaluation *ev, const struct node *node, struct value *out)
{
  if (!evaluate (ev, node->a, NULL, out)) {
    return false;
  }
  if (out->kind == VALUE_STREAM) {
    return change_stream (ev, node, out);
  }
  if (out->kind != VALUE_GAS) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->a->at, "this is no gas", NULL);
  }
  struct change_of change = { node, out->gas, out->gas->name ? out->gas->name : "the list" };
  struct state state;
  if (node->kind == NODE_WETTED || node->kind == NODE_SATURATED) {
    return moisture_of (ev, node, &state) && wet_gas (ev, &change, &state, out);
  }
  return change_analysis (ev, &change, out);
}

/* ---- Recoveries ---- */

static bool
share_kept (struct evaluation *ev, const struct node *share, double *kept)
{
  struct value v;
  if (!evaluate_quantity (ev, share->a, &v)) {
    return false;
  }
  if (v.measure.ratio != RATIO_PLAIN && v.measure.ratio != RATIO_MOLE
      && v.measure.ratio != RATIO_MASS) {
    return fault_set_at (ev->fault, MESSAGE_UNIT_EXPECTED, share->a->at,
                         "a recovery is written in %: CO2 98 %", NULL);
  }
  if (!(v.si >= 0 && v.si <= 1)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, share->a->at,
                         "a recovery lies between 0 and 100 %", NULL);
  }
  *kept = v.si;
  return true;
}

static bool
keep_share (struct evaluation *ev, const struct node *share, const struct composition *gas,
            double *kept)
{
  struct node name = { .kind = NODE_NAME, .text = share->text, .at = share->at };
  struct species_set set;
  double x;
  bool found = false;
  if (!species_named (ev, &name, &set) || !share_kept (ev, share, &x)) {
    return false;
  }
  for (size_t i = 0; i < gas->count; i++)
    for (size_t k = 0; k < set.count; k++)
      if (gas->species[i] == set.at[k] && !isnan (kept[i])) {
        return fault_set_at (ev->fault, MESSAGE_GAS_TWICE, share->at, gas->species[i]->key, NULL);
      } else if (gas->species[i] == set.at[k]) {
        kept[i] = x;
        found = true;
      }
  return found || fault_set_at (ev->fault, MESSAGE_NO_SUCH_PART, share->at, share->text, NULL);
}

static bool
is_rest (const struct node *share)
{
  return share->rest || strcmp (share->text, "rest") == 0;
}

bool
evaluate_keeping (struct evaluation *ev, const struct node *node, struct value *out)
{
  if (!evaluate (ev, node->a, NULL, out)) {
    return false;
  }
  if (out->kind != VALUE_STREAM) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->a->at,
                         "recoveries are those of a stream", NULL);
  }
  const struct composition *gas = out->stream.gas;
  double *kept = ARENA_ARRAY (ev->arena, gas->count, double), rest = 0;
  for (const struct node *share = node->items; share; share = share->next)
    if (is_rest (share) && !share_kept (ev, share, &rest)) {
      return false;
    }
  for (size_t i = 0; i < gas->count; i++) {
    kept[i] = UNSTATED;
  }
  for (const struct node *share = node->items; share; share = share->next)
    if (!is_rest (share) && !keep_share (ev, share, gas, kept)) {
      return false;
    }
  for (size_t i = 0; i < gas->count; i++) {
    kept[i] = isnan (kept[i]) ? rest : kept[i];
  }
  struct stream whole = out->stream;
  if (!stream_keeping (ev->arena, &whole, kept, &out->stream, ev->fault)) {
    fault_place (ev->fault, node->at);
    return false;
  }
  record_keeping (ev, &whole, kept, &out->stream);
  if (ev->subject) {
    note (ev, MESSAGE_NOTE_KEPT, ev->subject,
          node->a->kind == NODE_NAME ? node->a->text : "its source",
          NULL);
  }
  return true;
}
