/* The equations of reference at random states of random mixtures of their components, and against
   derivatives worked out by differences.                                                        */
#include "config.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "eos/caloric.h"
#include "eos/eos.h"
#include "eos/gerg.h"
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

/* A gas at T and p, and what an equation says of it.  */
struct point { double T, p, rho, s, h, u, w, molar_mass; };

static struct point
point_at (const struct eos_mixture *gas, struct arena *arena, double T, double p)
{
  struct eos_state state = { .Z = 0 };
  struct caloric c = { .Z = 0 };
  struct fault fault;

  fault_init (&fault, arena);
  CHECK (eos_solve_prepared (gas, T, p, &state, &fault));
  CHECK (eos_caloric (gas, T, state.density, &c));
  NEAR (c.pressure, p, 1e-12);
  NEAR (c.gibbs, c.enthalpy - T * c.entropy, 1e-14);
  NEAR (c.enthalpy, c.energy + p / state.density, 1e-12);
  return (struct point) { T, p, state.density, c.entropy, c.enthalpy, c.energy, c.speed_of_sound,
                          c.molar_mass };
}

/* Differences over twice a step of 1e-4 of T or p: off by its square, and by rounding over it.  */
static const double step = 1e-4, off = 2e-6;

/* Derivatives by T at p and by p at T:  (dh/dT)_p = cp,  (ds/dT)_p = cp/T,
   (ds/dp)_T = -(dv/dT)_p (Maxwell),  (dh/dp)_T = v - T (dv/dT)_p,  mu = -(dh/dp)_T/cp.          */
static void
check_at_pressure (const struct eos_mixture *gas, struct arena *arena, struct point at,
                   const struct caloric *c)
{
  const struct point hot = point_at (gas, arena, at.T * (1 + step), at.p);
  const struct point cold = point_at (gas, arena, at.T * (1 - step), at.p);
  const struct point high = point_at (gas, arena, at.T, at.p * (1 + step));
  const struct point low = point_at (gas, arena, at.T, at.p * (1 - step));
  const double dT = 2 * step * at.T, dp = 2 * step * at.p;
  const double v = 1 / at.rho;
  const double dv_dT = (1 / hot.rho - 1 / cold.rho) / dT;

  NEAR ((hot.h - cold.h) / dT, c->cp, off);
  NEAR ((hot.s - cold.s) / dT * at.T, c->cp, off);
  NEAR ((high.s - low.s) / dp, -dv_dT, off);
  NEAR ((high.h - low.h) / dp / v, 1 - at.T * dv_dT / v, 10 * off);
  NEAR (c->joule_thomson * c->cp / v, -(high.h - low.h) / dp / v, 10 * off);
}

/* Derivatives at constant density and entropy:  (du/dT)_v = cv,  w^2 = (dp/d rho)_s/M from
   (dp/d rho)_s = (dp/d rho)_T + T/(rho^2 cv) (dp/dT)_v^2,  kappa = w^2 M rho/p.                 */
static void
check_at_density (const struct eos_mixture *gas, struct point at, const struct caloric *c)
{
  struct caloric hot, cold, dense, thin;
  const double dT = 2 * step * at.T, drho = 2 * step * at.rho;
  double dp_dT, dp_drho;

  CHECK (eos_caloric (gas, at.T * (1 + step), at.rho, &hot));
  CHECK (eos_caloric (gas, at.T * (1 - step), at.rho, &cold));
  CHECK (eos_caloric (gas, at.T, at.rho * (1 + step), &dense));
  CHECK (eos_caloric (gas, at.T, at.rho * (1 - step), &thin));
  dp_dT = (hot.pressure - cold.pressure) / dT;
  dp_drho = (dense.pressure - thin.pressure) / drho;
  NEAR ((hot.energy - cold.energy) / dT, c->cv, off);
  NEAR (at.w * at.w * at.molar_mass,
        dp_drho + at.T * dp_dT * dp_dT / (at.rho * at.rho * c->cv), off);
  NEAR (c->isentropic_exponent, at.w * at.w * at.molar_mass * at.rho / at.p, 1e-12);
  NEAR (-(dense.entropy - thin.entropy) / drho * at.rho * at.rho, dp_dT, off);    /* Maxwell */
}

