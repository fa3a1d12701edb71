#include "config.h"
#include <math.h>
#include <string.h>
#include "gas/formula.h"
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"

static struct arena *arena;
static struct species_table *table;

static void
start (void)
{
  struct fault fault;

  if (table != NULL)
    return;
  arena = arena_create ();
  fault_init (&fault, arena);
  table = species_table_create (NULL, &fault);
}

/* What has that formula; null: nothing.  */
static const struct species *
find (const char *name)
{
  const struct species *found = NULL;
  const char *candidates;
  enum species_match match = species_find (table, name, strlen (name), &found, &candidates);

  return match == SPECIES_NONE || match == SPECIES_AMBIGUOUS ? NULL : found;
}

/* Sums of the standard atomic weights of CIAAW 2021 (abridged: H 1.0080, C 12.011, N 14.007,
   O 15.999, S 32.06, Cl 35.45, Ca 40.078, Fe 55.845, Ni 58.6934, K 39.0983, Cu 63.546,
   U 238.02891, F 18.998403162; D 2.014101778 of AME 2020), by hand.                            */
static void
molar_masses (void)
{
  static const struct { const char *formula; double g_per_mol; } cases[] = {
    { "H", 1.0080 },
    { "C7H14O2", 7 * 12.011 + 14 * 1.0080 + 2 * 15.999 },
    { "Ca(OH)2", 40.078 + 2 * (15.999 + 1.0080) },
    { "Ni(CO)4", 58.6934 + 4 * (12.011 + 15.999) },
    { "K4[Fe(CN)6]", 4 * 39.0983 + 55.845 + 6 * (12.011 + 14.007) },
    { "(CH3)2CO", 3 * 12.011 + 6 * 1.0080 + 15.999 },
    { "((CH3)3C)2O", 8 * 12.011 + 18 * 1.0080 + 15.999 },
    { "CuSO4(H2O)5", 63.546 + 32.06 + 9 * 15.999 + 10 * 1.0080 },
    { "D2O", 2 * 2.014101778 + 15.999 },
    { "HDO", 1.0080 + 2.014101778 + 15.999 },
    { "UF6", 238.02891 + 6 * 18.998403162 },
    { "C\xE2\x82\x82H\xE2\x82\x84", 2 * 12.011 + 4 * 1.0080 },
    { "CO", 12.011 + 15.999 },
    { "CoF2", 58.933194 + 2 * 18.998403162 },
  };

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    test_about ("%s", cases[i].formula);
    const struct species *species = find (cases[i].formula);
    if (CHECK (species != NULL))
      NEAR (species->molar_mass * 1e3, cases[i].g_per_mol, 1e-12);
  }
}

static void
refused (void)
{
  static const char *const cases[] = {
    "", "h2", "2H2", "H0", "C(", "C()", "C)", "(CH3", "[CH3)", "C-H", "H 2", "Hx", "Xx", "CH4 ",
    "C99999999", "(C50000)9", "C1.5", "+", "H2O+", "(((((C)))))", "Tc", "\xE2\x82\x82", "C\xC2\xB2",
    "LiBeBCNOFNaMgAlSiPSClKCaScTi",                      /* more elements than any gas has */
  };

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    test_about ("%s", cases[i]);
    CHECK (find (cases[i]) == NULL);
  }
}

/* E. A. Hill, J. Am. Chem. Soc. 22 (1900) 478.  */
static void
hill_order (void)
{
  static const struct { const char *formula, *hill; } cases[] = {
    { "CH3CH2OH", "C2H6O" }, { "SO2", "O2S" }, { "H2O", "H2O" }, { "NH3", "H3N" },
    { "Ni(CO)4", "C4NiO4" }, { "HCl", "ClH" }, { "CHClF2", "CHClF2" }, { "BrCH3", "CH3Br" },
    { "CO", "CO" }, { "Cl2CO", "CCl2O" }, { "H", "H" },
  };

  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    struct atoms atoms;
    char hill[FORMULA_ROOM];

    test_about ("%s", cases[i].formula);
    if (!CHECK (atoms_read (cases[i].formula, strlen (cases[i].formula), &atoms)))
      continue;
    atoms_write (&atoms, hill);
    SAME_TEXT (hill, cases[i].hill);
    CHECK (atoms_read (hill, strlen (hill), &atoms));    /* and back */
  }
}

static void
atoms_in_species (void)
{
  const struct species *found = NULL;
  const char *candidates;

  start ();
  NEED (table != NULL);
  NEED (species_find (table, "CH3CN", 5, &found, &candidates) == SPECIES_KEY);
  NEAR (species_atoms (found, "C"), 2, 1e-15);
  NEAR (species_atoms (found, "H"), 3, 1e-15);
  NEAR (species_atoms (found, "N"), 1, 1e-15);
  NEAR (species_atoms (found, "S"), 0, 1e-15);
  NEED (species_find (table, "D2", 2, &found, &candidates) == SPECIES_KEY);
  NEAR (species_atoms (found, "D"), 2, 1e-15);
  NEAR (species_atoms (found, "H"), 0, 1e-15);
}

/* The largest formula there is room for is written whole.  */
static void
widest (void)
{
  static const char formula[] = "He99999Li99999Be99999Ne99999Na99999Mg99999Al99999Si99999"
                                "Cl99999Ar99999Ca99999Sc99999Ti99999Cr99999Mn99999Fe99999";
  struct atoms atoms;
  char hill[FORMULA_ROOM];

  NEED (atoms_read (formula, strlen (formula), &atoms));
  atoms_write (&atoms, hill);
  SAME_INT (strlen (hill), strlen (formula));
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "molar masses of formulas", molar_masses },
    { "what is no formula is refused", refused },
    { "formulas are written in Hill order", hill_order },
    { "atoms of an element in a component", atoms_in_species },
    { "the widest formula fits", widest },
    { NULL, NULL }
  };
  int status = test_main (argc, argv, cases);

  species_table_destroy (table);
  arena_destroy (arena);
  return status;
}
