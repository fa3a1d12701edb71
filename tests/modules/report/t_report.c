/* Text made safe, strings of JSON, the words of faults and remarks.  */
#include "config.h"

#include <math.h>
#include <string.h>

#include "libtest.h"
#include "report/report_private.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

static const struct report_style ascii = { .digits = 6 };
static const struct report_style unicode = { .digits = 6, .unicode = true };

static void
text_is_safe_to_show (void)
{
  static const struct { const char *given, *in_ascii, *in_unicode; } rows[] = {
    { "850 Nm3/h", "850 Nm3/h", "850 Nm3/h" },
    { "20 \u00B0C \u00B1 1 K", "20 degC +/- 1 K", "20 \u00B0C \u00B1 1 K" },
    { "kg\u00B7m\u00B3 \u2264 CH\u2084", "kg*m3 <= CH4", "kg\u00B7m\u00B3 \u2264 CH\u2084" },
    { "\u00B5g \u03BCg \u2212" "4", "ug ug -4", "\u00B5g \u03BCg \u2212" "4" },
    { "G\u00E4rgas", "G?rgas", "G\u00E4rgas" },
    { "a\033[31mb", "a\\x1B[31mb", "a\\x1B[31mb" },
    { "a\tb\nc\x7F", "a b\\x0Ac\\x7F", "a b\\x0Ac\\x7F" },
    { "\xC2\x9B" "1m", "\\x9B1m", "\\x9B1m" },
    { "\u202Eabc", "\\u202Eabc", "\\u202Eabc" },
    { "\xFF\xC0\xAF", "\\xFF\\xC0\\xAF", "\\xFF\\xC0\\xAF" },
    { "", "", "" }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct text text;
    text_init (&text);
    text_add (&text, "");
    shown_add (&text, &ascii, rows[i].given);
    SAME_TEXT (text.bytes, rows[i].in_ascii);
    SAME_INT (shown_width (&ascii, rows[i].given), strlen (rows[i].in_ascii));
    text_empty (&text);
    shown_add (&text, &unicode, rows[i].given);
    SAME_TEXT (text.bytes, rows[i].in_unicode);
    SAME_INT (shown_width (&unicode, rows[i].given),
              utf8_characters (rows[i].in_unicode, strlen (rows[i].in_unicode)));
    text_empty (&text);
    text_add (&text, "\033");
    text_add (&text, rows[i].given);
    shown_clean (&text, &ascii, 1);
    SAME_TEXT (text.bytes + 1, rows[i].in_ascii);
    text_clear (&text);
  }
  SAME_INT (shown_width (&ascii, NULL), 0);
}

static void
places_on_a_screen (void)
{
  static const char line[] = "\u7164e\u0301\t\033x";    /* wide, e, combining, tab, escape, x */
  static const size_t places[] = { 0, 2, 3, 3, 4, 8, 9, 10 };
  for (size_t i = 0; i < sizeof places / sizeof places[0]; i++) {
    test_about ("%zu characters", i);
    SAME_INT (shown_places (&unicode, line, i), places[i]);
  }
  SAME_INT (shown_places (&ascii, "", 3), 3);
}

/* RFC 8259, section 7: quotation mark, reverse solidus and U+0000 to U+001F must be escaped.  */
static void
json_strings (void)
{
  static const struct { const char *given, *written; } rows[] = {
    { "", "\"\"" }, { "a b", "\"a b\"" }, { "\"\\", "\"\\\"\\\\\"" },
    { "\n\t\x01\x1f\x7f", "\"\\n\\t\\u0001\\u001f\x7f\"" },
    { "\u00B1 \U0001F525", "\"\u00B1 \U0001F525\"" },
    { "a\xFFz", "\"a\uFFFDz\"" }, { "\xED\xA0\x80", "\"\uFFFD\uFFFD\uFFFD\"" },
    { "\xC3", "\"\uFFFD\"" }
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct text text;
    text_init (&text);
    json_string (&text, rows[i].given);
    SAME_TEXT (text.bytes, rows[i].written);
    text_clear (&text);
  }
}

static void
says (struct fault *fault, const char *statement, const char *const want[3])
{
  struct fault_words words;
  fault_words_init (&words, fault, statement);
  SAME_TEXT (words.sentence.bytes, want[0]);
  SAME_TEXT (words.phrase.length > 0 ? words.phrase.bytes : NULL, want[1]);
  SAME_TEXT (words.line.length > 0 ? words.line.bytes : NULL, want[2]);
  fault_words_clear (&words);
}

/* A hint behind a fact, a hint in the place of the usual way on, a line told by how it opens.  */
static void
fault_words (void)
{
  static const char typed[] = "5 bars of N2";
  struct arena *arena = arena_create ();
  struct fault fault;

  fault_init (&fault, arena);
  fault_set (&fault, MESSAGE_UNIT_UNKNOWN, "bars", "did you mean 'bar'?");
  says (&fault, typed,
        (const char *const[]) { "no unit is called 'bars'", "did you mean 'bar'?", NULL });
  fault_hint (&fault, "%s", "5 bar of N2");
  says (&fault, typed,
        (const char *const[]) { "no unit is called 'bars'", "did you mean 'bar'?", "5 bar of N2" });

  fault_init (&fault, arena);
  fault_set (&fault, MESSAGE_GAS_WATER, NULL, NULL);
  fault_hint (&fault, "%s", "leave it out");
  says (&fault, typed,
        (const char *const[]) { "H2O in a list that is said to be dry", "leave it out", NULL });

  fault_init (&fault, arena);
  fault_set (&fault, MESSAGE_STATE_MISSING, "this", "5 m3 of N2 at 20 degC, 1 bar(a)");
  says (&fault, typed,
        (const char *const[]) { "the state is missing: this needs a temperature and a pressure",
                                NULL, "5 m3 of N2 at 20 degC, 1 bar(a)" });
  says (&fault, NULL,
        (const char *const[]) { "the state is missing: this needs a temperature and a pressure",
                                "5 m3 of N2 at 20 degC, 1 bar(a)", NULL });
  arena_destroy (arena);
}

