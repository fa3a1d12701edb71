/* Files that no laboratory would hand over, made from given ones by a fixed seed: mutate_cells
   SECONDS SEED FILE...  TAP.  A run that fails has printed the file it failed on.                */
#include "config.h"

#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include "fuzz/cells.h"

enum { FILES_MOST = 20, FILE_MOST = 4096 };

struct seed { char bytes[FILE_MOST]; size_t n; };

/* Numbers that follow from the seed alone (xorshift, Marsaglia, J. Stat. Softw. 8 (2003) 14).  */
static size_t
below (uint64_t *state, size_t limit)
{
  *state ^= *state << 13;
  *state ^= *state >> 7;
  *state ^= *state << 17;
  return limit > 0 ? (size_t) (*state % limit) : 0;
}

static const char *const odd[] = {
  ",", ";", "\t", "\"", "\"\"", "\n", "\r\n", "\r", "#", "1,5", "1.5", "1,250", "1.2.3", "1e999",
  "1e308", "-1", "<0.01", "<", "ND", "trace", "n/a", "rest", "%", "58 %", "850 ppm",
  "0.5 \xC2\xB1 0.1", "+/-", "mol%", "[mol%]", "mass%", "(k=2)", "U", "u", "u(CH4)",
  "u CH4", "CH4", "CO2", "O2+Ar",
  "C6+", "H2O", "methane", "xylene", "Summe", "total", "sample", "date", "unit", "component",
  "dry", "wet", "\xEF\xBB\xBF", "\xFF\xFE", "\xB0", "\x81", "\xC2\xA0", "\x01", "", "   ",
  "((((", "]]"
};

/* Puts PIECE in place of a few bytes.  */
static void
put (uint64_t *state, struct seed *file, const char *piece, size_t length)
{
  size_t at = below (state, file->n + 1), gone = below (state, 10);
  gone = gone > file->n - at ? file->n - at : gone;
  if (file->n - gone + length > FILE_MOST)
    return;
  memmove (file->bytes + at + length, file->bytes + at + gone, file->n - at - gone);
  memcpy (file->bytes + at, piece, length);
  file->n += length - gone;
}

static void
change (uint64_t *state, const struct seed *other, struct seed *file)
{
  const char *piece = odd[below (state, sizeof odd / sizeof odd[0])];
  size_t from = below (state, other->n + 1), length = below (state, other->n - from + 1);
  switch (below (state, 5)) {
  case 0:                               /* a piece of another file */
    put (state, file, other->bytes + from, length);
    break;
  case 1:                               /* a byte changed */
    if (file->n > 0)
      file->bytes[below (state, file->n)] ^= (char) (1U << below (state, 8));
    break;
  case 2:                               /* cut short */
    if (below (state, 8) == 0)
      file->n = below (state, file->n + 1);
    break;
  default:
    put (state, file, piece, strlen (piece));
    break;
  }
}

int
main (int argc, char **argv)
{
  static struct seed seeds[FILES_MOST], file;
  size_t count = 0, runs = 0, read = 0;
  if (argc < 4) {
    fprintf (stderr, "usage: mutate_cells SECONDS SEED FILE...\n");
    return 99;
  }
  for (int i = 3; i < argc && count < FILES_MOST; i++) {
    FILE *from = fopen (argv[i], "r");
    if (from == NULL)
      return 99;
    seeds[count].n = fread (seeds[count].bytes, 1, FILE_MOST, from);
    count++;
    fclose (from);
  }
  const unsigned long seed = strtoul (argv[2], NULL, 10);
  uint64_t state = 0x9E3779B97F4A7C15U + seed;
  const time_t end = time (NULL) + (time_t) strtoul (argv[1], NULL, 10);
  struct cells *cells = cells_create ();
  for (size_t i = 0; i < count; i++)
    read += fuzz_cells (cells, seeds[i].bytes, seeds[i].n);
  const int good = read > 0;
  for (; runs == 0 || time (NULL) < end; runs++) {
    file = seeds[below (&state, count)];
    for (size_t changes = 1 + below (&state, 8); changes > 0; changes--)
      change (&state, &seeds[below (&state, count)], &file);
    read += fuzz_cells (cells, file.bytes, file.n);
  }
  cells_destroy (cells);
  printf ("%s 1 - %zu files of seed %lu, %zu parts read\n1..1\n", good ? "ok" : "not ok", runs,
          seed, read);
  return good ? 0 : 1;
}
