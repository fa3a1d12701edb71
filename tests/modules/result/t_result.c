/* Results: what is collected comes back in order, once, where it belongs.  */
#include "config.h"

#include <math.h>

#include "libtest.h"
#include "result/result.h"
#include "support/arena.h"

static struct arena *arena;
static struct result result;

static void
start (void)
{
  arena = arena_create ();
  result_init (&result, arena, "feed in kg/h");
}

static void
end (void)
{
  arena_destroy (arena);
}

static void
starts_empty (void)
{
  start ();
  CHECK (result_is_empty (&result));
  CHECK (!result.quit);
  SAME_TEXT (result.statement, "feed in kg/h");
  result_sort_taken (&result);
  CHECK (result_is_empty (&result));
  end ();
}

static void
new_answer_states_nothing (void)
{
  start ();
  const struct answer *answer = result_answer (&result);
  CHECK (isnan (answer->value));
  CHECK (isnan (answer->uncertainty));
  SAME_TEXT (answer->what, "");
  SAME_TEXT (answer->unit, "");
  SAME_TEXT (answer->label, NULL);
  SAME_TEXT (answer->moisture, NULL);
  SAME_TEXT (answer->basis, NULL);
  CHECK (!result_is_empty (&result));
  end ();
}

static void
answers_keep_their_order (void)
{
  start ();
  for (int i = 0; i < 4; i++)
    result_answer (&result)->value = i;
  double next = 0.0;
  for (const struct answer *a = result.answers; a != NULL; a = a->next)
    NEAR (a->value, next++, 0);
  NEAR (next, 4.0, 0);
  end ();
}

static void
remarks_go_by_severity (void)
{
  start ();
  result_remark (&result, MESSAGE_CAUTION_TOXIC, "H2S", "170");
  result_remark (&result, MESSAGE_NOTE_SCALED, "raw", "1.002");
  result_remark (&result, MESSAGE_TAKEN_REFERENCE, "Nm3", "0 degC");
  NEED (result.taken != NULL && result.notes != NULL && result.cautions != NULL);
  SAME_INT (result.taken->kind, MESSAGE_TAKEN_REFERENCE);
  SAME_INT (result.notes->kind, MESSAGE_NOTE_SCALED);
  SAME_INT (result.cautions->kind, MESSAGE_CAUTION_TOXIC);
  SAME_TEXT (result.cautions->fact[0], "H2S");
  SAME_TEXT (result.cautions->fact[1], "170");
  CHECK (isnan (result.taken->effect));
  CHECK (result.taken->next == NULL && result.notes->next == NULL
         && result.cautions->next == NULL);
  end ();
}

static void
same_remark_comes_once (void)
{
  start ();
  char scf[] = "scf", again[] = "scf";
  struct remark *first = result_remark (&result, MESSAGE_TAKEN_REFERENCE, scf, NULL);
  CHECK (result_remark (&result, MESSAGE_TAKEN_REFERENCE, again, NULL) == first);
  CHECK (result_remark (&result, MESSAGE_TAKEN_REFERENCE, "Nm3", NULL) != first);
  CHECK (result_remark (&result, MESSAGE_TAKEN_REFERENCE, "scf", "60 degF") != first);
  CHECK (result_remark (&result, MESSAGE_TAKEN_ABSOLUTE, "scf", NULL) != first);
  size_t count = 0;
  for (const struct remark *r = result.taken; r != NULL; r = r->next)
    count++;
  SAME_INT (count, 4);
  end ();
}

static void
largest_effect_comes_first (void)
{
  start ();
  static const struct { const char *unit; double effect; } given[] = {
    { "a", (double) NAN }, { "b", 0.01 }, { "c", -0.05 }, { "d", 0.01 }, { "e", (double) NAN },
    { "f", 0.0 }, { "g", 0.02 }
  };
  static const char *const sorted[] = { "c", "g", "b", "d", "f", "a", "e" };
  for (size_t i = 0; i < 7; i++)
    result_remark (&result, MESSAGE_TAKEN_REFERENCE, given[i].unit, NULL)->effect
      = given[i].effect;
  result_sort_taken (&result);
  size_t i = 0;
  for (const struct remark *r = result.taken; r != NULL && i < 7; r = r->next)
    SAME_TEXT (r->fact[0], sorted[i++]);
  SAME_INT (i, 7);
  result_remark (&result, MESSAGE_TAKEN_REFERENCE, "last", NULL);
  const struct remark *last = result.taken;
  while (last->next != NULL)
    last = last->next;
  SAME_TEXT (last->fact[0], "last");
  end ();
}

static void
cards_have_blank_cells (void)
{
  start ();
  static const char *const headings[] = { "mol%", "stated as" };
  struct card *card = result_card (&result, "raw", "gas, dry, 2 parts", 2, headings);
  struct cell *methane = card_add_row (&result, card, "CH4");
  CHECK (methane[0].text == NULL && !methane[0].is_number && methane[1].text == NULL);
  methane[0].value = 58.2;
  card_add_row (&result, card, "CO2");
  card_add_line (&result, card, "one");
  card_add_line (&result, card, "two");
  struct card *more = result_card (&result, "names", "1 defined", 0, NULL);
  card_add_row (&result, more, "raw");
  CHECK (result.cards == card && card->next == more && more->next == NULL);
  NEED (card->rows != NULL && card->rows->next != NULL && card->lines != NULL);
  SAME_TEXT (card->rows->name, "CH4");
  NEAR (card->rows->cells[0].value, 58.2, 0);
  SAME_TEXT (card->rows->next->name, "CO2");
  SAME_TEXT (card->lines->next->text, "two");
  CHECK (!result_is_empty (&result));
  end ();
}

static void
help_keeps_its_entries (void)
{
  start ();
  struct help_page *page = result_help (&result, "gas");
  help_add (&result, page, "form", "sentence", "line");
  help_add (&result, page, NULL, "more", NULL);
  CHECK (!result_is_empty (&result));
  NEED (result.help == page && page->entries != NULL && page->entries->next != NULL);
  SAME_TEXT (page->title, "gas");
  SAME_TEXT (page->entries->say, "form");
  SAME_TEXT (page->entries->example, "line");
  SAME_TEXT (page->entries->next->get, "more");
  end ();
}

static const struct test_case cases[] = {
  { "a new result is empty", starts_empty },
  { "a new answer states nothing", new_answer_states_nothing },
  { "answers keep their order", answers_keep_their_order },
  { "remarks go where their severity belongs", remarks_go_by_severity },
  { "the same remark comes once", same_remark_comes_once },
  { "the largest effect comes first", largest_effect_comes_first },
  { "cards have rows of blank cells", cards_have_blank_cells },
  { "a help page keeps its entries", help_keeps_its_entries },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
