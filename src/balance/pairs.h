/* Two facts at fault where no one alone is.  */
#ifndef BALANCE_PAIRS_H
#define BALANCE_PAIRS_H

#include <stdbool.h>
#include "balance/core.h"
#include "balance/solution.h"
#include "support/check.h"

struct arena; struct fault;

/* The pairs of facts without which all others agree, one of each in SET, that could say something
   else with all flows above nothing: what each would have to say.  Those that would change least
   come first.  Fills in pairs of CONFLICT.  False: interrupted.                                 */
bool pairs_find (struct arena *keep, const struct core *, const bool set[], struct conflict *,
                 struct fault *) MUST_CHECK;

#endif
