#include "config.h"

#include <stddef.h>
#include "libtest.h"
#include "units/dimension.h"

static void
arithmetic (void)
{
  struct dimension speed = dimension_over (DIMENSION_LENGTH, DIMENSION_TIME);
  struct dimension force = dimension_over (dimension_times (DIMENSION_MASS, speed),
                                           DIMENSION_TIME);
  struct dimension area = dimension_power (DIMENSION_LENGTH, 2);

  CHECK (dimension_equal (dimension_over (force, area), DIMENSION_PRESSURE));
  CHECK (dimension_equal (dimension_times (force, DIMENSION_LENGTH), DIMENSION_ENERGY));
  CHECK (dimension_equal (dimension_over (DIMENSION_ENERGY, DIMENSION_TIME), DIMENSION_POWER));
  CHECK (dimension_equal (dimension_power (DIMENSION_LENGTH, 3), DIMENSION_VOLUME));
  CHECK (dimension_equal (dimension_over (DIMENSION_MASS, DIMENSION_VOLUME), DIMENSION_DENSITY));
  CHECK (dimension_equal (dimension_over (DIMENSION_DENSITY, DIMENSION_MOLAR_DENSITY),
                          DIMENSION_MOLAR_MASS));
  CHECK (dimension_equal (dimension_times (DIMENSION_MOLAR_FLOW, DIMENSION_MOLAR_MASS),
                          DIMENSION_MASS_FLOW));
  CHECK (dimension_equal (dimension_over (DIMENSION_VOLUME_FLOW, DIMENSION_VOLUME),
                          dimension_power (DIMENSION_TIME, -1)));
  CHECK (!dimension_equal (DIMENSION_TEMPERATURE, DIMENSION_AMOUNT));
}

static void
none_is_what_cancels (void)
{
  CHECK (dimension_is_none (dimension_over (DIMENSION_POWER, DIMENSION_POWER)));
  CHECK (dimension_is_none (dimension_power (DIMENSION_PRESSURE, 0)));
  CHECK (!dimension_is_none (DIMENSION_MASS));
  CHECK (dimension_equal (DIMENSION_NONE, dimension_times (DIMENSION_NONE, DIMENSION_NONE)));
}

static void
names (void)
{
  struct dimension found = DIMENSION_NONE;

  SAME_TEXT (dimension_name (DIMENSION_MASS_FLOW), "mass per time");
  SAME_TEXT (dimension_name (DIMENSION_PRESSURE), "pressure");
  SAME_TEXT (dimension_name (DIMENSION_MOLAR_MASS), "mass per amount");
  SAME_TEXT (dimension_name (dimension_power (DIMENSION_MASS, 5)), NULL);
  CHECK (dimension_find ("energy per volume", &found));
  CHECK (dimension_equal (found, DIMENSION_PRESSURE));
  CHECK (dimension_find ("volume per time", &found));
  CHECK (dimension_equal (found, DIMENSION_VOLUME_FLOW));
  CHECK (!dimension_find ("beauty", &found));
  CHECK (dimension_equal (found, DIMENSION_VOLUME_FLOW));
}

static const struct test_case cases[] = {
  { "dimensions multiply and divide", arithmetic },
  { "what cancels has none", none_is_what_cancels },
  { "quantities have names", names },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
