#include "config.h"

#include <math.h>
#include <stdio.h>
#include <string.h>
#include <gsl/gsl_linalg.h>
#include "libtest.h"
#include "metered.h"

struct meter { double value, u; };

/* ---- Five meters around two junctions: closed forms ---- */

/* S0 = S1 + S2, S1 + S3 = S4.  */
static void
two_junctions (struct metered *plant, const struct meter meters[5])
{
  metered_init (plant, 1, 5);
  metered_boundary (plant, BOUNDARY_SPLIT, "0 = 1 2");
  metered_boundary (plant, BOUNDARY_MIX, "1 3 = 4");
  for (size_t s = 0; s < 5; s++) {
    metered_total (plant, s, meters[s].value, meters[s].u);
  }
}

/* Meters 3 and 4 stand in one balance only, and in the same: without either, the first balance is
   left with its gap of 1.4 and variance 1 + 0.64 + 0.36.  */
static void
cannot_tell_two_apart (void)
{
  static const struct meter meters[5] = { { 100, 1 }, { 64, 0.8 }, { 34.6, 0.6 }, { 20.3, 0.5 },
                                          { 91, 1 } };
  static const double z[5] = { 0.650581, 3.66226, 0.650581, 4.81608, 4.81608 };
  static const double left[4] = { 99.3, 64.448, 34.852, 26.552 };
  struct metered plant;
  struct solution s;
  int kind;
  two_junctions (&plant, meters);
  NEED (metered_reconcile (&plant, &s, &kind));
  NEAR (s.chi2, 24.1746, 1e-5);
  SAME_INT (s.freedom, 2);
  NEAR (s.critical, 5.991, 1e-4);
  CHECK (!s.passed);
  for (size_t i = 0; i < 5; i++) {
    test_about ("meter %zu", i);
    NEAR (s.adjustments[i].z, z[i], 1.5e-6);       /* six digits given */
  }
  NEAR (s.adjustments[3].implied, 26.552, 1e-10);
  NEAR (s.adjustments[4].implied, 84.748, 1e-10);
  CHECK (s.adjustments[3].tie > 0 && s.adjustments[3].tie == s.adjustments[4].tie);
  CHECK (s.adjustments[0].tie > 0 && s.adjustments[0].tie == s.adjustments[2].tie);
  SAME_INT (s.adjustments[1].tie, 0);
  NEED (s.elimination_count == 1);
  NEAR (s.eliminations[0].chi2_left, 1.4 * 1.4 / 2, 1e-10);
  SAME_INT (s.eliminations[0].freedom_left, 1);
  NEED (s.eliminations[0].tie_count == 2);
  SAME_INT (s.eliminations[0].tie[0], 3);
  SAME_INT (s.eliminations[0].tie[1], 4);
  for (size_t i = 0; i < 4; i++) {
    test_about ("stream %zu without meter 3", i);
    NEAR (s.eliminations[0].value[i], left[i], 1e-10);
  }
  metered_clear (&plant);
}

/* ---- Random networks ---- */

/* A chain of units with cross connections, its true flows, and meters that err normally.  */
enum { STREAMS = 12, UNITS = 6 };
static const struct { const char *streams; double in; } chain[UNITS] = {
  { "0 = 1 2", 0 }, { "1 3 = 4 5", 0 }, { "4 6 = 7", 0 }, { "2 7 = 8", 0 }, { "8 = 9 10", 0 },
  { "9 5 = 11", 0 } };
static const double chain_flow[STREAMS] = { 100, 60, 40, 25, 50, 35, 10, 60, 100, 70, 30, 105 };
static const double chain_u[STREAMS] = { 1.5, 0.9, 0.8, 0.6, 1.1, 0.7, 0.4, 0.9, 2.0, 1.2, 0.5,
                                         1.7 };

static void
chain_make (struct metered *plant)
{
  metered_init (plant, 1, STREAMS);
  for (size_t u = 0; u < UNITS; u++) {
    metered_boundary (plant, BOUNDARY_MIX, chain[u].streams);
  }
}

/* Meters at the streams of BITS; ERROR, in u, is added to meter WRONG.  */
static void
chain_measure (struct metered *plant, unsigned bits, unsigned long long *seed, size_t wrong,
               double error)
{
  for (size_t s = 0; s < STREAMS; s++) {
    double y = chain_flow[s] + chain_u[s] * (metered_normal (seed) + (s == wrong ? error : 0));
    if (bits >> s & 1) {
      metered_total (plant, s, y, chain_u[s]);
    }
  }
}

/* The same by the conditions of Lagrange, W x + A'l = W y, A x = 0, with LU.  Streams without a
   meter have weight 0.  Gives back chi2; X has room for STREAMS + UNITS.  */
