/* The least moves of many figures, found with a step d of the unknowns (see agree.c): in row i of a
   figure, with s what it moves the row by,

       minimise |y|^2  subject to  a d - s y[f] = what it is short of, unmoved,  in its rows,
                                   a d          = what it is short of            in all others

   A figure's first row gives y, any further ones take it from there.                            */
#include "config.h"
#include "balance/agree_sparse.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include <string.h>
#include "balance/core.h"
#include "balance/factor.h"
#include "balance/moves.h"
#include "balance/reduce.h"
#include "support/arena.h"

/* Newton's steps are at their end when rows are out by no more than this.  */
static const double at_end = 1e-14;
/* A figure that moves its row by less than this part of the largest does not move it.  */
static const double no_move = 1e-15;
/* What is left of a figure's variance after the fit, when nothing else bears on it, is rounding. */
static const double unchecked = 1e-8;
/* As small flows as this part of the largest stated are told apart from none at the start.  */
static const double least_floor = 1e-3;
enum { MOST_STEPS = 30, MOST_WEIGHINGS = 60 };

struct work {
  struct arena *arena, *scratch; /* scratch: of one step */
  struct core *core;
  const struct agree_task *task;
  size_t *unknown;               /* by column */
  double *scale;                 /* by unknown */
  size_t unknowns, *order;       /* order: of elimination, or null */
  double *v, *y;                 /* by column; by figure */
  double *weight;                /* by figure: of the square of its move */
  double floor;
  /* The rows at v and y.  */
  struct linearised equations;
  double *c, *e;                 /* what exact and measured rows are short of */
  size_t *of;                    /* by measured row: its figure */
  double *sum;                   /* by unknown: room for a row, zero between */
  size_t *touched;
};

/* ---- Rows at a point ---- */

/* The unknowns are the columns that are present.  */
static void
number_unknowns (struct work *work)
{
  const struct system *system = work->core->system;
  work->scale = ARENA_ARRAY (work->arena, system->columns + 1, double);
  work->unknown = ARENA_ARRAY (work->arena, system->columns + 1, size_t);
  for (size_t j = 0; j < system->columns; j++) {
    if (!system->absence.absent[j]) {
      work->scale[work->unknowns] = system->scale[j];
      work->unknown[j] = work->unknowns++;
    }
  }
  work->sum = ARENA_ARRAY (work->arena, work->unknowns + 1, double);
  work->touched = ARENA_ARRAY (work->arena, 4 * work->unknowns + 1, size_t);
}

static void
add_term (struct work *work, size_t *touched, size_t column, double coefficient)
{
  size_t k = work->unknown[column];
  if (!(fabs (work->sum[k]) > 0)) {
    work->touched[(*touched)++] = k;
  }
  work->sum[k] += coefficient;
}

/* Adds FACTOR times row I, with its figure moved, to the row that is being made; what it is short
   of, times FACTOR.                                                                             */
static double
gather_row (struct work *work, size_t i, double factor, size_t *touched)
{
  const struct system *system = work->core->system;
  const struct rows *rows = &system->rows;
  const struct row *row = &rows->row[i];
  double out = -rows_residual (rows, i, work->v), by = 0;
  factor *= system->row_scale[i];
  for (size_t e = rows->start[i]; e < rows->start[i + 1]; e++) {
    add_term (work, touched, rows->column[e], factor * rows->coefficient[e]);
  }
  if (i >= system->structure) {
    by = work->y[work->core->figure[i - system->structure]]
         * move_deviation (system->network, row);
  }
  if (fabs (by) > 0) {
    struct form form = move_form (system, row, work->task->terms);
    bool flow = system->network->fact[row->of].kind == FACT_FORM;
    out += by * (flow ? 1 : form_value (&form, work->v));
    for (size_t t = 0; t < form.count; t++) {
      add_term (work, touched, form.terms[t].column, -factor * by * form.terms[t].coefficient);
    }
  }
  return factor * out;
}

/* Puts the row that is made into TO.  */
static void
put_row (struct work *work, struct sparse *to, size_t touched)
{
  sparse_begin (to);
  for (size_t t = 0; t < touched; t++) {
    size_t k = work->touched[t];
    if (fabs (work->sum[k]) > 0) {
      sparse_add (to, k, work->sum[k]);
    }
    work->sum[k] = 0;
  }
}

