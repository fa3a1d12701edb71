/* What the renderers share: the layout's fixed columns, how one figure or one piece of text is
   shown, and the sentence of a remark.

   Two kinds of text go through here.  The text form shows everything with shown_add, which keeps
   a terminal safe from what a file or a name may hold; JSON and CSV take the bytes as they are
   and escape them their own way.                                                                */
#ifndef REPORT_REPORT_PRIVATE_H
#define REPORT_REPORT_PRIVATE_H

#include <stdbool.h>
#include <stddef.h>
#include "report/report.h"
#include "support/text.h"

struct balance_verdict; struct card; struct fault; struct help_page; struct remark;
struct report_origin; struct result; struct step; struct trend; struct workings_record;

/* Columns of the text form, counted from 0.  Columns 0 to 5 are the margin: a mark stands in
   column 2, a word of help in columns 0 to 2; all text begins in column 6.                      */
enum {
  MARGIN_MARK = 2,
  MARGIN = 6,
  LINE_WIDTH = 100,             /* of a line, at most */
  CARD_WIDTH = 62,              /* of the line with the tab, without the margin */
  NAME_WIDTH = 10,              /* a name with its dots, at least */
  NAME_DOTS = 4,                /* a blank and three dots behind the longest name */
  BRACKET_COLUMN = 51           /* of "(at 15 degC: +5.5 %)", at least, without the margin */
};

/* Weights of a piece of text; without style->weights they all look the same.  */
enum weight { WEIGHT_BOLD, WEIGHT_DIM, WEIGHT_REVERSE };

/* style.c: adds STRING as the text form shows it: control characters and marks that reorder a
   line visibly escaped (\x1B), what is not ASCII in its ASCII form unless style->unicode.  A null
   STRING is an empty one.                                                                       */
void shown_add (struct text *, const struct report_style *, const char *string);
/* The same for N bytes, and for what already stands in the text from START on.  */
void shown_add_bytes (struct text *, const struct report_style *, const char *bytes, size_t n);
void shown_clean (struct text *, const struct report_style *, size_t start);
/* Characters shown_add would add.  */
size_t shown_width (const struct report_style *, const char *string);
/* Places on the screen which the first CHARACTERS characters of STRING take when shown: none for
   a combining mark, two for a wide one.                                                         */
size_t shown_places (const struct report_style *, const char *string, size_t characters);
/* A name, a blank and dots up to WIDTH, which is at least that of the name and NAME_DOTS.  */
void leader_add (struct text *, const struct report_style *, const char *name, size_t width);
/* The line that opens a card: the tab with its name, the kind of thing at the right end.  */
void tab_add (struct text *, const struct report_style *, const char *title, const char *kind);

/* fold.c: what a line may be wide; how wide the line is that OUT ends in.  */
size_t line_width (const struct report_style *);
size_t column_here (const struct text *out);
/* What of a line may be folded: all behind FROM, and what goes on begins in column HANG.  */
struct fold { size_t from, hang; };
/* From here on, and under it.  */
struct fold fold_here (const struct text *out);
/* Folds the line that OUT ends in at blanks, where it is too wide; what goes on begins further to
   the left where HANG is far to the right.                                                      */
void fold_line (struct text *out, const struct report_style *, struct fold);

void weight_open (struct text *, const struct report_style *, enum weight);
void weight_close (struct text *, const struct report_style *);

/* figure.c: a value to style->digits significant digits, "-" where there is none.  */
void figure_write (struct text *, const struct report_style *, double value);
/* The same without end zeros: in a sentence 5.00000 is 5.  */
void figure_plain (struct text *, const struct report_style *, double value);
/* That in a formula; STYLE is a struct report_style.  */
void figure_in_formula (struct text *, double value, const void *style);
/* A value to the last digit of its standard uncertainty, which has two; the uncertainty itself
   goes to SPREAD, which may be the same text: then a null byte parts the two.                   */
void figure_write_uncertain (struct text *, double value, struct text *spread,
                             double uncertainty);
/* Is this an uncertainty that can be shown?  */
bool figure_is_uncertain (double value, double uncertainty);
const char *plus_minus (const struct report_style *);
/* " (k=2)", the factor a spread is expanded by; of a standard uncertainty nothing.  */
void coverage_write (struct text *, double coverage);
/* Characters before the decimal sign; all of a figure without one that precede an exponent.  */
size_t figure_whole (const char *figure);
/* "+5.5 %": two significant digits and the sign.  */
void effect_write (struct text *, double effect);

/* remark.c: the sentence, and behind it "(at 15 degC: +5.5 %)"; false, and nothing added, where
   there is no effect to state.  As bytes, neither shown nor escaped.                            */
void remark_sentence (struct text *, const struct remark *);
bool remark_bracket (struct text *, const struct remark *);

/* What a fault says: the sentence; the phrase that says what was expected; a corrected line.  The
   last two may be empty.  A way on is taken for a corrected line if it opens with the same word as
   the STATEMENT (which may be null).  The texts are owned by the struct.                        */
struct fault_words { struct text sentence, phrase, line; };
void fault_words_init (struct fault_words *, const struct fault *, const char *statement);
void fault_words_clear (struct fault_words *);

/* The renderers.  */
void report_text (struct text *, const struct report_style *, const struct result *);
void report_json (struct text *, const struct result *);
void report_csv (struct text *, const struct result *, bool first);
/* json.c: a member of an object, a text (null: an empty one) or a figure (null where it is not
   finite).  KEY is all that stands before the value, from comma to colon.                       */
void json_member (struct text *, const char *key, const char *value);
void json_figure (struct text *, const char *key, double value);
/* The verdict on a balance, and its object in JSON.  */
void report_verdict (struct text *, const struct report_style *, const struct balance_verdict *);
void report_verdict_json (struct text *, const struct balance_verdict *);
/* The verdict of a check, with the computed figure.  */
void report_check (struct text *, const struct report_style *, const struct result *);
void report_trend (struct text *, const struct report_style *, const struct trend *);
void report_card (struct text *, const struct report_style *, const struct card *);
void report_help (struct text *, const struct report_style *, const struct help_page *);
void report_workings (struct text *, const struct report_style *, const struct workings_record *);
void report_workings_json (struct text *, const struct workings_record *);
/* "volume of a mole, Nm3"; "raw in kg/h".  */
void step_name (struct text *, const struct step *);
void report_fault_text (struct text *, const struct report_style *, const struct fault *,
                        const struct report_origin *);
void report_fault_json (struct text *, const struct fault *, const struct report_origin *);

#endif
