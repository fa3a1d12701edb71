#include "config.h"
#include "language/session_private.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "language/evaluate/montecarlo.h"
#include "language/evaluate/uncertainty.h"
#include "language/evaluate/wording.h"
#include "language/kept.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/memory.h"
#include "units/constants.h"
#include "units/workings.h"

/* ---- What the usual alternative would do ---- */

/* A small change, to see whether an answer depends on something at all.  */
#define WHETHER_IT_MATTERS 1e-3

struct other { struct settings settings; unsigned overridden; const char *name; };

static void
other_family (const struct assumption *a, struct other *o)
{
  /* The conditions most often meant instead: common practice, no source.  */
  static const struct { double T; const char *name; } usual[FAMILY_COUNT] = {
    [FAMILY_NORMAL] = { 288.15, "at 15 degC" },
    [FAMILY_STANDARD] = { ICE_POINT, "at 0 degC" },
    [FAMILY_SCF] = { 293.15, "at 68 degF" },
    [FAMILY_SCCM] = { 298.15, "at 25 degC" },
  };
  o->settings.family[a->family].at.T = usual[a->family].T;
  o->overridden = touch_family (a->family);
  o->name = usual[a->family].name;
}

/* The settings under which the alternative to an assumption is tried.  */
static bool
other_of (struct arena *arena, const struct assumption *a, struct other *o)
{
  switch (a->alternative) {
  case ALTERNATIVE_NONE:
    return false;
  case ALTERNATIVE_FAMILY:
    other_family (a, o);
    return true;
  case ALTERNATIVE_SHIPPED: {
    struct settings shipped;
    settings_init (&shipped);
    o->settings.family[a->family] = shipped.family[a->family];
    o->overridden = touch_family (a->family);
    o->name = arena_format (arena, "at %s", shipped.family[a->family].text);
    return true;
  }
  case ALTERNATIVE_REAL:
    o->settings.model = GAS_MODEL_AUTO;
    o->overridden = TOUCH_MODEL;
    o->name = "real gas";
    return true;
  case ALTERNATIVE_SITE:
    o->overridden = TOUCH_SITE;
    if (isnan (o->settings.site_altitude)) {
      o->settings.site_pressure = 1e5;
      o->name = "at 1 bar";
    } else {
      o->settings.site_pressure = STANDARD_ATMOSPHERE;
      o->name = "at sea level, 1.01325 bar";
    }
    return true;
  case ALTERNATIVE_IDEAL:
    o->settings.model = GAS_MODEL_IDEAL;
    o->overridden = TOUCH_MODEL;
    o->name = "ideal gas";
    return true;
  case ALTERNATIVE_OXYGEN:
    o->settings.oxygen_in_air = 0.21;
    o->overridden = TOUCH_OXYGEN;
    o->name = "at 21 mol%";
    return true;
  case ALTERNATIVE_BELOW:
    o->settings.below = BELOW_LIMIT;
    o->overridden = TOUCH_BELOW;
    o->name = "at the limit";
    return true;
  case ALTERNATIVE_COMBUSTION:
    o->settings.combustion = 298.15;
    o->overridden = TOUCH_COMBUSTION;
    o->name = "at 25 degC";
    return true;
  case ALTERNATIVE_BAROMETER:
    o->settings.site_pressure *= 1 + WHETHER_IT_MATTERS;
    o->overridden = TOUCH_SITE;
    return true;
  case ALTERNATIVE_VAPOUR:
    o->settings.vapour_factor = 1 - WHETHER_IT_MATTERS;
    o->overridden = TOUCH_VAPOUR;
    return true;
  case ALTERNATIVE_LIQUID:
    o->settings.dew_over_liquid = true;
    o->overridden = TOUCH_VAPOUR;
    o->name = "over supercooled liquid";
    return true;
  case ALTERNATIVE_GAUGE:
    o->settings.bare_is_gauge = true;
    o->overridden = TOUCH_BARE;
    o->name = "as gauge";
    return true;
  }
  return false;
}

