#include "config.h"
#include "language/evaluate/unmixed.h"

#include <math.h>
#include "gas/composition.h"
#include "language/evaluate/evaluate_property.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

static const char VOLUME_FRACTION[] = "ISO 14912:2003, phi_i = x_i Z_i/sum x_k Z_k";
static const char VOLUME_CONCENTRATION[] = "ISO 14912:2003, sigma_i = x_i Z_i/Z";
static const char MIXING_FACTOR[] = "ISO 14912:2003, f = Z/sum x_k Z_k";

bool
unmixed_volumes (struct evaluation *ev, const struct composition *gas, double T, double p,
                 struct unmixed *out)
{
  double *Z = ARENA_ARRAY (ev->arena, gas->count, double);
  double *phi = ARENA_ARRAY (ev->arena, gas->count, double);
  out->sum = 0;
  for (size_t i = 0; i < gas->count; i++) {
    struct volume_question q = { composition_pure (ev->arena, gas->species[i]), T, p, UNSTATED,
                                 false };
    double Vm;
    const char *model;
    if (!actual_molar_volume (ev, &q, &Vm, &Z[i], &model)) {
      return false;
    }
    out->sum += gas->fraction[i] * Z[i];
  }
  composition_volume_fractions (gas, Z, phi);
  out->Z = Z;
  out->phi = phi;
  return true;
}

double
unmixed_share (struct evaluation *ev, const struct composition *gas, const struct unmixed *u,
               const struct species_set *set)
{
  double own = 0, phi = 0;
  for (size_t i = 0; i < gas->count; i++)
    for (size_t k = 0; k < set->count; k++)
      if (set->at[k] == gas->species[i]) {
        own += gas->fraction[i] * u->Z[i];
        phi += u->phi[i];
      }
  RECORD (ev, .name = "share of the unmixed volumes", .formula = "phi = s_c/s", .value = phi,
          .unit = "m3/m3", .source = VOLUME_FRACTION,
          STEP_SYMBOLS (SYMBOL ("s_c", own, "1"), SYMBOL ("s", u->sum, "1")));
  return phi;
}

/* The volume of the mixture over that of its parts.  */
static bool
mixing_factor (struct evaluation *ev, const struct property_question *q, const struct unmixed *u,
               double *f)
{
  struct volume_question mixed = { q->gas, q->T, q->p, q->Z, q->ideal };
  double Vm, Z;
  const char *model;
  if (!actual_molar_volume (ev, &mixed, &Vm, &Z, &model)) {
    return false;
  }
  *f = composition_mixing_factor (q->gas, u->Z, Z);
  RECORD (ev, .name = "mixing factor", .formula = "f = Z/s", .value = *f, .unit = "1",
          .source = MIXING_FACTOR,
          STEP_SYMBOLS (SYMBOL ("Z", Z, "1"), SYMBOL ("s", u->sum, "1")));
  return true;
}

bool
property_unmixed (struct evaluation *ev, const struct property_question *q, const struct value *of,
                  struct value *out)
{
  const bool part = q->property != PROPERTY_MIXING_FACTOR;
  struct unmixed u;
  double f = 1, si;
  if (part && of->kind != VALUE_PART) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, q->node->b->at, "this is that of a component",
                  NULL);
    fault_hint (ev->fault, "volume concentration of CO2 of raw at 0 degC, 1 atm");
    return false;
  }
  if (!property_needs (ev, q, true, true)) {
    return false;
  }
  if (!unmixed_volumes (ev, q->gas, q->T, q->p, &u)
      || (q->property != PROPERTY_VOLUME_FRACTION && !mixing_factor (ev, q, &u, &f))) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  si = part ? unmixed_share (ev, q->gas, &u, &of->species) : f;
  if (q->property == PROPERTY_VOLUME_CONCENTRATION) {
    const double phi = si;
    si = phi / f;
    RECORD (ev, .name = "volume concentration", .formula = "sigma = phi/f", .value = si,
            .unit = "m3/m3", .source = VOLUME_CONCENTRATION,
            STEP_SYMBOLS (SYMBOL ("phi", phi, "m3/m3"), SYMBOL ("f", f, "1")));
  }
  if (!property_answer (ev, q, si, out)) {
    return false;
  }
  if (ev->describe) {
    const char *at = arena_format (ev->arena, "%s, %s", temperature_text (ev->arena, q->T, false),
                                   pressure_text (ev->arena, q->p, false));
    out->basis = arena_format (ev->arena, q->property == PROPERTY_VOLUME_FRACTION
                                            ? "of the parts unmixed at %s, real"
                               : part ? "per volume of the mixture at %s, real"
                                      : "mixture over its parts unmixed at %s", at);
  }
  return true;
}
