#include "config.h"
#include <math.h>
#include <stdlib.h>
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

/* One question each, without a factor; outputs stay as they are where there is no answer.  */

static bool
answered (const struct moist_question *q, double *value, double *psat, bool *over_ice,
          struct workings *steps)
{
  struct moist_answer a;
  if (!moist_answer (q, &a, steps, &fault))
    return false;
  *value = a.value;
  if (psat != NULL)
    *psat = a.psat;
  if (over_ice != NULL)
    *over_ice = a.phase == WATER_ICE;
  return true;
}

static bool
by_humidity (double phi, double T, double p, double *y, double *psat, struct workings *steps)
{
  struct moist_question q = { .asked = MOIST_BY_HUMIDITY, .given = phi, .T = T, .p = p };
  return answered (&q, y, psat, NULL, steps);
}

static bool
saturated (double T, double p, double *y, double *psat, bool *over_ice, struct workings *steps)
{
  struct moist_question q = { .asked = MOIST_SATURATED, .T = T, .p = p };
  return answered (&q, y, psat, over_ice, steps);
}

static bool
by_dew_point (double T_dew, double p, double *y, double *psat, bool *over_ice,
              struct workings *steps)
{
  struct moist_question q = { .asked = MOIST_BY_DEW_POINT, .given = T_dew, .p = p };
  return answered (&q, y, psat, over_ice, steps);
}

static bool
dew_point_of (double y, double p, double *T_dew, bool *over_ice, struct workings *steps)
{
  struct moist_question q = { .asked = MOIST_DEW_POINT, .given = y, .p = p };
  return answered (&q, T_dew, NULL, over_ice, steps);
}

static bool
humidity_of (double y, double T, double p, double *phi, struct workings *steps)
{
  struct moist_question q = { .asked = MOIST_HUMIDITY, .given = y, .T = T, .p = p };
  return answered (&q, phi, NULL, NULL, steps);
}

/* A wet test meter at 21.5 degC, 99.20 kPa, saturated: 2.58629 % (psat 2.5656 kPa, IAPWS
   SR1-86(1992); 0.05 % for another vapour pressure equation).                                   */
static void
wet_test_meter (void)
{
  start ();
  double y = 0, psat = 0;
  bool over_ice = true;
  NEED (saturated (294.65, 99200, &y, &psat, &over_ice, &workings));
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
  NEED (by_humidity (0.6, 308.15, 14.2 * 6894.757293, &y, &psat, &workings));
  NEAR (psat, 5629.06, 1e-6);
  NEAR (y, 0.0344969, 2e-6);
  NEED (by_humidity (0, 308.15, 1e5, &y, &psat, NULL));
  NEAR (y, 0, 0);
  NEED (by_humidity (1, 308.15, 1e5, &y, &psat, NULL));
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
  NEED (saturated (263.15, 101325, &y, &psat, &over_ice, NULL));
  CHECK (over_ice);
  NEAR (y, 0.0025647551, 1e-7);
  NEED (humidity_of (y, 263.15, 101325, &phi, &workings));
  NEAR (phi, 259.873811 / 286.53307, 1e-8);
  SAME_INT (workings.count, 2);
  over_ice = false;
  NEED (dew_point_of (y, 101325, &T, &over_ice, &workings));
  CHECK (over_ice);
  NEAR (T, 263.15, 1e-12);
  SAME_TEXT (workings.last->name, "vapour pressure of ice");
  NEAR (workings.last->value, y * 101325, 1e-9);         /* at the frost point it is that */
}

/* Dew point 12 degC stays 12 degC at the same pressure, and rises with pressure: at twice the
   pressure the water has twice the partial pressure.                                            */
static void
dew_point_and_pressure (void)
{
  start ();
  double y = 0, psat = 0, T = 0, twice = 0;
  bool over_ice = true;
  NEED (by_dew_point (285.15, 1e5, &y, &psat, &over_ice, &workings));
  CHECK (!over_ice);
  NEAR (y, psat / 1e5, 1e-15);
  NEED (dew_point_of (y, 1e5, &T, &over_ice, NULL));
  NEAR (T, 285.15, 1e-13);
  NEED (dew_point_of (y, 2e5, &T, &over_ice, NULL));
  NEED (saturated (T, 2e5, &y, &twice, &over_ice, NULL));
  NEAR (twice, 2 * psat, 1e-12);
}

