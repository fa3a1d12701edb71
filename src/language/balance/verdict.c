#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include <string.h>
#include "gas/species.h"
#include "language/session_private.h"
#include "result/result.h"
#include "support/arena.h"

/* ---- Pieces ---- */

void
text_list_add (struct arena *arena, struct text_list *list, const char *text)
{
  if (!seen_add (arena, &list->seen, text, strlen (text))) {
    return;
  }
  list->at = room_for_one (arena, list->at, list->count, &list->room, sizeof *list->at);
  list->at[list->count++] = text;
}

struct verdict_texts
text_list_done (const struct text_list *list)
{
  return (struct verdict_texts) { list->count, list->at };
}

size_t
verdict_named (struct verdict_maker *m, const char *what, const struct text_list *list)
{
  if (list->count <= VERDICT_NAMED + 1) {
    return list->count;
  }
  struct verdict_list *all = ARENA_NEW (m->arena, struct verdict_list);
  all->what = what;
  all->names = text_list_done (list);
  *m->last_list = all;
  m->last_list = &all->next;
  return VERDICT_NAMED;
}

const char *
verdict_joined (struct verdict_maker *m, const char *what, const struct text_list *list)
{
  size_t count = verdict_named (m, what, list);
  const char *joined = count ? list->at[0] : "";
  for (size_t i = 1; i < count; i++) {
    joined = arena_format (m->arena, "%s, %s", joined, list->at[i]);
  }
  return count == list->count ? joined : arena_format (m->arena, "%s and %zu more", joined,
                                                       list->count - count);
}

void
verdict_facts (struct verdict_maker *m, const char *label, const struct text_list *list)
{
  size_t count = verdict_named (m, label, list);
  for (size_t i = 0; i < count; i++) {
    verdict_fact (m, i ? "" : label, list->at[i]);
  }
  if (count < list->count) {
    verdict_fact (m, "", arena_format (m->arena, "and %zu more", list->count - count));
  }
}

void
verdict_fact (struct verdict_maker *m, const char *label, const char *text)
{
  struct verdict_row *row = ARENA_NEW (m->arena, struct verdict_row);
  row->cell[0] = label;
  row->cell[1] = text;
  *m->last_fact = row;
  m->last_fact = &row->next;
}

struct verdict_row *
verdict_add_row (struct verdict_maker *m, size_t number)
{
  struct verdict_row *row = ARENA_NEW (m->arena, struct verdict_row);
  row->number = number;
  *m->last_row = row;
  m->last_row = &row->next;
  return row;
}

const char *
component_text (const struct plant *plant, size_t c)
{
  return plant->whole || c >= plant->component_count ? "the total" : plant->component[c]->key;
}

const char *
quantity_text (const struct verdict_maker *m, const struct quantity *q)
{
  const struct plant *plant = m->plant;
  switch (q->kind) {
  case QUANTITY_TOTAL:
    return arena_format (m->arena, "flow of %s", plant->stream[q->stream].name);
  case QUANTITY_COMPONENT:
    return arena_format (m->arena, "flow of %s in %s", component_text (plant, q->component),
                         plant->stream[q->stream].name);
  case QUANTITY_FRACTION:
    return arena_format (m->arena, "%s of %s", component_text (plant, q->component),
                         plant->stream[q->stream].name);
  case QUANTITY_SHARE:
    return arena_format (m->arena, "share of %s in its split", plant->stream[q->stream].name);
  case QUANTITY_EXTENT:
    return arena_format (m->arena, "extent of reaction %zu of %s", q->component + 1,
                         plant->boundary[q->stream].name);
  }
  return "";
}

const char *
fact_value_text (const struct verdict_maker *m, size_t fact, double value)
{
  const struct plant_fact *f = &m->plant->fact[fact];
  return arena_format (m->arena, "%s%s%s", figure_text (m->arena, value * f->per),
                       *f->unit ? " " : "", f->unit);
}

/* ---- The count ---- */

static const char *
plural (struct arena *arena, size_t n, const char *what)
{
  return arena_format (arena, "%zu %s%s", n, what, n == 1 ? "" : "s");
}

