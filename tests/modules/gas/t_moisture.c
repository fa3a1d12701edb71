#include "config.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gas/moisture.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"

static struct arena *arena;
static struct fault fault;

static void
start (void)
{
  arena_destroy (arena);
  arena = arena_create ();
  fault_init (&fault, arena);
}

static void
each_pressure (char *cells[])
{
  double T = strtod (cells[1], NULL), want = strtod (cells[3], NULL);
  double tolerance = strtod (cells[4], NULL), p = 0;
  bool ice = strcmp (cells[2], "ice") == 0;
  start ();
  CHECK (ice || strcmp (cells[2], "liquid") == 0);
  CHECK (ice ? water_pressure_ice (T, &p, &fault) : water_pressure_liquid (T, &p, &fault));
  NEAR (p, want, tolerance);
}

static void
published_pressures (void)
{
  size_t rows = test_each_row ("numbers/moisture.tsv", 6, each_pressure);
  CHECK (rows >= 60);
}

/* Between the limits, ice and liquid: the dew point of the pressure is the temperature.  Near the
   critical point a temperature is known to about eps ln(p)/(T d(ln p)/dT) = 2e-16 * 17/7.8.     */
static void
dew_point_and_back (void)
{
  start ();
  for (int i = 0; i <= 5970; i++) {
    double T = 50 + 0.1 * i, p = 0, back = 0;
    enum water_phase phase, found;
    if (!(T <= 647.096))
      continue;
    test_about ("T = %.1f K", T);
    if (!CHECK (water_pressure (T, &p, &phase, &fault))
        || !CHECK (water_dew_point (p, &back, &found, &fault)))
      return;
    NEAR (back, T, 4e-15);
    SAME_INT (found, phase);
    SAME_INT (phase, T < 273.16 ? WATER_ICE : WATER_LIQUID);
  }
}

static void
ends_of_the_dew_points (void)
{
  start ();
  double T = 0, p = 0;
  enum water_phase phase = WATER_ICE;
  CHECK (water_dew_point (22.064e6, &T, &phase, &fault));
  NEAR (T, 647.096, 1e-14);
  SAME_INT (phase, WATER_LIQUID);
  CHECK (water_dew_point (611.657, &T, &phase, &fault));
  NEAR (T, 273.16, 1e-9);
  SAME_INT (phase, WATER_LIQUID);
  CHECK (water_dew_point (611.65703, &T, &phase, &fault));  /* between the two curves */
  NEAR (T, 273.16, 1e-9);
  CHECK (water_pressure_ice (50, &p, &fault));
  CHECK (water_dew_point (p, &T, &phase, &fault));
  NEAR (T, 50, 1e-14);
  SAME_INT (phase, WATER_ICE);
}

static void
pressure_rises_with_temperature (void)
{
  start ();
  double before = 0;
  for (int i = 0; i <= 1190; i++) {
    double T = 51 + 0.5 * i, p = 0;
    enum water_phase phase;
    test_about ("T = %.1f K", T);
    CHECK (water_pressure (T, &p, &phase, &fault));
    CHECK (p > before);
    before = p;
  }
}

/* Supercooled liquid has more pressure than ice: 10 % more at -10 degC (286.533/259.874).  */
static void
over_liquid_below_freezing (void)
{
  start ();
  double liquid = 0, ice = 0;
  CHECK (water_pressure_liquid (263.15, &liquid, &fault));
  CHECK (water_pressure_ice (263.15, &ice, &fault));
  NEAR (liquid / ice, 1.10258, 1e-5);
}

static void
outside_the_range (void)
{
  const double bad[] = { 0, -1, 49.99, 647.1, 1e6, (double) NAN, (double) INFINITY,
                         -(double) INFINITY };
  for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
    double p = -7;
    enum water_phase phase = WATER_ICE;
    test_about ("T = %g K", bad[i]);
    start ();
    CHECK (!water_pressure (bad[i], &p, &phase, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    start ();
    CHECK (!water_pressure_liquid (bad[i], &p, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    start ();
    CHECK (!water_pressure_ice (bad[i], &p, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    NEAR (p, -7, 0);
  }
  double p = -7;
  start ();
  CHECK (!water_pressure_liquid (223.14, &p, &fault));
  SAME_TEXT (fault.fact[0], "the vapour pressure of water over liquid is known from -50 to "
             "373.946 degC, not at -50.01 degC");
  start ();
  CHECK (!water_pressure_ice (273.17, &p, &fault));
  SAME_INT (fault.kind, MESSAGE_RANGE);
  NEAR (p, -7, 0);
}

static void
no_dew_point (void)
{
  const double bad[] = { 0, -611, 1e-41, 22.0641e6, (double) NAN, (double) INFINITY };
  for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
    double T = -7;
    enum water_phase phase = WATER_ICE;
    test_about ("p = %g Pa", bad[i]);
    start ();
    CHECK (!water_dew_point (bad[i], &T, &phase, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    NEAR (T, -7, 0);
  }
}

static const struct test_case cases[] = {
  { "published pressures", published_pressures },
  { "dew point and back", dew_point_and_back },
  { "ends of the dew points", ends_of_the_dew_points },
  { "pressure rises with temperature", pressure_rises_with_temperature },
  { "over liquid below freezing", over_liquid_below_freezing },
  { "outside the range", outside_the_range },
  { "no dew point", no_dew_point },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  arena_destroy (arena);
  return status;
}
