#include "config.h"
#include "language/commands/trim.h"

#include <math.h>
#include <string.h>
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/number.h"
#include "support/text.h"

/* Miss that rounding the quantities to twelve digits may leave.  */
#define TRIM_ROUNDED 1e-11

/* ---- What is moved ---- */

static bool
wrong (struct trim *t, const struct node *name, const char *what)
{
  return fault_set_at (t->first->fault, MESSAGE_KIND_WRONG, name->at,
                       arena_format (t->arena, "'%s' %s", name->text, what), NULL);
}

/* VALUE in the unit of the moved quantity I; false with the fault in FIRST.  */
static bool
in_its_unit (struct trim *t, const struct node *node, size_t i, double *x)
{
  struct value value;
  const struct unit *unit = t->moved[i].value.unit;
  struct figures figures = { NULL, 0, 0 };
  struct subject subject = { "", node->at };
  struct target target = { .unit = unit, .unit_text = unit ? unit->spelling : "", .at = node->at };
  if (!evaluate_quantity (t->first, node, &value)
      || !convert_value (t->first, &value, unit ? &target : NULL, &subject, &figures)) {
    fault_place (t->first->fault, node->at);
    return false;
  }
  *x = figures.at[0].value;
  return true;
}

/* The range of a quantity: as typed, else from zero, or from the least there is on a scale that
   goes below its zero (degC, bar(g)).                                                           */
static bool
add_range (struct trim *t, const struct node *name, size_t i)
{
  const struct unit *unit = t->moved[i].value.unit;
  bool scaled = unit && (unit->sort == UNIT_POINT || unit->sort == UNIT_GAUGE);
  t->least[i] = scaled ? unit_from_si (unit, unit_to_si (unit, t->before[i]) - t->si[i]) : 0;
  t->most[i] = HUGE_VAL;
  if (!name->a) {
    return true;
  }
  t->ranged = true;
  if (!in_its_unit (t, name->a, i, &t->least[i]) || !in_its_unit (t, name->b, i, &t->most[i])) {
    return false;
  }
  return t->least[i] < t->most[i]
         || fault_set_at (t->first->fault, MESSAGE_RANGE, name->b->at,
                          "a range goes from its lower end to its upper one", NULL);
}

static bool
add_quantity (struct trim *t, const struct node *name, size_t i)
{
  struct definition *d = name_find (t->session, name->text, strlen (name->text));
  if (!d) {
    return name_unknown (t->first, name);
  }
  bool typed = d->kind == NAME_QUANTITY && d->statement->value->kind == NODE_QUANTITY
               && !d->statement->value->a && !d->statement->targets;
  if (!typed) {
    wrong (t, name, "is no figure that can be moved");
    fault_hint (t->first->fault, "let %s = 100 kg/h", name->text);
    return false;
  }
  for (size_t k = 0; k < i; k++)
    if (t->moved[k].definition == d) {
      return wrong (t, name, "stands twice");
    }
  const struct value *value = definition_value (t->first, d, name->at);
  if (!value) {
    return false;
  }
  t->moved[i] = (struct stand_in) { d, *value, NULL };
  t->before[i] = t->x[i] = d->statement->value->number;
  t->si[i] = value->si;
  if (!add_range (t, name, i)) {
    return false;
  }
  double range = t->most[i] < HUGE_VAL ? t->most[i] - t->least[i] : 1;
  t->scale[i] = fabs (t->x[i]) > 1e-6 * range ? fabs (t->x[i]) : range;
  t->x[i] = fmin (fmax (t->x[i], t->least[i]), t->most[i]);
  return true;
}

/* ---- Figures ---- */

/* SI from a figure in the unit of quantity I.  What its unit counts from, the barometer for
   bar(g), is told by what the figure was worked out to before.                                  */
static double
si_of (const struct trim *t, size_t i, double x)
{
  const struct unit *unit = t->moved[i].value.unit;
  if (!unit) {
    return x;
  }
  double moved = unit_to_si (unit, x) - unit_to_si (unit, t->before[i]);
  return t->si[i] + (unit->sort == UNIT_VACUUM ? -moved : moved);
}

static void
evaluation_at (struct trim *t, const double x[], struct evaluation *ev, struct fault *fault)
{
  for (size_t i = 0; i < t->count; i++) {
    t->moved[i].value.si = si_of (t, i, x[i]);
  }
  evaluation_again (ev, t->first, fault);
  ev->stand_ins = t->moved;
  ev->stand_in_count = t->count;
}

