#include "config.h"

#include <math.h>
#include <gsl/gsl_multimin.h>
#include "libtest.h"
#include "metered.h"

/* The figures below are of one row each: stream, value, u.  */
struct meter { double value, u; };

static void
add_meters (struct metered *plant, size_t n, const struct meter meters[])
{
  for (size_t s = 0; s < n; s++) {
    metered_total (plant, s, meters[s].value, meters[s].u);
  }
}

/* ---- One balance: x = y - V a a'y / a'V a, in closed form ---- */

static void
main_against_branches (void)
{
  /* main = A + B; gap 35, u^2 = 15^2 + 12^2 + 10^2 = 469.  */
  static const struct meter meters[] = { { 1520, 15 }, { 830, 12 }, { 655, 10 } };
  const double gap = 35, variance = 469;
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 1, 3);
  metered_boundary (&plant, BOUNDARY_SPLIT, "0 = 1 2");
  add_meters (&plant, 3, meters);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.status, BALANCE_RECONCILED);
  for (size_t i = 0; i < 3; i++) {
    double v = meters[i].u * meters[i].u, sign = i == 0 ? -1 : 1;
    test_about ("stream %zu", i);
    NEAR (metered_total_value (&plant, &s, i), meters[i].value + sign * v * gap / variance, 1e-12);
    NEAR (metered_total_u (&plant, &s, i), sqrt (v - v * v / variance), 1e-12);
    NEAR (s.adjustments[i].moved_to, meters[i].value + sign * v * gap / variance, 1e-12);
    NEAR (s.adjustments[i].z, gap / sqrt (variance), 1e-12);
    NEAR (s.adjustments[i].implied, meters[i].value + sign * gap, 1e-12);
    SAME_INT (s.adjustments[i].class, FIGURE_REDUNDANT);
    SAME_INT (s.adjustments[i].tie, 1);
    CHECK (s.fixed[i] && s.fixed_total[i]);
  }
  NEAR (s.chi2, gap * gap / variance, 1e-12);
  NEAR (s.critical, 3.841, 1e-3 / 3.841);        /* any table of chi2 at 95 % */
  SAME_INT (s.freedom, 1);
  CHECK (s.passed);
  SAME_INT (s.elimination_count, 0);
  SAME_INT (s.leak_count, 0);
  CHECK (s.mismatch < 1e-12);
  metered_clear (&plant);
}

/* ---- Cooling water: Basic Concepts in Data Reconciliation, teaching module of the Program for
   North American Mobility in Higher Education (2003): results and their standard deviations to
   the digits given; chi2, z and the order of leaving out were computed with numpy by the
   projection method ---- */

static void
cooling_water (struct metered *plant)
{
  metered_init (plant, 1, 6);
  metered_boundary (plant, BOUNDARY_SPLIT, "0 = 1 2");
  metered_boundary (plant, BOUNDARY_SEPARATE, "1 = 3");
  metered_boundary (plant, BOUNDARY_SEPARATE, "2 = 4");
  metered_boundary (plant, BOUNDARY_MIX, "3 4 = 5");
}

static void
published_network (void)
{
  static const struct meter meters[] = { { 110.5, 0.82 }, { 60.8, 0.53 }, { 35.0, 0.46 },
                                         { 68.9, 0.71 }, { 38.6, 0.45 }, { 101.4, 1.2 } };
  static const double total[] = { 103.24010825, 65.41556049, 37.82454776,
                                  65.41556049, 37.82454776, 103.24010825 };
  static const double u[] = { 0.4186884, 0.3694590, 0.2983286, 0.3694590, 0.2983286, 0.4186884 };
  static const double z[] = { 10.2969356799, 12.1481176536, 8.06847016854,
                              5.7474068631, 2.30224559785, 1.63624943359 };
  struct metered plant;
  struct solution s;
  int kind;
  cooling_water (&plant);
  add_meters (&plant, 6, meters);
  NEED (metered_reconcile (&plant, &s, &kind));
  for (size_t i = 0; i < 6; i++) {
    test_about ("stream %zu", i + 1);
    NEAR (metered_total_value (&plant, &s, i), total[i], 1e-9);
    NEAR (metered_total_u (&plant, &s, i), u[i], 0.0003);
    NEAR (s.adjustments[i].z, z[i], 1e-9);
  }
  NEAR (s.chi2, 221.334311356, 1e-10);
  SAME_INT (s.freedom, 4);
  NEAR (s.critical, 9.48772903678, 1e-10);
  NEAR (s.z_critical, 2.63103828454, 1e-10);
  NEAR (s.p, 9.67810691257e-47, 1e-6);
  CHECK (!s.passed);
  metered_clear (&plant);
}

