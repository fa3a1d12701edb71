/* From what two sides say to facts.  */
#include "config.h"
#include "language/balance/plant_private.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

static bool
wrong (struct reader_state *r, const struct node *node, const char *why, const char *way_on)
{
  return fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, node->at, why, way_on);
}

/* What is told of a fact of the line that is read.  */
static struct plant_fact
about_line (const struct reader_state *r)
{
  const char *text = r->line ? r->line->source : "", *words = strchr (text, ' ');
  return (struct plant_fact) { .line = r->number, .text = text, .per = 1, .unit = "",
                               .words = words ? words + strspn (words, " ") : text,
                               .stream = NO_STREAM };
}

static struct raw_fact *
raw_add (struct reader_state *r, enum fact_kind kind)
{
  r->raw = room_for_one (r->ev->arena, r->raw, r->raw_count, &r->raw_room, sizeof *r->raw);
  struct raw_fact *raw = &r->raw[r->raw_count++];
  *raw = (struct raw_fact) { .kind = kind, .u = UNSTATED, .stream = NO_STREAM, .of = NO_STREAM,
                             .about = about_line (r) };
  return raw;
}

/* ---- Compositions ---- */

/* A list with a rest, or with figures that are uncertain beside others that are not, is so many
   shares; any other gas is one composition.                                                     */
static bool
has_rest (const struct node *list)
{
  for (const struct node *part = list && list->kind == NODE_LIST ? list->items : NULL; part;
       part = part->next)
    if (part->rest) {
      return true;
    }
  return false;
}

static const struct node *
list_of (struct reader_state *r, const struct node *node)
{
  while (node && (node->kind == NODE_AT || node->kind == NODE_OF)) {
    node = node->kind == NODE_AT ? node->a : node->b;
  }
  if (node && node->kind == NODE_NAME) {
    struct definition *d = name_find (r->ev->session, node->text, strlen (node->text));
    return !d || !d->statement ? NULL
           : d->kind == NAME_GAS ? d->statement->value
           : d->kind == NAME_STREAM && !d->maker ? list_of (r, d->statement->value) : NULL;
  }
  return node && node->kind == NODE_LIST ? node : NULL;
}

static const struct node *
part_of (struct reader_state *r, const struct node *list, const struct species *species)
{
  for (const struct node *part = list ? list->items : NULL; part; part = part->next) {
    const struct species *found = NULL;
    const char *candidates;
    (void) species_find (r->ev->session->vocabulary.species, part->text, strlen (part->text),
                         &found, &candidates);
    if (found == species) {
      return part;
    }
  }
  return NULL;
}

/* Rounding of a share of GAS from the digits of its part in LIST.  */
static double
part_rounding (struct reader_state *r, const struct node *list, const struct species *species,
               double fraction)
{
  const struct node *part = part_of (r, list, species);
  const struct node *figure = part && part->a && part->a->kind == NODE_QUANTITY ? part->a : NULL;
  return figure && fabs (figure->number) > 0
           ? fraction * digits_rounding (figure) / fabs (figure->number) : 0;
}

static void
composition_fact (struct reader_state *r, size_t stream, const struct composition *gas,
                  const struct node *node)
{
  const struct node *list = list_of (r, node);
  meet_gas (r, gas);
  if (!has_rest (list)) {
    struct raw_fact *raw = raw_add (r, FACT_COMPOSITION);
    raw->stream = raw->about.stream = stream;
    raw->gas = gas;
    raw->about.unit = "mol%";
    raw->about.per = 100;
    raw->gas_u = ARENA_ARRAY (r->ev->arena, gas->count, double);
    raw->gas_rounding = ARENA_ARRAY (r->ev->arena, gas->count, double);
    for (size_t i = 0; i < gas->count; i++) {
      raw->gas_u[i] = UNSTATED;
      raw->gas_rounding[i] = part_rounding (r, list, gas->species[i], gas->fraction[i]);
    }
    return;
  }
  for (size_t i = 0; i < gas->count; i++) {
    const struct node *part = part_of (r, list, gas->species[i]);
    if (part && part->rest) {
      continue;
    }
    struct raw_fact *raw = raw_add (r, FACT_RATIO);
    struct item *items = ARENA_ARRAY (r->ev->arena, 2, struct item);
    items[0] = (struct item) { .stream = stream, .species = gas->species[i], .times = 1 };
    items[1] = (struct item) { .stream = stream, .times = 1 };
    raw->left = (struct items) { items, 1 };
    raw->right = (struct items) { items + 1, 1 };
    raw->count_left.basis = raw->count_right.basis = FLOW_MOLAR;
    raw->value = gas->fraction[i];
    raw->rounding = part_rounding (r, list, gas->species[i], gas->fraction[i]);
    raw->about.stream = stream;
    raw->about.unit = "mol%";
    raw->about.per = 100;
    raw->part_of_gas = gas;
  }
}

