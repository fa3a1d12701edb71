#include "config.h"
#include "language/evaluate/evaluate_property.h"

#include <math.h>
#include "eos/caloric.h"
#include "eos/eos.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "property/flammability.h"
#include "property/heat_capacity.h"
#include "property/virial.h"
#include "property/viscosity.h"
#include "support/arena.h"
#include "units/constants.h"

/* ---- Heat capacity and what follows from it ---- */

struct heats { double cp, cv, kappa, w; const char *how; };

/* What is asked, from the molar heat capacity of the ideal gas.  */
static void
record_ideal (struct evaluation *ev, const struct property_question *q, const struct heats *h)
{
  if (!ev->workings || q->property == PROPERTY_CP) {
    return;
  }
  RECORD (ev, .name = "heat capacity at constant volume", .formula = "c_v = c_p - R",
          .value = h->cv, .unit = "J/(mol K)", .source = "ideal gas, Mayer's relation",
          STEP_SYMBOLS (SYMBOL ("c_p", h->cp, "J/(mol K)"), STEP_R));
  if (q->property == PROPERTY_CV) {
    return;
  }
  RECORD (ev, .name = "isentropic exponent", .formula = "kappa = c_p/c_v", .value = h->kappa,
          .unit = "1", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("c_p", h->cp, "J/(mol K)"), SYMBOL ("c_v", h->cv, "J/(mol K)")));
  if (q->property == PROPERTY_SPEED_OF_SOUND) {
    record_molar_mass (ev, q->gas, NULL);
    RECORD (ev, .name = "speed of sound", .formula = "w = sqrt(kappa R T/M)", .value = h->w,
            .unit = "m/s", .source = "ideal gas, Laplace's equation",
            STEP_SYMBOLS (SYMBOL ("kappa", h->kappa, "1"), STEP_R, SYMBOL ("T", q->T, "K"),
                          SYMBOL ("M", q->gas->molar_mass, "kg/mol")));
  }
}

/* By derivatives of the Helmholtz energy, which an equation of reference gives for itself.  */
static void
record_real (struct evaluation *ev, const struct property_question *q,
             const struct eos_state *state, const struct heats *h)
{
  static const struct { const char *name, *formula, *unit; } told[PROPERTY_COUNT] = {
    [PROPERTY_CP] = { "heat capacity at constant pressure",
                      "c_p/R = -tau^2 a_tt + (1 + d a_d - d tau a_dt)^2/(1 + 2 d a_d + d^2 a_dd)",
                      "J/(mol K)" },
    [PROPERTY_CV] = { "heat capacity at constant volume", "c_v/R = -tau^2 a_tt", "J/(mol K)" },
    [PROPERTY_KAPPA] = { "isentropic exponent", "kappa = -(v/p) (dp/dv)_s", "1" },
    [PROPERTY_SPEED_OF_SOUND] = { "speed of sound", "w^2 = (dp/drho)_s", "m/s" } };
  if (!ev->workings) {
    return;
  }
  eos_record (ev->workings, q->gas, q->T, q->p, state);
  const double value = q->property == PROPERTY_CP ? h->cp : q->property == PROPERTY_CV ? h->cv
                       : q->property == PROPERTY_KAPPA ? h->kappa : h->w;
  RECORD (ev, .name = told[q->property].name, .formula = told[q->property].formula,
          .solved = "derivatives of the Helmholtz energy, ideal part with them", .value = value,
          .unit = told[q->property].unit, .source = state->equation->source,
          STEP_SYMBOLS (SYMBOL ("T", q->T, "K"), SYMBOL ("rho", state->density, "mol/m3")));
}

/* Of an ideal gas: cv = cp - R, kappa = cp/cv, w^2 = kappa R T/M.  */
static bool
ideal_heats (struct evaluation *ev, const struct property_question *q, struct heats *h)
{
  struct ideal_heat ideal;
  if (!heat_of_gas (ev->session->properties, q->gas, q->T, &ideal, ev->workings, ev->fault)) {
    return false;
  }
  h->cp = ideal.cp;
  h->cv = ideal.cp - GAS_CONSTANT;
  h->kappa = h->cp / h->cv;
  h->w = sqrt (h->kappa * GAS_CONSTANT * q->T / constants_molar_mass (ev, q->gas));
  h->how = "ideal gas, no effect of pressure";
  record_ideal (ev, q, h);
  if (ideal.outside) {
    note (ev, MESSAGE_NOTE_BEYOND_RANGE, "heat capacity", ideal.outside->key, NULL);
  }
  return true;
}

