#include "config.h"
#include "balance/suggest.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "balance/fixed.h"
#include "balance/null_space.h"
#include "balance/rank.h"
#include "support/arena.h"
#include "support/vector.h"

/* Below this part of its norm a gradient does not move along the null space.  */
static const double moves_not = 1e-8;
/* Of two quantities the first is taken unless the other is better by more than this.  */
static const double clearly = 1.01;
/* Part of a gradient that is rounding.  */
static const double nothing = 1e-14;

/* Of a gradient in the null space all but its part is nothing.  */
struct candidate {
  struct quantity quantity;
  struct part *part;
  double *g;                     /* gradient in the null space over its norm; in time what of it
                                    the chosen ones do not cover */
  double *along;                 /* what they cover, by chosen one of its part */
  double length;                 /* of g */
  double worth;
};

/* Blocks of the null space that hang together by their streams.  */
struct part {
  size_t width;                  /* directions */
  size_t count, room, *candidate;
  size_t chosen, *choice;        /* candidates, in the order they were chosen, */
  double *length;                /* and what was left of each then */
  size_t *group;                 /* their numbers in the whole set */
  size_t taken;                  /* of the chosen: already in the whole set */
  size_t free_count, *free;      /* totals the others of the part are written in */
  double **basis, **factor;      /* their gradients at unit length and square to each other; by free
                                    total what makes it of these */
};

struct work {
  struct arena *keep, *arena;
  const struct core *core;
  const struct network *network;
  const struct solution *solution;
  size_t width, count, chosen;
  struct candidate *candidates;
  double *g;                     /* room for a gradient */
  size_t parts;
  struct part *part;
  size_t *part_of, *place;       /* by block: its part, its first direction there */
};

static bool
is_stopped (const struct work *work)
{
  const struct solve_options *options = work->core->options;
  return options->interrupted && options->interrupted ();
}

/* ---- Parts ---- */

static size_t
leader (size_t parent[], size_t b)
{
  while (parent[b] != b) {
    b = parent[b] = parent[parent[b]];
  }
  return b;
}

/* Puts the blocks that move stream S together, and with block B if it is one; any of them.  */
static size_t
join_stream (const struct work *work, size_t s, size_t b, size_t parent[])
{
  size_t components = work->network->components;
  for (size_t j = s * components; j < (s + 1) * components; j++) {
    size_t of = work->core->null->of[j];
    if (of != NOWHERE && b != NOWHERE) {
      size_t x = leader (parent, of), y = leader (parent, b);
      parent[x > y ? x : y] = x > y ? y : x;
    }
    b = of != NOWHERE ? of : b;
  }
  return b;
}

static void
find_parts (struct work *work)
{
  const struct null_space *null = work->core->null;
  const struct system *system = work->core->system;
  size_t *parent = ARENA_ARRAY (work->arena, null->blocks + 1, size_t);
  for (size_t b = 0; b < null->blocks; b++) {
    parent[b] = b;
  }
  for (size_t s = 0; s < work->network->streams; s++) {
    (void) join_stream (work, s, NOWHERE, parent);
  }
  for (size_t i = 0; i < system->bends; i++) {
    size_t b = join_stream (work, system->bend[i].inlet, NOWHERE, parent);
    (void) join_stream (work, system->bend[i].outlet, b, parent);
  }
  work->part = ARENA_ARRAY (work->arena, null->blocks + 1, struct part);
  work->part_of = ARENA_ARRAY (work->arena, null->blocks + 1, size_t);
  work->place = ARENA_ARRAY (work->arena, null->blocks + 1, size_t);
  for (size_t b = 0; b < null->blocks; b++) {
    size_t lead = leader (parent, b);
    work->part_of[b] = lead == b ? work->parts++ : work->part_of[lead];
    work->place[b] = work->part[work->part_of[b]].width;
    work->part[work->part_of[b]].width += null->block[b].directions;
  }
}

