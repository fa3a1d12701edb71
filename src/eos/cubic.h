/* Fugacity coefficients of the Peng-Robinson equation, for what is worked out of two phases.

   With one-fluid mixing and all k_ij zero, eq. 19 of the paper (D.-Y. Peng, D. B. Robinson, Ind.
   Eng. Chem. Fundam. 15 (1976) 59-64) knows the composition of a phase only by its b = sum x_i b_i
   and root_a = sum x_i sqrt(a_i), and is linear in those of component i:

     ln phi_i = free + by_b b_i + by_root_a sqrt(a_i)

   (M. L. Michelsen, Ind. Eng. Chem. Process Des. Dev. 25 (1986) 184-188).  SI units.            */
#ifndef EOS_CUBIC_H
#define EOS_CUBIC_H

#include <stdbool.h>
#include "support/check.h"

struct species;

/* One component: b in m3/mol; sqrt(a(T)) = |at_zero - slope sqrt(T)| in (J m3)^(1/2)/mol.  */
struct cubic_pure { double b, at_zero, slope; };
struct cubic_pure cubic_pure_of (const struct species *);
double cubic_root_a (const struct cubic_pure *, double T);

struct cubic_fluid { double T, p, b, root_a; };

struct cubic_fugacity { double free, by_b, by_root_a, Z; };

/* At the gas root of a fluid (false where it has none), or at its densest one.  */
bool cubic_fugacity_of (const struct cubic_fluid *, bool dense, struct cubic_fugacity *) MUST_CHECK;

#endif
