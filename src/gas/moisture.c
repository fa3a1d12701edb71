#include "config.h"
#include "gas/moisture.h"

#include <math.h>
#include <stdio.h>
#include "support/fault.h"
#include "units/constants.h"
#include "units/workings.h"

/* IAPWS SR1-86(1992), section 2: reference constants, K and Pa.  */
static const double T_critical = 647.096, p_critical = 22.064e6;
/* IAPWS R14-08(2011): the triple point of ordinary water, K and Pa.  */
static const double T_triple = 273.16, p_triple = 611.657;
/* Ends of the ranges, K: -50 degC is where the supercooled liquid still follows the equation
   within half a per cent of Hardy (1998); 50 K is the end of R14-08.                            */
static const double T_liquid_least = 223.15, T_ice_least = 50;

/* Coefficients and exponents of the two curves below.  */
static const double liquid_a[6] = { -7.85951783, 1.84408259, -11.7866497, 22.6807411, -15.9618719,
                                    1.80122502 };
static const double liquid_b[6] = { 1, 1.5, 3, 3.5, 4, 7.5 };
static const double ice_a[3] = { -0.212144006e2, 0.273203819e2, -0.610598130e1 };
static const double ice_b[3] = { 0.333333333e-2, 0.120666667e1, 0.170333333e1 };

/* ln(p) and its derivative by T.  */
struct curve { double ln_p, slope; };

/* IAPWS SR1-86(1992), eq. 1 (Wagner and Pruss, J. Phys. Chem. Ref. Data 22 (1993) 783), 273.16 K
   to 647.096 K:
     ln(p/pc) = (Tc/T) (a1 tau + a2 tau^1.5 + a3 tau^3 + a4 tau^3.5 + a5 tau^4 + a6 tau^7.5),
     tau = 1 - T/Tc;   d(ln p)/dT = -(ln(p/pc) + d(sum)/d(tau))/T  (from eq. 1).                 */
static struct curve
liquid_curve (double T)
{
  const double a1 = liquid_a[0], a2 = liquid_a[1], a3 = liquid_a[2], a4 = liquid_a[3],
    a5 = liquid_a[4], a6 = liquid_a[5];
  double tau = 1 - T / T_critical;
  double root = sqrt (tau);
  double tau2 = tau * tau, tau3 = tau2 * tau, tau6 = tau3 * tau3;
  double sum = a1 * tau + a2 * tau * root + a3 * tau3 + a4 * tau3 * root + a5 * tau2 * tau2
    + a6 * tau6 * tau * root;
  double rise = a1 + 1.5 * a2 * root + 3 * a3 * tau2 + 3.5 * a4 * tau2 * root + 4 * a5 * tau3
    + 7.5 * a6 * tau6 * root;
  double ratio = T_critical / T * sum;
  return (struct curve) { log (p_critical) + ratio, -(ratio + rise) / T };
}

/* IAPWS R14-08(2011), eq. 6 (Wagner, Riethmann, Feistel and Harvey, J. Phys. Chem. Ref. Data 40
   (2011) 043103), 50 K to 273.16 K:
     ln(p/pt) = theta^-1 sum a_i theta^b_i, theta = T/Tt.                                        */
static struct curve
ice_curve (double T)
{
  const double *a = ice_a, *b = ice_b;
  double theta = T / T_triple;
  double sum = 0, rise = 0;
  for (int i = 0; i < 3; i++) {
    double term = a[i] * pow (theta, b[i] - 1);
    sum += term;
    rise += (b[i] - 1) * term;
  }
  return (struct curve) { log (p_triple) + sum, rise / T };
}

static bool
temperature_fault (struct fault *fault, const char *over, double T, const double limits[2])
{
  char what[160];
  snprintf (what, sizeof what,
            "the vapour pressure of water over %s is known from %.6g to %.6g degC, "
            "not at %.6g degC", over, limits[0] - ICE_POINT, limits[1] - ICE_POINT, T - ICE_POINT);
  return fault_set (fault, MESSAGE_RANGE, what, "state the water as a share: water 3 mol%");
}

bool
water_pressure_liquid (double T, double *p, struct fault *fault)
{
  if (!(T >= T_liquid_least && T <= T_critical))
    return temperature_fault (fault, "liquid", T, (const double[]) { T_liquid_least, T_critical });
  *p = exp (liquid_curve (T).ln_p);
  return true;
}

bool
water_pressure_ice (double T, double *p, struct fault *fault)
{
  if (!(T >= T_ice_least && T <= T_triple))
    return temperature_fault (fault, "ice", T, (const double[]) { T_ice_least, T_triple });
  *p = exp (ice_curve (T).ln_p);
  return true;
}

