/* How a figure by ISO 6976 came about: the sums over the composition, then the figure.  */
#include "config.h"
#include "property/calorific_private.h"

#include <math.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "support/arena.h"
#include "units/constants.h"
#include "units/workings.h"

/* A question with what was found, and its terms.  */
struct account {
  struct workings *workings;
  const struct calorific_tables *tables;
  const struct composition *gas;
  const struct calorific_question *ask;
  const struct calorific *found;
  const char **terms, **sources;
  const char *standard;                  /* "ISO 6976:2016" */
  double R, T, p, Z, V, d, N;
};

static bool
is_heat (int figure)
{
  return figure == CALORIFIC_GROSS_MOLAR || figure == CALORIFIC_GROSS_MASS
         || figure == CALORIFIC_GROSS_VOLUME || figure == CALORIFIC_WOBBE
         || calorific_is_net (figure);
}

static bool
is_by_volume (int figure)
{
  return figure == CALORIFIC_GROSS_VOLUME || figure == CALORIFIC_NET_VOLUME
         || calorific_is_wobbe (figure)
         || figure == CALORIFIC_DENSITY || figure == CALORIFIC_MOLAR_VOLUME;
}

/* The row of a part; null where nothing is known of it.  */
static const struct calorific_row *
row_of (const struct account *a, size_t i)
{
  const struct calorific_component *c = calorific_find (a->tables, a->gas->species[i]);
  return c != NULL ? &c->in[a->ask->edition] : NULL;
}

/* The place of a temperature among the standard's.  */
static size_t
place_of (double T)
{
  size_t at = 0;
  for (size_t i = 1; i < COMBUSTIONS; i++)
    if (fabs (calorific_temperature[i] - T) < fabs (calorific_temperature[at] - T))
      at = i;
  return at;
}

/* G = sum x_i H_i, and for net N = G - W L/2.  */
static void
record_heat (struct account *a)
{
  const size_t n = a->gas->count, at = place_of (a->ask->T_combustion);
  double *H = ARENA_ARRAY (a->workings->arena, n, double);
  double *b = ARENA_ARRAY (a->workings->arena, n, double);
  for (size_t i = 0; i < n; i++) {
    const struct calorific_component *c = calorific_find (a->tables, a->gas->species[i]);
    const struct calorific_row *row = row_of (a, i);
    H[i] = row != NULL ? row->H[at] : 0;
    b[i] = row != NULL && row->origin != CALORIFIC_NO_FUEL ? c->atoms[ATOM_H] : 0;
  }
  workings_add (a->workings, &(struct step) {
      .name = "gross calorific value, molar", .formula = "G = sum(x_i H_i)", .value = a->found->G,
      .unit = "J/mol", .source = a->standard, .term_count = (unsigned) n, .terms = a->terms,
      STEP_COLUMNS ({ "x_i", a->gas->fraction, "mol/mol", NULL, NULL },
                    { "H_i", H, "J/mol", NULL, a->sources }) });
  if (!calorific_is_net (a->ask->wanted))
    return;
  workings_add (a->workings, &(struct step) {
      .name = "atoms of hydrogen in what burns", .formula = "W = sum(x_i b_i)",
      .value = a->found->W, .unit = "1", .source = a->standard, .term_count = (unsigned) n,
      .terms = a->terms,
      STEP_COLUMNS ({ "x_i", a->gas->fraction, "mol/mol", NULL, NULL },
                    { "b_i", b, "1", "the formula", NULL }) });
  workings_add (a->workings, &(struct step) {
      .name = "net calorific value, molar", .formula = "N = G - W L/2", .value = a->N,
      .unit = "J/mol", .source = a->standard,
      STEP_SYMBOLS (SYMBOL ("G", a->found->G, "J/mol"), SYMBOL ("W", a->found->W, "1"),
                    CONSTANT ("L", a->tables->edition[a->ask->edition].L[at], "J/mol",
                              a->standard)) });
}

