/* Formulas of steps (units/workings.h) with their figures put in.  */
#ifndef REPORT_FORMULA_H
#define REPORT_FORMULA_H

#include <stdbool.h>
#include <stddef.h>

struct step; struct text;

/* Writes a figure.  */
typedef void formula_number (struct text *, double value, const void *with);

struct formula_style { formula_number *number; const void *with; };

/* The right side of a step's formula with its figures: "8.31446 * 273.15/101325".  Blanks that
   multiply become " * ", sums are written out, negative figures stand in brackets, a symbol
   without a figure stays.  TERM is the term whose figures stand for symbols in _i, outside of
   sums; any number where there are none.  A formula that is solved: both sides.                 */
void formula_figures (struct text *, const struct step *, size_t term,
                      const struct formula_style *);
/* Does the formula give a figure for every term?  */
bool formula_is_for_terms (const struct step *);
/* The column its left side names; null if it is none.  */
const struct step_column *formula_result (const struct step *);

#endif
