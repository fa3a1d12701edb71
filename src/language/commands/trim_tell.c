#include "config.h"
#include "language/commands/trim.h"

#include <math.h>
#include <string.h>
#include "gas/species.h"
#include "language/evaluate/wording.h"
#include "language/kept.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/workings.h"

/* A condition so near its limit stands at it.  */
#define AT_ITS_LIMIT 1e-9

static const char *
joined (struct arena *arena, const char *before, const char *one)
{
  return *before ? arena_format (arena, "%s, %s", before, one) : one;
}

const char *
trim_names (const struct trim *t)
{
  const char *names = "";
  for (const struct node *n = t->statement->names; n; n = n->next) {
    names = joined (t->arena, names, n->text);
  }
  return names;
}

/* What is aimed at, as typed; with the unit that stands behind the other end of its range.  */
static const char *
aimed_text (const struct trim *t, const struct node *aimed)
{
  const char *typed = node_text (t->arena, t->statement, aimed);
  bool apart = aimed->kind == NODE_QUANTITY && aimed->unit && aimed->unit_at.first > aimed->at.last;
  return apart ? arena_format (t->arena, "%s %s", typed, aimed->unit_text) : typed;
}

static const char *
aim_text (const struct trim *t, const struct aim *a)
{
  static const char *const signs[] = { "=", "at least", "at most" };
  return arena_format (t->arena, "%s %s %s", node_text (t->arena, t->statement, a->left),
                       signs[a->is], aimed_text (t, a->right));
}

/* Is it the lower end of a range?  Both ends are of the same figure.  */
static bool
opens_range (const struct aim *a)
{
  return a->next && a->next->left == a->left;
}

const char *
trim_aims (const struct trim *t)
{
  const char *aims = "";
  for (const struct aim *a = t->statement->aims; a; a = a->next) {
    const char *one = aim_text (t, a);
    if (opens_range (a)) {
      const char *least = node_text (t->arena, t->statement, a->right);
      a = a->next;
      one = arena_format (t->arena, "%s within %s .. %s",
                          node_text (t->arena, t->statement, a->left), least,
                          node_text (t->arena, t->statement, a->right));
    }
    aims = joined (t->arena, aims, one);
  }
  return aims;
}

static const char *
unit_of (const struct trim *t, size_t i)
{
  return t->moved[i].value.unit ? t->moved[i].value.unit->spelling : "";
}

/* "12.3 kg/h" */
static const char *
with_unit (const struct trim *t, double value, const char *unit)
{
  return arena_format (t->arena, "%s%s%s", figure_text (t->arena, value), *unit ? " " : "", unit);
}

/* "dose 12.3 kg/h, purge 0 kg/h" */
static const char *
values_text (const struct trim *t, const double x[])
{
  const char *text = "";
  for (size_t i = 0; i < t->count; i++) {
    const char *name = t->moved[i].definition->name;
    bool beyond = !(t->most[i] < HUGE_VAL) && x[i] > 1e6 * t->scale[i];
    text = joined (t->arena, text,
                   beyond ? arena_format (t->arena, "%s outweighing all else", name)
                   : arena_format (t->arena, "%s %s", name, with_unit (t, x[i], unit_of (t, i))));
  }
  return text;
}

/* The unit an aim is typed in.  */
static const char *
aim_unit (struct trim *t, const struct aim *aim)
{
  struct value right;
  struct evaluation ev;
  struct fault unheard;
  fault_init (&unheard, t->arena);
  evaluation_again (&ev, t->first, &unheard);
  ev.stand_ins = t->moved;
  ev.stand_in_count = t->count;
  return evaluate_quantity (&ev, aim->right, &right) && right.unit ? right.unit->spelling : "";
}

/* "wobbe of mix is 47.2 MJ/m3" with quantities X; null where it has no figure.  */
static const char *
reached_text (struct trim *t, const struct aim *aim, const double x[])
{
  double value;
  struct fault unheard;
  fault_init (&unheard, t->arena);
  if (!trim_figure (t, aim, x, &value, &unheard)) {
    return NULL;
  }
  return arena_format (t->arena, "%s is %s", node_text (t->arena, t->statement, aim->left),
                       with_unit (t, value, aim_unit (t, aim)));
}

