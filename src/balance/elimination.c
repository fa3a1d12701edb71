#include "config.h"
#include "balance/elimination.h"

#include <math.h>
#include <string.h>
#include "balance/rank.h"
#include "balance/system.h"
#include "support/arena.h"
#include "support/memory.h"

/* What is left of a difference of two numbers when it is below this part of them is rounding.  */
static const double cancelled = 1e-12;
/* No pivot is less than this part of the largest entry of its row; those of columns that stand in
   one row only may be smaller, as nothing is eliminated with them.                              */
static const double threshold = 0.1, lone_threshold = 0.01;
/* Nor less than this.  */
static const double least_pivot = 1e-10;
/* Rows of the lowest count looked at for a pivot.  */
enum { LOOKED_AT = 4 };

/* A row while it is worked on.  */
struct active { size_t count, room, *column; double *value; };
/* The rows a column stands in, and some it no longer does.  */
struct list { size_t count, room, *row; };

/* Step p took row `row` and column `column`; the row's other entries over the pivot lie in
   `upper`, what was taken of it from other rows in `lower`.                                      */
struct step { size_t row, column, upper, lower; double pivot; };
struct pool { size_t count, room, *index; double *value; };

struct elimination {
  struct arena *arena;
  size_t rows, columns;
  size_t steps;
  struct step *step;             /* one more than there are: where the pools end */
  struct pool upper, lower;
  size_t core_rows, core_columns;
  size_t *core_row, *core_column;
  struct space core;
};

struct work {
  struct elimination *out;
  struct active *row;
  struct list *list;
  size_t *in_column;             /* by column: rows it stands in */
  bool *row_done, *column_done;
  size_t *head, *next, *before;  /* rows by count: head[count]; NOWHERE ends */
  size_t *where;                 /* by column: place in the row at hand, 1 too many */
  size_t lone_count, lone_room, *lone;      /* columns that came down to one row */
  size_t rows_left, columns_left;           /* with entries */
};

/* ---- Growing lists ---- */

static void
pool_add (struct pool *pool, size_t index, double value)
{
  if (pool->count == pool->room) {
    pool->room = 2 * pool->room + 256;
    pool->index = memory_resize (pool->index, pool->room, sizeof *pool->index);
    pool->value = memory_resize (pool->value, pool->room, sizeof *pool->value);
  }
  pool->index[pool->count] = index;
  pool->value[pool->count++] = value;
}

/* Moves a pool into the arena.  */
static void
pool_settle (struct arena *arena, struct pool *pool)
{
  size_t *index = ARENA_ARRAY (arena, pool->count + 1, size_t);
  double *value = ARENA_ARRAY (arena, pool->count + 1, double);
  if (pool->count > 0) {
    memcpy (index, pool->index, pool->count * sizeof *index);
    memcpy (value, pool->value, pool->count * sizeof *value);
  }
  memory_release (pool->index);
  memory_release (pool->value);
  pool->index = index;
  pool->value = value;
}

static void
list_add (struct list *list, size_t row)
{
  if (list->count == list->room) {
    list->room = 2 * list->room + 4;
    list->row = memory_resize (list->row, list->room, sizeof *list->row);
  }
  list->row[list->count++] = row;
}

static void
active_add (struct active *row, size_t column, double value)
{
  if (row->count == row->room) {
    row->room = 2 * row->room + 4;
    row->column = memory_resize (row->column, row->room, sizeof *row->column);
    row->value = memory_resize (row->value, row->room, sizeof *row->value);
  }
  row->column[row->count] = column;
  row->value[row->count++] = value;
}

/* ---- Rows by how many entries they have ---- */

static void
unlink_row (struct work *work, size_t i)
{
  size_t count = work->row[i].count, next = work->next[i], before = work->before[i];
  if (before == NOWHERE) {
    work->head[count] = next;
  } else {
    work->next[before] = next;
  }
  if (next != NOWHERE) {
    work->before[next] = before;
  }
}

static void
link_row (struct work *work, size_t i)
{
  size_t count = work->row[i].count, first = work->head[count];
  work->next[i] = first;
  work->before[i] = NOWHERE;
  work->head[count] = i;
  if (first != NOWHERE) {
    work->before[first] = i;
  }
}

/* Column J stands in one row fewer.  */
static void
column_loses (struct work *work, size_t j)
{
  work->in_column[j]--;
  if (work->in_column[j] == 0) {
    work->columns_left--;
  } else if (work->in_column[j] == 1) {
    if (work->lone_count == work->lone_room) {
      work->lone_room = 2 * work->lone_room + 64;
      work->lone = memory_resize (work->lone, work->lone_room, sizeof *work->lone);
    }
    work->lone[work->lone_count++] = j;
  }
}

