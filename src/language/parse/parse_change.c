#include "config.h"
#include "language/parse/parse_private.h"

/* share { "," share };  share = NAME ( quantity | "(" sum ")" )  */
static struct node *
parse_shares (struct parser *p)
{
  struct node *first = NULL, **link = &first;
  do {
    const char *how_much = "how much of it: CO2 98 %";
    struct node *name = parse_name (p, how_much);
    if (name == NULL)
      return NULL;
    struct node *share = node_new (p, NODE_SHARE, name->at);
    share->text = name->text;
    share->quoted = name->quoted;
    if (p->token.kind == TOKEN_OPEN)
      share->a = parse_bracket (p, IN_SUM);
    else if (at_number (p))
      share->a = parse_quantity (p, IN_STATE);
    else
      fail_here (p, MESSAGE_AMOUNT_MISSING, name->text, NULL);
    if (share->a == NULL) {
      if (p->fault->kind == MESSAGE_UNFINISHED)
        fail_instead (p, MESSAGE_UNFINISHED, p->fault->at, how_much, NULL);
      return NULL;
    }
    node_close (p, share);
    *link = share;
    link = &share->next;
  } while (accept_comma (p));
  return first;
}

/* "normalised" [ "into" NAME ]  */
static bool
parse_normalised (struct parser *p, struct node *change)
{
  change->kind = NODE_NORMALISED;
  if (accept_word (p, "into"))
    change->b = parse_name (p, "normalised into N2");
  return p->fault->kind == MESSAGE_NONE;
}

/* "without" NAME [ "by" NAME ]  */
static bool
parse_without (struct parser *p, struct node *change)
{
  change->kind = NODE_WITHOUT;
  change->b = parse_name (p, "without what?");
  if (change->b != NULL && accept_word (p, "by"))
    change->c = parse_name (p, "by which tracer?");
  return p->fault->kind == MESSAGE_NONE;
}

/* "wetted" "to" value | "saturated" "at" state | "keeping" share { "," share }  */
static bool
parse_other_change (struct parser *p, struct node *change)
{
  struct place at = p->token.at;
  if (change->kind == NODE_WETTED)
    return expect_word (p, "to", "wetted to 3.1 mol%")
           && (change->b = parse_value (p, "wetted to 3.1 mol%")) != NULL;
  if (change->kind == NODE_SATURATED)
    return expect_word (p, "at", "saturated at T, P")
           && (change->b = parse_state (p, NULL, at)) != NULL;
  change->items = parse_shares (p);
  return change->items != NULL;
}

/* Takes a word that opens a change.  False: there is none.  */
static bool
accept_change (struct parser *p, enum node_kind *kind)
{
  static const struct { const char *word; enum node_kind kind; } words[] = {
    { "normalised", NODE_NORMALISED }, { "normalized", NODE_NORMALISED },
    { "dried", NODE_DRIED }, { "wetted", NODE_WETTED }, { "saturated", NODE_SATURATED },
    { "without", NODE_WITHOUT }, { "keeping", NODE_KEEPING }
  };
  if (p->token.kind == TOKEN_WORD)
    for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
      if (accept_word (p, words[i].word)) {
        *kind = words[i].kind;
        return true;
      }
  return false;
}

struct node *
parse_changes (struct parser *p, struct node *of)
{
  /* { change }  */
  enum node_kind kind;
  while (accept_change (p, &kind)) {
    struct node *change = node_new (p, kind, of->at);
    change->a = of;
    if (!add_link (p))
      return NULL;
    if (kind == NODE_NORMALISED ? !parse_normalised (p, change)
        : kind == NODE_WITHOUT ? !parse_without (p, change)
        : kind != NODE_DRIED && !parse_other_change (p, change))
      return NULL;
    node_close (p, change);
    of = change;
  }
  return of;
}
