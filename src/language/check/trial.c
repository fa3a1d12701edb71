#include "config.h"
#include "language/check/trial.h"

#include <math.h>
#include "support/arena.h"
#include "units/constants.h"

/* ---- What a reading changes ---- */

static void
apply_reference (const struct candidate *candidate, struct side *side)
{
  struct family_setting *family = &side->settings.family[candidate->family];
  family->at = candidate->at;
  family->text = candidate->text;
  side->overridden |= touch_family (candidate->family);
}

/* The temperature or pressure a correction left out would have stayed at.  */
static struct conditions
uncorrected (const struct check *check, const struct side *side)
{
  static const enum reference_family order[] = { FAMILY_NONE, FAMILY_SCF, FAMILY_NORMAL,
                                                 FAMILY_STANDARD, FAMILY_SCCM };
  unsigned touched = check->touched[SIDE_COMPUTED] | check->touched[SIDE_STATED];
  for (size_t i = 0; i < sizeof order / sizeof order[0]; i++) {
    struct conditions at = side->settings.family[order[i]].at;
    if ((touched & touch_family (order[i])) && !isnan (at.T)) {
      return at;
    }
  }
  return (struct conditions) { 0, 0, 0 };
}

static void
apply_setting (const struct reading_rule *rule, struct side *side)
{
  struct settings *s = &side->settings;
  switch ((int) rule->change) {
  case READING_BAROMETER:
    s->site_pressure = rule->value;
    side->overridden |= TOUCH_SITE;
    break;
  case READING_Z_IN:
    s->model = GAS_MODEL_AUTO;
    side->overridden |= TOUCH_MODEL;
    break;
  case READING_VOLUMES_REAL:
    s->real_volumes = true;
    side->overridden |= TOUCH_VOLUMES;
    break;
  case READING_COMBUSTION:
    s->combustion = rule->value;
    side->overridden |= TOUCH_COMBUSTION;
    break;
  case READING_CALORIFIC_1995:
  case READING_CALORIFIC_2016:
    s->calorific_1995 = rule->change == READING_CALORIFIC_1995;
    side->overridden |= TOUCH_COMBUSTION;
    break;
  case READING_OXYGEN:
    s->oxygen_in_air = rule->value;
    side->overridden |= TOUCH_OXYGEN;
    break;
  default:
    side->overridden |= TOUCH_TYPED;
    break;
  }
}

static void
apply_trial (const struct check *check, const struct candidate *candidate, struct side *side)
{
  const struct reading_rule *rule = candidate->rule;
  struct trial *trial = &side->settings.trial;
  switch ((int) rule->change) {
  case READING_UNIT: trial->from = rule->from; trial->to = rule->to; break;
  case READING_STATE_T: trial->T = uncorrected (check, side).T; break;
  case READING_STATE_P: trial->p = uncorrected (check, side).p; break;
  case READING_GAUGE: trial->gauge_absolute = true; break;
  case READING_ABSOLUTE: trial->absolute_gauge = true; break;
  case READING_DRY: trial->dry = true; break;
  case READING_WET: trial->wet = true; break;
  case READING_MOISTURE_OUT: trial->no_moisture = true; break;
  case READING_MOISTURE_ATMOSPHERIC: trial->vapour_atmospheric = true; break;
  case READING_Z_OUT: trial->Z_out = true; break;
  case READING_Z_INVERSE: trial->Z_inverse = true; break;
  case READING_HEAT: trial->other_heat = true; break;
  case READING_OXYGEN_WET: trial->wet_oxygen = true; break;
  case READING_OXYGEN_OUT: trial->no_oxygen = true; break;
  case READING_COUNTED: trial->counted_as = candidate->counted; break;
  case READING_ICE: trial->ice_point = rule->value; break;
  default: break;
  }
}

