#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include "gas/air.h"
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"

/* ---- Gases and their totals ---- */

/* A figure that may differ from WHOLE only in a digit that is not usually told.  */
static const char *
close_text (struct evaluation *ev, double value, double whole)
{
  bool hidden = value != whole && fabs (value / whole - 1) < 1e-5;
  return hidden ? arena_format (ev->arena, "%.9g", value) : figure_text (ev->arena, value);
}

/* A total on the basis of the whole: "99.37 mol%".  */
static const char *
total_text (struct evaluation *ev, const struct analysis *analysis, double total)
{
  return arena_format (ev->arena, "%s %s", close_text (ev, 100 * total, 100),
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

/* Rounding in the last digits of a sum is no scaling.  */
#define SCALING_WORTH_A_NOTE 1e-10

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
          close_text (ev, gas->scaled, 1),
          total_text (ev, analysis, analysis_total (analysis)));
  }
  return gas;
}

/* The part that usually takes the difference: nitrogen if it is there, else the largest.  */
static const char *
usual_balance (const struct analysis *a)
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
  const char *name = gas->name ? gas->name : "the list";
  fault_set_at (ev->fault, MESSAGE_GAS_OPEN, at, name,
                total_text (ev, gas->analysis, analysis_total (gas->analysis)));
  const char *shown = gas->name ? gas->name : "(...)";
  if (gas->analysis->count > 0) {
    fault_hint (ev->fault, "%s normalised, %s normalised into %s", shown, shown,
                usual_balance (gas->analysis));
  }
  return NULL;
}

/* ---- Changes ---- */

struct change_of { const struct node *node; const struct gas_value *gas; const char *name; };

static bool
one_species (struct evaluation *ev, const struct node *name, const struct species **species)
{
  struct species_set set;
  if (!species_named (ev, name, &set)) {
    return false;
  }
  if (set.count != 1) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, name->at, "one component is needed here",
                         NULL);
  }
  *species = set.at[0];
  return true;
}

static const struct analysis *
normalised (struct evaluation *ev, const struct change_of *c, const struct analysis *before)
{
  const struct species *into = NULL;
  struct treatment did;
  if (c->node->b && !one_species (ev, c->node->b, &into)) {
    return NULL;
  }
  const struct analysis *after
    = into ? analysis_normalised_into (ev->arena, before, into, &did, ev->fault)
           : analysis_normalised (ev->arena, before, &did, ev->fault);
  if (!after || !ev->result || fabs (did.total_before - 1) <= SCALING_WORTH_A_NOTE) {
    return after;
  }
  const char *total = total_text (ev, before, did.total_before);
  if (into) {
    note (ev, MESSAGE_NOTE_NORMALISED_INTO, c->name, total,
          arena_format (ev->arena, "%s (%s%s)", into->key, did.added < 0 ? "" : "+",
                        total_text (ev, before, did.added)));
  } else {
    note (ev, MESSAGE_NOTE_NORMALISED, c->name, total, figure_text (ev->arena, did.factor));
  }
  return after;
}

/* What a second tracer would have taken away: the two bracket the truth.  */
static void
note_other_tracer (struct evaluation *ev, const struct change_of *c,
                   const struct analysis *before, const struct composition *air, bool by_oxygen)
{
  const struct species *other;
  const char *candidates;
  struct treatment did;
  struct fault unheard;
  const char *key = by_oxygen ? "N2" : "O2";
  if (!ev->result
      || species_find (ev->session->vocabulary.species, key, 2, &other, &candidates)
           != SPECIES_KEY) {
    return;
  }
  fault_init (&unheard, ev->arena);
  if (analysis_without_gas (ev->arena, before, air, 1, &other, &did, &unheard)) {
    note (ev, MESSAGE_NOTE_OTHER_TRACER, c->name, key, total_text (ev, before, did.removed));
  } else if (unheard.kind == MESSAGE_NEGATIVE_PART) {
    note (ev, MESSAGE_NOTE_OTHER_TRACER_FAILS, c->name, key, unheard.fact[0]);
  }
}

/* The place behind another one.  */
static struct place
behind (struct place at)
{
  return (struct place) { at.line, at.last + 1, at.last + 1 };
}

