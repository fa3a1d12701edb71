#include "config.h"
#include "units/unit_table.h"

#include <stdint.h>
#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

enum { MOST_REPAIRS = 6 };              /* words of one unit that may be mended */

/* What a word may have meant; the second only where two are as likely.  */
struct guess { const char *word[2]; };

/* Is it a word of the table with one meaning?  */
static bool
is_word (const struct unit_table *table, const char *text, size_t n)
{
  struct unit_word word;

  return unit_word_find (table, text, n, &word) && !word.entry->open;
}

static bool
is_same_but_capitals (const char *a, const char *b, size_t n)
{
  for (size_t i = 0; i < n; i++)
    if (unit_small_letter (a[i]) != unit_small_letter (b[i]))
      return false;
  return true;
}

/* The rows that list the atom among the words mistaken for theirs, in any capitals.  */
static bool
guess_mistake (const struct unit_table *table, const char *atom, struct guess *guess)
{
  size_t found = 0, n = strlen (atom);

  *guess = (struct guess) { { NULL, NULL } };
  for (size_t i = 0; i < table->entry_count; i++) {
    const struct unit_entry *entry = &table->entries[i];
    const char *list = entry->mistaken, *piece;
    size_t length;
    while (!entry->hidden && !entry->open && found < 2
           && unit_next_piece (&list, '|', &piece, &length))
      if (length == n && is_same_but_capitals (piece, atom, n))
        guess->word[found++] = entry->row.spelling;
  }
  return found > 0;
}

/* A search for the word nearest to ATOM: first by capitals, then by distance.  */
struct search {
  struct arena *arena;
  const char *atom;
  size_t length, limit;
  const char *best;
  size_t least;
  bool prefixed;
};

static void
take_nearer (struct search *search, const char *word, size_t apart, bool prefixed)
{
  if (apart > search->least || (apart == search->least && !(search->prefixed && !prefixed)))
    return;
  search->best = arena_string (search->arena, word);
  search->least = apart;
  search->prefixed = prefixed;
}

/* Of the words that are the same but for capitals, the one with the fewest other letters.  */
static void
visit_capitals (const char *word, const struct unit_entry *entry, bool prefixed, void *with)
{
  struct search *search = with;
  size_t apart = 0;

  if (entry->open || strlen (word) != search->length
      || !is_same_but_capitals (word, search->atom, search->length))
    return;
  for (size_t i = 0; i < search->length; i++)
    apart += word[i] != search->atom[i];
  take_nearer (search, word, apart, prefixed);
}

static bool
guess_capitals (const struct unit_table *table, struct arena *arena, const char *atom,
                struct guess *guess)
{
  struct search search = { .arena = arena, .atom = atom, .length = strlen (atom),
                           .least = SIZE_MAX };

  unit_word_each (table, visit_capitals, &search);
  guess->word[0] = search.best;
  return search.best != NULL;
}

/* bar(gauge), psi(abs), mbar(vacuum), K(difference): the short qualifier is offered.  */
static bool
guess_qualifier (const struct unit_table *table, struct arena *arena, const char *atom,
                 struct guess *guess)
{
  static const char *const qualifiers[] = { "g", "a", "vac", "diff" };
  const char *bracket = strrchr (atom, '(');
  struct unit_atom found;

  if (bracket == NULL || bracket == atom)
    return false;
  for (size_t i = 0; i < sizeof qualifiers / sizeof qualifiers[0]; i++)
    if (unit_small_letter (bracket[1]) == qualifiers[i][0]) {
      guess->word[0] = arena_format (arena, "%.*s(%s)", (int) (bracket - atom), atom,
                                     qualifiers[i]);
      return unit_atom_find (table, guess->word[0], strlen (guess->word[0]), &found);
    }
  return false;
}

/* bars, days.  */
static bool
guess_plural (const struct unit_table *table, struct arena *arena, const char *atom,
              struct guess *guess)
{
  size_t n = strlen (atom);

  if (n < 3 || atom[n - 1] != 's' || !is_word (table, atom, n - 1))
    return false;
  guess->word[0] = arena_copy (arena, atom, n - 1);
  return true;
}

/* kgh: kg/h.  */
static bool
guess_slash (const struct unit_table *table, struct arena *arena, const char *atom,
             struct guess *guess)
{
  size_t n = strlen (atom);

