#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "property/calorific.h"
#include "support/arena.h"
#include "units/constants.h"

/* A gas is burnt in two parts: what the standard or enthalpies of formation can tell, and gases
   known only by stated figures, which bring their own.                                          */
struct burnt {
  const struct composition *known;         /* null: all of it is stated */
  double share;                            /* mol of the known part per mol of gas */
  double stated;                           /* gross or net of the rest, J per mol of gas */
};

bool
heat_tables (struct evaluation *ev)
{
  struct session *s = ev->session;
  if (!s->calorific) {
    s->calorific = calorific_tables_create (s->options.tables, ev->fault);
  }
  return s->calorific != NULL;
}

static bool
split_stated (struct evaluation *ev, const struct composition *gas, bool net,
              struct burnt *burnt)
{
  struct part *known = ARENA_ARRAY (ev->arena, gas->count, struct part);
  size_t n = 0;
  *burnt = (struct burnt) { gas, 1, 0 };
  for (size_t i = 0; i < gas->count; i++) {
    const struct species *species = gas->species[i];
    double H = net ? species->stated_net : species->stated_gross;
    if (!(gas->fraction[i] > 0)) {
      continue;
    }
    if (species->origin != SPECIES_STATED) {
      known[n++] = (struct part) { species, gas->fraction[i] };
      continue;
    }
    if (!(H > 0)) {
      fault_set (ev->fault, MESSAGE_CALORIFIC_UNKNOWN, species->key, NULL);
      fault_hint (ev->fault, "state it: gas %s with molar mass ..., %s calorific value ...",
                  species->key, net ? "net" : "gross");
      return false;
    }
    burnt->share -= gas->fraction[i];
    burnt->stated += gas->fraction[i] * H;
  }
  bool stated = burnt->share < 1;
  if (stated) {
    burnt->known = n ? composition_make (ev->arena, n, known, ev->fault) : NULL;
  }
  return n == 0 || burnt->known != NULL;
}

static enum calorific_edition
edition_of (const struct evaluation *ev, enum standard by)
{
  bool old = by == STANDARD_1995 || (ev->settings->calorific_1995 && by != STANDARD_2016);
  return old ? CALORIFIC_1995 : CALORIFIC_2016;
}

/* That of 1995 states no uncertainties.  */
static void
note_no_uncertainties (struct evaluation *ev, enum calorific_edition edition)
{
  if (ev->settings->constants_uncertain && edition == CALORIFIC_1995) {
    note (ev, MESSAGE_NOTE_CONSTANTS_UNSTATED, calorific_edition_name (edition), NULL, NULL);
  }
}

const char *
heat_standard (const struct evaluation *ev)
{
  return calorific_edition_name (edition_of (ev, STANDARD_NONE));
}

static void
assume_combustion (struct evaluation *ev)
{
  evaluation_touch (ev, TOUCH_COMBUSTION);
  if (ev->describe && !ev->settings->is_set[SETTING_COMBUSTION]) {
    evaluation_assume (ev, &(struct assumption) {
        .kind = MESSAGE_TAKEN_COMBUSTION,
        .fact = { temperature_text (ev->arena, ev->settings->combustion, false) },
        .alternative = ALTERNATIVE_COMBUSTION });
  }
}

/* Components whose figure is not the standard's own.  */
static void
note_origins (struct evaluation *ev, const struct composition *gas,
              enum calorific_edition edition, unsigned origins)
{
  static const enum message said[CALORIFIC_ORIGINS] = {
    [CALORIFIC_OTHER_EDITION] = MESSAGE_NOTE_CALORIFIC_EDITION,
    [CALORIFIC_FORMATION] = MESSAGE_NOTE_CALORIFIC_FORMATION,
    [CALORIFIC_FORMATION_25] = MESSAGE_NOTE_CALORIFIC_FORMATION,
    [CALORIFIC_NO_FUEL] = MESSAGE_NOTE_CALORIFIC_NONE,
    [CALORIFIC_TRACE] = MESSAGE_NOTE_CALORIFIC_NONE,
  };
  if (!ev->result || origins == 1u << CALORIFIC_STANDARD) {
    return;
  }
  for (size_t i = 0; i < gas->count; i++) {
    enum calorific_origin origin = calorific_origin (ev->session->calorific, edition,
                                                     gas->species[i]);
    bool inert = origin == CALORIFIC_NO_FUEL
                 && strcmp (gas->species[i]->flags, "simple-asphyxiant") == 0;
    if (origin != CALORIFIC_STANDARD && !inert) {
      note (ev, said[origin], gas->species[i]->key, NULL, NULL);
    }
  }
}

