/* Air: a gas that is predefined, dry, from tables/air.tsv.

   There is more than one definition of dry air; the first of the table is the one called `air`
   (U.S. Standard Atmosphere, 1976).  Figures are as published; what their total lacks of 1 is
   scaled away when the composition is made.                                                     */
#ifndef GAS_AIR_H
#define GAS_AIR_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "gas/composition.h"

struct arena; struct fault; struct species_table;

/* Is it `air` or `dry air`, whatever its capitals?  */
bool air_is_name (const char *name, size_t n);

/* The composition of the DEFINITION of that name ("US76", "CIPM2007", ...), or, null, of the
   first one.  Made in ARENA.  Kind name-unknown for another name.                              */
bool air_composition (struct arena *, struct species_table *, const char *definition,
                      const struct composition **, struct fault *) MUST_CHECK;

enum { AIR_PEAK_PARTS = 4 };

/* A peak that was not resolved, `O2+Ar`, as `air` has its parts: their shares of the peak, which
   add up to 1, into PARTS.  Returns how many, 0 if the name is no such peak: fewer than two or
   more than AIR_PEAK_PARTS parts, one twice, or one that is no part of air.                    */
size_t air_peak (struct species_table *, const char *name, size_t n,
                 struct part parts[AIR_PEAK_PARTS]);

#endif
