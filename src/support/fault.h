/* What went wrong, where, and the way on.

   A function that can fail takes a `struct fault *` last and leaves its outputs alone when it
   fails.  Facts and hint are copied into the fault's own arena, which the caller of the whole
   statement provides and which outlives the fault.  The first fault stays: setting another one
   changes nothing.  Places count lines and characters from 1; line 0 means not known yet (the
   numerical layers know no lines: the language fills the place in with fault_place).           */
#ifndef SUPPORT_FAULT_H
#define SUPPORT_FAULT_H

#include <stdbool.h>
#include "support/check.h"
#include "support/message.h"

struct arena;

struct place { int line, first, last; };                 /* columns first..last, inclusive */

struct fault {
  enum message kind;                                     /* MESSAGE_NONE: nothing went wrong */
  struct place at;
  const char *fact[MESSAGE_FACTS];
  const char *hint;                                      /* null: the kind's usual way on */
  const char *quote;                                     /* the line the place is in, where that
                                                            is an earlier one; else null */
  struct arena *arena;
  bool dropping;                                         /* the last one set came too late */
};

void fault_init (struct fault *, struct arena *);

/* Records a fault unless there is one.  Always returns false, so that
   `return fault_set (...)` says "failed".  Facts may be null.                                 */
bool fault_set (struct fault *, enum message, const char *fact1, const char *fact2);
bool fault_set_at (struct fault *, enum message, struct place, const char *fact1,
                   const char *fact2);
/* Add the third and fourth fact, replace the usual way on; both belong to the fault set last, and
   are dropped with it if it came too late.                                                    */
void fault_facts (struct fault *, const char *fact3, const char *fact4);
void fault_hint (struct fault *, const char *format, ...) PRINTF_LIKE (2, 3);
/* Says which line the place is in, where that is not the one at hand.  */
void fault_quote (struct fault *, const char *line);
/* Gives a fault without a place this one.  */
void fault_place (struct fault *, struct place);

#endif
