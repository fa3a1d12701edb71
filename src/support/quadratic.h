/* The least value of a quadratic function under linear conditions.  */
#ifndef SUPPORT_QUADRATIC_H
#define SUPPORT_QUADRATIC_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena;

/* Find d with  1/2 d' H d + g' d  least, under  a_i' d = b_i  for the first EQUALITIES rows and
   a_i' d >= b_i  for the others.  H is symmetric and positive definite, N by N; the rows of A are
   ROWS by N.                                                                                    */
struct quadratic {
  size_t n, rows, equalities;
  const double *H, *g, *a, *b;
};

/* D of N and the multiplier of every row (its price: zero or more for the inequalities).  False
   if the conditions contradict each other, or H is not positive definite.                      */
bool quadratic_least (struct arena *, const struct quadratic *, double d[], double price[])
  MUST_CHECK;

#endif
