/* The streams of a session as a process chart: blends bring together what flows into them, and what
   is made of one stream (shares, remainders, recoveries) leaves a box that parts it.            */
#include "config.h"
#include "language/commands/note_chart.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/wording.h"
#include "result/chart.h"
#include "support/arena.h"

enum { NOWHERE = -1, BOXES_MOST = 200 };

/* What goes in and out of a box agrees to this, relative.  */
static const double closed_within = 1e-9;

/* A stream and where it comes from.  */
struct flow {
  const struct definition *definition;
  const struct node *made;               /* its expression, without `at` */
  int parted_from;                       /* the stream it is made of; NOWHERE: none */
  int blend, parting;                    /* boxes: that makes it, that parts it; NOWHERE */
};

struct drawing {
  const struct session *session;
  struct arena *arena;
  struct flow *flows;
  size_t flow_count;
  struct chart_box *boxes;
  struct chart_arrow *arrows;
  size_t box_count, arrow_count;
  double in, out;                        /* over the edge of the chart, mol/s */
};

static int
flow_named (const struct drawing *d, const struct node *node)
{
  for (size_t i = 0; node->kind == NODE_NAME && i < d->flow_count; i++)
    if (strcmp (d->flows[i].definition->name, node->text) == 0) {
      return (int) i;
    }
  return NOWHERE;
}

static double
moles_of (const struct drawing *d, int i)
{
  return d->flows[i].definition->value.stream.moles;
}

/* The stream that a share, a remainder or recoveries are of.  */
static int
parted_from (const struct drawing *d, const struct node *made)
{
  if (made->kind == NODE_OF && made->a->kind == NODE_QUANTITY) {
    return flow_named (d, made->b);
  }
  return made->kind == NODE_SUBTRACT || made->kind == NODE_KEEPING ? flow_named (d, made->a)
                                                                   : NOWHERE;
}

static void
find_flows (struct drawing *d)
{
  for (size_t i = 0; i < d->session->count; i++) {
    const struct definition *definition = d->session->order[i];
    if (definition->kind != NAME_STREAM || !definition->fresh || !definition->value.stream.flow) {
      continue;
    }
    const struct node *made = definition->statement->value;
    while (made->kind == NODE_AT) {
      made = made->a;
    }
    d->flows[d->flow_count++] = (struct flow) { definition, made, NOWHERE, NOWHERE, NOWHERE };
  }
  for (size_t i = 0; i < d->flow_count; i++) {
    d->flows[i].parted_from = parted_from (d, d->flows[i].made);
  }
}

static int
add_box (struct drawing *d, const char *name, const char *kind)
{
  d->boxes[d->box_count] = (struct chart_box) { arena_string (d->arena, name), kind };
  return (int) d->box_count++;
}

static void
find_boxes (struct drawing *d)
{
  for (size_t i = 0; i < d->flow_count; i++) {
    struct flow *f = &d->flows[i];
    const char *kind = NULL;
    if (f->made->kind == NODE_ADD) {
      f->blend = add_box (d, f->definition->name, "blends");
    }
    for (size_t k = 0; k < d->flow_count; k++)
      if (d->flows[k].parted_from == (int) i) {
        kind = kind || d->flows[k].made->kind != NODE_KEEPING ? "splits" : "separates";
      }
    if (kind) {
      f->parting = add_box (d, f->definition->name, kind);
    }
  }
}

/* "CH4 54.4, CO2 37.3 mol%": the two largest parts.  */
static const char *
parts_text (const struct drawing *d, const struct composition *gas)
{
  size_t first = 0, second = gas->count;
  for (size_t i = 1; i < gas->count; i++) {
    first = gas->fraction[i] > gas->fraction[first] ? i : first;
  }
  for (size_t i = 0; i < gas->count; i++)
    if (i != first && (second == gas->count || gas->fraction[i] > gas->fraction[second])) {
      second = i;
    }
  const char *one = arena_format (d->arena, "%s %s", gas->species[first]->key,
                                  rough_text (d->arena, 100 * gas->fraction[first]));
  return second == gas->count
           ? arena_format (d->arena, "%s mol%%", one)
           : arena_format (d->arena, "%s, %s %s mol%%", one, gas->species[second]->key,
                           rough_text (d->arena, 100 * gas->fraction[second]));
}

/* The gas may be null: of a sum of feeds nobody named.  */
static void
add_arrow (struct drawing *d, const char *name, double moles, const struct composition *gas,
           int from, int to)
{
  d->in += from == CHART_OUTSIDE ? moles : 0;
  d->out += to == CHART_OUTSIDE ? moles : 0;
  d->arrows[d->arrow_count++] = (struct chart_arrow) {
    .name = arena_string (d->arena, name),
    .flow = arena_format (d->arena, "%s kmol/h", figure_text (d->arena, 3.6 * moles)),
    .parts = gas ? parts_text (d, gas) : NULL, .amount = moles, .from = from, .to = to };
}

/* ---- Where each stream goes ---- */

