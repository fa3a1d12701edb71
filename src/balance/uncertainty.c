/* JCGM 100:2008, equation 13, with the full covariance of the fit: u^2 = f' C f, which is the
   square of the spread of f.                                                                    */
#include "config.h"
#include "balance/uncertainty.h"

#include <math.h>
#include <string.h>
#include "balance/factor.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/vector.h"

struct covariance {
  const struct measured *measured;       /* its numbers only; the network is the caller's */
  const double *v;                       /* by column */
  const struct factor *factor;
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

const struct covariance *
covariance_keep (struct arena *arena, const struct measured *measured, const struct fit *fit)
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
  return kept;
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
  struct spread spread;
  double u = (double) NAN;
  bool nothing = right && !(fabs (form_value (right, covariance->v)) > 0);
  if (!nothing) {
    figure_row (covariance->measured, &figure, covariance->v, 1, &row);
  }
  if (!nothing && factor_spread (covariance->factor, scratch, &row, 0, &spread)) {
    u = sqrt (spread_product (&spread, &spread));
  }
  arena_destroy (scratch);
  return u;
}
