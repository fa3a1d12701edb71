#include "config.h"
#include "support/text.h"

#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include "libtest.h"

static void
texts_grow (void)
{
  struct text text;
  size_t n = 0;

  text_init (&text);
  CHECK (text.bytes == NULL);
  text_empty (&text);
  text_add (&text, "");
  SAME_TEXT (text.bytes, "");
  for (int i = 0; i < 1000; i++) {
    text_add (&text, "ab");
    text_add_char (&text, 'c');
    text_add_bytes (&text, "\0d", 2);
    n += 5;
  }
  SAME_INT (text.length, n);
  CHECK (text.bytes[n] == '\0');
  CHECK (memcmp (text.bytes + n - 5, "abc\0d", 6) == 0);
  text_empty (&text);
  SAME_TEXT (text.bytes, "");
  SAME_INT (text.length, 0);
  text_add_repeated (&text, '.', 3);
  text_add_repeated (&text, ',', 0);
  SAME_TEXT (text.bytes, "...");
  text_clear (&text);
  CHECK (text.bytes == NULL);
  SAME_INT (text.room, 0);
}

/* Around every size at which the buffer grows.  */
static void
formats_of_any_length (void)
{
  struct text text;
  int wrong = 0;

  text_init (&text);
  for (int width = 1; width < 700; width++) {
    text_clear (&text);
    text_add (&text, "<");
    text_add_format (&text, "%*d>", width, 7);
    wrong += text.length != (size_t) width + 2 || strcmp (text.bytes + width, "7>") != 0;
  }
  SAME_INT (wrong, 0);
  text_clear (&text);
}

static void
pads_by_characters (void)
{
  struct text text;

  text_init (&text);
  text_add_left (&text, "CH₄", 5);
  text_add (&text, "|");
  text_add_left (&text, "m³/h", 6);
  text_add (&text, "|");
  text_add_left (&text, "longer", 3);
  text_add_left (&text, "longer", 6);
  text_add_left (&text, "", 2);
  SAME_TEXT (text.bytes, "CH₄  |m³/h  |longerlonger  ");
  text_clear (&text);
}

/* RFC 3629 (Yergeau, 2003), section 4: the first and last sequence of every row of its grammar,
   and beside each the nearest that is none.                                                    */
struct sequence { const char *bytes; size_t length; long code; };      /* code -1: not valid */

static const struct sequence sequences[] = {
  { "\0", 1, 0x00 }, { "\x7F", 1, 0x7F }, { "A", 1, 'A' },
  { "\x80", 1, -1 }, { "\xBF", 1, -1 },
  { "\xC0\x80", 2, -1 }, { "\xC1\xBF", 2, -1 },                        /* overlong */
  { "\xC2\x80", 2, 0x80 }, { "\xDF\xBF", 2, 0x7FF },
  { "\xC2\x7F", 2, -1 }, { "\xC2\xC0", 2, -1 }, { "\xC2", 1, -1 },
  { "\xE0\x80\x80", 3, -1 }, { "\xE0\x9F\xBF", 3, -1 },                /* overlong */
  { "\xE0\xA0\x80", 3, 0x800 }, { "\xE0\xBF\xBF", 3, 0xFFF },
  { "\xE1\x80\x80", 3, 0x1000 }, { "\xEC\xBF\xBF", 3, 0xCFFF },
  { "\xED\x80\x80", 3, 0xD000 }, { "\xED\x9F\xBF", 3, 0xD7FF },
  { "\xED\xA0\x80", 3, -1 }, { "\xED\xBF\xBF", 3, -1 },                /* surrogates */
  { "\xEE\x80\x80", 3, 0xE000 }, { "\xEF\xBF\xBF", 3, 0xFFFF },
  { "\xE1\x80", 2, -1 }, { "\xE1\x80\x7F", 3, -1 }, { "\xE1\x80\xC0", 3, -1 },
  { "\xE1\xC0\x80", 3, -1 },
  { "\xF0\x80\x80\x80", 4, -1 }, { "\xF0\x8F\xBF\xBF", 4, -1 },        /* overlong */
  { "\xF0\x90\x80\x80", 4, 0x10000 }, { "\xF0\xBF\xBF\xBF", 4, 0x3FFFF },
  { "\xF1\x80\x80\x80", 4, 0x40000 }, { "\xF3\xBF\xBF\xBF", 4, 0xFFFFF },
  { "\xF4\x80\x80\x80", 4, 0x100000 }, { "\xF4\x8F\xBF\xBF", 4, 0x10FFFF },
  { "\xF4\x90\x80\x80", 4, -1 }, { "\xF5\x80\x80\x80", 4, -1 },        /* beyond 10FFFF */
  { "\xF1\x80\x80", 3, -1 }, { "\xF1\x80\x80\x7F", 4, -1 }, { "\xF1\x80\xC0\x80", 4, -1 },
  { "\xF8\x88\x80\x80\x80", 5, -1 }, { "\xFE", 1, -1 }, { "\xFF", 1, -1 },
};

