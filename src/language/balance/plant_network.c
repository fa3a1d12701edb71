/* Columns and rows: what was read, as numbers.  */
#include "config.h"
#include "language/balance/plant_private.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "support/arena.h"

size_t
plant_column (const struct plant *plant, size_t stream, size_t component)
{
  return stream * plant->network.components + component;
}

static size_t
component_of (const struct plant *plant, const struct species *species)
{
  size_t c = 0;
  while (c < plant->component_count && plant->component[c] != species) {
    c++;
  }
  return c;
}

/* ---- What the streams can hold ---- */

static bool
components_hold (struct reader_state *r, size_t told)
{
  struct plant *plant = r->plant;
  plant->component = r->species;
  plant->component_count = r->species_count;
  plant->components_told = r->species_told;
  if (r->species_told && r->species_count > told) {
    return fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, r->line->at,
                         arena_format (r->ev->arena, "%s is not among the components of the "
                                       "balance", r->species[told]->key),
                         "components names all that the streams can hold");
  }
  if (r->has_gas || r->species_count > 0) {
    return r->species_count > 0
           || fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, r->line->at,
                            "the balance speaks of components and names none",
                            "components CH4, CO2");
  }
  plant->whole = true;
  plant->by_mass = r->counts_mass;
  if (r->counts_mass && r->counts_moles) {
    return fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, r->line->at,
                         "flows by mass and flows by amount, and no composition to bring them "
                         "together", "known composition of NAME = GAS, or components CH4, CO2");
  }
  return true;
}

static const bool *
possible_parts (struct reader_state *r)
{
  const struct plant *plant = r->plant;
  size_t n = plant->network.components;
  bool *possible = ARENA_ARRAY (r->ev->arena, plant->stream_count * n, bool);
  memset (possible, 1, plant->stream_count * n * sizeof *possible);
  for (size_t i = 0; i < r->absent_count; i++) {
    possible[plant_column (plant, r->absent[i].stream, component_of (plant, r->absent[i].species))]
      = false;
  }
  for (size_t i = 0; i < r->raw_count; i++) {
    const struct raw_fact *raw = &r->raw[i];
    const struct composition *gas = raw->gas ? raw->gas : raw->part_of_gas;
    for (size_t c = 0; gas && c < n; c++) {
      size_t stream = raw->gas ? raw->stream : raw->left.at[0].stream;
      possible[plant_column (plant, stream, c)] &= composition_fraction (gas, plant->component[c])
                                                   > 0;
    }
  }
  return possible;
}

/* ---- Boundaries ---- */

static const size_t *
side_of (struct reader_state *r, const struct node *names, size_t *count)
{
  *count = 0;
  for (const struct node *name = names; name; name = name->next) {
    ++*count;
  }
  size_t *streams = ARENA_ARRAY (r->ev->arena, *count, size_t), i = 0;
  for (const struct node *name = names; name; name = name->next) {
    streams[i++] = plant_find (r->plant, name->text);
  }
  return streams;
}

static const struct reaction *
reactions_of (struct reader_state *r, const struct statement *line, size_t *count)
{
  *count = 0;
  for (const struct node *one = line->reactions; one; one = one->next) {
    ++*count;
  }
  struct reaction *reactions = ARENA_ARRAY (r->ev->arena, *count, struct reaction);
  size_t k = 0;
  for (const struct node *one = line->reactions; one; one = one->next) {
    double *nu = ARENA_ARRAY (r->ev->arena, r->plant->network.components, double);
    for (const struct node *part = one->items; part; part = part->next) {
      struct species_set set;
      if (species_named (r->ev, part, &set)) {
        nu[component_of (r->plant, set.at[0])] += part->number;
      }
    }
    reactions[k++].nu = nu;
  }
  return reactions;
}

static const struct boundary *
boundaries_of (struct reader_state *r)
{
  struct plant *plant = r->plant;
  struct boundary *boundary = ARENA_ARRAY (r->ev->arena, plant->boundary_count, struct boundary);
  for (size_t b = 0; b < plant->boundary_count; b++) {
    const struct statement *line = plant->boundary[b].line;
    struct boundary *one = &boundary[b];
    one->kind = line->kind == STATEMENT_MIX ? BOUNDARY_MIX
                : line->kind == STATEMENT_SPLIT ? BOUNDARY_SPLIT
                : line->kind == STATEMENT_REACT ? BOUNDARY_REACT : BOUNDARY_SEPARATE;
    one->inlets = side_of (r, line->inlets, &one->inlet_count);
    one->outlets = side_of (r, line->outlets, &one->outlet_count);
    one->reactions = reactions_of (r, line, &one->reaction_count);
  }
  return boundary;
}

/* ---- Rows ---- */

/* A sparse sum while it is put together: each column once.  */
struct gathering_form { double *sum; size_t *at; bool *met; size_t count; };

