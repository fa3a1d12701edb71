/* The gas y keeps its gas root.  A drop of composition w at the same T and p that is a stationary
   point of the tangent plane distance has

     W_i = y_i phi_i(y)/phi_i(w),   w_i = W_i/sum W

   (M. L. Michelsen, Fluid Phase Equilibria 9 (1982) 1-19), and gains on the gas by ln sum W.  The
   dew point is where the gain is zero: both phases have the same fugacities.  For one component
   that is Maxwell's condition.

   A drop is known by its b and root_a alone (eos/cubic.h), so the stationary point is sought in two
   unknowns, by substitution and Newton's steps.  T comes down from above the dew point until a
   drop gains; then the crossing is closed in on.                                                */
#include "config.h"
#include "eos/dew_point.h"

#include <float.h>
#include <assert.h>
#include <math.h>
#include <stddef.h>

#include "eos/cubic.h"
#include "eos/eos.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"

enum { SUBSTITUTIONS = 4, ITERATIONS = 120, HALVINGS = 200 };

static const double pressure_least = 1, pressure_most = 1e9;              /* Pa */
static const double step_first = 0.02, step_least = 1e-12;                /* of T, coming down */
static const double same_phase = 1e-6;                                    /* relative */
static const double converged = 1e-13;

/* What a phase is known by.  */
struct point { double b, root_a; };

struct search {
  const struct composition *gas;
  double p;
  struct cubic_pure *pure;
  /* At T: */
  double T;
  double *root_a;
  struct point feed;
  struct cubic_fugacity vapour;
  /* Of the drop evaluated last: */
  double *W;
};

struct drop { double gain; struct point at; bool found; };

/* ---- The gas ---- */

/* G. M. Wilson, A modified Redlich-Kwong equation of state, 65th National Meeting of the AIChE,
   Cleveland (1968): ln K_i = ln(pc/p) + 5.373 (1 + w)(1 - Tc/T).                                */
static double
wilson_ln_K (const struct species *s, double T, double p)
{
  return log (s->critical_pressure / p)
         + 5.373 * (1 + s->acentric_factor) * (1 - s->critical_temperature / T);
}

/* Above the dew point as Wilson's K values have it: sum y_i/K_i = 1, which falls with T.  */
static double
temperature_above (const struct composition *gas, double p)
{
  double low = 1, high = 0;

  for (size_t i = 0; i < gas->count; i++) {
    high = fmax (high, 1.2 * gas->species[i]->critical_temperature);
  }
  for (int n = 0; n < 50; n++) {
    const double T = 0.5 * (low + high);
    double sum = 0;

    for (size_t i = 0; i < gas->count; i++) {
      sum += gas->fraction[i] * exp (-wilson_ln_K (gas->species[i], T, p));
    }
    if (sum > 1) {
      low = T;
    } else {
      high = T;
    }
  }
  return 1.1 * high + 5;
}

/* False where the gas is a liquid at T.  */
static bool
set_temperature (struct search *s, double T)
{
  s->T = T;
  s->feed = (struct point) { 0, 0 };
  for (size_t i = 0; i < s->gas->count; i++) {
    s->root_a[i] = cubic_root_a (&s->pure[i], T);
    s->feed.b += s->gas->fraction[i] * s->pure[i].b;
    s->feed.root_a += s->gas->fraction[i] * s->root_a[i];
  }
  return cubic_fugacity_of (&(struct cubic_fluid) { T, s->p, s->feed.b, s->feed.root_a }, false,
                            &s->vapour);
}

/* ---- A drop ---- */

/* b and root_a of the w that amounts W = exp (ln W) stand for; gives back ln sum W.  */
static double
mean_of (struct search *s, double ln_W[], struct point *mean)
{
  double most = -HUGE_VAL, sum = 0;

  for (size_t i = 0; i < s->gas->count; i++) {
    most = fmax (most, ln_W[i]);
  }
  *mean = (struct point) { 0, 0 };
  for (size_t i = 0; i < s->gas->count; i++) {
    const double W = exp (ln_W[i] - most);

    ln_W[i] = W;
    sum += W;
    mean->b += W * s->pure[i].b;
    mean->root_a += W * s->root_a[i];
  }
  assert (sum >= 1);                    /* the largest W is 1 */
  mean->b /= sum;
  mean->root_a /= sum;
  return most + log (sum);
}

