#include "config.h"
#include <math.h>
#include "gas/analysis.h"
#include "libtest.h"
#include "modules/gas/samples.h"
#include "support/arena.h"
#include "support/fault.h"

static struct arena *arena;
static struct fault fault;
static size_t at;
static struct treatment treatment;

static void
start (void)
{
  arena_destroy (arena);
  arena = arena_create ();
  fault_init (&fault, arena);
  at = 99;
}

static const struct analysis *
without_gas (const struct analysis *a, const struct composition *gas, size_t n,
             const struct species *const tracers[])
{
  struct removal removal = { gas, n, tracers, NULL };
  return analysis_without_gas (arena, a, &removal, &treatment, &fault);
}

static const struct analysis *
make (size_t n, const struct stated_part parts[])
{
  return analysis_make (arena, n, parts, false, &at, &fault);
}

static struct stated_part
stated (int species, enum amount_basis basis, double amount)
{
  return (struct stated_part) { .species = &sample[species], .basis = basis, .amount = amount };
}

static struct stated_part
mole_percent (int species, double amount)
{
  return stated (species, AMOUNT_MOLE_FRACTION, amount / 100);
}

static struct stated_part
mass_percent (int species, double amount)
{
  return stated (species, AMOUNT_MASS_FRACTION, amount / 100);
}

static struct stated_part
rest_of (int species)
{
  return stated (species, AMOUNT_REST, 0);
}

static double
amount (const struct analysis *a, int species)
{
  for (size_t i = 0; i < a->count; i++)
    if (a->parts[i].species == &sample[species])
      return a->parts[i].amount;
  return (double) NAN;
}

/* Mole per cent once closed.  */
static double
percent (const struct analysis *a, int species)
{
  double scaled;
  const struct composition *c = analysis_close (arena, a, 0.005, &scaled, &fault);
  return c != NULL ? 100 * composition_fraction (c, &sample[species]) : (double) NAN;
}

static double
molar_mass (const struct analysis *a)
{
  double scaled;
  const struct composition *c = analysis_close (arena, a, 0.005, &scaled, &fault);
  return c != NULL ? c->molar_mass : (double) NAN;
}

/* A synthesis gas whose analysis adds up to 99.37 %; worked by hand: x_i/sum, or nitrogen as 100
   less the others.                                                                              */
static const struct analysis *
synthesis_gas (void)
{
  const struct stated_part parts[] = {
    mole_percent (H2, 41.20), mole_percent (CO, 23.85), mole_percent (CO2, 19.60),
    mole_percent (CH4, 8.42), mole_percent (N2, 6.30)
  };
  return make (5, parts);
}

static void
scaled_or_nitrogen (void)
{
  start ();
  const struct analysis *raw = synthesis_gas ();
  NEED (raw != NULL);
  SAME_INT (raw->whole, WHOLE_MOLE);
  NEAR (analysis_total (raw), 0.9937, 1e-15);
  CHECK (isnan (percent (raw, H2)));
  SAME_INT (fault.kind, MESSAGE_GAS_OPEN);
  SAME_TEXT (fault.fact[0], "99.37");
  SAME_TEXT (fault.fact[1], "mol%");
  start ();
  raw = synthesis_gas ();
  const struct analysis *all = analysis_normalised (arena, raw, &treatment, &fault);
  NEED (all != NULL);
  NEAR (percent (all, H2), 41.4612, 1e-5);
  NEAR (percent (all, CO), 24.0012, 1e-5);
  NEAR (percent (all, CO2), 19.7243, 1e-5);
  NEAR (percent (all, CH4), 8.47338, 1e-5);
  NEAR (percent (all, N2), 6.33994, 1e-5);
  NEAR (molar_mass (all), 19.3745e-3, 3e-5);
  NEAR (treatment.total_before, 0.9937, 1e-15);
  NEAR (treatment.total_after, 1, 1e-15);
  NEAR (treatment.factor, 1 / 0.9937, 1e-15);
  const struct analysis *into
    = analysis_normalised_into (arena, raw, &sample[N2], &treatment, &fault);
  NEED (into != NULL);
  NEAR (percent (into, N2), 6.93, 1e-13);
  NEAR (percent (into, H2), 41.20, 1e-14);
  NEAR (molar_mass (into), 19.4289e-3, 3e-5);
  NEAR (treatment.added, 0.0063, 1e-13);
  NEAR (treatment.factor, 1, 0);
  NEAR (treatment.total_after, 1, 1e-15);
}

