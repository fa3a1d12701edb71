#include "config.h"
#include "balance/descent.h"

#include <math.h>
#include <string.h>
#include "balance/factor.h"
#include "support/arena.h"
#include "support/vector.h"

enum { HALVINGS = 40, CORRECTIONS = 8 };
/* Exact rows that are met so far are as good as met, if it comes no nearer.  */
static const double NEARLY_MET = 1e-11;
/* In usual flows: a stream below that which would cross zero stops the search; one below the second
   does when it has shortened PATIENCE steps in a row.  */
static const double BLOCKED = 1e-4, SLOWLY = 1e-2;
enum { PATIENCE = 15 };
/* Of the sum of squares itself.  */
static const double ROUNDING = 1e-12;
/* How far a step may take a flow or a closure towards zero; Armijo's share.  */
static const double NEAREST = 0.9, DESCENT = 1e-4;
/* A step of which less is taken was too bold; one that leaves more of what exact rows are short of
   was slow.  */
static const double SHORT = 0.3, SLOW = 0.3;
/* On the way to the exact rows flows are to change by little of themselves: damping, without the
   figures in view and with them.  */
static const double BLIND = 1e3, SEEING = 0.1;

void
descent_init (struct descent *s)
{
  s->met = DESCENT_MET;
  s->limit = s->before = s->blocked = NOWHERE;
  s->times = 0;
  s->damping = s->barrier = 0;
  s->blind = s->whole = false;
}

/* ---- Measures of a point ---- */

double
descent_squares (const struct tangent *t)
{
  return vector_dot (t->figures, t->e, t->e);
}

/* What an exact row is short of, LEFT of it, beyond what is to be.  */
static double
short_by (const struct descent *s, const struct tangent *t, size_t i, double left)
{
  return fmax (fabs (left) - s->met * fmax (t->terms[i], t->size[i]), 0) / t->size[i];
}

/* What the exact rows are short of, by their sizes.  */
static double
shortfall (const struct descent *s, const struct tangent *t)
{
  double sum = 0;
  for (size_t i = 0; i < t->equations.exact.count; i++) {
    sum += short_by (s, t, i, t->c[i]);
  }
  return sum;
}

double
descent_worst (const struct tangent *t)
{
  double worst = 0;
  for (size_t i = 0; i < t->equations.exact.count; i++) {
    if (fabs (t->c[i]) > 0) {
      worst = fmax (worst, fabs (t->c[i]) / fmax (t->terms[i], t->size[i]));
    }
  }
  return worst;
}

/* What of the sum of squares is rounding.  */
static double
rounding (const struct tangent *t)
{
  double sum = ROUNDING * descent_squares (t) + 1e-18;
  for (size_t i = 0; i < t->figures; i++) {
    sum += t->noise[i] * (2 * fabs (t->e[i]) + t->noise[i]);
  }
  return sum;
}

/* What is to come down, at V: the sum of squares, and a barrier before zero.  */
static double
height (const struct descent *s, const struct tangent *t, const double v[])
{
  const struct measured *measured = s->measured;
  size_t flows = measured->network->streams * measured->network->components;
  double sum = descent_squares (t);
  for (size_t j = 0; s->barrier > 0 && j < flows; j++) {
    if (measured->unknown[j] != NOWHERE && !measured->held[j]) {
      sum += v[j] > 0 ? -2 * s->barrier * log (v[j] / measured->flow) : HUGE_VAL;
    }
  }
  return sum;
}

bool
descent_is_inside (const struct descent *s)
{
  const struct measured *measured = s->measured;
  size_t flows = measured->network->streams * measured->network->components;
  for (size_t j = 0; j < flows; j++) {
    if (s->v[j] < -DESCENT_BELOW * measured->flow) {
      return false;
    }
  }
  return true;
}

/* ---- A step ---- */

void
descent_add (const struct measured *measured, const double from[], double share, const double d[],
             double to[])
{
  memcpy (to, from, measured->places * sizeof *to);
  for (size_t k = 0; k < measured->unknowns; k++) {
    to[measured->place[k]] += share * d[k];
  }
}

struct tangent
descent_tangent (struct descent *s, bool met)
{
  double lift = sqrt (s->barrier), damping = met ? s->damping : s->blind ? BLIND : SEEING;
  return tangent_make (s->arena, s->measured, s->v,
                       (struct easing) { .damping = hypot (damping, lift), .lift = lift });
}

static struct tangent
tangent_of_trial (struct descent *s)
{
  return tangent_make (s->arena, s->measured, s->trial, (struct easing) { .loose = 0 });
}

