/* Memory from the system, with one place that knows what to do when there is none.

   Nothing here returns null: when memory runs out the handler is called, then the process
   aborts.  The other modules of this layer stand on it; layers above use arenas.               */
#ifndef SUPPORT_MEMORY_H
#define SUPPORT_MEMORY_H

#include <stddef.h>
#include "support/check.h"

/* COUNT objects of SIZE bytes, zeroed; the product is checked.  Owned by the caller.  */
void *memory_get (size_t count, size_t size) MUST_CHECK;

/* MEMORY (or null) grown or shrunk to COUNT objects of SIZE bytes; what is new is not zeroed.  */
void *memory_resize (void *memory, size_t count, size_t size) MUST_CHECK;

/* Gives MEMORY back; null is allowed.  */
void memory_release (void *memory);

/* The sum and the product of two sizes; too large a result counts as memory run out.  */
size_t memory_sum (size_t a, size_t b) MUST_CHECK;
size_t memory_product (size_t a, size_t b) MUST_CHECK;

/* What to do, WITH what, when memory runs out; null: only abort.  */
void memory_on_exhaustion (void (*handler) (void *), void *with);

#endif
