#include "config.h"
#include "stream/blend.h"

#include <math.h>
#include "gas/composition.h"
#include "property/heat_capacity.h"
#include "stream/stream.h"
#include "support/fault.h"
#include "units/workings.h"

/* Steps at most (halving alone needs about 50) and the relative step at which T has settled.  */
enum { STEPS_MOST = 200 };
static const double settled = 1e-14;

/* A stream, and its enthalpy at its own temperature.  */
struct side { const struct stream *stream; struct ideal_heat start; };

/* What is missing from the balance at T (J or W), and its derivative by T.  */
struct balance { double excess, slope; };

static bool
start_side (struct property_tables *tables, const struct stream *s, struct side *side,
            struct fault *fault)
{
  side->stream = s;
  return heat_of_gas (tables, s->gas, s->T, &side->start, NULL, fault);
}

static bool
balance_at (struct property_tables *tables, const struct side *a, const struct side *b, double T,
            struct balance *balance, struct fault *fault)
{
  struct ideal_heat of_a, of_b;
  if (!heat_of_gas (tables, a->stream->gas, T, &of_a, NULL, fault)
      || !heat_of_gas (tables, b->stream->gas, T, &of_b, NULL, fault))
    return false;
  balance->excess = a->stream->moles * (of_a.enthalpy - a->start.enthalpy)
    + b->stream->moles * (of_b.enthalpy - b->start.enthalpy);
  balance->slope = a->stream->moles * of_a.cp + b->stream->moles * of_b.cp;
  return true;
}

/* Newton's method; heat capacities are above zero, so that T lies between those of the streams,
   and a step that leaves what is known to hold it is replaced by halving that.                  */
static bool
solve (struct property_tables *tables, const struct side *a, const struct side *b, double *found,
       struct fault *fault)
{
  double Ta = a->stream->T, Tb = b->stream->T;
  double heat_a = a->stream->moles * a->start.cp, heat_b = b->stream->moles * b->start.cp;
  double least = fmin (Ta, Tb), most = fmax (Ta, Tb);
  double T = (heat_a * Ta + heat_b * Tb) / (heat_a + heat_b);
  for (int i = 0; i < STEPS_MOST; i++) {
    struct balance at;
    if (!(T >= least && T <= most))
      T = 0.5 * (least + most);
    if (!balance_at (tables, a, b, T, &at, fault))
      return false;
    if (at.excess > 0)
      most = T;
    else
      least = T;
    double next = T - at.excess / at.slope;
    bool done = fabs (next - T) <= settled * T || most - least <= settled * T;
    if (done) {
      *found = T;
      return true;
    }
    T = next;
  }
  return fault_set (fault, MESSAGE_NOT_CONVERGED, "the temperature of the blend", NULL);
}

static const struct species *
first_outside (struct property_tables *tables, const struct side *a, const struct side *b,
               double T, struct fault *fault)
{
  struct ideal_heat of_a = a->start, of_b = b->start;
  if (a->start.outside != NULL || b->start.outside != NULL)
    return a->start.outside != NULL ? a->start.outside : b->start.outside;
  if (!heat_of_gas (tables, a->stream->gas, T, &of_a, NULL, fault)
      || !heat_of_gas (tables, b->stream->gas, T, &of_b, NULL, fault))
    return NULL;
  return of_a.outside != NULL ? of_a.outside : of_b.outside;
}

/* The enthalpies at the three temperatures, counted from 298.15 K.  */
static void
record (struct workings *workings, struct property_tables *tables, const struct stream *a,
        const struct stream *b, double T)
{
  struct ideal_heat a_before, a_after, b_before, b_after;
  struct fault unheard;
  fault_init (&unheard, workings->arena);
  if (!heat_of_gas (tables, a->gas, a->T, &a_before, NULL, &unheard)
      || !heat_of_gas (tables, b->gas, b->T, &b_before, NULL, &unheard)
      || !heat_of_gas (tables, a->gas, T, &a_after, NULL, &unheard)
      || !heat_of_gas (tables, b->gas, T, &b_after, NULL, &unheard))
    return;
  workings_add (workings, &(struct step) {
      .name = "temperature of the blend",
      .formula = "n_a H_a + n_b H_b = n_a K_a + n_b K_b",
      .solved = "Newton's steps: H at each side's own temperature, K at that of the blend",
      .value = T, .unit = "K",
      .source = "balance of ideal-gas enthalpies, tables/cp_ideal.tsv",
      STEP_SYMBOLS (SYMBOL ("n_a", a->moles, a->flow ? "mol/s" : "mol"),
                    SYMBOL ("n_b", b->moles, b->flow ? "mol/s" : "mol"),
                    SYMBOL ("H_a", a_before.enthalpy, "J/mol"),
                    SYMBOL ("H_b", b_before.enthalpy, "J/mol"),
                    SYMBOL ("K_a", a_after.enthalpy, "J/mol"),
                    SYMBOL ("K_b", b_after.enthalpy, "J/mol")) });
}

bool
stream_blend_temperature (struct property_tables *tables, const struct stream *a,
                          const struct stream *b, struct blend_temperature *blend,
                          struct workings *workings, struct fault *fault)
{
  struct blend_temperature found = { .T = (double) NAN, .outside = NULL };
  struct side of_a, of_b;
  bool a_is_nothing = !(a->moles > 0), b_is_nothing = !(b->moles > 0);
  if (a_is_nothing || b_is_nothing)
    found.T = a_is_nothing ? b->T : a->T;
  else if (isnan (a->T) || isnan (b->T))
    found.T = (double) NAN;
  else if (!(fabs (a->T - b->T) > 0))
    found.T = a->T;
  else {
    if (!start_side (tables, a, &of_a, fault) || !start_side (tables, b, &of_b, fault)
        || !solve (tables, &of_a, &of_b, &found.T, fault))
      return false;
    found.outside = first_outside (tables, &of_a, &of_b, found.T, fault);
    if (workings != NULL)
      record (workings, tables, a, b, found.T);
  }
  *blend = found;
  return true;
}
