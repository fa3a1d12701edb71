/* What the water in a gas means at a state.  */
#ifndef PROPERTY_MOIST_H
#define PROPERTY_MOIST_H

#include <stdbool.h>
#include "property/enhancement.h"
#include "support/check.h"

struct fault; struct workings;

enum moist_asked {
  MOIST_BY_HUMIDITY,       /* given a relative humidity, 0 to 1: the mole fraction of water */
  MOIST_SATURATED,         /* the mole fraction at saturation; GIVEN is not used */
  MOIST_BY_DEW_POINT,      /* given a dew or frost point, K: the mole fraction; T is not used */
  MOIST_DEW_POINT,         /* given the mole fraction: dew or frost point, K; T not used */
  MOIST_HUMIDITY           /* given the mole fraction: relative humidity */
};

struct moist_question {
  enum moist_asked asked;
  double given;
  double T, p;
  bool air;                /* the gas is air (enhancement_is_for): apply its factor in its range */
};

struct moist_answer {
  double value;
  double psat;             /* the saturation pressure of pure water used, Pa */
  enum water_phase phase;  /* over which; a dew point over ice is a frost point */
  double factor;           /* enhancement factor, 1 if not applied */
  enum enhancement applied;/* or why not */
};

/* Water in gas: y = phi f psat(T)/p.  Humidity is over liquid water, as the World Meteorological
   Organization defines it, below 0 degC too; saturation and dew points are over ice below
   273.16 K, over liquid from there on.  Where both a dew point and a frost point would do (a few
   hundredths of a kelvin at the triple point, by the jump of f) it is the dew point.  Kind range
   if the water would be all of the gas, kind no-water for the dew point of a gas without.       */
bool moist_answer (const struct moist_question *, struct moist_answer *, struct workings *,
                   struct fault *) MUST_CHECK;

#endif