/* "feed counts for 2 facts: flow and composition": the first line that says more than one thing. */
static const char *
line_of_many (const struct verdict_maker *m)
{
  const struct plant *plant = m->plant;
  for (size_t f = 0; f + 1 < plant->fact_count; f++) {
    const struct plant_fact *one = &plant->fact[f], *next = one + 1;
    const struct fact *fact = &plant->network.fact[f + 1];
    if (one->stream == NO_STREAM || one->line != next->line || one->stream != next->stream) {
      continue;
    }
    size_t parts = 0, facts = 1;
    for (size_t c = 0; c < plant->component_count; c++) {
      parts += plant->network.possible[plant_column (plant, one->stream, c)] ? 1 : 0;
    }
    for (size_t k = f + 1; k < plant->fact_count && plant->fact[k].line == one->line
                           && plant->fact[k].stream == one->stream; k++) {
      facts += plant->network.fact[k].kind == FACT_COMPOSITION ? parts - 1 : 1;
    }
    if (fact->kind != FACT_FORM && facts > 1) {
      return arena_format (m->arena, "%s counts for %zu facts: flow and composition",
                           plant->stream[one->stream].name, facts);
    }
  }
  return "";
}

static void
count_facts (struct verdict_maker *m)
{
  struct balance_verdict *v = m->verdict;
  const struct count *count = &m->solution->count;
  struct arena *arena = m->arena;
  v->variables = count->variables;
  v->balances = count->balances;
  v->relations = count->relations;
  v->knowns = count->knowns;
  v->independent = count->rank;
  v->missing = count->missing;
  v->surplus = count->surplus;
  const size_t loose = m->solution->loose ? m->solution->loose->directions : 0;
  v->counts = arena_format (arena, "%s; %s + %s + %s, %zu independent%s",
                            plural (arena, count->variables, "variable"),
                            plural (arena, count->balances, "balance"),
                            plural (arena, count->relations, "relation"),
                            plural (arena, count->knowns, "known"), count->rank,
                            loose == 0 ? ""
                            : arena_format (arena, ", %zu of them by last digits alone", loose));
  size_t equations = count->balances + count->relations + count->knowns;
  bool both = count->missing > 0 && count->surplus > 0;
  if (both && equations == count->variables) {
    verdict_fact (m, "count and rank differ",
                  arena_format (arena, "as many equations as variables, and yet %zu missing: %zu "
                                "of them only repeat%s others", count->missing, count->surplus,
                                count->surplus == 1 ? "s" : ""));
  }
}

static void
name_status (struct verdict_maker *m)
{
  struct balance_verdict *v = m->verdict;
  struct arena *arena = m->arena;
  v->head = "";
  switch (m->solution->status) {
  case BALANCE_DETERMINED:
    v->status = VERDICT_DETERMINED;
    v->phrase = "COMPLETE";
    v->head = line_of_many (m);
    break;
  case BALANCE_REDUNDANT:
    v->status = VERDICT_REDUNDANT;
    v->phrase = arena_format (arena, "COMPLETE, %zu TO SPARE", v->surplus);
    break;
  case BALANCE_UNDERDETERMINED:
    v->status = VERDICT_UNDERDETERMINED;
    v->phrase = arena_format (arena, "SHORT BY %zu", v->missing);
    v->head = line_of_many (m);
    break;
  case BALANCE_CONTRADICTORY:
    v->status = VERDICT_CONTRADICTORY;
    v->phrase = "CLASH";
    break;
  case BALANCE_RECONCILED:
    v->status = VERDICT_RECONCILED;
    v->phrase = "RECONCILED";
    break;
  }
}

/* ---- Further lines ---- */

static void
redundant_facts (struct verdict_maker *m)
{
  const struct plant *plant = m->plant;
  struct text_list lines = { .at = NULL }, shown = { .at = NULL };
  for (size_t i = 0; i < m->solution->redundant_count; i++) {
    const struct plant_fact *f = &plant->fact[m->solution->redundant[i]];
    text_list_add (m->arena, &lines, f->text);
    text_list_add (m->arena, &shown, f->line == 0 ? f->text
                   : arena_format (m->arena, "%zu  %s", f->line, f->text));
  }
  m->verdict->redundant = text_list_done (&lines);
  if (m->solution->status != BALANCE_REDUNDANT) {
    return;
  }
  verdict_facts (m, "the others imply each", &shown);
}