bool
trim_unreachable (struct trim *t, const struct search_finding *found, struct fault *fault)
{
  const char *there = "";
  for (const struct aim *a = t->statement->aims; a; a = a->next) {
    const char *one = opens_range (a) ? NULL : reached_text (t, a, found->x);
    there = one ? joined (t->arena, there, one) : there;
  }
  fault_set_at (fault, MESSAGE_TRIM_UNREACHABLE, t->statement->aims->left->at, trim_aims (t),
                trim_names (t));
  fault_facts (fault, values_text (t, found->x), there);
  return false;
}

bool
trim_unbounded (struct trim *t, struct fault *fault)
{
  const struct statement *s = t->statement;
  fault_set_at (fault, MESSAGE_TRIM_UNBOUNDED, s->least->at,
                arena_format (t->arena, "%s %s", s->optimum == OPTIMUM_MOST ? "most" : "least",
                              node_text (t->arena, s, s->least)), trim_names (t));
  fault_hint (fault, "give a range: trim %s from 0 to 500%s%s so ...",
              name_text (t->arena, s->names->text), *unit_of (t, 0) ? " " : "", unit_of (t, 0));
  return false;
}

void
trim_record (struct trim *t, const struct result *result, const struct answer *rows)
{
  const struct value none = value_number (UNSTATED);
  size_t count = 0;
  for (const struct answer *a = rows; a; a = a->next) {
    count++;
  }
  kept_add (t->session, &(struct asked) { t->first, t->statement, &none, rows, count }, result);
  for (size_t i = 0; i < t->count; i++) {
    const char *unit = unit_of (t, i);
    kept_extend (t->session, result, &(struct step) {
        .name = "moved until what is aimed at holds:",
        .of = arena_string (t->arena, t->moved[i].definition->name), .formula = trim_aims (t),
        .solved = "Newton's steps and halvings, the whole of what is aimed at worked out at each",
        .value = t->x[i], .unit = *unit ? unit : "1", .source = "the aims, as typed",
        STEP_SYMBOLS (SYMBOL ("before", t->before[i], unit)) });
  }
}

/* ---- Notes ---- */

/* What the aim comes to at both ends of the range, where it lies between.  */
static void
tell_reach (struct trim *t, struct result *result)
{
  const struct aim *aim = t->statement->aims;
  double low, high, here, end = t->most[0], far = t->scale[0] * 1e9;
  struct fault unheard;
  fault_init (&unheard, t->arena);
  bool open = !(end < HUGE_VAL);
  if (t->count != 1 || aim->next || !trim_figure (t, aim, t->least, &low, &unheard)
      || !trim_figure (t, aim, open ? &far : &end, &high, &unheard)
      || !trim_figure (t, aim, t->x, &here, &unheard) || !((here - low) * (here - high) < 0)) {
    return;
  }
  const char *name = t->moved[0].definition->name, *unit = aim_unit (t, aim);
  if (open && fabs (high) > 1e6 * fabs (here)) {        /* it goes on with the flow */
    return;
  }
  result_remark (result, MESSAGE_NOTE_TRIM_REACH,
                 arena_format (t->arena, "%s is %s with %s %s",
                               node_text (t->arena, t->statement, aim->left),
                               with_unit (t, low, unit), name,
                               with_unit (t, t->least[0], unit_of (t, 0))),
                 arena_format (t->arena, "%s with %s", with_unit (t, high, unit),
                               open ? arena_format (t->arena, "%s outweighing all else", name)
                               : arena_format (t->arena, "%s %s", name,
                                               with_unit (t, end, unit_of (t, 0)))));
}

/* More sources than this make a line nobody reads.  */
#define SOURCES_TOLD 3

