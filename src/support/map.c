#include "config.h"
#include "support/map.h"

#include <assert.h>
#include <stdbool.h>
#include <stdint.h>
#include <string.h>
#include "support/memory.h"

/* Entries stand in the order they came; `slots` is an open-addressed index into them, by hash.
   A removed entry keeps its place, without key and value, until the entries are packed.         */
struct entry { char *key; size_t length; void *value; uint32_t hash; };

struct slot { uint32_t hash, entry; };    /* entry: number of the entry + 1; 0: never used */

struct map {
  struct entry *entries;
  struct slot *slots;
  size_t used;                            /* entries, with the removed ones */
  size_t live;                            /* entries, without them */
  size_t room;                            /* entries there is room for: half the slots */
};

enum { FIRST_ROOM = 16 };                 /* a power of two */

struct map *
map_create (void)
{
  return memory_get (1, sizeof (struct map));
}

void
map_destroy (struct map *map)
{
  if (map == NULL)
    return;
  for (size_t i = 0; i < map->used; i++)
    memory_release (map->entries[i].key);
  memory_release (map->entries);
  memory_release (map->slots);
  memory_release (map);
}

/* Eight bytes at a time, each multiplied in by a large odd number (2^64 over the golden ratio)
   and its high bits brought down; good enough for words, and a few cycles for a short one.      */
static uint32_t
hash_of (const char *key, size_t length)
{
  const uint64_t factor = UINT64_C (0x9E3779B97F4A7C15);
  uint64_t hash = length * factor;
  uint64_t part;

  for (; length >= sizeof part; key += sizeof part, length -= sizeof part) {
    memcpy (&part, key, sizeof part);
    hash = (hash ^ part) * factor;
    hash ^= hash >> 32;
  }
  part = 0;
  for (size_t i = 0; i < length; i++)
    part = part << 8 | (unsigned char) key[i];
  hash = (hash ^ part) * factor;
  return (uint32_t) (hash >> 32);
}

static bool
is_key (const struct entry *entry, const char *key, size_t length)
{
  return entry->key != NULL && entry->length == length && memcmp (entry->key, key, length) == 0;
}

/* The entry of that key, or null.  At most half the slots are used, so there is an end.  */
static struct entry *
find_entry (const struct map *map, uint32_t hash, const char *key, size_t length)
{
  size_t mask = 2 * map->room - 1;

  if (map->live == 0)
    return NULL;
  for (size_t i = hash & mask; map->slots[i].entry != 0; i = (i + 1) & mask)
    if (map->slots[i].hash == hash) {
      struct entry *entry = &map->entries[map->slots[i].entry - 1];

      if (is_key (entry, key, length))
        return entry;
    }
  return NULL;
}

static void
fill_slot (struct map *map, size_t number)
{
  size_t mask = 2 * map->room - 1;
  uint32_t hash = map->entries[number].hash;
  size_t i = hash & mask;

  while (map->slots[i].entry != 0)
    i = (i + 1) & mask;
  map->slots[i] = (struct slot) { hash, (uint32_t) (number + 1) };
}

/* Packs the entries, doubles the room if they need more than half of it, indexes them anew.  */
static void
make_room (struct map *map)
{
  size_t room = map->room > 0 ? map->room : FIRST_ROOM;
  size_t packed = 0;

  if (map->live > room / 2)
    room = memory_sum (room, room);
  assert (room <= UINT32_MAX / 2);
  for (size_t i = 0; i < map->used; i++)
    if (map->entries[i].key != NULL)
      map->entries[packed++] = map->entries[i];
  map->used = packed;
  map->room = room;
  map->entries = memory_resize (map->entries, room, sizeof (struct entry));
  memory_release (map->slots);
  map->slots = memory_get (memory_product (2, room), sizeof (struct slot));
  for (size_t i = 0; i < map->used; i++)
    fill_slot (map, i);
}

static void
remove_entry (struct map *map, struct entry *entry)
{
  memory_release (entry->key);
  entry->key = NULL;
  entry->value = NULL;
  map->live--;
}

static void
add_entry (struct map *map, uint32_t hash, const char *key, size_t length, void *value)
{
  char *copy = memory_get (memory_sum (length, 1), 1);

  if (length > 0)
    memcpy (copy, key, length);
  if (map->used == map->room)
    make_room (map);
  map->entries[map->used] = (struct entry) { copy, length, value, hash };
  fill_slot (map, map->used);
  map->used++;
  map->live++;
}

void
map_put (struct map *map, const char *key, size_t length, void *value)
{
  uint32_t hash = hash_of (key, length);
  struct entry *entry = find_entry (map, hash, key, length);

  if (entry != NULL && value != NULL)
    entry->value = value;
  else if (entry != NULL)
    remove_entry (map, entry);
  else if (value != NULL)
    add_entry (map, hash, key, length, value);
}

void *
map_find (const struct map *map, const char *key, size_t length)
{
  const struct entry *entry = find_entry (map, hash_of (key, length), key, length);

  return entry != NULL ? entry->value : NULL;
}

size_t
map_size (const struct map *map)
{
  return map->live;
}

void
map_each (const struct map *map, void (*visit) (const char *key, void *value, void *with),
          void *with)
{
  for (size_t i = 0; i < map->used; i++)
    if (map->entries[i].key != NULL)
      visit (map->entries[i].key, map->entries[i].value, with);
}
