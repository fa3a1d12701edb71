/* What the rows of a system come to: rank, null space, surplus, solutions.  */
#ifndef BALANCE_REDUCE_H
#define BALANCE_REDUCE_H

#include <stddef.h>
#include "balance/system.h"

struct arena;

/* Fills in what the rows of SYSTEM come to, but the null space, and the left null vectors only
   where they are few.  A surplus is one of facts: what balances say twice is none.  Up to CORE
   columns are left to dense algebra; REDUCE_CORE is what pays.                                  */
enum { REDUCE_CORE = 100 };
void system_reduce (struct arena *, struct system *, size_t core);
/* Adds the null space, which with little known is large.  INTERRUPTED (or null) ends it early, with
   nothing to be used.  */
void system_open (struct arena *, struct system *, bool (*interrupted) (void));
/* Adds the left null vectors, if they are not there.  */
void system_left (struct arena *, struct system *);
/* COUNT pseudorandom combinations of them, [fact row * COUNT + k]: where every one of these is
   nothing, they are.  For this they need not be there.                                          */
double *system_left_mixed (struct arena *, const struct system *, size_t count);
/* The solution for facts with the scaled RIGHT sides, by fact row, in place of the system's own;
   they must agree.                                                                              */
void system_solve (const struct system *, const double right[], double v[]);
/* Makes V a solution again that lost some digits on its way from the solution AT.  */
void system_correct (const struct system *, const double at[], double v[]);
/* The multipliers of the structure's rows (scaled) that take those of the facts to nothing.  */
double *system_multipliers (struct arena *, const struct system *, const double facts[]);

/* What the left null vectors make of the scaled right sides: nothing, if the facts agree.  It is
   worked out from what is left of them at V, any solution or near one, so that rounding does not
   grow with the flows.                                                                          */
void system_clash (const struct system *, const double v[], double rho[]);

/* ROWS times scale times BASE (columns x WIDTH): what a step along each vector of BASE changes.  */
double *system_project (struct arena *, const struct system *, const struct rows *, size_t width,
                        const double base[]);
/* The null space within the null space of SYSTEM which the bends leave at V.  */
struct null_space *system_narrow (struct arena *, const struct system *, const double v[]);
/* The same for a null space that is wide, and one of Newton's steps, from the rows of SYSTEM and
   BENT (those of the bends at V) together: D, as short as can be, makes up for what they are short
   of at V.                                                                                      */
struct null_space *system_narrow_wide (struct arena *, const struct system *, const double v[]);
void system_step (const struct system *, const struct rows *bent, const double v[], double d[]);

#endif
