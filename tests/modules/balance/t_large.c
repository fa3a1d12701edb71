#include "config.h"

#include <math.h>

#include "chain.h"
#include "libtest.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/fault.h"

static const struct solve_options usual = { 0.95, NULL };

static const struct solution *
solve (struct arena *arena, const struct chain *chain)
{
  struct fault fault;
  const struct solution *solution;
  fault_init (&fault, arena);
  solution = network_solve (arena, chain_make (arena, chain), &usual, &fault);
  CHECK (solution != NULL);
  return solution;
}

/* 300 units: every ring by its closed form, m = f / (1 - 0.6 (1 - r)), one after the other.  */
static void
determined (void)
{
  static const struct chain chain = { .rings = 100 };
  struct arena *arena = arena_create ();
  const struct solution *s = solve (arena, &chain);
  double feed[CHAIN_COMPONENTS];
  NEED (s);
  SAME_INT (s->status, BALANCE_DETERMINED);
  SAME_INT (s->count.variables, 601 * 6);
  CHECK (s->mismatch < 1e-13);
  for (size_t c = 0; c < CHAIN_COMPONENTS; c++) {
    feed[c] = 100 * (double) (c + 1) / 21;
  }
  for (size_t m = 0; m < chain.rings; m++) {
    for (size_t c = 0; c < CHAIN_COMPONENTS; c++) {
      double r = 0.3 + 0.1 * (double) c, own = 10 + (double) (m % 7);
      double in = (feed[c] + own * (double) (c + 1) / 21) / (1 - 0.6 * (1 - r));
      test_about ("ring %zu, component %zu", m, c);
      NEAR (s->value[(1 + CHAIN_STREAMS * m) * CHAIN_COMPONENTS + c], in, 1e-12);
      feed[c] = r * in;
    }
  }
  arena_destroy (arena);
}

/* What is open in the middle leaves all before it fixed, and digits are kept to the end.  */
static void
short_of_some (void)
{
  static const struct chain chains[] = { { .rings = 60, .unknown_recoveries = 3 },
                                         { .rings = 60, .unknown_shares = 2 } };
  for (size_t n = 0; n < 2; n++) {
    struct arena *arena = arena_create ();
    const struct solution *s = solve (arena, &chains[n]);
    test_about ("chain %zu", n);
    NEED (s);
    SAME_INT (s->status, BALANCE_UNDERDETERMINED);
    SAME_INT (s->count.missing, n == 0 ? 3 : 2);
    CHECK (s->mismatch < 1e-12);
    CHECK (s->suggestion_count > 0);
    CHECK (n == 1 || s->fixed_total[1 + CHAIN_STREAMS * 29 + 1]);
    CHECK (!s->fixed_total[1 + CHAIN_STREAMS * 30 + 1]);
    arena_destroy (arena);
  }
}

/* Shares that make more than the whole, in the first ring.  With six to spare the set is no larger
   than with one.                                                                                */
static void
clashes (void)
{
  static const struct chain chains[] = { { .rings = 60, .shares_twice = 1, .wrong = 0.01 },
                                         { .rings = 60, .shares_twice = 6, .wrong = 0.01 } };
  for (size_t n = 0; n < 2; n++) {
    struct arena *arena = arena_create ();
    const struct solution *s = solve (arena, &chains[n]);
    test_about ("chain %zu", n);
    NEED (s && s->conflict);
    SAME_INT (s->status, BALANCE_CONTRADICTORY);
    SAME_INT (s->count.surplus, chains[n].shares_twice);
    CHECK (s->conflict->count >= 2 && s->conflict->count <= 12);
    arena_destroy (arena);
  }
}

static const struct test_case cases[] = {
  { "300 units have their closed form", determined },
  { "what is open far off leaves the rest fixed", short_of_some },
  { "a clash is found among thousands of rows", clashes },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
