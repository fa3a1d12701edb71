#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/air.h"
#include "gas/reference.h"
#include "gas/species.h"
#include "language/check/readings.h"
#include "language/evaluate/wording.h"
#include "property/emission.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

static const char *const blank[] = { "", "", "" };

static struct cell *
add_text_row (struct result *result, struct card *card, const char *name, const char *text)
{
  struct cell *cells = card_add_row (result, card, name);
  cells[0].text = text;
  return cells;
}

static const char *
count_text (struct result *result, size_t n)
{
  return arena_format (result->arena, "%zu", n);
}

/* ---- Your own names ---- */

static const char *
kind_word (enum name_kind kind)
{
  static const char *const words[] = { "gas", "stream", "quantity", "reference conditions",
                                       "sheet", "balance" };
  return words[kind];
}

/* The statement; of a balance its first line and how many follow, of a sheet its lines behind
   each other.                                                                                   */
static const char *
listed_source (struct arena *arena, const struct definition *d)
{
  size_t lines = 0;
  for (const struct statement *line = d->statement->next; line; line = line->next) {
    lines += line->kind != STATEMENT_END ? 1 : 0;
  }
  if (d->kind == NAME_BALANCE) {
    return arena_format (arena, "%s, %zu line%s", d->statement->source, lines,
                         lines == 1 ? "" : "s");
  }
  char *line = arena_string (arena, d->source);
  for (char *s = line; *s; s++) {
    *s = *s == '\n' ? ' ' : *s;
  }
  return line;
}

static void
list_names (struct session *s, const enum name_kind *only, struct result *result)
{
  size_t n = 0;
  for (size_t i = 0; i < s->count; i++) {
    n += !only || s->order[i]->kind == *only;
  }
  struct card *card = result_card (result, "names", count_text (result, n), 2, blank);
  for (size_t i = 0; i < s->count; i++)
    if (!only || s->order[i]->kind == *only) {
      struct cell *cells = add_text_row (result, card, s->order[i]->name,
                                         kind_word (s->order[i]->kind));
      cells[1].text = listed_source (result->arena, s->order[i]);
    }
  if (n == 0) {
    card_add_line (result, card, "nothing is defined yet: help gas, help stream");
  }
}

/* ---- What is built in ---- */

static void
list_units (struct session *s, struct result *result)
{
  size_t n = unit_table_rows (s->vocabulary.units);
  struct card *card = result_card (result, "units", count_text (result, n), 2, blank);
  for (size_t i = 0; i < n; i++) {
    struct unit_row row = unit_table_row (s->vocabulary.units, i);
    add_text_row (result, card, row.spelling, row.quantity)[1].text = row.name;
  }
}

static void
list_components (struct session *s, struct result *result)
{
  size_t n = species_table_size (s->vocabulary.species);
  struct card *card = result_card (result, "components", count_text (result, n), 2, blank);
  for (size_t i = 0; i < n; i++) {
    const struct species *species = species_table_at (s->vocabulary.species, i);
    add_text_row (result, card, species->key, species->name)[1].text = species->formula;
  }
  card_add_line (result, card, "and air, dry; and any chemical formula, by its molar mass alone");
}

static void
list_references (struct session *s, struct result *result)
{
  size_t n = reference_table_size (s->references);
  struct card *card = result_card (result, "references", count_text (result, n), 2, blank);
  for (size_t i = 0; i < n; i++) {
    const struct reference *r = reference_table_at (s->references, i);
    add_text_row (result, card, r->name,
                  arena_format (result->arena, "%s, %s", r->temperature, r->pressure))[1].text
      = r->title;
  }
}

/* What a check tries, and where each is known from.  */
static bool
list_readings (struct session *s, const struct statement *statement, struct result *result,
               struct fault *fault)
{
  const struct readings *readings = session_readings (s, fault);
  if (!readings) {
    fault_place (fault, statement->at);
    return false;
  }
  struct card *card = result_card (result, "readings", count_text (result, readings->count), 2,
                                   blank);
  for (size_t i = 0; i < readings->count; i++) {
    const struct reading_rule *rule = &readings->at[i];
    const char *said = reading_sentence (result->arena, rule, "a figure");
    add_text_row (result, card, rule->key, said)[1].text = rule->source;
  }
  return true;
}

/* F factors of what burns, in the unit of the method.  */
struct fuels { struct result *result; struct card *card; double per; };

static void
fuel_row (const struct fuel *fuel, void *with)
{
  struct fuels *f = with;
  struct cell *cells = card_add_row (f->result, f->card,
                                     arena_string (f->result->arena, fuel->name));
  for (size_t i = 0; i < F_FACTORS; i++) {
    cells[i].is_number = cells[i].recorded = !isnan (fuel->factor[i]);
    cells[i].value = fuel->factor[i] / f->per;
  }
  cells[F_FACTORS].text = arena_string (f->result->arena, fuel->source);
}

static bool
list_fuels (struct session *s, const struct statement *statement, struct result *result,
            struct fault *fault)
{
  static const char *const headings[] = { "dry", "wet", "carbon", "source" };
  const struct unit *unit = unit_find (s->vocabulary.units, "ft3/MMBtu", strlen ("ft3/MMBtu"),
                                       fault);
  struct card *card = result_card (result, "fuels", "F factors, Method 19", 4, headings);
  struct fuels fuels = { result, card, unit ? unit_to_si (unit, 1) : 1 };
  if (!unit || !fuel_each (s->properties, fuel_row, &fuels, fault)) {
    fault_place (fault, statement->at);
    return false;
  }
  card_add_line (result, card,
                 "ft3 of flue gas, or of its CO2, at 68 degF, 1 atm for 1e6 Btu gross");
  return true;
}