static void
published_elimination (void)
{
  static const struct meter meters[] = { { 110.5, 0.82 }, { 60.8, 0.53 }, { 35.0, 0.46 },
                                         { 68.9, 0.71 }, { 38.6, 0.45 }, { 101.4, 1.2 } };
  static const struct { size_t left_out; double z, chi2; size_t freedom; } steps[] = {
    { 1, 12.1481176536, 221.334311356, 4 }, { 2, 5.87762884031, 73.7575488296, 3 },
    { 5, 5.71704115691, 39.2110280452, 2 } };
  static const double after[] = { 109.03720087, 69.9966642495, 39.0405366207,
                                  69.9966642495, 39.0405366207, 109.03720087 };
  struct metered plant;
  struct solution s;
  int kind;
  cooling_water (&plant);
  add_meters (&plant, 6, meters);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.elimination_count, 3);
  for (size_t i = 0; i < 3 && i < s.elimination_count; i++) {
    const struct elimination *e = &s.eliminations[i];
    test_about ("step %zu", i + 1);
    SAME_INT (e->adjustment, steps[i].left_out);
    SAME_INT (e->freedom, steps[i].freedom);
    NEAR (e->z, steps[i].z, 1e-9);
    NEAR (e->chi2, steps[i].chi2, 1e-9);
    SAME_INT (e->tie_count, 0);
    NEAR (e->implied, e->value[steps[i].left_out], 1e-12);
  }
  NEED (s.elimination_count == 3);
  NEAR (s.eliminations[2].chi2_left, 6.5264684554, 1e-9);
  SAME_INT (s.eliminations[2].freedom_left, 1);
  for (size_t i = 0; i < 6; i++) {
    test_about ("stream %zu after leaving three out", i + 1);
    NEAR (s.eliminations[2].value[i], after[i], 1e-9);
  }
  metered_clear (&plant);
}

static void
partly_measured (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  cooling_water (&plant);
  metered_total (&plant, 0, 110.5, 0.82);
  metered_total (&plant, 5, 101.4, 1.2);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.status, BALANCE_RECONCILED);
  SAME_INT (s.freedom, 1);
  NEAR (s.chi2, 39.2018557091, 1e-10);
  for (size_t i = 0; i < 6; i++) {
    bool settled = i == 0 || i == 5;
    test_about ("stream %zu", i + 1);
    SAME_INT (s.fixed[i], settled);
    SAME_INT (s.fixed_total[i], settled);
    if (settled) {
      NEAR (metered_total_value (&plant, &s, i), 107.603370574, 1e-10);
      NEAR (metered_total_u (&plant, &s, i), 0.677028606031, 1e-10);
    } else {
      CHECK (isnan (metered_total_u (&plant, &s, i)));
    }
  }
  SAME_INT (s.elimination_count, 0);             /* one surplus figure accuses nobody */
  metered_clear (&plant);
}

/* Narasimhan, Jordache, Data Reconciliation and Gross Error Detection (2000), chapter 1: figures
   from memory, rounded results 100.22, 64.50, 35.72.  */
static void
exchanger_with_bypass (void)
{
  static const struct meter meters[] = { { 101.91, 1 }, { 64.45, 1 }, { 34.65, 1 },
                                         { 64.2, 1 }, { 36.44, 1 }, { 98.88, 1 } };
  static const double total[] = { 100.22, 64.50, 35.72, 64.50, 35.72, 100.22 };
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 1, 6);
  metered_boundary (&plant, BOUNDARY_SPLIT, "0 = 1 2");
  metered_boundary (&plant, BOUNDARY_SEPARATE, "1 = 3");
  metered_boundary (&plant, BOUNDARY_SEPARATE, "2 = 4");
  metered_boundary (&plant, BOUNDARY_MIX, "3 4 = 5");
  add_meters (&plant, 6, meters);
  NEED (metered_reconcile (&plant, &s, &kind));
  for (size_t i = 0; i < 6; i++) {
    test_about ("stream %zu", i + 1);
    NEAR (metered_total_value (&plant, &s, i), total[i], 0.005 / total[i]);
    NEAR (metered_total_u (&plant, &s, i), sqrt (1.0 / 3), 1e-10);
  }
  NEAR (s.chi2, 6.4075, 1e-10);
  CHECK (s.passed);
  metered_clear (&plant);
}