/* The largest relative change the alternative makes to any figure; UNSTATED: cannot be told.  */
static double
effect_of (const struct evaluation *ev, const struct retold *told, const struct figures *figures,
           const struct other *other)
{
  struct evaluation again;
  struct fault fault;
  struct figures others = { NULL, 0, 0 };
  double largest = 0;
  fault_init (&fault, ev->arena);
  evaluation_again (&again, ev, &fault);
  again.settings = &other->settings;
  again.overridden = other->overridden;
  if (!told->again (&again, told->with, &others) || others.count != figures->count) {
    return UNSTATED;
  }
  for (size_t i = 0; i < others.count; i++) {
    double base = figures->at[i].value, new = others.at[i].value;
    double effect = fabs (base) > 0 ? new / base - 1 : UNSTATED;
    largest = isnan (largest) || fabs (effect) > fabs (largest) ? effect : largest;
  }
  return largest;
}

/* Below this an alternative does not move the figure in any digit that is shown.  */
#define NO_EFFECT 5e-8

/* Adds what was taken; false if it moves the figures by less than is to be listed.  */
static bool
tell_assumption (struct evaluation *ev, const struct retold *told, const struct figures *figures,
                 const struct assumption *a)
{
  struct other other = { *ev->settings, 0, NULL };
  double effect = UNSTATED;
  if (other_of (ev->arena, a, &other)) {
    effect = effect_of (ev, told, figures, &other);
    if (fabs (effect) < NO_EFFECT) {
      return true;
    }
    if (other.name && fabs (effect) < ev->settings->smallest_effect) {
      return false;
    }
  }
  struct remark *remark = result_remark (ev->result, a->kind, a->fact[0], a->fact[1]);
  remark->fact[2] = a->fact[2];
  remark->fact[3] = a->fact[3];
  remark->alternative = other.name;
  remark->effect = other.name ? effect : UNSTATED;
  return true;
}

/* Where something was below a detection limit: the figures between which each one lies.  */
static void
tell_below (struct evaluation *ev, const struct statement *s, const struct figures *figures)
{
  struct figures ends[2] = { { NULL, 0, 0 }, { NULL, 0, 0 } };
  const char *text = "";
  for (int i = 0; i < 2; i++) {
    struct evaluation again;
    struct fault unheard;
    struct settings settings = *ev->settings;
    settings.below = i == 0 ? BELOW_ZERO : BELOW_LIMIT;
    fault_init (&unheard, ev->arena);
    evaluation_again (&again, ev, &unheard);
    again.settings = &settings;
    again.overridden = TOUCH_BELOW;
    if (!question_again (&again, s, &ends[i]) || ends[i].count != figures->count) {
      return;
    }
  }
  for (size_t i = 0; i < figures->count; i++) {
    double zero = ends[0].at[i].value, limit = ends[1].at[i].value;
    if (fabs (limit - zero) > NO_EFFECT * fabs (figures->at[i].value)) {
      text = arena_format (ev->arena, "%s%s%s to %s %s", text, *text ? ", " : "",
                           figure_text (ev->arena, zero), figure_text (ev->arena, limit),
                           figures->at[i].unit_text);
    }
  }
  if (*text) {
    result_remark (ev->result, MESSAGE_NOTE_BELOW_RANGE, text, NULL);
  }
}

/* ---- The answer ---- */

static struct answer *
add_answers (struct result *result, const struct figures *figures)
{
  struct answer *first = NULL;
  for (size_t i = 0; i < figures->count; i++) {
    const struct figure *f = &figures->at[i];
    struct answer *a = result_answer (result);
    a->what = f->what;
    a->label = f->label;
    a->named = f->named;
    a->value = f->value;
    a->unit = f->unit_text;
    a->moisture = f->moisture;
    a->basis = f->basis;
    first = first ? first : a;
  }
  return first;
}

static bool
add_uncertainties (const struct evaluation *ev, const struct statement *s,
                   const struct figures *figures, struct answer *answers)
{
  const struct budget **budgets = uncertainty_budgets (ev, s, figures);
  if (!budgets) {
    return false;
  }
  size_t i = 0;
  for (struct answer *a = answers; a && i < figures->count; a = a->next, i++) {
    a->budget = budgets[i];
    a->coverage = ev->settings->coverage;
    a->uncertainty = budgets[i] ? budgets[i]->uncertainty : UNSTATED;
  }
  return s->trials == 0 || montecarlo_answers (ev, s, figures, budgets);
}

