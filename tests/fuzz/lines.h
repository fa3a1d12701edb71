/* One run of the language over lines that nobody would type, and what must hold all the same.  */
#ifndef FUZZ_LINES_H
#define FUZZ_LINES_H

#include <stdbool.h>
#include <stddef.h>

/* Runs the N bytes at TEXT, one or more lines, in a session of a few definitions.  Aborts, saying
   what was broken, unless every fault has a kind and a place inside the text, nothing that is no
   number is printed, and a statement that failed left the definitions and settings alone.
   Notes and pictures are written to memory.  Of files only digester.csv and cleaned.csv are read;
   with SAVED the session is saved, opened and saved again, as first.gw and second.gw.           */
void fuzz_lines (const char *text, size_t n, bool saved);

#endif
