/* Linear programmes of some hundred rows, densely: a x = b, x at least zero.

   Dantzig's simplex method on a tableau in two phases (Chvatal, Linear Programming, 1983, chapters
   2, 3 and 8; its lowest index rule after Bland once it does not get on).  Where nothing holds all
   rows, the multipliers of the first phase say so: y'a is at most zero everywhere and y'b is above
   it (Farkas).                                                                                  */
#ifndef BALANCE_SIMPLEX_H
#define BALANCE_SIMPLEX_H

#include <stddef.h>

struct arena;

/* Row by row.  Rows are best scaled to about 1.  SLACK by row: an unknown that has 1 in it and
   nothing in any other, with a right side of at least zero; or SIMPLEX_NO_SLACK.                */
#define SIMPLEX_NO_SLACK ((size_t) -1)
struct simplex { size_t rows, columns; double *a, *b; size_t *slack; };

enum simplex_end {
  SIMPLEX_NONE,                  /* no x */
  SIMPLEX_LEAST,                 /* the least cost */
  SIMPLEX_ENDLESS                /* as low as one likes */
};

/* The least of COST times x (null: any x will do).  Y by row: the multipliers where there is none,
   null if nobody asks.  SEED above 0: goes other ways, which may end with other multipliers.  */
enum simplex_end simplex_solve (struct arena *, const struct simplex *, const double cost[],
                                unsigned seed, double *least, double y[]);

#endif
