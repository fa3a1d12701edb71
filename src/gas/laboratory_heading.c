#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "gas/air.h"
#include "gas/species.h"
#include "support/arena.h"
#include "support/number.h"
#include "support/text.h"
#include "units/dimension.h"
#include "units/unit.h"

/* ---- Slices ---- */

static bool
is_blank (char c)
{
  return c == ' ' || c == '\t' || c == '\r' || c == '\n';
}

struct slice
slice_trimmed (struct slice s)
{
  for (;;) {
    if (s.n > 0 && is_blank (s.at[0]))
      s = (struct slice) { s.at + 1, s.n - 1 };
    else if (s.n > 1 && memcmp (s.at, "\xC2\xA0", 2) == 0)              /* no-break space */
      s = (struct slice) { s.at + 2, s.n - 2 };
    else if (s.n > 0 && is_blank (s.at[s.n - 1]))
      s.n--;
    else if (s.n > 1 && memcmp (s.at + s.n - 2, "\xC2\xA0", 2) == 0)
      s.n -= 2;
    else
      return s;
  }
}

bool
slice_is (struct slice s, const char *text)
{
  return strlen (text) == s.n && memcmp (s.at, text, s.n) == 0;
}

enum { WORD_ROOM = 40 };

/* In small letters and without what only parts words; false if that is too long for any word.  */
static bool
squeeze (struct slice s, char out[WORD_ROOM])
{
  size_t n = 0;
  for (size_t i = 0; i < s.n; i++) {
    char c = s.at[i];
    if (is_blank (c) || c == '-' || c == '_' || c == '.' || c == ':')
      continue;
    if (n + 1 >= WORD_ROOM)
      return false;
    out[n++] = c >= 'A' && c <= 'Z' ? (char) (c - 'A' + 'a') : c;
  }
  out[n] = '\0';
  return true;
}

bool
slice_is_word (struct slice s, const char *const words[])
{
  char word[WORD_ROOM];
  if (!squeeze (s, word))
    return false;
  for (; *words != NULL; words++)
    if (strcmp (*words, word) == 0)
      return true;
  return false;
}

const char *
slice_text (struct arena *arena, struct slice s)
{
  return arena_copy (arena, s.at, s.n);
}

/* ---- Words that head columns and rows ---- */

/* As laboratories write them, squeezed; from memory, no source.  */
static const char *const names_words[] = {
  "component", "components", "componentname", "compound", "compounds", "species", "constituent",
  "analyte", "gas", "substance", "part", "parts", "komponente", "formula", "peakname", NULL
};
static const char *const sample_words[] = {
  "sample", "samples", "sampleid", "sampleno", "samplenumber", "samplename", "id", "no", "number",
  "run", "runno", "bottle", "cylinder", "samplepoint", "samplingpoint", "probe", NULL
};
static const char *const date_words[] = {
  "date", "time", "datetime", "dateandtime", "sampled", "sampledat", "sampledon", "timestamp",
  "datum", "uhrzeit", NULL
};
static const char *const total_words[] = {
  "total", "totals", "sum", "sumofparts", "grandtotal", "mean", "average", "min", "minimum",
  "max", "maximum", "median", "standarddeviation", "stddev", "summe", "\xCE\xA3", NULL
};
static const char *const amount_words[] = {
  "amount", "value", "result", "results", "concentration", "content", "fraction", "share",
  "composition", "figure", "reading", "measured", "conc", "gehalt", "wert", NULL
};
static const char *const unit_words[] = { "unit", "units", "basis", "einheit", NULL };
static const char *const other_words[] = {
  "operator", "analyst", "remark", "remarks", "comment", "comments", "note", "notes", "method",
  "instrument", "column", "detector", "laboratory", "lab", "plant", "site", "location", "place",
  "report", "reportno", "cas", "casno", "casnumber", "temperature", "pressure", "flow",
  "humidity", "density", "relativedensity", "molarmass", "wobbe", "wobbeindex",
  "grosscalorificvalue", "netcalorificvalue", "calorificvalue", "dewpoint", "retentiontime",
  "peakarea", "area", "area%", "areacounts", "height", "peakheight", "rt", "rettime", "retention",
  "rrt", "response", "responsefactor", "rf", "status", "peak", "peakno", "peaknumber", "#", "gpm",
  "approved", "checked", "checkedby", "signed", "signature",
  "bemerkung", "bearbeiter", "limit", "detectionlimit", "lod", "loq", NULL
};
/* Of two letters the case counts: u is standard, U expanded (JCGM 100:2008, 2.3.1 and 2.3.5).  */
static const char *const standard_words[] = {
  "unc", "uncertainty", "standarduncertainty", "stdunc", "stduncertainty", "\xC2\xB1", "+/",
  "unsicherheit", NULL
};
static const char *const expanded_words[] = {
  "expandeduncertainty", "expandedunc", "u95", NULL
};
static const char *const relative_words[] = {
  "urel", "relu", "u%", "\xC2\xB1%", "relativeuncertainty", "reluncertainty",
  "relativestandarduncertainty", NULL
};

