/* Writing calculation notes and pictures where they were asked for.  */
#ifndef SHELL_NOTE_FILE_H
#define SHELL_NOTE_FILE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct fault; struct note; struct result; struct script;

/* Writes the notes and pictures of RESULT, each beside its file and then in its place, and says so
   in RESULT.  INPUTS are COUNT files the run reads.  False with FAULT (kinds file-input, file) if
   one would overwrite an input or cannot be written.                                            */
struct note_inputs { char *const *files; size_t count; const char *running; };
bool note_file_write (struct result *, const struct note_inputs *, struct fault *) MUST_CHECK;

#endif
