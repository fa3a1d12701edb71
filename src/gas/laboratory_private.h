/* What the files that read a laboratory's file share.

   laboratory_heading.c tells what a heading means, laboratory_amount.c what a cell says,
   laboratory_layout.c, laboratory_by_sample.c, laboratory_by_component.c and laboratory_long.c
   where things stand;
   laboratory.c puts samples together.                                                           */
#ifndef GAS_LABORATORY_PRIVATE_H
#define GAS_LABORATORY_PRIVATE_H

#include <stdbool.h>
#include <stddef.h>
#include "gas/laboratory.h"
#include "support/check.h"
#include "support/csv.h"

struct slice { const char *at; size_t n; };

/* ---- Headings ---- */

enum heading_kind {
  HEADING_EMPTY,
  HEADING_PART,                   /* a component: name */
  HEADING_SPREAD,                 /* uncertainties, of `name` or of the figures before */
  HEADING_AMOUNT,                 /* figures, of whatever the row says: "mol%", "result" */
  HEADING_UNIT,                   /* units */
  HEADING_NAMES,                  /* names of components */
  HEADING_SAMPLE,                 /* names of samples */
  HEADING_DATE,                   /* dates or times: tell samples apart if nothing else does */
  HEADING_TOTAL,                  /* a total, a mean: computed from the others */
  HEADING_OTHER_WORD,             /* known to be no component: operator, remark, temperature */
  HEADING_UNKNOWN
};

struct heading {
  enum heading_kind kind;
  struct slice name;
  const struct unit *unit;
  const char *unit_text;
  bool percent;                   /* "%", of what is not said */
  enum laboratory_moisture moisture;
  bool expanded, relative;
  double k;                       /* 0: not said */
};

/* What TEXT means at the head of a column or row; texts it needs are made in ARENA.  */
struct heading heading_read (struct arena *, const struct laboratory_words *, struct slice text);
/* Is it one of the component table's names, or a peak?  A plain formula and a gas of the user's do
   not count: sample numbers (S1, N7) look like the one and may be called like the other.         */
bool slice_is_component (const struct laboratory_words *, struct slice);
/* The unit that N bytes spell, blanks and the trade's other spellings (Mol-%) allowed; null: none
   that amounts have.  *PERCENT: it is a bare "%".                                               */
const struct unit *slice_unit (struct arena *, const struct laboratory_words *, struct slice,
                               const char **text, bool *percent);

struct slice slice_trimmed (struct slice);
bool slice_is (struct slice, const char *text);
/* In small letters, without blanks, '-', '_', '.' and ':'.  */
bool slice_is_word (struct slice, const char *const words[]);
const char *slice_text (struct arena *, struct slice);

/* ---- Amounts ---- */

enum cell_kind { CELL_NONE,       /* empty, n/a, - : not looked for */
                 CELL_AMOUNT, CELL_BAD };

struct cell_amount {
  enum cell_kind kind;
  enum laboratory_amount amount;
  double number;
  const char *figure;
  const struct unit *unit;
  const char *unit_text;
  bool percent;
  struct slice spread;            /* behind a +/- in the cell; or null */
  const char *why;                /* of CELL_BAD */
};

/* What a cell says with DECIMAL for its decimal sign.  */
struct cell_amount amount_read (struct arena *, const struct laboratory_words *, struct slice,
                                char decimal);
/* Does the cell hold a figure, whatever its decimal sign?  */
bool amount_looks (struct slice);
/* Or what may stand in its place?  */
bool amount_may (struct slice);

/* What the figures of a file say of its decimal sign.  */
struct decimal_signs { const struct csv_cell *comma, *dot; bool certain; };
void decimal_look (struct decimal_signs *, const struct csv_cell *);

/* ---- The file ---- */

