#include "config.h"
#include "language/convert/convert_part.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/record.h"
#include "language/evaluate/unmixed.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

/* The share of a component in the gas it is in, before the target has its say.  */
static void
record_share (const struct conversion *c, double share)
{
  const struct value *v = c->value;
  if (!v->of_stream || !(v->stream.moles > 0)) {
    return;                              /* it is what there is of it in a mole */
  }
  RECORD (c->ev, .name = "share of", .of = v->part, .formula = "x = n_c/n", .value = share,
          .unit = "mol/mol", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n_c", v->moles, moles_unit (v->flow)),
                        SYMBOL ("n", v->stream.moles, moles_unit (v->stream.flow))));
}

bool
host_of (struct conversion *c, struct host *host)
{
  const struct value *v = c->value;
  const struct species *water = c->ev->session->water;
  host->state = (struct stream) { .T = v->T, .p = v->p, .Z = UNSTATED };
  if (v->of_stream) {
    host->gas = v->stream.gas;
    host->share = v->stream.moles > 0 ? v->moles / v->stream.moles
                                      : composition_fraction (host->gas, v->species.at[0]);
    host->state = v->stream;
  } else {
    host->gas = gas_composition (c->ev, v->gas, c->subject_at);
    host->share = v->moles;
  }
  if (!host->gas) {
    return false;
  }
  double y = composition_fraction (host->gas, water), y_target = y;
  if (c->words & WORD_DRY) {
    y_target = 0;
  } else if (c->has_state && c->state.moisture != MOISTURE_NONE) {
    double T = isnan (c->state.T) ? host->state.T : c->state.T;
    double p = isnan (c->state.p) ? host->state.p : c->state.p;
    if (!state_water (c->ev, &c->state, &(struct moist_place) { T, p, host->gas }, &y_target)) {
      fault_place (c->ev->fault, c->at);
      return false;
    }
  }
  record_share (c, host->share);
  if (fabs (y_target - y) <= 1e-15) {
    return true;
  }
  if (y >= 1) {
    return fault_set_at (c->ev->fault, MESSAGE_ONLY_WATER, c->at, NULL, NULL);
  }
  const double wet = host->share;
  const bool of_water = v->species.at[0] == water;
  host->share = of_water ? (y_target > 0 ? y_target : host->share / (1 - y))
                         : host->share * (1 - y_target) / (1 - y);
  RECORD (c->ev, .name = "share at the water of the target",
          .formula = of_water && y_target > 0 ? "x = y_t"
                     : of_water ? "x = x_w/(1 - y)" : "x = x_w (1 - y_t)/(1 - y)",
          .value = host->share, .unit = "mol/mol", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("x_w", wet, "mol/mol"), SYMBOL ("y_t", y_target, "mol/mol"),
                        SYMBOL ("y", y, "mol/mol")));
  host->gas = composition_wetted (c->ev->arena, host->gas, water, y_target, c->ev->fault);
  fault_place (c->ev->fault, c->at);
  return host->gas != NULL;
}

double
dry_oxygen (struct conversion *c, const struct composition *gas)
{
  double y = composition_fraction (gas, c->ev->session->water);
  const struct value *v = c->value;
  const struct composition *wet = v->of_stream ? v->stream.gas : v->gas->closed;
  if (c->ev->settings->trial.wet_oxygen && wet) {
    return composition_fraction (wet, c->ev->session->oxygen);
  }
  return y < 1 ? composition_fraction (gas, c->ev->session->oxygen) / (1 - y) : 0;
}

const char *
conversion_oxygen (struct conversion *c, const char *basis)
{
  double at = c->state.oxygen;
  at = isnan (at) && c->value->kind == VALUE_TRACE ? c->value->oxygen : at;
  if (isnan (at) || !c->ev->describe) {
    return basis;
  }
  const char *oxygen = arena_format (c->ev->arena, "at %s %% O2",
                                     figure_text (c->ev->arena, 100 * at));
  return basis ? arena_format (c->ev->arena, "%s, %s", basis, oxygen) : oxygen;
}

/* Several components, each counted as what is asked: NO+NO2 as NO2.  */
static bool
counted_group (struct conversion *c, double *mass_per_mole, double *moles_per_mole)
{
  const struct value *v = c->value;
  const struct composition *gas = v->of_stream ? v->stream.gas : v->gas->closed;
  double all = 0, moles = 0, mass = 0;
  for (size_t i = 0; i < v->species.count; i++) {
    double n = composition_fraction (gas, v->species.at[i]), per, M;
    if (!counted_as (c, v->species.at[i], &per, &M)) {
      return false;
    }
    all += n;
    moles += n * per;
    mass += n * per * M;
  }
  *mass_per_mole = all > 0 ? mass / all : 0;
  *moles_per_mole = all > 0 ? moles / all : 1;
  return true;
}