static void
negative_flows (struct verdict_maker *m)
{
  struct text_list names = { .at = NULL };
  const struct plant *plant = m->plant;
  size_t n = plant->network.components;
  for (size_t i = 0; i < m->solution->negative_count; i++) {
    size_t column = m->solution->negative[i];
    if (column < n * plant->stream_count) {
      text_list_add (m->arena, &names, plant->stream[column / n].name);
    }
  }
  m->verdict->negative = text_list_done (&names);
  const char *joined = verdict_joined (m, "negative", &names);
  if (names.count > 0 && m->ev->result && m->solution->status != BALANCE_CONTRADICTORY) {
    result_remark (m->ev->result, MESSAGE_NOTE_NEGATIVE_FLOW, joined, NULL);
  }
  verdict_impossible (m);
}

static void
close_balance (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  const struct plant *plant = m->plant;
  if (s->status == BALANCE_CONTRADICTORY || s->status == BALANCE_UNDERDETERMINED
      || (s->status == BALANCE_RECONCILED && s->count.missing > 0)) {
    return;
  }
  if (!plant->whole && !isnan (s->mass_in)) {
    verdict_fact (m, "mass in and out",
                  arena_format (m->arena, "%s and %s kg/h; largest mismatch %.1g "
                                "of the largest flow", figure_text (m->arena, s->mass_in * 3600),
                                figure_text (m->arena, s->mass_out * 3600), s->mismatch));
  } else {
    verdict_fact (m, "largest mismatch", arena_format (m->arena, "%.1g of the largest flow",
                                                       s->mismatch));
  }
  if (s->other_count > 0 && m->ev->result) {
    result_remark (m->ev->result, MESSAGE_NOTE_OTHER_SOLUTION,
                   plural (m->arena, s->other_count, "other solution"), NULL);
  }
}

enum { COMPONENTS_MOST = 4 };       /* with more of them none was forgotten */

static bool
has_whole_gas (const struct plant *plant)
{
  for (size_t i = 0; i < plant->fact_count; i++)
    if (plant->network.fact[i].kind == FACT_COMPOSITION) {
      return true;
    }
  return false;
}

/* What streams can hold, where that was taken from shares alone and the lines do not agree: an
   analysis of which the rest was not typed looks like a mistake in it.                          */
static void
tell_components (struct verdict_maker *m)
{
  const struct plant *plant = m->plant;
  const bool agree = m->solution->status != BALANCE_CONTRADICTORY
                     && (m->solution->status != BALANCE_RECONCILED || m->verdict->passed);
  if (plant->whole || plant->components_told || agree
      || plant->component_count > COMPONENTS_MOST || has_whole_gas (plant)) {
    return;
  }
  struct text_list keys = { .at = NULL };
  for (size_t c = 0; c < plant->component_count; c++) {
    text_list_add (m->arena, &keys, plant->component[c]->key);
  }
  const char *all = verdict_joined (m, "components", &keys);
  verdict_fact (m, "streams can hold",
                arena_format (m->arena, "%s and nothing else, as no line speaks of more; a line "
                              "'components %s, ...' says what else there is", all, all));
}

const struct balance_verdict *
plant_verdict (struct evaluation *ev, const struct plant *plant, const struct target *targets)
{
  struct balance_verdict *verdict = ARENA_NEW (ev->arena, struct balance_verdict);
  struct verdict_maker m = { .ev = ev, .arena = ev->arena, .plant = plant,
                             .solution = plant->solution, .verdict = verdict,
                             .last_fact = &verdict->facts, .last_row = &verdict->rows,
                             .last_list = &verdict->lists };
  verdict->name = plant->name;
  verdict->gap = verdict->chi2 = verdict->critical = UNSTATED;
  m.per = plant_unit (ev, plant, &m.unit);
  if (!plant->solution) {
    fault_set (ev->fault, plant->failure.kind, plant->failure.fact[0], plant->failure.fact[1]);
    return NULL;
  }
  name_status (&m);
  count_facts (&m);
  name_status (&m);
  if (!verdict_streams (&m, targets)) {
    return NULL;
  }
  if (plant->solution->status == BALANCE_CONTRADICTORY) {
    verdict_clash (&m);
  } else {
    if (plant->solution->status == BALANCE_RECONCILED) {
      verdict_reconciled (&m);
    }
    if (plant->solution->count.missing > 0) {
      verdict_open (&m);
    }
    verdict_loose (&m);
  }
  tell_components (&m);
  redundant_facts (&m);
  close_balance (&m);
  verdict_extents (&m);
  negative_flows (&m);
  verdict_moved (&m);
  verdict_round (&m);
  verdict_around (&m);
  return verdict;
}
