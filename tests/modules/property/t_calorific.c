#include "config.h"
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "libtest.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "property/calorific.h"
#include "property/calorific_private.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"

enum { MOST = 24 };                      /* parts of a gas in these tests */

static struct arena *arena;
static struct fault fault;
static struct species_table *species;
static struct calorific_tables *tables;

static void
start (void)
{
  arena_destroy (arena);
  arena = arena_create ();
  fault_init (&fault, arena);
  if (species == NULL)
    species = species_table_create (NULL, &fault);
  if (tables == NULL)
    tables = calorific_tables_create (NULL, &fault);
}

static const struct species *
named (const char *key)
{
  const struct species *found = NULL;
  const char *candidates;
  (void) species_find (species, key, strlen (key), &found, &candidates);
  test_check (found != NULL, key, __FILE__, __LINE__);
  return found;
}

/* A gas as "CH4 0.9 N2 0.1".  */
static const struct composition *
gas_of (const char *text)
{
  struct part parts[MOST];
  size_t n = 0;
  char key[32];
  double x;
  int used;
  for (; sscanf (text, "%31s %lf%n", key, &x, &used) == 2 && n < MOST; text += used)
    parts[n++] = (struct part) { named (key), x };
  const struct composition *gas = composition_make (arena, n, parts, &fault);
  test_check (gas != NULL, text, __FILE__, __LINE__);
  return gas;
}

static struct calorific_question
question (double combustion_C, double metering_C)
{
  return (struct calorific_question) {
    .T_combustion = combustion_C + 273.15, .T_metering = metering_C + 273.15, .p = 101325
  };
}

/* ---- the published examples ---- */

/* The figures by their names in the file, and their units in SI.  */
static const struct { const char *name; enum calorific_figure figure; double unit; bool ideal; }
names[] = {
  { "M", CALORIFIC_MOLAR_MASS, 1e-3, false }, { "Z", CALORIFIC_Z, 1, false },
  { "V", CALORIFIC_MOLAR_VOLUME, 1e-3, false }, { "HcG", CALORIFIC_GROSS_MOLAR, 1e3, false },
  { "HmG", CALORIFIC_GROSS_MASS, 1e6, false }, { "HvG", CALORIFIC_GROSS_VOLUME, 1e6, false },
  { "HvN", CALORIFIC_NET_VOLUME, 1e6, false }, { "HvG0", CALORIFIC_GROSS_VOLUME, 1e6, true },
  { "HvN0", CALORIFIC_NET_VOLUME, 1e6, true }, { "rho", CALORIFIC_DENSITY, 1, false },
  { "d", CALORIFIC_RELATIVE_DENSITY, 1, false }, { "WG", CALORIFIC_WOBBE, 1e6, false },
  { "WN", CALORIFIC_NET_WOBBE, 1e6, false }
};

static double correlation[MOST * MOST];
static size_t correlated;

static void
read_correlation (char *cells[])
{
  for (size_t j = 0; j < 11; j++)
    correlation[correlated * 11 + j] = strtod (cells[j + 1], NULL);
  correlated++;
}

/* The case that is being read.  */
static struct {
  char name[64];
  size_t parts, volumes;
  struct part part[MOST];
  const struct species *volume_of[MOST];
  double u[MOST], volume[MOST];
} the_case;

static double
number (const char *cell)
{
  char *end;
  double value = strtod (cell, &end);
  CHECK (end != cell && *end == '\0');
  return value;
}

static void
check_figure (char *cells[])
{
  bool old = strcmp (cells[1], "1995") == 0, found = false;
  struct calorific calorific;
  struct calorific_question ask = {
    .edition = old ? CALORIFIC_1995 : CALORIFIC_2016, .T_combustion = number (cells[2]) + 273.15,
    .T_metering = number (cells[3]) + 273.15, .p = number (cells[4]) * 1e3, .real = true,
    .by_standard = true, .u = the_case.u,
    .correlation = strstr (cells[0], "fullcorr") != NULL ? correlation : NULL
  };
  const struct composition *gas = composition_make (arena, the_case.parts, the_case.part, &fault);
  NEED (gas != NULL && gas->count == the_case.parts);
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    if (strcmp (names[i].name, cells[6]) == 0) {
      double want = number (cells[7]), tol = number (cells[8]);
      ask.real = !names[i].ideal;
      NEED (calorific_compute (tables, gas, &ask, &calorific, &fault));
      double *got = strcmp (cells[5], "u") == 0 ? calorific.u : calorific.value;
      NEAR (got[names[i].figure] / names[i].unit, want, tol / want);
      SAME_INT (calorific.origins, 1 << CALORIFIC_STANDARD);
      found = true;
    }
  CHECK (found);
}