static void
add_term (struct gathering_form *form, size_t column, double coefficient)
{
  if (!form->met[column]) {
    form->met[column] = true;
    form->sum[column] = 0;
    form->at[form->count++] = column;
  }
  form->sum[column] += coefficient;
}

/* What one mole of a component counts.  */
static bool
coefficient (struct reader_state *r, const struct counting *count, size_t c, double *k)
{
  const struct species *species = r->plant->component[c];
  *k = 1;
  if (count->dry && species == r->ev->session->water) {
    *k = 0;
  } else if (count->basis == FLOW_MASS) {
    *k = species->molar_mass;
  } else if (count->basis == FLOW_ENERGY) {
    return heat_per_mole (r->ev, composition_pure (r->ev->arena, species), count->net, k);
  }
  return true;
}

static bool
add_item_terms (struct reader_state *r, const struct item *item, const struct counting *count,
                struct gathering_form *form)
{
  const struct plant *plant = r->plant;
  if (item->stream == NO_STREAM) {
    add_term (form, network_extent (&plant->network, item->boundary) + item->reaction,
              item->times);
    return true;
  }
  if (plant->whole) {
    add_term (form, item->stream, item->times);
    return true;
  }
  for (size_t c = 0; c < plant->component_count; c++) {
    size_t column = plant_column (plant, item->stream, c);
    double k;
    if (item->species && item->species != plant->component[c]) {
      continue;
    }
    if (!coefficient (r, count, c, &k)) {
      return false;
    }
    if (fabs (k) > 0) {
      add_term (form, column, k * item->times);
    }
  }
  return true;
}

static bool
form_of (struct reader_state *r, const struct items *items, const struct counting *count,
         struct gathering_form *work, struct form *out)
{
  work->count = 0;
  for (size_t i = 0; i < items->count; i++)
    if (!add_item_terms (r, &items->at[i], count, work)) {
      return false;
    }
  struct term *terms = ARENA_ARRAY (r->ev->arena, work->count, struct term);
  for (size_t i = 0; i < work->count; i++) {
    terms[i] = (struct term) { work->at[i], work->sum[work->at[i]] };
    work->met[work->at[i]] = false;
  }
  *out = (struct form) { work->count, terms };
  return true;
}

/* Does it tie several streams?  */
static bool
ties_streams (const struct raw_fact *raw)
{
  size_t first = NO_STREAM;
  bool ties = false;
  const struct items *sides[2] = { &raw->left, &raw->right };
  for (int side = 0; side < 2; side++)
    for (size_t i = 0; i < sides[side]->count; i++) {
      size_t stream = sides[side]->at[i].stream;
      ties = ties || (first != NO_STREAM && stream != first);
      first = stream;
    }
  return ties;
}

static void
composition_of (struct reader_state *r, const struct raw_fact *raw, struct fact *fact)
{
  struct arena *arena = r->ev->arena;
  size_t n = r->plant->component_count;
  double *x = ARENA_ARRAY (arena, n, double), *u = ARENA_ARRAY (arena, n, double);
  double *rounding = ARENA_ARRAY (arena, n, double);
  for (size_t c = 0; c < n; c++) {
    u[c] = UNSTATED;
  }
  for (size_t i = 0; i < raw->gas->count; i++) {
    size_t c = component_of (r->plant, raw->gas->species[i]);
    x[c] = raw->gas->fraction[i];
    u[c] = raw->gas_u[i];
    rounding[c] = raw->gas_rounding[i];
  }
  fact->stream = raw->stream;
  fact->fractions = x;
  fact->fractions_u = u;
  fact->fractions_rounding = rounding;
}

static bool
mass_is_known (struct reader_state *r, const struct raw_fact *raw)
{
  bool mass = raw->by_mass && r->plant->whole && !r->plant->by_mass && raw->kind != FACT_SHARE;
  return !mass || fault_set_at (r->ev->fault, MESSAGE_UNIT_MISMATCH, r->line->at,
                                "a ratio by mass of flows by amount needs their compositions",
                                "known composition of NAME = GAS");
}

/* A component said to be there where another line says that it cannot be.  */
static bool
says_impossible (const struct plant *plant, const struct raw_fact *raw, const struct fact *fact)
{
  size_t flows = plant->stream_count * plant->network.components;
  for (size_t i = 0; i < fact->left.count; i++) {
    size_t column = fact->left.terms[i].column;
    if (column >= flows || plant->network.possible[column]) {
      return false;
    }
  }
  return raw->kind != FACT_COMPOSITION && raw->kind != FACT_SHARE
         && raw->left.count > 0 && raw->left.at[0].species && fabs (raw->value) > 0;
}

