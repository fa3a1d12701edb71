#include "config.h"
#include "language/kept.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "language/tree.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/memory.h"
#include "units/workings.h"

/* ---- Arenas ---- */

/* An arena with an answer becomes the one of the last answer, or is held back for a note.  */
struct arena *
session_line_arena (struct session *s)
{
  struct kept *kept = s->kept;
  if (!kept->line) {
    kept->line = arena_create ();
  } else if (kept->answered) {
    bool filed = kept->filed_count > 0 && kept->filed[kept->filed_count - 1] == kept->line;
    struct arena *free = kept->spare;
    kept->spare = filed ? NULL : kept->line;
    kept->line = free ? free : arena_create ();
  }
  kept->answered = false;
  arena_reset (kept->line);
  return kept->line;
}

void
kept_destroy (struct session *s)
{
  struct kept *kept = s->kept;
  for (size_t i = 0; i < kept->filed_count; i++) {
    arena_destroy (kept->filed[i]);
    kept->line = kept->line == kept->filed[i] ? NULL : kept->line;
  }
  arena_destroy (kept->line);
  arena_destroy (kept->spare);
  arena_destroy (kept->log);
  memory_release (kept);
}

/* ---- Keeping ---- */

/* Holds the line's arena back, and the answer for a note, as long as there is room.  */
static void
file_answer (struct kept *kept, struct kept_answer *answer)
{
  if (kept->count == KEPT_MOST) {
    kept->beyond++;
    return;
  }
  kept->answers[kept->count++] = answer;
  if (kept->filed_count == 0 || kept->filed[kept->filed_count - 1] != kept->line) {
    kept->filed[kept->filed_count++] = kept->line;
  }
}

static struct step **
end_of (struct kept_answer *answer)
{
  struct step **end = answer->end ? answer->end : &answer->steps;
  while (*end) {
    end = &(*end)->next;
  }
  answer->end = end;
  return end;
}

/* A statement that asks more than once has one answer.  */
static void
merge (struct kept_answer *answer, const struct asked *asked)
{
  const size_t before = answer->used_count, more = asked->ev->used_count;
  struct definition **used = ARENA_ARRAY (answer->arena, before + more, struct definition *);
  for (size_t i = 0; i < before + more; i++) {
    used[i] = i < before ? answer->used[i] : asked->ev->used[i - before];
  }
  *end_of (answer) = asked->ev->workings ? asked->ev->workings->first : NULL;
  answer->used = used;
  answer->used_count = before + more;
  answer->answers = asked->answers;
  answer->count = asked->count;
}

void
kept_add (struct session *s, const struct asked *asked, const struct result *result)
{
  struct kept *kept = s->kept;
  if (result->arena != kept->line) {
    kept->last = NULL;                  /* somebody's own arena: it may be gone tomorrow */
    return;
  }
  struct kept_answer *last = kept->last;
  if (last && last->arena == kept->line && last->statement == asked->statement->source
      && !last->settled) {
    merge (last, asked);
    return;
  }
  struct kept_answer *answer = ARENA_NEW (kept->line, struct kept_answer);
  *answer = (struct kept_answer) {
    .arena = kept->line, .statement = asked->statement->source, .answers = asked->answers,
    .count = asked->count, .taken = result->taken, .notes = result->notes,
    .cautions = result->cautions, .value = *asked->value,
    .steps = asked->ev->workings ? asked->ev->workings->first : NULL,
    .used = asked->ev->used, .used_count = asked->ev->used_count, .touched = asked->ev->touched
  };
  kept->answered = true;
  kept->last = answer;
  file_answer (kept, answer);
}

void
kept_extend (struct session *s, const struct result *result, const struct step *step)
{
  struct kept_answer *answer = s->kept->last;
  struct workings one;
  if (!answer || answer->arena != result->arena || answer->settled) {
    return;
  }
  workings_init (&one, answer->arena);
  workings_add (&one, step);
  *end_of (answer) = one.first;
}

void
kept_add_row (struct session *s, const struct result *result, const struct answer *row)
{
  struct kept_answer *answer = s->kept->last;
  struct answer *first = NULL, **last = &first;
  if (!answer || answer->arena != result->arena || answer->settled) {
    return;
  }
  /* The rows there belong to the result: they are copied before one is put behind them.  */
  const struct answer *from = answer->answers;
  for (size_t i = 0; i <= answer->count; i++) {
    *last = ARENA_NEW (answer->arena, struct answer);
    **last = i < answer->count ? *from : *row;
    (*last)->next = NULL;
    from = i < answer->count ? from->next : NULL;
    last = &(*last)->next;
  }
  answer->answers = first;
  answer->count++;
}

