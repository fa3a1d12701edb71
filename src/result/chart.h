/* A process chart, before anybody draws it: boxes and the flows between them.

   Made by the language in the arena of the line.  Amounts only say how wide a line is drawn, in
   any one unit; what is printed beside it is text.                                             */
#ifndef RESULT_CHART_H
#define RESULT_CHART_H

#include <stddef.h>

/* More boxes than that are no picture any more.  */
enum { CHART_BOXES_MOST = 200 };
enum { CHART_OUTSIDE = -1 };               /* in place of a box: the edge of the chart */

struct chart_box { const char *name, *kind; };   /* "membrane", "separates" */
struct chart_arrow {
  const char *name, *flow, *parts;         /* "feed", "850 Nm3/h", "CH4 60, CO2 40 mol%"; or null */
  double amount;                           /* NAN: not known, drawn thin and pale */
  int from, to;                            /* boxes, or CHART_OUTSIDE; not both outside */
};

struct chart {
  const char *title, *basis, *closure;     /* closure may be null */
  size_t box_count, arrow_count;
  const struct chart_box *boxes;
  const struct chart_arrow *arrows;
};

/* A chart that becomes a file of its own, unless that is one of INPUTS (only `text`).  */
struct note_row;
struct picture {
  const char *file;
  const struct chart *chart;
  const struct note_row *inputs;
  struct picture *next;                    /* of the same statement: open */
};

#endif
