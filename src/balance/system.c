#include "config.h"
#include "balance/system.h"

#include <assert.h>
#include <math.h>
#include <string.h>
#include "support/arena.h"

/* Rows in the making: entries of one column are added up before a row is closed.  */
struct builder {
  struct arena *arena;
  const bool *absent;
  struct rows rows;
  size_t room, entry_room;
  size_t touched;                /* entries of the row that is open */
  size_t *where;                 /* by column: its entry in the open row, 1 too many; 0: none */
};

static void
builder_init (struct builder *builder, struct arena *arena, size_t columns, const bool absent[])
{
  *builder = (struct builder) { .arena = arena, .absent = absent };
  builder->where = ARENA_ARRAY (arena, columns, size_t);
  builder->rows.start = ARENA_ARRAY (arena, 1, size_t);
}

/* OLD with room for twice as many, in the arena.  */
static void *
grown (struct arena *arena, const void *old, size_t count, size_t room, size_t size)
{
  char *bigger = arena_alloc (arena, room, size);
  if (count > 0) {
    memcpy (bigger, old, count * size);
  }
  return bigger;
}

static void
builder_add (struct builder *builder, size_t column, double coefficient)
{
  struct rows *rows = &builder->rows;
  size_t next = rows->start[rows->count] + builder->touched;
  if (builder->absent[column]) {
    return;
  }
  if (builder->where[column] > 0) {
    rows->coefficient[builder->where[column] - 1] += coefficient;
    return;
  }
  if (next == builder->entry_room) {
    size_t room = builder->entry_room * 2 + 64;
    rows->column = grown (builder->arena, rows->column, next, room, sizeof (size_t));
    rows->coefficient = grown (builder->arena, rows->coefficient, next, room, sizeof (double));
    builder->entry_room = room;
  }
  rows->column[next] = column;
  rows->coefficient[next] = coefficient;
  builder->where[column] = next + 1;
  builder->touched++;
}

static void
builder_form (struct builder *builder, const struct form *form, double factor)
{
  for (size_t i = 0; i < form->count; i++) {
    builder_add (builder, form->terms[i].column, factor * form->terms[i].coefficient);
  }
}

static void
builder_stream (struct builder *builder, const struct network *network, size_t stream,
                double factor)
{
  for (size_t c = 0; c < network->components; c++) {
    builder_add (builder, stream * network->components + c, factor);
  }
}

/* Closes a row, without the entries that cancelled.  */
static void
builder_close (struct builder *builder, struct row row, double right)
{
  struct rows *rows = &builder->rows;
  size_t n = rows->count, kept = rows->start[n];
  for (size_t i = rows->start[n]; i < rows->start[n] + builder->touched; i++) {
    builder->where[rows->column[i]] = 0;
    if (fabs (rows->coefficient[i]) > 0) {
      rows->column[kept] = rows->column[i];
      rows->coefficient[kept++] = rows->coefficient[i];
    }
  }
  builder->touched = 0;
  if (n == builder->room) {
    size_t room = builder->room * 2 + 16;
    rows->start = grown (builder->arena, rows->start, n + 1, room + 1, sizeof (size_t));
    rows->right = grown (builder->arena, rows->right, n, room, sizeof (double));
    rows->row = grown (builder->arena, rows->row, n, room, sizeof (struct row));
    builder->room = room;
  }
  rows->right[n] = right;
  rows->row[n] = row;
  rows->start[++rows->count] = kept;
}

static size_t
column_of (const struct network *network, size_t stream, size_t c)
{
  return stream * network->components + c;
}

/* What goes in less what comes out, and what reactions make: 0, for each component.  */
static void
balance_rows (struct builder *builder, const struct network *network, size_t boundary,
              size_t extent)
{
  const struct boundary *b = &network->boundary[boundary];
  for (size_t c = 0; c < network->components; c++) {
    for (size_t i = 0; i < b->inlet_count; i++) {
      builder_add (builder, column_of (network, b->inlets[i], c), 1);
    }
    for (size_t i = 0; i < b->outlet_count; i++) {
      builder_add (builder, column_of (network, b->outlets[i], c), -1);
    }
    for (size_t r = 0; r < b->reaction_count; r++) {
      builder_add (builder, extent + r, b->reactions[r].nu[c]);
    }
    if (builder->touched > 0) {
      builder_close (builder, (struct row) { ROW_BALANCE, boundary, c }, 0);
    }
  }
}

