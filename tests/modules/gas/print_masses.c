/* Prints molar masses, one "FORMULA g/mol" a line: of the formulas of all components, and of some
   with brackets and with elements that no component has.                                        */
#include "config.h"
#include <stdio.h>
#include <string.h>
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"

static const char *const more[] = {
  "Ni(CO)4", "Ca(OH)2", "(CH3)2CO", "((CH3)3C)2O", "K4Fe(CN)6", "CuSO4(H2O)5", "Na2CO3", "LiAlH4",
  "Mg(NO3)2", "TiCl4", "V2O5", "Cr2O3", "MnO2", "CoF2", "ZnO", "Ga2O3", "RbCl", "SrCO3", "YBr3",
  "ZrF4", "NbF5", "MoF6", "RuO4", "Rh2O3", "PdCl2", "AgNO3", "CdS", "InP", "SnH4", "SbH3", "TeF6",
  "CsI", "BaSO4", "LaF3", "CeO2", "HfCl4", "TaF5", "ReF7", "OsO4", "IrF6", "PtF6", "AuCl3", "TlCl",
  "Pb(C2H5)4", "BiH3", "ThO2", "UF6", "BeO", "ScF3", "NdF3", "GdF3", "YbF3", "LuF3", "D2O", "HDO",
};

int
main (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct species_table *table;
  bool good;

  fault_init (&fault, arena);
  table = species_table_create (NULL, &fault);
  good = table != NULL;
  for (size_t i = 0; good && i < species_table_size (table); i++) {
    const struct species *one = species_table_at (table, i);

    printf ("%s %.17g\n", one->formula, one->molar_mass * 1e3);
  }
  for (size_t i = 0; good && i < sizeof more / sizeof more[0]; i++) {
    const struct species *one = NULL;
    const char *candidates;

    good = species_find (table, more[i], strlen (more[i]), &one, &candidates) != SPECIES_NONE
           && one != NULL;
    printf ("%s %.17g\n", more[i], good ? one->molar_mass * 1e3 : 0);
  }
  species_table_destroy (table);
  arena_destroy (arena);
  return good ? 0 : 1;
}
