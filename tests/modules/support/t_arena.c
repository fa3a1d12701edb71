#include "config.h"
#include "support/arena.h"

#include <stdint.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>
#include "libtest.h"

static bool
is_zero (const char *bytes, size_t n)
{
  for (size_t i = 0; i < n; i++)
    if (bytes[i] != 0)
      return false;
  return true;
}

/* Sizes from a fixed seed, from nothing to beyond the largest chunk.  */
static size_t
some_size (uint32_t *seed)
{
  *seed = *seed * 1664525u + 1013904223u;
  return (*seed >> 8) % (*seed % 97 == 0 ? 3000000 : *seed % 7 == 0 ? 9000 : 90);
}

/* Every object is zero, aligned and keeps its bytes while others are handed out around it.  */
static void
objects_do_not_meet (void)
{
  enum { OBJECTS = 1500, ROUNDS = 3 };
  static char *object[OBJECTS];
  static size_t size[OBJECTS];
  struct arena *arena = arena_create ();
  uint32_t seed = 20;
  int dirty = 0, skew = 0, changed = 0;

  for (int round = 0; round < ROUNDS; round++) {
    for (int i = 0; i < OBJECTS; i++) {
      size[i] = some_size (&seed);
      object[i] = arena_alloc (arena, size[i], 1);
      dirty += !is_zero (object[i], size[i]);
      skew += (uintptr_t) object[i] % _Alignof (max_align_t) != 0;
      memset (object[i], i % 255 + 1, size[i]);
    }
    for (int i = 0; i < OBJECTS; i++)
      for (size_t at = 0; at < size[i]; at++)
        if (object[i][at] != (char) (i % 255 + 1)) {
          changed++;
          break;
        }
    arena_reset (arena);
  }
  SAME_INT (dirty, 0);
  SAME_INT (skew, 0);
  SAME_INT (changed, 0);
  arena_destroy (arena);
}

static void
a_reset_keeps_the_memory (void)
{
  struct arena *arena = arena_create ();
  char *first = arena_alloc (arena, 100, 1);

  for (int i = 0; i < 100; i++)
    memset (arena_alloc (arena, 10000, 1), 1, 10000);
  CHECK (arena_used (arena) >= 1000100);
  arena_reset (arena);
  SAME_INT (arena_used (arena), 0);
  CHECK (arena_alloc (arena, 100, 1) == (void *) first);
  CHECK (is_zero (first, 100));
  CHECK (arena_used (arena) >= 100);
  CHECK (arena_used (arena) < 200);
  arena_destroy (arena);
  arena_destroy (NULL);
}

/* The same large object line after line must not make the arena grow: it lies in one of two
   places, as small objects may have come into the one first.                                   */
static void
large_objects_are_found_again (void)
{
  enum { LINES = 50, LARGE = 5000000 };
  struct arena *arena = arena_create ();
  char *seen[LINES];
  int places = 0;

  for (int line = 0; line < LINES; line++) {
    char *large;
    bool known = false;

    for (int i = 0; i < line * 20; i++)
      memset (arena_alloc (arena, 1000, 1), 1, 1000);
    large = arena_alloc (arena, LARGE, 1);
    for (int i = 0; i < places; i++)
      known = known || seen[i] == large;
    if (!known)
      seen[places++] = large;
    arena_reset (arena);
  }
  CHECK (places <= 2);
  arena_destroy (arena);
}

static void
empty_objects_differ (void)
{
  struct arena *arena = arena_create ();
  void *one = arena_alloc (arena, 0, 8);
  void *other = arena_alloc (arena, 8, 0);

  CHECK (one != NULL);
  CHECK (other != NULL);
  CHECK (one != other);
  arena_destroy (arena);
}

static void
texts_are_copied (void)
{
  struct arena *arena = arena_create ();
  char source[] = "biogas\0raw";
  char *copy = arena_copy (arena, source, 10);
  char *string = arena_string (arena, source);

  memset (source, 'x', sizeof source - 1);
  CHECK (memcmp (copy, "biogas\0raw", 11) == 0);
  SAME_TEXT (string, "biogas");
  SAME_TEXT (arena_copy (arena, NULL, 0), "");
  SAME_TEXT (arena_string (arena, ""), "");
  arena_destroy (arena);
}

static void
formats_of_any_length (void)
{
  struct arena *arena = arena_create ();

  SAME_TEXT (arena_format (arena, "%d %s", 3, "of 4"), "3 of 4");
  SAME_TEXT (arena_format (arena, "%s", ""), "");
  for (int width = 250; width < 262; width++) {
    const char *made = arena_format (arena, "%*d", width, 7);

    SAME_INT (strlen (made), width);
    CHECK (made[width - 1] == '7');
  }
  CHECK (strlen (arena_format (arena, "%100000d|", 1)) == 100001);
  arena_destroy (arena);
}

static void
leave (void *with)
{
  _exit (*(const int *) with);
}

/* How a process ends that asks for COUNT objects of SIZE bytes after a handler was set, or not.  */
static int
status_of_asking (size_t count, size_t size, bool with_handler)
{
  int status = 7;
  pid_t child = fork ();

  if (child == 0) {
    struct arena *arena = arena_create ();

    if (with_handler)
      arena_on_exhaustion (leave, &status);
    else
      close (STDERR_FILENO);
    _exit (arena_alloc (arena, count, size) != NULL ? 0 : 1);
  }
  CHECK (child > 0 && waitpid (child, &status, 0) == child);
  return status;
}

static void
running_out_never_returns (void)
{
  int status = status_of_asking (SIZE_MAX / 2, 3, true);

  CHECK (WIFEXITED (status));
  SAME_INT (WEXITSTATUS (status), 7);
  status = status_of_asking (SIZE_MAX, 1, true);
  CHECK (WIFEXITED (status));
  SAME_INT (WEXITSTATUS (status), 7);
  status = status_of_asking (SIZE_MAX / 2, 3, false);
  CHECK (WIFSIGNALED (status) || WEXITSTATUS (status) == 99);
}

static const struct test_case cases[] = {
  { "objects do not meet", objects_do_not_meet },
  { "a reset keeps the memory", a_reset_keeps_the_memory },
  { "large objects are found again", large_objects_are_found_again },
  { "empty objects differ", empty_objects_differ },
  { "texts are copied", texts_are_copied },
  { "formats of any length", formats_of_any_length },
  { "running out never returns", running_out_never_returns },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
