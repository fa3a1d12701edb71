/* Sparse rows eliminated: rank, null spaces and solutions of large systems.

   Rows are eliminated by Markowitz' count with threshold pivots (Management Sci. 3 (1957) 255;
   Duff, Erisman, Reid, Direct Methods for Sparse Matrices, 2nd ed. 2017, chapters 5 and 7), those
   first that need no work: columns in one row only, rows with one column only.  What is left when
   few columns are is a dense core, whose rank is told by orthogonal decomposition (rank.h).      */
#ifndef BALANCE_ELIMINATION_H
#define BALANCE_ELIMINATION_H

#include <stddef.h>

struct arena; struct elimination;

/* Rows of entries already scaled to about 1: those of row i are start[i] .. start[i + 1] - 1.  */
struct sparse { size_t rows, columns; const size_t *start, *column; const double *value; };

/* CORE: how many columns may be left for the dense core.  The matrix is not kept.  */
struct elimination *elimination_make (struct arena *, const struct sparse *, size_t core);
size_t elimination_rank (const struct elimination *);
/* X with A X = B if there is one; in the core least squares.  B by row, X by column.  */
void elimination_solve (const struct elimination *, const double b[], double x[]);
/* Null vector K of `columns` - rank, left null vector K of `rows` - rank; neither has any
   particular length.                                                                            */
void elimination_null (const struct elimination *, size_t k, double x[]);
void elimination_left (const struct elimination *, size_t k, double y[]);
/* All left null vectors in pseudorandom parts: an entry is nothing only where it is in each of
   them.  SEED is moved on.                                                                      */
void elimination_left_mixed (const struct elimination *, unsigned long long *seed, double y[]);

#endif
