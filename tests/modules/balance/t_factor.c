#include "config.h"

#include <math.h>
#include "libtest.h"
#include "metered.h"
#include "balance/column_order.h"
#include "balance/factor_way.h"
#include "support/arena.h"

/* Both ways of taking equations apart, on random ones: balances of a chain of units with cross
   connections, some of them said twice, and figures whose weights lie far apart.  */
enum { UNKNOWNS = 60, EXACT = 25, MEASURED = 40 };

static struct linearised
random_equations (struct arena *arena, unsigned long long *seed)
{
  struct linearised made = { .unknowns = UNKNOWNS };
  double *scale = ARENA_ARRAY (arena, UNKNOWNS, double);
  made.exact = sparse_make (arena, EXACT, EXACT * 5);
  made.measured = sparse_make (arena, MEASURED, MEASURED * 3);
  for (size_t j = 0; j < UNKNOWNS; j++) {
    scale[j] = 1;
  }
  made.scale = scale;
  for (size_t i = 0; i < EXACT; i++) {
    size_t from = i % 5 == 4 ? i - 1 : i;        /* every fifth row repeats the one before */
    sparse_begin (&made.exact);
    for (size_t k = 0; k < 5; k++) {
      sparse_add (&made.exact, (2 * from + 7 * k * k) % UNKNOWNS, k % 2 ? 1 : -1);
    }
  }
  for (size_t i = 0; i < MEASURED; i++) {
    double weight = pow (10, 4 * metered_uniform (seed));
    sparse_begin (&made.measured);
    for (size_t k = 0; k < 3; k++) {
      double place = (UNKNOWNS - 12) * metered_uniform (seed);
      sparse_add (&made.measured, (size_t) place, weight * (1 - 2 * metered_uniform (seed)));
    }
  }
  return made;
}

/* The right sides of the exact rows agree: C v for some v.  */
static void
random_sides (struct linearised *equations, unsigned long long *seed, double c[], double e[])
{
  double v[UNKNOWNS];
  for (size_t j = 0; j < UNKNOWNS; j++) {
    v[j] = metered_normal (seed);
  }
  sparse_times (&equations->exact, v, c);
  for (size_t i = 0; i < MEASURED; i++) {
    e[i] = metered_normal (seed);
  }
}

static void
compare_solutions (struct arena *arena, struct linearised *equations, unsigned long long *seed,
                   const struct factor *dense, const struct factor *sparse)
{
  double c[EXACT], e[MEASURED], d[2][UNKNOWNS], met[2][EXACT], moved[2][MEASURED];
  random_sides (equations, seed, c, e);
  factor_solve (dense, arena, c, e, d[0]);
  factor_solve (sparse, arena, c, e, d[1]);
  for (size_t way = 0; way < 2; way++) {
    sparse_times (&equations->exact, d[way], met[way]);
    sparse_times (&equations->measured, d[way], moved[way]);
  }
  for (size_t i = 0; i < EXACT; i++) {
    CHECK (fabs (met[0][i] - c[i]) < 1e-10);
    CHECK (fabs (met[1][i] - c[i]) < 1e-10);
  }
  for (size_t i = 0; i < MEASURED; i++) {
    CHECK (fabs (moved[0][i] - moved[1][i]) < 1e-8);
  }
}

static void
compare_spreads (struct arena *arena, const struct factor *dense, const struct factor *sparse)
{
  double h[2][MEASURED];
  factor_leverages (dense, arena, h[0]);
  factor_leverages (sparse, arena, h[1]);
  for (size_t i = 0; i < MEASURED; i++) {
    CHECK (fabs (h[0][i] - h[1][i]) < 1e-8);
    CHECK (h[0][i] >= 0 && h[0][i] < 1 + 1e-12);
  }
  for (size_t j = 0; j < UNKNOWNS; j++) {
    const struct factor *ways[2] = { dense, sparse };
    struct sparse form = sparse_make (arena, 1, 1);
    double sum[2] = { 0, 0 };
    bool settled[2];
    sparse_begin (&form);
    sparse_add (&form, j, 1);
    for (size_t way = 0; way < 2; way++) {
      struct spread spread;
      settled[way] = factor_spread (ways[way], arena, &form, 0, &spread);
      sum[way] = settled[way] ? spread_product (&spread, &spread) : 0;
    }
    SAME_INT (settled[0], settled[1]);
    if (settled[0] && settled[1]) {
      CHECK (fabs (sum[0] - sum[1]) < 1e-7 * (sum[0] + 1e-9));
    }
  }
}

