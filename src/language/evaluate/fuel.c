#include "config.h"
#include "language/evaluate/fuel.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "language/session_private.h"
#include "property/calorific.h"
#include "support/arena.h"

static const char *const called[F_FACTORS] = { "dry F factor", "wet F factor", "carbon F factor" };

bool
property_is_f_factor (enum property property, enum f_factor *factor)
{
  *factor = property == PROPERTY_WET_F_FACTOR ? F_WET
            : property == PROPERTY_CARBON_F_FACTOR ? F_CARBON : F_DRY;
  return *factor != F_DRY || property == PROPERTY_DRY_F_FACTOR;
}

const char *
f_factor_text (struct evaluation *ev, double F)
{
  const double per = 0.3048 * 0.3048 * 0.3048 / 1055.05585262e6;
  return arena_format (ev->arena, "%s ft3/MMBtu at 68 degF, 1 atm", figure_text (ev->arena,
                                                                                 F / per));
}

struct conditions
f_factor_conditions (struct evaluation *ev, const struct unit *unit)
{
  struct conditions at = { F_TEMPERATURE, F_PRESSURE, UNSTATED };
  const struct family_setting *family = &ev->settings->family[unit->family];
  if (unit->family_power == 0) {
    return at;
  }
  if (unit->family == FAMILY_SCF && !family->set) {
    if (ev->describe) {
      evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_F_FACTOR_SCF });
    }
    return at;
  }
  assume_family (ev, unit->family);
  return family->at;
}

/* ---- Of the table ---- */

/* Of a fuel of the table that is one component, by its elements, for comparison; NAN: none.  */
static double
by_elements (struct evaluation *ev, const struct composition *gas, enum f_factor factor)
{
  struct fault unheard, *fault = ev->fault;
  struct result *result = ev->result;
  struct workings *workings = ev->workings;
  const bool describe = ev->describe;
  struct heat_question heat = { gas, UNSTATED, UNSTATED, false, STANDARD_NONE };
  struct f_question q = { gas, 0, factor };
  double F = UNSTATED;
  const char *basis;
  fault_init (&unheard, ev->arena);
  ev->fault = &unheard;
  ev->result = NULL;
  ev->workings = NULL;
  ev->describe = false;
  if (!heat_figure (ev, &heat, CALORIFIC_GROSS_MASS, &q.heat, &basis)
      || !f_factor_of_gas (ev->session->vocabulary.species, &q, &F, NULL, &unheard)) {
    F = UNSTATED;
  }
  ev->fault = fault;
  ev->result = result;
  ev->workings = workings;
  ev->describe = describe;
  return F;
}

/* What the component a fuel of the table is named after would have.  */
static void
tell_elements (struct evaluation *ev, const struct fuel *fuel, enum f_factor factor)
{
  static const struct { const char *fuel, *key; } pure[] = { { "propane", "C3H8" },
                                                             { "butane", "nC4H10" } };
  const struct species *species;
  const char *candidates;
  for (size_t i = 0; ev->result && i < sizeof pure / sizeof pure[0]; i++)
    if (strcmp (pure[i].fuel, fuel->name) == 0
        && species_find (ev->session->vocabulary.species, pure[i].key, strlen (pure[i].key),
                         &species, &candidates) == SPECIES_KEY) {
      double F = by_elements (ev, composition_pure (ev->arena, species), factor);
      if (isfinite (F)) {
        note (ev, MESSAGE_NOTE_FUEL_ELEMENTS, called[factor], pure[i].key, f_factor_text (ev, F));
      }
    }
}

static bool
tabulated (struct evaluation *ev, const struct fuel_question *q, const struct fuel *fuel,
           double *F, const char **basis)
{
  *F = fuel->factor[q->factor];
  if (q->net) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->fuel->at,
                  "the F factors of the table count gross heat", NULL);
    fault_hint (ev->fault, "gross; or burning a gas whose composition is known");
    return false;
  }
  if (isnan (*F)) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->fuel->at,
                         arena_format (ev->arena, "the table has no %s of %s", called[q->factor],
                                       fuel->name), NULL);
  }
  RECORD (ev, .name = arena_format (ev->arena, "%s of", called[q->factor]), .of = fuel->name,
          .formula = "", .value = *F, .unit = "m3/J", .source = fuel->source);
  tell_elements (ev, fuel, q->factor);
  if (ev->describe) {
    *basis = arena_format (ev->arena, "%s, Method 19, table 19-2", fuel->name);
  }
  return true;
}

