/* What a network comes to: solved, short of facts, or with facts that clash.

   The mathematics is described where it is done: rows in system.h, rank in rank.h, what agrees in
   agree.c, splits of unknown share in bend.c, what is fixed in fixed.h, what only last digits fix
   in loose.h, clashes in conflict.h, what would help in suggest.h, reconciliation in reconcile.c,
   the tests for gross errors in gross.c.                                                        */
#ifndef BALANCE_SOLUTION_H
#define BALANCE_SOLUTION_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "support/check.h"

struct arena; struct covariance; struct fault;

enum balance_status { BALANCE_DETERMINED, BALANCE_UNDERDETERMINED, BALANCE_REDUNDANT,
                      BALANCE_CONTRADICTORY, BALANCE_RECONCILED };

/* Something about a stream that may be fixed, open or worth measuring.  */
enum quantity_kind { QUANTITY_TOTAL, QUANTITY_COMPONENT, QUANTITY_FRACTION, QUANTITY_SHARE,
                     QUANTITY_EXTENT };
struct quantity {
  enum quantity_kind kind;
  size_t stream, component;      /* of a share: the outlet; of an extent: boundary, reaction */
};

/* What a person would count.  Variables: for each stream the components that can be in it, and the
   extents of reactions.  Balances: for each boundary the components that can be in any of its
   streams.  Relations: facts that tie streams, and for each split (outlets - 1) x (components - 1).
   Knowns: the other facts, a composition as one fewer than its stream has components.           */
struct count {
  size_t variables, balances, relations, knowns;
  size_t rank;                   /* independent ones among balances, relations and knowns */
  size_t missing, surplus;       /* true numbers, from the rank */
};

struct range { double least, greatest; };        /* greatest may be infinite */

/* A set of facts which settles what is open, or what one of them could be exchanged for.  */
struct suggestion { struct quantity quantity; double worth; size_t group; };

/* An open total in terms of others: total[stream] = constant + sum factor_k * total[free_k].  */
struct relation_left { size_t stream; double constant; size_t count; const size_t *free;
                       const double *factor; };

/* Facts that cannot all hold.  `needed` is what the fact would have to say if it alone were at
   fault (for a composition: component COMPONENT of it); not plausible where that is negative, a
   fraction above one, or nothing at all (NAN).                                                  */
struct suspect {
  size_t fact, component;
  double needed; bool plausible;
  double least, greatest;        /* plausible, and not one value: what it could say */
};
/* A row of a fact in the combination that does not close: what it says, mol/s (mol/mol, 1), times
   FACTOR; of a composition the row of COMPONENT.                                                */
struct conflict_term { size_t fact, component; double says, factor; };
/* Two facts that would have to change together.  */
struct suspect_pair { struct suspect at[2]; };
struct conflict {
  size_t count;                  /* facts in the smallest set */
  const struct suspect *suspects;
  const bool *around;            /* by boundary: the envelope whose balance does not close */
  size_t component;              /* that is out; `components`: the total is */
  double gap;                    /* what goes in less what comes out, mol/s; NAN, with nothing
                                    around, where fractions and ratios hold only if nothing flows */
  size_t term_count; const struct conflict_term *terms;  /* they add up to the gap; of a
                                    combination that closes none */
  double p;                      /* of agreement within the digits typed */
  bool least;                    /* no smaller set clashes; false: none of its facts can be left
                                    out, more is not known */
  size_t pair_count; const struct suspect_pair *pairs;   /* where no fact alone can be blamed: those
                                    that would change least */
  size_t pairs_left;             /* as good as these, and not among them */
  bool none_alone, pairs_cut;    /* no fact alone can be blamed; not all pairs were looked at */
  size_t still;                  /* the facts hold only if nothing flows in this stream; `streams`:
                                    not even then */
};

/* A result that hangs on the last digits of figures: it moves by `moves` when each of them moves by
   half its last digit.  A hinge is a fact responsible (COMPONENT of a composition, else
   `components`), and how far half a digit of it alone takes END; NAN: anywhere.                 */
struct loose_end { struct quantity quantity; double value, moves; };
struct hinge { size_t fact, component, end; double least, greatest; };
struct loose {
  size_t count; const struct loose_end *ends;            /* the worst first */
  size_t hinge_count; const struct hinge *hinges;        /* likewise */
  size_t directions;                     /* figures more that would settle them */
  size_t suggestion_count; const struct suggestion *suggestions;         /* as in the solution */
  const bool *total, *fraction;          /* by stream; by column */
};