/* ---- Flows ---- */

/* Is the flow one whole stream, alone?  */
static bool
is_whole (const struct reading *flow)
{
  return flow->kind == READING_FLOW && flow->items.count == 1 && !flow->shared && !flow->given
         && flow->items.at[0].stream != NO_STREAM && !flow->items.at[0].species
         && fabs (flow->items.at[0].times - 1) < 1e-15;
}

/* A stream that is known: its total, and its composition.  */
static void
total_fact (struct reader_state *r, size_t stream, const struct stream *given,
            const struct unit *unit, const struct node *digits)
{
  struct raw_fact *raw = raw_add (r, FACT_FORM);
  struct item *item = ARENA_NEW (r->ev->arena, struct item);
  struct measure measure = unit ? measure_of_unit (unit) : (struct measure) { .family = 0 };
  bool per_time;
  double Vm = 1;
  *item = (struct item) { .stream = stream, .times = 1 };
  raw->left = (struct items) { item, 1 };
  raw->count_left.basis = FLOW_MOLAR;
  raw->value = given->moles;
  raw->about.stream = stream;
  raw->digits = digits;
  switch (unit ? flow_basis_of (&measure, &per_time) : FLOW_NONE) {
  case FLOW_MASS:
    raw->about.per = given->gas->molar_mass / unit->factor;
    break;
  case FLOW_REFERENCE: {
    struct conditions at = r->ev->settings->family[measure.family].at;
    Vm = 1 / ideal_moles (1, at);
    raw->about.per = Vm / unit->factor;
    break;
  }
  case FLOW_MOLAR:
    raw->about.per = 1 / unit->factor;
    break;
  case FLOW_NONE: case FLOW_ACTUAL: case FLOW_ENERGY:
    raw->about.per = 3.6;
    unit = NULL;
    break;
  }
  raw->about.unit = unit ? unit->spelling : "kmol/h";
  if (!r->plant->unit && unit) {
    r->plant->unit = unit;
    r->plant->unit_text = unit->spelling;
  }
}

/* A sum of flows = a flow of a gas: component by component.  */
static void
parts_fact (struct reader_state *r, const struct reading *flow, const struct reading *known)
{
  const struct composition *gas = known->given->gas;
  double times = known->given_times * (known->shared ? known->figure.si : 1);
  for (size_t i = 0; i < gas->count; i++) {
    struct item *items = ARENA_ARRAY (r->ev->arena, flow->items.count, struct item);
    size_t n = 0;
    for (size_t k = 0; k < flow->items.count; k++)
      if (!flow->items.at[k].species || flow->items.at[k].species == gas->species[i]) {
        items[n] = flow->items.at[k];
        items[n++].species = gas->species[i];
      }
    if (n > 0) {
      struct raw_fact *raw = raw_add (r, FACT_FORM);
      raw->left = (struct items) { items, n };
      raw->count_left.basis = FLOW_MOLAR;
      raw->value = known->given->moles * gas->fraction[i] * times;
      raw->digits = known->digits;
      raw->about.unit = "kmol/h";
      raw->about.per = 3.6;
    }
  }
}

/* FLOW = a flow of a gas, or a sum with one in it: known is the total, and of one whole stream the
   composition.                                                                                  */
static bool
known_stream (struct reader_state *r, const struct reading *flow, const struct reading *known)
{
  const struct unit *unit = known->figure.unit;
  const struct node *digits = known->digits;
  const struct composition *gas = known->given->gas;
  if (is_whole (flow) && known->items.count == 0) {
    struct stream given = *known->given;
    given.moles *= known->given_times * (known->shared ? known->figure.si : 1);
    total_fact (r, flow->items.at[0].stream, &given, unit, digits);
    composition_fact (r, flow->items.at[0].stream, gas, known->list);
    return true;
  }
  if (flow->items.count == 0 || flow->items.at[0].stream == NO_STREAM) {
    return wrong (r, known->node, "this side says no flow of the balance", NULL);
  }
  if (known->items.count == 0) {
    parts_fact (r, flow, known);
    return true;
  }
  struct raw_fact *raw = raw_add (r, FACT_FORM);
  struct item *items = ARENA_ARRAY (r->ev->arena, flow->items.count + known->items.count,
                                    struct item);
  size_t n = 0;
  for (size_t i = 0; i < flow->items.count; i++) {
    items[n++] = flow->items.at[i];
  }
  for (size_t i = 0; i < known->items.count; i++) {
    items[n] = known->items.at[i];
    items[n++].times *= -1;
  }
  raw->left = (struct items) { items, n };
  raw->count_left.basis = FLOW_MOLAR;
  raw->value = known->given->moles * known->given_times;
  raw->about.unit = "kmol/h";
  raw->about.per = 3.6;
  return true;
}

