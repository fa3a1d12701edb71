#include "config.h"
#include "language/parse/parse_private.h"

#include <math.h>
#include "gas/species.h"

/* "stream" NAME "=" sum  */
static bool
parse_stream (struct parser *p, struct statement *statement)
{
  const char *form = "stream NAME = ...";
  if (!parse_new_name (p, form, &statement->name, &statement->name_at) || !expect_equals (p, form))
    return false;
  if ((statement->value = parse_sum (p)) == NULL)
    return false;
  return at_end (p)
         || fail_behind_sum (p, at_word (p, "in") ? "a stream has every unit; ask for one: feed in"
                             " kg/h" : "stream NAME = 850 Nm3/h of GAS at T, P");
}

/* "let" NAME "=" sum [ "in" target ]  */
static bool
parse_let (struct parser *p, struct statement *statement)
{
  const char *form = "let NAME = ...";
  if (!parse_new_name (p, form, &statement->name, &statement->name_at) || !expect_equals (p, form))
    return false;
  if ((statement->value = parse_sum (p)) == NULL)
    return false;
  if (accept_word (p, "in") && (statement->targets = parse_targets (p, true)) == NULL)
    return false;
  return at_end (p) || fail_behind_sum (p, "let NAME = 850 Nm3/h");
}

/* "reference" NAME "=" state  */
static bool
parse_reference (struct parser *p, struct statement *statement)
{
  const char *form = "reference NAME = T, P";
  if (!parse_new_name (p, form, &statement->name, &statement->name_at) || !expect_equals (p, form))
    return false;
  statement->value = parse_state (p, NULL, p->last);
  return statement->value != NULL && expect_end (p, form);
}

/* "normalise" NAME [ "into" NAME ]  */
static bool
parse_normalise (struct parser *p, struct statement *statement)
{
  const char *form = "normalise NAME, or normalise NAME into N2";
  struct node *name = parse_name (p, form), *into = NULL;
  if (name == NULL)
    return false;
  if (accept_word (p, "into") && (into = parse_name (p, form)) == NULL)
    return false;
  statement->name = name->text;
  statement->name_at = name->at;
  struct node *value = node_link (p, NODE_NORMALISED, name, into);
  statement->value = value;
  return expect_end (p, form);
}

/* NAME, or nothing where OPTIONAL  */
static bool
parse_only_name (struct parser *p, struct statement *statement, bool optional, const char *form)
{
  if (optional && at_end (p))
    return true;
  const struct node *name = parse_name (p, form);
  if (name == NULL)
    return false;
  statement->name = name->text;
  statement->name_at = name->at;
  return expect_end (p, form);
}

/* "solve" [ NAME ] [ "in" target { "," target } ]  */
static bool
parse_solve (struct parser *p, struct statement *statement)
{
  const char *form = "solve, solve NAME, or solve NAME in kg/h";
  if (!at_end (p) && !at_word (p, "in")) {
    const struct node *name = parse_name (p, form);
    if (name == NULL)
      return false;
    statement->name = name->text;
    statement->name_at = name->at;
  }
  if (accept_word (p, "in") && (statement->targets = parse_targets (p, false)) == NULL)
    return false;
  return expect_end (p, form);
}

/* "balance" NAME NL  */
static bool
parse_balance (struct parser *p, struct statement *statement)
{
  const char *form = "balance NAME, its lines below, then end";
  if (!parse_new_name (p, form, &statement->name, &statement->name_at) || !expect_end (p, form))
    return false;
  p->block = BLOCK_BALANCE;
  return true;
}

/* "sheet" NAME "of" sum NL  */
static bool
parse_sheet (struct parser *p, struct statement *statement)
{
  const char *form = "sheet NAME of GAS";
  if (!parse_new_name (p, form, &statement->name, &statement->name_at)
      || !expect_word (p, "of", form))
    return false;
  if ((statement->value = parse_sum (p)) == NULL || !(at_end (p) || fail_behind_sum (p, form)))
    return false;
  p->block = BLOCK_SHEET;
  return true;
}

/* "samples" "of" ( NAME | TEXT ... ), if that is what stands here  */
static bool
at_samples (const struct parser *p)
{
  struct token behind = token_behind (p);
  return at_word (p, "samples") && token_is (p, &behind, "of");
}

static bool
parse_samples (struct parser *p, struct statement *statement)
{
  const char *form = "show samples of \"file\", or show samples of NAME";
  statement->samples = true;
  token_take (p);
  token_take (p);
  if (p->token.kind == TOKEN_TEXT)
    return parse_from_file (p, statement, false);
  return parse_only_name (p, statement, false, form);
}

