#include "config.h"
#include "language/check/search.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "result/check_verdict.h"
#include "support/arena.h"

/* Figures nearer than this are the same reading in other words: 14.696 psi is 101.3253 kPa.  */
#define THE_SAME 1e-5
/* Conditions that far off (a factor of two, as a logarithm) nobody means: the volume is another. */
#define FAR_OFF 0.7
/* Two at a time only where both are usual: pairs of rare ones fit any figure by chance.  */
enum { MOST_COST = 3 };

bool
check_fits (const struct check *check, double figure)
{
  return fabs (check->number - figure) <= check->limit * (1 + 1e-9);
}

double
check_deviation (const struct check *check, double figure, const struct unit *unit)
{
  bool point = unit && unit->sort == UNIT_POINT && fabs (unit->offset) > 0;
  return point || !(fabs (figure) > 0) ? UNSTATED : check->number / figure - 1;
}

static bool
near (double a, double b, double relative)
{
  return fabs (a - b) <= relative * fmax (fabs (a), fabs (b));
}

/* ---- One at a time ---- */

/* Puts what NEW says into OLD, which comes to the same.  */
static void
join (struct check *check, struct candidate *old, const struct candidate *new)
{
  bool references = old->rule && new->rule && old->rule->change == READING_REFERENCE
                    && new->rule->change == READING_REFERENCE;
  bool repeats = references ? old->sides == new->sides && old->family == new->family
                            : old->rule == new->rule;
  if (repeats || strlen (old->said) > 150) {
    return;
  }
  old->said = arena_format (check->work, "%s; that is, %s", old->said, new->said);
}

size_t
search_singles (struct check *check, struct candidate *candidates, size_t count)
{
  size_t kept = 0;
  for (size_t i = 0; i < count; i++) {
    struct candidate c = candidates[i], *twin = NULL;
    struct side sides[SIDES] = { check->base[0], check->base[1] };
    if (c.sides & 1u << SIDE_COMPUTED) {
      candidate_apply (check, &c, sides);
      c.has_value = check_value_at (check, &sides[SIDE_COMPUTED], check->work, &c.value);
      if (!c.has_value) {
        continue;
      }
    }
    if (!check_try (check, &c, NULL, &c.figure, &c.unit)
        || (!c.fills && near (c.figure, check->figure, THE_SAME))) {
      continue;
    }
    for (size_t k = 0; k < kept && !twin; k++) {
      twin = near (candidates[k].figure, c.figure, THE_SAME) ? &candidates[k] : NULL;
    }
    if (twin) {
      join (check, twin, &c);
    } else {
      candidates[kept++] = c;
    }
  }
  return kept;
}

/* ---- Putting them in order ---- */

static int
compare (const void *a, const void *b)
{
  const struct check_reading *x = *(struct check_reading *const *) a;
  const struct check_reading *y = *(struct check_reading *const *) b;
  double dx = fabs (x->deviation), dy = fabs (y->deviation);
  return x->cost != y->cost ? (x->cost > y->cost) - (x->cost < y->cost) : (dx > dy) - (dx < dy);
}

/* Simplest first; those as simple, by how near they come.  */
static struct check_reading *
in_order (struct arena *arena, struct check_reading *first, size_t count)
{
  struct check_reading **sorted = ARENA_ARRAY (arena, count + 1, struct check_reading *);
  size_t i = 0;
  for (struct check_reading *r = first; r; r = r->next) {
    sorted[i++] = r;
  }
  qsort (sorted, count, sizeof sorted[0], compare);
  for (i = 0; i < count; i++) {
    sorted[i]->next = i + 1 < count ? sorted[i + 1] : NULL;
  }
  return sorted[0];
}

static struct check_reading *
reading_of (struct check *check, const char *said, double figure, const struct unit *unit)
{
  struct check_reading *r = ARENA_NEW (check->arena, struct check_reading);
  r->reading = arena_string (check->arena, said);
  r->value = figure;
  r->unit = unit ? unit->spelling : "";
  r->deviation = check_deviation (check, figure, unit);
  return r;
}

