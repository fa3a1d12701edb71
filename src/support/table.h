/* Tables of facts: one reader for those built in and those a user brings.

   A table is text: lines opening with '#' are remarks, the first other line names the columns
   (tab-separated), every further line is a row.  Missing is an empty cell.  Every table has a
   last column `source` that is never empty.  Complaints carry file and line.                    */
#ifndef SUPPORT_TABLE_H
#define SUPPORT_TABLE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct fault; struct table;

/* A table built into the program: its name ("species"), the number of its columns and its rows,
   header first, null last.  A row is its cells, each ended by a null byte.  The list of all
   tables, ended by a null name, is made by the build from tables/ (X.tsv), which refuses a row
   with a wrong number of cells, without a key or without a source.                             */
struct table_text { const char *name; size_t columns; const char *const *rows; };
extern const struct table_text table_built_in[];

/* Null if NAME is not built in.  */
const struct table_text *table_text_find (const char *name);

/* Reads the built-in table NAME, then, if DIRECTORY is not null and holds NAME.tsv, that file's
   rows behind it (later rows add or, by equal first column, override: the callers decide).  A
   user's file may have the columns in another order and leave some out, but the first and the
   last.  The table lives in ARENA.  Null, with FAULT, if a user's row has the wrong number of
   cells, no key or no source, or the file cannot be read; the facts are file, line and what is
   wrong.                                                                                      */
struct table *table_read (struct arena *, const char *name, const char *directory,
                          struct fault *) MUST_CHECK;

size_t table_rows (const struct table *);
/* Column of that name, or -1.  */
int table_column (const struct table *, const char *name);
/* The cell, never null; "" where it is missing or COLUMN is -1.  Fastest along a row.  */
const char *table_cell (const struct table *, size_t row, int column);
/* The number in a cell; NAN where it is empty.  A cell that holds no number is a fault.  */
bool table_number (const struct table *, size_t row, int column, double *value,
                   struct fault *) MUST_CHECK;
/* Was the row read from a user's file?  */
bool table_row_is_users (const struct table *, size_t row);
/* Sets FAULT to "table NAME, line, WHAT" for a row.  Returns false.  */
bool table_complain (const struct table *, size_t row, const char *what, struct fault *);

#endif
