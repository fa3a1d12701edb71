#include "config.h"
#include "language/commands/commands.h"

#include <string.h>
#include "language/balance/plant.h"
#include "result/balance_verdict.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/text.h"

/* All of the lists that `solve` names only the first of.  */
static void
add_lists (struct session *session, const struct plant *plant, struct result *result,
           struct card *card)
{
  struct evaluation ev;
  struct fault unheard;
  fault_init (&unheard, result->arena);
  evaluation_init (&ev, session, NULL, &unheard);
  const struct balance_verdict *verdict = plant_verdict (&ev, plant, NULL);
  for (const struct verdict_list *list = verdict ? verdict->lists : NULL; list;
       list = list->next) {
    struct text names;
    text_init (&names);
    for (size_t i = 0; i < list->names.count; i++) {
      text_add (&names, i ? ", " : "");
      text_add (&names, list->names.at[i]);
    }
    card_add_line (result, card, arena_format (result->arena, "%s: %s", list->what,
                                               names.bytes));
    text_clear (&names);
  }
}

/* The card of a balance: its lines with their numbers, and what it comes to in a sentence.  */
void
card_of_balance (struct session *session, const struct definition *d, struct result *result)
{
  static const char *const blank[] = { "" };
  const struct plant *plant = d->value.plant;
  struct card *card = result_card (result, d->name,
                                   arena_format (result->arena, "balance, %zu boundar%s, %zu "
                                                 "streams", plant->boundary_count,
                                                 plant->boundary_count == 1 ? "y" : "ies",
                                                 plant->stream_count), 1, blank);
  size_t number = 0;
  for (const struct statement *line = d->statement->next; line && line->kind != STATEMENT_END;
       line = line->next) {
    struct cell *cells = card_add_row (result, card,
                                       arena_format (result->arena, "%zu", ++number));
    cells[0].text = line->source;
  }
  for (size_t s = 0; s < plant->stream_count; s++)
    if (plant->stream[s].given) {
      card_add_line (result, card, arena_format (result->arena, "%s enters as it was defined: %s",
                                                 plant->stream[s].name,
                                                 plant->stream[s].given->source));
    }
  add_lists (session, plant, result, card);
  card_add_line (result, card, arena_format (result->arena, "solve %s says what it comes to",
                                             d->name));
}
