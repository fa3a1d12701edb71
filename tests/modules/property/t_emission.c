#include "config.h"
#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "modules/property/gases.h"
#include "property/emission.h"
#include "property/property_tables.h"
#include "support/fault.h"
#include "units/constants.h"

static struct gases gases;
static struct property_tables *tables;

static const double FT3_PER_MMBTU = 0.028316846592 / 1055.05585262e6;

static double
factor (enum f_factor by, double diluent, double water)
{
  const struct dilution d = { by, diluent, F_OXYGEN_IN_AIR, water };
  double k = (double) NAN;
  gases_start (&gases);
  return dilution_factor (&d, &k, NULL, &gases.fault) ? k : (double) NAN;
}

/* 40 CFR 60, appendix A-7, Method 19, equations 19-1, 19-3 and 19-6 by hand.  */
static void
equations (void)
{
  NEAR (factor (F_DRY, 0, 0), 1, 1e-15);
  NEAR (factor (F_DRY, 0.03, 0), 20.9 / 17.9, 1e-14);
  NEAR (factor (F_DRY, 0.15, 0), 20.9 / 5.9, 1e-14);
  NEAR (factor (F_WET, 0.043, 0.027), 20.9 / (20.9 * 0.973 - 4.3), 1e-14);
  NEAR (factor (F_WET, 0.043, 0), 20.9 / 16.6, 1e-14);
  NEAR (factor (F_CARBON, 0.094, 0), 100 / 9.4, 1e-14);
}

/* At 0.98 of the oxygen of air, and below 0.2 mol% of carbon dioxide.  */
static void
nearly_air (void)
{
  CHECK (isfinite (factor (F_DRY, 0.2048, 0)));
  CHECK (isnan (factor (F_DRY, 0.2049, 0)));
  SAME_INT (gases.fault.kind, MESSAGE_RANGE);
  CHECK (isfinite (factor (F_WET, 0.199, 0.027)));
  CHECK (isnan (factor (F_WET, 0.1995, 0.027)));
  CHECK (isnan (factor (F_CARBON, 0.002, 0)));
  CHECK (isfinite (factor (F_CARBON, 0.0021, 0)));
  CHECK (isnan (factor (F_CARBON, 0, 0)));
}

/* What a mole burns to with air of 20.9 mol% O2, in moles: the carbon dioxide, the water, the
   nitrogen of the air, sulfur dioxide and nitrogen of its own.  */
static double
flue_moles (const struct composition *gas, enum f_factor which)
{
  double C = 0, H = 0, S = 0, N = 0, O = 0;
  for (size_t i = 0; i < gas->count; i++) {
    const struct species *s = gas->species[i];
    C += gas->fraction[i] * species_atoms (s, "C");
    H += gas->fraction[i] * species_atoms (s, "H");
    S += gas->fraction[i] * species_atoms (s, "S");
    N += gas->fraction[i] * species_atoms (s, "N");
    O += gas->fraction[i] * species_atoms (s, "O");
  }
  double oxygen = C + H / 4 + S - O / 2, nitrogen = oxygen * 79.1 / 20.9 + N / 2;
  return which == F_CARBON ? C : C + S + nitrogen + (which == F_WET ? H / 2 : 0);
}

/* The equations are that with figures rounded to two digits behind the point, and whole atomic
   weights: within 1 % of a fuel, of carbon monoxide, whose oxygen counts against it, 1.15 %.  */