/* NAME and "equations", "matrix" or "detectability" behind it  */
static bool
at_balance_part (const struct parser *p)
{
  struct token behind = token_behind (p);
  return at_name (p) && (token_is (p, &behind, "equations") || token_is (p, &behind, "matrix")
                         || token_is (p, &behind, "detectability"));
}

static bool
parse_balance_part (struct parser *p, struct statement *statement)
{
  const struct node *name = parse_name (p, "show NAME equations");
  if (name == NULL)
    return false;
  statement->name = name->text;
  statement->name_at = name->at;
  statement->text_at = p->token.at;
  statement->text = arena_string (p->arena, token_text (p, &p->token));
  token_take (p);
  return expect_end (p, "show NAME equations");
}

/* NAME with "as" or "in" behind it  */
static bool
opens_picture (const struct parser *p)
{
  struct token behind = token_behind (p);
  return at_name (p) && (token_is (p, &behind, "as") || token_is (p, &behind, "in"));
}

/* NAME [ "in" target { "," target } ] "as" "picture" TEXT  */
static bool
parse_picture (struct parser *p, struct statement *statement)
{
  const char *form = "show NAME as picture \"chart.svg\", show NAME in kg/h as picture ...";
  const struct node *name = parse_name (p, form);
  if (name == NULL)
    return false;
  statement->picture = true;
  statement->name = name->text;
  statement->name_at = name->at;
  if (accept_word (p, "in") && (statement->targets = parse_targets (p, false)) == NULL)
    return false;
  for (const struct target *t = statement->targets; t; t = t->next)
    if (t->as != NULL)
      return fail (p, MESSAGE_WORD_UNEXPECTED, t->at, t->as,
                   "a picture has no labels of its own: as picture \"chart.svg\"");
  if (!expect_word (p, "as", form) || !expect_word (p, "picture", form))
    return false;
  statement->text_at = p->token.at;
  return expect_text (p, &statement->text, form) && expect_end (p, form);
}

/* "show" ( NAME | UNIT | PROPERTY ): all of these that it can be; or "samples"  */
static bool
parse_show (struct parser *p, struct statement *statement)
{
  const char *form = "show NAME; list shows the names";
  if (at_samples (p))
    return parse_samples (p, statement);
  if (at_balance_part (p))
    return parse_balance_part (p, statement);
  if (opens_picture (p))
    return parse_picture (p, statement);
  struct unit_read read = { NULL, NULL, { 0, 0, 0 } };
  struct scanner behind;
  bool unit = unit_at (p, &p->token, &read, &behind);
  size_t words = property_here (p, &statement->property);
  statement->has_property = words > 0;
  if (words > 1) {
    statement->name_at = p->token.at;
    take_words (p, words);
    statement->name_at.last = p->last.last;
    return expect_end (p, form);
  }
  bool name = at_name (p) && !joined_to_name (p, &p->token);
  if (unit && (!name || behind.offset > p->token.start + name_length (p, &p->token)))
    name = false;
  if (name && !parse_only_name (p, statement, false, form))
    return false;
  if (unit) {
    statement->unit = read.unit;
    return name || (parse_unit (p, &read) && (statement->name_at = read.at, expect_end (p, form)));
  }
  return name || (opens_unit (p, &p->token) ? parse_unit (p, &read)
                  : fail_here (p, MESSAGE_NAME_EXPECTED, form, NULL));
}

/* NAME [ "*" ] { "," NAME [ "*" ] }: with the star all names that begin so  */
static struct node *
parse_stars (struct parser *p)
{
  struct node *first = NULL, **link = &first;
  do {
    struct node *name = parse_name (p, "with raw1, raw2, or with raw*");
    if (name == NULL)
      return NULL;
    if (p->token.kind == TOKEN_TIMES && !p->token.blank) {
      name->rest = true;
      token_take (p);
    }
    *link = name;
    link = &name->next;
  } while (accept_comma (p));
  return first;
}

/* "trend" sum [ "in" target ] [ "with" NAMES ]  */
static bool
parse_trend (struct parser *p, struct statement *statement)
{
  const char *form = "trend wobbe of lab in MJ/m3, trend wobbe of raw1 with raw*";
  if (at_end (p))
    return fail_unfinished (p, form);
  if ((statement->value = parse_sum (p)) == NULL)
    return false;
  if (accept_word (p, "in") && (statement->targets = parse_targets (p, true)) == NULL)
    return false;
  if (accept_word (p, "with") && (statement->names = parse_stars (p)) == NULL)
    return false;
  return at_end (p) || fail_behind_sum (p, form);
}

