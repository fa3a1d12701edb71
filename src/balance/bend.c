#include "config.h"
#include "balance/core.h"

#include <math.h>
#include <string.h>
#include "balance/null_space.h"
#include "balance/program.h"
#include "balance/rank.h"
#include "balance/reduce.h"
#include "support/arena.h"
#include "support/fault.h"

enum { MOST_STEPS = 100, MOST_HALVES = 40 };
/* Directions of the linear rows from which on all rows together, sparse, are faster than the bent
   ones within those directions.                                                                 */
enum { WIDE = 30 };

/* Done when the rows are out by less than this part of the largest flow.  */
static const double converged = 1e-12;
/* A step goes so far towards where a flow would end, no further.  */
static const double short_of_edge = 0.9;
/* A split outlet with less than this part of its inlet is at the edge, where any composition
   fits.                                                                                         */
static const double at_edge = 1e-7;
/* Solutions closer than this, relative to the largest flow, are one.  */
static const double same_root = 1e-6;

static double
largest (size_t n, const double v[])
{
  double most = 0;
  for (size_t j = 0; j < n; j++) {
    most = fmax (most, fabs (v[j]));
  }
  return most;
}

/* What stays above nothing on the way: every flow, the totals of split streams, or nothing.  */
enum keep { KEEP_FLOWS, KEEP_TOTALS, KEEP_NOTHING };

/* How far along STEP it does, at most 1.  */
static double
longest (const struct core *core, const double v[], const double step[], enum keep keep)
{
  const struct system *system = core->system;
  size_t flows = core->network->streams * core->network->components;
  double most = 1;
  for (size_t i = 0; i < system->bends && keep != KEEP_NOTHING; i++) {
    const struct boundary *b = &core->network->boundary[system->bend[i].boundary];
    for (size_t o = 0; o <= b->outlet_count; o++) {
      size_t stream = o == 0 ? b->inlets[0] : b->outlets[o - 1];
      double total = system_total (system, v, stream), by = system_total (system, step, stream);
      if (total > 0 && by < 0) {
        most = fmin (most, short_of_edge * total / -by);
      }
    }
  }
  for (size_t j = 0; j < flows && keep == KEEP_FLOWS; j++) {
    if (v[j] > 0 && step[j] < 0) {
      most = fmin (most, short_of_edge * v[j] / -step[j]);
    }
  }
  return most;
}

static double
length (const struct rows *rows)
{
  double sum = 0;
  for (size_t i = 0; i < rows->count; i++) {
    sum += rows->right[i] * rows->right[i];
  }
  return sqrt (sum);
}

static bool
is_wide (const struct core *core)
{
  return core->system->freedom >= WIDE;
}

/* STEP = scale * null * z, with z the shortest least-squares solution of the bent rows.  */
static void
find_step (struct arena *arena, const struct core *core, const struct rows *bent,
           const double v[], double step[])
{
  const struct system *system = core->system;
  size_t width = system->freedom;
  if (is_wide (core)) {
    system_step (system, bent, v, step);
    return;
  }
  double *null = null_space_dense (arena, system->null), *moved;
  double *h = system_project (arena, system, bent, width, null);
  double *z = ARENA_ARRAY (arena, width + 1, double);
  struct space space = space_make (arena, bent->count, width, h);
  space_solve (arena, &space, bent->right, z);
  moved = ARENA_ARRAY (arena, system->columns + 1, double);
  null_space_move (system->null, z, moved);
  for (size_t j = 0; j < system->columns; j++) {
    step[j] = moved[j] * system->scale[j];
  }
}

/* Damped Newton steps within the linear rows; did V get there?  */
static bool
newton (const struct core *core, enum keep keep, double v[])
{
  size_t columns = core->system->columns;
  bool done = false;
  for (int steps = 0; steps < MOST_STEPS && !done; steps++) {
    struct arena *arena = arena_create ();
    struct rows bent = system_bent (arena, core->system, v);
    double before = length (&bent), part, *step = ARENA_ARRAY (arena, columns, double);
    double *next = ARENA_ARRAY (arena, columns, double);
    int halves = 0;
    done = before <= converged * largest (columns, v);
    if (!done) {
      find_step (arena, core, &bent, v, step);
      part = longest (core, v, step, keep);
      for (;; part /= 2, halves++) {
        for (size_t j = 0; j < columns; j++) {
          next[j] = v[j] + part * step[j];
        }
        if (!is_wide (core)) {
          system_correct (core->system, core->v, next);
        }
        bent = system_bent (arena, core->system, next);
        if (length (&bent) < before || halves == MOST_HALVES) {
          break;
        }
      }
      memcpy (v, next, columns * sizeof *v);
    }
    arena_destroy (arena);
    if (halves == MOST_HALVES) {
      return before <= 1e3 * converged * largest (columns, v);
    }
  }
  return done;
}

/* Has any split an outlet that is next to nothing?  */
static bool
is_at_edge (const struct core *core, const double v[])
{
  for (size_t i = 0; i < core->system->bends; i++) {
    const struct boundary *b = &core->network->boundary[core->system->bend[i].boundary];
    double in = system_total (core->system, v, b->inlets[0]);
    for (size_t o = 0; o < b->outlet_count; o++) {
      if (fabs (system_total (core->system, v, b->outlets[o])) <= at_edge * fabs (in)) {
        return true;
      }
    }
  }
  return false;
}