static void
sequences_of_the_rfc (void)
{
  for (size_t i = 0; i < sizeof sequences / sizeof sequences[0]; i++) {
    const struct sequence *s = &sequences[i];
    char *exact = malloc (s->length);     /* so that reading beyond it is found */
    unsigned code = 4711;
    size_t length;

    NEED (exact != NULL);
    memcpy (exact, s->bytes, s->length);
    test_about ("sequence %zu, first byte %02X", i, (unsigned) (unsigned char) s->bytes[0]);
    length = utf8_decode (exact, s->length, &code);
    SAME_INT (length, s->code < 0 ? 0 : s->length);
    SAME_INT (code, s->code < 0 ? 4711 : s->code);
    SAME_INT (utf8_first_bad (exact, s->length), s->code < 0 ? 0 : s->length);
    for (size_t cut = 0; cut < s->length; cut++)
      SAME_INT (utf8_decode (exact, cut, &code), 0);
    free (exact);
  }
  SAME_INT (utf8_decode ("", 0, &(unsigned) { 0 }), 0);
}

/* Section 3: the bits of a code point laid out in bytes, one form for each number of bits.  */
static size_t
laid_out (unsigned code, char bytes[4])
{
  size_t length = code < 0x80 ? 1 : code < 0x800 ? 2 : code < 0x10000 ? 3 : 4;
  static const unsigned heads[] = { 0, 0x00, 0xC0, 0xE0, 0xF0 };

  for (size_t i = length - 1; i > 0; i--) {
    bytes[i] = (char) (0x80 | (code & 0x3F));
    code >>= 6;
  }
  bytes[0] = (char) (heads[length] | code);
  return length;
}

static void
every_code_point (void)
{
  int wrong = 0;

  for (unsigned code = 0; code <= 0x10FFFF; code++) {
    char bytes[4];
    unsigned got = 0;
    size_t length = laid_out (code, bytes);
    bool surrogate = code >= 0xD800 && code <= 0xDFFF;
    size_t read = utf8_decode (bytes, length, &got);

    wrong += surrogate ? read != 0 : read != length || got != code;
  }
  SAME_INT (wrong, 0);
}

static void
characters_are_counted (void)
{
  static const char mixed[] = "0123456789 m³/h of CH₄ … 12345678 ± 𝄞";

  SAME_INT (utf8_characters ("", 0), 0);
  SAME_INT (utf8_characters (NULL, 0), 0);
  SAME_INT (utf8_characters (mixed, strlen (mixed)), 37);
  SAME_INT (utf8_characters ("a\0b", 3), 3);
  SAME_INT (utf8_characters ("\xFF\xFE\xC2", 3), 3);       /* a bad byte is one, wherever */
  SAME_INT (utf8_characters ("\xE2\x82" "abc", 5), 5);
}

static void
the_first_bad_byte (void)
{
  char text[64];

  SAME_INT (utf8_first_bad (NULL, 0), 0);
  for (size_t at = 0; at < 40; at++) {
    memset (text, 'a', sizeof text);
    text[at] = '\xE9';                                     /* as Windows-1252 writes e acute */
    test_about ("at %zu", at);
    SAME_INT (utf8_first_bad (text, 40), at);
  }
  SAME_INT (utf8_first_bad ("m³ \xC2", 5), 4);
}

