/* Chemical formulas and the atomic weights behind them (private to this layer).

   A formula is element symbols with whole numbers behind them and round or square brackets:
   C7H14O2, Ni(CO)4, [Fe(CN)6].  D is deuterium.  No charges, no fractions, no leading number.   */
#ifndef GAS_FORMULA_H
#define GAS_FORMULA_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct fault;

enum { FORMULA_ELEMENTS = 16,            /* different ones in a formula */
       FORMULA_ROOM = 136 };             /* of a formula written in Hill order */

struct atom_count { char symbol[3]; unsigned count; };
struct atoms { size_t size; struct atom_count of[FORMULA_ELEMENTS]; };

/* The atoms of the formula in the N bytes at TEXT, each element once, in the order of their first
   appearance.  False if it is no formula by its form; whether the elements exist is not asked.  */
bool atoms_read (const char *text, size_t n, struct atoms *) MUST_CHECK;

/* 0 if there is none.  */
unsigned atoms_of (const struct atoms *, const char *symbol);

/* In Hill order (E. A. Hill, J. Am. Chem. Soc. 22 (1900) 478): carbon, hydrogen, then the others
   by alphabet; without carbon all by alphabet.                                                  */
void atoms_write (const struct atoms *, char out[FORMULA_ROOM]);

/* Standard atomic weights (g/mol) by symbol, from tables/elements.tsv.  */
enum { ELEMENT_SLOTS = 26 * 27 };
struct elements { double weight[ELEMENT_SLOTS]; };       /* 0: no such element */

bool elements_read (struct arena *, const char *directory, struct elements *,
                    struct fault *) MUST_CHECK;
/* kg/mol; false if an element is not in the table.  */
bool atoms_molar_mass (const struct elements *, const struct atoms *, double *) MUST_CHECK;

#endif
