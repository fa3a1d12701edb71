/* Gross errors.

   The test of adjustments is that of Mah and Tamhane, AIChE J. 28 (1982) 828, in a form for any
   figures: z = |a| / sqrt (u^2 - g' C g), a the adjustment, g the figure's gradient, C the
   covariance of the result.  z^2 is the drop of chi2 when the figure is left out.  Critical value
   for m figures tested at once: Sidak, J. Am. Stat. Assoc. 62 (1967) 626.  Figures whose
   adjustments are fully correlated cannot be told apart: Bagajewicz and Jiang, Comput. Chem. Eng.
   22 (1998) 1789.  Leaks: Narasimhan and Mah, AIChE J. 33 (1987) 1514; Crowe, Can. J. Chem. Eng. 70
   (1992) 1030.  Serial elimination: Ripps, Chem. Eng. Prog. Symp. Ser. 61 (55) (1965) 8.         */
#include "config.h"
#include "balance/gross.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <gsl/gsl_cdf.h>
#include "balance/solution.h"
#include "balance/uncertainty.h"
#include "support/arena.h"
#include "support/fault.h"

/* A figure is redundant if this share of its variance is the adjustment's.  */
static const double REDUNDANT = 1e-8;
/* z that differ by less than this share are equal; below LEAST_Z they say nothing.  Correlations
   as near to 1 as PARALLEL are 1.  */
static const double EQUAL_Z = 1e-7, LEAST_Z = 1e-6, PARALLEL = 1e-6;
/* A leak of a usual flow that moves no figure by more than this share of its uncertainty cannot be
   seen.  */
static const double SEEN = 1e-6;
/* Of a leak's own row and of the others, by their sizes.  */
static const double MET = 1e-8;
/* The probability with which the least detectable error is found.  */
static const double POWER = 0.8;

struct gross {
  struct arena *arena, *scratch;
  struct measured *measured;
  const struct fit *fit;
  const struct solve_options *options;
};

bool
chi2_passes (double chi2, size_t freedom, double confidence)
{
  return freedom == 0 || chi2 <= gsl_cdf_chisq_Pinv (confidence, (double) freedom);
}

bool *
redundant_figures (struct arena *arena, const struct measured *measured, const struct fit *fit)
{
  bool *redundant = ARENA_ARRAY (arena, measured->figures + 1, bool);
  double *h = ARENA_ARRAY (arena, fit->rows + 1, double);
  factor_leverages (fit->factor, arena, h);
  for (size_t row = 0; row < fit->rows; row++) {
    redundant[fit->tangent.figure[row]] = 1 - h[row] > REDUNDANT;
  }
  return redundant;
}

/* ---- Adjustments ---- */

/* Figure I as it was, and as it is where nothing can be said of it.  */
static struct adjustment
adjustment_of (const struct figure *figure)
{
  return (struct adjustment) { .fact = figure->fact, .component = figure->component,
                               .stated = figure->y, .stated_u = figure->u,
                               .moved_to = figure->y, .moved_to_u = figure->u,
                               .z = (double) NAN, .implied = (double) NAN,
                               .detectable = (double) NAN, .class = FIGURE_UNOBSERVABLE };
}

/* The adjustment of a figure that counts, of which a share H of its variance is left.  */
static void
adjust (const struct gross *g, const struct figure *figure, double h, struct adjustment *a)
{
  double rest = 1 - h;
  a->moved_to = figure_value (figure, g->fit->v);
  a->moved_to_u = figure->u * sqrt (h);        /* or more, see below */
  a->class = rest > REDUNDANT ? FIGURE_REDUNDANT : FIGURE_NEEDED;
  if (rest > REDUNDANT) {
    a->z = fabs (a->stated - a->moved_to) / (figure->u * sqrt (rest));
    a->implied = a->stated - (a->stated - a->moved_to) / rest;
    a->detectable = figure->u / sqrt (rest);     /* times what depends on all, see below */
  }
}

/* What is worked with to find ties: figures that count by z, and the other way round.  */
struct by_z { double z; size_t figure; };
struct ties {
  struct adjustment *at;
  const size_t *row;             /* by figure: in the tangent */
  struct by_z *sorted;
  size_t count;
};

static int
by_z (const void *a, const void *b)
{
  const struct by_z *left = a, *right = b;
  if (left->z < right->z || left->z > right->z) {
    return left->z < right->z ? -1 : 1;
  }
  return (left->figure > right->figure) - (left->figure < right->figure);
}