/* phi is x Z over sum x Z, Z of the pure gas: 1 - s^2, for hydrogen 1.0006 (as the file says).  */
static void
check_volumes (void)
{
  double volume[MOST], total = 0;
  const struct composition *gas = composition_make (arena, the_case.parts, the_case.part, &fault);
  struct calorific_question ask = question (15, 15);
  ask.edition = CALORIFIC_1995;
  ask.real = true;
  NEED (gas != NULL && gas->count == the_case.volumes);
  for (size_t i = 0; i < gas->count; i++) {
    struct calorific one;
    const struct composition *pure = composition_pure (arena, gas->species[i]);
    NEED (calorific_compute (tables, pure, &ask, &one, &fault));
    double Z = strcmp (gas->species[i]->key, "H2") == 0 ? 1.0006 : one.value[CALORIFIC_Z];
    volume[i] = gas->fraction[i] * Z;
    total += volume[i];
  }
  for (size_t i = 0; i < gas->count; i++) {
    CHECK (the_case.volume_of[i] == gas->species[i]);
    NEAR (volume[i] / total, the_case.volume[i], 1e-6 / the_case.volume[i]);
  }
}

static void
example_row (char *cells[])
{
  if (strcmp (the_case.name, cells[0]) != 0) {
    memset (&the_case, 0, sizeof the_case);
    snprintf (the_case.name, sizeof the_case.name, "%s", cells[0]);
  }
  if (strcmp (cells[5], "x") == 0) {
    NEED (the_case.parts < MOST);
    the_case.part[the_case.parts++] = (struct part) { named (cells[6]), number (cells[7]) };
  } else if (strcmp (cells[5], "u_x") == 0) {
    for (size_t i = 0; i < the_case.parts; i++)
      if (the_case.part[i].species == named (cells[6]))
        the_case.u[i] = number (cells[7]);
  } else if (strcmp (cells[5], "phi") == 0) {
    NEED (the_case.volumes < MOST);
    the_case.volume_of[the_case.volumes] = named (cells[6]);
    the_case.volume[the_case.volumes++] = number (cells[7]);
    if (the_case.volumes == the_case.parts)
      check_volumes ();
  } else
    check_figure (cells);
}

static void
examples (void)
{
  start ();
  correlated = 0;
  memset (&the_case, 0, sizeof the_case);
  SAME_INT (test_each_row ("numbers/iso6976_correlation.tsv", 13, read_correlation), 11);
  SAME_INT (test_each_row ("numbers/iso6976.tsv", 10, example_row), 251);
}

/* ---- other figures from outside ---- */

/* The editions differ: own calculation apart from the program, from the two editions' tables, and
   EN 437:2003+A1:2009, Table 2, for the butanes of 1995.                                        */
static void
editions (void)
{
  static const struct {
    const char *gas;
    double combustion, metering, old, new;
    enum calorific_figure figure;
  } cases[] = {
    { "CH4 1", 15, 15, 37.782, 37.779, CALORIFIC_GROSS_VOLUME },
    { "CH4 1", 25, 0, 39.831, 39.828, CALORIFIC_GROSS_VOLUME },
    { "nC4H10 0.499716 iC4H10 0.500284", 15, 15, 87.33, 87.25, CALORIFIC_WOBBE }
  };
  start ();
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    struct calorific found;
    struct calorific_question ask = question (cases[i].combustion, cases[i].metering);
    ask.real = ask.by_standard = true;
    test_about ("%s", cases[i].gas);
    NEED (calorific_compute (tables, gas_of (cases[i].gas), &ask, &found, &fault));
    NEAR (found.value[cases[i].figure], cases[i].new * 1e6, 6e-5);
    ask.edition = CALORIFIC_1995;
    NEED (calorific_compute (tables, gas_of (cases[i].gas), &ask, &found, &fault));
    NEAR (found.value[cases[i].figure], cases[i].old * 1e6, 6e-5);
    CHECK (isnan (found.u[cases[i].figure]));
  }
}

/* Propane into biomethane, computed apart from the program: ideal, 15/15 degC, R of the SI; gas
   constant and molar masses (C3H8 44.097 g/mol) of today.                                       */
