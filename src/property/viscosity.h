/* Viscosity of gases at low pressure.

   Pure gases by tables/viscosity.tsv, mixtures by the rule of C. R. Wilke, J. Chem. Phys. 18
   (1950) 517.  No correction for pressure: above some ten bar the true figure is higher.        */
#ifndef PROPERTY_VISCOSITY_H
#define PROPERTY_VISCOSITY_H

#include <stdbool.h>
#include "support/check.h"

struct composition; struct fault; struct property_tables; struct species; struct workings;

struct viscosity {
  double value;                          /* Pa s */
  bool mixture;                          /* by Wilke's rule */
  double lowest, highest;                /* K, the range shared by parts that have one */
  const struct species *outside;         /* the largest part taken beyond its range, or null */
  const struct species *unstated;        /* the largest whose source states no range, or null */
};

/* Of a gas at T.  Kind model-lacks if the table has no row for a part of it (it names the largest
   such), kind range if T is not a temperature above zero, kind not-finite where a form, far
   outside its range, gives no viscosity.  The source's own uncertainty of a pure gas is a few per
   cent; for mixtures Wilke found less than 1 % on average (from memory), with hydrogen or helium
   among heavier gases it is known to be more.                                                  */
bool viscosity_of_gas (struct property_tables *, const struct composition *, double T,
                       struct viscosity *, struct workings *, struct fault *) MUST_CHECK;

#endif
