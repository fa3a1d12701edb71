#include "config.h"
#include "result/result.h"

#include <assert.h>
#include <math.h>
#include <string.h>

#include "support/arena.h"

void
result_init (struct result *result, struct arena *arena, const char *statement)
{
  *result = (struct result) { .arena = arena, .statement = statement };
  result->last_answer = &result->answers;
  result->last_taken = &result->taken;
  result->last_note = &result->notes;
  result->last_caution = &result->cautions;
}

struct answer *
result_answer (struct result *result)
{
  struct answer *answer = ARENA_NEW (result->arena, struct answer);
  answer->what = "";
  answer->unit = "";
  answer->value = (double) NAN;
  answer->uncertainty = (double) NAN;
  answer->coverage = 1;
  *result->last_answer = answer;
  result->last_answer = &answer->next;
  return answer;
}

static bool
same_text (const char *a, const char *b)
{
  return a == b || (a != NULL && b != NULL && strcmp (a, b) == 0);
}

struct remark *
result_remark (struct result *result, enum message kind, const char *fact1, const char *fact2)
{
  struct remark **first = NULL, ***last = NULL;
  switch (message_severity (kind)) {
    case SEVERITY_TAKEN:
      first = &result->taken;
      last = &result->last_taken;
      break;
    case SEVERITY_NOTE:
      first = &result->notes;
      last = &result->last_note;
      break;
    case SEVERITY_CAUTION:
      first = &result->cautions;
      last = &result->last_caution;
      break;
    case SEVERITY_ERROR:
      break;
  }
  assert (last != NULL);                /* a mistake is a fault, never a remark */
  for (struct remark *r = *first; r != NULL; r = r->next)
    if (r->kind == kind && same_text (r->fact[0], fact1) && same_text (r->fact[1], fact2))
      return r;
  struct remark *remark = ARENA_NEW (result->arena, struct remark);
  remark->kind = kind;
  remark->fact[0] = fact1;
  remark->fact[1] = fact2;
  remark->effect = (double) NAN;
  **last = remark;
  *last = &remark->next;
  return remark;
}

struct card *
result_card (struct result *result, const char *title, const char *kind, size_t columns,
             const char *const headings[])
{
  struct card *card = ARENA_NEW (result->arena, struct card);
  card->title = title;
  card->kind = kind;
  card->columns = columns;
  card->headings = headings;
  card->last_row = &card->rows;
  card->last_line = &card->lines;
  struct card **end = &result->cards;
  while (*end != NULL)
    end = &(*end)->next;
  *end = card;
  return card;
}

struct cell *
card_add_row (struct result *result, struct card *card, const char *name)
{
  struct cell *cells = ARENA_ARRAY (result->arena, card->columns, struct cell);
  struct card_row *row = ARENA_NEW (result->arena, struct card_row);
  row->name = name;
  row->cells = cells;
  *card->last_row = row;
  card->last_row = &row->next;
  return cells;
}

void
card_add_line (struct result *result, struct card *card, const char *text)
{
  struct card_line *line = ARENA_NEW (result->arena, struct card_line);
  line->text = text;
  *card->last_line = line;
  card->last_line = &line->next;
}

struct help_page *
result_help (struct result *result, const char *title)
{
  struct help_page *page = ARENA_NEW (result->arena, struct help_page);
  page->title = title;
  page->last = &page->entries;
  result->help = page;
  return page;
}

void
help_add (struct result *result, struct help_page *page, const char *say, const char *get,
          const char *example)
{
  struct help_entry *entry = ARENA_NEW (result->arena, struct help_entry);
  entry->say = say;
  entry->get = get;
  entry->example = example;
  *page->last = entry;
  page->last = &entry->next;
}

bool
result_is_empty (const struct result *result)
{
  return result->answers == NULL && result->taken == NULL && result->notes == NULL
         && result->cautions == NULL && result->cards == NULL && result->help == NULL
         && result->check == NULL && result->balance == NULL && result->workings == NULL
         && result->trend == NULL;
}

/* How far a remark's alternative moves the figure; -1 sorts those without an effect last.  */
static double
reach (const struct remark *remark)
{
  return isnan (remark->effect) ? -1.0 : fabs (remark->effect);
}

void
result_sort_taken (struct result *result)
{
  struct remark *sorted = NULL, *next;
  for (struct remark *r = result->taken; r != NULL; r = next) {
    next = r->next;
    struct remark **place = &sorted;
    while (*place != NULL && reach (*place) >= reach (r))
      place = &(*place)->next;
    r->next = *place;
    *place = r;
  }
  result->taken = sorted;
  result->last_taken = &result->taken;
  while (*result->last_taken != NULL)
    result->last_taken = &(*result->last_taken)->next;
}