/* A liquefied gas by weight (ISO 14912:2003, worked by hand).  */
static void
shares_by_mass (void)
{
  start ();
  const struct stated_part parts[] = {
    mass_percent (C3H8, 91.5), mass_percent (C3H6, 2.5), mass_percent (C4H10, 6.0)
  };
  const struct analysis *a = make (3, parts);
  NEED (a != NULL);
  SAME_INT (a->whole, WHOLE_MASS);
  NEAR (analysis_total (a), 1, 1e-15);
  NEAR (amount (a, C3H8), 0.915 / 44.097e-3, 1e-15);
  NEAR (percent (a, C3H8), 92.7317, 3e-5);
  NEAR (percent (a, C3H6), 2.65503, 3e-5);
  NEAR (percent (a, C4H10), 4.61330, 3e-5);
  NEAR (molar_mass (a), 44.6906e-3, 3e-5);
}

/* CO2 5.02 mass%, the rest nitrogen: x = (5.02/44.009)/(5.02/44.009 + 94.98/28.014).  */
static void
rest_by_mass (void)
{
  start ();
  const struct stated_part parts[] = { mass_percent (CO2, 5.02), rest_of (N2) };
  const struct analysis *a = make (2, parts);
  NEED (a != NULL);
  SAME_INT (a->whole, WHOLE_MASS);
  NEAR (analysis_total (a), 1, 1e-15);
  NEAR (percent (a, CO2), 3.25487465, 1e-8);
}

static void
rest_by_amount (void)
{
  start ();
  const struct stated_part parts[] = {
    mole_percent (CH4, 58.2), rest_of (CO2), mole_percent (N2, 1.4), mole_percent (O2, 0.4),
    stated (H2S, AMOUNT_MOLE_FRACTION, 850e-6)
  };
  const struct analysis *a = make (5, parts);
  NEED (a != NULL);
  SAME_INT (a->whole, WHOLE_MOLE);
  NEAR (amount (a, CO2), 0.39915, 1e-15);
  CHECK (a->parts[1].species == &sample[CO2]);
  const struct stated_part alone[] = { rest_of (N2) };
  a = make (1, alone);
  NEED (a != NULL);
  NEAR (amount (a, N2), 1, 0);
  const struct stated_part nothing_left[] = {      /* 0.582 + 0.399 + 0.019 rounds above 1 or not */
    mole_percent (CH4, 58.2), mole_percent (CO2, 39.9), mole_percent (N2, 1.9), rest_of (O2)
  };
  a = make (4, nothing_left);
  NEED (a != NULL);
  CHECK (amount (a, O2) >= 0 && amount (a, O2) < 1e-15);
}

/* A random gas of which some parts are told by amount and some by mass, and one as the rest.  */
static size_t
random_mixed (uint64_t *state, bool with_rest, struct stated_part parts[],
              const struct composition **truth)
{
  size_t n = 2 + (size_t) (random_next (state) % (SAMPLES - 1));
  size_t order[SAMPLES];
  double given[SAMPLES];
  struct part whole[SAMPLES];
  random_amounts (state, n, order, given);
  for (size_t i = 0; i < n; i++)
    whole[i] = (struct part) { &sample[order[i]], given[i] };
  *truth = composition_make (arena, n, whole, &fault);
  if (*truth == NULL)
    return 0;
  size_t rest = 0;                       /* the largest: the others' rounding drowns in it */
  for (size_t i = 0; i < n; i++) {
    bool by_mass = random_next (state) % 2 == 0;
    const struct species *species = whole[i].species;
    parts[i] = (struct stated_part) { .species = species };
    parts[i].basis = by_mass ? AMOUNT_MASS_FRACTION : AMOUNT_MOLE_FRACTION;
    parts[i].amount = composition_fraction (*truth, species)
      * (by_mass ? species->molar_mass / (*truth)->molar_mass : 1);
    if (given[i] > given[rest])
      rest = i;
  }
  if (with_rest) {
    parts[rest].basis = AMOUNT_REST;
    parts[rest].amount = 0;
  }
  return n;
}

