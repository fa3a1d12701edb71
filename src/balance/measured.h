/* What a network's measured figures are functions of, and everything linearised at a point.

   The figures are left / right of linear forms, or left alone; a complete analysis has one free
   closure factor behind all its fractions, so that C fractions count as C - 1 whether they were
   brought to one or not.  A point has a value for each column of the network and behind them one
   for each closure factor.                                                                      */
#ifndef BALANCE_MEASURED_H
#define BALANCE_MEASURED_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/factor.h"
#include "balance/network.h"
#include "balance/system.h"

struct arena;

/* The figure says y, with standard uncertainty u, of closure * left / right.  RIGHT is empty where
   there is none, CLOSURE a place in the point or NOWHERE.  COMPONENT: of a composition, else as
   many as there are.                                                                            */
struct figure {
  size_t fact, component;
  struct form left, right;
  size_t closure;
  double y, u;
  double closed_y;               /* of a whole analysis, brought to one */
};

/* How a fact counts.  */
enum standing { STANDING_EXACT, STANDING_MEASURED, STANDING_DIGITS };

struct measured {
  const struct network *network;
  const struct system *system;   /* the exact rows */
  size_t places, unknowns;       /* of a point; of those, what is not absent */
  const size_t *unknown;         /* by place: its number among the unknowns, or NOWHERE */
  const size_t *place;           /* the other way round */
  size_t figures; const struct figure *figure;
  double flow;                   /* a usual one */
  const double *scale;           /* by unknown */
  const size_t *order;           /* of elimination, or null */

  /* What may change between one reconciliation and the next.  */
  bool *left_out;                /* by figure: counts as not measured */
  bool *held;                    /* by column: held at zero */
};

/* A fact is measured if it, or any fraction of it, has an uncertainty above zero.  */
bool fact_is_measured (const struct network *, const struct fact *);

/* STANDING by fact.  */
struct measured *measured_make (struct arena *, const struct network *,
                                const enum standing standing[]) MUST_CHECK;

/* Is it of a stream that is nothing, or held at nothing?  It says nothing then.  */
bool figure_is_void (const struct measured *, const struct figure *);

/* The figure at a point, and what it is made of (RIGHT 1 where there is none).  */
double figure_value (const struct figure *, const double v[]);
/* Its gradient times FACTOR as one more row of ROWS, by unknown; there must be room.  */
void figure_row (const struct measured *, const struct figure *, const double v[], double factor,
                 struct sparse *rows);
/* A new gradient, all zero.  */
double *gradient_make (struct arena *, const struct measured *) MUST_CHECK;

/* Everything at a point: rows of the exact equations (those of the network, the bends of splits,
   columns held at zero) with what they are short of, and weighted rows of the figures that
   count.  */
struct tangent {
  struct linearised equations;
  double *c, *e;                 /* by exact row; by measured row: (y - g) / u */
  double *noise;                 /* by measured row: what of e is rounding */
  double *size;                  /* of each exact row: its largest scaled coefficient, of a bend a
                                    usual flow */
  double *terms;                 /* of each exact row: the sum of its terms without their signs */
  size_t bends, held;            /* where in the exact rows these begin */
  size_t figures;                /* measured rows that are figures */
  const size_t *figure;          /* by such a row */
};
/* What makes the way to a solution easier.  LOOSE above zero, for the start of a search: all is
   linear then.  Closures stay as they are, ratios are rows left - y right with right taken as at
   least MEASURED_LEAST usual flows, outlets of bent splits are measured, to LOOSE of their flow,
   to have the composition that the inlet has now, and a weak row for each unknown says that it
   stays where it is.  DAMPING above zero: rows behind the figures say so of each unknown, weighted
   by DAMPING over what it is now; of each flow, that it rises by LIFT / DAMPING of itself.      */
#define MEASURED_LEAST 1e-3
struct easing { double loose, damping, lift; };
struct tangent tangent_make (struct arena *, const struct measured *, const double v[],
                             struct easing) MUST_CHECK;

#endif
