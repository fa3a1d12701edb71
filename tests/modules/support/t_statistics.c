#include "config.h"
#include "support/statistics.h"

#include <math.h>
#include "libtest.h"
#include "support/arena.h"

static void
a_set_of_figures (void)
{
  /* By hand: mean 5, squares 9 + 1 + 1 + 1 + 0 + 0 + 4 + 16 = 32, 32/7.  */
  static const double x[] = { 2, 4, 4, 4, 5, 5, 7, 9 };
  struct arena *arena = arena_create ();
  struct statistics s = statistics_of (arena, x, NULL, 8);

  SAME_INT (s.count, 8);
  NEAR (s.mean, 5, 1e-15);
  NEAR (s.standard_deviation, sqrt (32.0 / 7.0), 1e-15);
  NEAR (s.median, 4.5, 1e-15);
  NEAR (s.least, 2, 1e-15);
  NEAR (s.greatest, 9, 1e-15);
  SAME_INT (s.least_at, 0);
  SAME_INT (s.greatest_at, 7);
  arena_destroy (arena);
}

static void
some_left_out (void)
{
  static const double x[] = { 1000, 1, 2, 6 };
  static const bool out[] = { true, false, false, false };
  struct arena *arena = arena_create ();
  struct statistics s = statistics_of (arena, x, out, 4);

  SAME_INT (s.count, 3);
  NEAR (s.mean, 3, 1e-15);
  NEAR (s.median, 2, 1e-15);
  SAME_INT (s.greatest_at, 3);
  s = statistics_of (arena, x, NULL, 1);
  CHECK (isnan (s.standard_deviation));
  NEAR (s.mean, 1000, 1e-15);
  s = statistics_of (arena, x, NULL, 0);
  CHECK (isnan (s.mean) && isnan (s.median));
  arena_destroy (arena);
}

/* 1.4826 times the median of the distances from the median, by hand: of 2 4 4 4 5 5 7 9 the median
   is 4.5 and the distances 0.5 (five times), 2.5 (twice), 4.5.  The factor is 1/0.67448975 (upper
   quartile of the normal distribution).  */
static void
robust (void)
{
  static const double x[] = { 2, 4, 4, 4, 5, 5, 7, 9 }, far[] = { 4, 5, 6, 5.5, 1000, 3 },
    same[] = { 7, 7, 7, 7, 9 };
  static const bool out[] = { false, false, false, false, false, true };
  struct arena *arena = arena_create ();
  NEAR (statistics_of (arena, x, NULL, 8).robust_deviation, 0.5 / 0.6744897501960817, 1e-12);
  /* Of 4 5 6 5.5 1000 the median is 5.5, the distances 1.5 0.5 0.5 0 994.5.  */
  NEAR (statistics_of (arena, far, out, 6).robust_deviation, 0.5 / 0.6744897501960817, 1e-12);
  CHECK (isnan (statistics_of (arena, same, NULL, 5).robust_deviation));
  CHECK (isnan (statistics_of (arena, x, NULL, 4).robust_deviation));
  NEAR (HAMPEL_LIMIT, 3, 0);
  arena_destroy (arena);
}

/* Digits that a sum of squares would lose: NIST Statistical Reference Datasets, NumAcc4 (lower):
   1 000 000.2 and pairs of .1 and .3: mean 10000000.2, standard deviation 0.1.                   */
static void
digits_do_not_cancel (void)
{
  double x[1001];
  struct arena *arena = arena_create ();
  x[0] = 10000000.2;
  for (int i = 1; i < 1001; i++)
    x[i] = i % 2 ? 10000000.1 : 10000000.3;
  struct statistics s = statistics_of (arena, x, NULL, 1001);
  NEAR (s.mean, 10000000.2, 1e-15);
  NEAR (s.standard_deviation, 0.1, 1e-8);
  arena_destroy (arena);
}

/* ISO 5725-2:1994, table 5, one largest or one smallest, upper 1 % and upper 5 % (from memory; the
   last digit of some is off by one from the formula in F. E. Grubbs, Technometrics 11 (1969) 1). */
static void
critical_values (void)
{
  static const struct { size_t n; double outlier, straggler; } rows[] = {
    { 3, 1.155, 1.155 }, { 4, 1.496, 1.481 }, { 5, 1.764, 1.715 }, { 6, 1.973, 1.887 },
    { 7, 2.139, 2.020 }, { 8, 2.274, 2.126 }, { 9, 2.387, 2.215 }, { 10, 2.482, 2.290 },
    { 15, 2.806, 2.549 }, { 20, 3.001, 2.709 }, { 30, 3.236, 2.908 }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    test_about ("n = %zu", rows[i].n);
    CHECK (fabs (grubbs_critical (rows[i].n, 0.01) - rows[i].outlier) < 1.1e-3);
    CHECK (fabs (grubbs_critical (rows[i].n, 0.05) - rows[i].straggler) < 1.1e-3);
  }
}

/* F. E. Grubbs (1969), strengths of hard-drawn copper wire (from memory; the sums by hand): mean
   575.2, squares 681.6, s 8.7025, 596 lies 2.390 of them off: beyond 5 %, not beyond 1 %.        */
static void
copper_wire (void)
{
  static const double x[] = { 568, 570, 570, 570, 572, 572, 572, 578, 584, 596 };
  struct grubbs g;
  NEED (grubbs_test (x, NULL, 10, &g));
  SAME_INT (g.at, 9);
  NEAR (g.G, 20.8 / sqrt (681.6 / 9), 1e-12);
  CHECK (g.G > g.straggler && g.G < g.outlier);
}

static void
nothing_to_test (void)
{
  static const double same[] = { 0.1, 0.1, 0.1, 0.1 }, two[] = { 1, 2 };
  struct grubbs g;
  CHECK (!grubbs_test (same, NULL, 4, &g));
  CHECK (!grubbs_test (two, NULL, 2, &g));
}

static const struct test_case cases[] = {
  { "a set of figures", a_set_of_figures },
  { "some left out", some_left_out },
  { "robust", robust },
  { "digits do not cancel", digits_do_not_cancel },
  { "critical values", critical_values },
  { "copper wire", copper_wire },
  { "nothing to test", nothing_to_test },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
