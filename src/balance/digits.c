#include "config.h"
#include "balance/digits.h"

#include <math.h>
#include "balance/null_space.h"
#include "balance/rank.h"
#include "balance/reduce.h"
#include "support/arena.h"

/* A figure of one or two digits (a half, 15 %) is as a rule chosen, not read from anything: its
   half digit is this part of it or more, as a whole number's is taken to be.  Counted even as that
   little, one worked case of 22 would hang on them: three columns in a row, all from fractions of
   two digits, whose product of 8.75 kmol/h would move by 30.                                    */
static const double as_chosen = 0.005 * (1 - 1e-9);
/* Fact rows times the square of how many are to spare, up to which those are looked after.  */
static const double most_left = 1e7;

struct digits {
  const struct core *core;
  const struct system *system;
  size_t rows;                   /* of facts */
  double *half;                  /* by fact row: what half a last digit makes of its right side */
  size_t count, *figure;
  double *gather;                /* [c * rows + figure]: left null vectors times sigma */
  struct space spare;            /* of gather times its transpose */
  struct rows bent;
  struct space narrow;           /* of the bent rows within the null space */
};

/* Where figures are to spare, all of them give way by their digits: as little as can be.  */
static void
give_way (const struct digits *digits, struct arena *arena, double e[])
{
  size_t k = digits->system->surplus;
  double *rho = ARENA_ARRAY (arena, k + 1, double), *y = ARENA_ARRAY (arena, k + 1, double);
  for (size_t c = 0; c < k; c++) {
    for (size_t i = 0; i < digits->rows; i++) {
      rho[c] += digits->system->left[i * k + c] * e[i];
    }
  }
  space_solve (arena, &digits->spare, rho, y);
  for (size_t i = 0; i < digits->rows; i++) {
    for (size_t c = 0; c < k; c++) {
      e[i] -= digits->core->sigma[i] * y[c]
              * digits->gather[c * digits->rows + digits->core->figure[i]];
    }
  }
}

/* A step along the null space that keeps the bent rows.  */
static void
follow_bends (const struct digits *digits, struct arena *arena, double dv[])
{
  const struct system *system = digits->system;
  size_t width = system->freedom;
  double *out = ARENA_ARRAY (arena, digits->bent.count + 1, double), *moved;
  double *z = ARENA_ARRAY (arena, width + 1, double);
  for (size_t i = 0; i < digits->bent.count; i++) {
    out[i] = -rows_residual (&digits->bent, i, dv) - digits->bent.right[i];
  }
  space_solve (arena, &digits->narrow, out, z);
  moved = ARENA_ARRAY (arena, system->columns + 1, double);
  null_space_move (system->null, z, moved);
  for (size_t j = 0; j < system->columns; j++) {
    dv[j] += moved[j] * system->scale[j];
  }
}

void
digits_respond (const struct digits *digits, struct arena *arena, size_t count,
                const size_t list[], const double weight[], double dv[])
{
  double *by_figure = ARENA_ARRAY (arena, digits->rows + 1, double);
  double *e = ARENA_ARRAY (arena, digits->rows + 1, double);
  for (size_t i = 0; i < count; i++) {
    by_figure[list[i]] = weight[i];
  }
  for (size_t i = 0; i < digits->rows; i++) {
    e[i] = digits->half[i] * by_figure[digits->core->figure[i]];
  }
  if (digits->system->surplus > 0) {
    give_way (digits, arena, e);
  }
  system_solve (digits->system, e, dv);
  if (digits->bent.count > 0) {
    follow_bends (digits, arena, dv);
  }
}

/* Half the last digit of a fact, or of a part of it, whatever it is worth.  */
static double
typed_half (const struct fact *fact, size_t component)
{
  return fact->kind != FACT_COMPOSITION ? fact->rounding
         : fact->fractions_rounding ? fact->fractions_rounding[component] : 0;
}

double
digits_half (const struct network *typed, size_t f, size_t component)
{
  const struct fact *fact = &typed->fact[f];
  double value = fact->kind == FACT_COMPOSITION ? fact->fractions[component] : fact->value;
  double half = typed_half (fact, component);
  return half < as_chosen * fabs (value) ? half : 0;
}

const size_t *
digits_figures (const struct digits *digits, size_t *count)
{
  *count = digits->count;
  return digits->figure;
}

/* Half a last digit, as the rows have it, is the square root of 3 times the standard deviation of
   its rounding.  Facts that were moved since they were typed have kept little of it.            */
static void
list_figures (struct digits *digits, struct arena *arena, const struct network *typed)
{
  const struct core *core = digits->core;
  digits->half = ARENA_ARRAY (arena, digits->rows + 1, double);
  digits->figure = ARENA_ARRAY (arena, digits->rows + 1, size_t);
  for (size_t i = 0; i < digits->rows; i++) {
    const struct row *row = &digits->system->rows.row[digits->system->structure + i];
    double now = typed_half (&core->network->fact[row->of], row->component);
    digits->half[i] = now > 0 ? sqrt (3) * core->sigma[i] / now
                                * digits_half (typed, row->of, row->component) : 0;
    if (core->figure[i] == i && digits->half[i] > 0) {
      digits->figure[digits->count++] = i;
    }
  }
}

static void
square_up (struct digits *digits, struct arena *arena)
{
  const struct system *system = digits->system;
  size_t m = digits->rows, k = system->surplus;
  double *square = ARENA_ARRAY (arena, k * k + 1, double);
  digits->gather = ARENA_ARRAY (arena, k * m + 1, double);
  for (size_t i = 0; i < m * k; i++) {
    digits->gather[i % k * m + digits->core->figure[i / k]]
      += system->left[i] * digits->core->sigma[i / k];
  }
  for (size_t c = 0; c < k * k; c++) {
    for (size_t i = 0; i < m; i++) {
      square[c] += digits->gather[c / k * m + i] * digits->gather[c % k * m + i];
    }
  }
  digits->spare = space_make (arena, k, k, square);
}

struct digits *
digits_make (struct arena *arena, const struct core *core, const struct network *typed)
{
  struct digits *digits = ARENA_NEW (arena, struct digits);
  struct system *system = core->system;
  *digits = (struct digits) { .core = core, .system = system,
                              .rows = system->rows.count - system->structure };
  list_figures (digits, arena, typed);
  if (digits->count == 0
      || (double) digits->rows * (double) system->surplus * (double) system->surplus > most_left) {
    return NULL;
  }
  if (system->surplus > 0) {
    system_left (core->arena, system);
    square_up (digits, arena);
  }
  if (system->bends > 0) {
    digits->bent = system_bent (arena, system, core->v);
    digits->narrow = space_make (arena, digits->bent.count, system->freedom,
                                 system_project (arena, system, &digits->bent, system->freedom,
                                                 null_space_dense (arena, system->null)));
  }
  return digits;
}
