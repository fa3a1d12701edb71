/* Markdown as CommonMark 0.30 has it, with tables as most readers of it understand them.  */
#include "config.h"
#include "report/paper.h"

#include <string.h>

#include "support/text.h"

/* What opens a mark in a line of text.  */
static void
escaped (struct paper *paper, const char *string)
{
  for (; *string != '\0'; string++) {
    if (strchr ("\\`*_{}[]<>#|~", *string) != NULL)
      text_add_char (paper->out, '\\');
    text_add_char (paper->out, *string == '\n' ? ' ' : *string);
  }
}

static void
begin (struct paper *paper, const char *title, const char *below)
{
  text_add (paper->out, "# ");
  escaped (paper, title);
  text_add (paper->out, "\n\n");
  escaped (paper, below);
  text_add (paper->out, "\n\n");
}

static void
heading (struct paper *paper, const char *string)
{
  text_add (paper->out, "## ");
  escaped (paper, string);
  text_add (paper->out, "\n\n");
}

static void
subheading (struct paper *paper, const char *string)
{
  text_add (paper->out, "### ");
  escaped (paper, string);
  text_add (paper->out, "\n\n");
}

static void
paragraph (struct paper *paper, const char *string)
{
  escaped (paper, string);
  text_add (paper->out, "\n\n");
}

static void
row (struct paper *paper, size_t n, const char *const cells[])
{
  text_add_char (paper->out, '|');
  for (size_t i = 0; i < n; i++) {
    text_add_char (paper->out, ' ');
    escaped (paper, cells[i] != NULL ? cells[i] : "");
    text_add (paper->out, " |");
  }
  text_add_char (paper->out, '\n');
}

static void
table_open (struct paper *paper, size_t n, const char *const headings[])
{
  row (paper, n, headings);
  text_add_char (paper->out, '|');
  for (size_t i = 0; i < n; i++)
    text_add (paper->out, " --- |");
  text_add_char (paper->out, '\n');
}

static void
close_block (struct paper *paper)
{
  text_add_char (paper->out, '\n');
}

static void
nothing (struct paper *paper)
{
  (void) paper;
}

static void
item (struct paper *paper, const char *string)
{
  text_add (paper->out, "- ");
  escaped (paper, string);
  text_add_char (paper->out, '\n');
}

/* Indented: no line of a statement can end the block.  */
static void
line (struct paper *paper, const char *string)
{
  text_add (paper->out, "    ");
  text_add (paper->out, string);
  text_add_char (paper->out, '\n');
}

static void
signature (struct paper *paper, const char *who)
{
  escaped (paper, who);
  text_add (paper->out, ": \\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_"
                        "   Date: \\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\\_\n\n");
}

const struct paper_form paper_markdown = {
  .begin = begin, .heading = heading, .subheading = subheading, .paragraph = paragraph,
  .table_open = table_open, .row = row, .table_close = close_block, .list_open = nothing,
  .item = item, .list_close = close_block, .code_open = nothing, .line = line,
  .code_close = close_block, .picture = NULL, .signature = signature, .end = nothing
};
