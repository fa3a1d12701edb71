#include "config.h"
#include "balance/solution.h"

#include <math.h>
#include <string.h>
#include "balance/conflict.h"
#include "balance/core.h"
#include "balance/fixed.h"
#include "balance/loose.h"
#include "balance/measured.h"
#include "balance/rank.h"
#include "balance/reconcile.h"
#include "balance/reduce.h"
#include "balance/settle.h"
#include "balance/still.h"
#include "balance/suggest.h"
#include "support/arena.h"
#include "support/fault.h"

/* A stream of less than this part of the largest flow has none.  */
static const double idle_below = 1e-9;
/* A fact whose row in the left null space is less than this is checked by nothing.  */
static const double unchecked = 1e-8;

/* Outlets of a split that carry nothing have no composition to be equal.  */
static size_t
full_outlets (const struct system *system, const struct boundary *boundary)
{
  size_t full = 0;
  for (size_t o = 0; o < boundary->outlet_count; o++) {
    full += system_parts (system, boundary->outlets[o]) > 0 ? 1 : 0;
  }
  return full;
}

static struct count
count_up (const struct core *core)
{
  double *have = ARENA_ARRAY (core->arena, core->system->columns + 1, double);
  const struct network *network = core->network;
  const struct system *system = core->system;
  struct count count = { .variables = system->present, .missing = core->freedom,
                         .surplus = core->surplus };
  for (size_t i = 0; i < system->structure; i++) {
    count.balances += system->rows.row[i].kind == ROW_BALANCE ? 1 : 0;
  }
  for (size_t b = 0; b < network->boundaries; b++) {
    const struct boundary *boundary = &network->boundary[b];
    if (boundary->kind == BOUNDARY_SPLIT && boundary->outlet_count > 0) {
      size_t parts = system_parts (system, boundary->inlets[0]);
      size_t outlets = full_outlets (system, boundary);
      count.relations += parts > 0 && outlets > 0 ? (outlets - 1) * (parts - 1) : 0;
    }
  }
  for (size_t f = 0; f < network->facts; f++) {
    const struct fact *fact = &network->fact[f];
    size_t parts = fact->kind == FACT_COMPOSITION ? system_parts (system, fact->stream) : 2;
    if (fact->absence) {
      continue;
    }
    if (system->take[f] && absence_is_all (network, &system->absence, f, have)) {
      continue;                         /* its variables are not counted either */
    }
    if (fact->relation) {
      count.relations++;
    } else {
      count.knowns += parts > 0 ? parts - 1 : 0;
    }
  }
  count.rank = count.variables - count.missing;
  return count;
}

/* The largest mismatch of any equation, relative to the largest flow.  */
static double
mismatch (const struct core *core, const double v[])
{
  const struct system *system = core->system;
  struct rows bent = system_bent (core->arena, system, v);
  double most = 0, largest = 0;
  for (size_t j = 0; j < core->network->streams * core->network->components; j++) {
    largest = fmax (largest, fabs (v[j]));
  }
  for (size_t i = 0; i < system->rows.count; i++) {
    most = fmax (most, fabs (rows_residual (&system->rows, i, v)));
  }
  for (size_t i = 0; i < bent.count; i++) {
    most = fmax (most, fabs (bent.right[i]));
  }
  return largest > 0 ? most / largest : 0;
}

/* What crosses the network's edge, into it or out of it, in kg/s, or in the flows' own unit where
   there are no molar masses.                                                                    */
static double
edge_mass (const struct core *core, const struct solution *solution, bool in)
{
  const struct network *network = core->network;
  bool *inner = ARENA_ARRAY (core->arena, network->streams + 1, bool);
  double sum = 0;
  for (size_t b = 0; b < network->boundaries; b++) {
    const struct boundary *boundary = &network->boundary[b];
    size_t count = in ? boundary->outlet_count : boundary->inlet_count;
    for (size_t i = 0; i < count; i++) {
      inner[in ? boundary->outlets[i] : boundary->inlets[i]] = true;
    }
  }
  for (size_t j = 0; j < network->streams * network->components; j++) {
    if (!inner[j / network->components]) {
      double mass = network->molar_mass ? network->molar_mass[j % network->components] : 1;
      sum += solution->fixed[j] ? mass * solution->value[j] : (double) NAN;
    }
  }
  return sum;
}

/* Which facts could anything else contradict, and which do the others imply: those all of whose
   rows the left null space can do without.                                                      */
