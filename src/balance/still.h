/* Facts that hold only where nothing flows.

   Shares and analyses without a flow are met by no flow at all, so rank finds nothing amiss: a feed
   of 60 % that is parted into 97 and 70 % has flows, just none at or above nothing.  What a fact
   speaks of is taken to flow.  Facts then clash when no flows at least zero hold each of them
   within its digits with one in that stream; a set of them is told by the multipliers that prove it
   (Farkas; Gleeson, Ryan, ORSA J. Comput. 2 (1990) 61) and cut down by leaving facts out as long
   as the rest still clash (Chinneck, Dravnieks, ORSA J. Comput. 3 (1991) 157).  Splits of unknown
   share count as separations here, which can hide such a clash and never make one.              */
#ifndef BALANCE_STILL_H
#define BALANCE_STILL_H

#include <stdbool.h>
#include "balance/core.h"
#include "balance/solution.h"
#include "support/check.h"

struct arena; struct fault;

/* The clash of facts of NETWORK that hold a stream of SOLUTION, which is classified, at nothing, or
   that leave only negative flows.  It takes the place of *CONFLICT (null: none) where it is no
   larger, with splits where it is smaller; a network that is too large is not looked through.
   False: interrupted.                                                                           */
bool still_find (struct arena *keep, const struct network *, const struct solve_options *,
                 const struct solution *, const struct conflict **conflict, struct fault *)
  MUST_CHECK;

#endif
