#include "config.h"
#include "language/evaluate/flow.h"

#include <math.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

enum flow_basis
flow_basis_of (const struct measure *m, bool *flow)
{
  struct dimension d = m->dimension;
  *flow = d.time == -1 || (d.time == -3 && d.mass == 1 && d.length == 2);
  if (m->ratio != RATIO_NONE || d.temperature != 0) {
    return FLOW_NONE;
  }
  if (dimension_equal (d, DIMENSION_ENERGY) || dimension_equal (d, DIMENSION_POWER)) {
    return FLOW_ENERGY;
  }
  if (*flow) {
    d.time++;
  }
  if (dimension_equal (d, DIMENSION_VOLUME)) {
    return m->family_power == 1 ? FLOW_REFERENCE : FLOW_ACTUAL;
  }
  if (m->family_power != 0) {
    return FLOW_NONE;
  }
  return dimension_equal (d, DIMENSION_MASS) ? FLOW_MASS
         : dimension_equal (d, DIMENSION_AMOUNT) ? FLOW_MOLAR : FLOW_NONE;
}

bool
flow_is_specific (const struct measure *m)
{
  bool flow;
  struct dimension d = m->dimension;
  bool pressure = dimension_equal (d, DIMENSION_PRESSURE)
                  && (m->sort == UNIT_ABSOLUTE || m->sort == UNIT_GAUGE || m->sort == UNIT_VACUUM);
  return flow_basis_of (m, &flow) == FLOW_NONE && !pressure
         && (m->family_power == -1 || dimension_equal (dimension_times (d, DIMENSION_MASS),
                                                       DIMENSION_ENERGY)
             || dimension_equal (dimension_times (d, DIMENSION_AMOUNT), DIMENSION_ENERGY)
             || dimension_equal (dimension_times (d, DIMENSION_VOLUME), DIMENSION_ENERGY));
}

void
quantity_at_state (struct value *v, const struct state *state)
{
  v->T = state->T;
  v->p = state->p;
  if (v->kind == VALUE_TRACE) {
    v->oxygen = state->oxygen;
  }
}

/* An actual volume needs its state.  */
static bool
no_state (struct evaluation *ev, const struct flow_figure *f)
{
  const struct node *typed = f->typed;
  bool unit = typed->kind == NODE_QUANTITY && typed->unit;
  fault_set_at (ev->fault, MESSAGE_STATE_MISSING, unit ? typed->unit_at : typed->at,
                unit ? typed->unit_text : "an actual volume", NULL);
  if (unit && typed->figure) {
    fault_hint (ev->fault, "%s %s of ... at 20 degC, 1 bar(a)", typed->figure, typed->unit_text);
  }
  return false;
}

/* An actual volume of which no state is said: none, unless a check tries conditions for it.  */
static bool
open_moles (struct evaluation *ev, const struct flow_figure *f, const struct composition *counted,
            double *per)
{
  double Vm;
  bool real = (f->quantity->words & WORD_REAL) != 0;
  if (isnan (ev->settings->family[FAMILY_NONE].at.T)) {
    return no_state (ev, f);
  }
  if (!family_molar_volume (ev, FAMILY_NONE, counted, real, &Vm)) {
    return false;
  }
  *per = 1 / Vm;
  return true;
}

/* Moles per unit of the figure's SI value, for the gas PART the figure counts.  */
static bool
moles_per_figure (struct evaluation *ev, const struct flow_figure *f, const struct stream *at,
                  const struct composition *counted, double *per)
{
  const struct value *q = f->quantity;
  bool flow, real = (q->words & WORD_REAL) != 0;
  double Vm, Z;
  const char *model;
  switch (flow_basis_of (&q->measure, &flow)) {
  case FLOW_MASS:
    *per = 1 / constants_molar_mass (ev, counted);
    return true;
  case FLOW_MOLAR:
    *per = 1;
    return true;
  case FLOW_REFERENCE:
    if (!family_molar_volume (ev, q->measure.family, counted, real, &Vm)) {
      return false;
    }
    *per = 1 / Vm;
    return true;
  case FLOW_ACTUAL: {
    double T = at->T, p = at->p;
    if ((isnan (T) || isnan (p)) && !volume_fill (ev, &T, &p)) {
      return open_moles (ev, f, counted, per);
    }
    struct volume_question question = { counted, T, p, at->Z,
                                        (q->words & WORD_IDEAL) != 0
                                        || (f->state && f->state->ideal) };
    if (!actual_molar_volume (ev, &question, &Vm, &Z, &model)) {
      return false;
    }
    *per = 1 / Vm;
    return true;
  }
  case FLOW_ENERGY:
    if (!(q->words & (WORD_GROSS | WORD_NET))) {
      const struct node *typed = f->typed;
      fault_set_at (ev->fault, MESSAGE_GROSS_OR_NET,
                    typed->kind == NODE_QUANTITY ? typed->unit_at : typed->at, NULL, NULL);
      if (typed->figure) {
        fault_hint (ev->fault, "%s %s gross of ..., %s %s net of ...", typed->figure,
                    typed->unit_text, typed->figure, typed->unit_text);
      }
      return false;
    }
    if (!heat_per_mole (ev, counted, (q->words & WORD_NET) != 0, &Vm)) {
      return false;
    }
    if (!(Vm > 0)) {
      return fault_set_at (ev->fault, MESSAGE_RANGE, f->typed->at,
                           "this gas does not burn: no flow of it carries energy", NULL);
    }
    *per = 1 / Vm;
    return true;
  case FLOW_NONE:
    break;
  }
  return fault_set_at (ev->fault, MESSAGE_UNIT_MISMATCH, f->typed->at,
                       "this is no flow and no amount of a gas", NULL);
}

