#include "config.h"
#include "balance/fronts.h"

#include <math.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>
#include "balance/column_order.h"
#include "balance/factor_way.h"
#include "support/arena.h"
#include "support/memory.h"

/* Of a row's size: what is far below all rounding, and would only lead to numbers too small.  */
static const double TINY = 1e-20;
/* A first row whose entry is below this share of the largest changes places with that.  */
static const double SMALL = 0.1;

/* A row on its way, in positions.  SIZE: of the largest that went into it; what is far below may be
   rounding.  */
struct line {
  struct line *next;
  size_t row, count;
  double size;
  size_t *position;
  double *value;
};

/* Rows as a dense block over the local columns.  */
struct block {
  size_t rows, columns;
  double *at;                    /* row by row */
  double *dot;                   /* room for a row */
  size_t *row, *lead;            /* place of the right side; first column that is not zero */
  double *size;                  /* by row, as of a line */
  size_t rank;                   /* rows that are left when it is triangular */
};

struct merge {
  struct arena *arena;           /* what is kept */
  struct arena *scratch;         /* for one front */
  struct line **exact, **measured;       /* by position: rows that begin there */
  size_t *local, locals;         /* positions of the front in hand, ascending */
  size_t *other;                 /* room to merge them in */
  size_t *where;                 /* by position: its place among them, 1 too many; 0: none */
};

/* ---- Lines ---- */

static struct line *
line_make (size_t row, size_t count, double size)
{
  size_t each = sizeof (size_t) + sizeof (double);
  size_t bytes = memory_sum (sizeof (struct line), memory_product (count, each));
  struct line *line = memory_get (1, bytes);
  char *behind = (char *) line + sizeof *line;
  line->row = row;
  line->count = count;
  line->size = size;
  line->value = (double *) (void *) behind;
  line->position = (size_t *) (void *) (behind + count * sizeof (double));
  return line;
}

static void
line_put (struct line **buckets, struct line *line)
{
  if (line->count == 0) {
    memory_release (line);
    return;
  }
  line->next = buckets[line->position[0]];
  buckets[line->position[0]] = line;
}

struct place { size_t position; double value; };

static int
by_position (const void *a, const void *b)
{
  const struct place *left = a, *right = b;
  return (left->position > right->position) - (left->position < right->position);
}

/* Row I of a sparse matrix as a line: in order of position, entries of one column added up.  */
static struct line *
line_of_row (struct merge *m, const struct sparse *rows, size_t i, const double scale[],
             double over, const size_t at[])
{
  size_t count = rows->start[i + 1] - rows->start[i], kept = 0;
  struct place *places = ARENA_ARRAY (m->scratch, count + 1, struct place);
  double size = 0;
  for (size_t k = 0; k < count; k++) {
    size_t column = rows->column[rows->start[i] + k];
    double value = rows->coefficient[rows->start[i] + k] * scale[column] / over;
    places[k] = (struct place) { at[column], value };
  }
  qsort (places, count, sizeof *places, by_position);
  for (size_t k = 0; k < count; k++) {
    if (kept > 0 && places[kept - 1].position == places[k].position) {
      places[kept - 1].value += places[k].value;
    } else {
      places[kept++] = places[k];
    }
  }
  struct line *line = line_make (i, kept, 0);
  for (size_t k = 0; k < kept; k++) {
    line->position[k] = places[k].position;
    line->value[k] = places[k].value;
    size = fmax (size, fabs (places[k].value));
  }
  line->size = size;
  arena_reset (m->scratch);
  return line;
}

/* ---- A front ---- */

/* Merges the positions of the lines, each ascending, with those there are.  */
static void
collect (struct merge *m, const struct line *lines)
{
  for (; lines; lines = lines->next) {
    size_t i = 0, k = 0, count = 0, *to = m->other;
    while (i < m->locals && k < lines->count) {
      size_t a = m->local[i], b = lines->position[k];
      to[count++] = a < b ? a : b;
      i += a <= b;
      k += b <= a;
    }
    memcpy (to + count, m->local + i, (m->locals - i) * sizeof *to);
    memcpy (to + count + m->locals - i, lines->position + k, (lines->count - k) * sizeof *to);
    m->locals = count + m->locals - i + lines->count - k;
    m->other = m->local;
    m->local = to;
  }
}

