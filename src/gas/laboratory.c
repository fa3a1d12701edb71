#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/number.h"
#include "support/text.h"
#include "units/dimension.h"
#include "units/unit.h"

/* ---- Cells ---- */

const struct csv_cell *
cell_at (const struct laboratory *lab, size_t row, size_t column)
{
  static const struct csv_cell empty = { .text = "", .line = 1, .column = 1 };
  if (row >= lab->row_count || lab->rows[row].count == 0)
    return &empty;
  const struct csv_row *r = &lab->rows[row];
  return &r->cells[column < r->count ? column : r->count - 1];
}

struct slice
cell_slice (const struct laboratory *lab, size_t row, size_t column)
{
  if (row >= lab->row_count || column >= lab->rows[row].count)
    return (struct slice) { "", 0 };
  const struct csv_cell *cell = &lab->rows[row].cells[column];
  return slice_trimmed ((struct slice) { cell->text, cell->length });
}

bool
complain_at (const struct laboratory *lab, size_t row, size_t column, enum message kind,
             const char *fact2, const char *fact3, struct fault *fault)
{
  const struct csv_cell *cell = cell_at (lab, row, column);
  int at = cell->column + (cell->quoted ? 1 : 0);
  for (size_t i = 0; i < cell->length && cell->text[i] == ' '; i++)
    at++;
  return csv_complain (&lab->csv, cell->line, at, kind, fact2, fact3, fault);
}

void
pass_over (struct laboratory *lab, struct arena *arena, const char *what)
{
  enum { PASSED_MOST = 300 };             /* bytes that are told */
  if (lab->passed == NULL)
    lab->passed = what;
  else if (strlen (lab->passed) < PASSED_MOST)
    lab->passed = arena_format (arena, "%s, %s", lab->passed, what);
  else if (strcmp (lab->passed + strlen (lab->passed) - 3, "...") != 0)
    lab->passed = arena_format (arena, "%s, ...", lab->passed);
}

/* ---- Reading ---- */

static bool
is_empty_row (const struct csv_row *row)
{
  for (size_t k = 0; k < row->count; k++)
    if (slice_trimmed ((struct slice) { row->cells[k].text, row->cells[k].length }).n > 0)
      return false;
  return true;
}

static bool
read_rows (struct laboratory *lab, struct arena *arena, struct fault *fault)
{
  struct csv_row row;
  while (csv_next (&lab->csv, arena, &row, fault)) {
    if (is_empty_row (&row))
      continue;
    if (lab->row_count == lab->row_room) {
      const size_t room = lab->row_room > 0 ? 2 * lab->row_room : 64;
      struct csv_row *more = ARENA_ARRAY (arena, room, struct csv_row);
      if (lab->row_count > 0)
        memcpy (more, lab->rows, lab->row_count * sizeof *more);
      lab->rows = more;
      lab->row_room = room;
    }
    lab->rows[lab->row_count++] = row;
  }
  return fault->kind == MESSAGE_NONE;
}

/* The cell of a component in a sample.  */
static size_t
figure_row (const struct laboratory *lab, size_t sample, size_t component)
{
  return lab->by_rows ? lab->components[component].index : lab->samples[sample].index;
}

static size_t
figure_column (const struct laboratory *lab, size_t sample, size_t component)
{
  return lab->by_rows ? lab->samples[sample].index : lab->components[component].index;
}

