#include "config.h"
#include "language/convert/convert.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/evaluate/wording.h"
#include "property/calorific.h"
#include "support/arena.h"
#include "units/constants.h"

/* ---- Calorific values ---- */

/* A pressure has the dimension of energy per volume: the words of the unit tell them apart.  */
static bool
is_energy (const char *unit)
{
  static const char *const words[] = { "J", "Wh", "cal", "Btu", "BTU", "btu", "therm", "Dth", "erg",
                                       "toe" };
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (strstr (unit, words[i])) {
      return true;
    }
  return false;
}

/* The figure by mole, mass or volume that the unit asks for; -1: none.  */
static int
figure_for (const struct conversion *c, bool *by_volume)
{
  struct dimension d = c->unit->dimension;
  int heat = c->value->heat;
  bool net = heat == CALORIFIC_NET_VOLUME || heat == CALORIFIC_NET_WOBBE;
  bool wobbe = heat == CALORIFIC_WOBBE || heat == CALORIFIC_NET_WOBBE;
  *by_volume = dimension_equal (dimension_times (d, DIMENSION_VOLUME), DIMENSION_ENERGY);
  if (*by_volume) {
    return is_energy (c->unit_text) ? heat : -1;
  }
  if (wobbe || c->unit->family_power != 0) {
    return -1;
  }
  if (dimension_equal (dimension_times (d, DIMENSION_AMOUNT), DIMENSION_ENERGY)) {
    return net ? CALORIFIC_NET_MOLAR : CALORIFIC_GROSS_MOLAR;
  }
  if (dimension_equal (dimension_times (d, DIMENSION_MASS), DIMENSION_ENERGY)) {
    return net ? CALORIFIC_NET_MASS : CALORIFIC_GROSS_MASS;
  }
  return -1;
}

/* Conditions a volume is counted at: those of the unit's family, of the target, of the question;
   left unstated they are those of the Sm3 as set.                                               */
static void
metering (struct conversion *c, struct heat_question *q)
{
  const struct value *v = c->value;
  if (c->unit->family_power == -1) {
    struct conditions at = c->ev->settings->family[c->unit->family].at;
    assume_family (c->ev, c->unit->family);
    q->T = at.T;
    q->p = at.p;
    return;
  }
  q->T = isnan (c->state.T) ? v->T : c->state.T;
  q->p = isnan (c->state.p) ? v->p : c->state.p;
}

bool
convert_calorific (struct conversion *c)
{
  const struct value *v = c->value;
  bool by_volume;
  int figure = figure_for (c, &by_volume);
  if (figure < 0) {
    return conversion_mismatch (c, "a calorific value is told per volume, mass or mole, a Wobbe "
                                "index per volume");
  }
  bool net = v->heat == CALORIFIC_NET_VOLUME || v->heat == CALORIFIC_NET_WOBBE;
  if (c->words & (net ? WORD_GROSS : WORD_NET)) {
    return conversion_mismatch (c, net ? "this figure is net: ask for the gross one by its name"
                                       : "this figure is gross: ask for the net one by its name");
  }
  /* To a molar or mass figure the metering is of no matter.  */
  struct heat_question q = { v->gas->closed, 288.15, STANDARD_ATMOSPHERE, false, v->by };
  struct standing standing = { c->what, NULL, NULL };
  double value;
  if (by_volume) {
    unsigned said = c->words & (WORD_REAL | WORD_IDEAL) ? c->words : v->words;
    q.real = (said & WORD_REAL) != 0
             || (c->ev->settings->real_volumes && !(said & WORD_IDEAL));
    evaluation_touch (c->ev, TOUCH_VOLUMES);
    metering (c, &q);
  }
  if (!heat_figure (c->ev, &q, figure, &value, &standing.basis)) {
    fault_place (c->ev->fault, c->subject_at);
    return false;
  }
  standing.moisture = c->ev->describe ? moisture_word (c->ev, v->gas->closed) : NULL;
  return conversion_add (c, value, &standing);
}

/* ---- Flammable limits ---- */

