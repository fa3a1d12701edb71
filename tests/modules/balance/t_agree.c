#include "config.h"

#include <math.h>

#include "libtest.h"
#include "plant.h"
#include "balance/solution.h"

/* Both shares of a split: 97 % and OTHER, which is stated to a tenth.  */
static struct plant *
two_shares (double other)
{
  static const double x[] = { 0.6, 0.4 };
  struct plant *plant = plant_make ("FAB", 2);
  plant_boundary (plant, BOUNDARY_SPLIT, "F", "AB");
  plant_total (plant, 'F', 850);
  plant_composition (plant, 'F', x);
  plant->fact[plant_share (plant, 'A', 'F', 0.97)].rounding = 0.005;
  plant->fact[plant_share (plant, 'B', 'F', other)].rounding = 0.0005;
  return plant;
}

/* They add up to 100.2 %.  The least squares of moves over half a digit share the 0.2 % out as
   0.5^2 to 0.05^2, and every stream has the feed's composition.                                 */
static void
shares_agree (void)
{
  struct plant *plant = two_shares (0.032);
  const struct solution *solution = plant_solved (plant);
  double b = 850 * (0.032 - 0.002 * 0.0025 / 0.2525);
  SAME_INT (solution->status, BALANCE_REDUNDANT);
  SAME_INT (solution->count.surplus, 1);
  NEAR (solution->value[plant_column (plant, 'B', 0)], 0.6 * b, 1e-11);
  NEAR (solution->value[plant_column (plant, 'B', 1)], 0.4 * b, 1e-11);
  NEAR (solution->value[plant_column (plant, 'A', 0)], 0.6 * (850 - b), 1e-11);
  CHECK (solution->mismatch < 1e-12);
  for (size_t i = 0; i < solution->redundant_count; i++) {
    CHECK (solution->redundant[i] >= 2);          /* the feed is implied by nothing */
  }
  plant_free (plant);
}

/* 100.545 % is within half a unit and half a tenth, if both go nearly all the way: least squares
   would take the first further than that.                                                       */
static void
shares_at_the_limit (void)
{
  struct plant *plant = two_shares (0.03545);
  const struct solution *solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_REDUNDANT);
  CHECK (fabs (solution->value[plant_column (plant, 'A', 0)] / 510 - 0.97) < 0.0050075);
  CHECK (fabs (solution->value[plant_column (plant, 'B', 0)] / 510 - 0.03545) < 0.00050075);
  plant_free (plant);
}

/* 100.6 % is not, though 3.6 standard deviations of rounding would still be chance.  */
static void
shares_beyond_the_limit (void)
{
  struct plant *plant = two_shares (0.036);
  const struct solution *solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_CONTRADICTORY);
  plant_free (plant);
}

enum { SPLITS = 60 };

/* Splits in a line, streams numbered from 1: inlet 1, the outlets that go on 2 to SPLITS + 1, the
   others behind those.                                                                          */
static struct plant *
line_of_splits (char names[2 * SPLITS + 2])
{
  static const double x[] = { 0.6, 0.3, 0.1 };
  struct plant *plant;
  for (int i = 0; i < 2 * SPLITS + 1; i++) {
    names[i] = (char) (i + 1);
  }
  names[2 * SPLITS + 1] = '\0';
  plant = plant_make (names, 3);
  for (int i = 1; i <= SPLITS; i++) {
    char in[] = { (char) i, '\0' };
    char out[] = { (char) (i + 1), (char) (SPLITS + 1 + i), '\0' };
    plant_boundary (plant, BOUNDARY_SPLIT, in, out);
  }
  plant_composition (plant, 1, x);
  return plant;
}

static void
state_shares (struct plant *plant, int split, double on, double off)
{
  char in = (char) split, next = (char) (split + 1), side = (char) (SPLITS + 1 + split);
  plant->fact[plant_share (plant, next, in, on)].rounding = 0.005;
  plant->fact[plant_share (plant, side, in, off)].rounding = 0.0005;
}

/* Every split is out by 0.4 %, which is within the digits of its own figures: however many there
   are, none clashes.  With all moves alike what goes on is known in closed form.                */