static void
humidity_and_back (void)
{
  start ();
  for (int i = 0; i < 100; i++) {
    double T = 225 + 1.2 * i, phi = 0.005 + 0.0099 * i, y = 0, psat = 0, back = 0;
    test_about ("T = %g K, phi = %g", T, phi);
    NEED (by_humidity (phi, T, 1e6, &y, &psat, NULL));
    NEED (humidity_of (y, T, 1e6, &back, NULL));
    NEAR (back, phi, 1e-14);
  }
}

static void
each_saturation (char *cells[])
{
  start ();
  struct moist_question q = { .asked = MOIST_SATURATED, .T = strtod (cells[0], NULL),
                              .p = 101325, .air = true };
  double enhanced = strtod (cells[2], NULL);
  struct moist_answer a = { 0 };
  NEED (moist_answer (&q, &a, &workings, &fault));
  NEAR (a.value, enhanced, 1e-7);        /* eight digits, and those of psat behind them */
  SAME_INT (a.applied, ENHANCEMENT_APPLIED);
  SAME_INT (a.phase, q.T < 273.16 ? WATER_ICE : WATER_LIQUID);
  SAME_INT (workings.count, 3);
  q.air = false;
  NEED (moist_answer (&q, &a, NULL, &fault));
  NEAR (a.value, strtod (cells[1], NULL), 1e-7);
  SAME_INT (a.applied, ENHANCEMENT_NOT_AIR);
  /* The dew point of that gas is where it was saturated.  */
  struct moist_question back = { .asked = MOIST_DEW_POINT, .given = enhanced, .p = 101325,
                                 .air = true };
  NEED (moist_answer (&back, &a, NULL, &fault));
  NEAR (a.value, q.T, 2e-8);
}

static void
saturated_air (void)
{
  CHECK (test_each_row ("numbers/saturation.tsv", 4, each_saturation) >= 25);
}

/* Saturation, its dew point, its humidity, under the pressures of the factor's range.  Just below
   the triple point there is a dew point besides (see both_points): those are left out.          */
static void
enhanced_and_back (void)
{
  const double pressures[] = { 1e5, 101325, 7e5, 2e6 };
  for (size_t k = 0; k < 4; k++)
    for (double T = 223.15; T < 363.2; T += 1.25) {
      if (T > 273.1 && T < 273.16)
        continue;
      start ();
      test_about ("T = %g K, p = %g Pa", T, pressures[k]);
      struct moist_question q = { .asked = MOIST_SATURATED, .T = T, .p = pressures[k],
                                  .air = true };
      struct moist_answer a = { 0 }, back = { 0 };
      NEED (moist_answer (&q, &a, NULL, &fault));
      SAME_INT (a.applied, ENHANCEMENT_APPLIED);
      CHECK (a.factor > 1);
      q.asked = MOIST_DEW_POINT;
      q.given = a.value;
      NEED (moist_answer (&q, &back, NULL, &fault));
      NEAR (back.value, T, 1e-11);
      NEAR (back.factor, a.factor, 1e-11);
      SAME_INT (back.phase, a.phase);
      if (a.phase == WATER_LIQUID) {
        q.asked = MOIST_HUMIDITY;
        NEED (moist_answer (&q, &back, NULL, &fault));
        NEAR (back.value, 1, 1e-14);
      }
    }
}

/* At 2 MPa f jumps from 1.0748 over ice to 1.0724 over liquid (numbers/enhancement.tsv): a gas
   with the mean has both a frost and a dew point, and it is the dew point that is given.        */
static void
both_points (void)
{
  start ();
  struct moist_question q = { .asked = MOIST_DEW_POINT, .given = 1.0736 * 611.657 / 2e6, .p = 2e6,
                              .air = true };
  struct moist_answer a = { 0 };
  NEED (moist_answer (&q, &a, NULL, &fault));
  SAME_INT (a.phase, WATER_LIQUID);
  CHECK (a.value >= 273.16 && a.value < 273.2);
}

