#include "config.h"
#include "language/parse/parse_private.h"

#include <string.h>
#include "gas/species.h"
#include "language/property_names.h"

static const char MULTIPLE[] = "a share is written in %: 5 % of mix; a multiple with *: 2 * feed";

/* Inside brackets the side of an aim is as free as any sum.  */
struct sides { bool left, right; };

static struct sides
open_bracket (struct parser *p)
{
  struct sides outside = { p->aim_left, p->aim_right };
  p->aim_left = p->aim_right = false;
  p->brackets++;
  token_take (p);
  return outside;
}

static bool
close_bracket (struct parser *p, struct sides outside, const char *way_on)
{
  if (!accept (p, TOKEN_CLOSE))
    return fail_behind_sum (p, way_on);
  p->aim_left = outside.left;
  p->aim_right = outside.right;
  p->brackets--;
  return true;
}

/* The bracket belongs to the place of what stands in it.  */
static struct node *
in_brackets (const struct parser *p, struct node *node, struct place from)
{
  from.last = from.line == p->last.line ? p->last.last : from.last;
  node->at = from;
  return node;
}

struct node *
parse_bracket (struct parser *p, enum where where)
{
  /* "(" sum ")"  */
  struct place from = p->token.at;
  struct sides outside = open_bracket (p);
  struct node *sum = parse_sum (p);
  if (sum != NULL && where == IN_STATE && p->token.kind == TOKEN_COMMA) {
    fail (p, MESSAGE_BRACKET_OPEN, p->token.at, NULL, NULL);
    return NULL;
  }
  if (sum == NULL || !close_bracket (p, outside, "a bracket is closed with )"))
    return NULL;
  return in_brackets (p, sum, from);
}

/* "(" ( sum | list ) ")"  */
static struct node *
parse_bracket_or_list (struct parser *p)
{
  struct place from = p->token.at;
  struct sides outside = open_bracket (p);
  struct node *node = at_list (p) ? parse_list (p) : parse_sum (p);
  if (node == NULL || !close_bracket (p, outside, "a bracket is closed with )"))
    return NULL;
  return in_brackets (p, node, from);
}

/* ( "sqrt" | "ln" | "exp" ) "(" sum ")"  */
static struct node *
parse_function (struct parser *p, enum node_kind kind)
{
  struct node *node = node_new (p, kind, p->token.at);
  token_take (p);
  if (p->token.kind != TOKEN_OPEN) {
    fail_here (p, MESSAGE_BRACKET_NEEDED, "sqrt(x), ln(x), exp(x)", NULL);
    return NULL;
  }
  node->a = parse_bracket (p, IN_SUM);
  if (node->a != NULL) {        /* a fault in it points behind the bracket */
    node->a->at.first++;
    node->a->at.last--;
  }
  node_close (p, node);
  return node->a != NULL ? node : NULL;
}

/* NAME, if not null, and the words up to `of`, where they are few: `wobbe index of`; null.  */
static const char *
words_to_of (struct parser *p, const struct node *name)
{
  enum { MOST_WORDS = 3 };
  struct look look = look_here (p);
  const char *text = name != NULL ? name->text : NULL;
  for (int i = 0; i < MOST_WORDS && look.token.kind == TOKEN_WORD; i++) {
    if (token_is (p, &look.token, "of"))
      return i > 0 ? text : NULL;
    const char *word = token_text (p, &look.token);
    text = text != NULL ? arena_format (p->arena, "%s %s", text, word) : word;
    look_next (&look);
  }
  return token_is (p, &look.token, "of") ? text : NULL;
}

/* NAME WORD, where WORD is no unit: `CO2 feed`.  */
static bool
explain_unit_behind (struct parser *p, const struct node *name)
{
  const struct species *found;
  const char *candidates;
  size_t n = strlen (name->text);
  if (p->fault->kind != MESSAGE_UNIT_UNKNOWN)
    return false;
  const char *words = words_to_of (p, name), *meant = words != NULL ? property_meant (words) : NULL;
  if (meant != NULL) {
    fault_hint (p->fault, "did you mean '%s of'?", meant);
    return false;
  }
  bool property = false;
#define PROPERTY(id, name_of_it, unit, help) \
  property = property || strcmp (name->text, name_of_it) == 0;
#include "language/properties.def"
#undef PROPERTY
  if (property || species_find (p->words->species, name->text, n, &found, &candidates)
                  != SPECIES_NONE)
    fault_hint (p->fault, "did you mean '%s of %s'?", name->text, token_text (p, &p->token));
  return false;
}

