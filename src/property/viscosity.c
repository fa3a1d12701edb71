#include "config.h"
#include "property/viscosity.h"

#include <math.h>
#include <stddef.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "property/figures.h"
#include "property/property_tables.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"
#include "units/workings.h"

enum { C1, C2, C3, C4, LOWEST, HIGHEST, A, B, C, D, E, SIGMA, EPSILON, COLUMNS };

static const char *const columns[COLUMNS] = {
  "C1", "C2", "C3", "C4", "T_lowest_K", "T_highest_K", "A", "B", "C", "D", "E",
  "sigma_angstrom", "epsilon_k_K"
};

/* P. D. Neufeld, A. R. Janzen, R. A. Aziz, J. Chem. Phys. 57 (1972) 1100: the collision integral
   of the Lennard-Jones potential, without its small sine term; Tr = kT/epsilon, 0.3 to 100.     */
static double
collision_integral (double Tr)
{
  return 1.16145 * pow (Tr, -0.14874) + 0.52487 * exp (-0.77320 * Tr)
         + 2.16178 * exp (-2.43787 * Tr);
}

/* A pure gas, Pa s.  The forms: D. W. Green, R. H. Perry, Perry's Chemical Engineers' Handbook,
   8th ed. (2008), Table 2-312; VDI Heat Atlas, 2nd ed. (2010), section D3.1; Chapman and Enskog
   as in B. E. Poling et al. (2001), eq. 9-3.9, 2.669e-6 (M T)^(1/2)/(sigma^2 Omega), M in g/mol,
   sigma in angstrom.                                                                            */
static double
pure_viscosity (const double f[], double molar_mass, double T)
{
  if (!isnan (f[C1]))
    return f[C1] * pow (T, f[C2]) / (1 + (f[C3] + f[C4] / T) / T);
  if (!isnan (f[A]))
    return f[A] + T * (f[B] + T * (f[C] + T * (f[D] + T * f[E])));
  return 2.669e-6 * sqrt (1e3 * molar_mass * T)
         / (f[SIGMA] * f[SIGMA] * collision_integral (T / f[EPSILON]));
}

struct part_of_gas { double x, M, mu; };

/* Wilke (1950), eq. 14: phi_ij = (1 + (mu_i/mu_j)^(1/2) (M_j/M_i)^(1/4))^2
   / (8 (1 + M_i/M_j))^(1/2).                                                                    */
static double
wilke_factor (const struct part_of_gas *i, const struct part_of_gas *j)
{
  double root = 1 + sqrt (i->mu / j->mu) * pow (j->M / i->M, 0.25);
  return root * root / sqrt (8 * (1 + i->M / j->M));
}

/* Wilke (1950), eq. 13: mu = sum_i x_i mu_i/(sum_j x_j phi_ij), with phi_ii = 1.  */
static double
wilke_sum (size_t n, const struct part_of_gas part[])
{
  struct sum mu = { 0, 0 };
  for (size_t i = 0; i < n; i++) {
    struct sum below = { 0, 0 };
    for (size_t j = 0; j < n; j++)
      sum_add (&below, part[j].x * (i == j ? 1 : wilke_factor (&part[i], &part[j])));
    sum_add (&mu, part[i].x * part[i].mu / sum_total (&below));
  }
  return sum_total (&mu);
}

/* The shares of the largest parts out of their range and without a stated one, so far.  */
struct most { double outside, unstated; };

static void
add_range (struct viscosity *v, struct most *most, const struct part_of_gas *part, double T,
           const double figure[], const struct species *species)
{
  if (isnan (figure[LOWEST]) || isnan (figure[HIGHEST])) {
    if (part->x > most->unstated) {
      most->unstated = part->x;
      v->unstated = species;
    }
    return;
  }
  v->lowest = fmax (v->lowest, figure[LOWEST]);
  v->highest = fmin (v->highest, figure[HIGHEST]);
  if ((T < figure[LOWEST] || T > figure[HIGHEST]) && part->x > most->outside) {
    most->outside = part->x;
    v->outside = species;
  }
}

