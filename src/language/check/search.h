/* Finds the readings of a stated figure that fit, one or two at a time.  */
#ifndef LANGUAGE_CHECK_SEARCH_H
#define LANGUAGE_CHECK_SEARCH_H

#include <stdbool.h>
#include <stddef.h>
#include "language/check/trial.h"
#include "support/check.h"

struct check_need; struct check_verdict;

/* Works the candidates out, each alone; drops those that move nothing, and joins those that come
   to the same figure.  Returns how many are left.                                               */
size_t search_singles (struct check *, struct candidate *, size_t count);
/* Fills in the readings of VERDICT: those of N candidates that fit, or, where none does, the pairs
   that do; best first.  False with FAULT if interrupted.                                        */
bool search_readings (struct check *, const struct candidate *, size_t n, struct check_verdict *,
                      struct fault *) MUST_CHECK;
/* Does the figure agree with the claim?  */
bool check_fits (const struct check *, double figure) MUST_CHECK;
/* The claim over a figure less one; NAN where that says nothing (degC, zero).  */
double check_deviation (const struct check *, double figure, const struct unit *);

/* What would have to be true for the figure to be the claim (need.c).  */
struct check_need *search_needs (struct check *);

#endif