/* Out of its range no factor is applied, and that is said.  */
static void
beyond (void)
{
  start ();
  struct moist_question q = { .asked = MOIST_SATURATED, .T = 300, .p = 3e6, .air = true };
  struct moist_answer a = { 0 };
  NEED (moist_answer (&q, &a, &workings, &fault));
  SAME_INT (a.applied, ENHANCEMENT_BEYOND_P);
  NEAR (a.value, a.psat / 3e6, 1e-15);
  NEAR (a.factor, 1, 0);
  SAME_INT (workings.count, 2);
  q = (struct moist_question) { .asked = MOIST_DEW_POINT, .given = 0.9, .p = 1e5, .air = true };
  NEED (moist_answer (&q, &a, NULL, &fault));
  SAME_INT (a.applied, ENHANCEMENT_BEYOND_T);
  CHECK (a.value > 363.15);
  q.given = 1e-6;
  NEED (moist_answer (&q, &a, NULL, &fault));
  SAME_INT (a.applied, ENHANCEMENT_BEYOND_T);
  NEAR (a.psat, 0.1, 1e-12);
}

/* 60 % at 35 degC and 101.325 kPa: 0.6 * 1.004455 * 5629.0574/101325 (numbers/enhancement.tsv,
   IAPWS SR1-86(1992)).                                                                          */
static void
enhanced_humidity (void)
{
  start ();
  struct moist_question q = { .asked = MOIST_BY_HUMIDITY, .given = 0.6, .T = 308.15, .p = 101325,
                              .air = true };
  struct moist_answer a = { 0 };
  NEED (moist_answer (&q, &a, &workings, &fault));
  NEAR (a.value, 0.6 * 1.004455 * 5629.0574 / 101325, 6e-7);
  SAME_TEXT (workings.last->formula, "y = phi f psat/p");
  q.asked = MOIST_BY_DEW_POINT;
  q.given = 285.15;
  NEED (moist_answer (&q, &a, NULL, &fault));
  CHECK (a.value > a.psat / 101325);
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
    CHECK (!by_humidity (shares[i], 300, 1e5, &y, &psat, &workings));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    start ();
    CHECK (!dew_point_of (shares[i], 1e5, &y, &over_ice, &workings));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    start ();
    CHECK (!humidity_of (shares[i], 300, 1e5, &y, &workings));
    SAME_INT (fault.kind, MESSAGE_RANGE);
  }
  const double pressures[] = { 0, -1e5, (double) NAN, (double) INFINITY };
  for (size_t i = 0; i < 4; i++) {
    start ();
    test_about ("%g Pa", pressures[i]);
    CHECK (!saturated (300, pressures[i], &y, &psat, &over_ice, &workings));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    SAME_TEXT (fault.fact[0], "an absolute pressure is above zero");
  }
  start ();
  CHECK (!dew_point_of (0, 1e5, &y, &over_ice, &workings));
  SAME_INT (fault.kind, MESSAGE_NO_WATER);
  start ();
  CHECK (!saturated (900, 1e5, &y, &psat, &over_ice, &workings));
  SAME_INT (fault.kind, MESSAGE_RANGE);
  start ();                              /* saturated at 110 degC, 1 bar: it would be steam */
  CHECK (!saturated (383.15, 1e5, &y, &psat, &over_ice, &workings));
  SAME_INT (fault.kind, MESSAGE_RANGE);
  SAME_TEXT (fault.fact[0], "the water alone would have 143.377 kPa, the gas has only 100 kPa");
  start ();
  CHECK (!by_dew_point (383.15, 1e5, &y, &psat, &over_ice, &workings));
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
  { "saturated air", saturated_air },
  { "enhanced and back", enhanced_and_back },
  { "frost and dew point at once", both_points },
  { "beyond the factor's range", beyond },
  { "enhanced humidity", enhanced_humidity },
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
