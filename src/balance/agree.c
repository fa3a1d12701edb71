/* Do the facts agree within the digits they are typed with?

   Figure f may be moved by y[f], counted in standard deviations of its rounding, which moves its
   rows by s y[f].  With L' the left null vectors of the rows, moves make all of them hold if L's y
   is minus L' times what they are short of; the least moves are the shortest such y.  As s goes
   with the flows, and the rows with the moves, that is done again for what it comes to: Newton's
   steps.

   Facts clash when no moves within half a last digit make them hold, or when a move stands out that
   chance does not make: y[f] over its own standard deviation is that of maximum power for one wrong
   figure (Mah, Tamhane, AIChE J. 28 (1982) 828).  The sum of squares is no test: of many small and
   honest moves it may be as large as one likes.  Where the least moves in their sum of squares go
   beyond half a digit, those whose largest is least are looked for, by weights that grow with the
   moves (Lawson, Contributions to the theory of linear least maximum approximation, 1961); with
   weights that add up to one the root of the mean square is no more than the largest move of any
   solution.  What is not decided in the end is so near to half a digit that it holds.           */
#include "config.h"
#include "balance/core.h"

#include <gsl/gsl_cdf.h>
#include <math.h>
#include <string.h>
#include "balance/agree_sparse.h"
#include "balance/moves.h"
#include "balance/reduce.h"
#include "support/arena.h"

/* A row is independent of others if more than this part of it is orthogonal to them.  */
static const double dependent = 1e-10;
/* Facts of exact figures clash when they are out by more than this, relative.  */
static const double out_of_exact = 1e-9;
/* Newton's steps are at their end when rows are out by no more than this.  */
static const double at_end = 1e-13;
/* What is left of a figure's variance after the fit, when nothing else bears on it, is rounding. */
static const double unchecked = 1e-8;
/* As small flows as this part of the largest stated are told apart from none at the start.  */
static const double least_floor = 1e-3;
/* Facts times the square of how many are to spare, up to which their left null vectors are used. */
static const double most_left = 2e7;

enum { MOST_STEPS = 20, MOST_WEIGHINGS = 60 };

struct row_of;

struct work {
  struct arena *arena, *scratch; /* scratch: of the rows at hand */
  struct core *core;
  const struct agree_task *task;
  struct system *system;         /* with the figures moved */
  double *v, *y;                 /* by column; by figure */
  double *weight;                /* by figure: of the square of its move */
  double floor;
  struct row_of *q;              /* of the last search: orthonormal rows of L'S, by figure */
  size_t rank;
};

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
largest_residual (const struct system *system, const double v[])
{
  double most = 0;
  for (size_t i = 0; i < system->rows.count; i++) {
    most = fmax (most, fabs (rows_residual (&system->rows, i, v) * system->row_scale[i]));
  }
  return most;
}

static struct agree_task
make_task (struct arena *arena, const struct core *core)
{
  const struct system *system = core->system;
  struct agree_task task = { .facts = system->rows.count - system->structure,
                             .alone = scale_figure (system) };
  size_t terms = core->network->components;
  for (size_t f = 0; f < core->network->facts; f++) {
    size_t count = core->network->fact[f].right.count;
    terms = count > terms ? count : terms;
  }
  task.terms = ARENA_ARRAY (arena, terms + 1, struct term);
  for (size_t i = system->structure; i < system->rows.count; i++) {
    task.flow = fmax (task.flow, fabs (system->rows.right[i]));
    task.right = fmax (task.right, fabs (system->rows.right[i] * system->row_scale[i]));
  }
  task.tolerance = out_of_exact * task.right;
  return task;
}

static void
find_sigmas (struct core *core, const struct agree_task *task)
{
  const struct system *system = core->system;
  double *sigma = ARENA_ARRAY (core->arena, task->facts + 1, double);
  for (size_t i = 0; i < task->facts; i++) {
    size_t row = system->structure + i;
    sigma[i] = row == task->alone ? 0
               : fabs (move_of_row (system, row, core->v, 0, task->terms));
  }
  core->sigma = sigma;
  core->figure = move_figures (core->arena, system);
}

/* A row of L'S, and where it is not zero: most have few figures.  */
struct row_of { double *x; size_t count, *at; };

static struct row_of
row_copy (struct arena *arena, size_t facts, const double x[])
{
  struct row_of out = { ARENA_ARRAY (arena, facts + 1, double), 0,
                        ARENA_ARRAY (arena, facts + 1, size_t) };
  memcpy (out.x, x, facts * sizeof *out.x);
  for (size_t i = 0; i < facts; i++) {
    if (fabs (x[i]) > 0) {
      out.at[out.count++] = i;
    }
  }
  return out;
}

/* Takes what lies along the Q, which are of length 1, out of X; twice, for the digits.  */
static void
take_out (size_t count, const struct row_of q[], double x[])
{
  for (size_t p = 0; p < 2 * count; p++) {
    const struct row_of *one = &q[p % count];
    double along = 0;
    for (size_t e = 0; e < one->count; e++) {
      along += one->x[one->at[e]] * x[one->at[e]];
    }
    for (size_t e = 0; e < one->count && fabs (along) > 0; e++) {
      x[one->at[e]] -= along * one->x[one->at[e]];
    }
  }
}

