/* Folding and evaluation; the density at a pressure is in helmholtz_roots.c.  */
#include "config.h"
#include "eos/helmholtz.h"

#include <math.h>

void
helmholtz_compact (const double coefficient[], struct helmholtz_mixture *mixture)
{
  const struct helmholtz_form *form = mixture->form;
  struct helmholtz_term *to = mixture->terms;

  for (size_t i = 0; i < form->slot_count; i++) {
    to->c = coefficient[i];
    to->at = form->slots[i];
    to += fabs (coefficient[i]) > 0;
  }
  mixture->count = (size_t) (to - mixture->terms);
}

/* tau^t for all slots: tau^whole, whole from HELMHOLTZ_WHOLE_LEAST, and tau^(part/40).  */
struct tau_powers {
  double whole[HELMHOLTZ_WHOLE_MOST - HELMHOLTZ_WHOLE_LEAST + 1];
  double part[HELMHOLTZ_PARTS];
};

static inline double
tau_powers_of (const struct tau_powers *powers, struct helmholtz_slot at)
{
  return powers->whole[at.whole - HELMHOLTZ_WHOLE_LEAST] * powers->part[at.part];
}

/* Few roots and one logarithm; all else are products, so that a power is off by some 1e-15.
   Parts that are used are multiples of 1/8 and of 1/20.                                         */
static void
tau_powers_set (struct tau_powers *powers, double tau)
{
  const double inverse = 1 / tau;
  const double half = sqrt (tau);
  const double quarter = sqrt (half);
  const double eighth = sqrt (quarter);
  const double twentieth = exp (log (tau) / 20);
  double *const zero = powers->whole - HELMHOLTZ_WHOLE_LEAST;
  double *const part = powers->part;

  zero[0] = part[0] = 1;
  zero[1] = tau;
  for (int i = 2; i <= HELMHOLTZ_WHOLE_MOST; i++) {
    zero[i] = zero[i / 2] * zero[i - i / 2];
  }
  for (int i = 1; i <= -HELMHOLTZ_WHOLE_LEAST; i++) {
    zero[-i] = zero[1 - i] * inverse;
  }
  part[2] = twentieth;
  for (int i = 2; i < 20; i++) {
    part[2 * i] = part[2 * (i / 2)] * part[2 * (i - i / 2)];
  }
  part[5] = eighth;
  part[10] = quarter;
  part[15] = quarter * eighth;
  part[20] = half;
  part[25] = half * eighth;
  part[30] = half * quarter;
  part[35] = half * part[15];
}

static struct helmholtz_group *
group_open (struct helmholtz_isotherm *line, const struct helmholtz_exponent *phi, int lowest)
{
  struct helmholtz_group *group = &line->groups[line->count++];

  group->phi = phi;
  group->lowest = lowest;
  for (int d = 0; d < HELMHOLTZ_POWERS; d++) {
    group->c[d] = 0;
  }
  return group;
}

void
helmholtz_set_isotherm (const struct helmholtz_mixture *mixture, double T,
                        struct helmholtz_isotherm *line)
{
  const struct helmholtz_form *form = mixture->form;
  const struct helmholtz_term *const end = mixture->terms + mixture->count;
  struct tau_powers powers;

  line->RT = mixture->gas_constant * T;
  line->rho_r = mixture->rho_r;
  line->tau = mixture->T_r / T;
  line->may_loop = line->tau > form->loop_tau;
  line->count = 0;
  tau_powers_set (&powers, line->tau);
  for (const struct helmholtz_term *term = mixture->terms; term < end;) {
    const unsigned e = term->at.exponent;
    struct helmholtz_group *group = group_open (line, &form->exponents[e], term->at.d);

    while (term < end && term->at.exponent == e) {
      const unsigned d = term->at.d;
      double sum = 0;

      for (; term < end && term->at.d == d && term->at.exponent == e; term++) {
        sum += term->c * tau_powers_of (&powers, term->at);
      }
      group->c[d] = sum * group->phi->factor;
      group->highest = (int) d;
    }
  }
}

/* Powers of delta, exp(-delta/8) and exp(-delta^2/8).  */
struct delta_powers {
  double of[HELMHOLTZ_POWERS], e1[HELMHOLTZ_K1], e2[HELMHOLTZ_K2];
};

