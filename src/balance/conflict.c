#include "config.h"
#include "balance/conflict.h"

#include <math.h>
#include <string.h>
#include "balance/circuits.h"
#include "balance/pairs.h"
#include "balance/rank.h"
#include "balance/reduce.h"
#include "support/arena.h"
#include "support/fault.h"

/* Random bases tried where a set cannot be had by looking at all.  Against looking at all, 25
   found the smallest set in 168 of 175 networks with two or three facts to spare.               */
enum { BASES = 25 };
/* Sets of facts looked through to prove that there is no smaller one, in networks of so many
   unknowns.                                                                                     */
enum { MOST_SETS = 400, SMALL = 300 };

/* A multiplier below this part of the largest is none.  */
static const double no_multiplier = 1e-7;
/* In standard deviations: two-sided probability 1e-4 of a normal distribution.  */
static const double strong = 3.89;
/* Half a last digit in the same.  */
static const double half_digit = 1.7320508075688772;

struct work {
  struct arena *keep, *arena;
  const struct core *core;
  const struct system *system;
  size_t rows, surplus;          /* of facts */
  double *right, *rho;           /* scaled right sides; what the left null vectors make of them */
  double floor;                  /* rho below this is rounding */
  double *lambda;                /* the best so far, by fact row */
  bool *set, *trial;             /* by fact */
  bool *kept;                    /* by boundary: has a row with a multiplier */
  const struct network *part;    /* what the set is about */
  double *trial_lambda, *by_figure;
  bool all;                      /* was everything looked at? */
  bool alone;                    /* can one fact alone be blamed for all that clashes? */
  size_t count;
  double strength;
};

/* Looks at the multipliers Z y: are they a clash, of fewer facts than the best so far?  */
static void
look_at (struct work *work, const double y[])
{
  double *lambda = work->trial_lambda, gap = 0, most = 0, noise = 0, limit = 0, strength;
  size_t count = 0;
  memset (work->by_figure, 0, work->rows * sizeof *work->by_figure);
  memset (work->trial, 0, work->core->network->facts * sizeof *work->trial);
  for (size_t i = 0; i < work->rows; i++) {
    lambda[i] = 0;
    for (size_t c = 0; c < work->surplus; c++) {
      lambda[i] += work->system->left[i * work->surplus + c] * y[c];
    }
    most = fmax (most, fabs (lambda[i]));
  }
  for (size_t i = 0; i < work->rows && most > 0; i++) {
    size_t fact = work->system->rows.row[work->system->structure + i].of;
    lambda[i] = fabs (lambda[i]) > no_multiplier * most ? lambda[i] / most : 0;
    gap += lambda[i] * work->right[i];
    work->by_figure[work->core->figure[i]] += lambda[i] * work->core->sigma[i];
    count += fabs (lambda[i]) > 0 && !work->trial[fact] ? 1 : 0;
    work->trial[fact] = work->trial[fact] || fabs (lambda[i]) > 0;
  }
  for (size_t i = 0; i < work->rows; i++) {
    noise += work->by_figure[i] * work->by_figure[i];
    limit += half_digit * fabs (work->by_figure[i]);
  }
  limit = fmin (sqrt (noise), limit / strong);   /* out of chance, or of what digits allow at all */
  strength = fabs (gap) <= work->floor ? 0 : limit > 0 ? fabs (gap) / limit : 1e300;
  if (count > 0 && (work->count == 0 || (strength >= strong && work->strength < strong)
                    || ((strength >= strong || work->strength < strong)
                        && (count < work->count
                            || (count == work->count && strength > work->strength))))) {
    work->count = count;
    work->strength = strength;
    memcpy (work->set, work->trial, work->core->network->facts * sizeof *work->set);
    memcpy (work->lambda, lambda, work->rows * sizeof *work->lambda);
  }
}

/* A uniform number from 0 to 1 after STATE (Knuth's 64-bit multiplier, MMIX).  */
static double
next_random (unsigned long long *state)
{
  *state = *state * 6364136223846793005ULL + 1442695040888963407ULL;
  return (double) (*state >> 11) / (double) (1ULL << 53);
}

