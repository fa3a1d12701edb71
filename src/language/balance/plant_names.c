#include "config.h"
#include "language/balance/plant_private.h"

#include <math.h>
#include <stdint.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "support/arena.h"
#include "support/map.h"

/* What a map from names to indices plus one holds.  */
static size_t
index_in (const struct map *map, const char *name, size_t absent)
{
  const size_t at = (size_t) (uintptr_t) map_find (map, name, strlen (name));
  return at > 0 ? at - 1 : absent;
}

size_t
plant_find (const struct plant *plant, const char *name)
{
  if (plant->stream_by_name) {
    return index_in (plant->stream_by_name, name, NO_STREAM);
  }
  size_t least = 0, end = plant->stream_count;
  while (least < end) {
    const size_t middle = least + (end - least) / 2, s = plant->streams_sorted[middle];
    const int order = strcmp (plant->stream[s].name, name);
    if (order == 0) {
      return s;
    }
    least = order < 0 ? middle + 1 : least;
    end = order < 0 ? end : middle;
  }
  return NO_STREAM;
}

/* Merges the halves of FROM, each sorted by the names of STREAMS, into TO.  */
static void
merge_halves (const struct plant_stream streams[], size_t count, const size_t from[], size_t to[])
{
  const size_t half = count / 2;
  size_t a = 0, b = half;
  for (size_t i = 0; i < count; i++) {
    const bool left = b == count
                      || (a < half && strcmp (streams[from[a]].name, streams[from[b]].name) < 0);
    to[i] = left ? from[a++] : from[b++];
  }
}

static void
sort_part (const struct plant_stream streams[], size_t count, size_t at[], size_t spare[])
{
  if (count > 1) {
    sort_part (streams, count / 2, at, spare);
    sort_part (streams, count - count / 2, at + count / 2, spare);
    merge_halves (streams, count, at, spare);
    memcpy (at, spare, count * sizeof *at);
  }
}

void
plant_sort_streams (struct arena *arena, struct plant *plant)
{
  size_t *at = ARENA_ARRAY (arena, plant->stream_count, size_t);
  size_t *spare = ARENA_ARRAY (arena, plant->stream_count, size_t);
  for (size_t s = 0; s < plant->stream_count; s++) {
    at[s] = s;
  }
  sort_part (plant->stream, plant->stream_count, at, spare);
  plant->streams_sorted = at;
}

size_t
plant_boundary_find (const struct plant *plant, const char *name)
{
  if (plant->boundary_by_name) {
    return index_in (plant->boundary_by_name, name, NO_BOUNDARY);
  }
  for (size_t b = 0; b < plant->boundary_count; b++)
    if (strcmp (plant->boundary[b].name, name) == 0) {
      return b;
    }
  return NO_BOUNDARY;
}

void
meet_species (struct reader_state *r, const struct species *species)
{
  for (size_t i = 0; i < r->species_count; i++)
    if (r->species[i] == species) {
      return;
    }
  r->species = room_for_one (r->ev->arena, r->species, r->species_count, &r->species_room,
                             sizeof *r->species);
  r->species[r->species_count++] = species;
}

void
meet_gas (struct reader_state *r, const struct composition *gas)
{
  r->has_gas = true;
  for (size_t i = 0; i < gas->count; i++) {
    meet_species (r, gas->species[i]);
  }
}

/* ---- Streams ---- */

static bool
wrong (struct reader_state *r, struct place at, const char *why, const char *way_on)
{
  return fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, at, why, way_on);
}

/* A name that means something already: a stream enters with it, anything else cannot be one.  */
static bool
meaning_of (struct reader_state *r, struct plant_stream *stream)
{
  struct evaluation *ev = r->ev;
  struct definition *d = name_find (ev->session, stream->name, strlen (stream->name));
  if (strcmp (stream->name, r->plant->name) == 0) {
    return wrong (r, stream->at, arena_format (ev->arena, "'%s' is what the balance is called",
                                               stream->name),
                  "give the stream or the balance a name of its own");
  }
  if (!d || (d->maker && strcmp (d->maker, r->plant->name) == 0)) {
    return true;
  }
  if (d->kind == NAME_STREAM) {
    stream->given = d;
    return true;
  }
  return wrong (r, stream->at, arena_format (ev->arena, "'%s' is no stream: it is defined as "
                                             "something else", stream->name),
                "give the stream a name of its own");
}

static bool
add_stream (struct reader_state *r, const struct node *name, size_t *at)
{
  struct plant *plant = r->plant;
  if ((*at = plant_find (plant, name->text)) != NO_STREAM) {
    return true;
  }
  *at = plant->stream_count;
  plant->stream = room_for_one (r->ev->arena, plant->stream, plant->stream_count, &r->stream_room,
                                sizeof *plant->stream);
  plant->stream[plant->stream_count++] = (struct plant_stream) {
    .name = name->text, .at = name->at, .from = NO_BOUNDARY, .to = NO_BOUNDARY
  };
  map_put (plant->stream_by_name, name->text, strlen (name->text),
           (void *) (uintptr_t) (*at + 1));
  return meaning_of (r, &plant->stream[*at]);
}

/* The streams on one side of boundary B.  */
static bool
add_side (struct reader_state *r, size_t b, const struct node *names, bool inlets)
{
  for (const struct node *name = names; name; name = name->next) {
    size_t at;
    if (!add_stream (r, name, &at)) {
      return false;
    }
    struct plant_stream *stream = &r->plant->stream[at];
    size_t *end = inlets ? &stream->to : &stream->from;
    if (*end != NO_BOUNDARY) {
      const char *other = r->plant->boundary[*end].name;
      return wrong (r, name->at, arena_format (r->ev->arena, inlets ? "%s goes into %s already"
                                               : "%s comes out of %s already", name->text, other),
                    "a stream has one end at each side; split or mix it, or name another");
    }
    *end = b;
    if (stream->from == stream->to) {
      return wrong (r, name->at, arena_format (r->ev->arena, "%s goes into where it comes out of",
                                               name->text), NULL);
    }
  }
  return true;
}

