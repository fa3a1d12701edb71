#include "config.h"
#include "balance/reconcile.h"

#include <math.h>
#include <string.h>
#include "balance/bounded.h"
#include "balance/gross.h"
#include "balance/minimise.h"
#include "balance/solution.h"
#include "balance/system.h"
#include "balance/uncertainty.h"
#include "support/arena.h"
#include "support/fault.h"

/* One way to read the facts.  */
struct attempt {
  struct arena *arena, *scratch;
  const struct network *network;
  const struct solve_options *options;
  enum standing *standing;
  struct measured *measured;
  struct fit fit;
  bool found;                    /* a fit in which the exact rows hold */
};

/* From where the facts read otherwise led to, if they did.  Places for closures differ.  */
static bool
minimise_again (struct attempt *a, struct fault *fault)
{
  const struct measured *before = a->found ? a->measured : NULL;
  double *from = NULL;
  a->measured = measured_make (a->arena, a->network, a->standing);
  if (before) {
    size_t columns = before->system->columns;
    from = ARENA_ARRAY (a->arena, a->measured->places, double);
    for (size_t i = 0; i < a->measured->places; i++) {
      from[i] = i < columns ? a->fit.v[i] : 1;
    }
    memcpy (a->measured->held, before->held, columns * sizeof *before->held);
  }
  bool done = minimise_bounded (a->arena, a->measured, a->options, from, &a->fit, fault);
  a->found = done && a->fit.agreed;
  return done;
}

/* ---- Figures without uncertainty ---- */

static bool
has_digits (const struct network *network, const struct fact *fact)
{
  const double *rounding = fact->fractions_rounding;
  for (size_t c = 0; fact->kind == FACT_COMPOSITION && rounding && c < network->components; c++) {
    if (rounding[c] > 0) {
      return true;
    }
  }
  return fact->kind != FACT_COMPOSITION && fact->rounding > 0;
}

static void
stand_as_stated (struct attempt *a)
{
  for (size_t f = 0; f < a->network->facts; f++) {
    bool measured = fact_is_measured (a->network, &a->network->fact[f]);
    a->standing[f] = measured ? STANDING_MEASURED : STANDING_EXACT;
  }
}

/* Exact figures count with their digits; is there any?  */
static bool
stand_by_digits (struct attempt *a)
{
  bool any = false;
  for (size_t f = 0; f < a->network->facts; f++) {
    if (a->standing[f] == STANDING_EXACT && has_digits (a->network, &a->network->fact[f])) {
      a->standing[f] = STANDING_DIGITS;
      any = true;
    }
  }
  return any;
}

/* Those that nothing else bears on are exact again; is there any?  Their adjustments are zero, so
   that nothing else changes but what follows from them.  */
static bool
stand_back (struct attempt *a)
{
  const struct measured *measured = a->measured;
  bool *borne = ARENA_ARRAY (a->arena, a->network->facts + 1, bool), any = false;
  bool *redundant = redundant_figures (a->arena, measured, &a->fit);
  for (size_t i = 0; i < measured->figures; i++) {
    size_t f = measured->figure[i].fact;
    borne[f] = borne[f] || redundant[i];
  }
  for (size_t f = 0; f < a->network->facts; f++) {
    if (a->standing[f] == STANDING_DIGITS && !borne[f]) {
      a->standing[f] = STANDING_EXACT;
      any = true;
    }
  }
  return any;
}

static bool
fit_is_good (const struct attempt *a)
{
  return a->fit.agreed && chi2_passes (a->fit.chi2, a->fit.freedom, a->options->confidence);
}

/* Exact figures by their digits; where that leads nowhere all stays as it was.  */
static void
fit_by_digits (struct attempt *a, struct fault *fault)
{
  struct attempt before = *a;
  struct fault own;
  fault_init (&own, fault->arena);
  enum standing *stated = ARENA_ARRAY (a->arena, a->network->facts + 1, enum standing);
  memcpy (stated, a->standing, a->network->facts * sizeof *stated);
  before.standing = stated;
  if (!stand_by_digits (a)) {
    return;
  }
  bool done = minimise_again (a, &own) && (!stand_back (a) || minimise_again (a, &own));
  if (own.kind == MESSAGE_INTERRUPTED) {
    *fault = own;
  }
  if (!done || !a->found) {
    *a = before;
  }
}

/* Figures without uncertainty are exact, as stated.  If they cannot all hold beside the measured
   ones, or these fail the test for it, what is wrong may be a last digit: exact and measured
   figures are one system then.  */
static bool
find_fit (struct attempt *a, struct fault *fault)
{
  struct fault own;
  fault_init (&own, fault->arena);
  stand_as_stated (a);
  if (!(minimise_again (a, &own) && fit_is_good (a)) && own.kind != MESSAGE_INTERRUPTED) {
    fit_by_digits (a, &own);
  }
  if (own.kind == MESSAGE_INTERRUPTED) {
    return fault_set (fault, MESSAGE_INTERRUPTED, NULL, NULL);
  }
  return a->found || fault_set (fault, MESSAGE_NOT_CONVERGED, "the reconciliation", NULL);
}

