/* A balance that is short of facts: what is fixed all the same, how far the rest can reach, what
   ties it, and what would close it.                                                             */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include <string.h>
#include "result/result.h"
#include "support/arena.h"

static bool
composition_fixed (const struct plant *plant, size_t s)
{
  size_t n = plant->network.components;
  for (size_t c = 0; c < n; c++)
    if (!plant->solution->fixed_fraction[s * n + c]) {
      return false;
    }
  return !plant->whole;
}

static void
what_is_fixed (struct verdict_maker *m)
{
  const struct plant *plant = m->plant;
  struct text_list all = { .at = NULL }, gases = all, json = all, open = all;
  for (size_t s = 0; s < plant->stream_count; s++) {
    const char *name = plant->stream[s].name;
    const char *flow = arena_format (m->arena, "flow of %s", name);
    bool total = plant->solution->fixed_total[s], gas = composition_fixed (plant, s);
    if (total) {
      text_list_add (m->arena, &all, gas || plant->whole ? name : flow);
    }
    text_list_add (m->arena, total ? &json : &open, flow);
    if (!plant->whole && gas) {
      text_list_add (m->arena, &json, arena_format (m->arena, "composition of %s", name));
    } else if (!plant->whole) {
      text_list_add (m->arena, &open, arena_format (m->arena, "composition of %s", name));
    }
    if (gas && !total) {
      text_list_add (m->arena, &gases, name);
    }
  }
  m->verdict->determined = text_list_done (&json);
  m->verdict->undetermined = text_list_done (&open);
  if (all.count > 0) {
    verdict_fact (m, "fixed all the same", verdict_joined (m, "fixed all the same", &all));
  }
  if (gases.count > 0) {
    verdict_fact (m, all.count > 0 ? "" : "fixed all the same",
                  arena_format (m->arena, "composition%s of %s", gases.count > 1 ? "s" : "",
                                verdict_joined (m, "composition fixed", &gases)));
  }
  if (m->solution->scale_open) {
    verdict_fact (m, "no flow is known",
                  "only ratios are: any one flow fixes the rest, or write per 100 kmol/h of NAME");
  }
}

static const char *
range_text (struct verdict_maker *m, const char *name, struct range range)
{
  double tiny = 1e-9;
  double least = fabs (range.least * m->per) < tiny ? 0 : range.least * m->per;
  const char *greatest = isfinite (range.greatest)
                           ? arena_format (m->arena, "%-10s %s",
                                           figure_text (m->arena, range.greatest * m->per), m->unit)
                           : arena_format (m->arena, "without limit  %s", m->unit);
  return arena_format (m->arena, "%-14s %10s .. %s", name, figure_text (m->arena, least),
                       greatest);
}

static void
how_far (struct verdict_maker *m)
{
  const struct plant *plant = m->plant;
  struct verdict_range *ranges = ARENA_ARRAY (m->arena, plant->stream_count, struct verdict_range);
  size_t count = 0;
  for (size_t s = 0; plant->solution->total_range && s < plant->stream_count; s++)
    if (!plant->solution->fixed_total[s]) {
      struct range range = plant->solution->total_range[s];
      verdict_fact (m, count ? "" : "still open",
                    range_text (m, plant->stream[s].name, range));
      ranges[count++] = (struct verdict_range) { plant->stream[s].name, range.least,
                                                 range.greatest };
    }
  m->verdict->ranges = ranges;
  m->verdict->range_count = count;
}

/* "oxygen = 300 - 0.21 air".  */
static void
what_ties_them (struct verdict_maker *m)
{
  struct text_list texts = { .at = NULL };
  for (size_t i = 0; i < m->solution->left_count; i++) {
    const struct relation_left *left = &m->solution->left[i];
    const char *text = NULL;
    if (fabs (left->constant * m->per) > 1e-9 || left->count == 0) {
      text = figure_text (m->arena, left->constant * m->per);
    }
    for (size_t k = 0; k < left->count; k++) {
      const char *free = m->plant->stream[left->free[k]].name;
      double factor = left->factor[k], size = fabs (factor);
      const char *by = fabs (size - 1) < 1e-12 ? "" : arena_format (m->arena, "%s ",
                                                                    figure_text (m->arena, size));
      text = text ? arena_format (m->arena, "%s %c %s%s", text, factor < 0 ? '-' : '+', by, free)
                  : arena_format (m->arena, "%s%s%s", factor < 0 ? "-" : "", by, free);
    }
    text = arena_format (m->arena, "%s = %s", m->plant->stream[left->stream].name, text);
    text_list_add (m->arena, &texts, text);
  }
  m->verdict->relations_left = text_list_done (&texts);
  size_t named = verdict_named (m, "tied to each other", &texts);
  for (size_t i = 0; i < named; i++) {
    verdict_fact (m, i ? "" : "tied to each other",
                  i ? texts.at[i] : arena_format (m->arena, "%s   (%s)", texts.at[i], m->unit));
  }
  if (named < texts.count) {
    verdict_fact (m, "", arena_format (m->arena, "and %zu more", texts.count - named));
  }
}

const struct verdict_texts *
verdict_sets (struct verdict_maker *m, size_t suggestion_count,
              const struct suggestion suggestions[], const char *alone, size_t *count)
{
  size_t groups = 0;
  for (size_t i = 0; i < suggestion_count; i++) {
    groups = suggestions[i].group >= groups ? suggestions[i].group + 1 : groups;
  }
  struct verdict_texts *sets = ARENA_ARRAY (m->arena, groups, struct verdict_texts);
  struct text_list *lists = ARENA_ARRAY (m->arena, groups, struct text_list);
  for (size_t i = 0; i < suggestion_count; i++) {
    text_list_add (m->arena, &lists[suggestions[i].group],
                   quantity_text (m, &suggestions[i].quantity));
  }
  *count = 0;
  for (size_t g = 0; g < groups; g++) {
    if (lists[g].count > 0) {
      lists[*count] = lists[g];
      sets[(*count)++] = text_list_done (&lists[g]);
    }
  }
  size_t told = *count > VERDICT_NAMED + 1 ? VERDICT_NAMED : *count;
  for (size_t g = 0; g < *count; g++) {
    const char *label = g > 0 ? "and one of" : *count == 1 ? alone : "one of";
    const char *joined = verdict_joined (m, label, &lists[g]);
    if (g < told) {
      verdict_fact (m, label, joined);
    }
  }
  if (told < *count) {
    verdict_fact (m, "", arena_format (m->arena, "and one of each of %zu more", *count - told));
  }
  return sets;
}

static void
what_would_close_it (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  m->verdict->suggestions = verdict_sets (m, s->suggestion_count, s->suggestions,
                                          "any one closes it", &m->verdict->suggestion_count);
  struct text_list useless = { .at = NULL };
  for (size_t i = 0; i < s->useless_count; i++) {
    text_list_add (m->arena, &useless, quantity_text (m, &s->useless[i]));
  }
  if (useless.count > 0) {
    verdict_fact (m, "no help", verdict_joined (m, "no help", &useless));
  }
}

void
verdict_open (struct verdict_maker *m)
{
  what_is_fixed (m);
  how_far (m);
  what_ties_them (m);
  what_would_close_it (m);
}
