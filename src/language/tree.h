/* What a statement says, before anybody asks whether it makes sense.

   A tree is made by the parser in an arena and never changed.  Nodes borrow units from the unit
   table and text from the arena.  Names are not resolved: one and the same tree means what its
   names mean when it is evaluated.                                                             */
#ifndef LANGUAGE_TREE_H
#define LANGUAGE_TREE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/fault.h"

struct unit;

enum property {
#define PROPERTY(name, text, unit, help) PROPERTY_##name,
#include "language/properties.def"
#undef PROPERTY
  PROPERTY_COUNT
};

enum setting {
#define SETTING(name, text, takes) SETTING_##name,
#include "language/settings.def"
#undef SETTING
  SETTING_COUNT
};

/* Words that follow a unit or stand in a state, as bits.  */
enum word { WORD_DRY = 1, WORD_WET = 2, WORD_REAL = 4, WORD_IDEAL = 8, WORD_GROSS = 16,
            WORD_NET = 32 };

/* The standard a property goes by: ISO 6976 in the edition that is set, or in one of them.  */
enum standard { STANDARD_NONE, STANDARD_AS_SET, STANDARD_2016, STANDARD_1995 };

enum node_kind {
  /* Figures and names.  */
  NODE_QUANTITY,       /* number, figure (as typed), unit or null, words, spread; or `a` = NODE_NAME
                          in place of the number: q m3/h */
  NODE_NAME,           /* text (a name, a component, a multi-word component as typed) */
  NODE_SITE_PRESSURE,
  NODE_PROPERTY,       /* property, text, by; only as `a` of NODE_OF */
  NODE_THAT,
  /* Chains.  */
  NODE_OF,             /* a of b; a: NODE_PROPERTY, NODE_QUANTITY, NODE_NAME or a bracketed sum */
  NODE_WITHIN,         /* a within b (NODE_NAME) */
  NODE_AT,             /* a at b (NODE_STATE) */
  NODE_NORMALISED,     /* a normalised [into b (NODE_NAME)] */
  NODE_DRIED,          /* a */
  NODE_WETTED,         /* a wetted to b */
  NODE_SATURATED,      /* a saturated at b (NODE_STATE) */
  NODE_WITHOUT,        /* a without b (NODE_NAME) [by c (NODE_NAME)] */
  NODE_KEEPING,        /* a keeping items: NODE_SHARE (text: component or "rest", a: the share) */
  NODE_SHARE,
  /* Sums.  */
  NODE_ADD, NODE_SUBTRACT, NODE_MULTIPLY, NODE_DIVIDE,       /* a, b */
  NODE_NEGATE, NODE_SQRT, NODE_LN, NODE_EXP,                 /* a */
  /* Lists of parts.  */
  NODE_LIST,           /* items: NODE_PART; unit: the basis or null; words; text: basis as typed */
  NODE_PART,           /* text: the name; a: amount (NODE_QUANTITY, a bracketed sum, or null for
                          rest); unit: a unit behind a bracketed amount, else null; rest, below */
  /* States.  */
  NODE_STATE,          /* items: NODE_QUANTITY (T, P, %RH or %O2 by its unit), NODE_NAME,
                          NODE_SITE_PRESSURE, a bracketed sum, or one of: */
  NODE_ITEM_Z,         /* a */
  NODE_ITEM_WATER,     /* a */
  NODE_ITEM_DEW_POINT, /* a */
  NODE_ITEM_SATURATED, NODE_ITEM_DRY, NODE_ITEM_IDEAL, NODE_ITEM_REAL
};

enum spread_kind { SPREAD_STANDARD, SPREAD_EXPANDED, SPREAD_LIMITS };

/* What stands behind a ±.  */
struct spread {
  double value;
  const struct unit *unit;        /* null: that of the figure, or with `relative` % of it */
  bool relative;
  enum spread_kind kind;
  double k;                       /* for SPREAD_EXPANDED */
  const char *figure;             /* as typed */
  struct place at;
};

