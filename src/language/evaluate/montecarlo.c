#include "config.h"
#include "language/evaluate/montecarlo.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "language/evaluate/wording.h"
#include "language/session_private.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/draw.h"
#include "support/memory.h"
#include "support/sum.h"
#include "support/text.h"

/* How often the user's wish to stop is looked for.  */
enum { TRIALS_AT_A_TIME = 256 };

/* All figures of all trials are kept: 160 MB.  */
static const size_t MOST_VALUES = 20000000;

/* The coverage probability, and the factor that gives it for a normal distribution.  */
static const double PROBABILITY = 0.95, NORMAL_FACTOR = 1.959963984540054;

struct trials {
  const struct evaluation *first;
  const struct statement *statement;
  const struct figures *figures;
  struct settings settings;
  struct shift *shifts;                    /* of each source */
  struct arena *arena;                     /* of one trial */
  double *values;                          /* those of a figure stand together */
  size_t done, failed;
  struct fault failure;                    /* the first */
};

/* ---- Trials ---- */

static void
draw_sources (struct trials *t, struct draw *draw)
{
  for (size_t i = 0; i < t->first->source_count; i++) {
    t->shifts[i].by = t->first->sources[i].limits ? draw_rectangular (draw) : draw_normal (draw);
  }
}

/* Keeps what the first trial without an answer said, in memory that lasts.  */
static void
keep_failure (struct trials *t, const struct fault *fault)
{
  if (t->failed++ > 0) {
    return;
  }
  fault_init (&t->failure, t->first->arena);
  const char *fact[MESSAGE_FACTS];
  for (int i = 0; i < MESSAGE_FACTS; i++) {
    fact[i] = fault->fact[i] ? arena_string (t->first->arena, fault->fact[i]) : NULL;
  }
  fault_set (&t->failure, fault->kind == MESSAGE_NONE ? MESSAGE_NOT_FINITE : fault->kind, fact[0],
             fact[1]);
  fault_facts (&t->failure, fact[2], fact[3]);
}

static void
one_trial (struct trials *t, size_t wanted)
{
  struct evaluation again;
  struct figures found = { NULL, 0, 0 };
  struct fault fault;
  arena_reset (t->arena);
  fault_init (&fault, t->arena);
  evaluation_again (&again, t->first, &fault);
  again.arena = t->arena;
  again.settings = &t->settings;
  again.shifts = t->shifts;
  again.shift_count = t->first->source_count;
  bool good = question_again (&again, t->statement, &found)
              && found.count == t->figures->count;
  for (size_t i = 0; good && i < found.count; i++) {
    good = isfinite (found.at[i].value);
  }
  if (!good) {
    keep_failure (t, &fault);
    return;
  }
  for (size_t i = 0; i < found.count; i++) {
    t->values[i * wanted + t->done] = found.at[i].value;
  }
  t->done++;
}

static bool
run (struct trials *t, size_t wanted)
{
  bool (*interrupted) (void) = t->first->session->options.interrupted;
  struct draw draw;
  draw_start (&draw, t->statement->seed);
  for (size_t i = 0; i < wanted; i++) {
    if (i % TRIALS_AT_A_TIME == 0 && interrupted && interrupted ()) {
      return fault_set (t->first->fault, MESSAGE_INTERRUPTED, NULL, NULL);
    }
    draw_sources (t, &draw);
    one_trial (t, wanted);
  }
  if (2 * t->done < wanted) {
    fault_set (t->first->fault, t->failure.kind, t->failure.fact[0], t->failure.fact[1]);
    fault_facts (t->first->fault, t->failure.fact[2], t->failure.fact[3]);
    fault_place (t->first->fault, t->statement->value->at);
    return false;
  }
  return true;
}

/* ---- What they come to ---- */

struct interval { double low, high; };
struct outcome { double mean, u; struct interval even, shortest; size_t q, r; };

