/* Choice of an equation and solving for the density of the gas.  */
#include "config.h"

#include <math.h>
#include <stdint.h>

#include "eos/eos.h"
#include "fluids.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"

static const struct equation *const PR = &equation_peng_robinson;

/* A species known by its molar mass alone, and one whose acentric factor is not known.  */
static const struct species bare = {
  .key = "C7H14O2", .molar_mass = 0.13019, .critical_temperature = (double) NAN,
  .critical_pressure = (double) NAN, .acentric_factor = (double) NAN
};
static const struct species half = {
  .key = "half", .molar_mass = 0.05, .critical_temperature = 400, .critical_pressure = 4e6,
  .acentric_factor = (double) NAN
};

static void
names (void)
{
  SAME_TEXT (gas_model_name (GAS_MODEL_AUTO), "auto");
  SAME_TEXT (gas_model_name (GAS_MODEL_IDEAL), "ideal");
  SAME_TEXT (gas_model_name (GAS_MODEL_PENG_ROBINSON), "Peng-Robinson");
  SAME_TEXT (gas_model_name (GAS_MODEL_GERG_2008), "GERG-2008");
  SAME_TEXT (gas_model_name (GAS_MODEL_AGA8_DETAIL), "AGA8-DETAIL");
  for (int i = 0; i < GAS_MODEL_COUNT; i++) {
    const struct equation *equation = gas_model_equation ((enum gas_model) i);
    if (equation != NULL) {
      SAME_TEXT (equation->name, gas_model_name ((enum gas_model) i));
      CHECK (equation->source[0] != '\0');
    }
  }
}

/* Chooses for methane with a trace of ODD (null: none).  */
static const struct equation *
choice (struct arena *arena, enum gas_model model, const struct species *odd,
        const char **lacking, struct fault *fault)
{
  const struct part parts[] = { { fluid_find ("CH4"), 1 }, { odd, 1e-3 } };
  const struct composition *gas;

  fault_init (fault, arena);
  gas = composition_make (arena, odd != NULL ? 2 : 1, parts, fault);
  return gas != NULL ? equation_choose (model, gas, lacking, fault) : NULL;
}

static void
choosing (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  const char *lacking = "";

  CHECK (choice (arena, GAS_MODEL_AUTO, NULL, &lacking, &fault) == PR);
  SAME_TEXT (lacking, NULL);
  CHECK (choice (arena, GAS_MODEL_AUTO, &bare, &lacking, &fault) == &equation_ideal);
  SAME_TEXT (lacking, "C7H14O2");
  CHECK (choice (arena, GAS_MODEL_AUTO, &half, &lacking, &fault) == &equation_ideal);
  SAME_TEXT (lacking, "half");
  CHECK (choice (arena, GAS_MODEL_IDEAL, &bare, &lacking, &fault) == &equation_ideal);
  SAME_TEXT (lacking, NULL);
  CHECK (choice (arena, GAS_MODEL_PENG_ROBINSON, NULL, &lacking, &fault) == PR);
  SAME_INT (fault.kind, MESSAGE_NONE);

  CHECK (choice (arena, GAS_MODEL_PENG_ROBINSON, &half, &lacking, &fault) == NULL);
  SAME_INT (fault.kind, MESSAGE_MODEL_LACKS);
  SAME_TEXT (fault.fact[0], "Peng-Robinson");
  SAME_TEXT (fault.fact[1], "half");
  CHECK (choice (arena, GAS_MODEL_GERG_2008, NULL, &lacking, &fault) == &equation_gerg_2008);
  CHECK (choice (arena, GAS_MODEL_AGA8_DETAIL, NULL, &lacking, &fault) == &equation_aga8_detail);
  arena_destroy (arena);
}

/* Molar volume of the ideal gas at 273.15 K and 101.325 kPa: 22.41396954 L/mol (CODATA 2018),
   at 100 kPa: 22.71095464 L/mol.                                                               */
static void
ideal_gas (void)
{
  struct arena *arena = arena_create ();
  const struct composition *gas = fluid_mixture (arena, "CO2=0.5;H2O=0.5");
  struct eos_state state;
  struct fault fault;

  fault_init (&fault, arena);
  CHECK (eos_solve (&equation_ideal, gas, 273.15, 101325, &state, &fault));
  NEAR (state.Z, 1, 1e-15);
  NEAR (1 / state.density, 22.41396954e-3, 1e-9);
  CHECK (!state.may_condense);
  CHECK (state.equation == &equation_ideal);
  CHECK (eos_solve (&equation_ideal, gas, 273.15, 100000, &state, &fault));
  NEAR (1 / state.density, 22.71095464e-3, 1e-9);
  arena_destroy (arena);
}

static void
refusals (void)
{
  static const struct { double T, p; int kind; } rows[] = {
    { 0, 1e5, MESSAGE_RANGE }, { -1, 1e5, MESSAGE_RANGE }, { (double) NAN, 1e5, MESSAGE_RANGE },
    { HUGE_VAL, 1e5, MESSAGE_RANGE }, { 300, 0, MESSAGE_RANGE }, { 300, -1e5, MESSAGE_RANGE },
    { 300, (double) NAN, MESSAGE_RANGE }, { 300, HUGE_VAL, MESSAGE_RANGE },
    { 300, 1e300, MESSAGE_NOT_FINITE }, { 1e-300, 1e5, MESSAGE_NOT_FINITE },
    { 1e300, 1e300, MESSAGE_NONE }, { 1e308, 1e-300, MESSAGE_NOT_FINITE },
    { 300, 1e-310, MESSAGE_NOT_FINITE },
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct arena *arena = arena_create ();
    struct eos_state state = { .Z = -1 };
    struct fault fault;
    const bool good = rows[i].kind == MESSAGE_NONE;

    fault_init (&fault, arena);
    test_about ("%g K, %g Pa", rows[i].T, rows[i].p);
    SAME_INT (eos_solve (PR, composition_pure (arena, fluid_find ("CH4")), rows[i].T, rows[i].p,
                         &state, &fault), good);
    SAME_INT (fault.kind, rows[i].kind);
    CHECK (good ? isfinite (state.Z) && state.Z > 0 : !(state.Z > -1));
    arena_destroy (arena);
  }
}

