/* An answer by many trials: propagation of distributions (JCGM 101:2008).

   In each trial every source is drawn anew, from a normal distribution or, where limits were
   stated, a rectangular one, and the question is worked out with all of them moved at once.  What
   comes of that needs no first order: means, standard uncertainties and coverage intervals are
   those of the trials.                                                                          */
#ifndef LANGUAGE_EVALUATE_MONTECARLO_H
#define LANGUAGE_EVALUATE_MONTECARLO_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct budget; struct evaluation; struct figures; struct statement;

/* Adds to the result of FIRST, behind each of FIGURES by first order (BUDGETS, as uncertainty.h
   gives them): mean, standard uncertainty and the ends of a 95 % coverage interval, and notes of
   the trials that had no answer and of a first order that misleads.  S says how many trials, and
   from which seed.  Kinds: interrupted; range (more figures than can be kept); that of the first
   trial where fewer than half had an answer.                                                    */
bool montecarlo_answers (const struct evaluation *first, const struct statement *s,
                         const struct figures *, const struct budget *const budgets[]) MUST_CHECK;

#endif
