/* What the water in a gas means at a state.  */
#ifndef PROPERTY_MOIST_H
#define PROPERTY_MOIST_H

#include <stdbool.h>
#include "support/check.h"

struct fault; struct workings;

/* Mole fraction of water in gas of relative humidity PHI (0 to 1; over liquid water, as the World
   Meteorological Organization defines it, below 0 degC too) at T, p: y = phi psat(T)/p.
   *PSAT says the vapour pressure used.  Kind range if y would reach 1.                          */
bool moist_by_humidity (double phi, double T, double p, double *y, double *psat,
                        struct workings *, struct fault *) MUST_CHECK;
/* The same for saturated gas: over ice below 273.16 K, over liquid above.  */
bool moist_saturated (double T, double p, double *y, double *psat, bool *over_ice,
                      struct workings *, struct fault *) MUST_CHECK;
/* The same from a dew point (frost point below 273.16 K).  */
bool moist_by_dew_point (double T_dew, double p, double *y, double *psat, bool *over_ice,
                         struct workings *, struct fault *) MUST_CHECK;
/* Dew or frost point at p of gas with the water fraction y.  Kind no-water for y = 0.  */
bool moist_dew_point (double y, double p, double *T_dew, bool *over_ice, struct workings *,
                      struct fault *) MUST_CHECK;
/* Relative humidity (over liquid) at T, p of gas with the water fraction y.  */
bool moist_humidity (double y, double T, double p, double *phi, struct workings *,
                     struct fault *) MUST_CHECK;

#endif
