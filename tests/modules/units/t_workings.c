#include "config.h"

#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "units/constants.h"
#include "units/workings.h"

static void
keeps_steps_in_order (void)
{
  struct arena *arena = arena_create ();
  struct workings workings;
  double x[] = { 0.6, 0.4 };
  static const char *const parts[] = { "CH4", "CO2" };

  workings_init (&workings, arena);
  SAME_INT (workings.count, 0);
  CHECK (workings.first == NULL);
  workings_add (&workings, &(struct step) {
      .name = "total", .of = "raw", .formula = "t = sum(x_i)", .value = 1, .unit = "mol/mol",
      .source = STEP_TYPED, .term_count = 2, .terms = parts,
      STEP_COLUMNS ({ "x_i", x, "mol/mol", NULL, NULL }) });
  x[0] = 7;
  workings_add (&workings, &(struct step) {
      .name = "volume of a mole", .formula = "V = R T/p", .value = 0.0224, .unit = "m3/mol",
      .source = STEP_IDEAL_GAS, STEP_SYMBOLS (STEP_R, SYMBOL ("T", 273.15, "K"),
                                              SYMBOL ("p", 101325, "Pa")) });
  SAME_INT (workings.count, 2);
  NEED (workings.first != NULL && workings.first->next == workings.last);
  SAME_TEXT (workings.first->name, "total");
  SAME_TEXT (workings.first->of, "raw");
  SAME_TEXT (workings.first->terms[1], "CO2");
  NEAR (workings.first->columns[0].at[0], 0.6, 0);           /* the figure as it was then */
  NEAR (workings.first->columns[0].at[1], 0.4, 0);
  SAME_INT (workings.last->symbol_count, 3);
  SAME_TEXT (workings.last->symbols[0].name, "R");
  SAME_TEXT (workings.last->symbols[0].source, STEP_SI);
  NEAR (workings.last->symbols[0].value, GAS_CONSTANT, 0);
  NEAR (workings.last->symbols[2].value, 101325, 0);
  CHECK (workings.last->next == NULL);
  arena_destroy (arena);
}

static void
null_keeps_nothing (void)
{
  struct arena *arena = arena_create ();
  size_t before = arena_used (arena);

  workings_add (NULL, &(struct step) { .name = "molar mass", .value = 27.45, .unit = "g/mol" });
  SAME_INT (arena_used (arena), before);
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "steps are kept in order with their figures", keeps_steps_in_order },
  { "without a record nothing is kept", null_keeps_nothing },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
