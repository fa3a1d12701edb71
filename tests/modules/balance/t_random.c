#include "config.h"

#include <math.h>
#include <string.h>

#include "libtest.h"
#include "balance/reduce.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/fault.h"

/* Random plants with true flows, and some facts about them that are exact.  Whatever is said to be
   fixed must be as it is, ranges must hold the truth, what is suggested must close the plant, and a
   figure made wrong must be found.                                                              */

enum { SEED = 1957, PLANTS = 250, MOST_STREAMS = 60, MOST_COMPONENTS = 5, MOST_FACTS = 400 };

static const struct solve_options usual = { 0.95, NULL };

struct plant {
  struct arena *arena;
  unsigned long long state;
  size_t components, streams, boundaries, facts;
  double flow[MOST_STREAMS * MOST_COMPONENTS];
  struct boundary boundary[MOST_STREAMS];
  struct fact fact[MOST_FACTS];
  size_t open[MOST_STREAMS], open_count;         /* streams that end nowhere so far */
  bool tell_shares;
};

static size_t
below (struct plant *plant, size_t n)
{
  plant->state = plant->state * 6364136223846793005ULL + 1442695040888963407ULL;
  return (size_t) (plant->state >> 33) % n;
}

static double
between (struct plant *plant, double least, double most)
{
  return least + (most - least) * (double) below (plant, 1000001) / 1e6;
}

static double *
flows (struct plant *plant, size_t stream)
{
  return &plant->flow[stream * plant->components];
}

static size_t
new_stream (struct plant *plant)
{
  plant->open[plant->open_count++] = plant->streams;
  return plant->streams++;
}

static size_t
take_open (struct plant *plant)
{
  size_t at = below (plant, plant->open_count), stream = plant->open[at];
  plant->open[at] = plant->open[--plant->open_count];
  return stream;
}

static const size_t *
list_of (struct plant *plant, size_t a, size_t b)
{
  size_t *list = ARENA_ARRAY (plant->arena, 2, size_t);
  list[0] = a;
  list[1] = b;
  return list;
}

static void
add_boundary (struct plant *plant, enum boundary_kind kind, size_t ins, const size_t *in,
              size_t outs, const size_t *out)
{
  plant->boundary[plant->boundaries++] = (struct boundary) { kind, ins, outs, 0, in, out, NULL };
}

static size_t
add_source (struct plant *plant)
{
  size_t stream = new_stream (plant);
  for (size_t c = 0; c < plant->components; c++) {
    flows (plant, stream)[c] = between (plant, 1, 100);
  }
  return stream;
}

static struct form
form_of (struct plant *plant, size_t stream, size_t component)
{
  struct term *terms = ARENA_ARRAY (plant->arena, plant->components, struct term);
  size_t count = 0;
  for (size_t c = 0; c < plant->components; c++) {
    if (component == plant->components || component == c) {
      terms[count++] = (struct term) { stream * plant->components + c, 1 };
    }
  }
  return (struct form) { count, terms };
}

static void
add_fact (struct plant *plant, struct fact fact)
{
  fact.u = (double) NAN;
  fact.weight = 1;
  if (fact.kind == FACT_FORM) {
    fact.value = form_value (&fact.left, plant->flow);
  } else if (fact.kind == FACT_RATIO) {
    fact.value = form_value (&fact.left, plant->flow) / form_value (&fact.right, plant->flow);
  }
  plant->fact[plant->facts++] = fact;
}

static void
add_total (struct plant *plant, size_t stream)
{
  add_fact (plant, (struct fact) { .left = form_of (plant, stream, plant->components) });
}

static void
add_fraction (struct plant *plant, size_t stream, size_t c)
{
  add_fact (plant, (struct fact) { .kind = FACT_RATIO, .left = form_of (plant, stream, c),
                                   .right = form_of (plant, stream, plant->components) });
}

static void
add_share (struct plant *plant, size_t outlet, size_t inlet, double share)
{
  add_fact (plant, (struct fact) { .kind = FACT_SHARE, .relation = true, .value = share,
                                   .stream = outlet, .of = inlet });
}

static void
add_composition (struct plant *plant, size_t stream)
{
  double *x = ARENA_ARRAY (plant->arena, plant->components, double), sum = 0;
  for (size_t c = 0; c < plant->components; c++) {
    sum += flows (plant, stream)[c];
  }
  for (size_t c = 0; c < plant->components; c++) {
    x[c] = flows (plant, stream)[c] / sum;
  }
  add_fact (plant, (struct fact) { .kind = FACT_COMPOSITION, .stream = stream, .fractions = x });
}

