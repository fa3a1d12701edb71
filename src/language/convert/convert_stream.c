#include "config.h"
#include "language/convert/convert.h"

#include <math.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

/* The stream as the target wants it counted: without its water, or with the moisture of the
   target's state; its dry flow stays.                                                           */
static bool
as_counted (struct conversion *c, struct stream *stream)
{
  const struct species *water = c->ev->session->water;
  if ((c->words & WORD_DRY) && composition_fraction (stream->gas, water) > 0) {
    if (!stream_with_water (c->ev->arena, stream, water, 0, stream, c->ev->fault)) {
      fault_place (c->ev->fault, c->at);
      return false;
    }
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
    part->species = (struct species_set) { { species }, 1 };
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
    return conversion_add (c, stream.moles * constants_molar_mass (c->ev, stream.gas),
                           &standing);
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
  return conversion_add (c, stream.moles * volume.Vm, &standing);
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
