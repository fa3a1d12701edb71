#include "config.h"
#include "balance/factor.h"

#include <math.h>
#include <string.h>
#include "balance/factor_way.h"
#include "support/arena.h"

struct sparse
sparse_make (struct arena *arena, size_t count, size_t terms)
{
  struct sparse made = { 0, ARENA_ARRAY (arena, count + 1, size_t),
                       ARENA_ARRAY (arena, terms + 1, size_t),
                       ARENA_ARRAY (arena, terms + 1, double) };
  return made;
}

void
sparse_begin (struct sparse *sparse)
{
  sparse->start[sparse->count + 1] = sparse->start[sparse->count];
  sparse->count++;
}

void
sparse_add (struct sparse *sparse, size_t column, double coefficient)
{
  size_t at = sparse->start[sparse->count]++;
  sparse->column[at] = column;
  sparse->coefficient[at] = coefficient;
}

struct sparse
sparse_copy (struct arena *arena, const struct sparse *sparse)
{
  size_t count = sparse->count, terms = sparse->start[count];
  struct sparse copy = sparse_make (arena, count, terms);
  copy.count = count;
  memcpy (copy.start, sparse->start, (count + 1) * sizeof *copy.start);
  memcpy (copy.column, sparse->column, terms * sizeof *copy.column);
  memcpy (copy.coefficient, sparse->coefficient, terms * sizeof *copy.coefficient);
  return copy;
}

void
sparse_times (const struct sparse *sparse, const double v[], double out[])
{
  for (size_t i = 0; i < sparse->count; i++) {
    long double sum = 0;
    for (size_t k = sparse->start[i]; k < sparse->start[i + 1]; k++) {
      sum += (long double) sparse->coefficient[k] * (long double) v[sparse->column[k]];
    }
    out[i] = (double) sum;
  }
}

double
sparse_row_size (const struct sparse *sparse, size_t i, const double scale[])
{
  double largest = 0;
  for (size_t k = sparse->start[i]; k < sparse->start[i + 1]; k++) {
    largest = fmax (largest, fabs (sparse->coefficient[k] * scale[sparse->column[k]]));
  }
  return largest > 0 ? largest : 1;
}

const struct factor *
factor_make (struct arena *arena, const struct linearised *equations)
{
  return equations->unknowns > FACTOR_DENSE ? factor_make_sparse (arena, equations)
                                            : factor_make_dense (arena, equations);
}

/* The multiplier and increment of Numerical Recipes (1992), section 7.1, "an even quicker"
   generator: any that never repeats within a matrix will do.  */
double
factor_random (unsigned *state)
{
  *state = (1664525u * *state + 1013904223u) & 0xffffffffu;
  return (double) (*state >> 8) / (1 << 23) - 1;
}

size_t
factor_open (const struct factor *factor)
{
  return factor->open;
}

void
factor_open_move (const struct factor *factor, struct arena *scratch, unsigned seed, double d[])
{
  factor->way->open_move (factor, scratch, seed, d);
}

size_t
factor_rank (const struct factor *factor)
{
  return factor->rank;
}

void
factor_solve (const struct factor *factor, struct arena *scratch, const double c[],
              const double e[], double d[])
{
  factor->way->solve (factor, scratch, c, e, d);
}

bool
factor_spread (const struct factor *factor, struct arena *arena, const struct sparse *forms,
               size_t i, struct spread *spread)
{
  return factor->way->spread (factor, arena, forms, i, spread);
}

double
spread_product (const struct spread *a, const struct spread *b)
{
  double product = 0;
  for (size_t i = 0, k = 0; i < a->count && k < b->count;) {
    if (a->place[i] == b->place[k]) {
      product += a->part[i++] * b->part[k++];
    } else if (a->place[i] < b->place[k]) {
      i++;
    } else {
      k++;
    }
  }
  return product;
}

void
factor_leverages (const struct factor *factor, struct arena *scratch, double h[])
{
  factor->way->leverages (factor, scratch, h);
}
