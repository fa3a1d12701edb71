#include "config.h"
#include "language/parse/parse_private.h"

#include "support/number.h"

bool
at_number (const struct parser *p)
{
  if (p->token.kind == TOKEN_NUMBER)
    return true;
  return p->token.kind == TOKEN_MINUS && token_behind (p).kind == TOKEN_NUMBER;
}

bool
parse_bare_number (struct parser *p, double *value, const char **figure)
{
  const struct token *t = &p->token;
  const char *text = p->scan.text + t->start;
  bool too_large = false;
  if (t->kind != TOKEN_NUMBER)
    return fail_here (p, MESSAGE_NUMBER_EXPECTED, "a figure is a number with its unit", NULL);
  if (!number_read (text, t->end - t->start, value, &too_large))
    return fail (p, too_large ? MESSAGE_NUMBER_RANGE : MESSAGE_NUMBER_FORM, t->at, NULL, NULL);
  *figure = arena_copy (p->arena, text, t->end - t->start);
  token_take (p);
  return true;
}

/* NUMBER, with no other behind it  */
static bool
parse_number (struct parser *p, double *value, const char **figure)
{
  enum { GROUP = 3 };             /* digits that a thousands mark parts off */
  const struct token *t = &p->token;
  size_t start = t->start, end = t->end;
  if (!parse_bare_number (p, value, figure))
    return false;
  if (p->token.kind != TOKEN_NUMBER)
    return true;
  fail (p, MESSAGE_NUMBER_BLANK, p->token.at, NULL, NULL);
  if (t->end - t->start == GROUP)
    fault_hint (p->fault, "digits are grouped with _ : did you mean '%s_%s'?",
                bytes_text (p, start, end), token_text (p, t));
  return false;
}

bool
parse_unit_words (struct parser *p, unsigned *words)
{
  static const unsigned pairs[] = { WORD_DRY | WORD_WET, WORD_REAL | WORD_IDEAL,
                                    WORD_GROSS | WORD_NET };
  for (unsigned bit; (bit = word_bit (p, &p->token)) != 0; token_take (p)) {
    if (bit == WORD_DRY && name_length (p, &p->token) > strlen ("dry"))
      return true;
    for (size_t i = 0; i < sizeof pairs / sizeof pairs[0]; i++)
      if ((bit & pairs[i]) != 0 && ((*words | bit) & pairs[i]) == pairs[i])
        return fail (p, MESSAGE_WORD_PLACE, p->token.at, token_text (p, &p->token),
                     "dry and wet, real and ideal, gross and net exclude each other");
    *words |= bit;
  }
  return true;
}

/* [ "(" ( "k" "=" NUMBER | "limits" ) ")" ], behind a spread  */
static bool
parse_spread_kind (struct parser *p, struct spread *spread)
{
  struct token next = token_behind (p);
  const char *figure;
  if (p->token.kind != TOKEN_OPEN || (!token_is (p, &next, "k") && !token_is (p, &next, "limits")))
    return true;
  token_take (p);
  p->brackets++;
  if (accept_word (p, "limits"))
    spread->kind = SPREAD_LIMITS;
  else {
    token_take (p);
    spread->kind = SPREAD_EXPANDED;
    if (!expect_equals (p, "(k=2)") || !parse_number (p, &spread->k, &figure))
      return false;
    if (!(spread->k > 0))
      return fail (p, MESSAGE_RANGE, p->last, "the factor k is not positive", NULL);
  }
  if (!accept (p, TOKEN_CLOSE))
    return fail_unexpected (p, "the bracket is (k=2) or (limits)");
  p->brackets--;
  return true;
}

/* May a spread in UNIT stand behind a figure in FIGURE's unit?  */
static bool
spread_fits (const struct unit *figure, const struct unit *unit)
{
  return dimension_equal (figure->dimension, unit->dimension)
         && figure->family == unit->family && figure->family_power == unit->family_power
         && (figure->ratio == unit->ratio || figure->sort == UNIT_HUMIDITY);
}

