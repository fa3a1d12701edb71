/* The verdict of a check as text: what was stated and what became of it, the computed figure, the
   readings that fit, what is ruled out, and what would have to be true instead.

   Looks like this, with the six columns of the margin in front:

          3380 Nm3/h   1 READING FITS   74.0133 Nm3/h (2.1 %) below the computed figure; good to 5
          computed .....   3454.01  Nm3/h   dry, 0 degC, 101.325 kPa, ideal-gas volume
          fits .........   3379.5   Nm3/h   scf at 70 degF, 14.7 psia (mfc-70F)                  */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <string.h>

#include "result/check_verdict.h"
#include "result/result.h"

/* Nobody argues about less.  */
#define WORTH_SAYING 5e-5
/* Figures nearer than this differ by the arithmetic alone.  */
#define ROUNDING 1e-12

enum { GAP = 3, GAP_UNIT = 2, LABEL_WIDTH = 13,
       FITS_TOO = 5 /* readings shown beside a figure that holds as written, usual ones first */ };

/* The figures of all rows stand under each other.  */
struct column { size_t label, whole, fraction, unit; };

static size_t
larger (size_t a, size_t b)
{
  return a > b ? a : b;
}

static void
measure_one (const struct report_style *style, struct column *column, double value,
             const char *unit)
{
  struct text figure;
  text_init (&figure);
  figure_write (&figure, style, value);
  const size_t whole = figure_whole (figure.bytes);
  column->whole = larger (column->whole, whole);
  column->fraction = larger (column->fraction, figure.length - whole);
  column->unit = larger (column->unit, shown_width (style, unit));
  text_clear (&figure);
}

/* What the user called a figure of a sheet, else as it was stated.  */
static const char *
figure_label (const struct check_figure *f)
{
  return f->name != NULL ? f->name : f->stated;
}

static struct column
measure (const struct report_style *style, const struct check_verdict *v)
{
  struct column column = { .label = LABEL_WIDTH };
  if (v->figures != NULL) {
    for (const struct check_figure *f = v->figures; f != NULL; f = f->next) {
      measure_one (style, &column, f->computed, f->unit);
      column.label = larger (column.label, shown_width (style, figure_label (f)) + NAME_DOTS);
    }
    return column;
  }
  measure_one (style, &column, v->computed, v->unit);
  for (const struct check_reading *r = v->readings; r != NULL; r = r->next)
    measure_one (style, &column, r->value, r->unit);
  for (const struct check_reading *r = v->ruled_out; r != NULL; r = r->next)
    measure_one (style, &column, r->value, r->unit);
  for (const struct check_need *n = v->needs; n != NULL; n = n->next)
    if (isfinite (n->value))
      measure_one (style, &column, n->value, n->unit);
  return column;
}

/* A row up to what is said of it.  LABEL: null, if the row above has the same.  */
static void
row_open (struct text *out, const struct report_style *style, const struct column *column,
          const char *label)
{
  text_add_repeated (out, ' ', MARGIN);
  if (label != NULL)
    leader_add (out, style, label, column->label);
  else
    text_add_repeated (out, ' ', column->label);
}

static void
row_figure (struct text *out, const struct report_style *style, const struct column *column,
            double value, const char *unit)
{
  struct text figure;
  text_init (&figure);
  figure_write (&figure, style, value);
  const size_t whole = figure_whole (figure.bytes);
  text_add_repeated (out, ' ', GAP + column->whole - whole);
  text_add (out, figure.bytes);
  text_add_repeated (out, ' ', column->fraction - (figure.length - whole) + GAP_UNIT);
  shown_add (out, style, unit);
  text_add_repeated (out, ' ', column->unit - shown_width (style, unit) + GAP);
  text_clear (&figure);
}

/* Folds what may be of the line, and ends it.  */
static void
line_end (struct text *out, const struct report_style *style, struct fold fold)
{
  fold_line (out, style, fold);
  while (out->length > 0 && out->bytes[out->length - 1] == ' ')
    out->bytes[--out->length] = '\0';
  text_add_char (out, '\n');
}

static void
percent_add (struct text *out, double ratio)
{
  const size_t start = out->length;
  effect_write (out, fabs (ratio));
  /* Without its sign: the sentence says above or below.  */
  const char *figure = out->bytes + start;
  if (*figure == '+') {
    memmove (out->bytes + start, figure + 1, out->length - start);
    out->length--;
  }
}

