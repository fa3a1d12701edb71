/* What the uncertain figures do to an answer.

   Every figure with ± that an answer leans on is a source.  Each is moved up and down by one
   standard uncertainty, the question is worked out again, and half the differences add up as
   squares: the law of propagation (JCGM 100:2008, eq. 10) with the derivatives as differences over
   the width that matters (5.1.3 note 2; Kragten, Analyst 119 (1994) 2161).  A source that enters
   by several ways moves all of them at once, so correlations through it come out right.         */
#ifndef LANGUAGE_EVALUATE_UNCERTAINTY_H
#define LANGUAGE_EVALUATE_UNCERTAINTY_H

#include <stddef.h>
#include "support/check.h"

struct arena; struct budget; struct evaluation; struct figures; struct session; struct statement;

/* The budgets of FIGURES, which FIRST found for the question S: one for each, in its order; null
   where no source moves it.  In the arena of FIRST.  Null with the fault of FIRST, placed in S, if
   a source can be moved neither up nor down.                                                    */
const struct budget **uncertainty_budgets (const struct evaluation *first,
                                           const struct statement *s,
                                           const struct figures *) MUST_CHECK;

/* The budgets of all COUNT figures that QUESTION, a statement, answers with, as above; null with
   COUNT 0 where it has no answer.  What is made for it is put in the arena.                     */
const struct budget **uncertainty_of_figures (struct session *, struct arena *,
                                              const char *question, size_t *count) MUST_CHECK;
/* The standard uncertainty of the first figure that QUESTION, a statement, answers with; NAN where
   it has none.  What is made for it is put in the arena.                                        */
double uncertainty_of_question (struct session *, struct arena *, const char *question);

#endif
