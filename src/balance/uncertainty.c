/* JCGM 100:2008, equation 13, with the full covariance of the fit: u^2 = f' C f, which is the
   square of the spread of f.                                                                    */
#include "config.h"
#include "balance/uncertainty.h"

#include <math.h>
#include <string.h>
#include "balance/bounded.h"
#include "balance/factor.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/vector.h"

struct covariance {
  const struct measured *measured;       /* its numbers only; the network is the caller's */
  const double *v;                       /* by column */
  const struct factor *factor;
  const struct factor *loose;            /* nothing held but whole streams; null: as above */
};

/* ---- What is open ---- */

/* A form is settled if no move along what is open changes it.  A random move changes everything
   that can be changed; two are looked at.                                                       */
enum { MOVES = 2 };

/* A random open move by place, or null if nothing is open.  */
static double *
open_move (struct arena *arena, const struct measured *measured, const struct fit *fit,
           unsigned seed)
{
  if (factor_open (fit->factor) == 0) {
    return NULL;
  }
  double *d = gradient_make (arena, measured), *move;
  move = ARENA_ARRAY (arena, measured->places, double);
  factor_open_move (fit->factor, arena, seed, d);
  for (size_t k = 0; k < measured->unknowns; k++) {
    move[measured->place[k]] = d[k] / measured->scale[k];
  }
  return move;
}

bool *
fit_open (struct arena *arena, const struct measured *measured, const struct fit *fit)
{
  size_t columns = measured->system->columns;
  bool *open = ARENA_ARRAY (arena, columns, bool);
  for (unsigned seed = 1; seed <= MOVES; seed++) {
    double *move = open_move (arena, measured, fit, seed);
    double zero = move ? FACTOR_SETTLED * vector_norm (measured->places, move) : 0;
    for (size_t j = 0; move && j < columns; j++) {
      open[j] = open[j] || fabs (move[j]) > zero;
    }
  }
  return open;
}

void
fit_open_streams (struct arena *arena, const struct measured *measured, const struct fit *fit,
                  bool total[], bool fraction[])
{
  size_t parts = measured->network->components, streams = measured->network->streams;
  for (unsigned seed = 1; seed <= MOVES; seed++) {
    double *move = open_move (arena, measured, fit, seed);
    double zero = move ? FACTOR_SETTLED * vector_norm (measured->places, move) : 0;
    for (size_t s = 0; move && s < streams; s++) {
      double moved = system_total (measured->system, move, s);
      double flow = system_total (measured->system, fit->v, s);
      total[s] = total[s] || fabs (moved) > zero;
      for (size_t j = s * parts; j < (s + 1) * parts; j++) {
        double x = fabs (flow) > 0 ? fit->v[j] / flow : 0;
        fraction[j] = fraction[j] || fabs (move[j] - x * moved) > zero;
      }
    }
  }
}

/* ---- Uncertainty ---- */

/* What is held at zero because it would come out below is no better known for that.  A stream that
   is held as a whole stays so where something is divided by it.  */
const struct factor *
fit_loose_factor (struct arena *arena, struct measured *measured, const struct fit *fit)
{
  size_t parts = measured->network->components, flows = measured->network->streams * parts;
  bool *held = measured->held, any = false;
  bool *divides = ARENA_ARRAY (arena, measured->network->streams + 1, bool);
  for (size_t i = 0; i < measured->figures; i++) {
    const struct form *right = &measured->figure[i].right;
    for (size_t k = 0; k < right->count; k++) {
      divides[right->terms[k].column / parts] = true;
    }
  }
  for (size_t i = 0; i < measured->system->bends; i++) {
    divides[measured->system->bend[i].inlet] = divides[measured->system->bend[i].outlet] = true;
  }
  measured->held = ARENA_ARRAY (arena, measured->system->columns, bool);
  for (size_t j = 0; j < flows; j++) {
    double flow = system_total (measured->system, fit->v, j / parts);
    bool whole = !(flow > BOUNDED_BELOW * measured->flow) && divides[j / parts];
    measured->held[j] = held[j] && whole;
    any = any || measured->held[j] != held[j];
  }
  const struct factor *loose = NULL;
  if (any) {
    struct arena *work = arena_create ();
    struct tangent t = tangent_make (work, measured, fit->v, (struct easing) { .loose = 0 });
    loose = factor_make (arena, &t.equations);
    arena_destroy (work);
  }
  measured->held = held;
  return loose;
}

const struct covariance *
covariance_keep (struct arena *arena, struct measured *measured, const struct fit *fit)
{
  struct covariance *kept = ARENA_NEW (arena, struct covariance);
  struct measured *copy = ARENA_NEW (arena, struct measured);
  size_t *unknown = ARENA_ARRAY (arena, measured->places, size_t);
  double *v = ARENA_ARRAY (arena, measured->places, double);
  memcpy (unknown, measured->unknown, measured->places * sizeof *unknown);
  memcpy (v, fit->v, measured->places * sizeof *v);
  *copy = (struct measured) { .places = measured->places, .unknowns = measured->unknowns,
                              .unknown = unknown };
  kept->measured = copy;
  kept->v = v;
  kept->factor = factor_make (arena, &fit->tangent.equations);
  kept->loose = fit_loose_factor (arena, measured, fit);
  return kept;
}

/* NAN: not settled.  */
static double
spread_of (const struct factor *factor, struct arena *scratch, const struct sparse *row)
{
  struct spread spread;
  return factor_spread (factor, scratch, row, 0, &spread)
           ? sqrt (spread_product (&spread, &spread)) : (double) NAN;
}

double
solution_uncertainty (const struct solution *solution, const struct network *network,
                      const struct form *left, const struct form *right)
{
  const struct covariance *covariance = solution->covariance;
  (void) network;
  if (!covariance) {
    return 0;
  }
  const struct form none = { 0, NULL };
  struct figure figure = { .left = *left, .right = right ? *right : none, .closure = NOWHERE };
  struct arena *scratch = arena_create ();
  struct sparse row = sparse_make (scratch, 1, left->count + figure.right.count);
  double u = (double) NAN;
  bool nothing = right && !(fabs (form_value (right, covariance->v)) > 0);
  if (!nothing) {
    figure_row (covariance->measured, &figure, covariance->v, 1, &row);
  }
  if (!nothing && covariance->loose) {
    u = spread_of (covariance->loose, scratch, &row);
  }
  if (!nothing && isnan (u)) {
    u = spread_of (covariance->factor, scratch, &row);
  }
  arena_destroy (scratch);
  return u;
}
