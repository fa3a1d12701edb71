#include "config.h"
#include "report/formula.h"

#include <math.h>
#include <string.h>

#include "support/text.h"
#include "units/workings.h"

/* A formula that is being written.  */
struct writing {
  struct text *out;
  const struct step *step;
  const struct formula_style *style;
  size_t term;
  const char *first, *end;               /* of all that is written */
  bool behind_operand;                   /* what comes next is multiplied by what stands there */
};

static bool
is_letter (char c)
{
  return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_';
}

static bool
is_digit (char c)
{
  return (c >= '0' && c <= '9') || c == '.';
}

static size_t
word_length (const char *at, const char *end)
{
  size_t n = 0;
  while (at + n < end && (is_letter (at[n]) || is_digit (at[n])))
    n++;
  return n;
}

static bool
is_word (const char *at, size_t n, const char *word)
{
  return strlen (word) == n && memcmp (at, word, n) == 0;
}

/* Behind the bracket that closes the one at AT.  */
static const char *
closing (const char *at, const char *end)
{
  int depth = 0;
  for (; at < end; at++) {
    depth += *at == '(' ? 1 : *at == ')' ? -1 : 0;
    if (depth == 0)
      return at + 1;
  }
  return end;
}

static const double *
figure_of (const struct writing *w, const char *at, size_t n)
{
  const struct step *step = w->step;
  for (size_t i = 0; i < step->symbol_count; i++)
    if (is_word (at, n, step->symbols[i].name))
      return &step->symbols[i].value;
  for (size_t i = 0; i < step->column_count; i++)
    if (is_word (at, n, step->columns[i].name) && w->term < step->term_count)
      return &step->columns[i].at[w->term];
  return NULL;
}

static void
operand_begins (struct writing *w)
{
  if (w->behind_operand)
    text_add (w->out, " * ");
  w->behind_operand = false;
}

static void
symbol_write (struct writing *w, const char *at, size_t n)
{
  const double *value = figure_of (w, at, n);
  operand_begins (w);
  if (value == NULL)
    text_add_bytes (w->out, at, n);
  else {
    const bool negative = signbit (*value) != 0;
    text_add (w->out, negative ? "(" : "");
    w->style->number (w->out, *value, w->style->with);
    text_add (w->out, negative ? ")" : "");
  }
  w->behind_operand = true;
}

static void expression_write (struct writing *, const char *at, const char *end);

/* sum(...): every term in turn, in brackets unless there is nothing else.  */
static void
sum_write (struct writing *w, const char *at, const char *end, bool alone)
{
  operand_begins (w);
  text_add (w->out, alone ? "" : "(");
  for (size_t i = 0; i < w->step->term_count; i++) {
    struct writing term = *w;
    term.term = i;
    term.first = NULL;
    text_add (w->out, i > 0 ? " + " : "");
    expression_write (&term, at, end);
  }
  text_add (w->out, w->step->term_count > 0 ? "" : "0");
  text_add (w->out, alone ? "" : ")");
  w->behind_operand = true;
}

/* A word, with its bracket if it is a function; returns behind it.  */
static const char *
word_write (struct writing *w, const char *at, const char *end)
{
  const size_t n = word_length (at, end);
  const char *behind = at + n;
  if (behind == end || *behind != '(') {
    symbol_write (w, at, n);
    return behind;
  }
  const char *closed = closing (behind, end);
  if (is_word (at, n, "sum")) {
    sum_write (w, behind + 1, closed - 1, at == w->first && closed == w->end);
    return closed;
  }
  operand_begins (w);
  text_add_bytes (w->out, at, n + 1);
  return behind + 1;
}

static void
sign_write (struct writing *w, char sign)
{
  if (sign == '(')
    operand_begins (w);
  if (sign == '+' || sign == '-' || sign == '=')
    text_add_format (w->out, w->behind_operand ? " %c " : "%c", sign);
  else if (sign == ',')
    text_add (w->out, ", ");
  else
    text_add_char (w->out, sign);
  w->behind_operand = sign == ')';
}

static void
expression_write (struct writing *w, const char *at, const char *end)
{
  while (at < end) {
    if (*at == ' ')
      at++;
    else if (is_letter (*at))
      at = word_write (w, at, end);
    else if (is_digit (*at)) {
      const size_t n = word_length (at, end);
      operand_begins (w);
      text_add_bytes (w->out, at, n);
      w->behind_operand = true;
      at += n;
    } else
      sign_write (w, *at++);
  }
}

void
formula_figures (struct text *out, const struct step *step, size_t term,
                 const struct formula_style *style)
{
  const char *equals = strstr (step->formula, " = ");
  const char *at = equals != NULL && step->solved == NULL ? equals + 3 : step->formula;
  struct writing w = { out, step, style, term, at, at + strlen (at), false };
  expression_write (&w, at, w.end);
}

const struct step_column *
formula_result (const struct step *step)
{
  const size_t n = word_length (step->formula, step->formula + strlen (step->formula));
  for (size_t i = 0; i < step->column_count; i++)
    if (is_word (step->formula, n, step->columns[i].name))
      return &step->columns[i];
  return NULL;
}

bool
formula_is_for_terms (const struct step *step)
{
  return formula_result (step) != NULL && step->solved == NULL;
}
