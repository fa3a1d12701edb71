#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/reference.h"
#include "gas/species.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/constants.h"

static const char *const blank[] = { "", "", "" };

/* A figure of a table, if the table has it.  */
static void
add_known (struct result *result, struct card *card, const char *name, double value,
           const char *unit, const char *source)
{
  if (!isnan (value)) {
    struct cell *cells = card_add_row (result, card, name);
    cells[0] = (struct cell) { .is_number = true, .value = value, .recorded = true };
    cells[1].text = unit;
    cells[2].text = source ? source : "";
  }
}

/* Synonyms are parted by '|' in the table, because chemical names hold commas.  */
static const char *
with_commas (struct arena *arena, const char *synonyms)
{
  const char *text = "";
  for (const char *from = synonyms; *from; ) {
    size_t n = strcspn (from, "|");
    text = arena_format (arena, "%s%s%.*s", text, *text ? ", " : "", (int) n, from);
    from += n + (from[n] == '|');
  }
  return text;
}

void
card_of_species (struct session *session, const struct species *s, struct result *result)
{
  (void) session;
  struct arena *arena = result->arena;
  struct card *card = result_card (result, s->key,
                                   arena_format (arena, "component, %s",
                                                 s->name ? s->name : s->key),
                                   3, blank);
  add_known (result, card, "molar mass", s->molar_mass * 1000, "g/mol",
             s->origin == SPECIES_STATED ? "as stated"
                                         : "from the formula and tables/elements.tsv");
  add_known (result, card, "critical temperature", s->critical_temperature - ICE_POINT, "degC",
             NULL);
  add_known (result, card, "critical pressure", s->critical_pressure / 1e5, "bar(a)", NULL);
  add_known (result, card, "critical volume", s->critical_molar_volume * 1e6, "cm3/mol", NULL);
  add_known (result, card, "acentric factor", s->acentric_factor, "", NULL);
  add_known (result, card, s->sublimes ? "sublimation point" : "boiling point",
             s->boiling_point - ICE_POINT, "degC", "at 101.325 kPa");
  add_known (result, card, "8 h exposure limit", s->exposure_limit * 1e6, "ppm",
             s->exposure_source);
  add_known (result, card, "lower flammable limit", s->lower_flammable * 100, "vol%",
             s->flammable_source);
  add_known (result, card, "upper flammable limit", s->upper_flammable * 100, "vol%",
             s->flammable_source);
  if (s->formula && *s->formula) {
    card_add_line (result, card, arena_format (arena, "formula %s%s%s", s->formula,
                                               s->cas && *s->cas ? "  .  CAS " : "",
                                               s->cas ? s->cas : ""));
  }
  if (s->synonyms && *s->synonyms) {
    card_add_line (result, card, arena_format (arena, "also called %s",
                                               with_commas (arena, s->synonyms)));
  }
  if (s->note && *s->note) {
    card_add_line (result, card, s->note);
  }
  if (s->source && *s->source) {
    card_add_line (result, card, arena_format (arena, "source: %s%s", s->source,
                                               s->origin == SPECIES_USERS ? " (your own table)"
                                                                          : ""));
  }
}

static const char *
sort_text (const struct unit *unit)
{
  switch (unit->sort) {
  case UNIT_POINT: return "a temperature on a scale";
  case UNIT_DIFFERENCE: return "a difference of temperatures";
  case UNIT_ABSOLUTE: return "absolute pressure";
  case UNIT_GAUGE: return "pressure above the site's barometer";
  case UNIT_VACUUM: return "pressure below the site's barometer";
  case UNIT_HUMIDITY: return "relative humidity over liquid water";
  case UNIT_OXYGEN: return "reference oxygen, dry";
  case UNIT_SCALE: break;
  }
  switch (unit->ratio) {
  case RATIO_PLAIN: return "a share; of what is not said";
  case RATIO_MOLE: return "a share by amount";
  case RATIO_MASS: return "a share by mass";
  case RATIO_VOLUME: return "a share by volume, ideal mixing unless real";
  case RATIO_ENERGY: return "a share by energy";
  case RATIO_NONE: break;
  }
  const char *name = dimension_name (unit->dimension);
  return name ? name : "compound unit";
}

/* The SI unit a factor leads to: by its own word, else in base units.  */
static const char *
si_text (struct arena *arena, struct dimension d)
{
  const struct { struct dimension dimension; const char *text; } words[] = {
    { DIMENSION_PRESSURE, "Pa" }, { DIMENSION_ENERGY, "J" }, { DIMENSION_POWER, "W" },
    { DIMENSION_VOLUME, "m3" }, { DIMENSION_VOLUME_FLOW, "m3/s" },
    { DIMENSION_MASS_FLOW, "kg/s" }, { DIMENSION_MOLAR_FLOW, "mol/s" },
    { DIMENSION_DENSITY, "kg/m3" }, { DIMENSION_MOLAR_DENSITY, "mol/m3" } };
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (dimension_equal (words[i].dimension, d)) {
      return words[i].text;
    }

  static const char *const symbols[] = { "kg", "m", "s", "K", "mol" };
  const signed char powers[] = { d.mass, d.length, d.time, d.temperature, d.amount };
  const char *text = "";
  for (size_t i = 0; i < 5; i++)
    if (powers[i]) {
      text = arena_format (arena, powers[i] == 1 ? "%s%s%s" : "%s%s%s^%d", text, *text ? "*" : "",
                           symbols[i], powers[i]);
    }
  return text;
}

