#include "config.h"
#include "language/convert/convert.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"
#include "units/constants.h"

/* ---- Pressures ---- */

static bool
is_absolute (enum unit_sort sort)
{
  return sort == UNIT_ABSOLUTE || sort == UNIT_GAUGE || sort == UNIT_VACUUM;
}

static void
record_over_barometer (struct evaluation *ev, double p, double told, const char *formula)
{
  RECORD (ev, .name = "against the barometer", .formula = formula, .value = told, .unit = "Pa",
          .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("p", p, "Pa"),
                        CONSTANT ("p_site", ev->settings->site_pressure, "Pa",
                                  barometer_source (ev->settings))));
}

/* Gauge, vacuum, absolute and bare: a bare one beside another sort is absolute, and said so.  */
static bool
convert_pressure (struct conversion *c)
{
  struct evaluation *ev = c->ev;
  const struct value *v = c->value;
  double p = v->si, site = ev->settings->site_pressure;
  struct standing standing = { c->what, NULL, NULL };
  if (v->measure.sort == UNIT_SCALE && c->unit->sort == UNIT_SCALE) {
    return conversion_add (c, p, &standing);
  }
  if (v->measure.sort == UNIT_SCALE && v->unit
      && !quantity_pressure (ev, v, c->what, &p)) {
    return false;
  }
  switch (c->unit->sort) {
  case UNIT_GAUGE:
    p -= ev->settings->trial.gauge_absolute ? 0 : site;
    record_over_barometer (ev, v->si, p, "p_g = p - p_site");
    break;
  case UNIT_VACUUM:
    p = site - p;
    record_over_barometer (ev, v->si, p, "p_v = p_site - p");
    break;
  case UNIT_SCALE:
    if (is_absolute (v->measure.sort) && ev->describe) {
      standing.basis = "absolute";
    }
    break;
  case UNIT_ABSOLUTE:
    p -= ev->settings->trial.absolute_gauge ? site : 0;
    break;
  case UNIT_POINT:
  case UNIT_DIFFERENCE:
  case UNIT_HUMIDITY:
  case UNIT_OXYGEN:
    break;
  }
  if (c->unit->sort == UNIT_GAUGE || c->unit->sort == UNIT_VACUUM) {
    evaluation_touch (ev, TOUCH_SITE);
    assume_site_pressure (ev);
  }
  return conversion_add (c, p, &standing);
}

/* ---- Temperatures ---- */

static bool
convert_temperature (struct conversion *c)
{
  const struct value *v = c->value;
  struct standing standing = { c->what, NULL, v->basis };
  bool kelvin_like = fabs (c->unit->offset) < 1e-300;
  bool from_difference = v->measure.sort == UNIT_DIFFERENCE;
  bool to_difference = c->unit->sort == UNIT_DIFFERENCE;
  if (from_difference && !to_difference && !kelvin_like) {
    return conversion_mismatch (c, "a difference of temperatures is no point on a scale: K, "
                                "degC(diff), degF(diff)");
  }
  if (!from_difference && to_difference) {
    bool bare = v->unit && fabs (v->unit->offset) < 1e-300;
    if (!bare) {
      return conversion_mismatch (c, "a point on a scale is no difference of temperatures");
    }
  }
  return conversion_add (c, v->si, &standing);
}

/* ---- Volumes without a gas ---- */