  for (size_t i = 1; i < n; i++)
    if (is_word (table, atom, i) && is_word (table, atom + i, n - i)) {
      guess->word[0] = arena_format (arena, "%.*s/%s", (int) i, atom, atom + i);
      return true;
    }
  return false;
}

/* %RH and %O2 are not offered: CO2 is one letter away.  A word of two letters may have one too many
   or too few, but not another one.                                                            */
static void
visit_nearest (const char *word, const struct unit_entry *entry, bool prefixed, void *with)
{
  struct search *search = with;
  size_t length = strlen (word);

  if (entry->open || entry->sort == UNIT_HUMIDITY || entry->sort == UNIT_OXYGEN
      || length > search->length + search->limit || search->length > length + search->limit
      || (search->length == 2 && length == 2))
    return;
  size_t apart = text_distance (search->atom, word, search->limit);
  if (apart <= search->limit)
    take_nearer (search, word, apart, prefixed);
}

/* The word least apart.  A change must leave more than half of a word as it was, so that a name
   of four letters is not taken for a unit of four others; N2 or h2 is a gas; of equals a word
   without prefix goes first, then the table's order.                                          */
static bool
guess_nearest (const struct unit_table *table, struct arena *arena, const char *atom,
               struct guess *guess)
{
  size_t n = strlen (atom), limit = text_reach (atom);

  if (n < 2 || (n == 2 && atom[1] >= '0' && atom[1] <= '9'))
    return false;
  if (limit > 1 && 2 * limit >= n)
    limit = (n - 1) / 2;
  struct search search = { .arena = arena, .atom = atom, .length = n, .limit = limit,
                           .least = SIZE_MAX };
  unit_word_each (table, visit_nearest, &search);
  guess->word[0] = search.best;
  return search.best != NULL;
}

/* What the unknown ATOM may have meant.  */
static bool
guess_word (const struct unit_table *table, struct arena *arena, const char *atom,
            struct guess *guess)
{
  return guess_mistake (table, atom, guess) || guess_capitals (table, arena, atom, guess)
         || guess_qualifier (table, arena, atom, guess)
         || guess_plural (table, arena, atom, guess) || guess_slash (table, arena, atom, guess)
         || guess_nearest (table, arena, atom, guess);
}

/* The whole text, or what stands before its qualifier, as a mistake: kg/cm2(g).  */
static bool
guess_whole (const struct unit_table *table, struct arena *arena, const char *ascii,
             struct guess *guess)
{
  const char *bracket = strrchr (ascii, '(');
  struct unit_atom found;

  if (guess_mistake (table, ascii, guess))
    return true;
  if (bracket == NULL
      || !guess_mistake (table, arena_copy (arena, ascii, (size_t) (bracket - ascii)), guess))
    return false;
  guess->word[0] = arena_format (arena, "%s%s", guess->word[0], bracket);
  guess->word[1] = NULL;
  return unit_atom_find (table, guess->word[0], strlen (guess->word[0]), &found);
}

/* Mends one unknown word of ASCII after the other until it reads.  False: no way to.  */
static bool
mend (const struct unit_table *table, struct arena *arena, const char *ascii,
      struct guess *mended)
{
  struct guess guess;

  if (guess_whole (table, arena, ascii, mended))
    return true;
  for (int i = 0; i < MOST_REPAIRS && strlen (ascii) <= UNIT_LONGEST; i++) {
    struct unit_reading reading = unit_read (table, ascii);
    if (reading.outcome == UNIT_READ) {
      *mended = (struct guess) { { ascii, NULL } };
      return true;
    }
    if (reading.outcome != UNIT_IS_UNKNOWN)
      return false;
    const char *behind = ascii + reading.first + reading.length;
    if (!guess_word (table, arena, arena_copy (arena, ascii + reading.first, reading.length),
                     &guess))
      return false;
    ascii = arena_format (arena, "%.*s%s%s", (int) reading.first, ascii, guess.word[0], behind);
  }
  return false;
}

/* %vol: the sign stands behind.  */
static bool
is_sign_first (const struct unit_table *table, struct arena *arena, const char *ascii,
               const char **turned)
{
  if (ascii[0] != '%' || ascii[1] == '\0')
    return false;
  *turned = arena_format (arena, "%s%%", ascii + 1);
  return is_word (table, *turned, strlen (*turned));
}

