#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "stream/blend.h"
#include "support/arena.h"
#include "units/unit.h"

static bool
wrong (struct evaluation *ev, enum message kind, const struct node *at, const char *why)
{
  return fault_set_at (ev->fault, kind, at->at, why, NULL);
}

/* ---- Sums of quantities ---- */

/* A point on a scale (20 degC, 7 bar(g), 1 bar(a)) against a difference (5 K, 1 bar).  */
static bool
is_point (const struct value *v)
{
  return v->measure.sort == UNIT_POINT || v->measure.sort == UNIT_ABSOLUTE
         || v->measure.sort == UNIT_GAUGE || v->measure.sort == UNIT_VACUUM;
}

/* K and degR are points alone and differences beside a point.  */
static bool
may_be_difference (const struct value *v)
{
  return v->measure.sort == UNIT_POINT && v->unit && fabs (v->unit->offset) < 1e-300;
}

/* Both counted at reference conditions, but not the same ones: the right in the left's.  */
static void
same_family (struct evaluation *ev, const struct value *a, struct value *b)
{
  enum reference_family from = b->measure.family, to = a->measure.family;
  if (a->measure.family_power == 0 || from == to
      || a->measure.family_power != b->measure.family_power) {
    return;
  }
  struct conditions f = ev->settings->family[from].at, t = ev->settings->family[to].at;
  assume_family (ev, from);
  assume_family (ev, to);
  const double before = b->si;
  b->si *= pow ((t.T / t.p) / (f.T / f.p), a->measure.family_power);
  b->measure.family = to;
  record_restated (ev, b, before, from, a->measure.family_power);
}

/* A bare number beside a share is one of the same kind: e - 1, where e is in mol/mol.  */
static void
lend_ratio (struct value *a, struct value *b)
{
  bool plain = dimension_is_none (a->measure.dimension)
               && dimension_is_none (b->measure.dimension)
               && a->measure.sort == UNIT_SCALE && b->measure.sort == UNIT_SCALE;
  if (plain && a->measure.ratio == RATIO_NONE) {
    a->measure.ratio = b->measure.ratio;
    a->unit = b->unit;
  } else if (plain && b->measure.ratio == RATIO_NONE) {
    b->measure.ratio = a->measure.ratio;
  }
}

static bool
add_quantities (struct evaluation *ev, const struct node *node, struct value *a, struct value *b)
{
  bool minus = node->kind == NODE_SUBTRACT;
  same_family (ev, a, b);
  lend_ratio (a, b);
  if (!measure_equal (a->measure, b->measure)) {
    return wrong (ev, MESSAGE_UNIT_MISMATCH, node->b,
                  "both sides of + and - must measure the same thing");
  }
  bool left = is_point (a), right = is_point (b);
  if (left && right && may_be_difference (b)) {
    right = false;
  } else if (left && right && !minus && may_be_difference (a)) {
    a->unit = b->unit;
    left = false;
  }
  if (left && right) {
    if (!minus || a->measure.sort != b->measure.sort) {
      fault_set_at (ev->fault, MESSAGE_UNIT_MISMATCH, node->b->at,
                    "two points on a scale do not add up", NULL);
      if (a->measure.sort == UNIT_POINT && node->b->figure) {
        fault_hint (ev->fault, "did you mean '%s K'?", node->b->figure);
      } else if (node->b->figure) {
        fault_hint (ev->fault, "the difference is a bare unit: '%s bar'", node->b->figure);
      }
      return false;
    }
    a->measure.sort = a->measure.sort == UNIT_POINT ? UNIT_DIFFERENCE : UNIT_SCALE;
    a->unit = NULL;
  } else if (right && minus) {
    return wrong (ev, MESSAGE_UNIT_MISMATCH, node->b, "a point cannot be taken from a difference");
  } else if (right) {
    a->measure.sort = b->measure.sort;
    a->unit = b->unit;
  }
  /* A vacuum grows when pressure falls; both are absolute here, so a difference just adds.  */
  const double left_si = a->si;
  a->si = minus ? a->si - b->si : a->si + b->si;
  record_sum (ev, a, left_si, b->si, minus);
  if (!a->basis || !b->basis || strcmp (a->basis, b->basis) != 0) {
    a->basis = NULL;                  /* counted differently: the sum is counted as neither */
  }
  if (is_point (a) && a->si < 0) {
    fault_set_at (ev->fault, MESSAGE_RANGE, node->sign_at,
                  a->measure.sort == UNIT_POINT ? "a temperature below absolute zero"
                                                : "an absolute pressure below zero", NULL);
    return false;
  }
  return true;
}

