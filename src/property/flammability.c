#include "config.h"
#include "property/flammability.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"
#include "units/workings.h"

/* Oxygen in dry air, mol/mol (U.S. Standard Atmosphere, 1976, Table 3: 0.209476); the rest of a
   gas counts as richer in it from half a per cent of that on, which is rounding.                */
static const double oxygen_in_air = 0.2095, enriched_from = 0.2105;
/* Inert parts below this are rounding too, mol/mol.  */
static const double inert_least = 1e-6;
/* Parts without a published limit may be this much of what burns: common practice, no source.  */
static const double unknown_most = 0.01;

enum role { ROLE_FUEL, ROLE_OXYGEN, ROLE_OXIDISER, ROLE_INERT, ROLE_UNKNOWN };

/* Is WORD one of the flags, which are parted by bars?  */
static bool
has_flag (const struct species *species, const char *word)
{
  size_t n = strlen (word);
  for (const char *at = species->flags; *at != '\0'; at += strspn (at, "|")) {
    size_t length = strcspn (at, "|");
    if (length == n && memcmp (at, word, n) == 0)
      return true;
    at += length;
  }
  return false;
}

static struct flammable_limits
limits_of (const struct species *species, const struct flammable_limits stated[], size_t n)
{
  struct flammable_limits found = {
    species, species->lower_flammable, species->upper_flammable
  };
  for (size_t i = 0; i < n; i++) {
    if (stated[i].species != species)
      continue;
    if (!isnan (stated[i].lower))
      found.lower = stated[i].lower;
    if (!isnan (stated[i].upper))
      found.upper = stated[i].upper;
  }
  return found;
}

double
flammability_lower (const struct species *species, const struct flammable_limits stated[],
                    size_t n)
{
  return limits_of (species, stated, n).lower;
}

/* A gas that no table calls harmless may burn.  */
static enum role
role_of (const struct species *species, double lower)
{
  if (strcmp (species->key, "O2") == 0)
    return ROLE_OXYGEN;
  if (lower > 0)                         /* NAN: none known */
    return ROLE_FUEL;
  if (has_flag (species, "oxidiser"))
    return ROLE_OXIDISER;
  if (strcmp (species->key, "H2O") == 0)
    return ROLE_INERT;
  bool burns = has_flag (species, "flammable") || has_flag (species, "pyrophoric");
  bool known = species->origin == SPECIES_TABLE && species->flags[0] != '\0';
  return known && !burns ? ROLE_INERT : ROLE_UNKNOWN;
}

/* Mol of oxygen that a mol of fuel burns with, to CO2, H2O, N2 and SO2; NAN if it has other
   elements.                                                                                     */
static double
oxygen_needed (const struct species *species)
{
  double left = 0;
  for (const char *at = species->formula; *at != '\0'; at++)
    left += *at >= 'A' && *at <= 'Z';    /* elements, each once: the formula is in Hill order */
  static const struct { char symbol[2]; double oxygen; } burns[] = {
    { "C", 1 }, { "H", 0.25 }, { "D", 0.25 }, { "N", 0 }, { "O", -0.5 }, { "S", 1 }
  };
  double needed = 0;
  for (size_t i = 0; i < sizeof burns / sizeof burns[0]; i++) {
    double atoms = species_atoms (species, burns[i].symbol);
    needed += atoms * burns[i].oxygen;
    left -= atoms > 0;
  }
  return left > 0.5 ? (double) NAN : needed;
}

/* Sums over the parts.  */
struct tally {
  struct sum fuel, by_lower, by_upper, oxygen_needed, unknown;
  double oxygen, oxidiser;
  double most_oxidiser, most_pyrophoric, most_unknown, most_inestimable;
};

/* Keeps the SPECIES with the largest X.  */
static void
keep_largest (const struct species **kept, double *most, const struct species *species, double x)
{
  if (x > *most) {
    *most = x;
    *kept = species;
  }
}

static void
add_fuel (struct tally *t, struct flammability *f, const struct flammable_limits *limits, double x)
{
  double needed = oxygen_needed (limits->species);
  sum_add (&t->fuel, x);
  sum_add (&t->by_lower, x / limits->lower);
  sum_add (&t->by_upper, x / limits->upper);             /* NAN if there is none */
  if (isnan (needed))
    keep_largest (&f->no_estimate, &t->most_inestimable, limits->species, x);
  else
    sum_add (&t->oxygen_needed, x * needed);
}