static bool
known_figures (struct evaluation *ev, const struct heat_question *q,
               const struct composition *gas, int wanted, struct calorific *out)
{
  struct calorific_question ask = {
    .edition = edition_of (ev, q->by), .T_combustion = ev->settings->combustion,
    .T_metering = q->T, .p = q->p, .real = q->real, .by_standard = q->by != STANDARD_NONE,
    .moves = constants_moves (ev), .workings = ev->workings, .wanted = wanted };
  for (size_t i = 0; i < gas->count; i++) {
    if (gas->species[i]->origin == SPECIES_STATED) {
      fault_set (ev->fault, MESSAGE_MODEL_LACKS, calorific_edition_name (ask.edition),
                 gas->species[i]->key);
      fault_hint (ev->fault, "its compression factor was not stated: ask for ideal volumes");
      return false;
    }
  }
  if (!heat_tables (ev)
      || !calorific_compute (ev->session->calorific, gas, &ask, out, ev->fault)) {
    return false;
  }
  assume_combustion (ev);
  note_no_uncertainties (ev, ask.edition);
  note_origins (ev, gas, ask.edition, out->origins);
  return true;
}

/* Where part of a gas has a calorific value that was stated.  */
static void
record_burnt (struct evaluation *ev, const struct burnt *burnt, double known, double H)
{
  if (burnt->share < 1) {
    RECORD (ev, .name = "calorific value, molar, with what is stated",
            .formula = "H = s H_k + H_s", .value = H, .unit = "J/mol", .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("s", burnt->known ? burnt->share : 0, "mol/mol"),
                          SYMBOL ("H_k", known, "J/mol"),
                          CONSTANT ("H_s", burnt->stated, "J/mol", STEP_TYPED)));
  }
}

bool
heat_per_mole (struct evaluation *ev, const struct composition *gas, bool net, double *H)
{
  struct burnt burnt;
  struct calorific figures;
  struct heat_question q = { gas, 288.15, STANDARD_ATMOSPHERE, false, STANDARD_NONE };
  net = net != ev->settings->trial.other_heat;
  evaluation_touch (ev, TOUCH_TYPED);
  if (!split_stated (ev, gas, net, &burnt)) {
    return false;
  }
  *H = burnt.stated;
  if (!burnt.known) {
    record_burnt (ev, &burnt, 0, *H);
    return true;
  }
  const int molar = net ? CALORIFIC_NET_MOLAR : CALORIFIC_GROSS_MOLAR;
  if (!known_figures (ev, &q, burnt.known, molar, &figures)) {
    return false;
  }
  *H += burnt.share * figures.value[molar];
  record_burnt (ev, &burnt, figures.value[molar], *H);
  return true;
}

/* From the molar calorific value to what is asked.  */
static void
record_ideal (struct evaluation *ev, const struct heat_question *q, int figure, double H,
              double value)
{
  const bool mass = figure == CALORIFIC_GROSS_MASS || figure == CALORIFIC_NET_MASS;
  const bool wobbe = calorific_is_wobbe (figure);
  const double M = q->gas->molar_mass, Vm = GAS_CONSTANT * q->T / q->p;
  if (!ev->workings || figure == CALORIFIC_GROSS_MOLAR || figure == CALORIFIC_NET_MOLAR) {
    return;
  }
  const double air = heat_air_molar_mass (ev);
  if (mass || wobbe) {
    record_molar_mass (ev, q->gas, NULL);
  }
  if (!mass) {
    RECORD (ev, .name = "volume of a mole", .formula = "V = R T/p", .value = Vm, .unit = "m3/mol",
            .source = STEP_IDEAL_GAS,
            STEP_SYMBOLS (STEP_R, SYMBOL ("T", q->T, "K"), SYMBOL ("p", q->p, "Pa")));
  }
  RECORD (ev, .name = wobbe ? "Wobbe index" : mass ? "calorific value by mass"
                                                   : "calorific value by volume",
          .formula = wobbe ? "W = H/V/sqrt(M/M_air)" : mass ? "h = H/M" : "h = H/V",
          .value = value, .unit = mass ? "J/kg" : "J/m3", .source = heat_standard (ev),
          STEP_SYMBOLS (SYMBOL ("H", H, "J/mol"), SYMBOL ("M", M, "kg/mol"),
                        SYMBOL ("V", Vm, "m3/mol"),
                        CONSTANT ("M_air", air, "kg/mol", heat_standard (ev))));
}

/* Ideal-gas figures from the molar calorific value H: H/M, H p/(RT), and the latter over the root
   of the relative density M/M_air (ISO 6976:2016, clauses 7 to 10).                             */
static bool
ideal_figure (struct evaluation *ev, const struct heat_question *q, int figure, double *value)
{
  double H, Vm = GAS_CONSTANT * q->T / q->p, M = constants_molar_mass (ev, q->gas);
  if (!heat_tables (ev) || !heat_per_mole (ev, q->gas, calorific_is_net (figure), &H)) {
    return false;
  }
  if (figure == CALORIFIC_GROSS_MOLAR || figure == CALORIFIC_NET_MOLAR) {
    *value = H;
  } else if (figure == CALORIFIC_GROSS_MASS || figure == CALORIFIC_NET_MASS) {
    *value = H / M;
  } else if (calorific_is_wobbe (figure)) {
    *value = H / Vm / sqrt (M / heat_air_molar_mass (ev));
  } else {
    *value = H / Vm;
  }
  record_ideal (ev, q, figure, H, *value);
  return true;
}

