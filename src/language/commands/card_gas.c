#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/air.h"
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/gathering.h"
#include "gas/species.h"
#include "language/evaluate/uncertainty.h"
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

const char *
typed_amount (struct arena *arena, const struct node *part)
{
  const struct node *a = part->a;
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

/* Does the name of a part stand for several: a gas of the user's, air, a peak not resolved?  Is
   the species among them?                                                                       */
static bool
is_within (struct session *session, const struct node *part, const struct species *species)
{
  size_t n = strlen (part->text);
  struct definition *d = name_find (session, part->text, n);
  struct part peak[AIR_PEAK_PARTS];
  if (d) {
    return d->kind == NAME_GAS && d->fresh && d->value.gas->closed
           && composition_fraction (d->value.gas->closed, species) > 0;
  }
  if (air_is_name (part->text, n)) {
    return composition_fraction (session->air, species) > 0;
  }
  size_t count = air_peak (session->vocabulary.species, part->text, n, peak);
  return parts_find (count, peak, species) < count;
}

/* What was typed for a species: "58.2", or "in air 40" for one that came with others.  */
static const char *
stated_as (struct session *session, struct arena *arena, const struct node *list,
           const struct species *species)
{
  const char *typed = "";
  for (const struct node *part = list ? list->items : NULL; part; part = part->next) {
    const struct species *found = NULL;
    const char *candidates;
    bool own = name_find (session, part->text, strlen (part->text)) == NULL
               && species_find (session->vocabulary.species, part->text, strlen (part->text),
                                &found, &candidates) != SPECIES_NONE && found == species;
    if (!own && !is_within (session, part, species)) {
      continue;
    }
    const char *amount = typed_amount (arena, part);
    typed = arena_format (arena, "%s%s%s%s%s", typed, *typed ? ", " : "",
                          own ? "" : "in ", own ? "" : part->text,
                          own ? amount : arena_format (arena, " %s", amount));
  }
  return typed;
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

/* What the uncertain figures do to the lines above, asked as a user would ask it.  */
static void
uncertain_line (struct session *session, const char *name, struct result *result,
                struct card *card)
{
  static const struct { const char *say, *unit, *property, *target; } asked[] = {
    { "molar mass", " g/mol", "molar mass", "g/mol" },
    { "gross", " MJ/m3", "gross calorific value", "MJ/m3 ideal" },
    { "net", "", "net calorific value", "MJ/m3 ideal" },
    { "wobbe", "", "wobbe", "MJ/m3 ideal" },
  };
  struct arena *arena = result->arena;
  double k = session->settings.coverage;
  const char *line = "";
  for (size_t i = 0; i < sizeof asked / sizeof asked[0]; i++) {
    const char *ask = arena_format (arena, "%s of %s in %s", asked[i].property,
                                    name_text (arena, name), asked[i].target);
    double u = uncertainty_of_question (session, arena, ask);
    if (u > 0) {
      line = arena_format (arena, "%s%s%s ± %s%s", line, *line ? "  .  " : "", asked[i].say,
                           spread_text (arena, k * u), asked[i].unit);
    }
  }
  if (*line) {
    card_add_line (result, card, k > 1 ? arena_format (arena, "%s  (k=%s)", line,
                                                       figure_text (arena, k)) : line);
  }
}

/* What the ± of the parts are, and what they are not.  */
static void
correlation_line (struct session *session, struct result *result, struct card *card)
{
  const double k = session->settings.coverage;
  card_add_line (result, card,
                 arena_format (result->arena, "± of each part by itself, %s; %s",
                               k > 1 ? arena_format (result->arena, "expanded (k=%s)",
                                                     figure_text (result->arena, k))
                                     : "standard (k=1)",
                               session->settings.parts_independent
                                 ? "parts independent, as set" : "the closure correlates them"));
}

void
card_add_limits (struct session *session, struct result *result, struct card *card,
                 const struct composition *gas)
{
  struct flammability f;
  struct fault unheard;
  struct arena *arena = result->arena;
  struct flammable_limits *stated;
  size_t n = limits_set (&session->settings, NULL, arena, &stated);
  fault_init (&unheard, arena);
  if (flammability_of (gas, stated, n, &f, NULL, &unheard) && f.kind == FLAMMABLE_BETWEEN) {
    const char *to = isnan (f.upper) ? "" : f.upper_is_bound ? " to at most " : " to ";
    card_add_line (result, card,
                   arena_format (arena, "flammable in air from %s%s%s vol%%",
                                 rough_text (arena, 100 * f.lower), to,
                                 isnan (f.upper) ? "" : rough_text (arena, 100 * f.upper)));
  }
}

/* Before treatments, by the basis: shares that keep the total that was stated.  */
struct raw { const struct analysis *analysis; double total, moles, mass, Vm; };

static struct raw
raw_of (const struct analysis *a, double Vm)
{
  struct raw raw = { a, a ? analysis_total (a) : 1, 0, 0, Vm };
  for (size_t i = 0; a && i < a->count; i++) {
    raw.moles += a->parts[i].amount;
    raw.mass += a->parts[i].amount * a->parts[i].species->molar_mass;
  }
  return raw;
}

/* mol%, mass% and g/Nm3 of a species before the treatments.  */
static void
raw_cells (const struct raw *raw, const struct species *species, struct cell *cells)
{
  size_t at = parts_find (raw->analysis->count, raw->analysis->parts, species);
  double moles = at < raw->analysis->count ? raw->total * raw->analysis->parts[at].amount : 0;
  number_cell (&cells[1], 100 * moles / raw->moles);
  number_cell (&cells[3], 100 * moles * species->molar_mass / raw->mass);
  number_cell (&cells[5], 1000 * moles * species->molar_mass / raw->moles / raw->Vm);
}

/* The standard uncertainties of the parts in the three bases, one basis behind the other; null
   where nothing in the gas is uncertain.                                                        */
static const struct budget *const *
spreads_of (struct session *session, struct arena *arena, const struct composition *gas,
            const char *name)
{
  struct definition *d = name_find (session, name, strlen (name));
  size_t count = 0;
  const struct budget **budgets = NULL;
  if (d && d->source_count > 0) {
    budgets = uncertainty_of_figures (session, arena,
                                      arena_format (arena, "%s in mol%%, mass%%, g/Nm3",
                                                    name_text (arena, name)), &count);
  }
  return budgets && count == 3 * gas->count ? budgets : NULL;
}

/* The figures of now get their uncertainties, each for itself.  */
static void
spread_cells (const struct composition *gas, const struct budget *const *spreads, size_t step,
              const struct species *species, struct cell *cells)
{
  for (size_t i = 0; spreads && i < gas->count; i++)
    for (size_t k = 0; gas->species[i] == species && k < 3; k++) {
      const struct budget *b = spreads[k * gas->count + i];
      cells[k * step].spread = b ? b->uncertainty : 0;
    }
}

/* One part of a closed gas, with the raw figures beside those of now where there are any.  */
static void
part_row (struct session *session, const struct gas_value *gas, const struct raw *raw,
          const struct species *species, struct result *result, struct card *card,
          const struct budget *const *spreads)
{
  const struct composition *c = gas->closed;
  size_t step = raw->analysis ? 2 : 1;
  struct cell *cells = card_add_row (result, card, species->key);
  double x = composition_fraction (c, species), mass = x * species->molar_mass;
  number_cell (&cells[0], 100 * x);
  number_cell (&cells[step], 100 * mass / c->molar_mass);
  number_cell (&cells[2 * step], 1000 * mass / raw->Vm);
  spread_cells (c, spreads, step, species, cells);
  if (raw->analysis) {
    raw_cells (raw, species, cells);
  }
  if (gas->list) {
    cells[3 * step].text = stated_as (session, result->arena, gas->list, species);
  }
}

/* All composition bases side by side; of a treated gas what it was as well, and what is gone.  */
static void
closed_card (struct session *session, const struct gas_value *gas, const char *name,
             struct result *result)
{
  static const char *const plain[] = { "mol%", "mass%", "g/Nm3", "stated as" };
  static const char *const treated[] = { "mol%", "raw mol%", "mass%", "raw mass%", "g/Nm3",
                                         "raw g/Nm3", "stated as" };
  const struct composition *c = gas->closed;
  struct conditions normal = session->settings.family[FAMILY_NORMAL].at;
  struct raw raw = raw_of (gas->raw, ideal_volume (1, normal));
  struct card *card = result_card (result, name, kind_text (session, result->arena, c, "gas"),
                                   (raw.analysis ? 6u : 3u) + (gas->list != NULL),
                                   raw.analysis ? treated : plain);
  const struct budget *const *spreads = spreads_of (session, result->arena, c, name);
  card->together = raw.analysis ? 2 : 1;
  card->coverage = session->settings.coverage;
  for (size_t i = 0; raw.analysis && i < raw.analysis->count; i++) {
    part_row (session, gas, &raw, raw.analysis->parts[i].species, result, card, spreads);
  }
  for (size_t i = 0; i < c->count; i++)
    if (!raw.analysis
        || parts_find (raw.analysis->count, raw.analysis->parts, c->species[i])
             == raw.analysis->count) {
      part_row (session, gas, &raw, c->species[i], result, card, spreads);
    }
  if (raw.analysis && raw.analysis->whole != WHOLE_NONE) {
    card_add_line (result, card,
                   arena_format (result->arena, "raw: as stated, total %s %s",
                                 figure_text (result->arena, 100 * raw.total),
                                 raw.analysis->whole == WHOLE_MASS ? "mass%" : "mol%"));
  }
  molar_line (session, result, card, c);
  heat_line (session, result, card, c);
  struct definition *d = name_find (session, name, strlen (name));
  if (d && d->source_count > 0) {
    uncertain_line (session, name, result, card);
    correlation_line (session, result, card);
  }
  card_add_limits (session, result, card, c);
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
