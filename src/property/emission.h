/* Emissions per heat by F factors: 40 CFR 60, appendix A-7, Method 19.

   An F factor is a volume of flue gas, or of its carbon dioxide, for each joule of fuel burnt
   without excess air.  Volumes are at 68 degF and 29.92 inHg (1 atm), of an ideal gas; a figure is
   in m3/J.                                                                                      */
#ifndef PROPERTY_EMISSION_H
#define PROPERTY_EMISSION_H

#include <stdbool.h>
#include "support/check.h"

struct composition; struct fault; struct property_tables; struct species_table; struct workings;

enum f_factor { F_DRY,                   /* dry flue gas */
                F_WET,                   /* wet flue gas, of dry air */
                F_CARBON,                /* carbon dioxide */
                F_FACTORS };

/* 68 degF in K; Pa.  The method's 29.92 inHg is one atmosphere in the digits it gives.  */
extern const double F_TEMPERATURE, F_PRESSURE;
/* Oxygen in dry air as its equations have it; the constant moisture of ambient air it allows.  */
extern const double F_OXYGEN_IN_AIR, F_WATER_IN_AIR;

/* A row of tables/fuels.tsv; NAN where it has no figure.  Borrowed.  */
struct fuel { const char *name; double factor[F_FACTORS]; const char *source; };
/* *FUEL is found by its name (blanks, hyphens and capitals do not count); its NAME is null: the
   table has none of that name.  False with FAULT if a user's table cannot be read.              */
bool fuel_find (struct property_tables *, const char *name, struct fuel *, struct fault *)
  MUST_CHECK;
/* Calls VISIT for every fuel of the table; false with FAULT as above.  */
bool fuel_each (struct property_tables *, void (*visit) (const struct fuel *, void *with),
                void *with, struct fault *) MUST_CHECK;
/* The fuel of the table a gas is most like: natural gas, propane or butane by the largest part that
   burns; null: none.                                                                            */
const char *fuel_like (const struct composition *);

/* By the elements of a gas (equations 19-13 to 19-15) that gives HEAT J/kg.  Kind model-lacks,
   where the elements of a part are not known.                                                   */
struct f_question { const struct composition *gas; double heat; enum f_factor factor; };
bool f_factor_of_gas (struct species_table *, const struct f_question *, double *F,
                      struct workings *, struct fault *) MUST_CHECK;

/* By what a concentration times the F factor is multiplied to become an emission per heat:
   A/(A - O2), dry (equation 19-1); A/(A (1 - B) - O2), wet, with the moisture B of the air burnt
   with (19-3); 1/CO2, on the same basis as the concentration (19-6).  Kind range, where the oxygen
   comes near that of air, or the carbon dioxide near none.                                      */
struct dilution { enum f_factor by; double diluent, oxygen_in_air, water_in_air; };
bool dilution_factor (const struct dilution *, double *k, struct workings *, struct fault *)
  MUST_CHECK;

#endif
