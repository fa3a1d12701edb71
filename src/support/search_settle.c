#include "config.h"
#include "support/search.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_linalg.h>
#include <math.h>
#include <string.h>
#include "support/arena.h"
#include "support/search_point.h"

/* Several unknowns.  First a point where all conditions hold: Newton's step by least move, as a
   quadratic problem under the conditions made linear, or where those contradict each other
   Levenberg's (Quarterly of Applied Mathematics 2 (1944) 164) within the bounds.  Then sequential
   quadratic programming along such points: the step from a quadratic model of the Lagrangian with
   Powell's damped update (LNM 630 (1978) 144, eq. 5.9 and 5.10), each
   point tried being restored to the conditions before its objective is compared, as in the
   gradient restoration of Miele, Huang and Heideman (Journal of Optimization Theory and
   Applications 4 (1969) 213).  It ends where no step is left: the conditions of Karush, Kuhn and
   Tucker hold there.  The search is begun at several points, since it finds a nearest best.     */
enum { SETTLE_STEPS = 100, SETTLE_HALVINGS = 25, STARTS = 6 };
#define STEP_LEFT 1e-9                   /* in scales: below it, no step is left */
#define STEP_MOST 10.0                   /* in sizes of the point: a model is trusted so far */
#define FAR 1e7                          /* in scales: the objective gets better without end */

/* ---- The objective ---- */

static double
size_of (const struct settling *t, const double y[])
{
  double size = 1;
  for (size_t k = 0; k < t->n; k++) {
    size = fmax (size, fabs (y[k]));
  }
  return size;
}

/* Gradient of the Lagrangian, with the prices of the last step.  */
static void
lagrangian (const struct settling *t, const double price[], double gradient[])
{
  for (size_t k = 0; k < t->n; k++) {
    gradient[k] = t->gradient[k];
    for (size_t i = 0; i < t->m; i++) {
      gradient[k] -= price[i] * t->slope[i * t->n + k];
    }
  }
}

/* Powell's damped update of H by a move S and what the gradient changed by, Q.  */
static void
update_model (const struct settling *t, double H[], const double s[], const double q[])
{
  size_t n = t->n;
  double *Hs = ARENA_ARRAY (t->s->arena, n, double), sHs = 0, sq = 0, sr = 0;
  for (size_t k = 0; k < n; k++) {
    for (size_t j = 0; j < n; j++) {
      Hs[k] += H[k * n + j] * s[j];
    }
    sHs += s[k] * Hs[k];
    sq += s[k] * q[k];
  }
  if (!(sHs > 0)) {
    return;
  }
  double theta = sq >= 0.2 * sHs ? 1 : 0.8 * sHs / (sHs - sq);
  double *r = ARENA_ARRAY (t->s->arena, n, double);
  for (size_t k = 0; k < n; k++) {
    r[k] = theta * q[k] + (1 - theta) * Hs[k];
    sr += s[k] * r[k];
  }
  for (size_t k = 0; sr > 0 && k < n; k++)
    for (size_t j = 0; j < n; j++) {
      H[k * n + j] += r[k] * r[j] / sr - Hs[k] * Hs[j] / sHs;
    }
}

struct descent { double *H, *prices, *before, *step, *y; struct point tried; };

/* Moves P by as much of the step as lessens the objective at a point where all holds.  */
static bool
descend (struct settling *t, struct descent *w, struct point *p)
{
  double fall = 0, longest = 0, share = 1;
  for (size_t k = 0; k < t->n; k++) {
    w->step[k] = t->d[k];
    fall += t->gradient[k] * t->d[k];
    longest = fmax (longest, fabs (t->d[k]));
  }
  double size = size_of (t, p->y);
  if (longest <= STEP_LEFT * size || !(fall < 0)) {
    return false;
  }
  share = fmin (1, STEP_MOST * size / longest);
  for (int i = 0; i < SETTLE_HALVINGS; i++, share /= 2) {
    for (size_t k = 0; k < t->n; k++) {
      w->y[k] = p->y[k] + share * w->step[k];
    }
    if (point_look (t, &w->tried, w->y) && point_restore (t, &w->tried)
        && w->tried.worst <= SEARCH_MET && w->tried.f < p->f + 1e-4 * share * fall) {
      for (size_t k = 0; k < t->n; k++) {
        w->step[k] = w->tried.y[k] - p->y[k];
      }
      point_copy (t, p, &w->tried);
      return true;
    }
  }
  return false;
}

