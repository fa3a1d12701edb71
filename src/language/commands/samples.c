#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/laboratory.h"
#include "gas/species.h"
#include "language/evaluate/wording.h"
#include "property/calorific.h"
#include "property/hazard.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/statistics.h"
#include "units/constants.h"

/* One sample of the table: closed, or open with its parts as stated.  */
struct row {
  const char *name;
  double total;                            /* as stated; NAN: there is none to meet */
  bool open;
  size_t count;
  const struct species *const *species;
  const double *fraction;
  double gross, wobbe;                     /* J/m3 at Sm3, ideal; NAN where there is none */
};

struct table {
  struct session *session;
  struct result *result;
  struct file_samples file;
  struct row *rows;
  size_t count, open;
  const struct species **species;          /* the columns */
  size_t species_count, species_room;
  size_t wet;
};

/* ---- Reading ---- */

static void
add_column (struct table *t, const struct species *species)
{
  for (size_t i = 0; i < t->species_count; i++)
    if (t->species[i] == species) {
      return;
    }
  t->species = room_for_one (t->result->arena, t->species, t->species_count, &t->species_room,
                             sizeof *t->species);
  t->species[t->species_count++] = species;
}

/* A calorific figure at the conditions of Sm3, ideal; NAN where there is none.  */
static double
heat_of (struct evaluation *ev, const struct composition *gas, int figure)
{
  struct heat_question q = { .gas = gas, .T = UNSTATED, .p = UNSTATED };
  struct fault *fault = ev->fault, unheard;
  const char *basis;
  double value;
  fault_init (&unheard, ev->arena);
  ev->fault = &unheard;
  bool done = heat_figure (ev, &q, figure, &value, &basis);
  ev->fault = fault;
  return done ? value : UNSTATED;
}

/* A part as stated: of an open list, whose parts are kept in mol per mole or per kilogram.  */
static double
share_stated (const struct analysis *a, const struct part *part)
{
  return a->whole == WHOLE_MASS ? part->amount * part->species->molar_mass : part->amount;
}

static void
keep_parts (struct table *t, struct row *row, const struct gas_value *gas)
{
  struct arena *arena = t->result->arena;
  row->open = !gas->closed;
  row->count = gas->closed ? gas->closed->count : gas->analysis->count;
  const struct species **species = ARENA_ARRAY (arena, row->count, const struct species *);
  double *fraction = ARENA_ARRAY (arena, row->count, double);
  for (size_t i = 0; i < row->count; i++) {
    species[i] = gas->closed ? gas->closed->species[i] : gas->analysis->parts[i].species;
    fraction[i] = gas->closed ? gas->closed->fraction[i]
                              : share_stated (gas->analysis, &gas->analysis->parts[i]);
    add_column (t, species[i]);
  }
  row->species = species;
  row->fraction = fraction;
}

/* The total of the list as it stands in the file, before any treatment.  */
static bool
stated_total (struct table *t, struct evaluation *ev, struct row *row)
{
  struct value list;
  if (!evaluate (ev, t->file.statement->from_file, NULL, &list)) {
    return false;
  }
  const struct analysis *a = list.gas->analysis;
  row->total = a->whole == WHOLE_NONE ? UNSTATED : analysis_total (a);
  return true;
}

static bool
read_row (struct table *t, struct arena *arena, size_t i, struct fault *fault)
{
  struct row *row = &t->rows[i];
  struct evaluation ev;
  struct value value;
  struct fault inside;
  fault_init (&inside, arena);
  evaluation_init (&ev, t->session, NULL, &inside);
  row->name = laboratory_sample (t->file.laboratory, i);
  row->name = *row->name ? row->name : "the sample";
  row->gross = row->wobbe = UNSTATED;
  const struct node *tree = file_sample (t->session, arena, &t->file, i, &inside);
  if (!tree || !stated_total (t, &ev, row) || !evaluate (&ev, tree, NULL, &value)) {
    fault_set_at (fault, inside.kind, inside.at, inside.fact[0], inside.fact[1]);
    fault_facts (fault, inside.fact[2], inside.fact[3]);
    fault_hint (fault, "sample \"%s\"", row->name);
    return false;
  }
  keep_parts (t, row, value.gas);
  file_tell_assumed (&ev, t->result);
  if (row->open) {
    t->open++;
    return true;
  }
  const struct composition *gas = value.gas->closed;
  t->wet += composition_fraction (gas, t->session->water) > 0;
  row->gross = heat_of (&ev, gas, CALORIFIC_GROSS_VOLUME);
  row->wobbe = heat_of (&ev, gas, CALORIFIC_WOBBE);
  return true;
}