/* Both sides of an aim, in the unit of the right one.  */
static bool
sides_of (struct evaluation *ev, const struct aim *aim, double *value, double *aimed)
{
  struct value left, right;
  struct figures figures = { NULL, 0, 0 };
  struct subject subject = { "", aim->left->at };
  if (!evaluate_quantity (ev, aim->right, &right) || !evaluate (ev, aim->left, NULL, &left)) {
    return false;
  }
  struct target target = { .unit = right.unit, .unit_text = right.unit ? right.unit->spelling : "",
                           .words = right.words, .at = aim->right->at };
  *aimed = right.unit ? unit_from_si (right.unit, right.si) : right.si;
  if (right.unit && (right.unit->sort == UNIT_GAUGE || right.unit->sort == UNIT_VACUUM)) {
    if (!convert_value (ev, &right, &target, &subject, &figures)) {
      return false;
    }
    *aimed = figures.at[0].value;
    figures.count = 0;
  }
  if (!right.unit && left.kind == VALUE_RATIO) {
    left = value_number (left.moles);
  }
  if (!convert_value (ev, &left, right.unit ? &target : NULL, &subject, &figures)) {
    return false;
  }
  if (figures.count != 1) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, aim->left->at, "an aim is one figure",
                         NULL);
  }
  *value = figures.at[0].value;
  return true;
}

bool
trim_figure (struct trim *t, const struct aim *aim, const double x[], double *value,
             struct fault *fault)
{
  struct evaluation ev;
  double aimed;
  evaluation_at (t, x, &ev, fault);
  return sides_of (&ev, aim, value, &aimed);
}

static bool
objective_of (struct evaluation *ev, const struct node *least, double *value)
{
  struct value v;
  struct figures figures = { NULL, 0, 0 };
  struct subject subject = { "", least->at };
  if (!evaluate (ev, least, NULL, &v)) {
    return false;
  }
  if (v.kind == VALUE_RATIO) {
    v = value_number (v.moles);
  }
  if (!convert_value (ev, &v, NULL, &subject, &figures)) {
    return false;
  }
  if (figures.count != 1) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, least->at,
                         "what is least or most is one figure", NULL);
  }
  *value = figures.at[0].value;
  return true;
}

/* The misses of all aims, as shares of what is aimed at, and the objective.  */
static bool
figures_at (struct trim *t, const double x[], double c[], double *objective, struct fault *fault)
{
  struct evaluation ev;
  size_t i = 0;
  evaluation_at (t, x, &ev, fault);
  for (const struct aim *aim = t->statement->aims; aim; aim = aim->next, i++) {
    double value, aimed;
    if (!sides_of (&ev, aim, &value, &aimed)) {
      fault_place (fault, aim->left->at);
      return false;
    }
    c[i] = (value - aimed) / (fabs (aimed) > 0 ? fabs (aimed) : 1);
    c[i] = aim->is == COMPARE_AT_MOST ? -c[i] : c[i];
  }
  if (t->statement->optimum == OPTIMUM_NONE) {
    return true;
  }
  if (!objective_of (&ev, t->statement->least, objective)) {
    fault_place (fault, t->statement->least->at);
    return false;
  }
  *objective = t->statement->optimum == OPTIMUM_MOST ? -*objective : *objective;
  return true;
}

/* What the search asks for.  Nothing goes on once the user has had enough.  */
static bool
asked (void *context, const double x[], double c[], double *objective)
{
  struct trim *t = context;
  struct fault unheard;
  bool (*interrupted) (void) = t->session->options.interrupted;
  t->interrupted = t->interrupted || (interrupted && interrupted ());
  fault_init (&unheard, t->arena);
  return !t->interrupted && figures_at (t, x, c, objective, &unheard);
}

/* ---- The outcome ---- */

static double
to_twelve_digits (double value)
{
  struct text text;
  double rounded = value;
  bool too_large;
  text_init (&text);
  number_write (&text, fabs (value), 12);
  if (!number_read (text.bytes, text.length, &rounded, &too_large)) {
    rounded = fabs (value);
  }
  text_clear (&text);
  return copysign (rounded, value);
}

/* The quantities to twelve digits, if the aims are met as well so: 900, not 899.9999999999938.  */
static void
drop_last_digits (struct trim *t, const double found[])
{
  double *x = ARENA_ARRAY (t->arena, t->count, double), objective;
  double *c = ARENA_ARRAY (t->arena, t->aim_count, double);
  for (size_t k = 0; k < t->count; k++) {
    t->x[k] = found[k];
    x[k] = fmin (fmax (to_twelve_digits (found[k]), t->least[k]), t->most[k]);
  }
  if (!asked (t, x, c, &objective)) {
    return;
  }
  for (size_t i = 0; i < t->aim_count; i++)
    if (search_miss (t->one_sided[i], c[i]) > TRIM_ROUNDED) {
      return;
    }
  memcpy (t->x, x, t->count * sizeof *x);
}

