/* Quantities of a gas: from a figure to moles.  */
#ifndef LANGUAGE_EVALUATE_FLOW_H
#define LANGUAGE_EVALUATE_FLOW_H

#include <stdbool.h>
#include "language/evaluate/evaluation.h"

/* What kind of flow or amount a unit counts.  */
enum flow_basis { FLOW_NONE, FLOW_MASS, FLOW_MOLAR, FLOW_REFERENCE, FLOW_ACTUAL, FLOW_ENERGY };
/* *FLOW: per time, else an amount.  FLOW_NONE if the measure is neither.  */
enum flow_basis flow_basis_of (const struct measure *, bool *flow);

/* A figure per quantity of gas that is no concentration: kWh/Nm3, MJ/kg, EUR... per mol.  */
bool flow_is_specific (const struct measure *);

/* A quantity of a gas: the figure, where it was typed, the state behind `at` (null: none), and
   the gas, with the state of the stream it is taken from (T, p, Z NAN for a gas).               */
struct flow_figure {
  const struct value *quantity;
  const struct node *typed;
  const struct state *state;
  const struct stream *source;
  const char *called;                       /* the gas's name; or null */
};
/* AT is where the gas is named.
   Kinds: state-missing, gross-or-net, unit-mismatch, not-available.  */
bool flow_from_quantity (struct evaluation *, const struct flow_figure *, struct place at,
                         struct stream *) MUST_CHECK;

/* The state of a trace's own figure.  */
void quantity_at_state (struct value *, const struct state *);

#endif