static size_t
place_in (const struct active *row, size_t column)
{
  for (size_t e = 0; e < row->count; e++) {
    if (row->column[e] == column) {
      return e;
    }
  }
  return NOWHERE;
}

static void
remove_entry (struct work *work, size_t i, size_t e)
{
  struct active *row = &work->row[i];
  column_loses (work, row->column[e]);
  row->count--;
  row->column[e] = row->column[row->count];
  row->value[e] = row->value[row->count];
}

/* ---- Elimination ---- */

/* Row K less FACTOR times row I, both without the pivot's column.  */
static void
subtract (struct work *work, size_t k, size_t i, double factor)
{
  struct active *row = &work->row[k];
  const struct active *by = &work->row[i];
  for (size_t e = 0; e < row->count; e++) {
    work->where[row->column[e]] = e + 1;
  }
  for (size_t e = 0; e < by->count; e++) {
    size_t j = by->column[e], at = work->where[j];
    double change = factor * by->value[e];
    if (at > 0) {
      double old = row->value[at - 1];
      row->value[at - 1] -= change;
      if (fabs (old - change) <= cancelled * (fabs (old) + fabs (change))) {
        work->where[j] = 0;
        work->where[row->column[row->count - 1]]
          = row->column[row->count - 1] == j ? 0 : at;
        remove_entry (work, k, at - 1);
      }
    } else {
      active_add (row, j, -change);
      work->where[j] = row->count;
      list_add (&work->list[j], k);
      work->in_column[j]++;
    }
  }
  for (size_t e = 0; e < row->count; e++) {
    work->where[row->column[e]] = 0;
  }
}

/* Takes the pivot's column out of every other row.  */
static void
eliminate (struct work *work, size_t i, size_t j, double pivot)
{
  const struct list *list = &work->list[j];
  for (size_t n = 0; n < list->count; n++) {
    size_t k = list->row[n], e = work->row_done[k] ? NOWHERE : place_in (&work->row[k], j);
    if (e != NOWHERE) {
      double factor = work->row[k].value[e] / pivot;
      unlink_row (work, k);
      remove_entry (work, k, e);
      subtract (work, k, i, factor);
      link_row (work, k);
      work->rows_left -= work->row[k].count == 0 ? 1 : 0;
      pool_add (&work->out->lower, k, factor);
    }
  }
}

/* One step with row I and the entry at E.  */
static void
take (struct work *work, size_t i, size_t e)
{
  struct elimination *out = work->out;
  struct active *row = &work->row[i];
  size_t j = row->column[e];
  double pivot = row->value[e];
  struct step *step = &out->step[out->steps++];
  unlink_row (work, i);
  work->row_done[i] = work->column_done[j] = true;
  work->rows_left--;
  *step = (struct step) { i, j, out->upper.count, out->lower.count, pivot };
  remove_entry (work, i, e);
  for (size_t n = 0; n < row->count; n++) {
    pool_add (&out->upper, row->column[n], row->value[n] / pivot);
  }
  eliminate (work, i, j, pivot);
  for (size_t n = 0; n < row->count; n++) {
    column_loses (work, row->column[n]);
  }
  step[1] = (struct step) { NOWHERE, NOWHERE, out->upper.count, out->lower.count, 0 };
}

static double
largest_entry (const struct active *row)
{
  double most = 0;
  for (size_t e = 0; e < row->count; e++) {
    most = fmax (most, fabs (row->value[e]));
  }
  return most;
}

/* A column that stands in one row only; false: none is left that has a fair entry there.  */
static bool
take_lone (struct work *work)
{
  while (work->lone_count > 0) {
    size_t j = work->lone[--work->lone_count];
    const struct list *list = &work->list[j];
    if (work->column_done[j] || work->in_column[j] != 1) {
      continue;
    }
    for (size_t n = 0; n < list->count; n++) {
      size_t i = list->row[n], e = work->row_done[i] ? NOWHERE : place_in (&work->row[i], j);
      if (e != NOWHERE) {
        double size = fabs (work->row[i].value[e]);
        if (size >= lone_threshold * largest_entry (&work->row[i]) && size > least_pivot) {
          take (work, i, e);
          return true;
        }
        break;
      }
    }
  }
  return false;
}

/* The best entry of row I: of those large enough the one whose column stands in fewest rows.  */
static size_t
best_entry (const struct work *work, size_t i)
{
  const struct active *row = &work->row[i];
  double most = largest_entry (row);
  size_t best = NOWHERE;
  for (size_t e = 0; e < row->count; e++) {
    if (fabs (row->value[e]) >= threshold * most && most > least_pivot
        && (best == NOWHERE
            || work->in_column[row->column[e]] < work->in_column[row->column[best]])) {
      best = e;
    }
  }
  return best;
}

