/* Lines from a file or from standard input, read in large blocks.  */
#ifndef SHELL_SOURCE_H
#define SHELL_SOURCE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "support/reader.h"

struct output;

struct source {
  const char *name;                     /* borrowed; "-" is standard input */
  int fd;
  struct output *output;                /* borrowed; null: none */
  bool may_wait;                        /* no plain file: more may come later */
  char *block;                          /* owned */
  size_t next, end;                     /* of what is read and not fetched yet */
  bool ended;
  int error;                            /* errno of what could not be read; 0 */
};

/* Opens NAME.  Answers pending in OUTPUT are written before the program waits for input, so that
   whoever gives statements one by one has its answers.  False with errno.                       */
bool source_open (struct source *, const char *name, struct output *) MUST_CHECK;
void source_close (struct source *);
struct reader source_reader (struct source *);

#endif
