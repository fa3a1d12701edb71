/* How an answer came about, as text.  A step is a row as that of an answer (name, figure, unit),
   its formula in symbols and in figures, and in brackets the sources of its method and constants:

          _/ 850 Nm3/h of raw in kg/h \____________________________ 6 steps
          volume of a mole, Nm3 ...   0.0224140   m3/mol
              V = R T/p = 8.31446 * 273.15/101325
              [ideal gas law, p V = n R T; R: SI Brochure, 9th ed. (2019); T, p: DIN 1343:1990]  */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "report/formula.h"
#include "result/result.h"
#include "result/workings_record.h"
#include "support/number.h"
#include "support/text.h"
#include "units/workings.h"

enum { INDENT = MARGIN + 4, HANG = INDENT + 2, NAME_MOST = 40, TERM_NAME = 8 };

void
step_name (struct text *out, const struct step *step)
{
  text_add (out, step->name);
  if (step->of == NULL || *step->of == '\0')
    return;
  text_add (out, step->kind == STEP_ANSWER ? " in " : " ");
  text_add (out, step->of);
}

/* Adds WORDS, folded; FIRST and REST are the indents.  */
static void
wrapped_add (struct text *out, const struct report_style *style, const char *words, size_t first,
             size_t rest)
{
  text_add_repeated (out, ' ', first);
  const struct fold fold = { out->length, rest };
  shown_add (out, style, words);
  fold_line (out, style, fold);
  text_add_char (out, '\n');
}

/* ---- One step ---- */

struct widths { size_t name, whole, fraction, unit; };

static struct widths
measure (const struct report_style *style, const struct workings_record *record)
{
  struct widths wide = { NAME_WIDTH, 0, 0, 0 };
  struct text scratch;
  text_init (&scratch);
  for (const struct step *s = record->steps; s != NULL; s = s->next) {
    text_empty (&scratch);
    step_name (&scratch, s);
    const size_t name = shown_width (style, scratch.bytes) + NAME_DOTS;
    wide.name = name > wide.name ? name : wide.name;
    text_empty (&scratch);
    if (!isnan (s->value))
      figure_write (&scratch, style, s->value);
    const size_t whole = scratch.length > 0 ? figure_whole (scratch.bytes) : 0;
    const size_t fraction = scratch.length - whole;
    wide.whole = whole > wide.whole ? whole : wide.whole;
    wide.fraction = fraction > wide.fraction ? fraction : wide.fraction;
    const size_t unit = shown_width (style, s->unit);
    wide.unit = unit > wide.unit ? unit : wide.unit;
  }
  wide.name = wide.name > NAME_MOST ? NAME_MOST : wide.name;
  text_clear (&scratch);
  return wide;
}

/* Name, figure, unit, source.  */
static void
head_add (struct text *out, const struct report_style *style, const struct step *step,
          const struct widths *wide)
{
  struct text name, figure;
  text_init (&name);
  text_init (&figure);
  step_name (&name, step);
  if (!isnan (step->value))
    figure_write (&figure, style, step->value);
  const char *shown = figure.length > 0 ? figure.bytes : "";
  const size_t whole = figure_whole (shown), needed = shown_width (style, name.bytes) + NAME_DOTS;
  const size_t width = needed > wide->name ? needed : wide->name;
  text_add_repeated (out, ' ', MARGIN);
  leader_add (out, style, name.bytes, width);
  size_t blanks = 2 + wide->whole - whole;
  blanks = width > wide->name && blanks > 1 ? 1 : blanks;
  if (*shown != '\0') {
    text_add_repeated (out, ' ', blanks);
    weight_open (out, style, WEIGHT_BOLD);
    text_add (out, shown);
    weight_close (out, style);
    blanks = 2 + wide->fraction - (figure.length - whole);
    text_add_repeated (out, ' ', blanks);
    shown_add (out, style, step->unit);
  }
  text_add_char (out, '\n');
  text_clear (&name);
  text_clear (&figure);
}

