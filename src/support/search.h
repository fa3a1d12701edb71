/* Values of unknowns with which conditions hold, and the best of them.

   The functions come from a callback: one call gives every condition and the objective at a
   point.  A condition is met where it is zero, or where it is not negative; it is scaled by the
   caller so that a figure of 1 is a large miss.  Nothing here knows what the figures mean.

   search_line is for one unknown and looks at the whole range; search_settle for several, from
   several starting points.                                                                      */
#ifndef SUPPORT_SEARCH_H
#define SUPPORT_SEARCH_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena;

/* A condition is met when it misses by no more than this.  */
#define SEARCH_MET 1e-10

enum search_end {
  SEARCH_FOUND,
  SEARCH_UNREACHABLE,     /* no point looked at meets all conditions */
  SEARCH_SINGULAR,        /* the unknowns do not move the conditions, each on its own */
  SEARCH_UNBOUNDED,       /* the objective gets better without end */
  SEARCH_UNDEFINED        /* the callback had no figures where they were needed */
};

struct search {
  size_t n, m;                           /* unknowns, conditions */
  const double *least, *most, *scale;    /* of the unknowns; most may be HUGE_VAL */
  const bool *one_sided;                 /* condition c >= 0, else c = 0 */
  bool has_objective;                    /* to be made least; else stay near the start */
  /* Conditions C and OBJECTIVE at X; false where there are none.  */
  bool (*at) (void *context, const double x[], double c[], double *objective);
  void *context;
  struct arena *arena;                   /* for work space and results */
};

/* `gap`: it ends because there are no figures beyond.  */
struct search_range { double least, most; bool gap; };

struct search_finding {
  double *x;                             /* the point; where none meets all, the nearest seen */
  double *c, objective;                  /* conditions and objective there */
  double worst;                          /* the largest miss there */
  /* Of one unknown: every stretch in which all conditions hold, a root being one of no length,
     in order.  The last may end at HUGE_VAL.                                                    */
  size_t range_count;
  struct search_range *ranges;
  /* Of several, as many as equalities: further points found, each of n.  */
  size_t other_count;
  double **others;
};

/* X: where to start; the answer nearest to it is taken where there are several.  */
enum search_end search_line (const struct search *, double x, struct search_finding *) MUST_CHECK;
enum search_end search_settle (const struct search *, const double x[],
                               struct search_finding *) MUST_CHECK;

/* By how much a condition is missed.  */
static inline double
search_miss (bool one_sided, double c)
{
  return one_sided ? (c < 0 ? -c : 0) : (c < 0 ? -c : c);
}

#endif
