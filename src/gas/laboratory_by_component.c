/* A component in each row: samples head the columns, or one column has the only one.  */
#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "support/arena.h"
#include "support/fault.h"

/* Is row R, above the first component, the one with the headings?  */
static bool
is_heading (const struct laboratory *lab, struct arena *arena, size_t r, enum heading_kind kind)
{
  if (kind == HEADING_NAMES || kind == HEADING_SAMPLE || kind == HEADING_EMPTY)
    return true;
  if (kind == HEADING_DATE || kind == HEADING_UNIT)
    return false;
  for (size_t k = lab->names + 1; k < lab->rows[r].count; k++) {
    enum heading_kind over = heading_read (arena, lab->words, cell_slice (lab, r, k)).kind;
    if (over == HEADING_AMOUNT || over == HEADING_SPREAD || over == HEADING_UNIT)
      return true;
  }
  return false;
}

/* What stands at the head of the names of components, above the first of them: looked for from
   below, and what is left told from above.                                                      */
static bool
find_headings (struct laboratory *lab, struct arena *arena, size_t first, struct fault *fault)
{
  for (size_t r = first; r-- > 0 && lab->heading == NOWHERE;) {
    enum heading_kind kind
      = heading_read (arena, lab->words, cell_slice (lab, r, lab->names)).kind;
    if (lab->unit_row == NOWHERE && layout_is_unit_row (lab, arena, r, lab->names)
        && (kind == HEADING_UNIT || kind == HEADING_EMPTY) && r > 0
        && lab->rows[r - 1].count > lab->names + 1)
      lab->unit_row = r;
    else if (is_heading (lab, arena, r, kind))
      lab->heading = r;
  }
  for (size_t r = 0; r < first; r++)
    if (r != lab->heading && r != lab->unit_row && !layout_preface (lab, arena, r, fault))
      return false;
  return true;
}

/* Without headings: name, amount, uncertainty, as they stand; a column of units is one.  */
static bool
columns_by_place (struct laboratory *lab, struct arena *arena, size_t first)
{
  size_t figures = 0;
  for (size_t k = 0; k < lab->rows[first].count; k++) {
    struct slice s = cell_slice (lab, first, k);
    struct heading h = heading_read (arena, lab->words, s);
    if (k == lab->names)
      continue;
    if (h.kind == HEADING_AMOUNT && h.unit != NULL)
      lab->unit_column = k;
    else if (amount_looks (s) && figures++ == 0)
      lab->samples[lab->sample_count++] = (struct axis) { .name = "", .index = k,
                                                          .spread = NOWHERE,
                                                          .line = lab->rows[first].line,
                                                          .column = 1 };
    else if (amount_looks (s) && figures == 2)
      lab->samples[0].spread = k;
    else
      pass_over (lab, arena, arena_format (arena, "column %zu", k + 1));
  }
  return true;
}

/* A column of figures headed by their unit alone that is not the one asked for.  */
static bool
is_not_asked (const struct laboratory *lab, const struct heading *h)
{
  const struct laboratory_asked *asked = lab->asked;
  if (h->kind != HEADING_AMOUNT)
    return false;
  return (asked->unit != NULL && h->unit != NULL && h->unit != asked->unit)
         || (asked->moisture != LABORATORY_UNSAID && h->moisture != LABORATORY_UNSAID
             && h->moisture != asked->moisture);
}

/* A column of figures headed by their unit alone, or by a sample's name.  */
static void
amount_column (struct laboratory *lab, struct arena *arena, size_t column, struct heading h)
{
  if (h.kind == HEADING_AMOUNT)
    h.name = (struct slice) { NULL, 0 };
  struct axis *s = &lab->samples[lab->sample_count++];
  *s = layout_axis (lab, arena, lab->heading, column, &h);
  s->index = column;
}