/* Is stream I one of the feeds of a blend?  */
static bool
feeds (const struct drawing *d, const struct node *sum, int i)
{
  return sum->kind == NODE_ADD ? feeds (d, sum->a, i) || feeds (d, sum->b, i)
                               : flow_named (d, sum) == i;
}

static double
named_feeds (const struct drawing *d, const struct node *sum, int *unnamed,
             const struct node **last)
{
  if (sum->kind == NODE_ADD) {
    return named_feeds (d, sum->a, unnamed, last) + named_feeds (d, sum->b, unnamed, last);
  }
  int i = flow_named (d, sum);
  if (i == NOWHERE) {
    ++*unnamed;
    *last = sum;
  }
  return i == NOWHERE ? 0 : moles_of (d, i);
}

/* A stream from where it is made to the first that takes it; a second one has it from the edge.  */
static void
draw_flow (struct drawing *d, size_t i)
{
  const struct flow *f = &d->flows[i];
  const struct stream *s = &f->definition->value.stream;
  const char *name = f->definition->name;
  int from = f->blend != NOWHERE ? f->blend
             : f->parted_from != NOWHERE ? d->flows[f->parted_from].parting : CHART_OUTSIDE;
  bool drawn = f->parting != NOWHERE;
  if (drawn) {
    add_arrow (d, name, s->moles, s->gas, from, f->parting);
  }
  for (size_t k = 0; k < d->flow_count; k++)
    if (d->flows[k].blend != NOWHERE && feeds (d, d->flows[k].made, (int) i)) {
      add_arrow (d, name, s->moles, s->gas, drawn ? CHART_OUTSIDE : from, d->flows[k].blend);
      drawn = true;
    }
  if (!drawn && from != CHART_OUTSIDE) {
    add_arrow (d, name, s->moles, s->gas, from, CHART_OUTSIDE);
  }
}

/* The feeds of a blend that have no name.  */
static void
draw_unnamed (struct drawing *d, const struct flow *f)
{
  const struct node *last = NULL;
  int unnamed = 0;
  if (f->blend == NOWHERE) {
    return;
  }
  double rest = f->definition->value.stream.moles - named_feeds (d, f->made, &unnamed, &last);
  if (unnamed > 0 && rest > 0) {
    const char *name = unnamed == 1 ? node_text (d->arena, f->definition->statement, last)
                                    : "other feeds";
    add_arrow (d, name, rest, NULL, CHART_OUTSIDE, f->blend);
  }
}

/* What a parted stream has left; false if more leaves the box than comes in.  */
static bool
draw_rest (struct drawing *d, size_t i)
{
  const struct flow *f = &d->flows[i];
  double rest = moles_of (d, (int) i), whole = rest;
  if (f->parting == NOWHERE) {
    return true;
  }
  for (size_t k = 0; k < d->flow_count; k++) {
    rest -= d->flows[k].parted_from == (int) i ? moles_of (d, (int) k) : 0;
  }
  if (rest > closed_within * whole) {
    add_arrow (d, arena_format (d->arena, "rest of %s", f->definition->name), rest, NULL,
               f->parting, CHART_OUTSIDE);
  }
  return rest >= -closed_within * whole;
}

static const char *
closure_text (const struct drawing *d)
{
  double apart = d->in > 0 ? fabs (d->out / d->in - 1) : 0;
  const char *by = apart <= closed_within ? "rounding alone"
                   : arena_format (d->arena, "%s %%", rough_text (d->arena, 100 * apart));
  return arena_format (d->arena, "in %s kmol/h, out %s kmol/h, apart by %s",
                       figure_text (d->arena, 3.6 * d->in), figure_text (d->arena, 3.6 * d->out),
                       by);
}

const struct chart *
note_chart (const struct session *session, struct arena *arena)
{
  const size_t n = session->count;
  struct drawing d = { .session = session, .arena = arena,
                       .flows = ARENA_ARRAY (arena, n + 1, struct flow),
                       .boxes = ARENA_ARRAY (arena, 2 * n + 1, struct chart_box),
                       .arrows = ARENA_ARRAY (arena, n * n + 4 * n + 1, struct chart_arrow) };
  find_flows (&d);
  find_boxes (&d);
  if (d.box_count == 0 || d.box_count > BOXES_MOST) {
    return NULL;
  }
  for (size_t i = 0; i < d.flow_count; i++) {
    draw_flow (&d, i);
    draw_unnamed (&d, &d.flows[i]);
    if (!draw_rest (&d, i)) {
      return NULL;                      /* it is parted in ways that cannot be at once */
    }
  }
  struct chart *chart = ARENA_NEW (arena, struct chart);
  *chart = (struct chart) {
    .title = "Streams", .box_count = d.box_count, .boxes = d.boxes, .arrow_count = d.arrow_count,
    .arrows = d.arrows, .basis = "lines as wide as the flows, by amount, of the gas with its water",
    .closure = closure_text (&d) };
  return chart;
}
