#include "config.h"
#include "fuzz/cells.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "gas/laboratory.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"
#include "units/unit.h"

struct cells { struct unit_table *units; struct species_table *species; struct arena *arena; };

static const char name[] = "fuzz.csv";

static void
broken (const char *text, size_t n, const char *what)
{
  fprintf (stderr, "%s, of:\n", what);
  fwrite (text, 1, n, stderr);
  fputc ('\n', stderr);
  abort ();
}

struct cells *
cells_create (void)
{
  struct cells *cells = calloc (1, sizeof *cells);
  struct fault fault;
  if (cells == NULL)
    abort ();
  cells->arena = arena_create ();
  fault_init (&fault, cells->arena);
  cells->units = unit_table_create (NULL, &fault);
  cells->species = species_table_create (NULL, &fault);
  if (cells->units == NULL || cells->species == NULL)
    broken ("", 0, "no tables");
  return cells;
}

void
cells_destroy (struct cells *cells)
{
  unit_table_destroy (cells->units);
  species_table_destroy (cells->species);
  arena_destroy (cells->arena);
  free (cells);
}

static int
lines_of (const char *text, size_t n)
{
  int lines = 1;
  for (size_t i = 0; i < n; i++)
    lines += text[i] == '\n';
  return lines;
}

static void
look_at_fault (const struct fault *fault, const char *text, size_t n)
{
  if (fault->kind == MESSAGE_NONE)
    broken (text, n, "failed without saying why");
  if (fault->at.line < 1 || fault->at.line > lines_of (text, n) || fault->at.first < 1
      || (size_t) fault->at.first > n + 1)
    broken (text, n, "a fault points outside the file");
  if (fault->fact[0] == NULL || strncmp (fault->fact[0], name, sizeof name - 1) != 0)
    broken (text, n, "a fault does not name the file");
  for (int i = 0; i < MESSAGE_FACTS; i++)
    if (fault->fact[i] != NULL && strstr (fault->fact[i], "(null)") != NULL
        && memmem (text, n, "(null)", sizeof "(null)" - 1) == NULL)      /* it may be quoted */
      broken (text, n, "a null in a sentence");
}

static void
look_at_part (const struct laboratory_part *part, const char *text, size_t n)
{
  if (part->name == NULL || *part->name == '\0' || part->figure == NULL)
    broken (text, n, "a part without a name or a figure");
  if (!isfinite (part->number) || part->number < 0)
    broken (text, n, "an amount that is none");
  if (part->amount != LABORATORY_REST && part->unit == NULL)
    broken (text, n, "an amount without a unit");
  if (part->spread != LABORATORY_NO_SPREAD
      && (!isfinite (part->spread_number) || part->spread_number < 0 || !(part->k > 0)))
    broken (text, n, "an uncertainty that is none");
}

static size_t
look_at_samples (struct cells *cells, const struct laboratory *lab, const char *text, size_t n)
{
  size_t read = 0;
  for (size_t i = 0; i < laboratory_samples (lab); i++) {
    struct laboratory_parts parts;
    struct fault fault;
    fault_init (&fault, cells->arena);
    if (laboratory_sample (lab, i) == NULL)
      broken (text, n, "a sample without a name");
    if (!laboratory_parts_of (lab, i, cells->arena, &parts, &fault)) {
      look_at_fault (&fault, text, n);
      continue;
    }
    for (size_t k = 0; k < parts.count; k++)
      look_at_part (&parts.at[k], text, n);
    read += parts.count;
  }
  return read;
}

size_t
fuzz_cells (struct cells *cells, const char *text, size_t n)
{
  const struct unit *mole = unit_find (cells->units, "mol%", 4, NULL);
  const struct laboratory_asked asked[] = {
    { .file = name },
    { .file = name, .unit = mole, .unit_text = "mol%", .moisture = LABORATORY_DRY },
    { .file = name, .unit = mole, .unit_text = "mol%", .decimal = ',',
      .moisture = LABORATORY_WET }
  };
  const struct laboratory_words words = { cells->units, cells->species, NULL, NULL };
  size_t read = 0;
  for (size_t i = 0; i < sizeof asked / sizeof asked[0]; i++) {
    struct fault fault;
    size_t sample;
    arena_reset (cells->arena);
    fault_init (&fault, cells->arena);
    const struct laboratory *lab = laboratory_read (cells->arena, text, n, &asked[i], &words,
                                                    &fault);
    if (lab == NULL) {
      look_at_fault (&fault, text, n);
      continue;
    }
    if (!laboratory_find (lab, NULL, &sample, &fault))
      look_at_fault (&fault, text, n);
    read += look_at_samples (cells, lab, text, n);
  }
  return read;
}
