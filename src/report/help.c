/* A page of help: `say` the form, `get` one sentence, `try` a line that runs.  */
#include "config.h"
#include "report/report_private.h"

#include <string.h>

#include "result/result.h"
#include "support/text.h"

/* A line with its word in the margin; nothing where there is nothing to say.  */
static void
line_add (struct text *out, const struct report_style *style, const char *word, const char *text)
{
  if (text == NULL || *text == '\0')
    return;
  text_add_left (out, word, MARGIN);
  const struct fold fold = { out->length, MARGIN + 2 };
  shown_add (out, style, text);
  fold_line (out, style, fold);
  text_add_char (out, '\n');
}

void
report_help (struct text *out, const struct report_style *style, const struct help_page *page)
{
  tab_add (out, style, page->title, "help");
  for (const struct help_entry *e = page->entries; e != NULL; e = e->next) {
    line_add (out, style, "say", e->say);
    line_add (out, style, "get", e->get);
    line_add (out, style, "try", e->example);
    if (e->next != NULL && e->next->say != NULL && *e->next->say != '\0')
      text_add_char (out, '\n');
  }
}
