/* Species with the constants of some common gases, and mixtures of them, for the tests of the
   equations of state: these need no table.                                                     */
#ifndef FLUIDS_H
#define FLUIDS_H

#include <stddef.h>
#include <stdint.h>

struct arena; struct composition; struct species;

/* The species with that key; null if there is none.  */
const struct species *fluid_find (const char *key);
size_t fluid_count (void);
const struct species *fluid_at (size_t i);

/* A mixture written "CH4=0.6;CO2=0.4"; null if it is not written so.  */
const struct composition *fluid_mixture (struct arena *, const char *text);

/* Numbers from 0 to 1, always the same for a seed: the 64-bit linear congruential generator of
   D. E. Knuth, MMIX (The Art of Computer Programming, vol. 2, 3rd ed. (1997), 3.3.4, line 26).  */
double fluid_chance (uint64_t *seed);

#endif
