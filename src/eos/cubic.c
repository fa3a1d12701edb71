/* The cubic equation of D.-Y. Peng and D. B. Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59-64.

     p = RT/(v - b) - a(T)/(v(v + b) + b(v - b))                                           (eq. 4)

   Accuracy: good to some tenths of a per cent in Z for light gases near ambient conditions, to
   one or two per cent for gas mixtures up to 100 bar, worse in the dense fluid.  The quantum gases
   H2 and He enter with their classical critical point and tabulated (negative) acentric factor;
   the equation was not fitted to them, but their deviation from the ideal gas is small and has
   the right sign.

   Mixing: van der Waals one-fluid, sqrt(a_i a_j) and arithmetic b (eqs. 20 to 22), with all
   binary parameters k_ij zero: a = (sum x_i sqrt(a_i))^2.  A table of pairs would take off
   2 k_ij x_i x_j sqrt(a_i a_j) for each of its pairs in the mixture: `prepare` would list those
   behind the components, `set_isotherm` sum over that list.                                     */
#include "config.h"
#include "eos/cubic.h"

#include <math.h>

#include "eos/eos.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "units/constants.h"

/* Exact figures of the critical point, where p, dp/dv = 0 and d2p/dv2 = 0 fix a, b and Zc:
     eta = b/v_c = 1/(1 + (4 - 8^(1/2))^(1/3) + (4 + 8^(1/2))^(1/3)),
     OMEGA_B = eta/(3 + eta),  OMEGA_A = (8 + 40 eta)/(49 - 37 eta).
   The paper rounds them: 0.45724 (eq. 9) and 0.07780 (eq. 10).                                  */
#define ETA_CRITICAL 0.25307658654159946
#define OMEGA_A 0.45723552892138218
#define OMEGA_B 0.077796073903888456

#define SQRT2 1.4142135623730951

/* Of one component: x_i sqrt(a_i(T)) = |at_zero - slope sqrt(T)|, which is eqs. 9, 12 and 17,
   a_i(T) = a_c (1 + kappa (1 - sqrt(T/Tc)))^2, taken apart by powers of sqrt(T).                */
struct component { double at_zero, slope; };

struct mixture {
  double b;                                /* m3/mol */
  size_t count;
  struct component components[];
};

struct isotherm {
  double RT;                               /* J/mol */
  double b;                                /* m3/mol */
  double a;                                /* J m3/mol2 */
  double alpha;                            /* a/(bRT) */
};

static bool
species_has_constants (const struct species *s)
{
  return isfinite (s->critical_temperature) && s->critical_temperature > 0
         && isfinite (s->critical_pressure) && s->critical_pressure > 0
         && isfinite (s->acentric_factor);
}

static bool
cubic_covers (const struct composition *composition, const char **lacking)
{
  for (size_t i = 0; i < composition->count; i++) {
    if (!species_has_constants (composition->species[i])) {
      *lacking = composition->species[i]->key;
      return false;
    }
  }
  *lacking = NULL;
  return true;
}

static size_t
cubic_mixture_size (size_t count)
{
  return sizeof (struct mixture) + count * sizeof (struct component);
}

/* Eq. 18 of the paper; for heavier species the cubic form of D. B. Robinson and D.-Y. Peng, GPA
   Research Report RR-28 (1978).  At w = 0.491 it is 0.0043 above the other: they do not meet.    */
static double
kappa_of (double w)
{
  return w <= 0.491 ? 0.37464 + w * (1.54226 - w * 0.26992)
                    : 0.379642 + w * (1.48503 - w * (0.164423 - w * 0.016666));
}

struct cubic_pure
cubic_pure_of (const struct species *s)
{
  const double RTc = GAS_CONSTANT * s->critical_temperature;
  const double root_a = RTc * sqrt (OMEGA_A / s->critical_pressure);               /* eq. 9 */
  const double kappa = kappa_of (s->acentric_factor);

  return (struct cubic_pure) {
    .b = OMEGA_B * RTc / s->critical_pressure,                                     /* eq. 10 */
    .at_zero = root_a * (1 + kappa),
    .slope = root_a * kappa / sqrt (s->critical_temperature),
  };
}

