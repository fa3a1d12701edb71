#include "config.h"
#include "shell/wanted.h"

#include <stddef.h>
#include <string.h>

#include "shell/phrase.h"
#include "support/number.h"
#include "units/unit.h"

static bool
is_flow (struct dimension dimension)
{
  return dimension_equal (dimension, DIMENSION_MASS_FLOW)
         || dimension_equal (dimension, DIMENSION_MOLAR_FLOW)
         || dimension_equal (dimension, DIMENSION_VOLUME_FLOW)
         || dimension_equal (dimension, DIMENSION_POWER);
}

static bool
is_amount (struct dimension dimension)
{
  return dimension_equal (dimension, DIMENSION_MASS)
         || dimension_equal (dimension, DIMENSION_AMOUNT)
         || dimension_equal (dimension, DIMENSION_VOLUME)
         || dimension_equal (dimension, DIMENSION_ENERGY);
}

static bool
is_of_state (const struct unit *unit)
{
  return unit->sort == UNIT_POINT || unit->sort == UNIT_HUMIDITY || unit->sort == UNIT_OXYGEN
         || dimension_equal (unit->dimension, DIMENSION_PRESSURE);
}

/* Do the words of the phrase begin with those of TEXT and `of`?  */
static bool
begins_with_property (const struct phrase *phrase, const char *text)
{
  size_t i = 0;

  for (; *text != '\0' && i < phrase->count; i++) {
    const size_t n = strcspn (text, " ");

    if (phrase->words[i].n != n || memcmp (phrase->words[i].text, text, n) != 0)
      return false;
    text += n + (text[n] == ' ');
  }
  return *text == '\0' && i < phrase->count && phrase_word_is (&phrase->words[i], "of");
}

/* The unit of the property the phrase asks for; "": it has none; null: it asks for no property.  */
static const char *
property_unit (const struct phrase *phrase)
{
  static const struct { const char *text, *unit; } rows[] = {
#define PROPERTY(name, text, unit, help) { text, unit },
#include "language/properties.def"
#undef PROPERTY
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    if (begins_with_property (phrase, rows[i].text))
      return rows[i].unit;
  }
  return NULL;
}

/* What a question that opens with a figure can be answered in.  */
static struct wanted
wanted_of_figure (const struct phrase *phrase, const struct unit *unit)
{
  const bool of_gas = phrase->count > 2 && phrase_word_is (&phrase->words[2], "of");

  if (!of_gas)
    return (struct wanted) { WANTED_SAME, unit };
  if (is_flow (unit->dimension))
    return (struct wanted) { WANTED_FLOW, NULL };
  if (is_amount (unit->dimension))
    return (struct wanted) { WANTED_AMOUNT, NULL };
  return (struct wanted) { WANTED_ANY, NULL };
}

static struct wanted
wanted_target (const struct phrase *phrase, struct unit_table *units)
{
  const struct phrase_word *words = phrase->words;
  const char *text = property_unit (phrase);
  const struct unit *unit = NULL;
  double value;
  bool too_large;

  if (text != NULL) {
    unit = *text != '\0' ? unit_find (units, text, strlen (text), NULL) : NULL;
    return (struct wanted) { unit != NULL ? WANTED_SAME : WANTED_ANY, unit };
  }
  if (phrase->count > 2 && number_read (words[0].text, words[0].n, &value, &too_large))
    unit = unit_find (units, words[1].text, words[1].n, NULL);
  return unit != NULL ? wanted_of_figure (phrase, unit) : (struct wanted) { WANTED_ANY, NULL };
}

struct wanted
wanted_at (const struct phrase *phrase, struct unit_table *units)
{
  const struct phrase_word *clause = phrase_clause (phrase);

  if (phrase->place == PLACE_TARGET)
    return wanted_target (phrase, units);
  if (clause != NULL && phrase_word_is (clause, "at"))
    return (struct wanted) { WANTED_STATE, NULL };
  return (struct wanted) { WANTED_ANY, NULL };
}

bool
wanted_fits (const struct wanted *wanted, const struct unit *unit)
{
  switch (wanted->kind) {
    case WANTED_ANY:
      return true;
    case WANTED_STATE:
      return is_of_state (unit);
    case WANTED_SAME:
      return dimension_equal (wanted->unit->dimension, unit->dimension)
             && (wanted->unit->ratio == RATIO_NONE) == (unit->ratio == RATIO_NONE)
             && (wanted->unit->sort == UNIT_DIFFERENCE) == (unit->sort == UNIT_DIFFERENCE);
    case WANTED_FLOW:
      return is_flow (unit->dimension);
    case WANTED_AMOUNT:
      return is_amount (unit->dimension) && unit->ratio == RATIO_NONE;
  }
  return true;
}
