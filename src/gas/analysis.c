#include "config.h"
#include "gas/analysis.h"

#include <assert.h>
#include <math.h>
#include <stdio.h>
#include "gas/gathering.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"

double
analysis_total (const struct analysis *a)
{
  return a->whole == WHOLE_NONE ? 1 : analysis_sum (a);
}

/* "101.25 mol%" */
static bool
total_fault (struct fault *fault, enum message kind, double total, bool by_mass)
{
  char percent[40], with_unit[60];
  snprintf (percent, sizeof percent, "%.8g", 100 * total);
  const char *unit = by_mass ? "mass%" : "mol%";
  snprintf (with_unit, sizeof with_unit, "%s %s", percent, unit);
  if (kind == MESSAGE_GAS_OPEN)
    return fault_set (fault, kind, percent, unit);
  return fault_set (fault, kind, with_unit, NULL);
}

/* What kinds of amounts a list of stated parts holds.  Positions are N where there is none.  */
struct survey { size_t rest, first_amount; bool molar_share, mass_share; };

static double
stated_molar_mass (const struct stated_part *part)
{
  return part->species != NULL ? part->species->molar_mass : part->gas->molar_mass;
}

static const char *
stated_name (const struct stated_part *part)
{
  return part->species != NULL ? part->species->key : "the gas in the list";
}

/* True if every part is usable and the bases go together; fills *SURVEY.  */
static bool
survey_parts (size_t n, const struct stated_part parts[], struct survey *survey, size_t *at,
              struct fault *fault)
{
  *survey = (struct survey) { n, n, false, false };
  for (size_t i = 0; i < n; i++) {
    assert ((parts[i].species != NULL) != (parts[i].gas != NULL));
    *at = i;
    if (parts[i].basis == AMOUNT_REST) {
      if (survey->rest < n)
        return fault_set (fault, MESSAGE_REST_TWICE, NULL, NULL);
      survey->rest = i;
      continue;
    }
    if (!isfinite (parts[i].amount))
      return fault_set (fault, MESSAGE_AMOUNT_RANGE, stated_name (&parts[i]), "it is not finite");
    if (parts[i].amount < 0)
      return fault_set (fault, MESSAGE_AMOUNT_RANGE, stated_name (&parts[i]), "it is negative");
    if (parts[i].basis == AMOUNT_MASS_FRACTION)
      survey->mass_share = true;
    else if (parts[i].basis == AMOUNT_MOLES || parts[i].basis == AMOUNT_MASS)
      survey->first_amount = survey->first_amount < n ? survey->first_amount : i;
    else
      survey->molar_share = true;
  }
  bool share = survey->molar_share || survey->mass_share || survey->rest < n;
  if (share && survey->first_amount < n) {
    *at = survey->first_amount;
    return fault_set (fault, MESSAGE_BASIS_MIXED, stated_name (&parts[*at]), NULL);
  }
  return true;
}

/* The equations of a list of shares.  Own derivation.

   Per mole of the whole, of mass M, let the molar shares be x_j and the mass shares w_k.  A mass
   share is w_k M/M_k moles.  With
     X = sum x_j,  A = sum x_j M_j,  W = sum w_k,  B = sum w_k/M_k
   the stated parts are X + B M moles and A + W M kilograms.

   With a rest of r moles and molar mass M_r both balances close, two linear equations in M and r:
     moles  X + B M + r     = 1
     mass   A + W M + r M_r = M
   so  M = (A + M_r (1 - X))/D,  r = ((1 - X)(1 - W) - A B)/D,  D = 1 - W + M_r B.
   The stated parts exceed the whole when r is negative.

   Without a rest the parts add up to some t that need not be 1, and M is not told by the list
   unless t is.  M is taken so that they add up to the same t by amount as by mass:
     X + B M = t,   A + W M = t M
   (t is the greater eigenvalue of ((X, B), (A, W)), so
     t = (X + W)/2 + sqrt(((X - W)/2)^2 + A B)).
   It is the one M with which dividing every stated figure by t, whatever its basis, closes both
   balances; a list of molar shares alone has t = X, one of mass shares alone t = W.            */
struct shares { double X, A, W, B; };

static struct shares
shares_sum (size_t n, const struct stated_part parts[])
{
  struct sum X = { 0, 0 }, A = { 0, 0 }, W = { 0, 0 }, B = { 0, 0 };
  for (size_t i = 0; i < n; i++) {
    double amount = parts[i].amount, molar_mass = stated_molar_mass (&parts[i]);
    if (parts[i].basis == AMOUNT_REST)
      continue;
    if (parts[i].basis == AMOUNT_MASS_FRACTION) {
      sum_add (&W, amount);
      sum_add (&B, amount / molar_mass);
    } else {
      sum_add (&X, amount);
      sum_add (&A, amount * molar_mass);
    }
  }
  return (struct shares) { sum_total (&X), sum_total (&A), sum_total (&W), sum_total (&B) };
}

