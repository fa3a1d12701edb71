#include "config.h"
#include "language/balance/plant_private.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "support/arena.h"
#include "support/map.h"
#include "units/constants.h"

/* ---- Reading ---- */

static bool
read_known_line (struct reader_state *r, const void *line)
{
  return plant_read_known (r, line);
}

static bool
read_per_line (struct reader_state *r, const void *line)
{
  return plant_read_per (r, line);
}

static bool
read_given_stream (struct reader_state *r, const void *stream)
{
  return plant_read_given (r, *(const size_t *) stream);
}

/* Every line that says something, and the streams that were defined before.  Kinds of its own:
   interrupted.  */
static bool
read_facts (struct reader_state *r, const struct statement *block, const struct plant *base)
{
  r->line = block;
  r->number = 0;
  for (size_t s = 0; s < r->plant->stream_count; s++)
    if (r->plant->stream[s].given && !plant_read_spread (r, read_given_stream, &s, base)) {
      return false;
    }
  for (const struct statement *line = block->next; line; line = line->next) {
    bool (*interrupted) (void) = r->ev->session->options.interrupted;
    if (interrupted && interrupted ()) {
      return fault_set_at (r->ev->fault, MESSAGE_INTERRUPTED, line->at, NULL, NULL);
    }
    r->line = line;
    r->number++;
    bool known = line->kind == STATEMENT_KNOWN || line->kind == STATEMENT_ABSENT;
    if (known && !plant_read_spread (r, read_known_line, line, base)) {
      fault_place (r->ev->fault, line->at);
      return false;
    }
    if (line->kind == STATEMENT_PER && !plant_read_spread (r, read_per_line, line, base)) {
      fault_place (r->ev->fault, line->at);
      return false;
    }
    for (const struct node *name = line->kind == STATEMENT_AROUND ? line->names : NULL; name;
         name = name->next)
      if (plant_boundary_find (r->plant, name->text) == NO_BOUNDARY) {
        return fault_set_at (r->ev->fault, MESSAGE_BALANCE_STREAM, name->at, name->text,
                             "around NAME, NAME: names of mix, separate, split or react");
      }
  }
  r->line = block;
  return true;
}

/* One reading with the compositions found so far (LAST, or null).  */
static struct plant *
read_once (struct evaluation *ev, const struct statement *block, const struct plant *base,
           const struct plant *last, bool *real)
{
  struct plant *plant = ARENA_NEW (ev->arena, struct plant);
  struct reader_state r = { .ev = ev, .plant = plant };
  plant->name = block->name;
  plant->block = block;
  plant->stream_by_name = map_create ();
  plant->boundary_by_name = map_create ();
  bool done = plant_read_names (&r, block);
  size_t told = r.species_count;
  for (size_t s = 0; done && last && s < plant->stream_count; s++) {
    plant->stream[s].gas = last->stream[s].gas;
  }
  done = done && read_facts (&r, block, base) && plant_network (&r, told, base);
  plant_sort_streams (ev->arena, plant);
  map_destroy (plant->stream_by_name);
  map_destroy (plant->boundary_by_name);
  plant->stream_by_name = plant->boundary_by_name = NULL;
  *real = r.real_volumes;
  return done ? plant : NULL;
}

static bool
solve_once (struct evaluation *ev, struct plant *plant)
{
  struct solve_options options = { 0.95, ev->session->options.interrupted };
  fault_init (&plant->failure, ev->arena);
  plant->solution = network_solve (ev->arena, &plant->network, &options, &plant->failure);
  return plant->solution != NULL;
}

/* ---- Volumes whose gas is found ---- */

/* The compositions of a solved plant, where they are fixed; how far they moved from LAST.  */
static double
find_gases (struct evaluation *ev, struct plant *plant, const struct plant *last)
{
  double most = 0;
  size_t n = plant->network.components;
  struct part *parts = ARENA_ARRAY (ev->arena, n, struct part);
  for (size_t s = 0; s < plant->stream_count; s++) {
    size_t count = 0;
    for (size_t c = 0; c < n; c++) {
      double x = plant->solution->fraction[s * n + c];
      if (isnan (x)) {
        count = 0;
        break;
      }
      if (x > 0) {
        parts[count++] = (struct part) { plant->component[c], x };
      }
    }
    struct fault unheard;
    fault_init (&unheard, ev->arena);
    const struct composition *old = last ? last->stream[s].gas : NULL;
    const struct composition *gas = count ? composition_make (ev->arena, count, parts, &unheard)
                                          : NULL;
    plant->stream[s].gas = gas;
    most = fmax (most, !gas != !old ? 1 : 0);
    for (size_t c = 0; gas && old && c < n; c++) {
      most = fmax (most, fabs (composition_fraction (gas, plant->component[c])
                               - composition_fraction (old, plant->component[c])));
    }
  }
  return most;
}

