/* The enhancement factor of water in air: saturated air holds f times the water that the pressure
   of pure water alone would give it, y = f psat(T)/p.

   L. Greenspan, J. Res. Natl. Bur. Stand. 80A (1976) 41, for air without CO2, about -50 degC to
   90 degC and up to 2 MPa.  Other gases differ, and no factor is given for them.                */
#ifndef PROPERTY_ENHANCEMENT_H
#define PROPERTY_ENHANCEMENT_H

#include <stdbool.h>
#include "gas/moisture.h"

struct composition; struct workings;

/* Ends of the range, K and Pa.  */
#define ENHANCEMENT_T_LOWEST 223.15
#define ENHANCEMENT_T_HIGHEST 363.15
#define ENHANCEMENT_P_HIGHEST 2e6

enum enhancement {
  ENHANCEMENT_APPLIED,
  ENHANCEMENT_NOT_AIR,                   /* not asked for: the gas is another */
  ENHANCEMENT_BEYOND_T,                  /* below 223.15 K, above 363.15 K */
  ENHANCEMENT_BEYOND_P                   /* below the vapour pressure itself, above 2 MPa */
};

/* The factor at T, p over PHASE, whose saturation pressure is PSAT (Pa).  Below 273.15 K liquid
   water is supercooled, with coefficients of its own.  *FACTOR is 1 unless it is applied.       */
enum enhancement enhancement_factor (double T, double p, double psat, enum water_phase phase,
                                     double *factor);

/* The step that gave FACTOR.  */
void enhancement_record (struct workings *, double T, double p, double psat, enum water_phase,
                         double factor);

/* Is the gas, its water aside, air closely enough: N2 and O2 within a percentage point of those
   of air, and no more than 0.1 % that is neither these nor argon?                               */
bool enhancement_is_for (const struct composition *);

#endif
