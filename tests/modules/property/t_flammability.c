#include "config.h"
#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "modules/property/gases.h"
#include "property/flammability.h"
#include "support/arena.h"
#include "units/workings.h"

static struct gases gases;

static bool
find (const char *gas, struct flammability *found)
{
  gases_start (&gases);
  const struct composition *made = gases_make (&gases, gas);
  return made != NULL && flammability_of (made, NULL, 0, found, NULL, &gases.fault);
}

/* A pure gas has the limits of the table.  */
static void
pure_gases (void)
{
  size_t checked = 0;
  gases_start (&gases);
  for (size_t i = 0; i < species_table_size (gases.species); i++) {
    const struct species *one = species_table_at (gases.species, i);
    struct flammability f = { 0 };
    if (isnan (one->lower_flammable))
      continue;
    test_about ("%s", one->key);
    NEED (flammability_of (composition_pure (gases.arena, one), NULL, 0, &f, NULL,
                           &gases.fault));
    SAME_INT (f.kind, FLAMMABLE_BETWEEN);
    NEAR (f.lower, one->lower_flammable, 1e-15);
    SAME_INT (isnan (f.upper), isnan (one->upper_flammable));
    if (!isnan (f.upper))
      NEAR (f.upper, one->upper_flammable, 1e-15);
    CHECK (!f.upper_is_bound && !f.burns_as_it_is && !f.enriched && f.unknown == NULL);
    checked++;
  }
  CHECK (checked >= 120);
}

/* IEC 60079-20-1: CH4 4.4 to 17 %, H2 4 to 77 %, CO 10.9 to 74 %.  Le Chatelier by hand.  */
static void
mixtures (void)
{
  static const struct { const char *gas; double lower, upper, oxygen; bool bound; } known[] = {
    { "CH4 1, N2 1", 0.088, 0.34, 0.088, true },
    { "H2 1, CO 1", 0.0585234899, 0.7547019868, 0.02926174497, false },
    /* 1/(0.8/0.17 + 0.2/0.77); oxygen 1.7 mol a mol */
    { "CH4 8, H2 2", 0.0431372549, 0.20138461538, 0.0733333333, false },
    /* 1/(0.4/0.04 + 0.3/0.109), 1/(0.4/0.77 + 0.3/0.74); the fuels alone 0.7 of that */
    { "H2 4, CO 3, CO2 3", 0.0784172662, 1, 0.02744604317, true },
    { "H2 4, CO 3, H2O 3", 0.0784172662, 1, 0.02744604317, true }
  };
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
    struct flammability f = { 0 };
    test_about ("%s", known[i].gas);
    NEED (find (known[i].gas, &f));
    SAME_INT (f.kind, FLAMMABLE_BETWEEN);
    NEAR (f.lower, known[i].lower, 1e-9);
    NEAR (f.upper, known[i].upper, 1e-9);
    NEAR (f.least_oxygen, known[i].oxygen, 1e-9);
    SAME_INT (f.upper_is_bound, known[i].bound);
    CHECK (f.fuel_lower <= f.lower && !f.burns_as_it_is);
  }
}

/* H. F. Coward, G. W. Jones, Limits of flammability of gases and vapors, U.S. Bureau of Mines
   Bulletin 503 (1952), p. 5, from memory: natural gas of 80 % methane, 15 % ethane, 4 % propane
   and 1 % butane, with limits of 5.3, 3.22, 2.37 and 1.86 %, has 4.55 %.                        */
static void
natural_gas (void)
{
  gases_start (&gases);
  struct flammability f = { 0 };
  const struct flammable_limits stated[] = {
    { gases_species (&gases, "CH4"), 0.053, (double) NAN },
    { gases_species (&gases, "C2H6"), 0.0322, (double) NAN },
    { gases_species (&gases, "C3H8"), 0.0237, (double) NAN },
    { gases_species (&gases, "nC4H10"), 0.0186, (double) NAN }
  };
  NEED (flammability_of (gases_make (&gases, "CH4 80, C2H6 15, C3H8 4, nC4H10 1"), stated, 4, &f,
                         NULL, &gases.fault));
  NEAR (f.lower, 0.0455, 1.1e-3);
}

/* Lower limit times the oxygen burnt with, by hand: CH4 + 2 O2, C3H8 + 5 O2, NH3 + 3/4 O2,
   H2S + 3/2 O2, CH3OH + 3/2 O2; limits of IEC 60079-20-1: 4.4, 1.7, 15, 4 and 6 %.              */
static void
least_oxygen (void)
{
  static const struct { const char *gas; double want; } known[] = {
    { "CH4 1", 0.088 }, { "C3H8 1", 0.085 }, { "NH3 1", 0.1125 }, { "H2S 1", 0.06 },
    { "CH3OH 1", 0.09 }, { "CO 3, N2 1", 0.0545 }, { "D2 1", 0.0245 }
  };
  struct flammability f = { 0 };
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
    test_about ("%s", known[i].gas);
    NEED (find (known[i].gas, &f));
    NEAR (f.least_oxygen, known[i].want, 1e-14);
    CHECK (f.no_estimate == NULL);
  }
  NEED (find ("CH4 9, SiH4 1", &f));
  CHECK (isnan (f.least_oxygen));
  NEED (f.no_estimate != NULL && f.pyrophoric != NULL);
  SAME_TEXT (f.no_estimate->key, "SiH4");
  SAME_TEXT (f.pyrophoric->key, "SiH4");
  NEED (find ("CH4 9, NiCO4 1", &f));    /* nickel is no nitrogen */
  CHECK (isnan (f.least_oxygen));
}

