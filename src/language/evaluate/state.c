#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/reference.h"
#include "gas/species.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "property/moist.h"
#include "support/arena.h"
#include "support/text.h"
#include "units/constants.h"

static bool
twice (struct evaluation *ev, struct place at, const char *what)
{
  return fault_set_at (ev->fault, MESSAGE_STATE_TWICE, at, what, NULL);
}

bool
quantity_pressure (struct evaluation *ev, const struct value *v, const char *typed, double *p)
{
  *p = v->si;
  if (ev->settings->trial.absolute_gauge && v->measure.sort == UNIT_ABSOLUTE && v->unit) {
    *p += ev->settings->site_pressure;
    evaluation_touch (ev, TOUCH_SITE);
  }
  if (v->measure.sort != UNIT_SCALE || !v->unit || strcmp (v->unit->spelling, "atm") == 0) {
    return true;
  }
  evaluation_touch (ev, TOUCH_BARE);
  if (ev->settings->bare_is_gauge) {
    *p += ev->settings->site_pressure;
  }
  if (ev->describe) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_ABSOLUTE,
                                                  .fact = { typed },
                                                  .alternative = ALTERNATIVE_GAUGE });
  }
  return true;
}

static bool
set_temperature (struct evaluation *ev, struct state *state, double T, struct place at)
{
  if (!isnan (state->T)) {
    return twice (ev, at, "temperatures");
  }
  if (!(T > 0)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, at,
                         "a temperature must be above absolute zero", NULL);
  }
  state->T = T;
  return true;
}

static bool
set_pressure (struct evaluation *ev, struct state *state, double p, struct place at)
{
  if (!isnan (state->p)) {
    return twice (ev, at, "pressures");
  }
  if (!(p > 0)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, at,
                         "an absolute pressure must be above zero", NULL);
  }
  state->p = p;
  return true;
}

static bool
set_moisture (struct evaluation *ev, struct state *state, enum moisture_kind kind, double value,
              struct place at)
{
  if (state->moisture != MOISTURE_NONE) {
    return twice (ev, at, "moistures");
  }
  state->moisture = kind;
  state->moist = value;
  return true;
}

static bool
state_item_wrong (struct evaluation *ev, struct place at, const char *way_on)
{
  return fault_set_at (ev->fault, MESSAGE_STATE_ITEM, at, way_on, NULL);
}

/* A figure in a state, told apart by what it measures.  */
static bool
figure_item (struct evaluation *ev, struct state *state, const struct node *node)
{
  struct value v;
  if (!evaluate (ev, node, NULL, &v)) {
    return false;
  }
  if (v.kind != VALUE_QUANTITY) {
    return state_item_wrong (ev, node->at, "a temperature, a pressure, a moisture, Z or the name "
                             "of reference conditions");
  }
  const struct measure *m = &v.measure;
  if (dimension_equal (m->dimension, DIMENSION_TEMPERATURE) && m->sort != UNIT_DIFFERENCE) {
    return set_temperature (ev, state, v.si, node->at);
  }
  if (dimension_equal (m->dimension, DIMENSION_PRESSURE)) {
    double p;
    const char *typed = node->figure && node->unit_text
                          ? arena_format (ev->arena, "%s %s", node->figure, node->unit_text)
                          : node->text ? node->text : "a pressure";
    return quantity_pressure (ev, &v, typed, &p) && set_pressure (ev, state, p, node->at);
  }
  if (m->sort == UNIT_HUMIDITY) {
    if (!(v.si >= 0 && v.si <= 1)) {
      return fault_set_at (ev->fault, MESSAGE_RANGE, node->at,
                           "a relative humidity lies between 0 and 100 %", NULL);
    }
    return set_moisture (ev, state, MOISTURE_HUMIDITY, v.si, node->at);
  }
  if (m->sort == UNIT_OXYGEN) {
    if (!isnan (state->oxygen)) {
      return twice (ev, node->at, "reference oxygens");
    }
    if (v.si < 0) {
      return fault_set_at (ev->fault, MESSAGE_RANGE, node->at, "oxygen below zero", NULL);
    }
    state->oxygen = v.si;
    return true;
  }
  return state_item_wrong (ev, node->at, "a temperature, a pressure, a moisture, Z or the name of "
                           "reference conditions");
}