bool
convert_limits (struct conversion *c)
{
  const struct value *v = c->value;
  struct standing standing = { "lower flammable limit", NULL, v->basis };
  if (c->unit->ratio != RATIO_VOLUME && c->unit->ratio != RATIO_MOLE) {
    return conversion_mismatch (c, "flammable limits are shares of the gas in air: vol%");
  }
  if (!isnan (v->si) && !conversion_add (c, v->si, &standing)) {
    return false;
  }
  standing.what = "upper flammable limit";
  return isnan (v->upper) || conversion_add (c, v->upper, &standing);
}

/* ---- Energy ---- */

bool
neither_gross_nor_net (struct conversion *c)
{
  if (c->words & (WORD_GROSS | WORD_NET)) {
    return false;
  }
  fault_set_at (c->ev->fault, MESSAGE_GROSS_OR_NET, c->at, NULL, NULL);
  fault_hint (c->ev->fault, "in %s gross, in %s net", c->unit_text, c->unit_text);
  return true;
}

bool
convert_energy (struct conversion *c, const struct composition *gas, double moles)
{
  struct standing standing = { c->what, NULL, NULL };
  bool net = (c->words & WORD_NET) != 0;
  double H;
  if (neither_gross_nor_net (c)) {
    return false;
  }
  if (!heat_per_mole (c->ev, gas, net, &H)) {
    fault_place (c->ev->fault, c->subject_at);
    return false;
  }
  if (c->ev->describe) {
    standing.basis = arena_format (c->ev->arena, "%s, combustion %s", net ? "net" : "gross",
                                   temperature_text (c->ev->arena,
                                                     c->ev->settings->combustion, false));
    standing.moisture = moisture_word (c->ev, gas);
  }
  RECORD (c->ev, .name = "energy of", .of = c->what, .formula = "P = n H", .value = moles * H,
          .in = c->unit, .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n", moles, NULL), SYMBOL ("H", H, "J/mol")));
  return conversion_add (c, moles * H, &standing);
}

static void
record_energy (struct evaluation *ev, double n, double H, double energy)
{
  RECORD (ev, .name = "energy", .formula = "P = n H", .value = energy, .unit = "J, or W",
          .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n", n, "mol, or mol/s"), SYMBOL ("H", H, "J/mol")));
}

bool
energy_of (struct conversion *c, const struct value *v, bool net, double *energy)
{
  double H;
  *energy = 0;
  if (v->kind == VALUE_STREAM) {
    bool done = heat_per_mole (c->ev, v->stream.gas, net, &H);
    *energy = done ? v->stream.moles * H : 0;
    if (done) {
      record_energy (c->ev, v->stream.moles, H, *energy);
    }
    return done;
  }
  for (size_t i = 0; i < v->species.count; i++) {
    const struct species *species = v->species.at[i];
    double n = v->species.count == 1
                 ? v->moles : v->stream.moles * composition_fraction (v->stream.gas, species);
    if (!heat_per_mole (c->ev, composition_pure (c->ev->arena, species), net, &H)) {
      return false;
    }
    *energy += n * H;
    record_energy (c->ev, n, H, n * H);
  }
  return true;
}

bool
convert_energy_ratio (struct conversion *c)
{
  const struct value *v = c->value;
  struct standing standing = { c->what, NULL, "by energy" };
  bool net = (c->words & WORD_NET) != 0;
  double top, bottom;
  if (neither_gross_nor_net (c)) {
    return false;
  }
  if (!v->top || !energy_of (c, v->top, net, &top) || !energy_of (c, v->bottom, net, &bottom)) {
    fault_place (c->ev->fault, c->subject_at);
    return v->top ? false : conversion_mismatch (c, "this ratio has no energies");
  }
  if (!(bottom > 0)) {
    return fault_set_at (c->ev->fault, MESSAGE_RANGE, c->subject_at,
                         "nothing can be divided by what does not burn", NULL);
  }
  standing.basis = net ? "by energy, net" : "by energy, gross";
  RECORD (c->ev, .name = "ratio of energies", .formula = "r = P_a/P_b", .value = top / bottom,
          .unit = "J/J", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("P_a", top, NULL), SYMBOL ("P_b", bottom, NULL)));
  return conversion_add (c, top / bottom, &standing);
}
