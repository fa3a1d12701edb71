/* What an expression comes to.

   A value type of a few numbers; what it points at lives in the arena of the evaluation that made
   it or in that of a definition.  SI units throughout.                                          */
#ifndef LANGUAGE_EVALUATE_VALUE_H
#define LANGUAGE_EVALUATE_VALUE_H

#include <math.h>
#include <stdbool.h>
#include <stddef.h>
#include "language/tree.h"
#include "stream/stream.h"
#include "units/dimension.h"
#include "units/unit.h"

struct analysis; struct composition; struct node; struct plant; struct species;

/* A figure nobody stated; clang wants the cast.  */
#define UNSTATED ((double) NAN)

enum value_kind {
  VALUE_QUANTITY,      /* a number with its dimension */
  VALUE_GAS,           /* a composition, or an analysis that may be open */
  VALUE_STREAM,        /* a flow or an amount of a gas */
  VALUE_PART,          /* a component of a gas or of a stream */
  VALUE_TRACE,         /* a concentration of a component: 25 ppm of H2S */
  VALUE_SPECIFIC,      /* a figure per quantity of a gas: 4.7 kWh/Nm3 of H2 */
  VALUE_CALORIFIC,     /* a calorific value or Wobbe index of a gas, per whatever is asked */
  VALUE_LIMITS,        /* a lower and an upper limit */
  VALUE_RATIO          /* of two flows or two parts */
};

/* A gas as the language knows it.  */
struct gas_value {
  const char *name;                        /* as defined or typed; null for a list in brackets */
  const struct analysis *analysis;
  const struct composition *closed;        /* null: open */
  double scaled;                           /* by what closing multiplied every part */
  const struct unit *basis;                /* what the list was typed in; null: mol% */
  const struct node *list;                 /* the list it was typed as, or null */
  const struct analysis *raw;              /* as stated, before treatments; null: none was made */
};

/* What stands in front of a quantity: dimension and what the dimension cannot tell.  */
struct measure {
  struct dimension dimension;
  enum unit_sort sort;
  enum ratio ratio;
  enum reference_family family;
  int family_power;
};

/* The species one name stands for.  */
enum { SPECIES_SET_MOST = 16 };
struct species_set { const struct species *at[SPECIES_SET_MOST]; size_t count;
                     const char *counted_as; };          /* of NOx by mass: "NO2"; or null */

struct value {
  enum value_kind kind;
  const struct unit *unit;                 /* typed with it: the unit of a bare answer; or null */
  unsigned words;                          /* dry, gross ... typed behind that unit */

  double si;                               /* QUANTITY; TRACE: mol/mol or kg/kg; SPECIFIC */
  struct measure measure;                  /* QUANTITY, SPECIFIC; TRACE: ratio */
  double T, p;                             /* behind `at`, of a QUANTITY, TRACE or PART of a gas */

  const struct gas_value *gas;             /* GAS; PART of a gas; TRACE within or SPECIFIC of one;
                                              QUANTITY: the gas it is a property of, or null */
  struct stream stream;                    /* STREAM; PART of a stream */
  bool of_stream;                          /* PART: of `stream`, else of `gas` */

  struct species_set species;              /* PART, TRACE: the one, or the many of a peak */
  const char *part;                        /* PART, TRACE: its name as typed */
  const char *basis, *moisture;            /* of a property or of a figure that was told in a
                                              unit, for its row; or null */
  double moles, mass;                      /* PART: mol(/s) and kg(/s), or per mol of gas;
                                              RATIO: by moles and by mass */
  bool flow;                               /* PART of a stream: per second */
  int heat;                                /* CALORIFIC: which figure by volume */
  enum standard by;                        /* CALORIFIC */
  double upper;                            /* LIMITS: the second; `si` is the first */
  const struct value *top, *bottom;        /* RATIO: of what */
  const struct plant *plant;               /* of a balance, which no expression can mean */
  double oxygen;                           /* TRACE: reference oxygen of its figure; else NAN */
};

struct measure measure_of_unit (const struct unit *);
bool measure_equal (struct measure, struct measure);
/* A plain number.  */
struct value value_number (double);

#endif
