/* Process charts: every label can be read.  A canvas that keeps what is drawn is looked at.  */
#include "config.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "libtest.h"
#include "report/chart_plan.h"
#include "support/arena.h"
#include "support/text.h"

enum { MOST = 2000 };

struct label { double left, right, top, bottom; const char *string; };
struct kept { struct canvas canvas; struct label labels[MOST]; size_t count, paths, ends; };

static void
keep_path (struct canvas *canvas, const struct canvas_path *path)
{
  struct kept *kept = (struct kept *) canvas;
  CHECK (path->count > 1);
  for (size_t i = 0; i < path->count; i++)
    CHECK (isfinite (path->points[i].x) && isfinite (path->points[i].y));
  kept->paths++;
}

static void
keep_text (struct canvas *canvas, const struct canvas_text *text)
{
  struct kept *kept = (struct kept *) canvas;
  const double size = text->size > 0 ? text->size : CANVAS_LETTERS;
  const double width = canvas_text_width (text->string, size);
  const double left = text->align == CANVAS_MIDDLE ? text->x - 0.5 * width : text->x;
  NEED (kept->count < MOST);
  kept->labels[kept->count++] = (struct label) { left, left + width, text->y - 0.75 * size,
                                                 text->y + 0.2 * size, text->string };
}

static void
keep_end (struct canvas *canvas)
{
  ((struct kept *) canvas)->ends++;
}

static bool
overlap (const struct label *a, const struct label *b)
{
  return a->left < b->right && b->left < a->right && a->top < b->bottom && b->top < a->bottom;
}

/* Draws CHART and holds it to what a chart must be.  */
static void
look (const struct chart *chart)
{
  struct arena *arena = arena_create ();
  const struct chart_plan *plan = chart_plan (arena, chart);
  const struct canvas_sheet sheet = chart_sheet (plan);
  struct kept *kept = calloc (1, sizeof *kept);
  NEED (kept != NULL);
  kept->canvas = (struct canvas) { .path = keep_path, .text = keep_text, .end = keep_end };
  chart_draw (plan, &kept->canvas);
  SAME_INT (kept->ends, 1);
  SAME_INT (kept->paths, 1 + chart->box_count + 2 * chart->arrow_count);
  for (size_t i = 0; i < kept->count; i++) {
    const struct label *one = &kept->labels[i];
    CHECK (one->left >= 0 && one->right <= sheet.width && one->top >= 0
           && one->bottom <= sheet.height);
    for (size_t k = 0; k < i; k++)
      CHECK (!overlap (one, &kept->labels[k]));
  }
  free (kept);
  arena_destroy (arena);
}

/* A mixer with recycle, a membrane, a purge; a fact nobody knows is drawn too.  */
static void
recycle_and_purge (void)
{
  static const struct chart_box boxes[] = { { "dosing", "mixes" }, { "membrane", "separates" },
                                            { "purge-tee", "splits" } };
  static const struct chart_arrow arrows[] = {
    { "biogas", "850 Nm3/h", "CH4 60, CO2 40 mol%", 850, CHART_OUTSIDE, 0 },
    { "recycle", "166.6 Nm3/h", "CO2 96.1, CH4 3.9 mol%", 166.6, 2, 0 },
    { "mixed", "1016.6 Nm3/h", "CH4 50.8, CO2 49.2 mol%", 1016.6, 0, 1 },
    { "sweet", "517 Nm3/h", "CH4 97.2, CO2 2.8 mol%", 517, 1, CHART_OUTSIDE },
    { "rich", "333 Nm3/h", "CO2 96.1, CH4 3.9 mol%", 333, 1, 2 },
    { "vent", NULL, NULL, (double) NAN, 2, CHART_OUTSIDE }
  };
  const struct chart chart = { "plant", "flows in Nm3/h at 0 degC, 101.325 kPa, ideal-gas volume",
                               "closes to 0.0001 %", 3, 6, boxes, arrows };
  struct text out;
  look (&chart);
  text_init (&out);
  chart_write (&out, &chart);
  CHECK (strstr (out.bytes, ">membrane</text>") != NULL);
  CHECK (strstr (out.bytes, ">333 Nm3/h</text>") != NULL);
  CHECK (strstr (out.bytes, "nan") == NULL);
  CHECK (strcmp (out.bytes + out.length - 7, "</svg>\n") == 0);
  text_clear (&out);
}