/* "V = R T/p = 8.31446 * 273.15/101325".  */
static void
formula_write (struct text *line, const struct report_style *style, const struct step *step)
{
  const struct formula_style figures = { figure_in_formula, style };
  text_add (line, step->formula);
  if (!formula_is_for_terms (step) && step->solved == NULL && *step->formula != '\0') {
    text_add (line, " = ");
    formula_figures (line, step, SIZE_MAX, &figures);
  }
  if (step->solved != NULL)
    text_add_format (line, ", found by: %s", step->solved);
}

/* The figures of a formula that is solved, which are not put into it.  */
static void
solved_figures (struct text *out, const struct report_style *style, const struct step *step)
{
  struct text line;
  text_init (&line);
  for (size_t i = 0; i < step->symbol_count; i++) {
    const struct step_symbol *s = &step->symbols[i];
    text_add_format (&line, "%s%s ", i > 0 ? ", " : "", s->name);
    figure_in_formula (&line, s->value, style);
    if (s->unit != NULL && strcmp (s->unit, "1") != 0)
      text_add_format (&line, " %s", s->unit);
  }
  if (line.length > 0)
    wrapped_add (out, style, line.bytes, INDENT, HANG);
  text_clear (&line);
}

/* A line for each term: what the formula gives for it, or its figures.  */
static void
terms_add (struct text *out, const struct report_style *style, const struct step *step)
{
  const struct formula_style figures = { figure_in_formula, style };
  const struct step_column *result = formula_result (step);
  for (size_t t = 0; t < step->term_count; t++) {
    struct text line;
    text_init (&line);
    const size_t used = shown_width (style, step->terms[t]);
    text_add (&line, step->terms[t]);
    if (result != NULL) {
      text_add_format (&line, ": %s = ", result->name);
      formula_figures (&line, step, t, &figures);
      text_add (&line, " = ");
      figure_in_formula (&line, result->at[t], style);
    }
    for (size_t i = 0; result == NULL && i < step->column_count; i++) {
      text_add_format (&line, "%s%s ", i > 0 ? ", " : ": ", step->columns[i].name);
      figure_in_formula (&line, step->columns[i].at[t], style);
    }
    wrapped_add (out, style, line.bytes, HANG, HANG + used);
    text_clear (&line);
  }
}

/* Adds "NAMES: SOURCE" for all symbols and columns that have SOURCE.  */
static void
source_of (struct text *line, const struct step *step, const char *source)
{
  bool any = false;
  text_add (line, line->length > 0 ? "; " : "");
  for (size_t i = 0; i < step->symbol_count; i++)
    if (step->symbols[i].source != NULL && strcmp (step->symbols[i].source, source) == 0) {
      text_add_format (line, "%s%s", any ? ", " : "", step->symbols[i].name);
      any = true;
    }
  for (size_t i = 0; i < step->column_count; i++)
    if (step->columns[i].source != NULL && strcmp (step->columns[i].source, source) == 0) {
      text_add_format (line, "%s%s", any ? ", " : "", step->columns[i].name);
      any = true;
    }
  text_add_format (line, ": %s", source);
}

/* Has an earlier symbol or column the same source, or the step?  N counts both, symbols first.  */
static bool
source_is_told (const struct step *step, size_t n, const char *source)
{
  for (size_t i = 0; i < n; i++) {
    const char *before = i < step->symbol_count ? step->symbols[i].source
                                                : step->columns[i - step->symbol_count].source;
    if (before != NULL && strcmp (before, source) == 0)
      return true;
  }
  return strcmp (step->source, source) == 0;
}

/* "ideal gas law; R: SI Brochure; T, p: DIN 1343:1990".  */
static void
sources_write (struct text *line, const struct step *step)
{
  text_add (line, step->source);
  for (size_t i = 0; i < (size_t) step->symbol_count + step->column_count; i++) {
    const char *source = i < step->symbol_count ? step->symbols[i].source
                                                : step->columns[i - step->symbol_count].source;
    if (source != NULL && !source_is_told (step, i, source))
      source_of (line, step, source);
  }
}

enum { TERMS_WRITTEN_OUT = 8, GAP_SOURCE = 3 };

