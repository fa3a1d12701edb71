/* Gases for the tests, made of the built-in components.  */
#ifndef MODULES_PROPERTY_GASES_H
#define MODULES_PROPERTY_GASES_H

#include "support/fault.h"

struct arena; struct composition; struct property_tables; struct species; struct species_table;

struct gases {
  struct arena *arena;
  struct fault fault;
  struct species_table *species;
  struct property_tables *tables;
};

/* Everything afresh but the species and tables, which are read once.  */
void gases_start (struct gases *);
void gases_end (struct gases *);

/* The component of that key or formula, null if there is none.  */
const struct species *gases_species (struct gases *, const char *key);
/* "CH4 9, N2 1": mole fractions 0.9 and 0.1.  Null if it cannot be read.  */
const struct composition *gases_make (struct gases *, const char *text);

#endif
