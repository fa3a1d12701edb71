#include "config.h"
#include "metered.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "balance/reconcile.h"
#include "balance/system.h"
#include "support/fault.h"

void
metered_init (struct metered *plant, size_t components, size_t streams)
{
  struct arena *arena = arena_create ();
  *plant = (struct metered) { .arena = arena };
  plant->boundary = ARENA_ARRAY (arena, METERED_MOST, struct boundary);
  plant->fact = ARENA_ARRAY (arena, 4 * METERED_MOST, struct fact);
  plant->network = (struct network) { .components = components, .streams = streams,
                                      .water = components, .boundary = plant->boundary,
                                      .fact = plant->fact };
}

void
metered_clear (struct metered *plant)
{
  arena_destroy (plant->arena);
}

void
metered_boundary_of (struct metered *plant, enum boundary_kind kind, size_t ins, const size_t in[],
                   size_t outs, const size_t out[])
{
  size_t *streams = ARENA_ARRAY (plant->arena, ins + outs, size_t);
  memcpy (streams, in, ins * sizeof *in);
  memcpy (streams + ins, out, outs * sizeof *out);
  plant->boundary[plant->network.boundaries++]
    = (struct boundary) { .kind = kind, .inlet_count = ins, .outlet_count = outs,
                          .inlets = streams, .outlets = streams + ins };
}

void
metered_boundary (struct metered *plant, enum boundary_kind kind, const char *streams)
{
  size_t list[2][20], count[2] = { 0, 0 }, side = 0;
  char *end;
  for (const char *at = streams; *at; at = end) {
    at += strspn (at, " ");
    if (*at == '=') {
      side = 1;
      at++;
    }
    list[side][count[side]++] = (size_t) strtoul (at, &end, 10);
  }
  metered_boundary_of (plant, kind, count[0], list[0], count[1], list[1]);
}

struct form
metered_stream (struct metered *plant, size_t stream)
{
  size_t parts = plant->network.components;
  struct term *terms = ARENA_ARRAY (plant->arena, parts, struct term);
  for (size_t c = 0; c < parts; c++) {
    terms[c] = (struct term) { stream * parts + c, 1 };
  }
  return (struct form) { parts, terms };
}

struct form
metered_column (struct metered *plant, size_t stream, size_t component)
{
  struct term *term = ARENA_NEW (plant->arena, struct term);
  *term = (struct term) { stream * plant->network.components + component, 1 };
  return (struct form) { 1, term };
}

static struct fact *
add_fact (struct metered *plant, struct fact fact)
{
  fact.weight = 1;
  plant->fact[plant->network.facts] = fact;
  return &plant->fact[plant->network.facts++];
}

struct fact *
metered_total (struct metered *plant, size_t stream, double value, double u)
{
  return add_fact (plant, (struct fact) { .kind = FACT_FORM, .left = metered_stream (plant, stream),
                                          .value = value, .u = u });
}

struct fact *
metered_ratio (struct metered *plant, struct form left, struct form right, double value, double u)
{
  return add_fact (plant, (struct fact) { .kind = FACT_RATIO, .left = left, .right = right,
                                          .value = value, .u = u });
}

struct fact *
metered_fraction (struct metered *plant, size_t stream, size_t component, double value, double u)
{
  return metered_ratio (plant, metered_column (plant, stream, component),
                        metered_stream (plant, stream), value, u);
}

struct fact *
metered_composition (struct metered *plant, size_t stream, const double x[], const double u[])
{
  size_t parts = plant->network.components;
  double *copy = ARENA_ARRAY (plant->arena, 2 * parts, double);
  memcpy (copy, x, parts * sizeof *x);
  if (u) {
    memcpy (copy + parts, u, parts * sizeof *u);
  }
  return add_fact (plant, (struct fact) { .kind = FACT_COMPOSITION, .stream = stream,
                                          .fractions = copy, .u = (double) NAN,
                                          .fractions_u = u ? copy + parts : NULL });
}

struct fact *
metered_share (struct metered *plant, size_t stream, size_t of, double value, double u)
{
  return add_fact (plant, (struct fact) { .kind = FACT_SHARE, .stream = stream, .of = of,
                                          .value = value, .u = u, .relation = true });
}

bool
metered_reconcile (struct metered *plant, struct solution *solution, int *kind)
{
  static const struct solve_options options = { 0.95, NULL };
  struct fault fault;
  bool *take = ARENA_ARRAY (plant->arena, plant->network.facts + 1, bool);
  for (size_t f = 0; f < plant->network.facts; f++) {
    take[f] = isnan (plant->fact[f].u);
  }
  fault_init (&fault, plant->arena);
  *solution = (struct solution) { .status = BALANCE_DETERMINED };
  struct system *system = system_make (plant->arena, &plant->network, take, NULL);
  bool done = system_reconcile (plant->arena, system, &options, solution, &fault);
  *kind = (int) fault.kind;
  return done;
}

double
metered_total_value (const struct metered *plant, const struct solution *solution, size_t stream)
{
  double sum = 0;
  for (size_t c = 0; c < plant->network.components; c++) {
    sum += solution->value[stream * plant->network.components + c];
  }
  return sum;
}

double
metered_total_u (struct metered *plant, const struct solution *solution, size_t stream)
{
  struct form total = metered_stream (plant, stream);
  return solution_uncertainty (solution, &plant->network, &total, NULL);
}

/* Knuth's MMIX multiplier and increment.  */
double
metered_uniform (unsigned long long *state)
{
  *state = *state * 6364136223846793005ull + 1442695040888963407ull;
  return ((double) (*state >> 11) + 0.5) / 9007199254740992.0;
}

double
metered_normal (unsigned long long *state)
{
  static const double two_pi = 6.283185307179586;
  double radius = sqrt (-2 * log (metered_uniform (state)));
  return radius * cos (two_pi * metered_uniform (state));
}
