#include "config.h"
#include "language/session_private.h"

#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"

/* ---- Trees ---- */

static void
visit_node (const struct node *node, void (*visit) (const struct node *, void *), void *with)
{
  for (; node; node = node->next) {
    visit (node, with);
    visit_node (node->a, visit, with);
    visit_node (node->b, visit, with);
    visit_node (node->c, visit, with);
    visit_node (node->items, visit, with);
  }
}

void
tree_visit (const struct statement *s, void (*visit) (const struct node *, void *), void *with)
{
  for (const struct statement *line = s->next; line; line = line->next) {
    visit_node (line->value, visit, with);
    visit_node (line->claim, visit, with);
    visit_node (line->inlets, visit, with);
    visit_node (line->outlets, visit, with);
  }
  visit_node (s->value, visit, with);
  for (const struct stated_property *p = s->stated; p; p = p->next) {
    visit_node (p->quantity, visit, with);
  }
  for (const struct target *t = s->targets; t; t = t->next) {
    visit_node (t->counted_as, visit, with);
    visit_node (t->burning, visit, with);
    visit_node (t->factor ? t->factor->quantity : NULL, visit, with);
    visit_node (t->state, visit, with);
    visit_node (t->with, visit, with);
  }
}

struct mention { const char *name; const struct node *found; };

static void
look_for (const struct node *node, void *with)
{
  struct mention *m = with;
  bool name = node->kind == NODE_NAME || node->kind == NODE_PART || node->kind == NODE_SHARE;
  if (name && !m->found && strcmp (node->text, m->name) == 0) {
    m->found = node;
  }
}

const struct node *
tree_mention (const struct statement *s, const char *name)
{
  struct mention m = { name, NULL };
  tree_visit (s, look_for, &m);
  return m.found;
}

const struct node *
tree_new_gas (const struct node *node)
{
  while (node && (node->kind == NODE_AT || node->kind == NODE_OF || node->kind == NODE_DRIED
                  || node->kind == NODE_WETTED || node->kind == NODE_SATURATED
                  || node->kind == NODE_NORMALISED || node->kind == NODE_WITHOUT)) {
    node = node->kind == NODE_OF ? node->b : node->a;
  }
  return node && (node->kind == NODE_LIST || node->kind == NODE_ADD || node->kind == NODE_SUBTRACT
                  || node->kind == NODE_KEEPING) ? node : NULL;
}

/* ---- Who leans on whom ---- */

/* What `mentioned` holds of a name: the name of the one definition that mentioned it, or this.  */
#define SEVERAL(session) ((void *) (session)->mentioned)

/* A balance does not lean on the streams it makes itself.  */
static bool
is_own (const struct definition *d, const struct definition *need)
{
  return d->kind == NAME_BALANCE && need && need->maker && strcmp (need->maker, d->name) == 0;
}

static bool
mentions (const struct session *s, const struct definition *d, const char *name)
{
  for (size_t i = 0; i < d->need_count; i++)
    if (strcmp (d->needs[i], name) == 0) {
      return !is_own (d, name_find (s, name, strlen (name)));
    }
  return false;
}

/* LOOK tells one search from another, so that a definition is looked through once in each.  */
static bool
leans (const struct session *s, struct definition *d, const char *name, unsigned long look)
{
  if (d->looked == look) {
    return d->leans;
  }
  d->looked = look;
  d->leans = mentions (s, d, name);
  for (size_t i = 0; !d->leans && i < d->need_count; i++) {
    struct definition *need = name_find (s, d->needs[i], strlen (d->needs[i]));
    d->leans = need && need != d && !is_own (d, need) && leans (s, need, name, look);
  }
  return d->leans;
}

bool
definition_leans (struct session *s, struct definition *d, const char *name)
{
  return leans (s, d, name, ++s->look);
}

/* The usual cases, without a look at every definition: a new name nobody could know, and a stream
   that only the balance which makes it ever mentioned.                                          */
static bool
nobody_leans (const struct session *s, const char *name)
{
  const void *by = map_find (s->mentioned, name, strlen (name));
  if (!by || by == SEVERAL (s)) {
    return !by;
  }
  const struct definition *only = name_find (s, by, strlen (by));
  return only && is_own (only, name_find (s, name, strlen (name)));
}

bool
name_is_shared (const struct session *s, const char *name)
{
  return map_find (s->mentioned, name, strlen (name)) == SEVERAL (s);
}

size_t
names_leaning (struct session *s, struct arena *arena, const char *name,
               struct definition ***leaning)
{
  size_t n = 0;
  if (nobody_leans (s, name)) {
    *leaning = NULL;
    return 0;
  }
  *leaning = ARENA_ARRAY (arena, s->count, struct definition *);
  s->look++;
  for (size_t i = 0; i < s->count; i++)
    if (leans (s, s->order[i], name, s->look)) {
      (*leaning)[n++] = s->order[i];
    }
  return n;
}

void
names_remember_mentions (struct session *s, struct definition *d)
{
  char *by = NULL;
  for (size_t i = 0; i < d->need_count; i++) {
    size_t n = strlen (d->needs[i]);
    const char *before = map_find (s->mentioned, d->needs[i], n);
    if (before == SEVERAL (s) || (before && strcmp (before, d->name) == 0)) {
      continue;
    }
    by = by ? by : arena_string (s->arena, d->name);
    map_put (s->mentioned, d->needs[i], n, before ? SEVERAL (s) : by);
  }
}

/* ---- What is still true ---- */

void
names_changed (struct session *s, const char *name)
{
  struct arena *arena = arena_create ();
  struct definition **leaning = s->order;
  size_t n = name ? names_leaning (s, arena, name, &leaning) : s->count;
  for (size_t i = 0; i < n; i++) {
    leaning[i]->fresh = false;
  }
  arena_destroy (arena);
}

void
names_refresh (struct session *s)
{
  struct arena *arena = arena_create ();
  for (size_t i = 0; i < s->count; i++)
    if (!s->order[i]->fresh) {
      /* One that fails now says so where it is used.  */
      struct fault unheard;
      fault_init (&unheard, arena);
      (void) !definition_refresh (s, s->order[i], &unheard);
    }
  arena_destroy (arena);
}
