#include "config.h"
#include "gas/analysis.h"

#include <assert.h>
#include <math.h>
#include <stdio.h>
#include "gas/gathering.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"

static const struct analysis *
nothing_in_it (struct fault *fault)
{
  fault_set (fault, MESSAGE_AMOUNT_RANGE, "the whole", "nothing is in it");
  return NULL;
}

const struct analysis *
analysis_normalised (struct arena *arena, const struct analysis *a, struct treatment *treatment,
                     struct fault *fault)
{
  double total = analysis_total (a);
  if (!(total > 0))
    return nothing_in_it (fault);
  double factor = analysis_closing_factor (a->count, total);
  if (!isfinite (factor) || !isfinite (total))
    return nothing_in_it (fault);
  struct gathering g = gathering_of_analysis (arena, a, factor);
  const struct analysis *made = gathering_analysis (arena, &g, a->whole, a->dry);
  *treatment = (struct treatment) {
    .total_before = total, .total_after = analysis_total (made), .factor = factor
  };
  return made;
}

const struct analysis *
analysis_normalised_into (struct arena *arena, const struct analysis *a,
                          const struct species *balance, struct treatment *treatment,
                          struct fault *fault)
{
  double total = analysis_total (a);
  double missing = fabs (1 - total) <= analysis_rounding (a->count) ? 0 : 1 - total;
  double moles = a->whole == WHOLE_MASS ? missing / balance->molar_mass : missing;
  size_t i = parts_find (a->count, a->parts, balance);
  double had = i < a->count ? a->parts[i].amount : 0;
  if (analysis_measure (a, balance, had + moles) < -analysis_rounding (a->count)) {
    char way[100];
    snprintf (way, sizeof way, "the parts beside it add up to %.8g %s",
              100 * (total - analysis_measure (a, balance, had)),
              a->whole == WHOLE_MASS ? "mass%" : "mol%");
    fault_set (fault, MESSAGE_NEGATIVE_PART, balance->key, way);
    return NULL;
  }
  struct gathering g = gathering_of_analysis (arena, a, 1);
  if (missing < 0 || missing > 0) {
    gathering_add (&g, balance, moles);
    g.parts[i].amount = g.parts[i].amount > 0 ? g.parts[i].amount : 0;
  }
  const struct analysis *made = gathering_analysis (arena, &g, a->whole, a->dry);
  *treatment = (struct treatment) {
    .total_before = total, .total_after = analysis_total (made), .factor = 1, .added = missing
  };
  return made;
}

/* What AMOUNT mol of a species are of the whole.  */
static double
of_whole (const struct analysis *a, const struct species *species, double amount)
{
  double share = analysis_measure (a, species, amount);
  return a->whole == WHOLE_NONE ? share / analysis_sum (a) : share;
}

static bool
no_such_part (const char *name, struct fault *fault)
{
  return fault_set (fault, MESSAGE_NO_SUCH_PART, name, NULL);
}

static struct gathering
parts_without (struct arena *arena, const struct analysis *a, size_t gone)
{
  struct gathering g = gathering_start (arena, a->count);
  for (size_t i = 0; i < a->count; i++)
    if (i != gone)
      g.parts[g.count++] = a->parts[i];
  return g;
}

const struct analysis *
analysis_without (struct arena *arena, const struct analysis *a, const struct species *species,
                  struct treatment *treatment, struct fault *fault)
{
  size_t at = parts_find (a->count, a->parts, species);
  if (at == a->count) {
    no_such_part (species->key, fault);
    return NULL;
  }
  struct gathering g = parts_without (arena, a, at);
  const struct analysis *made = gathering_analysis (arena, &g, a->whole, a->dry);
  double removed = a->parts[at].amount > 0 ? of_whole (a, species, a->parts[at].amount) : 0;
  *treatment = (struct treatment) {
    .total_before = analysis_total (a), .total_after = analysis_total (made), .factor = 1,
    .removed = removed
  };
  return made;
}

static bool
is_among (const struct species *species, size_t n, const struct species *const list[])
{
  for (size_t i = 0; i < n; i++)
    if (list[i] == species)
      return true;
  return false;
}

/* How many moles of GAS go with the tracers: sum n_t/sum x_t over them.  */
static bool
tracer_moles (const struct analysis *a, const struct composition *gas, size_t n,
              const struct species *const tracers[], double *moles, struct fault *fault)
{
  struct sum held = { 0, 0 }, share = { 0, 0 };
  bool present = false;
  assert (n > 0);
  for (size_t i = 0; i < n; i++) {
    size_t at = parts_find (a->count, a->parts, tracers[i]);
    double x = composition_fraction (gas, tracers[i]);
    if (!(x > 0))
      return no_such_part (tracers[i]->key, fault);
    sum_add (&share, x);
    if (at < a->count)
      sum_add (&held, a->parts[at].amount);
    present = present || at < a->count;
  }
  if (!present)
    return no_such_part (tracers[0]->key, fault);
  *moles = sum_total (&held) / sum_total (&share);
  return true;
}

/* What is left of one part once MOLES of GAS are taken away; 0 for a tracer, since the tracers
   together go with the gas by definition.                                                       */
