/* An index of names by what two spellings of one name have in common (private to this layer).

   It holds no copies: the texts entered must outlive it.  Small on purpose: it is made at every
   start, and the memory that is touched costs more than the work.                               */
#ifndef GAS_NAME_INDEX_H
#define GAS_NAME_INDEX_H

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>
#include "support/check.h"

struct arena;

enum name_kind { NAME_KEY,               /* of a species: counts letter by letter */
                 NAME_WORD,              /* name or synonym */
                 NAME_OPEN,              /* ambiguous */
                 NAME_PHRASE };          /* none of these, but a name of several words */

struct name_entry {
  const char *text;
  uint32_t hash;
  uint16_t number;                       /* of the row it leads to */
  uint8_t length, kind;
};

enum { HEAD_WORDS = 32 };

struct name_index {
  struct name_entry *entries;
  uint16_t *slots;                       /* number of the entry + 1; 0: free */
  size_t count, room, mask;
  uint32_t heads[HEAD_WORDS];            /* bits by hash: first words of names of several */
};

/* With room for ROOM names.  */
void name_index_init (struct name_index *, struct arena *, size_t room);

/* Enters the name in the N bytes at TEXT; one of the same kind and squeezed form gives way to it.
   False if there is nothing left of it, or it is too long.                                     */
bool name_index_add (struct name_index *, enum name_kind, const char *text, size_t n,
                     size_t number);

/* The entry of KIND for the name, whose spelling does not count, but for words of two or three
   capitals (MM, IPA): those count letter by letter.  Null if there is none.                    */
const struct name_entry *name_index_find (const struct name_index *, enum name_kind,
                                          const char *name, size_t n) MUST_CHECK;
/* The key that is letter by letter that name, subscript digits aside.  */
const struct name_entry *name_index_find_key (const struct name_index *, const char *name,
                                              size_t n) MUST_CHECK;

/* Does a name of several words begin with this one?  Sometimes true where none does.  */
bool name_index_has_head (const struct name_index *, const char *word, size_t n);
/* Are these words, parted by single blanks, a name whatever their capitals?  */
bool name_index_has_phrase (const struct name_index *, const char *words, size_t n);

#endif
