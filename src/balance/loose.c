#include "config.h"
#include "balance/loose.h"

#include <float.h>
#include <math.h>
#include <string.h>
#include "balance/digits.h"
#include "balance/null_space.h"
#include "balance/rank.h"
#include "balance/suggest.h"
#include "support/arena.h"
#include "support/fault.h"

/* Figures looked into one by one, and those named.  */
enum { MOST_LEAVES = 24, MOST_HINGES = 6 };
/* All figures at once are moved this often to see whether it is worth while to look.  */
enum { DRAWS = 2 };

/* A figure that moves nothing by more than this part of it is none that a result hangs on.  */
static const double felt = 0.05;
/* One that is named moves something by more than this part.  */
static const double worth_naming = 0.2;
/* Below this part of the largest flow a total is nothing, and a fraction below it too.  */
static const double nothing = 1e-9;
/* A flow that comes out as nothing hangs on last digits if these make more of it than this part of
   the largest flow beside it.                                                                   */
static const double beside = 0.05;

/* One figure, and what half its last digit does to the unknowns.  */
struct leaf { size_t row; double *dv; };

struct work {
  struct arena *keep, *arena;
  const struct core *core;
  const struct system *system;
  const struct network *network, *typed;
  const struct solution *solution;
  size_t quantities;             /* totals by stream, then fractions by column */
  double *value, *size;          /* by quantity; size 0: not looked at */
  double largest;                /* total */
  const struct digits *digits;
  size_t leaves;
  struct leaf leaf[MOST_LEAVES];
  unsigned long long random;     /* Knuth's 64-bit multiplier, MMIX */
};

/* ---- Results ---- */

static double
moved (const struct work *work, size_t q, const double dv[])
{
  size_t streams = work->network->streams, j = q - streams;
  if (q < streams) {
    return system_total (work->system, dv, q);
  }
  double total = work->value[j / work->network->components];
  return (dv[j] - work->value[q] * system_total (work->system, dv, j / work->network->components))
         / total;
}

/* The largest total at either end of a stream.  */
static double
largest_beside (const struct work *work, size_t stream)
{
  double largest = 0;
  for (size_t b = 0; b < work->network->boundaries; b++) {
    const struct boundary *boundary = &work->network->boundary[b];
    double most = 0;
    bool here = false;
    for (size_t i = 0; i < boundary->inlet_count + boundary->outlet_count; i++) {
      size_t s = i < boundary->inlet_count ? boundary->inlets[i]
                                           : boundary->outlets[i - boundary->inlet_count];
      most = fmax (most, fabs (work->value[s]));
      here = here || s == stream;
    }
    largest = here ? fmax (largest, most) : largest;
  }
  return largest;
}

/* What is fixed, and by how much of it moving counts.  */
static void
list_results (struct work *work)
{
  const struct network *network = work->network;
  const struct solution *solution = work->solution;
  size_t streams = network->streams, n = network->components;
  work->quantities = streams * (n + 1);
  work->value = ARENA_ARRAY (work->arena, work->quantities + 1, double);
  work->size = ARENA_ARRAY (work->arena, work->quantities + 1, double);
  for (size_t s = 0; s < streams; s++) {
    work->value[s] = system_total (work->system, solution->value, s);
    work->largest = fmax (work->largest, fabs (work->value[s]));
  }
  for (size_t s = 0; s < streams; s++) {
    if (solution->fixed_total[s] && system_parts (work->system, s) > 0) {
      bool any = fabs (work->value[s]) > nothing * work->largest;
      work->size[s] = any ? fabs (work->value[s])
                      : work->core->freedom == 0 ? beside * largest_beside (work, s) : 0;
      for (size_t j = s * n; any && n > 1 && j < (s + 1) * n; j++) {
        bool there = solution->fixed_fraction[j] && !work->system->absence.absent[j];
        work->value[streams + j] = there ? solution->fraction[j] : 0;
        work->size[streams + j] = fabs (work->value[streams + j]) > nothing
                                    ? fabs (work->value[streams + j]) : 0;
      }
    }
  }
}

/* The most that any result moves, as a part of itself.  */
static double
most_moved (const struct work *work, const double dv[])
{
  double most = 0;
  for (size_t q = 0; q < work->quantities; q++) {
    most = work->size[q] > 0 ? fmax (most, fabs (moved (work, q, dv)) / work->size[q]) : most;
  }
  return most;
}

/* ---- Figures that results hang on ---- */

