/* What an answer's uncertainty is made of.  */
#include "config.h"
#include <math.h>
#include <stddef.h>
#include <string.h>
#include "language/parse.h"
#include "language/session.h"
#include "language/tree.h"
#include "libtest.h"
#include "modules/language/typed.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/message.h"

/* The budget of the first answer to the last of TEXT's statements; null: there is none.  */
static const struct budget *
budget_of (struct arena *arena, struct session *session, const char *text)
{
  const struct result *result = typed (arena, session, text);
  return result && result->answers ? result->answers->budget : NULL;
}

/* JCGM 100:2008, eq. 10: u(b - a)^2 = u(a)^2 + u(b)^2 = 3^2 + 4^2.  */
static void
difference (struct arena *arena, struct session *session)
{
  const struct budget *b = budget_of (arena, session, "let a = 100 ± 3 kg/h; "
                                      "let b = 200 kg/h ± 8 kg/h (k=2); b - a");
  NEED (b != NULL);
  NEED (SAME_INT (b->count, 2));
  NEAR (b->uncertainty, 5, 1e-12);
  SAME_TEXT (b->lines[0].what, "200 kg/h ± 8 kg/h (k=2)");
  SAME_TEXT (b->lines[0].of, "b");
  SAME_TEXT (b->lines[0].unit, "kg/h");
  NEAR (b->lines[0].u, 4, 1e-12);
  NEAR (b->lines[0].sensitivity, 1, 1e-9);
  NEAR (b->lines[0].contribution, 4, 1e-9);
  NEAR (b->lines[0].share, 16.0 / 25, 1e-9);
  SAME_TEXT (b->lines[1].what, "100 ± 3 kg/h");
  SAME_TEXT (b->lines[1].of, "a");
  NEAR (b->lines[1].sensitivity, -1, 1e-9);
  NEAR (b->lines[1].contribution, -3, 1e-9);
  NEAR (b->lines[1].share, 9.0 / 25, 1e-9);
}

static void
a_difference (void)
{
  with_session (difference);
}

/* CO2 moves the molar mass by (44.009 - 28.014)/100 g/mol for each mol% (CIAAW 2021).  */
static void
part (struct arena *arena, struct session *session)
{
  const struct budget *b = budget_of (arena, session, "gas g = N2 rest, CO2 12 ± 0.3 mol%; "
                                      "molar mass of g in g/mol");
  NEED (b != NULL);
  NEED (SAME_INT (b->count, 1));
  SAME_TEXT (b->lines[0].what, "CO2 12 ± 0.3 mol%");
  SAME_TEXT (b->lines[0].of, "g");
  SAME_TEXT (b->lines[0].unit, "mol%");
  NEAR (b->lines[0].u, 0.3, 1e-12);
  NEAR (b->lines[0].sensitivity, 0.15995, 1e-6);
  NEAR (b->lines[0].share, 1, 1e-12);
}

static void
a_part_of_a_list (void)
{
  with_session (part);
}

/* A half-width of 1 K is 1/sqrt(3) K (JCGM 100:2008, eq. 7); p/(RT) falls by 1/T for each K.  */
static void
temperature (struct arena *arena, struct session *session)
{
  const struct budget *b = budget_of (arena, session, "set gas model ideal; density of N2 at "
                                      "20 degC ± 1 K (limits), 1 bar(a) in kg/m3");
  NEED (b != NULL);
  SAME_TEXT (b->lines[0].what, "20 degC ± 1 K (limits)");
  SAME_TEXT (b->lines[0].of, NULL);
  SAME_TEXT (b->lines[0].unit, "K");
  NEAR (b->lines[0].u, 0.57735026919, 1e-9);
  NEAR (b->lines[0].sensitivity, -1e5 * 28.014e-3 / 8.314462618 / (293.15 * 293.15), 1e-4);
}

static void
limits_of_a_temperature (void)
{
  with_session (temperature);
}

/* Of 3 bar(g) the barometer is all that is uncertain, and moves it by itself.  */
static void
barometer (struct arena *arena, struct session *session)
{
  const struct budget *b = budget_of (arena, session, "set site pressure 987 ± 2 mbar; "
                                      "3 bar(g) in bar(a)");
  NEED (b != NULL);
  SAME_TEXT (b->lines[0].of, "site pressure");
  NEAR (b->lines[0].u, 2, 1e-12);
  NEAR (b->uncertainty, 0.002, 1e-9);
}

static void
the_barometer (void)
{
  with_session (barometer);
}

static void
nothing (struct arena *arena, struct session *session)
{
  CHECK (budget_of (arena, session, "let a = 100 ± 3 kg/h; 850 kg/h in lb/h") == NULL);
  CHECK (budget_of (arena, session, "a - a + 5 kg/h") == NULL);
}

static void
nothing_uncertain (void)
{
  with_session (nothing);
}

/* Each name uses the one before twice: 2^60 ways down to the first.  */
static void
chain (struct arena *arena, struct session *session)
{
  const struct budget *b = budget_of (arena, session, "let x0 = 1 ± 0.1");
  for (int i = 1; i <= 60; i++) {
    b = budget_of (arena, session, arena_format (arena, "let x%d = (x%d + x%d) / 2; x%d", i, i - 1,
                                                 i - 1, i));
  }
  NEED (b != NULL);
  NEAR (b->uncertainty, 0.1, 1e-12);
  SAME_TEXT (b->lines[0].of, "x0");
}

static void
a_long_chain (void)
{
  with_session (chain);
}

static int asked_to_stop;

static bool
stops_at_the_third_look (void)
{
  return ++asked_to_stop > 2;
}

/* The kind of fault of the last of TEXT's statements.  */
static enum message
fault_of (struct arena *arena, struct session *session, const char *text)
{
  struct parser *parser = parser_create (arena, session_vocabulary (session), text, strlen (text),
                                         1, BLOCK_NONE);
  struct statement *s;
  struct fault fault;
  fault_init (&fault, arena);
  while (parser_next (parser, &s, &fault) && s) {
    struct result result;
    result_init (&result, arena, s->source);
    fault_init (&fault, arena);
    if (!session_run (session, s, &result, &fault)) {
      return fault.kind;
    }
  }
  return MESSAGE_NONE;
}

static void
trials_that_end (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  fault_init (&fault, arena);
  struct session *session
    = session_create (&(struct session_options) { NULL, stops_at_the_third_look }, &fault);
  if (CHECK (session != NULL)) {
    SAME_INT (fault_of (arena, session, "let x = 1 ± 0.1; montecarlo 1000000 x * x"),
              MESSAGE_INTERRUPTED);
    SAME_INT (asked_to_stop, 3);
    asked_to_stop = -1000;
    SAME_INT (fault_of (arena, session, "montecarlo 10000000 x in mol/mol, %, kg/kg"),
              MESSAGE_RANGE);
    SAME_INT (fault_of (arena, session, "montecarlo 2000 x * x"), MESSAGE_NONE);
  }
  session_destroy (session);
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "a difference of two figures", a_difference },
  { "a part of a list", a_part_of_a_list },
  { "limits of a temperature", limits_of_a_temperature },
  { "the barometer", the_barometer },
  { "nothing that is uncertain", nothing_uncertain },
  { "a long chain of names", a_long_chain },
  { "trials that are stopped or too many", trials_that_end },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