static bool
find_decimal_sign (struct laboratory *lab, struct fault *fault)
{
  struct decimal_signs signs = { NULL, NULL, false };
  lab->decimal = lab->asked->decimal;
  for (size_t s = 0; s < lab->sample_count; s++)
    for (size_t c = 0; c < lab->component_count; c++) {
      const struct axis *with = lab->by_rows ? &lab->samples[s] : &lab->components[c];
      const size_t row = figure_row (lab, s, c), column = figure_column (lab, s, c);
      if (column < lab->rows[row].count)
        decimal_look (&signs, &lab->rows[row].cells[column]);
      if (with->spread < lab->rows[row].count)
        decimal_look (&signs, &lab->rows[row].cells[with->spread]);
    }
  if (lab->decimal != '\0')
    return true;
  lab->decimal = signs.comma != NULL ? ',' : '.';
  const struct csv_cell *cell = signs.comma;
  if (cell == NULL || (signs.dot == NULL && signs.certain))
    return true;
  const char *text = arena_copy (fault->arena, cell->text, cell->length);
  if (signs.dot != NULL)
    return csv_complain (&lab->csv, cell->line, cell->column + cell->quoted,
                         MESSAGE_LABORATORY_DECIMAL,
                         arena_format (fault->arena,
                                       "'%s' has a comma, '%.*s' in line %d a point", text,
                                       (int) signs.dot->length, signs.dot->text,
                                       signs.dot->line),
                         "write all figures with one decimal sign and no thousands marks", fault);
  return csv_complain (&lab->csv, cell->line, cell->column + cell->quoted,
                       MESSAGE_LABORATORY_DECIMAL,
                       arena_format (fault->arena, "is the comma of '%s' a decimal sign or a "
                                     "thousands mark", text),
                       "a decimal sign: say 'decimal comma' behind the file's name; a thousands "
                       "mark: take it out of the file", fault);
}

/* ---- What is said of it ---- */

static const char *
count_text (struct arena *arena, size_t n, const char *what)
{
  return arena_format (arena, "%zu %s%s", n, what, n == 1 ? "" : "s");
}

static void
say_layout (struct laboratory *lab, struct arena *arena)
{
  static const char *const encodings[] = { "UTF-8", "UTF-8 with a mark", "Windows-1252" };
  const char delimiter = lab->csv.delimiter;
  lab->said.layout = arena_format (arena, "a %s in each row, %s, %s%s",
                                   lab->in_long ? "component of a sample"
                                   : lab->by_rows ? "component" : "sample",
                                   count_text (arena, lab->sample_count, "sample"),
                                   count_text (arena, lab->component_count, "component"),
                                   lab->numbered && lab->sample_count > 1
                                     ? "; samples are numbered as they stand" : "");
  lab->said.form = arena_format (arena, "cells parted by %s, decimal sign '%c', %s%s%s",
                                 delimiter == '\t' ? "tabs" : delimiter == ';' ? "';'" : "','",
                                 lab->decimal, encodings[lab->csv.encoding],
                                 lab->csv.remarks_passed > 0 ? ", " : "",
                                 lab->csv.remarks_passed > 0
                                   ? count_text (arena, lab->csv.remarks_passed, "remark")
                                   : "");
  lab->said.windows_1252 = lab->csv.encoding == CSV_WINDOWS_1252;
  lab->said.passed = lab->passed;
}

/* The unit of a figure whose cell has none: of row, heading or column, the file's, the user's.  */
struct unit_said { const struct unit *unit; const char *text; bool percent; };

static struct unit_said
unit_of (const struct laboratory *lab, size_t sample, size_t component)
{
  const struct axis *c = &lab->components[component], *s = &lab->samples[sample];
  struct unit_said u = { c->unit, c->unit_text, c->percent };
  if (u.unit == NULL && !u.percent)
    u = (struct unit_said) { s->unit, s->unit_text, s->percent };
  if (u.unit == NULL && !u.percent)
    u = (struct unit_said) { lab->unit, lab->unit_text, lab->percent };
  if (u.unit == NULL && lab->asked->unit != NULL)
    u = (struct unit_said) { lab->asked->unit, lab->asked->unit_text, u.percent };
  return u;
}

