/* What lasts between lines: definitions, settings, what may be undone.

   A session owns its tables and everything it keeps.  Running a statement either succeeds or
   leaves the session as it was.                                                                 */
#ifndef LANGUAGE_SESSION_H
#define LANGUAGE_SESSION_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "language/parse.h"

struct arena; struct fault; struct result; struct session; struct statement;

struct session_options {
  const char *tables;             /* a directory of the user's own tables, or null */
  /* Asked in long calculations: has the user interrupted?  Null: never.  */
  bool (*interrupted) (void);
};

struct session *session_create (const struct session_options *, struct fault *) MUST_CHECK;
void session_destroy (struct session *);

const struct vocabulary *session_vocabulary (const struct session *);
/* Where the next line stands.  */
enum block session_block (const struct session *);
void session_leave_block (struct session *);             /* Ctrl-C in a block drops it */
/* A line of the block failed where nobody types it anew: its `end` will refuse the whole.  */
void session_spoil_block (struct session *);
/* An `end` that failed leaves its block open, without the line at fault.  Is one open, and what
   there is to say of it?                                                                        */
bool session_reopened (struct session *, struct result *);

/* Runs one statement; what it answers is put into RESULT (already initialised), in RESULT's
   arena.  False with FAULT.                                                                     */
bool session_run (struct session *, const struct statement *, struct result *,
                  struct fault *) MUST_CHECK;

/* The arena for the next line, emptied: what the last answer stands in is left alone, so that
   `workings` and `note` can look at it.  Owned by the session.  A line that was read and run in
   another arena has no workings.                                                                */
struct arena *session_line_arena (struct session *);

/* For the prompt: digits on screen; is some setting not as shipped; the opening line's settings
   ("barometer 1.01325 bar (standard)   volumes ideal-gas").                                     */
int session_digits (const struct session *);
bool session_settings_changed (const struct session *);
const char *session_opening (struct session *, struct arena *);

/* Names for completion: calls VISIT with each user's name.  */
void session_each_name (const struct session *, void (*visit) (const char *, void *), void *with);

#endif
