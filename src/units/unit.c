#include "config.h"
#include "units/unit.h"

#include <assert.h>
#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "units/unit_table.h"

enum { SHOWN = 40 };                    /* bytes of an overlong text that a message repeats */

/* Refuses a text that is no UTF-8 or too long to be a unit.  */
static const struct unit *
refuse_bytes (const char *text, size_t n, struct fault *fault)
{
  char shown[SHOWN + 4];
  size_t length = 0;

  for (; length < n && length < SHOWN; length++)
    shown[length] = text[length] >= ' ' && text[length] < 127 ? text[length] : '?';
  memcpy (shown + length, n > SHOWN ? "..." : "", n > SHOWN ? 4 : 1);
  fault_set (fault, MESSAGE_UNIT_UNKNOWN, shown, "'list units' shows the units there are");
  return NULL;
}

/* The unit of READING, kept under its spelling.  */
static const struct unit *
keep (struct unit_table *table, const char *ascii, const struct unit_reading *reading)
{
  struct unit *unit = ARENA_NEW (table->arena, struct unit);

  *unit = reading->unit;
  unit->spelling = arena_string (table->arena, ascii);
  map_put (table->units, ascii, strlen (ascii), unit);
  return unit;
}

const struct unit *
unit_find (struct unit_table *table, const char *text, size_t n, struct fault *fault)
{
  struct unit *unit = map_find (table->units, text, n);
  char ascii[UNIT_LONGEST + 1];

  if (unit != NULL)
    return unit;
  if (n == 0 || !unit_ascii (text, n, ascii))
    return fault == NULL ? NULL : refuse_bytes (text, n, fault);
  unit = map_find (table->units, ascii, strlen (ascii));
  if (unit == NULL) {
    struct unit_reading reading = unit_read (table, ascii);
    if (reading.outcome == UNIT_READ)
      return keep (table, ascii, &reading);
    if (fault != NULL)
      unit_refuse (table, ascii, &reading, fault);
    return NULL;
  }
  map_put (table->units, text, n, unit);
  return unit;
}

const char *
reference_family_name (enum reference_family family)
{
  static const char *const names[FAMILY_COUNT] = {
    [FAMILY_NONE] = "", [FAMILY_NORMAL] = "Nm3", [FAMILY_STANDARD] = "Sm3",
    [FAMILY_SCF] = "scf", [FAMILY_SCCM] = "sccm",
  };

  assert (family < FAMILY_COUNT);
  return names[family];
}

double
unit_to_si (const struct unit *unit, double figure)
{
  return figure * unit->factor + unit->offset;
}

double
unit_from_si (const struct unit *unit, double si)
{
  return (si - unit->offset) / unit->factor;
}

double
unit_difference_to_si (const struct unit *unit, double figure)
{
  return figure * unit->factor;
}

/* %RH and %O2 are like no other share.  */
static bool
is_special (const struct unit *unit)
{
  return unit->sort == UNIT_HUMIDITY || unit->sort == UNIT_OXYGEN;
}

bool
unit_same_measure (const struct unit *a, const struct unit *b)
{
  return dimension_equal (a->dimension, b->dimension) && a->ratio == b->ratio
         && a->family == b->family && a->family_power == b->family_power
         && ((!is_special (a) && !is_special (b)) || a->sort == b->sort);
}
