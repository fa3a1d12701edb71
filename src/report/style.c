/* How text is shown: safe characters, ASCII forms, weights, leaders and tabs.  */
#include "config.h"
#include "report/report_private.h"

#include <stdio.h>
#include <string.h>

#include "support/text.h"

/* ASCII forms of the characters the program itself prints or the language reads; each can be
   typed in again.  Sorted by code.                                                              */
static const struct twin { unsigned code; const char *ascii; } twins[] = {
  { 0x00A0, " " }, { 0x00B0, "deg" }, { 0x00B1, "+/-" }, { 0x00B2, "2" }, { 0x00B3, "3" },
  { 0x00B5, "u" }, { 0x00B7, "*" }, { 0x00B9, "1" }, { 0x00D7, "*" }, { 0x03BC, "u" },
  { 0x2013, "-" }, { 0x2014, "-" }, { 0x2018, "'" }, { 0x2019, "'" }, { 0x201C, "\"" },
  { 0x201D, "\"" }, { 0x2026, "..." }, { 0x2070, "0" }, { 0x2074, "4" }, { 0x2075, "5" },
  { 0x2076, "6" }, { 0x2077, "7" }, { 0x2078, "8" }, { 0x2079, "9" }, { 0x2080, "0" },
  { 0x2081, "1" }, { 0x2082, "2" }, { 0x2083, "3" }, { 0x2084, "4" }, { 0x2085, "5" },
  { 0x2086, "6" }, { 0x2087, "7" }, { 0x2088, "8" }, { 0x2089, "9" }, { 0x2212, "-" },
  { 0x2264, "<=" }, { 0x2265, ">=" }
};

static const char *
twin_find (unsigned code)
{
  size_t low = 0, high = sizeof twins / sizeof twins[0];
  while (low < high) {
    const size_t middle = (low + high) / 2;
    if (twins[middle].code == code)
      return twins[middle].ascii;
    if (twins[middle].code < code)
      low = middle + 1;
    else
      high = middle;
  }
  return NULL;
}

static bool
is_plain (unsigned char c)
{
  return c >= 0x20 && c < 0x7F;
}

/* Control characters (ISO/IEC 6429) and the marks of the bidirectional algorithm (Unicode
   Standard Annex 9) that would make a line read otherwise than it is.                           */
static bool
is_harmful (unsigned code)
{
  return code < 0x20 || (code >= 0x7F && code < 0xA0) || code == 0x061C
         || (code >= 0x200E && code <= 0x200F) || (code >= 0x2028 && code <= 0x202E)
         || (code >= 0x2066 && code <= 0x2069) || code == 0xFEFF;
}

/* One character of the text at BYTES, as it is shown.  */
struct shown {
  char bytes[12];
  size_t length;                /* of what is shown */
  size_t taken;                 /* bytes of the text used up */
  unsigned code;                /* the character, 0 if it is shown as something else */
};

static struct shown
shown_next (const struct report_style *style, const char *bytes, size_t n)
{
  struct shown shown = { .taken = utf8_decode (bytes, n, &shown.code) };
  if (shown.taken == 0) {
    shown.taken = 1;
    shown.code = (unsigned char) *bytes;
  } else if (shown.code == '\t') {
    shown.code = 0;
    shown.bytes[0] = ' ';
    shown.length = 1;
    return shown;
  } else if (!is_harmful (shown.code) && (style->unicode || shown.code < 0x80)) {
    memcpy (shown.bytes, bytes, shown.taken);
    shown.length = shown.taken;
    return shown;
  } else {
    const char *twin = twin_find (shown.code);
    if (twin != NULL || !is_harmful (shown.code)) {
      shown.length = strlen (twin != NULL ? twin : "?");
      memcpy (shown.bytes, twin != NULL ? twin : "?", shown.length);
      shown.code = 0;
      return shown;
    }
  }
  const int length = snprintf (shown.bytes, sizeof shown.bytes,
                               shown.code < 0x100 ? "\\x%02X" : "\\u%04X", shown.code);
  shown.length = length > 0 ? (size_t) length : 0;
  shown.code = 0;
  return shown;
}

static size_t
plain_run (const char *bytes, size_t n)
{
  size_t run = 0;
  while (run < n && is_plain ((unsigned char) bytes[run]))
    run++;
  return run;
}

void
shown_add_bytes (struct text *out, const struct report_style *style, const char *bytes, size_t n)
{
  for (size_t at = 0; at < n;) {
    const size_t run = plain_run (bytes + at, n - at);
    text_add_bytes (out, bytes + at, run);
    at += run;
    if (at < n) {
      const struct shown shown = shown_next (style, bytes + at, n - at);
      text_add_bytes (out, shown.bytes, shown.length);
      at += shown.taken;
    }
  }
}

