/* A long plant, for tests and measurements of size: rings of a mixer, a separator and a split, each
   fed by the one before and by a stream of its own.

   Streams: 0 is the first feed; ring m has 1 + 6 m: what enters the separator, its top (to the next
   ring), its rest, what of that is sent back, the purge, the ring's own feed.  Every recovery,
   share and feed is known, so that the plant is determined.                                     */
#ifndef CHAIN_H
#define CHAIN_H

#include <stddef.h>
#include "balance/network.h"

struct arena;

enum { CHAIN_COMPONENTS = 6, CHAIN_STREAMS = 6, CHAIN_BOUNDARIES = 3 };

struct chain {
  size_t rings;
  size_t unknown_recoveries;     /* of the ring in the middle, left out of the facts */
  size_t unknown_shares;         /* rings whose share is left out */
  size_t told_fractions;         /* rings that have the fraction of the first component in their
                                    rest as well, as it is with the shares given */
  size_t shares_twice;           /* rings that have the share of the purge as well */
  double wrong;                  /* which is more by so much */
};

const struct network *chain_make (struct arena *, const struct chain *);

#endif
