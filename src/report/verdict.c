/* The verdict on a balance.

          plant   SHORT BY 1     feed counts for 2 facts: flow and composition
                  6 variables; 2 balances + 0 relations + 3 knowns, 5 independent
          fixed all the same     feed; compositions of feed and product

   A row that quotes the user has the number of his line in the margin.                          */
#include "config.h"
#include "report/report_private.h"

#include <stdio.h>
#include <string.h>

#include "result/balance_verdict.h"
#include "support/text.h"

enum { NAME_COLUMN = 8, PHRASE_COLUMN = 15, LABEL_COLUMN = NAME_COLUMN + PHRASE_COLUMN };

/* STRING in a column of WIDTH, with a blank behind it at least.  */
static void
column_add (struct text *out, const struct report_style *style, const char *string, size_t width)
{
  const size_t used = shown_width (style, string);
  shown_add (out, style, string);
  text_add_repeated (out, ' ', used < width ? width - used : 1);
}

static size_t
name_width (const struct report_style *style, const struct balance_verdict *v)
{
  const size_t used = shown_width (style, v->name) + 1;
  return used > NAME_COLUMN ? used : NAME_COLUMN;
}

/* Folds what may be of the line, and ends it without blanks.  */
static void
end_line (struct text *out, const struct report_style *style, struct fold fold)
{
  fold_line (out, style, fold);
  while (out->length > 0 && out->bytes[out->length - 1] == ' ')
    out->bytes[--out->length] = '\0';
  text_add_char (out, '\n');
}

static void
head_add (struct text *out, const struct report_style *style, const struct balance_verdict *v)
{
  const size_t width = name_width (style, v);
  text_add_repeated (out, ' ', MARGIN);
  column_add (out, style, v->name, width);
  weight_open (out, style, WEIGHT_BOLD);
  shown_add (out, style, v->phrase);
  weight_close (out, style);
  const size_t used = shown_width (style, v->phrase);
  text_add_repeated (out, ' ', used < PHRASE_COLUMN ? PHRASE_COLUMN - used : 2);
  struct fold fold = fold_here (out);
  shown_add (out, style, v->head);
  end_line (out, style, fold);
  text_add_repeated (out, ' ', MARGIN + width);
  fold = fold_here (out);
  shown_add (out, style, v->counts);
  end_line (out, style, fold);
}

static void
facts_add (struct text *out, const struct report_style *style, const struct balance_verdict *v)
{
  for (const struct verdict_row *row = v->facts; row != NULL; row = row->next) {
    text_add_repeated (out, ' ', MARGIN);
    if (shown_width (style, row->cell[0]) < LABEL_COLUMN)
      column_add (out, style, row->cell[0], LABEL_COLUMN);
    else {                                       /* a label of many words has a line to itself */
      shown_add (out, style, row->cell[0]);
      text_add_char (out, '\n');
      text_add_repeated (out, ' ', MARGIN + LABEL_COLUMN);
    }
    const struct fold fold = fold_here (out);
    shown_add (out, style, row->cell[1]);
    end_line (out, style, fold);
  }
}

/* Widths of the cells, headings included.  */
static void
measure (const struct report_style *style, const struct balance_verdict *v, size_t wide[4])
{
  for (int i = 0; i < 4; i++) {
    wide[i] = shown_width (style, v->heading[i]) + (i == 0 && v->clash ? strlen ("clash: ") : 0);
    for (const struct verdict_row *row = v->rows; row != NULL; row = row->next) {
      const size_t used = shown_width (style, row->cell[i]);
      wide[i] = used > wide[i] ? used : wide[i];
    }
    wide[i] += i == 0 && v->clash ? 1 : 4;
  }
  wide[0] = !v->clash && wide[0] < NAME_COLUMN ? NAME_COLUMN : wide[0];
}

