#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"
#include "units/constants.h"

/* The number of `q m3/h`: q must stand for a bare number.  */
static bool
named_number (struct evaluation *ev, const struct node *node, double *number)
{
  struct value v;
  if (!evaluate (ev, node->a, NULL, &v)) {
    return false;
  }
  if (v.kind == VALUE_QUANTITY && !v.unit && dimension_is_none (v.measure.dimension)
      && v.measure.ratio == RATIO_NONE) {
    *number = v.si;
    return true;
  }
  const char *name = node->a->text;
  if (v.kind == VALUE_QUANTITY) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->unit_at,
                  arena_format (ev->arena, "'%s' has its unit already", name), NULL);
  } else {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->unit_at,
                  arena_format (ev->arena, "'%s' is no bare number that could take a unit", name),
                  NULL);
    fault_hint (ev->fault, "did you mean '%s in %s'?", name, node->unit_text);
  }
  return false;
}

/* Gauge and vacuum pressures become absolute here, once.  */
static double
above_barometer (struct evaluation *ev, const struct node *node, double si)
{
  bool gauge = node->unit->sort == UNIT_GAUGE;
  if (gauge && ev->settings->trial.gauge_absolute) {
    return si;
  }
  double site = evaluation_barometer (ev);
  double absolute = gauge ? site + si : site - si;
  evaluation_touch (ev, TOUCH_SITE);
  if (ev->describe) {
    assume_barometer (ev, node->figure ? node->figure : node->a->text, node->unit_text, absolute);
  }
  return absolute;
}

/* quantity = NUMBER [UNIT] [spread] | NAME UNIT  */
static bool
quantity_node (struct evaluation *ev, const struct node *node, struct value *out)
{
  double number = node->number;
  if (node->a && !named_number (ev, node, &number)) {
    return false;
  }
  number = evaluation_moved (ev, node, number);
  *out = value_number (number);
  if (!node->unit) {
    return true;
  }
  const struct unit *unit = evaluation_unit (ev, node->unit);
  evaluation_touch (ev, TOUCH_TYPED);
  out->unit = unit;
  out->words = node->words;
  out->measure = measure_of_unit (unit);
  out->si = unit_to_si (unit, number);
  if (unit->sort == UNIT_POINT && ev->settings->trial.ice_point > 0
      && fabs (unit->offset - ICE_POINT) < 1e-9) {
    out->si += ev->settings->trial.ice_point - ICE_POINT;
  }
  if (!isfinite (out->si)) {
    return fault_set_at (ev->fault, MESSAGE_NOT_FINITE, node->at, NULL, NULL);
  }
  if (unit->sort == UNIT_GAUGE || unit->sort == UNIT_VACUUM) {
    out->si = above_barometer (ev, node, out->si);
    record_typed (ev, node, number, out->si);
    return out->si >= 0
           || fault_set_at (ev->fault, MESSAGE_RANGE, node->at,
                            "an absolute pressure below zero: less than a perfect vacuum", NULL);
  }
  if (unit->sort == UNIT_POINT && out->si < 0) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, node->at,
                         "a temperature below absolute zero", NULL);
  }
  record_typed (ev, node, number, out->si);
  return true;
}

bool
evaluate_quantity (struct evaluation *ev, const struct node *node, struct value *out)
{
  if (!evaluate (ev, node, NULL, out)) {
    return false;
  }
  if (out->kind == VALUE_RATIO) {
    *out = value_number (out->moles);
  }
  if (out->kind == VALUE_QUANTITY) {
    return true;
  }
  return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->at,
                       "a number or a quantity is needed here", NULL);
}

/* Does a state change what a quantity means?  That of a mass, a pressure, a temperature or a bare
   number is the same everywhere.                                                                */
static bool
takes_state (const struct value *v)
{
  struct dimension d = v->measure.dimension;
  bool share = v->measure.ratio != RATIO_NONE;
  return share || !(dimension_equal (d, DIMENSION_MASS) || dimension_equal (d, DIMENSION_PRESSURE)
                    || dimension_equal (d, DIMENSION_TEMPERATURE) || dimension_is_none (d));
}

/* What a state does to something that is known already.  */
static bool
bring_to_state (struct evaluation *ev, struct value *v, const struct state *state,
                struct place at)
{
  switch (v->kind) {
  case VALUE_STREAM:
    return state_apply (ev, state, &v->stream, at);
  case VALUE_GAS: {
    const struct composition *gas = gas_composition (ev, v->gas, at);
    if (!gas || !state_wets (ev, state, NULL, &gas, at)) {
      return false;
    }
    v->gas = gas_of_composition (ev, gas, v->gas->name);
    return v->gas != NULL;
  }
  case VALUE_QUANTITY:
    if (!takes_state (v)) {
      break;
    }
    quantity_at_state (v, state);
    return true;
  case VALUE_PART:
  case VALUE_TRACE:
  case VALUE_SPECIFIC:
  case VALUE_CALORIFIC:
  case VALUE_LIMITS:
  case VALUE_RATIO:
    break;
  }
  return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, state->at,
                       "a state belongs to a gas, a flow or an amount", NULL);
}

