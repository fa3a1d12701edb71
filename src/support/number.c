#include "config.h"
#include "support/number.h"

#include <assert.h>
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include "support/decimal.h"
#include "support/text.h"

/* Reading.

   The digits are put together without a decimal point, as a whole number and an exponent of ten
   (12.5 is 125e-1), so what strtod is given reads the same whatever decimal sign a locale has.  */

enum {
  /* Half-way between two doubles lie numbers of up to 767 digits; beyond that only whether
     anything is left decides, which one more digit tells.                                      */
  MOST_READ = 770,
  EXPONENT_BOUND = 100000000,             /* beyond any double, far from overflow */
  TYPED_EXPONENT = 400,                   /* beyond any double: no need to count on */
  WHOLE_ROOM = 24,                        /* digits of a long, and a null byte */
  EXACT_DIGITS = 15,                      /* 10^15 < 2^53 */
  EXACT_POWER = 22                        /* 10^22 is a double */
};

struct scan {
  const char *at, *end;
  char digits[MOST_READ + 16];            /* room for the last digit and the exponent */
  size_t count;                           /* digits kept, without zeros in front */
  long exponent;                          /* of ten, of the last digit kept */
  bool any;                               /* a digit was seen */
};

static bool
is_digit (char c)
{
  return c >= '0' && c <= '9';
}

static void
keep_digit (struct scan *scan, char digit, bool behind_point)
{
  scan->any = true;
  if (scan->count < MOST_READ) {
    if (scan->count > 0 || digit != '0')
      scan->digits[scan->count++] = digit;
    if (behind_point)
      scan->exponent--;
    return;
  }
  if (digit != '0')
    scan->digits[MOST_READ] = '1';
  if (!behind_point)
    scan->exponent++;
}

/* digits = digit { ["_"] digit }  */
static void
scan_digits (struct scan *scan, bool behind_point)
{
  bool between = false;                   /* '_' stands only between digits */

  while (scan->at < scan->end) {
    if (is_digit (*scan->at)) {
      keep_digit (scan, *scan->at, behind_point);
      between = true;
    } else if (*scan->at == '_' && between && scan->end - scan->at > 1
               && is_digit (scan->at[1]))
      between = false;
    else
      break;
    scan->at++;
  }
}

/* exponent = ("e" | "E") ["+" | "-"] digit { digit }  */
static bool
scan_exponent (struct scan *scan)
{
  long exponent = 0;
  bool negative = false, any = false;

  if (scan->at == scan->end || (*scan->at != 'e' && *scan->at != 'E'))
    return true;
  scan->at++;
  if (scan->at < scan->end && (*scan->at == '+' || *scan->at == '-'))
    negative = *scan->at++ == '-';
  for (; scan->at < scan->end && is_digit (*scan->at); scan->at++) {
    any = true;
    if (exponent < EXPONENT_BOUND)
      exponent = exponent * 10 + (*scan->at - '0');
  }
  scan->exponent += negative ? -exponent : exponent;
  return any;
}

/* Where digits and power of ten are both doubles, one multiplication or division rounds once and
   so rightly (W. D. Clinger, Proc. PLDI (1990) 92).                                            */
static bool
value_at_once (const struct scan *scan, double *value)
{
  static const double powers[EXACT_POWER + 1] = {
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16,
    1e17, 1e18, 1e19, 1e20, 1e21, 1e22,
  };
  uint64_t digits = 0;

  if (scan->count > EXACT_DIGITS || labs (scan->exponent) > EXACT_POWER)
    return false;
  for (size_t i = 0; i < scan->count; i++)
    digits = digits * 10 + (uint64_t) (scan->digits[i] - '0');
  *value = scan->exponent < 0 ? (double) digits / powers[-scan->exponent]
                              : (double) digits * powers[scan->exponent];
  return true;
}

/* The digits of WHOLE (>= 0) so that the last one stands before END; returns the first.  */
static char *
write_whole (char *end, long whole)
{
  do {
    *--end = (char) ('0' + whole % 10);
    whole /= 10;
  } while (whole > 0);
  return end;
}

/* Rounds to the nearest double; below the smallest that is 0.  */
static double
value_by_strtod (struct scan *scan)
{
  char written[WHOLE_ROOM];
  char *end = written + sizeof written;
  char *start;
  long exponent = scan->exponent;
  size_t count = scan->count;

  if (scan->digits[MOST_READ] != '\0') {
    count = MOST_READ + 1;
    exponent--;
  }
  if (exponent > EXPONENT_BOUND)
    exponent = EXPONENT_BOUND;
  if (exponent < -EXPONENT_BOUND)
    exponent = -EXPONENT_BOUND;
  *--end = '\0';
  start = write_whole (end, labs (exponent));
  scan->digits[count++] = 'e';
  scan->digits[count++] = exponent < 0 ? '-' : '+';
  memcpy (scan->digits + count, start, strlen (start) + 1);
  return strtod (scan->digits, NULL);
}

/* number = ( digits ["." [digits]] | "." digits ) [exponent]  */
bool
number_read (const char *bytes, size_t n, double *value, bool *too_large)
{
  struct scan scan;
  double read;

  scan.at = bytes;
  scan.end = bytes + n;
  scan.digits[MOST_READ] = '\0';
  scan.count = 0;
  scan.exponent = 0;
  scan.any = false;
  *too_large = false;
  scan_digits (&scan, false);
  if (scan.at < scan.end && *scan.at == '.') {
    scan.at++;
    scan_digits (&scan, true);
  }
  if (!scan.any || !scan_exponent (&scan) || scan.at != scan.end)
    return false;

  if (scan.count == 0)
    read = 0;
  else if (!value_at_once (&scan, &read))
    read = value_by_strtod (&scan);
  if (!isfinite (read)) {
    *too_large = true;
    return false;
  }
  *value = read;
  return true;
}

