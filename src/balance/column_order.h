/* In which order columns are eliminated, so that little fills in.  */
#ifndef BALANCE_COLUMN_ORDER_H
#define BALANCE_COLUMN_ORDER_H

#include <stddef.h>
#include "support/check.h"

struct arena;

/* Sets of columns, one behind the other: set i is column[start[i]] .. column[start[i + 1] - 1].  */
struct sets { size_t count; const size_t *start, *column; };

/* The columns 0 .. COLUMNS - 1 in an order for orthogonal elimination of a matrix whose rows have
   entries in SETS: eliminating a column unites all rows it is in, and the next is always one whose
   rows have few columns besides (minimum degree on A'A, by sums as an upper bound, as Davis,
   Gilbert, Larimore and Ng, ACM Trans. Math. Softw. 30 (2004) 353) and that waits for few steps
   before it: so the triangle is shallow, and one right side that is nearly all zero meets few of
   its rows.  Much the same is done by eliminating many columns at a time that do not touch each
   other (Liu, ACM Trans. Math. Softw. 11 (1985) 141).  Ties by number.                          */
size_t *column_order (struct arena *, size_t columns, size_t many, const struct sets of[])
  MUST_CHECK;

#endif
