/* The solutions without negative flows, and the least and greatest value of linear forms on them.

   All solutions are v = v0 + scale * (null z).  Those whose component flows are at least zero are
   walked over with a dictionary: as many flows as there are directions stand for the directions,
   the others are written in them (Dantzig's simplex method; Chvatal, Linear Programming, 1983,
   chapters 2, 3 and 8).  Extents have no sign.  Blocks of the null space know nothing of each
   other, so each has a dictionary of its own.                                                   */
#ifndef BALANCE_PROGRAM_H
#define BALANCE_PROGRAM_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "balance/system.h"

struct arena; struct null_space; struct program;

/* From a solution V and the null space.  It lives in the arena.  INTERRUPTED (or null) once true
   stays so, and all searches end early, with nothing to be used.                                */
struct program *program_make (struct arena *, const struct system *, const double v[],
                              const struct null_space *, bool (*interrupted) (void));
/* Is there any solution without a negative flow?  If not, `program_point` is the one whose most
   negative flow is least so.                                                                    */
bool program_feasible (const struct program *);
/* The least and the greatest value of a form (infinite where nothing bounds it).  Only if feasible.
   A search begins where the last one ended: all of one kind one after the other are faster than
   both of each.                                                                                 */
double program_least (struct program *, const struct form *);
double program_greatest (struct program *, const struct form *);
/* Where the last search ended, by column of the network, gone on along what nothing bounds.  */
void program_point (const struct program *, double v[]);

/* A solution inside the ranges of all forms asked about so far: the mean of where their searches
   ended, equal weights for seed 0, others for others.                                           */
enum { PROGRAM_SEEDS = 8 };
void program_inside (const struct program *, size_t seed, double v[]);

#endif
