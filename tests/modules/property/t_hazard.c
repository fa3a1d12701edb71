#include "config.h"
#include <math.h>
#include "gas/composition.h"
#include "libtest.h"
#include "modules/gas/samples.h"
#include "property/hazard.h"
#include "support/arena.h"
#include "support/fault.h"

static struct arena *arena;
static struct fault fault;
static struct hazard found[HAZARD_MOST];

static size_t
find (size_t n, const struct part parts[])
{
  arena_destroy (arena);
  arena = arena_create ();
  fault_init (&fault, arena);
  const struct composition *c = composition_make (arena, n, parts, &fault);
  return c != NULL ? hazard_find (c, NULL, 0, found) : (size_t) HAZARD_MOST + 1;
}

static void
raw_digester_gas (void)
{
  const struct part parts[] = {
    { &sample[CH4], 58.2 }, { &sample[CO2], 39.915 }, { &sample[N2], 1.4 }, { &sample[O2], 0.4 },
    { &sample[H2S], 0.085 }
  };
  size_t count = find (5, parts);
  NEED (count == 1);                     /* 0.4 % of oxygen burns nothing; CO2 only asphyxiates */
  SAME_INT (found[0].kind, HAZARD_TOXIC);
  CHECK (found[0].species == &sample[H2S]);
  NEAR (found[0].ratio, 170, 1e-12);     /* 850 ppm over 5 ppm, 2009/161/EU */
  NEAR (found[0].limit, 5e-6, 0);
}

/* Le Chatelier by hand: 1.1/4.4 + 0.4/4.0 = 0.35; the two fuels together 1.5/0.35 = 4.285714 %.  */
static void
fuel_in_air (void)
{
  const struct part parts[] = {
    { &sample[CH4], 1.1 }, { &sample[H2], 0.4 }, { &sample[O2], 20.6 }, { &sample[N2], 77.9 }
  };
  size_t count = find (4, parts);
  NEED (count == 1);
  SAME_INT (found[0].kind, HAZARD_FLAMMABLE);
  CHECK (found[0].species == &sample[CH4]);
  NEAR (found[0].ratio, 0.35, 1e-13);
  NEAR (found[0].limit, 0.0428571429, 1e-9);
}

static void
limits_of_the_warning (void)
{
  const struct { double methane, oxygen; size_t want; } cases[] = {
    { 1.1, 20.9, 1 },                    /* a quarter of 4.4 % */
    { 1.09, 20.9, 0 }, { 50, 4, 1 }, { 50, 3.99, 0 }, { 0, 20.9, 0 }
  };
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    test_about ("%g %% of methane, %g %% of oxygen", cases[i].methane, cases[i].oxygen);
    const struct part parts[] = {
      { &sample[CH4], cases[i].methane }, { &sample[O2], cases[i].oxygen },
      { &sample[N2], 100 - cases[i].methane - cases[i].oxygen }
    };
    SAME_INT (find (3, parts), cases[i].want);
  }
}

/* OSHA 29 CFR 1910.146: 19.5 and 23.5 per cent.  */
static void
oxygen_rich_or_poor (void)
{
  const struct { double oxygen, nitrogen, carbon_dioxide; int want; } cases[] = {
    { 20.9, 79.1, 0, -1 }, { 23.5, 76.5, 0, -1 }, { 23.6, 76.4, 0, HAZARD_OXYGEN_RICH },
    { 100, 0, 0, HAZARD_OXYGEN_RICH }, { 19.5, 80.5, 0, -1 },
    { 19.4, 80.6, 0, HAZARD_OXYGEN_POOR }, { 19.4, 80.2, 0.4, HAZARD_OXYGEN_POOR },
    { 10, 90, 0, -1 }, { 0, 100, 0, -1 }
  };
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    test_about ("%g %% of oxygen", cases[i].oxygen);
    const struct part parts[] = {
      { &sample[O2], cases[i].oxygen }, { &sample[N2], cases[i].nitrogen },
      { &sample[CO2], cases[i].carbon_dioxide }
    };
    size_t count = find (3, parts);
    SAME_INT (count, cases[i].want < 0 ? 0 : 1);
    if (count == 1) {
      SAME_INT (found[0].kind, cases[i].want);
      CHECK (found[0].species == &sample[O2]);
    }
  }
  const struct part flue[] = {           /* 12 % of CO2: no air to breathe, but not air-like */
    { &sample[O2], 11 }, { &sample[N2], 77 }, { &sample[CO2], 12 }
  };
  SAME_INT (find (3, flue), 0);
}

static void
harmless_gases (void)
{
  for (int i = 0; i < SAMPLES; i++) {
    const struct part parts[] = { { &sample[i], 1 } };
    size_t count = find (1, parts);
    test_about ("pure %s", sample[i].key);
    SAME_INT (count, *sample[i].flags || i == O2 ? 1 : 0);
  }
}

/* More than there is room for: the worst stay, worst first, and the fire is not crowded out.  */
static void
the_worst_first (void)
{
  enum { MANY = 12 };
  struct species poison[MANY];
  struct part parts[MANY + 3];
  for (size_t i = 0; i < MANY; i++) {
    poison[i] = sample[SO2];
    poison[i].exposure_limit = 1e-6 * (double) (1 + (5 * i) % MANY);
    parts[i] = (struct part) { &poison[i], 0.001 };
  }
  parts[MANY] = (struct part) { &sample[O2], 0.5 };
  parts[MANY + 1] = (struct part) { &sample[H2], 0.4 };
  parts[MANY + 2] = (struct part) { &sample[N2], 0.088 };
  size_t count = find (MANY + 3, parts);
  NEED (count == HAZARD_MOST);
  for (size_t i = 0; i < 6; i++) {
    SAME_INT (found[i].kind, HAZARD_TOXIC);
    NEAR (found[i].limit, 1e-6 * (double) (1 + i), 1e-15);
  }
  SAME_INT (found[6].kind, HAZARD_FLAMMABLE);
  SAME_INT (found[7].kind, HAZARD_OXYGEN_RICH);
}

static const struct test_case cases[] = {
  { "raw digester gas", raw_digester_gas },
  { "fuel in air", fuel_in_air },
  { "limits of the warning", limits_of_the_warning },
  { "oxygen rich or poor", oxygen_rich_or_poor },
  { "harmless gases", harmless_gases },
  { "the worst first", the_worst_first },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  arena_destroy (arena);
  return status;
}
