#include "config.h"
#include "language/evaluate/evaluation.h"

#include <math.h>
#include <string.h>
#include <strings.h>
#include "gas/air.h"
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/record.h"
#include "language/session_private.h"
#include "language/evaluate/wording.h"
#include "support/arena.h"

/* ---- Which component a part is ---- */

/* A peak that was not resolved: as air has its parts.  */
static const struct composition *
peak (struct evaluation *ev, const char *name)
{
  struct part parts[AIR_PEAK_PARTS];
  size_t n = air_peak (ev->session->vocabulary.species, name, strlen (name), parts);
  const struct composition *gas = n ? composition_make (ev->arena, n, parts, ev->fault) : NULL;
  if (gas && ev->describe) {
    const char *shares = "";
    for (size_t i = 0; i < gas->count; i++)
      shares = arena_format (ev->arena, "%s%s%s %s", shares, i ? ", " : "", gas->species[i]->key,
                             figure_text (ev->arena, 100 * gas->fraction[i]));
    evaluation_assume (ev, &(struct assumption) {
        .kind = MESSAGE_TAKEN_PEAK,
        .fact = { name, arena_format (ev->arena, "%s mol%%", shares) } });
  }
  return gas;
}

/* A part's name: a gas of the user's first, then the component table, then a peak.  */
struct component { const struct species *species; const struct composition *gas; };

static bool
component_named (struct evaluation *ev, const struct node *name, struct component *out)
{
  struct session *s = ev->session;
  size_t n = strlen (name->text);
  const char *candidates;
  struct definition *d = name_find (s, name->text, n);
  *out = (struct component) { NULL, NULL };
  if (d && d->kind == NAME_GAS) {
    const struct value *value = definition_value (ev, d, name->at);
    out->gas = value ? gas_composition (ev, value->gas, name->at) : NULL;
    return out->gas != NULL;
  }
  if (air_is_name (name->text, n)) {
    out->gas = s->air;
    return true;
  }
  switch (species_find (s->vocabulary.species, name->text, n, &out->species, &candidates)) {
  case SPECIES_KEY:
  case SPECIES_SYNONYM:
  case SPECIES_PLAIN_FORMULA:
    note_species (ev, out->species);
    return true;
  case SPECIES_AMBIGUOUS:
    if (!strchr (name->text, '+') || !(out->gas = peak (ev, name->text))) {
      fault_set_at (ev->fault, MESSAGE_NAME_OPEN, name->at, name->text, candidates);
      const char *sum = sum_way_on (ev->fault->arena, name->text);
      if (sum) {
        ev->fault->fact[2] = sum;
      } else if (strchr (name->text, '+')) {
        fault_hint (ev->fault, "for all of them define it first, as a list or with what is known: "
                    "gas %s with molar mass ...", name->text);
      }
      return false;
    }
    return true;
  case SPECIES_NONE:
    break;
  }
  out->gas = peak (ev, name->text);
  if (!out->gas && d) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, name->at,
                         arena_format (ev->arena, "'%s' is no gas", name->text), NULL);
  }
  return out->gas || name_unknown (ev, name);
}

/* Sums that emission practice has a word for, and what they count as by mass: of nitrogen oxides
   Directive 2010/75/EU, article 3, "expressed as nitrogen dioxide (NO2)"; of sulfur oxides common
   practice, no source.                                                                          */
static const struct { const char *name, *parts[2], *counted_as; } sums[] = {
  { "nox", { "NO", "NO2" }, "NO2" }, { "sox", { "SO2", "SO3" }, "SO2" }
};
enum { SUMS = sizeof sums / sizeof sums[0] };

static size_t
sum_at (const char *name)
{
  for (size_t i = 0; i < SUMS; i++)
    if (strcasecmp (name, sums[i].name) == 0) {
      return i;
    }
  return SUMS;
}

const char *
sum_way_on (struct arena *arena, const char *name)
{
  size_t i = sum_at (name);
  return i == SUMS ? NULL
         : arena_format (arena, "state both; or how they share, first: gas %s = %s 95, %s 5 mol%%. "
                         "%s of GAS is both together, by mass as %s", name, sums[i].parts[0],
                         sums[i].parts[1], name, sums[i].counted_as);
}

