/* Are the measured figures as good as they say?

   The global test of chi2, the test of every adjustment against its own standard deviation, leaks
   as explanations beside meters, and leaving out what stands out most.  Sources: gross.c.        */
#ifndef BALANCE_GROSS_H
#define BALANCE_GROSS_H

#include <stdbool.h>
#include "balance/minimise.h"
#include "support/check.h"

struct arena; struct fault; struct solution; struct solve_options;

/* Does chi2 with so much freedom pass at this confidence?  */
bool chi2_passes (double chi2, size_t freedom, double confidence);

/* By figure: does anything else bear on it?  */
bool *redundant_figures (struct arena *, const struct measured *, const struct fit *) MUST_CHECK;

/* Fills in the figures, tests, leaks and eliminations of SOLUTION, all in ARENA.  What MEASURED
   leaves out is as before afterwards.  Faults: interrupted.  */
bool gross_test (struct arena *, struct measured *, const struct fit *,
                 const struct solve_options *, struct solution *, struct fault *) MUST_CHECK;

#endif
