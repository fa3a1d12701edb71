/* The least weighted sum of squared adjustments that the exact rows allow.

       minimise  J = sum ((y - g (v)) / u)^2   subject to  A v = b  and the bends of splits

   By Gauss and Newton with exact rows: each step solves the linearised problem (factor.h).  With
   measured flows only it ends after one step and is the projection method of Crowe, Garcia Campos
   and Hrymak (1983).  No component flow is held at zero here but those of `measured->held`.      */
#ifndef BALANCE_MINIMISE_H
#define BALANCE_MINIMISE_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/measured.h"
#include "support/check.h"

struct arena; struct fault; struct solve_options;

struct fit {
  const double *v;               /* by place */
  const double *inside;          /* the last point on the way with no flow below zero, or null */
  double chi2;
  size_t rows, freedom;          /* figures that count; how many of them are surplus */
  double move;                   /* the largest move of a figure in the last step, in its u */
  size_t blocked;                /* a stream that wants to fall below zero, where something is
                                    divided by it: to be held at zero; the fit is no fit then.
                                    NOWHERE: none */
  bool agreed;                   /* do the exact rows hold?  Else they contradict each other */
  double mismatch;               /* the largest of any exact row, relative to the usual flow */
  struct tangent tangent;        /* at v */
  const struct factor *factor;
};

/* A step that moves every figure by less than this share of its uncertainty is the last.  */
#define MINIMISE_CLOSE 1e-9

/* FROM: where to start, or null.  CLOSE: as MINIMISE_CLOSE, or more.  Everything lives in ARENA.
   Faults: interrupted, not-converged.  */
bool measured_minimise (struct arena *, const struct measured *, const struct solve_options *,
                        const double from[], double close, struct fit *, struct fault *)
  MUST_CHECK;

#endif