static void
add_part (struct tally *t, struct flammability *f, const struct flammable_limits *limits, double x)
{
  const struct species *species = limits->species;
  if (has_flag (species, "pyrophoric"))
    keep_largest (&f->pyrophoric, &t->most_pyrophoric, species, x);
  switch (role_of (species, limits->lower)) {
  case ROLE_FUEL:
    add_fuel (t, f, limits, x);
    break;
  case ROLE_OXYGEN:
    t->oxygen += x;
    break;
  case ROLE_OXIDISER:
    t->oxidiser += x;
    keep_largest (&f->oxidiser, &t->most_oxidiser, species, x);
    break;
  case ROLE_UNKNOWN:
    sum_add (&t->unknown, x);
    keep_largest (&f->unknown, &t->most_unknown, species, x);
    break;
  case ROLE_INERT:
    break;
  }
}

/* From the limits of the fuels to those of the gas.  */
static void
find_limits (const struct tally *t, struct flammability *f)
{
  double oxidisers = t->oxygen + t->oxidiser, rest = 1 - f->fuel - f->unknown_share;
  f->fuel_lower = f->fuel / sum_total (&t->by_lower);
  f->fuel_upper = f->fuel / sum_total (&t->by_upper);
  if (f->no_estimate == NULL)
    f->least_oxygen = f->fuel_lower * sum_total (&t->oxygen_needed) / f->fuel;
  f->enriched = rest > 0 && t->oxygen > enriched_from * rest;
  f->upper_is_bound = rest - t->oxygen / oxygen_in_air > inert_least;
  f->kind = f->fuel < f->fuel_lower ? FLAMMABLE_TOO_THIN : FLAMMABLE_BETWEEN;
  if (f->kind == FLAMMABLE_TOO_THIN)
    return;
  f->lower = f->fuel_lower / f->fuel;
  if (!isnan (f->fuel_upper))            /* fmin would take the 1 */
    f->upper = fmin (f->fuel_upper / f->fuel, 1);
  bool too_rich = f->fuel > f->fuel_upper && !f->enriched && f->oxidiser == NULL;
  bool enough = isnan (f->least_oxygen) ? oxidisers > 0 : oxidisers >= f->least_oxygen;
  f->burns_as_it_is = enough && oxidisers > 0 && !too_rich;
}

static bool
is_stated (const struct species *species, const struct flammable_limits stated[], size_t n)
{
  for (size_t i = 0; i < n; i++)
    if (stated[i].species == species)
      return true;
  return false;
}

/* The fuels and their limits.  */
struct fuels { unsigned count; const char **terms, **sources; double *x, *lower, *upper, *oxygen; };

static struct fuels
fuels_of (struct arena *arena, const struct composition *gas,
          const struct flammable_limits stated[], size_t n)
{
  struct fuels f = { 0, ARENA_ARRAY (arena, gas->count, const char *),
                     ARENA_ARRAY (arena, gas->count, const char *),
                     ARENA_ARRAY (arena, gas->count, double),
                     ARENA_ARRAY (arena, gas->count, double),
                     ARENA_ARRAY (arena, gas->count, double),
                     ARENA_ARRAY (arena, gas->count, double) };
  for (size_t i = 0; i < gas->count; i++) {
    const struct species *species = gas->species[i];
    struct flammable_limits limits = limits_of (species, stated, n);
    if (!(gas->fraction[i] > 0) || role_of (species, limits.lower) != ROLE_FUEL)
      continue;
    f.terms[f.count] = species->key;
    bool from_table = *species->flammable_source != '\0' && !is_stated (species, stated, n);
    f.sources[f.count] = from_table ? species->flammable_source : STEP_TYPED;
    f.x[f.count] = gas->fraction[i];
    f.lower[f.count] = limits.lower;
    f.upper[f.count] = limits.upper;
    f.oxygen[f.count++] = oxygen_needed (species);
  }
  return f;
}

static void
record_gas (struct workings *workings, const struct flammability *f)
{
  static const char inert[] = "inert parts counted as air: common practice, no source";
  if (!isnan (f->lower))
    workings_add (workings, &(struct step) {
        .name = "lower limit of the gas in air", .formula = "L = L_F/F", .value = f->lower,
        .unit = "mol/mol", .source = inert,
        STEP_SYMBOLS (SYMBOL ("L_F", f->fuel_lower, "mol/mol"), SYMBOL ("F", f->fuel, "mol/mol"))
      });
  if (!isnan (f->upper))
    workings_add (workings, &(struct step) {
        .name = "upper limit of the gas in air", .formula = "U = min(U_F/F, 1)",
        .value = f->upper, .unit = "mol/mol", .source = inert,
        STEP_SYMBOLS (SYMBOL ("U_F", f->fuel_upper, "mol/mol"), SYMBOL ("F", f->fuel, "mol/mol"))
      });
}

