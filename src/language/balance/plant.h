/* A balance in the words of the language: the network of its lines, and what that comes to.

   A plant is made by an evaluation from the statements of a block, in the evaluation's arena, and
   never changed.  So it can be made again under other settings or with one figure moved.  All
   that is a number in `network` and `solution` has its name here.                               */
#ifndef LANGUAGE_BALANCE_PLANT_H
#define LANGUAGE_BALANCE_PLANT_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "balance/solution.h"
#include "language/evaluate/evaluation.h"
#include "support/check.h"

struct composition; struct definition; struct map; struct species; struct statement;

#define NO_STREAM ((size_t) -1)
#define NO_BOUNDARY ((size_t) -1)

/* Between two boundaries, or from or to the world outside (NO_BOUNDARY).  */
struct plant_stream {
  const char *name;
  struct place at;                         /* where it was named first */
  size_t from, to;
  struct definition *given;                /* a stream defined before; or null */
  const struct composition *gas;           /* as found so far: for real-gas volumes; or null */
};

struct plant_boundary {
  const char *name;
  const struct statement *line;
  size_t number;                           /* of the line */
};

/* Where a fact of the network comes from, and how its value reads.  */
struct plant_fact {
  size_t line;                             /* counted from 1 within the block; 0: a stream defined
                                              before */
  const char *text;                        /* the line as typed */
  const char *words;                       /* without its statement word */
  double per;                              /* value * per = figure in `unit` */
  const char *unit;
  size_t stream;                           /* the stream it is about; NO_STREAM: several */
  bool basis;                              /* only sets the scale: per 100 kmol/h of feed */
};

struct plant {
  const char *name;
  size_t component_count, stream_count, boundary_count, fact_count;
  const struct species **component;        /* none in a balance of whole flows */
  bool components_told;                    /* by a line; else those that the lines speak of */
  struct plant_stream *stream;
  struct map *stream_by_name, *boundary_by_name;         /* to index + 1; only while it is read */
  const size_t *streams_sorted;            /* by name, once it is read */
  struct plant_boundary *boundary;
  struct plant_fact *fact;
  struct network network;
  const struct solution *solution;         /* null: it failed, as `failure` says */
  struct fault failure;
  bool whole, by_mass;                     /* no composition anywhere; flows by mass then */
  const struct unit *unit;                 /* of the first flow typed; null: none was */
  const char *unit_text;
  const struct statement *block;
};

/* Reads and solves the balance whose block begins with STATEMENT.  BASE is the same plant as it
   stands (its uncertainties serve where only a figure is moved), or null.                       */
const struct plant *plant_make (struct evaluation *, const struct statement *,
                                const struct plant *base) MUST_CHECK;

/* The stream called NAME, or NO_STREAM.  */
size_t plant_find (const struct plant *, const char *name);
size_t plant_column (const struct plant *, size_t stream, size_t component);

/* Is all of a stream known, and its flow by more than last digits?  */
bool plant_is_fixed (const struct plant *, size_t stream);
/* Its total, mol/s (kg/s in a balance of whole flows by mass).  */
double plant_total (const struct plant *, size_t stream);
/* kg/s; NAN in a balance of whole flows by amount.  */
double plant_mass (const struct plant *, size_t stream);
/* What a solved balance says of its stream, as a value.  Kind stream-open.  */
bool plant_stream_value (struct evaluation *, const struct plant *, const char *name,
                         struct value *) MUST_CHECK;

/* The unit in which molar (or whole) flows are told: figure = mol/s * per.  */
double plant_unit (struct evaluation *, const struct plant *, const char **unit);

struct balance_verdict; struct figures;
/* The first stream that is fixed, in each of TARGETS (null: none), with what that takes: added to
   FIGURES, as many at each call.                                                                */
bool plant_flows_told (struct evaluation *, const struct plant *, const struct target *,
                       struct figures *) MUST_CHECK;
/* The verdict of a solved plant, streams told in TARGETS (null: as typed).  */
const struct balance_verdict *plant_verdict (struct evaluation *, const struct plant *,
                                             const struct target *) MUST_CHECK;

#endif
