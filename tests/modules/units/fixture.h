/* A table of units for a case, and short ways to ask it.  */
#ifndef TESTS_UNITS_FIXTURE_H
#define TESTS_UNITS_FIXTURE_H

#include <stdbool.h>
#include "support/fault.h"
#include "units/unit.h"

struct arena;

struct fixture { struct arena *arena; struct fault fault; struct unit_table *table; };

/* DIRECTORY: of a user's tables, or null.  The table is null if it was refused.  */
void fixture_open (struct fixture *, const char *directory);
void fixture_close (struct fixture *);

/* Null, with the fixture's fault made anew, if TEXT is no unit.  */
const struct unit *fixture_find (struct fixture *, const char *text);

#endif
