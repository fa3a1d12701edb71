/* The Peng-Robinson equation against evaluations, limits and measured gases.  */
#include "config.h"

#include <math.h>
#include <stdlib.h>

#include "eos/eos.h"
#include "fluids.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/constants.h"

static const struct equation *const PR = &equation_peng_robinson;

/* One mixture at one T, down at the functions of the equation.  */
struct line {
  struct arena *arena;
  const struct composition *gas;
  _Alignas (max_align_t) unsigned char isotherm[EOS_ISOTHERM_SIZE];
};

static bool
line_init (struct line *line, const char *composition, double T)
{
  void *mixture;

  line->arena = arena_create ();
  line->gas = fluid_mixture (line->arena, composition);
  if (!CHECK (line->gas != NULL)) {
    return false;
  }
  mixture = arena_alloc (line->arena, 1, PR->mixture_size (line->gas->count));
  PR->prepare (line->gas, mixture);
  PR->set_isotherm (mixture, T, line->isotherm);
  return true;
}

static void
line_clear (struct line *line)
{
  arena_destroy (line->arena);
}

static void
check_state (char *cells[])
{
  enum { NAME, COMPOSITION, T_K, P_PA, Z, Z_DENSE, MAY_CONDENSE, A, A2, SOURCE };
  const double T = strtod (cells[T_K], NULL), p = strtod (cells[P_PA], NULL);
  struct eos_state state;
  struct fault fault;
  struct line line;

  if (line_init (&line, cells[COMPOSITION], T)) {
    const struct density_roots roots = PR->roots (line.isotherm, p);
    const struct residual r = PR->residual (line.isotherm, roots.gas);

    fault_init (&fault, line.arena);
    if (CHECK (eos_solve (PR, line.gas, T, p, &state, &fault))) {
      NEAR (state.Z, strtod (cells[Z], NULL), 1e-13);
      NEAR (state.density, p / (strtod (cells[Z], NULL) * GAS_CONSTANT * T), 1e-13);
      SAME_INT (state.may_condense, cells[MAY_CONDENSE][0] == 'y');
    }
    if (cells[Z_DENSE][0] != '\0') {
      NEAR (p / (roots.dense * GAS_CONSTANT * T), strtod (cells[Z_DENSE], NULL), 1e-12);
    } else {
      NEAR (roots.dense, 0, 0);
    }
    NEAR (r.a, strtod (cells[A], NULL), 1e-12);
    NEAR (1 + r.a1, strtod (cells[Z], NULL), 1e-13);
    NEAR (r.a2, strtod (cells[A2], NULL), 1e-11);
  }
  line_clear (&line);
}

static void
evaluated_states (void)
{
  CHECK (test_each_row ("numbers/peng_robinson.tsv", 10, check_state) == 25);
}

static void
check_real_gas (char *cells[])
{
  enum { NAME, COMPOSITION, T_K, P_PA, Z, REL, SOURCE };
  struct arena *arena = arena_create ();
  const struct composition *gas = fluid_mixture (arena, cells[COMPOSITION]);
  struct eos_state state;
  struct fault fault;

  fault_init (&fault, arena);
  if (CHECK (gas != NULL)
      && CHECK (eos_solve (PR, gas, strtod (cells[T_K], NULL), strtod (cells[P_PA], NULL),
                           &state, &fault))) {
    NEAR (state.Z, strtod (cells[Z], NULL), strtod (cells[REL], NULL));
  }
  arena_destroy (arena);
}

static void
real_gases (void)
{
  CHECK (test_each_row ("numbers/real_gas.tsv", 7, check_real_gas) == 33);
}

/* (Z - 1)/rho tends to B = b - a/(RT).  B in m3/mol: own evaluation of eqs. 9 to 12 and 17 to 22
   of the paper with 60-digit arithmetic.                                                       */
