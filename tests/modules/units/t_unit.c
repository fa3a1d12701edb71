#include "config.h"

#include <math.h>
#include <string.h>
#include "fixture.h"
#include "libtest.h"
#include "units/dimension.h"

static struct fixture fixture;

static const struct unit *
find (const char *text)
{
  test_about ("%s", text);
  return fixture_find (&fixture, text);
}

static void
checks_sort (const char *text, enum unit_sort sort, const char *spelling)
{
  const struct unit *unit = find (text);

  NEED (unit != NULL);
  SAME_INT (unit->sort, sort);
  SAME_TEXT (unit->spelling, spelling);
}

static void
gauge_and_absolute (void)
{
  static const char *const gauge[] = {
    "bar(g)", "barg", "psi(g)", "psig", "PSIG", "kPa(g)", "kPag", "mbar(g)", "mbarg", "inH2O(g)",
    "kgf/cm2(g)", "inHg(60degF)(g)", "MPag", "mmHg(g)",
  };
  static const char *const absolute[] = {
    "bar(a)", "bara", "psi(a)", "psia", "PSIA", "kPa(a)", "kPaa", "inHg(a)", "torr(a)",
  };
  static const char *const vacuum[] = { "mbar(vac)", "mmHg(vac)", "inHg(vac)", "kPa(vac)" };
  static const char *const bare[] = { "bar", "psi", "kPa", "inH2O", "kgf/cm2", "lbf/ft2", "atm" };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof gauge / sizeof gauge[0]; i++)
    checks_sort (gauge[i], UNIT_GAUGE, gauge[i]);
  for (size_t i = 0; i < sizeof absolute / sizeof absolute[0]; i++)
    checks_sort (absolute[i], UNIT_ABSOLUTE, absolute[i]);
  for (size_t i = 0; i < sizeof vacuum / sizeof vacuum[0]; i++)
    checks_sort (vacuum[i], UNIT_VACUUM, vacuum[i]);
  for (size_t i = 0; i < sizeof bare / sizeof bare[0]; i++)
    checks_sort (bare[i], UNIT_SCALE, bare[i]);
  fixture_close (&fixture);
}

/* Fixed points: ice 273.15 K = 0 degC = 32 degF = 491.67 degR (SI Brochure 2019, section 2.3.1;
   NIST SP 811 (2008), App. B.8); -40 is the same on both scales.                               */
static void
temperatures (void)
{
  static const struct { const char *unit; double figure, K; } points[] = {
    { "degC", 0, 273.15 }, { "degF", 32, 273.15 }, { "degR", 491.67, 273.15 },
    { "K", 273.15, 273.15 }, { "degF", 212, 373.15 }, { "degC", -40, 233.15 },
    { "degF", -40, 233.15 }, { "degF", -459.67, 0 }, { "degF", 60, 288.70555555555555556 },
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof points / sizeof points[0]; i++) {
    const struct unit *unit = find (points[i].unit);
    NEED (unit != NULL);
    SAME_INT (unit->sort, UNIT_POINT);
    NEAR (unit_to_si (unit, points[i].figure), points[i].K, points[i].K > 0 ? 1e-15 : 1e-13);
    CHECK (fabs (unit_from_si (unit, points[i].K) - points[i].figure) < 2e-13);
  }
  checks_sort ("degF(diff)", UNIT_DIFFERENCE, "degF(diff)");
  checks_sort ("K(diff)", UNIT_DIFFERENCE, "K(diff)");
  NEAR (unit_to_si (find ("degF(diff)"), 9), 5, 1e-15);
  NEAR (unit_difference_to_si (find ("degF"), 9), 5, 1e-15);
  NEAR (unit_difference_to_si (find ("degC"), 9), 9, 0);
  fixture_close (&fixture);
}

