/* The other readings of a figure that a check tries: the rows of tables/readings.tsv.

   A row is a mistake or an alternative of the trade: what it says to the user, what it changes,
   on which side of the check, how usual it is.  Owned by the session, read on first use.        */
#ifndef LANGUAGE_CHECK_READINGS_H
#define LANGUAGE_CHECK_READINGS_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct fault; struct reference_table; struct unit_table;

enum reading_change { READING_REFERENCE, READING_UNIT, READING_BAROMETER, READING_STATE_T,
                      READING_STATE_P, READING_GAUGE, READING_ABSOLUTE, READING_DRY, READING_WET,
                      READING_MOISTURE_OUT, READING_MOISTURE_ATMOSPHERIC, READING_Z_OUT,
                      READING_Z_INVERSE, READING_Z_IN, READING_VOLUMES_REAL, READING_HEAT,
                      READING_COMBUSTION, READING_CALORIFIC_1995, READING_CALORIFIC_2016,
                      READING_OXYGEN, READING_OXYGEN_OUT, READING_OXYGEN_WET, READING_COUNTED,
                      READING_ICE,
                      READING_FACTOR };

/* The side of a check a reading changes, as bits; both at once is another thing than either.  */
enum reading_side { READING_COMPUTED = 1, READING_STATED = 2, READING_EITHER = 3,
                    READING_BOTH = 4 };

struct reading_rule {
  const char *key, *said, *source;
  enum reading_change change;
  enum reading_side side;
  int cost;
  const char *words;              /* behind the change: "all", "Btu Btu(th)", "S" */
  const char *from, *to;          /* of READING_UNIT */
  double value;                   /* SI; the factor */
};

struct readings { struct reading_rule *at; size_t count; struct arena *arena; };

/* Null with FAULT if a row, built in or of DIRECTORY's file, cannot be read.  Owned.  */
struct readings *readings_create (struct unit_table *, const struct reference_table *,
                                  const char *directory, struct fault *) MUST_CHECK;
void readings_destroy (struct readings *);               /* null is allowed */
/* What a rule says of ABOUT ("the stated figure"); of reference conditions, what they are for.  */
const char *reading_sentence (struct arena *, const struct reading_rule *, const char *about)
  MUST_CHECK;
/* Is NAME among the words of a rule that lists references?  "all" has them all.  */
bool reading_names (const struct reading_rule *, const char *name) MUST_CHECK;

#endif