/* The shortest Y with L'S y = rho, for rows of L'S that may depend on each other: one row after
   the other, each made orthogonal to those before, in Q; how many do not.                       */
static size_t
shortest (struct arena *arena, size_t facts, size_t k, const double ls[], const double rho[],
          double y[], struct row_of q[])
{
  size_t rank = 0;
  double *next = ARENA_ARRAY (arena, facts + 1, double);
  for (size_t c = 0; c < k; c++) {
    const double *row = &ls[c * facts];
    double size = 0, left = 0, gap = rho[c];
    memcpy (next, row, facts * sizeof *next);
    take_out (rank, q, next);
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
      q[rank++] = row_copy (arena, facts, next);
    }
  }
  return rank;
}

/* The least moves for the rows at hand, short as they are at V with the moves Y; S, by fact row,
   gets what these move the rows by.  False: none make all rows hold.                            */
static bool
find_moves (struct work *work, double s[])
{
  const struct system *system = work->system;
  size_t facts = work->task->facts, k = system->surplus;
  const size_t *figure = work->core->figure;
  double *ls = ARENA_ARRAY (work->scratch, facts * k + 1, double);
  double *rho = ARENA_ARRAY (work->scratch, k + 1, double);
  double *y = ARENA_ARRAY (work->scratch, facts + 1, double);
  bool met = true;
  system_clash (system, work->v, rho);
  for (size_t i = 0; i < facts; i++) {
    size_t row = system->structure + i;
    s[i] = row == work->task->alone ? 0
           : move_of_row (system, row, work->v, work->floor, work->task->terms);
  }
  for (size_t c = 0; c < k; c++) {
    rho[c] = -rho[c];
  }
  for (size_t i = 0; i < facts; i++) {
    double over = 1 / sqrt (work->weight[figure[i]]);
    for (size_t c = 0; c < k; c++) {
      double by = system->left[i * k + c] * s[i];
      rho[c] += by * work->y[figure[i]];
      ls[c * facts + figure[i]] += by * over;
    }
  }
  work->q = ARENA_ARRAY (work->scratch, k + 1, struct row_of);
  work->rank = shortest (work->scratch, facts, k, ls, rho, y, work->q);
  for (size_t c = 0; c < k; c++) {
    double out = rho[c];
    for (size_t i = 0; i < facts; i++) {
      out -= ls[c * facts + i] * y[i];
    }
    met = met && fabs (out) <= work->task->tolerance;
  }
  for (size_t i = 0; i < facts; i++) {
    work->y[i] = y[i] / sqrt (work->weight[i]);
  }
  return met;
}

/* Flows to start from: what rows that do not hold leave may be anything, even where the figures
   hardly differ, and what a digit does to a row goes with its flows.  So at first all digits do as
   much as they would to large flows, then to smaller ones.                                      */
static bool
find_start (struct work *work)
{
  const struct system *system = work->core->system;
  double *s = ARENA_ARRAY (work->arena, work->task->facts + 1, double);
  double *b = ARENA_ARRAY (work->arena, work->task->facts + 1, double);
  for (work->floor = work->task->flow; work->floor > 0;) {
    memset (work->y, 0, work->task->facts * sizeof *work->y);
    if (!find_moves (work, s)) {
      return false;
    }
    for (size_t i = 0; i < work->task->facts; i++) {
      size_t row = system->structure + i;
      b[i] = system->rows.right[row] * system->row_scale[row]
             + s[i] * work->y[work->core->figure[i]];
    }
    system_solve (system, b, work->v);
    work->floor *= work->floor > least_floor * work->task->flow ? 0.01 : 0;
  }
  memset (work->y, 0, work->task->facts * sizeof *work->y);
  return true;
}

/* Takes the rows, left null vectors and flows that go with the moves.  False: other rows.  */
static bool
follow_moves (struct work *work)
{
  struct core *core = work->core;
  const struct system *typed = core->system;
  const struct network *moved;
  arena_destroy (work->scratch);
  work->scratch = arena_create ();
  moved = network_moved (work->scratch, typed, core->figure, work->y);
  work->system = system_make (work->scratch, moved, typed->take, typed->split);
  if (work->system->rows.count != typed->rows.count) {
    return false;
  }
  system_reduce (work->scratch, work->system, REDUCE_CORE);
  system_left (work->scratch, work->system);
  if (typed->null) {
    system_open (work->scratch, work->system, NULL);
  }
  memcpy (work->v, work->system->particular, typed->columns * sizeof *work->v);
  return true;
}

