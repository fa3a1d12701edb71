#include "config.h"
#include "language/parse/parse_private.h"

static const char A_TARGET[] =
  "what is counted stands with the unit: in Nm3/h dry, in m3/h at 20 degC, 1 bar(a)";

/* What stands where the unit of a target should.  */
static bool
fail_target (struct parser *p)
{
  const struct token *t = &p->token;
  if (at_end (p))
    return fail_unfinished (p, "in which unit?");
  unsigned bit = word_bit (p, t);
  if (bit != 0) {
    const char *word = token_text (p, t);
    return fail (p, MESSAGE_WORD_PLACE, t->at, word,
                 arena_format (p->arena, "'%s' follows the unit: in Nm3/h %s", word, word));
  }
  return fail_here (p, MESSAGE_TARGET_FORM, t->kind == TOKEN_NUMBER
                    ? "a target is a unit without a number" : A_TARGET, NULL);
}

/* `0.6 in H2O`: inches of water, or the water of something?  */
static bool
explain_target (struct parser *p)
{
  if (p->fault->kind != MESSAGE_UNIT_UNKNOWN)
    return false;
  const char *word = token_text (p, &p->token);
  const char *inches = arena_format (p->arena, "in%s", word);
  if (p->token.kind == TOKEN_WORD && text_is_unit (p, inches))
    fault_hint (p->fault, "did you mean '%s or %s of ...'?", inches, word);
  return false;
}

/* Is the unit one of energy, or of energy per flow, time or gas?  */
static bool
counts_energy (const struct unit *unit)
{
  struct dimension d = unit->dimension;
  return unit->ratio == RATIO_ENERGY || dimension_equal (d, DIMENSION_ENERGY)
         || dimension_equal (d, DIMENSION_POWER)
         || dimension_equal (dimension_times (d, DIMENSION_MASS), DIMENSION_ENERGY)
         || dimension_equal (dimension_times (d, DIMENSION_AMOUNT), DIMENSION_ENERGY)
         || dimension_equal (dimension_times (d, DIMENSION_VOLUME), DIMENSION_ENERGY)
         || dimension_equal (dimension_times (d, DIMENSION_ENERGY), DIMENSION_MASS);
}

/* UNIT { word }  */
static bool
parse_target_unit (struct parser *p, struct target *target, struct unit_read *read)
{
  if (!opens_unit (p, &p->token))
    return fail_target (p);
  if (!parse_unit (p, read))
    return explain_target (p);
  p->in_target = true;
  target->unit = read->unit;
  target->unit_text = read->text;
  target->at = read->at;
  struct parser words = *p;
  if (!parse_unit_words (p, &target->words))
    return false;
  if ((target->words & (WORD_GROSS | WORD_NET)) == 0 || counts_energy (target->unit))
    return true;
  while ((word_bit (&words, &words.token) & (WORD_GROSS | WORD_NET)) == 0)
    token_take (&words);
  return fail (p, MESSAGE_WORD_PLACE, words.token.at, token_text (p, &words.token),
               "gross and net are words for energy: in MW gross");
}

/* A word or a figure, behind the comma of a target without a state; false: something else.  */
static bool
opens_with (const struct parser *p)
{
  return word_bit (p, &p->token) != 0 || at_number (p);
}

/* wet, gross and net, behind the comma or not, say the same of the unit.  */
static bool
accept_unit_word (struct parser *p, struct target *target)
{
  unsigned bit = word_bit (p, &p->token) & (WORD_WET | WORD_GROSS | WORD_NET);
  target->words |= bit;
  if (bit != 0)
    token_take (p);
  return bit != 0;
}

/* ( word | quantity ) as an item; null with FAULT  */
static struct node *
parse_with_item (struct parser *p, unsigned *groups)
{
  const char *opens_with_at = "a state after a target opens with at: in m3/h at 20 degC, 1 bar(a)";
  struct place here = p->token.at;
  struct token behind = token_behind (p);
  unsigned group;
  if (p->token.kind == TOKEN_NUMBER && !opens_unit (p, &behind)) {
    fail_target (p);
    return NULL;
  }
  struct node *item = parse_item (p, &group);
  if (item == NULL)
    return NULL;
  if (item->kind == NODE_QUANTITY && item->unit->sort != UNIT_OXYGEN) {
    fail (p, MESSAGE_STATE_ITEM, here, opens_with_at, NULL);
    return NULL;
  }
  if ((*groups & group) != 0) {
    fail (p, MESSAGE_STATE_TWICE, here, "figures or words of one kind", NULL);
    return NULL;
  }
  *groups |= group;
  return item;
}

