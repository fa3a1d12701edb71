#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include "eos/eos.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"
#include "units/constants.h"

bool
family_molar_volume (struct evaluation *ev, enum reference_family family,
                     const struct composition *gas, bool real, double *Vm)
{
  const struct family_setting *setting = &ev->settings->family[family];
  double ideal = GAS_CONSTANT * setting->at.T / setting->at.p;
  if (family == FAMILY_NONE) {
    evaluation_touch (ev, touch_family (family));
  } else {
    assume_family (ev, family);
  }
  evaluation_touch (ev, TOUCH_VOLUMES);
  if (!gas || !(real || ev->settings->real_volumes)) {
    *Vm = ideal;
    record_family (ev, family, ideal);
    return true;
  }
  double Z;
  const char *model;
  struct volume_question question = { gas, setting->at.T, setting->at.p, UNSTATED, false };
  if (!actual_molar_volume (ev, &question, Vm, &Z, &model)) {
    return false;
  }
  if (ev->result) {
    note (ev, MESSAGE_NOTE_REFERENCE_REAL, figure_text (ev->arena, Z), setting->text, model);
  }
  return true;
}

bool
volume_fill (struct evaluation *ev, double *T, double *p)
{
  const struct conditions *at = &ev->settings->family[FAMILY_NONE].at;
  if (isnan (at->T) || (isnan (*T) && isnan (*p))) {
    return false;
  }
  if (isnan (*p)) {
    *p = evaluation_barometer (ev);
    evaluation_touch (ev, TOUCH_SITE);
    assume_site_pressure (ev);
  } else {
    *T = at->T;
    evaluation_touch (ev, touch_family (FAMILY_NONE));
  }
  return true;
}

/* Water beyond saturation would not stay in the gas: said, not taken away.  */
static void
note_condensation (struct evaluation *ev, const struct volume_question *q)
{
  if (!ev->result) {
    return;
  }
  double y = composition_fraction (q->gas, ev->session->water), saturation;
  struct state saturated = { .T = q->T, .p = q->p, .moisture = MOISTURE_SATURATED };
  struct fault unheard;
  fault_init (&unheard, ev->arena);
  struct evaluation aside;
  evaluation_again (&aside, ev, &unheard);
  if (y > 0 && state_water (&aside, &saturated, &(struct moist_place) { q->T, q->p, q->gas },
                            &saturation)
      && y > saturation * (1 + 1e-6)) {
    note (ev, MESSAGE_NOTE_CONDENSE, share_text (ev->arena, y),
          share_text (ev->arena, saturation), NULL);
  }
}

/* What the equation says of itself at the state: range, accuracy, what it left out.  */
static void
tell_model (struct evaluation *ev, const struct eos_state *state)
{
  const char *name = state->equation->name;
  if (state->range == EOS_RANGE_EXTENDED) {
    note (ev, MESSAGE_NOTE_MODEL_EXTENDED, name, NULL, NULL);
  } else if (state->range == EOS_RANGE_OUTSIDE) {
    note (ev, MESSAGE_NOTE_MODEL_OUTSIDE, name, NULL, NULL);
  }
  if (state->lumped > TRACES_WORTH_A_NOTE) {
    note (ev, MESSAGE_NOTE_MODEL_TRACES, name, share_text (ev->arena, state->lumped), NULL);
  }
  if (state->may_condense) {
    note (ev, MESSAGE_NOTE_TWO_PHASE, name, NULL, NULL);
  }
}

/* Why `auto` took the cubic equation.  */
static void
tell_fallback (struct evaluation *ev, const struct composition *gas)
{
  const char *missing;
  if (equation_gerg_2008.covers (gas, &missing)) {
    note (ev, MESSAGE_NOTE_MODEL_BEYOND, NULL, NULL, NULL);
  } else {
    note (ev, MESSAGE_NOTE_MODEL_INSTEAD, missing, NULL, NULL);
  }
}

static void
assume_choice (struct evaluation *ev, const struct eos_state *state, const char *lacking)
{
  if (lacking && state->equation == &equation_ideal) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_MODEL_LACKING,
                                                  .fact = { lacking } });
  } else {
    assume_model (ev, state->equation->name, state->Z, state->uncertainty);
  }
}

/* From Z to the volume of a mole; the ideal gas has no Z to be found.  */
static void
record_volume (struct evaluation *ev, const struct volume_question *q,
               const struct eos_state *state, double Vm)
{
  bool ideal = state->equation == &equation_ideal;
  if (!ev->workings) {
    return;
  }
  eos_record (ev->workings, q->gas, q->T, q->p, state);
  const double R = state->equation->gas_constant;
  RECORD (ev, .name = "volume of a mole", .formula = ideal ? "V = R T/p" : "V = Z R T/p",
          .value = Vm, .unit = "m3/mol", .source = ideal ? STEP_IDEAL_GAS : STEP_DEFINITION,
          STEP_SYMBOLS (CONSTANT ("R", R, "J/(mol K)", fabs (R - GAS_CONSTANT) > 0
                                                         ? state->equation->source : STEP_SI),
                        SYMBOL ("T", q->T, "K"), SYMBOL ("p", q->p, "Pa"),
                        SYMBOL ("Z", state->Z, "1")));
}

