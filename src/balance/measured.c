#include "config.h"
#include "balance/measured.h"

#include <math.h>
#include <string.h>
#include "balance/column_order.h"
#include "support/arena.h"

/* ---- Which facts are measured ---- */

static bool
any_uncertain (const double u[], size_t n)
{
  for (size_t c = 0; u && c < n; c++) {
    if (u[c] > 0) {
      return true;
    }
  }
  return false;
}

bool
fact_is_measured (const struct network *network, const struct fact *fact)
{
  if (fact->kind == FACT_COMPOSITION) {
    return any_uncertain (fact->fractions_u, network->components);
  }
  return fact->u > 0;
}

/* What half a unit of the last digit comes to as a standard uncertainty: rectangular, JCGM
   100:2008 4.3.7.  */
static double
of_digits (double rounding)
{
  return rounding > 0 ? rounding / sqrt (3) : 0;
}

/* ---- Figures ---- */

/* What is better than this, relative, is not told from what is exact.  */
static const double EXACT = 1e-9;

struct making {
  struct arena *arena;
  const struct network *network;
  const struct system *system;
  const enum standing *standing;
  struct figure *figure;
  size_t figures, closures;
};

static struct form
stream_total (struct making *m, size_t stream)
{
  size_t parts = m->network->components;
  struct term *terms = ARENA_ARRAY (m->arena, parts, struct term);
  for (size_t c = 0; c < parts; c++) {
    terms[c] = (struct term) { stream * parts + c, 1 };
  }
  return (struct form) { parts, terms };
}

static void
add_figure (struct making *m, struct figure figure)
{
  figure.u = fmax (figure.u, EXACT * fabs (figure.y));
  figure.closed_y = figure.y;
  m->figure[m->figures++] = figure;
}

/* The standard uncertainty of fraction C of a composition; 0: it is the rest to one.  */
static double
fraction_u (const struct fact *fact, enum standing standing, size_t c)
{
  double u = fact->fractions_u ? fact->fractions_u[c] : (double) NAN;
  double rounding = fact->fractions_rounding ? fact->fractions_rounding[c] : 0;
  return standing == STANDING_MEASURED && u > 0 ? u : of_digits (rounding);
}

/* A component the analysis says is not there at all.  */
static bool
is_nothing (const struct fact *fact, enum standing standing, size_t c)
{
  return !(fact->fractions[c] > 0) && !(fraction_u (fact, standing, c) > 0);
}

static void
add_composition (struct making *m, size_t f)
{
  const struct fact *fact = &m->network->fact[f];
  size_t parts = m->network->components, first = m->figures;
  struct form total = stream_total (m, fact->stream);
  size_t closure = network_columns (m->network) + m->closures;
  bool rest = false;
  double sum = 0;
  for (size_t c = 0; c < parts; c++) {
    double u = fraction_u (fact, m->standing[f], c);
    struct form left = { 1, &total.terms[c] };
    if (u > 0) {
      add_figure (m, (struct figure) { f, c, left, total, closure, fact->fractions[c], u, 0 });
    }
    rest = rest || (!(u > 0) && fact->fractions[c] > 0);
    sum += fact->fractions[c];
  }
  for (size_t i = first; i < m->figures; i++) {
    m->figure[i].closure = rest ? NOWHERE : closure;
    m->figure[i].closed_y = rest ? m->figure[i].y : m->figure[i].y / sum;
  }
  m->closures += rest ? 0 : 1;
}

static void
add_fact (struct making *m, size_t f)
{
  const struct fact *fact = &m->network->fact[f];
  size_t none = m->network->components;
  double u = m->standing[f] == STANDING_DIGITS ? of_digits (fact->rounding) : fact->u;
  struct figure figure = { f, none, fact->left, fact->right, NOWHERE, fact->value, u, 0 };
  switch (fact->kind) {
  case FACT_COMPOSITION:
    add_composition (m, f);
    return;
  case FACT_SHARE:
    figure.left = stream_total (m, fact->stream);
    figure.right = stream_total (m, fact->of);
    break;
  case FACT_FORM:
    figure.right.count = 0;
    break;
  case FACT_RATIO:
    break;
  }
  add_figure (m, figure);
}

/* ---- The system of exact rows ---- */

/* A network in which what an analysis says is not there cannot be there.  */
static const struct network *
without_nothings (struct arena *arena, const struct network *network,
                  const enum standing standing[])
{
  struct network *copy = ARENA_NEW (arena, struct network);
  size_t flows = network->streams * network->components;
  bool *possible = ARENA_ARRAY (arena, flows, bool);
  for (size_t i = 0; i < flows; i++) {
    possible[i] = !network->possible || network->possible[i];
  }
  for (size_t f = 0; f < network->facts; f++) {
    const struct fact *fact = &network->fact[f];
    for (size_t c = 0; fact->kind == FACT_COMPOSITION && c < network->components; c++) {
      if (standing[f] != STANDING_EXACT && is_nothing (fact, standing[f], c)) {
        possible[fact->stream * network->components + c] = false;
      }
    }
  }
  *copy = *network;
  copy->possible = possible;
  copy->denied = NULL;                  /* by facts that are taken or measured, all of them */
  return copy;
}

static bool
has_stream (const struct boundary *b, size_t stream)
{
  for (size_t i = 0; i < b->inlet_count; i++) {
    if (b->inlets[i] == stream) {
      return true;
    }
  }
  for (size_t i = 0; i < b->outlet_count; i++) {
    if (b->outlets[i] == stream) {
      return true;
    }
  }
  return false;
}

