#include "config.h"
#include "balance/minimise.h"

#include <math.h>
#include <string.h>
#include "balance/solution.h"
#include "support/arena.h"
#include "support/fault.h"

/* Enough for slow linear convergence (a large residual of a bent figure); most need 2 to 6.  */
enum { STEPS = 200, HALVINGS = 40 };

/* In the end exact rows are met to MET of their terms.  A move as little as NOISE may be rounding,
   if steps no longer shrink.  */
static const double MET = 1e-12, NOISE = 1e-6;
/* In usual flows: a stream below that which would cross zero stops the search; one below the second
   does when it has shortened PATIENCE steps in a row.  */
static const double BLOCKED = 1e-4, SLOWLY = 1e-2;
enum { PATIENCE = 15 };
/* Of the merit itself.  */
static const double ROUNDING = 1e-12;
/* Rows that miss by more than this share of their terms contradict each other.  */
static const double AGREED = 1e-9;
/* How far a step may take a total or a closure towards zero; Armijo's share.  */
static const double NEAREST = 0.9, DESCENT = 1e-4;
/* In usual flows: a flow that is next to nothing at the start.  */
static const double NOTHING = 1e-6;
enum { PASSES = 2 };

struct search {
  struct arena *arena;           /* work: forgotten after each step */
  const struct measured *measured;
  double *v, *trial;             /* by place */
  double *d;                     /* by unknown */
  size_t limit, blocked;         /* streams: what shortened the last step; what stops the search */
  size_t before;                 /* what shortened the step before */
  int times;                     /* in a row */
  double penalty;                /* of what exact rows are short of, each by its own size */
};

/* ---- Measures of a point ---- */

static double
squares (const double e[], size_t n)
{
  double sum = 0;
  for (size_t i = 0; i < n; i++) {
    sum += e[i] * e[i];
  }
  return sum;
}

/* What the exact rows are short of, by their sizes.  */
static double
shortfall (const struct tangent *t)
{
  double sum = 0;
  for (size_t i = 0; i < t->equations.exact.count; i++) {
    sum += fabs (t->c[i]) / t->size[i];
  }
  return sum;
}

/* The largest that any exact row is short of, by its terms.  */
static double
worst_row (const struct tangent *t)
{
  double worst = 0;
  for (size_t i = 0; i < t->equations.exact.count; i++) {
    if (fabs (t->c[i]) > 0) {
      worst = fmax (worst, fabs (t->c[i]) / fmax (t->terms[i], t->size[i]));
    }
  }
  return worst;
}

static double
merit (const struct tangent *t, double penalty)
{
  return squares (t->e, t->equations.measured.count) + penalty * shortfall (t);
}

/* ---- The start ---- */

/* Raises a flow that is next to nothing, as something is divided by it.  */
static void
raise_stream (const struct measured *measured, size_t stream, double v[])
{
  size_t parts = measured->network->components;
  if (fabs (system_total (measured->system, v, stream)) > NOTHING * measured->flow) {
    return;
  }
  for (size_t j = stream * parts; j < (stream + 1) * parts; j++) {
    if (measured->unknown[j] != NOWHERE && !measured->held[j]) {
      v[j] = MEASURED_LEAST * measured->flow;
    }
  }
}

static void
raise_all (const struct measured *measured, double v[])
{
  const struct system *system = measured->system;
  for (size_t i = 0; i < measured->figures; i++) {
    if (measured->figure[i].right.count > 0) {
      size_t column = measured->figure[i].right.terms[0].column;
      raise_stream (measured, column / measured->network->components, v);
    }
  }
  for (size_t i = 0; i < system->bends; i++) {
    raise_stream (measured, system->bend[i].inlet, v);
    raise_stream (measured, system->bend[i].outlet, v);
  }
}

static void
add_step (const struct measured *measured, const double from[], double share, const double d[],
          double to[])
{
  memcpy (to, from, measured->places * sizeof *to);
  for (size_t k = 0; k < measured->unknowns; k++) {
    to[measured->place[k]] += share * d[k];
  }
}

/* Is every figure a plain form, and no split bent?  */
static bool
is_linear (const struct measured *measured)
{
  for (size_t i = 0; i < measured->figures; i++) {
    if (measured->figure[i].right.count > 0) {
      return false;
    }
  }
  return measured->system->bends == 0;
}