/* { "," ( word | quantity ) }; the token at hand opens the first  */
static bool
parse_with (struct parser *p, struct target *target)
{
  struct node *with = node_new (p, NODE_STATE, p->token.at), **link = &with->items;
  unsigned groups = 0;
  struct parser before;
  do {
    if (!accept_unit_word (p, target)) {
      *link = parse_with_item (p, &groups);
      if (*link == NULL)
        return false;
      link = &(*link)->next;
    }
    before = *p;
  } while (accept_comma (p) && opens_with (p));
  *p = before;
  node_close (p, with);
  if (with->items != NULL)
    target->with = with;
  return true;
}

/* ( "at" state | { "," ( word | quantity ) } )  */
static bool
parse_conditions (struct parser *p, struct target *target, const struct unit_read *read)
{
  struct place at = p->token.at;
  if (accept_word (p, "at")) {
    target->state = parse_state (p, read, at);
    return target->state != NULL;
  }
  struct parser before = *p;
  if (accept_comma (p) && opens_with (p))
    return parse_with (p, target);
  *p = before;
  return true;
}

/* "as" "picture" TEXT, which is no label of a target  */
static bool
at_picture (const struct parser *p)
{
  struct parser ahead = *p;
  return accept_word (&ahead, "as") && accept_word (&ahead, "picture")
         && ahead.token.kind == TOKEN_TEXT;
}

/* "burning" FUEL [ "by" NAME ]  */
static bool
parse_burning (struct parser *p, struct target *target)
{
  target->burning = parse_fuel (p, "burning natural-gas, or a gas: burning raw");
  if (target->burning == NULL || !accept_word (p, "by"))
    return target->burning != NULL;
  target->tracer = parse_name (p, "by O2, or by CO2");
  return target->tracer != NULL;
}

/* "with" PROPERTY quantity, of an F factor; else nothing is taken  */
static bool
parse_factor (struct parser *p, struct target *target)
{
  struct parser ahead = *p;
  enum property property;
  size_t words = accept_word (&ahead, "with") ? property_here (&ahead, &property) : 0;
  if (words == 0 || (property != PROPERTY_DRY_F_FACTOR && property != PROPERTY_WET_F_FACTOR
                     && property != PROPERTY_CARBON_F_FACTOR))
    return true;
  token_take (p);
  take_words (p, words);
  if (!at_number (p))
    return fail_here (p, MESSAGE_NUMBER_EXPECTED, "with dry F factor 8710 ft3/MMBtu", NULL);
  struct stated_property *factor = ARENA_NEW (p->arena, struct stated_property);
  factor->property = property;
  factor->quantity = parse_quantity (p, IN_STATE);
  target->factor = factor;
  return factor->quantity != NULL;
}

/* [ "counted as" NAME ] [ "burning" ... | "with" ... ], in either order  */
static bool
parse_counting (struct parser *p, struct target *target)
{
  for (;;) {
    size_t words = target->counted_as == NULL ? words_here (p, "counted as") : 0;
    if (words > 0) {
      take_words (p, words);
      target->counted_as = parse_name (p, "counted as NO2");
      if (target->counted_as == NULL)
        return false;
    }
    else if (target->burning != NULL || target->factor != NULL)
      return true;
    else if (accept_word (p, "burning")) {
      if (!parse_burning (p, target))
        return false;
    }
    else if (!parse_factor (p, target))
      return false;
    else if (target->factor == NULL)
      return true;
  }
}

static struct target *
parse_target (struct parser *p)
{
  /* target = UNIT { word } [ "counted as" NAME ] [ "burning" ... ] ( "at" ... | { "," ... } )
              [ "as" NAME ]  */
  struct target *target = ARENA_NEW (p->arena, struct target);
  struct unit_read read;
  if (!parse_target_unit (p, target, &read))
    return NULL;
  if (!parse_counting (p, target))
    return NULL;
  if (!parse_conditions (p, target, &read))
    return NULL;
  if (!at_picture (p) && accept_word (p, "as")) {
    const struct node *name = parse_name (p, "as NAME");
    if (name == NULL)
      return NULL;
    target->as = name->text;
  }
  return target;
}

/* Is a second unit there without a comma?  */
static bool
check_comma (struct parser *p)
{
  struct unit_read read;
  struct scanner behind;
  if (!unit_at (p, &p->token, &read, &behind) || words_here (p, "counted as") > 0
      || at_word (p, "burning"))
    return true;
  return fail_here (p, MESSAGE_COMMA_MISSING, read.text,
                    "targets are parted by commas");
}

struct target *
parse_targets (struct parser *p, bool one)
{
  /* target { "," target }  */
  struct target *first = NULL, **link = &first;
  do {
    *link = parse_target (p);
    if (*link == NULL || !check_comma (p))
      return NULL;
    link = &(*link)->next;
  } while (!one && accept_comma (p));
  return first;
}
