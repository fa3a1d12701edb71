#include "config.h"
#include "report/chart_plan.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "support/arena.h"

static double
larger (double a, double b)
{
  return a > b ? a : b;
}

/* ---- Columns ---- */

/* Marks the arrows that close a loop, seen from box B on; STATE is 1 on the way, 2 when done.  */
static void
find_loops (const struct chart *chart, int b, char state[], bool back[])
{
  state[b] = 1;
  for (size_t a = 0; a < chart->arrow_count; a++) {
    const int to = chart->arrows[a].to;
    if (chart->arrows[a].from != b || to == CHART_OUTSIDE)
      continue;
    if (state[to] == 1)
      back[a] = true;
    else if (state[to] == 0)
      find_loops (chart, to, state, back);
  }
  state[b] = 2;
}

/* Does what is KEPT lead from box B to box END?  */
static bool
leads_to (const struct chart *chart, const bool kept[], int b, int end, char seen[])
{
  if (b == end)
    return true;
  seen[b] = 1;
  for (size_t a = 0; a < chart->arrow_count; a++) {
    const int to = chart->arrows[a].to;
    if (kept[a] && chart->arrows[a].from == b && !seen[to]
        && leads_to (chart, kept, to, end, seen))
      return true;
  }
  return false;
}

/* Is arrow A to be kept before B: larger, or no smaller and no loop's end as it is?  */
static bool
goes_before (const struct chart *chart, const bool back[], size_t a, size_t b)
{
  static const double as_large = 1e-6;            /* relative: less is rounding */
  const double difference = chart->arrows[a].amount - chart->arrows[b].amount;
  if (fabs (difference) <= as_large * fabs (chart->arrows[b].amount))
    return !back[a] && back[b];
  return difference > 0;
}

/* Arrows between boxes, the largest first; returns how many, 0 if one's amount is not known.  */
static size_t
sort_inner (const struct chart *chart, const bool back[], size_t sorted[])
{
  size_t n = 0;
  for (size_t a = 0; a < chart->arrow_count; a++) {
    const struct chart_arrow *arrow = &chart->arrows[a];
    if (arrow->from == CHART_OUTSIDE || arrow->to == CHART_OUTSIDE)
      continue;
    if (isnan (arrow->amount))
      return 0;
    size_t k = n++;
    for (; k > 0 && goes_before (chart, back, a, sorted[k - 1]); k--)
      sorted[k] = sorted[k - 1];
    sorted[k] = a;
  }
  return n;
}

/* Where all amounts are known a loop is closed by its smallest flow: what is blown round a burner
   goes back, not its air.                                                                       */
static void
close_by_smallest (struct arena *arena, const struct chart *chart, bool back[])
{
  size_t *sorted = ARENA_ARRAY (arena, chart->arrow_count, size_t);
  bool *kept = ARENA_ARRAY (arena, chart->arrow_count, bool);
  char *seen = ARENA_ARRAY (arena, chart->box_count, char);
  const size_t n = sort_inner (chart, back, sorted);
  for (size_t i = 0; i < n; i++) {
    const struct chart_arrow *arrow = &chart->arrows[sorted[i]];
    memset (seen, 0, chart->box_count);
    back[sorted[i]] = leads_to (chart, kept, arrow->to, arrow->from, seen);
    kept[sorted[i]] = !back[sorted[i]];
  }
}

static bool
feeds_from_outside (const struct chart *chart, int b)
{
  for (size_t a = 0; a < chart->arrow_count; a++)
    if (chart->arrows[a].to == b && chart->arrows[a].from == CHART_OUTSIDE)
      return true;
  return false;
}

/* A box stands one column behind the last that feeds it; loops are looked for from the boxes that
   are fed from outside.                                                                        */
