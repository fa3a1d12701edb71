/* The rows of a table: the statements of the command line once for each.

   The file is cells parted by a delimiter (support/csv.h), its first row names.  A column that
   holds a number anywhere is a quantity: in each row its name stands for its number (a bare one;
   the statement says the unit: q m3/h).  Columns of text are passed over.  A row with a cell that
   is no number, or whose statements fail, is told and the next one runs.                        */
#ifndef SHELL_ROWS_H
#define SHELL_ROWS_H

#include <stdbool.h>

struct script; struct text;

/* Runs STATEMENTS for every row of the file NAME ("-": standard input); script->failed says
   whether anything went wrong.                                                                  */
void rows_run (struct script *, const char *name, const struct text *statements);

#endif
