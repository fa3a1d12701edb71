#include "config.h"
#include "language/commands/commands.h"

#include <string.h>
#include "language/balance/plant.h"
#include "language/balance/plant_record.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"

static bool
refuse (struct session *session, const struct statement *s, const struct definition *d,
        struct fault *fault)
{
  struct evaluation ev;
  struct node name = { .kind = NODE_NAME, .text = s->name, .at = s->name_at };
  evaluation_init (&ev, session, NULL, fault);
  if (d) {
    return fault_set_at (fault, MESSAGE_KIND_WRONG, s->name_at,
                         arena_format (fault->arena, "'%s' is no balance", s->name),
                         "a balance opens with balance NAME and closes with end");
  }
  return s->name ? name_unknown (&ev, &name)
                 : fault_set_at (fault, MESSAGE_KIND_WRONG, s->at, "there is no balance to solve",
                                 "a balance opens with balance NAME and closes with end");
}

/* The balance called NAME; without a name the one that was closed or solved last.  */
static struct definition *
find_balance (struct session *session, const struct statement *s)
{
  const char *name = s->name ? s->name : session->last_balance;
  struct definition *d = name ? name_find (session, name, strlen (name)) : NULL;
  for (size_t i = session->count; !d && !s->name && i-- > 0;) {
    d = session->order[i]->kind == NAME_BALANCE ? session->order[i] : NULL;
  }
  return d;
}

static bool
is_leant_on (struct session *session, struct arena *arena, const char *name)
{
  struct definition **leaning;
  return names_leaning (session, arena, name, &leaning) > 0;
}

/* A mixture that nobody stated may be a hazard: what comes out of a mix or a reaction.  */
static bool
is_new_gas (const struct plant *plant, size_t s)
{
  size_t from = plant->stream[s].from;
  return from != NO_BOUNDARY && (plant->boundary[from].line->kind == STATEMENT_MIX
                                 || plant->boundary[from].line->kind == STATEMENT_REACT);
}

/* A balance that has the stream NAME too and on which the balance PLANT leans: were NAME made of
   PLANT, each would lean on the other.  Null: there is none.                                    */
static const struct definition *
in_a_circle (struct session *session, struct arena *arena, const struct plant *plant,
             const char *name)
{
  struct definition *balance = name_find (session, plant->name, strlen (plant->name)), **leaning;
  const size_t n = balance && name_is_shared (session, name)
                     ? names_leaning (session, arena, name, &leaning) : 0;
  for (size_t i = 0; i < n; i++)
    if (leaning[i] != balance && leaning[i]->kind == NAME_BALANCE
        && definition_leans (session, balance, leaning[i]->name)) {
      return leaning[i];
    }
  return NULL;
}

/* The stream as a definition of its own, unless it is one already; taken away if it is no longer
   fixed and nobody leans on it.                                                                 */
static void
make_stream (struct session *session, struct evaluation *ev, const struct plant *plant, size_t s)
{
  const char *name = plant->stream[s].name;
  struct definition *before = name_find (session, name, strlen (name));
  struct fault unheard;
  struct value value;
  struct evaluation quiet;
  if (before && (!before->maker || strcmp (before->maker, plant->name) != 0)) {
    return;
  }
  fault_init (&unheard, ev->arena);
  evaluation_again (&quiet, ev, &unheard);
  bool fixed = plant_stream_value (&quiet, plant, name, &value);
  if (fixed && value.kind == VALUE_STREAM && is_new_gas (plant, s)) {
    caution_gas (session, ev->result, value.stream.gas, name);
  }
  const struct definition *other = fixed && !before
                                     ? in_a_circle (session, ev->arena, plant, name) : NULL;
  if (other) {
    struct remark *remark = result_remark (ev->result, MESSAGE_NOTE_STREAM_CIRCLE, name,
                                           plant->name);
    remark->fact[2] = other->name;
  } else if (fixed && !before) {
    struct definition *d = definition_made (name, plant->name,
                                            plant->whole ? NAME_QUANTITY : NAME_STREAM);
    size_t place = name_place (session, d->name, d, session->count);
    names_remember_mentions (session, d);
    undo_note (session, d->name, NULL, d, place, NULL);
    name_note_hidden (session, name, ev->result);
  } else if (!fixed && before && !is_leant_on (session, ev->arena, name)) {
    size_t place = name_place (session, name, NULL, 0);
    undo_note (session, before->name, before, NULL, place, NULL);
    definition_release (before);
  }
}

