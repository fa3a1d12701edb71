/* How an answer came about, for programs:

     "workings":[{"step","formula","value","unit","source","share","figures","solved"?,
                  "symbols":[{"symbol","value","unit","source"}],
                  "terms":[{"of","figures"?,"values":{SYMBOL: number}}],
                  "columns":[{"symbol","unit","source"}]}],
     "sources":{NAME: TEXT}

   `figures` is the right side of the formula with its figures at full length (of a formula that is
   solved, both sides).  A formula whose left side ends in _i has a null value and `figures` for
   each term.  The uncertain figures follow the steps, an entry each, with its share in the variance
   of `answer`; elsewhere `share` is null.                                                       */
#include "config.h"
#include "report/report_private.h"

#include <stdint.h>
#include <string.h>

#include "report/formula.h"
#include "result/result.h"
#include "result/workings_record.h"
#include "support/number.h"
#include "support/text.h"
#include "units/workings.h"

static void
number_exact (struct text *out, double value, const void *with)
{
  (void) with;
  number_write_exact (out, value);
}

static const struct formula_style exact = { number_exact, NULL };

static void
figures_add (struct text *out, const char *key, const struct step *step, size_t term)
{
  struct text figures;
  text_init (&figures);
  formula_figures (&figures, step, term, &exact);
  json_member (out, key, figures.length > 0 ? figures.bytes : "");
  text_clear (&figures);
}

static void
symbols_add (struct text *out, const struct step *step)
{
  text_add (out, ",\"symbols\":[");
  for (size_t i = 0; i < step->symbol_count; i++) {
    const struct step_symbol *s = &step->symbols[i];
    json_member (out, i > 0 ? ",{\"symbol\":" : "{\"symbol\":", s->name);
    json_figure (out, ",\"value\":", s->value);
    json_member (out, ",\"unit\":", s->unit);
    json_member (out, ",\"source\":", s->source);
    text_add_char (out, '}');
  }
  text_add (out, "],\"columns\":[");
  for (size_t i = 0; i < step->column_count; i++) {
    const struct step_column *c = &step->columns[i];
    json_member (out, i > 0 ? ",{\"symbol\":" : "{\"symbol\":", c->name);
    json_member (out, ",\"unit\":", c->unit);
    json_member (out, ",\"source\":", c->source);
    text_add_char (out, '}');
  }
  text_add_char (out, ']');
}

static void
terms_add (struct text *out, const struct step *step)
{
  const bool each = formula_is_for_terms (step);
  text_add (out, ",\"terms\":[");
  for (size_t t = 0; t < step->term_count; t++) {
    json_member (out, t > 0 ? ",{\"of\":" : "{\"of\":", step->terms[t]);
    if (each)
      figures_add (out, ",\"figures\":", step, t);
    text_add (out, ",\"values\":{");
    for (size_t i = 0; i < step->column_count; i++) {
      text_add (out, i > 0 ? "," : "");
      json_string (out, step->columns[i].name);
      json_figure (out, ":", step->columns[i].at[t]);
    }
    text_add (out, "}}");
  }
  text_add_char (out, ']');
}

static void
step_add (struct text *out, const struct step *step)
{
  struct text name;
  text_init (&name);
  step_name (&name, step);
  json_member (out, "{\"step\":", name.bytes);
  text_clear (&name);
  json_member (out, ",\"formula\":", step->formula);
  json_figure (out, ",\"value\":", step->value);
  json_member (out, ",\"unit\":", step->unit);
  json_member (out, ",\"source\":", step->source);
  text_add (out, ",\"share\":null");
  if (formula_is_for_terms (step))
    json_member (out, ",\"figures\":", "");
  else
    figures_add (out, ",\"figures\":", step, SIZE_MAX);
  if (step->solved != NULL)
    json_member (out, ",\"solved\":", step->solved);
  symbols_add (out, step);
  terms_add (out, step);
  text_add_char (out, '}');
}

static void
input_add (struct text *out, const struct answer *answer, const struct budget_line *b)
{
  struct text what, figures;
  text_init (&what);
  text_init (&figures);
  text_add (&what, b->what);
  if (b->of != NULL)
    text_add_format (&what, " of %s", b->of);
  number_write_exact (&figures, b->sensitivity);
  text_add (&figures, " * ");
  number_write_exact (&figures, b->u);
  json_member (out, ",{\"step\":", what.bytes);
  json_member (out, ",\"formula\":", "u_i = s_i u(x_i)");
  json_figure (out, ",\"value\":", b->contribution);
  json_member (out, ",\"unit\":", answer->unit);
  json_member (out, ",\"source\":", STEP_TYPED);
  json_figure (out, ",\"share\":", b->share);
  json_member (out, ",\"figures\":", figures.bytes);
  json_member (out, ",\"answer\":", answer->label != NULL ? answer->label : answer->what);
  text_add_char (out, '}');
  text_clear (&what);
  text_clear (&figures);
}

void
report_workings_json (struct text *out, const struct workings_record *record)
{
  text_add (out, ",\"workings\":[");
  for (const struct step *s = record->steps; s != NULL; s = s->next) {
    step_add (out, s);
    text_add (out, s->next != NULL ? "," : "");
  }
  size_t n = 0;
  for (const struct answer *a = record->answers; a != NULL && n < record->answer_count;
       a = a->next, n++)
    for (size_t i = 0; a->budget != NULL && i < a->budget->count; i++)
      input_add (out, a, &a->budget->lines[i]);
  text_add (out, "],\"sources\":{");
  for (const struct workings_source *s = record->sources; s != NULL; s = s->next) {
    json_string (out, s->name);
    json_member (out, ":", s->text);
    text_add (out, s->next != NULL ? "," : "");
  }
  text_add_char (out, '}');
}
