#include "config.h"
#include "balance/rank.h"

#include <assert.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_linalg.h>
#include <gsl/gsl_matrix.h>
#include <math.h>
#include <string.h>
#include "support/arena.h"

static const double tolerance = 1e-10;

/* The largest norm of a column: the first pivot.  */
static double
largest_column (size_t rows, size_t columns, const double a[])
{
  double largest = 0;
  for (size_t j = 0; j < columns; j++) {
    double sum = 0;
    for (size_t i = 0; i < rows; i++) {
      sum += a[i * columns + j] * a[i * columns + j];
    }
    largest = fmax (largest, sqrt (sum));
  }
  return largest;
}

static double *
identity (struct arena *arena, size_t n)
{
  double *one = ARENA_ARRAY (arena, n * n + 1, double);
  for (size_t i = 0; i < n; i++) {
    one[i * n + i] = 1;
  }
  return one;
}

/* The rows of Z back in the order of the columns of A.  */
static double *
unpermuted (struct arena *arena, size_t n, const double z[], const gsl_permutation *p)
{
  double *out = ARENA_ARRAY (arena, n * n, double);
  for (size_t i = 0; i < n; i++) {
    memcpy (&out[gsl_permutation_get (p, i) * n], &z[i * n], n * sizeof *out);
  }
  return out;
}

static void
factor (struct arena *arena, struct space *space, double work[])
{
  size_t m = space->rows, n = space->columns, least = m < n ? m : n;
  double *q = ARENA_ARRAY (arena, m * m, double), *r = ARENA_ARRAY (arena, m * n, double);
  double *z = ARENA_ARRAY (arena, n * n, double), *upper = ARENA_ARRAY (arena, n * n, double);
  double *spare = ARENA_ARRAY (arena, 2 * least + n, double);
  size_t *order = ARENA_ARRAY (arena, n, size_t);
  gsl_matrix_view a = gsl_matrix_view_array (work, m, n);
  gsl_matrix_view Q = gsl_matrix_view_array (q, m, m), R = gsl_matrix_view_array (r, m, n);
  gsl_matrix_view Z = gsl_matrix_view_array (z, n, n);
  gsl_vector_view tau_q = gsl_vector_view_array (spare, least);
  gsl_vector_view tau_z = gsl_vector_view_array (spare + least, least);
  gsl_vector_view room = gsl_vector_view_array (spare + 2 * least, n);
  gsl_permutation p = { n, order };
  double largest = largest_column (m, n, work);
  int failed = gsl_linalg_COD_decomp_e (&a.matrix, &tau_q.vector, &tau_z.vector, &p,
                                        tolerance * largest, &space->rank, &room.vector);
  for (size_t i = 0; i < space->rank; i++) {
    space->least = fmin (space->least, fabs (work[i * n + i]) / largest);
  }
  failed = failed || gsl_linalg_COD_unpack (&a.matrix, &tau_q.vector, &tau_z.vector, space->rank,
                                            &Q.matrix, &R.matrix, &Z.matrix);
  assert (!failed);
  for (size_t i = 0; i < space->rank; i++) {
    memcpy (&upper[i * n], &r[i * n], n * sizeof *upper);
  }
  space->q = q;
  space->r = upper;
  space->z = unpermuted (arena, n, z, &p);
}

struct space
space_make (struct arena *arena, size_t rows, size_t columns, const double a[])
{
  struct space space = { .rows = rows, .columns = columns, .least = 1 };
  double *work = ARENA_ARRAY (arena, rows * columns + 1, double);
  if (rows * columns > 0) {
    memcpy (work, a, rows * columns * sizeof *work);
  }
  if (rows == 0 || columns == 0 || !(largest_column (rows, columns, a) > 0)) {
    space.q = identity (arena, rows);
    space.z = identity (arena, columns);
  } else {
    factor (arena, &space, work);
  }
  return space;
}

double
space_null (const struct space *space, size_t j, size_t k)
{
  return space->z[j * space->columns + space->rank + k];
}

double
space_left (const struct space *space, size_t i, size_t k)
{
  return space->q[i * space->rows + space->rank + k];
}

void
space_solve (struct arena *arena, const struct space *space, const double b[], double x[])
{
  size_t n = space->columns, rank = space->rank;
  double *y = ARENA_ARRAY (arena, rank + 1, double);
  for (size_t k = rank; k-- > 0;) {
    for (size_t i = 0; i < space->rows; i++) {
      y[k] += space->q[i * space->rows + k] * b[i];
    }
    for (size_t j = k + 1; j < rank; j++) {
      y[k] -= space->r[k * n + j] * y[j];
    }
    y[k] /= space->r[k * n + k];
  }
  for (size_t j = 0; j < n; j++) {
    x[j] = 0;
    for (size_t k = 0; k < rank; k++) {
      x[j] += space->z[j * n + k] * y[k];
    }
  }
}

