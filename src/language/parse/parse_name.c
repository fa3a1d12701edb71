#include "config.h"
#include "language/parse/parse_private.h"

#include "gas/species.h"

static const char OF_COMPONENT[] = "is a component; its formula keeps its meaning";

struct node *
node_new (struct parser *p, enum node_kind kind, struct place from)
{
  struct node *node = ARENA_NEW (p->arena, struct node);
  node->kind = kind;
  node->at = from;
  return node;
}

void
node_close (const struct parser *p, struct node *node)
{
  if (node->at.line == p->last.line)
    node->at.last = p->last.last;
}

struct node *
node_link (struct parser *p, enum node_kind kind, struct node *a, struct node *b)
{
  struct node *node = node_new (p, kind, a->at);
  node->a = a;
  node->b = b;
  node_close (p, node);
  return node;
}

/* The word's text with subscript digits (U+2080 to U+2089, E2 82 80 to 89) as digits.  */
static const char *
plain_text (const struct parser *p, const char *text, size_t n, bool twins)
{
  char *copy = arena_copy (p->arena, text, n), *to = copy;
  if (!twins)
    return copy;
  for (const char *from = text; from < text + n; from++)
    if ((unsigned char) *from == 0xE2 && from + 2 < text + n) {
      *to++ = (char) ('0' + ((unsigned char) from[2] - 0x80));
      from += 2;
    }
    else
      *to++ = *from;
  *to = '\0';
  return copy;
}

/* Does a blank and another word that is not reserved follow the word?  Only then can it be the
   first of a name of several words.                                                             */
static bool
word_follows (const struct parser *p, const struct token *t)
{
  const char *text = p->scan.text;
  size_t i = t->end + 1, end = i;
  if (i >= p->scan.n || text[t->end] != ' ' || !byte_is_letter (text[i]))
    return false;
  while (end < p->scan.n && (byte_is_letter (text[end]) || byte_is_digit (text[end])))
    end++;
  return !word_is_reserved (text + i, end - i);
}

size_t
name_length (const struct parser *p, const struct token *t)
{
  enum { FAR = 80 };              /* no name of the table is longer */
  size_t word = t->end - t->start, left = p->scan.n - t->start;
  if (!word_follows (p, t))
    return word;
  size_t several = species_longest_name (p->words->species, p->scan.text + t->start,
                                         left < FAR ? left : FAR);
  return several > word ? several : word;
}

/* `dry air`, the one name with a reserved word in it.  */
static bool
at_dry_air (const struct parser *p)
{
  return at_word (p, "dry") && words_here (p, "dry air") > 0;
}

bool
at_name (const struct parser *p)
{
  const struct token *t = &p->token;
  if (t->kind == TOKEN_TEXT)
    return t->end - t->start > 2;
  if (t->kind != TOKEN_WORD)
    return false;
  return !word_is_reserved (p->scan.text + t->start, t->end - t->start) || at_dry_air (p);
}

/* NAME, known to stand here.  */
static struct node *
take_name (struct parser *p)
{
  struct token t = p->token;
  struct node *name = node_new (p, NODE_NAME, t.at);
  if (t.kind == TOKEN_TEXT) {
    name->quoted = true;
    name->text = arena_copy (p->arena, p->scan.text + t.start + 1, t.end - t.start - 2);
    token_take (p);
  }
  else if (at_dry_air (p)) {
    name->text = "air";
    take_words (p, 2);
  }
  else {
    size_t n = name_length (p, &t);
    name->text = plain_text (p, p->scan.text + t.start, n, t.twins);
    do
      token_take (p);
    while (p->end < t.start + n);
  }
  node_close (p, name);
  return name;
}

/* The run without a blank that begins with T: feed/recycle.  */
static const char *
joined_text (const struct parser *p, const struct token *t)
{
  size_t end = t->end;
  while (end < p->scan.n && strchr (" \t\n,;", p->scan.text[end]) == NULL)
    end++;
  return bytes_text (p, t->start, end);
}

