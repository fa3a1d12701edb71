#include "config.h"
#include <string.h>
#include "gas/air.h"
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"

static struct arena *arena;
static struct fault fault;
static struct species_table *table;

static void
start (void)
{
  if (table != NULL)
    return;
  arena = arena_create ();
  fault_init (&fault, arena);
  table = species_table_create (NULL, &fault);
}

static const struct species *
key (const char *name)
{
  const struct species *found = NULL;
  const char *candidates;

  CHECK (species_find (table, name, strlen (name), &found, &candidates) == SPECIES_KEY);
  return found;
}

/* U.S. Standard Atmosphere, 1976: mean molar mass at sea level 28.9644 g/mol (from memory).
   A. Picard et al., Metrologia 45 (2008) 149: 28.96546 g/mol.  E. W. Lemmon et al., J. Phys. Chem.
   Ref. Data 29 (2000) 331: 28.9586 g/mol (from memory).  All by older atomic weights, which differ
   by up to 3e-5.                                                                                */
static void
molar_masses (void)
{
  static const struct { const char *name; double g_per_mol; } cases[] = {
    { NULL, 28.9644 }, { "US76", 28.9644 }, { "CIPM2007", 28.96546 }, { "L2000", 28.9586 },
  };

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    const struct composition *air = NULL;

    test_about ("%s", cases[i].name == NULL ? "air" : cases[i].name);
    if (CHECK (air_composition (arena, table, cases[i].name, &air, &fault)))
      NEAR (air->molar_mass * 1e3, cases[i].g_per_mol, 3e-5);
  }
}

/* U.S. Standard Atmosphere, 1976, Table 3.  */
static void
parts (void)
{
  const struct composition *air = NULL;

  start ();
  NEED (table != NULL);
  NEED (air_composition (arena, table, NULL, &air, &fault));
  SAME_INT (air->count, 10);
  NEAR (composition_fraction (air, key ("N2")), 0.78084, 4e-6);
  NEAR (composition_fraction (air, key ("O2")), 0.209476, 4e-6);
  NEAR (composition_fraction (air, key ("Ar")), 0.00934, 4e-6);
  NEAR (composition_fraction (air, key ("CO2")), 0.000314, 4e-6);
  NEAR (composition_fraction (air, key ("H2O")), 0, 1e-15);
}

static void
definitions (void)
{
  static const char *const names[] = { "US76", "CIPM2007", "L2000", "SIMPLE79" };
  const struct composition *air = NULL;
  struct fault none;

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    CHECK (air_composition (arena, table, names[i], &air, &fault));
  fault_init (&none, arena);
  CHECK (!air_composition (arena, table, "Mars", &air, &none));
  SAME_INT (none.kind, MESSAGE_NAME_UNKNOWN);
  CHECK (air_is_name ("air", 3) && air_is_name ("Dry air", 7));
  CHECK (!air_is_name ("airs", 4) && !air_is_name ("wet air", 7) && !air_is_name ("", 0));
}

static void
peaks (void)
{
  static const char *const refused[] = { "O2", "O2+", "+O2", "", "+", "O2+O2", "O2+oxygen",
                                         "O2+H2S", "C6+", "raw+O2", "N2+O2+Ar+CO2+Ne", "O2+N2O" };
  struct part of[AIR_PEAK_PARTS];

  start ();
  NEED (table != NULL);
  SAME_INT (air_peak (table, "O2+Ar", 5, of), 2);
  CHECK (of[0].species == key ("O2") && of[1].species == key ("Ar"));
  NEAR (of[0].amount, 0.209476 / (0.209476 + 0.00934), 1e-12);
  NEAR (of[1].amount, 0.00934 / (0.209476 + 0.00934), 1e-12);
  SAME_INT (air_peak (table, "nitrogen+Ar", 11, of), 2);
  NEAR (of[0].amount, 0.78084 / (0.78084 + 0.00934), 1e-12);
  SAME_INT (air_peak (table, "N2+O2+Ar", 8, of), 3);
  NEAR (of[0].amount + of[1].amount + of[2].amount, 1, 1e-15);
  for (size_t i = 0; i < sizeof refused / sizeof refused[0]; i++) {
    test_about ("%s", refused[i]);
    SAME_INT (air_peak (table, refused[i], strlen (refused[i]), of), 0);
  }
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "molar masses of air", molar_masses },
    { "parts of air", parts },
    { "definitions and names of air", definitions },
    { "peaks that were not resolved", peaks },
    { NULL, NULL }
  };
  int status = test_main (argc, argv, cases);

  species_table_destroy (table);
  arena_destroy (arena);
  return status;
}
