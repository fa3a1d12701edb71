#include "config.h"
#include "language/parse/parse_private.h"

static const char SETTINGS[] =
  "settings: below detection, calorific values, combustion, constants, coverage, digits, gas model,"
  " lower flammable limit, oxygen in air, parts, reference volumes, site altitude, site pressure,"
  " smallest effect, total tolerance; or a reference unit: set scf at T, P";

/* What a setting of words may be set to; null last.  */
static const char *const gas_models[] = { "auto", "ideal", "Peng-Robinson", "GERG-2008",
                                          "AGA8-DETAIL", NULL };
static const char *const volumes[] = { "ideal", "real", NULL };
static const char *const limits[] = { "zero", "half", "limit", NULL };
static const char *const parts[] = { "closed", "independent", NULL };
static const char *const constants[] = { "exact", "uncertain", NULL };
static const char *const standards[] = { "ISO 6976:2016", "ISO 6976:1995", NULL };

static bool
fail_value (struct parser *p, enum setting setting, struct place at)
{
  static const struct { const char *text, *takes; } settings[] = {
#define SETTING(name, text, takes) { text, takes },
#include "language/settings.def"
#undef SETTING
  };
  return fail (p, MESSAGE_SETTING_VALUE, at, settings[setting].text,
               arena_format (p->arena, "it takes %s", settings[setting].takes));
}

/* One of WORDS.  A word may be several tokens: ISO 6976:2016.  */
static bool
parse_words (struct parser *p, struct statement *statement, const char *const *words)
{
  struct place at = p->token.at;
  size_t start = p->token.start;
  if (p->token.kind != TOKEN_WORD)
    return fail_unexpected (p, "set NAME VALUE, without '='");
  for (; *words != NULL; words++) {
    size_t n = strlen (*words);
    if (start + n > p->scan.n || memcmp (p->scan.text + start, *words, n) != 0)
      continue;
    struct look look = look_here (p);
    while (look.token.end < start + n && look.token.kind != TOKEN_END)
      look_next (&look);
    if (look.token.end != start + n)
      continue;
    while (p->end < start + n)
      token_take (p);
    statement->setting_words = *words;
    at.last = p->last.last;
    statement->setting_at = at;
    return expect_end (p, NULL);
  }
  return fail_value (p, statement->setting, at);
}

/* Is the figure of the kind the setting takes?  */
static bool
figure_fits (enum setting setting, const struct node *figure)
{
  enum { FEWEST_DIGITS = 3, MOST_DIGITS = 15, MOST_COVERAGE = 10 };
  const struct unit *unit = figure->unit;
  if (setting == SETTING_COVERAGE)
    return unit == NULL && figure->spread == NULL && figure->number >= 1
           && figure->number <= MOST_COVERAGE;
  if (setting == SETTING_DIGITS) {
    double n = figure->number;
    return unit == NULL && figure->spread == NULL && n >= FEWEST_DIGITS && n <= MOST_DIGITS
           && n - (double) (int) n <= 0;
  }
  if (unit == NULL)
    return false;
  if (setting == SETTING_SITE_PRESSURE)
    return unit_is_pressure (unit) && (unit->sort == UNIT_SCALE || unit->sort == UNIT_ABSOLUTE);
  if (setting == SETTING_SITE_ALTITUDE)
    return dimension_equal (unit->dimension, DIMENSION_LENGTH);
  if (setting == SETTING_OXYGEN_IN_AIR || setting == SETTING_WATER_IN_AIR
      || setting == SETTING_LOWER_FLAMMABLE_LIMIT)
    return unit->ratio == RATIO_MOLE || unit->ratio == RATIO_VOLUME;
  if (setting == SETTING_TOTAL_TOLERANCE || setting == SETTING_SMALLEST_EFFECT)
    return unit->ratio == RATIO_PLAIN || unit->ratio == RATIO_MOLE;
  return unit_is_temperature (unit);      /* of combustion */
}