struct node *
parse_name (struct parser *p, const char *way_on)
{
  if (!at_name (p)) {
    fail_here (p, MESSAGE_NAME_EXPECTED, way_on, NULL);
    return NULL;
  }
  if (p->token.kind == TOKEN_WORD && joined_to_name (p, &p->token)) {
    fail (p, MESSAGE_WORD_JOINED, p->token.at, joined_text (p, &p->token), NULL);
    return NULL;
  }
  return take_name (p);
}

size_t
fuel_words (const struct parser *p)
{
  struct look look = look_here (p);
  size_t words = 0;
  if (look.token.kind == TOKEN_WORD && name_length (p, &look.token)
                                       > look.token.end - look.token.start)
    return 0;                            /* a component of several words */
  while (look.token.kind == TOKEN_WORD
         && (!word_is_reserved (p->scan.text + look.token.start, look.token.end - look.token.start)
             || (words > 0 && token_is (p, &look.token, "gas")))
         && !token_is (p, &look.token, "counted")) {
    words++;
    look_next (&look);
  }
  return words;
}

struct node *
parse_fuel (struct parser *p, const char *way_on)
{
  size_t words = fuel_words (p);
  if (words < 2)
    return parse_name (p, way_on);
  struct node *name = node_new (p, NODE_NAME, p->token.at);
  const char *text = token_text (p, &p->token);
  for (token_take (p); words > 1; words--) {
    text = arena_format (p->arena, "%s-%s", text, token_text (p, &p->token));
    token_take (p);
  }
  name->text = text;
  node_close (p, name);
  return name;
}

struct node *
parse_names (struct parser *p, const char *way_on)
{
  struct node *first = parse_name (p, way_on), *last = first;
  while (last != NULL && accept_comma (p)) {
    last->next = parse_name (p, way_on);
    last = last->next;
  }
  return last != NULL ? first : NULL;
}

/* Is the word a key of the component table?  `air`, a mixture, is not a component.  */
static bool
is_key (const struct parser *p, const char *text)
{
  const struct species *found;
  const char *candidates;
  return strcmp (text, "air") != 0
         && species_find (p->words->species, text, strlen (text), &found, &candidates)
            == SPECIES_KEY;
}

struct node *
parse_free_name (struct parser *p, const char *way_on)
{
  const struct token t = p->token;
  struct node *name = NULL;
  if (t.kind == TOKEN_WORD && word_is_reserved (p->scan.text + t.start, t.end - t.start))
    fail (p, MESSAGE_NAME_RESERVED, t.at, token_text (p, &t), "is a word of the language");
  else if ((name = parse_name (p, way_on)) != NULL && is_key (p, name->text)) {
    fail (p, MESSAGE_NAME_RESERVED, name->at, name->text, OF_COMPONENT);
    return NULL;
  }
  return name;
}

bool
parse_new_name (struct parser *p, const char *form, const char **name, struct place *at)
{
  struct token t = p->token;
  const char *text = p->scan.text + t.start;
  if (t.kind == TOKEN_NUMBER || (t.kind == TOKEN_BAD && byte_is_digit (*text)))
    return fail (p, MESSAGE_NAME_FORM, t.at, joined_text (p, &t), "a name begins with a letter");
  if (t.kind == TOKEN_TEXT && t.end - t.start == 2)
    return fail (p, MESSAGE_NAME_FORM, t.at, "\"\"", "a name is not empty");
  if (t.kind != TOKEN_WORD && t.kind != TOKEN_TEXT)
    return fail_here (p, MESSAGE_NAME_EXPECTED, form, NULL);
  if (t.kind == TOKEN_WORD && word_is_reserved (text, t.end - t.start))
    return fail (p, MESSAGE_NAME_RESERVED, t.at, token_text (p, &t), "is a word of the language");
  if (t.kind == TOKEN_WORD && joined_to_name (p, &t))
    return fail (p, MESSAGE_NAME_FORM, t.at, joined_text (p, &t),
                 "a name is letters, digits, _ and -; any other text stands in quotes");
  const char *given = t.kind == TOKEN_TEXT ? arena_copy (p->arena, text + 1, t.end - t.start - 2)
                      : plain_text (p, text, t.end - t.start, t.twins);
  if (is_key (p, given))
    return fail (p, MESSAGE_NAME_RESERVED, t.at, given, OF_COMPONENT);
  *name = given;
  *at = t.at;
  token_take (p);
  return true;
}