static void
mixed_bases_with_rest (void)
{
  uint64_t state = 20260102;
  for (int number = 0; number < 2000; number++) {
    start ();
    struct stated_part parts[SAMPLES];
    const struct composition *truth;
    size_t n = random_mixed (&state, true, parts, &truth);
    test_about ("seed 20260102, case %d, %zu parts", number, n);
    const struct analysis *a = make (n, parts);
    NEED (a != NULL);
    NEAR (analysis_total (a), 1, 1e-15 * (double) (n + 1));
    double scaled;
    const struct composition *c = analysis_close (arena, a, 0.005, &scaled, &fault);
    NEED (c != NULL && c->count == truth->count);
    for (size_t i = 0; i < n; i++)
      if (!CHECK (c->species[i] == truth->species[i])
          || !NEAR (c->fraction[i], truth->fraction[i], 1e-12))
        return;
  }
}

/* All figures a few per cent off by one factor: the total is that factor, on either basis, and
   closing gives the gas.                                                                        */
static void
mixed_bases_off_by_a_factor (void)
{
  uint64_t state = 20260103;
  for (int number = 0; number < 2000; number++) {
    start ();
    struct stated_part parts[SAMPLES];
    const struct composition *truth;
    size_t n = random_mixed (&state, false, parts, &truth);
    double factor = 0.9 + 0.2 * random_share (&state);
    test_about ("seed 20260103, case %d, %zu parts, factor %.17g", number, n, factor);
    for (size_t i = 0; i < n; i++)
      parts[i].amount *= factor;
    const struct analysis *a = make (n, parts);
    NEED (a != NULL);
    NEAR (analysis_total (a), factor, 1e-14);
    a = analysis_normalised (arena, a, &treatment, &fault);
    NEED (a != NULL);
    double scaled;
    const struct composition *c = analysis_close (arena, a, 0, &scaled, &fault);
    NEED (c != NULL);
    NEAR (scaled, 1, 0);
    for (size_t i = 0; i < n; i++)
      if (!NEAR (c->fraction[i], truth->fraction[i], 1e-12))
        return;
  }
}

/* H2S 0.1 mol% beside 100.0 mass%: the total is off by the 0.1 % only.  */
static void
a_molar_trace_beside_masses (void)
{
  start ();
  const struct stated_part parts[] = {
    mass_percent (N2, 60), mole_percent (H2S, 0.1), mass_percent (CO2, 40)
  };
  const struct analysis *a = make (3, parts);
  NEED (a != NULL);
  SAME_INT (a->whole, WHOLE_MOLE);
  NEAR (analysis_total (a), 1.001, 1e-4);
  const struct stated_part nothing[] = { mass_percent (N2, 0), mole_percent (CO2, 0) };
  a = make (2, nothing);
  NEED (a != NULL);
  NEAR (analysis_total (a), 0, 0);
}

static void
amounts_and_masses (void)
{
  start ();
  const struct stated_part parts[] = {
    stated (H2, AMOUNT_MOLES, 2), stated (N2, AMOUNT_MASS, 28.014e-3), stated (H2, AMOUNT_MOLES, 1)
  };
  const struct analysis *a = make (3, parts);
  NEED (a != NULL);
  SAME_INT (a->whole, WHOLE_NONE);
  NEAR (analysis_total (a), 1, 0);
  NEAR (percent (a, H2), 75, 1e-14);
  NEAR (percent (a, N2), 25, 1e-14);
  double scaled = 0;
  CHECK (analysis_close (arena, a, 0, &scaled, &fault) != NULL);
  NEAR (scaled, 1, 0);
  const struct analysis *left = analysis_without (arena, a, &sample[N2], &treatment, &fault);
  NEED (left != NULL);
  NEAR (treatment.removed, 0.25, 1e-14);
  NEAR (percent (left, H2), 100, 0);
}

