#include "config.h"
#include "language/parse/scan.h"

#include <assert.h>
#include "support/text.h"

/* Characters outside ASCII that mean something here.  */
enum {
  NO_BREAK_SPACE = 0xA0, DEGREE = 0xB0, PLUS_MINUS = 0xB1, SUPERSCRIPT_2 = 0xB2,
  SUPERSCRIPT_3 = 0xB3, MICRO = 0xB5, MIDDLE_DOT = 0xB7, SUPERSCRIPT_1 = 0xB9, TIMES_SIGN = 0xD7,
  DIVISION_SIGN = 0xF7,
  GREEK_MU = 0x3BC, THIN_SPACE = 0x2009, NARROW_NO_BREAK_SPACE = 0x202F, EN_DASH = 0x2013,
  LEFT_QUOTE = 0x201C, RIGHT_QUOTE = 0x201D, SUPERSCRIPT_0 = 0x2070, SUPERSCRIPT_4 = 0x2074,
  SUPERSCRIPT_MINUS = 0x207B, SUBSCRIPT_0 = 0x2080, SUBSCRIPT_9 = 0x2089, DEGREE_C = 0x2103,
  DEGREE_F = 0x2109, RIGHT_ARROW = 0x2192, MINUS_SIGN = 0x2212, DOT_OPERATOR = 0x22C5,
  LESS_OR_EQUAL = 0x2264, GREATER_OR_EQUAL = 0x2265
};

void
scanner_init (struct scanner *s, const char *text, size_t n, int line)
{
  *s = (struct scanner) { .text = text, .n = n, .line = line };
}

/* The byte at offset I; a null byte behind the end.  */
static char
byte_at (const struct scanner *s, size_t i)
{
  return i < s->n ? s->text[i] : '\0';
}

/* The character at offset I, and its length in bytes.  */
static unsigned
character_at (const struct scanner *s, size_t i, size_t *length)
{
  unsigned code = 0;
  *length = 0;
  if (i < s->n)
    *length = utf8_decode (s->text + i, s->n - i, &code);
  if (*length == 0)
    *length = 1;
  return code;
}

/* Goes over a character of LENGTH bytes.  */
static void
pass (struct scanner *s, size_t length)
{
  s->offset += length;
  s->base += length - 1;
}

static int
column_of (const struct scanner *s)
{
  return (int) (s->offset - s->base) + 1;
}

/* Is the '\' at the offset the last thing in its line?  Then *END is where that line ends.  */
static bool
line_goes_on (const struct scanner *s, size_t *end)
{
  size_t i = s->offset + 1;
  while (byte_at (s, i) == ' ' || byte_at (s, i) == '\t' || byte_at (s, i) == '\r')
    i++;
  *end = i;
  return i == s->n || s->text[i] == '\n';
}

/* Goes over one blank, comment or line end, if one stands here.  */
static bool
skip_one (struct scanner *s)
{
  size_t length;
  char c = byte_at (s, s->offset);
  if (c == ' ' || c == '\t' || c == '\r')
    s->offset++;
  else if (c == '\n') {
    s->offset++;
    s->line++;
    s->base = s->offset;
  }
  else if (c == '#')
    while (s->offset < s->n && s->text[s->offset] != '\n')
      s->offset++;
  else if (c == '\\') {
    if (!line_goes_on (s, &length))
      return false;
    s->offset = length;
  }
  else if ((unsigned char) c >= 0x80) {
    unsigned code = character_at (s, s->offset, &length);
    if (code != NO_BREAK_SPACE && code != THIN_SPACE && code != NARROW_NO_BREAK_SPACE)
      return false;
    pass (s, length);
  }
  else
    return false;
  return true;
}

static bool
is_subscript (const struct scanner *s, size_t i)
{
  size_t length;
  if ((unsigned char) byte_at (s, i) < 0x80)
    return false;
  unsigned code = character_at (s, i, &length);
  return code >= SUBSCRIPT_0 && code <= SUBSCRIPT_9;
}

static bool
goes_on_a_name (const struct scanner *s, size_t i)
{
  char c = byte_at (s, i);
  return byte_is_letter (c) || byte_is_digit (c) || c == '_' || is_subscript (s, i);
}

