#include "config.h"
#include "support/message.h"

#include <assert.h>
#include <string.h>
#include "support/text.h"

struct row { const char *name, *sentence, *way_on; enum severity severity; };

static const struct row rows[] = {
  [MESSAGE_NONE] = { "", "", "", SEVERITY_ERROR },
#define MESSAGE_ROW(kind, name, severity, sentence, way_on) \
  [MESSAGE_##kind] = { name, sentence, way_on, SEVERITY_##severity },
#include "message_rows.h"
#undef MESSAGE_ROW
};

_Static_assert (sizeof rows / sizeof rows[0] == MESSAGE_COUNT, "a sentence for every kind");

static const struct row *
row_of (enum message kind)
{
  assert ((size_t) kind < MESSAGE_COUNT);
  return &rows[kind];
}

const char *
message_name (enum message kind)
{
  return row_of (kind)->name;
}

enum severity
message_severity (enum message kind)
{
  return row_of (kind)->severity;
}

const char *
message_sentence (enum message kind)
{
  return row_of (kind)->sentence;
}

const char *
message_way_on (enum message kind)
{
  return row_of (kind)->way_on;
}

/* The number of the fact whose place, {1} to {4}, AT points to; 0: it is no place.  */
static size_t
place_number (const char *at)
{
  if (at[0] == '{' && at[1] >= '1' && at[1] < '1' + MESSAGE_FACTS && at[2] == '}')
    return (size_t) (at[1] - '0');
  return 0;
}

void
message_write (struct text *text, const char *pattern, const char *const facts[MESSAGE_FACTS])
{
  while (*pattern != '\0') {
    size_t plain = strcspn (pattern, "{");
    size_t number;

    text_add_bytes (text, pattern, plain);
    pattern += plain;
    number = *pattern == '{' ? place_number (pattern) : 0;
    if (number > 0) {
      if (facts[number - 1] != NULL)
        text_add (text, facts[number - 1]);
      pattern += strlen ("{1}");
    } else if (*pattern == '{') {
      text_add_char (text, '{');
      pattern++;
    }
  }
}
