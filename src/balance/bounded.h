/* The least weighted sum of squared adjustments with no flow below zero.

   Flows that come out below zero are held there and the rest is fitted again; a flow that is held
   and would rather rise is let go (Lawson and Hanson, Solving Least Squares Problems, 1974,
   chapter 23).  A stream of several components whose total falls below zero is held as a whole:
   what was analysed of it says nothing then.                                                    */
#ifndef BALANCE_BOUNDED_H
#define BALANCE_BOUNDED_H

#include <stdbool.h>
#include "balance/minimise.h"
#include "support/check.h"

struct arena; struct fault; struct solve_options;

/* A flow below zero by more than this share of the largest is no rounding.  */
#define BOUNDED_BELOW 1e-9

/* The largest component flow of a fit.  */
double fit_largest (const struct measured *, const struct fit *);

/* What is held is in `measured->held`, also at first.  FROM: where to start, or null.  Faults:
   interrupted, not-converged.  */
bool minimise_bounded (struct arena *, struct measured *, const struct solve_options *,
                       const double from[], struct fit *, struct fault *) MUST_CHECK;

#endif
