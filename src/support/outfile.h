/* A file that is written beside its place and put there at the end.

   Until then the file of that name stays as it was, and it stays so if the run is broken off.  What
   is no plain file (a device, a pipe) is written at once.                                       */
#ifndef SUPPORT_OUTFILE_H
#define SUPPORT_OUTFILE_H

#include <stdbool.h>
#include "support/check.h"

struct outfile {
  int fd;
  char *target, *beside;                /* owned; beside is null when written at once */
};

/* Opens what is to become NAME.  False with errno.  */
bool outfile_open (struct outfile *, const char *name) MUST_CHECK;

/* Puts the file in its place.  False with errno, and the old file is as it was.  */
bool outfile_keep (struct outfile *) MUST_CHECK;

/* Takes away what was written.  */
void outfile_drop (struct outfile *);

/* Is the file NAME the same plain file as INPUT, however spelt ("-" is standard input)?  */
bool outfile_is_input (const char *name, const char *input);

#endif
