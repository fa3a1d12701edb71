#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/record.h"
#include "language/property_names.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

/* Is the name a word of the component table?  */
static bool
is_component (struct evaluation *ev, const char *name)
{
  const struct species *species;
  const char *candidates;
  enum species_match match = species_find (ev->session->vocabulary.species, name, strlen (name),
                                           &species, &candidates);
  return match == SPECIES_KEY || match == SPECIES_SYNONYM;
}

/* What stands left of `of`: a quantity of the user's, or a component.  */
enum selector { SELECT_FAILED, SELECT_QUANTITY, SELECT_PART };

static enum selector
select_by_name (struct evaluation *ev, const struct node *node)
{
  struct definition *d = name_find (ev->session, node->text, strlen (node->text));
  if (!d) {
    return SELECT_PART;
  }
  bool component = is_component (ev, node->text);
  if (d->kind == NAME_QUANTITY) {
    if (!component) {
      return SELECT_QUANTITY;
    }
    fault_set_at (ev->fault, MESSAGE_NAME_OPEN, node->at, node->text,
                  "a quantity of yours, a component");
    const struct species *species = NULL;
    const char *candidates;
    (void) species_find (ev->session->vocabulary.species, node->text, strlen (node->text),
                         &species, &candidates);
    fault_hint (ev->fault, "the component: %s of ...; or rename the quantity", species->key);
    return SELECT_FAILED;
  }
  if (component || (d->kind == NAME_GAS && (strchr (node->text, '+')
                                            || sum_way_on (ev->arena, node->text)))) {
    return SELECT_PART;
  }
  fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->at,
                arena_format (ev->arena, "'%s' is a %s and does not stand before 'of'", node->text,
                              d->kind == NAME_GAS ? "gas" : d->kind == NAME_STREAM ? "stream"
                              : d->kind == NAME_SHEET ? "sheet" : "state"),
                NULL);
  return SELECT_FAILED;
}

/* What a node is called in the record.  */
static const char *
name_of (const struct node *node)
{
  return node->kind == NODE_NAME ? node->text : "the gas";
}

/* ---- Components ---- */

static void
part_amounts (struct value *part, const struct composition *gas, double moles)
{
  part->moles = part->mass = 0;
  for (size_t i = 0; i < part->species.count; i++) {
    double n = moles * composition_fraction (gas, part->species.at[i]);
    part->moles += n;
    part->mass += n * part->species.at[i]->molar_mass;
  }
}

/* What there is of a component: n_c = n sum x_i, and its mass.  */
static void
record_part (struct evaluation *ev, const struct value *part, const struct composition *gas,
             double moles, const char *of)
{
  const size_t n = part->species.count;
  if (!ev->workings) {
    return;
  }
  double *x = ARENA_ARRAY (ev->arena, n, double), *M = ARENA_ARRAY (ev->arena, n, double);
  const char **terms = ARENA_ARRAY (ev->workings->arena, n, const char *);
  const bool whole = !part->of_stream;
  const char *unit = whole ? "mol/mol" : moles_unit (part->flow);
  for (size_t i = 0; i < n; i++) {
    x[i] = composition_fraction (gas, part->species.at[i]);
    M[i] = part->species.at[i]->molar_mass;
    terms[i] = part->species.at[i]->key;
  }
  const char *name = arena_format (ev->arena, whole ? "%s of" : "amount of %s of", part->part);
  RECORD (ev, .name = name, .of = of,
          .formula = whole ? "x = sum(x_i)" : "n_c = n sum(x_i)", .value = part->moles,
          .unit = unit, .source = "the composition above",
          .term_count = (unsigned) n, .terms = terms, STEP_SYMBOLS (SYMBOL ("n", moles, unit)),
          STEP_COLUMNS ({ "x_i", x, "mol/mol", NULL, NULL }));
  RECORD (ev, .name = arena_format (ev->arena, "mass of %s of", part->part), .of = of,
          .formula = "m_c = n sum(x_i M_i)", .value = part->mass,
          .unit = whole ? "kg/mol" : mass_unit (part->flow), .source = STEP_DEFINITION,
          .term_count = (unsigned) n, .terms = terms, STEP_SYMBOLS (SYMBOL ("n", moles, unit)),
          STEP_COLUMNS ({ "x_i", x, "mol/mol", NULL, NULL },
                        { "M_i", M, "kg/mol", STEP_WEIGHTS, NULL }));
}

