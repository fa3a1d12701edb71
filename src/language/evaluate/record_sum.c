/* Sums, products and ratios.  */
#include "config.h"
#include "language/evaluate/record.h"

#include "language/session_private.h"

/* The SI unit of a figure.  */
static const char *
unit_of (struct evaluation *ev, const struct value *v)
{
  return v->measure.ratio == RATIO_MOLE ? "mol/mol" : v->measure.ratio == RATIO_MASS ? "kg/kg"
         : dimension_text (ev->arena, v->measure.dimension);
}

void
record_sum (struct evaluation *ev, const struct value *made, double a, double b, bool minus)
{
  if (!ev->workings) {
    return;
  }
  const char *unit = unit_of (ev, made);
  RECORD (ev, .name = minus ? "difference" : "sum", .formula = minus ? "c = a - b" : "c = a + b",
          .value = made->si, .unit = unit, .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("a", a, unit), SYMBOL ("b", b, unit)));
}

void
record_restated (struct evaluation *ev, const struct value *made, double before,
                 enum reference_family from, int power)
{
  if (!ev->workings) {
    return;
  }
  const enum reference_family to = made->measure.family;
  const struct conditions *f = &ev->settings->family[from].at, *t = &ev->settings->family[to].at;
  const char *unit = unit_of (ev, made);
  RECORD (ev, .name = "the right side at the conditions of", .of = reference_family_name (to),
          .formula = "q = q_0 (T/p/(T_0/p_0))^k", .value = made->si, .unit = unit,
          .source = STEP_IDEAL_GAS,
          STEP_SYMBOLS (SYMBOL ("q_0", before, unit),
                        CONSTANT ("T", t->T, "K", family_source (ev->settings, to)),
                        CONSTANT ("p", t->p, "Pa", family_source (ev->settings, to)),
                        CONSTANT ("T_0", f->T, "K", family_source (ev->settings, from)),
                        CONSTANT ("p_0", f->p, "Pa", family_source (ev->settings, from)),
                        SYMBOL ("k", power, "1")));
}

/* Moles and mass of a component, or of a mole of gas.  */
struct two_units { const char *moles, *mass; };

static struct two_units
units_of (const struct value *v)
{
  return v->of_stream ? (struct two_units) { moles_unit (v->flow), mass_unit (v->flow) }
                      : (struct two_units) { "mol/mol", "kg/mol" };
}

void
record_part_sum (struct evaluation *ev, const struct value *a, const struct value *b,
                 const struct value *made)
{
  const bool minus = made->moles < a->moles;
  const struct two_units unit = units_of (a);
  RECORD (ev, .name = minus ? "difference of amounts" : "sum of amounts",
          .formula = minus ? "n = n_a - n_b" : "n = n_a + n_b", .value = made->moles,
          .unit = unit.moles, .source = "balance of amounts",
          STEP_SYMBOLS (SYMBOL ("n_a", a->moles, unit.moles),
                        SYMBOL ("n_b", b->moles, unit.moles)));
  RECORD (ev, .name = minus ? "difference of masses" : "sum of masses",
          .formula = minus ? "m = m_a - m_b" : "m = m_a + m_b", .value = made->mass,
          .unit = unit.mass, .source = "balance of masses",
          STEP_SYMBOLS (SYMBOL ("m_a", a->mass, unit.mass), SYMBOL ("m_b", b->mass, unit.mass)));
}

void
record_product (struct evaluation *ev, const struct value *a, const struct value *b, double left,
                bool divide)
{
  if (!ev->workings) {
    return;
  }
  struct value made = *a;
  made.measure.dimension = divide ? dimension_over (a->measure.dimension, b->measure.dimension)
                                  : dimension_times (a->measure.dimension, b->measure.dimension);
  RECORD (ev, .name = divide ? "quotient" : "product", .formula = divide ? "c = a/b" : "c = a b",
          .value = a->si, .unit = unit_of (ev, &made), .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("a", left, unit_of (ev, a)),
                        SYMBOL ("b", b->si, unit_of (ev, b))));
}

void
record_scaled (struct evaluation *ev, const struct value *before, const struct value *v,
               double factor)
{
  if (!ev->workings) {
    return;
  }
  const bool stream = v->kind == VALUE_STREAM, part = v->kind == VALUE_PART;
  const struct two_units unit = units_of (v);
  RECORD (ev, .name = "product", .formula = "c = k a",
          .value = stream ? v->stream.moles : part ? v->moles : v->si,
          .unit = stream ? moles_unit (v->stream.flow) : part ? unit.moles : unit_of (ev, v),
          .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("k", factor, NULL),
                        SYMBOL ("a", stream ? before->stream.moles : part ? before->moles
                                                                          : before->si, NULL)));
  if (part) {
    RECORD (ev, .name = "product, mass", .formula = "c = k a", .value = v->mass, .unit = unit.mass,
            .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("k", factor, NULL), SYMBOL ("a", before->mass, unit.mass)));
  }
}

void
record_ratio (struct evaluation *ev, const struct value *ratio, const double top[2],
              const double bottom[2], bool flow)
{
  RECORD (ev, .name = "ratio of amounts", .formula = "r = n_a/n_b", .value = ratio->moles,
          .unit = "mol/mol", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("n_a", top[0], moles_unit (flow)),
                        SYMBOL ("n_b", bottom[0], moles_unit (flow))));
  RECORD (ev, .name = "ratio of masses", .formula = "r = m_a/m_b", .value = ratio->mass,
          .unit = "kg/kg", .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("m_a", top[1], mass_unit (flow)),
                        SYMBOL ("m_b", bottom[1], mass_unit (flow))));
}

void
record_function (struct evaluation *ev, const char *name, const char *formula, double x,
                 double value)
{
  RECORD (ev, .name = name, .formula = formula, .value = value, .unit = "1",
          .source = STEP_DEFINITION, STEP_SYMBOLS (SYMBOL ("a", x, "1")));
}
