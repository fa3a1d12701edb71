/* What may still move: an orthonormal basis of a null space.

   It falls into blocks, directions and the columns they move, that have nothing to do with each
   other: the parts of a plant between which all is known.  Each is kept for itself, so that a large
   plant takes no more than its parts.                                                           */
#ifndef BALANCE_NULL_SPACE_H
#define BALANCE_NULL_SPACE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena;

/* Directions FIRST, FIRST + 1 ... of the whole; what they move COLUMN[i] by: base[i * directions +
   k].  Columns ascend.  */
struct null_block {
  size_t columns, first, directions;
  const size_t *column;
  const double *base;
};

struct null_space {
  size_t columns, freedom, blocks;
  const struct null_block *block;
  const size_t *of, *at;         /* by column: its block, its place there; NOWHERE: it stays */
};

/* Any vectors, one behind the other, only what is not zero: vector k has column[start[k]] up to
   column[start[k + 1] - 1].  */
struct null_vectors {
  size_t count;
  const size_t *start, *column;
  const double *value;
  bool (*interrupted) (void);    /* or null; true ends it early, with nothing to be used */
};

/* The space of VECTORS, which are independent, made orthonormal.  */
struct null_space *null_space_make (struct arena *, size_t columns, const struct null_vectors *)
  MUST_CHECK;
/* The space of orthonormal vectors BASE, [column * STRIDE + k] for k below FREEDOM.  */
struct null_space *null_space_of (struct arena *, size_t columns, size_t freedom, size_t stride,
                                  const double base[]) MUST_CHECK;
/* All of it: [column * freedom + k].  */
double *null_space_dense (struct arena *, const struct null_space *) MUST_CHECK;

/* OUT, by direction, gets FACTOR times what moves COLUMN.  */
void null_space_add (const struct null_space *, size_t column, double factor, double out[]);
/* How far COLUMN moves at most when all moves by 1.  */
double null_space_reach (const struct null_space *, size_t column);
/* V, by column, gets what Z, by direction, moves.  */
void null_space_move (const struct null_space *, const double z[], double v[]);
/* Z = what of V lies along each direction.  */
void null_space_along (const struct null_space *, const double v[], double z[]);

#endif
