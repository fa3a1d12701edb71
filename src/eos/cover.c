#include "config.h"
#include "eos/cover.h"

#include <math.h>
#include <string.h>

#include "eos/eos.h"
#include "eos/gerg_table.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "units/constants.h"

/* Keys are compared as they lie in memory, eight bytes at once.  */
int
cover_find (const struct cover *cover, const char *key)
{
  const size_t n = strlen (key);
  char wanted[COVER_KEY] = "";

  if (n >= sizeof wanted) {
    return -1;
  }
  memcpy (wanted, key, n);
  for (size_t i = 0; i < cover->count; i++) {
    if (memcmp (wanted, cover->keys + i * cover->stride, sizeof wanted) == 0) {
      return (int) i;
    }
  }
  return -1;
}

/* Tc Vc of a species.  Without Vc it is taken as 0.27 R Tc/pc, the usual critical compression
   factor (common practice, no source).                                                          */
static double
attraction_of (const struct species *s)
{
  const double Tc = s->critical_temperature, Vc = s->critical_molar_volume;

  return isfinite (Vc) && Vc > 0 ? Tc * Vc : Tc * (0.27 * GAS_CONSTANT * Tc / s->critical_pressure);
}

/* The row a species is lumped with: of all but water, the one whose van der Waals attraction
   a = (9/8) R Tc Vc is nearest by ratio, taken from the figures of GERG-2008.  -1 where Tc, or both
   Vc and pc, are not known.  So benzene is taken for a pentane, krypton for methane.            */
static int
nearest_row (const struct cover *cover, const struct species *s)
{
  const double wanted = attraction_of (s);
  double least = HUGE_VAL;
  const char *nearest = NULL;

  for (int i = 0; i < GERG_COUNT && isfinite (wanted) && wanted > 0; i++) {
    const struct gerg_component *c = &gerg_table.components[i];
    const double away = fabs (log (wanted * c->rho_c / c->T_c));

    if (away < least && strcmp (c->key, "H2O") != 0) {
      least = away;
      nearest = c->key;
    }
  }
  return nearest != NULL ? cover_find (cover, nearest) : -1;
}

double
cover_lumped (const struct cover *cover, const struct composition *composition)
{
  double sum = 0;

  for (size_t i = 0; i < composition->count; i++) {
    if (cover_find (cover, composition->species[i]->key) < 0) {
      sum += composition->fraction[i];
    }
  }
  return sum;
}

bool
cover_all (const struct cover *cover, const struct composition *composition,
           const char **lacking)
{
  *lacking = NULL;
  for (size_t i = 0; i < composition->count && *lacking == NULL; i++) {
    if (cover_find (cover, composition->species[i]->key) < 0) {
      *lacking = composition->species[i]->key;
    }
  }
  return *lacking == NULL || cover_lumped (cover, composition) < EOS_TRACES;
}

void
cover_fractions (const struct cover *cover, const struct composition *composition, double x[])
{
  double sum = 0;

  for (size_t i = 0; i < cover->count; i++) {
    x[i] = 0;
  }
  for (size_t i = 0; i < composition->count; i++) {
    const struct species *s = composition->species[i];
    int at = cover_find (cover, s->key);

    if (at < 0) {
      at = nearest_row (cover, s);
    }
    if (at >= 0) {
      x[at] += composition->fraction[i];
    }
  }
  for (size_t i = 0; i < cover->count; i++) {
    sum += x[i];
  }
  for (size_t i = 0; i < cover->count; i++) {
    x[i] /= sum;
  }
}
