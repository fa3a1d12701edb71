#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/species.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/altitude.h"

static const char *const names[] = {
#define SETTING(name, text, takes) text,
#include "language/settings.def"
#undef SETTING
};

const char *
setting_name (enum setting setting)
{
  return names[setting];
}

/* What a change of a setting may move.  */
static unsigned
touch_of (enum setting setting)
{
  switch (setting) {
  case SETTING_GAS_MODEL: return TOUCH_MODEL;
  case SETTING_SITE_PRESSURE:
  case SETTING_SITE_ALTITUDE: return TOUCH_SITE;
  case SETTING_REFERENCE_VOLUMES: return TOUCH_VOLUMES;
  case SETTING_OXYGEN_IN_AIR: return TOUCH_OXYGEN;
  case SETTING_WATER_IN_AIR: return TOUCH_OXYGEN;
  case SETTING_TOTAL_TOLERANCE: return TOUCH_TOLERANCE;
  case SETTING_BELOW_DETECTION: return TOUCH_BELOW;
  case SETTING_COMBUSTION:
  case SETTING_CALORIFIC_VALUES: return TOUCH_COMBUSTION;
  case SETTING_LOWER_FLAMMABLE_LIMIT: return TOUCH_LIMITS;
  case SETTING_PARTS:
  case SETTING_CONSTANTS:
  case SETTING_COVERAGE:
  case SETTING_SMALLEST_EFFECT:
  case SETTING_DIGITS:
  case SETTING_COUNT: break;
  }
  return 0;
}

/* ISO 6976:1995 has no figures at 60 degF.  */
static bool
editions_fit (const struct statement *s, const struct settings *new, struct fault *fault)
{
  static const double SAME = 0.01, AT_60_DEGF = 519.67 / 1.8;
  bool clash = new->calorific_1995 && fabs (new->combustion - AT_60_DEGF) <= SAME;
  if (!clash) {
    return true;
  }
  bool edition = s->setting == SETTING_CALORIFIC_VALUES;
  return fault_set_at (fault, MESSAGE_SETTING_VALUE, s->setting_at, names[s->setting],
                       edition ? "ISO 6976:1995 has 0, 15, 20 and 25 degC, and combustion is set "
                                 "at 60 degF: set combustion at 15 degC first"
                               : "ISO 6976:1995, which is set, has 0, 15, 20 and 25 degC");
}

/* The statement read again into memory that lasts, so that its trees and texts last.  */
static const struct statement *
keep_statement (struct session *session, const struct statement *s, struct fault *fault)
{
  char *source = arena_string (session->arena, s->source);
  struct parser *parser = parser_create (session->arena, &session->vocabulary, source,
                                         strlen (source), 1, BLOCK_NONE);
  struct statement *kept;
  return parser_next (parser, &kept, fault) ? kept : NULL;
}

static bool
set_words (const struct statement *s, struct settings *new, struct fault *fault)
{
  const char *word = s->setting_words;
  bool *is_set = &new->is_set[s->setting];
  switch (s->setting) {
  case SETTING_GAS_MODEL:
    for (int m = 0; m < GAS_MODEL_COUNT; m++)
      if (strcmp (word, gas_model_name ((enum gas_model) m)) == 0) {
        new->model = (enum gas_model) m;
      }
    *is_set = new->model != GAS_MODEL_AUTO;
    return true;
  case SETTING_REFERENCE_VOLUMES:
    new->real_volumes = strcmp (word, "real") == 0;
    *is_set = new->real_volumes;
    return true;
  case SETTING_BELOW_DETECTION:
    new->below = strcmp (word, "zero") == 0 ? BELOW_ZERO
                 : strcmp (word, "half") == 0 ? BELOW_HALF : BELOW_LIMIT;
    *is_set = true;
    return true;
  case SETTING_CALORIFIC_VALUES:
    new->calorific_1995 = strcmp (word, "ISO 6976:1995") == 0;
    *is_set = new->calorific_1995;
    return true;
  case SETTING_PARTS:
    new->parts_independent = strcmp (word, "independent") == 0;
    *is_set = new->parts_independent;
    return true;
  case SETTING_CONSTANTS:
    new->constants_uncertain = strcmp (word, "uncertain") == 0;
    *is_set = new->constants_uncertain;
    return true;
  case SETTING_SITE_PRESSURE:
  case SETTING_SITE_ALTITUDE:
  case SETTING_OXYGEN_IN_AIR:
  case SETTING_WATER_IN_AIR:
  case SETTING_TOTAL_TOLERANCE:
  case SETTING_COMBUSTION:
  case SETTING_LOWER_FLAMMABLE_LIMIT:
  case SETTING_COVERAGE:
  case SETTING_SMALLEST_EFFECT:
  case SETTING_DIGITS:
  case SETTING_COUNT:
    break;
  }
  return fault_set_at (fault, MESSAGE_SETTING_VALUE, s->at, names[s->setting], NULL);
}

