#include "config.h"
#include "plain_gerg.h"

#include <math.h>

#include "eos/gerg_table.h"

/* a^r/(RT) as delta d/d(delta) and delta^2 d2/d(delta)2.  */
struct derivatives { double d, dd; };

/* The terms FIRST to before END.  */
static struct derivatives
terms (int first, int end, double delta, double tau)
{
  struct derivatives sum = { 0, 0 };

  for (int k = first; k < end; k++) {
    const struct gerg_term *term = &gerg_table.terms[k];
    const struct helmholtz_slot slot = gerg_table.form.slots[term->slot];
    const struct helmholtz_exponent phi = gerg_table.form.exponents[slot.exponent];
    const double t = slot.whole + slot.part / (double) HELMHOLTZ_PARTS;
    const double value = term->n * pow (delta, slot.d) * pow (tau, t);
    const double d = slot.d;

    if (phi.power > 0) {
      const double c = phi.power, power = pow (delta, c);
      const double e = exp (-power);
      sum.d += value * e * (d - c * power);
      sum.dd += value * e * ((d - c * power) * (d - 1 - c * power) - c * c * power);
    } else if (phi.beta > 0) {
      const double away = delta - phi.epsilon;
      const double e = exp (-phi.eta * away * away - phi.beta * (delta - phi.gamma));
      const double s = d - delta * (2 * phi.eta * away + phi.beta);
      sum.d += value * e * s;
      sum.dd += value * e * (s * s - d - 2 * phi.eta * delta * delta);
    } else {
      sum.d += value * d;
      sum.dd += value * d * (d - 1);
    }
  }
  return sum;
}

static double
reducing_T (const double x[])
{
  double sum = 0;

  for (int i = 0; i < GERG_COUNT; i++) {
    const double Ti = gerg_table.components[i].T_c;
    sum += x[i] * x[i] * Ti;
    for (int j = i + 1; j < GERG_COUNT; j++) {
      const struct gerg_pair *q = &gerg_table.pairs[gerg_pair_at (i, j)];
      if (x[i] > 0 && x[j] > 0) {
        sum += 2 * x[i] * x[j] * q->beta_T * q->gamma_T * (x[i] + x[j])
               / (q->beta_T * q->beta_T * x[i] + x[j])
               * sqrt (Ti * gerg_table.components[j].T_c);
      }
    }
  }
  return sum;
}

static double
reducing_rho (const double x[])
{
  double sum = 0;

  for (int i = 0; i < GERG_COUNT; i++) {
    const double rho_i = gerg_table.components[i].rho_c;
    sum += x[i] * x[i] / rho_i;
    for (int j = i + 1; j < GERG_COUNT; j++) {
      const struct gerg_pair *q = &gerg_table.pairs[gerg_pair_at (i, j)];
      if (x[i] > 0 && x[j] > 0) {
        sum += 2 * x[i] * x[j] * q->beta_v * q->gamma_v * (x[i] + x[j])
               / (q->beta_v * q->beta_v * x[i] + x[j])
               * pow (1 / cbrt (rho_i) + 1 / cbrt (gerg_table.components[j].rho_c), 3) / 8;
      }
    }
  }
  return 1 / sum;
}

static struct derivatives
residual (const double x[], double delta, double tau)
{
  struct derivatives sum = { 0, 0 };

  for (int i = 0; i < GERG_COUNT; i++) {
    if (x[i] > 0) {
      const struct derivatives one = terms (gerg_table.pure_first[i],
                                            gerg_table.pure_first[i + 1], delta, tau);
      sum.d += x[i] * one.d;
      sum.dd += x[i] * one.dd;
    }
  }
  for (int k = 0; k < GERG_PAIRS; k++) {
    const struct gerg_pair *q = &gerg_table.pairs[k];
    if (q->departure >= 0 && x[q->i] > 0 && x[q->j] > 0) {
      const struct derivatives one = terms (gerg_table.departure_first[q->departure],
                                            gerg_table.departure_first[q->departure + 1], delta,
                                            tau);
      sum.d += x[q->i] * x[q->j] * q->F * one.d;
      sum.dd += x[q->i] * x[q->j] * q->F * one.dd;
    }
  }
  return sum;
}

double
plain_gerg_density (const double x[], double T, double p)
{
  const double RT = 8.314472 * T;
  const double T_r = reducing_T (x), rho_r = reducing_rho (x);
  double rho = p / RT;

  for (int i = 0; i < 100; i++) {
    const struct derivatives a = residual (x, rho / rho_r, T_r / T);
    const double step = (p - rho * RT * (1 + a.d)) / (RT * (1 + 2 * a.d + a.dd));

    rho += step;
    if (fabs (step) < 1e-12 * rho) {
      return rho;
    }
  }
  return (double) NAN;
}