/* The cells from FIRST on, each in its column; the last that holds something may be folded.  */
static void
cells_add (struct text *out, const struct report_style *style, const char *const cell[4],
           const size_t wide[4], int first)
{
  struct fold fold = fold_here (out);
  for (int i = first; i < 4; i++) {
    if (cell[i] != NULL && *cell[i] != '\0')
      fold = fold_here (out);
    column_add (out, style, cell[i], wide[i]);
  }
  end_line (out, style, fold);
}

static void
rows_add (struct text *out, const struct report_style *style, const struct balance_verdict *v)
{
  size_t wide[4];
  measure (style, v, wide);
  if (v->clash) {
    text_add (out, "  x   ");
    text_add (out, "clash: ");
    column_add (out, style, v->heading[0], wide[0] - strlen ("clash: "));
  } else {
    text_add_repeated (out, ' ', MARGIN);
    column_add (out, style, v->heading[0], wide[0]);
  }
  cells_add (out, style, v->heading, wide, 1);
  for (const struct verdict_row *row = v->rows; row != NULL; row = row->next) {
    if (row->number > 0)
      text_add_format (out, "%4zu  ", row->number);
    else
      text_add_repeated (out, ' ', MARGIN);
    cells_add (out, style, row->cell, wide, 0);
  }
}

void
report_verdict (struct text *out, const struct report_style *style,
                const struct balance_verdict *v)
{
  head_add (out, style, v);
  if (v->rows != NULL)
    rows_add (out, style, v);
  facts_add (out, style, v);
}

/* ---- JSON ----

   {"name","variables","balances","relations","knowns","independent","degrees_of_freedom","surplus",
    "status":"determined|underdetermined|redundant|contradictory|reconciled",
    "streams":{NAME:{"molar_flow","mass_flow","uncertainty","fractions":{...},
      "fraction_uncertainties":{...}}},"ranges":{NAME:{"least","greatest"}},"determined":[text],
    "undetermined":[text],"suggestions":[[text]],"relations_left":[text],"negative":[NAME],
    "impossible":[line],
    "practically_undetermined":[{"what","value","moves","unit"}],
    "hangs_on":[{"line","statement","what","least","greatest","unit"}],"settled_by":[[text]],
    "gap":{"around","component","value","unit"}|null,"conflict":[line],
    "smallest":bool|null,"redundant":[line],
    "suspects":[{"line","statement","needed","least","greatest","unit"}],
    "pairs":[[suspect, suspect]],"pairs_left",
    "adjustments":[{"statement","component","stated","reconciled","uncertainty","unit","z"}],
    "global_test":{"chi2","degrees_of_freedom","critical","passed"}|null,"phrase","head","counts",
    "says":[[label, text]],"lists":[{"what","names":[text]}]}
   Flows are in mol/s and kg/s, "uncertainty" that of the molar flow (of the mass flow where all
   flows are by mass); what is open, and the z of a figure that nothing checks, is null.         */

static void
text_member (struct text *out, const char *key, const char *value)
{
  text_add (out, key);
  if (value != NULL)
    json_string (out, value);
  else
    text_add (out, "null");
}

static void
texts_add (struct text *out, const char *key, const struct verdict_texts *texts)
{
  text_add (out, key);
  text_add_char (out, '[');
  for (size_t i = 0; i < texts->count; i++) {
    text_add (out, i > 0 ? "," : "");
    json_string (out, texts->at[i]);
  }
  text_add_char (out, ']');
}

static void
fractions_add (struct text *out, const char *key, const struct balance_verdict *v,
               const double values[])
{
  text_add (out, key);
  text_add_char (out, '{');
  for (size_t c = 0; c < v->component_count; c++) {
    text_add (out, c > 0 ? "," : "");
    json_string (out, v->components[c]);
    json_figure (out, ":", values[c]);
  }
  text_add_char (out, '}');
}

