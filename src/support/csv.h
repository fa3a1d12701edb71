/* Cells parted by a delimiter (RFC 4180), one row at a time.

   CRLF and LF end a line; a cell in quotes may hold the delimiter, line ends, and quote marks that
   are doubled.  Every cell knows its line and column, counted in characters from 1.  Complaints
   have the place as their first fact, "week.csv:4:7", and in fault->at.                         */
#ifndef SUPPORT_CSV_H
#define SUPPORT_CSV_H

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>
#include "support/check.h"
#include "support/message.h"

struct arena; struct fault;

enum csv_encoding { CSV_UTF8, CSV_UTF8_MARK, CSV_WINDOWS_1252 };

struct csv_cell {
  const char *text;               /* N bytes of UTF-8, not ended; borrowed or in the arena */
  uint32_t length;
  int line, column;
  bool quoted;
};
struct csv_row { const struct csv_cell *cells; size_t count; int line; };

struct csv {
  const char *name;               /* for complaints; borrowed */
  const char *bytes;              /* UTF-8, without a mark; borrowed */
  size_t length, next;
  int line;                       /* of the row that comes next */
  char delimiter;
  bool remarks;                   /* lines that open with '#' are passed over ... */
  size_t remarks_passed;          /* ... and counted */
  enum csv_encoding encoding;
};

/* A reader over N bytes, which it borrows: the mark at the front skipped, what is not UTF-8 read
   as Windows-1252 (into ARENA).  Kind csv-encoding for UTF-16 and for bytes that are no text.   */
bool csv_open (struct csv *, struct arena *, const char *name, const char *bytes, size_t n,
               struct fault *) MUST_CHECK;

/* Finds the delimiter: ',', ';' or a tab.  One that stands on every line, as often, is taken
   before one that does not; commas between digits are decimal where ';' parts the cells.  Kind
   csv-delimiter if there is none, or more than one that could be.                              */
bool csv_find_delimiter (struct csv *, struct fault *) MUST_CHECK;

/* The next row into *ROW, its cells in ARENA.  False at the end (no fault), or with FAULT (kind
   csv-quote).  An empty line is a row of one empty cell.                                        */
bool csv_next (struct csv *, struct arena *, struct csv_row *, struct fault *) MUST_CHECK;

/* Sets FAULT at a place in the file.  Returns false.  */
bool csv_complain (const struct csv *, int line, int column, enum message, const char *fact2,
                   const char *fact3, struct fault *);

#endif