/* Moles of ideal gas in the unit of a volume or amount; UNSTATED: no such unit.  */
static bool
ideal_moles_per (struct conversion *c, const struct measure *m, double T, double p, bool target,
                 double *per)
{
  struct evaluation *ev = c->ev;
  bool flow;
  enum flow_basis basis = flow_basis_of (m, &flow);
  if (basis == FLOW_MOLAR) {
    *per = 1;
    return true;
  }
  if (basis == FLOW_REFERENCE) {
    double Vm;
    if (!family_molar_volume (ev, m->family, NULL, false, &Vm)) {
      return false;
    }
    *per = 1 / Vm;
    return true;
  }
  if (basis != FLOW_ACTUAL) {
    return conversion_mismatch (c, "of which gas? only volumes and moles of an ideal gas are "
                                "told without one");
  }
  if (isnan (T) && isnan (p) && !isnan (ev->settings->family[FAMILY_NONE].at.T)) {
    struct conditions at = ev->settings->family[FAMILY_NONE].at;
    evaluation_touch (ev, touch_family (FAMILY_NONE));
    *per = at.p / (GAS_CONSTANT * at.T);
    return true;
  }
  if ((isnan (T) || isnan (p)) && !volume_fill (ev, &T, &p)) {
    fault_set_at (ev->fault, MESSAGE_STATE_MISSING, c->at,
                  target ? c->unit_text : "the volume typed", NULL);
    fault_hint (ev->fault,
                target ? "%s in %s at 20 degC, 1 bar(a)" : "%s at 20 degC, 1 bar(a) in %s",
                c->what, c->unit_text);
    return false;
  }
  *per = p / (GAS_CONSTANT * T);
  RECORD (ev, .name = "volume of a mole", .formula = "V = R T/p", .value = 1 / *per,
          .unit = "m3/mol", .source = STEP_IDEAL_GAS,
          STEP_SYMBOLS (STEP_R, SYMBOL ("T", T, "K"), SYMBOL ("p", p, "Pa")));
  return true;
}

/* From one way of counting a mole to another: V_f and V_t are what a mole has either way.  */
static void
record_ways (const struct conversion *c, const char *formula, double from, double to, double si)
{
  RECORD (c->ev, .name = "counted the other way", .formula = formula, .value = si,
          .in = c->unit, .source = STEP_DEFINITION,
          STEP_SYMBOLS ({ "q_0", c->value->si, NULL, NULL, c->value->unit },
                        SYMBOL ("V_f", from, "of a mole, from"),
                        SYMBOL ("V_t", to, "of a mole, to")));
}

/* A volume or flow between reference conditions, actual states and moles: an ideal gas.  */
static bool
convert_volume (struct conversion *c)
{
  struct evaluation *ev = c->ev;
  const struct value *v = c->value;
  struct measure to = measure_of_unit (c->unit);
  bool from_flow, to_flow;
  double from_per, to_per;
  (void) flow_basis_of (&v->measure, &from_flow);
  if (flow_basis_of (&to, &to_flow) == FLOW_NONE || from_flow != to_flow) {
    return conversion_mismatch (c, "the units measure different things");
  }
  if (!ideal_moles_per (c, &v->measure, v->T, v->p, false, &from_per)
      || !ideal_moles_per (c, &to, c->state.T, c->state.p, true, &to_per)) {
    return false;
  }
  struct standing standing = { c->what, NULL, "ideal gas" };
  if (ev->describe && to.family_power == 1) {
    standing.basis = arena_format (ev->arena, "%s, ideal-gas volume",
                                   ev->settings->family[to.family].text);
  } else if (ev->describe && to_per != 1) {
    standing.basis = actual_text (ev->arena, &(struct actual) { c->state.T, c->state.p, 1, "ideal",
                                                                false });
  }
  record_ways (c, "q = q_0 V_t/V_f", 1 / from_per, 1 / to_per, v->si * from_per / to_per);
  return conversion_add (c, v->si * from_per / to_per, &standing);
}

/* A figure per reference volume at other reference conditions: mg/Nm3 in mg/Sm3.  */
static bool
convert_per_volume (struct conversion *c)
{
  const struct value *v = c->value;
  double from, to;
  if (!family_molar_volume (c->ev, v->measure.family, NULL, false, &from)
      || !family_molar_volume (c->ev, c->unit->family, NULL, false, &to)) {
    return false;
  }
  struct standing standing = { c->what, NULL, c->ev->settings->family[c->unit->family].text };
  record_ways (c, "q = q_0 V_f/V_t", from, to, v->si * from / to);
  return conversion_add (c, v->si * from / to, &standing);
}

/* ---- Everything else ---- */