static void
biomethane (void)
{
  struct calorific propane;
  struct calorific_question ask = question (15, 15);
  start ();
  NEED (calorific_compute (tables, gas_of ("C3H8 1"), &ask, &propane, &fault));
  NEAR (propane.value[CALORIFIC_GROSS_VOLUME], 93.9360e6, 3e-5);
  double H = propane.value[CALORIFIC_GROSS_VOLUME] / 1e6;
  double share = (39.50 - 37.10) / (H - 37.10);
  NEAR (share, 0.0422268, 1e-5);
  double air = calorific_air_molar_mass (tables, CALORIFIC_2016, NULL);
  double M = (1 - share) * 16.70e-3 + share * propane.value[CALORIFIC_MOLAR_MASS];
  NEAR (37.10 / sqrt (16.70e-3 / air), 48.8603, 1e-5);
  NEAR (39.50 / sqrt (M / air), 50.3077, 3e-5);
}

/* A raw biogas, computed apart from the program: ideal, 15/15 degC, our molar masses; its relative
   density by those of the standard.                                                             */
static void
raw_biogas (void)
{
  struct calorific raw;
  struct calorific_question ask = question (15, 15);
  start ();
  NEED (calorific_compute (tables, gas_of ("CH4 58.2 CO2 39.915 N2 1.4 O2 0.4 H2S 0.085"), &ask,
                           &raw, &fault));
  NEAR (raw.value[CALORIFIC_GROSS_VOLUME], 21.9641e6, 3e-6);
  NEAR (raw.value[CALORIFIC_NET_VOLUME], 19.7752e6, 3e-6);
  NEAR (raw.value[CALORIFIC_WOBBE], 22.5613e6, 3e-6);
  NEAR (raw.value[CALORIFIC_MOLAR_MASS], 27.4524e-3, 3e-6);
  ask.by_standard = true;
  NEED (calorific_compute (tables, gas_of ("CH4 58.2 CO2 39.915 N2 1.4 O2 0.4 H2S 0.085"), &ask,
                           &raw, &fault));
  NEAR (raw.value[CALORIFIC_RELATIVE_DENSITY], 0.947758, 1e-6);
}

/* Combustion from enthalpies of formation at 25 degC, worked out apart from the program from B.
   Ruscic et al., Active Thermochemical Tables 1.112 (DME, C2H5OH, cC3H6, HCHO) and the CRC Handbook
   of 2014, gross and net; kJ/mol, printed to 0.01.                                              */
static void
formation (void)
{
  static const struct { const char *key; double gross, net; } cases[] = {
    { "DME", 1460.40, 1328.39 }, { "C2H5OH", 1409.85, 1277.84 }, { "cC3H6", 2091.54, 1959.53 },
    { "HCHO", 570.14, 526.14 }, { "mC8H10", 4594.22, 4374.20 }, { "THT", 2979.94, 2803.93 },
    { "C3H3N", 1789.76, 1723.75 }, { "C2N2", 1097.05, 1097.05 }, { "N2H4", 667.16, 579.15 }
  };
  start ();
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    struct calorific found;
    struct calorific_question ask = question (25, 15);
    char text[40];
    test_about ("%s", cases[i].key);
    snprintf (text, sizeof text, "%s 1", cases[i].key);
    NEED (calorific_compute (tables, gas_of (text), &ask, &found, &fault));
    NEAR (found.value[CALORIFIC_GROSS_MOLAR], cases[i].gross * 1e3, 6 / cases[i].gross / 1e3);
    /* the net ones come with the water of the standard, 44.013 for 44.003 kJ/mol */
    double water = named (cases[i].key)->formula != NULL ? species_atoms (named (cases[i].key), "H")
                   : 0;
    NEAR (found.value[CALORIFIC_NET_MOLAR], cases[i].net * 1e3 - water / 2 * 10,
          7 / cases[i].net / 1e3);
    SAME_INT (found.origins, 1 << CALORIFIC_FORMATION);
    CHECK (found.u[CALORIFIC_GROSS_MOLAR] > 10 && found.u[CALORIFIC_GROSS_MOLAR] < 700);
  }
}

/* What is in both: by formation against ISO 6976:2016.  At 25 degC 46 of the 47 differ by 1.8
   kJ/mol at most and 0.52 (root mean square), HCN by 5.82 (worked out apart from the program); the
   change from 25 degC to the others must be that of the standard within its own rounding, 0.01
   kJ/mol, and 0.1 kJ/mol for the heat capacities.                                               */
struct both { const struct calorific_tables *alone; double squares; size_t count; };

