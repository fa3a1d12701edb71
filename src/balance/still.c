#include "config.h"
#include "balance/still.h"

#include <math.h>
#include <string.h>
#include "balance/absent.h"
#include "balance/cone.h"
#include "support/arena.h"
#include "support/fault.h"

/* Streams looked after, ways gone to find a smaller set, and sets of facts looked through to prove
   that there is none.                                                                           */
enum { MOST_STREAMS = 6, WAYS = 8 };
/* Multiplications spent on one stream, and on the proof that no set is smaller: a second or so.
   A network in which one look takes more is not looked at.                                      */
static const double most_work = 1e9;
/* A total that can be no more than this part of the largest flow is nothing.  */
static const double no_flow = 1e-9;

struct work {
  struct arena *keep, *arena;
  const struct network *network;
  const struct solve_options *options;
  bool *usable;                  /* by fact: says nothing of how much flows */
  size_t target, best;           /* the stream that is to flow; that of the best set */
  bool *set, *trial;             /* the best set so far; by fact */
  size_t count;
  double each, spent;            /* work of one look, about; of all */
};

/* ---- What must flow ---- */

static void
mark_form (const struct network *network, const struct form *form, bool must[])
{
  for (size_t t = 0; t < form->count; t++) {
    size_t stream = form->terms[t].column / network->components;
    if (stream < network->streams) {
      must[stream] = true;
    }
  }
}

/* By stream: does a fact speak of what flows in it?  */
static bool *
spoken_of (struct arena *arena, const struct network *network)
{
  bool *must = ARENA_ARRAY (arena, network->streams + 1, bool);
  for (size_t f = 0; f < network->facts; f++) {
    const struct fact *fact = &network->fact[f];
    switch (fact->kind) {
    case FACT_FORM:
      break;
    case FACT_RATIO:
      if (fact->value > 0) {
        mark_form (network, &fact->left, must);
        mark_form (network, &fact->right, must);
      }
      break;
    case FACT_COMPOSITION:
      must[fact->stream] = true;
      break;
    case FACT_SHARE:
      must[fact->of] = must[fact->of] || fact->value > 0;
      must[fact->stream] = must[fact->stream] || fact->value > 0;
      break;
    }
  }
  return must;
}

/* ---- Sets ---- */

static bool
flows (struct work *work, const bool take[], unsigned seed, bool blamed[])
{
  struct arena *arena = arena_create ();
  struct cone cone = { work->network, take, work->target, true };
  bool found = cone_flows (arena, &cone, seed, blamed);
  work->spent += work->each;
  arena_destroy (arena);
  return found;
}

/* Leaves out of TRIAL what it does not need of the facts LIST[0 .. COUNT - 1]: all at once, or
   else by halves.                                                                               */
static void
leave_out (struct work *work, size_t count, const size_t list[])
{
  for (size_t i = 0; i < count; i++) {
    work->trial[list[i]] = false;
  }
  if (count == 0 || !flows (work, work->trial, 0, NULL)) {
    return;
  }
  for (size_t i = 0; i < count; i++) {
    work->trial[list[i]] = true;
  }
  if (count > 1) {
    leave_out (work, count / 2, list);
    leave_out (work, count - count / 2, list + count / 2);
  }
}

/* The facts of TRIAL, the last first in every second way; how many.  */
static size_t
list_trial (const struct work *work, unsigned way, size_t list[])
{
  size_t facts = work->network->facts, count = 0;
  for (size_t i = 0; i < facts; i++) {
    size_t f = way % 2 == 0 ? i : facts - 1 - i;
    if (work->trial[f]) {
      list[count++] = f;
    }
  }
  return count;
}

/* What says that something is not there has no row to be blamed for.  */
static void
add_absences (struct work *work)
{
  const struct network *network = work->network;
  for (size_t f = 0; f < network->facts; f++) {
    const struct fact *fact = &network->fact[f];
    bool none = fact->kind == FACT_COMPOSITION || !(fabs (fact->value) > 0)
                || fabs (fact->value - 1) < 1e-12;
    work->trial[f] = work->trial[f] || (work->usable[f] && none);
  }
}