/* Equal flows everywhere, then some times the linear problem without bends and closures, ratios
   taken as rows by the flows there are.  */
static void
start (struct search *s)
{
  const struct measured *measured = s->measured;
  size_t columns = measured->system->columns;
  for (size_t i = 0; i < measured->places; i++) {
    bool there = measured->unknown[i] != NOWHERE;
    double flow = measured->flow / (double) measured->network->components;
    s->v[i] = there ? (i < columns ? flow : 1) : 0;
  }
  for (int pass = is_linear (measured) ? PASSES - 1 : 0; pass < PASSES; pass++) {
    struct tangent t = tangent_make (s->arena, measured, s->v, true);
    const struct factor *factor = factor_make (s->arena, &t.equations);
    factor_solve (factor, s->arena, t.c, t.e, s->d);
    add_step (measured, s->v, 1, s->d, s->v);
    arena_reset (s->arena);
  }
  raise_all (measured, s->v);
}

/* ---- A step ---- */

/* Shortens SHARE so that what is NOW and would be THEN keeps a tenth of what it is.  */
static double
keep (double now, double then, double share)
{
  bool leaves = fabs (now) > 0 && 1 + share * (then / now - 1) < 1 - NEAREST;
  return leaves ? NEAREST / (1 - then / now) : share;
}

/* The same of the total of a stream; a stream that shortens the step is noted.  */
static double
keep_stream (struct search *s, size_t stream, double share)
{
  const struct system *system = s->measured->system;
  double kept = keep (system_total (system, s->v, stream), system_total (system, s->trial, stream),
                      share);
  s->limit = kept < share ? stream : s->limit;
  return kept;
}

/* Of the right side of figure I, and of its closure.  */
static double
keep_figure (struct search *s, const struct figure *figure, double share)
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
longest_share (struct search *s)
{
  const struct measured *measured = s->measured;
  const struct system *system = measured->system;
  double share = 1;
  s->limit = NOWHERE;
  add_step (measured, s->v, 1, s->d, s->trial);
  for (size_t i = 0; i < measured->figures; i++) {
    share = keep_figure (s, &measured->figure[i], share);
  }
  for (size_t i = 0; i < system->bends; i++) {
    share = keep_stream (s, system->bend[i].inlet, share);
    share = keep_stream (s, system->bend[i].outlet, share);
  }
  return share;
}

/* Is the stream that shortens the step next to nothing?  */
static bool
is_blocked (struct search *s)
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

/* What the weighted figures change by along the whole step.  */
static double *
moved_figures (struct search *s, const struct tangent *t)
{
  double *moved = ARENA_ARRAY (s->arena, t->equations.measured.count + 1, double);
  sparse_times (&t->equations.measured, s->d, moved);
  return moved;
}

/* What of the shortfall the whole step takes away, were all linear: nothing, where exact rows
   contradict each other.  */
static double
gained (struct search *s, const struct tangent *t)
{
  const struct sparse *C = &t->equations.exact;
  double *met = ARENA_ARRAY (s->arena, C->count + 1, double), gain = 0;
  sparse_times (C, s->d, met);
  for (size_t i = 0; i < C->count; i++) {
    gain += (fabs (t->c[i]) - fabs (t->c[i] - met[i])) / t->size[i];
  }
  return fmax (gain, 0);
}

/* The slope of the merit along the step.  The penalty grows until the step goes downhill: Nocedal
   and Wright, Numerical Optimization (2006), equation 18.36, with half for rho.  */
static double
slope (struct search *s, const struct tangent *t, const double moved[], double gain)
{
  double by = 0, square = squares (moved, t->equations.measured.count);
  for (size_t i = 0; i < t->equations.measured.count; i++) {
    by -= 2 * t->e[i] * moved[i];
  }
  if (gain > 0) {
    s->penalty = fmax (s->penalty, (by + square) / (0.5 * gain));
  }
  return by - s->penalty * gain;
}

