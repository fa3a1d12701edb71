/* A table from words to pointers.

   Keys are copied; values are borrowed.  Owned by its creator.  Looking up does not allocate.  */
#ifndef SUPPORT_MAP_H
#define SUPPORT_MAP_H

#include <stddef.h>
#include "support/check.h"

struct map;

struct map *map_create (void) MUST_CHECK;
void map_destroy (struct map *);

/* Replaces the value of a key that is there; a null value removes the key.  */
void map_put (struct map *, const char *key, size_t length, void *value);
void *map_find (const struct map *, const char *key, size_t length);        /* null: absent */
size_t map_size (const struct map *);

/* Calls VISIT, which must not change the map, for every entry, in the order they were first put;
   one that was removed and put again stands where it came back.                                */
void map_each (const struct map *, void (*visit) (const char *key, void *value, void *with),
               void *with);

#endif