/* What a line says cannot be in a stream is a fact too, that may be at fault in a clash.  */
static void
absences_of (struct reader_state *r, struct fact facts[])
{
  struct plant *plant = r->plant;
  for (size_t i = 0; i < r->absent_count; i++) {
    const struct absence *absence = &r->absent[i];
    struct term *term = ARENA_NEW (r->ev->arena, struct term);
    *term = (struct term) { plant_column (plant, absence->stream,
                                          component_of (plant, absence->species)), 1 };
    facts[r->raw_count + i] = (struct fact) { .kind = FACT_FORM, .left = { 1, term },
                                              .u = UNSTATED, .weight = 1, .absence = true };
    struct plant_fact *about = &plant->fact[r->raw_count + i];
    *about = absence->about;
    about->per = 3.6;
    about->unit = "kmol/h";
    about->stream = absence->stream;
  }
}

/* By column: the fact that says a stream cannot hold it, so that it might without.  What is
   measured is never without.                                                                    */
static const size_t *
denied_by (struct reader_state *r, const struct fact facts[])
{
  const struct plant *plant = r->plant;
  size_t n = plant->network.components, flows = plant->stream_count * n;
  size_t *denied = ARENA_ARRAY (r->ev->arena, flows + 1, size_t);
  for (size_t j = 0; j < flows; j++) {
    denied[j] = (size_t) -1;
  }
  for (size_t i = 0; i < r->raw_count; i++) {
    const struct raw_fact *raw = &r->raw[i];
    bool measured = facts[i].u > 0;
    for (size_t c = 0; raw->gas && c < n; c++) {
      measured = measured || facts[i].fractions_u[c] > 0;
    }
    for (size_t c = 0; raw->gas && !measured && c < n; c++) {
      if (!(facts[i].fractions[c] > 0)) {
        denied[plant_column (plant, raw->stream, c)] = i;
      }
    }
  }
  for (size_t i = 0; i < r->absent_count; i++) {
    size_t column = facts[r->raw_count + i].left.terms[0].column;
    denied[column] = denied[column] == (size_t) -1 ? r->raw_count + i : denied[column];
  }
  return denied;
}

static bool
facts_of (struct reader_state *r, const struct plant *base)
{
  struct plant *plant = r->plant;
  struct arena *arena = r->ev->arena;
  size_t columns = network_columns (&plant->network);
  size_t count = r->raw_count + r->absent_count;
  struct fact *facts = ARENA_ARRAY (arena, count, struct fact);
  struct gathering_form work = { ARENA_ARRAY (arena, columns, double),
                                 ARENA_ARRAY (arena, columns, size_t),
                                 ARENA_ARRAY (arena, columns, bool), 0 };
  plant->fact = ARENA_ARRAY (arena, count, struct plant_fact);
  base = base && base->fact_count == count
         && base->network.components == plant->network.components ? base : NULL;
  for (size_t i = 0; i < r->raw_count; i++) {
    const struct raw_fact *raw = &r->raw[i];
    struct fact *fact = &facts[i];
    *fact = (struct fact) { .kind = raw->kind, .value = raw->value, .u = raw->u,
                            .rounding = raw->rounding, .stream = raw->stream, .of = raw->of,
                            .weight = 1, .relation = ties_streams (raw) };
    plant->fact[i] = raw->about;
    if (!mass_is_known (r, raw)) {
      return false;
    }
    if (raw->kind == FACT_COMPOSITION) {
      composition_of (r, raw, fact);
    } else if (!form_of (r, &raw->left, &raw->count_left, &work, &fact->left)
               || !form_of (r, &raw->right, &raw->count_right, &work, &fact->right)) {
      return false;
    }
    if (says_impossible (plant, raw, fact)) {
      fault_set_at (r->ev->fault, MESSAGE_KIND_WRONG, r->line->at,
                    arena_format (arena, "%s: the stream cannot hold it", raw->about.words),
                    "its composition, or an absent line, says so");
      return false;
    }
    if (base) {
      fact->u = base->network.fact[i].u;
      fact->fractions_u = base->network.fact[i].fractions_u;
    }
    if (raw->taken_by_amount && !plant->whole) {
      evaluation_assume (r->ev, &(struct assumption) { .kind = MESSAGE_TAKEN_BY_AMOUNT,
                                                       .fact = { raw->about.text } });
    }
  }
  absences_of (r, facts);
  plant->network.fact = facts;
  plant->network.facts = plant->fact_count = count;
  plant->network.denied = denied_by (r, facts);
  return true;
}

bool
plant_network (struct reader_state *r, size_t told, const struct plant *base)
{
  struct plant *plant = r->plant;
  struct arena *arena = r->ev->arena;
  if (!components_hold (r, told)) {
    return false;
  }
  size_t n = plant->whole ? 1 : plant->component_count;
  double *mass = ARENA_ARRAY (arena, n, double);
  for (size_t c = 0; c < n && !plant->whole; c++) {
    mass[c] = plant->component[c]->molar_mass;
  }
  plant->network = (struct network) {
    .components = n, .streams = plant->stream_count, .boundaries = plant->boundary_count,
    .molar_mass = plant->whole ? NULL : mass,
    .water = plant->whole ? n : component_of (plant, r->ev->session->water)
  };
  plant->network.possible = possible_parts (r);
  plant->network.boundary = boundaries_of (r);
  return facts_of (r, base);
}
