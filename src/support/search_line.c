#include "config.h"
#include "support/search.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_min.h>
#include <gsl/gsl_roots.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "support/arena.h"

/* One unknown: the whole range is looked at on a grid, every change of sign is closed in on by
   Brent's method, every near miss by Brent's method for a least value (Brent, Algorithms for
   Minimization without Derivatives (1973), chapters 4 and 5, as in GSL).  Between these places
   the conditions do not change, so that the stretches in which all hold are known, and the best
   point is an end of one or a least value within one.

   A range without an upper end is mapped from 0 to 1 by x = least + scale t/(1 - t), which for a
   flow into a stream of the size of the scale makes t its share of the blend.                   */
enum { EVEN = 120, TAIL = 7, GRID_MOST = EVEN + 2 * TAIL + 2, STEPS_MOST = 200, CUTS_MOST = 400 };

/* What counts as the same point, of the unknown's own size or its scale.  */
#define SAME_POINT 1e-12

struct line {
  const struct search *s;
  size_t points, cut_count;
  double x[GRID_MOST], objective[GRID_MOST];
  double *c;                             /* of each point, m */
  double cut[CUTS_MOST];                 /* where some condition may change */
  bool undefined;
  /* What a function handed to GSL looks at.  */
  size_t k;
  double sign;
  double *scratch;
  /* The nearest point seen.  */
  double nearest, nearest_worst;
};

/* ---- Looking at points ---- */

static bool
look (struct line *l, double x, double c[], double *objective)
{
  double worst = 0;
  *objective = 0;
  if (!l->s->at (l->s->context, &x, c, objective)) {
    return false;
  }
  for (size_t k = 0; k < l->s->m; k++) {
    if (!isfinite (c[k])) {
      return false;
    }
    worst = fmax (worst, search_miss (l->s->one_sided[k], c[k]));
  }
  if (!(l->nearest_worst <= worst)) {
    l->nearest_worst = worst;
    l->nearest = x;
  }
  return isfinite (*objective);
}

static bool
holds_at (struct line *l, double x)
{
  double objective;
  if (!look (l, x, l->scratch, &objective)) {
    return false;
  }
  for (size_t k = 0; k < l->s->m; k++)
    if (search_miss (l->s->one_sided[k], l->scratch[k]) > SEARCH_MET) {
      return false;
    }
  return true;
}

/* Condition k, or for k = m the objective, with a sign; a figure for GSL.  */
static double
figure_at (double x, void *context)
{
  struct line *l = context;
  double objective;
  if (!look (l, x, l->scratch, &objective)) {
    l->undefined = true;
    return (double) NAN;
  }
  return l->sign * (l->k < l->s->m ? l->scratch[l->k] : objective);
}

/* ---- The grid ---- */

static int
compare (const void *a, const void *b)
{
  double x = *(const double *) a, y = *(const double *) b;
  return (x > y) - (x < y);
}

static double
point_of (const struct line *l, double t)
{
  double least = l->s->least[0], most = l->s->most[0];
  return most < HUGE_VAL ? least + (most - least) * t : least + l->s->scale[0] * (t / (1 - t));
}

static void
make_grid (struct line *l, double start)
{
  double *x = l->x;
  size_t n = 0;
  bool open = !(l->s->most[0] < HUGE_VAL);
  for (int i = 0; i < EVEN; i++) {
    x[n++] = point_of (l, (double) i / EVEN);
  }
  for (int i = 0; i < TAIL; i++) {
    double t = pow (10, -2 - i);
    x[n++] = point_of (l, t);
    x[n++] = point_of (l, 1 - t);
  }
  if (!open) {
    x[n++] = l->s->most[0];
  }
  x[n++] = fmin (fmax (start, l->s->least[0]), l->s->most[0]);
  qsort (x, n, sizeof *x, compare);
  l->points = 0;
  for (size_t i = 0; i < n; i++)
    if (l->points == 0 || x[i] > x[l->points - 1]) {
      x[l->points++] = x[i];
    }
}

static double *
at_point (struct line *l, size_t i)
{
  return l->c + i * l->s->m;
}

/* Looks at every point of the grid; NAN where there are no figures.  */
static bool
look_at_grid (struct line *l)
{
  bool any = false;
  for (size_t i = 0; i < l->points; i++) {
    if (look (l, l->x[i], at_point (l, i), &l->objective[i])) {
      any = true;
      continue;
    }
    l->objective[i] = (double) NAN;
    for (size_t k = 0; k < l->s->m; k++) {
      at_point (l, i)[k] = (double) NAN;
    }
  }
  return any;
}

static bool
is_same (const struct line *l, double a, double b)
{
  return fabs (a - b) <= SAME_POINT * fmax (fmax (fabs (a), fabs (b)), l->s->scale[0] * 1e-6);
}

/* ---- Closing in ---- */

static void
add_cut (struct line *l, double x)
{
  if (l->cut_count < CUTS_MOST) {
    l->cut[l->cut_count++] = x;
  }
}

