/* Equations whose residual Helmholtz energy is a sum of terms

     a^r/(RT) = sum c tau^t delta^d exp(-phi(delta)),   tau = T_r/T,  delta = rho/rho_r,

   with phi none, delta^c or eta (delta - epsilon)^2 + beta (delta - gamma).

   Terms of a mixture that differ by nothing but c share a slot and are added up once for a
   composition.  At a fixed T the slots of one phi and one d fold into one coefficient, so that at
   a density there is one short polynomial and one exponential for each phi.  Only what the
   components at hand need is kept.                                                              */
#ifndef EOS_HELMHOLTZ_H
#define EOS_HELMHOLTZ_H

#include <stdbool.h>
#include <stddef.h>
#include "eos/eos.h"

enum {
  HELMHOLTZ_PARTS = 40,                    /* t is a multiple of 1/40 */
  HELMHOLTZ_WHOLE_LEAST = -13, HELMHOLTZ_WHOLE_MOST = 30,
  HELMHOLTZ_POWERS = 10,                   /* d and c are below this */
  HELMHOLTZ_GROUPS = 15,                   /* different phi of one equation */
  HELMHOLTZ_SLOTS = 160,
  HELMHOLTZ_K1 = 25, HELMHOLTZ_K2 = 9      /* k1 and k2 are below these */
};

/* No root is sought beyond this delta.  */
#define HELMHOLTZ_DENSEST 5.0

/* phi as published, and as it is worked out: exp(-phi) is exp(-delta^power) where power is above 2,
   else  factor exp(-delta/8)^k1 exp(-delta^2/8)^k2, so that most phi share two exponentials.    */
struct helmholtz_exponent {
  int power;
  double eta, epsilon, beta, gamma;
  int k1, k2;
  double factor;
};

/* t = whole + part/HELMHOLTZ_PARTS.  Slots are sorted by exponent, then by d.  */
struct helmholtz_slot { unsigned char exponent, d; signed char whole; unsigned char part; };

struct helmholtz_form {
  const struct helmholtz_exponent *exponents;
  const struct helmholtz_slot *slots;
  size_t slot_count;
  double loop_tau;                         /* below this tau no isotherm has a loop */
};

struct helmholtz_term { double c; struct helmholtz_slot at; };

/* What depends on the composition: terms with c not 0, in the order of the slots.  */
struct helmholtz_mixture {
  const struct helmholtz_form *form;
  double gas_constant;                     /* J/(mol K) */
  double T_r, rho_r;                       /* K, mol/m3 */
  size_t count;
  struct helmholtz_term terms[HELMHOLTZ_SLOTS];
};

/* The terms of one phi at a T: polynomial c[lowest..highest] of delta, the factor of phi in it.  */
struct helmholtz_group {
  const struct helmholtz_exponent *phi;
  int lowest, highest;
  double c[HELMHOLTZ_POWERS];
};

struct helmholtz_isotherm {
  double RT, rho_r, tau;
  bool may_loop;
  int count;
  struct helmholtz_group groups[HELMHOLTZ_GROUPS];
};

/* a^r/(RT) and its derivatives by ln(delta): a1 is delta d/d(delta), a2 the same of a1, and so on.
   Z = 1 + a1,  dp/d(ln rho) = rho RT (Z + a2).                                                  */
struct helmholtz_value { double a, a1, a2, a3; };

/* Keeps of COEFFICIENT, one for each slot of the form, what is not 0.  */
void helmholtz_compact (const double coefficient[], struct helmholtz_mixture *);

void helmholtz_set_isotherm (const struct helmholtz_mixture *, double T,
                             struct helmholtz_isotherm *);
struct helmholtz_value helmholtz_at (const struct helmholtz_isotherm *, double delta);

/* a^r/(RT) and its derivatives by ln(delta) (d) and ln(tau) (t), for caloric properties.  */
struct helmholtz_full { double a, d, dd, t, tt, dt; };
struct helmholtz_full helmholtz_full_at (const struct helmholtz_mixture *, double T, double rho);

/* For struct equation; ISOTHERM is a struct helmholtz_isotherm.  */
struct residual helmholtz_residual (const void *isotherm, double rho);
double helmholtz_densest (const void *isotherm);
struct density_roots helmholtz_roots (const void *isotherm, double p);

/* What to use of the processor at most.  */
enum helmholtz_lanes { HELMHOLTZ_LANES_PLAIN, HELMHOLTZ_LANES_AVX2, HELMHOLTZ_LANES_AVX512 };
/* The gas density of each state: 0 where there is only a liquid, NAN where there is no root, or T
   or p is not positive.                                                                         */
void helmholtz_densities (const struct helmholtz_mixture *, enum helmholtz_lanes,
                          const struct state_list *, double rho[]);

#endif
