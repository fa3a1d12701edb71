/* A document being written: headings, paragraphs, lists, tables, pictures.

   A back end is a row of functions; there are Markdown and HTML.  Texts are plain: the back end
   escapes what it must.  Between table_open and table_close only rows, between list_open and
   list_close only items, between code_open and code_close only lines.                           */
#ifndef REPORT_PAPER_H
#define REPORT_PAPER_H

#include <stdbool.h>
#include <stddef.h>

struct text;

struct paper {
  struct text *out;
  const struct paper_form *form;
};

struct paper_form {
  void (*begin) (struct paper *, const char *title, const char *below);
  void (*heading) (struct paper *, const char *);
  void (*subheading) (struct paper *, const char *);
  void (*paragraph) (struct paper *, const char *);
  void (*table_open) (struct paper *, size_t n, const char *const headings[]);
  void (*row) (struct paper *, size_t n, const char *const cells[]);
  void (*table_close) (struct paper *);
  void (*list_open) (struct paper *);
  void (*item) (struct paper *, const char *);
  void (*list_close) (struct paper *);
  void (*code_open) (struct paper *);
  void (*line) (struct paper *, const char *);
  void (*code_close) (struct paper *);
  void (*picture) (struct paper *, const char *svg);     /* null: it cannot show any */
  void (*signature) (struct paper *, const char *who);
  void (*end) (struct paper *);
};

extern const struct paper_form paper_markdown, paper_html;

#endif
