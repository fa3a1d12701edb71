#include "config.h"
#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdlib.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/search.h"

enum { PROBLEMS = 500, SEED = 20240612 };

static struct arena *arena;
static struct search_finding found;

typedef bool function (void *, const double x[], double c[], double *objective);

/* Searches from LEAST to MOST, one condition.  */
static enum search_end
look_for (function *at, void *context, double least, double most, bool one_sided, bool best)
{
  static const double scale = 1;
  struct search s = { .n = 1, .m = 1, .least = &least, .most = &most, .scale = &scale,
                      .one_sided = &one_sided, .has_objective = best, .at = at,
                      .context = context };
  arena_destroy (arena);
  s.arena = arena = arena_create ();
  return search_line (&s, 1, &found);
}

/* (x - 2)(x - 3); x is to be near 2.8.  */
static bool
parabola (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = (x[0] - 2) * (x[0] - 3);
  *objective = (x[0] - 2.8) * (x[0] - 2.8);
  return true;
}

static void
two_roots_are_both_found (void)
{
  SAME_INT (look_for (parabola, NULL, 0, HUGE_VAL, false, false), SEARCH_FOUND);
  NEED (found.range_count == 2);
  NEAR (found.ranges[0].least, 2, 1e-14);
  NEAR (found.ranges[0].most, 2, 1e-14);
  NEAR (found.ranges[1].least, 3, 1e-14);
  NEAR (found.x[0], 2, 1e-14);          /* the start is 1 */
  SAME_INT (look_for (parabola, NULL, 0, HUGE_VAL, false, true), SEARCH_FOUND);
  NEAR (found.x[0], 3, 1e-14);
}

static void
stretches_of_an_inequality (void)
{
  SAME_INT (look_for (parabola, NULL, 0, HUGE_VAL, true, false), SEARCH_FOUND);
  NEED (found.range_count == 2);
  NEAR (found.ranges[0].least, 0, 0);
  NEAR (found.ranges[0].most, 2, 1e-14);
  NEAR (found.ranges[1].least, 3, 1e-14);
  CHECK (isinf (found.ranges[1].most));
  NEAR (found.x[0], 1, 0);              /* holds where it is */
  SAME_INT (look_for (parabola, NULL, 0, 10, true, true), SEARCH_FOUND);
  NEAR (found.x[0], 3, 1e-14);          /* 2.8 itself is not allowed */
}

static bool
touching (void *context, const double x[], double c[], double *objective)
{
  double apart = *(double *) context;
  c[0] = (x[0] - 2) * (x[0] - 2 - apart);
  *objective = 0;
  return true;
}

static void
roots_that_touch_or_nearly_do (void)
{
  double apart = 0;
  SAME_INT (look_for (touching, &apart, 0, 10, false, false), SEARCH_FOUND);
  NEED (found.range_count == 1);
  NEAR (found.x[0], 2, 1e-5);
  apart = 1e-3;
  SAME_INT (look_for (touching, &apart, 0, 10, false, false), SEARCH_FOUND);
  NEED (found.range_count == 2);
  NEAR (found.ranges[0].least, 2, 1e-12);
  NEAR (found.ranges[1].least, 2.001, 1e-12);
}

static bool
wave (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = sin (x[0]);
  *objective = -x[0];
  return true;
}

static void
every_root_of_a_wave (void)
{
  const double pi = 3.14159265358979323846;
  SAME_INT (look_for (wave, NULL, 0, 30, false, true), SEARCH_FOUND);
  NEED (found.range_count == 10);
  for (size_t i = 0; i < 10; i++)
    NEAR (found.ranges[i].least, pi * (double) i, i ? 1e-14 : 1e-9);
  NEAR (found.x[0], 9 * pi, 1e-14);
}

static bool
above_zero (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = 1 + (x[0] - 4) * (x[0] - 4);
  *objective = x[0];
  return true;
}

