/* Lines that nobody would type, made by a fixed seed from sample lines and from sessions with
   blocks: mutate SAMPLES BLOCKS SECONDS [SEED [RUNS]].  TAP.  A run that fails has printed the
   lines it failed on.  Sessions are saved in the folder it runs in.                              */
#include "config.h"

#include <signal.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>
#include "fuzz/lines.h"

enum { LINES_MOST = 2000, LINE_MOST = 8192, PIECES_MOST = 4, SAVED_EACH = 8 };

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

static char *
copied (const char *text)
{
  char *copy = malloc (strlen (text) + 1);
  if (!copy)
    abort ();
  return strcpy (copy, text);
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
    samples->line[samples->count++] = copied (cell);
  }
}

/* The texts between empty lines.  */
static void
read_blocks (struct samples *samples, FILE *file)
{
  char row[LINE_MOST], block[LINE_MOST] = "";
  while (samples->count < LINES_MOST) {
    const bool more = fgets (row, sizeof row, file) != NULL;
    if (more && row[0] != '\n' && strlen (block) + strlen (row) < sizeof block) {
      strcat (block, row);
      continue;
    }
    if (block[0] != '\0')
      samples->line[samples->count++] = copied (block);
    block[0] = '\0';
    if (!more)
      break;
  }
}

static const char *const odd[] = {
  "0", "-1", "1e308", "1e-320", "1e999", "1,5", "1.2.3", "100 %", "rest", "<5 ppm", "-300 degC",
  "0 bar(a)", "2 bar(vac)", "mol%", "mass%", "kg/h", "m3/h", "Nm3/h", "degC", "of", "in", "at",
  "without", "keeping", "normalised", "saturated", "dry", "that", "raw", "lab", "feed", "mix", "q",
  "x", "vendor", "air", "H2O", "N2", "C02", "xylene", "(", ")", "((((", "\"", "#", ";", ",", "\\",
  "\n", "end", "known ", "solve", "workings", "note \"n.html\"", "check offer", "± 1", "0 %",
  "split x: a = b + c", "mix x: a + b = c", "absent CH4 of tail", "digester.csv", "\xff",
  "\xc2\xb1", "\xc2\xb0", "\x01", "=", "+", "-", "*", "/", "undo", "forget raw"
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

/* Takes a line out of TEXT, or puts another line before one of its lines.  */
static void
change_line (uint64_t *state, char *text, size_t *n, const char *other, size_t length)
{
  size_t at = below (state, *n + 1);
  while (at > 0 && text[at - 1] != '\n')
    at--;
  const char *end = memchr (text + at, '\n', *n - at);
  const size_t gone = below (state, 2) > 0 && end ? (size_t) (end + 1 - (text + at)) : 0;
  if (*n - gone + length > LINE_MOST)
    return;
  memmove (text + at + length, text + at + gone, *n - at - gone);
  memcpy (text + at, other, length);
  *n += length - gone;
}

/* A whole line of SAMPLE, its end included where it has one.  */
static size_t
line_of (uint64_t *state, const char *sample, const char **line)
{
  size_t at = below (state, strlen (sample) + 1);
  while (at > 0 && sample[at - 1] != '\n')
    at--;
  *line = sample + at;
  const size_t n = strcspn (*line, "\n");
  return n + ((*line)[n] == '\n');
}

static void
change (uint64_t *state, const struct samples *samples, char *line, size_t *n)
{
  const char *other = samples->line[below (state, samples->count)];
  const char *piece = odd[below (state, sizeof odd / sizeof odd[0])];
  size_t from = below (state, strlen (other) + 1);
  const char *whole;
  switch (below (state, 6)) {
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
  case 3:                               /* a line of another taken in or put in the place of one */
    from = line_of (state, other, &whole);
    change_line (state, line, n, whole, from);
    break;
  case 4:                               /* a line left out */
    change_line (state, line, n, "", 0);
    break;
  default:
    put (state, line, n, piece, strlen (piece));
    break;
  }
}

/* A few samples one below the other, changed; returns the bytes.  */
static size_t
make (uint64_t *state, const struct samples *samples, const struct samples *blocks, char *line)
{
  size_t n = 0;
  for (size_t pieces = 1 + below (state, PIECES_MOST); pieces > 0; pieces--) {
    const struct samples *from = below (state, 3) > 0 ? blocks : samples;
    const char *sample = from->line[below (state, from->count)];
    if (n + strlen (sample) + 1 > LINE_MOST)
      break;
    memcpy (line + n, sample, strlen (sample));
    n += strlen (sample);
    line[n++] = '\n';
  }
  for (size_t changes = 1 + below (state, 6); changes > 0; changes--)
    change (state, below (state, 2) > 0 ? blocks : samples, line, &n);
  return n;
}

/* What runs, for an assertion that does not hold.  */
static struct { char line[LINE_MOST]; size_t n; } now;

static void
tell_now (int number)
{
  (void) number;
  (void) !write (STDERR_FILENO, now.line, now.n);
}

static void
release (struct samples *samples)
{
  for (size_t i = 0; i < samples->count; i++)
    free (samples->line[i]);
}

int
main (int argc, char **argv)
{
  static struct samples samples, blocks;
  FILE *file = argc > 3 ? fopen (argv[1], "r") : NULL;
  FILE *sessions = argc > 3 ? fopen (argv[2], "r") : NULL;
  if (!file || !sessions) {
    fprintf (stderr, "usage: mutate SAMPLES BLOCKS SECONDS [SEED [RUNS]]\n");
    return 99;
  }
  read_samples (&samples, file);
  read_blocks (&blocks, sessions);
  fclose (file);
  fclose (sessions);
  signal (SIGABRT, tell_now);
  const bool any = samples.count > 0 && blocks.count > 0;
  unsigned long seed = argc > 4 ? strtoul (argv[4], NULL, 10) : 1;
  size_t most = argc > 5 ? strtoul (argv[5], NULL, 10) : SIZE_MAX, runs = 0;
  uint64_t state = 0x9E3779B97F4A7C15U + seed;
  time_t end = time (NULL) + (time_t) strtoul (argv[3], NULL, 10);
  for (; any && runs < most && (runs == 0 || time (NULL) < end); runs++) {
    now.n = make (&state, &samples, &blocks, now.line);
    fuzz_lines (now.line, now.n, runs % SAVED_EACH == 0);
  }
  printf ("%s 1 - %zu runs of seed %lu\n1..1\n", any ? "ok" : "not ok", runs, seed);
  release (&samples);
  release (&blocks);
  return any ? 0 : 1;
}
