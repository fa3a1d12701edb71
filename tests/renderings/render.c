/* Prints one hand-made result or fault in one form, for renderings.sh to hold against golden/.

     render CASE FORM        FORM is text, prompt, weights, json or csv
     render -l               lists CASE and FORM of all

   text is what goes to a file or a pipe without UTF-8; prompt adds what a terminal gets that can
   show it; weights is prompt with bold, dim and reverse.                                        */
#include "config.h"

#include <locale.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "report/report.h"
#include "result/check_verdict.h"
#include "result/result.h"
#include "result/trend.h"
#include "result/workings_record.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"
#include "units/workings.h"

struct scene {
  const char *name;
  const char *forms;                    /* those that have a golden file */
  void (*build) (struct result *);      /* one of the two */
  void (*fail) (struct fault *, struct report_origin *);
};

/* Answers.  */

static void
add_answer (struct result *result, const char *what, double value, const char *unit,
            const char *moisture, const char *basis)
{
  struct answer *answer = result_answer (result);
  answer->what = what;
  answer->value = value;
  answer->unit = unit;
  answer->moisture = moisture;
  answer->basis = basis;
}

/* The answer of the look's own sketch.  */
static void
build_answer (struct result *result)
{
  result->statement = "2150 acfm of air at 95 degF, 14.2 psia, 60 %RH in Nm3/h dry, kg/h";
  add_answer (result, "air", 3020.77, "Nm3/h", "dry",
              "0 degC, 101.325 kPa, ideal-gas volume");
  add_answer (result, "air", 3990.51, "kg/h", "wet", "water 3.44969 mol%");
  result_remark (result, MESSAGE_TAKEN_VAPOUR_PRESSURE, "5.62906 kPa", "liquid");
  struct remark *taken = result_remark (result, MESSAGE_TAKEN_REFERENCE, "Nm3",
                                        "0 degC, 101.325 kPa");
  taken->alternative = "at 15 degC";
  taken->effect = 0.0549;
  result_sort_taken (result);
}

/* Uncertainties of several sizes, labels, a plain number, an exponent.  */
static void
build_uncertain (struct result *result)
{
  static const struct { double value, uncertainty; const char *unit, *label; } rows[] = {
    { 1040.98, 2.29, "kg/h", "m" }, { 0.0123456, 0.000996, "kg/s", NULL },
    { 88750.0, 1234.0, "mol/h", "n" }, { 0.04, 2.31, "kg/h", NULL },
    { 1.2345678e-7, 2.5e-9, "m3", NULL }, { 3.0, 0.0, "", NULL }, { -12.5, 0.31, "degC", "t" }
  };
  result->statement = "many in kg/h as m";
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    add_answer (result, "feed", rows[i].value, rows[i].unit, i % 2 == 0 ? "dry" : NULL,
                i == 4 ? "ideal-gas volume" : NULL);
    result->last_answer = &result->answers;
    while ((*result->last_answer)->next != NULL)
      result->last_answer = &(*result->last_answer)->next;
    (*result->last_answer)->label = rows[i].label;
    (*result->last_answer)->uncertainty = rows[i].uncertainty;
    result->last_answer = &(*result->last_answer)->next;
  }
}

/* A trend with an outlier, a straggler and a sample without a figure; uncertainties times two.  */
static void
build_trend (struct result *result)
{
  static const struct trend_row rows[] = {
    { .name = "D-101", .value = 22.861, .uncertainty = 0.046, .apart = 0.694 },
    { .name = "Mon \xC2\xB5", .value = 23.0, .uncertainty = (double) NAN, .apart = 0.919 },
    { .name = "D-104", .value = 20.689, .uncertainty = 0.044, .standing = TREND_OUTLIER,
      .apart = -3.24 },
    { .name = "D-105", .value = (double) NAN, .uncertainty = (double) NAN, .apart = (double) NAN,
      .why = "'lab' is open: its parts add up to 99.1 mol%" },
    { .name = "D-106", .value = 22.0, .uncertainty = 0.05, .standing = TREND_STRAGGLER,
      .apart = -0.694,
      .basis = "water 3 mol%" }
  };
  static const struct trend trend = {
    .what = "wobbe of lab", .over = "5 samples of week.csv", .unit = "MJ/m3", .moisture = "dry",
    .coverage = 2, .count = 5, .outliers = 1, .rows = rows,
    .all = { 4, 22.1375, 22.4305, 1.0682, 20.689, 23.0, "D-104", "Mon \xC2\xB5", 0.62 },
    .without = { 3, 22.62, 22.861, 0.5416, 22.0, 23.0, "D-106", "Mon \xC2\xB5",
                 (double) NAN },
    .tested = true, .G = 1.145, .straggler = 1.1543, .outlier = 1.1547, .tested_of = "D-106",
    .limit = 3, .beyond = 1, .farthest = -3.24, .farthest_of = "D-104"
  };
  result->statement = "trend wobbe of lab in MJ/m3";
  result->trend = &trend;
}

