/* The equations of reference at random states of random mixtures of their components, and against
   derivatives worked out by differences.                                                        */
#include "config.h"

#include <math.h>
#include <stdint.h>

#include "eos/caloric.h"
#include "eos/eos.h"
#include "fluids.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"

enum { STATES = 20000, SCAN = 60, SEED = 2008 };

static const struct equation *const GERG = &equation_gerg_2008;

static const struct species *
random_species (uint64_t *seed)
{
  for (;;) {
    const struct species *s = fluid_at ((size_t) ((double) fluid_count () * fluid_chance (seed)));
    const char *lacking;
    struct composition pure = { .count = 1, .species = &s, .fraction = (const double[]) { 1 } };

    if (GERG->covers (&pure, &lacking)) {
      return s;
    }
  }
}

/* Up to 21 components; few as likely as many.  */
static const struct composition *
random_gas (struct arena *arena, uint64_t *seed)
{
  struct part parts[21];
  struct fault fault;
  const size_t n = 1 + (size_t) (21 * pow (fluid_chance (seed), 2));

  for (size_t i = 0; i < n; i++) {
    parts[i].species = random_species (seed);
    parts[i].amount = pow (fluid_chance (seed), 4) + 1e-9;
  }
  fault_init (&fault, arena);
  return composition_make (arena, n, parts, &fault);
}

/* No isotherm falls between no density and that of a gas: it is not beyond a loop.  */
static void
check_gas (const struct equation *equation, const void *isotherm, double rho)
{
  for (int i = 1; i <= SCAN; i++) {
    const struct residual r = equation->residual (isotherm, rho * i / SCAN);
    if (!CHECK (1 + 2 * r.a1 + r.a2 > 0)) {
      return;
    }
  }
}

struct tally { int gases, liquids, ends, splits; };

static void
check_state (struct arena *arena, const struct equation *equation, uint64_t *seed,
             struct tally *tally)
{
  _Alignas (max_align_t) unsigned char isotherm[EOS_ISOTHERM_SIZE];
  const struct composition *gas = random_gas (arena, seed);
  const double T = 60 + 640 * fluid_chance (seed);
  const double p = 70e6 * pow (1e-5, fluid_chance (seed));
  struct eos_state state = { .Z = -1 };
  void *mixture = arena_alloc (arena, 1, equation->mixture_size (gas->count));
  struct fault fault;

  test_about ("%s, seed %d: %zu species (first %s), %.17g K, %.17g Pa", equation->name, SEED,
              gas->count, gas->species[0]->key, T, p);
  fault_init (&fault, arena);
  equation->prepare (gas, mixture);
  if (!eos_solve (equation, gas, T, p, &state, &fault)) {
    if (fault.kind == MESSAGE_STATE_LIQUID) {
      tally->liquids++;
    } else {
      SAME_INT (fault.kind, MESSAGE_NOT_CONVERGED);
      SAME_INT (equation->range (mixture, T, p), EOS_RANGE_OUTSIDE);
      tally->ends++;
    }
    return;
  }
  tally->gases++;
  tally->splits += state.may_condense;
  equation->set_isotherm (mixture, T, isotherm);
  CHECK (isfinite (state.Z) && state.Z > 0 && isfinite (state.density));
  NEAR (state.Z * state.density * equation->gas_constant * T, p, 1e-14);
  NEAR (1 + equation->residual (isotherm, state.density).a1, state.Z, 1e-10);
  check_gas (equation, isotherm, state.density);
}

/* Every state has an answer or is a liquid.  Only far outside its range, where an isotherm turns
   down before it reaches the pressure, AGA8 DETAIL has neither.                                 */
static void
random_states (void)
{
  static const struct equation *const both[] = { &equation_gerg_2008, &equation_aga8_detail };
  struct arena *arena = arena_create ();

  for (size_t e = 0; e < 2; e++) {
    struct tally tally = { 0, 0, 0, 0 };
    uint64_t seed = SEED;

    for (int i = 0; i < STATES; i++) {
      arena_reset (arena);
      check_state (arena, both[e], &seed, &tally);
    }
    test_about ("%s: %d gases, %d may condense, %d liquids, %d without an end", both[e]->name,
                tally.gases, tally.splits, tally.liquids, tally.ends);
    CHECK (tally.ends < STATES / 1000);
    CHECK (tally.gases > STATES / 2 && tally.liquids > STATES / 50);
  }
  arena_destroy (arena);
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "random states", random_states },
    { NULL, NULL }
  };

  return test_main (argc, argv, cases);
}
