/* Which published limits a composition touches.  Facts only: the sentences are made elsewhere.  */
#ifndef PROPERTY_HAZARD_H
#define PROPERTY_HAZARD_H

#include <stddef.h>
#include "property/flammability.h"

struct composition; struct species;

enum hazard_kind {
  HAZARD_TOXIC,            /* a toxic SPECIES (not a mere asphyxiant) is RATIO times its 8 h
                              exposure limit (>= 1), LIMIT mol/mol */
  HAZARD_FLAMMABLE,        /* with oxygen present, at or above a quarter of the mixture's lower
                              flammable limit: RATIO of the limit (Le Chatelier, sum x_i/L_i);
                              SPECIES is the largest, LIMIT that of the fuels together */
  HAZARD_OXYGEN_RICH,      /* more than 23.5 mol% O2 */
  HAZARD_OXYGEN_POOR       /* air-like gas with less than 19.5 mol% O2 */
};

struct hazard { enum hazard_kind kind; const struct species *species; double ratio, limit; };

enum { HAZARD_MOST = 8 };
/* Fills FOUND (kinds in the order above, worst first within a kind; of too many toxic ones the
   least are left out) and returns how many, at most HAZARD_MOST.  N STATED limits replace those of
   the table.                                                                                    */
size_t hazard_find (const struct composition *, const struct flammable_limits stated[], size_t n,
                    struct hazard found[HAZARD_MOST]);

#endif