/* Everything a named state says, into STATE.  */
static bool
merge (struct evaluation *ev, struct state *state, const struct state *named, struct place at)
{
  if (!isnan (named->T) && !set_temperature (ev, state, named->T, at)) {
    return false;
  }
  if (!isnan (named->p) && !set_pressure (ev, state, named->p, at)) {
    return false;
  }
  if (named->moisture != MOISTURE_NONE
      && !set_moisture (ev, state, named->moisture, named->moist, at)) {
    return false;
  }
  if (!isnan (named->Z)) {
    state->Z = named->Z;
  }
  return true;
}

/* A name with several definitions: each with what it stands for.  */
static bool
several_references (struct evaluation *ev, const struct node *node, const char *candidates)
{
  const char *list = "";
  for (const char *from = candidates; *from; ) {
    size_t n = strcspn (from, ", ");
    const struct reference *found;
    const char *more;
    if (reference_find (ev->session->references, from, n, &found, &more) == REFERENCE_ONE) {
      list = arena_format (ev->arena, "%s%s%s (%s, %s)", list, *list ? ", " : "", found->name,
                           found->temperature, found->pressure);
    }
    from += n;
    from += strspn (from, ", ");
  }
  return fault_set_at (ev->fault, MESSAGE_NAME_OPEN, node->at, node->text, list);
}

static bool
name_item (struct evaluation *ev, struct state *state, const struct node *node)
{
  size_t n = strlen (node->text);
  struct definition *d = name_find (ev->session, node->text, n);
  if (d && d->kind == NAME_REFERENCE) {
    const struct state *named = definition_state (ev, d, node->at);
    return named && merge (ev, state, named, node->at);
  }
  if (d) {
    return figure_item (ev, state, node);
  }
  const struct reference *found;
  const char *candidates;
  switch (reference_find (ev->session->references, node->text, n, &found, &candidates)) {
  case REFERENCE_ONE: {
    struct state named = state_empty (node->at);
    named.T = found->at.T;
    named.p = found->at.p;
    if (found->at.humidity > 0) {
      named.moisture = MOISTURE_HUMIDITY;
      named.moist = found->at.humidity;
    }
    return merge (ev, state, &named, node->at);
  }
  case REFERENCE_AMBIGUOUS:
    return several_references (ev, node, candidates);
  case REFERENCE_NONE:
    break;
  }
  return name_unknown (ev, node);
}

bool
evaluate_water (struct evaluation *ev, const struct node *node, double *y)
{
  struct value v;
  if (!evaluate_quantity (ev, node, &v)) {
    return false;
  }
  const struct measure *m = &v.measure;
  if (m->ratio == RATIO_MOLE || m->ratio == RATIO_VOLUME) {
    *y = v.si;
  } else if (m->family_power == -1 && m->dimension.mass == 1 && m->dimension.length == -3) {
    double Vm;
    if (!family_molar_volume (ev, m->family, NULL, false, &Vm)) {
      return false;
    }
    *y = v.si * Vm / ev->session->water->molar_mass;
  } else {
    return state_item_wrong (ev, node->at, "water is a share (mol%, ppm) or a mass per reference "
                             "volume (mg/Nm3)");
  }
  return (*y >= 0 && *y < 1)
         || fault_set_at (ev->fault, MESSAGE_RANGE, node->at,
                          "the share of water must lie between 0 and 100 mol%", NULL);
}

static bool
value_item (struct evaluation *ev, struct state *state, const struct node *node)
{
  struct value v;
  double y;
  if (node->kind == NODE_ITEM_WATER) {
    return evaluate_water (ev, node->a, &y)
           && set_moisture (ev, state, MOISTURE_FRACTION, y, node->at);
  }
  if (!evaluate_quantity (ev, node->a, &v)) {
    return false;
  }
  if (node->kind == NODE_ITEM_DEW_POINT) {
    return dimension_equal (v.measure.dimension, DIMENSION_TEMPERATURE)
             ? set_moisture (ev, state, MOISTURE_DEW_POINT, v.si, node->at)
             : state_item_wrong (ev, node->at, "a dew point is a temperature");
  }
  if (!dimension_is_none (v.measure.dimension) || v.measure.ratio != RATIO_NONE) {
    return state_item_wrong (ev, node->a->at, "Z has no unit");
  }
  if (!(v.si > 0)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, node->at, "Z must be above zero", NULL);
  }
  state->Z = v.si;
  return true;
}

