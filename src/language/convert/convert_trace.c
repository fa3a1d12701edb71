#include "config.h"
#include "language/convert/convert_part.h"

#include <math.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

static bool
trace_needs_gas (struct conversion *c)
{
  fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->at,
                "a share by mass needs the gas the trace is in", NULL);
  fault_hint (c->ev->fault, "... of %s within GAS in %s", c->value->part, c->unit_text);
  return false;
}

static bool
trace_oxygen (struct conversion *c, double *factor)
{
  const struct value *v = c->value;
  *factor = 1;
  if (isnan (c->state.oxygen)) {
    return true;
  }
  if (isnan (v->oxygen)) {
    fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->at,
                  "the oxygen the figure was measured at is not said", NULL);
    fault_hint (c->ev->fault, "... of %s at 5 %%O2 in ...", v->part);
    return false;
  }
  return oxygen_factor (c, v->oxygen, c->what, factor);
}

/* The factor from the oxygen a trace was stated at to that of the stream it is within.  */
static bool
trace_oxygen_of_stream (struct conversion *c, double *factor)
{
  const struct value *v = c->value;
  const struct composition *gas = v->stream.gas;
  *factor = 1;
  if (isnan (v->oxygen)) {
    return true;
  }
  double y = composition_fraction (gas, c->ev->session->water);
  double oxygen = composition_fraction (gas, c->ev->session->oxygen) / (1 - y);
  if (!(oxygen > 0)) {
    return fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->subject_at,
                         "the figure is at a reference oxygen, and the stream states none", NULL);
  }
  c->state.oxygen = oxygen;
  bool done = oxygen_factor (c, v->oxygen, c->what, factor);
  c->state.oxygen = UNSTATED;
  return done;
}

/* The flow of a trace that is within a stream.  A figure of a wet gas says which gas it is of.  */
static bool
trace_flow (struct conversion *c)
{
  const struct value *v = c->value;
  struct value part = *v;
  if (!v->of_stream) {
    return conversion_mismatch (c, "a concentration is told as a share or per volume");
  }
  if (composition_fraction (v->stream.gas, c->ev->session->water) > 0
      && !(v->words & (WORD_DRY | WORD_WET))) {
    fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->subject_at,
                  "the stream is wet: is the figure one of the dry gas or of the wet?", NULL);
    fault_hint (c->ev->fault, "100 ppm dry of %s within ..., or 100 ppm wet of %s within ...",
                v->part, v->part);
    return false;
  }
  double factor;
  if (!isnan (c->state.oxygen)) {
    return conversion_mismatch (c, "a reference oxygen belongs to a concentration");
  }
  if (!trace_oxygen_of_stream (c, &factor)) {
    return false;
  }
  part.kind = VALUE_PART;
  part.flow = v->stream.flow;
  part.moles = factor * v->si * v->stream.moles;
  part.mass = part.moles * v->species.at[0]->molar_mass;
  c->value = &part;
  bool done = convert_part (c);
  c->value = v;
  return done;
}

/* The gas a trace is within, dry if the target says so, and the trace's share of it.  */
static const struct composition *
trace_host (struct conversion *c, double *x, struct standing *standing)
{
  const struct species *water = c->ev->session->water;
  const struct composition *host = gas_composition (c->ev, c->value->gas, c->subject_at);
  double y = host ? composition_fraction (host, water) : 0;
  if (y > 0 && y < 1 && (c->words & WORD_DRY)) {
    *x /= 1 - y;
    host = composition_wetted (c->ev->arena, host, water, 0, c->ev->fault);
  }
  standing->moisture = host && y > 0 ? moisture_word (c->ev, host) : NULL;
  return host;
}

bool
convert_trace (struct conversion *c)
{
  const struct value *v = c->value;
  const struct unit *u = c->unit;
  struct standing standing = { c->what, NULL, conversion_oxygen (c, NULL) };
  double per, M, factor;
  if (!unit_is_concentration (u) && !unit_is_emission (u)) {
    return trace_flow (c);
  }
  if (!counted_as (c, v->species.at[0], &per, &M)) {
    return false;
  }
  if (unit_is_emission (u)) {
    return trace_emission (c, per * M);
  }
  if (!trace_oxygen (c, &factor)) {
    return false;
  }
  double x = v->si * factor;
  record_corrected (c, v->si, factor);
  if (v->measure.ratio == RATIO_MASS) {
    double w = x * per * M / v->species.at[0]->molar_mass;
    if (c->counted_as) {
      RECORD (c->ev, .name = "counted as", .of = c->counted_as->text, .formula = "w = w_0 k M/M_c",
              .value = w, .unit = "kg/kg", .source = STEP_DEFINITION,
              STEP_SYMBOLS (SYMBOL ("w_0", x, "kg/kg"), SYMBOL ("k", per, "mol/mol"),
                            CONSTANT ("M", M, "kg/mol", STEP_WEIGHTS),
                            CONSTANT ("M_c", v->species.at[0]->molar_mass, "kg/mol",
                                      STEP_WEIGHTS)));
    }
    return u->ratio == RATIO_MASS ? conversion_add (c, w, &standing) : trace_needs_gas (c);
  }
  const struct composition *host = NULL;
  if (v->gas && !(host = trace_host (c, &x, &standing))) {
    return false;
  }
  if (u->ratio == RATIO_MASS && !host) {
    return trace_needs_gas (c);
  }
  if (u->ratio == RATIO_MASS) {
    double w = x * per * M / host->molar_mass;
    record_mass_share (c, host, x, per * M, w);
    return conversion_add (c, w, &standing);
  }
  if (u->ratio == RATIO_ENERGY) {
    return conversion_mismatch (c, "a concentration is told as a share or per volume");
  }
  if (u->ratio != RATIO_NONE) {
    standing.basis = conversion_oxygen (c, "by amount: the same at any temperature and pressure");
    record_counted (c, x, per, "1", x * per);
    return conversion_add (c, x * per, &standing);
  }
  struct stream own = { .T = v->T, .p = v->p, .Z = UNSTATED };
  struct counted_volume volume;
  if (!conversion_volume (c, host, &own, &volume)) {
    return false;
  }
  standing.basis = conversion_oxygen (c, volume.basis);
  bool by_mass = dimension_equal (u->dimension, DIMENSION_DENSITY);
  double si = x * per * (by_mass ? M : 1) / volume.Vm;
  record_per_volume (c, x, by_mass ? per * M : per, volume.Vm, si);
  return conversion_add (c, si, &standing);
}
