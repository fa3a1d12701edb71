#include "config.h"
#include "language/parse/parse_private.h"

/* What a state has once at most.  */
enum group { GROUP_NONE = 0, GROUP_TEMPERATURE = 1, GROUP_PRESSURE = 2, GROUP_MOISTURE = 4,
             GROUP_OXYGEN = 8, GROUP_Z = 16, GROUP_MODEL = 32 };

static const char KINDS[] = "a state is a temperature, a pressure, a moisture, Z or the name of"
                            " reference conditions";
static const char WHAT_SHARE[] = "say of what: 60 %RH, 3 %O2 or water 3 mol%";

static const char *
group_name (unsigned group)
{
  return group == GROUP_TEMPERATURE ? "temperatures" : group == GROUP_PRESSURE ? "pressures"
         : group == GROUP_MOISTURE ? "moistures" : group == GROUP_OXYGEN ? "oxygen contents"
         : group == GROUP_Z ? "compression factors" : "words for the gas model";
}

static struct node *
fail_item (struct parser *p, struct place at, const char *way_on)
{
  fail (p, MESSAGE_STATE_ITEM, at, way_on, NULL);
  return NULL;
}

/* What a figure with a unit is in a state; null, with FAULT, if it is nothing.  */
static struct node *
classify (struct parser *p, struct node *figure, unsigned *group)
{
  const struct unit *unit = figure->unit;
  if (unit_is_temperature (unit))
    *group = GROUP_TEMPERATURE;
  else if (unit->sort == UNIT_HUMIDITY)
    *group = GROUP_MOISTURE;
  else if (unit->sort == UNIT_OXYGEN)
    *group = GROUP_OXYGEN;
  else if (unit_is_pressure (unit))
    *group = GROUP_PRESSURE;
  else if (dimension_equal (unit->dimension, DIMENSION_LENGTH))
    return fail_item (p, figure->at, "an altitude is a setting: set site altitude 1200 m");
  else
    return fail_item (p, figure->at, unit->ratio != RATIO_NONE ? WHAT_SHARE : KINDS);
  return figure;
}

/* [ "-" ] quantity  */
static struct node *
parse_figure (struct parser *p, unsigned *group)
{
  struct node *figure = parse_quantity (p, IN_STATE);
  if (figure == NULL)
    return NULL;
  if (figure->unit != NULL)
    return classify (p, figure, group);
  fail (p, MESSAGE_UNIT_EXPECTED, figure->at, "a state is written with units", NULL);
  return NULL;
}

/* NAME | NAME UNIT  */
static struct node *
parse_named (struct parser *p, unsigned *group)
{
  bool humidity = at_word (p, "RH");
  struct token behind = token_behind (p);
  if (behind.kind == TOKEN_NUMBER && p->token.kind == TOKEN_WORD)
    return fail_item (p, p->token.at, humidity ? "write 60 %RH" : KINDS);
  struct node *value = parse_value (p, KINDS);
  return value != NULL && value->kind == NODE_QUANTITY ? classify (p, value, group) : value;
}

/* Z and water and dew point: may VALUE stand behind?  */
static const char *
objection (enum node_kind item, const struct node *value)
{
  const struct unit *unit = value->unit;
  if (value->kind != NODE_QUANTITY)
    return NULL;                  /* a name or a sum: told when it is computed */
  if (item == NODE_ITEM_Z)
    return unit != NULL ? "Z has no unit" : NULL;
  if (item == NODE_ITEM_DEW_POINT)
    return unit == NULL || !unit_is_temperature (unit) ? "a dew point is a temperature" : NULL;
  if (unit == NULL || unit->ratio == RATIO_PLAIN)
    return WHAT_SHARE;
  return unit->ratio == RATIO_MOLE || unit->ratio == RATIO_MASS || unit->ratio == RATIO_VOLUME
         || dimension_equal (unit->dimension, DIMENSION_DENSITY)
         ? NULL : "water is a share (mol%, ppm) or a mass per volume (mg/Nm3)";
}

static struct node *
parse_labelled (struct parser *p, enum node_kind kind, size_t words)
{
  /* ( "Z" | "water" | "dew point" ) [ "=" ] value  */
  struct node *item = node_new (p, kind, p->token.at);
  take_words (p, words);
  accept (p, TOKEN_EQUALS);
  item->a = parse_value (p, kind == NODE_ITEM_Z ? "Z 0.882" : kind == NODE_ITEM_WATER
                         ? "water 3.1 mol%" : "dew point 12 degC");
  if (item->a == NULL)
    return NULL;
  const char *wrong = objection (kind, item->a);
  if (wrong != NULL)
    return fail_item (p, item->at, wrong);
  node_close (p, item);
  return item;
}

/* The item of one word at hand, or null: there is none.  */
static struct node *
parse_word_item (struct parser *p, unsigned *group)
{
  static const struct { const char *word; enum node_kind kind; unsigned group; } words[] = {
    { "saturated", NODE_ITEM_SATURATED, GROUP_MOISTURE }, { "dry", NODE_ITEM_DRY, GROUP_MOISTURE },
    { "ideal", NODE_ITEM_IDEAL, GROUP_MODEL }, { "real", NODE_ITEM_REAL, GROUP_MODEL },
  };
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (at_word (p, words[i].word)) {
      *group = words[i].group;
      struct node *item = node_new (p, words[i].kind, p->token.at);
      token_take (p);
      return item;
    }
  return NULL;
}

