#include "config.h"
#include "language/parse/parse_private.h"

static const char FORM[] = "gas NAME = list, or gas NAME from \"file\"";

static const char FROM_FORM[] = "gas NAME from \"file\" sample \"ID\" mol% dry";

/* [ "decimal" ( "comma" | "point" ) ]  */
static bool
parse_decimal (struct parser *p, struct node *list)
{
  if (!accept_word (p, "decimal"))
    return true;
  if (accept_word (p, "comma"))
    list->figure = ",";
  else if (accept_word (p, "point"))
    list->figure = ".";
  else
    return fail_here (p, MESSAGE_WORD_UNEXPECTED, token_text (p, &p->token),
                      "decimal comma, or decimal point");
  return true;
}

bool
parse_from_file (struct parser *p, struct statement *statement, bool one)
{
  /* TEXT [ "sample" TEXT ] [ UNIT ] { word } [ "decimal" ( "comma" | "point" ) ] { change }  */
  struct unit_read read;
  statement->text_at = p->token.at;
  if (!expect_text (p, &statement->text, "a file name stands in double quotes"))
    return false;
  if (one && accept_word (p, "sample")
      && !expect_text (p, &statement->sample, "a sample name stands in double quotes"))
    return false;
  struct node *list = node_new (p, NODE_LIST, statement->text_at);
  if (!parse_decimal (p, list))
    return false;
  if (opens_unit (p, &p->token) && !at_word (p, "decimal")) {
    if (!parse_unit (p, &read))
      return false;
    if (read.unit->ratio == RATIO_PLAIN)
      return fail (p, MESSAGE_BASIS_MISSING, read.at, NULL, NULL);
    list->unit = read.unit;
    list->text = list->unit_text = read.text;
    list->unit_at = read.at;
  }
  if (!parse_unit_words (p, &list->words) || !parse_decimal (p, list))
    return false;
  node_close (p, list);
  statement->from_file = list;
  statement->value = parse_changes (p, list);
  return statement->value != NULL && expect_end (p, FROM_FORM);
}

/* Is the property a bare number?  */
static bool
property_is_bare (enum property property)
{
  static const char *const units[] = {
#define PROPERTY(name, text, unit, help) unit,
#include "language/properties.def"
#undef PROPERTY
  };
  return units[property][0] == '\0';
}

/* "with" PROPERTY quantity { "," PROPERTY quantity }  */
static bool
parse_with (struct parser *p, struct statement *statement)
{
  const char *way_on = "gas NAME with molar mass 19.8 g/mol";
  struct stated_property *first = NULL, **link = &first;
  do {
    enum property property;
    size_t words = property_here (p, &property);
    if (words == 0)
      return fail_here (p, MESSAGE_NAME_EXPECTED, way_on, NULL);
    take_words (p, words);
    if (!at_number (p))
      return fail_here (p, MESSAGE_NUMBER_EXPECTED, way_on, NULL);
    struct node *quantity = parse_quantity (p, IN_SUM);
    if (quantity == NULL)
      return false;
    if (quantity->unit == NULL && !property_is_bare (property))
      return fail (p, MESSAGE_UNIT_EXPECTED, quantity->at, way_on, NULL);
    struct stated_property *stated = ARENA_NEW (p->arena, struct stated_property);
    stated->property = property;
    stated->quantity = quantity;
    *link = stated;
    link = &stated->next;
  } while (accept_comma (p));
  statement->stated = first;
  return expect_end (p, way_on);
}

/* The first words are no list: a name and what cannot follow it, `carbon dioxyde 39.1`.  */
static bool
check_name_and_word (struct parser *p)
{
  if (!at_name (p) || p->token.kind != TOKEN_WORD)
    return true;
  size_t end = p->token.start + name_length (p, &p->token);
  struct look look = look_here (p);
  do
    look_next (&look);
  while (look.token.start < end);
  if (look.token.kind != TOKEN_WORD || !opens_unit (p, &look.token))
    return true;
  struct node *name = parse_name (p, NULL);
  if (name == NULL)
    return false;
  struct token next = token_behind (p);
  const char *word = token_text (p, &p->token);
  if (token_is_end (&next) || opens_amount (p, &next))
    return fail_here (p, MESSAGE_WORD_UNEXPECTED, word,
                      arena_format (p->arena, "no component is called '%s %s'; other names of"
                                    " several words stand in quotes", name->text, word));
  return fail_here (p, MESSAGE_AMOUNT_MISSING, name->text, NULL);
}

/* What follows a chain that should have ended.  */
static bool
fail_behind_chain (struct parser *p)
{
  enum token_kind kind = p->token.kind;
  if (kind == TOKEN_PLUS || kind == TOKEN_MINUS)
    return fail_unexpected (p, "gases have no amounts to add: gas g = raw 60, air 40 mol%");
  if (kind == TOKEN_EQUALS || kind == TOKEN_COLON)
    return fail_unexpected (p, "a part is NAME AMOUNT, without '=' or ':'");
  return fail_behind_sum (p, FORM);
}

bool
parse_gas (struct parser *p, struct statement *statement)
{
  /* "gas" NAME ( "=" ( list | chain ) | "from" ... | "with" ... )  */
  if (!parse_new_name (p, FORM, &statement->name, &statement->name_at))
    return false;
  if (accept_word (p, "from"))
    return parse_from_file (p, statement, true);
  if (accept_word (p, "with"))
    return parse_with (p, statement);
  if (!expect_equals (p, FORM))
    return false;
  if (at_number (p))
    return fail_here (p, MESSAGE_NAME_EXPECTED, part_expected (p), NULL);
  if (at_list (p)) {
    statement->value = parse_list (p);
    return statement->value != NULL && expect_end (p, FORM);
  }
  if (!check_name_and_word (p))
    return false;
  statement->value = parse_chain (p);
  return statement->value != NULL && (at_end (p) || fail_behind_chain (p));
}