/* Between a half and one and a half, either way.  */
static double
next_weight (struct work *work)
{
  work->random = work->random * 6364136223846793005ULL + 1442695040888963407ULL;
  double x = (double) (work->random >> 11) / (double) (1ULL << 53);
  return x < 0.5 ? -(0.5 + 2 * x) : 2 * x - 0.5;
}

/* Does moving the figures LIST[0 .. COUNT - 1] together, in ways drawn at random, move any result?
   What they do may cancel once, not again.                                                      */
static bool
are_felt (struct work *work, size_t count, const size_t list[])
{
  struct arena *arena = arena_create ();
  double *dv = ARENA_ARRAY (arena, work->system->columns + 1, double);
  double *weight = ARENA_ARRAY (arena, count + 1, double);
  bool any = false;
  for (int draw = 0; draw < DRAWS && !any; draw++) {
    for (size_t i = 0; i < count; i++) {
      weight[i] = next_weight (work);
    }
    digits_respond (work->digits, arena, count, list, weight, dv);
    any = most_moved (work, dv) > felt;
  }
  arena_destroy (arena);
  return any;
}

/* Finds the figures that are felt, by halves.  False: interrupted.  */
static bool
find_leaves (struct work *work, size_t count, const size_t list[], struct fault *fault)
{
  if (!core_goes_on (work->core->options, fault)) {
    return false;
  }
  if (count == 0 || work->leaves == MOST_LEAVES || !are_felt (work, count, list)) {
    return true;
  }
  if (count > 1) {
    return find_leaves (work, count / 2, list, fault)
           && find_leaves (work, count - count / 2, list + count / 2, fault);
  }
  struct leaf *leaf = &work->leaf[work->leaves++];
  *leaf = (struct leaf) { list[0], ARENA_ARRAY (work->arena, work->system->columns + 1, double) };
  digits_respond (work->digits, work->arena, 1, list, (const double[]) { 1 }, leaf->dv);
  return true;
}

/* ---- What hangs on them ---- */

static struct quantity
quantity_of (const struct work *work, size_t q)
{
  size_t streams = work->network->streams, n = work->network->components;
  return q < streams ? (struct quantity) { QUANTITY_TOTAL, q, 0 }
                     : (struct quantity) { QUANTITY_FRACTION, (q - streams) / n,
                                           (q - streams) % n };
}

static size_t
index_of (const struct work *work, const struct quantity *quantity)
{
  return quantity->kind == QUANTITY_TOTAL ? quantity->stream
         : work->network->streams + quantity->stream * work->network->components
           + quantity->component;
}

/* What all leaves together move a quantity by.  */
static double
all_move (const struct work *work, size_t q)
{
  double sum = 0;
  for (size_t l = 0; l < work->leaves && work->size[q] > 0; l++) {
    sum += fabs (moved (work, q, work->leaf[l].dv));
  }
  return sum;
}

/* The results that all leaves together move by more than themselves, the worst first.  */
static void
find_ends (struct work *work, struct loose *loose)
{
  struct loose_end *ends = ARENA_ARRAY (work->keep, work->quantities + 1, struct loose_end);
  double *worst = ARENA_ARRAY (work->arena, work->quantities + 1, double);
  for (size_t q = 0; q < work->quantities; q++) {
    double sum = all_move (work, q);
    if (work->size[q] > 0 && sum > work->size[q] * (1 + 1e-6)) {
      double ratio = sum / work->size[q];
      size_t k = loose->count++;
      for (; k > 0 && worst[k - 1] < ratio * (1 - 1e-9); k--) {
        ends[k] = ends[k - 1];
        worst[k] = worst[k - 1];
      }
      ends[k] = (struct loose_end) { quantity_of (work, q), work->value[q], sum };
      worst[k] = ratio;
    }
  }
  loose->ends = ends;
}

/* What a leaf moves end E by, as a part of it.  */
static double
pull (const struct work *work, const struct loose *loose, size_t e, const double dv[])
{
  size_t q = index_of (work, &loose->ends[e].quantity);
  return moved (work, q, dv) / work->size[q];
}

/* The end that a leaf moves most, and by how much.  */
static double
strongest (const struct work *work, const struct loose *loose, const double dv[], size_t *end)
{
  double most = 0;
  for (size_t e = 0; e < loose->count; e++) {
    double by = fabs (pull (work, loose, e, dv));
    if (by > most * (1 + 1e-9)) {
      most = by;
      *end = e;
    }
  }
  return most;
}