static void
compare_routes (const char *key, void *value, void *with)
{
  struct both *both = with;
  const struct calorific_component *standard = value;
  const struct calorific_component *formed = map_find (both->alone->components, key, strlen (key));
  const struct calorific_row *row = &standard->in[CALORIFIC_2016];
  if (row->origin != CALORIFIC_STANDARD || formed == NULL || row->H[AT_25_DEGC] <= 0
      || strcmp (key, "H2O") == 0)
    return;
  const double *H = formed->in[CALORIFIC_2016].H;
  bool cyanide = strcmp (key, "HCN") == 0;
  double off = H[AT_25_DEGC] - row->H[AT_25_DEGC];
  test_about ("%s", key);
  SAME_INT (formed->in[CALORIFIC_2016].origin, CALORIFIC_FORMATION);
  NEAR (H[AT_25_DEGC], row->H[AT_25_DEGC], (cyanide ? 5830 : 1811) / row->H[AT_25_DEGC]);
  for (size_t k = 0; k < COMBUSTIONS; k++)
    NEAR (H[k] - off, row->H[k], 110 / row->H[k]);
  for (size_t k = 0; k < ATOMS; k++)
    NEAR (formed->atoms[k], standard->atoms[k], 0);
  both->squares += cyanide ? 0 : off * off;
  both->count++;
}

static void
routes (void)
{
  start ();
  struct calorific_tables alone = { .arena = arena, .components = map_create () };
  struct both both = { &alone, 0, 0 };
  if (CHECK (calorific_read_formation (&alone, NULL, &fault)))
    map_each (tables->components, compare_routes, &both);
  map_destroy (alone.components);
  SAME_INT (both.count, 47);
  NEAR (sqrt (both.squares / 46), 517, 2e-3);
}

/* Summation factors from the second virial coefficient against those of ISO 6976:2016: light
   hydrocarbons within 2 %, heavier and slightly polar ones within 14 %.                         */
static void
summation_factors (void)
{
  static const struct { const char *key; double s_0, s_20, within; } cases[] = {
    { "CH4", 0.04886, 0.04317, 0.02 }, { "C2H6", 0.0997, 0.0895, 0.02 },
    { "C3H8", 0.1465, 0.1308, 0.02 }, { "nC4H10", 0.2022, 0.1785, 0.02 },
    { "CO2", 0.0821, 0.0730, 0.02 }, { "nC8H18", 0.4845, 0.4198, 0.02 },
    { "C6H6", 0.2752, 0.2460, 0.06 }, { "NH3", 0.1230, 0.1062, 0.14 }
  };
  start ();
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    double s = 0, u = 0;
    test_about ("%s", cases[i].key);
    CHECK (calorific_summation (named (cases[i].key), 273.15, &s, &u));
    NEAR (s, cases[i].s_0, cases[i].within);
    NEAR (u, s / 10, 1e-12);
    CHECK (calorific_summation (named (cases[i].key), 293.15, &s, &u));
    NEAR (s, cases[i].s_20, cases[i].within);
  }
}

/* ---- what must hold ---- */

/* All 60 of the table: the sum of atoms is the molar mass, Hc falls or rises evenly.  */
static void
check_component (const char *key, void *value, void *with)
{
  static const double weights[ATOMS] = {            /* ISO 6976:2016, annex A */
    12.0107, 1.00794, 14.0067, 15.9994, 32.065, 4.002602, 20.1797, 39.948
  };
  const struct calorific_component *component = value;
  const struct calorific_row *row = &component->in[CALORIFIC_2016];
  size_t *count = with;
  double M = 0;
  if (row->origin != CALORIFIC_STANDARD || isnan (row->molar_mass))
    return;
  test_about ("%s", key);
  for (size_t k = 0; k < ATOMS; k++)
    M += component->atoms[k] * weights[k];
  NEAR (row->molar_mass, M / 1e3, 1e-12);
  for (size_t k = 0; k + 1 < COMBUSTIONS; k++) {
    double dT = calorific_temperature[k + 1] - calorific_temperature[k];
    double mean = (row->H[AT_25_DEGC] - row->H[AT_0_DEGC]) / 25;
    CHECK (fabs (row->H[k + 1] - row->H[k] - mean * dT) < 150);
  }
  (*count)++;
}

static void
components (void)
{
  size_t count = 0;
  start ();
  map_each (tables->components, check_component, &count);
  SAME_INT (count, 60);
}

