#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/laboratory.h"
#include "language/evaluate/uncertainty.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "result/trend.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/statistics.h"
#include "support/text.h"

/* A question asked of one gas after another: all samples of a file, or gases by name.  */
struct members {
  struct definition *place;                /* the gas whose place they take */
  struct file_samples file;                /* of a file; else names */
  const struct node *const *names;
  size_t count;
};

struct asking {
  struct session *session;
  const struct statement *statement;
  struct result *result;
  struct members members;
  struct trend *trend;
  struct trend_row *rows;
  struct fault first;                      /* why the first one without a figure has none */
};

/* ---- Who is asked ---- */

/* Does the question lean on D?  */
static bool
question_leans (struct session *session, const struct statement *s, struct definition *d)
{
  if (tree_mention (s, d->name)) {
    return true;
  }
  for (size_t i = 0; i < session->count; i++)
    if (session->order[i] != d && tree_mention (s, session->order[i]->name)
        && definition_leans (session, session->order[i], d->name)) {
      return true;
    }
  return false;
}

static bool
find_file (struct asking *a, struct fault *fault)
{
  struct session *session = a->session;
  struct members *m = &a->members;
  for (size_t i = 0; i < session->count; i++) {
    struct definition *d = session->order[i];
    if (!d->file || !question_leans (session, a->statement, d)) {
      continue;
    }
    if (m->place) {
      return fault_set_at (fault, MESSAGE_KIND_WRONG, a->statement->value->at,
                           arena_format (fault->arena, "%s and %s are both from files: which is "
                                         "the trend over?", m->place->name, d->name),
                           "ask of one of them");
    }
    m->place = d;
  }
  if (!m->place) {
    fault_set_at (fault, MESSAGE_KIND_WRONG, a->statement->value->at,
                  "a trend is over the samples of a file, or over gases by name", NULL);
    fault_hint (fault, "gas lab from \"week.csv\" sample \"ID\"; trend wobbe of lab, or "
                "trend wobbe of raw1 with raw1, raw2");
    return false;
  }
  if (!file_samples (session, a->result->arena, m->place->source, &m->file, fault)) {
    fault->at = a->statement->value->at;
    return false;
  }
  m->count = laboratory_samples (m->file.laboratory);
  m->file.told = m->place->asked_over ? NULL : a->result;
  return true;
}

static bool
matches (const struct node *name, const struct definition *d)
{
  size_t n = strlen (name->text);
  return d->kind == NAME_GAS
         && (name->rest ? strncmp (d->name, name->text, n) : strcmp (d->name, name->text)) == 0;
}

/* The gases a list of names stands for, in the order of the session for a star.  */
static bool
find_names (struct asking *a, struct fault *fault)
{
  struct session *session = a->session;
  struct arena *arena = a->result->arena;
  struct members *m = &a->members;
  size_t room = 0;
  for (const struct node *name = a->statement->names; name; name = name->next) {
    room += session->count + 1;
  }
  const struct node **found = ARENA_ARRAY (arena, room, const struct node *);
  for (const struct node *name = a->statement->names; name; name = name->next) {
    size_t before = m->count;
    for (size_t i = 0; i < session->count; i++) {
      struct definition *d = session->order[i];
      if (!matches (name, d)) {
        continue;
      }
      struct node *node = ARENA_NEW (arena, struct node);
      *node = (struct node) { .kind = NODE_NAME, .text = d->name, .at = name->at };
      found[m->count++] = node;
      if (!m->place && question_leans (session, a->statement, d)) {
        m->place = d;
      }
    }
    if (m->count == before) {
      struct evaluation ev;
      evaluation_init (&ev, session, NULL, fault);
      return name_find (session, name->text, strlen (name->text))
               ? fault_set_at (fault, MESSAGE_KIND_WRONG, name->at,
                               arena_format (fault->arena, "'%s' is no gas", name->text), NULL)
               : name_unknown (&ev, name);
    }
  }
  m->names = found;
  return m->place
         || fault_set_at (fault, MESSAGE_KIND_WRONG, a->statement->value->at,
                          "the question is about none of these gases",
                          "ask it of one of them: trend wobbe of raw1 with raw1, raw2");
}

/* ---- One of them ---- */

static const char *
text_kept (struct arena *arena, const char *text)
{
  return text && *text ? arena_string (arena, text) : NULL;
}

/* The sentence of a fault.  */
static const char *
why_text (struct arena *arena, const struct fault *fault)
{
  struct text why;
  text_init (&why);
  message_write (&why, message_sentence (fault->kind), fault->fact);
  const char *kept = arena_copy (arena, why.bytes ? why.bytes : "", why.length);
  text_clear (&why);
  return kept;
}

