/* GERG-2008: O. Kunz, W. Wagner, "The GERG-2008 Wide-Range Equation of State for Natural Gases and
   Other Mixtures: An Expansion of GERG-2004", J. Chem. Eng. Data 57 (2012) 3032-3091; ISO 20765-2.

     a^r/(RT) = sum_i x_i alpha_i(delta, tau) + sum_i<j x_i x_j F_ij alpha_ij(delta, tau)

   with the reducing functions, v_r = 1/rho_r, of

     v_r = sum_i sum_j x_i x_j beta_v gamma_v (x_i + x_j)/(beta_v^2 x_i + x_j)
                       (1/8)(rho_c,i^(-1/3) + rho_c,j^(-1/3))^3
     T_r = sum_i sum_j x_i x_j beta_T gamma_T (x_i + x_j)/(beta_T^2 x_i + x_j)
                       (T_c,i T_c,j)^(1/2)                                                       */
#include "config.h"
#include "eos/gerg.h"

#include <math.h>

#include "eos/caloric.h"

/* Both sums over i < j are doubled, since the pair turned round gives the same.  */
static void
reduce (const double x[], const int present[], int n, struct helmholtz_mixture *mixture)
{
  double v_third[GERG_COUNT], T_half[GERG_COUNT];
  double v = 0, T = 0;

  for (int a = 0; a < n; a++) {
    const struct gerg_component *c = &gerg_table.components[present[a]];
    const double xa = x[present[a]];

    v_third[a] = 1 / cbrt (c->rho_c);
    T_half[a] = sqrt (c->T_c);
    v += xa * xa / c->rho_c;
    T += xa * xa * c->T_c;
    for (int b = 0; b < a; b++) {
      const struct gerg_pair *q = &gerg_table.pairs[gerg_pair_at (present[b], present[a])];
      const double xb = x[present[b]];
      const double sum = v_third[a] + v_third[b];
      const double weight = 2 * xa * xb * (xa + xb);

      v += weight * q->beta_v * q->gamma_v / (q->beta_v * q->beta_v * xb + xa)
           * (0.125 * sum * sum * sum);
      T += weight * q->beta_T * q->gamma_T / (q->beta_T * q->beta_T * xb + xa)
           * (T_half[a] * T_half[b]);
    }
  }
  mixture->rho_r = 1 / v;
  mixture->T_r = T;
}

static void
add_terms (double coefficient[], double weight, int first, int end)
{
  for (const struct gerg_term *t = gerg_table.terms + first; t < gerg_table.terms + end; t++) {
    coefficient[t->slot] += weight * t->n;
  }
}

static void
merge (const double x[], const int present[], int n, double coefficient[])
{
  for (int a = 0; a < n; a++) {
    const int i = present[a];

    add_terms (coefficient, x[i], gerg_table.pure_first[i], gerg_table.pure_first[i + 1]);
    for (int b = 0; b < a; b++) {
      const struct gerg_pair *q = &gerg_table.pairs[gerg_pair_at (present[b], i)];

      if (q->departure >= 0) {
        add_terms (coefficient, x[i] * x[present[b]] * q->F,
                   gerg_table.departure_first[q->departure],
                   gerg_table.departure_first[q->departure + 1]);
      }
    }
  }
}

void
gerg_mix (const double x[GERG_COUNT], struct gerg_mixture *mixture)
{
  double coefficient[HELMHOLTZ_SLOTS] = { 0 };
  int present[GERG_COUNT];
  int n = 0;

  mixture->molar_mass = 0;
  for (int i = 0; i < GERG_COUNT; i++) {
    mixture->x[i] = x[i];
    mixture->molar_mass += x[i] * gerg_table.components[i].molar_mass;
    if (x[i] > 0) {
      present[n++] = i;
    }
  }
  mixture->residual.form = &gerg_table.form;
  mixture->residual.gas_constant = equation_gerg_2008.gas_constant;
  reduce (x, present, n, &mixture->residual);
  merge (x, present, n, coefficient);
  helmholtz_compact (coefficient, &mixture->residual);
}

