/* What a species table is made of (private to this layer).  */
#ifndef GAS_SPECIES_PRIVATE_H
#define GAS_SPECIES_PRIVATE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "gas/air.h"
#include "gas/formula.h"
#include "gas/name_index.h"
#include "gas/species.h"

struct map;

struct air_part { size_t air; const struct species *species; double amount; };

/* All is in the arena, the table itself too, but for the map.  */
struct species_table {
  struct arena *arena;
  struct species *rows;
  size_t size;
  struct name_index names;               /* keys and words lead to rows, ambiguous ones to */
  const char **candidates;               /* these */
  struct map *made;                      /* species made on first use */
  struct elements elements;
  const char **airs;                     /* the definitions, by name */
  size_t air_count;
  struct air_part *air_parts;
  size_t air_part_count;
};

/* Fill TABLE, in this order.  */
bool species_read (struct species_table *, const char *directory, struct fault *) MUST_CHECK;
bool air_read (struct species_table *, const char *directory, struct fault *) MUST_CHECK;

/* The row of that key, null if there is none.  */
struct species *species_of_key (const struct species_table *, const char *key) MUST_CHECK;

#endif
