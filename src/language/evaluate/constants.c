/* Figures of tables and equations as sources of uncertainty: `set constants uncertain`.  */
#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include "eos/eos.h"
#include "gas/composition.h"
#include "language/session_private.h"
#include "property/calorific.h"
#include "support/arena.h"
#include "units/constants.h"

/* What each kind is called, and the unit its uncertainty is told in.  */
static const struct { const char *text, *unit; double factor; } doubts[] = {
  [CALORIFIC_DOUBT_HEAT] = { "calorific value", "kJ/mol", 1e-3 },
  [CALORIFIC_DOUBT_SUMMATION] = { "summation factor", "", 1 },
  [CALORIFIC_DOUBT_ATOM] = { "atomic weight", "g/mol", 1e3 },
  [CALORIFIC_DOUBT_R] = { "gas constant", "J/(mol*K)", 1 },
  [CALORIFIC_DOUBT_AIR] = { "molar mass of dry air", "g/mol", 1e3 },
  [CALORIFIC_DOUBT_AIR_Z] = { "Z of dry air", "", 1 },
  [CALORIFIC_DOUBT_WATER] = { "heat of vaporisation of water", "kJ/mol", 1e-3 },
};

static const char *
doubt_text (struct arena *arena, const struct calorific_doubt *doubt)
{
  const char *text = doubts[doubt->kind].text;
  return doubt->of ? arena_format (arena, "%s of %s", text, doubt->of) : text;
}

static double
table_moved (void *with, const struct calorific_doubt *doubt)
{
  struct evaluation *ev = with;
  if (ev->describe) {
    evaluation_source (ev, &(struct source) {
        .what = doubt->what, .text = doubt_text (ev->arena, doubt),
        .u = doubt->u * doubts[doubt->kind].factor, .unit = doubts[doubt->kind].unit,
        .from = calorific_edition_name (CALORIFIC_2016) });
  }
  return evaluation_shift (ev, doubt->what);
}

struct calorific_moves
constants_moves (struct evaluation *ev)
{
  bool uncertain = ev->settings->constants_uncertain;
  return (struct calorific_moves) { uncertain ? table_moved : NULL, ev };
}

double
constants_molar_mass (struct evaluation *ev, const struct composition *gas)
{
  if (!ev->settings->constants_uncertain || !heat_tables (ev)) {
    return gas->molar_mass;
  }
  struct calorific_moves moves = constants_moves (ev);
  return gas->molar_mass
         + calorific_weights_move (ev->session->calorific, CALORIFIC_2016, gas, &moves);
}

/* An expanded uncertainty with k = 2 is published: half of it is the standard one.  */
double
constants_density (struct evaluation *ev, const struct eos_state *state)
{
  if (!ev->settings->constants_uncertain || !isfinite (state->uncertainty)) {
    return 1;
  }
  double u = 0.5 * state->uncertainty;
  if (ev->describe) {
    evaluation_source (ev, &(struct source) {
        .what = state->equation, .u = 100 * u, .unit = "%", .from = state->equation->source,
        .text = arena_format (ev->arena, "density by %s", state->equation->name) });
  }
  return 1 + evaluation_shift (ev, state->equation) * u;
}
