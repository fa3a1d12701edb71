/* From one side of a known to what it says.  What does not mention a stream of the balance is an
   expression like any other; what does is a linear sum of flows, a ratio of two such, or one of
   the forms that only a balance has.                                                            */
#include "config.h"
#include "language/balance/plant_private.h"

#include <math.h>
#include <string.h>
#include "gas/air.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "support/arena.h"
#include "support/text.h"

static bool
wrong (struct reader_state *r, const struct node *node, const char *why, const char *way_on)
{
  return fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, node->at, why, way_on);
}

bool
plant_stream_unknown (struct reader_state *r, const struct node *name)
{
  const char *best = NULL;
  size_t least = text_reach (name->text) + 1;
  for (size_t s = 0; s < r->plant->stream_count; s++) {
    size_t distance = text_distance (name->text, r->plant->stream[s].name, least);
    if (distance < least) {
      best = r->plant->stream[s].name;
      least = distance;
    }
  }
  return fault_set_at (r->ev->fault, MESSAGE_BALANCE_STREAM, name->at, name->text,
                       best ? arena_format (r->ev->arena, "did you mean '%s'?", best)
                            : "a stream stands in a line with mix, separate, split or react");
}

/* Does the tree mention a stream of the balance?  */
static bool
mentions_own (const struct plant *plant, const struct node *node)
{
  for (; node; node = node->next)
    if ((node->kind == NODE_NAME && plant_find (plant, node->text) != NO_STREAM)
        || mentions_own (plant, node->a) || mentions_own (plant, node->b)
        || mentions_own (plant, node->c) || mentions_own (plant, node->items)) {
      return true;
    }
  return false;
}

/* ---- Expressions without streams of the balance ---- */

/* The one quantity with a typed figure in a tree; null: none, or several.  */
static const struct node *
only_figure (const struct node *node, int *count)
{
  const struct node *found = NULL;
  if (node && node->kind == NODE_QUANTITY && !node->a) {
    ++*count;
    return node;
  }
  for (int i = 0; node && i < 2; i++) {
    const struct node *one = i ? node->b : node->a;
    if (one && node->kind != NODE_AT) {
      const struct node *in = only_figure (one, count);
      found = in ? in : found;
    }
  }
  return found;
}

static const struct node *
digits_of (struct reader_state *r, const struct node *node)
{
  int count = 0;
  while (node->kind == NODE_AT) {
    node = node->a;
  }
  if (node->kind == NODE_NAME) {
    struct definition *d = name_find (r->ev->session, node->text, strlen (node->text));
    node = d && d->kind == NAME_QUANTITY && !d->maker ? d->statement->value : node;
  }
  const struct node *figure = only_figure (node, &count);
  return count == 1 ? figure : NULL;
}

/* A figure with the state behind it.  */
static bool
figure_at (struct reader_state *r, const struct node *node, struct reading *out)
{
  const struct node *figure = node->kind == NODE_AT ? node->a : node;
  out->state = state_empty (node->at);
  if (node->kind == NODE_AT && !evaluate_state (r->ev, node->b, &out->state)) {
    return false;
  }
  return evaluate (r->ev, figure, NULL, &out->figure);
}

/* A stream or a part of one that is known already, as a constant in a sum.  */
static bool
given_flow (struct reader_state *r, struct reading *out)
{
  const struct value *v = &out->figure;
  const struct stream *stream = &v->stream;
  out->kind = READING_FLOW;
  out->given_times = 1;
  if (!(v->kind == VALUE_STREAM ? stream->flow : v->of_stream && v->flow)) {
    return wrong (r, out->node, "a balance is one of flows, not of amounts", "kg/h, not kg");
  }
  struct stream *given = ARENA_NEW (r->ev->arena, struct stream);
  *given = *stream;
  if (v->kind == VALUE_PART) {
    if (v->species.count != 1) {
      return wrong (r, out->node, "this is a flow of several components", NULL);
    }
    given->gas = composition_pure (r->ev->arena, v->species.at[0]);
    given->moles = v->moles;
  }
  out->given = given;
  meet_gas (r, given->gas);
  return true;
}

