#include "config.h"
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "gas/composition.h"
#include "libtest.h"
#include "modules/gas/samples.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/sum.h"
#include "units/constants.h"

static struct arena *arena;
static struct fault fault;

static void
start (void)
{
  arena_destroy (arena);
  arena = arena_create ();
  fault_init (&fault, arena);
}

static const struct composition *
make (size_t n, const struct part parts[])
{
  return composition_make (arena, n, parts, &fault);
}

/* w_i = x_i M_i/M (ISO 14912:2003).  */
static double
mass_fraction (const struct composition *c, const struct species *species)
{
  return composition_fraction (c, species) * species->molar_mass / c->molar_mass;
}

static double
total (const struct composition *c)
{
  struct sum sum = { 0, 0 };
  for (size_t i = 0; i < c->count; i++)
    sum_add (&sum, c->fraction[i]);
  return sum_total (&sum);
}

/* A liquefied gas certified by weight: propane 91.5, propene 2.5, n-butane 6.0 mass%.  The mole
   fractions and the molar mass follow ISO 14912:2003, worked by hand with the samples' masses.  */
static void
certificate_by_weight (void)
{
  start ();
  const struct part parts[] = {
    { &sample[C3H8], 91.5 / 44.097 }, { &sample[C3H6], 2.5 / 42.081 },
    { &sample[C4H10], 6 / 58.124 }
  };
  const struct composition *c = make (3, parts);
  NEED (c != NULL);
  NEAR (composition_fraction (c, &sample[C3H8]), 0.927317, 3e-5);
  NEAR (composition_fraction (c, &sample[C3H6]), 0.0265503, 3e-5);
  NEAR (composition_fraction (c, &sample[C4H10]), 0.0461330, 3e-5);
  NEAR (c->molar_mass, 44.6906e-3, 3e-5);
  NEAR (mass_fraction (c, &sample[C3H8]), 0.915, 1e-14);
  NEAR (mass_fraction (c, &sample[C4H10]), 0.06, 1e-14);
  NEAR (composition_fraction (c, &sample[N2]), 0, 0);
  NEAR (mass_fraction (c, &sample[N2]), 0, 0);
}

/* Dry air, 28.9657 g/mol (CIAAW 2021 masses).  */
static void
dry_air (void)
{
  start ();
  const struct part parts[] = {
    { &sample[N2], 78.084 }, { &sample[O2], 20.946 }, { &sample[Ar], 0.934 },
    { &sample[CO2], 0.036 }
  };
  const struct composition *c = make (4, parts);
  NEED (c != NULL);
  NEAR (c->molar_mass, 28.9657e-3, 2e-6);
  CHECK (c->species[0] == &sample[N2] && c->species[3] == &sample[CO2]);
}

static void
same_species_are_added (void)
{
  start ();
  const struct part parts[] = {
    { &sample[CH4], 1 }, { &sample[CO2], 2 }, { &sample[CH4], 4 }, { &sample[H2], 0 },
    { &sample[CO2], 1 }
  };
  const struct composition *c = make (5, parts);
  NEED (c != NULL && c->count == 3);
  NEAR (c->fraction[0], 0.625, 0);
  NEAR (c->fraction[1], 0.375, 0);
  NEAR (c->fraction[2], 0, 0);
  CHECK (c->species[0] == &sample[CH4] && c->species[1] == &sample[CO2]);
}

enum { RANDOM_CASES = 2000 };

static const struct composition *
random_composition (uint64_t *state, int number, size_t *order, double *amount)
{
  size_t n = 1 + (size_t) (random_next (state) % SAMPLES);
  struct part parts[SAMPLES];
  test_about ("seed 20260101, case %d, %zu parts", number, n);
  random_amounts (state, n, order, amount);
  for (size_t i = 0; i < n; i++)
    parts[i] = (struct part) { &sample[order[i]], amount[i] };
  return make (n, parts);
}

static void
mole_and_mass_and_back (void)
{
  uint64_t state = 20260101;
  for (int number = 0; number < RANDOM_CASES; number++) {
    start ();
    size_t order[SAMPLES];
    double amount[SAMPLES];
    struct part back[SAMPLES];
    const struct composition *c = random_composition (&state, number, order, amount);
    NEED (c != NULL);
    NEAR (total (c), 1, 1e-15 * (double) c->count);
    struct sum mass = { 0, 0 };
    for (size_t i = 0; i < c->count; i++) {
      double w = mass_fraction (c, c->species[i]);
      sum_add (&mass, w);
      back[i] = (struct part) { c->species[i], w / c->species[i]->molar_mass };
    }
    NEAR (sum_total (&mass), 1, 2e-15 * (double) c->count);
    const struct composition *again = make (c->count, back);
    NEED (again != NULL);
    for (size_t i = 0; i < c->count; i++)
      if (!NEAR (again->fraction[i], c->fraction[i], 1e-12))
        return;
    NEAR (again->molar_mass, c->molar_mass, 1e-12);
  }
}