/* [ UNIT ] behind the number of a spread, where the figure has a unit of its own  */
static bool
parse_spread_unit (struct parser *p, const struct node *figure, struct spread *spread)
{
  struct unit_read read;
  if (!parse_unit (p, &read))
    return false;
  if (read.unit->ratio == RATIO_PLAIN) {
    if (figure->unit->sort == UNIT_POINT)
      return fail (p, MESSAGE_SPREAD_UNIT, read.at, "a percentage of a temperature has no meaning",
                   "write it in K");
    spread->relative = true;
    return true;
  }
  spread->unit = read.unit;
  if (spread_fits (figure->unit, read.unit))
    return true;
  return fail (p, MESSAGE_SPREAD_UNIT, read.at,
               arena_format (p->arena, "the spread of a value in %s is not in %s",
                             figure->unit_text, read.text),
               arena_format (p->arena, "it is in %s or in %%", figure->unit_text));
}

/* [ UNIT ] behind figure and spread, that belongs to both  */
static bool
parse_common_unit (struct parser *p, enum where where, struct node *figure,
                   struct spread *spread)
{
  struct unit_read read;
  if (!parse_unit (p, &read))
    return false;
  bool percent = read.unit->ratio == RATIO_PLAIN;
  if (percent && where == IN_LIST) {
    spread->relative = true;
    return true;
  }
  figure->unit = read.unit;
  figure->unit_text = read.text;
  figure->unit_at = read.at;
  if (percent && opens_unit (p, &p->token))
    return fail_here (p, MESSAGE_SPREAD_PLACE, NULL, NULL);
  return true;
}

/* Does the word at hand, behind an amount, open the next part: `CH4 60 CO2 40`?  */
static bool
opens_part (struct parser *p)
{
  struct unit_read read;
  struct scanner behind;
  struct token next = token_behind (p);
  return p->token.kind == TOKEN_WORD && opens_amount (p, &next)
         && !unit_at (p, &p->token, &read, &behind);
}

static bool
at_unit (struct parser *p, enum where where)
{
  return opens_unit (p, &p->token) && !(where == IN_LIST && opens_part (p));
}

/* "±" NUMBER [ UNIT ] [ "(" ... ")" ]  */
static bool
parse_spread (struct parser *p, enum where where, struct node *figure)
{
  struct spread *spread = ARENA_NEW (p->arena, struct spread);
  spread->at = p->token.at;
  token_take (p);
  if (!parse_number (p, &spread->value, &spread->figure))
    return false;
  /* Of a part `CO2 40 mol% ± 1 mol%` the second unit is the spread's as well.  */
  if (at_unit (p, where)
      && !(figure->unit != NULL ? parse_spread_unit (p, figure, spread)
           : parse_common_unit (p, where, figure, spread)))
    return false;
  if (!parse_spread_kind (p, spread))
    return false;
  if (spread->at.line == p->last.line)
    spread->at.last = p->last.last;
  figure->spread = spread;
  return true;
}

struct node *
parse_quantity (struct parser *p, enum where where)
{
  /* [ "-" ] NUMBER [ UNIT ] [ "±" NUMBER [ UNIT ] [ "(" ... ")" ] ] { word }  */
  struct node *node = node_new (p, NODE_QUANTITY, p->token.at);
  struct unit_read read;
  bool negative = accept (p, TOKEN_MINUS);
  if (!parse_number (p, &node->number, &node->figure))
    return NULL;
  if (negative) {
    node->number = -node->number;
    node->figure = arena_format (p->arena, "-%s", node->figure);
  }
  if (at_unit (p, where)) {
    if (!parse_unit (p, &read))
      return NULL;
    node->unit = read.unit;
    node->unit_text = read.text;
    node->unit_at = read.at;
  }
  if (where == IN_SUM && node->unit != NULL && !parse_unit_words (p, &node->words))
    return NULL;
  if (p->token.kind == TOKEN_SPREAD && !parse_spread (p, where, node))
    return NULL;
  if (where == IN_SUM && node->unit != NULL && !parse_unit_words (p, &node->words))
    return NULL;
  node_close (p, node);
  return node;
}
