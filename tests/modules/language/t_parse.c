/* The parser beyond the samples: places over several lines, limits, damaged text.  */
#include "config.h"
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/message.h"
#include "support/text.h"
#include "units/unit.h"
#include "gas/species.h"
#include "language/parse.h"
#include "language/tree.h"
#include "modules/language/tree_print.h"

/* What one case works with.  */
struct bench {
  struct arena *arena;
  struct vocabulary words;
  struct fault fault;
  struct parser *parser;
};

static bool
bench_open (struct bench *b)
{
  b->arena = arena_create ();
  fault_init (&b->fault, b->arena);
  b->words.units = unit_table_create (NULL, &b->fault);
  b->words.species = species_table_create (NULL, &b->fault);
  return b->words.units != NULL && b->words.species != NULL;
}

static void
bench_close (struct bench *b)
{
  unit_table_destroy (b->words.units);
  species_table_destroy (b->words.species);
  arena_destroy (b->arena);
}

static void
begin (struct bench *b, const char *text, size_t n, int line, enum block block)
{
  fault_init (&b->fault, b->arena);
  b->parser = parser_create (b->arena, &b->words, text, n, line, block);
}

/* The next statement of what was begun; null at the end or with a fault.  */
static struct statement *
next (struct bench *b)
{
  struct statement *statement = NULL;
  return parser_next (b->parser, &statement, &b->fault) ? statement : NULL;
}

static struct statement *
first_of (struct bench *b, const char *text)
{
  begin (b, text, strlen (text), 1, BLOCK_NONE);
  return next (b);
}

/* Reads TEXT as one statement and compares it with READING.  */
static void
reads (struct bench *b, const char *text, const char *reading)
{
  struct text out;
  text_init (&out);
  test_about ("%s", text);
  const struct statement *statement = first_of (b, text);
  if (statement != NULL)
    tree_print (&out, statement);
  else
    text_add_format (&out, "%s at %d", message_name (b->fault.kind), b->fault.at.first);
  SAME_TEXT (out.bytes, reading);
  text_clear (&out);
}

/* TEXT fails as KIND at LINE and COLUMN.  */
static void
fails (struct bench *b, const char *text, const char *kind, int line, int column)
{
  test_about ("%s", text);
  CHECK (first_of (b, text) == NULL);
  SAME_TEXT (message_name (b->fault.kind), kind);
  SAME_INT (b->fault.at.line, line);
  SAME_INT (b->fault.at.first, column);
}

static void
places_count_in_physical_lines (void)
{
  struct bench b;
  NEED (bench_open (&b));
  fails (&b, "gas g = CH4 60,  # the main part\n  CO2 40,\n\tN2 rest foo", "unit-unknown", 3, 10);
  fails (&b, "850 Nm3/hr of raw", "unit-unknown", 1, 5);
  fails (&b, "850 \\\n  Nm3/hr of raw", "unit-unknown", 2, 3);
  fails (&b, "850 Nm3/h \\\n of raw \\\n in", "unfinished", 3, 4);
  /* Columns count characters: each of the twins is one.  */
  fails (&b, "CO\xE2\x82\x82 of \xC2\xB5 in kg/h", "name-expected", 1, 8);
  fails (&b, "20 \xC2\xB0""C in foo", "unit-unknown", 1, 10);
  fails (&b, "\"\xC3\xA4\xC3\xB6\" of of", "name-expected", 1, 9);
  begin (&b, "feed in kg/h; raw in foo", 24, 7, BLOCK_NONE);
  CHECK (next (&b) != NULL);
  CHECK (next (&b) == NULL);
  SAME_INT (b.fault.at.line, 7);
  SAME_INT (b.fault.at.first, 22);
  SAME_INT (b.fault.at.last, 24);
  bench_close (&b);
}

