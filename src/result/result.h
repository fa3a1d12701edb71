/* What a statement answers, before anybody prints it.

   A result is made by the language in the arena of the line and printed by `report`, which sees
   nothing of gases.  Everything in it is borrowed from that arena or from tables.               */
#ifndef RESULT_RESULT_H
#define RESULT_RESULT_H

#include <stdbool.h>
#include <stddef.h>
#include "support/message.h"

struct arena; struct balance_verdict; struct check_verdict; struct note; struct picture;
struct trend; struct workings_record;

/* What the uncertainty of a figure is made of: a line for each uncertain figure that moves it, the
   largest share first.  What they contribute is independent of each other.                      */
struct budget_line {
  const char *what;               /* as typed: "CH4 58.2 ± 0.3 mol%" */
  const char *of;                 /* the name it is part of: "raw"; null: the question itself */
  const char *from;               /* of a table's figure: where that is from; else null */
  double u;                       /* its standard uncertainty */
  const char *unit;               /* of u; "" for a plain number */
  double sensitivity;             /* what the figure moves by for one of that unit */
  double contribution;            /* what it moves by for u, with its sign */
  double share;                   /* of the variance, 0 to 1 */
  size_t order;                   /* in which it was met */
};
struct budget { double uncertainty; size_t count; const struct budget_line *lines; };

/* One figure with its basis: a row that makes sense when cut out and sent to somebody.  */
struct answer {
  const char *what;               /* "raw", "CH4 of raw" */
  const char *label;              /* behind `as`, or null */
  bool named;                     /* the row would not say what it is of without `what` */
  double value;
  const char *unit;               /* "" for a plain number */
  double uncertainty;             /* standard, in the unit; NAN: none */
  double coverage;                /* it is shown times this; 1: standard */
  const struct budget *budget;    /* what that is made of; or null */
  const char *moisture;           /* "dry", "wet" or null */
  const char *basis;              /* the rest: "0 degC, 101.325 kPa, ideal-gas volume"; or null */
  struct answer *next;
};

/* A line under the answer: kind and facts; the sentence stands in tables/messages.tsv.  */
struct remark {
  enum message kind;
  const char *fact[MESSAGE_FACTS];
  const char *alternative;        /* "at 15 degC"; null: no bracket */
  double effect;                  /* what the alternative would do: value/answer - 1; NAN: none */
  struct remark *next;
};

/* A card: one thing with all its figures.  */
/* Text wins; neither: blank.  A `recorded` figure is one of a table: shown without the zeros that
   would claim digits it does not have.                                                          */
/* SPREAD: standard uncertainty of a number, shown behind it and deciding its digits; 0: none.  */
struct cell { const char *text; double value, spread; bool is_number, recorded; };
struct card_row { const char *name; const struct cell *cells; struct card_row *next; };
struct card_line { const char *text; struct card_line *next; };
struct card {
  const char *title, *kind;       /* "raw"; "gas, dry, 5 parts" */
  size_t columns;
  size_t together;                /* so many columns a step, parted if too wide; 0: not */
  const char *const *headings;    /* of the columns, without the name column */
  double coverage;                /* spreads are shown times this; 0: as they are */
  struct card_row *rows, **last_row;
  struct card_line *lines, **last_line;
  struct card *next;
};

/* A page of help: the form, one sentence, a line that runs; then names of other topics.  */
struct help_entry { const char *say, *get, *example; struct help_entry *next; };
struct help_page { const char *title; struct help_entry *entries, **last; };

struct result {
  struct arena *arena;
  const char *statement;          /* as typed, without comment */
  struct answer *answers, **last_answer;
  struct remark *taken, *notes, *cautions;
  struct remark **last_taken, **last_note, **last_caution;
  struct card *cards;             /* usually none or one; result_card appends */
  const struct check_verdict *check;          /* of check; or null */
  const struct balance_verdict *balance;      /* of solve; or null */
  const struct workings_record *workings;     /* of workings; or null */
  const struct trend *trend;                  /* of trend; or null */
  struct help_page *help;
  struct note *note;                          /* to be written; or null */
  struct picture *picture;                    /* the same */
  bool quit;
};

void result_init (struct result *, struct arena *, const char *statement);
struct answer *result_answer (struct result *);          /* appends an empty one (NAN, "") */
/* Appends a remark where its severity belongs unless the same one is there already.  */
struct remark *result_remark (struct result *, enum message, const char *fact1,
                              const char *fact2);
struct card *result_card (struct result *, const char *title, const char *kind, size_t columns,
                          const char *const headings[]);
/* A new row with `columns` blank cells; fill them in.  */
struct cell *card_add_row (struct result *, struct card *, const char *name);
void card_add_line (struct result *, struct card *, const char *text);
struct help_page *result_help (struct result *, const char *title);
void help_add (struct result *, struct help_page *, const char *say, const char *get,
               const char *example);
/* Nothing to print?  */
bool result_is_empty (const struct result *);
/* Largest effect first; equal ones and those without keep their order.  */
void result_sort_taken (struct result *);

#endif
