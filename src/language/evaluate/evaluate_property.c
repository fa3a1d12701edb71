#include "config.h"
#include "language/evaluate/evaluate_property.h"

#include <math.h>
#include <string.h>
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/fuel.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "property/calorific.h"
#include "property/moist.h"
#include "support/arena.h"
#include "units/constants.h"

static const char *const property_text[] = {
#define PROPERTY(name, text, unit, help) text,
#include "language/properties.def"
#undef PROPERTY
};

static const char *const property_unit[] = {
#define PROPERTY(name, text, unit, help) unit,
#include "language/properties.def"
#undef PROPERTY
};

bool
property_answer (struct evaluation *ev, const struct property_question *q, double si,
                 struct value *out)
{
  const char *spelling = property_unit[q->property];
  *out = value_number (si);
  if (*spelling) {
    out->unit = unit_find (ev->session->vocabulary.units, spelling, strlen (spelling), ev->fault);
    if (!out->unit) {
      return false;
    }
    out->measure = measure_of_unit (out->unit);
  }
  if (q->gas) {
    out->gas = gas_of_composition (ev, q->gas, NULL);
  }
  return true;
}

bool
property_needs (struct evaluation *ev, const struct property_question *q, bool T, bool p)
{
  if ((!T || !isnan (q->T)) && (!p || !isnan (q->p))) {
    return true;
  }
  const struct node *of = q->node->b;
  const char *name = property_text[q->property];
  bool lacks_T = T && isnan (q->T), lacks_p = p && isnan (q->p);
  fault_set_at (ev->fault, lacks_T && lacks_p ? MESSAGE_STATE_MISSING
                           : lacks_T ? MESSAGE_TEMPERATURE_MISSING : MESSAGE_PRESSURE_MISSING,
                of->at, name, NULL);
  const char *unit = property_unit[q->property];
  fault_hint (ev->fault, "%s of %s at %s%s%s", name, of->kind == NODE_NAME ? of->text : "...",
              T && p ? "20 degC, 1 bar(a)" : p ? "1 bar(a)" : "20 degC", *unit ? " in " : "", unit);
  return false;
}

/* Properties by the volume of a mole: density, molar volume, Z.  */
static bool
by_volume (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  double Vm, Z;
  const char *model;
  struct volume_question question = { q->gas, q->T, q->p, q->Z, q->ideal };
  if (!property_needs (ev, q, true, true)
      || !actual_molar_volume (ev, &question, &Vm, &Z, &model)) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  double si = q->property == PROPERTY_Z ? Z
              : q->property == PROPERTY_MOLAR_VOLUME ? Vm : constants_molar_mass (ev, q->gas) / Vm;
  if (ev->workings && q->property == PROPERTY_DENSITY) {
    record_molar_mass (ev, q->gas, NULL);
    RECORD (ev, .name = "density", .formula = "rho = M/V", .value = si, .unit = "kg/m3",
            .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("M", q->gas->molar_mass, "kg/mol"),
                          SYMBOL ("V", Vm, "m3/mol")));
  } else if (q->property == PROPERTY_Z && (!isnan (q->Z) || strcmp (model, "ideal") == 0)) {
    RECORD (ev, .name = "compression factor", .formula = "", .value = Z, .unit = "1",
            .source = isnan (q->Z) ? STEP_IDEAL_GAS : STEP_TYPED);
  }
  if (!property_answer (ev, q, si, out)) {
    return false;
  }
  if (ev->describe) {
    out->basis = actual_text (ev->arena, &(struct actual) { q->T, q->p, Z, model, false });
  }
  return true;
}

/* Properties of the water in it.  */
static bool
by_water (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  double y = composition_fraction (q->gas, ev->session->water);
  bool humidity = q->property == PROPERTY_RELATIVE_HUMIDITY;
  if (!property_needs (ev, q, humidity, true)) {
    return false;
  }
  struct moist_question ask = { humidity ? MOIST_HUMIDITY : MOIST_DEW_POINT, y, q->T, q->p,
                                enhancement_is_for (q->gas)
                                && ev->settings->model != GAS_MODEL_IDEAL };
  struct moist_answer moist;
  bool done = moist_answer (&ask, &moist, ev->workings, ev->fault);
  if (!done) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  note_no_enhancement (ev, &ask, &moist);
  if (!property_answer (ev, q, moist.value, out)) {
    return false;
  }
  if (ev->describe) {
    const char *p = pressure_text (ev->arena, q->p, false);
    out->basis = humidity ? arena_format (ev->arena, "%s, %s, over liquid water",
                                          temperature_text (ev->arena, q->T, false), p)
                          : arena_format (ev->arena, "%s, over %s", p,
                                          moist.phase == WATER_ICE ? "ice" : "liquid water");
  }
  return true;
}

