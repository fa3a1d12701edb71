#include "config.h"
#include "language/session_private.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/balance/plant.h"
#include "language/check/sheet.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "property/hazard.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "units/workings.h"

/* ---- Life ---- */

struct name_list { struct arena *arena; struct map *met; const char **at; size_t count, room; };

static void
collect_name (const struct node *node, void *with)
{
  struct name_list *list = with;
  if (node->kind != NODE_NAME && node->kind != NODE_PART && node->kind != NODE_SHARE) {
    return;
  }
  size_t n = strlen (node->text);
  if (map_find (list->met, node->text, n)) {
    return;
  }
  map_put (list->met, node->text, n, list);
  if (list->count == list->room) {
    size_t room = list->room ? 2 * list->room : 8;
    const char **more = ARENA_ARRAY (list->arena, room, const char *);
    if (list->count) {
      memcpy (more, list->at, list->count * sizeof *more);
    }
    list->at = more;
    list->room = room;
  }
  list->at[list->count++] = node->text;
}

/* The lines of a block hang behind the one that opens it.  */
static bool
rest_of_block (struct parser *parser, struct statement *first, struct fault *fault)
{
  for (struct statement *s = first; s && parser_block (parser) != BLOCK_NONE; s = s->next)
    if (!parser_next (parser, &s->next, fault)) {
      return false;
    }
  return true;
}

struct definition *
definition_make (struct session *session, const char *source, enum name_kind kind,
                 struct fault *fault)
{
  struct arena *arena = arena_create_small ();
  struct definition *d = ARENA_NEW (arena, struct definition);
  struct statement *statement;
  d->arena = arena;
  d->kind = kind;
  d->source = arena_string (arena, source);
  struct parser *parser = parser_create (arena, &session->vocabulary, d->source,
                                         strlen (d->source), 1, BLOCK_NONE);
  if (!parser_next (parser, &statement, fault)) {
    arena_destroy (arena);
    return NULL;
  }
  if (!rest_of_block (parser, statement, fault)) {
    arena_destroy (arena);
    return NULL;
  }
  if (statement->from_file && !file_bind (session, d, statement, fault)) {
    arena_destroy (arena);
    return NULL;
  }
  struct name_list needs = { arena, map_create (), NULL, 0, 0 };
  tree_visit (statement, collect_name, &needs);
  map_destroy (needs.met);
  d->statement = statement;
  d->name = statement->name;
  d->needs = needs.at;
  d->need_count = needs.count;
  d->cache = arena_create_small ();
  d->holders = 1;
  return d;
}

void
definition_hold (struct definition *d)
{
  if (d) {
    d->holders++;
  }
}

void
definition_release (struct definition *d)
{
  if (d && --d->holders == 0) {
    arena_destroy (d->cache);
    arena_destroy (d->arena);
  }
}

/* ---- Working it out ---- */

/* A stated calorific value, told per mole.  */
static void
record_stated (struct evaluation *ev, const char *formula, double stated, double per, double H)
{
  RECORD (ev, .name = "calorific value, molar, of", .of = ev->subject, .formula = formula,
          .value = H, .unit = "J/mol", .source = STEP_DEFINITION,
          STEP_SYMBOLS (CONSTANT ("h", stated, NULL, STEP_TYPED), SYMBOL ("M", per, "kg/mol"),
                        SYMBOL ("V", per, "m3/mol")));
}

/* A stated calorific value as J/mol: per mole, per kilogram, per reference volume, or per cubic
   metre at the conditions of Sm3, of an ideal gas.                                              */
