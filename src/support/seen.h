/* Keys met before: for lists in which each stands once.

   Lives in an arena and is never cleared; { 0 } is empty.  Keys are copied.  */
#ifndef SUPPORT_SEEN_H
#define SUPPORT_SEEN_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena;

struct seen_key { size_t hash, length; const char *key; };
struct seen { size_t count, slots; struct seen_key *slot; };

/* Adds the LENGTH bytes at KEY; false if they are there.  */
bool seen_add (struct arena *, struct seen *, const void *key, size_t length) MUST_CHECK;

#endif