/* Chooses as many independent rows of the left null space as it has dimensions, by elimination
   with weights, and looks at the multipliers that are 1 at one of them and 0 at the others.     */
static void
look_at_basis (struct work *work, unsigned long long *state)
{
  size_t k = work->surplus;
  struct arena *arena = work->arena;
  double *left = ARENA_ARRAY (arena, work->rows * k, double);
  double *weight = ARENA_ARRAY (arena, work->rows, double);
  double *chosen = ARENA_ARRAY (arena, k * k, double), *y = ARENA_ARRAY (arena, k, double);
  double *unit = ARENA_ARRAY (arena, k, double);
  struct space space;
  memcpy (left, work->system->left, work->rows * k * sizeof *left);
  for (size_t i = 0; i < work->rows; i++) {
    weight[i] = exp (4 * next_random (state));
  }
  for (size_t step = 0; step < k; step++) {
    size_t best = 0, column = 0;
    double most = 0;
    for (size_t i = 0; i < work->rows; i++) {
      for (size_t c = 0; c < k; c++) {
        if (fabs (left[i * k + c]) > 1e-8 && fabs (left[i * k + c]) * weight[i] > most) {
          most = fabs (left[i * k + c]) * weight[i];
          best = i;
          column = c;
        }
      }
    }
    memcpy (&chosen[step * k], &work->system->left[best * k], k * sizeof *chosen);
    memcpy (y, &left[best * k], k * sizeof *y);
    for (size_t i = 0; i < work->rows && most > 0; i++) {
      double *row = &left[i * k], factor = row[column] / y[column];
      for (size_t other = 0; other < k; other++) {
        row[other] = i == best ? 0 : row[other] - factor * y[other];
      }
    }
  }
  space = space_make (arena, k, k, chosen);
  for (size_t step = 0; step < k; step++) {
    memset (unit, 0, k * sizeof *unit);
    unit[step] = 1;
    space_solve (arena, &space, unit, y);
    look_at (work, y);
  }
}

static void
look_at_one (void *data, const double y[])
{
  look_at (data, y);
}

static bool
find_set (struct work *work, struct fault *fault)
{
  unsigned long long state = 20;
  work->all = circuits_all (work->arena, work->rows, work->surplus, work->system->left,
                            look_at_one, work);
  for (int i = 0; i < BASES && !work->all; i++) {
    if (!core_goes_on (work->core->options, fault)) {
      return false;
    }
    look_at_basis (work, &state);
  }
  return true;
}

/* A fact without a row to stand on: what made its streams empty belongs to the clash.  */
static void
add_causes (struct work *work)
{
  const struct network *network = work->core->network;
  for (size_t i = work->system->structure; i < work->system->rows.count; i++) {
    const struct rows *rows = &work->system->rows;
    const struct fact *fact = &network->fact[rows->row[i].of];
    if (rows->start[i] == rows->start[i + 1] && work->set[rows->row[i].of]) {
      for (size_t t = 0; t < fact->left.count; t++) {
        size_t cause = work->system->absence.cause[fact->left.terms[t].column];
        if (cause != NOWHERE) {
          work->set[cause] = true;
        }
      }
    }
  }
}

/* Do the facts in SET clash by themselves, in NETWORK or the part of it they are about?  */
static bool
clashes (const struct work *work, const struct network *network, const bool set[])
{
  struct arena *arena = arena_create ();
  bool clash = core_clashes (arena, network, set, work->core->options);
  arena_destroy (arena);
  return clash;
}

/* Leaves out of the set those of the facts LIST[0 .. COUNT - 1] without which the others still
   clash: all at once, or else by halves.                                                        */
static bool
leave_out (struct work *work, const struct network *network, size_t count, const size_t list[],
           struct fault *fault)
{
  if (count == 0) {
    return true;
  }
  if (!core_goes_on (work->core->options, fault)) {
    return false;
  }
  for (size_t i = 0; i < count; i++) {
    work->set[list[i]] = false;
  }
  if (clashes (work, network, work->set)) {
    return true;
  }
  for (size_t i = 0; i < count; i++) {
    work->set[list[i]] = true;
  }
  return count == 1
         || (leave_out (work, network, count / 2, list, fault)
             && leave_out (work, network, count - count / 2, list + count / 2, fault));
}

