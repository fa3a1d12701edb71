#include "config.h"
#include "shell/prompt.h"

#include <errno.h>
#include <string.h>
#include <unistd.h>

#include "language/parse.h"
#include "language/session.h"
#include "language/tree.h"
#include "result/result.h"
#include "shell/completion.h"
#include "shell/descriptor.h"
#include "shell/folders.h"
#include "shell/interrupt.h"
#include "shell/output.h"
#include "shell/pager.h"
#include "shell/script.h"
#include "shell/terminal.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/reader.h"
#include "support/text.h"

struct prompt {
  struct script *script;
  struct arena *arena;                  /* of a page of help, beside the line that is typed */
  int screen;                           /* descriptor of what is neither answer nor mistake */
  bool continues;                       /* a logical line is open */
};

static const char *
prompt_text (void *with, bool continues)
{
  struct prompt *prompt = with;

  prompt->continues = continues;
  if (continues)
    return "    | ";
  if (session_block (prompt->script->session) != BLOCK_NONE)
    return "   || ";
  return session_settings_changed (prompt->script->session) ? "gas*| " : "gas | ";
}

/* The line with the physical lines before it, whose words tell what fits too.  */
static void
complete_line (void *with, const char *line, size_t start, size_t end, struct completion *found)
{
  struct prompt *prompt = with;
  const struct text *before = &prompt->script->line;
  struct text whole;

  text_init (&whole);
  if (prompt->continues && before->length > 0) {
    text_add_bytes (&whole, before->bytes, before->length);
    text_add (&whole, " \\\n");         /* it goes on, whatever the reader made of its end */
  }
  const size_t shift = whole.length;
  text_add (&whole, line);
  completion_find (found, found->arena, prompt->script->session, whole.bytes, shift + start,
                   shift + end);
  text_clear (&whole);
}

/* Puts what STATEMENT answers into PAGE.  False if it fails.  */
static bool
answer_page (struct prompt *prompt, const char *statement, struct text *page)
{
  struct session *session = prompt->script->session;
  struct statement *parsed;
  struct parser *parser;
  struct result result;
  struct fault fault;

  fault_init (&fault, prompt->arena);
  parser = parser_create (prompt->arena, session_vocabulary (session), statement,
                          strlen (statement), 1, BLOCK_NONE);
  if (!parser_next (parser, &parsed, &fault) || parsed == NULL)
    return false;
  result_init (&result, prompt->arena, parsed->source);
  if (!session_run (session, parsed, &result, &fault) || result_is_empty (&result))
    return false;
  report_result (page, REPORT_TEXT, &prompt->script->output->style, &result, false);
  return true;
}

/* The word of LINE at CURSOR or before it.  */
static const char *
word_at (struct arena *arena, const char *line, size_t cursor)
{
  static const char signs[] = " \t\n,;=()\"";
  size_t end, start = cursor;

  while (start > 0 && (line[start] == '\0' || strchr (signs, line[start]) != NULL))
    start--;
  for (end = start; line[end] != '\0' && strchr (signs, line[end]) == NULL;)
    end++;
  while (start > 0 && strchr (signs, line[start - 1]) == NULL)
    start--;
  return arena_copy (arena, line + start, end > start ? end - start : 0);
}

/* For the word at the cursor its page of help, or the card of what it names; else the page of the
   statement; else that of all topics.                                                           */
static bool
help_page (void *with, const char *line, size_t cursor, struct text *page)
{
  struct prompt *prompt = with;
  const char *word, *opening;

  arena_reset (prompt->arena);
  word = word_at (prompt->arena, line, cursor);
  opening = arena_copy (prompt->arena, line, strcspn (line, " "));
  return (*word != '\0'
          && (answer_page (prompt, arena_format (prompt->arena, "help %s", word), page)
              || answer_page (prompt, arena_format (prompt->arena, "show %s", word), page)))
         || (*opening != '\0'
             && answer_page (prompt, arena_format (prompt->arena, "help %s", opening), page))
         || answer_page (prompt, "help", page);
}

static void
print (const struct prompt *prompt, const struct text *text)
{
  if (!descriptor_write (prompt->screen, text->bytes, text->length))
    prompt->script->output->error = errno;
}

/* The one line a session opens with: the settings that change answers.  */
static void
print_opening (struct prompt *prompt)
{
  struct text text;

  text_init (&text);
  text_add_format (&text, "gaswright %s   %s   %s\n\n", PACKAGE_VERSION,
                   session_opening (prompt->script->session, prompt->script->arena),
                   terminal_has_keys () ? "F1 help" : "help");
  print (prompt, &text);
  text_clear (&text);
}

static void
print_left_out (struct prompt *prompt, size_t lines)
{
  struct text text;

  text_init (&text);
  text_add_format (&text, "  ~   note: %zu printed line%s among the pasted ones left out\n", lines,
                   lines == 1 ? "" : "s");
  print (prompt, &text);
  text_clear (&text);
}

static void
run_init (struct script *script)
{
  struct text path;

  text_init (&path);
  if (folder_file (&path, FOLDER_CONFIG, "init") && access (path.bytes, F_OK) == 0) {
    script->keep_going = true;          /* one bad line shall not cost the rest */
    if (!script_run_file (script, path.bytes))
      interrupt_forget ();
    script->keep_going = false;
  }
  text_clear (&path);
}

static void
run_typed_line (struct prompt *prompt, struct terminal *terminal, int first)
{
  struct script *script = prompt->script;
  const struct script_line line = { .text = script->line.bytes, .n = script->line.length,
                                    .first = first,
                                    .out_of_sight = terminal_was_pasted (terminal),
                                    .columns = screen_size (prompt->screen).columns };
  const size_t left_out = terminal_left_out (terminal);

  if (left_out > 0)
    print_left_out (prompt, left_out);
  script->reopened = false;
  script_run_line (script, &line);
  output_flush (script->output);
  if (interrupt_pending () || script->reopened)
    terminal_drop_pasted (terminal);    /* what is left of a paste would go on in the block */
  interrupt_forget ();
}

static void
ask_and_answer (struct prompt *prompt, struct terminal *terminal)
{
  struct script *script = prompt->script;
  struct reader reader = terminal_reader (terminal);
  int first;

  while (!script->quit && script->output->error == 0) {
    const bool read = reader_next (&reader, &script->line, &first);

    if (terminal_was_interrupted (terminal)) {
      terminal_drop_pasted (terminal);
      session_leave_block (script->session);
    } else if (read) {
      run_typed_line (prompt, terminal, first);
    } else {
      return;
    }
  }
}

void
prompt_run (struct script *script, bool without_init)
{
  const bool to_error = !isatty (STDOUT_FILENO);
  struct prompt prompt = { .script = script, .arena = arena_create (),
                           .screen = to_error ? STDERR_FILENO : STDOUT_FILENO };
  const struct terminal_owner owner = { prompt_text, complete_line, help_page, &prompt };
  struct terminal *terminal;

  if (!without_init)
    run_init (script);
  output_flush (script->output);
  if (!script->quit) {
    terminal = terminal_open (&owner, to_error);
    print_opening (&prompt);
    ask_and_answer (&prompt, terminal);
    terminal_close (terminal);
  }
  arena_destroy (prompt.arena);
}
