#include "config.h"
#include "support/table.h"

#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"

/* The tables that the program is built with.  */
static void
every_table_is_read (void)
{
  for (const struct table_text *text = table_built_in; text->name != NULL; text++) {
    struct arena *arena = arena_create ();
    struct fault fault;
    struct table *table;

    fault_init (&fault, arena);
    test_about ("%s", text->name);
    table = table_read (arena, text->name, NULL, &fault);
    SAME_TEXT (fault.fact[2], NULL);
    if (CHECK (table != NULL)) {
      int source = table_column (table, "source");

      CHECK (table_rows (table) > 0);
      SAME_INT (source, text->columns - 1);
      for (size_t row = 0; row < table_rows (table); row++) {
        CHECK (table_cell (table, row, source)[0] != '\0');
        CHECK (table_cell (table, row, 0)[0] != '\0');
      }
    }
    arena_destroy (arena);
  }
}

static void
the_messages_are_there (void)
{
  const struct table_text *text = table_text_find ("messages");

  NEED (text != NULL);
  SAME_INT (text->columns, 5);
  CHECK (memcmp (text->rows[0], "kind\0severity\0sentence\0way_on\0source", 37) == 0);
}

static const struct test_case cases[] = {
  { "every table is read", every_table_is_read },
  { "the messages are there", the_messages_are_there },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
