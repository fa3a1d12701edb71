#include "config.h"
#include "language/session_private.h"

#include <string.h>
#include "gas/air.h"
#include "gas/reference.h"
#include "gas/species.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/map.h"
#include "support/memory.h"
#include "support/text.h"

/* ---- The list of names ---- */

struct definition *
name_find (const struct session *s, const char *name, size_t length)
{
  return map_find (s->names, name, length);
}

size_t
name_place (struct session *s, const char *name, struct definition *d, size_t place)
{
  size_t length = strlen (name);
  struct definition *old = map_find (s->names, name, length);
  size_t at = s->count;
  map_put (s->names, name, length, d);
  if (old) {
    for (at = 0; s->order[at] != old; at++) {
      continue;
    }
    if (d) {
      s->order[at] = d;
    } else {
      memmove (&s->order[at], &s->order[at + 1], (s->count - at - 1) * sizeof *s->order);
      s->count--;
    }
  } else if (d) {
    if (s->count == s->room) {
      s->room = s->room ? 2 * s->room : 32;
      s->order = memory_resize (s->order, s->room, sizeof *s->order);
    }
    at = place < s->count ? place : s->count;
    memmove (&s->order[at + 1], &s->order[at], (s->count - at) * sizeof *s->order);
    s->order[at] = d;
    s->count++;
  }
  names_changed (s, name);
  return at;
}

void
names_clear (struct session *s)
{
  for (size_t i = 0; i < s->count; i++) {
    definition_release (s->order[i]);
  }
  memory_release (s->order);
  map_destroy (s->names);
  map_destroy (s->mentioned);
}

const char *
names_touching (const struct session *s, struct arena *arena, unsigned bits)
{
  const char *names = NULL;
  for (size_t i = 0; i < s->count; i++)
    if (s->order[i]->touched & bits) {
      names = names ? arena_format (arena, "%s, %s", names, s->order[i]->name)
                    : s->order[i]->name;
    }
  return names;
}

/* ---- Names nobody knows ---- */

struct nearest { const char *to, *best; size_t distance; };

static void
nearer (struct nearest *n, const char *candidate)
{
  if (n->to[0] == '\0' || n->to[1] == '\0') {
    return;                              /* any letter is one slip away from any other */
  }
  size_t limit = text_reach (n->to) < n->distance ? text_reach (n->to) : n->distance - 1;
  size_t distance = n->distance ? text_distance (n->to, candidate, limit) : 1;
  if (distance <= limit && distance < n->distance) {
    n->best = candidate;
    n->distance = distance;
  }
}

static const char *
nearest_name (const struct session *s, const char *name)
{
  struct nearest n = { name, NULL, (size_t) 1000 };
  for (size_t i = 0; i < s->count; i++) {
    nearer (&n, s->order[i]->name);
  }
  for (size_t i = 0; i < reference_table_size (s->references); i++) {
    nearer (&n, reference_table_at (s->references, i)->name);
  }
  const char *key = species_nearest (s->vocabulary.species, name, strlen (name));
  if (key) {
    nearer (&n, key);
    n.best = n.best ? n.best : key;
  }
  return n.best;
}

static bool
known (struct session *s, const char *name, size_t n)
{
  const struct species *species;
  const char *candidates;
  return name_find (s, name, n) || air_is_name (name, n)
         || species_find (s->vocabulary.species, name, n, &species, &candidates) != SPECIES_NONE;
}

/* `feed-purge`: a sum whose blanks are missing.  */
static const char *
missing_blanks (struct evaluation *ev, const char *name)
{
  for (const char *sign = name + 1; *name && *sign; sign++)
    if ((*sign == '-' || *sign == '+') && sign[1]
        && known (ev->session, name, (size_t) (sign - name))
        && known (ev->session, sign + 1, strlen (sign + 1))) {
      return arena_format (ev->arena, "%.*s %c %s", (int) (sign - name), name, *sign, sign + 1);
    }
  return NULL;
}