enum { MOST_ROUNDS = 40 };

/* Where a volume's Z hangs on a composition that the balance finds, both are found in turn: Z
   depends weakly on it.  Only then; the last reading tells what was taken.                       */
static const struct plant *
gases_in_turn (struct evaluation *ev, const struct statement *block, const struct plant *base)
{
  struct plant *last = NULL;
  for (int round = 0; round < MOST_ROUNDS; round++) {
    struct evaluation quiet;
    struct fault fault;
    bool real;
    fault_init (&fault, ev->arena);
    evaluation_again (&quiet, ev, &fault);
    quiet.settings = ev->settings;
    quiet.overridden = ev->overridden;
    quiet.shifts = ev->shifts;
    quiet.shift_count = ev->shift_count;
    quiet.stand_ins = ev->stand_ins;
    quiet.stand_in_count = ev->stand_in_count;
    struct plant *plant = read_once (&quiet, block, base, last, &real);
    if (!plant || plant->whole || !solve_once (&quiet, plant)) {
      return last;
    }
    double moved = find_gases (ev, plant, last);
    last = plant;
    if (!real || moved < 1e-12) {
      return last;
    }
  }
  return last;
}

static bool
has_volume (const struct node *node)
{
  for (; node; node = node->next)
    if ((node->unit && dimension_equal (node->unit->dimension, DIMENSION_VOLUME_FLOW)
         && node->unit->family_power == 0) || (node->words & WORD_REAL)
        || (node->unit && node->unit->family_power == 0
            && dimension_equal (node->unit->dimension, DIMENSION_DENSITY))
        || has_volume (node->a) || has_volume (node->b)) {
      return true;
    }
  return false;
}

static bool
may_need_gases (const struct evaluation *ev, const struct statement *block)
{
  bool needs = ev->settings->real_volumes;
  for (const struct statement *line = block->next; line && !needs; line = line->next) {
    needs = has_volume (line->claim);
  }
  return needs;
}

const struct plant *
plant_make (struct evaluation *ev, const struct statement *block, const struct plant *base)
{
  bool real;
  const struct plant *last = may_need_gases (ev, block) ? gases_in_turn (ev, block, base) : NULL;
  struct plant *plant = read_once (ev, block, base, last, &real);
  if (!plant) {
    return NULL;
  }
  if (!solve_once (ev, plant) && plant->failure.kind == MESSAGE_INTERRUPTED) {
    fault_set_at (ev->fault, MESSAGE_INTERRUPTED, block->at, NULL, NULL);
    return NULL;
  }
  return plant;
}

/* ---- What it says of a stream ---- */

double
plant_total (const struct plant *plant, size_t stream)
{
  double total = 0;
  for (size_t c = 0; c < plant->network.components; c++) {
    total += plant->solution->value[plant_column (plant, stream, c)];
  }
  return total;
}

double
plant_mass (const struct plant *plant, size_t stream)
{
  double mass = 0;
  if (plant->whole) {
    return plant->by_mass ? plant_total (plant, stream) : UNSTATED;
  }
  for (size_t c = 0; c < plant->network.components; c++) {
    mass += plant->solution->value[plant_column (plant, stream, c)]
            * plant->network.molar_mass[c];
  }
  return mass;
}

bool
plant_is_fixed (const struct plant *plant, size_t stream)
{
  const struct solution *solution = plant->solution;
  if (!solution || solution->status == BALANCE_CONTRADICTORY || !solution->fixed_total[stream]) {
    return false;
  }
  for (size_t c = 0; c < plant->network.components; c++)
    if (!solution->fixed[plant_column (plant, stream, c)]) {
      return false;
    }
  return !solution->loose || !solution->loose->total[stream];
}

double
plant_unit (struct evaluation *ev, const struct plant *plant, const char **unit)
{
  const struct unit *typed = plant->unit;
  bool per_time;
  *unit = plant->unit_text;
  if (typed) {
    struct measure measure = measure_of_unit (typed);
    switch (flow_basis_of (&measure, &per_time)) {
    case FLOW_MOLAR:
      return 1 / typed->factor;
    case FLOW_REFERENCE:
      return ideal_volume (1, ev->settings->family[measure.family].at) / typed->factor;
    case FLOW_MASS:
      if (plant->whole) {
        return 1 / typed->factor;
      }
      break;
    case FLOW_NONE: case FLOW_ACTUAL: case FLOW_ENERGY:
      break;
    }
  }
  *unit = plant->by_mass ? "kg/h" : "kmol/h";
  return plant->by_mass ? 3600 : 3.6;
}
