#include "config.h"
#include "balance/bounded.h"

#include <math.h>
#include <string.h>
#include "balance/solution.h"
#include "balance/uncertainty.h"
#include "support/arena.h"
#include "support/fault.h"

/* How closely the sum of squares is minimised while flows to hold are still looked for.  */
static const double ROUGHLY = 1e-2;
/* In usual flows: what flows less inside may well be held.  */
static const double NEXT_TO_NOTHING = 1e-6, LITTLE = 1e-4;
/* Rounds of holding flows at zero and letting them go again.  */
enum { ROUNDS = 50, OFTEN = 2 };
/* What a stream that is let go starts with, in usual flows.  */
static const double AFRESH = 1e-2;

struct bounded {
  struct arena *arena, *scratch;
  struct measured *measured;
  const struct solve_options *options;
  struct fit *fit;
  const double *from;            /* where the next search starts; null at first */
  const double *inside;          /* where no flow was below zero, or null */
  bool *released;                /* by stream: it was let go as a whole, which happens once */
  int *let_go;                   /* by column: how often */
};

double
fit_largest (const struct measured *measured, const struct fit *fit)
{
  double most = 0;
  for (size_t j = 0; j < measured->network->streams * measured->network->components; j++) {
    most = fmax (most, fabs (fit->v[j]));
  }
  return most;
}

/* Was column J, or with it a whole stream, next to nothing where the search was inside of what is
   above zero?  Nothing is known of that where it was not.  */
static bool
was_nothing (const struct bounded *a, size_t first, size_t count)
{
  double flow = 0;
  for (size_t j = first; a->inside && j < first + count; j++) {
    flow += a->inside[j];
  }
  return flow < NEXT_TO_NOTHING * a->measured->flow;
}

/* The same of what is held only together with another.  */
static bool
was_little (const struct bounded *a, size_t j)
{
  return !a->inside || a->inside[j] < LITTLE * a->measured->flow;
}

/* A stream whose total is below zero is held as a whole: its fractions say nothing then.  */
static void
hold_streams (struct bounded *a, const bool open[], double least)
{
  struct measured *measured = a->measured;
  size_t parts = measured->network->components;
  for (size_t j = 0; j < measured->network->streams * parts; j++) {
    size_t first = j - j % parts;
    bool below = system_total (measured->system, a->fit->v, j / parts) < least
                 && was_nothing (a, first, parts);
    measured->held[j] = measured->held[j] || (below && !open[j]);
  }
}

/* One of two flows with a measured ratio is not held without the other, where both are below zero:
   their ratio may be as measured.  */
static void
hold_ratios (struct bounded *a, double least)
{
  struct measured *measured = a->measured;
  for (size_t i = 0; i < measured->figures; i++) {
    const struct figure *figure = &measured->figure[i];
    if (figure->left.count == 1 && figure->right.count == 1) {
      size_t left = figure->left.terms[0].column, right = figure->right.terms[0].column;
      bool both = a->fit->v[left] < least && a->fit->v[right] < least
                  && was_little (a, left) && was_little (a, right);
      if (both && (measured->held[left] || measured->held[right])) {
        measured->held[left] = measured->held[right] = true;
      }
    }
  }
}

/* Holds the stream that stopped the search.  */
static bool
hold_blocked (struct bounded *a)
{
  size_t parts = a->measured->network->components, first = a->fit->blocked * parts;
  for (size_t j = first; j < first + parts; j++) {
    a->measured->held[j] = true;
  }
  return true;
}

/* The flow that comes to zero first on the way from inside to below zero; inside is there then.  */
static size_t
first_below (struct bounded *a, const bool open[], double least)
{
  size_t flows = a->measured->network->streams * a->measured->network->components, best = NOWHERE;
  double share = HUGE_VAL;
  for (size_t j = 0; j < flows; j++) {
    double own = a->inside ? a->inside[j] : 0, then = a->fit->v[j];
    if (then < least && !open[j] && !a->measured->held[j] && own / (own - then) < share) {
      share = own / (own - then);
      best = j;
    }
  }
  if (best != NOWHERE && a->inside) {
    double *there = ARENA_ARRAY (a->arena, a->measured->places, double);
    for (size_t i = 0; i < a->measured->places; i++) {
      there[i] = a->inside[i] + share * (a->fit->v[i] - a->inside[i]);
    }
    a->inside = there;
  }
  return best;
}

