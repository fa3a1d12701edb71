#include "config.h"
#include "support/search_point.h"

#include <math.h>
#include <string.h>
#include "support/arena.h"
#include "support/quadratic.h"

/* Step of the differences, in scales: central ones are good to its square, some 1e-10.  */
#define DIFFERENCE 1e-5

struct settling *
settling_create (const struct search *s, const double start[])
{
  struct settling *t = ARENA_NEW (s->arena, struct settling);
  size_t n = s->n, m = s->m, rows = m + 2 * n;
  *t = (struct settling) { .s = s, .n = n, .m = m, .f_scale = 1 };
  double **of_n[] = { &t->least, &t->most, &t->home, &t->gradient, &t->g, &t->d, &t->x };
  for (size_t i = 0; i < sizeof of_n / sizeof of_n[0]; i++) {
    *of_n[i] = ARENA_ARRAY (s->arena, n, double);
  }
  t->slope = ARENA_ARRAY (s->arena, m * n + 1, double);
  t->H = ARENA_ARRAY (s->arena, n * n, double);
  t->price = ARENA_ARRAY (s->arena, rows, double);
  t->row = ARENA_ARRAY (s->arena, rows * n, double);
  t->bound = ARENA_ARRAY (s->arena, rows, double);
  t->c = ARENA_ARRAY (s->arena, 2 * m + 1, double);
  for (size_t k = 0; k < n; k++) {
    t->least[k] = s->least[k] / s->scale[k];
    t->most[k] = s->most[k] < HUGE_VAL ? s->most[k] / s->scale[k] : HUGE_VAL;
    t->home[k] = start[k] / s->scale[k];
  }
  return t;
}

struct point
point_create (const struct settling *t)
{
  return (struct point) { .y = ARENA_ARRAY (t->s->arena, t->n, double),
                          .c = ARENA_ARRAY (t->s->arena, t->m + 1, double) };
}

void
point_copy (const struct settling *t, struct point *p, const struct point *from)
{
  memcpy (p->y, from->y, t->n * sizeof *p->y);
  memcpy (p->c, from->c, t->m * sizeof *p->c);
  p->f = from->f;
  p->sum = from->sum;
  p->worst = from->worst;
}

/* Without an objective: half the square of the distance from home.  */
static double
distance (const struct settling *t, const double y[])
{
  double sum = 0;
  for (size_t k = 0; k < t->n; k++) {
    sum += (y[k] - t->home[k]) * (y[k] - t->home[k]) / 2;
  }
  return sum;
}

static bool
figures_at (struct settling *t, const double y[], double c[], double *f)
{
  double objective = 0;
  for (size_t k = 0; k < t->n; k++) {
    t->x[k] = y[k] * t->s->scale[k];
    /* An end of the range is met to the last digit.  */
    t->x[k] = y[k] <= t->least[k] ? t->s->least[k] : y[k] >= t->most[k] ? t->s->most[k] : t->x[k];
  }
  if (!t->s->at (t->s->context, t->x, c, &objective) || !isfinite (objective)) {
    return false;
  }
  for (size_t i = 0; i < t->m; i++)
    if (!isfinite (c[i])) {
      return false;
    }
  *f = t->s->has_objective ? objective / t->f_scale : distance (t, y);
  return true;
}

/* A hair's breadth from an end is the end.  */
static double
drawn_in (const struct settling *t, size_t k, double y)
{
  double hair = 1e-13 * fmax (1, fabs (y));
  return y <= t->least[k] + hair ? t->least[k] : y >= t->most[k] - hair ? t->most[k] : y;
}

bool
point_look (struct settling *t, struct point *p, const double y[])
{
  for (size_t k = 0; k < t->n; k++) {
    p->y[k] = drawn_in (t, k, y[k]);
  }
  if (!figures_at (t, p->y, p->c, &p->f)) {
    return false;
  }
  p->sum = p->worst = 0;
  for (size_t i = 0; i < t->m; i++) {
    double miss = search_miss (t->s->one_sided[i], p->c[i]);
    p->sum += miss * miss / 2;
    p->worst = fmax (p->worst, miss);
  }
  return true;
}

/* Figures beside P in unknown K, by BY; false beyond the bounds or without figures.  */
static bool
beside (struct settling *t, const struct point *p, size_t k, double by, double c[], double *f)
{
  double was = p->y[k], moved = was + by;
  if (moved < t->least[k] || moved > t->most[k]) {
    return false;
  }
  p->y[k] = moved;
  bool seen = figures_at (t, p->y, c, f);
  p->y[k] = was;
  return seen;
}

/* Second-order differences: central, or to the one side that there is.  */
static bool
slope_of (struct settling *t, const struct point *p, size_t k)
{
  double h = DIFFERENCE * fmax (1, fabs (p->y[k])), f1, f2;
  double *c1 = t->c, *c2 = t->c + t->m;
  double w0 = 0, w1 = 1 / (2 * h), w2 = -w1;
  bool seen = beside (t, p, k, h, c1, &f1) && beside (t, p, k, -h, c2, &f2);
  for (int side = 0; !seen && side < 2; side++, h = -h) {
    seen = beside (t, p, k, h, c1, &f1) && beside (t, p, k, 2 * h, c2, &f2);
    w0 = -3 / (2 * h);
    w1 = 4 / (2 * h);
    w2 = -1 / (2 * h);
  }
  if (!seen) {
    return false;
  }
  for (size_t i = 0; i < t->m; i++) {
    t->slope[i * t->n + k] = w0 * p->c[i] + w1 * c1[i] + w2 * c2[i];
  }
  t->gradient[k] = w0 * p->f + w1 * f1 + w2 * f2;
  return true;
}