/* Atoms in the tables are those of the formulas, for all species there are.  */
static void
atoms_agree (void)
{
  static const char *const symbols[ATOMS] = { "C", "H", "N", "O", "S", "He", "Ne", "Ar" };
  size_t found = 0;
  start ();
  for (size_t i = 0; i < species_table_size (species); i++) {
    const struct species *one = species_table_at (species, i);
    const struct calorific_component *component = calorific_find (tables, one);
    if (component == NULL)
      continue;
    test_about ("%s", one->key);
    found++;
    for (size_t k = 0; k < ATOMS; k++)
      NEAR (component->atoms[k], species_atoms (one, symbols[k]), 0);
  }
  CHECK (found > 110);
}

/* Inert gas: zero, and nothing divided by it; water: what it gives when it condenses, net zero.  */
static void
no_fuel (void)
{
  static const char *const inert[] = { "N2 1", "CO2 0.5 Ar 0.5", "He 1", "Xe 0.5 O2 0.5" };
  struct calorific found;
  struct calorific_question ask = question (15, 15);
  start ();
  ask.real = true;
  for (size_t i = 0; i < sizeof inert / sizeof inert[0]; i++) {
    test_about ("%s", inert[i]);
    NEED (calorific_compute (tables, gas_of (inert[i]), &ask, &found, &fault));
    for (size_t k = CALORIFIC_GROSS_MOLAR; k <= CALORIFIC_NET_WOBBE; k++) {
      NEAR (found.value[k], 0, 0);
      NEAR (found.u[k], 0, 0);
    }
    CHECK (found.value[CALORIFIC_DENSITY] > 0 && found.u[CALORIFIC_DENSITY] > 0);
  }
  SAME_INT (found.origins, 1 << CALORIFIC_STANDARD | 1 << CALORIFIC_NO_FUEL);
  SAME_INT (calorific_origin (tables, CALORIFIC_2016, named ("Xe")), CALORIFIC_NO_FUEL);
  ask.real = false;
  NEED (calorific_compute (tables, gas_of ("H2O 1"), &ask, &found, &fault));
  NEAR (found.value[CALORIFIC_GROSS_MOLAR], 44431, 1e-12);      /* ISO 6976:2016, Table 3 */
  NEAR (found.value[CALORIFIC_NET_MOLAR], 0, 1e-9);
}

/* The order of the components does not matter, nor does how the covariances come in.  */
static void
order (void)
{
  struct calorific one, other;
  double u[3] = { 1e-3, 5e-4, 2e-4 }, turned[3] = { 2e-4, 1e-3, 5e-4 };
  double r[9] = { 1, -0.5, 0.1, -0.5, 1, 0.2, 0.1, 0.2, 1 };
  double r_turned[9] = { 1, 0.1, 0.2, 0.1, 1, -0.5, 0.2, -0.5, 1 };
  struct calorific_question ask = question (25, 0);
  start ();
  ask.real = ask.by_standard = true;
  ask.u = u;
  ask.correlation = r;
  NEED (calorific_compute (tables, gas_of ("CH4 0.9 C2H6 0.06 DME 0.04"), &ask, &one, &fault));
  ask.u = turned;
  ask.correlation = r_turned;
  NEED (calorific_compute (tables, gas_of ("DME 0.04 CH4 0.9 C2H6 0.06"), &ask, &other, &fault));
  for (size_t i = 0; i < CALORIFIC_FIGURES; i++) {
    NEAR (other.value[i], one.value[i], 1e-14);
    NEAR (other.u[i], one.u[i], 1e-12);
  }
  SAME_INT (one.origins, other.origins);
}

/* The uncertainties by the formulas are those found by moving each fraction.  */
static void
uncertainties_moved (void)
{
  static const double x[4] = { 0.80, 0.12, 0.05, 0.03 }, u[4] = { 2e-3, 1e-3, 5e-4, 1e-4 };
  struct calorific base, tables_only, moved[2];
  struct calorific_question ask = question (15, 15);
  double squares[CALORIFIC_FIGURES] = { 0 };
  start ();
  const struct species *key[4] = { named ("CH4"), named ("H2"), named ("H2O"), named ("C3H8") };
  ask.real = true;
  for (size_t i = 0; i <= 4; i++) {
    struct composition gas = { 4, key, x, 0 };
    for (int side = 0; side < 2; side++) {
      double y[4];
      for (size_t k = 0; k < 4; k++)
        y[k] = x[k] + (k == i ? (side == 0 ? -1 : 1) * u[k] / 100 : 0);
      gas.fraction = y;
      ask.u = NULL;
      NEED (calorific_compute (tables, &gas, &ask, i == 4 ? &tables_only : &moved[side], &fault));
    }
    for (size_t k = 0; i < 4 && k < CALORIFIC_FIGURES; k++)
      squares[k] += pow ((moved[1].value[k] - moved[0].value[k]) * 50, 2);
  }
  struct composition gas = { 4, key, x, 0 };
  ask.u = u;
  NEED (calorific_compute (tables, &gas, &ask, &base, &fault));
  for (size_t k = 0; k < CALORIFIC_FIGURES; k++) {
    test_about ("figure %d", (int) k);
    NEAR (base.u[k], sqrt (squares[k] + pow (tables_only.u[k], 2)), 1e-6);
  }
}