/* Leaves facts out as long as the others still clash.  A set that does not clash by itself leans on
   facts that made a split linear: then all are gone through, its own last.                      */
static bool
thin_out (struct work *work, struct fault *fault)
{
  const struct network *network = work->core->network;
  size_t facts = network->facts, count = 0, own = 0;
  size_t *list = ARENA_ARRAY (work->arena, 2 * facts + 1, size_t), *owned = list + facts;
  for (size_t f = 0; f < facts; f++) {
    if (work->set[f]) {
      owned[own++] = f;
    } else if (work->system->take[f]) {
      list[count++] = f;
    }
  }
  work->part = network_part (work->arena, network, work->kept, work->set);
  if (!clashes (work, work->part, work->set)) {
    work->part = network;
    work->all = false;
    memcpy (work->set, work->system->take, facts * sizeof *work->set);
    if (!leave_out (work, network, count, list, fault)) {
      return false;
    }
  }
  for (size_t i = 0; i < own; i++) {
    if (!leave_out (work, work->part, 1, &owned[i], fault)) {
      return false;
    }
  }
  return true;
}

/* Looks through all sets of SIZE facts from FROM on; TRIAL is the first that clashes.  */
static bool
any_of (struct work *work, size_t from, size_t size)
{
  const struct network *network = work->core->network;
  if (size == 0) {
    return clashes (work, network, work->trial);
  }
  for (size_t f = from; f < network->facts; f++) {
    if (work->system->take[f]) {
      work->trial[f] = true;
      if (any_of (work, f + 1, size - 1)) {
        return true;
      }
      work->trial[f] = false;
    }
  }
  return false;
}

/* Is no set smaller?  Either all were looked at and nothing could be left out of the smallest, or
   all that are smaller can be looked through: the first that clashes takes the set's place.     */
static bool
prove (struct work *work)
{
  const struct network *network = work->core->network;
  size_t facts = 0, count = 0;
  double sets = 0, of_size = 1;
  for (size_t f = 0; f < network->facts; f++) {
    facts += work->system->take[f] ? 1 : 0;
    count += work->set[f] ? 1 : 0;
  }
  if (work->all && count == work->count) {
    return true;
  }
  for (size_t size = 1; size < count; size++) {
    of_size *= (double) (facts - size + 1) / (double) size;
    sets += of_size;
  }
  if (sets > MOST_SETS || work->system->columns > SMALL) {
    return false;
  }
  for (size_t size = 1; size < count; size++) {
    memset (work->trial, 0, network->facts * sizeof *work->trial);
    if (any_of (work, 0, size)) {
      memcpy (work->set, work->trial, network->facts * sizeof *work->set);
      work->part = network;
      return true;
    }
  }
  return true;
}

/* Multipliers of the structure's rows, in the network's own units, that go with those of the
   facts.                                                                                        */
static double *
find_mu (struct work *work)
{
  double *mu = system_multipliers (work->arena, work->system, work->lambda);
  for (size_t i = 0; i < work->system->structure; i++) {
    mu[i] *= work->system->row_scale[i];
  }
  return mu;
}

/* How far the balances of the boundary with the greatest multipliers are out when all facts hold
   and as little as can be is out: all components alike, or one against the rest.                */
static void
find_gap (struct work *work, const double mu[], size_t at, struct conflict *conflict)
{
  size_t components = work->core->network->components, count = 0;
  double sum = 0, spread = 0, most = 0, gap = 0, mean, best = 0;
  for (size_t i = 0; i < work->rows; i++) {
    gap -= work->lambda[i] * work->right[i];
  }
  for (size_t i = 0; i < work->system->structure; i++) {
    if (work->system->rows.row[i].kind == ROW_BALANCE && work->system->rows.row[i].of == at) {
      sum += mu[i];
      count++;
      most = fmax (most, fabs (mu[i]));
    }
  }
  mean = sum / (double) (count > 0 ? count : 1);
  for (size_t i = 0; i < work->system->structure; i++) {
    const struct row *row = &work->system->rows.row[i];
    if (row->kind == ROW_BALANCE && row->of == at) {
      spread += (mu[i] - mean) * (mu[i] - mean);
      if (fabs (mu[i] - mean) > best * (1 + 1e-9)) {
        best = fabs (mu[i] - mean);
        conflict->component = row->component;
        conflict->gap = mu[i] - mean;
      }
    }
  }
  if (sqrt (spread) <= 1e-6 * most) {
    conflict->component = components;
    conflict->gap = most > 0 ? gap / mean : 0;
  } else {
    conflict->gap *= gap / spread;
  }
}

