#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "support/arena.h"
#include "support/number.h"

/* What stands in a cell where a figure is not; squeezed; from memory, no source.  */
static const char *const none_words[] = {
  "", "n/a", "na", "notanalysed", "notanalyzed", "notmeasured", "nm", "nil", "\xE2\x80\x93",
  "\xE2\x80\x94", NULL
};
static const char *const not_detected_words[] = {
  "nd", "n/d", "notdetected", "bdl", "<dl", "<lod", "<loq", "belowdetection",
  "belowdetectionlimit", "nn", NULL
};
static const char *const rest_words[] = {
  "rest", "balance", "bal", "difference", "bydifference", "remainder", NULL
};
static const char *const trace_words[] = { "trace", "traces", "tr", "spur", "spuren", NULL };

/* ---- Figures ---- */

static bool
is_digit (char c)
{
  return c >= '0' && c <= '9';
}

/* A run of digits with what parts them.  */
struct run {
  size_t n;                       /* bytes of the cell, exponent included */
  size_t dots, commas, others;    /* others: blanks and apostrophes between digits */
  size_t before, behind;          /* digits before and behind the last sign */
  char first;
};

/* Is there a digit at S[I], perhaps behind one blank or apostrophe?  Bytes to it; 0: no.  */
static size_t
group_mark (struct slice s, size_t i)
{
  if (i + 1 < s.n && (s.at[i] == ' ' || s.at[i] == '\'') && is_digit (s.at[i + 1]))
    return 1;
  if (i + 2 < s.n && memcmp (s.at + i, "\xC2\xA0", 2) == 0 && is_digit (s.at[i + 2]))
    return 2;
  return 0;
}

static struct run
run_of (struct slice s)
{
  struct run run = { 0 };
  size_t i = 0;
  run.first = s.n > 0 ? s.at[0] : '\0';
  for (; i < s.n; i++) {
    size_t mark = i > 0 ? group_mark (s, i) : 0;
    if (is_digit (s.at[i])) {
      run.behind += run.dots + run.commas > 0;
      run.before += run.dots + run.commas == 0;
    } else if (s.at[i] == '.' || s.at[i] == ',') {
      run.dots += s.at[i] == '.';
      run.commas += s.at[i] == ',';
      run.behind = 0;
    } else if (mark > 0) {
      run.others++;
      i += mark - 1;
    } else
      break;
  }
  if (i > 0 && i + 1 < s.n && (s.at[i] == 'e' || s.at[i] == 'E')) {
    size_t k = i + 1 + (s.at[i + 1] == '-' || s.at[i + 1] == '+');
    if (k < s.n && is_digit (s.at[k]))
      for (i = k; i < s.n && is_digit (s.at[i]);)
        i++;
  }
  run.n = run.before + run.behind > 0 ? i : 0;
  return run;
}

static struct slice
behind_mark (struct slice s)
{
  if (s.n > 0 && s.at[0] == '<')
    s = (struct slice) { s.at + 1, s.n - 1 };
  else if (s.n > 2 && memcmp (s.at, "\xE2\x89\xA4", 3) == 0)            /* U+2264 */
    s = (struct slice) { s.at + 3, s.n - 3 };
  return slice_trimmed (s);
}

bool
amount_looks (struct slice s)
{
  s = behind_mark (slice_trimmed (s));
  if (s.n > 0 && (s.at[0] == '-' || s.at[0] == '+'))
    s = (struct slice) { s.at + 1, s.n - 1 };
  struct run run = run_of (s);
  /* A date, 2026-11-02 or 02.11.2026, is none.  */
  bool date = run.n < s.n && (s.at[run.n] == '-' || s.at[run.n] == '/' || s.at[run.n] == ':');
  return run.n > 0 && !date && !(run.dots == 2 && run.n == s.n && run.behind == 4);
}

bool
amount_may (struct slice s)
{
  s = slice_trimmed (s);
  return slice_is_word (s, none_words) || slice_is_word (s, not_detected_words)
         || slice_is_word (s, trace_words) || slice_is_word (s, rest_words) || amount_looks (s);
}

void
decimal_look (struct decimal_signs *signs, const struct csv_cell *cell)
{
  struct slice s = behind_mark (slice_trimmed ((struct slice) { cell->text, cell->length }));
  struct run run = run_of (s);
  if (run.n == 0 || run.dots + run.commas != 1)
    return;
  if (run.dots == 1) {
    signs->dot = signs->dot != NULL ? signs->dot : cell;
    return;
  }
  signs->comma = signs->comma != NULL ? signs->comma : cell;
  signs->certain = signs->certain || run.behind != 3 || run.before > 3 || run.before == 0
                   || run.first == '0';
}

