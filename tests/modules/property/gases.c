#include "config.h"
#include "modules/property/gases.h"

#include <stdlib.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "property/property_tables.h"
#include "support/arena.h"

enum { PARTS_MOST = 16 };

void
gases_start (struct gases *g)
{
  arena_destroy (g->arena);
  g->arena = arena_create ();
  fault_init (&g->fault, g->arena);
  if (g->species == NULL)
    g->species = species_table_create (NULL, &g->fault);
  if (g->tables == NULL)
    g->tables = property_tables_create (NULL);
}

void
gases_end (struct gases *g)
{
  property_tables_destroy (g->tables);
  species_table_destroy (g->species);
  arena_destroy (g->arena);
}

static const struct species *
find (struct gases *g, const char *key, size_t n)
{
  const struct species *found = NULL;
  const char *candidates;
  enum species_match match = species_find (g->species, key, n, &found, &candidates);
  return match == SPECIES_KEY || match == SPECIES_PLAIN_FORMULA ? found : NULL;
}

const struct species *
gases_species (struct gases *g, const char *key)
{
  return find (g, key, strlen (key));
}

const struct composition *
gases_make (struct gases *g, const char *text)
{
  struct part parts[PARTS_MOST];
  size_t n = 0;
  for (; *text != '\0' && n < PARTS_MOST; n++) {
    size_t length = strcspn (text, " ");
    char *end;
    parts[n].species = find (g, text, length);
    if (parts[n].species == NULL)
      return NULL;
    parts[n].amount = strtod (text + length, &end);
    text = end + strspn (end, ", ");
  }
  return composition_make (g->arena, n, parts, &g->fault);
}