/* What is no component may be a property misspelt, or called otherwise elsewhere.  */
static void
offer_property (struct evaluation *ev, const char *name)
{
  const char *meant = ev->fault->kind == MESSAGE_NAME_UNKNOWN && ev->describe
                        ? property_meant (name) : NULL;
  if (meant) {
    ev->fault->fact[1] = arena_format (ev->fault->arena, "did you mean '%s of'?", meant);
  }
}

/* `HHV` is a formula of hydrogen and vanadium, that nobody has in a gas.  */
static bool
is_no_property (struct evaluation *ev, const struct node *name, const struct value *part)
{
  bool formula = part->species.count == 1 && part->species.at[0]->origin == SPECIES_FORMULA;
  if (!formula || part->moles > 0 || !property_meant (name->text)) {
    return true;
  }
  fault_set_at (ev->fault, MESSAGE_NAME_UNKNOWN, name->at, name->text, NULL);
  offer_property (ev, name->text);
  return false;
}

static bool
part_of (struct evaluation *ev, const struct node *node, const struct state *state,
         struct value *out)
{
  struct value whole, part = value_number (UNSTATED);
  if (state && !isnan (state->oxygen)) {
    return fault_set_at (ev->fault, MESSAGE_STATE_ITEM, state->at,
                         "the oxygen to correct to stands with the target: in ppm dry, 3 %O2",
                         NULL);
  }
  if (!evaluate (ev, node->b, state, &whole)) {
    return false;
  }
  if (!species_named (ev, node->a, &part.species)) {
    offer_property (ev, node->a->text);
    return false;
  }
  part.kind = VALUE_PART;
  part.part = node->a->text;
  if (whole.kind == VALUE_STREAM) {
    part.of_stream = true;
    part.flow = whole.stream.flow;
    part.unit = whole.unit;
    part.stream = whole.stream;
    part_amounts (&part, whole.stream.gas, whole.stream.moles);
    record_part (ev, &part, whole.stream.gas, whole.stream.moles, name_of (node->b));
  } else if (whole.kind == VALUE_GAS) {
    const struct composition *gas = gas_composition (ev, whole.gas, node->b->at);
    if (!gas) {
      return false;
    }
    part.gas = whole.gas;
    if (state) {
      quantity_at_state (&part, state);
    }
    part_amounts (&part, gas, 1);
    record_part (ev, &part, gas, 1, name_of (node->b));
  } else {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->b->at,
                         "a component is one of a gas or of a stream", NULL);
  }
  *out = part;
  return is_no_property (ev, node->a, &part);
}

/* ---- Shares ---- */

/* So small a share of a component is more likely meant of the gas.  */
#define TRACE_SHARE 0.01
#define TRACE_OF_STREAM 0.001