/* Fills PART, which has room for all of GAS, with the parts that are there; how many.  */
static size_t
find_parts (const struct figures *figures, const struct composition *gas, double T,
            struct part_of_gas part[], struct viscosity *v)
{
  struct most most = { 0, 0 };
  size_t n = 0;
  for (size_t i = 0; i < gas->count; i++) {
    if (!(gas->fraction[i] > 0))
      continue;
    const double *figure = figures_of (figures, gas->species[i])->value;
    double M = gas->species[i]->molar_mass;
    part[n] = (struct part_of_gas) { gas->fraction[i], M, pure_viscosity (figure, M, T) };
    add_range (v, &most, &part[n], T, figure, gas->species[i]);
    n++;
  }
  return n;
}

/* Wilke's rule with the sum below each part, D_i = sum_j x_j phi_ij.  PART holds those of GAS that
   are there, in its order.                                                                      */
static void
record (struct workings *workings, const struct figures *figures, const struct composition *gas,
        const struct part_of_gas part[], const struct viscosity *v)
{
  static const char rule[] = "C. R. Wilke, J. Chem. Phys. 18 (1950) 517, eqs. 13 and 14";
  if (workings == NULL)
    return;
  const size_t n = gas->count;
  double *x = ARENA_ARRAY (workings->arena, n, double);
  double *mu = ARENA_ARRAY (workings->arena, n, double);
  double *below = ARENA_ARRAY (workings->arena, n, double);
  const char **terms = ARENA_ARRAY (workings->arena, n, const char *);
  const char **sources = ARENA_ARRAY (workings->arena, n, const char *);
  size_t parts = 0, at = 0;
  for (size_t i = 0; i < n; i++)
    parts += gas->fraction[i] > 0;
  for (size_t i = 0; i < n; i++) {
    if (!(gas->fraction[i] > 0))
      continue;
    terms[at] = gas->species[i]->key;
    sources[at] = figures_of (figures, gas->species[i])->source;
    x[at] = part[at].x;
    mu[at] = part[at].mu;
    for (size_t j = 0; j < parts; j++)
      below[at] += part[j].x * (j == at ? 1 : wilke_factor (&part[at], &part[j]));
    at++;
  }
  workings_add (workings, &(struct step) {
      .name = "viscosity", .formula = "mu = sum(x_i mu_i/D_i)", .value = v->value, .unit = "Pa s",
      .source = v->mixture ? rule : "dilute gas; tables/viscosity.tsv",
      .term_count = (unsigned) parts, .terms = terms,
      STEP_COLUMNS ({ "x_i", x, "mol/mol", NULL, NULL }, { "mu_i", mu, "Pa s", NULL, sources },
                    { "D_i", below, "1", rule, NULL }) });
}

bool
viscosity_of_gas (struct property_tables *tables, const struct composition *gas, double T,
                  struct viscosity *viscosity, struct workings *workings, struct fault *fault)
{
  struct viscosity found = { .lowest = 0, .highest = HUGE_VAL };
  if (!(isfinite (T) && T > 0))
    return fault_set (fault, MESSAGE_RANGE, "an absolute temperature is above zero", NULL);
  const struct figures *figures = property_tables_read (tables, PROPERTY_TABLE_VISCOSITY, COLUMNS,
                                                        columns, fault);
  if (figures == NULL || !figures_cover (figures, gas, fault))
    return false;
  struct arena *arena = arena_create ();
  struct part_of_gas *part = ARENA_ARRAY (arena, gas->count, struct part_of_gas);
  size_t n = find_parts (figures, gas, T, part, &found);
  bool positive = true;
  for (size_t i = 0; i < n; i++)
    positive = positive && isfinite (part[i].mu) && part[i].mu > 0;
  found.mixture = n > 1;
  if (positive)
    found.value = wilke_sum (n, part);
  if (positive && isfinite (found.value))
    record (workings, figures, gas, part, &found);
  arena_destroy (arena);
  if (!positive || !isfinite (found.value))
    return fault_set (fault, MESSAGE_NOT_FINITE, NULL, NULL);
  *viscosity = found;
  return true;
}
