#include "config.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>
#include "fixture.h"
#include "libtest.h"
#include "units/unit_table.h"

static struct fixture fixture;

/* A word read as a prefixed one must have no other meaning in the table.  */
static void
visit (const char *word, const struct unit_entry *entry, bool prefixed, void *with)
{
  size_t *count = with;
  struct unit_word found;

  test_about ("%s", word);
  CHECK (unit_word_find (fixture.table, word, strlen (word), &found));
  CHECK (found.entry == entry);
  SAME_INT (found.prefix.over != found.prefix.under, prefixed);
  ++*count;
}

static void
words_have_one_meaning (void)
{
  size_t count = 0;

  fixture_open (&fixture, NULL);
  unit_word_each (fixture.table, visit, &count);
  CHECK (count > 300);
  fixture_close (&fixture);
}

/* No unit is called `in` or `at`, and none like a word of the language in its place.  */
static void
words_that_are_none (void)
{
  static const char *const words[] = {
    "in", "at", "of", "dry", "wet", "real", "ideal", "gross", "net", "and", "as", "with", "to",
  };

  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++) {
    test_about ("%s", words[i]);
    CHECK (fixture_find (&fixture, words[i]) == NULL);
  }
  fixture_close (&fixture);
}

/* Mistaken words of the table read as nothing, or they would never be asked about.  */
static void
mistakes_are_no_units (void)
{
  fixture_open (&fixture, NULL);
  for (size_t i = 0; i < fixture.table->entry_count; i++) {
    const char *list = fixture.table->entries[i].mistaken, *piece;
    size_t length;
    while (unit_next_piece (&list, '|', &piece, &length)) {
      struct unit_word word;
      test_about ("%.*s", (int) length, piece);
      CHECK (!unit_word_find (fixture.table, piece, length, &word));
    }
  }
  fixture_close (&fixture);
}

static void
rows_by_spelling (void)
{
  struct unit_row row;

  fixture_open (&fixture, NULL);
  CHECK (unit_row_find (fixture.table, "psi", &row));
  SAME_TEXT (row.factor, "0.45359237*9.80665/0.0254^2");
  SAME_TEXT (row.quantity, "pressure");
  CHECK (unit_row_find (fixture.table, "SCFM", &row));
  SAME_TEXT (row.spelling, "scfm");
  CHECK (unit_row_find (fixture.table, "mbar", &row));
  SAME_TEXT (row.spelling, "bar");
  CHECK (!unit_row_find (fixture.table, "cfm", &row));
  CHECK (!unit_row_find (fixture.table, "kg/m3", &row));
  fixture_close (&fixture);
}

static const char bad_factor[] = "factor_SI is not made of decimals, '*', '/' and '^'";
static char directory[] = "units-XXXXXX";
static char path[64];

/* Writes a user's table of one row, opens it, and removes the file again.  */
static bool
open_users (const char *row)
{
  static const char heading[] =
    "spelling\taliases\tquantity\tname\tfactor_SI\toffset_K\tmarks\tprefixes\tsource\n";

  strcpy (directory, "units-XXXXXX");
  if (mkdtemp (directory) == NULL)
    return false;
  snprintf (path, sizeof path, "%s/units.tsv", directory);
  FILE *file = fopen (path, "w");
  if (file == NULL)
    return false;
  fprintf (file, "%s%s\n", heading, row);
  fclose (file);
  fixture_open (&fixture, directory);
  remove (path);
  rmdir (directory);
  return true;
}

static void
users_rows_add (void)
{
  NEED (open_users ("drum\tdrums\tvolume\toil drum\t0.2\t\t\tk\tstores"));
  NEED (fixture.table != NULL);
  const struct unit *drum = fixture_find (&fixture, "drum");
  NEED (drum != NULL);
  NEAR (drum->factor, 0.2, 0);
  NEAR (fixture_find (&fixture, "kdrums/h")->factor, 200.0 / 3600, 1e-15);
  size_t last = unit_table_rows (fixture.table) - 1;
  SAME_TEXT (unit_table_row (fixture.table, last).spelling, "drum");
  CHECK (unit_table_row (fixture.table, last).users);
  fixture_close (&fixture);
}

/* A replaced row goes with its aliases.  */
static void
users_rows_replace (void)
{
  fixture_open (&fixture, NULL);
  size_t before = unit_table_rows (fixture.table);
  fixture_close (&fixture);
  NEED (open_users ("Btu\t\tenergy\tour Btu\t1055\t\t\tk\tstores"));
  NEED (fixture.table != NULL);
  NEAR (fixture_find (&fixture, "Btu")->factor, 1055, 0);
  CHECK (fixture_find (&fixture, "BTU") == NULL);
  SAME_INT (unit_table_rows (fixture.table), before);
  NEAR (fixture_find (&fixture, "Btu(IT)")->factor, 1055.05585262, 1e-15);
  fixture_close (&fixture);
}

static void
bad_users_rows (void)
{
  static const struct { const char *row, *what; } rows[] = {
    { "drum\t\tbeauty\tx\t1\t\t\t\tstores", "no such quantity" },
    { "drum\t\tvolume\tx\t0,2\t\t\t\tstores", bad_factor },
    { "drum\t\tvolume\tx\t\t\t\t\tstores", bad_factor },
    { "drum\t\tvolume\tx\t0\t\t\t\tstores", "factor_SI is zero or too large" },
    { "drum\t\tvolume\tx\t1/0\t\t\t\tstores", "factor_SI is zero or too large" },
    { "drum\t\tvolume\tx\t1e300*1e300\t\t\t\tstores", "factor_SI is zero or too large" },
    { "drum\t\tvolume\tx\t1\t5\t\t\tstores",
      "offset_K belongs to a temperature and is made of decimals" },
    { "degX\t\ttemperature\tx\t1\tcold\tpoint\t\tstores",
      "offset_K belongs to a temperature and is made of decimals" },
    { "drum\t\tvolume\tx\t1\t\tpretty\t\tstores", "a mark that does not exist" },
    { "drum\t\tvolume\tx\t1\t\t\tz\tstores", "a prefix that does not exist" },
    { "drum\tdrum\tvolume\tx\t1\t\t\t\tstores", "a word that another row has" },
    { "drum\t\tvolume\tx\t1\t\tgauge\t\tstores", "only a pressure has gauge forms" },
    { "drum\t\tvolume\tx\t1\t\tpoint\t\tstores", "only a temperature has points" },
    { "drum\t\tvolume\tx\t1\t\tmole\t\tstores", "only a share is a share of something" },
    { "drum\t\tmass\tx\t1\t\tnormal\t\tstores", "only a volume is counted at conditions" },
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    test_about ("%s", rows[i].row);
    NEED (open_users (rows[i].row));
    CHECK (fixture.table == NULL);
    SAME_INT (fixture.fault.kind, MESSAGE_TABLE_ROW);
    SAME_TEXT (fixture.fault.fact[0], path);
    SAME_TEXT (fixture.fault.fact[1], "2");
    SAME_TEXT (fixture.fault.fact[2], rows[i].what);
    fixture_close (&fixture);
  }
}

static const struct test_case cases[] = {
  { "every word has one meaning", words_have_one_meaning },
  { "words of the language are no units", words_that_are_none },
  { "mistaken words are no units", mistakes_are_no_units },
  { "rows are found by spelling", rows_by_spelling },
  { "a user's row adds a unit", users_rows_add },
  { "a user's row replaces one with its aliases", users_rows_replace },
  { "bad rows are refused with file and line", bad_users_rows },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
