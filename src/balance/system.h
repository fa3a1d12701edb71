/* A network as rows of linear equations, and what their algebra comes to.

   A row says sum coefficient * v[column] = right.  First come those of the structure (balances,
   and the equal compositions of splits where they are linear), then those of the facts that are
   taken as exact.  Rows are kept sparse, one behind the other, and in the network's own units;
   `scale` is applied by whoever factors them.

   A split of unknown share is bilinear: n[outlet,c] - (F[outlet] / F[inlet]) n[inlet,c] = 0.  It
   is linear where the share is known, or the composition of any of its streams.  Where neither is,
   the split stays bent: `system_bent` gives its rows at a point.                                */
#ifndef BALANCE_SYSTEM_H
#define BALANCE_SYSTEM_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/absent.h"
#include "balance/network.h"

struct arena; struct null_space; struct reduction;

enum row_kind { ROW_BALANCE, ROW_SPLIT, ROW_FACT };
/* Whose row it is: of boundary or fact `of`.  COMPONENT is NOWHERE where it has none.  */
struct row { enum row_kind kind; size_t of, component; };

/* Sparse rows: the entries of row i are start[i] .. start[i + 1] - 1.  */
struct rows {
  size_t count;
  size_t *start, *column;
  double *coefficient, *right;
  struct row *row;
};

/* How a split is given.  */
enum split_way {
  SPLIT_NONE,                    /* no split, or nothing to split: one component, one outlet */
  SPLIT_BENT,                    /* shares unknown */
  SPLIT_COMPOSED                 /* `x`: the composition of all its streams; `from`: the stream it
                                    was found in */
};
struct split {
  enum split_way way;
  size_t from;
  const double *x;               /* by component */
  double *share;                 /* by outlet: known from two totals, else NAN; null: none is */
  double *part;                  /* by component: its fraction in a bent split, found in stream
                                    `part_from`, or NAN; null: none is */
  size_t *part_from;
};

/* One outlet whose equal composition is bilinear.  */
struct bend { size_t boundary, inlet, outlet; };

struct system {
  const struct network *network;
  const bool *take;              /* by fact: has it rows here?  Measured facts have none.  */
  struct absence absence;        /* absent columns have no entry in any row */
  size_t columns, present;       /* those of the network; those that are not absent */
  struct rows rows;
  size_t structure;              /* rows [0, structure) are no facts */
  const struct split *split;     /* by boundary */
  size_t bends; const struct bend *bend;
  const double *scale;           /* by column, powers of two: v = scale * w */
  const double *row_scale;       /* by row: the scaled row is row_scale * row * scale */

  /* Filled in by `system_reduce` (reduce.h), with bends not yet counted.  W are the scaled unknowns
     and facts are the rows from `structure` on, scaled.                                         */
  size_t rank, freedom, surplus;
  const struct null_space *null; /* orthonormal in w; null until `system_open` */
  const double *particular;      /* by column, in v: least squares where the facts clash */
  const double *left;            /* [fact row * surplus + k]: multipliers of facts which some of the
                                    structure's take to nothing, orthonormal; null until
                                    `system_left` where there are many */
  struct reduction *reduction;
};

/* The rows of NETWORK with the facts in TAKE, with the splits as SPLIT says (null: bent, but for
   shares that are facts).                                                                       */
struct system *system_make (struct arena *, const struct network *, const bool take[],
                            const struct split split[]);

/* The rows of the bends at V: their derivatives, and `right` what they are short of zero, so that
   a step d with rows * d = right is Newton's.  They are one fewer for each outlet than it has
   components whose fraction is not known (one follows from the rest).                           */
struct rows system_bent (struct arena *, const struct system *, const double v[]);

/* The rows that bends would have with the shares SHARE, by bend; `right` as above.  */
struct rows system_shared (struct arena *, const struct system *, const double share[],
                           const double v[]);

/* Row I at V less its right side.  */
double rows_residual (const struct rows *, size_t i, const double v[]);

/* Is the column a component flow of this stream that may be there?  The total of a stream.  */
double system_total (const struct system *, const double v[], size_t stream);
/* How many components a stream has.  */
size_t system_parts (const struct system *, size_t stream);

#endif
