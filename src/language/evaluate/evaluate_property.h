/* Properties: what the files that work them out share.  */
#ifndef LANGUAGE_EVALUATE_EVALUATE_PROPERTY_H
#define LANGUAGE_EVALUATE_EVALUATE_PROPERTY_H

#include "language/evaluate/evaluation.h"

/* One property asked of something at a state.  */
struct property_question {
  enum property property;
  const struct node *node;                 /* the whole `property of thing` */
  const struct composition *gas;
  const struct gas_value *value;           /* the gas as stated, if it is one; or null */
  double T, p, Z;
  bool ideal;
  const struct state *state;               /* as said behind `at`; or null */
};

/* The figure in SI, with the unit it is answered in.  */
bool property_answer (struct evaluation *, const struct property_question *, double si,
                      struct value *) MUST_CHECK;
/* Kind state-missing where T or p is needed and not known.  */
bool property_needs (struct evaluation *, const struct property_question *, bool T, bool p)
  MUST_CHECK;

/* cp, cv, kappa, speed of sound; viscosity; second virial coefficient; flammable limits
   (evaluate_thermal.c).  */
bool property_caloric (struct evaluation *, const struct property_question *, struct value *)
  MUST_CHECK;
bool property_viscosity (struct evaluation *, const struct property_question *, struct value *)
  MUST_CHECK;
bool property_virial (struct evaluation *, const struct property_question *, struct value *)
  MUST_CHECK;
bool property_flammable (struct evaluation *, const struct property_question *, struct value *)
  MUST_CHECK;
/* Volume fraction, volume concentration, mixing factor (unmixed.c).  */
bool property_unmixed (struct evaluation *, const struct property_question *,
                       const struct value *of, struct value *) MUST_CHECK;
/* Hydrocarbon dew point (evaluate_dew.c).  */
bool property_dew_point (struct evaluation *, const struct property_question *, struct value *)
  MUST_CHECK;

#endif
