#include "config.h"

#include <math.h>

#include "libtest.h"
#include "plant.h"
#include "balance/null_space.h"
#include "balance/rank.h"
#include "balance/reduce.h"
#include "balance/system.h"
#include "support/arena.h"

static const bool take_all[] = { true, true, true, true, true, true, true, true, true, true };

/* A = (1 2 3; 2 4 6): rank 1, two null vectors, one left null vector; A x = (1, 2) has the
   shortest solution (1, 2, 3) / 14.                                                             */
static void
spaces (void)
{
  static const double a[] = { 1, 2, 3, 2, 4, 6 }, b[] = { 1, 2 };
  struct arena *arena = arena_create ();
  struct space space = space_make (arena, 2, 3, a);
  double x[3];
  SAME_INT (space.rank, 1);
  for (size_t k = 0; k < 2; k++) {
    double sum = 0;
    for (size_t j = 0; j < 3; j++) {
      sum += a[j] * space_null (&space, j, k);
    }
    NEAR (sum, 0, 1e-15);
  }
  NEAR (space_left (&space, 0, 0) + 2 * space_left (&space, 1, 0), 0, 1e-15);
  space_solve (arena, &space, b, x);
  NEAR (x[0], 1.0 / 14, 1e-14);
  NEAR (x[2], 3.0 / 14, 1e-14);
  space = space_make (arena, 0, 3, a);
  SAME_INT (space.rank, 0);
  NEAR (space_null (&space, 1, 1), 1, 0);
  arena_destroy (arena);
}

/* Streams of three components on one line: 12 equations for 12 unknowns have rank 11, one missing
   and one to spare.  By hand: the three feeds may change as 1 : 1 : -2.                         */
static void
collinear_blend (void)
{
  static const double a[] = { 0.2, 0.4, 0.3, 0.28 };
  struct plant *plant = plant_make ("ABCP", 3);
  struct system *system;
  plant_boundary (plant, BOUNDARY_MIX, "ABC", "P");
  plant_total (plant, 'P', 100);
  for (size_t s = 0; s < 4; s++) {
    plant_fraction (plant, "ABCP"[s], 0, a[s]);
    plant_fraction (plant, "ABCP"[s], 1, 0.3);
  }
  system = system_make (plant->arena, &plant->network, take_all, NULL);
  system_reduce (plant->arena, system, REDUCE_CORE);
  system_open (plant->arena, system, NULL);
  SAME_INT (system->present, 12);
  SAME_INT (system->rows.count, 12);
  SAME_INT (system->rank, 11);
  SAME_INT (system->freedom, 1);
  SAME_INT (system->surplus, 1);
  const double *null = null_space_dense (plant->arena, system->null);
  NEAR (system_total (system, null, 2) / system_total (system, null, 0), -2, 1e-12);
  NEAR (system_total (system, null, 3), 0, 1e-14);
  NEAR (system_total (system, system->particular, 3), 100, 1e-14);
  plant_free (plant);
}

/* A splitter with its feed known whole: its composition rows leave the share free and no more.  */
static void
narrows_by_bends (void)
{
  static const double x[] = { 0.2, 0.3, 0.5 };
  static const double v[] = { 20, 30, 50, 5, 7.5, 12.5, 15, 22.5, 37.5 };
  struct plant *plant = plant_make ("FAB", 3);
  struct system *system;
  plant_boundary (plant, BOUNDARY_SPLIT, "F", "AB");
  plant_total (plant, 'F', 100);
  plant_composition (plant, 'F', x);
  system = system_make (plant->arena, &plant->network, take_all, NULL);
  system_reduce (plant->arena, system, REDUCE_CORE);
  system_open (plant->arena, system, NULL);
  SAME_INT (system->freedom, 3);
  SAME_INT (system_narrow (plant->arena, system, v)->freedom, 1);
  plant_free (plant);
}

static const struct test_case cases[] = {
  { "a matrix has its rank, null spaces and shortest solution", spaces },
  { "a blend of gases on one line is short by one", collinear_blend },
  { "the bends of a split leave its share free", narrows_by_bends },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
