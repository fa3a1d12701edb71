#include "config.h"
#include "language/parse/parse_private.h"

static const char BOUNDARY[] = "mix NAME: what goes in = what comes out";
static const char KNOWN[] = "known WHAT = FIGURE";
static const char RECOVERY[] = "known CH4 of A = 5 mol%; of what there is of it in another stream:"
                               " known CH4 of A = 98 % of CH4 of B";
static const char LIST[] = "a list stands in brackets: known composition of NAME = (CH4 60, CO2"
                           " rest mol%)";
static const char LIST_OF[] = "a list stands in brackets: known NAME = 850 Nm3/h of (CH4 60, CO2"
                              " rest mol%)";
static const char REACTION[] = "react NAME: ... = ... with CH4 + 2 O2 = CO2 + 2 H2O";
static const char OPENERS[] = "inside a balance a line opens with mix, separate, split, react,"
                              " components, known, absent, per, around or end";
static const char CLAIM[] = "a stated figure is a number with its unit";

struct node *
parse_claim (struct parser *p, bool unitless)
{
  /* claim = [ "-" ] quantity { word } [ "at" state ]  */
  if (!at_number (p)) {
    fail_here (p, MESSAGE_NUMBER_EXPECTED, CLAIM, NULL);
    return NULL;
  }
  struct node *claim = parse_quantity (p, IN_SUM);
  if (claim == NULL)
    return NULL;
  if (claim->unit == NULL && !unitless) {
    fail (p, MESSAGE_UNIT_EXPECTED, claim->at, "write the unit with the figure", NULL);
    return NULL;
  }
  struct place at = p->token.at;
  if (!accept_word (p, "at"))
    return claim;
  struct node *state = parse_state (p, NULL, at);
  return state != NULL ? node_link (p, NODE_AT, claim, state) : NULL;
}

/* NAME { "+" NAME }, names that a stream may have  */
static struct node *
parse_flows (struct parser *p, const char *form)
{
  struct node *first = parse_free_name (p, form), *last = first;
  while (last != NULL && accept (p, TOKEN_PLUS)) {
    last->next = parse_free_name (p, form);
    last = last->next;
  }
  return last != NULL ? first : NULL;
}

/* [ NUMBER ] NAME { "+" [ NUMBER ] NAME }: one side of a reaction, its figures times SIGN behind
   the last of ITEMS.                                                                            */
static bool
parse_side (struct parser *p, struct node ***items, double sign)
{
  do {
    double number = 1;
    const char *figure;
    struct place at = p->token.at;
    if (at_number (p) && !parse_bare_number (p, &number, &figure))
      return false;
    if (!(number > 0))
      return fail (p, MESSAGE_WORD_UNEXPECTED, at, "0", REACTION);
    struct node *name = parse_name (p, REACTION);
    if (name == NULL)
      return false;
    name->number = sign * number;
    **items = name;
    *items = &name->next;
  } while (accept (p, TOKEN_PLUS));
  return true;
}

/* side "=" side { "," side "=" side }  */
static bool
parse_reactions (struct parser *p, struct statement *statement)
{
  struct node **last = &statement->reactions;
  do {
    struct node *reaction = node_new (p, NODE_LIST, p->token.at);
    struct node **items = &reaction->items;
    if (!parse_side (p, &items, -1))
      return false;
    if (!accept (p, TOKEN_EQUALS))
      return fail_unexpected (p, REACTION);
    if (!parse_side (p, &items, 1))
      return false;
    node_close (p, reaction);
    *last = reaction;
    last = &reaction->next;
  } while (accept_comma (p));
  return expect_end (p, REACTION);
}

/* Is an arrow at hand, as others write a balance?  */
static bool
at_arrow (const struct parser *p)
{
  const char *text = p->scan.text + p->token.start;
  const size_t n = p->token.end - p->token.start;
  return p->token.kind == TOKEN_BAD
         && (n == 2 ? memcmp (text, "->", 2) == 0 : n == 3 && memcmp (text, "\u2192", 3) == 0);
}

