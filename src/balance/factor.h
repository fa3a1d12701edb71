/* Least squares with exact rows, taken apart once and used many times.

       minimise |e - G d|  subject to  C d = c

   G are the weighted gradients of what was measured, C those of what holds exactly.  Neither need
   have full rank: exact rows may follow from each other, and moves d along which neither C nor G
   changes are open.  Nothing is squared: A'A is never formed.  Two ways with one face: dense, by
   pivoted Householder QR (null space of C first, then G on it), up to some hundreds of unknowns,
   and sparse for what is larger.

   A factor lives in the arena it was made in and looks at nothing else afterwards.              */
#ifndef BALANCE_FACTOR_H
#define BALANCE_FACTOR_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct factor;

/* A matrix by rows, only what is not zero.  START has count + 1 places.  */
struct sparse {
  size_t count;
  size_t *start, *column;
  double *coefficient;
};

/* Room for COUNT rows with TERMS coefficients altogether; then each row is begun, its terms are
   added, and so on.  */
struct sparse sparse_make (struct arena *, size_t count, size_t terms) MUST_CHECK;
void sparse_begin (struct sparse *);
void sparse_add (struct sparse *, size_t column, double coefficient);
struct sparse sparse_copy (struct arena *, const struct sparse *) MUST_CHECK;
/* OUT = R v, summed in long double.  */
void sparse_times (const struct sparse *, const double v[], double out[]);

/* The largest scaled coefficient of row I, 1 if it has none.  */
double sparse_row_size (const struct sparse *, size_t i, const double scale[]);

/* What is to be taken apart: SCALE, by unknown, is what a usual change of it is.  */
struct linearised {
  size_t unknowns;
  struct sparse exact, measured;
  const double *scale;
  const size_t *order;           /* of elimination, or null; the dense way needs none */
};

/* A form that moves by less than this share of its size along what is open is settled.  */
#define FACTOR_SETTLED 1e-8
/* Unknowns up to which the dense way is taken.  */
enum { FACTOR_DENSE = 150 };

const struct factor *factor_make (struct arena *, const struct linearised *) MUST_CHECK;

/* How many independent combinations of open unknowns the measured rows settle.  */
size_t factor_rank (const struct factor *);

/* The least squares solution D of the above, without a move along what is open.  Exact rows that
   contradict each other are met as well as the independent ones among them allow.  SCRATCH: an
   arena for work.  */
void factor_solve (const struct factor *, struct arena *scratch, const double c[],
                   const double e[], double d[]);

/* How many independent moves are open, and one of them at random (SEED), of the size of SCALE.  */
size_t factor_open (const struct factor *);
void factor_open_move (const struct factor *, struct arena *scratch, unsigned seed, double d[]);

/* Of a linear form, such that the covariance of two is the product of their spreads, for measured
   rows of unit variance: the parts that are not zero, by ascending place.  */
struct spread {
  size_t count;
  size_t *place;
  double *part;
};

/* The spread of row I of FORMS, made in ARENA.  False if that form is not settled.  */
bool factor_spread (const struct factor *, struct arena *, const struct sparse *forms, size_t i,
                    struct spread *) MUST_CHECK;
double spread_product (const struct spread *, const struct spread *);

/* The variance of every measured row after the fit, of 1 before it: 1 where nothing else bears on
   it.  */
void factor_leverages (const struct factor *, struct arena *scratch, double h[]);

#endif
