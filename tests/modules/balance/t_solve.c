#include "config.h"

#include <math.h>

#include "libtest.h"
#include "plant.h"
#include "balance/solution.h"
#include "support/fault.h"

static double
flow (const struct plant *plant, const struct solution *solution, char stream, size_t c)
{
  return solution->value[plant_column (plant, stream, c)];
}

static double
total (const struct plant *plant, const struct solution *solution, char stream)
{
  double sum = 0;
  for (size_t c = 0; c < plant->network.components; c++) {
    sum += flow (plant, solution, stream, c);
  }
  return sum;
}

static double
fraction (const struct plant *plant, const struct solution *solution, char stream, size_t c)
{
  return solution->fraction[plant_column (plant, stream, c)];
}

static void
same_count (struct count got, struct count want)
{
  SAME_INT (got.variables, want.variables);
  SAME_INT (got.balances, want.balances);
  SAME_INT (got.relations, want.relations);
  SAME_INT (got.knowns, want.knowns);
  SAME_INT (got.rank, want.rank);
  SAME_INT (got.missing, want.missing);
  SAME_INT (got.surplus, want.surplus);
}

/* A feed of two components is known, and one fraction of a product.  By hand: three streams of two
   flows; two balances; the feed counts twice, the fraction once.  P = .6 * 850 / .97 at most.   */
static void
short_by_one (void)
{
  static const double x[] = { 0.6, 0.4 };
  struct plant *plant = plant_make ("FPW", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_SEPARATE, "F", "PW");
  plant_total (plant, 'F', 850);
  plant_composition (plant, 'F', x);
  plant_fraction (plant, 'P', 0, 0.97);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_UNDERDETERMINED);
  same_count (solution->count, (struct count) { 6, 2, 0, 3, 5, 1, 0 });
  CHECK (solution->fixed_total[0] && !solution->fixed_total[1] && !solution->fixed_total[2]);
  CHECK (solution->fixed_fraction[3] && !solution->fixed_fraction[5]);
  NEAR (solution->total_range[1].least, 0, 1e-9);
  NEAR (solution->total_range[1].greatest, 510 / 0.97, 1e-12);
  NEAR (solution->total_range[2].least, 850 - 510 / 0.97, 1e-12);
  NEAR (solution->total_range[2].greatest, 850, 1e-12);
  NEED (solution->suggestion_count == 4);
  SAME_INT (solution->suggestions[0].quantity.kind, QUANTITY_TOTAL);
  SAME_INT (solution->suggestions[0].quantity.stream, 1);
  SAME_INT (solution->suggestions[1].quantity.kind, QUANTITY_TOTAL);
  SAME_INT (solution->suggestions[1].quantity.stream, 2);
  SAME_INT (solution->suggestions[2].quantity.kind, QUANTITY_FRACTION);
  SAME_INT (solution->suggestions[2].quantity.stream, 2);
  SAME_INT (solution->suggestions[3].quantity.component, 1);
  CHECK (!solution->scale_open);
  NEAR (solution->mass_in, 510 * 0.010 + 340 * 0.020, 1e-12);
  CHECK (isnan (solution->mass_out));
  plant_free (plant);
}

/* Air, oxygen and nitrogen make 1000 of 30 % oxygen.  By hand: oxygen = 300 - 0.21 air, nitrogen =
   700 - 0.79 air.                                                                               */
static void
three_sources (void)
{
  static const double air[] = { 0.21, 0.79 }, pure_oxygen[] = { 1, 0 };
  static const double pure_nitrogen[] = { 0, 1 };
  struct plant *plant = plant_make ("AONP", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "AON", "P");
  plant_total (plant, 'P', 1000);
  plant_fraction (plant, 'P', 0, 0.3);
  plant_composition (plant, 'A', air);
  plant_composition (plant, 'O', pure_oxygen);
  plant_composition (plant, 'N', pure_nitrogen);
  solution = plant_solved (plant);
  same_count (solution->count, (struct count) { 6, 2, 0, 3, 5, 1, 0 });
  NEED (solution->left_count == 2);
  SAME_INT (solution->left[0].stream, 1);
  SAME_INT (solution->left[0].count, 1);
  SAME_INT (solution->left[0].free[0], 0);
  NEAR (solution->left[0].constant, 300, 1e-12);
  NEAR (solution->left[0].factor[0], -0.21, 1e-12);
  NEAR (solution->left[1].constant, 700, 1e-12);
  NEAR (solution->left[1].factor[0], -0.79, 1e-12);
  NEAR (solution->total_range[0].greatest, 700 / 0.79, 1e-12);
  NEAR (solution->total_range[1].least, 300 - 0.21 * 700 / 0.79, 1e-12);
  NEAR (solution->total_range[2].greatest, 700, 1e-12);
  plant_free (plant);
}

