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
/* Rounds of holding flows at zero and letting them go again.  */
enum { ROUNDS = 50 };
/* What a stream that is let go starts with, in usual flows.  */
static const double AFRESH = 1e-2;

struct bounded {
  struct arena *arena, *scratch;
  struct measured *measured;
  const struct solve_options *options;
  struct fit *fit;
  const double *from;            /* where the next search starts; null at first */
  bool *released;                /* by stream: it was let go as a whole, which happens once */
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

/* A stream whose total is below zero is held as a whole: its fractions say nothing then.  */
static void
hold_streams (struct bounded *a, const bool open[], double least)
{
  struct measured *measured = a->measured;
  size_t parts = measured->network->components;
  for (size_t j = 0; j < measured->network->streams * parts; j++) {
    bool below = system_total (measured->system, a->fit->v, j / parts) < least;
    measured->held[j] = measured->held[j] || (below && !open[j]);
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

/* Holds at zero what came out below; was there any?  A flow that is open is left alone.  */
static bool
hold_negative (struct bounded *a)
{
  if (a->fit->blocked != NOWHERE) {
    return hold_blocked (a);
  }
  const struct measured *measured = a->measured;
  size_t flows = measured->network->streams * measured->network->components;
  double least = -BOUNDED_BELOW * fit_largest (measured, a->fit);
  bool *open = fit_open (a->scratch, measured, a->fit), any = false;
  for (size_t j = 0; j < flows; j++) {
    if (a->fit->v[j] < least && !open[j] && !measured->held[j]) {
      a->measured->held[j] = any = true;
    }
  }
  if (any) {
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
        go = wants_up (a, c);
        a->measured->held[j] = !go;
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
    if (!hold_negative (a) && !release (a)) {
      if (a->fit->move < MINIMISE_CLOSE) {
        return true;
      }
      close = MINIMISE_CLOSE;
    }
  }
  return fault_set (fault, MESSAGE_NOT_CONVERGED, "the reconciliation", NULL);
}

bool
minimise_bounded (struct arena *arena, struct measured *measured,
                  const struct solve_options *options, struct fit *fit, struct fault *fault)
{
  struct bounded a = { .arena = arena, .scratch = arena_create (), .measured = measured,
                       .options = options, .fit = fit };
  a.released = ARENA_ARRAY (arena, measured->network->streams + 1, bool);
  bool done = search (&a, fault);
  arena_destroy (a.scratch);
  return done;
}