/* By an equation of state that has an ideal-gas part of its own.  */
static bool
real_heats (struct evaluation *ev, const struct property_question *q,
            const struct equation *equation, struct heats *h)
{
  struct eos_state state;
  struct caloric c;
  const struct eos_mixture *mixture = eos_prepare (ev->arena, equation, q->gas);
  if (!eos_solve_prepared (mixture, q->T, q->p, &state, ev->fault)) {
    return false;
  }
  if (q->gas->count == 1 && state.may_condense) {
    return fault_set (ev->fault, MESSAGE_STATE_LIQUID, q->gas->species[0]->key, NULL);
  }
  if (!eos_caloric (mixture, q->T, state.density, &c)) {
    return ideal_heats (ev, q, h);
  }
  *h = (struct heats) { c.cp, c.cv, c.isentropic_exponent, c.speed_of_sound, equation->name };
  record_real (ev, q, &state, h);
  if (state.lumped > TRACES_WORTH_A_NOTE) {
    note (ev, MESSAGE_NOTE_MODEL_TRACES, equation->name, share_text (ev->arena, state.lumped),
          NULL);
  }
  if (state.range == EOS_RANGE_OUTSIDE) {
    note (ev, MESSAGE_NOTE_MODEL_OUTSIDE, equation->name, NULL, NULL);
  }
  return true;
}

static bool
heats_of (struct evaluation *ev, const struct property_question *q, struct heats *h)
{
  const char *lacking = NULL;
  enum gas_model model = q->ideal ? GAS_MODEL_IDEAL : ev->settings->model;
  evaluation_touch (ev, TOUCH_MODEL);
  const struct equation *equation = equation_choose_at (model, q->gas, q->T, q->p, &lacking,
                                                        ev->fault);
  if (!equation) {
    return false;
  }
  return equation->caloric ? real_heats (ev, q, equation, h) : ideal_heats (ev, q, h);
}

bool
property_caloric (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  struct heats h;
  if (!property_needs (ev, q, true, true) || !heats_of (ev, q, &h)) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  double M = constants_molar_mass (ev, q->gas);
  double si = q->property == PROPERTY_CP ? h.cp / M : q->property == PROPERTY_CV ? h.cv / M
              : q->property == PROPERTY_KAPPA ? h.kappa : h.w;
  if (ev->workings && (q->property == PROPERTY_CP || q->property == PROPERTY_CV)) {
    record_molar_mass (ev, q->gas, NULL);
    RECORD (ev, .name = "heat capacity by mass", .formula = "c = C/M", .value = si,
            .unit = "J/(kg K)", .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("C", q->property == PROPERTY_CP ? h.cp : h.cv, "J/(mol K)"),
                          SYMBOL ("M", M, "kg/mol")));
  }
  if (!property_answer (ev, q, si, out)) {
    return false;
  }
  if (ev->describe) {
    out->basis = arena_format (ev->arena, "%s, %s, %s", temperature_text (ev->arena, q->T, false),
                               pressure_text (ev->arena, q->p, false), h.how);
  }
  return true;
}

/* ---- Viscosity ---- */

/* Above this the density of a gas raises its viscosity by more than the mixing rule is good to.  */
#define LOW_PRESSURE 1e6

bool
property_viscosity (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  struct viscosity v;
  if (!property_needs (ev, q, true, false)
      || !viscosity_of_gas (ev->session->properties, q->gas, q->T, &v, ev->workings, ev->fault)) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  if (!property_answer (ev, q, v.value, out)) {
    return false;
  }
  if (v.outside) {
    note (ev, MESSAGE_NOTE_BEYOND_RANGE, "viscosity", v.outside->key, NULL);
  }
  if (q->p > LOW_PRESSURE) {
    note (ev, MESSAGE_NOTE_LOW_PRESSURE, pressure_text (ev->arena, q->p, false), NULL, NULL);
  }
  if (ev->describe) {
    out->basis = arena_format (ev->arena, "%s, low pressure%s",
                               temperature_text (ev->arena, q->T, false),
                               v.mixture ? ", mixed by Wilke's rule" : "");
  }
  return true;
}

/* ---- Second virial coefficient ---- */