/* One row a component: each says of what it is.  */
static void
build_composition (struct result *result)
{
  result->statement = "raw in mass%";
  add_answer (result, "CH4 of raw", 34.0117, "mass%", "dry", NULL);
  add_answer (result, "CO2 of raw", 63.9879, "mass%", "dry", NULL);
  add_answer (result, "N2 of raw", 1.42864, "mass%", "dry", NULL);
  add_answer (result, "O2 of raw", 0.466233, "mass%", "dry", NULL);
  add_answer (result, "H2S of raw", 0.105509, "mass%", "dry", NULL);
  result_remark (result, MESSAGE_NOTE_SCALED, "raw", "1.0002")->fact[2] = "0.9998";
}

/* Effects of all sizes; a sentence longer than the column of the brackets.  */
static void
build_effects (struct result *result)
{
  static const double effects[] = { 1.7, -0.123, 0.0146, -2.4e-4, 4.2e-6, 3e-7, 0.0 };
  static const char *const units[] = { "MMscfd", "Sm3", "scf", "sccm", "slpm", "NL", "Nm3" };
  result->statement = "feed in kg/h";
  add_answer (result, "feed", 1200.0, "kg/h", NULL, NULL);
  for (size_t i = 0; i < sizeof effects / sizeof effects[0]; i++) {
    struct remark *taken = result_remark (result, MESSAGE_TAKEN_REFERENCE, units[i],
                                          i == 1 ? "15 degC, 101.325 kPa, as the works has it"
                                                 : "60 degF, 14.696 psia");
    taken->alternative = "at 68 degF";
    taken->effect = effects[i];
  }
}

static void
build_note_only (struct result *result)
{
  result->statement = "let CH = 3 kg/h";
  result_remark (result, MESSAGE_NOTE_HIDES, "propane", "C3H8");
}

/* What a file or a name may hold.  */
static void
build_hostile (struct result *result)
{
  result->statement = "\"a\033[2Jb\\\" in kg/h \xff\t\x01";
  add_answer (result, "\"a\033[2Jb\" of x\xe2\x80\xae" "y", 1.0, "\xc2\xb5g/m\xc2\xb3", "wet",
              "G\xc3\xa4rgas, 5 \xc2\xb0" "C\x7f \xc3");
  add_answer (result, "\xe7\x85\xa4\xe6\xb0\x94", 12.25, "kg/h", NULL, "a, \"b\"\nc");
  result_remark (result, MESSAGE_NOTE_MOVED, "\"\\\n\x9b \xc0\xaf \xed\xa0\x80 \xf0\x9f\x94\xa5",
                 NULL);
}

/* Cards and help.  */

static void
add_part (struct result *result, struct card *card, const char *name, const double values[3],
          const char *stated)
{
  struct cell *cells = card_add_row (result, card, name);
  for (size_t i = 0; i < 3; i++)
    cells[i] = (struct cell) { .value = values[i], .is_number = true };
  cells[3].text = stated;
}

/* Stated figures.  */

static void
build_check (struct result *result)
{
  static struct check_reading none = { "9.92 m3 at 0 degC, 101.325 kPa", 8.98078, "m3",
                                       9.92 / 8.98078 - 1, 1, NULL };
  static struct check_reading second = { "9.92 m3 at 20 degC, 100 kPa, 65 %RH", 9.91684, "m3",
                                         9.92 / 9.91684 - 1, 2, NULL };
  static struct check_reading first = { "9.92 m3 at 15 degC; compressibility was left out",
                                        9.91923, "m3", 9.92 / 9.91923 - 1, 2, &second };
  static const struct check_verdict verdict = {
    .stated = "9.92 m3", .outcome = CHECK_READINGS, .value = 9.92, .computed = 9.47396,
    .difference = 0.44604, .deviation = 0.44604 / 9.47396, .limit = 0.005, .by_digits = true,
    .unit = "m3", .reading_count = 2, .tied = 2, .readings = &first, .ruled_out = &none };
  result->statement = "check cylinder in m3 against 9.92 m3";
  add_answer (result, "cylinder", 9.47396, "m3", "dry", "15 degC, 101.325 kPa, ideal-gas volume");
  result->answers->uncertainty = 0.0123;
  result_remark (result, MESSAGE_CAUTION_CUSTODY, NULL, NULL);
  result->check = &verdict;
}

