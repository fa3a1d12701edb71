#include "config.h"
#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdlib.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/search.h"

enum { MOST = 4, PROBLEMS = 200, SEED = 20240613 };

typedef bool function (void *, const double x[], double c[], double *objective);

struct problem {
  function *at;
  size_t n, m;
  double least, most, start[MOST];
  bool one_sided[MOST + 1], best;
};

static struct arena *arena;
static struct search_finding found;

static enum search_end
settle (const struct problem *p, void *context)
{
  double least[MOST], most[MOST], scale[MOST];
  for (size_t k = 0; k < p->n; k++) {
    least[k] = p->least;
    most[k] = p->most;
    scale[k] = fabs (p->start[k]) > 0 ? fabs (p->start[k]) : 1;
  }
  arena_destroy (arena);
  arena = arena_create ();
  struct search s = { .n = p->n, .m = p->m, .least = least, .most = most, .scale = scale,
                      .one_sided = p->one_sided, .has_objective = p->best, .at = p->at,
                      .context = context, .arena = arena };
  return search_settle (&s, p->start, &found);
}

/* ---- As many conditions as unknowns ---- */

/* A circle of radius 5 and the line x + y = 7 meet at (3, 4) and (4, 3).  */
static bool
circle_and_line (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = (x[0] * x[0] + x[1] * x[1] - 25) / 25;
  c[1] = (x[0] + x[1] - 7) / 7;
  *objective = 0;
  return true;
}

static void
both_points_of_a_circle (void)
{
  const struct problem p = { circle_and_line, 2, 2, 0, HUGE_VAL, { 1, 4 }, { false }, false };
  SAME_INT (settle (&p, NULL), SEARCH_FOUND);
  NEAR (found.x[0], 3, 1e-12);
  NEAR (found.x[1], 4, 1e-12);
  NEED (found.other_count == 1);
  NEAR (found.others[0][0], 4, 1e-12);
  NEAR (found.others[0][1], 3, 1e-12);
}

static bool
twice_the_same (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = x[0] + x[1] - 3;
  c[1] = 2 * (x[0] + x[1] - 3);
  *objective = 0;
  return true;
}

static bool
too_much (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = 1 - x[0] - x[1];
  c[1] = x[0] + x[1] - 2;
  *objective = 0;
  return true;
}

/* Between a sum of at most 1 and of at least 2: 1.5 misses both by a half.  */
static void
conditions_that_cannot_be (void)
{
  const struct problem same = { twice_the_same, 2, 2, 0, HUGE_VAL, { 1, 1 }, { false }, false };
  const struct problem both = { too_much, 2, 2, 0, HUGE_VAL, { 1, 1 }, { true, true }, false };
  SAME_INT (settle (&same, NULL), SEARCH_SINGULAR);
  SAME_INT (settle (&both, NULL), SEARCH_UNREACHABLE);
  NEAR (found.worst, 0.5, 1e-6);
  NEAR (found.x[0] + found.x[1], 1.5, 1e-6);
}

/* ---- Least values ---- */

/* Problems 22, 35, 43 and 71 of Hock and Schittkowski, Test Examples for Nonlinear Programming
   Codes (1981).  The text is from memory; that the points are best follows for 22 and 35, which
   are convex, by hand from the conditions of Karush, Kuhn and Tucker.                           */
static bool
problem_22 (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = 2 - x[0] - x[1];
  c[1] = x[1] - x[0] * x[0];
  *objective = (x[0] - 2) * (x[0] - 2) + (x[1] - 1) * (x[1] - 1);
  return true;
}

static bool
problem_35 (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = 3 - x[0] - x[1] - 2 * x[2];
  *objective = 9 - 8 * x[0] - 6 * x[1] - 4 * x[2] + 2 * x[0] * x[0] + 2 * x[1] * x[1]
               + x[2] * x[2] + 2 * x[0] * x[1] + 2 * x[0] * x[2];
  return true;
}

