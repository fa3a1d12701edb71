/* From bytes to tokens, one at a time.

   A token knows where it stands and whether a blank stands before it; it borrows the text.  What
   cannot be a token is one all the same (TOKEN_BAD) and says why, so that a fault further left
   is reported first.  In the place of a unit the same bytes read differently: `kg/h` is one
   unit but three tokens; the parser, which knows the place, asks for it by scan_unit.           */
#ifndef LANGUAGE_PARSE_SCAN_H
#define LANGUAGE_PARSE_SCAN_H

#include <stdbool.h>
#include <stddef.h>
#include "support/fault.h"

enum token_kind {
  TOKEN_END, TOKEN_SEMICOLON, TOKEN_NUMBER, TOKEN_WORD, TOKEN_TEXT,
  TOKEN_SIGN,                     /* what opens a unit and is no letter: % degree micro */
  TOKEN_PLUS, TOKEN_MINUS, TOKEN_TIMES, TOKEN_OVER, TOKEN_SPREAD, TOKEN_EQUALS, TOKEN_COMMA,
  TOKEN_COLON, TOKEN_OPEN, TOKEN_CLOSE, TOKEN_LESS, TOKEN_AT_MOST, TOKEN_AT_LEAST,
  TOKEN_RANGE,                    /* between the ends of a range: 48 .. 51 */
  TOKEN_BAD
};

struct token {
  enum token_kind kind;
  size_t start, end;              /* its bytes in the text */
  struct place at;
  bool blank;                     /* a blank or a line end stands before it */
  bool twins;                     /* of a word: holds characters outside ASCII */
  enum message wrong;             /* of TOKEN_BAD: the kind of fault */
  const char *hint;               /* of TOKEN_BAD: the way on, or null */
};

struct scanner {
  const char *text;
  size_t n, offset;
  int line;
  size_t base;                    /* column = offset - base + 1 */
};

/* Over the N bytes at TEXT, borrowed, that begin in line LINE of their source.  TEXT must be
   valid UTF-8 without null bytes.                                                               */
void scanner_init (struct scanner *, const char *text, size_t n, int line);

/* The next token.  At the end it is TOKEN_END, again and again.  */
void scan_next (struct scanner *, struct token *);

/* Reads the bytes from START's on as a unit (the longest run that may be one) into *UNIT, of
   kind TOKEN_WORD, and goes on behind it.                                                       */
void scan_unit (struct scanner *, const struct token *start, struct token *unit);
/* Are the N bytes at TEXT one character that nobody would see?  *CODE: which.  */
bool scan_is_unseen (const char *text, size_t n, unsigned *code) MUST_CHECK;

/* Is the byte a letter from a to z or A to Z; a digit?  */
static inline bool
byte_is_letter (char c)
{
  return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

static inline bool
byte_is_digit (char c)
{
  return c >= '0' && c <= '9';
}

#endif