/* Holds at zero what came out below; was there any?  A flow that is open is left alone.  What has
   flowed inside waits for what has not.  */
static bool
hold_negative (struct bounded *a)
{
  if (a->fit->blocked != NOWHERE) {
    return hold_blocked (a);
  }
  const struct measured *measured = a->measured;
  size_t flows = measured->network->streams * measured->network->components;
  double least = -BOUNDED_BELOW * fit_largest (measured, a->fit);
  bool *open = fit_open (a->scratch, measured, a->fit), any = false, any_below = false;
  for (size_t j = 0; j < flows; j++) {
    any_below = any_below || (a->fit->v[j] < least && !open[j] && !measured->held[j]);
  }
  for (size_t j = 0; j < flows; j++) {
    bool below = a->inside ? any_below : a->fit->v[j] < least;
    if (below && !open[j] && !measured->held[j] && measured->unknown[j] != NOWHERE
        && was_nothing (a, j, 1)) {
      a->measured->held[j] = any = true;
    }
  }
  size_t first = any ? NOWHERE : first_below (a, open, least);
  if (first != NOWHERE) {
    a->measured->held[first] = any = true;
  }
  if (any) {
    hold_ratios (a, least);
    hold_streams (a, open, least);
  }
  arena_reset (a->scratch);
  return any;
}

/* Would chi2 fall if what is held rose as C, by exact row, says?  */
static bool
wants_up (struct bounded *a, const double c[])
{
  const struct tangent *t = &a->fit->tangent;
  size_t m = t->equations.measured.count;
  double *zero = ARENA_ARRAY (a->scratch, m + 1, double);
  double *moved = ARENA_ARRAY (a->scratch, m + 1, double), along = 0, size = 0;
  double *d = gradient_make (a->scratch, a->measured);
  factor_solve (a->fit->factor, a->scratch, c, zero, d);
  sparse_times (&t->equations.measured, d, moved);
  for (size_t i = 0; i < m; i++) {
    along += t->e[i] * moved[i];
    size += moved[i] * moved[i];
  }
  return along > BOUNDED_BELOW * a->measured->flow * size;
}

/* How many components of STREAM are there, if all of them are held; else 0.  */
static size_t
held_parts (const struct measured *measured, size_t stream)
{
  size_t parts = measured->network->components, there = 0;
  for (size_t j = stream * parts; j < (stream + 1) * parts; j++) {
    there += measured->unknown[j] != NOWHERE;
    if (measured->unknown[j] != NOWHERE && !measured->held[j]) {
      return 0;
    }
  }
  return there;
}

/* With which composition a stream would rise: as analysed, what is not analysed in equal parts.  */
static void
rising (const struct measured *measured, size_t stream, double x[])
{
  size_t parts = measured->network->components, open = 0;
  double rest = 1;
  for (size_t c = 0; c < parts; c++) {
    x[c] = measured->unknown[stream * parts + c] != NOWHERE ? -1 : 0;
  }
  for (size_t i = 0; i < measured->figures; i++) {
    const struct figure *figure = &measured->figure[i];
    if (figure->left.count == 1 && figure->right.count > 0 && figure_is_void (measured, figure)
        && figure->right.terms[0].column / parts == stream
        && figure->left.terms[0].column / parts == stream) {
      x[figure->left.terms[0].column % parts] = fmax (figure->closed_y, 0);
    }
  }
  for (size_t c = 0; c < parts; c++) {
    open += x[c] < 0;
    rest -= fmax (x[c], 0);
  }
  for (size_t c = 0; c < parts; c++) {
    x[c] = x[c] < 0 ? fmax (rest, 0) / (double) open : x[c];
  }
}

/* Lets a stream go that was held as a whole, if it wants to rise; once, as it may only have been
   on a poor way there.  ROW: its first.  */
