#include "config.h"
#include "property/calorific_private.h"

#include <math.h>
#include <stdio.h>
#include <string.h>
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "support/table.h"

static const double GRAM = 1e-3, KILOJOULE = 1e3;        /* in kg, J */

/* 60 degF is (60 + 459.67)/1.8 K (NIST SP 811:2008, appendix B.8).  */
const double calorific_temperature[COMBUSTIONS] = { 273.15, 288.15, 519.67 / 1.8, 293.15, 298.15 };

static const char *const at[COMBUSTIONS] = { "0degC", "15degC", "60degF", "20degC", "25degC" };

const char *const calorific_atom[ATOMS] = { "C", "H", "N", "O", "S", "He", "Ne", "Ar" };

static const char *const table_of[CALORIFIC_EDITIONS] = { "iso6976_2016", "iso6976_1995" };

const char *
calorific_edition_name (enum calorific_edition edition)
{
  return edition == CALORIFIC_1995 ? "ISO 6976:1995" : "ISO 6976:2016";
}

/* ---- the rows of an edition ---- */

struct row_columns {
  int atoms[ATOMS], molar_mass, H[COMBUSTIONS], u_H, s[METERINGS], u_s;
};

static struct row_columns
find_columns (const struct table *table)
{
  struct row_columns found;
  char name[40];
  for (size_t i = 0; i < ATOMS; i++)
    found.atoms[i] = table_column (table, calorific_atom[i]);
  for (size_t i = 0; i < COMBUSTIONS; i++) {
    snprintf (name, sizeof name, "Hc_%s_kJ_mol", at[i]);
    found.H[i] = table_column (table, name);
  }
  for (size_t i = 0; i < METERINGS; i++) {
    snprintf (name, sizeof name, "s_%s", at[i]);
    found.s[i] = table_column (table, name);
  }
  found.molar_mass = table_column (table, "M_g_mol");
  found.u_H = table_column (table, "u_Hc_kJ_mol");
  found.u_s = table_column (table, "u_s");
  return found;
}

/* The figure in a cell times SCALE.  A column the table has may not be empty; one it has not gives
   NAN.                                                                                          */
static bool
read_figure (const struct table *table, size_t row, int column, double scale, double *value,
             struct fault *fault)
{
  double figure = (double) NAN;
  if (column >= 0) {
    if (!table_number (table, row, column, &figure, fault))
      return false;
    if (isnan (figure))
      return table_complain (table, row, "a figure is missing", fault);
  }
  *value = figure * scale;
  return true;
}

static bool
read_row (const struct table *table, size_t i, const struct row_columns *column,
          struct calorific_row *row, struct fault *fault)
{
  if (!read_figure (table, i, column->molar_mass, GRAM, &row->molar_mass, fault)
      || !read_figure (table, i, column->u_H, KILOJOULE, &row->u_H, fault)
      || !read_figure (table, i, column->u_s, 1, &row->u_s, fault))
    return false;
  if (!(row->molar_mass > 0))
    return table_complain (table, i, "a molar mass is above zero", fault);
  for (size_t k = 0; k < COMBUSTIONS; k++)
    if (!read_figure (table, i, column->H[k], KILOJOULE, &row->H[k], fault))
      return false;
  for (size_t k = 0; k < METERINGS; k++)
    if (!read_figure (table, i, column->s[k], 1, &row->s[k], fault))
      return false;
  row->origin = CALORIFIC_STANDARD;
  row->source = table_cell (table, i, table_column (table, "source"));
  return true;
}

struct calorific_component *
calorific_component_of (struct calorific_tables *tables, const char *key)
{
  struct calorific_component *found = map_find (tables->components, key, strlen (key));
  if (found == NULL) {
    found = ARENA_NEW (tables->arena, struct calorific_component);
    map_put (tables->components, key, strlen (key), found);
  }
  return found;
}

static bool
read_edition (struct calorific_tables *tables, enum calorific_edition edition,
              const char *directory, struct fault *fault)
{
  const struct table *table = table_read (tables->arena, table_of[edition], directory, fault);
  if (table == NULL)
    return false;
  struct row_columns column = find_columns (table);
  for (size_t i = 0; i < table_rows (table); i++) {
    struct calorific_component *to = calorific_component_of (tables, table_cell (table, i, 0));
    if (!read_row (table, i, &column, &to->in[edition], fault))
      return false;
    for (size_t k = 0; k < ATOMS; k++)
      if (column.atoms[k] >= 0 && !read_figure (table, i, column.atoms[k], 1, &to->atoms[k], fault))
        return false;
    to->known[edition] = true;
  }
  return true;
}