static void
a_gas_as_a_part (void)
{
  start ();
  const struct part air_parts[] = { { &sample[N2], 0.79 }, { &sample[O2], 0.21 } };
  const struct composition *air = composition_make (arena, 2, air_parts, &fault);
  NEED (air != NULL);
  const struct stated_part parts[] = {
    mole_percent (CH4, 60), mole_percent (N2, 20), { .gas = air, .basis = AMOUNT_REST }
  };
  const struct analysis *a = make (3, parts);
  NEED (a != NULL && a->count == 3);
  NEAR (amount (a, N2), 0.2 + 0.2 * 0.79, 1e-15);
  NEAR (amount (a, O2), 0.2 * 0.21, 1e-14);
  const struct stated_part by_mass[] = {
    { .gas = air, .basis = AMOUNT_MASS_FRACTION, .amount = 0.5 }, mass_percent (CH4, 50)
  };
  a = make (2, by_mass);
  NEED (a != NULL);
  double n_air = 0.5 / (0.79 * 28.014e-3 + 0.21 * 31.998e-3), n_methane = 0.5 / 16.043e-3;
  NEAR (percent (a, O2), 100 * 0.21 * n_air / (n_air + n_methane), 1e-14);
}

/* The third list: with X = 1, A = 0.016043, W = 0.1, B = 0.1/0.044009 both balances have the total
   t with t^2 - (X + W) t + X W - A B = 0, 103.88291 %.                                          */
static void
faults_of_a_list (void)
{
  const struct {
    struct stated_part parts[3]; size_t n; enum message kind; size_t at; const char *fact;
  } faulty[] = {
    { { mole_percent (CH4, 60), mole_percent (CO2, 41), rest_of (N2) }, 3, MESSAGE_GAS_TOTAL, 2,
      "101 mol%" },
    { { mass_percent (CH4, 60), rest_of (N2), mass_percent (CO2, 40.5) }, 3, MESSAGE_GAS_TOTAL, 1,
      "100.5 mass%" },
    { { mole_percent (CH4, 100), mass_percent (CO2, 10), rest_of (N2) }, 3, MESSAGE_GAS_TOTAL, 2,
      "103.88291 mol%" },
    { { mole_percent (CH4, 1), mole_percent (CO2, -1), rest_of (N2) }, 3, MESSAGE_AMOUNT_RANGE, 1,
      "CO2" },
    { { mole_percent (CH4, (double) NAN), rest_of (N2) }, 2, MESSAGE_AMOUNT_RANGE, 0, "CH4" },
    { { mass_percent (CH4, 1), stated (N2, AMOUNT_MOLES, (double) INFINITY) }, 2,
      MESSAGE_AMOUNT_RANGE, 1, "N2" },
    { { stated (CH4, AMOUNT_MASS, 1.5e308), rest_of (N2) }, 1, MESSAGE_AMOUNT_RANGE, 0, "CH4" },
    { { mole_percent (CH4, 1), stated (N2, AMOUNT_MASS, 1), rest_of (CO2) }, 2,
      MESSAGE_BASIS_MIXED, 1, "N2" },
    { { stated (N2, AMOUNT_MOLES, 1), rest_of (CO2) }, 2, MESSAGE_BASIS_MIXED, 0, "N2" },
    { { rest_of (N2), mole_percent (CH4, 1), rest_of (CO2) }, 3, MESSAGE_REST_TWICE, 2, NULL }
  };
  for (size_t i = 0; i < sizeof faulty / sizeof faulty[0]; i++) {
    start ();
    test_about ("list %zu", i);
    CHECK (make (faulty[i].n, faulty[i].parts) == NULL);
    SAME_INT (fault.kind, faulty[i].kind);
    SAME_INT (at, faulty[i].at);
    SAME_TEXT (fault.fact[0], faulty[i].fact);
  }
}

