/* The sparse way: a triangle with exact, measured and open columns; see fronts.h.

   A gradient is taken apart against the triangle's rows: its parts along measured pivots are its
   spread, those along exact pivots cost nothing, and what is left at an open column says that the
   form is not settled.                                                                          */
#include "config.h"
#include "balance/factor_way.h"

#include <math.h>
#include <string.h>
#include "balance/fronts.h"
#include "support/arena.h"

struct sparse_factor {
  struct factor head;
  const double *scale, *exact_scale;     /* by unknown; by exact row */
  struct sparse measured;
  size_t exact_count;
  struct fronts fronts;
  const size_t *place;                   /* by position of a measured pivot: where in a spread */
};

static const struct sparse_factor *
sparse_of (const struct factor *factor)
{
  return (const struct sparse_factor *) factor;
}

/* Solves the triangle: X by position has the open columns' values, the others are found from the
   right sides.  D by unknown.  */
static void
back_substitute (const struct sparse_factor *sparse, const double c[], const double e[],
                 double x[], double d[])
{
  for (size_t k = sparse->fronts.columns; k-- > 0;) {
    const struct front *front = &sparse->fronts.front[k];
    size_t column = sparse->fronts.column[k];
    if (front->kind != PIVOT_OPEN) {
      double sum = front->kind == PIVOT_EXACT ? c[front->row] : e[front->row];
      for (size_t i = 1; i < front->count; i++) {
        sum -= front->value[i] * x[front->position[i]];
      }
      x[k] = sum / front->value[0];
    }
    d[column] = sparse->scale[column] * x[k];
  }
}

/* Takes X, by position, apart from position FROM on and leaves it zero.  The sum of squares of its
   spread, or NAN if more than ZERO of it is open.  SPREAD may be null.  */
static double
take_apart (const struct sparse_factor *sparse, size_t from, double zero, double x[],
            double spread[])
{
  double sum = 0;
  for (size_t k = from; k < sparse->fronts.columns; k++) {
    const struct front *front = &sparse->fronts.front[k];
    double here = x[k];
    x[k] = 0;
    if (!(fabs (here) > 0)) {
      continue;
    }
    if (front->kind == PIVOT_OPEN) {
      sum = fabs (here) > zero ? (double) NAN : sum;
      continue;
    }
    double part = here / front->value[0];
    for (size_t i = 1; i < front->count; i++) {
      x[front->position[i]] -= part * front->value[i];
    }
    sum += front->kind == PIVOT_MEASURED ? part * part : 0;
    if (spread && front->kind == PIVOT_MEASURED) {
      spread[sparse->place[k]] = part;
    }
  }
  return sum;
}

/* One step of refinement: what gradient of the sum of squares D leaves, which is rounding that
   small exact pivots have blown up, goes through the triangle twice (Bjorck, Linear Algebra Appl.
   88/89 (1987) 31).  */
static void
refine (const struct sparse_factor *sparse, struct arena *scratch, const double e[], double d[])
{
  const struct sparse *G = &sparse->measured;
  size_t n = sparse->head.unknowns;
  double *rest = ARENA_ARRAY (scratch, G->count + 1, double);
  double *right = ARENA_ARRAY (scratch, G->count + 1, double);
  double *zero = ARENA_ARRAY (scratch, sparse->exact_count + 1, double);
  double *x = ARENA_ARRAY (scratch, n + 1, double), *more = ARENA_ARRAY (scratch, n + 1, double);
  double *part = ARENA_ARRAY (scratch, sparse->head.rank + 1, double);
  sparse_times (G, d, rest);
  for (size_t i = 0; i < G->count; i++) {
    for (size_t k = G->start[i]; k < G->start[i + 1]; k++) {
      size_t j = G->column[k];
      x[sparse->fronts.at[j]] += G->coefficient[k] * sparse->scale[j] * (e[i] - rest[i]);
    }
  }
  take_apart (sparse, 0, HUGE_VAL, x, part);
  for (size_t k = 0; k < n; k++) {
    const struct front *front = &sparse->fronts.front[k];
    if (front->kind == PIVOT_MEASURED) {
      right[front->row] = part[sparse->place[k]];
    }
  }
  back_substitute (sparse, zero, right, x, more);
  for (size_t j = 0; j < n; j++) {
    d[j] += more[j];
  }
}

