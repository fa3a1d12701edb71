/* F factors of what is burnt: a gas by its elements, or a fuel of the table.  */
#ifndef LANGUAGE_EVALUATE_FUEL_H
#define LANGUAGE_EVALUATE_FUEL_H

#include "language/evaluate/evaluation.h"
#include "property/emission.h"

/* FUEL: a NODE_NAME of a fuel of the table, or a gas.  NET heat only of a gas.  */
struct fuel_question { const struct node *fuel; const struct state *state; enum f_factor factor;
                       bool net; };
/* The factor in m3/J at 68 degF and 1 atm; *BASIS, where figures are described, what it is of.  */
bool fuel_factor (struct evaluation *, const struct fuel_question *, double *F,
                  const char **basis) MUST_CHECK;
/* Is the property an F factor?  Which?  */
bool property_is_f_factor (enum property, enum f_factor *);
/* `dry F factor of raw`, NODE the whole of it.  */
bool property_f_factor (struct evaluation *, const struct node *, const struct state *,
                        struct value *) MUST_CHECK;
/* "8710 ft3/MMBtu at 68 degF, 1 atm".  */
const char *f_factor_text (struct evaluation *, double F);
/* Where a volume of an F factor in UNIT is counted: of `scf` at 68 degF and 1 atm as the method has
   it, unless it is set; else as the family says, and without one at 68 degF and 1 atm.          */
struct conditions f_factor_conditions (struct evaluation *, const struct unit *);

#endif
