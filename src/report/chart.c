#include "config.h"
#include "report/chart_plan.h"

#include <math.h>
#include <string.h>

#include "support/arena.h"
#include "support/text.h"

static const char line_known[] = "#7f9db0", line_open[] = "#c4c4c4", line_box[] = "#404040",
                  fill_box[] = "#f2efe8";

/* The longest path: a lane has twelve points, a passage four a column.  */
enum { POINTS_MOST = 12 + 4 * CHART_BOXES_MOST };

struct trace { struct canvas_point points[POINTS_MOST]; size_t count; };

static void
add_point (struct trace *trace, enum canvas_step step, double x, double y)
{
  if (trace->count < POINTS_MOST)
    trace->points[trace->count++] = (struct canvas_point) { step, x, y };
}

/* Leaves horizontally, arrives horizontally.  */
static void
add_bend (struct trace *trace, double from_x, double from_y, double x, double y)
{
  const double middle = 0.5 * (from_x + x);
  add_point (trace, CANVAS_CURVE, middle, from_y);
  add_point (trace, CANVAS_CURVE, middle, y);
  add_point (trace, CANVAS_CURVE, x, y);
}

/* Forward, through the columns between.  */
static void
trace_forward (const struct chart_plan *plan, size_t a, struct trace *trace)
{
  const struct chart_arrow *arrow = &plan->chart->arrows[a];
  const size_t from = plan->column[arrow->from], to = plan->column[arrow->to];
  double y = plan->leaves[a];
  for (size_t c = from; c < to; c++) {
    const double next = c + 1 == to ? plan->arrives[a] : plan->through[a][c + 1];
    add_point (trace, CANVAS_LINE, plan->bends[c], y);
    add_bend (trace, plan->bends[c], y, plan->enters[c + 1], next);
    y = next;
  }
}

/* Back, in a lane below the boxes.  */
static void
trace_back (const struct chart_plan *plan, size_t a, struct trace *trace)
{
  const struct chart_arrow *arrow = &plan->chart->arrows[a];
  const double out = plan->bends[plan->column[arrow->from]];
  const double in = plan->enters[plan->column[arrow->to]], lane = plan->lane[a];
  const double round = 0.45 * CHART_BEND * plan->reach_out[a];
  const double back = 0.45 * CHART_BEND * plan->reach_in[a];
  add_point (trace, CANVAS_LINE, out, plan->leaves[a]);
  add_point (trace, CANVAS_CURVE, out + round, plan->leaves[a]);
  add_point (trace, CANVAS_CURVE, out + round, lane);
  add_point (trace, CANVAS_CURVE, out, lane);
  add_point (trace, CANVAS_LINE, in, lane);
  add_point (trace, CANVAS_CURVE, in - back, lane);
  add_point (trace, CANVAS_CURVE, in - back, plan->arrives[a]);
  add_point (trace, CANVAS_CURVE, in, plan->arrives[a]);
}

/* Where the line ends, in front of its point.  */
static struct canvas_point
trace_arrow (const struct chart_plan *plan, size_t a, struct trace *trace)
{
  const struct chart_arrow *arrow = &plan->chart->arrows[a];
  struct canvas_point end = { CANVAS_LINE, 0, plan->arrives[a] };
  if (arrow->from == CHART_OUTSIDE) {
    add_point (trace, CANVAS_MOVE, plan->enters[plan->column[arrow->to]], plan->arrives[a]);
  } else {
    const struct chart_place *box = &plan->boxes[arrow->from];
    add_point (trace, CANVAS_MOVE, box->x + box->width, plan->leaves[a]);
  }
  if (arrow->to == CHART_OUTSIDE) {
    end.x = plan->bends[plan->column[arrow->from]];
    end.y = plan->leaves[a];
  } else {
    end.x = plan->boxes[arrow->to].x;
    if (arrow->from != CHART_OUTSIDE && plan->lane[a] > 0)
      trace_back (plan, a, trace);
    else if (arrow->from != CHART_OUTSIDE)
      trace_forward (plan, a, trace);
  }
  end.x -= CHART_POINT;
  add_point (trace, CANVAS_LINE, end.x, end.y);
  return end;
}