/* Which boundaries' balances are in the clash.  */
static void
find_envelope (struct work *work, struct conflict *conflict)
{
  const struct rows *rows = &work->system->rows;
  bool *around = ARENA_ARRAY (work->keep, work->core->network->boundaries + 1, bool);
  double *mu = find_mu (work), most = 0, own = 0;
  size_t at = NOWHERE;
  for (size_t i = 0; i < work->rows; i++) {
    double lambda = work->lambda[i] * work->system->row_scale[work->system->structure + i];
    if (fabs (lambda) > own) {
      own = fabs (lambda);
      conflict->gap = -work->lambda[i] * work->right[i] / own;
    }
  }
  for (size_t i = 0; i < work->system->structure; i++) {
    if (rows->row[i].kind == ROW_BALANCE && fabs (mu[i]) > most * (1 + 1e-9)) {
      most = fabs (mu[i]);
      at = rows->row[i].of;
    }
  }
  conflict->around = around;
  conflict->component = work->core->network->components;
  if (most <= no_multiplier * own) {
    double gap = 0;
    for (size_t i = 0; i < work->rows; i++) {
      gap -= work->lambda[i] * work->right[i] / own;
    }
    conflict->gap = gap;
    return;
  }
  for (size_t i = 0; i < work->system->structure; i++) {
    if (fabs (mu[i]) > no_multiplier * most) {
      work->kept[rows->row[i].of] = true;
      around[rows->row[i].of] = around[rows->row[i].of] || rows->row[i].kind == ROW_BALANCE;
    }
  }
  find_gap (work, mu, at, conflict);
}

/* The combination of the facts that does not close, scaled so that it comes to the gap.  */
static void
find_terms (const struct work *work, struct conflict *conflict)
{
  const struct system *system = work->system;
  struct conflict_term *terms = ARENA_ARRAY (work->keep, work->rows + 1, struct conflict_term);
  double raw = 0;
  for (size_t i = 0; i < work->rows; i++) {
    raw -= work->lambda[i] * work->right[i];
  }
  const double scale = conflict->gap / raw;
  for (size_t i = 0; i < work->rows && fabs (raw) > work->floor && isfinite (scale); i++) {
    const struct row *row = &system->rows.row[system->structure + i];
    if (fabs (work->lambda[i]) > 0) {
      terms[conflict->term_count++] = (struct conflict_term) {
        row->of, row->component, system->rows.right[system->structure + i],
        -work->lambda[i] * system->row_scale[system->structure + i] * scale };
    }
  }
  conflict->terms = terms;
}

/* The component that a composition without multipliers leaves out and another fact of the set
   speaks of; NOWHERE.                                                                           */
static size_t
missing_component (const struct work *work, size_t f)
{
  const struct network *network = work->core->network;
  const struct fact *fact = &network->fact[f];
  for (size_t i = 0; i < work->rows; i++) {
    if (work->system->rows.row[work->system->structure + i].of == f
        && fabs (work->lambda[i]) > 0) {
      return NOWHERE;
    }
  }
  for (size_t g = 0; g < network->facts; g++) {
    for (size_t t = 0; work->set[g] && t < network->fact[g].left.count; t++) {
      size_t column = network->fact[g].left.terms[t].column, c = column % network->components;
      bool single = 2 * network->fact[g].left.count <= network->components;
      if (column < network->streams * network->components && single && !(fact->fractions[c] > 0)) {
        return c;
      }
    }
  }
  return NOWHERE;
}

/* The component of a composition that is most at odds: that of the gap, else the one with the
   greatest multiplier.                                                                          */
