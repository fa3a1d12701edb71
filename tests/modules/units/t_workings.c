#include "config.h"

#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "units/workings.h"

static void
keeps_steps_in_order (void)
{
  struct arena *arena = arena_create ();
  struct workings workings;
  char name[] = "molar mass";

  workings_init (&workings, arena);
  SAME_INT (workings.count, 0);
  CHECK (workings.first == NULL);
  workings_add (&workings, name, "sum of x M", 27.45, "g/mol", "gas raw");
  strcpy (name, "changed");
  workings_add (&workings, "molar flow", "m / M", 10.5, "mol/s", NULL);
  SAME_INT (workings.count, 2);
  NEED (workings.first != NULL && workings.first->next == workings.last);
  SAME_TEXT (workings.first->name, "molar mass");
  SAME_TEXT (workings.first->formula, "sum of x M");
  SAME_TEXT (workings.first->unit, "g/mol");
  SAME_TEXT (workings.first->source, "gas raw");
  NEAR (workings.first->value, 27.45, 0);
  SAME_TEXT (workings.last->name, "molar flow");
  SAME_TEXT (workings.last->source, NULL);
  CHECK (workings.last->next == NULL);
  arena_destroy (arena);
}

static void
null_keeps_nothing (void)
{
  struct arena *arena = arena_create ();
  size_t before = arena_used (arena);

  workings_add (NULL, "molar mass", "sum of x M", 27.45, "g/mol", "gas raw");
  SAME_INT (arena_used (arena), before);
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "steps are copied and stay in order", keeps_steps_in_order },
  { "without a record nothing is kept", null_keeps_nothing },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