/* The least moves; false: none make all rows hold, or the steps do not end.  */
static bool
find_least (struct work *work)
{
  double before = HUGE_VAL;
  double *s = ARENA_ARRAY (work->arena, work->task->facts + 1, double);
  for (int n = 0; n < MOST_STEPS; n++) {
    double out;
    if (!find_moves (work, s) || !follow_moves (work)) {
      return false;
    }
    out = largest_residual (work->system, work->v);
    if (out <= at_end * work->task->right || (out <= work->task->tolerance && out >= before)) {
      return true;
    }
    before = out;
  }
  return false;
}

/* The probability of as large a move as the one that stands out most.  */
static double
chance (const struct work *work)
{
  size_t facts = work->task->facts;
  double most = 0;
  for (size_t f = 0; f < facts; f++) {
    double part = 0;
    for (size_t c = 0; c < work->rank; c++) {
      part += work->q[c].x[f] * work->q[c].x[f];
    }
    if (part > unchecked) {
      most = fmax (most, fabs (work->y[f]) / sqrt (part));
    }
  }
  return -expm1 ((double) work->rank * log1p (-2 * gsl_cdf_ugaussian_Q (most)));
}

/* Whatever moves make the rows hold, what they have in common with row P of the orthogonal
   projection on those of L'S is the least move y of its figure.  So where that is more than half a
   digit times the sum of what is in P, some move is more than half a digit.                     */
static bool
is_beyond_half (const struct work *work)
{
  size_t facts = work->task->facts;
  double *p = ARENA_ARRAY (work->scratch, facts + 1, double);
  for (size_t f = 0; f < facts; f++) {
    double sum = 0;
    if (fabs (work->y[f]) <= MOVE_HALF) {
      continue;
    }
    memset (p, 0, facts * sizeof *p);
    for (size_t c = 0; c < work->rank; c++) {
      const struct row_of *q = &work->q[c];
      for (size_t e = 0; e < q->count && fabs (q->x[f]) > 0; e++) {
        p[q->at[e]] += q->x[f] * q->x[q->at[e]];
      }
    }
    for (size_t i = 0; i < facts; i++) {
      sum += fabs (p[i]);
    }
    if (fabs (work->y[f]) > MOVE_HALF * sum) {
      return true;
    }
  }
  return false;
}

/* Where a search does not end, the least moves in their sum of squares stay: they hold, and nothing
   says that there are none within half a digit.                                                 */
static bool
find_within_half (struct work *work)
{
  size_t columns = work->core->system->columns, facts = work->task->facts, count = 0;
  size_t *figure = ARENA_ARRAY (work->arena, facts + 1, size_t);
  double *v = ARENA_ARRAY (work->arena, columns + 1, double);
  double *y = ARENA_ARRAY (work->arena, facts + 1, double);
  bool within = true;
  memcpy (v, work->v, columns * sizeof *v);
  memcpy (y, work->y, facts * sizeof *y);
  for (size_t i = 0; i < facts; i++) {
    if (work->core->figure[i] == i) {
      figure[count++] = i;
    }
  }
  for (int n = 0; n < MOST_WEIGHINGS; n++) {
    if (move_weigh (count, figure, work->y, work->weight, &within)) {
      return within;
    }
    if (!find_least (work)) {
      memcpy (work->v, v, columns * sizeof *v);
      memcpy (work->y, y, facts * sizeof *y);
      return true;
    }
  }
  return true;
}

static void
judge (struct core *core, const struct agree_task *task)
{
  struct work work = { .arena = arena_create (), .scratch = arena_create (), .core = core,
                       .task = task, .system = core->system };
  work.v = ARENA_ARRAY (core->arena, core->system->columns + 1, double);
  work.y = ARENA_ARRAY (core->arena, task->facts + 1, double);
  work.weight = ARENA_ARRAY (work.arena, task->facts + 1, double);
  memcpy (work.v, core->v, core->system->columns * sizeof *work.v);
  for (size_t i = 0; i < task->facts; i++) {
    work.weight[i] = 1;
  }
  system_left (core->arena, core->system);
  core->p = 0;
  core->agree = find_start (&work) && find_least (&work);
  if (core->agree) {
    double *s = ARENA_ARRAY (work.arena, task->facts + 1, double);
    core->agree = find_moves (&work, s);         /* at what they come to */
    core->p = chance (&work);
    core->agree = core->agree && core->p >= MOVE_CHANCE && !is_beyond_half (&work)
                  && find_within_half (&work);
  }
  if (core->agree) {
    core->v = work.v;
    core->moves = work.y;
  }
  arena_destroy (work.scratch);
  arena_destroy (work.arena);
}

void
core_agree (struct core *core)
{
  const struct system *system = core->system;
  struct arena *arena = arena_create ();
  struct agree_task task = make_task (arena, core);
  double spare = (double) system->surplus;
  find_sigmas (core, &task);
  core->agree = true;
  core->p = 1;
  core->moves = NULL;
  if (largest_residual (system, core->v) > task.tolerance) {
    if ((double) task.facts * spare * spare <= most_left) {
      judge (core, &task);
    } else {
      agree_sparsely (core, &task);
    }
  }
  arena_destroy (arena);
}
