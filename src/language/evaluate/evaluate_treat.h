/* Treatments of an analysis, each saying what it did: what evaluate_gas.c and evaluate_treat.c
   share.                                                                                        */
#ifndef LANGUAGE_EVALUATE_EVALUATE_TREAT_H
#define LANGUAGE_EVALUATE_EVALUATE_TREAT_H

#include "language/evaluate/evaluation.h"

struct analysis;

/* Rounding in the last digits of a sum is no scaling.  */
#define SCALING_WORTH_A_NOTE 1e-10

/* A change, the gas it is made to, and what that is called.  */
struct change_of { const struct node *node; const struct gas_value *gas; const char *name; };

const struct analysis *gas_normalised (struct evaluation *, const struct change_of *,
                                       const struct analysis *before) MUST_CHECK;
const struct analysis *gas_without (struct evaluation *, const struct change_of *,
                                    const struct analysis *before) MUST_CHECK;

/* A share on the basis of the whole: "99.37 mol%".  */
const char *gas_total_text (struct evaluation *, const struct analysis *, double share);
/* The part that usually takes the difference: nitrogen if it is there, else the largest.  */
const char *gas_usual_balance (const struct analysis *);

#endif
