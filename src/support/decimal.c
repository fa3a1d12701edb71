#include "config.h"
#include "support/decimal.h"

#include <assert.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

__extension__ typedef unsigned __int128 wide;

/* A value is m 2^e with m < 2^53.  Times 10^k, k >= 0, it is m 5^k 2^(e+k), and m 5^k has at most
   116 bits as long as 5^k fits in 64; over 10^j it is m 2^e / 10^j.  Either way the digits asked
   for and what is left behind them come out exactly in 128 bits.  For values outside about 1e-22
   to 1e22, where they do not, printf does the work.                                            */
enum {
  MANTISSA_BITS = 53,
  MOST_FIVES = 27                         /* 5^27 < 2^64 <= 5^28 */
};

struct binary { uint64_t mantissa; int exponent; };

static struct binary
binary_of (double value)
{
  int exponent;
  double fraction = frexp (value, &exponent);              /* 0.5 <= fraction < 1 */

  return (struct binary) { (uint64_t) ldexp (fraction, MANTISSA_BITS), exponent - MANTISSA_BITS };
}

static const uint64_t powers_of_ten[] = {
  UINT64_C (1), UINT64_C (10), UINT64_C (100), UINT64_C (1000), UINT64_C (10000),
  UINT64_C (100000), UINT64_C (1000000), UINT64_C (10000000), UINT64_C (100000000),
  UINT64_C (1000000000), UINT64_C (10000000000), UINT64_C (100000000000),
  UINT64_C (1000000000000), UINT64_C (10000000000000), UINT64_C (100000000000000),
  UINT64_C (1000000000000000), UINT64_C (10000000000000000), UINT64_C (100000000000000000),
};

static const uint64_t powers_of_five[MOST_FIVES + 1] = {
  UINT64_C (1), UINT64_C (5), UINT64_C (25), UINT64_C (125), UINT64_C (625), UINT64_C (3125),
  UINT64_C (15625), UINT64_C (78125), UINT64_C (390625), UINT64_C (1953125), UINT64_C (9765625),
  UINT64_C (48828125), UINT64_C (244140625), UINT64_C (1220703125), UINT64_C (6103515625),
  UINT64_C (30517578125), UINT64_C (152587890625), UINT64_C (762939453125),
  UINT64_C (3814697265625), UINT64_C (19073486328125), UINT64_C (95367431640625),
  UINT64_C (476837158203125), UINT64_C (2384185791015625), UINT64_C (11920928955078125),
  UINT64_C (59604644775390625), UINT64_C (298023223876953125), UINT64_C (1490116119384765625),
  UINT64_C (7450580596923828125),
};

/* A value times 10^k: a whole part and what is left of it, counted in 1/unit; and how far, in the
   same count, the next double is away.                                                         */
struct scaled { uint64_t whole; wide left, unit, gap; };

/* SCALED from NUMERATOR / unit; false if the whole part does not fit.  */
static bool
divide (wide numerator, struct scaled *scaled)
{
  wide whole = numerator / scaled->unit;

  scaled->whole = (uint64_t) whole;
  scaled->left = numerator - whole * scaled->unit;
  return whole <= UINT64_MAX;
}

static bool
scale_up (struct binary value, int k, struct scaled *scaled)
{
  wide product;
  int shift = value.exponent + k;

  if (k > MOST_FIVES || shift > 10 || shift < -126)
    return false;
  product = (wide) value.mantissa * powers_of_five[k];
  scaled->gap = powers_of_five[k];
  if (shift >= 0) {
    scaled->gap <<= shift;
    scaled->unit = 1;
    return divide (product << shift, scaled);
  }
  scaled->unit = (wide) 1 << -shift;
  scaled->whole = (uint64_t) (product >> -shift);
  scaled->left = product & (scaled->unit - 1);
  return product >> -shift <= UINT64_MAX;
}

