/* How a balance came out, for `workings`.  */
#ifndef LANGUAGE_BALANCE_PLANT_RECORD_H
#define LANGUAGE_BALANCE_PLANT_RECORD_H

#include "language/balance/plant.h"

struct result; struct statement;

/* A stream of the balance that a later answer leans on, mol/s.  */
void record_made_stream (struct evaluation *, const struct plant *, const char *name,
                         double moles);
/* Keeps the verdict in RESULT, of the statement that solved the plant, with its steps.  */
void plant_record (struct evaluation *, const struct statement *, const struct plant *,
                   const struct result *);

#endif
