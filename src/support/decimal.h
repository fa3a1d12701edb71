/* The decimal digits of a double, rounded as printf rounds.  */
#ifndef SUPPORT_DECIMAL_H
#define SUPPORT_DECIMAL_H

#include <stdbool.h>
#include <stdint.h>

enum { DECIMAL_MOST_DIGITS = 17 };

/* DIGITS x 10^(exponent + 1 - n), where n digits were asked for: d.ddd x 10^exponent.  */
struct decimal {
  uint64_t digits;
  int exponent;
  bool reads_back;                        /* the nearest double to it is the value itself */
};

/* VALUE (finite, greater than 0) rounded to N (1 to 17) significant digits; a value half-way
   between two goes to the even one, as printf does in the usual rounding mode.                 */
struct decimal decimal_of (double value, int n);

#endif
