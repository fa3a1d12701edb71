#include "config.h"
#include "language/settings.h"

#include <math.h>
#include "language/evaluate/value.h"
#include "units/constants.h"

/* The international pound-force per square inch, exact (NIST SP 811 (2008), App. B.8).  */
#define PSI (0.45359237 * 9.80665 / (0.0254 * 0.0254))

void
settings_init (struct settings *s)
{
  *s = (struct settings) {
    .family = {
      [FAMILY_NONE] = { { UNSTATED, UNSTATED, UNSTATED },
                        "", false, NULL },
      /* DIN 1343.  */
      [FAMILY_NORMAL] = { { ICE_POINT, STANDARD_ATMOSPHERE, UNSTATED },
                        "0 degC, 101.325 kPa", false, NULL },
      /* ISO 13443.  */
      [FAMILY_STANDARD] = { { 288.15, STANDARD_ATMOSPHERE, UNSTATED },
                        "15 degC, 101.325 kPa", false, NULL },
      /* 60 degF = 519.67/1.8 K and 14.696 psia (GPA 2145-16).  */
      [FAMILY_SCF] = { { 519.67 / 1.8, 14.696 * PSI, UNSTATED },
                        "60 degF, 14.696 psia", false, NULL },
      /* SEMI E12.  */
      [FAMILY_SCCM] = { { ICE_POINT, STANDARD_ATMOSPHERE, UNSTATED },
                        "0 degC, 101.325 kPa", false, NULL },
    },
    .site_pressure = STANDARD_ATMOSPHERE,
    .site_altitude = UNSTATED,
    .model = GAS_MODEL_AUTO,
    .oxygen_in_air = 0.2095,
    .water_in_air = 0.027,
    .total_tolerance = 0.005,
    .below = BELOW_HALF,
    .combustion = 288.15,
    .coverage = 1,
    .digits = 6,
    .vapour_factor = 1,
  };
}

bool
settings_changed (const struct settings *s)
{
  for (int i = 0; i < SETTING_COUNT; i++)
    if (s->is_set[i]) {
      return true;
    }
  for (int i = 0; i < FAMILY_COUNT; i++)
    if (s->family[i].set) {
      return true;
    }
  return false;
}
