/* Facts moved to what they say at a solution.  */
#ifndef BALANCE_SETTLE_H
#define BALANCE_SETTLE_H

#include <stdbool.h>
#include "balance/core.h"
#include "balance/network.h"

struct arena; struct conflict; struct fault;

/* NETWORK with the facts in MOVED saying what they say at V, and no longer measured; what says
   nothing there, or with V null, stays as it was.                                               */
const struct network *network_settle (struct arena *, const struct network *, const bool moved[],
                                      const double v[]);

/* Looks after streams that are held at nothing by fractions and ratios alone.  Where these agree
   within their digits once something flows, CORE becomes that of facts so moved; where they clash,
   CONFLICT says how.  False: interrupted.                                                       */
struct idle { const struct core *core; const struct conflict *conflict; };
bool idle_look (struct arena *keep, struct idle *, struct fault *) MUST_CHECK;

#endif
