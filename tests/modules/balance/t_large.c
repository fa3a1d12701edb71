#include "config.h"

#include <math.h>

#include "chain.h"
#include "libtest.h"
#include "metered.h"
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

/* Every ring by its closed form, m = f / (1 - 0.6 (1 - r)), one after the other.  */
static void
follow (const struct chain *chain, const double value[], double within)
{
  double feed[CHAIN_COMPONENTS];
  for (size_t c = 0; c < CHAIN_COMPONENTS; c++) {
    feed[c] = 100 * (double) (c + 1) / 21;
  }
  for (size_t m = 0; m < chain->rings; m++) {
    for (size_t c = 0; c < CHAIN_COMPONENTS; c++) {
      double r = 0.3 + 0.1 * (double) c, own = 10 + (double) (m % 7);
      double in = (feed[c] + own * (double) (c + 1) / 21) / (1 - 0.6 * (1 - r));
      test_about ("ring %zu, component %zu", m, c);
      NEAR (value[(1 + CHAIN_STREAMS * m) * CHAIN_COMPONENTS + c], in, within);
      feed[c] = r * in;
    }
  }
}

/* 300 units.  */
static void
determined (void)
{
  static const struct chain chain = { .rings = 100 };
  struct arena *arena = arena_create ();
  const struct solution *s = solve (arena, &chain);
  NEED (s);
  SAME_INT (s->status, BALANCE_DETERMINED);
  SAME_INT (s->count.variables, 601 * 6);
  CHECK (s->mismatch < 1e-13);
  follow (&chain, s->value, 1e-12);
  arena_destroy (arena);
}

/* Shares that follow from a fraction each, few and many.  */
static void
shares_from_fractions (void)
{
  static const struct chain chains[] = {
    { .rings = 12, .unknown_shares = 2, .told_fractions = 2 },
    { .rings = 33, .unknown_shares = 20, .told_fractions = 20 }
  };
  for (size_t n = 0; n < 2; n++) {
    struct arena *arena = arena_create ();
    const struct solution *s = solve (arena, &chains[n]);
    test_about ("chain %zu", n);
    NEED (s);
    SAME_INT (s->status, BALANCE_DETERMINED);
    SAME_INT (s->count.missing, 0);
    CHECK (s->mismatch < 1e-12);
    follow (&chains[n], s->value, 1e-8);
    arena_destroy (arena);
  }
}

/* Twenty shares that nothing tells: each is one more figure, and all solutions are sound.  */
static void
shares_unknown (void)
{
  static const struct chain chain = { .rings = 33, .unknown_shares = 20 };
  struct arena *arena = arena_create ();
  const struct solution *s = solve (arena, &chain);
  NEED (s);
  SAME_INT (s->status, BALANCE_UNDERDETERMINED);
  SAME_INT (s->count.missing, 20);
  SAME_INT (s->negative_count, 0);
  CHECK (s->mismatch < 1e-12);
  CHECK (!s->fixed_total[1]);
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

/* A pipe of many meters that all say what flows in it: its flow is their mean, and any of them
   could be done without.  With uncertainties stated, with digits only, and with one far off.    */
static void
one_pipe (void)
{
  enum { UNITS = 300 };
  for (int way = 0; way < 3; way++) {
    struct metered p;
    struct fault fault;
    const struct solution *s;
    unsigned long long seed = 3;
    double mean = 0;
    metered_init (&p, 1, UNITS + 1);
    for (size_t k = 0; k <= UNITS; k++) {
      double y = 100 + 0.3 * (metered_uniform (&seed) - 0.5) + (way == 2 && k == 77 ? 2 : 0);
      struct fact *fact = metered_total (&p, k, y, way == 0 ? 0.1 : (double) NAN);
      fact->rounding = way == 0 ? 0 : 0.1 * sqrt (3);
      mean += y / (UNITS + 1);
      if (k < UNITS) {
        metered_boundary_of (&p, BOUNDARY_MIX, 1, &k, 1, (const size_t[]) { k + 1 });
      }
    }
    fault_init (&fault, p.arena);
    s = network_solve (p.arena, &p.network, &usual, &fault);
    test_about ("way %d", way);
    NEED (s);
    SAME_INT (s->status, way == 0 ? BALANCE_RECONCILED : way == 1 ? BALANCE_REDUNDANT
                                                                  : BALANCE_CONTRADICTORY);
    SAME_INT (s->count.surplus, UNITS);
    SAME_INT (s->redundant_count, UNITS + 1);
    if (way < 2) {
      NEAR (s->value[0], mean, 1e-9);
      NEAR (s->value[UNITS], mean, 1e-9);
      CHECK (s->fixed[UNITS] && s->fixed_total[UNITS]);
    } else {
      NEED (s->conflict);
      SAME_INT (s->conflict->count, 2);
    }
    metered_clear (&p);
  }
}

static const struct test_case cases[] = {
  { "300 units have their closed form", determined },
  { "shares follow from fractions", shares_from_fractions },
  { "twenty shares are unknown", shares_unknown },
  { "what is open far off leaves the rest fixed", short_of_some },
  { "a clash is found among thousands of rows", clashes },
  { "hundreds of meters in one pipe have a mean", one_pipe },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
