#include "config.h"
#include "report/note.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "report/chart.h"
#include "report/formula.h"
#include "report/note_bars.h"
#include "report/paper.h"
#include "report/report_private.h"
#include "result/note.h"
#include "result/result.h"
#include "result/workings_record.h"
#include "support/number.h"
#include "support/text.h"
#include "units/workings.h"

/* What is being written, and how figures look in it.  */
struct writer {
  struct paper paper;
  struct report_style style;
  const struct note *note;
};

static void
heading (struct writer *w, const char *string)
{
  w->paper.form->heading (&w->paper, string);
}

static void
paragraph (struct writer *w, const char *string)
{
  w->paper.form->paragraph (&w->paper, string);
}

/* Rows of up to three texts; nothing where there are none.  */
static void
rows_write (struct writer *w, const struct note_row *rows, size_t n, const char *const headings[])
{
  const struct paper_form *form = w->paper.form;
  if (rows == NULL)
    return;
  form->table_open (&w->paper, n, headings);
  for (const struct note_row *r = rows; r != NULL; r = r->next) {
    const char *const cells[] = { r->name, r->text, r->source };
    form->row (&w->paper, n, cells);
  }
  form->table_close (&w->paper);
}

static void
pictures_write (struct writer *w)
{
  if (w->paper.form->picture == NULL)
    return;
  struct text svg;
  text_init (&svg);
  if (w->note->gases != NULL)
    note_bars_write (&svg, w->note->gases);
  for (const struct note_picture *p = w->note->pictures; p != NULL; p = p->next)
    chart_write (&svg, p->chart);
  if (svg.length > 0)
    w->paper.form->picture (&w->paper, svg.bytes);
  text_clear (&svg);
}

static void
given_write (struct writer *w)
{
  static const char *const given[] = { "name", "as stated" };
  static const char *const conditions[] = { "what", "is", "by" };
  heading (w, "Given");
  if (w->note->given == NULL)
    paragraph (w, "Nothing was defined.");
  rows_write (w, w->note->given, 2, given);
  pictures_write (w);
  heading (w, "Reference states");
  if (w->note->conditions == NULL)
    paragraph (w, "No result leans on any.");
  rows_write (w, w->note->conditions, 3, conditions);
}

/* ---- Results ---- */

static void
answer_write (struct writer *w, const struct answer *a)
{
  struct text figure, spread, basis;
  text_init (&figure);
  text_init (&spread);
  text_init (&basis);
  if (figure_is_uncertain (a->value, a->uncertainty))
    figure_write_uncertain (&figure, a->value, &spread, a->coverage * a->uncertainty);
  else if (!isnan (a->value))
    figure_write (&figure, &w->style, a->value);
  if (!isnan (a->value))
    text_add_format (&figure, " %s", a->unit);
  else if (*a->unit != '\0')
    text_add (&figure, "open");
  text_add (&basis, a->moisture != NULL ? a->moisture : "");
  if (a->basis != NULL && *a->basis != '\0')
    text_add_format (&basis, "%s%s", basis.length > 0 ? ", " : "", a->basis);
  const char *const cells[] = { a->label != NULL ? a->label : a->what,
                                figure.length > 0 ? figure.bytes : "",
                                spread.length > 0 ? spread.bytes : "",
                                basis.length > 0 ? basis.bytes : "" };
  w->paper.form->row (&w->paper, 4, cells);
  text_clear (&figure);
  text_clear (&spread);
  text_clear (&basis);
}

/* What stands behind the figures of a result: as set when it was asked.  */
static const char *
spread_heading (const struct note_result *r, struct text *scratch)
{
  size_t n = 0;
  for (const struct answer *a = r->answers; a != NULL && n < r->count; a = a->next, n++)
    if (a->coverage > 1 && figure_is_uncertain (a->value, a->uncertainty)) {
      text_empty (scratch);
      text_add (scratch, "expanded uncertainty (k=");
      number_write_exact (scratch, a->coverage);
      text_add_char (scratch, ')');
      return scratch->bytes;
    }
  return "standard uncertainty";
}

static void
results_write (struct writer *w)
{
  struct text scratch;
  text_init (&scratch);
  const struct paper_form *form = w->paper.form;
  heading (w, "Results");
  if (w->note->results == NULL)
    paragraph (w, "Nothing was asked.");
  for (const struct note_result *r = w->note->results; r != NULL; r = r->next) {
    form->subheading (&w->paper, r->statement);
    const char *const headings[] = { "result", "figure", spread_heading (r, &scratch), "basis" };
    form->table_open (&w->paper, 4, headings);
    size_t n = 0;
    for (const struct answer *a = r->answers; a != NULL && n < r->count; a = a->next, n++)
      answer_write (w, a);
    form->table_close (&w->paper);
  }
  text_clear (&scratch);
  if (w->note->results_left_out > 0) {
    struct text line;
    text_init (&line);
    text_add_format (&line, "Left out: %zu results that came after these.",
                     w->note->results_left_out);
    paragraph (w, line.bytes);
    text_clear (&line);
  }
}

/* ---- Remarks ---- */

