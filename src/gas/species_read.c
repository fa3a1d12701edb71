/* The species table read from its tables: components, elements, ambiguous names, exposure and
   flammability.  A user's rows come behind the built-in ones and replace those of the same key.  */
#include "config.h"
#include "gas/species_private.h"

#include <math.h>
#include <string.h>
#include "gas/naming.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/table.h"

static const double PPM = 1e-6, PERCENT = 1e-2;

/* What a row that names no 8 h figure of the EU is held against.  */
static const char ontario[] = "Ontario Reg. 833";

/* The figure in a cell times SCALE, NAN where it is empty; it must be above 0.  */
static bool
read_positive (const struct table *table, size_t row, int column, double scale, double *value,
               struct fault *fault)
{
  double figure;

  if (!table_number (table, row, column, &figure, fault))
    return false;
  if (figure <= 0)
    return table_complain (table, row, "this figure is above 0, or missing", fault);
  *value = figure * scale;
  return true;
}

/* The formula as the row has it, put in Hill order, and its molar mass.  */
static bool
read_formula (struct species_table *species, const struct table *table, size_t row,
              struct species *one, struct fault *fault)
{
  const char *cell = one->formula;
  char hill[FORMULA_ROOM];
  struct atoms atoms;

  if (!atoms_read (cell, strlen (cell), &atoms))
    return table_complain (table, row, "no chemical formula", fault);
  if (!atoms_molar_mass (&species->elements, &atoms, &one->molar_mass))
    return table_complain (table, row, "the formula has an element of no known weight", fault);
  atoms_write (&atoms, hill);
  one->formula = strcmp (hill, cell) == 0 ? cell : arena_string (species->arena, hill);
  return true;
}

struct species_columns {
  int name, synonyms, cas, formula, T_critical, p_critical, V_critical, acentric_factor,
      T_boiling, boiling, note, source;
};

static struct species_columns
columns_of (const struct table *table)
{
  return (struct species_columns) {
    .name = table_column (table, "name"),
    .synonyms = table_column (table, "synonyms"),
    .cas = table_column (table, "CAS"),
    .formula = table_column (table, "formula"),
    .T_critical = table_column (table, "T_critical_K"),
    .p_critical = table_column (table, "p_critical_kPa"),
    .V_critical = table_column (table, "V_critical_cm3_mol"),
    .acentric_factor = table_column (table, "acentric_factor"),
    .T_boiling = table_column (table, "T_boiling_K"),
    .boiling = table_column (table, "boiling"),
    .note = table_column (table, "note"),
    .source = table_column (table, "source"),
  };
}

static bool
read_constants (const struct table *table, size_t row, const struct species_columns *at,
                struct species *one, struct fault *fault)
{
  return read_positive (table, row, at->T_critical, 1, &one->critical_temperature, fault)
         && read_positive (table, row, at->p_critical, 1e3, &one->critical_pressure, fault)
         && read_positive (table, row, at->V_critical, 1e-6, &one->critical_molar_volume, fault)
         && table_number (table, row, at->acentric_factor, &one->acentric_factor, fault)
         && read_positive (table, row, at->T_boiling, 1, &one->boiling_point, fault);
}

static bool
read_row (struct species_table *species, const struct table *table, size_t row,
          const struct species_columns *at, struct fault *fault)
{
  const char *key = table_cell (table, row, 0);
  const char *name = table_cell (table, row, at->name);
  struct species one = {
    .key = key,
    .name = name[0] == '\0' ? key : name,
    .synonyms = table_cell (table, row, at->synonyms),
    .cas = table_cell (table, row, at->cas),
    .formula = table_cell (table, row, at->formula),
    .exposure_limit = (double) NAN, .exposure_source = "", .flags = "",
    .lower_flammable = (double) NAN, .upper_flammable = (double) NAN, .flammable_source = "",
    .origin = table_row_is_users (table, row) ? SPECIES_USERS : SPECIES_TABLE,
  };
  struct species *place = species_of_key (species, key);

  if (!read_formula (species, table, row, &one, fault)
      || !read_constants (table, row, at, &one, fault))
    return false;
  one.sublimes = strcmp (table_cell (table, row, at->boiling), "sublimes") == 0;
  one.note = table_cell (table, row, at->note);
  one.source = table_cell (table, row, at->source);
  if (place == NULL) {
    place = &species->rows[species->size];
    if (!name_index_add (&species->names, NAME_KEY, key, strlen (key), species->size))
      return table_complain (table, row, "this key is too long", fault);
    species->size++;
  }
  *place = one;
  return true;
}

/* How many names the rows of TABLE have at most: a key, a name and synonyms.  */
static size_t
count_names (const struct table *table)
{
  int synonyms = table_column (table, "synonyms");
  size_t count = 0;

  for (size_t i = 0; i < table_rows (table); i++) {
    count += 3;
    for (const char *at = table_cell (table, i, synonyms); (at = strchr (at, '|')) != NULL; at++)
      count++;
  }
  return count;
}