static bool
needs_terms (const struct step *step)
{
  return step->term_count > 0 && (formula_is_for_terms (step) || step->solved != NULL
                                  || step->term_count > TERMS_WRITTEN_OUT);
}

/* The formula and what it rests on: on one line where they find room there.  */
static void
body_add (struct text *out, const struct report_style *style, const struct step *step)
{
  struct text formula, sources;
  text_init (&formula);
  text_init (&sources);
  formula_write (&formula, style, step);
  sources_write (&sources, step);
  const size_t width = INDENT + shown_width (style, formula.bytes) + GAP_SOURCE
                       + strlen ("[]") + shown_width (style, sources.bytes);
  const bool apart = width > line_width (style) || needs_terms (step) || step->solved != NULL;
  if (!apart) {
    text_add (&formula, formula.length > 0 ? "   [" : "[");
    text_add_bytes (&formula, sources.bytes, sources.length);
    text_add_char (&formula, ']');
  }
  wrapped_add (out, style, formula.length > 0 ? formula.bytes : "", INDENT, HANG);
  if (step->solved != NULL)
    solved_figures (out, style, step);
  if (needs_terms (step))
    terms_add (out, style, step);
  if (apart) {
    text_empty (&formula);
    text_add_format (&formula, "[%s]", sources.bytes);
    wrapped_add (out, style, formula.bytes, INDENT, HANG);
  }
  text_clear (&formula);
  text_clear (&sources);
}

static void
step_add (struct text *out, const struct report_style *style, const struct step *step,
          const struct widths *wide)
{
  head_add (out, style, step, wide);
  body_add (out, style, step);
}

/* ---- The whole ---- */

static void
budget_add (struct text *out, const struct report_style *style, const struct answer *answer)
{
  struct text line;
  text_init (&line);
  text_add (&line, "uncertainty of ");
  text_add (&line, answer->label != NULL ? answer->label : answer->what);
  text_add (&line, ": u = sqrt(sum(u_i^2)) = ");
  figure_in_formula (&line, answer->budget->uncertainty, style);
  text_add_format (&line, " %s; u_i = s_i u(x_i); from: JCGM 100:2008, eq. 10", answer->unit);
  wrapped_add (out, style, line.bytes, MARGIN, INDENT);
  for (size_t i = 0; i < answer->budget->count; i++) {
    const struct budget_line *b = &answer->budget->lines[i];
    text_empty (&line);
    number_write (&line, 100 * b->share, 3);
    text_add_format (&line, " %%  %s", b->what);
    if (b->of != NULL)
      text_add_format (&line, " of %s", b->of);
    text_add (&line, ": u_i = ");
    figure_in_formula (&line, b->sensitivity, style);
    text_add (&line, " * ");
    figure_in_formula (&line, b->u, style);
    text_add (&line, " = ");
    figure_in_formula (&line, b->contribution, style);
    text_add_format (&line, " %s", answer->unit);
    wrapped_add (out, style, line.bytes, INDENT, HANG);
  }
  text_clear (&line);
}

void
report_workings (struct text *out, const struct report_style *style,
                 const struct workings_record *record)
{
  struct text kind;
  const struct widths wide = measure (style, record);
  text_init (&kind);
  text_add_format (&kind, record->count == 1 ? "%zu step" : "%zu steps", record->count);
  tab_add (out, style, record->statement, kind.bytes);
  text_clear (&kind);
  for (const struct step *s = record->steps; s != NULL; s = s->next)
    step_add (out, style, s, &wide);
  size_t i = 0;
  for (const struct answer *a = record->answers; a != NULL && i < record->answer_count;
       a = a->next, i++)
    if (a->budget != NULL)
      budget_add (out, style, a);
  for (const struct workings_source *s = record->sources; s != NULL; s = s->next) {
    struct text line;
    text_init (&line);
    text_add_format (&line, "%s: %s", s->name, s->text);
    wrapped_add (out, style, line.bytes, MARGIN, INDENT);
    text_clear (&line);
  }
}
