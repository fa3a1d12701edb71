#include "config.h"
#include "language/parse/parse_private.h"

/* No unit is longer; what is, is not looked for.  */
enum { LONGEST_UNIT = 120 };

bool
unit_is_pressure (const struct unit *unit)
{
  return dimension_equal (unit->dimension, DIMENSION_PRESSURE) && unit->family_power == 0;
}

bool
unit_is_temperature (const struct unit *unit)
{
  return unit->sort == UNIT_POINT;
}

static bool
bytes_are (const struct parser *p, size_t start, size_t end, const char *word)
{
  return end - start == strlen (word) && memcmp (p->scan.text + start, word, end - start) == 0;
}

/* "bar" and "(g)", parted by a blank, are one unit.  T is the bracket; true with S behind it.  */
static bool
close_bracket (const struct parser *p, struct scanner *s, struct token *t)
{
  static const char *const qualifiers[] = { "g", "a", "vac", "diff", "US", "UK", "short",
                                            "long" };
  struct scanner ahead = *s;
  struct token word, close;
  scan_next (&ahead, &word);
  scan_next (&ahead, &close);
  if (word.kind != TOKEN_WORD || close.kind != TOKEN_CLOSE)
    return false;
  for (size_t i = 0; i < sizeof qualifiers / sizeof qualifiers[0]; i++)
    if (token_is (p, &word, qualifiers[i])) {
      *s = ahead;
      *t = close;
      return true;
    }
  return false;
}

/* Does the next token, parted by a blank, belong to UNIT: `mol %`, `% RH`, `bar (g)`?  `% O2 of`
   is not, there the per cent are of the O2.  True with UNIT longer and S behind it.            */
static bool
close_up (const struct parser *p, struct scanner *s, struct token *unit)
{
  struct scanner ahead = *s, beyond;
  struct token t, next;
  size_t start = unit->start, end = unit->end;
  bool joins = false;
  if (end >= p->scan.n || p->scan.text[end] != ' ')
    return false;
  char c = end + 1 < p->scan.n ? p->scan.text[end + 1] : '\0';
  if (c != '%' && c != '(' && c != 'R' && c != 'O' && c != ' ')
    return false;
  scan_next (&ahead, &t);
  if (t.kind == TOKEN_OPEN)
    joins = close_bracket (p, &ahead, &t);
  else if (t.kind == TOKEN_SIGN && bytes_are (p, t.start, t.end, "%"))
    joins = bytes_are (p, start, end, "mol") || bytes_are (p, start, end, "mass")
            || bytes_are (p, start, end, "vol");
  else if (bytes_are (p, start, end, "%") && t.kind == TOKEN_WORD) {
    beyond = ahead;
    scan_next (&beyond, &next);
    joins = token_is (p, &t, "RH") || (token_is (p, &t, "O2") && !token_is (p, &next, "of"));
  }
  if (!joins)
    return false;
  unit->end = t.end;
  unit->at.last = t.at.line == unit->at.line ? t.at.last : unit->at.last;
  *s = ahead;
  return true;
}

/* The bytes from START to END without blanks.  */
static const char *
without_blanks (const struct parser *p, size_t start, size_t end)
{
  char *text = arena_copy (p->arena, p->scan.text + start, end - start), *to = text;
  for (const char *from = text; *from != '\0'; from++)
    if (*from != ' ')
      *to++ = *from;
  *to = '\0';
  return text;
}

static bool
find (struct parser *p, const struct token *t, struct unit_read *read, struct scanner *behind,
      struct fault *fault)
{
  struct token unit;
  struct scanner s = p->scan;
  scan_unit (&s, t, &unit);
  size_t n = unit.end - unit.start;
  const char *text = p->scan.text + unit.start;
  if (close_up (p, &s, &unit)) {
    text = without_blanks (p, unit.start, unit.end);
    n = strlen (text);
  }
  if (n > LONGEST_UNIT)
    return fault_set_at (fault, MESSAGE_UNIT_UNKNOWN, unit.at,
                         bytes_text (p, unit.start, unit.end), NULL);
  read->unit = unit_find (p->words->units, text, n, fault);
  if (read->unit == NULL) {
    fault_place (fault, unit.at);
    return false;
  }
  read->text = read->unit->spelling;
  read->at = unit.at;
  *behind = s;
  return true;
}

bool
unit_at (struct parser *p, const struct token *t, struct unit_read *read,
         struct scanner *behind)
{
  struct fault scratch;
  fault_init (&scratch, p->arena);
  return opens_unit (p, t) && find (p, t, read, behind, &scratch);
}

bool
text_is_unit (struct parser *p, const char *text)
{
  struct fault scratch;
  size_t n = strlen (text);
  fault_init (&scratch, p->arena);
  return n <= LONGEST_UNIT && unit_find (p->words->units, text, n, &scratch) != NULL;
}

/* `kg/ h` and `kg /h`: half a blank makes neither a unit nor a division.  */
static bool
check_half_blanks (struct parser *p, const struct unit_read *read, size_t start)
{
  const struct token *t = &p->token;
  if (t->kind != TOKEN_OVER && t->kind != TOKEN_TIMES)
    return true;
  struct token next = token_behind (p);
  if (next.kind != TOKEN_WORD || t->blank == next.blank)
    return true;
  const char *text = bytes_text (p, start, next.end);
  const char *closed = arena_format (p->arena, "%s%.*s%s", read->text, (int) (t->end - t->start),
                                     p->scan.text + t->start, token_text (p, &next));
  bool offered = text_is_unit (p, closed);
  fail (p, MESSAGE_UNIT_FORM, t->at, text, offered ? NULL : "no blanks inside a unit");
  if (offered)
    fault_hint (p->fault, "no blanks inside a unit: did you mean '%s'?", closed);
  return false;
}

/* What a word that is no unit may have been meant as, where the place tells it.  */
static bool
explain_unit (struct parser *p)
{
  if (p->fault->kind != MESSAGE_UNIT_UNKNOWN)
    return false;
  const char *small = word_in_capitals (p, &p->token);
  if (small != NULL)
    return fail_instead (p, MESSAGE_WORD_CASE, p->token.at, token_text (p, &p->token), small);
  /* gass raw = ...: no unit was meant behind the first word.  */
  bool second = p->token.at.line == p->second.line && p->token.at.first == p->second.first;
  const char *near = second ? statement_near (p, &p->first) : NULL;
  if (at_word (p, "deg"))
    fault_hint (p->fault, "did you mean 'degC or degF'?");
  else if (near != NULL)
    fault_hint (p->fault, "did you mean '%s %s'?", near, token_text (p, &p->token));
  return false;
}

bool
parse_unit (struct parser *p, struct unit_read *read)
{
  struct scanner behind;
  size_t start = p->token.start;
  if (!find (p, &p->token, read, &behind, p->fault))
    return explain_unit (p);
  p->unit = *read;
  p->in_target = false;
  p->last = read->at;
  p->end = behind.offset;
  p->scan = behind;
  scan_next (&p->scan, &p->token);
  if (p->second.line == 0)
    p->second = p->token.at;
  return check_half_blanks (p, read, start);
}