static double
lagrange (const struct metered *plant, double x[])
{
  enum { N = STREAMS + UNITS };
  double k[N * N] = { 0 }, b[N] = { 0 }, chi2 = 0;
  size_t order[N];
  for (size_t f = 0; f < plant->network.facts; f++) {
    const struct fact *fact = &plant->fact[f];
    size_t s = fact->left.terms[0].column;
    k[s * N + s] = 1 / (fact->u * fact->u);
    b[s] = fact->value / (fact->u * fact->u);
  }
  for (size_t u = 0; u < UNITS; u++) {
    const struct boundary *boundary = &plant->boundary[u];
    for (size_t i = 0; i < boundary->inlet_count + boundary->outlet_count; i++) {
      size_t s = boundary->inlets[i];            /* outlets lie behind */
      double sign = i < boundary->inlet_count ? 1 : -1;
      k[s * N + STREAMS + u] = k[(STREAMS + u) * N + s] = sign;
    }
  }
  int sign;
  gsl_permutation p = { N, order };
  gsl_matrix_view K = gsl_matrix_view_array (k, N, N);
  gsl_vector_view rhs = gsl_vector_view_array (b, N), out = gsl_vector_view_array (x, N);
  gsl_linalg_LU_decomp (&K.matrix, &p, &sign);
  gsl_linalg_LU_solve (&K.matrix, &p, &rhs.vector, &out.vector);
  for (size_t f = 0; f < plant->network.facts; f++) {
    const struct fact *fact = &plant->fact[f];
    chi2 += pow ((fact->value - x[fact->left.terms[0].column]) / fact->u, 2);
  }
  return chi2;
}

/* Which streams have meters; every flow can be found in each.  */
static const unsigned measured[] = { 0xfff, 0xbff, 0x7ef, 0xdfe, 0xf6b };
enum { SETS = sizeof measured / sizeof measured[0] };

static void
agrees_with_lagrange (void)
{
  unsigned long long seed = 20261201;
  for (size_t set = 0; set < SETS; set++) {
    struct metered plant;
    struct solution s;
    double x[STREAMS + UNITS];
    int kind;
    chain_make (&plant);
    chain_measure (&plant, measured[set], &seed, 3, set > 2 ? 9 : 0);
    double chi2 = lagrange (&plant, x);
    test_about ("set %zu of seed 20261201", set);
    NEED (metered_reconcile (&plant, &s, &kind));
    NEAR (s.chi2, chi2, 1e-9);
    for (size_t i = 0; i < STREAMS; i++) {
      CHECK (s.fixed[i]);
      NEAR (s.value[i], x[i], 1e-10);
    }
    metered_clear (&plant);
  }
}

/* z^2 is what chi2 falls by when the figure is left out, and the implied value what then comes
   out.  */
static void
z_is_the_drop (void)
{
  unsigned long long seed = 42;
  struct metered plant;
  struct solution s, without;
  int kind;
  chain_make (&plant);
  chain_measure (&plant, 0xfff, &seed, 7, 6);
  NEED (metered_reconcile (&plant, &s, &kind));
  for (size_t i = 0; i < STREAMS; i++) {
    struct fact gone = plant.fact[i];
    test_about ("meter %zu", i);
    plant.fact[i] = plant.fact[--plant.network.facts];
    NEED (metered_reconcile (&plant, &without, &kind));
    NEAR (s.adjustments[i].z * s.adjustments[i].z, s.chi2 - without.chi2, 1e-8);
    NEAR (s.adjustments[i].implied, without.value[i], 1e-8);
    plant.fact[plant.network.facts++] = plant.fact[i];
    plant.fact[i] = gone;
  }
  metered_clear (&plant);
}

/* A leak's drop is what chi2 falls by when that balance is struck out: a stream more that nobody
   measures leaves the unit.  Its flow is the leak's size.  */
static void
leak_is_the_drop (void)
{
  unsigned long long seed = 7;
  struct metered plant;
  struct solution s, struck;
  int kind;
  chain_make (&plant);
  chain_measure (&plant, 0xfff, &seed, 7, 25);
  NEED (metered_reconcile (&plant, &s, &kind));
  CHECK (!s.passed);
  NEED (s.leak_count >= 2);
  CHECK (s.leaks[0].drop >= s.leaks[1].drop);
  for (size_t i = 0; i < s.leak_count; i++) {
    struct boundary *boundary = &plant.boundary[s.leaks[i].boundary], whole = *boundary;
    size_t outlets[4];
    memcpy (outlets, whole.outlets, whole.outlet_count * sizeof *outlets);
    outlets[whole.outlet_count] = STREAMS;
    boundary->outlets = outlets;
    boundary->outlet_count++;
    plant.network.streams = STREAMS + 1;
    test_about ("leak at boundary %zu", s.leaks[i].boundary);
    NEED (metered_reconcile (&plant, &struck, &kind));
    *boundary = whole;
    plant.network.streams = STREAMS;
    if (struck.held_count == 0) {                /* a leak inwards is no flow outwards */
      NEAR (s.leaks[i].drop, s.chi2 - struck.chi2, 1e-8);
      NEAR (s.leaks[i].size, struck.value[STREAMS], 1e-8);
    } else {
      CHECK (s.leaks[i].size < 0);
    }
  }
  metered_clear (&plant);
}

