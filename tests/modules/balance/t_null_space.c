#include "config.h"

#include <math.h>

#include "libtest.h"
#include "balance/null_space.h"
#include "balance/system.h"
#include "support/arena.h"

enum { COLUMNS = 7 };

/* Four vectors: the first and the last share column 4, the second and the third are each alone.
   Column 6 is in none.                                                                          */
static const size_t start[] = { 0, 2, 3, 5, 8 };
static const size_t column[] = { 0, 4, 2, 3, 1, 4, 5, 0 };
static const double value[] = { 1, 2, -3, 4, 3, 1, 1, 1 };
static const struct null_vectors vectors = { 4, start, column, value, NULL };

static void
blocks (void)
{
  static const size_t of[COLUMNS] = { 0, 2, 1, 2, 0, 0, NOWHERE };
  struct arena *arena = arena_create ();
  const struct null_space *space = null_space_make (arena, COLUMNS, &vectors);
  SAME_INT (space->freedom, 4);
  SAME_INT (space->blocks, 3);
  for (size_t j = 0; j < COLUMNS; j++) {
    test_about ("column %zu", j);
    CHECK (space->of[j] == of[j]);
  }
  SAME_INT (space->block[0].directions, 2);
  SAME_INT (space->block[1].first, 2);
  SAME_INT (space->block[2].columns, 2);
  NEAR (null_space_reach (space, 2), 1, 1e-15);
  NEAR (null_space_reach (space, 3), 0.8, 1e-15);
  NEAR (null_space_reach (space, 6), 0, 0);
  arena_destroy (arena);
}

/* Orthonormal, and the same space: what every vector has along the directions is all of it.  */
static void
same_space (void)
{
  struct arena *arena = arena_create ();
  const struct null_space *space = null_space_make (arena, COLUMNS, &vectors);
  const double *dense = null_space_dense (arena, space);
  for (size_t a = 0; a < 4; a++) {
    for (size_t b = 0; b <= a; b++) {
      double dot = 0;
      for (size_t j = 0; j < COLUMNS; j++) {
        dot += dense[j * 4 + a] * dense[j * 4 + b];
      }
      CHECK (fabs (dot - (a == b ? 1 : 0)) < 1e-14);
    }
  }
  for (size_t k = 0; k < 4; k++) {
    double v[COLUMNS] = { 0 }, z[4], back[COLUMNS] = { 0 };
    for (size_t e = start[k]; e < start[k + 1]; e++) {
      v[column[e]] = value[e];
    }
    null_space_along (space, v, z);
    null_space_move (space, z, back);
    for (size_t j = 0; j < COLUMNS; j++) {
      test_about ("vector %zu, column %zu", k, j);
      CHECK (fabs (back[j] - v[j]) < 1e-14);
    }
  }
  arena_destroy (arena);
}

/* What was dense comes back the same, in the order of its blocks.  */
static void
from_dense (void)
{
  static const double base[] = { 0, 0.6, 0, 9,  1, 0, 0, 9,  0, 0.8, 0, 9,  0, 0, 1, 9 };
  struct arena *arena = arena_create ();
  const struct null_space *space = null_space_of (arena, 4, 3, 4, base);
  const double *dense = null_space_dense (arena, space);
  SAME_INT (space->blocks, 3);
  for (size_t j = 0; j < 4; j++) {
    for (size_t k = 0; k < 3; k++) {
      NEAR (dense[j * 3 + k], base[j * 4 + k], 0);
    }
  }
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "vectors that share a column are one block", blocks },
  { "a basis is orthonormal and of the same space", same_space },
  { "an orthonormal basis is taken as it is", from_dense },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