/* A name: a letter, then letters, digits, _, and - or + inside; + also last.  */
static void
scan_word (struct scanner *s, struct token *t)
{
  t->kind = TOKEN_WORD;
  for (;;) {
    char c = byte_at (s, s->offset), next = byte_at (s, s->offset + 1);
    if (byte_is_letter (c) || byte_is_digit (c) || c == '_')
      s->offset++;
    else if (c == '-' && goes_on_a_name (s, s->offset + 1))
      s->offset++;
    else if (c == '+' && goes_on_a_name (s, s->offset + 1))
      s->offset++;
    else if (c == '+' && next != '-' && !(next == '/' && byte_at (s, s->offset + 2) == '-')) {
      s->offset++;
      break;
    }
    else if (is_subscript (s, s->offset)) {
      pass (s, 3);
      t->twins = true;
    }
    else
      break;
  }
}

static void
bad (struct token *t, enum message wrong, const char *hint)
{
  t->kind = TOKEN_BAD;
  t->wrong = wrong;
  t->hint = hint;
}

/* The exponent at the offset, if there is one.  */
static void
scan_exponent (struct scanner *s)
{
  char c = byte_at (s, s->offset), next = byte_at (s, s->offset + 1);
  if (c != 'e' && c != 'E')
    return;
  size_t i = s->offset + 1 + (next == '+' || next == '-');
  if (!byte_is_digit (byte_at (s, i)))
    return;
  while (byte_is_digit (byte_at (s, i)))
    i++;
  s->offset = i;
}

/* What a user of another habit puts inside a number: 1,250 and 1'250.  */
static void
scan_foreign_number (struct scanner *s, struct token *t)
{
  char mark = byte_at (s, s->offset);
  if ((mark != ',' && mark != '\'') || !byte_is_digit (byte_at (s, s->offset + 1)))
    return;
  bad (t, mark == ',' ? MESSAGE_NUMBER_COMMA : MESSAGE_NUMBER_FORM,
       mark == ',' ? NULL : "digits are grouped with _ : 1_250");
  for (char c = mark; byte_is_digit (c) || c == ',' || c == '\'' || c == '.';
       c = byte_at (s, s->offset))
    s->offset++;
  while (byte_at (s, s->offset - 1) == ',' || byte_at (s, s->offset - 1) == '\'')
    s->offset--;
}

/* A number: digits, grouped by single _, one point, an exponent.  */
static void
scan_number (struct scanner *s, struct token *t)
{
  int points = 0;
  bool grouped_wrong = false;
  t->kind = TOKEN_NUMBER;
  for (;; s->offset++) {
    char c = byte_at (s, s->offset);
    if (c == '.')
      points++;
    else if (c == '_') {
      if (s->offset == t->start || !byte_is_digit (s->text[s->offset - 1])
          || !byte_is_digit (byte_at (s, s->offset + 1)))
        grouped_wrong = true;
    }
    else if (!byte_is_digit (c))
      break;
  }
  scan_exponent (s);
  if (byte_at (s, s->offset) == '.' && byte_is_digit (byte_at (s, s->offset + 1))) {
    while (byte_at (s, s->offset) == '.' || byte_is_digit (byte_at (s, s->offset)))
      s->offset++;
    bad (t, MESSAGE_NUMBER_FORM, "an exponent is a whole number: 1e5");
    return;
  }
  if (grouped_wrong)
    bad (t, MESSAGE_NUMBER_FORM, "_ stands between digits: 1_000");
  else if (points > 1)
    bad (t, MESSAGE_NUMBER_FORM, NULL);
  else
    scan_foreign_number (s, t);
}

/* Steers a terminal, turns the direction of writing, or has no width.  */
static bool
is_unseen (unsigned code)
{
  return code < 0x20 || (code >= 0x7F && code < 0xA0) || code == 0xAD || code == 0x3000
         || (code >= 0x200B && code <= 0x200F) || (code >= 0x2028 && code <= 0x202E)
         || (code >= 0x2060 && code <= 0x206F) || code == 0xFEFF;
}

bool
scan_is_unseen (const char *text, size_t n, unsigned *code)
{
  *code = 0;
  return utf8_decode (text, n, code) == n && is_unseen (*code);
}

static const char *
hint_for_character (unsigned code)
{
  switch (code) {
  case '?': return "no question mark is needed";
  case '@': return "write 'at'";
  case '>': return "write 'at least'; of a part: give the impurities and 'rest'";
  case '[': case ']': case '{': case '}': return "write round brackets";
  case '\'': return "texts stand in double quotes";
  case '\\': return "'\\' ends a line that goes on in the next";
  case '.': return "a name has no '.'; texts stand in double quotes";
  case '_': return "a name begins with a letter";
  case DEGREE: return "\302\260 is followed by C or F";
  case EN_DASH: return "write -";
  case LEFT_QUOTE: case RIGHT_QUOTE: return "write \"";
  case RIGHT_ARROW: return "write 'in'";
  case DIVISION_SIGN: return "write /";
  default: break;
  }
  if (is_unseen (code))
    return "a sign that is not seen: delete it";
  /* U+2000 to U+2BFF hold punctuation, signs of money and of calculation.  */
  return code >= 0xAA && (code < 0x2000 || code >= 0x2C00)
         ? "letters outside a-z stand in double quotes" : NULL;
}

