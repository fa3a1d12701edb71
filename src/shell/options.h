/* The command line.  */
#ifndef SHELL_OPTIONS_H
#define SHELL_OPTIONS_H

#include <stdbool.h>
#include <stddef.h>
#include "report/report.h"
#include "support/check.h"
#include "support/text.h"

enum option_colour { COLOUR_AUTO, COLOUR_ALWAYS, COLOUR_NEVER };

/* Strings are borrowed from the command line; `statements` is owned: those of --evaluate, in their
   order, a line each.                                                                           */
struct options {
  enum report_format format;
  enum option_colour colour;
  bool keep_going, no_init, help, version;
  const char *tables, *output, *rows;
  bool has_statements;
  struct text statements;
  char *const *files;
  size_t file_count;
};

/* Reads the command line, whose order of words may change.  False with COMPLAINT, a sentence, if
   it is used wrongly.  Call options_clear in either case.                                       */
bool options_read (struct options *, int argc, char *argv[], struct text *complaint) MUST_CHECK;
void options_clear (struct options *);

/* What --help prints.  */
void options_help (struct text *);

#endif