/* Fact row I: the first that moves with its figure says how far that is, the others follow.  */
static void
add_fact_row (struct work *work, size_t i, size_t first[], double least)
{
  const struct core *core = work->core;
  size_t structure = core->system->structure, f = core->figure[i], touched = 0;
  double s = structure + i == work->task->alone ? 0
             : move_of_row (core->system, structure + i, work->v, work->floor, work->task->terms);
  struct linearised *equations = &work->equations;
  if (!(fabs (s) > least)) {
    work->c[equations->exact.count] = gather_row (work, structure + i, 1, &touched);
    put_row (work, &equations->exact, touched);
  } else if (first[f] == NOWHERE) {
    first[f] = i;
    work->of[equations->measured.count] = f;
    double weight = sqrt (work->weight[f]);
    work->e[equations->measured.count] = gather_row (work, structure + i, weight / s, &touched)
                                         - weight * work->y[f];
    put_row (work, &equations->measured, touched);
  } else {
    double by = move_of_row (work->core->system, structure + first[f], work->v, work->floor,
                             work->task->terms);
    double out = gather_row (work, structure + i, 1, &touched);
    out += gather_row (work, structure + first[f], -s / by, &touched);
    work->c[equations->exact.count] = out;
    put_row (work, &equations->exact, touched);
  }
}

static void
linearise (struct work *work)
{
  const struct system *system = work->core->system;
  size_t m = system->rows.count, terms = 0;
  size_t *first = ARENA_ARRAY (work->scratch, work->task->facts + 1, size_t);
  double least = no_move * work->task->right;
  for (size_t i = 0; i < m; i++) {
    const struct row *row = &system->rows.row[i];
    size_t right = i < system->structure ? 0
                   : move_form (system, row, work->task->terms).count;
    terms += 2 * (system->rows.start[i + 1] - system->rows.start[i] + right);
  }
  work->equations = (struct linearised) { .unknowns = work->unknowns, .scale = work->scale,
                                          .order = work->order,
                                          .exact = sparse_make (work->scratch, m, terms),
                                          .measured = sparse_make (work->scratch, m, terms) };
  work->c = ARENA_ARRAY (work->scratch, m + 1, double);
  work->e = ARENA_ARRAY (work->scratch, m + 1, double);
  work->of = ARENA_ARRAY (work->scratch, m + 1, size_t);
  for (size_t i = 0; i < system->structure; i++) {
    size_t touched = 0;
    work->c[i] = gather_row (work, i, 1, &touched);
    put_row (work, &work->equations.exact, touched);
  }
  for (size_t i = 0; i < work->task->facts; i++) {
    first[i] = NOWHERE;
  }
  for (size_t i = 0; i < work->task->facts; i++) {
    add_fact_row (work, i, first, least);
  }
}

/* ---- Moves ---- */

/* The largest that the exact rows, moved by D, are out.  */
static double
exact_left (struct work *work, const double d[])
{
  const struct sparse *rows = &work->equations.exact;
  double *moved = ARENA_ARRAY (work->scratch, rows->count + 1, double), most = 0;
  sparse_times (rows, d, moved);
  for (size_t i = 0; i < rows->count; i++) {
    most = fmax (most, fabs (work->c[i] - moved[i]));
  }
  return most;
}

/* MOVE = the figures' moves, by measured row and weighted, with a step D.  */
static void
find_moves (const struct work *work, const double d[], double move[])
{
  sparse_times (&work->equations.measured, d, move);
  for (size_t k = 0; k < work->equations.measured.count; k++) {
    move[k] -= work->e[k];
  }
}

/* How far the rows are out at v and y, of their own terms.  */
static double
out_by (struct work *work)
{
  double most = 0;
  for (size_t i = 0; i < work->core->system->rows.count; i++) {
    size_t touched = 0;
    most = fmax (most, fabs (gather_row (work, i, 1, &touched)));
    for (size_t t = 0; t < touched; t++) {
      work->sum[work->touched[t]] = 0;
    }
  }
  return most;
}

/* A step D that leaves the exact rows met, if there is one.  A long line of splits loses all digits
   in an order of elimination that takes its ends first, where little passes: where exact rows are
   not met the columns go as they are numbered, from here on.                                    */
static bool
solve (struct work *work, double d[])
{
  factor_solve (factor_make (work->scratch, &work->equations), work->scratch, work->c, work->e, d);
  if (!(exact_left (work, d) <= work->task->tolerance) && !work->equations.order) {
    work->order = ARENA_ARRAY (work->arena, work->unknowns + 1, size_t);
    for (size_t k = 0; k < work->unknowns; k++) {
      work->order[k] = k;
    }
    work->equations.order = work->order;
    factor_solve (factor_make (work->scratch, &work->equations), work->scratch, work->c, work->e,
                  d);
  }
  return exact_left (work, d) <= work->task->tolerance;
}