static void
check_gas_by_differences (struct arena *arena, const struct equation *equation, const char *gas)
{
  const struct eos_mixture *mixture = eos_prepare (arena, equation, fluid_mixture (arena, gas));

  for (double T = 400; T < 650; T += 60) {
    for (double p = 1e4; p < 3e7; p *= 7) {
      struct point at;
      struct caloric c;

      test_about ("%s, %s, %g K, %g Pa", equation->name, gas, T, p);
      at = point_at (mixture, arena, T, p);
      CHECK (eos_caloric (mixture, T, at.rho, &c));
      check_at_pressure (mixture, arena, at, &c);
      check_at_density (mixture, at, &c);
    }
  }
}

/* Not for pure hydrogen by DETAIL, whose terms for it, with T^13, run away above some 500 K.  */
static void
caloric_by_differences (void)
{
  static const char *const gases[] = {
    "CH4=0.906724;N2=0.031284;CO2=0.004676;C2H6=0.045279;C3H8=0.00828;nC4H10=0.0026;nC6H14=0.0012",
    "N2=0.25;CO2=0.15;H2=0.1;O2=0.1;CO=0.1;H2S=0.1;He=0.1;Ar=0.1", "H2=1", "CO2=1",
    "H2O=0.05;N2=0.7;CO2=0.1;O2=0.15", "CH4=0.7;iC4H10=0.1;nC4H10=0.1;nC10H22=0.01;H2=0.09",
  };
  struct arena *arena = arena_create ();

  for (size_t i = 0; i < sizeof gases / sizeof gases[0]; i++) {
    check_gas_by_differences (arena, &equation_gerg_2008, gases[i]);
    if (strcmp (gases[i], "H2=1") != 0) {
      check_gas_by_differences (arena, &equation_aga8_detail, gases[i]);
    }
  }
  arena_destroy (arena);
}

/* A mixture of which all but a trace is one component is that component; Z goes to 1.  */
static void
limits (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;

  fault_init (&fault, arena);
  for (size_t i = 0; i < fluid_count (); i++) {
    const bool is_methane = fluid_at (i) == fluid_find ("CH4");
    const struct part parts[] = { { fluid_at (i), 1 },
                                  { fluid_find (is_methane ? "N2" : "CH4"), 1e-11 } };
    const struct composition *pure = composition_pure (arena, fluid_at (i));
    struct eos_state one = { .Z = 0 }, other = { .Z = 0 };
    const char *lacking;

    test_about ("%s", fluid_at (i)->key);
    if (GERG->covers (pure, &lacking)) {
      CHECK (eos_solve (GERG, pure, 500, 1e5, &one, &fault));
      CHECK (eos_solve (GERG, composition_make (arena, 2, parts, &fault), 500, 1e5, &other,
                        &fault));
      NEAR (other.Z, one.Z, 1e-10);
      CHECK (eos_solve (GERG, pure, 500, 1e-3, &one, &fault));
      NEAR (one.Z, 1, 1e-9);
    }
  }
  arena_destroy (arena);
}

/* The order of components moves not the last digit.  */
static void
order (void)
{
  struct arena *arena = arena_create ();
  uint64_t seed = SEED;

  for (int i = 0; i < 200; i++) {
    const struct composition *gas = random_gas (arena, &seed);
    const double T = 300 + 300 * fluid_chance (&seed), p = 1e7 * fluid_chance (&seed);
    const struct species *species[21];
    double x[21];
    struct composition turned = *gas;
    struct eos_state one = { .Z = 0 }, other = { .Z = 0 };
    struct fault fault;

    for (size_t k = 0; k < gas->count; k++) {
      species[k] = gas->species[gas->count - 1 - k];
      x[k] = gas->fraction[gas->count - 1 - k];
    }
    turned.species = species;
    turned.fraction = x;
    fault_init (&fault, arena);
    SAME_INT (eos_solve (GERG, gas, T, p, &one, &fault),
              eos_solve (GERG, &turned, T, p, &other, &fault));
    NEAR (other.Z, one.Z, 1e-15);
  }
  arena_destroy (arena);
}

