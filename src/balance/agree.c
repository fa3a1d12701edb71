/* Do the facts agree within the digits they are typed with?

   Figure f may be moved by y[f], counted in standard deviations of its rounding.  The least moves
   that make all rows hold are found with a step d of the unknowns, by Newton's steps: in row i of
   a figure, with s the derivative of what it is short of,

       minimise |y|^2  subject to  a d - s y[f] = what it is short of, unmoved,  in its rows,
                                   a d          = what it is short of            in all others

   A figure's first row gives y, any further ones take it from there.  Facts clash when no moves
   within half a last digit make them hold, or when a move stands out that chance does not make:
   y[f] over its own standard deviation is that of maximum power for one wrong figure (Mah, Tamhane,
   AIChE J. 28 (1982) 828).  The sum of squares is no test: of many small and honest moves it may be
   as large as one likes.                                                                        */
#include "config.h"
#include "balance/core.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include <string.h>
#include "balance/factor.h"
#include "balance/moves.h"
#include "balance/reduce.h"
#include "support/arena.h"

/* Facts without a figure wrong are taken for clashing once in ten thousand.  */
static const double least_p = 1e-4;
/* Facts of exact figures clash when they are out by more than this, relative.  */
static const double out_of_exact = 1e-9;
/* Newton's steps are at their end when rows are out by no more than this.  */
static const double at_end = 1e-14;
/* A figure that moves its row by less than this part of the largest does not move it.  */
static const double no_move = 1e-15;
/* What is left of a figure's variance after the fit, when nothing else bears on it, is rounding. */
static const double unchecked = 1e-8;
/* Weights that fall below this part of the largest stay there, so that no figure is forgotten.  */
static const double least_weight = 1e-6;
/* Half a last digit in standard deviations, and a little for what Newton's steps leave.  */
static const double half_digit = 1.7320508075688772 * 1.001;

enum { MOST_STEPS = 30, MOST_WEIGHINGS = 60 };

struct work {
  struct arena *arena, *scratch; /* scratch: of one step */
  struct core *core;
  size_t facts;
  size_t *unknown;               /* by column */
  double *scale;                 /* by unknown */
  size_t unknowns;
  double *v, *y;                 /* by column; by figure */
  double *weight;                /* by figure: of the square of its move */
  double tolerance;
  /* The rows at v and y.  */
  struct linearised equations;
  double *c, *e;                 /* what exact and measured rows are short of */
  size_t *of;                    /* by measured row: its figure */
  double *sum;                   /* by unknown: room for a row, zero between */
  size_t *touched;
  struct term *terms;
};