static const struct { const char *const *words; enum heading_kind kind; } vocabulary[] = {
  { names_words, HEADING_NAMES }, { sample_words, HEADING_SAMPLE }, { date_words, HEADING_DATE },
  { total_words, HEADING_TOTAL }, { amount_words, HEADING_AMOUNT }, { unit_words, HEADING_UNIT },
  { other_words, HEADING_OTHER_WORD }
};

/* ---- Units ---- */

/* Other spellings of shares, squeezed; from memory, no source.  */
static const struct { const char *word, *unit; } shares[] = {
  { "mol%", "mol%" }, { "mole%", "mol%" }, { "%mol", "mol%" }, { "%mole", "mol%" },
  { "molpercent", "mol%" }, { "molepercent", "mol%" }, { "%(mol)", "mol%" },
  { "amount%", "mol%" }, { "%mol/mol", "mol%" }, { "%(mol/mol)", "mol%" },
  { "mol/mol%", "mol%" },
  { "vol%", "vol%" }, { "%vol", "vol%" }, { "volpercent", "vol%" }, { "volume%", "vol%" },
  { "%(v/v)", "vol%" }, { "%v/v", "vol%" }, { "v/v%", "vol%" },
  { "mass%", "mass%" }, { "%mass", "mass%" }, { "masspercent", "mass%" }, { "wt%", "mass%" },
  { "%wt", "mass%" }, { "weight%", "mass%" }, { "%weight", "mass%" }, { "gew%", "mass%" },
  { "%(m/m)", "mass%" }, { "%m/m", "mass%" }, { "m/m%", "mass%" }, { "%w/w", "mass%" },
  { "%(w/w)", "mass%" }, { "w/w%", "mass%" },
  { "ppm(v)", "ppm" }, { "ppm(mol)", "ppm" }, { "vpm", "ppm" }
};

const struct unit *
slice_unit (struct arena *arena, const struct laboratory_words *words, struct slice s,
            const char **text, bool *percent)
{
  char word[WORD_ROOM], closed[WORD_ROOM];
  size_t n = 0;
  const struct unit *unit = NULL;
  s = slice_trimmed (s);
  *percent = slice_is (s, "%");
  if (s.n == 0 || s.n >= WORD_ROOM || *percent || !squeeze (s, word))
    return NULL;
  for (size_t i = 0; i < s.n; i++)
    if (!is_blank (s.at[i]))
      closed[n++] = s.at[i];
  closed[n] = '\0';
  for (size_t i = 0; unit == NULL && i < sizeof shares / sizeof shares[0]; i++)
    if (strcmp (shares[i].word, word) == 0)
      unit = unit_find (words->units, shares[i].unit, strlen (shares[i].unit), NULL);
  if (unit == NULL)
    unit = unit_find (words->units, closed, n, NULL);
  if (unit == NULL || unit->sort != UNIT_SCALE || unit->ratio == RATIO_PLAIN
      || unit->ratio == RATIO_ENERGY)
    return NULL;
  struct dimension d = unit->dimension;
  if (unit->ratio == RATIO_NONE && !dimension_equal (d, DIMENSION_MASS)
      && !dimension_equal (d, DIMENSION_AMOUNT) && !dimension_equal (d, DIMENSION_DENSITY)
      && !dimension_equal (d, DIMENSION_MOLAR_DENSITY))
    return NULL;
  *text = arena_string (arena, unit->spelling);
  return unit;
}

/* ---- Names ---- */

bool
slice_is_component (const struct laboratory_words *words, struct slice s)
{
  const struct species *found;
  const char *candidates;
  struct part peak[AIR_PEAK_PARTS];
  if (s.n == 0 || slice_is (s, "U"))
    return false;
  enum species_match match = species_find (words->species, s.at, s.n, &found, &candidates);
  return match == SPECIES_KEY || match == SPECIES_SYNONYM || match == SPECIES_AMBIGUOUS
         || air_is_name (s.at, s.n) || air_peak (words->species, s.at, s.n, peak) > 0;
}

