/* Sheets: several stated figures of one flow, held against each other.  */
#ifndef LANGUAGE_CHECK_SHEET_H
#define LANGUAGE_CHECK_SHEET_H

#include <stdbool.h>
#include "support/check.h"

struct check_verdict; struct definition; struct evaluation; struct fault; struct figures;
struct readings; struct result; struct session; struct statement;

/* Can every figure of a sheet be held against the others?  The fault of the evaluation says which
   cannot; its notes and assumptions are those of the figures.                                   */
bool sheet_holds (struct evaluation *, const struct statement *sheet) MUST_CHECK;
/* What each figure claims, as typed: dry moles, of a stream its share of those computed, or what is
   computed for a density or molar mass.  SHEET: a statement.                                    */
bool sheet_figures (struct evaluation *, const void *sheet, struct figures *) MUST_CHECK;
/* Fills in the verdict on a sheet: the one set of readings under which most figures agree.  */
bool sheet_check (struct session *, const struct definition *, const struct readings *,
                  struct check_verdict *, struct fault *) MUST_CHECK;

#endif