/* An open move changes neither exact rows nor figures.  */
static void
check_open (struct arena *arena, const struct linearised *equations, const struct factor *factor)
{
  double d[UNKNOWNS], met[EXACT], moved[MEASURED], size = 0;
  factor_open_move (factor, arena, 1, d);
  sparse_times (&equations->exact, d, met);
  sparse_times (&equations->measured, d, moved);
  for (size_t j = 0; j < UNKNOWNS; j++) {
    size = fmax (size, fabs (d[j]));
  }
  CHECK (factor_open (factor) > 0 && size > 0);
  for (size_t i = 0; i < EXACT; i++) {
    CHECK (fabs (met[i]) < 1e-10 * size);
  }
  for (size_t i = 0; i < MEASURED; i++) {
    CHECK (fabs (moved[i]) < 1e-7 * size);
  }
}

static void
both_ways_agree (void)
{
  unsigned long long seed = 99;
  for (size_t draw = 0; draw < 20; draw++) {
    struct arena *arena = arena_create ();
    struct linearised equations = random_equations (arena, &seed);
    const struct factor *dense = factor_make_dense (arena, &equations);
    const struct factor *sparse = factor_make_sparse (arena, &equations);
    test_about ("draw %zu of seed 99", draw);
    SAME_INT (factor_rank (dense), factor_rank (sparse));
    SAME_INT (factor_open (dense), factor_open (sparse));
    compare_solutions (arena, &equations, &seed, dense, sparse);
    compare_spreads (arena, dense, sparse);
    check_open (arena, &equations, dense);
    check_open (arena, &equations, sparse);
    arena_destroy (arena);
  }
}

/* An arrow: the column that all rows share comes last, or everything fills in.  */
static void
order_keeps_fill_low (void)
{
  enum { N = 30 };
  struct arena *arena = arena_create ();
  struct sparse arrow = sparse_make (arena, N, 2 * N);
  bool seen[N] = { false };
  for (size_t i = 0; i < N; i++) {
    sparse_begin (&arrow);
    sparse_add (&arrow, i, 1);
    sparse_add (&arrow, 0, 1);
  }
  struct sets sets = { arrow.count, arrow.start, arrow.column };
  size_t *order = column_order (arena, N, 1, &sets);
  for (size_t k = 0; k < N; k++) {
    NEED (order[k] < N);
    CHECK (!seen[order[k]]);
    seen[order[k]] = true;
  }
  CHECK (order[N - 1] == 0 || order[N - 2] == 0);
  arena_destroy (arena);
}

/* In a line each column has a neighbour on either side, that which is left of it is eliminated into
   it.  From the ends inwards every column would wait for half of all; in parts it waits for its own
   and for a few between.  */
