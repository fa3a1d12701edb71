#include "config.h"
#include <math.h>
#include "gas/composition.h"
#include "libtest.h"
#include "modules/gas/samples.h"
#include "stream/stream.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"

static struct arena *arena;
static struct fault fault;

static const double unstated = (double) NAN;
static const struct conditions normal = { 273.15, 101325, (double) NAN };
static const double hour = 3600;

static void
start (void)
{
  arena_destroy (arena);
  arena = arena_create ();
  fault_init (&fault, arena);
}

static struct stream
flow_of (double moles, size_t n, const struct part parts[])
{
  return (struct stream) {
    composition_make (arena, n, parts, &fault), moles, true, unstated, unstated, unstated
  };
}

static double
moles_of (const struct stream *s, const struct species *species)
{
  return s->moles * composition_fraction (s->gas, species);
}

/* 500 kg/h of dry air: 17.2618 kmol/h, 386.905 m3/h at 0 degC, 101.325 kPa (R = 8.314462618).  */
static void
air_by_mass_and_volume (void)
{
  start ();
  const struct part parts[] = {
    { &sample[N2], 78.084 }, { &sample[O2], 20.946 }, { &sample[Ar], 0.934 },
    { &sample[CO2], 0.036 }
  };
  struct stream air = flow_of (17.2618e3 / hour, 4, parts);
  NEED (air.gas != NULL);
  NEAR (stream_mass (&air) * hour, 500, 3e-5);
  NEAR (ideal_volume (air.moles, normal) * hour, 386.905, 3e-5);
  NEAR (ideal_moles (ideal_volume (air.moles, normal), normal), air.moles, 4e-16);
}

/* A wet test meter: 2.4653 m3 at 21.5 degC, 99.20 kPa, water 2.5656/99.20; dry 2.17961 m3 at
   0 degC, 101.325 kPa, in 3.25 h 11.1775 L/min; 2.655 % too much when the water is left in.     */
static void
wet_test_meter (void)
{
  start ();
  const struct part parts[] = { { &sample[CH4], 60 }, { &sample[CO2], 40 } };
  const struct conditions meter = { 294.65, 99200, 1 };
  struct stream dry = flow_of (1, 2, parts), wet = dry, back = dry;
  NEED (stream_with_water (arena, &dry, &sample[H2O], 2.5656 / 99.20, &wet, &fault));
  wet = stream_share (&wet, ideal_moles (2.4653, meter) / wet.moles);
  double volume = ideal_volume (stream_dry_moles (&wet, &sample[H2O]), normal);
  NEAR (volume, 2.17961, 1e-5);
  NEAR (volume / (3.25 * 60) * 1e3, 11.1775, 1e-5);
  NEAR (ideal_volume (wet.moles, normal) / volume - 1, 0.02655, 2e-4);
  NEED (stream_with_water (arena, &wet, &sample[H2O], 0, &back, &fault));
  NEAR (back.moles, stream_dry_moles (&wet, &sample[H2O]), 4e-16);
  NEAR (composition_fraction (back.gas, &sample[CH4]), 0.6, 1e-15);
  CHECK (!stream_with_water (arena, &wet, &sample[H2O], 1, &back, &fault));
  SAME_INT (fault.kind, MESSAGE_AMOUNT_RANGE);
}

/* A feed of 250 kmol/h, C2H6 40, C2H4 60 mol%, split three to one; the large part goes to a column
   that takes 98 % of the C2H4 and 3 % of the C2H6 overhead.  Worked by hand.                    */
