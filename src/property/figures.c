#include "config.h"
#include "property/figures.h"

#include <stdio.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "support/table.h"

struct figures { struct arena *arena; const char *table; struct map *rows; };

static bool
read_rows (struct figures *figures, const struct table *table, const int at[], size_t n,
           struct fault *fault)
{
  int note = table_column (table, "note"), source = table_column (table, "source");
  for (size_t i = 0; i < table_rows (table); i++) {
    const char *key = table_cell (table, i, 0);
    struct figures_row *row = ARENA_NEW (figures->arena, struct figures_row);
    double *value = ARENA_ARRAY (figures->arena, n, double);
    for (size_t k = 0; k < n; k++)
      if (!table_number (table, i, at[k], &value[k], fault))
        return false;
    *row = (struct figures_row) {
      key, value, table_cell (table, i, note), table_cell (table, i, source)
    };
    map_put (figures->rows, key, strlen (key), row);
  }
  return true;
}

struct figures *
figures_create (const char *name, const char *directory, size_t n, const char *const column[],
                struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct figures *figures = ARENA_NEW (arena, struct figures);
  *figures = (struct figures) { arena, arena_string (arena, name), map_create () };
  struct table *table = table_read (arena, name, directory, fault);
  int *at = ARENA_ARRAY (arena, n, int);
  for (size_t k = 0; table != NULL && k < n; k++)
    at[k] = table_column (table, column[k]);
  if (table != NULL && read_rows (figures, table, at, n, fault))
    return figures;
  figures_destroy (figures);
  return NULL;
}

void
figures_destroy (struct figures *figures)
{
  if (figures == NULL)
    return;
  map_destroy (figures->rows);
  arena_destroy (figures->arena);        /* FIGURES itself lies in it */
}

const struct figures_row *
figures_of (const struct figures *figures, const struct species *species)
{
  if (species->origin == SPECIES_STATED)
    return NULL;
  return map_find (figures->rows, species->key, strlen (species->key));
}

const struct figures_row *
figures_named (const struct figures *figures, const char *key)
{
  return map_find (figures->rows, key, strlen (key));
}

struct visiting { void (*visit) (const struct figures_row *, void *with); void *with; };

static void
visit_row (const char *key, void *row, void *with)
{
  struct visiting *v = with;
  (void) key;
  v->visit (row, v->with);
}

void
figures_each (const struct figures *figures, void (*visit) (const struct figures_row *, void *with),
              void *with)
{
  struct visiting v = { visit, with };
  map_each (figures->rows, visit_row, &v);
}

bool
figures_cover (const struct figures *figures, const struct composition *gas, struct fault *fault)
{
  size_t worst = gas->count;
  for (size_t i = 0; i < gas->count; i++) {
    bool lacks = gas->fraction[i] > 0 && figures_of (figures, gas->species[i]) == NULL;
    if (lacks && (worst == gas->count || gas->fraction[i] > gas->fraction[worst]))
      worst = i;
  }
  if (worst == gas->count)
    return true;
  char what[40];
  snprintf (what, sizeof what, "the table %s", figures->table);
  fault_set (fault, MESSAGE_MODEL_LACKS, what, gas->species[worst]->key);
  if (gas->species[worst]->origin == SPECIES_STATED) {
    fault_hint (fault, "only what was stated of %s is known; its composition would do",
                gas->species[worst]->key);
  } else {
    fault_hint (fault, "a row of your own in %s.tsv adds it (option --tables)", figures->table);
  }
  return false;
}