/* The distance by its definition: the whole matrix, nothing left out.  */
static size_t
distance_in_full (const char *a, const char *b)
{
  enum { MOST = 12 };
  size_t d[MOST][MOST];
  size_t m = strlen (a), n = strlen (b);

  for (size_t i = 0; i <= m; i++)
    for (size_t j = 0; j <= n; j++) {
      size_t best = i + j;

      if (i > 0 && d[i - 1][j] + 1 < best)
        best = d[i - 1][j] + 1;
      if (j > 0 && d[i][j - 1] + 1 < best)
        best = d[i][j - 1] + 1;
      if (i > 0 && j > 0 && d[i - 1][j - 1] + (a[i - 1] != b[j - 1]) < best)
        best = d[i - 1][j - 1] + (a[i - 1] != b[j - 1]);
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1]
          && d[i - 2][j - 2] + 1 < best)
        best = d[i - 2][j - 2] + 1;
      d[i][j] = best;
    }
  return d[m][n];
}

static void
some_word (uint32_t *seed, char word[10])
{
  size_t length;

  *seed = *seed * 1664525u + 1013904223u;
  length = (*seed >> 16) % 10;
  for (size_t i = 0; i < length; i++) {
    *seed = *seed * 1664525u + 1013904223u;
    word[i] = (char) ('a' + (*seed >> 16) % 3);
  }
  word[length] = '\0';
}

static void
distances_agree_with_the_definition (void)
{
  uint32_t seed = 11;
  char a[10], b[10];
  int wrong = 0;

  for (int i = 0; i < 20000; i++) {
    size_t full, limit;

    some_word (&seed, a);
    some_word (&seed, b);
    full = distance_in_full (a, b);
    limit = (seed >> 9) % 7;
    if (text_distance (a, b, limit) != (full <= limit ? full : limit + 1)) {
      wrong++;
      test_about ("%s, %s, limit %zu: %zu in full", a, b, limit, full);
    }
  }
  SAME_INT (wrong, 0);
}

/* "ca" to "abc" takes 3 where nothing is edited twice, though 2 would do otherwise (Boytsov, ACM
   J. Exp. Algorithmics 16 (2011) 1.1); kitten and sitting are the usual example of 3.           */
static void
distances_of_words (void)
{
  char long_a[301], long_b[301];

  SAME_INT (text_distance ("", "", 0), 0);
  SAME_INT (text_distance ("barr", "bar", 2), 1);
  SAME_INT (text_distance ("abr", "bar", 2), 1);
  SAME_INT (text_distance ("kitten", "sitting", 9), 3);
  SAME_INT (text_distance ("kitten", "sitting", 2), 3);
  SAME_INT (text_distance ("kitten", "sitting", 1), 2);
  SAME_INT (text_distance ("ca", "abc", 9), 3);
  SAME_INT (text_distance ("feed", "", 9), 4);
  SAME_INT (text_distance ("feed", "", 2), 3);
  SAME_INT (text_distance ("feed", "mix", SIZE_MAX), 4);
  SAME_INT (text_distance ("Nm3/hr", "Nm3/h", 2), 1);
  memset (long_a, 'a', 300);
  memset (long_b, 'b', 300);
  long_a[300] = long_b[300] = '\0';
  SAME_INT (text_distance (long_a, long_b, 500), 300);
  SAME_INT (text_distance (long_a, long_b, 5), 6);
  memcpy (long_b, "xaay", 4);
  memset (long_b + 4, 'a', 296);
  SAME_INT (text_distance (long_a, long_b, 5), 2);
}

static void
reach_grows_with_the_word (void)
{
  SAME_INT (text_reach (""), 1);
  SAME_INT (text_reach ("bar"), 1);
  SAME_INT (text_reach ("feed"), 2);
  SAME_INT (text_reach ("methane"), 2);
  SAME_INT (text_reach ("n-butane"), 3);
}

static const struct test_case cases[] = {
  { "texts grow", texts_grow },
  { "formats of any length", formats_of_any_length },
  { "pads by characters", pads_by_characters },
  { "sequences of the RFC", sequences_of_the_rfc },
  { "every code point", every_code_point },
  { "characters are counted", characters_are_counted },
  { "the first bad byte", the_first_bad_byte },
  { "distances agree with the definition", distances_agree_with_the_definition },
  { "distances of words", distances_of_words },
  { "reach grows with the word", reach_grows_with_the_word },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