/* NAME [ UNIT { word } ]; WORDS: with the words.  */
static struct node *
parse_name_or_figure (struct parser *p, bool words, const char *way_on)
{
  struct unit_read read;
  struct node *name = parse_name (p, way_on), *figure;
  if (name == NULL || !opens_unit (p, &p->token))
    return name;
  if (!parse_unit (p, &read)) {
    explain_unit_behind (p, name);
    return NULL;
  }
  figure = node_new (p, NODE_QUANTITY, name->at);
  figure->a = name;
  figure->unit = read.unit;
  figure->unit_text = read.text;
  figure->unit_at = read.at;
  if (words && !parse_unit_words (p, &figure->words))
    return NULL;
  node_close (p, figure);
  return figure;
}

struct node *
parse_value (struct parser *p, const char *way_on)
{
  /* value = [ "-" ] quantity | NAME [ UNIT ] | "(" sum ")"  */
  if (at_number (p))
    return parse_quantity (p, IN_STATE);
  if (p->token.kind == TOKEN_OPEN)
    return parse_bracket (p, IN_SUM);
  if (at_name (p))
    return parse_name_or_figure (p, false, way_on);
  fail_here (p, MESSAGE_NUMBER_EXPECTED, way_on, NULL);
  return NULL;
}

/* Does "by ISO 6976 [":" YEAR]" stand at BEGIN of the text?  Its end, or 0.  */
static size_t
standard_at (const struct parser *p, size_t begin, enum standard *by)
{
  static const struct { const char *text; enum standard by; } ways[] = {
    { "by ISO 6976:2016", STANDARD_2016 }, { "by ISO 6976:1995", STANDARD_1995 },
    { "by ISO 6976", STANDARD_AS_SET }
  };
  for (size_t i = 0; i < sizeof ways / sizeof ways[0]; i++) {
    size_t n = strlen (ways[i].text);
    if (begin + n <= p->scan.n && memcmp (p->scan.text + begin, ways[i].text, n) == 0) {
      *by = ways[i].by;
      return begin + n;
    }
  }
  return 0;
}

/* [ "by ISO 6976" [":" YEAR] ], behind a property or behind what it is of  */
static bool
parse_standard (struct parser *p, struct node *property)
{
  static const char FORM[] = "a property goes by ISO 6976, by ISO 6976:2016 or by ISO 6976:1995";
  if (!at_word (p, "by"))
    return true;
  enum standard by;
  struct place at = p->token.at;
  size_t end = standard_at (p, p->token.start, &by);
  if (end == 0) {
    token_take (p);
    return fail_unexpected (p, FORM);
  }
  while (p->end < end)
    token_take (p);
  at.last = p->last.last;
  if (p->end != end)
    return fail (p, MESSAGE_WORD_UNEXPECTED, at, "by", FORM);
  if (property == NULL)
    return fail (p, MESSAGE_WORD_PLACE, at, "by ISO 6976",
                 "it follows a property: wobbe of raw by ISO 6976");
  property->by = by;
  return true;
}

/* PROPERTY before "of"; *FOUND says whether there was one.  */
static struct node *
parse_property (struct parser *p, bool *found)
{
  enum property property;
  size_t words = property_here (p, &property);
  *found = false;
  if (words == 0)
    return NULL;
  struct look look = look_here (p);
  for (size_t i = 0; i < words; i++)
    look_next (&look);
  enum standard by;
  bool of = token_is (p, &look.token, "of") || standard_at (p, look.token.start, &by) > 0;
  if (!of && words < 2)
    return NULL;                  /* a name like any other */
  *found = true;
  struct node *node = node_new (p, NODE_PROPERTY, p->token.at);
  size_t start = p->token.start;
  take_words (p, words);
  node->property = property;
  node->text = bytes_text (p, start, p->end);
  node_close (p, node);
  if (!parse_standard (p, node))
    return NULL;
  if (at_word (p, "of"))
    return node;
  fail_unexpected (p, arena_format (p->arena, "%s of what?", node->text));
  return NULL;
}

