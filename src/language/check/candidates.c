#include "config.h"
#include "language/check/trial.h"

#include <math.h>
#include <string.h>
#include "gas/moisture.h"
#include "gas/reference.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

/* The other readings that can be tried on a check: one candidate for each rule and side, for rules
   of reference conditions one for each of them and each family of volumes that was leaned on.   */

struct gathering {
  struct check *check;
  const struct readings *readings;
  struct candidate *at;
  size_t count, room;
};

/* ---- Sentences ---- */

static const char *
side_text (unsigned sides)
{
  return sides == 1u << SIDE_STATED ? "the stated figure" : "the computed figure";
}

static const char *
filled (struct arena *arena, const char *pattern, const char *one, const char *two,
        const char *three)
{
  const char *const facts[MESSAGE_FACTS] = { one, two, three, NULL };
  struct text text;
  text_init (&text);
  message_write (&text, pattern, facts);
  const char *said = arena_string (arena, text.bytes);
  text_clear (&text);
  return said;
}

/* "scf", or which of the two where both sides have it; "9.92 m3" or "m3/h" where it is open.  */
static const char *
volume_text (const struct check *check, const struct candidate *c)
{
  struct arena *arena = check->work;
  if (c->family == FAMILY_NONE) {
    return c->sides == 1u << SIDE_STATED ? check->stated : "the volume";
  }
  const char *name = reference_family_name (c->family);
  unsigned bit = touch_family (c->family);
  return check->touched[SIDE_COMPUTED] & check->touched[SIDE_STATED] & bit
           ? arena_format (arena, "%s of %s", name, side_text (c->sides)) : name;
}

/* ---- Reference conditions ---- */

static struct candidate *
add (struct gathering *g)
{
  if (g->count == g->room) {
    size_t room = g->room ? 2 * g->room : 64;
    struct candidate *more = ARENA_ARRAY (g->check->work, room, struct candidate);
    if (g->count) {
      memcpy (more, g->at, g->count * sizeof *more);
    }
    g->at = more;
    g->room = room;
  }
  struct candidate *c = &g->at[g->count++];
  *c = (struct candidate) { .figure = UNSTATED };
  return c;
}

static bool
same (double a, double b)
{
  return fabs (a - b) <= 1e-9 * fabs (b);
}

/* One that stands for the same conditions already, or null.  */
static struct candidate *
same_conditions (struct gathering *g, const struct candidate *new)
{
  for (size_t i = 0; i < g->count; i++) {
    struct candidate *c = &g->at[i];
    if (c->rule && c->rule->change == READING_REFERENCE && c->sides == new->sides
        && c->family == new->family && same (c->at.T, new->at.T) && same (c->at.p, new->at.p)) {
      return c;
    }
  }
  return NULL;
}

enum { NAMES_SHOWN = 2 };

static void
add_name (struct arena *arena, struct candidate *c, const char *name)
{
  c->name_count++;
  if (c->name_count <= NAMES_SHOWN) {
    c->names = c->names ? arena_format (arena, "%s, %s", c->names, name) : name;
  }
}

/* Pressure of the dry gas: what its moisture leaves of that of the reference.  */
static bool
dry_pressure (struct arena *arena, const struct reference *r, struct conditions *at)
{
  struct fault fault;
  enum water_phase phase;
  double psat;
  fault_init (&fault, arena);
  *at = r->at;
  if (r->at.humidity > 0) {
    if (!water_pressure (r->at.T, &psat, &phase, &fault)) {
      return false;
    }
    at->p -= r->at.humidity * psat;
  }
  at->humidity = UNSTATED;
  return at->p > 0;
}

/* Is the reference among the first four a rule names?  */
static bool
is_common (const struct reading_rule *rule, const char *name)
{
  const char *at = strstr (rule->words, name);
  size_t commas = 0;
  for (const char *s = rule->words; at && s < at; s++) {
    commas += *s == ',';
  }
  return at && strcmp (rule->words, "all") != 0 && commas < 5;
}