static void
table_rows (struct session *session, const struct unit *unit, struct result *result,
            struct card *card)
{
  for (size_t i = 0; i < unit_table_rows (session->vocabulary.units); i++) {
    struct unit_row row = unit_table_row (session->vocabulary.units, i);
    if (strcmp (row.spelling, unit->spelling) == 0) {
      card_add_line (result, card, arena_format (result->arena, "%s: %s", row.name, row.factor));
      card_add_line (result, card, arena_format (result->arena, "source: %s%s", row.source,
                                                 row.users ? " (your own table)" : ""));
    }
  }
}

bool
card_of_unit (struct session *session, const struct unit *unit, struct result *result,
              struct fault *fault)
{
  (void) fault;
  struct arena *arena = result->arena;
  struct card *card = result_card (result, unit->spelling,
                                   arena_format (arena, "unit, %s", sort_text (unit)), 3, blank);
  card_add_figure (result, card, arena_format (arena, "1 %s", unit->spelling),
                   unit->sort == UNIT_POINT ? unit_to_si (unit, 1) : unit->factor,
                   si_text (arena, unit->dimension), NULL);
  if (unit->family != FAMILY_NONE) {
    const struct family_setting *f = &session->settings.family[unit->family];
    card_add_line (result, card,
                   arena_format (arena, "counted at %s%s, ideal-gas volume unless 'real'", f->text,
                                 f->set ? " (as set)" : ""));
    card_add_figure (result, card, "molar volume", ideal_volume (1, f->at) * 1000, "L/mol",
                     "ideal gas");
  }
  if (unit->actual) {
    card_add_line (result, card, "an actual volume: it needs the state it is at");
  }
  table_rows (session, unit, result, card);
  return true;
}

static void
add_conditions (struct result *result, struct card *card, struct conditions at)
{
  add_known (result, card, "temperature", at.T - ICE_POINT, "degC", NULL);
  add_known (result, card, "pressure", at.p / 1000, "kPa(a)", NULL);
  add_known (result, card, "relative humidity", at.humidity * 100, "%RH", NULL);
  card_add_figure (result, card, "molar volume", ideal_volume (1, at) * 1000, "L/mol", "ideal gas");
}

void
card_of_reference (struct session *session, const struct reference *r, struct result *result)
{
  (void) session;
  struct arena *arena = result->arena;
  struct card *card = result_card (result, r->name,
                                   r->users ? "reference conditions, your own table"
                                            : "reference conditions", 3, blank);
  add_conditions (result, card, r->at);
  card_add_line (result, card, r->title);
  card_add_line (result, card, arena_format (arena, "as written: %s, %s%s%s", r->temperature,
                                             r->pressure, r->moisture && *r->moisture ? ", " : "",
                                             r->moisture ? r->moisture : ""));
  if (r->used_by && *r->used_by) {
    card_add_line (result, card, arena_format (arena, "used by: %s", r->used_by));
  }
  if (r->note && *r->note) {
    card_add_line (result, card, r->note);
  }
  card_add_line (result, card, arena_format (arena, "source: %s", r->source));
}

void
card_of_state (struct session *session, const struct definition *d, struct result *result)
{
  (void) session;
  const struct state *s = &d->state;
  struct conditions at = { s->T, s->p, s->moisture == MOISTURE_HUMIDITY ? s->moist : UNSTATED };
  struct card *card = result_card (result, d->name, "reference conditions, yours", 3, blank);
  add_conditions (result, card, at);
  card_add_line (result, card, d->source);
}

/* The statement is that of the definition: its places are places in its source.  */
void
card_of_sheet (const struct definition *d, struct result *result)
{
  struct arena *arena = result->arena;
  size_t n = 0;
  for (const struct statement *s = d->statement->next; s; s = s->next) {
    n += s->kind == STATEMENT_FIGURE;
  }
  struct card *card = result_card (result, d->name,
                                   arena_format (arena, "sheet of %s, %zu figure%s",
                                                 node_text (arena, d->statement,
                                                            d->statement->value),
                                                 n, n == 1 ? "" : "s"), 1, blank);
  for (const struct statement *s = d->statement->next; s; s = s->next)
    if (s->kind == STATEMENT_FIGURE) {
      struct cell *cells = card_add_row (result, card, s->name ? s->name : "");
      cells[0].text = node_text (arena, s, s->claim);
    }
}

void
card_of_property (struct session *session, enum property property, struct result *result)
{
  static const struct { const char *text, *unit, *help; } properties[] = {
#define PROPERTY(name, text, unit, help) { text, unit, help },
#include "language/properties.def"
#undef PROPERTY
  };
  (void) session;
  struct arena *arena = result->arena;
  struct card *card = result_card (result, properties[property].text, "property", 0, blank);
  card_add_line (result, card, properties[property].help);
  if (*properties[property].unit) {
    card_add_line (result, card, arena_format (arena, "answered in %s unless another unit is asked",
                                               properties[property].unit));
  }
  card_add_line (result, card, arena_format (arena, "%s of NAME at T, P in UNIT",
                                             properties[property].text));
}