/* n[stream,c] - x[c] F[stream] = 0, for all components but the largest, which follows.  What the
   stream cannot hold and X has is a row too: it leaves no flow.                                 */
static void
composition_rows (struct builder *builder, const struct network *network, size_t stream,
                  const double x[], struct row row)
{
  size_t largest = 0;
  for (size_t c = 1; c < network->components; c++) {
    largest = x[c] > x[largest] ? c : largest;
  }
  for (size_t c = 0; c < network->components; c++) {
    row.component = c;
    if (c != largest && (x[c] > 0 || !builder->absent[column_of (network, stream, c)])) {
      builder_add (builder, column_of (network, stream, c), 1);
      builder_stream (builder, network, stream, -x[c]);
      builder_close (builder, row, 0);
    }
  }
}

/* n[stream,c] - share * n[of,c] = 0 for every component; SAY says whose row.  */
static void
share_rows (struct builder *builder, const struct network *network, const size_t pair[2],
            double share, struct row row)
{
  for (size_t c = 0; c < network->components; c++) {
    builder_add (builder, column_of (network, pair[0], c), 1);
    builder_add (builder, column_of (network, pair[1], c), -share);
    row.component = c;
    if (builder->touched > 0) {
      builder_close (builder, row, 0);
    }
  }
}

struct making {
  struct arena *arena;
  struct builder builder;
  struct system *system;
  struct bend *bend;
  size_t *inlet;                 /* by stream: the inlet of the split it leaves, or NOWHERE */
  size_t *share;                 /* by stream: the first fact taken that is its share, or NOWHERE */
  size_t *beside;                /* by stream: the same of another outlet of its split */
  bool *spread;                  /* by fact: a share that stands for a split's equal composition */
};

/* Is the fact the ratio of two outlets of one split?  */
static bool
is_beside (const struct making *making, const struct fact *fact)
{
  return fact->kind == FACT_SHARE && making->inlet[fact->stream] != NOWHERE
         && making->inlet[fact->stream] == making->inlet[fact->of];
}

static void
index_splits (struct making *making, const bool take[])
{
  const struct network *network = making->system->network;
  making->inlet = ARENA_ARRAY (making->arena, network->streams + 1, size_t);
  making->share = ARENA_ARRAY (making->arena, network->streams + 1, size_t);
  making->beside = ARENA_ARRAY (making->arena, network->streams + 1, size_t);
  making->spread = ARENA_ARRAY (making->arena, network->facts + 1, bool);
  for (size_t s = 0; s < network->streams; s++) {
    making->inlet[s] = making->share[s] = making->beside[s] = NOWHERE;
  }
  for (size_t b = 0; b < network->boundaries; b++) {
    const struct boundary *boundary = &network->boundary[b];
    for (size_t o = 0; boundary->kind == BOUNDARY_SPLIT && o < boundary->outlet_count; o++) {
      making->inlet[boundary->outlets[o]] = boundary->inlets[0];
    }
  }
  for (size_t f = network->facts; f-- > 0;) {
    const struct fact *fact = &network->fact[f];
    if (take[f] && fact->kind == FACT_SHARE && making->inlet[fact->stream] == fact->of) {
      making->share[fact->stream] = f;
    } else if (take[f] && is_beside (making, fact)) {
      making->beside[fact->stream] = f;
    }
  }
}

