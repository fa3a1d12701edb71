#include "config.h"
#include "balance/core.h"

#include <math.h>
#include <string.h>
#include "balance/moves.h"
#include "balance/null_space.h"
#include "balance/program.h"
#include "balance/reduce.h"
#include "balance/solution.h"
#include "support/arena.h"
#include "support/fault.h"

/* Fractions of several solutions are one when they differ by less.  */
static const double same_fraction = 1e-8;
/* A total below this part of the largest flow is nothing.  */
static const double no_flow = 1e-10;

/* Entries of a null space that is made without being asked for.  */
static const size_t modest = 2000000;
/* Open columns times directions up to which bounds are looked after.  */
static const size_t few = 20000;

bool
core_goes_on (const struct solve_options *options, struct fault *fault)
{
  if (options->interrupted && options->interrupted ()) {
    return fault_set (fault, MESSAGE_INTERRUPTED, NULL, NULL);
  }
  return true;
}

static double
largest_flow (const struct core *core, const double v[])
{
  double largest = 0;
  for (size_t j = 0; j < core->network->streams * core->network->components; j++) {
    largest = fmax (largest, fabs (v[j]));
  }
  return largest;
}

/* Steps of pseudorandom size along the null space, for want of anything better.  */
static void
wander (const struct core *core, unsigned long long seed, double v[])
{
  double size = largest_flow (core, core->v);
  double *z = ARENA_ARRAY (core->arena, core->freedom + 1, double);
  double *w = ARENA_ARRAY (core->arena, core->system->columns + 1, double);
  for (size_t k = 0; k < core->freedom; k++) {
    seed = seed * 6364136223846793005ULL + 1442695040888963407ULL;
    z[k] = (size > 0 ? size : 1) * ((double) (seed >> 40) / (double) (1 << 24) - 0.5);
  }
  null_space_move (core->null, z, w);
  for (size_t j = 0; j < core->system->columns; j++) {
    v[j] = core->v[j] + w[j] * core->system->scale[j];
  }
}

double **
core_generic (struct arena *arena, const struct core *core, size_t count)
{
  const struct network *network = core->network;
  double **v = ARENA_ARRAY (arena, count, double *);
  struct program *program = NULL;
  for (size_t i = 0; i < count && core->root; i++) {
    bool open = core->freedom > 0 && core->roots > 0;
    v[i] = !open || i % (core->roots + 1) == 0 ? core->v : core->root[i % (core->roots + 1) - 1];
  }
  if (core->root) {
    return v;
  }
  if (core->freedom > 0 && core->freedom * core->system->present <= few) {
    program = program_make (arena, core->system, core->v, core->null, core->options->interrupted);
  }
  for (size_t s = 0; program && program_feasible (program) && s < network->streams; s++) {
    struct term *terms = ARENA_ARRAY (arena, network->components, struct term);
    for (size_t c = 0; c < network->components; c++) {
      struct form one = { 1, &terms[c] };
      terms[c] = (struct term) { s * network->components + c, 1 };
      (void) program_least (program, &one);
      (void) program_greatest (program, &one);
    }
  }
  for (size_t i = 0; i < count; i++) {
    v[i] = ARENA_ARRAY (arena, core->system->columns, double);
    if (core->freedom == 0) {
      memcpy (v[i], core->v, core->system->columns * sizeof **v);
    } else if (program && program_feasible (program)) {
      program_inside (program, i, v[i]);
      system_correct (core->system, core->v, v[i]);
    } else {
      wander (core, i + 1, v[i]);
    }
  }
  return v;
}

void
core_fractions (const struct core *core, size_t count, double *const v[], double fraction[])
{
  size_t components = core->network->components;
  for (size_t i = 0; i < count; i++) {
    double least = no_flow * largest_flow (core, v[i]);
    for (size_t s = 0; s < core->network->streams; s++) {
      double total = system_total (core->system, v[i], s);
      for (size_t j = s * components; j < (s + 1) * components; j++) {
        double flow = core->system->absence.absent[j] ? 0 : v[i][j];
        double here = fabs (total) > least ? flow / total : (double) NAN;
        bool same = i == 0 || fabs (here - fraction[j]) <= same_fraction;
        fraction[j] = same ? here : (double) NAN;
      }
    }
  }
}

