/* Components and traces: what their files share.  */
#ifndef LANGUAGE_CONVERT_CONVERT_PART_H
#define LANGUAGE_CONVERT_CONVERT_PART_H

#include "language/convert/convert.h"

/* The gas a component is in, as the target wants it counted.  */
struct host {
  const struct composition *gas;           /* dry if the target says so */
  double share;                            /* mol of the component per mol of that gas */
  struct stream state;                     /* T, p, Z of its own */
};
bool host_of (struct conversion *, struct host *) MUST_CHECK;
/* NOx by mass is NO and NO2 as NO2, unless the target counts it as something else.  */
void count_sum (struct conversion *);
/* Oxygen of a gas, dry.  */
double dry_oxygen (struct conversion *, const struct composition *gas);
/* Mass per mole of what the component is counted as, all species of a peak together, and moles of
   that.                                                                                         */
bool counted_mass (struct conversion *, double *mass_per_mole, double *moles_per_mole) MUST_CHECK;

/* A note if nobody said that the component is there, nor that it is not, as `<5 ppm` does.  */
void note_none_stated (struct conversion *);

/* The basis with the oxygen a figure counts at: that of the target, else that of a trace as it was
   stated.                                                                                       */
const char *conversion_oxygen (struct conversion *, const char *basis);

/* A trace per heat; PER_MASS is what is counted for a mole of it.  */
bool trace_emission (struct conversion *, double per_mass) MUST_CHECK;

/* The share at the reference oxygen.  */
void record_corrected (const struct conversion *, double share, double factor);
/* By mass: M_c is the mass counted for a mole of the component.  */
void record_mass_share (const struct conversion *, const struct composition *, double x,
                        double per_mass, double w);
/* Counted as another: PER of it for each mole.  */
void record_counted (const struct conversion *, double x, double per, const char *unit,
                     double si);
void record_per_volume (const struct conversion *, double x, double per, double Vm, double si);

#endif
