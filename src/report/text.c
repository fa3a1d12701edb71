/* A result as text: figures aligned at the decimal sign, the basis on every row, what was taken
   and noted and warned of under them.

   Looks like this, with the six columns of the margin in front:

          3020.77  Nm3/h   dry    0 degC, 101.325 kPa, ideal-gas volume
          3990.51  kg/h    wet    water 3.44969 mol%
      ?   taken: Nm3 at 0 degC, 101.325 kPa                  (at 15 degC: +5.5 %)                */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <string.h>

#include "result/result.h"
#include "support/number.h"
#include "support/text.h"

enum { GAP_NAME = 3, GAP_UNIT = 2, GAP_MOISTURE = 3, GAP_BASIS = 4 };

/* Widths of the columns of one statement's rows; 0 where no row has anything there.  */
struct columns {
  bool named;
  size_t name, whole, fraction, unit, spread, moisture;
};

static size_t
larger (size_t a, size_t b)
{
  return a > b ? a : b;
}

static const char *
row_what (const struct answer *answer)
{
  return answer->what != NULL ? answer->what : "";
}

/* What stands in front of a row: what the user called it, else what it is.  */
static const char *
row_name (const struct answer *answer)
{
  return answer->label != NULL ? answer->label : row_what (answer);
}

/* Rows are named where they have labels, need it, or are about different things.  */
static bool
rows_are_named (const struct result *result)
{
  const char *first = row_what (result->answers);
  for (const struct answer *a = result->answers; a != NULL; a = a->next)
    if (a->label != NULL || a->named || strcmp (row_what (a), first) != 0)
      return true;
  return false;
}

const char *
plus_minus (const struct report_style *style)
{
  return style->unicode ? "\u00B1 " : "+/- ";
}

void
coverage_write (struct text *out, double coverage)
{
  if (coverage > 1) {
    text_add (out, " (k=");
    number_write_exact (out, coverage);
    text_add_char (out, ')');
  }
}

/* Writes the figures of all rows into FIGURES, each as "figure \0 spread \0", and measures.  */
static struct columns
measure (const struct report_style *style, const struct result *result, struct text *figures)
{
  struct columns wide = { .named = rows_are_named (result) };
  for (const struct answer *a = result->answers; a != NULL; a = a->next) {
    const size_t start = figures->length;
    const double expanded = a->coverage * a->uncertainty;
    const bool uncertain = figure_is_uncertain (a->value, expanded);
    if (uncertain) {
      figure_write_uncertain (figures, a->value, figures, expanded);
      coverage_write (figures, a->coverage);
    } else {
      figure_write (figures, style, a->value);
      text_add_char (figures, '\0');
    }
    text_add_char (figures, '\0');
    const char *figure = figures->bytes + start;
    const size_t length = strlen (figure), whole = figure_whole (figure);
    wide.whole = larger (wide.whole, whole);
    wide.fraction = larger (wide.fraction, length - whole);
    wide.unit = larger (wide.unit, shown_width (style, a->unit));
    if (uncertain)
      wide.spread = larger (wide.spread, strlen (figure + length + 1)
                                         + (style->unicode ? 2 : 4));
    wide.moisture = larger (wide.moisture, shown_width (style, a->moisture));
    if (wide.named)
      wide.name = larger (wide.name, shown_width (style, row_name (a)) + NAME_DOTS);
  }
  wide.name = wide.named ? larger (wide.name, NAME_WIDTH) : 0;
  return wide;
}

/* A row is put together from pieces; blanks are held back until a piece follows, so that none
   are left at its end.                                                                          */
struct row { struct text *out; const struct report_style *style; size_t blanks; };

static void
row_blanks (struct row *row)
{
  text_add_repeated (row->out, ' ', row->blanks);
  row->blanks = 0;
}

/* STRING in a column of WIDTH.  */
static void
row_add (struct row *row, const char *string, size_t width)
{
  const size_t used = shown_width (row->style, string);
  if (used > 0) {
    row_blanks (row);
    shown_add (row->out, row->style, string);
  }
  row->blanks += width > used ? width - used : 0;
}

/* The figure and, behind its unit, the spread; FIGURE points to "figure \0 spread \0".  */
static void
row_figure (struct row *row, const struct answer *answer, const char *figure,
            const struct columns *wide)
{
  const size_t length = strlen (figure), whole = figure_whole (figure);
  const char *spread = figure + length + 1;
  row->blanks += wide->whole - whole;
  row_blanks (row);
  weight_open (row->out, row->style, WEIGHT_BOLD);
  text_add_bytes (row->out, figure, length);
  weight_close (row->out, row->style);
  row->blanks = wide->fraction - (length - whole);
  if (wide->unit > 0) {
    row->blanks += GAP_UNIT;
    row_add (row, answer->unit, wide->unit);
  }
  if (wide->spread > 0) {
    row->blanks += 1;
    size_t used = 0;
    if (*spread != '\0') {
      row_blanks (row);
      text_add (row->out, plus_minus (row->style));
      text_add (row->out, spread);
      used = strlen (spread) + (row->style->unicode ? 2 : 4);
    }
    row->blanks += wide->spread - used;
  }
}

