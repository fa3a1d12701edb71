/* Measured figures brought together: where each moved, whether they agree, and which of them
   could be wrong.                                                                               */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include <stdint.h>
#include <string.h>
#include "result/result.h"
#include "support/arena.h"
#include "support/map.h"

/* Up to the blanks before its '='; 0: there is none.  */
static size_t
left_length (const struct plant_fact *f)
{
  const char *equals = strchr (f->words, '=');
  size_t n = f->line > 0 && equals ? (size_t) (equals - f->words) : 0;
  while (n > 0 && f->words[n - 1] == ' ') {
    n--;
  }
  return n;
}

/* Marks the figures of which something else is stated, too, as by two analyses of one stream: by
   adjustment, in M->named_twice.                                                                */
static void
find_twice (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  bool *twice = ARENA_ARRAY (m->arena, s->adjustment_count + 1, bool);
  struct map *first = map_create ();
  for (size_t i = 0; i < s->adjustment_count; i++) {
    const struct plant_fact *f = &m->plant->fact[s->adjustments[i].fact];
    const size_t n = left_length (f);
    const size_t before = n > 0 ? (size_t) (uintptr_t) map_find (first, f->words, n) : 0;
    if (n > 0 && before == 0) {
      map_put (first, f->words, n, (void *) (uintptr_t) (i + 1));
    } else if (before > 0 && m->plant->fact[s->adjustments[before - 1].fact].line != f->line) {
      twice[i] = twice[before - 1] = true;
    }
  }
  map_destroy (first);
  m->named_twice = twice;
}

/* What a figure is called: its stream, or the component of it.  */
static const char *
figure_name (const struct verdict_maker *m, const struct adjustment *a)
{
  const struct plant *plant = m->plant;
  const struct plant_fact *f = &plant->fact[a->fact];
  const struct fact *fact = &plant->network.fact[a->fact];
  if (fact->kind == FACT_COMPOSITION && a->component < plant->component_count) {
    return arena_format (m->arena, "%s of %s", component_text (plant, a->component),
                         plant->stream[f->stream].name);
  }
  const size_t n = left_length (f);
  if (n > 0) {
    const char *name = arena_copy (m->arena, f->words, n);
    return m->named_twice[a - m->solution->adjustments]
             ? arena_format (m->arena, "%s (line %zu)", name, f->line) : name;
  }
  return f->stream != NO_STREAM ? plant->stream[f->stream].name : f->words;
}

static const char *
pair_text (const struct verdict_maker *m, double value, double u)
{
  return arena_format (m->arena, "%s +/- %.2g", figure_text (m->arena, value), u);
}

/* The unit of a figure; of a share of something else with what it is a share of, as typed.  */
static const char *
unit_text (const struct verdict_maker *m, const struct adjustment *a)
{
  const struct plant_fact *f = &m->plant->fact[a->fact];
  const char *equals = strchr (f->words, '=');
  const char *of = equals && f->line > 0 ? strstr (equals, " of ") : NULL;
  bool share = m->plant->network.fact[a->fact].relation && of;
  return share ? arena_format (m->arena, "%s%s", f->unit, of) : f->unit;
}

static void
adjustment_row (struct verdict_maker *m, const struct adjustment *a)
{
  double per = m->plant->fact[a->fact].per;
  struct verdict_row *row = verdict_add_row (m, 0);
  double by = (a->moved_to - a->stated) / a->stated_u;
  row->cell[0] = figure_name (m, a);
  row->cell[1] = pair_text (m, a->stated * per, a->stated_u * per);
  row->cell[2] = a->class == FIGURE_UNOBSERVABLE ? "not observable"
                 : pair_text (m, a->moved_to * per, a->moved_to_u * per);
  row->cell[3] = a->class == FIGURE_REDUNDANT
                   ? arena_format (m->arena, "%+.2f u, z %s   %s", by,
                                   arena_format (m->arena, "%.4g", fabs (a->z)), unit_text (m, a))
                   : arena_format (m->arena, "nothing else checks it   %s", unit_text (m, a));
}

static void
tell_adjustments (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  struct balance_verdict *v = m->verdict;
  struct verdict_adjustment *list = ARENA_ARRAY (m->arena, s->adjustment_count,
                                                 struct verdict_adjustment);
  v->heading[0] = "";
  v->heading[1] = "stated";
  v->heading[2] = "moved to";
  v->heading[3] = "by";
  for (size_t i = 0; i < s->adjustment_count; i++) {
    const struct adjustment *a = &s->adjustments[i];
    const struct plant_fact *f = &m->plant->fact[a->fact];
    bool part = m->plant->network.fact[a->fact].kind == FACT_COMPOSITION;
    list[i] = (struct verdict_adjustment) {
      .statement = f->text, .component = part ? component_text (m->plant, a->component) : NULL,
      .unit = f->unit, .stated = a->stated * f->per, .reconciled = a->moved_to * f->per,
      .uncertainty = a->moved_to_u * f->per,
      .z = a->class == FIGURE_REDUNDANT ? fabs (a->z) : UNSTATED
    };
    adjustment_row (m, a);
  }
  v->adjustments = list;
  v->adjustment_count = s->adjustment_count;
}

