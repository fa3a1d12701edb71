#include "config.h"
#include "language/convert/convert_part.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/fuel.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"
#include "units/constants.h"

bool
unit_is_emission (const struct unit *unit)
{
  return dimension_equal (dimension_times (unit->dimension, DIMENSION_ENERGY), DIMENSION_MASS)
         && unit->ratio == RATIO_NONE;
}

/* ---- F factors at other conditions ---- */

bool
unit_is_f_factor (const struct unit *unit)
{
  return dimension_equal (dimension_times (unit->dimension, DIMENSION_ENERGY), DIMENSION_VOLUME);
}

bool
convert_f_factor (struct conversion *c)
{
  struct evaluation *ev = c->ev;
  const struct value *v = c->value;
  struct conditions at = f_factor_conditions (ev, c->unit);
  at.T = isnan (c->state.T) ? at.T : c->state.T;
  at.p = isnan (c->state.p) ? at.p : c->state.p;
  struct standing standing = { c->what, NULL, NULL };
  const bool customary = c->unit->family_power == 0 || c->unit->family == FAMILY_SCF;
  const double F = v->si * (at.T / v->T) * (v->p / at.p);
  if (ev->describe) {
    const bool feet = customary && isnan (c->state.T);
    standing.basis = arena_format (ev->arena, "%s%s%s, %s, of an ideal gas",
                                   v->basis ? v->basis : "", v->basis ? ", " : "",
                                   temperature_text (ev->arena, at.T, feet),
                                   pressure_text (ev->arena, at.p, false));
  }
  if (at.T < v->T || at.T > v->T || at.p < v->p || at.p > v->p) {
    RECORD (ev, .name = "at other conditions", .formula = "F = F_0 (T/T_0) (p_0/p)", .value = F,
            .unit = "m3/J", .source = STEP_IDEAL_GAS,
            STEP_SYMBOLS (SYMBOL ("F_0", v->si, "m3/J"), SYMBOL ("T", at.T, "K"),
                          SYMBOL ("T_0", v->T, "K"), SYMBOL ("p_0", v->p, "Pa"),
                          SYMBOL ("p", at.p, "Pa")));
  }
  return conversion_add (c, F, &standing);
}

/* ---- A measured flow over a measured heat ---- */

/* The mass of what is emitted, counted as the target says.  */
static bool
mass_of (struct conversion *c, const struct value *v, double *mass)
{
  struct conversion top = *c;
  double per_mass, per_moles;
  if (v->kind == VALUE_STREAM) {
    *mass = v->stream.moles * v->stream.gas->molar_mass;
    record_molar_mass (c->ev, v->stream.gas, NULL);
    return true;
  }
  top.value = v;
  count_sum (&top);
  if (!counted_mass (&top, &per_mass, &per_moles)) {
    return false;
  }
  *mass = v->moles * per_mass;
  RECORD (c->ev, .name = "mass of", .of = v->part, .formula = "m = n_c M_c", .value = *mass,
          .unit = mass_unit (v->flow), .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n_c", v->moles, moles_unit (v->flow)),
                        CONSTANT ("M_c", per_mass, "kg/mol", STEP_WEIGHTS)));
  return true;
}

bool
convert_mass_per_heat (struct conversion *c)
{
  const struct value *v = c->value;
  const bool net = (c->words & WORD_NET) != 0;
  struct standing standing = { c->what, NULL,
                               net ? "mass over heat, net" : "mass over heat, gross" };
  double mass, energy;
  if (neither_gross_nor_net (c)) {
    return false;
  }
  if (!v->top) {
    return conversion_mismatch (c, "this ratio has no masses and energies");
  }
  if (!mass_of (c, v->top, &mass) || !energy_of (c, v->bottom, net, &energy)) {
    fault_place (c->ev->fault, c->subject_at);
    return false;
  }
  if (!(energy > 0)) {
    return fault_set_at (c->ev->fault, MESSAGE_RANGE, c->subject_at,
                         "nothing can be divided by what does not burn", NULL);
  }
  RECORD (c->ev, .name = "mass over heat", .formula = "E = m/P", .value = mass / energy,
          .unit = "kg/J", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("m", mass, "kg, or kg/s"), SYMBOL ("P", energy, "J, or W")));
  return conversion_add (c, mass / energy, &standing);
}

