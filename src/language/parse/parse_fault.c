#include "config.h"
#include "language/parse/parse_private.h"

bool
fail (struct parser *p, enum message kind, struct place at, const char *fact1,
      const char *fact2)
{
  return fault_set_at (p->fault, kind, at, fact1, fact2);
}

bool
fail_instead (struct parser *p, enum message kind, struct place at, const char *fact1,
              const char *fact2)
{
  fault_init (p->fault, p->fault->arena);
  return fail (p, kind, at, fact1, fact2);
}

bool
fail_unfinished (struct parser *p, const char *way_on)
{
  struct place behind = { p->last.line, p->last.last + 1, p->last.last + 1 };
  return fail (p, MESSAGE_UNFINISHED, behind, way_on, NULL);
}

/* 1,250 and 1,5: what the figure was meant as, where there is one comma in it.  */
static void
offer_figure (struct parser *p)
{
  enum { GROUP = 3 };             /* digits that a thousands mark parts off */
  const char *typed = token_text (p, &p->token), *comma = strchr (typed, ',');
  if (comma == NULL || strchr (comma + 1, ',') != NULL || strchr (typed, '.') != NULL)
    return;
  int whole = (int) (comma - typed);
  if (strlen (comma + 1) == GROUP)
    fault_hint (p->fault, "did you mean '%.*s_%s' or '%.*s.%s'? in a list put a blank behind the"
                " comma", whole, typed, comma + 1, whole, typed, comma + 1);
  else
    fault_hint (p->fault, "did you mean '%.*s.%s'? in a list put a blank behind the comma", whole,
                typed, comma + 1);
}

/* A character that cannot stand there, by its number if nobody could see it.  */
static const char *
character_text (const struct parser *p, const struct token *t)
{
  unsigned code;
  size_t n = t->end - t->start;
  return scan_is_unseen (p->scan.text + t->start, n, &code)
         ? arena_format (p->arena, "U+%04X", code) : token_text (p, t);
}

/* What is wrong with the token by itself, wherever it stands.  */
static bool
fail_bad_token (struct parser *p)
{
  const struct token *t = &p->token;
  bool of_character = t->wrong == MESSAGE_CHARACTER;
  fail (p, t->wrong, t->at, of_character ? character_text (p, t) : NULL,
        of_character ? t->hint : NULL);
  if (t->hint != NULL && !of_character)
    fault_hint (p->fault, "%s", t->hint);
  else if (t->wrong == MESSAGE_NUMBER_COMMA)
    offer_figure (p);
  return false;
}

bool
fail_here (struct parser *p, enum message kind, const char *fact1, const char *fact2)
{
  if (p->token.kind == TOKEN_BAD)
    return fail_bad_token (p);
  if (at_end (p))
    return fail_unfinished (p, fact2 != NULL ? fact2 : fact1);
  const char *small = word_in_capitals (p, &p->token);
  if (small != NULL)
    return fail (p, MESSAGE_WORD_CASE, p->token.at, token_text (p, &p->token), small);
  return fail (p, kind, p->token.at, fact1, fact2);
}

/* "did you mean 'TEXT'?" if TEXT is a unit; null otherwise.  */
static const char *
offer_unit (struct parser *p, const char *text)
{
  return text_is_unit (p, text) ? arena_format (p->arena, "did you mean '%s'?", text) : NULL;
}

/* J/mol K: the word belongs to what stands below the line.  */
static const char *
offer_denominator (struct parser *p, const char *unit, const char *word)
{
  const char *over = strchr (unit, '/');
  if (over == NULL)
    return NULL;
  return offer_unit (p, arena_format (p->arena, "%.*s/(%s*%s)", (int) (over - unit), unit,
                                      over + 1, word));
}

/* What may have been meant by the word at hand, right behind the unit that was read last.  */
static const char *
offer_behind_unit (struct parser *p)
{
  const char *unit = p->unit.text, *offer;
  struct token next = token_behind (p);
  if (p->token.kind != TOKEN_WORD || unit == NULL || p->unit.at.line != p->last.line
      || p->unit.at.last != p->last.last)
    return NULL;
  const char *word = token_text (p, &p->token);
  if (strcmp (word, "of") == 0)
    return p->in_target && next.kind == TOKEN_WORD
           ? arena_format (p->arena, "did you mean '%s of ... in %s'?", token_text (p, &next),
                           unit)
           : NULL;
  if (strcmp (word, "to") == 0)
    return "write 'in' before the unit";
  if (strcmp (unit, "%") == 0 && token_is (p, &next, "of"))
    return arena_format (p->arena, "did you mean '%% of %s'?", word);
  if (strcmp (word, "per") == 0)
    return offer_unit (p, arena_format (p->arena, "%s/%s", unit, token_text (p, &next)));
  offer = offer_unit (p, arena_format (p->arena, "%s(%s)", unit, word));
  if (offer == NULL)
    offer = offer_unit (p, arena_format (p->arena, "%s%s", unit, word));
  return offer != NULL ? offer : offer_denominator (p, unit, word);
}

bool
fail_unexpected (struct parser *p, const char *way_on)
{
  if (p->token.kind == TOKEN_BAD || at_end (p))
    return fail_here (p, MESSAGE_WORD_UNEXPECTED, NULL, way_on);
  if (p->token.kind == TOKEN_CLOSE && p->brackets == 0)
    return fail_here (p, MESSAGE_BRACKET_CLOSE, NULL, NULL);
  const char *offer = offer_behind_unit (p);
  return fail_here (p, MESSAGE_WORD_UNEXPECTED, token_text (p, &p->token),
                    offer != NULL ? offer : way_on);
}

bool
fail_behind_sum (struct parser *p, const char *way_on)
{
  if (p->token.kind == TOKEN_NUMBER)
    return fail_here (p, MESSAGE_NUMBER_UNEXPECTED, way_on, NULL);
  if (word_bit (p, &p->token) == 0)
    return fail_unexpected (p, way_on);
  const char *word = token_text (p, &p->token);
  return fail (p, MESSAGE_WORD_PLACE, p->token.at, word,
               arena_format (p->arena, "'%s' follows a unit (in Nm3/h dry) or stands in the state"
                             " (at ..., dry); of a gas: NAME dried", word));
}

bool
expect_end (struct parser *p, const char *way_on)
{
  return at_end (p) || fail_unexpected (p, way_on);
}

bool
expect_word (struct parser *p, const char *word, const char *way_on)
{
  return accept_word (p, word) || fail_unexpected (p, way_on);
}

bool
expect_equals (struct parser *p, const char *way_on)
{
  return accept (p, TOKEN_EQUALS) || fail_here (p, MESSAGE_EQUALS_EXPECTED, way_on, NULL);
}

bool
expect_text (struct parser *p, const char **text, const char *way_on)
{
  if (p->token.kind != TOKEN_TEXT)
    return fail_here (p, MESSAGE_TEXT_EXPECTED, way_on, NULL);
  *text = arena_copy (p->arena, p->scan.text + p->token.start + 1,
                      p->token.end - p->token.start - 2);
  token_take (p);
  return true;
}

bool
enter (struct parser *p)
{
  return p->depth++ < DEPTH_LIMIT || fail (p, MESSAGE_TOO_DEEP, p->token.at, NULL, NULL);
}

bool
add_link (struct parser *p)
{
  if (p->links >= LINKS_LIMIT)
    return fail (p, MESSAGE_TOO_DEEP, p->token.at, NULL, NULL);
  p->links++;
  return true;
}