static size_t
odd_component (const struct work *work, size_t f, const struct conflict *conflict)
{
  size_t missing = missing_component (work, f);
  if (missing != NOWHERE) {
    return missing;
  }
  const struct network *network = work->core->network;
  const struct fact *fact = &network->fact[f];
  size_t found = 0;
  double most = -1;
  if (conflict->component < network->components && fact->fractions[conflict->component] > 0) {
    return conflict->component;
  }
  for (size_t i = 0; i < work->rows; i++) {
    const struct row *row = &work->system->rows.row[work->system->structure + i];
    if (row->of == f && fabs (work->lambda[i]) > most) {
      most = fabs (work->lambda[i]);
      found = row->component;
    }
  }
  return found;
}

static bool
find_suspects (struct work *work, struct conflict *conflict, struct fault *fault)
{
  const struct network *network = work->core->network;
  struct suspect *suspects = ARENA_ARRAY (work->keep, network->facts + 1, struct suspect);
  bool *all = ARENA_ARRAY (work->arena, network->facts + 1, bool);
  conflict->count = 0;
  memcpy (all, work->system->take, network->facts * sizeof *all);
  work->alone = false;
  for (size_t f = 0; f < network->facts; f++) {
    struct suspect *suspect = &suspects[conflict->count];
    bool done;
    if (!work->set[f]) {
      continue;
    }
    *suspect = (struct suspect) { .fact = f, .component = network->components };
    if (network->fact[f].kind == FACT_COMPOSITION) {
      suspect->component = odd_component (work, f, conflict);
    }
    all[f] = false;
    if (work->surplus > 1 && clashes (work, network, all)) {
      done = suspect_need (work->core, work->part, work->set, suspect, fault);
    } else {
      done = suspect_need (work->core, network, all, suspect, fault);
      work->alone = work->alone || suspect->plausible;
    }
    if (!done) {
      return false;
    }
    all[f] = true;
    conflict->count++;
  }
  conflict->suspects = suspects;
  return true;
}

static void
prepare (struct work *work)
{
  const struct system *system = work->system;
  size_t facts = work->core->network->facts, m = system->structure;
  double most = 0;
  work->right = ARENA_ARRAY (work->arena, work->rows + 1, double);
  work->lambda = ARENA_ARRAY (work->arena, work->rows + 1, double);
  work->trial_lambda = ARENA_ARRAY (work->arena, work->rows + 1, double);
  work->by_figure = ARENA_ARRAY (work->arena, work->rows + 1, double);
  work->set = ARENA_ARRAY (work->arena, facts + 1, bool);
  work->trial = ARENA_ARRAY (work->arena, facts + 1, bool);
  work->kept = ARENA_ARRAY (work->arena, work->core->network->boundaries + 1, bool);
  for (size_t i = 0; i < work->rows; i++) {
    work->right[i] = system->rows.right[m + i] * system->row_scale[m + i];
    most = fmax (most, fabs (work->right[i]));
  }
  work->floor = 1e-9 * most;
}

bool
conflict_find (struct arena *keep, const struct core *core, struct solution *solution,
               struct fault *fault)
{
  struct conflict *conflict = ARENA_NEW (keep, struct conflict);
  conflict->still = core->network->streams;
  system_left (core->arena, core->system);
  struct work work = { .keep = keep, .arena = core->arena, .core = core,
                       .system = core->system, .surplus = core->system->surplus,
                       .rows = core->system->rows.count - core->system->structure };
  prepare (&work);
  if (!find_set (&work, fault)) {
    return false;
  }
  find_envelope (&work, conflict);
  find_terms (&work, conflict);
  add_causes (&work);
  if (!thin_out (&work, fault)) {
    return false;
  }
  conflict->least = prove (&work);
  if (!find_suspects (&work, conflict, fault)) {
    return false;
  }
  conflict->none_alone = !work.alone && work.surplus > 1;
  if (conflict->none_alone && !pairs_find (keep, core, work.set, conflict, fault)) {
    return false;
  }
  conflict->p = core->p;
  solution->conflict = conflict;
  return true;
}