static bool
problem_43 (void *context, const double x[], double c[], double *objective)
{
  double a = x[0], b = x[1], d = x[2], e = x[3];
  (void) context;
  c[0] = 8 - a * a - b * b - d * d - e * e - a + b - d + e;
  c[1] = 10 - a * a - 2 * b * b - d * d - 2 * e * e + a + e;
  c[2] = 5 - 2 * a * a - b * b - d * d - 2 * a + b + e;
  *objective = a * a + b * b + 2 * d * d + e * e - 5 * a - 5 * b - 21 * d + 7 * e;
  return true;
}

static bool
problem_71 (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = x[0] * x[1] * x[2] * x[3] / 25 - 1;
  c[1] = (x[0] * x[0] + x[1] * x[1] + x[2] * x[2] + x[3] * x[3]) / 40 - 1;
  *objective = x[0] * x[3] * (x[0] + x[1] + x[2]) + x[2];
  return true;
}

static void
published_problems (void)
{
  static const struct { struct problem p; double objective, x[MOST]; } list[] = {
    { { problem_22, 2, 2, 0, HUGE_VAL, { 2, 2 }, { true, true }, true }, 1, { 1, 1 } },
    { { problem_35, 3, 1, 0, HUGE_VAL, { 0.5, 0.5, 0.5 }, { true }, true }, 1.0 / 9,
      { 4.0 / 3, 7.0 / 9, 4.0 / 9 } },
    { { problem_43, 4, 3, -10, 10, { 0, 0, 0, 0 }, { true, true, true }, true }, -44,
      { 0, 1, 2, -1 } },
    { { problem_71, 4, 2, 1, 5, { 1, 5, 5, 1 }, { true, false }, true }, 17.0140173,
      { 1, 4.7429994, 3.8211503, 1.3794082 } }
  };
  for (size_t i = 0; i < sizeof list / sizeof list[0]; i++) {
    test_about ("problem %zu of the list", i);
    SAME_INT (settle (&list[i].p, NULL), SEARCH_FOUND);
    NEAR (found.objective, list[i].objective, 1e-8);
    for (size_t k = 0; k < list[i].p.n; k++)
      CHECK (fabs (found.x[k] - list[i].x[k]) < 2e-5);
    CHECK (found.worst <= SEARCH_MET);
  }
}

/* The point of  x + 2 y = 10  nearest to (1, 2), by hand: (2, 4).  Without an objective the search
   stays near its start, each unknown counted in its own size: (x - 1)^2 + ((y - 2)/2)^2 is least
   at x = 1 + 5/17, y = 2 + 4 * 10/17 (from the multiplier l = 5/(1 + 16)).                      */
static bool
plane (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = (x[0] + 2 * x[1] - 10) / 10;
  *objective = (x[0] - 1) * (x[0] - 1) + (x[1] - 2) * (x[1] - 2);
  return true;
}

static void
nearest_points_of_a_line (void)
{
  struct problem p = { plane, 2, 1, 0, HUGE_VAL, { 1, 2 }, { false }, true };
  SAME_INT (settle (&p, NULL), SEARCH_FOUND);
  NEAR (found.x[0], 2, 1e-8);
  NEAR (found.x[1], 4, 1e-8);
  p.best = false;
  SAME_INT (settle (&p, NULL), SEARCH_FOUND);
  NEAR (found.x[0], 1 + 5.0 / 17, 1e-8);
  NEAR (found.x[1], 2 + 40.0 / 17, 1e-8);
}

static bool
endless (void *context, const double x[], double c[], double *objective)
{
  (void) context;
  c[0] = x[0] + x[1] - 1;
  *objective = -x[1];
  return true;
}

static void
no_end_to_it (void)
{
  const struct problem p = { endless, 2, 1, 0, HUGE_VAL, { 1, 1 }, { true }, true };
  SAME_INT (settle (&p, NULL), SEARCH_UNBOUNDED);
}

/* ---- Linear problems, against every corner ---- */

struct linear { size_t n, m; double a[MOST + 1][MOST], cost[MOST]; };

static bool
linear_at (void *context, const double x[], double c[], double *objective)
{
  const struct linear *l = context;
  *objective = 0;
  for (size_t k = 0; k < l->n; k++)
    *objective += l->cost[k] * x[k];
  for (size_t i = 0; i < l->m; i++) {
    c[i] = -1;
    for (size_t k = 0; k < l->n; k++)
      c[i] += l->a[i][k] * x[k];
  }
  return true;
}