double
cubic_root_a (const struct cubic_pure *pure, double T)
{
  return fabs (pure->at_zero - pure->slope * sqrt (T));
}

static void
cubic_prepare (const struct composition *composition, void *memory)
{
  struct mixture *mixture = memory;

  mixture->b = 0;
  mixture->count = composition->count;
  for (size_t i = 0; i < composition->count; i++) {
    const struct cubic_pure pure = cubic_pure_of (composition->species[i]);
    const double x = composition->fraction[i];

    mixture->components[i].at_zero = x * pure.at_zero;
    mixture->components[i].slope = x * pure.slope;
    mixture->b += x * pure.b;                                                    /* eq. 21 */
  }
}

static void
cubic_set_isotherm (const void *memory, double T, void *isotherm)
{
  const struct mixture *mixture = memory;
  struct isotherm *line = isotherm;
  const double root_T = sqrt (T);
  double root_a = 0;

  for (size_t i = 0; i < mixture->count; i++) {
    const struct component *c = &mixture->components[i];
    root_a += fabs (c->at_zero - c->slope * root_T);
  }
  line->RT = GAS_CONSTANT * T;
  line->b = mixture->b;
  line->a = root_a * root_a;                                            /* eqs. 20, 22; k_ij = 0 */
  line->alpha = line->a / (line->b * line->RT);
}

/* From eq. 4 with y = b rho by a^r/RT = integral of (Z - 1)/rho:
     a^r/RT = -ln(1 - y) - alpha/8^(1/2) ln[(1 + (1 + 2^(1/2)) y)/(1 + (1 - 2^(1/2)) y)].        */
static struct residual
cubic_residual (const void *isotherm, double rho)
{
  const struct isotherm *line = isotherm;
  const double y = line->b * rho;
  const double repulsion = y / (1 - y);
  const double attraction = y / (1 + y * (2 - y));

  return (struct residual) {
    .a = -log1p (-y) - line->alpha / (2 * SQRT2)
                       * log1p (2 * SQRT2 * y / (1 + (1 - SQRT2) * y)),
    .a1 = repulsion - line->alpha * attraction,
    .a2 = repulsion * repulsion + 2 * line->alpha * (1 - y) * attraction * attraction,
  };
}

/* The pole of the equation is at 1/b.  */
static double
cubic_densest (const void *isotherm)
{
  const struct isotherm *line = isotherm;

  return 0.999 / line->b;
}

/* Z^3 + c2 Z^2 + c1 Z + c0 = 0.  */
struct cubic { double c2, c1, c0; };

/* The largest real root in closed form: with Z = t - c2/3 it is t^3 + 3 P t + 2 Q = 0, solved by
   cosines where it has three real roots and by Cardano's formula where it has one.              */
static double
largest_root (const struct cubic *f)
{
  const double shift = -f->c2 / 3;
  const double P = f->c1 / 3 - shift * shift;
  const double Q = 0.5 * (f->c0 + f->c1 * shift) - shift * shift * shift;
  const double D = Q * Q + P * P * P;
  double u;

  if (D < 0) {
    const double r = sqrt (-P);
    return shift + 2 * r * cos (acos (fmax (-1, fmin (1, -Q / (r * r * r)))) / 3);
  }
  u = cbrt (Q > 0 ? -Q - sqrt (D) : -Q + sqrt (D));            /* the sum that does not cancel */
  return shift + (fabs (u) > 0 ? u - P / u : 0);
}

/* Newton's steps from a root that is right but for rounding.  They end when they no longer get
   smaller: at a simple root after one or two, at a double one where rounding takes over.        */
static double
polished (const struct cubic *f, double Z)
{
  double last = HUGE_VAL;

  for (int i = 0; i < 8; i++) {
    const double value = ((Z + f->c2) * Z + f->c1) * Z + f->c0;
    const double slope = (3 * Z + 2 * f->c2) * Z + f->c1;
    const double step = value / slope;

    if (!(fabs (step) < last)) {
      break;
    }
    Z -= step;
    last = 0.5 * fabs (step);
    if (last <= 1e-16 * fabs (Z)) {
      break;
    }
  }
  return Z;
}

