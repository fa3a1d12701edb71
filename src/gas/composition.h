/* A gas by its species and their mole fractions.

   A composition never changes once made; functions that "change" one make another, in the arena
   they are given.  Fractions are >= 0 and add up to 1; no species stands twice; the order is that
   of the parts as given.  Species are borrowed from the species table, which outlives every
   composition.  Mole fraction is the one basis kept; the other bases are views of it.           */
#ifndef GAS_COMPOSITION_H
#define GAS_COMPOSITION_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct fault; struct species;

struct part { const struct species *species; double amount; };           /* amount in mol */

struct composition {
  size_t count;
  const struct species *const *species;
  const double *fraction;                /* mol/mol */
  double molar_mass;                     /* kg/mol */
};

/* Makes a composition of N amounts in mol (any total above 0), same species added together.
   Null with FAULT (kind amount-range) if one is negative or not finite or all are zero.        */
const struct composition *composition_make (struct arena *, size_t n, const struct part parts[],
                                            struct fault *) MUST_CHECK;
const struct composition *composition_pure (struct arena *, const struct species *) MUST_CHECK;
/* GAS with every fraction times FACTOR: not closed.  For uncertainties alone, where one part is
   moved and the others stay as they were (ISO 6976:2016, annex B).                              */
const struct composition *composition_unclosed (struct arena *, const struct composition *gas,
                                                double factor) MUST_CHECK;
/* A copy in another arena ("keep").  */
const struct composition *composition_keep (struct arena *, const struct composition *) MUST_CHECK;

double composition_fraction (const struct composition *, const struct species *);  /* 0: absent */

/* The gas whose water (the species with key H2O, given as WATER) has the fraction Y (0 <= Y < 1)
   of the wet gas; all else keeps its proportions.  Y = 0 takes the water away.  Kind amount-range
   for another Y; kind only-water if the gas is nothing but water.                              */
const struct composition *composition_wetted (struct arena *, const struct composition *,
                                              const struct species *water, double y,
                                              struct fault *) MUST_CHECK;

/* A volume fraction at one T and P of the unmixed parts (ISO 14912): phi_i = x_i Z_i/sum x_k Z_k,
   for given Z of the pure parts.  The way back is composition_make of phi_i/Z_i.               */
void composition_volume_fractions (const struct composition *, const double pure_Z[],
                                   double phi[]);
/* The mixing factor f = V/sum V_k = Z/sum x_k Z_k of a mixture with compression factor Z.  A volume
   concentration (ISO 14912) is per volume of the mixture: sigma_i = x_i Z_i/Z = phi_i/f.        */
double composition_mixing_factor (const struct composition *, const double pure_Z[], double Z);

#endif
