#include "config.h"
#include "language/session_private.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include "gas/air.h"
#include "gas/reference.h"
#include "gas/species.h"
#include "language/check/readings.h"
#include "language/commands/commands.h"
#include "language/evaluate/wording.h"
#include "language/kept.h"
#include "property/calorific.h"
#include "property/property_tables.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/map.h"
#include "support/memory.h"
#include "units/constants.h"
#include "units/unit.h"

static const struct species *
species_of_key (struct session *s, const char *key)
{
  const struct species *species = NULL;
  const char *candidates;
  (void) species_find (s->vocabulary.species, key, strlen (key), &species, &candidates);
  return species;
}

static bool
read_tables (struct session *s, const char *directory, struct fault *fault)
{
  struct stat found;
  if (directory && (stat (directory, &found) != 0 || !S_ISDIR (found.st_mode))) {
    return fault_set (fault, MESSAGE_FILE, directory, "there is no such folder");
  }
  s->vocabulary.units = unit_table_create (directory, fault);
  s->vocabulary.species = s->vocabulary.units ? species_table_create (directory, fault) : NULL;
  s->references = s->vocabulary.species
                    ? reference_table_create (s->vocabulary.units, directory, fault) : NULL;
  if (!s->references) {
    return false;
  }
  s->water = species_of_key (s, "H2O");
  s->oxygen = species_of_key (s, "O2");
  return air_composition (s->arena, s->vocabulary.species, NULL, &s->air, fault);
}

struct session *
session_create (const struct session_options *options, struct fault *fault)
{
  struct session *s = memory_get (1, sizeof *s);
  s->options = *options;
  s->arena = arena_create ();
  s->kept = memory_get (1, sizeof *s->kept);
  s->properties = property_tables_create (options->tables);
  s->names = map_create ();
  s->mentioned = map_create ();
  settings_init (&s->settings);
  if (!read_tables (s, options->tables, fault)) {
    session_destroy (s);
    return NULL;
  }
  return s;
}

void
session_destroy (struct session *s)
{
  if (!s) {
    return;
  }
  block_drop (s);
  kept_destroy (s);
  memory_release (s->last_balance);
  undo_clear (s);
  names_clear (s);
  if (s->references) {
    reference_table_destroy (s->references);
  }
  if (s->vocabulary.species) {
    species_table_destroy (s->vocabulary.species);
  }
  if (s->vocabulary.units) {
    unit_table_destroy (s->vocabulary.units);
  }
  calorific_tables_destroy (s->calorific);
  readings_destroy (s->readings);
  property_tables_destroy (s->properties);
  memory_release (s->last_subject);
  arena_destroy (s->arena);
  memory_release (s);
}

const struct settings *
session_settings (const struct session *s)
{
  return &s->settings;
}

const struct readings *
session_readings (struct session *s, struct fault *fault)
{
  if (!s->readings) {
    s->readings = readings_create (s->vocabulary.units, s->references, s->options.tables, fault);
  }
  return s->readings;
}

const struct vocabulary *
session_vocabulary (const struct session *s)
{
  return &s->vocabulary;
}

enum block
session_block (const struct session *s)
{
  return s->block.arena ? s->block.kind : BLOCK_NONE;
}

void
session_leave_block (struct session *s)
{
  block_drop (s);
}

void
session_spoil_block (struct session *s)
{
  s->block.spoilt = s->block.arena != NULL;
}

/* Statements that change nothing an answer could have come from.  */
static bool
only_looks (enum statement_kind kind)
{
  return kind == STATEMENT_ASK || kind == STATEMENT_MONTECARLO || kind == STATEMENT_WORKINGS
         || kind == STATEMENT_NOTE
         || kind == STATEMENT_HELP || kind == STATEMENT_LIST || kind == STATEMENT_SHOW
         || kind == STATEMENT_SAVE || kind == STATEMENT_EMPTY || kind == STATEMENT_QUIT;
}

/* Statements a calculation can be run again without.  */
static bool
only_prints (enum statement_kind kind)
{
  return only_looks (kind) && kind != STATEMENT_ASK && kind != STATEMENT_MONTECARLO;
}

/* The lines of a block are kept by its end, as it takes them.  */
static bool
is_block_line (const struct session *s, const struct statement *statement, bool in_block)
{
  return statement->kind != STATEMENT_END && (in_block || session_block (s) != BLOCK_NONE);
}

bool
session_run (struct session *s, const struct statement *statement, struct result *result,
             struct fault *fault)
{
  if (!fault->arena) {
    fault->arena = result->arena;
  }
  if (!only_looks (statement->kind)) {
    kept_settle (s);
  }
  const size_t before = s->kept->line_count;
  const bool in_block = session_block (s) != BLOCK_NONE;
  bool asks = statement->kind == STATEMENT_ASK || statement->kind == STATEMENT_MONTECARLO;
  bool done = asks ? ask (s, statement, result, fault)
                   : command_run (s, statement, result, fault);
  if (!done) {
    kept_unlog (s, before);
  } else if (!only_prints (statement->kind) && !is_block_line (s, statement, in_block)) {
    const bool opens = statement->kind == STATEMENT_OPEN;
    kept_log (s, opens ? statement->text : statement->source, opens);
  }
  return done;
}

int
session_digits (const struct session *s)
{
  return s->settings.digits;
}

bool
session_settings_changed (const struct session *s)
{
  return settings_changed (&s->settings);
}

const char *
session_opening (struct session *s, struct arena *arena)
{
  const struct settings *set = &s->settings;
  const char *how = set->is_set[SETTING_SITE_ALTITUDE] ? "estimated"
                    : set->is_set[SETTING_SITE_PRESSURE] ? "as set" : "standard";
  return arena_format (arena, "barometer %s bar (%s)   volumes %s",
                       figure_text (arena, set->site_pressure / 1e5), how,
                       set->real_volumes ? "real" : "ideal-gas");
}

void
session_each_name (const struct session *s, void (*visit) (const char *, void *), void *with)
{
  for (size_t i = 0; i < s->count; i++) {
    visit (s->order[i]->name, with);
  }
}