/* The largest and the smallest root above B; only such roots mean anything (v > b).  The other
   two come from the quadratic left when a root is taken out, its coefficients made from c0
   upward so that small roots keep their digits at low pressure.  f(B) = -2 B^2 < 0, so that one
   or three roots are above B, never two.  The root taken out is the largest but where two roots
   all but meet.                                                                                 */
static void
outer_roots (const struct cubic *f, double B, double *largest, double *smallest)
{
  const double Z = polished (f, largest_root (f));
  const double q = -f->c0 / Z;
  const double half = 0.5 * (f->c1 - q) / Z;
  const double D = half * half - q;

  *largest = *smallest = Z;
  if (D >= 0) {
    const double far = half + copysign (sqrt (D), half);
    const double near = fabs (far) > 0 ? q / far : 0;

    if (fmin (far, near) > B) {
      *largest = fmax (Z, polished (f, fmax (far, near)));
      *smallest = fmin (Z, polished (f, fmin (far, near)));
    }
  }
}

/* Z^3 - (1 - B) Z^2 + (A - 3B^2 - 2B) Z - (AB - B^2 - B^3) = 0                            (eq. 5)

   The isotherm has a loop where a/(bRT) is above its critical value OMEGA_A/OMEGA_B, and the loop
   lies about the critical y = b rho = ETA_CRITICAL: a lone root above that is on the far side.  */
static struct density_roots
cubic_roots (const void *isotherm, double p)
{
  const struct isotherm *line = isotherm;
  const double B = line->b * p / line->RT;
  const double A = line->alpha * B;
  const struct cubic f = { B - 1, A - B * (3 * B + 2), -B * (A - B * (1 + B)) };
  struct density_roots roots = { 0, 0, 0 };
  double large, small;
  bool lone;

  outer_roots (&f, B, &large, &small);
  lone = !(small < large);
  if (lone && line->alpha * OMEGA_B > OMEGA_A && B > ETA_CRITICAL * large) {
    roots.dense = p / (large * line->RT);
    return roots;
  }
  roots.gas = p / (large * line->RT);
  roots.dense = lone ? 0 : p / (small * line->RT);
  return roots;
}

/* Eq. 19 with y = b rho: A/B = a/(bRT) = alpha, Z - B = Z (1 - y).  */
bool
cubic_fugacity_of (const struct cubic_fluid *fluid, bool dense, struct cubic_fugacity *fugacity)
{
  const double RT = GAS_CONSTANT * fluid->T, b = fluid->b;
  const double a = fluid->root_a * fluid->root_a;
  const struct isotherm line = { .RT = RT, .b = b, .a = a, .alpha = a / (b * RT) };
  const struct density_roots roots = cubic_roots (&line, fluid->p);
  const double rho = dense && roots.dense > 0 ? roots.dense : roots.gas;
  const double y = b * rho;
  const double logarithm = log1p (2 * SQRT2 * y / (1 + (1 - SQRT2) * y)) / (2 * SQRT2);

  if (!(rho > 0)) {
    return false;
  }
  fugacity->Z = fluid->p / (rho * RT);
  fugacity->free = -log (fugacity->Z * (1 - y));
  fugacity->by_b = (fugacity->Z - 1 + line.alpha * logarithm) / b;
  fugacity->by_root_a = -2 * fluid->root_a / (b * RT) * logarithm;
  return isfinite (fugacity->free) && isfinite (fugacity->by_b);
}

const struct equation equation_peng_robinson = {
  .name = "Peng-Robinson",
  .source = "D.-Y. Peng, D. B. Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59-64; "
            "D. B. Robinson, D.-Y. Peng, GPA Research Report RR-28 (1978)",
  .gas_constant = GAS_CONSTANT,
  .covers = cubic_covers,
  .mixture_size = cubic_mixture_size,
  .prepare = cubic_prepare,
  .isotherm_size = sizeof (struct isotherm),
  .set_isotherm = cubic_set_isotherm,
  .residual = cubic_residual,
  .densest = cubic_densest,
  .roots = cubic_roots,
};
