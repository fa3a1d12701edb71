/* Working an expression out.

   Evaluation is a function of a tree, a session's definitions and settings; it changes nothing
   but the caches of definitions.  The same answer can be worked out again under other settings or
   with uncertain figures moved: that is how the effect of an assumption and the uncertainty of an
   answer (uncertainty.h) are found, with no derivative anywhere.                                */
#ifndef LANGUAGE_EVALUATE_EVALUATION_H
#define LANGUAGE_EVALUATE_EVALUATION_H

#include <stdbool.h>
#include <stddef.h>
#include "language/settings.h"
#include "language/tree.h"
#include "language/evaluate/value.h"
#include "support/check.h"
#include "support/fault.h"
#include "support/seen.h"

struct arena; struct calorific_moves; struct definition; struct eos_state;
struct flammable_limits; struct result; struct session; struct worked; struct workings;

/* An uncertain figure, told apart from others by the address of what it belongs to.  */
struct source {
  const void *what;                         /* struct spread; a figure of a table; an equation */
  double u;                                 /* standard uncertainty, in UNIT */
  bool limits;                              /* rectangular between limits, not normal */
  const char *unit;
  const char *text;                         /* "CH4 58.2 ± 0.3 mol%" */
  const char *of;                           /* the name it is part of; null: the question */
  const char *from;                         /* of a table's figure: where it is from; or null */
};

/* A source moved BY standard uncertainties.  */
struct shift { const void *what; double by; };

/* A value tried in place of what a definition says; TREE, if not null, is a gas to be worked out
   in its place.                                                                                 */
struct stand_in { const struct definition *definition; struct value value;
                  const struct node *tree; };

/* What an answer leaned on, as bits; the bits below FAMILY_COUNT are those of the families.  */
enum touch { TOUCH_SITE = 1u << 8, TOUCH_MODEL = 1u << 9, TOUCH_OXYGEN = 1u << 10,
             TOUCH_BELOW = 1u << 11, TOUCH_TOLERANCE = 1u << 12, TOUCH_BARE = 1u << 13,
             TOUCH_VOLUMES = 1u << 14, TOUCH_QUANTITY = 1u << 15,
             TOUCH_VAPOUR = 1u << 16, TOUCH_COMBUSTION = 1u << 17,
             TOUCH_TYPED = 1u << 18 /* any figure, word or state as typed */,
             TOUCH_LIMITS = 1u << 19 };
static inline unsigned touch_family (enum reference_family f) { return 1u << (unsigned) f; }

/* What the usual alternative to an assumption is.  The last two have none that is usual: they are
   tried only to see whether the assumption matters to the answer.                               */
enum alternative { ALTERNATIVE_NONE, ALTERNATIVE_FAMILY, ALTERNATIVE_SHIPPED, ALTERNATIVE_SITE,
                   ALTERNATIVE_IDEAL, ALTERNATIVE_REAL, ALTERNATIVE_OXYGEN, ALTERNATIVE_BELOW,
                   ALTERNATIVE_GAUGE, ALTERNATIVE_COMBUSTION, ALTERNATIVE_BAROMETER,
                   ALTERNATIVE_VAPOUR, ALTERNATIVE_LIQUID };

/* Something taken because the user left it open.  */
struct assumption {
  enum message kind;
  const char *fact[MESSAGE_FACTS];
  enum alternative alternative;
  enum reference_family family;
};

struct evaluation {
  struct session *session;
  struct arena *arena;
  const struct settings *settings;
  struct fault *fault;
  struct result *result;                    /* where notes go; null: nowhere */
  struct workings *workings;                /* the record of steps; null: none is kept */
  bool describe;                            /* false while only the figures are wanted */
  const char *subject;                      /* the name being defined, for notes; or null */

  unsigned overridden;                      /* settings that differ from the session's */
  const struct stand_in *stand_ins;         /* values tried in place of definitions */
  size_t stand_in_count;
  const struct shift *shifts;               /* uncertain figures that are moved */
  size_t shift_count;
  const struct node *part;                  /* of a list, while its amount is read; or null */
  const struct unit *basis;                 /* of that list; or null */
  const struct worked *worked;              /* definitions worked out under this evaluation */

  unsigned touched;
  size_t assumption_count, assumption_room, source_count, source_room, used_count, used_room;
  struct assumption *assumptions;           /* what was taken, each once */
  struct source *sources;                   /* uncertain figures met, each once */
  struct seen sources_seen;                 /* by the address of what they belong to */
  struct definition **used;                 /* definitions met, each once */
};