static void
solve (const struct factor *factor, struct arena *scratch, const double c[], const double e[],
       double d[])
{
  const struct sparse_factor *sparse = sparse_of (factor);
  size_t m = sparse->measured.count;
  double *right_c = ARENA_ARRAY (scratch, sparse->exact_count + 1, double);
  double *right_e = ARENA_ARRAY (scratch, m + 1, double);
  double *x = ARENA_ARRAY (scratch, factor->unknowns + 1, double);
  for (size_t i = 0; i < sparse->exact_count; i++) {
    right_c[i] = c[i] / sparse->exact_scale[i];
  }
  memcpy (right_e, e, m * sizeof *e);
  fronts_turn (&sparse->fronts, right_c, right_e);
  back_substitute (sparse, right_c, right_e, x, d);
  refine (sparse, scratch, e, d);
}

static void
open_move (const struct factor *factor, struct arena *scratch, unsigned seed, double d[])
{
  const struct sparse_factor *sparse = sparse_of (factor);
  double *c = ARENA_ARRAY (scratch, sparse->exact_count + 1, double);
  double *e = ARENA_ARRAY (scratch, sparse->measured.count + 1, double);
  double *x = ARENA_ARRAY (scratch, factor->unknowns + 1, double);
  for (size_t k = 0; k < factor->unknowns; k++) {
    double random = factor_random (&seed);
    x[k] = sparse->fronts.front[k].kind == PIVOT_OPEN ? random : 0;
  }
  back_substitute (sparse, c, e, x, d);
}

static bool
spread (const struct factor *factor, struct arena *scratch, const double f[], double out[])
{
  const struct sparse_factor *sparse = sparse_of (factor);
  double *x = ARENA_ARRAY (scratch, factor->unknowns + 1, double), size = 0;
  for (size_t j = 0; j < factor->unknowns; j++) {
    x[sparse->fronts.at[j]] = f[j] * sparse->scale[j];
    size += f[j] * sparse->scale[j] * f[j] * sparse->scale[j];
  }
  memset (out, 0, factor->rank * sizeof *out);
  return !isnan (take_apart (sparse, 0, FACTOR_SETTLED * sqrt (size), x, out));
}

static void
leverages (const struct factor *factor, struct arena *scratch, double h[])
{
  const struct sparse_factor *sparse = sparse_of (factor);
  const struct sparse *G = &sparse->measured;
  double *x = ARENA_ARRAY (scratch, factor->unknowns + 1, double);
  for (size_t i = 0; i < G->count; i++) {
    size_t first = factor->unknowns;
    for (size_t k = G->start[i]; k < G->start[i + 1]; k++) {
      size_t at = sparse->fronts.at[G->column[k]];
      x[at] += G->coefficient[k] * sparse->scale[G->column[k]];
      first = at < first ? at : first;
    }
    h[i] = fmin (1, take_apart (sparse, first, HUGE_VAL, x, NULL));
  }
}

static const struct factor_way sparse_way = { solve, open_move, spread, leverages };

/* Counts the pivots of each kind; the measured ones get their places.  */
static void
count_pivots (struct arena *arena, struct sparse_factor *sparse, size_t n)
{
  size_t *place = ARENA_ARRAY (arena, n + 1, size_t), rank = 0, open = 0;
  for (size_t k = 0; k < n; k++) {
    enum pivot_kind kind = sparse->fronts.front[k].kind;
    place[k] = rank;
    rank += kind == PIVOT_MEASURED;
    open += kind == PIVOT_OPEN;
  }
  sparse->place = place;
  sparse->head = (struct factor) { &sparse_way, n, rank, open, rank };
}

const struct factor *
factor_make_sparse (struct arena *arena, const struct linearised *equations)
{
  struct sparse_factor *sparse = ARENA_NEW (arena, struct sparse_factor);
  size_t n = equations->unknowns, count = equations->exact.count;
  double *size = ARENA_ARRAY (arena, count + 1, double);
  sparse->scale = memcpy (ARENA_ARRAY (arena, n, double), equations->scale, n * sizeof (double));
  for (size_t i = 0; i < count; i++) {
    size[i] = sparse_row_size (&equations->exact, i, equations->scale);
  }
  sparse->exact_scale = size;
  sparse->exact_count = count;
  sparse->measured = sparse_copy (arena, &equations->measured);
  sparse->fronts = fronts_make (arena, equations, size);
  count_pivots (arena, sparse, n);
  return &sparse->head;
}
