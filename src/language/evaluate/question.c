#include "config.h"
#include "language/session_private.h"

#include <string.h>
#include "language/evaluate/wording.h"
#include "support/arena.h"

/* What an expression is called in an answer: "raw" for 850 Nm3/h of raw.  */
static const char *
subject_text (const struct evaluation *ev, const struct statement *s, const struct node *node)
{
  struct arena *arena = ev->arena;
  for (;;) {
    if (node->kind == NODE_AT || node->kind == NODE_WITHIN) {
      node = node->a;
    } else if (node->kind == NODE_OF && node->a->kind == NODE_QUANTITY) {
      node = node->b;
    } else if (node->kind == NODE_THAT && ev->session->last_subject) {
      return arena_string (arena, ev->session->last_subject);
    } else {
      return node_text (arena, s, node);
    }
  }
}

bool
question_figures (struct evaluation *ev, const struct statement *s, struct value *value,
                  struct figures *figures)
{
  if (!evaluate (ev, s->value, NULL, value)) {
    fault_place (ev->fault, s->value->at);
    return false;
  }
  struct subject subject = { ev->describe ? subject_text (ev, s, s->value) : "", s->value->at };
  const struct target *target = s->targets;
  do {
    if (!convert_value (ev, value, target, &subject, figures)) {
      fault_place (ev->fault, target ? target->at : s->value->at);
      return false;
    }
    target = target ? target->next : NULL;
  } while (target);
  return true;
}

bool
question_again (struct evaluation *again, const struct statement *s, struct figures *figures)
{
  struct value value;
  return question_figures (again, s, &value, figures);
}
