#include "config.h"
#include "eos/eos.h"

#include <assert.h>
#include <float.h>
#include <math.h>
#include <stddef.h>

#include "gas/composition.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"

struct eos_mixture {
  const struct equation *equation;
  const char *name;                        /* what a fault calls it */
  const void *prepared;
  double lumped;
};

/* Choice.  */

static const struct {
  const char *name;
  const struct equation *equation;
} models[GAS_MODEL_COUNT] = {
  [GAS_MODEL_AUTO] = { "auto", NULL },
  [GAS_MODEL_IDEAL] = { "ideal", &equation_ideal },
  [GAS_MODEL_PENG_ROBINSON] = { "Peng-Robinson", &equation_peng_robinson },
  [GAS_MODEL_GERG_2008] = { "GERG-2008", &equation_gerg_2008 },
  [GAS_MODEL_AGA8_DETAIL] = { "AGA8-DETAIL", &equation_aga8_detail },
};

const char *
gas_model_name (enum gas_model model)
{
  assert (model < GAS_MODEL_COUNT);
  return models[model].name;
}

const struct equation *
gas_model_equation (enum gas_model model)
{
  assert (model < GAS_MODEL_COUNT);
  return models[model].equation;
}

/* What auto tries, best first; the last covers everything.  */
static const struct equation *const by_merit[] = { &equation_peng_robinson, &equation_ideal };

static const struct equation *
best_equation (const struct composition *composition, const char **lacking)
{
  const char *first = NULL;
  size_t i = 0;

  while (!by_merit[i]->covers (composition, lacking)) {
    if (first == NULL) {
      first = *lacking;
    }
    i++;
    assert (i < sizeof by_merit / sizeof by_merit[0]);
  }
  *lacking = first;
  return by_merit[i];
}

const struct equation *
equation_choose (enum gas_model model, const struct composition *composition,
                 const char **lacking, struct fault *fault)
{
  const struct equation *equation = gas_model_equation (model);
  const char *missing;

  if (model == GAS_MODEL_AUTO) {
    return best_equation (composition, lacking);
  }
  if (!equation->covers (composition, &missing)) {
    fault_set (fault, MESSAGE_MODEL_LACKS, gas_model_name (model), missing);
    return NULL;
  }
  *lacking = NULL;
  return equation;
}

const struct equation *
equation_choose_at (enum gas_model model, const struct composition *composition, double T,
                    double p, const char **lacking, struct fault *fault)
{
  if (model == GAS_MODEL_AUTO && equation_gerg_2008.covers (composition, lacking)
      && equation_gerg_2008.range (NULL, T, p) != EOS_RANGE_OUTSIDE) {
    *lacking = NULL;
    return &equation_gerg_2008;
  }
  return equation_choose (model, composition, lacking, fault);
}

/* The common iteration: density roots of an equation that has no closed form.

   f(rho) = p(rho) - p.  The gas root is sought from rho = 0 upward, the dense root from above
   downward, both by Newton's steps, which cannot pass a root as long as the isotherm is curved
   as isotherms are (concave in the gas, convex in the liquid).  Upward steps are held below a
   part of the densest state so that a loop is not jumped over; a falling stretch before the root
   means that there is no root on that side of it.  Once a step has passed a root, the root is
   between the last two points.                                                                 */

enum {
  STEPS_MAXIMAL = 200,                     /* on either way; some ten are usual */
  STEPS_UPWARD = 40                        /* from empty to densest */
};

/* The last step relative to rho: little above rounding, as the step may be a halving.  */
static const double step_small = 1e-13;
/* Roots nearer to each other than this, relative, are one root.  */
static const double roots_apart = 1e-6;

struct search {
  const struct equation *equation;
  const void *isotherm;
  double RT, p;
  int *steps;
};

struct value { double f, slope; };

static struct value
pressure_excess (const struct search *s, double rho)
{
  const struct residual r = s->equation->residual (s->isotherm, rho);

  ++*s->steps;
  return (struct value) { .f = rho * s->RT * (1 + r.a1) - s->p,
                          .slope = s->RT * (1 + 2 * r.a1 + r.a2) };
}