static bool
stated_heat (struct evaluation *ev, const struct stated_property *p, const struct value *v,
             double molar_mass, double *H)
{
  struct dimension d = v->measure.dimension;
  double Vm;
  if (dimension_equal (dimension_times (d, DIMENSION_AMOUNT), DIMENSION_ENERGY)) {
    *H = v->si;
  } else if (dimension_equal (dimension_times (d, DIMENSION_MASS), DIMENSION_ENERGY)) {
    *H = v->si * molar_mass;
    record_stated (ev, "H = h M", v->si, molar_mass, *H);
  } else if (dimension_equal (dimension_times (d, DIMENSION_VOLUME), DIMENSION_ENERGY)) {
    enum reference_family family = v->measure.family_power ? v->measure.family : FAMILY_STANDARD;
    if (!family_molar_volume (ev, family, NULL, false, &Vm)) {
      return false;
    }
    *H = v->si * Vm;
    record_stated (ev, "H = h V", v->si, Vm, *H);
  } else {
    return fault_set_at (ev->fault, MESSAGE_UNIT_MISMATCH, p->quantity->at,
                         "a calorific value is energy per volume, mass or mole", NULL);
  }
  return *H > 0 || fault_set_at (ev->fault, MESSAGE_RANGE, p->quantity->at,
                                 "a calorific value is above zero", NULL);
}

static bool
stated_molar_mass (struct evaluation *ev, const struct statement *s, double *molar_mass)
{
  for (const struct stated_property *p = s->stated; p; p = p->next) {
    struct value v;
    if (p->property != PROPERTY_MOLAR_MASS) {
      continue;
    }
    if (!evaluate_quantity (ev, p->quantity, &v)) {
      return false;
    }
    if (!dimension_equal (v.measure.dimension, DIMENSION_MOLAR_MASS) || !(v.si > 0)) {
      return fault_set_at (ev->fault, MESSAGE_UNIT_MISMATCH, p->quantity->at,
                           "a molar mass is a figure in g/mol above zero", NULL);
    }
    *molar_mass = v.si;
    return true;
  }
  fault_set_at (ev->fault, MESSAGE_KIND_WRONG, s->stated->quantity->at,
                "a gas known by figures alone needs its molar mass", NULL);
  fault_hint (ev->fault, "gas %s with molar mass 19.8 g/mol, ...", s->name);
  return false;
}

static bool
stated_gas (struct evaluation *ev, const struct statement *s, struct value *out)
{
  struct stated_figures figures = { 0, 0, 0 };
  if (!stated_molar_mass (ev, s, &figures.molar_mass)) {
    return false;
  }
  for (const struct stated_property *p = s->stated; p; p = p->next) {
    struct value v;
    bool gross = p->property == PROPERTY_GROSS_CALORIFIC_VALUE;
    if (p->property == PROPERTY_MOLAR_MASS) {
      continue;
    }
    if (!gross && p->property != PROPERTY_NET_CALORIFIC_VALUE) {
      return fault_set_at (ev->fault, MESSAGE_NOT_AVAILABLE, p->quantity->at,
                           "gases by more than molar mass and calorific values", NULL);
    }
    if (!evaluate_quantity (ev, p->quantity, &v)
        || !stated_heat (ev, p, &v, figures.molar_mass, gross ? &figures.gross : &figures.net)) {
      return false;
    }
  }
  const struct species *species = species_stated (ev->session->vocabulary.species, s->name,
                                                  &figures);
  *out = value_number (UNSTATED);
  out->kind = VALUE_GAS;
  out->gas = gas_of_composition (ev, composition_pure (ev->arena, species), s->name);
  note (ev, MESSAGE_NOTE_STATED_ONLY, s->name,
        figures.gross > 0 || figures.net > 0 ? "its molar mass and calorific value"
                                             : "its molar mass", NULL);
  return out->gas != NULL;
}

static bool
gas_body (struct evaluation *ev, const struct statement *s, struct value *out)
{
  if (s->stated) {
    return stated_gas (ev, s, out);
  }
  if (!evaluate (ev, s->value, NULL, out)) {
    return false;
  }
  if (out->kind != VALUE_GAS) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, s->value->at,
                         "a gas is a list of parts, or made from another gas", NULL);
  }
  struct gas_value *gas = ARENA_NEW (ev->arena, struct gas_value);
  *gas = *out->gas;
  gas->name = s->name;
  out->gas = gas;
  return true;
}

static bool
stream_body (struct evaluation *ev, const struct statement *s, struct value *out)
{
  if (!evaluate (ev, s->value, NULL, out)) {
    return false;
  }
  if (out->kind == VALUE_STREAM) {
    return true;
  }
  fault_set_at (ev->fault, MESSAGE_KIND_WRONG, s->value->at,
                out->kind == VALUE_GAS ? "a gas without an amount is no stream"
                                       : "a stream is a flow or an amount of a gas", NULL);
  fault_hint (ev->fault, "stream %s = 850 Nm3/h of GAS at T, P", s->name);
  return false;
}