static void
places_of_nodes_cover_their_words (void)
{
  struct bench b;
  NEED (bench_open (&b));
  const struct statement *s;
  s = first_of (&b, "  CO2 of (feed + recycle) at 20 degC, 5 bar (g) in kg/h");
  NEED (s != NULL && s->value->kind == NODE_AT && s->targets != NULL);
  SAME_INT (s->at.first, 3);
  SAME_INT (s->at.last, 55);
  SAME_INT (s->value->at.first, 3);
  SAME_INT (s->value->at.last, 47);
  SAME_INT (s->value->a->at.last, 25);
  SAME_INT (s->value->a->b->at.first, 10);
  SAME_INT (s->value->b->at.first, 30);
  SAME_INT (s->value->b->items->next->unit_at.first, 41);
  SAME_INT (s->value->b->items->next->unit_at.last, 47);
  SAME_TEXT (s->value->b->items->next->unit_text, "bar(g)");
  SAME_INT (s->targets->at.first, 52);
  bench_close (&b);
}

static void
a_statement_keeps_its_source (void)
{
  struct bench b;
  NEED (bench_open (&b));
  const struct statement *s = first_of (&b, "  feed  in kg/h   # the feed");
  NEED (s != NULL);
  SAME_TEXT (s->source, "feed  in kg/h");
  s = first_of (&b, "gas g = CH4 60,  # methane \"raw\"\n    CO2 rest \\  \n  mol%  # end");
  NEED (s != NULL);
  SAME_TEXT (s->source, "gas g = CH4 60, CO2 rest mol%");
  begin (&b, "note \"a;b # c.md\" ;; undo ; # done", 34, 1, BLOCK_NONE);
  s = next (&b);
  NEED (s != NULL);
  SAME_TEXT (s->source, "note \"a;b # c.md\"");
  SAME_TEXT (s->text, "a;b # c.md");
  s = next (&b);
  NEED (s != NULL);
  SAME_TEXT (s->source, "undo");
  SAME_INT (s->at.first, 22);
  CHECK (next (&b) == NULL);
  SAME_INT (b.fault.kind, MESSAGE_NONE);
  bench_close (&b);
}

static void
a_failed_statement_is_told_and_passed (void)
{
  struct bench b;
  const char *text = "feed in kgh ; raw in mol%";
  NEED (bench_open (&b));
  begin (&b, text, strlen (text), 1, BLOCK_NONE);
  CHECK (next (&b) == NULL);
  SAME_TEXT (message_name (b.fault.kind), "unit-unknown");
  SAME_TEXT (parser_source (b.parser), "feed in kgh");
  fault_init (&b.fault, b.arena);
  const struct statement *s = next (&b);
  NEED (s != NULL);
  SAME_TEXT (s->source, "raw in mol%");
  bench_close (&b);
}

static void
blocks_open_and_close (void)
{
  struct bench b;
  const char *text = "balance p; mix m: a = b; end; sheet s of air; 5 kg/h; end; a in kg/h";
  NEED (bench_open (&b));
  begin (&b, text, strlen (text), 1, BLOCK_NONE);
  static const enum block after[] = { BLOCK_BALANCE, BLOCK_BALANCE, BLOCK_NONE, BLOCK_SHEET,
                                      BLOCK_SHEET, BLOCK_NONE, BLOCK_NONE };
  for (size_t i = 0; i < sizeof after / sizeof after[0]; i++) {
    CHECK (next (&b) != NULL);
    SAME_INT (parser_block (b.parser), after[i]);
  }
  CHECK (next (&b) == NULL);
  begin (&b, "end", 3, 1, BLOCK_SHEET);
  const struct statement *s = next (&b);
  NEED (s != NULL);
  SAME_INT (s->kind, STATEMENT_END);
  SAME_INT (parser_block (b.parser), BLOCK_NONE);
  bench_close (&b);
}

static void
lists_read_their_basis (void)
{
  struct bench b;
  NEED (bench_open (&b));
  reads (&b, "gas g = CH4 60 mol%, CO2 40 mol% dry", "(gas g (mix (CH4 (60 mol%)) (CO2 40)"
         " (basis mol% dry)))");
  reads (&b, "gas g = CH4 58.2 \xC2\xB1 2 % mol%, CO2 rest",
         "(gas g (mix (CH4 (58.2 mol% (pm 2 %))) (CO2 rest)))");
  reads (&b, "gas g = CO2 40 +- 1 (limits), N2 rest mass%", "(gas g (mix (CO2 (40 (pm 1 (limits))))"
         " (N2 rest) (basis mass%)))");
  reads (&b, "gas g = CO2 (x) ppm, N2 rest mol%", "(gas g (mix (CO2 x ppm) (N2 rest)"
         " (basis mol%)))");
  reads (&b, "gas g = dry air 40, \"raw gas\" (2 * q mol%) mol%", "(gas g (mix (air 40)"
         " (\"raw gas\" (* 2 (q q mol%))) (basis mol%)))");
  reads (&b, "gas g = CO2 100 mol%", "(gas g (mix (CO2 (100 mol%))))");
  fails (&b, "gas g = CO2 5, N2 rest ppm", "basis-missing", 1, 24);
  fails (&b, "gas g = CO2 5, N2 rest mol% mol%", "word-unexpected", 1, 29);
  fails (&b, "gas g = CO2 rest N2 5 mol%", "comma-missing", 1, 18);
  fails (&b, "gas g = CH4 60, CO2", "unfinished", 1, 20);
  fails (&b, "9 kg/h of (CH4 60, CO2 40)", "basis-missing", 1, 26);
  bench_close (&b);
}

