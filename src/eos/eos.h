/* Equations of state behind one interface.

   An equation is one file and a row of functions.  Its work comes in three steps: what depends on
   the composition alone (a mixture, prepared once), what depends on T too (an isotherm, set once
   for each T), and what is asked at a density.  Everything else (Z, volume, density, later
   enthalpy and speed of sound) is derived here, once, from the residual Helmholtz energy and its
   derivatives by density.  The memory of all three steps is the caller's; nothing is allocated
   while solving.  SI units: T in K, p in Pa, rho in mol/m3.                                     */
#ifndef EOS_EOS_H
#define EOS_EOS_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct caloric; struct composition; struct fault; struct workings;

/* Residual Helmholtz energy a^r/(RT) at T and rho, and rho times its derivatives by rho:
   a1 = rho d(a)/d(rho), a2 = rho^2 d2(a)/d(rho)2.  So Z = 1 + a1 and
   dp/d(rho) = RT (1 + 2 a1 + a2).                                                               */
struct residual { double a, a1, a2; };

/* The densities at which an isotherm meets a pressure.  `gas` is the smallest and `dense` the
   largest, both on rising branches; 0 where there is none.  An isotherm with a loop (a falling
   stretch) that meets p only beyond the loop has no gas root: the fluid is a liquid.  Without a
   loop its one root is the gas root, however dense.  `steps`: how many the iteration took that
   found them; 0 for a closed form.                                                              */
struct density_roots { double gas, dense; int steps; };

/* Where a state lies in what the authors of an equation state of it.  */
enum eos_range {
  EOS_RANGE_UNSTATED,                      /* they state no limits */
  EOS_RANGE_FULL,                          /* the range of full accuracy */
  EOS_RANGE_EXTENDED,                      /* further out, less accurate */
  EOS_RANGE_OUTSIDE
};

/* Traces an equation of reference lacks are lumped with what it has, as long as they are together
   below this mole fraction: each is taken for the component most like it (eos/cover.h).         */
#define EOS_TRACES 0.005

/* COUNT states, T in K and p in Pa.  */
struct state_list { size_t count; const double *T, *p; };

struct equation {
  const char *name;                        /* "Peng-Robinson" */
  const char *source;
  double gas_constant;                     /* J/(mol K), the one the equation was made with */
  /* Does it cover every species, but for traces it may lump?  *LACKING is the key of the first it
     lacks, or null.                                                                             */
  bool (*covers) (const struct composition *, const char **lacking);
  /* The mole fraction of what is lumped; null: nothing ever is.  */
  double (*lumped) (const struct composition *);
  /* Where a state of MIXTURE lies; null: unstated.  */
  enum eos_range (*range) (const void *mixture, double T, double p);
  /* The relative expanded uncertainty (k = 2) of the density at a state, as published; NAN where
     nothing is.  Null: none is.                                                                 */
  double (*uncertainty) (const void *mixture, double T, double p);
  /* Caloric properties at T and rho; null: the equation has no ideal-gas part.  */
  void (*caloric) (const void *mixture, double T, double rho, struct caloric *);
  /* Fills MIXTURE, mixture_size (count) bytes aligned for any type.  What it needs of the
     composition is copied.                                                                     */
  size_t (*mixture_size) (size_t count);
  void (*prepare) (const struct composition *, void *mixture);
  /* Fills ISOTHERM, isotherm_size bytes (at most EOS_ISOTHERM_SIZE) aligned for any type, which
     may point into MIXTURE.                                                                    */
  size_t isotherm_size;
  void (*set_isotherm) (const void *mixture, double T, void *isotherm);
  struct residual (*residual) (const void *isotherm, double rho);
  /* A density above that of any root in the range of the equation; read only where `roots` is
     null.                                                                                      */
  double (*densest) (const void *isotherm);
  /* The roots in closed form, NAN where they cannot be computed; null: none, they are found by
     the common iteration.                                                                      */
  struct density_roots (*roots) (const void *isotherm, double p);
  /* The gas densities of many states at once, as in eos_densities; null: one after another.  */
  void (*densities) (const void *mixture, const struct state_list *, double rho[]);
};

