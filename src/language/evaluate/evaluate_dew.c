#include "config.h"
#include "language/evaluate/evaluate_property.h"

#include <string.h>
#include "eos/dew_point.h"
#include "eos/eos.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

/* Of carbon and hydrogen alone, both of them: the Hill order has C first.  */
static bool
species_is_hydrocarbon (const struct species *s)
{
  return s->formula != NULL && s->formula[0] == 'C'
         && strspn (s->formula, "CH0123456789") == strlen (s->formula)
         && strchr (s->formula, 'H') != NULL;
}

/* What of a liquid is hydrocarbons, and what there is most of.  */
struct liquid { double hydrocarbons, most; const struct species *main; };

static struct liquid
liquid_sum (const struct composition *gas, const double x[])
{
  struct liquid sum = { 0, 0, NULL };
  for (size_t i = 0; i < gas->count; i++) {
    if (species_is_hydrocarbon (gas->species[i])) {
      sum.hydrocarbons += x[i];
    }
    if (x[i] > sum.most) {
      sum.most = x[i];
      sum.main = gas->species[i];
    }
  }
  return sum;
}

/* A first liquid that is mostly something else is no hydrocarbon dew point, nor is a gas without
   hydrocarbons asked.                                                                           */
static bool
dew_of_hydrocarbons (struct evaluation *ev, const struct composition *gas, double p,
                     struct dew_point *dew)
{
  if (!(liquid_sum (gas, gas->fraction).hydrocarbons > 0)) {
    return fault_set (ev->fault, MESSAGE_NO_DEW_POINT, "there is no hydrocarbon in it", NULL);
  }
  if (!dew_point_of (ev->arena, gas, p, dew, ev->fault)) {
    return false;
  }
  struct liquid drop = liquid_sum (gas, dew->liquid);
  if (drop.hydrocarbons >= 0.5) {
    return true;
  }
  const char *what = arena_format (ev->arena, "the first liquid, near %s, is mostly %s",
                                   temperature_text (ev->arena, dew->T, false), drop.main->key);
  fault_set (ev->fault, MESSAGE_NO_DEW_POINT, what, NULL);
  fault_hint (ev->fault, "for the rest of it put ... without %s normalised", drop.main->key);
  return false;
}

/* Where the first drop, with the shares z_i, has the fugacities of the gas.  */
static void
record_dew (struct evaluation *ev, const struct composition *gas, double p,
            const struct dew_point *dew)
{
  if (!ev->workings) {
    return;
  }
  const char **terms = ARENA_ARRAY (ev->workings->arena, gas->count, const char *);
  const char **sources = ARENA_ARRAY (ev->workings->arena, gas->count, const char *);
  for (size_t i = 0; i < gas->count; i++) {
    terms[i] = gas->species[i]->key;
    sources[i] = gas->species[i]->source;
  }
  RECORD (ev, .name = "hydrocarbon dew point", .formula = "f_i(T, p, x) = f_i(T, p, z)",
          .solved = "Newton's steps along the branch of dew points", .value = dew->T, .unit = "K",
          .source = equation_peng_robinson.source, .term_count = (unsigned) gas->count,
          .terms = terms, STEP_SYMBOLS (SYMBOL ("p", p, "Pa")),
          STEP_COLUMNS ({ "x_i", gas->fraction, "mol/mol", NULL, NULL },
                        { "z_i", dew->liquid, "mol/mol", NULL, sources }));
}

bool
property_dew_point (struct evaluation *ev, const struct property_question *q, struct value *out)
{
  const struct species *water = ev->session->water;
  const char *model = equation_peng_robinson.name;
  double y = composition_fraction (q->gas, water);
  struct dew_point dew;
  if (!property_needs (ev, q, false, true)) {
    return false;
  }
  const struct composition *gas
    = y > 0 ? composition_wetted (ev->arena, q->gas, water, 0, ev->fault) : q->gas;
  if (!gas || !dew_of_hydrocarbons (ev, gas, q->p, &dew)) {
    fault_place (ev->fault, q->node->at);
    return false;
  }
  record_dew (ev, gas, q->p, &dew);
  if (!property_answer (ev, q, dew.T, out)) {
    return false;
  }
  if (y > 0) {
    note (ev, MESSAGE_NOTE_DEW_WATER_OUT, share_text (ev->arena, y), NULL, NULL);
  }
  if (gas->count > 1) {
    note (ev, MESSAGE_NOTE_DEW_POINT, model, NULL, NULL);
  }
  if (ev->describe) {
    out->basis = arena_format (ev->arena, "%s, %s", pressure_text (ev->arena, q->p, false), model);
  }
  return true;
}
