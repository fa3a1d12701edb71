#include "config.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gas/moisture.h"
#include "libtest.h"
#include "modules/property/gases.h"
#include "property/enhancement.h"

static struct gases gases;

/* Six decimals are given.  */
static void
each_factor (char *cells[])
{
  double T = strtod (cells[0], NULL), p = strtod (cells[2], NULL), want = strtod (cells[3], NULL);
  enum water_phase phase = strcmp (cells[1], "ice") == 0 ? WATER_ICE : WATER_LIQUID;
  double psat = 0, factor = 0;
  gases_start (&gases);
  NEED (phase == WATER_ICE ? water_pressure_ice (T, &psat, &gases.fault)
        : water_pressure_liquid (T, &psat, &gases.fault));
  SAME_INT (enhancement_factor (T, p, psat, phase, &factor), ENHANCEMENT_APPLIED);
  NEAR (factor - want, 0, 5.01e-7);
}

static void
published_factors (void)
{
  CHECK (test_each_row ("numbers/enhancement.tsv", 5, each_factor) >= 100);
}

/* Supercooled and stable water are one liquid: their equations meet at 0 degC (Greenspan 1976
   fitted them apart; 1e-5 is a tenth of the uncertainty he states for 1 bar, from memory).  The
   factor over supercooled water lies near that over ice.                                        */
static void
supercooled (void)
{
  gases_start (&gases);
  double psat = 0, below = 0, above = 0, ice = 0, liquid = 0;
  NEED (water_pressure_liquid (273.15, &psat, &gases.fault));
  SAME_INT (enhancement_factor (273.15 - 1e-4, 1e5, psat, WATER_LIQUID, &below),
            ENHANCEMENT_APPLIED);
  SAME_INT (enhancement_factor (273.15 + 1e-4, 1e5, psat, WATER_LIQUID, &above),
            ENHANCEMENT_APPLIED);
  NEAR (below, above, 1e-5);
  for (double T = 225; T < 273; T += 4) {
    test_about ("%g K", T);
    NEED (water_pressure_liquid (T, &psat, &gases.fault));
    enhancement_factor (T, 1e5, psat, WATER_LIQUID, &liquid);
    NEED (water_pressure_ice (T, &psat, &gases.fault));
    enhancement_factor (T, 1e5, psat, WATER_ICE, &ice);
    NEAR (liquid, ice, 3e-4);
    CHECK (liquid > 1.003 && liquid < 1.006);
  }
}

static void
outside (void)
{
  double factor = 7;
  SAME_INT (enhancement_factor (223, 1e5, 3.9, WATER_ICE, &factor), ENHANCEMENT_BEYOND_T);
  NEAR (factor, 1, 0);
  SAME_INT (enhancement_factor (364, 1e5, 7.2e4, WATER_LIQUID, &factor), ENHANCEMENT_BEYOND_T);
  SAME_INT (enhancement_factor (300, 2.1e6, 3537, WATER_LIQUID, &factor), ENHANCEMENT_BEYOND_P);
  SAME_INT (enhancement_factor (300, 3000, 3537, WATER_LIQUID, &factor), ENHANCEMENT_BEYOND_P);
  SAME_INT (enhancement_factor ((double) NAN, 1e5, 3537, WATER_LIQUID, &factor),
            ENHANCEMENT_BEYOND_T);
  NEAR (factor, 1, 0);
  /* Pure water under its own vapour pressure: nothing enhances it.  */
  SAME_INT (enhancement_factor (300, 3537, 3537, WATER_LIQUID, &factor), ENHANCEMENT_APPLIED);
  NEAR (factor, 1, 0);
}

static void
air_and_others (void)
{
  static const struct { const char *gas; bool is_air; } known[] = {
    { "N2 78.08, O2 20.95, Ar 0.93, CO2 0.04, H2O 3", true }, { "N2 79, O2 21", true },
    { "N2 76, O2 20.5, Ar 0.9, CO2 2.6, H2O 3", false }, { "N2 1", false }, { "H2O 1", false },
    { "CH4 1, N2 9999", false }
  };
  gases_start (&gases);
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
    const struct composition *gas = gases_make (&gases, known[i].gas);
    test_about ("%s", known[i].gas);
    NEED (gas != NULL);
    SAME_INT (enhancement_is_for (gas), known[i].is_air);
  }
}

static const struct test_case cases[] = {
  { "published factors", published_factors },
  { "supercooled water", supercooled },
  { "outside the range", outside },
  { "air and other gases", air_and_others },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  gases_end (&gases);
  return status;
}
