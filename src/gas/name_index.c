#include "config.h"
#include "gas/name_index.h"

#include <assert.h>
#include <string.h>
#include "gas/naming.h"
#include "support/arena.h"

void
name_index_init (struct name_index *index, struct arena *arena, size_t room)
{
  size_t slots = 64;

  while (slots < 2 * room)
    slots *= 2;
  assert (room < UINT16_MAX);
  *index = (struct name_index) { .entries = ARENA_ARRAY (arena, room + 1, struct name_entry),
                                 .slots = ARENA_ARRAY (arena, slots, uint16_t),
                                 .room = room, .mask = slots - 1 };
}

/* FNV-1a (G. Fowler, L. C. Noll, K.-P. Vo), 32 bits.  */
static uint32_t
hash_of (const char *bytes, size_t n)
{
  uint32_t hash = 2166136261u;

  for (size_t i = 0; i < n; i++)
    hash = (hash ^ (unsigned char) bytes[i]) * 16777619u;
  return hash;
}

/* MM, AN, IPA: up to three capitals.  In small letters they are somebody's own names, misspelt.  */
static bool
is_abbreviation (const struct name_entry *entry)
{
  bool capitals = entry->length <= 3;

  for (size_t i = 0; i < entry->length && capitals; i++)
    capitals = entry->text[i] >= 'A' && entry->text[i] <= 'Z';
  return capitals;
}

/* A name looked for: by its squeezed form, and letter by letter too if EXACT.  PLAIN is null while
   names are entered that do not count letter by letter.                                        */
struct wanted {
  enum name_kind kind;
  bool exact;
  const char *squeezed, *plain;
  size_t length, plain_length;
};

static bool
is_wanted (const struct name_entry *entry, const struct wanted *wanted)
{
  char other[NAMING_ROOM];
  bool exact = wanted->exact
               || (entry->kind == NAME_WORD && wanted->plain != NULL && is_abbreviation (entry));

  return entry->kind == wanted->kind
         && naming_squeezed (entry->text, entry->length, other) == wanted->length
         && memcmp (other, wanted->squeezed, wanted->length) == 0
         && (!exact || (entry->length == wanted->plain_length
                        && memcmp (entry->text, wanted->plain, wanted->plain_length) == 0));
}

/* The entry that is wanted; null, with *SLOT the free one, if there is none.  Half the slots are
   free, so there is an end.                                                                    */
static struct name_entry *
look_up (const struct name_index *index, const struct wanted *wanted, size_t *slot)
{
  uint32_t hash = hash_of (wanted->squeezed, wanted->length);
  size_t i = hash & index->mask;

  for (; index->slots[i] != 0; i = (i + 1) & index->mask) {
    struct name_entry *entry = &index->entries[index->slots[i] - 1];

    if (entry->hash == hash && is_wanted (entry, wanted))
      return entry;
  }
  *slot = i;
  return NULL;
}

static size_t
head_bit (const char *word, size_t n)
{
  return hash_of (word, n) % (32 * HEAD_WORDS);
}

static void
enter_head (struct name_index *index, const char *text, size_t n)
{
  char small[NAMING_ROOM];
  const char *blank = memchr (text, ' ', n);
  size_t bit;

  if (blank == NULL)
    return;
  bit = head_bit (small, naming_lower (text, (size_t) (blank - text), small));
  index->heads[bit / 32] |= UINT32_C (1) << bit % 32;
}

/* Of two spellings that lead to one row the one with blanks stays, which is the name of several
   words, and EtO rather than ETO.                                                               */
static bool
stays (const struct name_entry *entry, size_t number)
{
  return entry->number == number && !is_abbreviation (entry)
         && (entry->length <= 3 || memchr (entry->text, ' ', entry->length) != NULL);
}

bool
name_index_add (struct name_index *index, enum name_kind kind, const char *text, size_t n,
                size_t number)
{
  char squeezed[NAMING_ROOM];
  struct wanted wanted = { .kind = kind, .exact = kind == NAME_KEY, .squeezed = squeezed,
                           .plain = kind == NAME_KEY ? text : NULL, .plain_length = n };
  struct name_entry *entry;
  size_t slot;

  wanted.length = naming_squeezed (text, n, squeezed);
  if (wanted.length == 0 || n > UINT8_MAX)
    return false;
  assert (number <= UINT16_MAX);
  entry = look_up (index, &wanted, &slot);
  if (entry != NULL && stays (entry, number))
    return true;
  if (entry == NULL) {
    assert (index->count < index->room);
    entry = &index->entries[index->count++];
    index->slots[slot] = (uint16_t) index->count;
  }
  *entry = (struct name_entry) { text, hash_of (squeezed, wanted.length), (uint16_t) number,
                                 (uint8_t) n, (uint8_t) kind };
  enter_head (index, text, n);
  return true;
}

static const struct name_entry *
find (const struct name_index *index, struct wanted wanted, const char *name, size_t n)
{
  char squeezed[NAMING_ROOM], plain[NAMING_ROOM];
  size_t slot;

  wanted.squeezed = squeezed;
  wanted.length = naming_squeezed (name, n, squeezed);
  wanted.plain = plain;
  wanted.plain_length = naming_plain (name, n, plain);
  return wanted.length == 0 ? NULL : look_up (index, &wanted, &slot);
}

const struct name_entry *
name_index_find (const struct name_index *index, enum name_kind kind, const char *name, size_t n)
{
  return find (index, (struct wanted) { .kind = kind }, name, n);
}

const struct name_entry *
name_index_find_key (const struct name_index *index, const char *name, size_t n)
{
  return find (index, (struct wanted) { .kind = NAME_KEY, .exact = true }, name, n);
}

bool
name_index_has_head (const struct name_index *index, const char *word, size_t n)
{
  char small[NAMING_ROOM];
  size_t length = naming_lower (word, n, small);
  size_t bit = head_bit (small, length);

  return length > 0 && (index->heads[bit / 32] >> bit % 32 & 1) != 0;
}

bool
name_index_has_phrase (const struct name_index *index, const char *words, size_t n)
{
  static const enum name_kind kinds[] = { NAME_WORD, NAME_OPEN, NAME_PHRASE };
  char small[NAMING_ROOM], other[NAMING_ROOM];
  size_t length = naming_lower (words, n, small);

  if (length == 0)
    return false;
  for (size_t i = 0; i < sizeof kinds / sizeof kinds[0]; i++) {
    const struct name_entry *entry = name_index_find (index, kinds[i], words, n);

    if (entry != NULL && naming_lower (entry->text, entry->length, other) == length
        && memcmp (small, other, length) == 0)
      return true;
  }
  return false;
}
