#include "config.h"
#include "gas/species.h"

#include <assert.h>
#include <math.h>
#include <string.h>
#include "gas/naming.h"
#include "gas/species_private.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "support/text.h"

enum { MOST_WORDS = 6 };                 /* in a name */

struct species_table *
species_table_create (const char *directory, struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct species_table *table = ARENA_NEW (arena, struct species_table);

  table->arena = arena;
  table->made = map_create ();
  if (species_read (table, directory, fault) && air_read (table, directory, fault))
    return table;
  species_table_destroy (table);
  return NULL;
}

void
species_table_destroy (struct species_table *table)
{
  if (table == NULL)
    return;
  map_destroy (table->made);
  arena_destroy (table->arena);          /* the table itself is in it */
}

size_t
species_table_size (const struct species_table *table)
{
  return table->size;
}

const struct species *
species_table_at (const struct species_table *table, size_t i)
{
  assert (i < table->size);
  return &table->rows[i];
}

/* A species of which only a molar mass is known, kept under IDENTITY.  */
static const struct species *
make_bare (struct species_table *table, struct species one, const char *identity, size_t n)
{
  struct species *made = ARENA_NEW (table->arena, struct species);

  one.cas = one.synonyms = one.exposure_source = one.flags = one.flammable_source = one.note = "";
  one.critical_temperature = one.critical_pressure = one.critical_molar_volume = (double) NAN;
  one.acentric_factor = one.boiling_point = (double) NAN;
  one.exposure_limit = one.lower_flammable = one.upper_flammable = (double) NAN;
  *made = one;
  map_put (table->made, identity, n, made);
  return made;
}

/* The species of a plain formula, null if it is none.  Two ways of writing the same atoms give the
   same species.                                                                                */
static const struct species *
find_formula (struct species_table *table, const char *name, size_t n)
{
  char plain[NAMING_ROOM];
  size_t length = naming_plain (name, n, plain);
  struct atoms atoms;
  double molar_mass;
  char hill[FORMULA_ROOM];
  const struct species *made;

  if (length == 0 || !atoms_read (plain, length, &atoms)
      || !atoms_molar_mass (&table->elements, &atoms, &molar_mass))
    return NULL;
  atoms_write (&atoms, hill);
  made = map_find (table->made, hill, strlen (hill));
  if (made == NULL) {
    char *key = arena_copy (table->arena, plain, length);
    struct species one = { .key = key, .name = key,
                           .formula = arena_string (table->arena, hill), .molar_mass = molar_mass,
                           .source = "CIAAW 2021", .origin = SPECIES_FORMULA };

    made = make_bare (table, one, hill, strlen (hill));
  }
  return made;
}

struct species *
species_of_key (const struct species_table *table, const char *key)
{
  const struct name_entry *entry = name_index_find_key (&table->names, key, strlen (key));

  return entry == NULL ? NULL : &table->rows[entry->number];
}

enum species_match
species_find (struct species_table *table, const char *name, size_t n,
              const struct species **found, const char **candidates)
{
  const struct name_index *names = &table->names;
  const struct name_entry *entry;
  const struct species *one;

  if ((entry = name_index_find_key (names, name, n)) != NULL) {
    *found = &table->rows[entry->number];
    return SPECIES_KEY;
  }
  if ((entry = name_index_find (names, NAME_WORD, name, n)) != NULL) {
    *found = &table->rows[entry->number];
    return SPECIES_SYNONYM;
  }
  if ((entry = name_index_find (names, NAME_OPEN, name, n)) != NULL) {
    *candidates = table->candidates[entry->number];
    return SPECIES_AMBIGUOUS;
  }
  if (name_index_find (names, NAME_KEY, name, n) != NULL
      || (one = find_formula (table, name, n)) == NULL)
    return SPECIES_NONE;
  *found = one;
  return SPECIES_PLAIN_FORMULA;
}

/* Where the word at TEXT ends; no name is read across these.  */
static size_t
word_length (const char *text, size_t n)
{
  size_t i = 0;

  while (i < n && text[i] != '\0' && strchr (" \t\n,;=#\"()", text[i]) == NULL)
    i++;
  return i;
}

