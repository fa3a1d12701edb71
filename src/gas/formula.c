#include "config.h"
#include "gas/formula.h"

#include <stdio.h>
#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/table.h"

/* No gas has more atoms than this; sums and products of counts stay far from overflow.  */
enum { MOST_ATOMS = 100000, DEEPEST_BRACKET = 4 };

struct scan { const char *at, *end; };

static bool
is_digit (char c)
{
  return c >= '0' && c <= '9';
}

static bool
add_atoms (struct atoms *atoms, const char *symbol, unsigned count)
{
  size_t i = 0;

  while (i < atoms->size && strcmp (atoms->of[i].symbol, symbol) != 0)
    i++;
  if (i == FORMULA_ELEMENTS)
    return false;
  if (i == atoms->size) {
    memcpy (atoms->of[i].symbol, symbol, strlen (symbol) + 1);
    atoms->of[i].count = 0;
    atoms->size++;
  }
  atoms->of[i].count += count;
  return atoms->of[i].count <= MOST_ATOMS;
}

/* count = [ digit { digit } ], 1 where there is none.  One that begins with 0 is a mistyped O.  */
static bool
read_count (struct scan *scan, unsigned *count)
{
  unsigned value = 0;

  if (scan->at == scan->end || !is_digit (*scan->at)) {
    *count = 1;
    return true;
  }
  if (*scan->at == '0')
    return false;
  while (scan->at < scan->end && is_digit (*scan->at) && value <= MOST_ATOMS)
    value = 10 * value + (unsigned) (*scan->at++ - '0');
  *count = value;
  return value > 0 && value <= MOST_ATOMS;
}

/* symbol = capital [ small ].  */
static bool
read_symbol (struct scan *scan, char symbol[3])
{
  if (scan->at == scan->end || *scan->at < 'A' || *scan->at > 'Z')
    return false;
  symbol[0] = *scan->at++;
  symbol[1] = '\0';
  if (scan->at < scan->end && *scan->at >= 'a' && *scan->at <= 'z')
    symbol[1] = *scan->at++;
  symbol[2] = '\0';
  return true;
}

static bool read_group (struct scan *, int depth, struct atoms *);

/* bracket = ( "(" group ")" | "[" group "]" ) count.  */
static bool
read_bracket (struct scan *scan, int depth, struct atoms *atoms)
{
  char closing = *scan->at == '(' ? ')' : ']';
  struct atoms inside = { 0 };
  unsigned times;

  scan->at++;
  if (depth == DEEPEST_BRACKET || !read_group (scan, depth + 1, &inside)
      || scan->at == scan->end || *scan->at != closing)
    return false;
  scan->at++;
  if (!read_count (scan, &times))
    return false;
  for (size_t i = 0; i < inside.size; i++)
    if (inside.of[i].count > MOST_ATOMS / times
        || !add_atoms (atoms, inside.of[i].symbol, inside.of[i].count * times))
      return false;
  return true;
}

/* group = ( symbol count | bracket ) { symbol count | bracket }.  */
static bool
read_group (struct scan *scan, int depth, struct atoms *atoms)
{
  do {
    char symbol[3];
    unsigned count;

    if (scan->at < scan->end && (*scan->at == '(' || *scan->at == '[')) {
      if (!read_bracket (scan, depth, atoms))
        return false;
    } else if (!read_symbol (scan, symbol) || !read_count (scan, &count)
               || !add_atoms (atoms, symbol, count))
      return false;
  } while (scan->at < scan->end && *scan->at != ')' && *scan->at != ']');
  return true;
}

bool
atoms_read (const char *text, size_t n, struct atoms *atoms)
{
  struct scan scan = { text, text + n };
  struct atoms found = { 0 };

  if (!read_group (&scan, 0, &found) || scan.at != scan.end)
    return false;
  *atoms = found;
  return true;
}

unsigned
atoms_of (const struct atoms *atoms, const char *symbol)
{
  for (size_t i = 0; i < atoms->size; i++)
    if (strcmp (atoms->of[i].symbol, symbol) == 0)
      return atoms->of[i].count;
  return 0;
}

/* Stands A before B in Hill order?  */
static bool
is_before (const struct atom_count *a, const struct atom_count *b, bool carbon)
{
  if (carbon)
    for (const char *first = "CH"; *first != '\0'; first++) {
      if (a->symbol[0] == *first && a->symbol[1] == '\0')
        return true;
      if (b->symbol[0] == *first && b->symbol[1] == '\0')
        return false;
    }
  return strcmp (a->symbol, b->symbol) < 0;
}

void
atoms_write (const struct atoms *atoms, char out[FORMULA_ROOM])
{
  struct atoms sorted = *atoms;
  bool carbon = atoms_of (atoms, "C") > 0;
  size_t length = 0;

  for (size_t i = 1; i < sorted.size; i++)
    for (size_t k = i; k > 0 && is_before (&sorted.of[k], &sorted.of[k - 1], carbon); k--) {
      struct atom_count held = sorted.of[k];

      sorted.of[k] = sorted.of[k - 1];
      sorted.of[k - 1] = held;
    }
  out[0] = '\0';
  for (size_t i = 0; i < sorted.size; i++) {
    const struct atom_count *atom = &sorted.of[i];

    /* 16 elements of at most two letters and six digits fit.  */
    if (atom->count == 1)
      length += (size_t) snprintf (out + length, FORMULA_ROOM - length, "%s", atom->symbol);
    else
      length += (size_t) snprintf (out + length, FORMULA_ROOM - length, "%s%u", atom->symbol,
                                   atom->count);
  }
}

static size_t
slot_of (const char *symbol)
{
  size_t first = (size_t) (symbol[0] - 'A') * 27;

  return symbol[1] == '\0' ? first : first + 1 + (size_t) (symbol[1] - 'a');
}

static bool
is_symbol (const char *text)
{
  struct scan scan = { text, text + strlen (text) };
  char symbol[3];

  return read_symbol (&scan, symbol) && scan.at == scan.end;
}

bool
elements_read (struct arena *arena, const char *directory, struct elements *elements,
               struct fault *fault)
{
  struct table *table = table_read (arena, "elements", directory, fault);
  int symbol, weight;

  if (table == NULL)
    return false;
  symbol = table_column (table, "symbol");
  weight = table_column (table, "atomic_weight");
  for (size_t i = 0; i < table_rows (table); i++) {
    const char *name = table_cell (table, i, symbol);
    double value;

    if (!is_symbol (name))
      return table_complain (table, i, "the symbol of an element is expected", fault);
    if (!table_number (table, i, weight, &value, fault))
      return false;
    if (!(value > 0))
      return table_complain (table, i, "an atomic weight is above 0", fault);
    elements->weight[slot_of (name)] = value;
  }
  return true;
}

bool
atoms_molar_mass (const struct elements *elements, const struct atoms *atoms, double *molar_mass)
{
  double sum = 0;

  for (size_t i = 0; i < atoms->size; i++) {
    double weight = elements->weight[slot_of (atoms->of[i].symbol)];

    if (!(weight > 0))
      return false;
    sum += atoms->of[i].count * weight;
  }
  *molar_mass = sum * 1e-3;
  return true;
}
