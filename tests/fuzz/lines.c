#include "config.h"
#include "fuzz/lines.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "language/session.h"
#include "language/tree.h"
#include "report/chart.h"
#include "report/note.h"
#include "report/report.h"
#include "result/chart.h"
#include "result/note.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/reader.h"
#include "support/text.h"

/* What the lines find defined: the session that the sample lines are written for.  */
static const char defined[] =
  "gas raw = CH4 58.2, CO2 39.1, N2 rest mol% dry\n"
  "gas lab = H2 41.20, CO 23.85, CO2 19.60, CH4 8.42, N2 6.30 mol%\n"
  "gas flue = N2 rest, CO2 11.9, O2 3.4, NO 180 ppm, SO2 <5 ppm vol% dry\n"
  "stream feed = 850 Nm3/h of raw at 38 degC, 25 mbar(g), saturated\n"
  "stream recycle = 120 kg/h of C3H8 at 15 degC, 2 bar(g)\n"
  "stream mix = feed + recycle\n"
  "stream purge = 5 % of mix\n"
  "let q = 850 Nm3/h\n"
  "let x = 3.1 mol%\n"
  "reference vendor = 68 degF, 14.7 psia, 36 %RH\n";

struct run {
  struct session *session;
  struct arena *arena;
  const char *text;                     /* for what is printed before the end */
  size_t n;
  struct arena *kept;                   /* of names */
  const char *names;                    /* what `list` and `set` say */
};

static void
broken (const struct run *run, const char *what)
{
  fprintf (stderr, "%s, after:\n", what);
  fwrite (run->text, 1, run->n, stderr);
  fputc ('\n', stderr);
  abort ();
}

static void
look_at_output (const struct run *run, const struct text *out)
{
  static const char *const never[] = { ":nan", ":-nan", ":inf", ":-inf", ",nan", ",inf", "[nan",
                                       "[inf", " nan ", " inf ", "(null)" };
  if (!out->bytes)
    return;
  if (utf8_first_bad (out->bytes, out->length) != out->length)
    broken (run, "printed what is not UTF-8");
  /* What was typed may be quoted.  */
  for (size_t i = 0; i < sizeof never / sizeof never[0]; i++)
    if (strstr (out->bytes, never[i])
        && !memmem (run->text, run->n, never[i] + 1, strlen (never[i]) - 1))
      broken (run, never[i]);
}

/* Notes and pictures, as the shell would have them written.  */
static void
look_at_files (const struct run *run, const struct result *result)
{
  const struct note_about about = { "2026-12-01", "gaswright" };
  struct text out;
  text_init (&out);
  for (const struct note *note = result->note; note; note = note->next) {
    for (int form = NOTE_MARKDOWN; form <= NOTE_HTML; form++) {
      text_empty (&out);
      note_write (&out, (enum note_form) form, note, &about);
      look_at_output (run, &out);
    }
  }
  for (const struct picture *picture = result->picture; picture; picture = picture->next) {
    text_empty (&out);
    chart_write (&out, picture->chart);
    look_at_output (run, &out);
  }
  text_clear (&out);
}

/* The width of the page follows from the text, so that every width comes up.  */
static void
look_at_result (const struct run *run, const struct result *result)
{
  const struct report_style style = { .digits = 6, .width = run->n % 128 };
  struct text out;
  look_at_files (run, result);
  text_init (&out);
  for (int form = 0; form < REPORT_FORMATS; form++) {
    text_empty (&out);
    report_result (&out, (enum report_format) form, &style, result, true);
    look_at_output (run, &out);
  }
  text_clear (&out);
}

/* Is the place in one of the lines, or right behind one?  */
static bool
is_inside (const char *line, size_t n, int first, struct place at)
{
  for (; first < at.line; first++) {
    const char *end = memchr (line, '\n', n);
    if (!end)
      return false;
    n -= (size_t) (end + 1 - line);
    line = end + 1;
  }
  const char *end = memchr (line, '\n', n);
  size_t width = utf8_characters (line, end ? (size_t) (end - line) : n);
  return at.line == first && at.first >= 1 && at.last >= at.first
         && (size_t) at.first <= width + 1;
}

static void
look_at_fault (const struct run *run, const struct fault *fault, const char *line, size_t n,
               int first)
{
  const struct report_style style = { .digits = 6, .unicode = true };
  struct text out;
  if (fault->kind == MESSAGE_NONE)
    broken (run, "failed without saying why");
  /* A place in an earlier line of a block brings that line with it.  */
  if (!fault->quote && !is_inside (line, n, first, fault->at))
    broken (run, "a fault points outside its text");
  text_init (&out);
  for (int form = 0; form < REPORT_FORMATS; form++) {
    text_empty (&out);
    report_fault (&out, (enum report_format) form, &style, fault,
                  &(struct report_origin) { "-", "line", "statement", 0, true });
    look_at_output (run, &out);
  }
  text_clear (&out);
}

