/* One check while it is worked on: the question, the claim, and both sides under other readings.

   A check has two sides.  The computed side is a value; the stated side is what that value is told
   in: unit, words and state of the claim.  A candidate is a reading applied to one side or to
   both; a figure under candidates is the computed value under the one side's settings, told under
   those of the other.                                                                          */
#ifndef LANGUAGE_CHECK_TRIAL_H
#define LANGUAGE_CHECK_TRIAL_H

#include <stdbool.h>
#include <stddef.h>
#include "language/check/readings.h"
#include "language/evaluate/evaluation.h"
#include "language/session_private.h"

enum { SIDE_COMPUTED, SIDE_STATED, SIDES };

/* The settings of a side, and which of them differ from the session's.  */
struct side { struct settings settings; unsigned overridden; };

struct candidate {
  const struct reading_rule *rule;          /* null: the computed value's own state */
  unsigned sides;                           /* bits, 1 << SIDE_... */
  enum reference_family family;             /* of READING_REFERENCE */
  struct conditions at;                     /* p without that of the moisture */
  const char *text, *names;                 /* "15 degC, 101.325 kPa"; "iso13443, isa" */
  size_t name_count;
  const struct node *counted;               /* of READING_COUNTED */
  bool own;                                 /* a volume at the state of what it is of */
  bool fills;                               /* says only what the user left open */
  bool common;                              /* the first conditions anybody thinks of */
  int cost;
  const char *said;
  double figure;                            /* computed under it, in UNIT */
  const struct unit *unit;
  bool has_value;                           /* VALUE is the computed side under it */
  struct value value;
};

struct check {
  struct session *session;
  struct arena *arena;                      /* of the line: what the verdict says */
  struct arena *work, *scratch;             /* of the search; of one look */
  struct statement question;                /* the computed side, told in the claim's unit */
  struct target target;
  const struct node *claim;                 /* its NODE_QUANTITY */
  const char *stated, *name;                /* as typed; on a sheet: its name */
  double number, limit;                     /* of the claim, in its unit */
  bool by_digits, open[SIDES];              /* open: a volume without its state */
  bool actual;                              /* asked for in a unit of its own state: acfm */
  struct side base[SIDES];
  unsigned touched[SIDES];
  struct value value;                       /* the computed side as typed */
  struct definition **used;                 /* definitions it leans on */
  size_t used_count;
  double figure;                            /* the computed figure as typed */
};

/* The settings of both sides with CANDIDATE's change on top.  */
void candidate_apply (const struct check *, const struct candidate *, struct side sides[SIDES]);
/* Can the two hold at once?  */
bool candidates_agree (const struct candidate *, const struct candidate *) MUST_CHECK;
/* All candidates a check has, not yet worked out; in its `work`.  */
struct candidate *candidates_of (struct check *, const struct readings *, size_t *count);

/* The figure under the settings of both sides; VALUE, if not null, is the computed side already
   worked out.  False if nothing can be told so.  */
bool check_figure_at (struct check *, const struct side sides[SIDES], const struct value *value,
                      double *figure, const struct unit **) MUST_CHECK;
bool check_value_at (struct check *, const struct side *, struct arena *,
                     struct value *) MUST_CHECK;
/* The figure under the candidates A and (null: alone) B.  */
bool check_try (struct check *, const struct candidate *a, const struct candidate *b,
                double *figure, const struct unit **) MUST_CHECK;

#endif
