#include "config.h"
#include "support/text.h"

#include <assert.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include "support/memory.h"

enum { FIRST_ROOM = 128 };                /* bytes */

void
text_init (struct text *text)
{
  *text = (struct text) { NULL, 0, 0 };
}

void
text_clear (struct text *text)
{
  memory_release (text->bytes);
  text_init (text);
}

void
text_empty (struct text *text)
{
  text->length = 0;
  if (text->bytes != NULL)
    text->bytes[0] = '\0';
}

/* Makes room for N more bytes and the null byte; returns where they go.  */
static char *
reserve (struct text *text, size_t n)
{
  size_t needed = memory_sum (memory_sum (text->length, n), 1);

  if (needed > text->room) {
    size_t room = text->room > 0 ? text->room : FIRST_ROOM;

    while (room < needed)
      room = memory_sum (room, room);
    text->bytes = memory_resize (text->bytes, room, 1);
    text->room = room;
  }
  return text->bytes + text->length;
}

/* Takes in N bytes that were written where reserve said.  */
static void
commit (struct text *text, size_t n)
{
  text->length += n;
  text->bytes[text->length] = '\0';
}

void
text_add_bytes (struct text *text, const char *bytes, size_t n)
{
  char *to = reserve (text, n);

  if (n > 0)
    memcpy (to, bytes, n);
  commit (text, n);
}

void
text_add (struct text *text, const char *string)
{
  text_add_bytes (text, string, strlen (string));
}

void
text_add_char (struct text *text, char c)
{
  *reserve (text, 1) = c;
  commit (text, 1);
}

void
text_add_repeated (struct text *text, char c, size_t times)
{
  memset (reserve (text, times), c, times);
  commit (text, times);
}

void
text_add_arguments (struct text *text, const char *format, va_list arguments)
{
  char *to = reserve (text, FIRST_ROOM);
  size_t room = text->room - text->length;
  int length;
  va_list again;

  va_copy (again, arguments);
  length = vsnprintf (to, room, format, arguments);
  assert (length >= 0);
  if ((size_t) length >= room) {
    to = reserve (text, (size_t) length);
    vsnprintf (to, (size_t) length + 1, format, again);
  }
  va_end (again);
  commit (text, (size_t) length);
}

void
text_add_format (struct text *text, const char *format, ...)
{
  va_list arguments;

  va_start (arguments, format);
  text_add_arguments (text, format, arguments);
  va_end (arguments);
}

void
text_add_left (struct text *text, const char *string, size_t width)
{
  size_t n = strlen (string), characters = utf8_characters (string, n);

  text_add_bytes (text, string, n);
  text_add_repeated (text, ' ', characters < width ? width - characters : 0);
}