/* What cannot open an operand.  */
static struct node *
fail_head (struct parser *p, bool behind_of)
{
  if (behind_of)
    fail_here (p, MESSAGE_NAME_EXPECTED, "of what?", NULL);
  else if (at_word (p, "in") && p->token.start == p->begin)
    fail_here (p, MESSAGE_SUBJECT_MISSING, NULL, NULL);
  else {
    const char *words = words_to_of (p, NULL);
    const char *meant = words != NULL ? property_meant (words) : NULL;
    fail_unexpected (p, meant == NULL ? NULL
                     : arena_format (p->arena, "did you mean '%s of'?", meant));
  }
  return NULL;
}

/* A word opens the operand.  */
static struct node *
parse_head_word (struct parser *p, bool behind_of)
{
  static const struct { const char *word; enum node_kind kind; } functions[] = {
    { "sqrt", NODE_SQRT }, { "ln", NODE_LN }, { "exp", NODE_EXP }
  };
  bool found;
  struct node *node = parse_property (p, &found);
  if (found)
    return node;
  for (size_t i = 0; i < sizeof functions / sizeof functions[0]; i++)
    if (at_word (p, functions[i].word))
      return parse_function (p, functions[i].kind);
  size_t words = at_word (p, "site") ? words_here (p, "site pressure") : 0;
  if (words > 0 || at_word (p, "that")) {
    node = node_new (p, words > 0 ? NODE_SITE_PRESSURE : NODE_THAT, p->token.at);
    take_words (p, words > 0 ? words : 1);
    node_close (p, node);
    return node;
  }
  return at_name (p) ? parse_name_or_figure (p, true, NULL) : fail_head (p, behind_of);
}

static struct node *
parse_head (struct parser *p, bool behind_of)
{
  /* head = quantity { word } | NAME [ UNIT { word } ] | "site pressure" | FUNCTION "(" sum ")"
            | "(" ( sum | list ) ")"  */
  struct node *node;
  switch (p->token.kind) {
  case TOKEN_NUMBER: case TOKEN_MINUS:
    node = at_number (p) && !(behind_of && p->token.kind == TOKEN_MINUS)
           ? parse_quantity (p, IN_SUM) : fail_head (p, behind_of);
    break;
  case TOKEN_OPEN:
    node = parse_bracket_or_list (p);
    break;
  case TOKEN_TEXT:
    node = parse_name_or_figure (p, true, NULL);
    break;
  case TOKEN_WORD:
    node = parse_head_word (p, behind_of);
    break;
  case TOKEN_END: case TOKEN_SEMICOLON: case TOKEN_SIGN: case TOKEN_PLUS:
  case TOKEN_TIMES: case TOKEN_OVER: case TOKEN_SPREAD: case TOKEN_EQUALS: case TOKEN_COMMA:
  case TOKEN_COLON: case TOKEN_CLOSE: case TOKEN_LESS: case TOKEN_AT_MOST: case TOKEN_AT_LEAST:
  case TOKEN_RANGE: case TOKEN_BAD: default:
    node = fail_head (p, behind_of);
    break;
  }
  if (node != NULL && node->kind == NODE_QUANTITY && node->unit == NULL && at_word (p, "of")) {
    fail (p, MESSAGE_UNIT_EXPECTED, node->at, MULTIPLE, NULL);
    return NULL;
  }
  return node;
}

/* chain, behind `of` or not  */
static struct node *
parse_chain_link (struct parser *p, bool behind_of)
{
  struct node *node = parse_head (p, behind_of);
  if (node == NULL || !accept_word (p, "of"))
    return node != NULL ? parse_changes (p, node) : NULL;
  bool fuel = node->kind == NODE_PROPERTY
              && (node->property == PROPERTY_DRY_F_FACTOR || node->property == PROPERTY_WET_F_FACTOR
                  || node->property == PROPERTY_CARBON_F_FACTOR) && fuel_words (p) > 1;
  struct node *of = !enter (p) ? NULL : fuel ? parse_fuel (p, NULL) : parse_chain_link (p, true);
  p->depth--;
  return of != NULL ? node_link (p, NODE_OF, node, of) : NULL;
}

struct node *
parse_chain (struct parser *p)
{
  /* chain = { ( PROPERTY | head ) "of" } head { change }  */
  return parse_chain_link (p, false);
}