static void
order_does_not_matter (void)
{
  uint64_t state = 20260101;
  for (int number = 0; number < RANDOM_CASES; number++) {
    start ();
    size_t order[SAMPLES];
    double amount[SAMPLES];
    struct part turned[SAMPLES];
    const struct composition *c = random_composition (&state, number, order, amount);
    NEED (c != NULL);
    for (size_t i = 0; i < c->count; i++)
      turned[c->count - 1 - i] = (struct part) { &sample[order[i]], amount[i] };
    const struct composition *other = make (c->count, turned);
    NEED (other != NULL);
    for (size_t i = 0; i < c->count; i++)
      if (!NEAR (other->fraction[c->count - 1 - i], c->fraction[i], 4e-16))
        return;
    NEAR (other->molar_mass, c->molar_mass, 4e-16);
  }
}

static void
making_again_changes_nothing (void)
{
  uint64_t state = 20260101;
  for (int number = 0; number < RANDOM_CASES; number++) {
    start ();
    size_t order[SAMPLES];
    double amount[SAMPLES];
    struct part same[SAMPLES];
    const struct composition *c = random_composition (&state, number, order, amount);
    NEED (c != NULL);
    for (size_t i = 0; i < c->count; i++)
      same[i] = (struct part) { c->species[i], c->fraction[i] };
    const struct composition *again = make (c->count, same);
    NEED (again != NULL);
    for (size_t i = 0; i < c->count; i++)
      if (!NEAR (again->fraction[i], c->fraction[i], 5e-16))
        return;
  }
}

static void
wetted_and_dried (void)
{
  uint64_t state = 20260101;
  for (int number = 0; number < RANDOM_CASES; number++) {
    start ();
    size_t order[SAMPLES];
    double amount[SAMPLES];
    const struct composition *c = random_composition (&state, number, order, amount);
    NEED (c != NULL);
    const struct composition *dry = composition_wetted (arena, c, &sample[H2O], 0, &fault);
    if (dry == NULL) {                   /* the random gas is water alone */
      SAME_INT (fault.kind, MESSAGE_ONLY_WATER);
      continue;
    }
    double y = random_share (&state);
    const struct composition *wet = composition_wetted (arena, c, &sample[H2O], y, &fault);
    NEED (wet != NULL);
    const struct composition *back = composition_wetted (arena, wet, &sample[H2O], 0, &fault);
    NEED (back != NULL && back->count == dry->count);
    NEAR (composition_fraction (wet, &sample[H2O]), y, 1e-15);
    NEAR (total (wet), 1, 1e-15 * (double) wet->count);
    NEAR (composition_fraction (dry, &sample[H2O]), 0, 0);
    for (size_t i = 0; i < dry->count; i++)
      if (!CHECK (back->species[i] == dry->species[i])
          || !NEAR (back->fraction[i], dry->fraction[i], 1e-14))
        return;
  }
}

static void
water_keeps_its_place (void)
{
  start ();
  const struct part parts[] = { { &sample[CH4], 3 }, { &sample[H2O], 1 }, { &sample[CO2], 1 } };
  const struct composition *c = make (3, parts);
  NEED (c != NULL);
  const struct composition *wet = composition_wetted (arena, c, &sample[H2O], 0.5, &fault);
  NEED (wet != NULL && wet->count == 3);
  CHECK (wet->species[1] == &sample[H2O]);
  NEAR (wet->fraction[0], 0.375, 4e-16);
  NEAR (wet->fraction[1], 0.5, 4e-16);
  NEAR (wet->fraction[2], 0.125, 4e-16);
  const struct composition *dry = composition_wetted (arena, c, &sample[H2O], 0, &fault);
  NEED (dry != NULL && dry->count == 2);
  NEAR (dry->fraction[0], 0.75, 4e-16);
  wet = composition_wetted (arena, dry, &sample[H2O], 0.2, &fault);
  NEED (wet != NULL && wet->count == 3);
  CHECK (wet->species[2] == &sample[H2O]);
}

