#include "config.h"
#include "balance/simplex.h"

#include <math.h>
#include <stdbool.h>
#include "support/arena.h"

#define NONE ((size_t) -1)

/* Costs and pivots below this are nothing, and so is what is left of all rows.  */
static const double nothing = 1e-10, no_pivot = 1e-9, left_over = 1e-6;
/* Right sides of nothing are made about this much, each another, so that no two rows limit a step
   alike: without it most steps get nowhere.                                                     */
static const double unlike = 1e-9;

/* One column for each unknown and then one of its own for each row, the right side that steps go
   by, and the true one; below the rows stands the cost of moving each.                          */
struct tableau {
  size_t rows, columns, width, right;
  double *t, *weight;            /* weight by column: of what it gains, when one is chosen */
  size_t *basic;
};

static double *
row_at (const struct tableau *tableau, size_t i)
{
  return &tableau->t[i * tableau->width];
}

static void
pivot (struct tableau *tableau, size_t at, size_t column)
{
  double *row = row_at (tableau, at), by = row[column];
  for (size_t j = 0; j < tableau->width; j++) {
    row[j] /= by;
  }
  for (size_t i = 0; i <= tableau->rows; i++) {
    double *other = row_at (tableau, i), factor = other[column];
    if (i != at && fabs (factor) > 0) {
      for (size_t j = 0; j < tableau->width; j++) {
        other[j] -= factor * row[j];
      }
      other[column] = 0;
    }
  }
  tableau->basic[at] = column;
}

/* The row that limits COLUMN, of equal ones that of the lowest unknown; NONE.  */
static size_t
limiting (const struct tableau *tableau, size_t column)
{
  size_t found = NONE;
  double least = (double) INFINITY;
  for (size_t i = 0; i < tableau->rows; i++) {
    const double *row = row_at (tableau, i);
    double limit = row[column] > no_pivot ? fmax (row[tableau->right], 0) / row[column]
                                          : (double) INFINITY;
    if (limit < least - 1e-12
        || (limit <= least + 1e-12 && found != NONE
            && tableau->basic[i] < tableau->basic[found])) {
      least = fmin (least, limit);
      found = i;
    }
  }
  return found;
}

/* Goes down until nothing gains; false: there is no end.  A row's own column never comes back.  */
static bool
descend (struct tableau *tableau)
{
  size_t patience = 20 + 2 * (tableau->rows + tableau->columns);
  for (size_t steps = 0; steps < 50 * patience; steps++) {
    const double *cost = row_at (tableau, tableau->rows);
    size_t enters = NONE, leaves;
    for (size_t j = 0; j < tableau->columns; j++) {
      bool better = enters == NONE
                    || (steps < patience
                        && cost[j] * tableau->weight[j] < cost[enters] * tableau->weight[enters]);
      enters = cost[j] < -nothing && better ? j : enters;
    }
    if (enters == NONE) {
      return true;
    }
    leaves = limiting (tableau, enters);
    if (leaves == NONE) {
      return false;
    }
    pivot (tableau, leaves, enters);
  }
  return true;
}

static struct tableau
start (struct arena *arena, const struct simplex *simplex, unsigned seed)
{
  size_t m = simplex->rows, n = simplex->columns, width = n + m + 2;
  struct tableau tableau = { m, n, width, n + m, ARENA_ARRAY (arena, (m + 1) * width, double),
                             ARENA_ARRAY (arena, n + 1, double),
                             ARENA_ARRAY (arena, m + 1, size_t) };
  unsigned long long random = seed + 1;
  double *cost = row_at (&tableau, m);
  for (size_t i = 0; i < m; i++) {
    double *row = row_at (&tableau, i), sign = simplex->b[i] < 0 ? -1 : 1;
    bool none = !(fabs (simplex->b[i]) > 0);
    random = random * 6364136223846793005ULL + 1442695040888963407ULL;
    bool own = simplex->slack[i] == SIMPLEX_NO_SLACK;
    for (size_t j = 0; j < n; j++) {
      row[j] = sign * simplex->a[i * n + j];
      cost[j] -= own ? row[j] : 0;
    }
    row[n + i] = 1;
    cost[n + i] = own ? 0 : 1;
    row[n + m + 1] = sign * simplex->b[i];
    row[n + m] = none ? unlike * (0.5 + (double) (random >> 11) / (double) (1ULL << 53))
                      : row[n + m + 1];
    for (size_t j = n + m; j < width; j++) {
      cost[j] -= own ? row[j] : 0;
    }
    tableau.basic[i] = own ? n + i : simplex->slack[i];
  }
  for (size_t j = 0; j < n; j++) {
    random = random * 6364136223846793005ULL + 1442695040888963407ULL;
    tableau.weight[j] = seed == 0 ? 1 : exp (4 * (double) (random >> 11) / (double) (1ULL << 53));
  }
  return tableau;
}

/* Takes the rows' own columns out of what is basic; what cannot be is a row that says nothing.  */
static void
drive_out (struct tableau *tableau)
{
  for (size_t i = 0; i < tableau->rows; i++) {
    const double *row = row_at (tableau, i);
    size_t best = NONE;
    for (size_t j = 0; j < tableau->columns && tableau->basic[i] >= tableau->columns; j++) {
      best = fabs (row[j]) > no_pivot && (best == NONE || fabs (row[j]) > fabs (row[best]))
               ? j : best;
    }
    if (best != NONE) {
      pivot (tableau, i, best);
    }
  }
}

static void
price (struct tableau *tableau, const double cost[])
{
  double *last = row_at (tableau, tableau->rows);
  for (size_t j = 0; j < tableau->width; j++) {
    last[j] = j < tableau->columns ? cost[j] : 0;
  }
  for (size_t i = 0; i < tableau->rows; i++) {
    double by = tableau->basic[i] < tableau->columns ? cost[tableau->basic[i]] : 0;
    for (size_t j = 0; j < tableau->width && fabs (by) > 0; j++) {
      last[j] -= by * row_at (tableau, i)[j];
    }
  }
}

enum simplex_end
simplex_solve (struct arena *arena, const struct simplex *simplex, const double cost[],
               unsigned seed, double *least, double y[])
{
  struct tableau tableau = start (arena, simplex, seed);
  const double *last = row_at (&tableau, simplex->rows);
  bool ends;
  (void) descend (&tableau);
  if (last[tableau.right] < -left_over) {
    for (size_t i = 0; i < simplex->rows && y; i++) {
      double sign = simplex->b[i] < 0 ? -1 : 1;
      y[i] = sign * (1 - last[simplex->columns + i]);
    }
    return SIMPLEX_NONE;
  }
  if (!cost) {
    return SIMPLEX_LEAST;
  }
  drive_out (&tableau);
  price (&tableau, cost);
  ends = descend (&tableau);
  *least = -last[tableau.right + 1];
  return ends ? SIMPLEX_LEAST : SIMPLEX_ENDLESS;
}
