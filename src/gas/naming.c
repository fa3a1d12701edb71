#include "config.h"
#include "gas/naming.h"

#include <stdbool.h>
#include <string.h>

/* One byte of OUT from the bytes at NAME; how many of them it took.  Subscript digits U+2080 to
   U+2089 are three bytes of UTF-8: E2 82 80 to E2 82 89.                                       */
static size_t
take_byte (const char *name, size_t n, char *out)
{
  if (n >= 3 && memcmp (name, "\xE2\x82", 2) == 0) {
    unsigned digit = (unsigned char) name[2] - 0x80u;

    if (digit <= 9) {
      *out = (char) ('0' + digit);
      return 3;
    }
  }
  *out = name[0];
  return 1;
}

static char
lower (char c)
{
  return c >= 'A' && c <= 'Z' ? (char) (c - 'A' + 'a') : c;
}

static size_t
rewrite (const char *name, size_t n, char out[NAMING_ROOM], bool small, bool squeeze)
{
  size_t length = 0;

  while (n > 0) {
    char c;
    size_t taken = take_byte (name, n, &c);

    name += taken;
    n -= taken;
    if (squeeze && (c == ' ' || c == '-' || c == '_'))
      continue;
    if (length + 1 == NAMING_ROOM)
      return 0;
    out[length++] = small ? lower (c) : c;
  }
  out[length] = '\0';
  return length;
}

size_t
naming_plain (const char *name, size_t n, char out[NAMING_ROOM])
{
  return rewrite (name, n, out, false, false);
}

size_t
naming_lower (const char *name, size_t n, char out[NAMING_ROOM])
{
  return rewrite (name, n, out, true, false);
}

size_t
naming_squeezed (const char *name, size_t n, char out[NAMING_ROOM])
{
  return rewrite (name, n, out, true, true);
}

size_t
naming_first (const char *list, const char **next)
{
  const char *bar = strchr (list, '|');

  *next = bar == NULL ? NULL : bar + 1;
  return bar == NULL ? strlen (list) : (size_t) (bar - list);
}
