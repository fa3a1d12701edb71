/* Components that cannot be in a stream.

   Linear algebra finds 0 = n1 + n2 open; only flows of at least zero make both nothing.  So what
   is absent is found before any algebra: a component no stream may hold, a figure of exactly
   nothing (a total of 0, a fraction of 0, a fraction of 1 for all others), and what follows: with
   no reaction of it, what enters nowhere leaves nowhere and the other way round, and a split has a
   component in all of its streams or in none.                                                   */
#ifndef BALANCE_ABSENT_H
#define BALANCE_ABSENT_H

#include <stdbool.h>
#include "balance/network.h"
#include "support/check.h"

struct arena;

#define NOWHERE ((size_t) -1)

/* By column: absent, and the fact that says so (NOWHERE: none does).  Extents never are.  TAKE
   says which facts count.                                                                       */
struct absence { bool *absent; size_t *cause; };
struct absence absence_spread (struct arena *, const struct network *, const bool take[]);

/* Is all that fact F says that something is not there, which nothing else said?  Then its columns
   are gone, and a row of it would be 0 = 0, as if the others implied it.  HAVE is room for a number
   for each column, all zero before and after.                                                   */
bool absence_is_all (const struct network *, const struct absence *, size_t f,
                     double have[]) MUST_CHECK;

#endif
