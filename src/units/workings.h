/* The record of how a figure came about: steps, as data.

   Functions from `property` up take a `struct workings *` (null: keep no record) and append what
   they did while they do it: formula, the figures that went in, the result, and where the method
   and every constant are from.  Sentences are made by `report`, and only where somebody asks: a
   step is a few pointers and figures.  Every text is borrowed, and lasts as long as the arena of
   the record, or for ever.

   A formula is `symbol = expression` with + - * / ^ and brackets; a blank between two factors
   multiplies and binds as * does; sqrt, ln, exp, min and max; sum(...) adds up the terms of the
   step, in which symbols that end in _i stand for each term's figure.  So it can be worked out
   again from its own figures.  Where its left side ends in _i it makes a figure for every term,
   which stands in the column of that name, and the step's own value is NAN.  An empty formula: the
   figure was given, or came from a table.                                                       */
#ifndef UNITS_WORKINGS_H
#define UNITS_WORKINGS_H

#include <stddef.h>

struct arena; struct composition; struct unit;

/* One figure of a formula.  SOURCE: where a constant is from; null: typed, or found before.  */
struct step_symbol {
  const char *name;
  double value;
  const char *unit, *source;
  const struct unit *in;                 /* not null: the unit is the SI one of what this measures,
                                            and without a source it is this one's own factor */
};

/* One figure for every term.  */
struct step_column {
  const char *name;
  const double *at;
  const char *unit, *source;
  const char *const *sources;            /* of each term's figure, in place of one; or null */
};

/* What a step is called: its name, and of what (may be null); a figure and its unit, as typed; what
   was asked, and the unit it is told in.                                                        */
enum step_kind { STEP_OF, STEP_FIGURE, STEP_ANSWER };

struct step {
  const char *name, *of;                 /* "molar mass", "raw" */
  const char *formula;
  const char *solved;                    /* not null: the value fulfils the formula, found so */
  double value;
  const char *unit, *source;             /* of the result; of the method */
  const struct unit *in;                 /* as in step_symbol, where UNIT is null */
  const struct step_symbol *symbols;
  const char *const *terms;              /* "CH4", "CO2" */
  const struct step_column *columns;
  const struct composition *gas;         /* not null: the terms are its parts, with x_i and M_i */
  struct step *next;
  unsigned term_count;
  unsigned char symbol_count, column_count, kind;          /* kind: enum step_kind */
};

/* The figures of a step, for its initializer.  */
#define STEP_SYMBOLS(...)                                                                \
  .symbols = (const struct step_symbol[]) { __VA_ARGS__ },                               \
  .symbol_count = (unsigned char) (sizeof ((const struct step_symbol[]) { __VA_ARGS__ }) \
                                   / sizeof (struct step_symbol))
#define STEP_COLUMNS(...)                                                                \
  .columns = (const struct step_column[]) { __VA_ARGS__ },                               \
  .column_count = (unsigned char) (sizeof ((const struct step_column[]) { __VA_ARGS__ }) \
                                   / sizeof (struct step_column))
#define SYMBOL(name, value, unit) { (name), (value), (unit), NULL, NULL }
#define CONSTANT(name, value, unit, source) { (name), (value), (unit), (source), NULL }

struct workings { struct arena *arena; struct step *first, *last; size_t count; };

void workings_init (struct workings *, struct arena *);
/* Appends a copy of STEP with its symbols and columns, the figures in those included.  A null
   WORKINGS does nothing.                                                                        */
void workings_add (struct workings *, const struct step *);

/* Sources of many steps.  */
extern const char STEP_TYPED[],          /* "as typed" */
  STEP_DEFINITION[],                     /* "by definition" */
  STEP_IDEAL_GAS[],                      /* the ideal gas law */
  STEP_SI[],                             /* of R, and of 0 degC in K */
  STEP_WEIGHTS[];                        /* atomic weights: whose is found out when it is shown */

/* R of the SI.  */
#define STEP_R CONSTANT ("R", GAS_CONSTANT, "J/(mol K)", STEP_SI)

#endif