/* What was not looked for is no zero among figures that were: its name, or null.  */
static const char *
not_stated (const struct result *result)
{
  for (const struct remark *r = result->notes; r; r = r->next)
    if (r->kind == MESSAGE_NOTE_NONE_STATED) {
      return r->fact[0];
    }
  return NULL;
}

/* The figure of member I under EV, whose arena is its own; what lasts goes to the result's.  */
static bool
ask_one (struct asking *a, struct evaluation *ev, size_t i, bool first)
{
  const struct members *m = &a->members;
  struct stand_in *in = ARENA_NEW (ev->arena, struct stand_in);
  struct result *aside = ARENA_NEW (ev->arena, struct result);   /* hears what would be a note */
  struct value value;
  struct figures figures = { NULL, 0, 0 };
  struct trend_row *row = &a->rows[i];
  struct arena *kept = a->result->arena;
  bool itself = m->names && strcmp (m->names[i]->text, m->place->name) == 0;
  in->definition = m->place;
  in->tree = m->names ? m->names[i]
             : file_sample (a->session, ev->arena, &a->members.file, i, ev->fault);
  if (!in->tree) {
    return false;
  }
  result_init (aside, ev->arena, a->statement->source);
  ev->result = aside;
  ev->stand_ins = in;
  ev->stand_in_count = itself ? 0 : 1;
  if (!question_figures (ev, a->statement, &value, &figures)) {
    return false;
  }
  if (figures.count != 1 || !isfinite (figures.at[0].value)) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, a->statement->value->at,
                         "a trend follows one figure", "trend wobbe of lab in MJ/m3");
  }
  const struct figure *f = &figures.at[0];
  if (not_stated (aside)) {
    row->why = arena_format (kept, "no %s is stated", not_stated (aside));
    return fault_set_at (ev->fault, MESSAGE_NO_SUCH_PART, a->statement->value->at,
                         not_stated (aside), NULL);
  }
  ev->result = NULL;
  const struct budget **budgets = uncertainty_budgets (ev, a->statement, &figures);
  if (!budgets) {
    return false;
  }
  row->value = f->value;
  row->uncertainty = budgets[0] ? budgets[0]->uncertainty : UNSTATED;
  row->moisture = text_kept (kept, f->moisture);
  row->basis = text_kept (kept, f->basis);
  if (first) {
    a->trend->unit = f->unit_text ? arena_string (kept, f->unit_text) : "";
    ev->result = a->result;
    question_tell_taken (ev, a->statement, &figures);
    ev->result = NULL;
  }
  file_tell_assumed (ev, a->result);
  return true;
}

static const char *
member_name (const struct asking *a, size_t i)
{
  const struct members *m = &a->members;
  if (m->names) {
    return m->names[i]->text;
  }
  const char *name = laboratory_sample (m->file.laboratory, i);
  return *name ? name : a->members.place->name;
}

static bool
ask_all (struct asking *a, struct fault *fault)
{
  bool (*interrupted) (void) = a->session->options.interrupted;
  struct arena *arena = arena_create ();
  bool any = false;
  for (size_t i = 0; i < a->members.count; i++) {
    struct evaluation ev;
    struct fault inside;
    struct arena *own = any ? arena : a->result->arena;
    if (interrupted && interrupted ()) {
      arena_destroy (arena);
      return fault_set_at (fault, MESSAGE_INTERRUPTED, a->statement->at, NULL, NULL);
    }
    arena_reset (arena);
    fault_init (&inside, own);
    evaluation_init (&ev, a->session, NULL, &inside);
    a->rows[i] = (struct trend_row) { .name = member_name (a, i), .value = UNSTATED,
                                      .uncertainty = UNSTATED };
    if (ask_one (a, &ev, i, !any)) {
      any = true;
      continue;
    }
    if (!a->rows[i].why) {
      a->rows[i].why = why_text (a->result->arena, &inside);
    }
    if (a->first.kind == MESSAGE_NONE) {
      fault_set_at (&a->first, inside.kind, inside.at, inside.fact[0], inside.fact[1]);
      fault_facts (&a->first, inside.fact[2], inside.fact[3]);
      if (inside.hint) {
        fault_hint (&a->first, "%s", inside.hint);
      }
    }
  }
  arena_destroy (arena);
  if (!any) {
    *fault = a->first;
    fault->at = a->statement->value->at;
  }
  return any;
}

/* ---- What they have together ---- */

/* What all rows share stands once, below them.  */
static void
share_basis (struct asking *a)
{
  struct trend *t = a->trend;
  const struct trend_row *first = NULL;
  bool moisture = true, basis = true;
  for (size_t i = 0; i < t->count; i++) {
    const struct trend_row *r = &a->rows[i];
    if (r->why) {
      continue;
    }
    first = first ? first : r;
    moisture = moisture && strcmp (r->moisture ? r->moisture : "",
                                   first->moisture ? first->moisture : "") == 0;
    basis = basis && strcmp (r->basis ? r->basis : "", first->basis ? first->basis : "") == 0;
  }
  t->moisture = first && moisture ? first->moisture : NULL;
  t->basis = first && basis ? first->basis : NULL;
  for (size_t i = 0; i < t->count; i++) {
    a->rows[i].moisture = moisture ? NULL : a->rows[i].moisture;
    a->rows[i].basis = basis ? NULL : a->rows[i].basis;
  }
}

