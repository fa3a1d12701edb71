/* A card as text: the tab, headings, rows with dotted leaders, lines below.

          _/ raw \____________________________________ gas, dry, 5 parts
                          mol%        mass%      stated as
          CH4 ......   58.2000      34.0117      58.2

   Figures of a column are aligned at the decimal sign and the heading stands at it; a column
   without any figure is text, aligned at the left as is its heading.

   A card that may be parted and is wider than a line is set closer; if that does not do, its
   columns stand in bands one below the other, each with the names and a last column of text.    */
#include "config.h"
#include "report/report_private.h"

#include <string.h>

#include "result/result.h"
#include "support/memory.h"
#include "support/text.h"

enum { GAP = 3, CLOSE_GAP = 2 };

/* A column: room before and behind the decimal sign; of text: none before.  */
struct column { size_t before, behind; bool is_text; };

/* The columns of a card that stand side by side, by their number in it.  */
struct band { const struct column *columns; size_t name_width, gap, count, *which;
              double coverage; };

/* 5.00000 as 5, 0.100500 as 0.1005; a figure with an exponent stays.  */
static void
drop_end_zeros (struct text *figure)
{
  if (strchr (figure->bytes, '.') == NULL || strchr (figure->bytes, 'e') != NULL)
    return;
  while (figure->bytes[figure->length - 1] == '0')
    figure->bytes[--figure->length] = '\0';
  if (figure->bytes[figure->length - 1] == '.')
    figure->bytes[--figure->length] = '\0';
}

/* 404.7 ± 3.5 */
static void
uncertain_add (struct text *out, const struct report_style *style, double value, double spread)
{
  struct text behind;
  text_init (&behind);
  figure_write_uncertain (out, value, &behind, spread);
  text_add_char (out, ' ');
  text_add (out, plus_minus (style));
  text_add (out, behind.bytes);
  text_clear (&behind);
}

static const char *
cell_write (struct text *scratch, const struct report_style *style, const struct cell *cell,
            double coverage)
{
  const double spread = coverage > 0 ? coverage * cell->spread : cell->spread;
  text_empty (scratch);
  if (cell->text != NULL)
    shown_add (scratch, style, cell->text);
  else if (cell->is_number && figure_is_uncertain (cell->value, spread))
    uncertain_add (scratch, style, cell->value, spread);
  else if (cell->is_number) {
    figure_write (scratch, style, cell->value);
    if (cell->recorded)
      drop_end_zeros (scratch);
  }
  return scratch->length > 0 ? scratch->bytes : "";
}

/* Characters of a cell before the decimal sign of its column.  Text among figures is aligned like
   one if it opens with a figure, else it stands at the decimal sign's place.                    */
static size_t
cell_before (const struct column *column, const struct cell *cell, const char *shown)
{
  if (column->is_text)
    return 0;
  if (cell->text == NULL)
    return figure_whole (shown);
  return strspn (shown, "+-0123456789_");
}

static void
column_measure (struct column *column, struct text *scratch, const struct report_style *style,
                const struct card *card, size_t i)
{
  column->is_text = true;
  for (const struct card_row *r = card->rows; r != NULL; r = r->next)
    if (r->cells[i].text == NULL && r->cells[i].is_number)
      column->is_text = false;
  column->behind = shown_width (style, card->headings != NULL ? card->headings[i] : NULL);
  for (const struct card_row *r = card->rows; r != NULL; r = r->next) {
    const char *shown = cell_write (scratch, style, &r->cells[i], card->coverage);
    const size_t before = cell_before (column, &r->cells[i], shown);
    const size_t behind = utf8_characters (shown, strlen (shown)) - before;
    if (before > column->before)
      column->before = before;
    if (behind > column->behind)
      column->behind = behind;
  }
}

static bool
has_headings (const struct card *card)
{
  for (size_t i = 0; card->headings != NULL && i < card->columns; i++)
    if (card->headings[i] != NULL && *card->headings[i] != '\0')
      return true;
  return false;
}

static void
headings_add (struct text *out, const struct report_style *style, const struct card *card,
              const struct band *band)
{
  size_t blanks = MARGIN + band->name_width;
  for (size_t k = 0; k < band->count; k++) {
    const size_t i = band->which[k];
    const size_t used = shown_width (style, card->headings[i]);
    blanks += band->gap + band->columns[i].before;
    if (used > 0) {
      text_add_repeated (out, ' ', blanks);
      shown_add (out, style, card->headings[i]);
      blanks = 0;
    }
    blanks += band->columns[i].behind - used;
  }
  text_add_char (out, '\n');
}

