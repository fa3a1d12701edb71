#include "config.h"
#include "language/parse/parse_private.h"

static const char FORM[] = "trim NAME so WHAT = FIGURE";

/* ( "=" | "at least" | "at most" ), also <= and >=  */
static bool
parse_comparison (struct parser *p, enum comparison *is)
{
  if (accept (p, TOKEN_EQUALS))
    *is = COMPARE_EQUAL;
  else if (accept (p, TOKEN_AT_MOST))
    *is = COMPARE_AT_MOST;
  else if (accept (p, TOKEN_AT_LEAST))
    *is = COMPARE_AT_LEAST;
  else if (accept_word (p, "at")) {
    /* Only `least` and `most` leave an `at` to this place.  */
    *is = at_word (p, "least") ? COMPARE_AT_LEAST : COMPARE_AT_MOST;
    token_take (p);
  }
  else
    return fail_behind_sum (p, at_word (p, "in")
                            ? "the unit stands with the figure: = 49.5 MJ/Sm3"
                            : "an aim is WHAT = FIGURE, WHAT at least FIGURE or WHAT at most"
                              " FIGURE");
  return true;
}

static struct aim *
parse_aim (struct parser *p)
{
  /* aim = sum ( "=" | "at least" | "at most" ) sum  -- the right side without an open "at"  */
  struct aim *aim = ARENA_NEW (p->arena, struct aim);
  p->aim_left = true;
  aim->left = parse_sum (p);
  if (aim->left == NULL || !parse_comparison (p, &aim->is))
    return NULL;
  p->aim_left = false;
  p->aim_right = true;
  aim->right = parse_sum (p);
  p->aim_right = false;
  return aim->right != NULL ? aim : NULL;
}

/* aim { "," aim }  */
static struct aim *
parse_aims (struct parser *p)
{
  struct aim *first = NULL, **link = &first;
  do {
    *link = parse_aim (p);
    if (*link == NULL)
      return NULL;
    link = &(*link)->next;
  } while (accept_comma (p));
  return first;
}

bool
parse_trim (struct parser *p, struct statement *statement)
{
  /* "trim" NAME { "," NAME } "so" aim { "," aim } [ "with" ( "least" | "most" ) sum ]  */
  statement->names = parse_names (p, FORM);
  if (statement->names == NULL || !expect_word (p, "so", FORM))
    return false;
  statement->aims = parse_aims (p);
  if (statement->aims == NULL)
    return false;
  if (accept_word (p, "with")) {
    const char *way_on = "with least c3, or with most c3";
    statement->optimum = at_word (p, "least") ? OPTIMUM_LEAST : OPTIMUM_MOST;
    if (!accept_word (p, "least") && !expect_word (p, "most", way_on))
      return false;
    statement->least = parse_sum (p);
    if (statement->least == NULL)
      return false;
  }
  return at_end (p) || fail_behind_sum (p, FORM);
}

/* Is what is computed a bare number, as far as its form tells?  */
static bool
is_bare (const struct node *node)
{
  static const char *const units[] = {
#define PROPERTY(name, text, unit, help) unit,
#include "language/properties.def"
#undef PROPERTY
  };
  while (node->kind == NODE_AT)
    node = node->a;
  if (node->kind == NODE_OF)
    return node->a->kind == NODE_PROPERTY && units[node->a->property][0] == '\0';
  return node->kind == NODE_DIVIDE || node->kind == NODE_SQRT || node->kind == NODE_LN
         || node->kind == NODE_EXP;
}

bool
parse_check (struct parser *p, struct statement *statement)
{
  /* "check" ( NAME | sum [ "in" target ] "against" claim )  */
  const char *form = "check WHAT against FIGURE";
  struct token name = p->token;
  struct node *what = parse_sum (p);
  if (what == NULL)
    return false;
  if (what->kind == NODE_NAME && at_end (p)) {
    statement->name = what->text;
    statement->name_at = name.at;
    return true;
  }
  statement->value = what;
  if (accept_word (p, "in")) {
    statement->targets = parse_targets (p, true);
    if (statement->targets == NULL)
      return false;
  }
  if (!accept_word (p, "against"))
    return fail_behind_sum (p, form);
  statement->claim = parse_claim (p, statement->targets == NULL && is_bare (what));
  if (statement->claim == NULL)
    return false;
  return expect_end (p, at_word (p, "of") ? "what the figure is of stands before 'against'" : form);
}
