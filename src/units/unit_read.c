#include "config.h"
#include "units/unit_table.h"

#include <math.h>
#include <string.h>

/* unit    = product
   product = factor { "*" factor } { "/" factor }
   factor  = ( "(" product ")" | atom ) [ "^" [ "-" ] digit ]
   atom    = [ number ] word { "(" qualifier ")" } [ digit ] | number                           */

enum { DEEPEST = 8,                     /* brackets in brackets */
       HIGHEST_POWER = 12 };            /* of a base dimension, so that ^9 stays in its range */

/* What a dimensionless product may be a share of, by what stands above and below its line.  */
enum share_class { SHARE_AMOUNT, SHARE_MASS, SHARE_VOLUME, SHARE_ENERGY, SHARE_CLASSES };

/* A product so far.  */
struct product {
  struct exact factor;
  struct dimension dimension;
  int family[FAMILY_COUNT];             /* the power each family's volumes stand in */
  int above[SHARE_CLASSES], below[SHARE_CLASSES];
  bool actual;
};

struct reader {
  const struct unit_table *table;
  const char *text, *at;
  int words;                            /* read so far */
  int depth;
  bool expression;                      /* more than one word alone */
  struct unit_atom only;                /* the word, while there is one */
  struct unit_reading reading;          /* filled in on failure */
};

static const struct product unity = { .factor = { 1, 1 } };

static bool
is_digit (char c)
{
  return c >= '0' && c <= '9';
}

static bool
fail (struct reader *reader, enum unit_outcome outcome, const char *first, size_t length)
{
  reader->reading.outcome = outcome;
  reader->reading.first = (size_t) (first - reader->text);
  reader->reading.length = length;
  return false;
}

static bool
fail_form (struct reader *reader, const char *why)
{
  reader->reading.why = why;
  return fail (reader, UNIT_IS_MISSHAPEN, reader->at, 1);
}

/* Ends the N bytes at TEXT with (QUALIFIER)?  Then *STEM is what stands before.  */
static bool
has_qualifier (const char *text, size_t n, const char *qualifier, size_t *stem)
{
  size_t length = strlen (qualifier) + 2;

  if (n <= length || text[n - 1] != ')' || text[n - length] != '('
      || memcmp (text + n - length + 1, qualifier, length - 2) != 0)
    return false;
  *stem = n - length;
  return true;
}

static struct unit_atom
atom_of (const struct unit_word *word, enum unit_sort sort, int power)
{
  return (struct unit_atom) { .entry = word->entry, .sort = sort, .power = power,
                              .factor = exact_times (word->entry->factor, word->prefix) };
}

/* bar(g), mbar(vac), degF(diff).  */
static bool
find_qualified (const struct unit_table *table, const char *text, size_t n, struct unit_atom *atom)
{
  static const struct { const char *qualifier; enum unit_sort sort; } qualifiers[] = {
    { "a", UNIT_ABSOLUTE }, { "g", UNIT_GAUGE }, { "vac", UNIT_VACUUM },
    { "diff", UNIT_DIFFERENCE },
  };

  for (size_t i = 0, stem; i < sizeof qualifiers / sizeof qualifiers[0]; i++)
    if (has_qualifier (text, n, qualifiers[i].qualifier, &stem)) {
      struct unit_word word;
      enum unit_sort sort = qualifiers[i].sort;
      if (!unit_word_find (table, text, stem, &word)
          || (sort == UNIT_DIFFERENCE ? word.entry->sort != UNIT_POINT : !word.entry->gauge))
        return false;
      *atom = atom_of (&word, sort, 1);
      return true;
    }
  return false;
}

