#include "config.h"
#include "balance/settle.h"

#include <math.h>
#include <string.h>
#include "balance/conflict.h"
#include "balance/null_space.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/fault.h"

/* How far a figure that was moved may still be out, relative.  */
static const double after_moving = 1e-6;
/* A total below this part of the largest flow is nothing.  */
static const double no_flow = 1e-11;
/* Streams looked after.  */
enum { MOST_IDLE = 20 };

static struct fact
settled (struct arena *arena, const struct network *network, const struct fact *fact,
         const double v[])
{
  struct fact out = *fact;
  size_t components = network->components;
  double whole = 1, part = form_value (&fact->left, v);
  double *x = ARENA_ARRAY (arena, components, double);
  double *rounding = ARENA_ARRAY (arena, components, double);
  if (fact->kind == FACT_RATIO) {
    whole = form_value (&fact->right, v);
  } else if (fact->kind != FACT_FORM) {
    size_t over = fact->kind == FACT_SHARE ? fact->of : fact->stream;
    part = whole = 0;
    for (size_t c = 0; c < components; c++) {
      part += v[fact->stream * components + c];
      whole += v[over * components + c];
    }
  }
  out.u = (double) NAN;
  out.fractions_u = NULL;
  if (fabs (whole) > 0) {
    out.value = part / whole;
    out.rounding = fabs (out.value) * after_moving;
    for (size_t c = 0; c < components && fact->kind == FACT_COMPOSITION; c++) {
      x[c] = fmax (v[fact->stream * components + c] / whole, 0);
      rounding[c] = x[c] * after_moving;
    }
    out.fractions = fact->kind == FACT_COMPOSITION ? x : fact->fractions;
    out.fractions_rounding = fact->kind == FACT_COMPOSITION ? rounding : NULL;
  }
  return out;
}

const struct network *
network_settle (struct arena *arena, const struct network *network, const bool moved[],
                const double v[])
{
  struct network *out = ARENA_NEW (arena, struct network);
  struct fact *facts = ARENA_ARRAY (arena, network->facts + 1, struct fact);
  for (size_t f = 0; f < network->facts; f++) {
    facts[f] = moved[f] && v ? settled (arena, network, &network->fact[f], v)
                             : network->fact[f];
  }
  *out = *network;
  out->fact = facts;
  return out;
}

/* ---- Idle streams ---- */

/* The first stream from FROM on that could have a flow and has none in any solution; NOWHERE.  */
static size_t
idle_stream (const struct core *core, size_t from)
{
  const struct network *network = core->network;
  size_t components = network->components;
  double largest = 0;
  for (size_t j = 0; j < network->streams * components; j++) {
    largest = fmax (largest, fabs (core->v[j]));
  }
  for (size_t s = from; s < network->streams; s++) {
    double size = 0;
    for (size_t j = s * components; j < (s + 1) * components; j++) {
      size = fmax (size, null_space_reach (core->null, j));
      size = fmax (size, largest > 0 ? fabs (core->v[j]) / largest : 0);
    }
    if (system_parts (core->system, s) > 0 && size <= no_flow) {
      return s;
    }
  }
  return NOWHERE;
}

/* The network of CORE with a flow in the stream as one more fact, the last.  */
static const struct network *
with_flow (const struct core *core, size_t stream)
{
  struct arena *arena = core->arena;
  const struct network *network = core->typed;
  struct network *out = ARENA_NEW (arena, struct network);
  struct fact *facts = ARENA_ARRAY (arena, network->facts + 1, struct fact);
  struct term *terms = ARENA_ARRAY (arena, network->components, struct term);
  for (size_t c = 0; c < network->components; c++) {
    terms[c] = (struct term) { stream * network->components + c, 1 };
  }
  memcpy (facts, network->fact, network->facts * sizeof *facts);
  facts[network->facts] = (struct fact) { .kind = FACT_FORM, .value = 1, .u = (double) NAN,
                                          .left = { network->components, terms },
                                          .weight = 1 };
  *out = *network;
  out->fact = facts;
  out->facts++;
  return out;
}

/* The facts of CORE, and those behind them.  */
static bool *
facts_taken (const struct core *core, const struct network *network)
{
  bool *take = ARENA_ARRAY (core->arena, network->facts + 1, bool);
  for (size_t f = 0; f < network->facts; f++) {
    take[f] = f >= core->network->facts || core->system->take[f];
  }
  return take;
}

/* Is any flow in the clash, but that which was put in?  */
static bool
speaks_of_flows (const struct core *flowing, const struct conflict *conflict)
{
  const struct network *network = flowing->network;
  for (size_t i = 0; i < conflict->count; i++) {
    size_t f = conflict->suspects[i].fact;
    if (f + 1 < network->facts && network->fact[f].kind == FACT_FORM
        && fabs (network->fact[f].value) > 0) {
      return true;
    }
  }
  return false;
}

/* The clash without the flow that was put in, which says nothing about what it is out by.  */
static const struct conflict *
without_flow (struct arena *keep, const struct core *flowing, const struct conflict *conflict,
              size_t stream)
{
  struct conflict *out = ARENA_NEW (keep, struct conflict);
  struct suspect *suspects = ARENA_ARRAY (keep, conflict->count + 1, struct suspect);
  *out = *conflict;
  out->count = 0;
  for (size_t i = 0; i < conflict->count; i++) {
    if (conflict->suspects[i].fact + 1 < flowing->network->facts) {
      suspects[out->count++] = conflict->suspects[i];
    }
  }
  out->suspects = suspects;
  out->gap = (double) NAN;
  out->still = stream;
  out->around = ARENA_ARRAY (keep, flowing->network->boundaries + 1, bool);
  return out;
}

/* One idle stream: does a flow in it clash with fractions and ratios?  */
static bool
try_flow (struct arena *keep, struct idle *idle, size_t stream, struct fault *fault)
{
  const struct core *core = idle->core, *flowing;
  const struct network *network = with_flow (core, stream);
  bool *take = facts_taken (core, network);
  struct solution solution = { .status = BALANCE_CONTRADICTORY };
  struct fault own;
  fault_init (&own, core->arena);
  flowing = core_make (core->arena, network, take, core->options, &own);
  if (!flowing) {
    return own.kind != MESSAGE_INTERRUPTED || fault_set (fault, own.kind, NULL, NULL);
  }
  if (flowing->agree) {
    const struct network *moved;
    struct network less = *network;
    less.facts--;
    moved = network_settle (core->arena, &less, take, flowing->v);
    idle->core = core_make (core->arena, moved, take, core->options, fault);
    return idle->core != NULL;
  }
  if (!conflict_find (keep, flowing, &solution, fault)) {
    return false;
  }
  if (!speaks_of_flows (flowing, solution.conflict)) {
    const struct conflict *clash = without_flow (keep, flowing, solution.conflict, stream);
    idle->conflict = clash->count > 1 ? clash : NULL;   /* one alone means it: all goes elsewhere */
  }
  return true;
}

bool
idle_look (struct arena *keep, struct idle *idle, struct fault *fault)
{
  size_t stream = 0;
  for (int n = 0; n < MOST_IDLE && idle->core->agree && !idle->conflict; n++) {
    stream = idle_stream (idle->core, stream);
    if (stream == NOWHERE) {
      return true;
    }
    if (!try_flow (keep, idle, stream++, fault)) {
      return false;
    }
  }
  return true;
}
