/* Holding one stated figure against what is computed: the beginning of every check.  */
#ifndef LANGUAGE_CHECK_HOLD_H
#define LANGUAGE_CHECK_HOLD_H

#include "language/check/trial.h"
#include "support/check.h"

struct fault; struct node; struct result; struct statement;

/* Prepares CHECK: S has the computed side and what it is to be told in, CLAIM is the stated
   figure.  Works both sides out as typed, what was left open at the usual conditions, and puts the
   computed figure into RESULT with all there is to say of it (null: nowhere).  Release it, even
   when it failed.                                                                               */
bool check_hold (struct check *, struct session *, const struct statement *s,
                 const struct node *claim, struct result *, struct fault *) MUST_CHECK;
/* How far the claim's quantity may be off, in its unit: two standard uncertainties where it has ±,
   else its rounding.                                                                            */
bool claim_limit (struct check *, const struct node *quantity, struct fault *, double *limit)
  MUST_CHECK;
void check_release (struct check *);

#endif