static void
thin_or_nothing (void)
{
  struct flammability f = { 0 };
  NEED (find ("N2 79, O2 21", &f));
  SAME_INT (f.kind, FLAMMABLE_NOTHING);
  CHECK (isnan (f.lower) && isnan (f.upper) && isnan (f.least_oxygen));
  NEED (find ("N2 96, CH4 4", &f));
  SAME_INT (f.kind, FLAMMABLE_TOO_THIN);
  CHECK (isnan (f.lower) && isnan (f.upper));
  NEAR (f.fuel_lower, 0.044, 1e-14);
  NEED (find ("N2 95, CH4 5", &f));
  SAME_INT (f.kind, FLAMMABLE_BETWEEN);
  NEAR (f.lower, 0.88, 1e-14);
  NEAR (f.upper, 1, 0);
}

/* With oxygen of its own.  */
static void
with_oxygen (void)
{
  struct flammability f = { 0 };
  NEED (find ("CH4 5, O2 19.95, N2 75.05", &f));         /* 5 % in air */
  CHECK (f.burns_as_it_is && !f.enriched);
  NEAR (f.lower, 0.88, 1e-14);
  NEED (find ("CH4 4, O2 20.1, N2 75.9", &f));           /* below the limit */
  SAME_INT (f.kind, FLAMMABLE_TOO_THIN);
  CHECK (!f.burns_as_it_is);
  NEED (find ("CH4 30, O2 14.7, N2 55.3", &f));          /* above the upper one */
  CHECK (!f.burns_as_it_is && !f.upper_is_bound);
  NEAR (f.upper, 0.17 / 0.3, 1e-14);
  NEED (find ("CH4 10, O2 6, N2 84", &f));               /* too little oxygen */
  CHECK (!f.burns_as_it_is && f.upper_is_bound);
  NEED (find ("CH4 30, O2 70", &f));                     /* limits in air say nothing of this */
  CHECK (f.burns_as_it_is && f.enriched);
  NEED (find ("CH4 30, N2O 70", &f));
  NEED (f.oxidiser != NULL);
  SAME_TEXT (f.oxidiser->key, "N2O");
  CHECK (f.burns_as_it_is);
  NEED (find ("CH4 58.2, CO2 39.915, N2 1.4, O2 0.4, H2S 0.085", &f));   /* digester gas */
  NEAR (f.lower, 0.0754799, 1e-5);       /* 1/(0.582/0.044 + 0.00085/0.04) */
  CHECK (!f.burns_as_it_is && f.upper_is_bound);
}

static void
unknown_parts (void)
{
  struct flammability f = { .kind = FLAMMABLE_TOO_THIN };
  CHECK (!find ("CH4 90, C7H14O2 10", &f));              /* known by its formula alone */
  SAME_INT (gases.fault.kind, MESSAGE_MODEL_LACKS);
  SAME_TEXT (gases.fault.fact[1], "C7H14O2");
  SAME_INT (f.kind, FLAMMABLE_TOO_THIN);
  NEED (find ("CH4 99.9, D3 0.1", &f));                  /* a trace of siloxane is left out */
  NEED (f.unknown != NULL);
  SAME_TEXT (f.unknown->key, "D3");
  NEAR (f.unknown_share, 1e-3, 1e-12);
  NEED (find ("aC3H4 1, CH4 1", &f));                    /* no upper limit is published */
  CHECK (isnan (f.upper) && f.lower > 0.021 && f.lower < 0.044);
}

static void
said (void)
{
  struct workings workings;
  struct flammability f = { 0 };
  gases_start (&gases);
  workings_init (&workings, gases.arena);
  NEED (flammability_of (gases_make (&gases, "CH4 1, N2 1"), NULL, 0, &f, &workings,
                         &gases.fault));
  SAME_INT (workings.count, 6);
  SAME_TEXT (workings.last->name, "upper limit of the gas in air");
  NEAR (workings.last->value, f.upper, 0);
  SAME_TEXT (workings.first->terms[0], "CH4");
  SAME_TEXT (workings.first->next->columns[1].sources[0], "IEC 60079-20-1:2010");
}

static const struct test_case cases[] = {
  { "pure gases", pure_gases },
  { "mixtures", mixtures },
  { "natural gas", natural_gas },
  { "least oxygen", least_oxygen },
  { "too thin, or nothing", thin_or_nothing },
  { "with oxygen of its own", with_oxygen },
  { "parts without limits", unknown_parts },
  { "workings", said },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  gases_end (&gases);
  return status;
}
