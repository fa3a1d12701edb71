#include "config.h"
#include "report/note_bars.h"

#include <string.h>

#include "report/canvas.h"
#include "result/note.h"
#include "support/number.h"
#include "support/text.h"

/* In points.  A part has a label in its bar where it finds room there; all have one in the list
   below it.                                                                                     */
enum { WIDTH = 640, MARGIN_LEFT = 8, BAR = 22, LETTERS = 11, LINE = 15, GAP = 14, TOP = 30,
       SWATCH = 9 };

static void
share_add (struct text *out, const char *part, double share)
{
  text_add_format (out, "%s ", part);
  number_write (out, 100 * share, 4);
  text_add (out, " %");
}

/* How far the list of parts reaches: lines it takes.  DRAW it from Y downward, or only count.  */
static size_t
list_parts (struct canvas *canvas, const struct note_gas *gas, double y)
{
  double x = MARGIN_LEFT;
  size_t lines = 1;
  for (size_t i = 0; i < gas->count; i++) {
    struct text label;
    text_init (&label);
    share_add (&label, gas->parts[i], gas->fractions[i]);
    const double width = SWATCH + 4 + canvas_text_width (label.bytes, LETTERS) + 14;
    if (x > MARGIN_LEFT && x + width > WIDTH) {
      x = MARGIN_LEFT;
      lines++;
    }
    if (canvas != NULL) {
      const double base = y + LINE * (double) lines;
      canvas_box (canvas, &(struct canvas_box) { x, base - SWATCH, SWATCH, SWATCH, canvas_hue (i),
                                                 "#000000", NULL });
      canvas->text (canvas, &(struct canvas_text) { .x = x + SWATCH + 4, .y = base,
                                                    .string = label.bytes, .size = LETTERS });
    }
    x += width;
    text_clear (&label);
  }
  return lines;
}

static double
height_of (const struct note_gas *gas)
{
  return LINE + BAR + 4 + LINE * (double) list_parts (NULL, gas, 0) + GAP;
}

static void
bar_draw (struct canvas *canvas, const struct note_gas *gas, double y)
{
  const double width = WIDTH - 2 * MARGIN_LEFT;
  double x = MARGIN_LEFT;
  for (size_t i = 0; i < gas->count; i++) {
    struct text label;
    text_init (&label);
    share_add (&label, gas->parts[i], gas->fractions[i]);
    canvas_box (canvas, &(struct canvas_box) { x, y, width * gas->fractions[i], BAR,
                                               canvas_hue (i), "#000000", label.bytes });
    x += width * gas->fractions[i];
    text_clear (&label);
  }
}

void
note_bars_write (struct text *out, const struct note_gas *gases)
{
  double height = TOP, y = TOP;
  struct canvas canvas;
  for (const struct note_gas *g = gases; g != NULL; g = g->next)
    height += height_of (g);
  canvas_open_svg (&canvas, out, &(struct canvas_sheet) {
      WIDTH, height, "Compositions", "Shares by amount of the gases that were defined, mol%" });
  canvas_box (&canvas, &(struct canvas_box) { 0, 0, WIDTH, height, "#ffffff", NULL, NULL });
  canvas.text (&canvas, &(struct canvas_text) { .x = MARGIN_LEFT, .y = 18,
                                                .string = "Compositions, mol%, of the whole gas",
                                                .size = 13, .bold = true });
  for (const struct note_gas *g = gases; g != NULL; g = g->next) {
    canvas.text (&canvas, &(struct canvas_text) { .x = MARGIN_LEFT, .y = y + LETTERS,
                                                  .string = g->name, .size = LETTERS + 1 });
    bar_draw (&canvas, g, y + LINE);
    list_parts (&canvas, g, y + LINE + BAR + 4);
    y += height_of (g);
  }
  canvas.end (&canvas);
}