/* Water content: the component H2O, asked for as a mass per volume.  */
static bool
water_content (struct evaluation *ev, const struct property_question *q, const struct value *of,
               struct value *out)
{
  const struct species *water = ev->session->water;
  double y = composition_fraction (q->gas, water);
  if (!property_answer (ev, q, UNSTATED, out)) {
    return false;
  }
  out->kind = VALUE_PART;
  out->part = water->key;
  out->species = (struct species_set) { { water }, 1, NULL };
  out->moles = y;
  out->mass = y * water->molar_mass;
  RECORD (ev, .name = "water in a mole of the gas", .formula = "m = y M", .value = out->mass,
          .unit = "kg/mol", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("y", y, "mol/mol"),
                        CONSTANT ("M", water->molar_mass, "kg/mol", STEP_WEIGHTS)));
  out->T = q->T;
  out->p = q->p;
  if (of->kind == VALUE_STREAM) {
    out->of_stream = true;
    out->stream = of->stream;
    out->flow = of->stream.flow;
    out->moles *= of->stream.moles;
    out->mass *= of->stream.moles;
  }
  return true;
}

static bool
stated_total (struct evaluation *ev, const struct property_question *q, const struct value *of,
              struct value *out)
{
  if (of->kind != VALUE_GAS) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->node->b->at,
                         "only a gas has a stated total", NULL);
  }
  const struct analysis *analysis = gas_analysis (ev, of->gas);
  const char *unit = analysis && analysis->whole == WHOLE_MASS ? "mass%" : "mol%";
  if (!analysis) {
    return false;
  }
  *out = value_number (analysis_total (analysis));
  record_list (ev, analysis, of->gas->name);
  out->unit = unit_find (ev->session->vocabulary.units, unit, strlen (unit), ev->fault);
  if (!out->unit) {
    return false;
  }
  out->measure = measure_of_unit (out->unit);
  out->basis = "as stated";
  return true;
}

static bool
partial_pressure (struct evaluation *ev, const struct property_question *q, const struct value *of,
                  struct value *out)
{
  if (of->kind != VALUE_PART) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->node->b->at,
                         "a partial pressure is that of a component: of H2O of feed", NULL);
  }
  double x = 0;
  for (size_t i = 0; i < of->species.count; i++) {
    x += composition_fraction (q->gas, of->species.at[i]);
  }
  if (!property_needs (ev, q, false, true)) {
    return false;
  }
  RECORD (ev, .name = "partial pressure of", .of = of->part, .formula = "p_c = x p",
          .value = x * q->p, .unit = "Pa", .source = "Dalton's law",
          STEP_SYMBOLS (SYMBOL ("x", x, "mol/mol"), SYMBOL ("p", q->p, "Pa")));
  return property_answer (ev, q, x * q->p, out);
}

static bool
relative_density (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  double air = heat_air_molar_mass (ev), d = constants_molar_mass (ev, q->gas) / air;
  bool real = q->state && q->state->real;
  const char *basis = NULL;
  if (real) {
    struct heat_question heat = { q->gas, q->state->T, q->state->p, true, STANDARD_NONE };
    if (!heat_figure (ev, &heat, CALORIFIC_RELATIVE_DENSITY, &d, &basis)) {
      fault_place (ev->fault, q->node->at);
      return false;
    }
  }
  if (ev->workings && !real) {
    record_molar_mass (ev, q->gas, NULL);
    RECORD (ev, .name = "relative density", .formula = "d = M/M_air", .value = d, .unit = "1",
            .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("M", q->gas->molar_mass, "kg/mol"),
                          CONSTANT ("M_air", air, "kg/mol", heat_standard (ev))));
  }
  if (!property_answer (ev, q, d, out)) {
    return false;
  }
  if (ev->describe) {
    out->basis = real ? basis
                      : arena_format (ev->arena, "ideal gas, over dry air of %s g/mol",
                                      figure_text (ev->arena, air * 1000));
  }
  return true;
}

