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

enum { NOWHERE = -1 };

/* What goes in and out of a box agrees to this, relative.  */
static const double closed_within = 1e-9;

/* A stream and where it comes from.  */
struct flow {
  const struct definition *definition;
  const struct node *made;               /* its expression, without `at` */
  int parted_from;                       /* the stream it is made of; NOWHERE: none */
  int blend, parting;                    /* boxes: that makes it, that parts it; NOWHERE */
  const char *told;                      /* its flow in the units asked for; null: kmol/h */
};

struct drawing {
  struct session *session;
  struct arena *arena;
  const struct definition *subject;      /* only that and what it leans on; null: all */
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

static bool
is_wanted (const struct drawing *d, const struct definition *definition)
{
  struct definition *subject = d->subject ? name_find (d->session, d->subject->name,
                                                       strlen (d->subject->name)) : NULL;
  return !subject || subject == definition
         || definition_leans (d->session, subject, definition->name);
}

static void
find_flows (struct drawing *d)
{
  for (size_t i = 0; i < d->session->count; i++) {
    const struct definition *definition = d->session->order[i];
    if (definition->kind != NAME_STREAM || !definition->fresh || !definition->value.stream.flow
        || !is_wanted (d, definition)) {
      continue;
    }
    const struct node *made = definition->statement->value;
    while (made->kind == NODE_AT) {
      made = made->a;
    }
    d->flows[d->flow_count++] = (struct flow) { definition, made, NOWHERE, NOWHERE, NOWHERE,
                                                  NULL };
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

static const char *
parts_text (const struct drawing *d, const struct composition *gas)
{
  const char **keys = ARENA_ARRAY (d->arena, gas->count, const char *);
  for (size_t i = 0; i < gas->count; i++) {
    keys[i] = gas->species[i]->key;
  }
  return chart_parts (d->arena, gas->count, keys, gas->fraction);
}

/* The flow may be null: of a sum of feeds nobody named.  */
static void
add_arrow (struct drawing *d, const char *name, double moles, const struct flow *f, int from,
           int to)
{
  d->in += from == CHART_OUTSIDE ? moles : 0;
  d->out += to == CHART_OUTSIDE ? moles : 0;
  d->arrows[d->arrow_count++] = (struct chart_arrow) {
    .name = arena_string (d->arena, name),
    .flow = f && f->told ? f->told
            : arena_format (d->arena, "%s kmol/h", chart_figure (d->arena, 3.6 * moles)),
    .parts = f ? parts_text (d, f->definition->value.stream.gas) : NULL,
    .amount = moles, .from = from, .to = to };
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
    add_arrow (d, name, s->moles, f, from, f->parting);
  }
  for (size_t k = 0; k < d->flow_count; k++)
    if (d->flows[k].blend != NOWHERE && feeds (d, d->flows[k].made, (int) i)) {
      add_arrow (d, name, s->moles, f, drawn ? CHART_OUTSIDE : from, d->flows[k].blend);
      drawn = true;
    }
  if (!drawn && from != CHART_OUTSIDE) {
    add_arrow (d, name, s->moles, f, from, CHART_OUTSIDE);
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

static void
start (struct drawing *d, struct session *session, struct arena *arena)
{
  const size_t n = session->count;
  d->session = session;
  d->arena = arena;
  d->flows = ARENA_ARRAY (arena, n + 1, struct flow);
  find_flows (d);
  const size_t flows = d->flow_count;
  d->boxes = ARENA_ARRAY (arena, 2 * flows + 1, struct chart_box);
  d->arrows = ARENA_ARRAY (arena, flows * flows + 4 * flows + 1, struct chart_arrow);
  find_boxes (d);
}

/* Null: a stream is parted in ways that cannot be at once.  */
static struct chart *
draw (struct drawing *d)
{
  for (size_t i = 0; i < d->flow_count; i++) {
    draw_flow (d, i);
    draw_unnamed (d, &d->flows[i]);
    if (!draw_rest (d, i)) {
      return NULL;
    }
  }
  struct chart *chart = ARENA_NEW (d->arena, struct chart);
  *chart = (struct chart) {
    .title = "Streams", .box_count = d->box_count, .boxes = d->boxes,
    .arrow_count = d->arrow_count, .arrows = d->arrows,
    .basis = "lines as wide as the flows, by amount, of the gas with its water",
    .closure = closure_text (d) };
  return chart;
}

const struct chart *
note_chart (struct session *session, struct arena *arena)
{
  struct drawing d = { .subject = NULL };
  start (&d, session, arena);
  return d.box_count == 0 || d.box_count > CHART_BOXES_MOST ? NULL : draw (&d);
}

/* Every flow in the units asked for.  */
static bool
tell_flows (struct evaluation *ev, struct drawing *d, const struct target *targets)
{
  for (size_t i = 0; targets && i < d->flow_count; i++) {
    struct flow *f = &d->flows[i];
    const struct subject subject = { f->definition->name, targets->at };
    for (const struct target *t = targets; t; t = t->next) {
      struct figures figures = { NULL, 0, 0 };
      struct target alone = *t;
      alone.next = NULL;
      if (!convert_value (ev, &f->definition->value, &alone, &subject, &figures)) {
        return false;
      }
      f->told = arena_format (d->arena, "%s%s%s %s", f->told ? f->told : "", f->told ? ", " : "",
                              chart_figure (d->arena, figures.at[0].value),
                              figures.at[0].unit_text);
    }
  }
  return true;
}

const struct chart *
stream_chart (struct evaluation *ev, const struct definition *subject,
              const struct target *targets)
{
  struct drawing d = { .subject = subject };
  start (&d, ev->session, ev->arena);
  if (d.box_count == 0) {
    fault_set (ev->fault, MESSAGE_PICTURE_NONE, subject->name,
               subject->maker ? arena_format (ev->arena, "balance %s made it; draw that",
                                              subject->maker)
                              : "it is no blend, share or remainder of flows");
    return NULL;
  }
  if (d.box_count > CHART_BOXES_MOST) {
    fault_set (ev->fault, MESSAGE_PICTURE_LARGE, subject->name,
               arena_format (ev->arena, "%zu boxes, of at most %d", d.box_count,
                             CHART_BOXES_MOST));
    return NULL;
  }
  if (!tell_flows (ev, &d, targets)) {
    return NULL;
  }
  struct chart *chart = draw (&d);
  if (!chart) {
    fault_set (ev->fault, MESSAGE_PICTURE_NONE, subject->name,
               "the shares taken of a stream are more than all of it");
    return NULL;
  }
  chart->title = arena_format (ev->arena, "Stream %s", subject->name);
  if (targets) {
    chart->basis = arena_format (ev->arena, "%s; %s", chart_units (ev, targets), chart->basis);
  }
  return chart;
}
