#include "config.h"
#include "support/table.h"

#include <errno.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

/* Tables of this suite's own: they stand in place of those made by the build.  */
static const char *const vents[] = {
  "name\0height_m\0gas\0source",
  "flare\0" "22.5\0biogas\0plant book 1",
  "stack\0\0flue gas\0plant book 2",
  "vent\0-1.5e-3\0\0plant book 3",
  "duct\0" "12 mm\0\0plant book 4",
  NULL
};
static const char *const no_rows[] = { "name\0source", NULL };

const struct table_text table_built_in[] = {
  { "vents", 4, vents },
  { "no_rows", 2, no_rows },
  { NULL, 0, NULL }
};

enum { BUILT_IN = 4 };                     /* rows of vents */
enum { NAME, HEIGHT, GAS, SOURCE };        /* and its columns */

/* A folder for a user's tables, and what a case reads with.  */
static struct desk { struct arena *arena; struct fault fault; char folder[32], file[48]; } desk;

static bool
set_up (void)
{
  desk.arena = arena_create ();
  fault_init (&desk.fault, desk.arena);
  strcpy (desk.folder, "t_table.XXXXXX");
  if (!CHECK (mkdtemp (desk.folder) != NULL))
    return false;
  snprintf (desk.file, sizeof desk.file, "%s/vents.tsv", desk.folder);
  return true;
}

static void
clear_up (void)
{
  remove (desk.file);
  rmdir (desk.folder);
  arena_destroy (desk.arena);
}

static struct table *
read_with (const char *bytes, size_t n)
{
  FILE *file = fopen (desk.file, "wb");

  fault_init (&desk.fault, desk.arena);
  if (!CHECK (file != NULL))
    return NULL;
  CHECK (fwrite (bytes, 1, n, file) == n);
  CHECK (fclose (file) == 0);
  return table_read (desk.arena, "vents", desk.folder, &desk.fault);
}

static void
the_built_in_rows (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct table *table;
  double value = 0;

  fault_init (&fault, arena);
  table = table_read (arena, "vents", NULL, &fault);
  NEED (table != NULL);
  SAME_INT (table_rows (table), BUILT_IN);
  SAME_INT (table_column (table, "name"), 0);
  SAME_INT (table_column (table, "source"), 3);
  SAME_INT (table_column (table, "height"), -1);
  SAME_TEXT (table_cell (table, 1, 0), "stack");
  SAME_TEXT (table_cell (table, 1, 1), "");
  SAME_TEXT (table_cell (table, 1, 2), "flue gas");
  SAME_TEXT (table_cell (table, 2, 3), "plant book 3");
  SAME_TEXT (table_cell (table, 2, -1), "");
  CHECK (!table_row_is_users (table, 2));
  CHECK (table_number (table, 0, 1, &value, &fault));
  NEAR (value, 22.5, 0);
  CHECK (table_number (table, 2, 1, &value, &fault));
  NEAR (value, -1.5e-3, 0);
  CHECK (table_number (table, 1, 1, &value, &fault));
  CHECK (isnan (value));
  CHECK (table_number (table, 0, -1, &value, &fault));
  CHECK (isnan (value));
  SAME_INT (fault.kind, MESSAGE_NONE);
  table = table_read (arena, "no_rows", NULL, &fault);
  NEED (table != NULL);
  SAME_INT (table_rows (table), 0);
  arena_destroy (arena);
}

static void
names_of_tables (void)
{
  CHECK (table_text_find ("vents") == &table_built_in[0]);
  CHECK (table_text_find ("no_rows") == &table_built_in[1]);
  CHECK (table_text_find ("vent") == NULL);
  CHECK (table_text_find ("") == NULL);
}

/* The program's own rows have no line to be found at: they are told by their key.  */
static void
a_built_in_number_that_fails (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct table *table;
  double value = 7;

  fault_init (&fault, arena);
  table = table_read (arena, "vents", NULL, &fault);
  NEED (table != NULL);
  CHECK (!table_number (table, 3, 1, &value, &fault));
  NEAR (value, 7, 0);
  SAME_INT (fault.kind, MESSAGE_TABLE_ROW);
  SAME_TEXT (fault.fact[0], "vents.tsv");
  SAME_TEXT (fault.fact[1], "duct");
  SAME_TEXT (fault.fact[2], "'12 mm' in column height_m is no number");
  arena_destroy (arena);
}