/* Ideal volumes at any state: the molar value over RT/p.  */
static void
any_state (void)
{
  struct calorific found;
  struct calorific_question ask = question (25, 37.5);
  start ();
  ask.p = 5e5;
  NEED (calorific_compute (tables, gas_of ("H2 1"), &ask, &found, &fault));
  NEAR (found.value[CALORIFIC_GROSS_VOLUME], 285.83e3 * 5e5 / (8.31446261815324 * 310.65), 1e-14);
  NEAR (found.value[CALORIFIC_NET_MOLAR], 285.83e3 - 44.013e3, 1e-14);
  ask = question (15.55, 15.55);
  NEED (calorific_compute (tables, gas_of ("CH4 1"), &ask, &found, &fault));
  NEAR (found.value[CALORIFIC_GROSS_MOLAR], 891.46e3, 1e-14);
}

/* What 1995 is not known here comes from 2016; what is known of nothing, below 50 umol/mol, is
   nothing.                                                                                      */
static void
origins (void)
{
  struct calorific found, without;
  struct calorific_question ask = question (15, 15);
  start ();
  ask.edition = CALORIFIC_1995;
  NEED (calorific_compute (tables, gas_of ("CH4 0.5 C2H4 0.5"), &ask, &found, &fault));
  SAME_INT (found.origins, 1 << CALORIFIC_STANDARD | 1 << CALORIFIC_OTHER_EDITION);
  SAME_INT (calorific_origin (tables, CALORIFIC_1995, named ("C2H4")), CALORIFIC_OTHER_EDITION);
  NEAR (found.value[CALORIFIC_GROSS_MOLAR], (891.56e3 + 1412.12e3) / 2, 1e-12);
  ask.edition = CALORIFIC_2016;
  ask.real = true;
  NEED (calorific_compute (tables, gas_of ("CH4 0.6 CO2 0.39996 D4 4e-5"), &ask, &found, &fault));
  SAME_INT (found.origins, 1 << CALORIFIC_STANDARD | 1 << CALORIFIC_TRACE);
  NEED (calorific_compute (tables, gas_of ("CH4 0.6 CO2 0.4"), &ask, &without, &fault));
  NEAR (found.value[CALORIFIC_GROSS_MOLAR], without.value[CALORIFIC_GROSS_MOLAR], 1e-12);
  ask.real = false;
  NEED (calorific_compute (tables, gas_of ("C8H8 1"), &ask, &found, &fault));
  SAME_INT (found.origins, 1 << CALORIFIC_FORMATION_25);
  NEED (calorific_compute (tables, gas_of ("NO 0.5 NO2 0.5"), &ask, &found, &fault));
  SAME_INT (found.origins, 1 << CALORIFIC_NO_FUEL);
  NEAR (found.value[CALORIFIC_GROSS_MOLAR], 0, 0);
  SAME_TEXT (calorific_edition_name (CALORIFIC_2016), "ISO 6976:2016");
  SAME_TEXT (calorific_edition_name (CALORIFIC_1995), "ISO 6976:1995");
}

static void
refused (const struct composition *gas, const struct calorific_question *ask, enum message kind,
         const char *fact)
{
  struct calorific found = { .origins = 77 };
  fault_init (&fault, arena);
  CHECK (!calorific_compute (tables, gas, ask, &found, &fault));
  SAME_INT (fault.kind, kind);
  SAME_TEXT (fault.fact[0], fact);
  SAME_INT (found.origins, 77);
  fault_init (&fault, arena);
}