/* A text in quotes; it ends in its line.  */
static void
scan_text (struct scanner *s, struct token *t)
{
  t->kind = TOKEN_TEXT;
  s->offset++;
  for (;;) {
    char c = byte_at (s, s->offset);
    if (s->offset >= s->n || c == '\n') {
      bad (t, MESSAGE_TEXT_OPEN, NULL);
      return;
    }
    size_t length = 1;
    unsigned code = (unsigned char) c;
    if (code >= 0x80)
      code = character_at (s, s->offset, &length);
    if (is_unseen (code) && c != '\t') {
      t->start = s->offset;
      t->at.first = column_of (s);
      pass (s, length);
      bad (t, MESSAGE_CHARACTER, hint_for_character (code));
      return;
    }
    pass (s, length);
    if (c == '"')
      return;
  }
}

/* One sign of LENGTH bytes.  */
static void
sign (struct scanner *s, struct token *t, enum token_kind kind, size_t length)
{
  t->kind = kind;
  s->offset += length;
}

/* A character outside ASCII.  */
static void
scan_wide (struct scanner *s, struct token *t)
{
  size_t length;
  unsigned code = character_at (s, s->offset, &length);
  char next = byte_at (s, s->offset + length);
  pass (s, length);
  switch (code) {
  case PLUS_MINUS: t->kind = TOKEN_SPREAD; return;
  case MIDDLE_DOT: case TIMES_SIGN: case DOT_OPERATOR: t->kind = TOKEN_TIMES; return;
  case MINUS_SIGN: t->kind = TOKEN_MINUS; return;
  case LESS_OR_EQUAL: t->kind = TOKEN_AT_MOST; return;
  case GREATER_OR_EQUAL: t->kind = TOKEN_AT_LEAST; return;
  case DEGREE_C: case DEGREE_F: case MICRO: case GREEK_MU: t->kind = TOKEN_SIGN; return;
  default: break;
  }
  if (code == DEGREE && (next == 'C' || next == 'F'))
    t->kind = TOKEN_SIGN;
  else
    bad (t, MESSAGE_CHARACTER, hint_for_character (code));
}

static void
scan_sign (struct scanner *s, struct token *t)
{
  char c = s->text[s->offset], next = byte_at (s, s->offset + 1);
  switch (c) {
  case ';': sign (s, t, TOKEN_SEMICOLON, 1); return;
  case ',': sign (s, t, TOKEN_COMMA, 1); return;
  case ':': sign (s, t, TOKEN_COLON, 1); return;
  case '=': sign (s, t, TOKEN_EQUALS, 1); return;
  case '(': sign (s, t, TOKEN_OPEN, 1); return;
  case ')': sign (s, t, TOKEN_CLOSE, 1); return;
  case '%': sign (s, t, TOKEN_SIGN, 1); return;
  case '*': sign (s, t, TOKEN_TIMES, 1); return;
  case '/': sign (s, t, TOKEN_OVER, 1); return;
  case '+':
    if (next == '-')
      sign (s, t, TOKEN_SPREAD, 2);
    else if (next == '/' && byte_at (s, s->offset + 2) == '-')
      sign (s, t, TOKEN_SPREAD, 3);
    else
      sign (s, t, TOKEN_PLUS, 1);
    return;
  case '-':
    sign (s, t, TOKEN_MINUS, next == '>' ? 2 : 1);
    if (next == '>')
      bad (t, MESSAGE_CHARACTER, "write 'in'");
    return;
  case '<': sign (s, t, next == '=' ? TOKEN_AT_MOST : TOKEN_LESS, next == '=' ? 2 : 1); return;
  case '>':
    if (next == '=') {
      sign (s, t, TOKEN_AT_LEAST, 2);
      return;
    }
    break;
  case '.':
    if (next == '.' && byte_at (s, s->offset + 2) != '.') {
      sign (s, t, TOKEN_RANGE, 2);
      return;
    }
    break;
  default: break;
  }
  s->offset++;
  bad (t, MESSAGE_CHARACTER, hint_for_character ((unsigned char) c));
}

