/* A set of figures: where it lies, how far it spreads, what does not belong to it.  */
#ifndef SUPPORT_STATISTICS_H
#define SUPPORT_STATISTICS_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena;

struct statistics {
  size_t count;
  double mean, median;            /* NAN for none */
  double standard_deviation;      /* of the sample (n - 1); NAN for fewer than two */
  double least, greatest;
  size_t least_at, greatest_at;   /* the first of each */
};

/* Of the N figures at X that LEFT_OUT (null: none) does not mark.  A copy is sorted in ARENA.   */
struct statistics statistics_of (struct arena *, const double x[], const bool left_out[], size_t n);

/* Grubbs' test for one outlying figure, on either side: the one farthest from the mean.  */
struct grubbs {
  size_t at;
  double G;                       /* its distance in standard deviations */
  double straggler, outlier;      /* critical values at 5 % and 1 % */
};

/* The critical value of the two-sided test of N figures at the level ALPHA.  N is 3 or more.  */
double grubbs_critical (size_t n, double alpha);
/* False where there is nothing to test: fewer than three figures, or all are the same.  */
bool grubbs_test (const double x[], const bool left_out[], size_t n, struct grubbs *) MUST_CHECK;

#endif
