/* The second virial coefficient: how a gas departs from the ideal at low density,
   Z = 1 + B p/(R T).

   Pure gases by smoothed measurements (tables/virial.tsv), else by the estimate of
   C. Tsonopoulos, AIChE J. 20 (1974) 263, without its polar terms; pairs in a mixture by that
   estimate too.  Rough for pairs with hydrogen, helium or neon, and for polar gases without a
   row.                                                                                          */
#ifndef PROPERTY_VIRIAL_H
#define PROPERTY_VIRIAL_H

#include <stdbool.h>
#include "support/check.h"

struct composition; struct fault; struct property_tables; struct species; struct workings;

struct second_virial {
  double value;                          /* m3/mol */
  const struct species *estimated;       /* the largest part whose own coefficient is estimated */
  const struct species *outside;         /* the largest measured one used beyond 250 to 500 K */
};

/* Of a gas at T.  Kind model-lacks if critical constants that it takes are missing (it names the
   part), kind range if T is not a temperature above zero.                                       */
bool second_virial_of_gas (struct property_tables *, const struct composition *, double T,
                           struct second_virial *, struct workings *, struct fault *) MUST_CHECK;

#endif
