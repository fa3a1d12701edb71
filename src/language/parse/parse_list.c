#include "config.h"
#include "language/parse/parse_private.h"

/* What the parts of a list have left open so far.  */
struct list_reading {
  struct node *list;              /* its unit: the basis, its words */
  struct node *last;              /* the part read last */
  size_t bare;                    /* parts without a unit, `rest` apart */
  bool rest, closed;              /* a part that takes the rest; the basis was read */
  bool bracket;                   /* the last amount stood in brackets */
};

static const char PART[] = "a part is NAME AMOUNT: CH4 60";

bool
at_list (const struct parser *p)
{
  const char *text = p->scan.text;
  struct token t = p->token;
  if (!at_name (p))
    return false;
  if (t.kind == TOKEN_WORD && t.end + 1 < p->scan.n && (text[t.end] == '/' || text[t.end] == '*'))
    return false;
  struct look look = look_here (p);
  size_t end = t.start + (t.kind == TOKEN_WORD ? name_length (p, &t) : t.end - t.start);
  do
    look_next (&look);
  while (look.token.start < end);
  if (look.token.kind == TOKEN_COMMA || opens_amount (p, &look.token))
    return true;
  if (look.token.kind != TOKEN_MINUS || !look.token.blank)
    return false;
  size_t behind = look.token.end;
  look_next (&look);
  return look.token.kind == TOKEN_NUMBER && look.token.start == behind && p->brackets == 0;
}

/* A share of the whole in the large (mol%, kg/kg, not ppm), or an amount or a mass.  */
static bool
is_basis (const struct unit *unit)
{
  enum { SHARES = 100 };
  if (unit->ratio == RATIO_MOLE || unit->ratio == RATIO_MASS || unit->ratio == RATIO_VOLUME)
    return unit->sort == UNIT_SCALE && unit->factor * SHARES > 0.999;
  return dimension_equal (unit->dimension, DIMENSION_MASS)
         || dimension_equal (unit->dimension, DIMENSION_AMOUNT);
}

static bool
fail_basis (struct parser *p, const struct unit *unit, struct place at)
{
  fail (p, MESSAGE_BASIS_MISSING, at, NULL, NULL);
  if (unit != NULL && unit->ratio == RATIO_PLAIN)
    fault_hint (p->fault, "per cent of what: mol%%, mass%% or vol%%");
  return false;
}

const char *
part_expected (struct parser *p)
{
  /* 1-butene: the scanner reads a number.  */
  const char *text = p->scan.text;
  size_t end = p->token.end;
  if (p->token.kind != TOKEN_NUMBER || end + 1 >= p->scan.n || text[end] != '-'
      || !byte_is_letter (text[end + 1]))
    return PART;
  while (end < p->scan.n && strchr (" \t\n,;", text[end]) == NULL)
    end++;
  return arena_format (p->arena, "a name that begins with a digit stands in quotes: \"%s\"",
                       bytes_text (p, p->token.start, end));
}

/* A word stands where the amount should: `CH4 x`, or a name of several words nobody knows.  */
static bool
fail_amount_word (struct parser *p, const struct node *name)
{
  struct token next = token_behind (p);
  if (p->token.kind == TOKEN_SIGN
      && text_is_unit (p, arena_format (p->arena, "%s%%", name->text))) {
    fail_here (p, MESSAGE_AMOUNT_MISSING, name->text, NULL);
    fault_hint (p->fault, "no comma stands before the basis: CH4 60, CO2 40 %s%%", name->text);
    return false;
  }
  if (!opens_amount (p, &next) || p->token.kind != TOKEN_WORD)
    return fail_here (p, MESSAGE_AMOUNT_MISSING, name->text, NULL);
  const char *word = token_text (p, &p->token);
  return fail_here (p, MESSAGE_WORD_UNEXPECTED, word,
                    arena_format (p->arena, "no component is called '%s %s'; other names of"
                                  " several words stand in quotes", name->text, word));
}

static bool
fail_amount (struct parser *p, const struct node *name)
{
  switch (p->token.kind) {
  case TOKEN_END: case TOKEN_SEMICOLON:
    return fail_unfinished (p, arena_format (p->arena, "how much %s?", name->text));
  case TOKEN_EQUALS: case TOKEN_COLON:
    return fail_unexpected (p, "a part is NAME AMOUNT, without '=' or ':'");
  case TOKEN_AT_MOST:
    return fail_unexpected (p, "below the limit is written <5");
  case TOKEN_MINUS:
    return fail (p, MESSAGE_AMOUNT_NEGATIVE, p->token.at, name->text, NULL);
  case TOKEN_WORD:
    return fail_amount_word (p, name);
  case TOKEN_NUMBER: case TOKEN_TEXT: case TOKEN_SIGN: case TOKEN_PLUS: case TOKEN_TIMES:
  case TOKEN_OVER: case TOKEN_SPREAD: case TOKEN_COMMA: case TOKEN_OPEN: case TOKEN_CLOSE:
  case TOKEN_LESS: case TOKEN_AT_LEAST: case TOKEN_RANGE: case TOKEN_BAD: default:
    return fail_here (p, MESSAGE_AMOUNT_MISSING, name->text, NULL);
  }
}