/* A measured figure before and after.  */
enum figure_class { FIGURE_REDUNDANT, FIGURE_NEEDED, FIGURE_UNOBSERVABLE };
struct adjustment {
  size_t fact, component;        /* component: of a composition, else `components` */
  double stated, stated_u;
  double moved_to, moved_to_u;   /* what it should have read; of a composition not closed again */
  double z;                      /* adjustment over its standard deviation; NAN: not redundant */
  double implied;                /* what the rest says it should read; NAN: not redundant */
  double detectable;             /* least error found with 80 % probability; NAN: none is */
  enum figure_class class;
  size_t tie;                    /* adjustments with one z share a number; 0: no tie */
};
/* A leak or a mistake in a balance, as an explanation beside a meter's fault: SIZE goes in and does
   not come out, and chi2 would fall by DROP.  In large networks only beside figures that stand
   out.  */
struct leak { size_t boundary, component; double size, drop; };
/* One step of leaving out the figures that stand out most: what was left out, on what grounds (chi2
   and its freedom with it), with which others it could be exchanged, and what comes out without
   it: what it should read, and the flows by column.  */
struct elimination {
  size_t adjustment; double chi2, z, implied; size_t freedom;
  size_t tie_count; const size_t *tie;           /* adjustments, itself among them; 0: no tie */
  double chi2_left; size_t freedom_left;
  const double *value;
};

struct solution {
  enum balance_status status;
  struct count count;
  /* By column: the value where it is fixed (also by what is zero), else one feasible value.  */
  const double *value;
  const bool *fixed;
  /* By stream; fixed_fraction by stream and component (a fraction may be fixed though no flow
     is).  `fraction` is NAN where it is not.                                                    */
  const bool *fixed_total, *fixed_fraction;
  const double *fraction;
  bool scale_open;               /* only ratios are known: any one flow fixes the rest */
  double mismatch;               /* the largest of any equation at the solution, relative to the
                                    largest flow */
  double mass_in, mass_out;      /* over all that crosses the network's edge, kg/s; NAN: open */
  size_t negative_count; const size_t *negative;         /* columns below zero */
  const struct conflict *impossible;     /* facts that leave no other; null: it takes flows too */
  /* Other solutions that splits of unknown share allow beside `value`, each by column.  */
  size_t other_count; const double *const *other;

  const struct range *range;     /* by column, only when something is open; else null */
  const struct range *total_range;                       /* by stream, likewise */
  const size_t *group;           /* by column: 0 fixed; columns that move together share one */
  size_t suggestion_count; const struct suggestion *suggestions;   /* one set, best first, then the
                                    alternatives to each member (the same `group`) */
  size_t useless_count; const struct quantity *useless;  /* look helpful and are not */
  size_t left_count; const struct relation_left *left;
  const struct loose *loose;     /* practically undetermined; null: nothing is */

  size_t redundant_count; const size_t *redundant;       /* facts the others imply */
  const bool *checkable;         /* by fact: could anything else contradict it? */
  const struct conflict *conflict;                       /* null: none */

  size_t adjustment_count; const struct adjustment *adjustments;   /* only when reconciled */
  double chi2, critical, p, z_critical;
  size_t freedom;                /* of chi2 */
  bool passed;
  size_t leak_count; const struct leak *leaks;
  size_t elimination_count; const struct elimination *eliminations;
  size_t held_count; const size_t *held;                 /* columns that would come out below zero
                                    and are held there; p is then approximate */
  const bool *by_digits;         /* by fact: stated without uncertainty, counted with its digits;
                                    null: none is */
  const struct covariance *covariance;                   /* null: nothing is uncertain */
};

/* Everything at once; the work it needs is freed, what it answers lives in the arena.
   Measured facts (u above 0) are reconciled where they are redundant and propagated where not.
   Facts without uncertainty are exact beside them; where they then clash, or the global test fails,
   those with a rounding that anything bears on count with u = rounding / sqrt (3) instead.
   `confidence` is that of the tests (0.95).  INTERRUPTED may be null.  Faults: interrupted,
   not-converged.                                                                                */
struct solve_options { double confidence; bool (*interrupted) (void); };
const struct solution *network_solve (struct arena *, const struct network *,
                                      const struct solve_options *, struct fault *) MUST_CHECK;

/* The standard uncertainty of LEFT (RIGHT null) or of LEFT / RIGHT at the solution, by the full
   covariance of the measured facts; 0 if nothing uncertain reaches it, NAN if it is not fixed.
   What is uncertain by more than SOLUTION_VAGUE of itself is as good as open.  */
#define SOLUTION_VAGUE 0.3
double solution_uncertainty (const struct solution *, const struct network *,
                             const struct form *left, const struct form *right);

#endif