/* In 1000 draws without gross error the global test rejects 5 in 100 (binomial: 50 +- 4 * 6.9), an
   interval of +- 1.96 u covers the truth in 95 (950 +- 4 * 6.9).  */
static void
holds_its_promises (void)
{
  enum { DRAWS = 1000 };
  unsigned long long seed = 1789;
  size_t rejected = 0, covered[3] = { 0, 0, 0 };
  static const size_t watched[3] = { 0, 7, 10 };
  for (size_t draw = 0; draw < DRAWS; draw++) {
    struct metered plant;
    struct solution s;
    int kind;
    chain_make (&plant);
    chain_measure (&plant, 0xf7b, &seed, STREAMS, 0);
    NEED (metered_reconcile (&plant, &s, &kind));
    rejected += !s.passed;
    for (size_t k = 0; k < 3; k++) {
      double u = metered_total_u (&plant, &s, watched[k]);
      covered[k] += fabs (s.value[watched[k]] - chain_flow[watched[k]]) < 1.959964 * u;
    }
    metered_clear (&plant);
  }
  test_about ("seed 1789: %zu rejected; %zu, %zu, %zu covered", rejected, covered[0], covered[1],
              covered[2]);
  CHECK (rejected >= 22 && rejected <= 78);
  for (size_t k = 0; k < 3; k++) {
    CHECK (covered[k] >= 922 && covered[k] <= 978);
  }
}

/* The least detectable error is found in four of five draws, by its own z at the critical value
   (binomial: 400 +- 4 * 8.9).  */
static void
finds_the_detectable (void)
{
  enum { DRAWS = 500 };
  unsigned long long seed = 1871;
  size_t found = 0;
  double least = 0;
  for (size_t draw = 0; draw <= DRAWS; draw++) {
    struct metered plant;
    struct solution s;
    int kind;
    chain_make (&plant);
    chain_measure (&plant, 0xfff, &seed, 8, least);
    NEED (metered_reconcile (&plant, &s, &kind));
    found += draw > 0 && s.adjustments[8].z > s.z_critical;
    least = s.adjustments[8].detectable / chain_u[8];
    metered_clear (&plant);
  }
  test_about ("seed 1871: %zu of %d found", found, DRAWS);
  CHECK (found >= 364 && found <= 436);
}

/* A meter that nothing else bears on cannot be tested.  */
static void
needed_figures_have_no_z (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 1, 5);
  metered_boundary (&plant, BOUNDARY_MIX, "0 1 = 2");
  metered_boundary (&plant, BOUNDARY_MIX, "2 3 = 4");
  metered_total (&plant, 0, 10, 0.1);
  metered_total (&plant, 1, 20, 0.1);
  metered_total (&plant, 2, 30.1, 0.1);
  metered_total (&plant, 3, 5, 0.2);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.adjustments[3].class, FIGURE_NEEDED);
  CHECK (isnan (s.adjustments[3].z) && isnan (s.adjustments[3].implied)
         && isnan (s.adjustments[3].detectable));
  NEAR (s.adjustments[3].moved_to, 5, 1e-12);
  NEAR (s.adjustments[3].moved_to_u, 0.2, 1e-10);
  SAME_INT (s.adjustments[0].class, FIGURE_REDUNDANT);
  /* three redundant figures: 0.95^(1/3)  */
  NEAR (s.z_critical, 2.387738, 1e-6);           /* standard normal quantile, computed by scipy */
  metered_clear (&plant);
}

static const struct test_case cases[] = {
  { "two meters that cannot be told apart are a tie", cannot_tell_two_apart },
  { "flows agree with the conditions of Lagrange", agrees_with_lagrange },
  { "z squared is what chi2 falls by", z_is_the_drop },
  { "a leak's drop is that of its balance struck out", leak_is_the_drop },
  { "false alarms and intervals keep their probabilities", holds_its_promises },
  { "the least detectable error is detected", finds_the_detectable },
  { "a figure nothing bears on has no z", needed_figures_have_no_z },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