static void
find_columns (struct arena *arena, struct chart_plan *plan, bool back[])
{
  const struct chart *chart = plan->chart;
  char *state = ARENA_ARRAY (arena, chart->box_count, char);
  for (int round = 0; round < 2; round++)
    for (size_t b = 0; b < chart->box_count; b++)
      if (state[b] == 0 && (round == 1 || feeds_from_outside (chart, (int) b)))
        find_loops (chart, (int) b, state, back);
  close_by_smallest (arena, chart, back);
  for (bool moved = true; moved;) {
    moved = false;
    for (size_t a = 0; a < chart->arrow_count; a++) {
      const struct chart_arrow *arrow = &chart->arrows[a];
      if (back[a] || arrow->from == CHART_OUTSIDE || arrow->to == CHART_OUTSIDE)
        continue;
      if (plan->column[arrow->to] <= plan->column[arrow->from]) {
        plan->column[arrow->to] = plan->column[arrow->from] + 1;
        moved = true;
      }
    }
  }
  for (size_t b = 0; b < chart->box_count; b++)
    plan->columns = plan->column[b] + 1 > plan->columns ? plan->column[b] + 1 : plan->columns;
}

/* ---- Order in a column ---- */

/* What stands in a column: a box, or the passage of an arrow to a column further on.  */
struct item { bool is_box; size_t box, arrow; double rank, weight; };
struct column { struct item *items; size_t count; };

static bool
passes (const struct chart_plan *plan, const bool back[], size_t a, size_t column)
{
  const struct chart_arrow *arrow = &plan->chart->arrows[a];
  return !back[a] && arrow->from != CHART_OUTSIDE && arrow->to != CHART_OUTSIDE
         && plan->column[arrow->from] < column && column < plan->column[arrow->to];
}

static struct column *
fill_columns (struct arena *arena, const struct chart_plan *plan, const bool back[])
{
  const struct chart *chart = plan->chart;
  struct column *columns = ARENA_ARRAY (arena, plan->columns, struct column);
  for (size_t c = 0; c < plan->columns; c++) {
    struct column *column = &columns[c];
    column->items = ARENA_ARRAY (arena, chart->box_count + chart->arrow_count, struct item);
    for (size_t b = 0; b < chart->box_count; b++)
      if (plan->column[b] == c)
        column->items[column->count++] = (struct item) { .is_box = true, .box = b };
    for (size_t a = 0; a < chart->arrow_count; a++)
      if (passes (plan, back, a, c))
        column->items[column->count++] = (struct item) { .arrow = a };
    for (size_t i = 0; i < column->count; i++)
      column->items[i].rank = (double) i;
  }
  return columns;
}

static bool
touches (const struct chart_arrow *arrow, size_t a, const struct item *item)
{
  return item->is_box ? arrow->from == (int) item->box || arrow->to == (int) item->box
                      : item->arrow == a;
}

/* The mean rank of what ITEM is joined to in the column beside it (K. Sugiyama et al., IEEE Trans.
   SMC 11 (1981) 109: the barycentre).                                                           */
static double
centre (const struct chart *chart, const struct item *item, const struct column *beside)
{
  double sum = 0, count = 0;
  for (size_t a = 0; a < chart->arrow_count; a++) {
    if (!touches (&chart->arrows[a], a, item))
      continue;
    for (size_t i = 0; i < beside->count; i++)
      if (touches (&chart->arrows[a], a, &beside->items[i])) {
        sum += beside->items[i].rank;
        count++;
      }
  }
  return count > 0 ? sum / count : item->rank;
}

static void
sort_column (const struct chart *chart, struct column *column, const struct column *beside)
{
  for (size_t i = 0; i < column->count; i++)
    column->items[i].weight = centre (chart, &column->items[i], beside);
  for (size_t i = 1; i < column->count; i++) {
    const struct item item = column->items[i];
    size_t k = i;
    for (; k > 0 && column->items[k - 1].weight > item.weight; k--)
      column->items[k] = column->items[k - 1];
    column->items[k] = item;
  }
  for (size_t i = 0; i < column->count; i++)
    column->items[i].rank = (double) i;
}