/* One loop with a purge: m = f / (1 - r (1 - s)) for each component.  100 of H2 75, CH4 25; 70 %
   and 5 % pass the membrane; 20 % of the rest is purged.                                        */
static void
recycle_with_purge (void)
{
  static const double x[] = { 0.75, 0.25 };
  struct plant *plant = plant_make ("FIPRVB", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "FB", "I");
  plant_boundary (plant, BOUNDARY_SEPARATE, "I", "PR");
  plant_boundary (plant, BOUNDARY_SPLIT, "R", "VB");
  plant_total (plant, 'F', 100);
  plant_composition (plant, 'F', x);
  plant_ratio (plant, 'P', 0, 'I', 0, 0.70);
  plant_ratio (plant, 'P', 1, 'I', 1, 0.05);
  plant_share (plant, 'V', 'R', 0.2);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_DETERMINED);
  same_count (solution->count, (struct count) { 12, 6, 1 + 3, 2, 12, 0, 0 });
  NEAR (flow (plant, solution, 'I', 0), 75 / (1 - 0.8 * 0.3), 1e-12);
  NEAR (flow (plant, solution, 'I', 1), 25 / (1 - 0.8 * 0.95), 1e-12);
  CHECK (solution->mismatch < 1e-14);
  NEAR (solution->mass_in, solution->mass_out, 1e-12);
  CHECK (solution->range == NULL);
  plant_free (plant);
}

/* Compositions and a ratio only: every flow is open by one factor, every composition fixed.  By
   hand: the rest holds (0.21 - 0.2 * 0.25) / 0.8 = 0.2.                                         */
static void
scale_is_open (void)
{
  struct plant *plant = plant_make ("FPW", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_SEPARATE, "F", "PW");
  plant_fraction (plant, 'F', 0, 0.21);
  plant_fraction (plant, 'P', 0, 0.25);
  plant_ratio (plant, 'W', ALL, 'F', ALL, 0.8);
  solution = plant_solved (plant);
  SAME_INT (solution->count.missing, 1);
  CHECK (solution->scale_open);
  NEAR (fraction (plant, solution, 'W', 0), 0.2, 1e-12);
  CHECK (solution->fixed_fraction[0] && solution->fixed_fraction[5]);
  CHECK (!solution->fixed[0] && !solution->fixed_total[0]);
  CHECK (isinf (solution->total_range[0].greatest));
  NEAR (solution->total_range[0].least, 0, 1e-12);
  SAME_INT (solution->suggestion_count, 3);
  CHECK (total (plant, solution, 'F') > 0);
  plant_free (plant);
}

/* Feeds on one line: 12 equations for 12 unknowns, one short and one to spare.  Ranges by hand.  */
static void
collinear_blend (void)
{
  static const double a[] = { 0.2, 0.4, 0.3, 0.28 };
  static const double ranges[][2] = { { 20, 60 }, { 0, 40 }, { 0, 80 }, { 100, 100 } };
  struct plant *plant = plant_make ("ABCP", 3);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "ABC", "P");
  plant_total (plant, 'P', 100);
  for (size_t s = 0; s < 4; s++) {
    plant_fraction (plant, "ABCP"[s], 0, a[s]);
    plant_fraction (plant, "ABCP"[s], 1, 0.3);
  }
  solution = plant_solved (plant);
  same_count (solution->count, (struct count) { 12, 3, 0, 9, 11, 1, 1 });
  SAME_INT (solution->status, BALANCE_UNDERDETERMINED);
  for (size_t s = 0; s < 4; s++) {
    test_about ("range of %c", "ABCP"[s]);
    NEAR (solution->total_range[s].least, ranges[s][0], 1e-9);
    NEAR (solution->total_range[s].greatest, ranges[s][1], 1e-9);
  }
  for (size_t f = 0; f < 9; f++) {
    test_about ("fact %zu", f);
    SAME_INT (solution->checkable[f], f > 0 && f % 2 == 0);
  }
  SAME_INT (solution->suggestions[0].quantity.stream, 2);
  NEAR (flow (plant, solution, 'P', 0), 28, 1e-12);
  plant_free (plant);
}

