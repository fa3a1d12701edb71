#include "config.h"
#include "balance/core.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include "balance/rank.h"
#include "support/arena.h"

/* Facts without a figure wrong are taken for clashing once in ten thousand.  */
static const double least_p = 1e-4;
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

/* The solution for facts with RIGHT sides (scaled) that agree.  */
static void
solve_for (struct core *core, const double right[])
{
  struct system *system = core->system;
  size_t facts = system->rows.count - system->structure;
  struct space space = space_make (core->arena, facts, system->width, system->reduced);
  double *z = ARENA_ARRAY (core->arena, system->width + 1, double), *v;
  space_solve (core->arena, &space, right, z);
  v = matrix_product (core->arena, system->columns, system->width, 1, system->base, z);
  for (size_t j = 0; j < system->columns; j++) {
    core->v[j] = v[j] * system->scale[j];
  }
}

/* With L' the left null vectors, S the figures' standard deviations and b the right sides, the
   smallest changes y of the figures that make all rows hold are the shortest y with L'S y = L'b;
   |y|^2 is chi-square with as many degrees of freedom as L'S has rank.                          */
void
core_agree (struct core *core)
{
  struct system *system = core->system;
  size_t facts = system->rows.count - system->structure, k = system->surplus;
  double *b = ARENA_ARRAY (core->arena, facts + 1, double);
  double *rho = ARENA_ARRAY (core->arena, k + 1, double);
  double *ls = ARENA_ARRAY (core->arena, facts * k + 1, double);
  double *y = ARENA_ARRAY (core->arena, facts + 1, double), chi2 = 0, most = 0;
  double tolerance = out_of_exact * largest_right (system);
  struct space space;
  find_sigmas (core);
  for (size_t i = 0; i < facts; i++) {
    b[i] = system->rows.right[system->structure + i] * system->row_scale[system->structure + i];
    for (size_t c = 0; c < k; c++) {
      rho[c] += system->left[i * k + c] * b[i];
      ls[c * facts + core->figure[i]] += system->left[i * k + c] * core->sigma[i];
    }
  }
  for (size_t c = 0; c < k; c++) {
    most = fmax (most, fabs (rho[c]));
  }
  core->agree = true;
  core->p = 1;
  if (most <= tolerance) {
    return;
  }
  space = space_make (core->arena, k, facts, ls);
  space_solve (core->arena, &space, rho, y);
  for (size_t c = 0; c < k; c++) {
    for (size_t i = 0; i < facts; i++) {
      rho[c] -= ls[c * facts + i] * y[i];
    }
    core->agree = core->agree && fabs (rho[c]) <= tolerance;
  }
  for (size_t i = 0; i < facts; i++) {
    chi2 += y[i] * y[i];
    b[i] -= core->sigma[i] * y[core->figure[i]];
  }
  core->p = core->agree ? gsl_cdf_chisq_Q (chi2, (double) space.rank) : 0;
  core->agree = core->agree && core->p >= least_p;
  if (core->agree) {
    solve_for (core, b);
  }
}
