/* Results as CSV (RFC 4180, UTF-8, lines end in LF), one row a figure:

     statement,what,label,value,unit,uncertainty,moisture,basis,taken,notes,cautions

   The heading row comes once.  Remarks stand on every row of their statement, several in one
   field parted by " | ", so that a row can be cut out.  Numbers carry every digit; a figure nobody
   could compute is empty.

   What has no unit column of its own keeps this form:
   - a card: one row a cell; `what` is "ROW of TITLE", `label` the heading, `value` the number or
     the text; a text without a heading behind a cell is its unit; the lines under it are rows
     whose `label` is "line" and whose `basis` is the text;
   - a check: the computed figure is a row like any; behind it one for each reading that fits, is
     ruled out, or would have to be true instead: `label` says which, `basis` what it is;
   - a balance: `what` is its name; a row "verdict" with the phrase as `value` and the one thing to
     know as `basis`, one "count", one for each further sentence, all with the text as `basis`; of
     a clash a row for each line, `label` "line 3", `value` the line, `basis` what it would have to
     be; of what was reconciled "stated" and "moved to" for each figure, `what` its line.  Behind
     them its card;
   - a trend: a row a sample, `label` its name; behind them mean, standard deviation, median;
   - workings: a row a step; `what` is the step, `label` its formula, `basis` the source; a row for
     each term of a formula that has a figure for each, `what` "STEP, TERM";
   - help: `what` is the topic, `label` say, get or try, `value` the text;
   - a statement that only had something to note: one row without a value.                      */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <string.h>

#include "result/balance_verdict.h"
#include "result/check_verdict.h"
#include "report/formula.h"
#include "result/result.h"
#include "result/trend.h"
#include "result/workings_record.h"
#include "support/number.h"
#include "support/text.h"
#include "units/workings.h"

/* What all rows of a statement share: its text in front and the remarks at the end.  */
struct frame { struct text *out; struct text front, back; };

/* In quotes; bytes that are no UTF-8 become the replacement character.  */
static void
quoted_field (struct text *out, const char *string, size_t n)
{
  text_add_char (out, '"');
  for (size_t i = 0; i < n;) {
    unsigned code;
    const size_t length = utf8_decode (string + i, n - i, &code);
    if (string[i] == '"')
      text_add_char (out, '"');
    if (length > 0)
      text_add_bytes (out, string + i, length);
    else
      text_add (out, "\uFFFD");
    i += length > 0 ? length : 1;
  }
  text_add_char (out, '"');
}

static void
field (struct text *out, const char *string)
{
  const size_t n = string != NULL ? strlen (string) : 0;
  if (n == 0)
    return;
  if (strcspn (string, ",\"\r\n") == n && string[0] != ' ' && string[n - 1] != ' '
      && utf8_first_bad (string, n) == n)
    text_add_bytes (out, string, n);
  else
    quoted_field (out, string, n);
}

static void
next_field (struct text *out, const char *string)
{
  text_add_char (out, ',');
  field (out, string);
}

static void
next_number (struct text *out, double value)
{
  text_add_char (out, ',');
  if (isfinite (value))
    number_write_exact (out, value);
}

static void
next_remarks (struct text *out, const struct remark *remarks)
{
  struct text joined;
  text_init (&joined);
  for (const struct remark *r = remarks; r != NULL; r = r->next) {
    if (joined.length > 0)
      text_add (&joined, " | ");
    remark_sentence (&joined, r);
    text_add_char (&joined, ' ');
    if (!remark_bracket (&joined, r))
      joined.bytes[--joined.length] = '\0';
  }
  next_field (out, joined.bytes);
  text_clear (&joined);
}

static void
row_open (struct frame *frame, const char *what, const char *label)
{
  text_add_bytes (frame->out, frame->front.bytes, frame->front.length);
  next_field (frame->out, what);
  next_field (frame->out, label);
}

static void
row_close (struct frame *frame)
{
  text_add_bytes (frame->out, frame->back.bytes, frame->back.length);
}

static void
answer_add (struct frame *frame, const struct answer *answer)
{
  struct text *out = frame->out;
  row_open (frame, answer->what, answer->label);
  next_number (out, answer->value);
  next_field (out, answer->unit);
  next_number (out, answer->uncertainty);
  next_field (out, answer->moisture);
  next_field (out, answer->basis);
  row_close (frame);
}

/* A row that holds a text where figures hold their value, or where they hold their basis.  */
static void
words_add (struct frame *frame, const char *what, const char *label, const char *value,
           const char *basis)
{
  row_open (frame, what, label);
  next_field (frame->out, value);
  text_add (frame->out, ",,,");
  next_field (frame->out, basis);
  row_close (frame);
}

static const char *
heading_of (const struct card *card, size_t i)
{
  return card->headings != NULL && card->headings[i] != NULL ? card->headings[i] : "";
}

