/* How an answer came about, as `workings` shows it: every step with the units and sources it was
   recorded without, and what its uncertainty is made of.  Borrowed, as a result is.             */
#ifndef RESULT_WORKINGS_RECORD_H
#define RESULT_WORKINGS_RECORD_H

#include <stddef.h>

struct answer; struct step;

/* A short name of a source, as the steps have it, and what it stands for.  */
struct workings_source { const char *name, *text; const struct workings_source *next; };

struct workings_record {
  const char *statement;                 /* what was asked */
  const struct step *steps;              /* in order; none lacks its unit or its source */
  size_t count;
  const struct answer *answers;          /* with their budgets */
  size_t answer_count;
  const struct workings_source *sources;
};

#endif
