/* The sentences of remarks and faults, for every renderer.  */
#include "config.h"
#include "report/report_private.h"

#include <math.h>
#include <string.h>

#include "result/result.h"
#include "support/fault.h"
#include "support/text.h"

/* Below half a millionth an effect does not show in a figure of six digits.  */
static const double effect_least = 5e-7;

void
remark_sentence (struct text *out, const struct remark *remark)
{
  message_write (out, message_sentence (remark->kind), remark->fact);
}

bool
remark_bracket (struct text *out, const struct remark *remark)
{
  if (remark->alternative == NULL || !isfinite (remark->effect)
      || fabs (remark->effect) < effect_least)
    return false;
  text_add_char (out, '(');
  text_add (out, remark->alternative);
  text_add (out, ": ");
  effect_write (out, remark->effect);
  text_add_char (out, ')');
  return true;
}

/* Do two lines open with the same word?  */
static bool
opens_alike (const char *a, const char *b)
{
  const size_t blanks_a = strspn (a, " \t"), blanks_b = strspn (b, " \t");
  const size_t word = strcspn (a + blanks_a, " \t");
  return word > 0 && word == strcspn (b + blanks_b, " \t")
         && memcmp (a + blanks_a, b + blanks_b, word) == 0;
}

void
fault_words_init (struct fault_words *words, const struct fault *fault, const char *statement)
{
  text_init (&words->sentence);
  text_init (&words->phrase);
  text_init (&words->line);
  message_write (&words->sentence, message_sentence (fault->kind), fault->fact);

  /* A hint of the fault's own takes the place of the kind's way on, except where that is itself
     made of a fact, which says something about this very mistake.  */
  const char *pattern = message_way_on (fault->kind);
  if (fault->hint == NULL || strchr (pattern, '{') != NULL)
    message_write (&words->phrase, pattern, fault->fact);
  if (fault->hint != NULL && words->phrase.length > 0
      && strcmp (words->phrase.bytes, fault->hint) != 0)
    text_add (&words->line, fault->hint);
  else if (fault->hint != NULL && words->phrase.length == 0)
    text_add (&words->phrase, fault->hint);
  if (words->line.length == 0 && words->phrase.length > 0 && statement != NULL
      && opens_alike (words->phrase.bytes, statement)) {
    const struct text line = words->phrase;
    words->phrase = words->line;
    words->line = line;
  }
}

void
fault_words_clear (struct fault_words *words)
{
  text_clear (&words->sentence);
  text_clear (&words->phrase);
  text_clear (&words->line);
}