static bool
release_stream (struct bounded *a, size_t stream, size_t row)
{
  struct measured *measured = a->measured;
  size_t parts = measured->network->components, first = stream * parts;
  double *c = ARENA_ARRAY (a->scratch, a->fit->tangent.equations.exact.count + 1, double);
  double *x = ARENA_ARRAY (a->scratch, parts, double);
  rising (measured, stream, x);
  for (size_t k = 0; k < parts; k++) {
    if (measured->unknown[first + k] != NOWHERE) {
      c[row++] = x[k];
    }
  }
  if (a->released[stream] || !wants_up (a, c)) {
    return false;
  }
  double *from = ARENA_ARRAY (a->arena, measured->places, double);
  memcpy (from, a->fit->v, measured->places * sizeof *from);
  for (size_t k = 0; k < parts; k++) {
    measured->held[first + k] = false;
    from[first + k] = AFRESH * measured->flow * x[k];
  }
  a->released[stream] = true;
  a->from = from;
  return true;
}

/* A little of the flow is there at once, as something may be divided by it.  */
static void
release_flow (struct bounded *a, size_t j)
{
  double *from = ARENA_ARRAY (a->arena, a->measured->places, double);
  memcpy (from, a->fit->v, a->measured->places * sizeof *from);
  from[j] = NEXT_TO_NOTHING * a->measured->flow;
  a->from = from;
  a->measured->held[j] = false;
  a->let_go[j]++;
}

/* Lets go the first held flow that wants to rise, or stream.  */
static bool
release (struct bounded *a)
{
  const struct measured *measured = a->measured;
  size_t row = a->fit->tangent.held, parts = measured->network->components, last = NOWHERE;
  for (size_t j = 0; j < measured->network->streams * parts; j++) {
    bool go = false;
    if (measured->held[j] && measured->unknown[j] != NOWHERE) {
      if (held_parts (measured, j / parts) < 2) {
        double *c = ARENA_ARRAY (a->scratch, a->fit->tangent.equations.exact.count + 1, double);
        c[row] = 1;
        go = a->let_go[j] < OFTEN && wants_up (a, c);
        if (go) {
          release_flow (a, j);
        }
      } else if (j / parts != last) {
        last = j / parts;
        go = release_stream (a, last, row);
      }
      row++;
    }
    arena_reset (a->scratch);
    if (go) {
      return true;
    }
  }
  return false;
}

/* Exact rows that contradict each other end the search, but for one that is blocked before it got
   there.  */
static bool
is_going (const struct bounded *a)
{
  return a->fit->agreed || a->fit->blocked != NOWHERE;
}

static bool
search (struct bounded *a, struct fault *fault)
{
  double close = ROUGHLY;
  for (int round = 0; round < ROUNDS; round++) {
    if (!measured_minimise (a->arena, a->measured, a->options, a->from, close, a->fit, fault)) {
      return false;
    }
    a->from = a->fit->v;
    if (!is_going (a)) {
      return true;
    }
    a->inside = a->fit->inside ? a->fit->inside : a->inside;
    bool hold = hold_negative (a);
    if (hold && a->inside) {
      a->from = a->inside;
    }
    if (!hold && !release (a)) {
      if (!(close > MINIMISE_CLOSE)) {
        return true;
      }
      close = MINIMISE_CLOSE;
    }
  }
  return fault_set (fault, MESSAGE_NOT_CONVERGED, "the reconciliation", NULL);
}

bool
minimise_bounded (struct arena *arena, struct measured *measured,
                  const struct solve_options *options, const double from[], struct fit *fit,
                  struct fault *fault)
{
  struct bounded a = { .arena = arena, .scratch = arena_create (), .measured = measured,
                       .options = options, .fit = fit, .from = from };
  a.released = ARENA_ARRAY (arena, measured->network->streams + 1, bool);
  a.let_go = ARENA_ARRAY (arena, measured->system->columns, int);
  bool done = search (&a, fault);
  arena_destroy (a.scratch);
  return done;
}