/* ---- Sums of streams and parts ---- */

/* The parts that a remainder would have below zero.  */
static const char *
negative_parts (struct evaluation *ev, const struct stream *a, const struct stream *b)
{
  const char *list = "";
  for (size_t i = 0; i < b->gas->count; i++) {
    const struct species *species = b->gas->species[i];
    double had = a->moles * composition_fraction (a->gas, species);
    if (b->moles * b->gas->fraction[i] > had * (1 + 1e-12)) {
      list = arena_format (ev->arena, "%s%s%s", list, *list ? ", " : "", species->key);
    }
  }
  return list;
}

/* The adiabatic temperature of a blend of two streams whose temperatures are known.  */
static bool
blend_temperature (struct evaluation *ev, const struct node *node, const struct stream *one,
                   const struct stream *other, struct value *blend)
{
  struct blend_temperature t;
  struct fault fault;
  if (isnan (one->T) || isnan (other->T) || !isnan (blend->stream.T)) {
    return true;
  }
  fault_init (&fault, ev->arena);
  if (!stream_blend_temperature (ev->session->properties, one, other, &t, ev->workings, &fault)) {
    if (fault.kind != MESSAGE_MODEL_LACKS) {
      return fault_set_at (ev->fault, fault.kind, node->at, fault.fact[0], fault.fact[1]);
    }
    note (ev, MESSAGE_NOTE_TEMPERATURE_UNSTATED, fault.fact[1], NULL, NULL);
    return true;
  }
  blend->stream.T = t.T;
  if (!isnan (t.T) && ev->result) {
    note (ev, MESSAGE_NOTE_BLEND_TEMPERATURE, temperature_text (ev->arena, t.T, false), NULL, NULL);
  }
  return true;
}

static bool
add_streams (struct evaluation *ev, const struct node *node, struct value *a,
             const struct value *b)
{
  struct stream before = a->stream;
  bool done = node->kind == NODE_ADD
                ? stream_blend (ev->arena, &a->stream, &b->stream, &a->stream, ev->fault)
                : stream_remainder (ev->arena, &a->stream, &b->stream, &a->stream, ev->fault);
  if (!done && ev->fault->kind == MESSAGE_NEGATIVE_PART) {
    /* The layer below names one part; the user wants to know them all.  */
    ev->fault->kind = MESSAGE_NONE;
    return fault_set_at (ev->fault, MESSAGE_RANGE, node->sign_at,
                         arena_format (ev->arena, "more is taken away than there is: %s would be "
                                       "negative", negative_parts (ev, &a->stream, &b->stream)),
                         NULL);
  }
  if (!done) {
    fault_place (ev->fault, node->b->at);
    return false;
  }
  record_blend (ev, &before, &b->stream, &a->stream, node->kind == NODE_ADD ? 1 : -1);
  return node->kind == NODE_SUBTRACT || blend_temperature (ev, node, &before, &b->stream, a);
}

static bool
add_parts (struct evaluation *ev, const struct node *node, struct value *a, const struct value *b)
{
  if (a->of_stream != b->of_stream || (a->of_stream && a->flow != b->flow)) {
    return wrong (ev, MESSAGE_KIND_WRONG, node->b, "a flow and a share do not add up");
  }
  struct value before = *a;
  double sign = node->kind == NODE_SUBTRACT ? -1 : 1;
  a->moles += sign * b->moles;
  a->mass += sign * b->mass;
  record_part_sum (ev, &before, b, a);
  return true;
}

static const char *
kind_word (const struct value *v)
{
  switch (v->kind) {
  case VALUE_QUANTITY: return "a bare figure";
  case VALUE_GAS: return "a gas without an amount";
  case VALUE_STREAM: return "a flow or an amount of a gas";
  case VALUE_PART: return "a component";
  case VALUE_TRACE: return "a concentration";
  case VALUE_SPECIFIC: return "a figure per quantity of gas";
  case VALUE_CALORIFIC: return "a calorific value";
  case VALUE_LIMITS: return "a pair of limits";
  case VALUE_RATIO: return "a ratio";
  }
  return "";
}

static bool
unlike (struct evaluation *ev, const struct node *node, const struct value *a,
        const struct value *b)
{
  fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->b->at,
                arena_format (ev->arena, "%s does not go with %s", kind_word (b), kind_word (a)),
                NULL);
  if (b->kind == VALUE_QUANTITY && a->kind == VALUE_STREAM && node->b->figure && b->unit) {
    fault_hint (ev->fault, "%s %s of what?", node->b->figure, node->b->unit_text);
  } else if (b->kind == VALUE_GAS && node->b->kind == NODE_NAME) {
    fault_hint (ev->fault, "an amount of it: 1 kg/h of %s", node->b->text);
  }
  return false;
}