/* A word opens the item.  */
static struct node *
parse_word (struct parser *p, unsigned *group)
{
  struct node *item = parse_word_item (p, group);
  if (item != NULL)
    return item;
  size_t words;
  if (at_word (p, "Z")) {
    *group = GROUP_Z;
    return parse_labelled (p, NODE_ITEM_Z, 1);
  }
  if (at_word (p, "water")) {
    *group = GROUP_MOISTURE;
    return parse_labelled (p, NODE_ITEM_WATER, 1);
  }
  if ((words = words_here (p, "dew point")) > 0) {
    *group = GROUP_MOISTURE;
    return parse_labelled (p, NODE_ITEM_DEW_POINT, words);
  }
  if ((words = words_here (p, "site pressure")) > 0) {
    item = node_new (p, NODE_SITE_PRESSURE, p->token.at);
    *group = GROUP_PRESSURE;
    take_words (p, words);
    node_close (p, item);
    return item;
  }
  if (at_name (p))
    return parse_named (p, group);
  const char *wet = "say how wet: saturated, 60 %RH, dew point 12 degC, water 3 mol%";
  fail_here (p, MESSAGE_STATE_ITEM, at_word (p, "wet") ? wet : KINDS, NULL);
  return NULL;
}

struct node *
parse_item (struct parser *p, unsigned *group)
{
  /* item = NAME | [ "-" ] quantity | NAME UNIT | "(" sum ")" | WORD [ [ "=" ] value ]  */
  *group = GROUP_NONE;
  if (at_number (p))
    return parse_figure (p, group);
  if (p->token.kind == TOKEN_OPEN)
    return parse_bracket (p, IN_STATE);
  if (p->token.kind == TOKEN_TEXT && at_name (p))
    return parse_named (p, group);
  if (p->token.kind == TOKEN_WORD)
    return parse_word (p, group);
  fail_here (p, MESSAGE_STATE_ITEM, KINDS, NULL);
  return NULL;
}

/* Behind the state of a target a comma ends the state where a unit follows: is T, behind the
   comma, an item?  */
static bool
opens_item (const struct parser *p)
{
  static const char *const words[] = { "saturated", "dry", "wet", "ideal", "real", "Z", "water" };
  struct token behind;
  if (at_number (p) || p->token.kind == TOKEN_OPEN || words_here (p, "dew point") > 0
      || words_here (p, "site pressure") > 0)
    return true;
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (at_word (p, words[i]))
      return true;
  if (!at_name (p))
    return false;
  behind = token_behind (p);
  if (!behind.blank || !opens_unit (p, &behind))
    return false;
  bool percent = behind.kind == TOKEN_SIGN && p->scan.text[behind.start] == '%';
  return !(percent && (at_word (p, "mol") || at_word (p, "mass") || at_word (p, "vol")));
}

/* Takes the comma behind an item if the state goes on behind it.  */
static bool
state_goes_on (struct parser *p, bool in_target)
{
  struct parser before = *p;
  if (!accept_comma (p))
    return false;
  if (!in_target || at_end (p) || opens_item (p))
    return true;
  *p = before;
  return false;
}

/* A unit with conditions of its own may be counted at an oxygen content, not at a state.  */
static bool
check_item_of_target (struct parser *p, const struct unit_read *target, struct place at,
                      const struct node *item, unsigned group)
{
  if (target == NULL || target->unit->family == FAMILY_NONE || group == GROUP_OXYGEN
      || item->kind == NODE_ITEM_DRY)
    return true;
  return fail (p, MESSAGE_TARGET_STATE, at, target->text, NULL);
}

/* Two figures without a comma between them.  */
static bool
check_comma (struct parser *p)
{
  const struct token *t = &p->token;
  unsigned bit = word_bit (p, t);
  bool item = t->kind == TOKEN_NUMBER || t->kind == TOKEN_TEXT || at_word (p, "saturated")
              || (bit & (WORD_DRY | WORD_WET | WORD_REAL | WORD_IDEAL)) != 0;
  if (!item)
    return true;
  return fail_here (p, MESSAGE_COMMA_MISSING, token_text (p, t),
                    "figures of a state are parted by commas");
}

struct node *
parse_state (struct parser *p, const struct unit_read *target, struct place at)
{
  /* state = item { "," item }  */
  struct node *state = node_new (p, NODE_STATE, p->token.at), **link = &state->items;
  unsigned groups = 0, group;
  do {
    struct place here = p->token.at;
    if (at_end (p)) {
      fail_unfinished (p, KINDS);
      return NULL;
    }
    struct node *item = parse_item (p, &group);
    if (item == NULL || !check_item_of_target (p, target, at, item, group))
      return NULL;
    if ((groups & group) != 0) {
      fail (p, MESSAGE_STATE_TWICE, here, group_name (group), NULL);
      return NULL;
    }
    groups |= group;
    *link = item;
    link = &item->next;
    if (!check_comma (p))
      return NULL;
  } while (state_goes_on (p, target != NULL));
  node_close (p, state);
  return state;
}
