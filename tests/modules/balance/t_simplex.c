#include "config.h"

#include <math.h>

#include "libtest.h"
#include "balance/simplex.h"
#include "support/arena.h"

#define NO SIMPLEX_NO_SLACK

/* Most of 3 x + 2 y with x + y <= 4, x + 3 y <= 6, x <= 3: by drawing it, at (3, 1), 11.  */
static void
corner (void)
{
  static double a[] = { 1, 1, 1, 0, 0,  1, 3, 0, 1, 0,  1, 0, 0, 0, 1 }, b[] = { 4, 6, 3 };
  static size_t slack[] = { 2, 3, 4 };
  static const double cost[] = { -3, -2, 0, 0, 0 };
  struct simplex simplex = { 3, 5, a, b, slack };
  for (unsigned seed = 0; seed < 4; seed++) {
    struct arena *arena = arena_create ();
    double least = 0;
    test_about ("seed %u", seed);
    SAME_INT (simplex_solve (arena, &simplex, cost, seed, &least, NULL), SIMPLEX_LEAST);
    NEAR (least, -11, 1e-12);
    arena_destroy (arena);
  }
}

/* x + y = 2 with x - y = 0 and 2 x + y = 3, with a right side below zero: (1, 1).  */
static void
equations (void)
{
  static double a[] = { 1, 1,  -2, -1,  1, -1 }, b[] = { 2, -3, 0 };
  static size_t slack[] = { NO, NO, NO };
  static const double cost[] = { 5, 7 };
  struct simplex simplex = { 3, 2, a, b, slack };
  struct arena *arena = arena_create ();
  double least = 0;
  SAME_INT (simplex_solve (arena, &simplex, cost, 0, &least, NULL), SIMPLEX_LEAST);
  NEAR (least, 12, 1e-12);
  arena_destroy (arena);
}

static void
endless (void)
{
  static double a[] = { 1, -1 }, b[] = { 1 };
  static size_t slack[] = { NO };
  static const double cost[] = { -1, 0 };
  struct simplex simplex = { 1, 2, a, b, slack };
  struct arena *arena = arena_create ();
  double least = 0;
  SAME_INT (simplex_solve (arena, &simplex, cost, 0, &least, NULL), SIMPLEX_ENDLESS);
  arena_destroy (arena);
}

/* x + y = 1, x + y + z = 3, z + w = 1: the second and third ask for z = 2 and z <= 1.  Rows of the
   proof take all columns to at most nothing and the right sides above it (Farkas); the row of v
   alone has no part in it.                                                                      */
static void
proof (void)
{
  static double a[] = { 1, 1, 0, 0, 0,  1, 1, 1, 0, 0,  0, 0, 1, 1, 0,  0, 0, 0, 0, 1 };
  static double b[] = { 1, 3, 1, 5 };
  static size_t slack[] = { NO, NO, NO, NO };
  struct simplex simplex = { 4, 5, a, b, slack };
  for (unsigned seed = 0; seed < 4; seed++) {
    struct arena *arena = arena_create ();
    double y[4] = { 0, 0, 0, 0 }, right = 0;
    test_about ("seed %u", seed);
    SAME_INT (simplex_solve (arena, &simplex, NULL, seed, NULL, y), SIMPLEX_NONE);
    for (size_t i = 0; i < 4; i++) {
      right += y[i] * b[i];
    }
    CHECK (right > 0.5);
    for (size_t j = 0; j < 5; j++) {
      double sum = 0;
      for (size_t i = 0; i < 4; i++) {
        sum += y[i] * a[i * 5 + j];
      }
      CHECK (sum < 1e-9);
    }
    NEAR (y[3], 0, 1e-12);
    arena_destroy (arena);
  }
}

static const struct test_case cases[] = {
  { "a corner with the most", corner },
  { "equations that leave one point", equations },
  { "as much as one likes", endless },
  { "a proof that there is nothing", proof },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
