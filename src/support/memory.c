#include "config.h"
#include "support/memory.h"

#include <stdint.h>
#include <stdlib.h>

/* What changes in this layer: set by the shell, before anything else.  */
static struct { void (*handler) (void *); void *with; } exhaustion;

void
memory_on_exhaustion (void (*handler) (void *), void *with)
{
  exhaustion.handler = handler;
  exhaustion.with = with;
}

static _Noreturn void
give_up (void)
{
  if (exhaustion.handler != NULL)
    exhaustion.handler (exhaustion.with);
  abort ();
}

size_t
memory_sum (size_t a, size_t b)
{
  if (a > SIZE_MAX - b)
    give_up ();
  return a + b;
}

size_t
memory_product (size_t a, size_t b)
{
  const size_t half = (size_t) 1 << sizeof (size_t) * 4;   /* the root of what a size can hold */

  if ((a >= half || b >= half) && b != 0 && a > SIZE_MAX / b)
    give_up ();
  return a * b;
}

void *
memory_get (size_t count, size_t size)
{
  size_t bytes = memory_product (count, size);
  void *memory = calloc (1, bytes > 0 ? bytes : 1);

  if (memory == NULL)
    give_up ();
  return memory;
}

void *
memory_resize (void *memory, size_t count, size_t size)
{
  size_t bytes = memory_product (count, size);
  void *moved = realloc (memory, bytes > 0 ? bytes : 1);

  if (moved == NULL)
    give_up ();
  return moved;
}

void
memory_release (void *memory)
{
  free (memory);
}
