#include "config.h"
#include "support/quadratic.h"

#include <gsl/gsl_blas.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_linalg.h>
#include <math.h>
#include <string.h>
#include "support/arena.h"
#include "support/vector.h"

/* The dual method of Goldfarb and Idnani, Mathematical Programming 27 (1983) 1-33, section 3:
   from the free least value, the row missed most is taken in, dropping those in the way, until
   none is missed.  With H = L L' and B = L^-1 N (N: the rows in force), the step in the unknowns is
   z = L'^-1 (I - Q Q') L^-1 a  and in the prices  r = R^-1 Q' L^-1 a,  B = Q R.  Q R is made afresh
   for each step: there are few unknowns.                                                        */
struct dual {
  const struct quadratic *q;
  size_t n, active;                 /* rows in force */
  size_t *row;                      /* which, in the order they came in */
  double *sign;                     /* of every row: -1 for an equality met from above */
  double *price;                    /* of those in force */
  double *norm;                     /* of every row */
  gsl_matrix *L;
  double *B, *tau, *z, *r, *w;
};

/* A row is met to this share of its own norm and of the figure it compares with.  */
#define ROW_MET 1e-13
/* What is left of a row beside those in force, as a share, where it depends on them.  */
#define ROW_DEPENDS 1e-11

static const double *
row_of (const struct dual *s, size_t i)
{
  return s->q->a + i * s->n;
}

static bool
is_active (const struct dual *s, size_t i)
{
  for (size_t k = 0; k < s->active; k++)
    if (s->row[k] == i) {
      return true;
    }
  return false;
}

/* How far row I is missed, as a share of its norm, zero if it is met; sets its sign.  */
static double
row_missed (struct dual *s, size_t i, const double d[])
{
  if (is_active (s, i) || !(s->norm[i] > 0)) {
    return 0;
  }
  double off = (vector_dot (s->n, row_of (s, i), d) - s->q->b[i]) / s->norm[i];
  s->sign[i] = i < s->q->equalities && off > 0 ? -1 : 1;
  double missed = -s->sign[i] * off;
  return missed > ROW_MET * fmax (1, fabs (s->q->b[i]) / s->norm[i]) ? missed : 0;
}

/* The row to take in: an equality first, since those never leave, then what is missed most.
   False if all are met.                                                                         */
static bool
choose (struct dual *s, const double d[], size_t *chosen)
{
  double worst = 0;
  for (size_t i = 0; i < s->q->rows && !(worst > 0 && i == s->q->equalities); i++) {
    double missed = row_missed (s, i, d);
    if (missed > worst) {
      worst = missed;
      *chosen = i;
    }
  }
  return worst > 0;
}

/* W = L^-1 a of a row, with its sign.  */
static void
whiten (struct dual *s, size_t i, double w[])
{
  for (size_t k = 0; k < s->n; k++) {
    w[k] = s->sign[i] * row_of (s, i)[k];
  }
  gsl_vector_view v = gsl_vector_view_array (w, s->n);
  gsl_blas_dtrsv (CblasLower, CblasNoTrans, CblasNonUnit, s->L, &v.vector);
}

/* Steps Z and R for the row I; the share of it that the rows in force leave free.  */
static double
steps_for (struct dual *s, size_t i)
{
  size_t n = s->n, q = s->active;
  double *column = s->z;
  for (size_t k = 0; k < q; k++) {
    whiten (s, s->row[k], column);
    for (size_t j = 0; j < n; j++) {
      s->B[j * q + k] = column[j];
    }
  }
  whiten (s, i, s->w);
  double whole = vector_norm (n, s->w);
  memcpy (s->z, s->w, n * sizeof *s->z);
  gsl_vector_view z = gsl_vector_view_array (s->z, n);
  if (q > 0) {
    gsl_matrix_view B = gsl_matrix_view_array (s->B, n, q);
    gsl_vector_view tau = gsl_vector_view_array (s->tau, q), r = gsl_vector_view_array (s->r, q);
    gsl_linalg_QR_decomp (&B.matrix, &tau.vector);
    gsl_linalg_QR_QTvec (&B.matrix, &tau.vector, &z.vector);      /* Q' w */
    memcpy (s->r, s->z, q * sizeof *s->r);
    gsl_matrix_view R = gsl_matrix_submatrix (&B.matrix, 0, 0, q, q);
    gsl_blas_dtrsv (CblasUpper, CblasNoTrans, CblasNonUnit, &R.matrix, &r.vector);
    memset (s->z, 0, q * sizeof *s->z);
    gsl_linalg_QR_Qvec (&B.matrix, &tau.vector, &z.vector);
  }
  double free = vector_norm (n, s->z);
  gsl_blas_dtrsv (CblasLower, CblasTrans, CblasNonUnit, s->L, &z.vector);
  return whole > 0 ? free / whole : 0;
}

