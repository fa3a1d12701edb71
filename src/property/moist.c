#include "config.h"
#include "property/moist.h"

#include <math.h>
#include <stdio.h>
#include "gas/moisture.h"
#include "support/fault.h"
#include "units/workings.h"

static const char ideal_source[] = "Dalton and Raoult, ideal, no enhancement factor";
static const char factor_source[] = "L. Greenspan, J. Res. NBS 80A (1976) 41";

static bool
check_pressure (double p, struct fault *fault)
{
  if (isfinite (p) && p > 0)
    return true;
  return fault_set (fault, MESSAGE_RANGE, "an absolute pressure is above zero", NULL);
}

static bool
check_share (double y, struct fault *fault)
{
  if (y >= 0 && y <= 1)
    return true;
  return fault_set (fault, MESSAGE_RANGE, "a share of water is 0 to 1", NULL);
}

static bool
check_humidity (double phi, struct fault *fault)
{
  char what[100];
  if (phi >= 0 && phi <= 1)
    return true;
  snprintf (what, sizeof what, "a relative humidity is 0 to 100 %%, not %.6g %%", 100 * phi);
  return fault_set (fault, MESSAGE_RANGE, what, NULL);
}

static void
find_factor (const struct moist_question *q, double T, struct moist_answer *a)
{
  a->factor = 1;
  a->applied = ENHANCEMENT_NOT_AIR;
  if (q->air)
    a->applied = enhancement_factor (T, q->p, a->psat, a->phase, &a->factor);
}

/* Saturation pressure and factor at T: over liquid, or over what is there at T.  */
static bool
saturate (const struct moist_question *q, double T, bool liquid, struct moist_answer *a,
          struct fault *fault)
{
  a->phase = WATER_LIQUID;
  if (liquid ? !water_pressure_liquid (T, &a->psat, fault)
      : !water_pressure (T, &a->psat, &a->phase, fault))
    return false;
  find_factor (q, T, a);
  return true;
}

static void
record_saturation (struct workings *workings, const struct moist_question *q, double T,
                   const struct moist_answer *a)
{
  water_pressure_record (workings, T, a->psat, a->phase);
  if (a->applied == ENHANCEMENT_APPLIED)
    enhancement_record (workings, T, q->p, a->psat, a->phase, a->factor);
}

static void
record_share (struct workings *workings, const struct moist_question *q, double phi,
              const struct moist_answer *a)
{
  bool enhanced = a->applied == ENHANCEMENT_APPLIED, humid = q->asked == MOIST_BY_HUMIDITY;
  if (workings == NULL)
    return;
  workings_add (workings, &(struct step) {
      .name = "share of water",
      .formula = enhanced ? humid ? "y = phi f psat/p" : "y = f psat/p"
                 : humid ? "y = phi psat/p" : "y = psat/p",
      .value = a->value, .unit = "mol/mol", .source = enhanced ? factor_source : ideal_source,
      STEP_SYMBOLS (SYMBOL ("psat", a->psat, "Pa"), SYMBOL ("p", q->p, "Pa"),
                    SYMBOL ("f", a->factor, "1"), SYMBOL ("phi", phi, "1")) });
}

/* The mole fraction at PHI of saturation, which is in A.  */
static bool
share_at (const struct moist_question *q, double phi, struct moist_answer *a,
          struct fault *fault)
{
  double p_water = phi * a->factor * a->psat;
  char what[160];
  if (!(p_water / q->p < 1)) {
    snprintf (what, sizeof what, "the water alone would have %.6g kPa, the gas has only %.6g kPa",
              p_water / 1e3, q->p / 1e3);
    return fault_set (fault, MESSAGE_RANGE, what, "state a higher pressure or less water");
  }
  a->value = p_water / q->p;
  return true;
}

/* Saturation by a temperature.  Cooled at its own pressure the gas saturates at the dew point: its
   water is what saturation holds there.                                                         */
static bool
answer_share (const struct moist_question *q, struct moist_answer *a, struct workings *workings,
              struct fault *fault)
{
  bool humid = q->asked == MOIST_BY_HUMIDITY;
  double T = q->asked == MOIST_BY_DEW_POINT ? q->given : q->T;
  if ((humid && !check_humidity (q->given, fault)) || !check_pressure (q->p, fault)
      || !saturate (q, T, humid, a, fault))
    return false;
  if (!share_at (q, humid ? q->given : 1, a, fault))
    return false;
  record_saturation (workings, q, T, a);
  record_share (workings, q, humid ? q->given : 1, a);
  return true;
}