static void
normalised_twice (void)
{
  uint64_t state = 20260104;
  for (int number = 0; number < 2000; number++) {
    start ();
    size_t n = 1 + (size_t) (random_next (&state) % SAMPLES), order[SAMPLES];
    double given[SAMPLES];
    struct stated_part parts[SAMPLES];
    enum amount_basis basis = number % 2 == 0 ? AMOUNT_MOLE_FRACTION : AMOUNT_MASS_FRACTION;
    test_about ("seed 20260104, case %d, %zu parts", number, n);
    random_amounts (&state, n, order, given);
    for (size_t i = 0; i < n; i++)
      parts[i] = stated ((int) order[i], basis, given[i]);
    const struct analysis *raw = make (n, parts);
    NEED (raw != NULL);
    const struct analysis *once = analysis_normalised (arena, raw, &treatment, &fault);
    NEED (once != NULL);
    NEAR (treatment.total_after, 1, 1e-15 * (double) n);
    const struct analysis *twice = analysis_normalised (arena, once, &treatment, &fault);
    NEED (twice != NULL);
    NEAR (treatment.factor, 1, 0);
    for (size_t i = 0; i < n; i++)
      if (!NEAR (twice->parts[i].amount, once->parts[i].amount, 0))
        return;
    const struct analysis *into
      = analysis_normalised_into (arena, once, &sample[order[0]], &treatment, &fault);
    NEED (into != NULL);
    NEAR (treatment.added, 0, 0);
  }
}

static void
nothing_to_normalise (void)
{
  start ();
  const struct stated_part parts[] = { mole_percent (CH4, 0) };
  const struct analysis *a = make (1, parts);
  NEED (a != NULL);
  CHECK (analysis_normalised (arena, a, &treatment, &fault) == NULL);
  SAME_INT (fault.kind, MESSAGE_AMOUNT_RANGE);
}

static void
balance_component (void)
{
  start ();
  const struct stated_part parts[] = { mass_percent (C3H8, 90), mass_percent (C3H6, 7) };
  const struct analysis *a = make (2, parts);
  NEED (a != NULL);
  const struct analysis *into
    = analysis_normalised_into (arena, a, &sample[C4H10], &treatment, &fault);
  NEED (into != NULL && into->count == 3);
  NEAR (treatment.added, 0.03, 1e-14);
  NEAR (amount (into, C4H10) * 58.124e-3, 0.03, 1e-14);
  NEAR (analysis_total (into), 1, 1e-15);
  NEAR (amount (into, C3H6), amount (a, C3H6), 0);

  const struct stated_part much[] = { mole_percent (CH4, 99), mole_percent (N2, 3) };
  a = make (2, much);
  NEED (a != NULL);
  into = analysis_normalised_into (arena, a, &sample[N2], &treatment, &fault);
  NEED (into != NULL);
  NEAR (amount (into, N2), 0.01, 1e-13);
  NEAR (treatment.added, -0.02, 1e-13);
  struct treatment untouched = { .factor = 7 };
  CHECK (analysis_normalised_into (arena, a, &sample[CO2], &untouched, &fault) == NULL);
  SAME_INT (fault.kind, MESSAGE_NEGATIVE_PART);
  SAME_TEXT (fault.fact[0], "CO2");
  SAME_TEXT (fault.fact[1], "the parts beside it add up to 102 mol%");
  NEAR (untouched.factor, 7, 0);
}

static void
one_species_away (void)
{
  start ();
  const struct analysis *raw = synthesis_gas ();
  NEED (raw != NULL);
  const struct analysis *left = analysis_without (arena, raw, &sample[CO2], &treatment, &fault);
  NEED (left != NULL && left->count == 4);
  NEAR (treatment.removed, 0.196, 1e-15);
  NEAR (treatment.total_after, 0.7977, 1e-15);
  NEAR (amount (left, H2), 0.412, 2e-16);
  CHECK (isnan (amount (left, CO2)));
  CHECK (analysis_without (arena, raw, &sample[H2S], &treatment, &fault) == NULL);
  SAME_INT (fault.kind, MESSAGE_NO_SUCH_PART);
  SAME_TEXT (fault.fact[0], "H2S");
}

static const struct composition *
air_of (size_t n, const struct part parts[])
{
  return composition_make (arena, n, parts, &fault);
}