/* f is below 0 at LOW and above at HIGH: Newton's steps, halving where they leave the bracket.  */
static bool
root_between (const struct search *s, double low, double high, double *root)
{
  double rho = low + (high - low) / 2;

  for (int i = 0; i < STEPS_MAXIMAL; i++) {
    const struct value v = pressure_excess (s, rho);
    double next = rho - v.f / v.slope;

    if (v.f < 0) {
      low = rho;
    } else {
      high = rho;
    }
    if (!(next >= low && next <= high)) {
      next = low + (high - low) / 2;
    }
    if (fabs (next - rho) <= step_small * next) {
      *root = next;
      return true;
    }
    rho = next;
  }
  return false;
}

/* *ROOT is 0 if the isotherm falls before it reaches p.  */
static bool
gas_root (const struct search *s, double *root)
{
  const double densest = s->equation->densest (s->isotherm);
  struct value v = pressure_excess (s, 0);
  double rho = 0;

  for (int i = 0; i < STEPS_MAXIMAL && rho < densest; i++) {
    const double step = fmin (-v.f / v.slope, densest / STEPS_UPWARD);
    const double next = rho + step;

    if (v.slope <= 0) {
      *root = 0;
      return true;
    }
    v = pressure_excess (s, next);
    if (v.f > 0) {
      return root_between (s, rho, next, root);
    }
    if (step <= step_small * next) {
      *root = next;
      return true;
    }
    rho = next;
  }
  return false;
}

/* *ROOT is 0 if the isotherm has no falling stretch between GAS and the densest state, or never
   comes down to p beyond it.                                                                   */
static bool
dense_root (const struct search *s, double gas, double *root)
{
  double rho = s->equation->densest (s->isotherm);
  struct value v = pressure_excess (s, rho);

  for (int i = 0; i < STEPS_MAXIMAL; i++) {
    const double step = v.f / v.slope;
    double next = rho - step;
    bool found = step <= step_small * next;

    if (v.slope <= 0 || next <= gas) {
      *root = 0;
      return true;
    }
    v = pressure_excess (s, next);
    if (v.f < 0) {
      if (!root_between (s, next, rho, &next)) {
        return false;
      }
      found = true;
    }
    if (found) {
      *root = next > gas * (1 + roots_apart) ? next : 0;
      return true;
    }
    rho = next;
  }
  return false;
}

static bool
roots_by_iteration (const struct equation *equation, const void *isotherm, double T, double p,
                    struct density_roots *roots)
{
  const struct search s = { equation, isotherm, equation->gas_constant * T, p, &roots->steps };

  roots->steps = 0;
  return gas_root (&s, &roots->gas) && dense_root (&s, roots->gas, &roots->dense);
}

/* Solving.  */

/* Residual Gibbs energy over RT, but for what is the same for all roots of one T and p:
   g/RT = a^r/RT + Z + ln(rho) + ...                                                            */
static double
gibbs_energy (const struct equation *equation, const void *isotherm, double rho)
{
  const struct residual r = equation->residual (isotherm, rho);

  return r.a + 1 + r.a1 + log (rho);
}

static bool
state_positive (double T, double p, struct fault *fault)
{
  if (!(isfinite (T) && T > 0)) {
    return fault_set (fault, MESSAGE_RANGE, "a gas has a temperature above absolute zero", NULL);
  }
  if (!(isfinite (p) && p > 0)) {
    return fault_set (fault, MESSAGE_RANGE, "a gas has an absolute pressure above zero", NULL);
  }
  return true;
}

bool
eos_solve_prepared (const struct eos_mixture *mixture, double T, double p,
                    struct eos_state *state, struct fault *fault)
{
  _Alignas (max_align_t) unsigned char isotherm[EOS_ISOTHERM_SIZE];
  const struct equation *equation = mixture->equation;
  struct density_roots roots;
  double Z;