static bool
out_of_range (const struct statement *s, struct fault *fault, const char *why)
{
  return fault_set_at (fault, MESSAGE_SETTING_VALUE, s->value->at, names[s->setting], why);
}

/* No weather and no mine goes so far; a figure above is some other pressure.  */
static const double BAROMETER_MOST = 2e5;

static bool
set_barometer (const struct statement *s, double si, struct settings *new, struct fault *fault)
{
  bool altitude = s->setting == SETTING_SITE_ALTITUDE;
  double pressure = si;
  if (altitude && !altitude_pressure (si, &pressure, fault)) {
    fault_place (fault, s->value->at);
    return false;
  }
  if (!(pressure > 0 && pressure <= BAROMETER_MOST)) {
    return out_of_range (s, fault, "a barometer lies between 0 and 2 bar");
  }
  new->site_pressure = pressure;
  new->site_pressure_spread = !altitude && s->value->spread ? s->value : NULL;
  new->site_altitude = altitude ? si : UNSTATED;
  new->site_altitude_text = altitude ? strstr (s->source, s->value->figure) : NULL;
  new->is_set[SETTING_SITE_PRESSURE] = !altitude;
  new->is_set[SETTING_SITE_ALTITUDE] = altitude;
  return true;
}

/* The temperatures at which ISO 6976 states calorific values.  */
static bool
is_combustion_temperature (double T)
{
  static const double tables[] = { 273.15, 288.15, 519.67 / 1.8, 293.15, 298.15 };
  for (size_t i = 0; i < sizeof tables / sizeof tables[0]; i++)
    if (fabs (T - tables[i]) <= 0.01) {
      return true;
    }
  return false;
}

static bool
set_figure (struct session *session, const struct statement *s, struct settings *new,
            struct fault *fault)
{
  struct evaluation ev;
  struct value v;
  evaluation_init (&ev, session, NULL, fault);
  if (!evaluate_quantity (&ev, s->value, &v)) {
    return false;
  }
  new->is_set[s->setting] = true;
  switch (s->setting) {
  case SETTING_SITE_PRESSURE:
  case SETTING_SITE_ALTITUDE:
    return set_barometer (s, v.si, new, fault);
  case SETTING_OXYGEN_IN_AIR:
    new->oxygen_in_air = v.si;
    return (v.si > 0 && v.si < 1)
           || out_of_range (s, fault, "oxygen in air lies between 0 and 100 mol%");
  case SETTING_WATER_IN_AIR:
    new->water_in_air = v.si;
    return (v.si >= 0 && v.si <= 0.2)
           || out_of_range (s, fault, "water in air lies between 0 and 20 mol%");
  case SETTING_TOTAL_TOLERANCE:
    new->total_tolerance = v.si;
    return (v.si >= 0 && v.si <= 0.1)
           || out_of_range (s, fault, "a tolerance lies between 0 and 10 %");
  case SETTING_COVERAGE:
    new->coverage = v.si;
    new->is_set[s->setting] = v.si > 1;
    return true;
  case SETTING_SMALLEST_EFFECT:
    new->smallest_effect = v.si;
    new->is_set[s->setting] = v.si > 0;
    return (v.si >= 0 && v.si <= 0.1)
           || out_of_range (s, fault, "the smallest effect lies between 0 and 10 %");
  case SETTING_DIGITS:
    new->digits = (int) v.si;
    return true;
  case SETTING_COMBUSTION:
    new->combustion = v.si;
    return is_combustion_temperature (v.si)
           || out_of_range (s, fault, "ISO 6976 knows 0, 15, 20, 25 degC and 60 degF");
  case SETTING_GAS_MODEL:
  case SETTING_REFERENCE_VOLUMES:
  case SETTING_BELOW_DETECTION:
  case SETTING_CALORIFIC_VALUES:
  case SETTING_LOWER_FLAMMABLE_LIMIT:
  case SETTING_PARTS:
  case SETTING_CONSTANTS:
  case SETTING_COUNT:
    break;
  }
  return out_of_range (s, fault, "this setting takes a word");
}