static void
find_redundant (struct arena *keep, const struct core *core, struct solution *solution)
{
  const struct system *system = core->system;
  size_t facts = core->network->facts, count = 0;
  size_t k = system->left ? system->surplus : core->network->components + 1;
  const double *all = system->left ? system->left : system_left_mixed (core->arena, system, k);
  bool *checkable = ARENA_ARRAY (keep, facts + 1, bool);
  size_t *redundant = ARENA_ARRAY (keep, facts + 1, size_t);
  size_t end;
  for (size_t i = system->structure; i < system->rows.count; i = end) {
    size_t fact = system->rows.row[i].of, width;
    const double *left = &all[(i - system->structure) * k];
    struct space space;
    for (end = i; end < system->rows.count && system->rows.row[end].of == fact; end++) {
      for (size_t c = 0; c < k; c++) {
        double size = fabs (left[(end - i) * k + c]);
        checkable[fact] = checkable[fact] || size > unchecked;
      }
    }
    width = end - i;
    if (checkable[fact]) {
      space = space_make (core->arena, width, k, left);
      if (space.rank == width) {
        redundant[count++] = fact;
      }
    }
  }
  solution->checkable = checkable;
  solution->redundant = redundant;
  solution->redundant_count = count;
}

static enum balance_status
status_of (const struct core *core)
{
  if (!core->agree) {
    return BALANCE_CONTRADICTORY;
  }
  if (core->freedom > 0) {
    return BALANCE_UNDERDETERMINED;
  }
  return core->surplus > 0 ? BALANCE_REDUNDANT : BALANCE_DETERMINED;
}

static void
copy_roots (struct arena *keep, const struct core *core, struct solution *solution)
{
  const double **other = ARENA_ARRAY (keep, core->roots + 1, const double *);
  size_t columns = core->system->columns;
  for (size_t i = 0; i < core->roots; i++) {
    double *copy = ARENA_ARRAY (keep, columns, double);
    memcpy (copy, core->root[i], columns * sizeof *copy);
    other[i] = copy;
  }
  solution->other = other;
  solution->other_count = core->freedom == 0 ? core->roots : 0;
}

/* TYPED has the facts as they were before figures were moved within their digits.  */
static struct solution *
answer (struct arena *keep, const struct core *core, const struct network *typed,
        struct fault *fault)
{
  struct solution *solution = ARENA_NEW (keep, struct solution);
  solution->status = status_of (core);
  solution->count = count_up (core);
  solution->chi2 = solution->critical = solution->p = solution->z_critical = (double) NAN;
  fixed_classify (keep, core, solution);
  if (!core_goes_on (core->options, fault)) {
    return NULL;
  }
  find_redundant (keep, core, solution);
  copy_roots (keep, core, solution);
  solution->mismatch = mismatch (core, solution->value);
  solution->mass_in = edge_mass (core, solution, true);
  solution->mass_out = edge_mass (core, solution, false);
  if (core->agree) {
    suggest (keep, core, solution);
    return core_goes_on (core->options, fault) && loose_find (keep, core, typed, solution, fault)
             ? solution : NULL;
  } else if (!conflict_find (keep, core, solution, fault)) {
    return NULL;
  }
  return solution;
}

/* Facts may hold only where nothing flows, as when two analyses of a stream differ and its flow is
   not known.  Either they agree within their digits, and the stream is open after all; or they
   clash as they would with a flow.                                                              */
static struct solution *
solve_exact (struct arena *keep, const struct core *core, struct fault *fault)
{
  struct solution *solution;
  struct idle idle = { core, NULL };
  bool idle_was;
  if (!idle_look (keep, &idle, fault)) {
    return NULL;
  }
  solution = answer (keep, idle.core, core->network, fault);
  if (!solution || solution->conflict) {
    return solution;
  }
  idle_was = idle.conflict != NULL;
  if (!still_find (keep, core->network, core->options, solution, &idle.conflict, fault)) {
    return NULL;
  }
  if (solution->negative_count > 0 && !idle_was) {
    solution->impossible = idle.conflict;
  } else if (idle.conflict) {
    solution->status = BALANCE_CONTRADICTORY;
    solution->conflict = idle.conflict;
    solution->loose = NULL;
  }
  return solution;
}

/* The network with what was measured settled by reconciliation.  */
static const struct network *
settle (struct arena *arena, const struct network *network, const struct solution *reconciled)
{
  bool *moved = ARENA_ARRAY (arena, network->facts + 1, bool);
  if (reconciled->status != BALANCE_RECONCILED) {
    return network_settle (arena, network, moved, NULL);
  }
  for (size_t f = 0; f < network->facts; f++) {
    moved[f] = fact_is_measured (network, &network->fact[f])
               || (reconciled->by_digits && reconciled->by_digits[f]);
  }
  return network_settle (arena, network, moved, reconciled->value);
}

