/* Calorific values outside the standard, from enthalpies of formation.

   C_a H_b N_c O_d S_e + n O2 -> a CO2 + b/2 H2O(l) + c/2 N2 + e SO2, n = a + b/4 + e - d/2.
   Hc(298.15 K) = Hf - a Hf(CO2) - b/2 Hf(H2O,l) - e Hf(SO2) (Hess 1840); at other temperatures
   G. R. Kirchhoff (1858): dHc/dT = cp(left) - cp(right), the gases as ideal, liquid water with
   its cp at 25 degC.  n <= 0: it burns in nothing, so it is no fuel.                            */
#include "config.h"
#include "property/calorific_private.h"

#include <assert.h>
#include <math.h>
#include <stdio.h>
#include <string.h>
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/table.h"
#include "units/constants.h"

/* Liquid water at 25 degC and 101.325 kPa, J/(mol K): 4.1813 kJ/(kg K) times 18.015 g/mol (IAPWS
   R6-95, from memory).                                                                          */
static const double WATER_CP = 75.33;

/* Standard uncertainty of an enthalpy of formation whose source states none, J/mol: how far the 21
   of the CRC Handbook (2014) that ISO 6976:2016 has too lie from it, root mean square.          */
static const double UNSTATED_U = 0.67e3;

/* Relative standard uncertainty of a summation factor by corresponding states: root mean square
   distance from ISO 6976:2016 of its 52 components for which there are critical constants, without
   hydrogen, helium, neon, water, methanol and hydrogen cyanide, 4 %; rounded up for polar ones. */
static const double SUMMATION_U = 0.1;

enum { TERMS = 5 };

struct formation {
  const struct table *table, *heat;
  int atoms[ATOM_S + 1], Hf, u;
  double CO2, H2O, SO2;                  /* Hf, J/mol */
};

/* The last row of a table with that key, or false.  */
static bool
find_row (const struct table *table, const char *key, size_t *row)
{
  for (size_t i = table_rows (table); i-- > 0;)
    if (strcmp (table_cell (table, i, 0), key) == 0) {
      *row = i;
      return true;
    }
  return false;
}

/* H(T) - H(298.15 K), J/mol, of a species with a row in cp_ideal.tsv: H = R (c0 T + sum v_k
   theta_k/(exp (theta_k/T) - 1)).  NAN without a row.                                           */
static bool
read_enthalpies (const struct formation *f, const char *key, double H[COMBUSTIONS],
                 struct fault *fault)
{
  size_t row;
  double c0, reference = calorific_temperature[AT_25_DEGC];
  bool there = find_row (f->heat, key, &row);
  for (size_t i = 0; i < COMBUSTIONS; i++)
    H[i] = there ? 0 : (double) NAN;
  if (!there)
    return true;
  if (!table_number (f->heat, row, table_column (f->heat, "c0"), &c0, fault))
    return false;
  for (size_t i = 0; i < COMBUSTIONS; i++)
    H[i] = GAS_CONSTANT * c0 * (calorific_temperature[i] - reference);
  for (int k = 1; k <= TERMS; k++) {
    char name[16];
    double v, theta;
    snprintf (name, sizeof name, "v%d", k);
    if (!table_number (f->heat, row, table_column (f->heat, name), &v, fault))
      return false;
    snprintf (name, sizeof name, "theta%d_K", k);
    if (!table_number (f->heat, row, table_column (f->heat, name), &theta, fault))
      return false;
    if (!isnan (v) && !isnan (theta))
      for (size_t i = 0; i < COMBUSTIONS; i++)
        H[i] += GAS_CONSTANT * v * theta
                * (1 / expm1 (theta / calorific_temperature[i]) - 1 / expm1 (theta / reference));
  }
  return true;
}

/* What the others burn to and in, from 25 degC to each temperature.  */
struct products { double O2[COMBUSTIONS], CO2[COMBUSTIONS], N2[COMBUSTIONS], SO2[COMBUSTIONS]; };

static bool
read_products (struct formation *f, struct products *products, struct fault *fault)
{
  static const char *const keys[] = { "CO2", "H2O(l)", "SO2" };
  double *to[] = { &f->CO2, &f->H2O, &f->SO2 };
  for (size_t i = 0; i < sizeof keys / sizeof keys[0]; i++) {
    size_t row;
    bool there = find_row (f->table, keys[i], &row);
    assert (there);                      /* it is built in */
    if (!table_number (f->table, row, f->Hf, to[i], fault))
      return false;
    if (isnan (*to[i]))
      return table_complain (f->table, row, "no enthalpy of formation", fault);
    *to[i] *= 1e3;
  }
  return read_enthalpies (f, "O2", products->O2, fault)
         && read_enthalpies (f, "CO2", products->CO2, fault)
         && read_enthalpies (f, "N2", products->N2, fault)
         && read_enthalpies (f, "SO2", products->SO2, fault);
}