/* Two streams become one.  */
static void
add_mixer (struct plant *plant)
{
  size_t a = take_open (plant), b, out;
  if (plant->open_count == 0) {
    (void) add_source (plant);
  }
  b = take_open (plant);
  out = new_stream (plant);
  for (size_t c = 0; c < plant->components; c++) {
    flows (plant, out)[c] = flows (plant, a)[c] + flows (plant, b)[c];
  }
  add_boundary (plant, BOUNDARY_MIX, 2, list_of (plant, a, b), 1, list_of (plant, out, 0));
}

/* One becomes two; recoveries are told or not.  */
static void
add_separator (struct plant *plant)
{
  size_t in = take_open (plant), a = new_stream (plant), b = new_stream (plant);
  for (size_t c = 0; c < plant->components; c++) {
    double part = between (plant, 0.05, 0.95);
    flows (plant, a)[c] = part * flows (plant, in)[c];
    flows (plant, b)[c] = (1 - part) * flows (plant, in)[c];
    if (below (plant, 5) > 0) {
      add_fact (plant, (struct fact) { .kind = FACT_RATIO, .relation = true,
                                       .left = form_of (plant, a, c),
                                       .right = form_of (plant, in, c) });
    }
  }
  add_boundary (plant, BOUNDARY_SEPARATE, 1, list_of (plant, in, 0), 2, list_of (plant, a, b));
}

static void
add_split (struct plant *plant)
{
  size_t in = take_open (plant), a = new_stream (plant), b = new_stream (plant);
  double part = between (plant, 0.1, 0.9);
  for (size_t c = 0; c < plant->components; c++) {
    flows (plant, a)[c] = part * flows (plant, in)[c];
    flows (plant, b)[c] = (1 - part) * flows (plant, in)[c];
  }
  if (plant->tell_shares) {
    add_share (plant, a, in, part);
  }
  add_boundary (plant, BOUNDARY_SPLIT, 1, list_of (plant, in, 0), 2, list_of (plant, a, b));
}

/* Mixer, separator and split in a ring: what enters the ring is f / (1 - (1 - r) s) for recovery r
   and share s sent back.                                                                        */
static void
add_ring (struct plant *plant)
{
  size_t feed = take_open (plant), in = plant->streams++, top = new_stream (plant);
  size_t rest = plant->streams++, purge = new_stream (plant), back = plant->streams++;
  double s = between (plant, 0.1, 0.9);
  for (size_t c = 0; c < plant->components; c++) {
    double r = between (plant, 0.1, 0.9);
    flows (plant, in)[c] = flows (plant, feed)[c] / (1 - (1 - r) * s);
    flows (plant, top)[c] = r * flows (plant, in)[c];
    flows (plant, rest)[c] = (1 - r) * flows (plant, in)[c];
    flows (plant, back)[c] = s * flows (plant, rest)[c];
    flows (plant, purge)[c] = (1 - s) * flows (plant, rest)[c];
    add_fact (plant, (struct fact) { .kind = FACT_RATIO, .relation = true,
                                     .left = form_of (plant, top, c),
                                     .right = form_of (plant, in, c) });
  }
  add_share (plant, back, rest, s);
  add_boundary (plant, BOUNDARY_MIX, 2, list_of (plant, feed, back), 1, list_of (plant, in, 0));
  add_boundary (plant, BOUNDARY_SEPARATE, 1, list_of (plant, in, 0), 2,
                list_of (plant, top, rest));
  add_boundary (plant, BOUNDARY_SPLIT, 1, list_of (plant, rest, 0), 2,
                list_of (plant, back, purge));
}

static struct network
network_of (const struct plant *plant)
{
  return (struct network) { .components = plant->components, .streams = plant->streams,
                            .boundaries = plant->boundaries, .facts = plant->facts,
                            .boundary = plant->boundary, .fact = plant->fact,
                            .water = plant->components };
}

