#include "config.h"
#include "balance/program.h"

#include <assert.h>
#include <float.h>
#include <math.h>
#include <string.h>
#include "support/arena.h"

/* Figures are in units of the largest flow.  */
static const double nearly_zero = 1e-9;

/* Row i says variable basic[i] = table[i][0] + sum table[i][1 + k] * variable nonbasic[k].  A
   variable is a column of the network; number `columns` is the artificial one of the first phase.
   Row `rows` is the form in question.                                                           */
struct program {
  struct arena *arena;
  const struct system *system;
  const double *v;
  double unit;
  size_t rows, width, stride;    /* width: nonbasic variables; stride: doubles a row */
  size_t *basic, *nonbasic;
  bool *bounded;                 /* by row: a flow; false: an extent, or fixed */
  double *table;
  size_t *place;                 /* by column: row, or rows + 1 + nonbasic; NOWHERE: it is fixed */
  bool feasible;
  size_t ray;                    /* nonbasic variable that nothing bounds; NOWHERE */
  bool *loose;                   /* by column: an extent that may change with no flow moved */
  double *spare;                 /* by column */
  double *inside[PROGRAM_SEEDS]; /* by column: weighted sums of where searches ended */
  double weight[PROGRAM_SEEDS];
  size_t ends;
};

static double *
row_at (const struct program *program, size_t i)
{
  return &program->table[i * program->stride];
}

/* Swaps basic variable I and nonbasic variable K.  */
static void
exchange (struct program *program, size_t i, size_t k)
{
  double *row = row_at (program, i), pivot = row[1 + k];
  size_t variable = program->basic[i];
  for (size_t c = 0; c <= program->width; c++) {
    row[c] = c == 1 + k ? 1 / pivot : -row[c] / pivot;
  }
  for (size_t r = 0; r <= program->rows; r++) {
    double *other = row_at (program, r), factor = other[1 + k];
    if (r != i && fabs (factor) > 0) {
      other[1 + k] = 0;
      for (size_t c = 0; c <= program->width; c++) {
        other[c] += factor * row[c];
      }
    }
  }
  program->basic[i] = program->nonbasic[k];
  program->nonbasic[k] = variable;
  program->place[program->basic[i]] = i;
  program->place[variable] = program->rows + 1 + k;
}

/* The row that limits nonbasic variable K when it grows, or NOWHERE.  Of equal limits the lowest
   variable (Bland).                                                                             */
static size_t
limiting (const struct program *program, size_t k)
{
  size_t found = NOWHERE;
  double least = INFINITY;
  for (size_t i = 0; i < program->rows; i++) {
    const double *row = row_at (program, i);
    if (program->bounded[program->basic[i]] && row[1 + k] < -nearly_zero) {
      double limit = fmax (row[0], 0) / -row[1 + k];
      if (limit < least - 1e-12
          || (limit <= least + 1e-12 && program->basic[i] < program->basic[found])) {
        least = fmin (limit, least);
        found = i;
      }
    }
  }
  return found;
}

/* Makes the last row as great as it can be; infinite: returns false and leaves the ray.  The
   largest gain enters, after some steps the lowest variable, so that it ends.                   */
static bool
climb (struct program *program)
{
  size_t steps = 0, patience = 20 + 2 * program->rows;
  program->ray = NOWHERE;
  for (;;) {
    const double *gain = row_at (program, program->rows);
    size_t enters = NOWHERE, leaves;
    for (size_t k = 0; k < program->width; k++) {
      bool better = enters == NOWHERE
                    || (steps < patience ? gain[1 + k] > gain[1 + enters]
                                         : program->nonbasic[k] < program->nonbasic[enters]);
      enters = gain[1 + k] > nearly_zero && better ? k : enters;
    }
    if (enters == NOWHERE || steps > 50 * patience) {
      return true;
    }
    leaves = limiting (program, enters);
    if (leaves == NOWHERE) {
      program->ray = enters;
      return false;
    }
    exchange (program, leaves, enters);
    steps++;
  }
}

/* First phase: every flow + a = at least 0, with a made least.  A is the nonbasic variable put
   last and taken away afterwards.                                                               */
