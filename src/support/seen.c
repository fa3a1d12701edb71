#include "config.h"
#include "support/seen.h"

#include <string.h>
#include "support/arena.h"

/* FNV-1a: Fowler, Noll, Vo; offset and prime of 32 bits as in RFC 9923, section 5.  */
static size_t
hash_of (const unsigned char key[], size_t length)
{
  unsigned long hash = 2166136261u;
  for (size_t i = 0; i < length; i++) {
    hash = (hash ^ key[i]) * 16777619u & 0xffffffffu;
  }
  return hash;
}

/* Where KEY is, or the free slot for it.  There always is one.  */
static struct seen_key *
slot_for (const struct seen *seen, size_t hash, const void *key, size_t length)
{
  size_t at = hash % seen->slots;
  for (;; at = (at + 1) % seen->slots) {
    struct seen_key *slot = &seen->slot[at];
    if (!slot->key || (slot->hash == hash && slot->length == length
                       && memcmp (slot->key, key, length) == 0)) {
      return slot;
    }
  }
}

static void
grow (struct arena *arena, struct seen *seen)
{
  struct seen more = { seen->count, seen->slots ? 4 * seen->slots : 16, NULL };
  more.slot = ARENA_ARRAY (arena, more.slots, struct seen_key);
  for (size_t i = 0; i < seen->slots; i++) {
    const struct seen_key *old = &seen->slot[i];
    if (old->key) {
      *slot_for (&more, old->hash, old->key, old->length) = *old;
    }
  }
  *seen = more;
}

bool
seen_add (struct arena *arena, struct seen *seen, const void *key, size_t length)
{
  if (2 * seen->count >= seen->slots) {
    grow (arena, seen);
  }
  size_t hash = hash_of (key, length);
  struct seen_key *slot = slot_for (seen, hash, key, length);
  if (slot->key) {
    return false;
  }
  *slot = (struct seen_key) { hash, length, arena_copy (arena, key, length) };
  seen->count++;
  return true;
}
