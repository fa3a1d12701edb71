/* Steps of evaluation for the record of an answer.  Where an evaluation keeps none, nothing is
   done.                                                                                         */
#ifndef LANGUAGE_EVALUATE_RECORD_H
#define LANGUAGE_EVALUATE_RECORD_H

#include <stdbool.h>
#include "language/evaluate/evaluation.h"
#include "units/constants.h"
#include "units/workings.h"

struct analysis; struct composition; struct node; struct stream; struct treatment;

/* Adds a step; the arguments behind EV are its members.  */
#define RECORD(ev, ...)                                                                  \
  do {                                                                                   \
    if ((ev)->workings)                                                                  \
      workings_add ((ev)->workings, &(struct step) { __VA_ARGS__ });                     \
  } while (0)

/* Units of a flow or an amount.  */
static inline const char *moles_unit (bool flow) { return flow ? "mol/s" : "mol"; }
static inline const char *mass_unit (bool flow) { return flow ? "kg/s" : "kg"; }
static inline const char *volume_unit (bool flow) { return flow ? "m3/s" : "m3"; }

/* NUMBER in the unit of NODE, as typed, which came to SI.  */
void record_typed (struct evaluation *, const struct node *, double number, double si);
/* SI told in UNIT (null: as it is) as the answer WHAT.  */
struct told { const char *what, *unit_text; const struct unit *unit; double si, value; };
void record_told (struct evaluation *, const struct told *);
/* The molar mass of GAS, OF what it is (null: not said).  */
void record_molar_mass (struct evaluation *, const struct composition *gas, const char *of);
/* The ideal volume of a mole at the conditions of a family.  */
void record_family (struct evaluation *, enum reference_family, double Vm);
/* The edition of the standard in force (heat.c): "ISO 6976:2016".  */
const char *heat_standard (const struct evaluation *);
/* The barometer, and where it is from.  */
void record_barometer (struct evaluation *, double p);
const char *barometer_source (const struct settings *);
const char *family_source (const struct settings *, enum reference_family);

/* The parts of a list as stated, and what closing it did.  */
void record_list (struct evaluation *, const struct analysis *, const char *of);
void record_closed (struct evaluation *, const struct analysis *, const struct composition *,
                    double scaled, const char *of);
/* What a treatment did.  FORMULA makes x_i, the amounts after, of a_i, those before.  */
struct treated { const char *name, *of, *formula; const struct analysis *before, *after;
                 const struct treatment *did;
                 const struct composition *gas;            /* taken out; or null */
                 const struct species_set *tracers; };     /* that told how much of it */
void record_treatment (struct evaluation *, const struct treated *);
/* The gas with other water: the dry parts keep their proportions.  */
void record_wetting (struct evaluation *, const struct composition *before,
                     const struct composition *after);
/* A stream with other water, Y of it now: its DRY flow stays.  */
void record_rewetted (struct evaluation *, double dry, double y, const struct stream *);
/* A blend or a remainder (SIGN -1) of two streams.  */
void record_blend (struct evaluation *, const struct stream *a, const struct stream *b,
                   const struct stream *made, int sign);
/* What recoveries keep of a stream: KEPT of each of its parts.  */
void record_keeping (struct evaluation *, const struct stream *, const double kept[],
                     const struct stream *made);

/* ---- Sums (record_sum.c) ---- */

void record_sum (struct evaluation *, const struct value *made, double a, double b, bool minus);
/* A figure, BEFORE at the conditions of FROM, at those of its family now.  */
void record_restated (struct evaluation *, const struct value *made, double before,
                      enum reference_family from, int power);
void record_part_sum (struct evaluation *, const struct value *a, const struct value *b,
                      const struct value *made);
/* A, which was LEFT, times or over B; its measure is still that of LEFT.  */
void record_product (struct evaluation *, const struct value *a, const struct value *b, double left,
                     bool divide);
void record_scaled (struct evaluation *, const struct value *before, const struct value *after,
                    double factor);
/* Amount and mass on either side.  */
void record_ratio (struct evaluation *, const struct value *ratio, const double top[2],
                   const double bottom[2], bool flow);
void record_function (struct evaluation *, const char *name, const char *formula, double x,
                      double value);

#endif
