/* AGA8 DETAIL: AGA Report No. 8, Part 1 (2017); ISO 20765-1; K. E. Starling, J. L. Savidge (1992).

     Z = 1 + B rho - rho_r sum_13..18 C T^-u
           + sum_13..58 C T^-u (b - c k rho_r^k) rho_r^b exp(-c rho_r^k),   rho_r = K^3 rho

   which is, with delta = rho_r and tau = U/T, the derivative by ln(delta) of

     a^r/(RT) = B rho - delta sum_13..18 C' tau^u + sum_13..58 C' tau^u delta^b exp(-c delta^k),

   C' = C/U^u, so that the terms are of the form of helmholtz.h; B is a sum of terms with d = 1.  */
#include "config.h"
#include "eos/aga8.h"

#include <math.h>

#include "eos/caloric.h"
#include "eos/gerg_table.h"

/* Parameters of the mixture.  */
struct conformal { double U, K3, G, Q, F; };

static double
fifth (double a)
{
  return a * a * a * a * a;
}

/* U^5 = (sum x E^5/2)^2 + 2 sum_i<j x_i x_j (U_ij^5 - 1)(E_i E_j)^5/2, K^5 alike.  */
static struct conformal
conformal_of (const double x[], const int present[], int n)
{
  struct conformal m = { 0, 0, 0, 0, 0 };
  double E_half[AGA8_COUNT], K_half[AGA8_COUNT];
  double U_sum = 0, K_sum = 0, U_pairs = 0, K_pairs = 0;

  for (int a = 0; a < n; a++) {
    const struct aga8_component *c = &aga8_table.components[present[a]];
    const double xa = x[present[a]];

    E_half[a] = fifth (sqrt (c->E));
    K_half[a] = fifth (sqrt (c->K));
    U_sum += xa * E_half[a];
    K_sum += xa * K_half[a];
    m.G += xa * c->G;
    m.Q += xa * c->Q;
    m.F += xa * xa * c->F;
    for (int b = 0; b < a; b++) {
      const struct aga8_pair *q = aga8_pair_of (present[b], present[a]);
      const double xx = xa * x[present[b]];

      U_pairs += xx * (fifth (q->U) - 1) * E_half[a] * E_half[b];
      K_pairs += xx * (fifth (q->K) - 1) * K_half[a] * K_half[b];
      m.G += xx * (q->G - 1) * (c->G + aga8_table.components[present[b]].G);
    }
  }
  m.U = pow (U_sum * U_sum + 2 * U_pairs, 0.2);
  m.K3 = pow (K_sum * K_sum + 2 * K_pairs, 0.6);
  return m;
}

/* (value + 1 - flag)^flag  */
static double
if_flagged (short flag, double value)
{
  return flag != 0 ? value : 1;
}

/* r^(2u), for u a multiple of a half.  */
static double
power_of_root (double r, double u)
{
  int left = (int) lrint (2 * fabs (u));
  double made = 1, square = u < 0 ? 1 / r : r;

  for (; left > 0; left >>= 1) {
    made *= (left & 1) != 0 ? square : 1;
    square *= square;
  }
  return made;
}

/* What the pair of components I and J, each of its own, gives to B: the coefficient of
   tau^u delta is  weight a B*_nij (E_ij/U)^u (K_i K_j)^(3/2)/K^3.                                */
static void
add_virial (const struct conformal *m, int i, int j, double weight, double coefficient[])
{
  static const struct aga8_pair same = { 1, 1, 1, 1 };
  const struct aga8_component *a = &aga8_table.components[i], *b = &aga8_table.components[j];
  const struct aga8_pair *q = i == j ? &same : aga8_pair_of (i, j);
  const double r = sqrt (q->E * sqrt (a->E * b->E) / m->U);
  const double size = a->K * b->K;
  const double scale = weight * size * sqrt (size) / m->K3;

  for (int n = 0; n < AGA8_VIRIAL_TERMS; n++) {
    const struct aga8_term *t = &aga8_table.terms[n];
    const double B = if_flagged (t->g, q->G * (a->G + b->G) / 2) * if_flagged (t->q, a->Q * b->Q)
                     * if_flagged (t->f, sqrt (a->F * b->F)) * if_flagged (t->s, a->S * b->S)
                     * if_flagged (t->w, a->W * b->W);

    if (B > 0) {
      coefficient[t->virial_slot] += scale * t->a * B * power_of_root (r, t->u);
    }
  }
}

