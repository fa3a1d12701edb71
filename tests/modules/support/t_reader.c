#include "config.h"
#include "support/reader.h"

#include <stdlib.h>
#include <string.h>
#include "libtest.h"
#include "support/text.h"

/* Reads BYTES to the end; the logical lines come out each as "first:text|".  */
static void
reads_bytes (const char *bytes, size_t n, const char *want)
{
  struct reader_string string = { bytes, n, 0 };
  struct reader reader = reader_of_string (&string, "here");
  struct text line, all;
  int first;

  text_init (&line);
  text_init (&all);
  text_add (&all, "");
  while (reader_next (&reader, &line, &first)) {
    text_add_format (&all, "%d:", first);
    text_add_bytes (&all, line.bytes, line.length);
    text_add (&all, "|");
  }
  test_about ("%s", bytes);
  SAME_TEXT (all.bytes, want);
  CHECK (!reader_next (&reader, &line, &first));
  text_clear (&line);
  text_clear (&all);
}

static void
reads (const char *bytes, const char *want)
{
  reads_bytes (bytes, strlen (bytes), want);
}

static void
physical_lines (void)
{
  reads ("", "");
  reads ("a", "1:a|");
  reads ("a\n", "1:a|");
  reads ("a\nb", "1:a|2:b|");
  reads ("\n\nb\n", "1:|2:|3:b|");
  reads ("a\r\nb\r\n", "1:a|2:b|");
  reads ("\r\n", "1:|");
  reads ("a\rb\n", "1:a\rb|");
}

static void
a_byte_order_mark_is_skipped (void)
{
  reads ("\xEF\xBB\xBFgas\n\xEF\xBB\xBFgas\n", "1:gas|2:\xEF\xBB\xBFgas|");
  reads ("\xEF\xBB\xBF", "1:|");
  reads ("\xEF\xBB", "1:\xEF\xBB|");
}

/* The blank in place of the backslash keeps the columns of what stands behind it.  */
static void
a_backslash_goes_on (void)
{
  reads ("850 Nm3/h \\\nof raw\nb", "1:850 Nm3/h  \nof raw|3:b|");
  reads ("a\\\n\\\nb\n", "1:a \n \nb|");
  reads ("a \\  \t\nb\n", "1:a    \t\nb|");
  reads ("a \\\r\nb\r\n", "1:a  \nb|");
  reads ("a \\ # why\nb\n", "1:a   # why\nb|");
  reads ("a \\ b\nc\n", "1:a \\ b|2:c|");
  reads ("a \\", "1:a  |");
  reads ("# a \\\nb\n", "1:# a \\|2:b|");
  reads ("\"a \\\nb\n", "1:\"a \\|2:b|");
  reads ("\"a\" \\\nb\n", "1:\"a\"  \nb|");
}

static void
a_comma_goes_on (void)
{
  reads ("CH4 60,\nCO2 40\nb", "1:CH4 60,\nCO2 40|3:b|");
  reads ("a,  \n b,\t\nc", "1:a,  \n b,\t\nc|");
  reads ("a, # remark\nb\n", "1:a, # remark\nb|");
  reads ("a # remark,\nb\n", "1:a # remark,|2:b|");
  reads ("\"a#\", # remark\nb\n", "1:\"a#\", # remark\nb|");
  reads ("from \"a, # b,\nc\n", "1:from \"a, # b,|2:c|");
  reads ("# \" a\nb,\nc\n", "1:# \" a|2:b,\nc|");
  reads ("a,\r\nb\r\n", "1:a,\nb|");
  reads ("a,", "1:a,|");
  reads ("a; b,\nc", "1:a; b,\nc|");
}

/* A remark of its own does not end a list; a line of blanks does, so that somebody at a prompt
   gets out of a line left open.                                                                */
static void
remarks_and_blanks_between (void)
{
  reads ("a,\n# remark\nb\nc", "1:a,\n# remark\nb|4:c|");
  reads ("a \\\n  # remark \\\nb\nc", "1:a  \n  # remark \\\nb|4:c|");
  reads ("a,\n\nb\n", "1:a,\n|3:b|");
  reads ("a \\\n  \t\nb\n", "1:a  \n  \t|3:b|");
  reads ("# remark\na,\nb\n", "1:# remark|2:a,\nb|");
}

