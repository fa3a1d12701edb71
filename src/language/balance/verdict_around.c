/* The overall balance around some boundaries by what was measured alone: what the lines state of
   the streams that cross the envelope, component by component, and how far apart it is.        */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include "support/arena.h"
#include "support/fault.h"

/* Does a form speak of stream S alone?  */
static bool
is_within (const struct plant *plant, const struct form *form, size_t s)
{
  for (size_t i = 0; i < form->count; i++)
    if (form->terms[i].column / plant->network.components != s) {
      return false;
    }
  return true;
}

static bool
is_about (const struct plant *plant, const struct fact *fact, size_t s)
{
  switch (fact->kind) {
  case FACT_FORM: return is_within (plant, &fact->left, s);
  case FACT_RATIO: return is_within (plant, &fact->left, s) && is_within (plant, &fact->right, s);
  case FACT_COMPOSITION: return fact->stream == s;
  case FACT_SHARE: break;
  }
  return false;
}

/* A form of stream S as one of the only stream there is.  */
static struct form
form_alone (struct arena *arena, const struct form *form, size_t first)
{
  struct term *terms = ARENA_ARRAY (arena, form->count + 1, struct term);
  for (size_t i = 0; i < form->count; i++) {
    terms[i] = (struct term) { form->terms[i].column - first, form->terms[i].coefficient };
  }
  return (struct form) { form->count, terms };
}

/* What follows for a stream from the facts about it alone: a network of one stream and no
   boundary.  The flow of each component into FLOW, NAN where they leave it open or clash.       */
static void
stated_flows (const struct verdict_maker *m, size_t s, double flow[])
{
  const struct network *whole = &m->plant->network;
  const struct solve_options options = { 0.95, NULL };
  size_t n = whole->components;
  struct fault unheard;
  struct fact *facts = ARENA_ARRAY (m->arena, whole->facts + 1, struct fact);
  struct network alone = { .components = n, .streams = 1, .possible = whole->possible + s * n,
                           .molar_mass = whole->molar_mass, .fact = facts,
                           .water = whole->water };
  for (size_t f = 0; f < whole->facts; f++)
    if (is_about (m->plant, &whole->fact[f], s)) {
      struct fact *fact = &facts[alone.facts++];
      *fact = whole->fact[f];
      fact->left = form_alone (m->arena, &fact->left, s * n);
      fact->right = form_alone (m->arena, &fact->right, s * n);
      fact->stream = 0;
    }
  fault_init (&unheard, m->arena);
  const struct solution *solution = network_solve (m->arena, &alone, &options, &unheard);
  const bool holds = solution && solution->status != BALANCE_CONTRADICTORY;
  for (size_t c = 0; c < n; c++) {
    flow[c] = holds && solution->fixed[c] ? solution->value[c] : UNSTATED;
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
  if (fabs (gap) < 1e-12 * fabs (sum[0] * m->per)) {
    gap = 0;                            /* what subtraction leaves of nothing */
  }
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
