/* Restating a value in a unit: one job, spread over a file for each kind of value.  */
#ifndef LANGUAGE_CONVERT_CONVERT_H
#define LANGUAGE_CONVERT_CONVERT_H

#include "language/evaluate/evaluation.h"
#include "language/session_private.h"

/* One value in one target.  */
struct conversion {
  struct evaluation *ev;
  const struct value *value;
  const struct unit *unit;
  const char *unit_text;
  unsigned words;
  struct state state;                       /* of the target; NANs where it says nothing */
  bool has_state;
  const struct node *counted_as;
  const struct target *target;              /* as said; null: the units typed */
  const char *label, *what;
  struct place at, subject_at;              /* of the target (or the subject); of the subject */
  struct figures *figures;
};

/* Adds a figure: SI value in the conversion's unit, with what stands behind it.  */
struct standing { const char *what, *moisture, *basis; };
bool conversion_add (struct conversion *, double si, const struct standing *) MUST_CHECK;
/* "cannot be told in UNIT".  */
bool conversion_mismatch (struct conversion *, const char *why);

bool convert_quantity (struct conversion *) MUST_CHECK;
bool convert_stream (struct conversion *) MUST_CHECK;
bool convert_gas (struct conversion *) MUST_CHECK;
bool convert_part (struct conversion *) MUST_CHECK;
bool convert_trace (struct conversion *) MUST_CHECK;
bool convert_specific (struct conversion *) MUST_CHECK;
bool convert_calorific (struct conversion *) MUST_CHECK;
bool convert_emission (struct conversion *) MUST_CHECK;
/* An F factor, which holds at the T and p of the value, at those of the target.  */
bool convert_f_factor (struct conversion *) MUST_CHECK;
bool convert_limits (struct conversion *) MUST_CHECK;
bool convert_energy (struct conversion *, const struct composition *, double moles) MUST_CHECK;
bool convert_energy_ratio (struct conversion *) MUST_CHECK;
/* Sets the fault that the target does not say gross or net; false: it does.  */
bool neither_gross_nor_net (struct conversion *);
/* The energy in a stream or in components of one, J or W.  */
bool energy_of (struct conversion *, const struct value *, bool net, double *energy) MUST_CHECK;
/* A ratio of two flows as mass over heat: CO of stack / fuel in mg/MJ net.  */
bool convert_mass_per_heat (struct conversion *) MUST_CHECK;

/* Is the unit a share or a concentration?  */
bool unit_is_concentration (const struct unit *);
/* Is it a mass per heat?  A volume per heat?  */
bool unit_is_emission (const struct unit *);
bool unit_is_f_factor (const struct unit *);
/* Moles of what is counted for each mole of SPECIES, and its molar mass: `counted as S`.  */
bool counted_as (struct conversion *, const struct species *, double *per_mole,
                 double *molar_mass) MUST_CHECK;
/* The factor to a reference oxygen: (A - reference)/(A - measured), both dry, A the oxygen in
   air (Directive 2010/75/EU, Annex VI part 4 form).                                             */
bool oxygen_factor (struct conversion *, double measured, const char *what, double *factor)
  MUST_CHECK;
/* Molar volume a concentration or a partial flow of GAS (null: a trace in nobody's gas) is
   counted in, with its basis text.  FALLBACK gives T, p, Z where the target says none.          */
struct counted_volume { double Vm; const char *basis; };
bool conversion_volume (struct conversion *, const struct composition *gas,
                        const struct stream *fallback, struct counted_volume *) MUST_CHECK;

#endif
