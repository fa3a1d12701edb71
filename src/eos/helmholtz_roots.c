/* Density at a pressure.

   With pi = p/(rho_r RT) the root is where delta Z(delta) = pi.  It is looked for in ln(delta) by
   Halley's third-order steps (E. Halley, Phil. Trans. 18 (1694) 136-148) from the state of the
   equation cut off behind its second virial coefficient.  Where isotherms have no loop that is
   all.  Where they may have one, the isotherm is walked up from zero: what it meets before it
   first falls is the gas, what it meets last is the dense fluid.                                */
#include "config.h"
#include "eos/helmholtz.h"

#include <math.h>

enum { STEPS_FREE = 12, STEPS_BOUND = 100, STEPS_SPINODAL = 60,
       STEPS_DIP = 12 };

/* A step of third order that was this small leaves an error below 1e-15.  */
static const double step_last = 2e-6;
static const double step_bound = 1e-14;

/* The walk: the first stride over B rho_r, how strides grow, the largest and the least in delta.
   It ends at `densest`, or behind a dense root beyond `liquid`.  Liquids at their triple points are
   at 3 to 3.7.                                                                                  */
static const double stride_first = 0.1, growth = 1.3, stride = 0.05, stride_least = 1e-30;
static const double densest = HELMHOLTZ_DENSEST, liquid = 1.5;

double
helmholtz_densest (const void *isotherm)
{
  const struct helmholtz_isotherm *line = isotherm;

  return densest * line->rho_r;
}

/* B rho_r: the limit of a1/delta.  */
static double
second_virial (const struct helmholtz_isotherm *line)
{
  double B = 0;

  for (int i = 0; i < line->count; i++) {
    B += line->groups[i].c[1];
  }
  return B;
}

static double
virial_start (const struct helmholtz_isotherm *line, double pi)
{
  const double inside = 1 + 4 * second_virial (line) * pi;

  return 2 * pi / (1 + sqrt (fmax (inside, 0)));
}

/* Halley's step in ln(delta) towards ln(delta Z/pi) = 0; NAN where Z is not positive.  */
static double
halley_step (struct helmholtz_value v, double delta, double pi)
{
  const double Z = 1 + v.a1;
  const double f = log (delta * Z / pi);
  const double slope = 1 + v.a2 / Z;
  const double bend = v.a3 / Z - (v.a2 / Z) * (v.a2 / Z);

  return -f / (slope - 0.5 * f * bend / slope);
}

/* Without brackets, for isotherms without a loop.  */
static bool
root_free (const struct helmholtz_isotherm *line, double pi, double *delta, int *steps)
{
  double at = virial_start (line, pi);

  for (int i = 0; i < STEPS_FREE; i++) {
    const struct helmholtz_value v = helmholtz_at (line, at);
    const double step = halley_step (v, at, pi);

    *steps = i + 1;
    if (!(fabs (step) < 1 && 1 + v.a1 + v.a2 > 0)) {
      return false;
    }
    at *= fabs (step) < 1e-3 ? 1 + step * (1 + step * (0.5 + step / 6)) : exp (step);
    if (fabs (step) < step_last) {
      *delta = at;
      return at < densest;
    }
  }
  return false;
}

/* f = delta Z - pi, d(delta Z)/d(delta), and the derivative of that by ln(delta).  */
struct node { double delta, f, slope, bend; };

static struct node
node_at (const struct helmholtz_isotherm *line, double delta, double pi)
{
  const struct helmholtz_value v = helmholtz_at (line, delta);

  return (struct node) { delta, delta * (1 + v.a1) - pi, 1 + v.a1 + v.a2, v.a2 + v.a3 };
}

