#include "config.h"
#include "balance/null_space.h"

#include <math.h>
#include <string.h>
#include "balance/rank.h"
#include "balance/system.h"
#include "support/arena.h"
#include "support/vector.h"

struct making {
  struct arena *arena;
  struct null_space *space;
  struct null_block *block;
  size_t *of, *at;
  size_t *block_of;              /* by vector */
};

static size_t
leader (size_t parent[], size_t k)
{
  while (parent[k] != k) {
    k = parent[k] = parent[parent[k]];
  }
  return k;
}

/* Vectors that move the same column are of one block.  PARENT: by vector.  */
static void
join (struct arena *scratch, size_t columns, const struct null_vectors *vectors, size_t parent[])
{
  size_t *first = ARENA_ARRAY (scratch, columns + 1, size_t);    /* by column, 1 too many */
  for (size_t k = 0; k < vectors->count; k++) {
    parent[k] = k;
  }
  for (size_t k = 0; k < vectors->count; k++) {
    for (size_t e = vectors->start[k]; e < vectors->start[k + 1]; e++) {
      size_t j = vectors->column[e];
      if (first[j] == 0) {
        first[j] = k + 1;
      } else {
        size_t a = leader (parent, first[j] - 1), b = leader (parent, k);
        parent[a > b ? a : b] = a > b ? b : a;
      }
    }
  }
}

/* Numbers the blocks by their first vectors, and the directions within them.  */
static void
number_blocks (struct making *m, struct arena *scratch, const struct null_vectors *vectors)
{
  size_t *parent = ARENA_ARRAY (scratch, vectors->count + 1, size_t), count = 0, first = 0;
  join (scratch, m->space->columns, vectors, parent);
  for (size_t k = 0; k < vectors->count; k++) {
    size_t lead = leader (parent, k);
    m->block_of[k] = lead == k ? count++ : m->block_of[lead];
  }
  m->block = ARENA_ARRAY (m->arena, count + 1, struct null_block);
  for (size_t k = 0; k < vectors->count; k++) {
    m->block[m->block_of[k]].directions++;
  }
  for (size_t b = 0; b < count; b++) {
    m->block[b].first = first;
    first += m->block[b].directions;
  }
  m->space->blocks = count;
  m->space->block = m->block;
}

/* Gives every column that moves its block and its place there.  */
static void
place_columns (struct making *m, struct arena *scratch, const struct null_vectors *vectors)
{
  size_t columns = m->space->columns;
  size_t **list = ARENA_ARRAY (scratch, m->space->blocks + 1, size_t *);
  for (size_t j = 0; j < columns; j++) {
    m->of[j] = m->at[j] = NOWHERE;
  }
  for (size_t k = 0; k < vectors->count; k++) {
    for (size_t e = vectors->start[k]; e < vectors->start[k + 1]; e++) {
      m->of[vectors->column[e]] = m->block_of[k];
    }
  }
  for (size_t j = 0; j < columns; j++) {
    if (m->of[j] != NOWHERE) {
      m->at[j] = m->block[m->of[j]].columns++;
    }
  }
  for (size_t b = 0; b < m->space->blocks; b++) {
    m->block[b].column = list[b] = ARENA_ARRAY (m->arena, m->block[b].columns + 1, size_t);
  }
  for (size_t j = 0; j < columns; j++) {
    if (m->of[j] != NOWHERE) {
      list[m->of[j]][m->at[j]] = j;
    }
  }
}

static void
fill (struct making *m, struct arena *scratch, const struct null_vectors *vectors,
      bool orthonormal)
{
  double **base = ARENA_ARRAY (scratch, m->space->blocks + 1, double *);
  size_t *done = ARENA_ARRAY (scratch, m->space->blocks + 1, size_t);
  for (size_t b = 0; b < m->space->blocks; b++) {
    const struct null_block *block = &m->block[b];
    base[b] = ARENA_ARRAY (m->arena, block->columns * block->directions + 1, double);
    m->block[b].base = base[b];
  }
  for (size_t k = 0; k < vectors->count; k++) {
    size_t b = m->block_of[k], place = done[b]++;
    for (size_t e = vectors->start[k]; e < vectors->start[k + 1]; e++) {
      base[b][m->at[vectors->column[e]] * m->block[b].directions + place] = vectors->value[e];
    }
  }
  for (size_t b = 0; b < m->space->blocks && !orthonormal; b++) {
    size_t wide = m->block[b].directions;
    (void) columns_orthonormal (m->block[b].columns, wide, wide, base[b], 0, NULL,
                                vectors->interrupted);
  }
}