static bool
read_rows (struct table *t, const struct statement *s, struct fault *fault)
{
  bool (*interrupted) (void) = t->session->options.interrupted;
  struct arena *arena = arena_create ();
  bool done = true;
  t->count = laboratory_samples (t->file.laboratory);
  t->rows = ARENA_ARRAY (t->result->arena, t->count, struct row);
  for (size_t i = 0; done && i < t->count; i++) {
    arena_reset (arena);
    done = interrupted && interrupted ()
             ? fault_set_at (fault, MESSAGE_INTERRUPTED, s->at, NULL, NULL)
             : read_row (t, arena, i, fault);
  }
  arena_destroy (arena);
  return done;
}

/* ---- Cautions ---- */

/* The samples whose gas is the worst of a kind: most toxic, nearest to fire, richest in oxygen.  */
static void
tell_cautions (struct table *t)
{
  enum { WORST_MOST = 32 };
  struct { struct hazard hazard; const struct row *row; } worst[WORST_MOST];
  struct flammable_limits *stated;
  size_t n = 0, set = limits_set (&t->session->settings, NULL, t->result->arena, &stated);
  for (size_t i = 0; i < t->count; i++) {
    struct hazard found[HAZARD_MOST];
    const struct row *row = &t->rows[i];
    const struct composition gas = { row->count, row->species, row->fraction, 0 };
    size_t hazards = row->open ? 0 : hazard_find (&gas, stated, set, found);
    for (size_t k = 0; k < hazards; k++) {
      size_t at = 0;
      while (at < n && !(worst[at].hazard.kind == found[k].kind
                         && worst[at].hazard.species == found[k].species)) {
        at++;
      }
      bool less = found[k].kind == HAZARD_OXYGEN_POOR;
      if (at < WORST_MOST && (at == n || (less ? found[k].ratio < worst[at].hazard.ratio
                                               : found[k].ratio > worst[at].hazard.ratio))) {
        worst[at].hazard = found[k];
        worst[at].row = row;
        n += at == n;
      }
    }
  }
  for (size_t at = 0; at < n; at++) {
    const struct row *row = worst[at].row;
    const struct composition gas = { row->count, row->species, row->fraction, 0 };
    caution_gas (t->session, t->result, &gas, row->name);
  }
}

/* ---- Showing ---- */

static void
number_cell (struct cell *cell, double value)
{
  cell->is_number = isfinite (value);
  cell->value = value;
}

static double
share_of (const struct row *row, const struct species *species)
{
  for (size_t i = 0; i < row->count; i++)
    if (row->species[i] == species) {
      return 100 * row->fraction[i];
    }
  return UNSTATED;
}

/* The figure of a row in a column: total, components, gross calorific value, Wobbe index.  */
static double
figure_of (const struct table *t, const struct row *row, size_t column)
{
  return column == 0 ? 100 * row->total
         : column <= t->species_count ? share_of (row, t->species[column - 1])
         : (column == t->species_count + 1 ? row->gross : row->wobbe) / 1e6;
}

/* Means and standard deviations of the closed ones.  */
static void
add_statistics (const struct table *t, struct card *card)
{
  struct arena *arena = t->result->arena;
  double *x = ARENA_ARRAY (arena, t->count, double);
  bool *left_out = ARENA_ARRAY (arena, t->count, bool);
  if (t->count - t->open < 2) {
    return;
  }
  struct cell *mean = card_add_row (t->result, card, "mean");
  struct cell *spread = card_add_row (t->result, card, "s");
  for (size_t k = 0; k < card->columns; k++) {
    for (size_t i = 0; i < t->count; i++) {
      x[i] = figure_of (t, &t->rows[i], k);
      left_out[i] = t->rows[i].open || !isfinite (x[i]);
    }
    struct statistics s = statistics_of (arena, x, left_out, t->count);
    number_cell (&mean[k], s.mean);
    number_cell (&spread[k], s.standard_deviation);
  }
}

