#include "config.h"
#include "balance/minimise.h"

#include <math.h>
#include <string.h>
#include "balance/descent.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/fault.h"

/* Enough for slow linear convergence (a large residual of a bent figure); most need 2 to 6.  The
   first way is given up sooner.  */
enum { STEPS = 200, FIRST_STEPS = 40 };
/* A move as little as this may be rounding, if steps no longer shrink.  */
static const double NOISE = 1e-6;
/* Rows that miss by more than this share of their terms contradict each other.  */
static const double AGREED = 1e-9;
/* In usual flows: a stream, a flow that is next to nothing at the start, and what it is raised
   to.  */
static const double NOTHING = 1e-3, RAISED = 1e-4;
/* How unlike the composition of an outlet is to that of its split at first; a third in each
   pass.  */
static const double LOOSE = 1;
enum { PASSES = 3, BENT_PASSES = 5 };
/* The barrier before zero, in squares of uncertainties, and how it is taken down: when figures
   move by less than BARRIER_MOVE of theirs, or after some steps.  */
static const double BARRIER = 1, BARRIER_FALL = 30, BARRIER_LEAST = 1e-9, BARRIER_MOVE = 0.1;
enum { BARRIER_STEPS = 10 };

/* ---- The start ---- */

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

/* Raises a flow that is next to nothing, as something is divided by it.  */
static void
raise_stream (const struct measured *measured, size_t stream, double v[])
{
  size_t parts = measured->network->components;
  if (system_total (measured->system, v, stream) > NOTHING * measured->flow) {
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
  size_t flows = measured->network->streams * measured->network->components;
  for (size_t j = 0; j < flows; j++) {
    bool none = measured->unknown[j] != NOWHERE && !measured->held[j]
                && v[j] < DESCENT_BELOW * measured->flow;
    v[j] = none ? RAISED * measured->flow : v[j];
  }
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

/* Equal flows everywhere, then some times the linear problem, ratios taken as rows by the flows
   there are.  */
static void
start (struct descent *s)
{
  const struct measured *measured = s->measured;
  size_t columns = measured->system->columns;
  for (size_t i = 0; i < measured->places; i++) {
    bool there = measured->unknown[i] != NOWHERE;
    double flow = measured->flow / (double) measured->network->components;
    s->v[i] = there ? (i < columns ? flow : 1) : 0;
  }
  int passes = s->linear ? 1 : measured->system->bends > 0 ? BENT_PASSES : PASSES;
  double loose = LOOSE;
  for (int pass = 0; pass < passes; pass++, loose /= 3) {
    struct easing ease = { .loose = loose };
    struct tangent t = tangent_make (s->arena, measured, s->v, ease);
    const struct factor *factor = factor_make (s->arena, &t.equations);
    factor_solve (factor, s->arena, t.c, t.e, s->d);
    descent_add (measured, s->v, 1, s->d, s->v);
    arena_reset (s->arena);
    if (!s->linear) {
      raise_all (measured, s->v);
    }
  }
}

/* ---- The way ---- */

enum going { GOES_ON, GOES_AGAIN, ARRIVED };

/* What there is to do with the step: where nothing gains on what exact rows are short of, they
   contradict each other, or their digits do; what moves little is the end, or the barrier's.    */
static enum going
look (struct descent *s, const struct tangent *t, double close, double last, double move,
      int *tries)
{
  double worst = descent_worst (t);
  bool met = worst < s->met || s->linear;
  if (!(worst < s->met) && !descent_gains (s, t)) {
    s->met = 2 * worst;
    return worst <= AGREED ? GOES_AGAIN : ARRIVED;
  }
  if (s->barrier > 0) {
    if (!met || (!(move < BARRIER_MOVE && s->whole) && ++*tries <= BARRIER_STEPS)) {
      return GOES_ON;
    }
    *tries = 0;
    s->barrier /= BARRIER_FALL;
    return s->barrier < BARRIER_LEAST ? ARRIVED : GOES_AGAIN;
  }
  if (met && s->damping > 0 && move < close) {
    s->damping = 0;
    return GOES_AGAIN;
  }
  bool still = move < close || (move < NOISE && move >= last / 2);
  return met && still ? ARRIVED : GOES_ON;
}

/* Steps until one hardly moves anything.  */
static bool
iterate (struct descent *s, const struct solve_options *options, int steps, double close,
         double *move, struct fault *fault)
{
  double last = HUGE_VAL;
  int tries = 0;
  for (int step = 0; step < steps; step++) {
    arena_reset (s->arena);
    if (options->interrupted && options->interrupted ()) {
      return fault_set (fault, MESSAGE_INTERRUPTED, NULL, NULL);
    }
    struct tangent t = descent_tangent (s, true);
    bool met = descent_worst (&t) < s->met || s->linear;
    if (!met) {
      t = descent_tangent (s, false);
    }
    const struct factor *factor = factor_make (s->arena, &t.equations);
    const double *none = ARENA_ARRAY (s->arena, t.equations.measured.count + 1, double);
    factor_solve (factor, s->arena, t.c, met || !s->blind ? t.e : none, s->d);
    *move = descent_move (s, &t);
    enum going going = look (s, &t, close, step > 2 ? last : HUGE_VAL, *move, &tries);
    if (going == ARRIVED && !(s->barrier > 0)) {
      descent_end (s, factor, &t);
    }
    if (going == ARRIVED) {
      return true;
    }
    if (going == GOES_AGAIN) {
      continue;
    }
    bool taken = descent_step (s, factor, &t);
    if (descent_is_blocked (s)) {
      return true;
    }
    if (!taken) {
      break;
    }
    last = *move;
  }
  return fault_set (fault, MESSAGE_NOT_CONVERGED, "the reconciliation", NULL);
}

static void
finish (struct arena *arena, const struct measured *measured, const double v[], struct fit *fit)
{
  double *kept = ARENA_ARRAY (arena, measured->places, double);
  memcpy (kept, v, measured->places * sizeof *kept);
  for (size_t j = 0; j < measured->system->columns; j++) {
    kept[j] = measured->held[j] ? 0 : kept[j];
  }
  fit->v = kept;
  fit->tangent = tangent_make (arena, measured, kept, (struct easing) { .loose = 0 });
  fit->factor = factor_make (arena, &fit->tangent.equations);
  fit->rows = fit->tangent.equations.measured.count;
  fit->chi2 = descent_squares (&fit->tangent);
  fit->freedom = fit->rows - factor_rank (fit->factor);
  fit->agreed = descent_worst (&fit->tangent) <= AGREED;
  fit->mismatch = 0;
  for (size_t i = 0; i < fit->tangent.equations.exact.count; i++) {
    double c = fabs (fit->tangent.c[i]) / (fit->tangent.size[i]);
    fit->mismatch = fmax (fit->mismatch, c);
  }
}

/* Once more from the start, inside of what is above zero, and then on from there; INSIDE is where
   that led to.  */
static bool
go_inside (struct descent *s, const struct solve_options *options, double close, double inside[],
           double *move, struct fault *fault)
{
  struct fault own;
  fault_init (&own, fault->arena);
  arena_reset (s->arena);
  descent_init (s);
  start (s);
  s->barrier = BARRIER;
  if (!iterate (s, options, STEPS, close, move, &own) && own.kind == MESSAGE_INTERRUPTED) {
    *fault = own;
    return false;
  }
  memcpy (inside, s->v, s->measured->places * sizeof *inside);
  descent_init (s);
  return iterate (s, options, STEPS, close, move, fault);
}

static void
start_from (struct descent *s, const double from[])
{
  memcpy (s->v, from, s->measured->places * sizeof *s->v);
  for (size_t j = 0; j < s->measured->system->columns; j++) {
    s->v[j] = s->measured->held[j] ? 0 : s->v[j];
  }
}

bool
measured_minimise (struct arena *arena, const struct measured *measured,
                   const struct solve_options *options, const double from[], double close,
                   struct fit *fit, struct fault *fault)
{
  struct descent s = { .arena = arena_create (), .measured = measured,
                       .linear = is_linear (measured) };
  double *inside = ARENA_ARRAY (arena, measured->places, double);
  struct fault own;
  fault_init (&own, fault->arena);
  descent_init (&s);
  s.v = ARENA_ARRAY (arena, measured->places, double);
  s.trial = ARENA_ARRAY (arena, measured->places, double);
  s.d = ARENA_ARRAY (arena, measured->unknowns, double);
  if (from) {
    start_from (&s, from);
  } else {
    start (&s);
  }
  fit->move = HUGE_VAL;
  fit->inside = NULL;
  bool done = iterate (&s, options, from ? STEPS : FIRST_STEPS, close, &fit->move, &own);
  bool good = done && descent_is_inside (&s) && s.blocked == NOWHERE;
  if (good || from || s.linear || own.kind == MESSAGE_INTERRUPTED) {
    *fault = done ? *fault : own;
  } else {
    done = go_inside (&s, options, close, inside, &fit->move, fault);
    fit->inside = inside;
  }
  if (done) {
    finish (arena, measured, s.v, fit);
    fit->blocked = s.blocked;
  }
  arena_destroy (s.arena);
  return done;
}