static bool
scale_down (struct binary value, int j, struct scaled *scaled)
{
  if (j > DECIMAL_MOST_DIGITS || value.exponent > 64 || value.exponent < -MANTISSA_BITS)
    return false;
  scaled->unit = powers_of_ten[j];
  scaled->gap = 1;
  if (value.exponent >= 0) {
    scaled->gap <<= value.exponent;
    return divide ((wide) value.mantissa << value.exponent, scaled);
  }
  scaled->unit <<= -value.exponent;
  return divide (value.mantissa, scaled);
}

/* False where it does not come out exactly.  */
static bool
scale (struct binary value, int k, struct scaled *scaled)
{
  return k >= 0 ? scale_up (value, k, scaled) : scale_down (value, -k, scaled);
}

/* Rounds half to even.  */
static bool
rounds_up (const struct scaled *scaled)
{
  wide twice = 2 * scaled->left;

  return twice > scaled->unit || (twice == scaled->unit && (scaled->whole & 1) != 0);
}

/* Does the rounded figure lie nearer to VALUE than to the doubles beside it?  They are a gap away
   on either side, but below a power of two only half of that.                                  */
static bool
reads_back (struct binary value, const struct scaled *scaled, bool up)
{
  wide away = up ? scaled->unit - scaled->left : scaled->left;
  bool narrow = !up && value.mantissa == UINT64_C (1) << (MANTISSA_BITS - 1);
  wide doubled = narrow ? 4 * away : 2 * away;

  return doubled < scaled->gap || (doubled == scaled->gap && (value.mantissa & 1) == 0);
}

/* Exponent of ten that is right or one too small: log10(2) is a little above 1233/4096, and the
   value lies between 2^(bits-1) and 2^bits.                                                    */
static int
least_exponent (struct binary value)
{
  int bits = value.exponent + MANTISSA_BITS - 1;
  int scaled = bits * 1233;

  return scaled >= 0 ? scaled / 4096 : -((-scaled + 4095) / 4096);
}

static bool
exact_digits (double value, int n, struct decimal *decimal)
{
  struct binary binary = binary_of (value);
  struct scaled scaled;
  int exponent = least_exponent (binary);
  bool up;

  if (!scale (binary, n - 1 - exponent, &scaled))
    return false;
  if (scaled.whole >= powers_of_ten[n]) {
    exponent++;
    if (!scale (binary, n - 1 - exponent, &scaled))
      return false;
  }
  if (scaled.whole >= powers_of_ten[n] || scaled.whole < powers_of_ten[n - 1])
    return false;
  up = rounds_up (&scaled);
  decimal->reads_back = reads_back (binary, &scaled, up);
  decimal->digits = scaled.whole + (up ? 1 : 0);
  decimal->exponent = exponent;
  if (decimal->digits == powers_of_ten[n]) {
    decimal->digits = powers_of_ten[n - 1];
    decimal->exponent++;
  }
  return true;
}

/* Through printf and strtod.  What stands between the first digit and the second is the decimal
   sign of whatever locale is set: it is passed over, whatever it is.                           */
static struct decimal
printed_digits (double value, int n)
{
  char printed[64];
  struct decimal decimal = { 0, 0, false };
  const char *c = printed;

  snprintf (printed, sizeof printed, "%.*e", n - 1, value);
  for (; *c != 'e'; c++)
    if (*c >= '0' && *c <= '9')
      decimal.digits = decimal.digits * 10 + (uint64_t) (*c - '0');
  decimal.exponent = (int) strtol (c + 1, NULL, 10);
  decimal.reads_back = strtod (printed, NULL) == value;
  return decimal;
}

struct decimal
decimal_of (double value, int n)
{
  struct decimal decimal;

  assert (isfinite (value) && value > 0 && n >= 1 && n <= DECIMAL_MOST_DIGITS);
  if (!exact_digits (value, n, &decimal))
    decimal = printed_digits (value, n);
  return decimal;
}