/* F is half a; P is richer and W too: P must flow backwards.  */
static void
backwards (void)
{
  struct plant *plant = plant_make ("FPW", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_SEPARATE, "F", "PW");
  plant_total (plant, 'F', 100);
  plant_fraction (plant, 'F', 0, 0.5);
  plant_fraction (plant, 'P', 0, 0.6);
  plant_fraction (plant, 'W', 0, 0.55);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_DETERMINED);
  NEAR (total (plant, solution, 'P'), -100, 1e-12);
  NEED (solution->negative_count == 2);
  SAME_INT (solution->negative[0], plant_column (plant, 'P', 0));
  SAME_INT (solution->negative[1], plant_column (plant, 'P', 1));
  plant_free (plant);
}

/* Two mixed streams whose result has nothing of b: neither has any, by sign alone.  */
static void
fixed_by_sign (void)
{
  struct plant *plant = plant_make ("ABPW", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "AB", "P");
  plant_boundary (plant, BOUNDARY_SEPARATE, "P", "W");
  plant_total (plant, 'W', 10);
  plant_flow (plant, 'W', 0, 10);
  solution = plant_solved (plant);
  CHECK (solution->fixed[plant_column (plant, 'A', 1)]);
  CHECK (solution->fixed[plant_column (plant, 'B', 1)]);
  NEAR (flow (plant, solution, 'A', 1), 0, 1e-12);
  CHECK (!solution->fixed[plant_column (plant, 'A', 0)]);
  NEAR (solution->range[plant_column (plant, 'A', 0)].greatest, 10, 1e-12);
  NEAR (fraction (plant, solution, 'A', 0), 1, 1e-9);
  plant_free (plant);
}

/* CO + 1/2 O2 = CO2: 10 of CO and 7 of O2, 80 % of the CO converted.  */
static void
reaction (void)
{
  static const double nu[] = { -1, -0.5, 1 }, x[] = { 10.0 / 17, 7.0 / 17, 0 };
  struct plant *plant = plant_make ("FP", 3);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_REACT, "F", "P");
  plant_reaction (plant, nu);
  plant_total (plant, 'F', 17);
  plant_composition (plant, 'F', x);
  plant_ratio (plant, 'P', 0, 'F', 0, 0.2);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_DETERMINED);
  same_count (solution->count, (struct count) { 6, 3, 1, 2, 6, 0, 0 });
  NEAR (solution->value[6], 8, 1e-12);
  NEAR (flow (plant, solution, 'P', 1), 3, 1e-12);
  NEAR (flow (plant, solution, 'P', 2), 8, 1e-12);
  plant_free (plant);
}

/* The same reaction written twice: flows are fixed, extents are not.  */
static void
dependent_reactions (void)
{
  static const double nu[] = { -1, -0.5, 1 }, twice[] = { -2, -1, 2 };
  static const double x[] = { 10.0 / 17, 7.0 / 17, 0 };
  struct plant *plant = plant_make ("FP", 3);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_REACT, "F", "P");
  plant_reaction (plant, nu);
  plant_reaction (plant, twice);
  plant_total (plant, 'F', 17);
  plant_composition (plant, 'F', x);
  plant_ratio (plant, 'P', 0, 'F', 0, 0.2);
  solution = plant_solved (plant);
  SAME_INT (solution->count.missing, 1);
  CHECK (solution->fixed[plant_column (plant, 'P', 2)]);
  CHECK (!solution->fixed[6] && !solution->fixed[7]);
  CHECK (isinf (solution->range[6].least));
  NEED (solution->suggestion_count > 0);
  SAME_INT (solution->suggestions[0].quantity.kind, QUANTITY_EXTENT);
  plant_free (plant);
}

/* Oxygen in false air, on dry gas.  By hand: (0.09 - 0.06) * 880 / (0.21 - 0.09) = 220.  */
static void
dry_basis (void)
{
  struct plant *plant = plant_make ("GAP", 4);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "GA", "P");
  plant_never (plant, 'A', 2);
  plant_never (plant, 'A', 3);
  plant_total (plant, 'G', 1000);
  plant_fraction (plant, 'G', 3, 0.12);
  plant_dry_fraction (plant, 'G', 1, 3, 0.06);
  plant_dry_fraction (plant, 'G', 2, 3, 0.1);
  plant_fraction (plant, 'A', 1, 0.21);
  plant_dry_fraction (plant, 'P', 1, 3, 0.09);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_DETERMINED);
  NEAR (total (plant, solution, 'A'), 220, 1e-12);
  plant_free (plant);
}