/* How far row I (of the system) moves when its figure moves by one standard deviation.  */
static double
row_move (const struct work *work, size_t i, const double v[])
{
  const struct system *system = work->core->system;
  const struct row *row = &system->rows.row[i];
  bool flow = system->network->fact[row->of].kind == FACT_FORM;
  struct form form = move_form (system, row, work->terms);
  bool still = system->rows.start[i] == system->rows.start[i + 1];
  return still ? 0 : move_deviation (system->network, row) * system->row_scale[i]
                     * (flow ? 1 : form_value (&form, v));
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

static double
largest_right (const struct system *system)
{
  double largest = 0;
  for (size_t i = system->structure; i < system->rows.count; i++) {
    largest = fmax (largest, fabs (system->rows.right[i] * system->row_scale[i]));
  }
  return largest;
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
find_sigmas (struct work *work)
{
  struct core *core = work->core;
  const struct system *system = core->system;
  size_t alone = scale_figure (system);
  double *sigma = ARENA_ARRAY (core->arena, work->facts + 1, double);
  for (size_t i = 0; i < work->facts; i++) {
    bool exact = system->structure + i == alone;
    sigma[i] = exact ? 0 : fabs (row_move (work, system->structure + i, core->v));
  }
  core->sigma = sigma;
  core->figure = move_figures (core->arena, system);
}

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
    struct form form = move_form (system, row, work->terms);
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
  double s = core->sigma[i] > 0 ? row_move (work, structure + i, work->v) : 0;
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
    double by = row_move (work, structure + first[f], work->v);
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
  size_t *first = ARENA_ARRAY (work->scratch, work->facts + 1, size_t);
  double least = no_move * largest_right (system);
  for (size_t i = 0; i < m; i++) {
    const struct row *row = &system->rows.row[i];
    size_t right = i < system->structure ? 0
                   : move_form (system, row, work->terms).count;
    terms += 2 * (system->rows.start[i + 1] - system->rows.start[i] + right);
  }
  work->equations = (struct linearised) { .unknowns = work->unknowns, .scale = work->scale,
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
  for (size_t i = 0; i < work->facts; i++) {
    first[i] = NOWHERE;
  }
  for (size_t i = 0; i < work->facts; i++) {
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

/* One of Newton's steps; false: the exact rows leave no room for it.  */
static bool
step (struct work *work)
{
  const struct system *system = work->core->system;
  const struct factor *factor = factor_make (work->scratch, &work->equations);
  double *d = ARENA_ARRAY (work->scratch, work->unknowns + 1, double);
  double *move = ARENA_ARRAY (work->scratch, work->equations.measured.count + 1, double);
  factor_solve (factor, work->scratch, work->c, work->e, d);
  if (!(exact_left (work, d) <= work->tolerance)) {
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

/* The least moves; false: none make all rows hold, or the steps do not end.  */
static bool
find_least (struct work *work)
{
  double before = HUGE_VAL, most = largest_right (work->core->system);
  for (int n = 0; n < MOST_STEPS; n++) {
    double out;
    arena_destroy (work->scratch);
    work->scratch = arena_create ();
    linearise (work);
    if (!step (work)) {
      return false;
    }
    out = out_by (work);
    if (out <= at_end * most || (out <= work->tolerance && out >= before)) {
      return true;
    }
    before = out;
  }
  return false;
}

/* Moves that stay within half a last digit, if there are any.  Where those with the least sum of
   squares do not, those whose largest is least are looked for, by weights that grow with the moves
   (Lawson, Contributions to the theory of linear least maximum approximation, 1961).  With weights
   that add up to one the root of the mean square is no more than the largest move of any solution.
   What is not decided in the end is so near to half a digit that it holds.                      */
static bool
find_within_half (struct work *work)
{
  for (int n = 0; n < MOST_WEIGHINGS; n++) {
    double most = 0, squares = 0, sum = 0;
    for (size_t k = 0; k < work->equations.measured.count; k++) {
      size_t f = work->of[k];
      most = fmax (most, fabs (work->y[f]));
      squares += work->weight[f] * work->y[f] * work->y[f];
      sum += work->weight[f];
    }
    if (most <= half_digit || sqrt (squares / sum) > half_digit) {
      return most <= half_digit;
    }
    for (size_t k = 0; k < work->equations.measured.count; k++) {
      double *weight = &work->weight[work->of[k]];
      *weight = fmax (*weight * fabs (work->y[work->of[k]]) / most, least_weight);
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

static void
judge (struct work *work)
{
  struct core *core = work->core;
  size_t columns = core->system->columns;
  work->v = ARENA_ARRAY (core->arena, columns + 1, double);
  work->y = ARENA_ARRAY (core->arena, work->facts + 1, double);
  work->weight = ARENA_ARRAY (work->arena, work->facts + 1, double);
  memcpy (work->v, core->v, columns * sizeof *work->v);
  for (size_t i = 0; i < work->facts; i++) {
    work->weight[i] = 1;
  }
  core->agree = find_least (work);
  core->p = 0;
  if (core->agree) {
    linearise (work);                    /* where they ended */
    core->p = chance (work);
    core->agree = core->p >= least_p && find_within_half (work);
  }
  if (core->agree) {
    core->v = work->v;
    core->moves = work->y;
  }
}

void
core_agree (struct core *core)
{
  const struct system *system = core->system;
  const struct network *network = core->network;
  size_t terms = network->components;
  struct work work = { .arena = arena_create (), .scratch = arena_create (), .core = core,
                       .facts = system->rows.count - system->structure };
  for (size_t f = 0; f < network->facts; f++) {
    terms = network->fact[f].right.count > terms ? network->fact[f].right.count : terms;
  }
  work.terms = ARENA_ARRAY (work.arena, terms + 1, struct term);
  work.tolerance = out_of_exact * largest_right (system);
  find_sigmas (&work);
  core->agree = true;
  core->p = 1;
  core->moves = NULL;
  if (largest_residual (core) > work.tolerance) {
    number_unknowns (&work);
    judge (&work);
  }
  arena_destroy (work.scratch);
  arena_destroy (work.arena);
}