/* One of Newton's steps; false: the exact rows leave no room for it.  */
static bool
step (struct work *work)
{
  const struct system *system = work->core->system;
  double *d = ARENA_ARRAY (work->scratch, work->unknowns + 1, double);
  double *move = ARENA_ARRAY (work->scratch, work->equations.measured.count + 1, double);
  if (!solve (work, d)) {
    return false;
  }
  find_moves (work, d, move);
  for (size_t k = 0; k < work->equations.measured.count; k++) {
    work->y[work->of[k]] = move[k] / sqrt (work->weight[work->of[k]]);
  }
  for (size_t j = 0; j < system->columns; j++) {
    work->v[j] += system->absence.absent[j] ? 0 : d[work->unknown[j]];
  }
  return true;
}

/* Flows to start from: what exact rows leave may be anything, even where the figures hardly differ,
   and what a digit does to a row goes with its flows.  So at first all digits do as much as they
   would to large flows, then to smaller ones.                                                   */
static bool
find_start (struct work *work)
{
  for (work->floor = work->task->flow; work->floor > 0;) {
    arena_destroy (work->scratch);
    work->scratch = arena_create ();
    linearise (work);
    if (!step (work)) {
      return false;
    }
    memset (work->y, 0, work->task->facts * sizeof *work->y);
    work->floor *= work->floor > least_floor * work->task->flow ? 0.01 : 0;
  }
  return true;
}

/* The least moves; false: none make all rows hold, or the steps do not end.  */
static bool
find_least (struct work *work)
{
  double before = HUGE_VAL, most = work->task->right;
  for (int n = 0; n < MOST_STEPS; n++) {
    double out;
    arena_destroy (work->scratch);
    work->scratch = arena_create ();
    linearise (work);
    if (!step (work)) {
      return false;
    }
    out = out_by (work);
    if (out <= at_end * most || (out <= work->task->tolerance && out >= before)) {
      return true;
    }
    before = out;
  }
  return false;
}

static bool
find_within_half (struct work *work)
{
  bool within = true;
  for (int n = 0; n < MOST_WEIGHINGS; n++) {
    if (move_weigh (work->equations.measured.count, work->of, work->y, work->weight, &within)) {
      return within;
    }
    if (!find_least (work)) {
      return false;
    }
  }
  return true;
}

/* The probability of as large a move as the one that stands out most.  */
static double
chance (struct work *work)
{
  const struct factor *factor = factor_make (work->scratch, &work->equations);
  size_t count = work->equations.measured.count, rank = factor_rank (factor);
  double *left = ARENA_ARRAY (work->scratch, count + 1, double), most = 0;
  factor_leverages (factor, work->scratch, left);
  for (size_t k = 0; k < count; k++) {
    if (1 - left[k] > unchecked) {
      most = fmax (most, fabs (work->y[work->of[k]]) / sqrt (1 - left[k]));
    }
  }
  return count > rank ? -expm1 ((double) (count - rank) * log1p (-2 * gsl_cdf_ugaussian_Q (most)))
                      : 1;
}

/* Do the facts agree as far as can be told from the flows at hand, or (ANEW) from others?  */
static bool
agree_from (struct work *work, bool anew)
{
  struct core *core = work->core;
  memcpy (work->v, core->v, core->system->columns * sizeof *work->v);
  for (size_t i = 0; i < work->task->facts; i++) {
    work->weight[i] = 1;
    work->y[i] = 0;
  }
  work->floor = 0;
  core->p = 0;
  if ((anew && !find_start (work)) || !find_least (work)) {
    return false;
  }
  linearise (work);                      /* where they ended */
  core->p = chance (work);
  return core->p >= MOVE_CHANCE && find_within_half (work);
}

void
agree_sparsely (struct core *core, const struct agree_task *task)
{
  struct work work = { .arena = arena_create (), .scratch = arena_create (), .core = core,
                       .task = task };
  work.v = ARENA_ARRAY (core->arena, core->system->columns + 1, double);
  work.y = ARENA_ARRAY (core->arena, task->facts + 1, double);
  work.weight = ARENA_ARRAY (work.arena, task->facts + 1, double);
  number_unknowns (&work);
  core->agree = agree_from (&work, false) || agree_from (&work, true);
  if (core->agree) {
    core->v = work.v;
    core->moves = work.y;
  }
  arena_destroy (work.scratch);
  arena_destroy (work.arena);
}