/* NOx: NO and NO2, whatever the user's gas of that name says of their shares.  */
static bool
sum_named (struct evaluation *ev, const char *name, struct species_set *set)
{
  size_t i = sum_at (name);
  const char *candidates;
  if (i == SUMS) {
    return false;
  }
  for (size_t k = 0; k < 2; k++)
    if (species_find (ev->session->vocabulary.species, sums[i].parts[k],
                      strlen (sums[i].parts[k]), &set->at[k], &candidates) != SPECIES_KEY) {
      return false;
    }
  set->count = 2;
  set->counted_as = sums[i].counted_as;
  return true;
}

/* Components that are told together, NO+NO2: each a component, none twice.  */
static bool
group_named (struct evaluation *ev, const char *name, struct species_set *set)
{
  const char *candidates;
  size_t count = 0;
  if (!strchr (name, '+') || name_find (ev->session, name, strlen (name))) {
    return false;
  }
  for (const char *from = name; from; count++) {
    size_t n = strcspn (from, "+");
    const struct species *species;
    enum species_match match = species_find (ev->session->vocabulary.species, from, n, &species,
                                             &candidates);
    if (count == SPECIES_SET_MOST || (match != SPECIES_KEY && match != SPECIES_SYNONYM)) {
      return false;
    }
    for (size_t i = 0; i < count; i++)
      if (set->at[i] == species) {
        return false;
      }
    set->at[count] = species;
    from = from[n] == '+' ? from + n + 1 : NULL;
  }
  set->count = count;
  return true;
}

bool
species_named (struct evaluation *ev, const struct node *name, struct species_set *set)
{
  struct component c;
  const struct species *species;
  const char *candidates;
  size_t n = strlen (name->text);
  enum species_match match = species_find (ev->session->vocabulary.species, name->text, n,
                                           &species, &candidates);
  set->counted_as = NULL;
  if (match == SPECIES_KEY || match == SPECIES_SYNONYM) {
    set->at[0] = species;
    set->count = 1;
    return true;
  }
  if (air_is_name (name->text, n)) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, name->at, "'air' is no component", NULL);
  }
  if (sum_named (ev, name->text, set) || group_named (ev, name->text, set)) {
    return true;
  }
  if (!component_named (ev, name, &c)) {
    return false;
  }
  if (c.species) {
    set->at[0] = c.species;
    set->count = 1;
    return true;
  }
  if (c.gas->count > SPECIES_SET_MOST) {
    return fault_set_at (ev->fault, MESSAGE_RANGE, name->at, "a lump of too many components",
                         NULL);
  }
  set->count = c.gas->count;
  memcpy (set->at, c.gas->species, set->count * sizeof set->at[0]);
  return true;
}

/* ---- How much of it ---- */

/* A figure of a part in SI with the unit it is in.  */
struct part_figure { double si; const struct unit *unit; };

static bool
part_figure (struct evaluation *ev, const struct node *part, const struct unit *basis,
             struct part_figure *f)
{
  struct value v;
  const struct node *outer = ev->part;
  const struct unit *outer_basis = ev->basis;
  ev->part = part;
  ev->basis = basis;
  bool done = evaluate_quantity (ev, part->a, &v);
  ev->part = outer;
  ev->basis = outer_basis;
  if (!done) {
    return false;
  }
  f->unit = part->unit ? part->unit : v.unit ? v.unit : basis;
  if (!f->unit) {
    return fault_set_at (ev->fault, MESSAGE_BASIS_MISSING, part->a->at, NULL, NULL);
  }
  if (part->unit && v.unit) {
    return fault_set_at (ev->fault, MESSAGE_KIND_WRONG, part->unit_at,
                         "the figure in brackets has its unit already", NULL);
  }
  f->unit = v.unit ? f->unit : evaluation_unit (ev, f->unit);
  evaluation_touch (ev, TOUCH_TYPED);
  f->si = v.unit ? v.si : unit_to_si (f->unit, v.si);
  if (part->below) {
    const double share[] = { [BELOW_ZERO] = 0, [BELOW_HALF] = 0.5, [BELOW_LIMIT] = 1 };
    const char *const word[] = { [BELOW_ZERO] = "zero", [BELOW_HALF] = "half the limit",
                                 [BELOW_LIMIT] = "the limit" };
    f->si *= share[ev->settings->below];
    evaluation_touch (ev, TOUCH_BELOW);
    if (ev->describe && part->a->figure && !ev->settings->is_set[SETTING_BELOW_DETECTION]) {
      evaluation_assume (ev, &(struct assumption) {
          .kind = MESSAGE_TAKEN_BELOW_DETECTION, .alternative = ALTERNATIVE_BELOW,
          .fact = { part->text, arena_format (ev->arena, "%s %s", part->a->figure,
                                              f->unit->spelling),
                    word[ev->settings->below] } });
    }
  }
  return true;
}

