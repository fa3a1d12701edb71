#include "config.h"
#include "language/commands/commands.h"

#include <ctype.h>
#include <string.h>
#include "gas/species.h"
#include "language/kept.h"
#include "result/result.h"
#include "result/workings_record.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/table.h"
#include "units/workings.h"

/* ---- Sources ---- */

/* Texts, each once, joined.  */
static const char *
joined (struct arena *arena, const char *all, const char *one)
{
  return !*one || strstr (all, one) ? all
         : *all ? arena_format (arena, "%s; %s", all, one) : one;
}

/* Where the factor of a unit is from: the rows of the words in it.  */
static const char *
unit_source (struct session *s, struct arena *arena, const struct unit *unit)
{
  struct unit_row row;
  const char *sources = "", *at = unit->spelling;
  if (unit_row_find (s->vocabulary.units, at, &row)) {
    return row.source;
  }
  while (*at) {
    size_t n = strcspn (at, "/*^() ");
    const char *word = arena_copy (arena, at, n);
    for (size_t k = n; k > 0 && !unit_row_find (s->vocabulary.units, word, &row); ) {
      word = arena_copy (arena, at, --k);                /* a trailing digit, a letter for gauge */
    }
    if (*word && unit_row_find (s->vocabulary.units, word, &row)) {
      sources = joined (arena, sources, row.source);
    }
    at += n;
    at += strspn (at, "/*^()0123456789- ");
  }
  return *sources ? sources : STEP_DEFINITION;
}

/* Where the atomic weights of the elements in FORMULA are from.  */
static const char *
weights_source (struct arena *arena, const struct table *elements, const char *formula,
                const char *sources)
{
  const int column = table_column (elements, "source");
  while (*formula) {
    size_t n = 1;
    while (islower ((unsigned char) formula[n])) {
      n++;
    }
    const char *source = "";
    for (size_t i = 0; i < table_rows (elements); i++) {
      const char *symbol = table_cell (elements, i, 0);
      if (strlen (symbol) == n && memcmp (symbol, formula, n) == 0) {
        source = table_cell (elements, i, column);
      }
    }
    sources = joined (arena, sources, source);
    formula += n;
    while (*formula && !(*formula >= 'A' && *formula <= 'Z')) {
      formula++;
    }
  }
  return sources;
}

static const char *
masses_source (struct session *s, struct arena *arena, const struct step *step)
{
  struct fault unheard;
  const char *sources = "";
  fault_init (&unheard, arena);
  const struct table *elements = table_read (arena, "elements", s->options.tables, &unheard);
  for (size_t i = 0; elements && i < step->term_count; i++) {
    const struct species *species = NULL;
    const char *key = step->terms[i], *candidates;
    enum species_match match = species_find (s->vocabulary.species, key, strlen (key), &species,
                                             &candidates);
    bool known = match == SPECIES_KEY || match == SPECIES_PLAIN_FORMULA;
    sources = known && species->formula && *species->formula
                ? weights_source (arena, elements, species->formula, sources)
                : joined (arena, sources, STEP_TYPED);
  }
  return *sources ? sources : STEP_TYPED;
}

/* What the sources of each term's figure have in common, each once.  */
static const char *
terms_source (struct arena *arena, const struct step *step, const struct step_column *column)
{
  const char *sources = "";
  for (size_t i = 0; i < step->term_count; i++) {
    const char *one = column->sources[i];
    sources = one ? joined (arena, sources, one) : sources;
  }
  return *sources ? sources : NULL;
}

/* ---- Steps ---- */

/* Does FORMULA hold the symbol NAME?  */
static bool
uses (const char *formula, const char *name)
{
  const size_t n = strlen (name);
  for (const char *at = strstr (formula, name); at; at = strstr (at + 1, name)) {
    bool begins = at == formula || !(isalnum ((unsigned char) at[-1]) || at[-1] == '_');
    if (begins && !(isalnum ((unsigned char) at[n]) || at[n] == '_')) {
      return true;
    }
  }
  return false;
}

/* The symbols of the formula, with their units; what was recorded beside them is left out.  */
static void
complete_symbols (struct session *s, struct arena *arena, struct step *step)
{
  struct step_symbol *symbols = ARENA_ARRAY (arena, step->symbol_count, struct step_symbol);
  unsigned char count = 0;
  for (size_t i = 0; i < step->symbol_count; i++) {
    struct step_symbol *symbol = &symbols[count];
    *symbol = step->symbols[i];
    if (!step->solved && !uses (step->formula, symbol->name)) {
      continue;
    }
    count++;
    if (!symbol->in || symbol->unit) {
      continue;
    }
    const char *si = dimension_text (arena, symbol->in->dimension);
    if (strcmp (symbol->name, "f") == 0) {
      symbol->unit = arena_format (arena, "%s per %s", si, symbol->in->spelling);
      symbol->source = unit_source (s, arena, symbol->in);
    } else {
      symbol->unit = si;
    }
  }
  step->symbols = symbols;
  step->symbol_count = count;
}