/* ---- Flows and whole analyses.  Expected: an independent constrained minimiser (scipy) ---- */

static const struct { double stated, u, estimate, u_estimate, z; } blend[] = {
  { 120.9, 1.209, 119.406815664, 0.836459082162, 1.71053134634 },
  { 60.2, 0.602, 60.5934635272, 0.455921009371, 1.00088453817 },
  { 179.0, 1.79, 180.000279191, 1.05496959118, 0.691719098026 },
  { 0.921, 0.003684, 0.920723084577, 0.00342679824703, 0.204762774031 },
  { 0.041, 0.0002, 0.0410594976089, 0.000179214176613, 0.670152456382 },
  { 0.0105, 0.0002, 0.0105633326684, 0.00019601811978, 1.59487320643 },
  { 0.0285, 0.0002, 0.0284169332797, 0.000176432295798, 0.881911460391 },
  { 0.688, 0.002752, 0.686952750082, 0.00264751389244, 1.39425987238 },
  { 0.052, 0.000208, 0.0520272020013, 0.00020204376426, 0.550427105118 },
  { 0.198, 0.000792, 0.19842498123, 0.000743888761023, 1.56338736291 },
  { 0.061, 0.000244, 0.0609294929538, 0.00023338101432, 0.9902809666 },
  { 0.8412, 0.003365, 0.842992137943, 0.00273113565747, 0.911687420985 },
  { 0.0449, 0.0002, 0.0448154538375, 0.00014827492226, 0.629915394432 },
  { 0.0742, 0.000297, 0.0740008139541, 0.000269169561144, 1.58681254255 },
  { 0.0393, 0.0002, 0.0394302608713, 0.000141078219926, 0.918859385486 } };
static const double blend_flow[][2] = {
  { 109.856807577, 0.768512119115 }, { 4.89904663365, 0.0414325303208 },
  { 1.26037244397, 0.0262425889823 }, { 3.39058900936, 0.0331432122349 },
  { 41.6942913235, 0.335203774954 }, { 3.1577678621, 0.0272790401813 },
  { 12.0433158936, 0.088024771362 }, { 3.69808844801, 0.0313364191329 },
  { 151.5510989, 0.901000518721 }, { 8.05681449574, 0.053479215078 },
  { 13.3036883376, 0.0913099428952 }, { 7.08867745736, 0.0480903527747 } };
static const double blend_fraction[][2] = {
  { 0.920021248085, 0.000388264379555 }, { 0.0410281993236, 0.000205095897783 },
  { 0.0105552805923, 0.000198169683618 }, { 0.0283952719994, 0.000189642240895 },
  { 0.688098829418, 0.000977791701846 }, { 0.0521140017137, 0.000238587483567 },
  { 0.198756024043, 0.000777190258886 }, { 0.0610311448255, 0.000273866170899 },
  { 0.841949243531, 0.00046674488295 }, { 0.0447600111064, 0.000147363737608 },
  { 0.0739092650156, 0.000318464305078 }, { 0.0393814803467, 0.000148320740628 } };

static void
make_blend (struct metered *plant, double closure)
{
  double x[4], u[4];
  metered_init (plant, 4, 3);
  metered_boundary (plant, BOUNDARY_MIX, "0 1 = 2");
  for (size_t s = 0; s < 3; s++) {
    metered_total (plant, s, blend[s].stated, blend[s].u);
  }
  for (size_t s = 0; s < 3; s++) {
    for (size_t c = 0; c < 4; c++) {
      x[c] = closure * blend[3 + 4 * s + c].stated;
      u[c] = closure * blend[3 + 4 * s + c].u;
    }
    metered_composition (plant, s, x, u);
  }
}

