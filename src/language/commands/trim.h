/* What `trim` is about: quantities that are moved, what is aimed at, and what came out.  */
#ifndef LANGUAGE_COMMANDS_TRIM_H
#define LANGUAGE_COMMANDS_TRIM_H

#include <stdbool.h>
#include <stddef.h>
#include "language/commands/commands.h"
#include "support/search.h"

struct answer;

struct trim {
  struct session *session;
  const struct statement *statement;
  struct arena *arena;
  size_t count, aim_count;
  struct stand_in *moved;           /* the named quantities, with the value tried */
  double *x, *before, *scale, *least, *most;            /* in their own units */
  double *si;                       /* what `before` came to */
  bool *one_sided;                  /* of each aim */
  bool ranged;                      /* the user gave a range */
  struct evaluation *first;         /* where what is used is gathered */
  bool interrupted;
};

/* The left side of an aim in the unit of its right side, the quantities being X.  */
bool trim_figure (struct trim *, const struct aim *, const double x[], double *value,
                  struct fault *) MUST_CHECK;
/* ---- Words (trim_tell.c) ---- */

/* "dose, purge".  */
const char *trim_names (const struct trim *);
/* "wobbe of mix = 49.5 MJ/m3, O2 of mix at most 0.5 mol%".  */
const char *trim_aims (const struct trim *);
/* The quantities, with what they were.  */
void trim_answer (struct trim *, struct result *);
/* What is to be said about them.  */
void trim_tell (struct trim *, const struct search_finding *, bool moved, struct result *);
/* How they came about, for `workings`.  */
void trim_record (struct trim *, const struct result *, const struct answer *rows);
/* No value does: how near it came, and where.  Always false.  */
bool trim_unreachable (struct trim *, const struct search_finding *, struct fault *);
bool trim_unbounded (struct trim *, struct fault *);

#endif
