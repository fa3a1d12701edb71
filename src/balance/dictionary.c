#include "config.h"
#include "balance/dictionary.h"

#include <assert.h>
#include <float.h>
#include <math.h>
#include <string.h>
#include "balance/null_space.h"
#include "support/arena.h"

/* Figures are in units of the largest flow.  */
static const double nearly_zero = 1e-9;
/* Flows below zero by less are zero, and solutions with none further below are without any.  */
static const double rounding = 1e-13, feasible = 1e-11;
/* Two unit directions that differ by less are one.  */
static const double same_direction = 1e-12;
/* A column that its block moves by less than this is not moved.  */
static const double no_move = 1e-14;

/* Columns that the block moves alike, up to a factor above zero, make one class, whose
   variable is at least zero where the tightest of them is.  So column j is offset[j] + factor[j] *
   variable of its class.

   Row i of the dictionary says variable basic[i] = table[i][0] + sum table[i][1 + k] * variable
   nonbasic[k].  A variable is a class; number `classes` is the artificial one of the first phase,
   beyond it are the directions that the dictionary starts with.  Row `rows` is the form in
   question.                                                                                     */
struct dictionary {
  struct arena *arena;
  struct dictionary_of of;
  size_t classes, *class;        /* class: by place in the block; NOWHERE: nothing moves it */
  double *offset, *factor;       /* by place in the block */
  double *direction, *start;     /* by class: what moves it; its variable at v */
  double *end[2];                /* by class: its least and greatest; NAN: not asked for yet */
  size_t rows, width, stride;    /* width: nonbasic variables; stride: doubles a row */
  size_t *basic, *nonbasic;
  size_t *entry;                 /* room for where a row is not zero */
  bool *bounded;                 /* by variable: a flow; false: an extent */
  bool *loose;                   /* by class: an extent that may change with no flow moved */
  double *table;
  size_t *place;                 /* by variable: row, or rows + 1 + nonbasic */
  bool feasible;
  size_t ray;                    /* nonbasic variable that nothing bounds; NOWHERE */
  double *inside[DICTIONARY_SEEDS];      /* by class: weighted sums of where searches ended */
  double weight[DICTIONARY_SEEDS];
  size_t ends;
  unsigned long long random;     /* Knuth's 64-bit multiplier, MMIX; begins elsewhere in each
                                    block, or equal components went along with each other */
};

static bool
is_stopped (const struct dictionary *d)
{
  return d->of.interrupted && d->of.interrupted ();
}

static double *
row_at (const struct dictionary *d, size_t i)
{
  return &d->table[i * d->stride];
}

/* Swaps basic variable I and nonbasic variable K.  */
static void
exchange (struct dictionary *d, size_t i, size_t k)
{
  double *row = row_at (d, i), pivot = row[1 + k];
  size_t variable = d->basic[i], entries = 0, *entry = d->entry;
  for (size_t c = 0; c <= d->width; c++) {
    row[c] = c == 1 + k ? 1 / pivot : -row[c] / pivot;
    if (fabs (row[c]) > 0) {
      entry[entries++] = c;
    }
  }
  for (size_t r = 0; r <= d->rows; r++) {
    double *other = row_at (d, r), factor = other[1 + k];
    if (r != i && fabs (factor) > 0) {
      other[1 + k] = 0;
      for (size_t e = 0; e < entries; e++) {
        other[entry[e]] += factor * row[entry[e]];
      }
    }
  }
  d->basic[i] = d->nonbasic[k];
  d->nonbasic[k] = variable;
  d->place[d->basic[i]] = i;
  d->place[variable] = d->rows + 1 + k;
}

/* The row that limits nonbasic variable K when it grows, or NOWHERE.  Of equal limits the lowest
   variable (Bland).                                                                             */
static size_t
limiting (const struct dictionary *d, size_t k)
{
  size_t found = NOWHERE;
  double least = (double) INFINITY;
  for (size_t i = 0; i < d->rows; i++) {
    const double *row = row_at (d, i);
    if (d->bounded[d->basic[i]] && row[1 + k] < -nearly_zero) {
      double limit = fmax (row[0], 0) / -row[1 + k];
      if (limit < least - 1e-12
          || (limit <= least + 1e-12 && d->basic[i] < d->basic[found])) {
        least = fmin (limit, least);
        found = i;
      }
    }
  }
  return found;
}