enum { SWEEPS = 6 };

static void
order_columns (const struct chart_plan *plan, struct column columns[])
{
  for (int sweep = 0; sweep < SWEEPS; sweep++) {
    for (size_t c = 1; c < plan->columns; c++)
      sort_column (plan->chart, &columns[c], &columns[c - 1]);
    for (size_t c = plan->columns - 1; c-- > 0;)
      sort_column (plan->chart, &columns[c], &columns[c + 1]);
  }
}

/* ---- Heights ---- */

static size_t
ends_at (const struct chart *chart, size_t box, bool inlets)
{
  size_t n = 0;
  for (size_t a = 0; a < chart->arrow_count; a++)
    n += (inlets ? chart->arrows[a].to : chart->arrows[a].from) == (int) box;
  return n;
}

/* Returns the height of a column stacked from TOP.  */
static double
stack_column (const struct chart_plan *plan, const struct column *column, size_t c, double top)
{
  double y = top;
  for (size_t i = 0; i < column->count; i++) {
    const struct item *item = &column->items[i];
    double height = CHART_SLOT;
    if (item->is_box) {
      const size_t in = ends_at (plan->chart, item->box, true);
      const size_t out = ends_at (plan->chart, item->box, false);
      height *= (double) (in > out ? in : out > 0 ? out : 1);
      plan->boxes[item->box].y = y;
      plan->boxes[item->box].height = height;
    } else {
      plan->through[item->arrow][c] = y + CHART_SLOT - 0.5 * CHART_WIDEST - 5;
    }
    y += height + CHART_GAP;
  }
  return y - CHART_GAP - top;
}

/* The height of an arrow on its way, seen from the side of BOX: the order of slots follows it.  */
static double
bearing (const struct chart_plan *plan, const bool back[], size_t a, bool inlet)
{
  const struct chart_arrow *arrow = &plan->chart->arrows[a];
  const int other = inlet ? arrow->from : arrow->to;
  if (other == CHART_OUTSIDE)
    return inlet ? -1 : 0;
  if (back[a])
    return 1e9;
  const size_t beside = inlet ? plan->column[arrow->to] - 1 : plan->column[arrow->from] + 1;
  const struct chart_place *box = &plan->boxes[other];
  return beside == plan->column[other] ? box->y + 0.5 * box->height : plan->through[a][beside];
}

/* Slots of one side of a box, from the top down in the order of where their arrows come from.  */
static void
slot_side (const struct chart_plan *plan, const bool back[], size_t b, bool inlet, size_t sorted[])
{
  size_t n = 0;
  const struct chart *chart = plan->chart;
  for (size_t a = 0; a < chart->arrow_count; a++) {
    if ((inlet ? chart->arrows[a].to : chart->arrows[a].from) != (int) b)
      continue;
    const double at = bearing (plan, back, a, inlet);
    size_t k = n++;
    for (; k > 0 && bearing (plan, back, sorted[k - 1], inlet) > at; k--)
      sorted[k] = sorted[k - 1];
    sorted[k] = a;
  }
  const struct chart_place *box = &plan->boxes[b];
  double y = box->y + 0.5 * (box->height - (double) n * CHART_SLOT);
  for (size_t k = 0; k < n; k++, y += CHART_SLOT)
    (inlet ? plan->arrives : plan->leaves)[sorted[k]] = y + CHART_SLOT - 0.5 * CHART_WIDEST - 5;
}

/* ---- Lanes ---- */

/* Does A run in a lane above that of B?  The shorter way, and of two from one column that which
   leaves further down: so neither crosses the other on its way down.                            */
static bool
runs_above (const struct chart_plan *plan, size_t a, size_t b)
{
  const struct chart_arrow *one = &plan->chart->arrows[a], *other = &plan->chart->arrows[b];
  const size_t way = plan->column[one->from] - plan->column[one->to];
  const size_t other_way = plan->column[other->from] - plan->column[other->to];
  return way != other_way ? way < other_way : plan->leaves[a] > plan->leaves[b];
}