static void
begin (struct program *program)
{
  size_t a = program->width++, worst = NOWHERE, columns = program->system->columns;
  double *goal = row_at (program, program->rows);
  for (size_t i = 0; i < program->rows; i++) {
    double *row = row_at (program, i);
    row[1 + a] = program->bounded[program->basic[i]] ? 1 : 0;
    if (program->bounded[program->basic[i]] && row[0] < -nearly_zero
        && (worst == NOWHERE || row[0] < row_at (program, worst)[0])) {
      worst = i;
    }
  }
  program->nonbasic[a] = columns;
  program->place[columns] = program->rows + 1 + a;
  memset (goal, 0, program->stride * sizeof *goal);
  goal[1 + a] = -1;
  if (worst != NOWHERE) {
    exchange (program, worst, a);
    (void) climb (program);
  }
  program->feasible = goal[0] > -10 * nearly_zero;
  if (program->place[columns] < program->rows && program->feasible) {
    size_t i = program->place[columns], k = 0;
    for (size_t other = 1; other < program->width; other++) {
      k = fabs (row_at (program, i)[1 + other]) > fabs (row_at (program, i)[1 + k]) ? other : k;
    }
    exchange (program, i, k);
  }
}

/* Takes the artificial variable, now nonbasic, out.  */
static void
end_first_phase (struct program *program)
{
  size_t a = program->place[program->system->columns] - program->rows - 1;
  size_t last = program->width - 1;
  for (size_t r = 0; r <= program->rows; r++) {
    row_at (program, r)[1 + a] = row_at (program, r)[1 + last];
  }
  program->nonbasic[a] = program->nonbasic[last];
  program->place[program->nonbasic[a]] = program->rows + 1 + a;
  program->width--;
}

/* Chooses flows for the directions, by elimination with complete pivots: row i of the dictionary
   starts as v0 + null z with z nonbasic, and each z is exchanged for the flow it moves most.  What
   moves no flow is no direction.                                                                */
static void
enter_flows (struct program *program, size_t directions)
{
  for (size_t done = 0; done < directions; done++) {
    size_t best = NOWHERE, by = 0;
    double most = 1e-10;
    for (size_t i = 0; i < program->rows; i++) {
      for (size_t k = 0; k < program->width; k++) {
        size_t from = program->nonbasic[k];
        double size = fabs (row_at (program, i)[1 + k]);
        if (from > program->system->columns && program->bounded[program->basic[i]]
            && size > most) {
          most = size;
          best = i;
          by = k;
        }
      }
    }
    if (best == NOWHERE) {
      break;
    }
    exchange (program, best, by);
  }
}

/* The rows whose variable is now a direction, and directions that are none, go.  */
static void
drop_directions (struct program *program)
{
  size_t columns = program->system->columns, rows = 0, width = 0;
  for (size_t k = 0; k < program->width; k++) {
    for (size_t r = 0; r < program->rows; r++) {
      double *row = row_at (program, r);
      if (program->nonbasic[k] < columns) {
        row[1 + width] = row[1 + k];
      } else if (program->basic[r] < columns && fabs (row[1 + k]) > nearly_zero) {
        program->loose[program->basic[r]] = true;
      }
    }
    if (program->nonbasic[k] < columns) {
      program->nonbasic[width++] = program->nonbasic[k];
    }
  }
  program->width = width;
  for (size_t r = 0; r < program->rows; r++) {
    if (program->basic[r] < columns) {
      memmove (row_at (program, rows), row_at (program, r), program->stride * sizeof (double));
      program->basic[rows++] = program->basic[r];
    }
  }
  program->rows = rows;
  for (size_t r = 0; r < rows; r++) {
    program->place[program->basic[r]] = r;
  }
  for (size_t k = 0; k < width; k++) {
    program->place[program->nonbasic[k]] = rows + 1 + k;
  }
}

/* A row for every column that any direction moves.  */
static void
fill (struct program *program, size_t freedom, const double null[])
{
  const struct system *system = program->system;
  size_t flows = system->network->streams * system->network->components;
  for (size_t j = 0; j < system->columns; j++) {
    double norm = 0, *row = row_at (program, program->rows);
    program->place[j] = NOWHERE;
    for (size_t k = 0; k < freedom; k++) {
      norm = hypot (norm, null[j * freedom + k]);
    }
    if (norm > 1e-8) {
      row[0] = program->v[j] / program->unit;
      for (size_t k = 0; k < freedom; k++) {
        row[1 + k] = null[j * freedom + k] * system->scale[j];
      }
      program->basic[program->rows] = j;
      program->place[j] = program->rows++;
      program->bounded[j] = j < flows;
    }
  }
  program->width = freedom;
  for (size_t k = 0; k < freedom; k++) {
    program->nonbasic[k] = system->columns + 1 + k;
  }
}

