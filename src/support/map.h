/* A table from words to pointers.

   Keys are copied; values are borrowed.  Owned by its creator.  Looking up does not allocate.  */
#ifndef SUPPORT_MAP_H
#define SUPPORT_MAP_H

#include <stddef.h>
#include "support/check.h"

struct map;

struct map *map_create (void) MUST_CHECK;
void map_destroy (struct map *);
void map_put (struct map *, const char *key, size_t length, void *value);   /* replaces; null removes */
void *map_find (const struct map *, const char *key, size_t length);        /* null: absent */
size_t map_size (const struct map *);

/* Calls VISIT for every entry, in the order they were first put.  */
void map_each (const struct map *, void (*visit) (const char *key, void *value, void *with),
               void *with);

#endif
