#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

enum { ROWS_LOOKED_AT = 200 };

/* ---- Which way the file lies ---- */

/* The row and the column with the most names of components.  */
struct census { size_t in_row, row, in_column, column; };

static struct census
count_names (const struct laboratory *lab, struct arena *arena)
{
  struct census c = { 0, 0, 0, 0 };
  const size_t rows = lab->row_count < ROWS_LOOKED_AT ? lab->row_count : ROWS_LOOKED_AT;
  size_t widest = 1;
  for (size_t r = 0; r < rows; r++)
    widest = lab->rows[r].count > widest ? lab->rows[r].count : widest;
  size_t *in_column = ARENA_ARRAY (arena, widest, size_t);
  for (size_t r = 0; r < rows; r++) {
    size_t in_row = 0;
    for (size_t k = 0; k < lab->rows[r].count; k++) {
      struct heading h = heading_read (arena, lab->words, cell_slice (lab, r, k));
      if (h.kind != HEADING_PART || !slice_is_component (lab->words, h.name))
        continue;
      in_row++;
      in_column[k]++;
      if (in_column[k] > c.in_column) {
        c.in_column = in_column[k];
        c.column = k;
      }
    }
    if (in_row > c.in_row) {
      c.in_row = in_row;
      c.row = r;
    }
  }
  return c;
}

/* One name alone: figures beside it or below it?  */
static bool
lies_by_rows (const struct laboratory *lab, const struct census *c)
{
  if (c->in_row != c->in_column)
    return c->in_column > c->in_row;
  for (size_t k = c->column + 1; k < lab->rows[c->row].count; k++)
    if (amount_looks (cell_slice (lab, c->row, k)))
      return true;
  return false;
}

/* ---- What the rows above say of the whole file ---- */

bool
layout_moisture (struct laboratory *lab, enum laboratory_moisture said, size_t row, size_t column,
               struct fault *fault)
{
  if (said == LABORATORY_UNSAID || said == lab->moisture)
    return true;
  if (lab->moisture != LABORATORY_UNSAID)
    return complain_at (lab, row, column, MESSAGE_LABORATORY_MOISTURE,
                        "dry is said in one place, wet in another",
                        "keep what belongs together in a file of its own", fault);
  lab->moisture = said;
  return true;
}

/* A row above the headings: a unit or `dry` for all of it, or nothing that counts.  */
bool
layout_preface (struct laboratory *lab, struct arena *arena, size_t row, struct fault *fault)
{
  const struct csv_row *cells = &lab->rows[row];
  bool used = false;
  for (size_t k = 0; k < cells->count; k++) {
    struct slice s = cell_slice (lab, row, k);
    struct heading h = heading_read (arena, lab->words, s);
    bool says = h.kind == HEADING_AMOUNT || (h.kind == HEADING_UNIT && (h.unit || h.moisture));
    if (!says)
      continue;
    used = true;
    if (h.unit != NULL && lab->unit == NULL) {
      lab->unit = h.unit;
      lab->unit_text = h.unit_text;
    }
    lab->percent = lab->percent || h.percent;
    if (!layout_moisture (lab, h.moisture, row, k, fault))
      return false;
  }
  if (!used)
    pass_over (lab, arena, arena_format (arena, "line %d", cells->line));
  return true;
}

/* ---- Units in a row or a column of their own ---- */

/* Are the cells of ROW, from FIRST on, units and nothing else?  */
bool
layout_is_unit_row (const struct laboratory *lab, struct arena *arena, size_t row, size_t names)
{
  size_t units = 0;
  if (row >= lab->row_count)
    return false;
  for (size_t k = 0; k < lab->rows[row].count; k++) {
    struct heading h = heading_read (arena, lab->words, cell_slice (lab, row, k));
    if (h.kind == HEADING_EMPTY || h.kind == HEADING_UNIT
        || (k == names && h.kind != HEADING_PART))
      continue;
    if (h.kind != HEADING_AMOUNT || (h.unit == NULL && !h.percent))
      return false;
    units++;
  }
  return units > 0;
}

/* What the unit row says of a column, where the heading does not.  */
void
layout_add_unit_row (const struct laboratory *lab, struct arena *arena, size_t column,
                     struct heading *h)
{
  if (lab->unit_row == NOWHERE || h->unit != NULL || h->percent)
    return;
  struct heading u = heading_read (arena, lab->words, cell_slice (lab, lab->unit_row, column));
  h->unit = u.unit;
  h->unit_text = u.unit_text;
  h->percent = u.percent;
  h->moisture = h->moisture != LABORATORY_UNSAID ? h->moisture : u.moisture;
  h->k = h->k > 0 ? h->k : u.k;
}

struct axis
layout_axis (const struct laboratory *lab, struct arena *arena, size_t row, size_t column,
         const struct heading *h)
{
  const struct csv_cell *cell = cell_at (lab, row, column);
  return (struct axis) {
    .name = slice_text (arena, h->name), .spread = NOWHERE, .line = cell->line,
    .column = cell->column, .unit = h->unit, .unit_text = h->unit_text, .percent = h->percent
  };
}

void
layout_take_spread (struct axis *axis, size_t column, const struct heading *h)
{
  axis->spread = column;
  axis->expanded = h->expanded || h->k > 0;
  axis->k = h->k;
  axis->relative = h->relative || h->percent;
  axis->spread_unit = h->unit;
}

