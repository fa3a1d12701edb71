#include "config.h"

#include <stddef.h>
#include "libtest.h"
#include "units/exact.h"

/* The compiler's own reading of the decimals of the worked-out value is the nearest double.  */
static void
nearest_double (void)
{
  static const struct { const char *text; double value; } rows[] = {
    { "1", 1 }, { "0.45359237", 0.45359237 }, { "1e-6", 1e-6 }, { "4.1868e10", 41868000000.0 },
    { "1.5e+2", 150 }, { "5280*0.3048", 1609.344 }, { "0.3048^3", 0.028316846592 },
    { "0.45359237*9.80665/0.0254^2", 6894.7572931683613367 },
    { "4.1868*453.59237*5/9", 1055.05585262 }, { "0.0254^2", 0.00064516 },
    { "101325/760", 133.32236842105263158 }, { "13595.1*9.80665*0.0254", 3386.388640341 },
    { "1/3600", 0.00027777777777777777778 }, { "2/3/5", 0.13333333333333333333 },
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct exact exact;
    test_about ("%s", rows[i].text);
    CHECK (exact_read (rows[i].text, &exact));
    NEAR (exact_value (exact), rows[i].value, 0);
  }
}

static void
refuses_others (void)
{
  static const char *const texts[] = {
    "", "x", "1*", "/2", "1,5", "1 / 2", "1+2", "1**2", "2^", "2^0", "2^10", "2^-1", "1e", "1e999",
    ".", "1e-", "-1", "0x10", "nan", "inf",
  };
  struct exact exact = { 7, 1 };

  for (size_t i = 0; i < sizeof texts / sizeof texts[0]; i++) {
    test_about ("'%s'", texts[i]);
    CHECK (!exact_read (texts[i], &exact));
  }
  NEAR (exact_value (exact), 7, 0);
}

static void
powers (void)
{
  struct exact foot = { 3048, 10000 };

  NEAR (exact_value (exact_power (foot, 0)), 1, 0);
  NEAR (exact_value (exact_power (foot, 3)), 0.028316846592, 0);
  NEAR (exact_value (exact_power (foot, -1)), 3.2808398950131233596, 0);
  NEAR (exact_value (exact_times (foot, exact_power (foot, -1))), 1, 0);
}

static const struct test_case cases[] = {
  { "a factor is the nearest double", nearest_double },
  { "what is no factor is refused", refuses_others },
  { "powers", powers },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
