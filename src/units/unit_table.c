#include "config.h"
#include "units/unit_table.h"

#include <math.h>
#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "support/table.h"

/* SI Brochure, 9th ed. (2019), Table 7, as far as the trade uses them; MM, a thousand thousand, is
   common practice without a source.                                                            */
static const struct prefix { const char *symbol; struct exact factor; } prefixes[] = {
  { "p", { 1, 1e12L } }, { "n", { 1, 1e9L } }, { "u", { 1, 1e6L } }, { "m", { 1, 1e3L } },
  { "c", { 1, 1e2L } }, { "d", { 1, 10 } }, { "h", { 1e2L, 1 } }, { "k", { 1e3L, 1 } },
  { "M", { 1e6L, 1 } }, { "G", { 1e9L, 1 } }, { "T", { 1e12L, 1 } }, { "MM", { 1e6L, 1 } },
};

static const size_t prefix_count = sizeof prefixes / sizeof prefixes[0];

/* What a mark in the column `marks` says.  */
static const struct mark {
  const char *name;
  enum unit_sort sort;
  enum ratio ratio;
  enum reference_family family;
  bool gauge, raised, actual, open;
} marks[] = {
  { .name = "actual", .actual = true },
  { .name = "gauge", .gauge = true },
  { .name = "humidity", .sort = UNIT_HUMIDITY },
  { .name = "mass", .ratio = RATIO_MASS },
  { .name = "mole", .ratio = RATIO_MOLE },
  { .name = "normal", .family = FAMILY_NORMAL },
  { .name = "open", .open = true },
  { .name = "oxygen", .sort = UNIT_OXYGEN },
  { .name = "plain", .ratio = RATIO_PLAIN },
  { .name = "point", .sort = UNIT_POINT },
  { .name = "raised", .raised = true },
  { .name = "sccm", .family = FAMILY_SCCM },
  { .name = "scf", .family = FAMILY_SCF },
  { .name = "standard", .family = FAMILY_STANDARD },
  { .name = "volume", .ratio = RATIO_VOLUME },
};

/* The columns of the table.  */
struct columns {
  int spelling, aliases, mistaken, quantity, name, factor, offset, marks, prefixes, source;
};

char
unit_small_letter (char c)
{
  return c >= 'A' && c <= 'Z' ? (char) (c - 'A' + 'a') : c;
}

bool
unit_next_piece (const char **list, char separator, const char **piece, size_t *length)
{
  while (**list == separator)
    ++*list;
  if (**list == '\0')
    return false;
  *piece = *list;
  *length = 0;
  while (**list != '\0' && **list != separator)
    ++*list, ++*length;
  return true;
}

static bool
is_word (const char *text, size_t n, const char *word)
{
  return strlen (word) == n && memcmp (text, word, n) == 0;
}

static void
put_mark (struct unit_entry *entry, const struct mark *mark)
{
  if (mark->sort != UNIT_SCALE)
    entry->sort = mark->sort;
  if (mark->ratio != RATIO_NONE)
    entry->ratio = mark->ratio;
  if (mark->family != FAMILY_NONE)
    entry->family = mark->family;
  entry->gauge |= mark->gauge;
  entry->raised |= mark->raised;
  entry->actual |= mark->actual;
  entry->open |= mark->open;
}

/* False: the list holds a mark that does not exist.  */
static bool
read_marks (struct unit_entry *entry, const char *list)
{
  const char *piece;
  size_t length;

  while (unit_next_piece (&list, ' ', &piece, &length)) {
    size_t i = 0, n = sizeof marks / sizeof marks[0];
    while (i < n && !is_word (piece, length, marks[i].name))
      i++;
    if (i == n)
      return false;
    put_mark (entry, &marks[i]);
  }
  return true;
}

/* Reads what an ordinary row measures.  Null, or what is wrong with it.  */
static const char *
read_measure (struct unit_entry *entry, const char *offset)
{
  struct exact shift = { 0, 1 };

  if (!dimension_find (entry->row.quantity, &entry->dimension))
    return "no such quantity";
  if (!exact_read (entry->row.factor, &entry->factor))
    return "factor_SI is not made of decimals, '*', '/' and '^'";
  if (!isnormal (exact_value (entry->factor)))
    return "factor_SI is zero or too large";
  if (*offset != '\0' && (entry->sort != UNIT_POINT || !exact_read (offset, &shift)))
    return "offset_K belongs to a temperature and is made of decimals";
  entry->offset = exact_value (shift);
  if (!isfinite (entry->offset))
    return "offset_K is too large";
  if (entry->sort == UNIT_POINT && !dimension_equal (entry->dimension, DIMENSION_TEMPERATURE))
    return "only a temperature has points";
  if (entry->gauge && !dimension_equal (entry->dimension, DIMENSION_PRESSURE))
    return "only a pressure has gauge forms";
  if (entry->ratio != RATIO_NONE && !dimension_is_none (entry->dimension))
    return "only a share is a share of something";
  if ((entry->family != FAMILY_NONE || entry->actual) && entry->dimension.length != 3)
    return "only a volume is counted at conditions";
  return NULL;
}