static bool
gerg_covers (const struct composition *composition, const char **lacking)
{
  return cover_all (&gerg_table.cover, composition, lacking);
}

static double
gerg_lumped (const struct composition *composition)
{
  return cover_lumped (&gerg_table.cover, composition);
}

static size_t
gerg_mixture_size (size_t count)
{
  (void) count;
  return sizeof (struct gerg_mixture);
}

static void
gerg_prepare (const struct composition *composition, void *mixture)
{
  double x[GERG_COUNT];

  cover_fractions (&gerg_table.cover, composition, x);
  gerg_mix (x, mixture);
}

static void
gerg_set_isotherm (const void *mixture, double T, void *isotherm)
{
  helmholtz_set_isotherm (&((const struct gerg_mixture *) mixture)->residual, T, isotherm);
}

/* Kunz and Wagner, abstract: normal range from 90 to 450 K and to 35 MPa, extended range from 60 to
   700 K and to 70 MPa.                                                                          */
static enum eos_range
gerg_range (const void *mixture, double T, double p)
{
  (void) mixture;
  return T >= 90 && T <= 450 && p <= 35e6   ? EOS_RANGE_FULL
         : T >= 60 && T <= 700 && p <= 70e6 ? EOS_RANGE_EXTENDED
                                            : EOS_RANGE_OUTSIDE;
}

/* Natural gases are what the figures below are stated for; 45 % is the least methane AGA Report
   No. 8 (1994) counts as such (from memory).                                                    */
static const double methane_least = 0.45;

/* More carbon dioxide than 30 % or water than 0.5 % is beyond natural gas as ISO 20765-2 counts it
   (from memory; of water it allows less).                                                       */
static const double carbon_dioxide_most = 0.30, water_most = 0.005;

/* Kunz and Wagner, section on uncertainties (from memory): density of natural gases to 0.1 % from
   250 to 450 K and to 35 MPa; elsewhere in the gas to 0.2 to 0.5 %; the larger is taken.        */
static double
gerg_uncertainty (const void *mixture, double T, double p)
{
  static const double best = 0.001, further = 0.005;
  const double *x = ((const struct gerg_mixture *) mixture)->x;
  const int methane = cover_find (&gerg_table.cover, "CH4");
  const int carbon_dioxide = cover_find (&gerg_table.cover, "CO2");
  const int water = cover_find (&gerg_table.cover, "H2O");

  if (x[methane] < methane_least || x[carbon_dioxide] > carbon_dioxide_most
      || x[water] > water_most || gerg_range (mixture, T, p) == EOS_RANGE_OUTSIDE) {
    return (double) NAN;
  }
  return T >= 250 && T <= 450 && p <= 35e6 ? best : further;
}

static void
gerg_caloric (const void *memory, double T, double rho, struct caloric *caloric)
{
  const struct gerg_mixture *mixture = memory;
  const struct caloric_gas gas = { &mixture->residual, mixture->x, mixture->molar_mass };

  caloric_at (&gas, T, rho, caloric);
}

static void
gerg_densities (const void *mixture, const struct state_list *states, double rho[])
{
  helmholtz_densities (&((const struct gerg_mixture *) mixture)->residual, HELMHOLTZ_LANES_AVX512,
                       states, rho);
}

const struct equation equation_gerg_2008 = {
  .name = "GERG-2008",
  .source = "O. Kunz, W. Wagner, J. Chem. Eng. Data 57 (2012) 3032-3091; ISO 20765-2",
  .gas_constant = 8.314472,
  .covers = gerg_covers,
  .lumped = gerg_lumped,
  .range = gerg_range,
  .uncertainty = gerg_uncertainty,
  .caloric = gerg_caloric,
  .mixture_size = gerg_mixture_size,
  .prepare = gerg_prepare,
  .isotherm_size = sizeof (struct helmholtz_isotherm),
  .set_isotherm = gerg_set_isotherm,
  .residual = helmholtz_residual,
  .densest = helmholtz_densest,
  .roots = helmholtz_roots,
  .densities = gerg_densities,
};
