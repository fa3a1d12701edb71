/* ISO 6976:2016, clauses 5 to 10: every figure follows from four sums over the composition,

     G = sum x_i Hc_i    W = sum x_i b_i    M = sum x_i M_i    S = sum x_i s_i,

   Hc the gross molar calorific value, b the atoms of hydrogen.  Net: N = G - W/2 L.  Z = 1 - p/p0
   S^2, V = Z R T/p, d = M/M_air Z_air/Z; by mass G/M, by volume G/V, Wobbe G/(V sqrt d).

   Uncertainties: annex B, written with the covariances of the four sums instead of one formula for
   each figure.  The sums vary with the fractions, cov = sum sum v_i u_i r_ij u_j v_j^T, v = (Hc, b,
   M, s), and with the tables: sum x_i^2 u(Hc_i)^2 on G, sum x_i^2 u(s_i)^2 on S, and the atomic
   weights on M, which is the same for every component that has the element.                      */
#include "config.h"
#include "property/calorific.h"

#include <math.h>
#include <stdio.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "property/calorific_private.h"
#include "support/fault.h"
#include "units/constants.h"

/* A temperature within this of the standard's is meant to be it, K.  */
static const double SAME = 0.01;

/* Range of pressure and of Z (ISO 6976:2016, clauses 1 and 5), and the share from which on a
   component counts (clause 1).                                                                  */
static const double P_LOWEST = 90e3, P_HIGHEST = 110e3, Z_LOWEST = 0.9, TRACE = 5e-5;

enum { SUM_G, SUM_W, SUM_M, SUM_S, SUMS };

bool
calorific_is_net (int figure)
{
  return figure == CALORIFIC_NET_MOLAR || figure == CALORIFIC_NET_MASS
         || figure == CALORIFIC_NET_VOLUME || figure == CALORIFIC_NET_WOBBE;
}

bool
calorific_is_wobbe (int figure)
{
  return figure == CALORIFIC_WOBBE || figure == CALORIFIC_NET_WOBBE;
}

/* The question with its places in the tables.  */
struct frame {
  const struct calorific_tables *tables;
  const struct composition *gas;
  const struct calorific_question *ask;
  const struct calorific_constants *constants;
  size_t combustion, metering;           /* METERINGS: not one of the standard's */
  double T, R;
  double L, air, air_Z;                  /* of water, J/mol; of dry air, kg/mol, at 101.325 kPa */
};

struct totals {
  double sum[SUMS];
  double cov[SUMS][SUMS];
  double atoms[ATOMS];                   /* sum x_i n_i */
  unsigned origins;
};

/* One part of the gas: v, and the standard uncertainties of Hc and s.  */
struct single { double v[SUMS], u_H, u_s; const double *atoms; enum calorific_origin origin; };

/* A constant, moved if it is to be.  */
static double
moved (const struct frame *f, enum calorific_doubt_kind kind, double value, const double *u)
{
  return value + calorific_move (&f->ask->moves,
                                 &(struct calorific_doubt) { kind, NULL, *u, u });
}

/* ---- the question ---- */

static size_t
place_of (double T, size_t count)
{
  size_t i = 0;
  while (i < count && !(fabs (T - calorific_temperature[i]) <= SAME))
    i++;
  return i;
}

static bool
refuse_temperature (const char *which, double T, enum calorific_edition edition,
                    const char *known, struct fault *fault)
{
  char what[160], way[160];
  snprintf (what, sizeof what, "%s has no %s temperature of %.6g degC",
            calorific_edition_name (edition), which, T - ICE_POINT);
  snprintf (way, sizeof way, "it has %s", known);
  return fault_set (fault, MESSAGE_RANGE, what, way);
}

static bool
check_metering (struct frame *f, struct fault *fault)
{
  const struct calorific_question *ask = f->ask;
  bool old = ask->edition == CALORIFIC_1995;
  char what[160];
  if (!(ask->p > 0 && isfinite (ask->p)) || !(ask->T_metering > 0 && isfinite (ask->T_metering)))
    return fault_set (fault, MESSAGE_RANGE, "a metering temperature and pressure are above zero",
                      NULL);
  f->metering = place_of (ask->T_metering, METERINGS);
  if (!ask->real && !ask->by_standard)
    return true;
  if (f->metering == METERINGS || isnan (f->constants->air_Z[f->metering]))
    return refuse_temperature ("metering", ask->T_metering, ask->edition,
                               old ? "0, 15 and 20 degC" : "0, 15, 20 degC and 60 degF", fault);
  f->T = calorific_temperature[f->metering];
  if (ask->p >= P_LOWEST && ask->p <= P_HIGHEST)
    return true;
  snprintf (what, sizeof what, "%s holds from 90 to 110 kPa, not at %.6g kPa",
            calorific_edition_name (ask->edition), ask->p / 1e3);
  return fault_set (fault, MESSAGE_RANGE, what, "state a metering pressure within that");
}

