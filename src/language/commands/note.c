/* The session as a calculation note: what was given, what came of it, and how.  It is put together
   here and written by the shell.                                                                */
#include "config.h"
#include "language/commands/commands.h"
#include "language/commands/note_chart.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/balance/plant.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "language/kept.h"
#include "result/chart.h"
#include "result/note.h"
#include "result/result.h"
#include "result/workings_record.h"
#include "support/arena.h"
#include "support/fault.h"
#include "units/unit.h"

/* ---- Rows ---- */

struct rows { struct arena *arena; struct note_row *first, **last; };

static struct rows
rows_start (struct arena *arena)
{
  return (struct rows) { arena, NULL, NULL };
}

static void
rows_add (struct rows *rows, const char *name, const char *text, const char *source)
{
  struct note_row *row = ARENA_NEW (rows->arena, struct note_row);
  *row = (struct note_row) { name, text, source, NULL };
  *(rows->last ? rows->last : &rows->first) = row;
  rows->last = &row->next;
}

/* ---- Given ---- */

/* "CH4 58.31 ± 0.50 (k=2), H2S 850 ppm, N2 rest mol% dry", of a gas from a file.  */
static const char *
read_from_file (struct arena *arena, const struct node *list)
{
  const char *text = "";
  for (const struct node *part = list->items; part; part = part->next) {
    text = arena_format (arena, "%s%s%s %s", text, *text ? ", " : "", part->text,
                         typed_amount (arena, part));
  }
  return arena_format (arena, "%s%s%s%s", text, list->unit ? " " : "",
                       list->unit ? list->unit->spelling : "",
                       list->words & WORD_DRY ? " dry" : "");
}

static const struct note_row *
given (const struct session *s, struct arena *arena)
{
  struct rows rows = rows_start (arena);
  for (size_t i = 0; i < s->count; i++) {
    const struct definition *d = s->order[i];
    rows_add (&rows, arena_string (arena, d->name), arena_string (arena, d->source), NULL);
    if (d->file) {
      rows_add (&rows, arena_format (arena, "%s, as read", d->name),
                read_from_file (arena, d->statement->from_file), NULL);
    }
  }
  return rows.first;
}

/* What the answers leaned on, as it stands now.  */
static void
add_families (const struct session *s, unsigned touched, struct rows *rows)
{
  for (enum reference_family f = FAMILY_NORMAL; f < FAMILY_COUNT; f++) {
    const struct family_setting *family = &s->settings.family[f];
    if (touched & touch_family (f)) {
      rows_add (rows, reference_family_name (f), arena_string (rows->arena, family->text),
                family_source (&s->settings, f));
    }
  }
  if (touched & TOUCH_VOLUMES) {
    rows_add (rows, "reference volumes", s->settings.real_volumes ? "real" : "ideal-gas",
              s->settings.is_set[SETTING_REFERENCE_VOLUMES] ? "as set" : "as shipped");
  }
}

static const struct note_row *
conditions (const struct session *s, struct arena *arena, unsigned touched)
{
  const struct settings *set = &s->settings;
  struct rows rows = rows_start (arena);
  add_families (s, touched, &rows);
  if (touched & TOUCH_SITE) {
    rows_add (&rows, "barometer",
              arena_format (arena, "%s bar", figure_text (arena, set->site_pressure / 1e5)),
              barometer_source (set));
  }
  if (touched & TOUCH_MODEL) {
    rows_add (&rows, "gas model", gas_model_name (set->model),
              set->is_set[SETTING_GAS_MODEL] ? "as set" : "as shipped");
  }
  if (touched & TOUCH_COMBUSTION) {
    rows_add (&rows, "combustion at", temperature_text (arena, set->combustion, false),
              set->is_set[SETTING_COMBUSTION] ? "as set" : "as shipped");
    rows_add (&rows, "calorific values",
              set->calorific_1995 ? "ISO 6976:1995" : "ISO 6976:2016",
              set->is_set[SETTING_CALORIFIC_VALUES] ? "as set" : "as shipped");
  }
  if (touched & TOUCH_OXYGEN) {
    rows_add (&rows, "oxygen in air", share_text (arena, set->oxygen_in_air),
              set->is_set[SETTING_OXYGEN_IN_AIR] ? "as set" : "as shipped");
  }
  return rows.first;
}

/* Gases that are defined and closed.  */
static const struct note_gas *
gases (const struct session *s, struct arena *arena)
{
  struct note_gas *first = NULL, **last = &first;
  for (size_t i = 0; i < s->count; i++) {
    const struct definition *d = s->order[i];
    if (d->kind != NAME_GAS || !d->fresh || !d->value.gas->closed) {
      continue;
    }
    const struct composition *gas = d->value.gas->closed;
    const char **parts = ARENA_ARRAY (arena, gas->count, const char *);
    double *fractions = ARENA_ARRAY (arena, gas->count, double);
    for (size_t k = 0; k < gas->count; k++) {
      parts[k] = gas->species[k]->key;
      fractions[k] = gas->fraction[k];
    }
    *last = ARENA_NEW (arena, struct note_gas);
    **last = (struct note_gas) { arena_string (arena, d->name), gas->count, parts, fractions,
                                 NULL };
    last = &(*last)->next;
  }
  return first;
}

static struct note_picture **
add_picture (struct arena *arena, const struct chart *chart, struct note_picture **last)
{
  if (!chart) {
    return last;
  }
  *last = ARENA_NEW (arena, struct note_picture);
  **last = (struct note_picture) { chart, NULL };
  return &(*last)->next;
}