/* What the weighted figures change by along the whole step.  */
static double *
moved_figures (struct descent *s, const struct tangent *t)
{
  double *moved = ARENA_ARRAY (s->arena, t->equations.measured.count + 1, double);
  sparse_times (&t->equations.measured, s->d, moved);
  return moved;
}

bool
descent_gains (struct descent *s, const struct tangent *t)
{
  const struct sparse *C = &t->equations.exact;
  double *met = ARENA_ARRAY (s->arena, C->count + 1, double), gain = 0;
  sparse_times (C, s->d, met);
  for (size_t i = 0; i < C->count; i++) {
    gain += short_by (s, t, i, t->c[i]) - short_by (s, t, i, t->c[i] - met[i]);
  }
  return gain >= 0.5 * shortfall (s, t);
}

double
descent_move (struct descent *s, const struct tangent *t)
{
  double *moved = moved_figures (s, t), most = 0;
  for (size_t i = 0; i < t->figures; i++) {
    most = fmax (most, fabs (moved[i]) - t->noise[i]);
  }
  return most;
}

/* The slope of what is to come down along the step, where the exact rows are met.  */
static double
slope (struct descent *s, const struct tangent *t)
{
  double *moved = moved_figures (s, t), by = 0;
  for (size_t i = 0; i < t->equations.measured.count; i++) {
    by -= 2 * t->e[i] * moved[i];
  }
  return fmin (by, 0);
}

/* ---- How far ---- */

/* Shortens SHARE so that what is NOW and would be THEN keeps a tenth of what it is.  */
static double
keep (double now, double then, double share)
{
  bool leaves = fabs (now) > 0 && 1 + share * (then / now - 1) < 1 - NEAREST;
  return leaves ? NEAREST / (1 - then / now) : share;
}

/* The same of the total of a stream; a stream that shortens the step is noted.  */
static double
keep_stream (struct descent *s, size_t stream, double share)
{
  const struct system *system = s->measured->system;
  double kept = keep (system_total (system, s->v, stream), system_total (system, s->trial, stream),
                      share);
  s->limit = kept < share ? stream : s->limit;
  return kept;
}

/* Of the right side of figure I, and of its closure.  */
static double
keep_figure (struct descent *s, const struct figure *figure, double share)
{
  if (figure->right.count > 0 && !figure_is_void (s->measured, figure)) {
    double kept = keep (form_value (&figure->right, s->v), form_value (&figure->right, s->trial),
                        share);
    size_t stream = figure->right.terms[0].column / s->measured->network->components;
    s->limit = kept < share ? stream : s->limit;
    share = kept;
  }
  if (figure->closure != NOWHERE) {
    share = keep (s->v[figure->closure], s->trial[figure->closure], share);
  }
  return share;
}

/* How much of the step keeps every denominator on its side of zero.  */
static double
longest_share (struct descent *s)
{
  const struct measured *measured = s->measured;
  const struct system *system = measured->system;
  double share = 1;
  s->limit = NOWHERE;
  descent_add (measured, s->v, 1, s->d, s->trial);
  for (size_t i = 0; i < measured->figures; i++) {
    share = keep_figure (s, &measured->figure[i], share);
  }
  for (size_t i = 0; i < system->bends; i++) {
    share = keep_stream (s, system->bend[i].inlet, share);
    share = keep_stream (s, system->bend[i].outlet, share);
  }
  return share;
}

bool
descent_is_blocked (struct descent *s)
{
  const struct measured *measured = s->measured;
  s->times = s->limit == s->before ? s->times + 1 : 1;
  s->before = s->limit;
  if (s->limit == NOWHERE || s->limit >= measured->network->streams) {
    return false;
  }
  double least = (s->times < PATIENCE ? BLOCKED : SLOWLY) * measured->flow;
  if (fabs (system_total (measured->system, s->v, s->limit)) > least) {
    return false;
  }
  s->blocked = s->limit;
  return true;
}

/* How much of the step leaves every flow and closure something of what it is.  */
static double
inside_share (const struct descent *s)
{
  const struct measured *measured = s->measured;
  size_t columns = measured->system->columns;
  size_t flows = measured->network->streams * measured->network->components;
  double share = 1;
  for (size_t k = 0; k < measured->unknowns; k++) {
    size_t j = measured->place[k];
    bool bound = (j < flows && !measured->held[j]) || j >= columns;
    if (bound && s->v[j] > 0 && s->v[j] + share * s->d[k] < (1 - NEAREST) * s->v[j]) {
      share = NEAREST * s->v[j] / -s->d[k];
    }
  }
  return share;
}