static bool
make_frame (const struct calorific_tables *tables, const struct composition *gas,
            const struct calorific_question *ask, struct frame *f, struct fault *fault)
{
  bool old = ask->edition == CALORIFIC_1995;
  *f = (struct frame) {
    .tables = tables, .gas = gas, .ask = ask, .constants = &tables->edition[ask->edition],
    .T = ask->T_metering, .combustion = place_of (ask->T_combustion, COMBUSTIONS)
  };
  f->R = GAS_CONSTANT;
  if (f->combustion == COMBUSTIONS || isnan (f->constants->L[f->combustion]))
    return refuse_temperature ("combustion", ask->T_combustion, ask->edition,
                               old ? "0, 15, 20 and 25 degC" : "0, 15, 20, 25 degC and 60 degF",
                               fault);
  if (!check_metering (f, fault))
    return false;
  const struct calorific_constants *c = f->constants;
  if (ask->by_standard)
    f->R = moved (f, CALORIFIC_DOUBT_R, c->R, &c->u_R);
  f->L = moved (f, CALORIFIC_DOUBT_WATER, c->L[f->combustion], &c->u_L[f->combustion]);
  f->air = moved (f, CALORIFIC_DOUBT_AIR, c->air_molar_mass, &c->u_air_molar_mass);
  if (ask->real)
    f->air_Z = moved (f, CALORIFIC_DOUBT_AIR_Z, c->air_Z[f->metering],
                      &c->u_air_Z[f->metering]);
  return true;
}

/* ---- the sums ---- */

/* The summation factor of a part, for real gases.  */
static bool
summation (const struct frame *f, const struct species *species,
           const struct calorific_component *component, struct single *one, struct fault *fault)
{
  const struct calorific_row *row = &component->in[f->ask->edition];
  if (!isnan (row->s[f->metering])) {
    one->v[SUM_S] = row->s[f->metering];
    one->u_s = row->u_s;
    return true;
  }
  if (calorific_summation (species, f->T, &one->v[SUM_S], &one->u_s))
    return true;
  fault_set (fault, MESSAGE_MODEL_LACKS, calorific_edition_name (f->ask->edition), species->key);
  fault_hint (fault, "ask for ideal volumes");
  return false;
}

static void
move_single (const struct frame *f, const struct species *species,
             const struct calorific_row *row, struct single *one)
{
  const struct calorific_moves *moves = &f->ask->moves;
  if (moves->by == NULL)
    return;
  one->v[SUM_G] += calorific_move (moves, &(struct calorific_doubt) {
      CALORIFIC_DOUBT_HEAT, species->key, one->u_H, &row->u_H });
  one->v[SUM_S] += calorific_move (moves, &(struct calorific_doubt) {
      CALORIFIC_DOUBT_SUMMATION, species->key, one->u_s, &row->u_s });
}

static bool
look_up (const struct frame *f, size_t i, struct single *one, struct fault *fault)
{
  static const double none[ATOMS];
  const struct species *species = f->gas->species[i];
  const struct calorific_component *component = calorific_find (f->tables, species);
  if (component == NULL && f->gas->fraction[i] > TRACE)
    return fault_set (fault, MESSAGE_CALORIFIC_UNKNOWN, species->key, NULL);
  *one = (struct single) { .atoms = none, .origin = CALORIFIC_TRACE };
  one->v[SUM_M] = species->molar_mass;
  if (component != NULL) {
    const struct calorific_row *row = &component->in[f->ask->edition];
    one->origin = row->origin;
    one->atoms = component->atoms;
    one->v[SUM_G] = row->H[f->combustion];
    one->v[SUM_W] = component->atoms[ATOM_H];
    one->u_H = row->u_H;
    if (f->ask->by_standard && !isnan (row->molar_mass))
      one->v[SUM_M] = row->molar_mass;
    if (row->origin == CALORIFIC_NO_FUEL)
      one->v[SUM_W] = 0;                 /* what does not burn makes no water */
  }
  /* What is left out of the calorific value as a trace is left out of Z.  */
  if (f->ask->real && component != NULL && !summation (f, species, component, one, fault))
    return false;
  if (component != NULL)
    move_single (f, species, &component->in[f->ask->edition], one);
  return true;
}