/* Has this outlet linear rows of its own?  Makes them, or sets a share that is a fact aside.  */
static bool
outlet_rows (struct making *making, size_t boundary, size_t o)
{
  const struct network *network = making->system->network;
  const struct boundary *b = &network->boundary[boundary];
  const struct split *split = making->system->split ? &making->system->split[boundary] : NULL;
  size_t f = making->share[b->outlets[o]], beside = making->beside[b->outlets[o]];
  if (f != NOWHERE) {
    making->spread[f] = true;
    return true;
  }
  if (beside != NOWHERE) {
    /* Not if the other one leans on a third, or on this.  */
    size_t other = making->beside[network->fact[beside].of];
    making->spread[beside] = other == NOWHERE || !making->spread[other];
    return making->spread[beside];
  }
  if (split && split->share && !isnan (split->share[o])) {
    share_rows (&making->builder, network, (size_t[2]) { b->outlets[o], b->inlets[0] },
                split->share[o], (struct row) { ROW_SPLIT, boundary, NOWHERE });
    return true;
  }
  return false;
}

/* A split with a composition: all streams but the one it was found in, and but the last outlet,
   which follows from the balance, have it.                                                      */
static void
composed_rows (struct making *making, size_t boundary, const struct split *split)
{
  const struct network *network = making->system->network;
  const struct boundary *b = &network->boundary[boundary];
  size_t left = b->outlet_count - 1;
  for (size_t i = 0; i <= b->outlet_count && left > 0; i++) {
    size_t stream = i == 0 ? b->inlets[0] : b->outlets[i - 1];
    if (stream != split->from) {
      composition_rows (&making->builder, network, stream, split->x,
                        (struct row) { ROW_SPLIT, boundary, NOWHERE });
      left--;
    }
  }
}

/* n[stream,c] - x F[stream] = 0, with x found in stream FROM, for all COUNT streams but that and
   one more, which follows from the balance.                                                     */
static void
part_rows (struct making *making, size_t boundary, size_t c, size_t count, const size_t streams[])
{
  const struct network *network = making->system->network;
  const struct split *split = &making->system->split[boundary];
  size_t from = streams[0], left = count - 2;
  for (size_t i = 0; i < count; i++) {
    from = streams[i] == split->part_from[c] ? streams[i] : from;
  }
  for (size_t i = 0; i < count && left > 0; i++) {
    if (streams[i] != from) {
      builder_add (&making->builder, column_of (network, streams[i], c), 1);
      builder_stream (&making->builder, network, streams[i], -split->part[c]);
      builder_close (&making->builder, (struct row) { ROW_SPLIT, boundary, c }, 0);
      left--;
    }
  }
}

/* A split's outlets that no share ties to the inlet: LEFT of them are bent, one more follows.  What
   components have a known fraction are linear all the same.                                     */
static void
bend (struct making *making, size_t boundary, size_t left, const bool done[])
{
  struct system *system = making->system;
  const struct boundary *b = &system->network->boundary[boundary];
  const double *part = system->split ? system->split[boundary].part : NULL;
  size_t *streams = ARENA_ARRAY (making->arena, b->outlet_count + 1, size_t), count = 0;
  streams[count++] = b->inlets[0];
  for (size_t o = 0; o < b->outlet_count; o++) {
    if (!done[o]) {
      streams[count++] = b->outlets[o];
    }
  }
  for (size_t c = 0; c < system->network->components && part; c++) {
    if (!isnan (part[c])) {
      part_rows (making, boundary, c, count, streams);
    }
  }
  for (size_t i = 1; i <= left; i++) {
    making->bend[system->bends++] = (struct bend) { boundary, streams[0], streams[i] };
  }
}

/* Equal compositions of a split: for all outlets but one, which follows from the balance.  */
static void
split_rows (struct making *making, size_t boundary)
{
  struct system *system = making->system;
  const struct boundary *b = &system->network->boundary[boundary];
  const struct split *split = system->split ? &system->split[boundary] : NULL;
  size_t left = b->outlet_count > 0 ? b->outlet_count - 1 : 0;
  bool *done = ARENA_ARRAY (making->arena, b->outlet_count + 1, bool);
  assert (b->inlet_count == 1);
  if (split && split->way == SPLIT_COMPOSED) {
    composed_rows (making, boundary, split);
    return;
  }
  for (size_t o = 0; o < b->outlet_count && left > 0; o++) {
    done[o] = outlet_rows (making, boundary, o);
    left -= done[o] ? 1 : 0;
  }
  if (left > 0 && system_parts (system, b->inlets[0]) > 1) {
    bend (making, boundary, left, done);
  }
}