void
kept_log (struct session *s, const char *text, bool opens)
{
  struct kept *kept = s->kept;
  if (kept->line_count == KEPT_LINES_MOST) {
    kept->lines_beyond++;
    return;
  }
  if (!kept->log) {
    kept->log = arena_create ();
    kept->last_line = &kept->lines;
  }
  struct kept_line *line = ARENA_NEW (kept->log, struct kept_line);
  line->text = arena_string (kept->log, text);
  if (opens) {
    line->next = kept->opened;
    kept->opened = line;
    return;
  }
  *kept->last_line = line;
  kept->last_line = &line->next;
  kept->line_count++;
}

void
kept_unlog (struct session *s, size_t count)
{
  struct kept *kept = s->kept;
  if (kept->line_count <= count) {
    return;
  }
  kept->last_line = &kept->lines;
  for (size_t i = 0; i < count; i++) {
    kept->last_line = &(*kept->last_line)->next;
  }
  *kept->last_line = NULL;
  kept->line_count = count;
}

/* ---- Settling ---- */

static const char *
copied (struct arena *arena, const char *text)
{
  return text ? arena_string (arena, text) : NULL;
}

/* The parts of a gas as terms: x_i and M_i.  */
static void
spread_gas (struct arena *arena, struct step *step)
{
  const struct composition *gas = step->gas;
  double *x = ARENA_ARRAY (arena, gas->count, double);
  double *M = ARENA_ARRAY (arena, gas->count, double);
  const char **terms = ARENA_ARRAY (arena, gas->count, const char *);
  struct step_column *columns = ARENA_ARRAY (arena, 2, struct step_column);
  for (size_t i = 0; i < gas->count; i++) {
    x[i] = gas->fraction[i];
    M[i] = gas->species[i]->molar_mass;
    terms[i] = gas->species[i]->key;
  }
  columns[0] = (struct step_column) { "x_i", x, "mol/mol", NULL, NULL };
  columns[1] = (struct step_column) { "M_i", M, "kg/mol", STEP_WEIGHTS, NULL };
  step->terms = terms;
  step->term_count = (unsigned) gas->count;
  step->columns = columns;
  step->column_count = 2;
  step->gas = NULL;
}

static struct step *
step_copy (struct arena *arena, const struct step *from)
{
  struct step *step = ARENA_NEW (arena, struct step);
  struct step_symbol *symbols = ARENA_ARRAY (arena, from->symbol_count, struct step_symbol);
  *step = *from;
  step->next = NULL;
  step->name = copied (arena, from->name);
  step->of = copied (arena, from->of);
  step->solved = copied (arena, from->solved);
  step->unit = copied (arena, from->unit);
  step->source = copied (arena, from->source);
  for (size_t i = 0; i < from->symbol_count; i++) {
    symbols[i] = from->symbols[i];
    symbols[i].unit = copied (arena, symbols[i].unit);
  }
  step->symbols = symbols;
  if (from->gas) {
    spread_gas (arena, step);
  }
  if (from->column_count > 0 && !from->gas) {
    struct step_column *columns = ARENA_ARRAY (arena, from->column_count, struct step_column);
    const char **terms = ARENA_ARRAY (arena, from->term_count, const char *);
    memcpy (terms, from->terms, from->term_count * sizeof *terms);
    for (size_t i = 0; i < from->column_count; i++) {
      double *at = ARENA_ARRAY (arena, from->term_count, double);
      memcpy (at, from->columns[i].at, from->term_count * sizeof *at);
      columns[i] = from->columns[i];
      columns[i].at = at;
    }
    step->columns = columns;
    step->terms = terms;
  }
  return step;
}

/* Steps that are put together for an answer.  */
struct gathered { struct arena *arena; struct step *first, **last; unsigned long look; };

bool
kept_same_step (const struct step *a, const struct step *b)
{
  const char *of_a = a->of ? a->of : "", *of_b = b->of ? b->of : "";
  return a->kind != STEP_ANSWER && b->kind == a->kind && strcmp (a->name, b->name) == 0
         && strcmp (of_a, of_b) == 0 && strcmp (a->formula, b->formula) == 0 && !isnan (a->value)
         && memcmp (&a->value, &b->value, sizeof a->value) == 0;
}