/* barg, psia; in capitals behind a word in capitals: PSIG.  */
static bool
find_lettered (const struct unit_table *table, const char *text, size_t n, struct unit_atom *atom)
{
  struct unit_word word;
  char last = text[n - 1];
  bool capital = text[n - 2] >= 'A' && text[n - 2] <= 'Z';
  bool gauge = last == 'g' || (last == 'G' && capital);
  bool absolute = last == 'a' || (last == 'A' && capital);

  if ((!gauge && !absolute) || text[n - 2] == ')' || !unit_word_find (table, text, n - 1, &word)
      || !word.entry->gauge)
    return false;
  *atom = atom_of (&word, gauge ? UNIT_GAUGE : UNIT_ABSOLUTE, 1);
  return true;
}

/* ft2, s2.  */
static bool
find_raised (const struct unit_table *table, const char *text, size_t n, struct unit_atom *atom)
{
  struct unit_word word;
  char last = text[n - 1];

  if (last < '2' || last > '9' || !unit_word_find (table, text, n - 1, &word)
      || !word.entry->raised)
    return false;
  *atom = atom_of (&word, word.entry->sort, last - '0');
  return true;
}

bool
unit_atom_find (const struct unit_table *table, const char *text, size_t n,
                struct unit_atom *atom)
{
  struct unit_word word;

  if (unit_word_find (table, text, n, &word)) {
    *atom = atom_of (&word, word.entry->sort, 1);
    return true;
  }
  return n >= 2
         && (find_qualified (table, text, n, atom) || find_lettered (table, text, n, atom)
             || find_raised (table, text, n, atom));
}

/* What the atom may be a share of; SHARE_CLASSES if of nothing.  */
static enum share_class
class_of (const struct unit_entry *entry, struct dimension d)
{
  if (entry->family != FAMILY_NONE || dimension_equal (d, DIMENSION_AMOUNT))
    return SHARE_AMOUNT;
  if (dimension_equal (d, DIMENSION_MASS) || dimension_equal (d, DIMENSION_MASS_FLOW))
    return SHARE_MASS;
  if (dimension_equal (d, DIMENSION_VOLUME) || dimension_equal (d, DIMENSION_VOLUME_FLOW))
    return SHARE_VOLUME;
  if (dimension_equal (d, DIMENSION_ENERGY) || dimension_equal (d, DIMENSION_POWER))
    return SHARE_ENERGY;
  return SHARE_CLASSES;
}

static struct product
product_of_atom (const struct unit_atom *atom)
{
  const struct unit_entry *entry = atom->entry;
  struct product product = unity;

  product.factor = exact_power (atom->factor, atom->power);
  product.dimension = dimension_power (entry->dimension, atom->power);
  product.actual = entry->actual;
  if (entry->family != FAMILY_NONE)
    product.family[entry->family] = atom->power;
  enum share_class class = class_of (entry, product.dimension);
  if (class != SHARE_CLASSES)
    product.above[class] = 1;
  return product;
}

static bool
is_within (struct dimension d, int limit)
{
  const signed char powers[] = { d.length, d.mass, d.time, d.temperature, d.amount };

  for (size_t i = 0; i < sizeof powers; i++)
    if (powers[i] > limit || powers[i] < -limit)
      return false;
  return true;
}

/* Multiplies *TOTAL by PART to the POWER (-9 to 9).  False: the powers grow beyond sense.  */
static bool
multiply (struct product *total, const struct product *part, int power)
{
  int times = power < 0 ? -power : power;

  total->factor = exact_times (total->factor, exact_power (part->factor, power));
  total->dimension = dimension_times (total->dimension, dimension_power (part->dimension, power));
  for (size_t i = 0; i < FAMILY_COUNT; i++)
    total->family[i] += power * part->family[i];
  for (size_t i = 0; i < SHARE_CLASSES; i++) {
    total->above[i] += times * (power < 0 ? part->below[i] : part->above[i]);
    total->below[i] += times * (power < 0 ? part->above[i] : part->below[i]);
  }
  total->actual |= part->actual;
  return is_within (total->dimension, HIGHEST_POWER)
         && isnormal (exact_value (total->factor));
}

/* The bytes from AT on that belong to an atom: up to an operator or a bracket, but with the
   brackets that stand right behind.                                                           */