enum { EOS_ISOTHERM_SIZE = 16384 };

extern const struct equation equation_ideal, equation_peng_robinson, equation_gerg_2008,
                             equation_aga8_detail;

enum gas_model { GAS_MODEL_AUTO, GAS_MODEL_IDEAL, GAS_MODEL_PENG_ROBINSON, GAS_MODEL_GERG_2008,
                 GAS_MODEL_AGA8_DETAIL, GAS_MODEL_COUNT };
const char *gas_model_name (enum gas_model);             /* "auto", "ideal", "Peng-Robinson", ... */
/* The equation of a model; null for auto.  */
const struct equation *gas_model_equation (enum gas_model);

/* The choice for a composition at no state in particular: for auto Peng-Robinson, else the ideal
   gas with *LACKING the key of the first species the better one lacks a constant of (null where
   nothing is lacking).  For a named model its equation; null with the kind model-lacks (facts:
   model, species).                                                                              */
const struct equation *equation_choose (enum gas_model, const struct composition *,
                                        const char **lacking, struct fault *) MUST_CHECK;

/* The same at a state.  For auto it is the first of these that covers the gas and has the state in
   its full or extended range: GERG-2008, Peng-Robinson, the ideal gas.                          */
const struct equation *equation_choose_at (enum gas_model, const struct composition *, double T,
                                           double p, const char **lacking,
                                           struct fault *) MUST_CHECK;

struct eos_state {
  const struct equation *equation;
  double Z;                                /* of the gas root: p/(rho R T), R of the equation */
  double density;                          /* mol/m3 */
  bool may_condense;                       /* a denser root is the more stable one */
  enum eos_range range;
  double lumped;                           /* mole fraction of traces the equation lacks */
  double uncertainty;                      /* of the density, relative, k = 2; NAN: unpublished */
  int steps;                               /* the iteration took; 0: closed form */
};

/* Z and density of the gas at T and p.  Kinds: range (T or p not positive or not finite),
   state-liquid (only a liquid root; fact: the species, or "the mixture"), not-converged,
   not-finite (T or p so far out that the arithmetic ends).  EQUATION must cover the composition.

   may_condense compares the residual Gibbs energies of the two roots at the overall composition.
   That is exact for a pure substance.  For a mixture it only indicates: a mixture that falls
   into parts of other compositions may have one root.                                          */
bool eos_solve (const struct equation *, const struct composition *, double T, double p,
                struct eos_state *, struct fault *) MUST_CHECK;

/* The steps from GAS, T and p to Z and the density of STATE (eos_record.c).  */
void eos_record (struct workings *, const struct composition *gas, double T, double p,
                 const struct eos_state *);

/* The same for many T and p: a composition prepared once, in the arena, which must outlive it.
   The composition is not needed afterwards.                                                    */
struct eos_mixture;
const struct eos_mixture *eos_prepare (struct arena *, const struct equation *,
                                       const struct composition *) MUST_CHECK;
bool eos_solve_prepared (const struct eos_mixture *, double T, double p, struct eos_state *,
                         struct fault *) MUST_CHECK;
/* The gas densities (mol/m3) of many states of a mixture, several at once where the equation and
   the processor can, within 1e-14 of what eos_solve_prepared gives: 0 where there is only a
   liquid, NAN where T or p is not positive or there is no root.                                 */
void eos_densities (const struct eos_mixture *, const struct state_list *, double rho[]);
/* Caloric properties (eos/caloric.h) of a mixture at T and a density above 0, as eos_solve gives
   it.  False where the equation has none.                                                       */
bool eos_caloric (const struct eos_mixture *, double T, double rho, struct caloric *) MUST_CHECK;

#endif