/* A calorific value or a Wobbe index: worked out when the unit is known.  */
static bool
calorific (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  static const int figure[PROPERTY_COUNT] = {
    [PROPERTY_GROSS_CALORIFIC_VALUE] = CALORIFIC_GROSS_VOLUME,
    [PROPERTY_NET_CALORIFIC_VALUE] = CALORIFIC_NET_VOLUME, [PROPERTY_WOBBE] = CALORIFIC_WOBBE,
    [PROPERTY_NET_WOBBE] = CALORIFIC_NET_WOBBE };
  if (!property_answer (ev, q, UNSTATED, out)) {
    return false;
  }
  out->kind = VALUE_CALORIFIC;
  out->heat = figure[q->property];
  out->T = q->state ? q->state->T : UNSTATED;
  out->p = q->state ? q->state->p : UNSTATED;
  out->by = q->node->a->by;
  out->words = q->ideal ? WORD_IDEAL
               : out->by || (q->state && q->state->real) ? WORD_REAL : 0;
  return true;
}

static bool
own_figure (struct evaluation *ev, const struct property_question *q, const struct value *of,
            struct value *out)
{
  bool T = q->property == PROPERTY_TEMPERATURE;
  if (of->kind != VALUE_STREAM) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->node->b->at,
                         "only a stream has a temperature and a pressure of its own", NULL);
  }
  if (isnan (T ? q->T : q->p)) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->node->b->at,
                  T ? "the temperature of this stream is not stated"
                    : "the pressure of this stream is not stated", NULL);
    fault_hint (ev->fault, "state it behind the stream: at 20 degC, 1 bar(a); a blend has it when "
                "all its parts have");
    return false;
  }
  RECORD (ev, .name = T ? "temperature of" : "pressure of",
          .of = q->node->b->kind == NODE_NAME ? q->node->b->text : "the stream", .formula = "",
          .value = T ? q->T : q->p, .unit = T ? "K" : "Pa", .source = "the state of the stream");
  return property_answer (ev, q, T ? q->T : q->p, out);
}

/* What ISO 6976 has of its own; -1: nothing.  */
static int
figure_of_standard (enum property property)
{
  static const struct { enum property property; int figure; } has[] = {
    { PROPERTY_MOLAR_MASS, CALORIFIC_MOLAR_MASS },
    { PROPERTY_RELATIVE_DENSITY, CALORIFIC_RELATIVE_DENSITY },
    { PROPERTY_DENSITY, CALORIFIC_DENSITY },
    { PROPERTY_MOLAR_VOLUME, CALORIFIC_MOLAR_VOLUME },
    { PROPERTY_Z, CALORIFIC_Z },
    { PROPERTY_GROSS_CALORIFIC_VALUE, CALORIFIC_GROSS_VOLUME },
    { PROPERTY_NET_CALORIFIC_VALUE, CALORIFIC_NET_VOLUME },
    { PROPERTY_WOBBE, CALORIFIC_WOBBE },
    { PROPERTY_NET_WOBBE, CALORIFIC_NET_WOBBE },
  };
  for (size_t i = 0; i < sizeof has / sizeof has[0]; i++)
    if (has[i].property == property) {
      return has[i].figure;
    }
  return -1;
}

/* Of a real gas unless an ideal one is asked for, at the state said or the conditions of Sm3.  */
static bool
by_standard (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  int figure = figure_of_standard (q->property);
  double si;
  const char *basis = NULL;
  if (figure < 0) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->node->a->at,
                         arena_format (ev->arena, "ISO 6976 has no %s",
                                       property_text[q->property]), NULL);
  }
  if (figure == CALORIFIC_GROSS_VOLUME || figure == CALORIFIC_NET_VOLUME
      || figure == CALORIFIC_WOBBE || figure == CALORIFIC_NET_WOBBE) {
    return calorific (ev, q, out);
  }
  struct heat_question heat = { q->gas, q->T, q->p, !q->ideal, q->node->a->by };
  if (!heat_figure (ev, &heat, figure, &si, &basis)) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  if (!property_answer (ev, q, si, out)) {
    return false;
  }
  out->basis = basis;
  return true;
}

