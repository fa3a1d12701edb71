/* Small networks written down in a line or two, for the tests of reconciliation.  */
#ifndef METERED_H
#define METERED_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "balance/solution.h"
#include "support/arena.h"

enum { METERED_MOST = 3000 };

struct metered {
  struct arena *arena;
  struct network network;
  struct boundary *boundary;
  struct fact *fact;
};

void metered_init (struct metered *, size_t components, size_t streams);
void metered_clear (struct metered *);

/* Streams by number: metered_boundary (p, BOUNDARY_MIX, "0 1 = 2").  */
void metered_boundary (struct metered *, enum boundary_kind, const char *streams);
/* The same with COUNT inlets or outlets in lists.  */
void metered_boundary_of (struct metered *, enum boundary_kind, size_t ins, const size_t in[],
                        size_t outs, const size_t out[]);

/* Facts; U is NAN for what is exact or has ROUNDING, which may be set in what comes back.  */
struct form metered_stream (struct metered *, size_t stream);
struct form metered_column (struct metered *, size_t stream, size_t component);
struct fact *metered_total (struct metered *, size_t stream, double value, double u);
struct fact *metered_fraction (struct metered *, size_t stream, size_t component, double value,
                             double u);
struct fact *metered_ratio (struct metered *, struct form left, struct form right, double value,
                          double u);
struct fact *metered_composition (struct metered *, size_t stream, const double x[],
                                  const double u[]);
struct fact *metered_share (struct metered *, size_t stream, size_t of, double value, double u);

/* Reconciled, at confidence 0.95; false with the fault's kind in *KIND.  Only what reconciliation
   fills in is there.  */
bool metered_reconcile (struct metered *, struct solution *, int *kind);

double metered_total_value (const struct metered *, const struct solution *, size_t stream);
double metered_total_u (struct metered *, const struct solution *, size_t stream);

/* A fixed sequence of normal deviates (Box, Muller, Ann. Math. Stat. 29 (1958) 610).  */
double metered_normal (unsigned long long *state);
double metered_uniform (unsigned long long *state);

#endif
