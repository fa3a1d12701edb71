#include "config.h"

#include <math.h>

#include "libtest.h"
#include "plant.h"
#include "balance/system.h"
#include "support/arena.h"

static const bool take_all[] = { true, true, true, true, true, true, true, true };

/* What is nowhere in a mixer's inlets cannot come out, and back again through a separator.  */
static void
absences_spread (void)
{
  struct plant *plant = plant_make ("ABCDE", 3);
  struct absence absence;
  plant_boundary (plant, BOUNDARY_MIX, "AB", "C");
  plant_boundary (plant, BOUNDARY_SEPARATE, "C", "DE");
  plant_never (plant, 'A', 2);
  plant_never (plant, 'B', 2);
  plant_never (plant, 'D', 1);
  plant_never (plant, 'E', 1);
  absence = absence_spread (plant->arena, &plant->network, take_all);
  for (size_t s = 0; s < 5; s++) {
    test_about ("stream %zu", s);
    CHECK (!absence.absent[3 * s]);
    CHECK (absence.absent[3 * s + 1]);
    CHECK (absence.absent[3 * s + 2]);
  }
  plant_free (plant);
}

/* A figure of nothing does the same; a reaction of the component stops it.  */
static void
absences_from_facts (void)
{
  static const double nu[] = { -1, 1 };
  struct plant *plant = plant_make ("ABCD", 2);
  struct absence absence;
  size_t fraction;
  plant_boundary (plant, BOUNDARY_SPLIT, "A", "BC");
  plant_boundary (plant, BOUNDARY_REACT, "B", "D");
  plant_reaction (plant, nu);
  fraction = plant_fraction (plant, 'A', 0, 1);
  absence = absence_spread (plant->arena, &plant->network, take_all);
  CHECK (absence.absent[plant_column (plant, 'B', 1)]);
  CHECK (absence.absent[plant_column (plant, 'C', 1)]);
  SAME_INT (absence.cause[plant_column (plant, 'C', 1)], fraction);
  CHECK (!absence.absent[plant_column (plant, 'D', 1)]);
  CHECK (!absence.absent[network_extent (&plant->network, 1)]);
  plant_free (plant);
}

/* Nothing in one branch does not empty the other.  */
static void
empty_branches (void)
{
  struct plant *plant = plant_make ("ABC", 2);
  struct absence absence;
  plant_boundary (plant, BOUNDARY_SPLIT, "A", "BC");
  plant_total (plant, 'B', 0);
  absence = absence_spread (plant->arena, &plant->network, take_all);
  CHECK (absence.absent[plant_column (plant, 'B', 0)]);
  CHECK (absence.absent[plant_column (plant, 'B', 1)]);
  CHECK (!absence.absent[plant_column (plant, 'A', 0)]);
  CHECK (!absence.absent[plant_column (plant, 'C', 1)]);
  plant_free (plant);
}

/* Half of 10 + 30 goes to B: all rows hold there, and none of a split is left bent.  */
static void
rows_hold (void)
{
  static const double v[] = { 10, 30, 5, 15, 5, 15 }, x[] = { 0.25, 0.75 };
  struct plant *plant = plant_make ("ABC", 2);
  const struct system *system;
  plant_boundary (plant, BOUNDARY_SPLIT, "A", "BC");
  plant_total (plant, 'A', 40);
  plant_composition (plant, 'A', x);
  plant_share (plant, 'B', 'A', 0.5);
  plant_share (plant, 'C', 'A', 0.5);
  plant_fraction (plant, 'C', 0, 0.25);
  system = system_make (plant->arena, &plant->network, take_all, NULL);
  SAME_INT (system->present, 6);
  SAME_INT (system->structure, 2);
  SAME_INT (system->bends, 0);
  SAME_INT (system->rows.count, 2 + 1 + 1 + 2 + 1 + 1);
  for (size_t i = 0; i < system->rows.count; i++) {
    test_about ("row %zu", i);
    NEAR (rows_residual (&system->rows, i, v), 0, 1e-15);
  }
  plant_free (plant);
}

/* The derivatives of a bend against differences, in all six unknowns.  */
static void
bends_have_derivatives (void)
{
  double v[] = { 10, 30, 20, 7, 6, 3, 5, 20, 11 };
  struct plant *plant = plant_make ("ABC", 3);
  const struct system *system;
  struct rows at, moved;
  plant_boundary (plant, BOUNDARY_SPLIT, "A", "BC");
  system = system_make (plant->arena, &plant->network, take_all, NULL);
  SAME_INT (system->bends, 1);
  at = system_bent (plant->arena, system, v);
  SAME_INT (at.count, 2);
  for (size_t j = 0; j < 9; j++) {
    v[j] += 1e-6;
    moved = system_bent (plant->arena, system, v);
    v[j] -= 1e-6;
    for (size_t i = 0; i < at.count; i++) {
      double derivative = 0;
      for (size_t e = at.start[i]; e < at.start[i + 1]; e++) {
        derivative += at.column[e] == j ? at.coefficient[e] : 0;
      }
      test_about ("row %zu by column %zu", i, j);
      CHECK (fabs ((at.right[i] - moved.right[i]) / 1e-6 - derivative) < 1e-6);
    }
  }
  plant_free (plant);
}

static const struct test_case cases[] = {
  { "what cannot be in a stream spreads through the network", absences_spread },
  { "so does a figure of nothing, up to a reaction", absences_from_facts },
  { "an empty branch leaves the others", empty_branches },
  { "rows hold where the balance does", rows_hold },
  { "the rows of a split of unknown share have their derivatives", bends_have_derivatives },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