static double
oxygen_needed (const double atoms[])
{
  return atoms[ATOM_C] + atoms[ATOM_H] / 4 + atoms[ATOM_S] - atoms[ATOM_O] / 2;
}

/* The calorific values of a fuel with the enthalpy of formation HF.  */
static bool
burn (const struct formation *f, const struct products *products, const char *key, double Hf,
      const double a[], struct calorific_row *row, struct fault *fault)
{
  double left[COMBUSTIONS];
  double at_25 = Hf - a[ATOM_C] * f->CO2 - a[ATOM_H] / 2 * f->H2O - a[ATOM_S] * f->SO2;
  if (!read_enthalpies (f, key, left, fault))
    return false;
  row->origin = CALORIFIC_FORMATION;
  for (size_t i = 0; i < COMBUSTIONS; i++) {
    double dT = calorific_temperature[i] - calorific_temperature[AT_25_DEGC];
    double moved = left[i] + oxygen_needed (a) * products->O2[i] - a[ATOM_C] * products->CO2[i]
                   - a[ATOM_H] / 2 * WATER_CP * dT - a[ATOM_N] / 2 * products->N2[i]
                   - a[ATOM_S] * products->SO2[i];
    if (!isfinite (moved))
      row->origin = CALORIFIC_FORMATION_25;
    row->H[i] = isfinite (moved) ? at_25 + moved : at_25;
  }
  return true;
}

static bool
read_component (const struct formation *f, const struct products *products, size_t i,
                struct calorific_component *to, struct fault *fault)
{
  struct calorific_row row = { .molar_mass = (double) NAN };
  double Hf, u;
  for (size_t k = 0; k < METERINGS; k++)
    row.s[k] = (double) NAN;
  for (size_t k = 0; k <= ATOM_S; k++)
    if (!table_number (f->table, i, f->atoms[k], &to->atoms[k], fault))
      return false;
    else if (!(to->atoms[k] >= 0))
      return table_complain (f->table, i, "the atoms are not all given", fault);
  if (!table_number (f->table, i, f->Hf, &Hf, fault)
      || !table_number (f->table, i, f->u, &u, fault))
    return false;
  if (isnan (Hf))
    return table_complain (f->table, i, "no enthalpy of formation", fault);
  row.origin = CALORIFIC_NO_FUEL;
  row.source = table_cell (f->table, i, table_column (f->table, "source"));
  if (oxygen_needed (to->atoms) > 0) {
    row.u_H = isnan (u) ? UNSTATED_U : u * 1e3;
    if (!burn (f, products, table_cell (f->table, i, 0), Hf * 1e3, to->atoms, &row, fault))
      return false;
  }
  for (size_t k = 0; k < CALORIFIC_EDITIONS; k++) {
    to->known[k] = true;
    to->in[k] = row;
  }
  return true;
}

bool
calorific_read_formation (struct calorific_tables *tables, const char *directory,
                          struct fault *fault)
{
  static const char *const symbol[ATOM_S + 1] = { "C", "H", "N", "O", "S" };
  struct formation f = { .table = table_read (tables->arena, "formation", directory, fault) };
  struct products products;
  if (f.table == NULL)
    return false;
  f.heat = table_read (tables->arena, "cp_ideal", directory, fault);
  if (f.heat == NULL)
    return false;
  for (size_t k = 0; k <= ATOM_S; k++)
    f.atoms[k] = table_column (f.table, symbol[k]);
  f.Hf = table_column (f.table, "Hf_kJ_mol");
  f.u = table_column (f.table, "u_kJ_mol");
  if (!read_products (&f, &products, fault))
    return false;
  for (size_t i = 0; i < table_rows (f.table); i++) {
    struct calorific_component *to = calorific_component_of (tables, table_cell (f.table, i, 0));
    bool standard = to->known[CALORIFIC_2016]
                    && to->in[CALORIFIC_2016].origin == CALORIFIC_STANDARD;
    if (!standard && !read_component (&f, &products, i, to, fault))
      return false;
  }
  return true;
}

/* B pc/(R Tc) = B0 + omega B1, B0 = 0.083 - 0.422/Tr^1.6, B1 = 0.139 - 0.172/Tr^4.2 (M. M. Abbott
   1975, in J. M. Smith, H. C. Van Ness, M. M. Abbott, Introduction to Chemical Engineering
   Thermodynamics, 7th ed. (2005), eqs. 3.63 to 3.66; from memory).                              */
bool
calorific_summation (const struct species *species, double T, double *s, double *u)
{
  double Tr = T / species->critical_temperature;
  double B = 0.083 - 0.422 / pow (Tr, 1.6)
             + species->acentric_factor * (0.139 - 0.172 / pow (Tr, 4.2));
  double square = -B * STANDARD_ATMOSPHERE / (species->critical_pressure * Tr);
  *s = copysign (sqrt (fabs (square)), square);
  *u = SUMMATION_U * fabs (*s);
  return isfinite (*s);
}