/* How far round the lane of arrow LANES[I] bends, from 0 to 1: further than those inside it.  */
static double
reach_of (const struct chart_plan *plan, const size_t lanes[], size_t n, size_t i, bool in)
{
  size_t inside = 0, all = 0;
  const struct chart_arrow *arrows = plan->chart->arrows, *arrow = &arrows[lanes[i]];
  const size_t column = plan->column[in ? arrow->to : arrow->from];
  for (size_t k = 0; k < n; k++)
    if (plan->column[in ? arrows[lanes[k]].to : arrows[lanes[k]].from] == column) {
      all++;
      inside += k <= i;
    }
  return (double) inside / (double) all;
}

/* One below the other from Y on, and what they meet at one box from the outer one down; returns
   where they end.                                                                               */
static double
place_lanes (struct arena *arena, struct chart_plan *plan, const bool back[], double y)
{
  const struct chart_arrow *arrows = plan->chart->arrows;
  size_t *lanes = ARENA_ARRAY (arena, plan->chart->arrow_count, size_t), n = 0;
  for (size_t a = 0; a < plan->chart->arrow_count; a++) {
    if (!back[a])
      continue;
    size_t k = n++;
    for (; k > 0 && runs_above (plan, a, lanes[k - 1]); k--)
      lanes[k] = lanes[k - 1];
    lanes[k] = a;
  }
  for (size_t i = 0; i < n; i++, y += CHART_LANE) {
    const size_t a = lanes[i];
    plan->lane[a] = y;
    plan->reach_out[a] = reach_of (plan, lanes, n, i, false);
    plan->reach_in[a] = reach_of (plan, lanes, n, i, true);
    for (size_t k = i + 1; k < n; k++) {
      const size_t b = lanes[k];
      if (arrows[a].to == arrows[b].to && plan->arrives[a] < plan->arrives[b]) {
        const double other = plan->arrives[a];
        plan->arrives[a] = plan->arrives[b];
        plan->arrives[b] = other;
      }
    }
  }
  return y;
}

static void
find_heights (struct arena *arena, struct chart_plan *plan, const bool back[],
              const struct column columns[])
{
  const struct chart *chart = plan->chart;
  double most = 0;
  for (size_t c = 0; c < plan->columns; c++)
    most = larger (most, stack_column (plan, &columns[c], c, 0));
  for (size_t c = 0; c < plan->columns; c++) {
    const double height = stack_column (plan, &columns[c], c, 0);
    (void) stack_column (plan, &columns[c], c, CHART_HEAD + 0.5 * (most - height));
  }
  size_t *sorted = ARENA_ARRAY (arena, chart->arrow_count, size_t);
  for (size_t b = 0; b < chart->box_count; b++) {
    slot_side (plan, back, b, true, sorted);
    slot_side (plan, back, b, false, sorted);
  }
  plan->height = place_lanes (arena, plan, back, CHART_HEAD + most + CHART_LANE) + CHART_FOOT;
}

/* ---- Widths ---- */

/* Letters differ: a tenth more than the mean, bold ones still more.  */
static double
words_width (const char *string, double by)
{
  return string != NULL ? by * canvas_text_width (string, CANVAS_LETTERS) : 0;
}

static double
label_width (const struct chart_arrow *arrow)
{
  const double plain = larger (words_width (arrow->flow, 1.15), words_width (arrow->parts, 1.15));
  return larger (words_width (arrow->name, 1.3), plain) + 16;
}

/* How wide the labels are that stand behind column C, or in front of it.  */
static double
labels_of (const struct chart_plan *plan, size_t c, bool behind)
{
  double width = 24;
  for (size_t a = 0; a < plan->chart->arrow_count; a++) {
    const struct chart_arrow *arrow = &plan->chart->arrows[a];
    const int box = behind ? arrow->from : arrow->to;
    const bool here = box != CHART_OUTSIDE && plan->column[box] == c
                      && (behind || arrow->from == CHART_OUTSIDE);
    width = here ? larger (width, label_width (arrow)) : width;
  }
  return width;
}

