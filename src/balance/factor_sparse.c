/* The sparse way: a triangle with exact, measured and open columns; see fronts.h.

   A gradient is taken apart against the triangle's rows: its parts along measured pivots are its
   spread, those along exact pivots cost nothing, and what is left at an open column says that the
   form is not settled.  Only the rows it meets are looked at: few, as the triangle is shallow.  */
#include "config.h"
#include "balance/factor_way.h"

#include <math.h>
#include <string.h>
#include "balance/fronts.h"
#include "support/arena.h"

/* A gradient by position while it is taken apart, and between times all zero.  What is not zero
   waits in a heap, the first on top.  */
struct apart {
  double *x;
  bool *waits;                   /* by position */
  size_t *heap, count;
  struct spread parts;           /* those along measured pivots, with room for all */
};

struct sparse_factor {
  struct factor head;
  const double *scale, *exact_scale;     /* by unknown; by exact row */
  struct sparse measured;
  size_t exact_count;
  struct fronts fronts;
  struct apart *apart;
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

/* ---- Gradients ---- */

static void
wait (struct apart *apart, size_t k)
{
  size_t at = apart->count++;
  for (; at > 0 && k < apart->heap[(at - 1) / 2]; at = (at - 1) / 2) {
    apart->heap[at] = apart->heap[(at - 1) / 2];
  }
  apart->heap[at] = k;
  apart->waits[k] = true;
}

static size_t
next_waiting (struct apart *apart)
{
  size_t first = apart->heap[0], last = apart->heap[--apart->count], at = 0;
  for (size_t child = 1; child < apart->count; child = 2 * at + 1) {
    child += child + 1 < apart->count && apart->heap[child + 1] < apart->heap[child];
    if (last < apart->heap[child]) {
      break;
    }
    apart->heap[at] = apart->heap[child];
    at = child;
  }
  apart->heap[at] = last;
  apart->waits[first] = false;
  return first;
}

static void
add_at (struct apart *apart, size_t k, double value)
{
  apart->x[k] += value;
  if (!apart->waits[k]) {
    wait (apart, k);
  }
}

/* Adds row I of FORMS times FACTOR, by unknown, in usual changes.  */
static void
add_form (const struct sparse_factor *sparse, const struct sparse *forms, size_t i, double factor)
{
  for (size_t k = forms->start[i]; k < forms->start[i + 1]; k++) {
    size_t j = forms->column[k];
    add_at (sparse->apart, sparse->fronts.at[j], forms->coefficient[k] * sparse->scale[j] * factor);
  }
}

/* Takes apart what was added.  The parts have their positions for places.  False if more than ZERO
   of it is open.  */
static bool
take_apart (const struct sparse_factor *sparse, double zero)
{
  struct apart *apart = sparse->apart;
  bool settled = true;
  apart->parts.count = 0;
  while (apart->count > 0) {
    size_t k = next_waiting (apart), count = apart->parts.count;
    const struct front *front = &sparse->fronts.front[k];
    double here = apart->x[k];
    apart->x[k] = 0;
    if (front->kind == PIVOT_OPEN) {
      settled = settled && fabs (here) <= zero;
      continue;
    }
    double part = here / front->value[0];
    for (size_t i = 1; i < front->count && fabs (here) > 0; i++) {
      add_at (apart, front->position[i], -part * front->value[i]);
    }
    if (front->kind == PIVOT_MEASURED && fabs (here) > 0) {
      apart->parts.place[count] = k;
      apart->parts.part[count] = part;
      apart->parts.count++;
    }
  }
  return settled;
}

/* ---- Solutions ---- */

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
  sparse_times (G, d, rest);
  for (size_t i = 0; i < G->count; i++) {
    add_form (sparse, G, i, e[i] - rest[i]);
  }
  (void) take_apart (sparse, HUGE_VAL);
  const struct spread *parts = &sparse->apart->parts;
  for (size_t i = 0; i < parts->count; i++) {
    right[sparse->fronts.front[parts->place[i]].row] = parts->part[i];
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
spread (const struct factor *factor, struct arena *arena, const struct sparse *forms, size_t i,
        struct spread *out)
{
  const struct sparse_factor *sparse = sparse_of (factor);
  const struct spread *parts = &sparse->apart->parts;
  double size = 0;
  for (size_t k = forms->start[i]; k < forms->start[i + 1]; k++) {
    size = hypot (size, forms->coefficient[k] * sparse->scale[forms->column[k]]);
  }
  add_form (sparse, forms, i, 1);
  if (!take_apart (sparse, FACTOR_SETTLED * size)) {
    return false;
  }
  *out = (struct spread) { parts->count, ARENA_ARRAY (arena, parts->count + 1, size_t),
                           ARENA_ARRAY (arena, parts->count + 1, double) };
  memcpy (out->place, parts->place, parts->count * sizeof *parts->place);
  memcpy (out->part, parts->part, parts->count * sizeof *parts->part);
  return true;
}

static void
leverages (const struct factor *factor, struct arena *scratch, double h[])
{
  const struct sparse_factor *sparse = sparse_of (factor);
  const struct spread *parts = &sparse->apart->parts;
  (void) scratch;
  for (size_t i = 0; i < sparse->measured.count; i++) {
    add_form (sparse, &sparse->measured, i, 1);
    (void) take_apart (sparse, HUGE_VAL);
    h[i] = fmin (1, spread_product (parts, parts));
  }
}

static const struct factor_way sparse_way = { solve, open_move, spread, leverages };

/* Counts the pivots of each kind.  */
static void
count_pivots (struct sparse_factor *sparse, size_t n)
{
  size_t rank = 0, open = 0;
  for (size_t k = 0; k < n; k++) {
    rank += sparse->fronts.front[k].kind == PIVOT_MEASURED;
    open += sparse->fronts.front[k].kind == PIVOT_OPEN;
  }
  sparse->head = (struct factor) { &sparse_way, n, rank, open };
}

static struct apart *
apart_make (struct arena *arena, size_t unknowns, size_t rank)
{
  struct apart *apart = ARENA_NEW (arena, struct apart);
  apart->x = ARENA_ARRAY (arena, unknowns + 1, double);
  apart->waits = ARENA_ARRAY (arena, unknowns + 1, bool);
  apart->heap = ARENA_ARRAY (arena, unknowns + 1, size_t);
  apart->parts.place = ARENA_ARRAY (arena, rank + 1, size_t);
  apart->parts.part = ARENA_ARRAY (arena, rank + 1, double);
  return apart;
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
  count_pivots (sparse, n);
  sparse->apart = apart_make (arena, n, sparse->head.rank);
  return &sparse->head;
}