/* "mol% (as typed), H2S in ppm".  */
static void
say_units (struct laboratory *lab, struct arena *arena)
{
  struct unit_said most = unit_of (lab, 0, 0);
  size_t best = 0;
  for (size_t c = 0; c < lab->component_count; c++) {
    struct unit_said u = unit_of (lab, 0, c);
    size_t same = 0;
    for (size_t k = 0; k < lab->component_count; k++)
      same += unit_of (lab, 0, k).unit == u.unit;
    if (u.unit != NULL && same > best) {
      best = same;
      most = u;
    }
  }
  if (most.unit == NULL)
    return;
  const char *text = arena_format (arena, "figures in %s%s", most.text,
                                   most.unit == lab->asked->unit ? ", as typed" : "");
  for (size_t c = 0; c < lab->component_count; c++) {
    struct unit_said u = unit_of (lab, 0, c);
    if (u.unit != NULL && u.unit != most.unit && strlen (text) < 200)
      text = arena_format (arena, "%s, %s in %s", text, lab->components[c].name, u.text);
  }
  if (lab->moisture != LABORATORY_UNSAID)
    text = arena_format (arena, "%s, %s", text, lab->moisture == LABORATORY_DRY ? "dry" : "wet");
  lab->said.units = text;
}

static void
say_expanded (struct laboratory *lab)
{
  const size_t n = lab->by_rows ? lab->sample_count : lab->component_count;
  const struct axis *axes = lab->by_rows ? lab->samples : lab->components;
  for (size_t i = 0; i < n; i++)
    if (axes[i].spread != NOWHERE && axes[i].expanded && !(axes[i].k > 0))
      lab->said.expanded = "U";
}

/* ---- What the user said against what the file says ---- */

static bool
asked_holds (struct laboratory *lab, struct fault *fault)
{
  const struct laboratory_asked *asked = lab->asked;
  bool used = asked->unit == NULL;
  if (asked->moisture != LABORATORY_UNSAID && lab->moisture != LABORATORY_UNSAID
      && asked->moisture != lab->moisture)
    return complain_at (lab, lab->heading == NOWHERE ? 0 : lab->heading, 0,
                        MESSAGE_LABORATORY_MOISTURE,
                        lab->moisture == LABORATORY_DRY ? "the file says dry, the statement wet"
                                                        : "the file says wet, the statement dry",
                        "leave the word out, or mend the file", fault);
  if (lab->moisture == LABORATORY_UNSAID)
    lab->moisture = asked->moisture;
  for (size_t s = 0; !used && s < lab->sample_count && s < 100; s++)
    for (size_t c = 0; !used && c < lab->component_count; c++) {
      struct unit_said u = unit_of (lab, s, c);
      used = u.unit == asked->unit;
    }
  struct unit_said first = unit_of (lab, 0, 0);
  if (!used)
    return complain_at (lab, lab->heading == NOWHERE ? 0 : lab->heading, 0,
                        MESSAGE_LABORATORY_UNIT,
                        arena_format (fault->arena, "the file says %s, the statement %s",
                                      first.text, asked->unit_text),
                        "leave the unit out, or mend the file", fault);
  return true;
}

const struct laboratory *
laboratory_read (struct arena *arena, const char *bytes, size_t n,
                 const struct laboratory_asked *asked, const struct laboratory_words *words,
                 struct fault *fault)
{
  struct laboratory *lab = ARENA_NEW (arena, struct laboratory);
  *lab = (struct laboratory) { .asked = asked, .words = words, .heading = NOWHERE,
                               .unit_row = NOWHERE, .unit_column = NOWHERE };
  if (!csv_open (&lab->csv, arena, asked->file, bytes, n, fault))
    return NULL;
  lab->csv.remarks = true;
  if (lab->csv.length == 0) {
    csv_complain (&lab->csv, 1, 1, MESSAGE_LABORATORY_LAYOUT, "this file is empty", NULL, fault);
    return NULL;
  }
  if (!csv_find_delimiter (&lab->csv, fault) || !read_rows (lab, arena, fault)
      || !layout_find (lab, arena, fault) || !find_decimal_sign (lab, fault)
      || !asked_holds (lab, fault))
    return NULL;
  say_layout (lab, arena);
  say_units (lab, arena);
  say_expanded (lab);
  return lab;
}

size_t
laboratory_samples (const struct laboratory *lab)
{
  return lab->sample_count;
}

const char *
laboratory_sample (const struct laboratory *lab, size_t i)
{
  return lab->samples[i].name;
}