static void
record_humidity (struct workings *workings, const struct moist_question *q,
                 const struct moist_answer *a)
{
  if (workings == NULL)
    return;
  workings_add (workings, &(struct step) {
      .name = "relative humidity",
      .formula = a->applied == ENHANCEMENT_APPLIED ? "phi = y p/(f psat)" : "phi = y p/psat",
      .value = a->value, .unit = "1",
      .source = "World Meteorological Organization, WMO-No. 8, annex 4.A: over liquid water",
      STEP_SYMBOLS (SYMBOL ("y", q->given, "mol/mol"), SYMBOL ("p", q->p, "Pa"),
                    SYMBOL ("psat", a->psat, "Pa"), SYMBOL ("f", a->factor, "1")) });
}

static bool
answer_humidity (const struct moist_question *q, struct moist_answer *a,
                 struct workings *workings, struct fault *fault)
{
  if (!check_share (q->given, fault) || !check_pressure (q->p, fault)
      || !saturate (q, q->T, true, a, fault))
    return false;
  a->value = q->given * q->p / (a->factor * a->psat);
  record_saturation (workings, q, q->T, a);
  record_humidity (workings, q, a);
  return true;
}

/* The dew point in A, found without a factor, becomes that with it, f(T) psat(T) = p_water.  f
   hardly moves with T (a hundredth of what psat does), so that psat = p_water/f, taken again and
   again, gains two digits a step.  f > 1 lowers T: begun above, it stays on the liquid while it
   can.  Where the end lies outside the factor's range A stays what it was, but for the reason.   */
static bool
refine_dew_point (const struct moist_question *q, double p_water, struct moist_answer *a,
                  struct fault *fault)
{
  enum { STEPS = 40 };                   /* ten are enough */
  static const double settled = 1e-13;   /* relative, of T */
  struct moist_answer now = *a;
  double step = HUGE_VAL;
  for (int i = 0; i < STEPS && step > settled * now.value; i++) {
    double T = now.value;
    find_factor (q, fmin (T, ENHANCEMENT_T_HIGHEST), &now);
    a->applied = now.applied;
    if (now.applied != ENHANCEMENT_APPLIED)
      return true;
    now.psat = p_water / now.factor;
    if (!water_dew_point (now.psat, &now.value, &now.phase, fault))
      return false;
    step = fabs (now.value - T);
  }
  struct moist_answer last = now;
  find_factor (q, now.value, &last);     /* is the end within the range? */
  if (last.applied == ENHANCEMENT_APPLIED)
    *a = now;
  else
    a->applied = last.applied;
  return true;
}

/* The vapour pressure is worked out again at the dew point, so that the step can be followed: there
   it is the one looked for.                                                                     */
static void
record_dew_point (struct workings *workings, const struct moist_question *q, double p_water,
                  const struct moist_answer *a)
{
  bool ice = a->phase == WATER_ICE, enhanced = a->applied == ENHANCEMENT_APPLIED;
  if (workings == NULL)
    return;
  workings_add (workings, &(struct step) {
      .name = "partial pressure of water", .formula = "p_w = y p", .value = p_water, .unit = "Pa",
      .source = enhanced ? factor_source : ideal_source,
      STEP_SYMBOLS (SYMBOL ("y", q->given, "mol/mol"), SYMBOL ("p", q->p, "Pa")) });
  workings_add (workings, &(struct step) {
      .name = ice ? "frost point" : "dew point",
      .formula = enhanced ? "f psat = p_w" : "psat = p_w",
      .solved = "Newton's steps on the vapour pressure below", .value = a->value, .unit = "K",
      .source = enhanced ? factor_source : ideal_source,
      STEP_SYMBOLS (SYMBOL ("p_w", p_water, "Pa"), SYMBOL ("psat", a->psat, "Pa"),
                    SYMBOL ("f", a->factor, "1")) });
  record_saturation (workings, q, a->value, a);
}

static bool
answer_dew_point (const struct moist_question *q, struct moist_answer *a,
                  struct workings *workings, struct fault *fault)
{
  if (!check_share (q->given, fault) || !check_pressure (q->p, fault))
    return false;
  if (q->given <= 0)
    return fault_set (fault, MESSAGE_NO_WATER, NULL, NULL);
  double p_water = q->given * q->p;
  *a = (struct moist_answer) { .psat = p_water, .factor = 1, .applied = ENHANCEMENT_NOT_AIR };
  if (!water_dew_point (p_water, &a->value, &a->phase, fault)
      || (q->air && !refine_dew_point (q, p_water, a, fault)))
    return false;
  record_dew_point (workings, q, p_water, a);
  return true;
}

bool
moist_answer (const struct moist_question *q, struct moist_answer *answer,
              struct workings *workings, struct fault *fault)
{
  struct moist_answer found = { 0 };
  bool done = q->asked == MOIST_DEW_POINT ? answer_dew_point (q, &found, workings, fault)
    : q->asked == MOIST_HUMIDITY ? answer_humidity (q, &found, workings, fault)
    : answer_share (q, &found, workings, fault);
  if (done)
    *answer = found;
  return done;
}