static void
row_basis (struct row *row, const struct answer *answer, const struct columns *wide)
{
  const bool based = answer->basis != NULL && *answer->basis != '\0';
  const bool moist = answer->moisture != NULL && *answer->moisture != '\0';
  if (!based && !moist)
    return;
  row->blanks += GAP_MOISTURE;
  if (!moist && wide->moisture > 0)
    row->blanks += wide->moisture + GAP_BASIS;
  row_blanks (row);
  weight_open (row->out, row->style, WEIGHT_DIM);
  struct fold fold = fold_here (row->out);
  if (moist) {
    row_add (row, answer->moisture, wide->moisture);
    row->blanks += GAP_BASIS;
  }
  if (based) {
    row_blanks (row);
    fold.hang = column_here (row->out);
    row_add (row, answer->basis, 0);
  }
  fold_line (row->out, row->style, fold);
  weight_close (row->out, row->style);
}

static void
answers_add (struct text *out, const struct report_style *style, const struct result *result)
{
  struct text figures;
  text_init (&figures);
  const struct columns wide = measure (style, result, &figures);
  const char *figure = figures.bytes;
  for (const struct answer *a = result->answers; a != NULL; a = a->next) {
    struct row row = { .out = out, .style = style };
    text_add_repeated (out, ' ', MARGIN);
    if (wide.named) {
      leader_add (out, style, row_name (a), wide.name);
      row.blanks = GAP_NAME;
    }
    const struct fold fold = { out->length, MARGIN + 4 };
    row_figure (&row, a, figure, &wide);
    fold_line (out, style, fold);         /* behind a name that is nearly a line */
    row_basis (&row, a, &wide);
    text_add_char (out, '\n');
    figure += strlen (figure) + 1;
    figure += strlen (figure) + 1;
  }
  text_clear (&figures);
}

/* The mark in the margin, always with its word.  */
static void
mark_add (struct text *out, const struct report_style *style, char mark, const char *word)
{
  text_add_repeated (out, ' ', MARGIN_MARK);
  if (mark == '!')
    weight_open (out, style, WEIGHT_REVERSE);
  text_add_char (out, mark);
  if (mark == '!')
    weight_close (out, style);
  text_add_repeated (out, ' ', MARGIN - MARGIN_MARK - 1);
  text_add (out, word);
}

static void
remarks_add (struct text *out, const struct report_style *style, const struct remark *remarks,
             char mark, const char *word)
{
  for (const struct remark *r = remarks; r != NULL; r = r->next) {
    mark_add (out, style, mark, word);
    const struct fold fold = fold_here (out);
    remark_sentence (out, r);
    shown_clean (out, style, fold.from);
    fold_line (out, style, fold);
    text_add_char (out, '\n');
  }
}

/* Behind which column the brackets stand: that of the longest sentence whose line has room for its
   bracket.                                                                                      */
static size_t
bracket_column (const struct report_style *style, const struct remark *remarks)
{
  size_t column = BRACKET_COLUMN;
  struct text line;
  text_init (&line);
  for (const struct remark *r = remarks; r != NULL; r = r->next) {
    text_empty (&line);
    if (!remark_bracket (&line, r))
      continue;
    const size_t bracket = shown_width (style, line.bytes);
    text_empty (&line);
    text_add (&line, "taken: ");
    remark_sentence (&line, r);
    const size_t used = shown_width (style, line.bytes) + 2;
    if (MARGIN + used + bracket <= line_width (style))
      column = larger (column, used);
  }
  text_clear (&line);
  return column;
}

/* The bracket at its column, or nearer where it would not fit, or on a line of its own.  */
static void
bracket_add (struct text *out, const struct report_style *style, const struct remark *remark,
             size_t column)
{
  struct text words;
  text_init (&words);
  if (remark_bracket (&words, remark)) {
    const size_t width = shown_width (style, words.bytes), used = column_here (out) + 2;
    const size_t room = line_width (style);
    column = used > column || column + width > room ? used : column;
    if (column + width > room) {
      text_add_char (out, '\n');
      text_add_repeated (out, ' ', MARGIN + strlen ("taken: "));
    } else
      text_add_repeated (out, ' ', column + 2 - used);
    shown_add (out, style, words.bytes);
  }
  text_clear (&words);
}

static void
taken_add (struct text *out, const struct report_style *style, const struct remark *remarks)
{
  const bool alone = remarks->next == NULL;
  const size_t column = alone ? BRACKET_COLUMN : bracket_column (style, remarks);
  for (const struct remark *r = remarks; r != NULL; r = r->next) {
    mark_add (out, style, '?', "taken: ");
    const struct fold fold = fold_here (out);
    remark_sentence (out, r);
    shown_clean (out, style, fold.from);
    fold_line (out, style, fold);
    bracket_add (out, style, r, MARGIN + column);
    text_add_char (out, '\n');
  }
}

void
report_text (struct text *out, const struct report_style *style, const struct result *result)
{
  if (result_is_empty (result))
    return;
  if (style->prompt)
    text_add_char (out, '\n');
  if (result->check != NULL)
    report_check (out, style, result);
  else if (result->answers != NULL)
    answers_add (out, style, result);
  if (result->balance != NULL)
    report_verdict (out, style, result->balance);
  for (const struct card *c = result->cards; c != NULL; c = c->next)
    report_card (out, style, c);
  if (result->trend != NULL)
    report_trend (out, style, result->trend);
  if (result->help != NULL)
    report_help (out, style, result->help);
  if (result->workings != NULL)
    report_workings (out, style, result->workings);
  if (result->taken != NULL)
    taken_add (out, style, result->taken);
  remarks_add (out, style, result->notes, '~', "note: ");
  remarks_add (out, style, result->cautions, '!', "caution: ");
}