static bool
add (struct evaluation *ev, const struct node *node, struct value *a, struct value *b)
{
  if (a->kind == VALUE_RATIO && b->kind != VALUE_STREAM && b->kind != VALUE_PART) {
    *a = value_number (a->moles);
  }
  if (b->kind == VALUE_RATIO && a->kind == VALUE_QUANTITY) {
    *b = value_number (b->moles);
  }
  if (a->kind != b->kind) {
    return unlike (ev, node, a, b);
  }
  switch (a->kind) {
  case VALUE_QUANTITY:
    return add_quantities (ev, node, a, b);
  case VALUE_STREAM:
    return add_streams (ev, node, a, b);
  case VALUE_PART:
    return add_parts (ev, node, a, b);
  case VALUE_GAS:
  case VALUE_TRACE:
  case VALUE_SPECIFIC:
  case VALUE_CALORIFIC:
  case VALUE_LIMITS:
  case VALUE_RATIO:
    break;
  }
  return unlike (ev, node, a, b);
}

/* ---- Products ---- */

static bool
is_number (const struct value *v)
{
  return v->kind == VALUE_RATIO
         || (v->kind == VALUE_QUANTITY && dimension_is_none (v->measure.dimension)
             && v->measure.sort != UNIT_HUMIDITY && v->measure.sort != UNIT_OXYGEN);
}

static double
number_of (const struct value *v)
{
  return v->kind == VALUE_RATIO ? v->moles : v->si;
}

/* A flow times a time, an amount over a time: *BY in s or 1/s.  */
static bool
changes_flow (const struct value *v, bool flow, bool divide, double *by)
{
  if (v->kind != VALUE_QUANTITY || !dimension_equal (v->measure.dimension, DIMENSION_TIME)
      || flow == divide) {
    return false;
  }
  *by = divide ? 1 / v->si : v->si;
  return true;
}

/* A stream, part, concentration or gas-related figure times FACTOR.  */
static bool
scale_value (struct evaluation *ev, const struct node *node, struct value *v, double factor)
{
  const struct value before = *v;
  switch (v->kind) {
  case VALUE_STREAM:
    if (factor < 0) {
      return wrong (ev, MESSAGE_RANGE, node, "a flow or an amount below zero");
    }
    v->stream.moles *= factor;
    record_scaled (ev, &before, v, factor);
    return true;
  case VALUE_PART:
    v->moles *= factor;
    v->mass *= factor;
    record_scaled (ev, &before, v, factor);
    return true;
  case VALUE_TRACE:
  case VALUE_SPECIFIC:
    v->si *= factor;
    record_scaled (ev, &before, v, factor);
    return true;
  case VALUE_QUANTITY:
  case VALUE_GAS:
  case VALUE_CALORIFIC:
  case VALUE_LIMITS:
  case VALUE_RATIO:
    break;
  }
  return wrong (ev, MESSAGE_KIND_WRONG, node, "a gas without an amount cannot be multiplied");
}

static bool
is_of_volume (const struct measure *m)
{
  return m->ratio == RATIO_NONE && (dimension_equal (m->dimension, DIMENSION_VOLUME)
                                    || dimension_equal (m->dimension, DIMENSION_VOLUME_FLOW));
}

/* More than this, kg/m3, may be the density of a gas, of which hydrogen has the least: 0.08.  */
#define CONTENTS_MOST 0.05

static bool
is_of_contents (const struct measure *m, double si)
{
  return (dimension_equal (m->dimension, DIMENSION_DENSITY) && si < CONTENTS_MOST)
         || m->ratio == RATIO_MOLE || m->ratio == RATIO_MASS || m->ratio == RATIO_VOLUME;
}

/* 12000 Nm3/h * 50 mg/Nm3: nobody says whether both are dry, or at one oxygen.  */
static void
note_product (struct evaluation *ev, const struct value *a, const struct value *b)
{
  if (ev->result && ((is_of_volume (&a->measure) && is_of_contents (&b->measure, b->si))
                     || (is_of_volume (&b->measure) && is_of_contents (&a->measure, a->si)))) {
    note (ev, MESSAGE_NOTE_PRODUCT, NULL, NULL, NULL);
  }
}

