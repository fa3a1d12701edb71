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

/* The facts' rows within the structure's null space, scaled.  */
static const double *
reduced (struct arena *arena, const struct system *system, size_t width, const double base[])
{
  struct rows facts = system->rows;
  double *out;
  facts.start += system->structure;
  facts.count -= system->structure;
  out = system_project (arena, system, &facts, width, base);
  for (size_t i = 0; i < facts.count; i++) {
    for (size_t k = 0; k < width; k++) {
      out[i * width + k] *= system->row_scale[system->structure + i];
    }
  }
  return out;
}

/* The null space of the structure's rows, by column of the network.  */
static const double *
structure_null (struct arena *arena, const struct system *system, size_t *freedom)
{
  size_t n = system->present, at = 0, *place = ARENA_ARRAY (arena, system->columns + 1, size_t);
  double *a = ARENA_ARRAY (arena, system->structure * n + 1, double), *out;
  struct space space;
  for (size_t j = 0; j < system->columns; j++) {
    place[j] = system->absence.absent[j] ? NOWHERE : at++;
  }
  for (size_t i = 0; i < system->structure; i++) {
    for (size_t e = system->rows.start[i]; e < system->rows.start[i + 1]; e++) {
      size_t j = system->rows.column[e];
      a[i * n + place[j]] = system->rows.coefficient[e] * system->scale[j] * system->row_scale[i];
    }
  }
  space = space_make (arena, system->structure, n, a);
  *freedom = n - space.rank;
  out = ARENA_ARRAY (arena, system->columns * *freedom + 1, double);
  for (size_t j = 0; j < system->columns; j++) {
    for (size_t k = 0; place[j] != NOWHERE && k < *freedom; k++) {
      out[j * *freedom + k] = space_null (&space, place[j], k);
    }
  }
  return out;
}

/* N2, the null space in the coordinates of one null space, in those of the network.  */
static const double *
narrowed (struct arena *arena, size_t columns, size_t width, const double null[],
          const struct space *space)
{
  size_t freedom = width - space->rank;
  double *inner = ARENA_ARRAY (arena, width * freedom + 1, double);
  for (size_t j = 0; j < width; j++) {
    for (size_t k = 0; k < freedom; k++) {
      inner[j * freedom + k] = space_null (space, j, k);
    }
  }
  return matrix_product (arena, columns, width, freedom, null, inner);
}

void
system_reduce (struct arena *arena, struct system *system)
{
  size_t width, facts = system->rows.count - system->structure;
  const double *base = structure_null (arena, system, &width);
  double *b = ARENA_ARRAY (arena, facts + 1, double), *w = ARENA_ARRAY (arena, width + 1, double);
  double *v, *left;
  struct space space;
  system->reduced = reduced (arena, system, width, base);
  space = space_make (arena, facts, width, system->reduced);
  for (size_t i = 0; i < facts; i++) {
    b[i] = system->rows.right[system->structure + i] * system->row_scale[system->structure + i];
  }
  space_solve (arena, &space, b, w);
  v = matrix_product (arena, system->columns, width, 1, base, w);
  for (size_t j = 0; j < system->columns; j++) {
    v[j] *= system->scale[j];
  }
  system->surplus = facts - space.rank;
  left = ARENA_ARRAY (arena, facts * system->surplus + 1, double);
  for (size_t i = 0; i < facts; i++) {
    for (size_t k = 0; k < system->surplus; k++) {
      left[i * system->surplus + k] = space_left (&space, i, k);
    }
  }
  system->width = width;
  system->base = base;
  system->left = left;
  system->particular = v;
  system->freedom = width - space.rank;
  system->rank = system->present - system->freedom;
  system->null = narrowed (arena, system->columns, width, base, &space);
}

const double *
system_narrow (struct arena *arena, const struct system *system, const double v[],
               size_t *freedom)
{
  struct rows bent = system_bent (arena, system, v);
  double *h = system_project (arena, system, &bent, system->freedom, system->null);
  struct space space = space_make (arena, bent.count, system->freedom, h);
  *freedom = system->freedom - space.rank;
  return narrowed (arena, system->columns, system->freedom, system->null, &space);
}