/* The lines as a block; they are used up.  */
static struct block
block_make (struct merge *m, struct line *lines)
{
  struct block b = { .columns = m->locals };
  for (const struct line *line = lines; line; line = line->next) {
    b.rows++;
  }
  b.at = ARENA_ARRAY (m->scratch, b.rows * b.columns + 1, double);
  b.dot = ARENA_ARRAY (m->scratch, b.columns + 1, double);
  b.row = ARENA_ARRAY (m->scratch, b.rows + 1, size_t);
  b.lead = ARENA_ARRAY (m->scratch, b.rows + 1, size_t);
  b.size = ARENA_ARRAY (m->scratch, b.rows + 1, double);
  for (size_t i = 0; lines; i++) {
    struct line *next = lines->next;
    b.row[i] = lines->row;
    b.size[i] = lines->size;
    for (size_t k = 0; k < lines->count; k++) {
      b.at[i * b.columns + m->where[lines->position[k]] - 1] = lines->value[k];
    }
    memory_release (lines);
    lines = next;
  }
  return b;
}

/* Where the numbers of reflection T begin.  */
static size_t
step_start (size_t rows, size_t t)
{
  return t * rows - t * (t - 1) / 2;
}

static void
swap (double *a, double *b)
{
  double was = *a;
  *a = *b;
  *b = was;
}

/* Swaps rows I and J of the block, and in the reflections V there are before row I.  */
static void
swap_rows (struct block *b, size_t i, size_t j, double v[])
{
  size_t row = b->row[i];
  b->row[i] = b->row[j];
  b->row[j] = row;
  swap (&b->size[i], &b->size[j]);
  for (size_t k = 0; k < b->columns; k++) {
    swap (&b->at[i * b->columns + k], &b->at[j * b->columns + k]);
  }
  for (size_t t = 0; t < i; t++) {
    double *step = v + step_start (b->rows, t);
    swap (&step[i - t], &step[j - t]);
  }
}

/* The norm of column J from row R on.  *LARGEST: the row of its largest entry.  */
static double
column_norm (const struct block *b, size_t r, size_t j, size_t *largest)
{
  double sum = 0, most = 0;
  *largest = r;
  for (size_t i = r; i < b->rows; i++) {
    double x = b->at[i * b->columns + j];
    sum += x * x;
    if (fabs (x) > most) {
      most = fabs (x);
      *largest = i;
    }
  }
  return sqrt (sum);
}

/* SUM += FACTOR * ROW, four at a time.  */
static void
add_times (double *restrict sum, const double *restrict row, double factor, size_t n)
{
  size_t k = 0;
  for (; k + 4 <= n; k += 4) {
    sum[k] += factor * row[k];
    sum[k + 1] += factor * row[k + 1];
    sum[k + 2] += factor * row[k + 2];
    sum[k + 3] += factor * row[k + 3];
  }
  for (; k < n; k++) {
    sum[k] += factor * row[k];
  }
}

/* H = 1 - tau v v' takes column J from row R on to its first place; v is put into V.  */
static double
reflect (struct block *b, size_t r, size_t j, double norm, double v[])
{
  double *first = &b->at[r * b->columns], square = 0, size = b->size[r];
  double to = first[j] > 0 ? -norm : norm;
  for (size_t i = r; i < b->rows; i++) {
    v[i - r] = b->at[i * b->columns + j] - (i == r ? to : 0);
    square += v[i - r] * v[i - r];
    size = fmax (size, b->size[i] * fabs (b->at[i * b->columns + j]) / norm);
  }
  for (size_t i = r; i < b->rows; i++) {
    double share = fabs (b->at[i * b->columns + j]) / norm;
    b->size[i] = i == r ? size : fmax (b->size[i], share * size);
  }
  size_t behind = b->columns - j - 1;
  memset (b->dot, 0, behind * sizeof *b->dot);
  for (size_t i = r; i < b->rows; i++) {
    add_times (b->dot, &b->at[i * b->columns + j + 1], v[i - r], behind);
  }
  for (size_t i = r; i < b->rows; i++) {
    add_times (&b->at[i * b->columns + j + 1], b->dot, -v[i - r] * 2 / square, behind);
  }
  for (size_t i = r; i < b->rows; i++) {
    b->at[i * b->columns + j] = i == r ? to : 0;
  }
  return 2 / square;
}

