/* A trend as text: a row a sample with its bar, then what all have together.

   Looks like this, with the six columns of the margin in front:

          _/ wobbe of lab \________________________ 7 samples of week.csv
                          MJ/m3
          D-101 ......   22.861 ± 0.092   ######################
          D-104 ......   20.689 ± 0.088   |                          outlier
          all 7: mean 22.5122  .  standard deviation 0.814132  .  median 22.7391
          from 20.6889 (D-104) to 23.0063 (D-103)

   Bars run from the least figure to the greatest, in eighths of a character where the screen has
   them.                                                                                         */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <string.h>

#include "result/trend.h"
#include "support/number.h"
#include "support/text.h"

enum { GAP = 3, BAR_WIDTH = 24 };

struct widths { size_t name, whole, fraction, spread; };

static size_t
larger (size_t a, size_t b)
{
  return a > b ? a : b;
}

/* The figure of a row into FIGURE, its uncertainty (perhaps nothing) into SPREAD.  */
static void
row_write (const struct report_style *style, const struct trend *trend,
           const struct trend_row *row, struct text *figure, struct text *spread)
{
  text_empty (figure);
  text_empty (spread);
  const double u = trend->coverage * row->uncertainty;
  if (figure_is_uncertain (row->value, u))
    figure_write_uncertain (figure, row->value, spread, u);
  else
    figure_write (figure, style, row->value);
}

static struct widths
measure (const struct report_style *style, const struct trend *trend)
{
  struct widths wide = { NAME_WIDTH, 0, 0, 0 };
  struct text figure, spread;
  text_init (&figure);
  text_init (&spread);
  for (size_t i = 0; i < trend->count; i++) {
    row_write (style, trend, &trend->rows[i], &figure, &spread);
    const size_t whole = figure_whole (figure.bytes);
    wide.name = larger (wide.name, shown_width (style, trend->rows[i].name) + NAME_DOTS);
    wide.whole = larger (wide.whole, whole);
    wide.fraction = larger (wide.fraction, figure.length - whole);
    if (spread.length > 0)
      wide.spread = larger (wide.spread, spread.length + (style->unicode ? 2 : 4));
  }
  text_clear (&figure);
  text_clear (&spread);
  return wide;
}

/* A bar of SHARE (0 to 1) of the width; returns its characters.  */
static size_t
bar_add (struct text *out, const struct report_style *style, double share)
{
  static const char *const eighths[] = { "", "\u258F", "\u258E", "\u258D", "\u258C", "\u258B",
                                         "\u258A", "\u2589" };
  const size_t parts = (size_t) lround (share * BAR_WIDTH * 8);
  const size_t whole = style->unicode ? parts / 8 : (parts + 4) / 8;
  const size_t rest = style->unicode ? parts % 8 : 0;
  if (whole + (rest > 0) == 0) {
    text_add (out, style->unicode ? eighths[1] : "|");
    return 1;
  }
  for (size_t i = 0; i < whole; i++)
    text_add (out, style->unicode ? "\u2588" : "#");
  text_add (out, eighths[rest]);
  return whole + (rest > 0);
}

/* Does Hampel's identifier mark the row?  */
static bool
is_far (const struct trend *trend, const struct trend_row *row)
{
  return trend->limit > 0 && fabs (row->apart) > trend->limit;
}

/* What stands behind a row's bar, parted by commas: how it stands to the others, its basis.  */
static void
behind_add (struct text *out, const struct report_style *style, const struct trend *trend,
            const struct trend_row *row)
{
  static const char *const standings[] = { NULL, "straggler", "outlier" };
  const char *const words[] = { standings[row->standing],
                                is_far (trend, row) ? "far from the median" : NULL,
                                row->moisture, row->basis };
  bool any = false;
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (words[i] != NULL) {
      text_add (out, any ? (i == 2 || (i == 3 && words[2] == NULL) ? "   " : ", ") : "");
      shown_add (out, style, words[i]);
      any = true;
    }
}

static void
row_add (struct text *out, const struct report_style *style, const struct trend *trend,
         const struct trend_row *row, const struct widths *wide)
{
  struct text figure, spread;
  text_init (&figure);
  text_init (&spread);
  row_write (style, trend, row, &figure, &spread);
  const size_t whole = figure_whole (figure.bytes);
  text_add_repeated (out, ' ', MARGIN);
  leader_add (out, style, row->name, wide->name);
  text_add_repeated (out, ' ', GAP + wide->whole - whole);
  text_add (out, figure.bytes);
  struct fold fold = fold_here (out);
  if (!isfinite (row->value)) {
    text_add_repeated (out, ' ', GAP);
    fold = fold_here (out);
    shown_add (out, style, row->why);
  } else {
    text_add_repeated (out, ' ', wide->fraction - (figure.length - whole));
    size_t used = 0;
    if (spread.length > 0) {
      text_add_char (out, ' ');
      text_add (out, plus_minus (style));
      text_add (out, spread.bytes);
      used = 1 + spread.length + (style->unicode ? 2 : 4);
    }
    text_add_repeated (out, ' ', GAP + (wide->spread > 0 ? wide->spread + 1 : 0) - used);
    const double range = trend->all.greatest - trend->all.least;
    const size_t bar = bar_add (out, style,
                                range > 0 ? (row->value - trend->all.least) / range : 1);
    if (row->standing != TREND_USUAL || is_far (trend, row) || row->moisture != NULL
        || row->basis != NULL)
      text_add_repeated (out, ' ', BAR_WIDTH - bar + GAP);
    fold = fold_here (out);
    behind_add (out, style, trend, row);
  }
  fold_line (out, style, fold);
  text_add_char (out, '\n');
  text_clear (&figure);
  text_clear (&spread);
}