/* A figure that holds, which seven other readings would explain as well.  */
static void
build_holds (struct result *result)
{
  enum { READINGS = 7 };
  static const char *const said[READINGS] = {
    "Nm3 at 273 K, 101325 Pa", "Nm3 at 0 degC, 101.3 kPa", "the real gas", "counted dry",
    "the fifth, long enough to be set on two lines: reference volumes of the real gas in it",
    "the sixth", "the seventh"
  };
  static struct check_reading reading[READINGS];
  static struct check_verdict verdict = {
    .stated = "169 kg/h", .outcome = CHECK_HOLDS, .value = 169, .computed = 168.858,
    .difference = 0.142, .deviation = 0.142 / 168.858, .limit = 0.5, .by_digits = true,
    .unit = "kg/h", .reading_count = READINGS, .tied = 1, .readings = reading };
  for (size_t i = 0; i < READINGS; i++)
    reading[i] = (struct check_reading) { said[i], 168.9 + 0.01 * (double) i, "kg/h",
                                          169 / (168.9 + 0.01 * (double) i) - 1, (int) i + 1,
                                          i + 1 < READINGS ? &reading[i + 1] : NULL };
  result->statement = "check 86 Nm3/h of CO2 against 169 kg/h";
  add_answer (result, "CO2", 168.858, "kg/h", "dry", NULL);
  result->check = &verdict;
}

/* Nothing fits, and one quantity cannot be had; a temperature has no per cent.  */
static void
build_unexplained (struct result *result)
{
  static struct check_need moist = { "humidity", (double) NAN, "%RH", NULL, 0.01, 100, NULL };
  static struct check_need warm = { "temperature", 105.661, "degC", NULL, -100, 1000, &moist };
  static const struct check_verdict verdict = {
    .stated = "79 degF ± 1", .outcome = CHECK_UNEXPLAINED, .value = 79, .computed = 70,
    .difference = 9, .deviation = (double) NAN, .limit = 2, .unit = "degF", .needs = &warm };
  result->statement = "check t against 79 degF ± 1";
  add_answer (result, "t", 70, "degF", NULL, NULL);
  result->check = &verdict;
}

static void
build_sheet (struct result *result)
{
  static struct check_figure mass = { NULL, "2200 kg/h", 2200, 2077.86, 2200 / 2077.86 - 1,
                                      "kg/h", false, false, NULL };
  static struct check_figure duty = { "duty", "1000 scfm", 1000, 1000.03, 1000 / 1000.03 - 1,
                                      "scfm", true, true, &mass };
  static struct check_figure inlet = { "inlet \033[1m", "1057 ft3/min at 32 degC", 1057, 1056.96,
                                       1057 / 1056.96 - 1, "ft3/min", true, false, &duty };
  static struct check_reading altitude = { "altitude was left out", 2, "figures", (double) NAN, 1,
                                           NULL };
  static const struct check_verdict verdict = {
    .stated = "offer", .outcome = CHECK_READINGS, .unit = "", .reading_count = 1, .tied = 1,
    .readings = &altitude, .figures = &inlet, .figure_count = 3, .agreeing = 2 };
  result->statement = "check offer";
  result->check = &verdict;
}

