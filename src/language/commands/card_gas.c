#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/wording.h"
#include "property/calorific.h"
#include "property/flammability.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/constants.h"

static void
number_cell (struct cell *cell, double value)
{
  cell->is_number = true;
  cell->value = value;
}

/* What stands behind an uncertainty that is no standard one.  */
static const char *
spread_kind_text (struct arena *arena, const struct spread *spread)
{
  return spread->kind == SPREAD_EXPANDED
           ? arena_format (arena, " (k=%s)", figure_text (arena, spread->k))
         : spread->kind == SPREAD_LIMITS ? " (limits)" : "";
}

/* What the user typed for a part: "58.2 +/- 0.3", "850 ppm", "rest", "<5 ppm".  */
static const char *
typed_amount (struct session *session, struct arena *arena, const struct node *part)
{
  const struct node *a = part->a;
  (void) session;
  if (part->rest) {
    return "rest";
  }
  if (!a || a->kind != NODE_QUANTITY || !a->figure) {
    return "computed";
  }
  const char *spread = a->spread
                         ? arena_format (arena, " ± %s%s%s%s", a->spread->figure,
                                         a->spread->relative ? " %" : a->spread->unit ? " " : "",
                                         a->spread->unit && !a->spread->relative
                                           ? a->spread->unit->spelling : "",
                                         spread_kind_text (arena, a->spread))
                         : "";
  return arena_format (arena, "%s%s%s%s%s", part->below ? "<" : "", a->figure,
                       a->unit_text ? " " : "", a->unit_text ? a->unit_text : "", spread);
}

static const char *
stated_as (struct session *session, struct arena *arena, const struct node *list,
           const struct species *species)
{
  for (const struct node *part = list ? list->items : NULL; part; part = part->next) {
    const struct species *found = NULL;
    const char *candidates;
    (void) species_find (session->vocabulary.species, part->text, strlen (part->text), &found,
                         &candidates);
    if (found == species) {
      return typed_amount (session, arena, part);
    }
  }
  return "";
}

static const char *
kind_text (struct session *session, struct arena *arena, const struct composition *gas,
           const char *what)
{
  bool wet = composition_fraction (gas, session->water) > 0;
  return arena_format (arena, "%s, %s, %zu part%s", what, wet ? "wet" : "dry", gas->count,
                       gas->count == 1 ? "" : "s");
}

/* J/m3; air has 81, of its traces of methane.  */
#define WORTH_A_LINE 1e4

/* A calorific figure at the conditions of Sm3, ideal; "" where there is none.  */
static const char *
heat_text (struct evaluation *ev, const struct composition *gas, int figure)
{
  struct heat_question q = { gas, UNSTATED, UNSTATED, false, STANDARD_NONE };
  const char *basis;
  double value;
  ev->fault->kind = MESSAGE_NONE;
  return heat_figure (ev, &q, figure, &value, &basis) && value > WORTH_A_LINE
           ? figure_text (ev->arena, value / 1e6) : "";
}

static void
heat_line (struct session *session, struct result *result, struct card *card,
           const struct composition *gas)
{
  struct evaluation ev;
  struct fault unheard;
  fault_init (&unheard, result->arena);
  evaluation_init (&ev, session, NULL, &unheard);
  const char *gross = heat_text (&ev, gas, CALORIFIC_GROSS_VOLUME);
  const char *net = heat_text (&ev, gas, CALORIFIC_NET_VOLUME);
  const char *wobbe = heat_text (&ev, gas, CALORIFIC_WOBBE);
  const struct settings *s = &session->settings;
  if (*gross) {
    card_add_line (result, card,
                   arena_format (result->arena, "gross %s MJ/m3  .  net %s  .  wobbe %s  %s/%s "
                                 "degC, ideal", gross, *net ? net : "not stated", wobbe,
                                 figure_text (result->arena, s->combustion - ICE_POINT),
                                 figure_text (result->arena,
                                              s->family[FAMILY_STANDARD].at.T - ICE_POINT)));
  }
}