void evaluation_init (struct evaluation *, struct session *, struct result *, struct fault *);
/* A second look at the same thing: same session and arena, no notes, FAULT of its own.  */
void evaluation_again (struct evaluation *, const struct evaluation *first, struct fault *);

/* THINGS with room for one more than the COUNT there are, of SIZE bytes each.  */
void *room_for_one (struct arena *, void *things, size_t count, size_t *room, size_t size);

void evaluation_touch (struct evaluation *, unsigned bits);
/* Adds an assumption unless the same one is there.  */
void evaluation_assume (struct evaluation *, const struct assumption *);
void evaluation_use (struct evaluation *, struct definition *);

/* The unit UNIT is read as while a check tries another for a word of it; null: none.  */
const struct unit *evaluation_unit (struct evaluation *, const struct unit *);

/* ---- Uncertain figures (source.c) ---- */

/* Adds a source unless it is there.  Only while `describe`: a second look finds the same ones.  */
void evaluation_source (struct evaluation *, const struct source *);
/* By how many standard uncertainties what belongs to WHAT is moved.  */
double evaluation_shift (const struct evaluation *, const void *what);

/* VALUE in the unit of NODE, a quantity, moved as its spread is; notes its source.  */
double evaluation_moved (struct evaluation *, const struct node *, double value);
/* The barometer as set, moved likewise.  */
double evaluation_barometer (struct evaluation *);

/* ---- Tables and equations as sources (constants.c) ---- */

/* With `constants uncertain` each is moved and noted as its sources ask; else left as it is.  */
struct calorific_moves constants_moves (struct evaluation *);
/* Molar mass of a gas, kg/mol: by the atomic weights.  */
double constants_molar_mass (struct evaluation *, const struct composition *);
/* By what the density of a state is multiplied: by the published uncertainty of its equation, which
   errs the same way wherever it is used in an answer.                                           */
double constants_density (struct evaluation *, const struct eos_state *);

/* ---- Expressions (evaluate.c) ---- */

struct state;

/* STATE, if not null, is what stands behind `at` for the whole of NODE.  */
bool evaluate (struct evaluation *, const struct node *, const struct state *,
               struct value *) MUST_CHECK;
/* A figure: a quantity or a plain number; kind-wrong otherwise.  */
bool evaluate_quantity (struct evaluation *, const struct node *, struct value *) MUST_CHECK;
bool evaluate_of (struct evaluation *, const struct node *, const struct state *,
                  struct value *) MUST_CHECK;
bool evaluate_sum (struct evaluation *, const struct node *, struct value *) MUST_CHECK;
bool evaluate_property (struct evaluation *, const struct node *, const struct state *,
                        struct value *) MUST_CHECK;

/* ---- Gases (evaluate_gas.c, evaluate_list.c) ---- */

bool evaluate_list (struct evaluation *, const struct node *, struct value *) MUST_CHECK;
/* Postfix words on a gas or stream: normalised, dried, wetted, saturated, without.  */
bool evaluate_change (struct evaluation *, const struct node *, struct value *) MUST_CHECK;
bool evaluate_keeping (struct evaluation *, const struct node *, struct value *) MUST_CHECK;
/* The closed composition of a gas; kind gas-open, at AT, with the ways to close it.  */
const struct composition *gas_composition (struct evaluation *, const struct gas_value *,
                                           struct place at) MUST_CHECK;
const struct gas_value *gas_of_composition (struct evaluation *, const struct composition *,
                                            const char *name) MUST_CHECK;
/* What a gas's parts are, as stated, for its treatments.  */
const struct analysis *gas_analysis (struct evaluation *, const struct gas_value *) MUST_CHECK;
/* A gas from an analysis, closed if its total lets it be; NAMED says what notes call it.  */
struct gas_value *gas_of_analysis (struct evaluation *, const struct analysis *,
                                   const struct gas_value *named) MUST_CHECK;
/* The species a component's name stands for: one, or those of a peak not resolved (O2+Ar), or of
   a lump that is a gas of the user's (C6+).  Kinds name-unknown, name-open, kind-wrong.         */
bool species_named (struct evaluation *, const struct node *name, struct species_set *)
  MUST_CHECK;
/* "NOx of GAS is ...", where a name of more than one meaning is a sum; else null.  */
const char *sum_way_on (struct arena *, const char *name);

/* ---- States (state.c) ---- */

