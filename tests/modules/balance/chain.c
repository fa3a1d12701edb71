#include "config.h"
#include "chain.h"

#include <math.h>
#include "support/arena.h"

enum { C = CHAIN_COMPONENTS };

struct work {
  struct arena *arena;
  const struct chain *chain;
  struct network *network;
  struct boundary *boundary;
  struct fact *fact;
  const double *x;
  double top[C];                 /* what enters the next ring from before */
};

static double
recovery (size_t c)
{
  return 0.3 + 0.1 * (double) c;
}

/* What enters the separator of a ring is m = f / (1 - 0.6 (1 - r)); goes on to the next ring, and
   gives back the fraction of the first component in the rest of this one.                       */
static double
go_through (struct work *work, double own)
{
  double first = 0, rest = 0;
  for (size_t c = 0; c < C; c++) {
    double r = recovery (c), in = (work->top[c] + own * work->x[c]) / (1 - 0.6 * (1 - r));
    first = c == 0 ? (1 - r) * in : first;
    rest += (1 - r) * in;
    work->top[c] = r * in;
  }
  return first / rest;
}

static void
fact (struct work *work, struct fact fact)
{
  fact.u = (double) NAN;
  fact.weight = 1;
  work->fact[work->network->facts++] = fact;
}

static void
boundary (struct work *work, enum boundary_kind kind, size_t ins, size_t outs,
          const size_t streams[])
{
  size_t *list = ARENA_ARRAY (work->arena, ins + outs, size_t);
  for (size_t i = 0; i < ins + outs; i++) {
    list[i] = streams[i];
  }
  work->boundary[work->network->boundaries++]
    = (struct boundary) { kind, ins, outs, 0, list, list + ins, NULL };
}

static void
feed (struct work *work, size_t stream, double flow)
{
  struct term *terms = ARENA_ARRAY (work->arena, C, struct term);
  for (size_t c = 0; c < C; c++) {
    terms[c] = (struct term) { stream * C + c, 1 };
  }
  fact (work, (struct fact) { .left = { C, terms }, .value = flow });
  fact (work, (struct fact) { .kind = FACT_COMPOSITION, .stream = stream, .fractions = work->x });
}

static void
ring (struct work *work, size_t m, size_t from)
{
  const struct chain *chain = work->chain;
  size_t in = 1 + CHAIN_STREAMS * m, top = in + 1, rest = in + 2, back = in + 3, purge = in + 4;
  double own = 10 + (double) (m % 7);
  boundary (work, BOUNDARY_MIX, 3, 1, (const size_t[]) { from, back, in + 5, in });
  boundary (work, BOUNDARY_SEPARATE, 1, 2, (const size_t[]) { in, top, rest });
  boundary (work, BOUNDARY_SPLIT, 1, 2, (const size_t[]) { rest, back, purge });
  for (size_t c = m == chain->rings / 2 ? chain->unknown_recoveries : 0; c < C; c++) {
    struct term *terms = ARENA_ARRAY (work->arena, 2, struct term);
    terms[0] = (struct term) { top * C + c, 1 };
    terms[1] = (struct term) { in * C + c, 1 };
    fact (work, (struct fact) { .kind = FACT_RATIO, .relation = true, .left = { 1, terms },
                                .right = { 1, terms + 1 }, .value = recovery (c) });
  }
  if (m >= chain->unknown_shares) {
    fact (work, (struct fact) { .kind = FACT_SHARE, .relation = true, .stream = back, .of = rest,
                                .value = 0.6 });
  }
  if (m < chain->shares_twice) {
    fact (work, (struct fact) { .kind = FACT_SHARE, .relation = true, .stream = purge,
                                .of = rest, .value = 0.4 + chain->wrong });
  }
  double x = go_through (work, own);
  if (m < chain->told_fractions) {
    struct term *terms = ARENA_ARRAY (work->arena, C, struct term);
    for (size_t c = 0; c < C; c++) {
      terms[c] = (struct term) { rest * C + c, 1 };
    }
    fact (work, (struct fact) { .kind = FACT_RATIO, .left = { 1, terms }, .right = { C, terms },
                                .value = x });
  }
  feed (work, in + 5, own);
}

const struct network *
chain_make (struct arena *arena, const struct chain *chain)
{
  struct network *network = ARENA_NEW (arena, struct network);
  struct work work = { .arena = arena, .chain = chain, .network = network };
  double *x = ARENA_ARRAY (arena, C, double);
  for (size_t c = 0; c < C; c++) {
    x[c] = (double) (c + 1) / 21;
    work.top[c] = 100 * x[c];
  }
  work.x = x;
  work.boundary = ARENA_ARRAY (arena, CHAIN_BOUNDARIES * chain->rings, struct boundary);
  work.fact = ARENA_ARRAY (arena, (C + 5) * chain->rings + 2, struct fact);
  *network = (struct network) { .components = C, .streams = 1 + CHAIN_STREAMS * chain->rings,
                                .boundary = work.boundary, .fact = work.fact, .water = C };
  feed (&work, 0, 100);
  for (size_t m = 0; m < chain->rings; m++) {
    ring (&work, m, m == 0 ? 0 : 1 + CHAIN_STREAMS * (m - 1) + 1);
  }
  return network;
}
