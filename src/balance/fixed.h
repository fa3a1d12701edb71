/* What of a solved network is fixed, and how far the rest may go.

   With N the null space, a linear form g has one value on all solutions where |g N| is nothing.
   What N leaves open may still be fixed because no flow is below zero: its range has no width.
   A fraction is fixed where generic solutions agree on it.  With splits of unknown share the
   ranges are those without their equal compositions: none is wider than the truth allows only
   where no such split is left.                                                                  */
#ifndef BALANCE_FIXED_H
#define BALANCE_FIXED_H

#include "balance/core.h"
#include "balance/solution.h"

/* Fills in value, fixed, fixed_total, fixed_fraction, fraction, scale_open, range, total_range,
   group and negative of SOLUTION, in KEEP.  Interrupted it comes back early, with nothing to be
   used.                                                                                         */
void fixed_classify (struct arena *keep, const struct core *, struct solution *);

/* G = gradient of a quantity at V in the null space (`freedom` doubles); the norm of the gradient
   itself, in the same scale.  For a fraction and a share the gradient of the ratio.             */
double quantity_reach (const struct core *, const struct quantity *, const double v[], double g[]);

#endif