/* ---- What was taken ---- */

/* Unknowns up to which a balance is solved again to see what an alternative does to it.  */
enum { AGAIN_MOST = 5000 };

/* A balance, where its name was typed, and in what its flows are to be told.  */
struct solved { struct definition *balance; struct place at; const struct target *targets; };

/* The flows that are fixed, as they are told and by mass.  */
static void
flows_of (struct evaluation *ev, const struct plant *plant, struct figures *figures)
{
  const char *unit;
  const double per = plant_unit (ev, plant, &unit);
  figures->room = 2 * plant->stream_count;
  figures->at = ARENA_ARRAY (ev->arena, figures->room, struct figure);
  for (size_t s = 0; s < plant->stream_count; s++) {
    if (!plant_is_fixed (plant, s)) {
      continue;
    }
    figures->at[figures->count++].value = per * plant_total (plant, s);
    if (!plant->whole) {
      figures->at[figures->count++].value = plant_mass (plant, s);
    }
  }
}

static bool
solve_again (struct evaluation *again, const void *with, struct figures *figures)
{
  const struct solved *solved = with;
  const struct value *value = definition_value (again, solved->balance, solved->at);
  if (!value || !value->plant->solution) {
    return false;
  }
  flows_of (again, value->plant, figures);
  return plant_flows_told (again, value->plant, solved->targets, figures);
}

static void
tell_taken (struct evaluation *ev, const struct plant *plant, const struct solved *solved)
{
  struct figures figures = { NULL, 0, 0 };
  if (network_columns (&plant->network) <= AGAIN_MOST
      && plant->solution->status != BALANCE_CONTRADICTORY) {
    flows_of (ev, plant, &figures);
    if (!plant_flows_told (ev, plant, solved->targets, &figures)) {
      figures.count = 0;
    }
  }
  if (figures.count > 0) {
    retold_taken (ev, &(struct retold) { solve_again, solved }, &figures);
    return;
  }
  for (size_t i = 0; i < ev->assumption_count; i++) {
    const struct assumption *a = &ev->assumptions[i];
    struct remark *remark = result_remark (ev->result, a->kind, a->fact[0], a->fact[1]);
    remark->fact[2] = a->fact[2];
    remark->fact[3] = a->fact[3];
  }
}

bool
command_solve (struct session *session, const struct statement *s, struct result *result,
               struct fault *fault)
{
  struct definition *d = find_balance (session, s);
  struct evaluation ev;
  if (!d || d->kind != NAME_BALANCE) {
    return refuse (session, s, d, fault);
  }
  evaluation_init (&ev, session, result, fault);
  const struct value *value = definition_value (&ev, d, s->name ? s->name_at : s->at);
  if (!value) {
    return false;
  }
  const struct plant *plant = value->plant;
  if (!(result->balance = plant_verdict (&ev, plant, s->targets))) {
    fault_place (fault, s->name ? s->name_at : s->at);
    return false;
  }
  undo_group_open (session);
  for (size_t i = 0; i < plant->stream_count; i++) {
    make_stream (session, &ev, plant, i);
  }
  undo_group_close (session);
  balance_remember (session, d->name);
  tell_taken (&ev, plant, &(struct solved) { d, s->name ? s->name_at : s->at, s->targets });
  for (size_t i = 0; i < ev.used_count; i++) {
    definition_tell (session, ev.used[i], false, result);
  }
  plant_record (&ev, s, plant, result);
  return true;
}
