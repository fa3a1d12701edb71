/* Lines of statements, wherever they come from: a terminal, a file, a string.

   A logical line is one or more physical lines: a line that ends in '\' or in a comma goes on in
   the next.  The reader strips line ends (LF, CRLF), skips a byte-order mark, and joins the
   physical lines with '\n' between them, so that places can still be told.                      */
#ifndef SUPPORT_READER_H
#define SUPPORT_READER_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct text;

/* Fetches the next physical line (without its end) into TEXT; CONTINUES says that a logical line
   is already open.  False: there is none.                                                     */
typedef bool reader_fetch (void *source, bool continues, struct text *);

struct reader {
  const char *name;                     /* for messages: "morning.gw", "-", "-e" */
  reader_fetch *fetch;
  void *source;
  int line;                             /* physical lines fetched so far */
};

/* Puts the next logical line into TEXT (emptied first) and the number of its first physical line
   into *FIRST.  False at the end.                                                             */
bool reader_next (struct reader *, struct text *, int *first) MUST_CHECK;

/* A reader over N bytes in memory, borrowed.  */
struct reader_string { const char *bytes; size_t length, next; };
struct reader reader_of_string (struct reader_string *, const char *name);

#endif