/* The same, but of the rows that limit it within SLACK the one with the largest pivot: small ones
   spoil the table (Harris, Mathematical Programming 5 (1973) 1).  It may run round in circles.  */
static size_t
limiting_well (const struct dictionary *d, size_t k)
{
  static const double slack = 1e-10;
  size_t found = NOWHERE;
  double bound = (double) INFINITY;
  for (size_t i = 0; i < d->rows; i++) {
    const double *row = row_at (d, i);
    if (d->bounded[d->basic[i]] && row[1 + k] < -nearly_zero) {
      bound = fmin (bound, (fmax (row[0], 0) + slack) / -row[1 + k]);
    }
  }
  for (size_t i = 0; i < d->rows; i++) {
    const double *row = row_at (d, i);
    if (d->bounded[d->basic[i]] && row[1 + k] < -nearly_zero
        && fmax (row[0], 0) / -row[1 + k] <= bound
        && (found == NOWHERE || row[1 + k] < row_at (d, found)[1 + k])) {
      found = i;
    }
  }
  return found;
}

/* Makes the last row as great as it can be; infinite: returns false and leaves the ray.  The
   largest gain enters, after some steps the lowest variable, so that it ends.                   */
static bool
climb (struct dictionary *d)
{
  size_t steps = 0, patience = 20 + 2 * d->rows;
  d->ray = NOWHERE;
  for (;;) {
    const double *gain = row_at (d, d->rows);
    size_t enters = NOWHERE, leaves;
    for (size_t k = 0; k < d->width; k++) {
      bool better = enters == NOWHERE
                    || (steps < patience ? gain[1 + k] > gain[1 + enters]
                                         : d->nonbasic[k] < d->nonbasic[enters]);
      enters = gain[1 + k] > nearly_zero && better ? k : enters;
    }
    if (enters == NOWHERE || steps > 50 * patience || is_stopped (d)) {
      return true;
    }
    leaves = steps < patience ? limiting_well (d, enters) : limiting (d, enters);
    if (leaves == NOWHERE) {
      d->ray = enters;
      return false;
    }
    exchange (d, leaves, enters);
    steps++;
  }
}

/* First phase: every flow + a = at least 0, with a made least.  A is the nonbasic variable put
   last and taken away afterwards.                                                               */
static void
begin (struct dictionary *d)
{
  size_t a = d->width++, worst = NOWHERE, classes = d->classes;
  double *goal = row_at (d, d->rows);
  for (size_t i = 0; i < d->rows; i++) {
    double *row = row_at (d, i);
    row[1 + a] = d->bounded[d->basic[i]] ? 1 : 0;
    if (d->bounded[d->basic[i]] && row[0] < -rounding
        && (worst == NOWHERE || row[0] < row_at (d, worst)[0])) {
      worst = i;
    }
  }
  d->nonbasic[a] = classes;
  d->place[classes] = d->rows + 1 + a;
  memset (goal, 0, d->stride * sizeof *goal);
  goal[1 + a] = -1;
  if (worst != NOWHERE) {
    exchange (d, worst, a);
    (void) climb (d);
  }
  d->feasible = goal[0] > -feasible;
  if (d->place[classes] < d->rows && d->feasible) {
    size_t i = d->place[classes], k = 0;
    for (size_t other = 1; other < d->width; other++) {
      k = fabs (row_at (d, i)[1 + other]) > fabs (row_at (d, i)[1 + k]) ? other : k;
    }
    exchange (d, i, k);
  }
}

/* Takes the artificial variable, now nonbasic, out.  */
static void
end_first_phase (struct dictionary *d)
{
  size_t a = d->place[d->classes] - d->rows - 1;
  size_t last = d->width - 1;
  for (size_t r = 0; r <= d->rows; r++) {
    row_at (d, r)[1 + a] = row_at (d, r)[1 + last];
  }
  d->nonbasic[a] = d->nonbasic[last];
  d->place[d->nonbasic[a]] = d->rows + 1 + a;
  d->width--;
}