static bool
multiply_quantities (struct evaluation *ev, const struct node *node, struct value *a,
                     const struct value *b)
{
  bool divide = node->kind == NODE_DIVIDE;
  struct measure *m = &a->measure;
  bool a_plain = dimension_is_none (m->dimension) && m->ratio == RATIO_NONE;
  bool b_plain = dimension_is_none (b->measure.dimension) && b->measure.ratio == RATIO_NONE;
  if (m->family_power != 0 && b->measure.family_power != 0
      && m->family != b->measure.family) {
    return wrong (ev, MESSAGE_UNIT_MISMATCH, node->b,
                  "volumes at different reference conditions cannot be multiplied");
  }
  if (divide && fpclassify (b->si) == FP_ZERO) {
    return wrong (ev, MESSAGE_RANGE, node->b, "nothing can be divided by zero");
  }
  if (!divide) {
    note_product (ev, a, b);
  }
  const double left_si = a->si;
  a->si = divide ? a->si / b->si : a->si * b->si;
  record_product (ev, a, b, left_si, divide);
  if (b_plain) {
    return true;
  }
  if (a_plain && !divide) {
    a->unit = b->unit;
    a->words = b->words;
    a->basis = b->basis;
    a->moisture = b->moisture;
    *m = b->measure;
    return true;
  }
  a->unit = NULL;
  a->basis = a->moisture = NULL;
  m->dimension = divide ? dimension_over (m->dimension, b->measure.dimension)
                        : dimension_times (m->dimension, b->measure.dimension);
  m->family = m->family_power != 0 ? m->family : b->measure.family;
  m->family_power += divide ? -b->measure.family_power : b->measure.family_power;
  m->ratio = m->ratio != RATIO_NONE && b->measure.ratio != RATIO_NONE ? RATIO_NONE
             : m->ratio != RATIO_NONE ? m->ratio : b->measure.ratio;
  m->sort = UNIT_SCALE;
  return true;
}

/* A ratio by moles and by mass, of two streams or parts.  */
static bool
divide_likes (struct evaluation *ev, const struct node *node, struct value *a,
              const struct value *b)
{
  double top[2] = { 0, 0 }, bottom[2] = { 0, 0 };
  const struct value *v[2] = { a, b };
  double *to[2] = { top, bottom };
  bool flow[2];
  for (int i = 0; i < 2; i++) {
    bool stream = v[i]->kind == VALUE_STREAM;
    to[i][0] = stream ? v[i]->stream.moles : v[i]->moles;
    to[i][1] = stream ? stream_mass (&v[i]->stream) : v[i]->mass;
    flow[i] = stream ? v[i]->stream.flow : v[i]->of_stream && v[i]->flow;
  }
  if (flow[0] != flow[1]) {
    return wrong (ev, MESSAGE_KIND_WRONG, node->b, "a flow and an amount have no ratio");
  }
  if (fabs (bottom[0]) < 1e-300) {
    return wrong (ev, MESSAGE_RANGE, node->b, "nothing can be divided by zero");
  }
  struct value *kept = ARENA_ARRAY (ev->arena, 2, struct value);
  kept[0] = *a;
  kept[1] = *b;
  *a = value_number (UNSTATED);
  a->kind = VALUE_RATIO;
  a->top = &kept[0];
  a->bottom = &kept[1];
  a->moles = top[0] / bottom[0];
  a->mass = top[1] / bottom[1];
  record_ratio (ev, a, top, bottom, flow[0]);
  return true;
}

static bool
has_flow (const struct value *v)
{
  return v->kind == VALUE_STREAM || v->kind == VALUE_PART;
}

static bool
multiply (struct evaluation *ev, const struct node *node, struct value *a, struct value *b)
{
  bool divide = node->kind == NODE_DIVIDE;
  double by;
  if (divide && is_number (b) && fpclassify (number_of (b)) == FP_ZERO) {
    return wrong (ev, MESSAGE_RANGE, node->b, "nothing can be divided by zero");
  }
  if (divide && has_flow (a) && has_flow (b)) {
    return divide_likes (ev, node, a, b);
  }
  if (a->kind == VALUE_QUANTITY && b->kind == VALUE_QUANTITY) {
    return multiply_quantities (ev, node, a, b);
  }
  if (is_number (a) && is_number (b)) {
    const struct value left = value_number (number_of (a)), right = value_number (number_of (b));
    *a = value_number (divide ? left.si / right.si : left.si * right.si);
    record_product (ev, a, &right, left.si, divide);
    return true;
  }
  if (is_number (b)) {
    return scale_value (ev, node->a, a, divide ? 1 / number_of (b) : number_of (b));
  }
  if (!divide && is_number (a)) {
    double factor = number_of (a);
    *a = *b;
    return scale_value (ev, node->b, a, factor);
  }
  bool flow = a->kind == VALUE_STREAM ? a->stream.flow : a->flow;
  if (has_flow (a) && changes_flow (b, flow, divide, &by)) {
    if (a->kind == VALUE_STREAM) {
      a->stream.flow = !flow;
    } else {
      a->flow = !flow;
    }
    a->unit = NULL;
    return scale_value (ev, node->a, a, by);
  }
  return unlike (ev, node, a, b);
}