static enum search_end
settle_best (struct settling *t, struct point *p)
{
  size_t n = t->n;
  struct arena *arena = t->s->arena;
  struct descent w = { ARENA_ARRAY (arena, n * n, double),
                       ARENA_ARRAY (arena, t->m + 2 * n, double), ARENA_ARRAY (arena, n, double),
                       ARENA_ARRAY (arena, n, double), ARENA_ARRAY (arena, n, double),
                       point_create (t) };
  double *after = ARENA_ARRAY (arena, n, double);
  for (size_t k = 0; k < n; k++) {
    w.H[k * n + k] = 1;
  }
  for (int i = 0; i < SETTLE_STEPS; i++) {
    if (!point_slopes (t, p)) {
      return SEARCH_UNDEFINED;
    }
    if (i > 0) {
      lagrangian (t, w.prices, after);
      for (size_t k = 0; k < n; k++) {
        after[k] -= w.before[k];
      }
      update_model (t, w.H, w.step, after);
    }
    memcpy (t->H, w.H, n * n * sizeof *t->H);
    memcpy (t->g, t->gradient, n * sizeof *t->g);
    if (!point_step (t, p, false)) {
      break;
    }
    memcpy (w.prices, t->price, (t->m + 2 * n) * sizeof *w.prices);
    lagrangian (t, w.prices, w.before);
    if (!descend (t, &w, p)) {
      break;
    }
    if (size_of (t, p->y) > FAR) {
      return SEARCH_UNBOUNDED;
    }
  }
  return SEARCH_FOUND;
}

/* ---- Starting points ---- */

/* The I-th number of van der Corput's sequence to BASE (Halton, Numerische Mathematik 2 (1960)
   84): points that fill a range evenly.                                                         */
static double
spread (size_t i, size_t base)
{
  double value = 0, share = 1;
  for (; i > 0; i /= base) {
    share /= (double) base;
    value += share * (double) (i % base);
  }
  return value;
}

static void
start_at (const struct settling *t, size_t i, double y[])
{
  static const size_t primes[] = { 2, 3, 5, 7, 11, 13 };
  for (size_t k = 0; k < t->n; k++) {
    double share = spread (i, primes[k % 6]);
    y[k] = i == 0 ? t->home[k]
           : t->most[k] < HUGE_VAL ? t->least[k] + share * (t->most[k] - t->least[k])
           : t->least[k] + share / (1 - share);
  }
}

/* ---- As many conditions as unknowns ---- */

static size_t
equalities_of (const struct search *s)
{
  size_t count = 0;
  for (size_t i = 0; i < s->m; i++) {
    count += !s->one_sided[i];
  }
  return count;
}

/* Do the unknowns move the equalities each on its own?  By the singular values of the slopes.  */
static bool
is_regular (struct settling *t, const struct point *p)
{
  size_t n = t->n, rows = 0;
  gsl_matrix *a = gsl_matrix_calloc (n, n), *v = gsl_matrix_alloc (n, n);
  gsl_vector *values = gsl_vector_alloc (n), *work = gsl_vector_alloc (n);
  bool regular = a && v && values && work && point_slopes (t, p);
  for (size_t i = 0; regular && i < t->m; i++) {
    for (size_t k = 0; !t->s->one_sided[i] && k < n; k++) {
      gsl_matrix_set (a, rows, k, t->slope[i * n + k]);
    }
    rows += !t->s->one_sided[i];
  }
  regular = regular && gsl_linalg_SV_decomp (a, v, values, work) == GSL_SUCCESS
            && gsl_vector_get (values, n - 1) > 1e-9 * gsl_vector_get (values, 0);
  gsl_matrix_free (a);
  gsl_matrix_free (v);
  gsl_vector_free (values);
  gsl_vector_free (work);
  return regular;
}

