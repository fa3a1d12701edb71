/* A sheet to draw on: paths, text, end.

   Coordinates are in points from the top left corner, y downward.  A back end is a row of three
   functions; the one there is writes SVG.  A picture states its basis and its closure in words on
   it: that is the drawer's business, and so is that labels do not hide each other.             */
#ifndef REPORT_CANVAS_H
#define REPORT_CANVAS_H

#include <stdbool.h>
#include <stddef.h>

struct text;

/* Points of a path.  A CURVE is cubic and takes three points in turn: two it bends to, its end. */
enum canvas_step { CANVAS_MOVE, CANVAS_LINE, CANVAS_CURVE };
struct canvas_point { enum canvas_step step; double x, y; };

/* Colours are "#rrggbb"; null: none.  */
struct canvas_path {
  const struct canvas_point *points;
  size_t count;
  bool closed;
  const char *fill, *line;
  double width;                            /* of the line */
  const char *title;                       /* what it is, shown where one points at it; or null */
};

enum canvas_align { CANVAS_LEFT, CANVAS_MIDDLE, CANVAS_RIGHT };
struct canvas_text {
  double x, y;                             /* of the base line */
  const char *string;
  double size;                             /* of the letters; 0: CANVAS_LETTERS */
  enum canvas_align align;
  bool bold;
  const char *fill;                        /* null: black */
};

enum { CANVAS_LETTERS = 12 };

struct canvas {
  void (*path) (struct canvas *, const struct canvas_path *);
  void (*text) (struct canvas *, const struct canvas_text *);
  void (*end) (struct canvas *);
  struct text *out;                        /* of the back end */
};

/* The size of a sheet, its title and one sentence on what it shows, for those who cannot see.  */
struct canvas_sheet { double width, height; const char *title, *description; };

/* A picture that is appended to OUT as SVG 1.1, whole once `end` was called.  Names are escaped;
   control characters and bytes that are no UTF-8 are replaced.  As wide as the page that holds it
   lets it be, at most WIDTH.                                                                   */
void canvas_open_svg (struct canvas *, struct text *out, const struct canvas_sheet *);

/* A box, for convenience.  */
struct canvas_box { double x, y, width, height; const char *fill, *line, *title; };
void canvas_box (struct canvas *, const struct canvas_box *);

/* Colours that differ in lightness too, so that they can be told apart in grey; the I-th of a few,
   then over again.                                                                              */
const char *canvas_hue (size_t i);
/* About how wide STRING is in letters of SIZE: sans-serif letters are half as wide as high.     */
double canvas_text_width (const char *string, double size);

/* STRING as text of XML or HTML: & < > " ' escaped, what may not stand in them replaced.  */
void markup_add (struct text *out, const char *string);

#endif
