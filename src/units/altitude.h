/* Barometric pressure from altitude.  */
#ifndef UNITS_ALTITUDE_H
#define UNITS_ALTITUDE_H

#include <stdbool.h>
#include "support/check.h"

struct fault;

/* Pressure (Pa) of the standard atmosphere at the geopotential height H (m), -2000 to 11000 m:
   p = 101325 (1 - 0.0065 H/288.15)^5.25588 (ISO 2533:1975, equation (12), its number from memory).
   Outside: kind range.                                                                        */
bool altitude_pressure (double height, double *pressure, struct fault *) MUST_CHECK;

#endif
