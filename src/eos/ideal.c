/* The ideal gas: p = rho R T, nothing residual.  It covers everything.  */
#include "config.h"
#include "eos/eos.h"

#include "units/constants.h"

struct isotherm { double RT; };

static bool
ideal_covers (const struct composition *composition, const char **lacking)
{
  (void) composition;
  *lacking = NULL;
  return true;
}

static size_t
ideal_mixture_size (size_t count)
{
  (void) count;
  return 0;
}

static void
ideal_prepare (const struct composition *composition, void *mixture)
{
  (void) composition;
  (void) mixture;
}

static void
ideal_set_isotherm (const void *mixture, double T, void *isotherm)
{
  struct isotherm *line = isotherm;

  (void) mixture;
  line->RT = GAS_CONSTANT * T;
}

static struct residual
ideal_residual (const void *isotherm, double rho)
{
  (void) isotherm;
  (void) rho;
  return (struct residual) { 0, 0, 0 };
}

static struct density_roots
ideal_roots (const void *isotherm, double p)
{
  const struct isotherm *line = isotherm;

  return (struct density_roots) { .gas = p / line->RT, .dense = 0 };
}

const struct equation equation_ideal = {
  .name = "ideal",
  .source = "ideal gas law, p V = n R T",
  .gas_constant = GAS_CONSTANT,
  .covers = ideal_covers,
  .mixture_size = ideal_mixture_size,
  .prepare = ideal_prepare,
  .isotherm_size = sizeof (struct isotherm),
  .set_isotherm = ideal_set_isotherm,
  .residual = ideal_residual,
  .densest = NULL,
  .roots = ideal_roots,
};
