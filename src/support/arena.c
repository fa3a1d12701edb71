#include "config.h"
#include "support/arena.h"

#include <assert.h>
#include <stdalign.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>
#include "support/memory.h"

/* Under the address checker, what an arena has not handed out may not be touched: a pointer kept
   beyond arena_reset is found at its first use.                                                */
#if defined __SANITIZE_ADDRESS__
# define ARENA_POISONS 1
#elif defined __has_feature
# if __has_feature (address_sanitizer)
#  define ARENA_POISONS 1
# endif
#endif
#ifdef ARENA_POISONS
# include <sanitizer/asan_interface.h>
# define CLOSE_MEMORY(start, size) __asan_poison_memory_region ((start), (size))
# define OPEN_MEMORY(start, size) __asan_unpoison_memory_region ((start), (size))
#else
# define CLOSE_MEMORY(start, size) ((void) (start), (void) (size))
# define OPEN_MEMORY(start, size) ((void) (start), (void) (size))
#endif

enum {
  ALIGNMENT = alignof (max_align_t),
  FIRST_CHUNK = 16 * 1024,               /* bytes; most lines need no more */
  FIRST_SMALL = 512,
  LARGEST_STEP = 1024 * 1024             /* chunks double up to here */
};

/* A chunk's memory beyond `used` is zero at all times.  */
struct chunk {
  struct chunk *next;
  size_t room, used;                     /* bytes, multiples of ALIGNMENT */
  alignas (max_align_t) char bytes[];
};

/* The current chunk is kept as three pointers, so that handing out is an addition; its `used` is
   brought up to date only when it is left.  Chunks behind it are empty.                        */
struct arena {
  char *next, *end;
  struct chunk *first, *current;
  size_t used_before;                    /* bytes handed out of the chunks before the current */
  size_t step;                           /* room of the next chunk made */
};

static struct chunk *
chunk_create (size_t room)
{
  struct chunk *chunk = memory_get (1, memory_sum (sizeof (struct chunk), room));

  chunk->room = room;
  CLOSE_MEMORY (chunk->bytes, room);
  return chunk;
}

static void
chunk_destroy (struct chunk *chunk)
{
  OPEN_MEMORY (chunk->bytes, chunk->room);
  memory_release (chunk);
}

static void
chunk_wipe (struct chunk *chunk)
{
  OPEN_MEMORY (chunk->bytes, chunk->used);
  memset (chunk->bytes, 0, chunk->used);
  CLOSE_MEMORY (chunk->bytes, chunk->used);
  chunk->used = 0;
}

static void
enter_chunk (struct arena *arena, struct chunk *chunk)
{
  arena->current = chunk;
  arena->next = chunk->bytes;
  arena->end = chunk->bytes + chunk->room;
}

static struct arena *
create_with (size_t room)
{
  struct arena *arena = memory_get (1, sizeof (struct arena));

  arena->step = 2 * room;
  arena->first = chunk_create (room);
  enter_chunk (arena, arena->first);
  return arena;
}

struct arena *
arena_create (void)
{
  return create_with (FIRST_CHUNK);
}

struct arena *
arena_create_small (void)
{
  return create_with (FIRST_SMALL);
}

void
arena_destroy (struct arena *arena)
{
  if (arena == NULL)
    return;
  for (struct chunk *chunk = arena->first, *next; chunk != NULL; chunk = next) {
    next = chunk->next;
    chunk_destroy (chunk);
  }
  memory_release (arena);
}

/* Notes in the current chunk how much of it is handed out.  */
static void
settle_chunk (struct arena *arena)
{
  arena->current->used = (size_t) (arena->next - arena->current->bytes);
}

void
arena_reset (struct arena *arena)
{
  settle_chunk (arena);
  for (struct chunk *chunk = arena->first; ; chunk = chunk->next) {
    chunk_wipe (chunk);
    if (chunk == arena->current)
      break;
  }
  arena->used_before = 0;
  enter_chunk (arena, arena->first);
}

/* Takes the smallest empty chunk with room for BYTES out of the list behind CHUNK; null: none.  */
static struct chunk *
take_kept (struct chunk *chunk, size_t bytes)
{
  struct chunk **best = NULL;
  struct chunk *kept = NULL;

  for (struct chunk **link = &chunk->next; *link != NULL; link = &(*link)->next)
    if ((*link)->room >= bytes && (best == NULL || (*link)->room < (*best)->room))
      best = link;
  if (best != NULL) {
    kept = *best;
    *best = kept->next;
  }
  return kept;
}

/* Puts a chunk with room for BYTES behind the current one and enters it: one kept from before if
   any is large enough, else a new one.                                                         */
static void
advance (struct arena *arena, size_t bytes)
{
  struct chunk *chunk = take_kept (arena->current, bytes);

  settle_chunk (arena);
  arena->used_before += arena->current->used;
  if (chunk == NULL && bytes > arena->step / 2)
    chunk = chunk_create (bytes);
  else if (chunk == NULL) {
    chunk = chunk_create (arena->step);
    if (arena->step < LARGEST_STEP)
      arena->step *= 2;
  }
  chunk->next = arena->current->next;
  arena->current->next = chunk;
  enter_chunk (arena, chunk);
}

/* BYTES rounded up, so that the next object is aligned and no two objects share an address.  */
static size_t
rounded_up (size_t bytes)
{
  if (bytes == 0)
    return ALIGNMENT;
  return memory_sum (bytes, ALIGNMENT - 1) & ~(size_t) (ALIGNMENT - 1);
}

void *
arena_alloc (struct arena *arena, size_t count, size_t size)
{
  size_t bytes = memory_product (count, size);
  size_t taken = rounded_up (bytes);
  char *object;

  if (taken > (size_t) (arena->end - arena->next))
    advance (arena, taken);
  object = arena->next;
  arena->next += taken;
  OPEN_MEMORY (object, bytes);
  return object;
}

char *
arena_copy (struct arena *arena, const char *text, size_t n)
{
  char *copy = arena_alloc (arena, memory_sum (n, 1), 1);

  if (n > 0)
    memcpy (copy, text, n);
  return copy;
}

char *
arena_string (struct arena *arena, const char *text)
{
  return arena_copy (arena, text, strlen (text));
}

char *
arena_format (struct arena *arena, const char *format, ...)
{
  char shortly[256];
  char *made;
  int length;
  va_list arguments;

  va_start (arguments, format);
  length = vsnprintf (shortly, sizeof shortly, format, arguments);
  va_end (arguments);
  assert (length >= 0);
  if ((size_t) length < sizeof shortly)
    return arena_copy (arena, shortly, (size_t) length);

  made = arena_alloc (arena, (size_t) length + 1, 1);
  va_start (arguments, format);
  vsnprintf (made, (size_t) length + 1, format, arguments);
  va_end (arguments);
  return made;
}

size_t
arena_used (const struct arena *arena)
{
  return arena->used_before + (size_t) (arena->next - arena->current->bytes);
}

void
arena_on_exhaustion (void (*handler) (void *), void *with)
{
  memory_on_exhaustion (handler, with);
}