static bool
let_body (struct evaluation *ev, const struct statement *s, struct value *out)
{
  if (!evaluate (ev, s->value, NULL, out)) {
    return false;
  }
  if (s->targets) {
    struct figures figures = { NULL, 0, 0 };
    struct subject subject = { s->name, s->value->at };
    if (!convert_value (ev, out, s->targets, &subject, &figures)) {
      return false;
    }
    if (figures.count != 1) {
      return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, s->value->at,
                           "a let holds one figure", NULL);
    }
    *out = value_number (figures.at[0].value);
    out->unit = figures.at[0].unit;
    out->words = s->targets->words;
    out->basis = figures.at[0].basis;
    out->moisture = figures.at[0].moisture;
    if (out->unit) {
      out->si = unit_to_si (out->unit, out->si);
      out->measure = measure_of_unit (out->unit);
    }
    return true;
  }
  if (out->kind == VALUE_GAS || out->kind == VALUE_STREAM) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, s->value->at,
                  out->kind == VALUE_GAS ? "a let holds a figure, not a gas"
                                         : "a let holds a figure, not a stream", NULL);
    fault_hint (ev->fault, "%s %s = ...", out->kind == VALUE_GAS ? "gas" : "stream", s->name);
    return false;
  }
  return true;
}

static bool
reference_body (struct evaluation *ev, const struct statement *s, struct state *state)
{
  if (!evaluate_state (ev, s->value, state)) {
    return false;
  }
  if (isnan (state->T) || isnan (state->p)) {
    struct place behind = s->value->at;
    behind.first = behind.last = behind.last + 1;
    return fault_set_at (ev->fault, MESSAGE_STATE_MISSING, behind,
                         "a reference",
                         "reference conditions are a temperature and a pressure");
  }
  return true;
}

static bool
body (struct evaluation *ev, const struct definition *d, struct value *out, struct state *state)
{
  bool done = false;
  ev->subject = d->name;
  if (d->maker) {
    return made_body (ev, d, out);
  }
  switch (d->kind) {
  case NAME_GAS:
    done = gas_body (ev, d->statement, out);
    break;
  case NAME_STREAM:
    done = stream_body (ev, d->statement, out);
    break;
  case NAME_QUANTITY:
    done = let_body (ev, d->statement, out);
    break;
  case NAME_REFERENCE:
    done = reference_body (ev, d->statement, state);
    break;
  case NAME_SHEET:
    *out = value_number (UNSTATED);
    done = sheet_holds (ev, d->statement);
    break;
  case NAME_BALANCE:
    *out = value_number (UNSTATED);
    out->plant = plant_make (ev, d->statement, d->fresh ? d->value.plant : NULL);
    return out->plant != NULL;
  }
  if (!done && d->statement->value) {
    fault_place (ev->fault, d->statement->value->at);
  }
  return done;
}

/* Can what a definition came to be computed with?  */
static bool
is_finite (const struct definition *d, const struct value *value)
{
  return d->kind == NAME_QUANTITY && value->kind == VALUE_QUANTITY ? isfinite (value->si)
         : d->kind == NAME_STREAM ? isfinite (value->stream.moles) : true;
}