/* A concentration per reference volume becomes a mole fraction in an ideal gas.  */
static bool
concentration (struct evaluation *ev, const struct node *part, const struct part_figure *f,
               const struct component *c, struct stated_part *out)
{
  struct dimension d = f->unit->dimension;
  bool by_mass = dimension_equal (d, DIMENSION_DENSITY);
  double Vm, molar_mass = c->species ? c->species->molar_mass : c->gas->molar_mass;
  if (!by_mass && !dimension_equal (d, DIMENSION_MOLAR_DENSITY)) {
    return fault_set_at (ev->fault, MESSAGE_UNIT_MISMATCH, part->a->at,
                         "an amount of a part is a share, a concentration, a mass or an amount",
                         NULL);
  }
  if (f->unit->family_power != -1) {
    fault_set_at (ev->fault, MESSAGE_STATE_MISSING, part->a->at, f->unit->spelling, NULL);
    fault_hint (ev->fault, "count it at reference conditions: mg/Nm3, mg/Sm3");
    return false;
  }
  if (!family_molar_volume (ev, f->unit->family, NULL, false, &Vm)) {
    return false;
  }
  out->basis = AMOUNT_MOLAR_CONCENTRATION;
  out->amount = by_mass ? f->si * Vm / molar_mass : f->si * Vm;
  RECORD (ev, .name = "share of", .of = part->text,
          .formula = by_mass ? "a = c V/M" : "a = c V", .value = out->amount, .unit = "mol/mol",
          .source = STEP_DEFINITION,
          STEP_SYMBOLS (CONSTANT ("c", f->si, by_mass ? "kg/m3" : "mol/m3", STEP_TYPED),
                        SYMBOL ("V", Vm, "m3/mol"), SYMBOL ("M", molar_mass, "kg/mol")));
  return true;
}

/* In SI.  A greater one is no figure that the sums and shares of a list can be told with.  */
static const double GREATEST_AMOUNT = 1e300;

static bool
stated_amount (struct evaluation *ev, const struct node *list, const struct node *part,
               const struct component *c, struct stated_part *out)
{
  struct part_figure f = { 0, NULL };
  if (part->rest) {
    out->basis = AMOUNT_REST;
    return true;
  }
  if (!part_figure (ev, part, list->unit, &f)) {
    return false;
  }
  if (f.si < 0) {
    return fault_set_at (ev->fault, MESSAGE_AMOUNT_NEGATIVE, part->a->at, part->text, NULL);
  }
  if (!(f.si <= GREATEST_AMOUNT)) {
    return fault_set_at (ev->fault, MESSAGE_NOT_FINITE, part->a->at, NULL, NULL);
  }
  out->amount = f.si;
  switch (f.unit->ratio) {
  case RATIO_MOLE:
  case RATIO_VOLUME:
    out->basis = AMOUNT_MOLE_FRACTION;
    return true;
  case RATIO_MASS:
    out->basis = AMOUNT_MASS_FRACTION;
    return true;
  case RATIO_PLAIN:
    return fault_set_at (ev->fault, MESSAGE_BASIS_MISSING, part->a->at, NULL, NULL);
  case RATIO_ENERGY:
  case RATIO_NONE:
    break;
  }
  if (dimension_equal (f.unit->dimension, DIMENSION_MASS)) {
    out->basis = AMOUNT_MASS;
    return true;
  }
  if (dimension_equal (f.unit->dimension, DIMENSION_AMOUNT)) {
    out->basis = AMOUNT_MOLES;
    return true;
  }
  return concentration (ev, part, &f, c, out);
}

/* ---- The list ---- */

