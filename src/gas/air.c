#include "config.h"
#include "gas/air.h"

#include <string.h>
#include "gas/naming.h"
#include "gas/species_private.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/table.h"

/* The definition of that name; air_count if there is none.  */
static size_t
find_air (const struct species_table *table, const char *name)
{
  size_t i = 0;

  while (i < table->air_count && strcmp (table->airs[i], name) != 0)
    i++;
  return i;
}

static struct air_part *
find_part (const struct species_table *table, size_t air, const struct species *species)
{
  for (size_t i = 0; i < table->air_part_count; i++)
    if (table->air_parts[i].air == air && table->air_parts[i].species == species)
      return &table->air_parts[i];
  return NULL;
}

/* COLUMNS: of the part and of its amount.  */
static bool
read_row (struct species_table *species, const struct table *table, size_t row,
          const int columns[2], struct fault *fault)
{
  const char *name = table_cell (table, row, 0);
  const char *key = table_cell (table, row, columns[0]);
  const struct species *one = species_of_key (species, key);
  size_t air = find_air (species, name);
  struct air_part *part;
  double amount;

  if (one == NULL)
    return table_complain (table, row, "no component has this key", fault);
  if (!table_number (table, row, columns[1], &amount, fault))
    return false;
  if (!(amount >= 0))
    return table_complain (table, row, "an amount of 0 or more is expected", fault);
  if (air == species->air_count)
    species->airs[species->air_count++] = name;
  part = find_part (species, air, one);
  if (part == NULL)
    part = &species->air_parts[species->air_part_count++];
  *part = (struct air_part) { air, one, amount };
  return true;
}

bool
air_read (struct species_table *species, const char *directory, struct fault *fault)
{
  const struct table *table = table_read (species->arena, "air", directory, fault);

  if (table == NULL)
    return false;
  const int columns[] = { table_column (table, "part"), table_column (table, "mol_mol") };
  species->airs = ARENA_ARRAY (species->arena, table_rows (table) + 1, const char *);
  species->air_parts = ARENA_ARRAY (species->arena, table_rows (table) + 1, struct air_part);
  for (size_t i = 0; i < table_rows (table); i++)
    if (!read_row (species, table, i, columns, fault))
      return false;
  return true;
}

bool
air_is_name (const char *name, size_t n)
{
  char small[NAMING_ROOM];

  return naming_lower (name, n, small) > 0
         && (strcmp (small, "air") == 0 || strcmp (small, "dry air") == 0);
}

bool
air_composition (struct arena *arena, struct species_table *table, const char *definition,
                 const struct composition **made, struct fault *fault)
{
  size_t air = definition == NULL ? 0 : find_air (table, definition);
  struct part *parts = ARENA_ARRAY (arena, table->air_part_count + 1, struct part);
  const struct composition *composition;
  size_t count = 0;

  if (air >= table->air_count)
    return fault_set (fault, MESSAGE_NAME_UNKNOWN, definition == NULL ? "air" : definition, "");
  for (size_t i = 0; i < table->air_part_count; i++)
    if (table->air_parts[i].air == air)
      parts[count++] = (struct part) { table->air_parts[i].species, table->air_parts[i].amount };
  composition = composition_make (arena, count, parts, fault);
  if (composition == NULL)
    return false;
  *made = composition;
  return true;
}

size_t
air_peak (struct species_table *table, const char *name, size_t n,
          struct part parts[AIR_PEAK_PARTS])
{
  size_t count = 0;
  double sum = 0;

  for (size_t begin = 0; begin <= n; count++) {
    const char *plus = memchr (name + begin, '+', n - begin);
    size_t end = plus == NULL ? n : (size_t) (plus - name);
    const struct species *one;
    const char *candidates;
    enum species_match match = species_find (table, name + begin, end - begin, &one, &candidates);
    const struct air_part *part;

    if (count == AIR_PEAK_PARTS || (match != SPECIES_KEY && match != SPECIES_SYNONYM))
      return 0;
    part = find_part (table, 0, one);
    if (part == NULL || part->amount <= 0)
      return 0;
    for (size_t i = 0; i < count; i++)
      if (parts[i].species == one)
        return 0;
    parts[count] = (struct part) { one, part->amount };
    sum += part->amount;
    begin = end + 1;
  }
  for (size_t i = 0; i < count; i++)
    parts[i].amount /= sum;
  return count >= 2 ? count : 0;
}