/* Two columns without names of samples: two units, or dry and wet, of one sample.  */
static bool
one_of_two (const struct laboratory *lab, size_t column, const struct heading *h,
            struct fault *fault)
{
  if (h->kind != HEADING_AMOUNT || lab->sample_count == 0
      || *lab->samples[lab->sample_count - 1].name != '\0')
    return true;
  const struct axis *before = &lab->samples[lab->sample_count - 1];
  if (h->moisture != LABORATORY_UNSAID && h->unit == before->unit)
    return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_MOISTURE,
                        "there are columns for dry and for wet gas",
                        "say which behind the file's name: dry, or wet", fault);
  if (h->unit != NULL && before->unit != NULL && h->unit != before->unit)
    return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_UNIT,
                        arena_format (fault->arena, "the figures in %s or those in %s",
                                      before->unit_text, h->unit_text),
                        arena_format (fault->arena, "say which behind the file's name: %s",
                                      before->unit_text), fault);
  return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_SAMPLE,
                      "two columns of figures, and neither has a sample's name",
                      "head each column with the name of its sample", fault);
}

/* Uncertainties belong to the sample they name, or to the figures before them.  */
static bool
spread_of_sample (struct laboratory *lab, size_t column, const struct heading *h,
                  struct fault *fault)
{
  for (size_t i = lab->sample_count; i-- > 0;) {
    struct axis *s = &lab->samples[i];
    if (h->name.n > 0 && !slice_is (h->name, s->name))
      continue;
    if (s->spread != NOWHERE)
      return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_TWICE, "the uncertainty",
                          NULL, fault);
    layout_take_spread (s, column, h);
    return true;
  }
  return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_LAYOUT,
                      "no figures stand before these uncertainties",
                      "put them behind the column they belong to", fault);
}

/* May the column hold the figures of a sample?  Its heading may be any word but those known to
   head other things; some of its cells look like figures, or all could be one.                  */
static bool
is_amount_column (const struct laboratory *lab, size_t column, size_t first,
                  enum heading_kind kind)
{
  if (kind == HEADING_OTHER_WORD || kind == HEADING_TOTAL || kind == HEADING_DATE
      || kind == HEADING_NAMES || kind == HEADING_UNIT)
    return false;
  if (kind == HEADING_EMPTY)
    return layout_column_has_figures (lab, column, first);
  for (size_t r = first; r < lab->row_count; r++)
    if (amount_looks (cell_slice (lab, r, column)))
      return true;
  return false;
}

static bool
columns_by_heading (struct laboratory *lab, struct arena *arena, size_t first,
                    struct fault *fault)
{
  struct heading other_heading = { .kind = HEADING_EMPTY };
  size_t other = NOWHERE;
  for (size_t k = 0; k < lab->rows[lab->heading].count; k++) {
    struct slice text = cell_slice (lab, lab->heading, k);
    struct heading h = heading_read (arena, lab->words, text);
    if (k == lab->names)
      continue;
    if (h.kind == HEADING_UNIT && h.unit == NULL) {
      lab->unit_column = k;
      continue;
    }
    layout_add_unit_row (lab, arena, k, &h);
    if (h.kind == HEADING_SPREAD) {
      if (!spread_of_sample (lab, k, &h, fault))
        return false;
      continue;
    }
    if (!is_amount_column (lab, k, first, h.kind)) {
      if (text.n > 0)
        pass_over (lab, arena, arena_format (arena, "column '%s'", slice_text (arena, text)));
      continue;
    }
    if (is_not_asked (lab, &h)) {
      pass_over (lab, arena, arena_format (arena, "column '%s'", slice_text (arena, text)));
      other = k;
      other_heading = h;
      continue;
    }
    if (!one_of_two (lab, k, &h, fault))
      return false;
    amount_column (lab, arena, k, h);
  }
  if (lab->sample_count == 0 && other != NOWHERE)       /* what contradicts is told later */
    amount_column (lab, arena, other, other_heading);
  return true;
}

static bool
row_has_figures (const struct laboratory *lab, size_t row)
{
  for (size_t i = 0; i < lab->sample_count; i++)
    if (amount_looks (cell_slice (lab, row, lab->samples[i].index)))
      return true;
  return false;
}

