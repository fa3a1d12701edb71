#include "config.h"
#include "shell/phrase.h"

#include <string.h>

#include "support/number.h"

bool
phrase_word_is (const struct phrase_word *word, const char *text)
{
  return strlen (text) == word->n && memcmp (word->text, text, word->n) == 0;
}

static bool
is_one_of (const struct phrase_word *word, const char *const list[])
{
  for (size_t i = 0; list[i] != NULL; i++) {
    if (phrase_word_is (word, list[i]))
      return true;
  }
  return false;
}

static bool
is_number (const struct phrase_word *word)
{
  double value;
  bool too_large;

  return number_read (word->text, word->n, &value, &too_large);
}

static void
add_word (struct phrase *phrase, const char *text, size_t n)
{
  if (phrase->count == PHRASE_WORDS) {
    memmove (phrase->words, phrase->words + 1, (PHRASE_WORDS - 1) * sizeof phrase->words[0]);
    phrase->count--;
  }
  phrase->words[phrase->count++] = (struct phrase_word) { text, n };
  if (phrase->opening.text == NULL)
    phrase->opening = phrase->words[0];
}

/* Does the physical line that ends at TEXT + I go on in the next?  */
static bool
goes_on (const char *text, size_t i)
{
  while (i > 0 && (text[i - 1] == ' ' || text[i - 1] == '\t'))
    i--;
  return i > 0 && (text[i - 1] == ',' || text[i - 1] == '\\');
}

/* Bytes of the word at TEXT (N left): a text in quotes, a sign of its own, or what stands up to a
   blank or such a sign.                                                                         */
static size_t
word_length (const char *text, size_t n)
{
  size_t i = 1;

  if (text[0] == '"') {
    const char *end = n > 1 ? memchr (text + 1, '"', n - 1) : NULL;
    return end != NULL ? (size_t) (end - text) + 1 : n;
  }
  if (strchr (",=", text[0]) != NULL)
    return 1;
  while (i < n && strchr (" \t\n,=;\"#", text[i]) == NULL)
    i++;
  return i;
}

/* Collects the words.  False if the cursor stands in a comment.  */
static bool
collect (struct phrase *phrase, const char *line, size_t n)
{
  bool in_comment = false;

  for (size_t i = 0; i < n;) {
    const char c = line[i];

    if (c == ';' && !in_comment)
      *phrase = (struct phrase) { .place = PLACE_NOTHING };
    if (c == '\n') {
      if (!in_comment && !goes_on (line, i))
        *phrase = (struct phrase) { .place = PLACE_NOTHING };
      in_comment = false;
    }
    in_comment = in_comment || c == '#';
    if (in_comment || strchr (" \t\n;\\", c) != NULL) {
      i++;
      continue;
    }
    const size_t length = word_length (line + i, n - i);
    phrase->in_text = c == '"' && (length == 1 || line[i + length - 1] != '"');
    if (!phrase->in_text)
      add_word (phrase, line + i, length);
    i += length;
  }
  return !in_comment;
}

const struct phrase_word *
phrase_clause (const struct phrase *phrase)
{
  static const char *const openers[] = { "in", "at", "of", "as", "=", "from", "against", "so",
                                         "with", "keeping", "within", "set", NULL };

  for (size_t i = phrase->count; i > 0; i--) {
    if (is_one_of (&phrase->words[i - 1], openers))
      return &phrase->words[i - 1];
  }
  return NULL;
}