/* ---- Ratios ---- */

/* Do both hang on the same split, so that one is a share of the other component by component?  */
static bool
share_one_split (const struct plant *plant, size_t a, size_t b)
{
  const struct plant_stream *one = &plant->stream[a], *other = &plant->stream[b];
  size_t split = one->from;
  return split != NO_BOUNDARY && plant->boundary[split].line->kind == STATEMENT_SPLIT
         && (other->to == split || other->from == split);
}

static bool
by_mass (const struct value *v)
{
  return v->measure.ratio == RATIO_MASS;
}

/* TOP = value * BOTTOM.  */
static bool
ratio_fact (struct reader_state *r, const struct reading *top, const struct items *bottom,
            const struct reading *figure, bool divide)
{
  const struct value *v = &figure->figure;
  bool whole = top->items.count == 1 && bottom->count == 1 && !top->items.at[0].species
               && !bottom->at[0].species && top->items.at[0].stream != NO_STREAM
               && bottom->at[0].stream != NO_STREAM
               && fabs (top->items.at[0].times - 1) + fabs (bottom->at[0].times - 1) < 1e-15;
  bool share = whole && share_one_split (r->plant, top->items.at[0].stream, bottom->at[0].stream);
  if (v->measure.ratio == RATIO_ENERGY) {
    return wrong (r, figure->node, "a ratio of energy flows is not known to a balance", NULL);
  }
  if (v->si < 0) {
    return fault_set_at (r->ev->fault, MESSAGE_RANGE, figure->node->at, "a share below zero", NULL);
  }
  struct raw_fact *raw = raw_add (r, share ? FACT_SHARE : FACT_RATIO);
  raw->left = top->items;
  raw->right = *bottom;
  raw->count_left.basis = raw->count_right.basis = by_mass (v) ? FLOW_MASS : FLOW_MOLAR;
  raw->value = v->si;
  raw->about.unit = v->unit ? v->unit->spelling : "";
  raw->about.per = 1 / (v->unit ? v->unit->factor : 1);
  raw->digits = divide ? NULL : figure->digits;
  raw->by_mass = by_mass (v);
  if (share) {
    raw->stream = top->items.at[0].stream;
    raw->of = bottom->at[0].stream;
  }
  return true;
}

static bool
flows_equal (struct reader_state *r, struct reading *left, struct reading *right)
{
  if (left->given) {
    struct reading swap = *left;
    *left = *right;
    *right = swap;
  }
  if (right->given) {
    if (left->given) {
      return wrong (r, right->node, "both sides hold a flow that is known: say it on one side",
                    NULL);
    }
    return known_stream (r, left, right);
  }
  if (left->shared && !right->shared) {
    struct reading swap = *left;
    *left = *right;
    *right = swap;
  }
  if (left->shared) {
    return wrong (r, left->node, "a share on both sides: write their ratio",
                  "known A / B = 0.5 mol/mol");
  }
  struct reading figure = *right;
  figure.figure = right->shared ? right->figure : value_number (1);
  figure.digits = right->shared ? right->digits : NULL;
  bool plain = !right->shared;
  for (size_t i = 0; i < left->items.count; i++) {
    plain = plain || left->items.at[i].times < 0;
  }
  bool unlike = right->shared && figure.figure.measure.ratio == RATIO_PLAIN
                && !left->items.at[0].species && !right->items.at[0].species;
  if (!ratio_fact (r, left, &right->items, &figure, plain)) {
    return false;
  }
  r->raw[r->raw_count - 1].taken_by_amount
    = unlike && r->raw[r->raw_count - 1].kind != FACT_SHARE;
  return true;
}

