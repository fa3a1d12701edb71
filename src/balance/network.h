/* A steady-state network of streams and boundaries, and what is known about it.

   Everything here is a number: streams, boundaries, components and facts are counted from 0 and
   the language keeps their names.  The unknowns are the component flows n[s,c], column
   s * components + c, in mol/s (or kg/s in a balance of whole flows that is kept by mass), and
   behind them the extents of the reactions, in mol/s, in the order of the boundaries.  Everything
   anybody knows is linear in them (see `struct fact`), but for the splits of unknown share.

   A network and all it points to belong to the caller and are never changed here.               */
#ifndef BALANCE_NETWORK_H
#define BALANCE_NETWORK_H

#include <stdbool.h>
#include <stddef.h>

enum boundary_kind { BOUNDARY_MIX, BOUNDARY_SEPARATE, BOUNDARY_SPLIT, BOUNDARY_REACT };

/* Stoichiometric coefficients by component, products above 0.  */
struct reaction { const double *nu; };

/* What goes in = what comes out.  A split adds that every outlet has the inlet's composition.  */
struct boundary {
  enum boundary_kind kind;
  size_t inlet_count, outlet_count, reaction_count;
  const size_t *inlets, *outlets;                /* streams */
  const struct reaction *reactions;
};

/* A linear form of the unknowns.  A total flow has coefficient 1 at each component of a stream, a
   mass flow the molar masses (kg/mol), a reference volume the molar volume, a flow without its
   water 0 at water.                                                                             */
struct term { size_t column; double coefficient; };
struct form { size_t count; const struct term *terms; };

enum fact_kind {
  FACT_FORM,           /* left = value */
  FACT_RATIO,          /* left = value * right: a fraction, a concentration, a recovery, a ratio, a
                          conversion (left: what is converted, right: what went in) */
  FACT_COMPOSITION,    /* all fractions of `stream` */
  FACT_SHARE           /* `stream` = value * `of`, component by component: one figure, many rows */
};

/* What is known.  A figure has a standard uncertainty, or none (NAN) and then its rounding: half
   the unit of its last typed digit, 0 if it is exact by nature.                                 */
struct fact {
  enum fact_kind kind;
  bool relation;                 /* ties several streams: counted as a relation, not as a known */
  struct form left, right;
  double value, u, rounding;
  size_t stream, of;
  const double *fractions;       /* of a composition, by component; adding up to 1 */
  const double *fractions_u, *fractions_rounding;
  bool absence;                  /* a form of value 0 that says what a stream cannot hold: neither a
                                    known nor a relation, and no row */
  double weight;                 /* what a stated figure is worth when something must be doubted;
                                    1 as a rule */
};

struct network {
  size_t components, streams, boundaries, facts;
  const bool *possible;          /* [s * components + c]: may the stream hold it? */
  const size_t *denied;          /* likewise: the fact without which it might, or (size_t) -1;
                                    null: what it may not hold hangs on none */
  const double *molar_mass;      /* kg/mol; null in a balance of whole flows */
  const struct boundary *boundary;
  const struct fact *fact;
  /* What dry means: the component that is water, or `components`.  */
  size_t water;
};

/* How many unknowns: component flows and extents.  */
size_t network_columns (const struct network *);
/* The column of the first extent of BOUNDARY.  */
size_t network_extent (const struct network *, size_t boundary);
/* The value of a form at V, one value for each column.  */
double form_value (const struct form *, const double v[]);

#endif
