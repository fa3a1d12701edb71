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
  double robust_deviation;        /* of the median; NAN for fewer than ROBUST_LEAST, or where more
                                     than half of the figures are the same */
  double least, greatest;
  size_t least_at, greatest_at;   /* the first of each */
};

/* Of fewer figures a median of distances says nothing of a spread.  Common practice, no source.  */
enum { ROBUST_LEAST = 5 };
/* Farther from the median than this many robust deviations a figure is no part of the rest
   (Hampel's identifier; the 3 is the usual one: R. K. Pearson, IEEE Trans. Control Syst. Technol.
   10 (2002) 55, from memory).                                                                   */
extern const double HAMPEL_LIMIT;

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
