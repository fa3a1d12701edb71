/* Which typed lines are kept, and where.  */
#ifndef SHELL_HISTORY_H
#define SHELL_HISTORY_H

#include <stdbool.h>
#include "support/check.h"

struct text;

enum { HISTORY_MOST = 2000 };           /* entries */

/* Puts the path of the history file into PATH and makes the file unless it is there.  False if
   there can be none: then lines are kept for this session only.                                 */
bool history_file (struct text *path) MUST_CHECK;

/* Is what was typed kept?  Not what begins with a blank, is empty, or repeats PREVIOUS (null: there
   is none); nor what the file could not give back: a line that looks like its time marks.       */
bool history_keeps (const char *typed, const char *previous) MUST_CHECK;

#endif