static void
build_gas_card (struct result *result)
{
  static const char *const headings[] = { "mol%", "mass%", "g/Nm3", "stated as" };
  result->statement = "show raw";
  struct card *card = result_card (result, "raw", "gas, dry, 5 parts", 4, headings);
  add_part (result, card, "CH4", (const double[]) { 58.2, 34.0117, 416.572 }, "58.2");
  add_part (result, card, "CO2", (const double[]) { 39.915, 63.9879, 783.716 }, "rest");
  add_part (result, card, "N2", (const double[]) { 1.4, 1.42864, 17.4978 }, "1.4");
  add_part (result, card, "O2", (const double[]) { 0.4, 0.466233, 5.71037 }, "0.4");
  add_part (result, card, "H2S", (const double[]) { 0.085, 0.105509, 1.29226 }, "850 ppm");
  card_add_line (result, card, "molar mass 27.4524 g/mol  .  relative density 0.947758, "
                               "ideal");
  card_add_line (result, card, "gross 21.9641 MJ/m3  .  net 19.7752  .  wobbe "
                               "22.5613  15/15 degC, ideal");
  struct remark *caution = result_remark (result, MESSAGE_CAUTION_TOXIC, "H2S", "170");
  caution->fact[2] = "5 ppm";
  caution->fact[3] = "2009/161/EU";
}

/* A stream: rows with long names, text among figures, a blank cell, a figure nobody has.  */
static void
build_stream_card (struct result *result)
{
  static const char *const headings[] = { "flow", "", "of" };
  static const struct { const char *name, *text; double value; const char *unit, *of; } rows[] = {
    { "mass flow", NULL, 1040.98, "kg/h", "wet" },
    { "molar flow", NULL, 37.9208, "kmol/h", NULL },
    { "reference volume flow", "850", 0.0, "Nm3/h", "stated" },
    { "energy flow", "not known", 0.0, "MW gross", NULL }
  };
  result->statement = "show feed";
  struct card *card = result_card (result, "feed", "stream of raw, wet", 3, headings);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    struct cell *cells = card_add_row (result, card, rows[i].name);
    cells[0] = (struct cell) { .text = rows[i].text, .value = rows[i].value, .is_number = true };
    cells[1].text = rows[i].unit;
    cells[2].text = rows[i].of;
  }
  struct card *names = result_card (result, "names", "2 defined", 0, NULL);
  card_add_row (result, names, "raw");
  card_add_row (result, names, "feed");
}

static void
build_help (struct result *result)
{
  result->statement = "help gas";
  struct help_page *page = result_help (result, "gas");
  help_add (result, page, "gas NAME = NAME AMOUNT, ... UNIT",
            "Defines a gas by its parts; 'rest' takes what the others leave.",
            "gas raw = CH4 58.2, CO2 39.9, N2 rest mol% dry");
  help_add (result, page, NULL, "See also: stream, normalise, show.", "");
}

/* Faults.  */

static void
fail_at (struct fault *fault, enum message kind, int first, int last, const char *fact1,
         const char *fact2)
{
  fault_set_at (fault, kind, (struct place) { 4, first, last }, fact1, fact2);
}

/* The mistake of the look's own sketch, at the prompt.  */
static void
fail_unit (struct fault *fault, struct report_origin *origin)
{
  origin->line = origin->statement = "1200 Nm3/hr of raw in kg/h";
  origin->column_shift = 6;
  fail_at (fault, MESSAGE_UNIT_UNKNOWN, 6, 11, "Nm3/hr", "did you mean 'Nm3/h'?");
  fault_hint (fault, "1200 Nm3/h of raw in kg/h");
}

static void
fail_unit_in_file (struct fault *fault, struct report_origin *origin)
{
  fail_unit (fault, origin);
  origin->file = "morning.gw";
  origin->quote = true;
}

/* Wrapped or pasted: the line comes again.  */
static void
fail_quoted (struct fault *fault, struct report_origin *origin)
{
  origin->line = origin->statement = "feed in";
  origin->quote = true;
  fail_at (fault, MESSAGE_UNFINISHED, 8, 8, "in which unit?", NULL);
}

/* A tab and wide characters before the place, a control character in the line.  */
static void
fail_wide (struct fault *fault, struct report_origin *origin)
{
  origin->file = "plant\033.gw";
  origin->line = origin->statement = "\"\xe7\x85\xa4\xe6\xb0\x94\"\t\x1b e\xcc\x81 in kg/hr";
  origin->quote = true;
  fail_at (fault, MESSAGE_UNIT_UNKNOWN, 14, 18, "kg/hr", "did you mean 'kg/h'?");
}

/* A long line is quoted in part.  */
static void
fail_long (struct fault *fault, struct report_origin *origin)
{
  static char line[400];
  memset (line, '+', sizeof line - 1);
  memcpy (line + 250, " kg/hr ", 7);
  origin->file = "long.gw";
  origin->line = origin->statement = line;
  origin->quote = true;
  fail_at (fault, MESSAGE_UNIT_UNKNOWN, 252, 256, "kg/hr", "did you mean 'kg/h'?");
}