static void
draw_arrow (const struct chart_plan *plan, size_t a, struct canvas *canvas)
{
  const struct chart_arrow *arrow = &plan->chart->arrows[a];
  const char *hue = isnan (arrow->amount) ? line_open : line_known;
  struct trace trace;
  trace.count = 0;
  const struct canvas_point end = trace_arrow (plan, a, &trace);
  const struct canvas_path path = { .points = trace.points, .count = trace.count, .line = hue,
                                    .width = plan->widths[a], .title = arrow->name };
  canvas->path (canvas, &path);
  const double half = 0.5 * plan->widths[a] + 4;
  const struct canvas_point head[] = { { CANVAS_MOVE, end.x, end.y - half },
                                       { CANVAS_LINE, end.x + CHART_POINT, end.y },
                                       { CANVAS_LINE, end.x, end.y + half } };
  const struct canvas_path point = { .points = head, .count = 3, .closed = true, .fill = hue };
  canvas->path (canvas, &point);
}

/* Up to three lines above the beginning of an arrow.  */
static void
draw_label (const struct chart_plan *plan, size_t a, struct canvas *canvas)
{
  const struct chart_arrow *arrow = &plan->chart->arrows[a];
  const bool inward = arrow->from == CHART_OUTSIDE;
  const double x = inward ? plan->enters[plan->column[arrow->to]]
                          : plan->right[plan->column[arrow->from]];
  double y = (inward ? plan->arrives[a] : plan->leaves[a]) - 0.5 * plan->widths[a] - 4;
  const char *lines[] = { arrow->parts, arrow->flow, arrow->name };
  for (size_t i = 0; i < 3; i++) {
    if (lines[i] == NULL)
      continue;
    const struct canvas_text text = { .x = x + 6, .y = y, .string = lines[i], .bold = i == 2 };
    canvas->text (canvas, &text);
    y -= CHART_LINE;
  }
}

static void
draw_box (const struct chart_plan *plan, size_t b, struct canvas *canvas)
{
  const struct chart_place *place = &plan->boxes[b];
  const struct chart_box *box = &plan->chart->boxes[b];
  const struct canvas_box frame = { place->x, place->y, place->width, place->height, fill_box,
                                    line_box, box->name };
  canvas_box (canvas, &frame);
  struct canvas_text text = { .x = place->x + 0.5 * place->width,
                              .y = place->y + 0.5 * place->height, .string = box->name,
                              .align = CANVAS_MIDDLE, .bold = true };
  canvas->text (canvas, &text);
  text.y += CHART_LINE + 1;
  text.string = box->kind;
  text.bold = false;
  canvas->text (canvas, &text);
}

struct canvas_sheet
chart_sheet (const struct chart_plan *plan)
{
  return (struct canvas_sheet) { .width = plan->width, .height = plan->height,
                                 .title = plan->chart->title,
                                 .description = plan->chart->basis };
}

void
chart_draw (const struct chart_plan *plan, struct canvas *canvas)
{
  const struct chart *chart = plan->chart;
  const struct canvas_text title = { .x = CHART_MARGIN, .y = CHART_MARGIN + 4,
                                     .string = chart->title, .size = 16, .bold = true };
  const struct canvas_box paper = { 0, 0, plan->width, plan->height, "#ffffff", NULL, NULL };
  canvas_box (canvas, &paper);
  canvas->text (canvas, &title);
  for (size_t a = 0; a < chart->arrow_count; a++)
    draw_arrow (plan, a, canvas);
  for (size_t b = 0; b < chart->box_count; b++)
    draw_box (plan, b, canvas);
  for (size_t a = 0; a < chart->arrow_count; a++)
    draw_label (plan, a, canvas);
  struct canvas_text foot = { .x = CHART_MARGIN, .y = plan->height - 26, .string = chart->basis };
  if (chart->basis != NULL)
    canvas->text (canvas, &foot);
  foot.y += CHART_LINE + 3;
  foot.string = chart->closure;
  if (chart->closure != NULL)
    canvas->text (canvas, &foot);
  canvas->end (canvas);
}

void
chart_write (struct text *out, const struct chart *chart)
{
  struct arena *arena = arena_create ();
  const struct chart_plan *plan = chart_plan (arena, chart);
  const struct canvas_sheet sheet = chart_sheet (plan);
  struct canvas canvas;
  canvas_open_svg (&canvas, out, &sheet);
  chart_draw (plan, &canvas);
  arena_destroy (arena);
}