/* A trace of 5 ppm among percents: (0.005 + 0.15) / 1010.  */
static void
traces (void)
{
  struct plant *plant = plant_make ("ABP", 3);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "AB", "P");
  plant_total (plant, 'A', 1000);
  plant_fraction (plant, 'A', 1, 0.02);
  plant_fraction (plant, 'A', 2, 5e-6);
  plant_total (plant, 'B', 10);
  plant_fraction (plant, 'B', 1, 0.3);
  plant_fraction (plant, 'B', 2, 0.015);
  solution = plant_solved (plant);
  NEAR (fraction (plant, solution, 'P', 2), 0.155 / 1010, 1e-11);
  plant_free (plant);
}

/* A network of whole flows.  */
static void
whole_flows (void)
{
  struct plant *plant = plant_make ("FABC", 1);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_SPLIT, "F", "ABC");
  plant_total (plant, 'F', 100);
  plant_share (plant, 'A', 'F', 0.25);
  plant_total (plant, 'B', 40);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_DETERMINED);
  same_count (solution->count, (struct count) { 4, 1, 1, 2, 4, 0, 0 });
  NEAR (flow (plant, solution, 'C', 0), 35, 1e-12);
  plant_free (plant);
}

/* A separator with part of its bottoms sent back, the share unknown.  By hand: with r = 5 / 9 back
   a = 50 / (1 - 0.2 r), b = 50 / (1 - 0.9 r) enter, and 45 leave as purge.                      */
static void
share_from_flow (void)
{
  struct plant *plant = plant_make ("FITBPL", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "FL", "I");
  plant_boundary (plant, BOUNDARY_SEPARATE, "I", "TB");
  plant_boundary (plant, BOUNDARY_SPLIT, "B", "PL");
  plant_total (plant, 'F', 100);
  plant_fraction (plant, 'F', 0, 0.5);
  plant_ratio (plant, 'T', 0, 'I', 0, 0.8);
  plant_ratio (plant, 'T', 1, 'I', 1, 0.1);
  plant_total (plant, 'P', 45);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_DETERMINED);
  same_count (solution->count, (struct count) { 12, 6, 3, 3, 12, 0, 0 });
  NEAR (flow (plant, solution, 'I', 0), 56.25, 1e-10);
  NEAR (flow (plant, solution, 'I', 1), 100, 1e-10);
  NEAR (total (plant, solution, 'L') / total (plant, solution, 'B'), 5.0 / 9, 1e-10);
  SAME_INT (solution->other_count, 0);
  CHECK (solution->fixed_total[5] && solution->fixed_fraction[11]);
  plant_free (plant);
}

/* A loop with a purge whose composition follows from the whole: 38 H2 and 2 CH4 leave.  */
static void
purge_from_whole (void)
{
  struct plant *plant = plant_make ("FICGPL", 2);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_MIX, "FL", "I");
  plant_boundary (plant, BOUNDARY_SEPARATE, "I", "CG");
  plant_boundary (plant, BOUNDARY_SPLIT, "G", "PL");
  plant_never (plant, 'C', 1);
  plant_total (plant, 'F', 100);
  plant_fraction (plant, 'F', 1, 0.02);
  plant_total (plant, 'C', 60);
  plant_total (plant, 'L', 160);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_DETERMINED);
  same_count (solution->count, (struct count) { 11, 6, 1, 4, 11, 0, 0 });
  NEAR (fraction (plant, solution, 'P', 1), 0.05, 1e-12);
  NEAR (fraction (plant, solution, 'I', 1), 10.0 / 260, 1e-12);
  plant_free (plant);
}

