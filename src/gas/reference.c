#include "config.h"
#include "gas/reference.h"

#include <assert.h>
#include <math.h>
#include <string.h>
#include "gas/naming.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "support/number.h"
#include "support/table.h"
#include "units/unit.h"

/* Texts and rows are in the arena, and so is the table itself.  */
struct reference_table {
  struct arena *arena;
  struct reference *rows;
  size_t size;
  struct map *names;                     /* squeezed -> struct reference */
  struct map *open;                      /* squeezed -> candidates */
};

/* What a row is read with.  */
struct reading {
  struct reference_table *references;
  struct unit_table *units;
  const struct table *table;
  size_t row;
  struct fault *fault;
};

static bool
complain (const struct reading *reading, const char *what)
{
  return table_complain (reading->table, reading->row, what, reading->fault);
}

/* quantity = NUMBER " " UNIT, in SI.  *UNIT is borrowed from the table of units.  */
static bool
read_quantity (const struct reading *reading, const char *cell, const struct unit **unit,
               double *value)
{
  const char *blank = strchr (cell, ' ');
  const char *digits = cell + (cell[0] == '-' ? 1 : 0);
  struct fault unread;
  double figure;
  bool too_large;

  if (blank == NULL || blank < digits
      || !number_read (digits, (size_t) (blank - digits), &figure, &too_large))
    return complain (reading, "a number, a blank and a unit are expected");
  fault_init (&unread, reading->references->arena);
  *unit = unit_find (reading->units, blank + 1, strlen (blank + 1), &unread);
  if (*unit == NULL)
    return complain (reading, "this unit is not known");
  *value = unit_to_si (*unit, digits == cell ? figure : -figure);
  return true;
}

static bool
read_temperature (const struct reading *reading, const char *cell, double *T)
{
  const struct unit *unit;

  if (!read_quantity (reading, cell, &unit, T))
    return false;
  if (unit->sort != UNIT_POINT || !(*T > 0))
    return complain (reading, "a temperature above absolute zero is expected");
  return true;
}

static bool
read_pressure (const struct reading *reading, const char *cell, double *p)
{
  const struct unit *unit, *pascal;
  struct fault unread;

  if (!read_quantity (reading, cell, &unit, p))
    return false;
  fault_init (&unread, reading->references->arena);
  pascal = unit_find (reading->units, "Pa", 2, &unread);
  if (pascal == NULL || !unit_same_measure (unit, pascal)
      || (unit->sort != UNIT_SCALE && unit->sort != UNIT_ABSOLUTE) || !(*p > 0))
    return complain (reading, "an absolute pressure above 0 is expected");
  return true;
}

/* moisture = "" | "dry" | "saturated" | NUMBER " %RH".  */
static bool
read_moisture (const struct reading *reading, const char *cell, double *humidity)
{
  const struct unit *unit;

  if (cell[0] == '\0')
    *humidity = (double) NAN;
  else if (strcmp (cell, "dry") == 0)
    *humidity = 0;
  else if (strcmp (cell, "saturated") == 0)
    *humidity = 1;
  else if (!read_quantity (reading, cell, &unit, humidity))
    return false;
  else if (unit->sort != UNIT_HUMIDITY || !(*humidity >= 0 && *humidity <= 1))
    return complain (reading, "dry, saturated or 0 to 100 %RH is expected");
  return true;
}

static void
enter_name (struct reference_table *references, const char *name, size_t n,
            struct reference *reference)
{
  char squeezed[NAMING_ROOM];
  size_t length = naming_squeezed (name, n, squeezed);

  if (length > 0)
    map_put (references->names, squeezed, length, reference);
}

static struct reference *
place_of (struct reference_table *references, const char *name)
{
  for (size_t i = 0; i < references->size; i++)
    if (strcmp (references->rows[i].name, name) == 0)
      return &references->rows[i];
  return &references->rows[references->size++];
}

