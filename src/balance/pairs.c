#include "config.h"
#include "balance/pairs.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include <string.h>
#include "balance/conflict.h"
#include "balance/rank.h"
#include "support/arena.h"
#include "support/fault.h"

enum { MOST_TOLD = 5 };

/* Multiplications spent on looking for pairs, and pairs that are solved without.  */
static const double most_work = 5e8;
enum { MOST_SOLVED = 150 };
/* As in agree.c: facts without a figure wrong are taken for clashing once in ten thousand, exact
   ones when they are out by more than this part.                                                */
static const double least_p = 1e-4, out_of_exact = 1e-9;

struct work {
  struct arena *arena;
  const struct core *core;
  const struct system *system;
  size_t rows, k;
  double *rho, *spread;          /* left null vectors times right sides; [c * rows + figure]: times
                                    sigma */
  double floor;
  size_t solved;                 /* pairs without which all was solved */
};

static void
prepare (struct work *work)
{
  const struct system *system = work->system;
  size_t m = system->structure;
  double most = 0;
  work->rho = ARENA_ARRAY (work->arena, work->k + 1, double);
  work->spread = ARENA_ARRAY (work->arena, work->k * work->rows + 1, double);
  for (size_t i = 0; i < work->rows; i++) {
    double right = system->rows.right[m + i] * system->row_scale[m + i];
    most = fmax (most, fabs (right));
    for (size_t c = 0; c < work->k; c++) {
      double left = system->left[i * work->k + c];
      work->rho[c] += left * right;
      work->spread[c * work->rows + work->core->figure[i]] += left * work->core->sigma[i];
    }
  }
  work->floor = out_of_exact * most;
}

/* Do the facts agree without those two, in what the left null vectors make of them?  Vectors that
   have nothing in the rows of the two: their clashes within digits against chi-square.          */
static bool
agree_without (const struct work *work, const size_t pair[2])
{
  struct arena *arena = arena_create ();
  size_t k = work->k, out = 0, left;
  double *own = ARENA_ARRAY (arena, work->rows * k + 1, double), chi2 = 0, most = 0;
  for (size_t i = 0; i < work->rows; i++) {
    size_t fact = work->system->rows.row[work->system->structure + i].of;
    if (fact == pair[0] || fact == pair[1]) {
      memcpy (&own[out++ * k], &work->system->left[i * k], k * sizeof *own);
    }
  }
  struct space space = space_make (arena, out, k, own);
  left = k - space.rank;
  double *gap = ARENA_ARRAY (arena, left + 1, double), *y = ARENA_ARRAY (arena, left + 1, double);
  double *m = ARENA_ARRAY (arena, left * work->rows + 1, double);
  double *square = ARENA_ARRAY (arena, left * left + 1, double);
  for (size_t a = 0; a < left; a++) {
    for (size_t c = 0; c < k; c++) {
      double part = space_null (&space, c, a);
      gap[a] += part * work->rho[c];
      for (size_t i = 0; i < work->rows; i++) {
        m[a * work->rows + i] += part * work->spread[c * work->rows + i];
      }
    }
  }
  for (size_t i = 0; i < left * left; i++) {
    for (size_t r = 0; r < work->rows; r++) {
      square[i] += m[i / left * work->rows + r] * m[i % left * work->rows + r];
    }
  }
  struct space spread = space_make (arena, left, left, square);
  space_solve (arena, &spread, gap, y);
  for (size_t a = 0; a < left; a++) {
    double residual = gap[a];
    for (size_t b = 0; b < left; b++) {
      residual -= square[a * left + b] * y[b];
    }
    most = fmax (most, fabs (residual));
    chi2 += gap[a] * y[a];
  }
  bool agree = most <= work->floor
               && (spread.rank == 0 || gsl_cdf_chisq_Q (chi2, (double) spread.rank) >= least_p);
  arena_destroy (arena);
  return agree;
}

/* The component of a composition whose row clashes most.  */
static size_t
odd_component (const struct work *work, size_t fact)
{
  size_t found = work->core->network->components;
  double most = -1;
  for (size_t i = 0; i < work->rows; i++) {
    const struct row *row = &work->system->rows.row[work->system->structure + i];
    double out = 0;
    for (size_t c = 0; c < work->k; c++) {
      out += work->system->left[i * work->k + c] * work->rho[c];
    }
    if (row->of == fact && fabs (out) > most) {
      most = fabs (out);
      found = row->component;
    }
  }
  return work->core->network->fact[fact].kind == FACT_COMPOSITION
           ? found : work->core->network->components;
}