/* A column with what goes along with it behind it; nothing but zeros outside FROM and TO.  */
struct column { double *x; size_t from, to; };

static double
column_dot (const struct column *a, const struct column *b, size_t rows)
{
  size_t from = a->from > b->from ? a->from : b->from, to = a->to < b->to ? a->to : b->to;
  double sum[4] = { 0 };                 /* four at once: none waits for the other */
  to = to < rows ? to : rows;
  for (; from + 4 <= to; from += 4) {
    for (size_t i = 0; i < 4; i++) {
      sum[i] += a->x[from + i] * b->x[from + i];
    }
  }
  for (; from < to; from++) {
    sum[0] += a->x[from] * b->x[from];
  }
  return sum[0] + sum[1] + (sum[2] + sum[3]);
}

static void
column_add (struct column *a, double factor, const struct column *b)
{
  if (fabs (factor) > 0) {
    a->from = a->from < b->from ? a->from : b->from;
    a->to = a->to > b->to ? a->to : b->to;
    for (size_t i = b->from; i < b->to; i++) {
      a->x[i] += factor * b->x[i];
    }
  }
}

static void
column_scale (struct column *a, double factor)
{
  for (size_t i = a->from; i < a->to; i++) {
    a->x[i] *= factor;
  }
}

static void
columns_read (struct arena *arena, struct column v[], size_t columns, size_t stride, size_t rows,
              const double a[], size_t more, const double along[])
{
  for (size_t k = 0; k < columns; k++) {
    v[k] = (struct column) { ARENA_ARRAY (arena, rows + more + 1, double), rows + more, 0 };
    for (size_t i = 0; i < rows + more; i++) {
      v[k].x[i] = i < rows ? a[i * stride + k] : along[(i - rows) * stride + k];
      if (fabs (v[k].x[i]) > 0) {
        v[k].from = i < v[k].from ? i : v[k].from;
        v[k].to = i + 1;
      }
    }
    double size = sqrt (column_dot (&v[k], &v[k], rows + more));
    column_scale (&v[k], size > 0 ? 1 / size : 0);
  }
}

/* The longest of those from FIRST on, the first of them; how long it is.  */
static double
columns_longest (const struct column v[], size_t first, size_t columns, size_t rows, size_t *best)
{
  double most = 0;
  *best = first;
  for (size_t k = first; k < columns; k++) {
    double size = column_dot (&v[k], &v[k], rows);
    *best = size > most ? k : *best;
    most = fmax (most, size);
  }
  return sqrt (most);
}

size_t
columns_orthonormal (size_t rows, size_t columns, size_t stride, double a[], size_t more,
                     double along[], bool (*interrupted) (void))
{
  struct arena *arena = arena_create ();
  struct column *v = ARENA_ARRAY (arena, columns + 1, struct column);
  size_t done = 0, best;
  columns_read (arena, v, columns, stride, rows, a, more, along);
  while (done < columns && !(interrupted && interrupted ())
         && columns_longest (v, done, columns, rows, &best) > tolerance) {
    struct column now = v[best];
    v[best] = v[done];
    for (size_t k = 0; k < done; k++) {          /* for the second time */
      column_add (&now, -column_dot (&v[k], &now, rows), &v[k]);
    }
    column_scale (&now, 1 / sqrt (column_dot (&now, &now, rows)));
    v[done++] = now;
    for (size_t k = done; k < columns; k++) {
      column_add (&v[k], -column_dot (&now, &v[k], rows), &now);
    }
  }
  for (size_t k = 0; k < columns; k++) {
    for (size_t i = 0; i < rows + more; i++) {
      *(i < rows ? &a[i * stride + k] : &along[(i - rows) * stride + k]) = v[k].x[i];
    }
  }
  arena_destroy (arena);
  return done;
}

double *
matrix_product (struct arena *arena, size_t count, size_t n, size_t width, const double in[],
                const double m[])
{
  double *out = ARENA_ARRAY (arena, count * width + 1, double);
  for (size_t i = 0; i < count; i++) {
    for (size_t j = 0; j < n; j++) {
      double factor = in[i * n + j];
      for (size_t k = 0; k < width && fabs (factor) > 0; k++) {
        out[i * width + k] += factor * m[j * width + k];
      }
    }
  }
  return out;
}
