#include "config.h"
#include "support/number.h"

#include <locale.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "libtest.h"
#include "support/text.h"

/* Reading.  */

static void
good_numbers (void)
{
  static const struct { const char *bytes; double want; } rows[] = {
    { "0", 0 }, { "850", 850 }, { ".5", 0.5 }, { "5.", 5 }, { "1e3", 1000 }, { "1E3", 1000 },
    { "1e+3", 1000 }, { "1e-3", 0.001 }, { "1_000", 1000 }, { "1_0_0.2_5", 100.25 },
    { "00012", 12 }, { "0.000", 0 }, { "0e999999999999", 0 }, { "1.25e2", 125 },
    { "1e22", 1e22 }, { "1e23", 1e23 }, { "9007199254740993", 9007199254740992.0 },
    { "9007199254740995", 9007199254740996.0 }, { "0.1", 0.1 }, { "8.314462618", 8.314462618 },
    { "1.7976931348623157e308", 1.7976931348623157e308 }, { "4.9e-324", 0x1p-1074 },
    { "2.2250738585072011e-308", 2.2250738585072011e-308 }, { "1e-400", 0 },
    { "1e-99999999999999999999", 0 }, { "1040.9812345678901", 1040.9812345678901 },
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    double value = -1;
    bool too_large = true;

    test_about ("%s", rows[i].bytes);
    CHECK (number_read (rows[i].bytes, strlen (rows[i].bytes), &value, &too_large));
    CHECK (!too_large);
    CHECK (memcmp (&value, &rows[i].want, sizeof value) == 0);
  }
}

static void
what_is_no_number (void)
{
  static const char *const rows[] = {
    "", ".", "e3", ".e3", "1e", "1e+", "1e-", "1ee3", "1.2.3", "1,5", "1,250", "1 250", " 1", "1 ",
    "-1", "+1", "0x10", "0x1p3", "1p3", "inf", "nan", "infinity", "1f", "_1", "1_", "1__0", "1_.5",
    "1._5", "1_e3", "1e1_0", "1e_1", "--1", "1-", "1e3.5", "0b1", "\xD9\xA1", "1\n",
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    double value = 7;
    bool too_large = true;

    test_about ("%s", rows[i]);
    CHECK (!number_read (rows[i], strlen (rows[i]), &value, &too_large));
    CHECK (!too_large);
    NEAR (value, 7, 0);
  }
}

static void
only_the_bytes_given (void)
{
  double value = 0;
  bool too_large;

  CHECK (number_read ("12345", 2, &value, &too_large));
  NEAR (value, 12, 0);
  CHECK (!number_read ("1\0" "2", 3, &value, &too_large));
  CHECK (!number_read ("12e5", 3, &value, &too_large));
}

static void
what_is_too_large (void)
{
  static const char *const rows[] = {
    "1e309", "1.7976931348623159e308", "1e99999999999999999999", "999e307", "1e2147483648",
    "0.00001e314", "1e18446744073709551616",
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    double value = 7;
    bool too_large = false;

    test_about ("%s", rows[i]);
    CHECK (!number_read (rows[i], strlen (rows[i]), &value, &too_large));
    CHECK (too_large);
    NEAR (value, 7, 0);
  }
}

/* N digits and more of the point half-way between 1 and the next double, 1 + 2^-53; only a digit
   far behind decides.                                                                          */
static void
digits_without_end (void)
{
  static const char half_way[] = "1.00000000000000011102230246251565404236316680908203125";
  struct text text;
  double value = 0;
  bool too_large;

  text_init (&text);
  text_add (&text, half_way);
  CHECK (number_read (text.bytes, text.length, &value, &too_large));
  CHECK (value <= 1);                                      /* half to even */
  text_add_repeated (&text, '0', 2000);
  CHECK (number_read (text.bytes, text.length, &value, &too_large));
  CHECK (value <= 1);
  text_add (&text, "1");
  CHECK (number_read (text.bytes, text.length, &value, &too_large));
  NEAR (value, 1 + 0x1p-52, 0);
  text_empty (&text);
  text_add_repeated (&text, '9', 1000000);
  CHECK (!number_read (text.bytes, text.length, &value, &too_large));
  CHECK (too_large);
  text_add (&text, "e-1000000");
  CHECK (number_read (text.bytes, text.length, &value, &too_large));
  NEAR (value, 1, 0);
  text_empty (&text);
  text_add (&text, "0.");
  text_add_repeated (&text, '0', 1000000);
  text_add (&text, "25e1000001");
  CHECK (number_read (text.bytes, text.length, &value, &too_large));
  NEAR (value, 2.5, 0);
  text_clear (&text);
}

/* Writing.  */

static void
written (double value, int digits, const char *want)
{
  struct text text;

  text_init (&text);
  number_write (&text, value, digits);
  test_about ("%.17g in %d digits", value, digits);
  SAME_TEXT (text.bytes, want);
  text_clear (&text);
}

