/* What half a last digit of the figures does to the unknowns, to first order.  */
#ifndef BALANCE_DIGITS_H
#define BALANCE_DIGITS_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/core.h"
#include "support/check.h"

struct arena; struct digits;

/* Of facts that agree; TYPED has those of the core's network with the digits they were typed with.
   Null: no figure has digits, or too many are to spare to look after.                           */
struct digits *digits_make (struct arena *, const struct core *, const struct network *typed);

/* The figures that have digits, each by its first fact row; how many.  */
const size_t *digits_figures (const struct digits *, size_t *count);
/* Half a last digit of fact F, of a composition of its COMPONENT, as the fact counts it.  */
double digits_half (const struct network *typed, size_t f, size_t component);

/* What the unknowns move by, DV by column, when figure LIST[i] moves by WEIGHT[i] times half its
   last digit.  The work needs SCRATCH.                                                          */
void digits_respond (const struct digits *, struct arena *scratch, size_t count,
                     const size_t list[], const double weight[], double dv[]);

#endif
