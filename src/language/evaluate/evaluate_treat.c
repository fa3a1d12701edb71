#include "config.h"
#include "language/evaluate/evaluate_treat.h"

#include <math.h>
#include <string.h>
#include "gas/air.h"
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"

static bool
one_species (struct evaluation *ev, const struct node *name, const struct species **species)
{
  struct species_set set;
  if (!species_named (ev, name, &set)) {
    return false;
  }
  if (set.count != 1) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, name->at, "one component is needed here",
                         NULL);
  }
  *species = set.at[0];
  return true;
}

static double
share_of (const struct analysis *a, const char *key)
{
  for (size_t i = 0; i < a->count; i++)
    if (strcmp (a->parts[i].species->key, key) == 0) {
      return a->parts[i].amount
             * (a->whole == WHOLE_MASS ? a->parts[i].species->molar_mass : 1);
    }
  return 0;
}

/* What the other way of closing makes of the balance: scaled or, with BALANCE, taking it up.  */
static void
note_other_closing (struct evaluation *ev, const struct change_of *c, const char *balance,
                    const struct analysis *after, const struct analysis *other)
{
  /* What was taken away is no gap that a balance fills.  */
  if (!other || c->node->a->kind == NODE_WITHOUT) {
    return;
  }
  double here = share_of (after, balance), there = share_of (other, balance);
  struct remark *remark
    = result_remark (ev->result, c->node->b ? MESSAGE_NOTE_CLOSED_SCALED
                                            : MESSAGE_NOTE_CLOSED_INTO, c->name, balance);
  remark->fact[2] = gas_total_text (ev, other, there);
  remark->fact[3] = here > 0 ? arena_format (ev->arena, "%s (%+.2g %%)",
                                             figure_text (ev->arena, 100 * here),
                                             100 * (there / here - 1))
                             : "none";
}

const struct analysis *
gas_normalised (struct evaluation *ev, const struct change_of *c, const struct analysis *before)
{
  const struct species *into = NULL;
  struct treatment did, unused;
  struct fault unheard;
  if (c->node->b && !one_species (ev, c->node->b, &into)) {
    return NULL;
  }
  const struct analysis *after
    = into ? analysis_normalised_into (ev->arena, before, into, &did, ev->fault)
           : analysis_normalised (ev->arena, before, &did, ev->fault);
  if (after) {
    record_treatment (ev, &(struct treated) { .name = "normalised:", .of = c->name,
                                              .before = before, .after = after, .did = &did });
  }
  if (!after || !ev->result || fabs (did.total_before - 1) <= SCALING_WORTH_A_NOTE) {
    return after;
  }
  const char *total = gas_total_text (ev, before, did.total_before);
  fault_init (&unheard, ev->arena);
  if (into) {
    note (ev, MESSAGE_NOTE_NORMALISED_INTO, c->name, total,
          arena_format (ev->arena, "%s (%s%s)", into->key, did.added < 0 ? "" : "+",
                        gas_total_text (ev, before, did.added)));
    note_other_closing (ev, c, into->key, after,
                        analysis_normalised (ev->arena, before, &unused, &unheard));
  } else {
    const char *key = gas_usual_balance (before), *candidates;
    note (ev, MESSAGE_NOTE_NORMALISED, c->name, total, figure_text (ev->arena, did.factor));
    bool found = species_find (ev->session->vocabulary.species, key, strlen (key), &into,
                               &candidates) == SPECIES_KEY;
    note_other_closing (ev, c, key, after,
                        found ? analysis_normalised_into (ev->arena, before, into, &unused,
                                                          &unheard) : NULL);
  }
  return after;
}

/* ---- Air and other gases, by a tracer ---- */