static bool
is_formula (const struct laboratory_words *words, struct slice s)
{
  const struct species *found;
  const char *candidates;
  return s.n > 0 && species_find (words->species, s.at, s.n, &found, &candidates)
                      == SPECIES_PLAIN_FORMULA;
}

static bool
is_users (const struct laboratory_words *words, struct slice s)
{
  return s.n > 0 && words->knows != NULL && words->knows (words->with, s.at, s.n);
}

/* ---- One heading ---- */

/* "k=2", "k = 2".  */
static bool
read_k (struct slice s, double *k)
{
  bool too_large;
  s = slice_trimmed (s);
  if (s.n < 3 || s.at[0] != 'k')
    return false;
  s = slice_trimmed ((struct slice) { s.at + 1, s.n - 1 });
  if (s.n < 2 || s.at[0] != '=')
    return false;
  s = slice_trimmed ((struct slice) { s.at + 1, s.n - 1 });
  return number_read (s.at, s.n, k, &too_large) && *k > 0;
}

/* A word that only says more of what stands before it: dry, wet, k=2, rel.  */
static bool
take_flag (struct slice s, struct heading *h)
{
  static const char *const dry[] = { "dry", "trocken", NULL };
  static const char *const wet[] = { "wet", "feucht", "asreceived", NULL };
  static const char *const relative[] = { "rel", "relative", NULL };
  if (slice_is_word (s, dry))
    h->moisture = LABORATORY_DRY;
  else if (slice_is_word (s, wet))
    h->moisture = LABORATORY_WET;
  else if (slice_is_word (s, relative))
    h->relative = true;
  else
    return read_k (s, &h->k);
  return true;
}

static bool
is_break (char c)
{
  return is_blank (c) || c == ',' || c == ';' || c == '/' || c == '_' || c == '(' || c == '['
         || c == ')' || c == ']';
}

/* Two units contradict each other, and so do a bare per cent and a unit that is none.  */
static bool
contradicts (const struct heading *h, const struct unit *unit, bool percent)
{
  const struct unit *of_share = unit != NULL ? unit : h->unit;
  if (h->unit != NULL && unit != NULL)
    return h->unit != unit;
  return (h->percent || percent) && of_share != NULL && strchr (of_share->spelling, '%') == NULL;
}

/* All of S as one unit or one flag.  */
static bool
take_one (struct arena *arena, const struct laboratory_words *words, struct slice s,
          struct heading *h)
{
  bool percent;
  const char *text = NULL;
  if (take_flag (s, h))
    return true;
  const struct unit *unit = slice_unit (arena, words, s, &text, &percent);
  if ((unit == NULL && !percent) || contradicts (h, unit, percent))
    return false;
  h->unit = unit != NULL ? unit : h->unit;
  h->unit_text = unit != NULL ? text : h->unit_text;
  h->percent = h->unit == NULL;
  return true;
}

/* All of S as units and flags, in any order: "mol% dry", "%, k=2".  */
static bool
take_words (struct arena *arena, const struct laboratory_words *words, struct slice s,
            struct heading *h)
{
  while (s.n > 0 && is_break (s.at[0]) && s.at[0] != '/')
    s = (struct slice) { s.at + 1, s.n - 1 };
  while (s.n > 0 && is_break (s.at[s.n - 1]) && s.at[s.n - 1] != ')')
    s.n--;
  if (s.n == 0 || take_one (arena, words, s, h))
    return true;
  if (s.n >= WORD_ROOM)
    return false;
  if (s.at[s.n - 1] == ')')
    return take_words (arena, words, (struct slice) { s.at, s.n - 1 }, h);
  for (size_t i = 1; i < s.n; i++) {
    struct heading tried = *h;
    if (is_break (s.at[i]) && s.at[i] != '/'
        && take_one (arena, words, (struct slice) { s.at, i }, &tried)
        && take_words (arena, words, (struct slice) { s.at + i, s.n - i }, &tried)) {
      *h = tried;
      return true;
    }
  }
  return false;
}

/* A heading that is a word by itself.  */
static bool
read_word (const struct laboratory_words *words, struct slice s, struct heading *h)
{
  h->name = s;
  if (slice_is_component (words, s)) {
    h->kind = HEADING_PART;
    return true;
  }
  bool standard = slice_is (s, "u") || slice_is_word (s, standard_words);
  bool relative = slice_is_word (s, relative_words);
  bool expanded = slice_is (s, "U") || slice_is_word (s, expanded_words)
                  || (relative && s.at[0] == 'U');
  if (standard || relative || expanded) {
    h->kind = HEADING_SPREAD;
    h->name = (struct slice) { NULL, 0 };
    h->expanded = expanded;
    h->relative = h->relative || relative;
    return true;
  }
  for (size_t i = 0; i < sizeof vocabulary / sizeof vocabulary[0]; i++)
    if (slice_is_word (s, vocabulary[i].words)) {
      h->kind = vocabulary[i].kind;
      return true;
    }
  if (is_users (words, s) || is_formula (words, s)) {
    h->kind = HEADING_PART;
    return true;
  }
  h->kind = HEADING_UNKNOWN;
  return false;
}

