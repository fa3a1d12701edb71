#include "config.h"
#include "language/commands/commands.h"

#include <errno.h>
#include <string.h>
#include <strings.h>
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/reader.h"
#include "support/text.h"

enum { OPEN_DEEPEST = 16 };       /* files that open files */

/* A fault in a file that is opened: at the statement that opens it, saying where in the file.  */
static bool
fault_inside (const struct statement *s, const struct fault *inside, struct fault *fault)
{
  fault_set_at (fault, inside->kind, s->text_at, inside->fact[0], inside->fact[1]);
  fault_facts (fault, inside->fact[2], inside->fact[3]);
  const size_t n = strlen (s->text);
  const bool table = n > 4 && strcasecmp (s->text + n - 4, ".csv") == 0;
  fault_hint (fault, "%s, line %d, column %d; nothing of it was kept%s%s%s", s->text,
              inside->at.line, inside->at.first,
              table ? "; a table of analyses is read with: gas lab from \"" : "",
              table ? s->text : "", table ? "\"" : "");
  return false;
}

static bool
run_line (struct session *session, const struct text *line, int first, struct result *result,
          struct fault *fault)
{
  struct parser *parser = parser_create (result->arena, &session->vocabulary, line->bytes,
                                         line->length, first, session_block (session));
  struct statement *statement;
  for (;;) {
    if (!parser_next (parser, &statement, fault)) {
      return false;
    }
    if (!statement) {
      return true;
    }
    if (!session_run (session, statement, result, fault)) {
      return false;
    }
  }
}

static bool
run_lines (struct session *session, const struct statement *s, const struct text *text,
           struct result *result, struct fault *fault)
{
  struct reader_string source = { text->bytes, text->length, 0 };
  struct reader reader = reader_of_string (&source, s->text);
  struct fault inside;
  struct text line;
  int first;
  bool done = true;
  fault_init (&inside, fault->arena);
  text_init (&line);
  while (done && reader_next (&reader, &line, &first)) {
    bool (*interrupted) (void) = session->options.interrupted;
    if (interrupted && interrupted ()) {
      done = fault_set_at (&inside, MESSAGE_INTERRUPTED, s->at, NULL, NULL);
      break;
    }
    /* The parser borrows the line: it must outlive this loop's buffer.  */
    struct text copy = { arena_copy (result->arena, line.bytes, line.length), line.length, 0 };
    done = run_line (session, &copy, first, result, &inside);
  }
  text_clear (&line);
  if (done && session_block (session) != BLOCK_NONE) {
    done = fault_set_at (&inside, MESSAGE_UNFINISHED, (struct place) { reader.line, 1, 1 },
                         "a block is closed with 'end'", NULL);
  }
  if (!done) {
    session_leave_block (session);        /* nothing of the file is kept, nor is it left open */
  }
  return done || fault_inside (s, &inside, fault);
}

bool
command_open (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  struct text text;
  if (!*s->text) {
    return fault_set_at (fault, MESSAGE_TEXT_EXPECTED, s->text_at, "a file has a name", NULL);
  }
  if (session->groups_open >= OPEN_DEEPEST) {
    return fault_set_at (fault, MESSAGE_FILE, s->text_at, s->text,
                         "files that open each other, too deep");
  }
  text_init (&text);
  if (!file_bytes (s->text, &text)) {
    text_clear (&text);
    return fault_set_at (fault, MESSAGE_FILE, s->text_at, s->text, file_reason (errno));
  }
  undo_group_open (session);
  bool done = run_lines (session, s, &text, result, fault);
  if (done) {
    undo_group_close (session);
  } else {
    undo_group_drop (session);
  }
  text_clear (&text);
  return done;
}
