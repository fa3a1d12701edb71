/* The record of how a figure came about: steps, as data.

   Functions from `property` up take a `struct workings *` (null: keep no record) and append what
   they did: formula, figures, source, and choices they made.  Sentences are made by `report`.   */
#ifndef UNITS_WORKINGS_H
#define UNITS_WORKINGS_H

#include <stddef.h>

struct arena;

struct step { const char *name, *formula, *unit, *source; double value; struct step *next; };

struct workings { struct arena *arena; struct step *first, *last; size_t count; };

void workings_init (struct workings *, struct arena *);
/* Copies the strings; a null WORKINGS does nothing.  VALUE in UNIT.  */
void workings_add (struct workings *, const char *name, const char *formula, double value,
                   const char *unit, const char *source);

#endif