static int
ascending (const void *left, const void *right)
{
  double a = *(const double *) left, b = *(const double *) right;
  return (a > b) - (a < b);
}

/* JCGM 101:2008, 7.6, equations 16 and 17.  */
static void
find_moments (const double y[], size_t M, struct outcome *o)
{
  struct sum total = { 0, 0 }, squares = { 0, 0 };
  for (size_t i = 0; i < M; i++) {
    sum_add (&total, y[i]);
  }
  o->mean = sum_total (&total) / (double) M;
  for (size_t i = 0; i < M; i++) {
    sum_add (&squares, (y[i] - o->mean) * (y[i] - o->mean));
  }
  o->u = sqrt (sum_total (&squares) / (double) (M - 1));
}

/* Y sorted.  JCGM 101:2008, 7.7: q = pM, r = (M - q)/2, rounded; the interval is from the r-th
   value to the (r + q)-th.  The shortest is that for the r of the least width.                  */
static void
find_intervals (const double y[], size_t M, struct outcome *o)
{
  size_t best = 1;
  o->q = (size_t) (PROBABILITY * (double) M + 0.5);
  o->r = (M - o->q + 1) / 2;
  o->r = o->r > 0 ? o->r : 1;
  o->q = o->r + o->q > M ? M - o->r : o->q;
  o->even = (struct interval) { y[o->r - 1], y[o->r + o->q - 1] };
  for (size_t r = 1; r + o->q <= M; r++)
    if (y[r + o->q - 1] - y[r - 1] < y[best + o->q - 1] - y[best - 1]) {
      best = r;
    }
  o->shortest = (struct interval) { y[best - 1], y[best + o->q - 1] };
}

/* A distribution counts as asymmetric when the shortest interval is shorter than the even one by
   more than this: sampling alone makes a few tenths of a per cent.  Own judgement, no source.   */
static const double SHORTER = 0.98;

/* Half of the last digit of U told with two digits (JCGM 101:2008, 7.9.2).  */
static double
tolerance_of (double u)
{
  double exponent = floor (log10 (u));
  double l = exponent - 1;
  return 0.5 * pow (10, l);
}

/* Does the end of the interval by first order, END, lie at the K-th value, give or take the
   tolerance and the ranks by which that value itself may be off (three standard deviations of the
   binomial count)?                                                                              */
static bool
end_holds (const double y[], size_t M, size_t k, double end, double tolerance)
{
  double tail = (1 - PROBABILITY) / 2;
  double off = 3 * sqrt ((double) M * tail * (1 - tail));
  size_t ranks = (size_t) off + 1;
  double low = y[k > ranks ? k - ranks : 0], high = y[k + ranks < M ? k + ranks : M - 1];
  return end >= low - tolerance && end <= high + tolerance;
}

/* JCGM 101:2008, 8.1: first order holds where the ends of its interval and of that of the trials
   are the same within the tolerance.                                                            */
static bool
first_order_holds (const double y[], size_t M, const struct outcome *o, double value, double u)
{
  double tolerance = tolerance_of (u), half = NORMAL_FACTOR * u;
  return end_holds (y, M, o->r - 1, value - half, tolerance)
         && end_holds (y, M, o->r + o->q - 1, value + half, tolerance);
}

/* ---- Rows and notes ---- */

static void
add_row (const struct trials *t, const struct figure *f, const char *what, double value, double u)
{
  struct result *result = t->first->result;
  struct answer *a = result_answer (result);
  a->what = arena_format (result->arena, "%s, %s", f->label ? f->label : f->what, what);
  a->named = true;
  a->value = value;
  a->uncertainty = u;
  a->coverage = t->settings.coverage;
  a->unit = f->unit_text;
  a->moisture = f->moisture;
  a->basis = f->basis;
}

