/* Who leans on whom: which trees mention a name, and what is to be worked out again when it
   changes.                                                                                      */
#ifndef LANGUAGE_MENTIONS_H
#define LANGUAGE_MENTIONS_H

#include <stdbool.h>
#include <stddef.h>

struct arena; struct definition; struct node; struct session; struct statement;

/* Does D lean on NAME, directly or through others?  */
bool definition_leans (struct session *, struct definition *, const char *name);
/* Did more than one definition ever mention NAME?  */
bool name_is_shared (const struct session *, const char *name);
/* All that lean on NAME, in the order of the session, into an array in ARENA; how many.  */
size_t names_leaning (struct session *, struct arena *, const char *name,
                      struct definition ***leaning);
void names_remember_mentions (struct session *, struct definition *);
/* NAME (null: a setting) changed: what leans on it is to be worked out again, ...  */
void names_changed (struct session *, const char *name);
/* ... which this does now, in the order of the session, so that no chain of names is worked out
   from its far end.                                                                             */
void names_refresh (struct session *);

/* The first node of a statement's trees that mentions NAME, or null.  */
const struct node *tree_mention (const struct statement *, const char *name);
/* Calls VISIT for every node of a statement's trees.  */
void tree_visit (const struct statement *, void (*visit) (const struct node *, void *), void *);

/* The part of an expression that brings a gas of its own into being, that no definition speaks
   for: a list, a blend, a remainder; or null.                                                   */
const struct node *tree_new_gas (const struct node *);

#endif
