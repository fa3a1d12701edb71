/* The parts of a gas unmixed, each at T and p by itself (ISO 14912).  */
#ifndef LANGUAGE_EVALUATE_UNMIXED_H
#define LANGUAGE_EVALUATE_UNMIXED_H

#include "language/evaluate/evaluation.h"

/* Z and volume fractions of the parts of a gas; the sum of x_i Z_i.  */
struct unmixed { const double *Z, *phi; double sum; };
bool unmixed_volumes (struct evaluation *, const struct composition *, double T, double p,
                      struct unmixed *) MUST_CHECK;
/* The volume fraction of some of its species.  */
double unmixed_share (struct evaluation *, const struct composition *, const struct unmixed *,
                      const struct species_set *);

#endif