/* The root of the figure between A and B, where its signs differ.  */
static bool
close_in (struct line *l, double a, double b, double *root)
{
  gsl_root_fsolver *solver = gsl_root_fsolver_alloc (gsl_root_fsolver_brent);
  gsl_function f = { figure_at, l };
  l->undefined = false;
  bool done = solver && gsl_root_fsolver_set (solver, &f, a, b) == GSL_SUCCESS;
  for (int i = 0; done && i < STEPS_MOST; i++) {
    done = gsl_root_fsolver_iterate (solver) == GSL_SUCCESS && !l->undefined;
    *root = gsl_root_fsolver_root (solver);
    if (gsl_root_test_interval (gsl_root_fsolver_x_lower (solver),
                                gsl_root_fsolver_x_upper (solver), 0, 4 * GSL_DBL_EPSILON)
        == GSL_SUCCESS) {
      break;
    }
  }
  gsl_root_fsolver_free (solver);
  return done;
}

/* The least value of the figure between A and B, with a lower one at MIDDLE.  */
static bool
find_least (struct line *l, double a, double middle, double b, double *x, double *value)
{
  gsl_min_fminimizer *solver = gsl_min_fminimizer_alloc (gsl_min_fminimizer_brent);
  gsl_function f = { figure_at, l };
  l->undefined = false;
  bool done = solver && gsl_min_fminimizer_set (solver, &f, middle, a, b) == GSL_SUCCESS;
  for (int i = 0; done && i < STEPS_MOST; i++) {
    if (gsl_min_fminimizer_iterate (solver) != GSL_SUCCESS || l->undefined) {
      break;
    }
    if (gsl_min_test_interval (gsl_min_fminimizer_x_lower (solver),
                               gsl_min_fminimizer_x_upper (solver), 0, 1e-9) == GSL_SUCCESS) {
      break;
    }
  }
  if (done) {
    *x = gsl_min_fminimizer_x_minimum (solver);
    *value = gsl_min_fminimizer_f_minimum (solver);
  }
  gsl_min_fminimizer_free (solver);
  return done && !l->undefined;
}

static void
add_root (struct line *l, double a, double b)
{
  double root;
  l->sign = 1;
  if (close_in (l, a, b, &root)) {
    add_cut (l, root);
  }
}

/* A condition that comes near zero and turns back: it may touch it, or cross it twice.  */
static void
look_at_turn (struct line *l, size_t i)
{
  double left = at_point (l, i - 1)[l->k], here = at_point (l, i)[l->k];
  double right = at_point (l, i + 1)[l->k], x, value;
  double a = l->x[i - 1], b = l->x[i + 1], sign = left > 0 ? 1 : -1;
  if (!(left * right > 0 && sign * here >= 0 && sign * here < sign * left
        && sign * here < sign * right)) {
    return;
  }
  l->sign = sign;
  if (!find_least (l, a, l->x[i], b, &x, &value)) {
    return;
  }
  if (value < -SEARCH_MET) {
    add_root (l, a, x);
    add_root (l, x, b);
  } else {
    add_cut (l, x);
  }
}

/* The last place with figures between IN, which has them, and OUT, which has not.  */
static double
edge_of_gap (struct line *l, double in, double out)
{
  double objective;
  for (int i = 0; i < STEPS_MOST && !is_same (l, in, out); i++) {
    double middle = in + (out - in) / 2;
    bool seen = look (l, middle, l->scratch, &objective);
    in = seen ? middle : in;
    out = seen ? out : middle;
  }
  return in;
}

static void
find_cuts (struct line *l)
{
  for (l->k = 0; l->k < l->s->m; l->k++) {
    for (size_t i = 0; i + 1 < l->points; i++) {
      double here = at_point (l, i)[l->k], next = at_point (l, i + 1)[l->k];
      if (here == 0 || next == 0) {
        add_cut (l, here == 0 ? l->x[i] : l->x[i + 1]);
      }
      if (here * next < 0) {
        add_root (l, l->x[i], l->x[i + 1]);
      } else if (i > 0) {
        look_at_turn (l, i);
      }
    }
  }
  for (size_t i = 0; i < l->points; i++) {
    bool first = i == 0, last = i + 1 == l->points;
    if (isnan (l->objective[i])) {
      continue;
    }
    if (first || last) {
      add_cut (l, l->x[i]);
    }
    if (!first && isnan (l->objective[i - 1])) {
      add_cut (l, edge_of_gap (l, l->x[i], l->x[i - 1]));
    }
    if (!last && isnan (l->objective[i + 1])) {
      add_cut (l, edge_of_gap (l, l->x[i], l->x[i + 1]));
    }
  }
  qsort (l->cut, l->cut_count, sizeof l->cut[0], compare);
}

/* ---- What holds where ---- */

