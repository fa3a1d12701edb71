#include "config.h"
#include "balance/program.h"

#include <assert.h>
#include <float.h>
#include <math.h>
#include <string.h>
#include "support/arena.h"

/* Figures are in units of the largest flow.  */
static const double nearly_zero = 1e-9;
/* Flows below zero by less are zero, and solutions with none further below are without any.  */
static const double rounding = 1e-13, feasible = 1e-11;
/* Two unit directions that differ by less are one.  */
static const double same_direction = 1e-12;
/* A column that the null space moves by less than this is not moved.  */
static const double no_move = 1e-14;

/* Columns that the null space moves alike, up to a factor above zero, make one class, whose
   variable is at least zero where the tightest of them is.  So column j is offset[j] + factor[j] *
   variable of its class.

   Row i of the dictionary says variable basic[i] = table[i][0] + sum table[i][1 + k] * variable
   nonbasic[k].  A variable is a class; number `classes` is the artificial one of the first phase,
   beyond it are the directions that the dictionary starts with.  Row `rows` is the form in
   question.                                                                                     */
struct program {
  struct arena *arena;
  const struct system *system;
  const double *v;
  double unit;
  size_t classes, *class;        /* class: by column; NOWHERE: nothing moves it */
  double *offset, *factor;       /* by column */
  double *direction, *start;     /* by class: what moves it; its variable at v */
  struct range *range;           /* by class, once it was asked for: */
  bool *known;
  size_t rows, width, stride;    /* width: nonbasic variables; stride: doubles a row */
  size_t *basic, *nonbasic;
  bool *bounded;                 /* by variable: a flow; false: an extent */
  bool *loose;                   /* by class: an extent that may change with no flow moved */
  double *table;
  size_t *place;                 /* by variable: row, or rows + 1 + nonbasic */
  bool feasible;
  size_t ray;                    /* nonbasic variable that nothing bounds; NOWHERE */
  double *inside[PROGRAM_SEEDS]; /* by class: weighted sums of where searches ended */
  double weight[PROGRAM_SEEDS];
  size_t ends;
  unsigned long long random;     /* Knuth's 64-bit multiplier, MMIX */
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
  double least = (double) INFINITY;
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
  size_t a = program->width++, worst = NOWHERE, classes = program->classes;
  double *goal = row_at (program, program->rows);
  for (size_t i = 0; i < program->rows; i++) {
    double *row = row_at (program, i);
    row[1 + a] = program->bounded[program->basic[i]] ? 1 : 0;
    if (program->bounded[program->basic[i]] && row[0] < -rounding
        && (worst == NOWHERE || row[0] < row_at (program, worst)[0])) {
      worst = i;
    }
  }
  program->nonbasic[a] = classes;
  program->place[classes] = program->rows + 1 + a;
  memset (goal, 0, program->stride * sizeof *goal);
  goal[1 + a] = -1;
  if (worst != NOWHERE) {
    exchange (program, worst, a);
    (void) climb (program);
  }
  program->feasible = goal[0] > -feasible;
  if (program->place[classes] < program->rows && program->feasible) {
    size_t i = program->place[classes], k = 0;
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
  size_t a = program->place[program->classes] - program->rows - 1;
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
        if (from > program->classes && program->bounded[program->basic[i]]
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
  size_t classes = program->classes, rows = 0, width = 0;
  for (size_t k = 0; k < program->width; k++) {
    for (size_t r = 0; r < program->rows; r++) {
      double *row = row_at (program, r);
      if (program->nonbasic[k] < classes) {
        row[1 + width] = row[1 + k];
      } else if (program->basic[r] < classes && fabs (row[1 + k]) > nearly_zero) {
        program->loose[program->basic[r]] = true;
      }
    }
    if (program->nonbasic[k] < classes) {
      program->nonbasic[width++] = program->nonbasic[k];
    }
  }
  program->width = width;
  for (size_t r = 0; r < program->rows; r++) {
    if (program->basic[r] < classes) {
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

/* ---- Classes of columns ---- */

static unsigned long long
hash_of (size_t n, const double u[], bool bounded)
{
  unsigned long long hash = bounded ? 1469598103934665603ULL : 1099511628211ULL;
  for (size_t k = 0; k < n; k++) {
    hash ^= (unsigned long long) (long long) floor (u[k] * 1e6 + 0.25);
    hash *= 1099511628211ULL;
  }
  return hash ^ hash >> 32;
}

/* The class of direction U, new if there is none; BUCKETS (a power of two, MASK one less) hold
   class numbers, 1 too many.                                                                    */
static size_t
find_class (struct program *program, size_t n, const double u[], bool bounded, size_t buckets[],
            size_t mask)
{
  size_t at = (size_t) hash_of (n, u, bounded) & mask;
  for (; buckets[at] > 0; at = (at + 1) & mask) {
    size_t c = buckets[at] - 1;
    bool same = program->bounded[c] == bounded;
    for (size_t k = 0; k < n && same; k++) {
      same = fabs (u[k] - program->direction[c * n + k]) <= same_direction;
    }
    if (same) {
      return c;
    }
  }
  memcpy (&program->direction[program->classes * n], u, n * sizeof *u);
  program->bounded[program->classes] = bounded;
  program->start[program->classes] = (double) INFINITY;
  buckets[at] = ++program->classes;
  return program->classes - 1;
}

/* Puts every column that any direction moves in its class.  */
static void
classify (struct program *program, size_t freedom, const double null[])
{
  const struct system *system = program->system;
  struct arena *arena = program->arena;
  size_t columns = system->columns, mask = 1;
  size_t flows = system->network->streams * system->network->components, *buckets;
  double *u = ARENA_ARRAY (arena, freedom + 1, double);
  while (mask < 2 * columns + 1) {
    mask *= 2;
  }
  buckets = ARENA_ARRAY (arena, mask--, size_t);
  for (size_t j = 0; j < columns; j++) {
    double size = 0;
    program->class[j] = NOWHERE;
    for (size_t k = 0; k < freedom; k++) {
      u[k] = null[j * freedom + k] * system->scale[j];
      size = hypot (size, u[k]);
    }
    if (size > no_move * system->scale[j]) {
      size_t c;
      for (size_t k = 0; k < freedom; k++) {
        u[k] /= size;
      }
      c = program->class[j] = find_class (program, freedom, u, j < flows, buckets, mask);
      program->factor[j] = size;
      program->offset[j] = program->v[j] / program->unit;
      program->start[c] = j < flows ? fmin (program->start[c], program->offset[j] / size) : 0;
    }
  }
  for (size_t j = 0; j < columns; j++) {
    if (program->class[j] != NOWHERE) {
      program->offset[j] -= program->factor[j] * program->start[program->class[j]];
    }
  }
}

/* A row for every class: its variable at v, and what moves it.  */
static void
fill (struct program *program, size_t freedom)
{
  size_t classes = program->classes;
  for (size_t c = 0; c < classes; c++) {
    double *row = row_at (program, c);
    row[0] = program->start[c];
    memcpy (row + 1, &program->direction[c * freedom], freedom * sizeof *row);
    program->basic[c] = program->place[c] = c;
  }
  program->rows = classes;
  program->width = freedom;
  for (size_t k = 0; k < freedom; k++) {
    program->nonbasic[k] = classes + 1 + k;
    program->place[classes + 1 + k] = classes + 1 + k;
  }
}

static void
make_room (struct program *program, size_t freedom)
{
  struct arena *arena = program->arena;
  size_t variables = program->classes + 1 + freedom;
  program->stride = freedom + 2;
  program->table = ARENA_ARRAY (arena, (program->classes + 1) * program->stride, double);
  program->basic = ARENA_ARRAY (arena, program->classes + 1, size_t);
  program->nonbasic = ARENA_ARRAY (arena, freedom + 1, size_t);
  program->place = ARENA_ARRAY (arena, variables, size_t);
  program->loose = ARENA_ARRAY (arena, program->classes + 1, bool);
  program->known = ARENA_ARRAY (arena, program->classes + 1, bool);
  program->range = ARENA_ARRAY (arena, program->classes + 1, struct range);
  for (size_t s = 0; s < PROGRAM_SEEDS; s++) {
    program->inside[s] = ARENA_ARRAY (arena, program->classes + 1, double);
  }
}

struct program *
program_make (struct arena *arena, const struct system *system, const double v[], size_t freedom,
              const double null[])
{
  struct program *program = ARENA_NEW (arena, struct program);
  size_t columns = system->columns;
  *program = (struct program) { .arena = arena, .system = system, .v = v };
  for (size_t j = 0; j < columns; j++) {
    program->unit = fmax (program->unit, fabs (v[j]));
  }
  program->unit = program->unit > 0 ? program->unit : 1;
  program->class = ARENA_ARRAY (arena, columns + 1, size_t);
  program->offset = ARENA_ARRAY (arena, columns + 1, double);
  program->factor = ARENA_ARRAY (arena, columns + 1, double);
  program->direction = ARENA_ARRAY (arena, columns * freedom + 1, double);
  program->start = ARENA_ARRAY (arena, columns + 1, double);
  program->bounded = ARENA_ARRAY (arena, columns + freedom + 2, bool);
  classify (program, freedom, null);
  make_room (program, freedom);
  fill (program, freedom);
  enter_flows (program, freedom);
  drop_directions (program);
  program->bounded[program->classes] = true;
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

/* ---- Where searches end ---- */

/* The variable of a class where the last search ended, gone on along a ray.  */
static double
class_value (const struct program *program, size_t c)
{
  size_t at = program->place[c];
  double value;
  if (at > program->rows) {
    return at - program->rows - 1 == program->ray ? 1 : 0;
  }
  value = row_at (program, at)[0];
  value += program->ray != NOWHERE ? row_at (program, at)[1 + program->ray] : 0;
  return program->bounded[c] && program->feasible ? fmax (value, 0) : value;
}

/* Columns from the variables of classes.  */
static void
spread (const struct program *program, const double variable[], double v[])
{
  size_t flows = program->system->network->streams * program->system->network->components;
  for (size_t j = 0; j < program->system->columns; j++) {
    size_t c = program->class[j];
    v[j] = program->v[j];
    if (c != NOWHERE) {
      v[j] = program->unit * (program->offset[j] + program->factor[j] * variable[c]);
      v[j] = program->feasible && j < flows ? fmax (v[j], 0) : v[j];
    }
  }
}

void
program_point (const struct program *program, double v[])
{
  double *variable = ARENA_ARRAY (program->arena, program->classes + 1, double);
  for (size_t c = 0; c < program->classes; c++) {
    variable[c] = class_value (program, c);
  }
  spread (program, variable, v);
}

/* Adds where a search ended to the sums, with weights that differ from seed to seed.  */
static void
keep_end (struct program *program)
{
  double weight[PROGRAM_SEEDS] = { 1 };
  program->ends++;
  for (size_t s = 1; s < PROGRAM_SEEDS; s++) {
    program->random = program->random * 6364136223846793005ULL + 1442695040888963407ULL;
    weight[s] = 0.1 + (double) (program->random >> 40) / (double) (1ULL << 24);
  }
  for (size_t s = 0; s < PROGRAM_SEEDS; s++) {
    program->weight[s] += weight[s];
  }
  for (size_t c = 0; c < program->classes; c++) {
    double value = class_value (program, c);
    for (size_t s = 0; s < PROGRAM_SEEDS; s++) {
      program->inside[s][c] += weight[s] * value;
    }
  }
}

void
program_inside (const struct program *program, size_t seed, double v[])
{
  double *variable = ARENA_ARRAY (program->arena, program->classes + 1, double);
  if (program->ends == 0) {
    program_point (program, v);
    return;
  }
  for (size_t c = 0; c < program->classes; c++) {
    variable[c] = program->inside[seed][c] / program->weight[seed];
  }
  spread (program, variable, v);
}

/* ---- Ranges ---- */

/* Adds FACTOR times the variable of a class to the form in question.  */
static void
aim_at (struct program *program, size_t c, double factor)
{
  double *goal = row_at (program, program->rows);
  size_t at = program->place[c];
  if (at > program->rows) {
    goal[at - program->rows] += factor;
    return;
  }
  for (size_t k = 0; k <= program->width; k++) {
    goal[k] += factor * row_at (program, at)[k];
  }
}

/* The least and greatest of what was aimed at, FIXED apart: one way and then the other.  */
static struct range
search (struct program *program, double fixed)
{
  double side[2], *goal = row_at (program, program->rows);
  for (int s = 0; s < 2; s++) {
    double sign = s == 0 ? -1 : 1;
    for (size_t k = 0; k <= program->width && s == 1; k++) {
      goal[k] = -goal[k];
    }
    side[s] = climb (program) ? fixed + sign * goal[0] : sign * (double) INFINITY;
    keep_end (program);
  }
  return (struct range) { program->unit * side[0], program->unit * side[1] };
}

/* Of the variable of a class, over the unit.  */
static struct range
class_range (struct program *program, size_t c)
{
  if (!program->known[c]) {
    memset (row_at (program, program->rows), 0, program->stride * sizeof (double));
    aim_at (program, c, -1);
    program->range[c] = search (program, 0);
    program->known[c] = true;
  }
  return program->range[c];
}

struct range
program_range (struct program *program, const struct form *form)
{
  double fixed = 0;
  assert (program->feasible);
  for (size_t t = 0; t < form->count; t++) {
    size_t j = form->terms[t].column, c = program->class[j];
    fixed += form->terms[t].coefficient
             * (c == NOWHERE ? program->v[j] / program->unit : program->offset[j]);
    if (c != NOWHERE && program->loose[c]) {
      return (struct range) { (double) -INFINITY, (double) INFINITY };
    }
  }
  if (form->count == 1 && program->class[form->terms[0].column] != NOWHERE
      && form->terms[0].coefficient > 0) {
    size_t j = form->terms[0].column;
    double by = form->terms[0].coefficient * program->factor[j];
    struct range range = class_range (program, program->class[j]);
    return (struct range) { program->unit * fixed + by * range.least,
                            program->unit * fixed + by * range.greatest };
  }
  memset (row_at (program, program->rows), 0, program->stride * sizeof (double));
  for (size_t t = 0; t < form->count; t++) {
    size_t j = form->terms[t].column;
    if (program->class[j] != NOWHERE) {
      aim_at (program, program->class[j], -form->terms[t].coefficient * program->factor[j]);
    }
  }
  return search (program, fixed);
}