/* `set scf at 60 degF, 14.73 psia`.  */
static bool
set_family (struct session *session, const struct statement *s, struct settings *new,
            struct result *result, struct fault *fault)
{
  struct evaluation ev;
  struct state state;
  struct place behind = s->value->at;
  behind.first = behind.last = behind.last + 1;
  evaluation_init (&ev, session, NULL, fault);
  if (!evaluate_state (&ev, s->value, &state)) {
    return false;
  }
  if (isnan (state.T) || isnan (state.p)) {
    return fault_set_at (fault, MESSAGE_STATE_MISSING, behind, s->setting_unit->spelling,
                         "reference conditions are a temperature and a pressure");
  }
  if (state.moisture != MOISTURE_NONE && state.moisture != MOISTURE_DRY) {
    result_remark (result, MESSAGE_NOTE_HUMIDITY_LEFT_OUT, s->setting_unit->spelling, NULL);
  }
  bool customary = s->setting_unit->family == FAMILY_SCF;
  new->family[s->setting_unit->family] = (struct family_setting) {
    .at = { state.T, state.p, UNSTATED }, .set = true, .source = s->source,
    .text = arena_format (session->arena, "%s, %s",
                          temperature_text (session->arena, state.T, customary),
                          customary ? pressure_text (session->arena, state.p, true)
                                    : arena_format (session->arena, "%s kPa",
                                                    figure_text (session->arena, state.p / 1000)))
  };
  return true;
}

/* The list without what was stated of the same component, and the new limit at its end.  */
static const struct stated_limit *
with_limit (struct arena *arena, const struct stated_limit *old, const struct stated_limit *new)
{
  const struct stated_limit *first = NULL, **last = &first;
  for (; old; old = old->next)
    if (old->species != new->species) {
      struct stated_limit *kept = ARENA_NEW (arena, struct stated_limit);
      *kept = *old;
      *last = kept;
      last = &kept->next;
    }
  struct stated_limit *added = ARENA_NEW (arena, struct stated_limit);
  *added = *new;
  added->next = NULL;
  *last = added;
  return first;
}

/* `set lower flammable limit of CH4 5.0 vol%`.  */
static bool
set_limit (struct session *session, const struct statement *s, struct settings *new,
           struct fault *fault)
{
  struct evaluation ev;
  struct species_set set;
  evaluation_init (&ev, session, NULL, fault);
  if (!species_named (&ev, s->names, &set)) {
    return false;
  }
  double limit = unit_to_si (s->value->unit, s->value->number);
  if (set.count != 1) {
    return fault_set_at (fault, MESSAGE_KIND_WRONG, s->names->at, "one component is needed here",
                         NULL);
  }
  if (!(limit > 0 && limit < 1)) {
    return out_of_range (s, fault, "a limit lies between 0 and 100 vol%");
  }
  new->is_set[s->setting] = true;
  new->limits = with_limit (session->arena, new->limits,
                            &(struct stated_limit) { set.at[0], s->value, s->source, NULL });
  return true;
}

/* What S sets, into NEW.  */
static bool
set_one (struct session *session, const struct statement *s, struct settings *new,
         struct result *result, struct fault *fault)
{
  return s->setting_unit ? set_family (session, s, new, result, fault)
         : s->names ? set_limit (session, s, new, fault)
         : s->setting_words ? set_words (s, new, fault) : set_figure (session, s, new, fault);
}

static void
say_what_moves (struct session *session, unsigned bits, struct result *result)
{
  const char *moved = names_touching (session, result->arena, bits);
  if (moved) {
    result_remark (result, MESSAGE_NOTE_MOVED, moved, NULL);
  }
}

bool
command_set (struct session *session, const struct statement *typed, struct result *result,
             struct fault *fault)
{
  bool shows = !typed->setting_words && !typed->value;
  if (shows) {
    card_of_settings (session, typed->has_setting ? &typed->setting : NULL, result);
    return true;
  }
  struct settings before = session->settings, new = before;
  /* Faults point into the line as typed; what is kept is read again.  */
  bool done = set_one (session, typed, &new, result, fault);
  done = done && editions_fit (typed, &new, fault);
  const struct statement *s = done ? keep_statement (session, typed, fault) : NULL;
  if (!s) {
    return false;
  }
  new = before;
  done = set_one (session, s, &new, result, fault);
  if (!done) {
    return false;
  }
  unsigned bits = s->setting_unit ? touch_family (s->setting_unit->family) : touch_of (s->setting);
  if (s->has_setting) {
    bool altitude = s->setting == SETTING_SITE_ALTITUDE;
    new.source[s->setting] = new.is_set[s->setting] ? s->source : NULL;
    if (altitude || s->setting == SETTING_SITE_PRESSURE) {
      new.source[altitude ? SETTING_SITE_PRESSURE : SETTING_SITE_ALTITUDE] = NULL;
    }
  }
  session->settings = new;
  names_changed (session, NULL);
  names_refresh (session);
  undo_note (session, NULL, NULL, NULL, 0, &before);
  say_what_moves (session, bits, result);
  return true;
}
