#include "config.h"
#include "shell/script.h"

#include <errno.h>
#include <string.h>

#include "language/parse.h"
#include "language/session.h"
#include "language/tree.h"
#include "result/result.h"
#include "shell/descriptor.h"
#include "shell/interrupt.h"
#include "shell/note_file.h"
#include "shell/output.h"
#include "shell/source.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/reader.h"

enum { PROMPT_WIDTH = 6 };                      /* the margin of what is typed */

/* Digits are a setting.  */
static void
take_digits (struct script *script)
{
  script->output->style.digits = session_digits (script->session);
  script->output->fault_style.digits = script->output->style.digits;
}

void
script_init (struct script *script, struct session *session, struct output *output)
{
  *script = (struct script) { .session = session, .output = output,
                              .arena = session_line_arena (session) };
  take_digits (script);
}

void
script_clear (struct script *script)
{
  text_clear (&script->line);
}

/* The physical line NUMBER of LINE; its last one if there is none of that number.  */
static const char *
physical_line (struct arena *arena, const struct script_line *line, int number, bool *is_last)
{
  const char *start = line->text != NULL ? line->text : "";
  const char *const end = start + line->n;
  const char *stop = memchr (start, '\n', line->n);

  for (int i = line->first; i < number && stop != NULL; i++) {
    start = stop + 1;
    stop = memchr (start, '\n', (size_t) (end - start));
  }
  *is_last = stop == NULL;
  return arena_copy (arena, start, (size_t) ((stop != NULL ? stop : end) - start));
}

/* Does what was typed still stand just above what is printed now, as one row?  */
static bool
is_in_sight (const struct script_line *line, const char *physical, bool is_last, bool answered)
{
  return is_last && !answered && !line->out_of_sight
         && PROMPT_WIDTH + utf8_characters (physical, strlen (physical)) < line->columns;
}

static void
tell_fault (struct script *script, const struct script_line *line, const struct fault *fault,
            const char *statement, bool answered)
{
  struct report_origin origin = { .file = line->file, .statement = statement,
                                  .column_shift = PROMPT_WIDTH };
  bool is_last;

  script->failed = true;
  origin.line = physical_line (script->arena, line, fault->at.line, &is_last);
  origin.quote = line->file != NULL || !is_in_sight (line, origin.line, is_last, answered);
  if (fault->quote != NULL) {
    origin.line = fault->quote;
    origin.quote = true;
  }
  if (line->file != NULL)
    session_spoil_block (script->session);
  output_fault (script->output, fault, &origin);
}

/* Help and lists may be longer than the screen.  */
static bool
is_listing (const struct statement *statement)
{
  return statement->kind == STATEMENT_HELP || statement->kind == STATEMENT_LIST
         || statement->kind == STATEMENT_SET;
}

/* Writes the notes and pictures a statement of FILE asked for.  */
static bool
write_notes (const struct script *script, const struct statement *statement, const char *file,
             struct result *result, struct fault *fault)
{
  const struct note_inputs inputs = { script->inputs, script->input_count, file };

  if (note_file_write (result, &inputs, fault))
    return true;
  fault_place (fault, statement->text != NULL ? statement->text_at : statement->at);
  return false;
}

/* Runs a statement; true if it did not fail.  */
static bool
run_statement (struct script *script, const struct statement *statement, const char *file,
               bool *answered, struct fault *fault)
{
  struct result result;

  result_init (&result, script->arena, statement->source);
  if (!session_run (script->session, statement, &result, fault))
    return false;
  if ((result.note != NULL || result.picture != NULL)
      && !write_notes (script, statement, file, &result, fault))
    return false;
  take_digits (script);
  *answered = *answered || !result_is_empty (&result);
  output_result (script->output, &result, is_listing (statement));
  script->quit = result.quit;
  return true;
}

/* An `end` that failed: nobody mends the block of a file; at the prompt it stays open.  */
static void
settle_block (struct script *script, const struct script_line *line)
{
  struct result result;

  if (line->file != NULL) {
    session_leave_block (script->session);
    return;
  }
  result_init (&result, script->arena, "end");
  script->reopened = session_reopened (script->session, &result);
  output_result (script->output, &result, false);
}

/* After a fault: may the rest of the line run?  Not if the rest could stand in a block that was
   not opened, or outside one that was not closed.                                               */
static bool
may_go_on (const struct script *script, const struct parser *parser)
{
  return script->keep_going && parser_block (parser) == session_block (script->session);
}

/* Is a signal stopping the run?  At the prompt that is told, elsewhere the program ends.  */
static bool
is_stopped (const struct script_line *line)
{
  return line->file != NULL && interrupt_pending ();
}

void
script_run_line (struct script *script, const struct script_line *line)
{
  struct parser *parser;
  struct statement *statement;
  struct fault fault;
  bool answered = false;

  script->arena = session_line_arena (script->session);
  parser = parser_create (script->arena, session_vocabulary (script->session), line->text,
                          line->n, line->first, session_block (script->session));
  while (!script->quit && !is_stopped (line)) {
    fault_init (&fault, script->arena);
    if (!parser_next (parser, &statement, &fault)) {
      tell_fault (script, line, &fault, parser_source (parser), answered);
    } else if (statement == NULL) {
      break;
    } else if (statement->kind == STATEMENT_EMPTY
               || run_statement (script, statement, line->file, &answered, &fault)) {
      continue;
    } else if (!is_stopped (line)) {
      tell_fault (script, line, &fault, statement->source, answered);
      if (statement->kind == STATEMENT_END)
        settle_block (script, line);
    }
    if (!may_go_on (script, parser))
      break;
  }
}

/* A block that is open where its input ends.  */
static void
tell_open_block (struct script *script, const struct reader *reader)
{
  const struct script_line line = { .text = "", .file = reader->name };
  struct fault fault;

  script->arena = session_line_arena (script->session);
  fault_init (&fault, script->arena);
  fault_set_at (&fault, MESSAGE_UNFINISHED, (struct place) { reader->line, 0, 0 },
                "a block is closed with 'end'", NULL);
  session_leave_block (script->session);
  tell_fault (script, &line, &fault, "", false);
}

static bool
may_run_on (const struct script *script)
{
  return !script->quit && !interrupt_pending () && script->output->error == 0
         && (!script->failed || script->keep_going);
}

bool
script_run (struct script *script, struct reader *reader)
{
  int first;

  while (may_run_on (script) && reader_next (reader, &script->line, &first)) {
    const struct script_line line = { .text = script->line.bytes, .n = script->line.length,
                                      .first = first, .file = reader->name };

    script_run_line (script, &line);
  }
  if (may_run_on (script) && session_block (script->session) != BLOCK_NONE)
    tell_open_block (script, reader);
  return may_run_on (script);
}

bool
script_run_file (struct script *script, const char *name)
{
  struct source source;
  struct reader reader;

  if (!source_open (&source, name, script->output)) {
    output_file_fault (script->output, name, descriptor_reason (errno));
    script->failed = true;
    return may_run_on (script);
  }
  reader = source_reader (&source);
  const bool goes_on = script_run (script, &reader);
  if (source.error != 0) {
    output_file_fault (script->output, name, descriptor_reason (source.error));
    script->failed = true;
  }
  source_close (&source);
  return goes_on && may_run_on (script);
}