static void
as_a_laboratory_writes (void)
{
  written (3020.769, 6, "3020.77");
  written (0.4, 6, "0.400000");
  written (58.2, 6, "58.2000");
  written (0.085, 6, "0.0850000");
  written (101325, 6, "101325");
  written (1234567.8, 6, "1234570");
  written (123456789, 6, "123457000");
  written (-12.5, 3, "-12.5");
  written (0, 6, "0");
  written (-0.0, 6, "0");
  written (1, 1, "1");
  written (7, 8, "7.0000000");
}

static void
far_out_with_an_exponent (void)
{
  written (1e9, 6, "1.00000e9");
  written (-2.5e12, 6, "-2.50000e12");
  written (1e-7, 6, "1.00000e-7");
  written (0.0001, 6, "0.000100000");
  written (0.00012345678, 6, "0.000123457");
  written (0.00009876543, 6, "9.87654e-5");
  written (3e10, 1, "3e10");
  written (5e-324, 6, "4.94066e-324");
  written (1.7976931348623157e308, 6, "1.79769e308");
}

/* Rounding up can make a figure a digit longer, and move it over either bound.  */
static void
rounding_over_a_power_of_ten (void)
{
  written (999999.7, 6, "1000000");
  written (999999.4, 6, "999999");
  written (99999.96, 6, "100000");
  written (9.999996, 6, "10.0000");
  written (0.9999996, 6, "1.00000");
  written (999999999.7, 6, "1.00000e9");
  written (999999499.0, 6, "999999000");
  written (0.00009999999, 6, "0.000100000");
  written (9.9, 1, "10");
  written (0.96, 1, "1");
}

/* Ties that a double can hold go to the even digit, as printf rounds them.  */
static void
half_to_even (void)
{
  written (0.5, 1, "0.5");
  written (2.5, 1, "2");
  written (3.5, 1, "4");
  written (0.125, 2, "0.12");
  written (0.375, 2, "0.38");
  written (1000005, 6, "1000000");
  written (1000015, 6, "1000020");
  written (2.675, 3, "2.67");                              /* it is a little less than that */
}

/* Values of every kind from a fixed seed.  */
static double
some_value (uint64_t *seed, int i)
{
  uint64_t bits;
  double any;

  *seed ^= *seed << 13;
  *seed ^= *seed >> 7;
  *seed ^= *seed << 17;
  bits = *seed & (UINT64_MAX >> 1);
  switch (i % 6) {
  case 0:
    memcpy (&any, &bits, sizeof any);
    return isfinite (any) && any > 0 ? any : 1;
  case 1:
    return (double) (bits % 1000000000 + 1) / 1000;
  case 2:
    return (double) (bits % 100000 + 1) / 8;               /* many ties */
  case 3:
    return ldexp (1, (int) (bits % 180) - 90);
  case 4:
    return (double) (bits % 1000000 + 1) * pow (10, (double) (bits >> 40 & 31) - 16);
  default:
    return (double) (bits >> 11) * 0x1p-30;
  }
}

/* What number_write must give, made from printf's digits.  */
static void
rearranged (double value, int digits, char *made)
{
  char printed[64], figures[32];
  int exponent, count = 0;

  snprintf (printed, sizeof printed, "%.*e", digits - 1, value);
  exponent = atoi (strchr (printed, 'e') + 1);
  for (const char *c = printed; *c != 'e'; c++)
    if (*c != '.')
      figures[count++] = *c;
  figures[count] = '\0';
  if (exponent < -4 || exponent >= 9)
    sprintf (made, "%.1s%s%se%d", figures, digits > 1 ? "." : "", figures + 1, exponent);
  else if (exponent < 0)
    sprintf (made, "0.%.*s%s", -exponent - 1, "000", figures);
  else if (exponent + 1 >= digits)
    sprintf (made, "%s%.*s", figures, exponent + 1 - digits, "000000000");
  else
    sprintf (made, "%.*s.%s", exponent + 1, figures, figures + exponent + 1);
}

static void
rounds_as_printf (void)
{
  uint64_t seed = UINT64_C (88172645463325252);
  struct text text;
  char want[64];
  int wrong = 0;

  text_init (&text);
  for (int i = 0; i < 200000; i++) {
    double value = some_value (&seed, i);
    int digits = i % 17 + 1;

    rearranged (value, digits, want);
    text_empty (&text);
    number_write (&text, value, digits);
    if (strcmp (text.bytes, want) != 0 && wrong++ == 0)
      written (value, digits, want);
  }
  SAME_INT (wrong, 0);
  text_clear (&text);
}

static void
exact_as_printf_and_back (void)
{
  uint64_t seed = UINT64_C (362436069362436069);
  struct text text;
  int wrong = 0, lost = 0;

  text_init (&text);
  for (int i = 0; i < 200000; i++) {
    double value = some_value (&seed, i), back = 0;
    char want[64];
    bool too_large;

    for (int precision = 15; precision <= 17; precision++) {
      snprintf (want, sizeof want, "%.*g", precision, value);
      back = strtod (want, NULL);
      if (memcmp (&back, &value, sizeof value) == 0)
        break;
    }
    text_empty (&text);
    number_write_exact (&text, value);
    if (strcmp (text.bytes, want) != 0 && wrong++ == 0)
      SAME_TEXT (text.bytes, want);
    lost += !number_read (text.bytes, text.length, &back, &too_large)
            || memcmp (&back, &value, sizeof value) != 0;
  }
  SAME_INT (wrong, 0);
  SAME_INT (lost, 0);
  text_clear (&text);
}