void
shown_add (struct text *out, const struct report_style *style, const char *string)
{
  if (string != NULL)
    shown_add_bytes (out, style, string, strlen (string));
}

void
shown_clean (struct text *out, const struct report_style *style, size_t start)
{
  if (start >= out->length)
    return;
  const size_t n = out->length - start;
  const size_t run = plain_run (out->bytes + start, n);
  if (run == n)
    return;
  struct text rest;
  text_init (&rest);
  text_add_bytes (&rest, out->bytes + start + run, n - run);
  out->length = start + run;
  shown_add_bytes (out, style, rest.bytes, rest.length);
  text_clear (&rest);
}

size_t
shown_width (const struct report_style *style, const char *string)
{
  if (string == NULL)
    return 0;
  const size_t n = strlen (string);
  size_t width = 0;
  for (size_t at = 0; at < n;) {
    const size_t run = plain_run (string + at, n - at);
    width += run;
    at += run;
    if (at < n) {
      const struct shown shown = shown_next (style, string + at, n - at);
      width += utf8_characters (shown.bytes, shown.length);
      at += shown.taken;
    }
  }
  return width;
}

/* Places a character takes on a screen: the blocks of combining marks take none, those of East
   Asian wide characters and pictures (Unicode Standard Annex 11, classes W and F) two.          */
static size_t
character_places (unsigned code)
{
  static const struct { unsigned first, last; size_t places; } blocks[] = {
    { 0x0300, 0x036F, 0 }, { 0x1100, 0x115F, 2 }, { 0x1AB0, 0x1AFF, 0 }, { 0x1DC0, 0x1DFF, 0 },
    { 0x200B, 0x200D, 0 }, { 0x20D0, 0x20FF, 0 }, { 0x2E80, 0x303E, 2 }, { 0x3041, 0x33FF, 2 },
    { 0x3400, 0x4DBF, 2 }, { 0x4E00, 0x9FFF, 2 }, { 0xA000, 0xA4CF, 2 }, { 0xAC00, 0xD7A3, 2 },
    { 0xF900, 0xFAFF, 2 }, { 0xFE00, 0xFE0F, 0 }, { 0xFE20, 0xFE2F, 0 }, { 0xFE30, 0xFE6F, 2 },
    { 0xFF00, 0xFF60, 2 }, { 0xFFE0, 0xFFE6, 2 }, { 0x1F300, 0x1F64F, 2 },
    { 0x1F900, 0x1F9FF, 2 }, { 0x20000, 0x3FFFD, 2 }
  };
  for (size_t i = 0; i < sizeof blocks / sizeof blocks[0]; i++)
    if (code >= blocks[i].first && code <= blocks[i].last)
      return blocks[i].places;
  return 1;
}

size_t
shown_places (const struct report_style *style, const char *string, size_t characters)
{
  const size_t n = strlen (string);
  size_t places = 0;
  for (size_t at = 0; at < n && characters > 0; characters--) {
    const struct shown shown = shown_next (style, string + at, n - at);
    places += shown.code != 0 ? character_places (shown.code)
                              : utf8_characters (shown.bytes, shown.length);
    at += shown.taken;
  }
  return places + characters;           /* behind the end: one place each */
}

void
leader_add (struct text *out, const struct report_style *style, const char *name, size_t width)
{
  const size_t used = shown_width (style, name);
  shown_add (out, style, name);
  if (used == 0) {
    text_add_repeated (out, ' ', width);
    return;
  }
  text_add_char (out, ' ');
  text_add_repeated (out, '.', width - used - 1);
}

void
tab_add (struct text *out, const struct report_style *style, const char *title, const char *kind)
{
  const size_t used = 6 + shown_width (style, title) + 1 + shown_width (style, kind);
  const size_t room = line_width (style) - MARGIN;
  const size_t width = room < CARD_WIDTH ? room : CARD_WIDTH;
  text_add_repeated (out, ' ', MARGIN);
  text_add (out, "_/ ");
  shown_add (out, style, title);
  text_add (out, " \\_");
  text_add_repeated (out, '_', used < width ? width - used : 2);
  if (kind != NULL && *kind != '\0') {
    text_add_char (out, ' ');
    shown_add (out, style, kind);
  }
  text_add_char (out, '\n');
}

void
weight_open (struct text *out, const struct report_style *style, enum weight weight)
{
  static const char *const codes[] = { "\033[1m", "\033[2m", "\033[7m" };      /* ISO/IEC 6429 */
  if (style->weights)
    text_add (out, codes[weight]);
}

void
weight_close (struct text *out, const struct report_style *style)
{
  if (style->weights)
    text_add (out, "\033[0m");
}
