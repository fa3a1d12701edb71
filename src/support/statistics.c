#include "config.h"
#include "support/statistics.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include <stdlib.h>
#include "support/arena.h"
#include "support/sum.h"

static bool
counts (const bool left_out[], size_t i)
{
  return left_out == NULL || !left_out[i];
}

/* Mean and standard deviation in two passes, so that no digits cancel.  */
static void
mean_and_spread (const double x[], const bool left_out[], size_t n, struct statistics *s)
{
  struct sum total = { 0, 0 }, squares = { 0, 0 };
  for (size_t i = 0; i < n; i++)
    if (counts (left_out, i))
      sum_add (&total, x[i]);
  s->mean = sum_total (&total) / (double) s->count;
  for (size_t i = 0; i < n; i++)
    if (counts (left_out, i))
      sum_add (&squares, (x[i] - s->mean) * (x[i] - s->mean));
  if (s->count > 1)
    s->standard_deviation = sqrt (sum_total (&squares) / (double) (s->count - 1));
}

static int
by_size (const void *left, const void *right)
{
  const double a = *(const double *) left, b = *(const double *) right;
  return a < b ? -1 : a > b;
}

const double HAMPEL_LIMIT = 3;

/* The median of N sorted figures.  */
static double
middle (const double sorted[], size_t n)
{
  return n % 2 == 1 ? sorted[n / 2] : 0.5 * (sorted[n / 2 - 1] + sorted[n / 2]);
}

/* The median of the distances from the median over the upper quartile of the standard normal
   distribution, which makes it the standard deviation of normal figures (F. R. Hampel, J. Am. Stat.
   Assoc. 69 (1974) 383; L. Davies and U. Gather, J. Am. Stat. Assoc. 88 (1993) 782).  SORTED is
   used up.                                                                                      */
static double
robust_deviation (double sorted[], size_t n, double median)
{
  if (n < ROBUST_LEAST)
    return (double) NAN;
  for (size_t i = 0; i < n; i++)
    sorted[i] = fabs (sorted[i] - median);
  qsort (sorted, n, sizeof *sorted, by_size);
  const double distance = middle (sorted, n);
  return distance > 1e-12 * fabs (median) ? distance / gsl_cdf_ugaussian_Pinv (0.75)
                                          : (double) NAN;
}

struct statistics
statistics_of (struct arena *arena, const double x[], const bool left_out[], size_t n)
{
  struct statistics s = { 0, (double) NAN, (double) NAN, (double) NAN, (double) NAN, (double) NAN,
                          (double) NAN, 0, 0 };
  double *sorted = ARENA_ARRAY (arena, n + 1, double);
  for (size_t i = 0; i < n; i++) {
    if (!counts (left_out, i))
      continue;
    if (s.count == 0 || x[i] < s.least) {
      s.least = x[i];
      s.least_at = i;
    }
    if (s.count == 0 || x[i] > s.greatest) {
      s.greatest = x[i];
      s.greatest_at = i;
    }
    sorted[s.count++] = x[i];
  }
  if (s.count == 0)
    return s;
  mean_and_spread (x, left_out, n, &s);
  qsort (sorted, s.count, sizeof *sorted, by_size);
  s.median = middle (sorted, s.count);
  s.robust_deviation = robust_deviation (sorted, s.count, s.median);
  return s;
}

/* G = (n - 1)/sqrt (n) sqrt (t^2/(n - 2 + t^2)), t the upper quantile alpha/(2 n) of Student's
   distribution with n - 2 degrees of freedom.  F. E. Grubbs, Technometrics 11 (1969) 1; the values
   tabulated in ISO 5725-2:1994, table 5.                                                        */
double
grubbs_critical (size_t n, double alpha)
{
  const double count = (double) n;
  const double t = gsl_cdf_tdist_Qinv (alpha / (2 * count), count - 2);
  return (count - 1) / sqrt (count) * sqrt (t * t / (count - 2 + t * t));
}

bool
grubbs_test (const double x[], const bool left_out[], size_t n, struct grubbs *g)
{
  struct statistics s = { .standard_deviation = (double) NAN };
  for (size_t i = 0; i < n; i++)
    s.count += counts (left_out, i);
  if (s.count < 3)
    return false;
  mean_and_spread (x, left_out, n, &s);
  if (!(s.standard_deviation > 1e-12 * fabs (s.mean)))
    return false;
  *g = (struct grubbs) { .G = -1, .straggler = grubbs_critical (s.count, 0.05),
                         .outlier = grubbs_critical (s.count, 0.01) };
  for (size_t i = 0; i < n; i++) {
    const double G = fabs (x[i] - s.mean) / s.standard_deviation;
    if (counts (left_out, i) && G > g->G) {
      g->G = G;
      g->at = i;
    }
  }
  return true;
}
