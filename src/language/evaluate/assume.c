#include "config.h"
#include "language/evaluate/evaluation.h"

#include <string.h>
#include "language/session_private.h"
#include "support/arena.h"

void
evaluation_init (struct evaluation *ev, struct session *session, struct result *result,
                 struct fault *fault)
{
  *ev = (struct evaluation) { .session = session, .arena = fault->arena,
                              .settings = session_settings (session), .fault = fault,
                              .result = result, .describe = true };
}

void
evaluation_again (struct evaluation *ev, const struct evaluation *first, struct fault *fault)
{
  evaluation_init (ev, first->session, NULL, fault);
  ev->arena = first->arena;
  ev->stand_ins = first->stand_ins;
  ev->stand_in_count = first->stand_in_count;
  ev->describe = false;
}

void
evaluation_touch (struct evaluation *ev, unsigned bits)
{
  ev->touched |= bits;
}

void *
room_for_one (struct arena *arena, void *things, size_t count, size_t *room, size_t size)
{
  if (count < *room) {
    return things;
  }
  *room = *room ? 2 * *room : 8;
  void *more = arena_alloc (arena, *room, size);
  if (count > 0) {
    memcpy (more, things, count * size);
  }
  return more;
}

static bool
same_text (const char *a, const char *b)
{
  return a == b || (a && b && strcmp (a, b) == 0);
}

void
evaluation_assume (struct evaluation *ev, const struct assumption *new)
{
  if (!ev->describe) {
    return;
  }
  for (size_t i = 0; i < ev->assumption_count; i++) {
    const struct assumption *old = &ev->assumptions[i];
    if (old->kind == new->kind && same_text (old->fact[0], new->fact[0])
        && same_text (old->fact[1], new->fact[1])) {
      return;
    }
  }
  ev->assumptions = room_for_one (ev->arena, ev->assumptions, ev->assumption_count,
                                  &ev->assumption_room, sizeof *ev->assumptions);
  ev->assumptions[ev->assumption_count++] = *new;
}

void
evaluation_use (struct evaluation *ev, struct definition *definition)
{
  for (size_t i = 0; i < ev->used_count; i++)
    if (ev->used[i] == definition) {
      return;
    }
  ev->used = room_for_one (ev->arena, ev->used, ev->used_count, &ev->used_room,
                           sizeof *ev->used);
  ev->used[ev->used_count++] = definition;
}

/* Does a word of a unit begin or end between these two characters?  */
static bool
parts_words (char outside)
{
  return outside == '\0' || strchr ("*/^()", outside) != NULL;
}

/* The text of a unit with the word FROM of it replaced by TO; null: it has no such word.  */
static const char *
replaced_word (struct arena *arena, const char *text, const char *from, const char *to)
{
  size_t n = strlen (from);
  for (const char *at = strstr (text, from); at; at = strstr (at + 1, from))
    if (parts_words (at == text ? '\0' : at[-1]) && parts_words (at[n])) {
      return arena_format (arena, "%.*s%s%s", (int) (at - text), text, to, at + n);
    }
  return NULL;
}

const struct unit *
evaluation_unit (struct evaluation *ev, const struct unit *unit)
{
  const struct trial *trial = &ev->settings->trial;
  const char *text = trial->from && unit
                       ? replaced_word (ev->arena, unit->spelling, trial->from, trial->to) : NULL;
  const struct unit *other = text ? unit_find (ev->session->vocabulary.units, text, strlen (text),
                                               NULL) : NULL;
  return other ? other : unit;
}