/* By the standard's own molar masses, or by ours.  */
static void
record_molar_mass (const struct account *a)
{
  struct step step = { .name = "molar mass", .formula = "M = sum(x_i M_i)", .value = a->found->M,
                       .unit = "kg/mol", .source = STEP_DEFINITION, .gas = a->gas };
  if (!a->ask->by_standard) {
    workings_add (a->workings, &step);
    return;
  }
  const size_t n = a->gas->count;
  double *M = ARENA_ARRAY (a->workings->arena, n, double);
  for (size_t i = 0; i < n; i++) {
    const struct calorific_row *row = row_of (a, i);
    M[i] = row != NULL && !isnan (row->molar_mass) ? row->molar_mass
                                                   : a->gas->species[i]->molar_mass;
  }
  const struct step_column columns[] = { { "x_i", a->gas->fraction, "mol/mol", NULL, NULL },
                                         { "M_i", M, "kg/mol", NULL, a->sources } };
  step.gas = NULL;
  step.term_count = (unsigned) n;
  step.terms = a->terms;
  step.columns = columns;
  step.column_count = 2;
  workings_add (a->workings, &step);
}

/* Z = 1 - p/p0 S^2, S = sum x_i s_i.  */
static void
record_Z (struct account *a)
{
  const size_t n = a->gas->count, at = place_of (a->ask->T_metering);
  double *s = ARENA_ARRAY (a->workings->arena, n, double), u;
  for (size_t i = 0; i < n; i++) {
    const struct calorific_row *row = row_of (a, i);
    if (row != NULL && !isnan (row->s[at]))
      s[i] = row->s[at];
    else if (row != NULL && !calorific_summation (a->gas->species[i], a->T, &s[i], &u))
      s[i] = 0;
  }
  workings_add (a->workings, &(struct step) {
      .name = "sum of the summation factors", .formula = "S = sum(x_i s_i)",
      .value = a->found->S, .unit = "1", .source = a->standard, .term_count = (unsigned) n,
      .terms = a->terms,
      STEP_COLUMNS ({ "x_i", a->gas->fraction, "mol/mol", NULL, NULL },
                    { "s_i", s, "1", NULL, a->sources }) });
  workings_add (a->workings, &(struct step) {
      .name = "compression factor", .formula = "Z = 1 - p/p_0 S^2", .value = a->Z, .unit = "1",
      .source = a->standard,
      STEP_SYMBOLS (SYMBOL ("S", a->found->S, "1"), SYMBOL ("p", a->p, "Pa"),
                    CONSTANT ("p_0", STANDARD_ATMOSPHERE, "Pa", a->standard)) });
}

static void
record_volume (const struct account *a)
{
  workings_add (a->workings, &(struct step) {
      .name = "volume of a mole", .formula = a->ask->real ? "V = Z R T/p" : "V = R T/p",
      .value = a->V, .unit = "m3/mol", .source = a->standard,
      STEP_SYMBOLS (CONSTANT ("R", a->R, "J/(mol K)",
                              a->ask->by_standard ? a->standard : STEP_SI),
                    SYMBOL ("T", a->T, "K"), SYMBOL ("p", a->p, "Pa"), SYMBOL ("Z", a->Z, "1"))
    });
}

/* d = M/M_air Z_air/Z, with the compression factor of air at the pressure.  */
static void
record_relative_density (const struct account *a)
{
  const struct calorific_constants *c = &a->tables->edition[a->ask->edition];
  if (!a->ask->real) {
    workings_add (a->workings, &(struct step) {
        .name = "relative density", .formula = "d = M/M_air", .value = a->d, .unit = "1",
        .source = a->standard,
        STEP_SYMBOLS (SYMBOL ("M", a->found->M, "kg/mol"),
                      CONSTANT ("M_air", c->air_molar_mass, "kg/mol", a->standard)) });
    return;
  }
  workings_add (a->workings, &(struct step) {
      .name = "relative density",
      .formula = "d = M/M_air (1 - p/p_0 (1 - Z_air))/Z", .value = a->d, .unit = "1",
      .source = a->standard,
      STEP_SYMBOLS (SYMBOL ("M", a->found->M, "kg/mol"),
                    CONSTANT ("M_air", c->air_molar_mass, "kg/mol", a->standard),
                    CONSTANT ("Z_air", c->air_Z[place_of (a->ask->T_metering)], "1", a->standard),
                    SYMBOL ("Z", a->Z, "1"), SYMBOL ("p", a->p, "Pa"),
                    CONSTANT ("p_0", STANDARD_ATMOSPHERE, "Pa", a->standard)) });
}

