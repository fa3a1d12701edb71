#include "config.h"
#include "language/parse/parse_private.h"

static const char FORM[] = "trim NAME so WHAT = FIGURE";

/* ".." | "to"  */
static bool
expect_range (struct parser *p, const char *way_on)
{
  return accept (p, TOKEN_RANGE) || expect_word (p, "to", way_on);
}

/* A unit behind both figures of a range belongs to both: 48 .. 51 MJ/m3.  */
static void
share_unit (struct node *least, const struct node *most)
{
  if (least->kind != NODE_QUANTITY || most->kind != NODE_QUANTITY || least->a != NULL
      || least->unit != NULL || most->unit == NULL)
    return;
  least->unit = most->unit;
  least->unit_text = most->unit_text;
  least->unit_at = most->unit_at;
  least->words = most->words;
}

/* NAME [ "from" value ( ".." | "to" ) value ]  */
static struct node *
parse_moved (struct parser *p)
{
  static const char range[] = "trim NAME from 0 kg/h to 500 kg/h so ...";
  struct node *name = parse_name (p, FORM);
  if (name == NULL || !accept_word (p, "from"))
    return name;
  name->a = parse_value (p, range);
  if (name->a == NULL || !expect_range (p, range))
    return NULL;
  name->b = parse_value (p, range);
  if (name->b == NULL)
    return NULL;
  share_unit (name->a, name->b);
  return name;
}

/* What is moved, one or more.  */
static struct node *
parse_all_moved (struct parser *p)
{
  struct node *first = NULL, **link = &first;
  do {
    *link = parse_moved (p);
    if (*link == NULL)
      return NULL;
    link = &(*link)->next;
  } while (accept_comma (p));
  return first;
}

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

/* The right side of an aim: a sum without an open "at".  */
static struct node *
parse_aimed (struct parser *p)
{
  p->aim_right = true;
  struct node *sum = parse_sum (p);
  p->aim_right = false;
  return sum;
}

/* sum ( ".." | "to" ) sum, behind "within": two aims, the second one linked to the first.  */
static struct aim *
parse_range (struct parser *p, struct aim *aim)
{
  struct aim *upper = ARENA_NEW (p->arena, struct aim);
  struct node *least = parse_aimed (p);
  if (least == NULL
      || !expect_range (p, "wobbe of mix within 48 MJ/m3 .. 51 MJ/m3"))
    return NULL;
  struct node *most = parse_aimed (p);
  if (most == NULL)
    return NULL;
  share_unit (least, most);
  *upper = (struct aim) { .left = aim->left, .right = most, .is = COMPARE_AT_MOST };
  aim->is = COMPARE_AT_LEAST;
  aim->right = least;
  aim->next = upper;
  return aim;
}

static struct aim *
parse_aim (struct parser *p)
{
  /* aim = sum ( ( "=" | "at least" | "at most" ) sum | "within" sum ( ".." | "to" ) sum )
     -- the right side without an open "at"  */
  struct aim *aim = ARENA_NEW (p->arena, struct aim);
  p->aim_left = true;
  aim->left = parse_sum (p);
  bool within = aim->left != NULL && accept_word (p, "within");
  if (aim->left == NULL || (!within && !parse_comparison (p, &aim->is)))
    return NULL;
  p->aim_left = false;
  if (within)
    return parse_range (p, aim);
  aim->right = parse_aimed (p);
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
    while (*link != NULL)
      link = &(*link)->next;
  } while (accept_comma (p));
  return first;
}

bool
parse_trim (struct parser *p, struct statement *statement)
{
  /* "trim" moved { "," moved } "so" aim { "," aim } [ "with" ( "least" | "most" ) sum ]  */
  statement->names = parse_all_moved (p);
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
  if (at_end (p))
    return fail_unfinished (p, form);
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