struct number_digits
number_digits (const char *figure)
{
  struct number_digits digits = { 0, 0, false };
  const char *s = figure;
  int exponent = 0;

  for (; *s && *s != 'e' && *s != 'E'; s++) {
    digits.point = digits.point || *s == '.';
    digits.place -= digits.point && is_digit (*s);
    digits.end_zeros = *s == '0' ? digits.end_zeros + 1 : *s == '_' ? digits.end_zeros : 0;
  }
  if (*s) {
    const bool minus = *++s == '-';

    for (s += strspn (s, "+-"); is_digit (*s); s++)
      exponent = exponent < TYPED_EXPONENT ? 10 * exponent + (*s - '0') : exponent;
    digits.place += minus ? -exponent : exponent;
  }
  return digits;
}

double
number_rounding (const char *figure, double value)
{
  static const double whole_most = 0.005;
  const struct number_digits digits = number_digits (figure);
  const bool whole = !digits.point && digits.place >= 0 && fabs (value) > 0;

  return whole ? fmin (0.5 * pow (10, digits.place + digits.end_zeros), whole_most * fabs (value))
               : 0.5 * pow (10, digits.place);
}

/* Writing.  */

enum {
  LEAST_PLAIN = -4, MOST_PLAIN = 8,       /* exponents of ten that are written in plain decimals */
  EXACT_LEAST = 15                        /* digits of a double that any decimal survives */
};

/* Digits and where the point goes, cut to size.  */
struct figure {
  char digits[DECIMAL_MOST_DIGITS];
  int count;
  int exponent;                           /* of ten, of the first digit */
};

static void
figure_make (struct figure *figure, const struct decimal *decimal, int count)
{
  uint64_t left = decimal->digits;

  for (int i = count - 1; i >= 0; i--) {
    figure->digits[i] = (char) ('0' + left % 10);
    left /= 10;
  }
  figure->count = count;
  figure->exponent = decimal->exponent;
}

static void
add_plain (struct text *text, const struct figure *figure)
{
  size_t count = (size_t) figure->count;
  size_t whole;                           /* digits before the point */

  if (figure->exponent < 0) {
    text_add_bytes (text, "0.", 2);
    text_add_repeated (text, '0', (size_t) (-figure->exponent - 1));
    text_add_bytes (text, figure->digits, count);
    return;
  }
  whole = (size_t) figure->exponent + 1;
  if (whole >= count) {
    text_add_bytes (text, figure->digits, count);
    text_add_repeated (text, '0', whole - count);
    return;
  }
  text_add_bytes (text, figure->digits, whole);
  text_add_char (text, '.');
  text_add_bytes (text, figure->digits + whole, count - whole);
}

static void
add_digits_and_point (struct text *text, const struct figure *figure)
{
  text_add_char (text, figure->digits[0]);
  if (figure->count > 1) {
    text_add_char (text, '.');
    text_add_bytes (text, figure->digits + 1, (size_t) figure->count - 1);
  }
}

static void
add_whole (struct text *text, int whole)
{
  char written[WHOLE_ROOM];
  char *end = written + sizeof written;
  char *start = write_whole (end, whole);

  text_add_bytes (text, start, (size_t) (end - start));
}

/* What stands before the digits: the sign.  False: VALUE is zero, and that is written.  */
static bool
add_sign (struct text *text, double value)
{
  assert (isfinite (value));
  if (value < 0)
    text_add_char (text, '-');
  else if (value <= 0)
    text_add_char (text, '0');
  return fabs (value) > 0;
}

void
number_write (struct text *text, double value, int digits)
{
  struct decimal decimal;
  struct figure figure;

  if (!add_sign (text, value))
    return;
  decimal = decimal_of (fabs (value), digits);
  figure_make (&figure, &decimal, digits);
  if (figure.exponent >= LEAST_PLAIN && figure.exponent <= MOST_PLAIN)
    add_plain (text, &figure);
  else {
    add_digits_and_point (text, &figure);
    text_add (text, figure.exponent < 0 ? "e-" : "e");
    add_whole (text, abs (figure.exponent));
  }
}

/* Like %.*g with PRECISION: no zeros at the end, an exponent of two digits or more.  */
static void
add_general (struct text *text, struct figure *figure, int precision)
{
  while (figure->count > 1 && figure->digits[figure->count - 1] == '0')
    figure->count--;
  if (figure->exponent >= LEAST_PLAIN && figure->exponent < precision)
    add_plain (text, figure);
  else {
    add_digits_and_point (text, figure);
    text_add_bytes (text, figure->exponent < 0 ? "e-" : "e+", 2);
    if (abs (figure->exponent) < 10)
      text_add_char (text, '0');
    add_whole (text, abs (figure->exponent));
  }
}

void
number_write_exact (struct text *text, double value)
{
  struct decimal decimal;
  struct figure figure;
  int precision = EXACT_LEAST;

  if (!add_sign (text, value))
    return;
  decimal = decimal_of (fabs (value), precision);
  while (!decimal.reads_back && precision < DECIMAL_MOST_DIGITS)
    decimal = decimal_of (fabs (value), ++precision);
  figure_make (&figure, &decimal, precision);
  add_general (text, &figure, precision);
}
