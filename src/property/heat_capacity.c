#include "config.h"
#include "property/heat_capacity.h"

#include <math.h>
#include <stddef.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "property/figures.h"
#include "property/property_tables.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"
#include "units/constants.h"
#include "units/workings.h"

enum { C0, FIRST_TERM, TERMS = 5, LOWEST = FIRST_TERM + 2 * TERMS, HIGHEST, COLUMNS };

static const char *const columns[COLUMNS] = {
  "c0", "v1", "theta1_K", "v2", "theta2_K", "v3", "theta3_K", "v4", "theta4_K", "v5", "theta5_K",
  "T_lowest_K", "T_highest_K"
};

/* Enthalpy and entropy count from here, K.  */
static const double reference = 298.15;

/* Cp, H and S of one species, over R; H and S each up to a constant of its own.  */
struct heat { double cp, enthalpy, entropy; };

/* A. Einstein, Ann. Phys. 327 (1907) 180: an oscillator of temperature theta has, x = theta/T,
   Cp/R = x^2 e^x/(e^x - 1)^2, H/R = theta/(e^x - 1), S/R = x/(e^x - 1) - ln (1 - e^-x).
   Written with e^-x, which cannot overflow.                                                     */
static struct heat
heat_at (const double figure[], double T)
{
  struct heat heat = { figure[C0], figure[C0] * T, figure[C0] * log (T) };
  for (size_t k = 0; k < TERMS; k++) {
    double v = figure[FIRST_TERM + 2 * k], theta = figure[FIRST_TERM + 2 * k + 1];
    if (isnan (v) || isnan (theta))
      continue;
    double x = theta / T, left = -expm1 (-x);            /* 1 - e^-x */
    double quanta = exp (-x) / left;                     /* 1/(e^x - 1) */
    heat.cp += v * x * x * quanta / left;
    heat.enthalpy += v * theta * quanta;
    heat.entropy += v * (x * quanta - log (left));
  }
  return heat;
}

/* The heat capacity, part by part.  */
static void
record (struct workings *workings, const struct figures *figures, const struct composition *gas,
        double T, double cp)
{
  static const char method[] = "A. Einstein, Ann. Phys. 327 (1907) 180; tables/cp_ideal.tsv";
  if (workings == NULL)
    return;
  const size_t n = gas->count;
  double *C = ARENA_ARRAY (workings->arena, n, double);
  const char **terms = ARENA_ARRAY (workings->arena, n, const char *);
  const char **sources = ARENA_ARRAY (workings->arena, n, const char *);
  for (size_t i = 0; i < n; i++) {
    const struct figures_row *row = figures_of (figures, gas->species[i]);
    terms[i] = gas->species[i]->key;
    if (row == NULL)
      continue;                          /* there is none of it */
    C[i] = GAS_CONSTANT * heat_at (row->value, T).cp;
    sources[i] = row->source;
  }
  workings_add (workings, &(struct step) {
      .name = "heat capacity of the ideal gas", .formula = "c_p = sum(x_i C_i)", .value = cp,
      .unit = "J/(mol K)", .source = method, .term_count = (unsigned) n, .terms = terms,
      STEP_SYMBOLS (STEP_R, SYMBOL ("T", T, "K")),
      STEP_COLUMNS ({ "x_i", gas->fraction, "mol/mol", NULL, NULL },
                    { "C_i", C, "J/(mol K)", NULL, sources }) });
}

/* Range and figures of one part with the share X, added to those of the gas.  */
static void
add_range (struct ideal_heat *heat, double *most, double x, const double figure[], double T,
           const struct species *species)
{
  bool beyond = T < figure[LOWEST] || T > figure[HIGHEST];
  heat->lowest = fmax (heat->lowest, figure[LOWEST]);
  heat->highest = fmin (heat->highest, figure[HIGHEST]);
  if (beyond && x > *most) {
    *most = x;
    heat->outside = species;
  }
}

bool
heat_of_gas (struct property_tables *tables, const struct composition *gas, double T,
             struct ideal_heat *heat, struct workings *workings, struct fault *fault)
{
  struct sum cp = { 0, 0 }, enthalpy = { 0, 0 }, entropy = { 0, 0 };
  struct ideal_heat found = { .lowest = 0, .highest = HUGE_VAL };
  double most = 0;
  if (!(isfinite (T) && T > 0))
    return fault_set (fault, MESSAGE_RANGE, "an absolute temperature is above zero", NULL);
  const struct figures *figures = property_tables_read (tables, PROPERTY_TABLE_CP_IDEAL, COLUMNS,
                                                        columns, fault);
  if (figures == NULL || !figures_cover (figures, gas, fault))
    return false;
  for (size_t i = 0; i < gas->count; i++) {
    double x = gas->fraction[i];
    if (!(x > 0))
      continue;
    const double *figure = figures_of (figures, gas->species[i])->value;
    struct heat one = heat_at (figure, T), from = heat_at (figure, reference);
    sum_add (&cp, x * one.cp);
    sum_add (&enthalpy, x * (one.enthalpy - from.enthalpy));
    sum_add (&entropy, x * (one.entropy - from.entropy));
    add_range (&found, &most, x, figure, T, gas->species[i]);
  }
  found.cp = GAS_CONSTANT * sum_total (&cp);
  found.enthalpy = GAS_CONSTANT * sum_total (&enthalpy);
  found.entropy = GAS_CONSTANT * sum_total (&entropy);
  if (!(isfinite (found.cp) && isfinite (found.enthalpy) && isfinite (found.entropy)))
    return fault_set (fault, MESSAGE_NOT_FINITE, NULL, NULL);
  record (workings, figures, gas, T, found.cp);
  *heat = found;
  return true;
}
