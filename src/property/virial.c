#include "config.h"
#include "property/virial.h"

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

enum { TERMS = 5 };

static const char *const columns[TERMS] = { "a1", "a2", "a3", "a4", "a5" };

/* Where the polynomials are good, and where they are followed to at all, K: their source's data
   file states no ranges; between these they agree with the reference equations.                 */
static const double good_least = 250, good_most = 500, least = 200, most = 600;

struct constants { double Tc, pc, Vc, omega; };

/* Zc = 0.291 - 0.08 omega (K. S. Pitzer et al., J. Am. Chem. Soc. 77 (1955) 3433) where Vc is not
   known.                                                                                        */
static struct constants
constants_of (const struct species *s)
{
  struct constants c = {
    s->critical_temperature, s->critical_pressure, s->critical_molar_volume, s->acentric_factor
  };
  if (isnan (c.Vc))
    c.Vc = (0.291 - 0.08 * c.omega) * GAS_CONSTANT * c.Tc / c.pc;
  return c;
}

/* J. M. Prausnitz, R. D. Gunn, AIChE J. 4 (1958) 430: Tc the geometric mean, Vc by its cube root,
   Zc and omega the arithmetic mean, pc = Zc R Tc/Vc.                                            */
static struct constants
constants_of_pair (const struct constants *a, const struct constants *b)
{
  double Zc = 0.5 * (a->pc * a->Vc / a->Tc + b->pc * b->Vc / b->Tc) / GAS_CONSTANT;
  double side = 0.5 * (cbrt (a->Vc) + cbrt (b->Vc));
  struct constants pair = {
    .Tc = sqrt (a->Tc * b->Tc), .Vc = side * side * side, .omega = 0.5 * (a->omega + b->omega)
  };
  pair.pc = Zc * GAS_CONSTANT * pair.Tc / pair.Vc;
  return pair;
}

/* Tsonopoulos (1974), eqs. 3 to 5: B pc/(R Tc) = f0 + omega f1.  */
static double
estimate (const struct constants *c, double T)
{
  double u = c->Tc / T, u2 = u * u, u3 = u2 * u, u8 = u3 * u3 * u2;
  double f0 = 0.1445 - 0.330 * u - 0.1385 * u2 - 0.0121 * u3 - 0.000607 * u8;
  double f1 = 0.0637 + 0.331 * u2 - 0.423 * u3 - 0.008 * u8;
  return GAS_CONSTANT * c->Tc / c->pc * (f0 + c->omega * f1);
}

/* B = sum a_i (298.15/T - 1)^(i-1), cm3/mol.  */
static double
measured (const double a[TERMS], double T)
{
  double t = 298.15 / T - 1, sum = 0;
  for (size_t i = TERMS; i-- > 0;)
    sum = sum * t + a[i];
  return 1e-6 * sum;
}

/* What is being found, and the shares of the largest parts it names so far.  */
struct finding { struct second_virial virial; double estimated, outside; };

static void
keep_largest (const struct species **kept, double *most_yet, const struct species *s, double x)
{
  if (x > *most_yet) {
    *most_yet = x;
    *kept = s;
  }
}

static bool
has_constants (const struct species *s, struct fault *fault)
{
  if (!isnan (s->critical_temperature) && !isnan (s->critical_pressure)
      && !isnan (s->acentric_factor))
    return true;
  fault_set (fault, MESSAGE_MODEL_LACKS, "the second virial coefficient", s->key);
  fault_hint (fault, "it needs the critical point and the acentric factor of each part, or for one "
              "alone a row of your own in virial.tsv (option --tables)");
  return false;
}

static bool
pure_coefficient (const struct figures_row *row, const struct species *s, double x, double T,
                  struct finding *found, double *B, struct fault *fault)
{
  if (row != NULL && T >= least && T <= most) {
    *B = measured (row->value, T);
    if (T < good_least || T > good_most)
      keep_largest (&found->virial.outside, &found->outside, s, x);
    return true;
  }
  if (!has_constants (s, fault))
    return false;
  struct constants c = constants_of (s);
  *B = estimate (&c, T);
  keep_largest (&found->virial.estimated, &found->estimated, s, x);
  return true;
}