enum laboratory_moisture
laboratory_moisture (const struct laboratory *lab)
{
  return lab->moisture;
}

const struct laboratory_said *
laboratory_said (const struct laboratory *lab)
{
  return &lab->said;
}

/* ---- Samples ---- */

/* The first few names, quoted.  */
static const char *
sample_names (const struct laboratory *lab, struct arena *arena)
{
  enum { NAMES_TOLD = 8 };
  const char *names = "";
  for (size_t i = 0; i < lab->sample_count && i < NAMES_TOLD; i++)
    names = arena_format (arena, "%s%s\"%s\"", names, i > 0 ? ", " : "", lab->samples[i].name);
  return lab->sample_count > NAMES_TOLD
           ? arena_format (arena, "%s ... \"%s\", %zu in all", names,
                           lab->samples[lab->sample_count - 1].name, lab->sample_count)
           : names;
}

bool
laboratory_find (const struct laboratory *lab, const char *sample, size_t *i,
                 struct fault *fault)
{
  size_t found = NOWHERE;
  if (sample == NULL && lab->sample_count == 1) {
    *i = 0;
    return true;
  }
  for (size_t k = 0; sample != NULL && k < lab->sample_count; k++) {
    if (strcmp (lab->samples[k].name, sample) != 0)
      continue;
    if (found != NOWHERE)
      return csv_complain (&lab->csv, lab->samples[k].line, lab->samples[k].column,
                           MESSAGE_LABORATORY_SAMPLE,
                           arena_format (fault->arena, "more than one is called \"%s\"", sample),
                           "give each sample a name of its own", fault);
    found = k;
  }
  if (found != NOWHERE) {
    *i = found;
    return true;
  }
  const char *names = sample_names (lab, fault->arena);
  return csv_complain (&lab->csv, lab->samples[0].line, lab->samples[0].column,
                       MESSAGE_LABORATORY_SAMPLE,
                       sample == NULL ? arena_format (fault->arena, "the file holds %zu",
                                                      lab->sample_count)
                                      : arena_format (fault->arena, "none is called \"%s\"",
                                                      sample),
                       arena_format (fault->arena, "say sample \"...\": %s", names), fault);
}

/* ---- Parts ---- */

struct spot { size_t row, column; };

/* The uncertainty of a part: a cell of its own, or what stands behind +/- in the figure's.  */
static bool
read_spread (const struct laboratory *lab, struct arena *arena, struct spot at,
             const struct axis *with, const struct cell_amount *figure,
             struct laboratory_part *part, struct fault *fault)
{
  struct slice s = figure->spread;
  bool own = s.n > 0;
  if (!own && with->spread == NOWHERE)
    return true;
  if (!own) {
    at.column = with->spread;
    s = cell_slice (lab, at.row, at.column);
  }
  struct cell_amount u = amount_read (arena, lab->words, s, lab->decimal);
  if (u.kind == CELL_NONE || part->amount != LABORATORY_FIGURE)
    return true;
  if (u.kind == CELL_BAD || u.amount != LABORATORY_FIGURE || u.spread.n > 0)
    return complain_at (lab, at.row, at.column, MESSAGE_LABORATORY_AMOUNT,
                        arena_format (fault->arena, "'%s' is no uncertainty",
                                      slice_text (fault->arena, s)),
                        u.kind == CELL_BAD ? u.why : "a figure is expected", fault);
  part->spread = !own && with->expanded ? LABORATORY_EXPANDED : LABORATORY_STANDARD;
  part->k = with->k > 0 ? with->k : 2;
  part->spread_number = u.number;
  part->spread_figure = u.figure;
  part->spread_relative = u.percent || (!own && with->relative && u.unit == NULL);
  part->spread_unit = u.unit != NULL ? u.unit : own || part->spread_relative ? NULL
                                                                             : with->spread_unit;
  if (part->spread_unit == part->unit)
    part->spread_unit = NULL;
  if (part->spread_unit != NULL && !unit_same_measure (part->spread_unit, part->unit))
    return complain_at (lab, at.row, at.column, MESSAGE_LABORATORY_UNIT,
                        arena_format (fault->arena, "an uncertainty in %s of a figure in %s",
                                      part->spread_unit->spelling, part->unit_text),
                        "state both in one unit", fault);
  return true;
}

