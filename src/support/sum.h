/* Sums that keep the digits which plain addition loses.

   Neumaier, Z. Angew. Math. Mech. 54 (1974) 39: what each addition rounds away is added up beside
   the sum.  The error is then that of one rounding, whatever the number and signs of the terms
   (unless they cancel to far below their own rounding).                                         */
#ifndef SUPPORT_SUM_H
#define SUPPORT_SUM_H

#include <math.h>

struct sum { double value, lost; };                      /* start with { 0, 0 } */

static inline void
sum_add (struct sum *sum, double term)
{
  double next = sum->value + term;
  if (fabs (sum->value) >= fabs (term))
    sum->lost += (sum->value - next) + term;
  else
    sum->lost += (term - next) + sum->value;
  sum->value = next;
}

static inline double
sum_total (const struct sum *sum)
{
  return sum->value + sum->lost;
}

#endif