static bool
is_there (const struct gathered *g, const struct step *step)
{
  for (const struct step *s = g->first; s; s = s->next)
    if (kept_same_step (s, step)) {
      return true;
    }
  return false;
}

static void
gather (struct gathered *g, const struct step *from)
{
  for (; from; from = from->next)
    if (!is_there (g, from)) {
      *g->last = step_copy (g->arena, from);
      g->last = &(*g->last)->next;
    }
}

/* Those a definition leans on first.  */
static void
gather_definition (struct gathered *g, struct definition *d)
{
  if (d->looked == g->look) {
    return;
  }
  d->looked = g->look;
  for (size_t i = 0; i < d->used_count; i++) {
    gather_definition (g, d->used[i]);
  }
  gather (g, d->steps);
}

static const struct budget *
budget_copy (struct arena *arena, const struct budget *from)
{
  struct budget *budget = ARENA_NEW (arena, struct budget);
  struct budget_line *lines = ARENA_ARRAY (arena, from->count, struct budget_line);
  for (size_t i = 0; i < from->count; i++) {
    lines[i] = from->lines[i];
    lines[i].what = copied (arena, lines[i].what);
    lines[i].of = copied (arena, lines[i].of);
    lines[i].unit = copied (arena, lines[i].unit);
  }
  *budget = *from;
  budget->lines = lines;
  return budget;
}

static const struct answer *
answers_copy (struct arena *arena, const struct answer *from, size_t count)
{
  struct answer *first = NULL, **last = &first;
  for (; from && count > 0; from = from->next, count--) {
    struct answer *a = *last = ARENA_NEW (arena, struct answer);
    *a = *from;
    a->next = NULL;
    a->what = copied (arena, a->what);
    a->label = copied (arena, a->label);
    a->unit = copied (arena, a->unit);
    a->moisture = copied (arena, a->moisture);
    a->basis = copied (arena, a->basis);
    a->budget = a->budget ? budget_copy (arena, a->budget) : NULL;
    last = &a->next;
  }
  return first;
}

static const struct remark *
remarks_copy (struct arena *arena, const struct remark *from)
{
  struct remark *first = NULL, **last = &first;
  for (; from; from = from->next) {
    struct remark *r = *last = ARENA_NEW (arena, struct remark);
    *r = *from;
    r->next = NULL;
    r->alternative = copied (arena, r->alternative);
    for (size_t i = 0; i < MESSAGE_FACTS; i++) {
      r->fact[i] = copied (arena, r->fact[i]);
    }
    last = &r->next;
  }
  return first;
}

/* Of the value only what a picture is drawn of.  */
static void
settle_value (struct arena *arena, struct value *v)
{
  if (v->kind == VALUE_STREAM || (v->kind == VALUE_PART && v->of_stream)) {
    v->stream.gas = composition_keep (arena, v->stream.gas);
  } else if (v->kind == VALUE_GAS && v->gas && v->gas->closed) {
    struct gas_value *gas = ARENA_NEW (arena, struct gas_value);
    gas->closed = composition_keep (arena, v->gas->closed);
    gas->scaled = 1;
    v->gas = gas;
  } else {
    v->gas = NULL;
  }
}

void
kept_settle_one (struct session *s, struct kept_answer *answer)
{
  struct gathered g = { answer->arena, NULL, NULL, ++s->look };
  if (answer->settled) {
    return;
  }
  g.last = &g.first;
  for (size_t i = 0; i < answer->used_count; i++) {
    gather_definition (&g, answer->used[i]);
  }
  gather (&g, answer->steps);
  answer->steps = g.first;
  answer->end = NULL;
  answer->used = NULL;
  answer->used_count = 0;
  answer->answers = answers_copy (g.arena, answer->answers, answer->count);
  answer->taken = remarks_copy (g.arena, answer->taken);
  answer->notes = remarks_copy (g.arena, answer->notes);
  answer->cautions = remarks_copy (g.arena, answer->cautions);
  settle_value (g.arena, &answer->value);
  answer->settled = true;
}

void
kept_settle (struct session *s)
{
  struct kept *kept = s->kept;
  for (; kept->settled < kept->count; kept->settled++) {
    kept_settle_one (s, kept->answers[kept->settled]);
  }
  if (kept->last) {
    kept_settle_one (s, kept->last);
  }
}