/* B_ij of the parts I and J of a gas.  */
static bool
pair_coefficient (const struct composition *gas, size_t i, size_t j, double T, double *B,
                  struct fault *fault)
{
  if (!has_constants (gas->species[i], fault) || !has_constants (gas->species[j], fault))
    return false;
  struct constants a = constants_of (gas->species[i]), b = constants_of (gas->species[j]);
  struct constants pair = constants_of_pair (&a, &b);
  *B = estimate (&pair, T);
  return true;
}

/* b_i = sum_j x_j B_ij of every part that is there, B_ii in PURE.  */
static bool
beside_all (const struct composition *gas, double T, const double pure[], double b[],
            struct fault *fault)
{
  for (size_t i = 0; i < gas->count; i++) {
    struct sum sum = { gas->fraction[i] * pure[i], 0 };
    for (size_t j = 0; j < gas->count && gas->fraction[i] > 0; j++) {
      double B = 0;
      if (j == i || !(gas->fraction[j] > 0))
        continue;
      if (!pair_coefficient (gas, i, j, T, &B, fault))
        return false;
      sum_add (&sum, gas->fraction[j] * B);
    }
    b[i] = sum_total (&sum);
  }
  return true;
}

static void
record (struct workings *workings, const struct figures *figures, const struct composition *gas,
        const double pure[], const double b[], const struct second_virial *virial)
{
  static const char tsonopoulos[] = "C. Tsonopoulos, AIChE J. 20 (1974) 263, eqs. 3 to 5";
  static const char pairs[] = "sum over all parts j of x_j B_ij; B_ij by Tsonopoulos (1974), J. M. "
                              "Prausnitz, R. D. Gunn, AIChE J. 4 (1958) 430";
  if (workings == NULL)
    return;
  const size_t n = gas->count;
  const char **terms = ARENA_ARRAY (workings->arena, n, const char *);
  const char **sources = ARENA_ARRAY (workings->arena, n, const char *);
  for (size_t i = 0; i < n; i++) {
    const struct figures_row *row = figures_of (figures, gas->species[i]);
    terms[i] = gas->species[i]->key;
    sources[i] = row != NULL ? row->source : tsonopoulos;
  }
  workings_add (workings, &(struct step) {
      .name = "second virial coefficient", .formula = "B = sum(x_i b_i)", .value = virial->value,
      .unit = "m3/mol", .source = "the statistical mechanics of mixtures: exact",
      .term_count = (unsigned) n, .terms = terms,
      STEP_COLUMNS ({ "x_i", gas->fraction, "mol/mol", NULL, NULL },
                    { "B_ii", pure, "m3/mol", NULL, sources },
                    { "b_i", b, "m3/mol", n > 1 ? pairs : NULL, NULL }) });
}

bool
second_virial_of_gas (struct property_tables *tables, const struct composition *gas, double T,
                      struct second_virial *virial, struct workings *workings,
                      struct fault *fault)
{
  struct finding found = { { 0, NULL, NULL }, 0, 0 };
  if (!(isfinite (T) && T > 0))
    return fault_set (fault, MESSAGE_RANGE, "an absolute temperature is above zero", NULL);
  const struct figures *figures = property_tables_read (tables, PROPERTY_TABLE_VIRIAL, TERMS,
                                                        columns, fault);
  if (figures == NULL)
    return false;
  double *pure = ARENA_ARRAY (fault->arena, gas->count, double);
  double *b = ARENA_ARRAY (fault->arena, gas->count, double);
  struct sum sum = { 0, 0 };
  for (size_t i = 0; i < gas->count; i++) {
    const struct species *s = gas->species[i];
    if (gas->fraction[i] > 0
        && !pure_coefficient (figures_of (figures, s), s, gas->fraction[i], T, &found, &pure[i],
                              fault))
      return false;
  }
  if (!beside_all (gas, T, pure, b, fault))
    return false;
  for (size_t i = 0; i < gas->count; i++)
    sum_add (&sum, gas->fraction[i] * b[i]);
  found.virial.value = sum_total (&sum);
  if (!isfinite (found.virial.value))
    return fault_set (fault, MESSAGE_NOT_FINITE, NULL, NULL);
  record (workings, figures, gas, pure, b, &found.virial);
  *virial = found.virial;
  return true;
}
