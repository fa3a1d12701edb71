/* The dense way: C' P = Q R splits the space of moves into what C fixes and its null space N; the
   rows of G N split N again into what is settled (orthonormal basis V) and what is open; what is
   left is a plain least squares problem of full rank, H = G N V = Q R.

   Lawson, Hanson, Solving Least Squares Problems (1974), chapter 20; Swartz (1989) for
   reconciliation.  Householder QR with pivoting by GSL.  No Q is ever formed.                   */
#include "config.h"
#include "balance/factor_way.h"

#include <assert.h>
#include <math.h>
#include <string.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_linalg.h>
#include "support/arena.h"

/* Orthonormal bases of the span of COUNT vectors of SIZE places (the first `rank` columns of Q) and
   of its complement (the others).  `qr` is size x count, by rows, packed as GSL does.            */
struct basis {
  size_t size, count, rank;
  double *qr, *tau;
  size_t *order;
};

struct dense {
  struct factor head;
  const double *scale, *exact_scale;     /* by unknown; by exact row */
  struct sparse measured;
  struct basis exact, settled, least;    /* least: of H itself, full rank */
};

static size_t
lesser (size_t a, size_t b)
{
  return a < b ? a : b;
}

/* Sizes are right by construction, and nothing else can go wrong.  */
static void
succeeds (int status)
{
  assert (status == GSL_SUCCESS);
  (void) status;
}

/* ---- A basis ---- */

/* Takes the columns of VECTORS, size x count, apart in place.  */
static struct basis
basis_make (struct arena *arena, size_t size, size_t count, double *vectors)
{
  struct basis basis = { size, count, 0, vectors, NULL, NULL };
  size_t most = lesser (size, count);
  if (most == 0) {
    return basis;
  }
  basis.tau = ARENA_ARRAY (arena, most, double);
  basis.order = ARENA_ARRAY (arena, count, size_t);
  int sign;
  gsl_permutation order = { count, basis.order };
  gsl_matrix_view A = gsl_matrix_view_array (vectors, size, count);
  gsl_vector_view tau = gsl_vector_view_array (basis.tau, most);
  gsl_vector_view norm = gsl_vector_view_array (ARENA_ARRAY (arena, count, double), count);
  succeeds (gsl_linalg_QRPT_decomp (&A.matrix, &tau.vector, &order, &sign, &norm.vector));
  double zero = FACTOR_ZERO * fabs (vectors[0]);
  while (basis.rank < most && fabs (vectors[basis.rank * count + basis.rank]) > zero) {
    basis.rank++;
  }
  return basis;
}

/* X = Q' X, or Q X.  */
static void
basis_turn (const struct basis *basis, bool back, double x[])
{
  if (!basis->tau) {
    return;                              /* Q is the unit matrix */
  }
  gsl_matrix_const_view QR = gsl_matrix_const_view_array (basis->qr, basis->size, basis->count);
  gsl_vector_const_view tau
    = gsl_vector_const_view_array (basis->tau, lesser (basis->size, basis->count));
  gsl_vector_view v = gsl_vector_view_array (x, basis->size);
  if (back) {
    succeeds (gsl_linalg_QR_Qvec (&QR.matrix, &tau.vector, &v.vector));
  } else {
    succeeds (gsl_linalg_QR_QTvec (&QR.matrix, &tau.vector, &v.vector));
  }
}

/* Solves R1' x = P'b: what B says of the vectors in terms of the basis.  */
static void
basis_of_vectors (const struct basis *basis, const double b[], double x[])
{
  for (size_t i = 0; i < basis->rank; i++) {
    double sum = b[basis->order[i]];
    for (size_t k = 0; k < i; k++) {
      sum -= basis->qr[k * basis->count + i] * x[k];
    }
    x[i] = sum / basis->qr[i * basis->count + i];
  }
}