/* What is in the table of 2016 alone serves for 1995 too, and is told.  */
static void
lend (const char *key, void *value, void *with)
{
  struct calorific_component *component = value;
  (void) key;
  (void) with;
  if (component->known[CALORIFIC_1995] || !component->known[CALORIFIC_2016])
    return;
  component->known[CALORIFIC_1995] = true;
  component->in[CALORIFIC_1995] = component->in[CALORIFIC_2016];
  component->in[CALORIFIC_1995].origin = CALORIFIC_OTHER_EDITION;
}

/* ---- the constants ---- */

struct constant { double value, u; };

/* The constant called FRONT BACK in an edition; NAN where it has none.  A row further down
   replaces one above.                                                                           */
static bool
find_constant (const struct table *table, enum calorific_edition edition, const char *name,
               struct constant *found, struct fault *fault)
{
  bool old = edition == CALORIFIC_1995;
  int value = table_column (table, old ? "value_1995" : "value_2016");
  int u = table_column (table, "u_2016");
  *found = (struct constant) { (double) NAN, (double) NAN };
  for (size_t i = table_rows (table); i-- > 0;)
    if (strcmp (table_cell (table, i, 0), name) == 0)
      return table_number (table, i, value, &found->value, fault)
             && (old || table_number (table, i, u, &found->u, fault));
  return true;
}

/* COUNT constants called NAME_SUFFIX.  */
static bool
find_constants (const struct table *table, enum calorific_edition edition, const char *name,
                size_t count, const char *const suffix[], double scale, double value[],
                double u[], struct fault *fault)
{
  for (size_t i = 0; i < count; i++) {
    char whole[40];
    struct constant found;
    snprintf (whole, sizeof whole, "%s_%s", name, suffix[i]);
    if (!find_constant (table, edition, whole, &found, fault))
      return false;
    if (value != NULL)
      value[i] = found.value * scale;
    u[i] = found.u * scale;
  }
  return true;
}

static bool
read_constants (struct calorific_tables *tables, const struct table *table,
                enum calorific_edition edition, struct fault *fault)
{
  struct calorific_constants *to = &tables->edition[edition];
  struct constant R, air;
  if (!find_constant (table, edition, "R", &R, fault)
      || !find_constant (table, edition, "M_air", &air, fault)
      || !find_constants (table, edition, "Z_air", METERINGS, at, 1, to->air_Z, to->u_air_Z, fault)
      || !find_constants (table, edition, "L", COMBUSTIONS, at, KILOJOULE, to->L, to->u_L, fault)
      || !find_constants (table, edition, "A", ATOMS, calorific_atom, GRAM, NULL, to->u_atom,
                          fault))
    return false;
  to->R = R.value;
  to->u_R = R.u;
  to->air_molar_mass = air.value * GRAM;
  to->u_air_molar_mass = air.u * GRAM;
  return true;
}

/* ---- the whole ---- */

static bool
read_all (struct calorific_tables *tables, const char *directory, struct fault *fault)
{
  const struct table *constants = table_read (tables->arena, "iso6976_constants", NULL, fault);
  if (constants == NULL || !read_edition (tables, CALORIFIC_2016, directory, fault)
      || !read_edition (tables, CALORIFIC_1995, directory, fault)
      || !read_constants (tables, constants, CALORIFIC_2016, fault)
      || !read_constants (tables, constants, CALORIFIC_1995, fault))
    return false;
  map_each (tables->components, lend, NULL);
  return calorific_read_formation (tables, directory, fault);
}

struct calorific_tables *
calorific_tables_create (const char *directory, struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct calorific_tables *tables = ARENA_NEW (arena, struct calorific_tables);
  tables->arena = arena;
  tables->components = map_create ();
  if (read_all (tables, directory, fault))
    return tables;
  calorific_tables_destroy (tables);
  return NULL;
}

void
calorific_tables_destroy (struct calorific_tables *tables)
{
  if (tables == NULL)
    return;
  map_destroy (tables->components);
  arena_destroy (tables->arena);         /* TABLES itself lies in it */
}

const struct calorific_component *
calorific_find (const struct calorific_tables *tables, const struct species *species)
{
  if (species->origin == SPECIES_STATED)
    return NULL;
  return map_find (tables->components, species->key, strlen (species->key));
}

enum calorific_origin
calorific_origin (const struct calorific_tables *tables, enum calorific_edition edition,
                  const struct species *species)
{
  const struct calorific_component *found = calorific_find (tables, species);
  return found == NULL ? CALORIFIC_TRACE : found->in[edition].origin;
}