static void
streams_add (struct text *out, const struct balance_verdict *v)
{
  text_add (out, ",\"streams\":{");
  for (size_t s = 0; s < v->stream_count; s++) {
    const struct verdict_stream *stream = &v->streams[s];
    text_add (out, s > 0 ? "," : "");
    json_string (out, stream->name);
    json_figure (out, ":{\"molar_flow\":", stream->molar_flow);
    json_figure (out, ",\"mass_flow\":", stream->mass_flow);
    json_figure (out, ",\"uncertainty\":", stream->uncertainty);
    fractions_add (out, ",\"fractions\":", v, stream->fractions);
    fractions_add (out, ",\"fraction_uncertainties\":", v, stream->fractions_u);
    text_add_char (out, '}');
  }
  text_add (out, "},\"ranges\":{");
  for (size_t i = 0; i < v->range_count; i++) {
    text_add (out, i > 0 ? "," : "");
    json_string (out, v->ranges[i].name);
    json_figure (out, ":{\"least\":", v->ranges[i].least);
    json_figure (out, ",\"greatest\":", v->ranges[i].greatest);
    text_add_char (out, '}');
  }
  text_add_char (out, '}');
}

/* What hangs on last digits, and on whose.  */
static void
loose_add (struct text *out, const struct balance_verdict *v)
{
  text_add (out, ",\"practically_undetermined\":[");
  for (size_t i = 0; i < v->loose_count; i++) {
    const struct verdict_loose *loose = &v->loose[i];
    text_member (out, i > 0 ? ",{\"what\":" : "{\"what\":", loose->what);
    json_figure (out, ",\"value\":", loose->value);
    json_figure (out, ",\"moves\":", loose->moves);
    text_member (out, ",\"unit\":", loose->unit);
    text_add_char (out, '}');
  }
  text_add (out, "],\"hangs_on\":[");
  for (size_t i = 0; i < v->hinge_count; i++) {
    const struct verdict_hinge *hinge = &v->hinges[i];
    text_add_format (out, "%s{\"line\":%zu", i > 0 ? "," : "", hinge->line);
    text_member (out, ",\"statement\":", hinge->statement);
    text_member (out, ",\"what\":", hinge->what);
    json_figure (out, ",\"least\":", hinge->least);
    json_figure (out, ",\"greatest\":", hinge->greatest);
    text_member (out, ",\"unit\":", hinge->unit);
    text_add_char (out, '}');
  }
  text_add (out, "],\"settled_by\":[");
  for (size_t i = 0; i < v->settled_by_count; i++)
    texts_add (out, i > 0 ? "," : "", &v->settled_by[i]);
  text_add_char (out, ']');
}

static void
suspect_add (struct text *out, const struct verdict_suspect *suspect)
{
  text_add_format (out, "{\"line\":%zu", suspect->line);
  text_member (out, ",\"statement\":", suspect->statement);
  json_figure (out, ",\"needed\":", suspect->needed);
  json_figure (out, ",\"least\":", suspect->least);
  json_figure (out, ",\"greatest\":", suspect->greatest);
  text_member (out, ",\"unit\":", suspect->unit);
  text_add_char (out, '}');
}

static void
suspects_add (struct text *out, const struct balance_verdict *v)
{
  text_add (out, ",\"suspects\":[");
  for (size_t i = 0; i < v->suspect_count; i++) {
    text_add (out, i > 0 ? "," : "");
    suspect_add (out, &v->suspects[i]);
  }
  text_add (out, "],\"pairs\":[");
  for (size_t i = 0; i < v->pair_count; i++) {
    text_add (out, i > 0 ? ",[" : "[");
    suspect_add (out, &v->pairs[i].at[0]);
    text_add_char (out, ',');
    suspect_add (out, &v->pairs[i].at[1]);
    text_add_char (out, ']');
  }
  text_add_format (out, "],\"pairs_left\":%zu", v->pairs_left);
}