/* `without air [by N2]`: the tracer sets how much, the other parts go with it.  */
static const struct analysis *
without_gas (struct evaluation *ev, const struct change_of *c, const struct analysis *before,
             const struct composition *gas)
{
  struct species_set tracers = { { ev->session->oxygen }, 1 };
  struct treatment did;
  if (!c->node->c && !(composition_fraction (gas, ev->session->oxygen) > 0)) {
    fault_set_at (ev->fault, MESSAGE_UNFINISHED, behind (c->node->b->at), NULL, NULL);
    fault_hint (ev->fault, "say which of its parts sets how much: without %s by %s",
                c->node->b->text, gas->species[0]->key);
    return NULL;
  }
  if (c->node->c && !species_named (ev, c->node->c, &tracers)) {
    return NULL;
  }
  const struct analysis *after
    = analysis_without_gas (ev->arena, before, gas, tracers.count, tracers.at, &did, ev->fault);
  if (!after) {
    fault_place (ev->fault, c->node->c ? c->node->c->at : c->node->b->at);
    return NULL;
  }
  if (ev->result) {
    const char *tracer = c->node->c ? c->node->c->text : ev->session->oxygen->key;
    note (ev, MESSAGE_NOTE_REMOVED_BY, c->name,
          arena_format (ev->arena, "%s of %s", total_text (ev, before, did.removed),
                        c->node->b->text), tracer);
    if (did.skipped && *did.skipped) {
      note (ev, MESSAGE_NOTE_SKIPPED, did.skipped, NULL, NULL);
    }
    note_other_tracer (ev, c, before, gas, strcmp (tracer, "O2") == 0);
  }
  return after;
}

static const struct analysis *
without (struct evaluation *ev, const struct change_of *c, const struct analysis *before)
{
  const struct node *what = c->node->b;
  size_t n = strlen (what->text);
  struct definition *d = name_find (ev->session, what->text, n);
  if (d && d->kind == NAME_GAS) {
    const struct value *value = definition_value (ev, d, what->at);
    const struct composition *gas = value ? gas_composition (ev, value->gas, what->at) : NULL;
    return gas ? without_gas (ev, c, before, gas) : NULL;
  }
  if (air_is_name (what->text, n)) {
    return without_gas (ev, c, before, ev->session->air);
  }
  struct species_set set;
  if (!species_named (ev, what, &set)) {
    return NULL;
  }
  if (c->node->c) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, c->node->c->at,
                  "a component is taken away whole, without a tracer", NULL);
    fault_hint (ev->fault, "%s without %s", c->name, what->text);
    return NULL;
  }
  const struct analysis *after = before;
  double removed = 0;
  for (size_t i = 0; i < set.count; i++) {
    struct treatment did;
    after = analysis_without (ev->arena, after, set.at[i], &did, ev->fault);
    if (!after) {
      fault_place (ev->fault, what->at);
      return NULL;
    }
    removed += did.removed;
  }
  if (ev->result) {
    note (ev, MESSAGE_NOTE_REMOVED, c->name, what->text, total_text (ev, before, removed));
  }
  return after;
}

static bool
wet_gas (struct evaluation *ev, const struct change_of *c, const struct state *state,
         struct value *out)
{
  const struct composition *gas = gas_composition (ev, c->gas, c->node->a->at);
  if (!gas || !state_wets (ev, state, NULL, &gas, c->node->at)) {
    return false;
  }
  out->gas = gas_of_composition (ev, gas, c->gas->name);
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
  v->stream.moles = dry / (1 - composition_fraction (gas, ev->session->water));
  v->stream.gas = gas;
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
    after = normalised (ev, c, before);
  } else if (c->node->kind == NODE_WITHOUT) {
    after = without (ev, c, before);
  } else {
    after = analysis_dried (ev->arena, before, ev->session->water, &did, ev->fault);
    if (after && ev->result && did.removed > 0) {
      note (ev, MESSAGE_NOTE_REMOVED, c->name, "H2O", total_text (ev, before, did.removed));
    }
  }
  if (!after) {
    fault_place (ev->fault, c->node->at);
    return false;
  }
  struct gas_value named = { .name = c->gas->name, .basis = c->gas->basis, .list = c->gas->list };
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
  if (!stream_keeping (ev->arena, &out->stream, kept, &out->stream, ev->fault)) {
    fault_place (ev->fault, node->at);
    return false;
  }
  if (ev->subject) {
    note (ev, MESSAGE_NOTE_KEPT, ev->subject,
          node->a->kind == NODE_NAME ? node->a->text : "its source",
          NULL);
  }
  return true;
}
