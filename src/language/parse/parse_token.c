#include "config.h"
#include "language/parse/parse_private.h"

#include "support/text.h"

void
token_take (struct parser *p)
{
  p->last = p->token.at;
  p->end = p->token.end;
  scan_next (&p->scan, &p->token);
  if (p->second.line == 0)
    p->second = p->token.at;
}

struct look
look_here (const struct parser *p)
{
  return (struct look) { p->scan, p->token };
}

void
look_next (struct look *look)
{
  scan_next (&look->scan, &look->token);
}

struct token
token_behind (const struct parser *p)
{
  struct look look = look_here (p);
  look_next (&look);
  return look.token;
}

bool
accept (struct parser *p, enum token_kind kind)
{
  if (p->token.kind != kind)
    return false;
  token_take (p);
  return true;
}

bool
accept_word (struct parser *p, const char *word)
{
  if (!at_word (p, word))
    return false;
  token_take (p);
  return true;
}

bool
accept_comma (struct parser *p)
{
  bool comma = accept (p, TOKEN_COMMA);
  return accept_word (p, "and") || comma;
}

bool
token_is_end (const struct token *t)
{
  return t->kind == TOKEN_END || t->kind == TOKEN_SEMICOLON;
}

bool
at_end (const struct parser *p)
{
  return token_is_end (&p->token);
}

bool
opens_unit (const struct parser *p, const struct token *t)
{
  return t->kind == TOKEN_SIGN
         || (t->kind == TOKEN_WORD
             && !word_is_reserved (p->scan.text + t->start, t->end - t->start));
}

bool
opens_amount (const struct parser *p, const struct token *t)
{
  return t->kind == TOKEN_NUMBER || t->kind == TOKEN_LESS || t->kind == TOKEN_OPEN
         || t->kind == TOKEN_AT_MOST || token_is (p, t, "rest");
}

bool
joined_to_name (const struct parser *p, const struct token *t)
{
  const char *text = p->scan.text;
  if (t->end + 1 >= p->scan.n || (text[t->end] != '/' && text[t->end] != '*'))
    return false;
  char next = text[t->end + 1];
  return byte_is_letter (next) || next == '"' || next == '%' || (unsigned char) next >= 0x80;
}

/* The words of the language.  */

struct listed_word { const char *text; size_t length; };

bool
word_is_reserved (const char *text, size_t n)
{
  static const struct listed_word words[] = {
#define WORD(text) { text, sizeof text - 1 },
#include "language/words.def"
#undef WORD
#define STATEMENT(name, text, help) { text, sizeof text - 1 },
#include "language/statements.def"
#undef STATEMENT
  };
  enum { SHORTEST = 2, LONGEST = 10 };
  if (n < SHORTEST || n > LONGEST)
    return false;
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (words[i].length == n && words[i].text[0] == text[0]
        && memcmp (words[i].text, text, n) == 0)
      return true;
  return false;
}

const char *
word_in_capitals (struct parser *p, const struct token *t)
{
  enum { LONGEST = 10 };
  size_t n = t->end - t->start;
  const char *text = p->scan.text + t->start;
  bool capitals = false;
  if (t->kind != TOKEN_WORD || n > LONGEST)
    return NULL;
  char *small = arena_copy (p->arena, text, n);
  for (size_t i = 0; i < n; i++)
    if (small[i] >= 'A' && small[i] <= 'Z') {
      small[i] = (char) (small[i] - 'A' + 'a');
      capitals = true;
    }
  return capitals && word_is_reserved (small, n) ? small : NULL;
}

enum statement_kind
statement_opened (const struct parser *p, const struct token *t)
{
  static const struct { struct listed_word word; enum statement_kind kind; } words[] = {
#define STATEMENT(name, text, help) { { text, sizeof text - 1 }, STATEMENT_##name },
#include "language/statements.def"
#undef STATEMENT
  };
  size_t n = t->end - t->start;
  if (t->kind == TOKEN_WORD)
    for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
      if (words[i].word.length == n
          && memcmp (words[i].word.text, p->scan.text + t->start, n) == 0)
        return words[i].kind;
  return STATEMENT_EMPTY;
}