/* Is cell I of ROW the unit of the one before it?  */
static bool
is_unit (const struct card *card, const struct card_row *row, size_t i)
{
  return i > 0 && i < card->columns && row->cells[i].text != NULL && *heading_of (card, i) == '\0'
         && (row->cells[i - 1].text != NULL || row->cells[i - 1].is_number);
}

static void
cell_add (struct frame *frame, const char *what, const char *heading, const struct cell *cell,
          const char *unit)
{
  row_open (frame, what, heading);
  if (cell->text != NULL)
    next_field (frame->out, cell->text);
  else
    next_number (frame->out, cell->value);
  next_field (frame->out, unit);
  if (cell->text == NULL && figure_is_uncertain (cell->value, cell->spread))
    next_number (frame->out, cell->spread);
  else
    text_add_char (frame->out, ',');
  text_add (frame->out, ",,");
  row_close (frame);
}

static void
card_row_add (struct frame *frame, const struct card *card, const struct card_row *row)
{
  struct text what;
  text_init (&what);
  text_add (&what, row->name != NULL ? row->name : "");
  text_add (&what, " of ");
  text_add (&what, card->title != NULL ? card->title : "");
  for (size_t i = 0; i < card->columns; i++) {
    const struct cell *cell = &row->cells[i];
    if (is_unit (card, row, i) || (cell->text == NULL && !cell->is_number))
      continue;
    cell_add (frame, what.bytes, heading_of (card, i), cell,
              is_unit (card, row, i + 1) ? row->cells[i + 1].text : NULL);
  }
  if (card->columns == 0)
    words_add (frame, what.bytes, NULL, NULL, NULL);
  text_clear (&what);
}

static void
help_page_add (struct frame *frame, const struct help_page *page)
{
  for (const struct help_entry *e = page->entries; e != NULL; e = e->next) {
    const char *const words[][2] = { { "say", e->say }, { "get", e->get }, { "try", e->example } };
    for (size_t i = 0; i < 3; i++)
      if (words[i][1] != NULL && *words[i][1] != '\0')
        words_add (frame, page->title, words[i][0], words[i][1], NULL);
  }
}

static void
reading_add (struct frame *frame, const char *what, const char *label,
             const struct check_reading *readings)
{
  for (const struct check_reading *r = readings; r != NULL; r = r->next) {
    row_open (frame, what, label);
    next_number (frame->out, r->value);
    next_field (frame->out, r->unit);
    text_add (frame->out, ",,");
    next_field (frame->out, r->reading);
    row_close (frame);
  }
}

static void
check_add (struct frame *frame, const struct check_verdict *v)
{
  for (const struct check_figure *f = v->figures; f != NULL; f = f->next) {
    row_open (frame, f->name != NULL ? f->name : f->stated, f->holds ? "agrees" : "stands alone");
    next_number (frame->out, f->computed);
    next_field (frame->out, f->unit);
    text_add (frame->out, ",,");
    next_field (frame->out, f->stated);
    row_close (frame);
  }
  reading_add (frame, v->stated, "fits", v->readings);
  reading_add (frame, v->stated, "ruled out", v->ruled_out);
  for (const struct check_need *n = v->needs; n != NULL; n = n->next) {
    row_open (frame, v->stated, "instead");
    next_number (frame->out, n->value);
    next_field (frame->out, n->unit);
    text_add (frame->out, ",,");
    next_field (frame->out, n->what);
    row_close (frame);
  }
}

static void
figure_add (struct frame *frame, const char *what, const char *label, double value,
            const char *unit, double uncertainty)
{
  row_open (frame, what, label);
  next_number (frame->out, value);
  next_field (frame->out, unit);
  next_number (frame->out, uncertainty);
  text_add (frame->out, ",,");
  row_close (frame);
}

static void
adjustments_add (struct frame *frame, const struct balance_verdict *v)
{
  for (size_t i = 0; i < v->adjustment_count; i++) {
    const struct verdict_adjustment *a = &v->adjustments[i];
    struct text what;
    text_init (&what);
    text_add (&what, a->statement);
    if (a->component != NULL)
      text_add_format (&what, ": %s", a->component);
    figure_add (frame, what.bytes, "stated", a->stated, a->unit, (double) NAN);
    figure_add (frame, what.bytes, "moved to", a->reconciled, a->unit, a->uncertainty);
    text_clear (&what);
  }
}