enum moisture_kind { MOISTURE_NONE, MOISTURE_DRY, MOISTURE_SATURATED, MOISTURE_HUMIDITY,
                     MOISTURE_DEW_POINT, MOISTURE_FRACTION };

/* What stands behind `at`; NAN where it says nothing.  */
struct state {
  double T, p, Z, oxygen;
  enum moisture_kind moisture;
  double moist;                             /* humidity, K, or mol/mol of the wet gas */
  bool ideal, real;
  struct place at;
};
/* A state that says nothing, standing AT.  */
struct state state_empty (struct place at);
bool evaluate_state (struct evaluation *, const struct node *, struct state *) MUST_CHECK;
/* The share of water, of the wet gas, that a figure means: mol%, ppm or mg/Nm3.  */
bool evaluate_water (struct evaluation *, const struct node *, double *y) MUST_CHECK;
/* Where water is taken up: T, p and the gas that takes it (air has more, by its enhancement
   factor; null: no air).                                                                        */
struct moist_place { double T, p; const struct composition *gas; };
/* The water fraction a state's moisture means; false with FAULT.  *Y is 0 for dry.  */
bool state_water (struct evaluation *, const struct state *, const struct moist_place *,
                  double *y) MUST_CHECK;
/* Notes why a figure of water in gas has no enhancement factor, where that moves it.  */
struct moist_question; struct moist_answer;
void note_no_enhancement (struct evaluation *, const struct moist_question *,
                          const struct moist_answer *);
/* The gas with the moisture of STATE (unchanged for MOISTURE_NONE) at its T, p or FALLBACK's. */
bool state_wets (struct evaluation *, const struct state *, const struct stream *fallback,
                 const struct composition **, struct place at) MUST_CHECK;
/* A stream brought to a state: T, p, Z replaced, moisture changed with the dry flow kept.  */
bool state_apply (struct evaluation *, const struct state *, struct stream *, struct place at)
  MUST_CHECK;
/* An absolute pressure from a quantity; a bare unit is taken as absolute, and said so.  */
bool quantity_pressure (struct evaluation *, const struct value *, const char *typed,
                        double *p) MUST_CHECK;

/* ---- Heat (heat.c) ---- */

/* What is asked of a gas's calorific value: at metering T, p (NAN: the conditions of Sm3).  */
struct heat_question {
  const struct composition *gas;
  double T, p;
  bool real;
  enum standard by;                         /* with the standard's own molar masses and R */
};
/* Reads the tables of ISO 6976 where that was not done; false with the fault.  */
bool heat_tables (struct evaluation *) MUST_CHECK;
/* A figure of enum calorific_figure; *BASIS says what stands behind it.  */
bool heat_figure (struct evaluation *, const struct heat_question *, int figure, double *value,
                  const char **basis) MUST_CHECK;
/* Molar mass (kg/mol) of the dry air a relative density is taken over.  */
double heat_air_molar_mass (struct evaluation *);
/* Gross or net, J/mol.  */
bool heat_per_mole (struct evaluation *, const struct composition *, bool net, double *H)
  MUST_CHECK;

/* ---- Flammable limits (limits.c) ---- */

/* The lower limits that are set, into an array in ARENA; how many.  EV not null: as it moves them
   by their uncertainties, which are its sources.                                                */
size_t limits_set (const struct settings *, struct evaluation *, struct arena *,
                   struct flammable_limits **);

/* ---- Volumes (volume.c) ---- */

/* Traces an equation lumps that deserve a note: the noble gases of air, 25 ppm, move nothing.  */
#define TRACES_WORTH_A_NOTE 1e-4

/* Volume of one mole at a family's conditions: ideal gas, or real by the gas model.  */
bool family_molar_volume (struct evaluation *, enum reference_family, const struct composition *,
                          bool real, double *Vm) MUST_CHECK;
/* While a check fills in what a volume leaves open: the pressure is the barometer where only T is
   said, the temperature that of the conditions tried where only p is.  False: nothing is filled in,
   or neither is said.                                                                           */
bool volume_fill (struct evaluation *, double *T, double *p) MUST_CHECK;
/* Volume of one mole of GAS at T, p by the gas model in force, by Z if given, or ideal.  Assumes
   and notes what it must.  *Z says what was used, *MODEL by what ("as given").                  */
struct volume_question { const struct composition *gas; double T, p, Z; bool ideal; };
bool actual_molar_volume (struct evaluation *, const struct volume_question *, double *Vm,
                          double *Z, const char **model) MUST_CHECK;

#endif
