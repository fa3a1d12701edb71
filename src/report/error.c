/* A fault as text: where, what is wrong, how to go on.

   At a prompt the bracket stands under the typed words:

      gas | 1200 Nm3/hr of raw in kg/h
                 '----'
        x   error: no unit is called 'Nm3/hr'; did you mean 'Nm3/h'?
            1200 Nm3/h of raw in kg/h

   In a file the place comes first, in the open form editors read, then the quoted line:

      morning.gw:4:6: no unit is called 'Nm3/hr'; did you mean 'Nm3/h'?
            1200 Nm3/hr of raw in kg/h
                 '----'
            1200 Nm3/h of raw in kg/h                                                            */
#include "config.h"
#include "report/report_private.h"

#include <string.h>

#include "support/fault.h"
#include "support/text.h"

enum {
  PHRASE_WIDTH = 73,            /* a sentence and its phrase share a line up to this width */
  QUOTE_MOST = 200,             /* a longer line is quoted in part, */
  QUOTE_BEFORE = 80,            /* so many characters before the place */
  QUOTE_WINDOW = 160            /* and so many in all */
};

/* The bracket under characters FIRST to LAST (from 1) of LINE, SHIFT places from the left.  */
static void
bracket_add (struct text *out, const struct report_style *style, const char *line, size_t shift,
             size_t first, size_t last)
{
  const size_t from = shown_places (style, line, first - 1);
  const size_t to = shown_places (style, line, last);
  text_add_repeated (out, ' ', shift + from);
  text_add_char (out, '\'');
  if (to > from + 1) {
    text_add_repeated (out, '-', to - from - 2);
    text_add_char (out, '\'');
  }
  text_add_char (out, '\n');
}

/* Bytes the first CHARACTERS characters of STRING take, at most all.  */
static size_t
bytes_of (const char *string, size_t characters)
{
  const size_t n = strlen (string);
  size_t at = 0;
  for (; characters > 0 && at < n; characters--) {
    unsigned code;
    const size_t length = utf8_decode (string + at, n - at, &code);
    at += length > 0 ? length : 1;
  }
  return at;
}

/* The line again, or of a long one what is around FIRST, and the bracket.  */
static void
quote_add (struct text *out, const struct report_style *style, const char *line, size_t first,
           size_t last)
{
  const size_t length = utf8_characters (line, strlen (line));
  size_t start = 0, end = length;
  if (length > QUOTE_MOST) {
    start = first > QUOTE_BEFORE ? first - QUOTE_BEFORE : 0;
    if (start + QUOTE_WINDOW > length)
      start = length - QUOTE_WINDOW;
    end = start + QUOTE_WINDOW;
  }
  const size_t from = bytes_of (line, start), to = bytes_of (line, end);
  text_add_repeated (out, ' ', MARGIN);
  text_add (out, start > 0 ? "..." : "");
  shown_add_bytes (out, style, line + from, to - from);
  text_add (out, end < length ? "...\n" : "\n");
  if (first == 0)
    return;
  if (first <= start)
    first = start + 1;                  /* cannot be, but a bracket never runs off to the left */
  if (last > end && end < length)
    last = end;
  bracket_add (out, style, line + from, MARGIN + (start > 0 ? 3 : 0), first - start,
               last > first ? last - start : first - start);
}

/* A text of one or more lines, each where printed text begins.  What is to be typed is not
   folded.                                                                                       */
static void
lines_add (struct text *out, const struct report_style *style, const struct text *lines,
           bool folded)
{
  for (size_t at = 0; at < lines->length;) {
    const size_t n = strcspn (lines->bytes + at, "\n");
    text_add_repeated (out, ' ', MARGIN);
    const struct fold fold = { out->length, MARGIN + 2 };
    shown_add_bytes (out, style, lines->bytes + at, n);
    if (folded)
      fold_line (out, style, fold);
    text_add_char (out, '\n');
    at += n + 1;
  }
}

/* The sentence with what belongs to its line, then each further part on its own.  */
static void
words_add (struct text *out, const struct report_style *style, const struct fault_words *words,
           size_t used, bool before_quote)
{
  const bool joined = words->phrase.length > 0 && strchr (words->phrase.bytes, '\n') == NULL
                      && used + words->sentence.length + 2 + words->phrase.length <= PHRASE_WIDTH;
  if (before_quote) {
    const struct fold fold = fold_here (out);
    shown_add (out, style, words->sentence.bytes);
    if (joined) {
      text_add (out, "; ");
      shown_add (out, style, words->phrase.bytes);
    }
    if (used > 0)                       /* behind a place in a file the line stays whole */
      fold_line (out, style, fold);
    text_add_char (out, '\n');
    return;
  }
  if (!joined)
    lines_add (out, style, &words->phrase, true);
  lines_add (out, style, &words->line, false);
}

static void
place_add (struct text *out, const struct report_style *style, const struct fault *fault,
           const char *file)
{
  shown_add (out, style, file);
  if (fault->at.line > 0)
    text_add_format (out, ":%d", fault->at.line);
  if (fault->at.line > 0 && fault->at.first > 0)
    text_add_format (out, ":%d", fault->at.first);
  text_add (out, ": ");
}

void
report_fault_text (struct text *out, const struct report_style *style, const struct fault *fault,
                   const struct report_origin *origin)
{
  static const char word[] = "error: ";
  const size_t first = fault->at.first > 0 ? (size_t) fault->at.first : 0;
  const size_t last = fault->at.last > fault->at.first ? (size_t) fault->at.last : first;
  const char *line = origin->line != NULL ? origin->line : "";
  struct fault_words words;
  fault_words_init (&words, fault, origin->line != NULL ? origin->line : origin->statement);
  if (origin->file != NULL) {
    place_add (out, style, fault, origin->file);
    words_add (out, style, &words, 0, true);
    if (*line != '\0')
      quote_add (out, style, line, first, last);
    words_add (out, style, &words, 0, false);
  } else {
    if (origin->quote && *line != '\0')
      quote_add (out, style, line, first, last);
    else if (first > 0)
      bracket_add (out, style, line, (size_t) origin->column_shift, first, last);
    text_add_repeated (out, ' ', MARGIN_MARK);
    text_add_char (out, 'x');
    text_add_repeated (out, ' ', MARGIN - MARGIN_MARK - 1);
    text_add (out, word);
    words_add (out, style, &words, sizeof word - 1, true);
    words_add (out, style, &words, sizeof word - 1, false);
  }
  fault_words_clear (&words);
}
