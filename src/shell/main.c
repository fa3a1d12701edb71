#include "config.h"

#include <dirent.h>
#include <errno.h>
#include <locale.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include <gsl/gsl_errno.h>

#include "language/session.h"
#include "shell/descriptor.h"
#include "shell/interrupt.h"
#include "shell/options.h"
#include "shell/output.h"
#include "shell/prompt.h"
#include "shell/rows.h"
#include "shell/script.h"
#include "shell/version.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/outfile.h"
#include "support/reader.h"
#include "support/text.h"

enum { STATUS_GOOD, STATUS_FAILED, STATUS_WRONG_USE };

/* WITH: the output that is open; or null.  */
static void
end_without_memory (void *with)
{
  static const char sentence[] = "gaswright: there is not enough memory\n";

  if (with != NULL)
    output_give_up (with);
  if (!descriptor_write (STDERR_FILENO, sentence, sizeof sentence - 1))
    _exit (STATUS_FAILED);
  _exit (STATUS_FAILED);
}

/* Runs the files, or what comes on standard input, then the statements of the command line, once
   or for every row of a table.                                                                  */
static void
run_scripts (struct script *script, const struct options *options)
{
  struct reader_string lines = { options->statements.bytes, options->statements.length, 0 };
  struct reader reader = reader_of_string (&lines, "-e");

  for (size_t i = 0; i < options->file_count; i++) {
    if (!script_run_file (script, options->files[i]))
      return;
  }
  if (options->file_count == 0 && !options->has_statements) {
    if (!script_run_file (script, "-"))
      return;
  }
  if (options->rows != NULL) {
    rows_run (script, options->rows, &options->statements);
    return;
  }
  if (options->has_statements && !script_run (script, &reader))
    script->failed = script->failed || script->output->error != 0;
}

/* Is there no folder of that name, or none that can be read?  The reason; null if all is well.  */
static const char *
folder_trouble (const char *name)
{
  DIR *folder = opendir (name);

  if (folder == NULL)
    return descriptor_reason (errno);
  closedir (folder);
  return NULL;
}

/* Runs everything in a new session.  True if all went well.  */
static bool
run_session (const struct options *options, struct output *output, bool at_prompt)
{
  const struct session_options about = { .tables = options->tables,
                                         .interrupted = interrupt_pending };
  struct arena *arena;
  struct session *session;
  const char *trouble;
  struct script script;
  struct fault fault;
  bool good = false;

  if (about.tables != NULL && (trouble = folder_trouble (about.tables)) != NULL) {
    output_file_fault (output, about.tables, trouble);
    return false;
  }
  arena = arena_create ();
  fault_init (&fault, arena);
  session = session_create (&about, &fault);
  if (session == NULL) {
    output_fault (output, &fault, &(struct report_origin) { .file = "gaswright",
                                                            .statement = "" });
  } else {
    script_init (&script, session, output);
    script.keep_going = options->keep_going;
    script.inputs = options->files;
    script.input_count = options->file_count;
    if (at_prompt)
      prompt_run (&script, options->no_init);
    else
      run_scripts (&script, options);
    good = at_prompt || !script.failed;         /* what was mistyped at a prompt was told there */
    script_clear (&script);
    session_destroy (session);
  }
  arena_destroy (arena);
  return good;
}

static void
complain_about_file (const char *name, const char *what, const char *why)
{
  struct text sentence;

  text_init (&sentence);
  text_add_format (&sentence, "%s %s: %s", name, what, why);
  output_complain (sentence.bytes);
  text_clear (&sentence);
}

/* The input that the output file would overwrite; null if none.  */
static const char *
input_in_danger (const struct options *options)
{
  if (options->output == NULL)
    return NULL;
  for (size_t i = 0; i < options->file_count; i++) {
    if (outfile_is_input (options->output, options->files[i]))
      return options->files[i];
  }
  if (options->rows != NULL && outfile_is_input (options->output, options->rows))
    return options->rows;
  return options->file_count == 0 && outfile_is_input (options->output, "-") ? "-" : NULL;
}

static int
run (const struct options *options)
{
  const bool at_prompt = options->file_count == 0 && !options->has_statements
                         && isatty (STDIN_FILENO);
  const char *input = input_in_danger (options);
  struct output output;
  bool good;

  if (input != NULL) {
    complain_about_file (options->output, "is not written", "it is an input");
    return STATUS_WRONG_USE;
  }
  interrupt_catch (at_prompt);                  /* before there is a file to take away again */
  if (!output_open (&output, options, at_prompt)) {
    complain_about_file (options->output, "cannot be written", descriptor_reason (errno));
    return STATUS_FAILED;
  }
  arena_on_exhaustion (end_without_memory, &output);
  good = run_session (options, &output, at_prompt);
  arena_on_exhaustion (end_without_memory, NULL);
  good = output_finish (&output, !interrupt_pending ()) && good;
  interrupt_pass_on ();
  return good ? STATUS_GOOD : STATUS_FAILED;
}

/* Prints what WRITE makes.  */
static int
print_and_end (void (*write_text) (struct text *))
{
  const struct options plain = { .format = REPORT_TEXT, .colour = COLOUR_NEVER };
  struct output output;

  if (!output_open (&output, &plain, false))
    return STATUS_FAILED;
  write_text (&output.pending);
  return output_finish (&output, true) ? STATUS_GOOD : STATUS_FAILED;
}

int
main (int argc, char *argv[])
{
  struct options options;
  struct text complaint;
  int status;

  setlocale (LC_CTYPE, "");
  gsl_set_error_handler_off ();
  arena_on_exhaustion (end_without_memory, NULL);
  descriptor_fill_standard ();
  text_init (&complaint);
  if (!options_read (&options, argc, argv, &complaint)) {
    output_complain (complaint.bytes);
    output_complain ("'gaswright --help' lists the options");
    status = STATUS_WRONG_USE;
  } else if (options.help) {
    status = print_and_end (options_help);
  } else if (options.version) {
    status = print_and_end (version_write);
  } else {
    status = run (&options);
  }
  text_clear (&complaint);
  options_clear (&options);
  return status;
}