/* ---- Names ---- */

bool
layout_name_refused (const struct laboratory *lab, size_t row, size_t column, struct slice name,
              struct fault *fault)
{
  const struct species *found;
  const char *candidates, *text = slice_text (fault->arena, name), *way_on = NULL;
  if (species_find (lab->words->species, name.at, name.n, &found, &candidates)
      == SPECIES_AMBIGUOUS)
    return complain_at (lab, row, column, MESSAGE_LABORATORY_NAME,
                        arena_format (fault->arena, "'%s' has more than one meaning", text),
                        arena_format (fault->arena, "%s; or define a gas called %s first",
                                      candidates, text), fault);
  const char *near = species_nearest (lab->words->species, name.at, name.n);
  way_on = near != NULL ? arena_format (fault->arena, "did you mean '%s'?", near)
                        : "write a component's key, name or formula; a lump is a gas of that name";
  return complain_at (lab, row, column, MESSAGE_LABORATORY_NAME,
                      arena_format (fault->arena, "no component is called '%s'", text), way_on,
                      fault);
}

/* Is it a name that can be a part?  Of two meanings: not unless it is a peak.  */
bool
layout_name_holds (const struct laboratory *lab, size_t row, size_t column, struct slice name,
            struct fault *fault)
{
  const struct species *found;
  const char *candidates;
  if (lab->words->knows != NULL && lab->words->knows (lab->words->with, name.at, name.n))
    return true;
  if (species_find (lab->words->species, name.at, name.n, &found, &candidates)
        == SPECIES_AMBIGUOUS && memchr (name.at, '+', name.n) == NULL)
    return layout_name_refused (lab, row, column, name, fault);
  return true;
}

/* Two names of one component.  */
bool
layout_name_is_new (const struct laboratory *lab, size_t row, size_t column, struct slice name,
             struct fault *fault)
{
  const struct species *own = NULL, *other = NULL;
  const char *candidates;
  (void) species_find (lab->words->species, name.at, name.n, &own, &candidates);
  for (size_t i = 0; i < lab->component_count; i++) {
    const char *before = lab->components[i].name;
    bool same = strlen (before) == name.n && memcmp (before, name.at, name.n) == 0;
    other = NULL;
    if (!same)
      (void) species_find (lab->words->species, before, strlen (before), &other, &candidates);
    if (same || (own != NULL && own == other))
      return complain_at (lab, row, column, MESSAGE_LABORATORY_TWICE,
                          arena_format (fault->arena, "%s", own != NULL ? own->key : before),
                          arena_format (fault->arena, "it stands at %s:%d:%d already",
                                        lab->csv.name, lab->components[i].line,
                                        lab->components[i].column), fault);
  }
  return true;
}

/* Room for as many axes as there are rows or columns.  */
static size_t
axes_most (const struct laboratory *lab)
{
  size_t most = lab->row_count;
  for (size_t r = 0; r < lab->row_count; r++)
    most = lab->rows[r].count > most ? lab->rows[r].count : most;
  return most;
}

/* ---- Figures ---- */

bool
layout_column_has_figures (const struct laboratory *lab, size_t column, size_t first_row)
{
  const size_t rows = lab->row_count - first_row < ROWS_LOOKED_AT ? lab->row_count
                                                                  : first_row + ROWS_LOOKED_AT;
  bool any = false;
  for (size_t r = first_row; r < rows; r++) {
    struct slice s = cell_slice (lab, r, column);
    if (!amount_may (s))
      return false;
    any = any || amount_looks (s);
  }
  return any;
}

/* ---- All of it ---- */

/* No component at all: a name nobody knows that has a figure beside it, or nothing.  */
static bool
nothing_named (const struct laboratory *lab, struct arena *arena, struct fault *fault)
{
  const size_t rows = lab->row_count < ROWS_LOOKED_AT ? lab->row_count : ROWS_LOOKED_AT;
  for (size_t r = 0; r < rows; r++)
    for (size_t k = 0; k + 1 < lab->rows[r].count; k++) {
      const struct slice s = cell_slice (lab, r, k);
      if (!amount_looks (s) && amount_looks (cell_slice (lab, r, k + 1))
          && heading_read (arena, lab->words, s).kind == HEADING_UNKNOWN)
        return layout_name_refused (lab, r, k, s, fault);
    }
  return complain_at (lab, 0, 0, MESSAGE_LABORATORY_LAYOUT, "no component is named in this file",
                      "a name stands before its figures, or above them", fault);
}

bool
layout_find (struct laboratory *lab, struct arena *arena, struct fault *fault)
{
  struct census c = count_names (lab, arena);
  if (c.in_row == 0)
    return nothing_named (lab, arena, fault);
  lab->components = ARENA_ARRAY (arena, axes_most (lab), struct axis);
  lab->samples = ARENA_ARRAY (arena, axes_most (lab), struct axis);
  if (!(lies_by_rows (lab, &c) ? layout_by_component (lab, arena, c.column, fault)
                               : layout_by_sample (lab, arena, c.row, fault)))
    return false;
  if (lab->sample_count == 0)
    return complain_at (lab, c.row, c.column, MESSAGE_LABORATORY_LAYOUT,
                        "there are names of components, but no figures", NULL, fault);
  return true;
}