void
scan_next (struct scanner *s, struct token *t)
{
  size_t before = s->offset;
  while (skip_one (s))
    continue;
  *t = (struct token) { .kind = TOKEN_END, .start = s->offset, .end = s->offset };
  t->blank = s->offset != before || before == 0;
  t->at = (struct place) { s->line, column_of (s), column_of (s) };
  if (s->offset == s->n)
    return;
  char c = s->text[s->offset], next = byte_at (s, s->offset + 1);
  if (byte_is_letter (c))
    scan_word (s, t);
  else if (byte_is_digit (c) || (c == '.' && byte_is_digit (next)))
    scan_number (s, t);
  else if (c == '"')
    scan_text (s, t);
  else if ((unsigned char) c >= 0x80)
    scan_wide (s, t);
  else
    scan_sign (s, t);
  t->end = s->offset;
  t->at.last = column_of (s) - 1;
}

/* Does a unit go on with the '/' or '*' at I-1: is what stands at I the begin of another unit,
   or the figure of one (gr/100scf)?                                                             */
static bool
factor_follows (const struct scanner *s, size_t i, int depth)
{
  size_t length;
  char c = byte_at (s, i);
  if (byte_is_letter (c) || c == '%' || c == '(')
    return true;
  if ((unsigned char) c >= 0x80) {
    unsigned code = character_at (s, i, &length);
    return code == MICRO || code == GREEK_MU || code == DEGREE || code == DEGREE_C
           || code == DEGREE_F;
  }
  if (!byte_is_digit (c))
    return false;
  while (byte_is_digit (byte_at (s, i)))
    i++;
  return depth > 0 || byte_is_letter (byte_at (s, i));
}

/* Is the bracket at I closed before the next blank?  Brackets inside are looked at, too.  */
static bool
bracket_closes (const struct scanner *s, size_t i)
{
  enum { FAR = 64 };              /* no unit has a longer bracket */
  int depth = 0;
  for (size_t k = i; k < i + FAR; k++) {
    char c = byte_at (s, k);
    depth += (c == '(') - (c == ')');
    if (depth == 0)
      return true;
    if (c == ' ' || c == '\t' || c == '\n' || c == '\0' || c == ',' || c == ';')
      return false;
  }
  return false;
}

/* Bytes of the character outside ASCII at I if it may stand in a unit, else 0.  */
static size_t
wide_in_unit (const struct scanner *s, size_t i, int depth)
{
  size_t length;
  unsigned code = character_at (s, i, &length);
  char next = byte_at (s, i + length);
  switch (code) {
  case MIDDLE_DOT: case TIMES_SIGN: case DOT_OPERATOR:
    return factor_follows (s, i + length, depth) ? length : 0;
  case DEGREE:
    return next == 'C' || next == 'F' ? length : 0;
  case MICRO: case GREEK_MU: case DEGREE_C: case DEGREE_F: case SUPERSCRIPT_1:
  case SUPERSCRIPT_2: case SUPERSCRIPT_3:
    return length;
  default:
    return code == SUPERSCRIPT_0 || (code >= SUPERSCRIPT_4 && code <= SUPERSCRIPT_MINUS)
           || (code >= SUBSCRIPT_0 && code <= SUBSCRIPT_9) ? length : 0;
  }
}

/* Bytes of what goes on a unit at the offset, 0 if it ends here.  */
static size_t
unit_goes_on (const struct scanner *s, int *depth)
{
  char c = byte_at (s, s->offset), next = byte_at (s, s->offset + 1);
  if (byte_is_letter (c) || byte_is_digit (c) || c == '%' || c == '_')
    return 1;
  if (c == '/' || c == '*')
    return factor_follows (s, s->offset + 1, *depth);
  if (c == '^')
    return next == '-' ? 2 : 1;
  if (c == '.')
    return byte_is_letter (next) || next == '%';
  if (c == '(' && bracket_closes (s, s->offset)) {
    ++*depth;
    return 1;
  }
  if (c == ')' && *depth > 0) {
    --*depth;
    return 1;
  }
  return (unsigned char) c >= 0x80 ? wide_in_unit (s, s->offset, *depth) : 0;
}

void
scan_unit (struct scanner *s, const struct token *start, struct token *unit)
{
  int depth = 0;
  assert (start->kind == TOKEN_WORD || start->kind == TOKEN_SIGN);
  *unit = *start;
  unit->kind = TOKEN_WORD;
  s->offset = start->start;
  s->line = start->at.line;
  s->base = start->start + 1 - (size_t) start->at.first;
  for (size_t bytes; (bytes = unit_goes_on (s, &depth)) > 0; ) {
    bool wide = (unsigned char) s->text[s->offset] >= 0x80;
    s->offset += bytes;
    if (wide) {
      s->base += bytes - 1;
      unit->twins = true;
    }
  }
  unit->end = s->offset;
  unit->at.last = column_of (s) - 1;
}
