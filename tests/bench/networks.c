/* How long a network takes to solve, by its size:

       networks RINGS [UNKNOWN-RECOVERIES [SHARES-TWICE [WRONG [UNKNOWN-SHARES [TOLD]]]]]

   Prints units, unknowns, least wall time of three runs in ms, most resident memory in kB, and the
   status.  The plant is that of tests/modules/balance/chain.h.                                  */
#include "config.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <sys/resource.h>
#include <time.h>

#include "chain.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/fault.h"

static double
now_ms (void)
{
  struct timespec t;
  clock_gettime (CLOCK_MONOTONIC, &t);
  return (double) t.tv_sec * 1e3 + (double) t.tv_nsec * 1e-6;
}

int
main (int argc, char *argv[])
{
  static const struct solve_options options = { 0.95, NULL };
  struct chain chain = { .rings = argc > 1 ? strtoul (argv[1], NULL, 10) : 3 };
  struct rusage usage;
  double least = INFINITY;
  size_t unknowns = 0;
  int status = 0;
  chain.unknown_recoveries = argc > 2 ? strtoul (argv[2], NULL, 10) : 0;
  chain.shares_twice = argc > 3 ? strtoul (argv[3], NULL, 10) : 0;
  chain.wrong = argc > 4 ? strtod (argv[4], NULL) : 0;
  chain.unknown_shares = argc > 5 ? strtoul (argv[5], NULL, 10) : 0;
  chain.told_fractions = argc > 6 ? strtoul (argv[6], NULL, 10) : 0;
  for (int run = 0; run < 3; run++) {
    struct arena *arena = arena_create ();
    const struct network *network = chain_make (arena, &chain);
    const struct solution *solution;
    struct fault fault;
    double start = now_ms ();
    fault_init (&fault, arena);
    solution = network_solve (arena, network, &options, &fault);
    if (!solution)
      return 1;
    least = fmin (least, now_ms () - start);
    unknowns = solution->count.variables;
    status = (int) solution->status;
    arena_destroy (arena);
  }
  getrusage (RUSAGE_SELF, &usage);
  printf ("%zu %zu %.2f %ld %d\n", CHAIN_BOUNDARIES * chain.rings, unknowns, least,
          usage.ru_maxrss, status);
  return 0;
}
