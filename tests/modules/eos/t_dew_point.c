/* Dew points by the Peng-Robinson equation.  */
#include "config.h"

#include <math.h>
#include <string.h>

#include "eos/dew_point.h"
#include "eos/eos.h"
#include "fluids.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/constants.h"

static const struct equation *const PR = &equation_peng_robinson;

/* The dew temperature of a mixture as fluid_mixture reads it; NAN and *KIND where it has none.  */
static double
dew_of (const char *mixture, double p, enum message *kind)
{
  struct arena *arena = arena_create ();
  const struct composition *gas = fluid_mixture (arena, mixture);
  struct dew_point dew = { .T = (double) NAN };
  struct fault fault;

  fault_init (&fault, arena);
  CHECK (gas != NULL);
  if (gas != NULL) {
    CHECK (dew_point_of (arena, gas, p, &dew, &fault) == (fault.kind == MESSAGE_NONE));
  }
  if (kind != NULL) {
    *kind = fault.kind;
  }
  arena_destroy (arena);
  return dew.T;
}

/* ---- Fugacities as the paper prints them ---- */

/* ln of the fugacity over p of every component of x, at the gas or the dense root: eq. 19 of the
   paper with its double sums, eqs. 9, 10, 17, 18, 20 to 22 (D.-Y. Peng, D. B. Robinson, Ind. Eng.
   Chem. Fundam. 15 (1976) 59-64), kappa above w = 0.491 as in their GPA RR-28 (1978).  Z is that of
   a density root that t_cubic holds to eq. 5.                                                   */
static void
fugacities (const struct composition *x, double T, double p, bool dense, double ln_f[])
{
  _Alignas (max_align_t) unsigned char memory[4096], isotherm[EOS_ISOTHERM_SIZE];
  const double RT = GAS_CONSTANT * T, root8 = sqrt (8.0);
  double a[32], b[32], a_sum = 0, b_sum = 0;

  PR->prepare (x, memory);
  PR->set_isotherm (memory, T, isotherm);
  const struct density_roots roots = PR->roots (isotherm, p);
  const double Z = p / ((dense && roots.dense > 0 ? roots.dense : roots.gas) * RT);

  for (size_t i = 0; i < x->count; i++) {
    const struct species *s = x->species[i];
    const double w = s->acentric_factor, RTc = GAS_CONSTANT * s->critical_temperature;
    const double kappa = w <= 0.491 ? 0.37464 + 1.54226 * w - 0.26992 * w * w
                         : 0.379642 + 1.48503 * w - 0.164423 * w * w + 0.016666 * w * w * w;
    const double root = 1 + kappa * (1 - sqrt (T / s->critical_temperature));
    a[i] = 0.45723552892138218 * RTc * RTc / s->critical_pressure * root * root;
    b[i] = 0.077796073903888456 * RTc / s->critical_pressure;
  }
  for (size_t i = 0; i < x->count; i++) {
    b_sum += x->fraction[i] * b[i];
    for (size_t j = 0; j < x->count; j++) {
      a_sum += x->fraction[i] * x->fraction[j] * sqrt (a[i] * a[j]);
    }
  }
  const double A = a_sum * p / (RT * RT), B = b_sum * p / RT;
  for (size_t i = 0; i < x->count; i++) {
    double by_i = 0;
    for (size_t j = 0; j < x->count; j++) {
      by_i += x->fraction[j] * sqrt (a[i] * a[j]);
    }
    ln_f[i] = log (x->fraction[i]) + b[i] / b_sum * (Z - 1) - log (Z - B)
              - A / (root8 * B) * (2 * by_i / a_sum - b[i] / b_sum)
                * log ((Z + (1 + sqrt (2.0)) * B) / (Z + (1 - sqrt (2.0)) * B));
  }
}

/* The largest difference of ln f between the gas and its first drop.  */
static double
unequal (struct arena *arena, const struct composition *gas, double p, const struct dew_point *dew)
{
  struct part parts[32];
  double of_gas[32], of_liquid[32], most = 0;
  struct fault fault;

  for (size_t i = 0; i < gas->count; i++) {
    parts[i] = (struct part) { gas->species[i], dew->liquid[i] };
  }
  fault_init (&fault, arena);
  const struct composition *liquid = composition_make (arena, gas->count, parts, &fault);
  if (!CHECK (liquid != NULL && liquid->count == gas->count)) {
    return HUGE_VAL;
  }
  fugacities (gas, dew->T, p, false, of_gas);
  fugacities (liquid, dew->T, p, true, of_liquid);
  for (size_t i = 0; i < gas->count; i++) {
    most = fmax (most, fabs (of_gas[i] - of_liquid[i]));
  }
  return most;
}