static void
add_reference (struct gathering *g, const struct reading_rule *rule, unsigned sides,
               enum reference_family family, const struct reference *r)
{
  struct check *check = g->check;
  struct candidate new = { .rule = rule, .sides = sides, .family = family, .cost = rule->cost,
                           .figure = UNSTATED };
  int side = sides == 1u << SIDE_STATED ? SIDE_STATED : SIDE_COMPUTED;
  struct conditions base = check->base[side].settings.family[family].at;
  if (!dry_pressure (check->work, r, &new.at)) {
    return;
  }
  struct candidate *old = same_conditions (g, &new);
  if (old) {
    if (old->rule == rule || !reading_names (old->rule, r->name)) {
      add_name (check->work, old, r->name);
    }
    return;
  }
  bool open = family == FAMILY_NONE;
  if (!open && same (new.at.T, base.T) && same (new.at.p, base.p)) {
    return;
  }
  bool moist = r->at.humidity > 0;
  new.text = arena_format (check->work, "%s, %s%s%s", r->temperature, r->pressure,
                           moist ? ", " : "", moist ? r->moisture : "");
  new.fills = open;
  new.common = is_common (rule, r->name);
  add_name (check->work, &new, r->name);
  *add (g) = new;
}

/* Those a rule names in its order; then, for "all", those of the table in theirs.  */
static void
add_family (struct gathering *g, const struct reading_rule *rule, unsigned sides,
            enum reference_family family)
{
  const struct reference_table *table = g->check->session->references;
  if (strcmp (rule->words, "all") == 0) {
    for (size_t i = 0; i < reference_table_size (table); i++) {
      add_reference (g, rule, sides, family, reference_table_at (table, i));
    }
    return;
  }
  for (const char *at = rule->words; *at; ) {
    size_t n = strcspn (at, ", ");
    const struct reference *found;
    const char *candidates;
    if (reference_find (table, at, n, &found, &candidates) == REFERENCE_ONE) {
      add_reference (g, rule, sides, family, found);
    }
    at += n;
    at += strspn (at, ", ");
  }
}

static void
add_references (struct gathering *g, const struct reading_rule *rule, unsigned sides)
{
  int side = sides == 1u << SIDE_STATED ? SIDE_STATED : SIDE_COMPUTED;
  for (int f = FAMILY_NONE; f < FAMILY_COUNT; f++) {
    bool wanted = f == FAMILY_NONE ? g->check->open[side]
                                   : (g->check->touched[side]
                                      & touch_family ((enum reference_family) f)) != 0;
    if (wanted) {
      add_family (g, rule, sides, (enum reference_family) f);
    }
  }
}

/* ---- Everything else ---- */

struct search { const char *word; bool found; };

static void
look_for_unit (const struct node *node, void *with)
{
  struct search *search = with;
  search->found |= node->unit && strstr (node->unit->spelling, search->word);
}

/* Does a unit with the word FROM in it stand on the side?  */
static bool
has_unit (const struct check *check, const char *from, int side)
{
  struct search search = { from, false };
  struct statement s = { .value = side == SIDE_COMPUTED ? check->question.value
                                                        : check->target.state };
  if (s.value) {
    tree_visit (&s, look_for_unit, &search);
  }
  if (side == SIDE_STATED) {
    return search.found || (check->target.unit && strstr (check->target.unit->spelling, from));
  }
  for (size_t i = 0; !search.found && i < check->used_count; i++) {
    tree_visit (check->used[i]->statement, look_for_unit, &search);
  }
  return search.found;
}

/* Does the component have the element another is counted by?  */
static bool
counts (const struct check *check, const char *as)
{
  const struct value *v = &check->value;
  const char *now = v->species.count == 0 ? "" : v->species.counted_as ? v->species.counted_as
                                                                        : v->species.at[0]->key;
  char element[] = { as[0], '\0' };
  return (v->kind == VALUE_PART || v->kind == VALUE_TRACE)
         && (v->species.count == 1 || v->species.counted_as)
         && species_atoms (v->species.at[0], element) > 0
         && (check->target.counted_as || strcmp (now, as) != 0);
}

