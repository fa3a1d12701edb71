/* Everything linearised at a point; see measured.h.  */
#include "config.h"
#include "balance/measured.h"

#include <math.h>
#include "support/arena.h"

/* What is lost of a figure as it is worked out, relative.  */
static const double LOST = 1e-14;
/* In usual flows: what is less counts as this in a damped step.  */
static const double LITTLE = 1e-9;
/* How uncertain a first guess is, in parts of itself.  */
static const double GUESS = 30;

/* Adds the rows of the system to C, and what they are short of.  */
static void
add_rows (const struct measured *measured, const struct rows *rows, const double v[],
          bool residual, struct tangent *t)
{
  struct sparse *C = &t->equations.exact;
  for (size_t i = 0; i < rows->count; i++) {
    double terms = fabs (rows->right[i]);
    sparse_begin (C);
    for (size_t k = rows->start[i]; k < rows->start[i + 1]; k++) {
      size_t j = measured->unknown[rows->column[k]];
      if (j != NOWHERE) {
        sparse_add (C, j, rows->coefficient[k]);
        terms += fabs (rows->coefficient[k] * v[rows->column[k]]);
      }
    }
    t->c[C->count - 1] = residual ? -rows_residual (rows, i, v) : rows->right[i];
    t->terms[C->count - 1] = terms;
  }
}

static void
add_held (const struct measured *measured, const double v[], struct tangent *t)
{
  struct sparse *C = &t->equations.exact;
  for (size_t j = 0; j < measured->system->columns; j++) {
    if (measured->held[j] && measured->unknown[j] != NOWHERE) {
      sparse_begin (C);
      sparse_add (C, measured->unknown[j], 1);
      t->c[C->count - 1] = -v[j];
      t->terms[C->count - 1] = measured->flow;
    }
  }
}

/* Adds FACTOR times FORM to the row begun last.  */
static void
add_form (const struct measured *measured, const struct form *form, double factor,
          struct sparse *G)
{
  for (size_t i = 0; i < form->count; i++) {
    size_t k = measured->unknown[form->terms[i].column];
    if (k != NOWHERE) {
      sparse_add (G, k, factor * form->terms[i].coefficient);
    }
  }
}

/* The row of a figure as left - y right, over u and what the right side may be.  */
static double
add_start_row (const struct measured *measured, const struct figure *figure, const double v[],
               struct sparse *G)
{
  bool ratio = figure->right.count > 0;
  double left = form_value (&figure->left, v), right = form_value (&figure->right, v);
  double over = ratio ? fmax (fabs (right), MEASURED_LEAST * measured->flow) : 1;
  double weight = 1 / (figure->u * over);
  sparse_begin (G);
  add_form (measured, &figure->left, weight, G);
  add_form (measured, &figure->right, -weight * figure->closed_y, G);
  return weight * (figure->closed_y * (ratio ? right : 1) - left);
}

/* d (closure left / right).  */
void
figure_row (const struct measured *measured, const struct figure *figure, const double v[],
            double factor, struct sparse *rows)
{
  double right = figure->right.count > 0 ? form_value (&figure->right, v) : 1;
  double ratio = form_value (&figure->left, v) / right;
  double closure = figure->closure == NOWHERE ? 1 : v[figure->closure];
  sparse_begin (rows);
  add_form (measured, &figure->left, factor * closure / right, rows);
  add_form (measured, &figure->right, -factor * closure * ratio / right, rows);
  if (figure->closure != NOWHERE) {
    sparse_add (rows, measured->unknown[figure->closure], factor * ratio);
  }
}

/* The row of a figure and what it is short of, both over u.  */
static double
add_figure_row (const struct measured *measured, const struct figure *figure, const double v[],
                struct sparse *G)
{
  figure_row (measured, figure, v, 1 / figure->u, G);
  return (figure->y - figure_value (figure, v)) / figure->u;
}

/* The outlets of splits have the composition of their inlet as it is now, but for LOOSE of it.  */
static void
add_likeness (const struct measured *measured, const double v[], double loose, struct tangent *t)
{
  size_t parts = measured->network->components;
  struct sparse *G = &t->equations.measured;
  for (size_t i = 0; i < measured->system->bends; i++) {
    const struct bend *bend = &measured->system->bend[i];
    const double *in = &v[bend->inlet * parts], *out = &v[bend->outlet * parts];
    const size_t *unknown = &measured->unknown[bend->outlet * parts];
    double all = 0, flow = 0;
    for (size_t c = 0; c < parts; c++) {
      all += fmax (in[c], 0);
      flow += out[c];
    }
    double least = MEASURED_LEAST * measured->flow, weight = 1 / (loose * fmax (flow, least));
    for (size_t c = 0; c < parts && all > 0; c++) {
      double x = fmax (in[c], 0) / all;
      sparse_begin (G);
      for (size_t k = 0; k < parts; k++) {
        if (unknown[k] != NOWHERE) {
          sparse_add (G, unknown[k], weight * ((k == c ? 1 : 0) - x));
        }
      }
      t->e[G->count - 1] = weight * (x * flow - out[c]);
    }
  }
}