/* FACT, of a composition COMPONENT of it, moved by SIDE times HALF its last digit.  */
static struct fact
moved_fact (const struct work *work, const struct fact *fact, size_t component, double side,
            double half)
{
  struct fact out = *fact;
  size_t n = work->network->components;
  if (fact->kind != FACT_COMPOSITION) {
    out.value += side * half;
    return out;
  }
  double *x = ARENA_ARRAY (work->arena, n, double), old = fact->fractions[component];
  for (size_t c = 0; c < n; c++) {
    double here = old + side * half;
    x[c] = c == component ? here : fact->fractions[c] * (1 - here) / (1 - old);
  }
  out.fractions = x;
  return out;
}

/* Quantity Q with the figure of a hinge moved to one side; NAN: nothing comes out.  */
static double
taken_to (const struct work *work, const struct hinge *hinge, size_t q, double side)
{
  struct network network = *work->network;
  struct fact *facts = ARENA_ARRAY (work->arena, network.facts, struct fact);
  struct fault ignored;
  fault_init (&ignored, work->arena);
  memcpy (facts, network.fact, network.facts * sizeof *facts);
  double half = digits_half (work->typed, hinge->fact, hinge->component);
  facts[hinge->fact] = moved_fact (work, &facts[hinge->fact], hinge->component, side, half);
  network.fact = facts;
  const struct core *core = core_make (work->arena, &network, work->system->take,
                                       work->core->options, &ignored);
  if (!core || !core->agree || core->freedom != work->core->freedom) {
    return (double) NAN;
  }
  if (q < network.streams) {
    double total = system_total (core->system, core->v, q);
    return fabs (total) > nothing * work->largest ? total : 0;
  }
  size_t j = q - network.streams;
  return core->v[j] / system_total (core->system, core->v, j / network.components);
}

/* How far half a digit takes the end; not at all beyond where it is: by way of infinity.  */
static void
find_reach (const struct work *work, const struct loose *loose, struct hinge *hinge)
{
  const struct loose_end *end = &loose->ends[hinge->end];
  size_t q = index_of (work, &end->quantity);
  double up = taken_to (work, hinge, q, 1), down = taken_to (work, hinge, q, -1);
  bool around = fmin (up, down) <= end->value && end->value <= fmax (up, down);
  bool known = !isnan (up) && !isnan (down) && around;
  hinge->least = known ? fmin (up, down) : (double) NAN;
  hinge->greatest = known ? fmax (up, down) : (double) NAN;
}

static void
find_hinges (struct work *work, struct loose *loose)
{
  struct hinge *hinges = ARENA_ARRAY (work->keep, MOST_LEAVES, struct hinge);
  double strength[MOST_LEAVES];
  size_t count = 0;
  for (size_t l = 0; l < work->leaves; l++) {
    const struct leaf *leaf = &work->leaf[l];
    const struct row *row = &work->system->rows.row[work->system->structure + leaf->row];
    bool part = work->network->fact[row->of].kind == FACT_COMPOSITION;
    struct hinge hinge = { .fact = row->of,
                           .component = part ? row->component : work->network->components };
    double most = strongest (work, loose, leaf->dv, &hinge.end);
    if (most > worth_naming) {
      size_t k = count++;
      for (; k > 0 && strength[k - 1] < most * (1 - 1e-9); k--) {
        hinges[k] = hinges[k - 1];
        strength[k] = strength[k - 1];
      }
      hinges[k] = hinge;
      strength[k] = most;
    }
  }
  loose->hinges = hinges;
  loose->hinge_count = count < MOST_HINGES ? count : MOST_HINGES;
  for (size_t h = 0; h < loose->hinge_count; h++) {
    find_reach (work, loose, &hinges[h]);
  }
}

/* ---- What would settle it ---- */

/* Leaves that pull the ends in ways of their own, by Gram and Schmidt, the strongest first; what
   they leave of the pull of the others is less than half an end.                                */
static size_t
independent (struct work *work, const struct loose *loose, size_t chosen[])
{
  size_t n = loose->count, count = 0;
  double *a = ARENA_ARRAY (work->arena, work->leaves * n + 1, double);
  for (size_t i = 0; i < work->leaves * n; i++) {
    a[i] = pull (work, loose, i % n, work->leaf[i / n].dv);
  }
  for (;;) {
    size_t best = 0;
    double most = 0, size = 0;
    for (size_t i = 0; i < work->leaves * n; i++) {
      best = fabs (a[i]) > most ? i / n : best;
      most = fmax (most, fabs (a[i]));
    }
    if (count == MOST_LEAVES || most < (count > 0 ? 0.5 : DBL_MIN)) {
      return count;
    }
    chosen[count++] = best;
    double *unit = ARENA_ARRAY (work->arena, n, double);
    memcpy (unit, &a[best * n], n * sizeof *unit);
    for (size_t e = 0; e < n; e++) {
      size += unit[e] * unit[e];
    }
    for (size_t l = 0; l < work->leaves; l++) {
      double along = 0;
      for (size_t e = 0; e < n; e++) {
        along += unit[e] * a[l * n + e] / size;
      }
      for (size_t e = 0; e < n; e++) {
        a[l * n + e] = l == best ? 0 : a[l * n + e] - along * unit[e];
      }
    }
  }
}

