#include "config.h"
#include "language/check/readings.h"

#include <math.h>
#include <string.h>
#include "gas/reference.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/number.h"
#include "support/message.h"
#include "support/table.h"
#include "support/text.h"
#include "units/unit.h"

/* What the words of a change are.  */
enum words { WORDS_NONE, WORDS_REFERENCES, WORDS_UNITS, WORDS_QUANTITY, WORDS_NUMBER, WORDS_TEXT };

/* The first that opens as the cell does is taken: longer ones stand first.  */
static const struct { const char *opening; enum reading_change change; enum words words; }
changes[] = {
  { "absolute gauge", READING_ABSOLUTE, WORDS_NONE },
  { "barometer", READING_BAROMETER, WORDS_QUANTITY },
  { "calorific 1995", READING_CALORIFIC_1995, WORDS_NONE },
  { "calorific 2016", READING_CALORIFIC_2016, WORDS_NONE },
  { "combustion", READING_COMBUSTION, WORDS_QUANTITY },
  { "compressibility inverse", READING_Z_INVERSE, WORDS_NONE },
  { "compressibility in", READING_Z_IN, WORDS_NONE },
  { "compressibility out", READING_Z_OUT, WORDS_NONE },
  { "counted", READING_COUNTED, WORDS_TEXT },
  { "dry", READING_DRY, WORDS_NONE },
  { "factor", READING_FACTOR, WORDS_NUMBER },
  { "gauge absolute", READING_GAUGE, WORDS_NONE },
  { "heat other", READING_HEAT, WORDS_NONE },
  { "ice", READING_ICE, WORDS_QUANTITY },
  { "moisture atmospheric", READING_MOISTURE_ATMOSPHERIC, WORDS_NONE },
  { "moisture out", READING_MOISTURE_OUT, WORDS_NONE },
  { "oxygen out", READING_OXYGEN_OUT, WORDS_NONE },
  { "oxygen wet", READING_OXYGEN_WET, WORDS_NONE },
  { "oxygen", READING_OXYGEN, WORDS_QUANTITY },
  { "reference", READING_REFERENCE, WORDS_REFERENCES },
  { "state pressure", READING_STATE_P, WORDS_NONE },
  { "state temperature", READING_STATE_T, WORDS_NONE },
  { "unit", READING_UNIT, WORDS_UNITS },
  { "volumes real", READING_VOLUMES_REAL, WORDS_NONE },
  { "wet", READING_WET, WORDS_NONE },
};

struct row {
  const struct table *table;
  size_t at;
  struct arena *arena;
  struct unit_table *units;
  const struct reference_table *references;
  struct fault *fault;
};

static bool
complain (const struct row *row, const char *what)
{
  return table_complain (row->table, row->at, what, row->fault);
}

static const char *
cell (const struct row *row, const char *column)
{
  return table_cell (row->table, row->at, table_column (row->table, column));
}

/* "101.325 kPa", in SI.  */
static bool
read_quantity (const struct row *row, struct reading_rule *rule)
{
  size_t digits = strcspn (rule->words, " ");
  const char *unit_text = rule->words + digits + (rule->words[digits] == ' ');
  double figure;
  bool too_large;
  const struct unit *unit = *unit_text ? unit_find (row->units, unit_text, strlen (unit_text),
                                                    NULL) : NULL;
  if (!unit || !number_read (rule->words, digits, &figure, &too_large)) {
    return complain (row, "a quantity is expected behind the change");
  }
  rule->value = unit_to_si (unit, figure);
  return rule->value > 0 || complain (row, "the quantity must be above zero");
}

static bool
read_units (const struct row *row, struct reading_rule *rule)
{
  const char *blank = strchr (rule->words, ' ');
  if (!blank) {
    return complain (row, "unit FROM TO is expected");
  }
  rule->from = arena_copy (row->arena, rule->words, (size_t) (blank - rule->words));
  rule->to = blank + 1;
  return (unit_find (row->units, rule->from, strlen (rule->from), NULL)
          && unit_find (row->units, rule->to, strlen (rule->to), NULL))
         || complain (row, "unit FROM TO needs two units there are");
}

static bool
read_references (const struct row *row, const struct reading_rule *rule)
{
  for (const char *at = rule->words; *at; ) {
    size_t n = strcspn (at, ", ");
    const struct reference *found;
    const char *candidates;
    if (strncmp (at, "all", n) != 0
        && reference_find (row->references, at, n, &found, &candidates) != REFERENCE_ONE) {
      return complain (row, "a reference there is, or all, is expected");
    }
    at += n;
    at += strspn (at, ", ");
  }
  return *rule->words || complain (row, "names of references, or all, are expected");
}