bool
property_virial (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  struct second_virial B;
  if (!property_needs (ev, q, true, false)
      || !second_virial_of_gas (ev->session->properties, q->gas, q->T, &B, ev->workings,
                                ev->fault)) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  if (!property_answer (ev, q, B.value, out)) {
    return false;
  }
  if (B.outside) {
    note (ev, MESSAGE_NOTE_BEYOND_RANGE, "second virial coefficient", B.outside->key, NULL);
  }
  if (ev->describe) {
    const char *T = temperature_text (ev->arena, q->T, false);
    const bool pairs = q->gas->count > 1;
    out->basis = pairs || B.estimated
                   ? arena_format (ev->arena, "%s, %s%s%s estimated by Tsonopoulos (1974)", T,
                                   pairs ? "pairs" : "", pairs && B.estimated ? " and " : "",
                                   B.estimated ? B.estimated->key : "")
                   : arena_format (ev->arena, "%s, smoothed measurements", T);
  }
  return true;
}

/* ---- Flammable limits ---- */

/* The published limits are for about 20 degC and 1 atm; at this state they would be others.  */
static bool
away_from_usual (const struct property_question *q)
{
  return q->state && (fabs (q->T - 293.15) > 25 || fabs (q->p - STANDARD_ATMOSPHERE) > 2e4);
}

static void
tell_flammable (struct evaluation *ev, const struct property_question *q,
                const struct flammability *f)
{
  const char *name = q->node->b->kind == NODE_NAME ? q->node->b->text : "the gas";
  if (away_from_usual (q)) {
    note (ev, MESSAGE_NOTE_LIMITS_STATE,
          arena_format (ev->arena, "%s%s%s",
                        isnan (q->T) ? "" : temperature_text (ev->arena, q->T, false),
                        isnan (q->T) || isnan (q->p) ? "" : ", ",
                        isnan (q->p) ? "" : pressure_text (ev->arena, q->p, false)), NULL, NULL);
  }
  if (f->upper_is_bound) {
    note (ev, MESSAGE_NOTE_UPPER_IS_BOUND, NULL, NULL, NULL);
  }
  if (f->unknown) {
    note (ev, MESSAGE_NOTE_FLAMMABLE_UNKNOWN, f->unknown->key,
          share_text (ev->arena, f->unknown_share), NULL);
  }
  if (!isnan (f->least_oxygen)) {
    note (ev, MESSAGE_NOTE_LEAST_OXYGEN, share_text (ev->arena, f->least_oxygen), NULL, NULL);
  }
  if (f->burns_as_it_is) {
    note (ev, MESSAGE_CAUTION_BURNS_AS_IT_IS, name, NULL, NULL);
  }
  if (f->enriched || f->oxidiser) {
    note (ev, MESSAGE_CAUTION_LIMITS_OXIDISER, name, NULL, NULL);
  }
  if (f->pyrophoric) {
    note (ev, MESSAGE_CAUTION_PYROPHORIC, f->pyrophoric->key, name, NULL);
  }
  note (ev, MESSAGE_CAUTION_FLAMMABLE_LIMITS, NULL, NULL, NULL);
}

static bool
does_not_burn (struct evaluation *ev, const struct property_question *q, enum flammable_kind kind)
{
  return fault_set_at (ev->fault, MESSAGE_RANGE, q->node->b->at,
                       kind == FLAMMABLE_NOTHING
                         ? "nothing in it burns in air"
                         : "it holds too little fuel to burn with air in any proportion", NULL);
}

static bool
holds_stated (const struct composition *gas, const struct flammable_limits stated[], size_t n)
{
  bool holds = false;
  for (size_t i = 0; i < n; i++) {
    holds = holds || composition_fraction (gas, stated[i].species) > 0;
  }
  return holds;
}

bool
property_flammable (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  struct flammability f;
  struct flammable_limits *stated;
  size_t n = limits_set (ev->settings, ev, ev->arena, &stated);
  evaluation_touch (ev, TOUCH_LIMITS);
  if (!flammability_of (q->gas, stated, n, &f, ev->workings, ev->fault)) {
    fault_place (ev->fault, q->node->b->at);
    return false;
  }
  if (f.kind != FLAMMABLE_BETWEEN) {
    return does_not_burn (ev, q, f.kind);
  }
  bool upper = q->property == PROPERTY_UPPER_FLAMMABLE_LIMIT;
  if (upper && isnan (f.upper)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, q->node->b->at,
                         "no upper limit is published for it", NULL);
  }
  if (!property_answer (ev, q, upper ? f.upper : f.lower, out)) {
    return false;
  }
  if (q->property == PROPERTY_FLAMMABLE_LIMITS) {
    out->kind = VALUE_LIMITS;
    out->upper = f.upper;
  }
  out->basis = holds_stated (q->gas, stated, n)
                 ? "of the gas in air, near 20 degC and 1 atm, Le Chatelier, lower limits as set"
                 : "of the gas in air, near 20 degC and 1 atm, Le Chatelier";
  tell_flammable (ev, q, &f);
  return true;
}
