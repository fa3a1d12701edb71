/* Facts that cannot all hold: the smallest set, where it does not close, and what each fact would
   have to say if it alone were at fault.

   A vector of multipliers that takes the facts, with the balances, to 0 = something names facts
   that clash; a set is smallest when its multipliers are an elementary vector (Gleeson, Ryan,
   ORSA J. Comput. 2 (1990) 61; Chinneck, Dravnieks, ORSA J. Comput. 3 (1991) 157).  Balances are
   not accused: those with multipliers are the envelope that does not close.                     */
#ifndef BALANCE_CONFLICT_H
#define BALANCE_CONFLICT_H

#include "balance/core.h"
#include "balance/solution.h"

struct arena; struct fault;

/* Fills in `conflict` of SOLUTION from facts that do not agree.  False: interrupted.  */
bool conflict_find (struct arena *keep, const struct core *, struct solution *, struct fault *)
  MUST_CHECK;

/* What the fact of SUSPECT would have to say for the rest (TAKE without it, in NETWORK, which is
   the core's or a part of it) to hold, of a composition its component; NAN where the rest does not
   say that it is one value.  Plausible: it could be, and no flow would be negative or nothing.   */
bool suspect_need (const struct core *, const struct network *, const bool take[],
                   struct suspect *, struct fault *) MUST_CHECK;

/* The same of COUNT facts that are left out of the core's together.  */
bool suspects_need (const struct core *, struct suspect suspects[], size_t count,
                    struct fault *) MUST_CHECK;

/* The boundaries in KEEP and the facts in TAKE with their streams; the others are left without
   anything.                                                                                     */
const struct network *network_part (struct arena *, const struct network *, const bool keep[],
                                    const bool take[]);

#endif