/* Can the rule move anything on these sides?  */
static bool
applies (const struct check *check, const struct reading_rule *rule, unsigned sides)
{
  int side = sides == 1u << SIDE_STATED ? SIDE_STATED : SIDE_COMPUTED;
  unsigned touched = check->touched[side];
  if (sides == (1u << SIDES) - 1) {
    touched = check->touched[SIDE_COMPUTED] | check->touched[SIDE_STATED];
  }
  switch ((int) rule->change) {
  case READING_UNIT: return has_unit (check, rule->from, side);
  case READING_BAROMETER: return (touched & TOUCH_SITE) != 0;
  case READING_COMBUSTION:
  case READING_CALORIFIC_1995:
  case READING_CALORIFIC_2016: return (touched & TOUCH_COMBUSTION) != 0;
  case READING_OXYGEN:
  case READING_OXYGEN_WET:
  case READING_OXYGEN_OUT: return (touched & TOUCH_OXYGEN) != 0;
  case READING_Z_IN: return check->base[side].settings.model == GAS_MODEL_IDEAL;
  case READING_VOLUMES_REAL: return (touched & TOUCH_VOLUMES) != 0;
  case READING_COUNTED: return counts (check, rule->words);
  default: return true;
  }
}

static void
add_rule (struct gathering *g, const struct reading_rule *rule, unsigned sides)
{
  struct arena *arena = g->check->work;
  if (rule->change == READING_REFERENCE) {
    add_references (g, rule, sides);
    return;
  }
  if (!applies (g->check, rule, sides)) {
    return;
  }
  struct candidate *c = add (g);
  c->rule = rule;
  c->sides = sides;
  c->cost = rule->cost;
  if (rule->change == READING_COUNTED) {
    struct node *name = ARENA_NEW (arena, struct node);
    *name = (struct node) { .kind = NODE_NAME, .text = rule->words,
                            .at = g->check->question.value->at };
    c->counted = name;
  }
  c->said = reading_sentence (arena, rule, side_text (sides));
}

/* The state of what the volume is of, where the search began from reference conditions.  */
static void
add_own_state (struct gathering *g)
{
  const struct value *v = &g->check->value;
  bool has = v->kind == VALUE_STREAM || (v->kind == VALUE_PART && v->of_stream)
               ? !isnan (v->stream.T) && !isnan (v->stream.p) : !isnan (v->T) && !isnan (v->p);
  if (g->check->open[SIDE_STATED] && has) {
    struct candidate *c = add (g);
    c->sides = 1u << SIDE_STATED;
    c->own = c->fills = true;
    c->cost = isnan (g->check->base[SIDE_STATED].settings.family[FAMILY_NONE].at.T) ? 0 : 1;
    c->said = arena_format (g->check->work, "%s at the state of what it is of",
                            g->check->stated);
  }
}

static const char *
names_text (struct arena *arena, const struct candidate *c)
{
  return c->name_count <= NAMES_SHOWN
           ? c->names
           : arena_format (arena, "%s and %zu more", c->names, c->name_count - NAMES_SHOWN);
}

struct candidate *
candidates_of (struct check *check, const struct readings *readings, size_t *count)
{
  struct gathering g = { check, readings, NULL, 0, 0 };
  add_own_state (&g);
  for (int cost = 1; cost <= 3; cost++)
    for (size_t i = 0; i < readings->count; i++) {
      const struct reading_rule *rule = &readings->at[i];
      if (rule->cost != cost) {
        continue;
      }
      if (rule->side == READING_BOTH) {
        add_rule (&g, rule, (1u << SIDES) - 1);
        continue;
      }
      for (unsigned side = 1; side <= 2; side <<= 1)
        if (rule->side & side) {
          add_rule (&g, rule, side);
        }
    }
  for (size_t i = 0; i < g.count; i++) {
    struct candidate *c = &g.at[i];
    if (c->rule && c->rule->change == READING_REFERENCE) {
      const char *conditions = arena_format (check->work, "%s (%s)", c->text,
                                             names_text (check->work, c));
      c->said = filled (check->work, c->rule->said, "", volume_text (check, c), conditions);
    }
  }
  *count = g.count;
  return g.at;
}