/* ---- Functions ---- */

static bool
function (struct evaluation *ev, const struct node *node, struct value *out)
{
  struct value v;
  if (!evaluate (ev, node->a, NULL, &v)) {
    return false;
  }
  if (node->kind == NODE_NEGATE) {
    if (v.kind == VALUE_QUANTITY && !is_point (&v)) {
      record_function (ev, "the other sign", "b = -a", v.si, -v.si);
      v.si = -v.si;
      *out = v;
      return true;
    }
    return wrong (ev, MESSAGE_KIND_WRONG, node->a, "only a number or a difference has a sign");
  }
  if (!is_number (&v)) {
    return wrong (ev, MESSAGE_KIND_WRONG, node->a, "sqrt, ln and exp take numbers and ratios");
  }
  double x = number_of (&v);
  if ((node->kind == NODE_SQRT && x < 0) || (node->kind == NODE_LN && x <= 0)) {
    return wrong (ev, MESSAGE_RANGE, node->a,
                  node->kind == NODE_SQRT ? "there is no square root of a figure below zero"
                                          : "a logarithm is that of a figure above zero");
  }
  *out = value_number (node->kind == NODE_SQRT ? sqrt (x) : node->kind == NODE_LN ? log (x)
                                                                                 : exp (x));
  record_function (ev, node->kind == NODE_SQRT ? "square root" : node->kind == NODE_LN
                       ? "natural logarithm" : "exponential",
                   node->kind == NODE_SQRT ? "b = sqrt(a)" : node->kind == NODE_LN ? "b = ln(a)"
                                                                                 : "b = exp(a)",
                   x, out->si);
  return true;
}

/* `850 kg / h`: a blank made a unit into a division by a name nobody knows.  */
static void
offer_unit (struct evaluation *ev, const struct node *node)
{
  const struct node *right = node->b;
  while (right->kind == NODE_OF) {
    right = right->a;
  }
  if (node->kind != NODE_DIVIDE || ev->fault->kind != MESSAGE_NAME_UNKNOWN
      || right->kind != NODE_NAME || node->a->kind != NODE_QUANTITY || !node->a->unit
      || !node->a->figure) {
    return;
  }
  const char *joined = arena_format (ev->arena, "%s/%s", node->a->unit_text, right->text);
  ev->fault->fact[1] = NULL;            /* no name was meant: none is offered */
  fault_hint (ev->fault, "did you mean '%s %s'? no blanks inside a unit", node->a->figure, joined);
}

/* A calorific value that is calculated with is the one per volume, at the state said or that of
   Sm3: so two have a ratio and a difference.                                                  */
static bool
settle_calorific (struct evaluation *ev, const struct node *node, struct value *v)
{
  if (v->kind != VALUE_CALORIFIC) {
    return true;
  }
  struct heat_question q = { v->gas->closed, v->T, v->p, (v->words & WORD_REAL) != 0, v->by };
  struct value settled = value_number (UNSTATED);
  settled.unit = v->unit;
  settled.measure = measure_of_unit (v->unit);
  if (!heat_figure (ev, &q, v->heat, &settled.si, &settled.basis)) {
    fault_place (ev->fault, node->at);
    return false;
  }
  *v = settled;
  return true;
}

bool
evaluate_sum (struct evaluation *ev, const struct node *node, struct value *out)
{
  if (!node->b) {
    return function (ev, node, out);
  }
  struct value b;
  if (!evaluate (ev, node->a, NULL, out)) {
    return false;
  }
  if (!evaluate (ev, node->b, NULL, &b)) {
    offer_unit (ev, node);
    return false;
  }
  if (!settle_calorific (ev, node->a, out) || !settle_calorific (ev, node->b, &b)) {
    return false;
  }
  return node->kind == NODE_ADD || node->kind == NODE_SUBTRACT ? add (ev, node, out, &b)
                                                               : multiply (ev, node, out, &b);
}
