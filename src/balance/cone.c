#include "config.h"
#include "balance/cone.h"

#include <math.h>
#include <string.h>
#include "balance/simplex.h"
#include "balance/solution.h"
#include "balance/system.h"
#include "support/arena.h"

/* The least of a range is nothing when it is no more than this part of the greatest.  */
static const double rounding = 1e-6;

struct making {
  struct arena *arena;
  const struct cone *cone;
  struct system *system;
  struct simplex rows;
  size_t *place;                 /* by column: its unknown; NOWHERE: absent */
  size_t *owner;                 /* by row: its fact, or NOWHERE */
  size_t room, slacks, unknowns; /* unknowns without slacks */
};

static size_t
facts_rows (const struct network *network)
{
  size_t rows = 0;
  for (size_t f = 0; f < network->facts; f++) {
    enum fact_kind kind = network->fact[f].kind;
    rows += kind == FACT_COMPOSITION || kind == FACT_SHARE ? network->components : 1;
  }
  return 2 * rows;
}

double
cone_work (const struct network *network)
{
  double facts = (double) facts_rows (network), flows = (double) network_columns (network);
  double rows = facts + (double) (network->boundaries * network->components);
  return rows * rows * (flows + facts + rows);
}

/* A row in the making: what it has of each unknown.  */
static double *
open_row (struct making *making)
{
  return &making->rows.a[making->rows.rows * making->rows.columns];
}

static void
add (struct making *making, double row[], size_t column, double coefficient)
{
  size_t flows = making->cone->network->streams * making->cone->network->components;
  if (making->place[column] != NOWHERE) {
    row[making->place[column]] += coefficient;
    if (column >= flows) {
      row[making->place[column] + 1] -= coefficient;      /* an extent has either sign */
    }
  }
}

static void
add_form (struct making *making, double row[], const struct form *form, double factor)
{
  for (size_t i = 0; i < form->count; i++) {
    add (making, row, form->terms[i].column, factor * form->terms[i].coefficient);
  }
}

/* SIDE * ROW + slack = RIGHT, at most 1 in size; no slack with SIDE 0.  */
static void
close_row (struct making *making, size_t owner, int side, double right)
{
  double *row = open_row (making), most = 0;
  for (size_t j = 0; j < making->unknowns; j++) {
    most = fmax (most, fabs (row[j]));
  }
  for (size_t j = 0; j < making->unknowns && most > 0; j++) {
    row[j] /= side < 0 ? -most : most;
  }
  making->rows.slack[making->rows.rows] = SIMPLEX_NO_SLACK;
  if (side != 0) {
    making->rows.slack[making->rows.rows] = making->unknowns + making->slacks;
    row[making->unknowns + making->slacks++] = 1;
  }
  making->rows.b[making->rows.rows] = most > 0 ? right / most : right;
  making->owner[making->rows.rows++] = owner;
}

/* Adds LEFT - VALUE * RIGHT, each the flow of component C of a stream or, with C the number of
   components, a form or a total.                                                                */
static void
fact_row (struct making *making, const struct fact *fact, size_t c, double value, double row[])
{
  const struct network *network = making->cone->network;
  size_t n = network->components;
  switch (fact->kind) {
  case FACT_FORM:
    add_form (making, row, &fact->left, 1);
    break;
  case FACT_RATIO:
    add_form (making, row, &fact->left, 1);
    add_form (making, row, &fact->right, -value);
    break;
  case FACT_COMPOSITION:
    add (making, row, fact->stream * n + c, 1);
    for (size_t k = 0; k < n; k++) {
      add (making, row, fact->stream * n + k, -value);
    }
    break;
  case FACT_SHARE:
    add (making, row, fact->stream * n + c, 1);
    add (making, row, fact->of * n + c, -value);
    break;
  }
}

static void
fact_rows (struct making *making, size_t f)
{
  const struct network *network = making->cone->network;
  const struct fact *fact = &network->fact[f];
  bool composed = fact->kind == FACT_COMPOSITION;
  size_t parts = composed || fact->kind == FACT_SHARE ? network->components : 1;
  for (size_t c = 0; c < parts; c++) {
    double value = composed ? fact->fractions[c] : fact->value;
    double half = !making->cone->digits ? 0 : !composed ? fact->rounding
                  : fact->fractions_rounding ? fact->fractions_rounding[c] : 0;
    if (half > 0) {
      fact_row (making, fact, c, value + half, open_row (making));
      close_row (making, f, 1, 0);
      fact_row (making, fact, c, value - half, open_row (making));
      close_row (making, f, -1, 0);
    } else {
      fact_row (making, fact, c, value, open_row (making));
      close_row (making, f, 0, 0);
    }
  }
}

static void
structure_rows (struct making *making)
{
  const struct rows *rows = &making->system->rows;
  for (size_t i = 0; i < making->system->structure; i++) {
    double *row = open_row (making);
    for (size_t e = rows->start[i]; e < rows->start[i + 1]; e++) {
      add (making, row, rows->column[e], rows->coefficient[e]);
    }
    close_row (making, NOWHERE, 0, 0);
  }
}

