/* Water in gas: saturation, humidity, dew point.

   Raoult and Dalton: the partial pressure of water over its liquid or ice is that of pure water,
   y = phi * psat(T)/p.  No enhancement factor.  T in K, p in Pa.                                */
#ifndef GAS_MOISTURE_H
#define GAS_MOISTURE_H

#include <stdbool.h>
#include "support/check.h"

struct fault; struct workings;

enum water_phase { WATER_LIQUID, WATER_ICE };

/* Saturation pressure over liquid water: Wagner and Pruss (1993), IAPWS SR1-86(1992), 273.16 K to
   647.096 K; below, to 223.15 K, an extrapolation to supercooled water.  Kind range outside.   */
bool water_pressure_liquid (double T, double *p, struct fault *) MUST_CHECK;
/* Sublimation pressure of ice Ih: IAPWS R14-08(2011), 50 K to 273.16 K.  Kind range outside.   */
bool water_pressure_ice (double T, double *p, struct fault *) MUST_CHECK;
/* Over ice below the triple point 273.16 K, over liquid from there on; *PHASE says which.  */
bool water_pressure (double T, double *p, enum water_phase *phase, struct fault *) MUST_CHECK;
/* The temperature at which water_pressure gives P (dew point, or frost point).  */
bool water_dew_point (double p, double *T, enum water_phase *phase, struct fault *) MUST_CHECK;

/* The step that gave PSAT at T over PHASE.  */
void water_pressure_record (struct workings *, double T, double psat, enum water_phase);

#endif
