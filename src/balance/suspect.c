#include "config.h"
#include "balance/conflict.h"

#include <math.h>
#include <string.h>
#include "balance/program.h"
#include "support/arena.h"
#include "support/fault.h"

enum { POINTS = 3 };

/* Values at generic solutions that differ by less are one, relative.  */
static const double same = 1e-7;
/* A flow below this part of the largest is nothing, and negative below minus that.  */
static const double nothing = 1e-9;

struct doubt {
  struct arena *arena;
  struct network network;        /* without the fact, or with what is left of it */
  struct fact *facts;
  bool *take;
};

/* Of a composition all but component C stays as it was: the others keep their proportions.  */
static void
keep_proportions (struct doubt *doubt, const struct fact *fact, size_t c)
{
  size_t components = doubt->network.components, first = fact->stream * components, largest = c;
  struct term *others = ARENA_ARRAY (doubt->arena, components, struct term);
  size_t count = 0;
  for (size_t k = 0; k < components; k++) {
    if (k != c) {
      others[count++] = (struct term) { first + k, 1 };
      largest = largest == c || fact->fractions[k] > fact->fractions[largest] ? k : largest;
    }
  }
  for (size_t i = 0; i < count; i++) {
    size_t k = others[i].column - first;
    if (k != largest && fact->fractions[c] < 1) {
      struct fact *ratio = &doubt->facts[doubt->network.facts];
      *ratio = (struct fact) { .kind = FACT_RATIO, .left = { 1, &others[i] },
                               .right = { count, others }, .u = (double) NAN, .weight = 1,
                               .value = fact->fractions[k] / (1 - fact->fractions[c]) };
      doubt->take[doubt->network.facts++] = true;
    }
  }
}

static struct doubt
doubt_make (struct arena *arena, const struct network *network, const bool take[],
            size_t count, const struct suspect suspects[])
{
  size_t most = network->facts + count * network->components;
  struct doubt doubt = { arena, *network, ARENA_ARRAY (arena, most, struct fact),
                         ARENA_ARRAY (arena, most, bool) };
  memcpy (doubt.facts, network->fact, network->facts * sizeof *doubt.facts);
  memcpy (doubt.take, take, network->facts * sizeof *doubt.take);
  doubt.network.fact = doubt.facts;
  for (size_t i = 0; i < count; i++) {
    const struct fact *fact = &network->fact[suspects[i].fact];
    doubt.take[suspects[i].fact] = false;
    if (fact->kind == FACT_COMPOSITION) {
      keep_proportions (&doubt, fact, suspects[i].component);
    }
  }
  return doubt;
}

/* What the fact says at V.  */
static double
say (const struct core *core, const struct suspect *suspect, const double v[])
{
  const struct fact *fact = &core->network->fact[suspect->fact];
  double part = 0, whole = 1;
  switch (fact->kind) {
  case FACT_FORM:
    return form_value (&fact->left, v);
  case FACT_RATIO:
    part = form_value (&fact->left, v);
    whole = form_value (&fact->right, v);
    break;
  case FACT_COMPOSITION:
    part = v[fact->stream * core->network->components + suspect->component];
    whole = system_total (core->system, v, fact->stream);
    break;
  case FACT_SHARE:
    part = system_total (core->system, v, fact->stream);
    whole = system_total (core->system, v, fact->of);
    break;
  }
  return fabs (whole) > 0 ? part / whole : (double) NAN;
}

/* Is the ratio one of a part to its whole, within one stream?  */
static bool
is_part (const struct core *core, const struct fact *fact)
{
  size_t components = core->network->components;
  if (fact->kind == FACT_COMPOSITION || fact->kind == FACT_SHARE) {
    return true;
  }
  for (size_t i = 0; i < fact->left.count && fact->kind == FACT_RATIO; i++) {
    bool found = false;
    for (size_t j = 0; j < fact->right.count; j++) {
      found = found || fact->right.terms[j].column == fact->left.terms[i].column;
    }
    if (!found || fact->left.terms[i].column / components
                  != fact->left.terms[0].column / components) {
      return false;
    }
  }
  return fact->kind == FACT_RATIO;
}

/* Does anything flow in every stream, and nothing backwards?  V lies inside the solutions without
   negative flows, if there are any.                                                             */
static bool
flows_forward (const struct core *core, const double v[])
{
  size_t components = core->network->components;
  double largest = 0;
  for (size_t j = 0; j < core->network->streams * components; j++) {
    largest = fmax (largest, fabs (v[j]));
  }
  for (size_t s = 0; s < core->network->streams; s++) {
    for (size_t c = 0; c < components; c++) {
      if (v[s * components + c] < -nothing * largest) {
        return false;
      }
    }
    if (system_parts (core->system, s) > 0
        && system_total (core->system, v, s) <= nothing * largest) {
      return false;
    }
  }
  return true;
}

/* How far a fact that the rest leaves open may reach: a flow, or a part of what is one number at
   the COUNT generic solutions V.                                                                */