bool
definition_refresh (struct session *session, struct definition *d, struct fault *fault)
{
  struct evaluation ev;
  struct result notes;
  struct workings steps;
  struct value value;
  struct state state;
  arena_reset (d->cache);
  d->fresh = false;
  d->value.plant = NULL;
  result_init (&notes, d->cache, d->source);
  evaluation_init (&ev, session, &notes, fault);
  ev.arena = d->cache;
  file_tell (d, &notes);
  workings_init (&steps, d->cache);
  ev.workings = &steps;
  if (!body (&ev, d, &value, &state)) {
    return false;
  }
  if (!is_finite (d, &value)) {
    return fault_set_at (fault, MESSAGE_NOT_FINITE, d->statement->value->at, NULL, NULL);
  }
  if (d->kind == NAME_GAS && value.gas->closed) {
    caution_gas (session, &notes, value.gas->closed, d->name);
  } else if (d->kind == NAME_STREAM && d->maker) {
    caution_gas (session, &notes, value.stream.gas, d->name);
  } else if (d->kind == NAME_STREAM && tree_new_gas (d->statement->value)) {
    caution_gas (session, &notes, value.stream.gas, d->name);
  }
  if (d->kind == NAME_REFERENCE) {
    d->state = state;
  } else {
    d->value = value;
  }
  d->touched = ev.touched | (d->kind == NAME_QUANTITY ? TOUCH_QUANTITY : 0);
  d->assumptions = ev.assumptions;
  d->assumption_count = ev.assumption_count;
  d->sources = ev.sources;
  d->source_count = ev.source_count;
  d->notes = notes.notes;
  d->cautions = notes.cautions;
  d->steps = steps.first;
  d->used = ev.used;
  d->used_count = ev.used_count;
  d->fresh = true;
  return true;
}

/* Is anything it draws on moved?  */
static bool
is_moved (const struct evaluation *ev, const struct definition *d)
{
  for (size_t i = 0; ev->shift_count > 0 && i < d->source_count; i++)
    if (fabs (evaluation_shift (ev, d->sources[i].what)) > 0) {
      return true;
    }
  return false;
}

/* Makes the cache hold; hands on what it leaned on.  */
static bool
bring_up_to_date (struct evaluation *ev, struct definition *d, struct place at)
{
  if (!d->fresh) {
    struct fault inside;
    fault_init (&inside, ev->fault->arena);
    if (!definition_refresh (ev->session, d, &inside)) {
      fault_set_at (ev->fault, inside.kind, at, inside.fact[0], inside.fact[1]);
      fault_facts (ev->fault, inside.fact[2], inside.fact[3]);
      if (inside.hint) {
        fault_hint (ev->fault, "%s", inside.hint);
      }
      return false;
    }
  }
  ev->touched |= d->touched;
  evaluation_use (ev, d);
  for (size_t i = 0; i < d->source_count; i++) {
    evaluation_source (ev, &d->sources[i]);
  }
  for (size_t i = 0; ev->describe && i < d->assumption_count; i++) {
    evaluation_assume (ev, &d->assumptions[i]);
  }
  return true;
}

/* Does the cache say what this evaluation, with its other settings or moved figure, would find? */
static bool
cache_serves (const struct evaluation *ev, struct definition *d)
{
  return !(ev->overridden & d->touched) && !is_moved (ev, d)
         && !(ev->stand_in_count && (d->touched & TOUCH_QUANTITY))
         && !(ev->stand_in_count && ev->stand_ins->tree
              && definition_leans (ev->session, d, ev->stand_ins->definition->name));
}

/* What a definition came to under the settings and shifts of one evaluation.  */
struct worked {
  const struct definition *definition;
  struct value value;
  struct state state;
  const struct worked *next;
};

/* Works a definition out under the settings of EV, leaving its cache alone.  Once in an evaluation:
   a chain of names that each use the one before twice would take forever.                        */
static const struct worked *
work_out (struct evaluation *ev, const struct definition *d, struct place at)
{
  for (const struct worked *w = ev->worked; w; w = w->next)
    if (w->definition == d) {
      return w;
    }
  struct worked *new = ARENA_NEW (ev->arena, struct worked);
  const char *subject = ev->subject;
  struct fault *fault = ev->fault, inside;
  fault_init (&inside, fault->arena);
  ev->fault = &inside;
  bool done = body (ev, d, &new->value, &new->state);
  ev->fault = fault;
  ev->subject = subject;
  if (!done) {
    fault_set_at (fault, inside.kind, at, inside.fact[0], inside.fact[1]);
    return NULL;
  }
  new->definition = d;
  new->next = ev->worked;
  ev->worked = new;
  return new;
}

