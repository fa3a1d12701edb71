/* Short texts of figures, and the assumptions and notes that need them.

   Figures inside sentences have six significant digits without trailing zeros.  Nothing is made
   while an evaluation only wants figures (`describe` false).                                    */
#ifndef LANGUAGE_EVALUATE_WORDING_H
#define LANGUAGE_EVALUATE_WORDING_H

#include "language/evaluate/evaluation.h"

struct arena; struct composition; struct gas_value; struct species; struct unit;

/* "1.23574"; "58.2".  */
const char *figure_text (struct arena *, double value);
/* Three digits, for a figure that only says how large something is: "170", "2000".  */
const char *rough_text (struct arena *, double value);
/* Two digits, for an uncertainty: "0.094".  */
const char *spread_text (struct arena *, double u);
/* A share as trade writes it: "3.44969 mol%", "850 ppm".  */
const char *share_text (struct arena *, double mole_fraction);
/* "38 degC", or "100.4 degF" for customary American units.  */
const char *temperature_text (struct arena *, double T, bool customary);
/* "1.03825 bar(a)" or "14.6959 psia".  */
const char *pressure_text (struct arena *, double p, bool customary);
/* T, p, Z and the model of an actual volume: "38 degC, 1.03825 bar(a), Z 0.997, ideal gas".  */
struct actual { double T, p, Z; const char *model; bool customary; };
const char *actual_text (struct arena *, const struct actual *);
/* "dry" or "wet": has the gas water?  */
const char *moisture_word (const struct evaluation *, const struct composition *);
/* A name as it is typed: in quotes unless it is a plain word.  */
const char *name_text (struct arena *, const char *name);
/* The part of a statement's source a node covers.  */
const char *node_text (struct arena *, const struct statement *, const struct node *);

/* Assumptions and notes.  */
void assume_barometer (struct evaluation *, const char *figure, const char *unit,
                       double absolute);
void assume_site_pressure (struct evaluation *);
void assume_family (struct evaluation *, enum reference_family);
/* Of a sum that a name stands for.  */
void assume_counted_as (struct evaluation *, const char *sum, const char *component);
/* OR_LIQUID: ice was taken, and supercooled liquid may be meant.  */
void assume_vapour_pressure (struct evaluation *, double psat, bool over_ice, bool or_liquid);
/* UNCERTAINTY of the density, relative, as published for k = 2; NAN: none is.  */
void assume_model (struct evaluation *, const char *model, double Z, double uncertainty);
/* Of a component: known by its formula alone, or from the user's own table.  */
void note_species (struct evaluation *, const struct species *);
/* A note or caution, if anybody listens.  Facts may be null.  */
void note (struct evaluation *, enum message, const char *fact1, const char *fact2,
           const char *fact3);
void note_water (struct evaluation *, double y_before, double y_after);

#endif
