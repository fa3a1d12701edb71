/* Do the facts of a core agree, where too many are to spare for their left null vectors?  */
#ifndef BALANCE_AGREE_SPARSE_H
#define BALANCE_AGREE_SPARSE_H

#include <stddef.h>

struct core; struct term;

/* What is the same for all ways of asking.  */
struct agree_task {
  size_t facts, alone;           /* rows of facts; that of a figure which counts as exact, or
                                    NOWHERE */
  double tolerance;              /* rows out by less hold, scaled */
  double right, flow;            /* the largest right side, scaled and not */
  struct term *terms;            /* room for move_form */
};

/* Sets agree, p, moves and v of the core, whose rows do not hold as typed.  */
void agree_sparsely (struct core *, const struct agree_task *);

#endif
