#include "config.h"
#include "language/check/search.h"

#include <math.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_roots.h>
#include "result/check_verdict.h"
#include "support/arena.h"
#include "units/constants.h"

/* What would have to be true instead, all else as stated: the temperature, pressure, humidity or
   compressibility of the states, the barometer, or the temperature of reference volumes, that
   brings the computed figure to the claim.  A sign change is looked for on a grid and closed in on
   by Brent's method (Brent 1973, ch. 4; GSL).                                                   */

enum quantity { NEED_T, NEED_P, NEED_HUMIDITY, NEED_Z, NEED_BAROMETER, NEED_FAMILY_T };

struct unknown {
  struct check *check;
  enum quantity quantity;
  int side;
  enum reference_family family;
};

struct looked_for { const char *what, *unit; double least, greatest, factor, offset; };

/* Where each is looked for, in SI, and what it is told in.  The range of states is that gases of
   the trade are met at: common practice, no source.                                             */
static const struct looked_for looked_for[] = {
  [NEED_T] = { "temperature", "degC", 173.15, 1273.15, 1, ICE_POINT },
  [NEED_P] = { "pressure", "bar(a)", 1e3, 1e8, 1e5, 0 },
  [NEED_HUMIDITY] = { "humidity", "%RH", 1e-4, 1, 0.01, 0 },
  [NEED_Z] = { "compressibility Z", "", 0.1, 4, 1, 0 },
  [NEED_BAROMETER] = { "barometer", "bar", 3e4, 1.1e5, 1e5, 0 },
  [NEED_FAMILY_T] = { "temperature", "degC", 223.15, 373.15, 1, ICE_POINT },
};

static bool
figure_with (const struct unknown *u, double x, double *figure)
{
  const struct unit *unit;
  struct check *check = u->check;
  struct side sides[SIDES] = { check->base[0], check->base[1] };
  struct side *side = &sides[u->side];
  side->overridden |= u->quantity == NEED_FAMILY_T ? touch_family (u->family) : TOUCH_TYPED;
  switch (u->quantity) {
  case NEED_T: side->settings.trial.T = x; break;
  case NEED_P: side->settings.trial.p = x; break;
  case NEED_HUMIDITY: side->settings.trial.humidity = x; break;
  case NEED_Z: side->settings.trial.Z = x; break;
  case NEED_BAROMETER:
    for (int i = 0; i < SIDES; i++) {
      sides[i].settings.site_pressure = x;
      sides[i].overridden |= TOUCH_SITE;
    }
    break;
  case NEED_FAMILY_T: side->settings.family[u->family].at.T = x; break;
  }
  bool told_only = u->side == SIDE_STATED && u->quantity != NEED_BAROMETER;
  return check_figure_at (check, sides, told_only ? &check->value : NULL, figure, &unit)
         && isfinite (*figure);
}

/* For the root finder: how far the figure is from the claim; NAN stops it.  */
static double
gap (double x, void *with)
{
  const struct unknown *u = with;
  double figure;
  return figure_with (u, x, &figure) ? figure - u->check->number : UNSTATED;
}

static double
close_in (struct unknown *u, double low, double high)
{
  gsl_function f = { gap, u };
  gsl_root_fsolver *solver = gsl_root_fsolver_alloc (gsl_root_fsolver_brent);
  double x = UNSTATED;
  if (!solver) {
    return x;
  }
  int status = gsl_root_fsolver_set (solver, &f, low, high);
  for (int i = 0; status == GSL_SUCCESS && i < 100; i++) {
    status = gsl_root_fsolver_iterate (solver);
    x = gsl_root_fsolver_root (solver);
    double a = gsl_root_fsolver_x_lower (solver), b = gsl_root_fsolver_x_upper (solver);
    if (status != GSL_SUCCESS || gsl_root_test_interval (a, b, 0, 1e-10) == GSL_SUCCESS) {
      break;
    }
  }
  gsl_root_fsolver_free (solver);
  return status == GSL_SUCCESS ? x : UNSTATED;
}

enum { GRID = 24 };

/* *MOVES: the figure depends on the unknown at all.  NAN: no value in the range does it.  */
static double
solve (struct unknown *u, bool *moves)
{
  const struct looked_for *l = &looked_for[u->quantity];
  double before = UNSTATED, at = UNSTATED, first = UNSTATED, last = UNSTATED;
  for (int i = 0; i <= GRID; i++) {
    double x = l->least * pow (l->greatest / l->least, (double) i / GRID), g = gap (x, u);
    if (isnan (g)) {
      before = UNSTATED;
      continue;
    }
    first = isnan (first) ? g : first;
    last = g;
    if (!isnan (before) && (g < 0) != (before < 0)) {
      *moves = true;
      return close_in (u, at, x);
    }
    before = g;
    at = x;
  }
  *moves = !isnan (first) && fabs (last - first) > 1e-9 * fabs (u->check->number);
  return UNSTATED;
}

static void
add_need (struct unknown *u, const char *of, struct check_need ***end)
{
  const struct looked_for *l = &looked_for[u->quantity];
  struct arena *arena = u->check->arena;
  bool moves = false;
  double x = solve (u, &moves);
  if (!moves) {
    return;
  }
  struct check_need *need = ARENA_NEW (arena, struct check_need);
  *need = (struct check_need) {
    .what = of ? arena_format (arena, "%s of %s", l->what, of) : l->what, .unit = l->unit,
    .value = (x - l->offset) / l->factor, .least = (l->least - l->offset) / l->factor,
    .greatest = (l->greatest - l->offset) / l->factor };
  **end = need;
  *end = &need->next;
}

struct check_need *
search_needs (struct check *check)
{
  struct check_need *first = NULL, **end = &first;
  for (int q = NEED_T; q <= NEED_Z; q++) {
    struct check_need **before = end;
    for (int side = 0; side < SIDES; side++) {
      struct unknown u = { check, (enum quantity) q, side, FAMILY_NONE };
      add_need (&u, end == before ? NULL : "the stated figure", &end);
    }
  }
  if ((check->touched[SIDE_COMPUTED] | check->touched[SIDE_STATED]) & TOUCH_SITE) {
    struct unknown u = { check, NEED_BAROMETER, SIDE_COMPUTED, FAMILY_NONE };
    add_need (&u, NULL, &end);
  }
  for (int side = 0; side < SIDES; side++)
    for (int f = FAMILY_NONE + 1; f < FAMILY_COUNT; f++)
      if (check->touched[side] & touch_family ((enum reference_family) f)) {
        struct unknown u = { check, NEED_FAMILY_T, side, (enum reference_family) f };
        add_need (&u, reference_family_name (u.family), &end);
      }
  return first;
}
