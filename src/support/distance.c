#include "config.h"
#include "support/text.h"

#include <string.h>
#include "support/memory.h"

enum { USUAL_WORD = 63 };                 /* longer words need memory from the system */

static size_t
least (size_t a, size_t b)
{
  return a < b ? a : b;
}

/* Two words, the same beginning and end taken off.  */
struct words { const char *a, *b; size_t a_length, b_length; };

static void
words_trim (struct words *w)
{
  while (w->a_length > 0 && w->b_length > 0
         && w->a[w->a_length - 1] == w->b[w->b_length - 1]) {
    w->a_length--;
    w->b_length--;
  }
  while (w->a_length > 0 && w->b_length > 0 && w->a[0] == w->b[0]) {
    w->a++;
    w->b++;
    w->a_length--;
    w->b_length--;
  }
}

/* Fills the row for the first I letters of A from the two rows above it; returns its least cell.
   Cell j is the distance to the first j letters of B.                                          */
static size_t
fill_row (const struct words *w, size_t i, size_t *const rows[3])
{
  size_t *row = rows[0];
  const size_t *above = rows[1], *two_above = rows[2];
  size_t smallest = i;

  row[0] = i;
  for (size_t j = 1; j <= w->b_length; j++) {
    size_t changed = w->a[i - 1] == w->b[j - 1] ? 0 : 1;
    size_t cell = least (above[j - 1] + changed, least (above[j], row[j - 1]) + 1);

    if (i > 1 && j > 1 && w->a[i - 1] == w->b[j - 2] && w->a[i - 2] == w->b[j - 1])
      cell = least (cell, two_above[j - 2] + 1);
    row[j] = cell;
    smallest = least (smallest, cell);
  }
  return smallest;
}

/* The distance, or LIMIT + 1; ROWS has room for three rows.  From one row to the next the least
   cell never falls and rises by 1 at most, so a swap, which costs 1 over two rows, does not get
   below it either: once it is beyond the limit, so is the end.                                 */
static size_t
distance_within (const struct words *w, size_t limit, size_t *rows)
{
  size_t width = w->b_length + 1;
  size_t *turn[3] = { rows, rows + width, rows + 2 * width };      /* this, above, two above */

  for (size_t j = 0; j < width; j++)
    turn[1][j] = j;
  for (size_t i = 1; i <= w->a_length; i++) {
    size_t *oldest = turn[2];

    if (fill_row (w, i, turn) > limit)
      return limit + 1;
    turn[2] = turn[1];
    turn[1] = turn[0];
    turn[0] = oldest;
  }
  return least (turn[1][w->b_length], limit + 1);
}

size_t
text_distance (const char *a, const char *b, size_t limit)
{
  struct words w = { a, b, strlen (a), strlen (b) };
  size_t usual[3 * (USUAL_WORD + 1)];
  size_t *rows = usual;
  size_t longer = w.a_length > w.b_length ? w.a_length : w.b_length;
  size_t distance;

  limit = least (limit, longer);          /* no two words are further apart */
  if (longer - least (w.a_length, w.b_length) > limit)
    return limit + 1;
  words_trim (&w);
  if (w.a_length == 0 || w.b_length == 0)
    return w.a_length + w.b_length;       /* one of them: within the limit, as seen above */

  if (w.b_length > USUAL_WORD)
    rows = memory_get (memory_product (3, w.b_length + 1), sizeof (size_t));
  distance = distance_within (&w, limit, rows);
  if (rows != usual)
    memory_release (rows);
  return distance;
}

size_t
text_reach (const char *word)
{
  return 1 + strlen (word) / 4;
}