/* A name of the user's.  */
static bool
defined_name (struct evaluation *ev, struct definition *definition, const struct node *node,
              const struct state *state, struct value *out)
{
  if (definition->kind == NAME_REFERENCE) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->at,
                  arena_format (ev->arena, "'%s' is a state, not a figure", node->text), NULL);
    fault_hint (ev->fault, "... at %s", node->text);
    return false;
  }
  if (definition->kind == NAME_SHEET) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->at,
                  arena_format (ev->arena, "'%s' is a sheet, not a figure", node->text), NULL);
    fault_hint (ev->fault, "check %s", node->text);
    return false;
  }
  if (definition->kind == NAME_BALANCE) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->at,
                  arena_format (ev->arena, "'%s' is a balance, not a figure", node->text), NULL);
    fault_hint (ev->fault, "solve %s", node->text);
    return false;
  }
  const struct value *value = definition_value (ev, definition, node->at);
  if (!value) {
    return false;
  }
  *out = *value;
  return !state || bring_to_state (ev, out, state, node->at);
}

/* A gas of the component table's: a species, or air.  */
static bool
known_gas (struct evaluation *ev, const struct node *node, const struct gas_value **gas)
{
  const struct session *s = ev->session;
  size_t n = strlen (node->text);
  const struct species *species;
  const char *candidates;
  if (strcmp (node->text, "air") == 0) {
    *gas = gas_of_composition (ev, s->air, "air");
    return *gas != NULL;
  }
  switch (species_find (s->vocabulary.species, node->text, n, &species, &candidates)) {
  case SPECIES_KEY:
  case SPECIES_SYNONYM:
  case SPECIES_PLAIN_FORMULA:
    note_species (ev, species);
    *gas = gas_of_composition (ev, composition_pure (ev->arena, species), node->text);
    return *gas != NULL;
  case SPECIES_AMBIGUOUS:
    fault_set_at (ev->fault, MESSAGE_NAME_OPEN, node->at, node->text, candidates);
    ev->fault->fact[2] = sum_way_on (ev->fault->arena, node->text);
    return false;
  case SPECIES_NONE:
    break;
  }
  return name_unknown (ev, node);
}

/* What a name means, at STATE if that is not null.  */
static bool
evaluate_name (struct evaluation *ev, const struct node *node, const struct state *state,
               struct value *out)
{
  struct definition *definition = name_find (ev->session, node->text, strlen (node->text));
  if (definition) {
    return defined_name (ev, definition, node, state, out);
  }
  const struct gas_value *gas = NULL;
  if (!known_gas (ev, node, &gas)) {
    return false;
  }
  *out = value_number (UNSTATED);
  out->kind = VALUE_GAS;
  out->gas = gas;
  return !state || bring_to_state (ev, out, state, node->at);
}

/* The subject of the last question, read again.  */
static bool
last_subject (struct evaluation *ev, const struct node *node, const struct state *state,
              struct value *out)
{
  const struct session *s = ev->session;
  if (!s->last_subject) {
    fault_set_at (ev->fault, MESSAGE_NAME_UNKNOWN, node->at, "that", NULL);
    fault_hint (ev->fault, "'that' is the subject of the last answer: there was none");
    return false;
  }
  struct parser *parser = parser_create (ev->arena, &s->vocabulary, s->last_subject,
                                         s->last_length, 1, BLOCK_NONE);
  struct statement *statement;
  if (!parser_next (parser, &statement, ev->fault)) {
    return false;
  }
  return evaluate (ev, statement->value, state, out);
}

bool
evaluate (struct evaluation *ev, const struct node *node, const struct state *state,
          struct value *out)
{
  switch (node->kind) {
  case NODE_NAME:
    return evaluate_name (ev, node, state, out);
  case NODE_THAT:
    return last_subject (ev, node, state, out);
  case NODE_OF:
  case NODE_WITHIN:
    return evaluate_of (ev, node, state, out);
  case NODE_AT: {
    struct state inner;
    if (!evaluate_state (ev, node->b, &inner) || !evaluate (ev, node->a, &inner, out)) {
      return false;
    }
    break;
  }
  case NODE_QUANTITY:
    if (!quantity_node (ev, node, out)) {
      return false;
    }
    break;
  case NODE_SITE_PRESSURE:
    *out = value_number (evaluation_barometer (ev));
    out->measure = (struct measure) { .dimension = DIMENSION_PRESSURE, .sort = UNIT_ABSOLUTE };
    evaluation_touch (ev, TOUCH_SITE);
    assume_site_pressure (ev);
    record_barometer (ev, out->si);
    break;
  case NODE_NORMALISED:
  case NODE_DRIED:
  case NODE_WETTED:
  case NODE_SATURATED:
  case NODE_WITHOUT:
    if (!evaluate_change (ev, node, out)) {
      return false;
    }
    break;
  case NODE_KEEPING:
    if (!evaluate_keeping (ev, node, out)) {
      return false;
    }
    break;
  case NODE_LIST:
    if (!evaluate_list (ev, node, out)) {
      return false;
    }
    break;
  case NODE_ADD:
  case NODE_SUBTRACT:
  case NODE_MULTIPLY:
  case NODE_DIVIDE:
  case NODE_NEGATE:
  case NODE_SQRT:
  case NODE_LN:
  case NODE_EXP:
    if (!evaluate_sum (ev, node, out)) {
      return false;
    }
    break;
  case NODE_PROPERTY:
  case NODE_SHARE:
  case NODE_PART:
  case NODE_STATE:
  case NODE_ITEM_Z:
  case NODE_ITEM_WATER:
  case NODE_ITEM_DEW_POINT:
  case NODE_ITEM_SATURATED:
  case NODE_ITEM_DRY:
  case NODE_ITEM_IDEAL:
  case NODE_ITEM_REAL:
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->at, "this is no figure by itself",
                         NULL);
  }
  return !state || bring_to_state (ev, out, state, node->at);
}
