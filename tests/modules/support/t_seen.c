#include "config.h"

#include <string.h>

#include "libtest.h"
#include "support/arena.h"
#include "support/seen.h"

/* Every word is new once, however the table has grown since; a key is its bytes and its length.  */
static void
each_once (void)
{
  enum { WORDS = 3000 };
  struct arena *arena = arena_create ();
  struct seen seen = { .count = 0 };
  for (int round = 0; round < 2; round++) {
    for (int i = 0; i < WORDS; i++) {
      const char *word = arena_format (arena, "word %d", i);
      test_about ("%s, round %d", word, round);
      SAME_INT (seen_add (arena, &seen, word, strlen (word)), round == 0);
    }
  }
  SAME_INT (seen.count, WORDS);
  CHECK (seen_add (arena, &seen, "word 17", 5));
  CHECK (!seen_add (arena, &seen, "word 18", 5));
  CHECK (seen_add (arena, &seen, "", 0));
  CHECK (!seen_add (arena, &seen, "", 0));
  arena_destroy (arena);
}

/* Keys are copied.  */
static void
copied (void)
{
  struct arena *arena = arena_create ();
  struct seen seen = { .count = 0 };
  char word[] = "first";
  CHECK (seen_add (arena, &seen, word, 5));
  memcpy (word, "other", 5);
  CHECK (seen_add (arena, &seen, word, 5));
  CHECK (!seen_add (arena, &seen, "first", 5));
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "a key is new once", each_once },
  { "keys are copied", copied },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