static bool
parse_boundary (struct parser *p, struct statement *statement)
{
  const char *form = statement->kind == STATEMENT_REACT ? REACTION : BOUNDARY;
  /* NAME ":" NAME { "+" NAME } "=" NAME { "+" NAME } [ "with" reaction { "," reaction } ]  */
  if (!parse_new_name (p, form, &statement->name, &statement->name_at))
    return false;
  if (!accept (p, TOKEN_COLON))
    return fail_unexpected (p, form);
  if ((statement->inlets = parse_flows (p, form)) == NULL)
    return false;
  const char *other_side = "move it to the other side of '='";
  if (!accept (p, TOKEN_EQUALS))
    return at_arrow (p) ? fail (p, MESSAGE_WORD_UNEXPECTED, p->token.at, "->", form)
           : fail_unexpected (p, p->token.kind == TOKEN_MINUS ? other_side : form);
  if ((statement->outlets = parse_flows (p, form)) == NULL)
    return false;
  if (statement->kind == STATEMENT_REACT && at_end (p))
    return fail (p, MESSAGE_BLOCK_LINE, p->first.at, "react", REACTION);
  if (statement->kind == STATEMENT_REACT && accept_word (p, "with"))
    return parse_reactions (p, statement);
  return expect_end (p, p->token.kind == TOKEN_MINUS ? other_side : form);
}

/* "conversion" "of" NAME "in" NAME  */
static struct node *
parse_conversion (struct parser *p)
{
  const char *form = "known conversion of CH4 in NAME = 97 %";
  struct node *what = parse_name (p, form), *of, *in;
  if (what == NULL || !expect_word (p, "of", form) || (of = parse_name (p, form)) == NULL
      || !expect_word (p, "in", form) || (in = parse_name (p, form)) == NULL)
    return NULL;
  return node_link (p, NODE_OF, what, node_link (p, NODE_WITHIN, of, in));
}

/* "extent" "of" [ "reaction" NUMBER "of" ] NAME  */
static struct node *
parse_extent (struct parser *p)
{
  const char *form = "known extent of NAME = 3 kmol/h, or extent of reaction 2 of NAME";
  struct node *what = parse_name (p, form), *of;
  if (what == NULL || !expect_word (p, "of", form))
    return NULL;
  if (token_behind (p).kind == TOKEN_NUMBER && accept_word (p, "reaction")) {
    const char *figure;
    if (!parse_bare_number (p, &what->number, &figure) || !expect_word (p, "of", form))
      return NULL;
  }
  return (of = parse_name (p, form)) != NULL ? node_link (p, NODE_OF, what, of) : NULL;
}

/* "absent" NAME { "," NAME } "of" NAME  */
static bool
parse_absent (struct parser *p, struct statement *statement)
{
  const char *form = "absent H2S, CO2 of NAME";
  const struct node *of;
  if ((statement->names = parse_names (p, form)) == NULL || !expect_word (p, "of", form)
      || (of = parse_name (p, form)) == NULL)
    return false;
  statement->value = of;
  return expect_end (p, form);
}

/* "per" sum  */
static bool
parse_per (struct parser *p, struct statement *statement)
{
  const char *form = "per 100 kmol/h of NAME";
  return (statement->value = parse_sum (p)) != NULL && (at_end (p) || fail_behind_sum (p, form));
}

/* Is `of` the word behind the one at hand?  */
static bool
token_is_of (const struct parser *p)
{
  struct token behind = token_behind (p);
  return token_is (p, &behind, "of");
}

