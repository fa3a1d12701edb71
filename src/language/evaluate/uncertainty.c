#include "config.h"
#include "language/evaluate/uncertainty.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "language/session_private.h"
#include "result/result.h"
#include "support/arena.h"

/* What moves by less does not depend on the source: the figures differ by rounding alone.  */
static const double ROUNDING = 1e-12;

struct moving {
  const struct evaluation *first;
  const struct statement *statement;
  const struct figures *figures;
  struct settings settings;
  double *contribution;                    /* of each source to each figure, a row a source */
};

/* The figures with SOURCE moved BY standard uncertainties; false with FAULT if there are none.  */
static bool
figures_moved (const struct moving *m, const struct source *source, double by,
               struct figures *figures, struct fault *fault)
{
  struct shift shift = { source->what, by };
  struct evaluation again;
  *figures = (struct figures) { NULL, 0, 0 };
  fault_init (fault, m->first->arena);
  evaluation_again (&again, m->first, fault);
  again.settings = &m->settings;
  again.shifts = &shift;
  again.shift_count = 1;
  return question_again (&again, m->statement, figures)
         && figures->count == m->figures->count;
}

static void
tell_one_way (const struct evaluation *first, const struct source *source, bool rises)
{
  const char *of = source->of ? arena_format (first->arena, " of %s", source->of) : "";
  if (first->result) {
    result_remark (first->result, MESSAGE_NOTE_ONE_WAY,
                   arena_format (first->arena, "%s%s", source->text, of), rises ? "up" : "down");
  }
}

/* Half of what lies between the answers with the source up and down.  Where it can be moved only
   one way (a share that would fall below zero), the step that way.                              */
static bool
contributions (const struct moving *m, size_t which)
{
  const struct source *source = &m->first->sources[which];
  struct figures up, down;
  struct fault over, under;
  double *row = m->contribution + which * m->figures->count;
  bool rises = figures_moved (m, source, 1, &up, &over);
  bool falls = figures_moved (m, source, -1, &down, &under);
  if (!rises && !falls) {
    fault_set (m->first->fault, over.kind, over.fact[0], over.fact[1]);
    fault_facts (m->first->fault, over.fact[2], over.fact[3]);
    return false;
  }
  if (!rises || !falls) {
    tell_one_way (m->first, source, rises);
  }
  for (size_t i = 0; i < m->figures->count; i++) {
    double value = m->figures->at[i].value;
    row[i] = rises && falls ? 0.5 * (up.at[i].value - down.at[i].value)
             : rises ? up.at[i].value - value : value - down.at[i].value;
  }
  return true;
}

/* Largest share first; equal ones as they were met.  */
static int
by_share (const void *left, const void *right)
{
  const struct budget_line *a = left, *b = right;
  return a->share > b->share ? -1 : a->share < b->share ? 1
         : a->order < b->order ? -1 : a->order > b->order;
}

static const struct budget *
budget_of (const struct moving *m, size_t figure)
{
  const struct evaluation *ev = m->first;
  struct budget *budget = ARENA_NEW (ev->arena, struct budget);
  struct budget_line *lines = ARENA_ARRAY (ev->arena, ev->source_count, struct budget_line);
  double least = ROUNDING * fabs (m->figures->at[figure].value), variance = 0;
  for (size_t i = 0; i < ev->source_count; i++) {
    const struct source *source = &ev->sources[i];
    double c = m->contribution[i * m->figures->count + figure];
    if (!(fabs (c) > least)) {
      continue;
    }
    variance += c * c;
    lines[budget->count++] = (struct budget_line) {
      .what = source->text, .of = source->of, .from = source->from, .u = source->u,
      .unit = source->unit,
      .sensitivity = source->u > 0 ? c / source->u : 0, .contribution = c, .order = i };
  }
  for (size_t i = 0; i < budget->count; i++) {
    lines[i].share = lines[i].contribution * lines[i].contribution / variance;
  }
  qsort (lines, budget->count, sizeof *lines, by_share);
  budget->uncertainty = sqrt (variance);
  budget->lines = lines;
  return budget->count > 0 && isfinite (variance) ? budget : NULL;
}

const struct budget **
uncertainty_budgets (const struct evaluation *first, const struct statement *s,
                     const struct figures *figures)
{
  const struct budget **budgets = ARENA_ARRAY (first->arena, figures->count + 1,
                                               const struct budget *);
  if (first->source_count == 0) {
    return budgets;
  }
  struct moving m = { .first = first, .statement = s, .figures = figures,
                      .settings = *first->settings };
  m.settings.ignore_total = true;
  m.contribution = ARENA_ARRAY (first->arena, first->source_count * figures->count, double);
  for (size_t i = 0; i < first->source_count; i++)
    if (!contributions (&m, i)) {
      fault_place (first->fault, s->value->at);
      return NULL;
    }
  for (size_t i = 0; i < figures->count; i++) {
    budgets[i] = budget_of (&m, i);
  }
  return budgets;
}

const struct budget **
uncertainty_of_figures (struct session *session, struct arena *arena, const char *question,
                        size_t *count)
{
  struct parser *parser = parser_create (arena, &session->vocabulary, question,
                                         strlen (question), 1, BLOCK_NONE);
  struct statement *s;
  struct evaluation ev;
  struct fault unheard;
  struct value value;
  struct figures figures = { NULL, 0, 0 };
  fault_init (&unheard, arena);
  *count = 0;
  if (!parser_next (parser, &s, &unheard) || !s) {
    return NULL;
  }
  evaluation_init (&ev, session, NULL, &unheard);
  const struct budget **budgets = question_figures (&ev, s, &value, &figures)
                                    ? uncertainty_budgets (&ev, s, &figures) : NULL;
  *count = budgets ? figures.count : 0;
  return budgets;
}

double
uncertainty_of_question (struct session *session, struct arena *arena, const char *question)
{
  size_t count;
  const struct budget **budgets = uncertainty_of_figures (session, arena, question, &count);
  return count > 0 && budgets[0] ? budgets[0]->uncertainty : UNSTATED;
}