static bool
part_left (const struct part *part, const struct composition *gas, double moles, double *left,
           struct fault *fault)
{
  const double noise = 1e-12;            /* of the part: less than that is rounding */
  double goes = moles * composition_fraction (gas, part->species);
  *left = part->amount - goes;
  if (*left < -noise * part->amount) {
    char way[160];
    snprintf (way, sizeof way,
              "%.6g times what there is of it would go with the tracer; take another tracer",
              goes / part->amount);
    if (!(part->amount > 0))
      snprintf (way, sizeof way, "there is none of it to go with the tracer; take another tracer");
    return fault_set (fault, MESSAGE_NEGATIVE_PART, part->species->key, way);
  }
  if (goes > 0 && *left <= noise * part->amount)
    *left = 0;
  return true;
}

static const char *
keys_joined (struct arena *arena, size_t n, const struct species *const list[])
{
  const char *joined = NULL;
  for (size_t i = 0; i < n; i++)
    joined = joined == NULL ? arena_string (arena, list[i]->key)
      : arena_format (arena, "%s, %s", joined, list[i]->key);
  return joined;
}

static const char *
skipped_keys (struct arena *arena, const struct analysis *a, const struct removal *r)
{
  const struct composition *gas = r->gas;
  const struct species **skipped = ARENA_ARRAY (arena, gas->count, const struct species *);
  size_t count = 0;
  for (size_t i = 0; i < gas->count; i++)
    if (gas->fraction[i] > 0 && !is_among (gas->species[i], r->n, r->tracers)
        && gas->species[i] != r->consumed
        && parts_find (a->count, a->parts, gas->species[i]) == a->count)
      skipped[count++] = gas->species[i];
  return keys_joined (arena, count, skipped);
}

/* MOLES of the whole gas, of the whole of the analysis.  */
static double
gas_of_whole (const struct analysis *a, const struct composition *gas, double moles)
{
  if (a->whole == WHOLE_MASS)
    return moles * gas->molar_mass;
  return a->whole == WHOLE_NONE ? moles / analysis_sum (a) : moles;
}

/* Is there less of what may have been used up than MOLES of the gas bring?  Says so.  */
static void
find_consumed (const struct analysis *a, const struct removal *r, double moles,
               struct treatment *treatment)
{
  if (r->consumed == NULL)
    return;
  size_t at = parts_find (a->count, a->parts, r->consumed);
  double holds = at < a->count ? a->parts[at].amount : 0;
  double brings = moles * composition_fraction (r->gas, r->consumed);
  if (!(holds < brings * (1 - 1e-12)))
    return;
  treatment->consumed = r->consumed->key;
  treatment->brings = of_whole (a, r->consumed, brings);
  treatment->holds = of_whole (a, r->consumed, holds);
}

const struct analysis *
analysis_without_gas (struct arena *arena, const struct analysis *a, const struct removal *r,
                      struct treatment *treatment, struct fault *fault)
{
  double moles = 0;
  struct sum removed = { 0, 0 };
  struct treatment did = { .factor = 1 };
  if (!tracer_moles (a, r->gas, r->n, r->tracers, &moles, fault))
    return NULL;
  find_consumed (a, r, moles, &did);
  struct gathering g = gathering_start (arena, a->count);
  for (size_t i = 0; i < a->count; i++) {
    double left = 0;
    const struct species *species = a->parts[i].species;
    bool goes = is_among (species, r->n, r->tracers)
                || (did.consumed != NULL && species == r->consumed);
    if (!goes && !part_left (&a->parts[i], r->gas, moles, &left, fault))
      return NULL;
    bool touched = composition_fraction (r->gas, species) > 0;
    if (left > 0 || !touched)
      g.parts[g.count++] = (struct part) { species, left };
    if (touched && a->parts[i].amount > 0)
      sum_add (&removed, of_whole (a, species, a->parts[i].amount - left));
  }
  const struct analysis *made = gathering_analysis (arena, &g, a->whole, a->dry);
  did.total_before = analysis_total (a);
  did.total_after = analysis_total (made);
  did.removed = sum_total (&removed);
  did.gas = gas_of_whole (a, r->gas, moles);
  did.tracer = keys_joined (arena, r->n, r->tracers);
  did.skipped = skipped_keys (arena, a, r);
  *treatment = did;
  return made;
}

const struct analysis *
analysis_dried (struct arena *arena, const struct analysis *a, const struct species *water,
                struct treatment *treatment, struct fault *fault)
{
  double before = analysis_total (a), removed = 0, factor = 1;
  size_t at = parts_find (a->count, a->parts, water);
  struct gathering g = parts_without (arena, a, at);
  if (at < a->count && a->parts[at].amount > 0) {
    struct analysis left = { g.count, g.parts, a->whole, true };
    double total = analysis_sum (&left);
    if (!(total > 0)) {
      fault_set (fault, MESSAGE_ONLY_WATER, NULL, NULL);
      return NULL;
    }
    removed = of_whole (a, water, a->parts[at].amount);
    double closed = ANALYSIS_CLOSED + analysis_rounding (a->count);
    if (a->whole != WHOLE_NONE && fabs (before - 1) <= closed)
      factor = analysis_closing_factor (g.count, total);
    for (size_t i = 0; i < g.count; i++)
      g.parts[i].amount *= factor;
  }
  const struct analysis *made = gathering_analysis (arena, &g, a->whole, true);
  *treatment = (struct treatment) {
    .total_before = before, .total_after = analysis_total (made), .factor = factor,
    .removed = removed
  };
  return made;
}
