/* A sample in each row: components head the columns.  */
#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/seen.h"

/* ---- Names of samples ---- */

/* The columns that name samples: the first, then those that tell apart what is called the same.  */
enum { NAMING_MOST = 3 };
struct naming { size_t column[NAMING_MOST], count; };

static bool
names_samples (const struct naming *n, size_t column)
{
  for (size_t i = 0; i < n->count; i++)
    if (n->column[i] == column)
      return true;
  return false;
}

/* A row of means or totals among the samples.  */
static bool
is_total_row (const struct laboratory *lab, struct arena *arena, size_t row,
              const struct naming *n)
{
  const size_t names = n->count > 0 ? n->column[0] : 0;
  return heading_read (arena, lab->words, cell_slice (lab, row, names)).kind == HEADING_TOTAL;
}

/* "T1", or "T1, 2026-11-02".  */
static const char *
name_in_row (const struct laboratory *lab, struct arena *arena, size_t row,
             const struct naming *n)
{
  const char *name = slice_text (arena, cell_slice (lab, row, n->column[0]));
  for (size_t i = 1; i < n->count; i++) {
    const struct slice more = cell_slice (lab, row, n->column[i]);
    if (more.n > 0)
      name = arena_format (arena, "%s, %s", name, slice_text (arena, more));
  }
  return name;
}

/* Do two rows from FIRST on have one name?  */
static bool
a_name_is_twice (const struct laboratory *lab, struct arena *arena, size_t first,
                 const struct naming *n)
{
  struct seen seen = { 0 };
  for (size_t r = first; r < lab->row_count; r++) {
    if (is_total_row (lab, arena, r, n))
      continue;
    const char *name = name_in_row (lab, arena, r, n);
    if (!seen_add (arena, &seen, name, strlen (name)))
      return true;
  }
  return false;
}

/* A column headed sample, else the first of dates; where one name stands for several rows, dates,
   times and runs beside it tell them apart.                                                     */
static struct naming
find_naming (const struct laboratory *lab, struct arena *arena, size_t first)
{
  struct naming n = { { 0 }, 0 };
  size_t beside[NAMING_MOST], count = 0, own = NOWHERE;
  for (size_t k = 0; k < lab->rows[lab->heading].count; k++) {
    const enum heading_kind kind
      = heading_read (arena, lab->words, cell_slice (lab, lab->heading, k)).kind;
    if (kind == HEADING_SAMPLE && own == NOWHERE)
      own = k;
    else if ((kind == HEADING_DATE || kind == HEADING_SAMPLE) && count < NAMING_MOST)
      beside[count++] = k;
  }
  if (own != NOWHERE)
    n.column[n.count++] = own;
  for (size_t i = 0; i < count && n.count < NAMING_MOST; i++)
    if (n.count == 0 || a_name_is_twice (lab, arena, first, &n))
      n.column[n.count++] = beside[i];
  return n;
}

/* ---- Columns ---- */

/* A column of uncertainties belongs to the component it names, or to the one before it.  */
static bool
spread_column (struct laboratory *lab, struct arena *arena, size_t column,
               const struct heading *h, struct fault *fault)
{
  const char *name = h->name.n > 0 ? slice_text (arena, h->name) : NULL;
  for (size_t i = lab->component_count; i-- > 0;)
    if (name == NULL || strcmp (lab->components[i].name, name) == 0) {
      if (lab->components[i].spread != NOWHERE)
        return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_TWICE,
                            arena_format (fault->arena, "the uncertainty of %s",
                                          lab->components[i].name), NULL, fault);
      layout_take_spread (&lab->components[i], column, h);
      return true;
    }
  return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_LAYOUT,
                      name == NULL ? "no component stands before these uncertainties"
                                   : arena_format (fault->arena,
                                                   "no column of %s stands before these "
                                                   "uncertainties", name),
                      "put them behind the column they belong to", fault);
}