static void
whole_analyses (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  make_blend (&plant, 1);
  NEED (metered_reconcile (&plant, &s, &kind));
  NEAR (s.chi2, 4.5014261681, 1e-8);
  SAME_INT (s.freedom, 4);
  NEAR (s.z_critical, 2.92779841545, 1e-10);
  SAME_INT (s.adjustment_count, 15);
  for (size_t i = 0; i < 15; i++) {
    test_about ("figure %zu", i);
    NEAR (s.adjustments[i].moved_to, blend[i].estimate, 1e-8);
    NEAR (s.adjustments[i].moved_to_u, blend[i].u_estimate, 1e-7);
    NEAR (s.adjustments[i].z, blend[i].z, 1e-6);
  }
  for (size_t j = 0; j < 12; j++) {
    struct form flow = metered_column (&plant, j / 4, j % 4);
    struct form total = metered_stream (&plant, j / 4);
    test_about ("stream %zu, component %zu", j / 4, j % 4);
    NEAR (s.value[j], blend_flow[j][0], 1e-8);
    NEAR (solution_uncertainty (&s, &plant.network, &flow, NULL), blend_flow[j][1], 1e-7);
    NEAR (s.fraction[j], blend_fraction[j][0], 1e-8);
    NEAR (solution_uncertainty (&s, &plant.network, &flow, &total), blend_fraction[j][1], 1e-7);
    CHECK (s.fixed[j] && s.fixed_fraction[j]);
  }
  metered_clear (&plant);
}

/* An analysis brought to one beforehand says the same.  */
static void
closure_is_free (void)
{
  struct metered plant, closed;
  struct solution s, t;
  int kind;
  make_blend (&plant, 1);
  make_blend (&closed, 1 / 1.04);
  NEED (metered_reconcile (&plant, &s, &kind));
  NEED (metered_reconcile (&closed, &t, &kind));
  NEAR (t.chi2, s.chi2, 1e-8);
  for (size_t j = 0; j < 12; j++) {
    NEAR (t.value[j], s.value[j], 1e-9);
  }
  metered_clear (&plant);
  metered_clear (&closed);
}

/* ---- Fractions, a recovery and a ratio, against a minimiser that knows nothing of it ---- */

/* Of n0a, n0b, n1a, n1b; stream 2 is what stream 1 leaves of stream 0.  */
struct separator { double y[8], u[8]; };

static void
separator_figures (const double n[4], double g[8])
{
  double total[3] = { n[0] + n[1], n[2] + n[3], n[0] + n[1] - n[2] - n[3] };
  g[0] = total[0];
  g[1] = total[1];
  g[2] = total[2];
  g[3] = n[0] / total[0];
  g[4] = n[2] / total[1];
  g[5] = (n[0] - n[2]) / total[2];
  g[6] = n[2] / n[0];
  g[7] = total[1] / total[2];
}

static double
separator_chi2 (const gsl_vector *n, void *data)
{
  const struct separator *separator = data;
  double g[8], chi2 = 0, at[4];
  for (size_t i = 0; i < 4; i++) {
    at[i] = gsl_vector_get (n, i);
  }
  separator_figures (at, g);
  for (size_t i = 0; i < 8; i++) {
    chi2 += pow ((separator->y[i] - g[i]) / separator->u[i], 2);
  }
  return chi2;
}

/* By the simplex of Nelder and Mead, started over so that it does not stop short.  */
static double
least_chi2 (struct separator *separator, double n[4])
{
  gsl_multimin_function function = { separator_chi2, 4, separator };
  gsl_multimin_fminimizer *simplex
    = gsl_multimin_fminimizer_alloc (gsl_multimin_fminimizer_nmsimplex2, 4);
  double sides[4], chi2 = HUGE_VAL;
  for (int start = 0; start < 8; start++) {
    gsl_vector_view from = gsl_vector_view_array (n, 4), side = gsl_vector_view_array (sides, 4);
    gsl_vector_set_all (&side.vector, start < 4 ? 1 : 0.01);
    gsl_multimin_fminimizer_set (simplex, &function, &from.vector, &side.vector);
    for (int i = 0; i < 2000 && gsl_multimin_fminimizer_size (simplex) > 1e-9; i++) {
      gsl_multimin_fminimizer_iterate (simplex);
    }
    for (size_t i = 0; i < 4; i++) {
      n[i] = gsl_vector_get (simplex->x, i);
    }
    chi2 = gsl_multimin_fminimizer_minimum (simplex);
  }
  gsl_multimin_fminimizer_free (simplex);
  return chi2;
}

