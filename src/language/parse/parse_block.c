#include "config.h"
#include "language/parse/parse_private.h"

static const char BOUNDARY[] = "mix NAME: what goes in = what comes out";
static const char KNOWN[] = "known WHAT = FIGURE";
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

/* NAME { "+" NAME }  */
static struct node *
parse_flows (struct parser *p)
{
  struct node *first = parse_name (p, BOUNDARY), *last = first;
  while (last != NULL && accept (p, TOKEN_PLUS)) {
    last->next = parse_name (p, BOUNDARY);
    last = last->next;
  }
  return last != NULL ? first : NULL;
}

static bool
parse_boundary (struct parser *p, struct statement *statement)
{
  /* NAME ":" NAME { "+" NAME } "=" NAME { "+" NAME }  */
  if (!parse_new_name (p, &statement->name, &statement->name_at))
    return false;
  if (!accept (p, TOKEN_COLON))
    return fail_unexpected (p, BOUNDARY);
  if ((statement->inlets = parse_flows (p)) == NULL)
    return false;
  const char *other_side = "move it to the other side of '='";
  if (!accept (p, TOKEN_EQUALS))
    return fail_unexpected (p, p->token.kind == TOKEN_MINUS ? other_side : BOUNDARY);
  if ((statement->outlets = parse_flows (p)) == NULL)
    return false;
  return expect_end (p, p->token.kind == TOKEN_MINUS ? other_side : BOUNDARY);
}

static bool
parse_known (struct parser *p, struct statement *statement)
{
  /* "known" sum "=" sum  */
  if ((statement->value = parse_sum (p)) == NULL)
    return false;
  if (!accept (p, TOKEN_EQUALS))
    return fail_behind_sum (p, KNOWN);
  statement->claim = parse_sum (p);
  return statement->claim != NULL && (at_end (p) || fail_behind_sum (p, KNOWN));
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

bool
parse_balance_line (struct parser *p, struct statement *statement)
{
  /* line = ( "mix" | "separate" | "split" ) ... | "components" ... | "known" ... | "end"  */
  static const struct { const char *word; enum statement_kind kind; } openers[] = {
    { "mix", STATEMENT_MIX }, { "separate", STATEMENT_SEPARATE }, { "split", STATEMENT_SPLIT },
    { "components", STATEMENT_COMPONENTS }, { "known", STATEMENT_KNOWN }
  };
  if (at_word (p, "end"))
    return parse_end (p, statement);
  statement->kind = STATEMENT_EMPTY;
  for (size_t i = 0; i < sizeof openers / sizeof openers[0]; i++)
    if (accept_word (p, openers[i].word)) {
      statement->kind = openers[i].kind;
      break;
    }
  if (statement->kind == STATEMENT_KNOWN)
    return parse_known (p, statement);
  if (statement->kind == STATEMENT_COMPONENTS) {
    statement->names = parse_names (p, "components CH4, CO2");
    return statement->names != NULL && expect_end (p, "components CH4, CO2");
  }
  if (statement->kind != STATEMENT_EMPTY)
    return parse_boundary (p, statement);
  return fail_here (p, MESSAGE_BLOCK_LINE, token_text (p, &p->token),
                    statement_opened (p, &p->token) != STATEMENT_EMPTY
                    ? "the balance is still open: close it with end"
                    : "inside a balance a line opens with mix, separate, split, components, known"
                      " or end");
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