static void
add_reading (struct check_verdict *v, struct check_reading *r, int cost)
{
  r->cost = cost;
  r->next = v->readings;
  v->readings = r;
  v->reading_count++;
}

/* ---- Two at a time ---- */

/* What only says what was left open is no mistake: usual conditions cost nothing more.  */
static int
cost_together (const struct candidate *a, const struct candidate *b)
{
  return a->cost + b->cost - (a->fills || b->fills);
}

/* Where a state was left open, one of the two says it.  */
static bool
is_tried (const struct check *check, const struct candidate *a, const struct candidate *b)
{
  bool open = check->open[SIDE_COMPUTED] || check->open[SIDE_STATED];
  return (!open || a->fills || b->fills) && cost_together (a, b) <= MOST_COST - 1
         && candidates_agree (a, b);
}

/* Another pair that comes to the same and is as simple, or simpler.  */
static bool
has_twin (const struct check_verdict *v, double figure, int cost)
{
  for (const struct check_reading *r = v->readings; r; r = r->next)
    if (r->cost <= cost && near (r->value, figure, THE_SAME)) {
      return true;
    }
  return false;
}

static bool
search_pairs (struct check *check, const struct candidate *c, size_t n, struct check_verdict *v,
              struct fault *fault)
{
  bool (*interrupted) (void) = check->session->options.interrupted;
  for (size_t i = 0; i < n; i++) {
    if (interrupted && interrupted ()) {
      return fault_set_at (fault, MESSAGE_INTERRUPTED, check->question.at, NULL, NULL);
    }
    for (size_t k = i + 1; k < n; k++) {
      double figure;
      const struct unit *unit;
      int cost = cost_together (&c[i], &c[k]) + 1;
      if (is_tried (check, &c[i], &c[k]) && check_try (check, &c[i], &c[k], &figure, &unit)
          && check_fits (check, figure) && !has_twin (v, figure, cost)) {
        const struct candidate *first = c[k].fills ? &c[k] : &c[i];
        const char *said = arena_format (check->work, "%s; %s", first->said,
                                         (first == &c[i] ? &c[k] : &c[i])->said);
        add_reading (v, reading_of (check, said, figure, unit), cost);
      }
    }
  }
  return true;
}

/* ---- All of it ---- */

static size_t
ties (const struct check_reading *first)
{
  size_t n = 0;
  for (const struct check_reading *r = first; r && r->cost == first->cost; r = r->next) {
    n++;
  }
  return n;
}

/* The conditions everybody thinks of first, where the user left them open and they do not fit.  */
static void
rule_out (struct check *check, const struct candidate *c, size_t n, struct check_verdict *v)
{
  for (size_t i = n; i-- > 0; )
    if (c[i].fills && c[i].common && !check_fits (check, c[i].figure)
        && fabs (log (c[i].figure / check->number)) < FAR_OFF) {
      struct check_reading *r = reading_of (check, c[i].said, c[i].figure, c[i].unit);
      r->next = v->ruled_out;
      v->ruled_out = r;
    }
}

bool
search_readings (struct check *check, const struct candidate *c, size_t n,
                 struct check_verdict *v, struct fault *fault)
{
  bool open = check->open[SIDE_COMPUTED] || check->open[SIDE_STATED], usual = false;
  for (size_t i = 0; i < n; i++)
    if ((!open || c[i].fills) && check_fits (check, c[i].figure)) {
      add_reading (v, reading_of (check, c[i].said, c[i].figure, c[i].unit), c[i].cost);
      usual = usual || !open || c[i].cost <= 1;
    }
  bool holds = check_fits (check, check->figure) && !open;
  if (!usual && !holds && !search_pairs (check, c, n, v, fault)) {
    return false;
  }
  v->readings = v->readings ? in_order (check->arena, v->readings, v->reading_count) : NULL;
  v->tied = v->readings ? ties (v->readings) : 0;
  if (open) {
    rule_out (check, c, n, v);
  }
  return true;
}
