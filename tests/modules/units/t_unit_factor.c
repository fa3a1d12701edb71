#include "config.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "fixture.h"
#include "libtest.h"
#include "units/dimension.h"

static struct fixture fixture;

static const struct unit *
find (const char *text)
{
  return fixture_find (&fixture, text);
}

enum { UNIT = 1, SI_UNIT, FACTOR, TOL, ROW_CELLS = 10 };

static void
check_row (char *cells[])
{
  const struct unit *unit = find (cells[UNIT]), *si = find (cells[SI_UNIT]);

  if (!CHECK (unit != NULL) || !CHECK (si != NULL))
    return;
  NEAR (unit->factor, strtod (cells[FACTOR], NULL), strtod (cells[TOL], NULL));
  NEAR (si->factor, 1, 0);
  CHECK (dimension_equal (unit->dimension, si->dimension));
}

static void
published (void)
{
  fixture_open (&fixture, NULL);
  CHECK (test_each_row ("numbers/units.tsv", ROW_CELLS, check_row) >= 79);
  fixture_close (&fixture);
}

/* What a bare word of several means here, as its row says.  */
static void
bare_words (void)
{
  static const struct { const char *bare, *full; } rows[] = {
    { "Btu", "Btu(IT)" }, { "BTU", "Btu(IT)" }, { "cal", "cal(IT)" }, { "kcal", "kcal(IT)" },
    { "therm", "therm(IT)" }, { "MMBtu", "MMBtu(IT)" }, { "Dth", "MMBtu(IT)" }, { "tonne", "t" },
    { "l", "L" }, { "gr", "grain" }, { "day", "d" }, { "Torr", "torr" }, { "lbm", "lb" },
    { "inWC", "inH2O" }, { "cc", "cm3" }, { "Nml", "Ncm3" },
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    test_about ("%s", rows[i].bare);
    const struct unit *bare = find (rows[i].bare), *full = find (rows[i].full);
    NEED (bare != NULL && full != NULL);
    NEAR (bare->factor, full->factor, 1e-15);
    CHECK (unit_same_measure (bare, full));
  }
  fixture_close (&fixture);
}

/* 1 A = FACTOR B by the meaning of the prefixes (SI Brochure, 9th ed. (2019), Table 7), of M and MM
   before scf and Btu (a thousand, a million: common practice, no source), of minute, hour, day.  */
static void
prefixes_and_times (void)
{
  static const struct { const char *a, *b; double factor; } rows[] = {
    { "kmol", "mol", 1e3 }, { "umol", "mol", 1e-6 }, { "nmol", "mol", 1e-9 },
    { "pmol", "mol", 1e-12 }, { "mg", "kg", 1e-6 }, { "ug", "kg", 1e-9 }, { "ng", "kg", 1e-12 },
    { "kt", "kg", 1e6 }, { "Mt", "kg", 1e9 }, { "mbar", "bar", 1e-3 }, { "ubar", "bar", 1e-6 },
    { "mtorr", "torr", 1e-3 }, { "ksi", "psi", 0 }, { "kpsi", "psi", 1e3 }, { "GJ", "J", 1e9 },
    { "TJ", "J", 1e12 }, { "GWh", "kWh", 1e6 }, { "MW", "W", 1e6 }, { "Gcal", "kcal", 1e6 },
    { "cP", "Pa*s", 1e-3 }, { "uPa*s", "Pa*s", 1e-6 }, { "cSt", "m2/s", 1e-6 },
    { "mL", "m3", 1e-6 }, { "ml", "m3", 1e-6 }, { "hPa", "Pa", 100 }, { "cm", "m", 0.01 },
    { "km", "m", 1e3 }, { "um", "m", 1e-6 }, { "klb", "lb", 1e3 }, { "klbmol", "lbmol", 1e3 },
    { "ktoe", "toe", 1e3 }, { "kBtu", "Btu", 1e3 }, { "MMBtu", "Btu", 1e6 },
    { "Mscf", "scf", 1e3 }, { "MMscf", "scf", 1e6 }, { "Bscf", "scf", 1e9 },
    { "MSm3", "Sm3", 1e6 }, { "kNm3", "Nm3", 1e3 }, { "NmL", "NL", 1e-3 },
    { "MMscfd", "scf/d", 1e6 }, { "MMSCFD", "scfd", 1e6 }, { "Mscfd", "scfd", 1e3 },
    { "Mscfh", "scfh", 1e3 }, { "scfm", "scf/min", 1 }, { "scfh", "scf/h", 1 },
    { "acfm", "acf/min", 1 }, { "acfh", "acf/h", 1 }, { "acfd", "acf/d", 1 },
    { "sccm", "scc/min", 1 }, { "slpm", "sL/min", 1 }, { "slpm", "sccm", 1e3 },
    { "MPa", "kPa", 1e3 }, { "h", "s", 3600 }, { "d", "h", 24 }, { "week", "d", 7 },
    { "year(365d)", "h", 8760 }, { "Am3", "acf", 35.314666721488590250 },
    { "ppbw", "ppmw", 1e-3 }, { "lb/MMscf", "lb/scf", 1e-6 }, { "gr/100scf", "gr/scf", 0.01 },
    { "kg/h", "kg/s", 1.0 / 3600 }, { "m3/h", "m3/s", 1.0 / 3600 }, { "L/min", "m3/s", 1e-3 / 60 },
    { "Nm3/h", "Nm3/s", 1.0 / 3600 }, { "Sm3/h", "Sm3/s", 1.0 / 3600 }, { "ms", "s", 1e-3 },
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    test_about ("%s in %s", rows[i].a, rows[i].b);
    const struct unit *a = find (rows[i].a), *b = find (rows[i].b);
    if (rows[i].factor <= 0) {
      CHECK (a == NULL);
      continue;
    }
    NEED (a != NULL && b != NULL);
    NEAR (a->factor / b->factor, rows[i].factor, 1e-15);
    CHECK (unit_same_measure (a, b));
  }
  fixture_close (&fixture);
}