static void
order_is_shallow (void)
{
  enum { N = 4000 };
  static size_t at[N + 2], left[N + 2], right[N + 2], depth[N + 2], most;
  struct arena *arena = arena_create ();
  struct sparse line = sparse_make (arena, N, 2 * N);
  for (size_t i = 0; i + 1 < N; i++) {
    sparse_begin (&line);
    sparse_add (&line, i, 1);
    sparse_add (&line, i + 1, 1);
  }
  struct sets sets = { line.count, line.start, line.column };
  size_t *order = column_order (arena, N, 1, &sets);
  for (size_t k = 0; k < N; k++) {
    at[order[k] + 1] = k + 1;
    left[k + 1] = k;
    right[k + 1] = k + 2;
  }
  for (size_t k = 0; k < N; k++) {      /* who waits for it: its neighbour that goes next */
    size_t j = order[k] + 1, l = left[j], r = right[j];
    NEED (at[j] == k + 1);
    right[l] = r;
    left[r] = l;
    if (l >= 1) {
      depth[l] = depth[l] > depth[j] ? depth[l] : depth[j] + 1;
    }
    if (r <= N) {
      depth[r] = depth[r] > depth[j] ? depth[r] : depth[j] + 1;
    }
    most = depth[j] > most ? depth[j] : most;
  }
  CHECK (most < 200);
  arena_destroy (arena);
}

/* ---- Two hundred units ---- */

/* A line of units, each with a bypass of the next; the flows are known, their meters err.  Each
   stream's flow is a sum over paths, so every balance holds.  */
enum { UNITS = 200, PARTS = 2 };

static void
large_networks_reconcile (void)
{
  unsigned long long seed = 314;
  struct metered plant;
  struct solution s;
  int kind;
  size_t streams = 2 * UNITS + 1, within = 0, tested = 0;
  /* stream 2u enters unit u from the one before, 2u + 1 leaves it past the next unit */
  double flow[2 * UNITS + 3][PARTS] = { { 0 } };
  metered_init (&plant, PARTS, streams);
  for (size_t c = 0; c < PARTS; c++) {
    flow[0][c] = c == 0 ? 60 : 40;
  }
  for (size_t u = 0; u < UNITS; u++) {
    size_t in[2] = { 2 * u, u >= 2 ? 2 * u - 3 : 0 }, out[2] = { 2 * u + 2, 2 * u + 1 };
    for (size_t c = 0; c < PARTS; c++) {
      double all = flow[in[0]][c] + (u >= 2 ? flow[in[1]][c] : 0);
      double past = u + 2 < UNITS ? all * (0.2 + 0.3 * metered_uniform (&seed)) : 0;
      flow[out[0]][c] = all - past;
      flow[out[1]][c] = past;
    }
    metered_boundary_of (&plant, BOUNDARY_SEPARATE, u >= 2 ? 2 : 1, in, u + 2 < UNITS ? 2 : 1,
                         out);
  }
  for (size_t k = 0; k < streams; k++) {
    double total = flow[k][0] + flow[k][1], u = 0.01 * total;
    if (total > 0 && k % 3 != 1) {
      metered_total (&plant, k, total + u * metered_normal (&seed), u);
    }
    if (total > 0 && k % 2 == 0) {
      metered_fraction (&plant, k, 0, flow[k][0] / total + 0.002 * metered_normal (&seed), 0.002);
    }
  }
  NEED (metered_reconcile (&plant, &s, &kind));
  SAME_INT (s.status, BALANCE_RECONCILED);
  CHECK (s.freedom > 50);
  test_about ("seed 314: chi2 %g of %zu", s.chi2, s.freedom);
  CHECK (fabs (s.chi2 - (double) s.freedom) < 4 * sqrt (2 * (double) s.freedom));
  CHECK (s.mismatch < 1e-12);
  for (size_t k = 0; k < streams; k += 7) {
    double u = metered_total_u (&plant, &s, k), total = flow[k][0] + flow[k][1];
    if (s.fixed_total[k] && u > 0) {
      tested++;
      within += fabs (metered_total_value (&plant, &s, k) - total) < 3 * u;
    }
  }
  test_about ("seed 314: %zu of %zu within three standard uncertainties", within, tested);
  CHECK (tested > 30 && within + 2 >= tested);
  metered_clear (&plant);
}

static const struct test_case cases[] = {
  { "the dense and the sparse way agree", both_ways_agree },
  { "what all rows share is eliminated last", order_keeps_fill_low },
  { "a long line is eliminated from many places", order_is_shallow },
  { "a line of two hundred units is reconciled", large_networks_reconcile },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