static bool
search (struct trim *t, struct search_finding *found, struct fault *fault)
{
  const struct statement *s = t->statement;
  struct search search = { .n = t->count, .m = t->aim_count, .least = t->least, .most = t->most,
                           .scale = t->scale, .one_sided = t->one_sided,
                           .has_objective = s->optimum != OPTIMUM_NONE, .at = asked,
                           .context = t, .arena = t->arena };
  double objective, *c = ARENA_ARRAY (t->arena, t->aim_count, double);
  if (!figures_at (t, t->x, c, &objective, fault)) {
    return false;
  }
  enum search_end end = t->count == 1 ? search_line (&search, t->x[0], found)
                                      : search_settle (&search, t->x, found);
  if (t->interrupted) {
    return fault_set_at (fault, MESSAGE_INTERRUPTED, s->at, NULL, NULL);
  }
  switch (end) {
  case SEARCH_FOUND: break;
  case SEARCH_SINGULAR:
    return fault_set_at (fault, MESSAGE_TRIM_SINGULAR, s->names->at, trim_names (t),
                         trim_aims (t));
  case SEARCH_UNBOUNDED: return trim_unbounded (t, fault);
  case SEARCH_UNREACHABLE: case SEARCH_UNDEFINED: default:
    return trim_unreachable (t, found, fault);
  }
  drop_last_digits (t, found->x);
  return true;
}

/* Unit, words and uncertainty of a figure as they were typed.  */
static void
add_as_typed (struct text *source, const struct node *typed)
{
  static const struct { unsigned bit; const char *word; } words[] = {
    { WORD_DRY, " dry" }, { WORD_WET, " wet" }, { WORD_REAL, " real" }, { WORD_IDEAL, " ideal" },
    { WORD_GROSS, " gross" }, { WORD_NET, " net" }
  };
  const char *unit = typed->unit ? typed->unit->spelling : "";
  text_add_format (source, "%s%s", *unit ? " " : "", unit);
  const struct spread *s = typed->spread;
  if (s) {
    const char *own = s->relative ? "%" : s->unit ? s->unit->spelling : unit;
    text_add_format (source, " +/- %s%s%s", s->figure, *own ? " " : "", own);
    if (s->kind == SPREAD_LIMITS) {
      text_add (source, " (limits)");
    } else if (s->kind == SPREAD_EXPANDED) {
      text_add (source, " (k=");
      number_write_exact (source, s->k);
      text_add_char (source, ')');
    }
  }
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++) {
    text_add (source, typed->words & words[i].bit ? words[i].word : "");
  }
}

static bool
keep (struct trim *t, struct result *result, struct fault *fault)
{
  const struct node *name = t->statement->names;
  for (size_t i = 0; i < t->count; i++, name = name->next) {
    const struct definition *d = t->moved[i].definition;
    struct text source;
    struct statement from = { .kind = STATEMENT_LET, .name = d->name, .name_at = name->at,
                              .source = "", .at = t->statement->at };
    text_init (&source);
    text_add_format (&source, "let %s = ", name_text (t->arena, name->text));
    number_write_exact (&source, t->x[i]);
    add_as_typed (&source, d->statement->value);
    bool done = name_define (t->session, &from, source.bytes, NAME_QUANTITY, result, fault);
    text_clear (&source);
    if (!done) {
      return false;
    }
    /* From here on the name means another definition.  */
    t->moved[i].definition = name_find (t->session, name->text, strlen (name->text));
  }
  return true;
}

/* Asks for LEFT, so that what was aimed at stands there with its basis.  */
static bool
ask_for (struct trim *t, const struct node *left, const struct target *target,
         struct result *result, struct fault *fault)
{
  struct target *targets = target ? ARENA_NEW (t->arena, struct target) : NULL;
  struct statement question = { .kind = STATEMENT_ASK, .source = t->statement->source,
                                .typed = t->statement->typed,
                                .at = t->statement->at, .value = left, .targets = targets };
  struct answer **behind = result->last_answer;
  if (target) {
    *targets = *target;
  }
  if (!ask (t->session, &question, result, fault)) {
    return false;
  }
  for (struct answer *a = *behind; a; a = a->next) {
    a->named = true;
  }
  return true;
}