static bool
share_of (struct evaluation *ev, const struct node *node, const struct value *share,
          const struct state *state, struct value *whole)
{
  if (whole->kind == VALUE_STREAM) {
    if (share->measure.ratio == RATIO_ENERGY) {
      return fault_set_at (ev->fault, MESSAGE_NOT_AVAILABLE, node->a->at, "shares by energy",
                           NULL);
    }
    if (share->si < 0) {
      return fault_set_at (ev->fault, MESSAGE_RANGE, node->a->at, "a share below zero", NULL);
    }
    double all = whole->stream.moles;
    const char *unit = moles_unit (whole->stream.flow);
    whole->stream = stream_share (&whole->stream, share->si);
    if (ev->result && share->unit && share->unit->ratio == RATIO_MOLE
        && share->si < TRACE_OF_STREAM) {
      note (ev, MESSAGE_NOTE_SHARE_OF_ALL, share_text (ev->arena, share->si), NULL, NULL);
    }
    RECORD (ev, .name = "share of", .of = name_of (node->b), .formula = "n = s n_0",
            .value = whole->stream.moles, .unit = unit, .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("s", share->si, "1"), SYMBOL ("n_0", all, unit)));
    if (ev->subject) {
      note (ev, MESSAGE_NOTE_SHARE, ev->subject,
            node->b->kind == NODE_NAME ? node->b->text : "what it is taken from", NULL);
    }
    return !state || state_apply (ev, state, &whole->stream, node->at);
  }
  const double moles = whole->moles, mass = whole->mass;
  const char *unit = whole->of_stream ? moles_unit (whole->flow) : "mol/mol";
  whole->moles *= share->si;
  whole->mass *= share->si;
  if (ev->result && share->measure.ratio == RATIO_MOLE && share->si < TRACE_SHARE
      && node->b->kind == NODE_OF && node->b->a->kind == NODE_NAME) {
    note (ev, MESSAGE_NOTE_SHARE_OF_PART, share_text (ev->arena, share->si), node->b->a->text,
          NULL);
  }
  RECORD (ev, .name = "share of", .of = whole->part, .formula = "n = s n_0",
          .value = whole->moles, .unit = unit, .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("s", share->si, "1"), SYMBOL ("n_0", moles, unit)));
  RECORD (ev, .name = "share of the mass of", .of = whole->part, .formula = "m = s m_0",
          .value = whole->mass, .unit = whole->of_stream ? mass_unit (whole->flow) : "kg/mol",
          .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("s", share->si, "1"),
                        SYMBOL ("m_0", mass,
                                whole->of_stream ? mass_unit (whole->flow) : "kg/mol")));
  return true;
}

/* ---- Traces ---- */

/* Molar volume of the gas that holds a trace, for a figure per volume: at the unit's reference
   conditions, or at the state said.                                                             */
static bool
trace_volume (struct evaluation *ev, const struct node *figure, const struct value *quantity,
              const struct value *trace, double *Vm)
{
  const struct composition *host = NULL;
  if (trace->gas && !(host = gas_composition (ev, trace->gas, figure->at))) {
    return false;
  }
  if (quantity->measure.family_power != 0) {
    return family_molar_volume (ev, quantity->measure.family, host,
                                (quantity->words & WORD_REAL) != 0, Vm);
  }
  if (isnan (trace->T) && isnan (trace->p)
      && !isnan (ev->settings->family[FAMILY_NONE].at.T)) {
    return family_molar_volume (ev, FAMILY_NONE, host, false, Vm);
  }
  if (isnan (trace->T) || isnan (trace->p)) {
    bool typed = figure->figure && figure->unit_text;
    fault_set_at (ev->fault, MESSAGE_STATE_MISSING, typed ? figure->unit_at : figure->at,
                  typed ? figure->unit_text : "the figure", NULL);
    fault_hint (ev->fault, "%s %s of %s at 20 degC, 1 bar(a)", typed ? figure->figure : "...",
                typed ? figure->unit_text : "", trace->part);
    return false;
  }
  double Z;
  const char *model;
  struct volume_question question = { host, trace->T, trace->p, UNSTATED, host == NULL };
  return actual_molar_volume (ev, &question, Vm, &Z, &model);
}

/* A figure of the dry gas, within one that has water: less of the whole.  */
static void
trace_wets (struct evaluation *ev, const struct node *figure, const struct gas_value *host,
            struct value *trace)
{
  double y = host && host->closed ? composition_fraction (host->closed, ev->session->water) : 0;
  if (!(y > 0 && y < 1) || !(trace->words & WORD_DRY)) {
    return;
  }
  trace->si *= 1 - y;
  if (ev->result) {
    const char *typed = figure->figure && figure->unit_text
                          ? arena_format (ev->arena, "%s %s", figure->figure, figure->unit_text)
                          : "the figure";
    const char *wet = share_text (ev->arena, trace->si);
    note (ev, MESSAGE_NOTE_TRACE_DRY, typed,
          isnan (trace->oxygen)
            ? wet : arena_format (ev->arena, "%s, uncorrected for oxygen,", wet),
          share_text (ev->arena, y));
  }
}

static const struct dimension CONCENTRATION_BY_MOLES = { -3, 0, 0, 0, 1 };

/* A trace of a sum (NOx) is one of what the sum counts as.  */
static bool
trace_counts (struct evaluation *ev, struct value *trace)
{
  const char *as = trace->species.counted_as, *candidates;
  if (!as) {
    return true;
  }
  enum species_match match = species_find (ev->session->vocabulary.species, as, strlen (as),
                                           &trace->species.at[0], &candidates);
  trace->species.count = 1;
  assume_counted_as (ev, trace->part, as);
  return match == SPECIES_KEY;
}