/* All rows but that which says how much flows.  */
static void
make (struct making *making, struct arena *arena, const struct cone *cone)
{
  const struct network *network = cone->network;
  size_t columns = network_columns (network), flows = network->streams * network->components;
  *making = (struct making) { .arena = arena, .cone = cone,
                              .system = system_make (arena, network, cone->take, NULL) };
  making->place = ARENA_ARRAY (arena, columns + 1, size_t);
  for (size_t j = 0; j < columns; j++) {
    bool absent = making->system->absence.absent[j];
    making->place[j] = absent ? NOWHERE : making->unknowns;
    making->unknowns += absent ? 0 : j < flows ? 1 : 2;
  }
  making->room = making->system->structure + facts_rows (network) + 1;
  making->rows.columns = making->unknowns + facts_rows (network);
  making->rows.a = ARENA_ARRAY (arena, making->room * making->rows.columns + 1, double);
  making->rows.b = ARENA_ARRAY (arena, making->room + 1, double);
  making->rows.slack = ARENA_ARRAY (arena, making->room + 1, size_t);
  making->owner = ARENA_ARRAY (arena, making->room + 1, size_t);
  structure_rows (making);
  for (size_t f = 0; f < network->facts; f++) {
    if (cone->take[f]) {
      fact_rows (making, f);
    }
  }
}

static void
target_row (struct making *making)
{
  size_t n = making->cone->network->components, first = making->cone->target * n;
  double *row = open_row (making);
  for (size_t c = 0; c < n; c++) {
    add (making, row, first + c, 1);
  }
  close_row (making, NOWHERE, 0, 1);
}

bool
cone_flows (struct arena *arena, const struct cone *cone, unsigned seed, bool blamed[])
{
  struct making making;
  double *y, most = 0;
  make (&making, arena, cone);
  target_row (&making);
  y = ARENA_ARRAY (arena, making.rows.rows + 1, double);
  if (simplex_solve (arena, &making.rows, NULL, seed, NULL, y) != SIMPLEX_NONE) {
    return true;
  }
  for (size_t i = 0; i < making.rows.rows; i++) {
    most = fmax (most, fabs (y[i]));
  }
  for (size_t f = 0; f < cone->network->facts && blamed; f++) {
    blamed[f] = false;
  }
  for (size_t i = 0; i < making.rows.rows && blamed; i++) {
    if (making.owner[i] != NOWHERE && fabs (y[i]) > 1e-7 * most) {
      blamed[making.owner[i]] = true;
    }
  }
  return false;
}

/* What the fact divides by is 1; COST is what it divides.  False: it divides by nothing.  */
static bool
whole_row (struct making *making, const struct suspect *suspect, double cost[])
{
  const struct network *network = making->cone->network;
  const struct fact *fact = &network->fact[suspect->fact];
  size_t n = network->components;
  double *row = open_row (making);
  if (fact->kind == FACT_RATIO) {
    add_form (making, cost, &fact->left, 1);
    add_form (making, row, &fact->right, 1);
  } else if (fact->kind != FACT_FORM) {
    size_t over = fact->kind == FACT_SHARE ? fact->of : fact->stream;
    for (size_t c = 0; c < n; c++) {
      bool in = fact->kind == FACT_SHARE || c == suspect->component;
      add (making, row, over * n + c, 1);
      add (making, cost, fact->stream * n + c, in ? 1 : 0);
    }
  }
  for (size_t j = 0; j < making->unknowns; j++) {
    if (fabs (row[j]) > 0) {
      close_row (making, NOWHERE, 0, 1);
      return true;
    }
  }
  return false;
}

static bool
find_room (struct arena *arena, const struct cone *cone, const struct suspect *suspect,
           struct range *range)
{
  struct making making;
  make (&making, arena, cone);
  double *cost = ARENA_ARRAY (arena, making.rows.columns + 1, double);
  if (!whole_row (&making, suspect, cost)) {
    return false;
  }
  double greatest;
  enum simplex_end end = simplex_solve (arena, &making.rows, cost, 0, &range->least, NULL);
  for (size_t j = 0; j < making.rows.columns; j++) {
    cost[j] = -cost[j];
  }
  if (end == SIMPLEX_NONE) {
    return false;
  }
  end = simplex_solve (arena, &making.rows, cost, 0, &greatest, NULL);
  range->greatest = end == SIMPLEX_ENDLESS ? (double) INFINITY : -greatest;
  range->least = range->least > rounding * fmin (range->greatest, 1) ? range->least : 0;
  return true;
}

bool
cone_room (struct arena *arena, struct cone *cone, const struct suspect *suspect,
           struct range *range)
{
  for (int digits = 0; digits < 2; digits++) {
    cone->digits = digits == 1;
    if (cone_flows (arena, cone, 0, NULL) && find_room (arena, cone, suspect, range)) {
      return true;
    }
  }
  return false;
}