/* One set without a fact that could be left out, by the multipliers of one way.  */
static bool
find_set (struct work *work, unsigned way)
{
  size_t facts = work->network->facts, count;
  size_t *list = ARENA_ARRAY (work->arena, facts + 1, size_t);
  if (flows (work, work->usable, way, work->trial)) {
    return false;
  }
  if (flows (work, work->trial, 0, NULL)) {
    add_absences (work);
  }
  if (flows (work, work->trial, 0, NULL)) {
    memcpy (work->trial, work->usable, facts * sizeof *work->trial);
  }
  count = list_trial (work, way, list);
  if (way > 0 && work->count > 0 && work->count <= 2) {
    return true;
  }
  leave_out (work, count, list);
  count = list_trial (work, way, list);
  if (work->count == 0 || count < work->count) {
    work->count = count;
    memcpy (work->set, work->trial, facts * sizeof *work->set);
  }
  return true;
}

/* The number of sets of SIZE of N; huge where there are more than anybody looks through.  */
static double
sets_of (size_t n, size_t size)
{
  double sets = 1;
  for (size_t k = 0; k < size; k++) {
    sets *= (double) (n - k) / (double) (k + 1);
  }
  return sets;
}

/* Looks through all sets of SIZE usable facts from FROM on; takes the first that clashes.  */
static bool
any_of (struct work *work, size_t from, size_t size)
{
  if (size == 0) {
    return !flows (work, work->trial, 0, NULL);
  }
  for (size_t f = from; f < work->network->facts; f++) {
    if (work->usable[f]) {
      work->trial[f] = true;
      if (any_of (work, f + 1, size - 1)) {
        return true;
      }
      work->trial[f] = false;
    }
  }
  return false;
}

/* Is the set of least size, or can one be found that is?  False: there are too many sets.  */
static bool
prove (struct work *work)
{
  size_t facts = work->network->facts, usable = 0;
  double sets = 0;
  for (size_t f = 0; f < facts; f++) {
    usable += work->usable[f] ? 1 : 0;
  }
  for (size_t size = 1; size < work->count; size++) {
    sets += sets_of (usable, size);
  }
  if (sets * work->each > most_work) {
    return false;
  }
  for (size_t size = 1; size < work->count; size++) {
    memset (work->trial, 0, facts * sizeof *work->trial);
    if (any_of (work, 0, size)) {
      memcpy (work->set, work->trial, facts * sizeof *work->set);
      work->count = size;
    }
  }
  return true;
}

/* ---- Suspects ---- */

/* What the rest would allow a fact to say, with the target flowing.  */
static void
find_room (const struct work *work, struct suspect *suspect)
{
  struct arena *arena = arena_create ();
  bool *take = ARENA_ARRAY (arena, work->network->facts + 1, bool);
  struct range range;
  memcpy (take, work->usable, work->network->facts * sizeof *take);
  take[suspect->fact] = false;
  struct cone cone = { work->network, take, work->target, false };
  if (work->network->fact[suspect->fact].kind == FACT_FORM) {
    range = (struct range) { 0, (double) INFINITY };
    cone.digits = true;
    suspect->plausible = cone_flows (arena, &cone, 0, NULL);
  } else {
    suspect->plausible = cone_room (arena, &cone, suspect, &range);
  }
  suspect->least = suspect->plausible ? range.least : (double) NAN;
  suspect->greatest = suspect->plausible ? range.greatest : (double) NAN;
  bool one = suspect->plausible
             && range.greatest - range.least <= 1e-9 * fabs (range.greatest);
  suspect->needed = one ? range.least : (double) NAN;
  arena_destroy (arena);
}