/* Of several quantities: what an aim comes to with each of them alone, where it lies between.  */
static void
tell_sources (struct trim *t, const struct aim *aim, struct result *result)
{
  double *x = ARENA_ARRAY (t->arena, t->count, double), low = HUGE_VAL, high = -HUGE_VAL, here;
  const char *text = "", *unit = aim_unit (t, aim);
  struct fault unheard;
  fault_init (&unheard, t->arena);
  if (t->count < 2 || t->count > SOURCES_TOLD || aim->is != COMPARE_EQUAL
      || aim->left->kind != NODE_OF || !trim_figure (t, aim, t->x, &here, &unheard)) {
    return;
  }
  for (size_t i = 0; i < t->count; i++) {
    double value;
    for (size_t k = 0; k < t->count; k++) {
      x[k] = k == i ? fmax (t->x[k], t->least[k]) : t->least[k];
    }
    if (!(x[i] > 0) || !trim_figure (t, aim, x, &value, &unheard)) {
      return;
    }
    low = fmin (low, value);
    high = fmax (high, value);
    text = joined (t->arena, text, arena_format (t->arena, "%s with %s alone",
                                                 with_unit (t, value, unit),
                                                 t->moved[i].definition->name));
  }
  if ((here - low) * (here - high) < 0) {
    result_remark (result, MESSAGE_NOTE_TRIM_SOURCES,
                   node_text (t->arena, t->statement, aim->left), text);
  }
}

/* "12 to 48.2 kg/h", "5 kg/h", "12 kg/h and up" */
static const char *
range_text (const struct trim *t, const struct search_range *r)
{
  const char *unit = unit_of (t, 0);
  if (!(r->most > r->least)) {
    return with_unit (t, r->least, unit);
  }
  return r->most < HUGE_VAL
         ? arena_format (t->arena, "%s to %s%s", figure_text (t->arena, r->least),
                         with_unit (t, r->most, unit), r->gap ? ", no figure beyond" : "")
         : arena_format (t->arena, "%s and up", with_unit (t, r->least, unit));
}

/* Of one quantity: all values that do, where there is more than the one taken.  */
static void
tell_ranges (struct trim *t, const struct search_finding *found, bool moved,
             struct result *result)
{
  const char *all = "";
  for (size_t i = 0; i < found->range_count; i++) {
    all = joined (t->arena, all, range_text (t, &found->ranges[i]));
  }
  bool one = found->range_count == 1 && !(found->ranges[0].most > found->ranges[0].least);
  if (found->range_count == 0 || one) {
    return;
  }
  bool chosen = moved && t->statement->optimum == OPTIMUM_NONE;
  result_remark (result, chosen ? MESSAGE_TAKEN_TRIM_NEAREST : MESSAGE_NOTE_TRIM_VALUES,
                 t->moved[0].definition->name, all);
}

static void
tell_others (struct trim *t, const struct search_finding *found, struct result *result)
{
  const char *all = "";
  for (size_t i = 0; i < found->other_count; i++) {
    const char *one = values_text (t, found->others[i]);
    all = *all ? arena_format (t->arena, "%s; %s", all, one) : one;
  }
  if (*all) {
    result_remark (result, MESSAGE_TAKEN_TRIM_OTHERS, all, NULL);
  }
}

/* Components that are mixed as they are, without a gas of the user's, into what a stream is.  */
struct pure { const struct trim *t; const char *but, *names; };

static void
add_pure (const struct node *node, void *with)
{
  struct pure *p = with;
  const struct species *species;
  const char *candidates;
  if (node->kind != NODE_OF || node->b->kind != NODE_NAME
      || name_find (p->t->session, node->b->text, strlen (node->b->text))
      || species_find (p->t->session->vocabulary.species, node->b->text,
                       strlen (node->b->text), &species, &candidates) == SPECIES_NONE
      || strcmp (species->key, p->but) == 0 || strstr (p->names, species->key)) {
    return;
  }
  p->names = joined (p->t->arena, p->names, species->key);
}

/* An aim at a trace: what is mixed in as a bare component counts as free of it.  */
#define TRACE_AIMED_AT 0.01

