/* A file that is read whole.  */
#ifndef SUPPORT_INFILE_H
#define SUPPORT_INFILE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct text;

/* Adds what the file NAME ("-", where STANDARD: standard input) holds to TEXT.  STOP, unless it is
   null, is asked before each piece; where it says so no more is read.  False with errno, EFBIG
   where the file has more than MOST bytes.                                                      */
struct infile { const char *name; bool standard; size_t most; bool (*stop) (void); };
bool infile_read (const struct infile *, struct text *) MUST_CHECK;

#endif
