/* What comes out on paper and hangs on last digits: practically undetermined.

   Two analyses nearly alike at a mixer leave its flows to the last digits typed.  Rank does not
   see it.  Small pivots do, but they see traces too: with fractions of 1e-7 genuine singular
   values reach down to 4e-8.  So what counts is what the figures' digits do: a result is
   practically undetermined when it moves by more than itself while every figure moves by half its
   last digit, each the way that hurts most.  To first order, by the rows' own solution for the
   right sides that half a digit makes.                                                          */
#ifndef BALANCE_LOOSE_H
#define BALANCE_LOOSE_H

#include "balance/core.h"
#include "balance/solution.h"
#include "support/check.h"

struct arena; struct fault;

/* Fills in `loose` of SOLUTION, which is classified; facts agree.  TYPED has the facts of the
   core's network with the digits they were typed with.  False: interrupted.                     */
bool loose_find (struct arena *keep, const struct core *, const struct network *typed,
                 struct solution *, struct fault *) MUST_CHECK;

#endif
