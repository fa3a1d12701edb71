#include "config.h"
#include <string.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "support/table.h"

static struct arena *arena;
static struct fault fault;
static struct map *sources;              /* short name -> itself, once it was referred to */

static void
start (void)
{
  struct table *table;

  if (sources != NULL)
    return;
  arena = arena_create ();
  fault_init (&fault, arena);
  sources = map_create ();
  table = table_read (arena, "sources", NULL, &fault);
  NEED (table != NULL);
  for (size_t i = 0; i < table_rows (table); i++) {
    const char *name = table_cell (table, i, 0);

    map_put (sources, name, strlen (name), ARENA_NEW (arena, bool));
  }
}

static void
resolves (const char *name, size_t n)
{
  bool *used = map_find (sources, name, n);

  if (CHECK (used != NULL))
    *used = true;
}

/* The words in front of the source of a figure: "Tc pc Vc Mathews 1972".  */
static const char *
skip_figures (const char *at)
{
  static const char *const figures[] = { "Tc ", "pc ", "Vc ", "omega ", "Tb ", "lower ", "upper ",
                                         "ignition ", "Fw " };
  bool more = true;

  while (more) {
    more = false;
    for (size_t i = 0; i < sizeof figures / sizeof figures[0]; i++)
      if (strncmp (at, figures[i], strlen (figures[i])) == 0) {
        at += strlen (figures[i]);
        more = true;
      }
  }
  return at;
}

/* What stands for itself.  */
static bool
is_plain (const char *name, size_t n)
{
  static const char *const plain[] = { "common practice, no source", "handbook, from memory",
                                       "flags: own classification", "EU read", "EU from memory" };

  for (size_t i = 0; i < sizeof plain / sizeof plain[0]; i++)
    if (strlen (plain[i]) == n && memcmp (plain[i], name, n) == 0)
      return true;
  return false;
}

static void
check_cell (const char *cell)
{
  static const char memory[] = ", from memory";

  for (const char *at = cell; *at != '\0'; at += strspn (at, "; ")) {
    const char *name = skip_figures (at);
    size_t n = strcspn (name, ";");

    if (!is_plain (name, n)) {
      size_t tail = strlen (memory);
      bool remembered = n > tail && memcmp (name + n - tail, memory, tail) == 0;

      resolves (name, remembered ? n - tail : n);
    }
    at = name + n;
  }
}

static void
check_table (const char *name)
{
  struct table *table = table_read (arena, name, NULL, &fault);

  NEED (table != NULL);
  for (size_t i = 0; i < table_rows (table); i++) {
    const char *cell = table_cell (table, i, table_column (table, "source"));

    test_about ("%s, %s: %s", name, table_cell (table, i, 0), cell);
    check_cell (cell);
  }
}

/* The tables whose sources are short names.  */
static void
check_tables (void)
{
  static const char *const tables[] = {
    "air", "cp_ideal", "elements", "exposure", "flammability", "fuels", "species", "virial",
    "viscosity"
  };

  start ();
  NEED (sources != NULL);
  for (size_t i = 0; i < sizeof tables / sizeof tables[0]; i++)
    check_table (tables[i]);
}

/* Sources of a remark, and of the equations' figures, which are built in as numbers.  */
static bool
is_elsewhere (const char *name)
{
  static const char *const names[] = { "Coplen 2001", "AGA8 2017", "Jaeschke 1995", "Kunz 2012" };

  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    if (strcmp (name, names[i]) == 0)
      return true;
  return false;
}

static void
is_used (const char *name, void *value, void *with)
{
  (void) with;
  test_about ("%s", name);
  CHECK (*(bool *) value || is_elsewhere (name));
}

static void
all_used (void)
{
  check_tables ();
  map_each (sources, is_used, NULL);
}

/* The 8 h figure of the EU comes with its act, and a flag is one of those known.  */
static void
exposure_cells (void)
{
  static const char *const known[] = { "simple-asphyxiant", "oxidiser", "flammable", "pyrophoric",
                                       "toxic", "corrosive" };
  struct table *table;

  start ();
  table = table_read (arena, "exposure", NULL, &fault);
  NEED (table != NULL);
  for (size_t i = 0; i < table_rows (table); i++) {
    bool limit = table_cell (table, i, table_column (table, "EU_8h_ppm"))[0] != '\0'
                 || table_cell (table, i, table_column (table, "EU_15min_ppm"))[0] != '\0';

    test_about ("%s", table_cell (table, i, 0));
    CHECK (limit == (table_cell (table, i, table_column (table, "EU_directive"))[0] != '\0'));
    for (const char *at = table_cell (table, i, table_column (table, "flags")); *at != '\0';
         at += strspn (at, "|")) {
      size_t n = strcspn (at, "|");
      bool found = false;

      for (size_t k = 0; k < sizeof known / sizeof known[0]; k++)
        found = found || (strlen (known[k]) == n && memcmp (known[k], at, n) == 0);
      CHECK (found);
      at += n;
    }
  }
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "every short name of a source is explained", check_tables },
    { "every explained source is used", all_used },
    { "limits have their act, flags are known", exposure_cells },
    { NULL, NULL }
  };
  int status = test_main (argc, argv, cases);

  map_destroy (sources);
  arena_destroy (arena);
  return status;
}
