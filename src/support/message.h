/* Everything the program can say about a figure or a mistake, as kinds.

   The kinds are the rows of tables/messages.tsv: the build turns each `kind` cell into an enum
   value (`number-comma` becomes MESSAGE_NUMBER_COMMA), so no kind can lack its sentence.  Code
   decides on kinds, never on wording.  A sentence has places {1} to {4} for facts.             */
#ifndef SUPPORT_MESSAGE_H
#define SUPPORT_MESSAGE_H

#include <stddef.h>
#include "message_kinds.h"          /* made from tables/messages.tsv: enum message */

struct text;

enum severity { SEVERITY_ERROR, SEVERITY_TAKEN, SEVERITY_NOTE, SEVERITY_CAUTION };

enum { MESSAGE_FACTS = 4 };

const char *message_name (enum message);                 /* "number-comma" */
enum severity message_severity (enum message);
const char *message_sentence (enum message);             /* with its {1} ... */
const char *message_way_on (enum message);               /* the usual way on, or "" */

/* Appends the sentence, or the way on, with the facts in their places (a null fact is empty).  */
void message_write (struct text *, const char *pattern, const char *const facts[MESSAGE_FACTS]);

#endif