static bool
read_entry (struct unit_entry *entry, const struct table *table, size_t row,
            const struct columns *columns, struct fault *fault)
{
  *entry = (struct unit_entry) {
    .row = { .spelling = table_cell (table, row, columns->spelling),
             .quantity = table_cell (table, row, columns->quantity),
             .name = table_cell (table, row, columns->name),
             .factor = table_cell (table, row, columns->factor),
             .source = table_cell (table, row, columns->source),
             .users = table_row_is_users (table, row) },
    .aliases = table_cell (table, row, columns->aliases),
    .mistaken = table_cell (table, row, columns->mistaken),
    .prefixes = table_cell (table, row, columns->prefixes),
    .sort = UNIT_SCALE,
  };
  if (entry->row.spelling[0] == '\0')
    return table_complain (table, row, "no spelling", fault);
  if (!read_marks (entry, table_cell (table, row, columns->marks)))
    return table_complain (table, row, "a mark that does not exist", fault);
  if (entry->open)
    return true;
  const char *wrong = read_measure (entry, table_cell (table, row, columns->offset));
  return wrong == NULL || table_complain (table, row, wrong, fault);
}

/* Adds a word, in place of a built-in one if the row is a user's.  Null, or what is wrong.  */
static const char *
add_word (struct unit_table *table, struct unit_entry *entry, const char *word, size_t n)
{
  const struct unit_entry *there = map_find (table->words, word, n);

  if (there != NULL && there->row.users == entry->row.users)
    return "a word that another row has";
  if (n > UNIT_LONGEST / 2)
    return "a word that is too long";
  map_put (table->words, word, n, entry);
  return NULL;
}

static const struct prefix *
find_prefix (const char *symbol, size_t n)
{
  for (size_t i = 0; i < prefix_count; i++)
    if (is_word (symbol, n, prefixes[i].symbol))
      return &prefixes[i];
  return NULL;
}

/* Enters a row under its spelling and aliases.  Null, or what is wrong with it.  */
static const char *
enter (struct unit_table *table, struct unit_entry *entry)
{
  const char *list = entry->aliases, *piece, *wrong;
  size_t length;

  wrong = add_word (table, entry, entry->row.spelling, strlen (entry->row.spelling));
  while (wrong == NULL && unit_next_piece (&list, '|', &piece, &length))
    wrong = add_word (table, entry, piece, length);
  list = entry->prefixes;
  while (wrong == NULL && unit_next_piece (&list, ' ', &piece, &length))
    if (find_prefix (piece, length) == NULL)
      wrong = "a prefix that does not exist";
  return wrong;
}

static void
remove_word (struct unit_table *table, const struct unit_entry *entry, const char *word, size_t n)
{
  if (map_find (table->words, word, n) == entry)
    map_put (table->words, word, n, NULL);
}

/* A user's row takes the place of the built-in one of the same spelling, aliases and all.  */
static void
hide_replaced (struct unit_table *table, const struct unit_entry *entry)
{
  const char *spelling = entry->row.spelling, *piece;
  struct unit_entry *other = map_find (table->words, spelling, strlen (spelling));
  size_t length;

  if (!entry->row.users || other == NULL || other->row.users
      || strcmp (other->row.spelling, spelling) != 0)
    return;
  other->hidden = true;
  remove_word (table, other, spelling, strlen (spelling));
  for (const char *list = other->aliases; unit_next_piece (&list, '|', &piece, &length);)
    remove_word (table, other, piece, length);
}

