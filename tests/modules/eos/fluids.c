#include "config.h"
#include "fluids.h"

#include <stdlib.h>
#include <string.h>

#include "gas/composition.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"

/* Critical temperature in K, critical pressure in kPa, acentric factor and molar mass in g/mol as
   in tables/species.tsv, where the sources are.                                                 */
#define FLUID(k, Tc, pc, w, M)                                                  \
  { .key = (k), .name = (k), .formula = (k), .flags = "", .molar_mass = (M) * 1e-3,  \
    .critical_temperature = (Tc), .critical_pressure = (pc) * 1e3, .acentric_factor = (w) }

static const struct species fluids[] = {
  FLUID ("H2", 33.145, 1296.4, -0.2190, 2.016),
  FLUID ("He", 5.1953, 228.32, -0.3836, 4.0026),
  FLUID ("N2", 126.192, 3395.8, 0.0372, 28.014),
  FLUID ("O2", 154.581, 5043, 0.0222, 31.998),
  FLUID ("Ar", 150.687, 4863, -0.0022, 39.95),
  FLUID ("CO", 132.86, 3494, 0.0497, 28.01),
  FLUID ("CO2", 304.128, 7377.3, 0.2239, 44.009),
  FLUID ("H2O", 647.096, 22064, 0.3443, 18.015),
  FLUID ("H2S", 373.1, 9000, 0.1005, 34.076),
  FLUID ("SF6", 318.723, 3754.98, 0.2180, 146.05042),
  FLUID ("NH3", 405.56, 11363.4, 0.2560, 17.031),
  FLUID ("N2O4", 431, 10132.5, 0.8558, 92.01),
  FLUID ("CH4", 190.564, 4599.2, 0.0114, 16.043),
  FLUID ("C2H6", 305.322, 4872.2, 0.0995, 30.07),
  FLUID ("C3H8", 369.89, 4251.2, 0.1521, 44.097),
  FLUID ("iC4H10", 407.81, 3629, 0.1840, 58.124),
  FLUID ("nC4H10", 425.125, 3796, 0.2010, 58.124),
  FLUID ("iC5H12", 460.35, 3378, 0.2274, 72.151),
  FLUID ("nC5H12", 469.7, 3367.5, 0.2510, 72.151),
  FLUID ("nC6H14", 507.82, 3044.1, 0.3000, 86.178),
  FLUID ("nC7H16", 540.2, 2735.73, 0.3490, 100.205),
  FLUID ("nC8H18", 568.74, 2483.59, 0.3980, 114.232),
  FLUID ("nC9H20", 594.55, 2281, 0.4433, 128.259),
  FLUID ("nC10H22", 617.7, 2103, 0.4884, 142.286),
  FLUID ("C2H4", 282.35, 5041.8, 0.0866, 28.054),
  FLUID ("C2H5OH", 514.71, 6268, 0.6460, 46.069),
};

enum { MIXTURE_PARTS = 32 };

size_t
fluid_count (void)
{
  return sizeof fluids / sizeof fluids[0];
}

const struct species *
fluid_at (size_t i)
{
  return &fluids[i];
}

const struct species *
fluid_find (const char *key)
{
  for (size_t i = 0; i < fluid_count (); i++) {
    if (strcmp (fluids[i].key, key) == 0) {
      return &fluids[i];
    }
  }
  return NULL;
}

const struct composition *
fluid_mixture (struct arena *arena, const char *text)
{
  struct part parts[MIXTURE_PARTS];
  struct fault fault;
  char *rest = arena_string (arena, text);
  char *item;
  size_t n = 0;

  while ((item = strsep (&rest, ";")) != NULL) {
    const char *key = strsep (&item, "=");
    if (item == NULL || n == MIXTURE_PARTS) {
      return NULL;
    }
    parts[n].species = fluid_find (key);
    parts[n].amount = strtod (item, NULL);
    if (parts[n++].species == NULL) {
      return NULL;
    }
  }
  fault_init (&fault, arena);
  return composition_make (arena, n, parts, &fault);
}

double
fluid_chance (uint64_t *seed)
{
  *seed = *seed * 6364136223846793005u + 1442695040888963407u;
  return (double) (*seed >> 11) * 0x1p-53;
}