static void
many_agree (void)
{
  char names[2 * SPLITS + 2];
  struct plant *plant = line_of_splits (names);
  const struct solution *solution;
  double on = 0.97 - 0.004 * 0.25 / 0.2525;
  plant_total (plant, SPLITS + 1, 85);
  for (int i = 1; i <= SPLITS; i++) {
    state_shares (plant, i, 0.97, 0.034);
  }
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_REDUNDANT);
  SAME_INT (solution->count.surplus, SPLITS);
  NEAR (solution->value[plant_column (plant, 1, 0)], 51 / pow (on, SPLITS), 1e-10);
  plant_free (plant);
}

/* One that is out by 1 % among many that hold is a clash of its own two shares, and of what says
   that anything flows there at all: the feed and one share of each split before.                */
static void
one_of_many_clashes (void)
{
  char names[2 * SPLITS + 2];
  struct plant *plant = line_of_splits (names);
  const struct solution *solution;
  size_t own = 0;
  plant_total (plant, 1, 850);
  for (int i = 1; i <= SPLITS; i++) {
    state_shares (plant, i, 0.97, i == 20 ? 0.04 : 0.032);
  }
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_CONTRADICTORY);
  NEED (solution->conflict != NULL);
  for (size_t i = 0; i < solution->conflict->count; i++) {
    const struct fact *fact = &plant->fact[solution->conflict->suspects[i].fact];
    CHECK (fact->kind != FACT_SHARE || fact->of <= 19);
    own += fact->kind == FACT_SHARE && fact->of == 19 ? 1 : 0;
  }
  SAME_INT (own, 2);
  plant_free (plant);
}

/* A hundred flows of 1.0 and their sum.  Each may be off by 0.05 and all of them together by 5, but
   by chance by three times their standard deviation, 0.29, and hardly by ten times.             */
static void
sum_of_many (void)
{
  static const struct { double sum; enum balance_status status; } sums[] = {
    { 100.9, BALANCE_REDUNDANT }, { 103, BALANCE_CONTRADICTORY }, { 106, BALANCE_CONTRADICTORY }
  };
  char names[102], ins[101];
  for (int i = 0; i < 101; i++) {
    names[i] = (char) (i + 1);
  }
  names[101] = ins[100] = '\0';
  for (int i = 0; i < 100; i++) {
    ins[i] = names[i];
  }
  for (size_t k = 0; k < sizeof sums / sizeof *sums; k++) {
    struct plant *plant = plant_make (names, 1);
    plant_boundary (plant, BOUNDARY_MIX, ins, "\x65");
    for (char s = 1; s <= 100; s++) {
      plant->fact[plant_total (plant, s, 1)].rounding = 0.05;
    }
    plant->fact[plant_total (plant, 101, sums[k].sum)].rounding = 0.05;
    SAME_INT (plant_solved (plant)->status, sums[k].status);
    plant_free (plant);
  }
}

/* Two outlets in a ratio are one figure, and tell a split of two as a share does.  With a share as
   well one is to spare, however many components there are.                                      */
static void
outlets_in_a_ratio (void)
{
  static const double x[] = { 0.5, 0.3, 0.2 };
  for (int both = 0; both < 2; both++) {
    struct plant *plant = plant_make ("FAB", 3);
    const struct solution *solution;
    plant_boundary (plant, BOUNDARY_SPLIT, "F", "AB");
    plant_total (plant, 'F', 100);
    plant_composition (plant, 'F', x);
    plant_share (plant, 'A', 'B', 0.25);
    if (both) {
      plant_share (plant, 'B', 'F', 0.8);
    }
    solution = plant_solved (plant);
    SAME_INT (solution->status, both ? BALANCE_REDUNDANT : BALANCE_DETERMINED);
    SAME_INT (solution->count.surplus, both);
    NEAR (solution->value[plant_column (plant, 'A', 1)], 6, 1e-12);
    plant_free (plant);
  }
}

static const struct test_case cases[] = {
  { "two shares agree within their digits", shares_agree },
  { "they may go as far as half a last digit", shares_at_the_limit },
  { "and no further", shares_beyond_the_limit },
  { "many splits agree that agree each by itself", many_agree },
  { "one of many clashes by itself", one_of_many_clashes },
  { "outlets in a ratio are one figure", outlets_in_a_ratio },
  { "a sum may be off as far as chance goes", sum_of_many },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