/* ---- Cases ---- */

/* Normal boiling points: M. L. Huber et al. 2022 as in tables/species.tsv.  The cubic equation
   meets them within about 1 K.  CO2 at its triple point, 216.592 K and 517.95 kPa: R. Span,
   W. Wagner, J. Phys. Chem. Ref. Data 25 (1996) 1509, from memory.                              */
static void
pure_substances (void)
{
  static const struct { const char *mixture; double p, T; } known[] = {
    { "CH4=1", 101325, 111.667 }, { "C2H6=1", 101325, 184.569 }, { "C3H8=1", 101325, 231.036 },
    { "iC4H10=1", 101325, 261.401 }, { "nC4H10=1", 101325, 272.66 },
    { "nC5H12=1", 101325, 309.209 }, { "nC6H14=1", 101325, 341.866 },
    { "nC8H18=1", 101325, 398.794 }, { "nC10H22=1", 101325, 447.27 }, { "N2=1", 101325, 77.355 },
    { "CO2=1", 517950, 216.592 },
  };
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
    test_about ("%s at %g Pa", known[i].mixture, known[i].p);
    CHECK (fabs (dew_of (known[i].mixture, known[i].p, NULL) - known[i].T) < 1);
  }
}

/* A pure substance ends at its critical point, which the equation has by construction.  */
static void
critical_end (void)
{
  static const char *const mixtures[] = { "CH4=1", "C3H8=1", "nC10H22=1", "CO2=1" };

  for (size_t i = 0; i < sizeof mixtures / sizeof mixtures[0]; i++) {
    char key[16] = "";
    enum message kind;

    memcpy (key, mixtures[i], strcspn (mixtures[i], "="));
    const struct species *s = fluid_find (key);
    NEED (s != NULL);
    test_about ("%s", key);
    NEAR (dew_of (mixtures[i], 0.99999 * s->critical_pressure, NULL), s->critical_temperature,
          1e-5);
    dew_of (mixtures[i], 1.00001 * s->critical_pressure, &kind);
    SAME_INT (kind, MESSAGE_NO_DEW_POINT);
  }
}

/* Evaluated apart, in Python: eq. 19 with double sums, the roots of eq. 5 by halving, plain
   substitution of W_i = y_i phi_i(y)/phi_i(w) to 1e-15 and a secant in T on ln sum W.  No figure of
   it comes from this program but the critical constants.                                        */
static void
evaluated_apart (void)
{
  static const char two[] = "CH4=0.9;nC4H10=0.1";
  static const char five[] = "N2=0.02;CH4=0.88;C2H6=0.06;C3H8=0.03;nC6H14=0.01";
  static const struct { const char *mixture; double p, T; } known[] = {
    { "C3H8=1", 101325, 230.962040403 }, { two, 1e5, 223.365706038 },
    { two, 30e5, 291.845302841 }, { two, 60e5, 301.419386779 }, { two, 100e5, 294.931192717 },
    { five, 1e5, 242.621230835 }, { five, 10e5, 278.649880179 }, { five, 60e5, 294.952133389 },
    { five, 80e5, 288.954416926 },
  };
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
    test_about ("%s at %g Pa", known[i].mixture, known[i].p);
    NEAR (dew_of (known[i].mixture, known[i].p, NULL), known[i].T, 1e-9);
  }
}

/* The first drop of 90 % methane, 10 % n-butane at 60 bar, evaluated as above.  */
static void
first_drop (void)
{
  struct arena *arena = arena_create ();
  const struct composition *gas = fluid_mixture (arena, "CH4=0.9;CO2=0;nC4H10=0.1");
  struct dew_point dew;
  struct fault fault;

  fault_init (&fault, arena);
  if (CHECK (gas != NULL) && CHECK (dew_point_of (arena, gas, 60e5, &dew, &fault))) {
    for (size_t i = 0; i < gas->count; i++) {
      const char *key = gas->species[i]->key;
      NEAR (dew.liquid[i], strcmp (key, "CH4") == 0 ? 0.310732319
                           : strcmp (key, "CO2") == 0 ? 0 : 0.689267681, 1e-8);
    }
  }
  arena_destroy (arena);
}