/* A landfill gas with air in it; nitrogen stands for nitrogen and argon.  Worked by hand.  */
static void
air_by_oxygen_or_nitrogen (void)
{
  start ();
  const struct part air_parts[] = {
    { &sample[O2], 20.946 }, { &sample[N2], 79.018 }, { &sample[CO2], 0.036 }
  };
  const struct stated_part parts[] = {
    mole_percent (CH4, 46.2), mole_percent (CO2, 35.1), mole_percent (O2, 3.1),
    mole_percent (N2, 15.6)
  };
  const struct species *oxygen[] = { &sample[O2] }, *nitrogen[] = { &sample[N2] };
  const struct composition *air = air_of (3, air_parts);
  const struct analysis *raw = make (4, parts);
  NEED (air != NULL && raw != NULL);
  const struct analysis *left
    = without_gas (raw, air, 1, oxygen);
  NEED (left != NULL);
  NEAR (treatment.removed, 0.148, 1e-5);
  NEAR (treatment.gas, 0.148, 1e-5);
  SAME_TEXT (treatment.tracer, "O2");
  SAME_TEXT (treatment.skipped, NULL);
  NEAR (treatment.total_after, 1 - treatment.removed, 1e-14);
  left = analysis_normalised (arena, left, &treatment, &fault);
  NEED (left != NULL);
  NEAR (percent (left, CH4), 54.2253, 1e-5);
  NEAR (percent (left, CO2), 41.1909, 1e-5);
  NEAR (percent (left, N2), 4.58376, 1e-5);
  CHECK (isnan (amount (left, O2)));
  /* All the nitrogen as air would need 4.13523 of oxygen, 1.33395 times what there is.  */
  CHECK (without_gas (raw, air, 1, nitrogen) == NULL);
  SAME_INT (fault.kind, MESSAGE_NEGATIVE_PART);
  SAME_TEXT (fault.fact[0], "O2");
  SAME_TEXT (fault.fact[1], "1.33395 times what there is of it would go with the tracer; take "
             "another tracer");
  /* The oxygen may have been used up: all of it goes, and what is missing is told.  */
  struct removal all = { air, 1, nitrogen, &sample[O2] };
  fault_init (&fault, arena);
  left = analysis_without_gas (arena, raw, &all, &treatment, &fault);
  NEED (left != NULL);
  NEAR (treatment.gas, 0.197423, 1e-5);
  SAME_TEXT (treatment.consumed, "O2");
  NEAR (treatment.brings, 0.0413523, 1e-5);
  NEAR (treatment.holds, 0.031, 1e-14);
  left = analysis_normalised (arena, left, &treatment, &fault);
  NEED (left != NULL);
  NEAR (percent (left, CH4), 56.8315, 1e-5);
  NEAR (percent (left, CO2), 43.1685, 1e-5);
  CHECK (isnan (amount (left, O2)));
  /* Free of air and oxygen.  */
  left = analysis_without (arena, raw, &sample[O2], &treatment, &fault);
  NEED (left != NULL);
  left = without_gas (left, air, 1, nitrogen);
  NEED (left != NULL);
  SAME_TEXT (treatment.skipped, "O2");
  left = analysis_normalised (arena, left, &treatment, &fault);
  NEED (left != NULL);
  NEAR (percent (left, CH4), 56.8315, 1e-5);
  NEAR (percent (left, CO2), 43.1685, 1e-5);
}

/* Air with its argon: what the list does not hold is named; unresolved nitrogen and argon together
   set as much as nitrogen that includes argon (15.6/79.018 of air).                             */