static bool
is_known (const struct core *core, size_t count, double *const roots[], const double v[])
{
  size_t columns = core->system->columns;
  double size = largest (columns, v);
  for (size_t r = 0; r < count; r++) {
    bool same = true;
    for (size_t j = 0; j < columns; j++) {
      same = same && fabs (roots[r][j] - v[j]) <= same_root * size;
    }
    if (same) {
      return true;
    }
  }
  return false;
}

/* With all flows above nothing if that ends anywhere, else with less and less regard to them.  */
static bool
find_root (const struct core *core, double v[])
{
  size_t columns = core->system->columns;
  double *start = ARENA_ARRAY (core->arena, columns, double);
  memcpy (start, v, columns * sizeof *start);
  for (int keep = KEEP_FLOWS; keep <= KEEP_NOTHING; keep++) {
    memcpy (v, start, columns * sizeof *start);
    if (newton (core, (enum keep) keep, v)) {
      return true;
    }
  }
  return false;
}

/* Where all splits have equal shares.  Where no share follows from the facts that is a solution
   already.                                                                                      */
static void
guess_shares (const struct core *core, double v[])
{
  const struct system *system = core->system;
  double *share = ARENA_ARRAY (core->arena, system->bends + 1, double);
  double *step = ARENA_ARRAY (core->arena, system->columns + 1, double);
  struct rows rows;
  for (size_t i = 0; i < system->bends; i++) {
    share[i] = 1 / (double) core->network->boundary[system->bend[i].boundary].outlet_count;
  }
  rows = system_shared (core->arena, system, share, core->v);
  system_step (system, &rows, core->v, step);
  for (size_t j = 0; j < system->columns; j++) {
    v[j] = core->v[j] + step[j];
  }
  system_correct (system, core->v, v);
}

/* Takes over the solution V and what is open at it.  */
static void
settle_at (struct core *core, double *v)
{
  core->v = v;
  core->null = is_wide (core) ? system_narrow_wide (core->arena, core->system, v)
                              : system_narrow (core->arena, core->system, v);
  core->freedom = core->null->freedom;
}

/* Where Newton's steps end from several starts, those at an edge only if there are no others; how
   many.  The core takes over the first.  Where that is one of many the others are of no use.    */
static size_t
find_roots (struct core *core, double *roots[])
{
  double **start = core_generic (core->arena, core, PROGRAM_SEEDS);
  double *edge = NULL;
  size_t inner = 0;
  if (is_wide (core)) {
    guess_shares (core, start[0]);
  }
  for (size_t i = 0; i < PROGRAM_SEEDS && (inner == 0 || core->freedom == 0); i++) {
    if (!find_root (core, start[i])) {
      continue;
    }
    if (is_at_edge (core, start[i])) {
      edge = edge ? edge : start[i];
    } else if (!is_known (core, inner, roots, start[i])) {
      roots[inner++] = start[i];
    }
    if (inner == 1 && core->v != roots[0]) {
      settle_at (core, roots[0]);
    }
  }
  if (inner == 0 && edge) {
    roots[inner++] = edge;
    settle_at (core, edge);
  }
  return inner;
}

/* Solutions near the one at hand, which is one of many: a step of fair size along what is open, in
   pseudorandom directions, and back by Newton's steps.                                          */
static void
look_around (struct core *core)
{
  enum { AROUND = 3 };
  size_t columns = core->system->columns;
  unsigned long long random = 5;
  core->root = ARENA_ARRAY (core->arena, AROUND, double *);
  core->roots = 0;
  for (size_t n = 0; n < AROUND; n++) {
    double *v = ARENA_ARRAY (core->arena, columns, double), part;
    double *step = ARENA_ARRAY (core->arena, columns, double), size = largest (columns, core->v);
    double *z = ARENA_ARRAY (core->arena, core->freedom + 1, double);
    for (size_t k = 0; k < core->freedom; k++) {
      random = random * 6364136223846793005ULL + 1442695040888963407ULL;
      z[k] = size * ((double) (random >> 40) / (double) (1 << 24) - 0.5);
    }
    null_space_move (core->null, z, step);
    for (size_t j = 0; j < columns; j++) {
      step[j] *= core->system->scale[j];
    }
    part = 0.3 * longest (core, core->v, step, KEEP_FLOWS);
    for (size_t j = 0; j < columns; j++) {
      v[j] = core->v[j] + part * step[j];
    }
    if (find_root (core, v)) {
      core->root[core->roots++] = v;
    }
  }
}

bool
core_bend (struct core *core, struct fault *fault)
{
  double *roots[PROGRAM_SEEDS];
  size_t count = find_roots (core, roots), independent;
  if (count == 0) {
    return fault_set (fault, MESSAGE_NOT_CONVERGED, "the shares of the splits", NULL);
  }
  independent = core->system->freedom - core->freedom;
  core->surplus += system_bent (core->arena, core->system, core->v).count - independent;
  if (core->freedom > 0) {
    look_around (core);
    return true;
  }
  core->roots = count - 1;
  core->root = ARENA_ARRAY (core->arena, count, double *);
  memcpy (core->root, roots + 1, core->roots * sizeof *core->root);
  return true;
}