/* kg(g): says that the unit before the bracket takes none.  False: that is not what is wrong.  */
static bool
refuse_qualifier (const struct unit_table *table, const char *ascii,
                  const struct unit_reading *reading, struct fault *fault)
{
  const char *atom = ascii + reading->first;
  size_t n = reading->length;
  struct unit_atom found;

  if (n < 3 || atom[n - 1] != ')')
    return false;
  size_t stem = n - 1;
  while (stem > 0 && atom[stem] != '(')
    stem--;
  if (stem == 0 || !unit_atom_find (table, atom, stem, &found))
    return false;
  const char *why = arena_format (fault->arena, "'%.*s' takes no %.*s", (int) stem, atom,
                                  (int) (n - stem), atom + stem);
  fault_set (fault, MESSAGE_UNIT_UNKNOWN, ascii, why);
  return true;
}

static void
refuse_unknown (const struct unit_table *table, const char *ascii,
                const struct unit_reading *reading, struct fault *fault)
{
  struct arena *arena = fault->arena;
  struct guess mended = { { NULL, NULL } };
  const char *turned;

  if (is_sign_first (table, arena, ascii, &turned)) {
    fault_set (fault, MESSAGE_UNIT_FORM, ascii, arena_format (arena, "write '%s'", turned));
    fault_facts (fault, turned, NULL);
  }
  else if (mend (table, arena, ascii, &mended)) {
    fault_set (fault, MESSAGE_UNIT_UNKNOWN, ascii,
               mended.word[1] != NULL
                 ? arena_format (arena, "did you mean '%s' or '%s'?", mended.word[0],
                                 mended.word[1])
                 : arena_format (arena, "did you mean '%s'?", mended.word[0]));
    fault_facts (fault, mended.word[0], mended.word[1]);
  }
  else if (!refuse_qualifier (table, ascii, reading, fault))
    fault_set (fault, MESSAGE_UNIT_UNKNOWN, ascii, "'list units' shows the units there are");
}

/* Where the first and the last '/' stand in the product that the '*' at STAR goes on with; a
   bracket that opens, or the text's start, begins it.                                         */
static void
find_slashes (const char *ascii, size_t star, size_t *first, size_t *last)
{
  int depth = 0;

  *first = *last = star;
  for (size_t at = star; at-- > 0;) {
    depth += ascii[at] == ')' ? 1 : ascii[at] == '(' ? -1 : 0;
    if (depth < 0)
      return;
    if (depth > 0 || ascii[at] != '/')
      continue;
    if (*last == star)
      *last = at;
    *first = at;
  }
}

/* a/b*c: both readings, written out; STAR is where '*' stands.  */
static const char *
both_readings (struct arena *arena, const char *ascii, size_t star)
{
  size_t first, last, close = star + 1;
  int depth = 0;

  find_slashes (ascii, star, &first, &last);
  for (; ascii[close] != '\0' && (depth > 0 || strchr ("*/)", ascii[close]) == NULL); close++)
    depth += ascii[close] == '(' ? 1 : ascii[close] == ')' ? -1 : 0;
  const char *c = ascii + star + 1, *rest = ascii + close;
  int length = (int) (close - star - 1);
  return arena_format (arena, "a/b*c has two readings: write '%.*s(%.*s*%.*s)%s' or "
                       "'%.*s*%.*s%.*s%s'",
                       (int) (last + 1), ascii, (int) (star - last - 1), ascii + last + 1,
                       length, c, rest,
                       (int) first, ascii, length, c, (int) (star - first), ascii + first, rest);
}

void
unit_refuse (const struct unit_table *table, const char *ascii,
             const struct unit_reading *reading, struct fault *fault)
{
  switch (reading->outcome) {
  case UNIT_IS_OPEN:
    fault_set (fault, MESSAGE_UNIT_OPEN,
               arena_copy (fault->arena, ascii + reading->first, reading->length),
               reading->open->row.name);
    break;
  case UNIT_IS_MISSHAPEN:
    fault_set (fault, MESSAGE_UNIT_FORM, ascii,
               reading->why != NULL ? reading->why
                                    : both_readings (fault->arena, ascii, reading->first));
    break;
  case UNIT_IS_UNKNOWN:
    refuse_unknown (table, ascii, reading, fault);
    break;
  case UNIT_READ:
    break;
  }
}