/* Is it one of the quantities, which stand there already?  */
static bool
is_moved (const struct trim *t, const struct node *left)
{
  for (size_t i = 0; i < t->count; i++)
    if (left->kind == NODE_NAME && strcmp (left->text, t->moved[i].definition->name) == 0) {
      return true;
    }
  return false;
}

/* Every figure aimed at, once, in the unit it was aimed at in; and what was to be best.  */
static bool
ask_for_aims (struct trim *t, struct result *result, struct fault *fault)
{
  const struct statement *s = t->statement;
  const struct node *before = NULL;
  for (const struct aim *aim = s->aims; aim; before = aim->left, aim = aim->next) {
    struct value right;
    struct evaluation ev;
    evaluation_init (&ev, t->session, aim->right->kind == NODE_QUANTITY ? NULL : result, fault);
    if (aim->left == before || is_moved (t, aim->left)) {
      continue;
    }
    if (!evaluate_quantity (&ev, aim->right, &right)) {
      return false;
    }
    struct target target = { .unit = right.unit, .at = aim->right->at, .words = right.words,
                             .unit_text = right.unit ? right.unit->spelling : "" };
    if (!ask_for (t, aim->left, right.unit ? &target : NULL, result, fault)) {
      return false;
    }
  }
  bool apart = s->optimum != OPTIMUM_NONE && s->least->kind != NODE_NAME;
  return !apart || ask_for (t, s->least, NULL, result, fault);
}

/* Equalities alone: as many as quantities, a choice of one point.  */
static bool
is_determined (struct trim *t, struct fault *fault)
{
  const struct statement *s = t->statement;
  size_t equalities = 0, i = 0;
  for (const struct aim *a = s->aims; a; a = a->next, i++) {
    if (a->right->kind == NODE_QUANTITY && a->right->spread) {
      fault_set_at (fault, MESSAGE_KIND_WRONG, a->right->at, "an aim is met or not: it has no +/-",
                    NULL);
      fault_hint (fault, "a tolerance is a range: %s within LOWEST .. HIGHEST",
                  node_text (t->arena, s, a->left));
      return false;
    }
    t->one_sided[i] = a->is != COMPARE_EQUAL;
    equalities += a->is == COMPARE_EQUAL;
  }
  bool free = s->optimum != OPTIMUM_NONE || equalities < t->aim_count;
  if (free ? equalities <= t->count : equalities == t->count) {
    return true;
  }
  fault_set_at (fault, MESSAGE_KIND_WRONG, s->names->at,
                arena_format (t->arena, "as many aims as quantities: here %zu for %zu",
                              equalities, t->count), NULL);
  if (equalities < t->count) {
    fault_hint (fault, "or say which of the values that do: with least %s",
                name_text (t->arena, s->names->text));
  }
  return false;
}

static void
make_room (struct trim *t)
{
  for (const struct node *n = t->statement->names; n; n = n->next) {
    t->count++;
  }
  for (const struct aim *a = t->statement->aims; a; a = a->next) {
    t->aim_count++;
  }
  t->moved = ARENA_ARRAY (t->arena, t->count, struct stand_in);
  t->one_sided = ARENA_ARRAY (t->arena, t->aim_count, bool);
  double **figures[] = { &t->x, &t->before, &t->si, &t->scale, &t->least, &t->most };
  for (size_t i = 0; i < sizeof figures / sizeof figures[0]; i++) {
    *figures[i] = ARENA_ARRAY (t->arena, t->count, double);
  }
}

bool
command_trim (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  struct evaluation first;
  struct search_finding found;
  struct trim t = { .session = session, .statement = s, .arena = result->arena, .first = &first };
  size_t i = 0;
  evaluation_init (&first, session, NULL, fault);
  make_room (&t);
  if (!is_determined (&t, fault)) {
    return false;
  }
  for (const struct node *n = s->names; n; n = n->next, i++)
    if (!add_quantity (&t, n, i)) {
      return false;
    }
  if (!search (&t, &found, fault)) {
    return false;
  }
  bool moved = memcmp (t.x, t.before, t.count * sizeof *t.x) != 0;
  undo_group_open (session);
  struct answer **rows = result->last_answer;
  trim_answer (&t, result);
  if ((moved && !keep (&t, result, fault)) || !ask_for_aims (&t, result, fault)) {
    undo_group_drop (session);
    return false;
  }
  undo_group_close (session);
  trim_tell (&t, &found, moved, result);
  trim_record (&t, result, *rows);
  return true;
}