static void
balance_add (struct frame *frame, const struct balance_verdict *v)
{
  const char *label = "";
  words_add (frame, v->name, "verdict", v->phrase, v->head);
  words_add (frame, v->name, "count", NULL, v->counts);
  for (const struct verdict_row *r = v->clash ? v->rows : NULL; r != NULL; r = r->next) {
    struct text line;
    text_init (&line);
    if (r->number > 0)
      text_add_format (&line, "line %zu", r->number);
    else
      text_add (&line, "defined before");
    words_add (frame, v->name, line.bytes, r->cell[0], r->cell[1]);
    text_clear (&line);
  }
  adjustments_add (frame, v);
  for (const struct verdict_row *f = v->facts; f != NULL; f = f->next) {
    label = f->cell[0] != NULL && *f->cell[0] != '\0' ? f->cell[0] : label;
    words_add (frame, v->name, label, NULL, f->cell[1]);
  }
}

static void
number_add (struct frame *frame, const struct trend *trend, const char *label, double value)
{
  const struct answer a = { .what = trend->what, .label = label, .value = value,
                            .unit = trend->unit, .uncertainty = (double) NAN,
                            .moisture = trend->moisture, .basis = trend->basis };
  if (isfinite (value))
    answer_add (frame, &a);
}

static void
trend_add (struct frame *frame, const struct trend *trend)
{
  for (size_t i = 0; i < trend->count; i++) {
    const struct trend_row *r = &trend->rows[i];
    const struct answer a = {
      .what = trend->what, .label = r->name, .value = r->value, .unit = trend->unit,
      .uncertainty = r->uncertainty,
      .moisture = r->moisture != NULL ? r->moisture : trend->moisture,
      .basis = r->why != NULL ? r->why : r->basis != NULL ? r->basis : trend->basis };
    answer_add (frame, &a);
  }
  number_add (frame, trend, "mean", trend->all.mean);
  number_add (frame, trend, "standard deviation", trend->all.standard_deviation);
  number_add (frame, trend, "median", trend->all.median);
  if (isfinite (trend->all.robust_deviation))
    number_add (frame, trend, "robust deviation", trend->all.robust_deviation);
  if (trend->outliers > 0) {
    number_add (frame, trend, "mean without outliers", trend->without.mean);
    number_add (frame, trend, "standard deviation without outliers",
                trend->without.standard_deviation);
  }
}

static void
step_row (struct frame *frame, const struct step *step, const char *what, double value)
{
  row_open (frame, what, step->formula);
  next_number (frame->out, value);
  next_field (frame->out, step->unit);
  text_add (frame->out, ",,");
  next_field (frame->out, step->source);
  row_close (frame);
}

static void
steps_add (struct frame *frame, const struct workings_record *record)
{
  for (const struct step *s = record->steps; s != NULL; s = s->next) {
    const struct step_column *each = formula_is_for_terms (s) ? formula_result (s) : NULL;
    struct text what;
    text_init (&what);
    step_name (&what, s);
    const size_t n = what.length;
    for (size_t t = 0; each != NULL && t < s->term_count; t++) {
      what.length = n;
      text_add_format (&what, ", %s", s->terms[t]);
      step_row (frame, s, what.bytes, each->at[t]);
    }
    if (each == NULL)
      step_row (frame, s, what.bytes, s->value);
    text_clear (&what);
  }
}

static void
rows_add (struct frame *frame, const struct result *result)
{
  for (const struct answer *a = result->answers; a != NULL; a = a->next)
    answer_add (frame, a);
  if (result->balance != NULL)
    balance_add (frame, result->balance);
  for (const struct card *c = result->cards; c != NULL; c = c->next) {
    for (const struct card_row *r = c->rows; r != NULL; r = r->next)
      card_row_add (frame, c, r);
    for (const struct card_line *l = c->lines; l != NULL; l = l->next)
      words_add (frame, c->title, "line", NULL, l->text);
  }
  if (result->check != NULL)
    check_add (frame, result->check);
  if (result->trend != NULL)
    trend_add (frame, result->trend);
  if (result->help != NULL)
    help_page_add (frame, result->help);
  if (result->workings != NULL)
    steps_add (frame, result->workings);
  if (result->answers == NULL && result->cards == NULL && result->balance == NULL
      && result->help == NULL && result->trend == NULL && result->workings == NULL
      && result->check == NULL)
    words_add (frame, NULL, NULL, NULL, NULL);
}

void
report_csv (struct text *out, const struct result *result, bool first)
{
  if (first)
    text_add (out, "statement,what,label,value,unit,uncertainty,moisture,basis,"
                   "taken,notes,cautions\n");
  if (result_is_empty (result))
    return;
  struct frame frame = { .out = out };
  text_init (&frame.front);
  text_init (&frame.back);
  field (&frame.front, result->statement);
  next_remarks (&frame.back, result->taken);
  next_remarks (&frame.back, result->notes);
  next_remarks (&frame.back, result->cautions);
  text_add_char (&frame.back, '\n');
  rows_add (&frame, result);
  text_clear (&frame.front);
  text_clear (&frame.back);
}