static void
figures_carry_what_stands_behind_them (void)
{
  struct bench b;
  NEED (bench_open (&b));
  const struct statement *s = first_of (&b, "known = 1");
  CHECK (s == NULL);
  s = first_of (&b, "let q = -1_000.50 \xC2\xB1 2.5 kPa (k=2)");
  NEED (s != NULL && s->value->spread != NULL);
  NEAR (s->value->number, -1000.5, 1e-15);
  SAME_TEXT (s->value->figure, "-1_000.50");
  SAME_TEXT (s->value->unit_text, "kPa");
  NEAR (s->value->spread->value, 2.5, 1e-15);
  NEAR (s->value->spread->k, 2, 1e-15);
  SAME_INT (s->value->spread->kind, SPREAD_EXPANDED);
  CHECK (!s->value->spread->relative && s->value->spread->unit == NULL);
  s = first_of (&b, "let q = 850 Nm3/h \xC2\xB1 2 % dry");
  NEED (s != NULL && s->value->spread != NULL);
  CHECK (s->value->spread->relative);
  SAME_INT (s->value->words, WORD_DRY);
  reads (&b, "feed in MW, gross", "(ask feed (to MW gross))");
  reads (&b, "feed in m3/h at 20 degC and 1 bar(a) and kg/h", "(ask feed (to m3/h"
         " (at (T (q 20 degC)) (P (q 1 bar(a))))) (to kg/h))");
  reads (&b, "q m3/h dry of raw in mol % dry, vol %", "(ask (of (q q m3/h dry) raw) (to mol% dry)"
         " (to vol%))");
  reads (&b, "a - -5 kg", "(ask (- a (q -5 kg)))");
  reads (&b, "-a * b", "(ask (* (- a) b))");
  reads (&b, "a - b - c * d / e", "(ask (- (- a b) (/ (* c d) e)))");
  fails (&b, "850 Nm3/h dry wet of raw", "word-place", 1, 15);
  fails (&b, "5 \xC2\xB1 kg", "number-expected", 1, 5);
  fails (&b, "5 kg \xC2\xB1 1 (k=0)", "range", 1, 13);
  fails (&b, "5 kg \xC2\xB1 1 s", "spread-unit", 1, 10);
  bench_close (&b);
}

static void
trials (void)
{
  struct bench b;
  bench_open (&b);
  const struct statement *s = first_of (&b, "montecarlo 1e5 seed 7 850 Nm3/h of raw in kg/h");
  NEED (s != NULL);
  SAME_INT (s->kind, STATEMENT_MONTECARLO);
  SAME_INT (s->trials, 100000);
  SAME_INT (s->seed, 7);
  NEED (s->value != NULL && s->targets != NULL);
  SAME_INT (s->value->at.first, 23);
  s = first_of (&b, "montecarlo 20_000 wobbe of raw");
  NEED (s != NULL);
  SAME_INT (s->trials, 20000);
  SAME_INT (s->seed, 1);
  fails (&b, "montecarlo wobbe of raw", "word-unexpected", 1, 12);
  fails (&b, "montecarlo 100 wobbe of raw", "range", 1, 12);
  fails (&b, "montecarlo 1000.5 wobbe of raw", "range", 1, 12);
  fails (&b, "montecarlo 100 000 wobbe of raw", "range", 1, 12);
  fails (&b, "montecarlo 1000 seed x", "word-unexpected", 1, 22);
  fails (&b, "montecarlo 1000", "unfinished", 1, 16);
  bench_close (&b);
}

