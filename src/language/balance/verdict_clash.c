/* Facts that cannot all hold: the smallest set, in the user's own lines, with the gap and what
   each line would have to say if it alone were at fault.                                        */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include <string.h>
#include "support/arena.h"

/* The names of the boundaries of the envelope that does not close: "dosing + membrane".  */
static const char *
envelope (struct verdict_maker *m, const struct conflict *conflict)
{
  const char *names = NULL;
  for (size_t b = 0; b < m->plant->boundary_count; b++)
    if (conflict->around && conflict->around[b]) {
      names = names ? arena_format (m->arena, "%s + %s", names, m->plant->boundary[b].name)
                    : m->plant->boundary[b].name;
    }
  return names;
}

static void
tell_gap (struct verdict_maker *m, const struct conflict *conflict)
{
  struct balance_verdict *v = m->verdict;
  v->gap_around = envelope (m, conflict);
  if (!v->gap_around) {
    v->head = conflict->still < m->plant->stream_count
                ? arena_format (m->arena, "these lines hold only if nothing flows in %s",
                                m->plant->stream[conflict->still].name)
                : "these lines do not go together";
    return;
  }
  v->gap_component = conflict->component < m->plant->component_count && !m->plant->whole
                       ? component_text (m->plant, conflict->component) : "total";
  v->gap = conflict->gap * m->per;
  v->gap_unit = m->unit;
  v->head = arena_format (m->arena, "around %s, %s is out by %s %s (in less out)", v->gap_around,
                          *v->gap_component == 't' ? "the total" : v->gap_component,
                          figure_text (m->arena, v->gap), m->unit);
}

/* "CO2 ": the part of a composition, or what is said not to be there; else "".  */
static const char *
part_text (struct verdict_maker *m, const struct suspect *suspect)
{
  const struct fact *fact = &m->plant->network.fact[suspect->fact];
  size_t c = fact->absence ? fact->left.terms[0].column % m->plant->network.components
                           : suspect->component;
  return fact->kind != FACT_COMPOSITION && !fact->absence
           ? "" : arena_format (m->arena, "%s ", component_text (m->plant, c));
}

/* What the others leave a fact to say, where that is no one value.  */
static const char *
room_text (struct verdict_maker *m, const struct suspect *suspect)
{
  const struct plant_fact *f = &m->plant->fact[suspect->fact];
  const char *part = part_text (m, suspect);
  if (isnan (suspect->least)) {
    return "the others leave it open";
  }
  const char *least = figure_text (m->arena, suspect->least * f->per);
  if (isinf (suspect->greatest)) {
    return suspect->least > 0 ? arena_format (m->arena, "%s%s %s or more", part, least, f->unit)
                              : arena_format (m->arena, "%sanything above 0", part);
  }
  return arena_format (m->arena, "%s%s .. %s", part, least,
                       fact_value_text (m, suspect->fact, suspect->greatest));
}

static const char *
needed_text (struct verdict_maker *m, const struct suspect *suspect)
{
  const struct plant_fact *f = &m->plant->fact[suspect->fact];
  const char *part = part_text (m, suspect);
  if (isnan (suspect->needed)) {
    return suspect->plausible ? room_text (m, suspect) : "not at fault alone";
  }
  const char *value = fact_value_text (m, suspect->fact, suspect->needed);
  value = arena_format (m->arena, "%s%s", part, value);
  if (suspect->plausible) {
    return value;
  }
  return suspect->needed < 0 ? "not at fault (it would be negative)"
         : f->per > 99 && f->per < 101 && suspect->needed > 1
           ? "not at fault (it would be more than the whole)"
           : arena_format (m->arena, "not at fault (%s: a flow would be negative)", value);
}

/* All suspects of one line stand in one row.  */
static void
tell_line (struct verdict_maker *m, const struct conflict *conflict, size_t first)
{
  const struct plant_fact *f = &m->plant->fact[conflict->suspects[first].fact];
  struct text_list needed = { .at = NULL };
  bool plausible = false;
  for (int wanted = 1; wanted >= 0; wanted--)
    for (size_t i = first; i < conflict->count; i++) {
      const struct suspect *suspect = &conflict->suspects[i];
      const struct plant_fact *other = &m->plant->fact[suspect->fact];
      if (other->line == f->line && strcmp (other->text, f->text) == 0
          && suspect->plausible == (wanted == 1) && !(wanted == 0 && plausible)) {
        text_list_add (m->arena, &needed, needed_text (m, suspect));
        plausible = plausible || suspect->plausible;
      }
    }
  struct verdict_row *row = verdict_add_row (m, f->line);
  const char *text = needed.at[0];
  for (size_t i = 1; i < needed.count; i++) {
    text = arena_format (m->arena, "%s, or %s", text, needed.at[i]);
  }
  row->cell[0] = f->text;
  row->cell[1] = text;
}

static bool
is_told (const struct verdict_maker *m, const struct conflict *conflict, size_t i)
{
  const struct plant_fact *f = &m->plant->fact[conflict->suspects[i].fact];
  for (size_t k = 0; k < i; k++) {
    const struct plant_fact *other = &m->plant->fact[conflict->suspects[k].fact];
    if (other->line == f->line && strcmp (other->text, f->text) == 0) {
      return true;
    }
  }
  return false;
}

