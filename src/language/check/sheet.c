#include "config.h"
#include "language/check/sheet.h"

#include <math.h>
#include <string.h>
#include "language/check/hold.h"
#include "language/check/search.h"
#include "language/evaluate/flow.h"
#include "language/evaluate/wording.h"
#include "result/check_verdict.h"
#include "support/arena.h"

/* Each figure is turned into the dry moles it claims: 1057 ft3/min at 32 degC of the sheet's gas.
   Figures agree whose moles differ by no more than both are good to.  A density or a molar mass
   claims no moles; it agrees with what is computed.  Of a stream the moles are known, and all are
   held against them.  One set of readings holds for the whole sheet.                            */

/* What a figure claims.  */
enum sort { SORT_FLOW, SORT_DENSITY, SORT_MOLAR_MASS };

struct line {
  const struct statement *statement;
  const struct node *node;                  /* the figure as something to work out */
  const struct node *quantity;
  enum sort sort;
  double limit;                             /* relative */
};

struct sheet {
  struct check check;
  struct line *lines;
  size_t count;
  bool of_stream;                           /* the first of MOLES is that of the stream */
};

/* What comes of one set of readings.  */
struct trial_run {
  double *moles;                            /* each line's, or its ratio to what is computed */
  bool *agrees;
  double flow;                              /* the moles most agree on */
  size_t agreeing;
  double off;                               /* how far those are off, together */
};

static enum sort
sort_of (const struct unit *unit)
{
  return dimension_equal (unit->dimension, DIMENSION_DENSITY) && unit->family_power == 0
           ? SORT_DENSITY
         : dimension_equal (unit->dimension, DIMENSION_MOLAR_MASS) ? SORT_MOLAR_MASS : SORT_FLOW;
}

static struct node *
node_like (struct arena *arena, enum node_kind kind, struct place at)
{
  struct node *node = ARENA_NEW (arena, struct node);
  *node = (struct node) { .kind = kind, .at = at };
  return node;
}

/* QUANTITY of the sheet's gas at the figure's state; density of the gas at it.  */
static void
make_line (struct arena *arena, const struct statement *sheet, const struct statement *s,
           struct line *line)
{
  struct node *whole;
  union { const struct node *from; struct node *to; } gas = { sheet->value }, figure;
  bool at = s->claim->kind == NODE_AT;
  line->statement = s;
  line->quantity = at ? s->claim->a : s->claim;
  line->sort = sort_of (line->quantity->unit);
  figure.from = line->quantity;
  whole = node_like (arena, NODE_OF, s->claim->at);
  whole->a = figure.to;
  whole->b = gas.to;
  if (line->sort != SORT_FLOW) {
    whole->a = node_like (arena, NODE_PROPERTY, s->claim->at);
    whole->a->property = line->sort == SORT_DENSITY ? PROPERTY_DENSITY : PROPERTY_MOLAR_MASS;
    whole->a->text = line->sort == SORT_DENSITY ? "density" : "molar mass";
  }
  if (at) {
    struct node *state = node_like (arena, NODE_AT, s->claim->at);
    state->a = whole;
    state->b = s->claim->b;
    whole = state;
  }
  line->node = whole;
}

static size_t
lines_of (struct arena *arena, const struct statement *sheet, struct line **lines)
{
  size_t n = 0;
  for (const struct statement *s = sheet->next; s; s = s->next) {
    n += s->kind == STATEMENT_FIGURE;
  }
  *lines = ARENA_ARRAY (arena, n + 1, struct line);
  n = 0;
  for (const struct statement *s = sheet->next; s; s = s->next)
    if (s->kind == STATEMENT_FIGURE) {
      make_line (arena, sheet, s, &(*lines)[n++]);
    }
  return n;
}

/* ---- Is it a sheet at all? ---- */

/* With what the figures leave open filled in.  */
static void
fill_open (struct settings *settings)
{
  settings->family[FAMILY_NONE] = settings->family[FAMILY_STANDARD];
}