static bool
read_words (const struct row *row, enum words words, struct reading_rule *rule)
{
  bool too_large;
  switch (words) {
  case WORDS_QUANTITY:
    return read_quantity (row, rule);
  case WORDS_UNITS:
    return read_units (row, rule);
  case WORDS_REFERENCES:
    return read_references (row, rule);
  case WORDS_NUMBER:
    return number_read (rule->words, strlen (rule->words), &rule->value, &too_large)
           || complain (row, "a number is expected behind the change");
  case WORDS_TEXT:
    return *rule->words || complain (row, "a component is expected behind the change");
  case WORDS_NONE:
    break;
  }
  return !*rule->words || complain (row, "nothing is expected behind this change");
}

static bool
read_change (const struct row *row, struct reading_rule *rule)
{
  const char *change = cell (row, "change");
  for (size_t i = 0; i < sizeof changes / sizeof changes[0]; i++) {
    size_t n = strlen (changes[i].opening);
    if (strncmp (change, changes[i].opening, n) == 0 && (change[n] == ' ' || !change[n])) {
      rule->change = changes[i].change;
      rule->words = change + n + strspn (change + n, " ");
      return read_words (row, changes[i].words, rule);
    }
  }
  return complain (row, "no such change");
}

static bool
read_side (const struct row *row, struct reading_rule *rule)
{
  static const struct { const char *word; enum reading_side side; } sides[] = {
    { "computed", READING_COMPUTED }, { "stated", READING_STATED },
    { "either", READING_EITHER }, { "both", READING_BOTH } };
  for (size_t i = 0; i < sizeof sides / sizeof sides[0]; i++)
    if (strcmp (cell (row, "side"), sides[i].word) == 0) {
      rule->side = sides[i].side;
      return true;
    }
  return complain (row, "computed, stated, either or both is expected");
}

static bool
read_row (const struct row *row, struct reading_rule *rule)
{
  double cost;
  *rule = (struct reading_rule) { .key = table_cell (row->table, row->at, 0),
                                  .said = cell (row, "said"),
                                  .source = cell (row, "source") };
  if (!table_number (row->table, row->at, table_column (row->table, "cost"), &cost, row->fault)
      || !read_side (row, rule) || !read_change (row, rule)) {
    return false;
  }
  if (!(cost >= 1 && cost <= 3) || !*rule->said) {
    return complain (row, "a sentence and a cost from 1 to 3 are expected");
  }
  rule->cost = (int) cost;
  return true;
}

/* Where a rule goes: over the one of the same key, or behind all.  */
static struct reading_rule *
place_of (struct readings *readings, const char *key)
{
  for (size_t i = 0; i < readings->count; i++)
    if (strcmp (readings->at[i].key, key) == 0) {
      return &readings->at[i];
    }
  return &readings->at[readings->count++];
}

struct readings *
readings_create (struct unit_table *units, const struct reference_table *references,
                 const char *directory, struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct readings *readings = ARENA_NEW (arena, struct readings);
  struct table *table = table_read (arena, "readings", directory, fault);
  struct row row = { table, 0, arena, units, references, fault };
  readings->arena = arena;
  if (table) {
    readings->at = ARENA_ARRAY (arena, table_rows (table) + 1, struct reading_rule);
    for (; row.at < table_rows (table); row.at++) {
      struct reading_rule rule;
      if (!read_row (&row, &rule)) {
        break;
      }
      *place_of (readings, rule.key) = rule;
    }
  }
  if (table && row.at == table_rows (table)) {
    return readings;
  }
  arena_destroy (arena);
  return NULL;
}

void
readings_destroy (struct readings *readings)
{
  if (readings) {
    arena_destroy (readings->arena);       /* READINGS itself lies in it */
  }
}

const char *
reading_sentence (struct arena *arena, const struct reading_rule *rule, const char *about)
{
  bool reference = rule->change == READING_REFERENCE;
  const char *at = strcmp (rule->words, "all") == 0 ? "any of the reference conditions"
                                                    : "one of the usual reference conditions";
  const char *const facts[MESSAGE_FACTS] = { about, reference ? "a volume" : rule->from,
                                             reference ? at : rule->to, NULL };
  struct text text;
  text_init (&text);
  message_write (&text, rule->said, facts);
  const char *said = arena_string (arena, text.bytes);
  text_clear (&text);
  return said;
}

bool
reading_names (const struct reading_rule *rule, const char *name)
{
  size_t length = strlen (name);
  if (strcmp (rule->words, "all") == 0) {
    return true;
  }
  for (const char *at = rule->words; *at; ) {
    size_t n = strcspn (at, ", ");
    if (n == length && strncmp (at, name, n) == 0) {
      return true;
    }
    at += n;
    at += strspn (at, ", ");
  }
  return false;
}