static void
agrees_with_simplex (void)
{
  static const double u[8] = { 1, 0.7, 0.6, 0.01, 0.005, 0.02, 0.01, 0.03 };
  unsigned long long seed = 5;
  for (size_t draw = 0; draw < 20; draw++) {
    double n[4] = { 60, 40, 50, 8 };
    struct separator separator;
    struct metered plant;
    struct solution s;
    int kind;
    separator_figures (n, separator.y);
    for (size_t i = 0; i < 8; i++) {             /* some draws with a gross error */
      separator.u[i] = u[i];
      separator.y[i] += u[i] * (metered_normal (&seed) + (draw % 4 == 3 && i == 4 ? 10 : 0));
    }
    metered_init (&plant, 2, 3);
    metered_boundary (&plant, BOUNDARY_SEPARATE, "0 = 1 2");
    for (size_t i = 0; i < 3; i++) {
      metered_total (&plant, i, separator.y[i], u[i]);
      metered_fraction (&plant, i, 0, separator.y[3 + i], u[3 + i]);
    }
    metered_ratio (&plant, metered_column (&plant, 1, 0), metered_column (&plant, 0, 0),
                   separator.y[6], u[6]);
    metered_ratio (&plant, metered_stream (&plant, 1), metered_stream (&plant, 2), separator.y[7],
                   u[7]);
    test_about ("draw %zu of seed 5", draw);
    NEED (metered_reconcile (&plant, &s, &kind));
    double chi2 = least_chi2 (&separator, n);
    SAME_INT (s.freedom, 4);
    NEAR (s.chi2, chi2, 1e-8);
    for (size_t i = 0; i < 4; i++) {
      NEAR (s.value[i], n[i], 1e-5);
    }
    metered_clear (&plant);
  }
}

/* ---- Nothing to reconcile: uncertainties go on by the law of propagation ---- */

static void
propagates (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 1, 4);
  metered_boundary (&plant, BOUNDARY_MIX, "0 1 2 = 3");
  metered_total (&plant, 0, 30, 0.3);
  metered_total (&plant, 1, 20, 0.4);
  metered_total (&plant, 2, 10, (double) NAN);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.status, BALANCE_DETERMINED);
  SAME_INT (s.freedom, 0);
  SAME_INT (s.adjustment_count, 0);
  NEED (s.covariance != NULL);
  NEAR (metered_total_u (&plant, &s, 3), 0.5, 1e-12);
  NEAR (metered_total_u (&plant, &s, 2), 0, 1e-12);
  struct form left = metered_stream (&plant, 0), right = metered_stream (&plant, 3);
  /* u(a / F) with F = a + b + c: sqrt ((b + c)^2 ua^2 + a^2 ub^2) / F^2.  */
  NEAR (solution_uncertainty (&s, &plant.network, &left, &right),
        sqrt (30 * 30 * 0.09 + 30 * 30 * 0.16) / 3600, 1e-12);
  metered_clear (&plant);
}

/* ---- Splits of unknown share ---- */

/* The composition of a split is one thing, seen three times: its weighted mean.  Its flows are
   another: one balance.  */
static void
split_of_unknown_share (void)
{
  static const double x[] = { 0.60, 0.62, 0.59 }, u[] = { 0.01, 0.02, 0.005 };
  static const struct meter meters[] = { { 100, 1 }, { 61, 1 }, { 42, 1 } };
  struct metered plant;
  struct solution s;
  double top = 0, bottom = 0;
  int kind;
  metered_init (&plant, 2, 3);
  metered_boundary (&plant, BOUNDARY_SPLIT, "0 = 1 2");
  add_meters (&plant, 3, meters);
  for (size_t i = 0; i < 3; i++) {
    metered_fraction (&plant, i, 0, x[i], u[i]);
    top += x[i] / (u[i] * u[i]);
    bottom += 1 / (u[i] * u[i]);
  }
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.freedom, 3);
  for (size_t i = 0; i < 3; i++) {
    struct form flow = metered_column (&plant, i, 0), total = metered_stream (&plant, i);
    test_about ("stream %zu", i);
    NEAR (s.fraction[2 * i], top / bottom, 1e-10);
    NEAR (solution_uncertainty (&s, &plant.network, &flow, &total), sqrt (1 / bottom), 1e-8);
    NEAR (metered_total_value (&plant, &s, i), meters[i].value + (i == 0 ? 1 : -1), 1e-10);
    NEAR (metered_total_u (&plant, &s, i), sqrt (2.0 / 3), 1e-8);
  }
  CHECK (s.mismatch < 1e-12);
  metered_clear (&plant);
}

