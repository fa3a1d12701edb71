/* Runs statements, wherever they come from: the one way for files, standard input, --evaluate and
   the prompt.                                                                                   */
#ifndef SHELL_SCRIPT_H
#define SHELL_SCRIPT_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "support/text.h"

struct arena; struct output; struct reader; struct session;

/* All but `line` is borrowed.  */
struct script {
  struct session *session;
  struct output *output;
  struct arena *arena;                  /* of the line that runs */
  struct text line;
  char *const *inputs;                  /* files of the run, which no note may overwrite */
  size_t input_count;
  bool keep_going;
  bool failed;                          /* something went wrong so far */
  bool reopened;                        /* an `end` failed and left its block to be mended */
  bool quit;                            /* a statement ended the session */
};

void script_init (struct script *, struct session *, struct output *);
void script_clear (struct script *);

/* A logical line, and how it came.  */
struct script_line {
  const char *text;                     /* N bytes; physical lines parted by '\n' */
  size_t n;
  int first;                            /* number of its first physical line */
  const char *file;                     /* null: typed at the prompt */
  bool out_of_sight;                    /* typed, but not just above what is printed */
  size_t columns;                       /* of the screen it was typed on */
};

/* Runs the statements of a line until one fails.  */
void script_run_line (struct script *, const struct script_line *);

/* Runs every line of a reader.  True if the run may go on with the next one; false if a statement
   failed (and that ends it), ended the session, or the program was asked to stop.               */
bool script_run (struct script *, struct reader *) MUST_CHECK;

/* Runs the file NAME; "-" is standard input.  */
bool script_run_file (struct script *, const char *name) MUST_CHECK;

#endif