/* The same without any flow of the loop: the share is open, what leaves is not.  */
static void
share_open (void)
{
  struct plant *plant = plant_make ("FITBPL", 2);
  const struct solution *solution;
  bool share = false;
  plant_boundary (plant, BOUNDARY_MIX, "FL", "I");
  plant_boundary (plant, BOUNDARY_SEPARATE, "I", "TB");
  plant_boundary (plant, BOUNDARY_SPLIT, "B", "PL");
  plant_total (plant, 'F', 100);
  plant_fraction (plant, 'F', 0, 0.5);
  plant_ratio (plant, 'T', 0, 'I', 0, 0.8);
  plant_ratio (plant, 'T', 1, 'I', 1, 0.1);
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_UNDERDETERMINED);
  SAME_INT (solution->count.missing, 1);
  CHECK (!solution->fixed_fraction[plant_column (plant, 'P', 0)]);
  CHECK (solution->fixed_total[0] && !solution->fixed_total[4]);
  CHECK (solution->mismatch < 1e-10);
  for (size_t i = 0; i < solution->suggestion_count; i++) {
    share = share || solution->suggestions[i].quantity.kind == QUANTITY_SHARE;
  }
  CHECK (share);
  plant_free (plant);
}

/* Three meters with their uncertainties.  By the closed form: the gap of 10 is shared as 81, 25
   and 36 of 142; chi-square 100 / 142.                                                          */
static void
three_meters (void)
{
  struct plant *plant = plant_make ("FAB", 1);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_SEPARATE, "F", "AB");
  plant_total (plant, 'F', 850);
  plant_total (plant, 'A', 510);
  plant_total (plant, 'B', 330);
  plant->fact[0].u = 9;
  plant->fact[1].u = 5;
  plant->fact[2].u = 6;
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_RECONCILED);
  same_count (solution->count, (struct count) { 3, 1, 0, 3, 3, 0, 1 });
  NEAR (solution->value[0], 850 - 10 * 81.0 / 142, 1e-9);
  NEAR (solution->value[2], 330 + 10 * 36.0 / 142, 1e-9);
  NEAR (solution->chi2, 100.0 / 142, 1e-9);
  SAME_INT (solution->freedom, 1);
  NEED (solution->adjustment_count == 3);
  CHECK (solution->covariance != NULL);
  SAME_INT (solution->redundant_count, 3);
  plant_free (plant);
}

/* A measured flow beside an open one: what it settles is uncertain, what is open has its range. */
static void
measured_and_open (void)
{
  struct plant *plant = plant_make ("FABC", 1);
  const struct solution *solution;
  plant_boundary (plant, BOUNDARY_SEPARATE, "F", "ABC");
  plant_total (plant, 'F', 850);
  plant_total (plant, 'A', 510);
  plant->fact[0].u = 9;
  solution = plant_solved (plant);
  SAME_INT (solution->status, BALANCE_UNDERDETERMINED);
  SAME_INT (solution->count.missing, 1);
  NEAR (solution->total_range[2].greatest, 340, 1e-12);
  NEAR (solution->value[0], 850, 1e-12);
  plant_free (plant);
}

/* A stop asked for is a fault.  */
static bool
now (void)
{
  return true;
}

static void
stops (void)
{
  static const struct solve_options options = { 0.95, now };
  struct plant *plant = plant_make ("FA", 1);
  struct fault fault;
  fault_init (&fault, plant->arena);
  plant_boundary (plant, BOUNDARY_MIX, "F", "A");
  CHECK (!network_solve (plant->arena, &plant->network, &options, &fault));
  SAME_INT (fault.kind, MESSAGE_INTERRUPTED);
  plant_free (plant);
}

static const struct test_case cases[] = {
  { "a separator with one fraction of a product is short by one", short_by_one },
  { "oxygen and nitrogen are written in air", three_sources },
  { "a recycle with purge has its geometric series", recycle_with_purge },
  { "without any flow only the scale is open", scale_is_open },
  { "feeds on one line leave ranges", collinear_blend },
  { "a flow backwards is named, not clipped", backwards },
  { "what cannot be below zero is fixed", fixed_by_sign },
  { "a reaction has an extent", reaction },
  { "a reaction written twice is short by one extent", dependent_reactions },
  { "fractions may be of dry gas", dry_basis },
  { "traces keep their digits", traces },
  { "whole flows alone", whole_flows },
  { "a share of a split comes from a flow", share_from_flow },
  { "a purge has the composition of what leaves", purge_from_whole },
  { "a share of a split may be open", share_open },
  { "three meters are reconciled", three_meters },
  { "what a measured flow leaves open has its range", measured_and_open },
  { "the user may stop it", stops },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