static bool
is_same_point (const struct settling *t, const double x[], const double y[])
{
  for (size_t k = 0; k < t->n; k++)
    if (fabs (x[k] - y[k] * t->s->scale[k]) > 1e-7 * t->s->scale[k] * fmax (1, fabs (y[k]))) {
      return false;
    }
  return true;
}

static void
to_units (const struct settling *t, const double y[], double x[])
{
  for (size_t k = 0; k < t->n; k++) {
    x[k] = y[k] <= t->least[k] ? t->s->least[k] : y[k] >= t->most[k] ? t->s->most[k]
           : y[k] * t->s->scale[k];
  }
}

static void
note_other (const struct settling *t, const struct point *p, struct search_finding *out)
{
  bool known = is_same_point (t, out->x, p->y);
  for (size_t i = 0; i < out->other_count; i++) {
    known = known || is_same_point (t, out->others[i], p->y);
  }
  if (!known) {
    double *x = ARENA_ARRAY (t->s->arena, t->n, double);
    to_units (t, p->y, x);
    out->others[out->other_count++] = x;
  }
}

/* ---- All of it ---- */

struct outcome { struct point best, nearest; bool found, seen; enum search_end end; };

/* From one starting point.  */
static void
settle_from (struct settling *t, const double y[], struct outcome *o, struct search_finding *out)
{
  struct point p = point_create (t);
  bool square = equalities_of (t->s) == t->n;
  if (!point_look (t, &p, y) || !point_restore (t, &p)) {
    return;
  }
  if (!o->seen || p.worst < o->nearest.worst) {
    point_copy (t, &o->nearest, &p);
    o->seen = true;
  }
  if (p.worst > SEARCH_MET) {
    return;
  }
  if (!square && t->s->has_objective) {
    t->f_scale = 1;
    if (!point_look (t, &p, p.y)) {
      return;
    }
    t->f_scale = fabs (p.f) > 0 ? fabs (p.f) : 1;
    p.f /= t->f_scale;
  }
  enum search_end end = square ? SEARCH_FOUND : settle_best (t, &p);
  if (end == SEARCH_UNDEFINED) {
    return;
  }
  p.f *= t->f_scale;
  t->f_scale = 1;
  if (o->found && square) {
    to_units (t, o->best.y, out->x);
    note_other (t, &p, out);
  } else if (!o->found || end == SEARCH_UNBOUNDED
             || p.f < o->best.f - 1e-9 * fmax (1e-300, fabs (o->best.f))) {
    point_copy (t, &o->best, &p);
    o->end = o->end == SEARCH_UNBOUNDED ? o->end : end;
  }
  o->found = true;
}

enum search_end
search_settle (const struct search *s, const double x[], struct search_finding *out)
{
  struct settling *t = settling_create (s, x);
  struct outcome o = { .best = point_create (t), .nearest = point_create (t) };
  double *y = ARENA_ARRAY (s->arena, s->n, double);
  *out = (struct search_finding) { .x = ARENA_ARRAY (s->arena, s->n, double),
                                   .c = ARENA_ARRAY (s->arena, s->m + 1, double),
                                   .others = ARENA_ARRAY (s->arena, STARTS, double *) };
  o.end = SEARCH_FOUND;
  for (size_t i = 0; i < STARTS; i++) {
    start_at (t, i, y);
    settle_from (t, y, &o, out);
  }
  if (!o.seen) {
    memcpy (out->x, x, s->n * sizeof *x);
    return SEARCH_UNDEFINED;
  }
  const struct point *p = o.found ? &o.best : &o.nearest;
  to_units (t, p->y, out->x);
  memcpy (out->c, p->c, s->m * sizeof *p->c);
  out->objective = p->f;
  out->worst = p->worst;
  /* Short of the aims the slopes may well be spent; at the start they should not.  */
  if (!o.found && !point_look (t, &o.best, t->home)) {
    return SEARCH_UNREACHABLE;
  }
  if (equalities_of (s) == s->n && !is_regular (t, &o.best)) {
    return SEARCH_SINGULAR;
  }
  return o.found ? o.end : SEARCH_UNREACHABLE;
}