static bool
fill (struct unit_table *table, const char *directory, struct fault *fault)
{
  const struct table *rows = table_read (table->arena, "units", directory, fault);

  if (rows == NULL)
    return false;
  const struct columns columns = {
    .spelling = table_column (rows, "spelling"), .aliases = table_column (rows, "aliases"),
    .mistaken = table_column (rows, "mistaken"), .quantity = table_column (rows, "quantity"),
    .name = table_column (rows, "name"), .factor = table_column (rows, "factor_SI"),
    .offset = table_column (rows, "offset_K"), .marks = table_column (rows, "marks"),
    .prefixes = table_column (rows, "prefixes"), .source = table_column (rows, "source"),
  };
  table->entry_count = table_rows (rows);
  table->entries = ARENA_ARRAY (table->arena, table->entry_count, struct unit_entry);
  table->shown = ARENA_ARRAY (table->arena, table->entry_count, struct unit_entry *);
  for (size_t i = 0; i < table->entry_count; i++) {
    if (!read_entry (&table->entries[i], rows, i, &columns, fault))
      return false;
    hide_replaced (table, &table->entries[i]);
    const char *wrong = enter (table, &table->entries[i]);
    if (wrong != NULL)
      return table_complain (rows, i, wrong, fault);
  }
  for (size_t i = 0; i < table->entry_count; i++)
    if (!table->entries[i].open && !table->entries[i].hidden)
      table->shown[table->shown_count++] = &table->entries[i];
  return true;
}

struct unit_table *
unit_table_create (const char *directory, struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct unit_table *table = ARENA_NEW (arena, struct unit_table);

  table->arena = arena;
  table->words = map_create ();
  table->units = map_create ();
  if (!fill (table, directory, fault)) {
    unit_table_destroy (table);
    return NULL;
  }
  return table;
}

void
unit_table_destroy (struct unit_table *table)
{
  if (table == NULL)
    return;
  map_destroy (table->words);
  map_destroy (table->units);
  arena_destroy (table->arena);
}

size_t
unit_table_rows (const struct unit_table *table)
{
  return table->shown_count;
}

struct unit_row
unit_table_row (const struct unit_table *table, size_t i)
{
  return table->shown[i]->row;
}

bool
unit_row_find (const struct unit_table *table, const char *spelling, struct unit_row *row)
{
  struct unit_word word;

  if (!unit_word_find (table, spelling, strlen (spelling), &word) || word.entry->open)
    return false;
  *row = word.entry->row;
  return true;
}

/* Does the row take this prefix?  */
static bool
takes_prefix (const struct unit_entry *entry, const char *symbol)
{
  const char *list = entry->prefixes, *piece;
  size_t length;

  while (unit_next_piece (&list, ' ', &piece, &length))
    if (is_word (piece, length, symbol))
      return true;
  return false;
}

bool
unit_word_find (const struct unit_table *table, const char *text, size_t n,
                struct unit_word *word)
{
  const struct unit_entry *entry = map_find (table->words, text, n);

  if (entry != NULL) {
    *word = (struct unit_word) { entry, { 1, 1 } };
    return true;
  }
  for (size_t i = 0; i < prefix_count; i++) {
    size_t length = strlen (prefixes[i].symbol);
    if (n <= length || memcmp (text, prefixes[i].symbol, length) != 0)
      continue;
    entry = map_find (table->words, text + length, n - length);
    if (entry != NULL && takes_prefix (entry, prefixes[i].symbol)) {
      *word = (struct unit_word) { entry, prefixes[i].factor };
      return true;
    }
  }
  return false;
}

/* A walk over all words.  */
struct walk {
  void (*visit) (const char *word, const struct unit_entry *, bool prefixed, void *with);
  void *with;
};

/* Visits the N bytes at STEM, bare and behind the row's prefixes.  */
static void
visit_stem (const struct walk *walk, const struct unit_entry *entry, const char *stem, size_t n)
{
  char word[2 * UNIT_LONGEST];
  const char *list = entry->prefixes, *piece;
  size_t length;

  memcpy (word, stem, n);
  word[n] = '\0';
  walk->visit (word, entry, false, walk->with);
  while (unit_next_piece (&list, ' ', &piece, &length)) {
    memcpy (word, piece, length);
    memcpy (word + length, stem, n);
    word[length + n] = '\0';
    walk->visit (word, entry, true, walk->with);
  }
}

void
unit_word_each (const struct unit_table *table,
                void (*visit) (const char *word, const struct unit_entry *, bool prefixed,
                               void *with),
                void *with)
{
  const struct walk walk = { visit, with };

  for (size_t i = 0; i < table->entry_count; i++) {
    const struct unit_entry *entry = &table->entries[i];
    const char *list = entry->aliases, *piece;
    size_t length;
    if (entry->hidden)
      continue;
    visit_stem (&walk, entry, entry->row.spelling, strlen (entry->row.spelling));
    while (unit_next_piece (&list, '|', &piece, &length))
      visit_stem (&walk, entry, piece, length);
  }
}