static bool
plain_reading (struct reader_state *r, const struct node *node, struct reading *out)
{
  bool figure = node->kind == NODE_QUANTITY
                || (node->kind == NODE_AT && node->a->kind == NODE_QUANTITY);
  out->digits = digits_of (r, node);
  out->list = node->kind == NODE_OF ? node->b : node;
  if (figure ? !figure_at (r, node, out) : !evaluate (r->ev, node, NULL, &out->figure)) {
    return false;
  }
  switch ((int) out->figure.kind) {
  case VALUE_QUANTITY:
    out->kind = READING_FIGURE;
    if (!figure) {
      out->state = state_empty (node->at);
    }
    return true;
  case VALUE_RATIO:
    out->kind = READING_FIGURE;
    out->state = state_empty (node->at);
    out->figure = value_number (out->figure.moles);
    return true;
  case VALUE_GAS:
    out->kind = READING_GAS;
    out->gas = out->figure.gas;
    return true;
  case VALUE_STREAM:
  case VALUE_PART:
    return given_flow (r, out);
  default:
    return wrong (r, node, "a known is a flow, a share, a ratio or a recovery", NULL);
  }
}

/* ---- Flows of the balance ---- */

static void
add_item (struct reader_state *r, struct items *items, const struct item *item)
{
  struct item *more = ARENA_ARRAY (r->ev->arena, items->count + 1, struct item);
  if (items->count > 0) {
    memcpy (more, items->at, items->count * sizeof *more);
  }
  more[items->count++] = *item;
  items->at = more;
}

static bool
whole_stream (struct reader_state *r, const struct node *node, struct reading *out)
{
  size_t stream = plant_find (r->plant, node->text);
  out->kind = READING_FLOW;
  add_item (r, &out->items, &(struct item) { .stream = stream, .times = 1 });
  return true;
}

static bool
parts_of (struct reader_state *r, const struct node *part, const struct node *of,
          struct reading *out)
{
  struct species_set set;
  size_t stream = plant_find (r->plant, of->text);
  if (!species_named (r->ev, part, &set)) {
    return false;
  }
  out->kind = READING_FLOW;
  r->has_gas = true;
  for (size_t i = 0; i < set.count; i++) {
    meet_species (r, set.at[i]);
    add_item (r, &out->items, &(struct item) { .stream = stream, .species = set.at[i],
                                               .times = 1 });
  }
  return true;
}

/* extent of burner; extent of reaction 2 of burner.  */
static bool
extent_of (struct reader_state *r, const struct node *node, struct reading *out)
{
  size_t b = plant_boundary_find (r->plant, node->b->text), k = (size_t) node->a->number, n = 0;
  if (b == NO_BOUNDARY) {
    return fault_set_at (r->ev->fault, MESSAGE_BALANCE_STREAM, node->b->at, node->b->text,
                         "an extent is that of a react line: extent of NAME");
  }
  for (const struct node *one = r->plant->boundary[b].line->reactions; one; one = one->next) {
    n++;
  }
  if (n == 0 || k > n || (k == 0 && n > 1)) {
    return wrong (r, node->b, n == 0 ? "nothing reacts in it"
                  : k > n ? arena_format (r->ev->arena, "it has %zu reaction%s", n,
                                          n == 1 ? "" : "s")
                          : "it has several reactions: which?",
                  "extent of reaction 2 of NAME, counted as they stand in its line");
  }
  out->kind = READING_FLOW;
  r->has_gas = true;
  add_item (r, &out->items, &(struct item) { .stream = NO_STREAM, .times = 1, .boundary = b,
                                             .reaction = k > 0 ? k - 1 : 0 });
  return true;
}

/* conversion of CH4 in burner.  */
static bool
conversion_of (struct reader_state *r, const struct node *node, struct reading *out)
{
  struct species_set set;
  const struct node *in = node->b->b;
  out->boundary = plant_boundary_find (r->plant, in->text);
  if (out->boundary == NO_BOUNDARY || !r->plant->boundary[out->boundary].line->reactions) {
    return wrong (r, in, "a conversion is that in a react line of the balance",
                  "known conversion of CH4 in NAME = 97 %");
  }
  if (!species_named (r->ev, node->b->a, &set)) {
    return false;
  }
  out->kind = READING_CONVERSION;
  out->species = set.at[0];
  return true;
}

/* ---- Sums and products of them ---- */

