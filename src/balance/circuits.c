#include "config.h"
#include "balance/circuits.h"

#include <math.h>
#include <string.h>
#include "support/arena.h"
#include "support/vector.h"

enum { MOST_DIMENSIONS = 32 };
/* Choices of rows that are looked at: a second or so.  */
static const double most_choices = 2e5;
/* Of a row of length 1, what is less than this is nothing.  */
static const double nothing = 1e-7;

struct work {
  size_t rows, k;
  double *row;                   /* different ones, of length 1 */
  double *base;                  /* by depth, K x K each: what is orthogonal to the rows chosen */
  circuit_taker *take;
  void *data;
};

/* Keeps each direction once.  */
static void
different_rows (struct work *work, size_t rows, const double z[])
{
  size_t k = work->k;
  for (size_t i = 0; i < rows; i++) {
    double size = vector_norm (k, &z[i * k]), *next = &work->row[work->rows * k];
    bool again = size <= nothing;
    for (size_t c = 0; c < k && !again; c++) {
      next[c] = z[i * k + c] / size;
    }
    for (size_t other = 0; other < work->rows && !again; other++) {
      again = fabs (vector_dot (k, &work->row[other * k], next)) > 1 - nothing * nothing;
    }
    work->rows += again ? 0 : 1;
  }
}

/* The base, vectors of length K one behind the other, LEFT of them, without what lies along ROW:
   Householder's reflection that takes ROW, in the base, to the first vector leaves the others
   orthogonal to it.  False: nothing lies along it.                                              */
static bool
narrow (size_t k, size_t left, const double base[], const double row[], double out[])
{
  double u[MOST_DIMENSIONS], size = 0, along;
  for (size_t b = 0; b < left; b++) {
    u[b] = vector_dot (k, &base[b * k], row);
    size += u[b] * u[b];
  }
  size = sqrt (size);
  if (size <= nothing) {
    return false;
  }
  u[0] += u[0] < 0 ? -size : size;
  along = vector_dot (left, u, u);
  for (size_t b = 1; b < left; b++) {
    for (size_t c = 0; c < k; c++) {
      double sum = 0;
      for (size_t a = 0; a < left; a++) {
        sum += u[a] * base[a * k + c];
      }
      out[(b - 1) * k + c] = base[b * k + c] - 2 * u[b] * sum / along;
    }
  }
  return true;
}

static void
choose (struct work *work, size_t depth, size_t from)
{
  size_t k = work->k, left = k - depth;
  const double *base = &work->base[depth * k * k];
  if (left == 1) {
    work->take (work->data, base);
    return;
  }
  for (size_t i = from; i < work->rows; i++) {
    if (narrow (k, left, base, &work->row[i * k], &work->base[(depth + 1) * k * k])) {
      choose (work, depth + 1, i + 1);
    }
  }
}

bool
circuits_all (struct arena *arena, size_t rows, size_t k, const double z[], circuit_taker *take,
              void *data)
{
  struct work work = { 0, k, ARENA_ARRAY (arena, (rows + 1) * k, double), NULL, take, data };
  double choices = 1;
  if (k == 0 || k > MOST_DIMENSIONS) {
    return k == 0;
  }
  different_rows (&work, rows, z);
  for (size_t i = 0; i + 1 < k; i++) {
    choices *= (double) (work.rows > i ? work.rows - i : 0) / (double) (i + 1);
  }
  if (choices > most_choices) {
    return false;
  }
  work.base = ARENA_ARRAY (arena, (k + 1) * k * k, double);
  for (size_t c = 0; c < k; c++) {
    work.base[c * k + c] = 1;
  }
  choose (&work, 0, 0);
  return true;
}