/* ---- Emissions per heat ---- */

/* Of what is emitted: its share, the mass counted for a mole of it, and the gas it is in; DILUENT
   is what tells of the excess air.                                                              */
struct emitted { double x, per_mass, diluent; const char *moisture; };

/* The factor the target says, or that of what it burns.  */
struct burnt_factor { double F; enum f_factor factor; const char *of; };

static bool
fuel_missing (struct conversion *c)
{
  fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->at,
                "an emission per heat needs what is burnt, or an F factor", NULL);
  fault_hint (c->ev->fault, "in %s burning natural-gas, in %s burning GAS, in %s with dry F factor "
              "8710 ft3/MMBtu", c->unit_text, c->unit_text, c->unit_text);
  return false;
}

/* Which of the factors, before its figure is known.  */
static bool
which_factor (struct conversion *c, enum f_factor *factor)
{
  const struct target *t = c->target;
  if (t && t->factor) {
    (void) property_is_f_factor (t->factor->property, factor);
    return true;
  }
  if (!t || !t->burning) {
    return fuel_missing (c);
  }
  *factor = t->tracer && t->tracer->kind == NODE_NAME && strcmp (t->tracer->text, "CO2") == 0
              ? F_CARBON : c->words & WORD_WET ? F_WET : F_DRY;
  if (t->tracer && *factor != F_CARBON && strcmp (t->tracer->text, "O2") != 0) {
    fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, t->tracer->at,
                  "excess air is told by O2 or by CO2", NULL);
    return false;
  }
  return true;
}

static bool
stated_factor (struct conversion *c, struct burnt_factor *out)
{
  struct evaluation *ev = c->ev;
  const struct node *figure = c->target->factor->quantity;
  struct value v;
  if (!evaluate_quantity (ev, figure, &v)) {
    return false;
  }
  if (!v.unit || !unit_is_f_factor (v.unit)) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, figure->at,
                         "an F factor is a volume per heat: 8710 ft3/MMBtu", NULL);
  }
  if (!(v.si > 0)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, figure->at, "an F factor is above zero", NULL);
  }
  struct conditions at = f_factor_conditions (ev, v.unit);
  out->F = v.si * (F_TEMPERATURE / at.T) * (at.p / F_PRESSURE);
  out->of = "as stated";
  RECORD (ev, .name = "F factor as stated", .formula = "F = F_0 (T_f/T) (p/p_f)", .value = out->F,
          .unit = "m3/J", .source = STEP_IDEAL_GAS,
          STEP_SYMBOLS (CONSTANT ("F_0", v.si, "m3/J", STEP_TYPED),
                        CONSTANT ("T_f", F_TEMPERATURE, "K", "Method 19"), SYMBOL ("T", at.T, "K"),
                        SYMBOL ("p", at.p, "Pa"),
                        CONSTANT ("p_f", F_PRESSURE, "Pa", "Method 19")));
  return true;
}

static bool
settle_factor (struct conversion *c, struct burnt_factor *out)
{
  if (c->target->factor) {
    return stated_factor (c, out);
  }
  struct fuel_question q = { c->target->burning, NULL, out->factor, (c->words & WORD_NET) != 0 };
  return fuel_factor (c->ev, &q, &out->F, &out->of);
}