static void
by_a_standard (void)
{
  struct bench b;
  bench_open (&b);
  reads (&b, "wobbe of raw by ISO 6976 in MJ/m3",
         "(ask (of wobbe-by-ISO-6976 raw) (to MJ/m3))");
  reads (&b, "net wobbe by ISO 6976 of raw", "(ask (of net-wobbe-by-ISO-6976 raw))");
  reads (&b, "Z of raw by ISO 6976:1995 at 0 degC, 1 atm",
         "(ask (at (of Z-by-ISO-6976:1995 raw) (T (q 0 degC)) (P (q 1 atm))))");
  reads (&b, "Z of raw at 0 degC, 1 atm by ISO 6976:2016",
         "(ask (at (of Z-by-ISO-6976:2016 raw) (T (q 0 degC)) (P (q 1 atm))))");
  fails (&b, "wobbe of raw by ISO 6974", "word-unexpected", 1, 17);
  fails (&b, "wobbe of raw by ISO 69761", "word-unexpected", 1, 14);
  fails (&b, "raw by ISO 6976 in mol%", "word-place", 1, 5);
  fails (&b, "2 * wobbe of raw by", "unfinished", 1, 20);
  bench_close (&b);
}

static void
settings_are_read_with_their_kinds (void)
{
  struct bench b;
  NEED (bench_open (&b));
  reads (&b, "set total tolerance 0.5 %", "(set total-tolerance (q 0.5 %))");
  reads (&b, "set scf at 60 degF, 14.696 psia",
         "(set scf (at (T (q 60 degF)) (P (q 14.696 psia))))");
  reads (&b, "set coverage 2", "(set coverage (q 2))");
  reads (&b, "set constants uncertain", "(set constants uncertain)");
  reads (&b, "set parts independent", "(set parts independent)");
  fails (&b, "set coverage 0.9", "setting-value", 1, 14);
  fails (&b, "set coverage 11", "setting-value", 1, 14);
  fails (&b, "set digits 2", "setting-value", 1, 12);
  fails (&b, "set digits 8.5", "setting-value", 1, 12);
  fails (&b, "set digits 8 %", "setting-value", 1, 12);
  fails (&b, "set combustion 25 degC", "word-unexpected", 1, 16);
  fails (&b, "set combustion at 25 K(diff)", "setting-value", 1, 19);
  fails (&b, "set below detection some", "setting-value", 1, 21);
  fails (&b, "set calorific values ISO 6976", "setting-value", 1, 22);
  fails (&b, "set calorific values ISO 6976:2016 real", "word-unexpected", 1, 36);
  fails (&b, "set site altitude 1200", "unit-expected", 1, 19);
  fails (&b, "set mg/Nm3 at 0 degC, 1 atm", "setting-unknown", 1, 5);
  const struct statement *s = first_of (&b, "set calorific values ISO 6976:1995");
  NEED (s != NULL);
  SAME_TEXT (s->setting_words, "ISO 6976:1995");
  SAME_INT (s->setting_at.first, 22);
  SAME_INT (s->setting_at.last, 34);
  bench_close (&b);
}

static void
names_are_told_from_words (void)
{
  struct bench b;
  NEED (bench_open (&b));
  reads (&b, "Let in kg/h", "(ask Let (to kg/h))");
  reads (&b, "known in kg/h", "(ask known (to kg/h))");
  reads (&b, "show bar(g)", "(show bar(g))");
  reads (&b, "show carbon dioxide", "(show carbon dioxide)");
  reads (&b, "help  gas   model  # please", "(help gas model)");
  reads (&b, "Z of CO\xE2\x82\x82 at 20 \xE2\x84\x83, 1 bar(a), Z=0.9",
         "(ask (at (of Z CO2) (T (q 20 degC)) (P (q 1 bar(a))) (Z (q 0.9))))");
  fails (&b, "Let q = 5", "word-case", 1, 1);
  fails (&b, "SHOW feed", "word-case", 1, 1);
  fails (&b, "mix M1: feed = mixed", "block-line", 1, 1);
  fails (&b, "components CH4, CO2", "block-line", 1, 1);
  fails (&b, "gas \"\" = raw", "name-form", 1, 5);
  fails (&b, "gas \"CO2\" = raw", "name-reserved", 1, 5);
  fails (&b, "show feed/x", "unit-unknown", 1, 6);
  fails (&b, "feed + in kg/h", "word-unexpected", 1, 8);
  fails (&b, "feed in kg/h)", "bracket-close", 1, 13);
  fails (&b, "850 kg/ h of raw", "unit-form", 1, 7);
  bench_close (&b);
}

