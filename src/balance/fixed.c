#include "config.h"
#include "balance/fixed.h"

#include <math.h>
#include <string.h>
#include "balance/null_space.h"
#include "balance/program.h"
#include "balance/reduce.h"
#include "support/arena.h"
#include "support/vector.h"

/* A form whose change along the null space is less than this part of its norm is fixed.  */
static const double moves_not = 1e-8;
/* A range narrower than this part of the largest flow, or of its own end, has no width.  */
static const double no_width = 1e-12, narrow = 1e-9;
/* A flow is negative when it is below this part of the largest.  */
static const double below_zero = 1e-9;

struct work {
  struct arena *keep;
  const struct core *core;
  const struct network *network;
  size_t flows, columns;
  double unit;                   /* the largest flow */
  double *value, *fraction;
  bool *fixed, *fixed_total, *fixed_fraction;
  struct range *range, *total_range;
  struct program *program;       /* null: nothing is open */
  bool feasible;
};

/* Has the user stopped it?  What is worked out then is forgotten.  */
static bool
is_stopped (const struct work *work)
{
  const struct solve_options *options = work->core->options;
  return options->interrupted && options->interrupted ();
}

/* Adds FACTOR times the row of column J to G, and to the square SIZE of the gradient's norm.  */
static void
reach_add (const struct core *core, size_t j, double factor, double g[], double *size)
{
  double a = core->system->absence.absent[j] ? 0 : factor * core->system->scale[j];
  if (fabs (a) > 0) {
    null_space_add (core->null, j, a, g);
  }
  *size += a * a;
}

/* F[outlet] / F[inlet] of a split: (1 at the outlet - phi at the inlet) / F[inlet].  */
static double
share_reach (const struct core *core, size_t outlet, const double v[], double g[])
{
  const struct network *network = core->network;
  double size = 0;
  for (size_t i = 0; i < core->system->bends; i++) {
    size_t inlet = core->system->bend[i].inlet;
    double in = system_total (core->system, v, inlet);
    if (core->system->bend[i].outlet == outlet && fabs (in) > 0) {
      double phi = system_total (core->system, v, outlet) / in;
      for (size_t c = 0; c < network->components; c++) {
        reach_add (core, outlet * network->components + c, 1 / in, g, &size);
        reach_add (core, inlet * network->components + c, -phi / in, g, &size);
      }
    }
  }
  return sqrt (size);
}

double
quantity_reach (const struct core *core, const struct quantity *quantity, const double v[],
                double g[])
{
  const struct network *network = core->network;
  size_t components = network->components, first = quantity->stream * components;
  double size = 0, total = 0;
  memset (g, 0, core->freedom * sizeof *g);
  if (quantity->kind == QUANTITY_EXTENT) {
    reach_add (core, network_extent (network, quantity->stream) + quantity->component, 1, g,
               &size);
    return sqrt (size);
  }
  if (quantity->kind == QUANTITY_SHARE) {
    return share_reach (core, quantity->stream, v, g);
  }
  if (quantity->kind == QUANTITY_FRACTION) {
    total = system_total (core->system, v, quantity->stream);
  }
  for (size_t c = 0; c < components; c++) {
    double is = c == quantity->component ? 1 : 0;
    if (quantity->kind == QUANTITY_FRACTION && fabs (total) > 0) {
      double x = v[first + quantity->component] / total;
      reach_add (core, first + c, (is - x) / total, g, &size);
    } else if (quantity->kind == QUANTITY_TOTAL || is > 0) {
      reach_add (core, first + c, 1, g, &size);
    }
  }
  return sqrt (size);
}

static void
classify_by_algebra (struct work *work)
{
  const struct core *core = work->core;
  double *g = ARENA_ARRAY (core->arena, core->freedom + 1, double);
  for (size_t j = 0; j < work->columns; j++) {
    work->fixed[j] = core->freedom == 0 || null_space_reach (core->null, j) <= moves_not;
    work->value[j] = core->system->absence.absent[j] ? 0 : core->v[j];
    work->unit = j < work->flows ? fmax (work->unit, fabs (work->value[j])) : work->unit;
  }
  for (size_t s = 0; s < work->network->streams; s++) {
    struct quantity total = { QUANTITY_TOTAL, s, 0 };
    double size = quantity_reach (core, &total, core->v, g);
    work->fixed_total[s] = vector_norm (core->freedom, g) <= moves_not * size;
  }
}

static bool
has_width (const struct work *work, const struct range *range)
{
  double end = fmax (fabs (range->greatest), fabs (range->least));
  return isinf (end)
         || range->greatest - range->least > fmax (no_width * work->unit, narrow * end);
}

