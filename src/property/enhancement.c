#include "config.h"
#include "property/enhancement.h"

#include <math.h>
#include <stddef.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "units/constants.h"
#include "units/workings.h"

/* Greenspan (1976): ln f = alpha (1 - psat/p) + beta (p/psat - 1), alpha = sum A_i t^(i-1),
   beta = exp (sum B_i t^(i-1)), t in degC.  The coefficients are those for use with the vapour
   pressures of the temperature scale of 1990 given by B. Hardy, Proc. 3rd Int. Symp. on Humidity
   and Moisture (1998), Tables 2 and 3, from memory; the tests hold them to an independent
   computation.                                                                                  */
struct coefficients { double A[4], B[4]; };

static const struct coefficients water = {
  { 3.53624e-4, 2.9328363e-5, 2.6168979e-7, 8.5813609e-9 },
  { -10.7588, 6.3268134e-2, -2.5368934e-4, 6.3405286e-7 }
};
static const struct coefficients supercooled = {
  { 3.62183e-4, 2.6061244e-5, 3.8667770e-7, 3.8268958e-9 },
  { -10.7604, 6.3987441e-2, -2.6351566e-4, 1.6725084e-6 }
};
static const struct coefficients ice = {
  { 3.64449e-4, 2.9367585e-5, 4.8874766e-7, 4.3669918e-9 },
  { -10.7271, 7.6215115e-2, -1.7490155e-4, 2.4668279e-6 }
};

static double
cubic (const double c[4], double t)
{
  return c[0] + t * (c[1] + t * (c[2] + t * c[3]));
}

static const struct coefficients *
coefficients_for (double t, enum water_phase phase)
{
  return phase == WATER_ICE ? &ice : t < 0 ? &supercooled : &water;
}

enum enhancement
enhancement_factor (double T, double p, double psat, enum water_phase phase, double *factor)
{
  /* The bounds are figures in degC: let them in whatever the last digits.  */
  double slack = 1e-6, t = T - ICE_POINT;
  *factor = 1;
  if (!(T >= ENHANCEMENT_T_LOWEST - slack && T <= ENHANCEMENT_T_HIGHEST + slack))
    return ENHANCEMENT_BEYOND_T;
  if (!(p >= psat && p <= ENHANCEMENT_P_HIGHEST * (1 + 1e-9)))
    return ENHANCEMENT_BEYOND_P;
  const struct coefficients *c = coefficients_for (t, phase);
  *factor = exp (cubic (c->A, t) * (1 - psat / p) + exp (cubic (c->B, t)) * (p / psat - 1));
  return ENHANCEMENT_APPLIED;
}

void
enhancement_record (struct workings *workings, double T, double p, double psat,
                    enum water_phase phase, double factor)
{
  static const char source[] = "L. Greenspan, J. Res. NBS 80A (1976) 41; coefficients of B. Hardy, "
                               "Proc. 3rd Int. Symp. on Humidity and Moisture (1998)";
  static const char *const terms[] = { "1", "2", "3", "4" };
  static const double powers[4] = { 0, 1, 2, 3 };
  if (workings == NULL)
    return;
  const double t = T - ICE_POINT;
  const struct coefficients *c = coefficients_for (t, phase);
  workings_add (workings, &(struct step) {
      .name = "enhancement factor",
      .formula = "f = exp(sum(A_i t^k_i) (1 - psat/p) + exp(sum(B_i t^k_i)) (p/psat - 1))",
      .value = factor, .unit = "1", .source = source, .term_count = 4, .terms = terms,
      STEP_SYMBOLS (SYMBOL ("t", t, "degC"), SYMBOL ("psat", psat, "Pa"), SYMBOL ("p", p, "Pa")),
      STEP_COLUMNS ({ "A_i", c->A, NULL, source, NULL }, { "B_i", c->B, NULL, source, NULL },
                    { "k_i", powers, NULL, source, NULL }) });
}

/* Air without water: 78.1 % N2, 20.9 % O2, 0.9 % Ar (U.S. Standard Atmosphere, 1976, Table 3).
   How close a gas has to come: common practice, no source.                                      */
bool
enhancement_is_for (const struct composition *gas)
{
  static const double nitrogen = 0.781, oxygen = 0.209, argon_most = 0.02;
  static const double near = 0.01, others_most = 0.001;
  double n2 = 0, o2 = 0, argon = 0, others = 0;
  for (size_t i = 0; i < gas->count; i++) {
    const char *key = gas->species[i]->key;
    double x = gas->fraction[i];
    if (strcmp (key, "N2") == 0)
      n2 += x;
    else if (strcmp (key, "O2") == 0)
      o2 += x;
    else if (strcmp (key, "Ar") == 0)
      argon += x;
    else if (strcmp (key, "H2O") != 0)
      others += x;
  }
  double dry = n2 + o2 + argon + others;
  return dry > 0 && fabs (n2 / dry - nitrogen) <= near && fabs (o2 / dry - oxygen) <= near
         && argon / dry <= argon_most && others / dry <= others_most;
}