/* Each unknown is measured, ever so weakly, as what it is now: WEIGHT for all of it.  Flows are
   lifted above that.  */
static void
add_guesses (const struct measured *measured, const double v[], struct easing ease,
             struct tangent *t)
{
  bool loose = ease.loose > 0;
  double weight = loose ? 1 / GUESS : ease.damping;
  struct sparse *G = &t->equations.measured;
  size_t flows = measured->network->streams * measured->network->components;
  for (size_t k = 0; k < measured->unknowns; k++) {
    double least = (loose ? MEASURED_LEAST : LITTLE) * measured->scale[k];
    size_t place = measured->place[k];
    bool rises = place < flows && !measured->held[place];
    sparse_begin (G);
    sparse_add (G, k, weight / fmax (fabs (v[place]), rises ? least : measured->scale[k]));
    t->e[G->count - 1] = rises ? ease.lift : 0;
  }
}

static size_t
measured_terms (const struct measured *measured)
{
  size_t terms = 0;
  for (size_t i = 0; i < measured->figures; i++) {
    terms += measured->figure[i].left.count + measured->figure[i].right.count + 1;
  }
  return terms;
}

static void
add_measured (struct arena *arena, const struct measured *measured, const double v[],
              struct easing ease, struct tangent *t)
{
  struct sparse *G = &t->equations.measured;
  size_t *of = ARENA_ARRAY (arena, measured->figures + 1, size_t);
  bool start = ease.loose > 0;
  size_t parts = measured->network->components, like = start ? measured->system->bends : 0;
  size_t guesses = start || ease.damping > 0 ? measured->unknowns : 0;
  size_t most = measured->figures + guesses + like * parts;
  *G = sparse_make (arena, most, measured_terms (measured) + guesses + like * parts * parts);
  t->e = ARENA_ARRAY (arena, most + 1, double);
  t->noise = ARENA_ARRAY (arena, most + 1, double);
  for (size_t i = 0; i < measured->figures; i++) {
    const struct figure *figure = &measured->figure[i];
    if (!measured->left_out[i] && !figure_is_void (measured, figure)) {
      of[G->count] = i;
      double e = start ? add_start_row (measured, figure, v, G)
                       : add_figure_row (measured, figure, v, G);
      t->e[G->count - 1] = e;
      t->noise[G->count - 1] = LOST * fabs (figure->y / figure->u);
    }
  }
  t->figure = of;
  t->figures = G->count;
  if (start) {
    add_likeness (measured, v, ease.loose, t);
  }
  if (guesses > 0) {
    add_guesses (measured, v, ease, t);
  }
}

struct tangent
tangent_make (struct arena *arena, const struct measured *measured, const double v[],
              struct easing ease)
{
  const struct system *system = measured->system;
  struct tangent t = { .equations = { .unknowns = measured->unknowns,
                                      .scale = measured->scale, .order = measured->order } };
  struct rows bent = { .count = 0 };
  if (!(ease.loose > 0) && system->bends > 0) {
    bent = system_bent (arena, system, v);
  }
  size_t most = system->rows.count + bent.count + system->columns;
  size_t terms = system->rows.start[system->rows.count] + system->columns;
  terms += bent.count > 0 ? bent.start[bent.count] : 0;
  t.equations.exact = sparse_make (arena, most, terms);
  t.c = ARENA_ARRAY (arena, most + 1, double);
  t.terms = ARENA_ARRAY (arena, most + 1, double);
  t.size = ARENA_ARRAY (arena, most + 1, double);
  add_rows (measured, &system->rows, v, true, &t);
  t.bends = t.equations.exact.count;
  add_rows (measured, &bent, v, false, &t);
  t.held = t.equations.exact.count;
  add_held (measured, v, &t);
  for (size_t i = 0; i < t.equations.exact.count; i++) {
    bool bend = i >= t.bends && i < t.held;      /* a measure that does not change with v */
    t.size[i] = bend ? measured->flow : sparse_row_size (&t.equations.exact, i, measured->scale);
  }
  add_measured (arena, measured, v, ease, &t);
  return t;
}