void
candidate_apply (const struct check *check, const struct candidate *candidate,
                 struct side sides[SIDES])
{
  for (int i = 0; i < SIDES; i++) {
    if (!(candidate->sides & 1u << i)) {
      continue;
    }
    if (candidate->own) {
      sides[i].settings.family[FAMILY_NONE].at.T = UNSTATED;
      sides[i].overridden |= touch_family (FAMILY_NONE);
    } else if (candidate->rule->change == READING_REFERENCE) {
      apply_reference (candidate, &sides[i]);
    } else {
      apply_setting (candidate->rule, &sides[i]);
      apply_trial (check, candidate, &sides[i]);
    }
  }
}

/* Changes of one thing, of which only one can hold.  */
static int
slot (const struct candidate *c)
{
  enum reading_change change = c->own ? READING_REFERENCE : c->rule->change;
  switch ((int) change) {
  case READING_REFERENCE: return -1 - (int) c->family;
  case READING_WET: return READING_DRY;
  case READING_MOISTURE_ATMOSPHERIC: return READING_MOISTURE_OUT;
  case READING_Z_INVERSE: case READING_Z_IN: return READING_Z_OUT;
  case READING_CALORIFIC_2016: return READING_CALORIFIC_1995;
  case READING_OXYGEN_OUT:
  case READING_OXYGEN_WET: return READING_OXYGEN;
  case READING_ABSOLUTE: return READING_GAUGE;
  default: return (int) change;
  }
}

bool
candidates_agree (const struct candidate *a, const struct candidate *b)
{
  return !(a->sides & b->sides) || slot (a) != slot (b);
}

/* ---- Both sides worked out ---- */

static void
look_again (const struct check *check, const struct side *side, struct arena *arena,
            struct evaluation *ev, struct fault *fault)
{
  fault_init (fault, arena);
  evaluation_init (ev, check->session, NULL, fault);
  ev->describe = false;
  ev->settings = &side->settings;
  ev->overridden = side->overridden;
}

bool
check_value_at (struct check *check, const struct side *side, struct arena *arena,
                struct value *value)
{
  struct evaluation ev;
  struct fault fault;
  look_again (check, side, arena, &ev, &fault);
  return evaluate (&ev, check->question.value, NULL, value);
}

bool
check_figure_at (struct check *check, const struct side sides[SIDES], const struct value *value,
                 double *figure, const struct unit **unit)
{
  struct evaluation ev;
  struct fault fault;
  struct value own;
  struct figures figures = { NULL, 0, 0 };
  struct subject subject = { "", check->question.value->at };
  arena_reset (check->scratch);
  if (!value) {
    if (!check_value_at (check, &sides[SIDE_COMPUTED], check->scratch, &own)) {
      return false;
    }
    value = &own;
  }
  look_again (check, &sides[SIDE_STATED], check->scratch, &ev, &fault);
  if (!convert_value (&ev, value, check->question.targets, &subject, &figures)
      || figures.count != 1) {
    return false;
  }
  *figure = figures.at[0].value;
  *unit = figures.at[0].unit;
  return true;
}

bool
check_try (struct check *check, const struct candidate *a, const struct candidate *b,
           double *figure, const struct unit **unit)
{
  struct side sides[SIDES] = { check->base[0], check->base[1] };
  const struct value *value = &check->value;
  double factor = 1;
  candidate_apply (check, a, sides);
  if (!a->own && a->rule->change == READING_FACTOR) {
    factor = 1 / a->rule->value;
  }
  if (b) {
    candidate_apply (check, b, sides);
    factor = !b->own && b->rule->change == READING_FACTOR ? factor / b->rule->value : factor;
  }
  unsigned computed = 1u << SIDE_COMPUTED;
  bool of_a = (a->sides & computed) != 0, of_b = b && (b->sides & computed) != 0;
  if (of_a && of_b) {
    value = NULL;
  } else if (of_a || of_b) {
    value = of_a ? (a->has_value ? &a->value : NULL) : (b->has_value ? &b->value : NULL);
  }
  if (!check_figure_at (check, sides, value, figure, unit)) {
    return false;
  }
  *figure *= factor;
  return isfinite (*figure);
}