static void
find_ranges (struct line *l, struct search_finding *out)
{
  out->ranges = ARENA_ARRAY (l->s->arena, 2 * l->cut_count + 1, struct search_range);
  out->range_count = 0;
  for (size_t i = 0; i < l->cut_count; i++) {
    double here = l->cut[i];
    struct search_range *last = out->range_count ? &out->ranges[out->range_count - 1] : NULL;
    if ((!last || !is_same (l, last->most, here)) && holds_at (l, here)) {
      last = &out->ranges[out->range_count++];
      *last = (struct search_range) { here, here, false };
    }
    bool inside = last && is_same (l, last->most, here) && i + 1 < l->cut_count
                  && !is_same (l, here, l->cut[i + 1])
                  && holds_at (l, here + (l->cut[i + 1] - here) / 2);
    if (inside && holds_at (l, l->cut[i + 1])) {
      last->most = l->cut[i + 1];
    }
  }
}

/* Is there nothing to be seen beyond a stretch?  */
static void
find_gaps (struct line *l, struct search_finding *out)
{
  for (size_t i = 0; i < out->range_count; i++) {
    struct search_range *r = &out->ranges[i];
    double beyond = r->most + 1e-9 * fmax (fabs (r->most), l->s->scale[0] * 1e-6), objective;
    r->gap = r->most < l->x[l->points - 1] && !look (l, beyond, l->scratch, &objective);
  }
}

struct choice { double x, objective; bool any; };

static void
consider (struct line *l, double x, struct choice *best)
{
  double objective;
  if (look (l, x, l->scratch, &objective) && (!best->any || objective < best->objective)) {
    *best = (struct choice) { x, objective, true };
  }
}

/* The best of a stretch: its ends, the points of the grid inside, the least values between.  */
static void
look_through (struct line *l, const struct search_range *r, struct choice *best)
{
  consider (l, r->least, best);
  consider (l, r->most, best);
  l->k = l->s->m;
  l->sign = 1;
  for (size_t i = 1; i + 1 < l->points; i++) {
    double x, value, here = l->objective[i];
    if (l->x[i] <= r->least || l->x[i] >= r->most) {
      continue;
    }
    consider (l, l->x[i], best);
    double a = fmax (l->x[i - 1], r->least), b = fmin (l->x[i + 1], r->most);
    if (here < l->objective[i - 1] && here < l->objective[i + 1]
        && find_least (l, a, l->x[i], b, &x, &value)) {
      consider (l, x, best);
    }
  }
}

static double
nearest_in (const struct search_range *r, double x)
{
  return fmin (fmax (x, r->least), r->most);
}

static bool
is_constant (struct line *l)
{
  for (size_t k = 0; k < l->s->m; k++) {
    double least = HUGE_VAL, most = -HUGE_VAL;
    for (size_t i = 0; i < l->points; i++) {
      least = fmin (least, at_point (l, i)[k]);
      most = fmax (most, at_point (l, i)[k]);
    }
    if (!(most - least <= 1e-12 * (1 + fabs (most)))) {
      return false;
    }
  }
  return true;
}

static enum search_end
pick (struct line *l, double start, struct search_finding *out)
{
  double end = l->x[l->points - 1];
  struct choice best = { start, 0, false };
  if (out->range_count == 0) {
    return is_constant (l) ? SEARCH_SINGULAR : SEARCH_UNREACHABLE;
  }
  double distance = HUGE_VAL;
  for (size_t i = 0; i < out->range_count; i++) {
    double near = nearest_in (&out->ranges[i], start);
    if (l->s->has_objective) {
      look_through (l, &out->ranges[i], &best);
    } else if (fabs (near - start) < distance) {
      distance = fabs (near - start);
      best = (struct choice) { near, 0, true };
    }
  }
  out->x[0] = best.x;
  bool open = !(l->s->most[0] < HUGE_VAL);
  if (open && l->s->has_objective && best.x == end) {
    return SEARCH_UNBOUNDED;
  }
  struct search_range *last = &out->ranges[out->range_count - 1];
  last->most = open && last->most == end ? HUGE_VAL : last->most;
  return SEARCH_FOUND;
}

enum search_end
search_line (const struct search *s, double x, struct search_finding *out)
{
  struct line *l = ARENA_NEW (s->arena, struct line);
  l->s = s;
  l->c = ARENA_ARRAY (s->arena, GRID_MOST * s->m, double);
  l->scratch = ARENA_ARRAY (s->arena, s->m, double);
  l->nearest_worst = (double) NAN;
  l->nearest = x;
  *out = (struct search_finding) { .x = ARENA_ARRAY (s->arena, 1, double),
                                   .c = ARENA_ARRAY (s->arena, s->m, double) };
  make_grid (l, x);
  out->x[0] = x;
  if (!look_at_grid (l)) {
    return SEARCH_UNDEFINED;
  }
  find_cuts (l);
  find_ranges (l, out);
  find_gaps (l, out);
  enum search_end end = pick (l, x, out);
  if (end == SEARCH_UNREACHABLE) {
    out->x[0] = l->nearest;
  }
  bool seen = look (l, out->x[0], out->c, &out->objective);
  for (size_t k = 0; seen && k < s->m; k++) {
    out->worst = fmax (out->worst, search_miss (s->one_sided[k], out->c[k]));
  }
  return seen || end != SEARCH_FOUND ? end : SEARCH_UNDEFINED;
}