/* By how much of itself a fact would change.  */
static double
change (const struct work *work, const struct suspect *suspect)
{
  const struct fact *fact = &work->core->network->fact[suspect->fact];
  double now = fact->kind == FACT_COMPOSITION ? fact->fractions[suspect->component] : fact->value;
  double size = fmax (fabs (now), fabs (suspect->needed));
  return size > 0 ? fabs (suspect->needed - now) / size : 0;
}

/* Puts the pair in its place among the COUNT best, which are at most MOST_TOLD.  */
static void
keep_pair (const struct work *work, const struct suspect pair[2], struct suspect_pair best[],
           double cost[], size_t *count)
{
  double own = fmax (change (work, &pair[0]), change (work, &pair[1]));
  size_t at = *count < MOST_TOLD ? (*count)++ : MOST_TOLD - 1;
  if (at == MOST_TOLD - 1 && cost[at] > 0 && cost[at] <= own) {
    return;
  }
  for (; at > 0 && cost[at - 1] > own * (1 + 1e-9); at--) {
    best[at] = best[at - 1];
    cost[at] = cost[at - 1];
  }
  best[at] = (struct suspect_pair) { { pair[0], pair[1] } };
  cost[at] = own;
}

static bool
is_checked (const struct work *work, size_t fact)
{
  for (size_t i = 0; i < work->rows; i++) {
    for (size_t c = 0; c < work->k; c++) {
      if (work->system->rows.row[work->system->structure + i].of == fact
          && fabs (work->system->left[i * work->k + c]) > 1e-8) {
        return true;
      }
    }
  }
  return false;
}

/* One pair: what it would have to say, if the rest agrees.  False: interrupted.  */
static bool
try_pair (struct work *work, const size_t fact[2], struct suspect pair[2], bool *plausible,
          struct fault *fault)
{
  *plausible = false;
  if (!core_goes_on (work->core->options, fault)) {
    return false;
  }
  if (!agree_without (work, fact)) {
    return true;
  }
  for (int side = 0; side < 2; side++) {
    pair[side] = (struct suspect) { .fact = fact[side],
                                    .component = odd_component (work, fact[side]) };
  }
  work->solved++;
  if (!suspects_need (work->core, pair, 2, fault)) {
    return false;
  }
  *plausible = pair[0].plausible && pair[1].plausible && !isnan (pair[0].needed)
               && !isnan (pair[1].needed);
  return true;
}

bool
pairs_find (struct arena *keep, const struct core *core, const bool set[],
            struct conflict *conflict, struct fault *fault)
{
  struct work work = { .arena = core->arena, .core = core, .system = core->system,
                       .k = core->system->surplus,
                       .rows = core->system->rows.count - core->system->structure };
  size_t facts = core->network->facts, told = 0, all = 0;
  double each = (double) work.rows * (double) work.k * (double) work.k;
  double cost[MOST_TOLD] = { 0 };
  struct suspect_pair *best = ARENA_ARRAY (keep, MOST_TOLD, struct suspect_pair);
  bool cut = each * (double) facts * (double) conflict->count > most_work;
  prepare (&work);
  for (size_t f = 0; f < facts && !cut; f++) {
    const bool clashes = set[f] && is_checked (&work, f);       /* with a row of its own */
    for (size_t g = 0; g < facts && clashes && work.solved < MOST_SOLVED; g++) {
      struct suspect pair[2];
      bool plausible;
      if (g == f || (g < f && set[g]) || !is_checked (&work, g)) {
        continue;
      }
      if (!try_pair (&work, (size_t[]) { f, g }, pair, &plausible, fault)) {
        return false;
      }
      if (plausible) {
        keep_pair (&work, pair, best, cost, &told);
        all++;
      }
    }
  }
  conflict->pairs = best;
  conflict->pair_count = told;
  conflict->pairs_left = all - told;
  conflict->pairs_cut = cut || work.solved == MOST_SOLVED;
  return true;
}