static void
outcome_add (struct text *out, const struct check_verdict *v)
{
  if (v->figures != NULL) {
    text_add_format (out, "%zu OF %zu AGREE", v->agreeing, v->figure_count);
    return;
  }
  switch (v->outcome) {
  case CHECK_HOLDS:
    text_add (out, "HOLDS");
    break;
  case CHECK_READINGS:
    text_add_format (out, v->reading_count == 1 ? "1 READING FITS" : "%zu READINGS FIT",
                     v->reading_count);
    break;
  case CHECK_UNEXPLAINED:
    text_add (out, "NOTHING EXPLAINS IT");
    break;
  }
}

static void
distance_add (struct text *out, const struct report_style *style,
              const struct check_verdict *v)
{
  figure_plain (out, style, fabs (v->difference));
  text_add_char (out, ' ');
  shown_add (out, style, v->unit);
  if (isfinite (v->deviation)) {
    text_add (out, " (");
    percent_add (out, v->deviation);
    text_add (out, ")");
  }
  text_add_format (out, " %s the computed figure", v->difference < 0 ? "below" : "above");
}

static void
difference_add (struct text *out, const struct report_style *style, const struct check_verdict *v,
                const struct answer *a)
{
  const bool uncertain = a != NULL && figure_is_uncertain (a->value, a->uncertainty);
  if (fabs (v->difference) <= ROUNDING * fabs (v->computed))
    text_add (out, "just the computed figure");
  else
    distance_add (out, style, v);
  text_add (out, "; good to ");
  figure_plain (out, style, v->limit);
  text_add (out, v->by_digits ? " by its digits" : " by its uncertainty");
  if (uncertain)
    text_add (out, v->by_digits ? " and the uncertainty of the computed figure"
                                : " and that of the computed figure");
}

/* How many figures of a sheet agree, under what, and which of them does not.  */
static void
agreement_add (struct text *out, const struct report_style *style, const struct check_verdict *v)
{
  const struct check_figure *alone = NULL;
  for (const struct check_figure *f = v->figures; f != NULL; f = f->next)
    alone = f->holds ? alone : f;
  if (v->outcome == CHECK_HOLDS)
    text_add (out, "as written");
  else if (v->outcome == CHECK_READINGS)
    text_add_format (out, v->reading_count == 1 ? "under one reading"
                                                : "under any of %zu readings", v->reading_count);
  else
    text_add (out, "no reading makes more of them agree");
  if (alone != NULL && v->figure_count - v->agreeing == 1) {
    text_add (out, "; ");
    shown_add (out, style, figure_label (alone));
    text_add (out, " stands alone");
  }
}

static void
sheet_add (struct text *out, const struct report_style *style, const struct check_verdict *v,
           const struct column *column)
{
  for (const struct check_figure *f = v->figures; f != NULL; f = f->next) {
    row_open (out, style, column, figure_label (f));
    row_figure (out, style, column, f->computed, f->unit);
    const struct fold fold = fold_here (out);
    text_add (out, f->holds ? f->as_written ? "agrees as written" : "agrees"
                            : "stands alone");
    text_add (out, ", stated ");
    shown_add (out, style, f->stated);
    if (isfinite (f->deviation) && fabs (f->deviation) >= WORTH_SAYING) {
      text_add (out, " (");
      effect_write (out, f->deviation);
      text_add (out, ")");
    }
    line_end (out, style, fold);
  }
  for (const struct check_reading *r = v->readings; r != NULL; r = r->next) {
    row_open (out, style, column, r == v->readings ? "reads as" : NULL);
    text_add_repeated (out, ' ', GAP);
    const struct fold fold = fold_here (out);
    shown_add (out, style, r->reading);
    line_end (out, style, fold);
  }
}