static void
exact (double value, const char *want)
{
  struct text text;

  text_init (&text);
  number_write_exact (&text, value);
  SAME_TEXT (text.bytes, want);
  text_clear (&text);
}

static void
exact_figures (void)
{
  exact (0, "0");
  exact (-0.0, "0");
  exact (0.1, "0.1");
  exact (-1040.98, "-1040.98");
  exact (0.1 + 0.2, "0.30000000000000004");
  exact (1.0 / 3, "0.3333333333333333");
  exact (1e15, "1e+15");
  exact (123456789012345, "123456789012345");
  exact (9007199254740992, "9007199254740992");
  exact (1e22, "1e+22");
  exact (1e-5, "1e-05");
  exact (1.7976931348623157e308, "1.7976931348623157e+308");
  exact (5e-324, "4.94065645841247e-324");
}

/* Figures far out go through printf and strtod: their decimal sign must not show.  */
static void
the_same_in_every_locale (void)
{
  static const char *const names[] = { "C", "de_DE.UTF-8", "de_DE.utf8", "fr_FR.UTF-8", "de_DE" };

  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++) {
    double value = 0;
    bool too_large;

    if (setlocale (LC_NUMERIC, names[i]) == NULL)
      continue;
    written (1.5e-100, 6, "1.50000e-100");
    written (12.5, 6, "12.5000");
    exact (1.5e-100, "1.5e-100");
    exact (0.1 + 0.2, "0.30000000000000004");
    CHECK (number_read ("1.234567890123456789", 20, &value, &too_large));
    NEAR (value, 1.234567890123456789, 0);
    CHECK (!number_read ("1,5", 3, &value, &too_large));
  }
  setlocale (LC_NUMERIC, "C");
}

static void
how_it_is_typed (void)
{
  static const struct { const char *typed; int place, end_zeros; bool point; } rows[] = {
    { "850", 0, 1, false }, { "2_200", 0, 2, false }, { "1_000_000", 0, 6, false },
    { "1057", 0, 0, false }, { "58.20", -2, 1, true }, { "58.", 0, 0, true },
    { ".5", -1, 0, true }, { "1.5e3", 2, 0, true }, { "15e3", 3, 0, false },
    { "10E-2", -2, 1, false }, { "1.20e+2", 0, 1, true }, { "0", 0, 1, false }, { "", 0, 0, false }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    const struct number_digits digits = number_digits (rows[i].typed);

    if (digits.place != rows[i].place || digits.end_zeros != rows[i].end_zeros
        || digits.point != rows[i].point)
      printf ("# %s: %d, %d, %d\n", rows[i].typed, digits.place, digits.end_zeros, digits.point);
    CHECK (digits.place == rows[i].place);
    CHECK (digits.end_zeros == rows[i].end_zeros);
    CHECK (digits.point == rows[i].point);
  }
  CHECK (number_digits ("1e99999999999").place > 308);
}

/* Half a last digit by hand; 0.5 % where a whole number's zeros at the end leave it worse.  */
static void
what_it_is_good_to (void)
{
  static const struct { const char *typed; double value, half; } rows[] = {
    { "1057", 1057, 0.5 }, { "3380", 3380, 5 }, { "21800", 21800, 50 }, { "2_200", 2200, 11 },
    { "850", 850, 4.25 }, { "100", 100, 0.5 }, { "97", 97, 0.485 }, { "3", 3, 0.015 },
    { "3.2", 3.2, 0.05 }, { "0.50", 0.5, 0.005 }, { "58.", 58, 0.5 }, { "1.5e3", 1500, 50 },
    { "15e3", 15000, 75 }, { "5e-1", 0.5, 0.05 }, { "0", 0, 0.5 }, { "0.0", 0, 0.05 }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    test_about ("%s", rows[i].typed);
    NEAR (number_rounding (rows[i].typed, rows[i].value), rows[i].half, 1e-14);
  }
}

static const struct test_case cases[] = {
  { "good numbers", good_numbers },
  { "what is no number", what_is_no_number },
  { "only the bytes given", only_the_bytes_given },
  { "what is too large", what_is_too_large },
  { "digits without end", digits_without_end },
  { "as a laboratory writes", as_a_laboratory_writes },
  { "far out with an exponent", far_out_with_an_exponent },
  { "rounding over a power of ten", rounding_over_a_power_of_ten },
  { "half to even", half_to_even },
  { "rounds as printf", rounds_as_printf },
  { "exact as printf, and back", exact_as_printf_and_back },
  { "exact figures", exact_figures },
  { "how it is typed", how_it_is_typed },
  { "what it is good to", what_it_is_good_to },
  { "the same in every locale", the_same_in_every_locale },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