/* Why a run of digits is no number with that decimal sign; null: it is one.  */
static const char *
run_refused (const struct run *run, char decimal)
{
  if (run->dots + run->commas > 1 || run->others > 0)
    return "it has thousands marks; write the digits without them";
  if (run->commas == 1 && decimal != ',')
    return "it has a comma where the decimal sign is '.'";
  if (run->dots == 1 && decimal != '.')
    return "it has a point where the decimal sign is ','";
  return NULL;
}

/* The number at the front of S into *NUMBER and *FIGURE; what stands behind into *REST.  */
static const char *
read_number (struct arena *arena, struct slice s, char decimal, struct cell_amount *a,
             struct slice *rest)
{
  struct run run = run_of (s);
  bool too_large = false;
  if (run.n == 0)
    return "a figure, <figure, ND, n/a, trace or nothing is expected";
  const char *why = run_refused (&run, decimal);
  if (why != NULL)
    return why;
  char *figure = arena_copy (arena, s.at, run.n);
  char *comma = strchr (figure, ',');
  if (comma != NULL)
    *comma = '.';
  a->figure = figure;
  if (!number_read (figure, run.n, &a->number, &too_large))
    return too_large ? "it is too large to compute with" : "it is no number";
  *rest = slice_trimmed ((struct slice) { s.at + run.n, s.n - run.n });
  return NULL;
}

/* ---- Cells ---- */

/* Where a +/- stands in S; its bytes into *LENGTH, 0 if there is none.  */
static size_t
plus_minus_at (struct slice s, size_t *length)
{
  for (size_t i = 0; i < s.n; i++) {
    *length = s.n - i >= 3 && memcmp (s.at + i, "+/-", 3) == 0 ? 3
              : s.n - i >= 2 && memcmp (s.at + i, "\xC2\xB1", 2) == 0 ? 2 : 0;
    if (*length > 0)
      return i;
  }
  *length = 0;
  return s.n;
}

static struct cell_amount
bad (const char *why)
{
  return (struct cell_amount) { .kind = CELL_BAD, .why = why };
}

struct cell_amount
amount_read (struct arena *arena, const struct laboratory_words *words, struct slice s,
             char decimal)
{
  struct cell_amount a = { .kind = CELL_AMOUNT, .amount = LABORATORY_FIGURE };
  struct slice rest = { NULL, 0 };
  s = slice_trimmed (s);
  if (slice_is_word (s, none_words))
    return (struct cell_amount) { .kind = CELL_NONE };
  if (slice_is_word (s, not_detected_words) || slice_is_word (s, trace_words)) {
    a.amount = slice_is_word (s, trace_words) ? LABORATORY_TRACE : LABORATORY_NOT_DETECTED;
    a.figure = "0";
    return a;
  }
  if (slice_is_word (s, rest_words)) {
    a.amount = LABORATORY_REST;
    a.figure = "rest";
    return a;
  }
  struct slice figure = behind_mark (s);
  if (figure.n != s.n)
    a.amount = LABORATORY_BELOW;
  if (figure.n > 0 && (figure.at[0] == '-' || (figure.n > 2
                                               && memcmp (figure.at, "\xE2\x88\x92", 3) == 0)))
    return bad ("an amount is not negative");
  if (figure.n > 1 && figure.at[0] == '+')
    figure = (struct slice) { figure.at + 1, figure.n - 1 };
  const char *why = read_number (arena, figure, decimal, &a, &rest);
  if (why != NULL)
    return bad (why);
  size_t length, sign = plus_minus_at (rest, &length);
  if (length > 0) {
    a.spread = slice_trimmed ((struct slice) { rest.at + sign + length, rest.n - sign - length });
    rest = slice_trimmed ((struct slice) { rest.at, sign });
    if (a.spread.n == 0 || a.amount == LABORATORY_BELOW)
      return bad (a.spread.n == 0 ? "an uncertainty is missing behind the sign"
                                  : "what is below a limit has no uncertainty");
  }
  if (rest.n > 0) {
    a.unit = slice_unit (arena, words, rest, &a.unit_text, &a.percent);
    if (a.unit == NULL && !a.percent)
      return bad ("what stands behind the figure is no unit of an amount");
  }
  return a;
}
