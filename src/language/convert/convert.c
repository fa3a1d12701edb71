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

static void
figures_add (struct evaluation *ev, struct figures *figures, const struct figure *figure)
{
  if (figures->count == figures->room) {
    size_t room = figures->room ? 2 * figures->room : 8;
    struct figure *more = ARENA_ARRAY (ev->arena, room, struct figure);
    if (figures->count) {
      memcpy (more, figures->at, figures->count * sizeof *more);
    }
    figures->at = more;
    figures->room = room;
  }
  figures->at[figures->count++] = *figure;
}

bool
conversion_add (struct conversion *c, double si, const struct standing *standing)
{
  double value = c->unit ? unit_from_si (c->unit, si) : si;
  if (!isfinite (value)) {
    return fault_set_at (c->ev->fault, MESSAGE_NOT_FINITE, c->at, NULL, NULL);
  }
  struct figure figure = { standing->what, value, c->unit, c->unit_text, standing->moisture,
                           standing->basis, c->label,
                           c->value->kind == VALUE_PART || c->value->kind == VALUE_TRACE
                           || c->value->kind == VALUE_CALORIFIC
                           || (c->value->kind == VALUE_QUANTITY && c->value->basis) };
  figures_add (c->ev, c->figures, &figure);
  record_told (c->ev, &(struct told) { c->label ? c->label : standing->what, c->unit_text, c->unit,
                                       si, value });
  return true;
}

bool
conversion_mismatch (struct conversion *c, const char *why)
{
  return fault_set_at (c->ev->fault, MESSAGE_UNIT_MISMATCH, c->at, why, NULL);
}

bool
unit_is_concentration (const struct unit *unit)
{
  return unit->ratio != RATIO_NONE || dimension_equal (unit->dimension, DIMENSION_DENSITY)
         || dimension_equal (unit->dimension, DIMENSION_MOLAR_DENSITY);
}

/* ---- What the target says ---- */

/* The units a value is answered in when nobody says: those it was typed in.  */
static const char *
usual_unit (const struct value *v)
{
  switch (v->kind) {
  case VALUE_STREAM:
    return v->stream.flow ? "kg/h" : "kg";
  case VALUE_PART:
    return !v->of_stream ? "mol%" : v->flow ? "kg/h" : "kg";
  case VALUE_GAS:
    return "mol%";
  case VALUE_RATIO:
    return "mol/mol";
  case VALUE_CALORIFIC:
    return "MJ/m3";
  case VALUE_LIMITS:
    return "vol%";
  case VALUE_QUANTITY:
  case VALUE_TRACE:
  case VALUE_SPECIFIC:
    break;
  }
  return NULL;
}

static bool
settle_unit (struct conversion *c, const struct value *v)
{
  const struct unit *unit = v->unit;
  if (v->kind == VALUE_GAS) {
    unit = v->gas->basis && unit_is_concentration (v->gas->basis) ? v->gas->basis : NULL;
  }
  const char *usual = unit ? NULL : usual_unit (v);
  if (usual) {
    unit = unit_find (c->ev->session->vocabulary.units, usual, strlen (usual), c->ev->fault);
    if (!unit) {
      return false;
    }
  }
  if (!unit && (v->kind == VALUE_TRACE || v->kind == VALUE_SPECIFIC)) {
    /* A figure that was computed has no unit of its own.  */
    return fault_set_at (c->ev->fault, MESSAGE_UNIT_EXPECTED, c->at,
                         v->kind == VALUE_TRACE ? "say what it is wanted in: ... in mg/Nm3"
                                                : "say what it is wanted in: ... in kWh/kg", NULL);
  }
  c->unit = unit;
  c->unit_text = unit ? unit->spelling : "";
  c->words = v->words;
  return true;
}

/* While a check tries it: what the target would mean instead.  */
static void
try_other (struct conversion *c)
{
  const struct trial *trial = &c->ev->settings->trial;
  c->unit = evaluation_unit (c->ev, c->unit);
  c->words |= trial->dry ? WORD_DRY : 0;
  c->words &= trial->wet ? ~ (unsigned) WORD_DRY : ~0u;
  c->state.oxygen = trial->no_oxygen ? UNSTATED : c->state.oxygen;
  c->counted_as = trial->counted_as ? trial->counted_as : c->counted_as;
}