/* The next drop after the one AT, by substitution; *LIQUID is the one AT.  */
static bool
substitute (struct search *s, struct point at, struct cubic_fugacity *liquid, struct point *next,
            double *gain)
{
  const struct cubic_fugacity *v = &s->vapour, *l = liquid;

  if (!(at.b > 0 && at.root_a > 0)
      || !cubic_fugacity_of (&(struct cubic_fluid) { s->T, s->p, at.b, at.root_a }, true,
                             liquid)) {
    return false;
  }
  for (size_t i = 0; i < s->gas->count; i++) {
    s->W[i] = log (s->gas->fraction[i]) + v->free - l->free + (v->by_b - l->by_b) * s->pure[i].b
              + (v->by_root_a - l->by_root_a) * s->root_a[i];
  }
  *gain = mean_of (s, s->W, next);
  return isfinite (*gain);
}

static double
distance (struct point from, struct point to)
{
  return hypot (to.b / from.b - 1, to.root_a / from.root_a - 1);
}

/* Where Newton's step from AT leads, NEXT being what substitution makes of it: a root of
   next(at) - at in two unknowns, with differences for derivatives.                              */
static bool
newton_step (struct search *s, struct point at, struct point next, struct point *to)
{
  const double h = 1e-6;
  const struct point moved[2] = { { at.b * (1 + h), at.root_a }, { at.b, at.root_a * (1 + h) } };
  double J[2][2], determinant, gain;
  const double f[2] = { next.b / at.b - 1, next.root_a / at.root_a - 1 };
  struct cubic_fugacity liquid;

  for (int k = 0; k < 2; k++) {
    struct point then;
    if (!substitute (s, moved[k], &liquid, &then, &gain)) {
      return false;
    }
    J[0][k] = (then.b - next.b) / (at.b * h) - (k == 0);
    J[1][k] = (then.root_a - next.root_a) / (at.root_a * h) - (k == 1);
  }
  determinant = J[0][0] * J[1][1] - J[0][1] * J[1][0];
  to->b = at.b * (1 - (f[0] * J[1][1] - f[1] * J[0][1]) / determinant);
  to->root_a = at.root_a * (1 - (f[1] * J[0][0] - f[0] * J[1][0]) / determinant);
  return isfinite (to->b) && isfinite (to->root_a) && to->b > 0 && to->root_a > 0;
}

/* The stationary drop reached from AT.  Newton's step is taken where it leads nearer, substitution
   otherwise.  What is no denser than the gas, or the gas itself, is no drop.                    */
static struct drop
drop_from (struct search *s, struct point at)
{
  const struct drop none = { -HUGE_VAL, at, false };
  struct cubic_fugacity liquid;
  struct point next, to, after;
  double gain, gain_to;

  if (!substitute (s, at, &liquid, &next, &gain)) {
    return none;
  }
  for (int n = 0; n < ITERATIONS && distance (at, next) > converged; n++) {
    struct cubic_fugacity there;
    const double away = distance (at, next);

    if (n >= SUBSTITUTIONS && newton_step (s, at, next, &to)
        && substitute (s, to, &there, &after, &gain_to) && distance (to, after) < 0.5 * away) {
      at = to;
    } else {
      at = next;
    }
    if (!substitute (s, at, &liquid, &next, &gain)) {
      return none;
    }
  }
  const double gas_fills = s->feed.b / s->vapour.Z, drop_fills = at.b / liquid.Z;
  if (distance (at, next) > 100 * converged || !(drop_fills > gas_fills * (1 + same_phase))) {
    return none;
  }
  return (struct drop) { gain, at, true };
}

static void
better_of (struct search *s, struct point start, struct drop *best)
{
  const struct drop other = drop_from (s, start);

  if (other.gain > best->gain) {
    *best = other;
  }
}

/* The drops that attract most, by a and by a/b^2, each of one component.  */
static void
from_one_component (struct search *s, struct drop *best)
{
  size_t heaviest = 0, tightest = 0;

  for (size_t i = 1; i < s->gas->count; i++) {
    heaviest = s->root_a[i] > s->root_a[heaviest] ? i : heaviest;
    tightest = s->root_a[i] * s->pure[tightest].b > s->root_a[tightest] * s->pure[i].b ? i
               : tightest;
  }
  better_of (s, (struct point) { s->pure[heaviest].b, s->root_a[heaviest] }, best);
  if (tightest != heaviest) {
    better_of (s, (struct point) { s->pure[tightest].b, s->root_a[tightest] }, best);
  }
}

