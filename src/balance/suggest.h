/* What would close a network that is short of facts.

   A quantity helps where its gradient moves along the null space.  Sets of helpful quantities are
   a matroid, so the greedy choice is best (Edmonds, Math. Program. 1 (1971) 127): totals before
   fractions before single flows, shares and extents, and of a kind the one that stands out most of
   what the set has so far.                                                                      */
#ifndef BALANCE_SUGGEST_H
#define BALANCE_SUGGEST_H

#include "balance/core.h"
#include "balance/solution.h"

/* Fills in suggestions, useless and left of SOLUTION, which is classified.  */
void suggest (struct arena *keep, const struct core *, struct solution *);

#endif