static void
complete_columns (struct session *s, struct arena *arena, struct step *step)
{
  struct step_column *columns = ARENA_ARRAY (arena, step->column_count, struct step_column);
  for (size_t i = 0; i < step->column_count; i++) {
    struct step_column *column = &columns[i];
    *column = step->columns[i];
    if (column->sources) {
      column->source = terms_source (arena, step, column);
    } else if (column->source == STEP_WEIGHTS) {
      column->source = masses_source (s, arena, step);
    }
  }
  step->columns = columns;
}

/* A step with the units and sources it was recorded without.  */
static struct step *
complete (struct session *s, struct arena *arena, const struct step *from)
{
  struct step *step = ARENA_NEW (arena, struct step);
  *step = *from;
  step->next = NULL;
  if (!step->unit) {
    step->unit = step->in ? dimension_text (arena, step->in->dimension) : "1";
  }
  complete_symbols (s, arena, step);
  complete_columns (s, arena, step);
  return step;
}

/* ---- What the short names of sources stand for ---- */

struct names { struct arena *arena; const struct table *table; bool *told;
               const struct workings_source *first, **last; };

/* Does TEXT begin with NAME as words of its own?  */
static bool
begins_with (const char *text, const char *name)
{
  size_t n = strlen (name);
  return strncmp (text, name, n) == 0 && !isalnum ((unsigned char) text[n]);
}

/* Does TEXT hold NAME as words of its own that are not the beginning of a longer name?  */
static bool
mentions_source (const struct table *table, const char *text, const char *name)
{
  for (const char *at = strstr (text, name); at; at = strstr (at + 1, name)) {
    bool holds = (at == text || !isalnum ((unsigned char) at[-1])) && begins_with (at, name);
    for (size_t i = 0; holds && i < table_rows (table); i++) {
      const char *other = table_cell (table, i, 0);
      holds = strlen (other) <= strlen (name) || !begins_with (at, other);
    }
    if (holds) {
      return true;
    }
  }
  return false;
}

static void
name_source (struct names *names, const char *text)
{
  for (size_t i = 0; text && i < table_rows (names->table); i++) {
    const char *name = table_cell (names->table, i, 0);
    if (!names->told[i] && mentions_source (names->table, text, name)) {
      struct workings_source *source = ARENA_NEW (names->arena, struct workings_source);
      *source = (struct workings_source) { name, table_cell (names->table, i, 1), NULL };
      names->told[i] = true;
      *names->last = source;
      names->last = &source->next;
    }
  }
}

static const struct workings_source *
named_sources (struct arena *arena, const struct step *steps)
{
  struct fault unheard;
  struct names names = { .arena = arena };
  fault_init (&unheard, arena);
  names.table = table_read (arena, "sources", NULL, &unheard);
  if (!names.table) {
    return NULL;
  }
  names.told = ARENA_ARRAY (arena, table_rows (names.table), bool);
  names.last = &names.first;
  for (const struct step *s = steps; s; s = s->next) {
    name_source (&names, s->source);
    for (size_t i = 0; i < s->symbol_count; i++) {
      name_source (&names, s->symbols[i].source);
    }
    for (size_t i = 0; i < s->column_count; i++) {
      name_source (&names, s->columns[i].source);
    }
  }
  return names.first;
}

const struct workings_record *
workings_of (struct session *s, struct arena *arena, struct kept_answer *answer)
{
  struct workings_record *record = ARENA_NEW (arena, struct workings_record);
  struct step *first = NULL, **last = &first;
  kept_settle_one (s, answer);
  for (const struct step *step = answer->steps; step; step = step->next) {
    *last = complete (s, arena, step);
    last = &(*last)->next;
    record->count++;
  }
  record->steps = first;
  record->statement = answer->statement;
  record->answers = answer->answers;
  record->answer_count = answer->count;
  record->sources = named_sources (arena, first);
  return record;
}

bool
command_workings (struct session *s, const struct statement *statement, struct result *result,
                  struct fault *fault)
{
  struct kept_answer *answer = s->kept->last;
  if (!answer) {
    return fault_set_at (fault, MESSAGE_WORKINGS_NONE, statement->at, NULL, NULL);
  }
  result->workings = workings_of (s, result->arena, answer);
  for (const struct remark *r = answer->taken; r; r = r->next) {
    struct remark *copy = result_remark (result, r->kind, r->fact[0], r->fact[1]);
    copy->fact[2] = r->fact[2];
    copy->fact[3] = r->fact[3];
    copy->alternative = r->alternative;
    copy->effect = r->effect;
  }
  return true;
}