/* Begins from Wilson's K values, from a drop found at another temperature and, while none gains,
   from single components; keeps the drop that gains most.                                       */
static struct drop
best_drop (struct search *s, const struct drop *last)
{
  struct drop best;
  struct point start;

  for (size_t i = 0; i < s->gas->count; i++) {
    s->W[i] = log (s->gas->fraction[i]) - wilson_ln_K (s->gas->species[i], s->T, s->p);
  }
  mean_of (s, s->W, &start);
  best = drop_from (s, start);
  if (last->found) {
    better_of (s, last->at, &best);
  }
  if (!(best.gain > 0)) {
    from_one_component (s, &best);
  }
  return best;
}

/* ---- The crossing ---- */

/* Around a dew point: no drop gains at HIGH, one does at LOW.  */
struct bracket { double high, low; struct drop at_high, at_low; };

/* Between a temperature with no drop, or one that loses, and one with a drop that gains.  */
static double
between (const struct bracket *k, bool halve)
{
  const double span = k->high - k->low, u = k->at_low.gain, v = k->at_high.gain;

  return halve || !k->at_high.found ? k->low + 0.5 * span
                                    : k->low + span * fmin (0.999, fmax (0.001, u / (u - v)));
}

/* Regula falsi, and every third time a halving.  The drop at the end is that of LOW.  */
static bool
close_in (struct search *s, struct bracket *k)
{
  for (int n = 0; n < HALVINGS; n++) {
    if (k->at_low.gain <= 1e-12 || k->high - k->low <= 4 * DBL_EPSILON * k->high) {
      return k->at_low.gain <= 1e-8;
    }
    const double T = between (k, n % 3 == 2);
    struct drop drop = { -HUGE_VAL, k->at_low.at, false };

    if (set_temperature (s, T)) {
      drop = drop_from (s, k->at_low.at);
      if (!(drop.gain >= 0)) {
        drop = best_drop (s, drop.found ? &drop : &k->at_high);
      }
    }
    if (drop.gain >= 0) {
      k->low = T;
      k->at_low = drop;
    } else {
      k->high = T;
      k->at_high = drop;
    }
  }
  return false;
}

/* The highest gain near T, where no drop was seen to gain: just below the highest pressure with a
   dew point one does so within a narrow span only.  True if one gains; then *K is around the dew
   point above it.                                                                               */
static bool
climb (struct search *s, double T, struct bracket *k)
{
  const double golden = 0.6180339887498949;
  double low = T * (1 - step_first), high = T * (1 + step_first);
  struct drop last = k->at_high;

  while (high - low > 1e-6 * T) {
    const double upper = low + golden * (high - low), lower = high - golden * (high - low);
    const struct drop at_upper = set_temperature (s, upper) ? best_drop (s, &last) : last;
    const struct drop at_lower = set_temperature (s, lower) ? best_drop (s, &at_upper) : at_upper;

    last = at_upper.gain > at_lower.gain ? at_upper : at_lower;
    if (last.gain > 0) {
      *k = (struct bracket) { T * (1 + step_first), at_upper.gain > 0 ? upper : lower,
                              { -HUGE_VAL, last.at, false }, last };
      return true;
    }
    if (at_upper.gain > at_lower.gain) {
      low = lower;
    } else {
      high = upper;
    }
  }
  return false;
}