/* One part in 1e12 of gas in steam: the digits of the rest must not drown in 1 - y.  */
static void
nearly_all_water (void)
{
  start ();
  const struct part parts[] = {
    { &sample[N2], 3e-12 }, { &sample[H2O], 1 }, { &sample[O2], 1e-12 }
  };
  const struct composition *c = make (3, parts);
  NEED (c != NULL);
  const struct composition *dry = composition_wetted (arena, c, &sample[H2O], 0, &fault);
  NEED (dry != NULL && dry->count == 2);
  NEAR (dry->fraction[0], 0.75, 4e-16);
  NEAR (dry->fraction[1], 0.25, 4e-16);
}

static void
unusable_shares_of_water (void)
{
  const double shares[] = { 1, 1.5, -0.1, (double) NAN, (double) INFINITY };
  for (size_t i = 0; i < sizeof shares / sizeof shares[0]; i++) {
    start ();
    test_about ("y = %g", shares[i]);
    const struct composition *c = composition_pure (arena, &sample[N2]);
    CHECK (composition_wetted (arena, c, &sample[H2O], shares[i], &fault) == NULL);
    SAME_INT (fault.kind, MESSAGE_AMOUNT_RANGE);
    SAME_TEXT (fault.fact[0], "H2O");
  }
  start ();
  const struct composition *steam = composition_pure (arena, &sample[H2O]);
  CHECK (composition_wetted (arena, steam, &sample[H2O], 0.5, &fault) == NULL);
  SAME_INT (fault.kind, MESSAGE_ONLY_WATER);
}

static void
unusable_amounts (void)
{
  const struct { size_t n; double first, second; const char *name; } cases[] = {
    { 2, 1, -1e-30, "H2" }, { 2, -1, 2, "CH4" }, { 2, (double) NAN, 1, "CH4" },
    { 2, 1, (double) INFINITY, "H2" }, { 2, 0, 0, "the whole" },
    { 2, 1.5e308, 1.5e308, "the whole" }, { 0, 0, 0, "the whole" }
  };
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    start ();
    test_about ("case %zu", i);
    const struct part parts[] = {
      { &sample[CH4], cases[i].first }, { &sample[H2], cases[i].second }
    };
    CHECK (make (cases[i].n, parts) == NULL);
    SAME_INT (fault.kind, MESSAGE_AMOUNT_RANGE);
    SAME_TEXT (fault.fact[0], cases[i].name);
  }
}

static void
tiny_and_huge_amounts (void)
{
  const double scales[] = { 5e-324, 1e-300, 1e300 };
  for (size_t i = 0; i < 3; i++) {
    start ();
    test_about ("amounts of %g", scales[i]);
    const struct part parts[] = { { &sample[CH4], scales[i] }, { &sample[CO2], scales[i] * 3 } };
    const struct composition *c = make (2, parts);
    NEED (c != NULL);
    NEAR (c->fraction[0], 0.25, 4e-16);
    NEAR (total (c), 1, 2e-15);
  }
}

static void
kept_beyond_its_arena (void)
{
  start ();
  struct arena *lasting = arena_create ();
  const struct part parts[] = { { &sample[CH4], 3 }, { &sample[CO2], 1 } };
  const struct composition *c = make (2, parts);
  NEED (c != NULL);
  const struct composition *kept = composition_keep (lasting, c);
  arena_reset (arena);
  SAME_INT (kept->count, 2);
  NEAR (kept->fraction[0], 0.75, 0);
  CHECK (kept->species[1] == &sample[CO2]);
  NEAR (kept->molar_mass, 0.75 * 16.043e-3 + 0.25 * 44.009e-3, 4e-16);
  arena_destroy (lasting);
}

/* ISO 14912:2003: with Z 1 and 0.9 equal moles fill 1/1.9 and 0.9/1.9 of the volume.  */
static void
volume_fractions (void)
{
  start ();
  const struct part parts[] = { { &sample[H2], 1 }, { &sample[CO2], 1 } };
  const double Z[] = { 1, 0.9 };
  double phi[2];
  const struct composition *c = make (2, parts);
  NEED (c != NULL);
  composition_volume_fractions (c, Z, phi);
  NEAR (phi[0], 0.526315789473684, 1e-14);
  NEAR (phi[1], 0.473684210526316, 1e-14);
  const struct part back[] = { { &sample[H2], phi[0] / Z[0] }, { &sample[CO2], phi[1] / Z[1] } };
  c = make (2, back);
  NEED (c != NULL);
  NEAR (c->fraction[0], 0.5, 4e-16);
}

/* ---- ISO 14912 from stated molar masses and Z ---- */

/* A row of iso14912.tsv: the parts with what is given of them.  */
struct quantities { size_t n; struct species species[4]; double Z[4], given[4]; };

