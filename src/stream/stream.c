#include "config.h"
#include "stream/stream.h"

#include <math.h>
#include "gas/composition.h"
#include "gas/gathering.h"
#include "gas/species.h"
#include "support/fault.h"
#include "support/sum.h"
#include "units/constants.h"

/* Two figures that agree to this, relative to the larger, differ by rounding alone.  */
static const double noise = 1e-13;
/* A remainder below zero by less than this, of the whole stream, is zero.  */
static const double negative_noise = 1e-12;

double
stream_mass (const struct stream *s)
{
  return s->moles * s->gas->molar_mass;
}

/* p V = n R T.  */
double
ideal_volume (double moles, struct conditions at)
{
  return moles * GAS_CONSTANT * at.T / at.p;
}

double
ideal_moles (double volume, struct conditions at)
{
  return at.p * volume / (GAS_CONSTANT * at.T);
}

/* Summed over the dry parts: 1 - y would lose digits where the gas is nearly all water.  */
double
stream_dry_moles (const struct stream *s, const struct species *water)
{
  struct sum dry = { 0, 0 };
  for (size_t i = 0; i < s->gas->count; i++)
    if (s->gas->species[i] != water)
      sum_add (&dry, s->gas->fraction[i]);
  return s->moles * sum_total (&dry);
}

bool
stream_with_water (struct arena *arena, const struct stream *s, const struct species *water,
                   double y, struct stream *wet, struct fault *fault)
{
  const struct composition *gas = composition_wetted (arena, s->gas, water, y, fault);
  if (gas == NULL)
    return false;
  struct stream made = *s;
  made.gas = gas;
  made.moles = stream_dry_moles (s, water) / (1 - y);
  *wet = made;
  return true;
}

static bool
same_kind (const struct stream *a, const struct stream *b, const char *what, struct fault *fault)
{
  if (a->flow == b->flow)
    return true;
  return fault_set (fault, MESSAGE_KIND_WRONG, what, "give both per time, or both as amounts");
}

/* Moles by species: those of A first, then what only B has.  SIGN is that of B.  */
static struct gathering
gather (struct arena *arena, const struct stream *a, const struct stream *b, double sign)
{
  struct gathering g = gathering_start (arena, a->gas->count + b->gas->count);
  for (size_t i = 0; i < a->gas->count; i++)
    gathering_add (&g, a->gas->species[i], a->moles * a->gas->fraction[i]);
  for (size_t i = 0; i < b->gas->count; i++)
    gathering_add (&g, b->gas->species[i], sign * b->moles * b->gas->fraction[i]);
  return g;
}

/* The stream of these moles; one of nothing keeps the gas of A.  */
static bool
stream_of_parts (struct arena *arena, const struct gathering *g, const struct stream *a,
                 struct stream *made, struct fault *fault)
{
  double total = parts_total (g->count, g->parts);
  *made = *a;
  if (!isfinite (total))
    return fault_set (fault, MESSAGE_NOT_FINITE, NULL, NULL);
  made->moles = total;
  if (total > 0)
    made->gas = composition_make (arena, g->count, g->parts, fault);
  return made->gas != NULL;
}

bool
stream_blend (struct arena *arena, const struct stream *a, const struct stream *b,
              struct stream *blend, struct fault *fault)
{
  struct stream made;
  if (!same_kind (a, b, "a flow and an amount cannot be blended", fault))
    return false;
  struct gathering g = gather (arena, a, b, 1);
  if (!stream_of_parts (arena, &g, a, &made, fault))
    return false;
  made.T = fabs (a->T - b->T) <= noise * a->T ? a->T : (double) NAN;
  made.p = isnan (a->p) || isnan (b->p) ? (double) NAN : fmin (a->p, b->p);
  made.Z = (double) NAN;
  *blend = made;
  return true;
}

struct stream
stream_share (const struct stream *s, double fraction)
{
  struct stream share = *s;
  share.moles = s->moles * fraction;
  return share;
}

/* What is left of one part is settled against what there was of it: 0 where only rounding is
   left.  HAD is its amount in A, WHOLE all of A.                                                */
static bool
settle_remainder (struct part *part, double had, double whole, struct fault *fault)
{
  if (part->amount < -negative_noise * whole)
    return fault_set (fault, MESSAGE_NEGATIVE_PART, part->species->key,
                      "more of it is taken away than there is");
  if (part->amount <= noise * had)
    part->amount = 0;
  return true;
}

bool
stream_remainder (struct arena *arena, const struct stream *a, const struct stream *b,
                  struct stream *remainder, struct fault *fault)
{
  struct stream made;
  if (!same_kind (a, b, "an amount cannot be taken from a flow, nor a flow from an amount", fault))
    return false;
  struct gathering g = gather (arena, a, b, -1);
  size_t kept = 0;
  for (size_t i = 0; i < g.count; i++) {
    double had = i < a->gas->count ? a->moles * a->gas->fraction[i] : 0;
    if (!settle_remainder (&g.parts[i], had, a->moles, fault))
      return false;
    bool was_listed_empty = i < a->gas->count && !(a->gas->fraction[i] > 0);
    if (g.parts[i].amount > 0 || was_listed_empty)
      g.parts[kept++] = g.parts[i];
  }
  g.count = kept;
  if (!stream_of_parts (arena, &g, a, &made, fault))
    return false;
  *remainder = made;
  return true;
}

bool
stream_keeping (struct arena *arena, const struct stream *s, const double kept[],
                struct stream *tail, struct fault *fault)
{
  struct stream made;
  struct gathering g = gathering_start (arena, s->gas->count);
  for (size_t i = 0; i < s->gas->count; i++) {
    if (!(kept[i] >= 0 && kept[i] <= 1))
      return fault_set (fault, MESSAGE_AMOUNT_RANGE, s->gas->species[i]->key,
                        "a recovery is 0 to 100 %");
    if (kept[i] > 0)
      gathering_add (&g, s->gas->species[i], s->moles * s->gas->fraction[i] * kept[i]);
  }
  if (!stream_of_parts (arena, &g, s, &made, fault))
    return false;
  *tail = made;
  return true;
}
