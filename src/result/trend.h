/* One figure of many samples: what each has, and what they have together.

   Everything is borrowed from the arena of the line.  All figures are in `unit`.                */
#ifndef RESULT_TREND_H
#define RESULT_TREND_H

#include <stdbool.h>
#include <stddef.h>

/* Of fewer figures there is no robust deviation.  */
enum { TREND_FEWEST = 5 };

/* How a figure stands to the others, by Grubbs' test: usual, beyond 5 %, beyond 1 %.  */
enum trend_standing { TREND_USUAL, TREND_STRAGGLER, TREND_OUTLIER };

struct trend_row {
  const char *name;
  double value;                   /* NAN: there is none, and `why` says why */
  double uncertainty;             /* standard; NAN: none */
  const char *moisture, *basis;   /* of its own where the rows differ; else null */
  const char *why;
  enum trend_standing standing;
  double apart;                   /* from the median in robust deviations; NAN where it has none */
};

struct trend_numbers {
  size_t count;
  double mean, median, standard_deviation;       /* NAN where there is none */
  double least, greatest;
  const char *least_of, *greatest_of;
  double robust_deviation;        /* of the median; NAN where there is none */
};

struct trend {
  const char *what;               /* "wobbe of lab" */
  const char *over;               /* "7 samples of week.csv", "3 gases" */
  const char *unit;               /* "" for a plain number */
  const char *moisture, *basis;   /* of all rows; or null */
  double coverage;                /* uncertainties are shown times this; 1: standard */
  size_t count, outliers;
  const struct trend_row *rows;
  struct trend_numbers all, without;             /* without outliers */
  bool tested;                    /* by Grubbs' test, the last of which came to: */
  double G, straggler, outlier;
  const char *tested_of;
  /* Hampel's identifier: `beyond` rows are farther from the median than `limit` robust deviations;
     the farthest one is.  */
  double limit;                   /* 0: there was no robust deviation */
  size_t beyond;
  double farthest;
  const char *farthest_of;
};

#endif