/* ---- Of a gas ---- */

static const struct composition *
gas_burnt (struct evaluation *ev, const struct fuel_question *q)
{
  struct value v;
  if (!evaluate (ev, q->fuel, q->state, &v)) {
    if (ev->fault->kind == MESSAGE_NAME_UNKNOWN) {
      ev->fault->fact[1] = "what burns is a gas, or a fuel of the table: natural-gas, propane, "
                           "butane, oil, bituminous-coal, wood ...";
    }
    return NULL;
  }
  if (v.kind == VALUE_STREAM) {
    return v.stream.gas;
  }
  if (v.kind != VALUE_GAS) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->fuel->at, "this is no gas that burns", NULL);
    return NULL;
  }
  return gas_composition (ev, v.gas, q->fuel->at);
}

/* What the fuel of the table most like it has.  */
static void
tell_tabulated (struct evaluation *ev, const struct composition *gas, enum f_factor factor,
                const char *name, double F)
{
  struct fuel fuel;
  struct fault unheard;
  const char *like = ev->result ? fuel_like (gas) : NULL;
  fault_init (&unheard, ev->arena);
  if (like && fuel_find (ev->session->properties, like, &fuel, &unheard) && fuel.name
      && isfinite (fuel.factor[factor])) {
    double by = 100 * (fuel.factor[factor] / F - 1);
    note (ev, MESSAGE_NOTE_FUEL_TABULATED,
          arena_format (ev->arena, "%s of %s", called[factor], name), fuel.name,
          arena_format (ev->arena, "%s (%s%.2g %%)", f_factor_text (ev, fuel.factor[factor]),
                        by > 0 ? "+" : "", by));
  }
}

static bool
computed (struct evaluation *ev, const struct fuel_question *q, double *F, const char **basis)
{
  const struct composition *gas = gas_burnt (ev, q);
  struct heat_question heat = { gas, UNSTATED, UNSTATED, false, STANDARD_NONE };
  struct f_question ask = { gas, 0, q->factor };
  const char *heat_basis;
  if (!gas) {
    return false;
  }
  heat.T = F_TEMPERATURE;                /* of no matter by mass, and then nothing is assumed */
  heat.p = F_PRESSURE;
  if (!heat_figure (ev, &heat, q->net ? CALORIFIC_NET_MASS : CALORIFIC_GROSS_MASS, &ask.heat,
                    &heat_basis)
      || !f_factor_of_gas (ev->session->vocabulary.species, &ask, F, ev->workings, ev->fault)) {
    fault_place (ev->fault, q->fuel->at);
    return false;
  }
  if (ev->describe) {
    const char *name = q->fuel->kind == NODE_NAME ? q->fuel->text : "the gas";
    *basis = arena_format (ev->arena, "by the elements of %s", name);
    if (!q->net) {
      tell_tabulated (ev, gas, q->factor, name, *F);
    }
  }
  return true;
}

bool
fuel_factor (struct evaluation *ev, const struct fuel_question *q, double *F, const char **basis)
{
  struct fuel fuel = { NULL, { 0 }, "" };
  bool name = q->fuel->kind == NODE_NAME
              && !name_find (ev->session, q->fuel->text, strlen (q->fuel->text));
  *basis = NULL;
  if (name && !fuel_find (ev->session->properties, q->fuel->text, &fuel, ev->fault)) {
    return false;
  }
  return fuel.name ? tabulated (ev, q, &fuel, F, basis) : computed (ev, q, F, basis);
}

bool
property_f_factor (struct evaluation *ev, const struct node *node, const struct state *state,
                   struct value *out)
{
  struct fuel_question q = { node->b, state, F_DRY, false };
  const char *of, *spelling = "ft3/MMBtu";
  double F;
  (void) property_is_f_factor (node->a->property, &q.factor);
  if (node->a->by) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->a->at, "ISO 6976 has no F factors",
                         NULL);
  }
  if (!fuel_factor (ev, &q, &F, &of)) {
    return false;
  }
  *out = value_number (F);
  out->unit = unit_find (ev->session->vocabulary.units, spelling, strlen (spelling), ev->fault);
  if (!out->unit) {
    return false;
  }
  out->measure = measure_of_unit (out->unit);
  out->T = F_TEMPERATURE;
  out->p = F_PRESSURE;
  out->basis = of;
  return true;
}
