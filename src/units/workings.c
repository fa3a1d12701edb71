#include "config.h"
#include "units/workings.h"

#include <string.h>
#include "support/arena.h"

const char STEP_TYPED[] = "as typed";
const char STEP_DEFINITION[] = "by definition";
const char STEP_IDEAL_GAS[] = "ideal gas law, p V = n R T";
const char STEP_WEIGHTS[] = "atomic weights, tables/elements.tsv";
const char STEP_SI[] = "SI Brochure, 9th ed. (2019)";

void
workings_init (struct workings *workings, struct arena *arena)
{
  *workings = (struct workings) { .arena = arena };
}

/* Columns with their figures.  */
static const struct step_column *
columns_copied (struct arena *arena, const struct step *from)
{
  struct step_column *columns = ARENA_ARRAY (arena, from->column_count, struct step_column);
  for (size_t i = 0; i < from->column_count; i++) {
    double *at = ARENA_ARRAY (arena, from->term_count, double);
    columns[i] = from->columns[i];
    memcpy (at, columns[i].at, from->term_count * sizeof *at);
    columns[i].at = at;
  }
  return columns;
}

void
workings_add (struct workings *workings, const struct step *from)
{
  if (workings == NULL)
    return;
  const size_t symbols = from->symbol_count;
  struct { struct step step; struct step_symbol symbols[]; } *made
    = arena_alloc (workings->arena, 1, sizeof *made + symbols * sizeof made->symbols[0]);
  made->step = *from;
  for (size_t i = 0; i < symbols; i++)
    made->symbols[i] = from->symbols[i];
  made->step.symbols = made->symbols;
  made->step.next = NULL;
  if (from->column_count > 0)
    made->step.columns = columns_copied (workings->arena, from);
  if (workings->last == NULL)
    workings->first = &made->step;
  else
    workings->last->next = &made->step;
  workings->last = &made->step;
  workings->count++;
}
