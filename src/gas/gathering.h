/* Parts while a composition, an analysis or a stream is being put together.

   Private to the layers that compute with parts.  Same species are added together; the order is
   that of the first mention.  Memory is of the arena given.                                     */
#ifndef GAS_GATHERING_H
#define GAS_GATHERING_H

#include <stddef.h>
#include "gas/analysis.h"
#include "gas/composition.h"
#include "support/check.h"

struct arena; struct species;

struct gathering { struct part *parts; size_t count; };

/* Empty, with room for ROOM species.  */
struct gathering gathering_start (struct arena *, size_t room) MUST_CHECK;
void gathering_add (struct gathering *, const struct species *, double amount);
/* The parts of an analysis, every amount times FACTOR, with room for one more.  */
struct gathering gathering_of_analysis (struct arena *, const struct analysis *,
                                        double factor) MUST_CHECK;
const struct analysis *gathering_analysis (struct arena *, const struct gathering *, enum whole,
                                           bool dry) MUST_CHECK;

/* Where a species stands among N parts, or N.  */
size_t parts_find (size_t n, const struct part parts[], const struct species *);
/* Sum of the amounts.  */
double parts_total (size_t n, const struct part parts[]);

/* AMOUNT mol of a species of an analysis, in the measure of its whole: kg for WHOLE_MASS.  */
double analysis_measure (const struct analysis *, const struct species *, double amount);
/* Sum of all parts in that measure; for WHOLE_NONE in mol.  */
double analysis_sum (const struct analysis *);
/* A total of N parts nearer to 1 than this is 1 but for rounding.  */
double analysis_rounding (size_t n);
/* 1/TOTAL, exactly 1 where only rounding parts them, so that closing twice changes nothing.  */
double analysis_closing_factor (size_t n, double total);

#endif