size_t
species_longest_name (const struct species_table *table, const char *text, size_t n)
{
  size_t end = word_length (text, n);
  size_t longest = 0;

  if (!name_index_has_head (&table->names, text, end))
    return 0;
  for (int words = 2; words <= MOST_WORDS && end + 1 < n && text[end] == ' '; words++) {
    size_t next = word_length (text + end + 1, n - end - 1);

    if (next == 0)
      break;
    end += 1 + next;
    if (name_index_has_phrase (&table->names, text, end))
      longest = end;
  }
  return longest;
}

const struct species *
species_stated (struct species_table *table, const char *name,
                const struct stated_figures *figures)
{
  size_t length = strlen (name);
  char *identity = ARENA_ARRAY (table->arena, length + 1 + sizeof *figures, char);
  size_t n = length + 1 + sizeof *figures;
  const struct species *made;

  memcpy (identity, name, length + 1);
  memcpy (identity + length + 1, figures, sizeof *figures);
  made = map_find (table->made, identity, n);
  if (made == NULL) {
    struct species one = { .key = identity, .name = identity, .formula = "",
                           .molar_mass = figures->molar_mass,
                           .stated_gross = figures->gross,
                           .stated_net = figures->net, .source = "as stated",
                           .origin = SPECIES_STATED };

    made = make_bare (table, one, identity, n);
  }
  return made;
}

/* There is some component one letter away from most words of two, and two away from most of four:
   how many slips still tell what was meant by a word of N.                                      */
static size_t
slips_of (size_t n)
{
  return n < 3 ? 0 : (n + 1) / 3;
}

/* The search for the nearest name: the best so far is less than LIMIT changes away from WORD.  */
struct search { char word[NAMING_ROOM]; size_t limit; const char *key; };

static void
compare (struct search *search, const char *name, size_t n, const char *key)
{
  char small[NAMING_ROOM];
  size_t distance;

  if (search->limit == 0 || naming_lower (name, n, small) == 0)
    return;
  distance = text_distance (search->word, small, search->limit - 1);
  if (distance < search->limit) {
    search->limit = distance;
    search->key = key;
  }
}

const char *
species_nearest (const struct species_table *table, const char *name, size_t n)
{
  struct search search = { .key = NULL };
  const struct name_entry *alike = name_index_find (&table->names, NAME_KEY, name, n);

  if (alike != NULL)
    return table->rows[alike->number].key;
  if (naming_lower (name, n, search.word) == 0)
    return NULL;
  search.limit = text_reach (search.word) + 1;
  if (search.limit > slips_of (n) + 1)
    search.limit = slips_of (n) + 1;
  for (size_t i = 0; i < table->size; i++) {
    const struct species *one = &table->rows[i];

    compare (&search, one->key, strlen (one->key), one->key);
    compare (&search, one->name, strlen (one->name), one->key);
    for (const char *at = one->synonyms, *next; at != NULL && at[0] != '\0'; at = next) {
      size_t synonym = naming_first (at, &next);

      compare (&search, at, synonym, one->key);
    }
  }
  return search.key;
}

void
species_each_name (const struct species_table *table, void (*visit) (const char *, void *),
                   void *with)
{
  struct text word;

  text_init (&word);
  for (size_t i = 0; i < table->size; i++) {
    const struct species *one = &table->rows[i];

    visit (one->key, with);
    if (strcmp (one->name, one->key) != 0)
      visit (one->name, with);
    for (const char *at = one->synonyms, *next; at != NULL && at[0] != '\0'; at = next) {
      size_t length = naming_first (at, &next);

      text_empty (&word);
      text_add_bytes (&word, at, length);
      visit (word.bytes, with);
    }
  }
  text_clear (&word);
}

double
species_atoms (const struct species *species, const char *element)
{
  struct atoms atoms;

  if (!atoms_read (species->formula, strlen (species->formula), &atoms))
    return 0;                            /* only a molar mass is known */
  return atoms_of (&atoms, element);
}
