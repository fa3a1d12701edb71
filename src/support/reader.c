#include "config.h"
#include "support/reader.h"

#include <string.h>
#include "support/text.h"

/* How a physical line ends.  A remark alone says nothing: what was open before it stays open.  A
   line of blanks closes whatever was open, which is the way out at a prompt.                    */
enum ending { ENDING_BLANK, ENDING_REMARK, ENDING_CLOSED, ENDING_COMMA, ENDING_BACKSLASH };

static bool
is_blank (char c)
{
  return c == ' ' || c == '\t' || c == '\r';
}

/* The end of LINE without the blanks behind it.  */
static size_t
trimmed (const char *line, size_t n)
{
  while (n > 0 && is_blank (line[n - 1]))
    n--;
  return n;
}

/* Where the comment of LINE begins, or N; *IN_QUOTES: does a text stay open at the end?  */
static size_t
comment_start (const char *line, size_t n, bool *in_quotes)
{
  bool quoted = false;
  size_t i = 0;

  for (; i < n; i++) {
    if (line[i] == '"')
      quoted = !quoted;
    else if (line[i] == '#' && !quoted)
      break;
  }
  *in_quotes = quoted;
  return i;
}

/* *AT is where its last sign stands, if it has one.  */
static enum ending
ending_of (const char *line, size_t n, size_t *at)
{
  bool in_quotes;
  size_t last = trimmed (line, n);
  size_t start;

  if (last == 0)
    return ENDING_BLANK;
  if (line[last - 1] != ',' && line[last - 1] != '\\' && memchr (line, '#', last) == NULL) {
    *at = last - 1;                       /* most lines: nothing to look for */
    return ENDING_CLOSED;
  }
  start = comment_start (line, last, &in_quotes);
  last = trimmed (line, start);
  if (last == 0)
    return ENDING_REMARK;
  *at = last - 1;
  if (in_quotes)
    return ENDING_CLOSED;
  if (line[last - 1] == ',')
    return ENDING_COMMA;
  return line[last - 1] == '\\' ? ENDING_BACKSLASH : ENDING_CLOSED;
}

/* Whether the logical line is open behind a line of that ending.  */
static bool
stays_open (bool open, enum ending ending)
{
  if (ending == ENDING_REMARK)
    return open;
  return ending == ENDING_COMMA || ending == ENDING_BACKSLASH;
}

/* Takes a line end that the source has left, and before the very first line a byte-order mark. */
static void
clean_line (struct text *line, bool is_first)
{
  static const char mark[] = "\xEF\xBB\xBF";
  const size_t mark_length = sizeof mark - 1;

  if (line->length > 0 && line->bytes[line->length - 1] == '\n')
    line->bytes[--line->length] = '\0';
  if (line->length > 0 && line->bytes[line->length - 1] == '\r')
    line->bytes[--line->length] = '\0';
  if (is_first && line->length >= mark_length && memcmp (line->bytes, mark, mark_length) == 0) {
    line->length -= mark_length;
    memmove (line->bytes, line->bytes + mark_length, line->length + 1);
  }
}

/* Fetches a physical line into LINE, which is empty.  OPEN becomes whether the next belongs to
   it; a '\' that says so becomes a blank, so that what follows keeps its column.               */
static bool
fetch_line (struct reader *reader, struct text *line, bool *open)
{
  enum ending ending;
  size_t at = 0;

  if (!reader->fetch (reader->source, *open, line))
    return false;
  clean_line (line, reader->line == 0);
  reader->line++;
  ending = line->length > 0 ? ending_of (line->bytes, line->length, &at) : ENDING_BLANK;
  if (ending == ENDING_BACKSLASH)
    line->bytes[at] = ' ';
  *open = stays_open (*open, ending);
  return true;
}

bool
reader_next (struct reader *reader, struct text *text, int *first)
{
  struct text line;
  bool open = false;

  text_empty (text);
  if (!fetch_line (reader, text, &open))
    return false;
  *first = reader->line;
  if (!open)
    return true;

  text_init (&line);
  while (open && fetch_line (reader, &line, &open)) {
    text_add_char (text, '\n');
    text_add_bytes (text, line.bytes, line.length);
    text_empty (&line);
  }
  text_clear (&line);
  return true;
}

static bool
fetch_from_string (void *source, bool continues, struct text *line)
{
  struct reader_string *string = source;
  size_t left = string->length - string->next;
  const char *start, *end;

  (void) continues;
  if (left == 0)
    return false;
  start = string->bytes + string->next;
  end = memchr (start, '\n', left);
  if (end == NULL) {
    text_add_bytes (line, start, left);
    string->next = string->length;
  } else {
    text_add_bytes (line, start, (size_t) (end - start));
    string->next += (size_t) (end - start) + 1;
  }
  return true;
}

struct reader
reader_of_string (struct reader_string *string, const char *name)
{
  return (struct reader) { name, fetch_from_string, string, 0 };
}