const char *
statement_like (const char *word)
{
  static const struct listed_word words[] = {
#define STATEMENT(name, text, help) { text, sizeof text - 1 },
#include "language/statements.def"
#undef STATEMENT
  };
  enum { SHORTEST = 3, LONGEST = 12 };
  const size_t n = strlen (word);
  if (n < SHORTEST || n > LONGEST)
    return NULL;
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (text_distance (word, words[i].text, 1) <= 1)
      return words[i].text;
  return NULL;
}

const char *
statement_near (struct parser *p, const struct token *t)
{
  return t->kind == TOKEN_WORD ? statement_like (token_text (p, t)) : NULL;
}

unsigned
word_bit (const struct parser *p, const struct token *t)
{
  static const struct { const char *text; unsigned bit; } words[] = {
    { "dry", WORD_DRY }, { "wet", WORD_WET }, { "real", WORD_REAL }, { "ideal", WORD_IDEAL },
    { "gross", WORD_GROSS }, { "net", WORD_NET }
  };
  if (t->kind == TOKEN_WORD)
    for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
      if (token_is (p, t, words[i].text))
        return words[i].bit;
  return 0;
}

size_t
words_here (const struct parser *p, const char *text)
{
  struct look look = look_here (p);
  for (size_t count = 1; ; count++) {
    size_t n = strcspn (text, " ");
    if (look.token.kind != TOKEN_WORD || look.token.end - look.token.start != n
        || memcmp (p->scan.text + look.token.start, text, n) != 0)
      return 0;
    if (text[n] == '\0')
      return count;
    text += n + 1;
    look_next (&look);
  }
}

void
take_words (struct parser *p, size_t count)
{
  while (count-- > 0)
    token_take (p);
}

/* Does TEXT begin like the token at hand?  Spares most of the comparing.  */
static bool
same_initial (const struct parser *p, const char *text)
{
  return p->scan.text[p->token.start] == text[0];
}

/* The words of the longest of COUNT texts that stands here, 0 if none does; which, in *FOUND.  */
static size_t
longest_here (const struct parser *p, const char *const texts[], size_t count, size_t *found)
{
  size_t best = 0;
  if (p->token.kind != TOKEN_WORD)
    return 0;
  for (size_t i = 0; i < count; i++) {
    size_t words = same_initial (p, texts[i]) ? words_here (p, texts[i]) : 0;
    if (words > best) {
      best = words;
      *found = i;
    }
  }
  return best;
}

size_t
property_here (const struct parser *p, enum property *found)
{
  static const char *const texts[] = {
#define PROPERTY(name, text, unit, help) text,
#include "language/properties.def"
#undef PROPERTY
  };
  size_t i, words = longest_here (p, texts, sizeof texts / sizeof texts[0], &i);
  if (words > 0)
    *found = (enum property) i;
  return words;
}

size_t
setting_here (const struct parser *p, enum setting *found)
{
  static const char *const texts[] = {
#define SETTING(name, text, takes) text,
#include "language/settings.def"
#undef SETTING
  };
  size_t i, words = longest_here (p, texts, sizeof texts / sizeof texts[0], &i);
  if (words > 0)
    *found = (enum setting) i;
  return words;
}

const char *
bytes_text (const struct parser *p, size_t start, size_t end)
{
  enum { LONG = 60 };
  const char *text = p->scan.text + start;
  size_t n = end - start;
  if (n <= LONG)
    return arena_copy (p->arena, text, n);
  n = LONG;
  while (n > 0 && ((unsigned char) text[n] & 0xC0) == 0x80)
    n--;
  return arena_format (p->arena, "%.*s...", (int) n, text);
}

const char *
token_text (const struct parser *p, const struct token *t)
{
  return bytes_text (p, t->start, t->end);
}