static void
degrees_inside_are_differences (void)
{
  fixture_open (&fixture, NULL);
  static const char *const texts[] = { "kJ/(kg*degC)", "kJ/(kg*K)", "kJ/kg/K" };
  for (size_t i = 0; i < sizeof texts / sizeof texts[0]; i++) {
    const struct unit *unit = find (texts[i]);
    NEED (unit != NULL);
    SAME_INT (unit->sort, UNIT_SCALE);
    NEAR (unit->factor, 1000, 0);
    NEAR (unit->offset, 0, 0);
  }
  /* 1 Btu(IT)/(lb degF) = 4186.8 J/(kg K), exact (NIST SP 811 (2008), App. B.8).  */
  NEAR (unit_to_si (find ("Btu/(lb*degF)"), 1), 4186.8, 1e-15);
  fixture_close (&fixture);
}

static void
checks_family (const char *text, enum reference_family family, int power)
{
  const struct unit *unit = find (text);

  NEED (unit != NULL);
  SAME_INT (unit->family, family);
  SAME_INT (unit->family_power, power);
}

static void
reference_volumes (void)
{
  fixture_open (&fixture, NULL);
  checks_family ("Nm3", FAMILY_NORMAL, 1);
  checks_family ("Nm3/h", FAMILY_NORMAL, 1);
  checks_family ("NL/min", FAMILY_NORMAL, 1);
  checks_family ("mg/Nm3", FAMILY_NORMAL, -1);
  checks_family ("kWh/Nm3", FAMILY_NORMAL, -1);
  checks_family ("MJ/Sm3", FAMILY_STANDARD, -1);
  checks_family ("Sm3/d", FAMILY_STANDARD, 1);
  checks_family ("MMscfd", FAMILY_SCF, 1);
  checks_family ("SCFM", FAMILY_SCF, 1);
  checks_family ("gr/100scf", FAMILY_SCF, -1);
  checks_family ("Btu/scf", FAMILY_SCF, -1);
  checks_family ("sccm", FAMILY_SCCM, 1);
  checks_family ("slpm", FAMILY_SCCM, 1);
  checks_family ("m3/h", FAMILY_NONE, 0);
  checks_family ("Nm3/Nm3", FAMILY_NONE, 0);
  CHECK (find ("acfm")->actual);
  CHECK (find ("lb/acf")->actual);
  CHECK (!find ("scfm")->actual);
  SAME_TEXT (reference_family_name (FAMILY_NORMAL), "Nm3");
  SAME_TEXT (reference_family_name (FAMILY_STANDARD), "Sm3");
  SAME_TEXT (reference_family_name (FAMILY_SCF), "scf");
  SAME_TEXT (reference_family_name (FAMILY_SCCM), "sccm");
  fixture_close (&fixture);
}

static void
shares (void)
{
  static const struct { const char *text; enum ratio ratio; double factor; } rows[] = {
    { "%", RATIO_PLAIN, 0.01 }, { "mol%", RATIO_MOLE, 0.01 }, { "ppm", RATIO_MOLE, 1e-6 },
    { "ppb", RATIO_MOLE, 1e-9 }, { "mol/mol", RATIO_MOLE, 1 }, { "umol/mol", RATIO_MOLE, 1e-6 },
    { "kmol/h/(kmol/h)", RATIO_MOLE, 1 }, { "Nm3/Nm3", RATIO_MOLE, 1 },
    { "scfm/scfm", RATIO_MOLE, 1 }, { "mass%", RATIO_MASS, 0.01 }, { "ppmw", RATIO_MASS, 1e-6 },
    { "kg/kg", RATIO_MASS, 1 }, { "mg/kg", RATIO_MASS, 1e-6 }, { "g/kg", RATIO_MASS, 1e-3 },
    { "gr/lb", RATIO_MASS, 1.0 / 7000 }, { "vol%", RATIO_VOLUME, 0.01 },
    { "m3/m3", RATIO_VOLUME, 1 }, { "m^3/m3", RATIO_VOLUME, 1 }, { "L/m3", RATIO_VOLUME, 1e-3 },
    { "MJ/MJ", RATIO_ENERGY, 1 }, { "kW/MW", RATIO_ENERGY, 1e-3 },
    { "m/m", RATIO_NONE, 1 }, { "h/d", RATIO_NONE, 1.0 / 24 },
    { "kg/mol/(kg/mol)", RATIO_NONE, 1 }, { "kg/m3", RATIO_NONE, 1 },
    { "%RH", RATIO_NONE, 0.01 }, { "%O2", RATIO_NONE, 0.01 },
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    const struct unit *unit = find (rows[i].text);
    NEED (unit != NULL);
    SAME_INT (unit->ratio, rows[i].ratio);
    NEAR (unit->factor, rows[i].factor, 1e-15);
  }
  checks_sort ("%RH", UNIT_HUMIDITY, "%RH");
  checks_sort ("%O2", UNIT_OXYGEN, "%O2");
  fixture_close (&fixture);
}