static bool
part_column (struct laboratory *lab, struct arena *arena, size_t column, const struct heading *h,
             struct fault *fault)
{
  const enum laboratory_moisture asked = lab->asked->moisture;
  if (h->moisture != LABORATORY_UNSAID && asked != LABORATORY_UNSAID && h->moisture != asked) {
    pass_over (lab, arena, arena_format (arena, "column '%s'",
                                         slice_text (arena, cell_slice (lab, lab->heading,
                                                                        column))));
    return true;
  }
  if (!layout_name_holds (lab, lab->heading, column, h->name, fault)
      || !layout_moisture (lab, h->moisture, lab->heading, column, fault)
      || !layout_name_is_new (lab, lab->heading, column, h->name, fault))
    return false;
  lab->components[lab->component_count] = layout_axis (lab, arena, lab->heading, column, h);
  lab->components[lab->component_count++].index = column;
  return true;
}

static bool
read_column (struct laboratory *lab, struct arena *arena, size_t column, size_t first_row,
             const struct naming *naming, struct fault *fault)
{
  struct slice text = cell_slice (lab, lab->heading, column);
  struct heading h = heading_read (arena, lab->words, text);
  layout_add_unit_row (lab, arena, column, &h);
  switch (h.kind) {
  case HEADING_PART:
    return part_column (lab, arena, column, &h, fault);
  case HEADING_SPREAD:
    return spread_column (lab, arena, column, &h, fault);
  case HEADING_SAMPLE:
  case HEADING_DATE:
    if (names_samples (naming, column))
      return true;
    break;
  case HEADING_EMPTY:
    if (!layout_column_has_figures (lab, column, first_row))
      return true;
    return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_LAYOUT,
                        "this column of figures has no heading",
                        "name the component, or 'remark' if it is none", fault);
  case HEADING_UNKNOWN:
  case HEADING_AMOUNT:
    if (layout_column_has_figures (lab, column, first_row))
      return layout_name_refused (lab, lab->heading, column, h.name.n > 0 ? h.name : text, fault);
    break;
  case HEADING_UNIT:
    lab->unit_column = column;
    return true;
  case HEADING_NAMES:
  case HEADING_TOTAL:
  case HEADING_OTHER_WORD:
    break;
  }
  pass_over (lab, arena, arena_format (arena, "column '%s'", slice_text (arena, text)));
  return true;
}

static bool
read_sample_rows (struct laboratory *lab, struct arena *arena, size_t first,
                  const struct naming *naming, struct fault *fault)
{
  const size_t names = naming->count > 0 ? naming->column[0] : NOWHERE;
  const size_t width = lab->rows[lab->heading].count;
  for (size_t r = first; r < lab->row_count; r++) {
    const struct csv_row *row = &lab->rows[r];
    if (is_total_row (lab, arena, r, naming)) {
      pass_over (lab, arena, arena_format (arena, "line %d (%s)", row->line,
                                           slice_text (arena, cell_slice (lab, r, names == NOWHERE
                                                                                 ? 0 : names))));
      continue;
    }
    for (size_t k = width; k < row->count; k++)
      if (cell_slice (lab, r, k).n > 0)
        return complain_at (lab, r, k, MESSAGE_CSV_WIDTH,
                            arena_format (fault->arena, "this row has %zu cells, the headings "
                                          "are %zu", row->count, width), NULL, fault);
    struct axis *s = &lab->samples[lab->sample_count++];
    *s = (struct axis) { .index = r, .line = row->line, .spread = NOWHERE };
    s->column = names == NOWHERE ? 1 : cell_at (lab, r, names)->column;
    s->name = names == NOWHERE ? arena_format (arena, "%zu", lab->sample_count)
                               : name_in_row (lab, arena, r, naming);
  }
  lab->numbered = names == NOWHERE;
  return true;
}

bool
layout_by_sample (struct laboratory *lab, struct arena *arena, size_t heading,
                    struct fault *fault)
{
  lab->heading = heading;
  for (size_t r = 0; r < heading; r++)
    if (!layout_preface (lab, arena, r, fault))
      return false;
  if (layout_is_unit_row (lab, arena, heading + 1, NOWHERE))
    lab->unit_row = heading + 1;
  const size_t first = lab->unit_row != NOWHERE ? heading + 2 : heading + 1;
  const struct naming naming = find_naming (lab, arena, first);
  for (size_t k = 0; k < lab->rows[heading].count; k++)
    if (!read_column (lab, arena, k, first, &naming, fault))
      return false;
  return read_sample_rows (lab, arena, first, &naming, fault);
}