/* Comes down in T until a drop gains.  Where the gas becomes a liquid the step is halved.  */
static bool
come_down (struct search *s, struct bracket *k)
{
  const double top = temperature_above (s->gas, s->p);
  double T = top, step = step_first, best_T = 0, best_gain = -HUGE_VAL;
  struct drop last = { -HUGE_VAL, { 0, 0 }, false };

  k->high = 0;
  while (step > step_least && T > 0.1 * top) {
    const double next = k->high > 0 ? T * (1 - step) : T;
    struct drop drop;

    if (!set_temperature (s, next)) {
      if (!(k->high > 0)) {
        return false;
      }
      step /= 2;
      continue;
    }
    drop = best_drop (s, &last);
    if (drop.gain > 0 && k->high > 0) {
      k->low = next;
      k->at_low = drop;
      return true;
    }
    if (drop.gain > 0) {                     /* not yet above it */
      if (T > 8 * top) {
        return false;
      }
      T *= 1.2;
      continue;
    }
    if (drop.found && drop.gain > best_gain) {
      best_gain = drop.gain;
      best_T = next;
    }
    T = k->high = next;
    k->at_high = last = drop;
  }
  return best_T > 0 && climb (s, best_T, k);
}

/* ---- All of it ---- */

static bool
search_begin (struct search *s, struct arena *arena, const struct composition *gas,
              struct fault *fault)
{
  size_t n = 0;
  struct part *parts = ARENA_ARRAY (arena, gas->count, struct part);

  *s = (struct search) { .gas = NULL };
  for (size_t i = 0; i < gas->count; i++) {
    parts[n] = (struct part) { gas->species[i], gas->fraction[i] };
    n += gas->fraction[i] > 0;
  }
  s->gas = composition_make (arena, n, parts, fault);
  s->pure = ARENA_ARRAY (arena, n, struct cubic_pure);
  s->root_a = ARENA_ARRAY (arena, n, double);
  s->W = ARENA_ARRAY (arena, n, double);
  for (size_t i = 0; i < n; i++) {
    s->pure[i] = cubic_pure_of (s->gas->species[i]);
  }
  return s->gas != NULL;
}

/* Mole fractions of the drop, a place for each component of GAS.  */
static const double *
liquid_of (struct search *s, struct arena *arena, const struct composition *gas,
           const struct bracket *k)
{
  double *liquid = ARENA_ARRAY (arena, gas->count, double), sum = 0;
  struct cubic_fugacity fugacity;
  struct point next;
  double gain;

  if (!set_temperature (s, k->low) || !substitute (s, k->at_low.at, &fugacity, &next, &gain)) {
    return NULL;
  }
  for (size_t i = 0; i < s->gas->count; i++) {
    sum += s->W[i];
  }
  for (size_t i = 0, n = 0; i < gas->count; i++) {
    liquid[i] = gas->fraction[i] > 0 ? s->W[n++] / sum : 0;
  }
  return liquid;
}

static bool
can_be_asked (const struct composition *gas, double p, struct fault *fault)
{
  const char *lacking;

  if (!(p >= pressure_least && p <= pressure_most)) {
    return fault_set (fault, MESSAGE_RANGE, "a dew point is worked out from 1 Pa to 1 GPa", NULL);
  }
  if (!equation_peng_robinson.covers (gas, &lacking)) {
    fault_set (fault, MESSAGE_MODEL_LACKS, equation_peng_robinson.name, lacking);
    fault_hint (fault, "a dew point needs the critical point of every component; take %s for one "
                "that has it", lacking);
    return false;
  }
  return true;
}

static bool
no_dew_point (struct fault *fault)
{
  return fault_set (fault, MESSAGE_NO_DEW_POINT,
                    "at this pressure it does not part into gas and liquid at any temperature",
                    "ask at a lower pressure");
}

/* Two fluids at very high pressure may change over in density: what parts from the gas then stops
   being a drop at one temperature, still gaining there.  That is no dew point.                  */
bool
dew_point_of (struct arena *arena, const struct composition *gas, double p,
              struct dew_point *dew, struct fault *fault)
{
  struct search s;
  struct bracket k;
  const double *liquid;

  if (!can_be_asked (gas, p, fault) || !search_begin (&s, arena, gas, fault)) {
    return false;
  }
  s.p = p;
  if (!come_down (&s, &k)) {
    return no_dew_point (fault);
  }
  if (!close_in (&s, &k)) {
    return k.at_high.found ? fault_set (fault, MESSAGE_NOT_CONVERGED, "the dew point", NULL)
                           : no_dew_point (fault);
  }
  if ((liquid = liquid_of (&s, arena, gas, &k)) == NULL) {
    return fault_set (fault, MESSAGE_NOT_CONVERGED, "the dew point", NULL);
  }
  *dew = (struct dew_point) { k.low, liquid };
  return true;
}