/* Cells asked for in any order, from a fixed seed.  */
static void
cells_in_any_order (void)
{
  static const char *const want[BUILT_IN][4] = {
    { "flare", "22.5", "biogas", "plant book 1" }, { "stack", "", "flue gas", "plant book 2" },
    { "vent", "-1.5e-3", "", "plant book 3" }, { "duct", "12 mm", "", "plant book 4" },
  };
  struct arena *arena = arena_create ();
  struct fault fault;
  struct table *table;
  unsigned seed = 3;
  int wrong = 0;

  fault_init (&fault, arena);
  table = table_read (arena, "vents", NULL, &fault);
  NEED (table != NULL);
  for (int i = 0; i < 1000; i++) {
    size_t row, column;

    seed = seed * 1664525u + 1013904223u;
    row = seed >> 20 & 3;
    column = seed >> 10 & 3;
    wrong += strcmp (table_cell (table, row, (int) column), want[row][column]) != 0;
  }
  SAME_INT (wrong, 0);
  arena_destroy (arena);
}

static void
numbers_that_fail (void)
{
  static const char file[] = "name\theight_m\tsource\n# remark\na\t12 \tx\nb\t1,5\tx\nc\t1e999\tx\n"
                             "d\t+1\tx\ne\t--1\tx\nf\tnan\tx\ng\t-\tx\n";
  struct table *table;

  if (!set_up ())
    return;
  table = read_with (file, sizeof file - 1);
  if (CHECK (table != NULL)) {
    SAME_INT (table_rows (table), BUILT_IN + 7);
    for (size_t i = 0; i < 7; i++) {
      double value = 7;

      fault_init (&desk.fault, desk.arena);
      CHECK (!table_number (table, BUILT_IN + i, 1, &value, &desk.fault));
      NEAR (value, 7, 0);
      SAME_INT (desk.fault.kind, MESSAGE_TABLE_ROW);
      SAME_TEXT (desk.fault.fact[0], desk.file);
      SAME_TEXT (desk.fault.fact[1], arena_format (desk.arena, "%zu", i + 3));
    }
    fault_init (&desk.fault, desk.arena);
    CHECK (!table_number (table, BUILT_IN + 2, 1, &(double) { 0 }, &desk.fault));
    SAME_TEXT (desk.fault.fact[2], "'1e999' in column height_m is too large a number");
    fault_init (&desk.fault, desk.arena);
    CHECK (!table_number (table, BUILT_IN + 1, 1, &(double) { 0 }, &desk.fault));
    SAME_TEXT (desk.fault.fact[2], "'1,5' in column height_m is no number");
  }
  clear_up ();
}

/* Columns in another order, some left out, CRLF, a byte-order mark, remarks, an empty line, no end
   behind the last line.                                                                        */
static void
users_rows_stand_behind (void)
{
  static const char file[] = "\xEF\xBB\xBF# mine\r\nname\tgas\theight_m\tsource\r\n\r\n"
                             "flare\tbiogas\t30\tmy survey\r\n# more\r\nduct\t\t4\tmy survey";
  struct table *table;
  double value = 0;

  if (!set_up ())
    return;
  table = read_with (file, sizeof file - 1);
  if (CHECK (table != NULL)) {
    SAME_INT (table_rows (table), BUILT_IN + 2);
    SAME_TEXT (table_cell (table, BUILT_IN, NAME), "flare");
    SAME_TEXT (table_cell (table, BUILT_IN, GAS), "biogas");
    SAME_TEXT (table_cell (table, BUILT_IN + 1, GAS), "");
    SAME_TEXT (table_cell (table, BUILT_IN + 1, SOURCE), "my survey");
    CHECK (table_number (table, BUILT_IN + 1, HEIGHT, &value, &desk.fault));
    NEAR (value, 4, 0);
    CHECK (!table_row_is_users (table, BUILT_IN - 1));
    CHECK (table_row_is_users (table, BUILT_IN));
    CHECK (!table_complain (table, BUILT_IN + 1, "too low", &desk.fault));
    SAME_TEXT (desk.fault.fact[0], desk.file);
    SAME_TEXT (desk.fault.fact[1], "6");
    SAME_TEXT (desk.fault.fact[2], "too low");
  }
  table = read_with ("name\tsource\nduct\tmine\n", 22);
  if (CHECK (table != NULL)) {
    SAME_TEXT (table_cell (table, BUILT_IN, 1), "");
    SAME_TEXT (table_cell (table, BUILT_IN, 3), "mine");
  }
  clear_up ();
}