static void
record_figure (const struct account *a)
{
  static const struct { const char *name, *gross, *net, *unit; } told[CALORIFIC_FIGURES] = {
    [CALORIFIC_GROSS_MASS] = { "gross calorific value by mass", "H = G/M", NULL, "J/kg" },
    [CALORIFIC_NET_MASS] = { "net calorific value by mass", NULL, "H = N/M", "J/kg" },
    [CALORIFIC_GROSS_VOLUME] = { "gross calorific value by volume", "H = G/V", NULL, "J/m3" },
    [CALORIFIC_NET_VOLUME] = { "net calorific value by volume", NULL, "H = N/V", "J/m3" },
    [CALORIFIC_WOBBE] = { "Wobbe index", "H = G/(V sqrt(d))", NULL, "J/m3" },
    [CALORIFIC_NET_WOBBE] = { "net Wobbe index", NULL, "H = N/(V sqrt(d))", "J/m3" },
    [CALORIFIC_DENSITY] = { "density", "rho = M/V", NULL, "kg/m3" },
  };
  const int i = a->ask->wanted;
  if (told[i].name == NULL)
    return;
  workings_add (a->workings, &(struct step) {
      .name = told[i].name, .formula = told[i].gross != NULL ? told[i].gross : told[i].net,
      .value = a->found->value[i], .unit = told[i].unit, .source = a->standard,
      STEP_SYMBOLS (SYMBOL ("G", a->found->G, "J/mol"), SYMBOL ("N", a->N, "J/mol"),
                    SYMBOL ("M", a->found->M, "kg/mol"), SYMBOL ("V", a->V, "m3/mol"),
                    SYMBOL ("d", a->d, "1")) });
}

void
calorific_record (const struct calorific_tables *tables, const struct composition *gas,
                  const struct calorific_question *ask, const struct calorific *found)
{
  const int wanted = ask->wanted;
  struct account a = { .workings = ask->workings, .tables = tables, .gas = gas, .ask = ask,
                       .found = found, .standard = calorific_edition_name (ask->edition),
                       .p = ask->p, .Z = found->value[CALORIFIC_Z],
                       .V = found->value[CALORIFIC_MOLAR_VOLUME],
                       .d = found->value[CALORIFIC_RELATIVE_DENSITY],
                       .N = found->value[CALORIFIC_NET_MOLAR] };
  if (a.workings == NULL)
    return;
  const bool exact = ask->real || ask->by_standard;
  a.R = ask->by_standard ? tables->edition[ask->edition].R : GAS_CONSTANT;
  a.T = exact ? calorific_temperature[place_of (ask->T_metering)] : ask->T_metering;
  a.terms = ARENA_ARRAY (a.workings->arena, gas->count, const char *);
  a.sources = ARENA_ARRAY (a.workings->arena, gas->count, const char *);
  for (size_t i = 0; i < gas->count; i++) {
    const struct calorific_row *row = row_of (&a, i);
    a.terms[i] = gas->species[i]->key;
    a.sources[i] = row != NULL ? row->source : "none known, a trace: zero";
  }
  if (is_heat (wanted))
    record_heat (&a);
  const bool mass = wanted == CALORIFIC_GROSS_MASS || wanted == CALORIFIC_NET_MASS;
  const bool relative = calorific_is_wobbe (wanted) || wanted == CALORIFIC_RELATIVE_DENSITY;
  if (mass || relative || wanted == CALORIFIC_DENSITY || wanted == CALORIFIC_MOLAR_MASS)
    record_molar_mass (&a);
  if (ask->real && (relative || is_by_volume (wanted) || wanted == CALORIFIC_Z))
    record_Z (&a);
  if (is_by_volume (wanted))
    record_volume (&a);
  if (relative)
    record_relative_density (&a);
  record_figure (&a);
}