/* A gas tried in place of another: worked out where it stands, so that its figures can be moved. */
static const struct value *
stand_in_gas (struct evaluation *ev, const struct stand_in *in)
{
  struct value *value = ARENA_NEW (ev->arena, struct value);
  const struct evaluation before = *ev;
  ev->subject = in->definition->name;
  ev->stand_in_count = 0;                 /* it may lean on what it stands in for */
  ev->worked = NULL;
  bool done = evaluate (ev, in->tree, NULL, value);
  ev->subject = before.subject;
  ev->stand_in_count = before.stand_in_count;
  ev->worked = before.worked;
  if (!done || value->kind != VALUE_GAS) {
    return NULL;
  }
  struct gas_value *gas = ARENA_NEW (ev->arena, struct gas_value);
  *gas = *value->gas;
  gas->name = in->definition->name;
  value->gas = gas;
  return value;
}

const struct value *
definition_value (struct evaluation *ev, struct definition *d, struct place at)
{
  for (size_t i = 0; i < ev->stand_in_count; i++)
    if (ev->stand_ins[i].definition == d) {
      return ev->stand_ins[i].tree ? stand_in_gas (ev, &ev->stand_ins[i])
                                   : &ev->stand_ins[i].value;
    }
  if (!bring_up_to_date (ev, d, at)) {
    return NULL;
  }
  if (cache_serves (ev, d)) {
    return &d->value;
  }
  const struct worked *worked = work_out (ev, d, at);
  return worked ? &worked->value : NULL;
}

const struct state *
definition_state (struct evaluation *ev, struct definition *d, struct place at)
{
  if (!bring_up_to_date (ev, d, at)) {
    return NULL;
  }
  if (cache_serves (ev, d)) {
    return &d->state;
  }
  const struct worked *worked = work_out (ev, d, at);
  return worked ? &worked->state : NULL;
}

/* ---- What it has to say ---- */

static void
tell (struct result *result, const struct remark *remark)
{
  for (; remark; remark = remark->next) {
    struct remark *copy = result_remark (result, remark->kind, remark->fact[0], remark->fact[1]);
    copy->fact[2] = remark->fact[2];
    copy->fact[3] = remark->fact[3];
  }
}

void
definition_warn (const struct definition *d, struct result *result)
{
  tell (result, d->cautions);
}

void
definition_tell (struct session *session, struct definition *d, bool all, struct result *result)
{
  if (d->told && !all) {
    return;
  }
  d->told = true;
  tell (result, d->notes);
  tell (result, d->cautions);
  for (size_t i = 0; i < d->need_count; i++) {
    struct definition *need = name_find (session, d->needs[i], strlen (d->needs[i]));
    bool own = need && need->maker && strcmp (need->maker, d->name) == 0;
    if (need && need != d && !own && need->fresh) {
      definition_tell (session, need, all, result);
    }
  }
}

void
caution_gas (const struct session *session, struct result *result, const struct composition *gas,
             const char *name)
{
  struct hazard found[HAZARD_MOST];
  struct arena *arena = result->arena;
  struct flammable_limits *stated;
  size_t set = limits_set (&session->settings, NULL, arena, &stated);
  size_t n = hazard_find (gas, stated, set, found);
  for (size_t i = 0; i < n; i++) {
    const struct hazard *h = &found[i];
    const char *ratio = rough_text (arena, h->ratio);
    struct remark *remark;
    switch (h->kind) {
    case HAZARD_TOXIC:
      remark = result_remark (result, MESSAGE_CAUTION_TOXIC,
                              arena_format (arena, "%s of %s", h->species->key, name), ratio);
      remark->fact[2] = share_text (arena, h->limit);
      remark->fact[3] = h->species->exposure_source;
      break;
    case HAZARD_FLAMMABLE:
      result_remark (result, MESSAGE_CAUTION_FLAMMABLE, name,
                     arena_format (arena, "%s times", ratio));
      break;
    case HAZARD_OXYGEN_RICH:
    case HAZARD_OXYGEN_POOR:
      result_remark (result, h->kind == HAZARD_OXYGEN_RICH ? MESSAGE_CAUTION_OXYGEN_RICH
                                                           : MESSAGE_CAUTION_OXYGEN_POOR,
                     share_text (arena, h->ratio * h->limit), name);
      break;
    }
  }
}
