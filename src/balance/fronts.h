/* Sparse exact and measured rows brought to triangular form, column by column.

   For each column, in an order that keeps fill low, the rows that begin with it are gathered in a
   small dense block, a front.  Exact rows are made triangular among themselves by Householder
   reflections; the first becomes the column's pivot and is subtracted from the measured rows, as in
   elimination, which is what weights without bound would come to.  Where no exact row is left, a
   measured one becomes the pivot by reflections; where none is, the column is open.  What is left
   of the rows goes on to the column it now begins with.

   Exact rows first: Bjorck, Numerical Methods for Least Squares Problems (1996), section 5.1.4;
   rows merged in fronts: Liu, SIAM J. Sci. Stat. Comput. 7 (1986) 1190; a column without pivot is
   passed over: Heath, SIAM J. Sci. Stat. Comput. 3 (1982) 223.                                   */
#ifndef BALANCE_FRONTS_H
#define BALANCE_FRONTS_H

#include <stddef.h>
#include "balance/factor.h"
#include "support/check.h"

struct arena;

/* Householder reflections one after the other, on the places ROW of a right side: step t on places
   t .. count - 1 with count - t numbers of V, and TAU.  */
struct reflections {
  size_t count, steps;
  const size_t *row;
  const double *v, *tau;
};

enum pivot_kind { PIVOT_OPEN, PIVOT_EXACT, PIVOT_MEASURED };

/* Column number AT in order, a position.  Its row of the triangle begins with itself.  */
struct front {
  enum pivot_kind kind;
  size_t row;                    /* the place of its right side */
  size_t count;
  const size_t *position;
  const double *value;
  /* What is done to right sides: the exact ones, what is subtracted from the measured ones, the
     measured ones.  */
  struct reflections exact, measured;
  size_t subtractions;
  const size_t *from;            /* the places of the measured right sides */
  const double *multiplier;
};

struct fronts {
  size_t columns;
  const size_t *at;              /* by column: its position */
  const size_t *column;          /* by position */
  const struct front *front;     /* by position */
};

/* Rows of both sparse matrices, exact ones over ROW_SIZE, columns times SCALE.  */
struct fronts fronts_make (struct arena *, const struct linearised *, const double row_size[])
  MUST_CHECK;

/* What the elimination makes of right sides.  */
void fronts_turn (const struct fronts *, double c[], double e[]);

#endif