/* Sources told by flow and composition, now and then by less; some facts more.  */
static void
make (struct plant *plant, unsigned number)
{
  size_t sources;
  memset (plant, 0, sizeof *plant);
  plant->arena = arena_create ();
  plant->state = SEED + 977 * number;
  plant->components = 1 + below (plant, MOST_COMPONENTS);
  plant->tell_shares = number % 4 > 0;
  sources = 1 + below (plant, 3);
  for (size_t s = 0; s < sources; s++) {
    (void) add_source (plant);
  }
  for (size_t u = 2 + below (plant, 6); u > 0; u--) {
    size_t kind = below (plant, 8);
    if (kind < 3) {
      add_mixer (plant);
    } else if (kind < 6) {
      add_separator (plant);
    } else if (kind < 7) {
      add_split (plant);
    } else {
      add_ring (plant);
    }
  }
  for (size_t s = 0; s < sources; s++) {
    if (below (plant, 6) > 0) {
      add_composition (plant, s);
    }
    if (below (plant, 6) > 0) {
      add_total (plant, s);
    }
  }
  for (size_t n = below (plant, 4); n > 0; n--) {
    size_t stream = below (plant, plant->streams);
    if (below (plant, 2) > 0) {
      add_total (plant, stream);
    } else {
      add_fraction (plant, stream, below (plant, plant->components));
    }
  }
}

static const struct solution *
solve (struct plant *plant)
{
  struct network network = network_of (plant);
  struct fault fault;
  const struct solution *solution;
  fault_init (&fault, plant->arena);
  solution = network_solve (plant->arena, &network, &usual, &fault);
  CHECK (solution != NULL);
  return solution;
}

static double
total_of (const struct plant *plant, const double v[], size_t stream)
{
  double sum = 0;
  for (size_t c = 0; c < plant->components; c++) {
    sum += v[stream * plant->components + c];
  }
  return sum;
}

static bool
close_to (double got, double want)
{
  return fabs (got - want) <= 1e-6 * fabs (want) + 1e-7;
}

/* What is fixed is true, and the truth lies in the ranges.  */
static void
holds_truth (struct plant *plant, const struct solution *solution)
{
  CHECK (solution->conflict == NULL);
  CHECK (solution->mismatch < 1e-9);
  for (size_t s = 0; s < plant->streams && solution->other_count == 0; s++) {
    double total = total_of (plant, plant->flow, s);
    if (solution->fixed_total[s]) {
      CHECK (close_to (total_of (plant, solution->value, s), total));
    } else if (solution->total_range) {
      CHECK (solution->total_range[s].least <= total * (1 + 1e-7) + 1e-7);
      CHECK (solution->total_range[s].greatest >= total * (1 - 1e-7) - 1e-7);
    }
    for (size_t j = s * plant->components; j < (s + 1) * plant->components; j++) {
      CHECK (!solution->fixed[j] || close_to (solution->value[j], plant->flow[j]));
      CHECK (!solution->fixed_fraction[j]
             || close_to (solution->fraction[j], plant->flow[j] / total));
      CHECK (solution->fixed[j] || !solution->range
             || (solution->range[j].least <= plant->flow[j] * (1 + 1e-7) + 1e-7
                 && solution->range[j].greatest >= plant->flow[j] * (1 - 1e-7) - 1e-7));
    }
  }
}

/* Missing + rank = variables, and the rank is that of another way of elimination.  */
static void
counts_hold (struct plant *plant, const struct solution *solution)
{
  struct network network = network_of (plant);
  bool take[MOST_FACTS];
  struct system *dense, *sparse;
  for (size_t f = 0; f < plant->facts; f++) {
    take[f] = true;
  }
  dense = system_make (plant->arena, &network, take, NULL);
  sparse = system_make (plant->arena, &network, take, NULL);
  system_reduce (plant->arena, dense, 10000);
  system_reduce (plant->arena, sparse, 0);
  SAME_INT (dense->rank, sparse->rank);
  SAME_INT (dense->surplus, sparse->surplus);
  SAME_INT (solution->count.variables, solution->count.rank + solution->count.missing);
  if (dense->bends == 0) {
    SAME_INT (solution->count.missing, dense->freedom);
    SAME_INT (solution->count.surplus, dense->surplus);
  }
}