/* Solves the N equations of the rows chosen (row m + k is x_k = 0) by elimination.  */
static bool
corner (const struct linear *l, const size_t chosen[], double x[])
{
  double a[MOST][MOST + 1] = { { 0 } };
  for (size_t r = 0; r < l->n; r++) {
    for (size_t k = 0; k < l->n; k++)
      a[r][k] = chosen[r] < l->m ? l->a[chosen[r]][k] : chosen[r] - l->m == k;
    a[r][l->n] = chosen[r] < l->m;
  }
  for (size_t k = 0; k < l->n; k++) {
    size_t pivot = k;
    for (size_t r = k; r < l->n; r++)
      pivot = fabs (a[r][k]) > fabs (a[pivot][k]) ? r : pivot;
    if (fabs (a[pivot][k]) < 1e-12)
      return false;
    for (size_t j = 0; j <= l->n; j++) {
      double swap = a[k][j];
      a[k][j] = a[pivot][j];
      a[pivot][j] = swap;
    }
    for (size_t r = 0; r < l->n; r++)
      for (size_t j = l->n + 1; r != k && j-- > k; )
        a[r][j] -= a[r][k] / a[k][k] * a[k][j];
  }
  for (size_t k = 0; k < l->n; k++)
    x[k] = a[k][l->n] / a[k][k];
  return true;
}

/* The least cost over all corners that are allowed.  */
static double
least_cost (struct linear *l)
{
  double least = HUGE_VAL;
  size_t all = l->m + l->n;
  for (unsigned set = 0; set < 1u << all; set++) {
    size_t chosen[MOST + MOST + 1], count = 0;
    double x[MOST], c[MOST + 1], cost;
    for (size_t i = 0; i < all; i++)
      if (set >> i & 1)
        chosen[count++] = i;
    if (count != l->n || !corner (l, chosen, x) || !linear_at (l, x, c, &cost))
      continue;
    bool allowed = true;
    for (size_t i = 0; i < l->m; i++)
      allowed = allowed && c[i] > -1e-9;
    for (size_t k = 0; k < l->n; k++)
      allowed = allowed && x[k] > -1e-9;
    least = allowed ? fmin (least, cost) : least;
  }
  return least;
}

static double
number (unsigned long long *state)
{
  *state = *state * 6364136223846793005ULL + 1442695040888963407ULL;
  return (double) (*state >> 11) / 9007199254740992.0;
}

/* Diets: so much of everything, at the least cost.  */
static void
random_diets (void)
{
  unsigned long long state = SEED;
  for (int i = 0; i < PROBLEMS; i++) {
    struct linear l = { 2 + (size_t) (number (&state) * 2.999), 0, { { 0 } }, { 0 } };
    l.m = 1 + (size_t) (number (&state) * 3.999);
    struct problem p = { linear_at, l.n, l.m, 0, HUGE_VAL, { 0 }, { 0 }, true };
    for (size_t k = 0; k < l.n; k++) {
      l.cost[k] = 0.1 + number (&state);
      p.start[k] = 0.1 + 3 * number (&state);
      for (size_t j = 0; j < l.m; j++)
        l.a[j][k] = 0.05 + number (&state);
    }
    for (size_t j = 0; j < l.m; j++)
      p.one_sided[j] = true;
    test_about ("seed %d, diet %d: %zu unknowns, %zu conditions", SEED, i, l.n, l.m);
    SAME_INT (settle (&p, &l), SEARCH_FOUND);
    NEAR (found.objective, least_cost (&l), 1e-8);
    CHECK (found.worst <= SEARCH_MET);
  }
}

static const struct test_case cases[] = {
  { "both points of a circle", both_points_of_a_circle },
  { "conditions that cannot be", conditions_that_cannot_be },
  { "published problems", published_problems },
  { "nearest points of a line", nearest_points_of_a_line },
  { "no end to it", no_end_to_it },
  { "random diets", random_diets },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  gsl_set_error_handler_off ();
  return test_main (argc, argv, cases);
}
