/* One run of the reader of laboratories' files over what nobody would hand over.  */
#ifndef FUZZ_CELLS_H
#define FUZZ_CELLS_H

#include <stddef.h>

struct cells;

struct cells *cells_create (void);
void cells_destroy (struct cells *);

/* Reads the N bytes at TEXT as analyses, in several ways of asking, and every sample of them.
   Aborts, saying what was broken, unless a fault has a kind, a place inside the text and nothing
   null in it, and every part that is read a figure that can be computed with.  Returns how many
   parts were read.                                                                              */
size_t fuzz_cells (struct cells *, const char *text, size_t n);

#endif