static void
damaged_text_is_refused_with_its_place (void)
{
  struct bench b;
  NEED (bench_open (&b));
  fails (&b, "feed in kg/h # \xFF", "text-encoding", 1, 16);
  fails (&b, "gas g = \xC3\xA4\xC3", "text-encoding", 1, 10);
  fails (&b, "feed,\n in \xED\xA0\x80", "text-encoding", 2, 5);      /* a surrogate */
  begin (&b, "feed\0in kg/h", 12, 3, BLOCK_NONE);
  CHECK (next (&b) == NULL);
  SAME_TEXT (message_name (b.fault.kind), "text-encoding");
  SAME_INT (b.fault.at.line, 3);
  SAME_INT (b.fault.at.first, 5);
  CHECK (next (&b) == NULL);      /* nothing else is read from it */
  fails (&b, "note \"a\n.md\"", "text-open", 1, 6);
  fails (&b, "feed \\ in kg/h", "character", 1, 6);
  begin (&b, "", 0, 1, BLOCK_NONE);
  CHECK (next (&b) == NULL);
  SAME_INT (b.fault.kind, MESSAGE_NONE);
  bench_close (&b);
}

/* PIECE, N times.  */
static char *
repeated (const char *piece, size_t n)
{
  struct text text;
  text_init (&text);
  for (size_t i = 0; i < n; i++)
    text_add (&text, piece);
  return text.bytes;
}

static void
nesting_ends_in_a_fault (void)
{
  static const char *const pieces[] = { "(", "a of ", "a + ", "- (", "sqrt(", "a * (",
                                        "(CO2 (", "5 kg of ", "a at (", "a / b - " };
  struct bench b;
  NEED (bench_open (&b));
  for (size_t i = 0; i < sizeof pieces / sizeof pieces[0]; i++) {
    char *text = repeated (pieces[i], 200000);
    test_about ("%s ...", pieces[i]);
    CHECK (first_of (&b, text) == NULL);
    SAME_TEXT (message_name (b.fault.kind), "too-deep");
    free (text);
    arena_reset (b.arena);
  }
  char *changes = repeated (" dried", 100000), *text;
  NEED (asprintf (&text, "raw%s", changes) > 0);
  CHECK (first_of (&b, text) == NULL);
  SAME_TEXT (message_name (b.fault.kind), "too-deep");
  free (text);
  free (changes);
  /* What people write is far within.  */
  reads (&b, "((((((((((a))))))))))", "(ask a)");
  bench_close (&b);
}

static double
seconds (void)
{
  struct timespec now;
  clock_gettime (CLOCK_PROCESS_CPUTIME_ID, &now);
  return (double) now.tv_sec + 1e-9 * (double) now.tv_nsec;
}

/* Time to read N times PIECE behind HEAD.  */
static double
time_of (struct bench *b, const char *head, const char *piece, size_t n)
{
  char *body = repeated (piece, n), *text;
  if (asprintf (&text, "%s%s", head, body) < 0)
    abort ();
  double begun = seconds ();
  CHECK (first_of (b, text) != NULL || b->fault.kind != MESSAGE_NONE);
  double took = seconds () - begun;
  free (text);
  free (body);
  arena_reset (b->arena);
  return took;
}

