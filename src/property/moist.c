#include "config.h"
#include "property/moist.h"

#include <math.h>
#include <stdio.h>
#include "gas/moisture.h"
#include "support/fault.h"
#include "units/workings.h"

static const char liquid_source[] = "IAPWS SR1-86(1992), eq. 1 (Wagner and Pruss 1993)";
static const char ice_source[] = "IAPWS R14-08(2011), eq. 6";
static const char partial_source[] = "Dalton and Raoult, ideal, no enhancement factor";

static void
record_pressure (struct workings *workings, double psat, enum water_phase phase)
{
  bool ice = phase == WATER_ICE;
  workings_add (workings, ice ? "vapour pressure of ice" : "vapour pressure of liquid water",
                ice ? "psat = pt exp(sum a_i theta^b_i/theta), theta = T/Tt"
                : "psat = pc exp(Tc/T sum a_i tau^b_i), tau = 1 - T/Tc",
                psat, "Pa", ice ? ice_source : liquid_source);
}

static bool
check_pressure (double p, struct fault *fault)
{
  if (isfinite (p) && p > 0)
    return true;
  return fault_set (fault, MESSAGE_RANGE, "an absolute pressure is above zero", NULL);
}

/* The share of water whose partial pressure is P_WATER in a gas at P.  */
static bool
share_of_water (double p_water, double p, double *y, struct fault *fault)
{
  double share = p_water / p;
  if (share < 1) {
    *y = share;
    return true;
  }
  char what[160];
  snprintf (what, sizeof what, "the water alone would have %.6g kPa, the gas has only %.6g kPa",
            p_water / 1e3, p / 1e3);
  return fault_set (fault, MESSAGE_RANGE, what, "state a higher pressure or less water");
}

bool
moist_by_humidity (double phi, double T, double p, double *y, double *psat,
                   struct workings *workings, struct fault *fault)
{
  double pressure = 0, share = 0;
  if (!(phi >= 0 && phi <= 1)) {
    char what[100];
    snprintf (what, sizeof what, "a relative humidity is 0 to 100 %%, not %.6g %%", 100 * phi);
    return fault_set (fault, MESSAGE_RANGE, what, NULL);
  }
  if (!check_pressure (p, fault) || !water_pressure_liquid (T, &pressure, fault)
      || !share_of_water (phi * pressure, p, &share, fault))
    return false;
  record_pressure (workings, pressure, WATER_LIQUID);
  workings_add (workings, "water", "y = phi psat/p", share, "mol/mol", partial_source);
  *y = share;
  *psat = pressure;
  return true;
}

/* Saturation at T_SAT in gas at P.  */
static bool
share_at (double T_sat, double p, double *y, double *psat, bool *over_ice,
          struct workings *workings, struct fault *fault)
{
  double pressure = 0, share = 0;
  enum water_phase phase;
  if (!check_pressure (p, fault) || !water_pressure (T_sat, &pressure, &phase, fault)
      || !share_of_water (pressure, p, &share, fault))
    return false;
  record_pressure (workings, pressure, phase);
  workings_add (workings, "water", "y = psat/p", share, "mol/mol", partial_source);
  *y = share;
  *psat = pressure;
  *over_ice = phase == WATER_ICE;
  return true;
}

bool
moist_saturated (double T, double p, double *y, double *psat, bool *over_ice,
                 struct workings *workings, struct fault *fault)
{
  return share_at (T, p, y, psat, over_ice, workings, fault);
}

/* Cooled at its own pressure the gas saturates at the dew point: its partial pressure of water is
   the saturation pressure there.                                                                */
bool
moist_by_dew_point (double T_dew, double p, double *y, double *psat, bool *over_ice,
                    struct workings *workings, struct fault *fault)
{
  return share_at (T_dew, p, y, psat, over_ice, workings, fault);
}

static bool
check_share (double y, struct fault *fault)
{
  if (y >= 0 && y <= 1)
    return true;
  return fault_set (fault, MESSAGE_RANGE, "a share of water is 0 to 1", NULL);
}

bool
moist_dew_point (double y, double p, double *T_dew, bool *over_ice, struct workings *workings,
                 struct fault *fault)
{
  double found;
  enum water_phase phase;
  if (!check_share (y, fault) || !check_pressure (p, fault))
    return false;
  if (y <= 0)
    return fault_set (fault, MESSAGE_NO_WATER, NULL, NULL);
  if (!water_dew_point (y * p, &found, &phase, fault))
    return false;
  bool ice = phase == WATER_ICE;
  workings_add (workings, "partial pressure of water", "p_w = y p", y * p, "Pa", partial_source);
  workings_add (workings, ice ? "frost point" : "dew point", "psat(T_dew) = p_w", found, "K",
                ice ? ice_source : liquid_source);
  *T_dew = found;
  *over_ice = ice;
  return true;
}

bool
moist_humidity (double y, double T, double p, double *phi, struct workings *workings,
                struct fault *fault)
{
  double psat;
  if (!check_share (y, fault) || !check_pressure (p, fault)
      || !water_pressure_liquid (T, &psat, fault))
    return false;
  record_pressure (workings, psat, WATER_LIQUID);
  workings_add (workings, "relative humidity", "phi = y p/psat", y * p / psat, "1",
                "World Meteorological Organization, WMO-No. 8, annex 4.A: over liquid water");
  *phi = y * p / psat;
  return true;
}