/* "u CH4", "U(CH4)": LEFT says that these are uncertainties, RIGHT of what; or the other way.  */
static bool
read_spread_of (const struct laboratory_words *words, struct slice left, struct slice right,
                struct heading *h)
{
  struct heading a = *h, b = *h;
  while (right.n > 0 && (right.at[right.n - 1] == ')' || right.at[right.n - 1] == ']'))
    right.n--;
  right = slice_trimmed (right);
  if (!read_word (words, left, &a) || !read_word (words, right, &b))
    return false;
  if (a.kind == HEADING_SPREAD && b.kind == HEADING_PART)
    a.name = b.name;
  else if (a.kind == HEADING_PART && b.kind == HEADING_SPREAD)
    b.name = a.name;
  else
    return false;
  *h = a.kind == HEADING_SPREAD ? a : b;
  return true;
}

enum { HEADING_DEEPEST = 4 };

static bool
read_pieces (struct arena *arena, const struct laboratory_words *words, struct slice s,
             struct heading *h, int depth)
{
  s = slice_trimmed (s);
  if (read_word (words, s, h))
    return true;
  if (take_words (arena, words, s, h)) {
    h->kind = HEADING_AMOUNT;
    h->name = s;
    return true;
  }
  for (size_t i = 1; depth > 0 && i + 1 < s.n; i++) {
    struct slice left = slice_trimmed ((struct slice) { s.at, i });
    struct slice right = { s.at + i + (s.at[i] != '(' && s.at[i] != '['), 0 };
    right.n = s.n - (size_t) (right.at - s.at);
    if (!is_break (s.at[i]))
      continue;
    struct heading tried = *h;
    if (take_words (arena, words, right, &tried)
        && read_pieces (arena, words, left, &tried, depth - 1)) {
      *h = tried;
      return true;
    }
    right = slice_trimmed ((struct slice) { s.at + i + 1, s.n - i - 1 });
    if (read_spread_of (words, left, right, h))
      return true;
  }
  h->name = s;
  return false;
}

/* A heading of no known name may still say its unit: "S-101 [mol%]"; one of a known word may have
   a unit that is no amount's: "temperature [degC]".                                             */
static void
read_unknown (struct arena *arena, const struct laboratory_words *words, struct slice s,
              struct heading *h)
{
  h->kind = HEADING_UNKNOWN;
  h->name = s;
  for (size_t i = 1; i < s.n; i++) {
    struct heading tried = *h, word = *h;
    bool bracket = s.at[i] == '(' || s.at[i] == '[';
    if (bracket && read_word (words, slice_trimmed ((struct slice) { s.at, i }), &word)
        && (word.kind == HEADING_OTHER_WORD || word.kind == HEADING_DATE
            || word.kind == HEADING_TOTAL)) {
      *h = word;
      return;
    }
    if ((bracket || is_blank (s.at[i]))
        && take_words (arena, words, (struct slice) { s.at + i, s.n - i }, &tried)) {
      *h = tried;
      h->name = slice_trimmed ((struct slice) { s.at, i });
      return;
    }
  }
}

/* A column of something else, headed by its unit: Btu/scf, kJ/mol.  One letter may name a sample,
   so that only what has a stroke counts.                                                        */
static bool
is_unit_of_another (const struct laboratory_words *words, struct slice s)
{
  return memchr (s.at, '/', s.n) != NULL && unit_find (words->units, s.at, s.n, NULL) != NULL;
}

struct heading
heading_read (struct arena *arena, const struct laboratory_words *words, struct slice text)
{
  struct heading h = { .kind = HEADING_EMPTY };
  struct slice s = slice_trimmed (text);
  if (s.n == 0)
    return h;
  if (s.n > 1 && s.at[s.n - 1] == ':')
    s.n--;
  if (read_pieces (arena, words, s, &h, HEADING_DEEPEST))
    return h;
  h = (struct heading) { .kind = HEADING_UNKNOWN };
  read_unknown (arena, words, s, &h);
  if (h.kind == HEADING_UNKNOWN && is_unit_of_another (words, s))
    h.kind = HEADING_OTHER_WORD;
  return h;
}