static size_t
count_names (const struct node *names)
{
  size_t n = 0;
  for (; names; names = names->next) {
    n++;
  }
  return n;
}

static bool
add_boundary (struct reader_state *r, const struct statement *line)
{
  struct plant *plant = r->plant;
  size_t b = plant->boundary_count;
  if (plant_boundary_find (plant, line->name) != NO_BOUNDARY) {
    return wrong (r, line->name_at, arena_format (r->ev->arena, "%s stands in the balance twice",
                                                  line->name), "give each its own name");
  }
  if (line->kind == STATEMENT_SPLIT && count_names (line->inlets) > 1) {
    return wrong (r, line->inlets->next->at, "a split has one inlet",
                  "mix the inlets first, or write separate");
  }
  if (line->kind == STATEMENT_MIX && count_names (line->outlets) > 1) {
    return wrong (r, line->outlets->next->at, "a mix has one outlet",
                  "split it behind, or write separate");
  }
  plant->boundary = room_for_one (r->ev->arena, plant->boundary, b, &r->boundary_room,
                                  sizeof *plant->boundary);
  plant->boundary[b] = (struct plant_boundary) { line->name, line, r->number };
  plant->boundary_count++;
  map_put (plant->boundary_by_name, line->name, strlen (line->name), (void *) (uintptr_t) (b + 1));
  return add_side (r, b, line->inlets, true) && add_side (r, b, line->outlets, false);
}

/* No stream and no equipment share a name.  */
static bool
names_are_apart (struct reader_state *r)
{
  for (size_t b = 0; b < r->plant->boundary_count; b++) {
    const struct plant_boundary *boundary = &r->plant->boundary[b];
    if (plant_find (r->plant, boundary->name) != NO_STREAM) {
      return wrong (r, boundary->line->name_at,
                    arena_format (r->ev->arena, "%s is a stream of the balance too",
                                  boundary->name), "give each its own name");
    }
  }
  if (r->plant->boundary_count == 0) {
    return fault_set_at (r->ev->fault, MESSAGE_UNFINISHED, r->line->at,
                         "a balance has a boundary: mix NAME: what goes in = what comes out", NULL);
  }
  return true;
}

/* ---- Reactions ---- */

/* What a reaction's sides differ by, element by element; the table's formulas are in Hill order. */
static const char *
imbalance (struct arena *arena, const struct node *reaction, const struct species *const of[])
{
  for (size_t i = 0; of[i]; i++)
    for (const char *c = of[i]->formula; *c; c++) {
      char symbol[3] = { *c, c[1] >= 'a' && c[1] <= 'z' ? c[1] : '\0', '\0' };
      double sum = 0;
      size_t k = 0;
      if (*c < 'A' || *c > 'Z') {
        continue;
      }
      for (const struct node *part = reaction->items; part; part = part->next) {
        sum += part->number * species_atoms (of[k++], symbol);
      }
      if (fabs (sum) > 1e-9) {
        return arena_format (arena, "%.6g %s %s", fabs (sum), symbol,
                             sum > 0 ? "come from nothing" : "vanish");
      }
    }
  return NULL;
}

static bool
read_reaction (struct reader_state *r, const struct node *reaction)
{
  struct arena *arena = r->ev->arena;
  size_t n = count_names (reaction->items), i = 0;
  const struct species **of = ARENA_ARRAY (arena, n + 1, const struct species *);
  for (const struct node *part = reaction->items; part; part = part->next) {
    struct species_set set;
    if (!species_named (r->ev, part, &set)) {
      return false;
    }
    if (set.count != 1) {
      return wrong (r, part->at, "a reaction is one of single components", NULL);
    }
    of[i++] = set.at[0];
    meet_species (r, set.at[0]);
  }
  const char *why = imbalance (arena, reaction, of);
  return !why || fault_set_at (r->ev->fault, MESSAGE_REACTION_ELEMENTS, reaction->at, why, NULL);
}

static bool
read_components (struct reader_state *r, const struct statement *line)
{
  r->species_told = true;
  r->has_gas = true;
  for (const struct node *name = line->names; name; name = name->next) {
    struct species_set set;
    if (!species_named (r->ev, name, &set)) {
      return false;
    }
    for (size_t i = 0; i < set.count; i++) {
      meet_species (r, set.at[i]);
    }
  }
  return true;
}

static bool
is_boundary (const struct statement *line)
{
  return line->kind == STATEMENT_MIX || line->kind == STATEMENT_SEPARATE
         || line->kind == STATEMENT_SPLIT || line->kind == STATEMENT_REACT;
}

bool
plant_read_names (struct reader_state *r, const struct statement *block)
{
  r->number = 0;
  for (const struct statement *line = block->next; line; line = line->next) {
    r->number++;
    if (line->kind == STATEMENT_COMPONENTS && !read_components (r, line)) {
      return false;
    }
    if (!is_boundary (line)) {
      continue;
    }
    if (!add_boundary (r, line)) {
      return false;
    }
    for (const struct node *reaction = line->reactions; reaction; reaction = reaction->next) {
      r->has_gas = true;
      if (!read_reaction (r, reaction)) {
        return false;
      }
    }
  }
  r->line = block;
  return names_are_apart (r);
}