/* The part of work->g that is something, copied; null: nothing is.  */
static double *
take_part (struct work *work, struct part **part)
{
  const struct null_space *null = work->core->null;
  double *g = NULL;
  for (size_t b = 0; b < null->blocks; b++) {
    const double *from = &work->g[null->block[b].first];
    size_t count = null->block[b].directions;
    if (vector_norm (count, from) > 0) {
      *part = &work->part[work->part_of[b]];
      g = g ? g : ARENA_ARRAY (work->arena, (*part)->width + 1, double);
      memcpy (&g[work->place[b]], from, count * sizeof *g);
    }
  }
  return g;
}

/* ---- Candidates ---- */

static void
add_to_part (struct work *work, struct part *part, size_t candidate)
{
  if (part->count == part->room) {
    size_t *more = ARENA_ARRAY (work->arena, 2 * part->room + 8, size_t);
    if (part->count > 0) {
      memcpy (more, part->candidate, part->count * sizeof *more);
    }
    part->candidate = more;
    part->room = 2 * part->room + 8;
  }
  part->candidate[part->count++] = candidate;
}

static void
consider (struct work *work, struct quantity quantity)
{
  double size = quantity_reach (work->core, &quantity, work->solution->value, work->g);
  double worth = size > 0 ? vector_norm (work->width, work->g) / size : 0;
  if (worth > moves_not) {
    struct part *part;
    double *g = take_part (work, &part);
    for (size_t k = 0; k < part->width; k++) {
      g[k] /= size;
    }
    struct candidate candidate = { quantity, part, g, NULL, vector_norm (part->width, g), worth };
    candidate.along = ARENA_ARRAY (work->arena, part->width + 1, double);
    add_to_part (work, part, work->count);
    work->candidates[work->count++] = candidate;
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

/* ---- The set ---- */

/* Takes what BEST covers out of all that is left of the gradients.  */
static void
clear (struct work *work, const struct part *part, size_t m, const double best[])
{
  for (size_t i = 0; i < part->count; i++) {
    struct candidate *candidate = &work->candidates[part->candidate[i]];
    double along = vector_dot (part->width, best, candidate->g);
    if (fabs (along) > nothing) {
      candidate->along[m] = along;
      for (size_t k = 0; k < part->width; k++) {
        candidate->g[k] -= along * best[k];
      }
      candidate->length = vector_norm (part->width, candidate->g);
    }
  }
}

/* Of COUNT candidates, in LIST, the one that stands out most, of the first kind that has any;
   LENGTH is what is left of each.  Its place in the list, or NOWHERE.  */
static size_t
next_choice (const struct work *work, size_t count, const size_t list[], const double length[])
{
  size_t found = NOWHERE;
  double most = 1e-6;
  for (size_t i = 0; i < count; i++) {
    enum quantity_kind kind = work->candidates[list[i]].quantity.kind;
    if (found != NOWHERE && kind != work->candidates[list[found]].quantity.kind) {
      break;
    }
    if (length[i] > most * (found == NOWHERE ? 1 : clearly)) {
      most = length[i];
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
  const struct part *part = work->candidates[found].part;
  size_t width = part->width;
  double *best = ARENA_ARRAY (work->arena, width, double), length;
  memcpy (best, work->candidates[found].g, width * sizeof *best);
  for (size_t m = 0; m < part->chosen; m++) {
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
choose_in (struct work *work, struct part *part)
{
  double **chosen = ARENA_ARRAY (work->arena, part->width + 1, double *);
  double *length = ARENA_ARRAY (work->arena, part->count + 1, double);
  part->choice = ARENA_ARRAY (work->arena, part->width + 1, size_t);
  part->length = ARENA_ARRAY (work->arena, part->width + 1, double);
  part->group = ARENA_ARRAY (work->arena, part->width + 1, size_t);
  while (part->chosen < part->width) {
    for (size_t i = 0; i < part->count; i++) {
      length[i] = work->candidates[part->candidate[i]].length;
    }
    size_t at = next_choice (work, part->count, part->candidate, length);
    if (at == NOWHERE) {
      break;
    }
    if (is_stopped (work)) {
      return false;
    }
    size_t found = part->candidate[at];
    part->length[part->chosen] = length[at];
    chosen[part->chosen] = direction (work, found, chosen);
    clear (work, part, part->chosen, chosen[part->chosen]);
    part->choice[part->chosen++] = found;
  }
  return true;
}

static int
by_candidate (const void *a, const void *b)
{
  const struct part *const *left = a, *const *right = b;
  size_t x = (*left)->choice[(*left)->taken], y = (*right)->choice[(*right)->taken];
  return (x > y) - (x < y);
}

/* Numbers the chosen ones of all parts as they would have been chosen from all candidates at once:
   what stands out most first.  Parts whose next is the same kind and no longer wait their turn.  */
static void
number_choices (struct work *work)
{
  struct part **open = ARENA_ARRAY (work->arena, work->parts + 1, struct part *);
  size_t *next = ARENA_ARRAY (work->arena, work->parts + 1, size_t);
  double *length = ARENA_ARRAY (work->arena, work->parts + 1, double);
  for (;;) {
    size_t count = 0, found;
    for (size_t p = 0; p < work->parts; p++) {
      if (work->part[p].taken < work->part[p].chosen) {
        open[count++] = &work->part[p];
      }
    }
    qsort (open, count, sizeof *open, by_candidate);
    for (size_t i = 0; i < count; i++) {
      next[i] = open[i]->choice[open[i]->taken];
      length[i] = open[i]->length[open[i]->taken];
    }
    found = next_choice (work, count, next, length);
    if (found == NOWHERE) {
      return;
    }
    open[found]->group[open[found]->taken++] = work->chosen++;
  }
}

/* Candidate = sum of share[m] times chosen m of its part: the gradient of a chosen one lies along
   those chosen before it and its own.                                                           */
static void
find_share (const struct work *work, const struct candidate *candidate, double share[])
{
  const struct part *part = candidate->part;
  memcpy (share, candidate->along, part->chosen * sizeof *share);
  for (size_t m = part->chosen; m-- > 0;) {
    const double *along = work->candidates[part->choice[m]].along;
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

/* What each chosen one could be exchanged for.  AT, by chosen one: first how many, then, if there
   is a LIST, where the next of them goes.  */
static void
list_exchanges (struct work *work, size_t at[], struct suggestion list[])
{
  double *share = ARENA_ARRAY (work->arena, work->width + 1, double);
  for (size_t i = 0; i < work->count; i++) {
    const struct candidate *c = &work->candidates[i];
    find_share (work, c, share);
    for (size_t m = 0; m < c->part->chosen; m++) {
      size_t group = c->part->group[m];
      if (fabs (share[m]) > 1e-6
          && may_stand_for (c, &work->candidates[c->part->choice[m]])) {
        if (list) {
          list[at[group]] = (struct suggestion) { c->quantity, c->worth, group };
        }
        at[group]++;
      }
    }
  }
}

/* The chosen ones, then by chosen one what it could be exchanged for.  */
static void
list_set (struct work *work, struct solution *solution)
{
  size_t n = work->chosen, count = n, *at = ARENA_ARRAY (work->arena, n + 1, size_t);
  list_exchanges (work, at, NULL);
  for (size_t m = 0; m < n; m++) {
    size_t first = count;
    count += at[m];
    at[m] = first;
  }
  struct suggestion *list = ARENA_ARRAY (work->keep, count + 1, struct suggestion);
  for (size_t p = 0; p < work->parts; p++) {
    const struct part *part = &work->part[p];
    for (size_t m = 0; m < part->chosen; m++) {
      const struct candidate *c = &work->candidates[part->choice[m]];
      list[part->group[m]] = (struct suggestion) { c->quantity, c->worth, part->group[m] };
    }
  }
  list_exchanges (work, at, list);
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

/* ---- What ties open totals ---- */

/* Takes out of G what the free totals of the part cover: ALONG.  What is left of it.  */
static double
take_out (const struct part *part, double g[], double along[])
{
  memset (along, 0, (part->free_count + 1) * sizeof *along);
  for (int twice = 0; twice < 2; twice++) {
    for (size_t m = 0; m < part->free_count; m++) {
      double by = vector_dot (part->width, part->basis[m], g);
      along[m] += by;
      for (size_t k = 0; k < part->width && fabs (by) > 0; k++) {
        g[k] -= by * part->basis[m][k];
      }
    }
  }
  return vector_norm (part->width, g);
}

/* The total of S becomes one in which others are written: G is what is left of its gradient.  */
static void
set_free (struct part *part, size_t s, double g[], double left, double along[])
{
  size_t m = part->free_count++;
  for (size_t k = 0; k < part->width; k++) {
    g[k] /= left;
  }
  along[m] = left;
  part->free[m] = s;
  part->basis[m] = g;
  part->factor[m] = along;
}

/* Writes the total of S in the free ones; false: it is one of them.  */
static bool
relate (struct work *work, size_t s, struct relation_left *left)
{
  const struct core *core = work->core;
  struct quantity total = { QUANTITY_TOTAL, s, 0 };
  double size = quantity_reach (core, &total, core->v, work->g);
  struct part *part = NULL;
  double *g = take_part (work, &part);
  *left = (struct relation_left) { s, system_total (core->system, core->v, s), 0, NULL, NULL };
  if (!g) {
    return true;
  }
  double *along = ARENA_ARRAY (work->arena, part->free_count + 1, double);
  double out = take_out (part, g, along);
  if (out > moves_not * size) {
    set_free (part, s, g, out, along);
    return false;
  }
  double *kept = ARENA_ARRAY (work->keep, part->free_count + 1, double);
  size_t *which = ARENA_ARRAY (work->keep, part->free_count + 1, size_t);
  for (size_t m = part->free_count; m-- > 0;) {
    along[m] /= part->factor[m][m];
    for (size_t k = 0; k < m && fabs (along[m]) > 0; k++) {
      along[k] -= along[m] * part->factor[m][k];
    }
  }
  for (size_t m = 0; m < part->free_count; m++) {
    if (fabs (along[m]) > moves_not) {
      left->constant -= along[m] * system_total (core->system, core->v, part->free[m]);
      which[left->count] = part->free[m];
      kept[left->count++] = along[m];
    }
  }
  left->free = which;
  left->factor = kept;
  return true;
}

/* The open totals that follow from those before them.  */
static void
find_left (struct work *work, struct solution *solution)
{
  size_t streams = work->network->streams, count = 0;
  struct relation_left *left = ARENA_ARRAY (work->keep, streams + 1, struct relation_left);
  for (size_t p = 0; p < work->parts; p++) {
    struct part *part = &work->part[p];
    part->free = ARENA_ARRAY (work->arena, part->width + 1, size_t);
    part->basis = ARENA_ARRAY (work->arena, part->width + 1, double *);
    part->factor = ARENA_ARRAY (work->arena, part->width + 1, double *);
  }
  for (size_t s = 0; s < streams && !is_stopped (work); s++) {
    if (!solution->fixed_total[s]) {
      count += relate (work, s, &left[count]) ? 1 : 0;
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
  if (core->freedom == 0) {
    return;
  }
  work.g = ARENA_ARRAY (core->arena, core->freedom + 1, double);
  find_parts (&work);
  find_candidates (&work);
  for (size_t p = 0; p < work.parts; p++) {
    if (!choose_in (&work, &work.part[p])) {
      return;
    }
  }
  number_choices (&work);
  list_set (&work, solution);
  find_useless (&work, solution);
  find_left (&work, solution);
}
