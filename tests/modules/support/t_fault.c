#include "config.h"
#include "support/fault.h"

#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/text.h"

static void
nothing_went_wrong_at_first (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;

  memset (&fault, 0xAA, sizeof fault);
  fault_init (&fault, arena);
  SAME_INT (fault.kind, MESSAGE_NONE);
  SAME_INT (fault.at.line, 0);
  CHECK (fault.hint == NULL);
  for (int i = 0; i < MESSAGE_FACTS; i++)
    CHECK (fault.fact[i] == NULL);
  fault_place (&fault, (struct place) { 3, 1, 2 });
  SAME_INT (fault.at.line, 0);
  arena_destroy (arena);
}

static void
facts_and_hint_are_copied (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  char facts[4][16] = { "Nm3/hr", "two", "three", "four" };

  fault_init (&fault, arena);
  CHECK (!fault_set (&fault, MESSAGE_UNIT_UNKNOWN, facts[0], facts[1]));
  fault_facts (&fault, facts[2], facts[3]);
  fault_hint (&fault, "%s at %d", facts[0], 12);
  memset (facts, 'x', sizeof facts - 1);
  SAME_INT (fault.kind, MESSAGE_UNIT_UNKNOWN);
  SAME_TEXT (fault.fact[0], "Nm3/hr");
  SAME_TEXT (fault.fact[1], "two");
  SAME_TEXT (fault.fact[2], "three");
  SAME_TEXT (fault.fact[3], "four");
  SAME_TEXT (fault.hint, "Nm3/hr at 12");
  arena_destroy (arena);
}

static void
the_first_fault_stays (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  const struct place here = { 2, 5, 9 }, there = { 4, 1, 1 };

  fault_init (&fault, arena);
  CHECK (!fault_set_at (&fault, MESSAGE_NUMBER_COMMA, here, "1,250", NULL));
  CHECK (!fault_set_at (&fault, MESSAGE_UNIT_UNKNOWN, there, "barr", "bar"));
  fault_facts (&fault, "of the second", "of the second");
  fault_hint (&fault, "of the second");
  fault_place (&fault, there);
  SAME_INT (fault.kind, MESSAGE_NUMBER_COMMA);
  SAME_TEXT (fault.fact[0], "1,250");
  CHECK (fault.fact[1] == NULL);
  CHECK (fault.fact[2] == NULL);
  CHECK (fault.hint == NULL);
  SAME_INT (fault.at.line, 2);
  SAME_INT (fault.at.first, 5);
  SAME_INT (fault.at.last, 9);
  arena_destroy (arena);
}

static void
a_place_is_filled_in_later (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;

  fault_init (&fault, arena);
  CHECK (!fault_set (&fault, MESSAGE_NOT_FINITE, NULL, NULL));
  SAME_INT (fault.at.line, 0);
  fault_place (&fault, (struct place) { 7, 3, 4 });
  fault_place (&fault, (struct place) { 8, 1, 1 });
  SAME_INT (fault.at.line, 7);
  SAME_INT (fault.at.first, 3);
  SAME_INT (fault.at.last, 4);
  arena_destroy (arena);
}

/* PATTERN with its places filled by "one", "two", nothing and "{1}".  */
static void
filled (const char *pattern, const char *want)
{
  const char *const facts[MESSAGE_FACTS] = { "one", "two", NULL, "{1}" };
  struct text text;

  text_init (&text);
  text_add (&text, "> ");
  message_write (&text, pattern, facts);
  SAME_TEXT (text.bytes + 2, want);
  text_clear (&text);
}

static void
sentences_take_their_facts (void)
{
  filled ("", "");
  filled ("nothing to fill", "nothing to fill");
  filled ("{1} then {2}", "one then two");
  filled ("{2}{1}{2}", "twoonetwo");
  filled ("missing: '{3}'", "missing: ''");
  filled ("a fact is no sentence: {4}", "a fact is no sentence: {1}");
  filled ("{0} {5} {} {1 } {", "{0} {5} {} {1 } {");
  filled ("{{1}}", "{one}");
  filled ("{1", "{1");
}

static void
every_kind_has_a_sentence (void)
{
  SAME_TEXT (message_name (MESSAGE_NUMBER_COMMA), "number-comma");
  SAME_INT (message_severity (MESSAGE_NUMBER_COMMA), SEVERITY_ERROR);
  SAME_INT (message_severity (MESSAGE_TAKEN_REFERENCE), SEVERITY_TAKEN);
  SAME_INT (message_severity (MESSAGE_NOTE_SCALED), SEVERITY_NOTE);
  SAME_INT (message_severity (MESSAGE_CAUTION_TOXIC), SEVERITY_CAUTION);
  for (int i = MESSAGE_NONE + 1; i < MESSAGE_COUNT; i++) {
    const char *name = message_name ((enum message) i);
    enum severity severity = message_severity ((enum message) i);

    test_about ("%s", name);
    CHECK (name[0] != '\0');
    CHECK (message_sentence ((enum message) i)[0] != '\0');
    CHECK (message_way_on ((enum message) i) != NULL);
    SAME_INT (strncmp (name, "taken-", 6) == 0, severity == SEVERITY_TAKEN);
    SAME_INT (strncmp (name, "note-", 5) == 0, severity == SEVERITY_NOTE);
    SAME_INT (strncmp (name, "caution-", 8) == 0, severity == SEVERITY_CAUTION);
  }
}

static const struct test_case cases[] = {
  { "nothing went wrong at first", nothing_went_wrong_at_first },
  { "facts and hint are copied", facts_and_hint_are_copied },
  { "the first fault stays", the_first_fault_stays },
  { "a place is filled in later", a_place_is_filled_in_later },
  { "sentences take their facts", sentences_take_their_facts },
  { "every kind has a sentence", every_kind_has_a_sentence },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