/* The method's own oxygen and moisture of air, unless they are set.  */
static struct dilution
dilution_of (struct conversion *c, enum f_factor by, double diluent)
{
  struct evaluation *ev = c->ev;
  const struct settings *s = ev->settings;
  bool moved = s->is_set[SETTING_OXYGEN_IN_AIR] || (ev->overridden & TOUCH_OXYGEN);
  struct dilution d = { by, diluent, moved ? s->oxygen_in_air : F_OXYGEN_IN_AIR,
                        s->is_set[SETTING_WATER_IN_AIR] ? s->water_in_air : F_WATER_IN_AIR };
  if (by == F_CARBON) {
    return d;
  }
  evaluation_touch (ev, TOUCH_OXYGEN);
  if (ev->describe && !s->is_set[SETTING_OXYGEN_IN_AIR]) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_OXYGEN_IN_AIR,
                                                  .fact = { share_text (ev->arena,
                                                                        d.oxygen_in_air) },
                                                  .alternative = ALTERNATIVE_OXYGEN });
  }
  if (by == F_WET && ev->describe && !s->is_set[SETTING_WATER_IN_AIR]) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_WATER_IN_AIR,
                                                  .fact = { share_text (ev->arena,
                                                                        d.water_in_air) } });
  }
  return d;
}

/* "gross, dry F factor 8710 ft3/MMBtu at 68 degF, 1 atm, natural-gas, Method 19, O2 3 mol%".  */
static const char *
emission_basis (struct conversion *c, const struct burnt_factor *f, double diluent)
{
  static const char *const called[F_FACTORS] = { "dry", "wet", "carbon" };
  struct evaluation *ev = c->ev;
  if (!ev->describe) {
    return NULL;
  }
  if (!(c->words & (WORD_GROSS | WORD_NET))) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_HEAT_GROSS });
  }
  return arena_format (ev->arena, "%s heat, %s F factor %s, %s, %s %s",
                       c->words & WORD_NET ? "net" : "gross", called[f->factor],
                       f_factor_text (ev, f->F), f->of, f->factor == F_CARBON ? "CO2" : "O2",
                       share_text (ev->arena, diluent));
}

/* E = c F k (Method 19).  */
static bool
emission (struct conversion *c, enum f_factor factor, const struct emitted *e)
{
  struct evaluation *ev = c->ev;
  struct burnt_factor f = { UNSTATED, factor, NULL };
  const struct dilution d = dilution_of (c, factor, e->diluent);
  const double Vm = GAS_CONSTANT * F_TEMPERATURE / F_PRESSURE, per = e->x * e->per_mass / Vm;
  double k;
  if (!isnan (c->state.oxygen)) {
    return conversion_mismatch (c, "an emission per heat is that of undiluted flue gas already: "
                                "it has no reference oxygen");
  }
  if (!dilution_factor (&d, &k, ev->workings, ev->fault)) {
    fault_place (ev->fault, c->at);
    return false;
  }
  if (!settle_factor (c, &f)) {
    return false;
  }
  RECORD (ev, .name = "mass per volume at 68 degF, 1 atm", .formula = "c = x M_c p/(R T)",
          .value = per, .unit = "kg/m3", .source = STEP_IDEAL_GAS,
          STEP_SYMBOLS (STEP_R, SYMBOL ("x", e->x, "mol/mol"),
                        CONSTANT ("M_c", e->per_mass, "kg/mol", STEP_WEIGHTS),
                        CONSTANT ("T", F_TEMPERATURE, "K", "Method 19"),
                        CONSTANT ("p", F_PRESSURE, "Pa", "Method 19")));
  RECORD (ev, .name = "emission per heat", .formula = "E = c F k", .value = per * f.F * k,
          .unit = "kg/J", .source = "40 CFR 60, appendix A-7, Method 19",
          STEP_SYMBOLS (SYMBOL ("c", per, "kg/m3"), SYMBOL ("F", f.F, "m3/J"),
                        SYMBOL ("k", k, "1")));
  struct standing standing = { c->what, e->moisture, emission_basis (c, &f, e->diluent) };
  if (ev->result) {
    note (ev, MESSAGE_CAUTION_EMISSION, NULL, NULL, NULL);
  }
  return conversion_add (c, per * f.F * k, &standing);
}

