#include "config.h"
#include "language/commands/commands.h"

#include <string.h>
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

/* One entry of a page; entries of one topic stand together in topics.def.  */
struct topic { const char *name, *say, *get, *example; };

static const struct topic topics[] = {
#define TOPIC(name, say, get, example) { name, say, get, example },
#include "language/topics.def"
#undef TOPIC
};
enum { TOPIC_COUNT = sizeof topics / sizeof topics[0] };

static bool
is_first (size_t i)
{
  return i == 0 || strcmp (topics[i].name, topics[i - 1].name) != 0;
}

/* The page that lists the topics.  */
static void
overview (struct result *result)
{
  enum { LINE = 66 };
  struct help_page *page = result_help (result, "help");
  const char *names = "";
  help_add (result, page, "help TOPIC", "a page for each topic", "help gas");
  for (size_t i = 0; i < TOPIC_COUNT; i++)
    if (is_first (i)) {
      if (strlen (names) + strlen (topics[i].name) > LINE) {
        help_add (result, page, "", names, "");
        names = "";
      }
      names = arena_format (result->arena, "%s%s%s", names, *names ? ", " : "", topics[i].name);
    }
  help_add (result, page, "", names, "");
}

static const char *
nearest_topic (const char *word)
{
  const char *best = NULL;
  size_t least = text_reach (word) + 1;
  for (size_t i = 0; i < TOPIC_COUNT; i++) {
    size_t distance = text_distance (word, topics[i].name, least);
    if (distance < least) {
      least = distance;
      best = topics[i].name;
    }
  }
  return best;
}

/* What a topic is looked for by, too.  */
static const char *
topic_of (const char *words)
{
  static const struct { const char *words, *topic; } also[] = {
    { "F factor", "emissions" }, { "F factors", "emissions" }, { "NOx", "emissions" },
    { "burning", "emissions" }, { "emission", "emissions" }
  };
  for (size_t i = 0; i < sizeof also / sizeof also[0]; i++)
    if (strcmp (also[i].words, words) == 0) {
      return also[i].topic;
    }
  return words;
}

static bool
no_topic (const struct statement *s, struct result *result, struct fault *fault)
{
  const char *near = nearest_topic (s->help_words);
  struct place at = s->at;
  at.first += (int) strlen ("help ");
  fault_set_at (fault, MESSAGE_NAME_UNKNOWN, at, s->help_words,
                near ? arena_format (result->arena, "did you mean 'help %s'?", near)
                     : "'help' lists the topics");
  return false;
}

bool
command_help (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  struct help_page *page = NULL;
  (void) session;
  if (!s->help_words) {
    overview (result);
    return true;
  }
  const char *topic = topic_of (s->help_words);
  for (size_t i = 0; i < TOPIC_COUNT; i++)
    if (strcmp (topics[i].name, topic) == 0) {
      page = page ? page : result_help (result, topics[i].name);
      help_add (result, page, topics[i].say, topics[i].get, topics[i].example);
    }
  return page || no_topic (s, result, fault);
}
