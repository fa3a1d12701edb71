#include "config.h"
#include "balance/reduce.h"

#include <math.h>
#include <string.h>
#include "balance/elimination.h"
#include "balance/null_space.h"
#include "balance/rank.h"
#include "support/arena.h"

/* Rounds of solving for what the rows are still out by.  */
enum { REFINEMENTS = 3 };

/* Columns left to dense algebra for one of Newton's steps, where a rank in doubt does no harm.  */
enum { STEP_CORE = 10 };

/* Facts, times the square of how many are to spare, up to which left null vectors are made without
   being asked for.                                                                              */
static const double modest = 1e6;

struct reduction {
  struct sparse a;               /* scaled; columns are those present */
  const size_t *column;          /* of the network, by column of `a` */
  struct elimination *elimination;
  double *structure;             /* [structure row * surplus + k]: with `left` */
};

static struct reduction *
scaled_rows (struct arena *arena, const struct system *system)
{
  struct reduction *out = ARENA_NEW (arena, struct reduction);
  const struct rows *rows = &system->rows;
  size_t entries = rows->start[rows->count], present = 0;
  size_t *place = ARENA_ARRAY (arena, system->columns + 1, size_t);
  size_t *network = ARENA_ARRAY (arena, system->present + 1, size_t);
  size_t *column = ARENA_ARRAY (arena, entries + 1, size_t);
  double *value = ARENA_ARRAY (arena, entries + 1, double);
  for (size_t j = 0; j < system->columns; j++) {
    if (!system->absence.absent[j]) {
      network[present] = j;
      place[j] = present++;
    }
  }
  for (size_t i = 0; i < rows->count; i++) {
    for (size_t e = rows->start[i]; e < rows->start[i + 1]; e++) {
      size_t j = rows->column[e];
      column[e] = place[j];
      value[e] = rows->coefficient[e] * system->scale[j] * system->row_scale[i];
    }
  }
  out->a = (struct sparse) { rows->count, present, rows->start, column, value };
  out->column = network;
  return out;
}

/* Multipliers that take rows to nothing: those of facts orthonormal, what only balances say left
   out, those of the structure beside them.                                                      */
static void
find_left (struct arena *arena, struct system *system)
{
  struct reduction *r = system->reduction;
  size_t m = r->a.rows, k = m - elimination_rank (r->elimination), kept, s = system->structure;
  size_t facts = m - s;
  double *y = ARENA_ARRAY (arena, m + 1, double);
  double *all = ARENA_ARRAY (arena, m * k + 1, double);
  double *left;
  for (size_t c = 0; c < k; c++) {
    elimination_left (r->elimination, c, y);
    for (size_t i = 0; i < m; i++) {
      all[(i < s ? facts + i : i - s) * k + c] = y[i];
    }
  }
  kept = columns_orthonormal (facts, k, k, all, s, &all[facts * k], NULL);
  left = ARENA_ARRAY (arena, facts * kept + 1, double);
  r->structure = ARENA_ARRAY (arena, s * kept + 1, double);
  for (size_t i = 0; i < m && kept > 0; i++) {
    memcpy (i < facts ? &left[i * kept] : &r->structure[(i - facts) * kept], &all[i * k],
            kept * sizeof *left);
  }
  system->left = left;
  system->surplus = kept;
}

/* How many facts are to spare: rows that depend on others, less those of the structure that depend
   on others of it.                                                                              */
static size_t
count_surplus (const struct system *system)
{
  struct sparse structure = system->reduction->a;
  struct arena *arena = arena_create ();
  size_t surplus = structure.rows - system->rank, among;
  structure.rows = system->structure;
  among = structure.rows - elimination_rank (elimination_make (arena, &structure, REDUCE_CORE));
  arena_destroy (arena);
  return surplus > among ? surplus - among : 0;
}

void
system_left (struct arena *arena, struct system *system)
{
  if (!system->left) {
    find_left (arena, system);
  }
}

double *
system_left_mixed (struct arena *arena, const struct system *system, size_t count)
{
  size_t m = system->rows.count, s = system->structure;
  double *out = ARENA_ARRAY (arena, (m - s) * count + 1, double);
  double *y = ARENA_ARRAY (arena, m + 1, double);
  unsigned long long seed = 1;
  for (size_t k = 0; k < count; k++) {
    elimination_left_mixed (system->reduction->elimination, &seed, y);
    for (size_t i = s; i < m; i++) {
      out[(i - s) * count + k] = y[i];
    }
  }
  return out;
}