/* The pivot of least Markowitz count among the shortest rows; false: there is none.  Rows with
   nothing but rounding are emptied.                                                             */
static bool
take_best (struct work *work)
{
  size_t found = NOWHERE, at = 0, looked = 0, least = 0;
  for (size_t count = 1; count <= work->out->columns && looked < LOOKED_AT; count++) {
    size_t i = work->head[count], next;
    for (; i != NOWHERE && looked < LOOKED_AT; i = next) {
      size_t e = best_entry (work, i), cost;
      next = work->next[i];
      if (e == NOWHERE) {
        unlink_row (work, i);
        while (work->row[i].count > 0) {
          remove_entry (work, i, 0);
        }
        link_row (work, i);
        work->rows_left--;
        continue;
      }
      looked++;
      cost = (count - 1) * (work->in_column[work->row[i].column[e]] - 1);
      if (found == NOWHERE || cost < least) {
        found = i;
        at = e;
        least = cost;
      }
      if (cost == 0) {
        looked = LOOKED_AT;
      }
    }
  }
  if (found != NOWHERE) {
    take (work, found, at);
  }
  return found != NOWHERE;
}

/* ---- The dense core ---- */

static void
make_core (struct work *work)
{
  struct elimination *out = work->out;
  size_t m = 0, n = 0, *place = ARENA_ARRAY (out->arena, out->columns + 1, size_t);
  double *a;
  out->core_row = ARENA_ARRAY (out->arena, out->rows - out->steps + 1, size_t);
  out->core_column = ARENA_ARRAY (out->arena, out->columns - out->steps + 1, size_t);
  for (size_t j = 0; j < out->columns; j++) {
    if (!work->column_done[j] && work->in_column[j] > 0) {
      place[j] = n;
      out->core_column[n++] = j;
    }
  }
  out->core_columns = n;
  for (size_t j = 0; j < out->columns; j++) {
    if (!work->column_done[j] && work->in_column[j] == 0) {
      out->core_column[n++] = j;
    }
  }
  for (size_t i = 0; i < out->rows; i++) {
    if (!work->row_done[i] && work->row[i].count > 0) {
      out->core_row[m++] = i;
    }
  }
  out->core_rows = m;
  for (size_t i = 0, at = m; i < out->rows; i++) {
    if (!work->row_done[i] && work->row[i].count == 0) {
      out->core_row[at++] = i;
    }
  }
  a = ARENA_ARRAY (out->arena, m * out->core_columns + 1, double);
  for (size_t r = 0; r < m; r++) {
    const struct active *row = &work->row[out->core_row[r]];
    for (size_t e = 0; e < row->count; e++) {
      a[r * out->core_columns + place[row->column[e]]] = row->value[e];
    }
  }
  out->core = space_make (out->arena, m, out->core_columns, a);
}

static void
begin (struct work *work, const struct sparse *a)
{
  size_t m = a->rows, n = a->columns;
  work->row = memory_get (m + 1, sizeof *work->row);
  work->list = memory_get (n + 1, sizeof *work->list);
  work->in_column = memory_get (n + 1, sizeof *work->in_column);
  work->row_done = memory_get (m + 1, sizeof *work->row_done);
  work->column_done = memory_get (n + 1, sizeof *work->column_done);
  work->head = memory_get (n + 2, sizeof *work->head);
  work->next = memory_get (m + 1, sizeof *work->next);
  work->before = memory_get (m + 1, sizeof *work->before);
  work->where = memory_get (n + 1, sizeof *work->where);
  for (size_t count = 0; count < n + 2; count++) {
    work->head[count] = NOWHERE;
  }
  for (size_t i = 0; i < m; i++) {
    for (size_t e = a->start[i]; e < a->start[i + 1]; e++) {
      active_add (&work->row[i], a->column[e], a->value[e]);
      list_add (&work->list[a->column[e]], i);
      work->columns_left += work->in_column[a->column[e]]++ == 0 ? 1 : 0;
    }
    work->rows_left += work->row[i].count > 0 ? 1 : 0;
  }
  for (size_t i = m; i-- > 0;) {
    link_row (work, i);
  }
  for (size_t j = n; j-- > 0;) {
    if (work->in_column[j] == 1) {
      work->in_column[j]++;
      column_loses (work, j);
    }
  }
}

static void
end (struct work *work)
{
  for (size_t i = 0; i < work->out->rows; i++) {
    memory_release (work->row[i].column);
    memory_release (work->row[i].value);
  }
  for (size_t j = 0; j < work->out->columns; j++) {
    memory_release (work->list[j].row);
  }
  memory_release (work->row);
  memory_release (work->list);
  memory_release (work->in_column);
  memory_release (work->row_done);
  memory_release (work->column_done);
  memory_release (work->head);
  memory_release (work->next);
  memory_release (work->before);
  memory_release (work->where);
  memory_release (work->lone);
}