/* Of a statement whose first word settles what follows; PLACE_WORD: it does not.  */
static enum phrase_place
place_behind_opening (const struct phrase *phrase)
{
  static const struct { const char *opening; enum phrase_place first, later; } rows[] = {
    { "help", PLACE_TOPIC, PLACE_TOPIC },        { "list", PLACE_LIST, PLACE_NOTHING },
    { "show", PLACE_SHOWN, PLACE_SHOWN },        { "forget", PLACE_OWN_NAME, PLACE_OWN_NAME },
    { "normalise", PLACE_OWN_NAME, PLACE_WORD }, { "solve", PLACE_OWN_NAME, PLACE_NOTHING },
    { "gas", PLACE_OWN_NAME, PLACE_WORD },       { "stream", PLACE_OWN_NAME, PLACE_WORD },
    { "let", PLACE_OWN_NAME, PLACE_WORD },       { "reference", PLACE_OWN_NAME, PLACE_WORD },
    { "balance", PLACE_OWN_NAME, PLACE_NOTHING }, { "sheet", PLACE_OWN_NAME, PLACE_WORD },
    { "trim", PLACE_OWN_NAME, PLACE_WORD },      { "check", PLACE_OPERAND, PLACE_WORD },
    { "save", PLACE_FILE, PLACE_NOTHING },       { "open", PLACE_FILE, PLACE_NOTHING },
    { "note", PLACE_FILE, PLACE_NOTHING },       { "set", PLACE_SETTING, PLACE_WORD },
    { "undo", PLACE_NOTHING, PLACE_NOTHING },    { "quit", PLACE_NOTHING, PLACE_NOTHING },
    { "workings", PLACE_NOTHING, PLACE_NOTHING }
  };

  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    if (phrase_word_is (&phrase->opening, rows[i].opening))
      return phrase->count == 1 ? rows[i].first : rows[i].later;
  }
  return PLACE_WORD;
}

static enum phrase_place
place_behind_comma (const struct phrase_word *clause)
{
  if (clause == NULL)
    return PLACE_OPERAND;
  if (phrase_word_is (clause, "in"))
    return PLACE_TARGET;
  return phrase_word_is (clause, "at") ? PLACE_STATE : PLACE_OPERAND;
}

/* Behind the name that is shown: in UNIT as picture "FILE".  */
static enum phrase_place
place_behind_shown (const struct phrase_word *last)
{
  if (phrase_word_is (last, "as"))
    return PLACE_PICTURE;
  if (phrase_word_is (last, "picture"))
    return PLACE_FILE;
  return phrase_word_is (last, "in") ? PLACE_TARGET : PLACE_SHOWN;
}

static enum phrase_place
place_behind (const struct phrase *phrase)
{
  static const char *const before_operand[] = { "of", "=", "+", "-", "*", "/", "against", "within",
                                                "into", "by", "without", "keeping", "from", "so",
                                                "(", NULL };
  static const char *const before_state[] = { "at", NULL };
  const struct phrase_word *last = &phrase->words[phrase->count - 1];
  const enum phrase_place settled = place_behind_opening (phrase);

  if (settled == PLACE_SHOWN && phrase->count > 2)
    return place_behind_shown (last);
  if (settled != PLACE_WORD)
    return settled;
  if (is_number (last))
    return PLACE_UNIT;
  if (phrase_word_is (last, "in"))
    return PLACE_TARGET;
  if (phrase_word_is (last, "as"))
    return PLACE_NOTHING;
  if (is_one_of (last, before_state))
    return PLACE_STATE;
  if (phrase_word_is (last, ",") || phrase_word_is (last, "and"))
    return place_behind_comma (phrase_clause (phrase));
  if (is_one_of (last, before_operand))
    return phrase_word_is (&phrase->opening, "reference") ? PLACE_STATE : PLACE_OPERAND;
  return phrase_word_is (&phrase->opening, "set") ? PLACE_VALUE : PLACE_WORD;
}

void
phrase_read (struct phrase *phrase, const char *line, size_t n)
{
  *phrase = (struct phrase) { .place = PLACE_NOTHING };
  if (!collect (phrase, line, n))
    phrase->place = PLACE_NOTHING;
  else if (phrase->count == 0)
    phrase->place = phrase->in_text ? PLACE_OPERAND : PLACE_OPENING;
  else
    phrase->place = place_behind (phrase);
}
