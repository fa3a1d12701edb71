/* The equations of state over the whole table of species: random states of random mixtures.  */
#include "config.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "eos/eos.h"
#include "fluids.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/constants.h"

enum { STATES = 20000, SEED = 1976 };

static const struct equation *const PR = &equation_peng_robinson;

static const struct species *
random_species (const struct species_table *table, uint64_t *seed)
{
  const double n = (double) species_table_size (table);

  for (;;) {
    const struct species *s = species_table_at (table, (size_t) (n * fluid_chance (seed)));
    if (isfinite (s->critical_temperature) && isfinite (s->critical_pressure)
        && isfinite (s->acentric_factor)) {
      return s;
    }
  }
}

static const struct composition *
random_gas (struct arena *arena, const struct species_table *table, uint64_t *seed)
{
  struct part parts[6];
  struct fault fault;
  const size_t n = 1 + (size_t) (6 * fluid_chance (seed));

  for (size_t i = 0; i < n; i++) {
    parts[i].species = random_species (table, seed);
    parts[i].amount = pow (fluid_chance (seed), 3) + 1e-9;
  }
  fault_init (&fault, arena);
  return composition_make (arena, n, parts, &fault);
}

/* p of the equation at RHO over P, less one, and how a change of rho moves it.  */
static double
pressure_off (const void *isotherm, double T, double p, double rho, double *slope)
{
  const struct residual r = PR->residual (isotherm, rho);
  const double p_ideal = rho * GAS_CONSTANT * T;

  *slope = p_ideal * (1 + 2 * r.a1 + r.a2) / p;
  return p_ideal * (1 + r.a1) / p - 1;
}

/* The gas root gives p to 1e-12.  A liquid hardly gives way, so that its p says little: there the
   density is right to 1e-12.                                                                   */
static void
check_roots (struct arena *arena, const struct composition *gas, double T, double p)
{
  _Alignas (max_align_t) unsigned char isotherm[EOS_ISOTHERM_SIZE];
  void *mixture = arena_alloc (arena, 1, PR->mixture_size (gas->count));
  struct density_roots roots;
  double slope;

  PR->prepare (gas, mixture);
  PR->set_isotherm (mixture, T, isotherm);
  roots = PR->roots (isotherm, p);
  CHECK (roots.gas > 0 || roots.dense > 0);
  if (roots.gas > 0) {
    NEAR (pressure_off (isotherm, T, p, roots.gas, &slope), 0, 1e-12);
    CHECK (slope > 0);
  }
  if (roots.dense > 0) {
    const double off = pressure_off (isotherm, T, p, roots.dense, &slope);
    CHECK (slope > 0);
    NEAR (off / slope, 0, 1e-12);
    CHECK (roots.dense > roots.gas);
    CHECK (roots.dense * 0.999 < PR->densest (isotherm));
  }
}

static void
random_states (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct species_table *table;
  uint64_t seed = SEED;
  int gases = 0, liquids = 0;

  fault_init (&fault, arena);
  table = species_table_create (NULL, &fault);
  NEED (table != NULL);
  for (int i = 0; i < STATES; i++) {
    const struct composition *gas;
    const double T = 200 + 600 * fluid_chance (&seed);
    const double p = 1e3 * pow (2e4, fluid_chance (&seed));
    struct eos_state state = { .Z = -1 };

    arena_reset (arena);
    fault_init (&fault, arena);
    gas = random_gas (arena, table, &seed);
    test_about ("state %d from seed %d: %zu species (first %s), %.17g K, %.17g Pa", i, SEED,
                gas->count, gas->species[0]->key, T, p);
    check_roots (arena, gas, T, p);
    if (eos_solve (PR, gas, T, p, &state, &fault)) {
      CHECK (isfinite (state.Z) && state.Z > 0 && isfinite (state.density));
      NEAR (state.Z * state.density * GAS_CONSTANT * T, p, 1e-14);
      gases++;
    } else {
      SAME_INT (fault.kind, MESSAGE_STATE_LIQUID);
      liquids++;
    }
  }
  CHECK (gases > STATES / 2 && liquids > STATES / 50);
  species_table_destroy (table);
  arena_destroy (arena);
}

/* The figures the other suites of this layer use are those of the table.  */
static void
fluids_as_in_the_table (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct species_table *table;

  fault_init (&fault, arena);
  table = species_table_create (NULL, &fault);
  NEED (table != NULL);
  for (size_t i = 0; i < fluid_count (); i++) {
    const struct species *have = fluid_at (i), *want = NULL;
    const char *candidates;
    test_about ("%s", have->key);
    if (CHECK (species_find (table, have->key, strlen (have->key), &want, &candidates)
               == SPECIES_KEY)) {
      NEAR (have->critical_temperature, want->critical_temperature, 1e-15);
      NEAR (have->critical_pressure, want->critical_pressure, 1e-15);
      NEAR (have->acentric_factor, want->acentric_factor, 1e-15);
    }
  }
  species_table_destroy (table);
  arena_destroy (arena);
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "fluids as in the table", fluids_as_in_the_table },
    { "random states", random_states },
    { NULL, NULL }
  };

  return test_main (argc, argv, cases);
}