static void
every_row_goes_and_returns (void)
{
  static const double figures[] = { 1, 850, 1.0 / 3, 6.02e23, 1e-12, -40 };
  static const double kelvins[] = { 233.15, 273.15, 288.70555555555556, 300, 1234.5, 5000 };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < unit_table_rows (fixture.table); i++) {
    struct unit_row row = unit_table_row (fixture.table, i);
    const struct unit *unit = find (row.spelling);
    test_about ("%s", row.spelling);
    NEED (unit != NULL);
    CHECK (row.source[0] != '\0' && row.name[0] != '\0' && row.quantity[0] != '\0');
    CHECK (!row.users);
    for (size_t j = 0; j < sizeof figures / sizeof figures[0]; j++) {
      double si = unit->sort == UNIT_POINT ? kelvins[j] : figures[j] * unit->factor;
      NEAR (unit_to_si (unit, unit_from_si (unit, si)), si, 1e-15);
    }
  }
  fixture_close (&fixture);
}

/* The same product written otherwise.  */
static void
order_does_not_matter (void)
{
  static const char *const groups[][5] = {
    { "kg*m/s2", "m*kg/s2", "kg*m/s^2", "m/s2*kg", "kg*m*s^-2" },
    { "kJ/(mol*K)", "kJ/(K*mol)", "kJ/mol/K", "kJ/K/mol", "kJ*mol^-1*K^-1" },
    { "Btu/(ft2*h*degF)", "Btu/h/ft2/degF", "Btu/(h*ft^2*degF)", "Btu/(degF*(h*ft2))",
      "Btu*h^-1*ft^-2*degF^-1" },
    { "lb/(ft*s)", "lb/ft/s", "lb*ft^-1*s^-1", "(lb/ft)/s", "lb*(ft*s)^-1" },
    { "gr/100scf", "gr/(100*scf)", "gr/(100scf)", "gr/scf/100", "gr*(100scf)^-1" },
    { "W/m2", "W/m^2", "W*m^-2", "J/(s*m2)", "J/s/(m*m)" },
    { "kg/m3", "kg/m^3", "kg*m^-3", "kg/(m*m*m)", "kg/(m2*m)" },
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof groups / sizeof groups[0]; i++)
    for (size_t j = 0; j < 5; j++) {
      test_about ("%s as %s", groups[i][0], groups[i][j]);
      const struct unit *first = find (groups[i][0]), *other = find (groups[i][j]);
      /* The one that divides before it multiplies is refused.  */
      if (strcmp (groups[i][j], "m/s2*kg") == 0) {
        CHECK (other == NULL && fixture.fault.kind == MESSAGE_UNIT_FORM);
        continue;
      }
      NEED (first != NULL && other != NULL);
      NEAR (other->factor, first->factor, 1e-15);
      CHECK (unit_same_measure (first, other));
    }
  fixture_close (&fixture);
}

/* Random products of base units multiply their factors, in any order (xorshift, fixed seed).  */
static void
random_products (void)
{
  static const char *const words[] = { "lb", "ft", "h", "degF", "lbmol", "psi", "Btu", "gal(US)" };
  enum { WORDS = sizeof words / sizeof words[0] };
  unsigned state = 20261201;

  fixture_open (&fixture, NULL);
  for (int round = 0; round < 200; round++) {
    char forward[100] = "", backward[100] = "", piece[120];
    double factor = 1;
    for (int i = 0; i < 4; i++) {
      state ^= state << 13; state ^= state >> 17; state ^= state << 5;
      const char *word = words[state % WORDS];
      snprintf (forward + strlen (forward), sizeof forward - strlen (forward), "%s%s",
                i > 0 ? "*" : "", word);
      snprintf (piece, sizeof piece, "%s%s%s", word, i > 0 ? "*" : "", backward);
      strcpy (backward, piece);
      factor *= find (word)->factor;
    }
    test_about ("round %d of seed 20261201: %s", round, forward);
    const struct unit *a = find (forward), *b = find (backward);
    NEED (a != NULL && b != NULL);
    NEAR (a->factor, factor, 2e-15);
    NEAR (b->factor, a->factor, 1e-15);
    CHECK (dimension_equal (a->dimension, b->dimension));
  }
  fixture_close (&fixture);
}

static const struct test_case cases[] = {
  { "published factors", published },
  { "what bare words mean", bare_words },
  { "prefixes, M and MM, times", prefixes_and_times },
  { "every unit goes to SI and returns", every_row_goes_and_returns },
  { "the order of factors does not matter", order_does_not_matter },
  { "random products", random_products },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
