/* Numbers read and written, the same in every locale.  */
#ifndef SUPPORT_NUMBER_H
#define SUPPORT_NUMBER_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct text;

/* Reads a plain decimal number (digits, one '.', exponent; digits before the exponent grouped by
   single '_') that fills exactly N bytes.  No sign, no hexadecimal, no inf, no nan; false also
   when it overflows (*TOO_LARGE says whether it did).  The value is the nearest double; what is
   smaller than the smallest reads as 0.                                                       */
bool number_read (const char *bytes, size_t n, double *value, bool *too_large) MUST_CHECK;

/* How a number is typed: the power of ten its last digit counts, how many zeros it ends in before
   any exponent ('_' passed over), and whether it has a point.  FIGURE is one number_read reads.  */
struct number_digits { int place, end_zeros; bool point; };
struct number_digits number_digits (const char *figure);

/* What VALUE, typed as FIGURE, is good to if nobody says: half a unit of its last digit.  People
   round to tens and hundreds and type exact whole numbers too, so of a whole number the zeros at
   the end do not count as digits, and it is good to 0.5 % at the worst: with three digits rounded
   that is always true.                                                                          */
double number_rounding (const char *figure, double value);

/* Appends VALUE in the shortest form of %.15g, %.16g, %.17g that reads back equal.  */
void number_write_exact (struct text *, double value);

/* Appends VALUE rounded to DIGITS significant digits, in plain decimals between 1e-4 and 1e9,
   with an exponent outside; trailing zeros are kept (0.400000), as a laboratory writes them.
   -0 prints as 0.                                                                             */
void number_write (struct text *, double value, int digits);

#endif
