/* How a verdict is put together (verdict*.c).  */
#ifndef LANGUAGE_BALANCE_VERDICT_PRIVATE_H
#define LANGUAGE_BALANCE_VERDICT_PRIVATE_H

#include "language/balance/plant_private.h"
#include "language/evaluate/wording.h"
#include "result/balance_verdict.h"

struct verdict_maker {
  struct evaluation *ev;
  struct arena *arena;
  const struct plant *plant;
  const struct solution *solution;
  struct balance_verdict *verdict;
  struct verdict_row **last_fact, **last_row;
  struct verdict_list **last_list;
  double per;                              /* flows are told as value * per ... */
  const char *unit;                        /* ... in this */
  const bool *named_twice;                 /* verdict_reconciled.c: by adjustment */
};

/* A growing list of texts, each once.  */
struct text_list { const char **at; size_t count, room; struct seen seen; };
void text_list_add (struct arena *, struct text_list *, const char *);
struct verdict_texts text_list_done (const struct text_list *);
/* How many of a list a sentence names: all, or the first VERDICT_NAMED where there are more than
   one more; then the verdict keeps all of them as WHAT.  */
enum { VERDICT_NAMED = 8 };
size_t verdict_named (struct verdict_maker *, const char *what, const struct text_list *);
/* "a, b, c", of many "a, b, c and 9 more".  */
const char *verdict_joined (struct verdict_maker *, const char *what, const struct text_list *);

void verdict_fact (struct verdict_maker *, const char *label, const char *text);
/* The texts in a row each, LABEL before the first; of many the first, as above.  */
void verdict_facts (struct verdict_maker *, const char *label, const struct text_list *);
struct verdict_row *verdict_add_row (struct verdict_maker *, size_t number);
/* "flow of tail", "CH4 of tail".  */
const char *quantity_text (const struct verdict_maker *, const struct quantity *);
const char *component_text (const struct plant *, size_t component);
/* The fact's line without its statement word; "1520 Nm3/h".  */
const char *fact_value_text (const struct verdict_maker *, size_t fact, double value);

/* verdict_streams.c: the solution, stream by stream.  */
bool verdict_streams (struct verdict_maker *, const struct target *) MUST_CHECK;
/* How far each reaction goes, where that is fixed.  */
void verdict_extents (struct verdict_maker *);
/* verdict_flows.c: their flows in the units of the targets, or in the usual ones (null).  */
bool verdict_flows (struct verdict_maker *, const struct target *,
                    struct verdict_stream streams[]) MUST_CHECK;
void verdict_open (struct verdict_maker *);              /* verdict_open.c */
/* Tells sets of what would help, ALONE the label of a single one; *COUNT of them.  */
const struct verdict_texts *verdict_sets (struct verdict_maker *, size_t suggestion_count,
                                          const struct suggestion suggestions[],
                                          const char *alone, size_t *count);
void verdict_loose (struct verdict_maker *);             /* verdict_loose.c */
void verdict_clash (struct verdict_maker *);             /* verdict_clash.c */
void verdict_impossible (struct verdict_maker *);        /* likewise */
void verdict_reconciled (struct verdict_maker *);        /* verdict_reconciled.c */
void verdict_moved (struct verdict_maker *);              /* verdict_moved.c */
void verdict_round (struct verdict_maker *);              /* verdict_round.c */
void verdict_around (struct verdict_maker *);            /* verdict_around.c */

#endif