/* The first of each group of suggestions, said truly, closes the plant.  */
static void
suggestions_close (struct plant *plant, const struct solution *solution)
{
  size_t group = 0, missing = solution->count.missing;
  for (size_t i = 0; i < solution->suggestion_count && group < missing; i++) {
    const struct quantity *quantity = &solution->suggestions[i].quantity;
    if (solution->suggestions[i].group == group) {
      group++;
      if (quantity->kind == QUANTITY_TOTAL) {
        add_total (plant, quantity->stream);
      } else if (quantity->kind == QUANTITY_FRACTION) {
        add_fraction (plant, quantity->stream, quantity->component);
      } else if (quantity->kind == QUANTITY_COMPONENT) {
        add_fact (plant, (struct fact) { .left = form_of (plant, quantity->stream,
                                                          quantity->component) });
      }
    }
  }
  SAME_INT (group, missing);
  solution = solve (plant);
  if (solution) {
    SAME_INT (solution->count.missing, 0);
    holds_truth (plant, solution);
  }
}

static void
plants_are_true (void)
{
  static struct plant plant;
  size_t open = 0, spare = 0, bent = 0;
  for (unsigned n = 0; n < PLANTS; n++) {
    const struct solution *solution;
    test_about ("seed %d, plant %u", (int) SEED, n);
    make (&plant, n);
    solution = solve (&plant);
    if (solution) {
      holds_truth (&plant, solution);
      counts_hold (&plant, solution);
      open += solution->count.missing > 0 ? 1 : 0;
      spare += solution->count.surplus > 0 ? 1 : 0;
      bent += plant.tell_shares ? 0 : 1;
      if (solution->count.missing > 0 && plant.tell_shares) {
        suggestions_close (&plant, solution);
      }
    }
    arena_destroy (plant.arena);
  }
  CHECK (open > 20 && spare > 20 && bent > 20);
}

/* Do the facts of the conflict clash, all of them, and not without any one?  */
static void
is_irreducible (struct plant *plant, const struct conflict *conflict)
{
  struct fact all[MOST_FACTS];
  size_t facts = plant->facts;
  memcpy (all, plant->fact, sizeof all);
  for (size_t without = 0; without <= conflict->count; without++) {
    const struct solution *solution;
    struct network network;
    struct fault fault;
    plant->facts = 0;
    for (size_t i = 0; i < conflict->count; i++) {
      if (i != without) {
        plant->fact[plant->facts++] = all[conflict->suspects[i].fact];
      }
    }
    network = network_of (plant);
    fault_init (&fault, plant->arena);
    solution = network_solve (plant->arena, &network, &usual, &fault);
    if (solution) {
      /* Fractions may clash without a flow among the facts; then there is no gap.  */
      bool clash = solution->conflict && !isnan (solution->conflict->gap);
      SAME_INT (clash || (without == conflict->count && solution->conflict),
                without == conflict->count);
    } else {
      /* A share left out may leave an equation with no root.  */
      SAME_INT (fault.kind, MESSAGE_NOT_CONVERGED);
    }
  }
  memcpy (plant->fact, all, sizeof all);
  plant->facts = facts;
}

/* One checkable figure is made wrong.  With one fact to spare it is in the set, and what it would
   have to say is what it said.                                                                  */
static void
wrong_figures_are_found (void)
{
  static struct plant plant;
  size_t tried = 0;
  for (unsigned n = 0; n < PLANTS; n++) {
    const struct solution *solution;
    size_t f;
    test_about ("seed %d, plant %u", (int) SEED, n);
    make (&plant, n);
    solution = solve (&plant);
    f = below (&plant, plant.facts);
    for (size_t i = 0; i < plant.facts && solution && !solution->checkable[f]; i++) {
      f = (f + 1) % plant.facts;
    }
    if (solution && plant.tell_shares && solution->checkable[f]
        && plant.fact[f].kind != FACT_COMPOSITION && plant.fact[f].value < 0.7) {
      double was = plant.fact[f].value;
      bool found = false;
      plant.fact[f].value *= 1.3;
      solution = solve (&plant);
      CHECK (solution && solution->status == BALANCE_CONTRADICTORY);
      for (size_t i = 0; solution && solution->conflict && i < solution->conflict->count; i++) {
        const struct suspect *suspect = &solution->conflict->suspects[i];
        if (suspect->fact == f) {
          found = true;
          CHECK (isnan (suspect->needed) || close_to (suspect->needed, was));
        }
      }
      if (solution && solution->conflict) {
        CHECK (found || solution->count.surplus > 1);
        is_irreducible (&plant, solution->conflict);
      }
      tried++;
    }
    arena_destroy (plant.arena);
  }
  CHECK (tried > 20);
}

static const struct test_case cases[] = {
  { "what is fixed is true, ranges hold the truth, suggestions close", plants_are_true },
  { "a wrong figure is in a clash that cannot be made smaller", wrong_figures_are_found },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