struct node {
  enum node_kind kind;
  struct place at;                /* the whole of it */
  struct node *a, *b, *c;
  struct node *items;             /* first item; they hang together by `next` */
  struct node *next;
  const char *text;               /* a name, without quotes, UTF-8 twins made ASCII */
  bool quoted;
  enum property property;
  enum standard by;               /* of NODE_PROPERTY */
  double number;
  const char *figure;             /* the number as typed */
  const struct unit *unit;
  const char *unit_text;          /* the unit as read: blanks closed up, twins made ASCII */
  struct place unit_at;
  struct place sign_at;           /* of NODE_ADD to NODE_DIVIDE: where the sign stands */
  unsigned words;
  const struct spread *spread;
  bool rest, below;               /* of NODE_PART */
};

struct stated_property;

/* `in` UNIT words [counted as NAME] [burning FUEL [by NAME] | with F FACTOR FIGURE]
   [at ... | , with ...] [as NAME].  */
struct target {
  const struct unit *unit;
  const char *unit_text;
  struct place at;
  unsigned words;
  const struct node *counted_as;  /* NODE_NAME */
  const struct node *burning;     /* NODE_NAME of the fuel an emission per heat is of, or null */
  const struct node *tracer;      /* NODE_NAME of what tells of the excess air; or null */
  const struct stated_property *factor;          /* an F factor in place of a fuel, or null */
  const struct node *state;       /* NODE_STATE behind `at`, or null */
  const struct node *with;        /* NODE_STATE of the items behind the comma, or null */
  const char *as;
  struct target *next;
};

enum statement_kind {
  STATEMENT_ASK,
#define STATEMENT(name, text, help) STATEMENT_##name,
#include "language/statements.def"
#undef STATEMENT
  /* Lines of a block.  */
  STATEMENT_MIX, STATEMENT_SEPARATE, STATEMENT_SPLIT, STATEMENT_REACT, STATEMENT_COMPONENTS,
  STATEMENT_KNOWN, STATEMENT_ABSENT, STATEMENT_PER, STATEMENT_AROUND, STATEMENT_FIGURE,
  STATEMENT_END,
  STATEMENT_EMPTY                 /* never made by the parser, which passes comments over */
};

enum comparison { COMPARE_EQUAL, COMPARE_AT_LEAST, COMPARE_AT_MOST };
enum optimum { OPTIMUM_NONE, OPTIMUM_LEAST, OPTIMUM_MOST };

struct aim { const struct node *left, *right; enum comparison is; struct aim *next; };
struct stated_property { enum property property; const struct node *quantity;
                         struct stated_property *next; };

struct statement {
  enum statement_kind kind;
  const char *source;             /* as typed, without comment and outer blanks */
  const char *typed;              /* the same with its lines kept, where it has several; or null */
  struct place at;
  const char *name;               /* what is defined, solved, shown ... */
  struct place name_at;
  const struct node *names;       /* NODE_NAMEs of forget, trim (with the ends of its range as
                                     `a` and `b`, or null), components, and
                                     of trend, where `rest` means all that begin so */
  const struct node *value;       /* the sum, list, chain or state; of normalise the whole
                                     NODE_NORMALISED; of a setting its figure */
  struct node *from_file;         /* of gas from: the NODE_LIST in `value`, without items until
                                     the file is read; unit and words as typed, `figure` the
                                     decimal sign, or null */
  struct target *targets;
  const char *text, *sample;      /* a text in quotes: file names */
  struct place text_at;
  const struct stated_property *stated;          /* gas NAME with ... */
  /* set */
  bool has_setting; enum setting setting; const char *setting_words;
  /* set scf at ...; the place of the value, or of the setting's name where it has none.
     setting_words is the value as it is listed: "ISO 6976:2016".  */
  const struct unit *setting_unit; struct place setting_at;
  bool picture;                   /* show NAME [in targets] as picture `text` */
  bool samples;                   /* show samples of: `name`, or a file as of gas from */
  /* show: all that the words can be, name, unit and property; then help's words */
  const struct unit *unit; bool has_property; enum property property;
  const char *help_words;
  /* check, known, figure: the stated side, a NODE_QUANTITY or NODE_AT over one (of known a sum);
     value is the computed side.  `check NAME` has a name and no value.  */
  const struct node *claim;
  size_t trials; unsigned long seed;             /* montecarlo, an ASK; 0: an answer by itself */
  const struct aim *aims; enum optimum optimum; const struct node *least;
  /* boundaries; a reaction is a NODE_LIST of NODE_NAMEs, `number` their coefficients, below 0
     what is used up */
  const struct node *inlets, *outlets;
  struct node *reactions;
  struct statement *next;         /* of a block: the line behind this one */
};

#endif