  assert (equation->isotherm_size <= sizeof isotherm);
  if (!state_positive (T, p, fault)) {
    return false;
  }
  equation->set_isotherm (mixture->prepared, T, isotherm);
  if (equation->roots != NULL) {
    roots = equation->roots (isotherm, p);
  } else if (!roots_by_iteration (equation, isotherm, T, p, &roots)) {
    return fault_set (fault, MESSAGE_NOT_CONVERGED, "the density", NULL);
  }
  if (isnan (roots.gas)) {
    return fault_set (fault, MESSAGE_NOT_CONVERGED, "the density", NULL);
  }
  if (!(roots.gas > 0) && roots.dense > 0) {
    return fault_set (fault, MESSAGE_STATE_LIQUID, mixture->name, NULL);
  }
  Z = p / (roots.gas * equation->gas_constant * T);
  if (!(isnormal (roots.gas) && roots.gas > 0 && isnormal (Z) && Z > 0)) {
    return fault_set (fault, MESSAGE_NOT_FINITE, NULL, NULL);
  }
  state->equation = equation;
  state->Z = Z;
  state->steps = roots.steps;
  state->density = roots.gas;
  state->lumped = mixture->lumped;
  state->range = equation->range != NULL ? equation->range (mixture->prepared, T, p)
                                         : EOS_RANGE_UNSTATED;
  state->uncertainty = equation->uncertainty != NULL
                       ? equation->uncertainty (mixture->prepared, T, p) : (double) NAN;
  state->may_condense = roots.dense > 0
                        && gibbs_energy (equation, isotherm, roots.dense)
                           < gibbs_energy (equation, isotherm, roots.gas);
  return true;
}

static double
density_alone (const struct eos_mixture *mixture, double T, double p)
{
  _Alignas (max_align_t) unsigned char isotherm[EOS_ISOTHERM_SIZE];
  const struct equation *equation = mixture->equation;
  struct density_roots roots;

  if (!(isfinite (T) && T > 0 && isfinite (p) && p > 0)) {
    return (double) NAN;
  }
  equation->set_isotherm (mixture->prepared, T, isotherm);
  if (equation->roots != NULL) {
    return equation->roots (isotherm, p).gas;
  }
  return roots_by_iteration (equation, isotherm, T, p, &roots) ? roots.gas : (double) NAN;
}

void
eos_densities (const struct eos_mixture *mixture, const struct state_list *states, double rho[])
{
  if (mixture->equation->densities != NULL) {
    mixture->equation->densities (mixture->prepared, states, rho);
    return;
  }
  for (size_t i = 0; i < states->count; i++) {
    rho[i] = density_alone (mixture, states->T[i], states->p[i]);
  }
}

bool
eos_caloric (const struct eos_mixture *mixture, double T, double rho, struct caloric *caloric)
{
  if (mixture->equation->caloric == NULL) {
    return false;
  }
  mixture->equation->caloric (mixture->prepared, T, rho, caloric);
  return true;
}

static struct eos_mixture
mixture_in (void *memory, const struct equation *equation,
            const struct composition *composition)
{
  equation->prepare (composition, memory);
  return (struct eos_mixture) {
    .equation = equation,
    .name = composition->count == 1 ? composition->species[0]->key : "the mixture",
    .prepared = memory,
    .lumped = equation->lumped != NULL ? equation->lumped (composition) : 0,
  };
}

const struct eos_mixture *
eos_prepare (struct arena *arena, const struct equation *equation,
             const struct composition *composition)
{
  struct eos_mixture *mixture = ARENA_NEW (arena, struct eos_mixture);

  *mixture = mixture_in (arena_alloc (arena, 1, equation->mixture_size (composition->count)),
                         equation, composition);
  return mixture;
}

/* A mixture of some hundred components fits on the stack; a larger one gets an arena.  */
bool
eos_solve (const struct equation *equation, const struct composition *composition, double T,
           double p, struct eos_state *state, struct fault *fault)
{
  _Alignas (max_align_t) unsigned char memory[4096];
  const size_t size = equation->mixture_size (composition->count);
  struct arena *arena = size > sizeof memory ? arena_create () : NULL;
  void *where = arena != NULL ? arena_alloc (arena, 1, size) : memory;
  const struct eos_mixture mixture = mixture_in (where, equation, composition);
  const bool solved = eos_solve_prepared (&mixture, T, p, state, fault);

  if (arena != NULL) {
    arena_destroy (arena);
  }
  return solved;
}
