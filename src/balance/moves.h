/* Figures moved within the digits they are typed with.

   A figure without uncertainty is good to half its last digit; off by anything in between, with
   standard deviation half a last digit over the square root of 3 (JCGM 100:2008, 4.3.7).  A move
   is counted in these.  One figure may have several rows, which it moves together.              */
#ifndef BALANCE_MOVES_H
#define BALANCE_MOVES_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "balance/system.h"

struct arena;

/* The standard deviation of the figure of fact row ROW.  */
double move_deviation (const struct network *, const struct row *);
/* What ROW (of SYSTEM) is out by falls by this form at v for one more of the figure; by 1 where
   that is a flow, and the form empty.  TERMS is room for a stream's, or for those of the fact.  */
struct form move_form (const struct system *, const struct row *, struct term terms[]);
/* The standard deviation of the figure of row I as the row is scaled, and how far that moves the
   row at V: at least as far as where FLOOR flows.  TERMS as above.                              */
double move_scaled (const struct system *, size_t i);
double move_of_row (const struct system *, size_t i, const double v[], double floor,
                    struct term terms[]);
/* A move of half a last digit, and a little for what the search for it leaves; and what is as good
   as impossible: facts without a figure wrong are taken for clashing once in ten thousand.      */
#define MOVE_HALF (1.7320508075688772 * 1.001)
#define MOVE_CHANCE 1e-4
/* Weights for the next search of moves whose largest is least (agree.c), from what the COUNT
   figures OF moved now; true where it is decided, in *WITHIN, whether all can stay within half a
   last digit.                                                                                   */
bool move_weigh (size_t count, const size_t of[], const double y[], double weight[],
                 bool *within);
/* By fact row of SYSTEM: rows of one figure share a number, the first row's.  */
size_t *move_figures (struct arena *, const struct system *);
/* The network of SYSTEM with its figures moved by Y, by number.  */
const struct network *network_moved (struct arena *, const struct system *,
                                     const size_t figure[], const double y[]);

#endif