static struct conflict *
conflict_of (struct work *work, bool least)
{
  const struct network *network = work->network;
  struct conflict *conflict = ARENA_NEW (work->keep, struct conflict);
  struct suspect *suspects = ARENA_ARRAY (work->keep, work->count + 1, struct suspect);
  for (size_t f = 0; f < network->facts; f++) {
    if (work->set[f]) {
      struct suspect *suspect = &suspects[conflict->count++];
      *suspect = (struct suspect) { .fact = f, .component = network->components };
      for (size_t c = 0; c < network->components && network->fact[f].kind == FACT_COMPOSITION;
           c++) {
        const double *x = network->fact[f].fractions;
        bool more = suspect->component == network->components || x[c] > x[suspect->component];
        suspect->component = more ? c : suspect->component;
      }
      find_room (work, suspect);
    }
  }
  conflict->suspects = suspects;
  conflict->around = ARENA_ARRAY (work->keep, network->boundaries + 1, bool);
  conflict->component = network->components;
  conflict->gap = (double) NAN;
  conflict->still = work->target;
  conflict->least = least;
  return conflict;
}

/* Looks for a set that holds one stream, smaller than the best so far.  False: interrupted.  */
static bool
look_at (struct work *work, size_t stream, struct fault *fault)
{
  size_t before = work->count;
  bool clash = true;
  work->target = stream;
  for (unsigned way = 0; way < WAYS && clash && (way == 0 || work->spent < most_work); way++) {
    if (!core_goes_on (work->options, fault)) {
      return false;
    }
    clash = find_set (work, way);
  }
  work->best = work->count != before ? stream : work->best;
  return true;
}

/* Does nothing flow in the stream, though it could?  */
static bool
is_still (const struct work *work, const struct solution *solution, const struct absence *absence,
          size_t stream)
{
  size_t n = work->network->components;
  double total = 0, largest = 0;
  bool any = false;
  for (size_t j = 0; j < work->network->streams * n; j++) {
    bool own = j / n == stream;
    largest = fmax (largest, fabs (solution->value[j]));
    total += own ? solution->value[j] : 0;
    any = any || (own && !absence->absent[j]);
  }
  total = solution->total_range ? solution->total_range[stream].greatest : fabs (total);
  return any && total <= no_flow * largest;
}

bool
still_find (struct arena *keep, const struct network *network, const struct solve_options *options,
            const struct solution *solution, const struct conflict **conflict,
            struct fault *fault)
{
  struct arena *arena = arena_create ();
  size_t facts = network->facts, looked = 0;
  struct work work = { .keep = keep, .arena = arena, .network = network, .options = options,
                       .usable = ARENA_ARRAY (arena, facts + 1, bool),
                       .set = ARENA_ARRAY (arena, facts + 1, bool),
                       .trial = ARENA_ARRAY (arena, facts + 1, bool),
                       .each = cone_work (network) };
  bool *must = spoken_of (arena, network), done = true, split = false;
  struct absence absence;
  for (size_t f = 0; f < facts; f++) {
    work.usable[f] = network->fact[f].kind != FACT_FORM || !(fabs (network->fact[f].value) > 0);
  }
  absence = absence_spread (arena, network, work.usable);
  for (size_t s = 0; s < network->streams && work.each <= most_work && done; s++) {
    if (must[s] && (solution->negative_count > 0 || is_still (&work, solution, &absence, s))) {
      done = looked >= MOST_STREAMS || work.spent > most_work || look_at (&work, s, fault);
      looked++;
    }
  }
  for (size_t b = 0; b < network->boundaries; b++) {
    split = split || network->boundary[b].kind == BOUNDARY_SPLIT;
  }
  if (done && work.count > 1
      && (!*conflict || work.count + (split ? 1 : 0) <= (*conflict)->count)) {
    work.target = work.best;
    *conflict = conflict_of (&work, prove (&work));
  }
  arena_destroy (arena);
  return done;
}
