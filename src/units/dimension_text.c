#include "config.h"
#include "units/dimension.h"

#include <string.h>
#include "support/arena.h"

/* Powers of one sign of the base units: "kg m2".  */
static const char *
product_text (struct arena *arena, struct dimension d, int sign)
{
  static const char *const symbol[] = { "mol", "kg", "m", "s", "K" };
  const int power[] = { d.amount, d.mass, d.length, d.time, d.temperature };
  const char *text = "";
  for (size_t i = 0; i < 5; i++) {
    const char *join = *text ? " " : "";
    if (power[i] * sign == 1) {
      text = arena_format (arena, "%s%s%s", text, join, symbol[i]);
    } else if (power[i] * sign > 1) {
      text = arena_format (arena, "%s%s%s%d", text, join, symbol[i], power[i] * sign);
    }
  }
  return text;
}

const char *
dimension_text (struct arena *arena, struct dimension d)
{
  static const struct { struct dimension d; const char *text; } named[] = {
    { { -1, 1, -2, 0, 0 }, "Pa" }, { { 2, 1, -2, 0, 0 }, "J" }, { { 2, 1, -3, 0, 0 }, "W" },
    { { 2, 1, -2, 0, -1 }, "J/mol" }, { { 2, 0, -2, 0, 0 }, "J/kg" },
    { { 2, 1, -2, -1, -1 }, "J/(mol K)" }, { { 2, 0, -2, -1, 0 }, "J/(kg K)" },
    { { -1, 1, -1, 0, 0 }, "Pa s" } };
  for (size_t i = 0; i < sizeof named / sizeof named[0]; i++)
    if (dimension_equal (d, named[i].d)) {
      return named[i].text;
    }
  const char *top = product_text (arena, d, 1), *below = product_text (arena, d, -1);
  if (!*below) {
    return *top ? top : "1";
  }
  return arena_format (arena, strchr (below, ' ') ? "%s/(%s)" : "%s/%s", *top ? top : "1", below);
}
