#include "config.h"
#include "property/emission.h"

#include <assert.h>
#include <ctype.h>
#include <math.h>
#include <stdio.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "property/figures.h"
#include "property/flammability.h"
#include "property/property_tables.h"
#include "support/fault.h"
#include "support/sum.h"
#include "units/constants.h"
#include "units/workings.h"

const double F_TEMPERATURE = 527.67 / 1.8, F_PRESSURE = STANDARD_ATMOSPHERE;
/* Method 19, definitions: %O2 of dry air 20.9; B_wa 0.027 "may be used as a constant value at any
   location" (from memory).                                                                      */
const double F_OXYGEN_IN_AIR = 0.209, F_WATER_IN_AIR = 0.027;

static const char *const columns[F_FACTORS] = {
  "Fd_ft3_per_MMBtu", "Fw_ft3_per_MMBtu", "Fc_ft3_per_MMBtu"
};

/* 1 ft3 in m3 over 1e6 Btu (IT) in J: exact (NIST SP 811 (2008), App. B).  */
static const double FT3_PER_MMBTU = 0.3048 * 0.3048 * 0.3048 / 1055.05585262e6;

/* ---- The table ---- */

/* The name as the table has it: small letters, hyphens for blanks.  */
static void
plain_name (const char *name, char out[], size_t room)
{
  size_t n = 0;
  for (; *name && n + 1 < room; name++)
    out[n++] = *name == ' ' || *name == '_' ? '-' : (char) tolower ((unsigned char) *name);
  out[n] = '\0';
}

static struct fuel
fuel_of (const struct figures_row *row)
{
  struct fuel fuel = { row->key, { 0 }, row->source };
  for (size_t i = 0; i < F_FACTORS; i++)
    fuel.factor[i] = row->value[i] * FT3_PER_MMBTU;
  return fuel;
}

bool
fuel_find (struct property_tables *tables, const char *name, struct fuel *fuel,
           struct fault *fault)
{
  char plain[64];
  const struct figures *figures = property_tables_read (tables, PROPERTY_TABLE_FUELS, F_FACTORS,
                                                        columns, fault);
  *fuel = (struct fuel) { NULL, { (double) NAN, (double) NAN, (double) NAN }, "" };
  if (figures == NULL)
    return false;
  plain_name (name, plain, sizeof plain);
  const struct figures_row *row = figures_named (figures, plain);
  *fuel = row != NULL ? fuel_of (row) : *fuel;
  return true;
}

struct visiting { void (*visit) (const struct fuel *, void *with); void *with; };

static void
visit_fuel (const struct figures_row *row, void *with)
{
  struct visiting *v = with;
  const struct fuel fuel = fuel_of (row);
  v->visit (&fuel, v->with);
}

bool
fuel_each (struct property_tables *tables, void (*visit) (const struct fuel *, void *with),
           void *with, struct fault *fault)
{
  struct visiting v = { visit, with };
  const struct figures *figures = property_tables_read (tables, PROPERTY_TABLE_FUELS, F_FACTORS,
                                                        columns, fault);
  if (figures == NULL)
    return false;
  figures_each (figures, visit_fuel, &v);
  return true;
}

const char *
fuel_like (const struct composition *gas)
{
  static const struct { const char *key, *fuel; } like[] = {
    { "CH4", "natural-gas" }, { "C3H8", "propane" }, { "nC4H10", "butane" }, { "iC4H10", "butane" }
  };
  const struct species *most = NULL;
  double x = 0;
  for (size_t i = 0; i < gas->count; i++)
    if (gas->fraction[i] > x && gas->species[i]->lower_flammable > 0) {
      most = gas->species[i];
      x = gas->fraction[i];
    }
  for (size_t i = 0; most != NULL && i < sizeof like / sizeof like[0]; i++)
    if (strcmp (like[i].key, most->key) == 0)
      return like[i].fuel;
  return NULL;
}

/* ---- From the elements ---- */

enum { HYDROGEN, CARBON, SULFUR, NITROGEN, OXYGEN, ELEMENTS };
static const char *const element[ELEMENTS] = { "H", "C", "S", "N", "O" };

/* Method 19, equations 19-13 to 19-15, ft3 of flue gas at 68 degF and 29.92 inHg from 1 % of a
   pound (from memory, as are 40 CFR 75, appendix F, equations F-7a and F-7b, which have the same
   figures for F_d and F_c).  The term for free water of F_w is left out, as the method allows where
   the hydrogen and oxygen of that water are counted with the others, and here they are.         */
static const double volumes[F_FACTORS][ELEMENTS] = {
  [F_DRY] = { 3.64, 1.53, 0.57, 0.14, -0.46 },
  [F_WET] = { 5.57, 1.53, 0.57, 0.14, -0.46 },
  [F_CARBON] = { 0, 0.321, 0, 0, 0 },
};
static const char *const equations[F_FACTORS] = {
  "40 CFR 60, appendix A-7, Method 19, equation 19-13",
  "40 CFR 60, appendix A-7, Method 19, equation 19-14",
  "40 CFR 60, appendix A-7, Method 19, equation 19-15"
};