/* A way on that is a line of its own, by the way it opens; and one too long for the line.  */
static void
fail_line (struct fault *fault, struct report_origin *origin)
{
  origin->line = origin->statement = "850 Nm3/h of raw in m3/h";
  origin->column_shift = 6;
  fail_at (fault, MESSAGE_STATE_MISSING, 21, 24, "m3/h of a gas",
           "850 Nm3/h of raw in m3/h at 38 degC, 25 mbar(g)");
}

static void
fail_phrase (struct fault *fault, struct report_origin *origin)
{
  origin->line = origin->statement = "1,250 kg/h of N2";
  origin->column_shift = 6;
  fail_at (fault, MESSAGE_NUMBER_COMMA, 1, 5, NULL, NULL);
}

/* Several ways on, a line each.  */
static void
fail_ways (struct fault *fault, struct report_origin *origin)
{
  origin->line = origin->statement = "density of lab at 20 degC, 1 bar(a)";
  origin->column_shift = 6;
  fail_at (fault, MESSAGE_GAS_OPEN, 12, 14, "lab", "0.93");
  fault_facts (fault, "gas a = lab normalised\ngas b = lab normalised into N2", NULL);
}

/* No place, no line.  */
static void
fail_nowhere (struct fault *fault, struct report_origin *origin)
{
  origin->file = "gone.gw";
  fault_set (fault, MESSAGE_FILE, "gone.gw", "there is no such file");
}

/* Every sort of step: a plain one, a sum, one for each part, one that is solved, one that was
   given; and what an uncertainty is made of.                                                    */
static void
build_workings (struct result *result)
{
  static const double x[] = { 0.6, 0.4 }, M[] = { 0.016043, 0.044009 }, half[] = { 0.3, 0.2 };
  static const char *const parts[] = { "CH4", "CO2" };
  static const struct step_column shares[] = { { "x_i", x, "mol/mol", NULL, NULL },
                                               { "M_i", M, "kg/mol", "CIAAW 2021", NULL } };
  static const struct step_column halves[] = { { "y_i", half, "mol", NULL, NULL },
                                               { "x_i", x, "mol/mol", NULL, NULL } };
  static const struct step_symbol gas_law[] = {
    { "R", 8.31446261815324, "J/(mol K)", "SI Brochure, 9th ed. (2019)", NULL },
    { "T", 273.15, "K", NULL, NULL }, { "p", 101325, "Pa", NULL, NULL } };
  static const struct step_symbol n[] = { { "n", -0.5, "mol", NULL, NULL } };
  static struct step steps[] = {
    { .name = "volume of a mole,", .of = "Nm3", .formula = "V = R T/p",
      .value = 0.022413969545014137, .unit = "m3/mol", .source = "ideal gas law, p V = n R T",
      .symbols = gas_law, .symbol_count = 3 },
    { .name = "molar mass of", .of = "raw", .formula = "M = sum(x_i M_i)", .value = 0.0272294,
      .unit = "kg/mol", .source = "by definition", .terms = parts, .term_count = 2,
      .columns = shares, .column_count = 2 },
    { .name = "half of it", .formula = "y_i = -n x_i (1 + 0)", .value = (double) NAN,
      .unit = "mol", .source = "by definition", .symbols = n, .symbol_count = 1, .terms = parts,
      .term_count = 2, .columns = halves, .column_count = 2 },
    { .name = "dew point", .formula = "psat(T) = p", .solved = "Newton's steps, 4",
      .value = 285.15, .unit = "K", .source = "IAPWS SR1-86(1992), eq. 1",
      .symbols = &gas_law[2], .symbol_count = 1 },
    { .name = "site pressure", .formula = "", .value = 98700, .unit = "Pa", .source = "as set" },
    { .kind = STEP_ANSWER, .name = "raw", .of = "kg/h", .formula = "a = q", .value = 1041,
      .unit = "kg/h", .source = "by definition" }
  };
  static const struct budget_line lines[] = {
    { .what = "CH4 58.2 \u00B1 0.3 mol%", .of = "raw", .u = 0.3, .unit = "mol%",
      .sensitivity = -10, .contribution = -3, .share = 0.9 },
    { .what = "850 \u00B1 1 Nm3/h", .u = 1, .unit = "Nm3/h", .sensitivity = 1, .contribution = 1,
      .share = 0.1 } };
  static const struct budget budget = { 3.1622776601683795, 2, lines };
  static const struct answer answer = { .what = "raw", .value = 1041, .unit = "kg/h",
                                        .uncertainty = 3.1622776601683795, .budget = &budget };
  static const struct workings_source source = { "CIAAW 2021", "T. Prohaska et al. (2022)", NULL };
  static const struct workings_record record = { "850 Nm3/h of raw in kg/h", steps, 6, &answer, 1,
                                                 &source };
  for (size_t i = 0; i + 1 < sizeof steps / sizeof steps[0]; i++)
    steps[i].next = &steps[i + 1];
  result->statement = "workings";
  result->workings = &record;
}

