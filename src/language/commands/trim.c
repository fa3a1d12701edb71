#include "config.h"
#include "language/commands/commands.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_linalg.h>
#include <math.h>
#include <string.h>
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/number.h"
#include "support/text.h"

/* Newton's method on the aims, with the slopes by finite differences and the step halved until
   the aims come nearer (Dennis and Schnabel, Numerical Methods for Unconstrained Optimization
   and Nonlinear Equations (1983), algorithms A5.4.1 and A6.3.1).  Quantities stay above or at
   zero: a step that would take one below is cut short.                                          */
enum { TRIM_STEPS = 60, TRIM_HALVINGS = 30 };
#define TRIM_CLOSE 1e-15            /* relative miss of an aim where no step is taken any more */
#define TRIM_ROUNDED 1e-11          /* miss that rounding to twelve digits may leave */
#define TRIM_ROUNDING 1e-10         /* what is left where rounding ends the steps */
#define TRIM_DIFFERENCE 1e-6        /* relative step of the finite differences */

struct trim {
  struct session *session;
  const struct statement *statement;
  struct arena *arena;
  size_t count;
  struct stand_in *moved;           /* the named quantities, with the value tried */
  double *x, *scale;                /* in their own units */
  struct evaluation *first;         /* where what is used is gathered */
};

/* ---- What is moved ---- */

static bool
add_quantity (struct trim *t, const struct node *name, size_t i, struct fault *fault)
{
  struct definition *d = name_find (t->session, name->text, strlen (name->text));
  if (!d) {
    return name_unknown (t->first, name);
  }
  bool typed = d->kind == NAME_QUANTITY && d->statement->value->kind == NODE_QUANTITY
               && !d->statement->value->a && !d->statement->targets;
  if (!typed) {
    fault_set_at (fault, MESSAGE_KIND_WRONG, name->at,
                  arena_format (t->arena, "'%s' is no figure that can be moved", name->text), NULL);
    fault_hint (fault, "let %s = 100 kg/h", name->text);
    return false;
  }
  const struct value *value = definition_value (t->first, d, name->at);
  if (!value) {
    return false;
  }
  t->moved[i] = (struct stand_in) { d, *value };
  t->x[i] = d->statement->value->number;
  t->scale[i] = fabs (t->x[i]) > 0 ? fabs (t->x[i]) : 1;
  return true;
}

static void
try_values (struct trim *t, const double x[])
{
  for (size_t i = 0; i < t->count; i++) {
    struct value *v = &t->moved[i].value;
    v->si = v->unit ? unit_to_si (v->unit, x[i]) : x[i];
  }
}

/* ---- How far the aims are missed ---- */

static bool
miss_of (struct evaluation *ev, const struct aim *aim, double *miss)
{
  struct value left, right;
  struct figures figures = { NULL, 0, 0 };
  struct subject subject = { "", aim->left->at };
  if (!evaluate_quantity (ev, aim->right, &right) || !evaluate (ev, aim->left, NULL, &left)) {
    return false;
  }
  struct target target = { .unit = right.unit, .unit_text = right.unit ? right.unit->spelling : "",
                           .words = right.words, .at = aim->right->at };
  double aimed = right.unit ? unit_from_si (right.unit, right.si) : right.si;
  if (!right.unit && left.kind == VALUE_RATIO) {
    left = value_number (left.moles);
  }
  if (!convert_value (ev, &left, right.unit ? &target : NULL, &subject, &figures)) {
    return false;
  }
  if (figures.count != 1) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, aim->left->at, "an aim is one figure",
                         NULL);
  }
  *miss = (figures.at[0].value - aimed) / (fabs (aimed) > 0 ? fabs (aimed) : 1);
  return true;
}

/* The misses with quantities X; the largest into *WORST.  */
static bool
misses (struct trim *t, const double x[], double r[], double *worst, struct fault *fault)
{
  struct evaluation ev;
  size_t i = 0;
  try_values (t, x);
  evaluation_again (&ev, t->first, fault);
  ev.stand_ins = t->moved;
  ev.stand_in_count = t->count;
  *worst = 0;
  for (const struct aim *aim = t->statement->aims; aim; aim = aim->next, i++) {
    if (!miss_of (&ev, aim, &r[i])) {
      fault_place (fault, aim->left->at);
      return false;
    }
    *worst = fmax (*worst, fabs (r[i]));
  }
  return true;
}

/* ---- The steps ---- */

static bool
slopes (struct trim *t, double x[], const double r[], double jacobian[], struct fault *fault)
{
  double *moved = ARENA_ARRAY (t->arena, t->count, double), worst;
  for (size_t k = 0; k < t->count; k++) {
    double was = x[k], h = TRIM_DIFFERENCE * t->scale[k];
    x[k] = was + h;
    bool done = misses (t, x, moved, &worst, fault);
    x[k] = was;
    if (!done) {
      return false;
    }
    for (size_t i = 0; i < t->count; i++) {
      jacobian[i * t->count + k] = (moved[i] - r[i]) / h;
    }
  }
  return true;
}