bool
water_pressure (double T, double *p, enum water_phase *phase, struct fault *fault)
{
  if (!(T >= T_ice_least && T <= T_critical))
    return temperature_fault (fault, "ice and liquid", T,
                              (const double[]) { T_ice_least, T_critical });
  *phase = T < T_triple ? WATER_ICE : WATER_LIQUID;
  return *phase == WATER_ICE ? water_pressure_ice (T, p, fault)
                             : water_pressure_liquid (T, p, fault);
}

/* The T between LEAST and MOST at which the rising curve meets LN_P.  Newton's steps are taken in
   1/T, in which ln p is nearly a straight line (Clausius and Clapeyron); a step that leaves the
   bracket is replaced by halving it.  False if it does not settle.                              */
static bool
curve_solve (struct curve (*curve) (double T), double ln_p, const double bracket[2], double *found)
{
  enum { STEPS_MOST = 100 };                             /* halving alone needs about 60 */
  const double settled = 1e-15;                          /* relative step */
  double least = bracket[0], most = bracket[1], T = 0.5 * (least + most);
  for (int i = 0; i < STEPS_MOST; i++) {
    struct curve at = curve (T);
    double excess = at.ln_p - ln_p;
    if (excess > 0)
      most = T;
    else
      least = T;
    double next = T / (1 + excess / (at.slope * T));     /* 1/T - excess/(d(ln p)/d(1/T)) */
    if (!(next >= least && next <= most))
      next = 0.5 * (least + most);
    double step = fabs (next - T);
    T = next;
    if (step <= settled * T || most - least <= settled * T) {
      *found = T;
      return true;
    }
  }
  return false;
}

bool
water_dew_point (double p, double *T, enum water_phase *phase, struct fault *fault)
{
  double least = exp (ice_curve (T_ice_least).ln_p);
  if (!(p >= least && p <= p_critical)) {
    char what[160];
    snprintf (what, sizeof what,
              "a dew point is known for partial pressures of water from %.3g Pa to 22.064 MPa, "
              "not for %.6g Pa", least, p);
    return fault_set (fault, MESSAGE_RANGE, what, NULL);
  }
  double liquid_least = exp (liquid_curve (T_triple).ln_p);
  double found = T_triple;               /* the curves meet here within 7e-5 Pa */
  bool done = true;
  if (p < p_triple)
    done = curve_solve (ice_curve, log (p), (const double[]) { T_ice_least, T_triple }, &found);
  else if (p > liquid_least)
    done = curve_solve (liquid_curve, log (p), (const double[]) { T_triple, T_critical }, &found);
  if (!done)
    return fault_set (fault, MESSAGE_NOT_CONVERGED, "the dew point", NULL);
  *T = found;
  *phase = p < p_triple ? WATER_ICE : WATER_LIQUID;
  return true;
}

void
water_pressure_record (struct workings *workings, double T, double psat, enum water_phase phase)
{
  static const char liquid_source[] = "IAPWS SR1-86(1992), eq. 1 (Wagner and Pruss 1993)";
  static const char ice_source[] = "IAPWS R14-08(2011), eq. 6";
  static const char *const terms[] = { "1", "2", "3", "4", "5", "6" };
  if (workings == NULL)
    return;
  if (phase == WATER_ICE)
    workings_add (workings, &(struct step) {
        .name = "vapour pressure of ice",
        .formula = "psat = p_t exp(T_t/T sum(a_i (T/T_t)^b_i))", .value = psat, .unit = "Pa",
        .source = ice_source, .term_count = 3, .terms = terms,
        STEP_SYMBOLS (SYMBOL ("T", T, "K"), CONSTANT ("T_t", T_triple, "K", ice_source),
                      CONSTANT ("p_t", p_triple, "Pa", ice_source)),
        STEP_COLUMNS ({ "a_i", ice_a, NULL, ice_source, NULL },
                      { "b_i", ice_b, NULL, ice_source, NULL }) });
  else
    workings_add (workings, &(struct step) {
        .name = "vapour pressure of liquid water",
        .formula = "psat = p_c exp(T_c/T sum(a_i (1 - T/T_c)^b_i))", .value = psat, .unit = "Pa",
        .source = liquid_source, .term_count = 6, .terms = terms,
        STEP_SYMBOLS (SYMBOL ("T", T, "K"), CONSTANT ("T_c", T_critical, "K", liquid_source),
                      CONSTANT ("p_c", p_critical, "Pa", liquid_source)),
        STEP_COLUMNS ({ "a_i", liquid_a, NULL, liquid_source, NULL },
                      { "b_i", liquid_b, NULL, liquid_source, NULL }) });
}