/* Up to the highest pressure with a dew point T(p) is one curve: it ends in a vertical tangent,
   T = T* + c (p* - p)^(1/2), and above there is none.                                           */
static void
highest_pressure (void)
{
  static const char mixture[] = "CH4=0.9;nC4H10=0.1";
  double low = 100e5, high = 300e5, last = 0;
  enum message kind;

  for (int i = 0; i < 40; i++) {
    const double p = 0.5 * (low + high);
    if (isnan (dew_of (mixture, p, &kind))) {
      SAME_INT (kind, MESSAGE_NO_DEW_POINT);
      high = p;
    } else {
      low = p;
    }
  }
  test_about ("highest pressure %.9g Pa", low);
  CHECK (low > 110e5 && low < 200e5);
  const double T1 = dew_of (mixture, low * (1 - 1e-4), NULL);
  const double T4 = dew_of (mixture, low * (1 - 4e-4), NULL);
  const double T9 = dew_of (mixture, low * (1 - 9e-4), NULL);
  NEAR ((T4 - T1) / (T9 - T4), 1, 0.05);
  CHECK (T9 > T4 && T4 > T1);
  for (double p = 1e3; p < 0.95 * low; p *= 1.05) {     /* up, then back, without a jump */
    const double T = dew_of (mixture, p, NULL);
    CHECK (p < 1.01e3 || fabs (T - last) < 10);
    last = T;
  }
}

static void
order_of_parts (void)
{
  const double T = dew_of ("N2=0.02;CH4=0.9;C3H8=0.05;nC6H14=0.02;H2=0.01", 40e5, NULL);

  NEAR (dew_of ("H2=0.01;nC6H14=0.02;C3H8=0.05;CH4=0.9;N2=0.02", 40e5, NULL), T, 1e-12);
  NEAR (dew_of ("C3H8=0.05;N2=0.02;nC6H14=0.02;H2=0.01;CH4=0.9", 40e5, NULL), T, 1e-12);
}

static void
what_cannot_be_asked (void)
{
  static const double pressures[] = { 0, -1, 0.5, 2e9, (double) NAN, (double) INFINITY };

  for (size_t i = 0; i < sizeof pressures / sizeof pressures[0]; i++) {
    enum message kind;
    test_about ("%g Pa", pressures[i]);
    CHECK (isnan (dew_of ("CH4=1", pressures[i], &kind)));
    SAME_INT (kind, MESSAGE_RANGE);
  }
}

static void
lacking_constants (void)
{
  static const struct species unknown = { .key = "X", .name = "X", .formula = "X", .flags = "",
                                          .molar_mass = 0.1, .critical_temperature = (double) NAN,
                                          .critical_pressure = (double) NAN,
                                          .acentric_factor = (double) NAN };
  struct arena *arena = arena_create ();
  const struct composition *gas = composition_pure (arena, &unknown);
  struct dew_point dew;
  struct fault fault;

  fault_init (&fault, arena);
  CHECK (!dew_point_of (arena, gas, 1e5, &dew, &fault));
  SAME_INT (fault.kind, MESSAGE_MODEL_LACKS);
  SAME_TEXT (fault.fact[1], "X");
  arena_destroy (arena);
}

/* A natural gas: mostly methane, less of each heavier one.  */
static const struct composition *
natural_gas (struct arena *arena, uint64_t *seed, struct fault *fault)
{
  static const struct { const char *key; double most; } range[] = {
    { "CH4", 0 }, { "N2", 0.15 }, { "CO2", 0.1 }, { "H2S", 0.02 }, { "H2", 0.1 }, { "He", 0.01 },
    { "C2H6", 0.12 }, { "C3H8", 0.06 }, { "iC4H10", 0.02 }, { "nC4H10", 0.02 },
    { "iC5H12", 0.008 }, { "nC5H12", 0.008 }, { "nC6H14", 0.004 }, { "nC7H16", 0.002 },
    { "nC8H18", 0.001 }, { "nC9H20", 0.0004 }, { "nC10H22", 0.0002 },
  };
  struct part parts[sizeof range / sizeof range[0]];
  size_t n = 1;
  double rest = 1;

  for (size_t i = 1; i < sizeof range / sizeof range[0]; i++) {
    if (fluid_chance (seed) < 0.7) {
      parts[n] = (struct part) { fluid_find (range[i].key), range[i].most * fluid_chance (seed) };
      rest -= parts[n++].amount;
    }
  }
  parts[0] = (struct part) { fluid_find (range[0].key), rest };
  return composition_make (arena, n, parts, fault);
}