static bool
read_row (const struct reading *reading)
{
  const struct table *table = reading->table;
  size_t row = reading->row;
  struct reference one = {
    .name = table_cell (table, row, 0),
    .synonyms = table_cell (table, row, table_column (table, "synonyms")),
    .title = table_cell (table, row, table_column (table, "title")),
    .temperature = table_cell (table, row, table_column (table, "temperature")),
    .pressure = table_cell (table, row, table_column (table, "pressure")),
    .moisture = table_cell (table, row, table_column (table, "moisture")),
    .used_by = table_cell (table, row, table_column (table, "used_by")),
    .note = table_cell (table, row, table_column (table, "note")),
    .source = table_cell (table, row, table_column (table, "source")),
    .users = table_row_is_users (table, row),
  };

  if (!read_temperature (reading, one.temperature, &one.at.T)
      || !read_pressure (reading, one.pressure, &one.at.p)
      || !read_moisture (reading, one.moisture, &one.at.humidity))
    return false;
  *place_of (reading->references, one.name) = one;
  return true;
}

static void
enter_names (struct reference_table *references)
{
  for (size_t i = 0; i < references->size; i++) {
    struct reference *one = &references->rows[i];

    enter_name (references, one->name, strlen (one->name), one);
    for (const char *at = one->synonyms, *next; at != NULL && at[0] != '\0'; at = next) {
      size_t length = naming_first (at, &next);

      enter_name (references, at, length, one);
    }
  }
}

static bool
read_references (struct reading *reading, const char *directory)
{
  struct reference_table *references = reading->references;

  reading->table = table_read (references->arena, "references", directory, reading->fault);
  if (reading->table == NULL)
    return false;
  references->rows = ARENA_ARRAY (references->arena, table_rows (reading->table) + 1,
                                  struct reference);
  for (reading->row = 0; reading->row < table_rows (reading->table); reading->row++)
    if (!read_row (reading))
      return false;
  enter_names (references);
  return true;
}

static bool
read_ambiguous (struct reference_table *references, const char *directory, struct fault *fault)
{
  const struct table *table = table_read (references->arena, "reference_names", directory, fault);
  int candidates;

  if (table == NULL)
    return false;
  candidates = table_column (table, "candidates");
  for (size_t i = 0; i < table_rows (table); i++) {
    const char *name = table_cell (table, i, 0);
    const char *list = table_cell (table, i, candidates);
    char squeezed[NAMING_ROOM];
    size_t length = naming_squeezed (name, strlen (name), squeezed);

    if (length == 0 || list[0] == '\0')
      return table_complain (table, i, "a name and its candidates are expected", fault);
    map_put (references->open, squeezed, length, arena_string (references->arena, list));
  }
  return true;
}

struct reference_table *
reference_table_create (struct unit_table *units, const char *directory, struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct reference_table *references = ARENA_NEW (arena, struct reference_table);
  struct reading reading = { .references = references, .units = units, .fault = fault };

  references->arena = arena;
  references->names = map_create ();
  references->open = map_create ();
  if (read_references (&reading, directory) && read_ambiguous (references, directory, fault))
    return references;
  reference_table_destroy (references);
  return NULL;
}

void
reference_table_destroy (struct reference_table *references)
{
  if (references == NULL)
    return;
  map_destroy (references->names);
  map_destroy (references->open);
  arena_destroy (references->arena);
}

size_t
reference_table_size (const struct reference_table *references)
{
  return references->size;
}

const struct reference *
reference_table_at (const struct reference_table *references, size_t i)
{
  assert (i < references->size);
  return &references->rows[i];
}

enum reference_match
reference_find (const struct reference_table *references, const char *name, size_t n,
                const struct reference **found, const char **candidates)
{
  char squeezed[NAMING_ROOM];
  size_t length = naming_squeezed (name, n, squeezed);
  const struct reference *one;
  const char *list;

  if (length == 0)
    return REFERENCE_NONE;
  if ((one = map_find (references->names, squeezed, length)) != NULL) {
    *found = one;
    return REFERENCE_ONE;
  }
  if ((list = map_find (references->open, squeezed, length)) != NULL) {
    *candidates = list;
    return REFERENCE_AMBIGUOUS;
  }
  return REFERENCE_NONE;
}