/* T and p over all that a number can be.  */
static void
extremes (void)
{
  static const struct equation *const both[] = { &equation_gerg_2008, &equation_aga8_detail };
  struct arena *arena = arena_create ();
  const struct composition *gas = fluid_mixture (arena, "CH4=0.5;H2=0.2;H2O=0.1;CO2=0.1;He=0.1");

  for (size_t e = 0; e < 2; e++) {
    for (double T = 1e-300; T < 1e300; T *= 1e20) {
      for (double p = 1e-300; p < 1e300; p *= 1e20) {
        struct eos_state state = { .Z = -1 };
        struct fault fault;

        test_about ("%s, %g K, %g Pa", both[e]->name, T, p);
        fault_init (&fault, arena);
        if (eos_solve (both[e], gas, T, p, &state, &fault)) {
          CHECK (isfinite (state.Z) && state.Z > 0 && isfinite (state.density));
          SAME_INT (state.range, EOS_RANGE_OUTSIDE);
        } else {
          CHECK (fault.kind == MESSAGE_NOT_CONVERGED || fault.kind == MESSAGE_NOT_FINITE
                 || fault.kind == MESSAGE_STATE_LIQUID);
        }
      }
    }
  }
  arena_destroy (arena);
}

/* Many states at once, by each kind of processor there is, against one after another; among them
   states below the critical temperature, liquids, and what is no state.                         */
static void
many_at_once (void)
{
  enum { MANY = 203 };
  double T[MANY], p[MANY], rho[MANY];
  const struct state_list states = { MANY, T, p };
  struct arena *arena = arena_create ();
  uint64_t seed = SEED;

  for (int k = 0; k < 40; k++) {
    const struct composition *gas = random_gas (arena, &seed);
    struct gerg_mixture *mixture = ARENA_NEW (arena, struct gerg_mixture);

    GERG->prepare (gas, mixture);
    for (int i = 0; i < MANY; i++) {
      T[i] = 90 + 600 * fluid_chance (&seed);
      p[i] = 70e6 * pow (1e-6, fluid_chance (&seed));
    }
    T[17] = 0;
    T[18] = -300;
    p[19] = -1;
    p[20] = (double) NAN;
    T[21] = HUGE_VAL;
    for (int lanes = HELMHOLTZ_LANES_PLAIN; lanes <= HELMHOLTZ_LANES_AVX512; lanes++) {
      helmholtz_densities (&mixture->residual, (enum helmholtz_lanes) lanes, &states, rho);
      for (int i = 0; i < MANY; i++) {
        struct eos_state one = { .density = 0 };
        struct fault fault;

        test_about ("gas %d, lanes %d, %g K, %g Pa", k, lanes, T[i], p[i]);
        fault_init (&fault, arena);
        if (eos_solve (GERG, gas, T[i], p[i], &one, &fault)) {
          NEAR (rho[i], one.density, 1e-14);
        } else if (fault.kind == MESSAGE_STATE_LIQUID) {
          CHECK (!(rho[i] > 0) && !(rho[i] < 0));
        } else {
          CHECK (i >= 17 && i <= 21);
          CHECK (isnan (rho[i]));
        }
      }
    }
  }
  arena_destroy (arena);
}

/* The same through the interface, for an equation that has no way of its own too.  */
static void
many_by_interface (void)
{
  static const struct equation *const three[] = { &equation_gerg_2008, &equation_aga8_detail,
                                                  &equation_peng_robinson };
  struct arena *arena = arena_create ();
  const struct composition *gas = fluid_mixture (arena, "CH4=0.9;CO2=0.06;H2=0.04");
  const double T[] = { 300, 150, 320, 280, 400 }, p[] = { 1e5, 1e6, 2e7, 5e6, 3e7 };
  double rho[5];

  for (size_t e = 0; e < 3; e++) {
    eos_densities (eos_prepare (arena, three[e], gas), &(struct state_list) { 5, T, p }, rho);
    for (int i = 0; i < 5; i++) {
      struct eos_state one = { .density = 0 };
      struct fault fault;

      test_about ("%s, %g K, %g Pa", three[e]->name, T[i], p[i]);
      fault_init (&fault, arena);
      CHECK (eos_solve (three[e], gas, T[i], p[i], &one, &fault));
      NEAR (rho[i], one.density, 1e-14);
    }
  }
  arena_destroy (arena);
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "random states", random_states },
    { "caloric properties by differences", caloric_by_differences },
    { "limits", limits },
    { "order of components", order },
    { "extremes", extremes },
    { "many at once", many_at_once },
    { "many by the interface", many_by_interface },
    { NULL, NULL }
  };

  return test_main (argc, argv, cases);
}