/* What `list` and `set` say.  */
static const char *
names_of (const struct run *run, struct arena *arena)
{
  static const char asked[] = "list; set";
  const struct report_style style = { .digits = 6 };
  struct parser *parser = parser_create (arena, session_vocabulary (run->session), asked,
                                         sizeof asked - 1, 1, BLOCK_NONE);
  struct statement *statement;
  struct fault fault;
  struct text out;
  text_init (&out);
  for (int i = 0; i < 2; i++) {
    struct result result;
    fault_init (&fault, arena);
    if (!parser_next (parser, &statement, &fault) || !statement)
      broken (run, "list and set are not read");
    result_init (&result, arena, statement->source);
    if (!session_run (run->session, statement, &result, &fault))
      broken (run, "list and set fail");
    report_result (&out, REPORT_JSON, &style, &result, false);
  }
  const char *names = arena_copy (arena, out.bytes, out.length);
  text_clear (&out);
  return names;
}

static void
look_at_names (const struct run *run)
{
  struct arena *arena = arena_create ();
  if (strcmp (names_of (run, arena), run->names) != 0)
    broken (run, "a statement that failed changed something");
  arena_destroy (arena);
}

/* Would it write a file, or read another one than those of the demo?  */
static bool
uses_files (const struct statement *statement)
{
  switch ((int) statement->kind) {
  case STATEMENT_SAVE: case STATEMENT_OPEN: return true;
  case STATEMENT_NOTE: return false;         /* the shell writes it */
  default:
    return statement->text != NULL && !statement->picture
           && strcmp (statement->text, "digester.csv") != 0
           && strcmp (statement->text, "cleaned.csv") != 0;
  }
}

static void
keep_names (struct run *run)
{
  arena_reset (run->kept);
  run->names = names_of (run, run->kept);
}

/* Reads and runs one logical line.  */
static void
run_line (struct run *run, const char *line, size_t n, int first)
{
  struct statement *statement;
  struct parser *parser = parser_create (run->arena, session_vocabulary (run->session), line, n,
                                         first, session_block (run->session));
  enum { STATEMENTS_MOST = 1000 };
  for (int i = 0; i < STATEMENTS_MOST; i++) {
    struct fault fault;
    struct result result;
    fault_init (&fault, run->arena);
    bool done = parser_next (parser, &statement, &fault);
    if (done && !statement)
      break;
    if (done && uses_files (statement))
      continue;
    if (done) {
      result_init (&result, run->arena, statement->source);
      done = session_run (run->session, statement, &result, &fault);
    }
    if (done) {
      look_at_result (run, &result);
      if (statement->kind != STATEMENT_ASK)
        keep_names (run);
    } else {
      look_at_fault (run, &fault, line, n, first);
      look_at_names (run);
    }
  }
}

static void
run_lines (struct run *run, const char *text, size_t n)
{
  struct reader_string source = { text, n, 0 };
  struct reader reader = reader_of_string (&source, "-");
  struct text line;
  int first;
  text_init (&line);
  while (reader_next (&reader, &line, &first)) {
    arena_reset (run->arena);
    run_line (run, line.bytes ? line.bytes : "", line.length, first);
  }
  text_clear (&line);
}

/* Runs STATEMENT, which must go well.  */
static void
must_run (const struct run *run, struct session *session, const char *statement)
{
  struct arena *arena = arena_create ();
  struct parser *parser = parser_create (arena, session_vocabulary (session), statement,
                                         strlen (statement), 1, BLOCK_NONE);
  struct statement *parsed;
  struct result result;
  struct fault fault;
  fault_init (&fault, arena);
  if (!parser_next (parser, &parsed, &fault) || !parsed)
    broken (run, "save and open are not read");
  result_init (&result, arena, statement);
  if (!session_run (session, parsed, &result, &fault))
    broken (run, "what was saved cannot be opened");
  arena_destroy (arena);
}

static char *
file_text (const char *name)
{
  struct text text;
  FILE *file = fopen (name, "r");
  text_init (&text);
  for (int c; file && (c = getc (file)) != EOF;)
    text_add_char (&text, (char) c);
  if (file)
    fclose (file);
  return text.bytes;
}

/* Saved, opened and saved again a session gives the same bytes.  */
static void
look_at_saved (const struct run *run)
{
  const struct session_options options = { 0 };
  struct arena *arena = arena_create ();
  struct fault fault;
  fault_init (&fault, arena);
  struct session *again = session_create (&options, &fault);
  must_run (run, run->session, "save \"first.gw\"");
  must_run (run, again, "open \"first.gw\"");
  must_run (run, again, "save \"second.gw\"");
  char *first = file_text ("first.gw"), *second = file_text ("second.gw");
  if (!first || !second || strcmp (first, second) != 0)
    broken (run, "what was saved, opened and saved is another session");
  free (first);
  free (second);
  session_destroy (again);
  arena_destroy (arena);
}

void
fuzz_lines (const char *text, size_t n, bool saved)
{
  const struct session_options options = { 0 };
  struct fault fault;
  struct run run = { .arena = arena_create (), .kept = arena_create (), .text = text, .n = n };
  fault_init (&fault, run.arena);
  run.session = session_create (&options, &fault);
  if (!run.session)
    broken (&run, "no session");
  keep_names (&run);
  run_lines (&run, defined, sizeof defined - 1);
  run_lines (&run, text, n);
  if (saved && session_block (run.session) == BLOCK_NONE)
    look_at_saved (&run);
  session_destroy (run.session);
  arena_destroy (run.arena);
  arena_destroy (run.kept);
}
