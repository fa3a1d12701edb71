/* The smallest changes y of the figures that make all rows hold, as in agree.c, found with a step d
   of the unknowns beside them:

       minimise |y|^2  subject to  a d + sigma y = b - a v  in every row of a fact,
                                   a d           = b - a v  in every other

   Every figure has one row here.                                                                */
#include "config.h"
#include "balance/agree_sparse.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include "balance/core.h"
#include "balance/factor.h"
#include "support/arena.h"

struct work {
  struct arena *arena;
  const struct core *core;
  size_t *unknown;               /* by column */
  struct linearised equations;
  double *c, *e;                 /* what exact and measured rows are short of */
};

static double
sigma_of (const struct work *work, size_t row)
{
  size_t structure = work->core->system->structure;
  return row < structure ? 0 : work->core->sigma[row - structure];
}

/* The unknowns are the columns that are present.  */
static void
number_unknowns (struct work *work)
{
  const struct system *system = work->core->system;
  double *scale = ARENA_ARRAY (work->arena, system->columns + 1, double);
  size_t count = 0;
  work->unknown = ARENA_ARRAY (work->arena, system->columns + 1, size_t);
  for (size_t j = 0; j < system->columns; j++) {
    if (!system->absence.absent[j]) {
      scale[count] = system->scale[j];
      work->unknown[j] = count++;
    }
  }
  work->equations.unknowns = count;
  work->equations.scale = scale;
}

static void
add_row (struct work *work, struct sparse *to, size_t i, double factor)
{
  const struct rows *rows = &work->core->system->rows;
  sparse_begin (to);
  for (size_t e = rows->start[i]; e < rows->start[i + 1]; e++) {
    sparse_add (to, work->unknown[rows->column[e]], factor * rows->coefficient[e]);
  }
}

static void
add_rows (struct work *work)
{
  const struct core *core = work->core;
  const struct system *system = core->system;
  size_t m = system->rows.count, terms = system->rows.start[m];
  struct sparse *exact = &work->equations.exact, *measured = &work->equations.measured;
  *exact = sparse_make (work->arena, m, terms);
  *measured = sparse_make (work->arena, m, terms);
  work->c = ARENA_ARRAY (work->arena, m + 1, double);
  work->e = ARENA_ARRAY (work->arena, m + 1, double);
  for (size_t i = 0; i < m; i++) {
    double sigma = sigma_of (work, i), scale = system->row_scale[i];
    double out = -rows_residual (&system->rows, i, core->v) * scale;
    if (sigma > 0) {
      work->e[measured->count] = out / sigma;
      add_row (work, measured, i, scale / sigma);
    } else {
      work->c[exact->count] = out;
      add_row (work, exact, i, scale);
    }
  }
}

/* The largest that ROWS D is short of RIGHT, and the sum of squares.  */
static double
left_of (struct work *work, const struct sparse *rows, const double right[], const double d[],
         double *squares)
{
  double *moved = ARENA_ARRAY (work->arena, rows->count + 1, double), most = 0;
  sparse_times (rows, d, moved);
  *squares = 0;
  for (size_t i = 0; i < rows->count; i++) {
    double out = right[i] - moved[i];
    most = fmax (most, fabs (out));
    *squares += out * out;
  }
  return most;
}

static double
largest_residual (const struct core *core)
{
  const struct system *system = core->system;
  double most = 0;
  for (size_t i = 0; i < system->rows.count; i++) {
    double out = rows_residual (&system->rows, i, core->v) * system->row_scale[i];
    most = fmax (most, fabs (out));
  }
  return most;
}

static void
judge (struct core *core, struct work *work, double tolerance, double least_p)
{
  const struct linearised *equations = &work->equations;
  const struct system *system = core->system;
  const struct factor *factor = factor_make (work->arena, equations);
  double *d = ARENA_ARRAY (work->arena, equations->unknowns + 1, double), chi2, ignored;
  size_t count = equations->measured.count, rank = factor_rank (factor);
  factor_solve (factor, work->arena, work->c, work->e, d);
  core->agree = left_of (work, &equations->exact, work->c, d, &ignored) <= tolerance;
  (void) left_of (work, &equations->measured, work->e, d, &chi2);
  core->p = !core->agree ? 0 : count > rank ? gsl_cdf_chisq_Q (chi2, (double) (count - rank)) : 1;
  for (size_t j = 0; j < system->columns && core->agree; j++) {
    core->v[j] += system->absence.absent[j] ? 0 : d[work->unknown[j]];
  }
  core->agree = core->agree && core->p >= least_p;
}

void
agree_sparsely (struct core *core, double tolerance, double least_p)
{
  struct work work = { .core = core };
  core->agree = true;
  core->p = 1;
  if (largest_residual (core) <= tolerance) {
    return;
  }
  work.arena = arena_create ();
  number_unknowns (&work);
  add_rows (&work);
  judge (core, &work, tolerance, least_p);
  arena_destroy (work.arena);
}
