#include "config.h"
#include <math.h>
#include <stdio.h>
#include <string.h>
#include "gas/reference.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/table.h"
#include "units/unit.h"

static struct arena *arena;
static struct fault fault;
static struct unit_table *units;
static struct reference_table *references;

static void
start (void)
{
  if (references != NULL)
    return;
  arena = arena_create ();
  fault_init (&fault, arena);
  units = unit_table_create (NULL, &fault);
  if (units != NULL)
    references = reference_table_create (units, NULL, &fault);
}

static const struct reference *
find (const char *name)
{
  const struct reference *found = NULL;
  const char *candidates = NULL;

  test_about ("%s", name);
  SAME_INT (reference_find (references, name, strlen (name), &found, &candidates), REFERENCE_ONE);
  return found;
}

static void
one_state (char *cells[])
{
  const struct reference *found = find (cells[0]);
  double T, p;

  if (CHECK (found != NULL) && CHECK (sscanf (cells[1], "%lf", &T) == 1)
      && CHECK (sscanf (cells[2], "%lf", &p) == 1)) {
    NEAR (found->at.T, T, 1e-12);
    NEAR (found->at.p, p, 1e-9);                         /* four decimals of a pascal */
  }
}

static void
states (void)
{
  start ();
  NEED (references != NULL);
  SAME_INT (test_each_row ("numbers/reference_conditions.tsv", 4, one_state),
            reference_table_size (references));
}

static void
humidities (void)
{
  const struct reference *one;

  start ();
  NEED (references != NULL);
  one = find ("iso8778");                                /* ISO 8778:2003, 65 %RH */
  NEED (one != NULL);
  NEAR (one->at.humidity, 0.65, 1e-12);
  one = find ("asme-air");                               /* ASME PTC 9: 36 %RH */
  NEED (one != NULL);
  NEAR (one->at.humidity, 0.36, 1e-12);
  one = find ("us-wet");
  NEED (one != NULL);
  NEAR (one->at.humidity, 1, 1e-12);
  one = find ("iso13443");                               /* ISO 13443: dry */
  NEED (one != NULL);
  NEAR (one->at.humidity, 0, 1e-12);
  one = find ("normal");                                 /* DIN 1343 says nothing of moisture */
  NEED (one != NULL);
  CHECK (isnan (one->at.humidity));
}

static void
names (void)
{
  static const struct { const char *name, *row; } cases[] = {
    { "normal", "normal" }, { "Normal", "normal" }, { "DIN 1343", "normal" },
    { "din1343", "normal" }, { "ISO 2533", "iso2533" }, { "iso13443", "iso13443" },
    { "iso-13443", "iso13443" }, { "us_1469", "us-1469" }, { "ntp20", "ntp20" },
  };

  start ();
  NEED (references != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    const struct reference *found = find (cases[i].name);

    SAME_TEXT (found == NULL ? NULL : found->name, cases[i].row);
  }
}

static void
ambiguous (void)
{
  static const char *const cases[] = { "standard", "stp", "NTP", "satp", "anr", "standard air" };
  const struct reference *found = NULL;
  const char *candidates = NULL;

  start ();
  NEED (references != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    test_about ("%s", cases[i]);
    candidates = NULL;
    SAME_INT (reference_find (references, cases[i], strlen (cases[i]), &found, &candidates),
              REFERENCE_AMBIGUOUS);
    CHECK (candidates != NULL && strchr (candidates, ',') != NULL);
  }
  SAME_INT (reference_find (references, "ntp", 3, &found, &candidates), REFERENCE_AMBIGUOUS);
  SAME_TEXT (candidates, "ntp20, ntp0, ntp25");
  SAME_INT (reference_find (references, "nowhere", 7, &found, &candidates), REFERENCE_NONE);
  SAME_INT (reference_find (references, "", 0, &found, &candidates), REFERENCE_NONE);
}

/* Every candidate is a name of the table, and no ambiguous word is one itself.  */
static void
candidates_exist (void)
{
  struct table *rows;

  start ();
  NEED (references != NULL);
  rows = table_read (arena, "reference_names", NULL, &fault);
  NEED (rows != NULL);
  for (size_t i = 0; i < table_rows (rows); i++) {
    const char *at = table_cell (rows, i, table_column (rows, "candidates"));
    const struct reference *found = NULL;
    const char *candidates = NULL;

    test_about ("%s", table_cell (rows, i, 0));
    SAME_INT (reference_find (references, table_cell (rows, i, 0),
                              strlen (table_cell (rows, i, 0)), &found, &candidates),
              REFERENCE_AMBIGUOUS);
    while (*at != '\0') {
      size_t n = strcspn (at, ",");

      test_about ("%s", at);
      SAME_INT (reference_find (references, at, n, &found, &candidates), REFERENCE_ONE);
      at += n + strspn (at + n, ", ");
    }
  }
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "temperatures and pressures", states },
    { "humidity where the definition has one", humidities },
    { "names in any spelling", names },
    { "words of several meanings are asked back", ambiguous },
    { "candidates are names", candidates_exist },
    { NULL, NULL }
  };
  int status = test_main (argc, argv, cases);

  reference_table_destroy (references);
  unit_table_destroy (units);
  arena_destroy (arena);
  return status;
}