/* ---- The answer ---- */

static bool *
fixed_columns (struct arena *arena, const struct measured *measured, const bool open[])
{
  bool *fixed = ARENA_ARRAY (arena, measured->system->columns, bool);
  for (size_t j = 0; j < measured->system->columns; j++) {
    fixed[j] = !open[j];
  }
  return fixed;
}

/* What is fixed of streams and their fractions.  */
static void
fill_streams (struct arena *arena, const struct attempt *a, struct solution *solution)
{
  const struct network *network = a->network;
  size_t parts = network->components;
  bool *total = ARENA_ARRAY (arena, network->streams + 1, bool);
  bool *fixed = ARENA_ARRAY (arena, network->streams * parts + 1, bool);
  double *fraction = ARENA_ARRAY (arena, network->streams * parts + 1, double);
  fit_open_streams (a->scratch, a->measured, &a->fit, total, fixed);
  arena_reset (a->scratch);
  for (size_t s = 0; s < network->streams; s++) {
    double flow = system_total (a->measured->system, a->fit.v, s);
    total[s] = !total[s];
    for (size_t j = s * parts; j < (s + 1) * parts; j++) {
      fixed[j] = !fixed[j] && fabs (flow) > BOUNDED_BELOW * a->measured->flow;
      fraction[j] = fixed[j] ? a->fit.v[j] / flow : (double) NAN;
    }
  }
  solution->fixed_total = total;
  solution->fixed_fraction = fixed;
  solution->fraction = fraction;
}

/* Columns for which WHICH holds: below zero, or held there.  */
static const size_t *
columns_where (struct arena *arena, const struct attempt *a, bool held, size_t *count)
{
  const struct measured *measured = a->measured;
  size_t *out = ARENA_ARRAY (arena, measured->system->columns + 1, size_t);
  size_t flows = measured->network->streams * measured->network->components;
  double least = -BOUNDED_BELOW * fit_largest (measured, &a->fit);
  *count = 0;
  for (size_t j = 0; j < flows; j++) {
    if (held ? measured->held[j] : a->fit.v[j] < least) {
      out[(*count)++] = j;
    }
  }
  return out;
}

static void
fill_values (struct arena *arena, const struct attempt *a, struct solution *solution)
{
  const struct measured *measured = a->measured;
  size_t columns = measured->system->columns;
  double *value = ARENA_ARRAY (arena, columns, double);
  memcpy (value, a->fit.v, columns * sizeof *value);
  solution->value = value;
  bool *open = fit_open (a->scratch, measured, &a->fit);
  solution->fixed = fixed_columns (arena, measured, open);
  arena_reset (a->scratch);
  fill_streams (arena, a, solution);
  solution->mismatch = a->fit.mismatch / measured->flow;
  solution->negative = columns_where (arena, a, false, &solution->negative_count);
  solution->status = BALANCE_RECONCILED;
  solution->conflict = NULL;
}

static void
fill_standing (struct arena *arena, const struct attempt *a, struct solution *solution)
{
  bool *by_digits = ARENA_ARRAY (arena, a->network->facts + 1, bool);
  for (size_t f = 0; f < a->network->facts; f++) {
    by_digits[f] = a->standing[f] == STANDING_DIGITS;
    if (by_digits[f]) {
      solution->by_digits = by_digits;
    }
  }
  solution->held = columns_where (arena, a, true, &solution->held_count);
}

static bool
any_measured (const struct network *network)
{
  for (size_t f = 0; f < network->facts; f++) {
    if (fact_is_measured (network, &network->fact[f])) {
      return true;
    }
  }
  return false;
}

bool
system_reconcile (struct arena *arena, const struct system *system,
                  const struct solve_options *options, struct solution *solution,
                  struct fault *fault)
{
  const struct network *network = system->network;
  if (!any_measured (network)) {
    return true;
  }
  struct attempt a = { .arena = arena_create (), .scratch = arena_create (), .network = network,
                       .options = options };
  struct solution made = *solution;
  a.standing = ARENA_ARRAY (a.arena, network->facts, enum standing);
  bool done = find_fit (&a, fault);
  if (done) {
    fill_standing (arena, &a, &made);
    made.covariance = covariance_keep (arena, a.measured, &a.fit);
  }
  if (done && a.fit.freedom > 0) {
    fill_values (arena, &a, &made);
    done = gross_test (arena, a.measured, &a.fit, options, &made, fault);
  }
  if (done) {
    *solution = made;
  }
  arena_destroy (a.scratch);
  arena_destroy (a.arena);
  return done;
}
