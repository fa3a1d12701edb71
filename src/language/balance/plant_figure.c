/* Figures as a balance counts them: a flow on any basis in mol/s, kg/s or W, a share in mol/mol
   or kg/kg, a concentration by what a mole of the gas holds.                                    */
#include "config.h"
#include "language/balance/plant_private.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"
#include "support/number.h"
#include "units/constants.h"

double
digits_rounding (const struct node *figure)
{
  return figure && figure->figure && *figure->figure
           ? number_rounding (figure->figure, figure->number) : 0;
}

/* The gas a volume is one of, as far as it is known.  */
static const struct composition *
gas_of (struct reader_state *r, const struct items *items, bool dry)
{
  size_t stream = items->count > 0 ? items->at[0].stream : NO_STREAM;
  const struct composition *gas = stream != NO_STREAM ? r->plant->stream[stream].gas : NULL;
  if (!gas || !dry || composition_fraction (gas, r->ev->session->water) <= 0) {
    return gas;
  }
  struct fault unheard;
  fault_init (&unheard, r->ev->arena);
  return composition_wetted (r->ev->arena, gas, r->ev->session->water, 0, &unheard);
}

static const char *
stream_name (struct reader_state *r, const struct items *items)
{
  size_t stream = items->count > 0 ? items->at[0].stream : NO_STREAM;
  return stream != NO_STREAM ? r->plant->stream[stream].name : "it";
}

/* Molar volume at the state of a figure.  */
static bool
state_volume (struct reader_state *r, const struct reading *figure, const struct items *items,
              double *Vm)
{
  const struct state *state = &figure->state;
  const struct node *typed = figure->node->kind == NODE_AT ? figure->node->a : figure->node;
  const struct value *v = &figure->figure;
  double T = isnan (state->T) ? v->T : state->T, p = isnan (state->p) ? v->p : state->p, Z;
  const char *model;
  if (isnan (T) || isnan (p)) {
    fault_set_at (r->ev->fault, MESSAGE_STATE_MISSING,
                  typed->unit ? typed->unit_at : typed->at,
                  typed->unit ? typed->unit_text : "an actual volume", NULL);
    fault_hint (r->ev->fault, "... at 20 degC, 1 bar(a)");
    return false;
  }
  if (state->moisture != MOISTURE_NONE) {
    return fault_set_at (r->ev->fault, MESSAGE_STATE_ITEM, state->at,
                         "in a balance water is a component: known H2O of NAME = 3 mol%", NULL);
  }
  const struct composition *gas = gas_of (r, items, (v->words & WORD_DRY) != 0);
  bool ideal = (v->words & WORD_IDEAL) || state->ideal;
  r->real_volumes = r->real_volumes || (!ideal && isnan (state->Z));
  if (!gas && isnan (state->Z)) {
    *Vm = GAS_CONSTANT * T / p;
    if (!ideal) {
      evaluation_assume (r->ev, &(struct assumption) { .kind = MESSAGE_TAKEN_IDEAL_OPEN,
                                                       .fact = { stream_name (r, items) } });
    }
    return true;
  }
  struct volume_question question = { gas, T, p, state->Z, ideal };
  if (!actual_molar_volume (r->ev, &question, Vm, &Z, &model)) {
    fault_place (r->ev->fault, figure->node->at);
    return false;
  }
  return true;
}

static bool
reference_volume (struct reader_state *r, const struct reading *figure, const struct items *items,
                  double *Vm)
{
  const struct value *v = &figure->figure;
  bool real = (v->words & WORD_REAL) || r->ev->settings->real_volumes;
  r->real_volumes = r->real_volumes || real;
  if (family_molar_volume (r->ev, v->measure.family,
                           real ? gas_of (r, items, (v->words & WORD_DRY) != 0) : NULL, real,
                           Vm)) {
    return true;
  }
  fault_place (r->ev->fault, figure->node->at);
  return false;
}

/* A flow as the network counts it: *BY is SI figure per unit of the network.  */
static bool
flow_by (struct reader_state *r, const struct reading *flow, const struct reading *figure,
         struct counting *count, double *by)
{
  const struct value *v = &figure->figure;
  bool per_time;
  *count = (struct counting) { flow_basis_of (&v->measure, &per_time), (v->words & WORD_DRY) != 0,
                               (v->words & WORD_NET) != 0 };
  *by = 1;
  if (!per_time) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, figure->node->at,
                         "a balance is one of flows, not of amounts", "kg/h, not kg");
  }
  switch (count->basis) {
  case FLOW_MASS:
    r->counts_mass = true;
    return true;
  case FLOW_MOLAR:
    r->counts_moles = true;
    return true;
  case FLOW_REFERENCE:
    r->counts_moles = true;
    return reference_volume (r, figure, &flow->items, by);
  case FLOW_ACTUAL:
    r->counts_moles = true;
    return state_volume (r, figure, &flow->items, by);
  case FLOW_ENERGY:
    r->has_gas = true;
    return (v->words & (WORD_GROSS | WORD_NET))
           || fault_set_at (r->ev->fault, MESSAGE_GROSS_OR_NET, figure->node->at, NULL, NULL);
  case FLOW_NONE:
    break;
  }
  return fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, figure->node->at,
                       "this is no flow", NULL);
}