/* f is below 0 at LOW and not at HIGH: steps as above, halvings where they leave the bracket.  */
static double
root_between (const struct helmholtz_isotherm *line, double pi, double low, double high,
              int *steps)
{
  double at = virial_start (line, pi);

  if (!(at > low && at < high)) {
    at = 0.5 * (low + high);
  }
  for (int i = 0; i < STEPS_BOUND; i++, ++*steps) {
    const struct helmholtz_value v = helmholtz_at (line, at);
    const double step = halley_step (v, at, pi);
    double next = at * exp (step);

    if (at * (1 + v.a1) < pi) {
      low = at;
    } else {
      high = at;
    }
    if (fabs (step) <= step_bound) {
      return next;
    }
    if (!(next > low && next < high)) {
      next = 0.5 * (low + high);
    }
    if (high - low <= step_bound * high) {
      return next;
    }
    at = next;
  }
  return (double) NAN;
}

/* Where the slope changes its sign between two nodes.  */
static struct node
spinodal_between (const struct helmholtz_isotherm *line, double pi, struct node from,
                  struct node to)
{
  struct node middle = to;

  for (int i = 0; i < STEPS_SPINODAL; i++) {
    middle = node_at (line, 0.5 * (from.delta + to.delta), pi);
    if ((middle.slope > 0) == (from.slope > 0)) {
      from = middle;
    } else {
      to = middle;
    }
  }
  return middle;
}

/* Between two nodes with rising slopes: a node where the isotherm falls, if there is one, else TO.
   The slope is smallest where its bend changes from falling to rising.                          */
static struct node
dip_between (const struct helmholtz_isotherm *line, double pi, struct node from, struct node to)
{
  const struct node end = to;

  if (!(from.slope > 0 && to.slope > 0 && from.bend < 0 && to.bend > 0)) {
    return end;
  }
  for (int i = 0; i < STEPS_DIP; i++) {
    const struct node middle = node_at (line, 0.5 * (from.delta + to.delta), pi);

    if (!(middle.slope > 0)) {
      return middle;
    }
    *(middle.bend < 0 ? &from : &to) = middle;
  }
  return end;
}

struct walk {
  struct node last;
  bool fell;
  struct density_roots roots;
};

static void
walk_to (const struct helmholtz_isotherm *line, double pi, struct node next, struct walk *walk)
{
  struct node from = walk->last, to = next;

  if ((from.slope > 0) != (next.slope > 0)) {
    *(from.slope > 0 ? &to : &from) = spinodal_between (line, pi, from, next);
  }
  if ((walk->last.slope > 0 || next.slope > 0) && from.f < 0 && to.f >= 0) {
    *(walk->fell ? &walk->roots.dense : &walk->roots.gas)
      = root_between (line, pi, from.delta, to.delta, &walk->roots.steps);
  }
  walk->fell = walk->fell || !(next.slope > 0);
  walk->last = next;
}

/* The first strides are short, since a gas whose second virial coefficient is B falls at some
   -1/(2 B rho_r) already.                                                                       */
static struct density_roots
roots_by_walk (const struct helmholtz_isotherm *line, double pi)
{
  struct walk walk = { .last = { .delta = 0, .f = -pi, .slope = 1, .bend = 0 } };
  double step = fmax (stride_least, fmin (stride, stride_first / fabs (second_virial (line))));

  while (walk.last.delta < densest && !(walk.roots.dense > liquid)) {
    const struct node next = node_at (line, walk.last.delta + step, pi);
    const struct node dip = dip_between (line, pi, walk.last, next);

    if (dip.delta < next.delta) {
      walk_to (line, pi, dip, &walk);
    }
    walk_to (line, pi, next, &walk);
    step = fmin (stride, growth * step);
  }
  return walk.roots;
}

struct density_roots
helmholtz_roots (const void *isotherm, double p)
{
  const struct helmholtz_isotherm *line = isotherm;
  const double pi = p / (line->rho_r * line->RT);
  struct density_roots roots = { 0, 0, 0 };
  double delta;

  if (!line->may_loop && root_free (line, pi, &delta, &roots.steps)) {
    roots.gas = delta * line->rho_r;
    return roots;
  }
  roots = roots_by_walk (line, pi);
  if (!(roots.gas > 0 || roots.dense > 0)) {
    roots.gas = (double) NAN;
  }
  roots.gas *= line->rho_r;
  roots.dense *= line->rho_r;
  return roots;
}