static bool
add_item (struct evaluation *ev, struct state *state, const struct node *node)
{
  if (node->kind == NODE_ITEM_SATURATED) {
    return set_moisture (ev, state, MOISTURE_SATURATED, UNSTATED, node->at);
  }
  if (node->kind == NODE_ITEM_DRY) {
    return set_moisture (ev, state, MOISTURE_DRY, 0, node->at);
  }
  if (node->kind == NODE_ITEM_IDEAL || node->kind == NODE_ITEM_REAL) {
    *(node->kind == NODE_ITEM_IDEAL ? &state->ideal : &state->real) = true;
    return true;
  }
  if (node->kind == NODE_ITEM_Z || node->kind == NODE_ITEM_WATER
      || node->kind == NODE_ITEM_DEW_POINT) {
    return value_item (ev, state, node);
  }
  return node->kind == NODE_NAME ? name_item (ev, state, node) : figure_item (ev, state, node);
}

struct state
state_empty (struct place at)
{
  return (struct state) { .T = UNSTATED, .p = UNSTATED, .Z = UNSTATED, .oxygen = UNSTATED,
                          .moist = UNSTATED, .at = at };
}

/* While a check tries it: what the state would be instead.  */
static void
try_other (struct evaluation *ev, struct state *state)
{
  const struct trial *trial = &ev->settings->trial;
  evaluation_touch (ev, TOUCH_TYPED);
  state->T = trial->T > 0 && !isnan (state->T) ? trial->T : state->T;
  state->p = trial->p > 0 && !isnan (state->p) ? trial->p : state->p;
  if (trial->no_moisture && state->moisture != MOISTURE_DRY) {
    state->moisture = MOISTURE_NONE;
  } else if (trial->humidity > 0 && !isnan (state->T) && !isnan (state->p)) {
    state->moisture = MOISTURE_HUMIDITY;
    state->moist = trial->humidity;
  }
}

bool
evaluate_state (struct evaluation *ev, const struct node *node, struct state *state)
{
  *state = state_empty (node->at);
  for (const struct node *item = node->items; item; item = item->next)
    if (!add_item (ev, state, item)) {
      fault_place (ev->fault, item->at);
      return false;
    }
  try_other (ev, state);
  return true;
}

/* What may not be: more water than gas can hold.  */
static bool
beyond_saturation (struct evaluation *ev, const struct state *state, double T)
{
  const char *why = state->moisture == MOISTURE_DEW_POINT && state->moist > T
                      ? "the dew point lies above the temperature: no gas holds that much water"
                    : state->moisture == MOISTURE_HUMIDITY && state->moist > 1
                      ? "a relative humidity lies between 0 and 100 %" : NULL;
  return why && !fault_set_at (ev->fault, MESSAGE_RANGE, state->at, why, NULL);
}

/* Air takes up more water than its partial pressure alone says, unless gases are to be ideal.  */
static bool
applies_enhancement (struct evaluation *ev, const struct composition *gas)
{
  bool air = gas && enhancement_is_for (gas);
  if (air) {
    evaluation_touch (ev, TOUCH_MODEL);
  }
  return air && ev->settings->model != GAS_MODEL_IDEAL;
}

void
note_no_enhancement (struct evaluation *ev, const struct moist_question *q,
                     const struct moist_answer *a)
{
  if (a->applied == ENHANCEMENT_BEYOND_T || a->applied == ENHANCEMENT_BEYOND_P) {
    note (ev, MESSAGE_NOTE_ENHANCEMENT_BEYOND, NULL, NULL, NULL);
  } else if (!q->air && q->p > 1e6) {
    /* In air at 0 degC the factor is 1.037 at 1 MPa and 1.075 at 2 MPa (Greenspan 1976).  */
    note (ev, MESSAGE_NOTE_ENHANCEMENT_OTHER, NULL, NULL, NULL);
  }
}

/* The vapour pressure over supercooled liquid, which a stated dew point may mean, over that of the
   ice it is taken for; UNSTATED: it cannot mean that.                                           */
static double
liquid_for_ice (const struct evaluation *ev, const struct state *state,
                const struct moist_answer *answer)
{
  struct fault unheard;
  double psat;
  fault_init (&unheard, ev->arena);
  return state->moisture == MOISTURE_DEW_POINT && answer->phase == WATER_ICE
             && water_pressure_liquid (state->moist, &psat, &unheard)
           ? psat / answer->psat : UNSTATED;
}

