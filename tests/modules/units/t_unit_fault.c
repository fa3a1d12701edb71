#include "config.h"

#include <string.h>
#include "fixture.h"
#include "libtest.h"
#include "support/text.h"

static struct fixture fixture;

/* What is offered: the spelling in fact 3; null where nothing is.  */
struct row { const char *text; enum message kind; const char *way_on, *offered; };

static void
check_rows (const struct row rows[], size_t n)
{
  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < n; i++) {
    test_about ("%s", rows[i].text);
    CHECK (fixture_find (&fixture, rows[i].text) == NULL);
    SAME_INT (fixture.fault.kind, rows[i].kind);
    if (rows[i].way_on != NULL)
      SAME_TEXT (fixture.fault.fact[1], rows[i].way_on);
    SAME_TEXT (fixture.fault.fact[2], rows[i].offered);
    if (rows[i].offered != NULL) {
      CHECK (fixture_find (&fixture, rows[i].offered) != NULL);
    }
  }
  fixture_close (&fixture);
}

#define ROWS(rows) check_rows (rows, sizeof rows / sizeof rows[0])

static void
unknown_words (void)
{
  static const struct row rows[] = {
    { "Nm3/hr", MESSAGE_UNIT_UNKNOWN, "did you mean 'Nm3/h'?", "Nm3/h" },
    { "nm3/h", MESSAGE_UNIT_UNKNOWN, "did you mean 'Nm3/h'?", "Nm3/h" },
    { "NM3/h", MESSAGE_UNIT_UNKNOWN, NULL, "Nm3/h" },
    { "Kg/h", MESSAGE_UNIT_UNKNOWN, NULL, "kg/h" },
    { "KG/H", MESSAGE_UNIT_UNKNOWN, NULL, "kg/h" },
    { "C", MESSAGE_UNIT_UNKNOWN, NULL, "degC" },
    { "F", MESSAGE_UNIT_UNKNOWN, NULL, "degF" },
    { "deg", MESSAGE_UNIT_UNKNOWN, "did you mean 'degC' or 'degF'?", "degC" },
    { "bars", MESSAGE_UNIT_UNKNOWN, NULL, "bar" },
    { "vol.%", MESSAGE_UNIT_UNKNOWN, NULL, "vol%" },
    { "wt%", MESSAGE_UNIT_UNKNOWN, NULL, "mass%" },
    { "l/mins", MESSAGE_UNIT_UNKNOWN, NULL, "l/min" },
    { "kgh", MESSAGE_UNIT_UNKNOWN, NULL, "kg/h" },
    { "Nm3h", MESSAGE_UNIT_UNKNOWN, NULL, "Nm3/h" },
    { "mgm3", MESSAGE_UNIT_UNKNOWN, NULL, "mg/m3" },
    { "H2O", MESSAGE_UNIT_UNKNOWN, NULL, "inH2O" },
    { "in", MESSAGE_UNIT_UNKNOWN, NULL, "inch" },
    { "at", MESSAGE_UNIT_UNKNOWN, NULL, "atm" },
    { "is", MESSAGE_UNIT_UNKNOWN, "did you mean 's'?", "s" },
    { "bar(gauge)", MESSAGE_UNIT_UNKNOWN, NULL, "bar(g)" },
    { "psi(abs)", MESSAGE_UNIT_UNKNOWN, NULL, "psi(a)" },
    { "mbar(vacuum)", MESSAGE_UNIT_UNKNOWN, NULL, "mbar(vac)" },
    { "kg/cm2(g)", MESSAGE_UNIT_UNKNOWN, NULL, "kgf/cm2(g)" },
    { "Kpa", MESSAGE_UNIT_UNKNOWN, NULL, "kPa" },
    { "mpa", MESSAGE_UNIT_UNKNOWN, NULL, "MPa" },
    { "lbs/hr", MESSAGE_UNIT_UNKNOWN, NULL, "lb/h" },
    { "kg/sec", MESSAGE_UNIT_UNKNOWN, NULL, "kg/s" },
    { "kJ/(mole*K)", MESSAGE_UNIT_UNKNOWN, NULL, "kJ/(mol*K)" },
    { "Mg/m3", MESSAGE_UNIT_UNKNOWN, NULL, "mg/m3" },
    { "degK", MESSAGE_UNIT_UNKNOWN, NULL, "K" },
    { "inH20", MESSAGE_UNIT_UNKNOWN, NULL, "inH2O" },
    { "kg(g)", MESSAGE_UNIT_UNKNOWN, "'kg' takes no (g)", NULL },
    { "mol(vac)", MESSAGE_UNIT_UNKNOWN, "'mol' takes no (vac)", NULL },
    { "bar(diff)", MESSAGE_UNIT_UNKNOWN, "'bar' takes no (diff)", NULL },
  };

  ROWS (rows);
}

