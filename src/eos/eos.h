/* Equations of state behind one interface.

   An equation is one file and a row of functions over a mixture prepared once for a composition.
   Everything else (Z, volume, density, later enthalpy and speed of sound) is derived here, once,
   from the residual Helmholtz energy and its derivatives by density.  SI units: T in K, p in Pa,
   rho in mol/m3.                                                                                */
#ifndef EOS_EOS_H
#define EOS_EOS_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct composition; struct fault; struct workings;

/* Residual Helmholtz energy a^r/(RT) at T and rho, and rho times its derivatives by rho:
   a1 = rho d(a)/d(rho), a2 = rho^2 d2(a)/d(rho)2.  So Z = 1 + a1.                               */
struct residual { double a, a1, a2; };

struct equation {
  const char *name;                        /* "Peng-Robinson" */
  const char *source;
  /* Does it cover every species?  *LACKING names the first it lacks.  */
  bool (*covers) (const struct composition *, const char **lacking);
  /* What depends on the composition alone, in the arena.  */
  const void *(*prepare) (struct arena *, const struct composition *);
  /* What depends on composition and T: called before `residual` and `roots` for that T, into
     SCRATCH of `scratch_size` bytes given by the caller.                                       */
  size_t scratch_size;
  void (*set_temperature) (const void *mixture, double T, void *scratch);
  struct residual (*residual) (const void *mixture, const void *scratch, double T, double rho);
  /* Density roots at T and p, smallest first; returns how many (1 to 3).  Null: no closed form,
     the common iteration is used.                                                              */
  int (*roots) (const void *mixture, const void *scratch, double T, double p, double rho[3]);
};

extern const struct equation equation_ideal, equation_peng_robinson;

enum gas_model { GAS_MODEL_AUTO, GAS_MODEL_IDEAL, GAS_MODEL_PENG_ROBINSON, GAS_MODEL_GERG_2008,
                 GAS_MODEL_AGA8_DETAIL, GAS_MODEL_COUNT };
const char *gas_model_name (enum gas_model);             /* "auto", "ideal", "Peng-Robinson", ... */
/* The equation of a model; null for auto and for models this version does not compute.  */
const struct equation *gas_model_equation (enum gas_model);

/* The choice for a composition: for auto the best equation that covers it, else the ideal gas
   with *LACKING naming what the better one lacks a constant of.  For a named model its equation;
   kinds model-lacks (facts: model, species), model-absent.                                     */
const struct equation *equation_choose (enum gas_model, const struct composition *,
                                        const char **lacking, struct fault *) MUST_CHECK;

struct eos_state {
  const struct equation *equation;
  double Z;                                /* of the gas root */
  double density;                          /* mol/m3 */
  bool may_condense;                       /* a denser root is the more stable one */
};

/* Z and density of the gas at T and p.  Kinds: range (T or p not positive or not finite),
   state-liquid (only a liquid root), not-converged.                                            */
bool eos_solve (const struct equation *, const struct composition *, double T, double p,
                struct eos_state *, struct fault *) MUST_CHECK;

#endif
