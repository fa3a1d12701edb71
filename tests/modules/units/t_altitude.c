#include "config.h"

#include <math.h>
#include <stddef.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/altitude.h"

static struct arena *arena;
static struct fault fault;

static void
open_fault (void)
{
  arena = arena_create ();
  fault_init (&fault, arena);
}

/* Tables of ISO 2533:1975 / US Standard Atmosphere 1976, geopotential heights, Pa, from memory; the
   last two are the formula of ISO 2533:1975 worked by hand for two works.                       */
static void
agrees_with_the_standard (void)
{
  static const struct { double height, pressure, tol; } rows[] = {
    { -2000, 127774, 1e-5 }, { -1000, 113929, 1e-5 }, { 0, 101325, 1e-15 },
    { 1000, 89874.6, 1e-5 }, { 2000, 79495.2, 1e-5 }, { 5000, 54019.9, 1e-5 },
    { 11000, 22632.1, 1e-5 }, { 1120, 88574.1, 1e-5 }, { 1600, 83523.5, 1e-5 },
  };
  double pressure;

  open_fault ();
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    test_about ("%g m", rows[i].height);
    CHECK (altitude_pressure (rows[i].height, &pressure, &fault));
    NEAR (pressure, rows[i].pressure, rows[i].tol);
  }
  arena_destroy (arena);
}

/* g_n/(beta R) of the standard's own constants; the printed 5.25588 is its rounding.  */
static void
exponent_follows_from_constants (void)
{
  double pressure = 0, exact = 101325 * pow (1 - 0.0065 * 4000 / 288.15,
                                             9.80665 / (0.0065 * 287.05287));

  open_fault ();
  CHECK (altitude_pressure (4000, &pressure, &fault));
  NEAR (pressure, exact, 1e-7);
  arena_destroy (arena);
}

static void
stops_at_its_range (void)
{
  static const double heights[] = { -2000.1, 11000.1, 1e300, HUGE_VAL, -HUGE_VAL, (double) NAN };
  double pressure = 7;

  for (size_t i = 0; i < sizeof heights / sizeof heights[0]; i++) {
    open_fault ();
    test_about ("%g m", heights[i]);
    CHECK (!altitude_pressure (heights[i], &pressure, &fault));
    SAME_INT (fault.kind, MESSAGE_RANGE);
    NEAR (pressure, 7, 0);
    arena_destroy (arena);
  }
}

static const struct test_case cases[] = {
  { "the barometer follows the standard atmosphere", agrees_with_the_standard },
  { "the exponent is that of the standard's constants", exponent_follows_from_constants },
  { "outside the troposphere there is no answer", stops_at_its_range },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