/* A measured share of a split, and what it makes of two meters: least squares of s in
   (y1 - s F), (y2 - (1 - s) F), (share - s) with F exact.  */
static void
measured_share (void)
{
  const double F = 200, y1 = 120, y2 = 83, w = 1 / 4.0, ws = 1 / (0.01 * 0.01);
  const double share = (w * F * y1 + w * F * (F - y2) + ws * 0.62) / (2 * w * F * F + ws);
  const double x[] = { 0.7, 0.3 };
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 2, 3);
  metered_boundary (&plant, BOUNDARY_SPLIT, "0 = 1 2");
  metered_total (&plant, 0, F, (double) NAN);
  metered_composition (&plant, 0, x, NULL);
  metered_total (&plant, 1, y1, 2);
  metered_total (&plant, 2, y2, 2);
  metered_share (&plant, 1, 0, 0.62, 0.01);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.freedom, 2);
  NEAR (metered_total_value (&plant, &s, 1), share * F, 1e-10);
  NEAR (s.value[2], 0.7 * share * F, 1e-10);
  NEAR (s.value[5], 0.3 * (1 - share) * F, 1e-10);
  NEAR (metered_total_u (&plant, &s, 1), F / sqrt (2 * w * F * F + ws), 1e-8);
  metered_clear (&plant);
}

/* ---- Flows not below zero ---- */

/* in = out + vent; the meters would have the vent at -3.5.  Held at zero, in and out are one flow,
   seen twice.  */
static void
held_at_zero (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 1, 3);
  metered_boundary (&plant, BOUNDARY_MIX, "0 = 1 2");
  metered_total (&plant, 0, 100, 1);
  metered_total (&plant, 1, 106, 1);
  metered_total (&plant, 2, 0.5, 2);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.held_count, 1);
  NEED (s.held_count == 1);
  SAME_INT (s.held[0], 2);
  NEAR (s.value[0], 103, 1e-12);
  NEAR (s.value[1], 103, 1e-12);
  NEAR (s.value[2], 0, 1e-12);
  NEAR (s.chi2, 18 + 1.0 / 16, 1e-12);
  SAME_INT (s.negative_count, 0);
  metered_clear (&plant);
}

/* out = in + leak; flows and analyses would both have the leak below zero.  It is nothing then,
   what was analysed of it says nothing, and in and out are one gas, seen twice.  */
static void
held_as_a_whole (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 2, 3);
  metered_boundary (&plant, BOUNDARY_MIX, "0 1 = 2");
  metered_total (&plant, 0, 100, 1);
  metered_total (&plant, 2, 99, 1);
  metered_fraction (&plant, 0, 0, 0.50, 0.01);
  metered_fraction (&plant, 2, 0, 0.48, 0.01);
  metered_fraction (&plant, 1, 0, 0.90, 0.01);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.held_count, 2);
  NEAR (metered_total_value (&plant, &s, 0), 99.5, 1e-10);
  NEAR (metered_total_value (&plant, &s, 2), 99.5, 1e-10);
  NEAR (s.fraction[0], 0.49, 1e-10);
  NEAR (s.chi2, 0.5 + 2, 1e-9);
  SAME_INT (s.freedom, 2);
  SAME_INT (s.adjustments[4].class, FIGURE_UNOBSERVABLE);
  CHECK (isnan (s.adjustments[4].z));
  CHECK (!s.fixed_fraction[2] && isnan (s.fraction[2]));
  metered_clear (&plant);
}

/* An analysis that adds up to 1.1 does not press its flow to zero, however certain it is.  */
static void
poor_closure (void)
{
  static const double x[] = { 0.66, 0.33, 0.11 }, u[] = { 1e-4, 1e-4, 1e-4 };
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 3, 3);
  metered_boundary (&plant, BOUNDARY_MIX, "0 1 = 2");
  for (size_t i = 0; i < 3; i++) {
    metered_composition (&plant, i, x, u);
    metered_total (&plant, i, i == 2 ? 30 : 15, 0.1);
  }
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.freedom, 3);                       /* one balance for each component */
  CHECK (s.chi2 < 1e-12);
  NEAR (s.value[0], 9, 1e-10);
  NEAR (s.fraction[1], 0.3, 1e-10);
  metered_clear (&plant);
}