static void
list_properties (struct result *result)
{
  static const struct { const char *text, *help; } properties[] = {
#define PROPERTY(name, text, unit, help) { text, help },
#include "language/properties.def"
#undef PROPERTY
  };
  struct card *card = result_card (result, "properties",
                                   count_text (result, (size_t) PROPERTY_COUNT), 1, blank);
  for (size_t i = 0; i < (size_t) PROPERTY_COUNT; i++) {
    add_text_row (result, card, properties[i].text, properties[i].help);
  }
}

/* ---- Settings ---- */

/* "CH4 5 vol%, H2 4 vol%"  */
static const char *
limits_text (struct arena *arena, const struct stated_limit *limit)
{
  const char *text = limit ? "" : "as published";
  for (; limit; limit = limit->next) {
    text = arena_format (arena, "%s%s %s %s%s", text, limit->species->key, limit->figure->figure,
                         limit->figure->unit_text, limit->next ? ", " : "");
  }
  return text;
}

static const char *
setting_value (struct arena *arena, const struct settings *s, enum setting setting)
{
  static const char *const below[] = { "zero", "half", "limit" };
  switch (setting) {
  case SETTING_GAS_MODEL:
    return gas_model_name (s->model);
  case SETTING_SITE_PRESSURE:
    return arena_format (arena, "%s bar", figure_text (arena, s->site_pressure / 1e5));
  case SETTING_SITE_ALTITUDE:
    return isnan (s->site_altitude) ? "not stated"
           : arena_format (arena, "%s m", figure_text (arena, s->site_altitude));
  case SETTING_REFERENCE_VOLUMES:
    return s->real_volumes ? "real" : "ideal";
  case SETTING_OXYGEN_IN_AIR:
    return share_text (arena, s->oxygen_in_air);
  case SETTING_WATER_IN_AIR:
    return share_text (arena, s->water_in_air);
  case SETTING_TOTAL_TOLERANCE:
    return arena_format (arena, "%s %%", figure_text (arena, s->total_tolerance * 100));
  case SETTING_BELOW_DETECTION:
    return below[s->below];
  case SETTING_COMBUSTION:
    return temperature_text (arena, s->combustion, false);
  case SETTING_CALORIFIC_VALUES:
    return s->calorific_1995 ? "ISO 6976:1995" : "ISO 6976:2016";
  case SETTING_LOWER_FLAMMABLE_LIMIT:
    return limits_text (arena, s->limits);
  case SETTING_PARTS:
    return s->parts_independent ? "independent" : "closed";
  case SETTING_CONSTANTS:
    return s->constants_uncertain ? "uncertain" : "exact";
  case SETTING_COVERAGE:
    return arena_format (arena, "%.9g", s->coverage);
  case SETTING_SMALLEST_EFFECT:
    return arena_format (arena, "%s %%", figure_text (arena, s->smallest_effect * 100));
  case SETTING_DIGITS:
    return arena_format (arena, "%d", s->digits);
  case SETTING_COUNT:
    break;
  }
  return "";
}

void
card_of_settings (struct session *session, const enum setting *one, struct result *result)
{
  const struct settings *s = &session->settings;
  struct card *card = result_card (result, "settings",
                                   settings_changed (s) ? "some not as shipped" : "as shipped", 2,
                                   blank);
  for (size_t i = 0; i < (size_t) SETTING_COUNT; i++) {
    enum setting setting = (enum setting) i;
    if (!one || setting == *one) {
      struct cell *cells = add_text_row (result, card, setting_name (setting),
                                         setting_value (result->arena, s, setting));
      cells[1].text = s->is_set[i] ? "as set" : "";
    }
  }
  for (int i = FAMILY_NORMAL; !one && i < FAMILY_COUNT; i++) {
    struct cell *cells = add_text_row (result, card,
                                       reference_family_name ((enum reference_family) i),
                                       s->family[i].text);
    cells[1].text = s->family[i].set ? "as set" : "";
  }
}

/* ---- `list` ---- */

bool
command_list (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  static const char *const own[] = { "gases", "streams", "quantities", NULL, "sheets",
                                     "balances" };
  if (!s->name) {
    list_names (session, NULL, result);
    return true;
  }
  for (enum name_kind kind = NAME_GAS; kind <= NAME_BALANCE; kind++)
    if (own[kind] && strcmp (s->name, own[kind]) == 0) {
      list_names (session, &kind, result);
      return true;
    }
  if (strcmp (s->name, "units") == 0) {
    list_units (session, result);
  } else if (strcmp (s->name, "components") == 0) {
    list_components (session, result);
  } else if (strcmp (s->name, "references") == 0) {
    list_references (session, result);
  } else if (strcmp (s->name, "readings") == 0) {
    return list_readings (session, s, result, fault);
  } else if (strcmp (s->name, "fuels") == 0) {
    return list_fuels (session, s, result, fault);
  } else if (strcmp (s->name, "properties") == 0) {
    list_properties (result);
  } else if (strcmp (s->name, "settings") == 0) {
    card_of_settings (session, NULL, result);
  } else {
    return fault_set_at (fault, MESSAGE_NAME_UNKNOWN, s->name_at, s->name,
                         "list, or list gases, streams, quantities, sheets, balances, units, "
                         "components, references, fuels, readings, properties, settings");
  }
  return true;
}
