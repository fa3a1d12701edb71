#include "config.h"
#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/quadratic.h"

enum { MOST = 6, ROWS = 12, PROBLEMS = 2000, SEED = 20240611 };

static double
number (unsigned long long *state)
{
  *state = *state * 6364136223846793005ULL + 1442695040888963407ULL;
  return (double) (*state >> 11) / 4503599627370496.0 - 1;
}

struct problem {
  size_t n, rows, equalities;
  double H[MOST * MOST], g[MOST], a[ROWS * MOST], b[ROWS];
};

/* H = A' A + I/10, so that it is positive definite; the rows hold at a point of their own.  */
static struct problem
random_problem (unsigned long long *state)
{
  struct problem p = { 0 };
  double A[MOST * MOST], x[MOST];
  p.n = 1 + (size_t) (fabs (number (state)) * (MOST - 1));
  p.rows = (size_t) (fabs (number (state)) * ROWS);
  p.equalities = (size_t) (fabs (number (state)) * (double) (p.n < p.rows ? p.n : p.rows));
  for (size_t i = 0; i < p.n * p.n; i++)
    A[i] = number (state);
  for (size_t i = 0; i < p.n; i++) {
    p.g[i] = 5 * number (state);
    x[i] = 3 * number (state);
    for (size_t k = 0; k < p.n; k++)
      for (size_t j = 0; j < p.n; j++)
        p.H[i * p.n + k] += A[j * p.n + i] * A[j * p.n + k] + (j == 0 && i == k ? 0.1 : 0);
  }
  for (size_t i = 0; i < p.rows; i++) {
    double slack = i < p.equalities ? 0 : fmax (0, number (state));
    p.b[i] = -slack;
    for (size_t k = 0; k < p.n; k++) {
      p.a[i * p.n + k] = number (state);
      p.b[i] += p.a[i * p.n + k] * x[k];
    }
  }
  return p;
}

/* The conditions of Karush, Kuhn and Tucker, which a convex problem's best point alone meets.  */
static void
check_optimal (const struct problem *p, const double d[], const double price[])
{
  for (size_t k = 0; k < p->n; k++) {
    double left = p->g[k], size = 1;
    for (size_t j = 0; j < p->n; j++)
      left += p->H[k * p->n + j] * d[j];
    for (size_t i = 0; i < p->rows; i++) {
      left -= price[i] * p->a[i * p->n + k];
      size += fabs (price[i]);
    }
    CHECK (fabs (left) < 1e-9 * size);
  }
  for (size_t i = 0; i < p->rows; i++) {
    double over = -p->b[i];
    for (size_t k = 0; k < p->n; k++)
      over += p->a[i * p->n + k] * d[k];
    CHECK (i < p->equalities ? fabs (over) < 1e-9 : over > -1e-9);
    CHECK (i < p->equalities || price[i] >= 0);
    CHECK (i < p->equalities || fabs (price[i] * over) < 1e-8 * (1 + fabs (price[i])));
  }
}

static void
random_problems_are_solved (void)
{
  unsigned long long state = SEED;
  for (int i = 0; i < PROBLEMS; i++) {
    struct arena *arena = arena_create ();
    struct problem p = random_problem (&state);
    struct quadratic q = { p.n, p.rows, p.equalities, p.H, p.g, p.a, p.b };
    double d[MOST], price[ROWS + 1];
    test_about ("seed %d, problem %d", SEED, i);
    if (CHECK (quadratic_least (arena, &q, d, price)))
      check_optimal (&p, d, price);
    arena_destroy (arena);
  }
}

/* The point of a plane nearest to the origin, by hand: x + 2 y + 2 z = 9 at (1, 2, 2).  */
static void
nearest_point_of_a_plane (void)
{
  struct arena *arena = arena_create ();
  const double H[] = { 1, 0, 0, 0, 1, 0, 0, 0, 1 }, g[3] = { 0 }, a[] = { 1, 2, 2 }, b[] = { 9 };
  struct quadratic q = { 3, 1, 1, H, g, a, b };
  double d[3], price[1];
  NEED (quadratic_least (arena, &q, d, price));
  NEAR (d[0], 1, 1e-14);
  NEAR (d[1], 2, 1e-14);
  NEAR (d[2], 2, 1e-14);
  NEAR (price[0], 1, 1e-14);
  arena_destroy (arena);
}

static void
contradictions_are_refused (void)
{
  struct arena *arena = arena_create ();
  const double H[] = { 1, 0, 0, 1 }, indefinite[] = { 1, 2, 2, 1 }, g[] = { 1, 1 };
  const double a[] = { 1, 1, -1, -1 }, b[] = { 2, -1 }, none[] = { 0, 0 }, one[] = { 1 };
  double d[2], price[2];
  struct quadratic apart = { 2, 2, 0, H, g, a, b }, equal = { 2, 2, 2, H, g, a, b };
  struct quadratic empty = { 2, 1, 0, H, g, none, one };
  struct quadratic saddle = { 2, 0, 0, indefinite, g, none, one };
  CHECK (!quadratic_least (arena, &apart, d, price));
  CHECK (!quadratic_least (arena, &equal, d, price));
  CHECK (!quadratic_least (arena, &empty, d, price));
  CHECK (!quadratic_least (arena, &saddle, d, price));
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "random problems are solved", random_problems_are_solved },
  { "the nearest point of a plane", nearest_point_of_a_plane },
  { "contradictions are refused", contradictions_are_refused },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  gsl_set_error_handler_off ();
  return test_main (argc, argv, cases);
}