/* What the answer to "does it go on" is for lines already joined.  */
static void
nothing_to_read (void)
{
  struct reader_string string = { NULL, 0, 0 };
  struct reader reader = reader_of_string (&string, "here");
  struct text line;
  int first;

  text_init (&line);
  CHECK (!reader_next (&reader, &line, &first));
  SAME_INT (reader.line, 0);
  SAME_TEXT (reader.name, "here");
  text_clear (&line);
}

static void
null_bytes_stay_in_the_text (void)
{
  static const char bytes[] = "a\0b,\nc\0\n\0";
  struct reader_string string = { bytes, sizeof bytes - 1, 0 };
  struct reader reader = reader_of_string (&string, "here");
  struct text line;
  int first;

  text_init (&line);
  NEED (reader_next (&reader, &line, &first));
  SAME_INT (line.length, 7);
  CHECK (memcmp (line.bytes, "a\0b,\nc\0", 8) == 0);
  NEED (reader_next (&reader, &line, &first));
  SAME_INT (first, 3);
  SAME_INT (line.length, 1);
  CHECK (line.bytes[0] == '\0');
  CHECK (!reader_next (&reader, &line, &first));
  text_clear (&line);
}

static void
very_long_lines (void)
{
  enum { LENGTH = 1024 * 1024, LINES = 20000 };
  struct text source, line;
  struct reader_string string;
  struct reader reader;
  int first;

  text_init (&source);
  text_init (&line);
  text_add_repeated (&source, 'a', LENGTH);
  text_add (&source, "\n");
  for (int i = 0; i < LINES; i++)
    text_add (&source, i % 2 != 0 ? "part 1,\n" : "part 1 \\\n");
  string = (struct reader_string) { source.bytes, source.length, 0 };
  reader = reader_of_string (&string, "here");
  NEED (reader_next (&reader, &line, &first));
  SAME_INT (line.length, LENGTH);
  NEED (reader_next (&reader, &line, &first));
  SAME_INT (first, 2);
  SAME_INT (line.length, LINES / 2 * (strlen ("part 1,\n") + strlen ("part 1 \\\n")) - 1);
  SAME_INT (reader.line, LINES + 1);
  text_clear (&source);
  text_clear (&line);
}

/* A source like a terminal: it leaves line ends, replaces what is in the text, and is told whether
   a line is open.                                                                              */
struct terminal { const char *const *lines; char asked[16]; };

static bool
fetch_from_terminal (void *source, bool continues, struct text *text)
{
  struct terminal *terminal = source;

  strcat (terminal->asked, continues ? "+" : "-");
  if (*terminal->lines == NULL)
    return false;
  text_empty (text);
  text_add (text, *terminal->lines++);
  return true;
}

static void
a_source_knows_what_is_open (void)
{
  static const char *const lines[] = { "a,\n", "b \\\r\n", "c\n", "", "d,", NULL };
  struct terminal terminal = { lines, "" };
  struct reader reader = { "-", fetch_from_terminal, &terminal, 0 };
  struct text line;
  int first;

  text_init (&line);
  NEED (reader_next (&reader, &line, &first));
  SAME_TEXT (line.bytes, "a,\nb  \nc");
  NEED (reader_next (&reader, &line, &first));
  SAME_INT (line.length, 0);
  NEED (reader_next (&reader, &line, &first));
  SAME_TEXT (line.bytes, "d,");
  SAME_INT (first, 5);
  CHECK (!reader_next (&reader, &line, &first));
  SAME_TEXT (terminal.asked, "-++--+-");
  text_clear (&line);
}

static const struct test_case cases[] = {
  { "physical lines", physical_lines },
  { "a byte-order mark is skipped", a_byte_order_mark_is_skipped },
  { "a backslash goes on", a_backslash_goes_on },
  { "a comma goes on", a_comma_goes_on },
  { "remarks and blanks between", remarks_and_blanks_between },
  { "nothing to read", nothing_to_read },
  { "null bytes stay in the text", null_bytes_stay_in_the_text },
  { "very long lines", very_long_lines },
  { "a source knows what is open", a_source_knows_what_is_open },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
