#include "config.h"
#include "shell/output.h"

#include <errno.h>
#include <langinfo.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "result/result.h"
#include "shell/descriptor.h"
#include "shell/options.h"
#include "shell/pager.h"
#include "support/arena.h"
#include "support/fault.h"

enum { ENOUGH = 32 * 1024 };                    /* bytes worth writing */

static const char program[] = "gaswright";

/* May FD be written to in bold and dim?  */
static bool
takes_weights (enum option_colour colour, int fd)
{
  const char *term = getenv ("TERM"), *refused = getenv ("NO_COLOR");

  switch (colour) {
    case COLOUR_ALWAYS:
      return true;
    case COLOUR_NEVER:
      return false;
    case COLOUR_AUTO:
      break;
  }
  return isatty (fd) && term != NULL && *term != '\0' && strcmp (term, "dumb") != 0
         && (refused == NULL || *refused == '\0');
}

bool
output_open (struct output *output, const struct options *options, bool prompt)
{
  const bool unicode = strcmp (nl_langinfo (CODESET), "UTF-8") == 0;

  *output = (struct output) { .format = options->format, .fd = STDOUT_FILENO,
                              .name = "standard output" };
  if (options->output != NULL) {
    if (!outfile_open (&output->file, options->output))
      return false;
    output->to_file = true;
    output->fd = output->file.fd;
    output->name = options->output;
  }
  output->prompt = prompt && isatty (output->fd);
  output->style = (struct report_style) { .unicode = unicode, .prompt = output->prompt };
  output->fault_style = output->style;
  output->style.weights = takes_weights (options->colour, output->fd);
  output->fault_style.weights = takes_weights (options->colour, STDERR_FILENO);
  return true;
}

bool
output_flush (struct output *output)
{
  if (output->error == 0 && output->pending.length > 0
      && !descriptor_write (output->fd, output->pending.bytes, output->pending.length)
      && errno != EINTR)
    output->error = errno;
  text_empty (&output->pending);
  output->whole = 0;
  return output->error == 0;
}

void
output_give_up (struct output *output)
{
  if (output->to_file && output->file.beside != NULL)
    (void) unlink (output->file.beside);
  else if (output->whole > 0
           && !descriptor_write (output->fd, output->pending.bytes, output->whole))
    output->error = errno;
}

/* Shows what is pending by the pager if it is longer than the screen.  False if it was not.  */
static bool
show_paged (struct output *output)
{
  const struct text *shown = &output->pending;
  const size_t rows = screen_size (output->fd).rows;
  size_t lines = 0;

  for (size_t i = 0; i < shown->length; i++)
    lines += shown->bytes[i] == '\n';
  if (lines < rows || !pager_show (shown->bytes, shown->length))
    return false;
  text_empty (&output->pending);
  output->whole = 0;
  return true;
}

/* The width of the terminal that FD is; 0: it is none.  */
static size_t
width_of (int fd)
{
  return isatty (fd) ? screen_size (fd).columns : 0;
}

void
output_result (struct output *output, const struct result *result, bool paged)
{
  if (result_is_empty (result))
    return;
  if (paged && output->prompt)
    output_flush (output);
  if (output->headed && !output->prompt && output->format == REPORT_TEXT)
    text_add_char (&output->pending, '\n');     /* answers of two statements stand apart */
  output->style.width = width_of (output->fd);
  report_result (&output->pending, output->format, &output->style, result, !output->headed);
  output->headed = true;
  if (output->prompt && output->format == REPORT_TEXT) {
    text_add_char (&output->pending, '\n');     /* so that what is typed next stands apart */
    if (paged && show_paged (output))
      return;
  }
  output->whole = output->pending.length;
  if (output->pending.length >= ENOUGH)
    output_flush (output);
}

/* On standard error, behind all answers so far.  Nobody is left to be told if it cannot be written.
 */
static void
write_error (const struct text *text)
{
  if (!descriptor_write (STDERR_FILENO, text->bytes, text->length))
    return;
}

void
output_fault (struct output *output, const struct fault *fault,
              const struct report_origin *origin)
{
  struct text said;

  if (output->format == REPORT_JSON) {
    report_fault (&output->pending, REPORT_JSON, &output->style, fault, origin);
    output->whole = output->pending.length;
    return;
  }
  output_flush (output);
  text_init (&said);
  output->fault_style.width = width_of (STDERR_FILENO);
  report_fault (&said, output->format, &output->fault_style, fault, origin);
  write_error (&said);
  text_clear (&said);
}

void
output_file_fault (struct output *output, const char *name, const char *why)
{
  const struct report_origin origin = { .file = program, .statement = "" };
  struct arena *arena = arena_create ();
  struct fault fault;

  fault_init (&fault, arena);
  fault_set (&fault, MESSAGE_FILE, name, why);
  output_fault (output, &fault, &origin);
  arena_destroy (arena);
}

void
output_complain (const char *sentence)
{
  struct text said;

  text_init (&said);
  text_add_format (&said, "%s: %s\n", program, sentence);
  write_error (&said);
  text_clear (&said);
}

bool
output_finish (struct output *output, bool keep)
{
  struct text sentence;
  bool good = output_flush (output);

  if (output->to_file) {
    if (!good || !keep)
      outfile_drop (&output->file);
    else if (!outfile_keep (&output->file))
      output->error = errno;
    output->to_file = false;
  } else if (good && output->fd == STDOUT_FILENO && close (STDOUT_FILENO) == -1
             && errno != EBADF) {
    output->error = errno;
  }
  text_clear (&output->pending);
  if (output->error == 0)
    return true;
  text_init (&sentence);
  text_add_format (&sentence, "%s cannot be written: %s", output->name,
                   descriptor_reason (output->error));
  output_complain (sentence.bytes);
  text_clear (&sentence);
  return false;
}