/* SI units of a figure that was computed and never typed: kg/m3 as "kg*m^-3".  */
static const char *
coherent_unit (struct conversion *c, struct measure m)
{
  static const char *const symbol[] = { "kg", "m", "s", "K", "mol" };
  signed char power[] = { m.dimension.mass, m.dimension.length, m.dimension.time,
                          m.dimension.temperature, m.dimension.amount };
  const char *text = "";
  if (m.family_power != 0) {
    power[1] = (signed char) (power[1] - 3 * m.family_power);
    text = arena_format (c->ev->arena, "%s%s", reference_family_name (m.family),
                         m.family_power == 1 ? "" : "^-1");
  }
  for (size_t i = 0; i < 5; i++)
    if (power[i] != 0) {
      const char *join = *text ? "*" : "";
      text = power[i] == 1
               ? arena_format (c->ev->arena, "%s%s%s", text, join, symbol[i])
               : arena_format (c->ev->arena, "%s%s%s^%d", text, join, symbol[i], power[i]);
    }
  return text;
}

static bool
settle_coherent (struct conversion *c)
{
  const struct value *v = c->value;
  struct fault unheard;
  fault_init (&unheard, c->ev->arena);
  c->unit_text = v->measure.sort == UNIT_DIFFERENCE ? "K(diff)"
                 : v->measure.sort == UNIT_HUMIDITY ? "%RH" : coherent_unit (c, v->measure);
  c->unit = *c->unit_text ? unit_find (c->ev->session->vocabulary.units, c->unit_text,
                                       strlen (c->unit_text), &unheard) : NULL;
  if (!c->unit) {
    struct standing standing = { c->what, NULL, v->basis };
    return conversion_add (c, v->si, &standing);
  }
  return true;
}

static bool
ratio_fits (enum ratio from, enum ratio to)
{
  return from == to || (to == RATIO_PLAIN && from != RATIO_ENERGY)
         || (from == RATIO_MOLE && to == RATIO_VOLUME)
         || (from == RATIO_VOLUME && to == RATIO_MOLE);
}

static bool
plain_number_in (struct conversion *c)
{
  struct standing standing = { c->what, NULL, NULL };
  return c->value->measure.ratio == RATIO_NONE && c->unit->ratio != RATIO_NONE
         && c->unit->ratio != RATIO_ENERGY && c->unit->sort == UNIT_SCALE
           ? conversion_add (c, c->value->si, &standing)
           : conversion_mismatch (c, "the units measure different things");
}

static const char *
family_basis (struct conversion *c)
{
  if (c->unit->family_power == 0) {
    return NULL;
  }
  const char *text = c->ev->settings->family[c->unit->family].text;
  bool real = c->ev->settings->real_volumes ? !(c->value->words & WORD_IDEAL)
                                            : (c->value->words & WORD_REAL) != 0;
  return c->unit->family_power == 1 && c->ev->describe
           ? arena_format (c->ev->arena, "%s, %s", text, real ? "real volume" : "ideal-gas volume")
           : text;
}

/* From mass to mole or back.  */
static void
record_by_mole (const struct conversion *c, const char *formula, double si)
{
  const struct composition *gas = c->value->gas->closed;
  if (!c->ev->workings) {
    return;
  }
  record_molar_mass (c->ev, gas, NULL);
  RECORD (c->ev, .name = "by mole", .formula = formula, .value = si, .in = c->unit,
          .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("q_0", c->value->si, NULL),
                        SYMBOL ("M", gas->molar_mass, "kg/mol")));
}