static struct null_space *
make (struct arena *arena, size_t columns, const struct null_vectors *vectors, bool orthonormal)
{
  struct arena *scratch = arena_create ();
  struct making m = { .arena = arena, .space = ARENA_NEW (arena, struct null_space) };
  m.of = ARENA_ARRAY (arena, columns + 1, size_t);
  m.at = ARENA_ARRAY (arena, columns + 1, size_t);
  m.block_of = ARENA_ARRAY (scratch, vectors->count + 1, size_t);
  *m.space = (struct null_space) { .columns = columns, .freedom = vectors->count, .of = m.of,
                                   .at = m.at };
  number_blocks (&m, scratch, vectors);
  place_columns (&m, scratch, vectors);
  fill (&m, scratch, vectors, orthonormal);
  arena_destroy (scratch);
  return m.space;
}

struct null_space *
null_space_make (struct arena *arena, size_t columns, const struct null_vectors *vectors)
{
  return make (arena, columns, vectors, false);
}

struct null_space *
null_space_of (struct arena *arena, size_t columns, size_t freedom, size_t stride,
               const double base[])
{
  struct arena *scratch = arena_create ();
  size_t *start = ARENA_ARRAY (scratch, freedom + 1, size_t), count = 0;
  size_t *column = ARENA_ARRAY (scratch, columns * freedom + 1, size_t);
  double *value = ARENA_ARRAY (scratch, columns * freedom + 1, double);
  for (size_t k = 0; k < freedom; k++) {
    for (size_t j = 0; j < columns; j++) {
      if (fabs (base[j * stride + k]) > 0) {
        column[count] = j;
        value[count++] = base[j * stride + k];
      }
    }
    start[k + 1] = count;
  }
  struct null_vectors vectors = { freedom, start, column, value, NULL };
  struct null_space *space = make (arena, columns, &vectors, true);
  arena_destroy (scratch);
  return space;
}

/* What moves COLUMN, by direction of its block; null: nothing.  */
static const double *
row_of (const struct null_space *space, size_t column, const struct null_block **block)
{
  if (space->of[column] == NOWHERE) {
    return NULL;
  }
  *block = &space->block[space->of[column]];
  return &(*block)->base[space->at[column] * (*block)->directions];
}

double *
null_space_dense (struct arena *arena, const struct null_space *space)
{
  double *dense = ARENA_ARRAY (arena, space->columns * space->freedom + 1, double);
  for (size_t j = 0; j < space->columns; j++) {
    null_space_add (space, j, 1, &dense[j * space->freedom]);
  }
  return dense;
}

void
null_space_add (const struct null_space *space, size_t column, double factor, double out[])
{
  const struct null_block *block;
  const double *row = row_of (space, column, &block);
  for (size_t k = 0; row && k < block->directions; k++) {
    out[block->first + k] += factor * row[k];
  }
}

double
null_space_reach (const struct null_space *space, size_t column)
{
  const struct null_block *block;
  const double *row = row_of (space, column, &block);
  return row ? vector_norm (block->directions, row) : 0;
}

void
null_space_move (const struct null_space *space, const double z[], double v[])
{
  for (size_t j = 0; j < space->columns; j++) {
    const struct null_block *block;
    const double *row = row_of (space, j, &block);
    v[j] += row ? vector_dot (block->directions, row, &z[block->first]) : 0;
  }
}

void
null_space_along (const struct null_space *space, const double v[], double z[])
{
  memset (z, 0, space->freedom * sizeof *z);
  for (size_t j = 0; j < space->columns; j++) {
    null_space_add (space, j, v[j], z);
  }
}
