#include "config.h"
#include "shell/completion.h"

#include <stdlib.h>
#include <string.h>
#include <strings.h>

#include "gas/species.h"
#include "language/session.h"
#include "shell/phrase.h"
#include "shell/wanted.h"
#include "support/arena.h"
#include "support/table.h"
#include "units/unit.h"

/* The lists the language knows, each ended by null.  */
static const char *const statement_words[] = {
#define STATEMENT(name, text, help) text,
#include "language/statements.def"
#undef STATEMENT
  NULL
};
static const char *const balance_words[] = { "mix", "separate", "split", "react", "components",
                                             "known", "absent", "per", "around", "end", NULL };
static const char *const sheet_words[] = { "end", NULL };
static const char *const further_words[] = {
#define WORD(text) text,
#include "language/words.def"
#undef WORD
  NULL
};
static const char *const properties[] = {
#define PROPERTY(name, text, unit, help) text,
#include "language/properties.def"
#undef PROPERTY
  NULL
};
static const char *const settings[] = {
#define SETTING(name, text, takes) text,
#include "language/settings.def"
#undef SETTING
  NULL
};
static const char *const setting_takes[] = {
#define SETTING(name, text, takes) takes,
#include "language/settings.def"
#undef SETTING
  NULL
};
static const char *const topics[] = {
#define TOPIC(name, say, get, example) name,
#include "language/topics.def"
#undef TOPIC
  NULL
};
static const char *const offered_units[] = {
#define UNIT_OFFERED(spelling) spelling,
#include "shell/flow_units.def"
#undef UNIT_OFFERED
  NULL
};
static const char *const state_words[] = { "dry", "saturated", "ideal", "real", "water", "Z",
                                           "dew point", "site pressure", NULL };
static const char *const lists[] = { "gases", "streams", "quantities", "sheets", "balances",
                                     "units", "components", "references", "fuels", "readings",
                                     "properties", "settings", NULL };

/* A search in progress.  */
struct search {
  struct completion *found;
  const struct session *session;
  const char *line;
  size_t start;                   /* of the word */
  const char *word;               /* without what opens it */
  size_t length, room;
  const char *before;             /* "(" or the like, kept in front of what is offered */
  struct phrase phrase;
  bool any_case;
};

static bool
has_prefix (const struct search *search, const char *text, const char *prefix, size_t n)
{
  return (search->any_case ? strncasecmp (text, prefix, n) : strncmp (text, prefix, n)) == 0;
}

static void
add (struct search *search, const char *front, const char *text, const char *back)
{
  struct completion *found = search->found;

  if (found->count == search->room) {
    const size_t room = search->room > 0 ? 2 * search->room : 64;
    const char **words = ARENA_ARRAY (found->arena, room, const char *);

    if (found->count > 0)
      memcpy (words, found->words, found->count * sizeof *words);
    found->words = words;
    search->room = room;
  }
  found->words[found->count++] = arena_format (found->arena, "%s%s%s%s", search->before, front,
                                               text, back);
}

static void
offer (struct search *search, const char *text)
{
  if (has_prefix (search, text, search->word, search->length))
    add (search, "", text, "");
}

static void
offer_all (struct search *search, const char *const list[])
{
  for (size_t i = 0; list[i] != NULL; i++)
    offer (search, list[i]);
}

/* Offers what is left of TEXT, several words, whose first ones stand before the cursor.  */
static void
offer_rest (struct search *search, const char *text)
{
  const struct phrase *phrase = &search->phrase;

  for (size_t back = 1; back <= 3 && back <= phrase->count; back++) {
    const char *from = phrase->words[phrase->count - back].text;
    const size_t n = (size_t) (search->line + search->start - from);

    if (strlen (text) > n && has_prefix (search, text, from, n)
        && has_prefix (search, text + n, search->word, search->length))
      add (search, "", text + n, "");
  }
}