/* A component, or a sample: the row or column it has, and what its heading says.  */
struct axis {
  const char *name;
  size_t index;
  size_t spread;                  /* column of its uncertainties, or NOWHERE */
  int line, column;
  const struct unit *unit;        /* null: elsewhere */
  const char *unit_text;
  bool percent;
  bool expanded, relative;        /* of the uncertainties */
  double k;
  const struct unit *spread_unit;
};

#define NOWHERE ((size_t) -1)

struct laboratory {
  const struct laboratory_asked *asked;
  const struct laboratory_words *words;
  struct csv csv;
  struct csv_row *rows;           /* without empty ones */
  size_t row_count, row_room;
  bool by_rows;                   /* a component in each row */
  size_t names;                   /* the column of their names */
  size_t heading, unit_row;       /* rows, or NOWHERE */
  size_t unit_column;
  struct axis *components, *samples;
  size_t component_count, sample_count;
  char decimal;
  enum laboratory_moisture moisture;
  const struct unit *unit;        /* what the file says for all of it; or null */
  const char *unit_text;
  bool percent;
  bool in_long;                   /* it had a component of a sample in each row */
  bool numbered;                  /* samples have no names of their own */
  struct laboratory_said said;
  const char *passed;             /* being put together */
};

struct slice cell_slice (const struct laboratory *, size_t row, size_t column);
const struct csv_cell *cell_at (const struct laboratory *, size_t row, size_t column);
/* A complaint at a cell.  */
bool complain_at (const struct laboratory *, size_t row, size_t column, enum message,
                  const char *fact2, const char *fact3, struct fault *);
/* Adds to what is said of columns and rows that were passed over.  */
void pass_over (struct laboratory *, struct arena *, const char *what);

/* ---- Where things stand ---- */

/* Finds components, samples and what else is where.  */
bool layout_find (struct laboratory *, struct arena *, struct fault *) MUST_CHECK;
/* The two ways a file may lie: the row of headings, or the column of names, is known.  */
bool layout_by_sample (struct laboratory *, struct arena *, size_t heading, struct fault *)
  MUST_CHECK;
bool layout_by_component (struct laboratory *, struct arena *, size_t names, struct fault *)
  MUST_CHECK;

/* A component of a sample in each row?  FIRST is the first row below the headings.  */
bool layout_is_long (const struct laboratory *, struct arena *, size_t first);
/* Turns such rows into one for each sample.  */
bool layout_long (struct laboratory *, struct arena *, size_t first, struct fault *) MUST_CHECK;

/* A row above the headings: a unit or `dry` for all of it, or nothing that counts.  */
bool layout_preface (struct laboratory *, struct arena *, size_t row, struct fault *) MUST_CHECK;
/* Is what is said at a cell what was said before?  */
bool layout_moisture (struct laboratory *, enum laboratory_moisture, size_t row, size_t column,
                      struct fault *) MUST_CHECK;
/* Are the cells of a row units and nothing else?  NAMES: the column of names, or NOWHERE.  */
bool layout_is_unit_row (const struct laboratory *, struct arena *, size_t row, size_t names);
/* What the unit row says of a column, where the heading does not.  */
void layout_add_unit_row (const struct laboratory *, struct arena *, size_t column,
                          struct heading *);
struct axis layout_axis (const struct laboratory *, struct arena *, size_t row, size_t column,
                         const struct heading *);
void layout_take_spread (struct axis *, size_t column, const struct heading *);
/* Figures, or what may stand in their place, in every row from FIRST on?  */
bool layout_column_has_figures (const struct laboratory *, size_t column, size_t first);
/* Is it a name that can be a part, and one that no other row or column has?  */
bool layout_name_holds (const struct laboratory *, size_t row, size_t column, struct slice,
                        struct fault *) MUST_CHECK;
bool layout_name_is_new (const struct laboratory *, size_t row, size_t column, struct slice,
                         struct fault *) MUST_CHECK;
/* Refuses a name that no component has, with what may have been meant.  */
bool layout_name_refused (const struct laboratory *, size_t row, size_t column, struct slice,
                          struct fault *);

#endif
