/* Results and faults as JSON (RFC 8259), one object a line, UTF-8, numbers in the shortest form
   that reads back equal.

   A result: {"statement","answers":[{"what","label"?,"value","unit","basis","uncertainty"?,
       "expanded"?,"coverage"?}],
     "card"?,"further_cards"?,"help"?,"workings"?,"taken":[...],"notes":[...],"cautions":[...]}
   "basis" begins with wet or dry where that is known and is "" where there is none to state.  A
   figure nobody could compute is null.  "uncertainty" is standard; "expanded" is that times
   "coverage", where one is set.  The lists hold the sentences of the text form without the
   word that opens the line; what was taken ends with its bracket.
   A card: {"title","kind","columns":[heading],"rows":[{"name","values":[number, text or null]}],
     "lines":[text]}; "further_cards" holds those behind the first.
   A check adds "readings":[{"reading","value","unit","deviation","cost"}], best first, and
   "check":{"stated","outcome","value","difference","deviation","limit","limit_by","unit","tied",
     "ruled_out":[as readings],"needed":[{"what","value","unit","least","greatest"}]}; a value that
     nothing makes true is null.  Of a sheet it has "agreeing" and "figures":[{"name","stated",
     "value","unit","deviation","agrees","as_written"}] in place of what one figure has.
   A trend: "trend":{"what","over","unit","rows":[{"name","value","uncertainty"?,"basis","why"?,
     "standing"}],"all":numbers,"without_outliers"?:numbers,"grubbs"?:{"G","of","straggler_above",
     "outlier_above"}}; numbers are {"count","mean","standard_deviation","median","least",
     "greatest","least_of","greatest_of"}; a standing is usual, straggler or outlier.
   A balance: see verdict.c.
   Help: {"title","entries":[{"say","get","try"}]}.
   A fault: {"statement","error":{"kind","message","file"?,"line","column","hint"}}; "hint" is a
   corrected line where there is one, else what was expected, else "".  A place not known is 0.
   Members may be added, never renamed.                                                          */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <string.h>

#include "result/check_verdict.h"
#include "result/result.h"
#include "result/trend.h"
#include "support/fault.h"
#include "support/number.h"
#include "support/text.h"

static bool
is_safe (unsigned char c)
{
  return c >= 0x20 && c < 0x80 && c != '"' && c != '\\';
}

static size_t
safe_run (const char *bytes, size_t n)
{
  size_t run = 0;
  while (run < n && is_safe ((unsigned char) bytes[run]))
    run++;
  return run;
}

/* One character that is not safe; returns the bytes it used up.  Bytes that are no UTF-8 become
   the replacement character.                                                                    */
static size_t
escape (struct text *out, const char *bytes, size_t n)
{
  const unsigned char c = (unsigned char) *bytes;
  unsigned code;
  const size_t length = utf8_decode (bytes, n, &code);
  if (c == '"' || c == '\\') {
    text_add_char (out, '\\');
    text_add_char (out, (char) c);
  } else if (c == '\n')
    text_add (out, "\\n");
  else if (c == '\t')
    text_add (out, "\\t");
  else if (c < 0x20)
    text_add_format (out, "\\u%04x", (unsigned) c);
  else if (length > 0)
    text_add_bytes (out, bytes, length);
  else
    text_add (out, "\uFFFD");
  return length > 0 ? length : 1;
}

static void
escaped (struct text *out, const char *bytes, size_t n)
{
  for (size_t at = 0; at < n;) {
    const size_t run = safe_run (bytes + at, n - at);
    text_add_bytes (out, bytes + at, run);
    at += run;
    if (at < n)
      at += escape (out, bytes + at, n - at);
  }
}

void
json_string (struct text *out, const char *string)
{
  text_add_char (out, '"');
  escaped (out, string, strlen (string));
  text_add_char (out, '"');
}

/* Makes a string of what was added raw behind its opening quote, from START on.  */
static void
close_string (struct text *out, size_t start)
{
  const size_t n = out->length - start;
  const size_t run = safe_run (out->bytes + start, n);
  if (run < n) {
    struct text rest;
    text_init (&rest);
    text_add_bytes (&rest, out->bytes + start + run, n - run);
    out->length = start + run;
    escaped (out, rest.bytes, rest.length);
    text_clear (&rest);
  }
  text_add_char (out, '"');
}

void
json_member (struct text *out, const char *key, const char *value)
{
  text_add (out, key);
  json_string (out, value != NULL ? value : "");
}

