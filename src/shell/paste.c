#include "config.h"
#include "shell/paste.h"

#include <string.h>

#include "support/text.h"

size_t
paste_rail (const char *line)
{
  static const char *const rails[] = { "gas | ", "gas*| ", "    | ", "   || " };

  for (size_t i = 0; i < sizeof rails / sizeof rails[0]; i++) {
    const size_t whole = strlen (rails[i]), bare = whole - 1;

    if (strncmp (line, rails[i], whole) == 0)
      return whole;
    /* The blank behind it may be lost at the end of a line.  */
    if (strncmp (line, rails[i], bare) == 0 && (line[bare] == '\0' || line[bare] == '\n'))
      return bare;
  }
  return 0;
}

static bool
is_blank (const char *line, size_t n)
{
  for (size_t i = 0; i < n; i++) {
    if (line[i] != ' ' && line[i] != '\t' && line[i] != '\r')
      return false;
  }
  return true;
}

/* Does a line behind the first carry a rail?  */
static bool
is_piece_of_session (const char *typed)
{
  for (const char *end = strchr (typed, '\n'); end != NULL; end = strchr (end + 1, '\n')) {
    if (paste_rail (end + 1) > 0)
      return true;
  }
  return false;
}

/* Takes the first rail off LINE, and another behind it: the prompt's own may have been copied onto
   the line.                                                                                      */
static size_t
rails_of (const char *line)
{
  size_t all = 0, one;

  while ((one = paste_rail (line + all)) > 0)
    all += one;
  return all;
}

bool
paste_clean (struct text *typed, size_t *left_out)
{
  bool changed = false;
  struct text clean;

  *left_out = 0;
  if (typed->length == 0)
    return false;
  const bool piece = is_piece_of_session (typed->bytes);
  text_init (&clean);
  for (const char *line = typed->bytes; line != NULL;) {
    const char *end = strchr (line, '\n');
    const size_t n = end != NULL ? (size_t) (end - line) : strlen (line);
    const size_t rail = rails_of (line);
    const bool is_first = line == typed->bytes;

    if (rail == 0 && piece && !is_first) {
      *left_out += !is_blank (line, n);
      changed = true;
    } else {
      if (!is_first)
        text_add_char (&clean, '\n');
      text_add_bytes (&clean, line + rail, n - rail);
      changed = changed || rail > 0;
    }
    line = end != NULL ? end + 1 : NULL;
  }
  text_empty (typed);
  text_add_bytes (typed, clean.bytes != NULL ? clean.bytes : "", clean.length);
  text_clear (&clean);
  return changed;
}