/* Is the whole composition of a stream fixed?  */
static bool
is_composed (const struct core *core, size_t stream, const double fraction[])
{
  for (size_t c = 0; c < core->network->components; c++) {
    if (isnan (fraction[stream * core->network->components + c])) {
      return false;
    }
  }
  return true;
}

/* Is the total of a stream one number, other than nothing?  */
static bool
has_total (const struct core *core, size_t stream, double *const v[2])
{
  double a = system_total (core->system, v[0], stream);
  double b = system_total (core->system, v[1], stream);
  return fabs (a) > no_flow * largest_flow (core, v[0]) && fabs (a - b) <= same_fraction * fabs (a);
}

/* The share of an outlet follows from two totals.  */
static bool
find_share (struct core *core, const struct bend *bend, double *const v[2])
{
  const struct boundary *b = &core->network->boundary[bend->boundary];
  struct split *split = &core->split[bend->boundary];
  if (!has_total (core, bend->inlet, v) || !has_total (core, bend->outlet, v)) {
    return false;
  }
  if (!split->share) {
    split->share = ARENA_ARRAY (core->arena, b->outlet_count, double);
    for (size_t o = 0; o < b->outlet_count; o++) {
      split->share[o] = (double) NAN;
    }
  }
  for (size_t o = 0; o < b->outlet_count; o++) {
    if (b->outlets[o] == bend->outlet) {
      split->share[o] = system_total (core->system, v[0], bend->outlet)
                        / system_total (core->system, v[0], bend->inlet);
    }
  }
  return true;
}

static bool
find_composition (struct core *core, const struct bend *bend, const double fraction[])
{
  const struct boundary *b = &core->network->boundary[bend->boundary];
  struct split *split = &core->split[bend->boundary];
  for (size_t i = 0; i <= b->outlet_count && split->way != SPLIT_COMPOSED; i++) {
    size_t stream = i == 0 ? bend->inlet : b->outlets[i - 1];
    if (is_composed (core, stream, fraction)) {
      split->way = SPLIT_COMPOSED;
      split->from = stream;
      split->x = &fraction[stream * core->network->components];
    }
  }
  return split->way == SPLIT_COMPOSED;
}

/* Fractions that come out in any stream of the split, without the whole composition.  */
static bool
find_parts (struct core *core, const struct bend *bend, const double fraction[])
{
  size_t components = core->network->components;
  const struct boundary *b = &core->network->boundary[bend->boundary];
  struct split *split = &core->split[bend->boundary];
  bool any = false;
  if (!split->part) {
    split->part = ARENA_ARRAY (core->arena, components, double);
    split->part_from = ARENA_ARRAY (core->arena, components, size_t);
    for (size_t c = 0; c < components; c++) {
      split->part[c] = (double) NAN;
    }
  }
  for (size_t i = 0; i <= b->outlet_count; i++) {
    size_t stream = i == 0 ? bend->inlet : b->outlets[i - 1];
    for (size_t c = 0; c < components; c++) {
      double x = fraction[stream * components + c];
      if (isnan (split->part[c]) && x > 0
          && !core->system->absence.absent[stream * components + c]) {
        split->part[c] = x;
        split->part_from[c] = stream;
        any = true;
      }
    }
  }
  return any;
}

/* Makes splits linear whose composition or share comes out; were there any?  */
static bool
straighten (struct core *core)
{
  size_t flows = core->network->streams * core->network->components;
  double *fraction = ARENA_ARRAY (core->arena, flows, double), **v;
  core_open (core);
  v = core_generic (core->arena, core, 3);
  bool any = false;
  core_fractions (core, 3, v, fraction);
  for (size_t i = 0; i < core->system->bends; i++) {
    const struct bend *bend = &core->system->bend[i];
    any = find_composition (core, bend, fraction) || any;
  }
  for (size_t i = 0; i < core->system->bends && !any; i++) {
    any = find_share (core, &core->system->bend[i], v) || any;
  }
  for (size_t i = 0; i < core->system->bends && !any; i++) {
    any = find_parts (core, &core->system->bend[i], fraction) || any;
  }
  return any;
}