/* A name of the tables where one of the user's, or one of another kind, is needed.  */
static bool
is_of_tables (struct evaluation *ev, const struct node *node)
{
  const char *name = node->text, *of = NULL, *candidates;
  size_t n = strlen (name);
  const struct species *species;
  enum species_match match = species_find (ev->session->vocabulary.species, name, n, &species,
                                           &candidates);
  if ((match == SPECIES_KEY || match == SPECIES_SYNONYM || air_is_name (name, n))
      && !name_find (ev->session, name, n)) {
    of = match == SPECIES_NONE ? "gas of the tables" : "component";
  }
  for (size_t i = 0; !of && i < reference_table_size (ev->session->references); i++)
    if (strcmp (reference_table_at (ev->session->references, i)->name, name) == 0) {
      of = "name of reference conditions (at ...)";
    }
  if (of) {
    fault_set_at (ev->fault, MESSAGE_KIND_WRONG, node->at,
                  arena_format (ev->arena, "'%s' is a %s and cannot stand here", name, of), NULL);
  }
  return of != NULL;
}

bool
name_unknown (struct evaluation *ev, const struct node *node)
{
  if (is_of_tables (ev, node)) {
    return false;
  }
  const char *spaced = missing_blanks (ev, node->text);
  const char *near = spaced ? spaced : nearest_name (ev->session, node->text);
  if (!near && node->at.first == 1) {
    near = statement_like (node->text);
  }
  return fault_set_at (ev->fault, MESSAGE_NAME_UNKNOWN, node->at, node->text,
                       near ? arena_format (ev->arena, "did you mean '%s'?", near)
                            : "'list' shows your names, 'list components' the rest");
}

/* ---- Defining ---- */

/* Has a balance a boundary of its own name?  That stands behind `in`, and is no mention of it.  */
static bool
is_boundary_too (const struct statement *balance)
{
  for (const struct statement *line = balance->next; line; line = line->next)
    if (line->inlets && line->name && strcmp (line->name, balance->name) == 0) {
      return true;
    }
  return false;
}

/* Refuses a definition that would depend on itself; FROM holds its trees.  */
static bool
not_circular (struct session *s, const struct statement *from, struct fault *fault)
{
  const struct node *own = tree_mention (from, from->name);
  bool gas = from->kind == STATEMENT_GAS;
  const bool balance = from->kind == STATEMENT_BALANCE;
  if (own && balance && !is_boundary_too (from)) {
    return fault_set_at (fault, MESSAGE_KIND_WRONG, own->at,
                         arena_format (fault->arena, "'%s' is what the balance is called",
                                       from->name),
                         "give the stream or the balance a name of its own");
  }
  if (own && !balance) {
    if (!known (s, from->name, strlen (from->name))) {
      fault_set_at (fault, MESSAGE_NAME_UNKNOWN, own->at, own->text,
                    "a name is defined before it is used");
      return false;
    }
    struct place at = own->at;
    at.last = at.first + (int) utf8_characters (own->text, strlen (own->text)) - 1;
    fault_set_at (fault, MESSAGE_SELF_REFERENCE, at, from->name,
                  gas ? "a new name, or in place: normalise NAME" : "choose a new name");
    return false;
  }
  struct definition **leaning;
  size_t n = names_leaning (s, fault->arena, from->name, &leaning);
  for (size_t i = 0; i < n; i++) {
    bool made = leaning[i]->maker && strcmp (leaning[i]->maker, from->name) == 0;
    const struct node *use = made ? NULL : tree_mention (from, leaning[i]->name);
    if (use) {
      return fault_set_at (fault, MESSAGE_SELF_REFERENCE, use->at, from->name,
                           "what it mentions leans on it already");
    }
  }
  return true;
}

static const char *
kind_name (enum name_kind kind)
{
  static const char *const names[] = { "gas", "stream", "quantity", "state", "sheet",
                                       "balance" };
  return names[kind];
}

/* Works out all that leans on a new definition; one that fails refuses it.  */
static bool
dependents_hold (struct session *s, const struct statement *from, enum name_kind before,
                 struct fault *fault)
{
  struct definition **leaning;
  size_t n = names_leaning (s, fault->arena, from->name, &leaning);
  for (size_t i = 0; i < n; i++) {
    struct fault inside;
    fault_init (&inside, fault->arena);
    /* A stream of a balance says where it is used that it is no longer fixed.  */
    if (!definition_refresh (s, leaning[i], &inside) && !leaning[i]->maker) {
      struct text why;
      text_init (&why);
      message_write (&why, message_sentence (inside.kind), inside.fact);
      fault_set_at (fault, MESSAGE_NAME_IN_USE, from->name_at, from->name,
                    arena_format (fault->arena, "%s depends on it as a %s", leaning[i]->name,
                                  kind_name (before)));
      fault_hint (fault, "with this, %s would fail: %s", leaning[i]->name, why.bytes);
      text_clear (&why);
      return false;
    }
  }
  return true;
}