/* Takes the null space (or null) out of W, by column of the rows: of all solutions the shortest.
   One with nothing in the columns that are free may be far off, and lose digits.                */
static void
shorten (const struct system *system, const struct null_space *null, struct arena *arena,
         double w[])
{
  const struct reduction *r = system->reduction;
  if (!null || null->freedom == 0) {
    return;
  }
  double *v = ARENA_ARRAY (arena, system->columns + 1, double);
  double *along = ARENA_ARRAY (arena, null->freedom + 1, double);
  for (size_t j = 0; j < r->a.columns; j++) {
    v[r->column[j]] = w[j];
  }
  null_space_along (null, v, along);
  for (size_t k = 0; k < null->freedom; k++) {
    along[k] = -along[k];
  }
  null_space_move (null, along, v);
  for (size_t j = 0; j < r->a.columns; j++) {
    w[j] = v[r->column[j]];
  }
}

void
system_solve (const struct system *system, const double right[], double v[])
{
  const struct reduction *r = system->reduction;
  struct arena *arena = arena_create ();
  double *b = ARENA_ARRAY (arena, r->a.rows + 1, double);
  double *w = ARENA_ARRAY (arena, r->a.columns + 1, double);
  double *step = ARENA_ARRAY (arena, r->a.columns + 1, double);
  for (int round = 0; round <= REFINEMENTS; round++) {
    for (size_t i = 0; i < r->a.rows; i++) {
      long double sum = i < system->structure ? 0 : (long double) right[i - system->structure];
      for (size_t e = r->a.start[i]; e < r->a.start[i + 1]; e++) {
        sum -= (long double) r->a.value[e] * (long double) w[r->a.column[e]];
      }
      b[i] = (double) sum;
    }
    elimination_solve (r->elimination, b, step);
    for (size_t j = 0; j < r->a.columns; j++) {
      w[j] += step[j];
    }
    shorten (system, system->null, arena, w);
  }
  memset (v, 0, system->columns * sizeof *v);
  for (size_t j = 0; j < r->a.columns; j++) {
    v[r->column[j]] = w[j] * system->scale[r->column[j]];
  }
  arena_destroy (arena);
}

void
system_correct (const struct system *system, const double at[], double v[])
{
  const struct reduction *r = system->reduction;
  struct arena *arena = arena_create ();
  double *out = ARENA_ARRAY (arena, r->a.rows + 1, double);
  double *step = ARENA_ARRAY (arena, r->a.columns + 1, double);
  for (size_t i = 0; i < r->a.rows; i++) {
    for (size_t e = r->a.start[i]; e < r->a.start[i + 1]; e++) {
      size_t j = r->column[r->a.column[e]];
      out[i] += r->a.value[e] * (v[j] - at[j]) / system->scale[j];
    }
  }
  elimination_solve (r->elimination, out, step);
  shorten (system, system->null, arena, step);
  for (size_t j = 0; j < r->a.columns; j++) {
    v[r->column[j]] -= step[j] * system->scale[r->column[j]];
  }
  arena_destroy (arena);
}

/* A solution for the right sides that the system has.  */
static void
find_particular (struct arena *arena, struct system *system)
{
  size_t facts = system->rows.count - system->structure;
  double *right = ARENA_ARRAY (arena, facts + 1, double);
  double *v = ARENA_ARRAY (arena, system->columns + 1, double);
  for (size_t i = 0; i < facts; i++) {
    right[i] = system->rows.right[system->structure + i]
               * system->row_scale[system->structure + i];
  }
  system_solve (system, right, v);
  system->particular = v;
}

