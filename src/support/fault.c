#include "config.h"
#include "support/fault.h"

#include <assert.h>
#include <stdarg.h>
#include <stddef.h>
#include <string.h>
#include "support/arena.h"
#include "support/text.h"

void
fault_init (struct fault *fault, struct arena *arena)
{
  *fault = (struct fault) { .kind = MESSAGE_NONE, .arena = arena };
}

enum { LONGEST_FACT = 1000 };     /* bytes; of a longer one (a line of 1 MB) the head is told */

static const char *
kept (const struct fault *fault, const char *fact)
{
  if (fact == NULL)
    return NULL;
  size_t n = strlen (fact);
  if (n <= LONGEST_FACT)
    return arena_copy (fault->arena, fact, n);
  for (n = LONGEST_FACT; n > 0 && ((unsigned char) fact[n] & 0xC0) == 0x80; n--)
    continue;
  return arena_format (fault->arena, "%.*s...", (int) n, fact);
}

bool
fault_set_at (struct fault *fault, enum message kind, struct place at, const char *fact1,
              const char *fact2)
{
  assert (kind != MESSAGE_NONE);
  fault->dropping = fault->kind != MESSAGE_NONE;
  if (fault->dropping)
    return false;
  fault->kind = kind;
  fault->at = at;
  fault->fact[0] = kept (fault, fact1);
  fault->fact[1] = kept (fault, fact2);
  return false;
}

bool
fault_set (struct fault *fault, enum message kind, const char *fact1, const char *fact2)
{
  return fault_set_at (fault, kind, (struct place) { 0, 0, 0 }, fact1, fact2);
}

void
fault_facts (struct fault *fault, const char *fact3, const char *fact4)
{
  assert (fault->kind != MESSAGE_NONE);
  if (fault->dropping)
    return;
  fault->fact[2] = kept (fault, fact3);
  fault->fact[3] = kept (fault, fact4);
}

void
fault_hint (struct fault *fault, const char *format, ...)
{
  struct text hint;
  va_list arguments;

  assert (fault->kind != MESSAGE_NONE);
  if (fault->dropping)
    return;
  text_init (&hint);
  va_start (arguments, format);
  text_add_arguments (&hint, format, arguments);
  va_end (arguments);
  fault->hint = arena_copy (fault->arena, hint.bytes, hint.length);
  text_clear (&hint);
}

void
fault_quote (struct fault *fault, const char *line)
{
  fault->quote = line;
}

void
fault_place (struct fault *fault, struct place at)
{
  if (fault->kind != MESSAGE_NONE && fault->at.line == 0)
    fault->at = at;
}