/* known conversion of CH4 in burner = 97 %: what is used up, over what goes in.  */
static bool
conversion_fact (struct reader_state *r, const struct reading *left, const struct reading *figure)
{
  const struct plant_boundary *boundary = &r->plant->boundary[left->boundary];
  const struct statement *line = boundary->line;
  struct reading used = { .kind = READING_FLOW, .node = left->node }, in = used;
  struct item *items = ARENA_ARRAY (r->ev->arena, 64, struct item);
  size_t n = 0, k = 0;
  for (const struct node *reaction = line->reactions; reaction && n < 32;
       reaction = reaction->next, k++)
    for (const struct node *part = reaction->items; part && n < 32; part = part->next) {
      struct species_set set;
      if (!species_named (r->ev, part, &set)) {
        return false;
      }
      if (set.at[0] == left->species) {
        items[n++] = (struct item) { .stream = NO_STREAM, .times = -part->number,
                                     .boundary = left->boundary, .reaction = k };
      }
    }
  used.items = (struct items) { items, n };
  if (n == 0) {
    return wrong (r, left->node->b->a, arena_format (r->ev->arena, "%s does not react in %s",
                                                     left->species->key, line->name), NULL);
  }
  struct item *inlets = items + n;
  size_t m = 0;
  for (const struct node *name = line->inlets; name && n + m < 64; name = name->next) {
    inlets[m++] = (struct item) { .stream = plant_find (r->plant, name->text),
                                  .species = left->species, .times = 1 };
  }
  in.items = (struct items) { inlets, m };
  r->has_gas = true;
  return ratio_fact (r, &used, &in.items, figure, false);
}

/* ---- A line ---- */

static bool
flow_is_figure (struct reader_state *r, struct reading *flow, const struct reading *figure)
{
  const struct measure *m = &figure->figure.measure;
  bool per_time;
  if (flow->shared || flow->given) {
    return wrong (r, flow->node, "on this side stands a flow alone", NULL);
  }
  bool extent = flow->items.at[0].stream == NO_STREAM;
  struct raw_fact *raw = raw_add (r, FACT_FORM);
  raw->about.stream = flow->items.count == 1 ? flow->items.at[0].stream : NO_STREAM;
  if (m->ratio == RATIO_NONE && dimension_is_none (m->dimension)) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_EXPECTED, figure->node->at,
                         flow->items.at[0].species ? "a share of a gas is mol% or mass%"
                         : "a flow is in kg/h, kmol/h, Nm3/h", NULL);
  }
  enum flow_basis basis = flow_basis_of (m, &per_time);
  if (extent && basis != FLOW_MOLAR) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, figure->node->at,
                         "an extent is an amount per time: kmol/h", NULL);
  }
  return basis != FLOW_NONE ? flow_figure (r, flow, figure, raw)
                            : share_figure (r, flow, figure, raw);
}

static bool
composition_line (struct reader_state *r, const struct reading *left, const struct reading *right)
{
  if (right->kind != READING_GAS) {
    return wrong (r, right->node, "a composition is that of a gas",
                  "known composition of leak = air");
  }
  const struct composition *gas = gas_composition (r->ev, right->gas, right->node->at);
  if (!gas) {
    return false;
  }
  composition_fact (r, left->items.at[0].stream, gas, right->list);
  return true;
}

static bool
without_line (struct reader_state *r, const struct node *node)
{
  for (; node->kind == NODE_WITHOUT; node = node->a) {
    const struct node *of = node;
    struct species_set set;
    while (of->kind == NODE_WITHOUT) {
      of = of->a;
    }
    size_t stream = of->kind == NODE_NAME ? plant_find (r->plant, of->text) : NO_STREAM;
    if (stream == NO_STREAM) {
      return of->kind == NODE_NAME ? plant_stream_unknown (r, of)
                                   : wrong (r, of, "what is without it is a stream", NULL);
    }
    if (!species_named (r->ev, node->b, &set)) {
      return false;
    }
    for (size_t i = 0; i < set.count; i++) {
      meet_species (r, set.at[i]);
      r->absent = room_for_one (r->ev->arena, r->absent, r->absent_count, &r->absent_room,
                                sizeof *r->absent);
      r->absent[r->absent_count++] = (struct absence) { stream, set.at[i], about_line (r) };
    }
  }
  r->has_gas = true;
  return true;
}

static bool
absent_line (struct reader_state *r, const struct statement *line)
{
  for (const struct node *name = line->names; name; name = name->next) {
    struct node of = *line->value, what = *name;
    struct node without = { .kind = NODE_WITHOUT, .at = name->at, .a = &of, .b = &what };
    of.next = what.next = NULL;
    if (!without_line (r, &without)) {
      return false;
    }
  }
  return true;
}

