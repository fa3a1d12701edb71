/* Where everything of a chart stands.  For chart_plan.c and chart.c alone.  */
#ifndef REPORT_CHART_PLAN_H
#define REPORT_CHART_PLAN_H

#include "report/chart.h"

/* Sizes in points.  */
enum {
  CHART_MARGIN = 20, CHART_HEAD = 40, CHART_FOOT = 44,
  CHART_LINE = 13,               /* of a label, which has up to three */
  CHART_WIDEST = 16,             /* line */
  CHART_SLOT = 3 * CHART_LINE + CHART_WIDEST + 10,
  CHART_GAP = 14,                /* between the boxes of a column */
  CHART_BEND = 60,               /* the zone where lines change their height */
  CHART_LANE = CHART_WIDEST + 8,
  CHART_POINT = 10               /* of an arrow, its length */
};

struct chart_place { double x, y, width, height; };

struct chart_plan {
  const struct chart *chart;
  double width, height;
  size_t columns;
  struct chart_place *boxes;
  size_t *column;                /* of a box */
  /* By arrow: heights of its slots where it leaves and where it arrives, the column of its lane
     (0: goes forward) and, in `through`, its height in the columns it passes.                   */
  double *leaves, *arrives, *lane, **through;
  double *reach_out, *reach_in;  /* how far round its lane bends at both ends, 0 to 1 */
  double *widths;                /* of the lines */
  /* By column: left end of the boxes, their right end; behind them labels, up to `bends`; and
     where the next column's own labels begin.  Zone 0 is in front of the first column.          */
  double *left, *right, *bends, *enters;
  double largest;                /* amount */
};

#endif