static bool
line_holds (struct evaluation *ev, const struct line *line, bool *flow, bool first)
{
  struct value v;
  if (!evaluate (ev, line->node, NULL, &v)) {
    fault_place (ev->fault, line->statement->claim->at);
    return false;
  }
  if (line->sort != SORT_FLOW) {
    return true;
  }
  if (v.kind != VALUE_STREAM || !(v.stream.moles > 0)) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, line->quantity->unit_at,
                         "a sheet holds flows or amounts of its gas, densities and molar masses",
                         NULL);
  }
  if (!first && v.stream.flow != *flow) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, line->quantity->unit_at,
                         "one is a flow and another an amount", NULL);
  }
  *flow = v.stream.flow;
  return true;
}

bool
sheet_holds (struct evaluation *ev, const struct statement *sheet)
{
  struct line *lines;
  struct value whole;
  struct settings filled = *ev->settings;
  size_t n = lines_of (ev->arena, sheet, &lines);
  bool flow = false, first = true;
  if (n == 0) {
    fault_set_at (ev->fault, MESSAGE_UNFINISHED, sheet->name_at,
                  "a sheet holds at least one figure", NULL);
    return false;
  }
  if (!evaluate (ev, sheet->value, NULL, &whole)) {
    return false;
  }
  if (whole.kind != VALUE_GAS && whole.kind != VALUE_STREAM) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, sheet->value->at,
                         "a sheet is of a gas or of a stream", NULL);
  }
  if (whole.kind == VALUE_STREAM) {
    flow = whole.stream.flow;
    first = false;
  }
  fill_open (&filled);
  const struct settings *settings = ev->settings;
  ev->settings = &filled;
  bool done = true;
  for (size_t i = 0; done && i < n; i++) {
    done = line_holds (ev, &lines[i], &flow, first);
    first = first && lines[i].sort != SORT_FLOW;
  }
  ev->settings = settings;
  return done;
}

static double
claimed (const struct evaluation *ev, const struct value *v)
{
  return v->kind == VALUE_STREAM ? stream_dry_moles (&v->stream, ev->session->water)
         : v->kind == VALUE_QUANTITY ? v->si : UNSTATED;
}

bool
sheet_figures (struct evaluation *ev, const void *with, struct figures *figures)
{
  const struct statement *sheet = with;
  struct line *lines;
  struct value whole, v;
  struct settings *filled = ARENA_NEW (ev->arena, struct settings);
  const struct settings *settings = ev->settings;
  const size_t n = lines_of (ev->arena, sheet, &lines);
  bool done = evaluate (ev, sheet->value, NULL, &whole);
  const double base = done && whole.kind == VALUE_STREAM ? claimed (ev, &whole) : 1;
  *filled = *settings;
  fill_open (filled);
  ev->settings = filled;
  *figures = (struct figures) { ARENA_ARRAY (ev->arena, n, struct figure), 0, n };
  for (size_t i = 0; done && i < n; i++) {
    done = evaluate (ev, lines[i].node, NULL, &v);
    figures->at[figures->count++].value
      = done ? claimed (ev, &v) / (lines[i].sort == SORT_FLOW ? base : 1) : UNSTATED;
  }
  ev->settings = settings;
  return done;
}

/* ---- One set of readings ---- */

/* Moles of a flow, or a property's claim over what is computed.  */
static bool
line_moles (struct sheet *sheet, const struct node *node, const struct line *line,
            const struct side *side, double *moles)
{
  struct check *check = &sheet->check;
  struct value v;
  check->question.value = node;
  arena_reset (check->scratch);
  if (!check_value_at (check, side, check->scratch, &v)) {
    return false;
  }
  if (line && line->sort != SORT_FLOW) {
    *moles = unit_to_si (line->quantity->unit, line->quantity->number) / v.si;
    return v.kind == VALUE_QUANTITY && isfinite (*moles);
  }
  *moles = v.kind == VALUE_STREAM ? stream_dry_moles (&v.stream, check->session->water)
                                  : UNSTATED;
  return *moles > 0;
}

static bool
near (double a, double b, double limit)
{
  return fabs (a - b) <= limit * fmax (fabs (a), fabs (b)) * (1 + 1e-9);
}