static void
caution_value (struct evaluation *ev, const struct statement *s, const struct value *value)
{
  const struct node *made = tree_new_gas (s->value);
  const struct composition *gas = NULL;
  if (value->kind == VALUE_STREAM || (value->kind == VALUE_PART && value->of_stream)) {
    gas = value->stream.gas;
  } else if (value->kind == VALUE_GAS || value->kind == VALUE_PART) {
    gas = value->gas->closed;
  }
  /* A sum of components makes no gas.  */
  bool sum_of_parts = value->kind == VALUE_PART && made == s->value;
  if (made && gas && !sum_of_parts) {
    caution_gas (ev->session, ev->result, gas, node_text (ev->arena, s, made));
  }
}

/* `that` is what the last question asked about.  */
static void
keep_subject (struct session *session, const char *subject)
{
  size_t n = strlen (subject);
  if (n + 1 > session->last_room) {
    session->last_room = 2 * (n + 1);
    session->last_subject = memory_resize (session->last_subject, session->last_room, 1);
  }
  memcpy (session->last_subject, subject, n + 1);
  session->last_length = n;
}

static bool
asks_for_that (const struct node *node)
{
  return node && (node->kind == NODE_THAT || asks_for_that (node->a) || asks_for_that (node->b));
}

static bool
ask_again (struct evaluation *again, const void *statement, struct figures *figures)
{
  return question_again (again, statement, figures);
}

void
question_tell_taken (struct evaluation *ev, const struct statement *s,
                     const struct figures *figures)
{
  retold_taken (ev, &(struct retold) { ask_again, s }, figures);
}

void
retold_taken (struct evaluation *ev, const struct retold *told, const struct figures *figures)
{
  size_t hidden = 0;
  for (size_t i = 0; i < ev->assumption_count; i++) {
    hidden += !tell_assumption (ev, told, figures, &ev->assumptions[i]);
  }
  if (hidden > 0) {
    result_remark (ev->result, MESSAGE_NOTE_EFFECTS_HIDDEN,
                   arena_format (ev->arena, "%zu", hidden),
                   figure_text (ev->arena, 100 * ev->settings->smallest_effect));
  }
  result_sort_taken (ev->result);
}

/* An answer that says how sure it is says so too where what was taken could move it further: all
   usual alternatives at once, in the worst way.                                                 */
static void
tell_total_shift (struct evaluation *ev, const struct answer *answers)
{
  double total = 0, least = (double) INFINITY;
  for (const struct remark *r = ev->result->taken; r; r = r->next) {
    total += r->alternative && !isnan (r->effect) ? fabs (r->effect) : 0;
  }
  for (const struct answer *a = answers; a; a = a->next) {
    if (a->uncertainty > 0 && fabs (a->value) > 0) {
      least = fmin (least, a->uncertainty / fabs (a->value));
    }
  }
  if (total > least) {
    result_remark (ev->result, MESSAGE_NOTE_TOTAL_SHIFT, rough_text (ev->arena, 100 * total),
                   rough_text (ev->arena, 100 * least));
  }
}

bool
question_answer (struct evaluation *ev, const struct statement *s)
{
  struct value value;
  struct figures figures = { NULL, 0, 0 };
  struct result *result = ev->result;
  ev->workings = ARENA_NEW (ev->arena, struct workings);
  workings_init (ev->workings, ev->arena);
  if (!question_figures (ev, s, &value, &figures)) {
    return false;
  }
  struct answer *answers = add_answers (result, &figures);
  if (!add_uncertainties (ev, s, &figures, answers)) {
    return false;
  }
  question_tell_taken (ev, s, &figures);
  tell_total_shift (ev, answers);
  if (ev->touched & TOUCH_BELOW) {
    tell_below (ev, s, &figures);
  }
  caution_value (ev, s, &value);
  for (size_t i = 0; i < ev->used_count; i++) {
    definition_tell (ev->session, ev->used[i], false, result);
    file_tell_changes (ev->session, ev->used[i], result);
  }
  kept_add (ev->session, &(struct asked) { ev, s, &value, answers, figures.count }, result);
  return true;
}

bool
ask (struct session *session, const struct statement *s, struct result *result,
     struct fault *fault)
{
  struct evaluation ev;
  evaluation_init (&ev, session, result, fault);
  if (!question_answer (&ev, s)) {
    return false;
  }
  if (!asks_for_that (s->value)) {
    keep_subject (session, node_text (ev.arena, s, s->value));
  }
  return true;
}