bool
convert_quantity (struct conversion *c)
{
  const struct value *v = c->value;
  const struct measure *m = &v->measure;
  if (!c->unit) {
    size_t before = c->figures->count;
    if (!settle_coherent (c) || c->figures->count > before) {
      return c->ev->fault->kind == MESSAGE_NONE;
    }
  }
  struct dimension d = c->unit->dimension;
  if (unit_is_f_factor (c->unit) && isfinite (v->T) && isfinite (v->p) && !v->gas
      && dimension_equal (m->dimension, d)) {
    return convert_f_factor (c);
  }
  bool same = dimension_equal (m->dimension, d);
  if (same && dimension_equal (d, DIMENSION_PRESSURE) && m->ratio == RATIO_NONE) {
    return convert_pressure (c);
  }
  if (same && dimension_equal (d, DIMENSION_TEMPERATURE)) {
    return convert_temperature (c);
  }
  if (same && dimension_is_none (d)) {
    bool special = m->sort == UNIT_HUMIDITY || c->unit->sort == UNIT_HUMIDITY
                   || m->sort == UNIT_OXYGEN || c->unit->sort == UNIT_OXYGEN;
    if (special ? m->sort != c->unit->sort : !ratio_fits (m->ratio, c->unit->ratio)) {
      return plain_number_in (c);
    }
  } else if (!same && v->gas && v->gas->closed
             && dimension_equal (dimension_times (m->dimension, DIMENSION_MASS),
                                 dimension_times (d, DIMENSION_AMOUNT))) {
    /* A property per mass told per mole.  */
    struct standing standing = { c->what, moisture_word (c->ev, v->gas->closed), v->basis };
    record_by_mole (c, "q = q_0 M", v->si * v->gas->closed->molar_mass);
    return conversion_add (c, v->si * v->gas->closed->molar_mass, &standing);
  } else if (!same && v->gas && v->gas->closed && dimension_equal (m->dimension, DIMENSION_DENSITY)
             && dimension_equal (d, DIMENSION_MOLAR_DENSITY) && c->unit->family_power == 0) {
    struct standing standing = { c->what, moisture_word (c->ev, v->gas->closed), v->basis };
    record_by_mole (c, "q = q_0/M", v->si / v->gas->closed->molar_mass);
    return conversion_add (c, v->si / v->gas->closed->molar_mass, &standing);
  } else if (same && m->family_power == -1 && c->unit->family_power == -1
             && m->family != c->unit->family) {
    return convert_per_volume (c);
  } else if (!same || m->family_power != c->unit->family_power
             || (m->family_power != 0 && m->family != c->unit->family)) {
    bool flow;
    return flow_basis_of (m, &flow) == FLOW_NONE
             ? conversion_mismatch (c, "the units measure different things") : convert_volume (c);
  }
  if (c->unit->family_power != 0) {
    assume_family (c->ev, c->unit->family);
  }
  struct standing standing = { c->what,
                               v->gas && v->gas->closed && c->ev->describe
                                 ? moisture_word (c->ev, v->gas->closed) : v->moisture,
                               v->basis ? v->basis : family_basis (c) };
  return conversion_add (c, v->si, &standing);
}

/* ---- Figures per quantity of a gas ---- */

/* What one mole of the gas has of what the unit counts per: kg, mol or m3.  */
static bool
per_mole (struct conversion *c, const struct unit *unit, const struct composition *gas,
          struct dimension *counted, double *per)
{
  struct dimension d = unit->dimension;
  if (unit->family_power == -1) {
    *counted = dimension_times (d, DIMENSION_VOLUME);
    return family_molar_volume (c->ev, unit->family, gas, (c->words & WORD_REAL) != 0, per);
  }
  if (d.amount == -1) {
    *counted = dimension_times (d, DIMENSION_AMOUNT);
    *per = 1;
    return true;
  }
  if (dimension_equal (dimension_times (d, DIMENSION_MASS), DIMENSION_ENERGY)) {
    *counted = DIMENSION_ENERGY;
    *per = gas->molar_mass;
    return true;
  }
  *counted = dimension_times (d, DIMENSION_VOLUME);
  struct stream own = { .T = c->value->T, .p = c->value->p, .Z = UNSTATED };
  struct counted_volume volume;
  const struct unit *target = c->unit;
  c->unit = unit;
  bool done = conversion_volume (c, gas, &own, &volume);
  c->unit = target;
  *per = done ? volume.Vm : UNSTATED;
  return done;
}

bool
convert_specific (struct conversion *c)
{
  const struct value *v = c->value;
  const struct composition *gas = gas_composition (c->ev, v->gas, c->subject_at);
  struct dimension from, to;
  double from_per, to_per;
  /* A figure that was computed has no unit of its own.  */
  const struct unit computed = {
    .spelling = "the figure", .factor = 1, .dimension = v->measure.dimension,
    .family = v->measure.family, .family_power = v->measure.family_power
  };
  if (!gas || !per_mole (c, v->unit ? v->unit : &computed, gas, &from, &from_per)
      || !per_mole (c, c->unit, gas, &to, &to_per)) {
    return false;
  }
  if (!dimension_equal (from, to)) {
    return conversion_mismatch (c, "the units measure different things");
  }
  struct standing standing = { c->what, NULL, family_basis (c) };
  record_ways (c, "q = q_0 V_f/V_t", from_per, to_per, v->si * from_per / to_per);
  return conversion_add (c, v->si * from_per / to_per, &standing);
}
