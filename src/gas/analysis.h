/* A gas as somebody stated it: parts that may or may not add up.

   An analysis keeps the amounts as stated, per one mole or one kilogram of the whole (`whole`
   says which), so that its total can be looked at before and after each treatment.  A treatment
   makes another analysis and says in a `struct treatment` what it took, added or scaled.
   analysis_close turns an analysis into a composition.                                          */
#ifndef GAS_ANALYSIS_H
#define GAS_ANALYSIS_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "gas/composition.h"

enum whole { WHOLE_MOLE, WHOLE_MASS, WHOLE_NONE };   /* NONE: amounts or masses, no total to meet */

struct analysis {
  size_t count;
  const struct part *parts;              /* mol per mol or per kg of the whole; mol for NONE */
  enum whole whole;
  bool dry;                              /* declared `dry` */
};

/* One part as stated.  SPECIES or GAS (a nested gas) is set, not both.  */
enum amount_basis { AMOUNT_MOLE_FRACTION, AMOUNT_MASS_FRACTION, AMOUNT_MOLES, AMOUNT_MASS,
                    AMOUNT_MOLAR_CONCENTRATION,     /* mol per mol of ideal gas, from mg/Nm3 */
                    AMOUNT_REST };
struct stated_part {
  const struct species *species;
  const struct composition *gas;
  enum amount_basis basis;
  double amount;                         /* mol/mol, kg/kg, mol or kg */
};

/* Makes an analysis from stated parts, bases mixed at will (an amount in mg/Nm3 arrives as
   mol/mol).  With a `rest` the total is 1 and the rest takes what the others leave: mixed molar
   and mass bases are solved exactly.  Shares all by mass make a WHOLE_MASS, a molar one among
   them a WHOLE_MOLE; without a rest such a mixed list adds up to the same total by amount and by
   mass.  Same species are added together, those of a nested gas too.  Faults, with *AT the
   index of the part: gas-total (with rest, the others exceed one), amount-range (negative or not
   finite), basis-mixed (amounts or masses beside shares), rest-twice.                          */
const struct analysis *analysis_make (struct arena *, size_t n, const struct stated_part parts[],
                                      bool dry, size_t *at, struct fault *) MUST_CHECK;
const struct analysis *analysis_of_composition (struct arena *,
                                                const struct composition *) MUST_CHECK;

/* What the parts add up to on the basis of the whole; 1 for WHOLE_NONE.  */
double analysis_total (const struct analysis *);

struct treatment {
  double total_before, total_after;      /* on the basis of the whole */
  double factor;                         /* what every part was multiplied by; 1: none */
  double added;                          /* to the balance component, of the whole */
  double removed;                        /* taken away, of the whole (mol/mol or kg/kg) */
  double gas;                            /* the gas taken away, whole, as its tracers have it */
  const char *tracer, *skipped;          /* species keys, parted by commas; null: none.  Skipped:
                                            parts of the removed gas not in the list */
  const char *consumed;                  /* the key of what is there in less than the gas brings;
                                            null: none is */
  double brings, holds;                  /* of it, of the whole */
};

/* All parts scaled to a total of 1.  */
const struct analysis *analysis_normalised (struct arena *, const struct analysis *,
                                            struct treatment *, struct fault *) MUST_CHECK;
/* BALANCE takes the difference to 1 (added if it was not there); kind negative-part if it would
   fall below zero.                                                                             */
const struct analysis *analysis_normalised_into (struct arena *, const struct analysis *,
                                                 const struct species *balance,
                                                 struct treatment *, struct fault *) MUST_CHECK;
/* Takes one species out of the stated figures (not rescaled).  Kind no-such-part if absent.  */
const struct analysis *analysis_without (struct arena *, const struct analysis *,
                                         const struct species *, struct treatment *,
                                         struct fault *) MUST_CHECK;
/* What is to be taken out: GAS (air), of which N tracers together set how much.  CONSUMED (oxygen)
   may have been used up: all of it goes even where there is less than the gas brings; or null.  */
struct removal { const struct composition *gas; size_t n; const struct species *const *tracers;
                 const struct species *consumed; };
/* The tracers vanish, the other parts of the gas go with them; those that the analysis does not
   hold are skipped and named.  Kinds no-such-part (no tracer in it), negative-part (less of a
   part than goes with the tracer).                                                              */
const struct analysis *analysis_without_gas (struct arena *, const struct analysis *,
                                             const struct removal *, struct treatment *,
                                             struct fault *) MUST_CHECK;
/* Water away, the rest scaled to a total of 1 if the analysis was closed (its total within
   ANALYSIS_CLOSED of 1; a caller with another tolerance normalises first), else not.  A gas that
   has none keeps its figures.  The result is declared dry.  Kind only-water if nothing is left. */
#define ANALYSIS_CLOSED 0.005
const struct analysis *analysis_dried (struct arena *, const struct analysis *,
                                       const struct species *water, struct treatment *,
                                       struct fault *) MUST_CHECK;

/* The composition of an analysis whose total is within TOLERANCE (relative, 0.005) of 1; *SCALED
   says by what it was multiplied.  Kind gas-open otherwise (facts: the total in %, its unit).  */
const struct composition *analysis_close (struct arena *, const struct analysis *,
                                          double tolerance, double *scaled,
                                          struct fault *) MUST_CHECK;

#endif