/* Takes SHARE of the step if that brings the merit down from BEFORE.  */
static bool
try_share (struct search *s, double share, double before, double downhill)
{
  add_step (s->measured, s->v, share, s->d, s->trial);
  struct tangent there = tangent_make (s->arena, s->measured, s->trial, false);
  double after = merit (&there, s->penalty);
  if (!(after <= before + DESCENT * share * downhill + ROUNDING * before + 1e-18)) {
    return false;
  }
  memcpy (s->v, s->trial, s->measured->places * sizeof *s->v);
  return true;
}

/* Takes as much of the step as brings the merit down; false if none does.  The whole step may lead
   across zero: a ratio of two flows below zero is one, and what is to be held shows only there.  */
static bool
take_step (struct search *s, const struct tangent *t, double downhill)
{
  double before = merit (t, s->penalty);
  if (try_share (s, 1, before, downhill)) {
    return true;
  }
  double share = longest_share (s);
  for (int i = 0; i < HALVINGS; i++, share /= 2) {
    if (try_share (s, share, before, downhill)) {
      return true;
    }
  }
  return false;
}

static double
largest (const double x[], size_t n)
{
  double most = 0;
  for (size_t i = 0; i < n; i++) {
    most = fmax (most, fabs (x[i]));
  }
  return most;
}

/* Steps until one hardly moves anything.  */
static bool
iterate (struct search *s, const struct solve_options *options, double close, double *end,
         struct fault *fault)
{
  double last = HUGE_VAL;
  for (int step = 0; step < STEPS; step++) {
    arena_reset (s->arena);
    if (options->interrupted && options->interrupted ()) {
      return fault_set (fault, MESSAGE_INTERRUPTED, NULL, NULL);
    }
    struct tangent t = tangent_make (s->arena, s->measured, s->v, false);
    const struct factor *factor = factor_make (s->arena, &t.equations);
    factor_solve (factor, s->arena, t.c, t.e, s->d);
    double *moved = moved_figures (s, &t);
    double move = largest (moved, t.equations.measured.count), gain = gained (s, &t);
    bool met = worst_row (&t) < MET || gain < 0.5 * shortfall (&t);
    if (met && (move < close || (step > 2 && move < NOISE && move >= last / 2))) {
      add_step (s->measured, s->v, 1, s->d, s->v);
      *end = move;
      return true;
    }
    s->limit = NOWHERE;
    bool taken = take_step (s, &t, slope (s, &t, moved, gain));
    if (is_blocked (s)) {
      return true;
    }
    if (!taken) {
      break;
    }
    last = move;
  }
  return fault_set (fault, MESSAGE_NOT_CONVERGED, "the reconciliation", NULL);
}

static void
finish (struct arena *arena, const struct measured *measured, const double v[], struct fit *fit)
{
  double *kept = ARENA_ARRAY (arena, measured->places, double);
  memcpy (kept, v, measured->places * sizeof *kept);
  fit->v = kept;
  fit->tangent = tangent_make (arena, measured, kept, false);
  fit->factor = factor_make (arena, &fit->tangent.equations);
  fit->rows = fit->tangent.equations.measured.count;
  fit->chi2 = squares (fit->tangent.e, fit->rows);
  fit->freedom = fit->rows - factor_rank (fit->factor);
  fit->agreed = worst_row (&fit->tangent) <= AGREED;
  fit->mismatch = 0;
  for (size_t i = 0; i < fit->tangent.equations.exact.count; i++) {
    double c = fabs (fit->tangent.c[i]) / (fit->tangent.size[i]);
    fit->mismatch = fmax (fit->mismatch, c);
  }
}

bool
measured_minimise (struct arena *arena, const struct measured *measured,
                   const struct solve_options *options, const double from[], double close,
                   struct fit *fit, struct fault *fault)
{
  struct search s = { .arena = arena_create (), .measured = measured, .blocked = NOWHERE };
  s.v = ARENA_ARRAY (arena, measured->places, double);
  s.trial = ARENA_ARRAY (arena, measured->places, double);
  s.d = ARENA_ARRAY (arena, measured->unknowns, double);
  if (from) {
    memcpy (s.v, from, measured->places * sizeof *s.v);
  } else {
    start (&s);
  }
  fit->move = HUGE_VAL;
  bool done = iterate (&s, options, close, &fit->move, fault);
  if (done) {
    finish (arena, measured, s.v, fit);
    fit->blocked = s.blocked;
  }
  arena_destroy (s.arena);
  return done;
}