static bool
read_components (struct species_table *species, const struct table *table, struct fault *fault)
{
  struct species_columns at = columns_of (table);

  species->rows = ARENA_ARRAY (species->arena, table_rows (table) + 1, struct species);
  for (size_t i = 0; i < table_rows (table); i++)
    if (!read_row (species, table, i, &at, fault))
      return false;
  return true;
}

/* The species that a row of another table is about.  */
static struct species *
species_of_row (const struct species_table *species, const struct table *table, size_t row,
                struct fault *fault)
{
  const char *key = table_cell (table, row, 0);
  struct species *found = species_of_key (species, key);

  if (found == NULL)
    (void) table_complain (table, row, "no component has this key", fault);
  return found;
}

static bool
read_exposure (struct species_table *species, const char *directory, struct fault *fault)
{
  const struct table *table = table_read (species->arena, "exposure", directory, fault);
  int flags, eu, directive, on;

  if (table == NULL)
    return false;
  flags = table_column (table, "flags");
  eu = table_column (table, "EU_8h_ppm");
  directive = table_column (table, "EU_directive");
  on = table_column (table, "ON_8h_ppm");
  for (size_t i = 0; i < table_rows (table); i++) {
    struct species *one = species_of_row (species, table, i, fault);
    double eu_limit = (double) NAN, on_limit = (double) NAN;

    if (one == NULL || !read_positive (table, i, eu, PPM, &eu_limit, fault)
        || !read_positive (table, i, on, PPM, &on_limit, fault))
      return false;
    one->flags = table_cell (table, i, flags);
    one->exposure_limit = isnan (eu_limit) ? on_limit : eu_limit;
    one->exposure_source = !isnan (eu_limit) ? table_cell (table, i, directive)
                           : !isnan (on_limit) ? ontario : "";
  }
  return true;
}

static bool
read_flammability (struct species_table *species, const char *directory, struct fault *fault)
{
  const struct table *table = table_read (species->arena, "flammability", directory, fault);
  int lower, upper, source;

  if (table == NULL)
    return false;
  lower = table_column (table, "lower_vol_pct");
  upper = table_column (table, "upper_vol_pct");
  source = table_column (table, "source");
  for (size_t i = 0; i < table_rows (table); i++) {
    struct species *one = species_of_row (species, table, i, fault);

    if (one == NULL || !read_positive (table, i, lower, PERCENT, &one->lower_flammable, fault)
        || !read_positive (table, i, upper, PERCENT, &one->upper_flammable, fault))
      return false;
    if (one->lower_flammable >= one->upper_flammable || one->upper_flammable > 1)
      return table_complain (table, i, "the lower limit is below the upper, both within 100 %",
                             fault);
    one->flammable_source = table_cell (table, i, source);
  }
  return true;
}

/* The names of all species of that origin; those entered last win.  A name that is too long to be
   typed is only shown.                                                                          */
static void
enter_names (struct species_table *species, enum species_origin origin)
{
  for (size_t i = 0; i < species->size; i++) {
    const struct species *one = &species->rows[i];

    if (one->origin != origin)
      continue;
    (void) name_index_add (&species->names, NAME_WORD, one->name, strlen (one->name), i);
    for (const char *at = one->synonyms, *next; at != NULL && at[0] != '\0'; at = next) {
      size_t length = naming_first (at, &next);

      (void) name_index_add (&species->names, NAME_WORD, at, length, i);
    }
  }
}

static bool
read_ambiguous (struct species_table *species, const struct table *table, struct fault *fault)
{
  int candidates = table_column (table, "candidates");

  species->candidates = ARENA_ARRAY (species->arena, table_rows (table) + 1, const char *);
  for (size_t i = 0; i < table_rows (table); i++) {
    const char *name = table_cell (table, i, 0);

    species->candidates[i] = table_cell (table, i, candidates);
    if (species->candidates[i][0] == '\0'
        || !name_index_add (&species->names, NAME_OPEN, name, strlen (name), i))
      return table_complain (table, i, "a name and its candidates are expected", fault);
  }
  return true;
}

bool
species_read (struct species_table *species, const char *directory, struct fault *fault)
{
  static const char dry_air[] = "dry air";
  const struct table *components, *ambiguous;

  if (!elements_read (species->arena, directory, &species->elements, fault)
      || (components = table_read (species->arena, "species", directory, fault)) == NULL
      || (ambiguous = table_read (species->arena, "ambiguous", directory, fault)) == NULL)
    return false;
  name_index_init (&species->names, species->arena,
                   count_names (components) + table_rows (ambiguous) + 1);
  if (!read_components (species, components, fault)
      || !read_ambiguous (species, ambiguous, fault)
      || !read_exposure (species, directory, fault)
      || !read_flammability (species, directory, fault))
    return false;
  enter_names (species, SPECIES_TABLE);
  enter_names (species, SPECIES_USERS);
  return name_index_add (&species->names, NAME_PHRASE, dry_air, strlen (dry_air), 0);
}