static void
drop (struct dual *s, size_t k)
{
  s->active--;
  for (; k < s->active; k++) {
    s->row[k] = s->row[k + 1];
    s->price[k] = s->price[k + 1];
  }
}

/* Takes row I in, dropping what is in the way; false if it contradicts those in force.  */
static bool
take_in (struct dual *s, size_t i, double d[])
{
  double price = 0;
  for (size_t guard = 0; guard <= 2 * s->q->rows; guard++) {
    double share = steps_for (s, i), most = HUGE_VAL, full = HUGE_VAL;
    size_t blocking = s->active;
    for (size_t k = 0; k < s->active; k++)
      if (s->row[k] >= s->q->equalities && s->r[k] > 0 && s->price[k] / s->r[k] < most) {
        most = s->price[k] / s->r[k];
        blocking = k;
      }
    if (share > ROW_DEPENDS && s->active < s->n) {
      double off = s->sign[i] * (vector_dot (s->n, row_of (s, i), d) - s->q->b[i]);
      full = -off / (s->sign[i] * vector_dot (s->n, row_of (s, i), s->z));
    }
    double step = fmin (most, full);
    if (!(step < HUGE_VAL)) {
      return false;
    }
    for (size_t k = 0; full < HUGE_VAL && k < s->n; k++) {
      d[k] += step * s->z[k];
    }
    for (size_t k = 0; k < s->active; k++) {
      s->price[k] -= step * s->r[k];
    }
    price += step;
    if (full <= most) {
      s->row[s->active] = i;
      s->price[s->active++] = price;
      return true;
    }
    drop (s, blocking);
  }
  return false;
}

static bool
solve (struct dual *s, double d[])
{
  const struct quadratic *q = s->q;
  size_t chosen = 0;
  for (size_t i = 0; i < q->rows; i++) {
    s->norm[i] = sqrt (vector_dot (s->n, row_of (s, i), row_of (s, i)));
    s->sign[i] = 1;
    bool held = i < q->equalities ? fabs (q->b[i]) <= ROW_MET : q->b[i] <= ROW_MET;
    if (!(s->norm[i] > 0) && !held) {
      return false;
    }
  }
  for (size_t k = 0; k < s->n; k++) {
    d[k] = -q->g[k];
  }
  gsl_vector_view v = gsl_vector_view_array (d, s->n);
  if (gsl_linalg_cholesky_svx (s->L, &v.vector) != GSL_SUCCESS) {
    return false;
  }
  for (size_t guard = 0; choose (s, d, &chosen); guard++) {
    if (guard > 20 * (q->rows + 1) || !take_in (s, chosen, d)) {
      return false;
    }
  }
  return true;
}

bool
quadratic_least (struct arena *arena, const struct quadratic *q, double d[], double price[])
{
  struct dual s = { .q = q, .n = q->n };
  s.row = ARENA_ARRAY (arena, q->n + 1, size_t);
  s.sign = ARENA_ARRAY (arena, q->rows + 1, double);
  s.norm = ARENA_ARRAY (arena, q->rows + 1, double);
  s.price = ARENA_ARRAY (arena, q->n + 1, double);
  s.B = ARENA_ARRAY (arena, q->n * q->n, double);
  s.tau = ARENA_ARRAY (arena, q->n, double);
  s.z = ARENA_ARRAY (arena, q->n, double);
  s.r = ARENA_ARRAY (arena, q->n + 1, double);
  s.w = ARENA_ARRAY (arena, q->n, double);
  s.L = gsl_matrix_alloc (q->n, q->n);
  bool done = s.L != NULL;
  for (size_t i = 0; done && i < q->n; i++)
    for (size_t k = 0; k < q->n; k++) {
      gsl_matrix_set (s.L, i, k, q->H[i * q->n + k]);
    }
  done = done && gsl_linalg_cholesky_decomp1 (s.L) == GSL_SUCCESS && solve (&s, d);
  gsl_matrix_free (s.L);
  if (!done) {
    return false;
  }
  for (size_t i = 0; i < q->rows; i++) {
    price[i] = 0;
  }
  for (size_t k = 0; k < s.active; k++) {
    price[s.row[k]] = s.sign[s.row[k]] * s.price[k];
  }
  return true;
}