static struct trend_numbers
numbers_of (const struct asking *a, const double x[], const bool left_out[])
{
  struct statistics s = statistics_of (a->result->arena, x, left_out, a->trend->count);
  return (struct trend_numbers) { s.count, s.mean, s.median, s.standard_deviation, s.least,
                                  s.greatest, a->rows[s.least_at].name,
                                  a->rows[s.greatest_at].name, s.robust_deviation };
}

/* By Hampel's identifier, of all figures: those that are wrong move neither the median nor the
   median of the distances, so one cannot hide behind another.                                   */
static void
find_far (struct asking *a)
{
  struct trend *t = a->trend;
  const double u = t->all.robust_deviation;
  t->limit = isfinite (u) ? HAMPEL_LIMIT : 0;
  for (size_t i = 0; i < t->count; i++) {
    struct trend_row *r = &a->rows[i];
    r->apart = isfinite (u) && !r->why ? (r->value - t->all.median) / u : UNSTATED;
    if (!isfinite (r->apart)) {
      continue;
    }
    t->beyond += fabs (r->apart) > t->limit;
    if (!t->farthest_of || fabs (r->apart) > fabs (t->farthest)) {
      t->farthest = r->apart;
      t->farthest_of = r->name;
    }
  }
}

/* Outliers one by one, until the farthest of the rest is none; that may be a straggler.  As many
   as half of the figures are never taken out.                                                   */
static void
find_outliers (struct asking *a, const double x[], bool left_out[])
{
  struct trend *t = a->trend;
  struct grubbs g;
  while (2 * (t->outliers + 1) < t->all.count && grubbs_test (x, left_out, t->count, &g)) {
    t->tested = true;
    t->G = g.G;
    t->straggler = g.straggler;
    t->outlier = g.outlier;
    t->tested_of = a->rows[g.at].name;
    if (!(g.G > g.outlier)) {
      a->rows[g.at].standing = g.G > g.straggler ? TREND_STRAGGLER : TREND_USUAL;
      return;
    }
    a->rows[g.at].standing = TREND_OUTLIER;
    left_out[g.at] = true;
    t->outliers++;
  }
}

static void
add_up (struct asking *a)
{
  struct arena *arena = a->result->arena;
  struct trend *t = a->trend;
  double *x = ARENA_ARRAY (arena, t->count, double);
  bool *left_out = ARENA_ARRAY (arena, t->count, bool);
  for (size_t i = 0; i < t->count; i++) {
    x[i] = a->rows[i].value;
    left_out[i] = a->rows[i].why != NULL;
  }
  t->all = numbers_of (a, x, left_out);
  find_far (a);
  find_outliers (a, x, left_out);
  t->without = numbers_of (a, x, left_out);
}

/* What was understood of the file stands under the first trend over it.  */
static void
tell_members (struct asking *a)
{
  struct result *result = a->result;
  const struct members *m = &a->members;
  if (m->names) {
    definition_tell (a->session, m->place, false, result);
    return;
  }
  if (!m->place->asked_over) {
    const struct remark *r = file_remarks (result->arena, m->file.statement->text,
                                           m->file.laboratory);
    for (; r; r = r->next) {
      result_remark (result, r->kind, r->fact[0], r->fact[1]);
    }
    definition_warn (m->place, result);
    m->place->asked_over = true;
  }
  file_tell_changes (a->session, m->place, result);
}

bool
command_trend (struct session *session, const struct statement *s, struct result *result,
               struct fault *fault)
{
  struct arena *arena = result->arena;
  struct asking a = { .session = session, .statement = s, .result = result };
  fault_init (&a.first, fault->arena);
  if (!(s->names ? find_names (&a, fault) : find_file (&a, fault))) {
    return false;
  }
  a.trend = ARENA_NEW (arena, struct trend);
  a.rows = ARENA_ARRAY (arena, a.members.count, struct trend_row);
  *a.trend = (struct trend) { .what = node_text (arena, s, s->value), .unit = "",
                              .count = a.members.count, .rows = a.rows,
                              .coverage = session->settings.coverage };
  a.trend->over = s->names ? arena_format (arena, "%zu gases", a.members.count)
                           : arena_format (arena, "%zu samples of %s", a.members.count,
                                           a.members.file.statement->text);
  if (!ask_all (&a, fault)) {
    return false;
  }
  share_basis (&a);
  add_up (&a);
  result->trend = a.trend;
  tell_members (&a);
  return true;
}