/* With a Z that was given, or 1 in nobody's gas.  */
static void
record_given (struct evaluation *ev, const struct volume_question *q, double Z, double Vm)
{
  bool given = !isnan (q->Z);
  RECORD (ev, .name = "volume of a mole", .formula = given ? "V = Z R T/p" : "V = R T/p",
          .value = Vm, .unit = "m3/mol", .source = given ? STEP_DEFINITION : STEP_IDEAL_GAS,
          STEP_SYMBOLS (STEP_R, SYMBOL ("T", q->T, "K"), SYMBOL ("p", q->p, "Pa"),
                        CONSTANT ("Z", Z, "1", STEP_TYPED)));
}

static bool
model_molar_volume (struct evaluation *ev, const struct volume_question *q, double *Vm, double *Z,
                    const char **model)
{
  const char *lacking = NULL;
  enum gas_model wanted = q->ideal ? GAS_MODEL_IDEAL : ev->settings->model;
  const struct equation *equation = equation_choose_at (wanted, q->gas, q->T, q->p, &lacking,
                                                        ev->fault);
  struct eos_state state;
  evaluation_touch (ev, TOUCH_MODEL);
  if (!equation || !eos_solve (equation, q->gas, q->T, q->p, &state, ev->fault)) {
    return false;
  }
  if (q->gas->count == 1 && state.may_condense) {
    /* Of a pure substance the comparison is exact: none of it is gas.  */
    return fault_set (ev->fault, MESSAGE_STATE_LIQUID, q->gas->species[0]->key, NULL);
  }
  double moved = constants_density (ev, &state);
  *Z = state.Z / moved;
  *Vm = 1 / (state.density * moved);
  record_volume (ev, q, &state, *Vm);
  *model = equation->name;
  if (ev->describe && wanted == GAS_MODEL_IDEAL && !q->ideal) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_IDEAL_SET,
                                                  .alternative = ALTERNATIVE_REAL });
  }
  if (q->ideal || !ev->describe) {
    return true;
  }
  if (ev->settings->constants_uncertain && equation != &equation_ideal
      && !isfinite (state.uncertainty)) {
    note (ev, MESSAGE_NOTE_CONSTANTS_UNSTATED, equation->name, NULL, NULL);
  }
  if (!ev->settings->is_set[SETTING_GAS_MODEL]) {
    assume_choice (ev, &state, lacking);
  } else if (isfinite (state.uncertainty)) {
    note (ev, MESSAGE_NOTE_MODEL_UNCERTAINTY, equation->name,
          figure_text (ev->arena, 100 * state.uncertainty), NULL);
  }
  tell_model (ev, &state);
  if (wanted == GAS_MODEL_AUTO && equation == &equation_peng_robinson) {
    tell_fallback (ev, q->gas);
  }
  return true;
}

/* By the Z given, the model, or ideal where nobody's gas is.  */
static bool
volume_at_Z (struct evaluation *ev, const struct volume_question *q, double *Vm, double *Z,
             const char **model)
{
  if (!isnan (q->Z)) {
    *Z = q->Z;
    *model = "as given";
    *Vm = q->Z * GAS_CONSTANT * q->T / q->p;
    record_given (ev, q, *Z, *Vm);
    if (ev->result) {
      note (ev, MESSAGE_NOTE_GIVEN_Z, figure_text (ev->arena, q->Z), NULL, NULL);
    }
    return true;
  }
  if (!q->gas) {
    /* A volume of nobody's gas: ideal.  */
    *Z = 1;
    *model = "ideal";
    *Vm = GAS_CONSTANT * q->T / q->p;
    record_given (ev, q, 1, *Vm);
    if (ev->describe) {
      evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_IDEAL_TRACE });
    }
    return true;
  }
  return model_molar_volume (ev, q, Vm, Z, model);
}

bool
actual_molar_volume (struct evaluation *ev, const struct volume_question *q, double *Vm, double *Z,
                     const char **model)
{
  if (!(q->T > 0) || !(q->p > 0)) {
    return fault_set (ev->fault, MESSAGE_RANGE,
                      "a state needs a temperature and a pressure above zero", NULL);
  }
  const struct trial *trial = &ev->settings->trial;
  evaluation_touch (ev, TOUCH_TYPED);
  if (trial->Z_out || trial->Z > 0) {
    *Z = trial->Z_out ? 1 : trial->Z;
    *model = "ideal";
    *Vm = *Z * GAS_CONSTANT * q->T / q->p;
    return true;
  }
  if (q->gas) {
    note_condensation (ev, q);
  }
  if (!volume_at_Z (ev, q, Vm, Z, model)) {
    return false;
  }
  if (trial->Z_inverse) {
    *Vm /= *Z * *Z;
  }
  return true;
}