/* How many flows agree with a flow of MOLES that is good to LIMIT.  */
static size_t
agreeing_with (const struct sheet *sheet, const struct trial_run *run, double moles, double limit)
{
  size_t n = 0;
  for (size_t i = 0; i < sheet->count; i++) {
    const struct line *line = &sheet->lines[i];
    n += line->sort == SORT_FLOW && near (run->moles[i], moles, limit + line->limit);
  }
  return n;
}

/* The flow most figures agree with, each by as much as it is good to.  */
static void
settle_flow (const struct sheet *sheet, struct trial_run *run)
{
  size_t most = 0;
  double anchor = UNSTATED, limit = 0, sum = 0, weights = 0;
  for (size_t i = 0; i < sheet->count; i++) {
    const struct line *line = &sheet->lines[i];
    size_t n = line->sort == SORT_FLOW ? agreeing_with (sheet, run, run->moles[i], line->limit)
                                       : 0;
    if (n > most) {
      most = n;
      anchor = run->moles[i];
      limit = line->limit;
    }
  }
  for (size_t i = 0; i < sheet->count; i++) {
    const struct line *line = &sheet->lines[i];
    if (line->sort == SORT_FLOW && near (run->moles[i], anchor, limit + line->limit)) {
      double weight = 1 / (line->limit * line->limit);
      sum += weight * run->moles[i];
      weights += weight;
    }
  }
  run->flow = sum / weights;
}

/* Which figures agree with the flow that most agree on.  A single flow agrees with nothing.  */
static void
count_agreeing (const struct sheet *sheet, struct trial_run *run)
{
  size_t flows = 0;
  run->agreeing = 0;
  run->off = 0;
  for (size_t i = 0; i < sheet->count; i++) {
    const struct line *line = &sheet->lines[i];
    bool flow = line->sort == SORT_FLOW;
    double want = flow ? run->flow : 1;
    run->agrees[i] = near (run->moles[i], want, flow ? 2 * line->limit : line->limit);
    run->agreeing += run->agrees[i];
    flows += flow && run->agrees[i];
    run->off += run->agrees[i] ? fabs (run->moles[i] / want - 1) / line->limit : 0;
  }
  if (flows == 1 && !sheet->of_stream && sheet->count > 1) {
    for (size_t i = 0; i < sheet->count; i++)
      if (sheet->lines[i].sort == SORT_FLOW && run->agrees[i]) {
        run->agrees[i] = false;
        run->agreeing--;
      }
  }
}

static bool
run_with (struct sheet *sheet, const struct node *whole, const struct candidate *a,
          const struct candidate *b, struct trial_run *run)
{
  struct side sides[SIDES] = { sheet->check.base[0], sheet->check.base[1] };
  if (a) {
    candidate_apply (&sheet->check, a, sides);
  }
  if (b) {
    candidate_apply (&sheet->check, b, sides);
  }
  for (size_t i = 0; i < sheet->count; i++)
    if (!line_moles (sheet, sheet->lines[i].node, &sheet->lines[i], &sides[SIDE_COMPUTED],
                     &run->moles[i])) {
      return false;
    }
  if (!sheet->of_stream) {
    settle_flow (sheet, run);
  } else if (!line_moles (sheet, whole, NULL, &sides[SIDE_COMPUTED], &run->flow)) {
    return false;
  }
  count_agreeing (sheet, run);
  return true;
}

static struct trial_run
run_make (struct arena *arena, size_t count)
{
  return (struct trial_run) { .moles = ARENA_ARRAY (arena, count, double),
                              .agrees = ARENA_ARRAY (arena, count, bool) };
}

/* ---- All sets ---- */

struct best {
  struct sheet *sheet;
  const struct node *whole;
  struct trial_run run, try;
  int cost;
  struct check_verdict *verdict;
  bool moved;                               /* the best has readings at all */
  bool placed;                              /* one of them says a volume's state left open */
};

static bool
same_run (const struct sheet *sheet, const struct trial_run *a, const struct trial_run *b)
{
  for (size_t i = 0; i < sheet->count; i++)
    if (fabs (a->moles[i] / a->flow - b->moles[i] / b->flow) > 1e-5 * a->moles[i] / a->flow) {
      return false;
    }
  return true;
}

