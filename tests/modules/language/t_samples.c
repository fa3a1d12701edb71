/* Every line of the language's samples reads as they say, or fails where and as they say.  */
#include "config.h"
#include <stdlib.h>
#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/message.h"
#include "support/text.h"
#include "units/unit.h"
#include "gas/species.h"
#include "language/parse.h"
#include "language/tree.h"
#include "modules/language/tree_print.h"

enum { ID, GROUP, CONTEXT, LINE, PARSES, ERROR, COLUMN, READING, HINT, CELLS };

/* Made anew for the one case: test_each_row hands nothing through.  */
static struct vocabulary words;
static struct arena *arena;
static size_t good, bad;

static enum block
block_of (const char *context)
{
  return strcmp (context, "balance") == 0 ? BLOCK_BALANCE
         : strcmp (context, "sheet") == 0 ? BLOCK_SHEET : BLOCK_NONE;
}

/* Reads LINE; what it says goes to OUT as long as it is good.  */
static bool
read_line (const char *line, enum block block, struct text *out, struct fault *fault)
{
  struct parser *p = parser_create (arena, &words, line, strlen (line), 1, block);
  struct statement *statement;
  fault_init (fault, arena);
  while (parser_next (p, &statement, fault)) {
    if (statement == NULL)
      return true;
    if (out->length > 0)
      text_add_char (out, ' ');
    tree_print (out, statement);
  }
  return false;
}

/* The way on as a user reads it.  */
static void
write_way_on (struct text *out, const struct fault *fault)
{
  if (fault->hint != NULL)
    text_add (out, fault->hint);
  else
    message_write (out, message_way_on (fault->kind), fault->fact);
}

/* The spelling a hint offers: did you mean 'X'?  Null if it offers none.  */
static char *
offered (const char *hint)
{
  static const char opening[] = "did you mean '";
  const char *start = strstr (hint, opening), *end;
  if (start == NULL)
    return NULL;
  start += sizeof opening - 1;
  end = strchr (start, '\'');
  return end != NULL ? strndup (start, (size_t) (end - start)) : NULL;
}

static void
check_fault (char *cells[], const struct fault *fault)
{
  struct text way_on;
  SAME_TEXT (message_name (fault->kind), cells[ERROR]);
  SAME_INT (fault->at.line, 1);
  SAME_INT (fault->at.first, atoi (cells[COLUMN]));
  text_init (&way_on);
  write_way_on (&way_on, fault);
  char *offer = offered (cells[HINT]);
  if (offer != NULL) {
    CHECK (way_on.length > 0 && strstr (way_on.bytes, offer) != NULL);
    if (way_on.length == 0 || strstr (way_on.bytes, offer) == NULL)
      SAME_TEXT (way_on.bytes, offer);
  }
  free (offer);
  text_clear (&way_on);
}

static void
check_sample (char *cells[])
{
  struct text out;
  struct fault fault;
  text_init (&out);
  test_about ("%s: %s", cells[ID], cells[LINE]);
  bool read = read_line (cells[LINE], block_of (cells[CONTEXT]), &out, &fault);
  if (strcmp (cells[PARSES], "yes") == 0) {
    good++;
    CHECK (read);
    if (read)
      SAME_TEXT (out.length > 0 ? out.bytes : "", cells[READING]);
    else
      SAME_TEXT (message_name (fault.kind), "no fault");
  }
  else {
    bad++;
    CHECK (!read);
    if (!read)
      check_fault (cells, &fault);
    else
      SAME_TEXT (out.bytes, cells[ERROR]);
  }
  text_clear (&out);
  arena_reset (arena);
}

static void
samples_read_as_they_say (void)
{
  struct fault fault;
  arena = arena_create ();
  fault_init (&fault, arena);
  words.units = unit_table_create (NULL, &fault);
  words.species = species_table_create (NULL, &fault);
  NEED (words.units != NULL && words.species != NULL);
  SAME_INT (test_each_row ("numbers/language_samples.tsv", CELLS, check_sample), 655);
  SAME_INT (good, 440);           /* 373 good lines, 45 that are refused later */
  SAME_INT (bad, 215);
  unit_table_destroy (words.units);
  species_table_destroy (words.species);
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "samples read as they say", samples_read_as_they_say },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
