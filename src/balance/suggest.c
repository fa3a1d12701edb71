#include "config.h"
#include "balance/suggest.h"

#include <math.h>
#include <string.h>
#include "balance/fixed.h"
#include "balance/rank.h"
#include "support/arena.h"

/* Below this part of its norm a gradient does not move along the null space.  */
static const double moves_not = 1e-8;
/* Of two quantities the first is taken unless the other is better by more than this.  */
static const double clearly = 1.01;

struct candidate {
  struct quantity quantity;
  double *g;                     /* gradient in the null space over its norm */
  double worth;
};

struct work {
  struct arena *keep, *arena;
  const struct core *core;
  const struct network *network;
  const struct solution *solution;
  size_t width, count;
  struct candidate *candidates;
  size_t chosen, *choice;        /* the set */
};

static double
dot (size_t n, const double a[], const double b[])
{
  double sum = 0;
  for (size_t k = 0; k < n; k++) {
    sum += a[k] * b[k];
  }
  return sum;
}

static void
consider (struct work *work, struct quantity quantity)
{
  struct candidate *candidate = &work->candidates[work->count];
  double *g = ARENA_ARRAY (work->arena, work->width, double);
  double size = quantity_reach (work->core, &quantity, work->solution->value, g);
  double worth = size > 0 ? sqrt (dot (work->width, g, g)) / size : 0;
  if (worth > moves_not) {
    for (size_t k = 0; k < work->width; k++) {
      g[k] /= size;
    }
    *candidate = (struct candidate) { quantity, g, worth };
    work->count++;
  }
}

/* All that may help, the kinds in order of preference.  What is fixed is none of it.  */
static void
find_candidates (struct work *work)
{
  const struct network *network = work->network;
  const struct solution *solution = work->solution;
  size_t components = network->components, flows = network->streams * components;
  work->candidates = ARENA_ARRAY (work->arena, 2 * flows + 2 * network->streams
                                  + work->core->system->columns, struct candidate);
  for (size_t s = 0; s < network->streams; s++) {
    if (!solution->fixed_total[s]) {
      consider (work, (struct quantity) { QUANTITY_TOTAL, s, 0 });
    }
  }
  for (size_t j = 0; j < flows && components > 1; j++) {
    if (!solution->fixed_fraction[j]) {
      consider (work, (struct quantity) { QUANTITY_FRACTION, j / components, j % components });
    }
  }
  for (size_t i = 0; i < work->core->system->bends; i++) {
    consider (work, (struct quantity) { QUANTITY_SHARE, work->core->system->bend[i].outlet, 0 });
  }
  for (size_t j = 0; j < flows && components > 1; j++) {
    if (!solution->fixed[j]) {
      consider (work, (struct quantity) { QUANTITY_COMPONENT, j / components, j % components });
    }
  }
  for (size_t b = 0; b < network->boundaries; b++) {
    for (size_t r = 0; r < network->boundary[b].reaction_count; r++) {
      consider (work, (struct quantity) { QUANTITY_EXTENT, b, r });
    }
  }
}

/* Takes what CHOSEN, orthonormal, covers out of G; what is left of its length.  */
static double
clear (const struct work *work, size_t count, double *const chosen[], double g[])
{
  for (int again = 0; again < 2; again++) {
    for (size_t i = 0; i < count; i++) {
      double along = dot (work->width, chosen[i], g);
      for (size_t k = 0; k < work->width; k++) {
        g[k] -= along * chosen[i][k];
      }
    }
  }
  return sqrt (dot (work->width, g, g));
}

/* The candidate that stands out most, of the first kind that has any.  */
static size_t
next_choice (const struct work *work, double *const chosen[], double best[])
{
  size_t found = NOWHERE;
  double most = 1e-6, *g = ARENA_ARRAY (work->arena, work->width, double);
  for (size_t i = 0; i < work->count; i++) {
    double length;
    if (found != NOWHERE
        && work->candidates[i].quantity.kind != work->candidates[found].quantity.kind) {
      break;
    }
    memcpy (g, work->candidates[i].g, work->width * sizeof *g);
    length = clear (work, work->chosen, chosen, g);
    if (length > most * (found == NOWHERE ? 1 : clearly)) {
      most = length;
      found = i;
      for (size_t k = 0; k < work->width; k++) {
        best[k] = g[k] / length;
      }
    }
  }
  return found;
}

static void
choose (struct work *work)
{
  double **chosen = ARENA_ARRAY (work->arena, work->width + 1, double *);
  work->choice = ARENA_ARRAY (work->arena, work->width + 1, size_t);
  while (work->chosen < work->width) {
    double *best = ARENA_ARRAY (work->arena, work->width, double);
    size_t found = next_choice (work, chosen, best);
    if (found == NOWHERE) {
      break;
    }
    chosen[work->chosen] = best;
    work->choice[work->chosen++] = found;
  }
}

/* Candidates in the coordinates of the chosen: candidate I = sum of share[m] times chosen m.  */
static void
list_set (struct work *work, struct solution *solution)
{
  size_t n = work->chosen, count = 0, most = n * (work->count + 1);
  double *a = ARENA_ARRAY (work->arena, work->width * n + 1, double);
  double *share = ARENA_ARRAY (work->arena, n + 1, double);
  struct suggestion *list = ARENA_ARRAY (work->keep, most + 1, struct suggestion);
  struct space space;
  for (size_t k = 0; k < work->width; k++) {
    for (size_t m = 0; m < n; m++) {
      a[k * n + m] = work->candidates[work->choice[m]].g[k];
    }
  }
  space = space_make (work->arena, work->width, n, a);
  for (size_t m = 0; m < n; m++) {
    const struct candidate *c = &work->candidates[work->choice[m]];
    list[count++] = (struct suggestion) { c->quantity, c->worth, m };
  }
  for (size_t m = 0; m < n; m++) {
    for (size_t i = 0; i < work->count; i++) {
      const struct candidate *c = &work->candidates[i];
      bool shown = c->quantity.kind != QUANTITY_COMPONENT && c->quantity.kind != QUANTITY_EXTENT;
      if (i != work->choice[m] && (shown || c->quantity.kind
                                   == work->candidates[work->choice[m]].quantity.kind)) {
        space_solve (work->arena, &space, c->g, share);
        if (fabs (share[m]) > 1e-6) {
          list[count++] = (struct suggestion) { c->quantity, c->worth, m };
        }
      }
    }
  }
  solution->suggestions = list;
  solution->suggestion_count = count;
}