static void
add_lines (const struct table *t, struct card *card)
{
  struct arena *arena = t->result->arena;
  const struct settings *s = &t->session->settings;
  card_add_line (t->result, card,
                 "total as stated in the file; components in mol%, closed; s: standard deviation");
  card_add_line (t->result, card,
                 arena_format (arena, "gross and wobbe in MJ/m3, %s/%s degC, ideal",
                               figure_text (arena, s->combustion - ICE_POINT),
                               figure_text (arena, s->family[FAMILY_STANDARD].at.T - ICE_POINT)));
  if (t->open > 0) {
    card_add_line (t->result, card,
                   arena_format (arena, "%zu open: the total is off by more than %s %%; they stand "
                                 "as stated, and are in no mean", t->open,
                                 figure_text (arena, 100 * s->total_tolerance)));
    card_add_line (t->result, card, "close all with: normalised, behind the file's name");
  }
}

static void
show_table (const struct table *t)
{
  struct arena *arena = t->result->arena;
  const size_t columns = t->species_count + 3;
  const char **headings = ARENA_ARRAY (arena, columns, const char *);
  headings[0] = "total";
  for (size_t k = 0; k < t->species_count; k++) {
    headings[k + 1] = t->species[k]->key;
  }
  headings[columns - 2] = "gross";
  headings[columns - 1] = "wobbe";
  const char *moisture = t->wet == 0 ? "dry" : t->wet == t->count - t->open ? "wet" : "dry and wet";
  struct card *card = result_card (t->result, t->file.statement->text,
                                   arena_format (arena, "%zu sample%s, %s", t->count,
                                                 t->count == 1 ? "" : "s", moisture),
                                   columns, headings);
  card->together = 1;
  for (size_t i = 0; i < t->count; i++) {
    struct cell *cells = card_add_row (t->result, card, t->rows[i].name);
    for (size_t k = 0; k < columns; k++) {
      number_cell (&cells[k], figure_of (t, &t->rows[i], k));
    }
    if (t->rows[i].open) {
      cells[columns - 2].text = "open";
    }
  }
  add_statistics (t, card);
  add_lines (t, card);
}

/* Of a name the words that made it, of a file the words that stand here.  */
static const char *
source_of (struct session *session, const struct statement *s, struct fault *fault)
{
  if (s->from_file) {
    return arena_format (fault->arena, "gas file from %s", strchr (s->source, '"'));
  }
  struct definition *d = name_find (session, s->name, strlen (s->name));
  if (d && d->file) {
    return d->source;
  }
  if (d) {
    fault_set_at (fault, MESSAGE_KIND_WRONG, s->name_at,
                  arena_format (fault->arena, "%s is not from a file", s->name),
                  "show samples of \"file\"");
    return NULL;
  }
  struct evaluation ev;
  struct node name = { .kind = NODE_NAME, .text = s->name, .at = s->name_at };
  evaluation_init (&ev, session, NULL, fault);
  (void) name_unknown (&ev, &name);
  return NULL;
}

bool
command_samples (struct session *session, const struct statement *s, struct result *result,
                 struct fault *fault)
{
  struct table t = { .session = session, .result = result, .file.told = result };
  const char *source = source_of (session, s, fault);
  if (!source) {
    return false;
  }
  if (!file_samples (session, result->arena, source, &t.file, fault)
      || !read_rows (&t, s, fault)) {
    fault->at = s->from_file ? s->text_at : s->name_at;
    return false;
  }
  show_table (&t);
  tell_cautions (&t);
  const struct remark *r = file_remarks (result->arena, t.file.statement->text,
                                         t.file.laboratory);
  for (; r; r = r->next) {
    result_remark (result, r->kind, r->fact[0], r->fact[1]);
  }
  return true;
}
