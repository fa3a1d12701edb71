/* Lines that are too long for the page, folded at blanks.  */
#include "config.h"
#include "report/report_private.h"

#include <string.h>

#include "support/text.h"

enum { LEAST_WIDTH = 40 /* narrower than that nothing is readable */ };

size_t
line_width (const struct report_style *style)
{
  return style->width == 0 || style->width > LINE_WIDTH ? LINE_WIDTH
         : style->width < LEAST_WIDTH ? LEAST_WIDTH : style->width;
}

/* Where the line that OUT ends in begins.  */
static size_t
line_start (const struct text *out)
{
  size_t at = out->length;
  while (at > 0 && out->bytes[at - 1] != '\n')
    at--;
  return at;
}

/* Bytes of an escape for a weight (ISO/IEC 6429: ESC [ ... m), which takes no place; 0: none.  */
static size_t
escape_length (const char *at)
{
  return at[0] == '\033' && at[1] == '[' ? strcspn (at, "m") + 1 : 0;
}

/* Characters of N bytes of a line.  */
static size_t
characters (const char *bytes, size_t n)
{
  size_t count = 0;
  for (size_t at = 0; at < n; at++) {
    const size_t escape = escape_length (bytes + at);
    if (escape > 0)
      at += escape - 1;
    else
      count += (bytes[at] & 0xC0) != 0x80;
  }
  return count;
}

size_t
column_here (const struct text *out)
{
  const size_t start = line_start (out);
  return out->length > start ? characters (out->bytes + start, out->length - start) : 0;
}

/* Bytes of the word at WORDS.  A figure and what is behind it, its unit, are one word.  */
static size_t
word_length (const char *words)
{
  size_t n = strcspn (words, " ");
  const bool figure = n > 0 && words[n - 1] >= '0' && words[n - 1] <= '9';
  if (figure && words[n] == ' ' && words[n + 1] != ' ' && words[n + 1] != '\0')
    n += 1 + strcspn (words + n + 1, " ");
  return n;
}

struct fold
fold_here (const struct text *out)
{
  return (struct fold) { out->length, column_here (out) };
}

void
fold_line (struct text *out, const struct report_style *style, struct fold fold)
{
  const size_t room = line_width (style), from = fold.from;
  const size_t hang = 3 * fold.hang > 2 * room ? MARGIN + 4 : fold.hang;
  struct text words;
  if (out->length <= from || column_here (out) <= room)
    return;
  text_init (&words);
  text_add_bytes (&words, out->bytes + from, out->length - from);
  size_t end = from;
  while (end > 0 && out->bytes[end - 1] == ' ')
    end--;
  size_t blanks = from - end;
  out->length = end;
  size_t column = column_here (out);
  bool begun = end > line_start (out);
  for (const char *at = words.bytes; *at != '\0';) {
    const size_t n = word_length (at), width = characters (at, n);
    if (begun && column + blanks + width > room) {
      text_add_char (out, '\n');
      column = blanks = hang;
    } else
      column += blanks;
    text_add_repeated (out, ' ', blanks);
    text_add_bytes (out, at, n);
    column += width;
    begun = true;
    at += n;
    blanks = strspn (at, " ");
    at += blanks;
  }
  text_clear (&words);
}