static bool
settle_target (struct conversion *c, const struct target *t)
{
  struct evaluation *ev = c->ev;
  c->unit = t->unit;
  c->unit_text = t->unit_text;
  c->words = t->words;
  c->at = t->at;
  c->counted_as = t->counted_as;
  c->target = t;
  c->label = t->as;
  if (t->state) {
    c->has_state = true;
    if (!evaluate_state (ev, t->state, &c->state)) {
      return false;
    }
  }
  if (t->with) {
    struct state with;
    if (!evaluate_state (ev, t->with, &with)) {
      return false;
    }
    c->state.oxygen = with.oxygen;
    c->words |= with.moisture == MOISTURE_DRY ? WORD_DRY : 0;
    c->words |= with.ideal ? WORD_IDEAL : with.real ? WORD_REAL : 0;
  }
  c->words |= c->state.moisture == MOISTURE_DRY ? WORD_DRY : 0;
  c->words |= c->state.ideal ? WORD_IDEAL : c->state.real ? WORD_REAL : 0;
  try_other (c);
  return true;
}

static bool
convert_ratio (struct conversion *c)
{
  const struct value *v = c->value;
  struct standing standing = { c->what, NULL, NULL };
  if (c->unit->ratio == RATIO_MASS) {
    return conversion_add (c, v->mass, &standing);
  }
  if (c->unit->ratio == RATIO_ENERGY) {
    return convert_energy_ratio (c);
  }
  if (unit_is_emission (c->unit)) {
    return convert_mass_per_heat (c);
  }
  if (c->unit->ratio == RATIO_NONE) {
    return conversion_mismatch (c, "a ratio of two flows has no such unit");
  }
  if (c->unit->ratio == RATIO_PLAIN && c->ev->describe
      && fabs (v->moles - v->mass) > 1e-9 * fabs (v->moles)) {
    evaluation_assume (c->ev, &(struct assumption) { .kind = MESSAGE_TAKEN_BY_AMOUNT,
                                                     .fact = { "the ratio" } });
  }
  /* A row cut out still has to say of what, whatever the user's label is.  */
  standing.basis = arena_format (c->ev->arena, "%s, by amount", c->what);
  return conversion_add (c, v->moles, &standing);
}

/* Does the value have what the target's words ask for?  */
static bool
target_fits (struct conversion *c)
{
  const struct value *v = c->value;
  bool part = v->kind == VALUE_PART || v->kind == VALUE_TRACE
              || (v->kind == VALUE_RATIO && v->top && v->top->kind == VALUE_PART
                  && unit_is_emission (c->unit));
  if (c->counted_as && !part) {
    return fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->counted_as->at,
                         "only a component is counted as another", NULL);
  }
  const struct node *burning = c->target && c->target->factor ? c->target->factor->quantity
                               : c->target ? c->target->burning : NULL;
  if (burning && !(unit_is_emission (c->unit)
                   && (v->kind == VALUE_PART || v->kind == VALUE_TRACE))) {
    return fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, burning->at,
                         "only a component told as mass per heat is that of something burnt: "
                         "CO of flue in mg/MJ burning raw", NULL);
  }
  bool figure = v->kind == VALUE_QUANTITY && v->measure.ratio == RATIO_NONE && !v->gas
                && (dimension_equal (v->measure.dimension, DIMENSION_TEMPERATURE)
                    || dimension_equal (v->measure.dimension, DIMENSION_PRESSURE)
                    || dimension_equal (v->measure.dimension, DIMENSION_MASS));
  if (figure && (c->words & (WORD_DRY | WORD_WET))) {
    return conversion_mismatch (c, "dry and wet are words for gas");
  }
  return true;
}