bool
counted_mass (struct conversion *c, double *mass_per_mole, double *moles_per_mole)
{
  const struct value *v = c->value;
  if (v->species.count == 1) {
    double per, M;
    if (!counted_as (c, v->species.at[0], &per, &M)) {
      return false;
    }
    *mass_per_mole = per * M;
    *moles_per_mole = per;
    if (!c->counted_as && v->moles > 0) {
      *mass_per_mole = v->mass / v->moles;
    }
    return true;
  }
  if (c->counted_as) {
    return counted_group (c, mass_per_mole, moles_per_mole);
  }
  *mass_per_mole = v->moles > 0 ? v->mass / v->moles : 0;
  *moles_per_mole = 1;
  return true;
}

/* vol% real: phi_i = x_i Z_i/sum x_k Z_k, Z of the unmixed parts (ISO 14912:2003).  */
static bool
real_volume_share (struct conversion *c, const struct host *host, double *phi,
                   const char **basis)
{
  const struct value *v = c->value;
  struct state at = c->state;
  if (!c->has_state || isnan (at.T) || isnan (at.p)) {
    struct conditions metering = c->ev->settings->family[FAMILY_STANDARD].at;
    at.T = metering.T;
    at.p = metering.p;
    assume_family (c->ev, FAMILY_STANDARD);
  }
  struct unmixed u;
  if (!unmixed_volumes (c->ev, host->gas, at.T, at.p, &u)) {
    fault_place (c->ev->fault, c->at);
    return false;
  }
  *phi = unmixed_share (c->ev, host->gas, &u, &v->species);
  *basis = c->ev->describe
             ? arena_format (c->ev->arena, "of the parts unmixed at %s, %s, real",
                             temperature_text (c->ev->arena, at.T, false),
                             pressure_text (c->ev->arena, at.p, false))
             : NULL;
  return true;
}

/* Does the gas have a figure of the species, if zero?  */
static bool
states (const struct composition *gas, const struct species *species)
{
  for (size_t i = 0; i < gas->count; i++) {
    if (gas->species[i] == species) {
      return true;
    }
  }
  return false;
}

void
note_none_stated (struct conversion *c)
{
  const struct value *v = c->value;
  const struct composition *gas = v->of_stream ? v->stream.gas : v->gas->closed;
  for (size_t k = 0; gas && k < v->species.count; k++) {
    if (!states (gas, v->species.at[k])) {
      note (c->ev, MESSAGE_NOTE_NONE_STATED,
            v->species.count == 1 ? v->part : v->species.at[k]->key, NULL, NULL);
    }
  }
}

void
record_corrected (const struct conversion *c, double share, double factor)
{
  if (!isnan (c->state.oxygen)) {
    RECORD (c->ev, .name = "share at the reference oxygen", .formula = "x = k x_0",
            .value = share * factor, .unit = "mol/mol", .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("k", factor, "1"), SYMBOL ("x_0", share, "mol/mol")));
  }
}

void
record_mass_share (const struct conversion *c, const struct composition *gas, double x,
                   double per_mass, double w)
{
  if (!c->ev->workings) {
    return;
  }
  record_molar_mass (c->ev, gas, NULL);
  RECORD (c->ev, .name = "share by mass", .formula = "w = x M_c/M", .value = w, .unit = "kg/kg",
          .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("x", x, "mol/mol"),
                        CONSTANT ("M_c", per_mass, "kg/mol", STEP_WEIGHTS),
                        SYMBOL ("M", gas->molar_mass, "kg/mol")));
}

void
record_counted (const struct conversion *c, double x, double per, const char *unit, double si)
{
  if (c->counted_as) {
    RECORD (c->ev, .name = "counted as", .of = c->counted_as->text, .formula = "q = x k",
            .value = si, .unit = unit, .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("x", x, "mol/mol"), SYMBOL ("k", per, "mol/mol")));
  }
}

