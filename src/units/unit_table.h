/* What the parts of the unit reader share: the table of words and how a text is read with it.

   A word is a spelling, an alias, or one of these behind a prefix.  Everything here lives in the
   table's own arena; nothing outside units and its tests includes this header.                */
#ifndef UNITS_UNIT_TABLE_H
#define UNITS_UNIT_TABLE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "units/dimension.h"
#include "units/exact.h"
#include "units/unit.h"

struct arena; struct fault; struct map;

/* A row of tables/units.tsv, read.  */
struct unit_entry {
  struct unit_row row;
  const char *aliases, *mistaken, *prefixes;
  struct exact factor;
  double offset;                        /* K */
  struct dimension dimension;
  enum unit_sort sort;
  enum ratio ratio;
  enum reference_family family;
  bool gauge;                           /* takes (g), (a), (vac) and a trailing g or a */
  bool raised;                          /* takes a trailing digit */
  bool actual;
  bool open;                            /* a word with two meanings: row.name holds them */
  bool hidden;                          /* replaced by a user's row */
};

struct unit_table {
  struct arena *arena;
  struct unit_entry *entries;
  size_t entry_count;
  struct unit_entry **shown;            /* the rows to list: not open, not hidden */
  size_t shown_count;
  struct map *words;                    /* spelling or alias -> struct unit_entry */
  struct map *units;                    /* text as asked -> struct unit */
};

/* A spelling or an alias, perhaps behind one of its row's prefixes.  */
struct unit_word {
  const struct unit_entry *entry;
  struct exact prefix;                  /* 1 where there is none */
};
bool unit_word_find (const struct unit_table *, const char *text, size_t n,
                     struct unit_word *) MUST_CHECK;

/* Calls VISIT for every word there is, in the order of the table.  */
void unit_word_each (const struct unit_table *,
                     void (*visit) (const char *word, const struct unit_entry *, bool prefixed,
                                    void *with),
                     void *with);

/* The next piece of *LIST, which SEPARATOR parts; moves on behind it.  False at the end.  */
bool unit_next_piece (const char **list, char separator, const char **piece, size_t *length);

/* Small letters of ASCII, whatever the locale.  */
char unit_small_letter (char);

enum { UNIT_LONGEST = 120 };            /* bytes of a unit's text */

/* How reading a text came out.  */
enum unit_outcome { UNIT_READ, UNIT_IS_UNKNOWN, UNIT_IS_OPEN, UNIT_IS_MISSHAPEN };

struct unit_reading {
  enum unit_outcome outcome;
  struct unit unit;                     /* read: all but its spelling */
  size_t first, length;                 /* otherwise: the word that does not read */
  const struct unit_entry *open;        /* open: the word's row */
  const char *why;                      /* misshapen: what to do */
};

/* Writes the ASCII twin of the N bytes at TEXT into ASCII, UNIT_LONGEST + 1 bytes.  False if it
   is too long or no UTF-8; what has no twin stays as it is.                                   */
bool unit_ascii (const char *text, size_t n, char *ascii) MUST_CHECK;

/* Reads a text made by unit_ascii.  */
struct unit_reading unit_read (const struct unit_table *, const char *ascii);

/* A single word of the table, with its qualifier or trailing letter, as a unit of its own.  */
struct unit_atom {
  const struct unit_entry *entry;
  struct exact factor;
  enum unit_sort sort;
  int power;                            /* of the trailing digit; 1 without */
};
bool unit_atom_find (const struct unit_table *, const char *text, size_t n,
                     struct unit_atom *) MUST_CHECK;

/* Turns a reading that failed into a fault with its hint.  */
void unit_refuse (const struct unit_table *, const char *ascii, const struct unit_reading *,
                  struct fault *);

#endif