bool
state_water (struct evaluation *ev, const struct state *state, const struct moist_place *at,
             double *y)
{
  static const enum moist_asked asked[] = {
    [MOISTURE_SATURATED] = MOIST_SATURATED, [MOISTURE_HUMIDITY] = MOIST_BY_HUMIDITY,
    [MOISTURE_DEW_POINT] = MOIST_BY_DEW_POINT };
  struct moist_answer answer;
  if (state->moisture == MOISTURE_NONE || state->moisture == MOISTURE_DRY) {
    *y = 0;
    return true;
  }
  if (state->moisture == MOISTURE_FRACTION) {
    *y = state->moist;
    return true;
  }
  if (beyond_saturation (ev, state, at->T)) {
    return false;
  }
  double p = ev->settings->trial.vapour_atmospheric ? STANDARD_ATMOSPHERE : at->p;
  struct moist_question question = { asked[state->moisture], state->moist, at->T, p,
                                     applies_enhancement (ev, at->gas) };
  if (!moist_answer (&question, &answer, ev->workings, ev->fault)) {
    return false;
  }
  if (state->moisture == MOISTURE_HUMIDITY && at->T < ICE_POINT && ev->describe) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_HUMIDITY });
  }
  evaluation_touch (ev, TOUCH_VAPOUR);
  const double liquid = liquid_for_ice (ev, state, &answer);
  *y = answer.value * ev->settings->vapour_factor
       * (ev->settings->dew_over_liquid && !isnan (liquid) ? liquid : 1);
  assume_vapour_pressure (ev, answer.psat, answer.phase == WATER_ICE, !isnan (liquid));
  if (answer.applied == ENHANCEMENT_APPLIED) {
    note (ev, MESSAGE_NOTE_ENHANCEMENT, figure_text (ev->arena, answer.factor), NULL, NULL);
  }
  note_no_enhancement (ev, &question, &answer);
  return true;
}

/* The moisture words that need a temperature and a pressure.  */
static bool
wants_state (const struct state *state, double T, double p, const char **lacks)
{
  bool needs_T = state->moisture == MOISTURE_SATURATED || state->moisture == MOISTURE_HUMIDITY;
  bool needs_p = needs_T || state->moisture == MOISTURE_DEW_POINT;
  *lacks = needs_T && isnan (T) ? "the moisture"
           : needs_p && isnan (p) ? "the moisture" : NULL;
  return *lacks == NULL;
}

bool
state_wets (struct evaluation *ev, const struct state *state, const struct stream *fallback,
            const struct composition **gas, struct place at)
{
  if (state->moisture == MOISTURE_NONE) {
    return true;
  }
  const struct species *water = ev->session->water;
  double T = isnan (state->T) && fallback ? fallback->T : state->T;
  double p = isnan (state->p) && fallback ? fallback->p : state->p;
  double y, before = composition_fraction (*gas, water);
  const char *lacks;
  if (!wants_state (state, T, p, &lacks)) {
    bool T_said = !isnan (T), p_said = !isnan (p);
    fault_set_at (ev->fault, p_said ? MESSAGE_TEMPERATURE_MISSING
                             : T_said ? MESSAGE_PRESSURE_MISSING : MESSAGE_STATE_MISSING,
                  state->at, lacks, NULL);
    fault_hint (ev->fault, "both: at 35 degC, 1.02 bar(a), or at 35 degC, site pressure");
    return false;
  }
  if (!state_water (ev, state, &(struct moist_place) { T, p, *gas }, &y)) {
    fault_place (ev->fault, state->at);
    return false;
  }
  if (y <= 0 && before <= 0) {
    return true;
  }
  const struct composition *wet = composition_wetted (ev->arena, *gas, water, y, ev->fault);
  if (!wet) {
    fault_place (ev->fault, at);
    return false;
  }
  record_wetting (ev, *gas, wet);
  if (before > 0) {
    note_water (ev, before, y);
  }
  *gas = wet;
  return true;
}

bool
state_apply (struct evaluation *ev, const struct state *state, struct stream *stream,
             struct place at)
{
  const struct species *water = ev->session->water;
  double dry = stream_dry_moles (stream, water);
  const struct composition *gas = stream->gas;
  if (!state_wets (ev, state, stream, &gas, at)) {
    return false;
  }
  if (gas != stream->gas) {
    double y = composition_fraction (gas, water);
    stream->moles = dry / (1 - y);
    stream->gas = gas;
    record_rewetted (ev, dry, y, stream);
  }
  if (!isnan (state->T) || !isnan (state->p)) {
    stream->Z = UNSTATED;
  }
  stream->T = isnan (state->T) ? stream->T : state->T;
  stream->p = isnan (state->p) ? stream->p : state->p;
  stream->Z = isnan (state->Z) ? stream->Z : state->Z;
  return true;
}