/* Solves R1 P'x = b, the places beyond the rank zero.  */
static void
basis_solve (const struct basis *basis, const double b[], double x[])
{
  memset (x, 0, basis->count * sizeof *x);
  for (size_t i = basis->rank; i-- > 0;) {
    double sum = b[i];
    for (size_t k = i + 1; k < basis->rank; k++) {
      sum -= basis->qr[i * basis->count + k] * x[basis->order[k]];
    }
    x[basis->order[i]] = sum / basis->qr[i * basis->count + i];
  }
}

/* ---- The factor ---- */

static void
solve (const struct factor *factor, struct arena *scratch, const double c[], const double e[],
       double d[])
{
  const struct dense *dense = (const struct dense *) factor;
  size_t n = factor->unknowns, m = dense->measured.count, r = dense->exact.rank;
  double *b = ARENA_ARRAY (scratch, dense->exact.count + 1, double);
  double *rest = ARENA_ARRAY (scratch, m + 1, double), *z = ARENA_ARRAY (scratch, n, double);
  for (size_t i = 0; i < dense->exact.count; i++) {
    b[i] = c[i] / dense->exact_scale[i];
  }
  memset (d, 0, n * sizeof *d);
  basis_of_vectors (&dense->exact, b, d);
  basis_turn (&dense->exact, true, d);
  for (size_t k = 0; k < n; k++) {
    d[k] *= dense->scale[k];
  }
  sparse_times (&dense->measured, d, rest);
  for (size_t i = 0; i < m; i++) {
    rest[i] = e[i] - rest[i];
  }
  if (factor->rank > 0) {
    basis_turn (&dense->least, false, rest);
    basis_solve (&dense->least, rest, z + r);
    basis_turn (&dense->settled, true, z + r);
    basis_turn (&dense->exact, true, z);
  }
  for (size_t k = 0; k < n; k++) {
    d[k] += dense->scale[k] * z[k];
  }
}

static double
norm_of (const double x[], size_t count)
{
  double norm = 0;
  for (size_t i = 0; i < count; i++) {
    norm = hypot (norm, x[i]);
  }
  return norm;
}

/* X, a gradient, in terms of the bases: what C fixes, what is settled, what is open.  */
static void
turn_gradient (const struct dense *dense, double x[])
{
  basis_turn (&dense->exact, false, x);
  basis_turn (&dense->settled, false, x + dense->exact.rank);
}

static bool
spread (const struct factor *factor, struct arena *arena, const struct sparse *forms, size_t i,
        struct spread *out)
{
  const struct dense *dense = (const struct dense *) factor;
  size_t n = factor->unknowns, q = factor->rank, r = dense->exact.rank;
  double *x = ARENA_ARRAY (arena, n, double);
  for (size_t k = forms->start[i]; k < forms->start[i + 1]; k++) {
    x[forms->column[k]] += forms->coefficient[k] * dense->scale[forms->column[k]];
  }
  double size = norm_of (x, n);
  turn_gradient (dense, x);
  if (norm_of (x + r + q, n - r - q) > FACTOR_SETTLED * size) {
    return false;
  }
  *out = (struct spread) { q, ARENA_ARRAY (arena, q + 1, size_t),
                           ARENA_ARRAY (arena, q + 1, double) };
  for (size_t k = 0; k < q; k++) {
    out->place[k] = k;
  }
  if (q > 0) {
    basis_of_vectors (&dense->least, x + r, out->part);
  }
  return true;
}

/* The squares of the rows of Q, the first RANK columns.  */
static void
leverages (const struct factor *factor, struct arena *scratch, double h[])
{
  const struct dense *dense = (const struct dense *) factor;
  size_t m = dense->measured.count;
  double *column = ARENA_ARRAY (scratch, m + 1, double);
  memset (h, 0, m * sizeof *h);
  for (size_t k = 0; k < factor->rank; k++) {
    memset (column, 0, m * sizeof *column);
    column[k] = 1;
    basis_turn (&dense->least, true, column);
    for (size_t i = 0; i < m; i++) {
      h[i] += column[i] * column[i];
    }
  }
}

