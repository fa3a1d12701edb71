/* The streams that a solved balance makes: definitions like any other, whose formula is the
   balance.                                                                                      */
#include "config.h"
#include "language/balance/plant.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "language/balance/plant_record.h"
#include "language/session_private.h"
#include "support/arena.h"

struct definition *
definition_made (const char *name, const char *balance, enum name_kind kind)
{
  struct arena *arena = arena_create_small ();
  struct definition *d = ARENA_NEW (arena, struct definition);
  struct statement *statement = ARENA_NEW (arena, struct statement);
  struct node *value = ARENA_NEW (arena, struct node);
  const char **needs = ARENA_ARRAY (arena, 1, const char *);
  d->arena = arena;
  d->cache = arena_create_small ();
  d->holders = 1;
  d->kind = kind;
  d->name = arena_string (arena, name);
  d->maker = needs[0] = arena_string (arena, balance);
  d->source = arena_format (arena, "made by balance %s", balance);
  d->needs = needs;
  d->need_count = 1;
  value->kind = NODE_NAME;
  value->text = d->maker;
  value->at = statement->at = (struct place) { 1, 1, 1 };
  statement->kind = kind == NAME_STREAM ? STATEMENT_STREAM : STATEMENT_LET;
  statement->name = d->name;
  statement->source = d->source;
  statement->value = value;
  d->statement = statement;
  return d;
}

static bool
not_fixed (struct evaluation *ev, const struct plant *plant, const char *name)
{
  fault_set (ev->fault, MESSAGE_STREAM_OPEN, name, plant->name);
  fault_hint (ev->fault, "'solve %s' says what would fix it", plant->name);
  return false;
}

/* Of a balance of whole flows: a figure in the unit its flows are typed in.  */
static void
whole_value (struct evaluation *ev, const struct plant *plant, double total, struct value *out)
{
  const char *unit;
  double per = plant_unit (ev, plant, &unit);
  *out = value_number (total);
  out->unit = plant->unit ? plant->unit
              : unit_find (ev->session->vocabulary.units, unit, strlen (unit), NULL);
  out->measure = measure_of_unit (out->unit);
  out->si = total * per * out->unit->factor;
}

bool
plant_stream_value (struct evaluation *ev, const struct plant *plant, const char *name,
                    struct value *out)
{
  size_t s = plant_find (plant, name), n = plant->network.components, count = 0;
  if (s == NO_STREAM || !plant_is_fixed (plant, s)) {
    return not_fixed (ev, plant, name);
  }
  double total = plant_total (plant, s);
  if (plant->whole) {
    whole_value (ev, plant, total, out);
    return true;
  }
  struct part *parts = ARENA_ARRAY (ev->arena, n, struct part);
  for (size_t c = 0; c < n; c++) {
    double x = plant->solution->value[plant_column (plant, s, c)];
    bool clear = fabs (x) > 1e-12 * fabs (total);
    if (clear && (x < 0 || total < 0)) {
      fault_set (ev->fault, MESSAGE_RANGE,
                 arena_format (ev->arena, "%s has a flow below zero in balance %s", name,
                               plant->name), NULL);
      return false;
    }
    if (clear) {
      parts[count++] = (struct part) { plant->component[c], x };
    }
  }
  if (count == 0) {
    return not_fixed (ev, plant, name);
  }
  const struct composition *gas = composition_make (ev->arena, count, parts, ev->fault);
  if (!gas) {
    return false;
  }
  record_made_stream (ev, plant, name, total);
  *out = value_number (UNSTATED);
  out->kind = VALUE_STREAM;
  out->unit = plant->unit;
  out->stream = (struct stream) { .gas = gas, .moles = total, .flow = true, .T = UNSTATED,
                                  .p = UNSTATED, .Z = UNSTATED };
  return true;
}

bool
made_body (struct evaluation *ev, const struct definition *d, struct value *out)
{
  struct place at = { 1, 1, 1 };
  struct definition *balance = name_find (ev->session, d->maker, strlen (d->maker));
  if (!balance || balance->kind != NAME_BALANCE) {
    return fault_set (ev->fault, MESSAGE_NAME_UNKNOWN, d->maker, NULL);
  }
  const struct value *value = definition_value (ev, balance, at);
  if (!value) {
    return false;
  }
  const struct plant *plant = value->plant;
  if (!plant->solution) {
    return fault_set (ev->fault, plant->failure.kind, plant->failure.fact[0],
                      plant->failure.fact[1]);
  }
  return plant_stream_value (ev, plant, d->name, out);
}
