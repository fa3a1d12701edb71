#include "config.h"
#include "property/property_tables.h"

#include "property/figures.h"
#include "support/arena.h"

struct property_tables {
  struct arena *arena;
  const char *directory;
  struct figures *read[PROPERTY_TABLES]; /* null: not yet */
};

static const char *const names[PROPERTY_TABLES] = { "cp_ideal", "viscosity", "virial",
                                                     "fuels" };

struct property_tables *
property_tables_create (const char *directory)
{
  struct arena *arena = arena_create ();
  struct property_tables *tables = ARENA_NEW (arena, struct property_tables);
  tables->arena = arena;
  tables->directory = directory == NULL ? NULL : arena_string (arena, directory);
  for (size_t i = 0; i < PROPERTY_TABLES; i++)
    tables->read[i] = NULL;
  return tables;
}

void
property_tables_destroy (struct property_tables *tables)
{
  if (tables == NULL)
    return;
  for (size_t i = 0; i < PROPERTY_TABLES; i++)
    figures_destroy (tables->read[i]);
  arena_destroy (tables->arena);         /* TABLES itself lies in it */
}

const struct figures *
property_tables_read (struct property_tables *tables, enum property_table which, size_t n,
                      const char *const column[], struct fault *fault)
{
  if (tables->read[which] == NULL)
    tables->read[which] = figures_create (names[which], tables->directory, n, column, fault);
  return tables->read[which];
}
