#include "config.h"
#include "support/text.h"

#include <stdint.h>
#include <string.h>

/* How many of the first N bytes are ASCII, looked at eight at a time.  */
static size_t
ascii_bytes (const char *text, size_t n)
{
  const uint64_t high_bits = UINT64_C (0x8080808080808080);
  size_t i = 0;

  for (; n - i >= sizeof (uint64_t); i += sizeof (uint64_t)) {
    uint64_t eight;

    memcpy (&eight, text + i, sizeof eight);
    if ((eight & high_bits) != 0)
      break;
  }
  while (i < n && (unsigned char) text[i] < 0x80)
    i++;
  return i;
}

/* RFC 3629, section 4, as a table by the first byte: how long the sequence is, and between what
   bounds its second byte stands (they keep overlong forms, surrogates and what lies beyond
   U+10FFFF out).  Every later byte is 80..BF.                                                  */
struct form { unsigned char first, last, length, second_least, second_most; };

static const struct form forms[] = {
  { 0xC2, 0xDF, 2, 0x80, 0xBF },
  { 0xE0, 0xE0, 3, 0xA0, 0xBF },
  { 0xE1, 0xEC, 3, 0x80, 0xBF },
  { 0xED, 0xED, 3, 0x80, 0x9F },
  { 0xEE, 0xEF, 3, 0x80, 0xBF },
  { 0xF0, 0xF0, 4, 0x90, 0xBF },
  { 0xF1, 0xF3, 4, 0x80, 0xBF },
  { 0xF4, 0xF4, 4, 0x80, 0x8F },
};

static const struct form *
form_of (unsigned char first)
{
  for (size_t i = 0; i < sizeof forms / sizeof forms[0]; i++)
    if (first >= forms[i].first && first <= forms[i].last)
      return &forms[i];
  return NULL;
}

size_t
utf8_decode (const char *text, size_t n, unsigned *code)
{
  unsigned char first, second;
  unsigned made;
  const struct form *form;

  if (n == 0)
    return 0;
  first = (unsigned char) text[0];
  if (first < 0x80) {
    *code = first;
    return 1;
  }
  form = form_of (first);
  if (form == NULL || n < form->length)
    return 0;
  second = (unsigned char) text[1];
  if (second < form->second_least || second > form->second_most)
    return 0;
  made = first & (0x7Fu >> form->length);
  made = made << 6 | (second & 0x3Fu);
  for (size_t i = 2; i < form->length; i++) {
    unsigned char later = (unsigned char) text[i];

    if ((later & 0xC0) != 0x80)
      return 0;
    made = made << 6 | (later & 0x3Fu);
  }
  *code = made;
  return form->length;
}

size_t
utf8_characters (const char *text, size_t n)
{
  size_t characters = 0;

  for (size_t i = 0; i < n;) {
    size_t plain = ascii_bytes (text + i, n - i);
    unsigned code;

    characters += plain;
    i += plain;
    if (i < n) {
      size_t length = utf8_decode (text + i, n - i, &code);

      characters++;
      i += length > 0 ? length : 1;
    }
  }
  return characters;
}

size_t
utf8_first_bad (const char *text, size_t n)
{
  for (size_t i = 0; i < n;) {
    size_t length;
    unsigned code;

    i += ascii_bytes (text + i, n - i);
    if (i == n)
      break;
    length = utf8_decode (text + i, n - i, &code);
    if (length == 0)
      return i;
    i += length;
  }
  return n;
}
