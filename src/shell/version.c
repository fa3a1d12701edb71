#include "config.h"
#include "shell/version.h"

#include <inttypes.h>
#include <stddef.h>
#include <stdint.h>
#include <string.h>

#include "support/table.h"
#include "support/text.h"

/* The edition of the tables is what is in them: how many rows, and a checksum over all, so that it
   cannot be forgotten when a figure changes.  FNV-1a, 32 bits: G. Fowler, L. C. Noll, K.-P. Vo,
   D. Eastlake, draft-eastlake-fnv (2012), section 5: offset basis and prime.                    */
static const uint32_t checksum_basis = 2166136261u, checksum_prime = 16777619u;

static uint32_t
checksum_add (uint32_t sum, const char *text)
{
  for (; *text != '\0'; text++)
    sum = (sum ^ (unsigned char) *text) * checksum_prime;
  return sum * checksum_prime;                  /* the end of a text counts as a zero byte */
}

static uint32_t
checksum_add_row (uint32_t sum, const char *row, size_t columns)
{
  for (size_t i = 0; i < columns; i++) {
    sum = checksum_add (sum, row);
    row += strlen (row) + 1;
  }
  return sum;
}

static void
edition_write (struct text *out)
{
  uint32_t sum = checksum_basis;
  size_t tables = 0, rows = 0;

  for (const struct table_text *table = table_built_in; table->name != NULL; table++) {
    tables++;
    sum = checksum_add (sum, table->name);
    for (const char *const *row = table->rows; *row != NULL; row++) {
      sum = checksum_add_row (sum, *row, table->columns);
      rows += row != table->rows;               /* the first names the columns */
    }
  }
  text_add_format (out, "Data tables: edition %08" PRIx32 ", %zu tables of %zu rows\n", sum,
                   tables, rows);
}

void
version_write (struct text *out)
{
  text_add (out, "gaswright " PACKAGE_VERSION "\n"
                 "Copyright (C) 2026 the authors of gaswright\n"
                 "Licence GPL-3.0-or-later: GNU General Public License, version 3 or later.\n"
                 "This is free software; you may change it and pass it on.  There is no warranty,\n"
                 "as far as the law permits.\n");
  edition_write (out);
}