static void
add_terms (const struct conformal *m, double coefficient[])
{
  for (int n = 0; n < AGA8_TERMS; n++) {
    const struct aga8_term *t = &aga8_table.terms[n];
    const double C = t->a * if_flagged (t->g, m->G) * if_flagged (t->q, m->Q * m->Q)
                     * if_flagged (t->f, m->F);

    if (t->slot >= 0) {
      coefficient[t->slot] += C;
    }
    if (t->slot >= 0 && t->virial_slot >= 0) {
      coefficient[t->virial_slot] -= C;
    }
  }
}

static void
aga8_mix (const double x[], struct aga8_mixture *mixture)
{
  double coefficient[HELMHOLTZ_SLOTS] = { 0 };
  struct conformal m;
  int present[AGA8_COUNT];
  int n = 0;

  mixture->molar_mass = 0;
  for (int i = 0; i < AGA8_COUNT; i++) {
    mixture->x[i] = x[i];
    mixture->molar_mass += x[i] * aga8_table.components[i].molar_mass;
    if (x[i] > 0) {
      present[n++] = i;
    }
  }
  m = conformal_of (x, present, n);
  for (int a = 0; a < n; a++) {
    for (int b = 0; b <= a; b++) {
      const double xx = x[present[a]] * x[present[b]];
      add_virial (&m, present[b], present[a], a == b ? xx : 2 * xx, coefficient);
    }
  }
  add_terms (&m, coefficient);
  mixture->residual.form = &aga8_table.form;
  mixture->residual.gas_constant = equation_aga8_detail.gas_constant;
  mixture->residual.T_r = m.U;
  mixture->residual.rho_r = 1e3 / m.K3;
  helmholtz_compact (coefficient, &mixture->residual);
}

static bool
aga8_covers (const struct composition *composition, const char **lacking)
{
  return cover_all (&aga8_table.cover, composition, lacking);
}

static double
aga8_lumped (const struct composition *composition)
{
  return cover_lumped (&aga8_table.cover, composition);
}

static size_t
aga8_mixture_size (size_t count)
{
  (void) count;
  return sizeof (struct aga8_mixture);
}

static void
aga8_prepare (const struct composition *composition, void *mixture)
{
  double x[AGA8_COUNT];

  cover_fractions (&aga8_table.cover, composition, x);
  aga8_mix (x, mixture);
}

static void
aga8_set_isotherm (const void *mixture, double T, void *isotherm)
{
  helmholtz_set_isotherm (&((const struct aga8_mixture *) mixture)->residual, T, isotherm);
}

static void
aga8_caloric (const void *memory, double T, double rho, struct caloric *caloric)
{
  const struct aga8_mixture *mixture = memory;
  double x[GERG_COUNT] = { 0 };
  const struct caloric_gas gas = { &mixture->residual, x, mixture->molar_mass };

  for (int i = 0; i < AGA8_COUNT; i++) {
    x[cover_find (&gerg_table.cover, aga8_table.components[i].key)] = mixture->x[i];
  }
  caloric_at (&gas, T, rho, caloric);
}

static void
aga8_densities (const void *mixture, const struct state_list *states, double rho[])
{
  helmholtz_densities (&((const struct aga8_mixture *) mixture)->residual, HELMHOLTZ_LANES_AVX512,
                       states, rho);
}

const struct equation equation_aga8_detail = {
  .name = "AGA8-DETAIL",
  .source = "AGA Report No. 8, Part 1 (2017); ISO 20765-1",
  .gas_constant = 8.31451,
  .covers = aga8_covers,
  .lumped = aga8_lumped,
  .range = aga8_range,
  .uncertainty = aga8_uncertainty,
  .caloric = aga8_caloric,
  .mixture_size = aga8_mixture_size,
  .prepare = aga8_prepare,
  .isotherm_size = sizeof (struct helmholtz_isotherm),
  .set_isotherm = aga8_set_isotherm,
  .residual = helmholtz_residual,
  .densest = helmholtz_densest,
  .roots = helmholtz_roots,
  .densities = aga8_densities,
};
