/* Where AGA8 DETAIL holds, and how well.  All figures of this file are from memory: AGA Report
   No. 8 (1994) figure 1 and table 1, AGA Report No. 8 Part 1 (2017); ISO 20765-1:2005, scope;
   ISO 12213-2.                                                                                  */
#include "config.h"
#include "eos/aga8.h"

#include <math.h>

/* The most of components and of isomers together: in a gas of pipeline quality (ISO 12213-2; of O2,
   Ar and H2S traces only), and in the expanded range of AGA8.  Mole fractions; 1: no limit.     */
static const struct { char key[COVER_KEY], other[COVER_KEY]; double pipeline, expanded; } most[] = {
  { "N2", "", 0.20, 1 },           { "CO2", "", 0.20, 1 },        { "C2H6", "", 0.10, 1 },
  { "C3H8", "", 0.035, 0.12 },     { "nC4H10", "iC4H10", 0.015, 0.06 },
  { "nC5H12", "iC5H12", 0.005, 0.04 },
  { "nC6H14", "", 0.001, 0.04 },   { "nC7H16", "", 0.0005, 0.04 }, { "nC8H18", "", 0.0005, 0.04 },
  { "nC9H20", "nC10H22", 0.0005, 0.04 },
  { "H2", "", 0.10, 1 },           { "CO", "", 0.03, 0.03 },      { "He", "", 0.005, 0.03 },
  { "H2O", "", 0.00015, 0.05 },    { "O2", "", 0.0002, 0.21 },    { "Ar", "", 0.0002, 0.01 },
  { "H2S", "", 0.0002, 1 },
};
static const double methane_least = 0.70;

static double
fraction_of (const struct aga8_mixture *mixture, const char *key)
{
  return key[0] != '\0' ? mixture->x[cover_find (&aga8_table.cover, key)] : 0;
}

/* The range of the composition alone.  */
static enum eos_range
range_of_gas (const struct aga8_mixture *mixture)
{
  enum eos_range range = fraction_of (mixture, "CH4") >= methane_least ? EOS_RANGE_FULL
                                                                       : EOS_RANGE_EXTENDED;

  for (size_t i = 0; i < sizeof most / sizeof most[0]; i++) {
    const double x = fraction_of (mixture, most[i].key) + fraction_of (mixture, most[i].other);
    if (x > most[i].expanded) {
      return EOS_RANGE_OUTSIDE;
    }
    if (x > most[i].pipeline) {
      range = EOS_RANGE_EXTENDED;
    }
  }
  return range;
}

/* Full: pipeline gas from 250 to 350 K and to 30 MPa (ISO 20765-1).  Extended: the expanded range
   of compositions from 143.15 to 673.15 K and to 140 MPa (AGA8, region 4).                      */
enum eos_range
aga8_range (const void *mixture, double T, double p)
{
  const enum eos_range range = range_of_gas (mixture);

  if (!(T >= 143.15 && T <= 673.15 && p <= 140e6)) {
    return EOS_RANGE_OUTSIDE;
  }
  return range == EOS_RANGE_FULL && !(T >= 250 && T <= 350 && p <= 30e6) ? EOS_RANGE_EXTENDED
                                                                         : range;
}

/* The four regions of AGA8 (1994), figure 1, for natural gases: -8 to 62 degC and 12 MPa, -60 to
   120 degC and 17 MPa, -130 to 200 degC and 70 MPa, -130 to 400 degC and 140 MPa.               */
double
aga8_uncertainty (const void *mixture, double T, double p)
{
  static const struct { double T_least, T_most, p_most, uncertainty; } regions[] = {
    { 265.15, 335.15, 12e6, 0.001 },
    { 213.15, 393.15, 17e6, 0.003 },
    { 143.15, 473.15, 70e6, 0.005 },
    { 143.15, 673.15, 140e6, 0.010 },
  };

  if (range_of_gas (mixture) != EOS_RANGE_FULL) {
    return (double) NAN;
  }
  for (size_t i = 0; i < sizeof regions / sizeof regions[0]; i++) {
    if (T >= regions[i].T_least && T <= regions[i].T_most && p <= regions[i].p_most) {
      return regions[i].uncertainty;
    }
  }
  return (double) NAN;
}