/* 25 ppm of H2S, 200 mg/Nm3 of NO at 3 %O2, 50 ppm of H2S within raw.  */
static bool
trace_of (struct evaluation *ev, const struct node *node, const struct value *quantity,
          const struct gas_value *host, const struct state *state, struct value *out)
{
  struct value trace = value_number (UNSTATED);
  trace.kind = VALUE_TRACE;
  trace.unit = quantity->unit;
  trace.words = quantity->words;
  trace.gas = host;
  if (node->b->kind != NODE_NAME) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->b->at,
                         "a concentration is one of a single component", NULL);
  }
  trace.part = node->b->text;
  if (!species_named (ev, node->b, &trace.species) || !trace_counts (ev, &trace)) {
    return false;
  }
  if (state) {
    quantity_at_state (&trace, state);
  }
  double molar_mass = trace.species.at[0]->molar_mass;
  double Vm = 1;
  const struct measure *m = &quantity->measure;
  if (m->ratio == RATIO_NONE && !trace_volume (ev, node->a, quantity, &trace, &Vm)) {
    return false;
  }
  if (m->ratio == RATIO_MASS) {
    trace.measure.ratio = RATIO_MASS;
    trace.si = quantity->si;
  } else if (m->ratio != RATIO_NONE) {
    trace.measure.ratio = RATIO_MOLE;
    trace.si = quantity->si;
  } else {
    trace.measure.ratio = RATIO_MOLE;
    bool by_moles = dimension_equal (m->dimension, CONCENTRATION_BY_MOLES);
    trace.si = by_moles ? quantity->si * Vm : quantity->si * Vm / molar_mass;
    RECORD (ev, .name = "share of", .of = trace.part, .formula = by_moles ? "x = c V" : "x = c V/M",
            .value = trace.si, .unit = "mol/mol", .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("c", quantity->si, by_moles ? "mol/m3" : "kg/m3"),
                          SYMBOL ("V", Vm, "m3/mol"),
                          CONSTANT ("M", molar_mass, "kg/mol", STEP_WEIGHTS)));
  }
  if (host && trace.measure.ratio == RATIO_MASS) {
    const struct composition *gas = gas_composition (ev, host, node->at);
    if (!gas) {
      return false;
    }
    trace.si *= gas->molar_mass / molar_mass;
    trace.measure.ratio = RATIO_MOLE;
    record_molar_mass (ev, gas, host->name);
    RECORD (ev, .name = "share of", .of = trace.part, .formula = "x = w M/M_c", .value = trace.si,
            .unit = "mol/mol", .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("w", quantity->si, "kg/kg"),
                          SYMBOL ("M", gas->molar_mass, "kg/mol"),
                          CONSTANT ("M_c", molar_mass, "kg/mol", STEP_WEIGHTS)));
  }
  trace_wets (ev, node->a, host, &trace);
  if (!(trace.si >= 0 && trace.si <= 1)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, node->a->at,
                         trace.si < 0 ? "a concentration below zero"
                                      : "a concentration above the whole gas", NULL);
  }
  *out = trace;
  return true;
}

/* ---- Figures per quantity of a gas: 4.7 kWh/Nm3 of H2 ---- */

static bool
specific_of (struct evaluation *ev, const struct node *node, const struct value *quantity,
             const struct value *whole, struct value *out)
{
  if (!gas_composition (ev, whole->gas, node->b->at)) {
    return false;
  }
  *out = *quantity;
  out->kind = VALUE_SPECIFIC;
  out->gas = whole->gas;
  return true;
}

/* ---- Quantities of a gas ---- */

static bool
is_trace (const struct measure *m)
{
  return m->ratio != RATIO_NONE || dimension_equal (m->dimension, DIMENSION_DENSITY)
         || dimension_equal (m->dimension, CONCENTRATION_BY_MOLES);
}