static void
brackets_only_with_an_effect (void)
{
  struct remark remark = { .kind = MESSAGE_TAKEN_REFERENCE, .fact = { "scf", "60 degF" },
                           .alternative = "at 68 degF", .effect = 0.0154 };
  struct text text;
  text_init (&text);
  remark_sentence (&text, &remark);
  SAME_TEXT (text.bytes, "scf at 60 degF");
  text_empty (&text);
  CHECK (remark_bracket (&text, &remark));
  SAME_TEXT (text.bytes, "(at 68 degF: +1.5 %)");
  text_empty (&text);
  remark.effect = (double) NAN;
  CHECK (!remark_bracket (&text, &remark));
  remark.effect = -4e-7;
  CHECK (!remark_bracket (&text, &remark));
  remark.effect = 1.0;
  remark.alternative = NULL;
  CHECK (!remark_bracket (&text, &remark));
  SAME_TEXT (text.bytes, "");
  text_clear (&text);
}

static void
nothing_prints_nothing (void)
{
  static const struct report_style prompt = { .digits = 6, .prompt = true };
  struct arena *arena = arena_create ();
  struct result result;
  struct text text;
  text_init (&text);
  result_init (&result, arena, "gas raw = CH4 100 mol%");
  for (int format = 0; format < REPORT_FORMATS; format++)
    report_result (&text, (enum report_format) format, &prompt, &result, false);
  SAME_INT (text.length, 0);
  report_result (&text, REPORT_CSV, &prompt, &result, true);
  SAME_INT (strncmp (text.bytes, "statement,what,", 15), 0);
  text_clear (&text);
  arena_destroy (arena);
}

static void
no_figure_is_null (void)
{
  struct arena *arena = arena_create ();
  struct result result;
  struct text text;
  text_init (&text);
  result_init (&result, arena, "x");
  result_answer (&result)->what = "x";
  report_result (&text, REPORT_JSON, &ascii, &result, false);
  SAME_TEXT (text.bytes, "{\"statement\":\"x\",\"answers\":[{\"what\":\"x\",\"value\":null,"
                         "\"unit\":\"\",\"basis\":\"\"}],\"taken\":[],\"notes\":[],"
                         "\"cautions\":[]}\n");
  text_empty (&text);
  report_result (&text, REPORT_TEXT, &ascii, &result, false);
  SAME_TEXT (text.bytes, "      -\n");
  text_clear (&text);
  arena_destroy (arena);
}

/* Folded at any width, a line keeps its words and stays within it, but for a wider word.  */
static void
lines_are_folded (void)
{
  static const char line[] = "met: wobbe of grid within 48 .. 50.5 MJ/m3 \u00B1 0.4; every moved "
    "quantity stays above zero, \033[2mso the aim lies\033[0m within reach of what is mixed";
  struct text text;
  text_init (&text);
  for (size_t width = 30; width < 130; width++) {
    const struct report_style style = { .digits = 6, .unicode = true, .width = width };
    const size_t most = width < 40 ? 40 : width > 100 ? 100 : width;
    test_about ("%zu characters", width);
    text_empty (&text);
    text_add (&text, "  ~   note: ");
    const struct fold fold = fold_here (&text);
    SAME_INT (fold.hang, 12);
    text_add (&text, line);
    fold_line (&text, &style, fold);
    const char *want = line;
    size_t column = 12;
    for (const char *at = text.bytes + 12; *at != '\0'; at++) {
      if (*at == '\n') {
        CHECK (column <= most);
        CHECK (strspn (at + 1, " ") == 12 && *want == ' ');
        column = 12;
        at += 12;
        want++;
        continue;
      }
      CHECK (*at == *want);
      if (*at == '\033')                /* four bytes that take no place */
        column -= strncmp (at, "\033[2m", 4) == 0 || strncmp (at, "\033[0m", 4) == 0 ? 4 : 0;
      column += (*at & 0xC0) != 0x80;
      want++;
    }
    CHECK (column <= most && *want == '\0');
    CHECK (strstr (text.bytes, "50.5\n") == NULL);      /* a figure stays with its unit */
  }
  text_clear (&text);
}

static const struct test_case cases[] = {
  { "lines are folded at blanks", lines_are_folded },
  { "text is safe to show, in ASCII and UTF-8", text_is_safe_to_show },
  { "places on a screen are counted", places_on_a_screen },
  { "strings of JSON are escaped and valid", json_strings },
  { "a fault has sentence, phrase and line", fault_words },
  { "a bracket stands only where an effect is", brackets_only_with_an_effect },
  { "nothing to say prints nothing", nothing_prints_nothing },
  { "a figure nobody has is null or a dash", no_figure_is_null },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