static void
copy_run (const struct sheet *sheet, struct trial_run *to, const struct trial_run *from)
{
  memcpy (to->moles, from->moles, sheet->count * sizeof *to->moles);
  memcpy (to->agrees, from->agrees, sheet->count * sizeof *to->agrees);
  to->flow = from->flow;
  to->agreeing = from->agreeing;
  to->off = from->off;
}

static void
add_set (struct best *best, const char *said)
{
  struct arena *arena = best->sheet->check.arena;
  struct check_reading *r = ARENA_NEW (arena, struct check_reading);
  *r = (struct check_reading) { .reading = arena_string (arena, said),
                                .value = (double) best->try.agreeing, .unit = "figures",
                                .deviation = UNSTATED, .cost = best->cost,
                                .next = best->verdict->readings };
  best->verdict->readings = r;
  best->verdict->reading_count++;
}

static bool
says_state (const struct candidate *c)
{
  return c->rule && c->rule->change == READING_REFERENCE && c->family == FAMILY_NONE;
}

/* Tries a set; keeps it if more figures agree under it, or as many and it is as simple.  */
static void
try_set (struct best *best, const struct candidate *a, const struct candidate *b)
{
  int cost = a->cost + (b ? b->cost + 1 : 0);
  if (!run_with (best->sheet, best->whole, a, b, &best->try)
      || best->try.agreeing < best->run.agreeing
      || (best->try.agreeing == best->run.agreeing && (!best->moved || cost > best->cost))) {
    return;
  }
  bool better = best->try.agreeing > best->run.agreeing || cost < best->cost;
  if (!better && same_run (best->sheet, &best->run, &best->try)) {
    return;
  }
  if (better) {
    best->verdict->readings = NULL;
    best->verdict->reading_count = 0;
  }
  best->cost = cost;
  add_set (best, b ? arena_format (best->sheet->check.arena, "%s; %s", a->said, b->said)
                   : a->said);
  if (better || best->try.off < best->run.off) {
    copy_run (best->sheet, &best->run, &best->try);
  }
  best->moved = true;
  best->placed = says_state (a) || (b && says_state (b));
}

static void
search_sets (struct best *best, const struct candidate *c, size_t n)
{
  for (size_t i = 0; i < n; i++) {
    try_set (best, &c[i], NULL);
  }
  if (best->run.agreeing == best->sheet->count) {
    return;
  }
  for (size_t i = 0; i < n; i++)
    for (size_t k = i + 1; k < n; k++)
      if (c[i].cost == 1 && c[k].cost == 1 && candidates_agree (&c[i], &c[k])) {
        try_set (best, &c[i], &c[k]);
      }
}

/* ---- Putting a sheet together ---- */

/* The figures as one sum, so that what looks through a tree sees them all.  */
static const struct node *
all_figures (const struct sheet *sheet)
{
  struct node *sum = NULL;
  for (size_t i = 0; i < sheet->count; i++) {
    union { const struct node *from; struct node *to; } figure = { sheet->lines[i].node };
    struct node *more = node_like (sheet->check.arena, NODE_ADD, figure.to->at);
    more->a = sum ? sum : figure.to;
    more->b = sum ? figure.to : NULL;
    sum = more;
  }
  return sum;
}

/* What all figures lean on, and what each is good to.  */
static bool
look_over (struct sheet *sheet, struct fault *fault)
{
  struct check *check = &sheet->check;
  struct evaluation ev;
  evaluation_init (&ev, check->session, NULL, fault);
  ev.describe = false;
  ev.settings = &check->base[SIDE_COMPUTED].settings;
  ev.overridden = check->base[SIDE_COMPUTED].overridden;
  for (size_t i = 0; i < sheet->count; i++) {
    struct line *line = &sheet->lines[i];
    struct value v;
    double limit;
    if (!evaluate (&ev, line->node, NULL, &v)
        || !claim_limit (check, line->quantity, fault, &limit)) {
      return false;
    }
    line->limit = limit / fabs (line->quantity->number);
  }
  check->touched[SIDE_COMPUTED] = ev.touched;
  check->open[SIDE_COMPUTED] = (ev.touched & touch_family (FAMILY_NONE)) != 0;
  check->used = ev.used;
  check->used_count = ev.used_count;
  return true;
}