static void
figure_add (struct text *out, const struct report_style *style, const char *before, double value)
{
  if (!isfinite (value))
    return;
  text_add (out, before);
  figure_write (out, style, value);
}

static void
numbers_add (struct text *out, const struct report_style *style, const char *before,
             const struct trend_numbers *n, const char *behind)
{
  text_add_repeated (out, ' ', MARGIN);
  const struct fold fold = { out->length, MARGIN + 2 };
  text_add_format (out, "%s%zu%s", before, n->count, behind);
  figure_add (out, style, ": mean ", n->mean);
  figure_add (out, style, "  .  standard deviation ", n->standard_deviation);
  figure_add (out, style, "  .  median ", n->median);
  fold_line (out, style, fold);
  text_add_char (out, '\n');
}

static void
range_add (struct text *out, const struct report_style *style, const struct trend *trend)
{
  const struct trend_numbers *n = &trend->all;
  text_add_repeated (out, ' ', MARGIN);
  struct fold fold = { out->length, MARGIN + 2 };
  figure_add (out, style, "from ", n->least);
  text_add (out, " (");
  shown_add (out, style, n->least_of);
  figure_add (out, style, ") to ", n->greatest);
  text_add (out, " (");
  shown_add (out, style, n->greatest_of);
  text_add_char (out, ')');
  fold_line (out, style, fold);
  text_add_char (out, '\n');
  if (trend->tested) {
    text_add_repeated (out, ' ', MARGIN);
    fold.from = out->length;
    figure_add (out, style, "Grubbs' test: G ", trend->G);
    text_add (out, " of ");
    shown_add (out, style, trend->tested_of);
    figure_add (out, style, "; straggler above ", trend->straggler);
    figure_add (out, style, " (5 %), outlier above ", trend->outlier);
    text_add (out, " (1 %)");
    fold_line (out, style, fold);
    text_add_char (out, '\n');
  }
}

/* What Hampel's identifier says, or why it says nothing.  */
static void
robust_add (struct text *out, const struct report_style *style, const struct trend *trend)
{
  const struct fold fold = { out->length, MARGIN + 2 };
  text_add_repeated (out, ' ', MARGIN);
  if (trend->limit > 0) {
    figure_add (out, style, "Hampel's identifier: robust deviation ", trend->all.robust_deviation);
    text_add_format (out, "; %zu of %zu beyond ", trend->beyond, trend->all.count);
    number_write_exact (out, trend->limit);
    text_add (out, " of it from the median; farthest ");
    shown_add (out, style, trend->farthest_of);
    text_add (out, ", ");
    number_write (out, trend->farthest, 3);
  } else if (trend->all.count < TREND_FEWEST)
    text_add (out, "fewer than 5 figures: no test tells well which of them is wrong");
  else
    text_add (out, "more than half are the same: no robust deviation, no identifier");
  fold_line (out, style, fold);
  text_add_char (out, '\n');
}

static void
basis_add (struct text *out, const struct report_style *style, const struct trend *trend)
{
  if (trend->moisture == NULL && trend->basis == NULL)
    return;
  text_add_repeated (out, ' ', MARGIN);
  const struct fold fold = { out->length, MARGIN + 2 };
  shown_add (out, style, trend->moisture);
  if (trend->moisture != NULL && trend->basis != NULL)
    text_add (out, ", ");
  shown_add (out, style, trend->basis);
  fold_line (out, style, fold);
  text_add_char (out, '\n');
}

void
report_trend (struct text *out, const struct report_style *style, const struct trend *trend)
{
  const struct widths wide = measure (style, trend);
  tab_add (out, style, trend->what, trend->over);
  if (*trend->unit != '\0') {
    text_add_repeated (out, ' ', MARGIN + wide.name + GAP + wide.whole);
    shown_add (out, style, trend->unit);
    if (trend->coverage > 1 && wide.spread > 0) {
      text_add (out, "   (k=");
      number_write_exact (out, trend->coverage);
      text_add_char (out, ')');
    }
    text_add_char (out, '\n');
  }
  for (size_t i = 0; i < trend->count; i++)
    row_add (out, style, trend, &trend->rows[i], &wide);
  numbers_add (out, style, "all ", &trend->all, "");
  range_add (out, style, trend);
  robust_add (out, style, trend);
  if (trend->outliers > 0)
    numbers_add (out, style, "", &trend->without, " without outliers");
  basis_add (out, style, trend);
}