static bool
keep_unit (struct reader_state *r, const struct reading *figure, struct raw_fact *raw, double by)
{
  const struct unit *unit = figure->figure.unit;
  const struct node *typed = figure->digits;
  raw->about.unit = unit ? unit->spelling : "";
  raw->about.per = by / (unit ? unit->factor : 1);
  raw->value = figure->figure.si / by;
  raw->digits = typed;
  if (!isfinite (raw->value)) {
    return fault_set_at (r->ev->fault, MESSAGE_NOT_FINITE, figure->node->at, NULL, NULL);
  }
  return true;
}

bool
flow_figure (struct reader_state *r, const struct reading *flow, const struct reading *figure,
             struct raw_fact *raw)
{
  double by;
  raw->kind = FACT_FORM;
  raw->left = flow->items;
  if (!flow_by (r, flow, figure, &raw->count_left, &by) || !keep_unit (r, figure, raw, by)) {
    return false;
  }
  if (figure->figure.words & WORD_DRY) {
    raw->about.unit = arena_format (r->ev->arena, "%s dry", raw->about.unit);
  }
  bool whole = flow->items.count > 0 && !flow->items.at[0].species;
  if (!r->plant->unit && figure->figure.unit && whole && raw->count_left.basis != FLOW_ENERGY
      && raw->count_left.basis != FLOW_ACTUAL) {
    r->plant->unit = figure->figure.unit;
    r->plant->unit_text = figure->figure.unit->spelling;
  }
  return raw->value >= 0 || flow->items.count > 1
         || fault_set_at (r->ev->fault, MESSAGE_RANGE, figure->node->at, "a flow below zero",
                          NULL);
}

/* ---- Shares and concentrations ---- */

static bool
is_concentration (const struct measure *m)
{
  return dimension_equal (m->dimension, DIMENSION_DENSITY)
         || dimension_equal (m->dimension, DIMENSION_MOLAR_DENSITY);
}

static bool
one_stream_of_parts (struct reader_state *r, const struct reading *flow,
                     const struct reading *figure)
{
  const struct items *items = &flow->items;
  for (size_t i = 0; i < items->count; i++)
    if (!items->at[i].species || items->at[i].stream != items->at[0].stream) {
      fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, figure->node->at,
                    !items->at[i].species ? "a share of what? a flow is in kg/h, kmol/h, Nm3/h"
                    : "a share of what? components of one stream have one in it", NULL);
      if (!items->at[i].species && figure->digits && figure->digits->figure) {
        fault_hint (r->ev->fault, "known %s = %s %% of NAME", stream_name (r, items),
                    figure->digits->figure);
      }
      return false;
    }
  return true;
}

bool
share_figure (struct reader_state *r, const struct reading *flow, const struct reading *figure,
              struct raw_fact *raw)
{
  const struct value *v = &figure->figure;
  const struct measure *m = &v->measure;
  bool mass = m->ratio == RATIO_MASS, dry = (v->words & WORD_DRY) != 0;
  double by = 1;
  if (m->ratio == RATIO_NONE && !is_concentration (m)) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, figure->node->at,
                         "this measures no flow and no share of a gas", NULL);
  }
  if (m->ratio == RATIO_PLAIN) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_EXPECTED, figure->node->at,
                         "a share of a gas is mol% or mass%", NULL);
  }
  if (!one_stream_of_parts (r, flow, figure)) {
    return false;
  }
  raw->kind = FACT_RATIO;
  raw->left = flow->items;
  raw->right.count = 1;
  raw->right.at = ARENA_NEW (r->ev->arena, struct item);
  raw->right.at[0] = (struct item) { .stream = flow->items.at[0].stream,
                                                       .times = 1 };
  raw->count_left.basis = mass || dimension_equal (m->dimension, DIMENSION_DENSITY) ? FLOW_MASS
                                                                                    : FLOW_MOLAR;
  raw->count_right = (struct counting) { mass ? FLOW_MASS : FLOW_MOLAR, dry, false };
  if (m->ratio == RATIO_NONE) {
    struct items host = raw->right;
    if (m->family_power != 0 ? !reference_volume (r, figure, &host, &by)
                             : !state_volume (r, figure, &host, &by)) {
      return false;
    }
    by = 1 / by;
  }
  if (!keep_unit (r, figure, raw, by)) {
    return false;
  }
  if (dry) {
    raw->about.unit = arena_format (r->ev->arena, "%s dry", raw->about.unit);
  }
  bool share = m->ratio != RATIO_NONE;
  return (raw->value >= 0 && !(share && raw->value > 1))
         || fault_set_at (r->ev->fault, MESSAGE_RANGE, figure->node->at,
                          raw->value < 0 ? "a share below zero" : "a share above the whole", NULL);
}
