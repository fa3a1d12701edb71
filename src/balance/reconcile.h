/* Measured figures made to agree with what holds exactly, and the uncertainty of what follows.  */
#ifndef BALANCE_RECONCILE_H
#define BALANCE_RECONCILE_H

#include <stdbool.h>
#include "support/check.h"

struct arena; struct fault; struct network; struct solution; struct solve_options; struct system;

/* Reconciles the measured facts of SYSTEM's network, if it has any: status, values and what is
   fixed, the tests, the covariance.  Without surplus among them the solution stays as it is and
   has its covariance.  What it answers lives in ARENA.  Faults: interrupted, not-converged.      */
bool system_reconcile (struct arena *, const struct system *, const struct solve_options *,
                       struct solution *, struct fault *) MUST_CHECK;

#endif