/* The least (SIDE 0) or greatest of all that is open.  */
static void
find_ends (struct work *work, int side)
{
  double (*find) (struct program *, const struct form *) = side == 0 ? program_least
                                                                     : program_greatest;
  size_t components = work->network->components;
  struct term *terms = ARENA_ARRAY (work->core->arena, components, struct term);
  for (size_t j = 0; j < work->columns && !is_stopped (work); j++) {
    if (!work->fixed[j]) {
      terms[0] = (struct term) { j, 1 };
      *(side == 0 ? &work->range[j].least : &work->range[j].greatest)
        = find (work->program, &(struct form) { 1, terms });
    }
  }
  for (size_t s = 0; s < work->network->streams && !is_stopped (work); s++) {
    if (!work->fixed_total[s]) {
      for (size_t c = 0; c < components; c++) {
        terms[c] = (struct term) { s * components + c, 1 };
      }
      *(side == 0 ? &work->total_range[s].least : &work->total_range[s].greatest)
        = find (work->program, &(struct form) { components, terms });
    }
  }
}

/* Ranges of all that is open; what has none is fixed.  */
static void
find_ranges (struct work *work)
{
  work->range = ARENA_ARRAY (work->keep, work->columns, struct range);
  work->total_range = ARENA_ARRAY (work->keep, work->network->streams, struct range);
  for (size_t j = 0; j < work->columns; j++) {
    work->range[j] = (struct range) { work->value[j], work->value[j] };
  }
  for (size_t s = 0; s < work->network->streams; s++) {
    double total = system_total (work->core->system, work->value, s);
    work->total_range[s] = (struct range) { total, total };
  }
  find_ends (work, 0);
  find_ends (work, 1);
  for (size_t j = 0; j < work->columns; j++) {
    work->fixed[j] = work->fixed[j] || !has_width (work, &work->range[j]);
  }
  for (size_t s = 0; s < work->network->streams; s++) {
    work->fixed_total[s] = work->fixed_total[s] || !has_width (work, &work->total_range[s]);
  }
}

/* A value inside the ranges; where there is no solution without a negative flow, the one least
   so.                                                                                           */
static void
choose_values (struct work *work)
{
  if (work->feasible) {
    program_inside (work->program, 0, work->value);
    system_correct (work->core->system, work->core->v, work->value);
    for (size_t j = 0; j < work->flows; j++) {
      work->unit = fmax (work->unit, fabs (work->value[j]));
    }
    for (size_t j = 0; j < work->flows; j++) {
      bool none = work->fixed[j] && fabs (work->value[j]) <= no_width * work->unit;
      work->value[j] = none ? 0 : work->value[j];
    }
  } else {
    program_point (work->program, work->value);
    system_correct (work->core->system, work->core->v, work->value);
  }
}

static void
find_fractions (struct work *work)
{
  enum { POINTS = 3 };
  const struct core *core = work->core;
  double **v = ARENA_ARRAY (core->arena, POINTS, double *);
  if (!work->program || core->root || !work->feasible) {
    v = core_generic (core->arena, core, POINTS);
  } else {
    for (size_t i = 0; i < POINTS; i++) {
      v[i] = ARENA_ARRAY (core->arena, work->columns, double);
      program_inside (work->program, i, v[i]);
      system_correct (core->system, core->v, v[i]);
    }
  }
  core_fractions (core, POINTS, v, work->fraction);
  for (size_t j = 0; j < work->flows; j++) {
    work->fixed_fraction[j] = !isnan (work->fraction[j]);
  }
}

/* Do all right sides say nothing?  */
static bool
is_homogeneous (const struct system *system)
{
  for (size_t i = 0; i < system->rows.count; i++) {
    if (fabs (system->rows.right[i]) > 0) {
      return false;
    }
  }
  return true;
}

static const size_t *
find_negative (struct work *work, size_t *count)
{
  size_t *negative = ARENA_ARRAY (work->keep, work->flows + 1, size_t);
  bool all = work->program && !work->feasible;
  for (size_t j = 0; j < work->flows; j++) {
    if ((work->fixed[j] || all) && work->value[j] < -below_zero * work->unit) {
      negative[(*count)++] = j;
    }
  }
  return negative;
}

/* Row by row echelon form of the transpose of a block of the null space, so that each vector moves
   few columns.  Complete pivots; rows are directions.                                           */