/* What kind of uncertainty stands in the table, and who gave way most.  */
static void
tell_most_moved (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  const struct adjustment *most = NULL;
  double by = 0;
  for (size_t i = 0; i < s->adjustment_count; i++) {
    const struct adjustment *a = &s->adjustments[i];
    double size = fabs (a->moved_to - a->stated);
    if (a->class == FIGURE_REDUNDANT && size > by) {
      most = a;
      by = size;
    }
  }
  const char *moved = !most ? ""
    : arena_format (m->arena, "; moved most: %s, stated to +/- %.2g %s", figure_name (m, most),
                    most->stated_u * m->plant->fact[most->fact].per,
                    m->plant->fact[most->fact].unit);
  verdict_fact (m, "all uncertainties", arena_format (m->arena, "standard (k = 1)%s", moved));
}

/* Figures that share the largest z, as one list; *Z says it.  */
static struct text_list
standing_out (const struct verdict_maker *m, double *z)
{
  const struct solution *s = m->solution;
  struct text_list names = { .at = NULL };
  *z = 0;
  for (size_t i = 0; i < s->adjustment_count; i++)
    if (s->adjustments[i].class == FIGURE_REDUNDANT) {
      *z = fmax (*z, fabs (s->adjustments[i].z));
    }
  for (size_t i = 0; i < s->adjustment_count; i++) {
    const struct adjustment *a = &s->adjustments[i];
    if (a->class == FIGURE_REDUNDANT && fabs (a->z) > *z * (1 - 1e-7)) {
      text_list_add (m->arena, &names, figure_name (m, a));
    }
  }
  return names;
}

static void
tell_who (struct verdict_maker *m)
{
  double z;
  struct text_list names = standing_out (m, &z);
  struct result *result = m->ev->result;
  const char *figure = arena_format (m->arena, "%.4g", z);
  const char *joined = verdict_joined (m, "stand out alike", &names);
  if (!result || names.count == 0) {
    return;
  }
  if (z <= m->solution->z_critical && m->solution->passed) {
    result_remark (result, names.count > 1 ? MESSAGE_NOTE_NONE_STANDS_OUT_TIE
                                           : MESSAGE_NOTE_NONE_STANDS_OUT, joined, figure);
    return;
  }
  struct remark *remark = result_remark (result, names.count > 1 ? MESSAGE_NOTE_SUSPECTS_TIE
                                                                 : MESSAGE_NOTE_SUSPECT,
                                         joined, figure);
  remark->fact[2] = arena_format (m->arena, "%.3g", m->solution->z_critical);
}

/* Whoever is suspected, in which words of his the rest would be met.  */
static void
tell_suspects (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  struct verdict_suspect *suspects = ARENA_ARRAY (m->arena, s->adjustment_count,
                                                  struct verdict_suspect);
  size_t count = 0;
  double z;
  (void) standing_out (m, &z);
  for (size_t i = 0; !s->passed && i < s->adjustment_count; i++) {
    const struct adjustment *a = &s->adjustments[i];
    const struct plant_fact *f = &m->plant->fact[a->fact];
    if (a->class == FIGURE_REDUNDANT && !isnan (a->implied)
        && fabs (a->z) > z * (1 - 1e-7)) {
      suspects[count++] = (struct verdict_suspect) { f->line, f->text, f->unit,
                                                     a->implied * f->per, UNSTATED, UNSTATED };
      verdict_fact (m, count > 1 ? "" : "alone at fault",
                    arena_format (m->arena, "%s would have to be %s (stated %s)",
                                  figure_name (m, a), fact_value_text (m, a->fact, a->implied),
                                  figure_text (m->arena, a->stated * f->per)));
    }
  }
  m->verdict->suspects = suspects;
  m->verdict->suspect_count = count;
}

static void
tell_leaks (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  for (size_t i = 0; !s->passed && i < s->leak_count && i < 3; i++) {
    const struct leak *leak = &s->leaks[i];
    verdict_fact (m, i ? "" : "or a leak",
                  arena_format (m->arena, "%s %s %s of %s at %s: chi2 would fall by %.4g",
                                figure_text (m->arena, fabs (leak->size) * m->per), m->unit,
                                leak->size < 0 ? "too much" : "lost",
                                component_text (m->plant, leak->component),
                                m->plant->boundary[leak->boundary].name, leak->drop));
  }
}