/* Chooses flows for the directions, by elimination with complete pivots: row i of the dictionary
   starts as v0 + null z with z nonbasic, and each z is exchanged for the flow it moves most.  What
   moves no flow is no direction.                                                                */
static void
enter_flows (struct dictionary *d, size_t directions)
{
  for (size_t done = 0; done < directions && !is_stopped (d); done++) {
    size_t best = NOWHERE, by = 0;
    double most = 1e-10;
    for (size_t i = 0; i < d->rows; i++) {
      for (size_t k = 0; k < d->width; k++) {
        size_t from = d->nonbasic[k];
        double size = fabs (row_at (d, i)[1 + k]);
        if (from > d->classes && d->bounded[d->basic[i]]
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
    exchange (d, best, by);
  }
}

/* The rows whose variable is now a direction, and directions that are none, go.  */
static void
drop_directions (struct dictionary *d)
{
  size_t classes = d->classes, rows = 0, width = 0;
  for (size_t k = 0; k < d->width; k++) {
    for (size_t r = 0; r < d->rows; r++) {
      double *row = row_at (d, r);
      if (d->nonbasic[k] < classes) {
        row[1 + width] = row[1 + k];
      } else if (d->basic[r] < classes && fabs (row[1 + k]) > nearly_zero) {
        d->loose[d->basic[r]] = true;
      }
    }
    if (d->nonbasic[k] < classes) {
      d->nonbasic[width++] = d->nonbasic[k];
    }
  }
  d->width = width;
  for (size_t r = 0; r < d->rows; r++) {
    if (d->basic[r] < classes) {
      memmove (row_at (d, rows), row_at (d, r), d->stride * sizeof (double));
      d->basic[rows++] = d->basic[r];
    }
  }
  d->rows = rows;
  for (size_t r = 0; r < rows; r++) {
    d->place[d->basic[r]] = r;
  }
  for (size_t k = 0; k < width; k++) {
    d->place[d->nonbasic[k]] = rows + 1 + k;
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
find_class (struct dictionary *d, size_t n, const double u[], bool bounded, size_t buckets[],
            size_t mask)
{
  size_t at = (size_t) hash_of (n, u, bounded) & mask;
  for (; buckets[at] > 0; at = (at + 1) & mask) {
    size_t c = buckets[at] - 1;
    bool same = d->bounded[c] == bounded;
    for (size_t k = 0; k < n && same; k++) {
      same = fabs (u[k] - d->direction[c * n + k]) <= same_direction;
    }
    if (same) {
      return c;
    }
  }
  memcpy (&d->direction[d->classes * n], u, n * sizeof *u);
  d->bounded[d->classes] = bounded;
  d->start[d->classes] = (double) INFINITY;
  buckets[at] = ++d->classes;
  return d->classes - 1;
}

/* Puts every column that any direction moves in its class.  */
static void
classify (struct dictionary *d)
{
  const struct system *system = d->of.system;
  const struct null_block *block = d->of.block;
  struct arena *arena = d->arena;
  size_t columns = block->columns, n = block->directions, mask = 1;
  size_t flows = system->network->streams * system->network->components, *buckets;
  double *u = ARENA_ARRAY (arena, n + 1, double);
  while (mask < 2 * columns + 1) {
    mask *= 2;
  }
  buckets = ARENA_ARRAY (arena, mask--, size_t);
  for (size_t i = 0; i < columns; i++) {
    size_t j = block->column[i];
    double size = 0;
    d->class[i] = NOWHERE;
    for (size_t k = 0; k < n; k++) {
      u[k] = block->base[i * n + k] * system->scale[j];
      size = hypot (size, u[k]);
    }
    if (size > no_move * system->scale[j]) {
      size_t c;
      for (size_t k = 0; k < n; k++) {
        u[k] /= size;
      }
      c = d->class[i] = find_class (d, n, u, j < flows, buckets, mask);
      d->factor[i] = size;
      d->offset[i] = d->of.v[j] / d->of.unit;
      d->start[c] = j < flows ? fmin (d->start[c], d->offset[i] / size) : 0;
    }
  }
  for (size_t i = 0; i < columns; i++) {
    if (d->class[i] != NOWHERE) {
      d->offset[i] -= d->factor[i] * d->start[d->class[i]];
    }
  }
}

/* A row for every class: its variable at v, and what moves it.  */
static void
fill (struct dictionary *d, size_t freedom)
{
  size_t classes = d->classes;
  for (size_t c = 0; c < classes; c++) {
    double *row = row_at (d, c);
    row[0] = d->start[c];
    memcpy (row + 1, &d->direction[c * freedom], freedom * sizeof *row);
    d->basic[c] = d->place[c] = c;
  }
  d->rows = classes;
  d->width = freedom;
  for (size_t k = 0; k < freedom; k++) {
    d->nonbasic[k] = classes + 1 + k;
    d->place[classes + 1 + k] = classes + 1 + k;
  }
}

static void
make_room (struct dictionary *d, size_t freedom)
{
  struct arena *arena = d->arena;
  size_t variables = d->classes + 1 + freedom;
  d->stride = freedom + 2;
  d->table = ARENA_ARRAY (arena, (d->classes + 1) * d->stride, double);
  d->basic = ARENA_ARRAY (arena, d->classes + 1, size_t);
  d->nonbasic = ARENA_ARRAY (arena, freedom + 1, size_t);
  d->entry = ARENA_ARRAY (arena, freedom + 2, size_t);
  d->place = ARENA_ARRAY (arena, variables, size_t);
  d->loose = ARENA_ARRAY (arena, d->classes + 1, bool);
  for (size_t side = 0; side < 2; side++) {
    d->end[side] = ARENA_ARRAY (arena, d->classes + 1, double);
    for (size_t c = 0; c < d->classes; c++) {
      d->end[side][c] = (double) NAN;
    }
  }
  for (size_t s = 0; s < DICTIONARY_SEEDS; s++) {
    d->inside[s] = ARENA_ARRAY (arena, d->classes + 1, double);
  }
}

struct dictionary *
dictionary_make (struct arena *arena, const struct dictionary_of *of)
{
  struct dictionary *d = ARENA_NEW (arena, struct dictionary);
  size_t columns = of->block->columns, directions = of->block->directions;
  *d = (struct dictionary) { .arena = arena, .of = *of, .random = of->block->first };
  d->class = ARENA_ARRAY (arena, columns + 1, size_t);
  d->offset = ARENA_ARRAY (arena, columns + 1, double);
  d->factor = ARENA_ARRAY (arena, columns + 1, double);
  d->direction = ARENA_ARRAY (arena, columns * directions + 1, double);
  d->start = ARENA_ARRAY (arena, columns + 1, double);
  d->bounded = ARENA_ARRAY (arena, columns + directions + 2, bool);
  classify (d);
  make_room (d, directions);
  fill (d, directions);
  enter_flows (d, directions);
  drop_directions (d);
  d->bounded[d->classes] = true;
  begin (d);
  if (d->feasible) {
    end_first_phase (d);
  }
  return d;
}

bool
dictionary_feasible (const struct dictionary *d)
{
  return d->feasible;
}

/* ---- Where searches end ---- */

/* The variable of a class where the last search ended, gone on along a ray.  */
static double
class_value (const struct dictionary *d, size_t c)
{
  size_t at = d->place[c];
  double value;
  if (at > d->rows) {
    return at - d->rows - 1 == d->ray ? 1 : 0;
  }
  value = row_at (d, at)[0];
  value += d->ray != NOWHERE ? row_at (d, at)[1 + d->ray] : 0;
  return d->bounded[c] && d->feasible ? fmax (value, 0) : value;
}

/* The block's columns from the variables of classes.  */
static void
spread (const struct dictionary *d, const double variable[], double v[])
{
  size_t flows = d->of.system->network->streams * d->of.system->network->components;
  for (size_t i = 0; i < d->of.block->columns; i++) {
    size_t c = d->class[i], j = d->of.block->column[i];
    v[j] = d->of.v[j];
    if (c != NOWHERE) {
      v[j] = d->of.unit * (d->offset[i] + d->factor[i] * variable[c]);
      v[j] = d->feasible && j < flows ? fmax (v[j], 0) : v[j];
    }
  }
}

void
dictionary_point (const struct dictionary *d, double v[])
{
  double *variable = ARENA_ARRAY (d->arena, d->classes + 1, double);
  for (size_t c = 0; c < d->classes; c++) {
    variable[c] = class_value (d, c);
  }
  spread (d, variable, v);
}

/* Adds where a search ended to the sums, with weights that differ from seed to seed.  */
static void
keep_end (struct dictionary *d)
{
  double weight[DICTIONARY_SEEDS] = { 1 };
  d->ends++;
  for (size_t s = 1; s < DICTIONARY_SEEDS; s++) {
    d->random = d->random * 6364136223846793005ULL + 1442695040888963407ULL;
    weight[s] = 0.1 + (double) (d->random >> 40) / (double) (1ULL << 24);
  }
  for (size_t s = 0; s < DICTIONARY_SEEDS; s++) {
    d->weight[s] += weight[s];
  }
  for (size_t c = 0; c < d->classes; c++) {
    double value = class_value (d, c);
    for (size_t s = 0; s < DICTIONARY_SEEDS; s++) {
      d->inside[s][c] += weight[s] * value;
    }
  }
}

void
dictionary_inside (const struct dictionary *d, size_t seed, double v[])
{
  double *variable = ARENA_ARRAY (d->arena, d->classes + 1, double);
  if (d->ends == 0) {
    dictionary_point (d, v);
    return;
  }
  for (size_t c = 0; c < d->classes; c++) {
    variable[c] = d->inside[seed][c] / d->weight[seed];
  }
  spread (d, variable, v);
}

/* ---- Ranges ---- */

/* Adds FACTOR times the variable of a class to the form in question.  */
static void
aim_at (struct dictionary *d, size_t c, double factor)
{
  double *goal = row_at (d, d->rows);
  size_t at = d->place[c];
  if (at > d->rows) {
    goal[at - d->rows] += factor;
    return;
  }
  for (size_t k = 0; k <= d->width; k++) {
    goal[k] += factor * row_at (d, at)[k];
  }
}

/* The least (SIGN below 0) or greatest of what was aimed at SIGN times, FIXED apart.  */
static double
search (struct dictionary *d, double fixed, double sign)
{
  double end = climb (d) ? fixed + sign * row_at (d, d->rows)[0] : sign * (double) INFINITY;
  keep_end (d);
  return d->of.unit * end;
}

static void
aim_at_nothing (struct dictionary *d)
{
  memset (row_at (d, d->rows), 0, d->stride * sizeof (double));
}

/* Of the variable of a class, over the unit.  */
static double
class_end (struct dictionary *d, size_t c, double sign)
{
  size_t side = sign < 0 ? 0 : 1;
  if (isnan (d->end[side][c])) {
    aim_at_nothing (d);
    aim_at (d, c, sign);
    d->end[side][c] = search (d, 0, sign);
  }
  return d->end[side][c];
}

/* The place of a term's column in the block.  */
static size_t
place_of (const struct dictionary *d, const struct term *term)
{
  return d->of.space->at[term->column];
}

double
dictionary_end (struct dictionary *d, const struct form *form, double sign)
{
  double fixed = 0, unit = d->of.unit;
  size_t first = place_of (d, &form->terms[0]);
  assert (d->feasible);
  for (size_t t = 0; t < form->count; t++) {
    size_t i = place_of (d, &form->terms[t]), c = d->class[i];
    fixed += form->terms[t].coefficient
             * (c == NOWHERE ? d->of.v[form->terms[t].column] / unit : d->offset[i]);
    if (c != NOWHERE && d->loose[c]) {
      return sign * (double) INFINITY;
    }
  }
  if (form->count == 1 && d->class[first] != NOWHERE && form->terms[0].coefficient > 0) {
    double by = form->terms[0].coefficient * d->factor[first];
    return unit * fixed + by * class_end (d, d->class[first], sign);
  }
  aim_at_nothing (d);
  for (size_t t = 0; t < form->count; t++) {
    size_t i = place_of (d, &form->terms[t]);
    if (d->class[i] != NOWHERE) {
      aim_at (d, d->class[i], sign * form->terms[t].coefficient * d->factor[i]);
    }
  }
  return search (d, fixed, sign);
}
