#include "config.h"
#include "units/unit_table.h"

#include <string.h>
#include "support/text.h"

/* The ASCII twins of what a keyboard or a pasted data sheet may hold.  */
static const struct { unsigned code; const char *twin; } twins[] = {
  { 0x00B0, "deg" },                      /* degree sign */
  { 0x00B2, "2" }, { 0x00B3, "3" },       /* superscripts */
  { 0x00B5, "u" },                        /* micro sign */
  { 0x00B7, "*" },                        /* middle dot */
  { 0x00B9, "1" },
  { 0x00BA, "deg" },                      /* masculine ordinal, on many keyboards for degree */
  { 0x00D7, "*" },                        /* multiplication sign */
  { 0x03BC, "u" },                        /* Greek mu */
  { 0x2044, "/" },                        /* fraction slash */
  { 0x2070, "0" },
  { 0x2074, "4" }, { 0x2075, "5" }, { 0x2076, "6" }, { 0x2077, "7" }, { 0x2078, "8" },
  { 0x2079, "9" },
  { 0x207B, "^-" },                       /* superscript minus: the digit follows */
  { 0x2080, "0" }, { 0x2081, "1" }, { 0x2082, "2" }, { 0x2083, "3" }, { 0x2084, "4" },
  { 0x2085, "5" }, { 0x2086, "6" }, { 0x2087, "7" }, { 0x2088, "8" }, { 0x2089, "9" },
  { 0x2103, "degC" }, { 0x2109, "degF" },
  { 0x2113, "l" },                        /* script l */
  { 0x212A, "K" },                        /* kelvin sign */
  { 0x2212, "-" },                        /* minus sign */
  { 0x2215, "/" },                        /* division slash */
  { 0x22C5, "*" },                        /* dot operator */
};

static const char *
twin_of (unsigned code)
{
  for (size_t i = 0; i < sizeof twins / sizeof twins[0]; i++)
    if (twins[i].code == code)
      return twins[i].twin;
  return NULL;
}

bool
unit_ascii (const char *text, size_t n, char *ascii)
{
  size_t used = 0;

  for (size_t at = 0, step; at < n; at += step) {
    unsigned code;
    step = utf8_decode (text + at, n - at, &code);
    if (step == 0 || code == 0)
      return false;
    const char *put = text + at;
    size_t length = step;
    const char *twin = code < 0x80 ? NULL : twin_of (code);
    if (twin != NULL) {
      put = twin;
      length = strlen (twin);
    }
    if (used + length > UNIT_LONGEST)
      return false;
    memcpy (ascii + used, put, length);
    used += length;
  }
  ascii[used] = '\0';
  return true;
}