static void
tell_first_order (struct result *result, const struct figure *f, double u)
{
  double half = NORMAL_FACTOR * u;
  const char *unit = f->unit_text && *f->unit_text ? f->unit_text : NULL;
  struct remark *remark
    = result_remark (result, MESSAGE_NOTE_FIRST_ORDER,
                     figure_text (result->arena, f->value - half),
                     arena_format (result->arena, "%s%s%s",
                                   figure_text (result->arena, f->value + half), unit ? " " : "",
                                   unit ? unit : ""));
  remark->fact[2] = rough_text (result->arena, tolerance_of (u));
}

static void
tell_figure (const struct trials *t, double y[], size_t which, const struct budget *budget)
{
  const struct figure *f = &t->figures->at[which];
  struct result *result = t->first->result;
  struct outcome o;
  find_moments (y, t->done, &o);
  qsort (y, t->done, sizeof *y, ascending);
  find_intervals (y, t->done, &o);
  add_row (t, f, "mean", o.mean, o.u);
  add_row (t, f, "95 % from", o.even.low, UNSTATED);
  add_row (t, f, "95 % to", o.even.high, UNSTATED);
  if (o.shortest.high - o.shortest.low < SHORTER * (o.even.high - o.even.low)) {
    add_row (t, f, "shortest 95 % from", o.shortest.low, UNSTATED);
    add_row (t, f, "shortest 95 % to", o.shortest.high, UNSTATED);
  }
  if (!first_order_holds (y, t->done, &o, f->value, budget->uncertainty)) {
    tell_first_order (result, f, budget->uncertainty);
  }
}

static void
tell_trials (const struct trials *t)
{
  struct result *result = t->first->result;
  struct arena *arena = result->arena;
  result_remark (result, MESSAGE_NOTE_TRIALS, arena_format (arena, "%zu", t->done + t->failed),
                 arena_format (arena, "%lu", t->statement->seed));
  if (t->failed > 0) {
    struct text why;
    text_init (&why);
    message_write (&why, message_sentence (t->failure.kind), t->failure.fact);
    result_remark (result, MESSAGE_NOTE_TRIALS_FAILED, arena_format (arena, "%zu", t->failed),
                   arena_copy (arena, why.bytes, why.length));
    text_clear (&why);
  }
}

bool
montecarlo_answers (const struct evaluation *first, const struct statement *s,
                    const struct figures *figures, const struct budget *const budgets[])
{
  size_t wanted = s->trials, uncertain = 0;
  for (size_t i = 0; i < figures->count; i++) {
    uncertain += budgets[i] != NULL;
  }
  for (struct answer *a = first->result->answers; a; a = a->next) {
    a->what = arena_format (first->arena, "%s, first order", a->label ? a->label : a->what);
    a->label = NULL;
    a->named = true;
  }
  if (uncertain == 0) {
    result_remark (first->result, MESSAGE_NOTE_NOTHING_UNCERTAIN, NULL, NULL);
    return true;
  }
  if (figures->count > MOST_VALUES / wanted) {
    fault_set_at (first->fault, MESSAGE_RANGE, s->value->at,
                  "so many trials of so many figures do not fit in memory", NULL);
    fault_hint (first->fault, "at most %zu trials of these", MOST_VALUES / figures->count);
    return false;
  }
  struct trials t = { .first = first, .statement = s, .figures = figures,
                      .settings = *first->settings, .arena = arena_create () };
  t.settings.ignore_total = true;
  t.shifts = ARENA_ARRAY (first->arena, first->source_count, struct shift);
  for (size_t i = 0; i < first->source_count; i++) {
    t.shifts[i].what = first->sources[i].what;
  }
  t.values = memory_get (memory_product (wanted, figures->count), sizeof *t.values);
  bool done = run (&t, wanted);
  for (size_t i = 0; done && i < figures->count; i++)
    if (budgets[i]) {
      tell_figure (&t, t.values + i * wanted, i, budgets[i]);
    }
  if (done) {
    tell_trials (&t);
  }
  memory_release (t.values);
  arena_destroy (t.arena);
  return done;
}
