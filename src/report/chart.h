/* Draws a process chart: boxes in columns from left to right, lines as wide as the flows.

   A box stands behind all that feed it, as far as no loop is in the way.  What goes back runs in a
   lane below the boxes.  Every line has a slot of its own at both its ends, as high as its label,
   and labels stand in zones of their own beside the boxes: so no label hides another.           */
#ifndef REPORT_CHART_H
#define REPORT_CHART_H

#include <stdbool.h>
#include <stddef.h>
#include "report/canvas.h"
#include "result/chart.h"

struct arena; struct text;

struct chart_plan;

/* Where everything stands; in the arena.  The chart has at most CHART_BOXES_MOST boxes, at least
   one.                                                                                          */
const struct chart_plan *chart_plan (struct arena *, const struct chart *);
struct canvas_sheet chart_sheet (const struct chart_plan *);
void chart_draw (const struct chart_plan *, struct canvas *);

/* All of it, as SVG, behind OUT.  */
void chart_write (struct text *out, const struct chart *);

#endif