static void
find_range (const struct core *rest, size_t count, double *const v[], struct suspect *suspect)
{
  const struct fact *fact = &rest->network->fact[suspect->fact];
  size_t first = fact->stream * rest->network->components;
  bool composed = fact->kind == FACT_COMPOSITION;
  struct term own = { composed ? first + suspect->component : 0, 1 };
  struct form left = composed ? (struct form) { 1, &own } : fact->left;
  double whole = 1;
  for (size_t i = 0; i < count && fact->kind != FACT_FORM; i++) {
    double here = composed ? system_total (rest->system, v[i], fact->stream)
                           : form_value (&fact->right, v[i]);
    bool other = i > 0 && !(fabs (here - whole) <= same * fabs (whole));
    whole = other ? (double) NAN : here;
  }
  if (fact->kind == FACT_SHARE || rest->freedom == 0 || !(whole > 0)) {
    return;
  }
  struct program *program = program_make (rest->arena, rest->system, rest->v, rest->system->null,
                                          rest->options->interrupted);
  if (program_feasible (program)) {
    suspect->least = fmax (program_least (program, &left) / whole, 0);
    suspect->greatest = program_greatest (program, &left) / whole;
  }
}

/* Asks the rest, which agrees.  What it leaves open is no reason against the fact.  */
static void
ask (const struct core *rest, struct suspect *suspect)
{
  bool can_be = true, part = is_part (rest, &rest->network->fact[suspect->fact]);
  double **v = core_generic (rest->arena, rest, POINTS);
  suspect->needed = say (rest, suspect, v[0]);
  for (size_t i = 0; i < POINTS; i++) {
    double other = say (rest, suspect, v[i]);
    can_be = can_be && other >= 0 && (!part || other <= 1 + same);
    if (!(fabs (other - suspect->needed) <= same * fabs (suspect->needed))) {
      suspect->needed = (double) NAN;
    }
  }
  suspect->plausible = can_be && flows_forward (rest, v[0]);
  if (isnan (suspect->needed) && suspect->plausible) {
    find_range (rest, POINTS, v, suspect);
  }
}

/* False: interrupted.  */
static bool
need (const struct core *core, const struct network *network, const bool take[], size_t count,
      struct suspect suspects[], struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct doubt doubt = doubt_make (arena, network, take, count, suspects);
  struct fault own;
  const struct core *rest;
  bool stopped;
  fault_init (&own, arena);
  rest = core_make (arena, &doubt.network, doubt.take, core->options, &own);
  stopped = own.kind == MESSAGE_INTERRUPTED && !fault_set (fault, own.kind, NULL, NULL);
  for (size_t i = 0; i < count; i++) {
    suspects[i].needed = suspects[i].least = suspects[i].greatest = (double) NAN;
    suspects[i].plausible = false;
    if (rest && rest->agree) {
      ask (rest, &suspects[i]);
    }
  }
  arena_destroy (arena);
  return !stopped;
}

bool
suspect_need (const struct core *core, const struct network *network, const bool take[],
              struct suspect *suspect, struct fault *fault)
{
  return need (core, network, take, 1, suspect, fault);
}

bool
suspects_need (const struct core *core, struct suspect suspects[], size_t count,
               struct fault *fault)
{
  return need (core, core->network, core->system->take, count, suspects, fault);
}

/* Marks the streams of a form, and of a fact.  */
static void
mark_form (const struct network *network, const struct form *form, bool used[])
{
  for (size_t t = 0; t < form->count; t++) {
    size_t stream = form->terms[t].column / network->components;
    if (stream < network->streams) {
      used[stream] = true;
    }
  }
}

static void
mark_fact (const struct network *network, const struct fact *fact, bool used[])
{
  mark_form (network, &fact->left, used);
  mark_form (network, &fact->right, used);
  if (fact->kind == FACT_COMPOSITION || fact->kind == FACT_SHARE) {
    used[fact->stream] = true;
  }
  if (fact->kind == FACT_SHARE) {
    used[fact->of] = true;
  }
}

const struct network *
network_part (struct arena *arena, const struct network *network, const bool keep[],
              const bool take[])
{
  struct network *part = ARENA_NEW (arena, struct network);
  struct boundary *boundary = ARENA_ARRAY (arena, network->boundaries + 1, struct boundary);
  size_t flows = network->streams * network->components;
  bool *possible = ARENA_ARRAY (arena, flows + 1, bool);
  size_t *denied = ARENA_ARRAY (arena, flows + 1, size_t);
  bool *used = ARENA_ARRAY (arena, network->streams + 1, bool);
  for (size_t b = 0; b < network->boundaries; b++) {
    boundary[b] = network->boundary[b];
    if (!keep[b]) {
      boundary[b].kind = BOUNDARY_MIX;
      boundary[b].inlet_count = boundary[b].outlet_count = 0;
    }
    for (size_t i = 0; i < boundary[b].inlet_count; i++) {
      used[boundary[b].inlets[i]] = true;
    }
    for (size_t i = 0; i < boundary[b].outlet_count; i++) {
      used[boundary[b].outlets[i]] = true;
    }
  }
  for (size_t f = 0; f < network->facts; f++) {
    if (take[f]) {
      mark_fact (network, &network->fact[f], used);
    }
  }
  for (size_t j = 0; j < flows; j++) {
    possible[j] = used[j / network->components] && (!network->possible || network->possible[j]);
    denied[j] = used[j / network->components] && network->denied ? network->denied[j] : NOWHERE;
  }
  *part = *network;
  part->boundary = boundary;
  part->possible = possible;
  part->denied = denied;
  return part;
}
