/* Figures as they are shown: digits, uncertainties, effects.  */
#include "config.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "libtest.h"
#include "report/report_private.h"
#include "support/number.h"
#include "support/text.h"

static const struct report_style plain = { .digits = 6 };

/* Two significant digits of the uncertainty, the value to the same digit: JCGM 100:2008, 7.2.6
   (its example: 10.057 62 with 27 in the last place but three becomes 10.058 and 0.027).        */
static void
value_follows_its_uncertainty (void)
{
  static const struct { double value, uncertainty; const char *shown, *spread; } rows[] = {
    { 10.05762, 0.027, "10.058", "0.027" },
    { 1040.98, 2.29, "1041.0", "2.3" },
    { 1040.98, 23.0, "1041", "23" },
    { 1040.98, 229.0, "1040", "230" },
    { 88750.0, 1234.0, "88800", "1200" },
    { 999.996, 0.23, "1000.00", "0.23" },           /* a digit more before the sign */
    { 5.0, 0.0996, "5.00", "0.10" },                /* the uncertainty rounds up a place */
    { 5.0, 9.96, "5", "10" },
    { -12.5, 0.31, "-12.50", "0.31" },
    { 0.04, 2.31, "0.0", "2.3" },                   /* all digits drowned */
    { -0.04, 2.31, "0.0", "2.3" },
    { 0.0, 0.5, "0.00", "0.50" },
    { 1.2345678e-7, 2.5e-9, "1.235e-7", "2.5e-9" },
    { 2.5e12, 3.1e10, "2.500e12", "3.1e10" },
    { 0.5, 1e-6, "0.5000000", "0.0000010" },
    { 3.0, 5e8, "0", "500000000" }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct text shown, spread;
    text_init (&shown);
    text_init (&spread);
    test_about ("%.9g with %.9g", rows[i].value, rows[i].uncertainty);
    figure_write_uncertain (&shown, rows[i].value, &spread, rows[i].uncertainty);
    SAME_TEXT (shown.bytes, rows[i].shown);
    SAME_TEXT (spread.bytes, rows[i].spread);
    text_clear (&shown);
    text_clear (&spread);
  }
}

static void
one_text_takes_both (void)
{
  struct text both;
  text_init (&both);
  figure_write_uncertain (&both, 1040.98, &both, 2.29);
  SAME_INT (both.length, strlen ("1041.0") + 1 + strlen ("2.3"));
  SAME_TEXT (both.bytes, "1041.0");
  SAME_TEXT (both.bytes + strlen ("1041.0") + 1, "2.3");
  text_clear (&both);
}

static double
read_back (const struct text *text)
{
  double value = (double) NAN;
  bool too_large;
  const size_t sign = text->length > 0 && text->bytes[0] == '-' ? 1 : 0;
  if (!number_read (text->bytes + sign, text->length - sign, &value, &too_large))
    return (double) NAN;
  return sign > 0 ? -value : value;
}

static double
random_part (uint64_t *seed)
{
  *seed = *seed * 6364136223846793005u + 1442695040888963407u;  /* Knuth, TAOCP 2, 3.3.4 */
  return (double) (*seed >> 11) / 9007199254740992.0;
}

/* Whatever is shown reads back, and is off by no more than half a digit of the uncertainty's two
   (a tenth of it at most, and a hair for the reading), of both figures.                         */
static void
shown_reads_back (void)
{
  uint64_t seed = 20241;
  for (int i = 0; i < 4000; i++) {
    const double sign = random_part (&seed) < 0.5 ? -1.0 : 1.0;
    const double value = sign * pow (10.0, 24.0 * random_part (&seed) - 12.0);
    const double uncertainty = fabs (value) * pow (10.0, 10.0 * random_part (&seed) - 8.0);
    struct text shown, spread;
    text_init (&shown);
    text_init (&spread);
    figure_write_uncertain (&shown, value, &spread, uncertainty);
    test_about ("seed 20241, case %d: %.17g with %.17g", i, value, uncertainty);
    CHECK (fabs (read_back (&shown) - value) <= 0.0501 * uncertainty);
    CHECK (fabs (read_back (&spread) - uncertainty) <= 0.0501 * uncertainty);
    text_clear (&shown);
    text_clear (&spread);
  }
}

static void
digits_as_set (void)
{
  static const struct { double value; int digits; const char *shown; } rows[] = {
    { 3020.77, 6, "3020.77" }, { 0.4, 6, "0.400000" }, { 850.0, 6, "850.000" },
    { 850.0, 3, "850" }, { -40.0, 4, "-40.00" }, { (double) NAN, 6, "-" },
    { (double) INFINITY, 6, "-" }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    const struct report_style style = { .digits = rows[i].digits };
    struct text text;
    text_init (&text);
    figure_write (&text, &style, rows[i].value);
    SAME_TEXT (text.bytes, rows[i].shown);
    text_clear (&text);
  }
}

static void
effects_have_sign_and_two_digits (void)
{
  static const struct { double effect; const char *shown; } rows[] = {
    { 0.0549, "+5.5 %" }, { -0.123, "-12 %" }, { 1.7, "+170 %" }, { 0.0146, "+1.5 %" },
    { -2.4e-4, "-0.024 %" }, { 4.2e-6, "+0.00042 %" }, { 0.00996, "+1.0 %" }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct text text;
    text_init (&text);
    effect_write (&text, rows[i].effect);
    SAME_TEXT (text.bytes, rows[i].shown);
    text_clear (&text);
  }
}

static void
sign_is_found (void)
{
  SAME_INT (figure_whole ("1040.98"), 4);
  SAME_INT (figure_whole ("-12"), 3);
  SAME_INT (figure_whole ("1.5e-7"), 1);
  SAME_INT (figure_whole ("2e12"), 1);
  CHECK (figure_is_uncertain (1.0, 0.1));
  CHECK (!figure_is_uncertain (1.0, 0.0));
  CHECK (!figure_is_uncertain (1.0, (double) NAN));
  CHECK (!figure_is_uncertain ((double) NAN, 0.1));
}

static void
names_lead_to_their_figures (void)
{
  struct text text;
  text_init (&text);
  leader_add (&text, &plain, "CH4", 10);
  SAME_TEXT (text.bytes, "CH4 ......");
  text_empty (&text);
  leader_add (&text, &plain, "", 4);
  SAME_TEXT (text.bytes, "    ");
  text_clear (&text);
}

static const struct test_case cases[] = {
  { "a value is rounded to its uncertainty", value_follows_its_uncertainty },
  { "one text takes value and uncertainty", one_text_takes_both },
  { "what is shown reads back within rounding", shown_reads_back },
  { "digits are as set, what is no number is a dash", digits_as_set },
  { "effects have a sign and two digits", effects_have_sign_and_two_digits },
  { "the decimal sign and an uncertainty are found", sign_is_found },
  { "dots lead from name to figure", names_lead_to_their_figures },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