static void
second_virial (void)
{
  static const struct { const char *gas; double T, B; } rows[] = {
    { "CH4=1", 300, -5.42658705459469e-5 },
    { "CO2=1", 300, -1.337463649133387e-4 },
    { "H2=1", 298.15, 6.741785777957068e-6 },
    { "N2=1", 273.15, -1.737885561024924e-5 },
    { "H2O=1", 473.15, -1.745663391038903e-4 },
    { "CH4=0.6;CO2=0.4", 300, -8.284018817220194e-5 },
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct line line;
    test_about ("%s at %g K", rows[i].gas, rows[i].T);
    if (line_init (&line, rows[i].gas, rows[i].T)) {
      const double rho = 1e-6;
      const struct residual r = PR->residual (line.isotherm, rho);
      NEAR (r.a1 / rho, rows[i].B, 1e-8);
      NEAR (r.a / rho, rows[i].B, 1e-8);
    }
    line_clear (&line);
  }
}

static void
ideal_at_low_pressure (void)
{
  for (size_t i = 0; i < fluid_count (); i++) {
    struct arena *arena = arena_create ();
    const struct composition *gas = composition_pure (arena, fluid_at (i));
    struct eos_state state;
    struct fault fault;

    fault_init (&fault, arena);
    test_about ("%s", fluid_at (i)->key);
    for (double p = 1e-3; p > 1e-290; p *= 1e-7) {
      if (CHECK (eos_solve (PR, gas, 300, p, &state, &fault))) {
        NEAR (state.Z, 1, 1e-8);
        CHECK (!state.may_condense);
      }
    }
    arena_destroy (arena);
  }
}

/* a1 and a2 against central differences of a and a1.  */
static void
derivatives (void)
{
  static const char *const gases[] = { "CH4=1", "H2O=1", "He=1", "H2S=0.7;CO2=0.3" };

  for (size_t i = 0; i < sizeof gases / sizeof gases[0]; i++) {
    struct line line;
    if (line_init (&line, gases[i], 350)) {
      const double densest = PR->densest (line.isotherm);
      for (double rho = 0.05 * densest; rho < 0.95 * densest; rho += 0.1 * densest) {
        const double h = 1e-5 * rho;
        const struct residual r = PR->residual (line.isotherm, rho);
        const struct residual up = PR->residual (line.isotherm, rho + h);
        const struct residual down = PR->residual (line.isotherm, rho - h);

        test_about ("%s at 350 K, %g mol/m3", gases[i], rho);
        NEAR (rho * (up.a - down.a) / (2 * h), r.a1, 1e-7);
        /* rho d(a1)/d(rho) = a1 + a2 */
        NEAR (rho * (up.a1 - down.a1) / (2 * h), r.a1 + r.a2, 1e-7);
      }
    }
    line_clear (&line);
  }
}

/* At Tc and pc every pure fluid has Zc = 0.3074013 (exact: OMEGA_B/ETA_CRITICAL; the paper prints
   0.307).  Three roots meet there, so that a third of the digits is left.                       */
static void
critical_point (void)
{
  for (size_t i = 0; i < fluid_count (); i++) {
    struct arena *arena = arena_create ();
    const struct species *s = fluid_at (i);
    struct eos_state state;
    struct fault fault;

    fault_init (&fault, arena);
    test_about ("%s", s->key);
    if (CHECK (eos_solve (PR, composition_pure (arena, s), s->critical_temperature * (1 + 1e-15),
                          s->critical_pressure, &state, &fault))) {
      NEAR (state.Z, 0.30740130869870385, 1e-4);
    }
    arena_destroy (arena);
  }
}

/* On which side of the critical point a fluid is: figures of the boiling point and the critical
   point are those of tables/species.tsv.                                                        */
