/* Flows at least zero that hold facts which say nothing of how much flows.  */
#ifndef BALANCE_CONE_H
#define BALANCE_CONE_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "support/check.h"

struct arena; struct range; struct suspect;

/* The facts in TAKE, exactly or each within half its last digit, with a flow in stream TARGET.  */
struct cone { const struct network *network; const bool *take; size_t target; bool digits; };

/* About the multiplications that looking for flows takes: as many steps as there are rows.  */
double cone_work (const struct network *);

/* Are there such flows?  If not, BLAMED by fact (unless null): those that a proof of it leans on,
   but for what they say is not there.  SEED: other seeds may give other proofs.                 */
bool cone_flows (struct arena *, const struct cone *, unsigned seed, bool blamed[]);

/* What the fact of SUSPECT may say with such flows, of a composition its component; false: there
   are none.  Exactly, or where that fails within digits.                                        */
bool cone_room (struct arena *, struct cone *, const struct suspect *, struct range *);

#endif