static bool
check_part (struct evaluation *ev, const struct node *list, const struct node *part,
            const struct stated_part *before, const struct stated_part *new)
{
  struct place at = part->at;
  const struct species *water = ev->session->water;
  at.last = at.first + (int) strlen (part->text) - 1;
  for (const struct stated_part *old = before; new->species && old < new; old++)
    if (old->species == new->species) {
      return fault_set_at (ev->fault, MESSAGE_GAS_TWICE, at, new->species->key, NULL);
    }
  bool wet = new->species == water
             || (new->gas && composition_fraction (new->gas, water) > 0);
  return !(wet && (list->words & WORD_DRY))
         || fault_set_at (ev->fault, MESSAGE_GAS_WATER, at, NULL, NULL);
}

/* `vol% real`: the volumes of the unmixed parts at the conditions of Sm3, by their own Z
   (ISO 14912:2003): x_i is in proportion to phi_i/Z_i.                                          */
static bool
from_real_volumes (struct evaluation *ev, const struct node *list, size_t n,
                   struct stated_part *parts)
{
  double total = 0;
  for (size_t i = 0; i < n; i++) {
    if (parts[i].basis != AMOUNT_MOLE_FRACTION && parts[i].basis != AMOUNT_REST) {
      return fault_set_at (ev->fault, MESSAGE_BASIS_MIXED, list->unit_at, "vol% real", NULL);
    }
    total += parts[i].basis == AMOUNT_REST ? 0 : parts[i].amount;
  }
  for (size_t i = 0; i < n; i++) {
    double Vm;
    const struct composition *pure = parts[i].gas
                                       ? parts[i].gas
                                       : composition_pure (ev->arena, parts[i].species);
    if (!family_molar_volume (ev, FAMILY_STANDARD, pure, true, &Vm)) {
      return false;
    }
    double phi = parts[i].basis == AMOUNT_REST ? 1 - total : parts[i].amount;
    if (phi < 0) {
      return fault_set_at (ev->fault, MESSAGE_GAS_TOTAL, list->at,
                           arena_format (ev->arena, "%s vol%%",
                                         figure_text (ev->arena, 100 * total)),
                           NULL);
    }
    parts[i].basis = AMOUNT_MOLES;
    parts[i].amount = phi / Vm;
  }
  return true;
}

static bool
read_parts (struct evaluation *ev, const struct node *list, struct stated_part *parts)
{
  size_t n = 0;
  for (const struct node *part = list->items; part; part = part->next, n++) {
    struct component c;
    struct node name = { .kind = NODE_NAME, .text = part->text, .at = part->at };
    name.at.last = part->at.first + (int) strlen (part->text) - 1;
    if (!component_named (ev, &name, &c)) {
      return false;
    }
    parts[n] = (struct stated_part) { .species = c.species, .gas = c.gas };
    if (!check_part (ev, list, part, parts, &parts[n])
        || !stated_amount (ev, list, part, &c, &parts[n])) {
      fault_place (ev->fault, part->at);
      return false;
    }
  }
  return true;
}

static const struct node *
part_at (const struct node *list, size_t i)
{
  const struct node *part = list->items;
  while (part && i-- > 0) {
    part = part->next;
  }
  return part ? part : list;
}

/* The parts of a list as read, or with nothing moved.  */
static const struct analysis *
analysis_of (struct evaluation *ev, const struct node *list, struct stated_part *parts, size_t n,
             size_t *at)
{
  if (!read_parts (ev, list, parts)) {
    return NULL;
  }
  if ((list->words & WORD_REAL) && !from_real_volumes (ev, list, n, parts)) {
    fault_place (ev->fault, list->at);
    return NULL;
  }
  const struct analysis *analysis = analysis_make (ev->arena, n, parts,
                                                   (list->words & WORD_DRY) != 0, at, ev->fault);
  if (!analysis) {
    fault_place (ev->fault, part_at (list, *at)->at);
  }
  return analysis;
}

static double
moles_in (const struct analysis *analysis)
{
  double total = 0;
  for (size_t i = 0; i < analysis->count; i++) {
    total += analysis->parts[i].amount;
  }
  return total;
}

/* `set parts independent`: while a part is moved the others stay, and the list is not closed again.
   What takes the rest moves all the same, and amounts have no total to keep.                    */