/* Makes zero in column 0 what is no more than rounding.  */
static void
drop_rounding (struct block *b)
{
  for (size_t i = 0; i < b->rows; i++) {
    double *first = &b->at[i * b->columns];
    *first = fabs (*first) > FACTOR_ZERO * b->size[i] ? *first : 0;
  }
}

/* Makes the block triangular from column FIRST on.  A row with a large
   entry comes first, as rows may be of very different size (Powell, Reid, in Morrell (ed.),
   Information Processing 68 (1969) 122).  */
static struct reflections
triangularise (struct merge *m, struct block *b, size_t first)
{
  double *v = ARENA_ARRAY (m->scratch, b->rows * (b->rows + 1) / 2 + 1, double);
  double *tau = ARENA_ARRAY (m->scratch, b->rows + 1, double);
  drop_rounding (b);
  for (size_t j = first; j < b->columns && b->rank < b->rows; j++) {
    size_t largest, r = b->rank;
    double norm = column_norm (b, r, j, &largest);
    if (norm > TINY * b->size[largest]) {
      if (fabs (b->at[r * b->columns + j]) < SMALL * fabs (b->at[largest * b->columns + j])) {
        swap_rows (b, r, largest, v);
      }
      tau[r] = reflect (b, r, j, norm, v + step_start (b->rows, r));
      b->lead[b->rank++] = j;
    }
  }
  size_t room = step_start (b->rows, b->rank);
  double *kept_v = ARENA_ARRAY (m->arena, room + 1, double);
  double *kept_tau = ARENA_ARRAY (m->arena, b->rank + 1, double);
  size_t *row = ARENA_ARRAY (m->arena, b->rows + 1, size_t);
  memcpy (kept_v, v, room * sizeof *v);
  memcpy (kept_tau, tau, b->rank * sizeof *tau);
  memcpy (row, b->row, b->rows * sizeof *row);
  return (struct reflections) { b->rows, b->rank, row, kept_v, kept_tau };
}

/* Subtracts the exact pivot row from the measured ones.  */
static void
subtract_pivot (struct merge *m, const double pivot[], double pivot_size, struct block *b,
                struct front *front)
{
  double *multiplier = ARENA_ARRAY (m->arena, b->rows + 1, double);
  size_t *from = ARENA_ARRAY (m->arena, b->rows + 1, size_t);
  for (size_t i = 0; i < b->rows; i++) {
    double *row = &b->at[i * b->columns];
    from[i] = b->row[i];
    multiplier[i] = row[0] / pivot[0];
    for (size_t k = 0; k < b->columns; k++) {
      row[k] -= multiplier[i] * pivot[k];
    }
    row[0] = 0;
    b->size[i] = fmax (b->size[i], fabs (multiplier[i]) * pivot_size);
  }
  front->subtractions = b->rows;
  front->from = from;
  front->multiplier = multiplier;
}

/* Row R of the block from its lead on, without zeros.  */
static struct line *
line_of_block (const struct merge *m, const struct block *b, size_t r)
{
  const double *row = &b->at[r * b->columns];
  size_t count = 0, kept = 0;
  for (size_t k = b->lead[r]; k < b->columns; k++) {
    count += fabs (row[k]) > TINY * b->size[r];
  }
  struct line *line = line_make (b->row[r], count, b->size[r]);
  for (size_t k = b->lead[r]; k < b->columns; k++) {
    if (fabs (row[k]) > TINY * b->size[r]) {
      line->position[kept] = m->local[k];
      line->value[kept++] = row[k];
    }
  }
  return line;
}

/* Sends the rows of a triangular block on; the one that begins with this column stays as its
   pivot.  */
static void
pass_on (struct merge *m, const struct block *b, enum pivot_kind kind, struct line **buckets,
         struct front *front)
{
  for (size_t r = 0; r < b->rank; r++) {
    struct line *line = line_of_block (m, b, r);
    if (b->lead[r] > 0) {
      line_put (buckets, line);
      continue;
    }
    size_t *position = ARENA_ARRAY (m->arena, line->count, size_t);
    double *value = ARENA_ARRAY (m->arena, line->count, double);
    memcpy (position, line->position, line->count * sizeof *position);
    memcpy (value, line->value, line->count * sizeof *value);
    front->kind = kind;
    front->row = line->row;
    front->count = line->count;
    front->position = position;
    front->value = value;
    memory_release (line);
  }
}

