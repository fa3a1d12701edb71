#include "config.h"
#include "units/exact.h"

#include <stddef.h>

enum { HIGHEST_EXPONENT = 300 };

static bool
is_digit (char c)
{
  return c >= '0' && c <= '9';
}

/* The whole number at *TEXT, at most LIMIT; moves on behind it.  -1: there is none.  */
static int
read_whole (const char **text, int limit)
{
  const char *at = *text;
  int value = 0;

  if (!is_digit (*at))
    return -1;
  for (; is_digit (*at); at++)
    if ((value = value * 10 + (*at - '0')) > limit)
      return -1;
  *text = at;
  return value;
}

/* Multiplies *SCALE by 10^N.  */
static void
scale_by_tens (long double *scale, int n)
{
  for (; n > 0; n--)
    *scale *= 10;
}

/* decimal = digits [ "." digits ] [ "e" [ "+" | "-" ] digits ]  */
static bool
read_decimal (const char **text, struct exact *exact)
{
  const char *at = *text;
  struct exact value = { 0, 1 };
  bool any = false;

  for (; is_digit (*at); at++, any = true)
    value.over = value.over * 10 + (*at - '0');
  if (*at == '.')
    for (at++; is_digit (*at); at++, any = true) {
      value.over = value.over * 10 + (*at - '0');
      value.under *= 10;
    }
  if (!any)
    return false;
  if (*at == 'e') {
    bool down = at[1] == '-';
    at += at[1] == '-' || at[1] == '+' ? 2 : 1;
    int tens = read_whole (&at, HIGHEST_EXPONENT);
    if (tens < 0)
      return false;
    scale_by_tens (down ? &value.under : &value.over, tens);
  }
  *text = at;
  *exact = value;
  return true;
}

bool
exact_read (const char *text, struct exact *exact)
{
  struct exact total = { 1, 1 };
  bool under = false;

  for (;;) {
    struct exact part;
    if (!read_decimal (&text, &part))
      return false;
    if (*text == '^') {
      text++;
      int power = read_whole (&text, 9);
      if (power < 1)
        return false;
      part = exact_power (part, power);
    }
    total = exact_times (total, under ? exact_power (part, -1) : part);
    if (*text == '\0')
      break;
    if (*text != '*' && *text != '/')
      return false;
    under = *text++ == '/';
  }
  *exact = total;
  return true;
}

struct exact
exact_times (struct exact a, struct exact b)
{
  return (struct exact) { a.over * b.over, a.under * b.under };
}

struct exact
exact_power (struct exact exact, int n)
{
  struct exact base = n < 0 ? (struct exact) { exact.under, exact.over } : exact;
  struct exact power = { 1, 1 };

  for (int i = n < 0 ? -n : n; i > 0; i--)
    power = exact_times (power, base);
  return power;
}

double
exact_value (struct exact exact)
{
  return (double) (exact.over / exact.under);
}