/* Is this the `within` of an aim, LEAST .. MOST behind it, and not that of a trace?  */
static bool
at_range (const struct parser *p)
{
  struct look look = look_here (p);
  look_next (&look);
  if (look.token.kind == TOKEN_NUMBER || look.token.kind == TOKEN_OPEN
      || look.token.kind == TOKEN_MINUS)
    return true;
  look_next (&look);
  return look.token.kind == TOKEN_RANGE || token_is (p, &look.token, "to");
}

/* [ "within" NAME ]  */
static struct node *
parse_within (struct parser *p, struct node *trace)
{
  if (!at_word (p, "within") || (p->aim_left && at_range (p)))
    return trace;
  token_take (p);
  if (!at_name (p)) {
    fail_unexpected (p, "within names the gas that holds the trace; a tolerance is written +/- on"
                     " the stated figure");
    return NULL;
  }
  struct node *gas = parse_name (p, NULL);
  return gas != NULL ? node_link (p, NODE_WITHIN, trace, gas) : NULL;
}

/* Is this the `at` of `at least` and `at most`?  */
static bool
at_comparison (const struct parser *p)
{
  struct token next = token_behind (p);
  return token_is (p, &next, "least") || token_is (p, &next, "most");
}

/* [ "at" state ]  */
static struct node *
parse_at (struct parser *p, struct node *operand)
{
  struct place at = p->token.at;
  if (!at_word (p, "at") || (p->aim_left && at_comparison (p)))
    return operand;
  if (p->aim_right) {
    fail_here (p, MESSAGE_BRACKET_NEEDED, "put the side with its state in brackets", NULL);
    return NULL;
  }
  token_take (p);
  struct node *state = parse_state (p, NULL, at);
  return state != NULL ? node_link (p, NODE_AT, operand, state) : NULL;
}

/* The property an operand asks for; null: it is none.  */
static struct node *
property_of (struct node *operand)
{
  struct node *of = operand->kind == NODE_AT ? operand->a : operand;
  return of->kind == NODE_OF && of->a->kind == NODE_PROPERTY ? of->a : NULL;
}

static struct node *
parse_operand (struct parser *p)
{
  /* operand = [ "-" ] chain [ "within" NAME ] [ standard ] [ "at" state ] [ standard ]  */
  struct place from = p->token.at;
  /* The sign of a figure belongs to it: -10 degC is a point.  */
  bool minus = !at_number (p) && accept (p, TOKEN_MINUS);
  struct node *node = parse_chain (p);
  if (node != NULL)
    node = parse_within (p, node);
  if (node != NULL && !parse_standard (p, property_of (node)))
    return NULL;
  if (node != NULL)
    node = parse_at (p, node);
  if (node != NULL && !parse_standard (p, property_of (node)))
    return NULL;
  if (node == NULL || !minus)
    return node;
  struct node *negative = node_link (p, NODE_NEGATE, node, NULL);
  negative->at.first = from.first;
  return negative;
}

/* How strongly the operators bind; 0: no operator.  */
static int
strength_of (enum token_kind kind, enum node_kind *node)
{
  static const struct { enum token_kind token; enum node_kind node; int strength; } table[] = {
    { TOKEN_PLUS, NODE_ADD, 1 }, { TOKEN_MINUS, NODE_SUBTRACT, 1 },
    { TOKEN_TIMES, NODE_MULTIPLY, 2 }, { TOKEN_OVER, NODE_DIVIDE, 2 }
  };
  for (size_t i = 0; i < sizeof table / sizeof table[0]; i++)
    if (table[i].token == kind) {
      *node = table[i].node;
      return table[i].strength;
    }
  return 0;
}

static struct node *
parse_binary (struct parser *p, int least)
{
  /* sum = product { ( "+" | "-" ) product };  product = operand { ( "*" | "/" ) operand }  */
  enum node_kind kind = NODE_ADD;
  int strength;
  struct node *left = parse_operand (p);
  while (left != NULL && (strength = strength_of (p->token.kind, &kind)) >= least
         && strength > 0) {
    if (!add_link (p))
      return NULL;
    struct place sign = p->token.at;
    token_take (p);
    struct node *right = parse_binary (p, strength + 1);
    left = right != NULL ? node_link (p, kind, left, right) : NULL;
    if (left != NULL)
      left->sign_at = sign;
  }
  return left;
}

struct node *
parse_sum (struct parser *p)
{
  struct node *sum = enter (p) ? parse_binary (p, 1) : NULL;
  p->depth--;
  return sum;
}