/* Leaves every flow and closure at the trial point something of what it was.  */
static void
stay_inside (struct descent *s)
{
  const struct measured *measured = s->measured;
  size_t columns = measured->system->columns;
  size_t flows = measured->network->streams * measured->network->components;
  for (size_t k = 0; k < measured->unknowns; k++) {
    size_t j = measured->place[k];
    bool bound = (j < flows && !measured->held[j]) || j >= columns;
    if (bound && s->v[j] > 0) {
      s->trial[j] = fmax (s->trial[j], (1 - NEAREST) * s->v[j]);
    }
  }
}

/* Brings the trial point back to the exact rows, by moves that change the figures least; false if
   that does not come to an end.  THERE: the tangent at the point.  */
static bool
restore (struct descent *s, const struct factor *factor, struct tangent *there)
{
  double *zero = ARENA_ARRAY (s->arena, there->figures + s->measured->unknowns + 1, double);
  double *d = gradient_make (s->arena, s->measured), worst = descent_worst (there);
  for (int i = 0; !(worst < s->met); i++) {
    double before = worst;
    if (i == CORRECTIONS) {
      return worst < NEARLY_MET;
    }
    factor_solve (factor, s->arena, there->c, zero, d);
    descent_add (s->measured, s->trial, 1, d, s->trial);
    *there = tangent_of_trial (s);
    worst = descent_worst (there);
    if (!(worst < before / 2)) {
      return before < NEARLY_MET && worst < NEARLY_MET;
    }
  }
  return true;
}

/* Takes SHARE of the step: back to the exact rows and down with the sum of squares; or, from a
   point T where they are not met, nearer to them.  */
static bool
try_share (struct descent *s, const struct factor *factor, const struct tangent *t, double share,
           double downhill)
{
  bool met = descent_worst (t) < s->met;
  descent_add (s->measured, s->v, share, s->d, s->trial);
  if (!met) {
    stay_inside (s);
  }
  struct tangent there = tangent_of_trial (s);
  if (met && !restore (s, factor, &there)) {
    return false;
  }
  double before = met ? height (s, t, s->v) : shortfall (s, t);
  double after = met ? height (s, &there, s->trial) : shortfall (s, &there);
  double gain = met ? -downhill : before, lost = met ? rounding (&there) : 0;
  if (!(after <= before - DESCENT * share * gain + lost)) {
    return false;
  }
  if (!met && after > SLOW * before) {
    s->blind = !s->blind;
  }
  memcpy (s->v, s->trial, s->measured->places * sizeof *s->v);
  return true;
}

/* How much the next step is damped, SHARE of this one being taken.  What a flow of all flows'
   change by themselves would cost is as much as there is to gain.  */
static void
damp (struct descent *s, const struct tangent *t, double share)
{
  double usual = sqrt (descent_squares (t) / (double) s->measured->unknowns);
  if (share < SHORT) {
    s->damping = fmax (3 * s->damping, usual);
  } else if (share >= 1) {
    s->damping = s->damping > 1e-3 * usual ? s->damping / 10 : 0;
  }
}

/* Takes as much of the step as does good; false if nothing does.  The whole step may lead across
   zero: a ratio of two flows below zero is one, and what is to be held shows only there.  */
bool
descent_step (struct descent *s, const struct factor *factor, const struct tangent *t)
{
  s->limit = NOWHERE;
  if (s->linear) {
    descent_add (s->measured, s->v, 1, s->d, s->v);
    return true;
  }
  double share = 1, longest = 1, downhill = slope (s, t);
  bool taken = !(s->barrier > 0) && try_share (s, factor, t, share, downhill);
  if (!taken) {
    share = s->barrier > 0 ? inside_share (s) : longest_share (s);
    longest = s->barrier > 0 ? share : 1;
    for (int i = 0; i < HALVINGS && !taken; i++) {
      taken = try_share (s, factor, t, share, downhill);
      share *= taken ? 1 : 0.5;
    }
  }
  s->whole = share >= 1;
  if (descent_worst (t) < s->met) {
    damp (s, t, share / longest);
  }
  return taken;
}

void
descent_end (struct descent *s, const struct factor *factor, const struct tangent *t)
{
  descent_add (s->measured, s->v, 1, s->d, s->trial);
  struct tangent there = tangent_of_trial (s);
  double most = descent_squares (t);
  if (restore (s, factor, &there) && descent_squares (&there) <= most + rounding (t)) {
    memcpy (s->v, s->trial, s->measured->places * sizeof *s->v);
  }
}

