/* What is made of typed lines before they run: rails, history, completion, the command line.  */
#include "config.h"
#include "libtest.h"

#include <string.h>

#include "language/parse.h"
#include "language/session.h"
#include "result/result.h"
#include "shell/completion.h"
#include "shell/history.h"
#include "shell/options.h"
#include "shell/paste.h"
#include "shell/phrase.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"
#include "units/unit.h"

static void
rails (void)
{
  SAME_INT (paste_rail ("gas | air"), 6);
  SAME_INT (paste_rail ("gas*| air"), 6);
  SAME_INT (paste_rail ("    | air"), 6);
  SAME_INT (paste_rail ("   || air"), 6);
  SAME_INT (paste_rail ("gas |"), 5);
  SAME_INT (paste_rail ("gas |\nair"), 5);
  SAME_INT (paste_rail ("gas |air"), 0);
  SAME_INT (paste_rail ("gas raw = air"), 0);
  SAME_INT (paste_rail ("      12000.0  g"), 0);
  SAME_INT (paste_rail (""), 0);
}

static void
cleaned (const char *typed, const char *want, bool changes, size_t left_out)
{
  struct text text;
  size_t count;

  text_init (&text);
  text_add (&text, typed);
  test_about ("%s", typed);
  SAME_INT (paste_clean (&text, &count), changes);
  SAME_TEXT (text.bytes, want);
  SAME_INT (count, left_out);
  text_clear (&text);
}

static void
pastes (void)
{
  cleaned ("12 kg in g", "12 kg in g", false, 0);
  cleaned ("gas | 12 kg in g", "12 kg in g", true, 0);
  cleaned ("gas | gas | 12 kg", "12 kg", true, 0);
  cleaned ("12 kg in g\n13 kg in g", "12 kg in g\n13 kg in g", false, 0);
  cleaned ("12 kg in g\n\n      12000 g\n\ngas | 13 kg", "12 kg in g\n13 kg", true, 1);
  cleaned ("gas | a \\\n    | in g\n      1 g", "a \\\nin g", true, 1);
  cleaned ("gas | 1 kg\n2 kg", "1 kg\n2 kg", true, 0);
}

static void
kept_lines (void)
{
  CHECK (history_keeps ("12 kg in g", NULL));
  CHECK (history_keeps ("12 kg in g", "13 kg in g"));
  CHECK (!history_keeps ("12 kg in g", "12 kg in g"));
  CHECK (!history_keeps (" 12 kg in g", NULL));
  CHECK (!history_keeps ("\t12 kg in g", NULL));
  CHECK (!history_keeps ("", NULL));
  CHECK (history_keeps ("# a remark", NULL));
  CHECK (!history_keeps ("#1 of the day", NULL));
  CHECK (!history_keeps ("12 kg in g\n#17", NULL));
}

static void
stands (const char *line, enum phrase_place want)
{
  struct phrase phrase;

  phrase_read (&phrase, line, strlen (line));
  test_about ("behind '%s'", line);
  SAME_INT (phrase.place, want);
}

static void
places (void)
{
  stands ("", PLACE_OPENING);
  stands ("850 ", PLACE_UNIT);
  stands ("850 Nm3/h ", PLACE_WORD);
  stands ("850 Nm3/h of ", PLACE_OPERAND);
  stands ("850 Nm3/h of raw in ", PLACE_TARGET);
  stands ("850 Nm3/h of raw in kg/h, ", PLACE_TARGET);
  stands ("850 Nm3/h of raw in kg/h and ", PLACE_TARGET);
  stands ("850 m3/h of raw at ", PLACE_STATE);
  stands ("850 m3/h of raw at 20 ", PLACE_UNIT);
  stands ("850 m3/h of raw at 20 degC, ", PLACE_STATE);
  stands ("gas raw = ", PLACE_OPERAND);
  stands ("gas raw = CH4 60, ", PLACE_OPERAND);
  stands ("gas raw = CH4 60,\n", PLACE_OPERAND);
  stands ("gas raw = CH4 60, CO2 40 mol%; ", PLACE_OPENING);
  stands ("12 kg in g\n", PLACE_OPENING);
  stands ("12 kg \\\n in ", PLACE_TARGET);
  stands ("12 kg in g # in ", PLACE_NOTHING);
  stands ("set ", PLACE_SETTING);
  stands ("set gas model ", PLACE_VALUE);
  stands ("show ", PLACE_SHOWN);
  stands ("help ", PLACE_TOPIC);
  stands ("list ", PLACE_LIST);
  stands ("forget a, ", PLACE_OWN_NAME);
  stands ("save ", PLACE_FILE);
  stands ("save \"", PLACE_FILE);
  stands ("reference here = ", PLACE_STATE);
}

static struct session *
new_session (struct arena *arena)
{
  const struct session_options options = { NULL, NULL };
  struct fault fault;

  fault_init (&fault, arena);
  return session_create (&options, &fault);
}

/* Is WANT among what is offered for the last word of LINE?  */
static bool
is_offered (const struct session *session, struct arena *arena, const char *line,
            const char *want)
{
  const size_t n = strlen (line);
  const char *quote = strrchr (line, '"');      /* inside quotes the word is all behind them */
  size_t start = quote != NULL ? (size_t) (quote + 1 - line) : n;
  struct completion found;

  while (quote == NULL && start > 0 && strchr (" ,;=", line[start - 1]) == NULL)
    start--;
  completion_find (&found, arena, session, line, start, n);
  for (size_t i = 0; i < found.count; i++) {
    if (strcmp (found.words[i], want) == 0)
      return true;
  }
  return false;
}