/* The unit of a figure; false if none is known, or a bare % contradicts it.  */
static bool
settle_unit (const struct laboratory *lab, struct spot at,
             const struct cell_amount *a, struct unit_said u, struct laboratory_part *part,
             struct fault *fault)
{
  part->unit = a->unit != NULL ? a->unit : u.unit;
  part->unit_text = a->unit != NULL ? a->unit_text : u.text;
  if (part->unit == NULL)
    return complain_at (lab, at.row, at.column, MESSAGE_LABORATORY_UNIT,
                        a->percent || u.percent ? "per cent of amount, mass or volume"
                                                : "the file does not say what its figures are "
                                                  "shares of",
                        "say it behind the file's name: mol%, mass% or vol%", fault);
  bool by_volume = dimension_equal (part->unit->dimension, DIMENSION_DENSITY)
                   || dimension_equal (part->unit->dimension, DIMENSION_MOLAR_DENSITY);
  if (by_volume && part->unit->family_power != -1)
    return complain_at (lab, at.row, at.column, MESSAGE_LABORATORY_UNIT,
                        arena_format (fault->arena, "%s says nothing without a temperature and a "
                                      "pressure", part->unit_text),
                        "count it at reference conditions: mg/Nm3, mg/Sm3", fault);
  bool hundredth = part->unit->ratio != RATIO_NONE
                   && part->unit->factor > 0.0099 && part->unit->factor < 0.0101;
  if ((a->percent || u.percent) && !hundredth)
    return complain_at (lab, at.row, at.column, MESSAGE_LABORATORY_UNIT,
                        arena_format (fault->arena, "a figure in %% where the unit is %s",
                                      part->unit_text), "say one of them", fault);
  return true;
}

bool
laboratory_parts_of (const struct laboratory *lab, size_t sample, struct arena *arena,
                     struct laboratory_parts *parts, struct fault *fault)
{
  struct laboratory_part *out = ARENA_ARRAY (arena, lab->component_count, struct laboratory_part);
  *parts = (struct laboratory_parts) { out, 0, NULL };
  for (size_t c = 0; c < lab->component_count; c++) {
    const size_t row = figure_row (lab, sample, c), column = figure_column (lab, sample, c);
    const struct axis *with = lab->by_rows ? &lab->samples[sample] : &lab->components[c];
    const struct csv_cell *cell = cell_at (lab, row, column);
    struct slice s = cell_slice (lab, row, column);
    struct cell_amount a = amount_read (arena, lab->words, s, lab->decimal);
    const char *name = lab->components[c].name;
    if (a.kind == CELL_BAD)
      return complain_at (lab, row, column, MESSAGE_LABORATORY_AMOUNT,
                          arena_format (fault->arena, "'%s' is no amount of %s",
                                        slice_text (fault->arena, s), name), a.why, fault);
    if (a.kind == CELL_NONE) {
      parts->left_out = parts->left_out == NULL
                          ? name : arena_format (arena, "%s, %s", parts->left_out, name);
      continue;
    }
    struct laboratory_part *part = &out[parts->count++];
    *part = (struct laboratory_part) { .name = name, .line = cell->line, .column = cell->column,
                                       .amount = a.amount, .number = a.number,
                                       .figure = a.figure };
    if (a.amount == LABORATORY_REST)
      continue;
    if (!settle_unit (lab, (struct spot) { row, column }, &a, unit_of (lab, sample, c), part,
                      fault)
        || !read_spread (lab, arena, (struct spot) { row, column }, with, &a, part, fault))
      return false;
  }
  if (parts->count == 0)
    return complain_at (lab, figure_row (lab, sample, 0), figure_column (lab, sample, 0),
                        MESSAGE_LABORATORY_LAYOUT, "this sample has no figures", NULL, fault);
  return true;
}