static void
nothing_like_it (void)
{
  static const struct row rows[] = {
    { "x10", MESSAGE_UNIT_UNKNOWN, "'list units' shows the units there are", NULL },
    { "feed", MESSAGE_UNIT_UNKNOWN, "'list units' shows the units there are", NULL },
    { "raw", MESSAGE_UNIT_UNKNOWN, "'list units' shows the units there are", NULL },
    { "density", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "CO2", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "x", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "5", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "2*3", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "h2", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "N2", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "\xff\xfe", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
    { "m\xc3", MESSAGE_UNIT_UNKNOWN, NULL, NULL },
  };

  ROWS (rows);
}

static void
two_meanings (void)
{
  static const struct row rows[] = {
    { "cfm", MESSAGE_UNIT_OPEN, "acfm (actual) or scfm (standard)", NULL },
    { "CFM", MESSAGE_UNIT_OPEN, "acfm (actual) or scfm (standard)", NULL },
    { "ton/h", MESSAGE_UNIT_OPEN, "t (tonne), ton(short) or ton(long)", NULL },
    { "gal/min", MESSAGE_UNIT_OPEN, "gal(US) or gal(UK)", NULL },
    { "MBtu/h", MESSAGE_UNIT_OPEN, "kBtu (thousand) or MMBtu (million)", NULL },
    { "kg/(h*ton)", MESSAGE_UNIT_OPEN, "t (tonne), ton(short) or ton(long)", NULL },
    { "W/cfm", MESSAGE_UNIT_OPEN, "acfm (actual) or scfm (standard)", NULL },
    { "gpm", MESSAGE_UNIT_OPEN, NULL, NULL }, { "Mcf", MESSAGE_UNIT_OPEN, NULL, NULL },
    { "t/year", MESSAGE_UNIT_OPEN, "year(365d) or year(tropical)", NULL },
    { "Mm3/d", MESSAGE_UNIT_OPEN, NULL, NULL }, { "ppt", MESSAGE_UNIT_OPEN, NULL, NULL },
  };

  ROWS (rows);
  fixture_open (&fixture, NULL);
  CHECK (fixture_find (&fixture, "ton/h") == NULL);
  SAME_TEXT (fixture.fault.fact[0], "ton");
  fixture_close (&fixture);
}

static void
bad_forms (void)
{
  static const struct row rows[] = {
    { "J/mol*K", MESSAGE_UNIT_FORM,
      "a/b*c has two readings: write 'J/(mol*K)' or 'J*K/mol'", NULL },
    { "kJ/(kg/s*K)", MESSAGE_UNIT_FORM,
      "a/b*c has two readings: write 'kJ/(kg/(s*K))' or 'kJ/(kg*K/s)'", NULL },
    { "W/m2*K/h", MESSAGE_UNIT_FORM,
      "a/b*c has two readings: write 'W/(m2*K)/h' or 'W*K/m2/h'", NULL },
    { "kJ/(kg*s)*(K)", MESSAGE_UNIT_FORM,
      "a/b*c has two readings: write 'kJ/((kg*s)*(K))' or 'kJ*(K)/(kg*s)'", NULL },
    { "J/mol/K*s", MESSAGE_UNIT_FORM,
      "a/b*c has two readings: write 'J/mol/(K*s)' or 'J*s/mol/K'", NULL },
    { "(J/h)/mol*K", MESSAGE_UNIT_FORM,
      "a/b*c has two readings: write '(J/h)/(mol*K)' or '(J/h)*K/mol'", NULL },
    { "%vol", MESSAGE_UNIT_FORM, "write 'vol%'", "vol%" },
    { "%mol", MESSAGE_UNIT_FORM, "write 'mol%'", "mol%" },
    { "%mass", MESSAGE_UNIT_FORM, "write 'mass%'", "mass%" },
    { "kg/", MESSAGE_UNIT_FORM, NULL, NULL }, { "/h", MESSAGE_UNIT_FORM, NULL, NULL },
    { "kg*", MESSAGE_UNIT_FORM, NULL, NULL }, { "kg//h", MESSAGE_UNIT_FORM, NULL, NULL },
    { "kJ/(mol*K", MESSAGE_UNIT_FORM, "a bracket is not closed", NULL },
    { "kJ/mol)", MESSAGE_UNIT_FORM, "a bracket was never opened", NULL },
    { "m^", MESSAGE_UNIT_FORM, NULL, NULL }, { "m^0", MESSAGE_UNIT_FORM, NULL, NULL },
    { "m^12", MESSAGE_UNIT_FORM, NULL, NULL }, { "m^x", MESSAGE_UNIT_FORM, NULL, NULL },
    { "m^9*m^9", MESSAGE_UNIT_FORM, "the powers are too high", NULL },
    { "(((kg^9)^9)^9)^9", MESSAGE_UNIT_FORM, "the powers are too high", NULL },
    { "(((((((((kg)))))))))", MESSAGE_UNIT_FORM, "too many brackets", NULL },
    { "bar(g)/h", MESSAGE_UNIT_FORM, NULL, NULL }, { "m3/barg", MESSAGE_UNIT_FORM, NULL, NULL },
    { "%RH/h", MESSAGE_UNIT_FORM, NULL, NULL }, { "%O2^2", MESSAGE_UNIT_FORM, NULL, NULL },
    { "Nm3/Sm3", MESSAGE_UNIT_FORM, NULL, NULL }, { "Nm3^2", MESSAGE_UNIT_FORM, NULL, NULL },
    { "()", MESSAGE_UNIT_FORM, NULL, NULL },
  };

  ROWS (rows);
}

/* A text of any length is refused, and repeated in part only.  */
static void
very_long (void)
{
  enum { LENGTH = 100000 };
  static char text[LENGTH + 1];

  fixture_open (&fixture, NULL);
  memset (text, 'm', LENGTH);
  CHECK (fixture_find (&fixture, text) == NULL);
  SAME_INT (fixture.fault.kind, MESSAGE_UNIT_UNKNOWN);
  CHECK (strlen (fixture.fault.fact[0]) < 50);
  memset (text, '(', LENGTH);
  CHECK (fixture_find (&fixture, text) == NULL);
  text[120] = '\0';
  CHECK (fixture_find (&fixture, text) == NULL);
  memset (text, 'k', 120);
  CHECK (fixture_find (&fixture, text) == NULL);
  fixture_close (&fixture);
}

/* Every wrong letter in a unit gives a fault or another unit, and what is offered reads and is
   within reach.                                                                              */
static void
offers_read_and_are_near (void)
{
  static const char *const units[] = { "Nm3/h", "kJ/(mol*K)", "bar(g)", "MMscfd", "degC", "ppmw" };
  static const char letters[] = "aAhk3(/%*^.";
  char text[40];

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof units / sizeof units[0]; i++)
    for (size_t at = 0; at < strlen (units[i]); at++)
      for (size_t j = 0; letters[j] != '\0'; j++) {
        strcpy (text, units[i]);
        text[at] = letters[j];
        test_about ("%s", text);
        if (fixture_find (&fixture, text) != NULL)
          continue;
        CHECK (fixture.fault.kind == MESSAGE_UNIT_UNKNOWN || fixture.fault.kind == MESSAGE_UNIT_FORM
               || fixture.fault.kind == MESSAGE_UNIT_OPEN);
        const char *offered = fixture.fault.fact[2];
        if (offered != NULL)
          CHECK (fixture_find (&fixture, offered) != NULL);
      }
  fixture_close (&fixture);
}

static void
asking_without_fault (void)
{
  fixture_open (&fixture, NULL);
  CHECK (unit_find (fixture.table, "Nm3/hr", 6, NULL) == NULL);
  CHECK (unit_find (fixture.table, "\xff", 1, NULL) == NULL);
  CHECK (unit_find (fixture.table, "Nm3/h", 5, NULL) != NULL);
  fixture_close (&fixture);
}

static const struct test_case cases[] = {
  { "unknown words and what they may have meant", unknown_words },
  { "nothing is offered where nothing is near", nothing_like_it },
  { "words with two meanings name both", two_meanings },
  { "forms that do not read", bad_forms },
  { "texts of any length", very_long },
  { "what is offered reads", offers_read_and_are_near },
  { "asking without a fault", asking_without_fault },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
