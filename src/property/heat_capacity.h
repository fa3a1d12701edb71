/* Heat capacity, enthalpy and entropy of gases taken as ideal.

   A sum of Einstein functions for every species (tables/cp_ideal.tsv), and the integrals of it in
   closed form.  Molar; J, mol, K.  Enthalpy and entropy count from 298.15 K, the entropy at
   constant pressure and composition: what mixing adds is not in it.                             */
#ifndef PROPERTY_HEAT_CAPACITY_H
#define PROPERTY_HEAT_CAPACITY_H

#include <stdbool.h>
#include "support/check.h"

struct composition; struct fault; struct property_tables; struct species; struct workings;

struct ideal_heat {
  double cp;                             /* J/(mol K) */
  double enthalpy;                       /* H(T) - H(298.15 K), J/mol */
  double entropy;                        /* S(T) - S(298.15 K), J/(mol K) */
  double lowest, highest;                /* K, the range all parts share; empty if reversed */
  const struct species *outside;         /* the largest part taken beyond its range, or null */
};

/* Of a gas at T.  Kind model-lacks if the table has no row for a part of it (it names the largest
   such), kind range if T is not a temperature above zero.  Beyond a part's range the functions
   are followed and OUTSIDE names it: such a figure wants a remark.                              */
bool heat_of_gas (struct property_tables *, const struct composition *, double T,
                  struct ideal_heat *, struct workings *, struct fault *) MUST_CHECK;

#endif