/* A row, with the weight of a figure for its numbers; no blanks at the end.  A text in the last
   column is folded.                                                                             */
static void
row_add (struct text *out, const struct report_style *style, const struct card_row *row,
         const struct band *band)
{
  struct text scratch;
  text_init (&scratch);
  size_t blanks = 0;
  struct fold fold = fold_here (out);
  for (size_t k = 0; k < band->count; k++) {
    const struct column *column = &band->columns[band->which[k]];
    const struct cell *cell = &row->cells[band->which[k]];
    const char *shown = cell_write (&scratch, style, cell, band->coverage);
    const size_t before = cell_before (column, cell, shown);
    const size_t width = utf8_characters (shown, strlen (shown));
    blanks += band->gap + column->before - before;
    if (width > 0) {
      text_add_repeated (out, ' ', blanks);
      fold = fold_here (out);
      text_add (out, shown);
      blanks = 0;
    }
    blanks += column->behind + before - width;
  }
  fold_line (out, style, fold);
  text_add_char (out, '\n');
  text_clear (&scratch);
}

static size_t
name_column (const struct report_style *style, const struct card *card)
{
  size_t width = NAME_WIDTH;
  for (const struct card_row *r = card->rows; r != NULL; r = r->next) {
    const size_t needed = shown_width (style, r->name) + NAME_DOTS;
    if (needed > width)
      width = needed;
  }
  return width;
}

static void
band_add (struct text *out, const struct report_style *style, const struct card *card,
          const struct band *band)
{
  if (has_headings (card))
    headings_add (out, style, card, band);
  for (const struct card_row *r = card->rows; r != NULL; r = r->next) {
    text_add_repeated (out, ' ', MARGIN);
    leader_add (out, style, r->name, band->name_width);
    row_add (out, style, r, band);
  }
}

/* Of some columns side by side.  */
static size_t
columns_width (const struct band *band, size_t from, size_t to)
{
  size_t width = 0;
  for (size_t i = from; i < to; i++)
    width += band->gap + band->columns[i].before + band->columns[i].behind;
  return width;
}

/* As many columns as a line holds, one group of them at the least, then the last one.  */
static void
bands_add (struct text *out, const struct report_style *style, const struct card *card,
           struct band *band, size_t room)
{
  const bool repeats = band->columns[card->columns - 1].is_text;
  const size_t last = card->columns - repeats;
  const size_t tail = columns_width (band, last, card->columns);
  for (size_t from = 0, to; from < last; from = to) {
    to = from;
    do
      to += card->together < last - to ? card->together : last - to;
    while (to < last
           && columns_width (band, from, to + card->together < last ? to + card->together : last)
                + tail <= room);
    band->count = 0;
    for (size_t i = from; i < to; i++)
      band->which[band->count++] = i;
    if (repeats)
      band->which[band->count++] = last;
    band_add (out, style, card, band);
  }
}

static void
rows_add (struct text *out, const struct report_style *style, const struct card *card,
          struct column columns[], size_t which[])
{
  struct text scratch;
  text_init (&scratch);
  for (size_t i = 0; i < card->columns; i++) {
    column_measure (&columns[i], &scratch, style, card, i);
    which[i] = i;
  }
  text_clear (&scratch);
  struct band band = { columns, name_column (style, card), GAP, card->columns, which,
                       card->coverage };
  const size_t used = MARGIN + band.name_width;
  const size_t room = used < line_width (style) ? line_width (style) - used : 0;
  if (card->together > 0 && columns_width (&band, 0, card->columns) > room)
    band.gap = CLOSE_GAP;
  if (card->together > 0 && columns_width (&band, 0, card->columns) > room)
    bands_add (out, style, card, &band, room);
  else
    band_add (out, style, card, &band);
}

void
report_card (struct text *out, const struct report_style *style, const struct card *card)
{
  struct column *columns = memory_get (card->columns + 1, sizeof *columns);
  size_t *which = memory_get (card->columns + 1, sizeof *which);
  tab_add (out, style, card->title, card->kind);
  if (card->rows != NULL)
    rows_add (out, style, card, columns, which);
  for (const struct card_line *l = card->lines; l != NULL; l = l->next) {
    text_add_repeated (out, ' ', MARGIN);
    const struct fold fold = { out->length, MARGIN + 2 };
    shown_add (out, style, l->text);
    fold_line (out, style, fold);
    text_add_char (out, '\n');
  }
  memory_release (which);
  memory_release (columns);
}
