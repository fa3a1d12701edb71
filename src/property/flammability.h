/* Between which shares a gas burns in air, and how much oxygen it needs.

   Le Chatelier's rule on the published limits of the pure gases, near 20 degC and 101 kPa.
   Information, not a basis of design: hotter gas, higher pressure, enriched air and strong igniters
   widen the range.  What burns without air (C2H2, ethylene oxide) has 1 as its upper limit.     */
#ifndef PROPERTY_FLAMMABILITY_H
#define PROPERTY_FLAMMABILITY_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct composition; struct fault; struct species; struct workings;

/* Limits a user states in place of the table's, mol/mol in air; NAN: that of the table.  */
struct flammable_limits { const struct species *species; double lower, upper; };

enum flammable_kind {
  FLAMMABLE_NOTHING,       /* no part of it burns */
  FLAMMABLE_TOO_THIN,      /* it holds less fuel than the lower limit of its fuels: in no proportion
                              with air does it reach that */
  FLAMMABLE_BETWEEN        /* the limits are those given */
};

struct flammability {
  enum flammable_kind kind;
  double lower, upper;     /* mol of the gas in a mol of its mixture with air; NAN: none.  UPPER is
                              NAN too where a fuel has no published one */
  double fuel_lower, fuel_upper;           /* the same of the fuels by themselves */
  double fuel;             /* mol of fuel in a mol of the gas */
  bool upper_is_bound;     /* the gas holds inert parts: they narrow the range from above, so that
                              the true upper limit is below UPPER */
  bool burns_as_it_is;     /* with the oxygen it has itself it lies between the limits */
  bool enriched;           /* its oxygen is more than air's, limits in air do not hold */
  double least_oxygen;     /* mol/mol of oxygen below which the fuels do not burn, estimated; NAN:
                              NO_ESTIMATE has other elements than C, H, N, O and S */
  const struct species *no_estimate;
  const struct species *oxidiser;          /* the same: the largest oxidiser beside O2, or null */
  const struct species *pyrophoric;        /* the largest part that lights by itself, or null */
  const struct species *unknown;           /* the largest part left out, because it may burn but
                                              has no published limit; or null */
  double unknown_share;    /* mol/mol of all such parts */
};

/* Lower limit: H. Le Chatelier, Annales des Mines (8) 19 (1891) 388, 1/L = sum y_i/L_i over the
   fuels alone; upper limit the same.  Inert parts count as air does: limits of the gas are those
   of its fuels over its share of fuel.  Least oxygen: lower limit of the fuels times the oxygen
   they burn with (common practice; most fuels in truth need more).  N STATED
   limits replace those of the table.  Kind model-lacks where parts that may burn but have no
   published limit are more than a hundredth of what burns.                                      */
bool flammability_of (const struct composition *, const struct flammable_limits stated[], size_t n,
                      struct flammability *, struct workings *, struct fault *) MUST_CHECK;

/* The lower limit of one component: as stated, else the table's; NAN: none.  */
double flammability_lower (const struct species *, const struct flammable_limits stated[],
                           size_t n);

#endif