/* Was the same said under a result before R, or there before REMARK?  */
static bool
was_said (const struct writer *w, const struct note_result *r, const struct remark *remark,
          const struct remark *(*of) (const struct note_result *))
{
  struct text this, other;
  bool said = false;
  text_init (&this);
  text_init (&other);
  remark_sentence (&this, remark);
  for (const struct note_result *b = w->note->results; b != r && !said; b = b->next)
    for (const struct remark *m = of (b); m != NULL && !said; m = m->next) {
      text_empty (&other);
      if (m->kind == remark->kind)
        remark_sentence (&other, m);
      said = other.length > 0 && strcmp (this.bytes, other.bytes) == 0;
    }
  text_clear (&this);
  text_clear (&other);
  return said;
}

static const struct remark *
notes_of (const struct note_result *r)
{
  return r->notes;
}

static const struct remark *
cautions_of (const struct note_result *r)
{
  return r->cautions;
}

static bool
has_any (const struct writer *w, const struct remark *(*of) (const struct note_result *))
{
  for (const struct note_result *r = w->note->results; r != NULL; r = r->next)
    if (of (r) != NULL)
      return true;
  return false;
}

/* All remarks of a sort, each once.  */
static void
remarks_write (struct writer *w, const char *title,
               const struct remark *(*of) (const struct note_result *))
{
  if (!has_any (w, of))
    return;
  heading (w, title);
  w->paper.form->list_open (&w->paper);
  for (const struct note_result *r = w->note->results; r != NULL; r = r->next)
    for (const struct remark *m = of (r); m != NULL; m = m->next) {
      struct text line;
      text_init (&line);
      remark_sentence (&line, m);
      if (!was_said (w, r, m, of))
        w->paper.form->item (&w->paper, line.bytes);
      text_clear (&line);
    }
  w->paper.form->list_close (&w->paper);
}

static const struct remark *
taken_of (const struct note_result *r)
{
  return r->taken;
}

/* What was taken, how far the usual alternative would move the figure, and which.  */
static void
assumptions_write (struct writer *w)
{
  static const char *const headings[] = { "taken", "the usual alternative", "of" };
  if (!has_any (w, taken_of))
    return;
  heading (w, "Assumptions and their weight");
  w->paper.form->table_open (&w->paper, 3, headings);
  for (const struct note_result *r = w->note->results; r != NULL; r = r->next)
    for (const struct remark *m = r->taken; m != NULL; m = m->next) {
      struct text line, effect;
      text_init (&line);
      text_init (&effect);
      remark_sentence (&line, m);
      const bool moves = remark_bracket (&effect, m);
      const char *const cells[] = { line.bytes, moves ? effect.bytes : "", r->statement };
      w->paper.form->row (&w->paper, 3, cells);
      text_clear (&line);
      text_clear (&effect);
    }
  w->paper.form->table_close (&w->paper);
}

/* ---- Workings ---- */

/* "M = sum(x_i M_i) = 0.6 * 0.016 + ..."  */
static void
formula_write (struct text *out, const struct writer *w, const struct step *step)
{
  const struct formula_style figures = { figure_in_formula, &w->style };
  text_add (out, step->formula);
  if (step->solved != NULL)
    text_add_format (out, ", found by: %s", step->solved);
  else if (formula_is_for_terms (step)) {
    const struct step_column *result = formula_result (step);
    for (size_t t = 0; t < step->term_count; t++) {
      text_add_format (out, "%s %s ", t > 0 ? "," : ":", step->terms[t]);
      figure_in_formula (out, result->at[t], &w->style);
    }
  } else if (*step->formula != '\0') {
    text_add (out, " = ");
    formula_figures (out, step, SIZE_MAX, &figures);
  }
}

/* "[method; R: SI Brochure]"  */
static void
sources_write (struct text *out, const struct step *step)
{
  text_add (out, step->source);
  for (size_t i = 0; i < step->symbol_count; i++)
    if (step->symbols[i].source != NULL && strcmp (step->symbols[i].source, step->source) != 0)
      text_add_format (out, "; %s: %s", step->symbols[i].name, step->symbols[i].source);
  for (size_t i = 0; i < step->column_count; i++)
    if (step->columns[i].source != NULL && strcmp (step->columns[i].source, step->source) != 0)
      text_add_format (out, "; %s: %s", step->columns[i].name, step->columns[i].source);
}

static void
step_write (struct writer *w, const struct step *step)
{
  struct text name, formula, figure, sources;
  text_init (&name);
  text_init (&formula);
  text_init (&figure);
  text_init (&sources);
  step_name (&name, step);
  formula_write (&formula, w, step);
  if (!isnan (step->value)) {
    figure_write (&figure, &w->style, step->value);
    text_add_format (&figure, " %s", step->unit);
  }
  sources_write (&sources, step);
  const char *const cells[] = { name.bytes, formula.length > 0 ? formula.bytes : "",
                                figure.length > 0 ? figure.bytes : "", sources.bytes };
  w->paper.form->row (&w->paper, 4, cells);
  text_clear (&name);
  text_clear (&formula);
  text_clear (&figure);
  text_clear (&sources);
}