static size_t
atom_length (const char *at)
{
  size_t n = strcspn (at, "*/^()");

  while (n > 0 && at[n] == '(') {
    size_t inside = strcspn (at + n + 1, "*/^()");
    if (inside == 0 || at[n + 1 + inside] != ')')
      break;
    n += inside + 2;
  }
  return n;
}

/* The number before a word: 100 of 100scf.  Returns its length, 0 if there is none.  */
static size_t
read_number (const char *at, size_t n, struct exact *number)
{
  char digits[UNIT_LONGEST + 1];
  size_t length = 0;

  while (length < n && (is_digit (at[length]) || at[length] == '.'))
    length++;
  memcpy (digits, at, length);
  digits[length] = '\0';
  if (length > 0 && exact_read (digits, number) && number->over > 0)
    return length;
  return 0;
}

/* Refuses, inside an expression, what is a figure of its own there.  */
static bool
fits_expression (struct reader *reader, enum unit_sort sort)
{
  if (sort == UNIT_GAUGE || sort == UNIT_VACUUM)
    return fail_form (reader, "a gauge pressure stands alone; inside a unit write the bare one");
  if (sort == UNIT_HUMIDITY || sort == UNIT_OXYGEN)
    return fail_form (reader, "%RH and %O2 stand alone");
  return true;
}

/* atom = [ number ] word { "(" qualifier ")" } [ digit ] | number  */
static bool
read_atom (struct reader *reader, struct product *product)
{
  size_t n = atom_length (reader->at);
  struct exact number = { 1, 1 };
  size_t digits = read_number (reader->at, n, &number);
  struct unit_atom atom;

  *product = unity;
  if (n == 0)
    return fail_form (reader, "a unit is missing here");
  if (digits > 0)
    reader->expression = true;
  product->factor = number;
  if (digits == n) {
    reader->at += n;
    return true;
  }
  const char *word = reader->at + digits;
  n -= digits;
  if (!unit_atom_find (reader->table, word, n, &atom))
    return fail (reader, UNIT_IS_UNKNOWN, word, n);
  if (atom.entry->open) {
    reader->reading.open = atom.entry;
    return fail (reader, UNIT_IS_OPEN, word, n);
  }
  if (atom.power != 1 || reader->words > 0)
    reader->expression = true;
  if (reader->words > 0 && (!fits_expression (reader, atom.sort)
                            || !fits_expression (reader, reader->only.sort)))
    return false;
  reader->only = atom;
  reader->words++;
  reader->at = word + n;
  struct product part = product_of_atom (&atom);
  if (!multiply (product, &part, 1))
    return fail_form (reader, "the powers are too high");
  return true;
}

static bool read_product (struct reader *, struct product *);

/* factor = ( "(" product ")" | atom ) [ "^" [ "-" ] digit ]  */
static bool
read_factor (struct reader *reader, struct product *factor)
{
  struct product part;
  int power = 1;

  if (*reader->at == '(') {
    if (reader->depth++ == DEEPEST)
      return fail_form (reader, "too many brackets");
    reader->at++;
    if (!read_product (reader, &part))
      return false;
    if (*reader->at != ')')
      return fail_form (reader, "a bracket is not closed");
    reader->at++;
    reader->depth--;
  }
  else if (!read_atom (reader, &part))
    return false;
  if (*reader->at == '^') {
    const char *digit = reader->at + 1 + (reader->at[1] == '-');
    if (!is_digit (digit[0]) || digit[0] == '0' || is_digit (digit[1]))
      return fail_form (reader, "a power is a digit from 1 to 9: m^3, s^-1");
    power = digit[-1] == '-' ? -(digit[0] - '0') : digit[0] - '0';
    reader->at = digit + 1;
    reader->expression = true;
  }
  *factor = unity;
  if (!multiply (factor, &part, power))
    return fail_form (reader, "the powers are too high");
  if ((power == 3 || power == -3) && dimension_equal (part.dimension, DIMENSION_LENGTH))
    (power > 0 ? factor->above : factor->below)[SHARE_VOLUME]++;
  return true;
}

