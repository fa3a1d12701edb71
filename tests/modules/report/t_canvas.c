/* Pictures: what stands in the SVG.  Expected texts follow SVG 1.1 (2nd ed., 2011) and XML 1.0.  */
#include "config.h"

#include <math.h>
#include <string.h>

#include "libtest.h"
#include "report/canvas.h"
#include "support/text.h"

static void
names_are_escaped (void)
{
  struct text out;
  text_init (&out);
  markup_add (&out, "a<b & \"c\" 'd' > \x01 \xFF \u00B5");
  SAME_TEXT (out.bytes, "a&lt;b &amp; &quot;c&quot; &#39;d&#39; &gt; \uFFFD \uFFFD \u00B5");
  text_clear (&out);
}

static void
draws_paths_and_texts (void)
{
  static const struct canvas_point wave[] = {
    { CANVAS_MOVE, 0, 10 }, { CANVAS_CURVE, 20, 10 }, { CANVAS_CURVE, 20, 30.25 },
    { CANVAS_CURVE, 40, 30.25 }, { CANVAS_LINE, 50, 30.25 }
  };
  struct text out;
  struct canvas canvas;
  text_init (&out);
  canvas_open_svg (&canvas, &out, &(struct canvas_sheet) { 60, 40, "feed & tail", NULL });
  canvas.path (&canvas, &(struct canvas_path) { .points = wave, .count = 5, .line = "#000000",
                                                .width = 2, .title = "feed <raw>" });
  canvas.text (&canvas, &(struct canvas_text) { .x = 5, .y = 20, .string = "850 Nm3/h",
                                                .align = CANVAS_MIDDLE });
  canvas.end (&canvas);
  SAME_TEXT (out.bytes,
             "<svg xmlns=\"http://www.w3.org/2000/svg\" role=\"img\" width=\"60\" height=\"40\""
             " viewBox=\"0 0 60 40\" style=\"font-family:sans-serif\">\n"
             "<title>feed &amp; tail</title>\n"
             "<path d=\"M0,10C20,10 20,30.25 40,30.25L50,30.25\" fill=\"none\""
             " stroke=\"#000000\" stroke-width=\"2\"><title>feed &lt;raw&gt;</title></path>\n"
             "<text x=\"5\" y=\"20\" font-size=\"12\" text-anchor=\"middle\" fill=\"#000000\">"
             "850 Nm3/h</text>\n"
             "</svg>\n");
  text_clear (&out);
}

static void
boxes_are_closed_and_figures_finite (void)
{
  struct text out;
  struct canvas canvas;
  text_init (&out);
  canvas_open_svg (&canvas, &out, &(struct canvas_sheet) { 60, 40, "t", "d" });
  canvas_box (&canvas, &(struct canvas_box) { .x = (double) NAN, .y = HUGE_VAL, .width = 3,
                                              .height = 4, .fill = canvas_hue (0) });
  canvas.end (&canvas);
  CHECK (strstr (out.bytes, "<desc>d</desc>") != NULL);
  CHECK (strstr (out.bytes, "Z\" fill=\"#") != NULL);
  CHECK (strstr (out.bytes, "nan") == NULL && strstr (out.bytes, "inf") == NULL);
  text_clear (&out);
}

/* Weights of red, green and blue in what the eye takes for light: Rec. ITU-R BT.709, item 3.2.  */
static double
lightness (const char *hue)
{
  unsigned rgb[3] = { 0, 0, 0 };
  for (int i = 0; i < 6; i++) {
    const char *digits = "0123456789abcdef", *at = strchr (digits, hue[1 + i]);
    rgb[i / 2] = 16 * rgb[i / 2] + (unsigned) (at != NULL ? at - digits : 0);
  }
  return 0.2126 * rgb[0] + 0.7152 * rgb[1] + 0.0722 * rgb[2];
}

static void
neighbouring_hues_differ_in_lightness (void)
{
  for (size_t i = 0; i < 8; i++) {
    SAME_INT (strlen (canvas_hue (i)), 7);
    CHECK (fabs (lightness (canvas_hue (i)) - lightness (canvas_hue (i + 1))) > 20);
  }
}

static const struct test_case cases[] = {
  { "names are escaped", names_are_escaped },
  { "paths and texts are drawn", draws_paths_and_texts },
  { "boxes are closed and figures finite", boxes_are_closed_and_figures_finite },
  { "neighbouring hues differ in lightness", neighbouring_hues_differ_in_lightness },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