/* What one mole has of what the figure counts, and whether the water is counted.  */
struct amount { double per; bool dry; double y; };

/* The amount that a figure came to.  */
static void
record_amount (struct evaluation *ev, const struct flow_figure *f, const struct stream *made,
               const struct composition *counted, const struct amount *amount)
{
  static const struct { const char *symbol, *unit, *formula, *dry; } ways[] = {
    [FLOW_NONE] = { "", "", "", "" },
    [FLOW_MASS] = { "M", "kg/mol", "n = q/M", "n = q/M/(1 - y)" },
    [FLOW_MOLAR] = { "k", "mol/mol", "n = q/k", "n = q/k/(1 - y)" },
    [FLOW_REFERENCE] = { "V", "m3/mol", "n = q/V", "n = q/V/(1 - y)" },
    [FLOW_ACTUAL] = { "V", "m3/mol", "n = q/V", "n = q/V/(1 - y)" },
    [FLOW_ENERGY] = { "H", "J/mol", "n = q/H", "n = q/H/(1 - y)" },
  };
  bool flow;
  enum flow_basis basis = flow_basis_of (&f->quantity->measure, &flow);
  if (!ev->workings) {
    return;
  }
  if (basis == FLOW_MASS) {
    record_molar_mass (ev, counted, f->called);
  }
  RECORD (ev, .name = "amount of", .of = f->called ? f->called : "the gas",
          .formula = amount->dry ? ways[basis].dry : ways[basis].formula, .value = made->moles,
          .unit = moles_unit (made->flow), .source = STEP_DEFINITION,
          STEP_SYMBOLS ({ "q", f->quantity->si, NULL, NULL, f->quantity->unit },
                        SYMBOL (ways[basis].symbol, 1 / amount->per, ways[basis].unit),
                        SYMBOL ("y", amount->y, "mol/mol")));
}

bool
flow_from_quantity (struct evaluation *ev, const struct flow_figure *f, struct place at,
                    struct stream *out)
{
  struct stream stream = *f->source;
  if (f->state) {
    if (!state_wets (ev, f->state, &stream, &stream.gas, at)) {
      return false;
    }
    bool moved = !isnan (f->state->T) || !isnan (f->state->p);
    stream.T = isnan (f->state->T) ? stream.T : f->state->T;
    stream.p = isnan (f->state->p) ? stream.p : f->state->p;
    stream.Z = !isnan (f->state->Z) || moved ? f->state->Z : stream.Z;
  }
  (void) flow_basis_of (&f->quantity->measure, &stream.flow);
  const struct composition *counted = stream.gas;
  const struct species *water = ev->session->water;
  double y = composition_fraction (stream.gas, water);
  const struct trial *trial = &ev->settings->trial;
  bool dry = (trial->dry || (!trial->wet && (f->quantity->words & WORD_DRY))) && y > 0;
  evaluation_touch (ev, TOUCH_TYPED);
  if (dry && !(counted = composition_wetted (ev->arena, stream.gas, water, 0, ev->fault))) {
    fault_place (ev->fault, at);
    return false;
  }
  double per = 0;
  if (!moles_per_figure (ev, f, &stream, counted, &per)) {
    return false;
  }
  stream.moles = f->quantity->si * per / (dry ? 1 - y : 1);
  record_amount (ev, f, &stream, counted, &(struct amount) { per, dry, y });
  if (stream.moles < 0) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, f->typed->at,
                         "a flow or an amount below zero", NULL);
  }
  *out = stream;
  return true;
}