static void
liquids (void)
{
  static const struct { const char *gas; double T, p; bool liquid; const char *name; } rows[] = {
    { "CO2=1", 280, 10e6, true, "CO2" },
    { "CO2=1", 310, 10e6, false, NULL },
    { "CO2=1", 320, 20e6, false, NULL },
    { "C3H8=1", 300, 3e6, true, "C3H8" },
    { "NH3=1", 300, 5e6, true, "NH3" },
    { "N2=1", 90, 2e6, true, "N2" },
    { "N2=1", 300, 100e6, false, NULL },
    { "C3H8=0.5;nC4H10=0.5", 300, 3e6, true, "the mixture" },
    { "C3H8=0.5;nC4H10=0.5", 450, 30e6, false, NULL },
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct arena *arena = arena_create ();
    const struct composition *gas = fluid_mixture (arena, rows[i].gas);
    struct eos_state state = { .Z = -1 };
    struct fault fault;

    fault_init (&fault, arena);
    test_about ("%s at %g K, %g Pa", rows[i].gas, rows[i].T, rows[i].p);
    SAME_INT (eos_solve (PR, gas, rows[i].T, rows[i].p, &state, &fault), !rows[i].liquid);
    SAME_INT (fault.kind, rows[i].liquid ? MESSAGE_STATE_LIQUID : MESSAGE_NONE);
    SAME_TEXT (fault.fact[0], rows[i].name);
    if (rows[i].liquid) {
      NEAR (state.Z, -1, 0);
    }
    arena_destroy (arena);
  }
}

/* The density between LOW and HIGH where the isotherm turns (dp/d(rho) = 0), by halving.  */
static double
turning_point (const struct line *line, double low, double high)
{
  for (int i = 0; i < 100; i++) {
    const double rho = low + (high - low) / 2;
    const struct residual at_low = PR->residual (line->isotherm, low);
    const struct residual r = PR->residual (line->isotherm, rho);
    if ((1 + 2 * r.a1 + r.a2 > 0) == (1 + 2 * at_low.a1 + at_low.a2 > 0)) {
      low = rho;
    } else {
      high = rho;
    }
  }
  return low;
}

/* Where two roots all but meet, at both ends of the loop: just inside both are found, just outside
   neither is.  The loop lies about b rho = 0.2530766, exact at the critical point.             */
static void
ends_of_the_loop (void)
{
  for (double T = 260; T < 304; T += 4) {
    struct line line;
    if (line_init (&line, "CO2=1", T)) {
      const double densest = PR->densest (line.isotherm), middle = 0.2530766 / 0.999 * densest;
      const double top = turning_point (&line, 0, middle);
      const double bottom = turning_point (&line, middle, densest);
      const double RT = GAS_CONSTANT * T;
      const double p_top = top * RT * (1 + PR->residual (line.isotherm, top).a1);
      const double p_bottom = bottom * RT * (1 + PR->residual (line.isotherm, bottom).a1);

      test_about ("CO2 at %g K, loop from %g to %g Pa", T, p_bottom, p_top);
      NEAR (PR->roots (line.isotherm, p_top * (1 - 1e-10)).gas, top, 1e-4);
      CHECK (PR->roots (line.isotherm, p_top * (1 - 1e-10)).dense > bottom);
      NEAR (PR->roots (line.isotherm, p_top * (1 + 1e-10)).gas, 0, 0);
      if (p_bottom > 0) {
        NEAR (PR->roots (line.isotherm, p_bottom * (1 + 1e-10)).dense, bottom, 1e-4);
        NEAR (PR->roots (line.isotherm, p_bottom * (1 - 1e-10)).dense, 0, 0);
        CHECK (PR->roots (line.isotherm, p_bottom * (1 - 1e-10)).gas > 0);
      }
    }
    line_clear (&line);
  }
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "states evaluated apart", evaluated_states },
    { "real gases", real_gases },
    { "second virial coefficient", second_virial },
    { "ideal at low pressure", ideal_at_low_pressure },
    { "derivatives", derivatives },
    { "critical point", critical_point },
    { "ends of the loop", ends_of_the_loop },
    { "liquids are told from gases", liquids },
    { NULL, NULL }
  };

  return test_main (argc, argv, cases);
}