static void
fails_users (const char *bytes, size_t n, const char *line, const char *what)
{
  test_about ("%s", bytes);
  CHECK (read_with (bytes, n) == NULL);
  SAME_INT (desk.fault.kind, MESSAGE_TABLE_ROW);
  SAME_TEXT (desk.fault.fact[0], desk.file);
  SAME_TEXT (desk.fault.fact[1], line);
  SAME_TEXT (desk.fault.fact[2], what);
}

static void
users_rows_that_fail (void)
{
  static const struct { const char *bytes, *line, *what; } rows[] = {
    { "name\tsource\na\n", "2", "1 cells where the heading has 2" },
    { "name\tsource\n#\na\tb\tc\n", "3", "3 cells where the heading has 2" },
    { "name\tsource\na\tb\nb\t\n", "3", "no source" },
    { "name\tsource\r\na\t  \r\n", "2", "no source" },
    { "name\tsource\n\tb\n", "2", "no key in the first column" },
    { "#\n\nname\tcolour\tsource\n", "3", "the table vents has no column 'colour'" },
    { "name\tgas\tgas\tsource\n", "1", "the table vents has two columns 'gas'" },
    { "gas\tname\tsource\n", "1", "the first column is not 'name'" },
    { "name\tsource\tgas\n", "1", "the last column is not 'source'" },
    { "# nothing\n", "1", "no line names the columns" },
    { "", "0", "no line names the columns" },
    { "name\tsource\na\t\xE9\n", "2", "this is not UTF-8 text" },
  };

  if (!set_up ())
    return;
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++)
    fails_users (rows[i].bytes, strlen (rows[i].bytes), rows[i].line, rows[i].what);
  fails_users ("name\tsource\na\0b\tc\n", 18, "2", "this is not UTF-8 text");
  clear_up ();
}

static void
a_file_may_be_absent_but_not_unreadable (void)
{
  struct table *table;

  if (!set_up ())
    return;
  table = table_read (desk.arena, "vents", desk.folder, &desk.fault);
  if (CHECK (table != NULL))
    SAME_INT (table_rows (table), BUILT_IN);
  SAME_INT (desk.fault.kind, MESSAGE_NONE);
  CHECK (mkdir (desk.file, 0700) == 0);
  CHECK (table_read (desk.arena, "vents", desk.folder, &desk.fault) == NULL);
  SAME_INT (desk.fault.kind, MESSAGE_FILE);
  SAME_TEXT (desk.fault.fact[0], desk.file);
  SAME_TEXT (desk.fault.fact[1], strerror (EISDIR));
  clear_up ();
}

static void
many_rows (void)
{
  enum { ROWS = 20000 };
  struct text file;
  struct table *table;
  int wrong = 0;

  if (!set_up ())
    return;
  text_init (&file);
  text_add (&file, "name\theight_m\tsource\n");
  for (int i = 0; i < ROWS; i++)
    text_add_format (&file, "v%d\t%d.5\tlist\n", i, i);
  table = read_with (file.bytes, file.length);
  if (CHECK (table != NULL)) {
    SAME_INT (table_rows (table), ROWS + BUILT_IN);
    for (size_t i = 0; i < ROWS; i++) {
      double value = 0;

      wrong += !table_number (table, i + BUILT_IN, 1, &value, &desk.fault)
               || fabs (value - ((double) i + 0.5)) > 0;
    }
    SAME_INT (wrong, 0);
  }
  text_clear (&file);
  clear_up ();
}

static const struct test_case cases[] = {
  { "the built-in rows", the_built_in_rows },
  { "names of tables", names_of_tables },
  { "a built-in number that fails", a_built_in_number_that_fails },
  { "cells in any order", cells_in_any_order },
  { "numbers that fail", numbers_that_fail },
  { "users' rows stand behind", users_rows_stand_behind },
  { "users' rows that fail", users_rows_that_fail },
  { "a file may be absent but not unreadable", a_file_may_be_absent_but_not_unreadable },
  { "many rows", many_rows },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