/* ---- Exact figures beside measured ones ---- */

/* Three flows without uncertainty that close but for the last digit, and a meter.  */
static void
last_digits_clash (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 1, 4);
  metered_boundary (&plant, BOUNDARY_MIX, "0 1 = 2");
  metered_boundary (&plant, BOUNDARY_MIX, "2 = 3");
  const double each = 0.05 / sqrt (3);
  metered_total (&plant, 0, 33.3, (double) NAN)->rounding = 0.05;
  metered_total (&plant, 1, 66.6, (double) NAN)->rounding = 0.05;
  metered_total (&plant, 2, 100.0, (double) NAN)->rounding = 0.05;
  metered_total (&plant, 3, 99.9, 0.5);
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.status, BALANCE_RECONCILED);
  SAME_INT (s.freedom, 2);
  NEED (s.by_digits != NULL);
  CHECK (s.by_digits[0] && s.by_digits[1] && s.by_digits[2] && !s.by_digits[3]);
  SAME_INT (s.adjustment_count, 4);
  NEAR (s.adjustments[0].stated_u, each, 1e-12);
  /* F = a + b; by hand: weights of F from the meters 100.0 and 99.9, of a + b from 99.9.  */
  double w = 1 / (each * each), q = 1 / (2 * each * each), m = 1 / 0.25;
  NEAR (s.value[2], (w * 100 + q * 99.9 + m * 99.9) / (w + q + m), 1e-12);
  CHECK (s.passed);
  metered_clear (&plant);
}

/* An exact figure that agrees stays exact; one that nothing bears on stays exact even if others do
   not.  */
static void
exact_stays_exact (void)
{
  struct metered plant;
  struct solution s;
  int kind;
  metered_init (&plant, 1, 5);
  metered_boundary (&plant, BOUNDARY_MIX, "0 1 = 2");
  metered_boundary (&plant, BOUNDARY_MIX, "2 3 = 4");
  metered_total (&plant, 0, 30, (double) NAN)->rounding = 0.5;
  metered_total (&plant, 1, 20.2, 0.3);
  metered_total (&plant, 2, 50, 0.4);
  metered_total (&plant, 3, 7, (double) NAN)->rounding = 0.5;
  NEED (metered_reconcile (&plant, &s, &kind));
  CHECK (s.by_digits == NULL);
  SAME_INT (s.adjustment_count, 2);
  NEAR (s.value[0], 30, 1e-14);
  metered_clear (&plant);

  metered_init (&plant, 1, 5);
  metered_boundary (&plant, BOUNDARY_MIX, "0 1 = 2");
  metered_boundary (&plant, BOUNDARY_MIX, "2 3 = 4");
  metered_total (&plant, 0, 30, (double) NAN)->rounding = 0.5;
  metered_total (&plant, 1, 20.2, 0.1);
  metered_total (&plant, 2, 50.5, 0.1);
  metered_total (&plant, 3, 7, (double) NAN)->rounding = 0.5;
  NEED (metered_reconcile (&plant, &s, &kind));
  NEED (s.by_digits != NULL);
  CHECK (s.by_digits[0] && !s.by_digits[3]);
  CHECK (s.passed);
  NEAR (metered_total_u (&plant, &s, 4), metered_total_u (&plant, &s, 2), 1e-12);
  metered_clear (&plant);
}

static const struct test_case cases[] = {
  { "a main meter and two branches meet in the middle", main_against_branches },
  { "a published network comes out as published", published_network },
  { "the figures that stand out most are left out one by one", published_elimination },
  { "what no meter reaches stays open", partly_measured },
  { "an exchanger with its bypass", exchanger_with_bypass },
  { "flows and whole analyses are reconciled together", whole_analyses },
  { "an analysis counts the same before and after closing", closure_is_free },
  { "fractions and ratios agree with a simplex", agrees_with_simplex },
  { "without surplus the uncertainties are passed on", propagates },
  { "a split of unknown share has one composition", split_of_unknown_share },
  { "a measured share counts", measured_share },
  { "a flow is not reconciled to below zero", held_at_zero },
  { "a stream that would run backwards is held as a whole", held_as_a_whole },
  { "an analysis far from one leaves its flow alone", poor_closure },
  { "exact figures that clash count with their digits", last_digits_clash },
  { "exact figures that agree stay exact", exact_stays_exact },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