/* product = factor { "*" factor } { "/" factor }  */
static bool
read_product (struct reader *reader, struct product *product)
{
  struct product factor;
  bool below = false;

  if (!read_factor (reader, product))
    return false;
  while (*reader->at == '*' || *reader->at == '/') {
    if (*reader->at == '*' && below)
      return fail_form (reader, NULL);
    below = *reader->at == '/';
    reader->expression = true;
    reader->at++;
    if (!read_factor (reader, &factor))
      return false;
    if (!multiply (product, &factor, below ? -1 : 1))
      return fail_form (reader, "the powers are too high");
  }
  return true;
}

/* What a dimensionless product is a share of: the one thing that cancels.  */
static enum ratio
ratio_of (const struct product *product)
{
  static const enum ratio ratios[SHARE_CLASSES] = {
    [SHARE_AMOUNT] = RATIO_MOLE, [SHARE_MASS] = RATIO_MASS,
    [SHARE_VOLUME] = RATIO_VOLUME, [SHARE_ENERGY] = RATIO_ENERGY,
  };
  enum ratio ratio = RATIO_NONE;
  int found = 0;

  for (size_t i = 0; i < SHARE_CLASSES; i++)
    if (product->above[i] != product->below[i])
      return RATIO_NONE;
    else if (product->above[i] > 0) {
      ratio = ratios[i];
      found++;
    }
  return found == 1 && dimension_is_none (product->dimension) ? ratio : RATIO_NONE;
}

/* Puts the families of PRODUCT into UNIT.  False: more than one stands in it, or one squared.  */
static bool
put_family (struct unit *unit, const struct product *product)
{
  for (size_t i = FAMILY_NONE + 1; i < FAMILY_COUNT; i++)
    if (product->family[i] != 0) {
      if (unit->family != FAMILY_NONE || product->family[i] > 1 || product->family[i] < -1)
        return false;
      unit->family = (enum reference_family) i;
      unit->family_power = product->family[i];
    }
  return true;
}

static bool
finish (struct reader *reader, const struct product *product)
{
  const struct unit_atom *only = &reader->only;
  struct unit unit = {
    .factor = exact_value (product->factor), .dimension = product->dimension,
    .actual = product->actual,
  };

  if (reader->words == 0)
    return fail (reader, UNIT_IS_UNKNOWN, reader->text, strlen (reader->text));
  if (reader->expression && !fits_expression (reader, only->sort))
    return false;
  if (!put_family (&unit, product)) {
    reader->at = reader->text;
    return fail_form (reader, "one volume at reference conditions, and not squared, fits a unit");
  }
  if (!reader->expression) {
    unit.sort = only->sort;
    unit.ratio = only->entry->ratio;
    unit.offset = only->sort == UNIT_POINT ? only->entry->offset : 0;
  }
  else
    unit.ratio = ratio_of (product);
  reader->reading.outcome = UNIT_READ;
  reader->reading.unit = unit;
  return true;
}

struct unit_reading
unit_read (const struct unit_table *table, const char *ascii)
{
  struct reader reader = { .table = table, .text = ascii, .at = ascii };
  struct product product;
  struct unit_atom atom;
  size_t n = strlen (ascii);

  /* Words of the table may hold an operator: kgf/cm2, lb-mol.  */
  if (n > 0 && unit_atom_find (table, ascii, n, &atom) && !atom.entry->open) {
    reader.only = atom;
    reader.words = 1;
    reader.expression = atom.power != 1;
    product = product_of_atom (&atom);
    finish (&reader, &product);
  }
  else if (read_product (&reader, &product)) {
    if (*reader.at != '\0')
      fail_form (&reader, *reader.at == ')' ? "a bracket was never opened"
                                            : "a '*' or a '/' is missing here");
    else
      finish (&reader, &product);
  }
  return reader.reading;
}
