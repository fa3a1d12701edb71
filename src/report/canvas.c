#include "config.h"
#include "report/canvas.h"

#include <math.h>
#include <string.h>

#include "support/number.h"
#include "support/text.h"

enum { COORDINATE_DIGITS = 6 };

void
markup_add (struct text *out, const char *string)
{
  const size_t n = strlen (string);
  for (size_t at = 0; at < n;) {
    unsigned code = 0;
    const size_t length = utf8_decode (string + at, n - at, &code);
    /* XML 1.0, section 2.2: of the control characters only tab and line ends may stand.  */
    const bool stray = length == 0 || code == 0xFFFE || code == 0xFFFF
                       || (code < 0x20 && code != '\t' && code != '\n')
                       || (code >= 0x7F && code < 0xA0);
    if (stray)
      text_add (out, "\uFFFD");
    else if (code == '&')
      text_add (out, "&amp;");
    else if (code == '<')
      text_add (out, "&lt;");
    else if (code == '>')
      text_add (out, "&gt;");
    else if (code == '"')
      text_add (out, "&quot;");
    else if (code == '\'')
      text_add (out, "&#39;");
    else
      text_add_bytes (out, string + at, length);
    at += length > 0 ? length : 1;
  }
}

/* A coordinate; where one was not finite the picture stays one that can be read.  */
static void
number_add (struct text *out, double value)
{
  struct text digits;
  text_init (&digits);
  number_write (&digits, isfinite (value) ? value : 0, COORDINATE_DIGITS);
  if (memchr (digits.bytes, '.', digits.length) && !memchr (digits.bytes, 'e', digits.length)) {
    while (digits.bytes[digits.length - 1] == '0')
      digits.length--;
    if (digits.bytes[digits.length - 1] == '.')
      digits.length--;
  }
  text_add_bytes (out, digits.bytes, digits.length);
  text_clear (&digits);
}

static void
attribute (struct text *out, const char *name, double value)
{
  text_add_format (out, " %s=\"", name);
  number_add (out, value);
  text_add_char (out, '"');
}

static void
title_add (struct text *out, const char *element, const char *string)
{
  text_add_format (out, "<%s>", element);
  markup_add (out, string);
  text_add_format (out, "</%s>", element);
}

static void
svg_path (struct canvas *canvas, const struct canvas_path *path)
{
  struct text *out = canvas->out;
  size_t bends = 0;
  text_add (out, "<path d=\"");
  for (size_t i = 0; i < path->count; i++) {
    const struct canvas_point *p = &path->points[i];
    const bool curve = p->step == CANVAS_CURVE;
    bends = curve ? bends + 1 : 0;
    text_add_char (out, curve && bends % 3 != 1 ? ' '
                        : curve ? 'C' : p->step == CANVAS_MOVE ? 'M' : 'L');
    number_add (out, p->x);
    text_add_char (out, ',');
    number_add (out, p->y);
  }
  text_add_format (out, "%s\" fill=\"%s\"", path->closed ? "Z" : "",
                   path->fill != NULL ? path->fill : "none");
  if (path->line != NULL) {
    text_add_format (out, " stroke=\"%s\"", path->line);
    attribute (out, "stroke-width", path->width);
  }
  text_add_char (out, '>');
  if (path->title != NULL)
    title_add (out, "title", path->title);
  text_add (out, "</path>\n");
}

static void
svg_text (struct canvas *canvas, const struct canvas_text *t)
{
  static const char *const anchors[] = { [CANVAS_LEFT] = "start", [CANVAS_MIDDLE] = "middle",
                                         [CANVAS_RIGHT] = "end" };
  struct text *out = canvas->out;
  text_add (out, "<text");
  attribute (out, "x", t->x);
  attribute (out, "y", t->y);
  attribute (out, "font-size", t->size > 0 ? t->size : CANVAS_LETTERS);
  text_add_format (out, " text-anchor=\"%s\"%s fill=\"%s\">", anchors[t->align],
                   t->bold ? " font-weight=\"bold\"" : "", t->fill != NULL ? t->fill : "#000000");
  markup_add (out, t->string);
  text_add (out, "</text>\n");
}

static void
svg_end (struct canvas *canvas)
{
  text_add (canvas->out, "</svg>\n");
}

void
canvas_open_svg (struct canvas *canvas, struct text *out, const struct canvas_sheet *sheet)
{
  *canvas = (struct canvas) { .path = svg_path, .text = svg_text, .end = svg_end, .out = out };
  text_add (out, "<svg xmlns=\"http://www.w3.org/2000/svg\" role=\"img\"");
  attribute (out, "width", ceil (sheet->width));         /* HTML wants whole numbers */
  attribute (out, "height", ceil (sheet->height));
  text_add (out, " viewBox=\"0 0 ");
  number_add (out, sheet->width);
  text_add_char (out, ' ');
  number_add (out, sheet->height);
  text_add (out, "\" style=\"font-family:sans-serif\">\n");
  title_add (out, "title", sheet->title);
  text_add_char (out, '\n');
  if (sheet->description != NULL) {
    title_add (out, "desc", sheet->description);
    text_add_char (out, '\n');
  }
}

void
canvas_box (struct canvas *canvas, const struct canvas_box *b)
{
  const struct canvas_point corners[] = {
    { CANVAS_MOVE, b->x, b->y }, { CANVAS_LINE, b->x + b->width, b->y },
    { CANVAS_LINE, b->x + b->width, b->y + b->height }, { CANVAS_LINE, b->x, b->y + b->height }
  };
  canvas->path (canvas, &(struct canvas_path) { .points = corners, .count = 4, .closed = true,
                                                .fill = b->fill, .line = b->line, .width = 1,
                                                .title = b->title });
}

const char *
canvas_hue (size_t i)
{
  /* From dark to light and back; chosen here, no source.  */
  static const char *const hues[] = { "#1f3b57", "#c9862b", "#2f6b4a", "#d9c7a0", "#7a2e3a",
                                      "#8fb3d1", "#4a4a4a", "#b8b8b8" };
  return hues[i % (sizeof hues / sizeof hues[0])];
}

double
canvas_text_width (const char *string, double size)
{
  return 0.55 * size * (double) utf8_characters (string, strlen (string));
}
