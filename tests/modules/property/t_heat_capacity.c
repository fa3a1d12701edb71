#include "config.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "modules/property/gases.h"
#include "property/heat_capacity.h"
#include "support/arena.h"
#include "units/constants.h"
#include "units/workings.h"

static struct gases gases;

static bool
heat (const char *gas, double T, struct ideal_heat *found)
{
  gases_start (&gases);
  const struct composition *made = gases_make (&gases, gas);
  return made != NULL && heat_of_gas (gases.tables, made, T, found, NULL, &gases.fault);
}

static void
each_figure (char *cells[])
{
  char gas[40] = "";
  double T = strtod (cells[1], NULL), lowest = strtod (cells[2], NULL);
  double highest = strtod (cells[3], NULL), slack = strtod (cells[4], NULL) / 100;
  struct ideal_heat h = { 0 };
  strncat (strncat (gas, cells[0], 30), " 1", 3);
  NEED (heat (gas, T, &h));
  test_about ("%s, %g K: %.4f, others %g to %g", cells[0], T, h.cp, lowest, highest);
  CHECK (h.cp >= lowest * (1 - slack) - 5e-4 && h.cp <= highest * (1 + slack) + 5e-4);
}

static void
published_cp (void)
{
  CHECK (test_each_row ("numbers/heat_capacity.tsv", 6, each_figure) >= 540);
}

static void
each_computed (char *cells[])
{
  static const double at[] = { 298.15, 500 };
  char gas[40] = "";
  strncat (strncat (gas, cells[0], 30), " 1", 3);
  for (size_t i = 0; i < 2; i++) {
    struct ideal_heat h = { 0 };
    if (strcmp (cells[1 + i], "-") == 0)                 /* 500 K is out of its range */
      continue;
    NEED (heat (gas, at[i], &h));
    NEAR (h.cp - strtod (cells[1 + i], NULL), 0, 1e-3);
  }
}

/* The same functions computed elsewhere, to one unit of the last digit, as the coefficients are
   rounded.                                                                                      */
static void
computed_cp (void)
{
  CHECK (test_each_row ("numbers/cp_ideal.tsv", 4, each_computed) >= 190);
}

/* Heat from 298 K to 1000 K, kJ/mol, and entropy at constant pressure, J/(mol K): differences of
   the ideal-gas tables of M. J. Moran, H. N. Shapiro, Fundamentals of Engineering Thermodynamics,
   Table A-23 (after older JANAF tables, within 0.2 % of later ones), from memory; CH4: NIST-JANAF
   (1998), from memory, whose Cp at 1000 K is 1.4 % below that of Frenkel et al. (1994) which we
   follow.                                                                                       */
static void
heat_to_1000_K (void)
{
  static const struct { const char *gas; double enthalpy, entropy, slack; } known[] = {
    { "N2 1", 30129 - 8669, 228.057 - 191.502, 2e-3 },
    { "CO2 1", 42769 - 9364, 269.215 - 213.685, 2e-3 },
    { "O2 1", 31389 - 8682, 243.471 - 205.033, 2e-3 },
    { "H2O 1", 35882 - 9904, 232.597 - 188.720, 2e-3 },
    { "H2 1", 29154 - 8468, 166.114 - 130.574, 2e-3 },
    { "CO 1", 30355 - 8669, 234.421 - 197.543, 2e-3 },
    { "CH4 1", 38179, 247.549 - 186.251, 0.01 }
  };
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
    struct ideal_heat h = { 0 }, at_298 = { 0 };
    test_about ("%s", known[i].gas);
    NEED (heat (known[i].gas, 1000, &h));
    NEED (heat (known[i].gas, 298, &at_298));
    NEAR (h.enthalpy - at_298.enthalpy, known[i].enthalpy, known[i].slack);
    NEAR (h.entropy - at_298.entropy, known[i].entropy, known[i].slack);
  }
}

/* A monatomic gas: 5/2 R exactly.  */
static void
monatomic (void)
{
  struct ideal_heat h = { 0 };
  NEED (heat ("Ar 1, He 3", 500, &h));
  NEAR (h.cp, 2.5 * GAS_CONSTANT, 1e-15);
  NEAR (h.enthalpy, 2.5 * GAS_CONSTANT * (500 - 298.15), 1e-14);
  NEAR (h.entropy, 2.5 * GAS_CONSTANT * log (500 / 298.15), 1e-14);
  CHECK (h.outside == NULL);
  NEAR (h.lowest, 100, 0);
  NEAR (h.highest, 3000, 0);
}

/* cp is the slope of the enthalpy, and T times that of the entropy, for every component; and all
   are zero or above where they must be.                                                         */