void
record_per_volume (const struct conversion *c, double x, double per, double Vm, double si)
{
  const bool by_mass = dimension_equal (c->unit->dimension, DIMENSION_DENSITY);
  RECORD (c->ev, .name = by_mass ? "mass per volume" : "amount per volume",
          .formula = by_mass ? "c = x M_c/V" : "c = x k/V", .value = si,
          .unit = by_mass ? "kg/m3" : "mol/m3", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("x", x, "mol/mol"),
                        CONSTANT (by_mass ? "M_c" : "k", per, by_mass ? "kg/mol" : "mol/mol",
                                  by_mass ? STEP_WEIGHTS : NULL),
                        SYMBOL ("V", Vm, "m3/mol")));
}

/* A reference oxygen takes the figure dry unless it is said to be wet, and needs an oxygen that
   somebody stated, if as none.                                                                  */
static bool
settle_reference_oxygen (struct conversion *c)
{
  const struct value *v = c->value;
  const struct composition *gas = v->of_stream ? v->stream.gas : v->gas->closed;
  if (isnan (c->state.oxygen)) {
    return true;
  }
  if (gas && !states (gas, c->ev->session->oxygen)) {
    fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->at,
                  "no O2 is stated in the gas: nobody knows at what oxygen it was measured", NULL);
    fault_hint (c->ev->fault, "state it in the list, O2 0 if it holds none; or 100 ppm of %s at "
                "5 %%O2 in ...", v->part);
    return false;
  }
  const bool wet = (c->words & WORD_WET) != 0 || c->ev->settings->trial.wet
                   || c->state.moisture != MOISTURE_NONE;
  c->words |= wet ? 0 : WORD_DRY;
  return true;
}

/* A share or a concentration of the component.  */
static bool
concentration (struct conversion *c)
{
  struct host host;
  double factor, per_mass, per_moles;
  if (c->ev->result) {
    note_none_stated (c);
  }
  if (!settle_reference_oxygen (c) || !host_of (c, &host)
      || !counted_mass (c, &per_mass, &per_moles)
      || !oxygen_factor (c, dry_oxygen (c, host.gas), c->what, &factor)) {
    return false;
  }
  double x = host.share * factor;
  struct standing standing = { c->what, c->ev->describe ? moisture_word (c->ev, host.gas) : NULL,
                               conversion_oxygen (c, NULL) };
  const struct unit *u = c->unit;
  record_corrected (c, host.share, factor);
  if (u->ratio == RATIO_MASS) {
    double w = x * per_mass / host.gas->molar_mass;
    record_mass_share (c, host.gas, x, per_mass, w);
    return conversion_add (c, w, &standing);
  }
  if (u->ratio == RATIO_VOLUME && (c->words & WORD_REAL)) {
    double phi;
    if (!real_volume_share (c, &host, &phi, &standing.basis)) {
      return false;
    }
    standing.basis = conversion_oxygen (c, standing.basis);
    return conversion_add (c, phi * factor, &standing);
  }
  if (u->ratio == RATIO_ENERGY) {
    return fault_set_at (c->ev->fault, MESSAGE_NOT_AVAILABLE, c->at, "shares by energy",
                         "ask for one flow over the other: H2 of feed / feed in MJ/MJ net");
  }
  if (u->ratio != RATIO_NONE) {
    if (u->ratio == RATIO_VOLUME && !standing.basis) {
      standing.basis = "ideal mixing: equal to mol% for a gas, not for a liquid";
    }
    record_counted (c, x, per_moles, "1", x * per_moles);
    return conversion_add (c, x * per_moles, &standing);
  }
  struct counted_volume volume;
  if (!conversion_volume (c, host.gas, &host.state, &volume)) {
    return false;
  }
  standing.basis = conversion_oxygen (c, volume.basis);
  bool by_mass = dimension_equal (u->dimension, DIMENSION_DENSITY);
  double si = x * (by_mass ? per_mass : per_moles) / volume.Vm;
  record_per_volume (c, x, by_mass ? per_mass : per_moles, volume.Vm, si);
  return conversion_add (c, si, &standing);
}

/* Above this a share is no trace whose basis may be taken for another.  */
#define TRACE_MOST 0.01

/* "88 ppm of the wet gas, 100 ppm of the dry": where a trace is in a wet flow; else null.  */
static const char *
both_shares (struct conversion *c)
{
  const struct value *v = c->value;
  double y = composition_fraction (v->stream.gas, c->ev->session->water);
  double x = v->stream.moles > 0 ? v->moles / v->stream.moles : 0;
  if (!c->ev->describe || !(y > 0 && y < 1 && x > 0 && x < TRACE_MOST)
      || v->species.at[0] == c->ev->session->water) {
    return NULL;
  }
  return arena_format (c->ev->arena, "%s of the wet gas, %s of the dry",
                       share_text (c->ev->arena, x), share_text (c->ev->arena, x / (1 - y)));
}