static void
nothing_meets_it_and_how_near_it_came (void)
{
  SAME_INT (look_for (above_zero, NULL, 0, HUGE_VAL, false, false), SEARCH_UNREACHABLE);
  NEAR (found.x[0], 4, 1e-6);
  NEAR (found.worst, 1, 1e-12);
}

/* A pole changes its sign and is no root; beyond 3 there are no figures.  */
static bool
pole (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = 1 / (x[0] - 1.03);
  *objective = 0;
  return x[0] <= 3;
}

static bool
nowhere (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  (void) x;
  c[0] = *objective = 0;
  return false;
}

static bool
constant (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  (void) x;
  c[0] = 1;
  *objective = 0;
  return true;
}

static void
poles_gaps_and_constants (void)
{
  SAME_INT (look_for (pole, NULL, 0, 10, false, false), SEARCH_UNREACHABLE);
  CHECK (found.x[0] <= 3);
  SAME_INT (look_for (pole, NULL, 0, 10, true, false), SEARCH_FOUND);
  NEED (found.range_count == 1);
  NEAR (found.ranges[0].least, 1.03, 1e-2);
  NEAR (found.ranges[0].most, 3, 1e-11);
  CHECK (found.ranges[0].gap);
  SAME_INT (look_for (nowhere, NULL, 0, 10, false, false), SEARCH_UNDEFINED);
  SAME_INT (look_for (constant, NULL, 0, 10, false, false), SEARCH_SINGULAR);
  SAME_INT (look_for (above_zero, NULL, 0, HUGE_VAL, true, true), SEARCH_FOUND);
  NEAR (found.x[0], 0, 0);
}

static bool
more_is_better (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = x[0] - 1;
  *objective = -x[0];
  return true;
}

static void
without_end (void)
{
  SAME_INT (look_for (more_is_better, NULL, 0, HUGE_VAL, true, true), SEARCH_UNBOUNDED);
  SAME_INT (look_for (more_is_better, NULL, 0, 20, true, true), SEARCH_FOUND);
  NEAR (found.x[0], 20, 0);
}

static bool
cubic (void *context, const double x[], double c[], double *objective)
{
  const double *roots = context;
  c[0] = (x[0] - roots[0]) * (x[0] - roots[1]) * (x[0] - roots[2]) / 100;
  *objective = x[0];
  return true;
}

/* Three roots, parted by half of what parts two points of the grid or more.  */
static void
random_cubics (void)
{
  unsigned long long state = SEED;
  for (int i = 0; i < PROBLEMS; i++) {
    double roots[3], at = 0;
    for (size_t k = 0; k < 3; k++) {
      state = state * 6364136223846793005ULL + 1442695040888963407ULL;
      at += 0.1 + 2.5 * (double) (state >> 11) / 9007199254740992.0;
      roots[k] = at;
    }
    test_about ("seed %d, cubic %d: %.17g %.17g %.17g", SEED, i, roots[0], roots[1], roots[2]);
    SAME_INT (look_for (cubic, roots, 0, 8, false, true), SEARCH_FOUND);
    if (CHECK (found.range_count == 3))
      for (size_t k = 0; k < 3; k++)
        NEAR (found.ranges[k].least, roots[k], 1e-12);
    NEAR (found.x[0], roots[0], 1e-12);
  }
}

static const struct test_case cases[] = {
  { "two roots are both found", two_roots_are_both_found },
  { "stretches of an inequality", stretches_of_an_inequality },
  { "roots that touch or nearly do", roots_that_touch_or_nearly_do },
  { "every root of a wave", every_root_of_a_wave },
  { "nothing meets it, and how near it came", nothing_meets_it_and_how_near_it_came },
  { "poles, gaps and constants", poles_gaps_and_constants },
  { "without end", without_end },
  { "random cubics", random_cubics },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  gsl_set_error_handler_off ();
  return test_main (argc, argv, cases);
}