/* Takes over what only reconciliation knows.  */
static void
take_over (struct solution *solution, const struct solution *reconciled)
{
  if (reconciled->status == BALANCE_RECONCILED) {
    solution->status = BALANCE_RECONCILED;
  }
  solution->adjustment_count = reconciled->adjustment_count;
  solution->adjustments = reconciled->adjustments;
  solution->chi2 = reconciled->chi2;
  solution->critical = reconciled->critical;
  solution->p = reconciled->p;
  solution->z_critical = reconciled->z_critical;
  solution->freedom = reconciled->freedom;
  solution->passed = reconciled->passed;
  solution->leak_count = reconciled->leak_count;
  solution->leaks = reconciled->leaks;
  solution->elimination_count = reconciled->elimination_count;
  solution->eliminations = reconciled->eliminations;
  solution->held_count = reconciled->held_count;
  solution->held = reconciled->held;
  solution->by_digits = reconciled->by_digits;
  solution->covariance = reconciled->covariance;
}

/* Where reconciliation comes to nothing the exact facts may be why: with their splits solved they
   clash, or some flow of theirs is below zero.  Null: they say nothing of the kind, or interrupted
   with OWN filled in.  */
static struct solution *
solve_without_measured (struct arena *keep, const struct core *exact, struct fault *own)
{
  struct fault unheard;
  fault_init (&unheard, exact->arena);
  const struct core *core = core_make (exact->arena, exact->network, exact->system->take,
                                       exact->options, &unheard);
  struct solution *solution = core ? solve_exact (keep, core, &unheard) : NULL;
  if (unheard.kind == MESSAGE_INTERRUPTED) {
    *own = unheard;
    return NULL;
  }
  bool why = solution && (solution->status == BALANCE_CONTRADICTORY
                          || solution->negative_count > 0);
  return why ? solution : NULL;
}

/* Did reconciliation leave next to nothing of a stream that is not held at zero?  */
static bool
has_idle (const struct core *core, const struct solution *reconciled)
{
  const struct network *network = core->network;
  size_t parts = network->components;
  double largest = 0;
  bool idle = false, *held = ARENA_ARRAY (core->arena, network->streams + 1, bool);
  for (size_t i = 0; i < reconciled->held_count; i++) {
    held[reconciled->held[i] / parts] = true;
  }
  for (size_t j = 0; j < network->streams * parts; j++) {
    largest = fmax (largest, fabs (reconciled->value[j]));
  }
  for (size_t s = 0; s < network->streams; s++) {
    double total = system_total (core->system, reconciled->value, s);
    idle = idle || (system_parts (core->system, s) > 0 && !held[s]
                    && fabs (total) < idle_below * largest);
  }
  return idle;
}

/* Facts that are exact first: they may clash by themselves.  Then what was measured is reconciled
   with them, and all is solved with the figures it was moved to.                                */
static struct solution *
solve_measured (struct arena *keep, struct core *exact, struct fault *fault)
{
  const struct network *network = exact->network;
  struct solution reconciled = { .status = BALANCE_DETERMINED }, *solution = NULL;
  const struct network *moved;
  bool *take = ARENA_ARRAY (exact->arena, network->facts + 1, bool);
  const struct core *core;
  if (!exact->agree) {
    core_open (exact);
    return answer (keep, exact, network, fault);
  }
  struct fault own;
  fault_init (&own, fault->arena);
  if (!system_reconcile (keep, exact->system, exact->options, &reconciled, &own)) {
    if (own.kind == MESSAGE_NOT_CONVERGED) {
      solution = solve_without_measured (keep, exact, &own);
    }
    *fault = solution ? *fault : own;
    return solution;
  }
  if (reconciled.status == BALANCE_RECONCILED && has_idle (exact, &reconciled)) {
    solution = solve_without_measured (keep, exact, &own);
    if (solution && solution->status == BALANCE_CONTRADICTORY) {
      return solution;
    }
  }
  for (size_t f = 0; f < network->facts; f++) {
    take[f] = true;
  }
  moved = settle (exact->arena, network, &reconciled);
  core = core_make (exact->arena, moved, take, exact->options, fault);
  if (core) {
    solution = solve_exact (keep, core, fault);
  }
  if (solution) {
    take_over (solution, &reconciled);
  }
  return solution;
}

const struct solution *
network_solve (struct arena *keep, const struct network *network,
               const struct solve_options *options, struct fault *fault)
{
  struct arena *arena = arena_create ();
  bool *take = ARENA_ARRAY (arena, network->facts + 1, bool), measured = false;
  struct core *core;
  const struct solution *solution = NULL;
  for (size_t f = 0; f < network->facts; f++) {
    take[f] = !fact_is_measured (network, &network->fact[f]);
    measured = measured || !take[f];
  }
  core = measured ? core_outline (arena, network, take, options, fault)
                  : core_make (arena, network, take, options, fault);
  if (core) {
    solution = measured ? solve_measured (keep, core, fault) : solve_exact (keep, core, fault);
  }
  arena_destroy (arena);
  return solution;
}