/* Boxes joined at random, forward, backward and to themselves.  */
static void
at_random (void)
{
  static const char *const names[] = { "feed", "a stream with a long name", "x", "tail" };
  unsigned long seed = 20261201;
  for (int round = 0; round < 60; round++) {
    struct chart_box boxes[12];
    struct chart_arrow arrows[40];
    const size_t b = 1 + (size_t) round % 12, n = b + (size_t) round % 29;
    for (size_t i = 0; i < b; i++)
      boxes[i] = (struct chart_box) { names[i % 4], "separates" };
    for (size_t i = 0; i < n; i++) {
      unsigned long draw[3];
      for (size_t k = 0; k < 3; k++) {
        seed = (seed * 1103515245 + 12345) % 2147483648UL;
        draw[k] = seed >> 8;
      }
      int from = (int) (draw[0] % (b + 1)) - 1;
      const int to = (int) (draw[1] % (b + 1)) - 1;
      if (from == CHART_OUTSIDE && to == CHART_OUTSIDE)
        from = 0;
      arrows[i] = (struct chart_arrow) { names[i % 4], "1234.56 Nm3/h", "CH4 60, CO2 40 mol%",
                                         (double) (draw[2] % 1000), from, to };
    }
    const struct chart chart = { "random", "basis", NULL, b, n, boxes, arrows };
    look (&chart);
  }
}

/* Air, mixed with flue gas that is blown round, into a burner: the burner comes first in the list,
   and yet the air goes forward and what is blown round goes back.                               */
static void
smallest_goes_back (void)
{
  static const struct chart_box boxes[] = { { "burner", "reacts" }, { "fan", "splits" },
                                            { "box", "mixes" } };
  static const struct chart_arrow arrows[] = {
    { "fuel", NULL, NULL, 10, CHART_OUTSIDE, 0 },     { "air", NULL, NULL, 143, 2, 0 },
    { "flue", NULL, NULL, 153, 0, 1 },                { "round", NULL, NULL, 23, 1, 2 },
    { "stack", NULL, NULL, 130, 1, CHART_OUTSIDE },   { "fresh", NULL, NULL, 120, CHART_OUTSIDE, 2 }
  };
  const struct chart chart = { "burner", "flows in kmol/h", NULL, 3, 6, boxes, arrows };
  struct arena *arena = arena_create ();
  const struct chart_plan *plan = chart_plan (arena, &chart);
  CHECK (plan->boxes[2].x < plan->boxes[0].x && plan->boxes[0].x < plan->boxes[1].x);
  CHECK (plan->lane[3] > 0);
  for (size_t a = 0; a < chart.arrow_count; a++)
    CHECK (a == 3 || !(plan->lane[a] > 0));
  look (&chart);
  arena_destroy (arena);
}

/* Two that go back the same way: the inner one runs inside the outer one all along.  */
static void
lanes_do_not_cross (void)
{
  static const struct chart_box boxes[] = { { "mixer", "mixes" }, { "stage", "separates" },
                                            { "t1", "splits" }, { "t2", "splits" } };
  static const struct chart_arrow arrows[] = {
    { "fresh", NULL, NULL, 100, CHART_OUTSIDE, 0 },   { "back-one", NULL, NULL, 29, 2, 0 },
    { "back-two", NULL, NULL, 37, 3, 0 },             { "inflow", NULL, NULL, 165, 0, 1 },
    { "side", NULL, NULL, 36, 1, 2 },                 { "bottom", NULL, NULL, 52, 1, 3 },
    { "bleed", NULL, NULL, 7, 2, CHART_OUTSIDE },     { "drain", NULL, NULL, 15, 3, CHART_OUTSIDE }
  };
  const struct chart chart = { "loops", "flows in kmol/h", NULL, 4, 8, boxes, arrows };
  struct arena *arena = arena_create ();
  const struct chart_plan *plan = chart_plan (arena, &chart);
  const size_t inner = plan->lane[1] < plan->lane[2] ? 1 : 2, outer = 3 - inner;
  CHECK (plan->lane[inner] > 0);
  CHECK (plan->leaves[inner] > plan->leaves[outer]);
  CHECK (plan->arrives[inner] > plan->arrives[outer]);
  CHECK (plan->reach_out[inner] < plan->reach_out[outer]);
  CHECK (plan->reach_in[inner] < plan->reach_in[outer]);
  look (&chart);
  arena_destroy (arena);
}

static const struct test_case cases[] = {
  { "a loop is closed by its smallest flow", smallest_goes_back },
  { "lanes do not cross", lanes_do_not_cross },
  { "a recycle with its purge can be read", recycle_and_purge },
  { "no label hides another, whatever is joined", at_random },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
