/* A sample in each row: components head the columns.  */
#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "support/arena.h"
#include "support/fault.h"

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
             size_t *date, struct fault *fault)
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
    if (lab->sample_column == NOWHERE) {
      lab->sample_column = column;
      return true;
    }
    break;
  case HEADING_DATE:
    *date = *date == NOWHERE ? column : *date;
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

/* A row of means or totals among the samples.  */
static bool
is_total_row (const struct laboratory *lab, struct arena *arena, size_t row, size_t names)
{
  return heading_read (arena, lab->words, cell_slice (lab, row, names)).kind == HEADING_TOTAL;
}

static bool
read_sample_rows (struct laboratory *lab, struct arena *arena, size_t first, struct fault *fault)
{
  const size_t names = lab->sample_column;
  const size_t width = lab->rows[lab->heading].count;
  for (size_t r = first; r < lab->row_count; r++) {
    const struct csv_row *row = &lab->rows[r];
    if (is_total_row (lab, arena, r, names == NOWHERE ? 0 : names)) {
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
                               : slice_text (arena, cell_slice (lab, r, names));
  }
  lab->numbered = names == NOWHERE;
  return true;
}

bool
layout_by_sample (struct laboratory *lab, struct arena *arena, size_t heading,
                    struct fault *fault)
{
  size_t date = NOWHERE;
  lab->heading = heading;
  for (size_t r = 0; r < heading; r++)
    if (!layout_preface (lab, arena, r, fault))
      return false;
  if (layout_is_unit_row (lab, arena, heading + 1, NOWHERE))
    lab->unit_row = heading + 1;
  const size_t first = lab->unit_row != NOWHERE ? heading + 2 : heading + 1;
  for (size_t k = 0; k < lab->rows[heading].count; k++)
    if (!read_column (lab, arena, k, first, &date, fault))
      return false;
  if (lab->sample_column == NOWHERE)
    lab->sample_column = date;
  return read_sample_rows (lab, arena, first, fault);
}