static void
tracers_together (void)
{
  start ();
  const struct part air_parts[] = {
    { &sample[N2], 78.084 }, { &sample[O2], 20.946 }, { &sample[Ar], 0.934 },
    { &sample[CO2], 0.036 }
  };
  const struct stated_part parts[] = {
    mole_percent (CH4, 80), mole_percent (N2, 15.6), mole_percent (O2, 4.4)
  };
  const struct species *oxygen[] = { &sample[O2] };
  const struct species *inert[] = { &sample[N2], &sample[Ar] };
  const struct species *foreign[] = { &sample[CH4] }, *absent[] = { &sample[Ar] };
  const struct composition *air = air_of (4, air_parts);
  const struct analysis *raw = make (3, parts);
  NEED (air != NULL && raw != NULL);
  const struct analysis *left
    = without_gas (raw, air, 2, inert);
  NEED (left != NULL);
  SAME_TEXT (treatment.tracer, "N2, Ar");
  SAME_TEXT (treatment.skipped, "CO2");
  NEAR (amount (left, O2), 0.044 - 0.156 / 0.79018 * 0.20946, 1e-13);
  CHECK (isnan (amount (left, N2)));
  CHECK (without_gas (raw, air, 1, oxygen) == NULL);
  SAME_INT (fault.kind, MESSAGE_NEGATIVE_PART);
  SAME_TEXT (fault.fact[0], "N2");
  fault_init (&fault, arena);
  CHECK (without_gas (raw, air, 1, foreign) == NULL);
  SAME_INT (fault.kind, MESSAGE_NO_SUCH_PART);
  fault_init (&fault, arena);
  CHECK (without_gas (raw, air, 1, absent) == NULL);
  SAME_INT (fault.kind, MESSAGE_NO_SUCH_PART);
  SAME_TEXT (fault.fact[0], "Ar");
}

/* Air is put into a gas and taken out again, for a whole by amount and one by mass.  */
static void
air_in_and_out (void)
{
  for (int by_mass = 0; by_mass < 2; by_mass++) {
    start ();
    test_about ("%s", by_mass != 0 ? "by mass" : "by amount");
    enum amount_basis basis = by_mass != 0 ? AMOUNT_MASS_FRACTION : AMOUNT_MOLE_FRACTION;
    const struct part air_parts[] = { { &sample[N2], 0.79 }, { &sample[O2], 0.21 } };
    const struct species *oxygen[] = { &sample[O2] };
    const struct composition *air = air_of (2, air_parts);
    NEED (air != NULL);
    const struct stated_part parts[] = {
      stated (CH4, basis, 0.6), stated (N2, basis, 0.1),
      { .gas = air, .basis = basis, .amount = 0.3 }
    };
    const struct analysis *raw = make (3, parts);
    NEED (raw != NULL);
    const struct analysis *left
      = without_gas (raw, air, 1, oxygen);
    NEED (left != NULL && left->count == 2);
    NEAR (treatment.removed, 0.3, 1e-14);
    NEAR (treatment.total_after, 0.7, 1e-14);
    double scale = by_mass != 0 ? 1 / 28.014e-3 : 1;
    NEAR (amount (left, N2), 0.1 * scale, 1e-13);
  }
}

/* A waste burner's stack: CO 41.0 mg/Nm3 (as mol/mol: c R T/(M p)), O2 7.80, water 15.2 % of the
   wet gas.  Dry is wet/(1 - y), worked by hand.                                                 */
static void
stack_gas_dried (void)
{
  start ();
  double molar_volume = 8.31446261815324 * 273.15 / 101325;
  double wet_CO = 41e-6 / 28.010e-3 * molar_volume;
  const struct stated_part parts[] = {
    rest_of (N2), mole_percent (O2, 7.80), stated (CO, AMOUNT_MOLAR_CONCENTRATION, wet_CO),
    mole_percent (H2O, 15.2)
  };
  const struct analysis *wet = make (4, parts);
  NEED (wet != NULL);
  const struct analysis *dry = analysis_dried (arena, wet, &sample[H2O], &treatment, &fault);
  NEED (dry != NULL && dry->count == 3);
  CHECK (dry->dry && !wet->dry);
  NEAR (100 * amount (dry, O2), 9.19811, 1e-5);
  NEAR (1e6 * amount (dry, CO), 38.6895, 3e-5);
  NEAR (amount (dry, CO) * 28.010 / molar_volume * 1e3, 48.3491, 1e-5);
  NEAR (treatment.removed, 0.152, 1e-15);
  NEAR (treatment.factor, 1 / 0.848, 1e-14);
  NEAR (analysis_total (dry), 1, 1e-15);
}