/* The same for a name that is read without quotes.  */
static void
offer_rest_of_name (const char *name, void *with)
{
  if (strchr (name, ' ') != NULL)
    offer_rest (with, name);
}

static void
offer_rests (struct search *search, const char *const list[])
{
  for (size_t i = 0; list[i] != NULL; i++)
    offer_rest (search, list[i]);
}

static bool
is_listed (const char *text, const char *const list[])
{
  for (size_t i = 0; list[i] != NULL; i++) {
    if (strcmp (text, list[i]) == 0)
      return true;
  }
  return false;
}

static bool
is_letter (char c)
{
  return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (unsigned char) c >= 0x80;
}

/* Can NAME be written without quotes?  */
static bool
is_plain (const char *name)
{
  if (!is_letter (name[0]) || is_listed (name, statement_words)
      || is_listed (name, further_words))
    return false;
  for (const char *c = name + 1; *c != '\0'; c++) {
    const bool joins = (*c == '-' || *c == '+')
                       && (is_letter (c[1]) || (c[1] >= '0' && c[1] <= '9'));

    if (!is_letter (*c) && !(*c >= '0' && *c <= '9') && *c != '_' && !joins
        && !(*c == '+' && c[1] == '\0'))
      return false;
  }
  return true;
}

static void
offer_name (const char *name, void *with)
{
  struct search *search = with;

  if (!has_prefix (search, name, search->word, search->length))
    return;
  if (search->phrase.in_text || is_plain (name))
    add (search, "", name, "");
  else
    add (search, "\"", name, "\"");
}

static void
offer_own_names (struct search *search)
{
  session_each_name (search->session, offer_name, search);
}

/* Without a letter typed the keys alone: with all their names there are too many to read.  */
static void
offer_components (struct search *search)
{
  const struct species_table *table = session_vocabulary (search->session)->species;

  if (search->length > 0) {
    species_each_name (table, offer_name, search);
    return;
  }
  for (size_t i = 0; i < species_table_size (table); i++)
    offer_name (species_table_at (table, i)->key, search);
}

static void
offer_unit (struct search *search, const struct wanted *wanted, const char *spelling)
{
  struct unit_table *units = session_vocabulary (search->session)->units;
  const struct unit *unit;

  if (!has_prefix (search, spelling, search->word, search->length))
    return;
  unit = unit_find (units, spelling, strlen (spelling), NULL);
  if (unit != NULL && wanted_fits (wanted, unit))
    add (search, "", spelling, "");
}

static void
offer_units (struct search *search)
{
  struct unit_table *units = session_vocabulary (search->session)->units;
  const struct wanted wanted = wanted_at (&search->phrase, units);

  for (size_t i = 0; i < unit_table_rows (units); i++)
    offer_unit (search, &wanted, unit_table_row (units, i).spelling);
  for (size_t i = 0; offered_units[i] != NULL; i++)
    offer_unit (search, &wanted, offered_units[i]);
}

/* Families of reference volumes are settings too.  */
static void
offer_settings (struct search *search)
{
  offer_all (search, settings);
  for (int family = FAMILY_NORMAL; family < FAMILY_COUNT; family++)
    offer (search, reference_family_name ((enum reference_family) family));
}

/* Does the statement set this setting?  */
static bool
sets (const struct search *search, const char *setting)
{
  const struct phrase *phrase = &search->phrase;
  const char *from = phrase->words[phrase->count > 1 ? 1 : 0].text;
  const size_t n = strlen (setting);

  return from + n < search->line + search->start && strncmp (from, setting, n) == 0
         && from[n] == ' ';
}