/* Can the data tell two figures of the same z apart?  */
static bool
is_tie (struct gross *g, const struct ties *ties, const struct spread *one, size_t other)
{
  const struct sparse *rows = &g->fit->tangent.equations.measured;
  struct spread two;
  if (!factor_spread (g->fit->factor, g->scratch, rows, ties->row[other], &two)) {
    return false;
  }
  double square = (1 - spread_product (one, one)) * (1 - spread_product (&two, &two));
  return fabs (spread_product (one, &two)) > (1 - PARALLEL) * sqrt (square);
}

/* Ties those of the same z, from place FROM to TO by z, with figure I where they stand behind
   it.  */
static bool
tie_with (struct gross *g, const struct ties *ties, size_t i, size_t from, size_t to, size_t tie)
{
  const struct sparse *rows = &g->fit->tangent.equations.measured;
  struct spread one;
  bool tied = false, known = false;
  for (size_t k = from; k < to; k++) {
    size_t j = ties->sorted[k].figure;
    if (j <= i || ties->at[j].tie > 0) {
      continue;
    }
    if (!known && !factor_spread (g->fit->factor, g->scratch, rows, ties->row[i], &one)) {
      return false;
    }
    known = true;
    if (is_tie (g, ties, &one, j)) {
      ties->at[j].tie = tie;
      tied = true;
    }
  }
  arena_reset (g->scratch);
  return tied;
}

static void
tie_equals (struct gross *g, struct adjustment at[])
{
  size_t count = 0, n = g->measured->figures;
  struct arena *work = arena_create ();
  size_t *row = ARENA_ARRAY (work, n + 1, size_t), *place = ARENA_ARRAY (work, n + 1, size_t);
  struct ties ties = { at, row, ARENA_ARRAY (work, n + 1, struct by_z), 0 };
  for (size_t r = 0; r < g->fit->rows; r++) {
    size_t i = g->fit->tangent.figure[r];
    row[i] = r;
    if (at[i].z > LEAST_Z) {
      ties.sorted[ties.count++] = (struct by_z) { at[i].z, i };
    }
  }
  qsort (ties.sorted, ties.count, sizeof *ties.sorted, by_z);
  for (size_t k = 0; k < ties.count; k++) {
    place[ties.sorted[k].figure] = k;
  }
  for (size_t i = 0; i < n; i++) {
    size_t from = place[i], to = place[i] + 1;
    if (at[i].tie > 0 || !(at[i].z > LEAST_Z)) {
      continue;
    }
    while (from > 0 && at[i].z - ties.sorted[from - 1].z < EQUAL_Z * at[i].z) {
      from--;
    }
    while (to < ties.count && ties.sorted[to].z - at[i].z < EQUAL_Z * at[i].z) {
      to++;
    }
    if (tie_with (g, &ties, i, from, to, count + 1)) {
      at[i].tie = ++count;
    }
  }
  arena_destroy (work);
}

/* What flows are held at zero makes figures no better than they are without.  */
static void
loosen (struct gross *g, struct adjustment at[])
{
  const struct factor *loose = fit_loose_factor (g->scratch, g->measured, g->fit);
  if (loose) {
    double *h = ARENA_ARRAY (g->scratch, g->fit->rows + 1, double);
    factor_leverages (loose, g->scratch, h);
    for (size_t row = 0; row < g->fit->rows; row++) {
      size_t i = g->fit->tangent.figure[row];
      at[i].moved_to_u = fmax (at[i].moved_to_u, at[i].stated_u * sqrt (h[row]));
    }
  }
}

/* One for each figure, in their order.  *CRITICAL: for the redundant ones.  */
static struct adjustment *
adjust_all (struct gross *g, double *critical)
{
  size_t n = g->measured->figures, tested = 0;
  struct adjustment *at = ARENA_ARRAY (g->arena, n + 1, struct adjustment);
  double *h = ARENA_ARRAY (g->scratch, g->fit->rows + 1, double);
  for (size_t i = 0; i < n; i++) {
    at[i] = adjustment_of (&g->measured->figure[i]);
  }
  factor_leverages (g->fit->factor, g->scratch, h);
  for (size_t row = 0; row < g->fit->rows; row++) {
    size_t i = g->fit->tangent.figure[row];
    adjust (g, &g->measured->figure[i], h[row], &at[i]);
    tested += at[i].class == FIGURE_REDUNDANT;
  }
  loosen (g, at);
  arena_reset (g->scratch);
  double each = pow (g->options->confidence, 1 / (double) (tested > 0 ? tested : 1));
  *critical = gsl_cdf_ugaussian_Qinv ((1 - each) / 2);
  for (size_t i = 0; i < n; i++) {
    at[i].detectable *= *critical + gsl_cdf_ugaussian_Pinv (POWER);
  }
  tie_equals (g, at);
  return at;
}

/* ---- Leaks ---- */