static bool
dispatch (struct evaluation *ev, const struct property_question *q, const struct value *of,
          struct value *out)
{
  switch (q->property) {
  case PROPERTY_MOLAR_MASS:
    record_molar_mass (ev, q->gas, NULL);
    return property_answer (ev, q, constants_molar_mass (ev, q->gas), out);
  case PROPERTY_RELATIVE_DENSITY:
    return relative_density (ev, q, out);
  case PROPERTY_DENSITY:
  case PROPERTY_MOLAR_VOLUME:
  case PROPERTY_Z:
    return by_volume (ev, q, out);
  case PROPERTY_WATER_DEW_POINT:
  case PROPERTY_RELATIVE_HUMIDITY:
    return by_water (ev, q, out);
  case PROPERTY_WATER_CONTENT:
    return water_content (ev, q, of, out);
  case PROPERTY_PARTIAL_PRESSURE:
    return partial_pressure (ev, q, of, out);
  case PROPERTY_VOLUME_FRACTION:
  case PROPERTY_VOLUME_CONCENTRATION:
  case PROPERTY_MIXING_FACTOR:
    return property_unmixed (ev, q, of, out);
  case PROPERTY_TEMPERATURE:
  case PROPERTY_PRESSURE:
    return own_figure (ev, q, of, out);
  case PROPERTY_COMPOSITION:
    *out = value_number (UNSTATED);
    out->kind = VALUE_GAS;
    out->gas = q->value ? q->value : gas_of_composition (ev, q->gas, NULL);
    return out->gas != NULL;
  case PROPERTY_GROSS_CALORIFIC_VALUE:
  case PROPERTY_NET_CALORIFIC_VALUE:
  case PROPERTY_WOBBE:
  case PROPERTY_NET_WOBBE:
    return calorific (ev, q, out);
  case PROPERTY_CP:
  case PROPERTY_CV:
  case PROPERTY_KAPPA:
  case PROPERTY_SPEED_OF_SOUND:
    return property_caloric (ev, q, out);
  case PROPERTY_HYDROCARBON_DEW_POINT:
    return property_dew_point (ev, q, out);
  case PROPERTY_VISCOSITY:
    return property_viscosity (ev, q, out);
  case PROPERTY_SECOND_VIRIAL_COEFFICIENT:
    return property_virial (ev, q, out);
  case PROPERTY_FLAMMABLE_LIMITS:
  case PROPERTY_LOWER_FLAMMABLE_LIMIT:
  case PROPERTY_UPPER_FLAMMABLE_LIMIT:
    return property_flammable (ev, q, out);
  case PROPERTY_DRY_F_FACTOR:            /* worked out before this */
  case PROPERTY_WET_F_FACTOR:
  case PROPERTY_CARBON_F_FACTOR:
  case PROPERTY_STATED_TOTAL:
  case PROPERTY_COUNT:
    break;
  }
  return false;
}

/* The gas a property is asked of, and its state where it has one.  */
static bool
subject (struct evaluation *ev, const struct value *of, struct property_question *q)
{
  bool stream = of->kind == VALUE_STREAM || (of->kind == VALUE_PART && of->of_stream);
  if (stream) {
    q->gas = of->stream.gas;
    q->T = of->stream.T;
    q->p = of->stream.p;
    q->Z = of->stream.Z;
    return true;
  }
  if (of->kind == VALUE_GAS || of->kind == VALUE_PART) {
    q->value = of->gas;
    q->gas = gas_composition (ev, of->gas, q->node->b->at);
    return q->gas != NULL;
  }
  return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->node->b->at,
                       "a property is that of a gas or of a stream", NULL);
}

bool
evaluate_property (struct evaluation *ev, const struct node *node, const struct state *state,
                   struct value *out)
{
  struct property_question q = { .property = node->a->property, .node = node, .T = UNSTATED,
                                 .p = UNSTATED,
                        .Z = UNSTATED };
  struct value of;
  enum f_factor factor;
  if (property_is_f_factor (q.property, &factor)) {
    return property_f_factor (ev, node, state, out);
  }
  if (!evaluate (ev, node->b, state, &of)) {
    return false;
  }
  if (q.property == PROPERTY_STATED_TOTAL) {
    return stated_total (ev, &q, &of, out);
  }
  if (!subject (ev, &of, &q)) {
    return false;
  }
  q.state = state;
  if (state) {
    q.T = isnan (state->T) ? q.T : state->T;
    q.p = isnan (state->p) ? q.p : state->p;
    q.Z = isnan (state->Z) ? q.Z : state->Z;
    q.ideal = state->ideal;
  }
  return node->a->by ? by_standard (ev, &q, out) : dispatch (ev, &q, &of, out);
}