/* How sure it is that no smaller set clashes, where there is a choice.  */
static void
tell_size (struct verdict_maker *m, const struct conflict *conflict)
{
  if (m->solution->count.surplus > 1 || conflict->still < m->plant->stream_count) {
    verdict_fact (m, "this set", conflict->least ? "a smallest one: no fewer lines clash"
                  : "no line of it can be left out; whether fewer others clash is not known");
  }
}

static const char *
pair_side (struct verdict_maker *m, const struct suspect *suspect)
{
  const struct plant_fact *f = &m->plant->fact[suspect->fact];
  return f->line == 0 ? arena_format (m->arena, "%s: %s", f->text, needed_text (m, suspect))
         : arena_format (m->arena, "%zu  %s: %s", f->line, f->text, needed_text (m, suspect));
}

/* Pairs of lines at fault together.  */
static void
tell_pairs (struct verdict_maker *m, const struct conflict *conflict)
{
  struct verdict_pair *pairs = ARENA_ARRAY (m->arena, conflict->pair_count, struct verdict_pair);
  for (size_t i = 0; i < conflict->pair_count; i++) {
    const struct suspect_pair *pair = &conflict->pairs[i];
    for (int side = 0; side < 2; side++) {
      const struct plant_fact *f = &m->plant->fact[pair->at[side].fact];
      pairs[i].at[side] = (struct verdict_suspect) {
        f->line, f->text, f->unit, pair->at[side].needed * f->per, UNSTATED, UNSTATED
      };
    }
    verdict_fact (m, i ? "or" : "two of them at fault",
                  arena_format (m->arena, "%s; %s", pair_side (m, &pair->at[0]),
                                pair_side (m, &pair->at[1])));
  }
  if (conflict->none_alone && conflict->pair_count == 0) {
    verdict_fact (m, "no line alone", conflict->pairs_cut
                  ? "is at fault for all that clashes; there are too many pairs to look through"
                  : "is at fault for all that clashes, and no pair of lines either");
  }
  if (conflict->pair_count > 1) {
    verdict_fact (m, "", conflict->pairs_left > 0
                  ? arena_format (m->arena, "or %s%zu pairs more; they tie, the smallest changes "
                                  "first", conflict->pairs_cut ? "at least " : "",
                                  conflict->pairs_left)
                  : "these pairs tie, the smallest changes first");
  }
  m->verdict->pairs = pairs;
  m->verdict->pair_count = conflict->pair_count;
  m->verdict->pairs_left = conflict->pairs_left;
}

void
verdict_clash (struct verdict_maker *m)
{
  const struct conflict *conflict = m->solution->conflict;
  struct balance_verdict *v = m->verdict;
  struct text_list lines = { .at = NULL };
  struct verdict_suspect *suspects = ARENA_ARRAY (m->arena, conflict->count,
                                                  struct verdict_suspect);
  size_t count = 0;
  v->clash = true;
  v->heading[0] = "these cannot all hold";
  v->heading[1] = "alone at fault, it would have to be";
  tell_gap (m, conflict);
  for (size_t i = 0; i < conflict->count; i++) {
    const struct suspect *suspect = &conflict->suspects[i];
    const struct plant_fact *f = &m->plant->fact[suspect->fact];
    text_list_add (m->arena, &lines, f->text);
    if (suspect->plausible) {
      bool one = !isnan (suspect->needed);
      suspects[count++] = (struct verdict_suspect) {
        f->line, f->text, f->unit, suspect->needed * f->per,
        one ? UNSTATED : suspect->least * f->per, one ? UNSTATED : suspect->greatest * f->per
      };
    }
  }
  /* In the order of the lines.  */
  size_t last = 0;
  for (size_t i = 0; i < conflict->count; i++) {
    const struct plant_fact *f = &m->plant->fact[conflict->suspects[i].fact];
    last = f->line > last ? f->line : last;
  }
  for (size_t line = 0; line <= last; line++)
    for (size_t i = 0; i < conflict->count; i++)
      if (m->plant->fact[conflict->suspects[i].fact].line == line && !is_told (m, conflict, i)) {
        tell_line (m, conflict, i);
      }
  tell_size (m, conflict);
  tell_pairs (m, conflict);
  v->smallest = conflict->least;
  v->conflict = text_list_done (&lines);
  v->suspects = suspects;
  v->suspect_count = count;
}

/* The lines that no flows above nothing can hold, though some below do.  */
void
verdict_impossible (struct verdict_maker *m)
{
  const struct conflict *conflict = m->solution->impossible;
  struct text_list lines = { .at = NULL };
  for (size_t i = 0; conflict && i < conflict->count; i++) {
    const struct suspect *suspect = &conflict->suspects[i];
    const struct plant_fact *f = &m->plant->fact[suspect->fact];
    const char *line = f->line == 0 ? "" : arena_format (m->arena, "%zu  ", f->line);
    text_list_add (m->arena, &lines, f->text);
    verdict_fact (m, i ? "" : "impossible together",
                  arena_format (m->arena, "%s%s   (the others leave it %s)", line, f->text,
                                needed_text (m, suspect)));
  }
  m->verdict->impossible = text_list_done (&lines);
}