/* The share in front becomes a part of every item.  */
static void
fold_share (struct reader_state *r, struct reading *out)
{
  if (!out->shared) {
    return;
  }
  struct item *at = ARENA_ARRAY (r->ev->arena, out->items.count, struct item);
  for (size_t i = 0; i < out->items.count; i++) {
    at[i] = out->items.at[i];
    at[i].times *= out->figure.si;
  }
  out->items.at = at;
  out->given_times *= out->figure.si;
  out->shared = false;
  out->digits = NULL;
}

static bool
is_share (const struct value *v)
{
  return v->kind == VALUE_QUANTITY && dimension_is_none (v->measure.dimension)
         && v->measure.sort == UNIT_SCALE;
}

/* FLOW times or divided by a number, or a share of it.  */
static bool
share_of (struct reader_state *r, const struct node *node, const struct reading *number,
          bool divide, struct reading *flow)
{
  if (!is_share (&number->figure)) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, number->node->at,
                         "a flow is multiplied by a number or a share", NULL);
  }
  if (flow->kind != READING_FLOW || (divide && fabs (number->figure.si) < 1e-300)) {
    return wrong (r, node, flow->kind == READING_FLOW ? "nothing can be divided by zero"
                  : "a share is one of a flow", NULL);
  }
  fold_share (r, flow);
  flow->figure = number->figure;
  flow->digits = number->digits;
  flow->shared = true;
  if (divide) {
    flow->figure.si = 1 / flow->figure.si;
    flow->digits = NULL;
  }
  return true;
}

static bool
add_flows (struct reader_state *r, const struct node *node, struct reading *a, struct reading *b)
{
  double sign = node->kind == NODE_SUBTRACT ? -1 : 1;
  if (a->kind != READING_FLOW || b->kind != READING_FLOW) {
    fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, (b->kind != READING_FLOW ? b : a)->node->at,
                  "a flow is added to a flow of a gas: 5 kg/h of N2", NULL);
    return false;
  }
  if (a->given && b->given) {
    return wrong (r, node, "two flows that are known: name their sum with stream first", NULL);
  }
  fold_share (r, a);
  fold_share (r, b);
  for (size_t i = 0; i < b->items.count; i++) {
    struct item item = b->items.at[i];
    item.times *= sign;
    add_item (r, &a->items, &item);
  }
  if (b->given) {
    a->given = b->given;
    a->given_times = sign * b->given_times;
  }
  a->digits = NULL;
  return true;
}

static bool
divide_flows (struct reader_state *r, const struct node *node, struct reading *a,
              struct reading *b)
{
  if (a->kind != READING_FLOW || b->kind != READING_FLOW || a->given || b->given) {
    return wrong (r, node, "a ratio is one of two flows of the balance", NULL);
  }
  fold_share (r, a);
  fold_share (r, b);
  a->kind = READING_RATIO;
  a->under = b->items;
  a->digits = NULL;
  return true;
}

static bool
sum_reading (struct reader_state *r, const struct node *node, struct reading *out)
{
  struct reading b;
  if (!plant_reading (r, node->a, out) || !plant_reading (r, node->b, &b)) {
    return false;
  }
  out->node = node;
  if (node->kind == NODE_ADD || node->kind == NODE_SUBTRACT) {
    return add_flows (r, node, out, &b);
  }
  bool divide = node->kind == NODE_DIVIDE;
  if (b.kind == READING_FIGURE) {
    return share_of (r, node, &b, divide, out);
  }
  if (divide) {
    return divide_flows (r, node, out, &b);
  }
  struct reading number = *out;
  if (number.kind != READING_FIGURE) {
    return wrong (r, node, "two flows are not multiplied", NULL);
  }
  *out = b;
  return share_of (r, node, &number, false, out);
}

/* ---- `of` ---- */

/* The name left of `of` is a figure of the user's, or a component.  */
static bool
names_quantity (struct reader_state *r, const struct node *name)
{
  struct definition *d = name_find (r->ev->session, name->text, strlen (name->text));
  const struct species *species;
  const char *candidates;
  enum species_match match = species_find (r->ev->session->vocabulary.species, name->text,
                                           strlen (name->text), &species, &candidates);
  return d && d->kind == NAME_QUANTITY && match != SPECIES_KEY && match != SPECIES_SYNONYM;
}