/* A flow or an amount of the component.  */
static bool
partial_flow (struct conversion *c, enum flow_basis basis)
{
  const struct value *v = c->value;
  double per_mass, per_moles;
  struct standing standing = { c->what, NULL, NULL };
  if (!isnan (c->state.oxygen)) {
    return conversion_mismatch (c, "a reference oxygen belongs to a concentration");
  }
  if (!counted_mass (c, &per_mass, &per_moles)) {
    return false;
  }
  if (basis == FLOW_MASS || basis == FLOW_MOLAR) {
    standing.basis = both_shares (c);
  }
  if (basis == FLOW_MASS) {
    bool by_moles = v->species.count == 1 || c->counted_as;
    double mass = by_moles ? v->moles * per_mass : v->mass;
    if (by_moles) {
      RECORD (c->ev, .name = "mass of", .of = c->what, .formula = "m = n_c M_c", .value = mass,
              .unit = mass_unit (v->flow), .source = STEP_DEFINITION,
              STEP_SYMBOLS (SYMBOL ("n_c", v->moles, moles_unit (v->flow)),
                            CONSTANT ("M_c", per_mass, "kg/mol", STEP_WEIGHTS)));
    }
    return conversion_add (c, mass, &standing);
  }
  if (basis == FLOW_MOLAR) {
    record_counted (c, v->moles, per_moles, moles_unit (v->flow), v->moles * per_moles);
    return conversion_add (c, v->moles * per_moles, &standing);
  }
  struct counted_volume volume;
  if (!conversion_volume (c, v->stream.gas, &v->stream, &volume)) {
    return false;
  }
  standing.basis = volume.basis;
  double part_volume = v->moles * per_moles * volume.Vm;
  RECORD (c->ev, .name = "volume of", .of = c->what, .formula = "q = n_c k V",
          .value = part_volume, .unit = volume_unit (v->flow), .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n_c", v->moles, moles_unit (v->flow)),
                        SYMBOL ("k", per_moles, "mol/mol"), SYMBOL ("V", volume.Vm, "m3/mol")));
  return conversion_add (c, part_volume, &standing);
}

void
count_sum (struct conversion *c)
{
  const char *as = c->value->species.counted_as;
  struct dimension d = c->unit->dimension;
  bool by_mass = c->unit->ratio == RATIO_MASS || dimension_equal (d, DIMENSION_DENSITY)
                 || dimension_equal (d, DIMENSION_MASS) || dimension_equal (d, DIMENSION_MASS_FLOW)
                 || unit_is_emission (c->unit);
  if (!as || c->counted_as || !by_mass) {
    return;
  }
  struct node *name = ARENA_NEW (c->ev->arena, struct node);
  *name = (struct node) { .kind = NODE_NAME, .text = as, .at = c->at };
  c->counted_as = name;
  assume_counted_as (c->ev, c->value->part, as);
}

bool
convert_part (struct conversion *c)
{
  const struct value *v = c->value;
  struct measure m = measure_of_unit (c->unit);
  bool flow;
  count_sum (c);
  if (unit_is_concentration (c->unit)) {
    return concentration (c);
  }
  if (unit_is_emission (c->unit)) {
    return convert_emission (c);
  }
  enum flow_basis basis = flow_basis_of (&m, &flow);
  if (basis == FLOW_NONE) {
    return conversion_mismatch (c, "a component is told as a share, a concentration, or a flow of "
                                "mass, moles or volume");
  }
  if (!v->of_stream) {
    fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->at,
                  "this is a component of a gas without an amount", NULL);
    fault_hint (c->ev->fault, "%s of 1 %s of ...", v->part, c->unit_text);
    return false;
  }
  if (flow != v->flow) {
    return conversion_mismatch (c, flow ? "this is an amount, not a flow"
                                        : "this is a flow, not an amount");
  }
  if (basis == FLOW_ENERGY) {
    if (v->species.count != 1) {
      return conversion_mismatch (c, "only a single component has an energy of its own");
    }
    return convert_energy (c, composition_pure (c->ev->arena, v->species.at[0]), v->moles);
  }
  return partial_flow (c, basis);
}
