/* What a fit leaves open, and how uncertain the rest is.  */
#ifndef BALANCE_UNCERTAINTY_H
#define BALANCE_UNCERTAINTY_H

#include <stdbool.h>
#include "balance/minimise.h"
#include "support/check.h"

struct arena; struct covariance;

/* By column: does the fit leave it open?  */
bool *fit_open (struct arena *, const struct measured *, const struct fit *) MUST_CHECK;
/* By stream and by stream and component: is the total open, the fraction?  */
void fit_open_streams (struct arena *, const struct measured *, const struct fit *, bool total[],
                       bool fraction[]);

/* What solution_uncertainty needs, copied into ARENA.  */
const struct covariance *covariance_keep (struct arena *, struct measured *,
                                          const struct fit *) MUST_CHECK;
/* The factor of FIT without the flows that are held at zero, for what is uncertain of them; null:
   none is held.  */
const struct factor *fit_loose_factor (struct arena *, struct measured *, const struct fit *)
  MUST_CHECK;

#endif
