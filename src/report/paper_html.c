/* HTML, self-contained and meant to be printed: no script, no file beside it.  */
#include "config.h"
#include "report/paper.h"

#include "report/canvas.h"
#include "support/text.h"

static const char style[] =
  "@page { size: A4; margin: 20mm 18mm; }\n"
  "body { font-family: Georgia, \"Times New Roman\", serif; font-size: 10.5pt; line-height: 1.35;"
  " max-width: 172mm; margin: 0 auto; padding: 4mm; color: #000; background: #fff; }\n"
  "h1 { font-size: 17pt; margin: 0 0 1mm; border-bottom: 1.5pt solid #000; }\n"
  "h2 { font-size: 12pt; margin: 7mm 0 2mm; border-bottom: .5pt solid #000;"
  " break-after: avoid; }\n"
  "h3 { font-size: 10.5pt; margin: 4mm 0 1mm; break-after: avoid; }\n"
  "p { margin: 1mm 0 2mm; }\n"
  "table { border-collapse: collapse; width: 100%; margin: 1mm 0 3mm; }\n"
  "th { text-align: left; font-weight: normal; font-style: italic;"
  " border-bottom: .5pt solid #000; }\n"
  "th, td { padding: .6mm 2mm .6mm 0; vertical-align: top; overflow-wrap: anywhere; }\n"
  "td { border-bottom: .25pt solid #bbb; }\n"
  "tr { break-inside: avoid; }\n"
  "ul { margin: 1mm 0 3mm; padding-left: 5mm; }\n"
  "pre { font-size: 9pt; white-space: pre-wrap; margin: 1mm 0 3mm; }\n"
  "svg { max-width: 100%; height: auto; display: block; margin: 2mm 0; }\n"
  ".below { font-style: italic; }\n"
  ".sign { margin: 12mm 0 0; display: flex; gap: 4mm; }\n"
  ".sign span { flex: 1; border-bottom: .5pt solid #000; }\n";

static void
element (struct paper *paper, const char *name, const char *string)
{
  text_add_format (paper->out, "<%s>", name);
  markup_add (paper->out, string);
  text_add_format (paper->out, "</%s>\n", name);
}

static void
begin (struct paper *paper, const char *title, const char *below)
{
  text_add (paper->out, "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n");
  element (paper, "title", title);
  text_add_format (paper->out, "<style>\n%s</style>\n</head>\n<body>\n", style);
  element (paper, "h1", title);
  text_add (paper->out, "<p class=\"below\">");
  markup_add (paper->out, below);
  text_add (paper->out, "</p>\n");
}

static void
heading (struct paper *paper, const char *string)
{
  element (paper, "h2", string);
}

static void
subheading (struct paper *paper, const char *string)
{
  element (paper, "h3", string);
}

static void
paragraph (struct paper *paper, const char *string)
{
  element (paper, "p", string);
}

static void
cells_add (struct paper *paper, const char *name, size_t n, const char *const cells[])
{
  text_add (paper->out, "<tr>");
  for (size_t i = 0; i < n; i++) {
    text_add_format (paper->out, "<%s>", name);
    markup_add (paper->out, cells[i] != NULL ? cells[i] : "");
    text_add_format (paper->out, "</%s>", name);
  }
  text_add (paper->out, "</tr>\n");
}

static void
table_open (struct paper *paper, size_t n, const char *const headings[])
{
  text_add (paper->out, "<table>\n<thead>\n");
  cells_add (paper, "th", n, headings);
  text_add (paper->out, "</thead>\n<tbody>\n");
}

static void
row (struct paper *paper, size_t n, const char *const cells[])
{
  cells_add (paper, "td", n, cells);
}

static void
table_close (struct paper *paper)
{
  text_add (paper->out, "</tbody>\n</table>\n");
}

static void
list_open (struct paper *paper)
{
  text_add (paper->out, "<ul>\n");
}

static void
item (struct paper *paper, const char *string)
{
  element (paper, "li", string);
}

static void
list_close (struct paper *paper)
{
  text_add (paper->out, "</ul>\n");
}

static void
code_open (struct paper *paper)
{
  text_add (paper->out, "<pre>");
}

static void
line (struct paper *paper, const char *string)
{
  markup_add (paper->out, string);
  text_add_char (paper->out, '\n');
}

static void
code_close (struct paper *paper)
{
  text_add (paper->out, "</pre>\n");
}

static void
picture (struct paper *paper, const char *svg)
{
  text_add (paper->out, svg);
}

static void
signature (struct paper *paper, const char *who)
{
  text_add (paper->out, "<div class=\"sign\">");
  markup_add (paper->out, who);
  text_add (paper->out, "<span>&nbsp;</span>Date<span>&nbsp;</span></div>\n");
}

static void
end (struct paper *paper)
{
  text_add (paper->out, "</body>\n</html>\n");
}

const struct paper_form paper_html = {
  .begin = begin, .heading = heading, .subheading = subheading, .paragraph = paragraph,
  .table_open = table_open, .row = row, .table_close = table_close, .list_open = list_open,
  .item = item, .list_close = list_close, .code_open = code_open, .line = line,
  .code_close = code_close, .picture = picture, .signature = signature, .end = end
};
