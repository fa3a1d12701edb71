#include "config.h"
#include "balance/column_order.h"

#include <stdbool.h>
#include <string.h>
#include "support/arena.h"

/* A row, or what rows were united to.  */
struct set { size_t count; size_t *column; bool gone; };

/* The sets a column is in; those that are gone are dropped now and then.  */
struct member { size_t count, room; size_t *set; };

/* In the heap an entry may be old: it counts if it has the column's score.  */
struct entry { size_t score, column; };

/* Of the steps that a column must wait for, how many make it as late as twice the fill would.  Ends
   of a line of units have less fill than its middle: without this they went one after the other,
   and a line of 1000 units with six components was 6000 steps deep.  With it 67, for half as much
   fill again; 2 to 20 do as well.                                                               */
enum { STEPS_LIKE_FILL = 8 };

struct order {
  struct arena *arena;
  size_t sets;
  struct set *set;
  struct member *member;         /* by column */
  size_t *score;                 /* by column */
  size_t *depth;                 /* by column: the longest way of steps it waits for */
  bool *done;
  size_t *mark;                  /* by column: the last union it was put in */
  struct entry *heap;
  size_t heap_count, heap_room;
};

/* ---- The heap ---- */

static bool
is_before (struct entry a, struct entry b)
{
  return a.score != b.score ? a.score < b.score : a.column < b.column;
}

static void
heap_push (struct order *o, struct entry entry)
{
  if (o->heap_count == o->heap_room) {
    size_t room = 2 * o->heap_room + 64;
    struct entry *bigger = ARENA_ARRAY (o->arena, room, struct entry);
    if (o->heap_count > 0) {
      memcpy (bigger, o->heap, o->heap_count * sizeof *bigger);
    }
    o->heap = bigger;
    o->heap_room = room;
  }
  size_t at = o->heap_count++;
  for (; at > 0 && is_before (entry, o->heap[(at - 1) / 2]); at = (at - 1) / 2) {
    o->heap[at] = o->heap[(at - 1) / 2];
  }
  o->heap[at] = entry;
}

static struct entry
heap_pop (struct order *o)
{
  struct entry first = o->heap[0], last = o->heap[--o->heap_count];
  size_t at = 0;
  for (size_t child = 1; child < o->heap_count; child = 2 * at + 1) {
    child += child + 1 < o->heap_count && is_before (o->heap[child + 1], o->heap[child]);
    if (!is_before (o->heap[child], last)) {
      break;
    }
    o->heap[at] = o->heap[child];
    at = child;
  }
  o->heap[at] = last;
  return first;
}

/* ---- Sets and columns ---- */

static void
member_add (struct order *o, size_t column, size_t set)
{
  struct member *member = &o->member[column];
  if (member->count == member->room) {
    size_t kept = 0;
    for (size_t i = 0; i < member->count; i++) {
      if (!o->set[member->set[i]].gone) {
        member->set[kept++] = member->set[i];
      }
    }
    member->count = kept;
  }
  if (member->count == member->room) {
    size_t room = 2 * member->room + 4, *bigger = ARENA_ARRAY (o->arena, room, size_t);
    if (member->count > 0) {
      memcpy (bigger, member->set, member->count * sizeof *bigger);
    }
    member->set = bigger;
    member->room = room;
  }
  member->set[member->count++] = set;
}

/* How many columns its sets have besides, counted once for each set; more if it waits for many
   steps.  */
static void
rate (struct order *o, size_t column)
{
  const struct member *member = &o->member[column];
  size_t score = 0;
  for (size_t i = 0; i < member->count; i++) {
    const struct set *set = &o->set[member->set[i]];
    score += set->gone ? 0 : set->count - 1;
  }
  o->score[column] = score * (STEPS_LIKE_FILL + o->depth[column]);
  heap_push (o, (struct entry) { o->score[column], column });
}

/* Unites the sets of COLUMN without it.  */
static void
eliminate (struct order *o, size_t column)
{
  struct member *member = &o->member[column];
  size_t count = 0, most = 0, united = o->sets;
  for (size_t i = 0; i < member->count; i++) {
    const struct set *set = &o->set[member->set[i]];
    most += set->gone ? 0 : set->count;
  }
  size_t *columns = ARENA_ARRAY (o->arena, most + 1, size_t);
  o->mark[column] = united + 1;
  for (size_t i = 0; i < member->count; i++) {
    struct set *set = &o->set[member->set[i]];
    for (size_t k = 0; !set->gone && k < set->count; k++) {
      if (o->mark[set->column[k]] != united + 1) {
        o->mark[set->column[k]] = united + 1;
        columns[count++] = set->column[k];
      }
    }
    set->gone = true;
  }
  o->set[o->sets++] = (struct set) { count, columns, count == 0 };
  for (size_t k = 0; k < count; k++) {
    member_add (o, columns[k], united);
  }
  for (size_t k = 0; k < count; k++) {
    size_t *depth = &o->depth[columns[k]];
    *depth = *depth > o->depth[column] ? *depth : o->depth[column] + 1;
    rate (o, columns[k]);
  }
}

static void
take_sets (struct order *o, const struct sets *of)
{
  for (size_t i = 0; i < of->count; i++) {
    size_t count = of->start[i + 1] - of->start[i];
    size_t *columns = ARENA_ARRAY (o->arena, count + 1, size_t), kept = 0;
    for (size_t k = of->start[i]; k < of->start[i + 1]; k++) {
      size_t column = of->column[k];
      if (o->mark[column] != o->sets + 1) {
        o->mark[column] = o->sets + 1;
        columns[kept++] = column;
        member_add (o, column, o->sets);
      }
    }
    o->set[o->sets++] = (struct set) { kept, columns, kept == 0 };
  }
}

size_t *
column_order (struct arena *arena, size_t columns, size_t many, const struct sets of[])
{
  size_t *order = ARENA_ARRAY (arena, columns + 1, size_t), count = 0, most = columns;
  struct order o = { .arena = arena_create () };
  for (size_t i = 0; i < many; i++) {
    most += of[i].count;
  }
  o.set = ARENA_ARRAY (o.arena, most + 1, struct set);
  o.member = ARENA_ARRAY (o.arena, columns + 1, struct member);
  o.score = ARENA_ARRAY (o.arena, columns + 1, size_t);
  o.depth = ARENA_ARRAY (o.arena, columns + 1, size_t);
  o.done = ARENA_ARRAY (o.arena, columns + 1, bool);
  o.mark = ARENA_ARRAY (o.arena, columns + 1, size_t);
  for (size_t i = 0; i < many; i++) {
    take_sets (&o, &of[i]);
  }
  for (size_t j = 0; j < columns; j++) {
    rate (&o, j);
  }
  while (o.heap_count > 0) {
    struct entry next = heap_pop (&o);
    if (!o.done[next.column] && next.score == o.score[next.column]) {
      o.done[next.column] = true;
      order[count++] = next.column;
      eliminate (&o, next.column);
    }
  }
  arena_destroy (o.arena);
  return order;
}
