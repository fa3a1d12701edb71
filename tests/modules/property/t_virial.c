#include "config.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "modules/property/gases.h"
#include "property/virial.h"

static struct gases gases;

static bool
virial (const char *gas, double T, struct second_virial *found)
{
  gases_start (&gases);
  const struct composition *made = gases_make (&gases, gas);
  return made != NULL && second_virial_of_gas (gases.tables, made, T, found, NULL, &gases.fault);
}

/* Against the reference equations, within the tolerances stated with them.  The rows of SO2 and
   isobutane are fits to such values; left out of its fit, any of them is met as well.  */
static void
each_figure (char *cells[])
{
  char gas[40] = "";
  struct second_virial v = { 0 };
  double want = strtod (cells[2], NULL), slack = strtod (cells[3], NULL);
  strncat (strncat (gas, cells[0], 30), " 1", 3);
  NEED (virial (gas, strtod (cells[1], NULL), &v));
  NEAR (v.value * 1e6 - want, 0, slack);
}

static void
published_coefficients (void)
{
  CHECK (test_each_row ("numbers/second_virial.tsv", 5, each_figure) >= 140);
}

/* Like molecules: N2 and CO have nearly the same constants, so that any mixture of
   them lies near both (-4.3 and -8.6 cm3/mol at 298.15 K, CRC Handbook, 95th ed., section 6).   */
static void
mixtures (void)
{
  struct second_virial mix = { 0 }, turned = { 0 }, pure = { 0 };
  NEED (virial ("N2 1, CO 1", 298.15, &mix));
  CHECK (mix.value < -4e-6 && mix.value > -9e-6);
  NEED (virial ("CH4 7, CO2 2, N2 1", 300, &mix));
  NEED (virial ("N2 1, CH4 7, CO2 2", 300, &turned));
  NEAR (turned.value, mix.value, 1e-14);
  NEED (virial ("CH4 1", 300, &pure));
  NEED (virial ("CH4 1, C3H8 1e-13", 300, &mix));
  NEAR (mix.value, pure.value, 1e-10);
}

/* B_12 by Tsonopoulos (1974) and the rules of Prausnitz and Gunn (1958), computed independently in
   Python; the constants of tables/species.tsv.                                                  */
static void
cross_coefficient (void)
{
  static const struct { const char *both, *one, *other; double T, want; } known[] = {
    { "CH4 1, CO2 1", "CH4 1", "CO2 1", 280, -84.21853793338944 },
    { "CH4 1, CO2 1", "CH4 1", "CO2 1", 450, -21.482817156467885 },
    { "N2 1, C3H8 1", "N2 1", "C3H8 1", 300, -78.79552887054842 }
  };
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
    struct second_virial mix = { 0 }, a = { 0 }, b = { 0 };
    NEED (virial (known[i].both, known[i].T, &mix));
    NEED (virial (known[i].one, known[i].T, &a));
    NEED (virial (known[i].other, known[i].T, &b));
    NEAR ((4 * mix.value - a.value - b.value) / 2 * 1e6, known[i].want, 1e-9);
  }
}

static void
ranges_and_faults (void)
{
  struct second_virial v = { .value = -7 };
  NEED (virial ("CH4 9, CO2 1", 240, &v));
  NEED (v.outside != NULL);
  SAME_TEXT (v.outside->key, "CH4");
  CHECK (v.estimated == NULL);
  NEED (virial ("CH4 9, CO2 1", 700, &v));
  NEED (v.estimated != NULL);
  SAME_TEXT (v.estimated->key, "CH4");
  CHECK (v.outside == NULL);
  v.value = -7;
  CHECK (!virial ("CH4 9, C7H14O2 1", 300, &v));
  SAME_INT (gases.fault.kind, MESSAGE_MODEL_LACKS);
  SAME_TEXT (gases.fault.fact[1], "C7H14O2");
  CHECK (!virial ("CH4 1", 0, &v));
  SAME_INT (gases.fault.kind, MESSAGE_RANGE);
  NEAR (v.value, -7, 0);
}

static const struct test_case cases[] = {
  { "published coefficients", published_coefficients },
  { "mixtures", mixtures },
  { "a cross coefficient", cross_coefficient },
  { "ranges and faults", ranges_and_faults },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  gases_end (&gases);
  return status;
}