struct elimination *
elimination_make (struct arena *arena, const struct sparse *a, size_t core)
{
  struct elimination *out = ARENA_NEW (arena, struct elimination);
  struct work work = { .out = out };
  size_t most = a->rows < a->columns ? a->rows : a->columns;
  out->arena = arena;
  out->rows = a->rows;
  out->columns = a->columns;
  out->step = ARENA_ARRAY (arena, most + 2, struct step);
  begin (&work, a);
  while (work.columns_left > core || work.rows_left > 2 * core) {
    if (!take_lone (&work) && !take_best (&work)) {
      break;
    }
  }
  make_core (&work);
  end (&work);
  pool_settle (arena, &out->upper);
  pool_settle (arena, &out->lower);
  return out;
}

size_t
elimination_rank (const struct elimination *e)
{
  return e->steps + e->core.rank;
}

/* The columns of the steps, backwards, from those of the core: what B says less the others.  */
static void
back (const struct elimination *e, const double b[], double x[])
{
  for (size_t p = e->steps; p-- > 0;) {
    double sum = b ? b[e->step[p].row] / e->step[p].pivot : 0;
    for (size_t n = e->step[p].upper; n < e->step[p + 1].upper; n++) {
      sum -= e->upper.value[n] * x[e->upper.index[n]];
    }
    x[e->step[p].column] = sum;
  }
}

void
elimination_solve (const struct elimination *e, const double b[], double x[])
{
  struct arena *arena = arena_create ();
  double *c = ARENA_ARRAY (arena, e->rows + 1, double);
  double *right = ARENA_ARRAY (arena, e->core_rows + 1, double);
  double *core = ARENA_ARRAY (arena, e->core_columns + 1, double);
  memcpy (c, b, e->rows * sizeof *c);
  for (size_t p = 0; p < e->steps; p++) {
    for (size_t n = e->step[p].lower; n < e->step[p + 1].lower; n++) {
      c[e->lower.index[n]] -= e->lower.value[n] * c[e->step[p].row];
    }
  }
  for (size_t i = 0; i < e->core_rows; i++) {
    right[i] = c[e->core_row[i]];
  }
  space_solve (arena, &e->core, right, core);
  memset (x, 0, e->columns * sizeof *x);
  for (size_t j = 0; j < e->core_columns; j++) {
    x[e->core_column[j]] = core[j];
  }
  back (e, c, x);
  arena_destroy (arena);
}

void
elimination_null (const struct elimination *e, size_t k, double x[])
{
  size_t inner = e->core_columns - e->core.rank;
  memset (x, 0, e->columns * sizeof *x);
  if (k < inner) {
    for (size_t j = 0; j < e->core_columns; j++) {
      x[e->core_column[j]] = space_null (&e->core, j, k);
    }
  } else {
    x[e->core_column[e->core_columns + k - inner]] = 1;
  }
  back (e, NULL, x);
}

/* The rows of the steps, backwards, from those of the core.  */
static void
back_left (const struct elimination *e, double y[])
{
  for (size_t p = e->steps; p-- > 0;) {
    double sum = 0;
    for (size_t n = e->step[p].lower; n < e->step[p + 1].lower; n++) {
      sum -= e->lower.value[n] * y[e->lower.index[n]];
    }
    y[e->step[p].row] = sum;
  }
}

void
elimination_left (const struct elimination *e, size_t k, double y[])
{
  size_t inner = e->core_rows - e->core.rank;
  memset (y, 0, e->rows * sizeof *y);
  if (k < inner) {
    for (size_t i = 0; i < e->core_rows; i++) {
      y[e->core_row[i]] = space_left (&e->core, i, k);
    }
  } else {
    y[e->core_row[e->core_rows + k - inner]] = 1;
  }
  back_left (e, y);
}

/* From 0.5 to 1.5: Knuth's MMIX multiplier and increment.  */
static double
part (unsigned long long *seed)
{
  *seed = *seed * 6364136223846793005ULL + 1442695040888963407ULL;
  return 0.5 + (double) (*seed >> 40) / (double) (1 << 24);
}

void
elimination_left_mixed (const struct elimination *e, unsigned long long *seed, double y[])
{
  size_t inner = e->core_rows - e->core.rank, surplus = e->rows - elimination_rank (e);
  memset (y, 0, e->rows * sizeof *y);
  for (size_t k = 0; k < surplus; k++) {
    double by = part (seed);
    for (size_t i = 0; i < e->core_rows && k < inner; i++) {
      y[e->core_row[i]] += by * space_left (&e->core, i, k);
    }
    if (k >= inner) {
      y[e->core_row[e->core_rows + k - inner]] = by;
    }
  }
  back_left (e, y);
}
