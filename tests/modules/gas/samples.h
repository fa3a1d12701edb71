/* Species and random numbers for the suites of gas, property and stream.

   The species are written out here, so that these suites depend on no table: molar masses from the
   conventional atomic weights of CIAAW/IUPAC 2021 (Prohaska et al., Pure Appl. Chem. 94 (2022)
   573), H 1.008, C 12.011, N 14.007, O 15.999, S 32.06, Ar 39.95, added up by hand.             */
#ifndef SAMPLES_H
#define SAMPLES_H

#include <math.h>
#include <stddef.h>
#include <stdint.h>
#include "gas/species.h"

#define SAMPLE(key_, g_per_mol, exposure, lower)                                        \
  { .key = key_, .name = key_, .molar_mass = (g_per_mol) * 1e-3,                          \
    .exposure_limit = (exposure), .lower_flammable = (lower), .flags = "" }
#define TOXIC(key_, g_per_mol, exposure, lower)                                         \
  { .key = key_, .name = key_, .molar_mass = (g_per_mol) * 1e-3,                          \
    .exposure_limit = (exposure), .lower_flammable = (lower), .flags = "toxic" }
#define NONE ((double) NAN)

enum { H2, CH4, H2O, CO, N2, O2, Ar, CO2, H2S, C2H4, C2H6, C3H6, C3H8, C4H10, SO2, NO, NO2, NH3,
       SAMPLES };

/* Exposure limits (8 h): CO 20 ppm, NO 2 ppm, NO2 0.5 ppm, SO2 0.5 ppm (Directive (EU) 2017/164);
   H2S 5 ppm (2009/161/EU); CO2 5000 ppm (2006/15/EC); NH3 20 ppm (2000/39/EC).  Lower flammable
   limits: CH4 4.4, H2 4.0, C3H8 1.7, H2S 4.0, CO 10.9 vol% (IEC 60079-20-1:2010, table B.1).   */
static const struct species sample[SAMPLES] = {
  [H2] = SAMPLE ("H2", 2.016, NONE, 0.040),
  [CH4] = SAMPLE ("CH4", 16.043, NONE, 0.044),
  [H2O] = SAMPLE ("H2O", 18.015, NONE, NONE),
  [CO] = TOXIC ("CO", 28.010, 20e-6, 0.109),
  [N2] = SAMPLE ("N2", 28.014, NONE, NONE),
  [O2] = SAMPLE ("O2", 31.998, NONE, NONE),
  [Ar] = SAMPLE ("Ar", 39.95, NONE, NONE),
  [CO2] = SAMPLE ("CO2", 44.009, 5000e-6, NONE),
  [H2S] = TOXIC ("H2S", 34.076, 5e-6, 0.040),
  [C2H4] = SAMPLE ("C2H4", 28.054, NONE, NONE),
  [C2H6] = SAMPLE ("C2H6", 30.070, NONE, NONE),
  [C3H6] = SAMPLE ("C3H6", 42.081, NONE, NONE),
  [C3H8] = SAMPLE ("C3H8", 44.097, NONE, 0.017),
  [C4H10] = SAMPLE ("nC4", 58.124, NONE, NONE),
  [SO2] = TOXIC ("SO2", 64.058, 0.5e-6, NONE),
  [NO] = TOXIC ("NO", 30.006, 2e-6, NONE),
  [NO2] = TOXIC ("NO2", 46.005, 0.5e-6, NONE),
  [NH3] = TOXIC ("NH3", 17.031, 20e-6, NONE)
};

/* Marsaglia, J. Stat. Software 8 (2003) 14: xorshift, shifts 13, 7, 17.  */
static inline uint64_t
random_next (uint64_t *state)
{
  *state ^= *state << 13;
  *state ^= *state >> 7;
  *state ^= *state << 17;
  return *state;
}

/* Between 0 and 1, the ends excluded.  */
static inline double
random_share (uint64_t *state)
{
  return ((double) (random_next (state) >> 12) + 0.5) * 0x1p-52;
}

/* Amounts of the first N samples in random order, spread over eight decades.  */
static inline void
random_amounts (uint64_t *state, size_t n, size_t order[], double amount[])
{
  for (size_t i = 0; i < n; i++) {
    size_t j = (size_t) (random_next (state) % (i + 1));
    order[i] = order[j];
    order[j] = i;
  }
  for (size_t i = 0; i < n; i++)
    amount[i] = random_share (state) * pow (10, -8 * random_share (state));
}

#endif