static void
faults (void)
{
  start ();
  const struct composition *methane = gas_of ("CH4 1");
  struct calorific_question ask = question (18, 15);
  refused (methane, &ask, MESSAGE_RANGE, "ISO 6976:2016 has no combustion temperature of 18 degC");
  ask = question (15.55, 15);
  ask.edition = CALORIFIC_1995;
  refused (methane, &ask, MESSAGE_RANGE,
           "ISO 6976:1995 has no combustion temperature of 15.55 degC");
  ask = question (25, 25);
  ask.real = true;
  refused (methane, &ask, MESSAGE_RANGE, "ISO 6976:2016 has no metering temperature of 25 degC");
  ask = question (15, 15.55);
  ask.edition = CALORIFIC_1995;
  ask.by_standard = true;
  refused (methane, &ask, MESSAGE_RANGE, "ISO 6976:1995 has no metering temperature of 15.55 degC");
  ask = question (15, 15);
  ask.by_standard = true;
  ask.p = 120e3;
  refused (methane, &ask, MESSAGE_RANGE,
           "ISO 6976:2016 holds from 90 to 110 kPa, not at 120 kPa");
  ask = question (15, 15);
  ask.p = 0;
  refused (methane, &ask, MESSAGE_RANGE, "a metering temperature and pressure are above zero");
  ask.p = (double) NAN;
  refused (methane, &ask, MESSAGE_RANGE, "a metering temperature and pressure are above zero");
  ask = question ((double) NAN, 15);
  CHECK (!calorific_compute (tables, methane, &ask, &(struct calorific) { .origins = 0 }, &fault));
  ask = question (15, 15);
  refused (gas_of ("CH4 0.9999 SiH4 0.0001"), &ask, MESSAGE_CALORIFIC_UNKNOWN, "SiH4");
  refused (gas_of ("CH4 0.5 HCl 0.5"), &ask, MESSAGE_CALORIFIC_UNKNOWN, "HCl");
  const struct stated_figures stated = { 0.016, 0, 0 };
  refused (composition_pure (arena, species_stated (species, "CH4", &stated)), &ask,
           MESSAGE_CALORIFIC_UNKNOWN, "CH4");
  ask.real = true;
  refused (gas_of ("nC10H22 1"), &ask, MESSAGE_RANGE,
           "ISO 6976 holds for Z above 0.9; here it would be 0.6411");      /* 1 - 0.5991^2 */
  struct species bare = *named ("DME");
  bare.critical_temperature = (double) NAN;
  refused (composition_pure (arena, &bare), &ask, MESSAGE_MODEL_LACKS, "ISO 6976:2016");
  ask.real = false;
  struct calorific found;
  CHECK (calorific_compute (tables, composition_pure (arena, &bare), &ask, &found, &fault));
}

/* ---- a user's own tables ---- */

static bool
write_table (const char *folder, const char *name, const char *text)
{
  char path[200];
  snprintf (path, sizeof path, "%s/%s.tsv", folder, name);
  FILE *file = fopen (path, "w");
  bool well = file != NULL && fputs (text, file) >= 0;
  return file != NULL && fclose (file) == 0 && well;
}

static void
remove_table (const char *folder, const char *name)
{
  char path[200];
  snprintf (path, sizeof path, "%s/%s.tsv", folder, name);
  remove (path);
}

static void
look_at_users (const struct calorific_tables *users)
{
  struct calorific found;
  struct calorific_question ask = question (15, 15);
  NEED (calorific_compute (users, gas_of ("SiH4 1"), &ask, &found, &fault));
  NEAR (found.value[CALORIFIC_GROSS_MOLAR], 1516e3, 1e-12);
  NEAR (found.value[CALORIFIC_NET_MOLAR], 1516e3 - 2 * 44431, 1e-12);
  ask = question (25, 15);
  NEED (calorific_compute (users, gas_of ("C2H5OH 1"), &ask, &found, &fault));
  NEAR (found.value[CALORIFIC_GROSS_MOLAR], 1409.85e3 - 430, 6e-6);
  NEAR (found.u[CALORIFIC_GROSS_MOLAR], 250, 1e-12);
}