static void
order_of_parts (void)
{
  static const char *const same[] = {
    "CH4=0.58;CO2=0.36;N2=0.01;H2O=0.05", "H2O=0.05;N2=0.01;CO2=0.36;CH4=0.58",
    "N2=1;CO2=36;CH4=58;H2O=5", "CH4=0.29;CO2=0.36;N2=0.01;H2O=0.05;CH4=0.29"
  };
  struct arena *arena = arena_create ();
  struct eos_state first, state;
  struct fault fault;

  fault_init (&fault, arena);
  CHECK (eos_solve (PR, fluid_mixture (arena, same[0]), 320, 2e6, &first, &fault));
  for (size_t i = 1; i < sizeof same / sizeof same[0]; i++) {
    test_about ("%s", same[i]);
    CHECK (eos_solve (PR, fluid_mixture (arena, same[i]), 320, 2e6, &state, &fault));
    NEAR (state.Z, first.Z, 1e-14);
  }
  arena_destroy (arena);
}

/* A prepared mixture gives what an unprepared one gives, for any T and p, and so does a mixture
   too large for the stack: a gas parted into many species that are all the same.               */
static void
prepared_mixtures (void)
{
  enum { MANY = 1000 };
  struct arena *arena = arena_create ();
  const struct composition *gas = fluid_mixture (arena, "CH4=0.6;CO2=0.39;H2S=0.01");
  const struct composition *pure = composition_pure (arena, fluid_find ("CO2"));
  const struct eos_mixture *mixture = eos_prepare (arena, PR, gas);
  struct species *species = ARENA_ARRAY (arena, MANY, struct species);
  struct part *parts = ARENA_ARRAY (arena, MANY, struct part);
  const struct composition *large;
  struct eos_state one, other;
  struct fault fault;

  fault_init (&fault, arena);
  for (double T = 250; T < 500; T += 50) {
    for (double p = 1e4; p < 2e7; p *= 3) {
      test_about ("%g K, %g Pa", T, p);
      CHECK (eos_solve (PR, gas, T, p, &one, &fault));
      CHECK (eos_solve_prepared (mixture, T, p, &other, &fault));
      NEAR (other.Z, one.Z, 0);
      SAME_INT (other.may_condense, one.may_condense);
    }
  }
  for (size_t i = 0; i < MANY; i++) {
    species[i] = *fluid_find ("CO2");
    parts[i] = (struct part) { &species[i], 1 };
  }
  large = composition_make (arena, MANY, parts, &fault);
  NEED (large != NULL && large->count == MANY);
  CHECK (eos_solve (PR, pure, 310, 5e6, &one, &fault));
  CHECK (eos_solve (PR, large, 310, 5e6, &other, &fault));
  NEAR (other.Z, one.Z, 1e-12);
  arena_destroy (arena);
}

/* A mixture of one to five fluids at random.  */
static const struct composition *
random_gas (struct arena *arena, uint64_t *seed)
{
  struct part parts[5];
  struct fault fault;
  const size_t n = 1 + (size_t) (5 * fluid_chance (seed));

  for (size_t i = 0; i < n; i++) {
    parts[i].species = fluid_at ((size_t) ((double) fluid_count () * fluid_chance (seed)));
    parts[i].amount = fluid_chance (seed) + 1e-6;
  }
  fault_init (&fault, arena);
  return composition_make (arena, n, parts, &fault);
}

/* An equation without a closed form gets the same from the common iteration.  */
static void
common_iteration (void)
{
  struct equation open = equation_peng_robinson;
  struct arena *arena = arena_create ();
  uint64_t seed = 20260401;
  int liquids = 0, condensing = 0;

  open.roots = NULL;
  for (int i = 0; i < 5000; i++) {
    const struct composition *gas = random_gas (arena, &seed);
    const double T = 100 + 900 * fluid_chance (&seed), p = pow (10, 2 + 6 * fluid_chance (&seed));
    struct eos_state one = { .Z = -1 }, other = { .Z = -1 };
    struct fault closed, iterated;

    fault_init (&closed, arena);
    fault_init (&iterated, arena);
    test_about ("case %d from seed 20260401: %zu fluids (first %s), %.17g K, %.17g Pa", i,
                gas->count, gas->species[0]->key, T, p);
    SAME_INT (eos_solve (&open, gas, T, p, &other, &iterated),
              eos_solve (PR, gas, T, p, &one, &closed));
    SAME_INT (iterated.kind, closed.kind);
    NEAR (other.Z, one.Z, 1e-10);
    SAME_INT (other.may_condense, one.may_condense);
    liquids += closed.kind == MESSAGE_STATE_LIQUID;
    condensing += closed.kind == MESSAGE_NONE && one.may_condense;
    arena_reset (arena);
  }
  CHECK (liquids > 100 && condensing > 100);
  arena_destroy (arena);
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "names", names },
    { "choice", choosing },
    { "the ideal gas", ideal_gas },
    { "refusals", refusals },
    { "order of parts", order_of_parts },
    { "prepared mixtures", prepared_mixtures },
    { "the common iteration", common_iteration },
    { NULL, NULL }
  };

  return test_main (argc, argv, cases);
}