/* What is left, closed, largest parts first: "CH4 56.8315, CO2 43.1685 mol%".  */
static const char *
closed_text (struct evaluation *ev, const struct analysis *left)
{
  enum { MOST = 3 };
  struct treatment did;
  struct fault unheard;
  const char *text = "";
  fault_init (&unheard, ev->arena);
  const struct analysis *closed = analysis_normalised (ev->arena, left, &did, &unheard);
  bool *told = ARENA_ARRAY (ev->arena, left->count + 1, bool);
  for (size_t n = 0; closed && n < MOST && n < closed->count; n++) {
    size_t next = closed->count;
    for (size_t i = 0; i < closed->count; i++)
      if (!told[i] && (next == closed->count
                       || closed->parts[i].amount > closed->parts[next].amount)) {
        next = i;
      }
    told[next] = true;
    const struct species *species = closed->parts[next].species;
    double share = closed->parts[next].amount;
    share *= closed->whole == WHOLE_MASS ? species->molar_mass : 1;
    text = arena_format (ev->arena, "%s%s%s %s", text, n ? ", " : "", species->key,
                         figure_text (ev->arena, 100 * share));
  }
  return arena_format (ev->arena, "%s %s", text, left->whole == WHOLE_MASS ? "mass%" : "mol%");
}

struct tracing { const struct composition *gas; const char *by; struct treatment did; };

/* What the other tracer, oxygen or nitrogen, finds: how far the two are apart, and what it means
   that there is more nitrogen, or less, than the air of the oxygen brings.                      */
static void
note_other_tracer (struct evaluation *ev, const struct change_of *c,
                   const struct analysis *before, const struct tracing *first)
{
  const struct species *other;
  const char *candidates;
  struct treatment did;
  struct fault unheard;
  bool by_oxygen = strcmp (first->by, "O2") == 0;
  const char *key = by_oxygen ? "N2" : "O2";
  if (!ev->result
      || species_find (ev->session->vocabulary.species, key, 2, &other, &candidates)
           != SPECIES_KEY) {
    return;
  }
  fault_init (&unheard, ev->arena);
  struct removal removal = { first->gas, 1, &other, by_oxygen ? ev->session->oxygen : NULL };
  const struct analysis *left = analysis_without_gas (ev->arena, before, &removal, &did, &unheard);
  if (!left) {
    if (unheard.kind == MESSAGE_NEGATIVE_PART) {
      note (ev, MESSAGE_NOTE_OTHER_TRACER_FAILS, c->name, key, unheard.fact[0]);
    }
    return;
  }
  struct remark *remark
    = result_remark (ev->result, MESSAGE_NOTE_OTHER_TRACER, c->name,
                     arena_format (ev->arena, "%s %s (%+.3g %%)", key,
                                   gas_total_text (ev, before, did.gas),
                                   100 * (did.gas / first->did.gas - 1)));
  remark->fact[2] = closed_text (ev, left);
  double nitrogen = by_oxygen ? did.gas : first->did.gas;
  double oxygen = by_oxygen ? first->did.gas : did.gas;
  if (nitrogen > oxygen * (1 + 1e-9)) {
    note (ev, MESSAGE_NOTE_TRACERS_BRACKET, c->name, NULL, NULL);
  }
}

/* Where more was taken away than is left, an error in it comes back multiplied.  */
static void
note_little_left (struct evaluation *ev, const struct change_of *c,
                  const struct analysis *before, const struct treatment *did)
{
  double left = analysis_total (before) - did->gas;
  if (left > 0 && did->gas > left) {
    note (ev, MESSAGE_NOTE_LITTLE_LEFT, c->name, c->node->b->text,
          rough_text (ev->arena, did->gas / left));
  }
}

/* What the tracer took, and where that is more oxygen than there is.  */
static void
note_removed_by (struct evaluation *ev, const struct change_of *c, const struct analysis *before,
                 const struct tracing *first)
{
  const struct treatment *did = &first->did;
  note (ev, MESSAGE_NOTE_REMOVED_BY, c->name,
        arena_format (ev->arena, "%s of %s", gas_total_text (ev, before, did->gas),
                      c->node->b->text), first->by);
  if (did->consumed) {
    struct remark *remark
      = result_remark (ev->result, MESSAGE_NOTE_OXYGEN_SHORT, c->name, did->consumed);
    remark->fact[2] = gas_total_text (ev, before, did->brings);
    remark->fact[3] = gas_total_text (ev, before, did->holds);
  }
  if (did->skipped && *did->skipped) {
    note (ev, MESSAGE_NOTE_SKIPPED, did->skipped, NULL, NULL);
  }
  note_little_left (ev, c, before, did);
  note_other_tracer (ev, c, before, first);
}

