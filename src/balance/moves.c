#include "config.h"
#include "balance/moves.h"

#include <math.h>
#include <string.h>
#include "support/arena.h"

double
move_deviation (const struct network *network, const struct row *row)
{
  const struct fact *fact = &network->fact[row->of];
  double half = fact->rounding;
  if (fact->kind == FACT_COMPOSITION) {
    half = fact->fractions_rounding ? fact->fractions_rounding[row->component] : 0;
  }
  return half / sqrt (3);
}

/* All of a stream.  */
static struct form
stream_form (const struct system *system, size_t stream, struct term terms[])
{
  size_t components = system->network->components, count = 0;
  for (size_t j = stream * components; j < (stream + 1) * components; j++) {
    if (!system->absence.absent[j]) {
      terms[count++] = (struct term) { j, 1 };
    }
  }
  return (struct form) { count, terms };
}

struct form
move_form (const struct system *system, const struct row *row, struct term terms[])
{
  const struct fact *fact = &system->network->fact[row->of];
  size_t count = 0;
  switch (fact->kind) {
  case FACT_FORM:
    break;
  case FACT_RATIO:
    for (size_t t = 0; t < fact->right.count; t++) {
      if (!system->absence.absent[fact->right.terms[t].column]) {
        terms[count++] = fact->right.terms[t];
      }
    }
    break;
  case FACT_COMPOSITION:
    return stream_form (system, fact->stream, terms);
  case FACT_SHARE:
    if (row->component == NOWHERE) {
      return stream_form (system, fact->of, terms);
    }
    terms[count++] = (struct term) { fact->of * system->network->components + row->component, 1 };
    break;
  }
  return (struct form) { count, terms };
}

double
move_scaled (const struct system *system, size_t i)
{
  bool still = system->rows.start[i] == system->rows.start[i + 1];
  return still ? 0 : move_deviation (system->network, &system->rows.row[i])
                     * system->row_scale[i];
}

double
move_of_row (const struct system *system, size_t i, const double v[], double floor,
             struct term terms[])
{
  const struct row *row = &system->rows.row[i];
  bool flow = system->network->fact[row->of].kind == FACT_FORM;
  struct form form = move_form (system, row, terms);
  double by = flow ? 1 : form_value (&form, v), most = 0;
  if (system->network->fact[row->of].kind == FACT_SHARE && row->component != NOWHERE) {
    /* One figure: its rows keep to each other as the components do.  */
    double total = fabs (system_total (system, v, system->network->fact[row->of].of));
    return move_scaled (system, i) * by * (total > 0 && total < floor ? floor / total : 1);
  }
  for (size_t t = 0; t < form.count; t++) {
    most = fmax (most, floor * fabs (form.terms[t].coefficient));
  }
  return move_scaled (system, i) * (fabs (by) < most ? copysign (most, by) : by);
}

bool
move_weigh (size_t count, const size_t of[], const double y[], double weight[], bool *within)
{
  static const double least = 1e-6;      /* so that no figure is forgotten */
  double most = 0, squares = 0, sum = 0;
  for (size_t k = 0; k < count; k++) {
    most = fmax (most, fabs (y[of[k]]));
    squares += weight[of[k]] * y[of[k]] * y[of[k]];
    sum += weight[of[k]];
  }
  *within = most <= MOVE_HALF;
  if (*within || sqrt (squares / sum) > MOVE_HALF) {
    return true;
  }
  for (size_t k = 0; k < count; k++) {
    weight[of[k]] = fmax (weight[of[k]] * fabs (y[of[k]]) / most, least);
  }
  return false;
}

size_t *
move_figures (struct arena *arena, const struct system *system)
{
  size_t facts = system->rows.count - system->structure;
  size_t *figure = ARENA_ARRAY (arena, facts + 1, size_t);
  for (size_t i = 0; i < facts; i++) {
    const struct row *row = &system->rows.row[system->structure + i];
    bool again = i > 0 && system->network->fact[row->of].kind == FACT_SHARE
                 && row[-1].of == row->of;
    figure[i] = again ? figure[i - 1] : i;
  }
  return figure;
}

/* The fractions of a composition moved, by fact rows FIRST to END; the greatest, which has no row,
   takes what that leaves.                                                                       */
static const double *
move_fractions (struct arena *arena, const struct system *system, size_t first, size_t end,
                const double y[])
{
  const struct network *network = system->network;
  const struct row *row = &system->rows.row[system->structure];
  const struct fact *fact = &network->fact[row[first].of];
  double *x = ARENA_ARRAY (arena, network->components, double), sum = 0;
  size_t largest = 0;
  memcpy (x, fact->fractions, network->components * sizeof *x);
  for (size_t c = 1; c < network->components; c++) {
    largest = x[c] > x[largest] ? c : largest;
  }
  for (size_t i = first; i < end; i++) {
    double by = move_deviation (network, &row[i]) * y[i];
    x[row[i].component] += by;
    sum += by;
  }
  x[largest] -= sum;
  return x;
}

const struct network *
network_moved (struct arena *arena, const struct system *system, const size_t figure[],
               const double y[])
{
  const struct network *network = system->network;
  size_t facts = system->rows.count - system->structure, end;
  struct network *out = ARENA_NEW (arena, struct network);
  struct fact *moved = ARENA_ARRAY (arena, network->facts + 1, struct fact);
  memcpy (moved, network->fact, network->facts * sizeof *moved);
  for (size_t i = 0; i < facts; i = end) {
    const struct row *row = &system->rows.row[system->structure + i];
    struct fact *fact = &moved[row->of];
    end = i + 1;
    while (end < facts && system->rows.row[system->structure + end].of == row->of) {
      end++;
    }
    if (fact->kind == FACT_COMPOSITION) {
      fact->fractions = move_fractions (arena, system, i, end, y);
    } else {
      fact->value += move_deviation (network, row) * y[figure[i]];
    }
  }
  *out = *network;
  out->fact = moved;
  return out;
}
