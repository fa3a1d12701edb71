#include "config.h"
#include <math.h>
#include "libtest.h"
#include "property/moist.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/workings.h"

static struct arena *arena;
static struct fault fault;
static struct workings workings;

static void
start (void)
{
  arena_destroy (arena);
  arena = arena_create ();
  fault_init (&fault, arena);
  workings_init (&workings, arena);
}

/* A wet test meter at 21.5 degC, 99.20 kPa, saturated: 2.58629 % (psat 2.5656 kPa, IAPWS
   SR1-86(1992); 0.05 % for another vapour pressure equation).                                   */
static void
wet_test_meter (void)
{
  start ();
  double y = 0, psat = 0;
  bool over_ice = true;
  NEED (moist_saturated (294.65, 99200, &y, &psat, &over_ice, &workings, &fault));
  CHECK (!over_ice);
  NEAR (psat, 2565.6, 2e-5);
  NEAR (y, 0.0258629, 2e-5);
  SAME_INT (workings.count, 2);
  SAME_TEXT (workings.last->unit, "mol/mol");
}

/* Blower air at 95 degF, 14.2 psia, 60 %: psat(35 degC) 5.62906 kPa (IAPWS SR1-86(1992)), so
   0.6 * 5.62906/97.9056 = 3.44969 mol%.                                                         */
static void
humid_air (void)
{
  start ();
  double y = 0, psat = 0;
  NEED (moist_by_humidity (0.6, 308.15, 14.2 * 6894.757293, &y, &psat, &workings, &fault));
  NEAR (psat, 5629.06, 1e-6);
  NEAR (y, 0.0344969, 2e-6);
  NEED (moist_by_humidity (0, 308.15, 1e5, &y, &psat, NULL, &fault));
  NEAR (y, 0, 0);
  NEED (moist_by_humidity (1, 308.15, 1e5, &y, &psat, NULL, &fault));
  NEAR (y, 0.0562906, 1e-6);
}

/* Ideal saturation at 101.325 kPa, -10 degC over ice: 0.0025647551 (IAPWS R14-08(2011)); the
   humidity of that gas, over liquid: 259.873811/286.53307.                                      */
static void
frost (void)
{
  start ();
  double y = 0, psat = 0, phi = 0, T = 0;
  bool over_ice = false;
  NEED (moist_saturated (263.15, 101325, &y, &psat, &over_ice, NULL, &fault));
  CHECK (over_ice);
  NEAR (y, 0.0025647551, 1e-7);
  NEED (moist_humidity (y, 263.15, 101325, &phi, &workings, &fault));
  NEAR (phi, 259.873811 / 286.53307, 1e-8);
  SAME_INT (workings.count, 2);
  over_ice = false;
  NEED (moist_dew_point (y, 101325, &T, &over_ice, &workings, &fault));
  CHECK (over_ice);
  NEAR (T, 263.15, 1e-12);
  SAME_TEXT (workings.last->name, "frost point");
}

/* Dew point 12 degC stays 12 degC at the same pressure, and rises with pressure: at twice the
   pressure the water has twice the partial pressure.                                            */
static void
dew_point_and_pressure (void)
{
  start ();
  double y = 0, psat = 0, T = 0, twice = 0;
  bool over_ice = true;
  NEED (moist_by_dew_point (285.15, 1e5, &y, &psat, &over_ice, &workings, &fault));
  CHECK (!over_ice);
  NEAR (y, psat / 1e5, 1e-15);
  NEED (moist_dew_point (y, 1e5, &T, &over_ice, NULL, &fault));
  NEAR (T, 285.15, 1e-13);
  NEED (moist_dew_point (y, 2e5, &T, &over_ice, NULL, &fault));
  NEED (moist_saturated (T, 2e5, &y, &twice, &over_ice, NULL, &fault));
  NEAR (twice, 2 * psat, 1e-12);
}

static void
humidity_and_back (void)
{
  start ();
  for (int i = 0; i < 100; i++) {
    double T = 225 + 1.2 * i, phi = 0.005 + 0.0099 * i, y = 0, psat = 0, back = 0;
    test_about ("T = %g K, phi = %g", T, phi);
    NEED (moist_by_humidity (phi, T, 1e6, &y, &psat, NULL, &fault));
    NEED (moist_humidity (y, T, 1e6, &back, NULL, &fault));
    NEAR (back, phi, 1e-14);
  }
}

static void
faults (void)
{
  double y = -7, psat = -7;
  bool over_ice = true;
  const double shares[] = { -0.01, 1.01, 60, (double) NAN };
  for (size_t i = 0; i < 4; i++) {
    start ();
    test_about ("%g", shares[i]);
    CHECK (!moist_by_humidity (shares[i], 300, 1e5, &y, &psat, &workings, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    start ();
    CHECK (!moist_dew_point (shares[i], 1e5, &y, &over_ice, &workings, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    start ();
    CHECK (!moist_humidity (shares[i], 300, 1e5, &y, &workings, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
  }
  const double pressures[] = { 0, -1e5, (double) NAN, (double) INFINITY };
  for (size_t i = 0; i < 4; i++) {
    start ();
    test_about ("%g Pa", pressures[i]);
    CHECK (!moist_saturated (300, pressures[i], &y, &psat, &over_ice, &workings, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    SAME_TEXT (fault.fact[0], "an absolute pressure is above zero");
  }
  start ();
  CHECK (!moist_dew_point (0, 1e5, &y, &over_ice, &workings, &fault));
  SAME_INT (fault.kind, MESSAGE_NO_WATER);
  start ();
  CHECK (!moist_saturated (900, 1e5, &y, &psat, &over_ice, &workings, &fault));
  SAME_INT (fault.kind, MESSAGE_RANGE);
  start ();                              /* saturated at 110 degC, 1 bar: it would be steam */
  CHECK (!moist_saturated (383.15, 1e5, &y, &psat, &over_ice, &workings, &fault));
  SAME_INT (fault.kind, MESSAGE_RANGE);
  SAME_TEXT (fault.fact[0], "the water alone would have 143.377 kPa, the gas has only 100 kPa");
  start ();
  CHECK (!moist_by_dew_point (383.15, 1e5, &y, &psat, &over_ice, &workings, &fault));
  SAME_INT (fault.kind, MESSAGE_RANGE);
  NEAR (y, -7, 0);
  NEAR (psat, -7, 0);
  SAME_INT (workings.count, 0);
}

static const struct test_case cases[] = {
  { "wet test meter", wet_test_meter },
  { "humid air", humid_air },
  { "frost", frost },
  { "dew point and pressure", dew_point_and_pressure },
  { "humidity and back", humidity_and_back },
  { "faults", faults },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  arena_destroy (arena);
  return status;
}