void
json_figure (struct text *out, const char *key, double value)
{
  text_add (out, key);
  if (isfinite (value))
    number_write_exact (out, value);
  else
    text_add (out, "null");
}

static void
answer_add (struct text *out, const struct answer *answer)
{
  json_member (out, "{\"what\":", answer->what);
  if (answer->label != NULL)
    json_member (out, ",\"label\":", answer->label);
  json_figure (out, ",\"value\":", answer->value);
  json_member (out, ",\"unit\":", answer->unit);
  text_add (out, ",\"basis\":\"");
  const bool moist = answer->moisture != NULL && *answer->moisture != '\0';
  const bool based = answer->basis != NULL && *answer->basis != '\0';
  if (moist)
    escaped (out, answer->moisture, strlen (answer->moisture));
  if (moist && based)
    text_add (out, ", ");
  if (based)
    escaped (out, answer->basis, strlen (answer->basis));
  text_add_char (out, '"');
  if (isfinite (answer->uncertainty)) {
    text_add (out, ",\"uncertainty\":");
    number_write_exact (out, answer->uncertainty);
    if (answer->coverage > 1) {
      json_figure (out, ",\"expanded\":", answer->coverage * answer->uncertainty);
      json_figure (out, ",\"coverage\":", answer->coverage);
    }
  }
  text_add_char (out, '}');
}

static void
remarks_add (struct text *out, const char *key, const struct remark *remarks)
{
  text_add (out, key);
  text_add_char (out, '[');
  for (const struct remark *r = remarks; r != NULL; r = r->next) {
    text_add_char (out, '"');
    const size_t start = out->length;
    remark_sentence (out, r);
    const size_t end = out->length;
    text_add_char (out, ' ');
    if (!remark_bracket (out, r))
      out->length = end;
    close_string (out, start);
    if (r->next != NULL)
      text_add_char (out, ',');
  }
  text_add_char (out, ']');
}

static void
cell_add (struct text *out, const struct cell *cell)
{
  if (cell->text != NULL)
    json_string (out, cell->text);
  else
    json_figure (out, "", cell->is_number ? cell->value : (double) NAN);
}

/* The uncertainties of a row, where it has any.  */
static void
spreads_add (struct text *out, const struct card *card, const struct card_row *row)
{
  bool any = false;
  for (size_t i = 0; i < card->columns; i++)
    any = any || figure_is_uncertain (row->cells[i].value, row->cells[i].spread);
  for (size_t i = 0; any && i < card->columns; i++) {
    const struct cell *cell = &row->cells[i];
    json_figure (out, i > 0 ? "," : ",\"uncertainties\":[",
                 figure_is_uncertain (cell->value, cell->spread) ? cell->spread : (double) NAN);
  }
  text_add (out, any ? "]" : "");
}

static void
card_add (struct text *out, const struct card *card)
{
  json_member (out, "{\"title\":", card->title);
  json_member (out, ",\"kind\":", card->kind);
  text_add (out, ",\"columns\":[");
  for (size_t i = 0; i < card->columns; i++)
    json_member (out, i > 0 ? "," : "", card->headings != NULL ? card->headings[i] : NULL);
  text_add (out, "],\"rows\":[");
  for (const struct card_row *r = card->rows; r != NULL; r = r->next) {
    json_member (out, "{\"name\":", r->name);
    text_add (out, ",\"values\":[");
    for (size_t i = 0; i < card->columns; i++) {
      text_add (out, i > 0 ? "," : "");
      cell_add (out, &r->cells[i]);
    }
    text_add_char (out, ']');
    spreads_add (out, card, r);
    text_add (out, r->next != NULL ? "}," : "}");
  }
  text_add (out, "],\"lines\":[");
  for (const struct card_line *l = card->lines; l != NULL; l = l->next) {
    json_string (out, l->text);
    text_add (out, l->next != NULL ? "," : "");
  }
  text_add (out, "]}");
}

static void
cards_add (struct text *out, const struct card *cards)
{
  text_add (out, ",\"card\":");
  card_add (out, cards);
  if (cards->next == NULL)
    return;
  text_add (out, ",\"further_cards\":[");
  for (const struct card *c = cards->next; c != NULL; c = c->next) {
    card_add (out, c);
    text_add (out, c->next != NULL ? "," : "]");
  }
}

