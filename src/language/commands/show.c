#include "config.h"
#include "language/commands/commands.h"

#include <string.h>
#include "gas/air.h"
#include "gas/composition.h"
#include "gas/reference.h"
#include "gas/species.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"

/* The card of one of the user's names.  */
static bool
show_definition (struct session *session, const struct statement *s, struct definition *d,
                 struct result *result, struct fault *fault)
{
  if (!d->fresh && !definition_refresh (session, d, fault)) {
    fault->at = s->name_at;
    return false;
  }
  definition_tell (session, d, true, result);
  file_tell_changes (session, d, result);
  switch (d->kind) {
  case NAME_GAS:
    return card_of_gas (session, d->value.gas, d->name, result, fault);
  case NAME_STREAM:
    return card_of_stream (session, &d->value.stream, d->name, result, fault);
  case NAME_QUANTITY:
    return card_of_quantity (session, s, d, result, fault);
  case NAME_REFERENCE:
    card_of_state (session, d, result);
    return true;
  case NAME_SHEET:
    card_of_sheet (d, result);
    return true;
  case NAME_BALANCE:
    if (!s->text || !card_of_balance_part (d, s->text, result)) {
      card_of_balance (session, d, result);
    }
    return true;
  }
  return false;
}

static bool
show_air (struct session *session, struct result *result, struct fault *fault)
{
  struct gas_value air = { .name = "air", .closed = session->air, .scaled = 1 };
  return card_of_gas (session, &air, "air", result, fault);
}

static bool
unknown (struct session *session, const struct statement *s, struct fault *fault)
{
  struct evaluation ev;
  struct node name = { .kind = NODE_NAME, .text = s->name, .at = s->name_at };
  /* A word with two meanings, cfm or ton, says so itself.  */
  struct fault open;
  fault_init (&open, fault->arena);
  if (!unit_find (session->vocabulary.units, s->name, strlen (s->name), &open)
      && open.kind == MESSAGE_UNIT_OPEN) {
    return fault_set_at (fault, MESSAGE_UNIT_OPEN, s->name_at, open.fact[0], open.fact[1]);
  }
  evaluation_init (&ev, session, NULL, fault);
  (void) name_unknown (&ev, &name);
  if (strchr (s->name, '.') && fault->kind == MESSAGE_NAME_UNKNOWN) {
    fault_hint (fault, "of a file: show samples of \"%s\"", s->name);
  }
  return false;
}

bool
command_show (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  size_t n = s->name ? strlen (s->name) : 0;
  struct definition *d = s->name ? name_find (session, s->name, n) : NULL;
  const struct species *species = NULL;
  const struct reference *reference = NULL;
  const char *candidates = NULL;
  if (s->samples) {
    return command_samples (session, s, result, fault);
  }
  if (s->picture) {
    return d ? picture_of (session, s, d, result, fault) : unknown (session, s, fault);
  }
  if (s->text && (!d || d->kind != NAME_BALANCE)) {
    return d ? fault_set_at (fault, MESSAGE_KIND_WRONG, s->text_at,
                             "equations, matrix and detectability are those of a balance", NULL)
             : unknown (session, s, fault);
  }
  if (d) {
    return show_definition (session, s, d, result, fault);
  }
  if (s->has_property) {
    card_of_property (session, s->property, result);
    return true;
  }
  if (s->name && air_is_name (s->name, n)) {
    return show_air (session, result, fault);
  }
  enum species_match match = s->name ? species_find (session->vocabulary.species, s->name, n,
                                                     &species, &candidates) : SPECIES_NONE;
  if (match == SPECIES_KEY || match == SPECIES_SYNONYM
      || (match == SPECIES_PLAIN_FORMULA && !s->unit)) {
    card_of_species (session, species, result);
    return true;
  }
  if (s->unit) {
    return card_of_unit (session, s->unit, result, fault);
  }
  if (match == SPECIES_AMBIGUOUS) {
    fault_set_at (fault, MESSAGE_NAME_OPEN, s->name_at, s->name, candidates);
    fault->fact[2] = sum_way_on (fault->arena, s->name);
    return false;
  }
  switch (reference_find (session->references, s->name, n, &reference, &candidates)) {
  case REFERENCE_ONE:
    card_of_reference (session, reference, result);
    return true;
  case REFERENCE_AMBIGUOUS:
    return fault_set_at (fault, MESSAGE_NAME_OPEN, s->name_at, s->name, candidates);
  case REFERENCE_NONE:
    break;
  }
  return unknown (session, s, fault);
}