/* Places counted in a definition's source, counted in the line it was typed in.  */
static void
shift_place (struct session *s, struct fault *fault, const struct statement *from,
             const char *source)
{
  if (from->kind == STATEMENT_SHEET || from->kind == STATEMENT_BALANCE) {
    block_place (s, fault);
    return;
  }
  if (strcmp (source, from->source) != 0) {
    fault->at = from->name_at;
    return;
  }
  if (fault->at.line == 1) {
    fault->at.first += from->at.first - 1;
    fault->at.last += from->at.first - 1;
  }
  fault->at.line += from->at.line - 1;
}

void
name_note_hidden (struct session *s, const char *name, struct result *result)
{
  const struct species *species;
  const char *candidates;
  size_t n = strlen (name);
  if (air_is_name (name, n)) {
    result_remark (result, MESSAGE_NOTE_HIDES_AIR, NULL, NULL);
  } else if (species_find (s->vocabulary.species, name, n, &species, &candidates)
             == SPECIES_SYNONYM) {
    result_remark (result, MESSAGE_NOTE_HIDES, name, species->key);
  }
}

bool
name_define (struct session *s, const struct statement *from, const char *source,
             enum name_kind kind, struct result *result, struct fault *fault)
{
  struct definition *d = definition_make (s, source, kind, fault);
  if (!d || !not_circular (s, d->statement, fault)) {
    shift_place (s, fault, from, source);
    definition_release (d);
    return false;
  }
  struct definition *before = name_find (s, d->name, strlen (d->name));
  definition_hold (before);
  size_t place = name_place (s, d->name, d, s->count);
  names_remember_mentions (s, d);
  bool done = definition_refresh (s, d, fault);
  if (!done) {
    shift_place (s, fault, from, source);
  }
  done = done && dependents_hold (s, from, before ? before->kind : kind, fault);
  if (done) {
    undo_note (s, d->name, before, d, place, NULL);
    definition_release (before);          /* the session's hold; the log has its own */
    if (!before) {
      name_note_hidden (s, from->name, result);
    }
  } else {
    name_place (s, d->name, before, place);
    names_refresh (s);
    definition_release (d);
  }
  definition_release (before);
  return done;
}

/* ---- Forgetting ---- */

static bool
is_listed (const struct node *names, const char *name)
{
  for (; names; names = names->next)
    if (strcmp (names->text, name) == 0) {
      return true;
    }
  return false;
}

static bool
is_made_by (const struct definition *d, const char *balance)
{
  return d->maker && strcmp (d->maker, balance) == 0;
}

static bool
nobody_else_needs (struct session *s, const struct node *names, const struct node *name,
                   struct fault *fault)
{
  const char *users = NULL;
  for (size_t i = 0; i < s->count; i++)
    if (!is_listed (names, s->order[i]->name) && !is_made_by (s->order[i], name->text)
        && definition_leans (s, s->order[i], name->text)) {
      users = users ? arena_format (fault->arena, "%s, %s", users, s->order[i]->name)
                    : s->order[i]->name;
    }
  return !users
         || fault_set_at (fault, MESSAGE_NAME_IN_USE, name->at, name->text,
                          arena_format (fault->arena, "%s depend%s on it", users,
                                        strchr (users, ',') ? "" : "s"));
}

bool
name_forget (struct session *s, const struct node *names, struct fault *fault)
{
  for (const struct node *n = names; n; n = n->next) {
    if (!name_find (s, n->text, strlen (n->text))) {
      struct evaluation ev;
      evaluation_init (&ev, s, NULL, fault);
      return name_unknown (&ev, n);
    }
    if (!nobody_else_needs (s, names, n, fault)) {
      return false;
    }
  }
  undo_group_open (s);
  for (const struct node *n = names; n; n = n->next) {
    struct definition *d = name_find (s, n->text, strlen (n->text));
    if (d && d->kind == NAME_BALANCE) {
      balance_drop_made (s, n->text);
    }
    if (d) {
      size_t place = name_place (s, n->text, NULL, 0);
      undo_note (s, d->name, d, NULL, place, NULL);
      definition_release (d);
    }
  }
  undo_group_close (s);
  return true;
}
