/* A point in several unknowns, and how the conditions change around it; for search_settle.

   Unknowns are counted in their scales here.                                                    */
#ifndef SUPPORT_SEARCH_POINT_H
#define SUPPORT_SEARCH_POINT_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "support/search.h"

struct point {
  double *y, *c;                         /* n unknowns, m conditions */
  double f;                              /* the objective, to be made least */
  double sum, worst;                     /* half the squares of the misses; the largest miss */
};

struct settling {
  const struct search *s;
  size_t n, m;
  double *least, *most;                  /* in scales */
  double *home;                          /* what a search without an objective stays near */
  double *slope, *gradient;              /* m by n; n */
  double *H, *g, *d, *price, *row, *bound, *x, *c;   /* work space */
  double f_scale;
};

struct settling *settling_create (const struct search *, const double start[]) MUST_CHECK;
struct point point_create (const struct settling *) MUST_CHECK;
void point_copy (const struct settling *, struct point *, const struct point *from);
/* Puts P at Y, drawn into the bounds, and looks; false where there are no figures.  */
bool point_look (struct settling *, struct point *, const double y[]) MUST_CHECK;
/* Slopes and gradient at P, by differences.  */
bool point_slopes (struct settling *, const struct point *) MUST_CHECK;
/* Moves P until all conditions hold, or no nearer.  False where there are no figures.  */
bool point_restore (struct settling *, struct point *) MUST_CHECK;
/* The step D that makes 1/2 d' H d + g' d least under the conditions at P, made linear (those
   NONE_OF_THEM leaves only the bounds).  Prices in `price`: conditions, then bounds.            */
bool point_step (struct settling *, const struct point *, bool none_of_them) MUST_CHECK;

#endif
