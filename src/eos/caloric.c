/* Caloric properties from the Helmholtz energy: the relations of Kunz and Wagner (2012), table of
   the relations of thermodynamic properties.  The ideal gas of GERG-2008 and of AGA8 DETAIL is the
   same, that of Jaeschke and Schley (1995).                                                     */
#include "config.h"
#include "eos/caloric.h"

#include <math.h>

#include "eos/gerg_table.h"

/* The heat capacities of the ideal gas were fitted with another gas constant (R*).  */
static const double R_fitted = 8.31451;
/* Where enthalpy and entropy of the pure ideal gases are 0.  */
static const double T_zero = 298.15, p_zero = 101325;

/* alpha^o and its derivatives by ln(tau), tau d/d(tau) = -T d/dT.  tt is the second derivative
   less the first: tau^2 d2/d(tau)2 = -cv/R.                                                     */
struct ideal { double a, t, tt; };

/* n ln sinh(theta/T) (even places: theta4, theta6) or -n ln cosh(theta/T).  */
static void
add_vibration (double n, double y, bool is_sinh, struct ideal *sum)
{
  const double s = sinh (y), c = cosh (y);

  if (!(fabs (n) > 0)) {
    return;
  }
  if (is_sinh) {
    sum->a += n * log (fabs (s));
    sum->t += n * y * c / s;
    sum->tt -= n * (y / s) * (y / s);
  } else {
    sum->a -= n * log (c);
    sum->t -= n * y * s / c;
    sum->tt -= n * (y / c) * (y / c);
  }
}

/* Without ln(rho/rho_0).  With r the ratio of R* to R, r (n2 + T0) - T0 takes the place of n2, as
   the state of no enthalpy is that of an ideal gas, whose p v has R.                            */
static struct ideal
ideal_of (const struct gerg_ideal *row, double R, double T)
{
  const double r = R_fitted / R;
  const double n2 = (r * (row->n2 + T_zero) - T_zero) / r;
  struct ideal sum = {
    .a = row->n1 + n2 / T - (row->n[0] - 1) * log (T),
    .t = n2 / T + (row->n[0] - 1),
    .tt = -(row->n[0] - 1),
  };

  for (int k = 0; k < 4; k++) {
    add_vibration (row->n[k + 1], row->theta[k] / T, k % 2 == 0, &sum);
  }
  return (struct ideal) { r * sum.a, r * sum.t, r * sum.tt };
}

static struct ideal
ideal_mixture (const double x[], double R, double T, double rho)
{
  const double rho_zero = p_zero / (R * T_zero);
  struct ideal sum = { 0, 0, 0 };

  for (int i = 0; i < GERG_COUNT; i++) {
    if (x[i] > 0) {
      const struct ideal one = ideal_of (&gerg_table.ideals[i], R, T);
      sum.a += x[i] * (one.a + log (x[i] * rho / rho_zero));
      sum.t += x[i] * one.t;
      sum.tt += x[i] * one.tt;
    }
  }
  return sum;
}

void
caloric_at (const struct caloric_gas *gas, double T, double rho, struct caloric *out)
{
  const double R = gas->residual->gas_constant;
  const struct helmholtz_full r = helmholtz_full_at (gas->residual, T, rho);
  const struct ideal o = ideal_mixture (gas->x, R, T, rho);
  const double cv = -(o.tt + r.tt - r.t);                      /* over R, like what follows */
  const double by_rho = 1 + r.d + r.dd;                        /* dp/d(rho) over RT */
  const double by_T = 1 + r.d - r.dt;                          /* dp/dT over rho R */
  const double stiffness = by_rho + by_T * by_T / cv;          /* dp/d(rho) at s over RT */

  out->Z = 1 + r.d;
  out->pressure = rho * R * T * out->Z;
  out->molar_mass = gas->molar_mass;
  out->cv = R * cv;
  out->cp = R * (cv + by_T * by_T / by_rho);
  out->energy = R * T * (o.t + r.t);
  out->enthalpy = out->energy + R * T * out->Z;
  out->entropy = R * (o.t + r.t - o.a - r.a);
  out->gibbs = out->enthalpy - T * out->entropy;
  out->speed_of_sound = sqrt (R * T / gas->molar_mass * stiffness);
  out->isentropic_exponent = stiffness / out->Z;
  out->joule_thomson = -(r.dd + r.dt) / (by_T * by_T + cv * by_rho) / (R * rho);
}