static bool
of_reading (struct reader_state *r, const struct node *node, struct reading *out)
{
  const struct node *a = node->a, *b = node->b;
  bool own = b->kind == NODE_NAME && plant_find (r->plant, b->text) != NO_STREAM;
  if (own && a->text && strcmp (a->text, "composition") == 0) {
    bool done = whole_stream (r, b, out);
    out->kind = READING_COMPOSITION;
    return done;
  }
  if (a->kind == NODE_NAME && !names_quantity (r, a)) {
    return own ? parts_of (r, a, b, out) : wrong (r, b, "a component is one of a stream", NULL);
  }
  struct reading number;
  if (a->kind == NODE_PROPERTY) {
    return wrong (r, a, "a property of a stream is no known of a balance",
                  "flows, shares, ratios, recoveries and compositions are");
  }
  if (!plant_reading (r, a, &number) || !plant_reading (r, b, out)) {
    return false;
  }
  if (number.kind != READING_FIGURE || !is_share (&number.figure)) {
    bool gas = b->kind == NODE_NAME && air_is_name (b->text, strlen (b->text));
    return wrong (r, a, "what stands before 'of' is a share here: 5 % of tail",
                  gas ? "known air = 850 Nm3/h, and: known composition of air = air"
                  : "a flow alone: known feed = 850 Nm3/h");
  }
  if (number.figure.measure.ratio == RATIO_NONE) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_EXPECTED, a->at,
                         "a share is written in %: 5 % of mix; a multiple with *: 2 * feed", NULL);
  }
  return share_of (r, node, &number, false, out);
}

/* A name that stands where only a stream can: nothing else is called so.  */
static bool
names_nothing (struct reader_state *r, const struct node *node)
{
  const struct species *species;
  const char *candidates;
  size_t n = node->kind == NODE_NAME ? strlen (node->text) : 0;
  return n > 0 && !name_find (r->ev->session, node->text, n)
         && strcmp (node->text, "air") != 0
         && species_find (r->ev->session->vocabulary.species, node->text, n, &species,
                          &candidates) == SPECIES_NONE;
}

static bool
own_form (struct reader_state *r, const struct node *node, struct reading *out)
{
  bool conversion = strcmp (node->a->text, "conversion") == 0 && node->b->kind == NODE_WITHIN;
  return conversion ? conversion_of (r, node, out) : extent_of (r, node, out);
}

static bool
is_own_form (const struct node *node)
{
  return node->kind == NODE_OF && node->a->kind == NODE_NAME
         && ((strcmp (node->a->text, "conversion") == 0 && node->b->kind == NODE_WITHIN)
             || (strcmp (node->a->text, "extent") == 0 && node->b->kind == NODE_NAME));
}

bool
plant_reading (struct reader_state *r, const struct node *node, struct reading *out)
{
  *out = (struct reading) { .node = node, .figure = value_number (1), .given_times = 1,
                            .boundary = NO_BOUNDARY };
  if (is_own_form (node)) {
    return own_form (r, node, out);
  }
  bool flow_of = node->kind == NODE_OF && node->a->kind == NODE_QUANTITY && node->a->unit
                 && node->a->unit->ratio == RATIO_NONE;
  const struct node *named = node->kind == NODE_OF ? node->b : node;
  if (!flow_of && names_nothing (r, named) && plant_find (r->plant, named->text) == NO_STREAM) {
    return plant_stream_unknown (r, named);
  }
  if (!mentions_own (r->plant, node)) {
    return plain_reading (r, node, out);
  }
  switch ((int) node->kind) {
  case NODE_NAME:
    return whole_stream (r, node, out);
  case NODE_OF:
    return of_reading (r, node, out);
  case NODE_ADD:
  case NODE_SUBTRACT:
  case NODE_MULTIPLY:
  case NODE_DIVIDE:
    return sum_reading (r, node, out);
  default:
    return wrong (r, node, "this cannot be said of a stream that is not known yet",
                  "a known is a flow, a share, a ratio, a recovery or a composition");
  }
}

bool
plant_gas_reading (struct reader_state *r, const struct node *node, struct reading *out)
{
  if (node->kind != NODE_NAME || plant_find (r->plant, node->text) == NO_STREAM
      || !air_is_name (node->text, strlen (node->text))) {
    return plant_reading (r, node, out);
  }
  *out = (struct reading) { .kind = READING_GAS, .node = node, .list = node };
  out->gas = gas_of_composition (r->ev, r->ev->session->air, node->text);
  return out->gas != NULL;
}