void
core_open (struct core *core)
{
  if (!core->system->null) {
    system_open (core->arena, core->system, core->options->interrupted);
    core->null = core->system->null;
  }
}

static void
reduce_rows (struct core *core, const bool take[], size_t most)
{
  core->system = system_make (core->arena, core->network, take, core->split);
  system_reduce (core->arena, core->system, REDUCE_CORE);
  core->null = NULL;
  if (core->system->freedom * core->system->columns <= most) {
    core_open (core);
  }
  core->v = ARENA_ARRAY (core->arena, core->system->columns + 1, double);
  memcpy (core->v, core->system->particular, core->system->columns * sizeof *core->v);
  core->freedom = core->system->freedom;
  core_agree (core);
  core->surplus = core->system->surplus;
}

/* When does all go on with moved figures: where measured ones are still to come never, where only a
   clash is asked for with what splits of unknown share need.                                    */
enum moving { MOVE_NEVER, MOVE_FOR_BENDS, MOVE_ALWAYS };

/* What the linear rows come to.  Where figures agree only within their digits, rows of the figures
   as typed have other dependencies than those that hold: a share and a rest that do not add up to
   one leave no flow at all.  So it is those of the moved figures that go on, if anything does.  */
static void
reduce (struct core *core, const bool take[], size_t most, enum moving moving)
{
  double p;
  core->network = core->typed;
  reduce_rows (core, take, most);
  p = core->p;
  if (core->moves && (moving == MOVE_ALWAYS
                      || (moving == MOVE_FOR_BENDS && core->system->bends > 0))) {
    core->network = network_moved (core->arena, core->system, core->figure, core->moves);
    reduce_rows (core, take, most);
    core->p = p;
  }
}

/* The linear rows, with all splits that can be made linear, as long as the null space has no more
   than MOST entries; null: interrupted.                                                         */
static struct core *
core_linear (struct arena *arena, const struct network *network, const bool take[],
             const struct solve_options *options, size_t most, enum moving moving,
             struct fault *fault)
{
  struct core *core = ARENA_NEW (arena, struct core);
  core->arena = arena;
  core->network = core->typed = network;
  core->options = options;
  core->split = ARENA_ARRAY (arena, network->boundaries + 1, struct split);
  for (size_t b = 0; b < network->boundaries; b++) {
    bool is_split = network->boundary[b].kind == BOUNDARY_SPLIT;
    core->split[b].way = is_split ? SPLIT_BENT : SPLIT_NONE;
  }
  do {
    if (!core_goes_on (options, fault)) {
      return NULL;
    }
    reduce (core, take, most < modest ? most : modest, moving);
  } while (core->agree && core->system->bends > 0
           && core->freedom <= most / (core->system->columns + 1) && straighten (core));
  return core;
}

struct core *
core_make (struct arena *arena, const struct network *network, const bool take[],
           const struct solve_options *options, struct fault *fault)
{
  struct core *core = core_linear (arena, network, take, options, (size_t) -1, MOVE_ALWAYS, fault);
  if (!core) {
    return NULL;
  }
  core_open (core);
  return !core->agree || core->system->bends == 0 || core_bend (core, fault) ? core : NULL;
}

struct core *
core_outline (struct arena *arena, const struct network *network, const bool take[],
              const struct solve_options *options, struct fault *fault)
{
  return core_linear (arena, network, take, options, few, MOVE_NEVER, fault);
}

bool
core_clashes (struct arena *arena, const struct network *network, const bool take[],
              const struct solve_options *options)
{
  static const size_t most = 20000000;
  struct fault ignored;
  const struct core *core;
  fault_init (&ignored, arena);
  core = core_linear (arena, network, take, options, most, MOVE_FOR_BENDS, &ignored);
  return core && !core->agree;
}