static void
offers (void)
{
  static const struct { const char *line, *word; bool is; } rows[] = {
    { "de", "density", true },                  { "he", "help", true },
    { "850 N", "Nm3/h", true },                 { "850 nm", "Nm3/h", true },
    { "850 N", "N2", false },                   { "3 kg of CO", "CO2", true },
    { "3 kg of CO", "kg", false },              { "gas x = (CH", "(CH4", true },
    { "3 kg of \"carbon d", "carbon dioxide", true },
    { "3 kg of carb", "\"carbon dioxide\"", true },
    { "3 kg of carbon d", "dioxide", true },
    { "850 Nm3/h of CO2 in k", "kg/h", true },  { "850 Nm3/h of CO2 in k", "kPa", false },
    { "850 Nm3/h of CO2 in k", "kg", false },   { "3 kg of CO2 in k", "kmol", true },
    { "3 kg of CO2 in k", "kg/h", false },      { "12 bar(g) in ", "psig", true },
    { "12 bar(g) in ", "kg/h", false },         { "25 degC in deg", "degF", true },
    { "density of CO2 at 20 degC, 1 atm in k", "kg/m3", true },
    { "density of CO2 at 20 degC, 1 atm in k", "kg/h", false },
    { "3 m3 of CO2 at 20 ", "degC", true },     { "3 m3 of CO2 at 20 ", "kg", false },
    { "3 m3 of CO2 at ", "site pressure", true }, { "let z = relative d", "density", true },
    { "set ", "gas model", true },              { "set gas m", "model", true },
    { "set gas model ", "Peng-Robinson", true }, { "set gas model ", "half", false },
    { "set below detection ", "half", true },   { "list co", "components", true },
    { "show den", "density", true },            { "12 kg # de", "density", false }
  };
  struct arena *arena = arena_create ();
  struct session *session = new_session (arena);

  NEED (session != NULL);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    test_about ("'%s' offers %s", rows[i].line, rows[i].word);
    CHECK (is_offered (session, arena, rows[i].line, rows[i].word) == rows[i].is);
  }
  session_destroy (session);
  arena_destroy (arena);
}

/* Inside a balance its own words open a line, outside they do not.  */
static void
offers_in_block (void)
{
  struct arena *arena = arena_create ();
  struct session *session = new_session (arena);
  struct fault fault;
  struct result result;
  struct statement *statement;

  NEED (session != NULL);
  CHECK (!is_offered (session, arena, "sepa", "separate"));
  fault_init (&fault, arena);
  result_init (&result, arena, "balance plant");
  struct parser *parser = parser_create (arena, session_vocabulary (session), "balance plant", 13,
                                         1, BLOCK_NONE);
  CHECK (parser_next (parser, &statement, &fault)
         && session_run (session, statement, &result, &fault));
  CHECK (is_offered (session, arena, "sepa", "separate"));
  CHECK (is_offered (session, arena, "kn", "known"));
  CHECK (!is_offered (session, arena, "de", "density"));
  session_leave_block (session);
  CHECK (is_offered (session, arena, "de", "density"));
  session_destroy (session);
  arena_destroy (arena);
}

static void
offered_units (void)
{
  static const char *const spellings[] = {
#define UNIT_OFFERED(spelling) spelling,
#include "shell/flow_units.def"
#undef UNIT_OFFERED
  };
  struct arena *arena = arena_create ();
  struct session *session = new_session (arena);

  NEED (session != NULL);
  for (size_t i = 0; i < sizeof spellings / sizeof spellings[0]; i++) {
    test_about ("%s", spellings[i]);
    CHECK (unit_find (session_vocabulary (session)->units, spellings[i], strlen (spellings[i]),
                      NULL) != NULL);
  }
  session_destroy (session);
  arena_destroy (arena);
}

/* Reads a command line of up to seven words.  */
static bool
reads (struct options *options, const char *a, const char *b, const char *c)
{
  static char words[4][40];
  char *argv[] = { words[0], words[1], words[2], words[3], NULL };
  const char *given[] = { "gaswright", a, b, c };
  struct text complaint;
  int argc = 0;

  for (; argc < 4 && given[argc] != NULL; argc++) {
    words[argc][0] = '\0';
    strncat (words[argc], given[argc], sizeof words[argc] - 1);
  }
  argv[argc] = NULL;
  text_init (&complaint);
  const bool good = options_read (options, argc, argv, &complaint);
  CHECK (good == (complaint.length == 0));
  text_clear (&complaint);
  return good;
}

static void
command_lines (void)
{
  struct options options;

  CHECK (reads (&options, "-ea", "--evaluate", "b"));
  SAME_TEXT (options.statements.bytes, "a\nb\n");
  options_clear (&options);
  CHECK (reads (&options, "x.gw", "-fjson", "y.gw"));
  SAME_INT (options.format, REPORT_JSON);
  SAME_INT (options.file_count, 2);
  options_clear (&options);
  CHECK (reads (&options, "-k", "--", "-k"));
  CHECK (options.keep_going);
  SAME_INT (options.file_count, 1);
  options_clear (&options);
  CHECK (reads (&options, "--form=csv", "--color=never", NULL));
  SAME_INT (options.format, REPORT_CSV);
  SAME_INT (options.colour, COLOUR_NEVER);
  options_clear (&options);
  CHECK (!reads (&options, "--tables=", NULL, NULL));
  options_clear (&options);
  CHECK (!reads (&options, "-c", NULL, NULL));
  options_clear (&options);
}

static const struct test_case cases[] = {
  { "rails are known", rails },
  { "a piece of a session is cleaned", pastes },
  { "which lines the history keeps", kept_lines },
  { "what may stand where", places },
  { "what is offered", offers },
  { "what is offered inside a balance", offers_in_block },
  { "every offered unit reads", offered_units },
  { "command lines", command_lines },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
