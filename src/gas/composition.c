#include "config.h"
#include "gas/composition.h"

#include <assert.h>
#include <math.h>
#include "gas/gathering.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"

/* A composition of COUNT species whose fractions are in place.  */
static const struct composition *
finish (struct arena *arena, size_t count, const struct species *const species[],
        const double x[])
{
  struct composition *made = ARENA_NEW (arena, struct composition);
  struct sum mass = { 0, 0 };
  for (size_t i = 0; i < count; i++)
    sum_add (&mass, x[i] * species[i]->molar_mass);
  *made = (struct composition) { count, species, x, sum_total (&mass) };
  return made;
}

/* x_i = n_i/sum n_k (ISO 14912:2003, amount-of-substance fraction); M = sum x_i M_i.  TOTAL, the
   sum of the amounts, is above zero and finite.                                                 */
static const struct composition *
from_amounts (struct arena *arena, const struct gathering *g, double total)
{
  const struct species **species = ARENA_ARRAY (arena, g->count, const struct species *);
  double *x = ARENA_ARRAY (arena, g->count, double);
  for (size_t i = 0; i < g->count; i++) {
    species[i] = g->parts[i].species;
    x[i] = g->parts[i].amount / total;
  }
  return finish (arena, g->count, species, x);
}

static const struct composition *
unusable (struct fault *fault, const char *name, const char *why)
{
  fault_set (fault, MESSAGE_AMOUNT_RANGE, name, why);
  return NULL;
}

const struct composition *
composition_make (struct arena *arena, size_t n, const struct part parts[], struct fault *fault)
{
  struct gathering g = gathering_start (arena, n);
  for (size_t i = 0; i < n; i++) {
    assert (parts[i].species != NULL);
    if (!isfinite (parts[i].amount))
      return unusable (fault, parts[i].species->key, "it is not finite");
    if (parts[i].amount < 0)
      return unusable (fault, parts[i].species->key, "it is negative");
    gathering_add (&g, parts[i].species, parts[i].amount);
  }
  double total = parts_total (g.count, g.parts);
  if (!isfinite (total))
    return unusable (fault, "the whole", "it is too large to compute with");
  if (total <= 0)
    return unusable (fault, "the whole", "nothing is in it");
  return from_amounts (arena, &g, total);
}

const struct composition *
composition_pure (struct arena *arena, const struct species *species)
{
  struct gathering g = gathering_start (arena, 1);
  gathering_add (&g, species, 1);
  return from_amounts (arena, &g, 1);
}

const struct composition *
composition_unclosed (struct arena *arena, const struct composition *gas, double factor)
{
  double *x = ARENA_ARRAY (arena, gas->count, double);
  for (size_t i = 0; i < gas->count; i++)
    x[i] = gas->fraction[i] * factor;
  return finish (arena, gas->count, gas->species, x);
}

const struct composition *
composition_keep (struct arena *arena, const struct composition *from)
{
  const struct species **species = ARENA_ARRAY (arena, from->count, const struct species *);
  double *x = ARENA_ARRAY (arena, from->count, double);
  for (size_t i = 0; i < from->count; i++) {
    species[i] = from->species[i];
    x[i] = from->fraction[i];
  }
  return finish (arena, from->count, species, x);
}

static size_t
position (const struct composition *c, const struct species *species)
{
  size_t i = 0;
  while (i < c->count && c->species[i] != species)
    i++;
  return i;
}

double
composition_fraction (const struct composition *c, const struct species *species)
{
  size_t i = position (c, species);
  return i < c->count ? c->fraction[i] : 0;
}

/* With y of water in the wet gas the others share 1 - y in their old proportions:
   x_i' = x_i (1 - y)/sum_dry x_k.  The sum runs over the dry parts, since 1 - x_water would lose
   digits where the gas is nearly all water.                                                     */
const struct composition *
composition_wetted (struct arena *arena, const struct composition *c, const struct species *water,
                    double y, struct fault *fault)
{
  if (!(y >= 0 && y < 1))
    return unusable (fault, water->key, "its share of the wet gas is at least 0 and below 1");
  struct sum dry = { 0, 0 };
  for (size_t i = 0; i < c->count; i++)
    if (c->species[i] != water)
      sum_add (&dry, c->fraction[i]);
  double rest = sum_total (&dry);
  if (rest <= 0) {
    fault_set (fault, MESSAGE_ONLY_WATER, NULL, NULL);
    return NULL;
  }
  struct gathering g = gathering_start (arena, c->count + 1);
  for (size_t i = 0; i < c->count; i++)
    if (c->species[i] != water)
      gathering_add (&g, c->species[i], c->fraction[i] / rest * (1 - y));
    else if (y > 0)
      gathering_add (&g, water, y);
  if (y > 0 && position (c, water) == c->count)
    gathering_add (&g, water, y);
  return from_amounts (arena, &g, parts_total (g.count, g.parts));
}

/* phi_i = x_i Z_i/sum x_k Z_k (ISO 14912:2003): the volumes of the unmixed parts at one T and p
   are in the ratio of n_i Z_i.                                                                  */
void
composition_volume_fractions (const struct composition *c, const double pure_Z[], double phi[])
{
  struct sum volume = { 0, 0 };
  for (size_t i = 0; i < c->count; i++)
    sum_add (&volume, c->fraction[i] * pure_Z[i]);
  double total = sum_total (&volume);
  for (size_t i = 0; i < c->count; i++)
    phi[i] = c->fraction[i] * pure_Z[i] / total;
}

double
composition_mixing_factor (const struct composition *c, const double pure_Z[], double Z)
{
  struct sum volume = { 0, 0 };
  for (size_t i = 0; i < c->count; i++)
    sum_add (&volume, c->fraction[i] * pure_Z[i]);
  return Z / sum_total (&volume);
}