/* cov += u_i r_ij u_j v_i v_j^T for this i and all j.  */
static bool
add_covariance (const struct frame *f, size_t i, const struct single *one, struct totals *t,
                struct fault *fault)
{
  const struct calorific_question *ask = f->ask;
  size_t first = ask->correlation == NULL ? i : 0;
  size_t end = ask->correlation == NULL ? i + 1 : f->gas->count;
  for (size_t j = first; j < end; j++) {
    double c = ask->u[i] * ask->u[j];
    struct single other = *one;
    if (i != j) {
      c *= ask->correlation[i * f->gas->count + j];
      if (!look_up (f, j, &other, fault))
        return false;
    }
    for (size_t k = 0; k < SUMS; k++)
      for (size_t l = 0; l < SUMS; l++)
        t->cov[k][l] += c * one->v[k] * other.v[l];
  }
  return true;
}

static bool
add_up (const struct frame *f, struct totals *t, struct fault *fault)
{
  const double *u_atom = f->constants->u_atom;
  *t = (struct totals) { .origins = 0 };
  for (size_t i = 0; i < f->gas->count; i++) {
    double x = f->gas->fraction[i];
    struct single one;
    if (!look_up (f, i, &one, fault))
      return false;
    for (size_t k = 0; k < SUMS; k++)
      t->sum[k] += x * one.v[k];
    for (size_t k = 0; k < ATOMS; k++)
      t->atoms[k] += x * one.atoms[k];
    t->cov[SUM_G][SUM_G] += x * x * one.u_H * one.u_H;
    t->cov[SUM_S][SUM_S] += x * x * one.u_s * one.u_s;
    if (x > 0)
      t->origins |= 1u << one.origin;
    if (f->ask->u != NULL && !add_covariance (f, i, &one, t, fault))
      return false;
  }
  t->sum[SUM_M] += calorific_weights_move (f->tables, f->ask->edition, f->gas, &f->ask->moves);
  for (size_t k = 0; k < ATOMS; k++)
    t->cov[SUM_M][SUM_M] += t->atoms[k] * t->atoms[k] * u_atom[k] * u_atom[k];
  return true;
}

/* ---- the figures ---- */

/* A figure is (G, N or 1) M^m Z^z (RT/p)^r (M_air/Z_air)^a.  */
struct shape { bool gross, net; double m, z, r, a; };

static const struct shape shapes[CALORIFIC_FIGURES] = {
  [CALORIFIC_GROSS_MOLAR] = { true, false, 0, 0, 0, 0 },
  [CALORIFIC_NET_MOLAR] = { false, true, 0, 0, 0, 0 },
  [CALORIFIC_GROSS_MASS] = { true, false, -1, 0, 0, 0 },
  [CALORIFIC_NET_MASS] = { false, true, -1, 0, 0, 0 },
  [CALORIFIC_GROSS_VOLUME] = { true, false, 0, -1, -1, 0 },
  [CALORIFIC_NET_VOLUME] = { false, true, 0, -1, -1, 0 },
  [CALORIFIC_WOBBE] = { true, false, -0.5, -0.5, -1, 0.5 },
  [CALORIFIC_NET_WOBBE] = { false, true, -0.5, -0.5, -1, 0.5 },
  [CALORIFIC_DENSITY] = { false, false, 1, -1, -1, 0 },
  [CALORIFIC_RELATIVE_DENSITY] = { false, false, 1, -1, 0, -1 },
  [CALORIFIC_Z] = { false, false, 0, 1, 0, 0 },
  [CALORIFIC_MOLAR_MASS] = { false, false, 1, 0, 0, 0 },
  [CALORIFIC_MOLAR_VOLUME] = { false, false, 0, 1, 1, 0 },
};

/* What stands behind G, N or 1 in every figure, and Z.  */
static void
find_factors (const struct frame *f, const struct totals *t, double factor[])
{
  double q = f->ask->p / STANDARD_ATMOSPHERE, S = t->sum[SUM_S], M = t->sum[SUM_M];
  double Z = f->ask->real ? 1 - q * S * S : 1;
  double air_Z = f->ask->real ? 1 - q * (1 - f->air_Z) : 1;
  double V = Z * f->R * f->T / f->ask->p, d = M / f->air * air_Z / Z;
  factor[CALORIFIC_GROSS_MOLAR] = factor[CALORIFIC_NET_MOLAR] = 1;
  factor[CALORIFIC_GROSS_MASS] = factor[CALORIFIC_NET_MASS] = 1 / M;
  factor[CALORIFIC_GROSS_VOLUME] = factor[CALORIFIC_NET_VOLUME] = 1 / V;
  factor[CALORIFIC_WOBBE] = factor[CALORIFIC_NET_WOBBE] = 1 / (V * sqrt (d));
  factor[CALORIFIC_DENSITY] = M / V;
  factor[CALORIFIC_RELATIVE_DENSITY] = d;
  factor[CALORIFIC_Z] = Z;
  factor[CALORIFIC_MOLAR_MASS] = M;
  factor[CALORIFIC_MOLAR_VOLUME] = V;
}

