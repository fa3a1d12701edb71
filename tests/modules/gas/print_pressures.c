/* Prints saturation pressures of water over a grid, one "PHASE T p" a line, in K and Pa.  */
#include "config.h"
#include <stdbool.h>
#include <stdio.h>
#include "gas/moisture.h"
#include "support/arena.h"
#include "support/fault.h"

int
main (void)
{
  struct arena *arena = arena_create ();
  struct fault fault;
  bool good = true;
  fault_init (&fault, arena);
  for (int i = 0; i < 250; i++) {
    double ice = 50 + (273.16 - 50) * i / 249.0, liquid = 223.15 + (647 - 223.15) * i / 249.0;
    double p = 0;
    good = good && water_pressure_ice (ice < 273.16 ? ice : 273.16, &p, &fault);
    printf ("ice %.17g %.17g\n", ice < 273.16 ? ice : 273.16, p);
    good = good && water_pressure_liquid (liquid, &p, &fault);
    printf ("liquid %.17g %.17g\n", liquid, p);
  }
  arena_destroy (arena);
  return good ? 0 : 1;
}
