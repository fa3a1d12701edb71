#include "config.h"
#include "language/parse/parse_private.h"

#include "support/text.h"

struct parser *
parser_create (struct arena *arena, const struct vocabulary *words, const char *text, size_t n,
               int first, enum block block)
{
  struct parser *p = ARENA_NEW (arena, struct parser);
  p->arena = arena;
  p->words = words;
  p->block = block;
  scanner_init (&p->scan, text, n, first);
  return p;
}

enum block
parser_block (const struct parser *p)
{
  return p->block;
}

const char *
parser_source (const struct parser *p)
{
  return p->source != NULL ? p->source : "";
}

/* The place of the byte at OFFSET.  */
static struct place
place_of (const struct parser *p, size_t offset)
{
  struct place at = { p->scan.line, 1, 1 };
  const char *text = p->scan.text;
  size_t line = 0;
  for (size_t i = 0; i < offset; i++)
    if (text[i] == '\n') {
      at.line++;
      line = i + 1;
    }
  at.first = at.last = (int) utf8_characters (text + line, offset - line) + 1;
  return at;
}

/* All of the text is valid UTF-8 without null bytes; looked at once, before the first token.  */
static bool
check_encoding (struct parser *p)
{
  const char *text = p->scan.text;
  size_t n = p->scan.n, bad = utf8_first_bad (text, n);
  const char *null = bad > 0 ? memchr (text, '\0', bad) : NULL;
  if (null != NULL)
    bad = (size_t) (null - text);
  if (bad == n)
    return true;
  fail (p, MESSAGE_TEXT_ENCODING, place_of (p, bad), NULL, NULL);
  if (null != NULL)
    fault_hint (p->fault, "a null byte cannot stand in a text");
  p->source = bytes_text (p, 0, bad);
  p->scan.offset = n;             /* nothing of it is read */
  return false;
}

/* The statement's text from its first to its last token.  What is parted over several lines is
   joined: comments inside and '\' at a line's end are left out.                                 */
static const char *
source_of (const struct parser *p)
{
  const char *text = p->scan.text + p->begin;
  size_t n = p->end - p->begin, length = 0;
  bool quoted = false;
  char *copy = arena_copy (p->arena, text, n);
  if (memchr (text, '\n', n) == NULL)
    return copy;
  for (size_t i = 0; i < n; i++) {
    char c = text[i];
    quoted ^= c == '"';
    if (quoted || (c != '#' && c != '\\' && c != '\n')) {
      copy[length++] = c;
      continue;
    }
    while (i < n && text[i] != '\n')
      i++;
    while (length > 0 && (copy[length - 1] == ' ' || copy[length - 1] == '\t'))
      length--;
    while (i + 1 < n && (text[i + 1] == ' ' || text[i + 1] == '\t'))
      i++;
    copy[length++] = ' ';
  }
  copy[length] = '\0';
  return copy;
}

/* Goes to the end of a statement that failed, so that the next one can be read.  */
static void
skip_statement (struct parser *p)
{
  while (!at_end (p))
    token_take (p);
  p->source = source_of (p);
}

/* The first token of the next statement becomes the one at hand.  False: there is none.  */
static bool
find_statement (struct parser *p)
{
  do
    scan_next (&p->scan, &p->token);
  while (p->token.kind == TOKEN_SEMICOLON);
  p->first = p->token;
  p->begin = p->end = p->token.start;
  p->second = (struct place) { 0, 0, 0 };
  p->depth = p->links = p->brackets = 0;
  p->aim_left = p->aim_right = false;
  p->unit = (struct unit_read) { NULL, NULL, { 0, 0, 0 } };
  return p->token.kind != TOKEN_END;
}

bool
parser_next (struct parser *p, struct statement **out, struct fault *fault)
{
  p->fault = fault;
  *out = NULL;
  if (p->scan.offset == 0 && !check_encoding (p))
    return false;
  if (!find_statement (p))
    return true;
  struct statement *statement = ARENA_NEW (p->arena, struct statement);
  statement->kind = STATEMENT_EMPTY;
  if (!parse_statement (p, statement)) {
    skip_statement (p);
    return false;
  }
  statement->source = source_of (p);
  if (p->first.at.line != p->last.line)
    statement->typed = arena_copy (p->arena, p->scan.text + p->begin, p->end - p->begin);
  struct place at = p->first.at;
  at.last = at.line == p->last.line ? p->last.last : at.last;
  statement->at = at;
  *out = statement;
  return true;
}