/* [ "-" ] quantity  */
static bool
parse_figure (struct parser *p, struct statement *statement)
{
  struct place at = p->token.at;
  if (p->token.kind == TOKEN_WORD || p->token.kind == TOKEN_TEXT)
    return fail_value (p, statement->setting, at);
  if (!at_number (p))
    return fail_unexpected (p, "set NAME VALUE, without '='");
  struct node *figure = parse_quantity (p, IN_STATE);
  if (figure == NULL)
    return false;
  if (figure->unit == NULL && statement->setting != SETTING_DIGITS
      && statement->setting != SETTING_COVERAGE)
    return fail (p, MESSAGE_UNIT_EXPECTED, at, "write the unit with the figure", NULL);
  if (!figure_fits (statement->setting, figure))
    return fail_value (p, statement->setting, at);
  statement->value = figure;
  statement->setting_at = figure->at;
  return expect_end (p, NULL);
}

/* "of" NAME figure  */
static bool
parse_limit (struct parser *p, struct statement *statement)
{
  static const char FORM[] = "set lower flammable limit of CH4 5.0 vol%";
  if (!expect_word (p, "of", FORM))
    return false;
  struct node *name = parse_name (p, FORM);
  statement->names = name;
  return name != NULL && parse_figure (p, statement);
}

/* SETTING [ VALUE ]  */
static bool
parse_setting (struct parser *p, struct statement *statement)
{
  if (at_end (p))
    return true;                  /* asks for its value */
  switch (statement->setting) {
  case SETTING_GAS_MODEL: return parse_words (p, statement, gas_models);
  case SETTING_REFERENCE_VOLUMES: return parse_words (p, statement, volumes);
  case SETTING_BELOW_DETECTION: return parse_words (p, statement, limits);
  case SETTING_CALORIFIC_VALUES: return parse_words (p, statement, standards);
  case SETTING_LOWER_FLAMMABLE_LIMIT: return parse_limit (p, statement);
  case SETTING_PARTS: return parse_words (p, statement, parts);
  case SETTING_CONSTANTS: return parse_words (p, statement, constants);
  case SETTING_COMBUSTION:
    return expect_word (p, "at", "set combustion at 25 degC") && parse_figure (p, statement);
  case SETTING_SITE_PRESSURE: case SETTING_SITE_ALTITUDE: case SETTING_OXYGEN_IN_AIR:
  case SETTING_WATER_IN_AIR:
  case SETTING_TOTAL_TOLERANCE: case SETTING_COVERAGE: case SETTING_SMALLEST_EFFECT:
  case SETTING_DIGITS: case SETTING_COUNT:
  default:
    return parse_figure (p, statement);
  }
}

/* What is set is neither a setting nor a unit with reference conditions.  */
static bool
fail_unknown (struct parser *p)
{
  size_t start = p->token.start, end = p->token.end;
  struct look look = look_here (p);
  for (look_next (&look); look.token.kind == TOKEN_WORD && !token_is (p, &look.token, "at");
       look_next (&look))
    end = look.token.end;
  return fail_here (p, MESSAGE_SETTING_UNKNOWN, bytes_text (p, start, end), SETTINGS);
}

bool
parse_set (struct parser *p, struct statement *statement)
{
  /* "set" [ SETTING { WORD } | UNIT "at" state ]  */
  struct unit_read read;
  struct scanner behind;
  if (at_end (p))
    return true;
  statement->setting_at = p->token.at;
  size_t words = setting_here (p, &statement->setting);
  if (words > 0) {
    statement->has_setting = true;
    take_words (p, words);
    statement->setting_at.last = p->last.last;
    return parse_setting (p, statement);
  }
  if (!unit_at (p, &p->token, &read, &behind) || read.unit->family == FAMILY_NONE
      || read.unit->family_power != 1)
    return fail_unknown (p);
  if (!parse_unit (p, &read))
    return false;
  statement->setting_unit = read.unit;
  struct place at = p->token.at;
  const char *way_on = arena_format (p->arena, "set %s at T, P", read.text);
  if (!expect_word (p, "at", way_on))
    return false;
  struct node *state = parse_state (p, NULL, at);
  if (state == NULL || !expect_end (p, way_on))
    return false;
  statement->value = state;
  statement->setting_at = state->at;
  return true;
}