static void
tell_pure (struct trim *t, const struct aim *aim, struct result *result)
{
  const struct node *left = aim->left;
  const struct species *species;
  const char *candidates;
  struct value right;
  struct evaluation ev;
  struct fault unheard;
  fault_init (&unheard, t->arena);
  evaluation_again (&ev, t->first, &unheard);
  if (left->kind != NODE_OF || left->a->kind != NODE_NAME || left->b->kind != NODE_NAME
      || species_find (t->session->vocabulary.species, left->a->text, strlen (left->a->text),
                       &species, &candidates) == SPECIES_NONE
      || !evaluate_quantity (&ev, aim->right, &right) || right.measure.ratio == RATIO_NONE
      || !(right.si < TRACE_AIMED_AT)) {
    return;
  }
  struct definition *d = name_find (t->session, left->b->text, strlen (left->b->text));
  struct pure pure = { t, species->key, "" };
  if (d) {
    tree_visit (d->statement, add_pure, &pure);
  }
  if (*pure.names) {
    result_remark (result, MESSAGE_NOTE_TRIM_PURE, pure.names, species->key);
  }
}

/* What holds the quantities where they are.  */
static void
tell_limits (struct trim *t, const struct search_finding *found, struct result *result)
{
  const char *limits = "";
  size_t i = 0;
  for (const struct aim *a = t->statement->aims; a; a = a->next, i++)
    if (t->one_sided[i] && found->c[i] < AT_ITS_LIMIT) {
      limits = joined (t->arena, limits, aim_text (t, a));
    }
  for (i = 0; i < t->count; i++)
    if (t->x[i] <= t->least[i] || t->x[i] >= t->most[i]) {
      limits = joined (t->arena, limits,
                       arena_format (t->arena, "%s at its %s", t->moved[i].definition->name,
                                     t->x[i] <= t->least[i] ? "least" : "most"));
    }
  if (*limits) {
    result_remark (result, MESSAGE_NOTE_TRIM_LIMIT, limits, NULL);
  }
}

/* Of what was to be least or most: how sure it is.  */
static void
tell_best (struct trim *t, struct result *result)
{
  const struct statement *s = t->statement;
  const char *word = s->optimum == OPTIMUM_MOST ? "most" : "least";
  result_remark (result, t->count == 1 ? MESSAGE_NOTE_TRIM_BEST_OF_ALL : MESSAGE_NOTE_TRIM_BEST,
                 arena_format (t->arena, "%s %s", word, node_text (t->arena, s, s->least)), NULL);
}

void
trim_answer (struct trim *t, struct result *result)
{
  for (size_t i = 0; i < t->count; i++) {
    struct answer *a = result_answer (result);
    a->what = arena_string (t->arena, t->moved[i].definition->name);
    a->named = true;
    a->value = t->x[i];
    a->unit = unit_of (t, i);
    a->basis = arena_format (t->arena, "was %s", figure_text (t->arena, t->before[i]));
  }
}

void
trim_tell (struct trim *t, const struct search_finding *found, bool moved, struct result *result)
{
  size_t equalities = 0;
  for (size_t i = 0; i < t->aim_count; i++) {
    equalities += !t->one_sided[i];
  }
  bool best = t->statement->optimum != OPTIMUM_NONE;
  if (!moved && !best) {
    result_remark (result, MESSAGE_NOTE_TRIM_HOLDS, trim_aims (t), NULL);
  } else {
    result_remark (result, MESSAGE_NOTE_TRIM_MET, trim_aims (t),
                   t->ranged ? "in its range" : "above zero");
  }
  if (best) {
    tell_best (t, result);
  }
  if (!best && moved && t->count > 1 && equalities < t->count) {
    result_remark (result, MESSAGE_TAKEN_TRIM_LITTLE, trim_names (t), NULL);
  }
  for (const struct aim *a = t->statement->aims; a; a = a->next) {
    tell_pure (t, a, result);
    tell_sources (t, a, result);
  }
  tell_ranges (t, found, moved, result);
  tell_others (t, found, result);
  tell_limits (t, found, result);
  tell_reach (t, result);
}