bool
point_slopes (struct settling *t, const struct point *p)
{
  for (size_t k = 0; k < t->n; k++)
    if (!slope_of (t, p, k)) {
      return false;
    }
  return true;
}

/* Equalities first, then what is one-sided, then the bounds: the rows of a quadratic.  ORDER of
   the conditions is kept in the prices.                                                         */
static size_t
rows_of (struct settling *t, const struct point *p, bool none_of_them, size_t order[],
         size_t *equalities)
{
  size_t n = t->n, rows = 0;
  *equalities = 0;
  for (int one_sided = 0; !none_of_them && one_sided < 2; one_sided++)
    for (size_t i = 0; i < t->m; i++) {
      if (t->s->one_sided[i] != (one_sided == 1)) {
        continue;
      }
      memcpy (t->row + rows * n, t->slope + i * n, n * sizeof *t->row);
      t->bound[rows] = -p->c[i];
      order[rows++] = i;
      *equalities += one_sided == 0;
    }
  for (size_t k = 0; k < 2 * n; k++) {
    bool upper = k >= n;
    double end = upper ? t->most[k - n] : t->least[k];
    if (!(fabs (end) < HUGE_VAL)) {
      continue;
    }
    memset (t->row + rows * n, 0, n * sizeof *t->row);
    t->row[rows * n + k % n] = upper ? -1 : 1;
    t->bound[rows] = upper ? p->y[k - n] - end : end - p->y[k];
    order[rows++] = t->m + k;
  }
  return rows;
}

bool
point_step (struct settling *t, const struct point *p, bool none_of_them)
{
  size_t most = t->m + 2 * t->n, equalities;
  size_t *order = ARENA_ARRAY (t->s->arena, most, size_t);
  double *price = ARENA_ARRAY (t->s->arena, most, double);
  size_t rows = rows_of (t, p, none_of_them, order, &equalities);
  struct quadratic q = { t->n, rows, equalities, t->H, t->g, t->row, t->bound };
  if (!quadratic_least (t->s->arena, &q, t->d, price)) {
    return false;
  }
  memset (t->price, 0, most * sizeof *t->price);
  for (size_t i = 0; i < rows; i++) {
    t->price[order[i]] = price[i];
  }
  return true;
}

/* ---- Restoring ---- */

enum { RESTORE_STEPS = 60, HALVINGS = 10 };

/* Tries P + share d; true, and P moved, if the misses are less by it.  */
static bool
move_if_nearer (struct settling *t, struct point *p, struct point *tried, double share)
{
  double *y = ARENA_ARRAY (t->s->arena, t->n, double);
  for (size_t k = 0; k < t->n; k++) {
    y[k] = p->y[k] + share * t->d[k];
  }
  if (!point_look (t, tried, y) || !(tried->sum < p->sum * (1 - 1e-4 * share))) {
    return false;
  }
  point_copy (t, p, tried);
  return true;
}

/* Newton's step: the least move with which all conditions hold as far as they are linear.  What
   stands at an end of its range is left there if the others can do it.                          */
static bool
newton (struct settling *t, struct point *p, struct point *tried)
{
  double share = 1;
  memset (t->H, 0, t->n * t->n * sizeof *t->H);
  memset (t->g, 0, t->n * sizeof *t->g);
  for (size_t k = 0; k < t->n; k++) {
    bool at_end = p->y[k] <= t->least[k] || p->y[k] >= t->most[k];
    t->H[k * t->n + k] = at_end ? 1e8 : 1;
  }
  if (!point_step (t, p, false)) {
    return false;
  }
  for (int i = 0; i < HALVINGS; i++, share /= 2)
    if (move_if_nearer (t, p, tried, share)) {
      return true;
    }
  return false;
}

/* Levenberg's step on the conditions missed, within the bounds; DAMPING grows until it helps.  */
static bool
damped (struct settling *t, struct point *p, struct point *tried, double *damping)
{
  size_t n = t->n;
  for (; *damping < 1e12; *damping *= 10) {
    memset (t->H, 0, n * n * sizeof *t->H);
    memset (t->g, 0, n * sizeof *t->g);
    for (size_t i = 0; i < t->m; i++) {
      const double *row = t->slope + i * n;
      if (t->s->one_sided[i] && !(p->c[i] < 0)) {
        continue;
      }
      for (size_t k = 0; k < n; k++) {
        t->g[k] += row[k] * p->c[i];
        for (size_t j = 0; j < n; j++) {
          t->H[k * n + j] += row[k] * row[j];
        }
      }
    }
    for (size_t k = 0; k < n; k++) {
      t->H[k * n + k] += *damping;
    }
    if (point_step (t, p, true) && move_if_nearer (t, p, tried, 1)) {
      *damping = fmax (*damping / 10, 1e-12);
      return true;
    }
  }
  return false;
}

bool
point_restore (struct settling *t, struct point *p)
{
  struct point tried = point_create (t);
  double damping = 1e-3;
  for (int i = 0; i < RESTORE_STEPS && p->worst > 1e-15; i++) {
    if (!point_slopes (t, p)) {
      return p->worst <= SEARCH_MET;
    }
    if (!newton (t, p, &tried) && (p->worst <= SEARCH_MET || !damped (t, p, &tried, &damping))) {
      break;
    }
  }
  return true;
}