static double
square (double a)
{
  return a * a;
}

/* What the uncertainties of all figures have in common.  */
struct common {
  double R, air;                         /* relative variances of R and of M_air/Z_air */
  double M, S;                           /* relative change by M, and of Z by S */
  double L, u_water;                     /* u_water: sum x_i b_i u(L) */
};

static struct common
find_common (const struct frame *f, const struct totals *t, double Z)
{
  const struct calorific_constants *c = f->constants;
  double q = f->ask->p / STANDARD_ATMOSPHERE;
  struct common found = {
    .R = f->ask->by_standard ? square (c->u_R / c->R) : 0,
    .air = square (c->u_air_molar_mass / c->air_molar_mass),
    .M = 1 / t->sum[SUM_M],
    .L = c->L[f->combustion],
    .u_water = t->sum[SUM_W] * c->u_L[f->combustion]
  };
  if (f->ask->real) {
    double air_Z = 1 - q * (1 - c->air_Z[f->metering]);
    found.air += square (q * c->u_air_Z[f->metering] / air_Z);
    found.S = -2 * q * t->sum[SUM_S] / Z;
  }
  return found;
}

/* Standard uncertainty of a figure of value Q = (G, N or 1) FACTOR: its derivatives by the sums
   on both sides of their covariances, and what comes from the constants.                        */
static double
uncertainty (const struct totals *t, const struct shape *shape, double Q, double factor,
             const struct common *common, bool correlated)
{
  double water = shape->net ? factor / 2 : 0;
  double g[SUMS] = {
    [SUM_G] = shape->gross || shape->net ? factor : 0,
    [SUM_W] = -water * common->L,
    [SUM_M] = Q * shape->m * common->M,
    [SUM_S] = Q * shape->z * common->S
  };
  double variance = square (water * common->u_water)
                    + square (Q * shape->r) * common->R + square (Q * shape->a) * common->air;
  for (size_t k = 0; k < SUMS; k++)
    variance += square (g[k]) * t->cov[k][k];
  for (size_t k = 0; correlated && k < SUMS; k++)
    for (size_t l = 0; l < k; l++)
      variance += 2 * g[k] * t->cov[k][l] * g[l];
  return variance > 0 ? sqrt (variance) : 0;
}

static bool
check_Z (double Z, struct fault *fault)
{
  char what[160];
  if (!(Z <= Z_LOWEST))
    return true;
  snprintf (what, sizeof what, "ISO 6976 holds for Z above 0.9; here it would be %.4f", Z);
  return fault_set (fault, MESSAGE_RANGE, what, "ask for ideal volumes");
}

/* The figures from the sums.  */
static bool
fill (const struct frame *f, const struct totals *t, struct calorific *found, struct fault *fault)
{
  double factor[CALORIFIC_FIGURES];
  find_factors (f, t, factor);
  if (!check_Z (factor[CALORIFIC_Z], fault))
    return false;
  struct common common = find_common (f, t, factor[CALORIFIC_Z]);
  double gross = t->sum[SUM_G], net = gross - t->sum[SUM_W] / 2 * f->L;
  bool stated = f->ask->edition == CALORIFIC_2016;
  found->origins = t->origins;
  found->G = gross;
  found->W = t->sum[SUM_W];
  found->M = t->sum[SUM_M];
  found->S = t->sum[SUM_S];
  for (size_t i = 0; i < CALORIFIC_FIGURES; i++) {
    const struct shape *shape = &shapes[i];
    double Q = factor[i] * (shape->gross ? gross : shape->net ? net : 1), u = 0;
    if (stated)
      u = uncertainty (t, shape, Q, factor[i], &common, f->ask->u != NULL);
    if (!isfinite (Q) || !isfinite (u))
      return fault_set (fault, MESSAGE_NOT_FINITE, NULL, NULL);
    found->value[i] = Q;
    found->u[i] = stated ? u : (double) NAN;
  }
  return true;
}

bool
calorific_compute (const struct calorific_tables *tables, const struct composition *gas,
                   const struct calorific_question *ask, struct calorific *found,
                   struct fault *fault)
{
  struct frame f;
  struct totals t;
  struct calorific made;
  if (!make_frame (tables, gas, ask, &f, fault) || !add_up (&f, &t, fault)
      || !fill (&f, &t, &made, fault))
    return false;
  calorific_record (tables, gas, ask, &made);
  *found = made;
  return true;
}