/* What tells of the excess air, on the basis of GAS; UNSTATED: nobody said.  */
static double
diluent_of (struct conversion *c, const struct composition *gas, enum f_factor factor)
{
  const char *key = factor == F_CARBON ? "CO2" : "O2";
  for (size_t i = 0; i < gas->count; i++)
    if (strcmp (gas->species[i]->key, key) == 0) {
      return gas->fraction[i];
    }
  fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->subject_at,
                arena_format (c->ev->arena, "no %s is stated in the flue gas: the excess air is "
                              "not known", key), NULL);
  fault_hint (c->ev->fault, factor == F_CARBON ? "burning ... by O2" : "burning ... by CO2");
  return UNSTATED;
}

static bool
wet_form_of_dry (struct conversion *c)
{
  return fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->subject_at,
                       "the wet form needs the water of the flue gas, and none is stated", NULL);
}

bool
convert_emission (struct conversion *c)
{
  struct emitted e;
  struct host host;
  enum f_factor factor;
  double per_moles;
  if (!which_factor (c, &factor)) {
    return false;
  }
  c->words |= factor == F_DRY ? WORD_DRY : 0;
  if (!host_of (c, &host) || !counted_mass (c, &e.per_mass, &per_moles)) {
    return false;
  }
  e.x = host.share;
  e.diluent = diluent_of (c, host.gas, factor);
  if (isnan (e.diluent)) {
    return false;
  }
  if (factor == F_WET && !(composition_fraction (host.gas, c->ev->session->water) > 0)) {
    return wet_form_of_dry (c);
  }
  if (c->ev->result) {
    note_none_stated (c);
  }
  e.moisture = c->ev->describe ? moisture_word (c->ev, host.gas) : NULL;
  return emission (c, factor, &e);
}

/* The gas a trace is within, dry where the factor is; its share of that.  */
static const struct composition *
trace_flue (struct conversion *c, enum f_factor factor, double *x)
{
  const struct value *v = c->value;
  const struct species *water = c->ev->session->water;
  const struct composition *gas = v->of_stream ? v->stream.gas
                                  : gas_composition (c->ev, v->gas, c->subject_at);
  double y = gas ? composition_fraction (gas, water) : 0;
  if (gas && factor == F_DRY && y > 0) {
    *x /= 1 - y;
    gas = composition_wetted (c->ev->arena, gas, water, 0, c->ev->fault);
  }
  return gas;
}

bool
trace_emission (struct conversion *c, double per_mass)
{
  const struct value *v = c->value;
  enum f_factor factor;
  struct emitted e = { v->si, per_mass, v->oxygen, NULL };
  if (!which_factor (c, &factor)) {
    return false;
  }
  if (v->measure.ratio == RATIO_MASS) {
    return conversion_mismatch (c, "a share by mass tells no emission per heat: state it by amount "
                                "or per volume");
  }
  if (v->gas || v->of_stream) {
    const struct composition *gas = trace_flue (c, factor, &e.x);
    e.diluent = !gas ? UNSTATED : isnan (v->oxygen) ? diluent_of (c, gas, factor) : v->oxygen;
    return !isnan (e.diluent) && emission (c, factor, &e);
  }
  if (factor == F_CARBON || factor == F_WET || isnan (v->oxygen)) {
    fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->subject_at,
                  factor == F_DRY ? "the oxygen the figure was measured at is not said"
                                  : "the gas the figure was measured in is not said", NULL);
    fault_hint (c->ev->fault,
                factor == F_DRY ? "... of %s at 3 %%O2 in ..., or ... of %s within GAS"
                                : "... of %s within GAS in ...", v->part, v->part);
    return false;
  }
  e.moisture = "dry";
  return emission (c, factor, &e);
}