static void
derivatives (void)
{
  size_t checked = 0;
  gases_start (&gases);
  for (size_t i = 0; i < species_table_size (gases.species); i++) {
    const struct species *one = species_table_at (gases.species, i);
    const struct composition *gas = composition_pure (gases.arena, one);
    struct ideal_heat at = { 0 }, below = { 0 }, above = { 0 };
    double T = 260 + 3.1 * (double) i, step = 1e-3 * T;
    fault_init (&gases.fault, gases.arena);
    if (!heat_of_gas (gases.tables, gas, T, &at, NULL, &gases.fault))
      continue;                          /* no row: see lacking */
    test_about ("%s, %g K", one->key, T);
    NEED (heat_of_gas (gases.tables, gas, T - step, &below, NULL, &gases.fault));
    NEED (heat_of_gas (gases.tables, gas, T + step, &above, NULL, &gases.fault));
    NEAR ((above.enthalpy - below.enthalpy) / (2 * step), at.cp, 2e-5);
    NEAR (T * (above.entropy - below.entropy) / (2 * step), at.cp, 2e-5);
    CHECK (at.cp > 2.49 * GAS_CONSTANT);
    checked++;
  }
  CHECK (checked >= 190);
}

static void
zero_at_the_reference (void)
{
  struct ideal_heat h = { 0 };
  NEED (heat ("CH4 58, CO2 40, H2O 2", 298.15, &h));
  NEAR (h.enthalpy, 0, 1e-9);
  NEAR (h.entropy, 0, 1e-12);
}

/* Parts add up: 0.6 and 0.4 of the pure figures.  */
static void
mixture (void)
{
  struct ideal_heat mix = { 0 }, methane = { 0 }, carbon_dioxide = { 0 };
  NEED (heat ("CH4 6, CO2 4", 420, &mix));
  NEED (heat ("CH4 1", 420, &methane));
  NEED (heat ("CO2 1", 420, &carbon_dioxide));
  NEAR (mix.cp, 0.6 * methane.cp + 0.4 * carbon_dioxide.cp, 1e-15);
  NEAR (mix.enthalpy, 0.6 * methane.enthalpy + 0.4 * carbon_dioxide.enthalpy, 1e-15);
}

static void
ranges (void)
{
  struct ideal_heat h = { 0 };
  NEED (heat ("D4 1, CH4 98, R245fa 1e-9", 280, &h));    /* D4 from 290 K */
  NEED (h.outside != NULL);
  SAME_TEXT (h.outside->key, "D4");
  NEED (heat ("CH4 98, D4 1", 1300, &h));
  NEED (h.outside != NULL);
  SAME_TEXT (h.outside->key, "D4");
  NEAR (h.lowest, 290, 0);
  NEAR (h.highest, 1200, 0);
  NEED (heat ("CH4 98, D4 1", 300, &h));
  CHECK (h.outside == NULL);
  NEED (heat ("N2 1", 1, &h));           /* far below, and finite */
  NEAR (h.cp, 3.5 * GAS_CONSTANT, 1e-9);
  NEED (heat ("N2 1, H2O 1", 1e5, &h));
  CHECK (isfinite (h.cp) && h.outside != NULL);
}

static void
lacking (void)
{
  struct ideal_heat h = { .cp = -7 };
  CHECK (!heat ("CH4 97, C7H14O2 1, D3 2", 300, &h));
  SAME_INT (gases.fault.kind, MESSAGE_MODEL_LACKS);
  SAME_TEXT (gases.fault.fact[1], "D3");
  CHECK (!heat ("CH4 1", 0, &h));
  SAME_INT (gases.fault.kind, MESSAGE_RANGE);
  CHECK (!heat ("CH4 1", (double) NAN, &h));
  SAME_INT (gases.fault.kind, MESSAGE_RANGE);
  NEAR (h.cp, -7, 0);
  CHECK (heat ("CH4 97, D3 0", 300, &h));                /* what is not there lacks nothing */
}

static void
said (void)
{
  struct workings workings;
  struct ideal_heat h = { 0 };
  NEED (heat ("N2 1", 300, &h));
  workings_init (&workings, gases.arena);
  NEED (heat_of_gas (gases.tables, gases_make (&gases, "N2 1"), 300, &h, &workings,
                     &gases.fault));
  SAME_INT (workings.count, 1);
  NEAR (workings.last->value, h.cp, 0);
}

static const struct test_case cases[] = {
  { "published heat capacities", published_cp },
  { "computed elsewhere", computed_cp },
  { "heat to 1000 K", heat_to_1000_K },
  { "monatomic gases", monatomic },
  { "derivatives", derivatives },
  { "zero at the reference", zero_at_the_reference },
  { "a mixture", mixture },
  { "ranges", ranges },
  { "what is lacking", lacking },
  { "workings", said },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  gases_end (&gases);
  return status;
}