/* Per cent by mass of the gas, of each element.  */
static void
elements_of (struct species_table *species, const struct composition *gas,
             double percent[ELEMENTS])
{
  for (size_t k = 0; k < ELEMENTS; k++) {
    struct sum atoms = { 0, 0 };
    const struct species *one = NULL;
    const char *candidates;
    for (size_t i = 0; i < gas->count; i++)
      sum_add (&atoms, gas->fraction[i] * species_atoms (gas->species[i], element[k]));
    enum species_match match = species_find (species, element[k], 1, &one, &candidates);
    assert (match == SPECIES_PLAIN_FORMULA || match == SPECIES_KEY);
    (void) match;
    percent[k] = 100 * sum_total (&atoms) * one->molar_mass / gas->molar_mass;
  }
}

bool
f_factor_of_gas (struct species_table *species, const struct f_question *q, double *F,
                 struct workings *workings, struct fault *fault)
{
  double percent[ELEMENTS];
  struct sum volume = { 0, 0 };
  for (size_t i = 0; i < q->gas->count; i++)
    if (q->gas->species[i]->origin == SPECIES_STATED && q->gas->fraction[i] > 0) {
      fault_set (fault, MESSAGE_MODEL_LACKS, "Method 19", q->gas->species[i]->key);
      fault_hint (fault, "its elements are not known: state its composition");
      return false;
    }
  if (!(q->heat > 0))
    return fault_set (fault, MESSAGE_RANGE, "this does not burn: it has no F factor", NULL);
  elements_of (species, q->gas, percent);
  const double f = 0.3048 * 0.3048 * 0.3048 / 0.45359237;       /* ft3/lb in m3/kg */
  for (size_t k = 0; k < ELEMENTS; k++)
    sum_add (&volume, volumes[q->factor][k] * percent[k]);
  *F = f * sum_total (&volume) / q->heat;
  if (workings != NULL)
    workings_add (workings, &(struct step) {
        .name = "F factor from the elements", .formula = "F = f sum(v_i p_i)/H", .value = *F,
        .unit = "m3/J", .source = equations[q->factor], .terms = element,
        .term_count = ELEMENTS,
        STEP_SYMBOLS (CONSTANT ("f", f, "(m3/kg)/(ft3/lb)", "NIST SP 811 (2008), App. B"),
                      SYMBOL ("H", q->heat, "J/kg")),
        STEP_COLUMNS ({ "v_i", volumes[q->factor], "ft3/lb/%", NULL, NULL },
                      { "p_i", percent, "%", NULL, NULL }) });
  return true;
}

/* ---- Dilution ---- */

/* Beyond this share of what air has the excess air says nothing of the fuel; below this carbon
   dioxide, five times what air has, it says as little.  Common practice, no source.             */
static const double nearest_to_air = 0.98, least_carbon_dioxide = 0.002;

static bool
too_thin (const char *what, double x, struct fault *fault)
{
  char text[120];
  snprintf (text, sizeof text, "%s, %.3g mol%%: this is nearly air, and tells nothing of the fuel",
            what, 100 * x);
  return fault_set (fault, MESSAGE_RANGE, text, NULL);
}

bool
dilution_factor (const struct dilution *d, double *k, struct workings *workings,
                 struct fault *fault)
{
  const double A = d->oxygen_in_air, most = A * (d->by == F_WET ? 1 - d->water_in_air : 1);
  struct step step = { .value = (double) NAN, .unit = "1" };
  if (d->by == F_CARBON) {
    if (!(d->diluent > least_carbon_dioxide))
      return too_thin ("carbon dioxide", d->diluent, fault);
    *k = 1 / d->diluent;
  } else {
    if (!(d->diluent < nearest_to_air * most))
      return too_thin ("oxygen", d->diluent, fault);
    *k = A / (most - d->diluent);
  }
  step.name = "factor to undiluted flue gas";
  step.formula = d->by == F_CARBON ? "k = 1/y" : d->by == F_WET ? "k = A/(A (1 - B) - y)"
                                                                : "k = A/(A - y)";
  step.source = d->by == F_CARBON ? "Method 19, equation 19-6"
                : d->by == F_WET ? "Method 19, equation 19-3" : "Method 19, equation 19-1";
  step.value = *k;
  const struct step_symbol symbols[] = {
    SYMBOL ("y", d->diluent, "mol/mol"),
    CONSTANT ("A", A, "mol/mol", "oxygen in air"),
    CONSTANT ("B", d->water_in_air, "mol/mol", "water in air")
  };
  step.symbols = symbols;
  step.symbol_count = sizeof symbols / sizeof symbols[0];
  workings_add (workings, &step);
  return true;
}