/* What leaves do to the unknowns, taken for a null space.  */
static struct core
loosened (struct work *work, size_t count, const size_t chosen[])
{
  struct core core = *work->core;
  size_t columns = work->system->columns;
  double *null = ARENA_ARRAY (work->arena, columns * count + 1, double);
  for (size_t j = 0; j < columns; j++) {
    for (size_t k = 0; k < count; k++) {
      bool absent = work->system->absence.absent[j];
      null[j * count + k] = absent ? 0 : work->leaf[chosen[k]].dv[j] / work->system->scale[j];
    }
  }
  core.freedom = columns_orthonormal (columns, count, count, null, 0, NULL, NULL);
  core.null = null_space_of (work->arena, columns, core.freedom, count, null);
  return core;
}

/* What hangs on last digits counts as open, and so does a flow that moves along with one: by half
   as much at least.  All else is fixed.                                                         */
static struct solution
opened (struct work *work, const struct loose *loose)
{
  double most = 0;
  struct solution out = *work->solution;
  size_t streams = work->network->streams, n = work->network->components;
  bool *fixed = ARENA_ARRAY (work->arena, work->system->columns + 1, bool);
  bool *total = ARENA_ARRAY (work->arena, streams + 1, bool);
  bool *fraction = ARENA_ARRAY (work->arena, streams * n + 1, bool);
  for (size_t j = 0; j < work->system->columns; j++) {
    fixed[j] = j >= streams * n || !loose->total[j / n];
  }
  for (size_t e = 0; e < loose->count; e++) {
    bool flow = loose->ends[e].quantity.kind == QUANTITY_TOTAL;
    most = flow ? fmax (most, loose->ends[e].moves) : most;
  }
  for (size_t s = 0; s < streams; s++) {
    total[s] = !loose->total[s] && !(most > 0 && all_move (work, s) >= most / 2);
  }
  for (size_t j = 0; j < streams * n; j++) {
    fraction[j] = !loose->fraction[j];
  }
  out.fixed = fixed;
  out.fixed_total = total;
  out.fixed_fraction = fraction;
  out.suggestion_count = 0;
  return out;
}

static void
find_remedy (struct work *work, struct loose *loose)
{
  size_t chosen[MOST_LEAVES];
  struct core core;
  struct solution solution = opened (work, loose);
  loose->directions = independent (work, loose, chosen);
  core = loosened (work, loose->directions, chosen);
  suggest (work->keep, &core, &solution);
  loose->suggestion_count = solution.suggestion_count;
  loose->suggestions = solution.suggestions;
}

static void
mark_ends (struct work *work, struct loose *loose)
{
  size_t streams = work->network->streams, n = work->network->components;
  bool *total = ARENA_ARRAY (work->keep, streams + 1, bool);
  bool *fraction = ARENA_ARRAY (work->keep, streams * n + 1, bool);
  for (size_t e = 0; e < loose->count; e++) {
    const struct quantity *q = &loose->ends[e].quantity;
    *(q->kind == QUANTITY_TOTAL ? &total[q->stream] : &fraction[q->stream * n + q->component])
      = true;
  }
  loose->total = total;
  loose->fraction = fraction;
}

/* ---- */

bool
loose_find (struct arena *keep, const struct core *core, const struct network *typed,
            struct solution *solution, struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct work work = { .keep = keep, .arena = arena, .core = core, .system = core->system,
                       .network = core->network, .typed = typed, .solution = solution,
                       .random = 7, .digits = digits_make (arena, core, typed) };
  struct loose *loose;
  bool done = true;
  if (work.digits) {
    size_t count;
    const size_t *figures = digits_figures (work.digits, &count);
    list_results (&work);
    done = find_leaves (&work, count, figures, fault);
  }
  if (done && work.leaves > 0) {
    loose = ARENA_NEW (keep, struct loose);
    find_ends (&work, loose);
    if (loose->count > 0) {
      mark_ends (&work, loose);
      find_hinges (&work, loose);
      find_remedy (&work, loose);
      solution->loose = loose;
    }
  }
  arena_destroy (arena);
  return done;
}
