/* Shows what is longer than the screen page by page, by the user's pager.  */
#ifndef SHELL_PAGER_H
#define SHELL_PAGER_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct screen { size_t rows, columns; };

/* The size of the terminal behind FD; 24 rows of 80 where it is not known.  */
struct screen screen_size (int fd);

/* Shows the N bytes at TEXT by $PAGER, else `less -FRX`, and waits until the user has seen enough.
   False if there is no such program: nothing was shown.                                         */
bool pager_show (const char *text, size_t n) MUST_CHECK;

#endif