static void
same_measure (void)
{
  static const struct { const char *a, *b; bool same; } rows[] = {
    { "kg/h", "lb/h", true }, { "Nm3/h", "NL/min", true }, { "Nm3/h", "Sm3/h", false },
    { "Nm3/h", "m3/h", false }, { "mg/Nm3", "mg/m3", false }, { "mol%", "ppm", true },
    { "mol%", "mass%", false }, { "vol%", "mol%", false }, { "bar(g)", "bar(a)", true },
    { "degC", "K(diff)", true }, { "%RH", "%O2", false }, { "%RH", "m/m", false },
    { "scfm", "MMscfd", true }, { "acfm", "m3/h", true }, { "kg/h", "kmol/h", false },
    { "slpm", "sccm", true }, { "slpm", "NL/min", false },
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    const struct unit *a = find (rows[i].a), *b = find (rows[i].b);
    NEED (a != NULL && b != NULL);
    test_about ("%s and %s", rows[i].a, rows[i].b);
    SAME_INT (unit_same_measure (a, b), rows[i].same);
    SAME_INT (unit_same_measure (b, a), rows[i].same);
  }
  fixture_close (&fixture);
}

static void
twins (void)
{
  static const struct { const char *typed, *ascii; } rows[] = {
    { "m³/h", "m3/h" }, { "Nm³/h", "Nm3/h" }, { "°C", "degC" }, { "℃", "degC" }, { "°F", "degF" },
    { "℉", "degF" }, { "º", "" }, { "ºC", "degC" }, { "µmol/mol", "umol/mol" },
    { "μmol/mol", "umol/mol" }, { "kJ/(mol·K)", "kJ/(mol*K)" }, { "kJ/(mol×K)", "kJ/(mol*K)" },
    { "kJ/(mol⋅K)", "kJ/(mol*K)" }, { "kg·m⁻³", "kg*m^-3" }, { "kg*m^−3", "kg*m^-3" },
    { "W/m²", "W/m2" }, { "inH₂O(g)", "inH2O(g)" }, { "%O₂", "%O2" }, { "°F(diff)", "degF(diff)" },
    { "inHg(60°F)", "inHg(60degF)" }, { "ℓ/min", "l/min" },
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    const struct unit *unit = find (rows[i].typed);
    if (rows[i].ascii[0] == '\0') {
      CHECK (unit == NULL);
      continue;
    }
    NEED (unit != NULL);
    SAME_TEXT (unit->spelling, rows[i].ascii);
    CHECK (unit == fixture_find (&fixture, rows[i].ascii));
  }
  fixture_close (&fixture);
}

static void
address_tells_apart (void)
{
  fixture_open (&fixture, NULL);
  const struct unit *unit = find ("SCFM");
  NEED (unit != NULL);
  CHECK (find ("SCFM") == unit);
  CHECK (find ("scfm") != unit);
  SAME_TEXT (unit->spelling, "SCFM");
  SAME_TEXT (find ("scfm")->spelling, "scfm");
  NEAR (unit->factor, find ("scfm")->factor, 0);
  CHECK (unit_find (fixture.table, "scfm of", 4, &fixture.fault) == find ("scfm"));
  fixture_close (&fixture);
}

static const struct test_case cases[] = {
  { "gauge, absolute, vacuum and bare pressures", gauge_and_absolute },
  { "points and differences of temperature", temperatures },
  { "degrees inside a unit are differences", degrees_inside_are_differences },
  { "volumes at reference conditions", reference_volumes },
  { "shares by what cancels", shares },
  { "what converts by a factor alone", same_measure },
  { "UTF-8 has its ASCII twins", twins },
  { "a unit is one address", address_tells_apart },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
