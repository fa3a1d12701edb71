/* Results that come out on paper and hang on last digits: which, on whose, how far these take
   them, and what would settle them.                                                             */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include "result/result.h"
#include "support/arena.h"

/* As many results are told one by one.  */
enum { TOLD_MOST = 6 };

/* A value of the quantity, as it is told, without its unit.  */
static double
told (const struct verdict_maker *m, const struct quantity *q, double value)
{
  return q->kind == QUANTITY_TOTAL ? value * m->per : 100 * value;
}

static const char *
unit_of (const struct verdict_maker *m, const struct quantity *q)
{
  return q->kind == QUANTITY_TOTAL ? m->unit : "mol%";
}

static void
tell_ends (struct verdict_maker *m, const struct loose *loose)
{
  struct text_list names = { .at = NULL };
  struct verdict_loose *list = ARENA_ARRAY (m->arena, loose->count, struct verdict_loose);
  for (size_t i = 0; i < loose->count; i++) {
    const struct loose_end *end = &loose->ends[i];
    const char *name = quantity_text (m, &end->quantity), *unit = unit_of (m, &end->quantity);
    double value = told (m, &end->quantity, end->value);
    double moves = told (m, &end->quantity, end->moves);
    list[i] = (struct verdict_loose) { name, unit, value, moves };
    if (i < TOLD_MOST) {
      verdict_fact (m, i ? "" : "hangs on last digits",
                    arena_format (m->arena, "%s: on paper %s %s, give or take %s", name,
                                  figure_text (m->arena, value), unit,
                                  rough_text (m->arena, moves)));
    }
    text_list_add (m->arena, &names, name);
  }
  m->verdict->loose = list;
  m->verdict->loose_count = loose->count;
  if (loose->count > TOLD_MOST) {
    verdict_fact (m, "", arena_format (m->arena, "and %zu more", loose->count - TOLD_MOST));
  }
  const char *joined = verdict_joined (m, "hang on last digits", &names);
  if (m->ev->result) {
    result_remark (m->ev->result, MESSAGE_NOTE_LAST_DIGITS, joined, NULL);
  }
}

static void
tell_hinges (struct verdict_maker *m, const struct loose *loose)
{
  const struct plant *plant = m->plant;
  struct verdict_hinge *list = ARENA_ARRAY (m->arena, loose->hinge_count, struct verdict_hinge);
  for (size_t i = 0; i < loose->hinge_count; i++) {
    const struct hinge *hinge = &loose->hinges[i];
    const struct plant_fact *f = &plant->fact[hinge->fact];
    const struct quantity *q = &loose->ends[hinge->end].quantity;
    const char *what = quantity_text (m, q), *unit = unit_of (m, q);
    double least = told (m, q, hinge->least), greatest = told (m, q, hinge->greatest);
    const char *part = hinge->component < plant->network.components && !plant->whole
                         ? arena_format (m->arena, " (%s)", component_text (plant,
                                                                           hinge->component)) : "";
    const char *line = f->line == 0 ? "" : arena_format (m->arena, "%zu  ", f->line);
    const char *to = isnan (least) ? "takes it anywhere"
                     : arena_format (m->arena, "takes it to %s .. %s %s",
                                     figure_text (m->arena, least),
                                     figure_text (m->arena, greatest), unit);
    list[i] = (struct verdict_hinge) { f->line, f->text, what, unit, least, greatest };
    verdict_fact (m, i ? "" : "half a digit of",
                  arena_format (m->arena, "%s%s%s %s  (%s)", line, f->text, part, to, what));
  }
  m->verdict->hinges = list;
  m->verdict->hinge_count = loose->hinge_count;
}

void
verdict_loose (struct verdict_maker *m)
{
  const struct loose *loose = m->solution->loose;
  if (!loose || m->solution->status == BALANCE_CONTRADICTORY) {
    return;
  }
  tell_ends (m, loose);
  tell_hinges (m, loose);
  m->verdict->settled_by = verdict_sets (m, loose->suggestion_count, loose->suggestions,
                                         "any one settles it", &m->verdict->settled_by_count);
}
