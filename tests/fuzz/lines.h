/* One run of the language over lines that nobody would type, and what must hold all the same.  */
#ifndef FUZZ_LINES_H
#define FUZZ_LINES_H

#include <stddef.h>

/* Runs the N bytes at TEXT, one or more lines, in a session of a few definitions.  Aborts, saying
   what was broken, unless every fault has a kind and a place inside the text, nothing that is no
   number is printed, and a statement that failed left the definitions and settings alone.
   Nothing is read from or written to files.                                                     */
void fuzz_lines (const char *text, size_t n);

#endif