static void
eliminate (struct merge *m, size_t at, struct front *front)
{
  m->locals = 0;
  collect (m, m->exact[at]);
  collect (m, m->measured[at]);
  for (size_t k = 0; k < m->locals; k++) {
    m->where[m->local[k]] = k + 1;
  }
  struct block exact = block_make (m, m->exact[at]), measured = block_make (m, m->measured[at]);
  m->exact[at] = m->measured[at] = NULL;
  front->exact = triangularise (m, &exact, 0);
  bool pivot = exact.rank > 0 && exact.lead[0] == 0;
  if (pivot) {
    subtract_pivot (m, exact.at, exact.size[0], &measured, front);
  }
  front->measured = triangularise (m, &measured, pivot ? 1 : 0);
  pass_on (m, &exact, PIVOT_EXACT, m->exact, front);
  pass_on (m, &measured, PIVOT_MEASURED, m->measured, front);
  for (size_t k = 0; k < m->locals; k++) {
    m->where[m->local[k]] = 0;
  }
  arena_reset (m->scratch);
}

static size_t *
order_of (struct arena *arena, const struct linearised *equations)
{
  const struct sparse *C = &equations->exact, *G = &equations->measured;
  struct sets sets[] = { { C->count, C->start, C->column }, { G->count, G->start, G->column } };
  if (!equations->order) {
    return column_order (arena, equations->unknowns, 2, sets);
  }
  size_t *order = ARENA_ARRAY (arena, equations->unknowns + 1, size_t);
  memcpy (order, equations->order, equations->unknowns * sizeof *order);
  return order;
}

struct fronts
fronts_make (struct arena *arena, const struct linearised *equations, const double row_size[])
{
  const struct sparse *C = &equations->exact, *G = &equations->measured;
  size_t n = equations->unknowns;
  size_t *column = order_of (arena, equations), *at = ARENA_ARRAY (arena, n + 1, size_t);
  struct front *front = ARENA_ARRAY (arena, n + 1, struct front);
  struct arena *work = arena_create ();
  struct merge m = { .arena = arena, .scratch = arena_create () };
  m.exact = ARENA_ARRAY (work, n + 1, struct line *);
  m.measured = ARENA_ARRAY (work, n + 1, struct line *);
  m.local = ARENA_ARRAY (work, n + 1, size_t);
  m.other = ARENA_ARRAY (work, n + 1, size_t);
  m.where = ARENA_ARRAY (work, n + 1, size_t);
  for (size_t k = 0; k < n; k++) {
    at[column[k]] = k;
  }
  for (size_t i = 0; i < C->count; i++) {
    line_put (m.exact, line_of_row (&m, C, i, equations->scale, row_size[i], at));
  }
  for (size_t i = 0; i < G->count; i++) {
    line_put (m.measured, line_of_row (&m, G, i, equations->scale, 1, at));
  }
  for (size_t k = 0; k < n; k++) {
    eliminate (&m, k, &front[k]);
  }
  arena_destroy (m.scratch);
  arena_destroy (work);
  return (struct fronts) { n, at, column, front };
}

/* ---- Right sides ---- */

static void
reflections_turn (const struct reflections *r, double x[])
{
  const double *v = r->v;
  for (size_t t = 0; t < r->steps; v += r->count - t, t++) {
    double dot = 0;
    for (size_t i = t; i < r->count; i++) {
      dot += v[i - t] * x[r->row[i]];
    }
    dot *= r->tau[t];
    for (size_t i = t; i < r->count; i++) {
      x[r->row[i]] -= dot * v[i - t];
    }
  }
}

void
fronts_turn (const struct fronts *fronts, double c[], double e[])
{
  for (size_t k = 0; k < fronts->columns; k++) {
    const struct front *front = &fronts->front[k];
    reflections_turn (&front->exact, c);
    for (size_t i = 0; i < front->subtractions; i++) {
      e[front->from[i]] -= front->multiplier[i] * c[front->row];
    }
    reflections_turn (&front->measured, e);
  }
}
