#include "config.h"
#include "language/commands/commands.h"

#include <string.h>
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"

bool
command_define (struct session *session, const struct statement *s, struct result *result,
                struct fault *fault)
{
  enum name_kind kind = s->kind == STATEMENT_GAS ? NAME_GAS
                        : s->kind == STATEMENT_STREAM ? NAME_STREAM
                        : s->kind == STATEMENT_LET ? NAME_QUANTITY : NAME_REFERENCE;
  return name_define (session, s, s->source, kind, result, fault);
}

/* The formula of a definition: what stands behind its `=`.  */
static const char *
formula_of (const struct definition *d)
{
  const char *equals = strchr (d->source, '=');
  return equals ? equals + 1 + strspn (equals + 1, " ") : "";
}

/* `normalise lab into N2` is `gas lab = (its formula) normalised into N2`, of a gas from a file
   its statement with these words behind it.                                                     */
bool
command_normalise (struct session *session, const struct statement *s, struct result *result,
                   struct fault *fault)
{
  struct definition *d = name_find (session, s->name, strlen (s->name));
  if (!d || d->kind != NAME_GAS) {
    struct node name = { .kind = NODE_NAME, .text = s->name, .at = s->name_at };
    struct evaluation ev;
    evaluation_init (&ev, session, NULL, fault);
    return d ? fault_set_at (fault, MESSAGE_KIND_WRONG, s->name_at,
                             "only a gas can be normalised", NULL)
             : name_unknown (&ev, &name);
  }
  const struct node *into = s->value->b;
  bool list = d->statement->value && d->statement->value->kind == NODE_LIST;
  const char *before = d->statement->from_file
                         ? d->source
                         : arena_format (result->arena, "gas %s = %s%s%s",
                                         name_text (result->arena, s->name), list ? "(" : "",
                                         formula_of (d), list ? ")" : "");
  const char *source = arena_format (result->arena, "%s normalised%s%s", before,
                                     into ? " into " : "",
                                     into ? name_text (result->arena, into->text) : "");
  return name_define (session, s, source, NAME_GAS, result, fault);
}

bool
command_forget (struct session *session, const struct statement *s, struct result *result,
                struct fault *fault)
{
  (void) result;
  return name_forget (session, s->names, fault);
}

bool
command_undo (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  if (session_block (session) != BLOCK_NONE) {
    block_undo (session, result);
    return true;
  }
  if (session->groups_open > 0) {
    fault_set_at (fault, MESSAGE_UNDO_EMPTY, s->at, NULL, NULL);
    fault_hint (fault, "a file that is opened is one change: 'undo' behind 'open' takes it back");
    return false;
  }
  if (undo_last (session, result, fault)) {
    return true;
  }
  fault_place (fault, s->at);
  return false;
}