static void
long_lines_take_time_in_proportion (void)
{
  static const char *const lines[][2] = {
    { "gas g = N2 rest", ", CO2 1 ppm" }, { "a in kg/h", ", mg/m3 at 20 degC, 1 bar(a)" },
    { "note \"", "x" }, { "feed in ", "kg" }, { "a", "bcdefgh" },
    { "forget a", ", carbon dioxide" },
    { "feed", " #" }, { "5", "0" }, { "feed ", " " }, { "feed ", "\\\n" }, { "feed", "?" },
    { "let x = feed at 20 degC", ", 1 bar (g" }, { "5 kg(", "(" }, { "help", " me" }
  };
  enum { FEW = 4000, TIMES = 8 };
  struct bench b;
  NEED (bench_open (&b));
  for (size_t i = 0; i < sizeof lines / sizeof lines[0]; i++) {
    test_about ("%s%s ...", lines[i][0], lines[i][1]);
    double few = time_of (&b, lines[i][0], lines[i][1], FEW);
    double many = time_of (&b, lines[i][0], lines[i][1], (size_t) FEW * TIMES);
    /* In proportion it is 8 times, by the square 64 times; a busy machine blurs both.  */
    CHECK (many < 28 * few + 0.01);
  }
  bench_close (&b);
}

/* Small changes to good lines: nothing but readings and faults with places come out.  */
static void
mangled_lines_never_break_it (void)
{
  static const char *const lines[] = {
    "gas raw = CH4 58.2 \xC2\xB1 0.3, CO2 39.9 (k=2), H2S <5 ppm, N2 rest mol% dry",
    "2150 acfm of air at 95 degF, 14.2 psia, 60 % RH, Z 0.9 in Nm3/h dry, mg/m3 at normal, 3 %O2",
    "trim n2, c3 so wobbe of mix at 5 bar(g) = 49.5 MJ/m3 and O2 of mix at most 0.5 mol%",
    "sheet o of dry air; inlet: 1057 ft3/min at 32 degC; end; check o; set scf at 5 degC, 1 bar",
    "balance p; mix a: b + c = d; known CO2 of d = 98 % of CO2 of b; components CH4; end; solve p",
    "stream t = (mix keeping CO2 98 %, rest 1 %) without air by N2 normalised into CO\xE2\x82\x82",
    "gas s with molar mass 19.8 g/mol; gas f from \"x\" sample \"7\" mol%; set digits 8; show Nm3"
  };
  static const char pieces[] = " ,;:=()+-*/%<>\"#\\\n.\xC2\xB1""059_eE&";
  enum { ROUNDS = 4000 };
  struct bench b;
  unsigned seed = 20250107u, faults = 0;
  NEED (bench_open (&b));
  for (int round = 0; round < ROUNDS; round++) {
    char text[256];
    size_t n = strlen (lines[(size_t) round % 7]);
    memcpy (text, lines[(size_t) round % 7], n);
    for (int change = 0; change < 1 + round % 3; change++) {
      seed = seed * 1664525u + 1013904223u;
      size_t at = (seed >> 8) % n;
      char piece = pieces[(seed >> 3) % (sizeof pieces - 1)];
      if ((seed >> 30) == 0)
        memmove (text + at, text + at + 1, --n - at);
      else
        text[at] = piece;
    }
    test_about ("seed %u, round %d", seed, round);
    begin (&b, text, n, 1, BLOCK_NONE);
    struct statement *statement;
    bool more = true;
    while (more && parser_next (b.parser, &statement, &b.fault))
      more = statement != NULL;
    if (more) {
      faults++;
      CHECK (b.fault.at.line >= 1 && b.fault.at.first >= 1
             && b.fault.at.last >= b.fault.at.first);
    }
    arena_reset (b.arena);
  }
  CHECK (faults > ROUNDS / 4 && faults < ROUNDS);
  bench_close (&b);
}

static const struct test_case cases[] = {
  { "trials", trials },
  { "a property by a standard", by_a_standard },
  { "places count in physical lines", places_count_in_physical_lines },
  { "places of nodes cover their words", places_of_nodes_cover_their_words },
  { "a statement keeps its source", a_statement_keeps_its_source },
  { "a failed statement is told and passed", a_failed_statement_is_told_and_passed },
  { "blocks open and close", blocks_open_and_close },
  { "lists read their basis", lists_read_their_basis },
  { "figures carry what stands behind them", figures_carry_what_stands_behind_them },
  { "settings are read with their kinds", settings_are_read_with_their_kinds },
  { "names are told from words", names_are_told_from_words },
  { "damaged text is refused with its place", damaged_text_is_refused_with_its_place },
  { "nesting ends in a fault", nesting_ends_in_a_fault },
  { "long lines take time in proportion", long_lines_take_time_in_proportion },
  { "mangled lines never break it", mangled_lines_never_break_it },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