/* t - X and t - W without loss of digits: h = (W - X)/2, s = sqrt(h^2 + A B), t - X = s + h,
   t - W = s - h, of which the one that adds is used.  No mass shares: M does not matter.        */
static double
open_molar_mass (const struct shares *s)
{
  double half = (s->W - s->X) / 2;
  double root = hypot (half, sqrt (s->A) * sqrt (s->B));
  if (half >= 0)
    return s->B > 0 ? (root + half) / s->B : 0;
  return s->A / (root - half);
}

static double
open_total (const struct shares *s)
{
  return (s->X + s->W) / 2 + hypot ((s->W - s->X) / 2, sqrt (s->A) * sqrt (s->B));
}

/* What one unit of a stated amount is in moles, per mole or kilogram of the whole.  M is the molar
   mass of the whole, 1 (a kilogram) where the whole is a mass, and of no matter for amounts.    */
static double
stated_moles (const struct stated_part *part, double M)
{
  if (part->basis == AMOUNT_MASS)
    return part->amount / stated_molar_mass (part);
  if (part->basis == AMOUNT_MASS_FRACTION)
    return part->amount * (M / stated_molar_mass (part));
  return part->amount;
}

/* Finds M and the amount of the rest (in mol per whole).  */
static bool
shares_solve (size_t n, const struct stated_part parts[], const struct survey *survey, double *M,
              double *rest, struct fault *fault)
{
  bool by_mass = survey->mass_share && !survey->molar_share;
  struct shares s = shares_sum (n, parts);
  *rest = 0;
  *M = by_mass ? 1 : open_molar_mass (&s);
  if (survey->rest == n)
    return true;
  double M_rest = stated_molar_mass (&parts[survey->rest]);
  double D = 1 - s.W + M_rest * s.B;
  double left = by_mass ? 1 - s.W : (1 - s.X) * (1 - s.W) - s.A * s.B;
  double slack = analysis_rounding (n);
  if (s.X > 1 + slack || s.W > 1 + slack || left < -slack)
    return total_fault (fault, MESSAGE_GAS_TOTAL, open_total (&s), by_mass);
  left = left > 0 ? left : 0;
  if (by_mass) {
    *rest = left / M_rest;
  } else {
    *M = (s.A + M_rest * (1 - s.X)) / D;
    *rest = left / D;
  }
  return true;
}

static void
gathering_add_stated (struct gathering *g, const struct stated_part *part, double moles)
{
  if (part->species != NULL) {
    gathering_add (g, part->species, moles);
    return;
  }
  for (size_t i = 0; i < part->gas->count; i++)
    gathering_add (g, part->gas->species[i], moles * part->gas->fraction[i]);
}

const struct analysis *
analysis_make (struct arena *arena, size_t n, const struct stated_part parts[], bool dry,
               size_t *at, struct fault *fault)
{
  struct survey survey;
  double M = 1, rest = 0;
  *at = 0;
  if (!survey_parts (n, parts, &survey, at, fault))
    return NULL;
  *at = survey.rest < n ? survey.rest : 0;
  if (survey.first_amount == n && !shares_solve (n, parts, &survey, &M, &rest, fault))
    return NULL;

  size_t room = 0;
  for (size_t i = 0; i < n; i++)
    room += parts[i].species != NULL ? 1 : parts[i].gas->count;
  struct gathering g = gathering_start (arena, room);
  for (size_t i = 0; i < n; i++) {
    double moles = i == survey.rest ? rest : stated_moles (&parts[i], M);
    if (!isfinite (moles)) {
      *at = i;
      fault_set (fault, MESSAGE_AMOUNT_RANGE, stated_name (&parts[i]),
                 "it is too large to compute with");
      return NULL;
    }
    gathering_add_stated (&g, &parts[i], moles);
  }
  enum whole whole = WHOLE_MOLE;
  if (survey.first_amount < n)
    whole = WHOLE_NONE;
  else if (survey.mass_share && !survey.molar_share)
    whole = WHOLE_MASS;
  return gathering_analysis (arena, &g, whole, dry);
}

const struct analysis *
analysis_of_composition (struct arena *arena, const struct composition *c)
{
  struct gathering g = gathering_start (arena, c->count);
  g.count = c->count;
  for (size_t i = 0; i < c->count; i++)
    g.parts[i] = (struct part) { c->species[i], c->fraction[i] };
  return gathering_analysis (arena, &g, WHOLE_MOLE, false);
}

const struct composition *
analysis_close (struct arena *arena, const struct analysis *a, double tolerance, double *scaled,
                struct fault *fault)
{
  double total = analysis_total (a);
  if (!(fabs (total - 1) <= tolerance + analysis_rounding (a->count))) {
    total_fault (fault, MESSAGE_GAS_OPEN, total, a->whole == WHOLE_MASS);
    return NULL;
  }
  const struct composition *made = composition_make (arena, a->count, a->parts, fault);
  if (made != NULL)
    *scaled = a->whole == WHOLE_NONE ? 1 : analysis_closing_factor (a->count, total);
  return made;
}
