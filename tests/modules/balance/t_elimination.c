#include "config.h"

#include <math.h>
#include <stdlib.h>

#include "libtest.h"
#include "balance/elimination.h"
#include "balance/rank.h"
#include "support/arena.h"

enum { SEED = 71, MOST = 40 };

static unsigned long long state;

/* A whole number below N (Knuth's 64-bit multiplier, MMIX).  */
static size_t
random_below (size_t n)
{
  state = state * 6364136223846793005ULL + 1442695040888963407ULL;
  return (size_t) (state >> 33) % n;
}

static double
random_value (void)
{
  return ((double) random_below (2001) - 1000) / 1000;
}

/* A sparse matrix whose last DEPENDENT rows are combinations of others.  */
static void
make (size_t rows, size_t columns, size_t dependent, double a[])
{
  for (size_t i = 0; i < rows * columns; i++) {
    a[i] = 0;
  }
  for (size_t i = 0; i < rows - dependent; i++) {
    for (size_t e = 0; e < 1 + random_below (4); e++) {
      a[i * columns + random_below (columns)] = random_value ();
    }
  }
  for (size_t i = rows - dependent; i < rows; i++) {
    for (size_t n = 0; n < 3; n++) {
      size_t from = random_below (rows - dependent);
      double factor = random_value ();
      for (size_t j = 0; j < columns; j++) {
        a[i * columns + j] += factor * a[from * columns + j];
      }
    }
  }
}

static struct sparse
sparse_of (struct arena *arena, size_t rows, size_t columns, const double a[])
{
  size_t *start = ARENA_ARRAY (arena, rows + 1, size_t), count = 0;
  size_t *column = ARENA_ARRAY (arena, rows * columns + 1, size_t);
  double *value = ARENA_ARRAY (arena, rows * columns + 1, double);
  for (size_t i = 0; i < rows; i++) {
    for (size_t j = 0; j < columns; j++) {
      if (fabs (a[i * columns + j]) > 0) {
        column[count] = j;
        value[count++] = a[i * columns + j];
      }
    }
    start[i + 1] = count;
  }
  return (struct sparse) { rows, columns, start, column, value };
}

/* A X, or Y A, is nothing next to the vector.  */
static void
takes_to_nothing (size_t rows, size_t columns, const double a[], const double v[], bool left)
{
  double most = 0, out = 0;
  for (size_t i = 0; i < (left ? rows : columns); i++) {
    most = fmax (most, fabs (v[i]));
  }
  for (size_t i = 0; i < (left ? columns : rows); i++) {
    double sum = 0;
    for (size_t j = 0; j < (left ? rows : columns); j++) {
      sum += left ? a[j * columns + i] * v[j] : a[i * columns + j] * v[j];
    }
    out = fmax (out, fabs (sum));
  }
  CHECK (most > 0);
  CHECK (out <= 1e-10 * most);
}

/* Null vectors of random matrices, their independence, and a solution, with the core made small and
   large.  The rank is that of the dense decomposition.                                          */
static void
one (struct arena *arena, size_t rows, size_t columns, size_t dependent, size_t core)
{
  double *a = ARENA_ARRAY (arena, rows * columns, double);
  double *b = ARENA_ARRAY (arena, rows, double), *x = ARENA_ARRAY (arena, columns, double);
  double *back = ARENA_ARRAY (arena, rows, double), *nulls;
  struct elimination *e;
  struct sparse s;
  size_t rank;
  make (rows, columns, dependent, a);
  s = sparse_of (arena, rows, columns, a);
  e = elimination_make (arena, &s, core);
  rank = elimination_rank (e);
  SAME_INT (rank, space_make (arena, rows, columns, a).rank);
  nulls = ARENA_ARRAY (arena, columns * (columns - rank) + 1, double);
  for (size_t k = 0; k < columns - rank; k++) {
    elimination_null (e, k, x);
    takes_to_nothing (rows, columns, a, x, false);
    for (size_t j = 0; j < columns; j++) {
      nulls[j * (columns - rank) + k] = x[j];
    }
  }
  SAME_INT (columns_orthonormal (columns, columns - rank, columns - rank, nulls, 0, NULL,
                                 NULL),
            columns - rank);
  for (size_t k = 0; k < rows - rank; k++) {
    elimination_left (e, k, back);
    takes_to_nothing (rows, columns, a, back, true);
  }
  for (size_t i = 0; i < rows; i++) {
    for (size_t j = 0; j < columns; j++) {
      b[i] += a[i * columns + j] * (double) (1 + j % 5);
    }
  }
  elimination_solve (e, b, x);
  for (size_t i = 0; i < rows; i++) {
    double out = -b[i];
    for (size_t j = 0; j < columns; j++) {
      out += a[i * columns + j] * x[j];
    }
    CHECK (fabs (out) < 1e-9);
  }
}

static void
random_matrices (void)
{
  state = SEED;
  for (int n = 0; n < 300; n++) {
    struct arena *arena = arena_create ();
    size_t rows = 5 + random_below (MOST), columns = 5 + random_below (MOST);
    size_t dependent = random_below (4), core = (size_t) (n % 3) * 15;
    test_about ("seed %d, matrix %d: %zu x %zu, %zu dependent, core %zu", (int) SEED, n, rows,
                columns, dependent, core);
    one (arena, rows, columns, dependent, core);
    arena_destroy (arena);
  }
}

/* Columns of length 1 at right angles; the one that depends on others goes.  */
static void
orthonormal (void)
{
  double a[] = { 3, 1, 4, 0, 2, 2, 4, 0, 4 }, along[] = { 1, 10, 11 };
  SAME_INT (columns_orthonormal (3, 3, 3, a, 1, along, NULL), 2);
  NEAR (a[0] * a[0] + a[3] * a[3] + a[6] * a[6], 1, 1e-14);
  NEAR (a[0] * a[1] + a[3] * a[4] + a[6] * a[7], 0, 1e-14);
}

static const struct test_case cases[] = {
  { "random matrices have their null spaces", random_matrices },
  { "columns are made orthonormal", orthonormal },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