/* Either a dew point with equal fugacities, or the word that there is none; below 30 bar a gas such
   as these has one.                                                                             */
static void
random_gases (void)
{
  uint64_t seed = 20260711;
  size_t none = 0;
  struct arena *arena = arena_create ();

  for (int i = 0; i < 2000; i++) {
    const uint64_t here = seed;
    struct dew_point dew;
    struct fault fault;

    arena_reset (arena);
    fault_init (&fault, arena);
    const struct composition *gas = natural_gas (arena, &seed, &fault);
    const double p = 10 * exp (fluid_chance (&seed) * log (3e6));
    test_about ("seed %llu at %g Pa", (unsigned long long) here, p);
    if (dew_point_of (arena, gas, p, &dew, &fault)) {
      CHECK (dew.T > 30 && dew.T < 450);
      CHECK (unequal (arena, gas, p, &dew) < 1e-8);
    } else {
      SAME_INT (fault.kind, MESSAGE_NO_DEW_POINT);
      CHECK (p > 30e5);
      none++;
    }
  }
  test_about ("%zu without a dew point", none);
  CHECK (none > 20 && none < 600);
  arena_destroy (arena);
}

/* Up to eight of any of the fluids, in any proportions: a dew point with equal fugacities, or the
   word that there is none.                                                                      */
static void
random_mixtures (void)
{
  uint64_t seed = 99;
  struct arena *arena = arena_create ();

  for (int i = 0; i < 2000; i++) {
    const uint64_t here = seed;
    struct part parts[8];
    const size_t n = 1 + (size_t) (7.99 * fluid_chance (&seed));
    struct dew_point dew;
    struct fault fault;

    arena_reset (arena);
    fault_init (&fault, arena);
    for (size_t k = 0; k < n; k++) {
      const size_t which = (size_t) (fluid_chance (&seed) * (double) fluid_count ());
      parts[k] = (struct part) { fluid_at (which), exp (-10 * fluid_chance (&seed)) };
    }
    const struct composition *gas = composition_make (arena, n, parts, &fault);
    const double p = exp (fluid_chance (&seed) * log (1e9));
    test_about ("seed %llu at %g Pa", (unsigned long long) here, p);
    if (dew_point_of (arena, gas, p, &dew, &fault)) {
      CHECK (dew.T > 0.5 && dew.T < 1000);
      CHECK (unequal (arena, gas, p, &dew) < 1e-8);
    } else {
      SAME_INT (fault.kind, MESSAGE_NO_DEW_POINT);
      CHECK (p > 2e5);
    }
  }
  arena_destroy (arena);
}

/* Along rising pressure a natural gas loses its dew point once, and has no jump before.  */
static void
random_curves (void)
{
  uint64_t seed = 7;
  struct arena *arena = arena_create ();

  for (int i = 0; i < 40; i++) {
    double last = (double) NAN;
    bool lost = false;
    struct dew_point dew;
    struct fault fault;

    arena_reset (arena);
    fault_init (&fault, arena);
    const struct composition *gas = natural_gas (arena, &seed, &fault);
    for (double p = 1e5; p < 400e5; p *= 1.03) {
      fault_init (&fault, arena);
      test_about ("gas %d at %g Pa", i, p);
      if (!dew_point_of (arena, gas, p, &dew, &fault)) {
        lost = true;
        continue;
      }
      CHECK (!lost);
      CHECK (isnan (last) || (dew.T - last < 2 && dew.T - last > -25));
      last = dew.T;
    }
    CHECK (lost);
  }
  arena_destroy (arena);
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "pure substances boil where they do", pure_substances },
    { "a pure substance ends at its critical point", critical_end },
    { "dew points evaluated apart", evaluated_apart },
    { "the first drop", first_drop },
    { "the highest pressure with a dew point", highest_pressure },
    { "the order of the parts does not matter", order_of_parts },
    { "what cannot be asked", what_cannot_be_asked },
    { "a component without constants", lacking_constants },
    { "2000 random natural gases", random_gases },
    { "2000 random mixtures", random_mixtures },
    { "curves of random natural gases", random_curves },
    { NULL, NULL }
  };

  return test_main (argc, argv, cases);
}
