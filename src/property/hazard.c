#include "config.h"
#include "property/hazard.h"

#include <stdbool.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "property/flammability.h"
#include "support/sum.h"

/* OSHA, 29 CFR 1910.146(b), hazardous atmosphere: oxygen below 19.5 or above 23.5 per cent.  */
static const double oxygen_least = 0.195, oxygen_most = 0.235;

/* Below this share of oxygen no mixture with air and nitrogen burns at ordinary conditions: the
   most demanding common gas is hydrogen, limiting oxygen concentration about 5 vol% (NFPA 69,
   annex, from memory); 4 % leaves a margin, common practice, no source.                         */
static const double oxygen_to_burn = 0.04;

/* Gas detection warns at a quarter of the lower limit at the latest: common practice, no source. */
static const double flammable_warning = 0.25;

/* Air-like: mostly what air is made of, more oxygen than a flue gas, less CO2 than breath.
   Common practice, no source.                                                                   */
static const double air_share = 0.95, air_oxygen = 0.10, air_carbon_dioxide = 0.01;

static double
fraction_of_key (const struct composition *c, const char *key)
{
  for (size_t i = 0; i < c->count; i++)
    if (strcmp (c->species[i]->key, key) == 0)
      return c->fraction[i];
  return 0;
}

static const struct species *
species_of_key (const struct composition *c, const char *key)
{
  for (size_t i = 0; i < c->count; i++)
    if (strcmp (c->species[i]->key, key) == 0)
      return c->species[i];
  return NULL;
}

static bool
is_air_like (const struct composition *c, double oxygen)
{
  double carbon_dioxide = fraction_of_key (c, "CO2");
  double share = oxygen + fraction_of_key (c, "N2") + fraction_of_key (c, "Ar")
    + fraction_of_key (c, "H2O");
  if (carbon_dioxide < air_carbon_dioxide)
    share += carbon_dioxide;
  return oxygen > air_oxygen && share >= air_share;
}

static size_t
find_oxygen (const struct composition *c, struct hazard *found)
{
  double oxygen = fraction_of_key (c, "O2");
  if (oxygen > oxygen_most) {
    *found = (struct hazard) {
      HAZARD_OXYGEN_RICH, species_of_key (c, "O2"), oxygen / oxygen_most, oxygen_most
    };
    return 1;
  }
  if (oxygen < oxygen_least && is_air_like (c, oxygen)) {
    *found = (struct hazard) {
      HAZARD_OXYGEN_POOR, species_of_key (c, "O2"), oxygen / oxygen_least, oxygen_least
    };
    return 1;
  }
  return 0;
}

/* Le Chatelier, Annales des Mines (8) 19 (1891) 388: a mixture is at its lower limit in air when
   sum x_i/L_i = 1.  The limit of the fuels together is sum x_i/(sum x_i/L_i).                   */
static size_t
find_flammable (const struct composition *c, const struct flammable_limits stated[], size_t n,
                struct hazard *found)
{
  struct sum ratio = { 0, 0 }, fuel = { 0, 0 };
  const struct species *largest = NULL;
  double most = 0;
  if (fraction_of_key (c, "O2") < oxygen_to_burn)
    return 0;
  for (size_t i = 0; i < c->count; i++) {
    double limit = flammability_lower (c->species[i], stated, n);
    if (!(limit > 0))                    /* NAN: not flammable */
      continue;
    double part = c->fraction[i] / limit;
    sum_add (&ratio, part);
    sum_add (&fuel, c->fraction[i]);
    if (part > most) {
      most = part;
      largest = c->species[i];
    }
  }
  double total = sum_total (&ratio);
  if (largest == NULL || total < flammable_warning)
    return 0;
  *found = (struct hazard) { HAZARD_FLAMMABLE, largest, total, sum_total (&fuel) / total };
  return 1;
}

/* Puts NEW into LIST of COUNT, largest ratio first, if it belongs to the ROOM worst.  */
static size_t
insert_worst (struct hazard list[], size_t count, size_t room, struct hazard new)
{
  size_t at = count;
  while (at > 0 && list[at - 1].ratio < new.ratio)
    at--;
  if (at >= room)
    return count;
  if (count == room)
    count--;
  memmove (&list[at + 1], &list[at], (count - at) * sizeof list[0]);
  list[at] = new;
  return count + 1;
}

static size_t
find_toxic (const struct composition *c, struct hazard found[], size_t room)
{
  size_t count = 0;
  for (size_t i = 0; i < c->count; i++) {
    double limit = c->species[i]->exposure_limit;
    bool toxic = strstr (c->species[i]->flags, "toxic") != NULL;
    if (toxic && limit > 0 && c->fraction[i] >= limit)   /* NAN: no limit known */
      count = insert_worst (found, count, room,
                            (struct hazard) { HAZARD_TOXIC, c->species[i],
                                              c->fraction[i] / limit, limit });
  }
  return count;
}

size_t
hazard_find (const struct composition *c, const struct flammable_limits stated[], size_t n,
             struct hazard found[HAZARD_MOST])
{
  struct hazard other[2];
  size_t others = find_flammable (c, stated, n, other);
  others += find_oxygen (c, other + others);
  size_t count = find_toxic (c, found, HAZARD_MOST - others);
  for (size_t i = 0; i < others; i++)
    found[count++] = other[i];
  return count;
}