static bool
read_component_row (struct laboratory *lab, struct arena *arena, size_t row, struct fault *fault)
{
  struct slice text = cell_slice (lab, row, lab->names);
  struct heading h = heading_read (arena, lab->words, text);
  const char *what = arena_format (arena, "line %d%s%s%s", lab->rows[row].line,
                                   text.n > 0 ? " (" : "", slice_text (arena, text),
                                   text.n > 0 ? ")" : "");
  if (h.kind != HEADING_PART) {
    if (row_has_figures (lab, row) && h.kind == HEADING_EMPTY)
      return complain_at (lab, row, lab->names, MESSAGE_LABORATORY_NAME,
                          "these figures have no component", "name it, or take the row out",
                          fault);
    if (row_has_figures (lab, row)
        && (h.kind == HEADING_UNKNOWN || h.kind == HEADING_AMOUNT || h.kind == HEADING_SPREAD))
      return layout_name_refused (lab, row, lab->names, text, fault);
    pass_over (lab, arena, what);
    return true;
  }
  if (!layout_name_holds (lab, row, lab->names, h.name, fault)
      || !layout_name_is_new (lab, row, lab->names, h.name, fault)
      || !layout_moisture (lab, h.moisture, row, lab->names, fault))
    return false;
  struct axis *c = &lab->components[lab->component_count++];
  *c = layout_axis (lab, arena, row, lab->names, &h);
  c->index = row;
  if (lab->unit_column != NOWHERE) {
    struct slice unit = cell_slice (lab, row, lab->unit_column);
    struct heading u = heading_read (arena, lab->words, unit);
    if (unit.n > 0 && (u.kind != HEADING_AMOUNT || (u.unit == NULL && !u.percent)))
      return complain_at (lab, row, lab->unit_column, MESSAGE_LABORATORY_UNIT,
                          arena_format (fault->arena, "no unit of an amount is called '%s'",
                                        slice_text (fault->arena, unit)),
                          "mol%, mass%, vol%, ppm, mg/Nm3 ...", fault);
    c->unit = u.unit;
    c->unit_text = u.unit_text;
    c->percent = u.percent;
    return layout_moisture (lab, u.moisture, row, lab->unit_column, fault);
  }
  return true;
}

bool
layout_by_component (struct laboratory *lab, struct arena *arena, size_t names,
                       struct fault *fault)
{
  size_t first = 0;
  lab->by_rows = true;
  lab->names = names;
  while (heading_read (arena, lab->words, cell_slice (lab, first, names)).kind
           != HEADING_PART
         || !slice_is_component (lab->words, heading_read (arena, lab->words,
                                                           cell_slice (lab, first, names))
                                               .name))
    first++;
  /* Figures beside a name nobody knows are no headings: the name is misspelt.  */
  while (first > 0
         && heading_read (arena, lab->words, cell_slice (lab, first - 1, names)).kind
              == HEADING_UNKNOWN
         && amount_looks (cell_slice (lab, first - 1, names + 1)))
    first--;
  if (!find_headings (lab, arena, first, fault))
    return false;
  if (lab->heading != NOWHERE && layout_is_long (lab, arena, first))
    return layout_long (lab, arena, first, fault);
  if (!(lab->heading == NOWHERE ? columns_by_place (lab, arena, first)
                                : columns_by_heading (lab, arena, first, fault)))
    return false;
  for (size_t i = 0; i < lab->sample_count; i++) {
    struct heading h = { .kind = HEADING_EMPTY };
    if (lab->heading != NOWHERE)
      h = heading_read (arena, lab->words, cell_slice (lab, lab->heading, lab->samples[i].index));
    layout_add_unit_row (lab, arena, lab->samples[i].index, &h);
    if (!layout_moisture (lab, h.moisture, lab->heading == NOWHERE ? first : lab->heading,
                        lab->samples[i].index, fault))
      return false;
  }
  for (size_t r = first; r < lab->row_count; r++)
    if (!read_component_row (lab, arena, r, fault))
      return false;
  return true;
}

