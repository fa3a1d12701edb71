/* Where the user's own files are, by the base directory rules of the desktop: settings below
   $XDG_CONFIG_HOME (~/.config), history below $XDG_STATE_HOME (~/.local/state).                 */
#ifndef SHELL_FOLDERS_H
#define SHELL_FOLDERS_H

#include <stdbool.h>
#include "support/check.h"

struct text;

enum folder { FOLDER_CONFIG, FOLDER_STATE };

/* Puts the path of our file NAME in a folder into PATH.  A relative path in a variable does not
   count.  False if there is no such folder to be had: neither variable nor home.                */
bool folder_file (struct text *path, enum folder, const char *name) MUST_CHECK;

/* Makes the folders PATH leads through, for the user alone, and the file itself, readable by the
   user alone, unless it is there.  False with errno.                                            */
bool folder_make_file (const char *path) MUST_CHECK;

#endif