static const struct scene scenes[] = {
  { "answer", "text prompt weights json csv", build_answer, NULL },
  { "uncertain", "text prompt json csv", build_uncertain, NULL },
  { "composition", "text json csv", build_composition, NULL },
  { "effects", "text json", build_effects, NULL },
  { "note-only", "text prompt json csv", build_note_only, NULL },
  { "hostile", "text prompt json csv", build_hostile, NULL },
  { "gas-card", "text prompt weights json csv", build_gas_card, NULL },
  { "stream-card", "text json csv", build_stream_card, NULL },
  { "check", "text prompt weights json csv", build_check, NULL },
  { "check-holds", "text json", build_holds, NULL },
  { "check-unexplained", "text prompt json csv", build_unexplained, NULL },
  { "check-sheet", "text prompt json csv", build_sheet, NULL },
  { "help-page", "text prompt json csv", build_help, NULL },
  { "trend", "text prompt json csv", build_trend, NULL },
  { "unit", "prompt json", NULL, fail_unit },
  { "unit-in-file", "text json", NULL, fail_unit_in_file },
  { "quoted", "prompt json", NULL, fail_quoted },
  { "wide", "prompt text json", NULL, fail_wide },
  { "long", "text", NULL, fail_long },
  { "line", "prompt json", NULL, fail_line },
  { "phrase", "prompt json", NULL, fail_phrase },
  { "ways", "prompt json", NULL, fail_ways },
  { "nowhere", "text json", NULL, fail_nowhere },
  { "workings", "text weights json csv", build_workings, NULL }
};

enum { SCENES = sizeof scenes / sizeof scenes[0] };

static void
list (void)
{
  for (size_t i = 0; i < SCENES; i++)
    for (const char *form = scenes[i].forms; *form != '\0';) {
      const size_t n = strcspn (form, " ");
      printf ("%s %.*s\n", scenes[i].name, (int) n, form);
      form += n + strspn (form + n, " ");
    }
}

static void
render (const struct scene *scene, const char *form, struct text *out)
{
  const bool prompt = strcmp (form, "prompt") == 0, weights = strcmp (form, "weights") == 0;
  const enum report_format format = strcmp (form, "json") == 0  ? REPORT_JSON
                                    : strcmp (form, "csv") == 0 ? REPORT_CSV
                                                                : REPORT_TEXT;
  const struct report_style style = { .digits = 6, .unicode = prompt || weights,
                                      .weights = weights, .prompt = prompt || weights };
  struct arena *arena = arena_create ();
  if (scene->build != NULL) {
    struct result result;
    result_init (&result, arena, "");
    scene->build (&result);
    report_result (out, format, &style, &result, true);
  } else {
    struct fault fault;
    struct report_origin origin = { 0 };
    fault_init (&fault, arena);
    scene->fail (&fault, &origin);
    report_fault (out, format, &style, &fault, &origin);
  }
  arena_destroy (arena);
}

int
main (int argc, char *argv[])
{
  setlocale (LC_ALL, "");               /* harsher than the program: nothing may depend on it */
  if (argc == 2 && strcmp (argv[1], "-l") == 0) {
    list ();
    return 0;
  }
  for (size_t i = 0; argc == 3 && i < SCENES; i++)
    if (strcmp (argv[1], scenes[i].name) == 0) {
      struct text out;
      text_init (&out);
      render (&scenes[i], argv[2], &out);
      fwrite (out.bytes, 1, out.length, stdout);
      text_clear (&out);
      return 0;
    }
  fprintf (stderr, "render: no such case\n");
  return 2;
}