/* Does D meet the exact rows, 1 in row K and 0 in the others?  Not where K follows from others.  */
static bool
meets (struct gross *g, const double d[], size_t k)
{
  const struct tangent *t = &g->fit->tangent;
  double *met = ARENA_ARRAY (g->scratch, t->equations.exact.count + 1, double);
  sparse_times (&t->equations.exact, d, met);
  for (size_t i = 0; i < t->equations.exact.count; i++) {
    if (fabs (met[i] - (i == k ? 1 : 0)) * t->size[k] > MET * t->size[i]) {
      return false;
    }
  }
  return true;
}

/* The leak in exact row K: chi2 with it free falls by (e a)^2 / a a, where a is what a leak of 1
   changes the weighted figures by, those being fitted again.  */
static bool
leak_of (struct gross *g, size_t k, struct leak *leak)
{
  const struct tangent *t = &g->fit->tangent;
  size_t m = t->equations.measured.count, exact = t->equations.exact.count;
  double *c = ARENA_ARRAY (g->scratch, exact + 1, double);
  double *zero = ARENA_ARRAY (g->scratch, m + 1, double);
  double *a = ARENA_ARRAY (g->scratch, m + 1, double);
  double *d = gradient_make (g->scratch, g->measured), ea = 0, aa = 0;
  c[k] = 1;
  factor_solve (g->fit->factor, g->scratch, c, zero, d);
  sparse_times (&t->equations.measured, d, a);
  for (size_t i = 0; i < m; i++) {
    ea += t->e[i] * a[i];
    aa += a[i] * a[i];
  }
  bool seen = sqrt (aa) * g->measured->flow > SEEN && meets (g, d, k);
  if (seen) {
    const struct row *row = &g->measured->system->rows.row[k];
    *leak = (struct leak) { row->of, row->component, ea / aa, ea * ea / aa };
  }
  return seen;
}

static int
by_drop (const void *a, const void *b)
{
  const struct leak *left = a, *right = b;
  if (left->drop < right->drop || left->drop > right->drop) {
    return left->drop < right->drop ? 1 : -1;
  }
  return (left->boundary > right->boundary) - (left->boundary < right->boundary);
}

static bool
stopped (const struct gross *g, struct fault *fault)
{
  if (g->options->interrupted && g->options->interrupted ()) {
    fault_set (fault, MESSAGE_INTERRUPTED, NULL, NULL);
    return true;
  }
  return false;
}

/* Marks the boundaries that have one of FORM's streams.  */
static void
mark_beside (const struct network *network, const struct form *form, bool beside[])
{
  for (size_t i = 0; i < form->count; i++) {
    size_t stream = form->terms[i].column / network->components;
    for (size_t b = 0; b < network->boundaries; b++) {
      const struct boundary *boundary = &network->boundary[b];
      for (size_t k = 0; k < boundary->inlet_count; k++) {
        beside[b] = beside[b] || boundary->inlets[k] == stream;
      }
      for (size_t k = 0; k < boundary->outlet_count; k++) {
        beside[b] = beside[b] || boundary->outlets[k] == stream;
      }
    }
  }
}

/* Where a leak is looked for: everywhere, in a large network beside the figures that stand out, as
   each takes a solution of its own.  */
static bool *
leak_places (struct gross *g, const struct solution *solution)
{
  const struct network *network = g->measured->network;
  bool *beside = ARENA_ARRAY (g->arena, network->boundaries + 1, bool);
  bool large = g->measured->unknowns > FACTOR_DENSE;
  for (size_t b = 0; b < network->boundaries; b++) {
    beside[b] = !large;
  }
  for (size_t i = 0; large && i < g->measured->figures; i++) {
    if (solution->adjustments[i].z > solution->z_critical) {
      mark_beside (network, &g->measured->figure[i].left, beside);
      mark_beside (network, &g->measured->figure[i].right, beside);
    }
  }
  return beside;
}

/* The leaks that stand out as a figure would.  */
static bool
find_leaks (struct gross *g, struct solution *solution, struct fault *fault)
{
  const struct system *system = g->measured->system;
  struct leak *leaks = ARENA_ARRAY (g->arena, system->structure + 1, struct leak);
  bool *beside = leak_places (g, solution);
  size_t count = 0;
  for (size_t k = 0; k < system->structure; k++) {
    bool balance = system->rows.row[k].kind == ROW_BALANCE && beside[system->rows.row[k].of];
    if (balance && leak_of (g, k, &leaks[count])) {
      count += sqrt (leaks[count].drop) > solution->z_critical;
    }
    arena_reset (g->scratch);
    if (stopped (g, fault)) {
      return false;
    }
  }
  qsort (leaks, count, sizeof *leaks, by_drop);
  solution->leaks = leaks;
  solution->leak_count = count;
  return true;
}

/* ---- Leaving out ---- */