static void
record (struct workings *workings, const struct composition *gas,
        const struct flammable_limits stated[], size_t n, const struct flammability *f)
{
  static const char rule[] = "H. Le Chatelier, Annales des Mines (8) 19 (1891) 388";
  if (workings == NULL || f->kind == FLAMMABLE_NOTHING)
    return;
  const struct fuels fuels = fuels_of (workings->arena, gas, stated, n);
  const struct step_column x = { "x_i", fuels.x, "mol/mol", NULL, NULL };
  workings_add (workings, &(struct step) {
      .name = "fuel in the gas", .formula = "F = sum(x_i)", .value = f->fuel, .unit = "mol/mol",
      .source = rule, .term_count = fuels.count, .terms = fuels.terms, STEP_COLUMNS (x) });
  workings_add (workings, &(struct step) {
      .name = "lower limit of the fuels", .formula = "L_F = F/sum(x_i/L_i)",
      .value = f->fuel_lower, .unit = "mol/mol", .source = rule, .term_count = fuels.count,
      .terms = fuels.terms, STEP_SYMBOLS (SYMBOL ("F", f->fuel, "mol/mol")),
      STEP_COLUMNS (x, { "L_i", fuels.lower, "mol/mol", NULL, fuels.sources }) });
  if (!isnan (f->fuel_upper))
    workings_add (workings, &(struct step) {
        .name = "upper limit of the fuels", .formula = "U_F = F/sum(x_i/U_i)",
        .value = f->fuel_upper, .unit = "mol/mol", .source = rule, .term_count = fuels.count,
        .terms = fuels.terms, STEP_SYMBOLS (SYMBOL ("F", f->fuel, "mol/mol")),
        STEP_COLUMNS (x, { "U_i", fuels.upper, "mol/mol", NULL, fuels.sources }) });
  if (!isnan (f->least_oxygen))
    workings_add (workings, &(struct step) {
        .name = "least oxygen", .formula = "O = L_F sum(x_i o_i)/F", .value = f->least_oxygen,
        .unit = "mol/mol", .source = "estimate, common practice, no source",
        .term_count = fuels.count, .terms = fuels.terms,
        STEP_SYMBOLS (SYMBOL ("L_F", f->fuel_lower, "mol/mol"), SYMBOL ("F", f->fuel, "mol/mol")),
        STEP_COLUMNS (x, { "o_i", fuels.oxygen, "mol/mol", "burnt to CO2, H2O, N2 and SO2", NULL })
      });
  record_gas (workings, f);
}

bool
flammability_of (const struct composition *gas, const struct flammable_limits stated[], size_t n,
                 struct flammability *flammability, struct workings *workings,
                 struct fault *fault)
{
  struct tally t = { 0 };
  struct flammability f = {
    .kind = FLAMMABLE_NOTHING, .lower = (double) NAN, .upper = (double) NAN,
    .fuel_lower = (double) NAN, .fuel_upper = (double) NAN, .least_oxygen = (double) NAN
  };
  for (size_t i = 0; i < gas->count; i++) {
    struct flammable_limits limits = limits_of (gas->species[i], stated, n);
    if (gas->fraction[i] > 0)
      add_part (&t, &f, &limits, gas->fraction[i]);
  }
  f.fuel = sum_total (&t.fuel);
  f.unknown_share = sum_total (&t.unknown);
  if (f.unknown_share > unknown_most * (f.fuel + f.unknown_share)) {
    fault_set (fault, MESSAGE_MODEL_LACKS, "the table flammability", f.unknown->key);
    if (f.unknown->origin == SPECIES_STATED) {
      fault_hint (fault, "only what was stated of %s is known; its composition would do",
                  f.unknown->key);
    } else {
      fault_hint (fault, "a row of your own in flammability.tsv, or in exposure.tsv without the "
                  "flag flammable, adds it (option --tables)");
    }
    return false;
  }
  if (f.fuel > 0)
    find_limits (&t, &f);
  record (workings, gas, stated, n, &f);
  *flammability = f;
  return true;
}