bool
plant_read_known (struct reader_state *r, const struct statement *line)
{
  struct reading left, right;
  if (line->kind == STATEMENT_ABSENT) {
    return absent_line (r, line);
  }
  if (!line->claim) {
    return without_line (r, line->value);
  }
  if (!plant_reading (r, line->value, &left)
      || !(left.kind == READING_COMPOSITION ? plant_gas_reading (r, line->claim, &right)
           : plant_reading (r, line->claim, &right))) {
    return false;
  }
  if (left.kind == READING_FIGURE || left.kind == READING_GAS) {
    struct reading swap = left;
    left = right;
    right = swap;
  }
  if (left.kind == READING_COMPOSITION) {
    return composition_line (r, &left, &right);
  }
  if (right.kind == READING_GAS || right.kind == READING_COMPOSITION) {
    return wrong (r, right.node, "a gas without an amount is no flow",
                  "850 Nm3/h of GAS; or known composition of NAME = GAS");
  }
  if (left.kind == READING_FLOW && right.kind == READING_FLOW) {
    return flows_equal (r, &left, &right);
  }
  if (right.kind != READING_FIGURE || left.kind == READING_FIGURE) {
    return wrong (r, right.node, "a known says something of a stream of the balance",
                  "known feed = 850 Nm3/h");
  }
  if (left.kind == READING_FLOW) {
    if (left.items.count == 0) {
      return wrong (r, left.node, "a known says something of a stream of the balance", NULL);
    }
    return flow_is_figure (r, &left, &right);
  }
  const struct value *v = &right.figure;
  if (!dimension_is_none (v->measure.dimension)) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, right.node->at,
                         "a ratio is a number, %, mol/mol or kg/kg", NULL);
  }
  return left.kind == READING_CONVERSION ? conversion_fact (r, &left, &right)
                                         : ratio_fact (r, &left, &left.under, &right, false);
}

bool
plant_read_per (struct reader_state *r, const struct statement *line)
{
  const struct node *node = line->value;
  size_t stream = node->kind == NODE_OF && node->b->kind == NODE_NAME
                    ? plant_find (r->plant, node->b->text) : NO_STREAM;
  struct reading figure = { .node = node->a, .digits = NULL };
  if (stream == NO_STREAM) {
    return node->kind == NODE_OF && node->b->kind == NODE_NAME ? plant_stream_unknown (r, node->b)
           : wrong (r, node, "a basis is a flow of one stream", "per 100 kmol/h of feed");
  }
  struct item item = { .stream = stream, .times = 1 };
  struct reading flow = { .kind = READING_FLOW, .node = node->b };
  flow.items = (struct items) { ARENA_NEW (r->ev->arena, struct item), 1 };
  *flow.items.at = item;
  figure.state = state_empty (node->at);
  if (!evaluate_quantity (r->ev, node->a, &figure.figure)) {
    return false;
  }
  struct raw_fact *raw = raw_add (r, FACT_FORM);
  raw->about.stream = stream;
  raw->about.basis = true;
  return flow_figure (r, &flow, &figure, raw);
}

bool
plant_read_given (struct reader_state *r, size_t stream)
{
  struct plant_stream *own = &r->plant->stream[stream];
  const struct value *value = definition_value (r->ev, own->given, own->at);
  if (!value) {
    return false;
  }
  if (!value->stream.flow) {
    return fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, own->at,
                         "a balance is one of flows, not of amounts", "kg/h, not kg");
  }
  const struct statement *statement = own->given->maker ? NULL : own->given->statement;
  size_t first = r->raw_count;
  const struct node *typed = statement ? statement->value : NULL;
  while (typed && typed->kind == NODE_AT) {
    typed = typed->a;
  }
  typed = typed && typed->kind == NODE_OF && typed->a->kind == NODE_QUANTITY ? typed->a : NULL;
  total_fact (r, stream, &value->stream, value->unit, typed);
  composition_fact (r, stream, value->stream.gas, statement ? statement->value : NULL);
  const char *source = own->given->source, *words = strchr (source, ' ');
  if (own->given->maker) {
    source = words = arena_format (r->ev->arena, "%s, %s", own->name, source);
  }
  for (size_t i = first; i < r->raw_count; i++) {
    r->raw[i].about.line = 0;
    r->raw[i].about.text = source;
    r->raw[i].about.words = words ? words + strspn (words, " ") : source;
  }
  return true;
}
