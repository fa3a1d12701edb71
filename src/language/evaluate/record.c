#include "config.h"
#include "language/evaluate/record.h"

#include <math.h>
#include "gas/composition.h"
#include "language/session_private.h"
#include "support/arena.h"

const char *
barometer_source (const struct settings *s)
{
  return s->is_set[SETTING_SITE_PRESSURE] ? "as set"
         : !isnan (s->site_altitude) ? "estimated from the altitude, ISO 2533:1975"
                                     : "standard atmosphere, 10th CGPM (1954), Resolution 4";
}

const char *
family_source (const struct settings *s, enum reference_family family)
{
  static const char *const shipped[FAMILY_COUNT] = {
    [FAMILY_NORMAL] = "DIN 1343:1990", [FAMILY_STANDARD] = "ISO 13443:1996",
    [FAMILY_SCF] = "GPA 2145-16", [FAMILY_SCCM] = "SEMI E12" };
  return s->family[family].set ? "as set" : shipped[family];
}

static bool
has_offset (const struct unit *unit)
{
  return unit->sort == UNIT_POINT && fabs (unit->offset) > 0;
}

void
record_typed (struct evaluation *ev, const struct node *node, double number, double si)
{
  const struct unit *unit = node->unit;
  if (!ev->workings || ev->part) {
    return;                              /* a list tells of its parts itself */
  }
  const bool gauge = unit->sort == UNIT_GAUGE, vacuum = unit->sort == UNIT_VACUUM;
  const struct step_symbol figure = SYMBOL ("a", number, node->unit_text);
  const struct step_symbol f = { "f", unit->factor, NULL, NULL, unit };
  struct step step = { .kind = STEP_FIGURE, .name = node->a ? node->a->text : node->figure,
                       .of = node->unit_text, .formula = "q = a f", .value = si, .in = unit,
                       .source = STEP_TYPED };
  struct step_symbol symbols[] = { figure, f, SYMBOL ("T_0", unit->offset, "K") };
  step.symbols = symbols;
  step.symbol_count = 2;
  if (gauge || vacuum) {
    step.formula = gauge ? "p = p_site + a f" : "p = p_site - a f";
    symbols[2] = (struct step_symbol) CONSTANT (
      "p_site", ev->settings->site_pressure, "Pa", barometer_source (ev->settings));
    step.symbol_count = 3;
  } else if (has_offset (unit)) {
    step.formula = "T = a f + T_0";
    step.symbol_count = 3;
  }
  workings_add (ev->workings, &step);
}

void
record_told (struct evaluation *ev, const struct told *told)
{
  const struct unit *unit = told->unit;
  if (!ev->workings) {
    return;
  }
  struct step step = { .kind = STEP_ANSWER, .name = told->what, .of = told->unit_text,
                       .formula = "a = q", .value = told->value, .unit = told->unit_text,
                       .source = STEP_DEFINITION };
  struct step_symbol symbols[] = { { "q", told->si, NULL, NULL, unit },
                                   { "f", 1, NULL, NULL, unit },
                                   SYMBOL ("T_0", unit ? unit->offset : 0, "K") };
  step.symbols = symbols;
  step.symbol_count = 1;
  if (unit) {
    symbols[1].value = unit->factor;
    step.formula = has_offset (unit) ? "a = (q - T_0)/f" : "a = q/f";
    step.symbol_count = has_offset (unit) ? 3 : 2;
  }
  workings_add (ev->workings, &step);
}

void
record_molar_mass (struct evaluation *ev, const struct composition *gas, const char *of)
{
  RECORD (ev, .name = of ? "molar mass of" : "molar mass", .of = of, .formula = "M = sum(x_i M_i)",
          .value = gas->molar_mass, .unit = "kg/mol", .source = STEP_DEFINITION, .gas = gas);
}

void
record_family (struct evaluation *ev, enum reference_family family, double Vm)
{
  const struct conditions *at = &ev->settings->family[family].at;
  RECORD (ev, .name = "volume of a mole,", .of = reference_family_name (family),
          .formula = "V = R T/p", .value = Vm, .unit = "m3/mol", .source = STEP_IDEAL_GAS,
          STEP_SYMBOLS (STEP_R,
                        CONSTANT ("T", at->T, "K", family_source (ev->settings, family)),
                        CONSTANT ("p", at->p, "Pa", family_source (ev->settings, family))));
}

void
record_barometer (struct evaluation *ev, double p)
{
  RECORD (ev, .name = "site pressure", .formula = "", .value = p, .unit = "Pa",
          .source = barometer_source (ev->settings));
}

void
record_rewetted (struct evaluation *ev, double dry, double y, const struct stream *s)
{
  RECORD (ev, .name = "amount with its water", .formula = "n = n_dry/(1 - y)", .value = s->moles,
          .unit = moles_unit (s->flow), .source = "the dry flow stays",
          STEP_SYMBOLS (SYMBOL ("n_dry", dry, moles_unit (s->flow)),
                        SYMBOL ("y", y, "mol/mol")));
}
