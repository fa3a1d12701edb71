#include "config.h"
#include "shell/options.h"

#include <getopt.h>
#include <string.h>

/* Numbers that no letter has.  */
enum option_name {
  OPTION_BEFORE_FIRST = 255,
#define OPTION(name, letter, word, takes, does) OPTION_##name,
#include "shell/options.def"
#undef OPTION
};

struct option_row { char letter; const char *word, *takes, *does; };

static const struct option_row rows[] = {
#define OPTION(name, letter, word, takes, does) { letter, word, takes, does },
#include "shell/options.def"
#undef OPTION
};

enum { ROWS = sizeof rows / sizeof rows[0], HELP_COLUMN = 28 };

static bool
read_format (struct options *options, const char *word)
{
  static const char *const words[REPORT_FORMATS] = {
    [REPORT_TEXT] = "text", [REPORT_JSON] = "json", [REPORT_CSV] = "csv"
  };

  for (size_t i = 0; i < REPORT_FORMATS; i++) {
    if (strcmp (word, words[i]) == 0) {
      options->format = (enum report_format) i;
      return true;
    }
  }
  return false;
}

static bool
read_colour (struct options *options, const char *word)
{
  static const char *const words[] = {
    [COLOUR_AUTO] = "auto", [COLOUR_ALWAYS] = "always", [COLOUR_NEVER] = "never"
  };

  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++) {
    if (strcmp (word, words[i]) == 0) {
      options->colour = (enum option_colour) i;
      return true;
    }
  }
  return false;
}

static bool
add_statement (struct options *options, const char *statement)
{
  options->has_statements = true;
  text_add (&options->statements, statement);
  text_add_char (&options->statements, '\n');
  return true;
}

/* False if VALUE is none the option knows.  */
static bool
take_option (struct options *options, enum option_name name, const char *value)
{
  switch (name) {
    case OPTION_EVALUATE:
      return add_statement (options, value);
    case OPTION_ROWS:
      options->rows = value;
      return *value != '\0';
    case OPTION_FORMAT:
      return read_format (options, value);
    case OPTION_KEEP_GOING:
      options->keep_going = true;
      return true;
    case OPTION_TABLES:
      options->tables = value;
      return *value != '\0';
    case OPTION_COLOR:
      return read_colour (options, value);
    case OPTION_OUTPUT:
      options->output = value;
      return *value != '\0';
    case OPTION_NO_INIT:
      options->no_init = true;
      return true;
    case OPTION_HELP:
      options->help = true;
      return true;
    case OPTION_VERSION:
      options->version = true;
      return true;
    case OPTION_BEFORE_FIRST:
      break;
  }
  return false;
}

/* The row of what getopt_long gave: an option's letter or its number.  */
static const struct option_row *
find_row (int sign)
{
  for (int i = 0; i < ROWS; i++) {
    if (sign != 0 && (rows[i].letter == sign || sign == OPTION_BEFORE_FIRST + 1 + i))
      return &rows[i];
  }
  return NULL;
}

/* What was wrong with the option that getopt_long refused with SIGN.  */
static void
complain (struct text *complaint, int sign, const char *word)
{
  const struct option_row *row = find_row (optopt);

  if (sign == ':' && row != NULL)
    text_add_format (complaint, "--%s needs a %s behind it", row->word, row->takes);
  else if (row != NULL)
    text_add_format (complaint, "--%s takes nothing behind it", row->word);
  else if (optopt != 0)
    text_add_format (complaint, "there is no option '-%c'", optopt);
  else
    text_add_format (complaint, "there is no option '%s'", word);
}

/* The two forms of the list of options that getopt_long asks for.  */
static void
make_lists (struct option words[ROWS + 1], char letters[2 * ROWS + 2])
{
  size_t n = 0;

  letters[n++] = ':';                   /* we do the complaining */
  for (int i = 0; i < ROWS; i++) {
    const bool takes = rows[i].takes != NULL;

    words[i] = (struct option) { rows[i].word, takes ? required_argument : no_argument, NULL,
                                 OPTION_BEFORE_FIRST + 1 + i };
    if (rows[i].letter == 0)
      continue;
    letters[n++] = rows[i].letter;
    if (takes)
      letters[n++] = ':';
  }
  words[ROWS] = (struct option) { NULL, 0, NULL, 0 };
  letters[n] = '\0';
}

bool
options_read (struct options *options, int argc, char *argv[], struct text *complaint)
{
  struct option words[ROWS + 1];
  char letters[2 * ROWS + 2];

  *options = (struct options) { .format = REPORT_TEXT, .colour = COLOUR_AUTO };
  make_lists (words, letters);
  optind = 0;                           /* from the start, however often this is called */
  opterr = 0;
  for (int sign; (sign = getopt_long (argc, argv, letters, words, NULL)) != -1;) {
    const struct option_row *row = find_row (sign);

    if (row == NULL) {
      complain (complaint, sign, argv[optind - 1]);
      return false;
    }
    if (!take_option (options, (enum option_name) (OPTION_BEFORE_FIRST + 1 + (row - rows)),
                      optarg)) {
      text_add_format (complaint, "--%s cannot be '%s'", row->word, optarg);
      return false;
    }
  }
  options->files = argv + optind;
  options->file_count = (size_t) (argc - optind);
  if (options->rows != NULL && !options->has_statements) {
    text_add (complaint, "--rows needs a statement for its rows: -e STATEMENT");
    return false;
  }
  return true;
}

void
options_clear (struct options *options)
{
  text_clear (&options->statements);
}

void
options_help (struct text *out)
{
  text_add (out,
            "Usage: gaswright [OPTION...] [FILE...]\n"
            "\n"
            "Restates flows of gas on any basis: mass, molar, actual volume, volume at reference\n"
            "conditions.  Every answer states its basis and what was taken for granted.\n"
            "\n"
            "Runs the statements in each FILE ('-' is standard input), then those given with -e.\n"
            "Without either, statements come from standard input; if that is a terminal, from a\n"
            "prompt, where 'help' explains the language.\n"
            "\n"
            "  gaswright -e '850 Nm3/h of CO2 in kg/h'\n"
            "\n"
            "Options:\n");
  for (size_t i = 0; i < ROWS; i++) {
    struct text form;

    text_init (&form);
    if (rows[i].letter != 0)
      text_add_format (&form, "  -%c, --%s", rows[i].letter, rows[i].word);
    else
      text_add_format (&form, "      --%s", rows[i].word);
    if (rows[i].takes != NULL)
      text_add_format (&form, "=%s", rows[i].takes);
    text_add_left (out, form.bytes, HELP_COLUMN);
    text_add_format (out, "%s\n", rows[i].does);
    text_clear (&form);
  }
  text_add (out,
            "\n"
            "Exit status: 0 if all went well; 1 if a statement failed, or a file could not be\n"
            "read or written; 2 if the command line is wrong.\n");
}
