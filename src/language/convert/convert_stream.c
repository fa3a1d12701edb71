#include "config.h"
#include "language/convert/convert.h"

#include <math.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

static void
record_dried (const struct conversion *c, const struct stream *wet, const struct stream *dry)
{
  const char *unit = moles_unit (wet->flow);
  RECORD (c->ev, .name = "amount without its water", .formula = "n_dry = n (1 - y)",
          .value = dry->moles, .unit = unit, .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n", wet->moles, unit),
                        SYMBOL ("y", composition_fraction (wet->gas, c->ev->session->water),
                                "mol/mol")));
}

/* The stream as the target wants it counted: without its water, or with the moisture of the
   target's state; its dry flow stays.                                                           */
static bool
as_counted (struct conversion *c, struct stream *stream)
{
  const struct species *water = c->ev->session->water;
  if ((c->words & WORD_DRY) && composition_fraction (stream->gas, water) > 0) {
    const struct stream wet = *stream;
    if (!stream_with_water (c->ev->arena, &wet, water, 0, stream, c->ev->fault)) {
      fault_place (c->ev->fault, c->at);
      return false;
    }
    record_wetting (c->ev, wet.gas, stream->gas);
    record_dried (c, &wet, stream);
    return true;
  }
  if (!c->has_state || c->state.moisture == MOISTURE_NONE || (c->words & WORD_DRY)) {
    return true;
  }
  struct state moisture = c->state;
  struct stream wet = *stream;
  moisture.Z = UNSTATED;
  if (!state_apply (c->ev, &moisture, &wet, c->at)) {
    return false;
  }
  stream->gas = wet.gas;
  stream->moles = wet.moles;
  return true;
}

static bool
flow_mismatch (struct conversion *c, bool flow)
{
  return conversion_mismatch (c, flow ? "this is an amount, not a flow: divide it by a time"
                                      : "this is a flow, not an amount: multiply it by a time");
}

/* Every component in turn: a composition.  */
static bool
each_part (struct conversion *c, struct value *part, const struct composition *gas)
{
  const char *whole = c->what;
  double per = part->of_stream ? part->stream.moles : 1;
  const struct value *value = c->value;
  part->kind = VALUE_PART;
  c->value = part;
  for (size_t i = 0; i < gas->count; i++) {
    const struct species *species = gas->species[i];
    if ((c->words & WORD_DRY) && species == c->ev->session->water) {
      continue;
    }
    part->species = (struct species_set) { { species }, 1, NULL };
    part->part = species->key;
    part->moles = per * gas->fraction[i];
    part->mass = part->moles * species->molar_mass;
    if (c->ev->describe) {
      c->what = arena_format (c->ev->arena, "%s of %s", species->key, whole);
    }
    if (!convert_part (c)) {
      return false;
    }
  }
  c->what = whole;
  c->value = value;
  return true;
}

bool
convert_stream (struct conversion *c)
{
  const struct value *v = c->value;
  struct measure m = measure_of_unit (c->unit);
  bool flow;
  enum flow_basis basis = flow_basis_of (&m, &flow);
  struct stream stream = v->stream;
  if (unit_is_concentration (c->unit)) {
    struct value part = *v;
    part.of_stream = true;
    part.flow = stream.flow;
    return each_part (c, &part, stream.gas);
  }
  if (basis == FLOW_NONE) {
    return conversion_mismatch (c, "a stream is told as a flow or an amount of mass, moles, "
                                "volume or energy, or as shares");
  }
  if (flow != stream.flow) {
    return flow_mismatch (c, flow);
  }
  if (basis == FLOW_ENERGY) {
    return convert_energy (c, stream.gas, stream.moles);
  }
  if (!as_counted (c, &stream)) {
    return false;
  }
  struct standing standing = { c->what, c->ev->describe ? moisture_word (c->ev, stream.gas) : NULL,
                               NULL };
  if (c->ev->describe && *standing.moisture == 'w' && c->ev->result) {
    standing.basis = arena_format (c->ev->arena, "water %s",
                                   share_text (c->ev->arena,
                                               composition_fraction (stream.gas,
                                                                     c->ev->session->water)));
  }
  if (basis == FLOW_MASS) {
    double M = constants_molar_mass (c->ev, stream.gas), mass = stream.moles * M;
    if (c->ev->workings) {
      record_molar_mass (c->ev, stream.gas, c->what);
      RECORD (c->ev, .name = "mass of", .of = c->what, .formula = "m = n M", .value = mass,
              .unit = mass_unit (flow), .source = STEP_DEFINITION,
              STEP_SYMBOLS (SYMBOL ("n", stream.moles, moles_unit (flow)),
                            SYMBOL ("M", M, "kg/mol")));
    }
    return conversion_add (c, mass, &standing);
  }
  if (basis == FLOW_MOLAR) {
    return conversion_add (c, stream.moles, &standing);
  }
  struct counted_volume volume;
  if (!conversion_volume (c, stream.gas, &v->stream, &volume)) {
    return false;
  }
  standing.basis = volume.basis && standing.basis
                     ? arena_format (c->ev->arena, "%s, %s", volume.basis, standing.basis)
                     : volume.basis;
  double volume_of_all = stream.moles * volume.Vm;
  RECORD (c->ev, .name = "volume of", .of = c->what, .formula = "q = n V", .value = volume_of_all,
          .unit = volume_unit (flow), .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n", stream.moles, moles_unit (flow)),
                        SYMBOL ("V", volume.Vm, "m3/mol")));
  return conversion_add (c, volume_of_all, &standing);
}

bool
convert_gas (struct conversion *c)
{
  const struct value *v = c->value;
  struct measure m = measure_of_unit (c->unit);
  bool flow;
  if (!unit_is_concentration (c->unit)) {
    if (flow_basis_of (&m, &flow) == FLOW_NONE) {
      return conversion_mismatch (c, "a gas without an amount is told in shares: mol%, mass%");
    }
    fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->at,
                  arena_format (c->ev->arena, "'%s' is a gas without an amount", c->what), NULL);
    fault_hint (c->ev->fault, "1 %s of %s ...", c->unit_text, c->what);
    return false;
  }
  const struct composition *gas = gas_composition (c->ev, v->gas, c->subject_at);
  if (!gas) {
    return false;
  }
  struct value part = *v;
  part.of_stream = false;
  return each_part (c, &part, gas);
}