static void
tell_eliminations (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  for (size_t i = 0; i < s->elimination_count; i++) {
    const struct elimination *e = &s->eliminations[i];
    const struct adjustment *a = &s->adjustments[e->adjustment];
    struct text_list others = { .at = NULL };
    for (size_t k = 0; k < e->tie_count; k++)
      if (e->tie[k] != e->adjustment) {
        text_list_add (m->arena, &others, figure_name (m, &s->adjustments[e->tie[k]]));
      }
    const char *joined = verdict_joined (m, "or instead", &others);
    verdict_fact (m, i ? "and then" : "left out in turn",
                  arena_format (m->arena, "without %s%s%s%s chi2 is %.4g with %zu to spare; it "
                                "should then read %s", figure_name (m, a),
                                *joined ? " (or " : "", joined, *joined ? ")" : "",
                                e->chi2_left, e->freedom_left,
                                fact_value_text (m, a->fact, e->implied)));
  }
}

/* What is held at zero: components by name, a stream where nothing of it flows.  */
static void
tell_held (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  struct text_list held = { .at = NULL };
  size_t n = m->plant->network.components, last = m->plant->stream_count;
  for (size_t i = 0; i < s->held_count; i++) {
    size_t stream = s->held[i] / n;
    double flow = 0;
    for (size_t c = 0; stream < m->plant->stream_count && c < n; c++) {
      flow += s->value[stream * n + c];
    }
    const char *name = stream < m->plant->stream_count ? m->plant->stream[stream].name : NULL;
    if (name && n > 1 && flow > 0) {
      name = arena_format (m->arena, "%s of %s", component_text (m->plant, s->held[i] % n), name);
    } else if (stream == last) {
      continue;
    }
    last = stream;
    if (name) {
      text_list_add (m->arena, &held, name);
    }
  }
  const char *joined = verdict_joined (m, "held at zero", &held);
  if (held.count > 0 && m->ev->result) {
    result_remark (m->ev->result, MESSAGE_NOTE_HELD_AT_ZERO, joined, NULL);
  }
}

/* Is a fact without any ± one that might be off in its last digit?  */
static bool
is_held_exact (const struct plant *plant, size_t f)
{
  const struct fact *fact = &plant->network.fact[f];
  size_t n = plant->network.components;
  bool rounded = fact->rounding > 0, uncertain = fact->u > 0;
  for (size_t c = 0; fact->kind == FACT_COMPOSITION && c < n; c++) {
    rounded = rounded || (fact->fractions_rounding && fact->fractions_rounding[c] > 0);
    uncertain = uncertain || (fact->fractions_u && fact->fractions_u[c] > 0);
  }
  return rounded && !uncertain;
}

static void
tell_exact (struct verdict_maker *m)
{
  const bool *by_digits = m->solution->by_digits;
  struct text_list lines = { .at = NULL };
  for (size_t f = 0; f < m->plant->fact_count; f++)
    if (is_held_exact (m->plant, f) && !(by_digits && by_digits[f])) {
      bool part = m->plant->network.fact[f].kind == FACT_COMPOSITION;
      text_list_add (m->arena, &lines,
                     part ? arena_format (m->arena, "composition of %s",
                                          m->plant->stream[m->plant->fact[f].stream].name)
                          : m->plant->fact[f].words);
    }
  const char *joined = verdict_joined (m, "counted as exact", &lines);
  if (lines.count > 0 && m->ev->result) {
    result_remark (m->ev->result, MESSAGE_TAKEN_EXACT, joined, NULL);
  }
}

static void
tell_by_digits (struct verdict_maker *m)
{
  struct text_list lines = { .at = NULL };
  for (size_t f = 0; m->solution->by_digits && f < m->plant->fact_count; f++)
    if (m->solution->by_digits[f]) {
      text_list_add (m->arena, &lines, m->plant->fact[f].words);
    }
  const char *joined = verdict_joined (m, "counted with their digits", &lines);
  if (lines.count > 0 && m->ev->result) {
    result_remark (m->ev->result, MESSAGE_TAKEN_DIGITS, joined, NULL);
  }
}

void
verdict_reconciled (struct verdict_maker *m)
{
  const struct solution *s = m->solution;
  struct balance_verdict *v = m->verdict;
  find_twice (m);
  v->tested = s->freedom > 0;
  v->chi2 = s->chi2;
  v->critical = s->critical;
  v->freedom = s->freedom;
  v->passed = s->passed;
  v->head = s->freedom == 0 ? "nothing to spare: no figure checks another"
            : arena_format (m->arena, "%s%zu to spare; global test %.4g, limit %.4g, p %.2g%s",
                            s->passed ? "" : "THEY DO NOT AGREE, a gross error; ", s->freedom,
                            s->chi2, s->critical, s->p, s->passed ? ": they agree" : "");
  tell_adjustments (m);
  tell_most_moved (m);
  if (s->freedom > 0) {
    tell_who (m);
  }
  tell_suspects (m);
  tell_leaks (m);
  tell_eliminations (m);
  tell_by_digits (m);
  tell_exact (m);
  tell_held (m);
}