static bool
stream_of (struct evaluation *ev, const struct node *node, const struct value *quantity,
           const struct state *state, struct value *whole)
{
  struct stream source = { .T = UNSTATED, .p = UNSTATED, .Z = UNSTATED };
  if (whole->kind == VALUE_STREAM) {
    source = whole->stream;
  } else if (!(source.gas = gas_composition (ev, whole->gas, node->b->at))) {
    return false;
  }
  struct flow_figure figure = { quantity, node->a, state, &source,
                                node->b->kind == NODE_NAME ? node->b->text : NULL };
  if (!flow_from_quantity (ev, &figure, node->b->at, &whole->stream)) {
    return false;
  }
  whole->kind = VALUE_STREAM;
  whole->unit = quantity->unit;
  whole->words = quantity->words;
  return true;
}

/* `quantity of whole`, whatever the two are.  */
static bool
quantity_of (struct evaluation *ev, const struct node *node, const struct state *state,
             struct value *out)
{
  struct value quantity;
  if (!evaluate_quantity (ev, node->a, &quantity)) {
    return false;
  }
  const struct measure *m = &quantity.measure;
  if (m->ratio == RATIO_NONE && dimension_is_none (m->dimension) && m->sort != UNIT_HUMIDITY) {
    return fault_set_at (ev->fault, MESSAGE_UNIT_EXPECTED, node->a->at,
                         "a share is written in %: 5 % of mix; a multiple with *: 2 * feed", NULL);
  }
  bool of_sum = node->b->kind == NODE_NAME && sum_way_on (ev->arena, node->b->text)
                && m->ratio != RATIO_NONE && m->ratio != RATIO_PLAIN
                && !name_find (ev->session, node->b->text, strlen (node->b->text));
  if (of_sum || (m->ratio == RATIO_NONE && is_trace (m))) {
    return trace_of (ev, node, &quantity, NULL, state, out);
  }
  struct value whole;
  bool amount = m->ratio == RATIO_NONE;
  if (!evaluate (ev, node->b, NULL, &whole)) {
    return false;
  }
  if (!amount && (whole.kind == VALUE_STREAM || whole.kind == VALUE_PART)) {
    *out = whole;
    return share_of (ev, node, &quantity, state, out);
  }
  if (!amount && whole.kind == VALUE_GAS && m->ratio != RATIO_PLAIN) {
    return trace_of (ev, node, &quantity, NULL, state, out);
  }
  if (amount && (whole.kind == VALUE_STREAM || whole.kind == VALUE_GAS)) {
    if (whole.kind == VALUE_GAS && flow_is_specific (m)) {
      return specific_of (ev, node, &quantity, &whole, out);
    }
    *out = whole;
    return stream_of (ev, node, &quantity, state, out);
  }
  return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->b->at,
                       amount ? "an amount is one of a gas or of a stream"
                              : "a share is one of a stream or of a component in it", NULL);
}

static bool
within (struct evaluation *ev, const struct node *node, const struct state *state,
        struct value *out)
{
  struct value host, quantity;
  const struct node *of = node->a;
  if (of->kind != NODE_OF || of->a->kind == NODE_PROPERTY
      || !evaluate (ev, node->b, NULL, &host)) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, of->at,
                         "a trace within a gas is written 50 ppm of H2S within raw", NULL);
  }
  if (host.kind == VALUE_STREAM) {
    host.gas = gas_of_composition (ev, host.stream.gas, node->b->text);
  } else if (host.kind != VALUE_GAS) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->b->at,
                         "a trace is within a gas", NULL);
  }
  if (!evaluate_quantity (ev, of->a, &quantity)
      || !trace_of (ev, of, &quantity, host.gas, state, out)) {
    return false;
  }
  out->of_stream = host.kind == VALUE_STREAM;
  out->stream = host.stream;
  return true;
}

bool
evaluate_of (struct evaluation *ev, const struct node *node, const struct state *state,
             struct value *out)
{
  if (node->kind == NODE_WITHIN) {
    return within (ev, node, state, out);
  }
  if (node->a->kind == NODE_PROPERTY) {
    return evaluate_property (ev, node, state, out);
  }
  if (node->a->kind == NODE_NAME) {
    switch (select_by_name (ev, node->a)) {
    case SELECT_FAILED:
      return false;
    case SELECT_PART:
      return part_of (ev, node, state, out);
    case SELECT_QUANTITY:
      break;
    }
  }
  return quantity_of (ev, node, state, out);
}