static void
read_quantities (const char *text, struct quantities *q)
{
  memset (q, 0, sizeof *q);
  static char key[4][8];
  while (*text && q->n < 4) {
    double M;
    int used = 0;
    if (sscanf (text, "%7[^:]:%lf:%lf:%lf %n", key[q->n], &M, &q->Z[q->n], &q->given[q->n], &used)
        != 4)
      break;
    q->species[q->n] = (struct species) { .key = key[q->n], .molar_mass = M * 1e-3 };
    q->n++;
    text += used;
  }
}

/* The composition, from shares by amount, mass or volume, or masses per volume.  */
static const struct composition *
from_given (const char *given, const struct quantities *q)
{
  struct part parts[4];
  for (size_t i = 0; i < q->n; i++) {
    double divisor = strcmp (given, "x") == 0 ? 1 : strcmp (given, "phi") == 0
                       ? q->Z[i] : q->species[i].molar_mass;
    parts[i] = (struct part) { &q->species[i], q->given[i] / divisor };
  }
  return make (q->n, parts);
}

/* c_i = x_i p/(Z R T), rho_i = c_i M_i.  */
static double
quantity_of (const struct composition *c, const struct quantities *q, char *cells[])
{
  double p = strtod (cells[3], NULL), T = strtod (cells[4], NULL), phi[4], sum = 0;
  for (size_t i = 0; i < c->count; i++)
    sum += c->fraction[i] * q->Z[i];
  double Z = *cells[5] ? strtod (cells[5], NULL) : sum, n = p / (Z * GAS_CONSTANT * T);
  double f = composition_mixing_factor (c, q->Z, Z);
  size_t i = 0;
  composition_volume_fractions (c, q->Z, phi);
  while (i + 1 < c->count && strcmp (c->species[i]->key, cells[7]) != 0)
    i++;
  const struct { const char *name; double value; } all[] = {
    { "x", c->fraction[i] }, { "w", c->fraction[i] * c->species[i]->molar_mass / c->molar_mass },
    { "phi", phi[i] }, { "sig", phi[i] / f }, { "c", n * c->fraction[i] },
    { "rho", n * c->fraction[i] * c->species[i]->molar_mass }, { "M", c->molar_mass * 1e3 },
    { "density", n * c->molar_mass }, { "f_mix", f }
  };
  for (size_t k = 0; k < sizeof all / sizeof all[0]; k++)
    if (strcmp (all[k].name, cells[6]) == 0)
      return all[k].value;
  return (double) NAN;
}

static void
one_quantity (char *cells[])
{
  struct quantities q;
  start ();
  read_quantities (cells[2], &q);
  const struct composition *c = from_given (cells[1], &q);
  NEED (c != NULL && c->count == q.n);
  NEAR (quantity_of (c, &q, cells), strtod (cells[8], NULL), 3e-6);      /* M, Z have six digits */
}

static void
quantities (void)
{
  SAME_INT (test_each_row ("numbers/iso14912.tsv", 10, one_quantity), 126);
}

static void
a_thousand_species (void)
{
  enum { MANY = 1000 };
  static struct species many[MANY];
  static struct part parts[2 * MANY];
  start ();
  for (size_t i = 0; i < MANY; i++) {
    many[i] = sample[CH4];
    parts[i] = parts[2 * MANY - 1 - i] = (struct part) { &many[i], 1 + (double) i };
  }
  const struct composition *c = make ((size_t) 2 * MANY, parts);
  NEED (c != NULL && c->count == MANY);
  NEAR (total (c), 1, 1e-15 * MANY);
  NEAR (c->fraction[MANY - 1], 1000.0 / 500500, 1e-15);
  NEAR (c->molar_mass, 16.043e-3, 1e-15);
}

static const struct test_case cases[] = {
  { "a certificate by weight", certificate_by_weight },
  { "dry air", dry_air },
  { "same species are added", same_species_are_added },
  { "mole and mass and back", mole_and_mass_and_back },
  { "order does not matter", order_does_not_matter },
  { "making again changes nothing", making_again_changes_nothing },
  { "wetted and dried", wetted_and_dried },
  { "water keeps its place", water_keeps_its_place },
  { "nearly all water", nearly_all_water },
  { "unusable shares of water", unusable_shares_of_water },
  { "unusable amounts", unusable_amounts },
  { "tiny and huge amounts", tiny_and_huge_amounts },
  { "kept beyond its arena", kept_beyond_its_arena },
  { "volume fractions", volume_fractions },
  { "quantities of ISO 14912", quantities },
  { "a thousand species", a_thousand_species },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  int status = test_main (argc, argv, cases);
  arena_destroy (arena);
  return status;
}