/* "forget" NAME { "," NAME }  */
static bool
parse_forget (struct parser *p, struct statement *statement)
{
  statement->names = parse_names (p, "forget NAME");
  return statement->names != NULL && expect_end (p, "forget NAME, NAME");
}

/* ( "note" | "save" | "open" ) TEXT  */
static bool
parse_file (struct parser *p, struct statement *statement)
{
  const char *form = arena_format (p->arena, "%s \"name\"", token_text (p, &p->first));
  statement->text_at = p->token.at;
  return expect_text (p, &statement->text, form) && expect_end (p, form);
}

/* "help" { WORD }; the words are kept with one blank where blanks were  */
static bool
parse_help (struct parser *p, struct statement *statement)
{
  const char *text = p->scan.text;
  size_t start = p->token.start, n = 0;
  if (at_end (p))
    return true;
  char *words = ARENA_ARRAY (p->arena, p->scan.n - start + 1, char);
  for (; !at_end (p); token_take (p)) {
    const struct token *t = &p->token;
    if (t->kind == TOKEN_BAD)
      return fail_here (p, MESSAGE_WORD_UNEXPECTED, NULL, NULL);
    if (t->blank && n > 0)
      words[n++] = ' ';
    memcpy (words + n, text + t->start, t->end - t->start);
    n += t->end - t->start;
  }
  statement->help_words = words;
  return true;
}

/* What stands behind a question that should have ended.  */
static bool
fail_behind_question (struct parser *p, const struct statement *statement)
{
  const struct node *value = statement->value;
  const struct species *found;
  const char *candidates;
  bool name = value->kind == NODE_NAME && statement->targets == NULL;
  if (p->token.kind == TOKEN_EQUALS) {
    if (name)
      return fail (p, MESSAGE_STATEMENT_WORD, p->token.at, value->text, NULL);
    return fail_unexpected (p, "a definition opens with gas, stream, let or reference");
  }
  if (p->token.kind == TOKEN_NUMBER && name)
    return fail_behind_sum (p, species_find (p->words->species, value->text, strlen (value->text),
                                             &found, &candidates) != SPECIES_NONE
                            ? "a list of parts is a gas: gas NAME = ..., or stands in brackets"
                            : "a question needs no verb: 12 bar(g) in psi(g)");
  if (statement->targets != NULL)
    return fail_unexpected (p, p->token.kind == TOKEN_OPEN
                            ? "dry and wet follow the unit without brackets"
                            : at_word (p, "in") ? "targets are parted by commas: in m3/h, kg/h"
                            : at_word (p, "counted") ? "counted as ... follows the unit at once"
                            : NULL);
  return fail_behind_sum (p, at_word (p, "to") ? "write 'in' before the unit" : NULL);
}

/* sum [ "in" target { "," target } ]  */
static bool
parse_question (struct parser *p, struct statement *statement)
{
  statement->kind = STATEMENT_ASK;
  if ((statement->value = parse_sum (p)) == NULL)
    return false;
  if (accept_word (p, "in") && (statement->targets = parse_targets (p, false)) == NULL)
    return false;
  return at_end (p) || fail_behind_question (p, statement);
}

/* A whole number from LEAST to MOST.  */
static bool
parse_whole (struct parser *p, double least, double most, double *number, const char *way_on)
{
  struct place at = p->token.at;
  const char *figure;
  if (p->token.kind != TOKEN_NUMBER)
    return fail_unexpected (p, way_on);
  if (!parse_bare_number (p, number, &figure))
    return false;
  if (*number >= least && *number <= most && *number - floor (*number) <= 0)
    return true;
  return fail (p, MESSAGE_RANGE, at,
               arena_format (p->arena, "a whole number from %.0f to %.0f is needed", least, most),
               way_on);
}

/* NUMBER [ "seed" NUMBER ] question  */
static bool
parse_montecarlo (struct parser *p, struct statement *statement)
{
  static const char FORM[] = "montecarlo 100000 wobbe of raw; montecarlo 100000 seed 7 ...";
  enum { FEWEST = 1000, MOST = 10000000 };
  const double MOST_SEED = 4294967295.0;
  double trials, seed = 1;
  if (!parse_whole (p, FEWEST, MOST, &trials, FORM))
    return false;
  if (accept_word (p, "seed") && !parse_whole (p, 0, MOST_SEED, &seed, FORM))
    return false;
  if (at_end (p))
    return fail_unfinished (p, FORM);
  if (!parse_question (p, statement))
    return false;
  statement->kind = STATEMENT_MONTECARLO;
  statement->trials = (size_t) trials;
  statement->seed = (unsigned long) seed;
  return true;
}