static double
boxes_of (const struct chart_plan *plan, size_t c)
{
  double width = 80;
  for (size_t b = 0; b < plan->chart->box_count; b++)
    if (plan->column[b] == c) {
      width = larger (width, words_width (plan->chart->boxes[b].name, 1.3) + 20);
      width = larger (width, words_width (plan->chart->boxes[b].kind, 1.15) + 20);
    }
  return width;
}

/* A foot or a title that is wider than the picture makes it so.  */
static double
sheet_words (const struct chart *chart)
{
  const double foot = larger (words_width (chart->basis, 1.15), words_width (chart->closure, 1.15));
  return larger (words_width (chart->title, 1.8), foot);
}

static void
find_widths (struct chart_plan *plan)
{
  double x = CHART_MARGIN + CHART_BEND;
  for (size_t c = 0; c < plan->columns; c++) {
    plan->enters[c] = x;
    plan->left[c] = x + labels_of (plan, c, false);
    plan->right[c] = plan->left[c] + boxes_of (plan, c);
    plan->bends[c] = plan->right[c] + labels_of (plan, c, true);
    x = plan->bends[c] + CHART_BEND;
  }
  plan->width = larger (x, sheet_words (plan->chart) + CHART_MARGIN) + CHART_MARGIN;
  for (size_t b = 0; b < plan->chart->box_count; b++) {
    plan->boxes[b].x = plan->left[plan->column[b]];
    plan->boxes[b].width = plan->right[plan->column[b]] - plan->left[plan->column[b]];
  }
}

static void
find_lines (struct chart_plan *plan)
{
  const struct chart *chart = plan->chart;
  for (size_t a = 0; a < chart->arrow_count; a++)
    if (chart->arrows[a].amount > plan->largest)
      plan->largest = chart->arrows[a].amount;
  for (size_t a = 0; a < chart->arrow_count; a++) {
    const double share = chart->arrows[a].amount / plan->largest;
    plan->widths[a] = share > 0 ? larger (1, CHART_WIDEST * share) : 1;
  }
}

const struct chart_plan *
chart_plan (struct arena *arena, const struct chart *chart)
{
  struct chart_plan *plan = ARENA_NEW (arena, struct chart_plan);
  const size_t boxes = chart->box_count, arrows = chart->arrow_count;
  plan->chart = chart;
  plan->boxes = ARENA_ARRAY (arena, boxes, struct chart_place);
  plan->column = ARENA_ARRAY (arena, boxes, size_t);
  plan->leaves = ARENA_ARRAY (arena, arrows, double);
  plan->arrives = ARENA_ARRAY (arena, arrows, double);
  plan->lane = ARENA_ARRAY (arena, arrows, double);
  plan->reach_out = ARENA_ARRAY (arena, arrows, double);
  plan->reach_in = ARENA_ARRAY (arena, arrows, double);
  plan->widths = ARENA_ARRAY (arena, arrows, double);
  plan->through = ARENA_ARRAY (arena, arrows, double *);
  bool *back = ARENA_ARRAY (arena, arrows, bool);
  find_columns (arena, plan, back);
  plan->left = ARENA_ARRAY (arena, plan->columns, double);
  plan->right = ARENA_ARRAY (arena, plan->columns, double);
  plan->bends = ARENA_ARRAY (arena, plan->columns, double);
  plan->enters = ARENA_ARRAY (arena, plan->columns, double);
  for (size_t a = 0; a < arrows; a++)
    plan->through[a] = ARENA_ARRAY (arena, plan->columns, double);
  struct column *columns = fill_columns (arena, plan, back);
  order_columns (plan, columns);
  find_heights (arena, plan, back, columns);
  find_widths (plan);
  find_lines (plan);
  return plan;
}