static void
molar_line (struct session *session, struct result *result, struct card *card,
            const struct composition *gas)
{
  struct arena *arena = result->arena;
  struct evaluation ev;
  struct fault unheard;
  fault_init (&unheard, arena);
  evaluation_init (&ev, session, NULL, &unheard);
  card_add_line (result, card,
                 arena_format (arena, "molar mass %s g/mol  .  relative density %s, ideal",
                               figure_text (arena, gas->molar_mass * 1000),
                               figure_text (arena,
                                            gas->molar_mass / heat_air_molar_mass (&ev))));
}

void
card_add_limits (struct result *result, struct card *card, const struct composition *gas)
{
  struct flammability f;
  struct fault unheard;
  struct arena *arena = result->arena;
  fault_init (&unheard, arena);
  if (flammability_of (gas, NULL, 0, &f, NULL, &unheard) && f.kind == FLAMMABLE_BETWEEN) {
    const char *to = isnan (f.upper) ? "" : f.upper_is_bound ? " to at most " : " to ";
    card_add_line (result, card,
                   arena_format (arena, "flammable in air from %s%s%s vol%%",
                                 rough_text (arena, 100 * f.lower), to,
                                 isnan (f.upper) ? "" : rough_text (arena, 100 * f.upper)));
  }
}

/* All composition bases side by side.  */
static void
closed_card (struct session *session, const struct gas_value *gas, const char *name,
             struct result *result)
{
  static const char *const headings[] = { "mol%", "mass%", "g/Nm3", "stated as" };
  const struct composition *c = gas->closed;
  struct conditions normal = session->settings.family[FAMILY_NORMAL].at;
  double Vm = ideal_volume (1, normal);
  struct card *card = result_card (result, name, kind_text (session, result->arena, c, "gas"),
                                   gas->list ? 4 : 3, headings);
  for (size_t i = 0; i < c->count; i++) {
    struct cell *cells = card_add_row (result, card, c->species[i]->key);
    double mass = c->fraction[i] * c->species[i]->molar_mass;
    number_cell (&cells[0], 100 * c->fraction[i]);
    number_cell (&cells[1], 100 * mass / c->molar_mass);
    number_cell (&cells[2], 1000 * mass / Vm);
    if (gas->list) {
      cells[3].text = stated_as (session, result->arena, gas->list, c->species[i]);
    }
  }
  molar_line (session, result, card, c);
  heat_line (session, result, card, c);
  card_add_limits (result, card, c);
}

/* An open gas: only what was stated, and how to close it.  */
static void
open_card (struct session *session, const struct gas_value *gas, const char *name,
           struct result *result)
{
  static const char *const headings[] = { "stated as" };
  const struct analysis *a = gas->analysis;
  struct arena *arena = result->arena;
  const char *unit = a->whole == WHOLE_MASS ? "mass%" : "mol%";
  struct card *card = result_card (result, name,
                                   arena_format (arena, "gas, open, %zu parts", a->count), 1,
                                   headings);
  for (size_t i = 0; i < a->count; i++) {
    struct cell *cells = card_add_row (result, card, a->parts[i].species->key);
    cells[0].text = stated_as (session, arena, gas->list, a->parts[i].species);
  }
  card_add_line (result, card,
                 arena_format (arena, "its parts add up to %s %s: nothing is computed from it",
                               figure_text (arena, 100 * analysis_total (a)), unit));
  card_add_line (result, card,
                 arena_format (arena, "close it with: normalise %s, or normalise %s into N2",
                               name_text (arena, name), name_text (arena, name)));
}

bool
card_of_gas (struct session *session, const struct gas_value *gas, const char *name,
             struct result *result, struct fault *fault)
{
  (void) fault;
  if (gas->closed) {
    closed_card (session, gas, name, result);
  } else {
    open_card (session, gas, name, result);
  }
  return true;
}
