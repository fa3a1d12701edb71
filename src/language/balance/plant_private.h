/* How a balance is read (plant*.c): from lines to readings, from readings to facts.  */
#ifndef LANGUAGE_BALANCE_PLANT_PRIVATE_H
#define LANGUAGE_BALANCE_PLANT_PRIVATE_H

#include "language/balance/plant.h"
#include "language/evaluate/flow.h"

/* One flow in a sum: a whole stream, a component of one (SPECIES), or an extent (STREAM is
   NO_STREAM).                                                                                   */
struct item {
  size_t stream;
  const struct species *species;
  double times;
  size_t boundary, reaction;
};
struct items { struct item *at; size_t count; };

/* What one side of a known says.  */
enum reading_kind { READING_FIGURE, READING_GAS, READING_FLOW, READING_RATIO,
                    READING_COMPOSITION, READING_CONVERSION };
struct reading {
  enum reading_kind kind;
  const struct node *node;
  struct value figure;                     /* FIGURE; of a FLOW the share in front of its items */
  struct state state;                      /* of a FIGURE */
  bool shared;                             /* FLOW: has a share in front */
  const struct node *digits;               /* the one figure typed, or null */
  struct items items, under;               /* FLOW; RATIO: top and bottom */
  const struct stream *given;              /* FLOW: what is known of it, added to the items */
  double given_times;
  const struct composition *given_parts;   /* FLOW: only these of it, mol/s by `given_moles` */
  double given_moles;
  const struct gas_value *gas;             /* GAS */
  const struct node *list;                 /* GAS, given: the list of parts typed for it */
  const struct species *species;           /* CONVERSION */
  size_t boundary;
};

/* What flows are counted by.  */
struct counting { enum flow_basis basis; bool dry, net; };

/* A fact before the columns are known.  */
struct raw_fact {
  enum fact_kind kind;
  struct items left, right;
  struct counting count_left, count_right;
  double value, u, rounding;
  size_t stream, of;
  bool by_mass;                            /* of a ratio */
  bool taken_by_amount;                    /* a share of unlike gases with a bare % */
  const struct composition *part_of_gas;   /* a share that is one of all of these */
  const struct composition *gas;           /* of a composition */
  double *gas_u, *gas_rounding;            /* by its species */
  const struct node *digits;
  struct plant_fact about;
};

/* What a stream cannot hold, and the line that says so.  */
struct absence { size_t stream; const struct species *species; struct plant_fact about; };

/* A plant while it is read.  */
struct reader_state {
  struct evaluation *ev;
  struct plant *plant;
  struct raw_fact *raw;
  size_t raw_count, raw_room, stream_room, boundary_room;
  const struct species **species;          /* met so far, each once */
  size_t species_count, species_room;
  bool species_told;                       /* a line `components` says them all */
  struct absence *absent;
  size_t absent_count, absent_room;
  const struct statement *line;
  size_t number;
  bool counts_mass, counts_moles;          /* figures met, for a balance of whole flows */
  bool has_gas;                            /* any composition anywhere */
  bool real_volumes;                       /* a volume whose Z hangs on what is found */
};


/* plant_names.c: boundaries and the streams between them.  */
bool plant_read_names (struct reader_state *, const struct statement *block) MUST_CHECK;
void meet_species (struct reader_state *, const struct species *);
void meet_gas (struct reader_state *, const struct composition *);
/* The boundary called NAME; NO_BOUNDARY.  */
size_t plant_boundary_find (const struct plant *, const char *name);
/* So that plant_find is quick once the plant is read.  */
void plant_sort_streams (struct arena *, struct plant *);

/* plant_reading.c  */
bool plant_reading (struct reader_state *, const struct node *, struct reading *) MUST_CHECK;
/* What a composition is said to be: a gas, even where a stream has its name.  */
bool plant_gas_reading (struct reader_state *, const struct node *, struct reading *) MUST_CHECK;
/* No such stream in the balance, with the nearest name offered.  */
bool plant_stream_unknown (struct reader_state *, const struct node *name);

/* plant_fact.c  */
bool plant_read_known (struct reader_state *, const struct statement *) MUST_CHECK;
bool plant_read_per (struct reader_state *, const struct statement *) MUST_CHECK;
/* The facts of a stream defined before.  */
bool plant_read_given (struct reader_state *, size_t stream) MUST_CHECK;

/* plant_figure.c: figures into the network's terms.  */
bool flow_figure (struct reader_state *, const struct reading *flow, const struct reading *figure,
                  struct raw_fact *) MUST_CHECK;
bool share_figure (struct reader_state *, const struct reading *flow,
                   const struct reading *figure, struct raw_fact *) MUST_CHECK;
/* Half the unit of the last digit typed, in the unit of the figure, of a whole number at most
   0.5 % of it; 0: exact.  */
double digits_rounding (const struct node *);

/* plant_spread.c: uncertainties of the facts that a line has added, FIRST on.  */
typedef bool plant_line_reader (struct reader_state *, const void *);
bool plant_read_spread (struct reader_state *, plant_line_reader *, const void *line,
                        const struct plant *) MUST_CHECK;

/* plant_network.c: columns and rows.  */
/* TOLD: how many components a line `components` names.  */
bool plant_network (struct reader_state *, size_t told, const struct plant *base) MUST_CHECK;

#endif
