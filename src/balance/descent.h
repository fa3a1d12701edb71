/* One step of the search for the least sum of squares, and how far it is taken.

   Where the exact rows are met, a step is brought back to them by moves that change the figures
   least, and goes down with the sum of squares; a step that is too bold is shortened, and the next
   one damped (Levenberg, Quart. Appl. Math. 2 (1944) 164).  Where they are not met, a step comes
   nearer to them, by turns with the figures in view and without, and no flow falls to zero.  Before
   zero there may be a barrier: - 2 barrier sum log (flow) (Fiacco and McCormick, Nonlinear
   Programming, 1968).                                                                           */
#ifndef BALANCE_DESCENT_H
#define BALANCE_DESCENT_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/measured.h"

struct arena; struct factor;

struct descent {
  struct arena *arena;           /* work: forgotten after each step */
  const struct measured *measured;
  double *v, *trial;             /* by place */
  double *d;                     /* by unknown: the step */
  bool linear;                   /* everything is: one step does it */
  double met;                    /* exact rows are to be met to so much of their terms */
  double damping, barrier;       /* of the next step; 0: none */
  bool whole;                    /* the last step was taken as a whole, and with its barrier */
  bool blind;                    /* nearer to the exact rows without the figures in view */
  size_t limit, blocked;         /* streams: what shortened the last step; what stops the search */
  size_t before;                 /* what shortened the step before, */
  int times;                     /* in a row */
};

/* In the end exact rows are met to this much of their terms.  */
#define DESCENT_MET 1e-14
/* In usual flows: what is below zero by less is not.  */
#define DESCENT_BELOW 1e-9

/* Everything is to be zero but `arena`, `measured` and the room for points.  */
void descent_init (struct descent *);

/* Everything linearised at its point, for the next step.  */
struct tangent descent_tangent (struct descent *, bool met);
/* By unknown from place: TO = FROM + SHARE D.  */
void descent_add (const struct measured *, const double from[], double share, const double d[],
                  double to[]);

/* The sum of squares.  The largest that any exact row is short of, by its terms.  */
double descent_squares (const struct tangent *);
double descent_worst (const struct tangent *);
/* Could the step take away half of what exact rows are short of, were all linear?  Else they
   contradict each other.  */
bool descent_gains (struct descent *, const struct tangent *);
/* The largest that the step moves a figure by, in its uncertainty, beyond rounding.  */
double descent_move (struct descent *, const struct tangent *);
/* Is no flow below zero?  */
bool descent_is_inside (const struct descent *);

/* Takes as much of the step as does good; false if nothing does.  */
bool descent_step (struct descent *, const struct factor *, const struct tangent *);
/* The last step, which hardly moves anything.  */
void descent_end (struct descent *, const struct factor *, const struct tangent *);
/* Is the stream that shortened the step next to nothing?  It is noted then.  */
bool descent_is_blocked (struct descent *);

#endif