static void
help_page_add (struct text *out, const struct help_page *page)
{
  json_member (out, ",\"help\":{\"title\":", page->title);
  text_add (out, ",\"entries\":[");
  for (const struct help_entry *e = page->entries; e != NULL; e = e->next) {
    json_member (out, "{\"say\":", e->say);
    json_member (out, ",\"get\":", e->get);
    json_member (out, ",\"try\":", e->example);
    text_add (out, e->next != NULL ? "}," : "}");
  }
  text_add (out, "]}");
}

static void
readings_add (struct text *out, const char *key, const struct check_reading *readings)
{
  text_add (out, key);
  for (const struct check_reading *r = readings; r != NULL; r = r->next) {
    json_member (out, r != readings ? ",{\"reading\":" : "{\"reading\":", r->reading);
    json_figure (out, ",\"value\":", r->value);
    json_member (out, ",\"unit\":", r->unit);
    json_figure (out, ",\"deviation\":", r->deviation);
    text_add_format (out, ",\"cost\":%d}", r->cost);
  }
  text_add_char (out, ']');
}

static void
needs_add (struct text *out, const struct check_need *needs)
{
  text_add (out, ",\"needed\":[");
  for (const struct check_need *n = needs; n != NULL; n = n->next) {
    json_member (out, n != needs ? ",{\"what\":" : "{\"what\":", n->what);
    json_figure (out, ",\"value\":", n->value);
    json_member (out, ",\"unit\":", n->unit);
    json_figure (out, ",\"least\":", n->least);
    json_figure (out, ",\"greatest\":", n->greatest);
    text_add_char (out, '}');
  }
  text_add_char (out, ']');
}

static void
figures_add (struct text *out, const struct check_verdict *v)
{
  text_add_format (out, ",\"agreeing\":%zu,\"figures\":[", v->agreeing);
  for (const struct check_figure *f = v->figures; f != NULL; f = f->next) {
    json_member (out, f != v->figures ? ",{\"name\":" : "{\"name\":", f->name);
    json_member (out, ",\"stated\":", f->stated);
    json_figure (out, ",\"value\":", f->computed);
    json_member (out, ",\"unit\":", f->unit);
    json_figure (out, ",\"deviation\":", f->deviation);
    text_add_format (out, ",\"agrees\":%s,\"as_written\":%s}", f->holds ? "true" : "false",
                     f->as_written ? "true" : "false");
  }
  text_add_char (out, ']');
}

static void
check_add (struct text *out, const struct check_verdict *v)
{
  static const char *const outcomes[] = { "holds", "readings", "unexplained" };
  readings_add (out, ",\"readings\":[", v->readings);
  json_member (out, ",\"check\":{\"stated\":", v->stated);
  json_member (out, ",\"outcome\":", outcomes[v->outcome]);
  if (v->figures != NULL)
    figures_add (out, v);
  else {
    json_figure (out, ",\"value\":", v->value);
    json_figure (out, ",\"difference\":", v->difference);
    json_figure (out, ",\"deviation\":", v->deviation);
    json_figure (out, ",\"limit\":", v->limit);
    json_member (out, ",\"limit_by\":", v->by_digits ? "digits" : "uncertainty");
    json_member (out, ",\"unit\":", v->unit);
  }
  text_add_format (out, ",\"tied\":%zu", v->tied);
  readings_add (out, ",\"ruled_out\":[", v->ruled_out);
  needs_add (out, v->needs);
  text_add_char (out, '}');
}

static void
numbers_add (struct text *out, const char *key, const struct trend_numbers *n)
{
  text_add_format (out, "%s{\"count\":%zu", key, n->count);
  json_figure (out, ",\"mean\":", n->mean);
  json_figure (out, ",\"standard_deviation\":", n->standard_deviation);
  json_figure (out, ",\"median\":", n->median);
  if (isfinite (n->robust_deviation))
    json_figure (out, ",\"robust_deviation\":", n->robust_deviation);
  json_figure (out, ",\"least\":", n->least);
  json_figure (out, ",\"greatest\":", n->greatest);
  json_member (out, ",\"least_of\":", n->least_of);
  json_member (out, ",\"greatest_of\":", n->greatest_of);
  text_add_char (out, '}');
}

static void
basis_member (struct text *out, const char *moisture, const char *basis)
{
  struct text both;
  text_init (&both);
  text_add (&both, moisture != NULL ? moisture : "");
  text_add (&both, moisture != NULL && basis != NULL ? ", " : "");
  text_add (&both, basis != NULL ? basis : "");
  json_member (out, ",\"basis\":", both.bytes);
  text_clear (&both);
}