static void
open_move (const struct factor *factor, struct arena *scratch, unsigned seed, double d[])
{
  const struct dense *dense = (const struct dense *) factor;
  size_t n = factor->unknowns, r = dense->exact.rank;
  (void) scratch;
  for (size_t k = 0; k < n; k++) {
    double x = factor_random (&seed);
    d[k] = k < r + factor->rank ? 0 : x;
  }
  basis_turn (&dense->settled, true, d + r);
  basis_turn (&dense->exact, true, d);
  for (size_t k = 0; k < n; k++) {
    d[k] *= dense->scale[k];
  }
}

static const struct factor_way dense_way = { solve, open_move, spread, leverages };

static void
take_exact_apart (struct arena *arena, const struct linearised *equations, struct dense *dense)
{
  const struct sparse *C = &equations->exact;
  size_t n = equations->unknowns;
  double *columns = ARENA_ARRAY (arena, n * C->count + 1, double);
  double *size = ARENA_ARRAY (arena, C->count + 1, double);
  for (size_t i = 0; i < C->count; i++) {
    size[i] = sparse_row_size (C, i, equations->scale);
    for (size_t k = C->start[i]; k < C->start[i + 1]; k++) {
      size_t j = C->column[k];
      columns[j * C->count + i] += C->coefficient[k] * equations->scale[j] / size[i];
    }
  }
  dense->exact_scale = size;
  dense->exact = basis_make (arena, n, C->count, columns);
}

/* G N by rows, n - rank places each.  */
static double *
measured_in_null_space (struct arena *arena, const struct linearised *equations,
                        const struct dense *dense)
{
  const struct sparse *G = &equations->measured;
  size_t n = equations->unknowns, r = dense->exact.rank, p = n - r;
  double *out = ARENA_ARRAY (arena, G->count * p + 1, double), *x = ARENA_ARRAY (arena, n, double);
  for (size_t i = 0; i < G->count; i++) {
    memset (x, 0, n * sizeof *x);
    for (size_t k = G->start[i]; k < G->start[i + 1]; k++) {
      x[G->column[k]] += G->coefficient[k] * equations->scale[G->column[k]];
    }
    basis_turn (&dense->exact, false, x);
    memcpy (out + i * p, x + r, p * sizeof *x);
  }
  return out;
}

/* What is settled is a matter of directions, so every row counts with the same size; a row that
   C fixes has none.  */
static void
take_measured_apart (struct arena *arena, const struct linearised *equations, struct dense *dense)
{
  const struct sparse *G = &equations->measured;
  size_t p = equations->unknowns - dense->exact.rank, m = G->count;
  double *gn = measured_in_null_space (arena, equations, dense);
  double *columns = ARENA_ARRAY (arena, p * m + 1, double);
  for (size_t i = 0; i < m; i++) {
    double size = norm_of (gn + i * p, p);
    double whole = sparse_row_size (G, i, equations->scale);
    for (size_t k = 0; k < p; k++) {
      columns[k * m + i] = size > FACTOR_ZERO * whole ? gn[i * p + k] / size : 0;
    }
  }
  dense->settled = basis_make (arena, p, m, columns);
  size_t q = dense->settled.rank;
  double *h = ARENA_ARRAY (arena, m * q + 1, double);
  for (size_t i = 0; i < m; i++) {
    if (p > 0) {
      basis_turn (&dense->settled, false, gn + i * p);
      memcpy (h + i * q, gn + i * p, q * sizeof *h);
    }
  }
  dense->least = basis_make (arena, m, q, h);
  dense->least.rank = q;                 /* however far apart the weights are */
}

const struct factor *
factor_make_dense (struct arena *arena, const struct linearised *equations)
{
  struct dense *dense = ARENA_NEW (arena, struct dense);
  size_t n = equations->unknowns;
  dense->scale = memcpy (ARENA_ARRAY (arena, n, double), equations->scale, n * sizeof (double));
  dense->measured = sparse_copy (arena, &equations->measured);
  take_exact_apart (arena, equations, dense);
  take_measured_apart (arena, equations, dense);
  size_t rank = dense->settled.rank;
  dense->head = (struct factor) { &dense_way, n, rank, n - dense->exact.rank - rank };
  return &dense->head;
}