static void
fact_rows (struct making *making, size_t f)
{
  const struct network *network = making->system->network;
  const struct fact *fact = &network->fact[f];
  struct builder *builder = &making->builder;
  struct row row = { ROW_FACT, f, NOWHERE };
  switch (fact->kind) {
  case FACT_FORM:
    builder_form (builder, &fact->left, 1);
    builder_close (builder, row, fact->value);
    break;
  case FACT_RATIO:
    builder_form (builder, &fact->left, 1);
    builder_form (builder, &fact->right, -fact->value);
    builder_close (builder, row, 0);
    break;
  case FACT_COMPOSITION:
    composition_rows (builder, network, fact->stream, fact->fractions, row);
    break;
  case FACT_SHARE:
    if (making->spread[f]
        || (making->inlet[fact->stream] != fact->of && !is_beside (making, fact))) {
      share_rows (builder, network, (size_t[2]) { fact->stream, fact->of }, fact->value, row);
    } else {
      builder_stream (builder, network, fact->stream, 1);
      builder_stream (builder, network, fact->of, -fact->value);
      builder_close (builder, row, 0);
    }
    break;
  }
}

/* The power of two nearest to 1 / sqrt (largest).  */
static double
factor_for (double largest)
{
  int exponent = 0;
  if (!(largest > 0)) {
    return 1;
  }
  frexp (largest, &exponent);
  return ldexp (1, -exponent / 2);
}

/* Row and column factors by a few sweeps of square roots of the largest entries: Ruiz, A scaling
   algorithm to equilibrate both rows and columns norms in matrices, RAL-TR-2001-034.            */
static void
scale (struct arena *arena, struct system *system)
{
  enum { SWEEPS = 4 };
  const struct rows *rows = &system->rows;
  double *by_row = ARENA_ARRAY (arena, rows->count + 1, double);
  double *by_column = ARENA_ARRAY (arena, system->columns + 1, double);
  double *row_most = ARENA_ARRAY (arena, rows->count + 1, double);
  double *column_most = ARENA_ARRAY (arena, system->columns + 1, double);
  for (size_t i = 0; i < rows->count; i++) {
    by_row[i] = 1;
  }
  for (size_t j = 0; j < system->columns; j++) {
    by_column[j] = 1;
  }
  for (int sweep = 0; sweep < SWEEPS; sweep++) {
    memset (row_most, 0, rows->count * sizeof *row_most);
    memset (column_most, 0, system->columns * sizeof *column_most);
    for (size_t i = 0; i < rows->count; i++) {
      for (size_t e = rows->start[i]; e < rows->start[i + 1]; e++) {
        size_t j = rows->column[e];
        double size = fabs (rows->coefficient[e]) * by_row[i] * by_column[j];
        row_most[i] = fmax (row_most[i], size);
        column_most[j] = fmax (column_most[j], size);
      }
    }
    for (size_t i = 0; i < rows->count; i++) {
      by_row[i] *= factor_for (row_most[i]);
    }
    for (size_t j = 0; j < system->columns; j++) {
      by_column[j] *= factor_for (column_most[j]);
    }
  }
  system->row_scale = by_row;
  system->scale = by_column;
}

struct system *
system_make (struct arena *arena, const struct network *network, const bool take[],
             const struct split split[])
{
  struct system *system = ARENA_NEW (arena, struct system);
  struct making making = { .arena = arena, .system = system };
  size_t outlets = 0, extent = network_extent (network, 0);
  double *have = ARENA_ARRAY (arena, network_columns (network) + 1, double);
  *system = (struct system) { .network = network, .take = take, .split = split,
                              .columns = network_columns (network),
                              .absence = absence_spread (arena, network, take) };
  for (size_t j = 0; j < system->columns; j++) {
    system->present += system->absence.absent[j] ? 0 : 1;
  }
  for (size_t b = 0; b < network->boundaries; b++) {
    outlets += network->boundary[b].outlet_count;
  }
  making.bend = ARENA_ARRAY (arena, outlets + 1, struct bend);
  index_splits (&making, take);
  builder_init (&making.builder, arena, system->columns, system->absence.absent);
  for (size_t b = 0; b < network->boundaries; b++) {
    balance_rows (&making.builder, network, b, extent);
    extent += network->boundary[b].reaction_count;
    if (network->boundary[b].kind == BOUNDARY_SPLIT) {
      split_rows (&making, b);
    }
  }
  system->structure = making.builder.rows.count;
  for (size_t f = 0; f < network->facts; f++) {
    if (take[f] && !network->fact[f].absence
        && !absence_is_all (network, &system->absence, f, have)) {
      fact_rows (&making, f);
    }
  }
  system->rows = making.builder.rows;
  system->bend = making.bend;
  scale (arena, system);
  return system;
}

