/* The temperature at which a gas begins to condense, by the Peng-Robinson equation.

   The upper (normal) branch: the highest temperature at which a drop of liquid is as stable as the
   gas.  A gas has none above the highest pressure at which it still parts into gas and liquid
   (cricondenbar; of a pure substance the critical pressure).  Solids are not known to the
   equation, and a second liquid is not looked for: water is taken out by the caller.            */
#ifndef EOS_DEW_POINT_H
#define EOS_DEW_POINT_H

#include <stdbool.h>
#include "support/check.h"

struct arena; struct composition; struct fault;

struct dew_point {
  double T;                                /* K */
  const double *liquid;                    /* mole fractions of the first drop, in the arena */
};

/* At p, of one or more components.  For one it is the temperature of saturation.  Kinds: range (p
   not from 1 Pa to 1 GPa), model-lacks (as in equation_choose), no-dew-point, not-converged.    */
bool dew_point_of (struct arena *, const struct composition *, double p, struct dew_point *,
                   struct fault *) MUST_CHECK;

#endif