static bool
parse_known (struct parser *p, struct statement *statement)
{
  /* "known" ( sum | conversion | extent ) "=" sum | "known" NAME "without" NAME  */
  bool of = token_is_of (p);
  statement->value = of && at_word (p, "conversion") ? parse_conversion (p)
                     : of && at_word (p, "extent") ? parse_extent (p) : parse_sum (p);
  if (statement->value == NULL)
    return false;
  if (statement->value->kind == NODE_WITHOUT && at_end (p))
    return true;
  if (!accept (p, TOKEN_EQUALS))
    return fail_behind_sum (p, at_word (p, "in") ? RECOVERY : KNOWN);
  statement->claim = parse_sum (p);
  if (statement->claim == NULL || at_end (p))
    return statement->claim != NULL;
  const enum node_kind claim = p->token.kind == TOKEN_NUMBER ? statement->claim->kind : NODE_LIST;
  return fail_behind_sum (p, claim == NODE_NAME ? LIST : claim == NODE_OF ? LIST_OF : KNOWN);
}

static bool
parse_end (struct parser *p, struct statement *statement)
{
  statement->kind = STATEMENT_END;
  token_take (p);
  if (!expect_end (p, "end stands alone"))
    return false;
  p->block = BLOCK_NONE;
  return true;
}

static bool
parse_list_of (struct parser *p, struct statement *statement, const char *form)
{
  return (statement->names = parse_names (p, form)) != NULL && expect_end (p, form);
}

bool
parse_balance_line (struct parser *p, struct statement *statement)
{
  /* line = ( "mix" | "separate" | "split" | "react" ) ... | "components" ... | "known" ...
            | "absent" ... | "per" ... | "around" NAME { "," NAME } | "end"  */
  static const struct { const char *word; enum statement_kind kind; } openers[] = {
    { "mix", STATEMENT_MIX }, { "separate", STATEMENT_SEPARATE }, { "split", STATEMENT_SPLIT },
    { "react", STATEMENT_REACT }, { "components", STATEMENT_COMPONENTS },
    { "known", STATEMENT_KNOWN }, { "absent", STATEMENT_ABSENT }, { "per", STATEMENT_PER },
    { "around", STATEMENT_AROUND }
  };
  if (at_word (p, "end"))
    return parse_end (p, statement);
  statement->kind = STATEMENT_EMPTY;
  for (size_t i = 0; i < sizeof openers / sizeof openers[0]; i++)
    if (accept_word (p, openers[i].word)) {
      statement->kind = openers[i].kind;
      break;
    }
  switch ((int) statement->kind) {
  case STATEMENT_KNOWN: return parse_known (p, statement);
  case STATEMENT_ABSENT: return parse_absent (p, statement);
  case STATEMENT_PER: return parse_per (p, statement);
  case STATEMENT_COMPONENTS: return parse_list_of (p, statement, "components CH4, CO2");
  case STATEMENT_AROUND: return parse_list_of (p, statement, "around NAME, NAME");
  case STATEMENT_EMPTY:
    return fail_here (p, MESSAGE_BLOCK_LINE, token_text (p, &p->token),
                      statement_opened (p, &p->token) != STATEMENT_EMPTY
                      ? "the balance is still open: close it with end" : OPENERS);
  default:
    return parse_boundary (p, statement);
  }
}

bool
parse_sheet_line (struct parser *p, struct statement *statement)
{
  /* [ NAME ":" ] claim | "end"  */
  if (at_word (p, "end"))
    return parse_end (p, statement);
  statement->kind = STATEMENT_FIGURE;
  if (statement_opened (p, &p->token) != STATEMENT_EMPTY)
    return fail (p, MESSAGE_BLOCK_LINE, p->token.at, token_text (p, &p->token),
                 "the sheet is still open: close it with end");
  if (at_name (p) && token_behind (p).kind == TOKEN_COLON) {
    const struct node *label = parse_name (p, CLAIM);
    if (label == NULL)
      return false;
    statement->name = label->text;
    statement->name_at = label->at;
    token_take (p);
  }
  statement->claim = parse_claim (p, false);
  return statement->claim != NULL
         && expect_end (p, at_word (p, "of") ? "what the figures are of stands behind 'sheet'"
                           : CLAIM);
}
