/* How a density came about: the constants of the cubic equation, or the iteration of another.  */
#include "config.h"
#include "eos/eos.h"

#include "eos/cubic.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "support/arena.h"
#include "units/workings.h"

/* a = (sum x_i root a_i)^2, b = sum x_i b_i, A, B and the cubic in Z.  */
static void
record_cubic (struct workings *workings, const struct composition *gas, double T, double p,
              const struct eos_state *state)
{
  const char *source = state->equation->source;
  const double R = state->equation->gas_constant;
  const size_t n = gas->count;
  double *root_a = ARENA_ARRAY (workings->arena, n, double), sum = 0, b_sum = 0;
  double *b = ARENA_ARRAY (workings->arena, n, double);
  const char **terms = ARENA_ARRAY (workings->arena, n, const char *);
  const char **sources = ARENA_ARRAY (workings->arena, n, const char *);
  for (size_t i = 0; i < n; i++) {
    const struct cubic_pure pure = cubic_pure_of (gas->species[i]);
    terms[i] = gas->species[i]->key;
    sources[i] = gas->species[i]->source;
    root_a[i] = cubic_root_a (&pure, T);
    b[i] = pure.b;
    sum += gas->fraction[i] * root_a[i];
    b_sum += gas->fraction[i] * b[i];
  }
  const double a = sum * sum, A = a * p / (R * T * R * T), B = b_sum * p / (R * T);
  const struct step_column x = { "x_i", gas->fraction, "mol/mol", NULL, NULL };
  workings_add (workings, &(struct step) {
      .name = "attraction, Peng-Robinson", .formula = "a = sum(x_i r_i)^2", .value = a,
      .unit = "Pa m6/mol2", .source = source, .term_count = (unsigned) n, .terms = terms,
      STEP_SYMBOLS (SYMBOL ("T", T, "K")),
      STEP_COLUMNS (x, { "r_i", root_a, "(Pa m6/mol2)^0.5", NULL, sources }) });
  workings_add (workings, &(struct step) {
      .name = "covolume, Peng-Robinson", .formula = "b = sum(x_i b_i)", .value = b_sum,
      .unit = "m3/mol", .source = source, .term_count = (unsigned) n, .terms = terms,
      STEP_COLUMNS (x, { "b_i", b, "m3/mol", NULL, sources }) });
  workings_add (workings, &(struct step) {
      .name = "attraction, without dimension", .formula = "A = a p/(R T)^2", .value = A,
      .unit = "1", .source = source,
      STEP_SYMBOLS (SYMBOL ("a", a, "Pa m6/mol2"), SYMBOL ("p", p, "Pa"),
                    CONSTANT ("R", R, "J/(mol K)", source), SYMBOL ("T", T, "K")) });
  workings_add (workings, &(struct step) {
      .name = "covolume, without dimension", .formula = "B = b p/(R T)", .value = B, .unit = "1",
      .source = source,
      STEP_SYMBOLS (SYMBOL ("b", b_sum, "m3/mol"), SYMBOL ("p", p, "Pa"),
                    CONSTANT ("R", R, "J/(mol K)", source), SYMBOL ("T", T, "K")) });
  workings_add (workings, &(struct step) {
      .name = "compression factor", .solved = "the largest root, in closed form",
      .formula = "Z^3 - (1 - B) Z^2 + (A - 3 B^2 - 2 B) Z = A B - B^2 - B^3", .value = state->Z,
      .unit = "1", .source = source,
      STEP_SYMBOLS (SYMBOL ("Z", state->Z, "1"), SYMBOL ("A", A, "1"), SYMBOL ("B", B, "1")) });
}

static void
record_iteration (struct workings *workings, const struct composition *gas, double T, double p,
                  const struct eos_state *state)
{
  const struct equation *e = state->equation;
  workings_add (workings, &(struct step) {
      .name = "density of moles by", .of = e->name, .formula = "p = rho R T Z(rho, T, x)",
      .solved = arena_format (workings->arena, "Halley's steps, %d", state->steps),
      .value = state->density, .unit = "mol/m3", .source = e->source,
      STEP_SYMBOLS (SYMBOL ("p", p, "Pa"), SYMBOL ("T", T, "K"),
                    CONSTANT ("R", e->gas_constant, "J/(mol K)", e->source)),
      .gas = gas });
  workings_add (workings, &(struct step) {
      .name = "compression factor", .formula = "Z = p/(rho R T)", .value = state->Z, .unit = "1",
      .source = STEP_DEFINITION,
      STEP_SYMBOLS (SYMBOL ("p", p, "Pa"), SYMBOL ("rho", state->density, "mol/m3"),
                    CONSTANT ("R", e->gas_constant, "J/(mol K)", e->source),
                    SYMBOL ("T", T, "K")) });
}

void
eos_record (struct workings *workings, const struct composition *gas, double T, double p,
            const struct eos_state *state)
{
  if (workings == NULL || state->equation == &equation_ideal)
    return;
  if (state->equation == &equation_peng_robinson)
    record_cubic (workings, gas, T, p, state);
  else
    record_iteration (workings, gas, T, p, state);
}