static void
computed_add (struct text *out, const struct report_style *style, const struct check_verdict *v,
              const struct answer *a, const struct column *column)
{
  row_open (out, style, column, "computed");
  row_figure (out, style, column, v->computed, v->unit);
  const struct fold fold = fold_here (out);
  weight_open (out, style, WEIGHT_DIM);
  const bool moist = a != NULL && a->moisture != NULL && *a->moisture != '\0';
  const bool based = a != NULL && a->basis != NULL && *a->basis != '\0';
  if (moist)
    shown_add (out, style, a->moisture);
  if (moist && based)
    text_add (out, ", ");
  if (based)
    shown_add (out, style, a->basis);
  weight_close (out, style);
  if (a != NULL && figure_is_uncertain (a->value, a->uncertainty)) {
    struct text figure;
    text_init (&figure);
    text_add (out, moist || based ? ", " : "");
    text_add (out, plus_minus (style));
    figure_write_uncertain (&figure, a->value, out, a->coverage * a->uncertainty);
    coverage_write (out, a->coverage);
    text_clear (&figure);
  }
  line_end (out, style, fold);
}

static void
readings_add (struct text *out, const struct report_style *style, const struct check_verdict *v,
              const struct column *column)
{
  const bool holds = v->outcome == CHECK_HOLDS;
  size_t shown = 0;
  for (const struct check_reading *r = v->readings; r != NULL; r = r->next, shown++) {
    row_open (out, style, column, r != v->readings ? NULL : holds ? "fits too" : "fits");
    if (holds && shown == FITS_TOO) {
      text_add_repeated (out, ' ', GAP);
      const struct fold fold = fold_here (out);
      text_add_format (out, "and %zu more, less usual or farther off; --format json has them all",
                       v->reading_count - shown);
      line_end (out, style, fold);
      return;
    }
    row_figure (out, style, column, r->value, r->unit);
    const struct fold fold = fold_here (out);
    shown_add (out, style, r->reading);
    line_end (out, style, fold);
  }
}

static void
ruled_out_add (struct text *out, const struct report_style *style, const struct check_verdict *v,
               const struct column *column)
{
  for (const struct check_reading *r = v->ruled_out; r != NULL; r = r->next) {
    row_open (out, style, column, r == v->ruled_out ? "ruled out" : NULL);
    row_figure (out, style, column, r->value, r->unit);
    const struct fold fold = fold_here (out);
    shown_add (out, style, r->reading);
    if (isfinite (r->deviation)) {
      const double over = 1 / (1 + r->deviation) - 1;
      text_add (out, ": ");
      percent_add (out, over);
      text_add (out, over > 0 ? " above the claim" : " below the claim");
    }
    line_end (out, style, fold);
  }
}

static void
needs_add (struct text *out, const struct report_style *style, const struct check_verdict *v,
           const struct column *column)
{
  for (const struct check_need *n = v->needs; n != NULL; n = n->next) {
    row_open (out, style, column, n == v->needs ? "instead" : NULL);
    if (isfinite (n->value))
      row_figure (out, style, column, n->value, n->unit);
    else
      text_add_repeated (out, ' ', GAP);
    const struct fold fold = fold_here (out);
    if (isfinite (n->value)) {
      text_add (out, "would have to be the ");
      shown_add (out, style, n->what);
    } else {
      text_add (out, "no ");
      shown_add (out, style, n->what);
      text_add (out, " from ");
      figure_plain (out, style, n->least);
      text_add (out, " to ");
      figure_plain (out, style, n->greatest);
      text_add_char (out, ' ');
      shown_add (out, style, n->unit);
      text_add (out, *n->unit ? " does it" : "does it");
    }
    line_end (out, style, fold);
  }
}

void
report_check (struct text *out, const struct report_style *style, const struct result *result)
{
  const struct check_verdict *v = result->check;
  const struct column column = measure (style, v);
  text_add_repeated (out, ' ', MARGIN);
  weight_open (out, style, WEIGHT_BOLD);
  shown_add (out, style, v->stated);
  text_add_repeated (out, ' ', GAP);
  outcome_add (out, v);
  weight_close (out, style);
  text_add_repeated (out, ' ', GAP);
  const struct fold fold = fold_here (out);
  if (v->figures != NULL)
    agreement_add (out, style, v);
  else
    difference_add (out, style, v, result->answers);
  line_end (out, style, fold);
  if (v->figures != NULL) {
    sheet_add (out, style, v, &column);
    return;
  }
  computed_add (out, style, v, result->answers, &column);
  readings_add (out, style, v, &column);
  ruled_out_add (out, style, v, &column);
  needs_add (out, style, v, &column);
}
