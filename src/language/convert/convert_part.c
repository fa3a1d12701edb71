#include "config.h"
#include "language/convert/convert.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

/* The gas a component is in, as the target wants it counted.  */
struct host {
  const struct composition *gas;           /* dry if the target says so */
  double share;                            /* mol of the component per mol of that gas */
  struct stream state;                     /* T, p, Z of its own */
};

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

static bool
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

/* Oxygen of the gas, dry.  */
static double
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

/* The oxygen a figure counts at: that of the target, else that of a trace as it was stated.  */
static const char *
with_oxygen (struct conversion *c, const char *basis)
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

/* Mass per mole of what the component is counted as, all species of a peak together.  */
static bool
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
  double sum = 0;
  *phi = 0;
  if (!c->has_state || isnan (at.T) || isnan (at.p)) {
    struct conditions metering = c->ev->settings->family[FAMILY_STANDARD].at;
    at.T = metering.T;
    at.p = metering.p;
    assume_family (c->ev, FAMILY_STANDARD);
  }
  for (size_t i = 0; i < host->gas->count; i++) {
    const struct species *species = host->gas->species[i];
    struct volume_question q = { composition_pure (c->ev->arena, species), at.T, at.p, UNSTATED,
                                 false };
    double Vm, Z;
    const char *model;
    if (!actual_molar_volume (c->ev, &q, &Vm, &Z, &model)) {
      fault_place (c->ev->fault, c->at);
      return false;
    }
    sum += host->gas->fraction[i] * Z;
    for (size_t k = 0; k < v->species.count; k++) {
      *phi += v->species.at[k] == species ? host->gas->fraction[i] * Z : 0;
    }
  }
  const double own = *phi;
  *phi /= sum;
  RECORD (c->ev, .name = "share of the unmixed volumes", .formula = "phi = s_c/s", .value = *phi,
          .unit = "m3/m3", .source = "ISO 14912:2003, phi_i = x_i Z_i/sum x_k Z_k",
          STEP_SYMBOLS (SYMBOL ("s_c", own, "1"), SYMBOL ("s", sum, "1")));
  *basis = c->ev->describe
             ? arena_format (c->ev->arena, "of the parts unmixed at %s, %s, real",
                             temperature_text (c->ev->arena, at.T, false),
                             pressure_text (c->ev->arena, at.p, false))
             : NULL;
  return true;
}

/* Nobody said that the component is there, nor that it is not, as `<5 ppm` does.  */
static void
note_none_stated (struct conversion *c)
{
  const struct value *v = c->value;
  const struct composition *gas = v->of_stream ? v->stream.gas : v->gas->closed;
  for (size_t k = 0; gas && k < v->species.count; k++) {
    bool stated = false;
    for (size_t i = 0; i < gas->count; i++) {
      stated = stated || gas->species[i] == v->species.at[k];
    }
    if (!stated) {
      note (c->ev, MESSAGE_NOTE_NONE_STATED,
            v->species.count == 1 ? v->part : v->species.at[k]->key, NULL, NULL);
    }
  }
}

/* The share at the reference oxygen.  */
static void
record_corrected (const struct conversion *c, double share, double factor)
{
  if (!isnan (c->state.oxygen)) {
    RECORD (c->ev, .name = "share at the reference oxygen", .formula = "x = k x_0",
            .value = share * factor, .unit = "mol/mol", .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("k", factor, "1"), SYMBOL ("x_0", share, "mol/mol")));
  }
}

/* By mass: M_c is the mass counted for a mole of the component.  */
static void
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

/* Counted as another: PER of it for each mole.  */
static void
record_counted (const struct conversion *c, double x, double per, const char *unit, double si)
{
  if (c->counted_as) {
    RECORD (c->ev, .name = "counted as", .of = c->counted_as->text, .formula = "q = x k",
            .value = si, .unit = unit, .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("x", x, "mol/mol"), SYMBOL ("k", per, "mol/mol")));
  }
}

static void
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

/* A share or a concentration of the component.  */
static bool
concentration (struct conversion *c)
{
  struct host host;
  double factor, per_mass, per_moles;
  if (c->ev->result) {
    note_none_stated (c);
  }
  if (!host_of (c, &host) || !counted_mass (c, &per_mass, &per_moles)
      || !oxygen_factor (c, dry_oxygen (c, host.gas), c->what, &factor)) {
    return false;
  }
  double x = host.share * factor;
  struct standing standing = { c->what, c->ev->describe ? moisture_word (c->ev, host.gas) : NULL,
                               with_oxygen (c, NULL) };
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
    standing.basis = with_oxygen (c, standing.basis);
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
  standing.basis = with_oxygen (c, volume.basis);
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

bool
convert_part (struct conversion *c)
{
  const struct value *v = c->value;
  struct measure m = measure_of_unit (c->unit);
  bool flow;
  if (unit_is_concentration (c->unit)) {
    return concentration (c);
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

/* ---- Traces ---- */

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
  struct standing standing = { c->what, NULL, with_oxygen (c, NULL) };
  double per, M, factor;
  if (!unit_is_concentration (u)) {
    return trace_flow (c);
  }
  if (!counted_as (c, v->species.at[0], &per, &M) || !trace_oxygen (c, &factor)) {
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
    standing.basis = with_oxygen (c, "by amount: the same at any temperature and pressure");
    record_counted (c, x, per, "1", x * per);
    return conversion_add (c, x * per, &standing);
  }
  struct stream own = { .T = v->T, .p = v->p, .Z = UNSTATED };
  struct counted_volume volume;
  if (!conversion_volume (c, host, &own, &volume)) {
    return false;
  }
  standing.basis = with_oxygen (c, volume.basis);
  bool by_mass = dimension_equal (u->dimension, DIMENSION_DENSITY);
  double si = x * per * (by_mass ? M : 1) / volume.Vm;
  record_per_volume (c, x, by_mass ? per * M : per, volume.Vm, si);
  return conversion_add (c, si, &standing);
}
