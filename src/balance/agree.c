#include "config.h"
#include "balance/core.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include <string.h>
#include "balance/agree_sparse.h"
#include "balance/reduce.h"
#include "support/arena.h"

/* Facts without a figure wrong are taken for clashing once in ten thousand.  */
static const double least_p = 1e-4;
/* A row is independent of others if more than this part of it is orthogonal to them.  */
static const double dependent = 1e-10;
/* Facts of exact figures clash when they are out by more than this, relative.  */
static const double out_of_exact = 1e-9;

/* How far row I (of the system) moves when its figure moves by one standard deviation of its
   rounding, which is rectangular: half a last digit over the square root of 3 (JCGM 100:2008,
   4.3.7).                                                                                       */
static double
row_sigma (const struct core *core, size_t i)
{
  const struct system *system = core->system;
  const struct network *network = core->network;
  const struct row *row = &system->rows.row[i];
  const struct fact *fact = &network->fact[row->of];
  double by = 1, rounding = fact->rounding;
  switch (fact->kind) {
  case FACT_FORM:
    break;
  case FACT_RATIO:
    by = form_value (&fact->right, core->v);
    break;
  case FACT_COMPOSITION:
    by = system_total (system, core->v, fact->stream);
    rounding = fact->fractions_rounding ? fact->fractions_rounding[row->component] : 0;
    break;
  case FACT_SHARE:
    by = row->component == NOWHERE
           ? system_total (system, core->v, fact->of)
           : core->v[fact->of * network->components + row->component];
    break;
  }
  return fabs (by) * rounding / sqrt (3) * system->row_scale[i];
}

/* A figure that alone sets the scale of all flows contradicts nothing: it counts as exact.  */
static size_t
scale_figure (const struct system *system)
{
  size_t found = NOWHERE;
  for (size_t i = system->structure; i < system->rows.count; i++) {
    if (fabs (system->rows.right[i]) > 0) {
      if (found != NOWHERE) {
        return NOWHERE;
      }
      found = i;
    }
  }
  return found;
}

static void
find_sigmas (struct core *core)
{
  const struct system *system = core->system;
  size_t facts = system->rows.count - system->structure, alone = scale_figure (system);
  double *sigma = ARENA_ARRAY (core->arena, facts + 1, double);
  size_t *figure = ARENA_ARRAY (core->arena, facts + 1, size_t);
  for (size_t i = 0; i < facts; i++) {
    const struct row *row = &system->rows.row[system->structure + i];
    bool again = i > 0 && core->network->fact[row->of].kind == FACT_SHARE
                 && row[-1].of == row->of;
    figure[i] = again ? figure[i - 1] : i;
    sigma[i] = system->structure + i == alone ? 0 : row_sigma (core, system->structure + i);
  }
  core->sigma = sigma;
  core->figure = figure;
}

static double
largest_right (const struct system *system)
{
  double largest = 0;
  for (size_t i = system->structure; i < system->rows.count; i++) {
    largest = fmax (largest, fabs (system->rows.right[i] * system->row_scale[i]));
  }
  return largest;
}

/* The shortest Y with L'S y = rho, for rows of L'S that may depend on each other: one row after
   the other, each made orthogonal to those before; how many do not.                             */
static size_t
shortest (size_t facts, size_t k, const double ls[], const double rho[], double y[], double q[])
{
  size_t rank = 0;
  for (size_t c = 0; c < k; c++) {
    const double *row = &ls[c * facts];
    double *next = &q[rank * facts], size = 0, left = 0, gap = rho[c];
    memcpy (next, row, facts * sizeof *next);
    for (size_t p = 0; p < 2 * rank; p++) {
      double along = 0;
      for (size_t i = 0; i < facts; i++) {
        along += q[p % rank * facts + i] * next[i];
      }
      for (size_t i = 0; i < facts; i++) {
        next[i] -= along * q[p % rank * facts + i];
      }
    }
    for (size_t i = 0; i < facts; i++) {
      size += row[i] * row[i];
      left += next[i] * next[i];
      gap -= row[i] * y[i];
    }
    if (left > dependent * dependent * size) {
      for (size_t i = 0; i < facts; i++) {
        y[i] += gap * next[i] / left;
        next[i] /= sqrt (left);
      }
      rank++;
    }
  }
  return rank;
}

/* With L' the left null vectors, S the figures' standard deviations and b the right sides, the
   smallest changes y of the figures that make all rows hold are the shortest y with L'S y = L'b;
   |y|^2 is chi-square with as many degrees of freedom as L'S has rank.                          */
static void
judge (struct core *core, const double rho[], double tolerance)
{
  const struct system *system = core->system;
  size_t facts = system->rows.count - system->structure, k = system->surplus, rank;
  double *ls = ARENA_ARRAY (core->arena, facts * k + 1, double), chi2 = 0;
  double *q = ARENA_ARRAY (core->arena, facts * (k + 1) + 1, double);
  double *y = ARENA_ARRAY (core->arena, facts + 1, double);
  double *b = ARENA_ARRAY (core->arena, facts + 1, double);
  for (size_t i = 0; i < facts; i++) {
    for (size_t c = 0; c < k; c++) {
      ls[c * facts + core->figure[i]] += system->left[i * k + c] * core->sigma[i];
    }
  }
  rank = shortest (facts, k, ls, rho, y, q);
  for (size_t c = 0; c < k; c++) {
    double out = rho[c];
    for (size_t i = 0; i < facts; i++) {
      out -= ls[c * facts + i] * y[i];
    }
    core->agree = core->agree && fabs (out) <= tolerance;
  }
  for (size_t i = 0; i < facts; i++) {
    chi2 += y[i] * y[i];
    b[i] = system->rows.right[system->structure + i] * system->row_scale[system->structure + i]
           - core->sigma[i] * y[core->figure[i]];
  }
  core->p = core->agree ? gsl_cdf_chisq_Q (chi2, (double) rank) : 0;
  if (core->agree) {
    system_solve (system, b, core->v);
  }
  core->agree = core->agree && core->p >= least_p;
}

/* Has any figure several rows?  A share of a stream has.  */
static bool
any_of_several (const struct core *core)
{
  for (size_t i = 0; i < core->system->rows.count - core->system->structure; i++) {
    if (core->figure[i] != i) {
      return true;
    }
  }
  return false;
}

void
core_agree (struct core *core)
{
  const struct system *system = core->system;
  double *rho, most = 0;
  double tolerance = out_of_exact * largest_right (system);
  find_sigmas (core);
  if (!system->left && !any_of_several (core)) {
    agree_sparsely (core, tolerance, least_p);
    return;
  }
  system_left (core->arena, core->system);
  rho = ARENA_ARRAY (core->arena, system->surplus + 1, double);
  system_clash (system, core->v, rho);
  for (size_t c = 0; c < system->surplus; c++) {
    most = fmax (most, fabs (rho[c]));
  }
  core->agree = true;
  core->p = 1;
  if (most > tolerance) {
    judge (core, rho, tolerance);
  }
}