/* The share of each uncertain figure in the variance of an answer.  */
static void
budget_write (struct writer *w, const struct answer *a)
{
  static const char *const headings[] = { "uncertain figure", "sensitivity", "contribution",
                                          "share" };
  if (a->budget == NULL)
    return;
  w->paper.form->table_open (&w->paper, 4, headings);
  for (size_t i = 0; i < a->budget->count; i++) {
    const struct budget_line *b = &a->budget->lines[i];
    struct text what, slope, part, share;
    text_init (&what);
    text_init (&slope);
    text_init (&part);
    text_init (&share);
    text_add (&what, b->what);
    if (b->of != NULL)
      text_add_format (&what, " of %s", b->of);
    figure_write (&slope, &w->style, b->sensitivity);
    figure_write (&part, &w->style, b->contribution);
    text_add_format (&part, " %s", a->unit);
    figure_write (&share, &(struct report_style) { .digits = 3 }, 100 * b->share);
    text_add (&share, " %");
    const char *const cells[] = { what.bytes, slope.bytes, part.bytes, share.bytes };
    w->paper.form->row (&w->paper, 4, cells);
    text_clear (&what);
    text_clear (&slope);
    text_clear (&part);
    text_clear (&share);
  }
  w->paper.form->table_close (&w->paper);
}

static void
workings_write (struct writer *w)
{
  static const char *const headings[] = { "step", "formula and figures", "result", "from" };
  if (w->note->results == NULL)
    return;
  heading (w, "Workings");
  paragraph (w, "Of each result what no result before it has shown.  In a formula a blank between "
                "two factors multiplies.");
  for (const struct note_result *r = w->note->results; r != NULL; r = r->next) {
    w->paper.form->subheading (&w->paper, r->statement);
    w->paper.form->table_open (&w->paper, 4, headings);
    for (const struct step *s = r->workings->steps; s != NULL; s = s->next)
      step_write (w, s);
    w->paper.form->table_close (&w->paper);
    size_t n = 0;
    for (const struct answer *a = r->answers; a != NULL && n < r->count; a = a->next, n++)
      budget_write (w, a);
  }
}

static bool
source_was_told (const struct writer *w, const struct note_result *r,
                 const struct workings_source *source)
{
  for (const struct note_result *b = w->note->results; b != r; b = b->next)
    for (const struct workings_source *s = b->workings->sources; s != NULL; s = s->next)
      if (strcmp (s->name, source->name) == 0)
        return true;
  return false;
}

static void
all_sources_write (struct writer *w)
{
  bool any = false;
  for (const struct note_result *r = w->note->results; r != NULL; r = r->next)
    any = any || r->workings->sources != NULL;
  if (!any)
    return;
  heading (w, "Sources");
  w->paper.form->list_open (&w->paper);
  for (const struct note_result *r = w->note->results; r != NULL; r = r->next)
    for (const struct workings_source *s = r->workings->sources; s != NULL; s = s->next) {
      struct text line;
      text_init (&line);
      text_add_format (&line, "%s: %s", s->name, s->text);
      if (!source_was_told (w, r, s))
        w->paper.form->item (&w->paper, line.bytes);
      text_clear (&line);
    }
  w->paper.form->list_close (&w->paper);
}

/* ---- The rest ---- */

static void
statements_write (struct writer *w)
{
  heading (w, "Statements");
  paragraph (w, "As typed; run again they give the same figures.");
  w->paper.form->code_open (&w->paper);
  for (const struct note_row *r = w->note->statements; r != NULL; r = r->next)
    w->paper.form->line (&w->paper, r->text);
  w->paper.form->code_close (&w->paper);
  if (w->note->statements_left_out > 0) {
    struct text line;
    text_init (&line);
    text_add_format (&line, "Left out: %zu statements that came after these.",
                     w->note->statements_left_out);
    paragraph (w, line.bytes);
    text_clear (&line);
  }
}

enum note_form
note_form_of (const char *file)
{
  const size_t n = strlen (file);
  return n > 3 && strcmp (file + n - 3, ".md") == 0 ? NOTE_MARKDOWN : NOTE_HTML;
}

void
note_write (struct text *out, enum note_form form, const struct note *note,
            const struct note_about *about)
{
  struct writer w = { { out, form == NOTE_HTML ? &paper_html : &paper_markdown },
                      { .digits = note->digits, .unicode = true }, note };
  struct text title, below;
  text_init (&title);
  text_init (&below);
  text_add_format (&title, "Calculation note: %s", note->title);
  text_add_format (&below, "%s, %s", about->date, about->program);
  w.paper.form->begin (&w.paper, title.bytes, below.bytes);
  given_write (&w);
  results_write (&w);
  assumptions_write (&w);
  remarks_write (&w, "Notes", notes_of);
  remarks_write (&w, "Cautions", cautions_of);
  workings_write (&w);
  all_sources_write (&w);
  statements_write (&w);
  heading (&w, "Signatures");
  w.paper.form->signature (&w.paper, "Made by");
  w.paper.form->signature (&w.paper, "Checked by");
  w.paper.form->end (&w.paper);
  text_clear (&title);
  text_clear (&below);
}
