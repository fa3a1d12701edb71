/* What can be typed at the cursor.

   Candidates fit the place: statement words open a statement, a unit stands behind a number, a name
   behind `of`.  A name that is no plain word is offered in quotes.                              */
#ifndef SHELL_COMPLETION_H
#define SHELL_COMPLETION_H

#include <stdbool.h>
#include <stddef.h>

struct arena; struct session;

/* Whole words to put in place of the one at the cursor, sorted, each once; in the arena.  */
struct completion {
  struct arena *arena;
  const char **words;
  size_t count;
  bool is_file;                   /* a file name is wanted: there are no words */
};

/* For the word between START and END (bytes) of LINE, which may hold earlier physical lines of the
   same statement.  Capitals matter only if something fits as typed.                             */
void completion_find (struct completion *, struct arena *, const struct session *,
                      const char *line, size_t start, size_t end);

#endif