/* The null vectors of an elimination of the rows, by column of the network.  */
static struct null_vectors
null_vectors (struct arena *arena, const struct reduction *r,
              const struct elimination *elimination, bool (*interrupted) (void))
{
  size_t n = r->a.columns, d = n - elimination_rank (elimination), count = 0, room = 4 * n + 64;
  size_t *start = ARENA_ARRAY (arena, d + 1, size_t), *column = NULL;
  double *x = ARENA_ARRAY (arena, n + 1, double), *value = NULL;
  column = ARENA_ARRAY (arena, room, size_t);
  value = ARENA_ARRAY (arena, room, double);
  for (size_t k = 0; k < d && !(interrupted && interrupted ()); k++) {
    if (count + n > room) {
      size_t *more = ARENA_ARRAY (arena, 2 * room, size_t);
      double *values = ARENA_ARRAY (arena, 2 * room, double);
      memcpy (more, column, count * sizeof *more);
      memcpy (values, value, count * sizeof *values);
      column = more;
      value = values;
      room *= 2;
    }
    elimination_null (elimination, k, x);
    for (size_t j = 0; j < n; j++) {
      if (fabs (x[j]) > 0) {
        column[count] = r->column[j];
        value[count++] = x[j];
      }
    }
    start[k + 1] = count;
  }
  return (struct null_vectors) { d, start, column, value, interrupted };
}

void
system_open (struct arena *arena, struct system *system, bool (*interrupted) (void))
{
  struct arena *scratch = arena_create ();
  struct null_vectors vectors = null_vectors (scratch, system->reduction,
                                              system->reduction->elimination, interrupted);
  system->null = null_space_make (arena, system->columns, &vectors);
  arena_destroy (scratch);
  if (system->freedom > 0) {
    find_particular (arena, system);
  }
}

void
system_reduce (struct arena *arena, struct system *system, size_t core)
{
  struct reduction *r = scaled_rows (arena, system);
  double facts = (double) (r->a.rows - system->structure), spare;
  r->elimination = elimination_make (arena, &r->a, core);
  system->reduction = r;
  system->rank = elimination_rank (r->elimination);
  system->freedom = r->a.columns - system->rank;
  spare = (double) (r->a.rows - system->rank);
  if (facts * spare * spare <= modest) {
    find_left (arena, system);
  } else {
    system->surplus = count_surplus (system);
  }
  find_particular (arena, system);
}

void
system_clash (const struct system *system, const double v[], double rho[])
{
  size_t k = system->surplus, m = system->structure;
  memset (rho, 0, k * sizeof *rho);
  for (size_t i = 0; i < system->rows.count && k > 0; i++) {
    double out = -rows_residual (&system->rows, i, v) * system->row_scale[i];
    const double *multiplier = i < m ? &system->reduction->structure[i * k]
                                     : &system->left[(i - m) * k];
    for (size_t c = 0; c < k; c++) {
      rho[c] += multiplier[c] * out;
    }
  }
}

double *
system_multipliers (struct arena *arena, const struct system *system, const double facts[])
{
  size_t k = system->surplus, count = system->rows.count - system->structure;
  double *mu = ARENA_ARRAY (arena, system->structure + 1, double);
  for (size_t c = 0; c < k; c++) {
    double along = 0;
    for (size_t i = 0; i < count; i++) {
      along += system->left[i * k + c] * facts[i];
    }
    for (size_t i = 0; i < system->structure; i++) {
      mu[i] += along * system->reduction->structure[i * k + c];
    }
  }
  return mu;
}

double *
system_project (struct arena *arena, const struct system *system, const struct rows *rows,
                size_t width, const double base[])
{
  double *out = ARENA_ARRAY (arena, rows->count * width + 1, double);
  for (size_t i = 0; i < rows->count; i++) {
    for (size_t e = rows->start[i]; e < rows->start[i + 1]; e++) {
      size_t j = rows->column[e];
      double a = rows->coefficient[e] * system->scale[j];
      for (size_t k = 0; k < width; k++) {
        out[i * width + k] += a * base[j * width + k];
      }
    }
  }
  return out;
}

struct null_space *
system_narrow (struct arena *arena, const struct system *system, const double v[])
{
  struct arena *work = arena_create ();
  struct rows bent = system_bent (work, system, v);
  size_t width = system->freedom, freedom;
  double *null = null_space_dense (work, system->null), *inner;
  double *h = system_project (work, system, &bent, width, null);
  struct space space = space_make (work, bent.count, width, h);
  freedom = width - space.rank;
  inner = ARENA_ARRAY (work, width * freedom + 1, double);
  for (size_t j = 0; j < width; j++) {
    for (size_t k = 0; k < freedom; k++) {
      inner[j * freedom + k] = space_null (&space, j, k);
    }
  }
  null = matrix_product (work, system->columns, width, freedom, null, inner);
  struct null_space *narrow = null_space_of (arena, system->columns, freedom, freedom, null);
  arena_destroy (work);
  return narrow;
}

