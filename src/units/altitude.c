#include "config.h"
#include "units/altitude.h"

#include <math.h>
#include "support/fault.h"
#include "units/constants.h"

/* ISO 2533:1975, standard atmosphere, troposphere (from -2000 to 11000 m of geopotential height):
     p = p_b [1 + (beta/T_b) (H - H_b)]^(-g_n/(beta R))     (12, its number from memory)
   with H_b = 0, p_b = 101325 Pa, T_b = 288.15 K, beta = -0.0065 K/m, g_n = 9.80665 m/s2 and
   R = 287.05287 J/(kg K), which makes the exponent 5.25588 (5.2558798).                        */
static const double lowest = -2000, highest = 11000;     /* m */

bool
altitude_pressure (double H, double *pressure, struct fault *fault)
{
  const double T_b = 288.15, beta = -0.0065, exponent = 5.25588;

  if (!(H >= lowest && H <= highest))
    return fault_set (fault, MESSAGE_RANGE,
                      "the standard atmosphere's troposphere reaches from -2000 m to 11000 m",
                      "for a site outside, set site pressure");
  *pressure = STANDARD_ATMOSPHERE * pow (1 + beta / T_b * H, exponent);
  return true;
}