/* The outlet's rows are short of n[j,c] - phi n[in,c] with phi = F[j] / F[in]; by n[j,k] that is
   [k = c] - n[in,c] / F[in], by n[in,k] it is phi (n[in,c] / F[in] - [k = c]).                   */
struct rows
system_bent (struct arena *arena, const struct system *system, const double v[])
{
  const struct network *network = system->network;
  struct builder builder;
  builder_init (&builder, arena, system->columns, system->absence.absent);
  for (size_t i = 0; i < system->bends; i++) {
    const struct bend *bend = &system->bend[i];
    double in = system_total (system, v, bend->inlet), out = system_total (system, v, bend->outlet);
    double phi = fabs (in) > 0 ? out / in : 0;
    const double *part = system->split ? system->split[bend->boundary].part : NULL;
    const double *from = &v[bend->inlet * network->components];
    const double *to = &v[bend->outlet * network->components];
    size_t largest = NOWHERE;
    for (size_t c = 0; c < network->components; c++) {
      bool open = !part || isnan (part[c]);
      largest = open && (largest == NOWHERE || from[c] > from[largest]) ? c : largest;
    }
    for (size_t c = 0; c < network->components; c++) {
      double x = fabs (in) > 0 ? from[c] / in : 0;
      if (c != largest && (!part || isnan (part[c]))
          && !system->absence.absent[column_of (network, bend->inlet, c)]) {
        builder_add (&builder, column_of (network, bend->outlet, c), 1);
        builder_stream (&builder, network, bend->outlet, -x);
        builder_add (&builder, column_of (network, bend->inlet, c), -phi);
        builder_stream (&builder, network, bend->inlet, phi * x);
        builder_close (&builder, (struct row) { ROW_SPLIT, bend->boundary, c },
                       phi * from[c] - to[c]);
      }
    }
  }
  return builder.rows;
}

struct rows
system_shared (struct arena *arena, const struct system *system, const double share[],
               const double v[])
{
  const struct network *network = system->network;
  struct builder builder;
  builder_init (&builder, arena, system->columns, system->absence.absent);
  for (size_t i = 0; i < system->bends; i++) {
    const struct bend *bend = &system->bend[i];
    for (size_t c = 0; c < network->components; c++) {
      size_t in = column_of (network, bend->inlet, c), out = column_of (network, bend->outlet, c);
      builder_add (&builder, out, 1);
      builder_add (&builder, in, -share[i]);
      if (builder.touched > 0) {
        builder_close (&builder, (struct row) { ROW_SPLIT, bend->boundary, c },
                       share[i] * v[in] - v[out]);
      }
    }
  }
  return builder.rows;
}

double
rows_residual (const struct rows *rows, size_t i, const double v[])
{
  long double sum = -(long double) rows->right[i];
  for (size_t e = rows->start[i]; e < rows->start[i + 1]; e++) {
    sum += (long double) rows->coefficient[e] * (long double) v[rows->column[e]];
  }
  return (double) sum;
}

double
system_total (const struct system *system, const double v[], size_t stream)
{
  size_t components = system->network->components;
  double sum = 0;
  for (size_t c = 0; c < components; c++) {
    sum += system->absence.absent[stream * components + c] ? 0 : v[stream * components + c];
  }
  return sum;
}

size_t
system_parts (const struct system *system, size_t stream)
{
  size_t components = system->network->components, parts = 0;
  for (size_t c = 0; c < components; c++) {
    parts += system->absence.absent[stream * components + c] ? 0 : 1;
  }
  return parts;
}