/* Marks what facts say as it stands: by stream its total, by column a fraction.  */
static void
find_stated (const struct network *network, bool total[], bool fraction[])
{
  size_t components = network->components;
  for (size_t f = 0; f < network->facts; f++) {
    const struct fact *fact = &network->fact[f];
    size_t column = fact->left.count > 0 ? fact->left.terms[0].column : NOWHERE;
    size_t stream = column == NOWHERE ? fact->stream : column / components;
    if (fact->kind == FACT_COMPOSITION) {
      for (size_t c = 0; c < components; c++) {
        fraction[fact->stream * components + c] = true;
      }
    } else if (stream < network->streams && fact->kind == FACT_RATIO && fact->left.count == 1
               && fact->right.count > 0 && fact->right.terms[0].column / components == stream) {
      fraction[column] = true;
    } else if (stream < network->streams && fact->kind == FACT_FORM
               && 2 * fact->left.count > components) {
      total[stream] = true;
    }
  }
}

static void
find_useless (struct work *work, struct solution *solution)
{
  const struct network *network = work->network;
  size_t components = network->components, count = 0;
  struct quantity *useless = ARENA_ARRAY (work->keep,
                                          network->streams * (components + 1) + 1,
                                          struct quantity);
  bool *total = ARENA_ARRAY (work->arena, network->streams + 1, bool);
  bool *fraction = ARENA_ARRAY (work->arena, network->streams * components + 1, bool);
  find_stated (network, total, fraction);
  for (size_t s = 0; s < network->streams; s++) {
    if (solution->fixed_total[s] && !total[s]) {
      useless[count++] = (struct quantity) { QUANTITY_TOTAL, s, 0 };
    }
    for (size_t j = s * components; j < (s + 1) * components && components > 1; j++) {
      if (solution->fixed_fraction[j] && !work->core->system->absence.absent[j]
          && !fraction[j]) {
        useless[count++] = (struct quantity) { QUANTITY_FRACTION, s, j - s * components };
      }
    }
  }
  solution->useless = useless;
  solution->useless_count = count;
}

/* Writes the total of S in the free ones; false: it is one of them.  */
static bool
relate (struct work *work, size_t s, size_t free_count, const size_t free[],
        struct relation_left *left)
{
  struct arena *arena = work->arena;
  const struct core *core = work->core;
  double *a = ARENA_ARRAY (arena, work->width * free_count + 1, double);
  double *g = ARENA_ARRAY (arena, work->width + 1, double);
  double *factor = ARENA_ARRAY (arena, free_count + 1, double), size, out = 0;
  double *kept = ARENA_ARRAY (work->keep, free_count + 1, double);
  size_t *which = ARENA_ARRAY (work->keep, free_count + 1, size_t);
  struct space space;
  for (size_t i = 0; i < free_count; i++) {
    struct quantity total = { QUANTITY_TOTAL, free[i], 0 };
    (void) quantity_reach (core, &total, core->v, g);
    for (size_t k = 0; k < work->width; k++) {
      a[k * free_count + i] = g[k];
    }
  }
  size = quantity_reach (core, &(struct quantity) { QUANTITY_TOTAL, s, 0 }, core->v, g);
  space = space_make (arena, work->width, free_count, a);
  space_solve (arena, &space, g, factor);
  for (size_t k = 0; k < work->width; k++) {
    out = fmax (out, fabs (g[k] - dot (free_count, &a[k * free_count], factor)));
  }
  if (out > moves_not * size) {
    return false;
  }
  *left = (struct relation_left) { s, system_total (core->system, core->v, s), 0, which, kept };
  for (size_t i = 0; i < free_count; i++) {
    if (fabs (factor[i]) > moves_not) {
      left->constant -= factor[i] * system_total (core->system, core->v, free[i]);
      which[left->count] = free[i];
      kept[left->count++] = factor[i];
    }
  }
  return true;
}

/* The open totals that follow from those before them.  */
static void
find_left (struct work *work, struct solution *solution)
{
  size_t streams = work->network->streams, free_count = 0, count = 0;
  size_t *free = ARENA_ARRAY (work->arena, streams + 1, size_t);
  struct relation_left *left = ARENA_ARRAY (work->keep, streams + 1, struct relation_left);
  for (size_t s = 0; s < streams; s++) {
    if (!solution->fixed_total[s]) {
      if (relate (work, s, free_count, free, &left[count])) {
        count++;
      } else {
        free[free_count++] = s;
      }
    }
  }
  solution->left = left;
  solution->left_count = work->core->root ? 0 : count;
}

void
suggest (struct arena *keep, const struct core *core, struct solution *solution)
{
  struct work work = { .keep = keep, .arena = core->arena, .core = core,
                       .network = core->network, .solution = solution,
                       .width = core->freedom };
  if (core->freedom > 0) {
    find_candidates (&work);
    choose (&work);
    list_set (&work, solution);
    find_useless (&work, solution);
    find_left (&work, solution);
  }
}