/* The place behind another one.  */
static struct place
behind (struct place at)
{
  return (struct place) { at.line, at.last + 1, at.last + 1 };
}

/* `without air [by N2]`: the tracer sets how much, the other parts go with it.  */
static const struct analysis *
without_gas (struct evaluation *ev, const struct change_of *c, const struct analysis *before,
             const struct composition *gas)
{
  struct species_set tracers = { { ev->session->oxygen }, 1, NULL };
  struct tracing first = { .gas = gas, .by = ev->session->oxygen->key };
  if (!c->node->c && !(composition_fraction (gas, ev->session->oxygen) > 0)) {
    fault_set_at (ev->fault, MESSAGE_UNFINISHED, behind (c->node->b->at), NULL, NULL);
    fault_hint (ev->fault, "say which of its parts sets how much: without %s by %s",
                c->node->b->text, gas->species[0]->key);
    return NULL;
  }
  if (c->node->c && !species_named (ev, c->node->c, &tracers)) {
    return NULL;
  }
  first.by = c->node->c ? c->node->c->text : first.by;
  bool by_oxygen = tracers.count == 1 && tracers.at[0] == ev->session->oxygen;
  struct removal removal = { gas, tracers.count, tracers.at,
                             by_oxygen ? NULL : ev->session->oxygen };
  const struct analysis *after
    = analysis_without_gas (ev->arena, before, &removal, &first.did, ev->fault);
  if (!after) {
    fault_place (ev->fault, c->node->c ? c->node->c->at : c->node->b->at);
    return NULL;
  }
  record_treatment (ev, &(struct treated) { .name = "what is left of", .of = c->name,
                                            .before = before, .after = after, .did = &first.did,
                                            .gas = gas, .tracers = &tracers });
  if (ev->result) {
    note_removed_by (ev, c, before, &first);
  }
  return after;
}

const struct analysis *
gas_without (struct evaluation *ev, const struct change_of *c, const struct analysis *before)
{
  const struct node *what = c->node->b;
  size_t n = strlen (what->text);
  struct definition *d = name_find (ev->session, what->text, n);
  if (d && d->kind == NAME_GAS) {
    const struct value *value = definition_value (ev, d, what->at);
    const struct composition *gas = value ? gas_composition (ev, value->gas, what->at) : NULL;
    return gas ? without_gas (ev, c, before, gas) : NULL;
  }
  if (air_is_name (what->text, n)) {
    return without_gas (ev, c, before, ev->session->air);
  }
  struct species_set set;
  if (!species_named (ev, what, &set)) {
    return NULL;
  }
  if (c->node->c) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, c->node->c->at,
                  "a component is taken away whole, without a tracer", NULL);
    fault_hint (ev->fault, "%s without %s", c->name, what->text);
    return NULL;
  }
  const struct analysis *after = before;
  double removed = 0;
  for (size_t i = 0; i < set.count; i++) {
    struct treatment did;
    const struct analysis *whole = after;
    after = analysis_without (ev->arena, whole, set.at[i], &did, ev->fault);
    if (!after) {
      fault_place (ev->fault, what->at);
      return NULL;
    }
    record_treatment (ev, &(struct treated) { .name = "what is left of", .of = c->name,
                                              .before = whole, .after = after, .did = &did });
    removed += did.removed;
  }
  if (ev->result) {
    note (ev, MESSAGE_NOTE_REMOVED, c->name, what->text, gas_total_text (ev, before, removed));
  }
  return after;
}

