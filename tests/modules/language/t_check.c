/* Stated figures: what they are good to, when they hold, and the table of other readings.  */
#include "config.h"
#include <math.h>
#include <stddef.h>
#include <string.h>
#include "gas/reference.h"
#include "language/check/readings.h"
#include "language/parse.h"
#include "language/session.h"
#include "language/tree.h"
#include "libtest.h"
#include "modules/language/typed.h"
#include "result/check_verdict.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/unit.h"

/* The verdict of the last of TEXT's statements; null: there is none.  */
static const struct check_verdict *
verdict_of (struct arena *arena, struct session *session, const char *text)
{
  const struct result *result = typed (arena, session, text);
  return result && CHECK (result->check != NULL) ? result->check : NULL;
}

/* Half the last typed digit, end zeros of a whole number uncounted, 0.5 % at most; with ± two
   standard uncertainties, an expanded one over its k, limits over the root of 3.  By hand.      */
static void
limits_of (struct arena *arena, struct session *session)
{
  static const struct { const char *text; double limit; } claims[] = {
    { "check 1000 kg of N2 against 3380 kg", 5 },
    { "check 1000 kg of N2 against 9.92 kg", 0.005 },
    { "check 1000 kg of N2 against 1057 kg", 0.5 },
    { "check 1000 kg of N2 against 1000 kg", 5 },
    { "check 1000 kg of N2 against 1000. kg", 0.5 },
    { "check 1000 kg of N2 against 1000.0 kg", 0.05 },
    { "check 1000 kg of N2 against 1_010 kg", 5 },
    { "check 1000 kg of N2 against 1.01e3 kg", 5 },
    { "check 1000 kg of N2 against 1.012e3 kg", 0.5 },
    { "check 1000 kg of N2 against 0 kg", 0.5 },
    { "check 1000 kg of N2 against 3 kg", 0.015 },
    { "check 1000 kg of N2 against 0.30 kg", 0.0015 },
    { "check 1000 kg of N2 against 1010 kg ± 5", 10 },
    { "check 1000 kg of N2 against 1010 kg ± 1 %", 20.2 },
    { "check 1000 kg of N2 against 1010 kg ± 6 kg (k=2)", 6 },
    { "check 1000 kg of N2 against 1010 kg ± 3 kg (limits)", 2 * 1.7320508075688772 },
    { "check 1000 kg ± 3 kg of N2 against 1010 kg ± 4 kg", 10 },
    { "check 1000 kg ± 6 kg of N2 against 1010 kg", 13 },
  };
  for (size_t i = 0; i < sizeof claims / sizeof claims[0]; i++) {
    const struct check_verdict *v = verdict_of (arena, session, claims[i].text);
    test_about ("%s", claims[i].text);
    if (v) {
      NEAR (v->limit, claims[i].limit, 1e-9);
    }
  }
}

static void
limits (void)
{
  with_session (limits_of);
}

static void
outcomes_of (struct arena *arena, struct session *session)
{
  static const struct { const char *text; enum check_outcome outcome; } claims[] = {
    { "check 1000 kg of N2 against 2205 lb", CHECK_HOLDS },
    { "check 1000 kg of N2 against 2203 lb", CHECK_UNEXPLAINED },
    { "check 1000 kg of N2 against 2203 lb ± 1", CHECK_HOLDS },
    { "check 1000 kg of N2 against 1000 lb", CHECK_READINGS },
    { "check relative density of CH4 against 0.554", CHECK_HOLDS },
    { "check relative density of CH4 against 0.6", CHECK_UNEXPLAINED },
    { "check 25 degC against 77.0 degF", CHECK_HOLDS },
    { "check 25 degC against 79.0 degF", CHECK_UNEXPLAINED },
    { "check 7 bar(g) against 101.53 psi(g)", CHECK_HOLDS },
    { "check 7 bar(g) against 101.5 psi(a)", CHECK_READINGS },
  };
  for (size_t i = 0; i < sizeof claims / sizeof claims[0]; i++) {
    const struct check_verdict *v = verdict_of (arena, session, claims[i].text);
    test_about ("%s", claims[i].text);
    if (v) {
      SAME_INT (v->outcome, claims[i].outcome);
      CHECK ((v->outcome == CHECK_READINGS) == (v->readings != NULL)
             || v->outcome == CHECK_HOLDS);
    }
  }
}

static void
outcomes (void)
{
  with_session (outcomes_of);
}

/* 1000 kg of nitrogen is 1000/28.014 kmol; R T/p by CODATA 2018.  */
static void
needed_of (struct arena *arena, struct session *session)
{
  double moles = 1e6 / 28.014, volume = 777.7;
  const struct check_verdict *v
    = verdict_of (arena, session, "set gas model ideal; check 1000 kg of N2 in m3 at 15 degC, "
                  "1.100 bar(a) against 777.7 m3 ± 0.01");
  NEED (v != NULL);
  SAME_INT (v->outcome, CHECK_UNEXPLAINED);
  const struct check_need *n = v->needs;
  NEED (n != NULL);
  SAME_TEXT (n->what, "temperature");
  NEAR (n->value, volume * 1.1e5 / (moles * 8.314462618) - 273.15, 1e-7);
  NEED (n->next != NULL);
  NEAR (n->next->value, moles * 8.314462618 * 288.15 / volume / 1e5, 1e-7);
}

static void
needed (void)
{
  with_session (needed_of);
}

static void
table (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  fault_init (&fault, arena);
  struct unit_table *units = unit_table_create (NULL, &fault);
  struct reference_table *references = units ? reference_table_create (units, NULL, &fault) : NULL;
  struct readings *readings = references ? readings_create (units, references, NULL, &fault)
                                         : NULL;
  if (CHECK (readings != NULL)) {
    CHECK (readings->count > 80);
    for (size_t i = 0; i < readings->count; i++) {
      const struct reading_rule *rule = &readings->at[i];
      test_about ("%s", rule->key);
      CHECK (rule->cost >= 1 && rule->cost <= 3 && *rule->said != '\0');
      CHECK ((rule->change == READING_UNIT) == (rule->from != NULL));
    }
    readings_destroy (readings);
  }
  reference_table_destroy (references);
  unit_table_destroy (units);
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "what a stated figure is good to", limits },
  { "when it holds, and when another reading fits", outcomes },
  { "what would have to be true instead", needed },
  { "the table of other readings", table },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
