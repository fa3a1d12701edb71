/* Rank, null spaces and least squares of dense matrices.

   A = Q R Z' by Householder reflections with column pivots (the complete orthogonal decomposition:
   Golub, Van Loan, Matrix Computations, 4th ed. 2013, 5.4.7).  What is below 1e-10 of the largest
   pivot counts as nothing: on 2000 random networks the smallest genuine singular value was 4e-8,
   the largest spurious one 7e-16.                                                               */
#ifndef BALANCE_RANK_H
#define BALANCE_RANK_H

#include <stdbool.h>
#include <stddef.h>

struct arena;

/* Matrices lie row by row.  Columns rank.. of Z are the null space, columns rank.. of Q the left
   null space.                                                                                   */
struct space {
  size_t rows, columns, rank;
  const double *q, *z, *r;       /* rows x rows; columns x columns; columns x columns, upper */
  double least;                  /* the smallest pivot that counts over the largest; 1: no rank */
};
struct space space_make (struct arena *, size_t rows, size_t columns, const double a[]);
/* Entry J of null vector K; entry I of left null vector K.  */
double space_null (const struct space *, size_t j, size_t k);
double space_left (const struct space *, size_t i, size_t k);
/* X of least norm that makes A X - B least.  */
void space_solve (struct arena *, const struct space *, const double b[], double x[]);

/* OUT = IN (COUNT x N, row by row) times the matrix M (N x WIDTH).  */
double *matrix_product (struct arena *, size_t count, size_t n, size_t width, const double in[],
                        const double m[]);

/* Makes the columns of A (ROWS x COLUMNS, STRIDE doubles a row) orthonormal and closes up the gaps
   of those that depend on others; how many are left.  ALONG (MORE rows of the same) is combined in
   the same way; null with MORE 0.  By modified Gram and Schmidt, twice (Bjorck, Numerical Methods
   for Least Squares Problems, 1996, 2.4), the longest first.  INTERRUPTED (or null) ends it early,
   with nothing to be used.                                                                      */
size_t columns_orthonormal (size_t rows, size_t columns, size_t stride, double a[], size_t more,
                            double along[], bool (*interrupted) (void));

#endif