/* The streams, and each balance that has a solution.  */
static const struct note_picture *
pictures (struct session *s, struct arena *arena)
{
  struct note_picture *first = NULL;
  struct note_picture **last = add_picture (arena, note_chart (s, arena), &first);
  for (size_t i = 0; i < s->count; i++) {
    const struct definition *d = s->order[i];
    struct fault unheard;
    struct evaluation ev;
    if (d->kind != NAME_BALANCE || !d->fresh || !d->value.plant->solution
        || d->value.plant->boundary_count > CHART_BOXES_MOST) {
      continue;
    }
    fault_init (&unheard, arena);
    evaluation_init (&ev, s, NULL, &unheard);
    ev.arena = arena;
    const struct balance_verdict *verdict = plant_verdict (&ev, d->value.plant, NULL);
    if (verdict) {
      last = add_picture (arena, balance_chart (&ev, d->value.plant, verdict, NULL), last);
    }
  }
  return first;
}

/* ---- Results ---- */

static bool
was_shown (const struct note_result *before, const struct step *step)
{
  for (const struct note_result *r = before; r; r = r->next)
    for (const struct step *s = r->workings->steps; s; s = s->next)
      if (kept_same_step (s, step)) {
        return true;
      }
  return false;
}

/* The workings of an answer without what an earlier one has shown.  */
static const struct workings_record *
new_workings (struct session *s, struct arena *arena, struct kept_answer *answer,
              const struct note_result *before)
{
  struct workings_record *record = ARENA_NEW (arena, struct workings_record);
  const struct workings_record *all = workings_of (s, arena, answer);
  struct step *first = NULL, **last = &first;
  *record = *all;
  record->count = 0;
  for (const struct step *step = all->steps; step; step = step->next)
    if (!was_shown (before, step)) {
      *last = ARENA_NEW (arena, struct step);
      **last = *step;
      (*last)->next = NULL;
      last = &(*last)->next;
      record->count++;
    }
  record->steps = first;
  return record;
}

static const struct note_result *
results (struct session *s, struct arena *arena, unsigned *touched)
{
  struct note_result *first = NULL, **last = &first;
  kept_settle (s);
  for (size_t i = 0; i < s->kept->count; i++) {
    struct kept_answer *answer = s->kept->answers[i];
    struct note_result *r = ARENA_NEW (arena, struct note_result);
    *r = (struct note_result) {
      .statement = answer->statement, .answers = answer->answers, .count = answer->count,
      .taken = answer->taken, .notes = answer->notes, .cautions = answer->cautions,
      .workings = new_workings (s, arena, answer, first) };
    *touched |= answer->touched;
    *last = r;
    last = &r->next;
  }
  return first;
}

/* ---- The whole ---- */

bool
note_ends_in (const char *text, const char *end)
{
  size_t n = strlen (text), k = strlen (end);
  return n > k && strcmp (text + n - k, end) == 0;
}

/* "offer" of "notes/offer.html".  */
static const char *
title_of (struct arena *arena, const char *file)
{
  const char *slash = strrchr (file, '/'), *name = slash ? slash + 1 : file;
  const char *dot = strrchr (name, '.');
  return arena_copy (arena, name, dot ? (size_t) (dot - name) : strlen (name));
}

/* Files that were read: none of them is written over.  */
const struct note_row *
note_inputs (const struct session *s, struct arena *arena)
{
  struct rows rows = rows_start (arena);
  for (size_t i = 0; i < s->count; i++)
    if (s->order[i]->statement->text) {
      rows_add (&rows, NULL, arena_string (arena, s->order[i]->statement->text), NULL);
    }
  for (const struct kept_line *line = s->kept->opened; line; line = line->next) {
    rows_add (&rows, NULL, line->text, NULL);
  }
  return rows.first;
}

static const struct note_row *
statements (const struct session *s, struct arena *arena)
{
  struct rows rows = rows_start (arena);
  for (const struct kept_line *line = s->kept->lines; line; line = line->next) {
    rows_add (&rows, NULL, line->text, NULL);
  }
  return rows.first;
}

bool
command_note (struct session *s, const struct statement *statement, struct result *result,
              struct fault *fault)
{
  struct arena *arena = result->arena;
  unsigned touched = 0;
  if (!*statement->text) {
    return fault_set_at (fault, MESSAGE_TEXT_EXPECTED, statement->text_at, "a file has a name",
                         NULL);
  }
  if (!note_ends_in (statement->text, ".md") && !note_ends_in (statement->text, ".html")) {
    return fault_set_at (fault, MESSAGE_FILE_FORM, statement->text_at, statement->text, NULL);
  }
  struct note *note = ARENA_NEW (arena, struct note);
  note->file = statement->text;
  note->title = title_of (arena, statement->text);
  note->results = results (s, arena, &touched);
  note->given = given (s, arena);
  note->conditions = conditions (s, arena, touched);
  note->gases = gases (s, arena);
  note->pictures = pictures (s, arena);
  note->statements = statements (s, arena);
  note->inputs = note_inputs (s, arena);
  note->results_left_out = s->kept->beyond;
  note->statements_left_out = s->kept->lines_beyond;
  note->digits = s->settings.digits;
  struct note **end = &result->note;
  while (*end) {
    end = &(*end)->next;
  }
  *end = note;
  return true;
}