static bool
leave_unclosed (struct evaluation *ev, const struct node *list, struct stated_part *parts,
                size_t n, const struct analysis *moved, struct gas_value *gas)
{
  size_t at, shifts = ev->shift_count;
  for (const struct node *part = list->items; part; part = part->next)
    if (part->rest) {
      return true;
    }
  if (shifts == 0 || moved->whole == WHOLE_NONE || !gas->closed) {
    return true;
  }
  double total = moles_in (moved);
  ev->shift_count = 0;
  const struct analysis *before = analysis_of (ev, list, parts, n, &at);
  ev->shift_count = shifts;
  if (before) {
    gas->closed = composition_unclosed (ev->arena, gas->closed, total / moles_in (before));
  }
  return before != NULL;
}

/* Where in a list the part that takes the rest stands; N: nowhere.  */
static size_t
rest_of (const struct node *list)
{
  size_t i = 0;
  const struct node *part = list->items;
  while (part && !part->rest) {
    part = part->next;
    i++;
  }
  return i;
}

/* By what share of its own the part at WHICH is uncertain; N parts: any of them, whichever moves
   most.  By first order, as the answer's uncertainty is found.                                  */
static double
part_uncertainty (struct evaluation *ev, const struct node *list, size_t n,
                  const struct analysis *analysis, size_t which)
{
  struct stated_part *parts = ARENA_ARRAY (ev->arena, n, struct stated_part);
  double squares = 0;
  for (size_t i = 0; i < ev->source_count; i++) {
    struct evaluation again;
    struct fault fault;
    struct shift shift = { ev->sources[i].what, 1 };
    size_t at;
    fault_init (&fault, ev->arena);
    evaluation_again (&again, ev, &fault);
    again.settings = ev->settings;
    again.shifts = &shift;
    again.shift_count = 1;
    const struct analysis *moved = analysis_of (&again, list, parts, n, &at);
    double largest = 0;
    for (size_t k = 0; moved && k < n && k < moved->count; k++)
      if (analysis->parts[k].amount > 0 && (k == which || which == n)) {
        largest = fmax (largest, fabs (moved->parts[k].amount / analysis->parts[k].amount - 1));
      }
    squares += largest * largest;
  }
  return sqrt (squares);
}

/* What takes the rest carries every other error: from this share of it on, that is said.  Own
   judgement, no source.                                                                         */
static const double WORTH_A_NOTE = 0.01;

static void
tell_closure (struct evaluation *ev, const struct node *list, size_t n,
              const struct analysis *analysis, const char *name)
{
  size_t rest = rest_of (list);
  bool closes = analysis->whole != WHOLE_NONE && analysis->count == n && n > 1
                && (rest < n || !ev->settings->parts_independent);
  if (!ev->describe || !ev->result || ev->source_count == 0 || !closes) {
    return;
  }
  double u = part_uncertainty (ev, list, n, analysis, rest);
  if (rest < n && u >= WORTH_A_NOTE) {
    note (ev, MESSAGE_NOTE_REST_UNCERTAIN, name, part_at (list, rest)->text,
          arena_format (ev->arena, "%s %%", rough_text (ev->arena, 100 * u)));
  } else if (u > 0) {
    note (ev, MESSAGE_NOTE_CLOSURE, name, NULL, NULL);
  }
}

bool
evaluate_list (struct evaluation *ev, const struct node *list, struct value *out)
{
  size_t n = 0, at = 0;
  for (const struct node *part = list->items; part; part = part->next) {
    n++;
  }
  struct stated_part *parts = ARENA_ARRAY (ev->arena, n, struct stated_part);
  const struct analysis *analysis = analysis_of (ev, list, parts, n, &at);
  if (!analysis) {
    return false;
  }
  struct gas_value named = { .name = ev->subject, .basis = list->unit, .list = list };
  record_list (ev, analysis, named.name);
  *out = value_number (UNSTATED);
  out->kind = VALUE_GAS;
  struct gas_value *gas = gas_of_analysis (ev, analysis, &named);
  if (!gas || (ev->settings->parts_independent
               && !leave_unclosed (ev, list, parts, n, analysis, gas))) {
    return false;
  }
  out->gas = gas;
  tell_closure (ev, list, n, analysis, named.name ? named.name : "the list");
  if (analysis->whole == WHOLE_MASS) {
    note (ev, MESSAGE_NOTE_BY_MASS, named.name ? named.name : "the list", NULL, NULL);
  }
  return true;
}
