/* In which order columns are eliminated, so that little fills in.  */
#ifndef BALANCE_COLUMN_ORDER_H
#define BALANCE_COLUMN_ORDER_H

#include <stddef.h>
#include "support/check.h"

struct arena;

/* Sets of columns, one behind the other: set i is column[start[i]] .. column[start[i + 1] - 1].  */
struct sets { size_t count; const size_t *start, *column; };

/* The columns 0 .. COLUMNS - 1 in an order for orthogonal elimination of a matrix whose rows have
   entries in SETS: eliminating a column unites all rows it is in, and the next is always the one
   whose rows have the fewest columns besides (minimum degree on A'A, by sums as an upper bound, as
   Davis, Gilbert, Larimore and Ng, ACM Trans. Math. Softw. 30 (2004) 353).  Ties by number.      */
size_t *column_order (struct arena *, size_t columns, size_t many, const struct sets of[])
  MUST_CHECK;

#endif