static void
users_rows (void)
{
  char folder[] = "calorific-XXXXXX";
  static const char heads[] = "key\tC\tH\tN\tO\tS\tHe\tNe\tAr\tM_g_mol\tHc_0degC_kJ_mol\t"
    "Hc_15degC_kJ_mol\tHc_60degF_kJ_mol\tHc_20degC_kJ_mol\tHc_25degC_kJ_mol\tu_Hc_kJ_mol\t"
    "s_0degC\ts_15degC\ts_60degF\ts_20degC\tu_s\tsource\n";
  char text[600];
  start ();
  NEED (mkdtemp (folder) != NULL);
  snprintf (text, sizeof text, "%sSiH4\t0\t4\t0\t0\t0\t0\t0\t0\t32.117\t1517\t1516\t1516\t1516\t"
            "1515\t2\t0.1\t0.1\t0.1\t0.1\t0.01\tour laboratory\n", heads);
  CHECK (write_table (folder, "iso6976_2016", text));
  CHECK (write_table (folder, "formation", "key\tC\tH\tN\tO\tS\tHf_kJ_mol\tu_kJ_mol\tsource\n"
                      "C2H5OH\t2\t6\t0\t1\t0\t-235.0\t0.25\tour laboratory\n"));
  struct calorific_tables *users = calorific_tables_create (folder, &fault);
  if (CHECK (users != NULL))
    look_at_users (users);
  calorific_tables_destroy (users);
  snprintf (text, sizeof text, "%sSiH4\t0\t4\t0\t0\t0\t0\t0\t0\t32.117\t\t1516\t1516\t1516\t"
            "1515\t2\t0.1\t0.1\t0.1\t0.1\t0.01\tour laboratory\n", heads);
  CHECK (write_table (folder, "iso6976_2016", text));
  CHECK (calorific_tables_create (folder, &fault) == NULL);
  SAME_INT (fault.kind, MESSAGE_TABLE_ROW);
  SAME_TEXT (fault.fact[1], "2");
  SAME_TEXT (fault.fact[2], "a figure is missing");
  remove_table (folder, "iso6976_2016");
  remove_table (folder, "formation");
  CHECK (remove (folder) == 0);
}

/* 20 000 random gases and states: all finite, nothing crashes.  */
static void
random_gases (void)
{
  start ();
  unsigned long long seed = 6976;
  test_about ("seed %llu", seed);
  int computed = 0;
  for (int n = 0; n < 20000; n++) {
    double draw[2 * MOST + 4];
    struct part parts[MOST];
    for (size_t k = 0; k < 2 * MOST + 4; k++) {
      seed = seed * 6364136223846793005ULL + 1442695040888963407ULL;  /* Knuth, MMIX */
      draw[k] = (double) (seed >> 11) / 9007199254740992.0;
    }
    size_t count = 1 + (size_t) (draw[0] * (MOST - 1));
    for (size_t k = 0; k < count; k++) {
      size_t which = (size_t) (draw[4 + k] * (double) species_table_size (species));
      const struct species *one = species_table_at (species, which);
      if (n % 4 != 0 && calorific_find (tables, one) == NULL)
        one = named ("CH4");               /* else hardly any gas is known throughout */
      parts[k] = (struct part) { one, draw[4 + MOST + k] };
    }
    if (n % 100 == 0) {
      arena_reset (arena);
      fault_init (&fault, arena);
    }
    const struct composition *gas = composition_make (arena, count, parts, &fault);
    struct calorific_question ask = {
      .edition = draw[1] < 0.5 ? CALORIFIC_2016 : CALORIFIC_1995,
      .T_combustion = calorific_temperature[(size_t) (draw[2] * COMBUSTIONS)],
      .T_metering = calorific_temperature[(size_t) (draw[3] * METERINGS)], .p = 101325,
      .real = n % 2 == 0, .by_standard = n % 3 == 0
    };
    struct calorific found;
    if (gas == NULL || !calorific_compute (tables, gas, &ask, &found, &fault)) {
      if (!CHECK (fault.kind != MESSAGE_NONE))
        return;
      fault_init (&fault, arena);
      continue;
    }
    for (size_t k = 0; k < CALORIFIC_FIGURES; k++)
      if (!isfinite (found.value[k])
          || isfinite (found.u[k]) != (ask.edition == CALORIFIC_2016)) {
        SAME_INT (k, CALORIFIC_FIGURES);                 /* this one is not finite */
        return;
      }
    computed++;
  }
  CHECK (computed > 8000);
}

static const struct test_case cases[] = {
  { "published examples", examples },
  { "the editions differ", editions },
  { "propane into biomethane", biomethane },
  { "raw biogas", raw_biogas },
  { "combustion from enthalpies of formation", formation },
  { "both routes to a calorific value", routes },
  { "summation factors outside the standard", summation_factors },
  { "the 60 components", components },
  { "atoms are those of the formulas", atoms_agree },
  { "what is no fuel", no_fuel },
  { "the order does not matter", order },
  { "uncertainties by moving the fractions", uncertainties_moved },
  { "ideal volumes at any state", any_state },
  { "where values come from", origins },
  { "what is refused", faults },
  { "a user's own tables", users_rows },
  { "random gases", random_gases },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