/* Solves J s = -r; false if the aims do not depend on the quantities one by one.  */
static bool
solve_step (struct trim *t, double jacobian[], const double r[], double step[])
{
  size_t n = t->count;
  double *b = ARENA_ARRAY (t->arena, n, double);
  int sign;
  for (size_t i = 0; i < n; i++) {
    b[i] = -r[i];
    for (size_t k = 0; k < n; k++) {
      jacobian[i * n + k] *= t->scale[k];       /* steps in units of the scale */
    }
  }
  gsl_matrix_view J = gsl_matrix_view_array (jacobian, n, n);
  gsl_vector_view rhs = gsl_vector_view_array (b, n), s = gsl_vector_view_array (step, n);
  gsl_permutation *p = gsl_permutation_alloc (n);
  bool done = p && gsl_linalg_LU_decomp (&J.matrix, p, &sign) == GSL_SUCCESS;
  double largest = 0, least = HUGE_VAL;
  for (size_t i = 0; done && i < n; i++) {
    double pivot = fabs (gsl_matrix_get (&J.matrix, i, i));
    largest = fmax (largest, pivot);
    least = fmin (least, pivot);
  }
  done = done && least > 1e-9 * largest
         && gsl_linalg_LU_solve (&J.matrix, p, &rhs.vector, &s.vector) == GSL_SUCCESS;
  gsl_permutation_free (p);
  for (size_t k = 0; k < n; k++) {
    step[k] *= t->scale[k];
  }
  return done;
}

/* Takes the step, or as much of it as brings the aims nearer; false if none does.  */
static bool
take_step (struct trim *t, const double step[], double r[], double *worst)
{
  double *x = ARENA_ARRAY (t->arena, t->count, double);
  double *tried = ARENA_ARRAY (t->arena, t->count, double), new_worst;
  double share = 1;
  for (int i = 0; i < TRIM_HALVINGS; i++, share /= 2) {
    struct fault fault;
    fault_init (&fault, t->arena);
    for (size_t k = 0; k < t->count; k++) {
      x[k] = fmax (0, t->x[k] + share * step[k]);
    }
    if (misses (t, x, tried, &new_worst, &fault) && new_worst < *worst) {
      memcpy (t->x, x, t->count * sizeof *x);
      memcpy (r, tried, t->count * sizeof *r);
      *worst = new_worst;
      return true;
    }
  }
  return false;
}

static const char *
names_text (const struct trim *t)
{
  const char *names = "";
  for (const struct node *n = t->statement->names; n; n = n->next) {
    names = arena_format (t->arena, "%s%s%s", names, *names ? ", " : "", n->text);
  }
  return names;
}

static const char *
aims_text (const struct trim *t)
{
  const char *aims = "";
  for (const struct aim *a = t->statement->aims; a; a = a->next) {
    aims = arena_format (t->arena, "%s%s%s = %s", aims, *aims ? ", " : "",
                         node_text (t->arena, t->statement, a->left),
                         node_text (t->arena, t->statement, a->right));
  }
  return aims;
}

static bool
unreachable (struct trim *t, struct fault *fault)
{
  const char *nearest = "";
  for (size_t i = 0; i < t->count; i++) {
    nearest = arena_format (t->arena, "%s%s%s %s", nearest, i ? ", " : "",
                            t->moved[i].definition->name, figure_text (t->arena, t->x[i]));
  }
  fault_set_at (fault, MESSAGE_TRIM_UNREACHABLE, t->statement->aims->left->at, aims_text (t),
                names_text (t));
  fault_facts (fault, nearest, NULL);
  return false;
}

/* The quantities to twelve digits, if the aims are met as well so: 900, not 899.9999999999938.  */
static void
drop_last_digits (struct trim *t, double r[])
{
  double *x = ARENA_ARRAY (t->arena, t->count, double), worst;
  struct fault fault;
  fault_init (&fault, t->arena);
  for (size_t k = 0; k < t->count; k++) {
    double unit = fabs (t->x[k]) > 0 ? pow (10, floor (log10 (fabs (t->x[k]))) - 11) : 1;
    x[k] = unit < 1 ? round (t->x[k] / unit) / (1 / unit) : round (t->x[k] / unit) * unit;
  }
  if (misses (t, x, r, &worst, &fault) && worst <= TRIM_ROUNDED) {
    memcpy (t->x, x, t->count * sizeof *x);
  }
}

