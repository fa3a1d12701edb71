/* How a figure is shown: its digits, its uncertainty, its effect.  */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "support/number.h"
#include "support/text.h"

/* Figures outside these have an exponent in number_write.  */
static const double plain_least = 1e-4, plain_most = 1e9;

enum { SPREAD_DIGITS = 2, MOST_DIGITS = 15 };

void
figure_write (struct text *out, const struct report_style *style, double value)
{
  if (isfinite (value))
    number_write (out, value, style->digits);
  else
    text_add_char (out, '-');
}

void
figure_plain (struct text *out, const struct report_style *style, double value)
{
  const size_t start = out->length;
  figure_write (out, style, value);
  const char *figure = out->bytes + start;
  if (strchr (figure, '.') == NULL || strchr (figure, 'e') != NULL)
    return;
  while (out->bytes[out->length - 1] == '0')
    out->length--;
  if (out->bytes[out->length - 1] == '.')
    out->length--;
  out->bytes[out->length] = '\0';
}

void
figure_in_formula (struct text *out, double value, const void *style)
{
  figure_plain (out, style, value);
}

bool
figure_is_uncertain (double value, double uncertainty)
{
  return isfinite (value) && isfinite (uncertainty) && uncertainty > 0.0;
}

size_t
figure_whole (const char *figure)
{
  return strcspn (figure, ".eE ");
}

/* Power of ten of the first digit.  */
static int
exponent_of (double value)
{
  const double magnitude = fabs (value);
  int exponent = (int) floor (log10 (magnitude));
  if (pow (10.0, exponent + 1) <= magnitude)
    exponent++;
  return exponent;
}

/* VALUE with DECIMALS (0 to 15) digits behind the sign, or, if DECIMALS is negative, rounded to
   that many places before it.  |VALUE| times 10^DECIMALS must be below 1e15.                    */
static void
fixed_write (struct text *out, double value, int decimals)
{
  const double scaled = decimals >= 0 ? fabs (value) * pow (10.0, decimals)
                                      : fabs (value) / pow (10.0, -decimals);
  uint64_t n = (uint64_t) floor (scaled + 0.5);
  for (int d = decimals; d < 0; d++)
    n *= 10;
  char digits[40];
  size_t at = sizeof digits;
  if (value < 0.0 && n > 0)
    text_add_char (out, '-');
  for (int written = 0; n > 0 || written <= (decimals > 0 ? decimals : 0); written++) {
    if (written == decimals && written > 0)
      digits[--at] = '.';
    digits[--at] = (char) ('0' + (int) (n % 10));
    n /= 10;
  }
  text_add_bytes (out, digits + at, sizeof digits - at);
}

void
figure_write_uncertain (struct text *out, double value, struct text *spread, double uncertainty)
{
  int last = exponent_of (uncertainty) - (SPREAD_DIGITS - 1);   /* power of ten of the last digit */
  if (floor (uncertainty / pow (10.0, last) + 0.5) >= 100.0)
    last++;                                                     /* 0.0996 is 0.10 */
  const double magnitude = fabs (value);
  const double largest = fmax (magnitude, uncertainty);
  const bool vanishes = magnitude < 0.5 * pow (10.0, last);
  if (largest < plain_most && (magnitude >= plain_least || vanishes) && last >= -MOST_DIGITS
      && largest / pow (10.0, last) < 1e15 && (uncertainty >= plain_least || !vanishes)) {
    fixed_write (out, value, -last);
    if (out == spread)
      text_add_char (out, '\0');
    fixed_write (spread, uncertainty, -last);
    return;
  }
  int digits = vanishes ? 1 : exponent_of (value) - last + 1;
  digits = digits < 1 ? 1 : digits > MOST_DIGITS ? MOST_DIGITS : digits;
  number_write (out, vanishes ? 0.0 : value, digits);
  if (out == spread)
    text_add_char (out, '\0');
  number_write (spread, uncertainty, SPREAD_DIGITS);
}

void
effect_write (struct text *out, double effect)
{
  text_add_char (out, effect < 0.0 ? '-' : '+');
  number_write (out, 100.0 * fabs (effect), SPREAD_DIGITS);
  text_add (out, " %");
}