struct program *
program_make (struct arena *arena, const struct system *system, const double v[], size_t freedom,
              const double null[])
{
  struct program *program = ARENA_NEW (arena, struct program);
  size_t columns = system->columns, variables = columns + 1 + freedom;
  *program = (struct program) { .arena = arena, .system = system, .v = v, .stride = freedom + 2 };
  for (size_t j = 0; j < columns; j++) {
    program->unit = fmax (program->unit, fabs (v[j]));
  }
  program->unit = program->unit > 0 ? program->unit : 1;
  program->table = ARENA_ARRAY (arena, (columns + 1) * program->stride, double);
  program->basic = ARENA_ARRAY (arena, columns + 1, size_t);
  program->nonbasic = ARENA_ARRAY (arena, freedom + 1, size_t);
  program->bounded = ARENA_ARRAY (arena, variables, bool);
  program->loose = ARENA_ARRAY (arena, columns, bool);
  program->spare = ARENA_ARRAY (arena, columns, double);
  for (size_t s = 0; s < PROGRAM_SEEDS; s++) {
    program->inside[s] = ARENA_ARRAY (arena, columns, double);
  }
  program->place = ARENA_ARRAY (arena, variables, size_t);
  fill (program, freedom, null);
  enter_flows (program, freedom);
  drop_directions (program);
  program->bounded[columns] = true;
  begin (program);
  if (program->feasible) {
    end_first_phase (program);
  }
  return program;
}

bool
program_feasible (const struct program *program)
{
  return program->feasible;
}

void
program_point (const struct program *program, bool ray, double v[])
{
  for (size_t j = 0; j < program->system->columns; j++) {
    size_t at = program->place[j];
    v[j] = program->v[j];
    if (at != NOWHERE && at > program->rows) {
      v[j] = ray && at - program->rows - 1 == program->ray ? program->unit : 0;
    } else if (at != NOWHERE) {
      const double *row = row_at (program, at);
      v[j] = program->unit * (row[0] + (ray && program->ray != NOWHERE
                                        ? row[1 + program->ray] : 0));
      v[j] = program->bounded[j] && program->feasible && v[j] < 0 ? 0 : v[j];
    }
  }
}

/* Adds where a search ended to the sums, with weights that differ from seed to seed.  */
static void
keep_end (struct program *program)
{
  double weight[PROGRAM_SEEDS] = { 1 };
  program_point (program, program->ray != NOWHERE, program->spare);
  program->ends++;
  for (size_t s = 1; s < PROGRAM_SEEDS; s++) {
    weight[s] = 0.1 + fmod (0.6180339887 * (double) (s * s * program->ends), 1);
  }
  for (size_t s = 0; s < PROGRAM_SEEDS; s++) {
    program->weight[s] += weight[s];
    for (size_t j = 0; j < program->system->columns; j++) {
      program->inside[s][j] += weight[s] * program->spare[j];
    }
  }
}

/* Puts SIGN times the form in the last row, in units; what of it is fixed is returned.  */
static double
aim (struct program *program, const struct form *form, double sign)
{
  double *goal = row_at (program, program->rows), fixed = 0;
  memset (goal, 0, program->stride * sizeof *goal);
  for (size_t t = 0; t < form->count; t++) {
    size_t at = program->place[form->terms[t].column];
    double factor = form->terms[t].coefficient;
    if (at == NOWHERE) {
      fixed += factor * program->v[form->terms[t].column];
    } else if (at > program->rows) {
      goal[1 + at - program->rows - 1] += sign * factor;
    } else {
      for (size_t c = 0; c <= program->width; c++) {
        goal[c] += sign * factor * row_at (program, at)[c];
      }
    }
  }
  return fixed;
}

struct range
program_range (struct program *program, const struct form *form)
{
  double side[2];
  assert (program->feasible);
  for (size_t t = 0; t < form->count; t++) {
    if (program->loose[form->terms[t].column]) {
      return (struct range) { (double) -INFINITY, (double) INFINITY };
    }
  }
  for (int s = 0; s < 2; s++) {
    double sign = s == 0 ? -1 : 1, fixed = aim (program, form, sign);
    if (climb (program)) {
      side[s] = fixed + sign * program->unit * row_at (program, program->rows)[0];
    } else {
      side[s] = sign * (double) INFINITY;
    }
    keep_end (program);
  }
  return (struct range) { side[0], side[1] };
}

void
program_inside (const struct program *program, size_t seed, double v[])
{
  if (program->ends == 0) {
    program_point (program, false, v);
    return;
  }
  for (size_t j = 0; j < program->system->columns; j++) {
    v[j] = program->place[j] == NOWHERE ? program->v[j]
                                        : program->inside[seed][j] / program->weight[seed];
  }
}
