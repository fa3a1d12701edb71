#include "config.h"
#include "language/property_names.h"

#include <stddef.h>
#include "language/tree.h"
#include "support/text.h"

static const char *const names[] = {
#define PROPERTY(name, text, unit, help) text,
#include "language/properties.def"
#undef PROPERTY
};

static const struct { const char *text; enum property property; } others[] = {
#define NAMED(text, property) { text, PROPERTY_##property },
#include "language/property_names.def"
#undef NAMED
};

/* In small letters, cut at ROOM.  */
static void
lower (const char *text, char *out, size_t room)
{
  size_t n = 0;
  for (; text[n] && n + 1 < room; n++) {
    out[n] = text[n] >= 'A' && text[n] <= 'Z' ? (char) (text[n] - 'A' + 'a') : text[n];
  }
  out[n] = '\0';
}

/* Shorter words are near too many others: they are offered only when they are meant exactly.  */
enum { FULLY_SPELT = 4 };

const char *
property_meant (const char *text)
{
  char small[64] = "";
  const char *best = NULL;
  lower (text, small, sizeof small);
  size_t distance = small[FULLY_SPELT - 1] ? text_reach (small) + 1 : 1;
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++) {
    size_t d = text_distance (small, names[i], distance);
    if (names[i][0] && names[i][1] && d < distance) {        /* one letter is near anything */
      best = names[i];
      distance = d;
    }
  }
  for (size_t i = 0; i < sizeof others / sizeof others[0]; i++) {
    size_t d = text_distance (small, others[i].text, distance);
    if (d < distance) {
      best = names[others[i].property];
      distance = d;
    }
  }
  return best;
}