/* Figures of the volume that have no heat in them.  */
static bool
is_by_volume (int figure)
{
  return figure == CALORIFIC_RELATIVE_DENSITY || figure == CALORIFIC_DENSITY
         || figure == CALORIFIC_Z || figure == CALORIFIC_MOLAR_VOLUME;
}

/* "ISO 6976:2016, its molar masses and R".  */
static const char *
standard_text (struct evaluation *ev, const struct heat_question *q, int figure)
{
  const char *name = calorific_edition_name (edition_of (ev, q->by));
  bool volume = calorific_is_wobbe (figure) || is_by_volume (figure)
                || figure == CALORIFIC_GROSS_VOLUME
                || figure == CALORIFIC_NET_VOLUME;
  return !q->by ? name
         : arena_format (ev->arena, "%s, its molar masses%s", name, volume ? " and R" : "");
}

static const char *
basis_text (struct evaluation *ev, const struct heat_question *q, int figure)
{
  bool volume = calorific_is_wobbe (figure) || figure == CALORIFIC_GROSS_VOLUME
                || figure == CALORIFIC_NET_VOLUME;
  struct burnt parts;
  bool stated = !q->by && !is_by_volume (figure)
                && split_stated (ev, q->gas, calorific_is_net (figure), &parts) && !parts.known;
  const char *name = stated ? "as stated" : standard_text (ev, q, figure);
  const char *sort = calorific_is_net (figure) ? "net" : "gross";
  const char *burnt = temperature_text (ev->arena, ev->settings->combustion, false);
  if (figure == CALORIFIC_MOLAR_MASS) {
    return name;
  }
  if (is_by_volume (figure)) {
    return arena_format (ev->arena, "%s, %s, %s, %s",
                         temperature_text (ev->arena, q->T, false),
                         pressure_text (ev->arena, q->p, false), q->real ? "real" : "ideal",
                         name);
  }
  if (!volume) {
    return arena_format (ev->arena, "%s, combustion %s, %s", sort, burnt, name);
  }
  return arena_format (ev->arena, "%s, combustion %s, metering %s, %s, %s, %s", sort, burnt,
                       temperature_text (ev->arena, q->T, false),
                       pressure_text (ev->arena, q->p, false), q->real ? "real" : "ideal", name);
}

/* The same figure of the other kind, net for gross.  */
static int
other_heat (int figure)
{
  switch (figure) {
  case CALORIFIC_GROSS_MOLAR: return CALORIFIC_NET_MOLAR;
  case CALORIFIC_NET_MOLAR: return CALORIFIC_GROSS_MOLAR;
  case CALORIFIC_GROSS_MASS: return CALORIFIC_NET_MASS;
  case CALORIFIC_NET_MASS: return CALORIFIC_GROSS_MASS;
  case CALORIFIC_GROSS_VOLUME: return CALORIFIC_NET_VOLUME;
  case CALORIFIC_NET_VOLUME: return CALORIFIC_GROSS_VOLUME;
  case CALORIFIC_WOBBE: return CALORIFIC_NET_WOBBE;
  case CALORIFIC_NET_WOBBE: return CALORIFIC_WOBBE;
  default: return figure;
  }
}

bool
heat_figure (struct evaluation *ev, const struct heat_question *asked, int figure, double *value,
             const char **basis)
{
  struct heat_question q = *asked;
  struct calorific figures;
  if (isnan (q.T) || isnan (q.p)) {
    q.T = ev->settings->family[FAMILY_STANDARD].at.T;
    q.p = ev->settings->family[FAMILY_STANDARD].at.p;
    assume_family (ev, FAMILY_STANDARD);
  }
  if (q.real || q.by) {
    if (!known_figures (ev, &q, q.gas, figure, &figures)) {
      return false;
    }
    *value = figures.value[ev->settings->trial.other_heat ? other_heat (figure) : figure];
  } else if (!ideal_figure (ev, &q, figure, value)) {
    return false;
  }
  if (ev->describe) {
    *basis = basis_text (ev, &q, figure);
  }
  return true;
}

double
heat_air_molar_mass (struct evaluation *ev)
{
  /* ISO 6976: 28.96546 g/mol in 2016; without its tables that figure (2016, annex A).  */
  struct fault unheard, *fault = ev->fault;
  fault_init (&unheard, ev->arena);
  ev->fault = &unheard;
  bool read = heat_tables (ev);
  ev->fault = fault;
  struct calorific_moves moves = constants_moves (ev);
  return read ? calorific_air_molar_mass (ev->session->calorific,
                                          edition_of (ev, STANDARD_NONE), &moves)
              : 28.96546e-3;
}
