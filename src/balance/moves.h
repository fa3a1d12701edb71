/* Figures moved within the digits they are typed with.

   A figure without uncertainty is good to half its last digit; off by anything in between, with
   standard deviation half a last digit over the square root of 3 (JCGM 100:2008, 4.3.7).  A move
   is counted in these.  One figure may have several rows, which it moves together.              */
#ifndef BALANCE_MOVES_H
#define BALANCE_MOVES_H

#include <stddef.h>
#include "balance/network.h"
#include "balance/system.h"

struct arena;

/* The standard deviation of the figure of fact row ROW.  */
double move_deviation (const struct network *, const struct row *);
/* What ROW (of SYSTEM) is out by falls by this form at v for one more of the figure; by 1 where
   that is a flow, and the form empty.  TERMS is room for a stream's, or for those of the fact.  */
struct form move_form (const struct system *, const struct row *, struct term terms[]);
/* By fact row of SYSTEM: rows of one figure share a number, the first row's.  */
size_t *move_figures (struct arena *, const struct system *);
/* The network of SYSTEM with its figures moved by Y, by number.  */
const struct network *network_moved (struct arena *, const struct system *,
                                     const size_t figure[], const double y[]);

#endif