/* Do the streams of a share have one composition by a split already?  */
static bool
is_split (const struct network *network, size_t stream, size_t of)
{
  for (size_t b = 0; b < network->boundaries; b++) {
    const struct boundary *boundary = &network->boundary[b];
    if (boundary->kind == BOUNDARY_SPLIT && has_stream (boundary, stream)
        && has_stream (boundary, of)) {
      return true;
    }
  }
  return false;
}

/* A measured share of a stream that is no outlet of a split makes a bend of its own.  */
static void
bend_shares (struct arena *arena, const struct network *network, const enum standing standing[],
             struct system *system)
{
  struct bend *bends = ARENA_ARRAY (arena, system->bends + network->facts + 1, struct bend);
  size_t count = system->bends;
  if (count > 0) {
    memcpy (bends, system->bend, count * sizeof *bends);
  }
  for (size_t f = 0; f < network->facts; f++) {
    const struct fact *fact = &network->fact[f];
    if (fact->kind == FACT_SHARE && standing[f] != STANDING_EXACT && network->components > 1
        && !is_split (network, fact->stream, fact->of)) {
      bends[count++] = (struct bend) { NOWHERE, fact->of, fact->stream };
    }
  }
  system->bend = bends;
  system->bends = count;
}

static struct system *
exact_system (struct arena *arena, const struct network *network, const enum standing standing[])
{
  bool *take = ARENA_ARRAY (arena, network->facts + 1, bool);
  for (size_t f = 0; f < network->facts; f++) {
    take[f] = standing[f] == STANDING_EXACT;
  }
  struct system *system = system_make (arena, network, take, NULL);
  bend_shares (arena, network, standing, system);
  return system;
}

/* ---- The whole ---- */

/* The largest flow any fact states, or 1.  */
static double
usual_flow (const struct network *network)
{
  double flow = 0;
  for (size_t f = 0; f < network->facts; f++) {
    const struct fact *fact = &network->fact[f];
    double largest = 0;
    for (size_t i = 0; fact->kind == FACT_FORM && i < fact->left.count; i++) {
      largest = fmax (largest, fabs (fact->left.terms[i].coefficient));
    }
    if (largest > 0) {
      flow = fmax (flow, fabs (fact->value) / largest);
    }
  }
  return flow > 0 ? flow : 1;
}

static void
number_unknowns (struct arena *arena, struct measured *measured)
{
  size_t columns = measured->system->columns;
  size_t *unknown = ARENA_ARRAY (arena, measured->places, size_t);
  size_t *place = ARENA_ARRAY (arena, measured->places, size_t);
  double *scale = ARENA_ARRAY (arena, measured->places, double);
  for (size_t i = 0; i < measured->places; i++) {
    bool absent = i < columns && measured->system->absence.absent[i];
    unknown[i] = absent ? NOWHERE : measured->unknowns;
    if (!absent) {
      scale[measured->unknowns] = i < columns ? measured->flow : 1;
      place[measured->unknowns++] = i;
    }
  }
  measured->unknown = unknown;
  measured->place = place;
  measured->scale = scale;
}

/* One order for all points: the rows have their entries in the same places.  */
static void
order_unknowns (struct arena *arena, struct measured *measured)
{
  struct arena *work = arena_create ();
  double *v = ARENA_ARRAY (work, measured->places, double);
  for (size_t i = 0; i < measured->places; i++) {
    v[i] = measured->unknown[i] != NOWHERE ? 1 : 0;
  }
  struct tangent t = tangent_make (work, measured, v, (struct easing) { .loose = 0 });
  const struct sparse *C = &t.equations.exact, *G = &t.equations.measured;
  struct sets sets[] = { { C->count, C->start, C->column }, { G->count, G->start, G->column } };
  measured->order = column_order (arena, measured->unknowns, 2, sets);
  arena_destroy (work);
}

struct measured *
measured_make (struct arena *arena, const struct network *stated, const enum standing standing[])
{
  const struct network *network = without_nothings (arena, stated, standing);
  struct measured *measured = ARENA_NEW (arena, struct measured);
  struct making m = { .arena = arena, .network = network, .standing = standing };
  m.system = exact_system (arena, network, standing);
  m.figure = ARENA_ARRAY (arena, network->facts * (network->components + 1) + 1, struct figure);
  for (size_t f = 0; f < network->facts; f++) {
    if (standing[f] != STANDING_EXACT) {
      add_fact (&m, f);
    }
  }
  measured->network = network;
  measured->system = m.system;
  measured->places = m.system->columns + m.closures;
  measured->figures = m.figures;
  measured->figure = m.figure;
  measured->flow = usual_flow (network);
  measured->left_out = ARENA_ARRAY (arena, m.figures + 1, bool);
  measured->held = ARENA_ARRAY (arena, m.system->columns, bool);
  number_unknowns (arena, measured);
  if (measured->unknowns > FACTOR_DENSE) {
    order_unknowns (arena, measured);
  }
  return measured;
}

/* ---- A figure at a point ---- */

bool
figure_is_void (const struct measured *measured, const struct figure *figure)
{
  for (size_t i = 0; i < figure->right.count; i++) {
    size_t column = figure->right.terms[i].column;
    if (measured->unknown[column] != NOWHERE && !measured->held[column]) {
      return false;
    }
  }
  return figure->right.count > 0;
}

double
figure_value (const struct figure *figure, const double v[])
{
  double closure = figure->closure == NOWHERE ? 1 : v[figure->closure];
  double right = figure->right.count > 0 ? form_value (&figure->right, v) : 1;
  return closure * form_value (&figure->left, v) / right;
}

double *
gradient_make (struct arena *arena, const struct measured *measured)
{
  return ARENA_ARRAY (arena, measured->unknowns, double);
}