/* The adjustment that stands out most; the first of those that cannot be told apart.  */
static size_t
greatest (const struct adjustment at[], const bool left_out[], size_t n)
{
  size_t best = n;
  for (size_t i = 0; i < n; i++) {
    bool counts = !left_out[i] && at[i].class == FIGURE_REDUNDANT;
    if (counts && (best == n || at[i].z > at[best].z * (1 + EQUAL_Z))) {
      best = i;
    }
  }
  return best;
}

static void
note_ties (struct gross *g, const struct adjustment at[], struct elimination *step)
{
  size_t n = g->measured->figures, *tie = ARENA_ARRAY (g->arena, n, size_t);
  for (size_t i = 0; i < n && at[step->adjustment].tie > 0; i++) {
    if (at[i].tie == at[step->adjustment].tie) {
      tie[step->tie_count++] = i;
    }
  }
  step->tie = tie;
}

static double *
values_of (struct gross *g, const struct fit *fit)
{
  size_t columns = g->measured->system->columns;
  double *value = ARENA_ARRAY (g->arena, columns, double);
  memcpy (value, fit->v, columns * sizeof *value);
  return value;
}

/* Fits again from where FIT was; *FIT stays where that does not converge.  False: interrupted.  */
static bool
fit_again (struct gross *g, struct arena *fits, struct fit *fit, bool *done, struct fault *fault)
{
  struct fault own;
  struct fit next;
  fault_init (&own, fault->arena);
  *done = measured_minimise (fits, g->measured, g->options, fit->v, MINIMISE_CLOSE, &next, &own);
  if (own.kind == MESSAGE_INTERRUPTED) {
    *fault = own;
    return false;
  }
  *done = *done && next.blocked == NOWHERE;
  *fit = *done ? next : *fit;
  return true;
}

/* Leaves figures out until the test passes or there is nothing left to test with.  AT: as of all
   figures.  FITS: an arena for what is fitted again.  */
static bool
leave_out (struct gross *g, struct arena *fits, const struct adjustment at[],
           struct solution *solution, struct fault *fault)
{
  size_t n = g->measured->figures, count = 0;
  struct elimination *steps = ARENA_ARRAY (g->arena, n + 1, struct elimination);
  struct fit *fit = ARENA_NEW (g->arena, struct fit);
  double critical;
  bool done = true;
  *fit = *g->fit;
  while (!chi2_passes (fit->chi2, fit->freedom, g->options->confidence) && fit->freedom > 1) {
    size_t i = greatest (at, g->measured->left_out, n);
    if (i == n) {
      break;
    }
    struct elimination step = { .adjustment = i, .chi2 = fit->chi2, .z = at[i].z,
                                .freedom = fit->freedom };
    note_ties (g, at, &step);
    g->measured->left_out[i] = true;
    if (!fit_again (g, fits, fit, &done, fault)) {
      return false;
    }
    if (!done) {
      break;
    }
    step.implied = figure_value (&g->measured->figure[i], fit->v);
    step.chi2_left = fit->chi2;
    step.freedom_left = fit->freedom;
    step.value = values_of (g, fit);
    steps[count++] = step;
    g->fit = fit;
    at = adjust_all (g, &critical);
  }
  solution->eliminations = steps;
  solution->elimination_count = count;
  return true;
}

/* ---- All of it ---- */

static bool
explain (struct gross *g, struct solution *solution, struct fault *fault)
{
  if (!find_leaks (g, solution, fault)) {
    return false;
  }
  size_t n = g->measured->figures;
  bool *before = ARENA_ARRAY (g->arena, n + 1, bool);
  memcpy (before, g->measured->left_out, n * sizeof *before);
  struct arena *fits = arena_create ();
  bool done = leave_out (g, fits, solution->adjustments, solution, fault);
  arena_destroy (fits);
  memcpy (g->measured->left_out, before, n * sizeof *before);
  return done;
}

bool
gross_test (struct arena *arena, struct measured *measured, const struct fit *fit,
            const struct solve_options *options, struct solution *solution, struct fault *fault)
{
  struct gross g = { arena, arena_create (), measured, fit, options };
  double critical;
  solution->adjustment_count = measured->figures;
  solution->adjustments = adjust_all (&g, &critical);
  solution->z_critical = critical;
  solution->chi2 = fit->chi2;
  solution->freedom = fit->freedom;
  solution->critical = gsl_cdf_chisq_Pinv (options->confidence, (double) fit->freedom);
  solution->p = gsl_cdf_chisq_Q (fit->chi2, (double) fit->freedom);
  solution->passed = fit->chi2 <= solution->critical;
  bool done = solution->passed || explain (&g, solution, fault);
  arena_destroy (g.scratch);
  return done;
}
