#include "config.h"
#include <math.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "libtest.h"
#include "modules/property/gases.h"
#include "property/heat_capacity.h"
#include "stream/blend.h"
#include "stream/stream.h"
#include "support/arena.h"
#include "units/workings.h"

static struct gases gases;

static void
start (void)
{
  gases_start (&gases);
}

static struct stream
stream_of (const char *gas, double moles, double T)
{
  return (struct stream) {
    .gas = gases_make (&gases, gas), .moles = moles, .flow = true, .T = T, .p = 1e5,
    .Z = (double) NAN
  };
}

static bool
blend (const struct stream *a, const struct stream *b, struct blend_temperature *t)
{
  return a->gas != NULL && b->gas != NULL
         && stream_blend_temperature (gases.tables, a, b, t, NULL, &gases.fault);
}

/* A monatomic gas has one heat capacity: the mean by moles, exactly.  */
static void
monatomic (void)
{
  start ();
  struct stream a = stream_of ("Ar 1", 3, 300), b = stream_of ("He 1", 1, 500);
  struct blend_temperature t = { 0 };
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 350, 1e-14);
  CHECK (t.outside == NULL);
}

/* Equal parts of nearly equal temperature: the mean, but for the slope of cp.  */
static void
equal_gases (void)
{
  start ();
  struct stream a = stream_of ("N2 8, O2 2", 2, 290), b = stream_of ("N2 8, O2 2", 2, 310);
  struct blend_temperature t = { 0 };
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 300, 2e-5);
  b.T = 290;
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 290, 0);
}

/* A mol/s of N2 at 1000 K and one at 298 K: by M. J. Moran, H. N. Shapiro, Fundamentals of
   Engineering Thermodynamics, Table A-23, from memory, (30129 + 8669)/2 = 19399 kJ/kmol, where 660
   K has 19383 and 670 K 19691.                                                                  */
static void
by_table (void)
{
  start ();
  struct stream a = stream_of ("N2 1", 1, 1000), b = stream_of ("N2 1", 1, 298);
  struct blend_temperature t = { 0 };
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 660.5, 1e-3);
}

static double
enthalpy (const struct stream *s, double T)
{
  struct ideal_heat h = { 0 };
  CHECK (heat_of_gas (gases.tables, s->gas, T, &h, NULL, &gases.fault));
  return s->moles * h.enthalpy;
}

/* What goes in comes out, in the blend's own composition; the order does not matter.  */
static void
conserves (void)
{
  static const char *const gas[] = {
    "CH4 58, CO2 40, H2O 2", "N2 78, O2 21, Ar 1", "H2 1", "C3H8 3, nC4H10 7", "H2O 1",
    "CO2 98, H2S 2"
  };
  for (size_t i = 0; i < 6; i++)
    for (size_t j = 0; j < 6; j++) {
      start ();
      double Ta = 250 + 37.0 * (double) i, Tb = 900 - 111.0 * (double) j;
      struct stream a = stream_of (gas[i], 0.01 + 7 * (double) i, Ta);
      struct stream b = stream_of (gas[j], 1 + (double) (j * j), Tb);
      struct stream both = { 0 };
      struct blend_temperature t = { 0 }, turned = { 0 };
      test_about ("%s at %g K, %s at %g K", gas[i], Ta, gas[j], Tb);
      NEED (blend (&a, &b, &t));
      NEED (blend (&b, &a, &turned));
      NEAR (turned.T, t.T, 0);
      CHECK (t.T >= fmin (Ta, Tb) && t.T <= fmax (Ta, Tb));
      NEED (stream_blend (gases.arena, &a, &b, &both, &gases.fault));
      double in = enthalpy (&a, Ta) + enthalpy (&b, Tb);
      double scale = fabs (enthalpy (&a, Ta)) + fabs (enthalpy (&b, Tb));
      NEAR ((enthalpy (&both, t.T) - in) / scale, 0, 1e-10);
    }
}

/* Much of one and little of the other, far apart.  */
static void
uneven (void)
{
  start ();
  struct stream a = stream_of ("N2 1", 1e9, 300), b = stream_of ("CO2 1", 1e-6, 1400);
  struct blend_temperature t = { 0 };
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 300, 1e-12);
  a.moles = 0;
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 1400, 0);
  b.moles = 0;
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 1400, 0);
}

static void
not_stated (void)
{
  start ();
  struct stream a = stream_of ("N2 1", 1, (double) NAN), b = stream_of ("CO2 1", 1, 400);
  struct blend_temperature t = { 0 };
  NEED (blend (&a, &b, &t));
  CHECK (isnan (t.T));
  a.moles = 0;                           /* of nothing the temperature does not count */
  NEED (blend (&a, &b, &t));
  NEAR (t.T, 400, 0);
}

static void
ranges_and_faults (void)
{
  start ();
  struct workings workings;
  struct stream a = stream_of ("D4 1, N2 99", 1, 250), b = stream_of ("N2 1", 1, 400);
  struct stream c = stream_of ("C7H14O2 1", 1, 300);
  struct blend_temperature t = { .T = -7 };
  NEED (c.gas != NULL);
  CHECK (!blend (&c, &b, &t));
  SAME_INT (gases.fault.kind, MESSAGE_MODEL_LACKS);
  NEAR (t.T, -7, 0);
  b.T = 300;                             /* the same temperature needs no heat capacity */
  NEED (blend (&c, &b, &t));
  NEAR (t.T, 300, 0);
  start ();
  a = stream_of ("D4 1, N2 99", 1, 250);
  b = stream_of ("N2 1", 1, 400);
  workings_init (&workings, gases.arena);
  NEED (stream_blend_temperature (gases.tables, &a, &b, &t, &workings, &gases.fault));
  SAME_INT (workings.count, 1);
  NEED (t.outside != NULL);
  SAME_TEXT (t.outside->key, "D4");
}

static const struct test_case cases[] = {
  { "monatomic gases", monatomic },
  { "equal gases", equal_gases },
  { "by a table of enthalpies", by_table },
  { "enthalpy is conserved", conserves },
  { "uneven streams", uneven },
  { "temperatures not stated", not_stated },
  { "ranges and faults", ranges_and_faults },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  gases_end (&gases);
  return status;
}