/* amount = [ "<" ] quantity | "rest" | "(" sum ")", its unit apart  */
static bool
parse_amount (struct parser *p, struct list_reading *reading, const struct node *name)
{
  struct node *part = reading->last;
  reading->bracket = p->token.kind == TOKEN_OPEN;
  if (at_word (p, "rest")) {
    if (reading->rest)
      return fail_here (p, MESSAGE_REST_TWICE, NULL, NULL);
    part->rest = reading->rest = true;
    token_take (p);
    return true;
  }
  part->below = accept (p, TOKEN_LESS);
  if (part->below && p->token.kind != TOKEN_NUMBER)
    return fail_here (p, MESSAGE_NUMBER_EXPECTED, "below the limit is written <5 ppm", NULL);
  if (p->token.kind == TOKEN_NUMBER)
    part->a = parse_quantity (p, IN_LIST);
  else if (reading->bracket)
    part->a = parse_bracket (p, IN_LIST);
  else
    return fail_amount (p, name);
  return part->a != NULL;
}

/* Does the next part begin here without a comma, `CH4 60 CO2 40`?  */
static bool
at_part (struct parser *p)
{
  struct unit_read read;
  struct scanner behind;
  if (!at_name (p))
    return false;
  struct look look = look_here (p);
  look_next (&look);
  return opens_amount (p, &look.token)
         && (p->token.kind == TOKEN_TEXT || !unit_at (p, &p->token, &read, &behind));
}

/* The node that has the unit of the part read last, null if it has none.  */
static struct node *
holder_of (const struct list_reading *reading)
{
  struct node *part = reading->last, *a = part->a;
  if (part->unit != NULL)
    return part;
  return a != NULL && a->kind == NODE_QUANTITY && a->unit != NULL ? a : NULL;
}

/* The amount's own unit, where it did not stand behind the number at once.  */
static bool
parse_own_unit (struct parser *p, struct list_reading *reading)
{
  struct unit_read read;
  struct node *part = reading->last;
  if (part->rest || holder_of (reading) != NULL || !opens_unit (p, &p->token))
    return true;
  if (!parse_unit (p, &read))
    return false;
  struct node *holder = reading->bracket ? part : part->a;
  holder->unit = read.unit;
  holder->unit_text = read.text;
  holder->unit_at = read.at;
  return true;
}

/* `40 dry mol%`, `mol% dry gas`: behind dry and wet nothing follows in a list.  */
static bool
check_behind_words (struct parser *p)
{
  struct unit_read read;
  struct scanner behind;
  if (unit_at (p, &p->token, &read, &behind))
    return fail_here (p, MESSAGE_WORD_PLACE, read.text,
                      arena_format (p->arena, "dry and wet follow the basis: did you mean"
                                    " '%s dry'?", read.text));
  if (p->token.kind != TOKEN_WORD || at_word (p, "and"))
    return true;
  return fail_here (p, MESSAGE_WORD_PLACE, token_text (p, &p->token),
                    "dry and wet follow the basis: mol% dry");
}

/* [ UNIT ] { word } behind the last amount: the basis of all parts that have none  */
static bool
parse_basis (struct parser *p, struct list_reading *reading)
{
  struct unit_read read;
  struct node *list = reading->list;
  if (opens_unit (p, &p->token)) {
    if (!parse_unit (p, &read))
      return false;
    if (!is_basis (read.unit))
      return fail_basis (p, read.unit, read.at);
    list->unit = read.unit;
    list->unit_text = read.text;
    list->unit_at = read.at;
    reading->closed = true;
  }
  if (!parse_unit_words (p, &list->words))
    return false;
  if (list->words != 0)
    reading->closed = true;
  return list->words == 0 || check_behind_words (p);
}

static bool
parse_part (struct parser *p, struct list_reading *reading)
{
  /* NAME amount [ UNIT ] { word }  */
  struct node *name = parse_name (p, part_expected (p));
  if (name == NULL)
    return false;
  struct node *part = node_new (p, NODE_PART, name->at);
  part->text = name->text;
  part->quoted = name->quoted;
  if (reading->last == NULL)
    reading->list->items = part;
  else
    reading->last->next = part;
  reading->last = part;
  if (!parse_amount (p, reading, name))
    return false;
  if (at_part (p))
    return fail_here (p, MESSAGE_COMMA_MISSING, token_text (p, &p->token),
                      "parts are parted by commas");
  if (!parse_own_unit (p, reading))
    return false;
  node_close (p, part);
  const struct node *holder = holder_of (reading);
  if (holder != NULL && holder->unit->ratio == RATIO_PLAIN)
    return fail_basis (p, holder->unit, holder->unit_at);
  reading->bare += holder == NULL && !part->rest;
  return parse_basis (p, reading);
}

/* The last amount's unit is the basis of the parts before it that have none.  */
static void
settle_basis (struct list_reading *reading)
{
  struct node *list = reading->list, *holder = holder_of (reading);
  if (list->unit != NULL || holder == NULL || !is_basis (holder->unit)
      || (reading->bracket && holder != reading->last)
      || (reading->bare == 0 && list->words == 0))
    return;
  list->unit = holder->unit;
  list->unit_text = holder->unit_text;
  list->unit_at = holder->unit_at;
  holder->unit = NULL;
  holder->unit_text = NULL;
  holder->unit_at = (struct place) { 0, 0, 0 };
}

struct node *
parse_list (struct parser *p)
{
  /* list = NAME amount { "," NAME amount } [ UNIT ] { word }  */
  struct list_reading reading = { .list = node_new (p, NODE_LIST, p->token.at) };
  do
    if (!parse_part (p, &reading))
      return NULL;
  while (!reading.closed && accept_comma (p));
  settle_basis (&reading);
  struct node *list = reading.list;
  if (list->unit == NULL && reading.bare > 0) {
    fail_basis (p, NULL, (struct place) { p->last.line, p->last.last + 1, p->last.last + 1 });
    return NULL;
  }
  list->text = list->unit_text;
  node_close (p, list);
  return list;
}
