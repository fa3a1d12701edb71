#include "config.h"
#include "balance/suggest.h"

#include <math.h>
#include <string.h>
#include "balance/fixed.h"
#include "balance/rank.h"
#include "support/arena.h"
#include "support/vector.h"

/* Below this part of its norm a gradient does not move along the null space.  */
static const double moves_not = 1e-8;
/* Of two quantities the first is taken unless the other is better by more than this.  */
static const double clearly = 1.01;
/* Part of a gradient that is rounding.  */
static const double nothing = 1e-14;

struct candidate {
  struct quantity quantity;
  double *g;                     /* gradient in the null space over its norm; in time what of it
                                    the chosen ones do not cover */
  double *along;                 /* what they cover, by chosen one */
  double length;                 /* of g */
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

static void
consider (struct work *work, struct quantity quantity)
{
  struct candidate *candidate = &work->candidates[work->count];
  double *g = ARENA_ARRAY (work->arena, work->width, double);
  double size = quantity_reach (work->core, &quantity, work->solution->value, g);
  double worth = size > 0 ? vector_norm (work->width, g) / size : 0;
  if (worth > moves_not) {
    for (size_t k = 0; k < work->width; k++) {
      g[k] /= size;
    }
    *candidate = (struct candidate) { quantity, g, NULL, 1, worth };
    candidate->length = vector_norm (work->width, g);
    candidate->along = ARENA_ARRAY (work->arena, work->width + 1, double);
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

/* Takes what BEST covers out of all that is left of the gradients.  */
static void
clear (struct work *work, size_t m, const double best[])
{
  for (size_t i = 0; i < work->count; i++) {
    struct candidate *candidate = &work->candidates[i];
    double along = vector_dot (work->width, best, candidate->g);
    if (fabs (along) > nothing) {
      candidate->along[m] = along;
      for (size_t k = 0; k < work->width; k++) {
        candidate->g[k] -= along * best[k];
      }
      candidate->length = vector_norm (work->width, candidate->g);
    }
  }
}

/* The candidate that stands out most, of the first kind that has any.  */
static size_t
next_choice (const struct work *work)
{
  size_t found = NOWHERE;
  double most = 1e-6;
  for (size_t i = 0; i < work->count; i++) {
    const struct candidate *candidate = &work->candidates[i];
    if (found != NOWHERE
        && candidate->quantity.kind != work->candidates[found].quantity.kind) {
      break;
    }
    if (candidate->length > most * (found == NOWHERE ? 1 : clearly)) {
      most = candidate->length;
      found = i;
    }
  }
  return found;
}

/* What is left of the gradient of candidate FOUND, at unit length and once more without what the
   CHOSEN ones cover.                                                                            */
static double *
direction (const struct work *work, size_t found, double *const chosen[])
{
  size_t width = work->width;
  double *best = ARENA_ARRAY (work->arena, width, double), length;
  memcpy (best, work->candidates[found].g, width * sizeof *best);
  for (size_t m = 0; m < work->chosen; m++) {
    double along = vector_dot (width, chosen[m], best);
    for (size_t k = 0; k < width; k++) {
      best[k] -= along * chosen[m][k];
    }
  }
  length = vector_norm (width, best);
  for (size_t k = 0; k < width; k++) {
    best[k] /= length;
  }
  return best;
}

/* False: interrupted.  */
static bool
choose (struct work *work)
{
  double **chosen = ARENA_ARRAY (work->arena, work->width + 1, double *);
  work->choice = ARENA_ARRAY (work->arena, work->width + 1, size_t);
  while (work->chosen < work->width) {
    size_t found = next_choice (work);
    if (found == NOWHERE) {
      break;
    }
    if (work->core->options->interrupted && work->core->options->interrupted ()) {
      return false;
    }
    chosen[work->chosen] = direction (work, found, chosen);
    clear (work, work->chosen, chosen[work->chosen]);
    work->choice[work->chosen++] = found;
  }
  return true;
}

/* Candidate = sum of share[m] times chosen m: the gradient of a chosen one lies along those chosen
   before it and its own.                                                                        */
static void
find_share (const struct work *work, const struct candidate *candidate, double share[])
{
  memcpy (share, candidate->along, work->chosen * sizeof *share);
  for (size_t m = work->chosen; m-- > 0;) {
    const double *along = work->candidates[work->choice[m]].along;
    share[m] /= along[m];
    for (size_t k = 0; k < m && fabs (share[m]) > nothing; k++) {
      share[k] -= along[k] * share[m];
    }
  }
}

/* May the candidate stand for a chosen one?  It does not if it is of another kind, and one that
   nobody measures.                                                                              */
static bool
may_stand_for (const struct candidate *candidate, const struct candidate *chosen)
{
  return candidate != chosen
         && ((candidate->quantity.kind != QUANTITY_COMPONENT
              && candidate->quantity.kind != QUANTITY_EXTENT)
             || candidate->quantity.kind == chosen->quantity.kind);
}

/* The chosen ones, then by chosen one what it could be exchanged for.  */
static void
list_set (struct work *work, struct solution *solution)
{
  size_t n = work->chosen, count = n;
  bool *stands = ARENA_ARRAY (work->arena, n * work->count + 1, bool);
  double *share = ARENA_ARRAY (work->arena, n + 1, double);
  struct suggestion *list;
  for (size_t i = 0; i < work->count; i++) {
    find_share (work, &work->candidates[i], share);
    for (size_t m = 0; m < n; m++) {
      stands[m * work->count + i]
        = fabs (share[m]) > 1e-6
          && may_stand_for (&work->candidates[i], &work->candidates[work->choice[m]]);
      count += stands[m * work->count + i] ? 1 : 0;
    }
  }
  list = ARENA_ARRAY (work->keep, count + 1, struct suggestion);
  count = 0;
  for (size_t m = 0; m < n; m++) {
    const struct candidate *c = &work->candidates[work->choice[m]];
    list[count++] = (struct suggestion) { c->quantity, c->worth, m };
  }
  for (size_t m = 0; m < n; m++) {
    for (size_t i = 0; i < work->count; i++) {
      if (stands[m * work->count + i]) {
        const struct candidate *c = &work->candidates[i];
        list[count++] = (struct suggestion) { c->quantity, c->worth, m };
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
    out = fmax (out, fabs (g[k] - vector_dot (free_count, &a[k * free_count], factor)));
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
    if (!choose (&work)) {
      return;
    }
    list_set (&work, solution);
    find_useless (&work, solution);
    find_left (&work, solution);
  }
}
