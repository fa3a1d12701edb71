/* Text: growing buffers, UTF-8, and how far two words are apart.

   All text is UTF-8.  Columns and widths count characters (code points), never bytes.          */
#ifndef SUPPORT_TEXT_H
#define SUPPORT_TEXT_H

#include <stdarg.h>
#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

/* A growing text, always ended by a null byte once something was added.  The caller owns the
   struct; text_clear gives the memory back, text_empty keeps it for reuse.                    */
struct text { char *bytes; size_t length, room; };

void text_init (struct text *);
void text_clear (struct text *);
void text_empty (struct text *);
void text_add (struct text *, const char *string);
void text_add_bytes (struct text *, const char *bytes, size_t n);
void text_add_char (struct text *, char);
void text_add_repeated (struct text *, char, size_t times);
void text_add_format (struct text *, const char *format, ...) PRINTF_LIKE (2, 3);
void text_add_arguments (struct text *, const char *format, va_list) PRINTF_LIKE (2, 0);
/* Adds STRING and blanks behind it to WIDTH characters.  */
void text_add_left (struct text *, const char *string, size_t width);

/* Characters in the first N bytes of TEXT.  */
size_t utf8_characters (const char *text, size_t n);

/* Reads one code point at TEXT (N bytes left) into *CODE; returns its length in bytes, 0 where
   the bytes are no valid UTF-8 (RFC 3629: no surrogates, no overlong forms).                  */
size_t utf8_decode (const char *text, size_t n, unsigned *code) MUST_CHECK;

/* Offset of the first byte that is not valid UTF-8, or N.  */
size_t utf8_first_bad (const char *text, size_t n);

/* Number of single-character insertions, deletions, changes and swaps of neighbours between two
   words (Damerau, Comm. ACM 7 (1964) 171), counted by bytes; stops counting above LIMIT and
   returns LIMIT + 1.                                                                          */
size_t text_distance (const char *a, const char *b, size_t limit);

/* The largest distance at which one name may be offered for another: 1 + length/4.  */
size_t text_reach (const char *word);

#endif
