/* The rows of a network solved: do the facts agree, one solution, and all others.

   Facts are typed with so many digits and no more, so they agree when moves within those digits
   make them hold and none of these stands out (see agree.c).  All the rest is then that of the
   figures so moved.  Splits of unknown share are made linear where the composition of one of their
   streams comes out, else solved by damped Newton steps (see bend.c).                           */
#ifndef BALANCE_CORE_H
#define BALANCE_CORE_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "balance/system.h"
#include "support/check.h"

struct arena; struct fault; struct null_space; struct solve_options;

struct core {
  struct arena *arena;           /* where its work lives */
  const struct network *network; /* with the figures as they are counted */
  const struct network *typed;   /* and as they are typed: the same where they need no moving */
  const struct solve_options *options;
  struct system *system;
  struct split *split;           /* by boundary */
  double *v;                     /* by column: a solution; where facts clash, the nearest */
  size_t freedom, surplus;       /* bends counted */
  const struct null_space *null; /* in w; `freedom` directions */
  bool agree;
  double p;                      /* of as large a disagreement within the digits typed */
  const double *sigma;           /* by fact row: standard deviation of its residual, scaled */
  const size_t *figure;          /* by fact row: rows of one figure share a number */
  const double *moves;           /* by that number: where the facts agree only within their digits,
                                    how many standard deviations; else null */
  size_t roots;                  /* other solutions that bent splits allow: all there are when */
  double **root;                 /* nothing is open, else some of many */
};

/* Solves NETWORK with the facts in TAKE, which stays the caller's.  Null: interrupted, or not
   converged.                                                                                    */
struct core *core_make (struct arena *, const struct network *, const bool take[],
                        const struct solve_options *, struct fault *) MUST_CHECK;

/* The same as far as it goes without solving bent splits, and without a null space that is large:
   whether the facts agree is all that is asked.                                                 */
struct core *core_outline (struct arena *, const struct network *, const bool take[],
                           const struct solve_options *, struct fault *) MUST_CHECK;

/* Do the facts in TAKE clash, as far as can be told without solving bent splits?  */
bool core_clashes (struct arena *, const struct network *, const bool take[],
                   const struct solve_options *);

/* Do the facts agree?  Sets agree, p, sigma, figure, moves and makes `v` what goes with those.  */
void core_agree (struct core *);
/* Makes sure that the null space is there.  */
void core_open (struct core *);
/* The splits that are still bent, at a solution; false, with a fault: not converged.  */
bool core_bend (struct core *, struct fault *) MUST_CHECK;
/* Sets a fault if the user wants to stop.  */
bool core_goes_on (const struct solve_options *, struct fault *) MUST_CHECK;

/* Fractions that all solutions share: by stream and component, NAN where they do not.  V are
   COUNT solutions, as generic as can be had.                                                    */
void core_fractions (const struct core *, size_t count, double *const v[], double fraction[]);
/* COUNT generic solutions by column, inside the bounds of the flows if there are such.  */
double **core_generic (struct arena *, const struct core *, size_t count);

#endif