static void
combustion (void)
{
  static const char *const fuel[] = {
    "CH4 1", "C3H8 1", "nC4H10 1", "C2H4 1", "CO 1", "H2 1", "H2S 1",
    "CH4 58.2, CO2 39.9, N2 1.4, O2 0.4, H2S 0.1", "CH4 92.1, C2H6 4.3, C3H8 1.2, N2 2.4",
    "H2 41.2, CO 23.85, CO2 19.6, CH4 8.42, N2 6.93"
  };
  const double Vm = GAS_CONSTANT * F_TEMPERATURE / F_PRESSURE;
  for (size_t i = 0; i < sizeof fuel / sizeof fuel[0]; i++)
    for (int which = F_DRY; which < F_FACTORS; which++) {
      gases_start (&gases);
      const struct composition *gas = gases_make (&gases, fuel[i]);
      NEED (gas != NULL);
      /* A heat of 1 J for each mole: the factor is the volume.  */
      const struct f_question q = { gas, 1 / gas->molar_mass, (enum f_factor) which };
      double F = (double) NAN, want = Vm * flue_moles (gas, (enum f_factor) which);
      test_about ("%s, factor %d", fuel[i], which);
      NEED (f_factor_of_gas (gases.species, &q, &F, NULL, &gases.fault));
      NEAR (F, want, want > 0 ? 0.012 : 1e-12);
    }
}

/* Methane with 890.63 kJ/mol (ISO 6976:1995, 25 degC): 25.132 % H, 74.868 % C by CIAAW 2021, so
   (3.64 * 25.132 + 1.53 * 74.868) ft3/lb * 100 over 55.515 MJ/kg = 23867 Btu/lb, by hand.  */
static void
methane (void)
{
  gases_start (&gases);
  const struct composition *gas = gases_make (&gases, "CH4 1");
  NEED (gas != NULL);
  const struct f_question q = { gas, 890.63e3 / 16.043e-3, F_DRY };
  double F = (double) NAN;
  NEED (f_factor_of_gas (gases.species, &q, &F, NULL, &gases.fault));
  NEAR (F / FT3_PER_MMBTU, 1e6 * (3.64 * 25.132 + 1.53 * 74.868) / 23867, 1e-4);
}

static void
what_has_none (void)
{
  gases_start (&gases);
  double F = 7;
  const struct f_question inert = { gases_make (&gases, "N2 1"), 0, F_DRY };
  CHECK (!f_factor_of_gas (gases.species, &inert, &F, NULL, &gases.fault));
  SAME_INT (gases.fault.kind, MESSAGE_RANGE);
  NEAR (F, 7, 0);
  const struct stated_figures known = { 19.8e-3, 8e5, 7e5 };
  const struct species *sales = species_stated (gases.species, "sales", &known);
  const struct f_question stated = { composition_pure (gases.arena, sales), 4e7, F_DRY };
  fault_init (&gases.fault, gases.arena);
  CHECK (!f_factor_of_gas (gases.species, &stated, &F, NULL, &gases.fault));
  SAME_INT (gases.fault.kind, MESSAGE_MODEL_LACKS);
}

static void
fuels (void)
{
  struct fuel fuel;
  gases_start (&gases);
  tables = property_tables_create (NULL);
  NEED (fuel_find (tables, "Natural gas", &fuel, &gases.fault));
  SAME_TEXT (fuel.name, "natural-gas");
  NEAR (fuel.factor[F_DRY] / FT3_PER_MMBTU, 8710, 1e-12);
  NEED (fuel_find (tables, "wood", &fuel, &gases.fault));
  CHECK (isnan (fuel.factor[F_WET]));
  NEED (fuel_find (tables, "coal", &fuel, &gases.fault));
  CHECK (fuel.name == NULL);
  SAME_TEXT (fuel_like (gases_make (&gases, "CO2 60, CH4 40")), "natural-gas");
  SAME_TEXT (fuel_like (gases_make (&gases, "iC4H10 60, C3H8 40")), "butane");
  CHECK (fuel_like (gases_make (&gases, "H2 60, CO 40")) == NULL);
  property_tables_destroy (tables);
}

static const struct test_case cases[] = {
  { "equations", equations },
  { "nearly air", nearly_air },
  { "combustion", combustion },
  { "methane", methane },
  { "what has none", what_has_none },
  { "fuels", fuels },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  gases_end (&gases);
  return status;
}