/* What a setting can be set to, where that is a choice of words: "zero, half or limit".  */
static void
offer_values (struct search *search)
{
  for (size_t i = 0; settings[i] != NULL; i++) {
    const char *takes = setting_takes[i];

    if (!sets (search, settings[i]) || strstr (takes, " or ") == NULL)
      continue;
    while (*takes != '\0') {
      const char *or = strstr (takes, " or "), *comma = strstr (takes, ", ");
      const char *end = comma != NULL ? comma : or;
      const size_t n = end != NULL ? (size_t) (end - takes) : strlen (takes);

      offer (search, arena_copy (search->found->arena, takes, n));
      takes += n + (end == NULL ? 0 : end == comma ? strlen (", ") : strlen (" or "));
    }
  }
  offer_rests (search, settings);
}

static void
offer_references (struct search *search)
{
  const struct table_text *names = table_text_find ("references");

  if (names == NULL)
    return;
  for (size_t i = 1; names->rows[i] != NULL; i++)
    offer_name (names->rows[i], search);                /* the first cell is the name */
}

static void
offer_operands (struct search *search)
{
  offer_own_names (search);
  offer_components (search);
  if (search->phrase.in_text)
    return;
  offer_all (search, properties);
  offer_rests (search, properties);
}

static void
offer_at_place (struct search *search)
{
  switch (search->phrase.place) {
    case PLACE_OPENING:
      if (session_block (search->session) != BLOCK_NONE) {
        offer_all (search, session_block (search->session) == BLOCK_BALANCE ? balance_words
                                                                           : sheet_words);
        break;
      }
      offer_all (search, statement_words);
      offer_all (search, properties);
      offer_own_names (search);
      break;
    case PLACE_UNIT:
    case PLACE_TARGET:
      offer_units (search);
      break;
    case PLACE_STATE:
      offer_all (search, state_words);
      offer_own_names (search);
      offer_references (search);
      break;
    case PLACE_OPERAND:
      offer_operands (search);
      break;
    case PLACE_OWN_NAME:
      offer_own_names (search);
      break;
    case PLACE_SHOWN:
      offer_operands (search);
      offer_references (search);
      offer_units (search);
      break;
    case PLACE_SETTING:
      offer_settings (search);
      break;
    case PLACE_VALUE:
      offer_values (search);
      break;
    case PLACE_TOPIC:
      offer_all (search, topics);
      offer_rests (search, topics);
      break;
    case PLACE_LIST:
      offer_all (search, lists);
      break;
    case PLACE_PICTURE:
      offer (search, "picture");
      break;
    case PLACE_FILE:
      search->found->is_file = true;
      break;
    case PLACE_WORD:
      offer_all (search, further_words);
      offer_rests (search, properties);
      offer_rests (search, state_words);
      species_each_name (session_vocabulary (search->session)->species, offer_rest_of_name,
                         search);
      break;
    case PLACE_NOTHING:
      break;
  }
}

static int
compare_words (const void *a, const void *b)
{
  return strcmp (*(const char *const *) a, *(const char *const *) b);
}

static void
sort_once_each (struct completion *found)
{
  size_t kept = 0;

  if (found->count == 0)
    return;
  qsort (found->words, found->count, sizeof *found->words, compare_words);
  for (size_t i = 1; i < found->count; i++) {
    if (strcmp (found->words[kept], found->words[i]) != 0)
      found->words[++kept] = found->words[i];
  }
  found->count = kept + 1;
}

void
completion_find (struct completion *found, struct arena *arena, const struct session *session,
                 const char *line, size_t start, size_t end)
{
  struct search search = { .found = found, .session = session, .line = line, .start = start };
  size_t opened = 0;

  *found = (struct completion) { .arena = arena };
  phrase_read (&search.phrase, line, start);
  /* A bracket or sign before a word does not belong to it.  */
  while (!search.phrase.in_text && start + opened < end
         && strchr ("(<-", line[start + opened]) != NULL)
    opened++;
  search.before = arena_copy (arena, line + start, opened);
  search.length = end - start - opened;
  search.word = arena_copy (arena, line + start + opened, search.length);
  offer_at_place (&search);
  if (found->count == 0 && search.length > 0) {
    search.any_case = true;
    offer_at_place (&search);
  }
  sort_once_each (found);
}
