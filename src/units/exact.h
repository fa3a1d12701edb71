/* Exact factors as fractions of two whole numbers.

   A factor such as 0.45359237*9.80665/0.0254^2 is kept as its numerator and denominator, and
   divided once, so that the double made of it is the nearest one as long as both stay below the
   2^64 that a long double of 64 bits holds.                                                   */
#ifndef UNITS_EXACT_H
#define UNITS_EXACT_H

#include <stdbool.h>
#include "support/check.h"

struct exact { long double over, under; };

/* Reads decimals (with an exponent, too) joined by '*' and '/', each with '^' and a whole power
   from 1 to 9 behind it, taken from left to right.  False: TEXT is none.                      */
bool exact_read (const char *text, struct exact *) MUST_CHECK;

struct exact exact_times (struct exact, struct exact);
struct exact exact_power (struct exact, int);
double exact_value (struct exact);

#endif
