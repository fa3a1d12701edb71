/* What a check comes to: a stated figure held against a computed one, the other readings of it
   that fit, and what would have to be true where none does.

   Everything is borrowed from the arena of the line.  Figures are in the unit named beside them. */
#ifndef RESULT_CHECK_VERDICT_H
#define RESULT_CHECK_VERDICT_H

#include <stdbool.h>
#include <stddef.h>

enum check_outcome { CHECK_HOLDS, CHECK_READINGS, CHECK_UNEXPLAINED };

/* Another reading: what it would be, in one sentence, and what is computed under it.  */
struct check_reading {
  const char *reading;
  double value;
  const char *unit;
  double deviation;               /* claim / value - 1; NAN where that says nothing */
  int cost;                       /* 1: everybody's mistake; more: rarer, or two at once */
  struct check_reading *next;
};

/* What would have to be true instead, all else as stated.  */
struct check_need {
  const char *what;               /* "temperature" */
  double value;                   /* NAN: none does it */
  const char *unit, *stated;      /* "degC"; what is stated now, or null */
  double least, greatest;         /* where it was looked for */
  struct check_need *next;
};

/* A figure of a sheet under the readings chosen for the whole sheet.  */
struct check_figure {
  const char *name, *stated;      /* "inlet" or null; "1057 ft3/min at 32 degC" */
  double value, computed, deviation;
  const char *unit;
  bool holds, as_written;         /* inside its limit under the readings; without any */
  struct check_figure *next;
};

struct check_verdict {
  const char *stated;             /* "3380 Nm3/h"; of a sheet its name */
  enum check_outcome outcome;
  double value, computed;         /* the claim and what is computed, in `unit` */
  double difference, deviation;   /* value - computed; value / computed - 1, or NAN */
  double limit;                   /* how far apart they may be */
  bool by_digits;                 /* the limit is the claim's rounding, else its uncertainty */
  const char *unit;
  size_t reading_count, tied;     /* how many share the first place */
  struct check_reading *readings; /* best first */
  struct check_reading *ruled_out;           /* usual ones that do not fit */
  struct check_need *needs;
  struct check_figure *figures;   /* of a sheet; else null */
  size_t figure_count, agreeing;  /* how many figures there are, and agree */
  const char *open_at;            /* of a sheet: what a volume without its state is counted at */
};

#endif