/* The statement's word is taken.  */
static bool
parse_opened (struct parser *p, struct statement *statement)
{
  switch (statement->kind) {
  case STATEMENT_GAS: return parse_gas (p, statement);
  case STATEMENT_STREAM: return parse_stream (p, statement);
  case STATEMENT_LET: return parse_let (p, statement);
  case STATEMENT_REFERENCE: return parse_reference (p, statement);
  case STATEMENT_NORMALISE: return parse_normalise (p, statement);
  case STATEMENT_SET: return parse_set (p, statement);
  case STATEMENT_BALANCE: return parse_balance (p, statement);
  case STATEMENT_SOLVE: return parse_solve (p, statement);
  case STATEMENT_SHEET: return parse_sheet (p, statement);
  case STATEMENT_CHECK: return parse_check (p, statement);
  case STATEMENT_MONTECARLO: return parse_montecarlo (p, statement);
  case STATEMENT_TRIM: return parse_trim (p, statement);
  case STATEMENT_TREND: return parse_trend (p, statement);
  case STATEMENT_SHOW: return parse_show (p, statement);
  case STATEMENT_LIST: return parse_only_name (p, statement, true, "list, or list units");
  case STATEMENT_FORGET: return parse_forget (p, statement);
  case STATEMENT_NOTE: case STATEMENT_SAVE: case STATEMENT_OPEN: return parse_file (p, statement);
  case STATEMENT_HELP: return parse_help (p, statement);
  case STATEMENT_UNDO: case STATEMENT_WORKINGS: case STATEMENT_QUIT:
    return expect_end (p, arena_format (p->arena, "'%s' stands alone", token_text (p, &p->first)));
  case STATEMENT_ASK: case STATEMENT_MIX: case STATEMENT_SEPARATE: case STATEMENT_SPLIT:
  case STATEMENT_REACT: case STATEMENT_COMPONENTS: case STATEMENT_KNOWN: case STATEMENT_ABSENT:
  case STATEMENT_PER: case STATEMENT_AROUND: case STATEMENT_FIGURE: case STATEMENT_END:
  case STATEMENT_EMPTY: default:
    return fail_unexpected (p, NULL);
  }
}

/* A question failed at its second word: was the first meant to open a statement, or a line of a
   balance?                                                                                      */
static bool
explain_first_word (struct parser *p)
{
  static const char *const lines[] = { "mix", "separate", "split", "components", "known",
                                       "react" };
  const struct place at = p->fault->at, second = p->second;
  struct token first = p->first;
  if (first.kind != TOKEN_WORD || at.line != second.line || at.first != second.first)
    return false;
  for (size_t i = 0; i < sizeof lines / sizeof lines[0]; i++)
    if (token_is (p, &first, lines[i]))
      return fail_instead (p, MESSAGE_BLOCK_LINE, first.at, lines[i],
                           arena_format (p->arena, "'%s' stands inside a balance", lines[i]));
  const char *small = word_in_capitals (p, &first);
  if (small == NULL || p->fault->kind == MESSAGE_UNFINISHED
      || p->fault->kind == MESSAGE_STATEMENT_WORD)
    return false;
  return fail_instead (p, MESSAGE_WORD_CASE, first.at, token_text (p, &first), small);
}

bool
parse_statement (struct parser *p, struct statement *statement)
{
  /* statement = WORD ... | sum [ "in" target { "," target } ]  */
  const bool anywhere = at_word (p, "undo") || at_word (p, "help");
  if (p->block == BLOCK_BALANCE && !anywhere)
    return parse_balance_line (p, statement);
  if (p->block == BLOCK_SHEET && !anywhere)
    return parse_sheet_line (p, statement);
  if (at_word (p, "end"))
    return fail (p, MESSAGE_BLOCK_LINE, p->token.at, "end", "no block is open");
  statement->kind = statement_opened (p, &p->token);
  if (statement->kind != STATEMENT_EMPTY) {
    token_take (p);
    return parse_opened (p, statement);
  }
  return parse_question (p, statement) || explain_first_word (p);
}
