/* Results and faults as text, JSON or CSV.

   Machine forms print every digit needed to read a number back; the text form rounds to
   style->digits and folds lines at style->width.  Nothing here knows a terminal or a locale.    */
#ifndef REPORT_REPORT_H
#define REPORT_REPORT_H

#include <stdbool.h>
#include <stddef.h>

struct fault; struct result; struct text;

enum report_format { REPORT_TEXT, REPORT_JSON, REPORT_CSV, REPORT_FORMATS };

struct report_style {
  int digits;                     /* significant digits on screen */
  bool unicode;                   /* may print characters outside ASCII (text form only) */
  bool weights;                   /* bold and dim by terminal escapes (text form only) */
  bool prompt;                    /* at a prompt: a blank line before an answer */
  size_t width;                   /* of a line of the text form, 100 at most; 0: that */
};

/* Where a fault happened and what was typed there.  */
struct report_origin {
  const char *file;               /* "morning.gw"; null at the prompt */
  const char *line;               /* the physical line the fault points into, as typed */
  const char *statement;          /* for JSON */
  int column_shift;               /* characters the prompt puts before the line */
  bool quote;                     /* print the line again above the bracket; always in files */
};

/* Appends to OUT.  CSV writes its heading row when FIRST is set.  */
void report_result (struct text *out, enum report_format, const struct report_style *,
                    const struct result *, bool first);
void report_fault (struct text *out, enum report_format, const struct report_style *,
                   const struct fault *, const struct report_origin *);

/* One string as a JSON string, quotes included.  */
void json_string (struct text *, const char *);

#endif
