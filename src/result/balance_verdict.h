/* What `solve` says of a balance: how many facts there are and what they come to.

   Figures for machines are SI and whole; what people read beside the user's own lines comes as
   text, in the units the lines are typed in.  A figure nobody can know is NAN, a list without
   entries null.                                                                                 */
#ifndef RESULT_BALANCE_VERDICT_H
#define RESULT_BALANCE_VERDICT_H

#include <stdbool.h>
#include <stddef.h>

enum verdict_status { VERDICT_DETERMINED, VERDICT_UNDERDETERMINED, VERDICT_REDUNDANT,
                      VERDICT_CONTRADICTORY, VERDICT_RECONCILED };

struct verdict_stream {
  const char *name;
  double molar_flow, mass_flow, uncertainty;     /* mol/s, kg/s, mol/s; NAN: open */
  const double *fractions;                       /* by component; NAN: open */
  const double *fractions_u;
  const double *shown, *shown_u;                 /* flows in the units of `units`; NAN: certain */
};

/* One row of text with cells; `number` is that of a user's line, 0 of none.  */
struct verdict_row { size_t number; const char *cell[4]; struct verdict_row *next; };

/* mol/s; the greatest may be infinite.  */
struct verdict_range { const char *name; double least, greatest; };
/* `needed` is NAN where it is a range.  */
struct verdict_suspect {
  size_t line;
  const char *statement, *unit;
  double needed, least, greatest;
};
struct verdict_pair { struct verdict_suspect at[2]; };
struct verdict_adjustment {
  const char *statement, *component, *unit;      /* component: null where it is no share */
  double stated, reconciled, uncertainty, z;
};
/* A result that hangs on last digits, with what it moves by; a line that it hangs on, and how far
   half a last digit of it takes it (NAN: anywhere).                                             */
struct verdict_loose { const char *what, *unit; double value, moves; };
struct verdict_hinge { size_t line; const char *statement, *what, *unit; double least, greatest; };
struct verdict_texts { size_t count; const char *const *at; };
/* All of what a sentence names only the first of.  */
struct verdict_list { const char *what; struct verdict_texts names; struct verdict_list *next; };

struct balance_verdict {
  const char *name;
  enum verdict_status status;
  const char *phrase, *head;                     /* "SHORT BY 1"; the one thing to know, or "" */
  const char *counts;                            /* the sentence with its result */
  size_t variables, balances, relations, knowns, independent, missing, surplus;

  bool mass;                                     /* flows are by mass: molar_flow is NAN */
  size_t component_count; const char *const *components;
  size_t unit_count; const char *const *units;   /* columns of `shown` */
  const char *const *unit_basis;                 /* what they stand on, or null; as null in it */
  size_t stream_count; const struct verdict_stream *streams;

  struct verdict_row *facts;                     /* label, text: "fixed all the same ..." */
  struct verdict_row *rows;                      /* of a clash or of what was reconciled */
  const char *heading[4];                        /* of `rows` */
  bool clash;
  struct verdict_list *lists;

  size_t range_count; const struct verdict_range *ranges;
  struct verdict_texts determined, undetermined, relations_left, negative, impossible, conflict,
                       redundant;
  size_t suggestion_count; const struct verdict_texts *suggestions;
  size_t loose_count; const struct verdict_loose *loose;
  size_t hinge_count; const struct verdict_hinge *hinges;
  size_t settled_by_count; const struct verdict_texts *settled_by;       /* as suggestions */
  const char *gap_around, *gap_component, *gap_unit;             /* null: no gap */
  double gap;
  size_t suspect_count; const struct verdict_suspect *suspects;
  bool smallest;                                 /* no fewer lines clash */
  size_t pair_count, pairs_left; const struct verdict_pair *pairs;
  size_t adjustment_count; const struct verdict_adjustment *adjustments;
  bool tested; double chi2, critical; size_t freedom; bool passed;
};

#endif
