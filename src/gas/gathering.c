#include "config.h"
#include "gas/gathering.h"

#include <math.h>
#include "gas/species.h"
#include "support/arena.h"
#include "support/sum.h"

struct gathering
gathering_start (struct arena *arena, size_t room)
{
  return (struct gathering) { ARENA_ARRAY (arena, room, struct part), 0 };
}

size_t
parts_find (size_t n, const struct part parts[], const struct species *species)
{
  size_t i = 0;
  while (i < n && parts[i].species != species)
    i++;
  return i;
}

void
gathering_add (struct gathering *g, const struct species *species, double amount)
{
  size_t i = parts_find (g->count, g->parts, species);
  if (i == g->count) {
    g->parts[i] = (struct part) { species, amount };
    g->count++;
  } else {
    g->parts[i].amount += amount;
  }
}

struct gathering
gathering_of_analysis (struct arena *arena, const struct analysis *a, double factor)
{
  struct gathering g = gathering_start (arena, a->count + 1);
  g.count = a->count;
  for (size_t i = 0; i < a->count; i++)
    g.parts[i] = (struct part) { a->parts[i].species, a->parts[i].amount * factor };
  return g;
}

const struct analysis *
gathering_analysis (struct arena *arena, const struct gathering *g, enum whole whole, bool dry)
{
  struct analysis *made = ARENA_NEW (arena, struct analysis);
  *made = (struct analysis) { g->count, g->parts, whole, dry };
  return made;
}

double
parts_total (size_t n, const struct part parts[])
{
  struct sum total = { 0, 0 };
  for (size_t i = 0; i < n; i++)
    sum_add (&total, parts[i].amount);
  return sum_total (&total);
}

double
analysis_measure (const struct analysis *a, const struct species *species, double amount)
{
  return a->whole == WHOLE_MASS ? amount * species->molar_mass : amount;
}

double
analysis_sum (const struct analysis *a)
{
  struct sum total = { 0, 0 };
  for (size_t i = 0; i < a->count; i++)
    sum_add (&total, analysis_measure (a, a->parts[i].species, a->parts[i].amount));
  return sum_total (&total);
}

double
analysis_rounding (size_t n)
{
  return 1e-15 * (double) (n + 1);
}

double
analysis_closing_factor (size_t n, double total)
{
  return fabs (total - 1) <= analysis_rounding (n) ? 1 : 1 / total;
}