static bool
search (struct trim *t, struct fault *fault)
{
  size_t n = t->count;
  double *r = ARENA_ARRAY (t->arena, n, double), *step = ARENA_ARRAY (t->arena, n, double);
  double *jacobian = ARENA_ARRAY (t->arena, n * n, double), worst;
  if (!misses (t, t->x, r, &worst, fault)) {
    return false;
  }
  for (int i = 0; i < TRIM_STEPS && worst > TRIM_CLOSE; i++) {
    bool (*interrupted) (void) = t->session->options.interrupted;
    if (interrupted && interrupted ()) {
      return fault_set_at (fault, MESSAGE_INTERRUPTED, t->statement->at, NULL, NULL);
    }
    if (!slopes (t, t->x, r, jacobian, fault)) {
      return false;
    }
    if (!solve_step (t, jacobian, r, step)) {
      return fault_set_at (fault, MESSAGE_TRIM_SINGULAR, t->statement->names->at, names_text (t),
                           aims_text (t));
    }
    if (!take_step (t, step, r, &worst)) {
      break;
    }
  }
  if (worst > TRIM_ROUNDING) {
    return unreachable (t, fault);
  }
  drop_last_digits (t, r);
  return true;
}

/* ---- Keeping the outcome ---- */

static bool
keep (struct trim *t, struct result *result, struct fault *fault)
{
  for (size_t i = 0; i < t->count; i++) {
    const struct definition *d = t->moved[i].definition;
    const struct node *name = t->statement->names;
    struct text source;
    for (size_t k = 0; k < i; k++) {
      name = name->next;
    }
    struct statement from = { .kind = STATEMENT_LET, .name = d->name, .name_at = name->at,
                              .source = "", .at = t->statement->at };
    text_init (&source);
    text_add_format (&source, "let %s = ", name_text (t->arena, name->text));
    number_write_exact (&source, t->x[i]);
    text_add_char (&source, ' ');
    text_add (&source, t->moved[i].value.unit ? t->moved[i].value.unit->spelling : "");
    bool done = name_define (t->session, &from, source.bytes, NAME_QUANTITY, result, fault);
    text_clear (&source);
    if (!done) {
      return false;
    }
  }
  return true;
}

static void
tell (struct trim *t, const double before[], struct result *result)
{
  for (size_t i = 0; i < t->count; i++) {
    const struct value *v = &t->moved[i].value;
    struct answer *a = result_answer (result);
    a->what = arena_string (t->arena, t->moved[i].definition->name);
    a->value = t->x[i];
    a->unit = v->unit ? v->unit->spelling : "";
    a->basis = arena_format (t->arena, "was %s", figure_text (t->arena, before[i]));
  }
  result_remark (result, MESSAGE_NOTE_TRIM_MET, aims_text (t), NULL);
}

/* Only aims that are equalities, as many as quantities: a choice of one point.  */
static bool
is_determined (const struct trim *t, struct fault *fault)
{
  const struct statement *s = t->statement;
  size_t aims = 0;
  if (s->optimum != OPTIMUM_NONE) {
    return fault_set_at (fault, MESSAGE_NOT_AVAILABLE, s->least->at, "trim with least or most",
                         NULL);
  }
  for (const struct aim *a = s->aims; a; a = a->next, aims++)
    if (a->is != COMPARE_EQUAL) {
      return fault_set_at (fault, MESSAGE_NOT_AVAILABLE, a->right->at,
                           "trim with at least or at most", NULL);
    }
  return aims == t->count
         || fault_set_at (fault, MESSAGE_KIND_WRONG, s->names->at,
                          arena_format (t->arena, "as many aims as quantities: here %zu for %zu",
                                        aims, t->count), NULL);
}

bool
command_trim (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  struct evaluation first;
  struct trim t = { .session = session, .statement = s, .arena = result->arena, .first = &first };
  evaluation_init (&first, session, NULL, fault);
  for (const struct node *n = s->names; n; n = n->next) {
    t.count++;
  }
  t.moved = ARENA_ARRAY (t.arena, t.count, struct stand_in);
  t.x = ARENA_ARRAY (t.arena, t.count, double);
  t.scale = ARENA_ARRAY (t.arena, t.count, double);
  double *before = ARENA_ARRAY (t.arena, t.count, double);
  size_t i = 0;
  if (!is_determined (&t, fault)) {
    return false;
  }
  for (const struct node *n = s->names; n; n = n->next, i++) {
    if (!add_quantity (&t, n, i, fault)) {
      return false;
    }
    before[i] = t.x[i];
  }
  if (!search (&t, fault)) {
    return false;
  }
  tell (&t, before, result);
  undo_group_open (session);
  if (!keep (&t, result, fault)) {
    undo_group_drop (session);
    return false;
  }
  undo_group_close (session);
  return true;
}