static void
adjustments_add (struct text *out, const struct balance_verdict *v)
{
  text_add (out, ",\"adjustments\":[");
  for (size_t i = 0; i < v->adjustment_count; i++) {
    const struct verdict_adjustment *a = &v->adjustments[i];
    text_member (out, i > 0 ? ",{\"statement\":" : "{\"statement\":", a->statement);
    text_member (out, ",\"component\":", a->component);
    json_figure (out, ",\"stated\":", a->stated);
    json_figure (out, ",\"reconciled\":", a->reconciled);
    json_figure (out, ",\"uncertainty\":", a->uncertainty);
    text_member (out, ",\"unit\":", a->unit);
    json_figure (out, ",\"z\":", a->z);
    text_add_char (out, '}');
  }
  text_add_char (out, ']');
}

static void
counts_add (struct text *out, const struct balance_verdict *v)
{
  static const char *const status[] = { "determined", "underdetermined", "redundant",
                                        "contradictory", "reconciled" };
  text_member (out, "{\"name\":", v->name);
  text_add_format (out, ",\"variables\":%zu,\"balances\":%zu,\"relations\":%zu,\"knowns\":%zu"
                   ",\"independent\":%zu,\"degrees_of_freedom\":%zu,\"surplus\":%zu",
                   v->variables, v->balances, v->relations, v->knowns, v->independent,
                   v->missing, v->surplus);
  text_member (out, ",\"status\":", status[v->status]);
}

/* The sentences of the text form, as it has them.  */
static void
facts_json (struct text *out, const struct balance_verdict *v)
{
  text_member (out, ",\"phrase\":", v->phrase);
  text_member (out, ",\"head\":", v->head);
  text_member (out, ",\"counts\":", v->counts);
  text_add (out, ",\"says\":[");
  for (const struct verdict_row *row = v->facts; row != NULL; row = row->next) {
    text_add (out, row != v->facts ? ",[" : "[");
    json_string (out, row->cell[0]);
    text_add_char (out, ',');
    json_string (out, row->cell[1]);
    text_add_char (out, ']');
  }
  text_add (out, "],\"lists\":[");
  for (const struct verdict_list *list = v->lists; list != NULL; list = list->next) {
    text_member (out, list != v->lists ? ",{\"what\":" : "{\"what\":", list->what);
    texts_add (out, ",\"names\":", &list->names);
    text_add_char (out, '}');
  }
  text_add_char (out, ']');
}

void
report_verdict_json (struct text *out, const struct balance_verdict *v)
{
  counts_add (out, v);
  streams_add (out, v);
  texts_add (out, ",\"determined\":", &v->determined);
  texts_add (out, ",\"undetermined\":", &v->undetermined);
  text_add (out, ",\"suggestions\":[");
  for (size_t i = 0; i < v->suggestion_count; i++)
    texts_add (out, i > 0 ? "," : "", &v->suggestions[i]);
  text_add_char (out, ']');
  texts_add (out, ",\"relations_left\":", &v->relations_left);
  texts_add (out, ",\"negative\":", &v->negative);
  texts_add (out, ",\"impossible\":", &v->impossible);
  loose_add (out, v);
  if (v->gap_around != NULL) {
    text_member (out, ",\"gap\":{\"around\":", v->gap_around);
    text_member (out, ",\"component\":", v->gap_component);
    json_figure (out, ",\"value\":", v->gap);
    text_member (out, ",\"unit\":", v->gap_unit);
    text_add_char (out, '}');
  } else {
    text_add (out, ",\"gap\":null");
  }
  texts_add (out, ",\"conflict\":", &v->conflict);
  text_add (out, !v->clash ? ",\"smallest\":null" : v->smallest ? ",\"smallest\":true"
                                                               : ",\"smallest\":false");
  texts_add (out, ",\"redundant\":", &v->redundant);
  suspects_add (out, v);
  adjustments_add (out, v);
  if (v->tested) {
    json_figure (out, ",\"global_test\":{\"chi2\":", v->chi2);
    text_add_format (out, ",\"degrees_of_freedom\":%zu", v->freedom);
    json_figure (out, ",\"critical\":", v->critical);
    text_add_format (out, ",\"passed\":%s}", v->passed ? "true" : "false");
  } else {
    text_add (out, ",\"global_test\":null");
  }
  facts_json (out, v);
  text_add_char (out, '}');
}