bool
convert_value (struct evaluation *ev, const struct value *value, const struct target *target,
               const struct subject *subject, struct figures *figures)
{
  struct conversion c = { .ev = ev, .value = value, .what = subject->what, .figures = figures,
                          .at = subject->at, .subject_at = subject->at,
                          .state = state_empty (subject->at) };
  if (target ? !settle_target (&c, target) : !settle_unit (&c, value)) {
    return false;
  }
  if (!target_fits (&c)) {
    return false;
  }
  switch (value->kind) {
  case VALUE_QUANTITY:
    return convert_quantity (&c);
  case VALUE_STREAM:
    return convert_stream (&c);
  case VALUE_GAS:
    return convert_gas (&c);
  case VALUE_PART:
    return convert_part (&c);
  case VALUE_TRACE:
    return convert_trace (&c);
  case VALUE_SPECIFIC:
    return convert_specific (&c);
  case VALUE_CALORIFIC:
    return convert_calorific (&c);
  case VALUE_LIMITS:
    return convert_limits (&c);
  case VALUE_RATIO:
    return convert_ratio (&c);
  }
  return false;
}

/* ---- Shared by parts and traces ---- */

/* The element a component is counted by: one that both hold, neither hydrogen nor oxygen unless
   there is no other.                                                                            */
static bool
shared_element (const struct species *a, const struct species *b, double *ratio)
{
  static const char *const order[] = { "S", "N", "C", "Cl", "F", "Si", "P", "Hg", "As", "Br",
                                       "I", "H", "O" };
  for (size_t i = 0; i < sizeof order / sizeof order[0]; i++) {
    double in_a = species_atoms (a, order[i]), in_b = species_atoms (b, order[i]);
    if (in_a > 0 && in_b > 0) {
      *ratio = in_a / in_b;
      return true;
    }
  }
  return false;
}

bool
counted_as (struct conversion *c, const struct species *species, double *per_mole,
            double *molar_mass)
{
  *per_mole = 1;
  *molar_mass = species->molar_mass;
  if (!c->counted_as) {
    return true;
  }
  struct species_set set;
  struct result *result = c->ev->result;
  c->ev->result = NULL;                 /* that S is a bare formula is no news here */
  bool found = species_named (c->ev, c->counted_as, &set);
  c->ev->result = result;
  if (!found) {
    return false;
  }
  if (set.count != 1 || !shared_element (species, set.at[0], per_mole)) {
    return fault_set_at (c->ev->fault, MESSAGE_KIND_WRONG, c->counted_as->at,
                         arena_format (c->ev->arena, "%s and %s share no element to count by",
                                       species->key, c->counted_as->text), NULL);
  }
  *molar_mass = set.at[0]->molar_mass;
  RECORD (c->ev, .name = arena_format (c->ev->arena, "moles of %s counted for one of",
                                       c->counted_as->text), .of = species->key,
          .formula = "", .value = *per_mole, .unit = "mol/mol", .source = "the formulas");
  if (c->ev->result && species != set.at[0]) {
    note (c->ev, MESSAGE_NOTE_COUNTED_AS, species->key, c->counted_as->text, NULL);
  }
  return true;
}

/* How near to air a measured oxygen may come: beyond, the factor says nothing.  */
#define NEAREST_TO_AIR 0.98
/* Short of air by less, an error of 0.1 mol% of oxygen moves the figure by 3 % or more.  */
#define SENSITIVE_TO_OXYGEN 0.0333

