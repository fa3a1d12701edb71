#include "config.h"
#include "language/session_private.h"

#include <string.h>
#include "result/result.h"
#include "support/arena.h"
#include "support/memory.h"

/* Drops the oldest group once the log is full: what it would have brought back is let go.  */
static void
drop_oldest (struct session *s)
{
  unsigned group = s->changes[0].group;
  size_t n = 0;
  while (n < s->change_count && s->changes[n].group == group) {
    definition_release (s->changes[n].before);
    definition_release (s->changes[n].after);
    n++;
  }
  memmove (s->changes, s->changes + n, (s->change_count - n) * sizeof *s->changes);
  s->change_count -= n;
}

void
undo_note (struct session *s, const char *name, struct definition *before,
           struct definition *after, size_t place, const struct settings *settings_before)
{
  if (s->groups_open == 0) {
    s->group++;
  }
  if (s->change_count >= UNDO_MOST && s->changes[0].group != s->group) {
    drop_oldest (s);
  }
  if (s->change_count == s->change_room) {
    s->change_room = s->change_room ? 2 * s->change_room : 16;
    s->changes = memory_resize (s->changes, s->change_room, sizeof *s->changes);
  }
  definition_hold (before);
  definition_hold (after);
  s->changes[s->change_count++] = (struct change) {
    .group = s->group, .name = name, .before = before, .after = after, .place = place,
    .settings = settings_before ? *settings_before : s->settings
  };
}

static void
take_back (struct session *s, const struct change *c)
{
  if (c->name) {
    name_place (s, c->name, c->before, c->place);
    definition_hold (c->before);          /* the session's hold again */
    definition_release (c->after);        /* and the session's hold on what went */
  } else {
    s->settings = c->settings;
    names_changed (s, NULL);
  }
}

/* Takes back every change of the newest group; WHAT names them.  */
static const char *
take_back_group (struct session *s, struct arena *arena)
{
  unsigned group = s->changes[s->change_count - 1].group;
  const char *what = NULL;
  while (s->change_count > 0 && s->changes[s->change_count - 1].group == group) {
    struct change c = s->changes[--s->change_count];
    const char *name = arena_string (arena, c.name ? c.name : "a setting");
    what = what ? arena_format (arena, "%s, %s", name, what) : name;
    take_back (s, &c);
    definition_release (c.before);
    definition_release (c.after);
  }
  names_refresh (s);
  return what;
}

bool
undo_last (struct session *s, struct result *result, struct fault *fault)
{
  if (s->change_count == 0) {
    return fault_set (fault, MESSAGE_UNDO_EMPTY, NULL, NULL);
  }
  result_remark (result, MESSAGE_NOTE_UNDONE, take_back_group (s, result->arena), NULL);
  return true;
}

void
undo_group_open (struct session *s)
{
  if (s->groups_open++ == 0) {
    s->group++;
  }
}

void
undo_group_close (struct session *s)
{
  s->groups_open--;
}

void
undo_group_drop (struct session *s)
{
  if (--s->groups_open == 0 && s->change_count > 0
      && s->changes[s->change_count - 1].group == s->group) {
    struct arena *arena = arena_create ();
    (void) take_back_group (s, arena);
    arena_destroy (arena);
  }
}

void
undo_clear (struct session *s)
{
  while (s->change_count > 0) {
    drop_oldest (s);
  }
  memory_release (s->changes);
}