static void
split_and_column (void)
{
  start ();
  const struct part parts[] = { { &sample[C2H6], 40 }, { &sample[C2H4], 60 } };
  const double recovery[] = { 0.03, 0.98 };
  struct stream feed = flow_of (250e3 / hour, 2, parts), small, overhead, bottoms;
  feed.T = 250;
  feed.p = 2e6;
  feed.Z = 0.8;
  struct stream large = stream_share (&feed, 0.75);
  NEED (stream_remainder (arena, &feed, &large, &small, &fault));
  NEAR (large.moles * hour, 187.5e3, 1e-14);
  NEAR (small.moles * hour, 62.5e3, 1e-14);
  NEAR (composition_fraction (small.gas, &sample[C2H4]), 0.6, 1e-14);
  NEAR (small.T, 250, 0);
  NEAR (small.Z, 0.8, 0);
  NEED (stream_keeping (arena, &large, recovery, &overhead, &fault));
  NEED (stream_remainder (arena, &large, &overhead, &bottoms, &fault));
  NEAR (overhead.moles * hour, 112.5e3, 1e-5);
  NEAR (composition_fraction (overhead.gas, &sample[C2H4]), 0.98, 1e-5);
  NEAR (bottoms.moles * hour, 75e3, 1e-5);
  NEAR (composition_fraction (bottoms.gas, &sample[C2H4]), 0.03, 1e-5);
  NEAR (moles_of (&overhead, &sample[C2H4]) / moles_of (&feed, &sample[C2H4]), 0.735, 1e-5);
  NEAR (stream_mass (&overhead) * hour, 3160.61, 3e-5);
  NEAR (overhead.p, 2e6, 0);
}

static struct stream
random_stream (uint64_t *state)
{
  size_t n = 1 + (size_t) (random_next (state) % SAMPLES), order[SAMPLES];
  double amount[SAMPLES];
  struct part parts[SAMPLES];
  random_amounts (state, n, order, amount);
  for (size_t i = 0; i < n; i++)
    parts[i] = (struct part) { &sample[order[i]], amount[i] };
  return flow_of (100 * random_share (state), n, parts);
}

static void
blend_and_remainder (void)
{
  uint64_t state = 20260105;
  for (int number = 0; number < 2000; number++) {
    start ();
    test_about ("seed 20260105, case %d", number);
    struct stream a = random_stream (&state), b = random_stream (&state), blend, left;
    NEED (a.gas != NULL && b.gas != NULL);
    NEED (stream_blend (arena, &a, &b, &blend, &fault));
    NEAR (blend.moles, a.moles + b.moles, 1e-15);
    NEAR (stream_mass (&blend), stream_mass (&a) + stream_mass (&b), 2e-15);
    for (int i = 0; i < SAMPLES; i++)
      NEAR (moles_of (&blend, &sample[i]), moles_of (&a, &sample[i]) + moles_of (&b, &sample[i]),
            1e-15);
    for (size_t i = 0; i < a.gas->count; i++)
      CHECK (blend.gas->species[i] == a.gas->species[i]);
    NEED (stream_remainder (arena, &blend, &b, &left, &fault));
    NEAR (left.moles, a.moles, 1e-14 * blend.moles / a.moles);
    for (int i = 0; i < SAMPLES; i++) {
      double was = moles_of (&a, &sample[i]), in_blend = moles_of (&blend, &sample[i]);
      CHECK (fabs (moles_of (&left, &sample[i]) - was) <= 1.1e-13 * in_blend);
      if (!(was > 0))
        CHECK (composition_fraction (left.gas, &sample[i]) <= 0);
    }
  }
}

static void
what_only_the_second_had_is_gone (void)
{
  start ();
  const struct part biogas[] = { { &sample[CH4], 60 }, { &sample[CO2], 40 }, { &sample[H2S], 0 } };
  const struct part air[] = { { &sample[N2], 79 }, { &sample[O2], 21 }, { &sample[CO2], 0.04 } };
  struct stream a = flow_of (3.7, 3, biogas), b = flow_of (0.13, 3, air), blend, left;
  NEED (stream_blend (arena, &a, &b, &blend, &fault));
  NEED (blend.gas->count == 5);
  CHECK (blend.gas->species[3] == &sample[N2] && blend.gas->species[4] == &sample[O2]);
  NEED (stream_remainder (arena, &blend, &b, &left, &fault));
  NEED (left.gas->count == 3);           /* a part listed as none stays listed */
  NEAR (composition_fraction (left.gas, &sample[CO2]), 0.4, 1e-14);
  NEAR (composition_fraction (left.gas, &sample[N2]), 0, 0);
}

