#include "config.h"
#include "support/map.h"

#include <stdio.h>
#include <string.h>
#include "libtest.h"

enum { MANY = 10000 };

static int numbers[MANY];

/* Keys as a session has them: many that differ in a few signs, some long, some of one letter.  */
static size_t
key_of (int i, char *key, size_t room)
{
  static const char *const before[] = { "stream-", "", "C", "a rather long heading, no. " };

  return (size_t) snprintf (key, room, "%s%d%s", before[i % 4], i, i % 4 == 2 ? "H4" : "");
}

static void
finds_ten_thousand (void)
{
  struct map *map = map_create ();
  char key[64];
  int wrong = 0, strange = 0;

  for (int i = 0; i < MANY; i++)
    map_put (map, key, key_of (i, key, sizeof key), &numbers[i]);
  SAME_INT (map_size (map), MANY);
  for (int i = 0; i < MANY; i++) {
    size_t length = key_of (i, key, sizeof key);

    wrong += map_find (map, key, length) != &numbers[i];
    key[length] = '?';
    strange += map_find (map, key, length + 1) != NULL;
  }
  SAME_INT (wrong, 0);
  SAME_INT (strange, 0);
  map_destroy (map);
}

static void
keys_are_copied_with_their_length (void)
{
  struct map *map = map_create ();
  char key[] = "feed and more";

  map_put (map, key, 4, &numbers[1]);
  map_put (map, "fe\0d", 4, &numbers[2]);
  map_put (map, "", 0, &numbers[3]);
  memset (key, 'x', 4);
  CHECK (map_find (map, "feed", 4) == &numbers[1]);
  CHECK (map_find (map, "fe\0d", 4) == &numbers[2]);
  CHECK (map_find (map, "", 0) == &numbers[3]);
  CHECK (map_find (map, "fe", 2) == NULL);
  CHECK (map_find (map, "feed ", 5) == NULL);
  CHECK (map_find (map, "Feed", 4) == NULL);
  map_destroy (map);
}

static void
an_empty_map_finds_nothing (void)
{
  struct map *map = map_create ();

  CHECK (map_find (map, "feed", 4) == NULL);
  map_put (map, "feed", 4, NULL);
  SAME_INT (map_size (map), 0);
  map_destroy (map);
  map_destroy (NULL);
}

static void
puts_replace_and_remove (void)
{
  struct map *map = map_create ();

  map_put (map, "feed", 4, &numbers[1]);
  map_put (map, "feed", 4, &numbers[2]);
  SAME_INT (map_size (map), 1);
  CHECK (map_find (map, "feed", 4) == &numbers[2]);
  map_put (map, "feed", 4, NULL);
  SAME_INT (map_size (map), 0);
  CHECK (map_find (map, "feed", 4) == NULL);
  map_put (map, "feed", 4, &numbers[3]);
  CHECK (map_find (map, "feed", 4) == &numbers[3]);
  map_destroy (map);
}

/* Names that come and go, with a plain array beside the map saying what must be there.  */
static void
names_come_and_go (void)
{
  enum { NAMES = 300, STEPS = 50000 };
  struct map *map = map_create ();
  int *there[NAMES] = { NULL };
  unsigned seed = 5;
  size_t live = 0;
  int wrong = 0;
  char key[64];

  for (int step = 0; step < STEPS; step++) {
    int i;

    seed = seed * 1664525u + 1013904223u;
    i = (int) (seed >> 16) % NAMES;
    live -= there[i] != NULL;
    there[i] = (seed & 0x300) != 0 ? &numbers[step % MANY] : NULL;
    live += there[i] != NULL;
    map_put (map, key, key_of (i, key, sizeof key), there[i]);
    i = (int) (seed >> 7) % NAMES;
    wrong += map_find (map, key, key_of (i, key, sizeof key)) != there[i];
    wrong += map_size (map) != live;
  }
  SAME_INT (wrong, 0);
  map_destroy (map);
}

struct visits { char order[128]; int *last; };

static void
visit (const char *key, void *value, void *with)
{
  struct visits *visits = with;

  strcat (strcat (visits->order, key), " ");
  visits->last = value;
}

static void
visits_in_the_order_of_coming (void)
{
  static const char *const names[] = { "raw", "feed", "mix", "purge", "tail" };
  struct map *map = map_create ();
  struct visits visits = { "", NULL };

  for (int i = 0; i < 5; i++)
    map_put (map, names[i], strlen (names[i]), &numbers[i]);
  map_put (map, "raw", 3, &numbers[9]);
  map_put (map, "mix", 3, NULL);
  map_put (map, "feed", 4, NULL);
  map_put (map, "feed", 4, &numbers[7]);
  map_each (map, visit, &visits);
  SAME_TEXT (visits.order, "raw purge tail feed ");
  CHECK (visits.last == &numbers[7]);
  map_destroy (map);
}

static void
growing_keeps_the_order (void)
{
  struct map *map = map_create ();
  struct visits visits = { "", NULL };
  char key[64];

  for (int i = 0; i < 1000; i++)
    map_put (map, key, key_of (i, key, sizeof key), &numbers[i]);
  for (int i = 0; i < 1000; i++)
    if (i % 250 != 1)
      map_put (map, key, key_of (i, key, sizeof key), NULL);
  for (int i = 1000; i < 3000; i++) {
    map_put (map, key, key_of (i, key, sizeof key), &numbers[i]);
    map_put (map, key, key_of (i, key, sizeof key), NULL);
  }
  SAME_INT (map_size (map), 4);
  map_each (map, visit, &visits);
  SAME_TEXT (visits.order, "1 a rather long heading, no. 251 501 a rather long heading, no. 751 ");
  map_destroy (map);
}

static const struct test_case cases[] = {
  { "finds ten thousand", finds_ten_thousand },
  { "keys are copied with their length", keys_are_copied_with_their_length },
  { "an empty map finds nothing", an_empty_map_finds_nothing },
  { "puts replace and remove", puts_replace_and_remove },
  { "names come and go", names_come_and_go },
  { "visits in the order of coming", visits_in_the_order_of_coming },
  { "growing keeps the order", growing_keeps_the_order },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