static double *
echelon (struct arena *arena, const struct work *work, const struct null_block *block)
{
  size_t d = block->directions, n = block->columns;
  double *a = ARENA_ARRAY (arena, d * n + 1, double);
  bool *used = ARENA_ARRAY (arena, n + 1, bool);
  for (size_t j = 0; j < n; j++) {
    for (size_t k = 0; k < d && !work->fixed[block->column[j]]; k++) {
      a[k * n + j] = block->base[j * d + k];
    }
  }
  for (size_t k = 0; k < d && !is_stopped (work); k++) {
    size_t best = 0, row = k;
    double most = 0;
    for (size_t i = k; i < d; i++) {
      for (size_t j = 0; j < n; j++) {
        if (!used[j] && fabs (a[i * n + j]) > most) {
          most = fabs (a[i * n + j]);
          best = j;
          row = i;
        }
      }
    }
    if (!(most > moves_not)) {
      break;
    }
    used[best] = true;
    for (size_t j = 0; j < n; j++) {
      double swap = a[row * n + j];
      a[row * n + j] = a[k * n + j];
      a[k * n + j] = swap;
    }
    for (size_t i = 0; i < d; i++) {
      double factor = i == k ? 0 : a[i * n + best] / a[k * n + best];
      for (size_t j = 0; j < n && fabs (factor) > 0; j++) {
        a[i * n + j] -= factor * a[k * n + j];
      }
    }
  }
  return a;
}

static size_t
leader (const size_t parent[], size_t j)
{
  while (parent[j] != j) {
    j = parent[j];
  }
  return j;
}

/* Makes one group of the columns that a direction of the block moves.  */
static void
join_block (const struct work *work, const struct null_block *block, size_t parent[])
{
  struct arena *scratch = arena_create ();
  const double *a = echelon (scratch, work, block);
  for (size_t k = 0; k < block->directions; k++) {
    size_t first = NOWHERE;
    for (size_t i = 0; i < block->columns; i++) {
      size_t j = block->column[i];
      if (fabs (a[k * block->columns + i]) > moves_not && first == NOWHERE) {
        first = leader (parent, j);
      } else if (fabs (a[k * block->columns + i]) > moves_not) {
        parent[leader (parent, j)] = first;
      }
    }
  }
  arena_destroy (scratch);
}

/* Columns that one direction moves are one group; groups are numbered from 1.  */
static const size_t *
find_groups (struct work *work)
{
  const struct core *core = work->core;
  size_t n = work->columns, groups = 0;
  size_t *group = ARENA_ARRAY (work->keep, n + 1, size_t);
  size_t *parent = ARENA_ARRAY (core->arena, n + 1, size_t);
  size_t *number = ARENA_ARRAY (core->arena, n + 1, size_t);
  for (size_t j = 0; j < n; j++) {
    parent[j] = j;
  }
  for (size_t b = 0; core->freedom > 0 && b < core->null->blocks; b++) {
    join_block (work, &core->null->block[b], parent);
  }
  for (size_t j = 0; j < n; j++) {
    size_t lead = leader (parent, j);
    if (!work->fixed[j]) {
      number[lead] = number[lead] > 0 ? number[lead] : ++groups;
      group[j] = number[lead];
    }
  }
  return group;
}

void
fixed_classify (struct arena *keep, const struct core *core, struct solution *solution)
{
  const struct network *network = core->network;
  size_t flows = network->streams * network->components, columns = core->system->columns;
  struct work work = {
    .keep = keep, .core = core, .network = network, .flows = flows, .columns = columns,
    .value = ARENA_ARRAY (keep, columns + 1, double),
    .fraction = ARENA_ARRAY (keep, flows + 1, double),
    .fixed = ARENA_ARRAY (keep, columns + 1, bool),
    .fixed_total = ARENA_ARRAY (keep, network->streams + 1, bool),
    .fixed_fraction = ARENA_ARRAY (keep, flows + 1, bool)
  };
  classify_by_algebra (&work);
  if (core->freedom > 0) {
    work.program = program_make (core->arena, core->system, core->v, core->system->null,
                                 core->options->interrupted);
    work.feasible = program_feasible (work.program);
    if (work.feasible) {
      find_ranges (&work);
    }
    if (!core->root) {
      choose_values (&work);
    }
  }
  find_fractions (&work);
  solution->value = work.value;
  solution->fixed = work.fixed;
  solution->fixed_total = work.fixed_total;
  solution->fixed_fraction = work.fixed_fraction;
  solution->fraction = work.fraction;
  solution->range = work.range;
  solution->total_range = work.total_range;
  solution->scale_open = core->freedom == 1 && is_homogeneous (core->system);
  solution->group = find_groups (&work);
  solution->negative_count = 0;
  solution->negative = find_negative (&work, &solution->negative_count);
}
