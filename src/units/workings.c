#include "config.h"
#include "units/workings.h"

#include "support/arena.h"

void
workings_init (struct workings *workings, struct arena *arena)
{
  *workings = (struct workings) { .arena = arena };
}

static const char *
copied (struct arena *arena, const char *text)
{
  return text == NULL ? NULL : arena_string (arena, text);
}

void
workings_add (struct workings *workings, const char *name, const char *formula, double value,
              const char *unit, const char *source)
{
  if (workings == NULL)
    return;
  struct step *step = ARENA_NEW (workings->arena, struct step);
  step->name = copied (workings->arena, name);
  step->formula = copied (workings->arena, formula);
  step->unit = copied (workings->arena, unit);
  step->source = copied (workings->arena, source);
  step->value = value;
  if (workings->last == NULL)
    workings->first = step;
  else
    workings->last->next = step;
  workings->last = step;
  workings->count++;
}