/* Each power is the product of two of about half its exponent: short chains, small errors.  */
static void
delta_powers_set (struct delta_powers *power, double delta)
{
  power->of[0] = power->e1[0] = power->e2[0] = 1;
  power->of[1] = delta;
  power->e1[1] = exp (-delta / 8);
  power->e2[1] = exp (-delta * delta / 8);
  for (int d = 2; d < HELMHOLTZ_POWERS; d++) {
    power->of[d] = power->of[d / 2] * power->of[d - d / 2];
  }
  for (int k = 2; k < HELMHOLTZ_K1; k++) {
    power->e1[k] = power->e1[k / 2] * power->e1[k - k / 2];
  }
  for (int k = 2; k < HELMHOLTZ_K2; k++) {
    power->e2[k] = power->e2[k / 2] * power->e2[k - k / 2];
  }
}

/* exp(-phi), but for its factor, and the derivatives of phi by ln(delta).  */
struct damping { double e, s1, s2, s3; };

static struct damping
damping_of (const struct helmholtz_exponent *phi, const struct delta_powers *power)
{
  if (phi->power > 2) {
    const double c = phi->power;
    const double x = power->of[phi->power];
    return (struct damping) { exp (-x), c * x, c * c * x, c * c * c * x };
  } else {
    const double u = 0.25 * phi->k2 * power->of[2];
    const double v = 0.125 * phi->k1 * power->of[1];
    return (struct damping) { power->e1[phi->k1] * power->e2[phi->k2], u + v, 2 * u + v,
                              4 * u + v };
  }
}

/* With P the polynomial and P', P'', P''' its derivatives by ln(delta) (factors d, d^2, d^3):
     (e P)'   = e (P' - s1 P)
     (e P)''  = e (P'' - 2 s1 P' + (s1^2 - s2) P)
     (e P)''' = e (P''' - 3 s1 P'' + 3 (s1^2 - s2) P' - (s1^3 - 3 s1 s2 + s3) P)                 */
static void
group_add (const struct helmholtz_group *group, const struct delta_powers *power,
           struct helmholtz_value *v)
{
  const struct damping f = damping_of (group->phi, power);
  const double w = f.s1 * f.s1 - f.s2;
  double p0 = 0, p1 = 0, p2 = 0, p3 = 0;

  for (int d = group->lowest; d <= group->highest; d++) {
    const double k = d;
    double term = group->c[d] * power->of[d];
    p0 += term;
    p1 += term *= k;
    p2 += term *= k;
    p3 += term *= k;
  }
  v->a += f.e * p0;
  v->a1 += f.e * (p1 - f.s1 * p0);
  v->a2 += f.e * (p2 - 2 * f.s1 * p1 + w * p0);
  v->a3 += f.e * (p3 - 3 * (f.s1 * p2 - w * p1) - (f.s1 * (w - 2 * f.s2) + f.s3) * p0);
}

struct helmholtz_value
helmholtz_at (const struct helmholtz_isotherm *line, double delta)
{
  struct helmholtz_value v = { 0, 0, 0, 0 };
  struct delta_powers power;

  delta_powers_set (&power, delta);
  for (int i = 0; i < line->count; i++) {
    group_add (&line->groups[i], &power, &v);
  }
  return v;
}

struct helmholtz_full
helmholtz_full_at (const struct helmholtz_mixture *mixture, double T, double rho)
{
  struct helmholtz_full v = { 0, 0, 0, 0, 0, 0 };
  struct damping f = { 1, 0, 0, 0 };
  struct tau_powers tau;
  struct delta_powers delta;
  int exponent = -1;

  tau_powers_set (&tau, mixture->T_r / T);
  delta_powers_set (&delta, rho / mixture->rho_r);
  for (size_t i = 0; i < mixture->count; i++) {
    const struct helmholtz_slot at = mixture->terms[i].at;
    const double t = at.whole + at.part / (double) HELMHOLTZ_PARTS;
    double term, d;

    if (at.exponent != exponent) {
      exponent = at.exponent;
      f = damping_of (&mixture->form->exponents[exponent], &delta);
      f.e *= mixture->form->exponents[exponent].factor;
    }
    term = mixture->terms[i].c * tau_powers_of (&tau, at) * delta.of[at.d] * f.e;
    d = at.d - f.s1;
    v.a += term;
    v.d += d * term;
    v.dd += (d * d - f.s2) * term;
    v.t += t * term;
    v.tt += t * t * term;
    v.dt += d * t * term;
  }
  return v;
}

struct residual
helmholtz_residual (const void *isotherm, double rho)
{
  const struct helmholtz_isotherm *line = isotherm;
  const struct helmholtz_value v = helmholtz_at (line, rho / line->rho_r);

  return (struct residual) { .a = v.a, .a1 = v.a1, .a2 = v.a2 - v.a1 };
}