static void
trend_row_add (struct text *out, const struct trend *trend, const struct trend_row *r)
{
  static const char *const standings[] = { "usual", "straggler", "outlier" };
  json_member (out, "{\"name\":", r->name);
  json_figure (out, ",\"value\":", r->value);
  if (isfinite (r->uncertainty))
    json_figure (out, ",\"uncertainty\":", r->uncertainty);
  basis_member (out, r->moisture != NULL ? r->moisture : trend->moisture,
                r->basis != NULL ? r->basis : trend->basis);
  if (r->why != NULL)
    json_member (out, ",\"why\":", r->why);
  json_member (out, ",\"standing\":", standings[r->standing]);
  if (trend->limit > 0 && isfinite (r->apart))
    json_figure (out, ",\"apart\":", r->apart);
  text_add_char (out, '}');
}

static void
trend_add (struct text *out, const struct trend *trend)
{
  json_member (out, ",\"trend\":{\"what\":", trend->what);
  json_member (out, ",\"over\":", trend->over);
  json_member (out, ",\"unit\":", trend->unit);
  text_add (out, ",\"rows\":[");
  for (size_t i = 0; i < trend->count; i++) {
    text_add (out, i > 0 ? "," : "");
    trend_row_add (out, trend, &trend->rows[i]);
  }
  text_add_char (out, ']');
  numbers_add (out, ",\"all\":", &trend->all);
  if (trend->outliers > 0)
    numbers_add (out, ",\"without_outliers\":", &trend->without);
  if (trend->tested) {
    json_figure (out, ",\"grubbs\":{\"G\":", trend->G);
    json_member (out, ",\"of\":", trend->tested_of);
    json_figure (out, ",\"straggler_above\":", trend->straggler);
    json_figure (out, ",\"outlier_above\":", trend->outlier);
    text_add_char (out, '}');
  }
  if (trend->limit > 0) {
    json_figure (out, ",\"hampel\":{\"limit\":", trend->limit);
    text_add_format (out, ",\"beyond\":%zu", trend->beyond);
    json_figure (out, ",\"farthest\":", trend->farthest);
    json_member (out, ",\"of\":", trend->farthest_of);
    text_add_char (out, '}');
  }
  text_add_char (out, '}');
}

void
report_json (struct text *out, const struct result *result)
{
  if (result_is_empty (result))
    return;
  json_member (out, "{\"statement\":", result->statement);
  text_add (out, ",\"answers\":[");
  for (const struct answer *a = result->answers; a != NULL; a = a->next) {
    answer_add (out, a);
    if (a->next != NULL)
      text_add_char (out, ',');
  }
  text_add_char (out, ']');
  if (result->cards != NULL)
    cards_add (out, result->cards);
  if (result->help != NULL)
    help_page_add (out, result->help);
  if (result->check != NULL)
    check_add (out, result->check);
  if (result->trend != NULL)
    trend_add (out, result->trend);
  if (result->workings != NULL)
    report_workings_json (out, result->workings);
  if (result->balance != NULL) {
    text_add (out, ",\"balance\":");
    report_verdict_json (out, result->balance);
  }
  remarks_add (out, ",\"taken\":", result->taken);
  remarks_add (out, ",\"notes\":", result->notes);
  remarks_add (out, ",\"cautions\":", result->cautions);
  text_add (out, "}\n");
}

void
report_fault_json (struct text *out, const struct fault *fault,
                   const struct report_origin *origin)
{
  struct fault_words words;
  fault_words_init (&words, fault, origin->line != NULL ? origin->line : origin->statement);
  const bool line = words.line.length > 0;
  if (line && words.phrase.length > 0) {
    text_add (&words.sentence, "; ");
    text_add (&words.sentence, words.phrase.bytes);
  }
  json_member (out, "{\"statement\":", origin->statement);
  json_member (out, ",\"error\":{\"kind\":", message_name (fault->kind));
  json_member (out, ",\"message\":", words.sentence.bytes);
  if (origin->file != NULL)
    json_member (out, ",\"file\":", origin->file);
  text_add_format (out, ",\"line\":%d,\"column\":%d", fault->at.line, fault->at.first);
  json_member (out, ",\"hint\":", line ? words.line.bytes : words.phrase.bytes);
  text_add (out, "}}\n");
  fault_words_clear (&words);
}