static void
state_of_a_blend (void)
{
  start ();
  const struct part parts[] = { { &sample[N2], 1 } };
  struct stream a = flow_of (1, 1, parts), b = flow_of (2, 1, parts), blend;
  a.T = b.T = 300;
  a.p = 5e5;
  b.p = 3e5;
  a.Z = b.Z = 0.99;
  NEED (stream_blend (arena, &a, &b, &blend, &fault));
  NEAR (blend.T, 300, 0);
  NEAR (blend.p, 3e5, 0);
  CHECK (isnan (blend.Z));
  b.T = 310;
  NEED (stream_blend (arena, &a, &b, &blend, &fault));
  CHECK (isnan (blend.T));
  b.T = b.p = unstated;
  NEED (stream_blend (arena, &a, &b, &blend, &fault));
  CHECK (isnan (blend.T) && isnan (blend.p));
}

static void
nothing_left (void)
{
  start ();
  const struct part parts[] = { { &sample[CH4], 0.3 }, { &sample[CO2], 0.7 } };
  const double none[] = { 0, 0 };
  struct stream a = flow_of (0.1, 2, parts), left, tail, both;
  NEED (stream_remainder (arena, &a, &a, &left, &fault));
  NEAR (left.moles, 0, 0);
  CHECK (left.gas == a.gas);
  NEED (stream_keeping (arena, &a, none, &tail, &fault));
  NEAR (tail.moles, 0, 0);
  NEED (stream_blend (arena, &left, &tail, &both, &fault));
  NEAR (both.moles, 0, 0);
  NEAR (stream_mass (&both), 0, 0);
}

static void
faults (void)
{
  start ();
  const struct part biogas[] = { { &sample[CH4], 60 }, { &sample[CO2], 40 } };
  const struct part foreign[] = { { &sample[CH4], 60 }, { &sample[N2], 1e-3 } };
  struct stream a = flow_of (1, 2, biogas), b = flow_of (0.5, 2, foreign), made = a;
  made.moles = -7;
  CHECK (!stream_remainder (arena, &a, &b, &made, &fault));
  SAME_INT (fault.kind, MESSAGE_NEGATIVE_PART);
  SAME_TEXT (fault.fact[0], "N2");
  start ();
  a = flow_of (1, 2, biogas);
  b = stream_share (&a, 1.001);
  CHECK (!stream_remainder (arena, &a, &b, &made, &fault));
  SAME_INT (fault.kind, MESSAGE_NEGATIVE_PART);
  SAME_TEXT (fault.fact[0], "CH4");
  start ();
  a = flow_of (1, 2, biogas);
  b = a;
  b.flow = false;
  CHECK (!stream_blend (arena, &a, &b, &made, &fault));
  SAME_INT (fault.kind, MESSAGE_KIND_WRONG);
  start ();
  a = flow_of (1, 2, biogas);
  CHECK (!stream_remainder (arena, &a, &b, &made, &fault));
  SAME_INT (fault.kind, MESSAGE_KIND_WRONG);
  const double bad[] = { -0.1, 1.1, (double) NAN };
  for (size_t i = 0; i < 3; i++) {
    start ();
    test_about ("recovery %g", bad[i]);
    const double kept[] = { 0.5, bad[i] };
    a = flow_of (1, 2, biogas);
    CHECK (!stream_keeping (arena, &a, kept, &made, &fault));
    SAME_INT (fault.kind, MESSAGE_AMOUNT_RANGE);
    SAME_TEXT (fault.fact[0], "CO2");
  }
  start ();
  a = flow_of (1.5e308, 2, biogas);
  CHECK (!stream_blend (arena, &a, &a, &made, &fault));
  SAME_INT (fault.kind, MESSAGE_NOT_FINITE);
  NEAR (made.moles, -7, 0);
}

static const struct test_case cases[] = {
  { "air by mass and volume", air_by_mass_and_volume },
  { "wet test meter", wet_test_meter },
  { "split and column", split_and_column },
  { "blend and remainder", blend_and_remainder },
  { "what only the second had is gone", what_only_the_second_had_is_gone },
  { "state of a blend", state_of_a_blend },
  { "nothing left", nothing_left },
  { "faults", faults },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  arena_destroy (arena);
  return status;
}
