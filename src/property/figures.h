/* Figures of species that few questions need: a table read on first use (private to this layer).

   The rows are found by the key of a species.  Owned by the creator; what is handed out is
   borrowed.                                                                                     */
#ifndef PROPERTY_FIGURES_H
#define PROPERTY_FIGURES_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct composition; struct fault; struct figures; struct species;

struct figures_row {
  const char *key;
  const double *value;                   /* by column, NAN where the cell is empty */
  const char *note, *source;             /* never null */
};

/* Reads the N numbers in the columns COLUMN of the built-in TABLE, and of DIRECTORY's file of
   that name if DIRECTORY is not null, whose rows replace those of the same key.  Null with FAULT
   if the user's file cannot be read.                                                            */
struct figures *figures_create (const char *table, const char *directory, size_t n,
                                const char *const column[], struct fault *) MUST_CHECK;
void figures_destroy (struct figures *);                 /* null is allowed */

/* Null where the table has no row for it.  A gas known by its molar mass alone has none,
   whatever it is called.                                                                        */
const struct figures_row *figures_of (const struct figures *, const struct species *);

/* The row of KEY, whatever that names; null: none.  */
const struct figures_row *figures_named (const struct figures *, const char *key);

/* Calls VISIT for every row, in the order of the table.  */
void figures_each (const struct figures *, void (*visit) (const struct figures_row *, void *with),
                   void *with);

/* Has every part of a gas a row?  If not: kind model-lacks, naming the largest part without.  */
bool figures_cover (const struct figures *, const struct composition *,
                    struct fault *) MUST_CHECK;

#endif
