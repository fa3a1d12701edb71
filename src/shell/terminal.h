/* Typed lines: a reader that asks at the terminal.

   With the readline library lines can be edited, completed and called back; without it they are
   read plainly.  Nothing outside terminal.c knows which.                                        */
#ifndef SHELL_TERMINAL_H
#define SHELL_TERMINAL_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "support/reader.h"

struct completion; struct terminal; struct text;

/* What the terminal asks its owner, who gets WITH back each time.  */
struct terminal_owner {
  const char *(*prompt) (void *with, bool continues);
  /* What can be typed in place of the bytes START to END of LINE.  */
  void (*complete) (void *with, const char *line, size_t start, size_t end,
                    struct completion *);
  /* Puts a page of help for what stands at CURSOR in LINE into PAGE.  False: there is none.  */
  bool (*help) (void *with, const char *line, size_t cursor, struct text *page);
  void *with;
};

/* Opens the one terminal of the program; TO_ERROR: prompts go to standard error, because standard
   output is no terminal.  The owner is copied.                                                  */
struct terminal *terminal_open (const struct terminal_owner *, bool to_error) MUST_CHECK;
void terminal_close (struct terminal *);

/* Asks for a line each time it is read, until the end of input.  An interrupt ends a logical line
   too: look with terminal_was_interrupted whenever it has been read.                            */
struct reader terminal_reader (struct terminal *);

/* Was the line being typed given up by an interrupt?  Forgets it.  */
bool terminal_was_interrupted (struct terminal *);

/* Did the last line come in a paste of several, or lose a rail?  */
bool terminal_was_pasted (const struct terminal *);
/* Printed lines left out of what was pasted, since this was last asked.  */
size_t terminal_left_out (struct terminal *);
/* Drops pasted lines that were not read yet.  */
void terminal_drop_pasted (struct terminal *);

/* Do keys like F1 work?  */
bool terminal_has_keys (void);

#endif
