#include "config.h"
#include "plant.h"

#include <assert.h>
#include <math.h>
#include <string.h>
#include "balance/solution.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"

enum { MOST_BOUNDARIES = 60, MOST_FACTS = 200, MOST_REACTIONS = 8 };

struct plant *
plant_make (const char *names, size_t components)
{
  struct arena *arena = arena_create ();
  struct plant *plant = ARENA_NEW (arena, struct plant);
  size_t streams = strlen (names);
  plant->arena = arena;
  plant->names = names;
  plant->boundary = ARENA_ARRAY (arena, MOST_BOUNDARIES, struct boundary);
  plant->fact = ARENA_ARRAY (arena, MOST_FACTS, struct fact);
  plant->possible = ARENA_ARRAY (arena, streams * components, bool);
  plant->molar_mass = ARENA_ARRAY (arena, components, double);
  for (size_t i = 0; i < streams * components; i++) {
    plant->possible[i] = true;
  }
  for (size_t c = 0; c < components; c++) {
    plant->molar_mass[c] = 0.010 * (double) (c + 1);
  }
  plant->network = (struct network) { .components = components, .streams = streams,
                                      .possible = plant->possible, .water = components,
                                      .molar_mass = plant->molar_mass,
                                      .boundary = plant->boundary, .fact = plant->fact };
  return plant;
}

void
plant_free (struct plant *plant)
{
  arena_destroy (plant->arena);
}

size_t
plant_stream (const struct plant *plant, char stream)
{
  const char *at = strchr (plant->names, stream);
  assert (at);
  return (size_t) (at - plant->names);
}

size_t
plant_column (const struct plant *plant, char stream, size_t component)
{
  return plant_stream (plant, stream) * plant->network.components + component;
}

static const size_t *
streams_of (struct plant *plant, const char *names)
{
  size_t *streams = ARENA_ARRAY (plant->arena, strlen (names) + 1, size_t);
  for (size_t i = 0; names[i]; i++) {
    streams[i] = plant_stream (plant, names[i]);
  }
  return streams;
}

void
plant_boundary (struct plant *plant, enum boundary_kind kind, const char *inlets,
                const char *outlets)
{
  assert (plant->network.boundaries < MOST_BOUNDARIES);
  plant->boundary[plant->network.boundaries++] = (struct boundary) {
    kind, strlen (inlets), strlen (outlets), 0, streams_of (plant, inlets),
    streams_of (plant, outlets), NULL
  };
}

void
plant_reaction (struct plant *plant, const double nu[])
{
  struct boundary *last = &plant->boundary[plant->network.boundaries - 1];
  struct reaction *reactions = ARENA_ARRAY (plant->arena, last->reaction_count + 1,
                                            struct reaction);
  for (size_t r = 0; r < last->reaction_count; r++) {
    reactions[r] = last->reactions[r];
  }
  reactions[last->reaction_count++].nu = nu;
  last->reactions = reactions;
}

void
plant_never (struct plant *plant, char stream, size_t component)
{
  plant->possible[plant_column (plant, stream, component)] = false;
}

static struct form
form_of (struct plant *plant, char stream, size_t component, size_t without)
{
  size_t components = plant->network.components, count = 0;
  struct term *terms = ARENA_ARRAY (plant->arena, components, struct term);
  for (size_t c = 0; c < components; c++) {
    if (c != without && (component == ALL || component == c)) {
      terms[count++] = (struct term) { plant_column (plant, stream, c), 1 };
    }
  }
  return (struct form) { count, terms };
}

static size_t
add (struct plant *plant, struct fact fact)
{
  assert (plant->network.facts < MOST_FACTS);
  fact.u = (double) NAN;
  fact.weight = 1;
  plant->fact[plant->network.facts] = fact;
  return plant->network.facts++;
}

size_t
plant_total (struct plant *plant, char stream, double value)
{
  return plant_flow (plant, stream, ALL, value);
}

size_t
plant_flow (struct plant *plant, char stream, size_t component, double value)
{
  return add (plant, (struct fact) { .kind = FACT_FORM, .value = value,
                                     .left = form_of (plant, stream, component, ALL) });
}

size_t
plant_fraction (struct plant *plant, char stream, size_t component, double value)
{
  return plant_dry_fraction (plant, stream, component, ALL, value);
}

size_t
plant_dry_fraction (struct plant *plant, char stream, size_t component, size_t water,
                    double value)
{
  return add (plant, (struct fact) { .kind = FACT_RATIO, .value = value,
                                     .left = form_of (plant, stream, component, ALL),
                                     .right = form_of (plant, stream, ALL, water) });
}

size_t
plant_composition (struct plant *plant, char stream, const double x[])
{
  size_t components = plant->network.components;
  double *kept = ARENA_ARRAY (plant->arena, components, double);
  memcpy (kept, x, components * sizeof *kept);
  return add (plant, (struct fact) { .kind = FACT_COMPOSITION, .fractions = kept,
                                     .stream = plant_stream (plant, stream),
                                     .fractions_rounding
                                       = ARENA_ARRAY (plant->arena, components, double) });
}

size_t
plant_ratio (struct plant *plant, char left, size_t of_left, char right, size_t of_right,
             double value)
{
  return add (plant, (struct fact) { .kind = FACT_RATIO, .value = value, .relation = true,
                                     .left = form_of (plant, left, of_left, ALL),
                                     .right = form_of (plant, right, of_right, ALL) });
}

size_t
plant_share (struct plant *plant, char outlet, char inlet, double value)
{
  return add (plant, (struct fact) { .kind = FACT_SHARE, .value = value, .relation = true,
                                     .stream = plant_stream (plant, outlet),
                                     .of = plant_stream (plant, inlet) });
}

const struct solution *
plant_solved (struct plant *plant)
{
  static const struct solve_options usual = { 0.95, NULL };
  struct fault fault;
  const struct solution *solution;
  fault_init (&fault, plant->arena);
  solution = network_solve (plant->arena, &plant->network, &usual, &fault);
  CHECK (solution != NULL);
  SAME_INT (fault.kind, MESSAGE_NONE);
  return solution;
}