static void
dried_open_or_without_water (void)
{
  start ();
  const struct stated_part open[] = { mole_percent (CH4, 85), mole_percent (H2O, 5) };
  const struct analysis *a = make (2, open);
  NEED (a != NULL);
  const struct analysis *dry = analysis_dried (arena, a, &sample[H2O], &treatment, &fault);
  NEED (dry != NULL);
  NEAR (analysis_total (dry), 0.85, 1e-15);
  NEAR (treatment.factor, 1, 0);
  NEAR (treatment.removed, 0.05, 1e-15);

  const struct stated_part without[] = { mole_percent (CH4, 99.7) };
  a = make (1, without);
  NEED (a != NULL);
  dry = analysis_dried (arena, a, &sample[H2O], &treatment, &fault);
  NEED (dry != NULL && dry->count == 1);
  CHECK (dry->dry);
  NEAR (analysis_total (dry), 0.997, 1e-15);
  NEAR (treatment.factor, 1, 0);
  NEAR (treatment.removed, 0, 0);

  const struct stated_part by_mass[] = { mass_percent (CH4, 89.7), mass_percent (H2O, 10) };
  a = make (2, by_mass);
  NEED (a != NULL);
  dry = analysis_dried (arena, a, &sample[H2O], &treatment, &fault);
  NEED (dry != NULL);
  NEAR (analysis_total (dry), 1, 1e-15);
  NEAR (treatment.removed, 0.1, 1e-15);

  const struct stated_part water[] = { mole_percent (H2O, 100) };
  a = make (1, water);
  NEED (a != NULL);
  CHECK (analysis_dried (arena, a, &sample[H2O], &treatment, &fault) == NULL);
  SAME_INT (fault.kind, MESSAGE_ONLY_WATER);
}

static void
closed_within_the_tolerance (void)
{
  const struct { double total, tolerance; bool closed; } cases[] = {
    { 99.5, 0.005, true }, { 100.5, 0.005, true }, { 99.49, 0.005, false },
    { 100.51, 0.005, false }, { 99.49, 0.01, true }, { 100, 0, true }, { 100.001, 0, false }
  };
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    start ();
    test_about ("%g within %g", cases[i].total, cases[i].tolerance);
    const struct stated_part parts[] = {
      mole_percent (CH4, cases[i].total - 40), mole_percent (CO2, 40)
    };
    double scaled = -1;
    const struct analysis *a = make (2, parts);
    NEED (a != NULL);
    const struct composition *c
      = analysis_close (arena, a, cases[i].tolerance, &scaled, &fault);
    CHECK ((c != NULL) == cases[i].closed);
    if (c != NULL)
      NEAR (scaled, 100 / cases[i].total, 1e-14);
    else
      SAME_INT (fault.kind, MESSAGE_GAS_OPEN);
    CHECK (c != NULL || scaled < 0);
  }
}

static void
of_a_composition (void)
{
  start ();
  const struct part parts[] = { { &sample[CH4], 3 }, { &sample[CO2], 1 } };
  const struct composition *c = composition_make (arena, 2, parts, &fault);
  NEED (c != NULL);
  const struct analysis *a = analysis_of_composition (arena, c);
  SAME_INT (a->whole, WHOLE_MOLE);
  NEAR (analysis_total (a), 1, 0);
  NEAR (amount (a, CO2), 0.25, 0);
}

static const struct test_case cases[] = {
  { "scaled or nitrogen", scaled_or_nitrogen },
  { "shares by mass", shares_by_mass },
  { "rest by mass", rest_by_mass },
  { "rest by amount", rest_by_amount },
  { "mixed bases with rest", mixed_bases_with_rest },
  { "mixed bases off by a factor", mixed_bases_off_by_a_factor },
  { "a molar trace beside masses", a_molar_trace_beside_masses },
  { "amounts and masses", amounts_and_masses },
  { "a gas as a part", a_gas_as_a_part },
  { "faults of a list", faults_of_a_list },
  { "normalised twice", normalised_twice },
  { "nothing to normalise", nothing_to_normalise },
  { "balance component", balance_component },
  { "one species away", one_species_away },
  { "air by oxygen or nitrogen", air_by_oxygen_or_nitrogen },
  { "tracers together", tracers_together },
  { "air in and out", air_in_and_out },
  { "stack gas dried", stack_gas_dried },
  { "dried, open or without water", dried_open_or_without_water },
  { "closed within the tolerance", closed_within_the_tolerance },
  { "of a composition", of_a_composition },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  arena_destroy (arena);
  return status;
}
