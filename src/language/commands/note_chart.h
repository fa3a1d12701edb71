/* The picture of a session's streams.  */
#ifndef LANGUAGE_COMMANDS_NOTE_CHART_H
#define LANGUAGE_COMMANDS_NOTE_CHART_H

#include "language/session_private.h"

struct chart;

/* Null where no stream is made of others, or where one is parted in ways that cannot be at once:
   the shares taken of it are more than all of it.                                              */
const struct chart *note_chart (const struct session *, struct arena *);

#endif