/* ---- Rows and bends together ---- */

/* The scaled rows of SYSTEM with those of the bends behind them, each of these made 1 in its
   largest entry; what they are short of at V in SHORT_OF (null: not asked for).                 */
static struct sparse
rows_with_bends (struct arena *arena, const struct system *system, const struct rows *bent,
                 const double v[], double short_of[])
{
  const struct sparse *a = &system->reduction->a;
  size_t m = a->rows, entries = a->start[m];
  size_t *start = ARENA_ARRAY (arena, m + bent->count + 1, size_t);
  size_t *column = ARENA_ARRAY (arena, entries + bent->start[bent->count] + 1, size_t);
  size_t *place = ARENA_ARRAY (arena, system->columns + 1, size_t);
  double *value = ARENA_ARRAY (arena, entries + bent->start[bent->count] + 1, double);
  memcpy (start, a->start, (m + 1) * sizeof *start);
  memcpy (column, a->column, entries * sizeof *column);
  memcpy (value, a->value, entries * sizeof *value);
  for (size_t j = 0; j < a->columns; j++) {
    place[system->reduction->column[j]] = j;
  }
  for (size_t i = 0; i < m && short_of; i++) {
    short_of[i] = -rows_residual (&system->rows, i, v) * system->row_scale[i];
  }
  for (size_t i = 0; i < bent->count; i++) {
    double most = 0;
    start[m + i + 1] = entries + bent->start[i + 1];
    for (size_t e = bent->start[i]; e < bent->start[i + 1]; e++) {
      column[entries + e] = place[bent->column[e]];
      value[entries + e] = bent->coefficient[e] * system->scale[bent->column[e]];
      most = fmax (most, fabs (value[entries + e]));
    }
    for (size_t e = bent->start[i]; e < bent->start[i + 1]; e++) {
      value[entries + e] /= most > 0 ? most : 1;
    }
    if (short_of) {
      short_of[m + i] = bent->right[i] / (most > 0 ? most : 1);
    }
  }
  return (struct sparse) { m + bent->count, a->columns, start, column, value };
}

/* What an elimination of all rows leaves open.  */
static struct null_space *
null_of (struct arena *arena, const struct system *system,
         const struct elimination *elimination)
{
  struct arena *scratch = arena_create ();
  struct null_vectors vectors = null_vectors (scratch, system->reduction, elimination,
                                              NULL);
  struct null_space *null = null_space_make (arena, system->columns, &vectors);
  arena_destroy (scratch);
  return null;
}

void
system_step (const struct system *system, const struct rows *bent, const double v[], double d[])
{
  const struct reduction *r = system->reduction;
  struct arena *arena = arena_create ();
  double *short_of = ARENA_ARRAY (arena, r->a.rows + bent->count + 1, double);
  double *w = ARENA_ARRAY (arena, r->a.columns + 1, double);
  struct sparse rows = rows_with_bends (arena, system, bent, v, short_of);
  const struct elimination *elimination = elimination_make (arena, &rows, STEP_CORE);
  elimination_solve (elimination, short_of, w);
  shorten (system, null_of (arena, system, elimination), arena, w);
  memset (d, 0, system->columns * sizeof *d);
  for (size_t j = 0; j < r->a.columns; j++) {
    d[r->column[j]] = w[j] * system->scale[r->column[j]];
  }
  arena_destroy (arena);
}

struct null_space *
system_narrow_wide (struct arena *arena, const struct system *system, const double v[])
{
  struct arena *work = arena_create ();
  struct rows bent = system_bent (work, system, v);
  struct sparse rows = rows_with_bends (work, system, &bent, v, NULL);
  struct null_space *narrow = null_of (arena, system,
                                       elimination_make (work, &rows, REDUCE_CORE));
  arena_destroy (work);
  return narrow;
}