bool
oxygen_factor (struct conversion *c, double measured, const char *what, double *factor)
{
  struct evaluation *ev = c->ev;
  double A = ev->settings->oxygen_in_air, reference = c->state.oxygen;
  *factor = 1;
  if (isnan (reference)) {
    return true;
  }
  if (!(reference < A) || !(measured < NEAREST_TO_AIR * A)) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, c->at,
                         arena_format (ev->arena, "oxygen of %s is too near to that of air, %s, "
                                       "for a correction",
                                       share_text (ev->arena, reference < A ? measured : reference),
                                       share_text (ev->arena, A)), NULL);
  }
  *factor = (A - reference) / (A - measured);
  RECORD (ev, .name = "factor to the reference oxygen", .formula = "k = (A - O_r)/(A - O_m)",
          .value = *factor, .unit = "1", .source = "Directive 2010/75/EU, Annex VI part 4",
          STEP_SYMBOLS (CONSTANT ("A", A, "mol/mol", ev->settings->is_set[SETTING_OXYGEN_IN_AIR]
                                                       ? "as set" : "20.95 mol%, as shipped"),
                        CONSTANT ("O_r", reference, "mol/mol", STEP_TYPED),
                        SYMBOL ("O_m", measured, "mol/mol")));
  evaluation_touch (ev, TOUCH_OXYGEN);
  if (ev->describe && !ev->settings->is_set[SETTING_OXYGEN_IN_AIR]) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_OXYGEN_IN_AIR,
                                                  .fact = { share_text (ev->arena, A) },
                                                  .alternative = ALTERNATIVE_OXYGEN });
  }
  if (ev->result) {
    note (ev, MESSAGE_NOTE_OXYGEN_CORRECTION, what, share_text (ev->arena, measured),
          arena_format (ev->arena, "(%s - %s)/(%s - %s) = %s, oxygen in air %s",
                        figure_text (ev->arena, 100 * A), figure_text (ev->arena, 100 * reference),
                        figure_text (ev->arena, 100 * A), figure_text (ev->arena, 100 * measured),
                        figure_text (ev->arena, *factor), share_text (ev->arena, A)));
    note (ev, *factor < 1 ? MESSAGE_NOTE_OXYGEN_LOWERS : MESSAGE_NOTE_OXYGEN_RAISES, NULL, NULL,
          NULL);
    if (A - measured < SENSITIVE_TO_OXYGEN) {
      note (ev, MESSAGE_NOTE_OXYGEN_SENSITIVE, share_text (ev->arena, measured),
            arena_format (ev->arena, "%.2g %%", 0.1 / (A - measured)), NULL);
    }
    note (ev, MESSAGE_CAUTION_EMISSION, NULL, NULL, NULL);
  }
  return true;
}

static bool
customary_unit (const char *text)
{
  return strstr (text, "ft") || strstr (text, "acf") || strstr (text, "lb");
}

static bool
no_volume_state (struct conversion *c)
{
  fault_set_at (c->ev->fault, MESSAGE_STATE_MISSING, c->at, c->unit_text, NULL);
  fault_hint (c->ev->fault, "%s in %s at 20 degC, 1 bar(a)", c->what, c->unit_text);
  return false;
}

/* While a check tries conditions for a volume whose state nobody said.  */
static bool
open_volume (struct conversion *c, const struct composition *gas, struct counted_volume *volume)
{
  struct evaluation *ev = c->ev;
  bool real = (c->words & WORD_REAL) != 0 || ev->settings->real_volumes;
  volume->basis = arena_format (ev->arena, "%s, %s", ev->settings->family[FAMILY_NONE].text,
                                gas && real ? "real volume" : "ideal-gas volume");
  return family_molar_volume (ev, FAMILY_NONE, gas, real, &volume->Vm);
}

bool
conversion_volume (struct conversion *c, const struct composition *gas,
                   const struct stream *fallback, struct counted_volume *volume)
{
  struct evaluation *ev = c->ev;
  bool real = (c->words & WORD_REAL) != 0;
  volume->basis = NULL;
  if (c->unit->family_power != 0) {
    const struct family_setting *family = &ev->settings->family[c->unit->family];
    if (!family_molar_volume (ev, c->unit->family, gas, real, &volume->Vm)) {
      fault_place (ev->fault, c->at);
      return false;
    }
    if (ev->describe) {
      volume->basis = arena_format (ev->arena, "%s, %s", family->text,
                                    gas && (real || ev->settings->real_volumes)
                                      ? "real volume" : "ideal-gas volume");
    }
    return true;
  }
  bool own = !c->has_state || (isnan (c->state.T) && isnan (c->state.p));
  if (own && !isnan (ev->settings->family[FAMILY_NONE].at.T)) {
    return open_volume (c, gas, volume);
  }
  struct volume_question q = {
    gas, isnan (c->state.T) ? fallback->T : c->state.T,
    isnan (c->state.p) ? fallback->p : c->state.p,
    own && isnan (c->state.Z) ? fallback->Z : c->state.Z, (c->words & WORD_IDEAL) != 0
  };
  if ((isnan (q.T) || isnan (q.p)) && !volume_fill (ev, &q.T, &q.p)) {
    return no_volume_state (c);
  }
  struct actual a = { .T = q.T, .p = q.p, .customary = customary_unit (c->unit_text) };
  if (!actual_molar_volume (ev, &q, &volume->Vm, &a.Z, &a.model)) {
    fault_place (ev->fault, c->at);
    return false;
  }
  if (ev->describe) {
    volume->basis = actual_text (ev->arena, &a);
  }
  return true;
}
