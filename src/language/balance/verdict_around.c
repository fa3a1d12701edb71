/* The overall balance around some boundaries by what was measured alone: what the lines state of
   the streams that cross the envelope, component by component, and how far apart it is.        */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include <string.h>
#include "support/arena.h"

/* Is the form one of a single whole stream, counted by amount?  */
static bool
is_total (const struct plant *plant, const struct form *form, size_t s)
{
  size_t n = plant->network.components, parts = 0;
  for (size_t c = 0; c < n; c++) {
    parts += plant->network.possible[plant_column (plant, s, c)] ? 1 : 0;
  }
  for (size_t i = 0; i < form->count; i++)
    if (form->terms[i].column / n != s || fabs (form->terms[i].coefficient - 1) > 1e-12) {
      return false;
    }
  return form->count == parts;
}

/* The stated flow of each component of a stream into FLOW, NAN where it was not stated; one share
   that is missing is what the others leave.                                                     */
static void
stated_flows (const struct verdict_maker *m, size_t s, double flow[])
{
  const struct plant *plant = m->plant;
  size_t n = plant->network.components, open = 0, last = 0;
  double total = UNSTATED, sum = 0;
  for (size_t c = 0; c < n; c++) {
    flow[c] = plant->network.possible[plant_column (plant, s, c)] ? UNSTATED : 0;
  }
  for (size_t f = 0; f < plant->fact_count; f++) {
    const struct fact *fact = &plant->network.fact[f];
    if (plant->fact[f].stream != s) {
      continue;
    }
    if (fact->kind == FACT_FORM && is_total (plant, &fact->left, s)) {
      total = fact->value;
    } else if (fact->kind == FACT_COMPOSITION) {
      memcpy (flow, fact->fractions, n * sizeof *flow);
    } else if (fact->kind == FACT_RATIO && fact->left.count == 1
               && fact->left.terms[0].column / n == s
               && fabs (fact->left.terms[0].coefficient - 1) < 1e-12
               && is_total (plant, &fact->right, s)) {
      flow[fact->left.terms[0].column % n] = fact->value;
    }
  }
  for (size_t c = 0; c < n; c++) {
    open += isnan (flow[c]) ? 1 : 0;
    last = isnan (flow[c]) ? c : last;
    sum += isnan (flow[c]) ? 0 : flow[c];
  }
  if (open == 1) {
    flow[last] = 1 - sum;
  }
  for (size_t c = 0; c < n; c++) {
    flow[c] *= total;
  }
}

static void
tell_component (struct verdict_maker *m, const char *label, size_t c, const double sum[2])
{
  const char *name = component_text (m->plant, c);
  if (isnan (sum[0]) || isnan (sum[1])) {
    verdict_fact (m, label, arena_format (m->arena, "%s: not all of it was measured", name));
    return;
  }
  double gap = (sum[0] - sum[1]) * m->per;
  verdict_fact (m, label, arena_format (m->arena, "%s: %s in, %s out, %s %s apart", name,
                                        figure_text (m->arena, sum[0] * m->per),
                                        figure_text (m->arena, sum[1] * m->per),
                                        figure_text (m->arena, gap), m->unit));
}

static void
tell_envelope (struct verdict_maker *m, const struct statement *line)
{
  const struct plant *plant = m->plant;
  size_t n = plant->network.components;
  bool *inside = ARENA_ARRAY (m->arena, plant->boundary_count + 1, bool);
  double (*sum)[2] = arena_alloc (m->arena, n, sizeof *sum);
  double *flow = ARENA_ARRAY (m->arena, n, double);
  for (const struct node *name = line->names; name; name = name->next) {
    inside[plant_boundary_find (plant, name->text)] = true;
  }
  for (size_t s = 0; s < plant->stream_count; s++) {
    bool from = plant->stream[s].from != NO_BOUNDARY && inside[plant->stream[s].from];
    bool to = plant->stream[s].to != NO_BOUNDARY && inside[plant->stream[s].to];
    if (from == to) {
      continue;
    }
    stated_flows (m, s, flow);
    for (size_t c = 0; c < n; c++) {
      sum[c][from ? 1 : 0] += flow[c];
    }
  }
  for (size_t c = 0; c < n; c++) {
    tell_component (m, c ? "" : line->source, c, sum[c]);
  }
}

void
verdict_around (struct verdict_maker *m)
{
  for (const struct statement *line = m->plant->block->next; line; line = line->next)
    if (line->kind == STATEMENT_AROUND) {
      tell_envelope (m, line);
    }
}
