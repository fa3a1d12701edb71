/* What a laboratory hands over as a file: cells that become stated parts.

   A file holds one or many samples, a component in each row or a sample in each row.  What is a
   component, what an uncertainty and what only keeps the samples apart is told from the headings;
   where a file can be read in two ways nothing is taken, the complaint asks which.  Amounts stay as
   they are stated: nothing is scaled or made up here.  Complaints have the place in the file as
   their first fact ("week.csv:4:7") and in fault->at.                                           */
#ifndef GAS_LABORATORY_H
#define GAS_LABORATORY_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct fault; struct laboratory; struct species_table; struct unit; struct unit_table;

enum laboratory_moisture { LABORATORY_UNSAID, LABORATORY_DRY, LABORATORY_WET };

/* What the user says behind the file's name.  */
struct laboratory_asked {
  const char *file;               /* as typed, for complaints */
  const struct unit *unit;        /* of the figures whose unit the file does not say; or null */
  const char *unit_text;
  char decimal;                   /* ',' or '.'; 0: as the file tells */
  enum laboratory_moisture moisture;
};

/* What names and units are known.  KNOWS says whether a word is a gas of the user's, which may be
   a part as well; null: none is.                                                                */
struct laboratory_words {
  struct unit_table *units;
  struct species_table *species;
  bool (*knows) (const void *with, const char *name, size_t n);
  const void *with;
};

/* How a part was stated.  */
enum laboratory_amount {
  LABORATORY_FIGURE,
  LABORATORY_BELOW,               /* <0.01 */
  LABORATORY_NOT_DETECTED,        /* ND, without a limit: number 0 */
  LABORATORY_TRACE,               /* trace: number 0 */
  LABORATORY_REST                 /* rest, balance: what the others leave */
};
enum laboratory_spread { LABORATORY_NO_SPREAD, LABORATORY_STANDARD, LABORATORY_EXPANDED };

struct laboratory_part {
  const char *name;               /* as in the file */
  int line, column;               /* of its figure */
  enum laboratory_amount amount;
  double number;
  const char *figure;             /* the number, with '.' for its decimal sign */
  const struct unit *unit;
  const char *unit_text;
  enum laboratory_spread spread;
  double spread_number, k;
  const char *spread_figure;
  const struct unit *spread_unit; /* null: that of the figure */
  bool spread_relative;           /* in % of the figure */
};

/* What was understood, for the reader to check; texts in the arena, null where there is nothing to
   say.                                                                                          */
struct laboratory_said {
  const char *layout;             /* "a sample in each row, 14 samples, 8 components" */
  const char *form;               /* "cells parted by ';', decimal comma, Windows-1252" */
  const char *units;              /* "mol% (heading), H2S in ppm (heading)" */
  const char *passed;             /* "column 'operator', line 12 (total)" */
  const char *expanded;           /* "U" columns whose k the file does not say */
  bool windows_1252;
};

/* Reads N bytes, which it borrows, into ARENA.  Kinds: those of csv.h, and laboratory-...        */
const struct laboratory *laboratory_read (struct arena *, const char *bytes, size_t n,
                                          const struct laboratory_asked *,
                                          const struct laboratory_words *,
                                          struct fault *) MUST_CHECK;

size_t laboratory_samples (const struct laboratory *);
/* "" where the file gives its only sample no name; a number where it gives its many none.        */
const char *laboratory_sample (const struct laboratory *, size_t i);
/* The sample of that name, or, null, the only one.  Kind laboratory-sample.  */
bool laboratory_find (const struct laboratory *, const char *sample, size_t *i,
                      struct fault *) MUST_CHECK;
enum laboratory_moisture laboratory_moisture (const struct laboratory *);
const struct laboratory_said *laboratory_said (const struct laboratory *);

/* The parts of a sample, into ARENA: those that were looked for.  *LEFT_OUT names those whose cell
   is empty or says n/a, parted by commas; null: none.                                           */
struct laboratory_parts { const struct laboratory_part *at; size_t count; const char *left_out; };
bool laboratory_parts_of (const struct laboratory *, size_t sample, struct arena *,
                          struct laboratory_parts *, struct fault *) MUST_CHECK;

#endif