static size_t
only_computed (struct candidate *c, size_t n)
{
  size_t kept = 0;
  for (size_t i = 0; i < n; i++)
    if (c[i].sides & 1u << SIDE_COMPUTED) {
      c[kept] = c[i];
      c[kept++].fills = false;
    }
  return kept;
}

static void
tell_figures (const struct sheet *sheet, const struct trial_run *typed,
              const struct trial_run *best, struct check_verdict *v)
{
  struct check_figure **end = &v->figures;
  for (size_t i = 0; i < sheet->count; i++) {
    const struct line *line = &sheet->lines[i];
    double ratio = best->moles[i] / (line->sort == SORT_FLOW ? best->flow : 1);
    struct check_figure *f = ARENA_NEW (sheet->check.arena, struct check_figure);
    *f = (struct check_figure) {
      .name = line->statement->name,
      .stated = node_text (sheet->check.arena, line->statement, line->statement->claim),
      .value = line->quantity->number, .computed = line->quantity->number / ratio,
      .deviation = ratio - 1, .unit = line->quantity->unit_text, .holds = best->agrees[i],
      .as_written = typed->agrees[i] };
    *end = f;
    end = &f->next;
  }
  v->figure_count = sheet->count;
  v->agreeing = best->agreeing;
}

static bool
sheet_verdict (struct sheet *sheet, const struct definition *d, const struct readings *readings,
               struct check_verdict *v, struct fault *fault)
{
  struct check *check = &sheet->check;
  struct arena *arena = check->arena;
  struct value whole;
  sheet->count = lines_of (arena, d->statement, &sheet->lines);
  check->question.value = d->statement->value;
  if (!look_over (sheet, fault)
      || !check_value_at (check, &check->base[SIDE_COMPUTED], arena, &whole)) {
    return false;
  }
  sheet->of_stream = whole.kind == VALUE_STREAM;
  check->value = value_number (UNSTATED);
  check->question.value = all_figures (sheet);
  size_t count;
  struct candidate *candidates = candidates_of (check, readings, &count);
  count = only_computed (candidates, count);
  struct best best = { .sheet = sheet, .whole = d->statement->value, .verdict = v,
                       .run = run_make (arena, sheet->count),
                       .try = run_make (arena, sheet->count) };
  struct trial_run typed = run_make (arena, sheet->count);
  if (!run_with (sheet, best.whole, NULL, NULL, &typed)) {
    return fault_set_at (fault, MESSAGE_NOT_FINITE, d->statement->at, NULL, NULL);
  }
  copy_run (sheet, &best.run, &typed);
  *v = (struct check_verdict) { .stated = d->name, .unit = "" };
  if (typed.agreeing < sheet->count) {
    search_sets (&best, candidates, count);
  }
  v->outcome = typed.agreeing == sheet->count ? CHECK_HOLDS
               : best.moved ? CHECK_READINGS : CHECK_UNEXPLAINED;
  v->tied = v->reading_count;
  v->open_at = check->open[SIDE_COMPUTED] && !best.placed
                 ? check->base[SIDE_COMPUTED].settings.family[FAMILY_STANDARD].text : NULL;
  tell_figures (sheet, &typed, &best.run, v);
  return true;
}

bool
sheet_check (struct session *session, const struct definition *d, const struct readings *readings,
             struct check_verdict *v, struct fault *fault)
{
  struct sheet sheet = { .check = { .session = session, .arena = fault->arena,
                                    .work = arena_create (), .scratch = arena_create (),
                                    .stated = d->name } };
  for (int i = 0; i < SIDES; i++) {
    sheet.check.base[i].settings = *session_settings (session);
    fill_open (&sheet.check.base[i].settings);
    sheet.check.base[i].overridden = touch_family (FAMILY_NONE);
  }
  bool done = sheet_verdict (&sheet, d, readings, v, fault);
  check_release (&sheet.check);
  return done;
}
