/* Lines that nobody would type, made from the sample lines by a fixed seed: mutate SAMPLES SECONDS
   [SEED].  TAP.  A run that fails has printed the lines it failed on.                            */
#include "config.h"

#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include "fuzz/lines.h"

enum { LINES_MOST = 2000, LINE_MOST = 2048, PIECES_MOST = 4 };

struct samples { char *line[LINES_MOST]; size_t count; };

/* Numbers that follow from the seed alone (xorshift, Marsaglia, J. Stat. Softw. 8 (2003) 14).  */
static uint64_t
random_next (uint64_t *state)
{
  *state ^= *state << 13;
  *state ^= *state >> 7;
  *state ^= *state << 17;
  return *state;
}

static size_t
below (uint64_t *state, size_t limit)
{
  return limit > 0 ? (size_t) (random_next (state) % limit) : 0;
}

/* The fourth column of language_samples.tsv.  */
static void
read_samples (struct samples *samples, FILE *file)
{
  char row[LINE_MOST];
  while (samples->count < LINES_MOST && fgets (row, sizeof row, file)) {
    char *cell = row;
    for (int i = 0; i < 3 && cell; i++)
      cell = (cell = strchr (cell, '\t')) ? cell + 1 : NULL;
    if (row[0] == '#' || !cell)
      continue;
    cell[strcspn (cell, "\t\n")] = '\0';
    samples->line[samples->count] = malloc (strlen (cell) + 1);
    if (!samples->line[samples->count])
      abort ();
    strcpy (samples->line[samples->count++], cell);
  }
}

static const char *const odd[] = {
  "0", "-1", "1e308", "1e-320", "1e999", "1,5", "1.2.3", "100 %", "rest", "<5 ppm", "-300 degC",
  "0 bar(a)", "2 bar(vac)", "mol%", "mass%", "kg/h", "m3/h", "Nm3/h", "degC", "of", "in", "at",
  "without", "keeping", "normalised", "saturated", "dry", "that", "raw", "lab", "feed", "mix", "q",
  "x", "vendor", "air", "H2O", "N2", "C02", "xylene", "(", ")", "((((", "\"", "#", ";", ",", "\\",
  "\n", "\xff", "\xc2\xb1", "\xc2\xb0", "\x01", "=", "+", "-", "*", "/", "undo", "forget raw"
};

/* Puts PIECE into LINE (*N bytes) at a place of a few bytes that it may replace.  */
static void
put (uint64_t *state, char *line, size_t *n, const char *piece, size_t length)
{
  size_t at = below (state, *n + 1), gone = below (state, 8);
  gone = gone > *n - at ? *n - at : gone;
  if (*n - gone + length > LINE_MOST)
    return;
  memmove (line + at + length, line + at + gone, *n - at - gone);
  memcpy (line + at, piece, length);
  *n += length - gone;
}

static void
change (uint64_t *state, const struct samples *samples, char *line, size_t *n)
{
  const char *other = samples->line[below (state, samples->count)];
  const char *piece = odd[below (state, sizeof odd / sizeof odd[0])];
  size_t from = below (state, strlen (other) + 1);
  switch (below (state, 4)) {
  case 0:                               /* a piece of another line */
    put (state, line, n, other + from, below (state, strlen (other + from) + 1));
    break;
  case 1:                               /* a byte changed */
    if (*n > 0)
      line[below (state, *n)] ^= (char) (1U << below (state, 8));
    break;
  case 2: {                             /* a piece of itself again */
    char copy[LINE_MOST];
    from = below (state, *n + 1);
    size_t length = below (state, *n - from + 1);
    memcpy (copy, line + from, length);
    put (state, line, n, copy, length);
    break;
  }
  default:
    put (state, line, n, piece, strlen (piece));
    break;
  }
}

int
main (int argc, char **argv)
{
  static struct samples samples;
  FILE *file = argc > 2 ? fopen (argv[1], "r") : NULL;
  if (!file) {
    fprintf (stderr, "usage: mutate SAMPLES SECONDS [SEED]\n");
    return 99;
  }
  read_samples (&samples, file);
  fclose (file);
  unsigned long seed = argc > 3 ? strtoul (argv[3], NULL, 10) : 1;
  uint64_t state = 0x9E3779B97F4A7C15U + seed;
  time_t end = time (NULL) + (time_t) strtoul (argv[2], NULL, 10);
  size_t runs = 0;
  for (; samples.count > 0 && (runs == 0 || time (NULL) < end); runs++) {
    char line[LINE_MOST];
    size_t n = 0;
    for (size_t pieces = 1 + below (&state, PIECES_MOST); pieces > 0; pieces--) {
      const char *sample = samples.line[below (&state, samples.count)];
      if (n + strlen (sample) + 1 > LINE_MOST)
        break;
      memcpy (line + n, sample, strlen (sample));
      n += strlen (sample);
      line[n++] = '\n';
    }
    for (size_t changes = 1 + below (&state, 6); changes > 0; changes--)
      change (&state, &samples, line, &n);
    fuzz_lines (line, n);
  }
  printf ("%s 1 - %zu runs of seed %lu\n1..1\n", runs > 0 && samples.count > 0 ? "ok" : "not ok",
          runs, seed);
  for (size_t i = 0; i < samples.count; i++)
    free (samples.line[i]);
  return samples.count > 0 ? 0 : 1;
}
