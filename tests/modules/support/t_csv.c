#include "config.h"
#include "support/csv.h"

#include <stdlib.h>
#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

/* All rows of N bytes, cells as "[line:column text]", rows ended by "|".  */
static void
reads_bytes (const char *bytes, size_t n, char delimiter, const char *want)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct csv csv;
  struct csv_row row;
  struct text all;

  text_init (&all);
  text_add (&all, "");
  fault_init (&fault, arena);
  test_about ("%s", bytes);
  if (CHECK (csv_open (&csv, arena, "here", bytes, n, &fault))) {
    csv.remarks = true;
    csv.delimiter = delimiter;
    while (csv_next (&csv, arena, &row, &fault)) {
      for (size_t i = 0; i < row.count; i++)
        text_add_format (&all, "[%d:%d %.*s]", row.cells[i].line, row.cells[i].column,
                         (int) row.cells[i].length, row.cells[i].text);
      text_add_char (&all, '|');
    }
    SAME_TEXT (all.bytes, want);
    SAME_INT (fault.kind, MESSAGE_NONE);
  }
  text_clear (&all);
  arena_destroy (arena);
}

static void
reads (const char *bytes, const char *want)
{
  reads_bytes (bytes, strlen (bytes), ',', want);
}

/* The grammar of RFC 4180, section 2, rule by rule.  */
static void
rows_and_cells (void)
{
  reads ("", "");
  reads ("aaa,bbb\r\nccc,ddd\r\n", "[1:1 aaa][1:5 bbb]|[2:1 ccc][2:5 ddd]|");
  reads ("aaa,bbb\nccc,ddd", "[1:1 aaa][1:5 bbb]|[2:1 ccc][2:5 ddd]|");
  reads ("a, b ,c", "[1:1 a][1:3  b ][1:7 c]|");
  reads ("a,", "[1:1 a][1:3 ]|");
  reads (",", "[1:1 ][1:2 ]|");
  reads ("\n\na", "[1:1 ]|[2:1 ]|[3:1 a]|");
  reads_bytes ("a;b,c\td", 7, ';', "[1:1 a][1:3 b,c\td]|");
}

static void
quotes (void)
{
  reads ("\"aaa\",\"b\nbb\",\"ccc\"\nz", "[1:1 aaa][1:7 b\nbb][2:5 ccc]|[3:1 z]|");
  reads ("\"a,b\",c", "[1:1 a,b][1:7 c]|");
  reads ("\"b\"\"bb\",c", "[1:1 b\"bb][1:9 c]|");
  reads ("\"\"\"\",\"\"", "[1:1 \"][1:6 ]|");
  reads ("\"a\" ,b", "[1:1 a][1:6 b]|");
  reads ("\"a\r\nb\"\r\nc", "[1:1 a\r\nb]|[3:1 c]|");
}

static void
columns_count_characters (void)
{
  reads ("\xC2\xB5,x", "[1:1 \xC2\xB5][1:3 x]|");
  reads ("\xE2\x88\x92\xC2\xB0" "C,x", "[1:1 \xE2\x88\x92\xC2\xB0" "C][1:5 x]|");
}

static void
remarks_are_passed_over (void)
{
  reads ("# a\nb\n#c\nd#e,#f\n#", "[2:1 b]|[4:1 d#e][4:5 #f]|");
}

static void
encodings (void)
{
  reads ("\xEF\xBB\xBF" "a,b", "[1:1 a][1:3 b]|");
  /* Windows-1252: degree, per mille, euro.  WHATWG Encoding Standard, index windows-1252.  */
  reads ("\xB0,\x89,\x80", "[1:1 \xC2\xB0][1:3 \xE2\x80\xB0][1:5 \xE2\x82\xAC]|");
}

static void
fails (const char *bytes, size_t n, enum message kind, int line, int column)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct csv csv;
  struct csv_row row;

  fault_init (&fault, arena);
  test_about ("%s", bytes);
  if (csv_open (&csv, arena, "here", bytes, n, &fault))
    while (csv_next (&csv, arena, &row, &fault))
      continue;
  SAME_INT (fault.kind, kind);
  SAME_INT (fault.at.line, line);
  SAME_INT (fault.at.first, column);
  arena_destroy (arena);
}

static void
what_is_no_csv (void)
{
  fails ("\"a", 2, MESSAGE_CSV_QUOTE, 1, 1);
  fails ("a,b\n\"c\nd", 8, MESSAGE_CSV_QUOTE, 2, 1);
  fails ("\"a\"b", 4, MESSAGE_CSV_QUOTE, 1, 4);
  fails ("x,\"a\nb\"c", 8, MESSAGE_CSV_QUOTE, 2, 3);
  fails ("a\"b", 3, MESSAGE_CSV_QUOTE, 1, 2);
  fails ("\xC2\xB5,a\"", 5, MESSAGE_CSV_QUOTE, 1, 4);
  fails ("a\rb", 3, MESSAGE_CSV_QUOTE, 1, 2);
  fails ("\xFF\xFE" "a\0", 4, MESSAGE_CSV_ENCODING, 1, 1);
  fails ("a\nb\0", 4, MESSAGE_CSV_ENCODING, 2, 2);
  fails ("ab\n\x9D", 4, MESSAGE_CSV_ENCODING, 2, 1);
}

/* '?': none can be told.  */
static void
delimiter_is (const char *bytes, char want)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct csv csv;

  fault_init (&fault, arena);
  test_about ("%s", bytes);
  if (CHECK (csv_open (&csv, arena, "here", bytes, strlen (bytes), &fault))) {
    csv.remarks = true;
    bool found = csv_find_delimiter (&csv, &fault);
    SAME_INT (found ? csv.delimiter : '?', want);
    SAME_INT (fault.kind, want == '?' ? MESSAGE_CSV_DELIMITER : MESSAGE_NONE);
  }
  arena_destroy (arena);
}

static void
delimiters (void)
{
  delimiter_is ("a,b\nc,d\n", ',');
  delimiter_is ("a;b\nc;d\n", ';');
  delimiter_is ("a\tb\nc\td\n", '\t');
  delimiter_is ("a;1,5\nb;2,5\n", ';');
  delimiter_is ("a\t1,5\nb\t2,5\n", '\t');
  delimiter_is ("title, of it\na;1\nb;2\n", '?');
  delimiter_is ("a,b;c\nd,e\n", ',');
  delimiter_is ("\"a;b\",c\n\"d;e\",f\n", ',');
  delimiter_is ("# a;b;c\na,b\n", ',');
  delimiter_is ("\na;b\n\nc;d\n", ';');
  delimiter_is ("a;b,x\nc;d,y\n", '?');
  delimiter_is ("a\nb\n", '?');
}

static const struct test_case cases[] = {
  { "rows and cells", rows_and_cells },
  { "quotes", quotes },
  { "columns count characters", columns_count_characters },
  { "remarks are passed over", remarks_are_passed_over },
  { "encodings", encodings },
  { "what is no CSV", what_is_no_csv },
  { "delimiters", delimiters },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
