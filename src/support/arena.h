/* Memory that is given back all at once.

   What is computed for one line lives in that line's arena and dies with it; what the session
   keeps is copied into an arena of its own.  An arena is owned by whoever created it; every
   pointer it hands out is borrowed and stays good until arena_reset or arena_destroy.  Out of
   memory never returns: the handler set by arena_on_exhaustion is called, then the process
   aborts.  Memory comes zeroed and aligned for any type.                                      */
#ifndef SUPPORT_ARENA_H
#define SUPPORT_ARENA_H

#include <stddef.h>
#include "support/check.h"

struct arena;

struct arena *arena_create (void) MUST_CHECK;
/* For what there are thousands of, with little in each.  */
struct arena *arena_create_small (void) MUST_CHECK;
void arena_destroy (struct arena *);                    /* null is allowed */

/* Forgets everything handed out but keeps the memory for the next line.  */
void arena_reset (struct arena *);

/* COUNT objects of SIZE bytes, zeroed; the product is checked.  */
void *arena_alloc (struct arena *, size_t count, size_t size) MUST_CHECK;

/* A copy of the N bytes at TEXT with a null byte behind them.  */
char *arena_copy (struct arena *, const char *text, size_t n) MUST_CHECK;
char *arena_string (struct arena *, const char *text) MUST_CHECK;
char *arena_format (struct arena *, const char *format, ...) PRINTF_LIKE (2, 3) MUST_CHECK;

/* Bytes handed out since the last reset.  */
size_t arena_used (const struct arena *);

/* Called by the shell: what to do, WITH what, when memory runs out (print, exit).  */
void arena_on_exhaustion (void (*handler) (void *), void *with);

#define ARENA_NEW(arena, type) ((type *) arena_alloc ((arena), 1, sizeof (type)))
#define ARENA_ARRAY(arena, count, type) ((type *) arena_alloc ((arena), (count), sizeof (type)))

#endif
